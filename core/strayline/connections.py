"""One way to connect, wired: its network in every state of the boat's loads, and what each ground-fault device does in them."""

from __future__ import annotations

import cmath
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from strayline import devices, solve
from strayline.causes import applied
from strayline.components import SYSTEMS
from strayline.equations import Probe
from strayline.hookups import Hookup, Kit, connected
from strayline.installation import build
from strayline.loadings import NOTHING, Key, Loadings, Readings
from strayline.parts import Installation, Part, base
from strayline.phasor import shown_angle
from strayline.residuals import crossing_kind

if TYPE_CHECKING:
    from collections.abc import Iterable

    from strayline.causes import Fault
    from strayline.components import System
    from strayline.network import Branch, Network, Sensor

UNWATCHED = "holds because nothing is watching"
SEVERITY = ("holds", "unprotected", "may trip", "trips")
STRAYS = ("trips", "may trip")
ALL_ON, ALL_OFF, ONE_LOAD = "all_on", "all_off", "one_load"


@dataclass(frozen=True, slots=True)
class Wired:
    """One way to connect, wired: its installation with every load on, its network, and the states of that."""

    own: Kit
    hookup: Hookup
    installation: Installation
    network: Network
    loadings: Loadings
    sensors: tuple[Sensor, ...]
    receptacles: tuple[Part, ...]
    panels: tuple[Part, ...]
    loads: tuple[Part, ...]
    faults: tuple[Fault, ...]

    @property
    def system(self) -> System:
        """The supply's volts, hertz and lines."""
        return SYSTEMS[self.supply.text("system")]

    @property
    def supply(self) -> Part:
        """The one supply."""
        return self.installation.of_kind("supply")[0]

    @property
    def phase_volts(self) -> float:
        """Volts from each line to the star."""
        return self.supply.number("volts") or self.system.volts

    def used(self, *kinds: str) -> list[Part]:
        """The plugged parts of these kinds, from shore to boat."""
        return [part for part_id, _ in self.hookup.links if (part := self.installation.part(part_id)).kind in kinds]


def faulted(installation: Installation, faults: Iterable[Fault]) -> Network:
    """The network with those faults in it whose parts are there: one in a cord that lies in the locker does nothing."""
    there = [fault for fault in faults if all(not name or name in installation.index for name in (fault.at, fault.load))]
    return applied(installation, build(installation), there)


def wired(installation: Installation, own: Kit, hookup: Hookup, faults: tuple[Fault, ...]) -> Wired:
    """The installation connected in this way, with its faults, and the readings that its states are judged by."""
    made = connected(installation, own, hookup)
    network = faulted(made, faults)
    mine = {branch.to_node for branch in network.branches if base(branch.owner) in own.aboard}
    sensors = tuple(sensor for sensor in network.sensors if not mine.isdisjoint(sensor.zone))
    loads = tuple(part for part in made.of_kind("load") if part.id in own.aboard)
    panels = tuple(part for part in made.of_kind("panel") if part.id in own.aboard)
    receptacles = hookup.receptacles(made)
    switches = {
        load.id: tuple(branch.id for branch in network.branches if branch.owner == load.id and branch.id.startswith(f"{load.id}.switch"))
        for load in loads
    }
    probes: dict[Key, Probe] = {}
    for sensor in sensors:
        probes["residual", sensor.id] = Probe(tuple((branch_id, 1) for branch_id in sensor.branches))
    rated = {part.id for part in made.of_kind("main", "breaker") if part.id in own.aboard and part.number("rated_a")}
    watched_aboard = [branch for branch in network.branches if branch.kind == "line" and branch.owner in rated]
    for branch in (*_drawn_on(network, own, receptacles), *watched_aboard):
        probes["line", branch.owner, branch.id.rpartition(".")[2]] = Probe(((branch.id, 1),))
    there = {node for branch in network.branches for node in (branch.from_node, branch.to_node)}
    for part in panels:
        probes["lifted", part.id] = Probe(nodes=((f"{part.id}.N", 1), (f"{part.id}.G", -1)))
        for line in SYSTEMS[made.of_kind("supply")[0].text("system")].lines:
            if f"{part.id}.{line}" in there:
                probes["panel", part.id, line] = Probe(nodes=((f"{part.id}.{line}", 1), (f"{part.id}.N", -1)))
    for load in loads:
        probes["load", load.id] = Probe(nodes=tuple(zip(_terminals(network, load), (1, -1), strict=False)))
    for hull, node in network.hulls:
        if hull in own.aboard:
            probes["hull", hull] = Probe(nodes=((node, 1),))
    return Wired(own, hookup, made, network, Loadings(network, switches, probes), sensors, receptacles, panels, loads, faults)


