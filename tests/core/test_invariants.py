"""What follows from Kirchhoff's laws and linearity for any installation, as properties over drawn ones."""

from __future__ import annotations

import cmath
import dataclasses
import itertools
import random

import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from drawn import Row, boat, dock, load, marina
from drawn_installations import allowed, valid
from strayline.catalogue.causes import CAUSE
from strayline.causes import Fault, applied
from strayline.components import SYSTEMS
from strayline.contexts import switched
from strayline.installation import build
from strayline.network import Branch, Network, nodes, with_branches
from strayline.parts import read
from strayline.settle import settled
from strayline.severities import severities
from strayline.solve import Solution, crossings, factor, solve

SYSTEM = st.sampled_from(list(SYSTEMS))
OHMS = st.floats(0.002, 0.2)
POWER_FACTOR = st.floats(0.3, 1.0)
quick = settings(max_examples=40, deadline=None)
often = settings(max_examples=150, deadline=None)


def drawn_network(seed: int) -> Network:
    """A boat on its dock, or whatever else the tables allow, half the time with a cause that it can have."""
    draw = random.Random(seed)
    installation = read({"parts": draw.choice((valid, allowed))(seed)})
    network = build(installation)
    if draw.random() < 0.5:
        grid = severities(draw.choice(list(CAUSE)), installation)
        if grid:
            network = applied(installation, network, [draw.choice(grid).fault])
    return settled(network)


drawn_networks = st.integers(0, 10**6).map(drawn_network)


def usual(system: str, *loads: Row, wide: bool = False, cord: float = 0.05) -> list[Row]:
    """One boat on one cord."""
    connector = "50a_125_250v" if wide else {"60": "30a_125v", "50": "16a_230v"}[SYSTEMS[system].region]
    rows = [*dock(system, connector), *boat("outlet1", *loads)]
    return [row | ({"line_ohms": cord, "neutral_ohms": cord, "ground_ohms": cord} if row["kind"] == "cord" else {}) for row in rows]


def solved(rows: list[Row], *faults: Fault) -> Solution:
    """The solved network of these parts with these faults."""
    installation = read({"parts": rows})
    return solve(applied(installation, build(installation), faults))


@quick
@given(SYSTEM, OHMS, POWER_FACTOR, st.floats(50, 3000))
def test_a_healthy_network_has_no_residual(system: str, cord: float, power_factor: float, watts: float) -> None:
    """1: with no path outside the windows every residual is zero, for any load, power factor, supply and impedance."""
    solution = solved(usual(system, load("set", watts=watts, power_factor=power_factor), cord=cord))
    assert max(abs(solution.residual(sensor.id)) for sensor in solution.network.sensors) < 1e-9


@quick
@given(st.integers(2, 9), st.lists(st.floats(500, 50_000), min_size=1, max_size=4))
def test_the_feeder_is_the_sum_of_its_branches(boats: int, leaks: list[float]) -> None:
    """2: residuals of all branches and everything leaving the feeder's own section make the feeder's residual, as phasors."""
    faults = [Fault("appliance_leak", at=f"lamp_{number % boats + 1}", ohms=ohms) for number, ohms in enumerate(leaks)]
    faults.append(Fault("wet_pedestal", at="post_1", ohms=9000))
    solution = solved(marina("three_230_400", boats, connector="16a_230v"), *faults)
    outlets = sum(solution.residual(f"outlet_{number}") for number in range(1, boats + 1))
    own = next(branch for branch in solution.network.branches if branch.kind == "leak" and branch.from_node.startswith("post_1."))
    assert abs(outlets + solution.current(own.id) - solution.residual("feeder")) < 1e-9


@quick
@given(OHMS, OHMS, st.floats(4, 60), st.floats(4, 60))
def test_a_closed_pair_of_cords_sums_to_zero(tail: float, other: float, one: float, two: float) -> None:
    """3: two feeds with a shared neutral aboard see opposite residuals, and the feeder above them none."""
    y = {
        "id": "y",
        "kind": "adapter",
        "style": "combining_y",
        "from": ["outlet1", "outlet2"],
        "neutral_ohms": tail,
        "neutral_b_ohms": other,
    }
    loads = (load("one", ohms=one), load("two", across="L2-N", ohms=two))
    rows = [*dock("split_120_240", "30a_125v", "30a_125v"), y, *boat("y", *loads)]
    solution = solved(rows)
    assert abs(solution.residual("outlet1") + solution.residual("outlet2")) < 1e-9
    assert abs(solution.residual("outlet1")) > 1  # at least the smaller load's current, whatever the neutrals
    assert abs(solution.residual("feeder")) < 1e-9


