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

    def difference(self, x: Sequence[complex], a: str, b: str) -> complex:
        """The entry of a response for node a less that for node b."""
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
            if not self._equations.connected(a, b):
                impedance: complex = math.inf
            elif probe in self._adjoints:
                impedance = self.difference(self._adjoints[probe], a, b)
            else:
                COUNTS.triangular_solves += 1
                impedance = self._triangle.form(self._equations.weights(probe) or {})
            found = self._ports[a, b] = Port(a, b, self.solution().at(probe), impedance)
        return found

    def port_impedance(self, a: str, b: str) -> complex:
        """Impedance in ohms seen between two nodes with every source dead; infinite between islands."""
        return self.port(a, b).impedance

    def response(self, probe: Probe) -> list[complex]:
        """The adjoint solution of a probe: how it answers an ampere into each node, and a volt in each current's row."""
        if probe not in self._adjoints:
            COUNTS.triangular_solves += 1
            self._adjoints[probe] = self._triangle.solve(self._equations.weights(probe) or {})
        return self._adjoints[probe]

    def expect(self, a: str, b: str) -> None:
        """Work out the whole response to a port at once: its mutual impedances with others will be asked for."""
        if self._equations.connected(a, b):
            self.response(self.between(a, b))

    def transfer(self, probe: Probe, a: str, b: str) -> complex:
        """K: by how much a probe's value falls for each ampere drawn out at a and put back at b."""
        return self.difference(self.response(probe), a, b)

    def window_admittance(self, sensor_id: str) -> complex:
        """Residual in amperes for each volt put in series with every enclosed conductor, supply to load, all sources dead."""
        probe = _window(self.network, sensor_id)
        adjoint = self.response(probe)
        return -sum((weight * adjoint[place] for place, weight in (self._equations.weights(probe) or {}).items()), 0j)

    def joined(self, shunts: Sequence[Shunt]) -> Factors:
        """Fresh factors with the shunts as branches: what it takes where one of them joins two islands."""
        key = tuple(shunts)
        if key not in self._joined:
            extra = (Branch(f"shunt {place}", a, b, ohms, "leak", "shunt") for place, (a, b, ohms) in enumerate(key))
            self._joined[key] = Factors(with_branches(self.network, *extra))
        return self._joined[key]

    def mutual(self, one: tuple[str, str], other: tuple[str, str]) -> complex:
        """Volts that appear at port `one` for each ampere put into a of port `other` and taken out at its b, in ohms."""
        return self.transfer(self.between(*other), *one)


def _cancelled(shunts: Sequence[Shunt]) -> NetworkError:
    where = ", ".join(f"{a} to {b}" for a, b, _ in shunts)
    rule = "inductance and capacitance cancel without any resistance, so nothing sets the current"
    return NetworkError(f"{where}: {rule}", name=where, rule=rule, value=None)


def _gauss(matrix: list[list[complex]], columns: list[list[complex]], shunts: Sequence[Shunt]) -> list[list[complex]]:
    """Solve the few equations between shunts, for every right-hand column, by elimination with row exchanges."""
    size = len(matrix)
    for step in range(size):
        best = max(range(step, size), key=lambda row: abs(matrix[row][step]))
        pivot = matrix[best][step]
        if pivot == 0:
            raise _cancelled(shunts)
        if best != step:
            matrix[step], matrix[best] = matrix[best], matrix[step]
            for column in columns:
                column[step], column[best] = column[best], column[step]
        top = matrix[step]
        for row in range(step + 1, size):
            below = matrix[row]
            share = below[step] / pivot
            if share:
                for place in range(step, size):
                    below[place] -= share * top[place]
                for column in columns:
                    column[row] -= share * column[step]
    for column in columns:
        for row in reversed(range(size)):
            value = column[row]
            for place in range(row + 1, size):
                value -= matrix[row][place] * column[place]
            column[row] = value / matrix[row][row]
    return columns


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


@dataclass(frozen=True, slots=True)
class _Seen:
    """A port as a sweep sees it: its Thevenin pair, and for each probe and each window its value alone and its transfer from the port."""

    volts: complex
    impedance: complex
    probes: list[tuple[complex, complex]]
    windows: list[tuple[complex, complex]]