def _terminals(network: Network, load: Part) -> list[str]:
    """The two nodes outside a load that its own conductors lead to."""
    inner = [branch for branch in network.branches if branch.id.startswith(f"{load.id}.") and branch.kind in ("line", "neutral", "load")]
    ends = dict.fromkeys(node for branch in inner for node in (branch.from_node, branch.to_node) if base(node) != load.id)
    return list(ends)[:2]


def _drawn_on(network: Network, own: Kit, receptacles: tuple[Part, ...]) -> list[Branch]:
    """The lines of the outlets in use that reach the boat, or a winding on the way to it; a line that ends in an adapter does not."""
    outlets = {part.id for part in receptacles}
    inside = [branch for branch in network.branches if branch.kind == "line" and base(branch.owner) not in outlets]
    groups = groups_of((branch.from_node, branch.to_node) for branch in inside)
    aboard = {
        groups.get(node, node)
        for branch in network.branches
        if base(branch.owner) in own.aboard or branch.kind == "winding"
        for node in (branch.from_node, branch.to_node)
    }
    lines = [branch for branch in network.branches if branch.kind == "line" and branch.owner in outlets]
    return [branch for branch in lines if groups.get(branch.to_node, branch.to_node) in aboard]


def fed(way: Wired, part_id: str) -> bool:
    """Whether an outlet stands somewhere above a part, or is it."""
    part = way.installation.part(part_id)
    return part.kind == "receptacle" or any(one.kind == "receptacle" for one in above(way.installation, part))


def above(installation: Installation, part: Part) -> list[Part]:
    """All that a part hangs on, up to the supply."""
    found: dict[str, Part] = {}
    waiting = [part]
    while waiting:
        for parent in waiting.pop().parents:
            if parent and base(parent) not in found:
                found[base(parent)] = installation.part(base(parent))
                waiting.append(found[base(parent)])
    return list(found.values())


def groups_of(pairs: Iterable[tuple[str, str]]) -> dict[str, str]:
    """Which nodes hang together by these pairs: node -> the name of its group."""
    near: dict[str, list[str]] = {}
    for one, other in pairs:
        near.setdefault(one, []).append(other)
        near.setdefault(other, []).append(one)
    group: dict[str, str] = {}
    for start in near:
        waiting = [] if start in group else [start]
        while waiting:
            node = waiting.pop()
            if node not in group:
                group[node] = start
                waiting += near[node]
    return group


# --- does it hold --------------------------------------------------------------------------------------------------


def states(on: frozenset[str]) -> list[frozenset[str]]:
    """The states looked at when these loads may be on: all of them, none, each alone; in a fixed order, and each once."""
    return list(dict.fromkeys([on, NOTHING, *(frozenset({load}) for load in sorted(on))]))


def state_name(way: Wired, on: frozenset[str]) -> str:
    """The name of a state: ALL_ON, ALL_OFF or ONE_LOAD."""
    return ALL_ON if on == way.loadings.loads else ALL_OFF if not on else ONE_LOAD


def only_load(way: Wired, on: frozenset[str]) -> str | None:
    """The load that is on alone in this state."""
    return next(iter(on)) if state_name(way, on) == ONE_LOAD else None


def verdict(way: Wired, sensor: Sensor, residual: complex) -> str:
    """What one device does with a residual in amperes, as `residuals` says it."""
    part = way.installation.part(sensor.id)
    return devices.verdict(devices.DEVICES[sensor.device], abs(residual), part.number("non_operating_ma"), part.number("operating_ma"))


