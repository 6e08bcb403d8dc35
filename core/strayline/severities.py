"""The grid of severities of each cause in one installation: what the diagnosis sums over.

Grids are deterministic. Ohms are spread geometrically around the values that make the usual operating currents (V / I), milliohms around
usual conductors.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from strayline.boat import main_of, other_panel, own_parts
from strayline.causes import Fault
from strayline.components import CONNECTORS, SYSTEMS
from strayline.leaks import TESTER_VOLTS, first_line
from strayline.parts import base, splits
from strayline.wiring import nominal_volts

if TYPE_CHECKING:
    from collections.abc import Callable

    from strayline.parts import Installation, Part

LEAK_MA = (12, 45, 250)  # below, above and far above what a 30 mA device takes
BIGGEST = 2  # loads that are thought of as leaking


@dataclass(frozen=True, slots=True)
class Severity:
    """One point of a cause's grid with its share of the cause's prior."""

    fault: Fault
    weight: float


class _Boat:
    """The own boat's parts by kind, with what every grid needs of them."""

    def __init__(self, installation: Installation) -> None:
        self.installation = installation
        self.system = SYSTEMS[installation.of_kind("supply")[0].text("system")]
        self.parts = own_parts(installation)

    def of(self, *kinds: str) -> list[Part]:
        """The own parts of these kinds, in the order of the kinds."""
        return [part for kind in kinds for part in self.parts if part.kind == kind]

    @property
    def biggest(self) -> list[Part]:
        """The loads where leaks live: elements first, then motors and chargers."""
        loads = self.of("load")
        return sorted(loads, key=lambda load: (not load.flag("element"), loads.index(load)))[:BIGGEST]

    @property
    def motors(self) -> list[Part]:
        """The loads that a motor drives: those with a lagging current and no element."""
        return [load for load in self.of("load") if (load.number("power_factor") or 1.0) < 1 and not load.flag("element")]

    @property
    def electronics(self) -> list[Part]:
        """The loads with a filter of their own and no element, the largest filter first."""
        found = [load for load in self.of("load") if load.number("filter_nf") and not load.flag("element")]
        return sorted(found, key=lambda load: -(load.number("filter_nf") or 0.0))

    @property
    def plugged(self) -> list[Part]:
        """The outlets in use, each with the posts they stand in."""
        return [part for part in self.of("receptacle") if self.installation.children(part.id)]

    def at_ma(self, *milliamperes: float) -> list[float]:
        """Ohms that pass these currents at the line's voltage."""
        return [self.system.volts / value * 1e3 for value in milliamperes]

    def capacity_nf(self, milliamperes: float) -> float:
        """Nanofarads that pass this current at the line's voltage and frequency."""
        return milliamperes * 1e-3 / self.system.volts / (2 * math.pi * self.system.hertz * 1e-9)

    @property
    def exchangeable(self) -> list[Part]:
        """Where two conductors may have changed places: an adapter, a cord, an inlet with one supply end."""
        return [part for part in self.of("adapter", "cord", "inlet") if len(part.parents) == 1 and not splits(part)]

    @property
    def load_volts(self) -> float:
        """Volts across a load between the first line and what the boat calls neutral."""
        return nominal_volts("L1-N", self.system, self.system.volts)

    @property
    def leaks(self) -> list[float]:
        """Ohms of a leak, from slight to severe."""
        return self.at_ma(*LEAK_MA)

    @property
    def rated_a(self) -> float:
        """Rated amperes of the outlet."""
        return next((CONNECTORS[part.text("connector")].rated_a for part in self.of("receptacle")), 30.0)


def severities(cause: str, installation: Installation) -> tuple[Severity, ...]:
    """The grid of one cause in one installation; empty where the cause cannot be."""
    faults = _GRIDS[cause](_Boat(installation), cause)
    return tuple(Severity(fault, 1.0 / len(faults)) for fault in faults)


