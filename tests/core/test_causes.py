"""Causes: which sensors see each, closed forms against a fresh solve, the grids that are summed over, and the rows of the table."""

from __future__ import annotations

import dataclasses
import itertools
import math
import re
from typing import TYPE_CHECKING

import pytest

from strayline import arrangements, contexts, session
from strayline.arrangements import Arrangement
from strayline.catalogue.causes import CAUSE, CAUSES
from strayline.causes import Fault, applied, effect
from strayline.errors import CaseError
from strayline.installation import build
from strayline.network import Network, nodes, with_branches
from strayline.parts import Installation, read
from strayline.predict import HULL, Outlook, Point, Predictions, Watch, predictions
from strayline.settle import settled
from strayline.severities import severities
from strayline.solve import Solution, factor, probe_residual, solve

if TYPE_CHECKING:
    from collections.abc import Iterator

NEAR_A = 1e-9
SETUPS = [
    (system, plug)
    for system, volts in (("split_120_240", "60"), ("wye_120_208", "60"), ("single_230", "50"))
    for plug in ("one_cord", "one_cord_four_wire", "two_cords", "combining_y", "splitting_y", "straight_adapter", "homemade")
    if volts == "60" or plug in arrangements.TWO_WIRE_PLUGS
]
QUICK = [
    ("split_120_240", "combining_y"),
    ("wye_120_208", "one_cord_four_wire"),
    ("single_230", "homemade"),
    ("split_120_240", "two_cords"),
    ("wye_120_208", "splitting_y"),
]
each_setup = pytest.mark.parametrize(
    ("system", "plug"), [pytest.param(*one, marks=[] if one in QUICK else pytest.mark.full, id="-".join(one)) for one in SETUPS]
)


def typical(system: str, plug: str) -> Installation:
    """The typical boat of one arrangement."""
    return read(arrangements.parts(Arrangement(system, plug, 1.0), {}, neighbour=False, afloat=False))


def known(installation: Installation) -> Predictions:
    """Every cause that can be there, weighed or not, at every severity and under every value of the unknown facts."""
    facts = list(itertools.product(*session.latents(installation)))
    points = [
        Point(cause, severity.fault, combination, severity.weight / len(facts))
        for cause in CAUSE
        for severity in severities(cause, installation)
        for combination in facts
    ]
    return Predictions(installation, tuple(points))


def afresh(installation: Installation, point: Point, context: str) -> Network:
    """The network of a point in a context, made by applying the fault first and switching then, with every shunt a branch of its own."""
    made = contexts.setting(context, installation)
    assert made is not None
    name = context.partition(":")[0]
    healthy = build(made)
    shown = effect(made, healthy, point.fault)
    absent = any(name in shunt.absent_in for shunt in shown.shunts)
    network = contexts.switched(context, made, shown.network if absent else applied(made, healthy, [point.fault]))
    known = set(nodes(network))
    for latent in point.latents:
        for shunt in latent.shunts:
            if name not in shunt.absent_in and {shunt.a, shunt.b} <= known:
                network = with_branches(network, dataclasses.replace(shunt.branch(), id=f"latent.{shunt.id}"))
    return network


def some_of_each_fault(points: tuple[Point, ...], share: int) -> Iterator[int]:
    """The places of the points to compare: one in `share` of each fault's, going round the values of the unknown facts."""
    seen: dict[Fault, list[int]] = {}
    for place, point in enumerate(points):
        seen.setdefault(point.fault, []).append(place)
    for number, places in enumerate(seen.values()):
        yield from places[number % min(share, len(places)) :: share]


def same(watched: tuple[Watch, ...], outlook: Outlook, network: Network) -> None:
    """The outlook is what a fresh solve of the network shows at every watch."""
    factors = factor(network)
    solution = factors.solution()
    present = {branch.id for branch in network.branches}
    for place, watch in enumerate(watched):
        assert outlook.residual_a[place] == pytest.approx(abs(factors.value(probe_residual(factors, watch.id))), abs=NEAR_A)
        assert outlook.loop_s[place] == pytest.approx(abs(factors.window_admittance(watch.id)), rel=1e-9, abs=NEAR_A)
        rated = ("L1", "L2") if watch.rated_a else ()
        lines = [abs(solution.current(f"{watch.id}.{line}")) for line in rated if f"{watch.id}.{line}" in present]
        assert outlook.line_a[place] == pytest.approx(max(lines, default=0.0), abs=NEAR_A)
    if HULL in outlook.readings:
        volts = solution.voltage("hull.metal")
        assert outlook.readings[HULL] == pytest.approx(0.0 if volts is None else abs(volts), abs=1e-8)


