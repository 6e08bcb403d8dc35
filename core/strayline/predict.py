"""Causes x severities x contexts -> what every sensor and meter would show: the one table both halves share.

Each context is factored once per rewiring; severities and unknown facts are closed forms over ports on those factors.
"""

from __future__ import annotations

import cmath
import dataclasses
import itertools
import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from strayline import contexts, devices, solve
from strayline.aboard import load_ohms
from strayline.boat import own_parts
from strayline.catalogue.causes import CAUSE, CAUSES
from strayline.causes import Effect, Fault, Shunt, effect
from strayline.components import LINES, SYSTEMS
from strayline.installation import build, zone_parts
from strayline.network import Network, nodes
from strayline.parts import Installation, Part, base, breaker_curve, breaker_rating_a, waits, waveform
from strayline.severities import severities
from strayline.wiring import EARTH, Wiring

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from strayline.equations import Probe

ROLES = ("feeder", "pedestal", "aboard")
INFINITE_OHMS = 1e12
STATED_ARRANGEMENT = 0.85  # an arrangement that trips by itself and was stated explains itself; other faults are rarer than that
HULL = "hull_v"  # the reading of the own hull against the water


@dataclass(frozen=True, slots=True)
class Latent:
    """One value of an unknown fact: its share, and the shunts that make it true in the network."""

    name: str
    value: str
    share: float
    shunts: tuple[Shunt, ...] = ()


@dataclass(frozen=True, slots=True)
class Point:
    """One cause at one severity under one value of each unknown network fact; `share` is its part of the cause's prior."""

    cause: str
    fault: Fault
    latents: tuple[Latent, ...]
    share: float


@dataclass(frozen=True, slots=True)
class Watch:
    """A sensor in a context: its part id, its role and its device key, with the case's own operating band where stated (mA).

    rated_a, curve -- of the breaker in the same housing; 0 without one
    waveform       -- its type, a key of `devices.WAVEFORMS`; waits -- it lets what is below it open first
    loads          -- the loads behind it that are on: running amperes, and what multiple of them a start is stated to draw
    """

    id: str
    role: str
    device: str
    non_operating_ma: float | None
    operating_ma: float | None
    rated_a: float
    curve: str = "na"
    waveform: str = devices.USUAL_WAVEFORM
    waits: bool = False
    loads: Mapping[str, tuple[float, float]] = field(default_factory=dict, compare=False)


@dataclass(frozen=True, slots=True)
class Outlook:
    """What would be seen at one point in one context.

    residual_a  -- magnitude at each watch, A RMS
    loop_s      -- magnitude of the common-mode admittance of the loop through each watch's window, siemens
    line_a      -- largest line current at each watch that has a breaker of a known rating, A RMS; else 0
    readings    -- named probes: amperes, ohms or volts
    """

    residual_a: tuple[float, ...]
    loop_s: tuple[float, ...]
    line_a: tuple[float, ...]
    readings: dict[str, float]


@dataclass(slots=True)
class Predictions:
    """Every point of one installation, and the outlook of each in any context, worked out when first asked for."""

    installation: Installation
    points: tuple[Point, ...]
    _cache: dict[str, tuple[tuple[Watch, ...], tuple[Outlook, ...]] | None] = field(default_factory=dict)
    _blades: dict[str, float] = field(default_factory=dict)

    def outlooks(self, context: str) -> tuple[tuple[Watch, ...], tuple[Outlook, ...]] | None:
        """The watches of a context and the outlook of every point; None when the stated parts cannot make this context."""
        if context not in self._cache:
            self._cache[context] = _outlooks(self.installation, self.points, context)
        return self._cache[context]

    def blade_volts(self, context: str) -> float:
        """The highest voltage on any bare blade in the state a test leaves, every load aboard on, nothing else wrong."""
        if context not in self._blades:
            left = contexts.left_behind(context, self.installation)
            solution = None if left is None or not left.blades else solve.solve(left)
            self._blades[context] = (
                max((abs(solution.voltage(blade.node) or 0.0) for blade in left.blades), default=0.0) if left and solution else 0.0
            )
        return self._blades[context]


def predictions(installation: Installation, latents: Sequence[Sequence[Latent]]) -> Predictions:
    """All points of an installation: causes that can be there, their severities, and every combination of unknown facts."""
    points: list[Point] = []
    for cause in (cause for cause in CAUSES if cause.weighed):
        found = []
        for severity in severities(cause.id, installation):
            for combination in itertools.product(*latents):
                known = {latent.name: latent.value for latent in combination}
                if cause.requires and known.get(cause.requires[0], cause.requires[1]) != cause.requires[1]:
                    continue
                found.append(
                    Point(cause.id, severity.fault, combination, severity.weight * math.prod(latent.share for latent in combination))
                )
        total = math.fsum(point.share for point in found)
        points += [dataclasses.replace(point, share=point.share / total) for point in found]
    return Predictions(installation, tuple(points))