class Sweep:
    """Many sets of shunts on one factored network: transfers and port impedances are kept, so a set costs a few multiplications.

    `probes` are read, and the loop through the window of each of `sensors`.
    """

    __slots__ = ("_alone", "_base", "_factors", "_mutual", "_ports", "_responses", "_windows", "probes", "sensors")

    def __init__(self, factors: Factors, probes: Sequence[Probe], sensors: Sequence[str] = ()) -> None:
        self._factors = factors
        self.probes = tuple(probes)
        self.sensors = tuple(sensors)
        self._base = [factors.value(probe) for probe in self.probes]
        self._alone = [factors.window_admittance(sensor) for sensor in self.sensors]
        self._responses = [factors.response(probe) for probe in self.probes]
        self._windows = [factors.response(_window(factors.network, sensor)) for sensor in self.sensors]
        self._ports: dict[tuple[str, str], _Seen] = {}
        self._mutual: dict[tuple[str, str, str, str], complex] = {}

    def _port(self, a: str, b: str) -> _Seen:
        """What a port brings to the probes and to the windows."""
        factors = self._factors
        port = factors.port(a, b)
        probes = [(value, factors.difference(response, a, b)) for value, response in zip(self._base, self._responses, strict=True)]
        windows = [(alone, factors.difference(response, a, b)) for alone, response in zip(self._alone, self._windows, strict=True)]
        found = self._ports[a, b] = _Seen(port.open_voltage, port.impedance, probes, windows)
        return found

    def _between(self, one: tuple[str, str], other: tuple[str, str]) -> complex:
        """Volts at `one` for an ampere drawn at `other`: the mutual impedance of two ports, or the impedance of one."""
        key = (*one, *other)
        found = self._mutual.get(key)
        if found is None:
            factors = self._factors
            found = self._mutual[key] = factors.port_impedance(*one) if one == other else factors.mutual(one, other)
        return found

    def at(self, shunts: Sequence[Shunt]) -> tuple[list[complex], list[complex]]:
        """Probes, and window admittances in siemens, after connecting each shunt's ohms from its node a to its node b.

        Large-change sensitivity (Sherman-Morrison-Woodbury): q = V / (R + Z) amperes through the shunts, and each reading falls by
        transfer times q. NaN for a voltage between islands. Relative error about 1e-12. No new factors, unless a shunt joins two islands.
        """
        if not shunts:
            return list(self._base), list(self._alone)
        if len(shunts) > 1:
            for a, b, _ in shunts:
                if (a, b) not in self._ports:
                    self._factors.expect(a, b)
        seen = [self._ports.get((a, b)) or self._port(a, b) for a, b, _ in shunts]
        if any(one.impedance == math.inf for one in seen):
            joined = self._factors.joined(shunts)
            return [joined.value(probe) for probe in self.probes], [joined.window_admittance(sensor) for sensor in self.sensors]
        if len(shunts) == 1:
            (port,) = seen
            total = shunts[0][2] + port.impedance
            if total == 0:
                raise _cancelled(shunts)
            drawn = port.volts / total
            return (
                [value - transfer * drawn for value, transfer in port.probes],
                [alone + window * window / total for alone, window in port.windows],
            )
        ends = [(a, b) for a, b, _ in shunts]
        matrix = [[self._between(one, other) for other in ends] for one in ends]
        for place, (_, _, ohms) in enumerate(shunts):
            matrix[place][place] += ohms
        columns = [[port.volts for port in seen], *([port.windows[place][1] for port in seen] for place in range(len(self.sensors)))]
        drawn_by, *loops = _gauss(matrix, columns, shunts)
        values = list(self._base)
        for port, current in zip(seen, drawn_by, strict=True):
            values = [value - transfer * current for value, (_, transfer) in zip(values, port.probes, strict=True)]
        return values, [
            alone + sum(port.windows[place][1] * current for port, current in zip(seen, loop, strict=True))
            for place, (alone, loop) in enumerate(zip(self._alone, loops, strict=True))
        ]


def sweep(factors: Factors, probes: Sequence[Probe], shunts: Sequence[Shunt]) -> list[complex]:
    """Values of all probes after connecting each shunt's ohms from its node a to its node b, as `Sweep.at`."""
    return Sweep(factors, probes).at(shunts)[0]


def window_admittance(factors: Factors, sensor_id: str, shunts: Sequence[Shunt] = ()) -> complex:
    """Common-mode admittance, in siemens, of the loop that closes through a sensor's window, with the shunts connected.

    It is the residual for one volt in series with every enclosed conductor, counted from supply to load, and all sources dead.
    """
    return Sweep(factors, (), (sensor_id,)).at(shunts)[1][0]


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