@each_setup
def test_closed_forms_are_the_fresh_solve(system: str, plug: str, request: pytest.FixtureRequest) -> None:
    """Residual, loop, line current and hull volts of every cause and severity in every energised state are those of a fresh solve."""
    installation = typical(system, plug)
    predicted = known(installation)
    places = list(some_of_each_fault(predicted.points, 3 if request.node.get_closest_marker("full") else 8))
    states = [state for context in contexts.ENERGISED for state in contexts.expand(context, installation)]
    compared = set()
    for state in states:
        found = predicted.outlooks(state)
        if found is None:
            continue
        watched, outlooks = found
        for place in places:
            same(watched, outlooks[place], afresh(installation, predicted.points[place], state))
            compared.add((predicted.points[place].cause, state.partition(":")[0]))
    assert {cause for cause, _ in compared} == {point.cause for point in predicted.points}
    assert len({state for _, state in compared}) >= len(contexts.ENERGISED) - 2  # without a Y, or with one, one of two states is not there


@each_setup
def test_severities(system: str, plug: str) -> None:
    """Each cause's grid shares its prior out whole, and every point of it has an effect here."""
    installation = typical(system, plug)
    network = build(installation)
    there = {cause: severities(cause, installation) for cause in CAUSE}
    for cause, grid in there.items():
        if grid:
            assert math.fsum(severity.weight for severity in grid) == pytest.approx(1)
            assert len({severity.fault for severity in grid}) == len(grid)
        for severity in grid:
            assert severity.fault.cause == cause
            effect(installation, network, severity.fault)
    assert bool(there["combining_y"]) == (plug == "combining_y")
    assert bool(there["joined_inlets"]) == (plug in ("two_cords", "splitting_y"))
    assert {cause for cause, grid in there.items() if not grid} <= {
        "combining_y", "joined_inlets", "ground_neutral_exchanged", "line_ground_exchanged", "neutral_ahead_of_device", "cancelling_legs",
        "crossed_neutral", "forced_plug", "shared_neutral_branch", "transformer_primary_leak",
    }  # fmt: skip


@each_setup
def test_shunts_stand_on_nodes_that_are_there(system: str, plug: str) -> None:
    """A fault's shunt ends at nodes of its network: none hangs in the air, where it would change nothing unnoticed."""
    installation = typical(system, plug)
    network = build(installation)
    for cause in CAUSE:
        for severity in severities(cause, installation):
            made = effect(installation, network, severity.fault)
            known = set(nodes(made.network))
            assert all({shunt.a, shunt.b} <= known for shunt in made.shunts), severity.fault


@each_setup
def test_healthy_boats_hold(system: str, plug: str) -> None:
    """A typical boat with nothing wrong leaves every device below 6 mA, unless its arrangement is itself a cause."""
    installation = typical(system, plug)
    factors = factor(build(installation))
    worst = max(abs(factors.value(probe_residual(factors, sensor.id))) for sensor in factors.network.sensors)
    assert (worst > 1) if plug == "combining_y" else (worst < 6e-3)


def test_unknown_cause_and_place() -> None:
    """A cause that is not in the catalogue, and a part that is not there, are refused by name."""
    installation = typical("single_230", "one_cord")
    network = build(installation)
    with pytest.raises(CaseError, match="cause: must be one of"):
        effect(installation, network, Fault("gremlins"))
    with pytest.raises(CaseError, match=r"at: must be the id of a panel \('attic'\)"):
        effect(installation, network, Fault("panel_bond", at="attic", ohms=1))


# --- which sensors see it ------------------------------------------------------------------------------------------

CLASS_A_A = 0.006  # the operating value of a Class A device (UL 943): what stays below it is taken as not seen
ROLES = {"P": "outlet", "F": "feeder", "A": "main"}

