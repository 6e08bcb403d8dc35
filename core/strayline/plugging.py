"""What is plugged between the dock and the boat: cords, adapters, inlets, and the bare blades of a plug that hangs loose."""

from __future__ import annotations

from typing import TYPE_CHECKING

from strayline.components import ADAPTERS, CONNECTORS, LINES
from strayline.network import Blade
from strayline.wiring import Conductors, Wiring, branch_kind, lines_in, role, short_ohms, tail_ohms, wire_ohms

if TYPE_CHECKING:
    from strayline.parts import Installation, Part

SECONDARY_BOND_OHMS = 0.005  # neutral to ground inside an isolated combiner
EXCHANGES = {"line_neutral": ("L1", "N"), "neutral_ground": ("N", "G"), "line_ground": ("L1", "G")}


def cord(part: Part, wiring: Wiring) -> None:
    """A cord, as long and thick as stated."""
    wiring.through(part, _source(part, 0, wiring), wire_ohms(part, wiring.system.hertz))


def inlet(part: Part, wiring: Wiring) -> None:
    """The boat's inlet."""
    wiring.through(part, _source(part, 0, wiring), short_ohms(part))


def adapter(part: Part, wiring: Wiring) -> None:
    """An adapter of any style, wired as `wired` says."""
    sources = [_exchanged(part, _source(part, number, wiring)) for number in range(len(part.parents))]
    way = ADAPTERS[part.text("style")].wiring
    if way == "isolated":
        _isolated(part, sources, wiring)
    elif len(sources) == 2:
        wiring.joined(part, sources, (short_ohms(part), tail_ohms(part)))
    elif way == "split":
        _split(part, sources[0], wiring)
    else:
        source = dict(sources[0])
        if way == "first":
            source = {name: node for name, node in source.items() if name not in LINES[1:]}
        elif way == "both":
            source = {"L1": source["L1"], "L2": source["L1"], "N": source["N"], "G": source["G"]}
        wiring.through(part, source, short_ohms(part))
    if part.text("wired") == "ground_open":
        wiring.open([branch.id for branch in wiring.branches if branch.owner == part.id and branch.kind == "protective"])


def _exchanged(part: Part, source: Conductors) -> Conductors:
    one, other = EXCHANGES.get(part.text("wired"), ("L1", "L1"))
    return {**source, one: source[other], other: source[one]}


def _split(part: Part, source: Conductors, wiring: Wiring) -> None:
    """One plug, two outlets: a line to each, the only line to both where there is no second."""
    lines = lines_in(source)
    for tail, line, ohms in zip("ab", (lines[0], lines[-1]), (short_ohms(part), tail_ohms(part)), strict=True):
        ends = {conductor: f"{part.id}.{tail}.{conductor}" for conductor in ("L1", "N", "G")}
        for conductor, end in ends.items():
            start = source[line] if conductor == "L1" else source[conductor]
            wiring.add(end, start, end, ohms[role(conductor)], branch_kind(conductor), part.id)
        wiring.ends[f"{part.id}.{tail}"] = ends


def _isolated(part: Part, sources: list[Conductors], wiring: Wiring) -> None:
    """A transformer for each of two plugs; their secondaries meet in a neutral of their own, tied to the dock's ground."""
    ends = {conductor: f"{part.id}.{conductor}" for conductor in ("L1", "L2", "N", "G")}
    rated = CONNECTORS[ADAPTERS[part.text("style")].plugs[0]].rated_a
    for tail, line, source in zip("ab", ("L1", "L2"), sources, strict=True):
        primary = (f"{tail}.primary", source["L1"], source["N"])
        wiring.transformer(part, primary, [(f"{tail}.secondary", ends[line], ends["N"], 1.0)], wiring.phase_volts / rated)
        wiring.add(f"{part.id}.{tail}.G", source["G"], ends["G"], short_ohms(part)["ground"], "protective", part.id)
    wiring.add(f"{part.id}.bond", ends["N"], ends["G"], SECONDARY_BOND_OHMS, "bond", part.id)
    wiring.ends[part.id] = ends


def _source(part: Part, number: int, wiring: Wiring) -> Conductors:
    """The conductors a part hangs on, or the bare blades of its loose plug."""
    parent = part.parents[number]
    if parent:
        return wiring.ends[parent]
    tail = "plug" if len(part.parents) == 1 else f"plug_{'ab'[number]}"
    blades = {name: f"{part.id}.{tail}.{name}" for name in (*LINES[: _loose_lines(part, wiring.installation)], "N", "G")}
    wiring.blades += [Blade(node, node) for node in blades.values()]
    return blades


def _loose_lines(part: Part, installation: Installation) -> int:
    """How many line blades a loose plug has: those of its type where that is known, else as many as what hangs on it needs."""
    fed = installation.downstream(part.id)
    below = [one for one in installation.parts if one.id in fed]  # itself first
    known = [plug for one in below if (plug := _plug(one))]
    if known:
        return CONNECTORS[known[0]].lines
    needed = [load.text("across") for load in below if load.kind == "load"]
    return max((number for number, line in enumerate(LINES, 1) for across in needed if line in across), default=1)


def _plug(part: Part) -> str | None:
    """The type of a part's plug, where it has one of a known type."""
    if part.kind == "adapter":
        return next(iter(ADAPTERS[part.text("style")].plugs), None)
    stated = part.values.get("connector") if part.kind in ("cord", "inlet") else None
    return None if stated is None else str(stated)
