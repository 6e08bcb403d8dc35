"""The closed forms of shore power against whole installations: what a residual must be, worked out by hand from currents and ohms.

Each form follows from the current law and Ohm's law alone; where a form needs ideal conductors the ohms are made tiny instead.
"""

from __future__ import annotations

import cmath
import math
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from strayline import casefile
from strayline.causes import Fault, applied
from strayline.components import SYSTEMS
from strayline.contexts import switched
from strayline.installation import build
from strayline.parts import read
from strayline.residuals import residuals, stated_network
from strayline.solve import Solution, crossings, solve

if TYPE_CHECKING:
    from strayline.network import Network

Row = dict[str, Any]

NOTHING_A = 1e-9  # a residual that is zero by the current law, beside load currents of some ten amperes
TINY = 1e-6  # ohms that leave a load its nominal voltage to a millionth
NOMINAL = 1e-3  # a load of 12 ohm has a switch of 2 mohm in front of it
SPLIT, WYE, SINGLE = "split_120_240", "wye_120_208", "single_230"
SCENARIOS = sorted((Path(__file__).parents[2] / "scenarios").glob("*.toml"))

ohms = st.floats(1e-3, 0.5)
loads_ohms = st.floats(6, 500)


def part(name: str, kind: str, source: object = None, **given_values: object) -> Row:
    """One row of an installation."""
    return {"id": name, "kind": kind, **({} if source is None else {"from": source}), **given_values}


def wire(value: float) -> Row:
    """The same ohms for every conductor of a part."""
    return {"line_ohms": value, "neutral_ohms": value, "ground_ohms": value}


def shore(system: str, value: float = TINY, **supply: object) -> list[Row]:
    """A supply, a feeder and a post of the same ohms each."""
    given_ohms = {"line_ohms": value, "neutral_ohms": value}
    return [
        part("dock", "supply", system=system, **(given_ohms | supply)),
        part("feeder", "feeder", "dock", **wire(value)),
        part("post", "pedestal", "feeder", **wire(value)),
    ]


def outlet(name: str, connector: str, value: float = TINY, **given_values: object) -> Row:
    """A receptacle on the post."""
    return part(name, "receptacle", "post", connector=connector, **(wire(value) | given_values))


def behind(source: str, value: float = TINY, suffix: str = "", **main: object) -> list[Row]:
    """Cord, inlet and main behind a receptacle or an adapter."""
    return [
        part(f"cord{suffix}", "cord", source, **wire(value)),
        part(f"inlet{suffix}", "inlet", f"cord{suffix}", **wire(value)),
        part(f"main{suffix}", "main", f"inlet{suffix}", **(wire(value) | main)),
    ]


def panel(*loads: Row, source: object = "main", value: float = TINY, suffix: str = "", afloat: bool = True, **hull: object) -> list[Row]:
    """A panel with its loads and its hull."""
    return [
        part(f"panel{suffix}", "panel", source, **wire(value)),
        *(load | {"from": load.get("from", f"panel{suffix}")} for load in loads),
        part(f"hull{suffix}", "hull", f"panel{suffix}", afloat=afloat, **hull),
    ]


def load(name: str, across: str = "L1-N", **given_values: object) -> Row:
    """A load; its panel is filled in by `panel`."""
    return {"id": name, "kind": "load", "across": across, **given_values}


def one_boat(
    system: str, connector: str, *loads: Row, value: float = TINY, afloat: bool = True, leg: str = "L1", **hull: object
) -> list[Row]:
    """A boat on one cord."""
    rows = [*shore(system, value), outlet("outlet", connector, value, leg=leg), *behind("outlet", value)]
    return [*rows, *panel(*loads, value=value, afloat=afloat, **hull)]


def next_door(*loads: Row, value: float = TINY, **hull: object) -> list[Row]:
    """Another boat on the same post."""
    return [
        outlet("outlet9", "30a_125v", value),
        *behind("outlet9", value, "9"),
        *panel(*loads, source="main9", value=value, suffix="9", **hull),
    ]


def network_of(rows: list[Row], *faults: Fault) -> Network:
    """The network of an installation with faults."""
    installation = read({"parts": rows})
    return applied(installation, build(installation), faults)


def solved(rows: list[Row], *faults: Fault) -> Solution:
    """The solved network of an installation with faults."""
    return solve(network_of(rows, *faults))


