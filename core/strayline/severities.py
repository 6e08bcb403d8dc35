"""The grid of severities of each cause in one installation: what the diagnosis sums over.

Grids are deterministic. Ohms are spread geometrically around the values that make the usual operating currents (V / I), milliohms around
usual conductors.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from strayline.boat import main_of, own_parts
from strayline.causes import Fault
from strayline.components import CONNECTORS, SYSTEMS
from strayline.parts import base

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
    def exchangeable(self) -> list[Part]:
        """Where two conductors may have changed places: an adapter, a cord, an inlet with one supply end."""
        return [
            part for part in self.of("adapter", "cord", "inlet") if len(part.parents) == 1 and part.values.get("style") != "splitting_y"
        ]

    @property
    def leaks(self) -> list[float]:
        """Ohms of a leak, from slight to severe."""
        return [self.system.volts / milliamperes * 1e3 for milliamperes in LEAK_MA]

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
    siemens_per_nf = 2 * math.pi * boat.system.hertz * 1e-9
    return [Fault(cause, nanofarads=ma * 1e-3 / boat.system.volts / siemens_per_nf) for ma in (10, 20, 34)] if boat.of("load") else []


def _at_panel(*ohms: float) -> Callable[[_Boat, str], list[Fault]]:
    return lambda boat, cause: [Fault(cause, at=part.id, ohms=value) for part in boat.of("panel")[:1] for value in ohms]


def _frame_strap(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, at=part.id, ohms=ohms) for part in boat.biggest[:1] for ohms in (0.05, 0.5)]


def _inverter_bond(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause, at=part.id, ohms=0.05, spontaneous=window) for part in boat.of("panel")[:1] for window in (0.0, 1.0)]


def _exchanged(places: int) -> Callable[[_Boat, str], list[Fault]]:
    return lambda boat, cause: [Fault(cause, at=part.id) for part in boat.exchangeable[:places]]


def _neutral_ahead_of_device(boat: _Boat, cause: str) -> list[Fault]:
    watched = [part for part in boat.of("main")[:1] if part.values["device"] != "none"]
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
    return [Fault(cause, at=load.id, ohms=boat.system.volts / (boat.rated_a * more)) for load in loads for more in (0.2, 0.5, 0.9)]


def _nothing_now(_: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause)]


def _combining_y(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause) for part in boat.of("adapter") if len(part.parents) == 2]


def _joined_inlets(boat: _Boat, cause: str) -> list[Fault]:
    return [Fault(cause)] if len(boat.of("inlet")) == 2 else []


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
}
