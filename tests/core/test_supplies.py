"""Supplies and their earthing: what each makes of a bond, a leak, a filter and two poles to ground.

Expected values are worked out by hand from Ohm's and Kirchhoff's laws.
"""

from __future__ import annotations

import math

import pytest

from drawn import Row, boat, dock, load
from strayline.causes import Fault, applied
from strayline.components import SYSTEMS
from strayline.errors import CaseError
from strayline.installation import build
from strayline.parts import read
from strayline.severities import severities
from strayline.solve import Solution, solve


def solved(rows: list[Row], *faults: Fault) -> Solution:
    """The solved network of these parts with these faults."""
    installation = read({"parts": rows})
    return solve(applied(installation, build(installation), faults))


def leak(at: str = "heater", ohms: float = 4000.0) -> Fault:
    """A leak at a load's line terminal."""
    return Fault("appliance_leak", at=at, ohms=ohms)


BOND = Fault("panel_bond", at="panel", ohms=0.02)
HEATER = load("heater", ohms=24)


@pytest.mark.parametrize("system", ["it_230", "no_neutral_230"])
def test_without_a_neutral_both_poles_stand_away_from_ground(system: str) -> None:
    """On 3 x 230 V without a neutral each pole of an outlet stands near 230 / sqrt 3 = 133 V to ground, and 230 V from the other."""
    solution = solved([*dock(system, "16a_230v"), *boat("outlet1", HEATER)])
    line, other, ground = (solution.voltage(f"panel.{name}") or 0j for name in ("L1", "N", "G"))
    assert abs(line - ground) == pytest.approx(230 / math.sqrt(3), rel=0.03)
    assert abs(other - ground) == pytest.approx(230 / math.sqrt(3), rel=0.03)
    assert abs(line - other) == pytest.approx(230, rel=0.03)


@pytest.mark.parametrize(("system", "claimed"), [("it_230", False), ("no_neutral_230", False), ("single_230", True)])
def test_without_a_neutral_no_polarity_is_the_wrong_one(system: str, claimed: bool) -> None:
    """Both poles are lines there, so nothing is reversed: causes of reversed polarity stay out."""
    installation = read({"parts": [*dock(system, "16a_230v"), *boat("outlet1", HEATER)]})
    for cause in ("reversed_polarity", "reversed_with_soft_neutral", "reversed_with_bond"):
        assert bool(severities(cause, installation)) == claimed


def test_a_leak_on_it_is_fed_through_the_capacitance_of_the_network() -> None:
    """IEC 60364-4-41, IT: a first leak draws what the other lines' capacitance to earth lets through, not V / R."""
    rows = [*dock("it_230", "16a_230v", line_nf=100), *boat("outlet1", HEATER)]
    bolted = abs(solved(rows, leak(ohms=1)).residual("outlet1"))
    # All three capacitors in parallel behind the star's voltage: E * 3 omega C, through electrodes of a few ohms.
    assert bolted == pytest.approx(230 / math.sqrt(3) * 3 * 2 * math.pi * 50 * 100e-9, rel=0.02)
    assert abs(solved([*dock("single_230", "16a_230v"), *boat("outlet1", HEATER)], leak(ohms=4000)).residual("outlet1")) > 4 * bolted


@pytest.mark.parametrize(("earthing", "low", "high"), [("tn_s", 0.5, 9.0), ("tn_c_s", 0.5, 9.0), ("tt", 0.001, 0.15)])
def test_a_bond_is_loud_on_tn_and_quiet_on_tt(earthing: str, low: float, high: float) -> None:
    """With neutral and ground joined aboard amperes go by the ground where they meet ashore too; through two electrodes only tens of mA."""
    rows = [*dock("single_230", "16a_230v", earthing=earthing), *boat("outlet1", load("heater", watts=2000))]
    assert low < abs(solved(rows, BOND).residual("outlet1")) < high


@pytest.mark.parametrize(("watts", "milliamperes"), [(90, 13), (600, 84)])
def test_on_tt_a_bond_drives_the_neutrals_drop_through_two_electrodes(watts: float, milliamperes: float) -> None:
    """I R_N / (R_N + R_A + R_B): 0.33 ohm of neutral beside electrodes of 5 and 5 ohm is 13 mA at 90 W and 84 mA at 600 W (by hand)."""
    rows = dock("single_230", "16a_230v", earthing="tt", neutral_ohms=1e-6, earth_ohms=5, source_earth_ohms=5)
    rows[1] |= {"line_ohms": 1e-6, "ground_ohms": 1e-6}
    parts = boat("outlet1", load("heater", watts=watts))
    parts[0] |= {"line_ohms": 0.33, "neutral_ohms": 0.32, "ground_ohms": 1e-3}  # with 10 milliohm of contacts: 0.33 ohm
    parts[-1] |= {"afloat": False}
    shown = abs(solved([*rows, *parts], BOND).residual("outlet1"))
    assert shown == pytest.approx(watts / 230 * 0.33 / (0.33 + 5 + 5), rel=0.03)
    assert shown == pytest.approx(milliamperes * 1e-3, rel=0.06)


