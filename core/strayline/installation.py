"""What is plugged into what -> the healthy Network.

Each part owns the nodes at its load end, named `<part>.<conductor>`; its branches lead there from the load end of the part it
hangs on. A plug that hangs on nothing (`from = ""`) has bare blades, named `<part>.plug.<conductor>`.
"""

from __future__ import annotations

import itertools
import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from strayline.components import ASHORE, CONNECTORS, SYSTEMS, System
from strayline.errors import CaseError
from strayline.network import Blade, Branch, Network, Sensor, checked
from strayline.parts import Installation, Part, base
from strayline.phasor import polar
from strayline.units import awg_area_mm2, copper_ohms

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping

EARTH = "earth"
ELEMENT_TAPS = (0.1, 0.5, 0.9)  # positions along a heating element, as a share of its length from the line end
SWITCH_OHMS = 0.002

Conductors = dict[str, str]  # conductor name -> node


@dataclass(slots=True)
class _Wiring:
    """What has been wired so far: branches, and the load-end nodes of every part (and of each tail)."""

    installation: Installation
    branches: list[Branch] = field(default_factory=list)
    ends: dict[str, Conductors] = field(default_factory=dict)
    blades: list[Blade] = field(default_factory=list)

    @property
    def supply(self) -> Part:
        """The one supply."""
        return self.installation.of_kind("supply")[0]

    @property
    def system(self) -> System:
        """Its volts, hertz and lines."""
        return SYSTEMS[self.supply.text("system")]

    def add(self, branch_id: str, start: str, end: str, ohms: complex, kind: str, owner: str, emf: complex = 0j) -> None:
        self.branches.append(Branch(branch_id, start, end, complex(ohms), kind, owner, emf))


def build(installation: Installation) -> Network:
    """The healthy Network of an installation: one branch per conductor and part, one sensor per device position."""
    wiring = _Wiring(installation)
    for part in installation.parts:
        _BUILDERS[part.kind](part, wiring)
    present = {branch.id for branch in wiring.branches}
    nodes: dict[str, set[str]] = {}  # part id -> its nodes
    for branch in wiring.branches:
        for node in (branch.from_node, branch.to_node):
            nodes.setdefault(base(node), set()).add(node)
    sensors = tuple(_sensor(part, installation, present, nodes) for part in installation.of_kind("feeder", "receptacle", "main"))
    hulls = tuple((part.id, f"{part.id}.metal") for part in installation.of_kind("hull"))
    return checked(Network(wiring.system.hertz, EARTH, tuple(wiring.branches), sensors, tuple(wiring.blades), hulls))


def _sensor(part: Part, installation: Installation, present: set[str], nodes: Mapping[str, set[str]]) -> Sensor:
    enclosed = tuple(f"{part.id}.{conductor}" for conductor in ("L1", "L2", "N") if f"{part.id}.{conductor}" in present)
    zone = frozenset(node for owner in zone_parts(installation, part) for node in nodes.get(owner, ()))
    return Sensor(part.id, enclosed, part.text("device"), zone)


def zone_parts(installation: Installation, part: Part) -> frozenset[str]:
    """The parts inside a sensor's zone.

    A feeder's and a main's zone is all that hangs on it. A receptacle's is its cord and everything aboard, up to the
    terminals of every other shore receptacle that also reaches this boat.
    """
    if part.id not in installation.zones:
        installation.zones[part.id] = _zone_parts(installation, part)
    return installation.zones[part.id]


def _zone_parts(installation: Installation, part: Part) -> frozenset[str]:
    if part.kind != "receptacle":
        return installation.downstream(part.id)
    found = {part.id}
    waiting = [part]
    while waiting:
        member = waiting.pop()
        near = list(installation.children(member.id))
        if member.kind != "receptacle":  # beyond a receptacle lies the dock
            near += [installation.part(base(parent)) for parent in member.parents if parent]
        new = [one for one in near if one.kind not in ASHORE and one.id not in found]
        found.update(one.id for one in new)
        waiting += new
    return frozenset(found)


