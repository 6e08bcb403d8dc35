"""Exact Bayes over hypotheses, the sums per cause, and what cannot be told apart. Knows no ohms.

A hypothesis is one cause at one severity under one set of unknown facts. A likelihood is a sequence with one number per
hypothesis: the probability of what was reported, given that hypothesis. Logarithms and totals are summed exactly (math.fsum);
sums over the hypotheses of one cause are plain, because they are the inner loop of every step.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from operator import mul, sub
from typing import TYPE_CHECKING

from strayline.errors import StraylineError

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping, Sequence

INSEPARABLE = 0.05  # total variation: two outcome distributions this close are not told apart by one answer
MISFIT = 0.5  # an answer fits badly below this share of what a flat guess over its outcomes would give


class InferenceError(StraylineError):
    """Probabilities that cannot be: a weight of zero, lengths that differ, reports no hypothesis allows."""

    code = "inference"


@dataclass(frozen=True, slots=True)
class Hypotheses:
    """All hypotheses of a case.

    causes   -- cause ids, each once
    cause_of -- for every hypothesis the index of its cause
    prior    -- for every hypothesis its probability, above 0, summing to 1
    members  -- for every cause the indices of its hypotheses
    runs     -- the same as runs of neighbours, (first, last + 1), over which sums are taken without looking indices up
    """

    causes: tuple[str, ...]
    cause_of: tuple[int, ...]
    prior: tuple[float, ...]
    members: tuple[tuple[int, ...], ...] = field(init=False, repr=False, compare=False)
    runs: tuple[tuple[tuple[int, int], ...], ...] = field(init=False, repr=False, compare=False)

    def __post_init__(self) -> None:
        """Check the lengths and the prior, and index the hypotheses by cause."""
        if len(self.cause_of) != len(self.prior) or set(self.cause_of) != set(range(len(self.causes))):
            raise InferenceError("every hypothesis has one prior and one cause, and every cause has a hypothesis", causes=list(self.causes))
        if not self.prior or min(self.prior) <= 0.0 or not math.isclose(math.fsum(self.prior), 1.0, rel_tol=1e-9):
            raise InferenceError("every prior is above zero and all of them sum to one", total=math.fsum(self.prior))
        members: list[list[int]] = [[] for _ in self.causes]
        for index, cause in enumerate(self.cause_of):
            members[cause].append(index)
        object.__setattr__(self, "members", tuple(map(tuple, members)))  # the class is frozen: an index, derived once
        object.__setattr__(self, "runs", tuple(map(_runs, members)))


def _runs(indices: Sequence[int]) -> tuple[tuple[int, int], ...]:
    """Rising indices as runs of neighbours."""
    found: list[tuple[int, int]] = []
    for index in indices:
        if found and found[-1][1] == index:
            found[-1] = (found[-1][0], index + 1)
        else:
            found.append((index, index + 1))
    return tuple(found)


def hypotheses_of(causes: Sequence[str], weights: Sequence[float]) -> Hypotheses:
    """Hypotheses from one cause id and one weight (above 0, any scale) for each; causes in order of first appearance."""
    total = math.fsum(weights)
    if not 0.0 < total < math.inf:
        raise InferenceError("the weights have a positive, finite sum", total=str(total))
    names = tuple(dict.fromkeys(causes))
    place = {name: index for index, name in enumerate(names)}
    return Hypotheses(names, tuple(place[cause] for cause in causes), tuple(weight / total for weight in weights))


def _normalised(weights: Sequence[float]) -> list[float]:
    total = math.fsum(weights)
    if not 0.0 < total < math.inf:
        raise InferenceError("no hypothesis allows what was reported", total=str(total))
    return [weight / total for weight in weights]


def update(weights: Sequence[float], likelihood: Sequence[float]) -> list[float]:
    """Weights after one report: product, renormalised. Raises InferenceError if no hypothesis allows the report."""
    if len(weights) != len(likelihood):
        raise InferenceError("a likelihood has one number per hypothesis", expected=len(weights), found=len(likelihood))
    return _normalised(list(map(mul, weights, likelihood)))


def posterior(hypotheses: Hypotheses, likelihoods: Iterable[Sequence[float]]) -> tuple[float, ...]:
    """Probability of every hypothesis after all reports, the same to the last bit in whatever order they stand.

    Sums logarithms, so that no number of reports underflows. Raises InferenceError if no hypothesis allows them all.
    """
    logs = [[math.log(value) if value > 0.0 else -math.inf for value in likelihood] for likelihood in (hypotheses.prior, *likelihoods)]
    if any(len(row) != len(hypotheses.prior) for row in logs):
        raise InferenceError("a likelihood has one number per hypothesis", expected=len(hypotheses.prior))
    totals = [math.fsum(column) for column in zip(*logs, strict=True)]
    highest = max(totals)
    if highest == -math.inf:
        raise InferenceError("no hypothesis allows what was reported", reports=len(logs) - 1)
    return tuple(_normalised([math.exp(total - highest) for total in totals]))


def by_cause(hypotheses: Hypotheses, values: Sequence[float]) -> list[float]:
    """Sum of one value per hypothesis over the hypotheses of each cause, in the order of `hypotheses.causes`."""
    return [math.fsum(sum(values[first:last]) for first, last in runs) for runs in hypotheses.runs]


def joint_by_cause(hypotheses: Hypotheses, weights: Sequence[float], likelihood: Sequence[float]) -> list[float]:
    """P(cause and report) for each cause, in the order of `hypotheses.causes`."""
    return [math.fsum(sum(map(mul, weights[first:last], likelihood[first:last])) for first, last in runs) for runs in hypotheses.runs]


def cause_marginal(hypotheses: Hypotheses, weights: Sequence[float]) -> dict[str, float]:
    """Probability of each cause: the sum over its hypotheses."""
    return dict(zip(hypotheses.causes, by_cause(hypotheses, weights), strict=True))


def total_variation(one: Sequence[float], other: Sequence[float]) -> float:
    """Half the summed difference of two distributions over the same outcomes: 0 the same, 1 nothing in common."""
    return math.fsum(map(abs, map(sub, one, other))) / 2.0


def predictions(hypotheses: Hypotheses, weights: Sequence[float], outcomes: Mapping[str, Sequence[float]]) -> list[tuple[float, ...]]:
    """For each cause its outcome distribution: the mean over its own hypotheses under `weights`.

    A cause whose weights have all vanished is averaged under its prior.
    """
    marginal = by_cause(hypotheses, weights)
    if min(marginal) <= 0.0:
        weights = [
            weight if marginal[cause] > 0.0 else prior
            for weight, prior, cause in zip(weights, hypotheses.prior, hypotheses.cause_of, strict=True)
        ]
        marginal = by_cause(hypotheses, weights)
    columns = (joint_by_cause(hypotheses, weights, likelihood) for likelihood in outcomes.values())
    return [tuple(value / total for value in row) for total, row in zip(marginal, zip(*columns, strict=True), strict=True)]


def groups(
    hypotheses: Hypotheses, weights: Sequence[float], outcome_tables: Iterable[Mapping[str, Sequence[float]]], limit: float = INSEPARABLE
) -> list[tuple[str, ...]]:
    """Partition of the causes into those no test tells apart, likeliest first.

    Two causes are told apart by a test if the total variation of their predicted outcomes exceeds `limit`. Every pair within
    a group is inseparable on every table. That relation is not transitive, so the partition is made in order of probability
    (ties in the order of `hypotheses.causes`): each cause joins the first group it fits wholly, or starts one.
    """
    tables = [predictions(hypotheses, weights, outcomes) for outcomes in outcome_tables]
    marginal = by_cause(hypotheses, weights)
    found: list[list[int]] = []
    for cause in sorted(range(len(marginal)), key=lambda index: -marginal[index]):
        for group in found:
            if all(total_variation(table[cause], table[member]) <= limit for table in tables for member in group):
                group.append(cause)
                break
        else:
            found.append([cause])
    return [tuple(hypotheses.causes[cause] for cause in group) for group in found]


def likelihood_ratios(hypotheses: Hypotheses, weights_before: Sequence[float], likelihood: Sequence[float]) -> dict[str, float]:
    """For each cause how many times as likely the report is under it as under all the rest: P(report | cause) / P(report | not cause).

    Each side is averaged under `weights_before`. 1 when one side has no weight left to average over, infinite when only the
    cause allows the report.
    """
    marginal = by_cause(hypotheses, weights_before)
    joint = joint_by_cause(hypotheses, weights_before, likelihood)
    found = {}
    for place, cause in enumerate(hypotheses.causes):
        rest = math.fsum((*marginal[:place], *marginal[place + 1 :]))
        rest_shared = math.fsum((*joint[:place], *joint[place + 1 :]))
        if marginal[place] <= 0.0 or rest <= 0.0:
            found[cause] = 1.0
        elif rest_shared <= 0.0:
            found[cause] = math.inf if joint[place] > 0.0 else 1.0
        else:
            found[cause] = (joint[place] / marginal[place]) / (rest_shared / rest)
    return found


def misfit(
    hypotheses: Hypotheses, weights: Sequence[float], likelihoods: Sequence[Sequence[float]], outcome_counts: Sequence[int]
) -> tuple[int, ...]:
    """Indices of the reports that the leading cause explains badly.

    A report with k possible outcomes is explained badly when its probability, averaged over the leader's own hypotheses under
    `weights` (after all reports, so in the leader's favour), is less than MISFIT of the flat 1/k.
    """
    marginal = by_cause(hypotheses, weights)
    leader = marginal.index(max(marginal))
    return tuple(
        index
        for index, (likelihood, count) in enumerate(zip(likelihoods, outcome_counts, strict=True))
        if joint_by_cause(hypotheses, weights, likelihood)[leader] / marginal[leader] < MISFIT / count
    )
