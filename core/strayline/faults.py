"""One cause at one place and severity, and what it does to a network: the shapes that every room of causes shares.

Every effect is a function `(installation, network, fault) -> Effect`; the rooms `leaks`, `bonds`, `miswirings` and `overloads` hold
them by family, `causes` brings them together. Raises CaseError where a fault names a part that cannot have it.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

from strayline.boat import own_parts
from strayline.errors import CaseError
from strayline.network import Branch, Network
from strayline.parts import Installation, Part


@dataclass(frozen=True, slots=True)
class Fault:
    """One cause at one place and severity; only the numbers its cause uses are set.

    at -- part id; load -- the load, or other part, concerned; ohms; position along an element from 0 (line end) to 1; nanofarads;
    scale -- operating values of the devices that see it multiplied by this, or a starting load's running current;
    spontaneous -- probability of opening with no residual at all; duty -- share of the time for which it is there (the circuit
    shows it while it is)
    """

    cause: str
    at: str = ""
    load: str = ""
    ohms: float = 0.0
    position: float = 0.0
    nanofarads: float = 0.0
    scale: float = 1.0
    spontaneous: float = 0.0
    duty: float = 1.0


@dataclass(frozen=True, slots=True)
class Shunt:
    """An impedance in ohms from node `a` to node `b`; `absent_in` lists the contexts in which it is not there."""

    id: str
    a: str
    b: str
    ohms: complex
    kind: str
    owner: str
    absent_in: tuple[str, ...] = ()

    def branch(self) -> Branch:
        """The shunt as a branch of a network."""
        return Branch(self.id, self.a, self.b, complex(self.ohms), self.kind, self.owner)


@dataclass(frozen=True, slots=True)
class Effect:
    """The network a fault leaves, and the shunts it adds to it."""

    network: Network
    shunts: tuple[Shunt, ...] = ()


Change = Callable[[Installation, Network, Fault], Effect]


def stated_part(installation: Installation, part_id: str, *kinds: str, key: str = "at") -> Part:
    """The part of this id and of one of these kinds. Raises CaseError under `key`."""
    part = installation.index.get(part_id)
    if part is None or part.kind not in kinds:
        raise CaseError(key, f"must be the id of a {' or '.join(kinds)}", part_id)
    return part


def stated_ohms(fault: Fault) -> float:
    """The fault's ohms. Raises CaseError unless above zero."""
    if not fault.ohms > 0:
        raise CaseError("ohms", "must be above zero ohm", fault.ohms)
    return fault.ohms


def stated_reactance(fault: Fault, network: Network, shares: int = 1) -> complex:
    """Ohms of one share of the fault's nanofarads at the network's frequency. Raises CaseError unless above zero."""
    farads = fault.nanofarads * 1e-9 / shares
    if not farads > 0:
        raise CaseError("nanofarads", "must be above zero nF", fault.nanofarads)
    return -1j / (2 * math.pi * network.hertz * farads)


def boat_of(installation: Installation, fault: Fault) -> tuple[Part, ...]:
    """The parts of the boat whose panel the fault names, else of the own boat."""
    return own_parts(installation, stated_part(installation, fault.at, "panel").id if fault.at else None)


def own_panel(installation: Installation) -> Part:
    """The own boat's first panel. Raises CaseError where no boat is stated."""
    panels = installation.of_kind("panel")
    if not panels:
        raise CaseError("at", "needs a boat with a panel")
    return panels[0]


def chain_of(network: Network, load: Part) -> list[Branch]:
    """What a load consists of, from its line end to its far end: one branch, or more where taps and earlier leaks cut it."""
    starts = {
        branch.from_node: branch
        for branch in network.branches
        if branch.owner == load.id and branch.kind == "load" and branch.id.startswith(f"{load.id}.")
    }
    chain, node = [], f"{load.id}.in"
    while node in starts:
        chain.append(starts[node])
        node = starts[node].to_node
    return chain
