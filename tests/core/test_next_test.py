"""The next test: expected information per minute, verification, and when to stop."""

from __future__ import annotations

import math

import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from strayline.next_test import (
    INFORMATIVE_BITS,
    NAMED,
    Candidate,
    Choice,
    choose,
    expected_information,
    leading_group,
    stop,
    verification,
)
from strayline.posterior import Hypotheses, InferenceError, cause_marginal, hypotheses_of, posterior, update


def binary(id_: str, minutes: float, trips: list[float]) -> Candidate:
    """A test that trips or holds."""
    return Candidate(id_, minutes, {"trips": trips, "holds": [1 - value for value in trips]})


def entropy_bits(probabilities) -> float:
    """Shannon's entropy in bits."""
    return -sum(value * math.log2(value) for value in probabilities if value > 0)


@st.composite
def cases(draw) -> tuple[Hypotheses, list[Candidate]]:
    """Hypotheses of two to four causes in any order, and one to four candidates of two or three outcomes."""
    causes = ["bond", "leak", *draw(st.lists(st.sampled_from(["bond", "leak", "cord", "load"]), max_size=8))]
    size = len(causes)

    def row(low: float) -> list[float]:
        return draw(st.lists(st.floats(low, 1), min_size=size, max_size=size))

    candidates = []
    for index in range(draw(st.integers(1, 4))):
        rows = [row(0.0), row(0.001), *([row(0.0)] if draw(st.booleans()) else [])]
        totals = [sum(column) for column in zip(*rows, strict=True)]
        outcomes = {
            f"outcome_{place}": [value / total for value, total in zip(row_, totals, strict=True)] for place, row_ in enumerate(rows)
        }
        candidates.append(Candidate(f"test_{index}", draw(st.floats(0.5, 60)), outcomes))
    return hypotheses_of(causes, row(0.01)), candidates


@given(cases())
def test_information_is_the_expected_drop_in_entropy(case: tuple[Hypotheses, list[Candidate]]) -> None:
    """Expected information equals the entropy of the causes now less its mean after each outcome, and is between 0 and that entropy."""
    hypotheses, candidates = case
    now = entropy_bits(cause_marginal(hypotheses, hypotheses.prior).values())
    for candidate in candidates:
        later = 0.0
        for likelihood in candidate.outcomes.values():
            chance = sum(weight * value for weight, value in zip(hypotheses.prior, likelihood, strict=True))
            if chance > 0:
                later += chance * entropy_bits(cause_marginal(hypotheses, update(hypotheses.prior, likelihood)).values())
        bits = expected_information(hypotheses, hypotheses.prior, candidate)
        assert bits == pytest.approx(now - later, abs=1e-12)
        assert 0 <= bits <= now + 1e-12


@given(cases())
def test_severity_alone_is_no_information(case: tuple[Hypotheses, list[Candidate]]) -> None:
    """A test that tells severities apart but has one mean for every cause brings no bits."""
    hypotheses = hypotheses_of(["bond", "bond", "leak", "leak"], [1, 1, 3, 3])
    assert expected_information(hypotheses, hypotheses.prior, binary("t", 1, [0.9, 0.1, 0.1, 0.9])) == pytest.approx(0, abs=1e-15)


@given(cases())
def test_merging_outcomes_never_adds_information(case: tuple[Hypotheses, list[Candidate]]) -> None:
    """Reporting two outcomes as one never tells more (data-processing inequality)."""
    hypotheses, candidates = case
    for candidate in candidates:
        first, second, *others = candidate.outcomes.values()
        merged = {"either": [a + b for a, b in zip(first, second, strict=True)], **{f"o{index}": row for index, row in enumerate(others)}}
        coarse = expected_information(hypotheses, hypotheses.prior, Candidate("merged", 1, merged))
        assert coarse <= expected_information(hypotheses, hypotheses.prior, candidate) + 1e-12


@given(cases())
def test_one_more_test_never_lowers_the_best(case: tuple[Hypotheses, list[Candidate]]) -> None:
    """Adding a candidate never lowers the bits per minute of the one chosen."""
    hypotheses, candidates = case
    fewer = choose(hypotheses, hypotheses.prior, candidates[:-1])
    more = choose(hypotheses, hypotheses.prior, candidates)
    if fewer is not None:
        assert more is not None
        assert more.bits / more.minutes >= fewer.bits / fewer.minutes