def hull_volts(solution: Solution, hull: str = "hull") -> float:
    """Volts of a hull against the water far off."""
    volts = solution.voltage(f"{hull}.metal")
    assert volts is not None
    return abs(volts)


# A combining Y and joined neutrals: with a the share of the neutral return in A, r_A = (1 - a) I1 - a I2 and r_B = -r_A


def y_boat(
    system: str, *loads: Row, neutrals: tuple[float, float] = (TINY, TINY), legs: tuple[str, str] = ("L1", "L2"), tail: str = "b"
) -> list[Row]:
    """A boat on a combining Y whose two outlets have these neutral ohms."""
    return [
        *shore(system),
        outlet("a", "30a_125v", leg=legs[0], neutral_ohms=neutrals[0]),
        outlet("b", "30a_125v", leg=legs[1], neutral_ohms=neutrals[1]),
        part("y", "adapter", ["a", tail], style="combining_y", **wire(TINY)),
        *behind("y"),
        *panel(*loads),
    ]


@settings(max_examples=25)
@given(system=st.sampled_from([SPLIT, WYE]), near=ohms, far=ohms, one=loads_ohms, two=loads_ohms, across=loads_ohms)
def test_combining_y(system: str, near: float, far: float, one: float, two: float, across: float) -> None:
    """The outlets of a combining Y see (1 - a) I1 - a I2 and its opposite, for any neutrals and loads; main and feeder see nothing."""
    rows = y_boat(system, load("one", ohms=one), load("two", "L2-N", ohms=two), load("both", "L1-L2", ohms=across), neutrals=(near, far))
    solution = solved(rows)
    a = (far + TINY) / (near + far + 2 * TINY)
    expected = (1 - a) * solution.current("a.L1") - a * solution.current("b.L1")
    assert solution.residual("a") == pytest.approx(expected, abs=NOTHING_A)
    assert solution.residual("b") == pytest.approx(-expected, abs=NOTHING_A)
    assert abs(solution.residual("main")) < NOTHING_A
    assert abs(solution.residual("feeder")) < NOTHING_A


@pytest.mark.parametrize(
    ("system", "loads", "share"),
    [
        (SPLIT, [load("one", ohms=12)], 1 / 2),
        (SPLIT, [load("one", ohms=12), load("two", "L2-N", ohms=12)], 1),
        (SPLIT, [load("both", "L1-L2", ohms=24)], 1),
        (WYE, [load("one", ohms=12), load("two", "L2-N", ohms=12)], math.sqrt(3) / 2),
        (WYE, [load("both", "L1-L2", ohms=12 * math.sqrt(3))], 1),
    ],
)
def test_combining_y_with_equal_neutrals(system: str, loads: list[Row], share: float) -> None:
    """With equal neutrals: half of one 120 V load, all of balanced ones and of a line-to-line one, sqrt(3)/2 on two of three legs."""
    solution = solved(y_boat(system, *loads))
    assert abs(solution.residual("a")) == pytest.approx(10 * share, rel=NOMINAL)


def test_combining_y_on_one_leg() -> None:
    """Both plugs on the same leg with equal loads: no residual, twice the current in the cord's neutral, no volts for a 240 V load."""
    rows = y_boat(SPLIT, load("one", ohms=12), load("two", "L2-N", ohms=12), load("both", "L1-L2", ohms=24), legs=("L1", "L1"))
    solution = solved(rows)
    assert abs(solution.residual("a")) < 1e-6
    assert abs(solution.current("cord.N")) == pytest.approx(20, rel=NOMINAL)
    assert abs(solution.current("both.load")) < 1e-6


@settings(max_examples=25)
@given(system=st.sampled_from([SPLIT, WYE]), near=ohms, far=ohms, one=loads_ohms, two=loads_ohms)
def test_joined_inlets(system: str, near: float, far: float, one: float, two: float) -> None:
    """Two cords into one panel obey the same algebra, and the devices aboard see it too."""
    rows = [
        *shore(system),
        *(outlet(name, "30a_125v", leg=leg) for name, leg in (("a", "L1"), ("b", "L2"))),
        *(row for name, value in (("a", near), ("b", far)) for row in behind(name, value, f"_{name}")),
        *panel(load("one", ohms=one), load("two", "L2-N", ohms=two), source=["main_a", "main_b"]),
    ]
    solution = solved(rows)
    a = (3 * far + 2 * TINY) / (3 * near + 3 * far + 4 * TINY)
    expected = (1 - a) * solution.current("a.L1") - a * solution.current("b.L1")
    for sensor, sign in (("a", 1), ("main_a", 1), ("b", -1), ("main_b", -1)):
        assert solution.residual(sensor) == pytest.approx(sign * expected, abs=NOTHING_A)
    assert abs(solution.residual("feeder")) < NOTHING_A


