"""Make the request and reply pairs of this folder from cases.toml: `PYTHONPATH=core python3 tests/contract/write.py`, by hand.

Run it after a change of words, shapes or inference, and read the difference before it is committed: test_contract.py holds the core to
exactly these replies, and the browser tests show them. A pair that no case names any more is deleted by hand.
"""

from __future__ import annotations

import json
import tomllib
from pathlib import Path
from typing import Any

from strayline.protocol import PROTOCOL, handle

HERE = Path(__file__).parent
CASES: dict[str, dict[str, Any]] = tomllib.loads((HERE / "cases.toml").read_text(encoding="utf-8"))


def answers_of(name: str) -> list[dict[str, Any]]:
    """The answers of a case: those of the case it comes after, changed in place, and its own, a minute apart."""
    case = CASES[name]
    rows = answers_of(case["after"]) if "after" in case else []
    for question, value in case.get("change", ()):
        rows = [{**row, "value": value} if row["question"] == question else row for row in rows]
    for question, *subject, value in case.get("answers", ()):
        seq = len(rows) + 1
        at = f"2031-05-02T18:{seq:02}:00+00:00"
        rows.append({"question": question, "subject": subject[0] if subject else None, "value": value, "seq": seq, "at": at})
    return rows


def request_of(name: str) -> dict[str, Any]:
    """The whole request of a case."""
    request = {"id": name, "protocol": PROTOCOL, "language": "en", "units": "si", "view": "flow", "answers": answers_of(name)}
    return request | CASES[name].get("request", {})


def pair_of(name: str) -> dict[str, Any]:
    """A case's request with the reply that the core gives to it."""
    request = request_of(name)
    return {"name": name, "request": request, "reply": json.loads(handle(json.dumps(request)))}


if __name__ == "__main__":
    for each in CASES:
        text = json.dumps(pair_of(each), ensure_ascii=False, indent=1)
        (HERE / f"{each}.json").write_text(text + "\n", encoding="utf-8")
