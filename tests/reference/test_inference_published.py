"""Inference against published laws, tables and textbook examples; each check names its source."""

from __future__ import annotations

import math
from itertools import permutations, product

import pytest

from strayline.devices import DEVICES, class_a_longest_break_s, inrush_probability, overcurrent_probability
from strayline.next_test import Candidate, choose, expected_information
from strayline.posterior import cause_marginal, hypotheses_of, posterior


@pytest.mark.parametrize(
    ("residual_ma", "seconds"), [(6, 5.594), (10, 2.694), (20, 1.000), (30, 0.560), (50, 0.270), (100, 0.100), (264, 0.02498)]
)
def test_class_a_time_rows(residual_ma: float, seconds: float) -> None:
    """The longest break time of a Class A device follows UL 943's T = (20 / I)^1.43, which ends at the familiar 25 ms at 264 mA."""
    assert class_a_longest_break_s(residual_ma) == pytest.approx(seconds, rel=2e-3)
    assert DEVICES["class_a"].break_time_s(residual_ma) == class_a_longest_break_s(residual_ma)


@pytest.mark.parametrize(
    ("id_", "multiple", "seconds"),
    [("rcd_30", 1, 0.3), ("rcd_30", 2, 0.15), ("rcd_30", 5, 0.04), ("rcd_100_s", 1, 0.5), ("rcd_100_s", 2, 0.2), ("rcd_100_s", 5, 0.15)],
)
def test_rcd_break_times(id_: str, multiple: float, seconds: float) -> None:
    """The longest break times of general and selective RCDs at 1, 2 and 5 times the rating are those of IEC 61008-1 table 1."""
    device = DEVICES[id_]
    assert device.break_time_s(multiple * device.rated_ma) == seconds
    assert device.break_time_s(multiple * device.rated_ma * 1.5) == seconds


def test_elci_time() -> None:
    """An on-board leakage device opens within 100 ms at 30 mA (ABYC E-11), 5.6 times as fast as Class A must there (UL 943)."""
    elci = DEVICES["elci_30"]
    assert elci.break_time_s(30) == 0.1
    assert class_a_longest_break_s(30) / elci.break_time_s(30) == pytest.approx(5.6, rel=1e-3)


@pytest.mark.parametrize("rated_a", [16, 32, 50])
def test_iec_60898_thermal(rated_a: float) -> None:
    """A breaker carries 1.13 times its rating for an hour and opens within an hour at 1.45 times (IEC 60898-1)."""
    assert overcurrent_probability(rated_a, 1.13 * rated_a, 60, "c") < 0.05
    assert overcurrent_probability(rated_a, 1.45 * rated_a, 60, "c") > 0.95


@pytest.mark.parametrize(("rated_a", "minutes"), [(20, 2), (30, 2), (50, 4)])
def test_ul_489_thermal(rated_a: float, minutes: float) -> None:
    """A breaker carries its rating, opens within an hour at 135 % and within 2 or 4 minutes at 200 % (UL 489, from memory)."""
    assert overcurrent_probability(rated_a, rated_a, 24 * 60, "na") < 0.05
    assert overcurrent_probability(rated_a, 1.35 * rated_a, 60, "na") > 0.95
    assert overcurrent_probability(rated_a, 2 * rated_a, minutes, "na") > 0.95


@pytest.mark.parametrize(("curve", "holds", "opens"), [("b", 3, 5), ("c", 5, 10), ("d", 10, 20)])
def test_iec_60898_magnetic(curve: str, holds: float, opens: float) -> None:
    """The instantaneous release of a B, C or D breaker holds at 3, 5 or 10 times its rating and opens at 5, 10 or 20 (IEC 60898-1)."""
    assert inrush_probability(16, 16 * holds, curve) < 0.05
    assert inrush_probability(16, 16 * opens, curve) > 0.95
    assert 0.4 < inrush_probability(16, 16 * math.sqrt(holds * opens), curve) < 0.6


def test_shannon_entropy() -> None:
    """A test that names each of four causes of 1/2, 1/4, 1/8, 1/8 brings their whole entropy, 1.75 bits (Shannon 1948)."""
    hypotheses = hypotheses_of("abcd", [4, 2, 1, 1])
    outcomes = {name: [float(name == cause) for cause in "abcd"] for name in "abcd"}
    assert expected_information(hypotheses, hypotheses.prior, Candidate("tell", 1, outcomes)) == pytest.approx(1.75, abs=1e-12)


