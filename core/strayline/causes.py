"""Each cause: what it changes in a Network, in circuit terms.

A cause is either a set of shunts (an impedance across two nodes, closed form over ports) or a rewiring of the network
(exchange, open, a neutral landed elsewhere) with shunts on top. `effect` is the only place where a cause meets a circuit;
case files, the netlist and the diagnosis all come through it.
"""

from __future__ import annotations

import dataclasses
import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from strayline.boat import own_parts, panel_of
from strayline.catalogue.causes import CAUSE
from strayline.errors import CaseError
from strayline.installation import tap_node
from strayline.network import Branch, Network, with_branches, without_branches

if TYPE_CHECKING:
    from collections.abc import Callable, Iterable

    from strayline.parts import Installation, Part

SAME_POSITION = 1e-9  # share of an element: closer cuts are one


@dataclass(frozen=True, slots=True)
class Fault:
    """One cause at one place and severity; only the numbers its cause uses are set.

    at -- part id; load -- the load concerned; ohms; position along an element from 0 (line end) to 1; nanofarads;
    scale -- operating values multiplied by this; spontaneous -- probability of opening with no residual at all
    """

    cause: str
    at: str = ""
    load: str = ""
    ohms: float = 0.0
    position: float = 0.0
    nanofarads: float = 0.0
    scale: float = 1.0
    spontaneous: float = 0.0


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


def applied(installation: Installation, network: Network, faults: Iterable[Fault]) -> Network:
    """The network with every fault in it, shunts as branches: what `residuals` and `netlist` solve."""
    for number, fault in enumerate(faults):
        try:
            made = effect(installation, network, fault)
        except CaseError as error:
            raise CaseError(f"faults[{number}].{error.where}", error.rule, error.value) from None
        branches = [dataclasses.replace(shunt.branch(), id=f"fault{number}.{shunt.id}") for shunt in made.shunts]
        network = with_branches(made.network, *branches)
    return network


def effect(installation: Installation, network: Network, fault: Fault) -> Effect:
    """What one fault does to a network. Raises CaseError when the fault names a part that cannot have it."""
    if fault.cause not in _EFFECTS:
        raise CaseError("cause", f"must be one of {', '.join(_EFFECTS)}", fault.cause)
    return _EFFECTS[fault.cause](installation, network, fault)


def _part(installation: Installation, part_id: str, *kinds: str, key: str = "at") -> Part:
    part = installation.index.get(part_id)
    if part is None or part.kind not in kinds:
        raise CaseError(key, f"must be the id of a {' or '.join(kinds)}", part_id)
    return part


def _ohms(fault: Fault) -> float:
    if not fault.ohms > 0:
        raise CaseError("ohms", "must be above zero ohm", fault.ohms)
    return fault.ohms


def _nothing(_installation: Installation, network: Network, _fault: Fault) -> Effect:
    return Effect(network)


def _appliance_leak(installation: Installation, network: Network, fault: Fault) -> Effect:
    load = _part(installation, fault.at, "load")
    network, node = _leak_point(network, load, fault.position)
    return Effect(network, (Shunt("leak", node, f"{load.id}.frame", _ohms(fault), "leak", load.id),))


def _element(network: Network, load: Part) -> list[Branch]:
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


def _leak_point(network: Network, load: Part, position: float) -> tuple[Network, str]:
    """The node `position` along a load's element, made by cutting the element there when nothing has cut it yet."""
    if not 0 <= position <= 1:
        raise CaseError("position", "must be between 0 (line end) and 1", position)
    chain = _element(network, load)
    whole = sum(branch.impedance for branch in chain)
    passed = 0.0
    for branch in chain:
        share = (branch.impedance / whole).real  # every piece has the same angle
        if abs(position - passed) < SAME_POSITION:
            return network, branch.from_node
        if position < passed + share - SAME_POSITION:
            return _cut(network, load, branch, (position - passed) / share, tap_node(load.id, position))
        passed += share
    return network, chain[-1].to_node


def _cut(network: Network, load: Part, whole: Branch, share: float, node: str) -> tuple[Network, str]:
    """The network with one branch of a load cut at `node`, `share` of it before; every window that encloses the load encloses the cut."""
    near = dataclasses.replace(whole, to_node=node, impedance=whole.impedance * share)
    far = dataclasses.replace(whole, id=f"{node}.beyond", from_node=node, impedance=whole.impedance * (1 - share))
    branches = tuple(near if branch is whole else branch for branch in network.branches)
    sensors = tuple(
        dataclasses.replace(sensor, zone=sensor.zone | {node}) if f"{load.id}.in" in sensor.zone else sensor for sensor in network.sensors
    )
    return dataclasses.replace(network, branches=(*branches, far), sensors=sensors), node


def _line_to_ground(kind: str) -> Callable[[Installation, Network, Fault], Effect]:
    def wet(installation: Installation, network: Network, fault: Fault) -> Effect:
        part = _part(installation, fault.at, *kind.split())
        end = f"{part.id}.a" if part.values.get("style") == "splitting_y" else part.id
        return Effect(network, (Shunt("leak", f"{end}.L1", f"{end}.G", _ohms(fault), "leak", part.id),))

    return wet


def _summed_filters(installation: Installation, network: Network, fault: Fault) -> Effect:
    """The stated capacitance, shared equally by the loads of the panel's boat, each at its own line terminal."""
    loads = [part for part in _boat(installation, fault) if part.kind == "load"]
    farads = fault.nanofarads * 1e-9 / max(len(loads), 1)
    if not farads > 0:
        raise CaseError("nanofarads", "must be above zero nF", fault.nanofarads)
    ohms = -1j / (2 * math.pi * network.hertz * farads)
    return Effect(
        network, tuple(Shunt(f"filter.{load.id}", f"{load.id}.in", f"{load.id}.frame", ohms, "filter", load.id) for load in loads)
    )


