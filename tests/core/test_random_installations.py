"""Random installations: every valid one is solved, every invalid one is refused by name."""

from __future__ import annotations

import cmath
import random
import re

import pytest

from drawn_installations import MUTATIONS, invalid, valid
from strayline.casefile import read_case
from strayline.catalogue.causes import CAUSE
from strayline.components import KINDS
from strayline.errors import CaseError
from strayline.installation import build
from strayline.network import nodes
from strayline.parts import read
from strayline.residuals import residuals, stated_network
from strayline.severities import severities
from strayline.solve import crossings, solve

KEYS = {"sensors", "breakers", "hulls", "live_blades", "opens_first", "crossings", "floating"}


def with_a_fault(seed: int) -> dict[str, object]:
    """A raw case: a drawn installation, and half the time a fault that it can have."""
    rows = valid(seed)
    draw = random.Random(seed)
    faults = []
    if draw.random() < 0.5:
        grid = severities(draw.choice(list(CAUSE)), read({"parts": rows}))
        if grid:
            fault = draw.choice(grid).fault
            faults = [
                {name: getattr(fault, name) for name in ("cause", "at", "load", "ohms", "position", "nanofarads") if getattr(fault, name)}
            ]
    return {"schema": 1, "installation": {"parts": rows}, "faults": faults}


def check(seed: int) -> set[str]:
    """No crash, no number that is not one, the current law at every node, crossings that add up, a whole reply; the kinds it held."""
    raw = with_a_fault(seed)
    case = read_case(raw)
    installation, network = stated_network(case)
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
    assert all(row["residual_ma"] >= 0 for row in found["sensors"])
    return {part.kind for part in installation.parts}


def refused(seed: int) -> str:
    """The rule by which an invalid installation is refused."""
    with pytest.raises(CaseError) as caught:
        build(read({"parts": invalid(seed)}))
    assert re.match(r"installation(\.parts(\[\d+\](\.\w+)?)?)?$", caught.value.where), caught.value
    assert caught.value.rule
    return re.sub(r"\W.*", "", caught.value.rule)


def test_random_valid_installations() -> None:
    """Two hundred drawn installations, between them every kind of part, are solved."""
    assert set().union(*(check(seed) for seed in range(200))) == set(KINDS)


def test_random_invalid_installations() -> None:
    """Two hundred drawn installations with one thing wrong are each refused with a rule and where it is broken."""
    assert len({refused(seed) for seed in range(200)}) >= 5
    assert len(MUTATIONS) >= 12


@pytest.mark.full
@pytest.mark.timeout(1200)
def test_ten_thousand_valid_installations() -> None:
    """So are ten thousand."""
    for seed in range(1000, 11_000):
        check(seed)


@pytest.mark.full
@pytest.mark.timeout(1200)
def test_ten_thousand_invalid_installations() -> None:
    """And ten thousand are refused."""
    for seed in range(1000, 11_000):
        refused(seed)
