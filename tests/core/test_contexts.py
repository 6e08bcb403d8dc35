"""Contexts: each opens what it says and nothing else, invents no conductor, and leaves no live blade unseen."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import pytest

from drawn import boat, dock
from strayline import arrangements, contexts
from strayline.arrangements import Arrangement
from strayline.boat import own_parts
from strayline.causes import Fault
from strayline.installation import build
from strayline.parts import Installation, read
from strayline.predict import INFINITE_OHMS, Point, Predictions
from strayline.solve import Solution, solve

if TYPE_CHECKING:
    from strayline.network import Network


def typical(plug: str, system: str = "split_120_240") -> Installation:
    """The typical boat of one arrangement, with the boat next door running."""
    return read(arrangements.parts(Arrangement(system, plug, 1.0), {}, neighbour=True, afloat=True))


def state(context: str, installation: Installation) -> tuple[Installation, Network]:
    """A context's own installation and its healthy network."""
    made = contexts.setting(context, installation)
    assert made is not None
    return made, contexts.switched(context, made, build(made))


def running(installation: Installation, solution: Solution) -> set[str]:
    """The own loads that draw current."""
    branches = {branch.id for branch in solution.network.branches}
    found = set()
    for part in own_parts(installation):
        if part.kind == "load":
            first = next((name for name in (f"{part.id}.load", f"{part.id}.element0") if name in branches), None)
            if first and abs(solution.current(first)) > 1e-3:
                found.add(part.id)
    return found


def loads(installation: Installation) -> set[str]:
    """The own loads."""
    return {part.id for part in own_parts(installation) if part.kind == "load"}


@pytest.mark.parametrize("context", contexts.DEAD)
def test_a_meter_sees_no_reactance(context: str) -> None:
    """A meter's direct current sees the copper of what conducts; under power the same conductors have a reactance."""
    installation = typical("one_cord")
    _, dead = state(context, installation)
    assert not any(branch.impedance.imag for branch in dead.branches if branch.kind != "load")
    assert build(installation).branch("cord.L1").impedance.imag > 0


@pytest.mark.parametrize("plug", ["one_cord", "one_cord_four_wire", "combining_y", "two_cords", "splitting_y"])
@pytest.mark.parametrize(
    "context", ["pedestal_alone", "cord_alone", "main_off", "branches_off", "light_load", "suspect_out", "one_load:heater"]
)
def test_opening_is_removing(plug: str, context: str) -> None:
    """A state holds branches of the network and no other, all that it lacks are the own boat's, and the boat next door runs on."""
    installation = typical(plug)
    before = build(installation)
    _, after = state(context, installation)
    assert set(after.branches) < set(before.branches)
    mine = {part.id for part in own_parts(installation)}
    assert {branch.owner for branch in set(before.branches) - set(after.branches)} <= mine
    assert abs(solve(after).current("stove9.load")) > 10


def test_as_found_is_the_network_itself() -> None:
    """As found, nothing is changed."""
    installation = typical("one_cord")
    assert state(contexts.AS_FOUND, installation)[1] == build(installation)


@pytest.mark.parametrize(
    ("context", "kinds"), [("pedestal_alone", {"receptacle"}), ("cord_alone", {"receptacle", "cord"})], ids=["pedestal_alone", "cord_alone"]
)
def test_what_is_plugged_in(context: str, kinds: set[str]) -> None:
    """With the cord pulled at the pedestal nothing of it is left, and with it pulled aboard nothing beyond it."""
    installation = typical("one_cord")
    _, network = state(context, installation)
    owners = {branch.owner for branch in network.branches}
    assert {part.kind for part in own_parts(installation) if part.id in owners} == kinds


@pytest.mark.parametrize(("poles", "opened"), [(2, {"main.L1", "main.N"}), (1, {"main.L1"})])
def test_main_off(poles: int, opened: set[str]) -> None:
    """A main opens its line, and its neutral too when it has two poles; the ground never."""
    rows = _rows("one_cord", main={"poles": poles})
    installation = read({"parts": rows})
    _, network = state("main_off", installation)
    assert {branch.id for branch in build(installation).branches} - {branch.id for branch in network.branches} == opened
    assert running(installation, solve(network)) == set()


