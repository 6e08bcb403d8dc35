"""What stands aboard behind the inlet: boat mains, panels, breakers, loads, and the hull with its way into the water."""

from __future__ import annotations

import itertools
import math
from typing import TYPE_CHECKING

from strayline.components import HULL_RADIUS_M, LINES
from strayline.errors import CaseError
from strayline.water import WATERS, equivalent_radius_m, hemisphere_ohms
from strayline.wiring import EARTH, SWITCH_OHMS, Wiring, short_ohms

if TYPE_CHECKING:
    from strayline.parts import Installation, Part

ELEMENT_TAPS = (0.1, 0.5, 0.9)  # positions along a heating element, as a share of its length from the line end
NEEDS = {"inverter": ("L1", "N")}  # the live conductors that a breaker brings to what is no load


def main(part: Part, wiring: Wiring) -> None:
    """A boat's main switch."""
    wiring.through(part, wiring.ends[part.parents[0]], short_ohms(part))
    if not part.flag("closed"):
        wiring.open(opened_by_main(part))


def opened_by_main(part: Part) -> frozenset[str]:
    """Branches a boat's main switch opens: the lines, and the neutral too when it has two poles."""
    lines = {f"{part.id}.{line}" for line in LINES}
    return frozenset(lines | {f"{part.id}.N"} if part.number("poles") == 2 else lines)


def panel(part: Part, wiring: Wiring) -> None:
    """Buses: of one source, or of two whose neutrals and grounds meet here."""
    sources = [wiring.ends[parent] for parent in part.parents]
    if len(sources) == 2:
        wiring.joined(part, sources, (short_ohms(part), short_ohms(part)))
    else:
        wiring.through(part, sources[0], short_ohms(part))


def _fed(part: Part, installation: Installation) -> list[str]:
    """The live conductors a breaker feeds, lines first."""
    wanted: set[str] = set()
    for child in installation.children(part.id):
        wanted.update(NEEDS.get(child.kind) or child.text("across").split("-"))
    return [conductor for conductor in (*LINES, "N") if conductor in wanted]


def breaker(part: Part, wiring: Wiring) -> None:
    """A branch breaker and its wires."""
    source = wiring.ends[part.parents[0]]
    fed = _fed(part, wiring.installation)
    for conductor in fed:
        if conductor not in source:
            raise CaseError(f"{wiring.installation.paths[part.id]}.from", f"this panel has no {conductor}", part.parents[0])
    wiring.through(part, source, short_ohms(part), fed)
    wiring.ends[part.id]["G"] = source["G"]
    if not part.flag("closed"):
        wiring.open(opened_by_breaker(part, wiring.installation))


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


def load(part: Part, wiring: Wiring) -> None:
    """A load, in pieces where it is an element, with its switch in the first conductor (in both with two poles), frame and filter.

    A one-pole switch or thermostat that is open leaves the whole load on its second conductor.
    """
    source = wiring.ends[part.parents[0]]
    first, second = part.text("across").split("-")
    for conductor in (first, second):
        if conductor not in source:
            raise CaseError(f"{wiring.installation.paths[part.id]}.across", f"nothing brings {conductor} to it", part.text("across"))
    volts = wiring.nominal_volts(part.text("across"))
    near, far, frame = f"{part.id}.in", source[second], f"{part.id}.frame"
    wiring.add(f"{part.id}.G", frame, source["G"], part.number("ground_ohms") or SWITCH_OHMS, "protective", part.id)
    both = part.number("switch_poles") == 2
    if both:
        far = f"{part.id}.out"
    if part.flag("on"):
        wiring.add(f"{part.id}.switch", source[first], near, SWITCH_OHMS, "line", part.id)
        if both:
            kind = "neutral" if second == "N" else "line"
            wiring.add(f"{part.id}.switch2", far, source[second], SWITCH_OHMS, kind, part.id)
    ohms = load_ohms(part, volts)
    if part.flag("element"):
        cuts = (0.0, *ELEMENT_TAPS, 1.0)
        nodes = (near, *(tap_node(part.id, tap) for tap in ELEMENT_TAPS), far)
        for number, (start, end) in enumerate(itertools.pairwise(nodes)):
            wiring.add(f"{part.id}.element{number}", start, end, ohms * (cuts[number + 1] - cuts[number]), "load", part.id)
    else:
        wiring.add(f"{part.id}.load", near, far, ohms, "load", part.id)
    nanofarads = part.number("filter_nf")
    if nanofarads:
        wiring.capacitor(f"{part.id}.filter", near, frame, nanofarads, part.id)
        if second != "N" or not wiring.system.neutral:  # a neutral stands near ground and drives next to nothing
            wiring.capacitor(f"{part.id}.filter2", far, frame, nanofarads, part.id)


def tap_node(part_id: str, position: float) -> str:
    """The node at a tap of a heating element, `position` from 0 (line end) to 1."""
    return f"{part_id}.tap{position!r}"


def water_ohms(part: Part) -> float:
    """Ohms from a hull's bare underwater metal to the water far away: stated, or those of a hemisphere of its radius or area."""
    area = part.number("bare_m2")
    usual = HULL_RADIUS_M[part.text("material")] if area is None else equivalent_radius_m(area)
    return part.number("water_ohms") or hemisphere_ohms(WATERS[part.text("water")].typical, part.number("radius_m") or usual)


def hull(part: Part, wiring: Wiring) -> None:
    """The boat's metal, bonded to its ground, and in the water when afloat."""
    metal = f"{part.id}.metal"
    for number, parent in enumerate(part.parents):
        branch_id = f"{part.id}.bond" if number == 0 else f"{part.id}.bond{number + 1}"
        wiring.add(branch_id, wiring.ends[parent]["G"], metal, part.number("bond_ohms") or SWITCH_OHMS, "protective", part.id)
    if part.flag("afloat"):
        wiring.add(f"{part.id}.water", metal, EARTH, water_ohms(part), "water", part.id)
