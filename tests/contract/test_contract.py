"""The named pairs of the worker contract: the core still gives exactly these replies, and each keeps what every screen promises.

The second half does not depend on what the core says: shapes, and rules that any screen must keep.
"""

from __future__ import annotations

import json
import re
import runpy
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest

from strayline.catalogue.causes import CAUSE
from strayline.catalogue.en import WORDS
from strayline.catalogue.questions import GATE, QUESTION
from strayline.catalogue.tests import TEST
from strayline.protocol import handle

if TYPE_CHECKING:
    from collections.abc import Iterator

    Shown = dict[str, Any]

HERE = Path(__file__).parent
WRITE = runpy.run_path(str(HERE / "write.py"))
CASES: dict[str, dict[str, Any]] = WRITE["CASES"]
PAIRS = {path.stem: json.loads(path.read_text(encoding="utf-8")) for path in sorted(HERE.glob("*.json"))}
SCREENS: dict[str, Shown] = {name: pair["reply"]["screen"] for name, pair in PAIRS.items() if "screen" in pair["reply"]}
ERRORS = {name: pair["reply"]["error"] for name, pair in PAIRS.items() if "error" in pair["reply"]}
FORMS = {name: shown["form"] for name, shown in SCREENS.items() if shown["form"]}

each_screen = pytest.mark.parametrize("name", SCREENS)

# The shape of a screen: type by key. A list of one example stands for a list of such.
ROW = {"cause": "", "kind": "", "title": "", "percent": "", "share": "", "numbers": [""], "for": [""], "against": [""]}
SHAPE: dict[str, Any] = {
    "kind": "",
    "title": "",
    "lead": [""],
    "cautions": [""],
    "steps": [""],
    "facts": [{"label": "", "text": ""}],
    "form": {
        "question": "", "subject": None, "input": "", "legend": "", "choices": [{"value": "", "label": ""}],
        "unit": "", "value": "", "problem": "",
    },
    "why": "",
    "ranking": [ROW],
    "verdict": {"stop": "", "causes": [""], "title": "", "lead": [""], "repair": "", "remedy": [""], "marina": ""},
    "tonight": [""],
    "answered": [{"question": "", "subject": None, "text": "", "value": "", "value_text": ""}],
    "assumed": [""],
    "progress": "",
    "version": "",
}  # fmt: skip
MAY_BE_NULL = {"form", "verdict", "subject"}


def departures(found: object, shape: object, where: str = "screen") -> Iterator[str]:
    """Where something is not of a shape: keys missing or too many, or a value of another type."""
    if isinstance(shape, dict):
        if not isinstance(found, dict) or set(found) != set(shape):
            yield f"{where}: {sorted(set(shape) ^ set(found)) if isinstance(found, dict) else found!r}"
            return
        for key, part in shape.items():
            if found[key] is None and key in MAY_BE_NULL:
                continue
            yield from departures(found[key], part or "", f"{where}.{key}")
    elif isinstance(shape, list):
        if not isinstance(found, list):
            yield f"{where}: {found!r}"
            return
        for number, item in enumerate(found):
            yield from departures(item, shape[0], f"{where}[{number}]")
    elif not isinstance(found, str):
        yield f"{where}: {found!r}"


def test_every_case_has_its_pair_and_no_pair_is_left_over() -> None:
    """The pairs in this folder are those that cases.toml names, made from the requests it describes; run write.py after a change of it."""
    assert set(PAIRS) == set(CASES)
    for name, pair in PAIRS.items():
        assert pair["name"] == name
        assert pair["request"] == WRITE["request_of"](name)


@pytest.mark.parametrize("name", PAIRS)
def test_the_core_still_gives_this_reply(name: str) -> None:
    """The reply is exactly the one in the pair; where that is meant to change, run write.py and read the difference."""
    assert json.loads(handle(json.dumps(PAIRS[name]["request"]))) == PAIRS[name]["reply"]


# What these are for is said unasked, or is no answer.
OUT_OF_ORDER = {"stop_found_burnt", "stop_late", "error_no_such_question", "error_fix_of_nothing", "error_value_is_no_text"}


