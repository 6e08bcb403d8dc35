"""What every builder of parts shares: the branches and nodes wired so far, and the ohms of a part's conductors.

Each part owns the nodes at its load end, named `<part>.<conductor>`; its branches lead there from the load end of the part it hangs on.
Conductors are L1, L2, L3, N (neutral) and G (protective). A plug that hangs on nothing has bare blades, named `<part>.plug.<conductor>`.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from strayline.components import LINES, SYSTEMS, System
from strayline.network import Blade, Branch, Coupling, Isolator
from strayline.phasor import polar
from strayline.units import awg_area_mm2, cable_ohms, cable_reactance_ohms

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping, Sequence

    from strayline.parts import Installation, Part

EARTH = "earth"
SWITCH_OHMS = 0.002
# Degrees of the lines that the shore does not have: a second one is made aboard, opposite to the first; a third is as on three phases.
ELSEWHERE = {"L2": 180.0, "L3": 120.0}
MAGNETISING, LEAKAGE, COPPER = 0.03, 0.03, 0.01  # of a transformer, as shares of its rating (common practice)

Conductors = dict[str, str]  # conductor name -> node

_KINDS = {"line": "line", "neutral": "neutral", "ground": "protective"}


def nominal_volts(across: str, system: System, phase_volts: float) -> float:
    """Volts RMS across a load where nothing drops: between two lines, or from a line to what the boat calls neutral."""
    first, second = across.split("-")
    if second != "N":
        one, other = (system.lines[line] if line in system.lines else ELSEWHERE[line] for line in (first, second))
        return phase_volts * abs(polar(1, one) - polar(1, other))
    return phase_volts if system.neutral else phase_volts * math.sqrt(3.0)  # without a neutral, N is another line


def role(conductor: str) -> str:
    """Whose ohms a conductor has: "line", "neutral" or "ground"."""
    return {"N": "neutral", "G": "ground"}.get(conductor, "line")


def branch_kind(conductor: str) -> str:
    """The kind of branch a conductor is."""
    return _KINDS[role(conductor)]


@dataclass(slots=True)
class Wiring:
    """What has been wired so far: branches, and the load-end nodes of every part (and of each tail)."""

    installation: Installation
    branches: list[Branch] = field(default_factory=list)
    ends: dict[str, Conductors] = field(default_factory=dict)
    blades: list[Blade] = field(default_factory=list)
    couplings: list[Coupling] = field(default_factory=list)
    isolators: list[Isolator] = field(default_factory=list)
    opened: set[str] = field(default_factory=set)

    @property
    def supply(self) -> Part:
        """The one supply."""
        return next(part for part in self.installation.parts if part.kind == "supply")  # the first or close to it

    @property
    def system(self) -> System:
        """Its volts, hertz and lines."""
        return SYSTEMS[self.supply.text("system")]

    @property
    def phase_volts(self) -> float:
        """Volts RMS from each line to the star point: stated, or those of the system."""
        return self.supply.number("volts") or self.system.volts

    def nominal_volts(self, across: str) -> float:
        """Volts RMS of this supply across two conductors of the boat, such as "L1-N"."""
        return nominal_volts(across, self.system, self.phase_volts)

    def add(self, branch_id: str, start: str, end: str, ohms: complex, kind: str, owner: str, emf: complex = 0j) -> None:
        """Wire one branch."""
        self.branches.append(Branch(branch_id, start, end, complex(ohms), kind, owner, emf))

    def capacitor(self, branch_id: str, start: str, end: str, nanofarads: float, owner: str) -> None:
        """Wire one capacitor, at the supply's frequency."""
        self.add(branch_id, start, end, -1j / (2 * math.pi * self.system.hertz * nanofarads * 1e-9), "filter", owner)

    def open(self, branch_ids: Iterable[str]) -> None:
        """Leave out what a switch opens."""
        self.opened.update(branch_ids)

    def closed(self) -> tuple[Branch, ...]:
        """The branches that no switch leaves out."""
        return tuple(branch for branch in self.branches if branch.id not in self.opened)

    def through(self, part: Part, source: Conductors, ohms: Mapping[str, complex], conductors: Iterable[str] | None = None) -> None:
        """One branch per conductor, from the load end of the part before to this part's own load end."""
        ends: Conductors = {}
        for conductor in conductors if conductors is not None else source:
            ends[conductor] = f"{part.id}.{conductor}"
            self.add(ends[conductor], source[conductor], ends[conductor], ohms[role(conductor)], branch_kind(conductor), part.id)
        self.ends[part.id] = ends

    def joined(self, part: Part, sources: Sequence[Conductors], ohms: Sequence[Mapping[str, float]]) -> None:
        """Two supply ends in one part: each brings a line, and their neutrals and grounds meet. `ohms` for each."""
        ends = {conductor: f"{part.id}.{conductor}" for conductor in ("L1", "L2", "N", "G")}
        for tail, line, source, own in zip("ab", ("L1", "L2"), sources, ohms, strict=True):
            self.add(f"{part.id}.{line}", source["L1"], ends[line], own["line"], "line", part.id)
            self.add(f"{part.id}.{tail}.N", source["N"], ends["N"], own["neutral"], "neutral", part.id)
            self.add(f"{part.id}.{tail}.G", source["G"], ends["G"], own["ground"], "protective", part.id)
        self.ends[part.id] = ends

    def transformer(
        self, part: Part, primary: tuple[str, str, str], secondaries: Sequence[tuple[str, str, str, float]], ohms: float
    ) -> None:
        """Windings on one core: (name, from node, to node), each secondary with its share of the primary's turns.

        `ohms` is the rated voltage over the rated current of the primary. Equivalent circuit of a two-winding transformer: magnetising
        current, leakage reactance and copper are MAGNETISING, LEAKAGE and COPPER of the rating.
        """
        reactance = ohms / MAGNETISING
        tightness = math.sqrt(1 - MAGNETISING * LEAKAGE)
        windings = [(*primary, 1.0), *secondaries]
        for name, start, end, turns in windings:
            self.add(f"{part.id}.{name}", start, end, turns**2 * complex(COPPER * ohms, reactance), "winding", part.id)
        for place, (one, _, _, turns) in enumerate(windings):
            for other, _, _, more in windings[place + 1 :]:
                mutual = 1j * tightness * turns * more * reactance
                self.couplings.append(Coupling(f"{part.id}.{one}", f"{part.id}.{other}", mutual))


