"""Random circuits against numpy's dense solve of every equation at once."""

from __future__ import annotations

import cmath
import random
from dataclasses import replace

import numpy as np
import pytest

from strayline.network import Branch, Network, Sensor, checked, nodes
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
