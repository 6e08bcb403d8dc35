"""The flow: what counts, what stops, what is asked again, and that a session is nothing but its answers."""

from __future__ import annotations

import itertools
import random
from typing import TYPE_CHECKING, Any

import pytest

from strayline.catalogue.causes import CAUSE
from strayline.catalogue.questions import GATE_SIGNS, QUESTION
from strayline.catalogue.tests import TEST, TESTS, TOOLS
from strayline.errors import RequestError
from strayline.session import CANNOT, FIXED, FIXED_WEIGHT, LOOKS, OVER_RANGE, SETUP, UNKNOWN, Answer, replay

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from strayline.session import Session

GIVEN = (
    ("gate", "none"), ("role", "technician"), ("tools", "insulation"), ("supply", "split_120_240"), ("plug", "one_cord"),
    ("pedestal_device", "device_30"), ("aboard_device", "device_30"), ("opened", "pedestal"), ("when", "any_load"),
    ("afloat", "afloat"),
)  # fmt: skip
REPORTS = (
    ("inverter", "no"), ("look_over", "clean"), ("branches_off", "holds"), ("test_load", "trips"), ("bond_ohms", "0.3"),
    ("neighbour", "no"),
)  # fmt: skip


def after(*pairs: tuple[str, str], given: Sequence[tuple[str, str]] = GIVEN, **changed: str) -> Session:
    """The session after the set-up (some of it changed) and these further answers, numbered in order."""
    rows = [(question, changed.get(question, value)) for question, value in given]
    return replay([Answer(question, None, value, seq) for seq, (question, value) in enumerate([*rows, *pairs], 1)])


def marginal(session: Session) -> Mapping[str, float]:
    """The probabilities of the causes, which must be there."""
    assert session.marginal is not None
    return session.marginal


def shown(session: Session) -> tuple[Any, ...]:
    """What a session leads to."""
    return session.ask, session.test, session.verdict, session.halted, session.group


# --- nothing but its answers ---------------------------------------------------------------------------------------


def test_the_order_of_answers_does_not_matter() -> None:
    """Within an epoch every order of the reports gives one posterior, the same to the last bit."""
    expected = after(*REPORTS).weights
    orders = list(itertools.permutations(REPORTS))
    for order in random.Random(1).sample(orders, 12):
        assert after(*order).weights == expected


def test_seq_orders_and_not_the_place_in_the_list() -> None:
    """Answers are taken by `seq`, however the list that brings them is shuffled."""
    answers = list(after(*REPORTS).answers)
    shuffled = random.Random(2).sample(answers, len(answers))
    assert shuffled != answers
    assert shown(replay(shuffled)) == shown(replay(answers))
    assert replay(shuffled).answers == tuple(answers)


def test_a_prefix_shows_what_was_shown_before() -> None:
    """On the way through a case every prefix of the answers shows what it showed when it was all there was: nothing is remembered."""
    pairs = [*GIVEN, *REPORTS]
    on_the_way = [shown(after(given=pairs[:length])) for length in range(len(pairs) + 1)]
    assert [shown(after(given=pairs[:length])) for length in reversed(range(len(pairs) + 1))] == on_the_way[::-1]
    assert len(set(on_the_way)) > 8


def test_a_change_in_place_is_the_same_as_having_said_it_at_once() -> None:
    """Replacing an earlier answer gives the session of someone who said so from the start, also where it chooses other tables."""
    first = after(*REPORTS)
    for question, value in (("opened", "aboard"), ("plug", "two_cords"), ("branches_off", "trips")):
        changed = [Answer(one.question, one.subject, value if one.question == question else one.value, one.seq) for one in first.answers]
        from_the_start = after(given=[(one, value if one == question else other) for one, other in (*GIVEN, *REPORTS)])
        assert replay(changed).weights == from_the_start.weights
        assert shown(replay(changed)) == shown(from_the_start)
        assert replay(changed).weights != first.weights


def test_a_repeated_observation_counts_again() -> None:
    """The same report given twice speaks twice: the odds of every two hypotheses move by the same ratio once more."""
    none, once, twice = (after(*[("branches_off", "trips")] * times).weights for times in range(3))
    first = [one / other for one, other in zip(once, none, strict=True)]
    second = [one / other for one, other in zip(twice, once, strict=True)]
    assert max(first) > 5 * min(first)
    assert [value / second[0] for value in second] == pytest.approx([value / first[0] for value in first], rel=1e-9)