# Common practice, trade table: which of the pedestal's (P), the feeder's (F) and the boat's own (A) device sees each cause, on a typical
# boat with everything running. The table names the feeder only where the current reaches its band; here it stands wherever the current
# passes it. "" is seen by none: another mechanism opens a breaker, or nothing does.
SEEN_BY = {
    "appliance_leak": "PFA", "wet_cord": "PF", "wet_inlet": "PF", "wet_pedestal": "PF", "summed_filters": "PFA", "damp_element": "PFA",
    "compressor_leak": "PFA", "branch_wiring_leak": "PFA", "charger_filter": "PFA", "surge_suppressor": "PFA", "cycling_appliance": "PFA",
    "isolator_self_test": "PFA", "drive_leakage": "PFA", "rectified_leakage": "PFA", "cancelling_legs": "", "panel_bond": "PFA",
    "frame_strap": "PFA", "inverter_bond": "PFA", "inverter_common_neutral": "PFA", "generator_bond": "PFA", "transformer_bypassed": "PFA",
    "soft_neutral_leak": "PFA", "dock_bond": "F", "ground_neutral_exchanged": "PF", "line_ground_exchanged": "PF", "forced_plug": "PF",
    "reversed_polarity": "", "reversed_with_soft_neutral": "PFA", "reversed_with_bond": "PFA", "neutral_ahead_of_device": "A",
    "crossed_neutral": "PA", "shared_neutral_branch": "", "shared_outlet_neutral": "P", "open_ground_with_leak": "PFA", "open_ground": "",
    "open_neutral": "", "feeder_accumulation": "F", "wet_feeder": "F", "other_loads_on_device": "PF", "foreign_current": "",
    "data_cable_path": "", "second_inlet_live": "", "touchy_device": "", "device_locked_out": "", "surge": "",
    "uncoordinated_devices": "PFA", "overload": "", "hot_breaker": "", "inrush": "", "short_circuit": "",
    "low_voltage": "", "supply_lost": "", "nothing_now": "",
    "combining_y": "P", "joined_inlets": "PA",
}  # fmt: skip
WHERE = {
    "cancelling_legs": ("split_120_240", "one_cord_four_wire"),
    "combining_y": ("split_120_240", "combining_y"),
    "crossed_neutral": ("split_120_240", "two_cords"),
    "joined_inlets": ("split_120_240", "two_cords"),
}  # elsewhere than on one cord of 230 V


def afloat(system: str, plug: str) -> Installation:
    """The typical boat of one arrangement afloat, with a neighbour's load running."""
    return read(arrangements.parts(Arrangement(system, plug, 1.0), {}, neighbour=True, afloat=True))


def strayed(installation: Installation, fault: Fault) -> dict[str, complex]:
    """What a fault adds to the residual of each sensor, as a phasor; of an arrangement, the residual itself."""
    healthy = build(installation)
    before, after = solve(healthy), solve(applied(installation, healthy, [fault]))
    whole = CAUSE[fault.cause].kind == "arrangement"
    return {sensor.id: after.residual(sensor.id) - (0 if whole else before.residual(sensor.id)) for sensor in healthy.sensors}


@pytest.mark.parametrize("cause", SEEN_BY)
def test_seen_where_the_trade_sees_it(cause: str) -> None:
    """At its worst each cause shows in the sensors that the trade names, and at no severity in any other."""
    installation = afloat(*WHERE.get(cause, ("single_230", "one_cord")))
    grid = [severity.fault for severity in severities(cause, installation)]
    assert grid or cause == "shared_neutral_branch"
    if cause == "wet_pedestal":
        grid = [fault for fault in grid if fault.at == "outlet"]  # in the post itself it lies ahead of the outlet's device
    found = [strayed(installation, fault) for fault in grid]
    for role, sensor in ROLES.items():
        strongest = max((abs(one[sensor]) for one in found), default=0.0)
        assert (strongest > CLASS_A_A) == (role in SEEN_BY[cause]), f"{role}: {strongest * 1e3:.1f} mA"


def test_every_cause_is_looked_for() -> None:
    """The table of who sees what leaves out no cause but the one that needs a transformer; that is looked for at the drawn part."""
    assert set(CAUSE) - set(SEEN_BY) == {"transformer_primary_leak"}