def _wire_ohms(part: Part) -> dict[str, float]:
    """Ohms per conductor of a wired part: explicit where given, else from length and gauge (copper at 20 degrees C)."""
    awg = part.number("awg")
    area = awg_area_mm2(round(awg)) if awg is not None else part.number("area_mm2")
    ohms = copper_ohms(part.number("length_m") or 0.0, area or 1.0)
    return {
        "line": part.number("line_ohms") or ohms,
        "neutral": part.number("neutral_ohms") or part.number("line_ohms") or ohms,
        "ground": part.number("ground_ohms") or ohms,
    }


def _short_ohms(part: Part) -> dict[str, float]:
    line = part.number("line_ohms") or SWITCH_OHMS
    return {"line": line, "neutral": part.number("neutral_ohms") or line, "ground": part.number("ground_ohms") or line}


def _role(conductor: str) -> str:
    return {"N": "neutral", "G": "ground"}.get(conductor[0], "line")


_BRANCH_KIND = {"line": "line", "neutral": "neutral", "ground": "protective"}


def _supply(part: Part, wiring: _Wiring) -> None:
    system = wiring.system
    volts = part.number("volts") or system.volts
    star = f"{part.id}.star"
    ends: Conductors = {}
    for line, degrees in system.lines.items():
        ends[line] = f"{part.id}.{line}"
        wiring.add(f"{part.id}.{line}", star, ends[line], part.number("line_ohms") or 0, "source", part.id, polar(volts, degrees))
    ends["N"], ends["G"] = f"{part.id}.N", f"{part.id}.G"
    wiring.add(f"{part.id}.N", star, ends["N"], part.number("neutral_ohms") or 0, "neutral", part.id)
    wiring.add(f"{part.id}.bond", ends["N"], ends["G"], part.number("bond_ohms") or 0, "bond", part.id)
    wiring.add(f"{part.id}.earth", ends["G"], EARTH, part.number("earth_ohms") or 0, "water", part.id)
    wiring.ends[part.id] = ends


def _through(part: Part, source: Conductors, wiring: _Wiring, ohms: Mapping[str, float], conductors: Iterable[str] | None = None) -> None:
    """One branch per conductor, from the load end of the part before to this part's own load end."""
    ends: Conductors = {}
    for conductor in conductors if conductors is not None else source:
        ends[conductor] = f"{part.id}.{conductor}"
        role = _role(conductor)
        wiring.add(f"{part.id}.{conductor}", source[conductor], ends[conductor], ohms[role], _BRANCH_KIND[role], part.id)
    wiring.ends[part.id] = ends


def _source(part: Part, number: int, wiring: _Wiring) -> Conductors:
    """The conductors a part hangs on, or the bare blades of its loose plug."""
    parent = part.parents[number]
    if parent:
        return wiring.ends[parent]
    tail = "plug" if len(part.parents) == 1 else f"plug_{'ab'[number]}"
    conductors = ("L1", "L2", "N", "G") if _carries_two_lines(part, wiring.installation) else ("L1", "N", "G")
    blades = {conductor: f"{part.id}.{tail}.{conductor}" for conductor in conductors}
    wiring.blades += [Blade(node, node) for node in blades.values()]
    return blades


def _carries_two_lines(part: Part, installation: Installation) -> bool:
    """Whether a loose plug has two line blades: what hangs on it needs the second line and it is no combining Y tail."""
    if part.kind == "adapter":
        return part.text("style") in ("splitting_y", "straight_50_30")
    below = [installation.part(part_id) for part_id in installation.downstream(part.id)]
    styles = {child.text("style") for child in below if child.kind == "adapter"}
    if styles & {"splitting_y", "straight_50_30"}:
        return True
    return not styles and any("L2" in load.text("across") for load in below if load.kind == "load")


def _feeder(part: Part, wiring: _Wiring) -> None:
    _through(part, wiring.ends[part.parents[0]], wiring, _wire_ohms(part))


def _cord(part: Part, wiring: _Wiring) -> None:
    _through(part, _source(part, 0, wiring), wiring, _wire_ohms(part))


def _pedestal(part: Part, wiring: _Wiring) -> None:
    _through(part, wiring.ends[part.parents[0]], wiring, _short_ohms(part))


def _inlet(part: Part, wiring: _Wiring) -> None:
    _through(part, _source(part, 0, wiring), wiring, _short_ohms(part))