@settings(max_examples=25)
@given(near=ohms, far=ohms, one=loads_ohms, two=loads_ohms)
def test_splitting_y_with_joined_neutrals(near: float, far: float, one: float, two: float) -> None:
    """Behind a splitting Y the pedestal sees nothing and both devices aboard see the whole of it: the mirror image."""
    rows = [
        *shore(SPLIT),
        outlet("outlet", "50a_125_250v"),
        part("y", "adapter", "outlet", style="splitting_y", **wire(TINY)),
        *(row for name, value in (("a", near), ("b", far)) for row in behind(f"y.{name}", value, f"_{name}")),
        *panel(load("one", ohms=one), load("two", "L2-N", ohms=two), source=["main_a", "main_b"]),
    ]
    solution = solved(rows)
    a = (3 * far + 2 * TINY) / (3 * near + 3 * far + 4 * TINY)
    expected = (1 - a) * solution.current("main_a.L1") - a * solution.current("main_b.L1")
    assert solution.residual("main_a") == pytest.approx(expected, abs=NOTHING_A)
    assert solution.residual("main_b") == pytest.approx(-expected, abs=NOTHING_A)
    assert abs(solution.residual("outlet")) < NOTHING_A


# A bond aboard: the return splits between neutral and ground


@settings(max_examples=25)
@given(value=ohms, bond=st.floats(1e-3, 2), size=loads_ohms)
def test_panel_bond(value: float, bond: float, size: float) -> None:
    """Ashore a bond sends Z_N / (Z_N + Z_G) of the load's current over the ground, past every device upstream alike."""
    solution = solved(
        one_boat(SPLIT, "30a_125v", load("kettle", ohms=size), value=value, afloat=False), Fault("panel_bond", at="panel", ohms=bond)
    )
    neutral = ground = 7 * value  # feeder, post, outlet, cord, inlet, main, panel
    expected = solution.current("kettle.load") * neutral / (neutral + ground + bond + 0.001)  # and the dock's own bond, by default 1 mohm
    for sensor in ("feeder", "outlet", "main"):
        assert solution.residual(sensor) == pytest.approx(expected, rel=1e-9)


@pytest.mark.parametrize(
    ("system", "loads", "neutral_a"),
    [
        (SPLIT, [load("one", ohms=12), load("two", "L2-N", ohms=12)], 0),
        (SPLIT, [load("both", "L1-L2", ohms=24)], 0),
        (WYE, [load("both", "L1-L2", ohms=24)], 0),
        (WYE, [load("one", ohms=12), load("two", "L2-N", ohms=12)], 10),
    ],
)
def test_panel_bond_with_balanced_loads(system: str, loads: list[Row], neutral_a: float) -> None:
    """A bond is blind to balanced loads on split phase and to line-to-line loads, but not to two legs of three."""
    value = 1e-4
    rows = one_boat(system, "50a_125_250v", *loads, value=value, afloat=False)
    solution = solved(rows, Fault("panel_bond", at="panel", ohms=value))
    assert abs(solution.residual("outlet")) == pytest.approx(neutral_a * 7 * value / (15 * value + 0.001), rel=1e-3, abs=NOTHING_A)


def test_panel_bond_with_all_loads_off() -> None:
    """With all loads off a neighbour's neutral drop still drives a bond; a one-pole main leaves it, a two-pole main ends it."""

    def residual_ma(**main: object) -> float:
        rows = one_boat(SPLIT, "30a_125v", value=0.01)
        rows = [row | main if row["id"] == "main" else row for row in rows]
        return 1e3 * abs(
            solved([*rows, *next_door(load("kettle9", ohms=8))], Fault("panel_bond", at="panel", ohms=0.01)).residual("outlet")
        )

    assert residual_ma() > 30
    assert residual_ma(closed=False, poles=1) == pytest.approx(residual_ma(), rel=1e-6)
    assert residual_ma(closed=False, poles=2) < 1e-6


