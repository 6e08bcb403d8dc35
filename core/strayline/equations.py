"""The equations of a network: which voltages and currents are unknown, the matrix between them, and what a reading weighs.

Unknowns are the voltages of the nodes and the currents of those branches that a sensor encloses, that hold an emf, that are coupled, or
that are below `CURRENT_BELOW_OHMS`; every other branch is an admittance. A current unknown's row says V(from) - V(to) - Z * I = -emf, where
windings on one core add -j omega M times each other's current; the matrix stays symmetric. A reading is
thus a current the solve itself gave, never a small voltage divided by a small impedance, and no entry of a branch exceeds one in size.

An island with no connection to the reference has one node tied to it. The tie carries no current, because nothing else connects, and
the island's voltages are withheld: only differences inside it mean anything. Nothing is added to make a circuit solvable.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from strayline.elimination import SingularError, Triangle, eliminate
from strayline.errors import NetworkError
from strayline.network import nodes

if TYPE_CHECKING:
    from strayline.elimination import Row
    from strayline.network import Network

CURRENT_BELOW_OHMS = 1.0


@dataclass(frozen=True, slots=True)
class Probe:
    """A linear functional of a solution: the sum of sign * current over `branches` and of sign * voltage over `nodes`."""

    branches: tuple[tuple[str, int], ...] = ()
    nodes: tuple[tuple[str, int], ...] = ()


class Equations:
    """The unknowns of a network, in node order and then in branch order, and where each stands in the matrix.

    `floating` holds the names of the nodes with no connection to the reference, `ties` those of them that are tied to it.
    """

    __slots__ = ("_branches", "_flows", "_islands", "_nodes", "floating", "network", "ties")

    def __init__(self, network: Network) -> None:
        self.network = network
        names = nodes(network)
        self._islands = _islands(network, names)
        home = self._islands[network.reference]
        self.floating = tuple(name for name in names if self._islands[name] != home)
        # An island is named by its first node, which is the one that is tied; -1 marks a node whose voltage is zero by choice.
        self.ties = tuple(name for name in self.floating if self._islands[name] == name)
        free = [name for name in names if self._islands[name] != name]
        self._nodes = {**dict.fromkeys(names, -1), **{name: place for place, name in enumerate(free)}}
        counted = {branch_id for sensor in network.sensors for branch_id in sensor.branches}
        counted.update(winding for each in network.couplings for winding in (each.one, each.other))
        self._branches = {branch.id: branch for branch in network.branches}
        flows = [
            branch.id for branch in network.branches if branch.id in counted or branch.emf or abs(branch.impedance) < CURRENT_BELOW_OHMS
        ]
        self._flows = {branch_id: len(free) + place for place, branch_id in enumerate(flows)}

    def triangle(self) -> Triangle:
        """Factors of the network's matrix; NetworkError, in terms of the circuit, if it has no single solution."""
        _check_no_ideal_loop(self.network)
        potentials = sum(place >= 0 for place in self._nodes.values())
        rows: list[Row] = [{place: 0j} for place in range(potentials + len(self._flows))]
        for branch in self.network.branches:
            a, b = self._nodes[branch.from_node], self._nodes[branch.to_node]
            flow = self._flows.get(branch.id)
            if flow is None:
                _stamp_admittance(rows, a, b, 1 / branch.impedance)
            else:
                _stamp_current(rows, a, b, flow, branch.impedance)
        for each in self.network.couplings:
            one, other = self._flows[each.one], self._flows[each.other]
            rows[one][other] = rows[other][one] = -each.impedance
        try:
            return eliminate(rows, potentials)
        except SingularError as singular:
            raise self._resonance(singular.unknowns) from None

    def _resonance(self, unknowns: tuple[int, ...]) -> NetworkError:
        # Ideal loops are refused and islands are tied, so only inductance against capacitance can still cancel a passive circuit.
        lost = set(unknowns)
        at = sorted(name for name, place in self._nodes.items() if place in lost)
        through = sorted(name for name, place in self._flows.items() if place in lost)
        where = ", ".join((at + through)[:4])
        rule = "inductance and capacitance cancel without any resistance, so nothing sets the current"
        return NetworkError(f"{where}: {rule}", name=where, rule=rule, value=None)

    def emfs(self) -> dict[int, complex]:
        """The right-hand side that the sources make."""
        return {self._flows[branch.id]: -branch.emf for branch in self.network.branches if branch.emf}

    def place(self, node: str) -> int:
        """Where a node's voltage stands among the unknowns; -1 where it is zero by choice."""
        try:
            return self._nodes[node]
        except KeyError:
            raise NetworkError(f"{node}: no such node", name=node, rule="no such node", value=None) from None

    def connected(self, a: str, b: str) -> bool:
        """Whether any path of branches joins two nodes."""
        self.place(a), self.place(b)
        return self._islands[a] == self._islands[b]

    def weights(self, probe: Probe) -> dict[int, complex] | None:
        """A probe's coefficients in the unknowns; None where it asks for a voltage between islands."""
        weights: dict[int, complex] = {}
        home = self._islands[self.network.reference]
        afloat: dict[str, int] = {}
        for node, sign in probe.nodes:
            _add(weights, self.place(node), sign)
            if self._islands[node] != home:
                afloat[self._islands[node]] = afloat.get(self._islands[node], 0) + sign
        if any(afloat.values()):
            return None
        for branch_id, sign in probe.branches:
            branch = self._branches.get(branch_id)
            if branch is None:
                raise NetworkError(f"{branch_id}: no such branch", name=branch_id, rule="no such branch", value=None)
            flow = self._flows.get(branch_id)
            if flow is None:
                _add(weights, self._nodes[branch.from_node], sign / branch.impedance)
                _add(weights, self._nodes[branch.to_node], -sign / branch.impedance)
            else:
                _add(weights, flow, sign)
        return weights


