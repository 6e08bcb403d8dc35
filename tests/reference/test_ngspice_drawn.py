"""Installations drawn at random, with causes drawn at random, against ngspice (open source, BSD).

As in `test_ngspice_installations` every residual must agree, with its sign, to a nanoampere or a millionth, whichever is larger. Where a
drawn conductor has less than a tenth of a milliohm, ngspice itself knows its current no better than its voltages' last bit over its ohms.
"""

from __future__ import annotations

import random
import sys
from collections.abc import Callable
from typing import TYPE_CHECKING

import pytest

from drawn_installations import allowed, valid
from strayline.catalogue.causes import CAUSE
from strayline.causes import applied
from strayline.components import ADAPTERS, CONNECTORS, KINDS, SYSTEMS
from strayline.installation import build
from strayline.netlist import netlist
from strayline.parts import read
from strayline.settle import settled
from strayline.severities import severities
from strayline.solve import solve

if TYPE_CHECKING:
    from strayline.network import Network
    from strayline.parts import Installation

Printed = Callable[[str], dict[str, complex]]
HIGHEST_VOLTS = 500.0


def drawn(seed: int, cause: str = "") -> tuple[Installation, Network, str]:
    """A boat on its dock or whatever else the tables allow, with ordinary ohms, and this or any cause where it can be; the cause."""
    draw = random.Random(seed)
    rows = valid(seed) if draw.random() < 0.5 else allowed(seed, any_ohms=False)
    installation = read({"parts": rows})
    cause = cause or draw.choice(list(CAUSE))
    grid = severities(cause, installation)
    network = build(installation)
    if grid:
        network = applied(installation, network, [draw.choice(grid).fault])
    return installation, settled(network), cause if grid else ""


def difference(network: Network, spice_residuals: Printed) -> float:
    """The worst difference in amperes over all sensors, none of them beyond what is allowed; ngspice prints every sensor once."""
    reference = spice_residuals(netlist(network, "drawn"))
    solution = solve(network)
    assert set(reference) == {sensor.id for sensor in network.sensors}
    last_bit = sys.float_info.epsilon * HIGHEST_VOLTS / min(abs(branch.impedance) for branch in network.branches)
    worst = 0.0
    for name, expected in reference.items():
        away = abs(solution.residual(name) - expected)
        assert away <= max(1e-9, 1e-6 * abs(expected), last_bit), name
        worst = max(worst, away / max(1.0, abs(expected)))
    return worst


def test_a_hundred_drawn_installations(spice_residuals: Printed) -> None:
    """A hundred networks, between them every kind of part and every supply, and a current that strays in most, agree with ngspice."""
    kinds: set[str] = set()
    systems: set[object] = set()
    worst, straying = 0.0, 0
    for seed in range(100):
        installation, network, _ = drawn(seed)
        worst = max(worst, difference(network, spice_residuals))
        solution = solve(network)
        straying += any(abs(solution.residual(sensor.id)) > 1e-4 for sensor in network.sensors)
        kinds |= {part.kind for part in installation.parts}
        systems |= {part.values["system"] for part in installation.of_kind("supply")}
    print(f"worst difference from ngspice over drawn installations: {worst:.2g} A")
    assert kinds == set(KINDS)
    assert systems == set(SYSTEMS)
    assert straying > 50


@pytest.mark.full
@pytest.mark.timeout(1200)
def test_every_cause_in_a_thousand_drawn_installations(spice_residuals: Printed) -> None:
    """Every cause in twenty drawn installations, or as many as are found, agrees with ngspice; so does every row of the tables."""
    counts = dict.fromkeys(CAUSE, 0)
    styles: set[object] = set()
    connectors: set[object] = set()
    worst = 0.0
    for cause in CAUSE:
        for seed in range(1000, 1600):
            installation, network, found = drawn(seed, cause)
            if found:
                counts[cause] += 1
                worst = max(worst, difference(network, spice_residuals))
                styles |= {part.values["style"] for part in installation.of_kind("adapter")}
                connectors |= {part.values["connector"] for part in installation.of_kind("receptacle")}
            if counts[cause] == 20:
                break
    print(f"worst difference from ngspice over {sum(counts.values())} drawn installations: {worst:.2g} A")
    assert min(counts.values()) >= 5
    assert styles == set(ADAPTERS)
    assert connectors == set(CONNECTORS)
