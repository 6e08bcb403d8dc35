"""No walk through the flow meets a step from a list of forbidden ones, written by hand: who, which test, after what was seen.

The list stands in tests/study/forbidden.py, which the study judges every proposal by as well.
"""

from __future__ import annotations

import re
from typing import TYPE_CHECKING, Any

import numpy as np
import pytest

from forbidden import DARK, FORBIDDEN, POWERED, Forbidden, Proposal, proposal_of
from strayline import arrangements, contexts
from strayline.catalogue.en import WORDS
from strayline.catalogue.questions import CLEAR
from strayline.catalogue.tests import TEST, TESTS
from strayline.parts import read
from strayline.session import Answer, replay

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from strayline.network import Network

TOUCHABLE_VOLTS = 10.0  # a bare blade above this is live; common practice counts 50 V as dangerous, in water far less


@pytest.fixture(scope="module")
def proposals(walks: Sequence[Any]) -> list[Proposal]:
    """Every test proposed on the walks, once: when its card is shown."""
    return [proposal_of(step.test, step.answers) for step in walks if step.test and not step.ask]


def test_the_list_knows_every_test() -> None:
    """Each test of the catalogue either restores power and is listed with what it powers, or restores none."""
    assert {test.id for test in TESTS if test.energises} == set(POWERED)
    assert {test.id for test in TESTS if not test.energises} == DARK


def test_the_walks_are_wide_enough_to_mean_something(proposals: list[Proposal]) -> None:
    """The walks propose nearly every test somewhere, to every role, after trips and after holds, and go on after fixes."""
    assert len({proposal.test for proposal in proposals}) >= len(TEST) - 2  # the longest tests come up in the full run only
    assert {proposal.role for proposal in proposals} == {"user", "instructed", "technician", "electrician", "unknown"}
    assert sum(any(value == "trips" for _, value in proposal.since_fix) for proposal in proposals) > 50
    assert sum(proposal.reports != proposal.since_fix for proposal in proposals) > 20


@pytest.mark.parametrize("row", FORBIDDEN, ids=lambda row: row.why)
def test_no_forbidden_step_is_proposed(row: Forbidden, proposals: list[Proposal]) -> None:
    """No proposal on any walk is what this row forbids."""
    assert [proposal for proposal in proposals if row.meets(proposal)] == []


@pytest.mark.full
@pytest.mark.timeout(900)
def test_no_forbidden_step_is_proposed_on_many_walks(many_walks: Sequence[Any]) -> None:
    """Neither does any of a thousand walks meet one, on which every test is proposed somewhere."""
    proposals = [proposal_of(step.test, step.answers) for step in many_walks if step.test and not step.ask]
    assert {proposal.test for proposal in proposals} == set(TEST)
    assert [(row.why, proposal) for row in FORBIDDEN for proposal in proposals if row.meets(proposal)] == []


@pytest.mark.parametrize("row", FORBIDDEN, ids=lambda row: row.why)
def test_the_list_catches_what_it_forbids(row: Forbidden) -> None:
    """Each row meets a step that is made to break it, so that an empty result means something."""
    bad = [
        Proposal(test, role, plug, device, reports, reports)
        for test in sorted(row.tests)
        for role in ("user", "technician")
        for plug in ("one_cord", "two_cords", "combining_y", "homemade")
        for device in ("device_30", "none")
        for reports in (
            *((one,) for one in (("look_over", "burnt"), ("test_button", "stays"), ("pedestal_alone", "trips"), ("main_off", "trips"))),
            (("adapter_continuity", "exchanged"),),
            (),
        )
    ]
    assert any(row.meets(proposal) for proposal in bad)
    assert not all(row.meets(proposal) for proposal in bad)