def _add(weights: dict[int, complex], place: int, weight: complex) -> None:
    if place >= 0:
        weights[place] = weights.get(place, 0j) + weight


def _stamp_admittance(rows: list[Row], a: int, b: int, admittance: complex) -> None:
    if a >= 0:
        rows[a][a] += admittance
    if b >= 0:
        rows[b][b] += admittance
    if a >= 0 and b >= 0:
        rows[a][b] = rows[b][a] = rows[a].get(b, 0j) - admittance


def _stamp_current(rows: list[Row], a: int, b: int, flow: int, impedance: complex) -> None:
    rows[flow][flow] = -impedance
    if a >= 0:
        rows[a][flow] = rows[flow][a] = 1 + 0j
    if b >= 0:
        rows[b][flow] = rows[flow][b] = -1 + 0j


def _root(parents: dict[str, str], name: str) -> str:
    while parents[name] != name:
        parents[name] = name = parents[parents[name]]
    return name


def _islands(network: Network, names: tuple[str, ...]) -> dict[str, str]:
    """For each node the first node, in node order, of the island it belongs to."""
    order = {name: place for place, name in enumerate(names)}
    parents = {name: name for name in names}
    for branch in network.branches:
        a, b = _root(parents, branch.from_node), _root(parents, branch.to_node)
        first, later = (a, b) if order[a] < order[b] else (b, a)
        parents[later] = first
    return {name: _root(parents, name) for name in names}


def _check_no_ideal_loop(network: Network) -> None:
    parents = {name: name for branch in network.branches if not branch.impedance for name in (branch.from_node, branch.to_node)}
    for branch in network.branches:
        if not branch.impedance:
            a, b = _root(parents, branch.from_node), _root(parents, branch.to_node)
            if a == b:
                rule = "closes a loop of ideal sources: nothing limits the current around it"
                raise NetworkError(f"{branch.id}: {rule}", name=branch.id, rule=rule, value=None)
            parents[a] = b
