"""One request, one reply: any text at all gets JSON back, and a request of the protocol's form is never told to be a bug of ours."""

from __future__ import annotations

import json
import random
from pathlib import Path
from typing import Any

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from strayline.catalogue.causes import CAUSE
from strayline.catalogue.questions import QUESTION, UNKNOWN
from strayline.catalogue.tests import TEST
from strayline.protocol import MAX_ANSWERS, MAX_CHARACTERS, MAX_VALUE, PROTOCOL, handle
from strayline.session import CANNOT, DONE, FIXED, OVER_RANGE

PAIRS = [json.loads(path.read_text(encoding="utf-8")) for path in sorted((Path(__file__).parents[1] / "contract").glob("*.json"))]
# One set-up, so that its tables are made once; what is mutated is all that follows.
GIVEN = {"role": "technician", "tools": "insulation", "supply": "single_230", "plug": "one_cord", "pedestal_device": "device_30"}
quick = settings(max_examples=150, deadline=None, suppress_health_check=[HealthCheck.too_slow])

json_values = st.recursive(
    st.none() | st.booleans() | st.integers() | st.floats() | st.text(max_size=12),
    lambda inner: st.lists(inner, max_size=4) | st.dictionaries(st.text(max_size=8), inner, max_size=4),
    max_leaves=12,
)


def reply_to(text: str) -> dict[str, Any]:
    """The reply, of one of the two shapes; NaN and Infinity are no JSON."""

    def refused(constant: str) -> None:
        pytest.fail(f"{constant} in a reply")

    text_back = handle(text)
    text_back.encode("utf-8")  # half a surrogate pair would not get through
    reply = json.loads(text_back, parse_constant=refused)
    assert set(reply) in ({"id", "protocol", "screen"}, {"id", "protocol", "error"})
    assert reply["protocol"] == PROTOCOL
    if "error" in reply:
        assert set(reply["error"]) == {"code", "message", "details"}
        assert reply["error"]["code"] == "request", reply["error"]
    return reply


def request(answers: object = (), **changed: object) -> str:
    """A request's text."""
    return json.dumps({"id": "7", "protocol": PROTOCOL, "language": "en", "units": "si", "view": "flow", "answers": answers} | changed)


def rows(*pairs: tuple[str, str | None, str]) -> list[dict[str, object]]:
    """Answers from (question, subject, value)."""
    return [
        {"question": question, "subject": subject, "value": value, "seq": seq, "at": ""}
        for seq, (question, subject, value) in enumerate(pairs, 1)
    ]


# --- any text ------------------------------------------------------------------------------------------------------


@given(st.text())
@quick
def test_any_text_gets_a_reply(text: str) -> None:
    """Any text at all gets a reply that is JSON, and an error where it is no request."""
    reply_to(text)


@given(json_values)
@quick
def test_any_json_gets_a_reply(value: object) -> None:
    """Any JSON value gets a reply, an error unless it is a request."""
    reply_to(json.dumps(value))


@given(
    st.dictionaries(
        st.sampled_from(["id", "protocol", "language", "units", "view", "answers", "x"]), json_values | st.just(1) | st.just("en")
    )
)
@quick
def test_any_values_under_the_keys_of_a_request_get_a_reply(value: dict[str, object]) -> None:
    """Wrong types under the right keys are told in a sentence."""
    reply_to(json.dumps(value))


@pytest.mark.parametrize(
    "text",
    [
        "", " ", "null", "[]", "{", '"', "\x00", "\ufeff{}", "{}" * 3, "[" * 100_000, '{"a":' * 50_000, "9" * 10_000, "1e999", "NaN",
        "\ud800", '{"id": "7", "protocol": 1, "answers": [' + "[" * 20_000,
        "x" * (MAX_CHARACTERS + 1), json.dumps({"id": "y" * MAX_CHARACTERS}),
    ],
    ids=range(18),
)  # fmt: skip
def test_rubbish_is_an_error_of_the_request(text: str) -> None:
    """Empty text, cut-off and very deep JSON, huge numbers and too long texts are each an error with the code "request"."""
    assert reply_to(text)["error"]["code"] == "request"


# --- the form of a request -----------------------------------------------------------------------------------------


@pytest.mark.parametrize("id_", ["7", "", 0, 12345, "é✓", "x" * 100])
def test_the_id_comes_back(id_: object) -> None:
    """A readable id comes back as it was, in a screen and in an error that lies further in."""
    assert reply_to(request(id=id_))["id"] == id_
    assert reply_to(request(id=id_, answers=[{"question": 1}]))["id"] == id_


@pytest.mark.parametrize(
    "changed",
    [
        {"protocol": 2}, {"protocol": "1"}, {"protocol": True}, {"protocol": None}, {"protocol": 1.5}, {"language": "xx"},
        {"language": ["en"]}, {"language": {}}, {"units": "imperial"}, {"units": []}, {"view": "map"}, {"view": {}}, {"answers": None},
        {"answers": {}}, {"answers": "x"}, {"answers": [None]}, {"answers": [[]]}, {"answers": ["gate"]}, {"id": None}, {"id": []},
        {"id": True}, {"id": "x" * 101}, {"id": 1.5},
    ],
    ids=str,
)  # fmt: skip
def test_another_form_is_told_in_a_sentence(changed: dict[str, object]) -> None:
    """A newer protocol, another language or view, and wrong types are each an error of one plain sentence."""
    error = reply_to(request(**changed))["error"]
    assert error["code"] == "request"
    assert error["message"]
    assert "\n" not in error["message"]


