"""The solver against what else could do the same work, all in one run; only the ratios mean anything."""

from __future__ import annotations

import dataclasses
import math
import shutil
import statistics
import subprocess
import tempfile
import time
from pathlib import Path
from typing import TYPE_CHECKING

import numpy as np
import scipy.sparse
import scipy.sparse.linalg
from table import Row

from drawn import CHARGER, HEATER, boat, dock, load, marina
from strayline.equations import Equations
from strayline.installation import build
from strayline.netlist import netlist
from strayline.network import Branch, Network, nodes, replaced, with_branches
from strayline.parts import read
from strayline.solve import Sweep, factor, probe_residual, solve

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator

MORE = (
    {"id": "galley", "kind": "breaker", "from": "panel"},
    load("stove", watts=900, element=True) | {"from": "galley"},
    load("pump", watts=200, power_factor=0.8),
)
CONTEXTS, CAUSES, SEVERITIES = 12, 40, 8
TIMES = 5


def rows() -> Iterator[Row]:
    """The ratios that the issue bounds."""
    yield from _sweeps()
    yield from _growth()
    yield from _process()


def _seconds(work: Callable[[], object]) -> float:
    """Median of a few runs."""
    taken = []
    for _ in range(TIMES):
        started = time.perf_counter()
        work()
        taken.append(time.perf_counter() - started)
    return statistics.median(taken)


def _one_boat() -> Network:
    """About fifty nodes: a dock, one cord, a boat with five loads."""
    return build(read({"parts": [*dock("split_120_240", "30a_125v"), *boat("outlet1", HEATER, CHARGER, load("lamp", watts=60), *MORE)]}))


def _sweeps() -> Iterator[Row]:
    whole = _one_boat()
    names = nodes(whole)
    lamp = whole.branch("lamp.load")  # each context differs by what one load is
    contexts = [replaced(whole, dataclasses.replace(lamp, impedance=lamp.impedance * (1 + place))) for place in range(CONTEXTS)]
    ports = [(names[place], names[-1 - place]) for place in range(1, len(names) // 2)]
    ports = [port for port in (ports * 3) if port[0] != port[1]][:CAUSES]
    ohms = [10 ** (power / 2) for power in range(SEVERITIES)]

    def swept() -> list[complex]:
        found = []
        for network in contexts:
            factors = factor(network)
            sweep = Sweep(factors, [probe_residual(factors, sensor.id) for sensor in network.sensors])
            found += [value for port in ports for each in ohms for value in sweep.at([(*port, complex(each))])[0]]
        return found

    def solved_afresh() -> list[complex]:
        found = []
        for network in contexts:
            for a, b in ports:
                for each in ohms:
                    solution = solve(with_branches(network, Branch("fault", a, b, complex(each), "leak", "x")))
                    found += [solution.residual(sensor.id) for sensor in network.sensors]
        return found

    size = len(names)
    generator = np.random.default_rng(1)
    batch = generator.normal(size=(len(contexts) * len(ports) * len(ohms), size, size)) + size * np.eye(size) + 0j
    right = generator.normal(size=(len(batch), size, 1)) + 0j
    ours, dense = _seconds(swept), _seconds(lambda: np.linalg.solve(batch, right))
    started = time.perf_counter()
    reference = solved_afresh()
    again = time.perf_counter() - started
    worst = max(abs(one - other) for one, other in zip(swept(), reference, strict=True))
    what = f"{len(contexts)} contexts x {len(ports)} causes x {len(ohms)} severities, {size} nodes"
    yield Row("sweep / batched numpy.linalg.solve without its assembly", ours / dense, "x", 0.2, f"{what}: {ours * 1e3:.0f} ms")
    yield Row("sweep / our own solve of each afresh", ours / again, "x", None, f"worst difference {worst:.1g} A (at most 1e-9)")
    if worst > 1e-9:
        yield Row("sweep against afresh, difference over 1e-9 A", worst / 1e-9, "x", 1.0)


def _growth() -> Iterator[Row]:
    sizes, seconds = [], []
    for boats in (11, 55, 110, 216):
        network = build(read({"parts": marina("single_230", boats)}))
        sizes.append(len(nodes(network)))
        seconds.append(_seconds(lambda network=network: factor(network).solution()))
    slope = float(np.polyfit(np.log(sizes), np.log(seconds), 1)[0])
    told = ", ".join(f"{size} nodes {took * 1e3:.1f} ms" for size, took in zip(sizes, seconds, strict=True))
    yield Row("time exponent of factor and solve", slope, "x", 1.2, told)
    matrix = _matrix(build(read({"parts": marina("single_230", 110)})))
    right = np.ones(matrix.shape[0], complex)
    splu = _seconds(lambda: scipy.sparse.linalg.splu(matrix).solve(right))
    yield Row(f"ours / scipy's splu at {sizes[2]} nodes", seconds[2] / splu, "x", 12.0, f"splu {splu * 1e3:.1f} ms")


def _matrix(network: Network) -> scipy.sparse.csc_matrix:
    """The same equations as a sparse matrix, from our factors' own unknowns: node voltages and branch currents."""
    equations = Equations(network)
    names = {name: equations.place(name) for name in nodes(network)}
    size = max(names.values()) + 1
    entries: dict[tuple[int, int], complex] = {}
    for branch in network.branches:
        a, b, row = names[branch.from_node], names[branch.to_node], size
        size += 1
        entries[row, row] = -branch.impedance or -1e-9
        for place, sign in ((a, 1), (b, -1)):
            if place >= 0:
                entries[row, place] = entries[place, row] = complex(sign)
    places, values = zip(*entries.items(), strict=True)
    return scipy.sparse.csc_matrix((values, tuple(zip(*places, strict=True))), shape=(size, size))


def _process() -> Iterator[Row]:
    ngspice = shutil.which("ngspice")
    if not ngspice:
        return
    installation = read({"parts": [*dock("split_120_240", "30a_125v"), *boat("outlet1", HEATER, CHARGER)]})

    def ours() -> list[complex]:
        network = build(installation)
        solution = solve(network)
        return [solution.residual(sensor.id) for sensor in network.sensors]

    with tempfile.TemporaryDirectory() as name:
        file = Path(name, "case.cir")
        file.write_text(netlist(build(installation), "bench"), encoding="utf-8")
        spice = _seconds(lambda: subprocess.run([ngspice, "-b", str(file)], check=True, capture_output=True))
    mine = _seconds(ours)
    yield Row("checked case to all sensors / one ngspice -b process", mine / spice, "x", 0.2, f"{mine * 1e3:.2f} and {spice * 1e3:.1f} ms")
    assert math.isfinite(mine)
