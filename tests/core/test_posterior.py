"""Posterior: exact Bayes, sums per cause, groups, ratios and misfits."""

from __future__ import annotations

import math
from fractions import Fraction
from typing import TYPE_CHECKING

import pytest
from hypothesis import given
from hypothesis import strategies as st

from strayline.posterior import (
    Hypotheses,
    InferenceError,
    cause_marginal,
    groups,
    hypotheses_of,
    likelihood_ratios,
    misfit,
    posterior,
    predictions,
    total_variation,
    update,
)

if TYPE_CHECKING:
    import random


@st.composite
def cases(draw) -> tuple[Hypotheses, list[list[float]]]:
    """Hypotheses of two to four causes in any order, and up to six soft likelihoods over them."""
    causes = ["bond", "leak", *draw(st.lists(st.sampled_from(["bond", "leak", "cord", "load"]), max_size=10))]
    soft = st.floats(0.001, 0.999)
    row = st.lists(soft, min_size=len(causes), max_size=len(causes))
    return hypotheses_of(causes, draw(row)), draw(st.lists(row, max_size=6))


def two_causes() -> Hypotheses:
    """A bond with one hypothesis and a leak with two, equally likely causes."""
    return hypotheses_of(["bond", "leak", "leak"], [2, 1, 1])


@given(cases(), st.randoms(use_true_random=False))
def test_order_of_reports_changes_nothing(case: tuple[Hypotheses, list[list[float]]], shuffler: random.Random) -> None:
    """Reports in any order give the same posterior to the last bit."""
    hypotheses, likelihoods = case
    shuffled = likelihoods[:]
    shuffler.shuffle(shuffled)
    assert posterior(hypotheses, shuffled) == posterior(hypotheses, likelihoods)


@given(cases())
def test_posterior_is_bayes_in_rational_numbers(case: tuple[Hypotheses, list[list[float]]]) -> None:
    """The posterior equals prior times likelihoods, normalised, computed in exact fractions."""
    hypotheses, likelihoods = case
    exact = [Fraction(prior) * math.prod(Fraction(row[index]) for row in likelihoods) for index, prior in enumerate(hypotheses.prior)]
    assert posterior(hypotheses, likelihoods) == pytest.approx([float(value / sum(exact)) for value in exact], rel=1e-12)


@given(cases())
def test_one_report_at_a_time(case: tuple[Hypotheses, list[list[float]]]) -> None:
    """Updating report by report ends where the posterior of all reports does."""
    hypotheses, likelihoods = case
    weights = list(hypotheses.prior)
    for likelihood in likelihoods:
        weights = update(weights, likelihood)
        assert math.fsum(weights) == pytest.approx(1, abs=1e-12)
    assert weights == pytest.approx(posterior(hypotheses, likelihoods), rel=1e-11)


@given(cases(), st.floats(0.001, 1))
def test_dont_know_changes_nothing(case: tuple[Hypotheses, list[list[float]]], flat: float) -> None:
    """A report as likely under every hypothesis leaves the posterior where it was."""
    hypotheses, likelihoods = case
    unknown = [flat] * len(hypotheses.prior)
    assert posterior(hypotheses, [*likelihoods, unknown]) == pytest.approx(posterior(hypotheses, likelihoods), rel=1e-12)


def test_a_thousand_reports_do_not_underflow() -> None:
    """A thousand improbable reports still leave a distribution: 1000 x ln 0.001 lies far below the smallest float."""
    hypotheses = two_causes()
    weights = posterior(hypotheses, [[0.001, 0.001, 0.00099]] * 1000)
    assert math.fsum(weights) == pytest.approx(1)
    assert weights[0] / weights[1] == pytest.approx(2, rel=1e-9)
    assert weights[2] / weights[1] == pytest.approx(0.99**1000, rel=1e-9)


def test_a_report_no_hypothesis_allows() -> None:
    """A report impossible under every hypothesis is an error with a name, never a division by zero."""
    hypotheses = two_causes()
    with pytest.raises(InferenceError, match="no hypothesis allows") as caught:
        posterior(hypotheses, [[1, 0, 0], [0, 1, 1]])
    assert caught.value.details == {"reports": 2}
    with pytest.raises(InferenceError, match="no hypothesis allows"):
        update(hypotheses.prior, [0, 0, 0])
    with pytest.raises(InferenceError, match="no hypothesis allows"):
        update(hypotheses.prior, [math.nan, 1, 1])


