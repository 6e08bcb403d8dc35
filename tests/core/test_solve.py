"""Circuit laws on random circuits, closed forms on small ones, and shunts against circuits solved afresh."""

from __future__ import annotations

import cmath
import math
from dataclasses import replace
from decimal import Decimal, localcontext

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from strayline import solve as solving
from strayline.errors import NetworkError
from strayline.network import Branch, Network, Sensor, checked, nodes, replaced, with_branches, without_branches
from strayline.solve import (
    Probe,
    Sweep,
    crossings,
    factor,
    probe_current,
    probe_residual,
    probe_voltage,
    solve,
    sweep,
    window_admittance,
)

quick = settings(deadline=None, max_examples=60)


# Circuits ----------------------------------------------------------------------------------------------------------------------------


@st.composite
def impedances(draw: st.DrawFn) -> complex:
    """From a tenth of a milliohm to a hundred kilohms, resistive enough not to resonate."""
    return 10 ** draw(st.floats(-4, 5)) * complex(1, draw(st.floats(-2, 2)))


@st.composite
def networks(draw: st.DrawFn) -> Network:
    """A connected circuit of up to nine nodes with one to three sources and one sensor around some branches into some zone."""
    size = draw(st.integers(3, 9))
    names = [f"n{place}" for place in range(size)]
    ends = [(names[draw(st.integers(0, place - 1))], names[place]) for place in range(1, size)]
    for _ in range(draw(st.integers(1, 8))):
        a, b = draw(st.lists(st.sampled_from(names), min_size=2, max_size=2, unique=True))
        ends.append((a, b))
    branches = [Branch(f"b{place}", a, b, draw(impedances()), "line", "x") for place, (a, b) in enumerate(ends)]
    for _ in range(draw(st.integers(1, 3))):
        at = draw(st.integers(0, len(branches) - 1))
        emf = cmath.rect(draw(st.floats(1, 240)), draw(st.floats(-3, 3)))
        branches[at] = replace(branches[at], kind="source", emf=emf, impedance=draw(st.sampled_from([0.01, 1e-3 + 1e-3j, 20])))
    zone = frozenset(draw(st.lists(st.sampled_from(names[1:]), min_size=1, max_size=size - 1, unique=True)))
    entering = [branch.id for branch in branches if branch.from_node not in zone and branch.to_node in zone]
    window = tuple(one for one in entering if draw(st.booleans()))
    return checked(Network(60, names[0], tuple(branches), (Sensor("watch", window, "gfpe_30", zone),)))


LINE, BACK, GROUND, ROD = 0.031 + 0.002j, 0.027 + 0.002j, 0.043 + 0.003j, 23.0


def one_boat(*more: Branch) -> Network:
    """Supply bonded at the source, a cord of three conductors, a 12 ohm heater, a hull in the water; `more` is what is wrong."""
    branches = (
        Branch("supply", "s.N", "s.L", 0.02 + 0.01j, "source", "grid", 120),
        Branch("main bond", "s.N", "s.G", 1e-3, "bond", "grid"),
        Branch("rod", "s.G", "earth", ROD, "water", "grid"),
        Branch("hot", "s.L", "b.L", LINE, "line", "cord"),
        Branch("back", "s.N", "b.N", BACK, "neutral", "cord"),
        Branch("ground", "s.G", "b.G", GROUND, "protective", "cord"),
        Branch("heater", "b.L", "b.N", 12, "load", "heater"),
        Branch("hull", "b.G", "earth", 40, "water", "boat"),
    )
    sensor = Sensor("pedestal", ("hot", "back"), "gfpe_30", frozenset({"b.L", "b.N", "b.G"}))
    return checked(Network(60, "earth", branches + more, (sensor,), (), (("boat", "b.G"),)))


def generator(*more: Branch) -> Network:
    """One boat beside a generator that nothing bonds: 100 V on 10 ohm inside, 9 ohm of it in a load."""
    return one_boat(
        Branch("alternator", "g.2", "g.1", 1, "source", "generator", 100),
        Branch("toaster", "g.1", "g.2", 9, "load", "toaster"),
        *more,
    )


def parallel(*ohms: complex) -> complex:
    """Impedances side by side."""
    return 1 / sum(1 / one for one in ohms)