@often
@given(drawn_networks, st.floats(0.1, 5), st.floats(-3, 3))
def test_scaling_and_turning_the_sources(network: Network, scale: float, turn: float) -> None:
    """4: scaling every source scales every residual; turning all of them by one angle changes no magnitude."""
    factor_ = cmath.rect(scale, turn)
    turned = dataclasses.replace(network, branches=tuple(dataclasses.replace(one, emf=one.emf * factor_) for one in network.branches))
    before, after = solve(network), solve(turned)
    for sensor in network.sensors:
        assert abs(after.residual(sensor.id) - factor_ * before.residual(sensor.id)) < 1e-9 * (
            1 + abs(factor_) * abs(before.residual(sensor.id))
        )


@quick
@given(SYSTEM, st.lists(st.integers(10, 10**6), min_size=2, max_size=6, unique=True))
def test_a_leak_grows_with_its_conductance(system: str, ohms: list[int]) -> None:
    """5: with one leak the residual rises as its resistance falls, and is nothing without it."""
    assume(SYSTEMS[system].earthing != "it")
    rows = usual(system, load("set", watts=500))
    seen = [abs(solved(rows, Fault("appliance_leak", at="set", ohms=each)).residual("outlet1")) for each in sorted(ohms, reverse=True)]
    assert all(less < more for less, more in itertools.pairwise(seen))
    assert abs(solved(rows).residual("outlet1")) < 1e-9


@quick
@given(st.sampled_from(["split_120_240", "wye_120_208"]), st.floats(100, 2000), st.floats(100, 2000), st.floats(500, 5000))
def test_exchanging_the_lines_changes_no_magnitude(system: str, one: float, two: float, ohms: float) -> None:
    """6: with L1 and L2 exchanged throughout the magnitudes stay, on three phases but for what the feeder's reactance turns."""

    def seen(first: str, second: str) -> float:
        rows = usual(system, load("one", across=f"{first}-N", watts=one), load("two", across=f"{second}-N", watts=two), wide=True)
        return abs(solved(rows, Fault("appliance_leak", at="one", ohms=ohms)).residual("outlet1"))

    assert seen("L1", "L2") == pytest.approx(seen("L2", "L1"), rel=1e-9 if system == "split_120_240" else 1e-4)


@quick
@given(st.floats(200, 20_000), st.floats(0.5, 60))
def test_opening_the_ground_moves_a_leak_to_the_water(ohms: float, water: float) -> None:
    """7: an open ground never raises the residual of a leak while a water path of higher resistance remains; the leak goes by the water."""
    rows = usual("single_230", load("set", watts=500))
    rows[-1] |= {"water_ohms": water}
    sound = solved(rows, Fault("appliance_leak", at="set", ohms=ohms))
    opened = solved(rows, Fault("open_ground_with_leak", at="cord", load="set", ohms=ohms))
    assert abs(opened.residual("outlet1")) <= abs(sound.residual("outlet1")) * (1 + 1e-9)
    assert abs(opened.current("hull.water")) > abs(sound.current("hull.water"))


@quick
@given(st.floats(0.005, 1.0))
def test_one_pole_leaves_a_bond_and_two_poles_end_it(ohms: float) -> None:
    """8: opening branch breakers leaves a neutral-ground bond where it is; a two-pole main ends it."""
    rows = marina("single_230", 4)
    bond = Fault("panel_bond", at="panel_1", ohms=ohms)
    installation = read({"parts": rows})
    network = applied(installation, build(installation), [bond])
    assert abs(solve(switched("branches_off", installation, network)).residual("outlet_1")) > 0.010
    assert abs(solve(switched("main_off", installation, network)).residual("outlet_1")) < 1e-6


@quick
@given(SYSTEM, st.floats(500, 20_000))
def test_a_device_aboard_sees_nothing_ahead_of_it(system: str, ohms: float) -> None:
    """9: a fault ahead of the boat's device reads zero there, and the whole of itself at the outlet."""
    solution = solved(usual(system, load("set", watts=500)), Fault("wet_inlet", at="inlet", ohms=ohms))
    assert abs(solution.residual("main")) < 1e-9
    leak = next(branch for branch in solution.network.branches if branch.kind == "leak")
    assert abs(solution.residual("outlet1") - solution.current(leak.id)) < 1e-9


@quick
@given(st.floats(100, 20_000))
def test_a_secondary_fault_leaves_the_primary_alone(ohms: float) -> None:
    """10: behind a transformer whose windings are next to uncoupled by capacitance a fault does not move the shore's residual."""
    winding = {"id": "winding", "kind": "transformer", "from": "inlet", "winding_nf": 0.001}
    rows = [*dock("single_230", "16a_230v"), winding, *boat("outlet1", load("set", watts=500), main="winding")]
    healthy, faulty = solved(rows), solved(rows, Fault("appliance_leak", at="set", ohms=ohms))
    assert abs(faulty.residual("outlet1") - healthy.residual("outlet1")) < 1e-7
    assert abs(faulty.residual("main")) == pytest.approx(230 / ohms, rel=0.1)


