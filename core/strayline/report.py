"""What the terminal says: a diagnosis as JSON, and residuals, diagnosis and screens as text for people (rounded)."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from strayline import session
from strayline.catalogue.causes import CAUSE
from strayline.catalogue.questions import GATE, QUESTIONS, UNKNOWN
from strayline.catalogue.tests import TEST
from strayline.next_test import Candidate
from strayline.posterior import groups
from strayline.screen import Screen, current_text, percent, tonight_of, words_of
from strayline.session import LOOKS, Answer, Session

if TYPE_CHECKING:
    from strayline.casefile import Case


def diagnosis(case: Case) -> dict[str, Any]:
    """The reply of `core diagnose`: what the answers of a case say about its causes. It never reads faults or expectations.

    Questions the file leaves out count as "I don't know"; the gate counts as passed unless the file answers it.
    """
    given = {answer.question for answer in case.answers}
    missing = [question.id for question in QUESTIONS if question.id not in given and (question.opening or question.id in LOOKS)]
    filled = [Answer(name, None, UNKNOWN, 0) for name in missing]
    if GATE.id not in given:
        filled.append(Answer(GATE.id, None, "none", 0))
    answered = session.replay([*filled, *case.answers], case.installation)
    if answered.problem:
        raise answered.problem.error()
    if answered.halted:
        return {
            "ranking": [],
            "groups": [],
            "stop": "danger",
            "next_test": None,
            "tonight": [str(line) for line in words_of("en")["tonight.orders"]],
        }
    assert answered.marginal is not None
    words = words_of("en")
    ranked = sorted(answered.marginal, key=lambda cause: (-answered.marginal[cause], cause))  # type: ignore[index]
    test = TEST.get(answered.test or "")
    return {
        "ranking": [
            {"cause": cause, "kind": CAUSE[cause].kind, "title": words[f"cause.{cause}.title"], "probability": answered.marginal[cause]}
            for cause in ranked
        ],
        "groups": [list(group) for group in _groups(answered)],
        "stop": answered.verdict,
        "next_test": None if test is None else {"id": test.id, "title": words[f"test.{test.id}.title"], "minutes": test.minutes},
        "tonight": tonight_of(answered),
    }


def _groups(answered: Session) -> list[tuple[str, ...]]:
    """Causes that no test open to this person tells apart."""
    assert answered.evidence is not None
    assert answered.hypotheses is not None
    allowed = [
        Candidate(test, TEST[test].minutes, outcomes) for test in answered.allowed if (outcomes := answered.evidence.outcomes("test", test))
    ]
    return groups(answered.hypotheses, answered.weights, [candidate.outcomes for candidate in allowed])


def residuals_text(found: dict[str, Any]) -> str:
    """Residuals for people: one line per sensor, hull and blade."""
    lines = ["Residual at each sensor"]
    for sensor in found["sensors"]:
        rating = "no device" if sensor["rating_ma"] is None else f"{sensor['rating_ma']:g} mA device"
        lines.append(f"  {sensor['id']:<14} {current_text(sensor['residual_ma'] / 1e3):>9}  {rating:<14} {sensor['verdict']}")
    for title, key in (("Volts of each hull against the water", "hulls"), ("Volts of each bare blade", "live_blades")):
        if found[key]:
            lines += [title, *(f"  {row['id']:<14} {row['volts']:>7.2f} V" for row in found[key])]
    if found["opens_first"]:
        lines += ["Opens first", *(f"  {row['id']:<14} {percent(row['probability']):>7}" for row in found["opens_first"])]
    crossing = [row for row in found["crossings"] if row["ma"] >= 0.05]
    if crossing:
        lines.append("Where the current strays")
        lines += [f"  {row['sensor']:<14} {current_text(row['ma'] / 1e3):>9}  by {row['branch']} ({row['kind']})" for row in crossing]
    if found["floating"]:
        lines.append("Connected to nothing: " + ", ".join(found["floating"]))
    return "\n".join(lines)


def diagnosis_text(found: dict[str, Any]) -> str:
    """A diagnosis for people."""
    lines = [f"  {percent(row['probability']):>6}  {row['title']}" for row in found["ranking"][:6]]
    if found["stop"]:
        lines.append(f"Stop: {found['stop']}")
    if found["next_test"]:
        lines.append(f"Next: {found['next_test']['title']} (about {found['next_test']['minutes']:g} min)")
    return "\n".join([*lines, "Tonight", *(f"  - {line}" for line in found["tonight"])])


def screen_text(screen: Screen) -> str:
    """One screen of the guided flow as text."""
    lines = ["", screen["title"], "=" * min(len(screen["title"]), 78), *screen["lead"]]
    if screen["verdict"]:
        lines += [
            *screen["verdict"]["lead"],
            f"Who may fix it: {screen['verdict']['repair']}",
            *(f"  - {line}" for line in screen["verdict"]["remedy"]),
        ]
        lines.append(f"Tell the marina: {screen['verdict']['marina']}")
    lines += [f"  ! {line}" for line in screen["cautions"]]
    lines += [f"  {number}. {line}" for number, line in enumerate(screen["steps"], 1)]
    lines += [f"  {fact['label']}: {fact['text']}" for fact in screen["facts"]]
    if screen["tonight"] and screen["kind"] in ("outcome", "stop"):
        lines += ["Tonight:", *(f"  - {line}" for line in screen["tonight"])]
    for row in screen["ranking"]:
        lines.append(f"  {row['percent']:>6}  {row['title']}")
        lines += [f"            {line}" for line in (*row["numbers"], *row["for"], *row["against"])]
    form = screen["form"]
    if form:
        if form["problem"]:
            lines.append(f"  ! {form['problem']}")
        lines += ["", form["legend"]]
        if form["input"] == "number":  # a bare number is the reading, so the other answers have names here
            lines += [f"  a number in {form['unit']}", *(f"  {choice['value']} - {choice['label']}" for choice in form["choices"])]
        else:
            lines += [f"  {number}. {choice['label']}" for number, choice in enumerate(form["choices"], 1)]
    return "\n".join(lines)
