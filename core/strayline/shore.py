"""What stands ashore: supply and its earthing, dock feeder, pedestals, receptacles."""

from __future__ import annotations

from typing import TYPE_CHECKING

from strayline.components import CONNECTORS
from strayline.phasor import polar
from strayline.wiring import EARTH, Conductors, Wiring, lines_in, short_ohms, wire_ohms

if TYPE_CHECKING:
    from strayline.parts import Part


def earthing(part: Part, default: str) -> str:
    """How a supply is earthed: stated, or as its system usually is."""
    return default if part.values["earthing"] is None else part.text("earthing")


def supply(part: Part, wiring: Wiring) -> None:
    """Sources in star, the neutral where the system has one, and the way of earthing (IEC 60364-1).

    tn_c_s -- neutral and protective conductor are one up to here, and are bonded here: `neutral_ohms` are the PEN conductor's
    tn_s   -- they part at the star point; tt -- the protective conductor has an electrode of its own, and nothing joins it to the neutral
    it     -- the star point is not earthed; the lines reach the earth through the capacitance of the whole network
    """
    system = wiring.system
    star, ground = f"{part.id}.star", f"{part.id}.G"
    ends: Conductors = {}
    for line, degrees in system.lines.items():
        ends[line] = f"{part.id}.{line}"
        wiring.add(ends[line], star, ends[line], part.number("line_ohms") or 0, "source", part.id, polar(wiring.phase_volts, degrees))
    if system.neutral:
        ends["N"] = f"{part.id}.N"
        wiring.add(ends["N"], star, ends["N"], part.number("neutral_ohms") or 0, "neutral", part.id)
    ends["G"] = ground
    way = earthing(part, system.earthing)
    if way in ("tn_s", "tn_c_s"):
        bonded = ends["N"] if way == "tn_c_s" and system.neutral else star
        wiring.add(f"{part.id}.bond", bonded, ground, part.number("bond_ohms") or 0, "bond", part.id)
    elif way == "tt":
        wiring.add(f"{part.id}.source_earth", star, EARTH, part.number("source_earth_ohms") or 0, "water", part.id)
    else:
        for line in system.lines:
            wiring.capacitor(f"{part.id}.{line}.capacitance", ends[line], EARTH, part.number("line_nf") or 0, part.id)
    wiring.add(f"{part.id}.earth", ground, EARTH, part.number("earth_ohms") or 0, "water", part.id)
    wiring.ends[part.id] = ends


def feeder(part: Part, wiring: Wiring) -> None:
    """The dock's own cable."""
    wiring.through(part, wiring.ends[part.parents[0]], wire_ohms(part, wiring.system.hertz))


def pedestal(part: Part, wiring: Wiring) -> None:
    """The post's busbars."""
    wiring.through(part, wiring.ends[part.parents[0]], short_ohms(part))


def receptacle(part: Part, wiring: Wiring) -> None:
    """The outlet's own conductors: as many lines as its type carries, from `leg` on.

    Without a neutral the next line is the second pole, and what is plugged in calls it N. `reversed` exchanges line and neutral.
    """
    connector = CONNECTORS[part.text("connector")]
    shore = wiring.ends[part.parents[0]]
    there = lines_in(shore)
    first = there.index(part.text("leg"))
    turned = there[first:] + there[:first]
    lines = {f"L{number}": shore[line] for number, line in enumerate(turned[: connector.lines], 1)}
    source = {**lines, "N": shore["N"] if "N" in shore else shore[turned[connector.lines]], "G": shore["G"]}
    if part.flag("reversed"):
        source |= {"L1": source["N"], "N": source["L1"]}
    wiring.through(part, source, short_ohms(part))
    if not part.flag("closed"):
        wiring.open([f"{part.id}.{line}" for line in lines] + ([f"{part.id}.N"] if connector.opens == "all" else []))