# --- not knowing ---------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("value", [UNKNOWN, CANNOT])
@pytest.mark.parametrize("asked", [*LOOKS, *TEST])
def test_not_knowing_changes_nothing(asked: str, value: str) -> None:
    """To any look or test "I don't know" leaves every weight as it was; so does "I can't"."""
    assert after((asked, value)).weights == after().weights
    assert after(*REPORTS, (asked, value)).weights == after(*REPORTS).weights


@pytest.mark.parametrize("asked", ["opened", "when", "afloat"])
def test_not_knowing_what_happened_changes_nothing(asked: str) -> None:
    """To what opened, when, or where the boat lies, "I don't know" leaves the prior of the set-up times what else was said."""
    known = [one.answer.question for one in after(**{asked: UNKNOWN}).observations]
    assert known == [other for other in ("opened", "when", "afloat") if other != asked]
    nothing = after(opened=UNKNOWN, when=UNKNOWN, afloat=UNKNOWN)
    assert nothing.hypotheses is not None
    assert nothing.weights == pytest.approx(nothing.hypotheses.prior, rel=1e-12)


@pytest.mark.parametrize("asked", [question for question in SETUP if question != "role"])
def test_not_knowing_the_set_up_goes_on(asked: str) -> None:
    """Each fact of the set-up may be unknown: the flow goes on, and the causes still sum to one."""
    assert sum(marginal(after(**{asked: UNKNOWN})).values()) == pytest.approx(1)


# --- stops ---------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("sign", [*GATE_SIGNS, UNKNOWN, CANNOT, "", "nonsense"])
@pytest.mark.parametrize("late", [False, True])
def test_every_sign_at_the_gate_stops(sign: str, late: bool) -> None:
    """A sign, not knowing, or anything else but "none of these" stops everything, at the start and later on."""
    stopped = after(("gate", sign)) if late else after(given=[("gate", sign)])
    assert stopped.halted == (sign if sign in GATE_SIGNS else UNKNOWN)
    assert stopped.ask is stopped.test is stopped.verdict is None


def test_without_the_gate_nothing_else_is_asked() -> None:
    """Whatever else was answered, the gate comes first; answered again with "none" the flow goes on from where it was."""
    assert after(given=GIVEN[1:]).ask == ("gate", None)
    assert shown(after(given=[*GIVEN[1:], ("gate", "none")])) == shown(after())
    stopped_once = [("gate", "lightning"), *GIVEN[1:], ("gate", "none")]
    assert shown(after(given=stopped_once)) == shown(after())


def _line_before(session: Session, value: str) -> Session:
    assert session.ask is not None
    return replay([*session.answers, Answer(*session.ask, value, session.answers[-1].seq + 1)])


@pytest.mark.parametrize("value", ["not_clear", UNKNOWN, CANNOT, "", "nonsense"])
def test_power_is_not_restored_when_it_is_not_clear(value: str) -> None:
    """Anything but "clear" to the line before power stops."""
    asked = after(("inverter", "no"))
    assert asked.ask == ("clear", asked.test)
    assert _line_before(asked, value).halted == "not_clear"
    assert _line_before(asked, "clear").ask is None
    assert _line_before(asked, "clear").test == asked.test


def test_what_is_found_burnt_stops_like_the_sign_at_the_gate() -> None:
    """An end that is found burnt is the gate's sign of a burnt plug, seen later: it stops, until it has been looked at again."""
    assert after(("look_over", "burnt")).halted == "hot_plug"
    assert after(("look_over", "burnt"), *REPORTS[2:]).halted == "hot_plug"
    assert after(("look_over", "burnt"), ("look_over", "clean")).halted is None


def test_an_old_line_before_power_does_not_count() -> None:
    """A line that was answered "clear" is asked again once anything else was said, also after a fix."""
    cleared = _line_before(after(("inverter", "no")), "clear")
    later = replay([*cleared.answers, Answer("neighbour", None, UNKNOWN, cleared.answers[-1].seq + 1)])
    assert later.test == cleared.test
    assert later.ask == ("clear", cleared.test)


# --- problems ------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("question", "value"),
    [
        ("plug", "balloon"),
        ("opened", ""),
        ("when", "yes"),
        ("branches_off", "wet"),
        ("bond_ohms", "many"),
        ("bond_ohms", "-3"),
        ("clamp_cord", OVER_RANGE),
    ],
)
def test_a_bad_answer_is_asked_again(question: str, value: str) -> None:
    """An answer that cannot be taken brings its own question back with a problem, and no ranking is shown on it."""
    session = after((question, value), **({question: value} if question in QUESTION else {}))
    assert session.problem is not None
    assert session.problem.answer.question == question
    assert session.test == question if question in TEST else session.ask == (question, None)
    assert session.marginal is None


