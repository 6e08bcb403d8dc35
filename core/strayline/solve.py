"""Node voltages, branch currents and residuals of a Network, and what a shunt across any port would change.

A network is factored once (elimination of its equations) and solved once; each probe then costs one adjoint solve and each port one
more. Shunts across ports need no new factors: with open voltages V, port impedances Z and transfers K, the shunt currents q solve
(R + Z) q = V and a probe reads its value minus K q (Sherman-Morrison-Woodbury; Hager, "Updating the inverse of a matrix", SIAM Review 31
(1989) 221-239). Only a shunt that joins two islands is solved afresh, since it would send current through a tie.
"""

from __future__ import annotations

import cmath
import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from strayline.equations import Equations, Probe
from strayline.errors import NetworkError
from strayline.network import Branch, with_branches

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from strayline.network import Network

UNDEFINED = complex(math.nan, math.nan)


@dataclass(slots=True)
class Counts:
    """How much work was done since the module was loaded; tests read it, nothing decides by it."""

    factorizations: int = 0
    triangular_solves: int = 0


COUNTS = Counts()

Shunt = tuple[str, str, complex]  # node a, node b, ohms between them


@dataclass(frozen=True, slots=True)
class Port:
    """The Thevenin pair between two nodes: `open_voltage` is V(a) - V(b) in volts, `impedance` in ohms.

    Between different islands they are NaN and infinity.
    """

    a: str
    b: str
    open_voltage: complex
    impedance: complex


class Solution:
    """One solved state: voltages in volts RMS against the reference, currents in amperes RMS from `from_node` to `to_node`."""

    __slots__ = ("_equations", "_x", "floating", "network")

    def __init__(self, equations: Equations, x: list[complex]) -> None:
        self._equations = equations
        self._x = x
        self.network = equations.network
        self.floating = equations.floating

    def voltage(self, node: str) -> complex | None:
        """Voltage of a node against the reference; None where it floats."""
        value = self.at(Probe(nodes=((node, 1),)))
        return None if cmath.isnan(value) else value

    def current(self, branch_id: str) -> complex:
        """Current through a branch, counted from its `from_node` to its `to_node`."""
        return self.at(Probe(((branch_id, 1),)))

    def residual(self, sensor_id: str) -> complex:
        """Sum of the currents of the live conductors in a sensor's window, counted from supply to load."""
        return self.at(_window(self.network, sensor_id))

    def at(self, probe: Probe) -> complex:
        """Value of a probe, in amperes or volts; NaN for a voltage between islands."""
        weights = self._equations.weights(probe)
        if weights is None:
            return UNDEFINED
        x = self._x
        return sum((weight * x[place] for place, weight in weights.items()), 0j)


class Factors:
    """A factored network, with every solve already asked of it.

    The matrix is symmetric, so the response to one ampere through a port is the adjoint of that port's voltage.
    """

    __slots__ = ("_adjoints", "_equations", "_joined", "_ports", "_solution", "_triangle", "_values", "network")

    def __init__(self, network: Network) -> None:
        self.network = network
        self._equations = Equations(network)
        COUNTS.factorizations += 1
        self._triangle = self._equations.triangle()
        self._solution: Solution | None = None
        self._values: dict[Probe, complex] = {}
        self._adjoints: dict[Probe, list[complex]] = {}
        self._ports: dict[tuple[str, str], Port] = {}
        self._joined: dict[tuple[Shunt, ...], Factors] = {}

    def _difference(self, x: list[complex], a: str, b: str) -> complex:
        at_a, at_b = self._equations.place(a), self._equations.place(b)
        return (x[at_a] if at_a >= 0 else 0j) - (x[at_b] if at_b >= 0 else 0j)

    def solution(self) -> Solution:
        """The network as it stands."""
        if self._solution is None:
            COUNTS.triangular_solves += 1
            self._solution = Solution(self._equations, self._triangle.solve(self._equations.emfs()))
        return self._solution

    def value(self, probe: Probe) -> complex:
        """A probe's value in the network as it stands."""
        if probe not in self._values:
            self._values[probe] = self.solution().at(probe)
        return self._values[probe]

    def between(self, a: str, b: str) -> Probe:
        """The voltage V(a) - V(b); NetworkError where a node does not exist."""
        self._equations.place(a), self._equations.place(b)
        return Probe(nodes=((a, 1), (b, -1)))

    def port(self, a: str, b: str) -> Port:
        """The Thevenin pair seen between two nodes."""
        found = self._ports.get((a, b))
        if found is None:
            probe = self.between(a, b)
            joined = self._equations.connected(a, b)
            impedance = self._difference(self._adjoint(probe), a, b) if joined else math.inf
            found = self._ports[a, b] = Port(a, b, self.value(probe), impedance)
        return found

    def port_impedance(self, a: str, b: str) -> complex:
        """Impedance in ohms seen between two nodes with every source dead; infinite between islands."""
        return self.port(a, b).impedance

    def _adjoint(self, probe: Probe) -> list[complex]:
        if probe not in self._adjoints:
            COUNTS.triangular_solves += 1
            self._adjoints[probe] = self._triangle.solve(self._equations.weights(probe) or {})
        return self._adjoints[probe]

    def transfer(self, probe: Probe, a: str, b: str) -> complex:
        """K: by how much a probe's value falls for each ampere drawn out at a and put back at b."""
        return self._difference(self._adjoint(probe), a, b)

    def window_admittance(self, sensor_id: str) -> complex:
        """Residual in amperes for each volt put in series with every enclosed conductor, supply to load, all sources dead."""
        probe = _window(self.network, sensor_id)
        adjoint = self._adjoint(probe)
        return -sum((weight * adjoint[place] for place, weight in (self._equations.weights(probe) or {}).items()), 0j)

    def joined(self, shunts: Sequence[Shunt]) -> Factors | None:
        """Fresh factors with the shunts as branches, if one of them joins two islands; else None, and no factors are needed."""
        if all(self._equations.connected(a, b) for a, b, _ in shunts):
            return None
        key = tuple(shunts)
        if key not in self._joined:
            extra = (Branch(f"shunt {place}", a, b, ohms, "leak", "shunt") for place, (a, b, ohms) in enumerate(key))
            self._joined[key] = Factors(with_branches(self.network, *extra))
        return self._joined[key]

    def drawn(self, shunts: Sequence[Shunt], open_values: Iterable[complex]) -> list[complex]:
        """Currents q through the shunts, from a to b, when their open ports hold these values: (R + Z) q = open values."""
        if len(shunts) == 1:
            ((a, b, ohms),) = shunts
            total = ohms + self.port(a, b).impedance
            if total == 0:
                raise _cancelled(shunts)
            return [value / total for value in open_values]
        ports = [self.between(a, b) for a, b, _ in shunts]
        matrix = [
            [self.transfer(port, a, b) + (ohms if row == column else 0) for column, port in enumerate(ports)]
            for row, (a, b, ohms) in enumerate(shunts)
        ]
        return _gauss(matrix, list(open_values), shunts)