# Laws --------------------------------------------------------------------------------------------------------------------------------


@quick
@given(networks())
def test_current_law(network: Network) -> None:
    """At every node, the reference too, the currents add up to zero within rounding of the largest current."""
    solution = solve(network)
    largest = max(abs(solution.current(branch.id)) for branch in network.branches)
    for node in nodes(network):
        away = sum(solution.current(branch.id) * ((branch.from_node == node) - (branch.to_node == node)) for branch in network.branches)
        assert abs(away) <= 1e-12 * max(largest, 1)


@quick
@given(networks())
def test_voltage_law(network: Network) -> None:
    """Every branch obeys V(to) = V(from) + emf - Z I within rounding of the largest voltage."""
    solution = solve(network)
    volts = {node: solution.voltage(node) for node in nodes(network)}
    largest = max(1.0, *(abs(value) for value in volts.values() if value is not None))
    for branch in network.branches:
        start, end = volts[branch.from_node], volts[branch.to_node]
        assert start is not None
        assert end is not None
        drop = branch.impedance * solution.current(branch.id)
        assert abs(start + branch.emf - drop - end) <= 1e-12 * max(largest, abs(drop))


@quick
@given(networks())
def test_power_balance(network: Network) -> None:
    """What the sources give, real and reactive, is what the impedances take."""
    solution = solve(network)
    given_power = sum(branch.emf * solution.current(branch.id).conjugate() for branch in network.branches)
    taken = [branch.impedance * abs(solution.current(branch.id)) ** 2 for branch in network.branches]
    at_one_ohm = sum(abs(branch.emf) ** 2 for branch in network.branches)
    assert abs(given_power - sum(taken)) <= 1e-10 * max(map(abs, taken)) + 1e-13 * at_one_ohm


@quick
@given(networks(), st.floats(-3, 3), st.floats(0.1, 10))
def test_readings_follow_the_supply(network: Network, turn: float, factor_of_two: float) -> None:
    """Scaling and turning every source by one complex factor scales and turns every reading by it."""
    by = cmath.rect(factor_of_two, turn)
    driven = replace(network, branches=tuple(replace(branch, emf=branch.emf * by) for branch in network.branches))
    before, after = solve(network), solve(driven)
    largest = max(abs(before.current(branch.id)) for branch in network.branches)
    for branch in network.branches:
        assert abs(after.current(branch.id) - by * before.current(branch.id)) <= 1e-10 * abs(by) * max(largest, 1e-3)


@quick
@given(networks(), st.data())
def test_reciprocity(network: Network, data: st.DataObject) -> None:
    """One volt in one branch drives in another the current that one volt in that other drives in the one."""
    one, two = data.draw(st.lists(st.sampled_from(network.branches), min_size=2, max_size=2, unique=True))

    def driven(by: Branch, seen: Branch) -> complex:
        return solve(replace(network, branches=tuple(replace(each, emf=float(each.id == by.id)) for each in network.branches))).current(
            seen.id
        )

    there, back = driven(one, two), driven(two, one)
    assert abs(there - back) <= 1e-9 * max(abs(there), abs(back), 1e-3)


@quick
@given(networks())
def test_crossings_add_up_to_the_residual(network: Network) -> None:
    """What leaves a zone outside the window is the residual, and no branch of the window or inside the zone is among it."""
    solution = solve(network)
    sensor = network.sensors[0]
    found = crossings(network, solution, "watch")
    largest = max(abs(solution.current(branch.id)) for branch in network.branches)
    assert abs(sum(current for _, current in found) - solution.residual("watch")) <= 1e-12 * max(largest, 1)
    for branch, _ in found:
        assert branch.id not in sensor.branches
        assert (branch.from_node in sensor.zone) != (branch.to_node in sensor.zone)


@given(st.floats(1, 1000), st.floats(-100, 100))
@quick
def test_no_path_outside_no_residual(ohms: float, reactance: float) -> None:
    """A load of any size leaves no residual where nothing aboard meets ground."""
    network = replaced(one_boat(), Branch("heater", "b.L", "b.N", complex(ohms, reactance), "load", "heater"))
    solution = solve(network)
    assert abs(solution.current("heater")) > 0.05
    assert abs(solution.residual("pedestal")) < 1e-12 * abs(solution.current("heater"))


