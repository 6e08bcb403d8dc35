"""The named request and reply pairs of tests/contract, as the browser tests read them."""

from __future__ import annotations

import json
from pathlib import Path
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from collections.abc import Iterator

EXAMPLES: dict[str, dict[str, Any]] = {
    path.stem: json.loads(path.read_text(encoding="utf-8"))
    for path in sorted((Path(__file__).resolve().parents[1] / "contract").glob("*.json"))
}

# The screens that the engine draws: the gate stands in the page itself, and an error has no screen.
SCREENS: dict[str, dict[str, Any]] = {
    name: example["reply"]["screen"]
    for name, example in EXAMPLES.items()
    if "screen" in example["reply"] and (example["reply"]["screen"]["form"] or {}).get("question") != "gate"
}

_NOT_FOR_PEOPLE = {"kind", "question", "subject", "input", "value", "cause", "causes", "share", "stop", "version"}


def texts(part: Any) -> Iterator[str]:
    """Every text of a screen, or of a part of one, that a person should find on it."""
    if isinstance(part, str):
        yield part
    elif isinstance(part, list):
        for item in part:
            yield from texts(item)
    elif isinstance(part, dict):
        for key, item in part.items():
            if key not in _NOT_FOR_PEOPLE:
                yield from texts(item)


def ending(screen: dict[str, Any]) -> str:
    """How a case ended: the kind of its verdict, or "stop"; "" while it goes on."""
    return screen["verdict"]["stop"] if screen["verdict"] else screen["kind"] if screen["kind"] == "stop" else ""