def test_lengths_must_agree() -> None:
    """A likelihood with too few numbers is refused rather than cut short."""
    hypotheses = two_causes()
    with pytest.raises(InferenceError, match="one number per hypothesis"):
        posterior(hypotheses, [[1, 1]])
    with pytest.raises(InferenceError, match="one number per hypothesis"):
        update(hypotheses.prior, [1, 1])


@pytest.mark.parametrize("weights", [[1, 0], [1, -1], [1, math.nan], [1, math.inf], [0, 0]])
def test_prior_of_zero_is_refused(weights: list[float]) -> None:
    """No hypothesis may be ruled out, or be anything but a finite weight, before the first report."""
    with pytest.raises(InferenceError):
        hypotheses_of(["bond", "leak"], weights)


def test_unfinished_hypotheses_are_refused() -> None:
    """No hypotheses, a prior that does not sum to one, and a cause without hypotheses are refused."""
    with pytest.raises(InferenceError):
        hypotheses_of([], [])
    with pytest.raises(InferenceError):
        Hypotheses(("bond",), (0,), (0.5,))
    with pytest.raises(InferenceError):
        Hypotheses(("bond", "leak"), (0, 0), (0.5, 0.5))


def test_causes_keep_their_order() -> None:
    """Causes stand in order of first appearance, whatever the order of their hypotheses."""
    hypotheses = hypotheses_of(["leak", "bond", "leak"], [1, 2, 5])
    assert hypotheses.causes == ("leak", "bond")
    assert cause_marginal(hypotheses, hypotheses.prior) == pytest.approx({"leak": 6 / 8, "bond": 2 / 8})


@given(cases())
def test_causes_share_all_probability(case: tuple[Hypotheses, list[list[float]]]) -> None:
    """The probabilities of the causes sum to one."""
    hypotheses, likelihoods = case
    assert math.fsum(cause_marginal(hypotheses, posterior(hypotheses, likelihoods)).values()) == pytest.approx(1, abs=1e-12)


def test_prediction_of_a_cause_is_the_mean_over_its_hypotheses() -> None:
    """A cause predicts the weighted mean of what its own hypotheses predict, and its prior mean once its weight is gone."""
    hypotheses = hypotheses_of(["bond", "leak", "leak"], [2, 3, 1])
    table = {"trips": [0.9, 0.8, 0.4], "holds": [0.1, 0.2, 0.6]}
    assert predictions(hypotheses, [0.5, 0.1, 0.4], table)[1] == pytest.approx(((0.08 + 0.16) / 0.5, (0.02 + 0.24) / 0.5))
    assert predictions(hypotheses, [1, 0, 0], table)[1] == pytest.approx(((2.4 + 0.4) / 4, (0.6 + 0.6) / 4))


def test_total_variation_ends() -> None:
    """The same distribution is at distance 0, one with nothing in common at distance 1."""
    assert total_variation([0.5, 0.5], [0.5, 0.5]) == 0
    assert total_variation([1, 0, 0], [0, 0.5, 0.5]) == 1


def test_groups_are_split_by_any_one_test() -> None:
    """Causes alike on every test form a group; a single test that differs by more than the limit, not just by it, splits it."""
    hypotheses = hypotheses_of(["bond", "leak", "load"], [5, 3, 2])
    alike = {"trips": [0.9, 0.9, 0.1], "holds": [0.1, 0.1, 0.9]}
    apart = {"trips": [0.9, 0.8, 0.1], "holds": [0.1, 0.2, 0.9]}
    assert groups(hypotheses, hypotheses.prior, [alike]) == [("bond", "leak"), ("load",)]
    assert groups(hypotheses, hypotheses.prior, [alike, apart]) == [("bond",), ("leak",), ("load",)]
    assert groups(hypotheses, hypotheses.prior, [alike, apart], limit=0.11) == [("bond", "leak"), ("load",)]
    half = {"trips": [0.75, 0.25, 0.25], "holds": [0.25, 0.75, 0.75]}
    assert groups(two_causes(), two_causes().prior, [half], limit=0.5) == [("bond", "leak")]


