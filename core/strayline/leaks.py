"""Causes that let current out of a live conductor: insulation, water, filters, and what leaks ashore."""

from __future__ import annotations

import dataclasses
from typing import TYPE_CHECKING

from strayline.aboard import tap_node
from strayline.components import SYSTEMS
from strayline.errors import CaseError
from strayline.faults import Change, Effect, Fault, Shunt, boat_of, chain_of, own_panel, stated_ohms, stated_part, stated_reactance
from strayline.network import Branch, Network, with_branches
from strayline.parts import splits
from strayline.wiring import EARTH

if TYPE_CHECKING:
    from strayline.parts import Installation, Part

SAME_POSITION = 1e-9  # share of an element: closer cuts are one
TESTER_VOLTS = 12.0  # what an isolator's monitor drives its test current with (common practice)
HALF_WAVE = 2.0  # a half wave carries half the fundamental of the whole one (its Fourier series), so it meets twice the ohms


def appliance_leak(installation: Installation, network: Network, fault: Fault) -> Effect:
    """From a point of a load to its frame."""
    load = stated_part(installation, fault.at, "load")
    network, node = _leak_point(network, load, fault.position)
    return Effect(network, (Shunt("leak", node, f"{load.id}.frame", stated_ohms(fault), "leak", load.id),))


def damp_element(installation: Installation, network: Network, fault: Fault) -> Effect:
    """An appliance's leak that only a heating element can have."""
    load = stated_part(installation, fault.at, "load")
    if not load.flag("element"):
        raise CaseError("at", "must be a load with a heating element", load.id)
    return appliance_leak(installation, network, fault)


def compressor_leak(installation: Installation, network: Network, fault: Fault) -> Effect:
    """From a motor's line terminal to its shell, through ohms and through nanofarads at once."""
    load = stated_part(installation, fault.at, "load")
    if load.flag("element"):
        raise CaseError("at", "must be a load without a heating element", load.id)
    near, frame = f"{load.id}.in", f"{load.id}.frame"
    return Effect(
        network,
        (
            Shunt("leak", near, frame, stated_ohms(fault), "leak", load.id),
            Shunt("winding", near, frame, stated_reactance(fault, network), "filter", load.id),
        ),
    )


def load_filter(installation: Installation, network: Network, fault: Fault) -> Effect:
    """One load's own capacitance from its line terminal to its frame."""
    load = stated_part(installation, fault.at, "load")
    return Effect(network, (Shunt("filter", f"{load.id}.in", f"{load.id}.frame", stated_reactance(fault, network), "filter", load.id),))


def rectified_leakage(installation: Installation, network: Network, fault: Fault) -> Effect:
    """The mains-frequency part of a leak that conducts in half waves."""
    load = stated_part(installation, fault.at, "load")
    ohms = HALF_WAVE * stated_ohms(fault)
    return Effect(network, (Shunt("leak", f"{load.id}.in", f"{load.id}.frame", ohms, "leak", load.id),))


def cancelling_legs(installation: Installation, network: Network, fault: Fault) -> Effect:
    """The same ohms from the line terminals of two loads on different lines."""
    one, other = stated_part(installation, fault.at, "load"), stated_part(installation, fault.load, "load", key="load")
    if first_line(one) == first_line(other):
        raise CaseError("load", "must be a load on another line", other.id)
    ohms = stated_ohms(fault)
    return Effect(
        network, tuple(Shunt(f"leak.{load.id}", f"{load.id}.in", f"{load.id}.frame", ohms, "leak", load.id) for load in (one, other))
    )


def first_line(load: Part) -> str:
    """The line on which a load's switched end hangs."""
    return load.text("across").partition("-")[0]


def line_to_ground(*kinds: str) -> Change:
    """From the first line to the protective conductor at the load end of a part of these kinds."""

    def wet(installation: Installation, network: Network, fault: Fault) -> Effect:
        part = stated_part(installation, fault.at, *kinds)
        end = f"{part.id}.a" if splits(part) else part.id
        return Effect(network, (Shunt("leak", f"{end}.L1", f"{end}.G", stated_ohms(fault), "leak", part.id),))

    return wet


def transformer_primary_leak(installation: Installation, network: Network, fault: Fault) -> Effect:
    """From the line to the protective conductor on the shore's side of a transformer, where its shield is tied."""
    part = stated_part(installation, fault.at, "transformer")
    shore = part.parents[0]
    return Effect(network, (Shunt("leak", f"{shore}.L1", f"{shore}.G", stated_ohms(fault), "leak", part.id),))


def circuit_leak(installation: Installation, network: Network, fault: Fault) -> Effect:
    """From the line of one circuit to ground, behind its breaker; at a panel, from its first line."""
    part = stated_part(installation, fault.at, "breaker", "panel")
    line, ground = f"{part.id}.L1", f"{part.id}.G"
    if part.kind == "breaker":
        load = next((child for child in installation.children(part.id) if child.kind == "load"), None)
        if load is None:
            raise CaseError("at", "must be a breaker that feeds a load", part.id)
        line, ground = f"{part.id}.{first_line(load)}", network.branch(f"{load.id}.G").to_node
    return Effect(network, (Shunt("leak", line, ground, stated_ohms(fault), "leak", part.id),))


def summed_filters(installation: Installation, network: Network, fault: Fault) -> Effect:
    """The stated capacitance, shared equally by the loads of the panel's boat, each at its own line terminal."""
    loads = [part for part in boat_of(installation, fault) if part.kind == "load"]
    ohms = stated_reactance(fault, network, max(len(loads), 1))
    return Effect(
        network, tuple(Shunt(f"filter.{load.id}", f"{load.id}.in", f"{load.id}.frame", ohms, "filter", load.id) for load in loads)
    )


def isolator_self_test(installation: Installation, network: Network, fault: Fault) -> Effect:
    """A small source between the boat's ground and neutral buses, for as long as the test runs."""
    part = stated_part(installation, fault.at, "isolator", "panel") if fault.at else own_panel(installation)
    panel = part if part.kind == "panel" else own_panel(installation)
    test = Branch(
        f"{part.id}.self_test", f"{panel.id}.G", f"{panel.id}.N", complex(stated_ohms(fault)), "source", part.id, complex(TESTER_VOLTS)
    )
    return Effect(with_branches(network, test))


def foreign_current(installation: Installation, network: Network, fault: Fault) -> Effect:
    """From the dock's first line into a hull, past every window: what another boat or the shore lets into the water."""
    hull = stated_part(installation, fault.at, "hull")
    supply = installation.of_kind("supply")[0]
    line = next(iter(SYSTEMS[supply.text("system")].lines))
    return Effect(network, (Shunt("foreign", f"{supply.id}.{line}", f"{hull.id}.metal", stated_ohms(fault), "leak", supply.id),))


def data_cable_path(installation: Installation, network: Network, fault: Fault) -> Effect:
    """From the boat's ground bus to the earth of the shore, by the shield of a cable that is no part of the supply."""
    panel = stated_part(installation, fault.at, "panel")
    return Effect(network, (Shunt("shield", f"{panel.id}.G", EARTH, stated_ohms(fault), "protective", panel.id),))


def _leak_point(network: Network, load: Part, position: float) -> tuple[Network, str]:
    """The node `position` along a load's element, made by cutting the element there when nothing has cut it yet."""
    if not 0 <= position <= 1:
        raise CaseError("position", "must be between 0 (line end) and 1", position)
    chain = chain_of(network, load)
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
