"""handle(request_json) -> reply_json: the one message between the page and the core. It never raises; only text crosses."""

from __future__ import annotations

import json
from collections.abc import Mapping
from typing import Any

from strayline import session
from strayline.errors import RequestError, StraylineError
from strayline.screen import LANGUAGES, screen
from strayline.session import Answer

PROTOCOL = 1
MAX_CHARACTERS = 1_000_000
MAX_ANSWERS = 500
MAX_VALUE = 200
UNITS = ("si", "us")


def handle(text: str) -> str:
    """The reply to one request, both JSON text. Any text at all gets a reply: a screen or an error with a code."""
    request_id = ""
    try:
        request = _parsed(text)
        request_id = request["id"]
        answers = [_answer(row, number) for number, row in enumerate(request["answers"])]
        reply: dict[str, Any] = {"screen": screen(session.replay(answers), request["language"])}
    except StraylineError as error:
        reply = {"error": {"code": error.code, "message": error.message, "details": error.details}}
    except Exception as error:  # noqa: BLE001 - a bug of ours must reach the person as a sentence, never as silence
        reply = {
            "error": {
                "code": "bug",
                "message": "Something in the engine went wrong.",
                "details": {"kind": type(error).__name__, "text": str(error)[:200]},
            }
        }
    text_back = json.dumps({"id": request_id, "protocol": PROTOCOL, **reply}, ensure_ascii=False, default=str)
    return text_back.encode("utf-8", "replace").decode("utf-8")  # half of a surrogate pair, typed or sent, would get through nowhere


def _parsed(text: str) -> dict[str, Any]:
    """The request with its defaults filled. Raises RequestError where it is not of the protocol's form."""
    if len(text) > MAX_CHARACTERS:
        raise RequestError(f"a request has at most {MAX_CHARACTERS} characters")
    try:
        raw = json.loads(text)
    except (ValueError, RecursionError):
        raise RequestError("a request is JSON text") from None
    if not isinstance(raw, Mapping):
        raise RequestError("a request is a JSON object")
    request_id = raw.get("id", "")
    if not isinstance(request_id, (str, int)) or isinstance(request_id, bool) or len(str(request_id)) > 100:
        raise RequestError("id is text or a whole number")
    if raw.get("protocol") != PROTOCOL or isinstance(raw.get("protocol"), bool):
        raise RequestError(f"this engine speaks protocol {PROTOCOL}", protocol=str(raw.get("protocol"))[:20])
    if raw.get("language", "en") not in LANGUAGES:
        raise RequestError(f"language is one of {', '.join(LANGUAGES)}", language=str(raw.get("language"))[:20])
    if raw.get("units", "si") not in UNITS:
        raise RequestError(f"units is one of {', '.join(UNITS)}", units=str(raw.get("units"))[:20])
    if raw.get("view", "flow") != "flow":
        raise RequestError("this engine shows the view flow", view=str(raw.get("view"))[:40])
    answers = raw.get("answers", [])
    if not isinstance(answers, list) or len(answers) > MAX_ANSWERS:
        raise RequestError(f"answers is a list of at most {MAX_ANSWERS}")
    return {"id": request_id, "language": raw.get("language", "en"), "answers": answers}


def _answer(row: object, number: int) -> Answer:
    if not isinstance(row, Mapping):
        raise RequestError(f"answers[{number}] is an object")
    question, subject, value, seq, at = (row.get(key) for key in ("question", "subject", "value", "seq", "at"))
    if not isinstance(question, str):
        raise RequestError(f"answers[{number}].question is text")
    if subject is not None and not isinstance(subject, str):
        raise RequestError(f"answers[{number}].subject is text or null")
    if not isinstance(value, str) or len(value) > MAX_VALUE:
        raise RequestError(f"answers[{number}].value is text of at most {MAX_VALUE} characters")
    if isinstance(seq, bool) or not isinstance(seq, int):
        raise RequestError(f"answers[{number}].seq is a whole number")
    return Answer(question, subject, value, seq, at if isinstance(at, str) else "")