def _rows(plug: str, **changes: dict[str, Any]) -> list[dict[str, Any]]:
    """The rows of a typical boat, some with values changed."""
    raw = arrangements.parts(Arrangement("split_120_240", plug, 1.0), {}, neighbour=True, afloat=True)
    rows = raw["parts"]
    assert isinstance(rows, list)
    return [row | changes.get(row["id"], {}) for row in rows]


@pytest.mark.parametrize("plug", ["one_cord", "one_cord_four_wire", "two_cords"])
def test_which_loads_run(plug: str) -> None:
    """All as found, none with the breakers off, one with one, those below 500 W for light ones, and all but the element for the suspect."""
    installation = typical(plug)

    def run(context: str) -> set[str]:
        return running(installation, solve(state(context, installation)[1]))

    assert run("as_found") == loads(installation)
    assert run("branches_off") == set()
    for load in loads(installation):
        assert run(f"one_load:{load}") == {load}
    assert run("light_load") == {"charger", "lamps"}
    assert run("suspect_out") == loads(installation) - {"heater"}


def test_one_load_is_one_state_for_each_own_load() -> None:
    """One load at a time means one state for each of the own loads, none for the neighbour's."""
    installation = typical("one_cord")
    assert set(contexts.expand("one_load", installation)) == {f"one_load:{load}" for load in loads(installation)}
    assert contexts.expand("main_off", installation) == ("main_off",)


def test_a_load_without_a_breaker_is_switched_off() -> None:
    """With the breakers off a load straight on the panel is off too."""
    installation = read({"parts": [*_rows("one_cord"), {"id": "pump", "kind": "load", "from": "panel", "watts": 200}]})
    assert running(installation, solve(state("branches_off", installation)[1])) == set()
    assert running(installation, solve(state("one_load:pump", installation)[1])) == {"pump"}


def test_test_load() -> None:
    """The test load is the one branch that a state adds: ten amperes from line to neutral, nothing else running."""
    installation = typical("one_cord")
    _, network = state("test_load", installation)
    assert [branch.kind for branch in set(network.branches) - set(build(installation).branches)] == ["load"]
    solution = solve(network)
    assert running(installation, solution) == set()
    assert abs(solution.current("test_load")) == pytest.approx(10, rel=0.1)


def test_the_test_load_takes_its_power_between_two_lines_too() -> None:
    """Where the boat's second pole is another line the test load is made for 230 V."""
    installation = read({"parts": [*dock("it_230", "16a_230v"), *boat("outlet1")]})
    assert abs(solve(state("test_load", installation)[1]).current("test_load")) == pytest.approx(1200 / 230, rel=0.03)


def test_without_the_y_the_whole_y_is_out() -> None:
    """Without the Y one outlet feeds the boat through a straight adapter, the other feeds nothing, and no blade is left bare."""
    installation = typical("combining_y")
    made, network = state("without_y", installation)
    assert [part.text("style") for part in made.of_kind("adapter")] == ["straight_30_50"]
    assert {parent for part in made.parts for parent in part.parents} >= {"outlet"}
    assert made.children("outlet2") == ()
    assert network.blades == ()
    solution = solve(network)
    for sensor in ("outlet", "outlet2"):
        assert abs(solution.residual(sensor)) < 0.006


def test_other_pedestal() -> None:
    """At the other pedestal the same cord hangs on the free outlet there, and the first one is empty."""
    installation = typical("one_cord")
    made, _ = state("other_pedestal", installation)
    assert made.part("cord").parents == ("spare",)
    assert made.part("spare").parents != installation.part("outlet").parents
    assert made.children("outlet") == ()


@pytest.mark.parametrize(("context", "plug"), [("without_y", "one_cord"), ("without_y", "splitting_y"), ("other_pedestal", "two_cords")])
def test_states_that_the_parts_cannot_make(context: str, plug: str) -> None:
    """There is no state without a Y where none is, and none at another pedestal for two cords."""
    assert contexts.setting(context, typical(plug)) is None
    assert contexts.left_behind(context, typical(plug)) is None


def test_no_such_state() -> None:
    """A state that is not in the table is a mistake of the author."""
    installation = typical("one_cord")
    with pytest.raises(ValueError, match="no such context"):
        contexts.switched("upside_down", installation, build(installation))


