"""What is shown: the core's own numbers, rounded once; tonight's advice for every cause that may be; no sentence that safety forbids."""

from __future__ import annotations

import json
import math
import re
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest

from sentence_rules import forbidden
from strayline import contexts, devices
from strayline.catalogue.causes import CAUSE, CAUSES
from strayline.catalogue.en import WORDS
from strayline.catalogue.questions import GATE_SIGNS
from strayline.catalogue.tests import TEST
from strayline.screen import current_text, percent, screen, static_sections, words_of
from strayline.session import Answer, replay

if TYPE_CHECKING:
    from collections.abc import Iterator

    from strayline.session import Session

PAIRS = {
    path.stem: json.loads(path.read_text(encoding="utf-8")) for path in sorted((Path(__file__).parents[1] / "contract").glob("*.json"))
}
SHOWN = {name: pair for name, pair in PAIRS.items() if "screen" in pair["reply"]}
RANKED = [name for name, pair in SHOWN.items() if pair["reply"]["screen"]["ranking"]]
HALTS = (*GATE_SIGNS, "unknown", "not_clear")


def session_of(name: str) -> Session:
    """The session behind a pair of the contract."""
    return replay([Answer(**row) for row in PAIRS[name]["request"]["answers"]])


def texts(part: object) -> Iterator[str]:
    """Every text in a screen."""
    if isinstance(part, str):
        yield part
    elif isinstance(part, list):
        for item in part:
            yield from texts(item)
    elif isinstance(part, dict):
        for item in part.values():
            yield from texts(item)


# --- numbers -------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("share", "shown"),
    [(0.0, "< 1 %"), (0.004, "< 1 %"), (0.006, "1 %"), (0.5, "50 %"), (0.624, "62 %"), (0.99, "99 %"), (0.9951, "> 99 %"), (1.0, "> 99 %")],
)
def test_a_probability_is_never_none_and_never_all(share: float, shown: str) -> None:
    """Per cents are whole, and neither 0 nor 100 is ever said."""
    assert percent(share) == shown


@pytest.mark.parametrize(
    ("amperes", "shown"),
    [
        (0.0, "0 mA"),
        (9e-7, "0 mA"),
        (1.04e-3, "1.0 mA"),
        (0.00994, "9.9 mA"),
        (0.0221, "22 mA"),
        (0.9994, "999 mA"),
        (0.9996, "1.0 A"),
        (11.44, "11.4 A"),
    ],
)
def test_a_current_has_its_unit(amperes: float, shown: str) -> None:
    """Below one ampere milliamperes, below ten of them one place; below a microampere nothing."""
    assert current_text(amperes) == shown


@pytest.mark.parametrize("name", RANKED)
def test_the_ranking_is_the_posterior(name: str) -> None:
    """Each row's share is the posterior's to four places, and no cause that is left out is likelier than one that is shown."""
    marginal = session_of(name).marginal
    assert marginal is not None
    rows = SHOWN[name]["reply"]["screen"]["ranking"]
    shown = [row["cause"] for row in rows]
    for row in rows:
        assert row["share"] == f"{marginal[row['cause']]:.4f}"
        assert row["percent"] == percent(marginal[row["cause"]])
        assert row["title"] == WORDS[f"cause.{row['cause']}.title"]
    left_out = [value for cause, value in marginal.items() if cause not in shown]
    assert max(left_out, default=0) <= min(marginal[cause] for cause in shown) + 1e-9
    assert len(rows) >= min(3, sum(value > 0.01 for value in marginal.values()))


@pytest.mark.parametrize("name", RANKED)
def test_the_currents_are_those_of_the_network(name: str) -> None:
    """The currents beside the leading causes are residuals of that cause as found, each with what its device does at that current."""
    session = session_of(name)
    found = session.evidence
    assert found is not None
    assert session.hypotheses is not None
    says = {"holds": "it holds", "may trip": "it may trip", "trips": "it trips"}
    for row in SHOWN[name]["reply"]["screen"]["ranking"][:3]:
        lines = [line for line in row["numbers"] if "would see" in line]
        possible: set[str] = set()
        for index in session.hypotheses.members[session.hypotheses.causes.index(row["cause"])]:
            where, number, _ = found.members[index]
            made = found.predicted[where].outlooks(contexts.AS_FOUND)
            assert made is not None
            for watch, amperes in zip(made[0], made[1][number].residual_a, strict=True):
                verdict = devices.verdict(devices.DEVICES[watch.device], amperes, watch.non_operating_ma, watch.operating_ma)
                if verdict in says:
                    possible.add(f"The {WORDS[f'device.{watch.role}']} would see {current_text(amperes)}: {says[verdict]}.")
        assert lines
        assert set(lines) <= possible


def test_a_ratio_says_how_much_likelier_the_answer_is() -> None:
    """The ratio beside an answer is P(answer | cause) over P(answer | the rest), both from the posterior without that answer."""
    name = "outcome_named_by_a_reading"
    session = session_of(name)
    assert session.hypotheses is not None
    row = SHOWN[name]["reply"]["screen"]["ranking"][0]
    line = next(line for line in row["for"] if WORDS["test.bond_ohms.title"] in line)
    shown = float(re.search(r"([\d.]+) times as likely", line)[1])  # type: ignore[index]
    observation = next(one for one in session.observations if one.answer.question == "bond_ohms")
    before = [weight / chance for weight, chance in zip(session.weights, observation.likelihood, strict=True)]
    mine = set(session.hypotheses.members[session.hypotheses.causes.index(row["cause"])])

    def chance(indices: set[int]) -> float:
        weight = math.fsum(before[index] for index in indices)
        return math.fsum(before[index] * observation.likelihood[index] for index in indices) / weight

    ratio = chance(mine) / chance(set(range(len(before))) - mine)
    assert shown == pytest.approx(ratio, rel=0.05, abs=0.5)