def test_nothing_separates_without_tests() -> None:
    """With no test left all causes are one group, likeliest first."""
    hypotheses = hypotheses_of(["bond", "leak", "load"], [2, 3, 5])
    assert groups(hypotheses, hypotheses.prior, []) == [("load", "leak", "bond")]


def test_no_group_holds_a_separable_pair() -> None:
    """A chain of near neighbours does not pull its two ends into one group."""
    hypotheses = hypotheses_of(["a", "b", "c"], [3, 4, 2])
    chain = {"trips": [0.50, 0.54, 0.58], "holds": [0.50, 0.46, 0.42]}
    assert groups(hypotheses, hypotheses.prior, [chain]) == [("b", "a"), ("c",)]


@given(cases())
def test_groups_are_a_partition(case: tuple[Hypotheses, list[list[float]]]) -> None:
    """Every cause is in exactly one group, and the groups come in order of their likeliest cause."""
    hypotheses, rows = case
    tables = [{"trips": row, "holds": [1 - value for value in row]} for row in rows]
    found = groups(hypotheses, hypotheses.prior, tables)
    marginal = cause_marginal(hypotheses, hypotheses.prior)
    assert sorted(cause for group in found for cause in group) == sorted(hypotheses.causes)
    assert [group[0] for group in found] == sorted((group[0] for group in found), key=lambda cause: -marginal[cause])


@given(cases())
def test_ratio_is_the_change_of_odds(case: tuple[Hypotheses, list[list[float]]]) -> None:
    """The likelihood ratio of a report is the odds of the cause after it over the odds before it."""
    hypotheses, likelihoods = case
    for likelihood in likelihoods:
        before = cause_marginal(hypotheses, hypotheses.prior)
        after = cause_marginal(hypotheses, update(hypotheses.prior, likelihood))
        for cause in hypotheses.causes:
            rest_before = sum(value for other, value in before.items() if other != cause)
            rest_after = sum(value for other, value in after.items() if other != cause)
            expected = (after[cause] / rest_after) / (before[cause] / rest_before)
            assert likelihood_ratios(hypotheses, hypotheses.prior, likelihood)[cause] == pytest.approx(expected, rel=1e-9)


def test_ratio_at_its_ends() -> None:
    """A report only the cause allows counts infinitely for it, one it forbids counts zero, and without a rival it says nothing."""
    hypotheses = two_causes()
    assert likelihood_ratios(hypotheses, hypotheses.prior, [1, 0, 0])["bond"] == math.inf
    assert likelihood_ratios(hypotheses, hypotheses.prior, [0, 1, 0])["bond"] == 0
    assert likelihood_ratios(hypotheses, [1, 0, 0], [1, 1, 1])["bond"] == 1
    assert likelihood_ratios(hypotheses, hypotheses.prior, [0, 0, 0])["bond"] == 1


def test_misfits_of_the_leader_alone() -> None:
    """Only reports that the leading cause makes less than half as likely as a flat guess are misfits."""
    hypotheses = hypotheses_of(["bond", "leak"], [9, 1])
    likelihoods = [[0.9, 0.01], [0.24, 0.9], [0.26, 0.9], [0.2, 0.9], [0.1, 0.9]]
    assert misfit(hypotheses, hypotheses.prior, likelihoods, [2, 2, 2, 3, 3]) == (1, 4)
    assert misfit(two_causes(), two_causes().prior, [[0.25, 0.9, 0.9]], [2]) == ()


def test_misfit_takes_the_leaders_best_side() -> None:
    """A report that one severity of the leader explains well is no misfit once that severity carries the weight."""
    hypotheses = hypotheses_of(["leak", "leak", "bond"], [5, 4, 1])
    report = [0.01, 0.9, 0.5]
    assert misfit(hypotheses, (0.8, 0.1, 0.1), [report], [2]) == (0,)
    assert misfit(hypotheses, posterior(hypotheses, [report]), [report], [2]) == ()