def test_power_goes_on_only_when_the_last_word_was_that_all_is_clear(walks: Sequence[Any]) -> None:
    """Each card of a test that restores power comes right after its own line was answered "clear"; any other answer to it stops."""
    shown = [step for step in walks if step.test in POWERED and not step.ask and not step.verdict]
    assert shown
    for step in shown:
        last = step.answers[-1]
        assert (last.question, last.subject, last.value) == (CLEAR.id, step.test, "clear")
    refused = [step for step in walks if any(answer.question == CLEAR.id and answer.value != "clear" for answer in step.answers)]
    assert refused
    assert {step.halted for step in refused} == {"not_clear"}


@pytest.mark.parametrize("test", ["cord_alone", "without_y", "other_pedestal"])
def test_where_one_plug_may_be_in_one_breaker_goes_on(test: str) -> None:
    """The card of a test that only one plug may take part in never tells to turn on two breakers, not even if there are two."""
    steps = " ".join(WORDS[f"test.{test}.steps"])
    assert re.search(r"turn on the breaker on the (?:new )?dock post", steps, re.IGNORECASE)
    assert not re.search(r"turn on both", steps, re.IGNORECASE)


# --- live blades, from the network ---------------------------------------------------------------------------------


def blade_volts(network: Network) -> float:
    """The highest voltage to earth on a bare blade, from one dense system of node equations (numpy); islands are tied at one node."""
    names = {network.reference: 0}
    for branch in network.branches:
        for node in (branch.from_node, branch.to_node):
            names.setdefault(node, len(names))
    matrix, right = np.zeros((len(names),) * 2, complex), np.zeros(len(names), complex)
    for branch in network.branches:
        a, b, admittance = names[branch.from_node], names[branch.to_node], 1 / branch.impedance
        matrix[a, a] += admittance
        matrix[b, b] += admittance
        matrix[a, b] -= admittance
        matrix[b, a] -= admittance
        right[a] -= branch.emf * admittance
        right[b] += branch.emf * admittance
    matrix[0] = 0
    matrix[0, 0] = 1
    right[0] = 0
    volts = np.linalg.lstsq(matrix, right, rcond=None)[0]
    return max((float(abs(volts[names[blade.node]])) for blade in network.blades if blade.node in names), default=0.0)


def one_tail_out() -> dict[str, Any]:
    """A boat on a combining Y of which one plug hangs loose, with a 240 V load aboard and nothing else on the loose leg."""
    raw = arrangements.parts(arrangements.Arrangement("split_120_240", "combining_y", 1.0), {}, neighbour=False, afloat=True)
    rows = [dict(row) for row in raw["parts"]]  # type: ignore[attr-defined]
    for row in rows:
        if row["kind"] == "adapter":
            row["from"] = ["outlet", ""]
    return {"parts": [row for row in rows if row["id"] not in ("outlet2", "charger", "charger_breaker")]}


def energised() -> Iterator[tuple[str, str]]:
    """Every test that restores power, with its context."""
    return ((test.id, test.context) for test in TESTS if test.energises)


def test_a_loose_tail_of_a_y_is_live() -> None:
    """With one plug of a Y out and a load between the legs on, the loose blade stands near 120 V (the other leg, through the load)."""
    left = contexts.left_behind("as_found", read(one_tail_out()))
    assert left is not None
    assert blade_volts(left) == pytest.approx(120, rel=0.05)


def test_no_test_leaves_live_blades() -> None:
    """With one plug of a Y hanging loose no test is allowed in whose state a bare blade is live; each is computed here once more."""
    installation = one_tail_out()
    live = set()
    for test, context in energised():
        left = contexts.left_behind(context, read(installation))
        if left is not None and blade_volts(left) > TOUCHABLE_VOLTS:
            live.add(test)
    assert live >= {"appliance_unplugged", "one_at_a_time"}
    answers = [Answer("gate", None, "none", 0)]
    said = {"role": "technician", "tools": "insulation", "opened": "pedestal", "when": "any_load", "afloat": "afloat"}
    for seq, (question, value) in enumerate({**said, "pedestal_alone": "holds"}.items(), 1):
        answers.append(Answer(question, None, value, seq))
    allowed = set(replay(answers, installation).allowed)
    assert allowed
    assert not allowed & live