@given(cases())
def test_order_of_candidates_changes_nothing(case: tuple[Hypotheses, list[Candidate]]) -> None:
    """The choice and the verification do not depend on the order of the candidates."""
    hypotheses, candidates = case
    leader = hypotheses.causes[0]
    assert choose(hypotheses, hypotheses.prior, candidates) == choose(hypotheses, hypotheses.prior, candidates[::-1])
    assert verification(hypotheses, hypotheses.prior, candidates, leader) == verification(
        hypotheses, hypotheses.prior, candidates[::-1], leader
    )


def test_minutes_count() -> None:
    """A quick, weaker test goes before a sharp, long one when it brings more bits per minute."""
    hypotheses = hypotheses_of(["bond", "leak"], [1, 1])
    sharp, quick = binary("sharp", 30, [0.99, 0.01]), binary("quick", 2, [0.8, 0.2])
    choice = choose(hypotheses, hypotheses.prior, [sharp, quick])
    assert choice == Choice("quick", expected_information(hypotheses, hypotheses.prior, quick), 2)
    assert choose(hypotheses, hypotheses.prior, [binary("sharp", 2, [0.99, 0.01]), quick]).id == "sharp"


def test_ties_go_by_id() -> None:
    """Two tests that bring the same are taken in the order of their ids."""
    hypotheses = hypotheses_of(["bond", "leak"], [1, 1])
    assert choose(hypotheses, hypotheses.prior, [binary("b", 2, [0.9, 0.1]), binary("a", 2, [0.9, 0.1])]).id == "a"


def test_nothing_worth_doing() -> None:
    """With no candidate, or none that brings a hundredth of a bit, there is no next test."""
    hypotheses = hypotheses_of(["bond", "leak"], [1, 1])
    faint = binary("faint", 1, [0.52, 0.50])
    assert expected_information(hypotheses, hypotheses.prior, faint) < INFORMATIVE_BITS
    assert choose(hypotheses, hypotheses.prior, []) is None
    assert choose(hypotheses, hypotheses.prior, [faint]) is None


@pytest.mark.parametrize(
    ("minutes", "outcomes"), [(0, {"a": [1]}), (-1, {"a": [1]}), (math.nan, {"a": [1]}), (math.inf, {"a": [1]}), (1, {})]
)
def test_impossible_candidate(minutes: float, outcomes: dict[str, list[float]]) -> None:
    """A test without finite, positive minutes or without outcomes is refused."""
    with pytest.raises(InferenceError, match="a test takes some minutes"):
        Candidate("t", minutes, outcomes)


def test_outcomes_that_do_not_sum_to_one() -> None:
    """Outcome probabilities that do not sum to one are refused by the name of the test."""
    hypotheses = hypotheses_of(["bond", "leak"], [1, 1])
    with pytest.raises(InferenceError) as caught:
        expected_information(hypotheses, hypotheses.prior, Candidate("crooked", 1, {"trips": [0.9, 0.1], "holds": [0.1, 0.8]}))
    assert caught.value.details["test"] == "crooked"


def test_verification_looks_where_the_leader_differs_most() -> None:
    """The verifying test is the one on which the leader is furthest from the mean of its rivals, whatever it costs."""
    hypotheses = hypotheses_of(["bond", "leak", "load"], [90, 9, 1])
    among_rivals = binary("among_rivals", 1, [0.9, 0.9, 0.01])
    against_leader = binary("against_leader", 60, [0.9, 0.1, 0.1])
    assert verification(hypotheses, hypotheses.prior, [among_rivals, against_leader], "bond") == "against_leader"
    assert verification(hypotheses, hypotheses.prior, [among_rivals, against_leader], "load") == "among_rivals"
    assert verification(hypotheses, hypotheses.prior, [], "bond") is None
    assert verification(hypotheses, [1, 0, 0], [against_leader], "bond") is None
    assert verification(hypotheses, [0, 0.5, 0.5], [against_leader], "bond") is None