def _receptacle(part: Part, wiring: _Wiring) -> None:
    connector = CONNECTORS[part.text("connector")]
    shore = wiring.ends[part.parents[0]]
    lines = {"L1": shore[part.text("leg")]} if connector.lines == 1 else {"L1": shore["L1"], "L2": shore["L2"]}
    _through(part, {**lines, "N": shore["N"], "G": shore["G"]}, wiring, _short_ohms(part))
    if not part.flag("closed"):
        opened = {f"{part.id}.{line}" for line in lines} | ({f"{part.id}.N"} if connector.opens == "all" else set())
        wiring.branches = [branch for branch in wiring.branches if branch.id not in opened]


def _joined(part: Part, sources: list[Conductors], wiring: _Wiring, ohms: Mapping[str, float]) -> None:
    """Two supply ends in one part: each brings a line, and their neutrals and grounds meet."""
    ends = {conductor: f"{part.id}.{conductor}" for conductor in ("L1", "L2", "N", "G")}
    for tail, line, source in zip("ab", ("L1", "L2"), sources, strict=True):
        wiring.add(f"{part.id}.{line}", source["L1"], ends[line], ohms["line"], "line", part.id)
        wiring.add(f"{part.id}.{tail}.N", source["N"], ends["N"], ohms["neutral"], "neutral", part.id)
        wiring.add(f"{part.id}.{tail}.G", source["G"], ends["G"], ohms["ground"], "protective", part.id)
    wiring.ends[part.id] = ends


def _adapter(part: Part, wiring: _Wiring) -> None:
    sources = [_source(part, number, wiring) for number in range(len(part.parents))]
    ohms = _short_ohms(part)
    style = part.text("style")
    if len(sources) == 2:
        _joined(part, sources, wiring, ohms)
    elif style == "splitting_y":
        source = sources[0]
        for tail, line in zip("ab", ("L1", "L2" if "L2" in source else "L1"), strict=True):
            ends = {conductor: f"{part.id}.{tail}.{conductor}" for conductor in ("L1", "N", "G")}
            for conductor, end in ends.items():
                role = _role(conductor)
                start = source[line] if conductor == "L1" else source[conductor]
                wiring.add(end, start, end, ohms[role], _BRANCH_KIND[role], part.id)
            wiring.ends[f"{part.id}.{tail}"] = ends
    else:
        source = dict(sources[0])
        if style == "straight_50_30":
            source.pop("L2", None)
        elif style == "straight_30_50":
            source = {"L1": source["L1"], "L2": source["L1"], "N": source["N"], "G": source["G"]}
        _through(part, source, wiring, ohms)


def _main(part: Part, wiring: _Wiring) -> None:
    _through(part, wiring.ends[part.parents[0]], wiring, _short_ohms(part))
    if not part.flag("closed"):
        opened = opened_by_main(part)
        wiring.branches = [branch for branch in wiring.branches if branch.id not in opened]


def opened_by_main(part: Part) -> frozenset[str]:
    """Branches a boat's main switch opens: the lines, and the neutral too when it has two poles."""
    lines = {f"{part.id}.L1", f"{part.id}.L2"}
    return frozenset(lines | {f"{part.id}.N"} if part.number("poles") == 2 else lines)


def _panel(part: Part, wiring: _Wiring) -> None:
    sources = [wiring.ends[parent] for parent in part.parents]
    if len(sources) == 2:
        _joined(part, sources, wiring, _short_ohms(part))
    else:
        _through(part, sources[0], wiring, _short_ohms(part))


def _fed(part: Part, installation: Installation) -> list[str]:
    """The live conductors a breaker feeds, in order L1, L2, N."""
    wanted = {conductor for child in installation.children(part.id) for conductor in child.text("across").split("-")}
    return [conductor for conductor in ("L1", "L2", "N") if conductor in wanted]


