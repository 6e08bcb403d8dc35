"""Random installations: every valid one, and whatever else the tables allow, is solved; every invalid one is refused by name."""

from __future__ import annotations

import cmath
import dataclasses
import json
import random
import re

import pytest

from drawn import boat, dock, load
from drawn_installations import MUTATIONS, Row, allowed, invalid, parents, valid
from strayline.casefile import read_case
from strayline.catalogue.causes import CAUSE
from strayline.causes import Fault, applied
from strayline.components import KINDS, PARENTS, SYSTEMS
from strayline.errors import CaseError
from strayline.installation import build
from strayline.network import nodes
from strayline.parts import base, read
from strayline.residuals import residuals, stated_network
from strayline.settle import settled
from strayline.severities import severities
from strayline.solve import crossings, solve

KEYS = {"sensors", "breakers", "hulls", "live_blades", "opens_first", "crossings", "floating"}


def with_a_fault(rows: list[Row], seed: int) -> dict[str, object]:
    """A raw case: these parts, and more often than not a fault that they can have."""
    draw = random.Random(seed)
    faults = []
    if draw.random() < 0.7:
        grid = severities(draw.choice(list(CAUSE)), read({"parts": rows}))
        if grid:
            fault = draw.choice(grid).fault
            faults = [{name: value for name, value in dataclasses.asdict(fault).items() if value != getattr(Fault(fault.cause), name)}]
            faults[0]["cause"] = fault.cause
    return {"schema": 1, "installation": {"parts": rows}, "faults": faults}


def check(rows: list[Row], seed: int) -> tuple[list[Row], str]:
    """No crash, no number that is not one, the current law at every node, crossings that add up, a whole reply; the rows and the cause."""
    case = read_case(with_a_fault(rows, seed))
    _, network = stated_network(case)
    solution = solve(network)
    balance = dict.fromkeys(nodes(network), 0j)
    for branch in network.branches:
        current = solution.current(branch.id)
        assert cmath.isfinite(current)
        balance[branch.from_node] -= current
        balance[branch.to_node] += current
    assert max(map(abs, balance.values())) < 1e-9
    for sensor in network.sensors:
        strayed = sum((current for _, current in crossings(network, solution, sensor.id)), 0j)
        assert abs(strayed - solution.residual(sensor.id)) < 1e-9
    found = residuals(case)
    assert set(found) == KEYS
    assert {row["id"] for row in found["sensors"]} == {sensor.id for sensor in network.sensors}
    json.dumps(found, allow_nan=False)
    return rows, case.faults[0].cause if case.faults else ""


def refused(seed: int) -> str:
    """An invalid installation is refused by the rule that it breaks, at the key that breaks it; the rule."""
    rows, where, rule = invalid(seed)
    with pytest.raises(CaseError) as caught:
        build(read({"parts": rows}))
    assert re.fullmatch(where, caught.value.where), caught.value
    assert rule in caught.value.rule, caught.value
    return rule


def every_grid(rows: list[Row]) -> set[str]:
    """Have every severity of every cause that these parts can have applied; the causes."""
    installation = read({"parts": rows})
    network = build(installation)
    faults = [severity.fault for cause in CAUSE for severity in severities(cause, installation)]
    for fault in faults:
        applied(installation, network, [fault])
    return {fault.cause for fault in faults}


def any_fault(rows: list[Row], seed: int) -> list[str]:
    """Have every cause stated anywhere, with any numbers, solved or refused; the key paths of the refusals."""
    installation = read({"parts": rows})
    network = build(installation)
    draw = random.Random(seed)
    places = [part.id for part in installation.parts] + ["", "nowhere"]
    refusals = []
    for cause in CAUSE:
        sizes = {"ohms": draw.choice((0, 0.01, 1e5)), "position": draw.choice((0, 0.3, 1, 2)), "nanofarads": draw.choice((0, 50))}
        fault = Fault(cause, draw.choice(places), draw.choice(places), **sizes, scale=draw.choice((0, 0.5)), duty=draw.choice((0.3, 1)))
        try:
            solve(settled(applied(installation, network, [fault])))
        except CaseError as error:
            refusals.append(error.where)
    return refusals


def test_random_valid_installations() -> None:
    """Two hundred drawn boats on their docks, between them every kind of part and many a cause, are solved."""
    drawn = [check(valid(seed), seed) for seed in range(200)]
    assert {row["kind"] for rows, _ in drawn for row in rows} == set(KINDS)
    assert len({cause for _, cause in drawn}) > 30


