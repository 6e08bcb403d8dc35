"""Random circuits against numpy's dense solve of every equation at once."""

from __future__ import annotations

import cmath
import itertools
import math
import random
import sys
from dataclasses import dataclass, replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from strayline.network import Branch, Coupling, Network, Sensor, checked, nodes, without_branches
from strayline.solve import solve


def circuit(seed: int) -> Network:
    """A connected circuit of 10 to 80 nodes: conductors of milliohms, loads of ohms, leaks up to a megohm, two or three sources."""
    draw = random.Random(seed)
    size = draw.randint(10, 80)
    branches = []
    for place in range(1, size + draw.randint(5, size)):
        a, b = (draw.randrange(place), place) if place < size else draw.sample(range(size), 2)
        low, high = draw.choice([(-3.5, -1), (0, 2), (3, 6)])
        impedance = 10 ** draw.uniform(low, high) * complex(1, draw.uniform(-2, 2))
        branches.append(Branch(f"b{place}", f"n{a}", f"n{b}", impedance, "line", "x"))
    for branch in draw.sample(branches[size - 1 :], draw.randint(2, 3)):  # these close loops, so that something flows
        emf = cmath.rect(draw.choice([120, 230]), draw.uniform(-3, 3))
        branches[branches.index(branch)] = replace(branch, kind="source", impedance=draw.choice([0.02 + 0.01j, 5]), emf=emf)
    sensors = tuple(
        Sensor(f"s{place}", tuple(branch.id for branch in draw.sample(branches, draw.randint(1, 4))), "none", frozenset())
        for place in range(4)
    )
    return checked(Network(60, "n0", tuple(branches), sensors))


def dense_currents(network: Network) -> dict[str, complex]:
    """Currents of all branches from one system of all node and branch equations, each branch's row scaled to a largest entry near one."""
    names = {name: place for place, name in enumerate(nodes(network)[1:])}
    size = len(names) + len(network.branches)
    matrix, right = np.zeros((size, size), complex), np.zeros(size, complex)
    for place, branch in enumerate(network.branches, len(names)):
        scale = max(1.0, abs(branch.impedance))
        for node, sign in ((branch.from_node, 1), (branch.to_node, -1)):
            if node in names:
                matrix[names[node], place] = sign
                matrix[place, names[node]] = sign / scale
        matrix[place, place] = -branch.impedance / scale
        right[place] = -branch.emf / scale
    x = np.linalg.solve(matrix, right)
    return {branch.id: complex(x[place]) for place, branch in enumerate(network.branches, len(names))}


@pytest.mark.parametrize("seed", range(40))
def test_currents_agree(seed: int) -> None:
    """Every branch current and every residual agrees with the dense solve to 1e-11 of the largest current, or to 1e-11 A."""
    network = circuit(seed)
    reference, solution = dense_currents(network), solve(network)
    bound = 1e-11 * max(1.0, *map(abs, reference.values()))
    assert max(map(abs, reference.values())) > 1e-6
    for branch_id, expected in reference.items():
        assert abs(solution.current(branch_id) - expected) <= bound
    for sensor in network.sensors:
        assert abs(solution.residual(sensor.id) - sum(reference[branch_id] for branch_id in sensor.branches)) <= 4 * bound


# --- islands, open breakers, contacts of half a milliohm, leaks of ten megohm, windings on one core --------------------


@dataclass(frozen=True, slots=True)
class Drawn:
    """A network of several islands, and the node of each that is taken as its zero."""

    network: Network
    zeros: tuple[str, ...]