def lines_in(source: Mapping[str, str]) -> list[str]:
    """The lines among these conductors, in order."""
    return [line for line in LINES if line in source]


def wire_ohms(part: Part, hertz: float) -> dict[str, complex]:
    """Ohms per conductor of a wired part: the whole impedance where given, else from length, gauge and temperature, with its reactance."""
    awg = part.number("awg")
    area = awg_area_mm2(round(awg)) if awg is not None else part.number("area_mm2")
    length = part.number("length_m") or 0.0
    ohms = complex(cable_ohms(length, area or 1.0, part.number("celsius") or 0.0), cable_reactance_ohms(length, hertz))
    return {
        "line": part.number("line_ohms") or ohms,
        "neutral": part.number("neutral_ohms") or part.number("line_ohms") or ohms,
        "ground": part.number("ground_ohms") or ohms,
    }


def short_ohms(part: Part) -> dict[str, float]:
    """Ohms per conductor of a short part: blades, contacts, busbar."""
    line = part.number("line_ohms") or SWITCH_OHMS
    return {"line": line, "neutral": part.number("neutral_ohms") or line, "ground": part.number("ground_ohms") or line}


def tail_ohms(part: Part) -> dict[str, float]:
    """Ohms per conductor of an adapter's second tail: stated, else as the first one's."""
    first = short_ohms(part)
    return {name: part.number(f"{name}_b_ohms") or ohms for name, ohms in first.items()}