# Closed forms ------------------------------------------------------------------------------------------------------------------------


def test_leak_to_the_frame() -> None:
    """A leak's residual is the line voltage over the leak and its return, counted positive from supply to load."""
    solution = solve(one_boat(Branch("leak", "b.L", "b.G", 2000, "leak", "heater")))
    heater, leak = solution.current("heater"), solution.current("leak")
    assert solution.residual("pedestal") == pytest.approx(leak, rel=1e-12)
    assert leak.real == pytest.approx(120 / 2000, rel=0.01)
    assert solution.current("hot") == pytest.approx(heater + leak, rel=1e-14)


def test_bond_aboard_shares_the_neutral_current() -> None:
    """A bond aboard takes from the neutral the share of the ground path, bond and rod and water included, by the current divider."""
    solution = solve(one_boat(Branch("bond", "b.N", "b.G", 2e-3, "bond", "panel")))
    ground_path = 2e-3 + parallel(GROUND, 40 + ROD) + 1e-3
    share = BACK / (BACK + ground_path)
    assert solution.residual("pedestal") == pytest.approx(solution.current("heater") * share, rel=1e-12)


def combining_y(first: complex, second: complex, neutral_a: complex, neutral_b: complex) -> Network:
    """Two receptacles joined into one cord: 120 V loads on the first and on the second leg, neutrals joined at the boat."""
    return checked(
        Network(
            60,
            "N",
            (
                Branch("supply 1", "N", "L1", 0j, "source", "grid", 120),
                Branch("supply 2", "N", "L2", 0j, "source", "grid", -120),
                Branch("hot a", "L1", "b.L1", 0.01, "line", "y"),
                Branch("back a", "N", "b.N", neutral_a, "neutral", "y"),
                Branch("hot b", "L2", "b.L2", 0.01, "line", "y"),
                Branch("back b", "N", "b.N", neutral_b, "neutral", "y"),
                Branch("load 1", "b.L1", "b.N", first, "load", "one"),
                Branch("load 2", "b.L2", "b.N", second, "load", "two"),
            ),
            (
                Sensor("a", ("hot a", "back a"), "gfpe_30", frozenset({"b.L1", "b.L2", "b.N"})),
                Sensor("b", ("hot b", "back b"), "gfpe_30", frozenset({"b.L1", "b.L2", "b.N"})),
            ),
        )
    )


@pytest.mark.parametrize("tiny", [1, 1e-3, 1e-6, 1e-9])
@pytest.mark.parametrize(("first", "second"), [(10, 20), (10, 10), (6 + 2j, 1e6)])
def test_joined_neutrals(first: complex, second: complex, tiny: float) -> None:
    """Joined neutrals split the return by their impedances: (1 - a) I1 - a I2 at the one device and its opposite at the other.

    Balanced legs, which send nothing back, show the full line current. The share comes out to twelve digits down to neutrals of nanoohms.
    """
    neutral_a, neutral_b = (0.02 + 0.004j) * tiny, (0.05 + 0.001j) * tiny
    solution = solve(combining_y(first, second, neutral_a, neutral_b))
    one, two = solution.current("load 1"), solution.current("load 2")
    share = neutral_b / (neutral_a + neutral_b)
    assert solution.current("back a") == pytest.approx(-share * (one + two), rel=1e-12, abs=1e-12)
    assert solution.residual("a") == pytest.approx((1 - share) * one - share * two, rel=1e-12, abs=1e-12)
    assert solution.residual("b") == pytest.approx(-solution.residual("a"), rel=1e-12, abs=1e-12)
    if first == second:
        assert abs(one) > 11
        assert solution.residual("a") == pytest.approx(one, rel=1e-12)


def test_chain_of_nearly_nothing() -> None:
    """Twenty enclosed segments of a nanoohm each, between an ideal source and a load, carry the load's current to fifteen digits."""
    segments = [Branch(f"w{place}", f"n{place}", f"n{place + 1}", 1e-9, "line", "x") for place in range(20)]
    network = Network(
        50,
        "N",
        (Branch("supply", "N", "n0", 0j, "source", "grid", 230), *segments, Branch("load", "n20", "N", 23, "load", "x")),
        tuple(Sensor(f"s{place}", (f"w{place}",), "none", frozenset()) for place in range(20)),
    )
    solution = solve(checked(network))
    for place in range(20):
        assert solution.residual(f"s{place}") == pytest.approx(230 / (23 + 20e-9), rel=1e-15)


