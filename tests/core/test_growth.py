"""How much work the solver does: counted, never timed."""

from __future__ import annotations

import math

import pytest

from drawn import marina
from strayline import arrangements, session
from strayline.arrangements import Arrangement
from strayline.elimination import Pair, Triangle
from strayline.equations import Equations
from strayline.installation import build
from strayline.network import Network, nodes
from strayline.parts import read
from strayline.predict import predictions
from strayline.solve import COUNTS, Sweep, factor, probe_residual


def multiply_adds(triangle: Triangle) -> int:
    """Multiplications and additions that an elimination took: for each step the rows it changed, squared, twice for a pair."""
    return sum(len(step.multipliers) ** 2 * (2 if isinstance(step, Pair) else 1) for step in triangle.steps)


def dock(boats: int) -> Network:
    """The network of a dock with so many boats."""
    return build(read({"parts": marina("single_230", boats)}))


@pytest.mark.parametrize(("few", "many"), [(12, 60), (60, 220)])
def test_work_grows_like_the_dock(few: int, many: int) -> None:
    """From 400 nodes to 8,000 the multiply-adds of an elimination grow with an exponent of at most 1.05, and so does the fill."""
    small, large = (dock(boats) for boats in (few, many))
    sizes = [len(nodes(network)) for network in (small, large)]
    triangles = [Equations(network).triangle() for network in (small, large)]
    work = [multiply_adds(triangle) for triangle in triangles]
    fill = [sum(len(step.multipliers) for step in triangle.steps) for triangle in triangles]
    ratio = math.log(sizes[1] / sizes[0])
    assert math.log(work[1] / work[0]) / ratio <= 1.05
    assert math.log(fill[1] / fill[0]) / ratio <= 1.05


def test_the_docks_span_what_is_claimed() -> None:
    """The docks of these tests reach from about four hundred nodes to eight thousand."""
    assert len(nodes(dock(12))) < 500
    assert len(nodes(dock(220))) > 8000


def test_severities_cost_no_solve() -> None:
    """Factored once, a context answers any number of severities at the ports it knows without another solve."""
    network = dock(3)
    factors = factor(network)
    sweep = Sweep(factors, [probe_residual(factors, sensor.id) for sensor in network.sensors])
    ports = [(f"panel_{number}.L1", f"panel_{number}.G") for number in (1, 2, 3)]
    COUNTS.factorizations = COUNTS.triangular_solves = 0
    for port in ports:
        sweep.at([(*port, 1000 + 0j)])
    first = COUNTS.triangular_solves
    assert first == len(ports)
    for ohms in range(500, 5000, 100):
        for port in ports:
            sweep.at([(*port, complex(ohms))])
    assert (COUNTS.factorizations, COUNTS.triangular_solves) == (0, first)


def test_a_context_costs_one_solve_and_one_for_each_sensor_and_port() -> None:
    """A network factored once takes 1 + sensors + ports triangular solves, however many severities are read from it."""
    network = dock(2)
    COUNTS.factorizations = COUNTS.triangular_solves = 0
    factors = factor(network)
    sweep = Sweep(factors, [probe_residual(factors, sensor.id) for sensor in network.sensors])
    ports = [(f"panel_{number}.{line}", f"panel_{number}.G") for number in (1, 2) for line in ("L1", "N")]
    for port in ports:
        for ohms in (10.0, 1e3, 1e5):
            sweep.at([(*port, complex(ohms))])
    assert COUNTS.factorizations == 1
    assert COUNTS.triangular_solves == 1 + len(network.sensors) + len(ports)


@pytest.mark.parametrize("context", ["as_found", "main_off", "branches_off", "test_load"])
def test_tables_are_factored_once_for_each_network(context: str) -> None:
    """The tables of a set-up factor each rewired network once in a context, and asking again factors nothing."""
    installation = read(arrangements.parts(Arrangement("split_120_240", "one_cord", 1.0), {}, neighbour=False, afloat=False))
    predicted = predictions(installation, session.latents(installation))
    rewired = {point.fault for point in predicted.points}
    COUNTS.factorizations = 0
    predicted.outlooks(context)
    assert 1 <= COUNTS.factorizations < len(rewired) / 3  # most causes are shunts on the healthy network
    before = COUNTS.factorizations
    predicted.outlooks(context)
    assert before == COUNTS.factorizations