def cause_weights(predicted: Predictions) -> dict[str, float]:
    """Prior weight of each cause that can be there, by region; where a Y is in use the arrangement explains itself first."""
    system = SYSTEMS[predicted.installation.of_kind("supply")[0].text("system")]
    present = dict.fromkeys(point.cause for point in predicted.points)
    weights = {cause: CAUSE[cause].prior_50 if system.region == "50" else CAUSE[cause].prior_60 for cause in present}
    if "joined_inlets" in weights and any(len(part.parents) > 1 for part in predicted.installation.of_kind("panel")):
        weights["joined_inlets"] = STATED_ARRANGEMENT  # the drawing says so, as it does of a Y
    arranged = sum(weights[cause] for cause in present if CAUSE[cause].kind == "arrangement")
    faults = sum(weights[cause] for cause in present if CAUSE[cause].kind == "fault")
    return {cause: weight if CAUSE[cause].kind == "arrangement" else weight / faults * (1 - arranged) for cause, weight in weights.items()}


def watches(installation: Installation) -> tuple[Watch, ...]:
    """The devices that watch the own boat: the dock feeder's, its receptacles', its mains'."""
    mine = own_parts(installation)
    found: list[tuple[str, Part]] = [("feeder", part) for part in installation.of_kind("feeder")]
    found += [("pedestal", part) for part in mine if part.kind == "receptacle" and installation.children(part.id)]
    found += [("aboard", part) for part in mine if part.kind == "main"]
    running, hertz = _running(installation), Wiring(installation).system.hertz
    return tuple(
        Watch(
            part.id, role, part.text("device"), part.number("non_operating_ma"), part.number("operating_ma"),
            breaker_rating_a(part) or 0.0, breaker_curve(part, hertz), waveform(part), waits(part),
            {load: each for load, each in running.items() if load in zone_parts(installation, part)},
        )
        for role, part in found
    )  # fmt: skip


def _running(installation: Installation) -> dict[str, tuple[float, float]]:
    """Amperes of every load that is on, at its nominal volts, and by what its start is stated to multiply them."""
    wiring, found = Wiring(installation), {}
    for load in installation.of_kind("load"):
        if load.flag("on"):
            volts = wiring.nominal_volts(load.text("across"))
            found[load.id] = (volts / abs(load_ohms(load, volts)), load.number("inrush") or 1.0)
    return found


def _outlooks(installation: Installation, points: tuple[Point, ...], context: str) -> tuple[tuple[Watch, ...], tuple[Outlook, ...]] | None:
    made = contexts.setting(context, installation)
    if made is None:
        return None
    base_network = build(made)
    effects: dict[Fault, Effect] = {}
    prepared: dict[Network, _Prepared] = {}  # by the network a rewiring leaves, and by what this context leaves of it: many end alike
    name = context.partition(":")[0]
    watched = () if name in contexts.DEAD else watches(made)
    found: list[Outlook] = []
    for point in points:
        made_effect = effects.get(point.fault)
        if made_effect is None:
            made_effect = effects[point.fault] = effect(made, base_network, point.fault)
        ready = prepared.get(made_effect.network)
        if ready is None:
            left = contexts.switched(context, made, made_effect.network)
            ready = prepared.get(left) or _Prepared(made, left, watched, name)
            prepared[left] = prepared[made_effect.network] = ready
        shunts = [shunt for shunt in made_effect.shunts if name not in shunt.absent_in]
        shunts += [shunt for latent in point.latents for shunt in latent.shunts if name not in shunt.absent_in]
        found.append(ready.outlook(shunts))
    return watched, tuple(found)