def _appliance_leak(boat: _Boat, cause: str) -> list[Fault]:
    return [
        Fault(cause, at=load.id, ohms=ohms, position=position)
        for load in boat.biggest
        for position in ((0.1, 0.5, 0.9) if load.flag("element") else (0.0,))
        for ohms in boat.leaks
    ]


def _wet(*kinds: str) -> Callable[[_Boat, str], list[Fault]]:
    return lambda boat, cause: [Fault(cause, at=part.id, ohms=ohms) for part in boat.of(*kinds)[:1] for ohms in boat.leaks]


def _wet_pedestal(boat: _Boat, cause: str) -> list[Fault]:
    outlets = boat.of("receptacle")[:1]
    places = [part.id for part in outlets] + [base(part.parents[0]) for part in outlets]
    return [Fault(cause, at=place, ohms=ohms) for place in places for ohms in boat.leaks[1:]]


def _summed_filters(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, nanofarads=boat.capacity_nf(ma)) for ma in (10, 20, 34)] if boat.of("load") else []


def _at_panel(*ohms: float) -> Callable[[_Boat, str], list[Fault]]:
    return lambda boat, cause: [Fault(cause, at=part.id, ohms=value) for part in boat.of("panel")[:1] for value in ohms]


def _frame_strap(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, at=part.id, ohms=ohms) for part in boat.biggest[:1] for ohms in (0.05, 0.5)]


def _inverter_bond(boat: _Boat, cause: str) -> list[Fault]:
    places = (boat.of("inverter") or boat.of("panel"))[:1]
    return [Fault(cause, at=part.id, ohms=0.05, spontaneous=window) for part in places for window in (0.0, 1.0)]


def _exchanged(places: int) -> Callable[[_Boat, str], list[Fault]]:
    return lambda boat, cause: [Fault(cause, at=part.id) for part in boat.exchangeable[:places]]


def _neutral_ahead_of_device(boat: _Boat, cause: str) -> list[Fault]:
    watched = [part for part in boat.of("main")[:1] if part.values["device"] != "none" and part.flag("closed")]
    loads = [load for load in boat.of("load") if load.text("across") == "L1-N" and main_of(boat.installation, load) in watched]
    return [Fault(cause, at=part.id, load=load.id) for part in watched for load in loads[:2]]


def _open_ground_with_leak(boat: _Boat, cause: str) -> list[Fault]:
    loads = boat.biggest[:1]
    return [Fault(cause, at=part.id, load=load.id, ohms=ohms) for part in boat.of("cord")[:1] for load in loads for ohms in boat.leaks[1:]]


def _feeder_accumulation(boat: _Boat, cause: str) -> list[Fault]:
    outlets = boat.of("receptacle")[:1] if boat.installation.of_kind("feeder") else []
    return [Fault(cause, at=base(part.parents[0]), ohms=boat.system.volts / ma * 1e3) for part in outlets for ma in (75, 110, 160)]


def _touchy_device(boat: _Boat, cause: str) -> list[Fault]:
    grid = ((0.3, 0.15), (0.1, 0.5), (0.02, 0.9))
    return [Fault(cause, at=part.id, scale=scale, spontaneous=often) for part in boat.of("receptacle")[:1] for scale, often in grid]


def _overload(boat: _Boat, cause: str) -> list[Fault]:
    loads = [load for load in boat.biggest if load.text("across") == "L1-N"][:1]
    return [Fault(cause, at=load.id, ohms=boat.load_volts / (boat.rated_a * more)) for load in loads for more in (0.2, 0.5, 0.9)]


def _nothing_now(_: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause)]


def _combining_y(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause) for part in boat.of("adapter") if len(part.parents) == 2]


def _joined_inlets(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause)] if len(boat.of("inlet")) == 2 else []


