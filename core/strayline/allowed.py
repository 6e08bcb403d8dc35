"""Which tests may be proposed to this person, here and now. These rules outrank every gain in information.

A test is refused for the role, for the tool, for a fact it needs, because nothing would watch it, because a wet end would be left live,
because a conductor of the cord was found bad, because a plug would be left with live blades or the boat's metal may be live, or because
it would energise again what has tripped: every time power goes on, something has been taken away first.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from strayline.catalogue.questions import UNKNOWN
from strayline.catalogue.tests import ROLES, TEST, TOOLS, Test
from strayline.predict import HULL

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from strayline.likelihood import Evidence

LIVE_BLADE_VOLTS = 10.0  # a bare blade above this vetoes the state that leaves it
TRIPPED = ("trips", "any_trips")  # after "one_trips" that load stays off, and the rest may run without it
DANGEROUS_HULL_VOLTS = 50.0  # conventional touch-voltage limit, IEC 60364-4-41
LIVE_HULL_SHARE = 0.02  # a test is not worth a greater chance than this of live metal under somebody's hand
INVERTER_SHARE = 0.2  # below this an inverter aboard is not worth a test of its own

# How much is energised in each context, from the bare outlet to the boat as it was found. The states on one rung hold the same
# parts or parts of each other; at another pedestal it is the same boat. A Y taken out is another arrangement, and stands on no rung.
RUNGS = {
    "pedestal_alone": 1, "cord_alone": 2, "main_off": 3, "branches_off": 4, "light_load": 5, "test_load": 5, "inverter_settled": 5,
    "one_load": 5, "other_pedestal": 5, "suspect_out": 6, "as_found": 7,
}  # fmt: skip


@dataclass(frozen=True, slots=True)
class Situation:
    """What the rules look at: stated facts, hypotheses with their weights, and what tests have shown.

    reports -- the tests answered in this epoch (id, value) in order
    last    -- the last answer to each test, also from before a fix: a dead device or a wet end stays one until it is looked at again
    """

    facts: Mapping[str, str]
    evidence: Evidence
    weights: Sequence[float]
    reports: Sequence[tuple[str, str]]
    last: Mapping[str, str]


def refusal(test: Test, situation: Situation) -> str | None:
    """Why a test may not be proposed, None when it may.

    "role", "tool", "need", "unwatched", "wet", "bad_cord", "tripped", "live_blades" or "live_hull".
    """
    facts = situation.facts
    role, tool = facts.get("role", UNKNOWN), facts.get("tools", UNKNOWN)
    if (role if role in ROLES else ROLES[0]) not in test.roles:
        return "role"
    if TOOLS.index(test.tool) > (TOOLS.index(tool) if tool in TOOLS else 0):
        return "tool"
    if not all(_holds(need, situation) for need in test.needs):
        return "need"
    if not test.energises:
        return None
    if test.id != "test_button" and unwatched(facts, situation.last):
        return "unwatched"
    if test.context == "cord_alone" and situation.last.get("look_over") == "wet":
        return "wet"  # only a dry and whole cord may lie with its far end live and free
    if situation.last.get("adapter_continuity") in ("exchanged", "ground_open") and test.context != "pedestal_alone":
        return "bad_cord"  # measured in the hand: it powers nothing, until another is measured
    if RUNGS.get(test.context, 0) >= lowest_tripped(situation.reports) and not _leaves_a_bad_post(test, situation):
        return "tripped"
    if any(one.blade_volts(test.context) > LIVE_BLADE_VOLTS for one in situation.evidence.predicted):
        return "live_blades"
    return "live_hull" if live_hull(situation.evidence, situation.weights, test.context) > LIVE_HULL_SHARE else None


def live_hull(evidence: Evidence, weights: Sequence[float], context: str) -> float:
    """Probability that the boat's metal would stand at a dangerous voltage against the water or the ground around it in a context."""
    volts = evidence.readings(context, HULL)
    return math.fsum(weight for weight, value in zip(weights, volts, strict=False) if value > DANGEROUS_HULL_VOLTS)


def unwatched(facts: Mapping[str, str], last: Mapping[str, str]) -> bool:
    """Whether the outlet is known to have no ground-fault device that works: power from it proves nothing and protects nobody."""
    return facts.get("pedestal_device") == "none" or last.get("test_button") == "stays"


def lowest_tripped(reports: Sequence[tuple[str, str]]) -> int:
    """The lowest rung that tripped. The boat as found did, or nobody would ask."""
    rungs = [RUNGS[TEST[test].context] for test, value in reports if value in TRIPPED and TEST[test].context in RUNGS]
    return min((*rungs, RUNGS["as_found"]))


def _leaves_a_bad_post(test: Test, situation: Situation) -> bool:
    """Whether the test takes the boat away from an outlet that trips with nothing in it: what tripped was not the boat."""
    return test.context == "other_pedestal" and ("pedestal_alone", "trips") in situation.reports


def _holds(need: str, situation: Situation) -> bool:
    plug = situation.facts.get("plug", UNKNOWN)
    if need == "pedestal_device":
        return situation.facts.get("pedestal_device") in ("device_30", "class_a")
    if need == "plain_cord":
        return plug in ("one_cord", "one_cord_four_wire")
    if need == "usable_hook_up":
        return plug not in ("homemade", "combining_y")  # nobody can vouch for the one; the other is taken out whole, and stays out
    if need == "y_in_use":
        return plug == "combining_y"
    if need == "inverter":
        has = situation.evidence.having("inverter", "yes")
        return math.fsum(weight for weight, yes in zip(situation.weights, has, strict=True) if yes) > INVERTER_SHARE
    raise ValueError(f"no such need: {need}")