@st.composite
def drawn(draw: st.DrawFn) -> Drawn:
    """One to three islands joined by nothing, or by coupled windings; some branches opened; at least one source in the first."""
    random_ = draw(st.randoms(use_true_random=False))
    branches: list[Branch] = []
    zeros, windings = [], []
    for island in range(draw(st.integers(1, 3))):
        size = random_.randint(4, 25)
        names = [f"i{island}n{place}" for place in range(size)]
        zeros.append(names[0])
        for place in range(1, size + random_.randint(2, size)):
            a, b = (names[random_.randrange(place)], names[place]) if place < size else random_.sample(names, 2)
            ohms = random_.choice([0.5e-3, 10e6, 10 ** random_.uniform(-2, 4) * complex(1, random_.uniform(-2, 2))])
            branches.append(Branch(f"i{island}b{place}", a, b, complex(ohms), "line", "x"))
        a, b = random_.sample(names, 2)
        if island == 0 or random_.random() < 0.5:
            emf = cmath.rect(random_.choice([120, 230]), random_.uniform(-3, 3))
            branches.append(Branch(f"i{island}source", a, b, random_.choice([0.02 + 0.01j, 5 + 0j]), "source", "x", emf))
        reactance = random_.uniform(5, 500)
        windings.append(Branch(f"i{island}winding", *random_.sample(names, 2), random_.uniform(0.01, 1) + 1j * reactance, "winding", "x"))
    branches += windings
    couplings = tuple(
        Coupling(one.id, other.id, 1j * random_.uniform(0.1, 0.9995) * math.sqrt(one.impedance.imag * other.impedance.imag))
        for one, other in itertools.pairwise(windings)
    )
    branches_of_sensors = [branch.id for branch in branches]
    sensors = tuple(
        Sensor(f"s{place}", tuple(random_.sample(branches_of_sensors, random_.randint(1, 4))), "none", frozenset()) for place in range(3)
    )
    network = Network(60, zeros[0], tuple(branches), sensors, couplings=couplings)
    tree = {f"i{island}b{place}" for island in range(3) for place in range(1, 25)}
    loose = [branch.id for branch in branches if branch.kind == "line" and branch.id not in tree]
    return Drawn(checked(without_branches(network, random_.sample(loose, len(loose) // 2))), tuple(zeros))


def dense(one: Drawn) -> tuple[dict[str, complex], dict[str, complex]]:
    """Voltages and currents from every node and branch equation at once; in each island one node's balance gives way to its zero."""
    network = one.network
    names = {name: place for place, name in enumerate(nodes(network))}
    flows = {branch.id: place for place, branch in enumerate(network.branches, len(names))}
    size = len(names) + len(flows)
    matrix, right = np.zeros((size, size), complex), np.zeros(size, complex)
    for branch in network.branches:
        row, scale = flows[branch.id], max(1.0, abs(branch.impedance))
        for node, sign in ((branch.from_node, 1), (branch.to_node, -1)):
            matrix[names[node], row] = sign
            matrix[row, names[node]] = sign / scale
        matrix[row, row] = -branch.impedance / scale
        right[row] = -branch.emf / scale
        for each in network.couplings:
            if branch.id in (each.one, each.other):
                other = each.other if branch.id == each.one else each.one
                matrix[row, flows[other]] = -each.impedance / scale
    for zero in one.zeros:
        matrix[names[zero]] = 0
        matrix[names[zero], names[zero]] = 1
    x = np.linalg.solve(matrix, right).astype(np.clongdouble)
    for _ in range(3):  # a node behind ten megohm is badly conditioned: refined with residuals in extended precision
        x = x + np.linalg.solve(matrix, (right - matrix.astype(np.clongdouble) @ x).astype(complex))
    return {name: complex(x[place]) for name, place in names.items()}, {name: complex(x[place]) for name, place in flows.items()}


def agree(one: Drawn) -> None:
    """Currents agree, and the voltages of the island that holds the reference; the others are told as floating."""
    volts, amperes = dense(one)
    solution = solve(one.network)
    bound = 1e-9 * max(1.0, *map(abs, amperes.values()))
    for name, expected in amperes.items():
        assert abs(solution.current(name) - expected) <= bound
    for sensor in one.network.sensors:
        assert abs(solution.residual(sensor.id) - sum(amperes[name] for name in sensor.branches)) <= 4 * bound
    # What stands behind ten megohm is moved by the last bit of the largest current that goes round there.
    last_bit = sys.float_info.epsilon * max(map(abs, amperes.values())) * max(abs(branch.impedance) for branch in one.network.branches)
    bound = 1e-7 * max(1.0, *map(abs, volts.values())) + 4 * last_bit
    floating = set(solution.floating)
    for name, expected in volts.items():
        assert (name in floating) == (not name.startswith("i0"))
        found = solution.voltage(name)
        assert found is None if name in floating else abs((found or 0j) - expected) <= bound


@settings(max_examples=100, deadline=None)
@given(drawn())
def test_a_hundred_drawn_networks(one: Drawn) -> None:
    """Drawn networks of several islands agree with the dense solve."""
    agree(one)


@pytest.mark.full
@settings(max_examples=1000, deadline=None)
@given(drawn())
def test_a_thousand_drawn_networks(one: Drawn) -> None:
    """So do a thousand."""
    agree(one)