def _cancelled(shunts: Sequence[Shunt]) -> NetworkError:
    where = ", ".join(f"{a} to {b}" for a, b, _ in shunts)
    rule = "inductance and capacitance cancel without any resistance, so nothing sets the current"
    return NetworkError(f"{where}: {rule}", name=where, rule=rule, value=None)


def _gauss(matrix: list[list[complex]], right: list[complex], shunts: Sequence[Shunt]) -> list[complex]:
    """Solve the few equations between shunts by elimination with row exchanges."""
    size = len(matrix)
    for step in range(size):
        best = max(range(step, size), key=lambda row: abs(matrix[row][step]))
        if matrix[best][step] == 0:
            raise _cancelled(shunts)
        matrix[step], matrix[best] = matrix[best], matrix[step]
        right[step], right[best] = right[best], right[step]
        for row in range(step + 1, size):
            share = matrix[row][step] / matrix[step][step]
            right[row] -= share * right[step]
            for column in range(step, size):
                matrix[row][column] -= share * matrix[step][column]
    for row in reversed(range(size)):
        known = sum((matrix[row][column] * right[column] for column in range(row + 1, size)), 0j)
        right[row] = (right[row] - known) / matrix[row][row]
    return right


def factor(network: Network) -> Factors:
    """Factor a network once; NetworkError, told as a circuit fact, where it has no single solution."""
    return Factors(network)


def solve(network: Network) -> Solution:
    """The solved network."""
    return factor(network).solution()


def _window(network: Network, sensor_id: str) -> Probe:
    return Probe(tuple((branch_id, 1) for branch_id in network.sensor(sensor_id).branches))


def probe_residual(factors: Factors, sensor_id: str) -> Probe:
    """The residual of a sensor."""
    return _window(factors.network, sensor_id)


def probe_current(factors: Factors, signed: Iterable[tuple[str, int]]) -> Probe:
    """The sum of sign * current over branches of the network."""
    return Probe(tuple((factors.network.branch(branch_id).id, sign) for branch_id, sign in signed))


def probe_voltage(factors: Factors, a: str, b: str) -> Probe:
    """The voltage V(a) - V(b)."""
    return factors.between(a, b)


def sweep(factors: Factors, probes: Sequence[Probe], shunts: Sequence[Shunt]) -> list[complex]:
    """Values of all probes after connecting each shunt's ohms from its node a to its node b.

    NaN for a voltage between islands. Relative error about 1e-12. No new factors, unless a shunt joins two islands.
    """
    joined = factors.joined(shunts)
    if joined is not None:
        return [joined.value(probe) for probe in probes]
    if not shunts:
        return [factors.value(probe) for probe in probes]
    currents = factors.drawn(shunts, [factors.port(a, b).open_voltage for a, b, _ in shunts])
    return [
        factors.value(probe) - sum(factors.transfer(probe, a, b) * q for (a, b, _), q in zip(shunts, currents, strict=True))
        for probe in probes
    ]


def window_admittance(factors: Factors, sensor_id: str, shunts: Sequence[Shunt] = ()) -> complex:
    """Common-mode admittance, in siemens, of the loop that closes through a sensor's window, with the shunts connected.

    It is the residual for one volt in series with every enclosed conductor, counted from supply to load, and all sources dead.
    """
    joined = factors.joined(shunts)
    if joined is not None:
        return joined.window_admittance(sensor_id)
    alone = factors.window_admittance(sensor_id)
    if not shunts:
        return alone
    probe = probe_residual(factors, sensor_id)
    transfers = [factors.transfer(probe, a, b) for a, b, _ in shunts]
    return alone + sum(one * two for one, two in zip(transfers, factors.drawn(shunts, transfers), strict=True))


def crossings(network: Network, solution: Solution, sensor_id: str) -> list[tuple[Branch, complex]]:
    """Every branch with one end in a sensor's zone that is not in its window, with its current in amperes leaving the zone.

    By the current law they add up to the sensor's residual.
    """
    sensor = network.sensor(sensor_id)
    found = []
    for branch in network.branches:
        leaves, enters = branch.from_node in sensor.zone, branch.to_node in sensor.zone
        if leaves != enters and branch.id not in sensor.branches:
            current = solution.current(branch.id)
            found.append((branch, current if leaves else -current))
    return found