def test_opening_breakers_leaves_a_bond() -> None:
    """A single-pole branch breaker never ends a bond in the panel: the residual is the same as with the breaker's load switched off."""
    rows = one_boat(SPLIT, "30a_125v", {**load("kettle", ohms=12), "from": "breaker"}, value=0.01)
    rows = [*rows, part("breaker", "breaker", "panel"), *next_door(load("kettle9", ohms=8))]
    installation = read({"parts": rows})
    network = network_of(rows, Fault("panel_bond", at="panel", ohms=0.01))
    opened = solve(switched("branches_off", installation, network)).residual("outlet")
    off = solved([row | {"on": False} if row["id"] == "kettle" else row for row in rows], Fault("panel_bond", at="panel", ohms=0.01))
    assert abs(opened) > 0.03
    assert opened == pytest.approx(off.residual("outlet"), abs=NOTHING_A)


# A leak part-way along an element


def element_volts(system: str, across: str, position: float) -> complex:
    """Volts against ground at a position along an element, from 0 (line end) to 1."""
    phasors = {line: cmath.rect(SYSTEMS[system].volts, math.radians(angle)) for line, angle in SYSTEMS[system].lines.items()} | {"N": 0j}
    first, second = (phasors[name] for name in across.split("-"))
    return first + (second - first) * position


@pytest.mark.parametrize(
    ("system", "connector", "across"),
    [(SPLIT, "30a_125v", "L1-N"), (SPLIT, "50a_125_250v", "L1-L2"), (WYE, "50a_125_250v", "L1-L2"), (SINGLE, "16a_230v", "L1-N")],
)
@pytest.mark.parametrize("cut", [True, False])
@settings(max_examples=15)
@given(position=st.floats(0, 1), leak=st.floats(500, 50_000))
def test_element_leak(system: str, connector: str, across: str, cut: bool, position: float, leak: float) -> None:
    """A breach at x leaks |V(x)| / R, wherever along the element it is, with or without the taps of an element."""
    solution = solved(
        one_boat(system, connector, load("heater", across, ohms=20, element=cut, ground_ohms=TINY)),
        Fault("appliance_leak", at="heater", ohms=leak, position=position),
    )
    # The breach sees the two halves of the element in parallel, at most a quarter of its 20 ohm.
    expected = element_volts(system, across, position) / (leak + 20 * position * (1 - position))
    for sensor in ("feeder", "outlet", "main"):
        assert abs(solution.residual(sensor)) == pytest.approx(abs(expected), rel=1e-3, abs=5e-5)  # 24 mV drop over the switch


def test_blind_middle_of_a_240_volt_element() -> None:
    """A breach at the middle of a 240 V element reads nothing on split phase and leaves 60 V on two legs of three."""
    for system, volts in ((SPLIT, 0), (WYE, 60)):
        rows = one_boat(system, "50a_125_250v", load("heater", "L1-L2", ohms=20, element=True))
        solution = solved(rows, Fault("appliance_leak", at="heater", ohms=3000, position=0.5))
        assert abs(solution.residual("outlet")) == pytest.approx(volts / 3005, rel=1e-3, abs=1e-5)  # 24 mV drop over the switch


def test_blind_middle_trips_when_the_heater_switches_off() -> None:
    """Where one pole opens the element follows the other leg: a breach at its middle, blind while it heats, then leaks 120 V / R."""
    rows = one_boat(SPLIT, "50a_125_250v", load("heater", "L1-L2", ohms=20, element=True, on=False))
    solution = solved(rows, Fault("appliance_leak", at="heater", ohms=3000, position=0.5))
    assert abs(solution.residual("outlet")) == pytest.approx(120 / 3010, rel=1e-3)


# Filters and leaks add as phasors


@pytest.mark.parametrize(
    ("system", "connector", "milliamperes"),
    [(SPLIT, "30a_125v", 0.4524), (SINGLE, "16a_230v", 0.7226)],
)
def test_filter(system: str, connector: str, milliamperes: float) -> None:
    """A filter of 10 nF lets 2 pi f C V through: 0.4524 mA at 120 V 60 Hz, 0.7226 mA at 230 V 50 Hz (worked by hand)."""
    solution = solved(one_boat(system, connector, load("charger", ohms=100, filter_nf=10)))
    assert abs(solution.residual("outlet")) * 1e3 == pytest.approx(milliamperes, rel=1e-3)


