"""P(report | prediction): one vector over the hypotheses for every outcome of every test and every answer.

A hypothesis is a point of the predictions together with one state of the devices that watch (working or not, with or without
grounded-neutral detection). What a sensor or meter shows comes from the solve; timing, looks and history have stated
probabilities. Reports are wrong now and then, so nothing is ever impossible.
"""

from __future__ import annotations

import itertools
import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from strayline import contexts, devices
from strayline.catalogue.causes import CAUSE
from strayline.catalogue.questions import QUESTION
from strayline.catalogue.tests import STATED, TEST, Test
from strayline.openings import DEAD, WORKS, DeviceState, acts_on_devices, any_opens, delayed_roles, device_states, role_chances
from strayline.posterior import Hypotheses, hypotheses_of
from strayline.predict import Outlook, Point, Predictions, cause_weights

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from strayline.faults import Fault
    from strayline.openings import RoleChances
    from strayline.predict import Watch

WRONG = 0.05  # share of answers that are wrong (method: assuming less costs far more than assuming this)
WRONG_FACT = {"afloat": 0.005, "neighbour": 0.03, "inverter": 0.03}  # the same for plain facts; nobody mistakes land for water
UNEXPLAINED = 0.1  # a state that trips less often than this hardly explains a trip that did happen
SPREAD = 0.5  # natural-log spread of a predicted reading: the grid's half step and unit-to-unit differences
CLAMP_OFFSET_MA = 0.8  # clamp meters: 5 % and 0.8 mA; limits are taken as two spreads

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
                any(latent.name == name and latent.value == value for latent in self.point(index).latents)
                for index in range(len(self.members))
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

    def openings(self, where: int, context: str) -> list[tuple[float, float, float]] | None:
        """For every hypothesis of one installation the probabilities that feeder, pedestal and aboard devices open in a context."""
        key = (where, context)
        if key not in self._openings:
            made = self.predicted[where].outlooks(context)
            self._openings[key] = None if made is None else self._opened(where, context, *made)
        return self._openings[key]

    def _opened(
        self, where: int, context: str, watched: tuple[Watch, ...], outlooks: Sequence[Outlook]
    ) -> list[tuple[float, float, float]]:
        seen: dict[tuple[int, Fault | None], RoleChances] = {}
        points = self.predicted[where].points
        away = {point.latents: outlook for outlook, point in zip(outlooks, points, strict=True) if point.cause == "nothing_now"}
        rows = []
        for outlook, point in zip(outlooks, points, strict=True):
            mark = (id(outlook), point.fault if acts_on_devices(point.fault) else None)
            if mark not in seen:
                seen[mark] = role_chances(watched, outlook, point.fault, context, away.get(point.latents))
            feeder, pedestal, aboard = seen[mark]
            rows += [(feeder[WORKS], pedestal[state.pedestal], aboard[state.aboard]) for state in self.states[where]]
        return rows

    def opening(self, context: str) -> list[tuple[float, float, float]] | None:
        """The same for the hypotheses of all installations; None where the context cannot be made."""
        parts = [self.openings(where, context) for where in range(len(self.predicted))]
        return None if any(part is None for part in parts) else [row for part in parts for row in part or ()]

    def trips(self, context: str) -> list[float] | None:
        """For every hypothesis the probability that anything opens in a context."""
        rows = self.opening(context)
        return None if rows is None else any_opens(rows)

    def one_load_trips(self) -> list[tuple[float, float]] | None:
        """For every hypothesis the least and greatest probability of a trip over the own loads, each running alone."""
        rows: list[tuple[float, float]] = []
        for where, one in enumerate(self.predicted):
            states = [self.openings(where, context) for context in contexts.expand("one_load", one.installation)]
            columns = [any_opens(part) for part in states if part is not None]
            if not columns:
                return None
            rows += [(min(column), max(column)) for column in zip(*columns, strict=True)]
        return rows

    def point(self, index: int) -> Point:
        """The point of a hypothesis."""
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
        chance = found.trips(test.context)
        return None if chance is None else _reported({"holds": [1 - value for value in chance], "trips": chance})
    if test.model == "loads":
        return _load_outcomes(found)
    if test.model == "continuity":
        return _continuity_outcomes(found)
    return _number_outcomes(found, test)


def _load_outcomes(found: Evidence) -> dict[str, tuple[float, ...]] | None:
    """One load at a time. One device decides them all, so its threshold is shared: the outcomes nest instead of multiplying."""
    rows = found.one_load_trips()
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
        crossed = ohms["neutral_to_ground"] < 1.0 <= ohms["neutral_through"] or ohms["line_to_ground"] < 1.0
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
    return _reported(
        {choice: [seen[value].get(choice, 0.0) if value else 1 / len(choices) for value in rows] for choice in choices},
        WRONG_FACT[name],
    )


def _opened(found: Evidence) -> dict[str, tuple[float, ...]] | None:
    """What opened, given that something did: the first opener among those that would, as found."""
    rows = found.opening(contexts.AS_FOUND)
    if rows is None:
        return None
    stated = {"pedestal": 0.6, "aboard": 0.2, "both": 0.1, "feeder": 0.1}
    columns: dict[str, list[float]] = {choice: [] for choice in QUESTION["opened"].choices}
    made = [one.outlooks(contexts.AS_FOUND) for one in found.predicted]
    delayed = [delayed_roles(outlooks[0] if outlooks else ()) for outlooks in made]
    memo: dict[tuple[frozenset[str], tuple[float, float, float]], dict[str, float]] = {}
    for index, row in enumerate(rows):
        mark = (delayed[found.members[index][0]], row)
        if mark not in memo:
            memo[mark] = devices.opening_patterns({"feeder": row[0], "pedestal": row[1], "aboard": row[2]}, mark[0])
        patterns = memo[mark]
        happened = 1 - patterns["none"] + UNEXPLAINED
        transient = found.point(index).cause == "nothing_now"
        for choice, column in columns.items():
            column.append(stated[choice] if transient else patterns[choice] / happened)
    return _reported(columns)


MOMENTS = (("plug_in", "main_off"), ("main_on", "branches_off"), ("any_load", "test_load"))


def _when(found: Evidence) -> dict[str, tuple[float, ...]] | None:
    """When it trips: the first switching step in which the solve says so, mixed with the cause's stated timing."""
    choices = QUESTION["when"].choices
    steps = [(choice, found.trips(context)) for choice, context in MOMENTS]
    singles = found.one_load_trips()
    together = found.trips(contexts.AS_FOUND)
    out = found.trips("suspect_out")
    if together is None or out is None or singles is None or any(step is None for _, step in steps):
        return None
    rows: dict[str, list[float]] = {choice: [] for choice in choices}
    for index in range(len(found.members)):
        timing = CAUSE[found.point(index).cause].timing
        reached, computed = 0.0, dict.fromkeys(choices, 0.0)
        for choice, chance in [(choice, step[index]) for choice, step in steps if step is not None] + [
            ("one_load", max(singles[index][1], together[index]))
        ]:
            computed[choice] = max(chance - reached, 0.0)
            reached = max(chance, reached)
        computed["switching_off"] = max(out[index] - together[index], 0.0)
        total = math.fsum(computed.values()) + UNEXPLAINED
        for choice in choices:
            rows[choice].append(
                timing["computed"] * (computed[choice] / total + UNEXPLAINED / total / len(choices)) + timing.get(choice, 0.0)
            )
    return _reported(rows)
