"""Which test next, and when to stop: expected information about the cause per minute of work.

Candidates are the tests this person may do now; role, tool and safety are filtered before they come here.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from strayline.posterior import (
    Hypotheses,
    InferenceError,
    by_cause,
    cause_marginal,
    groups,
    joint_by_cause,
    total_variation,
)

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

NAMED = 0.90  # probability from which a cause, or a group, is named
INFORMATIVE_BITS = 0.02  # below this a test is not worth proposing
TESTS_BEHIND_A_NAME = 2  # hands-on tests before a cause is named, as long as one more could still tell something
MISFITS_BEFORE_UNKNOWN = 2  # the first misfit is repeated; the second says that no known cause fits
LARGEST_GROUP = 3  # a longer list is no answer
NOTHING_NOW = "nothing_now"  # the one cause that is not a finding but its absence


@dataclass(frozen=True, slots=True)
class Candidate:
    """A test that may be done now.

    minutes  -- of work, above 0
    outcomes -- for each outcome P(outcome | hypothesis), one number per hypothesis, summing to 1 over the outcomes
    """

    id: str
    minutes: float
    outcomes: Mapping[str, Sequence[float]]

    def __post_init__(self) -> None:
        """Refuse a test without minutes or outcomes."""
        if not 0.0 < self.minutes < math.inf or not self.outcomes:
            raise InferenceError("a test takes some minutes and has outcomes", test=self.id, minutes=str(self.minutes))


@dataclass(frozen=True, slots=True)
class Choice:
    """The test to do next, what it is expected to tell (bits about the cause) and its minutes."""

    id: str
    bits: float
    minutes: float


def expected_information(hypotheses: Hypotheses, weights: Sequence[float], candidate: Candidate) -> float:
    """Bits the candidate is expected to tell about the cause (not the severity): the mutual information, at least 0.

    Sum over causes c and outcomes o of P(c,o) log2(P(c,o) / (P(c) P(o))); Shannon 1948. `weights` sum to 1. Raises
    InferenceError where the outcomes' probabilities do not sum to 1.
    """
    joints = [joint_by_cause(hypotheses, weights, likelihood) for likelihood in candidate.outcomes.values()]
    chances = [math.fsum(joint) for joint in joints]
    if not math.isclose(math.fsum(chances), 1.0, rel_tol=1e-6):
        raise InferenceError("the outcomes of a test sum to one", test=candidate.id, total=str(math.fsum(chances)))
    marginal = by_cause(hypotheses, weights)
    bits = math.fsum(
        both * math.log2(both / cause / chance)
        for joint, chance in zip(joints, chances, strict=True)
        for both, cause in zip(joint, marginal, strict=True)
        if both > 0.0
    )
    return max(bits, 0.0)  # rounding may leave a few 1e-17 below


def choose(hypotheses: Hypotheses, weights: Sequence[float], candidates: Sequence[Candidate]) -> Choice | None:
    """The candidate with the most bits per minute, ties by id; None when none brings INFORMATIVE_BITS."""
    choices = [Choice(candidate.id, expected_information(hypotheses, weights, candidate), candidate.minutes) for candidate in candidates]
    worth = [choice for choice in choices if choice.bits >= INFORMATIVE_BITS]
    return min(worth, key=lambda choice: (-choice.bits / choice.minutes, choice.id), default=None)


def verification(hypotheses: Hypotheses, weights: Sequence[float], candidates: Sequence[Candidate], leader: str) -> str | None:
    """Id of the candidate whose outcomes the leader predicts most differently from the rest together, ties by id.

    Difference is total variation; None without candidates, or where either side has no weight.
    """
    place = hypotheses.causes.index(leader)
    marginal = by_cause(hypotheses, weights)
    weight = marginal.pop(place)
    rest = math.fsum(marginal)
    if weight <= 0.0 or rest <= 0.0:
        return None

    def difference(candidate: Candidate) -> float:
        joints = [joint_by_cause(hypotheses, weights, likelihood) for likelihood in candidate.outcomes.values()]
        mine = [joint.pop(place) / weight for joint in joints]
        return total_variation(mine, [math.fsum(joint) / rest for joint in joints])

    ranked = sorted(((-difference(candidate), candidate.id) for candidate in candidates), key=lambda pair: pair)
    return ranked[0][1] if ranked else None


def leading_group(hypotheses: Hypotheses, weights: Sequence[float], candidates: Sequence[Candidate]) -> tuple[str, ...]:
    """The fewest causes, likeliest first, that together reach NAMED and that no candidate tells apart.

    Empty when the leader's group falls short of NAMED or needs more than LARGEST_GROUP causes to reach it.
    """
    marginal = cause_marginal(hypotheses, weights)
    group = groups(hypotheses, weights, [candidate.outcomes for candidate in candidates])[0]
    for size in range(1, LARGEST_GROUP + 1):
        if math.fsum(marginal[cause] for cause in group[:size]) >= NAMED:
            return group[:size]
    return ()


def stop(
    hypotheses: Hypotheses, weights: Sequence[float], candidates: Sequence[Candidate], physical_tests_done: int, misfits: int
) -> str | None:
    """Why to stop now: "named", "nothing_now", "group" or "unknown"; None to go on.

    Below NAMED an informative candidate always goes on. A leader at NAMED with fewer than TESTS_BEHIND_A_NAME tests behind it
    goes on too while a candidate is informative. `misfits` counts the reports the leader explains badly.
    """
    marginal = cause_marginal(hypotheses, weights)
    leader = max(marginal, key=marginal.__getitem__)
    settled = marginal[leader] >= NAMED
    if any(expected_information(hypotheses, weights, candidate) >= INFORMATIVE_BITS for candidate in candidates):
        enough = physical_tests_done >= TESTS_BEHIND_A_NAME or misfits >= MISFITS_BEFORE_UNKNOWN
        if not (settled and enough):
            return None
    if misfits >= MISFITS_BEFORE_UNKNOWN:
        return "unknown"
    if settled:
        return NOTHING_NOW if leader == NOTHING_NOW else "named"
    return "group" if leading_group(hypotheses, weights, candidates) else "unknown"