def test_whatever_the_tables_allow() -> None:
    """Two hundred lists of parts, between them every part on every other that may carry it and every parameter stated, are solved."""
    hangs, stated = set(), set()
    for seed in range(200):
        rows, _ = check(allowed(seed), seed)
        kinds = {row["id"]: row["kind"] for row in rows}
        hangs |= {(row["kind"], kinds[base(parent)]) for row in rows for parent in parents(row) if parent}
        stated |= {(row["kind"], name) for row in rows for name in row}
    assert {(kind, parent) for kind in PARENTS for parent in PARENTS[kind]} - hangs <= set()
    assert {(kind, parameter.name) for kind in KINDS for parameter in KINDS[kind]} - stated <= set()


def test_random_invalid_installations() -> None:
    """Two hundred drawn installations, each with one thing made wrong in every way we know, are refused at the key that is wrong."""
    assert len({refused(seed) for seed in range(max(200, 3 * len(MUTATIONS)))}) > 20


def test_every_cause_takes_its_own_grid() -> None:
    """What the grid of a cause offers for drawn installations its effect takes, and between them they offer every cause."""
    assert set().union(*(every_grid(draw(seed)) for seed in range(150) for draw in (valid, allowed))) == set(CAUSE)


def test_any_fault_stated_anywhere() -> None:
    """A fault stated where it cannot be is refused at its key, every other one is solved."""
    refusals = [any_fault(draw(seed), seed) for seed in range(40) for draw in (valid, allowed)]
    assert all(0 < len(wheres) < len(CAUSE) for wheres in refusals)
    assert all(re.fullmatch(r"faults\[0\]\.(at|load|ohms|position|nanofarads|duty)", where) for wheres in refusals for where in wheres)


def test_a_fault_of_a_load_ashore() -> None:
    """A fault that needs a load's own panel is refused for a load on the dock: it has none."""
    rows = [*dock("single_230", "16a_230v"), *boat("outlet1"), load("ashore", watts=60) | {"from": "post"}]
    for cause in ("crossed_neutral", "frame_strap", "overload"):
        raw = {"schema": 1, "installation": {"parts": rows}, "faults": [{"cause": cause, "at": "ashore", "ohms": 0.01}]}
        with pytest.raises(CaseError, match=r"faults\[0\]\.at: must be a load aboard"):
            stated_network(read_case(raw))


@pytest.mark.parametrize("system", SYSTEMS)
def test_a_plug_with_more_lines_than_the_dock(system: str) -> None:
    """A boat of three lines whose plug hangs loose has loads of a size, whatever the dock beside it brings."""
    loose = [load("pump", across="L2-L3", watts=900), load("fan", across="L1-L3", amperes=3)]
    rows = [*dock(system), *boat("", *loose)]
    case = read_case({"schema": 1, "installation": {"parts": rows}})
    assert all(row["residual_ma"] < 1e-9 for row in residuals(case)["sensors"])


def test_no_neutral_to_break_in_an_outlet_that_is_off() -> None:
    """An outlet that is off and has opened its neutral too is not offered as the place of a broken neutral; one that keeps it is."""
    for connector, system, expected in (("16a_230v", "single_230", {"cord"}), ("30a_125v", "split_120_240", {"outlet1", "cord"})):
        rows = [row | ({"closed": False} if row["kind"] == "receptacle" else {}) for row in [*dock(system, connector), *boat("outlet1")]]
        assert {one.fault.at for one in severities("open_neutral", read({"parts": rows}))} == expected


@pytest.mark.full
@pytest.mark.timeout(1200)
def test_ten_thousand_valid_installations() -> None:
    """So are ten thousand boats."""
    for seed in range(1000, 11_000):
        check(valid(seed), seed)


@pytest.mark.full
@pytest.mark.timeout(1200)
def test_ten_thousand_lists_of_parts() -> None:
    """And ten thousand lists that the tables allow."""
    for seed in range(1000, 11_000):
        check(allowed(seed), seed)


@pytest.mark.full
@pytest.mark.timeout(1200)
def test_a_hundred_thousand_faults() -> None:
    """And every cause stated anywhere in two thousand installations is solved or refused."""
    for seed in range(1000, 2000):
        for draw in (valid, allowed):
            any_fault(draw(seed), seed)
            every_grid(draw(seed))


@pytest.mark.full
@pytest.mark.timeout(1200)
def test_ten_thousand_invalid_installations() -> None:
    """And ten thousand are refused."""
    for seed in range(1000, 11_000):
        refused(seed)
