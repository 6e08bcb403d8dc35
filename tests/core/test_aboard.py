"""What turns, blocks or makes power aboard, and the hull in its water. Expected values are worked out by hand."""

from __future__ import annotations

import math

import pytest

from drawn import ACROSS_LINES, Row, boat, dock, load
from strayline.boat import main_of, own_parts, panel_of
from strayline.causes import Fault, applied
from strayline.contexts import switched
from strayline.errors import CaseError
from strayline.installation import build
from strayline.parts import read
from strayline.settle import settled
from strayline.solve import Solution, solve

USUAL = dock("split_120_240", "30a_125v")
WIDE = dock("split_120_240", "50a_125_250v")
WINDING = {"id": "winding", "kind": "transformer", "from": "inlet"}
GENSET = {"id": "genset", "kind": "generator"}
SWITCH = {"id": "switch", "kind": "transfer", "from": ["main", "genset"]}
UNIT = {"id": "unit", "kind": "inverter", "from": "panel"}
HEATER = load("heater", ohms=12)
BOND = Fault("panel_bond", at="panel", ohms=0.02)
LEAK = Fault("appliance_leak", at="heater", ohms=2000)


def solved(rows: list[Row], *faults: Fault) -> Solution:
    """The solved network of these parts with these faults, isolators settled."""
    installation = read({"parts": rows})
    return solve(settled(applied(installation, build(installation), faults)))


def residual(rows: list[Row], *faults: Fault, at: str = "outlet1") -> float:
    """Amperes that a sensor sees."""
    return abs(solved(rows, *faults).residual(at))


# --- transformers --------------------------------------------------------------------------------------------------


def isolated(*aboard: Row, **winding: object) -> list[Row]:
    """A boat behind a transformer at its inlet."""
    return [*USUAL, WINDING | winding, *boat("outlet1", *aboard, main="winding")]


def test_the_shore_sees_next_to_nothing_of_a_secondary_fault() -> None:
    """A leak of 60 mA behind an isolation transformer trips the boat's own device and leaves the outlet below a milliampere."""
    assert residual(isolated(HEATER), LEAK, at="main") == pytest.approx(120 / 2000, rel=0.05)
    assert residual(isolated(HEATER), LEAK) < 1e-3
    assert residual([*USUAL, *boat("outlet1", HEATER)], LEAK) > 0.05


def test_the_shore_sees_a_primary_fault() -> None:
    """A leak on the primary side is the outlet's to see and not the boat's."""
    fault = Fault("transformer_primary_leak", at="winding", ohms=2400)
    assert residual(isolated(HEATER), fault) == pytest.approx(0.050, rel=0.02)
    assert residual(isolated(HEATER), fault, at="main") < 1e-6


def test_a_healthy_bond_behind_a_transformer_is_no_fault() -> None:
    """The secondary's neutral is tied to the boat's ground, and that leaves no residual anywhere."""
    rows = isolated(HEATER)
    assert max(residual(rows), residual(rows, at="main")) < 1e-3


def test_winding_capacitance_is_what_crosses() -> None:
    """Winding capacitance carries 2 pi f C V: across to the secondary without a shield, to the shore's ground with one."""
    shown = residual(isolated(HEATER, winding_nf=20, shield=False, bonded=False), LEAK)
    assert shown < 2 * math.pi * 60 * 20e-9 * 120
    assert residual(isolated(load("lamp", ohms=500), winding_nf=20)) == pytest.approx(2 * math.pi * 60 * 20e-9 * 120, rel=0.05)


def test_a_polarization_transformer_passes_the_ground() -> None:
    """Polarization: the shore's ground reaches the boat; isolation: it ends at the shield."""
    for style, joined in (("polarization", True), ("isolation", False)):
        network = build(read({"parts": isolated(HEATER, style=style)}))
        assert any(branch.id == "winding.G" for branch in network.branches) == joined


def test_a_split_secondary_gives_two_lines() -> None:
    """From 240 V, or from one 120 V line, two lines of 120 V in opposition: a load across them gets 240 V."""
    for rows in (
        [*WIDE, WINDING | {"rated_a": 50}, *boat("outlet1", load("stove", across="L1-L2", ohms=40), main="winding")],
        isolated(load("stove", across="L1-L2", ohms=40), secondary="split"),
    ):
        assert abs(solved(rows).current("stove.load")) == pytest.approx(6, rel=0.05)


