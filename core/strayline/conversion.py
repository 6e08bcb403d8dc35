"""What turns, blocks or makes power aboard: galvanic isolators, transformers, generators, transfer switches, inverters."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from strayline.errors import CaseError
from strayline.network import Isolator
from strayline.phasor import polar
from strayline.wiring import Conductors, Wiring, branch_kind, lines_in, role, short_ohms

if TYPE_CHECKING:
    from strayline.parts import Part

# Two diodes each way stand off about 1.2 V peak; a leaking diode passes well under a milliampere (common practice).
DIODE_VOLTS, BLOCKING_OHMS, CONDUCTING_OHMS = 1.2 / math.sqrt(2.0), 10_000.0, 0.02
CAPACITOR_UF = 10_000.0  # a capacitor type passes alternating current at any voltage and blocks only direct current
UNSHIELDED = 0.01  # share of the winding capacitance that a shield leaves
INVERTER_OHMS = 0.05  # output impedance of an inverter (common practice)
FRAME_BOND_OHMS = 0.005


def isolator(part: Part, wiring: Wiring) -> None:
    """A galvanic isolator: live conductors pass, the protective conductor goes through it."""
    source = wiring.ends[part.parents[0]]
    wiring.through(part, source, short_ohms(part), [conductor for conductor in source if conductor != "G"])
    end = f"{part.id}.G"
    ohms = complex(CONDUCTING_OHMS)
    if part.text("style") == "capacitor":
        ohms -= 1j / (2 * math.pi * wiring.system.hertz * CAPACITOR_UF * 1e-6)
    elif part.text("state") != "conducts":
        ohms = complex(BLOCKING_OHMS)
        if part.text("state") == "auto":
            wiring.isolators.append(Isolator(end, DIODE_VOLTS, CONDUCTING_OHMS))
    wiring.add(end, source["G"], end, ohms, "protective", part.id)
    wiring.ends[part.id]["G"] = end


def transformer(part: Part, wiring: Wiring) -> None:
    """An isolation transformer (the shore's ground ends at its shield) or a polarization transformer (it passes through).

    A one-line source feeds line to neutral and gives one line, or with a split secondary two of the same voltage; a two-line source feeds
    line to line and gives a split secondary of half its voltage each. The secondary's neutral is tied to the boat's ground where bonded.
    Three lines are refused.
    """
    source = wiring.ends[part.parents[0]]
    wide = "L2" in source
    if "L3" in source:
        raise CaseError(f"{wiring.installation.paths[part.id]}.from", "a transformer takes one line or two, not three", part.parents[0])
    far = "L2" if wide else "N"
    volts = wiring.nominal_volts(f"L1-{far}")
    ends: Conductors = {conductor: f"{part.id}.{conductor}" for conductor in ("L1", "N", "G")}
    halves = [("secondary", ends["L1"], ends["N"], 0.5 if wide else 1.0)]
    if wide or part.text("secondary") == "split":
        ends = {"L1": ends["L1"], "L2": f"{part.id}.L2", "N": ends["N"], "G": ends["G"]}
        halves.append(("secondary2", ends["N"], ends["L2"], halves[0][3]))
    wiring.transformer(part, ("primary", source["L1"], source[far]), halves, volts / (part.number("rated_a") or 1.0))
    nanofarads = part.number("winding_nf") or 1.0
    if part.flag("shield"):
        wiring.capacitor(f"{part.id}.shield", source["L1"], source["G"], nanofarads, part.id)
        nanofarads *= UNSHIELDED
    wiring.capacitor(f"{part.id}.winding", source["L1"], ends["L1"], nanofarads, part.id)
    if part.text("style") == "polarization":
        wiring.add(ends["G"], source["G"], ends["G"], CONDUCTING_OHMS, "protective", part.id)
    if part.flag("bonded"):
        wiring.add(f"{part.id}.bond", ends["N"], ends["G"], part.number("bond_ohms") or FRAME_BOND_OHMS, "bond", part.id)
    wiring.ends[part.id] = ends


def generator(part: Part, wiring: Wiring) -> None:
    """A generator aboard: running or still, its neutral, its bond to the frame and the frame's ground are there."""
    star, frame = f"{part.id}.star", f"{part.id}.frame"
    volts = part.number("volts") or wiring.nominal_volts("L1-N")
    ends: Conductors = {}
    for line, degrees in (("L1", 0.0), ("L2", 180.0))[: int(part.number("lines") or 1)]:
        ends[line] = f"{part.id}.{line}"
        if part.flag("running"):
            wiring.add(ends[line], star, ends[line], part.number("line_ohms") or 1.0, "source", part.id, polar(volts, degrees))
    ends |= {"N": f"{part.id}.N", "G": f"{part.id}.G"}
    wiring.add(ends["N"], star, ends["N"], part.number("neutral_ohms") or 1.0, "neutral", part.id)
    if part.flag("bonded"):
        wiring.add(f"{part.id}.bond", star, frame, FRAME_BOND_OHMS, "bond", part.id)
    wiring.add(ends["G"], frame, ends["G"], part.number("ground_ohms") or 1.0, "protective", part.id)
    wiring.ends[part.id] = ends


def transfer(part: Part, wiring: Wiring) -> None:
    """A transfer switch: the lines of one source, its neutral alone where that is switched too, and always both grounds."""
    sources = [wiring.ends[parent] for parent in part.parents]
    chosen = int(part.number("position") or 1) - 1
    ohms = short_ohms(part)
    ends = {conductor: f"{part.id}.{conductor}" for conductor in (*lines_in(sources[chosen]), "N", "G")}
    for place, source in enumerate(sources):
        for conductor, end in ends.items():
            joined = conductor == "G" or (conductor == "N" and not part.flag("switched_neutral"))
            if place == chosen or joined:
                name = end if place == chosen else f"{part.id}.idle.{conductor}"
                wiring.add(name, source[conductor], end, ohms[role(conductor)], branch_kind(conductor), part.id)
    wiring.ends[part.id] = ends


def inverter(part: Part, wiring: Wiring) -> None:
    """An inverter/charger with a panel of its own behind it.

    passing   -- its relay connects input to output, and its bond is open
    inverting -- it feeds its output, bonded there, the input's line open: away from shore, or just after plugging in
    welded    -- passing, with the bond still closed; off -- nothing feeds the output, and the bond is closed
    Where the neutral is common, input and output share it in every state.
    """
    source = wiring.ends[part.parents[0]]
    state, ohms = part.text("state"), short_ohms(part)
    passing = state in ("passing", "welded")
    wiring.through(part, source, ohms, ["L1", "N", "G"])
    if not passing:
        wiring.open([f"{part.id}.L1"] + ([] if part.flag("common_neutral") else [f"{part.id}.N"]))
    ends = wiring.ends[part.id]
    if state == "inverting":
        wiring.add(f"{part.id}.source", ends["N"], ends["L1"], INVERTER_OHMS, "source", part.id, polar(wiring.nominal_volts("L1-N"), 0.0))
    if state != "passing":
        wiring.add(f"{part.id}.bond", ends["N"], ends["G"], part.number("bond_ohms") or FRAME_BOND_OHMS, "bond", part.id)