@given(cases(), st.integers(0, 9), st.integers(0, 9))
def test_never_stops_while_a_test_may_still_tell(case: tuple[Hypotheses, list[Candidate]], done: int, misfits: int) -> None:
    """Below 90 % the search goes on exactly as long as there is a test worth doing."""
    hypotheses, candidates = case
    assume(max(cause_marginal(hypotheses, hypotheses.prior).values()) < NAMED)
    goes_on = stop(hypotheses, hypotheses.prior, candidates, done, misfits) is None
    assert goes_on == (choose(hypotheses, hypotheses.prior, candidates) is not None)


SHARP = binary("sharp", 1, [0.9, 0.1])
BLIND = binary("blind", 1, [0.9, 0.9])


@pytest.mark.parametrize(
    ("share", "candidates", "done", "misfits", "verdict"),
    [
        (0.95, [SHARP], 1, 0, None),
        (0.95, [SHARP], 2, 0, "named"),
        (0.95, [BLIND], 0, 0, "named"),
        (0.95, [], 1, 1, "named"),
        (0.90, [SHARP], 2, 0, "named"),
        (0.89, [SHARP], 9, 0, None),
        (0.95, [SHARP], 1, 1, None),
        (0.95, [SHARP], 2, 1, "named"),
        (0.95, [SHARP], 2, 2, "unknown"),
        (0.95, [SHARP], 1, 2, "unknown"),
        (0.60, [BLIND], 5, 2, "unknown"),
        (0.60, [BLIND], 5, 1, "group"),
    ],
)
def test_when_to_stop(share: float, candidates: list[Candidate], done: int, misfits: int, verdict: str | None) -> None:
    """A name needs 90 % and two tests while one could still tell; two misfits make it unknown; two inseparable causes are a group."""
    hypotheses = hypotheses_of(["bond", "leak"], [share, 1 - share])
    assert stop(hypotheses, hypotheses.prior, candidates, done, misfits) == verdict


def test_nothing_now_is_not_a_finding() -> None:
    """When the leading cause is that nothing leaks now, stopping says so instead of naming a fault."""
    hypotheses = hypotheses_of(["nothing_now", "leak"], [19, 1])
    assert stop(hypotheses, hypotheses.prior, [], 2, 0) == "nothing_now"


def test_a_group_has_at_most_three_likely_causes() -> None:
    """A group is the fewest inseparable causes that reach 90 %; four of them are no answer."""
    three = hypotheses_of(["a", "b", "c", "d"], [30, 40, 25, 5])
    four = hypotheses_of(["a", "b", "c", "d"], [28, 26, 24, 22])
    assert leading_group(three, three.prior, []) == ("b", "a", "c")
    assert stop(three, three.prior, [], 3, 0) == "group"
    assert leading_group(four, four.prior, []) == ()
    assert stop(four, four.prior, [], 3, 0) == "unknown"


def test_separable_causes_are_no_group() -> None:
    """Causes that an allowed test tells apart are never offered as a group, however likely together."""
    hypotheses = hypotheses_of(["bond", "leak", "load"], [50, 45, 5])
    assert leading_group(hypotheses, hypotheses.prior, [binary("blind", 1, [0.9, 0.9, 0.1])]) == ("bond", "leak")
    assert leading_group(hypotheses, hypotheses.prior, [binary("sharp", 1, [0.9, 0.1, 0.1])]) == ()


def test_asking_until_it_stops_finds_the_cause() -> None:
    """With sharp tests the loop choose, report, update ends at the true cause for each of four causes."""
    hypotheses = hypotheses_of(["a", "b", "c", "d"], [4, 3, 2, 1])
    candidates = [binary("low_bit", 2, [0.02, 0.98, 0.02, 0.98]), binary("high_bit", 3, [0.02, 0.02, 0.98, 0.98])]
    for truth, name in enumerate(hypotheses.causes):
        reports: list[list[float]] = []
        left = candidates[:]
        while stop(hypotheses, weights := posterior(hypotheses, reports), left, len(reports), 0) is None:
            choice = choose(hypotheses, weights, left)
            candidate = next(candidate for candidate in left if candidate.id == choice.id)
            left.remove(candidate)
            reports.append(max(candidate.outcomes.values(), key=lambda row: row[truth]))
        marginal = cause_marginal(hypotheses, weights)
        assert stop(hypotheses, weights, left, len(reports), 0) == "named"
        assert max(marginal, key=marginal.get) == name
