"""One network with its loads switched in any combination: a few readings of each state, cheaply.

The network is factored once with every load off; a load alone is then a shunt across its open switch and costs no new factors
(solve.Sweep). Only larger sets of loads are solved afresh, each once. With galvanic isolators every state settles by itself.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from strayline import solve
from strayline.network import without_branches
from strayline.settle import settled

if TYPE_CHECKING:
    from collections.abc import Mapping

    from strayline.equations import Probe
    from strayline.network import Network

Key = tuple[str, ...]
Readings = dict[Key, complex]
NOTHING: frozenset[str] = frozenset()


class Loadings:
    """The states of one network, given with every load on.

    `switches` -- load -> the ids of the branches that its switch opens
    `probes`   -- what is read in each state, by a key of the caller's; NaN where a voltage lies between islands
    """

    __slots__ = ("_factors", "_network", "_probes", "_readings", "_sweep", "_switches")

    def __init__(self, network: Network, switches: Mapping[str, tuple[str, ...]], probes: Mapping[Key, Probe]) -> None:
        self._network = network
        self._switches = switches
        self._probes = probes
        self._readings: dict[frozenset[str], Readings] = {}
        self._factors: dict[frozenset[str], solve.Factors] = {}
        self._sweep: solve.Sweep | None = None

    @property
    def loads(self) -> frozenset[str]:
        """All loads that can be switched."""
        return frozenset(self._switches)

    def network(self, on: frozenset[str]) -> Network:
        """The network with only these loads on."""
        return without_branches(self._network, [one for load, ids in self._switches.items() if load not in on for one in ids])

    def solution(self, on: frozenset[str]) -> solve.Solution:
        """The solved network with only these loads on."""
        return self._factored(on).solution()

    def at(self, on: frozenset[str]) -> Readings:
        """The readings with only these loads on."""
        if on not in self._readings:
            closed_form = len(on) == 1 and not self._network.isolators
            self._readings[on] = self._alone(on) if closed_form else self._afresh(on)
        return self._readings[on]

    def window_siemens(self, sensor_id: str) -> float:
        """Size of the common-mode admittance of the loop through a sensor's window, with every load on."""
        return abs(self._factored(self.loads).window_admittance(sensor_id))

    def _factored(self, on: frozenset[str]) -> solve.Factors:
        if on not in self._factors:
            self._factors[on] = solve.factor(settled(self.network(on)))
        return self._factors[on]

    def _afresh(self, on: frozenset[str]) -> Readings:
        solution = self.solution(on)
        return {key: solution.at(probe) for key, probe in self._probes.items()}

    def _alone(self, on: frozenset[str]) -> Readings:
        if self._sweep is None:
            self._sweep = solve.Sweep(self._factored(NOTHING), tuple(self._probes.values()))
        closed = [self._network.branch(one) for load in on for one in self._switches[load]]
        values, _ = self._sweep.at([(branch.from_node, branch.to_node, branch.impedance) for branch in closed])
        return dict(zip(self._probes, values, strict=True))