def _boat(installation: Installation, fault: Fault) -> tuple[Part, ...]:
    """The parts of the boat whose panel the fault names, else of the own boat."""
    return own_parts(installation, _part(installation, fault.at, "panel").id if fault.at else None)


def _panel_bond(installation: Installation, network: Network, fault: Fault) -> Effect:
    panel = _part(installation, fault.at, "panel")
    return Effect(network, (Shunt("bond", f"{panel.id}.N", f"{panel.id}.G", _ohms(fault), "bond", panel.id),))


def _frame_strap(installation: Installation, network: Network, fault: Fault) -> Effect:
    """The appliance's frame tied to the boat's neutral bus: gone only when the appliance is unplugged."""
    load = _part(installation, fault.at, "load")
    panel = panel_of(installation, load)
    return Effect(network, (Shunt("strap", f"{panel.id}.N", f"{load.id}.frame", _ohms(fault), "bond", load.id),))


def _inverter_bond(installation: Installation, network: Network, fault: Fault) -> Effect:
    """An inverter's own bond: with `spontaneous` 0 it is welded, with 1 it lasts only until shore power is accepted."""
    panel = _part(installation, fault.at, "panel")
    absent_in = ("inverter_settled",) if fault.spontaneous else ()
    return Effect(network, (Shunt("relay", f"{panel.id}.N", f"{panel.id}.G", _ohms(fault), "bond", panel.id, absent_in),))


def _exchanged(one: str, other: str) -> Callable[[Installation, Network, Fault], Effect]:
    """Two kinds of conductor change places at the load end of a cord, adapter or inlet."""

    def exchange(installation: Installation, network: Network, fault: Fault) -> Effect:
        part = _part(installation, fault.at, "cord", "adapter", "inlet")
        pairs = zip(
            *([branch for branch in network.branches if branch.owner == part.id and branch.kind == kind] for kind in (one, other)),
            strict=False,
        )
        swapped = {}
        for first, second in pairs:
            swapped[first.id] = dataclasses.replace(first, to_node=second.to_node)
            swapped[second.id] = dataclasses.replace(second, to_node=first.to_node)
        return Effect(dataclasses.replace(network, branches=tuple(swapped.get(branch.id, branch) for branch in network.branches)))

    return exchange


def _neutral_ahead_of_device(installation: Installation, network: Network, fault: Fault) -> Effect:
    """A load's neutral lands on the supply side of the device: its return passes outside the window."""
    device = _part(installation, fault.at, "main")
    load = _part(installation, fault.load, "load", key="load")
    ahead = next((branch.from_node for branch in network.branches if branch.id == f"{device.id}.N"), None)
    if ahead is None or load.text("across") == "L1-L2":
        raise CaseError("load", "must be a load with a neutral, behind a closed main", load.id)
    last = _element(network, load)[-1]
    moved = dataclasses.replace(last, to_node=ahead)
    return Effect(dataclasses.replace(network, branches=tuple(moved if branch is last else branch for branch in network.branches)))


def _open_ground_with_leak(installation: Installation, network: Network, fault: Fault) -> Effect:
    part = _part(installation, fault.at, "cord", "adapter", "inlet", "receptacle")
    load = _part(installation, fault.load, "load", key="load")
    opened = without_branches(
        network, [branch.id for branch in network.branches if branch.owner == part.id and branch.kind == "protective"]
    )
    return Effect(opened, (Shunt("leak", f"{load.id}.in", f"{load.id}.frame", _ohms(fault), "leak", load.id),))


def _overload(installation: Installation, network: Network, fault: Fault) -> Effect:
    """More load on the line than the breaker carries for long: an extra appliance in parallel with a stated one."""
    load = _part(installation, fault.at, "load")
    panel = panel_of(installation, load)
    neutral = f"{panel.id}.N"
    return Effect(network, (Shunt("extra", f"{load.id}.in", neutral, _ohms(fault), "load", load.id),))


def _joined_inlets(installation: Installation, network: Network, fault: Fault) -> Effect:
    """Two panels' neutral buses joined aboard; nothing to add where one panel takes both inlets."""
    panels = [part for part in _boat(installation, fault) if part.kind == "panel"]
    if len(panels) < 2:
        return Effect(network)
    return Effect(network, (Shunt("joined", f"{panels[0].id}.N", f"{panels[1].id}.N", fault.ohms or 0.005, "neutral", panels[0].id),))


_EFFECTS: dict[str, Callable[[Installation, Network, Fault], Effect]] = {
    "appliance_leak": _appliance_leak,
    "wet_cord": _line_to_ground("cord adapter"),
    "wet_inlet": _line_to_ground("inlet"),
    "wet_pedestal": _line_to_ground("pedestal receptacle"),
    "summed_filters": _summed_filters,
    "panel_bond": _panel_bond,
    "frame_strap": _frame_strap,
    "inverter_bond": _inverter_bond,
    "ground_neutral_exchanged": _exchanged("neutral", "protective"),
    "line_ground_exchanged": _exchanged("line", "protective"),
    "neutral_ahead_of_device": _neutral_ahead_of_device,
    "open_ground_with_leak": _open_ground_with_leak,
    "feeder_accumulation": _line_to_ground("pedestal"),
    "touchy_device": _nothing,
    "overload": _overload,
    "nothing_now": _nothing,
    "combining_y": _nothing,
    "joined_inlets": _joined_inlets,
}
if set(_EFFECTS) != set(CAUSE):
    raise RuntimeError(f"causes without an effect or effects without a cause: {set(_EFFECTS) ^ set(CAUSE)}")