@quick
@given(st.floats(100, 3000), POWER_FACTOR)
def test_reversed_polarity_alone_is_silent(watts: float, power_factor: float) -> None:
    """11: line and neutral exchanged leave no residual where nothing leaks."""
    rows = usual("single_230", load("set", watts=watts, power_factor=power_factor))
    rows = [row | ({"reversed": True} if row["kind"] == "receptacle" else {}) for row in rows]
    assert abs(solved(rows).residual("outlet1")) < 1e-9


@pytest.mark.parametrize(
    ("system", "lines", "share"),
    [("split_120_240", 1, 1), ("split_120_240", 2, 0), ("wye_120_208", 2, 1), ("three_230_400", 3, 0), ("three_230_400", 2, 1)],
)
def test_equal_leakage_on_so_many_lines(system: str, lines: int, share: int) -> None:
    """12: equal leakage on one line is I, on a split-phase pair 0, on two wye legs I, on three 0."""
    connector = "16a_400v" if system == "three_230_400" else "50a_125_250v"
    loads = [load(f"set{number}", across=f"L{number}-N", ohms=1e5) for number in range(1, lines + 1)]
    faults = [Fault("appliance_leak", at=f"set{number}", ohms=5000) for number in range(1, lines + 1)]
    seen = abs(solved([*dock(system, connector), *boat("outlet1", *loads)], *faults).residual("outlet1"))
    assert seen == pytest.approx(share * SYSTEMS[system].volts / 5000, rel=0.01, abs=1e-4)


# --- laws of any linear network ------------------------------------------------------------------------------------


@often
@given(drawn_networks)
def test_power_balances(network: Network) -> None:
    """What the sources give, watts and vars, is what impedances and coupled windings take, and the sum over all branches is nothing."""
    factors = factor(network)
    solution = factors.solution()
    current = {branch.id: solution.current(branch.id) for branch in network.branches}
    given_ = [branch.emf * current[branch.id].conjugate() for branch in network.branches]
    taken = [abs(current[branch.id]) ** 2 * branch.impedance for branch in network.branches]
    taken += [2 * each.impedance * (current[each.one] * current[each.other].conjugate()).real for each in network.couplings]
    drops = (factors.value(factors.between(branch.from_node, branch.to_node)) for branch in network.branches)
    powers = [drop * current[branch.id].conjugate() for drop, branch in zip(drops, network.branches, strict=True)]
    assert abs(sum(given_) - sum(taken)) < 1e-9 + 1e-10 * sum(map(abs, given_))
    assert abs(sum(powers)) < 1e-9 + 1e-10 * sum(map(abs, powers))


@often
@given(drawn_networks, st.randoms(use_true_random=False))
def test_reciprocity(network: Network, choose: random.Random) -> None:
    """Volts at one port for an ampere at another are the same with the ports exchanged, windings between them or not."""
    factors = factor(network)
    solution = factors.solution()
    names = [name for name in {one.from_node for one in network.branches} if name not in solution.floating and name != network.reference]
    one, other = choose.sample(sorted(names), 2)
    ground = network.reference
    there, back = factors.mutual((one, ground), (other, ground)), factors.mutual((other, ground), (one, ground))
    assert abs(there - back) <= 1e-9 * max(abs(there), 1e-6)


@often
@given(drawn_networks)
def test_crossings_add_up(network: Network) -> None:
    """At every sensor what leaves its zone outside its window is the residual, and at every node as much comes as goes."""
    solution = solve(network)
    for sensor in network.sensors:
        strayed = sum((current for _, current in crossings(network, solution, sensor.id)), 0j)
        assert abs(strayed - solution.residual(sensor.id)) < 1e-9
    balance = dict.fromkeys(nodes(network), 0j)
    for branch in network.branches:
        balance[branch.from_node] -= solution.current(branch.id)
        balance[branch.to_node] += solution.current(branch.id)
    assert max(map(abs, balance.values())) < 1e-9


@often
@given(drawn_networks)
def test_a_path_that_carries_nothing_changes_nothing(network: Network) -> None:
    """A branch hung on one node alone carries no current and moves no residual."""
    hung = with_branches(network, Branch("hung", network.branches[0].to_node, "nowhere", 7 + 0j, "load", "x"))
    before, after = solve(network), solve(hung)
    assert abs(after.current("hung")) < 1e-12
    assert all(abs(after.residual(one.id) - before.residual(one.id)) < 1e-9 for one in network.sensors)