def test_information_of_one_binary_test() -> None:
    """Prior .4 .3 .2 .1 with likelihoods .9 .1 .5 .05 brings h(.495) less the mean of the four binary entropies, 0.442991 bits."""
    prior, trips = [0.4, 0.3, 0.2, 0.1], [0.9, 0.1, 0.5, 0.05]
    hypotheses = hypotheses_of("abcd", prior)
    candidate = Candidate("t", 1, {"trips": trips, "holds": [1 - value for value in trips]})

    def h(p: float) -> float:
        return -p * math.log2(p) - (1 - p) * math.log2(1 - p)

    by_hand = h(0.495) - sum(p * h(q) for p, q in zip(prior, trips, strict=True))
    bits = expected_information(hypotheses, hypotheses.prior, candidate)
    assert bits == pytest.approx(by_hand, abs=1e-12)
    assert bits == pytest.approx(0.442991, rel=1e-5)


def test_bayes_textbook() -> None:
    """A cause of prior .1 is .5135 likely after a positive test of sensitivity .95 and specificity .9: .095 / .185 (Bayes)."""
    assert posterior(hypotheses_of(["cause", "rest"], [0.1, 0.9]), [[0.95, 0.1]])[0] == pytest.approx(19 / 37, rel=1e-12)


def expected_cost(order, p, observe, repair) -> float:
    """Expected cost of inspecting in `order` until the fault is found and repaired (Heckerman, Breese and Rommelse 1995)."""
    cost, still = 0.0, 1.0
    for item in order:
        cost += still * observe[item] + p[item] * repair[item]
        still -= p[item]
    return cost


def order_chosen(p: list[float], observe: list[float]) -> tuple[int, ...]:
    """Order in which `choose` inspects the parts, each inspection telling surely whether that part is the faulty one."""
    names = [str(item) for item in range(len(p))]
    hypotheses = hypotheses_of(names, p)
    found: list[list[float]] = [[float(item == other) for other in range(len(p))] for item in range(len(p))]
    inspections = [
        Candidate(names[item], observe[item], {"here": found[item], "not_here": [1 - value for value in found[item]]})
        for item in range(len(p))
    ]
    order: list[int] = []
    while len(order) < len(p):
        weights = posterior(hypotheses, [inspections[item].outcomes["not_here"] for item in order])
        choice = choose(hypotheses, weights, [candidate for candidate in inspections if int(candidate.id) not in order])
        order.append(min(set(range(len(p))) - set(order)) if choice is None else int(choice.id))
    return tuple(order)


FREE = [0.0] * 4
FOUR = ([0.4, 0.3, 0.2, 0.1], [10.0, 2.0, 5.0, 1.0])
THREE = ([0.5, 0.3, 0.2], [5.0, 1.0, 2.0])


def test_p_over_c_examples() -> None:
    """In Heckerman, Breese and Rommelse's model the least expected costs are 9.7 and 4.9, 28.7 with repairs, found by falling p/C."""
    (p, cost), repair = FOUR, [30.0, 5.0, 20.0, 15.0]
    best = min(permutations(range(4)), key=lambda order: expected_cost(order, p, cost, FREE))
    assert expected_cost(best, p, cost, FREE) == pytest.approx(9.7)
    assert best[:2] == (1, 3)
    assert expected_cost(best, p, cost, repair) == pytest.approx(28.7)
    assert expected_cost((0, 1, 2, 3), p, cost, FREE) == pytest.approx(12.8)
    assert expected_cost((2, 0, 3, 1), p, cost, FREE) == pytest.approx(14.0)
    assert min(expected_cost(order, *THREE, FREE) for order in permutations(range(3))) == pytest.approx(4.9)


@pytest.mark.parametrize(("p", "cost"), [FOUR, THREE])
def test_bits_per_minute_is_nearly_p_over_c(p: list[float], cost: list[float]) -> None:
    """Bits per minute is no cost optimiser, yet costs at most 2 % more than the optimal order and less than likeliest first."""
    least = min(expected_cost(order, p, cost, FREE) for order in permutations(range(len(p))))
    likeliest_first = expected_cost(range(len(p)), p, cost, FREE)
    assert least <= expected_cost(order_chosen(p, cost), p, cost, FREE) + 1e-12 <= 1.02 * least < likeliest_first


@pytest.mark.parametrize(("p", "cost"), [([0.35, 0.15, 0.3, 0.2], [3.0] * 4), ([0.25] * 4, [4.0, 1.0, 3.0, 2.0])])
def test_p_over_c_where_both_agree(p: list[float], cost: list[float]) -> None:
    """With equal costs, or equal probabilities, bits per minute inspects in the optimal order of falling p/C, the last two being a tie."""
    optimal = sorted(range(4), key=lambda item: -p[item] / cost[item])
    chosen = order_chosen(p, cost)
    assert list(chosen[:2]) == optimal[:2]


