"""The circuit as data: branches between named nodes, the windows of the devices that watch them, and the rules a circuit must keep.

Everything here is frozen. A change is a new Network made by `with_branches`, `without_branches` or `replaced`, or by
`dataclasses.replace`, and a Network is its own cache key.
"""

from __future__ import annotations

import cmath
import dataclasses
import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from strayline.errors import NetworkError

if TYPE_CHECKING:
    from collections.abc import Callable, Iterable

KINDS = frozenset({"source", "line", "neutral", "protective", "load", "filter", "leak", "bond", "water", "winding"})


@dataclass(frozen=True, slots=True)
class Branch:
    """Two-terminal element obeying V(to) = V(from) + emf - impedance * I, with I counted from `from_node` to `to_node`.

    `impedance` in ohms at the network's frequency, R + jX with X < 0 for a capacitor; `emf` in volts RMS; `owner` is the part it
    stands for.
    """

    id: str
    from_node: str
    to_node: str
    impedance: complex
    kind: str
    owner: str
    emf: complex = 0j


@dataclass(frozen=True, slots=True)
class Sensor:
    """The window of one protective device.

    `branches` are the ids of the enclosed live conductors, each oriented from supply to load; `device` is its key among the devices;
    `zone` holds the names of the nodes downstream of the window.
    """

    id: str
    branches: tuple[str, ...]
    device: str
    zone: frozenset[str]


@dataclass(frozen=True, slots=True)
class Blade:
    """An unmated bare (male) blade: whoever touches it touches `node`."""

    id: str
    node: str


@dataclass(frozen=True, slots=True)
class Coupling:
    """Two windings on one core: each one's voltage drop V(from) - V(to) gains `impedance` times the other's current.

    `impedance` is j omega M in ohms, M > 0; which way a winding is wound is told by the order of its own two nodes. Coupled windings
    are not connected: no current passes from one to the other.
    """

    one: str
    other: str
    impedance: complex


@dataclass(frozen=True, slots=True)
class Isolator:
    """A galvanic isolator: the protective branch as built blocks; above `volts` RMS across it, it conducts with `conducting` ohms."""

    branch: str
    volts: float
    conducting: float


@dataclass(frozen=True, slots=True)
class Network:
    """A circuit at one frequency in hertz, linear but for its isolators; voltages are counted from the node `reference`.

    `hulls` pairs a boat's id with the node of its hull. Equal networks hash equal, and the hash is worked out once.
    """

    hertz: float
    reference: str
    branches: tuple[Branch, ...]
    sensors: tuple[Sensor, ...] = ()
    blades: tuple[Blade, ...] = ()
    hulls: tuple[tuple[str, str], ...] = ()
    couplings: tuple[Coupling, ...] = ()
    isolators: tuple[Isolator, ...] = ()
    _hash: int | None = field(default=None, init=False, repr=False, compare=False)

    def __hash__(self) -> int:
        if self._hash is None:
            object.__setattr__(self, "_hash", hash(self._told()))  # frozen to everyone else: this is a memo, not a change
        return self._hash  # type: ignore[return-value]

    def __reduce__(self) -> tuple[type[Network], tuple[object, ...]]:
        # Text hashes differently in every process, so the memo must not travel with a pickled network.
        return Network, self._told()

    def _told(self) -> tuple[object, ...]:
        """What it was made of."""
        return self.hertz, self.reference, self.branches, self.sensors, self.blades, self.hulls, self.couplings, self.isolators

    def branch(self, branch_id: str) -> Branch:
        """The branch of this id; NetworkError if there is none."""
        for branch in self.branches:
            if branch.id == branch_id:
                return branch
        raise _broken("no such branch", branch_id)

    def sensor(self, sensor_id: str) -> Sensor:
        """The sensor of this id; NetworkError if there is none."""
        for sensor in self.sensors:
            if sensor.id == sensor_id:
                return sensor
        raise _broken("no such sensor", sensor_id)


