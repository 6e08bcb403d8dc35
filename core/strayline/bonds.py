"""Causes that join neutral and ground where they must not meet."""

from __future__ import annotations

from typing import TYPE_CHECKING

from strayline.boat import panel_of
from strayline.components import LINES
from strayline.errors import CaseError
from strayline.faults import Change, Effect, Fault, Shunt, chain_of, own_panel, stated_ohms, stated_part
from strayline.network import nodes, without_branches
from strayline.wiring import branch_kind

if TYPE_CHECKING:
    from strayline.network import Network
    from strayline.parts import Installation

WHILE_WINDOW = ("inverter_settled",)  # a relay's window after plug-in is over in this context


def bond_at(*kinds: str) -> Change:
    """Neutral joined to ground at the load end of a part of these kinds."""

    def bond(installation: Installation, network: Network, fault: Fault) -> Effect:
        part = stated_part(installation, fault.at, *kinds)
        if f"{part.id}.N" not in nodes(network):
            raise CaseError("at", "must be where there is a neutral", part.id)
        return Effect(network, (Shunt("bond", f"{part.id}.N", f"{part.id}.G", stated_ohms(fault), "bond", part.id),))

    return bond


def frame_strap(installation: Installation, network: Network, fault: Fault) -> Effect:
    """The appliance's frame tied to the boat's neutral bus: gone only when the appliance is unplugged."""
    load = stated_part(installation, fault.at, "load")
    panel = panel_of(installation, load)
    return Effect(network, (Shunt("strap", f"{panel.id}.N", f"{load.id}.frame", stated_ohms(fault), "bond", load.id),))


def inverter_bond(installation: Installation, network: Network, fault: Fault) -> Effect:
    """An inverter's own bond: with `spontaneous` 0 it is welded, with 1 it lasts only until shore power is accepted."""
    part = stated_part(installation, fault.at, "panel", "inverter")
    absent_in = WHILE_WINDOW if fault.spontaneous else ()
    return Effect(network, (Shunt("relay", f"{part.id}.N", f"{part.id}.G", stated_ohms(fault), "bond", part.id, absent_in),))


def generator_bond(installation: Installation, network: Network, fault: Fault) -> Effect:
    """A drawn generator's neutral, bond and all, on the shore's neutral; at a panel, the bond that comes of it."""
    part = stated_part(installation, fault.at, "panel", "generator")
    if part.kind == "panel":
        return bond_at("panel")(installation, network, fault)
    switch = next((one for one in installation.of_kind("transfer") if part.id in one.parents), own_panel(installation))
    shore = next(parent for parent in switch.parents if parent != part.id)
    return Effect(network, (Shunt("neutrals", f"{shore}.N", f"{part.id}.N", stated_ohms(fault), "neutral", part.id),))


def transformer_bypassed(installation: Installation, network: Network, fault: Fault) -> Effect:
    """Input and output of a drawn transformer strapped, its bond left in; at a panel, the bond that comes of it."""
    part = stated_part(installation, fault.at, "panel", "transformer")
    if part.kind == "panel":
        return bond_at("panel")(installation, network, fault)
    out = without_branches(network, lambda branch: branch.owner == part.id and branch.kind == "winding")
    ends = {f"{part.parents[0]}.{conductor}": f"{part.id}.{conductor}" for conductor in (*LINES, "N", "G")}
    there, ohms = set(nodes(network)), stated_ohms(fault)
    straps = [(start, end) for start, end in ends.items() if {start, end} <= there]
    return Effect(
        out, tuple(Shunt(f"strap.{end}", start, end, ohms, branch_kind(end.rpartition(".")[2]), part.id) for start, end in straps)
    )


def soft_neutral_leak(installation: Installation, network: Network, fault: Fault) -> Effect:
    """Neutral joined to ground through damp, in the panel or at a load's far end."""
    part = stated_part(installation, fault.at, "panel", "load")
    neutral, ground = f"{part.id}.N", f"{part.id}.G"
    if part.kind == "load":
        if not part.text("across").endswith("-N"):
            raise CaseError("at", "must be a load with a neutral", part.id)
        neutral, ground = chain_of(network, part)[-1].to_node, f"{part.id}.frame"
    return Effect(network, (Shunt("damp", neutral, ground, stated_ohms(fault), "bond", part.id),))