# With the cord out: a meter brings the only source


def reading(context: str, *faults: Fault, plug: str = "one_cord", name: str = "meter_ohm") -> float:
    """What the meter shows in a dead state with one fault."""
    predicted = Predictions(typical(plug), tuple(Point(fault.cause, fault, (), 1.0) for fault in faults))
    found = predicted.outlooks(context)
    assert found is not None
    watched, outlooks = found
    assert watched == ()
    return outlooks[0].readings[name]


@pytest.mark.parametrize("context", contexts.DEAD)
def test_dead_states(context: str) -> None:
    """With the cord out nothing of the dock is left, no capacitor and no window, and no source but the meter."""
    installation = typical("one_cord")
    _, network = state(context, installation)
    assert network.sensors == ()
    assert {branch.owner for branch in network.branches if branch.kind == "source"} <= {contexts.METER}
    assert all(not branch.emf for branch in network.branches if branch.owner != contexts.METER)
    assert not any(branch.kind == "filter" for branch in network.branches)
    assert not {branch.owner for branch in network.branches} & {"dock", "feeder", "post", "outlet", "stove9"}


@pytest.mark.parametrize("ohms", [0.2, 2.0])
def test_neutral_to_ground_with_the_cord_out(ohms: float) -> None:
    """The meter reads a bond in the panel as its own ohms, and a boat without one as open."""
    assert reading("cord_out", Fault("panel_bond", at="panel", ohms=ohms)) == pytest.approx(ohms, rel=1e-6)
    assert reading("cord_out", Fault("nothing_now")) == INFINITE_OHMS


@pytest.mark.parametrize(("common", "seen"), [(True, True), (False, False)])
def test_an_inverters_bond_with_the_cord_out(common: bool, seen: bool) -> None:
    """Without shore power a drawn inverter's relay falls in: with a common neutral its bond is what the meter reads at the panel."""
    unit = {"id": "unit", "kind": "inverter", "from": "panel", "common_neutral": common, "bond_ohms": 0.3}
    installation = read({"parts": [*_rows("one_cord"), unit]})
    found = Predictions(installation, (Point("nothing_now", Fault("nothing_now"), (), 1.0),)).outlooks("cord_out")
    assert found is not None
    assert (found[1][0].readings["meter_ohm"] == pytest.approx(0.3, rel=0.1)) == seen
    assert found[1][0].readings["meter_ohm"] in (pytest.approx(0.3, rel=0.1), INFINITE_OHMS)


def test_an_inverter_settles() -> None:
    """In the window after plug-in its bond sends amperes over the ground; once it has settled, less than a milliampere."""
    unit = {"id": "unit", "kind": "inverter", "from": "panel", "state": "inverting"}
    installation = read({"parts": [*_rows("one_cord"), unit]})
    assert abs(solve(build(installation)).residual("outlet")) > 1
    assert abs(solve(state("inverter_settled", installation)[1]).residual("outlet")) < 1e-3


def test_insulation_with_the_lives_joined() -> None:
    """With the live conductors joined the meter reads a leak anywhere along an element as its own ohms."""
    for position in (0.0, 0.5, 1.0):
        fault = Fault("appliance_leak", at="heater", ohms=20_000, position=position)
        assert reading("cord_joined", fault) == pytest.approx(20_000, rel=1e-3)


def test_a_cord_in_the_hand() -> None:
    """End to end a good cord joins like to like; a swapped one leads from neutral to ground, a broken ground leads nowhere."""
    swapped, broken = Fault("ground_neutral_exchanged", at="cord"), Fault("open_ground_with_leak", at="cord", load="heater", ohms=2000)
    good = Fault("nothing_now")
    assert reading("cord_in_hand", good, name="neutral_through") < 1 < reading("cord_in_hand", good, name="neutral_to_ground")
    assert reading("cord_in_hand", swapped, name="neutral_to_ground") < 1 < reading("cord_in_hand", swapped, name="neutral_through")
    assert reading("cord_in_hand", good, name="ground_through") < 1
    assert reading("cord_in_hand", broken, name="ground_through") == INFINITE_OHMS