def test_what_two_legs_cancel_shows_when_one_goes_off() -> None:
    """Leaks on two legs leave next to nothing together, and each alone more than 30 mA: it trips when something is switched off."""
    installation = afloat("split_120_240", "one_cord_four_wire")
    fault = severities("cancelling_legs", installation)[0].fault
    network = applied(installation, build(installation), [fault])
    for load in (fault.at, fault.load):
        alone = contexts.switched(f"one_load:{load}", installation, network)
        assert abs(solve(alone).residual("outlet")) > 0.030
    assert abs(strayed(installation, fault)["outlet"]) < CLASS_A_A


def test_a_neutral_shared_behind_one_device_trips_that_device_alone() -> None:
    """The device of a circuit sees the other circuit's whole return; boat, outlet and feeder see nothing of it."""
    installation = read({"parts": [
        {"id": "dock", "kind": "supply", "system": "split_120_240"},
        {"id": "feeder", "kind": "feeder", "from": "dock"},
        {"id": "post", "kind": "pedestal", "from": "feeder"},
        {"id": "outlet", "kind": "receptacle", "from": "post", "connector": "30a_125v"},
        {"id": "cord", "kind": "cord", "from": "outlet"},
        {"id": "inlet", "kind": "inlet", "from": "cord"},
        {"id": "main", "kind": "main", "from": "inlet"},
        {"id": "panel", "kind": "panel", "from": "main"},
        {"id": "galley", "kind": "breaker", "from": "panel", "poles": 2, "device": "class_a"},
        {"id": "kettle", "kind": "load", "from": "galley", "ohms": 24.0},
        {"id": "lamp", "kind": "load", "from": "panel", "ohms": 120.0},
        {"id": "hull", "kind": "hull", "from": "panel"},
    ]})  # fmt: skip
    (severity,) = severities("shared_neutral_branch", installation)
    assert (severity.fault.at, severity.fault.load) == ("galley", "lamp")
    found = strayed(installation, severity.fault)
    assert abs(found["galley"]) == pytest.approx(120 / 120, rel=0.02)  # Ohm: 120 V across the lamp
    assert max(abs(found[sensor]) for sensor in ROLES.values()) < 1e-9


def fitted(*aboard: dict[str, object]) -> Installation:
    """One cord of a 230 V dock, what is fitted behind its inlet, and a hull on the panel."""
    return read({"parts": [
        {"id": "dock", "kind": "supply", "system": "single_230"},
        {"id": "feeder", "kind": "feeder", "from": "dock", "device": "rcd_100_s"},
        {"id": "post", "kind": "pedestal", "from": "feeder"},
        {"id": "outlet", "kind": "receptacle", "from": "post", "connector": "16a_230v", "device": "rcd_30"},
        {"id": "cord", "kind": "cord", "from": "outlet"},
        {"id": "inlet", "kind": "inlet", "from": "cord"},
        *aboard,
        {"id": "hull", "kind": "hull", "from": "panel"},
    ]})  # fmt: skip


HEATED = {"id": "heater", "kind": "load", "from": "panel", "watts": 1500}
FITTED = {
    "transformer": (
        {"id": "winding", "kind": "transformer", "from": "inlet", "rated_a": 16},
        {"id": "main", "kind": "main", "from": "winding", "device": "rcd_30"},
        {"id": "panel", "kind": "panel", "from": "main"},
        HEATED,
    ),
    "generator": (
        {"id": "main", "kind": "main", "from": "inlet", "device": "rcd_30"},
        {"id": "genset", "kind": "generator"},
        {"id": "source_switch", "kind": "transfer", "from": ["main", "genset"]},
        {"id": "panel", "kind": "panel", "from": "source_switch"},
        HEATED,
    ),
    "inverter": (
        {"id": "main", "kind": "main", "from": "inlet", "device": "rcd_30"},
        {"id": "panel", "kind": "panel", "from": "main"},
        {"id": "unit", "kind": "inverter", "from": "panel"},
        {**HEATED, "from": "unit"},
    ),
    "isolator": (
        {"id": "block", "kind": "isolator", "from": "inlet"},
        {"id": "main", "kind": "main", "from": "block", "device": "rcd_30"},
        {"id": "panel", "kind": "panel", "from": "main"},
        HEATED,
    ),
}  # fmt: skip