def test_the_bond_divides_the_return_by_the_conductors() -> None:
    """The residual is I Z_N / (Z_N + Z_G): half the load's current where neutral and ground of the cord are alike and all else is short."""
    rows = dock("single_230", "16a_230v", earthing="tn_s", neutral_ohms=1e-6, bond_ohms=1e-6)
    rows[1] |= {"line_ohms": 1e-6, "ground_ohms": 1e-6}
    parts = boat("outlet1", load("heater", ohms=23))
    parts[0] |= {"line_ohms": 0.5, "neutral_ohms": 0.5, "ground_ohms": 0.5}
    parts[-1] |= {"afloat": False}
    solution = solved([*rows, *parts], Fault("panel_bond", at="panel", ohms=1e-6))
    current = abs(solution.current("heater.load"))
    assert abs(solution.residual("outlet1")) == pytest.approx(current / 2, rel=0.02)


def test_two_legs_of_three_carry_full_current_in_the_neutral() -> None:
    """Balanced loads on two legs of 208Y leave a neutral current as large as either: a bond sees its share of it. Split phase: nothing."""
    balanced = [load("one", ohms=12), load("two", across="L2-N", ohms=12)]
    found = {}
    for system in ("wye_120_208", "split_120_240"):
        rows = [*dock(system, "50a_125_250v"), *boat("outlet1", *balanced)]
        found[system] = abs(solved(rows, BOND).residual("outlet1"))
    assert found["wye_120_208"] > 1.0
    assert found["split_120_240"] < 0.005


def test_three_equal_filters_cancel_and_two_add_to_one() -> None:
    """Equal capacitances on three phases leave no residual; on two legs of 208Y as much as one alone; on opposite legs none."""

    def filters(system: str, *across: str) -> float:
        connector = {"three_230_400": "16a_400v"}.get(system, "50a_125_250v")
        loads = [load(f"set{one[1]}", across=one, watts=50, filter_nf=100) for one in across]
        return abs(solved([*dock(system, connector), *boat("outlet1", *loads)]).residual("outlet1"))

    single = 2 * math.pi * 50 * 100e-9 * 230
    assert filters("three_230_400", "L1-N", "L2-N", "L3-N") < 0.002 * single
    assert filters("three_230_400", "L1-N") == pytest.approx(single, rel=0.01)
    one = 2 * math.pi * 60 * 100e-9 * 120
    assert filters("wye_120_208", "L1-N", "L2-N") == pytest.approx(one, rel=0.01)
    assert filters("split_120_240", "L1-N", "L2-N") < 0.002 * one


def test_polarity_alone_leaves_no_residual_but_changes_which_filter_draws() -> None:
    """Line and neutral exchanged at the outlet: no residual without leakage, and a filter from the other terminal wakes up."""
    plain = [*dock("single_230", "household_230v"), *boat("outlet1", load("heater", ohms=23))]
    reversed_ = [row | ({"reversed": True} if row["id"] == "outlet1" else {}) for row in plain]
    assert abs(solved(reversed_).residual("outlet1")) < 1e-9
    neutral_leak = Fault("soft_neutral_leak", at="panel", ohms=4000)
    assert abs(solved(plain, neutral_leak).residual("outlet1")) < 1e-3
    assert abs(solved(reversed_, neutral_leak).residual("outlet1")) == pytest.approx(230 / 4000, rel=0.02)


@pytest.mark.parametrize("system", SYSTEMS)
def test_every_supply_gives_its_volts(system: str) -> None:
    """An outlet stands at the supply's nominal voltage between its poles, less what a light load drops."""
    facts = SYSTEMS[system]
    connector = "30a_125v" if facts.region == "60" else "16a_230v"
    solution = solved([*dock(system, connector), *boat("outlet1", load("lamp", watts=40))])
    volts = abs((solution.voltage("panel.L1") or 0j) - (solution.voltage("panel.N") or 0j))
    assert volts == pytest.approx({"60": facts.volts, "50": 230.0}[facts.region], rel=0.005)
    assert abs(solution.current("lamp.load")) == pytest.approx(40 / volts, rel=0.01)


def test_a_load_on_a_post_without_a_neutral() -> None:
    """A load ashore that asks for a neutral which the supply does not have is refused by name."""
    rows = [*dock("it_230", "16a_230v"), load("lamp", watts=80) | {"from": "post"}]
    with pytest.raises(CaseError, match="nothing brings N to it"):
        build(read({"parts": rows}))
