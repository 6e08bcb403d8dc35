"""Ways to plug in: what adapters, cords and outlets do to residuals. Expected values are worked out by hand from Kirchhoff's laws."""

from __future__ import annotations

import math

import pytest

from drawn import Row, boat, dock, load
from strayline.causes import Fault, applied
from strayline.components import ADAPTERS, CONNECTORS
from strayline.errors import CaseError
from strayline.installation import build
from strayline.parts import read
from strayline.solve import Solution, solve

Y = {"id": "y", "kind": "adapter", "style": "combining_y", "from": ["outlet1", "outlet2"]}


def solved(rows: list[Row], *faults: Fault) -> Solution:
    """The solved network of these parts with these faults."""
    installation = read({"parts": rows})
    return solve(applied(installation, build(installation), faults))


def with_y(*aboard: Row, system: str = "split_120_240", **y: object) -> list[Row]:
    """Two 30 A outlets joined by a Y into one cord."""
    return [*dock(system, "30a_125v", "30a_125v"), Y | y, *boat("y", *aboard)]


def changed(rows: list[Row], part: str, **values: object) -> list[Row]:
    """The rows with some values of one part changed."""
    return [row | (values if row["id"] == part else {}) for row in rows]


def test_unequal_tails_share_the_return_by_their_neutrals() -> None:
    """r_A = (1 - a) I1 - a I2 with a = Z_NB / (Z_NA + Z_NB): I on A's leg leaves (1 - a) I in A and its opposite in B."""
    tails = {"neutral_ohms": 0.03, "neutral_b_ohms": 0.06}
    rows = changed(changed(with_y(load("heater", ohms=12), **tails), "outlet1", neutral_ohms=0.01), "outlet2", neutral_ohms=0.01)
    solution = solved(rows)
    share = 0.07 / (0.04 + 0.07)
    current = abs(solution.current("heater.load"))
    assert abs(solution.residual("outlet1")) == pytest.approx((1 - share) * current, rel=1e-3)
    assert solution.residual("outlet2") == pytest.approx(-solution.residual("outlet1"), rel=1e-3)
    assert abs(solution.residual("main")) < 1e-9


def test_a_loose_neutral_hides_a_load_on_the_other_leg_and_shows_one_on_its_own() -> None:
    """With A's neutral all but open everything returns through B: a load on B's leg leaves nothing, one on A's leg its whole current."""
    loose = {"neutral_ohms": 500.0, "neutral_b_ohms": 0.004}
    on_a, on_b = (solved(with_y(load("heater", across=across, ohms=12), **loose)) for across in ("L1-N", "L2-N"))
    assert abs(on_b.residual("outlet1")) < 1e-3
    assert abs(on_a.residual("outlet1")) == pytest.approx(abs(on_a.current("heater.load")), rel=0.001)


def test_both_plugs_on_one_leg() -> None:
    """Equal loads on one leg through both plugs: no residual, twice the current in the cord's neutral, and no volts between the lines."""
    aboard = (load("one", ohms=12), load("two", across="L2-N", ohms=12), load("stove", across="L1-L2", ohms=20))
    rows = changed(with_y(*aboard), "outlet2", leg="L1")
    solution = solved(rows)
    assert abs(solution.residual("outlet1")) < 0.02
    assert abs(solution.current("cord.N")) == pytest.approx(2 * abs(solution.current("one.load")), rel=0.01)
    assert abs(solution.current("stove.load")) < 0.01


def test_balanced_loads_on_two_legs_of_three() -> None:
    """Balanced 120 V loads on 208Y through a Y: sqrt(3) / 2 of the line current in each outlet."""
    solution = solved(with_y(load("one", ohms=12), load("two", across="L2-N", ohms=12), system="wye_120_208"))
    assert abs(solution.residual("outlet1")) == pytest.approx(math.sqrt(3) / 2 * abs(solution.current("one.load")), rel=0.01)


def test_across_two_pedestals_it_trips_on_a_neighbour() -> None:
    """A Y between two posts parallels the dock's neutral: with everything aboard off, a neighbour's load on one post drives a residual."""
    rows = changed(with_y(load("heater", ohms=12, on=False)), "outlet2", **{"from": "post2"})
    rows += [
        {"id": "post2", "kind": "pedestal", "from": "feeder", "line_ohms": 0.02, "ground_ohms": 0.02},
        load("lamps", across="L1-N", ohms=8) | {"from": "post2"},
    ]
    assert abs(solved(rows).residual("outlet1")) > 0.030
    assert abs(solved(changed(rows, "lamps", on=False)).residual("outlet1")) < 1e-6


def test_an_isolated_combiner_leaves_both_outlets_in_balance() -> None:
    """A transformer for each plug: loads across, on one leg and on both leave no residual where a plain Y leaves amperes."""
    aboard = (load("heater", ohms=12), load("stove", across="L1-L2", ohms=20))
    plain, isolated = solved(with_y(*aboard)), solved(with_y(*aboard, style="isolated_combiner"))
    assert abs(plain.residual("outlet1")) > 5
    assert max(abs(isolated.residual(name)) for name in ("outlet1", "outlet2")) < 1e-3
    assert abs(isolated.current("stove.load")) == pytest.approx(12, rel=0.1)


