"""Causes in which a conductor ends where it does not belong, or nowhere: exchanges, neutrals landed elsewhere, broken conductors."""

from __future__ import annotations

import dataclasses

from strayline.boat import other_panel
from strayline.errors import CaseError
from strayline.faults import Change, Effect, Fault, Shunt, boat_of, chain_of, own_panel, stated_ohms, stated_part
from strayline.network import Blade, Branch, Network, with_branches, without_branches
from strayline.parts import Installation, Part, base

CONTACT_OHMS = 0.005
EXCHANGEABLE = ("cord", "adapter", "inlet")


def exchanged(one: str, other: str, *kinds: str) -> Change:
    """Two kinds of conductor change places at the load end of a part of these kinds."""

    def exchange(installation: Installation, network: Network, fault: Fault) -> Effect:
        part = stated_part(installation, fault.at, *kinds)
        pairs = zip(
            *([branch for branch in network.branches if branch.owner == part.id and branch.kind == kind] for kind in (one, other)),
            strict=False,
        )
        swapped = {}
        for first, second in pairs:
            swapped[first.id] = dataclasses.replace(first, to_node=second.to_node)
            swapped[second.id] = dataclasses.replace(second, to_node=first.to_node)
        return Effect(_with(network, swapped))

    return exchange


reversed_polarity = exchanged("line", "neutral", "receptacle", *EXCHANGEABLE)


def reversed_with_join(installation: Installation, network: Network, fault: Fault) -> Effect:
    """Line and neutral exchanged ahead of a boat whose neutral is joined to ground, hard or through damp."""
    panel = own_panel(installation)
    made = reversed_polarity(installation, network, fault)
    return Effect(made.network, (Shunt("join", f"{panel.id}.N", f"{panel.id}.G", stated_ohms(fault), "bond", panel.id),))


def forced_plug(installation: Installation, network: Network, fault: Fault) -> Effect:
    """The ground pin of a plug on a line of its outlet: on the line the boat does not use, where the outlet has one."""
    part = stated_part(installation, fault.at, "cord", "adapter")
    outlet = installation.index.get(base(part.parents[0]))
    if outlet is None or outlet.kind != "receptacle":
        raise CaseError("at", "must be plugged into a receptacle", part.id)
    lines = [branch.to_node for branch in network.branches if branch.owner == outlet.id and branch.kind == "line"]
    if not lines:
        raise CaseError("at", "must be plugged into a receptacle with power", part.id)
    moved = {
        branch.id: dataclasses.replace(branch, from_node=lines[-1])
        for branch in network.branches
        if branch.owner == part.id and branch.kind == "protective"
    }
    return Effect(_with(network, moved))


def neutral_ahead_of_device(installation: Installation, network: Network, fault: Fault) -> Effect:
    """A load's neutral lands on the supply side of the device: its return passes outside the window."""
    device = stated_part(installation, fault.at, "main")
    load = stated_part(installation, fault.load, "load", key="load")
    ahead = next((branch.from_node for branch in network.branches if branch.id == f"{device.id}.N"), None)
    if ahead is None or not load.text("across").endswith("-N"):
        raise CaseError("load", "must be a load with a neutral, behind a closed main", load.id)
    return Effect(_landed(network, load, ahead))


def crossed_neutral(installation: Installation, network: Network, fault: Fault) -> Effect:
    """A load's neutral lands on the other panel of its boat."""
    load = stated_part(installation, fault.at, "load")
    other = other_panel(installation, load)
    if other is None or not load.text("across").endswith("-N"):
        raise CaseError("at", "must be a load with a neutral, on a boat with two panels", load.id)
    return Effect(_landed(network, load, f"{other.id}.N"))


def shared_neutral_branch(installation: Installation, network: Network, fault: Fault) -> Effect:
    """A load's neutral lands behind the device of another circuit: its return passes that window, its line does not."""
    breaker = stated_part(installation, fault.at, "breaker")
    load = stated_part(installation, fault.load, "load", key="load")
    inside = next((branch.to_node for branch in network.branches if branch.id == f"{breaker.id}.N"), None)
    if inside is None or breaker.id in load.parents or not load.text("across").endswith("-N"):
        raise CaseError("load", "must be a load with a neutral, on another circuit than a closed breaker with a neutral", load.id)
    return Effect(_landed(network, load, inside))