def test_three_lines_into_a_transformer() -> None:
    """A transformer drawn on three lines is refused by name."""
    rows = [*dock("three_230_400", "16a_400v"), WINDING, *boat("outlet1", HEATER, main="winding")]
    with pytest.raises(CaseError, match="a transformer takes one line or two, not three"):
        build(read({"parts": rows}))


# --- generators, inverters, isolators ------------------------------------------------------------------------------


def on_shore(**switch: object) -> list[Row]:
    """A boat on shore power with a generator standing still behind a transfer switch."""
    return [*USUAL, GENSET, SWITCH | switch, *boat("outlet1", HEATER, panel="switch")]


def test_an_unswitched_neutral_leaves_the_generators_bond_aboard() -> None:
    """With only the lines switched the still generator's bond joins neutral and ground aboard: amperes. With the neutral switched, none."""
    assert residual(on_shore(switched_neutral=False)) > 1
    assert residual(on_shore()) < 1e-9


def test_a_running_generator_is_the_boats_only_source() -> None:
    """On the generator the boat draws nothing from the shore, and its bond there is no fault."""
    rows = [*USUAL, GENSET | {"running": True}, SWITCH | {"position": 2}, *boat("outlet1", HEATER, panel="switch")]
    solution = solved(rows)
    assert abs(solution.current("heater.load")) == pytest.approx(10, rel=0.02)
    assert max(abs(solution.residual("outlet1")), abs(solution.current("main.L1"))) < 1e-6
    two = [*WIDE, GENSET | {"running": True, "lines": 2}, SWITCH | {"position": 2}, *boat("outlet1", ACROSS_LINES, panel="switch")]
    assert abs(solved(two).current("stove.element0")) == pytest.approx(2000 / 240, rel=0.02)


@pytest.mark.parametrize(
    ("state", "common", "amperes"),
    [("passing", True, False), ("welded", True, True), ("inverting", True, True), ("inverting", False, False), ("off", True, True)],
)
def test_states_of_an_inverter(state: str, common: bool, amperes: bool) -> None:
    """A welded relay, or a common neutral while the bond is closed, joins neutral and ground on the shore's side; else nothing strays."""
    aboard = (HEATER, UNIT | {"state": state, "common_neutral": common}, load("oven", ohms=24) | {"from": "unit"})
    rows = [*USUAL, *boat("outlet1", *aboard)]
    assert (residual(rows) > 1) == amperes
    fed = abs(solved(rows).current("oven.load"))
    assert fed == pytest.approx(0 if state == "off" else 5, abs=0.2)


@pytest.mark.parametrize("system", ["it_230", "single_230"])
def test_what_makes_power_aboard_makes_the_boats_voltage(system: str) -> None:
    """Inverter, generator and transformer give the boat 230 V across its poles, on a supply whose poles are two lines too."""
    shore, heater = dock(system, "16a_230v"), load("heater", ohms=46)
    unit = UNIT | {"state": "inverting", "common_neutral": False}
    assert abs(solved([*shore, *boat("outlet1", unit, heater | {"from": "unit"})]).current("heater.load")) == pytest.approx(5, rel=0.03)
    running = [*shore, GENSET | {"running": True}, SWITCH | {"position": 2}, *boat("outlet1", heater, panel="switch")]
    assert abs(solved(running).current("heater.load")) == pytest.approx(5, rel=0.03)
    behind = [*shore, WINDING, *boat("outlet1", heater, main="winding")]
    assert abs(solved(behind).current("heater.load")) == pytest.approx(5, rel=0.03)


def test_an_isolator_hides_a_bond_at_light_load_only() -> None:
    """Two diodes each way stand off 1.2 V peak: at a small neutral drop the bond is hidden, at a large one amperes go by the ground."""

    def shown(watts: float, **isolator: object) -> float:
        block = {"id": "block", "kind": "isolator", "from": "inlet", **isolator}
        rows = [*USUAL, block, *boat("outlet1", load("heater", watts=watts), main="block")]
        rows[-1] |= {"afloat": False}
        return residual(rows, BOND)

    assert shown(100) < 1e-3
    assert shown(3300) > 1
    assert shown(100, style="capacitor") > 0.05


# --- loads and hull ------------------------------------------------------------------------------------------------


def test_a_one_pole_thermostat_that_opens_floats_the_element() -> None:
    """A 240 V element breached at its middle is silent while it heats; its one-pole switch opens, it floats to the other leg, and trips."""
    breach = Fault("appliance_leak", at="stove", ohms=1000, position=0.5)
    for poles, trips in ((1, True), (2, False)):
        stove = load("stove", across="L1-L2", watts=2000, element=True, switch_poles=poles)
        assert residual([*WIDE, *boat("outlet1", stove)], breach) < 1e-3
        assert (residual([*WIDE, *boat("outlet1", stove | {"on": False})], breach) > 0.1) == trips