class _Prepared:
    """One rewired network in one context: factored once, with every probe that the context reads."""

    def __init__(self, installation: Installation, network: Network, watched: tuple[Watch, ...], context: str) -> None:
        self.nodes = frozenset(nodes(network))
        self.factors = solve.factor(network)
        self.watched = watched
        self.context = context
        present = {branch.id for branch in network.branches}
        self.lines = [
            tuple(f"{watch.id}.{line}" for line in LINES if watch.rated_a and f"{watch.id}.{line}" in present) for watch in watched
        ]
        self.names: list[str] = []
        self.probes = [solve.probe_residual(self.factors, watch.id) for watch in watched]
        self.probes += [solve.probe_current(self.factors, [(line, 1)]) for lines in self.lines for line in lines]
        for reading, probe in self._readings(installation, network, present):
            self.names.append(reading)
            self.probes.append(probe)
        stand_in = [(each, network.branch(each.branch)) for each in network.isolators]
        self.bridges = [(each.volts, (branch.from_node, branch.to_node, complex(each.conducting))) for each, branch in stand_in]
        self.probes += [solve.probe_voltage(self.factors, a, b) for _, (a, b, _) in self.bridges]
        self.sweep = solve.Sweep(self.factors, self.probes, [watch.id for watch in watched])
        self.continuity = _continuity(installation, self.factors, self.nodes) if context == "cord_in_hand" else {}
        self.seen: dict[tuple[Shunt, ...], Outlook] = {}

    def _readings(self, installation: Installation, network: Network, present: set[str]) -> list[tuple[str, Probe]]:
        found: list[tuple[str, Probe]] = []
        mine = own_parts(installation)
        cord = next((part.id for part in mine if part.kind == "cord"), None)
        if self.context in (contexts.AS_FOUND, "one_load") and cord:
            live = [(f"{cord}.{name}", 1) for name in (*LINES, "N") if f"{cord}.{name}" in present]
            ground = [(f"{cord}.G", 1)] if f"{cord}.G" in present else []
            found += [
                ("cord_sum_a", solve.probe_current(self.factors, live + ground)),
                ("live_sum_a", solve.probe_current(self.factors, live)),
            ]
            found.append(("ground_a", solve.probe_current(self.factors, ground)))
        if self.context in contexts.ENERGISED:
            own = [node for hull, node in network.hulls if node in self.nodes and any(part.id == hull for part in mine)]
            found += [(HULL, solve.probe_voltage(self.factors, node, EARTH)) for node in own[:1]]
        if contexts.METER in present:
            found.append(("meter_a", solve.probe_current(self.factors, [(contexts.METER, 1)])))
        return found

    def outlook(self, shunts: Sequence[Shunt]) -> Outlook:
        here = tuple(shunt for shunt in shunts if shunt.a in self.nodes and shunt.b in self.nodes)
        if self.context in contexts.DEAD:
            here = tuple(shunt for shunt in here if shunt.kind != "filter")
        if here not in self.seen:
            self.seen[here] = self._outlook([(shunt.a, shunt.b, complex(shunt.ohms)) for shunt in here])
        return self.seen[here]

    def _outlook(self, shunts: list[solve.Shunt]) -> Outlook:
        values, loops = self._settled(shunts)
        count = len(self.watched)
        residual = tuple(abs(value) for value in values[:count])
        loop = tuple(abs(value) for value in loops)
        line, place = [], count
        for lines in self.lines:
            line.append(max((abs(value) for value in values[place : place + len(lines)]), default=0.0))
            place += len(lines)
        readings = {name: abs(value) if not cmath.isnan(value) else 0.0 for name, value in zip(self.names, values[place:], strict=True)}
        if "meter_a" in readings:
            current = readings.pop("meter_a")
            readings["meter_ohm"] = (
                min(contexts.METER_VOLTS / current - contexts.METER_OHMS, INFINITE_OHMS) if current > 1e-12 else INFINITE_OHMS
            )
        readings |= self.continuity
        return Outlook(residual, loop, tuple(line), readings)

    def _settled(self, shunts: list[solve.Shunt]) -> tuple[list[complex], list[complex]]:
        """Probes and loops with every galvanic isolator bridged whose voltage makes it conduct (room `settle`, over ports)."""
        values, loops = self.sweep.at(shunts)
        across = len(values) - len(self.bridges)
        past = [bridge for (volts, bridge), value in zip(self.bridges, values[across:], strict=True) if abs(value) > volts]
        return self._settled([*shunts, *past]) if past else (values[:across], loops)


def _continuity(installation: Installation, factors: solve.Factors, present: frozenset[str]) -> dict[str, float]:
    """Ohms end to end of the cord (and adapter) in the hand: neutral to neutral, neutral and line to far ground, ground to ground."""
    mine = own_parts(installation)
    cords = [part for part in mine if part.kind in ("cord", "adapter")]
    if not cords:
        return {}
    near = base(cords[0].parents[0]) or f"{cords[0].id}.plug"
    far = next(part.id for part in reversed(mine) if part.kind == "cord")

    def ohms(start: str, end: str) -> float:
        if start not in present or end not in present:
            return INFINITE_OHMS
        return min(abs(factors.port_impedance(start, end)), INFINITE_OHMS)

    return {
        "neutral_through": ohms(f"{near}.N", f"{far}.N"),
        "neutral_to_ground": ohms(f"{near}.N", f"{far}.G"),
        "line_to_ground": ohms(f"{near}.L1", f"{far}.G"),
        "ground_through": ohms(f"{near}.G", f"{far}.G"),
    }