@pytest.mark.parametrize("name", sorted(set(CASES) - OUT_OF_ORDER))
def test_a_case_answers_what_it_is_asked(name: str) -> None:
    """Each answer of a case is to the question or test that its screen put, so that a journey can tap it through."""
    request = WRITE["request_of"](name)
    for place, answer in enumerate(request["answers"]):
        reply = json.loads(handle(json.dumps({**request, "answers": request["answers"][:place]})))
        form = reply["screen"]["form"] if "screen" in reply else None
        assert form is None or (form["question"], form["subject"]) == (answer["question"], answer["subject"]), place


@pytest.mark.parametrize("name", PAIRS)
def test_a_case_shows_what_it_is_for(name: str) -> None:
    """Each case ends on the screen that cases.toml says it is for, so that no pair drifts to another kind of screen."""
    kind, what = CASES[name]["shows"].split()
    if kind == "error":
        assert ERRORS[name]["code"] == what
        return
    shown = SCREENS[name]
    assert shown["kind"] == kind
    if kind in ("question", "test"):
        assert shown["form"]["question"] == what
    elif kind == "outcome":
        assert shown["verdict"]["stop"] == what
    else:
        assert shown["title"] == WORDS[f"stop.{what}.title"]


def test_between_them_they_show_everything() -> None:
    """The pairs hold every kind of screen, every question, both inputs, every verdict, a sign, two kinds of not knowing, and problems."""
    shows = {case["shows"] for case in CASES.values()}
    assert {shown["kind"] for shown in SCREENS.values()} == {"question", "test", "outcome", "stop"}
    assert shows >= {f"question {question.id}" for question in QUESTION.values() if question.opening}
    assert shows >= {f"outcome {stop}" for stop in ("named", "group", "nothing_now", "unknown", "danger")}
    assert shows >= {"stop tingling", "stop unknown", "stop not_clear"}
    assert {form["input"] for form in FORMS.values()} == {"choice", "number"}
    assert sum(bool(form["problem"]) for form in FORMS.values()) >= 4
    assert len(ERRORS) >= 4


@pytest.mark.parametrize("name", ERRORS)
def test_an_error_is_a_code_a_sentence_and_details(name: str) -> None:
    """A reply without a screen has a code, one plain sentence and details, its request's id and the protocol, and nothing else."""
    reply = PAIRS[name]["reply"]
    assert set(reply) == {"id", "protocol", "error"}
    assert set(reply["error"]) == {"code", "message", "details"}
    assert reply["error"]["code"] != "bug"
    assert reply["error"]["message"].strip()
    assert "\n" not in reply["error"]["message"]


@each_screen
def test_a_screen_has_every_key_and_every_leaf_is_text(name: str) -> None:
    """Every key of the contract is there, none besides, and every leaf is text; a form, a verdict and a subject may be null."""
    assert list(departures(SCREENS[name], SHAPE)) == []


def leaves(part: object) -> Iterator[str]:
    """Every text of a reply."""
    if isinstance(part, str):
        yield part
    elif isinstance(part, list | dict):
        for item in part.values() if isinstance(part, dict) else part:
            yield from leaves(item)


@pytest.mark.parametrize("name", PAIRS)
def test_what_is_put_together_reads_like_a_sentence(name: str) -> None:
    """No text has an unfilled field, two spaces, two stops, or a space at its end: the joints do not show."""
    reply = {key: part for key, part in PAIRS[name]["reply"].items() if key != "id"}
    assert [text for text in leaves(reply) if re.search(r"[{}]|  |[.?!][.;,]|^\s|\s$", text)] == []


@each_screen
def test_a_screen_of_a_kind_has_what_that_kind_is_for(name: str) -> None:
    """A question has a form, a test a form, steps and facts, an outcome a verdict, a stop orders and no form; each has a title."""
    shown = SCREENS[name]
    kind = shown["kind"]
    assert shown["title"]
    assert (shown["form"] is not None) or kind in ("outcome", "stop")
    assert (shown["verdict"] is not None) == (kind == "outcome")
    assert bool(shown["steps"]) == (kind in ("test", "stop"))
    assert bool(shown["facts"]) == (kind == "test")
    if kind == "stop":
        assert shown["form"] is None
        assert shown["lead"]


