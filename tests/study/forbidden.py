"""The list of steps that nobody may be told to do, written by hand from the trade's rules: who, which test, in which state.

It is kept apart from the core's own labels and its room `allowed`; only ids are shared. What each test puts under power was read off its
steps, and a test that this list does not know is forbidden until somebody has read it. Figures have no published source: common
practice, or reasoning from the circuit.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from strayline.catalogue.tests import TEST
from strayline.session import FIXED

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from strayline.session import Answer

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
DARK = frozenset({"look_over", "adapter_continuity", "bond_ohms", "insulation"})  # these put nothing under power
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


def judged(proposal: Proposal) -> list[str]:
    """Why a proposal is forbidden; empty where nothing on the list speaks against it."""
    if proposal.test not in POWERED and proposal.test not in DARK:
        return ["nobody has read its steps yet"]
    return [row.why for row in FORBIDDEN if row.meets(proposal)]