def polybox() -> tuple[list[frozenset[str]], list[float], dict[str, list[dict[int, float]]]]:
    """The polybox of de Kleer and Williams (1987), A=3 B=2 C=2 D=3 E=3, with F=10 and G=12 measured.

    For each of the 32 sets of broken parts (0.01 each): the set, its prior, and what it says of X, Y and Z (value ->
    probability; a broken part may put out anything, so an undetermined value is spread over the m = 16 values 1 to 16).
    Sets that contradict the measurements have no prediction: an empty one.
    """
    parts = ("m1", "m2", "m3", "a1", "a2")
    anywhere = dict.fromkeys(range(1, 17), 1 / 16)
    sets, priors, says = [], [], {"x": [], "y": [], "z": []}
    for broken in product((False, True), repeat=5):
        bad = frozenset(part for part, is_bad in zip(parts, broken, strict=True) if is_bad)
        x, y, z = (None if part in bad else 6 for part in ("m1", "m2", "m3"))
        consistent = True
        # the two working adders fix what is missing: F = X + Y = 10 and G = Y + Z = 12, twice round the chain
        for _ in range(2):
            if "a1" not in bad:
                if x is not None and y is not None:
                    consistent &= x + y == 10
                x, y = (10 - y if x is None and y is not None else x), (10 - x if y is None and x is not None else y)
            if "a2" not in bad:
                if y is not None and z is not None:
                    consistent &= y + z == 12
                y, z = (12 - z if y is None and z is not None else y), (12 - y if z is None and y is not None else z)
        sets.append(bad)
        priors.append(math.prod(0.01 if part in bad else 0.99 for part in parts))
        for point, value in (("x", x), ("y", y), ("z", z)):
            says[point].append({} if not consistent else anywhere if value is None else {value: 1.0})
    return sets, priors, says


def test_polybox_candidates() -> None:
    """Of 32 fault sets 27 fit; {A1} and {M1} are 99 times as likely as {A2, M2} and {M2, M3}, the other minimal ones (1987 paper)."""
    sets, priors, says = polybox()
    hypotheses = hypotheses_of(["+".join(sorted(bad)) for bad in sets], priors)
    fits = [float(bool(prediction)) for prediction in says["x"]]
    assert sum(fits) == 27
    found = cause_marginal(hypotheses, posterior(hypotheses, [fits]))
    assert found["a1"] == pytest.approx(found["m1"], rel=1e-12)
    assert found["a2+m2"] == pytest.approx(found["m2+m3"], rel=1e-12)
    assert found["a1"] / found["a2+m2"] == pytest.approx(99, rel=1e-9)
    # the 27 sets that fit: every superset of a minimal one, summed by hand over the powers of 1/99
    odds = 1 / 99
    assert found["a1"] == pytest.approx(odds / (2 * odds + 9 * odds**2 + 10 * odds**3 + 5 * odds**4 + odds**5), rel=1e-9)
    minimal = [
        bad for bad, fit in zip(sets, fits, strict=True) if fit and not any(other < bad for other, ok in zip(sets, fits, strict=True) if ok)
    ]
    assert set(minimal) == {frozenset({"a1"}), frozenset({"m1"}), frozenset({"a2", "m2"}), frozenset({"m2", "m3"})}
    assert sum(sorted(found.values())[-4:]) > 0.96


def test_polybox_measures_x_first() -> None:
    """After F=10 and G=12 the most telling point of the polybox is X, then Y, then Z (de Kleer and Williams 1987)."""
    sets, priors, says = polybox()
    hypotheses = hypotheses_of(["+".join(sorted(bad)) for bad in sets], priors)
    weights = posterior(hypotheses, [[float(bool(prediction)) for prediction in says["x"]]])
    # sets that contradict the measurements have no weight left; what they would predict is given as anything
    flat = dict.fromkeys(range(1, 17), 1 / 16)
    points = [
        Candidate(point, 1, {str(value): [(row or flat).get(value, 0.0) for row in rows] for value in range(1, 17)})
        for point, rows in says.items()
    ]
    assert choose(hypotheses, weights, points).id == "x"
    bits = {point.id: expected_information(hypotheses, weights, point) for point in points}
    assert bits["x"] > bits["y"] > bits["z"]
    # by hand from the paper's model: X is 6, 4 or undetermined with these probabilities, the last spread over m = 16 values
    six, four, undetermined = 0.502365, 0.492561, 0.005074
    spread = undetermined / 16
    by_hand = -sum(p * math.log(p) for p in (six + spread, four + spread, *[spread] * 14)) - undetermined * math.log(16)
    assert bits["x"] * math.log(2) == pytest.approx(by_hand, abs=1e-5)