@pytest.mark.parametrize(("system", "share"), [(SPLIT, 0), (WYE, 1)])
def test_filters_on_two_legs(system: str, share: float) -> None:
    """Equal filters on opposite legs cancel; on two legs of three they add to the size of one."""
    one = 2 * math.pi * 60 * 100e-9 * 120
    rows = one_boat(
        system, "50a_125_250v", *(load(name, across, ohms=50, filter_nf=100) for name, across in (("one", "L1-N"), ("two", "L2-N")))
    )
    assert abs(solved(rows).residual("outlet")) == pytest.approx(share * one, rel=1e-3, abs=1e-6)


def test_leak_and_filter_in_quadrature() -> None:
    """4 kohm beside 500 nF at 120 V 60 Hz is hypot(30, 22.62) mA, not their sum."""
    rows = one_boat(SPLIT, "30a_125v", load("charger", ohms=50, filter_nf=500, ground_ohms=TINY))
    solution = solved(rows, Fault("appliance_leak", at="charger", ohms=4000))
    assert abs(solution.residual("outlet")) == pytest.approx(math.hypot(120 / 4000, 2 * math.pi * 60 * 500e-9 * 120), rel=1e-3)


# Conductors in the wrong place


def test_neutral_and_ground_exchanged() -> None:
    """The pedestal sees the whole neutral current, the device aboard nothing."""
    rows = one_boat(SPLIT, "30a_125v", load("kettle", ohms=12), afloat=False)
    solution = solved(rows, Fault("ground_neutral_exchanged", at="cord"))
    assert abs(solution.residual("outlet")) == pytest.approx(10, rel=NOMINAL)
    assert abs(solution.residual("main")) < NOTHING_A


def test_exchange_afloat_without_load() -> None:
    """Afloat an exchange is not silent: the dock's neutral drop, made by the boat next door, drives current through hull and water."""
    rows = [*one_boat(SPLIT, "30a_125v", value=0.01, water_ohms=16), *next_door(load("kettle9", ohms=8), value=0.01, afloat=False)]
    dropped = solved(rows).voltage("outlet.N")
    assert dropped is not None
    solution = solved(rows, Fault("ground_neutral_exchanged", at="cord"))
    assert abs(solution.residual("outlet")) == pytest.approx(abs(dropped) / (16 + 5), rel=0.02)  # 5 ohm: the dock's earth, by default
    assert solved(
        [row | {"afloat": False} if row["kind"] == "hull" else row for row in rows], Fault("ground_neutral_exchanged", at="cord")
    ).residual("outlet") == pytest.approx(0, abs=NOTHING_A)


def test_line_and_ground_exchanged() -> None:
    """The hull stands at the line's voltage, divided between the water under it and the dock's earth."""
    rows = one_boat(SPLIT, "30a_125v", load("kettle", ohms=12), water_ohms=15)
    assert hull_volts(solved(rows, Fault("line_ground_exchanged", at="cord"))) == pytest.approx(120 * 15 / (15 + 5), rel=0.02)


def test_neutral_ahead_of_a_device() -> None:
    """A load whose neutral lands ahead of the main is seen by the main alone, and whole."""
    rows = one_boat(SPLIT, "30a_125v", load("kettle", ohms=12), load("stove", ohms=20))
    solution = solved(rows, Fault("neutral_ahead_of_device", at="main", load="kettle"))
    assert abs(solution.residual("main")) == pytest.approx(10, rel=NOMINAL)
    assert abs(solution.residual("outlet")) < NOTHING_A


# An open protective conductor


def open_ground(*, afloat: bool, opened: bool, water_ohms: float = 2.0) -> Solution:
    """A leak of 2 kohm with the cord's ground whole or open."""
    cause = "open_ground_with_leak" if opened else "appliance_leak"
    at, load_id = ("cord", "heater") if opened else ("heater", "")
    rows = one_boat(SPLIT, "30a_125v", load("heater", ohms=20), afloat=afloat, water_ohms=water_ohms)
    return solved(rows, Fault(cause, at=at, load=load_id, ohms=2000))