def _breaker(part: Part, wiring: _Wiring) -> None:
    source = wiring.ends[part.parents[0]]
    fed = _fed(part, wiring.installation)
    for conductor in fed:
        if conductor not in source:
            raise CaseError(f"{wiring.installation.paths[part.id]}.from", f"this panel has no {conductor}", part.parents[0])
    _through(part, source, wiring, _short_ohms(part), fed)
    wiring.ends[part.id]["G"] = source["G"]
    if not part.flag("closed"):
        opened = opened_by_breaker(part, wiring.installation)
        wiring.branches = [branch for branch in wiring.branches if branch.id not in opened]


def opened_by_breaker(part: Part, installation: Installation) -> frozenset[str]:
    """Branches a branch breaker opens: its first line with one pole, all it feeds with two."""
    fed = _fed(part, installation)
    return frozenset(f"{part.id}.{conductor}" for conductor in (fed if part.number("poles") == 2 else fed[:1]))


def load_ohms(part: Part, volts: float) -> complex:
    """Impedance of a load from ohms, watts or amperes at the nominal voltage across it; an inductive power factor lags."""
    power_factor = part.number("power_factor") or 1.0
    if part.values["ohms"] is not None:
        size = part.number("ohms") or 0.0
    elif part.values["watts"] is not None:
        size = volts**2 * power_factor / (part.number("watts") or 1.0)
    else:
        size = volts / (part.number("amperes") or 1.0)
    return size * complex(power_factor, math.sqrt(1 - power_factor**2))


def _load(part: Part, wiring: _Wiring) -> None:
    source = wiring.ends[part.parents[0]]
    first, second = part.text("across").split("-")
    for conductor in (first, second):
        if conductor not in source:
            raise CaseError(f"{wiring.installation.paths[part.id]}.across", f"nothing brings {conductor} to it", part.text("across"))
    system = wiring.system
    phase = wiring.supply.number("volts") or system.volts
    volts = phase * abs(polar(1, system.lines["L1"]) - (0 if second == "N" else polar(1, system.lines["L2"])))
    near, frame = f"{part.id}.in", f"{part.id}.frame"
    wiring.add(f"{part.id}.G", frame, source["G"], part.number("ground_ohms") or SWITCH_OHMS, "protective", part.id)
    if part.flag("on"):
        wiring.add(f"{part.id}.switch", source[first], near, SWITCH_OHMS, "line", part.id)
    ohms = load_ohms(part, volts)
    if part.flag("element"):
        cuts = (0.0, *ELEMENT_TAPS, 1.0)
        nodes = (near, *(tap_node(part.id, tap) for tap in ELEMENT_TAPS), source[second])
        for number, (start, end) in enumerate(itertools.pairwise(nodes)):
            wiring.add(f"{part.id}.element{number}", start, end, ohms * (cuts[number + 1] - cuts[number]), "load", part.id)
    else:
        wiring.add(f"{part.id}.load", near, source[second], ohms, "load", part.id)
    farads = (part.number("filter_nf") or 0.0) * 1e-9
    if farads:
        reactance = -1j / (2 * math.pi * system.hertz * farads)
        wiring.add(f"{part.id}.filter", near, frame, reactance, "filter", part.id)
        if second != "N":
            wiring.add(f"{part.id}.filter2", source[second], frame, reactance, "filter", part.id)


def tap_node(part_id: str, position: float) -> str:
    """The node at a tap of a heating element, `position` from 0 (line end) to 1."""
    return f"{part_id}.tap{position!r}"


def _hull(part: Part, wiring: _Wiring) -> None:
    metal = f"{part.id}.metal"
    for number, parent in enumerate(part.parents):
        branch_id = f"{part.id}.bond" if number == 0 else f"{part.id}.bond{number + 1}"
        wiring.add(branch_id, wiring.ends[parent]["G"], metal, part.number("bond_ohms") or SWITCH_OHMS, "protective", part.id)
    if part.flag("afloat"):
        wiring.add(f"{part.id}.water", metal, EARTH, part.number("water_ohms") or 1.0, "water", part.id)


_BUILDERS = {
    "supply": _supply,
    "feeder": _feeder,
    "pedestal": _pedestal,
    "receptacle": _receptacle,
    "adapter": _adapter,
    "cord": _cord,
    "inlet": _inlet,
    "main": _main,
    "panel": _panel,
    "breaker": _breaker,
    "load": _load,
    "hull": _hull,
}