def test_ideal_sources_in_series_and_idle() -> None:
    """Two ideal sources in series add up, and an ideal source with nothing on it stands at its voltage without current."""
    network = Network(
        50,
        "N",
        (
            Branch("one", "N", "a", 0j, "source", "x", 10),
            Branch("two", "a", "b", 0j, "source", "x", 5j),
            Branch("idle", "b", "c", 0j, "source", "x", 100),
            Branch("load", "b", "N", 5, "load", "x"),
        ),
    )
    solution = solve(checked(network))
    assert solution.voltage("b") == 10 + 5j
    assert solution.voltage("c") == 110 + 5j
    assert solution.current("two") == solution.current("one") == solution.current("load") == 2 + 1j
    assert solution.current("idle") == 0


def test_weak_leak_beside_milliohms() -> None:
    """A leak of a hundred megohms is read to six digits beside a load of twenty amperes in conductors of a tenth of a milliohm."""
    network = one_boat(Branch("leak", "b.L", "b.G", 1e8, "leak", "heater"))
    for branch_id in ("hot", "back", "ground"):
        network = replaced(network, replace(network.branch(branch_id), impedance=1e-4))
    network = replaced(network, replace(network.branch("heater"), impedance=6))
    volts = solve(network).voltage("b.L")
    assert volts is not None
    assert solve(network).residual("pedestal") == pytest.approx(volts / 1e8, rel=1e-6)


def fifty_digits(network: Network) -> dict[str, complex]:
    """Currents of all branches of a resistive network by dense elimination in 50-digit decimals, on a tableau of every equation."""
    names = [name for name in nodes(network) if name != network.reference]
    size = len(names) + len(network.branches)
    with localcontext() as context:
        context.prec = 50
        rows = [[Decimal(0)] * (size + 1) for _ in range(size)]
        for place, branch in enumerate(network.branches, len(names)):
            for node, sign in ((branch.from_node, 1), (branch.to_node, -1)):
                if node != network.reference:
                    rows[names.index(node)][place] += sign
                    rows[place][names.index(node)] += sign
            rows[place][place] = -Decimal(complex(branch.impedance).real)
            rows[place][size] = -Decimal(complex(branch.emf).real)
        for step in range(size):
            best = max(range(step, size), key=lambda row: abs(rows[row][step]))
            rows[step], rows[best] = rows[best], rows[step]
            for row in range(size):
                if row != step and rows[row][step]:
                    share = rows[row][step] / rows[step][step]
                    rows[row] = [one - share * other for one, other in zip(rows[row], rows[step], strict=True)]
        return {branch.id: complex(rows[place][size] / rows[place][place]) for place, branch in enumerate(network.branches, len(names))}


def test_against_fifty_digits() -> None:
    """Every current of a resistive boat with a bond and leaks, and its residual, is good to 1e-12 A."""
    network = one_boat(
        Branch("bond", "b.N", "b.G", 2e-3, "bond", "panel"),
        Branch("leak", "b.L", "b.G", 47e3, "leak", "heater"),
        Branch("second back", "s.N", "b.N", 0.5e-3, "neutral", "cord"),
        Branch("strap", "s.G", "b.G", 0.3e-3, "protective", "cord"),
    )
    network = replace(network, branches=tuple(replace(branch, impedance=complex(branch.impedance).real) for branch in network.branches))
    exact, solution = fifty_digits(network), solve(network)
    assert abs(exact["heater"]) > 9
    for branch_id, current in exact.items():
        assert abs(solution.current(branch_id) - current) < 1e-12
    assert abs(solution.residual("pedestal") - exact["hot"] - exact["back"]) < 1e-12


# Islands -----------------------------------------------------------------------------------------------------------------------------