def _damp_element(boat: _Boat, cause: str) -> list[Fault]:
    elements = [load for load in boat.biggest if load.flag("element")]
    return [
        Fault(cause, at=load.id, ohms=ohms, position=position, duty=0.5)
        for load in elements
        for position in (0.25, 0.75)
        for ohms in boat.at_ma(12, 45)
    ]


def _compressor_leak(boat: _Boat, cause: str) -> list[Fault]:
    return [
        Fault(cause, at=load.id, ohms=ohms, nanofarads=boat.capacity_nf(ma / 2))
        for load in boat.motors[:1]
        for ma, ohms in zip(LEAK_MA, boat.leaks, strict=True)
    ]


def _branch_wiring_leak(boat: _Boat, cause: str) -> list[Fault]:
    places = [part for part in boat.of("breaker") if any(child.kind == "load" for child in boat.installation.children(part.id))]
    return [Fault(cause, at=part.id, ohms=ohms) for part in (places or boat.of("panel"))[:BIGGEST] for ohms in boat.leaks]


def _charger_filter(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, at=load.id, nanofarads=boat.capacity_nf(ma)) for load in boat.electronics[:1] for ma in (6, 15, 36)]


def _surge_suppressor(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, at=part.id, ohms=ohms, duty=0.5) for part in boat.of("panel")[:1] for ohms in boat.at_ma(6, 25, 100)]


def _cycling_appliance(boat: _Boat, cause: str) -> list[Fault]:
    return [
        Fault(cause, at=load.id, ohms=ohms, duty=duty) for load in boat.motors[:1] for ohms in boat.at_ma(35, 150) for duty in (0.1, 0.4)
    ]


def _isolator_self_test(boat: _Boat, cause: str) -> list[Fault]:
    places = (boat.of("isolator") or boat.of("panel"))[:1]
    return [Fault(cause, at=part.id, ohms=TESTER_VOLTS / ma * 1e3, duty=0.05) for part in places for ma in (15, 35, 80)]


def _leaks_at(*kinds: str) -> Callable[[_Boat, str], list[Fault]]:
    return lambda boat, cause: [Fault(cause, at=part.id, ohms=ohms) for part in boat.of(*kinds)[:1] for ohms in boat.leaks]


def _drive_leakage(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, at=load.id, nanofarads=boat.capacity_nf(ma), scale=0.3) for load in boat.motors[:1] for ma in (3, 8)]


def _rectified_leakage(boat: _Boat, cause: str) -> list[Fault]:
    return [
        Fault(cause, at=load.id, ohms=ohms, scale=scale) for load in boat.electronics[:1] for ohms in boat.leaks for scale in (1.4, 5.0)
    ]


def _cancelling_legs(boat: _Boat, cause: str) -> list[Fault]:
    loads = boat.of("load")
    pairs = [(one, other) for one in loads for other in loads if first_line(one) < first_line(other)]
    return [Fault(cause, at=one.id, load=other.id, ohms=ohms) for one, other in pairs[:1] for ohms in boat.at_ma(35, 60, 150)]


def _bonded_at(kind: str) -> Callable[[_Boat, str], list[Fault]]:
    """At the drawn part of this kind, else at the panel, where its bond would come to lie."""
    return lambda boat, cause: [
        Fault(cause, at=part.id, ohms=ohms) for part in (boat.of(kind) or boat.of("panel"))[:1] for ohms in (0.02, 0.2)
    ]


def _dock_bond(boat: _Boat, cause: str) -> list[Fault]:
    if not boat.system.neutral:
        return []
    return [Fault(cause, at=base(part.parents[0]), ohms=ohms) for part in boat.plugged[:1] for ohms in (0.01, 0.1, 1.0)]


def _forced_plug(boat: _Boat, cause: str) -> list[Fault]:
    outlets = {part.id for part in boat.plugged if part.flag("closed")}
    plugs = [part for part in boat.of("adapter", "cord") if len(part.parents) == 1 and base(part.parents[0]) in outlets]
    return [Fault(cause, at=part.id) for part in plugs[:1]]


