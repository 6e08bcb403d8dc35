"""Small hand-made circuits against ngspice, which solves the same netlist by its own method.

The bound is the larger of 1e-9 A and 1e-6 of the residual, real and imaginary part alike, sign included.
"""

from __future__ import annotations

import cmath
import math
from dataclasses import replace
from typing import TYPE_CHECKING

import pytest

from strayline.netlist import netlist
from strayline.network import Branch, Coupling, Network, Sensor, checked, without_branches
from strayline.solve import solve

if TYPE_CHECKING:
    from collections.abc import Callable

ABOARD = frozenset({"b.L1", "b.L2", "b.N", "b.G", "e.mid"})


def split_phase(other_leg: float, *more: Branch, sensors: tuple[Sensor, ...]) -> Network:
    """A bonded source of two 120 V legs, the second at `other_leg` degrees, a four-wire cord, and `more`."""
    return checked(
        Network(
            60,
            "earth",
            (
                Branch("leg 1", "s.N", "s.L1", 0.012 + 0.01j, "source", "grid", 120),
                Branch("leg 2", "s.N", "s.L2", 0.012 + 0.01j, "source", "grid", cmath.rect(120, math.radians(other_leg))),
                Branch("main bond", "s.N", "s.G", 0.5e-3, "bond", "grid"),
                Branch("rod", "s.G", "earth", 15, "water", "grid"),
                Branch("hot 1", "s.L1", "b.L1", 0.025 + 0.003j, "line", "cord"),
                Branch("hot 2", "s.L2", "b.L2", 0.026 + 0.003j, "line", "cord"),
                Branch("back", "s.N", "b.N", 0.024 + 0.003j, "neutral", "cord"),
                Branch("ground", "s.G", "b.G", 0.04 + 0.003j, "protective", "cord"),
                Branch("hull", "b.G", "earth", 16, "water", "boat"),
                *more,
            ),
            sensors,
        )
    )


PEDESTAL = Sensor("pedestal", ("hot 1", "hot 2", "back"), "gfpe_30", ABOARD)
HEATER = Branch("heater", "b.L1", "b.N", 10, "load", "heater")
COOLER = Branch("cooler", "b.L2", "b.N", 14 + 6j, "load", "cooler")


def filters_and_leak() -> Network:
    """Capacitors from both legs and a leak: what they let through adds as phasors."""
    return split_phase(
        180,
        HEATER,
        Branch("filter 1", "b.L1", "b.G", -26500j, "filter", "charger"),
        Branch("filter 2", "b.L2", "b.G", -53000j, "filter", "cooler"),
        Branch("leak", "b.L2", "b.G", 4700, "leak", "cooler"),
        sensors=(PEDESTAL,),
    )


def element_breached_off_centre() -> Network:
    """A 240 V element that touches its sheath at forty hundredths of its length."""
    return split_phase(
        180,
        Branch("upper", "b.L1", "e.mid", 4.8, "load", "heater"),
        Branch("lower", "e.mid", "b.L2", 7.2, "load", "heater"),
        Branch("breach", "e.mid", "b.G", 900, "leak", "heater"),
        sensors=(PEDESTAL,),
    )


def bond_on_two_legs_of_three() -> Network:
    """A bond aboard on two legs of a three-phase supply, where balanced loads still send current back."""
    return split_phase(-120, HEATER, COOLER, Branch("bond", "b.N", "b.G", 3e-3, "bond", "panel"), sensors=(PEDESTAL,))


def joined_neutrals() -> Network:
    """Two receptacles into one cord with its neutrals joined, one of the contacts bad."""
    return split_phase(
        180,
        HEATER,
        COOLER,
        Branch("second back", "s.N", "b.N", 0.15, "neutral", "y"),
        sensors=(Sensor("a", ("hot 1", "back"), "gfpe_30", ABOARD), Sensor("b", ("hot 2", "second back"), "gfpe_30", ABOARD)),
    )


def open_ground() -> Network:
    """A leak with the protective conductor open: all of it returns by the water."""
    return without_branches(split_phase(180, HEATER, Branch("leak", "b.L1", "b.G", 500, "leak", "heater"), sensors=(PEDESTAL,)), ["ground"])


def generator_beside() -> Network:
    """An unbonded generator aboard, an ideal source in it, with a window of its own and an emptied one beside it."""
    return split_phase(
        180,
        HEATER,
        Branch("alternator", "g.N", "g.L", 0j, "source", "generator", 115j),
        Branch("toaster", "g.L", "g.N", 12 - 5j, "load", "toaster"),
        sensors=(PEDESTAL, Sensor("gen", ("toaster",), "none", frozenset()), Sensor("empty", (), "none", frozenset())),
    )