def nodes(network: Network) -> tuple[str, ...]:
    """Names of all nodes, the reference first, then in order of appearance in branches, hulls and blades."""
    seen = {network.reference: None}
    for branch in network.branches:
        seen[branch.from_node] = None
        seen[branch.to_node] = None
    for _, hull in network.hulls:
        seen[hull] = None
    for blade in network.blades:
        seen[blade.node] = None
    return tuple(seen)


# Edits


def with_branches(network: Network, *branches: Branch) -> Network:
    """The network with branches added after its own; no sensor encloses them."""
    return dataclasses.replace(network, branches=network.branches + branches)


def without_branches(network: Network, unwanted: Callable[[Branch], bool] | Iterable[str]) -> Network:
    """The network with branches opened: those for which `unwanted(branch)` holds, or those whose id is listed.

    Sensors lose them too; a coupling or an isolator goes with its branch.
    """
    if callable(unwanted):
        gone = frozenset(branch.id for branch in network.branches if unwanted(branch))
    else:
        gone = frozenset(unwanted)
        for branch_id in sorted(gone.difference(branch.id for branch in network.branches)):
            raise _broken("no such branch", branch_id)
    if not gone:
        return network
    return dataclasses.replace(
        network,
        branches=tuple(branch for branch in network.branches if branch.id not in gone),
        sensors=tuple(_without(sensor, gone) for sensor in network.sensors),
        couplings=tuple(each for each in network.couplings if each.one not in gone and each.other not in gone),
        isolators=tuple(each for each in network.isolators if each.branch not in gone),
    )


def _without(sensor: Sensor, gone: frozenset[str]) -> Sensor:
    if gone.isdisjoint(sensor.branches):
        return sensor
    return Sensor(sensor.id, tuple(one for one in sensor.branches if one not in gone), sensor.device, sensor.zone)


def replaced(network: Network, branch: Branch) -> Network:
    """The network in which `branch` stands where the branch of the same id stood."""
    network.branch(branch.id)
    branches = tuple(branch if old.id == branch.id else old for old in network.branches)
    return dataclasses.replace(network, branches=branches)


# Consistency rules: each raises NetworkError with the name, the rule and the value


def _broken(rule: str, name: str, value: object = None) -> NetworkError:
    shown = "" if value is None else f" ({value})"
    return NetworkError(f"{name}: {rule}{shown}", name=name, rule=rule, value=None if value is None else str(value))


def check_unique_ids(network: Network) -> None:
    """No id stands twice among the branches, the sensors, the blades or the hulls' boats."""
    groups = (
        [branch.id for branch in network.branches],
        [sensor.id for sensor in network.sensors],
        [blade.id for blade in network.blades],
        [boat for boat, _ in network.hulls],
    )
    for group in groups:
        seen: set[str] = set()
        for one in group:
            if one in seen:
                raise _broken("named twice", one)
            seen.add(one)


def check_frequency(network: Network) -> None:
    """The frequency is a positive number of hertz."""
    if not (math.isfinite(network.hertz) and network.hertz > 0):
        raise _broken("the frequency must be above zero", "hertz", network.hertz)


def check_kinds(network: Network) -> None:
    """Every branch is of a known kind."""
    for branch in network.branches:
        if branch.kind not in KINDS:
            raise _broken("unknown kind of branch", branch.id, branch.kind)


def check_finite(network: Network) -> None:
    """Every impedance and emf is a finite number; an open branch is left out, not given an infinite impedance."""
    for branch in network.branches:
        if not cmath.isfinite(branch.impedance):
            raise _broken("the impedance must be finite; leave an open branch out", branch.id, branch.impedance)
        if not cmath.isfinite(branch.emf):
            raise _broken("the emf must be finite", branch.id, branch.emf)


def check_no_zero_ohms(network: Network) -> None:
    """Only a source may be ideal: two parallel conductors of zero ohms would share their current in no particular way."""
    for branch in network.branches:
        if branch.impedance == 0 and branch.kind != "source":
            raise _broken("zero ohms in a conductor", branch.id, 0)