def _reversed_polarity(boat: _Boat, cause: str) -> list[Fault]:
    if not boat.system.neutral:
        return []  # both poles are lines: neither is the wrong one
    return [Fault(cause, at=part.id) for part in (*boat.plugged[:1], *boat.exchangeable[:1])]


def _reversed_with(*milliamperes: float, hard: tuple[float, ...] = ()) -> Callable[[_Boat, str], list[Fault]]:
    return lambda boat, cause: [
        Fault(cause, at=part.id, ohms=ohms)
        for part in boat.plugged[:1]
        for ohms in (*boat.at_ma(*milliamperes), *hard)
        if boat.system.neutral
    ]


def _crossed_neutral(boat: _Boat, cause: str) -> list[Fault]:
    if len(boat.of("panel")) < 2:
        return []
    loads = [load for load in boat.of("load") if load.text("across") == "L1-N" and other_panel(boat.installation, load)]
    return [Fault(cause, at=load.id) for load in loads[:BIGGEST]]


def _shared_neutral_branch(boat: _Boat, cause: str) -> list[Fault]:
    watched = [part for part in boat.of("breaker") if part.values.get("device", "none") != "none"]
    loads = [load for load in boat.of("load") if load.text("across").endswith("-N")]
    joined = [part for part in watched if part.flag("closed") or part.number("poles") == 1]  # two open poles leave no neutral there
    with_neutral = [part for part in joined if any(part.id in load.parents for load in loads)]
    return [
        Fault(cause, at=part.id, load=load.id)
        for part in with_neutral[:1]
        for load in [load for load in loads if part.id not in load.parents][:BIGGEST]
    ]


def _shared_outlet_neutral(boat: _Boat, cause: str) -> list[Fault]:
    outlets = boat.installation.of_kind("receptacle")
    found = []
    for mine in boat.plugged[:1]:
        others = [part for part in outlets if part.id != mine.id and part.parents == mine.parents]
        found += [Fault(cause, at=mine.id, load=other.id, ohms=ohms) for other in others[:1] for ohms in (0.0, 0.002, 0.05)]
    return found


def _broken(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, at=part.id) for part in (*boat.plugged[:1], *boat.of("cord")[:1])]


def _open_neutral(boat: _Boat, cause: str) -> list[Fault]:
    """As any broken conductor, but for an outlet that is off and opens its neutral too."""
    off = {part.id for part in boat.of("receptacle") if not part.flag("closed") and CONNECTORS[part.text("connector")].opens == "all"}
    return [fault for fault in _broken(boat, cause) if fault.at not in off]


def _wet_feeder(boat: _Boat, cause: str) -> list[Fault]:
    posts = [boat.installation.part(base(part.parents[0])) for part in boat.plugged[:1]]
    feeders = [base(post.parents[0]) for post in posts if boat.installation.part(base(post.parents[0])).kind == "feeder"]
    return [Fault(cause, at=feeder, ohms=ohms) for feeder in feeders for ohms in boat.at_ma(60, 250, 1500)]


def _other_loads_on_device(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, at=part.id, ohms=ohms, duty=0.3) for part in boat.plugged[:1] for ohms in boat.leaks]


def _foreign_current(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, at=part.id, ohms=ohms) for part in boat.of("hull")[:1] for ohms in boat.at_ma(50, 300, 2000)]


def _second_inlet_live(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, at=part.id) for part in boat.of("panel")[:1]]


def _by_itself(spontaneous: float) -> Callable[[_Boat, str], list[Fault]]:
    return lambda boat, cause: [Fault(cause, at=part.id, spontaneous=spontaneous) for part in boat.plugged[:1]]


def _uncoordinated_devices(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, at=load.id, ohms=ohms) for load in boat.biggest[:1] for ohms in boat.at_ma(200, 1000, 10000)]