@each_screen
def test_a_test_that_energises_has_cautions(name: str) -> None:
    """The card of a test that restores power has cautions, the first things to be read, and says that power goes on."""
    shown = SCREENS[name]
    if shown["kind"] == "test" and TEST[shown["form"]["question"]].energises:
        assert len(shown["cautions"]) >= 3
        assert any("Power goes on" in fact["text"] for fact in shown["facts"])


@pytest.mark.parametrize("name", FORMS)
def test_not_knowing_is_always_an_answer(name: str) -> None:
    """Every form takes "I don't know", a test also "I can't"; only the way on after an outcome takes neither. No value comes twice."""
    form = FORMS[name]
    values = [choice["value"] for choice in form["choices"]]
    assert len(values) == len(set(values))
    assert all(choice["label"] for choice in form["choices"])
    if form["question"] == "fixed":
        assert values == ["done"]
        return
    assert "unknown" in values
    assert ("cannot" in values) == (form["question"] in TEST)
    assert (form["input"] == "number") == bool(form["unit"])
    if form["question"] == GATE.id:
        assert values[-1] == "unknown"


@pytest.mark.parametrize("name", FORMS)
def test_a_problem_keeps_what_was_typed(name: str) -> None:
    """A form with a problem holds the refused value, and one without a problem holds none."""
    form = FORMS[name]
    last = [row["value"] for row in PAIRS[name]["request"]["answers"] if row["question"] == form["question"]]
    assert form["value"] == (last[-1] if form["problem"] else "")
    assert bool(form["problem"]) == name.startswith("problem_")


@each_screen
def test_a_ranking_is_in_order_and_its_numbers_agree(name: str) -> None:
    """Causes are known, none twice, falling, at most one in sum; "percent" is "share" in whole per cent and never says 0 or 100."""
    ranking = SCREENS[name]["ranking"]
    shares = [float(row["share"]) for row in ranking]
    assert [row["cause"] for row in ranking] == list(dict.fromkeys(row["cause"] for row in ranking))
    assert {row["cause"] for row in ranking} <= set(CAUSE)
    assert shares == sorted(shares, reverse=True)
    assert sum(shares) <= 1.0 + 5e-5 * len(shares)  # four places each
    for row, share in zip(ranking, shares, strict=True):
        assert row["kind"] == CAUSE[row["cause"]].kind
        low, high = {"< 1 %": (0, 0.005), "> 99 %": (0.995, 1)}.get(row["percent"], (0, 0))
        if high:
            assert low <= share <= high + 1e-4
        else:
            assert abs(share * 100 - int(row["percent"].removesuffix(" %"))) <= 0.505
            assert 0 < int(row["percent"].removesuffix(" %")) < 100


@each_screen
def test_a_ranking_comes_with_advice_for_tonight(name: str) -> None:
    """Wherever causes are ranked there is advice for tonight and what was assumed; the verdict's causes are ranked ones."""
    shown = SCREENS[name]
    if shown["ranking"]:
        assert shown["tonight"]
        assert shown["assumed"]
    if shown["verdict"]:
        assert set(shown["verdict"]["causes"]) <= {row["cause"] for row in shown["ranking"]}
        assert shown["verdict"]["repair"]


@each_screen
def test_answered_lists_every_answer_but_the_gate_in_order(name: str) -> None:
    """What was answered is shown in order and in words, for changing; the gate and the line before power are not among it."""
    keys = ("question", "subject", "value")
    given = [[row[key] for key in keys] for row in PAIRS[name]["request"]["answers"] if row["question"] not in ("gate", "clear")]
    shown = SCREENS[name]["answered"]
    assert [[row[key] for key in keys] for row in shown] == given
    assert all(row["text"] for row in shown)
    assert all(row["value_text"] for row in shown if row["value"])