@pytest.mark.parametrize(
    ("part", "cause", "roles"),
    [
        ("transformer", "transformer_primary_leak", "PF"),  # the boat's own device stands on the secondary
        ("transformer", "transformer_bypassed", "PF"),  # and behind its bond
        ("generator", "generator_bond", "PFA"),
        ("inverter", "inverter_bond", "PFA"),
        ("inverter", "inverter_common_neutral", "PFA"),
        ("isolator", "isolator_self_test", "PFA"),
    ],
)
def test_at_the_drawn_part(part: str, cause: str, roles: str) -> None:
    """Where the part itself is drawn its cause sits there, and the sensors that the trade table (common practice) names see it."""
    installation = fitted(*FITTED[part])
    grid = [severity.fault for severity in severities(cause, installation)]
    assert {installation.part(fault.at).kind for fault in grid} == {part}
    healthy = build(installation)
    for role, sensor in ROLES.items():
        quiet = abs(solve(settled(healthy)).residual(sensor))
        strongest = max(abs(solve(settled(applied(installation, healthy, [fault]))).residual(sensor)) for fault in grid)
        assert quiet < CLASS_A_A
        assert (strongest > CLASS_A_A) == (role in roles), f"{role}: {strongest * 1e3:.1f} mA"


# --- what else it does ---------------------------------------------------------------------------------------------


def worst(cause: str, installation: Installation) -> Solution:
    """The solved network of the last severity of a cause's grid."""
    return solve(applied(installation, build(installation), [severities(cause, installation)[-1].fault]))


def across(solution: Solution, one: str, other: str) -> float:
    """Volts between two nodes."""
    ends = solution.voltage(one), solution.voltage(other)
    assert None not in ends
    return abs(ends[0] - ends[1])  # type: ignore[operator]


@pytest.mark.parametrize("cause", ["line_ground_exchanged", "forced_plug"])
def test_metal_on_the_line(cause: str) -> None:
    """A line on the protective conductor puts the hull above the 50 V touch limit of IEC 60364-4-41."""
    volts = worst(cause, afloat("split_120_240", "one_cord_four_wire")).voltage("hull.metal")
    assert volts is not None
    assert abs(volts) > 50


def test_a_broken_neutral_shifts_the_legs() -> None:
    """Behind a broken neutral the two legs of split phase share 240 V by their loads: one far above 120 V, one far below."""
    solution = worst("open_neutral", afloat("split_120_240", "one_cord_four_wire"))
    legs = [across(solution, f"panel.{line}", "panel.N") for line in ("L1", "L2")]
    assert sum(legs) == pytest.approx(240, rel=0.02)
    assert min(legs) < 80
    assert max(legs) > 160


def test_exchanged_poles_leave_a_switched_off_load_live() -> None:
    """With line and neutral exchanged ahead of the boat, the far end of a load stands at line voltage though its switch is off."""
    installation = read({"parts": [
        {"id": "dock", "kind": "supply", "system": "single_230"},
        {"id": "post", "kind": "pedestal", "from": "dock"},
        {"id": "outlet", "kind": "receptacle", "from": "post", "connector": "16a_230v", "device": "rcd_30"},
        {"id": "cord", "kind": "cord", "from": "outlet"},
        {"id": "inlet", "kind": "inlet", "from": "cord"},
        {"id": "panel", "kind": "panel", "from": "inlet"},
        {"id": "lamp", "kind": "load", "from": "panel", "watts": 60, "on": False},
        {"id": "hull", "kind": "hull", "from": "panel"},
    ]})  # fmt: skip
    healthy = build(installation)
    swapped = applied(installation, healthy, [Fault("reversed_polarity", at="outlet")])
    for network, low, high in ((healthy, 0, 1), (swapped, 225, 231)):
        assert low <= across(solve(network), "lamp.in", "panel.G") <= high


def test_line_currents_of_what_only_a_breaker_sees() -> None:
    """A short carries hundreds of amperes and an overload more than the rating; low voltage and a lost supply carry less than health."""
    installation = afloat("split_120_240", "one_cord_four_wire")
    amperes = {
        cause: abs(worst(cause, installation).current("outlet.L1")) for cause in ("short_circuit", "overload", "low_voltage", "supply_lost")
    }
    healthy = abs(solve(build(installation)).current("outlet.L1"))
    assert amperes["short_circuit"] > 200
    assert amperes["overload"] > 50
    assert amperes["supply_lost"] < 1e-9
    assert amperes["low_voltage"] < healthy