# What a state leaves behind


def blade_volts(context: str, installation: Installation) -> float:
    """The highest volts of any bare blade in the state left behind."""
    network = contexts.left_behind(context, installation)
    assert network is not None
    solution = solve(network)
    return max((abs(solution.voltage(blade.node) or 0) for blade in network.blades), default=0.0)


def loose(plug: str, part: str, source: object) -> Installation:
    """The typical boat of an arrangement with one plug out, every breaker aboard open and every load off, as a careful person leaves it."""
    rows = _rows(plug, **{part: {"from": source}})
    quiet = {"breaker": {"closed": False}, "load": {"on": False}}
    return read({"parts": [row | quiet.get(row["kind"], {}) for row in rows]})


def test_one_tail_of_a_y_is_a_live_plug() -> None:
    """With one tail of a Y out its blade is live behind the load across both lines, though that load stands switched off now."""
    installation = loose("combining_y", "adapter", ["outlet", ""])
    assert blade_volts("as_found", installation) == pytest.approx(120, rel=0.05)
    for context in ("one_load", "suspect_out"):
        assert blade_volts(context, installation) > 100


def test_one_cord_of_joined_inlets_is_a_live_plug() -> None:
    """With one of two cords out at the dock, on a boat whose two inlets feed one panel, that cord's blade is live."""
    rows = [
        row
        for row in _rows("two_cords", cord2={"from": ""}, panel={"from": ["main", "main2"]}, hull={"from": ["panel"]})
        if row["id"] != "panel2"
    ]
    rows = [row | ({"from": "panel"} if row.get("from") == "panel2" else {}) for row in rows]
    rows = [row | ({"across": "L1-L2"} if row["id"] == "cooling" else {}) for row in rows]
    assert blade_volts("as_found", read({"parts": rows})) == pytest.approx(120, rel=0.05)


@pytest.mark.parametrize(("system", "live"), [("single_230", False), ("it_230", True)])
def test_a_second_pole_that_is_a_line_is_live(system: str, live: bool) -> None:
    """One of two cords out, on one panel: its plug is near ground where the common pole is a neutral, and live where it is a line."""
    rows = [
        row
        for row in _rows(
            "two_cords", dock={"system": system}, cord2={"from": ""}, panel={"from": ["main", "main2"]}, hull={"from": ["panel"]}
        )
        if row["id"] not in ("panel2", "spare")
    ]
    rows = [row | ({"from": "panel"} if row.get("from") == "panel2" else {}) for row in rows]
    rows = [row | ({"connector": "16a_230v", "leg": "L1"} if row["kind"] == "receptacle" else {}) for row in rows]
    rows = [row | ({"across": "L2-N"} if row["id"] == "cooling" else {}) for row in rows]
    assert (blade_volts("as_found", read({"parts": rows})) > 100) == live


def test_a_home_made_y_goes_out_with_its_wiring() -> None:
    """The straight adapter in a home-made Y's place is wired straight: what was exchanged in the Y is gone with it."""
    rows = _rows("combining_y", adapter={"style": "homemade", "wired": "neutral_ground"})
    installation = read({"parts": rows})
    assert abs(solve(build(installation)).residual("outlet")) > 1
    assert abs(solve(state("without_y", installation)[1]).residual("outlet")) < 0.006


def test_states_that_cut_the_boat_off_leave_no_live_blade() -> None:
    """With one tail out, a state that leaves the panel dead leaves the blade dead."""
    installation = loose("combining_y", "adapter", ["outlet", ""])
    for context in ("pedestal_alone", "main_off", "branches_off"):
        assert blade_volts(context, installation) < 1


@pytest.mark.parametrize("system", ["split_120_240", "wye_120_208"])
@pytest.mark.parametrize("plug", ["one_cord", "one_cord_four_wire", "combining_y", "two_cords", "splitting_y", "straight_adapter"])
def test_no_state_of_a_whole_arrangement_bares_a_live_blade(plug: str, system: str) -> None:
    """No state that a test makes of an arrangement with every plug in leaves a live blade."""
    installation = typical(plug, system)
    for context in contexts.ENERGISED:
        if contexts.setting(context, installation) is not None:
            assert blade_volts(context, installation) == 0