def test_open_ground_afloat() -> None:
    """With a good path through the water the residual hardly drops, never rises, and moves from the ground wire to the water."""
    whole, opened = open_ground(afloat=True, opened=False), open_ground(afloat=True, opened=True)
    assert 0.99 * abs(whole.residual("outlet")) < abs(opened.residual("outlet")) <= abs(whole.residual("outlet"))
    assert abs(opened.current("hull.water")) == pytest.approx(abs(opened.residual("outlet")), rel=1e-9)
    assert abs(whole.current("hull.water")) < 0.01 * abs(whole.residual("outlet"))
    assert hull_volts(opened) > 100 * hull_volts(whole)


def test_open_ground_ashore() -> None:
    """On stands the residual collapses while the hull sits at line voltage: the deadliest boat reads zero."""
    solution = open_ground(afloat=False, opened=True)
    for sensor in ("feeder", "outlet", "main"):
        assert abs(solution.residual(sensor)) < NOTHING_A
    assert hull_volts(solution) == pytest.approx(120, rel=0.01)


@given(water=st.floats(0.1, 1e4))
@settings(max_examples=20)
def test_open_ground_takes_the_water(water: float) -> None:
    """With the ground open the leak is the line voltage over the leak, the water and the dock's earth in series."""
    solution = open_ground(afloat=True, opened=True, water_ohms=water)
    assert abs(solution.residual("outlet")) == pytest.approx(120 / (2000 + water + 5 + 0.05 + 0.05), rel=1e-3)


# The feeder and the boat next door


@settings(max_examples=20)
@given(farads=st.lists(st.floats(5, 300), min_size=2, max_size=4), leak=st.floats(800, 20_000))
def test_feeder_is_the_phasor_sum(farads: list[float], leak: float) -> None:
    """The feeder sees the phasor sum of its outlets and of what its post leaks: less than the sum of the magnitudes."""
    rows = shore(SINGLE, 0.01)
    for number, nanofarads in enumerate(farads):
        rows += [outlet(f"outlet{number}", "16a_230v", 0.01), *behind(f"outlet{number}", 0.01, f"{number}")]
        rows += panel(load(f"charger{number}", ohms=100, filter_nf=nanofarads), source=f"main{number}", value=0.01, suffix=f"{number}")
    solution = solved(rows, Fault("feeder_accumulation", at="post", ohms=leak))
    each = [solution.residual(f"outlet{number}") for number in range(len(farads))] + [solution.current("fault0.leak")]
    assert solution.residual("feeder") == pytest.approx(sum(each), abs=NOTHING_A)
    assert abs(solution.residual("feeder")) < sum(map(abs, each))


def test_neighbours_leak_through_my_hull() -> None:
    """A neighbour's leak into the water climbs my ground wire: my residual stays zero, until a bond aboard turns it round in my window."""
    rows = [*one_boat(SPLIT, "30a_125v", water_ohms=1, value=0.01), *next_door(load("heater9", ohms=1e5), value=0.01, water_ohms=1)]
    leak = Fault("open_ground_with_leak", at="cord9", load="heater9", ohms=500)
    alone = solved(rows, leak)
    assert abs(alone.current("cord.G")) > 0.1
    assert abs(alone.residual("outlet")) < NOTHING_A
    bonded = solved(rows, leak, Fault("panel_bond", at="panel", ohms=0.01))
    mine, theirs = bonded.residual("outlet"), bonded.residual("outlet9")
    assert (mine / theirs).real < -0.1
    assert abs(bonded.residual("feeder")) < abs(alone.residual("feeder"))


def test_own_neutral_beside_the_docks() -> None:
    """A Y between two posts carries part of a neighbour's return with everything aboard off, and its two outlets see it as opposites."""
    rows = [
        *shore(SPLIT),
        part("post2", "pedestal", "feeder", **wire(0.02)),
        outlet("a", "30a_125v", leg="L1"),
        outlet("b", "30a_125v", leg="L2") | {"from": "post2"},
        part("y", "adapter", ["a", "b"], style="combining_y", **wire(0.01)),
        *behind("y"),
        *panel(),
        *next_door(load("kettle9", ohms=12)),
    ]
    rows = [row | {"neutral_ohms": 0.03} if row["id"] == "post" else row for row in rows]
    solution = solved(rows)
    # The kettle's current splits between the near post's 30 mohm and the way round by the Y's two tails and the far post.
    around = 0.02 + 2 * (0.01 + TINY)
    assert abs(solution.residual("a")) == pytest.approx(abs(solution.current("kettle9.load")) * 0.03 / (0.03 + around), rel=1e-6)
    assert solution.residual("b") == pytest.approx(-solution.residual("a"), abs=NOTHING_A)
    assert abs(solution.residual("main")) < NOTHING_A