def check_passive(network: Network) -> None:
    """No resistance is negative."""
    for branch in network.branches:
        if branch.impedance.real < 0:
            raise _broken("the resistance must not be negative", branch.id, branch.impedance)


def check_couplings(network: Network) -> None:
    """A coupling joins two windings that are there, once, by a mutual inductance above zero and below that of a perfect core."""
    windings = {branch.id: branch for branch in network.branches if branch.kind == "winding"}
    seen: set[frozenset[str]] = set()
    for each in network.couplings:
        name = f"{each.one} and {each.other}"
        for winding in (each.one, each.other):
            if winding not in windings:
                raise _broken("a coupling needs two windings that are there", winding)
        if each.one == each.other or frozenset((each.one, each.other)) in seen:
            raise _broken("coupled twice, or to itself", name)
        seen.add(frozenset((each.one, each.other)))
        most = windings[each.one].impedance.imag * windings[each.other].impedance.imag
        if each.impedance.real or not each.impedance.imag > 0 or not each.impedance.imag**2 < most:
            raise _broken("the mutual inductance must be above zero and below that of a perfect core", name, each.impedance)


def check_isolators(network: Network) -> None:
    """An isolator stands in a protective conductor that is there, blocks up to some volts and conducts with some ohms."""
    protective = {branch.id for branch in network.branches if branch.kind == "protective"}
    for each in network.isolators:
        if each.branch not in protective:
            raise _broken("an isolator stands in a protective conductor that is there", each.branch)
        if not (0 < each.volts < math.inf and 0 < each.conducting < math.inf):
            raise _broken("an isolator blocks up to some volts and conducts with some ohms", each.branch, (each.volts, each.conducting))


def check_two_ends(network: Network) -> None:
    """A branch joins two different nodes."""
    for branch in network.branches:
        if branch.from_node == branch.to_node:
            raise _broken("both ends are at one node", branch.id, branch.from_node)


def check_reference_exists(network: Network) -> None:
    """Some branch ends at the reference node."""
    if not any(network.reference in (branch.from_node, branch.to_node) for branch in network.branches):
        raise _broken("no branch ends at the reference node", network.reference)


def check_sensor_branches_exist(network: Network) -> None:
    """A sensor encloses branches that exist, each once."""
    known = {branch.id for branch in network.branches}
    for sensor in network.sensors:
        for branch_id in sensor.branches:
            if branch_id not in known:
                raise _broken("encloses a branch that does not exist", sensor.id, branch_id)
            if sensor.branches.count(branch_id) > 1:
                raise _broken("encloses a branch twice", sensor.id, branch_id)


def check_live_conductors(network: Network) -> None:
    """A sensor never encloses a protective conductor."""
    kinds = {branch.id: branch.kind for branch in network.branches}
    for sensor in network.sensors:
        for branch_id in sensor.branches:
            if kinds.get(branch_id) == "protective":
                raise _broken("encloses a protective conductor", sensor.id, branch_id)


def check_windows_enter_zones(network: Network) -> None:
    """Where a zone is given, each enclosed branch runs from outside it to inside it: only then do the crossings add up to the residual."""
    ends = {branch.id: (branch.from_node, branch.to_node) for branch in network.branches}
    for sensor in network.sensors:
        for branch_id in sensor.branches if sensor.zone else ():
            from_node, to_node = ends[branch_id]
            if from_node in sensor.zone or to_node not in sensor.zone:
                raise _broken("encloses a branch that does not run from supply into its zone", sensor.id, branch_id)


RULES: tuple[Callable[[Network], None], ...] = (
    check_unique_ids,
    check_frequency,
    check_kinds,
    check_finite,
    check_no_zero_ohms,
    check_passive,
    check_couplings,
    check_isolators,
    check_two_ends,
    check_reference_exists,
    check_sensor_branches_exist,
    check_live_conductors,
    check_windows_enter_zones,
)


def checked(network: Network) -> Network:
    """The same network, after every rule; NetworkError names the first that is broken."""
    for rule in RULES:
        rule(network)
    return network
