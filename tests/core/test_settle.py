"""Galvanic isolators: each blocks or conducts as its own voltage asks."""

from __future__ import annotations

import math
from dataclasses import replace

import pytest

from strayline.network import Branch, Isolator, Network, Sensor, checked
from strayline.settle import settled
from strayline.solve import solve

BLOCKING, CONDUCTING, VOLTS = 1e4, 0.02, 1.2 / math.sqrt(2)  # two diodes each way stand off about 1.2 V peak


def bonded_boat(load_a: float, neutral_ohms: float = 0.1) -> Network:
    """A boat with neutral and ground joined aboard behind an isolator, drawing `load_a` through its neutral conductor."""
    return checked(
        Network(
            60,
            "N",
            (
                Branch("supply", "N", "L", 0j, "source", "dock", 120),
                Branch("hot", "L", "b.L", 0.1, "line", "cord"),
                Branch("back", "N", "b.N", neutral_ohms, "neutral", "cord"),
                Branch("iso", "N", "b.G", BLOCKING, "protective", "isolator"),
                Branch("bond", "b.N", "b.G", 0.01, "bond", "panel"),
                Branch("heater", "b.L", "b.N", 120 / load_a - 0.2, "load", "heater"),
            ),
            (Sensor("pedestal", ("hot", "back"), "gfpe_30", frozenset({"b.L", "b.N", "b.G"})),),
            isolators=(Isolator("iso", VOLTS, CONDUCTING),),
        )
    )


@pytest.mark.parametrize(("load_a", "amperes"), [(2.0, False), (8.4, False), (8.6, True), (20.0, True)])
def test_it_conducts_from_the_load_whose_neutral_drop_passes_its_threshold(load_a: float, amperes: bool) -> None:
    """1.2 V peak over a neutral of 0.1 ohm is 8.485 A (Kirchhoff): below, the bond is hidden; above, amperes go by the ground."""
    residual = abs(solve(settled(bonded_boat(load_a))).residual("pedestal"))
    assert residual > 1 if amperes else residual < 1e-3


def test_without_isolators_nothing_changes() -> None:
    """A network without isolators is the very same network."""
    network = replace(bonded_boat(20), isolators=())
    assert settled(network) is network


def test_two_isolators_in_one_path_agree() -> None:
    """Two isolators one after the other share what stands across them, and end in a state in which each does what it should."""
    one = bonded_boat(20)
    network = replace(
        one,
        branches=(
            *(replace(branch, to_node="mid") if branch.id == "iso" else branch for branch in one.branches),
            Branch("iso2", "mid", "b.G", BLOCKING, "protective", "isolator2"),
        ),
        isolators=(*one.isolators, Isolator("iso2", VOLTS, CONDUCTING)),
    )
    solution = solve(settled(network))
    for name in ("iso", "iso2"):
        branch = solution.network.branch(name)
        across = abs(solution.current(name) * branch.impedance)
        assert across <= VOLTS or abs(branch.impedance) == pytest.approx(CONDUCTING)