def gravity_of(way: Wired, sensor: Sensor, readings: Readings) -> tuple[int, float]:
    """How near a device is to tripping, to be compared: its verdict, then its residual as a share of what makes it trip."""
    residual = readings["residual", sensor.id]
    part, device = way.installation.part(sensor.id), devices.DEVICES[sensor.device]
    if not device.rated_ma:
        return SEVERITY.index("unprotected"), abs(residual)
    _, operating = devices.operating_band_ma(device, part.number("non_operating_ma"), part.number("operating_ma"))
    return SEVERITY.index(verdict(way, sensor, residual)), abs(residual) * 1e3 / operating


def worst(way: Wired, on: frozenset[str]) -> frozenset[str]:
    """Of the states looked at, the one that brings some device nearest to tripping; the first of those in a tie."""

    def gravity(state: frozenset[str]) -> tuple[int, float]:
        readings = way.loadings.at(state)
        return max((gravity_of(way, sensor, readings) for sensor in way.sensors), default=(0, 0.0))

    return max(states(on), key=gravity)


def watched(way: Wired) -> bool:
    """Whether every outlet in use has a device that can open."""
    return all(devices.DEVICES[part.text("device")].rated_ma > 0 and part.text("device") != "dead" for part in way.receptacles)


def holds(way: Wired, state: frozenset[str]) -> str:
    """The verdict on a state: "trips" where a device trips, "may trip", "holds", or UNWATCHED where an outlet has no working device."""
    readings = way.loadings.at(state)
    verdicts = {verdict(way, sensor, readings["residual", sensor.id]) for sensor in way.sensors}
    for strays in STRAYS:
        if strays in verdicts:
            return strays
    return "holds" if watched(way) else UNWATCHED


def sensor_rows(way: Wired, on: frozenset[str]) -> list[dict[str, Any]]:
    """What each sensor of the boat's path sees in this state."""
    rows = []
    for sensor in way.sensors:
        residual = way.loadings.at(on)["residual", sensor.id]
        rows.append({
            "id": sensor.id, "device": sensor.device, "rating_ma": devices.DEVICES[sensor.device].rated_ma or None,
            "residual_ma": abs(residual) * 1e3, "angle_deg": shown_angle(residual), "verdict": verdict(way, sensor, residual),
        })  # fmt: skip
    return rows


def why(way: Wired, state: frozenset[str]) -> dict[str, Any] | None:
    """The device nearest to tripping in this state, and the branch by which most of its residual strays."""
    readings = way.loadings.at(state)
    if not way.sensors:
        return None
    sensor = max(way.sensors, key=lambda one: gravity_of(way, one, readings))
    solution = way.loadings.solution(state)
    network = solution.network
    strays = solve.crossings(network, solution, sensor.id)
    mine = way.own.aboard | {part_id for part_id, _ in way.hookup.links} | {part.id for part in way.receptacles}
    branch, current = max(strays, key=lambda pair: abs(pair[1]), default=(None, 0j))
    residual = readings["residual", sensor.id]
    return {
        "sensor": sensor.id, "device": sensor.device, "state": state_name(way, state), "load": only_load(way, state),
        "residual_ma": abs(residual) * 1e3, "angle_deg": shown_angle(residual), "verdict": verdict(way, sensor, residual),
        "crossing": None if branch is None else {
            "branch": branch.id, "kind": crossing_kind(branch, network, sensor.id in mine, mine), "ma": abs(current) * 1e3,
        },
    }  # fmt: skip


def hull_volts(way: Wired, on: frozenset[str]) -> dict[str, float]:
    """The most that each hull of the boat stands above the water in any state looked at; one that floats is left out."""
    volts: dict[str, float] = {}
    for state in states(on):
        for key, value in way.loadings.at(state).items():
            if key[0] == "hull" and not cmath.isnan(value):
                volts[key[1]] = max(abs(value), volts.get(key[1], 0.0))
    return volts
