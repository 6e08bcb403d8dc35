"""No walk through the flow meets a step from a list of forbidden ones, written by hand: who, which test, after what was seen.

The list comes from the safety rules of the trade and is kept apart from the core's own labels and its room `allowed`; only ids are
shared. What each test puts under power was read off its steps. Figures have no published source: common practice, or reasoning from
the circuit.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np
import pytest

from strayline import arrangements, contexts
from strayline.catalogue.en import WORDS
from strayline.catalogue.questions import CLEAR
from strayline.catalogue.tests import TEST, TESTS
from strayline.parts import read
from strayline.session import FIXED, Answer, replay

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator, Sequence

    from strayline.network import Network

TOUCHABLE_VOLTS = 10.0  # a bare blade above this is live; common practice counts 50 V as dangerous, in water far less

# What each test puts under power at the own post, from its steps. `any` is whichever load is on.
_BOAT = frozenset({"post", "cord", "inlet", "panel"})
POWERED: dict[str, frozenset[str]] = {
    "test_button": frozenset({"post"}),
    "pedestal_alone": frozenset({"post"}),
    "cord_alone": frozenset({"post", "cord"}),
    "main_off": frozenset({"post", "cord", "inlet"}),
    "branches_off": _BOAT,
    "test_load": _BOAT | {"plain"},
    "wait_then_load": _BOAT | {"plain", "inverter"},
    "one_at_a_time": _BOAT | {"any"},
    "clamp_cord": _BOAT | {"any"},
    "clamp_live": _BOAT | {"any"},
    "clamp_ground": _BOAT | {"any"},
    "light_load": _BOAT | {"any", "light"},
    "appliance_unplugged": _BOAT | {"any", "light", "heavy"},
    "without_y": frozenset({"post", "straight adapter"}),
    "other_pedestal": frozenset({"other post", "cord", "inlet", "panel", "light"}),
}
AS_IT_WAS = _BOAT | {"any", "light", "heavy", "suspect"}
DARK = frozenset(test.id for test in TESTS) - set(POWERED)
BOAT_AT_OWN_POST = frozenset(test for test, live in POWERED.items() if {"post", "cord"} <= live)


@dataclass(frozen=True, slots=True)
class Proposal:
    """A test that is put before a person: who they are, what they said about the set-up, and every report so far (old ones too)."""

    test: str
    role: str
    plug: str
    pedestal_device: str
    reports: tuple[tuple[str, str], ...]
    since_fix: tuple[tuple[str, str], ...]

    def last(self, test: str) -> str:
        """The last report of a test, old or new; "" where there is none."""
        return dict(self.reports).get(test, "")


@dataclass(frozen=True, slots=True)
class Forbidden:
    """One row of the list: these people, these tests, in this state. `who` empty means everyone."""

    why: str
    tests: frozenset[str]
    who: frozenset[str] = frozenset()
    when: Callable[[Proposal], bool] = lambda _: True

    def meets(self, proposal: Proposal) -> bool:
        """Whether a proposal is what this row forbids."""
        return proposal.test in self.tests and (not self.who or proposal.role in self.who) and self.when(proposal)


def tripped_before(proposal: Proposal) -> list[frozenset[str]]:
    """What was under power each time something tripped since the last fix.

    At first all of it was, which counts until every load has held alone: then the boat is put together again load by load, once.
    """
    found = [] if ("one_at_a_time", "holds_all") in proposal.since_fix else [AS_IT_WAS]
    for test, value in proposal.since_fix:
        if value in ("trips", "any_trips"):
            found.append(POWERED[test])
        if value == "one_trips":  # that load stays off from then on
            found.append(AS_IT_WAS)
    return found


OWNERS = frozenset({"user", "unknown"})
NOT_TECHNICIANS = OWNERS | {"instructed", "electrician"}

FORBIDDEN: tuple[Forbidden, ...] = (
    Forbidden(
        "an owner measures nothing on the boat", frozenset({"bond_ohms", "insulation", "clamp_cord", "clamp_live", "clamp_ground"}), OWNERS
    ),
    Forbidden("ohms into a boat that can feed itself are for the trade aboard", frozenset({"bond_ohms", "insulation"}), NOT_TECHNICIANS),
    Forbidden("a break-out lead on a live cord is for the trade aboard", frozenset({"clamp_live", "clamp_ground"}), NOT_TECHNICIANS),
    Forbidden(
        "a Y is taken out whole, and stays out",
        BOAT_AT_OWN_POST | {"other_pedestal"},
        when=lambda proposal: proposal.plug == "combining_y",
    ),
    Forbidden(
        "one of two cords is not energised by itself",
        frozenset({"cord_alone", "other_pedestal"}),
        when=lambda proposal: proposal.plug in ("two_cords", "splitting_y", "unknown"),
    ),
    Forbidden(
        "unknown wiring is not energised",
        BOAT_AT_OWN_POST | {"without_y", "other_pedestal"},
        when=lambda proposal: proposal.plug == "homemade",
    ),
    Forbidden(
        "a cord with a free live end is dry and whole",
        frozenset({"cord_alone"}),
        when=lambda proposal: proposal.last("look_over") in ("wet", "burnt"),
    ),
    Forbidden(
        "burnt ends carry no current again",
        BOAT_AT_OWN_POST | {"pedestal_alone", "test_button", "without_y", "other_pedestal"},
        when=lambda proposal: proposal.last("look_over") == "burnt",
    ),
    Forbidden(
        "a cord with a conductor found bad powers nothing",
        BOAT_AT_OWN_POST | {"without_y", "other_pedestal"},
        when=lambda proposal: proposal.last("adapter_continuity") in ("exchanged", "ground_open"),
    ),
    Forbidden(
        "an outlet whose device TEST does not open is not used",
        BOAT_AT_OWN_POST | {"pedestal_alone", "without_y"},
        when=lambda proposal: proposal.last("test_button") == "stays",
    ),
    Forbidden(
        "a leaking boat is not put on an outlet that nothing watches",
        BOAT_AT_OWN_POST | {"without_y"},
        when=lambda proposal: proposal.pedestal_device == "none",
    ),
    Forbidden(
        "what tripped is not turned on again whole",
        frozenset(POWERED),
        when=lambda proposal: any(live <= POWERED[proposal.test] for live in tripped_before(proposal)),
    ),
    Forbidden(
        "a boat that tripped is not carried to another post, unless its own post trips with nothing in it",
        frozenset({"other_pedestal"}),
        when=lambda proposal: (
            ("pedestal_alone", "trips") not in proposal.since_fix
            and any(live - {"post"} <= POWERED["other_pedestal"] for live in tripped_before(proposal))
        ),
    ),
)


def proposal_of(test: str, answers: Sequence[Answer]) -> Proposal:
    """A proposal from the answers before it. A Y that was put right is out of use: one plug stands in its place."""
    facts = {answer.question: answer.value for answer in answers if answer.question in ("role", "plug", "pedestal_device")}
    if facts.get("plug") == "combining_y" and any((answer.question, answer.subject) == (FIXED, "combining_y") for answer in answers):
        facts["plug"] = "straight_adapter"
    fixed = max((answer.seq for answer in answers if answer.question == FIXED), default=0)
    reports = [answer for answer in answers if answer.question in TEST]
    return Proposal(
        test,
        facts.get("role", "unknown"),
        facts.get("plug", "unknown"),
        facts.get("pedestal_device", "unknown"),
        tuple((answer.question, answer.value) for answer in reports),
        tuple((answer.question, answer.value) for answer in reports if answer.seq > fixed),
    )


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