def test_a_splitting_y_with_neutrals_joined_aboard_is_the_mirror_image() -> None:
    """One outlet, two cords, one neutral bus: the outlet sees nothing, both devices aboard see half the load, with opposite sign."""
    rows = dock("split_120_240", "50a_125_250v")
    rows += [{"id": "y", "kind": "adapter", "style": "splitting_y", "from": ["outlet1"]}, *boat("y.a", load("heater", ohms=12))]
    rows = changed(rows, "panel", **{"from": ["main", "main2"]})
    rows += [
        {"id": "cord2", "kind": "cord", "from": "y.b", "area_mm2": 4},
        {"id": "inlet2", "kind": "inlet", "from": "cord2"},
        {"id": "main2", "kind": "main", "from": "inlet2"},
    ]
    solution = solved(rows)
    assert abs(solution.residual("outlet1")) < 1e-9
    assert abs(solution.residual("main")) == pytest.approx(abs(solution.current("heater.load")) / 2, rel=0.02)
    assert solution.residual("main2") == pytest.approx(-solution.residual("main"), rel=1e-6)


@pytest.mark.parametrize("style", [name for name, facts in ADAPTERS.items() if facts.wiring in ("pass", "first", "both")])
def test_a_straight_adapter_leaves_no_residual(style: str) -> None:
    """One plug, one outlet: whatever is wired through, a healthy boat behind it is in balance."""
    plug = CONNECTORS[ADAPTERS[style].plugs[0]]
    rows = [*dock(plug.volts[0], ADAPTERS[style].plugs[0]), {"id": "y", "kind": "adapter", "style": style, "from": ["outlet1"]}]
    solution = solved([*rows, *boat("y", load("heater", watts=1000))])
    assert abs(solution.residual("outlet1")) < 1e-9
    assert abs(solution.current("heater.load")) > 3


def test_loads_across_the_lines_are_dead_behind_a_straight_adapter() -> None:
    """30 A to 50 A feeds both lines from one: across them stand no volts, and the neutral carries the sum."""
    aboard = (load("one", ohms=24), load("two", across="L2-N", ohms=24), load("stove", across="L1-L2", ohms=20))
    rows = [*dock("split_120_240", "30a_125v"), {"id": "y", "kind": "adapter", "style": "straight_30_50", "from": ["outlet1"]}]
    solution = solved([*rows, *boat("y", *aboard)])
    assert abs(solution.current("stove.load")) < 0.01
    assert abs(solution.current("cord.N")) == pytest.approx(2 * abs(solution.current("one.load")), rel=0.01)


@pytest.mark.parametrize(
    ("wired", "residual_a", "hull_v"),
    [
        ("straight", (0, 1e-3), (0, 1)),
        ("line_neutral", (0, 1e-3), (0, 1)),
        ("neutral_ground", (5, 11), (0, 5)),
        ("line_ground", (1, 99), (30, 125)),
    ],
)
def test_how_an_adapter_is_really_wired(wired: str, residual_a: tuple[float, float], hull_v: tuple[float, float]) -> None:
    """Line and neutral exchanged is silent, neutral and ground exchanged shows the whole load, line on ground puts the hull on the line."""
    made = {"id": "y", "kind": "adapter", "style": "homemade", "from": ["outlet1"], "wired": wired}
    solution = solved([*dock("split_120_240", "30a_125v"), made, *boat("y", load("heater", ohms=12))])
    assert residual_a[0] <= abs(solution.residual("outlet1")) <= residual_a[1]
    assert hull_v[0] <= abs(solution.voltage("hull.metal") or 0j) <= hull_v[1]


def test_a_leak_behind_a_household_outlet_of_class_a() -> None:
    """A boat on a household adapter behind a 6 mA device: 20 kilohm on 120 V is 6 mA, which trips it and not a 30 mA one."""
    rows = changed(dock("split_120_240", "15a_125v"), "outlet1", device="class_a")
    rows += [{"id": "y", "kind": "adapter", "style": "straight_15_30", "from": ["outlet1"]}, *boat("y", load("heater", ohms=24))]
    solution = solved(rows, Fault("appliance_leak", at="heater", ohms=19_500))
    assert abs(solution.residual("outlet1")) == pytest.approx(120 / 19_500, rel=0.03)


def test_loads_ashore_on_one_device_add_to_the_boats() -> None:
    """What else hangs on a house's device counts with the boat: the feeder's device sees both, the boat's own outlet one."""
    rows = [
        *dock("single_230", "16a_230v"),
        load("pump", watts=300, filter_nf=100) | {"from": "post"},
        *boat("outlet1", load("heater", ohms=30)),
    ]
    solution = solved(rows, Fault("appliance_leak", at="heater", ohms=23_000))
    ashore = 2 * math.pi * 50 * 100e-9 * 230
    assert abs(solution.residual("outlet1")) == pytest.approx(0.010, rel=0.02)
    assert abs(solution.residual("feeder")) == pytest.approx(math.hypot(0.010, ashore), rel=0.03)


def test_a_plug_of_a_stated_type_has_that_types_blades() -> None:
    """A loose plug shows as many line blades as its stated connector, its adapter or its loads ask for."""
    for given, lines in (({"connector": "50a_125_250v"}, 2), ({"connector": "30a_125v"}, 1), ({}, 1)):
        network = build(read({"parts": changed([*dock("split_120_240", "30a_125v"), *boat("", load("heater", ohms=24))], "cord", **given)}))
        assert len(network.blades) == lines + 2
    loose = boat("", load("pump", across="L2-L3", ohms=30), load("heater", ohms=24))
    assert len(build(read({"parts": [*dock("three_230_400", "16a_400v"), *loose]})).blades) == 5


def test_a_leg_that_the_supply_lacks_is_refused() -> None:
    """An outlet on the third line of a two-line supply is refused by name."""
    with pytest.raises(CaseError, match=r"leg: a split_120_240 supply has L1, L2 \('L3'\)"):
        read({"parts": changed(dock("split_120_240", "30a_125v"), "outlet1", leg="L3")})