def test_current_from_elsewhere_is_in_the_ground_wire_only() -> None:
    """Current that enters the hull from the water goes home in the protective conductor, and no window of the dock or boat sees it."""
    installation = afloat("single_230", "one_cord")
    fault = severities("foreign_current", installation)[-1].fault
    healthy = build(installation)
    before, after = solve(healthy), solve(applied(installation, healthy, [fault]))
    assert abs(after.current("cord.G") - before.current("cord.G")) > 0.5
    assert max(abs(value) for value in strayed(installation, fault).values()) < 1e-4  # the wire's few volts across filters


def test_bare_pins_of_an_unused_inlet_are_live() -> None:
    """An unused inlet on the boat's buses shows its bare pins at line voltage."""
    solution = worst("second_inlet_live", afloat("single_230", "one_cord"))
    volts = [solution.voltage(blade.node) for blade in solution.network.blades]
    assert max(abs(value or 0) for value in volts) == pytest.approx(230, rel=0.05)


def test_an_exchanged_pair_of_outlets_sees_the_whole_load() -> None:
    """With the neutrals of two outlets exchanged, an outlet used alone misses its whole line current, and the other sees it reversed."""
    installation = afloat("single_230", "one_cord")
    swapped = next(one.fault for one in severities("shared_outlet_neutral", installation) if not one.fault.ohms)
    solution = solve(applied(installation, build(installation), [swapped]))
    quiet = solve(
        applied(
            installation,
            build(read(arrangements.parts(Arrangement("single_230", "one_cord", 1.0), {}, neighbour=False, afloat=True))),
            [swapped],
        )
    )
    assert abs(quiet.residual("outlet")) == pytest.approx(abs(quiet.current("outlet.L1")), rel=1e-3)
    assert abs(solution.residual("outlet") + solution.residual("outlet9")) < CLASS_A_A


# --- grids ---------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("cause", CAUSE)
def test_between_two_severities_lies_what_they_bracket(cause: str) -> None:
    """A severity between two of a grid, all else alike, moves every sensor by something between what the two do."""
    installation = afloat(*WHERE.get(cause, ("split_120_240", "one_cord_four_wire")))
    numbers = ("ohms", "nanofarads", "scale", "spontaneous", "duty")
    like: dict[object, list[Fault]] = {}
    for severity in severities(cause, installation):
        fault = severity.fault
        if not (cause == "shared_outlet_neutral" and not fault.ohms):
            like.setdefault((fault.at, fault.load, fault.position), []).append(fault)
    for one, other in (pair for faults in like.values() for pair in itertools.pairwise(faults)):
        middle = dataclasses.replace(one, **{name: math.sqrt(getattr(one, name) * getattr(other, name)) for name in numbers})
        ends, between = (strayed(installation, one), strayed(installation, other)), strayed(installation, middle)
        for sensor, value in between.items():
            low, high = sorted(abs(end[sensor]) for end in ends)
            assert low - 1e-9 <= abs(value) <= high + 1e-9, (sensor, middle)


# --- the rows and what they refuse ---------------------------------------------------------------------------------


def test_rows() -> None:
    """Each row has a mechanism in one sentence, a positive prior in both regions, timing that sums to one, a source and a repairer."""
    assert len(CAUSES) >= 48
    for cause in CAUSES:
        for sentence in (cause.mechanism, cause.beyond):
            assert re.fullmatch(r"[A-Z][^.]{15,150}\.", sentence) or sentence == "" != cause.mechanism, cause.id
        assert min(cause.prior_60, cause.prior_50) > 0
        assert math.fsum(cause.timing.values()) == pytest.approx(1)
        assert set(cause.timing) == {"computed", "minutes", "random", "wet"}
        assert cause.source
        assert cause.repair in ("user", "technician", "electrician")
    assert len({cause.mechanism for cause in CAUSES}) == len(CAUSES)


def test_what_the_steady_state_does_not_show_is_said() -> None:
    """A new cause that changes no residual by 6 mA anywhere says in its row what lies beyond the steady state."""
    silent = {cause for cause, roles in SEEN_BY.items() if not roles} - {
        "touchy_device",
        "overload",
        "nothing_now",
        "shared_neutral_branch",
    }
    assert {cause for cause in silent if not CAUSE[cause].beyond} == set()