@pytest.mark.parametrize("plug", ["one_cord_four_wire", "combining_y", "splitting_y", "straight_adapter"])
def test_a_plug_of_two_lines_is_asked_again_on_230_volts(plug: str) -> None:
    """Where the supply is changed to one on which the stated plug does not exist, the plug is asked again."""
    session = after(plug=plug, supply="single_230")
    assert session.ask == ("plug", None)
    assert session.problem is not None


def test_a_meter_that_shows_no_end_is_a_reading_in_ohms_only() -> None:
    """OL counts as more ohms than any number, and is no reading in milliamperes."""
    open_, low = after(("bond_ohms", OVER_RANGE)), after(("bond_ohms", "0.1"))
    assert marginal(open_)["panel_bond"] < marginal(after())["panel_bond"] < marginal(low)["panel_bond"]
    assert after(("clamp_cord", OVER_RANGE)).problem is not None


@pytest.mark.parametrize(
    "answer", [("colour", None, "red"), (FIXED, "kettle", "done"), (FIXED, None, "done"), (FIXED, "wet_cord", "maybe")]
)
def test_what_no_page_would_send_is_refused(answer: tuple[str, str | None, str]) -> None:
    """An unknown question, or a fix of nothing, is the author's mistake and raises with a sentence."""
    with pytest.raises(RequestError):
        replay([*after().answers, Answer(*answer, 99)])


# --- fixes ---------------------------------------------------------------------------------------------------------


def fixed(session: Session, cause: str, value: str = "done") -> Session:
    """The session after a cause was put right."""
    return replay([*session.answers, Answer(FIXED, cause, value, session.answers[-1].seq + 1)])


def test_a_fix_opens_an_epoch() -> None:
    """After a fix the old reports count no more, what the boat is still does, and the fixed cause keeps a twentieth of its prior."""
    before, later = after(*REPORTS), fixed(after(*REPORTS), "panel_bond")
    assert later.verdict != before.verdict or later.test != before.test
    assert {one.answer.question for one in later.observations} == {"inverter", "neighbour", "afloat"}
    assert later.tests_done == 0
    plain = marginal(after(("inverter", "no"), ("neighbour", "no"), opened=UNKNOWN, when=UNKNOWN))
    odds = marginal(later)["panel_bond"] / marginal(later)["wet_cord"]
    assert odds == pytest.approx(FIXED_WEIGHT * plain["panel_bond"] / plain["wet_cord"], rel=1e-9)


def test_tests_may_be_done_again_after_a_fix() -> None:
    """A test that was done before the fix is among those allowed after it, with its own line before power."""
    before = after(("branches_off", "trips"), ("main_off", "holds"))
    assert not {"branches_off", "main_off"} & set(before.allowed)
    assert {"branches_off", "main_off"} <= set(fixed(before, "panel_bond").allowed)


def test_not_knowing_whether_it_was_fixed_is_no_fix() -> None:
    """To the fix "I don't know" leaves everything as it was."""
    assert fixed(after(*REPORTS), "panel_bond", UNKNOWN).weights == after(*REPORTS).weights


def test_a_y_that_was_put_right_is_out_of_use() -> None:
    """After the Y was taken out of use it is no cause any more, and nobody is asked to take it out again."""
    session = fixed(after(("without_y", "holds"), plug="combining_y"), "combining_y")
    assert "combining_y" not in marginal(session)
    assert "without_y" not in session.allowed


# --- what is proposed ----------------------------------------------------------------------------------------------

# Who may do each test, and the least they need in their hands: written here once more, from what the steps ask of a person.
ANYONE = {"user", "instructed", "technician", "electrician", "unknown"}
METER = {"instructed", "technician", "electrician"}
NO_TOOL = (
    "look_over", "test_button", "pedestal_alone", "cord_alone", "main_off", "branches_off", "one_at_a_time", "appliance_unplugged",
    "test_load", "wait_then_load", "without_y", "other_pedestal", "light_load",
)  # fmt: skip
WHO: dict[str, tuple[set[str], str]] = {
    **dict.fromkeys(NO_TOOL, (ANYONE, "none")),
    "adapter_continuity": (METER, "multimeter"),
    "clamp_cord": (METER, "clamp"),
    "bond_ohms": ({"technician"}, "multimeter"),
    "clamp_live": ({"technician"}, "clamp"),
    "clamp_ground": ({"technician"}, "clamp"),
    "insulation": ({"technician"}, "insulation"),
}


