"""P(report | prediction): one vector over the hypotheses for every outcome of every test and every answer.

A hypothesis is a point of the predictions together with one state of the devices that watch (working or not, with or without
grounded-neutral detection). What a sensor or meter shows comes from the solve; timing, looks and history have stated
probabilities. Reports are wrong now and then, so nothing is ever impossible.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field

from strayline import contexts, devices
from strayline.catalogue.causes import CAUSE
from strayline.catalogue.questions import QUESTION
from strayline.catalogue.tests import STATED, TEST, Test
from strayline.posterior import Hypotheses, hypotheses_of
from strayline.predict import ROLES, Outlook, Point, Predictions, Watch, cause_weights

WRONG = 0.05  # share of answers that are wrong (method: assuming less costs far more than assuming this)
WRONG_FACT = 0.03  # the same for a plain fact the person can see
DEAD_SHARE = 0.03  # devices that no longer open
UNEXPLAINED = 0.1  # a state that trips less often than this hardly explains a trip that did happen
SPREAD = 0.5  # natural-log spread of a predicted reading: the grid's half step and unit-to-unit differences
CLAMP_OFFSET_MA = 0.8  # clamp meters: 5 % and 0.8 mA; limits are taken as two spreads
MINUTES_HELD = {"as_found": 30.0, "one_load": 10.0, "light_load": 15.0, "test_load": 5.0}  # how long a state is held; else 1
LOOP_MATTERS_S = 1e-3  # a loop of more than 1000 ohm trips no grounded-neutral detector

# What a person answers when a latent has this value, where it is not the value itself: a boat next door may be quiet.
LOOKS_LIKE = {"running": {"yes": 1.0}, "quiet": {"yes": 0.4, "no": 0.6}}

# Bin edges of number tests, in the unit of the test; the first and last bins are open.
EDGES: dict[str, tuple[float, ...]] = {
    "mA": (0.5, 2.0, 6.0, 15.0, 30.0, 100.0, 1000.0),
    "ohm": (0.5, 5.0, 100.0, 2000.0, 25000.0, 1e6),
    "Mohm": (0.004, 0.02, 0.1, 0.5, 1.0, 10.0),
}
LIMITS: dict[str, tuple[float, float]] = {"mA": (0.0, 100000.0), "ohm": (0.0, 1e9), "Mohm": (0.0, 1e6)}
PER_UNIT = {"mA": 1e3, "ohm": 1.0, "Mohm": 1e-6}
FLOOR_READING = {"mA": 0.5, "ohm": 0.02, "Mohm": 1e-4}  # what the instrument does not tell from zero


DEAD, WORKS, DETECTS = 0, 1, 2


@dataclass(frozen=True, slots=True)
class DeviceState:
    """What the pedestal's and the boat's devices are (DEAD or absent, WORKS, or also DETECTS a grounded neutral); `share` of the prior."""

    pedestal: int
    aboard: int
    share: float


ABSENT = {"pedestal": 0.15, "aboard": 0.5}  # share of docks and boats without a device where nobody says


def device_states(watched: Sequence[Watch], facts: Mapping[str, str]) -> tuple[DeviceState, ...]:
    """Every state of the devices in this installation, with its share; shares sum to one."""
    kinds = {watch.role: watch.device for watch in watched}
    shares = {}
    for role in ("pedestal", "aboard"):
        device = devices.DEVICES[kinds.get(role, "none")]
        unknown = facts.get(f"{role}_device", "unknown") == "unknown"
        missing = 1.0 if device.id == "none" else ABSENT[role] if unknown else DEAD_SHARE
        works = 1 - missing
        shares[role] = {DEAD: missing, WORKS: works * (1 - device.grounded_neutral), DETECTS: works * device.grounded_neutral}
    return tuple(
        DeviceState(pedestal, aboard, one * other)
        for pedestal, one in shares["pedestal"].items()
        for aboard, other in shares["aboard"].items()
        if one * other > 0
    )


@dataclass(slots=True)
class Evidence:
    """The hypotheses of one or more installations, and the likelihood vectors of every outcome, worked out when first asked for."""

    predicted: tuple[Predictions, ...]
    hypotheses: Hypotheses
    members: tuple[tuple[int, int, DeviceState], ...]  # installation, point, devices: one row per hypothesis
    states: tuple[tuple[DeviceState, ...], ...]  # per installation, in the order of its rows
    _cache: dict[tuple[str, str], dict[str, tuple[float, ...]] | None] = field(default_factory=dict)
    _hypotheses: dict[tuple[tuple[str, float], ...], Hypotheses] = field(default_factory=dict)
    _latents: dict[tuple[str, str], tuple[bool, ...]] = field(default_factory=dict)
    _readings: dict[tuple[str, str], tuple[float, ...]] = field(default_factory=dict)
    _openings: dict[tuple[int, str], list[tuple[float, float, float]] | None] = field(default_factory=dict)

    def outcomes(self, kind: str, name: str) -> dict[str, tuple[float, ...]] | None:
        """Per outcome P(outcome | hypothesis) of a test ("test") or a question ("question"); None where it cannot be done here."""
        key = (kind, name)
        if key not in self._cache:
            self._cache[key] = _test_outcomes(self, TEST[name]) if kind == "test" else _question_outcomes(self, name)
        return self._cache[key]

    def reading(self, test: Test, value: float) -> tuple[float, ...]:
        """P(a reading near `value`, in the test's unit | hypothesis)."""
        predicted = _predicted_readings(self, test)
        near: dict[float, float] = {}
        for expected in predicted:
            if expected not in near:
                near[expected] = (1 - WRONG) * _mass(expected, *_window(value, test.unit), test.unit) + WRONG * 0.04
        return tuple(near[expected] for expected in predicted)

    def reweighted(self, factors: tuple[tuple[str, float], ...]) -> Hypotheses:
        """The hypotheses with the prior of some causes multiplied: (cause, factor) pairs."""
        if factors not in self._hypotheses:
            known, factor = self.hypotheses, dict(factors)
            names = [known.causes[cause] for cause in known.cause_of]
            weights = [prior * factor.get(name, 1.0) for prior, name in zip(known.prior, names, strict=True)]
            self._hypotheses[factors] = hypotheses_of(names, weights)
        return self._hypotheses[factors]

    def having(self, name: str, value: str) -> tuple[bool, ...]:
        """For every hypothesis whether the unknown fact `name` has this value in it."""
        key = (name, value)
        if key not in self._latents:
            self._latents[key] = tuple(
                any(latent.name == name and latent.value == value for latent in self.point(index).latents) for index in range(len(self.members))
            )
        return self._latents[key]

    def readings(self, context: str, name: str) -> tuple[float, ...]:
        """For every hypothesis a named reading (A, V or ohm) in a context, the highest over its single states.

        0 where it has none; empty where the context cannot be made.
        """
        key = (context, name)
        if key not in self._readings:
            self._readings[key] = tuple(_highest(self, context, name))
        return self._readings[key]

    def point(self, index: int) -> Point:
        where, point, _ = self.members[index]
        return self.predicted[where].points[point]


def evidence(predicted: Sequence[tuple[Predictions, float]], facts: Mapping[str, str]) -> Evidence:
    """All hypotheses over the possible installations (each with its share), causes, severities, latents and device states."""
    names: list[str] = []
    weights: list[float] = []
    members = []
    states_of = []
    for where, (one, share) in enumerate(predicted):
        weight = cause_weights(one)
        found = one.outlooks(contexts.AS_FOUND)
        states = device_states(found[0] if found else (), facts)
        states_of.append(states)
        for number, point in enumerate(one.points):
            for state in states:
                names.append(point.cause)
                weights.append(share * weight[point.cause] * point.share * state.share)
                members.append((where, number, state))
    return Evidence(tuple(one for one, _ in predicted), hypotheses_of(names, weights), tuple(members), tuple(states_of))


# --- what devices do -----------------------------------------------------------------------------------------------

# Per role the probability of opening when the device is dead, when it works, and when it also detects a grounded neutral.
RoleChances = tuple[tuple[float, float, float], tuple[float, float, float], tuple[float, float, float]]


def _role_chances(watched: tuple[Watch, ...], outlook: Outlook, point: Point, context: str) -> RoleChances:
    """What feeder, pedestal and aboard devices do with one outlook, each dead, plain and detecting."""
    minutes = MINUTES_HELD.get(context.partition(":")[0], 1.0)
    held = {role: [1.0, 1.0, 1.0] for role in ROLES}
    for place, watch in enumerate(watched):
        row = held[watch.role]
        residual, loop = outlook.residual_a[place], outlook.loop_s[place]
        touchy = point.fault.cause == "touchy_device" and point.fault.at == watch.id
        if touchy:
            residual /= point.fault.scale
        calm = 1 - point.fault.spontaneous if touchy else 1.0
        device, band = devices.DEVICES[watch.device], (watch.non_operating_ma, watch.operating_ma)
        plain = _trip(device, residual, 0.0, band)
        row[0] *= 1 - devices.FLOOR
        row[1] *= (1 - plain) * calm
        row[2] *= (1 - (_trip(device, residual, loop, band) if loop > LOOP_MATTERS_S else plain)) * calm
        if watch.rated_a:
            cool = 1 - devices.overcurrent_probability(watch.rated_a, outlook.line_a[place], minutes)
            held[watch.role] = [value * cool for value in row]
    return tuple((1 - row[0], 1 - row[1], 1 - row[2]) for row in (held[role] for role in ROLES))  # type: ignore[return-value]


def _trip(device: devices.Device, residual_a: float, loop_s: float, band: tuple[float | None, float | None]) -> float:
    return devices.trip_probability(
        device, residual_a, window_siemens=loop_s, grounded_neutral=loop_s > 0, non_operating_ma=band[0], operating_ma=band[1]
    )


def _openings(found: Evidence, where: int, context: str) -> list[tuple[float, float, float]] | None:
    """For every hypothesis of one installation the probabilities that feeder, pedestal and aboard devices open in a context."""
    key = (where, context)
    if key not in found._openings:
        made = found.predicted[where].outlooks(context)
        if made is None:
            found._openings[key] = None
        else:
            watched, outlooks = made
            seen: dict[tuple[int, bool], RoleChances] = {}
            rows = []
            for outlook, point in zip(outlooks, found.predicted[where].points, strict=True):
                mark = (id(outlook), point.cause == "touchy_device")
                if mark[1] or mark not in seen:
                    seen[mark] = _role_chances(watched, outlook, point, context)
                feeder, pedestal, aboard = seen[mark]
                rows += [(feeder[1], pedestal[state.pedestal], aboard[state.aboard]) for state in found.states[where]]
            found._openings[key] = rows
    return found._openings[key]


def opening(found: Evidence, context: str) -> list[tuple[float, float, float]] | None:
    """For every hypothesis the probabilities that feeder, pedestal and aboard devices open; None where the context cannot be made."""
    rows: list[tuple[float, float, float]] = []
    for where in range(len(found.predicted)):
        part = _openings(found, where, context)
        if part is None:
            return None
        rows += part
    return rows


def trips(found: Evidence, context: str) -> list[float] | None:
    """For every hypothesis the probability that anything opens in a context."""
    rows = opening(found, context)
    return None if rows is None else _any_opens(rows)


def _any_opens(rows: Sequence[tuple[float, float, float]]) -> list[float]:
    return [1 - (1 - feeder) * (1 - pedestal) * (1 - aboard) for feeder, pedestal, aboard in rows]


def one_load_trips(found: Evidence) -> list[tuple[float, float]] | None:
    """For every hypothesis the least and greatest probability of a trip over the own loads, each running alone."""
    rows: list[tuple[float, float]] = []
    for where, one in enumerate(found.predicted):
        columns = []
        for context in contexts.expand("one_load", one.installation):
            part = _openings(found, where, context)
            if part is not None:
                columns.append(_any_opens(part))
        if not columns:
            return None
        rows += [(min(column), max(column)) for column in zip(*columns, strict=True)]
    return rows


# --- tests ---------------------------------------------------------------------------------------------------------


def _reported(columns: Mapping[str, Sequence[float]], wrong: float = WRONG) -> dict[str, tuple[float, ...]]:
    """True outcomes -> reported ones: now and then any other answer is given."""
    share = wrong / len(columns)
    return {outcome: tuple((1 - wrong) * value + share for value in column) for outcome, column in columns.items()}


def _test_outcomes(found: Evidence, test: Test) -> dict[str, tuple[float, ...]] | None:
    if test.id == "test_button":
        opens = [1.0 if state.pedestal != DEAD else 0.0 for _, _, state in found.members]
        return _reported({"opens": opens, "stays": [1 - value for value in opens]})
    if test.model == "stated":
        table = STATED[test.id]
        rows = [table.get(found.point(index).cause, table[""]) for index in range(len(found.members))]
        return {outcome: tuple(row[place] for row in rows) for place, outcome in enumerate(test.outcomes)}
    if test.model == "trips":
        chance = trips(found, test.context)
        return None if chance is None else _reported({"holds": [1 - value for value in chance], "trips": chance})
    if test.model == "loads":
        return _load_outcomes(found)
    if test.model == "continuity":
        return _continuity_outcomes(found)
    return _number_outcomes(found, test)


def _load_outcomes(found: Evidence) -> dict[str, tuple[float, ...]] | None:
    """One load at a time. One device decides them all, so its threshold is shared: the outcomes nest instead of multiplying."""
    rows = one_load_trips(found)
    if rows is None:
        return None
    holds, one, every = [1 - high for _, high in rows], [high - low for low, high in rows], [low for low, _ in rows]
    return _reported({"holds_all": holds, "one_trips": one, "any_trips": every})


def _highest(found: Evidence, context: str, name: str) -> list[float]:
    values: list[float] = []
    for where, one in enumerate(found.predicted):
        made = [outlooks for state in contexts.expand(context, one.installation) if (outlooks := one.outlooks(state))]
        if not made:
            return []
        tops = [max(outlook.readings.get(name, 0.0) for outlook in row) for row in zip(*(outlooks for _, outlooks in made), strict=True)]
        values += [tops[number] for place, number, _ in found.members if place == where]
    return values


def _outlook_rows(found: Evidence, context: str) -> list[Outlook] | None:
    made = [one.outlooks(context) for one in found.predicted]
    if any(one is None for one in made):
        return None
    return [made[where][1][number] for where, number, _ in found.members]  # type: ignore[index]


def _continuity_outcomes(found: Evidence) -> dict[str, tuple[float, ...]] | None:
    rows = _outlook_rows(found, "cord_in_hand")
    if rows is None:
        return None
    seen = []
    for row in rows:
        ohms = row.readings
        if not ohms:
            return None
        crossed = ohms["neutral_to_ground"] < 1.0 <= ohms["neutral_through"]
        seen.append("exchanged" if crossed else "ground_open" if ohms["ground_through"] > 10.0 else "fine")
    return _reported({outcome: [float(value == outcome) for value in seen] for outcome in TEST["adapter_continuity"].outcomes})


READING_NAMES = {"neutral_ground_ohm": "meter_ohm", "insulation_ohm": "meter_ohm"}


def _predicted_readings(found: Evidence, test: Test) -> list[float]:
    """The reading each hypothesis predicts, in the test's unit."""
    name = READING_NAMES.get(test.reading, test.reading)
    low, high = FLOOR_READING[test.unit], LIMITS[test.unit][1]
    return [min(max(value * PER_UNIT[test.unit], low), high) for value in found.readings(test.context, name)]


def _window(value: float, unit: str) -> tuple[float, float]:
    """The readings that count as the same: 15 % and the clamp's offset either way; below the first and above the last edge all are."""
    half, edges = 0.15 * value + (CLAMP_OFFSET_MA / 2 if unit == "mA" else 0.0), EDGES[unit]
    low, high = value - half, value + half
    return (0.0 if value <= edges[0] else min(low, edges[-1])), (math.inf if value >= edges[-1] else max(high, edges[0]))


def _mass(expected: float, low: float, high: float, unit: str) -> float:
    """Probability that a reading expected at `expected` falls between low and high (log-normal, wider near the meter's floor)."""
    spread = math.hypot(SPREAD, CLAMP_OFFSET_MA / 2 / expected if unit == "mA" else 0.1)

    def below(value: float) -> float:
        return 0.5 * (1 + math.erf(math.log(value / expected) / (spread * math.sqrt(2)))) if value > 0 else 0.0

    low, high = max(low, 0.0), max(high, FLOOR_READING[unit])
    if low <= FLOOR_READING[unit]:
        return below(high)
    return below(high) - below(low)


def _number_outcomes(found: Evidence, test: Test) -> dict[str, tuple[float, ...]] | None:
    predicted = _predicted_readings(found, test)
    if not predicted:
        return None
    edges = (0.0, *EDGES[test.unit], math.inf)
    masses: dict[float, list[float]] = {}
    for expected in predicted:
        if expected not in masses:
            cumulative = [0.0, *(_mass(expected, 0.0, edge, test.unit) for edge in edges[1:-1]), 1.0]
            masses[expected] = [after - before for before, after in itertools.pairwise(cumulative)]
    columns = {f"{edges[place]:g}": [masses[expected][place] for expected in predicted] for place in range(len(edges) - 1)}
    return _reported(columns)


# --- questions -----------------------------------------------------------------------------------------------------


def _question_outcomes(found: Evidence, name: str) -> dict[str, tuple[float, ...]] | None:
    if name == "opened":
        return _opened(found)
    if name == "when":
        return _when(found)
    rows = []
    for index in range(len(found.members)):
        value = next((latent.value for latent in found.point(index).latents if latent.name == name), None)
        rows.append(value)
    if all(value is None for value in rows):
        return None
    choices = QUESTION[name].choices
    seen = {value: LOOKS_LIKE.get(value, {value: 1.0}) for value in rows if value}
    return _reported({choice: [seen[value].get(choice, 0.0) if value else 1 / len(choices) for value in rows] for choice in choices}, WRONG_FACT)


def _opened(found: Evidence) -> dict[str, tuple[float, ...]] | None:
    """What opened, given that something did: the first opener among those that would, as found."""
    rows = opening(found, contexts.AS_FOUND)
    if rows is None:
        return None
    stated = {"pedestal": 0.6, "aboard": 0.2, "both": 0.1, "feeder": 0.1}
    columns: dict[str, list[float]] = {choice: [] for choice in QUESTION["opened"].choices}
    memo: dict[tuple[float, float, float], dict[str, float]] = {}
    for index, row in enumerate(rows):
        if row not in memo:
            memo[row] = devices.opening_patterns({"feeder": row[0], "pedestal": row[1], "aboard": row[2]}, delayed=("feeder",))
        patterns = memo[row]
        happened = 1 - patterns["none"] + UNEXPLAINED
        transient = found.point(index).cause == "nothing_now"
        for choice, column in columns.items():
            column.append(stated[choice] if transient else patterns[choice] / happened)
    return _reported(columns)


MOMENTS = (("plug_in", "main_off"), ("main_on", "branches_off"), ("any_load", "test_load"))


def _when(found: Evidence) -> dict[str, tuple[float, ...]] | None:
    """When it trips: the first switching step in which the solve says so, mixed with the cause's stated timing."""
    choices = QUESTION["when"].choices
    steps = [(choice, trips(found, context)) for choice, context in MOMENTS]
    singles = one_load_trips(found)
    together = trips(found, contexts.AS_FOUND)
    out = trips(found, "suspect_out")
    if together is None or out is None or singles is None or any(step is None for _, step in steps):
        return None
    rows: dict[str, list[float]] = {choice: [] for choice in choices}
    for index in range(len(found.members)):
        timing = CAUSE[found.point(index).cause].timing
        reached, computed = 0.0, dict.fromkeys(choices, 0.0)
        for choice, chance in [(choice, step[index]) for choice, step in steps if step is not None] + [("one_load", max(singles[index][1], together[index]))]:
            computed[choice] = max(chance - reached, 0.0)
            reached = max(chance, reached)
        computed["switching_off"] = max(out[index] - together[index], 0.0)
        total = math.fsum(computed.values()) + UNEXPLAINED
        for choice in choices:
            rows[choice].append(timing["computed"] * (computed[choice] / total + UNEXPLAINED / total / len(choices)) + timing.get(choice, 0.0))
    return _reported(rows)