def test_unbonded_generator_floats() -> None:
    """An island's voltages are withheld, its nodes are listed, and its currents are real."""
    solution = solve(generator())
    assert solution.floating == ("g.2", "g.1")
    assert solution.voltage("g.1") is None
    assert solution.current("toaster") == pytest.approx(10)
    assert solution.current("alternator") == pytest.approx(10)
    assert solve(one_boat()).floating == ()


def test_a_hull_that_touches_nothing_floats() -> None:
    """A hull with no branch at all is a node that floats, not an error."""
    network = without_branches(one_boat(), ["ground", "hull"])
    solution = solve(network)
    assert solution.floating == ("b.G",)
    assert solution.voltage("b.G") is None


def test_unplugged_boat_is_dead_and_floats() -> None:
    """With all conductors of the cord open the boat floats, carries nothing, and its emptied sensor reads zero."""
    solution = solve(without_branches(one_boat(), ["hot", "back", "ground", "hull"]))
    assert set(solution.floating) == {"b.L", "b.N", "b.G"}
    assert solution.current("heater") == 0
    assert solution.residual("pedestal") == 0


def test_voltages_inside_an_island() -> None:
    """A difference inside an island means something; one between islands is not a number."""
    factors = factor(generator())
    inside, between = probe_voltage(factors, "g.1", "g.2"), probe_voltage(factors, "g.1", "earth")
    assert factors.solution().at(inside) == pytest.approx(90)
    assert cmath.isnan(factors.solution().at(between))
    assert cmath.isnan(factors.value(between))


def test_one_shunt_to_an_island_carries_nothing() -> None:
    """A shunt that first joins an island to ground carries no current, and gives the island its voltages."""
    factors = factor(generator())
    probes = [probe_current(factors, [("toaster", 1)]), probe_voltage(factors, "g.2", "earth"), probe_current(factors, [("hull", 1)])]
    toaster, volts, hull = sweep(factors, probes, [("g.1", "earth", 50)])
    assert toaster == pytest.approx(10)
    assert volts == pytest.approx(-90)
    assert hull == pytest.approx(factors.value(probes[2]), abs=1e-12)


@pytest.mark.parametrize("first", ["g.1", "g.2"])
def test_two_shunts_to_an_island(first: str) -> None:
    """Two shunts into an island carry what the same two branches carry, whichever of its nodes the solve had tied."""
    second = {"g.1": "g.2", "g.2": "g.1"}[first]
    shunts = [(first, "earth", 30), (second, "b.G", 5)]
    factors = factor(generator())
    probes = [probe_residual(factors, "pedestal"), probe_current(factors, [("hull", 1)]), probe_voltage(factors, "g.1", "earth")]
    fresh = solve(generator(Branch("x", first, "earth", 30, "leak", "x"), Branch("y", second, "b.G", 5, "leak", "x")))
    assert abs(fresh.current("hull")) > 0.5
    assert sweep(factors, probes, shunts) == pytest.approx([fresh.at(probe) for probe in probes], abs=1e-12)


def test_shunt_inside_an_island() -> None:
    """A shunt inside an island needs no new factors and gives the divider's current."""
    factors = factor(generator())
    before = solving.COUNTS.factorizations
    (current,) = sweep(factors, [probe_current(factors, [("alternator", 1)])], [("g.1", "g.2", 9)])
    assert current == pytest.approx(100 / (1 + 4.5))
    assert solving.COUNTS.factorizations == before


def test_joined_factors_are_kept() -> None:
    """Asking again for the same joining shunts factors nothing anew."""
    factors = factor(generator())
    probes = [probe_residual(factors, "pedestal")]
    first = sweep(factors, probes, [("g.1", "earth", 50)])
    before = solving.COUNTS.factorizations
    assert sweep(factors, probes, [("g.1", "earth", 50)]) == first
    window_admittance(factors, "pedestal", [("g.1", "earth", 50)])
    assert solving.COUNTS.factorizations == before


# Shunts across ports -----------------------------------------------------------------------------------------------------------------


