"""Each cause: what it changes in a Network, in circuit terms.

A cause is either a set of shunts (an impedance across two nodes, closed form over ports) or a rewiring of the network
(exchange, open, a neutral landed elsewhere) with shunts on top. `effect` is the only place where a cause meets a circuit;
case files, the netlist and the diagnosis all come through it. A cause that the steady state does not show leaves the network as it
is, and its row in the catalogue says what lies beyond.
"""

from __future__ import annotations

import dataclasses
from typing import TYPE_CHECKING

from strayline.bonds import bond_at, frame_strap, generator_bond, inverter_bond, soft_neutral_leak, transformer_bypassed
from strayline.catalogue.causes import CAUSE
from strayline.errors import CaseError
from strayline.faults import Change, Effect, Fault, Shunt
from strayline.leaks import (
    appliance_leak,
    cancelling_legs,
    circuit_leak,
    compressor_leak,
    damp_element,
    data_cable_path,
    foreign_current,
    isolator_self_test,
    line_to_ground,
    load_filter,
    rectified_leakage,
    summed_filters,
    transformer_primary_leak,
)
from strayline.miswirings import (
    EXCHANGEABLE,
    crossed_neutral,
    exchanged,
    forced_plug,
    joined_inlets,
    neutral_ahead_of_device,
    open_ground,
    open_ground_with_leak,
    opened,
    reversed_polarity,
    reversed_with_join,
    second_inlet_live,
    shared_neutral_branch,
    shared_outlet_neutral,
)
from strayline.network import Network, with_branches
from strayline.overloads import overload, resistive, short_circuit, supply_lost, unchanged

if TYPE_CHECKING:
    from collections.abc import Iterable

    from strayline.parts import Installation

__all__ = ["Effect", "Fault", "Shunt", "applied", "effect"]  # what other rooms need to know of a cause


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
    """What one fault does to a network while it is there. Raises CaseError when the fault names a part that cannot have it."""
    if fault.cause not in _EFFECTS:
        raise CaseError("cause", f"must be one of {', '.join(_EFFECTS)}", fault.cause)
    if not 0 < fault.duty <= 1:
        raise CaseError("duty", "must be above 0 and at most 1", fault.duty)
    return _EFFECTS[fault.cause](installation, network, fault)


_EFFECTS: dict[str, Change] = {
    "appliance_leak": appliance_leak,
    "wet_cord": line_to_ground("cord", "adapter"),
    "wet_inlet": line_to_ground("inlet"),
    "wet_pedestal": line_to_ground("pedestal", "receptacle"),
    "summed_filters": summed_filters,
    "damp_element": damp_element,
    "compressor_leak": compressor_leak,
    "branch_wiring_leak": circuit_leak,
    "charger_filter": load_filter,
    "surge_suppressor": circuit_leak,
    "cycling_appliance": appliance_leak,
    "isolator_self_test": isolator_self_test,
    "transformer_primary_leak": transformer_primary_leak,
    "drive_leakage": load_filter,
    "rectified_leakage": rectified_leakage,
    "cancelling_legs": cancelling_legs,
    "panel_bond": bond_at("panel"),
    "frame_strap": frame_strap,
    "inverter_bond": inverter_bond,
    "inverter_common_neutral": bond_at("panel", "inverter"),
    "generator_bond": generator_bond,
    "transformer_bypassed": transformer_bypassed,
    "soft_neutral_leak": soft_neutral_leak,
    "dock_bond": bond_at("pedestal"),
    "ground_neutral_exchanged": exchanged("neutral", "protective", *EXCHANGEABLE),
    "line_ground_exchanged": exchanged("line", "protective", *EXCHANGEABLE),
    "forced_plug": forced_plug,
    "reversed_polarity": reversed_polarity,
    "reversed_with_soft_neutral": reversed_with_join,
    "reversed_with_bond": reversed_with_join,
    "neutral_ahead_of_device": neutral_ahead_of_device,
    "crossed_neutral": crossed_neutral,
    "shared_neutral_branch": shared_neutral_branch,
    "shared_outlet_neutral": shared_outlet_neutral,
    "open_ground_with_leak": open_ground_with_leak,
    "open_ground": open_ground,
    "open_neutral": opened("neutral", "supply", "feeder", "pedestal", "receptacle", *EXCHANGEABLE, "main", "panel"),
    "feeder_accumulation": line_to_ground("pedestal"),
    "wet_feeder": line_to_ground("feeder", "pedestal"),
    "other_loads_on_device": line_to_ground("receptacle"),
    "foreign_current": foreign_current,
    "data_cable_path": data_cable_path,
    "second_inlet_live": second_inlet_live,
    "touchy_device": unchanged(),
    "device_locked_out": unchanged("receptacle", "main"),
    "surge": unchanged("receptacle", "main"),
    "uncoordinated_devices": appliance_leak,
    "overload": overload,
    "hot_breaker": resistive("receptacle", "main", "breaker"),
    "inrush": unchanged("load"),
    "short_circuit": short_circuit,
    "low_voltage": resistive("supply", "feeder", "pedestal", "receptacle", "cord"),
    "supply_lost": supply_lost,
    "nothing_now": unchanged(),
    "combining_y": unchanged(),
    "joined_inlets": joined_inlets,
}
if set(_EFFECTS) != set(CAUSE):
    raise RuntimeError(f"causes without an effect or effects without a cause: {set(_EFFECTS) ^ set(CAUSE)}")