# --- tonight -------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("name", RANKED)
def test_tonight_holds_the_advice_of_every_cause_that_may_be(name: str) -> None:
    """Advice for tonight is that of every cause above one per cent, none left out, none twice, what can kill first."""
    marginal = session_of(name).marginal
    assert marginal is not None
    shown = SHOWN[name]["reply"]["screen"]["tonight"]
    likely = [cause for cause, value in marginal.items() if value > 0.01]
    lines = {line: CAUSE[cause].lethal for cause in likely for line in WORDS[f"cause.{cause}.tonight"] if not CAUSE[cause].lethal}
    lines |= {line: True for cause in likely for line in WORDS[f"cause.{cause}.tonight"] if CAUSE[cause].lethal}
    assert len(shown) == len(set(shown))
    assert set(shown) == set(lines)
    assert [lines[line] for line in shown] == sorted((lines[line] for line in shown), reverse=True)


@pytest.mark.parametrize("cause", [cause.id for cause in CAUSES if cause.lethal])
def test_what_can_kill_is_unplugged_and_told_tonight(cause: str) -> None:
    """The advice of every cause that can kill begins with: unplugged, nobody swims, the marina is told."""
    unplugged, swims, told = WORDS[f"cause.{cause}.tonight"][:3]
    assert "unplugged" in unplugged
    assert "swims" in swims
    assert "marina" in told


def test_every_outcome_of_the_contract_keeps_the_boat_unplugged_or_unloaded() -> None:
    """No outcome comes without advice against swimming and for unplugging, as long as anything that can kill is above one per cent."""
    outcomes = [pair["reply"]["screen"] for pair in SHOWN.values() if pair["reply"]["screen"]["kind"] == "outcome"]
    assert len(outcomes) >= 6
    for shown in outcomes:
        assert any("swims" in line for line in shown["tonight"])
        assert any("unplugged" in line for line in shown["tonight"])
        assert shown["verdict"]["marina"]


# --- words ---------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("name", SHOWN)
def test_no_screen_says_what_safety_forbids(name: str) -> None:
    """No text of any example breaks a rule of sentence_rules, with its numbers and titles filled in; trade steps are judged as such."""
    shown = SHOWN[name]["reply"]["screen"]
    question = (shown["form"] or {}).get("question")
    trade = question in TEST and "user" not in TEST[question].roles
    card = {key: shown[key] for key in ("title", "lead", "cautions", "steps", "facts", "why")}
    for_all = {key: part for key, part in shown.items() if key not in card and key not in ("answered", "version")}
    # A verdict quotes what the trade will do to confirm it; "ranking" quotes titles of tests of any role.
    assert {
        line: forbidden(line, "trade" if trade else "owner") for line in texts(card) if forbidden(line, "trade" if trade else "owner")
    } == {}
    assert {line: forbidden(line, "trade") for line in texts(for_all) if forbidden(line, "trade")} == {}


@pytest.mark.parametrize("name", SHOWN)
def test_no_screen_has_a_field_left_open_or_two_stops_in_a_row(name: str) -> None:
    """Every field is filled, no sentence ends twice, and no text is empty within a list."""
    shown = SHOWN[name]["reply"]["screen"]
    for line in texts({key: part for key, part in shown.items() if key != "answered"}):
        assert not re.search(r"[{}]|\?\.|\.\.|\bnan\b", line), line
    for key in ("lead", "cautions", "steps", "tonight", "assumed"):
        assert all(line.strip() for line in shown[key])


def test_the_static_sections_have_every_sign_and_every_label() -> None:
    """The sections written into the page hold each sign with its own orders, both kinds of not knowing, and every label of the page."""
    made = static_sections("en")
    assert set(made) == {"gate", "stop", "tonight", "cautions", "page"}
    assert set(made["gate"]) == {"title", "lead", "signs", "none", "unknown"}
    assert [sign["value"] for sign in made["gate"]["signs"]] == list(GATE_SIGNS)
    assert set(made["stop"]) == {"title", "lead", "signs"}
    assert set(made["stop"]["signs"]) == set(HALTS)
    assert all(section["title"] and len(section["orders"]) >= 3 for section in made["stop"]["signs"].values())
    assert set(made["tonight"]) == {"title", "lead", "orders"}
    assert set(made["cautions"]) == {"title", "lines"}
    assert made["page"] == {key.removeprefix("page."): text for key, text in WORDS.items() if key.startswith("page.")}
    assert all(isinstance(text, str) and text for text in texts(made))


@pytest.mark.parametrize("sign", HALTS)
def test_a_stop_on_the_screen_is_the_stop_in_the_page(sign: str) -> None:
    """A stop that the core shows has the title and orders that the page shows with no core."""
    answers = (
        [Answer("gate", None, sign, 1)] if sign != "not_clear" else [Answer("gate", None, "none", 1), Answer("clear", "main_off", "no", 2)]
    )
    shown: dict[str, Any] = screen(replay(answers))
    static = static_sections("en")["stop"]
    assert shown["kind"] == "stop"
    assert (shown["title"], shown["steps"]) == (static["signs"][sign]["title"], static["signs"][sign]["orders"])
    assert shown["lead"] == static["lead"]
    assert shown["form"] is None


def test_another_language_is_a_key_error() -> None:
    """A language we do not have is refused, never guessed."""
    with pytest.raises(KeyError):
        words_of("xx")