@quick
@given(networks(), st.data())
def test_shunts_equal_branches(network: Network, data: st.DataObject) -> None:
    """Up to three shunts change every probe as the same branches do in a circuit solved afresh."""
    names = st.sampled_from(nodes(network))
    pairs = data.draw(st.lists(st.lists(names, min_size=2, max_size=2, unique=True), min_size=0, max_size=3))
    shunts = [(a, b, data.draw(impedances())) for a, b in pairs]
    factors = factor(network)
    probes = [
        probe_residual(factors, "watch"),
        probe_current(factors, [(network.branches[0].id, 1), (network.branches[1].id, -1)]),
        probe_voltage(factors, *nodes(network)[1:3]),
    ]
    added = with_branches(network, *(Branch(f"shunt{place}", a, b, ohms, "leak", "x") for place, (a, b, ohms) in enumerate(shunts)))
    fresh = solve(added)
    scale = max(1.0, *(abs(fresh.current(branch.id)) for branch in added.branches), *(abs(factors.value(probe)) for probe in probes))
    assert sweep(factors, probes, shunts) == pytest.approx([fresh.at(probe) for probe in probes], rel=1e-8, abs=1e-8 * scale)
    assert window_admittance(factors, "watch", shunts) == pytest.approx(driven_through(added), rel=1e-7, abs=1e-9)


def test_a_sweep_remembers_nothing_but_the_network() -> None:
    """Sets of shunts asked of one Sweep, in any order and again, read what each reads alone, joined islands too."""
    factors = factor(generator())
    probes = (probe_residual(factors, "pedestal"), probe_voltage(factors, "g.1", "earth"))
    sets = [
        [],
        [("b.N", "b.G", 0.01)],
        [("b.G", "b.N", 0.01), ("b.L", "b.G", 700 - 200j)],
        [("g.1", "earth", 50), ("g.2", "b.G", 9)],
        [("b.L", "b.G", 80)],
    ]
    kept = Sweep(factors, probes, ("pedestal",))
    for shunts in (*sets, *reversed(sets)):
        values, (loop,) = kept.at(shunts)
        assert values == pytest.approx(sweep(factor(generator()), probes, shunts), rel=1e-12, nan_ok=True)
        assert loop == pytest.approx(window_admittance(factor(generator()), "pedestal", shunts), rel=1e-12, abs=1e-15)


def driven_through(network: Network) -> complex:
    """Residual of the sensor for one volt in series with each enclosed conductor and every source dead, by a solve of its own."""
    window = network.sensors[0].branches
    return solve(replace(network, branches=tuple(replace(each, emf=float(each.id in window)) for each in network.branches))).residual(
        "watch"
    )


def test_thevenin_pair() -> None:
    """A port's open voltage and impedance are those of the divider, and predict the current of any shunt across it."""
    network = Network(50, "N", (Branch("supply", "N", "a", 3, "source", "x", 12), Branch("load", "a", "N", 6, "load", "x")))
    factors = factor(network)
    port = factors.port("a", "N")
    assert (port.a, port.b) == ("a", "N")
    assert port.open_voltage == pytest.approx(8)
    assert port.impedance == factors.port_impedance("a", "N") == pytest.approx(2)
    assert factors.transfer(probe_current(factors, [("load", 1)]), "a", "N") == pytest.approx(3 / 9)
    (load,) = sweep(factors, [probe_current(factors, [("load", 1)])], [("a", "N", 6)])
    assert load == pytest.approx(1)


def test_port_between_islands() -> None:
    """Between islands there is no open voltage and no current can return: the impedance is infinite."""
    port = factor(generator()).port("g.1", "earth")
    assert port.impedance == math.inf
    assert cmath.isnan(port.open_voltage)


def test_a_probe_across_two_islands_hides_no_port() -> None:
    """A voltage that is read between islands does not make the same two nodes look connected to a shunt."""
    factors = factor(generator())
    swept = Sweep(factors, [probe_voltage(factors, "g.1", "earth")])
    (volts,), _ = swept.at([("g.1", "earth", 10 + 0j)])
    assert not cmath.isnan(volts)
    assert abs(volts) < 1e-6  # tied through ten ohms with no other road, it stands at earth


