"""What is plugged into what -> the healthy Network: every part by its builder, then a sensor for every device and its zone."""

from __future__ import annotations

from typing import TYPE_CHECKING

from strayline import aboard, conversion, plugging, shore
from strayline.components import ASHORE, LINES
from strayline.network import Network, Sensor, checked
from strayline.parts import Installation, Part, base
from strayline.wiring import EARTH, Wiring

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping

WATCHED = ("feeder", "receptacle", "main", "breaker")  # the kinds of part that hold a device

_BUILDERS: dict[str, Callable[[Part, Wiring], None]] = {
    "supply": shore.supply,
    "feeder": shore.feeder,
    "pedestal": shore.pedestal,
    "receptacle": shore.receptacle,
    "adapter": plugging.adapter,
    "cord": plugging.cord,
    "inlet": plugging.inlet,
    "isolator": conversion.isolator,
    "transformer": conversion.transformer,
    "main": aboard.main,
    "generator": conversion.generator,
    "transfer": conversion.transfer,
    "panel": aboard.panel,
    "breaker": aboard.breaker,
    "inverter": conversion.inverter,
    "load": aboard.load,
    "hull": aboard.hull,
}


def build(installation: Installation) -> Network:
    """The healthy Network of an installation: one branch per conductor and part, one sensor per device position.

    A galvanic isolator blocks as built; `settle` finds what it does.
    """
    wiring = Wiring(installation)
    for part in installation.parts:
        _BUILDERS[part.kind](part, wiring)
    branches = wiring.closed()
    present = {branch.id for branch in branches}
    nodes: dict[str, set[str]] = {}  # part id -> its nodes
    for branch in branches:
        for node in (branch.from_node, branch.to_node):
            nodes.setdefault(base(node), set()).add(node)
    watched = [part for part in installation.of_kind(*WATCHED) if part.kind != "breaker" or part.values["device"] != "none"]
    network = Network(
        wiring.system.hertz,
        EARTH,
        branches,
        tuple(_sensor(part, installation, present, nodes) for part in watched),
        tuple(wiring.blades),
        tuple((part.id, f"{part.id}.metal") for part in installation.of_kind("hull")),
        tuple(wiring.couplings),
        tuple(wiring.isolators),
    )
    return checked(network)


def _sensor(part: Part, installation: Installation, present: set[str], nodes: Mapping[str, set[str]]) -> Sensor:
    enclosed = tuple(f"{part.id}.{conductor}" for conductor in (*LINES, "N") if f"{part.id}.{conductor}" in present)
    zone = frozenset(node for owner in zone_parts(installation, part) for node in nodes.get(owner, ()))
    return Sensor(part.id, enclosed, part.text("device"), zone)


def zone_parts(installation: Installation, part: Part) -> frozenset[str]:
    """The parts inside a sensor's zone.

    A feeder's, a main's and a breaker's zone is all that hangs on it. A receptacle's is its cord and everything aboard, up to the
    terminals of every other shore receptacle that also reaches this boat.
    """
    if part.id not in installation.zones:
        installation.zones[part.id] = _zone_parts(installation, part)
    return installation.zones[part.id]


def _zone_parts(installation: Installation, part: Part) -> frozenset[str]:
    if part.kind != "receptacle":
        return installation.downstream(part.id)
    found = {part.id}
    waiting = [part]
    while waiting:
        member = waiting.pop()
        near = list(installation.children(member.id))
        if member.kind != "receptacle":  # beyond a receptacle lies the dock
            near += [installation.part(base(parent)) for parent in member.parents if parent]
        new = [one for one in near if one.kind not in ASHORE and one.id not in found]
        found.update(one.id for one in new)
        waiting += new
    return frozenset(found)
