"""Random walks through the guided flow, taken once and shared by the tests that look at what was proposed on the way."""

from __future__ import annotations

import random
from dataclasses import dataclass
from typing import TYPE_CHECKING

import pytest

from strayline.catalogue.questions import CLEAR, QUESTION
from strayline.catalogue.tests import TEST
from strayline.session import CANNOT, FIXED, SETUP, UNKNOWN, Answer, choices_of, replay

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from strayline.session import Session

# Every supply with every way to plug in that it has, each with other devices; and the two facts nobody told.
SETUPS: tuple[dict[str, str], ...] = (
    {"supply": "split_120_240", "plug": "one_cord", "pedestal_device": "device_30", "aboard_device": "device_30"},
    {"supply": "split_120_240", "plug": "one_cord_four_wire", "pedestal_device": "class_a", "aboard_device": "none"},
    {"supply": "split_120_240", "plug": "two_cords", "pedestal_device": "device_30", "aboard_device": "unknown"},
    {"supply": "split_120_240", "plug": "combining_y", "pedestal_device": "device_30", "aboard_device": "none"},
    {"supply": "wye_120_208", "plug": "combining_y", "pedestal_device": "unknown", "aboard_device": "device_30"},
    {"supply": "wye_120_208", "plug": "splitting_y", "pedestal_device": "device_30", "aboard_device": "device_30"},
    {"supply": "split_120_240", "plug": "straight_adapter", "pedestal_device": "unknown", "aboard_device": "unknown"},
    {"supply": "split_120_240", "plug": "homemade", "pedestal_device": "device_30", "aboard_device": "none"},
    {"supply": "single_230", "plug": "one_cord", "pedestal_device": "none", "aboard_device": "device_30"},
    {"supply": "single_230", "plug": "homemade", "pedestal_device": "unknown", "aboard_device": "unknown"},
    {"supply": "split_120_240", "plug": "unknown", "pedestal_device": "device_30", "aboard_device": "unknown"},
)
ROLES = ("user", "instructed", "technician", "electrician", "unknown")
TOOLS = ("none", "multimeter", "clamp", "insulation", "unknown")
LONGEST = 90


@dataclass(frozen=True, slots=True)
class Step:
    """One screen of a walk: the answers that led to it and what was shown. `facts` are the set-up answers."""

    walk: int
    answers: tuple[Answer, ...]
    facts: Mapping[str, str]
    ask: tuple[str, str | None] | None
    test: str | None
    verdict: str | None
    halted: str | None
    group: tuple[str, ...]


def numbered(pairs: Sequence[tuple[str, str | None, str]]) -> list[Answer]:
    """Answers from (question, subject, value), in this order."""
    return [Answer(question, subject, value, seq) for seq, (question, subject, value) in enumerate(pairs, 1)]


def _reported(draw: random.Random, session: Session, test_id: str) -> str:
    """An outcome of a test: half the time what one of the hypotheses still possible would show, else any at all."""
    if draw.random() < 0.07:
        return draw.choice((UNKNOWN, CANNOT))
    test = TEST[test_id]
    if test.model == "number":
        return f"{10 ** draw.uniform(-2, 4):.2f}"
    table = session.evidence.outcomes("test", test_id) if session.evidence else None
    if table is None or draw.random() < 0.5:
        return draw.choice(test.outcomes)
    truth = draw.choices(range(len(session.weights)), session.weights)[0]
    return draw.choices(list(table), [column[truth] for column in table.values()])[0]


def _walk(number: int, setup: Mapping[str, str], role: str, tools: str) -> list[Step]:
    draw = random.Random(number)
    wanted = {**setup, "role": role, "tools": tools, "gate": "none"}
    given: list[tuple[str, str | None, str]] = []
    steps: list[Step] = []
    while len(given) < LONGEST:
        answers = tuple(numbered(given))
        session = replay(answers)
        steps.append(Step(number, answers, session.facts, session.ask, session.test, session.verdict, session.halted, session.group))
        if session.halted:
            break
        if session.verdict:
            if session.verdict not in ("named", "group") or draw.random() < 0.5:
                break
            given.append((FIXED, max(session.marginal, key=session.marginal.__getitem__), "done"))
        elif session.ask and session.ask[0] == CLEAR.id:
            given.append((*session.ask, "clear" if draw.random() < 0.97 else draw.choice(("not_clear", UNKNOWN))))
        elif session.ask:
            question = session.ask[0]
            given.append((question, None, wanted.get(question) or draw.choice((*choices_of(question, session.facts), UNKNOWN))))
        elif session.test:
            given.append((session.test, None, _reported(draw, session, session.test)))
    return steps


def walked(first: int, count: int) -> list[Step]:
    """Every screen of seeded walks: `count` people a set-up, numbered from `first`, over all roles and tools, technicians most."""
    steps: list[Step] = []
    for place, setup in enumerate(SETUPS):
        draw = random.Random(first + place)
        for turn in range(count if UNKNOWN not in (setup["supply"], setup["plug"]) else count // 2):  # those have the largest tables
            role, tools = ("technician", draw.choice(TOOLS)) if turn % 3 == 0 else (draw.choice(ROLES), draw.choice(TOOLS))
            steps += _walk(first + 1000 * place + turn, setup, role, tools)
    return steps


@pytest.fixture(scope="session")
def walks() -> list[Step]:
    """A hundred walks, for every quick run."""
    assert set(SETUPS[0]) | {"role", "tools"} == set(SETUP)
    assert all(setup["plug"] in (*QUESTION["plug"].choices, UNKNOWN) for setup in SETUPS)
    return walked(0, 10)


@pytest.fixture(scope="session")
def many_walks() -> list[Step]:
    """A thousand walks more, for the full run."""
    return walked(500, 100)