def test_a_sweep_factors_once() -> None:
    """A hundred severities on two ports cost one factorization, one solve, and one adjoint for each probe and each port."""
    solving.COUNTS.factorizations = solving.COUNTS.triangular_solves = 0
    factors = factor(one_boat())
    probes = [probe_residual(factors, "pedestal"), probe_voltage(factors, "b.G", "earth")]
    for place in range(100):
        sweep(factors, probes, [("b.L", "b.G", 10.0 + place), ("b.N", "b.G", 0.01)])
        sweep(factors, probes, [("b.L", "b.G", 1000.0 + place)])
        window_admittance(factors, "pedestal", [("b.N", "b.G", 1.0 + place)])
    assert solving.COUNTS.factorizations == 1
    assert solving.COUNTS.triangular_solves == 1 + 2 + 2


def test_window_sees_a_bond_without_load() -> None:
    """The window of a device sees, with no load at all, the loop that a bond aboard closes: neutral, bond and ground path in series."""
    idle = without_branches(one_boat(), ["heater"])
    factors = factor(idle)
    assert abs(window_admittance(factors, "pedestal")) < 1e-12
    loop = BACK + 2e-3 + parallel(GROUND, 40 + ROD) + 1e-3
    assert window_admittance(factors, "pedestal", [("b.N", "b.G", 2e-3)]) == pytest.approx(1 / loop, rel=1e-9)
    assert window_admittance(factor(with_branches(idle, Branch("bond", "b.N", "b.G", 2e-3, "bond", "x"))), "pedestal") == pytest.approx(
        1 / loop
    )


def test_an_empty_window() -> None:
    """A sensor whose branches are all open has no residual and no admittance."""
    factors = factor(without_branches(one_boat(), ["hot", "back"]))
    assert factors.solution().residual("pedestal") == 0
    assert window_admittance(factors, "pedestal") == 0


def test_crossing_directions() -> None:
    """Current out of the zone counts as positive whichever way its branch was drawn."""
    leak = Branch("leak", "b.L", "b.G", 2000, "leak", "heater")
    drawn_out = one_boat(leak)
    drawn_in = replaced(drawn_out, Branch("ground", "b.G", "s.G", GROUND, "protective", "cord"))
    one, other = ({branch.id: current for branch, current in crossings(each, solve(each), "pedestal")} for each in (drawn_out, drawn_in))
    assert set(one) == {"ground", "hull"}
    assert one["ground"].real > 0.05
    assert other == pytest.approx(one)


# What cannot be solved ---------------------------------------------------------------------------------------------------------------

NOT_A_CIRCUIT_WORD = ("matrix", "singular", "pivot", "unknown")


def test_ideal_sources_in_a_loop() -> None:
    """Ideal sources in a loop are told as that, naming the one that closes it."""
    network = Network(
        50,
        "N",
        (
            Branch("one", "N", "a", 0j, "source", "x", 10),
            Branch("two", "a", "b", 0j, "source", "x", 10),
            Branch("three", "N", "b", 0j, "source", "x", 20),
            Branch("load", "b", "N", 5, "load", "x"),
        ),
    )
    with pytest.raises(NetworkError, match="three: closes a loop of ideal sources") as caught:
        solve(checked(network))
    assert not any(word in caught.value.message for word in NOT_A_CIRCUIT_WORD)


def test_resonance_without_resistance() -> None:
    """Inductance that exactly cancels capacitance around a loop without resistance is told as that, naming where."""
    network = Network(
        50,
        "N",
        (
            Branch("supply", "N", "a", 0j, "source", "x", 10),
            Branch("coil", "a", "b", 2j, "load", "x"),
            Branch("cap", "b", "N", -2j, "load", "x"),
        ),
    )
    with pytest.raises(NetworkError, match="cancel without any resistance") as caught:
        solve(checked(network))
    assert caught.value.details["name"]
    assert not any(word in caught.value.message for word in NOT_A_CIRCUIT_WORD)


def test_resonance_with_resistance() -> None:
    """A coil and a capacitor that cancel in series leave the resistance alone to set the current."""
    network = Network(
        50,
        "N",
        (
            Branch("supply", "N", "a", 5, "source", "x", 10),
            Branch("coil", "a", "b", 20j, "load", "x"),
            Branch("cap", "b", "N", -20j, "load", "x"),
        ),
    )
    solution = solve(checked(network))
    assert solution.current("coil") == pytest.approx(2)
    assert solution.voltage("b") == pytest.approx(-40j)


