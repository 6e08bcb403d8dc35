"""Causes that open a breaker, or nothing, without a residual: too much current, too little voltage, and what passes in an instant."""

from __future__ import annotations

import dataclasses
from typing import TYPE_CHECKING

from strayline.boat import panel_of
from strayline.faults import Change, Effect, Fault, Shunt, chain_of, stated_ohms, stated_part
from strayline.network import Network, without_branches

if TYPE_CHECKING:
    from strayline.parts import Installation


def unchanged(*kinds: str) -> Change:
    """No change of the steady state; where kinds are given, the fault names a part of one of them."""

    def same(installation: Installation, network: Network, fault: Fault) -> Effect:
        if kinds:
            stated_part(installation, fault.at, *kinds)
        return Effect(network)

    return same


def overload(installation: Installation, network: Network, fault: Fault) -> Effect:
    """More load on the line than the breaker carries for long: an extra appliance in parallel with a stated one."""
    load = stated_part(installation, fault.at, "load")
    neutral = f"{panel_of(installation, load).id}.N"
    return Effect(network, (Shunt("extra", f"{load.id}.in", neutral, stated_ohms(fault), "load", load.id),))


def short_circuit(installation: Installation, network: Network, fault: Fault) -> Effect:
    """The two ends of a load joined, or line and neutral of a panel."""
    part = stated_part(installation, fault.at, "load", "panel")
    near, far = f"{part.id}.L1", f"{part.id}.N"
    if part.kind == "load":
        near, far = f"{part.id}.in", chain_of(network, part)[-1].to_node
    return Effect(network, (Shunt("short", near, far, stated_ohms(fault), "load", part.id),))


def resistive(*kinds: str) -> Change:
    """More ohms in each line of a part of these kinds: a loose terminal, or conductors too long and thin."""

    def worse(installation: Installation, network: Network, fault: Fault) -> Effect:
        part = stated_part(installation, fault.at, *kinds)
        more = stated_ohms(fault)
        branches = tuple(
            dataclasses.replace(branch, impedance=branch.impedance + more)
            if branch.owner == part.id and branch.kind in ("line", "source")
            else branch
            for branch in network.branches
        )
        return Effect(dataclasses.replace(network, branches=branches))

    return worse


def supply_lost(installation: Installation, network: Network, fault: Fault) -> Effect:
    """The lines of the supply are dead; neutral and ground stay where they are."""
    supply = stated_part(installation, fault.at, "supply")
    return Effect(without_branches(network, lambda branch: branch.owner == supply.id and branch.kind == "source"))
