"""A whole dock in one network: what adds up at the feeder, and what one boat does to another."""

from __future__ import annotations

import math

import pytest

from drawn import Row, marina
from strayline.causes import Fault, applied
from strayline.installation import build
from strayline.parts import read
from strayline.solve import COUNTS, Solution, solve


def solved(rows: list[Row], *faults: Fault) -> Solution:
    """The solved network of these parts with these faults."""
    installation = read({"parts": rows})
    return solve(applied(installation, build(installation), faults))


def leaks(boats: int, ma: float, volts: float = 230.0) -> list[Fault]:
    """The same leak at the line terminal of every boat's lamp."""
    return [Fault("appliance_leak", at=f"lamp_{number}", ohms=volts / ma * 1e3) for number in range(1, boats + 1)]


def test_two_hundred_and_fifty_boats_are_one_solve() -> None:
    """A dock of 250 boats is one network, factored once, in which the feeder sees the phasor sum of its outlets."""
    before = COUNTS.factorizations
    solution = solved(marina("three_230_400", 250, connector="16a_230v"), *leaks(7, 5))
    assert COUNTS.factorizations == before + 1
    outlets = [sensor.id for sensor in solution.network.sensors if sensor.id.startswith("outlet_")]
    assert len(outlets) == 250
    assert abs(solution.residual("feeder") - sum(solution.residual(name) for name in outlets)) < 1e-9


def test_accumulation_on_one_phase() -> None:
    """Twenty-six healthy boats of 3.9 mA each on one phase pass 100 mA at the feeder while no outlet comes near its own device."""
    solution = solved(marina("single_230", 26), *leaks(26, 3.9))
    assert abs(solution.residual("feeder")) > 0.100
    assert max(abs(solution.residual(f"outlet_{number}")) for number in range(1, 27)) < 0.006


def test_three_phases_balance_and_one_boat_leaving_shows() -> None:
    """Equal leaks on three phases cancel at the feeder; when one boat goes its whole leakage appears."""
    solution = solved(marina("three_230_400", 6, connector="16a_230v"), *leaks(6, 9))
    assert abs(solution.residual("feeder")) < 0.0005
    fewer = solved(marina("three_230_400", 6, connector="16a_230v"), *leaks(5, 9))
    assert abs(fewer.residual("feeder")) == pytest.approx(0.009, rel=0.05)


def test_opposite_legs_subtract() -> None:
    """On split phase boats on the two legs subtract at the feeder: 30 mA and 20 mA leave 10 mA."""
    faults = [Fault("appliance_leak", at="lamp_1", ohms=4000), Fault("appliance_leak", at="lamp_2", ohms=6000)]
    assert abs(solved(marina("split_120_240", 2), *faults).residual("feeder")) == pytest.approx(0.010, rel=0.03)


def test_a_neighbours_leak_through_my_hull_leaves_my_residual_alone() -> None:
    """What a neighbour lets into the water comes home by my hull and ground wire too: my ground carries it, my devices see nothing."""
    rows = [row | ({"water_ohms": 2.0} if row["kind"] == "hull" else {}) for row in marina("single_230", 2)]
    rows = [row | ({"ground_ohms": 50.0} if row["id"] == "cord_2" else {}) for row in rows]
    solution, healthy = solved(rows, Fault("appliance_leak", at="lamp_2", ohms=400)), solved(rows)
    assert abs(solution.current("cord_1.G")) > abs(healthy.current("cord_1.G")) + 0.05
    assert abs(solution.residual("outlet_1") - healthy.residual("outlet_1")) < 1e-4


def test_with_a_bond_aboard_my_device_sees_the_neighbours_load() -> None:
    """A bond aboard with every load of mine off is driven by the others' neutral drop, and ends with their loads."""
    rows = [row | ({"on": False} if row["id"] in ("heater_1", "stove_1", "charger_1", "lamp_1") else {}) for row in marina("single_230", 8)]
    bond = Fault("panel_bond", at="panel_1", ohms=0.02)
    assert abs(solved(rows, bond).residual("outlet_1")) > 0.030
    quiet = [row | ({"on": False} if row["kind"] == "load" else {}) for row in rows]
    assert abs(solved(quiet, bond).residual("outlet_1")) < 1e-3


def test_one_boats_bond_does_not_trip_another() -> None:
    """Of two boats the one with the bond is seen at its own outlet and at the feeder, not at the other's outlet."""
    solution = solved(marina("single_230", 2), Fault("panel_bond", at="panel_1", ohms=0.02))
    assert abs(solution.residual("outlet_1")) > 1
    assert abs(solution.residual("outlet_2")) < 0.006
    assert math.isclose(abs(solution.residual("feeder")), abs(solution.residual("outlet_1")), rel_tol=0.01)