def _hot_breaker(boat: _Boat, cause: str) -> list[Fault]:
    grid = ((0.02, 0.85), (0.1, 0.7), (0.3, 0.5))
    return [Fault(cause, at=part.id, ohms=ohms, scale=scale) for part in boat.plugged[:1] for ohms, scale in grid]


def _inrush(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, at=load.id, scale=multiple) for load in boat.motors[:1] for multiple in (5.0, 8.0, 15.0)]


def _short_circuit(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, at=load.id, ohms=ohms) for load in boat.biggest[:1] for ohms in (0.02, 0.2)]


def _low_voltage(boat: _Boat, cause: str) -> list[Fault]:
    drop = boat.load_volts / boat.rated_a
    return [Fault(cause, at=part.id, ohms=share * drop) for part in boat.of("cord")[:1] for share in (0.08, 0.15, 0.3)]


def _supply_lost(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, at=part.id) for part in boat.installation.of_kind("supply")]


_GRIDS: dict[str, Callable[[_Boat, str], list[Fault]]] = {
    "appliance_leak": _appliance_leak,
    "wet_cord": _wet("cord", "adapter"),
    "wet_inlet": _wet("inlet"),
    "wet_pedestal": _wet_pedestal,
    "summed_filters": _summed_filters,
    "panel_bond": _at_panel(0.02, 0.2, 2.0),
    "frame_strap": _frame_strap,
    "inverter_bond": _inverter_bond,
    "ground_neutral_exchanged": _exchanged(2),
    "line_ground_exchanged": _exchanged(1),
    "neutral_ahead_of_device": _neutral_ahead_of_device,
    "open_ground_with_leak": _open_ground_with_leak,
    "feeder_accumulation": _feeder_accumulation,
    "touchy_device": _touchy_device,
    "overload": _overload,
    "nothing_now": _nothing_now,
    "combining_y": _combining_y,
    "joined_inlets": _joined_inlets,
    "damp_element": _damp_element,
    "compressor_leak": _compressor_leak,
    "branch_wiring_leak": _branch_wiring_leak,
    "charger_filter": _charger_filter,
    "surge_suppressor": _surge_suppressor,
    "cycling_appliance": _cycling_appliance,
    "isolator_self_test": _isolator_self_test,
    "transformer_primary_leak": _leaks_at("transformer"),
    "drive_leakage": _drive_leakage,
    "rectified_leakage": _rectified_leakage,
    "cancelling_legs": _cancelling_legs,
    "inverter_common_neutral": _bonded_at("inverter"),
    "generator_bond": _bonded_at("generator"),
    "transformer_bypassed": _bonded_at("transformer"),
    "soft_neutral_leak": _at_panel(8.0, 40.0, 200.0),
    "dock_bond": _dock_bond,
    "forced_plug": _forced_plug,
    "reversed_polarity": _reversed_polarity,
    "reversed_with_soft_neutral": _reversed_with(*LEAK_MA),
    "reversed_with_bond": _reversed_with(hard=(0.02, 0.2)),
    "crossed_neutral": _crossed_neutral,
    "shared_neutral_branch": _shared_neutral_branch,
    "shared_outlet_neutral": _shared_outlet_neutral,
    "open_ground": _broken,
    "open_neutral": _open_neutral,
    "wet_feeder": _wet_feeder,
    "other_loads_on_device": _other_loads_on_device,
    "foreign_current": _foreign_current,
    "data_cable_path": _at_panel(1.0, 20.0),
    "second_inlet_live": _second_inlet_live,
    "device_locked_out": _by_itself(1.0),
    "surge": _by_itself(0.02),
    "uncoordinated_devices": _uncoordinated_devices,
    "hot_breaker": _hot_breaker,
    "inrush": _inrush,
    "short_circuit": _short_circuit,
    "low_voltage": _low_voltage,
    "supply_lost": _supply_lost,
}
