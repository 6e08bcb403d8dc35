"""Causes: the diagnosis' closed forms against a fresh solve of the network with the fault in it, and the grids it sums over."""

from __future__ import annotations

import dataclasses
import math
from typing import TYPE_CHECKING

import pytest

from strayline import arrangements, contexts, session
from strayline.arrangements import Arrangement
from strayline.catalogue.causes import CAUSE
from strayline.causes import Fault, applied, effect
from strayline.errors import CaseError
from strayline.installation import build
from strayline.network import Network, nodes, with_branches
from strayline.parts import Installation, read
from strayline.predict import HULL, Outlook, Point, Watch, predictions
from strayline.severities import severities
from strayline.solve import factor, probe_residual

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
    predicted = predictions(installation, session.latents(installation))
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