def test_only_what_a_person_may_do_with_what_they_have_is_proposed(walks: Sequence[Any]) -> None:
    """On every walk each proposed test is one for this role with these tools; not knowing either counts as least."""
    assert set(WHO) == {test.id for test in TESTS}
    for step in walks:
        if step.test:
            people, tool = WHO[step.test]
            assert step.facts.get("role", UNKNOWN) in people
            held = step.facts.get("tools", UNKNOWN)
            assert TOOLS.index(tool) <= (TOOLS.index(held) if held != UNKNOWN else 0)


def test_no_test_is_proposed_twice_in_an_epoch(walks: Sequence[Any]) -> None:
    """A test that was answered, even with "I can't", is not proposed again before a fix."""
    for step in walks:
        if step.test and not step.ask:
            last_fix = max((answer.seq for answer in step.answers if answer.question == FIXED), default=0)
            assert step.test not in {answer.question for answer in step.answers if answer.seq > last_fix}


def test_with_a_y_the_whole_y_comes_out_first(walks: Sequence[Any]) -> None:
    """Wherever a combining Y is in use, the first test proposed is to take the whole Y out."""
    firsts: dict[int, str] = {}
    for step in walks:
        if step.test and step.facts.get("plug") == "combining_y" and not any(answer.question == FIXED for answer in step.answers):
            firsts.setdefault(step.walk, step.test)
    assert len(firsts) > 10
    assert set(firsts.values()) == {"without_y"}


def test_every_walk_ends(walks: Sequence[Any]) -> None:
    """Each walk comes to an end of its own: a verdict or a stop."""
    last = {step.walk: step for step in walks}
    assert len(last) > 60
    assert all(step.verdict or step.halted for step in last.values())


def test_a_verdict_of_danger_never_names_something_harmless_alone(walks: Sequence[Any]) -> None:
    """Where it stops for danger, the causes it shows can kill."""
    dangers = [step for step in walks if step.verdict == "danger"]
    assert dangers
    for step in dangers:
        assert step.group
        assert all(CAUSE[cause].lethal for cause in step.group)


def test_a_fact_that_is_rare_is_no_contradiction() -> None:
    """A boat on land is rare and no misfit: only what tests and history say can contradict a cause."""
    for session in (after(afloat="ashore"), after(*REPORTS), after(*REPORTS, afloat="ashore")):
        assert not {session.observations[index].answer.question for index in session.misfits} & set(LOOKS)


def test_nothing_now_is_said_only_after_the_device_has_shown_that_it_opens() -> None:
    """Where TEST may be pressed, it is pressed before any case ends in nothing now."""
    pairs = [("gate", None, "none"), ("role", None, "technician"), ("tools", None, "insulation"), ("supply", None, "split_120_240")]
    pairs += [("plug", None, "one_cord"), ("pedestal_device", None, "device_30"), ("aboard_device", None, "device_30")]
    pairs += [("opened", None, "pedestal"), ("when", None, "random"), ("afloat", None, "afloat")]
    good = {
        "look_over": "clean",
        "test_button": "opens",
        "one_at_a_time": "holds_all",
        "adapter_continuity": "fine",
        "bond_ohms": "over_range",
    }
    good |= {
        "insulation": "over_range",
        "clamp_cord": "0.3",
        "clamp_live": "1.5",
        "clamp_ground": "1.4",
        "neighbour": "no",
        "inverter": "no",
    }
    for _ in range(60):
        session = replay([Answer(question, subject, value, seq) for seq, (question, subject, value) in enumerate(pairs, 1)])
        if session.verdict:
            break
        question, subject = session.ask or (session.test or "", None)
        pairs.append((question, subject, "clear" if subject else good.get(question, "holds")))
    assert session.verdict == "nothing_now"
    assert "test_button" in {question for question, _, _ in pairs}


def test_wet_things_are_looked_at_before_they_get_power() -> None:
    """When it trips in the wet, the first test is to look, with the power off."""
    pairs = [("gate", "none"), ("role", "user"), ("tools", "none"), ("supply", "split_120_240"), ("plug", "one_cord")]
    pairs += [
        ("pedestal_device", "device_30"),
        ("aboard_device", "device_30"),
        ("opened", "pedestal"),
        ("when", "wet"),
        ("afloat", "afloat"),
    ]
    assert replay([Answer(question, None, value, seq) for seq, (question, value) in enumerate(pairs, 1)]).test == "look_over"