# Live blades


def blade_volts(rows: list[Row], blade: str) -> float | None:
    """Volts of a bare blade; None where it hangs on nothing."""
    solution = solved(rows)
    assert blade in {one.id for one in solution.network.blades}
    volts = solution.voltage(blade)
    return None if volts is None else abs(volts)


def test_one_tail_of_a_y() -> None:
    """One tail loose: a 240 V load aboard puts the other leg's blade at 120 V; with none the blade hangs on nothing."""
    assert blade_volts(y_boat(SPLIT, load("cooler", "L1-L2", ohms=24), tail=""), "y.plug_b.L1") == pytest.approx(120, rel=1e-3)
    assert blade_volts(y_boat(SPLIT, load("kettle", ohms=12), tail=""), "y.plug_b.L1") is None


def test_one_cord_of_joined_inlets() -> None:
    """One of two cords loose at the dock, on a boat of one panel: its plug's blade is live behind a load across the two lines."""
    rows = [
        *shore(SPLIT),
        outlet("a", "30a_125v"),
        *behind("a", suffix="_a"),
        *behind("", suffix="_b"),
        *panel(load("cooler", "L1-L2", ohms=24), source=["main_a", "main_b"]),
    ]
    assert blade_volts(rows, "cord_b.plug.L1") == pytest.approx(120, rel=1e-3)


# What holds for any installation


@st.composite
def healthy_boats(draw: st.DrawFn) -> list[Row]:
    """A boat on one plug, straight or through an adapter, beside another, with any ohms and loads and no way out of the windows."""
    system = draw(st.sampled_from([SPLIT, WYE, SINGLE]))
    value = draw(ohms)
    ways = {SINGLE: ["16a_230v", "32a_230v"]}.get(system, ["20a_125v", "30a_125v", "50a_125_250v", "straight_30_50", "straight_50_30"])
    way = draw(st.sampled_from(ways))
    connector = {"straight_30_50": "30a_125v", "straight_50_30": "50a_125_250v"}.get(way, way)
    adapter = [part("adapter", "adapter", "outlet", style=way, **wire(draw(ohms)))] if way.startswith("straight") else []
    lines = way in ("50a_125_250v", "straight_30_50")
    loads = [
        load(
            f"load{number}",
            draw(st.sampled_from(["L1-N", "L2-N", "L1-L2"] if lines and number else ["L1-N"])),
            ohms=draw(loads_ohms),
            power_factor=draw(st.floats(0.3, 1)),
        )
        for number in range(draw(st.integers(1, 4)))
    ]
    rows = [
        *shore(system, value),
        outlet("outlet", connector, draw(ohms)),
        *adapter,
        *behind("adapter" if adapter else "outlet", draw(ohms)),
    ]
    return [*rows, *panel(*loads, value=draw(ohms), afloat=draw(st.booleans()))]


@settings(max_examples=40)
@given(rows=healthy_boats())
def test_healthy_boats_leak_nothing(rows: list[Row]) -> None:
    """With no way out of the windows every residual is zero, whatever the supply, the plug, the ohms and the loads."""
    solution = solved(rows)
    assert max(abs(solution.current(branch.id)) for branch in solution.network.branches) > 0.1
    for sensor in solution.network.sensors:
        assert abs(solution.residual(sensor.id)) < NOTHING_A


@settings(max_examples=20)
@given(rows=healthy_boats(), volts=st.floats(60, 240))
def test_doubling_the_supply(rows: list[Row], volts: float) -> None:
    """Twice the supply's volts make twice every residual, at the same angle."""
    leak = Fault("panel_bond", at="panel", ohms=0.1), Fault("wet_cord", at="cord", ohms=2000)
    once, twice = (solved([rows[0] | {"volts": times * volts}, *rows[1:]], *leak) for times in (1, 2))
    for sensor in ("feeder", "outlet", "main"):
        assert twice.residual(sensor) == pytest.approx(2 * once.residual(sensor), rel=1e-9, abs=NOTHING_A)