def ideal_window() -> Network:
    """An ideal source inside a window, feeding a leak at 50 Hz with milliohm conductors."""
    return checked(
        Network(
            50,
            "N",
            (
                Branch("supply", "N", "L", 0j, "source", "grid", 230),
                Branch("bond", "N", "G", 1e-4, "bond", "grid"),
                Branch("hot", "L", "l", 1e-4, "line", "cord"),
                Branch("back", "N", "n", 1e-4, "neutral", "cord"),
                Branch("load", "l", "n", 10, "load", "kettle"),
                Branch("leak", "l", "G", 23e3, "leak", "kettle"),
            ),
            (Sensor("source", ("supply",), "none", frozenset()), Sensor("rcd", ("hot", "back"), "rcd_30", frozenset({"l", "n"}))),
        )
    )


def coupled(*pairs: tuple[str, str], reactance: float, tightness: float) -> tuple[Coupling, ...]:
    """Windings of one reactance (ohms) on one core, each pair that is named as tightly coupled as the next."""
    return tuple(Coupling(one, other, 1j * reactance * tightness) for one, other in pairs)


def isolation_transformer() -> Network:
    """Two windings on one core; a leak behind the secondary, tied to the hull, and winding capacitance back to the shore side."""
    network = split_phase(
        180,
        Branch("primary", "b.L1", "b.N", 0.05 + 130j, "winding", "transformer"),
        Branch("secondary", "t.L", "t.N", 0.05 + 130j, "winding", "transformer"),
        Branch("tie", "t.N", "t.G", 0.002, "bond", "transformer"),
        Branch("own hull", "t.G", "earth", 18, "water", "boat 2"),
        Branch("kettle", "t.L", "t.N", 9.6, "load", "kettle"),
        Branch("wet", "t.L", "t.G", 800, "leak", "kettle"),
        Branch("between", "b.L1", "t.L", -884e3j, "filter", "transformer"),
        sensors=(PEDESTAL, Sensor("aboard", ("kettle", "wet"), "none", frozenset())),
    )
    return checked(replace(network, couplings=coupled(("primary", "secondary"), reactance=130, tightness=0.9994)))


def centre_tapped_transformer() -> Network:
    """240 V in, two halves of a secondary out with unequal loads, and a leak on the primary side."""
    network = split_phase(
        180,
        Branch("primary", "b.L1", "b.L2", 0.08 + 400j, "winding", "transformer"),
        Branch("half 1", "t.L1", "t.N", 0.02 + 100j, "winding", "transformer"),
        Branch("half 2", "t.N", "t.L2", 0.02 + 100j, "winding", "transformer"),
        Branch("tie", "t.N", "b.G", 0.002, "bond", "transformer"),
        Branch("kettle", "t.L1", "t.N", 9.6, "load", "kettle"),
        Branch("fan", "t.L2", "t.N", 40 + 20j, "load", "fan"),
        Branch("wet", "b.L1", "b.G", 2400, "leak", "inlet"),
        Branch("drip", "t.L2", "b.G", 1500, "leak", "fan"),
        sensors=(PEDESTAL, Sensor("half", ("kettle",), "none", frozenset())),
    )
    pairs = [("primary", "half 1", 200), ("primary", "half 2", 200), ("half 1", "half 2", 100)]
    return checked(replace(network, couplings=tuple(Coupling(one, other, 0.9995j * ohms) for one, other, ohms in pairs)))


@pytest.mark.parametrize(
    ("make", "least"),
    [
        (filters_and_leak, 1e-3),
        (element_breached_off_centre, 1e-2),
        (bond_on_two_legs_of_three, 1),
        (joined_neutrals, 1),
        (open_ground, 0.1),
        (generator_beside, 1),
        (ideal_window, 5e-3),
        (isolation_transformer, 1),
        (centre_tapped_transformer, 1),
    ],
)
def test_residuals_agree(make: Callable[[], Network], least: float, spice_residuals: Callable[[str], dict[str, complex]]) -> None:
    """Every residual agrees with ngspice, and the circuit is one in which there is something to see."""
    network = make()
    reference = spice_residuals(netlist(network, make.__name__))
    solution = solve(network)
    assert set(reference) == {sensor.id for sensor in network.sensors}
    assert max(map(abs, reference.values())) > least
    for name, expected in reference.items():
        assert abs(solution.residual(name) - expected) <= max(1e-9, 1e-6 * abs(expected))