def shared_outlet_neutral(installation: Installation, network: Network, fault: Fault) -> Effect:
    """The neutrals of two outlets behind their devices: joined through `ohms`, or exchanged where none are stated."""
    one = stated_part(installation, fault.at, "receptacle")
    other = stated_part(installation, fault.load, "receptacle", key="load")
    if one.id == other.id:
        raise CaseError("load", "must be another receptacle", other.id)
    ends = (f"{one.id}.N", f"{other.id}.N")
    if fault.ohms:
        return Effect(network, (Shunt("joined", *ends, stated_ohms(fault), "neutral", one.id),))
    swap = dict(zip(ends, reversed(ends), strict=True))
    moved = {
        branch.id: dataclasses.replace(branch, from_node=swap[branch.from_node])
        for branch in network.branches
        if branch.from_node in swap and branch.kind == "neutral"
    }
    return Effect(_with(network, moved))


def opened(conductor: str, *kinds: str) -> Change:
    """The conductors of this kind are broken in a part of these kinds."""

    def broken(installation: Installation, network: Network, fault: Fault) -> Effect:
        part = stated_part(installation, fault.at, *kinds)
        gone = [branch.id for branch in network.branches if branch.owner == part.id and branch.kind == conductor]
        if not gone:
            raise CaseError("at", f"must have a {conductor} conductor to break", part.id)
        return Effect(without_branches(network, gone))

    return broken


open_ground = opened("protective", "receptacle", *EXCHANGEABLE)


def open_ground_with_leak(installation: Installation, network: Network, fault: Fault) -> Effect:
    """The protective conductor broken in one place, and a load's line terminal leaking to its frame."""
    load = stated_part(installation, fault.load, "load", key="load")
    broken = open_ground(installation, network, fault)
    return Effect(broken.network, (Shunt("leak", f"{load.id}.in", f"{load.id}.frame", stated_ohms(fault), "leak", load.id),))


def second_inlet_live(installation: Installation, network: Network, fault: Fault) -> Effect:
    """The pins of an inlet that nobody plugs into, on the buses of a panel."""
    panel = stated_part(installation, fault.at, "panel")
    buses = {branch.to_node: branch.kind for branch in network.branches if branch.owner == panel.id and branch.kind in ("line", "neutral")}
    joined = [Branch(f"{bus}.spare", bus, f"{bus}.pin", complex(CONTACT_OHMS), kind, panel.id) for bus, kind in buses.items()]
    bare = tuple(Blade(branch.to_node, branch.to_node) for branch in joined)
    wider = with_branches(network, *joined)
    return Effect(dataclasses.replace(wider, blades=(*wider.blades, *bare)))


def joined_inlets(installation: Installation, network: Network, fault: Fault) -> Effect:
    """Two panels' neutral buses joined aboard; nothing to add where one panel takes both inlets."""
    panels = [part for part in boat_of(installation, fault) if part.kind == "panel"]
    if len(panels) < 2:
        return Effect(network)
    ohms = fault.ohms or CONTACT_OHMS
    return Effect(network, (Shunt("joined", f"{panels[0].id}.N", f"{panels[1].id}.N", ohms, "neutral", panels[0].id),))


def _landed(network: Network, load: Part, node: str) -> Network:
    """The network in which a load's far end, behind the second pole of its switch where it has one, is at `node`."""
    second_pole = [branch for branch in network.branches if branch.id == f"{load.id}.switch2"]
    last = (second_pole or chain_of(network, load))[-1]
    return _with(network, {last.id: dataclasses.replace(last, to_node=node)})


def _with(network: Network, changed: dict[str, Branch]) -> Network:
    return dataclasses.replace(network, branches=tuple(changed.get(branch.id, branch) for branch in network.branches))