@pytest.mark.parametrize("system", [SPLIT, WYE])
@settings(max_examples=15)
@given(one=loads_ohms, two=loads_ohms, leak=st.floats(300, 20_000))
def test_swapping_the_lines(system: str, one: float, two: float, leak: float) -> None:
    """The two lines are alike: what hangs on L1 hung on L2 instead, and the other way round, makes the same residuals in size."""

    def sizes(first: str, second: str) -> list[float]:
        rows = one_boat(system, "50a_125_250v", load("one", first, ohms=one), load("two", second, ohms=two), value=0.02)
        faults = Fault("appliance_leak", at="one", ohms=leak), Fault("panel_bond", at="panel", ohms=0.1)
        return [abs(solved(rows, *faults).residual(sensor)) for sensor in ("feeder", "outlet", "main")]

    assert sizes("L1-N", "L2-N") == pytest.approx(sizes("L2-N", "L1-N"), rel=1e-6)


@settings(max_examples=20)
@given(leak=st.floats(300, 50_000), more=st.floats(1.01, 100))
def test_a_lesser_leak_is_less(leak: float, more: float) -> None:
    """A single leak's residual falls with its resistance and vanishes with it."""
    rows = one_boat(SINGLE, "16a_230v", load("kettle", ohms=30))
    strong, weak = (abs(solved(rows, Fault("wet_inlet", at="inlet", ohms=value)).residual("outlet")) for value in (leak, leak * more))
    assert weak < strong
    assert abs(solved(rows).residual("outlet")) < NOTHING_A


@pytest.mark.parametrize(("cause", "at"), [("wet_cord", "cord"), ("wet_inlet", "inlet")])
def test_a_device_downstream_of_a_fault_reads_nothing(cause: str, at: str) -> None:
    """A fault between pedestal and main is seen by the pedestal and the feeder and not by the main."""
    solution = solved(one_boat(SINGLE, "16a_230v", load("kettle", ohms=30)), Fault(cause, at=at, ohms=2300))
    assert abs(solution.residual("outlet")) == pytest.approx(0.1, rel=1e-3)
    assert solution.residual("feeder") == pytest.approx(solution.residual("outlet"), abs=NOTHING_A)
    assert abs(solution.residual("main")) < NOTHING_A


@pytest.mark.parametrize("file", SCENARIOS, ids=lambda file: file.stem)
def test_crossings_add_up(file: Path) -> None:
    """In every scenario what leaves each sensor's zone outside its window adds up to that sensor's residual."""
    case = casefile.load(file)
    solution = solve(stated_network(case)[1])
    for sensor in solution.network.sensors:
        total = sum(current for _, current in crossings(solution.network, solution, sensor.id))
        assert total == pytest.approx(solution.residual(sensor.id), abs=NOTHING_A)
    told = residuals(case)
    for row in told["sensors"]:
        listed = [crossing for crossing in told["crossings"] if crossing["sensor"] == row["id"]]
        total = sum(cmath.rect(crossing["ma"], math.radians(crossing["angle_deg"] or 0)) for crossing in listed)
        assert abs(total) == pytest.approx(row["residual_ma"], abs=1e-3 * (1 + len(listed)))  # below 0.001 mA no angle is told


def test_two_leaks_in_one_element() -> None:
    """Two breaches of one element leak what each would alone, whichever is named first, and a neutral landed ahead still moves its end."""
    rows = one_boat(SPLIT, "30a_125v", load("heater", ohms=20), afloat=False)
    near, far = (Fault("appliance_leak", at="heater", ohms=50_000, position=position) for position in (0.1004, 0.6))
    ahead = Fault("neutral_ahead_of_device", at="main", load="heater")
    alone = sum(abs(solved(rows, fault).residual("outlet")) for fault in (near, far))
    for faults in ((near, far), (far, near)):
        both = solved(rows, *faults)
        assert abs(both.residual("outlet")) == pytest.approx(alone, rel=1e-3)
        assert abs(solved(rows, *faults, ahead).residual("main")) == pytest.approx(6, rel=1e-2)


def test_a_wet_splitting_y_leaks() -> None:
    """A wet splitting Y leaks the line voltage over its ohms, as any other adapter does."""
    rows = [
        *shore(SPLIT),
        outlet("outlet", "50a_125_250v"),
        part("y", "adapter", "outlet", style="splitting_y"),
        *behind("y.a"),
        *panel(),
    ]
    assert abs(solved(rows, Fault("wet_cord", at="y", ohms=4000)).residual("outlet")) == pytest.approx(120 / 4000, rel=1e-3)