def test_only_what_is_weighed_is_ranked() -> None:
    """The points of an installation are those of the weighed causes and of no other."""
    installation = typical("single_230", "one_cord")
    there = {cause.id for cause in CAUSES if cause.weighed and severities(cause.id, installation)}
    assert {point.cause for point in predictions(installation, session.latents(installation)).points} == there
    assert any(not cause.weighed for cause in CAUSES)


REFUSED = {
    "duty": (Fault("cycling_appliance", at="heater", ohms=1000, duty=0), "duty: must be above 0 and at most 1"),
    "element": (Fault("damp_element", at="lamps", ohms=1000), "at: must be a load with a heating element"),
    "motor": (Fault("compressor_leak", at="heater", ohms=1000, nanofarads=10), "at: must be a load without a heating element"),
    "winding": (Fault("compressor_leak", at="cooling", ohms=1000), "nanofarads: must be above zero nF"),
    "capacity": (Fault("drive_leakage", at="cooling"), "nanofarads: must be above zero nF"),
    "circuit": (Fault("branch_wiring_leak", at="cord", ohms=1000), "at: must be the id of a breaker or panel"),
    "zero ohms": (Fault("generator_bond", at="panel"), "ohms: must be above zero ohm"),
    "same leg": (Fault("cancelling_legs", at="heater", load="lamps", ohms=1000), "load: must be a load on another line"),
    "no neutral": (Fault("soft_neutral_leak", at="cooling", ohms=50), "at: must be a load with a neutral"),
    "one panel": (Fault("crossed_neutral", at="heater"), "at: must be a load with a neutral, on a boat with two panels"),
    "own circuit": (Fault("shared_neutral_branch", at="heater_breaker", load="heater"), "load: must be a load with a neutral, on another"),
    "same outlet": (Fault("shared_outlet_neutral", at="outlet", load="outlet"), "load: must be another receptacle"),
    "no outlet": (Fault("forced_plug", at="inlet"), "at: must be the id of a cord or adapter"),
    "no supply": (Fault("supply_lost", at="post"), "at: must be the id of a supply"),
    "no device": (Fault("surge", at="heater"), "at: must be the id of a receptacle or main"),
}


@pytest.mark.parametrize(("fault", "words"), REFUSED.values(), ids=REFUSED)
def test_a_fault_that_cannot_be_is_refused(fault: Fault, words: str) -> None:
    """A fault at a part that cannot have it, or with a number out of range, is refused by key and rule."""
    installation = typical("split_120_240", "one_cord_four_wire")
    with pytest.raises(CaseError, match=re.escape(words)):
        effect(installation, build(installation), fault)


def test_no_neutral_no_fault_of_it() -> None:
    """On a dock without a neutral conductor no post can have it bonded or broken: such a fault is refused, and stands in no grid."""
    installation = read({"parts": [
        {"id": "dock", "kind": "supply", "system": "no_neutral_230"},
        {"id": "post", "kind": "pedestal", "from": "dock"},
        {"id": "outlet", "kind": "receptacle", "from": "post", "connector": "16a_230v", "device": "rcd_30"},
        {"id": "cord", "kind": "cord", "from": "outlet"},
        {"id": "inlet", "kind": "inlet", "from": "cord"},
        {"id": "panel", "kind": "panel", "from": "inlet"},
        {"id": "lamp", "kind": "load", "from": "panel", "watts": 60},
        {"id": "hull", "kind": "hull", "from": "panel"},
    ]})  # fmt: skip
    network = build(installation)
    with pytest.raises(CaseError, match="at: must be where there is a neutral"):
        effect(installation, network, Fault("dock_bond", at="post", ohms=0.1))
    with pytest.raises(CaseError, match="at: must have a neutral conductor to break"):
        effect(installation, network, Fault("open_neutral", at="post"))
    assert not severities("dock_bond", installation)
    for cause in CAUSE:
        for severity in severities(cause, installation):
            made = effect(installation, network, severity.fault)
            assert all({shunt.a, shunt.b} <= set(nodes(made.network)) for shunt in made.shunts), severity.fault