@pytest.mark.parametrize(
    "changed",
    [
        {"question": None}, {"question": 3}, {"question": "colour"}, {"question": ""}, {"subject": 3}, {"subject": []}, {"value": None},
        {"value": 1}, {"value": True}, {"value": "x" * (MAX_VALUE + 1)}, {"seq": "1"}, {"seq": None}, {"seq": 1.0}, {"seq": True},
    ],
    ids=str,
)  # fmt: skip
def test_an_answer_of_another_form_is_told_in_a_sentence(changed: dict[str, object]) -> None:
    """Each key of an answer has one type; anything else is an error that says which."""
    good = {"question": "gate", "subject": None, "value": "none", "seq": 1, "at": ""}
    assert "screen" in reply_to(request([good]))
    assert reply_to(request([good | changed]))["error"]["code"] == "request"


def test_what_is_left_out_has_its_default() -> None:
    """Language, units, view and answers may be left out; then it is as if nothing had been answered."""
    bare = reply_to(json.dumps({"id": "7", "protocol": PROTOCOL}))
    assert bare == reply_to(request())
    assert bare["screen"]["form"]["question"] == "gate"


def test_other_keys_are_passed_over() -> None:
    """A key that this engine does not know, in the request or an answer, changes nothing, so that a newer page may add one."""
    answers = rows(("gate", None, "none"))
    assert reply_to(request([row | {"note": {}} for row in answers], colour="red")) == reply_to(request(answers))


# --- many and odd answers ------------------------------------------------------------------------------------------


def test_the_longest_list_of_answers() -> None:
    """As many answers as are allowed get a screen; one more is an error."""
    given = [("gate", None, "none"), *((question, None, value) for question, value in GIVEN.items()), ("aboard_device", None, "none")]
    given += [("opened", None, "pedestal"), ("when", None, "any_load")]
    full = [*given, *[("branches_off", None, "holds")] * (MAX_ANSWERS - len(given))]
    assert reply_to(request(rows(*full)))["screen"]["kind"] in ("test", "question", "outcome")
    assert reply_to(request(rows(*full, ("branches_off", None, "holds"))))["error"]["code"] == "request"


odd_answers = st.lists(
    st.fixed_dictionaries(
        {
            "question": st.sampled_from([*QUESTION, *TEST, FIXED]),
            "subject": st.none() | st.sampled_from([*TEST, *CAUSE, "", "x"]),
            "value": st.sampled_from(
                [
                    UNKNOWN,
                    CANNOT,
                    OVER_RANGE,
                    DONE,
                    "",
                    "none",
                    "clear",
                    "trips",
                    "holds",
                    "one_trips",
                    "wet",
                    "burnt",
                    "yes",
                    "ashore",
                    "pedestal",
                    "wet",
                ]
            )
            | st.floats(0, 1e5).map(lambda value: f"{value:.3g}".replace(".", ","))
            | st.text(max_size=8),
            "seq": st.integers(-3, 40),
        }
    ),
    max_size=14,
)


@given(odd_answers, st.booleans())
@settings(max_examples=300, deadline=None, suppress_health_check=[HealthCheck.too_slow])
def test_odd_answers_in_any_order_get_a_reply(answers: list[dict[str, object]], started: bool) -> None:
    """Known questions with values of their own, of others, and none at all, repeated and out of order, never end in a bug of ours."""
    first = rows(("gate", None, "none"), *((question, None, value) for question, value in GIVEN.items())) if started else []
    # After the set-up, so that what is drawn chooses no new tables; a set-up fact among it is dropped for the same reason.
    kept = [row for row in answers if row["question"] not in GIVEN or not started]
    reply_to(request([*({**row, "seq": -100 + place} for place, row in enumerate(first)), *kept]))


@pytest.mark.parametrize("seed", range(40))
def test_mutated_pairs_of_the_contract_get_a_reply(seed: int) -> None:
    """A request of the contract with answers dropped, doubled, exchanged, cut short or given another's value gets a screen or an error."""
    draw = random.Random(seed)
    pair = draw.choice([pair for pair in PAIRS if isinstance(pair["request"]["answers"], list) and len(pair["request"]["answers"]) > 3])
    answers = [dict(row) for row in pair["request"]["answers"]]
    for _ in range(draw.randint(1, 4)):
        place = draw.randrange(len(answers))
        match draw.randrange(5):
            case 0:
                answers.pop(place)
            case 1:
                answers.append({**answers[place], "seq": 99})
            case 2:
                answers[place]["value"] = draw.choice(answers)["value"]
            case 3:
                answers[place]["seq"] = draw.choice(answers)["seq"]
            case _:
                answers = answers[: max(place, 2)]
    reply = reply_to(request(answers))
    assert reply["id"] == "7"


def test_half_of_a_surrogate_pair_gets_through() -> None:
    """Half of a surrogate pair, as a value or an id, comes back as a question mark in a reply that is UTF-8."""
    reply = reply_to(request(rows(("gate", None, "none"), ("role", None, "\ud800")), id="\udfff"))
    assert reply["id"] == "?"
    assert reply["screen"]["form"]["value"] == "?"


@pytest.mark.parametrize("cut", [0.1, 0.5, 0.9, 0.999])
def test_a_request_cut_short_is_an_error(cut: float) -> None:
    """A request that was cut off on its way is an error, never half a case."""
    text = json.dumps(max(PAIRS, key=lambda pair: len(json.dumps(pair["request"])))["request"])
    assert reply_to(text[: int(len(text) * cut)])["error"]["code"] == "request"


def test_the_same_request_gets_the_same_bytes() -> None:
    """The reply is text that depends on the request alone: asked twice, with others between, it is the same to the byte."""
    texts = [json.dumps(pair["request"]) for pair in PAIRS]
    first = [handle(text) for text in texts]
    assert [handle(text) for text in reversed(texts)] == first[::-1]