@pytest.mark.parametrize(("water", "ohm_metres"), [("fresh", 50.0), ("brackish", 3.0), ("salt", 0.25)])
def test_the_way_into_the_water(water: str, ohm_metres: float) -> None:
    """A hull's metal reaches far water through rho / (2 pi r), a hemisphere electrode (textbook)."""
    for radius in (0.1, 1.0):
        rows = [*USUAL, *boat("outlet1", HEATER)]
        rows[-1] |= {"water": water, "radius_m": radius}
        (branch,) = [one for one in build(read({"parts": rows})).branches if one.id == "hull.water"]
        assert branch.impedance == pytest.approx(ohm_metres / (2 * math.pi * radius))


def test_on_stands_an_open_ground_hides_the_leak_and_keeps_the_hull_live() -> None:
    """Afloat in salt water a leak with an open ground still shows; on stands the residual is gone and the hull stands at line voltage."""
    fault = Fault("open_ground_with_leak", at="cord", load="heater", ohms=500)
    rows = [*USUAL, *boat("outlet1", HEATER)]
    rows[-1] |= {"water": "salt", "material": "metal"}
    assert residual(rows, fault) > 0.2
    rows[-1] |= {"afloat": False}
    solution = solved(rows, fault)
    assert abs(solution.residual("outlet1")) < 1e-9
    assert abs(solution.voltage("hull.metal") or 0j) > 110


def test_a_branch_device_sees_its_own_circuit_only() -> None:
    """A device in a branch sees its circuit's leak and nothing of the other circuits'."""
    galley = [
        {"id": "galley", "kind": "breaker", "from": "panel", "device": "class_a", "poles": 2},
        load("kettle", ohms=14) | {"from": "galley"},
    ]
    rows = [*USUAL, *boat("outlet1", HEATER, *galley)]
    assert residual(rows, Fault("appliance_leak", at="kettle", ohms=8000), at="galley") == pytest.approx(0.015, rel=0.03)
    assert residual(rows, LEAK, at="galley") < 1e-9


# --- whose boat, and what a switch opens ---------------------------------------------------------------------------


def test_a_load_finds_its_panel_and_main_through_whatever_stands_between() -> None:
    """Panel and main are found behind an inverter, a transfer switch, an isolator and a transformer; the generator is the boat's own."""
    block = {"id": "block", "kind": "isolator", "from": "winding"}
    rows = [
        *USUAL,
        WINDING,
        block,
        GENSET,
        SWITCH,
        UNIT,
        *boat("outlet1", load("oven", ohms=24) | {"from": "unit"}, main="block", panel="switch"),
    ]
    installation = read({"parts": rows})
    oven = installation.part("oven")
    assert (panel_of(installation, oven).id, main_of(installation, oven).id) == ("panel", "main")
    assert {"genset", "winding", "block", "unit"} <= {part.id for part in own_parts(installation)}


def test_branches_off_ends_what_hangs_on_an_inverter_too() -> None:
    """With all branches off nothing aboard draws current, behind an inverter neither."""
    installation = read({"parts": [*USUAL, *boat("outlet1", HEATER, UNIT, load("oven", ohms=24) | {"from": "unit"})]})
    off = switched("branches_off", installation, build(installation))
    assert abs(solve(off).current("cord.L1")) < 1e-9


def test_a_transfer_switch_has_two_sources() -> None:
    """One source more or less is refused by name."""
    rows = [row | ({"from": ["main"]} if row["id"] == "switch" else {}) for row in on_shore()]
    with pytest.raises(CaseError, match="a transfer switch has two sources"):
        read({"parts": rows})


@pytest.mark.parametrize(
    ("aboard", "missing"),
    [
        ([UNIT, load("stove", across="L1-L2", ohms=40) | {"from": "unit"}], "L2"),
        ([load("stove", across="L1-L2", ohms=40)], "L2"),
    ],
)
def test_a_load_without_its_conductors(aboard: list[Row], missing: str) -> None:
    """A load across two lines where only one is brought is refused by name and value."""
    with pytest.raises(CaseError, match=f"nothing brings {missing} to it") as caught:
        build(read({"parts": [*USUAL, *boat("outlet1", *aboard)]}))
    assert caught.value.where.endswith(".across")
    assert caught.value.value == "L1-L2"