def test_shunt_that_resonates() -> None:
    """A shunt that cancels the impedance of its own port has no single current, alone or with others, and says where."""
    network = Network(50, "N", (Branch("coil", "a", "N", 2j, "load", "x"), Branch("other", "b", "N", 5, "load", "x")))
    factors = factor(checked(network))
    probes = [probe_current(factors, [("coil", 1)])]
    for shunts in ([("a", "N", -2j)], [("a", "N", -2j), ("b", "N", 1)]):
        with pytest.raises(NetworkError, match="a to N"):
            sweep(factors, probes, shunts)


def test_unknown_names() -> None:
    """A node, branch or sensor that does not exist is named."""
    factors = factor(one_boat())
    for ask in (
        lambda: factors.solution().voltage("ghost"),
        lambda: factors.solution().current("ghost"),
        lambda: factors.solution().residual("ghost"),
        lambda: probe_residual(factors, "ghost"),
        lambda: probe_current(factors, [("ghost", 1)]),
        lambda: probe_voltage(factors, "ghost", "earth"),
        lambda: sweep(factors, [], [("ghost", "earth", 1)]),
        lambda: crossings(factors.network, factors.solution(), "ghost"),
        lambda: factors.value(Probe((("ghost", 1),))),
    ):
        with pytest.raises(NetworkError, match="ghost: no such"):
            ask()


# Size --------------------------------------------------------------------------------------------------------------------------------


def dock(boats: int) -> Network:
    """A feeder of four conductors that runs past so many boats, every seventh with a bond aboard."""
    branches = [
        Branch("supply1", "s.N", "s.L1", 0.01 + 0.01j, "source", "grid", 120),
        Branch("supply2", "s.N", "s.L2", 0.01 + 0.01j, "source", "grid", -120),
        Branch("main bond", "s.N", "s.G", 1e-3, "bond", "grid"),
        Branch("rod", "s.G", "earth", 10, "water", "grid"),
    ]
    sensors = []
    before = "s"
    for boat in range(boats):
        here, aboard, leg = f"p{boat}", f"b{boat}", ("L1", "L2")[boat % 2]
        branches += [Branch(f"f{boat}{c}", f"{before}.{c}", f"{here}.{c}", 5e-3 + 2e-3j, "line", "feeder") for c in ("L1", "L2", "N", "G")]
        branches += [
            Branch(f"hot{boat}", f"{here}.{leg}", f"{aboard}.L", 0.05, "line", "cord"),
            Branch(f"back{boat}", f"{here}.N", f"{aboard}.N", 0.05, "neutral", "cord"),
            Branch(f"ground{boat}", f"{here}.G", f"{aboard}.G", 0.05, "protective", "cord"),
            Branch(f"load{boat}", f"{aboard}.L", f"{aboard}.N", 10 + boat % 13, "load", "heater"),
            Branch(f"hull{boat}", f"{aboard}.G", "earth", 20 + boat % 17, "water", "boat"),
        ]
        if boat % 7 == 0:
            branches.append(Branch(f"bond{boat}", f"{aboard}.N", f"{aboard}.G", 0.01, "bond", "panel"))
        sensors.append(Sensor(f"p{boat}", (f"hot{boat}", f"back{boat}"), "gfpe_30", frozenset()))
        before = here
    return checked(Network(60, "earth", tuple(branches), tuple(sensors)))


def test_work_grows_with_the_dock() -> None:
    """Eight times the boats make at most twelve times the multipliers: the elimination stays sparse."""

    def multipliers(boats: int) -> int:
        return sum(len(step.multipliers) for step in factor(dock(boats))._triangle.steps)

    assert multipliers(160) <= 12 * multipliers(20)


def test_a_long_dock_keeps_the_current_law() -> None:
    """On a dock of 160 boats and 1,100 nodes what comes back to the source, by wire and water, is what left it."""
    network = dock(160)
    solution = solve(network)
    away = sum(solution.current(each) for each in ("main bond", "supply1", "supply2", "f0N"))
    assert abs(solution.current("supply1")) > 100
    assert abs(away) < 1e-9
    assert abs(sum(solution.current(f"hull{boat}") for boat in range(160)) + solution.current("rod")) < 1e-9
