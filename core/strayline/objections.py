"""What speaks against using a way to connect, whatever its devices do: one named function per rule.

No objection does not mean that a way is free of danger: these are the rules that a circuit and a list of parts can show broken.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from strayline import devices, solve
from strayline.allowances import carries_a, low, over, plugged_into, rated_a
from strayline.allowed import DANGEROUS_HULL_VOLTS
from strayline.components import ADAPTERS, ASHORE, CONNECTORS
from strayline.connections import above, faulted, fed, groups_of, hull_volts, verdict
from strayline.contexts import raw_rows, worst_for_blades
from strayline.equations import Probe
from strayline.hookups import HOMEMADE
from strayline.loadings import NOTHING
from strayline.parts import Installation, Part, base, read
from strayline.settle import settled

if TYPE_CHECKING:
    from collections.abc import Callable

    from strayline.connections import Wired
    from strayline.network import Blade, Network

LIVE_BLADE_VOLTS = DANGEROUS_HULL_VOLTS
GROUNDED_NEUTRAL_OHMS = devices.WINDOW_OHM[1]
ROUNDING = 1e-6  # two lines in phase opposition add to nothing but this, as a share


@dataclass(frozen=True, slots=True)
class Objection:
    """What speaks against a way: the rule it breaks, the part concerned, how much of what; one that does not forbid is a caution."""

    rule: str
    part: str
    value: float | str | None = None
    unit: str = ""
    forbids: bool = True

    def row(self) -> dict[str, Any]:
        """As the reply shows it."""
        return {"rule": self.rule, "part": self.part, "value": self.value, "unit": self.unit}


def standing_objections(way: Wired) -> list[Objection]:
    """All objections that no switching of loads changes, rule by rule."""
    return [one for rule in RULES for one in rule(way)]


def loaded_objections(way: Wired, on: frozenset[str]) -> list[Objection]:
    """The objections that depend on the loads which may be on: an overloaded line, a panel too low, a live hull."""
    return [
        *(Objection("overload", f"{row['part']}.{row['line']}", row["used_a"], "A") for row in over(way, on)),
        *(Objection("low_volts", f"{row['panel']}.{row['line']}", row["volts"], "V") for row in low(way, on)),
        *(Objection("live_hull", hull, volts, "V") for hull, volts in hull_volts(way, on).items() if volts > DANGEROUS_HULL_VOLTS),
    ]


# --- the rules -----------------------------------------------------------------------------------------------------


def _forced(way: Wired) -> list[Objection]:
    """A plug that does not belong in the outlet it is in."""
    return [Objection("forced_plug", part_id) for part_id in way.hookup.forced]


def _assumed(way: Wired) -> list[Objection]:
    """A connector that nobody stated and nothing shows: a caution."""
    plugged = dict(way.hookup.links)
    return [Objection("connector_assumed", one, name, forbids=False) for one, name in way.own.assumed.items() if one in plugged]


def _miswired(way: Wired) -> list[Objection]:
    """Home-made and damaged adapters; an outlet with line and neutral exchanged; a panel at which they arrive exchanged."""
    found: list[Objection] = []
    for part in way.used("adapter"):
        if part.text("style") == HOMEMADE:
            found.append(Objection("homemade", part.id))
        if part.values.get("wired", "straight") != "straight":
            found.append(Objection("miswired", part.id, part.text("wired")))
    found += [Objection("reversed_outlet", part.id) for part in way.receptacles if part.values.get("reversed")]
    if way.system.neutral:  # without one both poles stand away from ground, and nothing is exchanged
        readings = way.loadings.at(NOTHING)
        for panel in way.panels:
            lifted = abs(readings["lifted", panel.id])
            if lifted > 0.5 * way.phase_volts:
                found.append(Objection("reversed", panel.id, lifted, "V"))
    return found


def _reversible(way: Wired) -> list[Objection]:
    """An outlet that takes its plug either way round, so that line and neutral may arrive exchanged: a caution."""
    connectors = [(part.id, part.text("connector")) for part in way.receptacles]
    return [Objection("reversible_plug", one, name, forbids=False) for one, name in connectors if CONNECTORS[name].reversible]


def _unwatched(way: Wired) -> list[Objection]:
    """An outlet without a ground-fault device, or with one that never opens."""
    found: list[Objection] = []
    for part in way.receptacles:
        if part.text("device") == "none":
            found.append(Objection("no_device", part.id))
        elif part.text("device") == "dead":
            found.append(Objection("dead_device", part.id))
    return found


def _joined_neutrals(way: Wired) -> list[Objection]:
    """Two windows whose neutrals meet on their load side: each return has two roads, and neither window sees its own."""
    found: list[Objection] = []
    for kind in ("receptacle", "main"):
        windows = [sensor.id for sensor in way.sensors if way.installation.part(sensor.id).kind == kind and fed(way, sensor.id)]
        cut = {f"{window}.N" for window in windows}
        where = groups_of(
            (branch.from_node, branch.to_node)
            for branch in way.network.branches
            if branch.kind == "neutral" and branch.id not in cut and _kind_of(way, branch.owner) not in ASHORE
        )
        met: dict[str, list[str]] = {}
        for window in windows:
            met.setdefault(where.get(f"{window}.N", window), []).append(window)
        found += [Objection("joined_neutrals", ", ".join(one)) for one in met.values() if len(one) > 1]
    return found


def _kind_of(way: Wired, owner: str) -> str:
    part = way.installation.index.get(base(owner))
    return part.kind if part else ""


def _shared_neutral(way: Wired) -> list[Objection]:
    """A Y whose two lines are (nearly) in phase: its common neutral may carry the sum of both, and no breaker watches that conductor."""
    found: list[Objection] = []
    for part in way.used("adapter"):
        if ADAPTERS[part.text("style")].wiring not in ("join", "isolated"):
            continue
        volts = way.loadings.solution(NOTHING)
        total = 0j
        for line, end in zip(("L1", "L2"), part.parents, strict=True):
            source = _receptacle_above(way, end)
            lifted = volts.at(Probe(nodes=((f"{part.id}.{line}", 1), (f"{part.id}.N", -1))))
            total += rated_a(source) * lifted / abs(lifted) if source and abs(lifted) > 0 else 0
        carried = CONNECTORS[way.own.outlets[part.id][0]].rated_a
        if abs(total) > carried * (1 + ROUNDING):
            found.append(Objection("shared_neutral", part.id, abs(total), "A"))
    return found


def _receptacle_above(way: Wired, end: str) -> Part | None:
    part = way.installation.part(base(end)) if end else None
    while part is not None and part.kind != "receptacle":
        part = way.installation.part(base(part.parents[0])) if part.parents[0] else None
    return part


def _without_ground(way: Wired) -> list[Objection]:
    """An inlet whose ground does not reach the dock's, or a panel whose ground does not reach the inlet's (but through a transformer)."""
    groups = groups_of((branch.from_node, branch.to_node) for branch in way.network.branches if branch.kind == "protective")
    shore = groups.get(f"{way.supply.id}.G", "")
    plugged = [inlet for inlet in way.own.inlets if inlet.id in dict(way.hookup.links)]
    found = [Objection("no_protective_conductor", inlet.id) for inlet in plugged if groups.get(f"{inlet.id}.G") != shore]
    if found:
        return found
    for panel in way.panels:
        apart = any(part.kind == "transformer" for part in above(way.installation, panel))
        if fed(way, panel.id) and groups.get(f"{panel.id}.G") != shore and not apart:
            found.append(Objection("no_protective_conductor", panel.id))
    return found


def _bond_aboard(way: Wired) -> list[Objection]:
    """A tie from the outlet's own neutral to ground anywhere behind the outlet: neutral current takes the ground too.

    On shore power a boat's neutral meets ground ashore only (ISO 13297 6.8; ABYC E-11; NEC 250.142(B), from memory). Behind a
    transformer the neutral is another one, and its tie belongs there.
    """
    groups = groups_of((branch.from_node, branch.to_node) for branch in way.network.branches if branch.kind == "neutral")
    behind = way.own.aboard | {part_id for part_id, _ in way.hookup.links}
    shore = {groups.get(f"{part.id}.N", "") for part in way.receptacles}
    found: list[Objection] = []
    for branch in way.network.branches:
        ends = {groups.get(branch.from_node), groups.get(branch.to_node)}
        if branch.kind == "bond" and base(branch.owner) in behind and not shore.isdisjoint(ends):
            found.append(Objection("bond_aboard", base(branch.owner), abs(branch.impedance), "ohm"))
    return found


def _trips_unloaded(way: Wired) -> list[Objection]:
    """A device that trips with every load off: something leaks or strays that no load switch ends."""
    readings = way.loadings.at(NOTHING)
    return [
        Objection("trips_unloaded", sensor.id, abs(readings["residual", sensor.id]) * 1e3, "mA")
        for sensor in way.sensors
        if verdict(way, sensor, readings["residual", sensor.id]) == "trips"
    ]


def _undersized(way: Wired) -> list[Objection]:
    """A cord or adapter end rated for less than the breaker ashore: a caution where every main behind it is rated no higher than it is."""
    found: list[Objection] = []
    for receptacle in way.receptacles:
        plugged = plugged_into(way, receptacle)
        if not plugged:
            continue
        part = min(plugged, key=lambda one: (carries_a(way, one), one.kind != "cord"))
        carries = carries_a(way, part)
        if carries < rated_a(receptacle):
            mains = [one for one in way.installation.of_kind("main") if one.id in way.installation.downstream(receptacle.id)]
            limited = bool(mains) and all((main.number("rated_a") or math.inf) <= carries for main in mains)
            found.append(Objection("undersized", part.id, carries, "A", forbids=not limited))
    return found


def _live_blades(way: Wired) -> list[Objection]:
    """Bare blades that are live while the boat is connected like this: an inlet left out, a tail left loose."""
    blade, volts = _blade_volts(way, way.installation) if _own_blades(way, way.network) else ("", 0.0)
    return [Objection("live_blades", blade, volts, "V")] if volts > LIVE_BLADE_VOLTS else []


def _live_loose_plugs(way: Wired) -> list[Objection]:
    """Of several plugs, one whose blades are live while it is out and the others are in: a caution behind transformers."""
    isolated = any(ADAPTERS[part.text("style")].wiring == "isolated" for part in way.used("adapter"))
    found: list[Objection] = []
    for receptacle in way.receptacles if len(way.receptacles) > 1 else ():
        blade, volts = _blade_volts(way, _unplugged(way.installation, receptacle.id))
        if volts > LIVE_BLADE_VOLTS:
            found.append(Objection("live_loose_plug", blade, volts, "V", forbids=not isolated))
    return found


def _own_blades(way: Wired, network: Network) -> list[Blade]:
    """The bare blades of the boat and of what she has plugged in."""
    ours = way.own.aboard | {part_id for part_id, _ in way.hookup.links}
    return [blade for blade in network.blades if base(blade.id) in ours]


def _unplugged(installation: Installation, receptacle: str) -> Installation:
    """The same with the plug pulled out of one outlet."""
    rows = raw_rows(installation)
    for child in installation.children(receptacle):
        pulled = ["" if parent == receptacle else parent for parent in child.parents]
        rows[child.id]["from"] = pulled if child.kind == "adapter" else pulled[0]
    return read({"parts": list(rows.values())})


def _blade_volts(way: Wired, installation: Installation) -> tuple[str, float]:
    """The boat's bare blade with the most volts to the water, at its worst for blades: its id and its volts."""
    network = faulted(worst_for_blades(installation), way.faults)
    solution = solve.solve(settled(network))
    volts = {blade.id: abs(solution.voltage(blade.node) or 0) for blade in _own_blades(way, network)}
    most = max(sorted(volts), key=lambda one: volts[one])
    return most, volts[most]


def _detectors(way: Wired) -> list[Objection]:
    """A device that also looks for a grounded neutral, and the loop of low resistance that may open it with every load off: a caution."""
    found: list[Objection] = []
    for sensor in way.sensors:
        if devices.DEVICES[sensor.device].grounded_neutral:
            siemens = way.loadings.window_siemens(sensor.id)
            if siemens * GROUNDED_NEUTRAL_OHMS > 1:
                found.append(Objection("grounded_neutral_loop", sensor.id, 1 / siemens, "ohm", forbids=False))
    return found


RULES: tuple[Callable[[Wired], list[Objection]], ...] = (
    _forced,
    _miswired,
    _reversible,
    _unwatched,
    _joined_neutrals,
    _shared_neutral,
    _without_ground,
    _bond_aboard,
    _trips_unloaded,
    _undersized,
    _live_blades,
    _live_loose_plugs,
    _detectors,
    _assumed,
)
