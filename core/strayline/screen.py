"""Session -> Screen: everything the phone shows, already worded. Every leaf is text; every key is always there.

The gate, stop and tonight sections are also written into the page at build (`static_sections`), so that they work with no engine.
"""

from __future__ import annotations

import importlib
import math
from collections.abc import Mapping, Sequence
from operator import truediv
from typing import Any

from strayline import __version__, contexts, devices
from strayline.catalogue.causes import CAUSE
from strayline.catalogue.questions import CLEAR, GATE, GATE_SIGNS, QUESTION, UNKNOWN
from strayline.catalogue.tests import TEST
from strayline.likelihood import WRONG
from strayline.next_test import NOTHING_NOW
from strayline.posterior import likelihood_ratios
from strayline.predict import HULL, ROLES
from strayline.session import CANNOT, DONE, FIXED, LOOKS, OVER_RANGE, OVER_UNITS, SETUP, Answer, Session, choices_of

Screen = dict[str, Any]
Words = Mapping[str, "str | tuple[str, ...]"]

LANGUAGES = ("en",)
SHOWN_CAUSES = 6
SHOWN_SHARE = 0.01
TONIGHT_SHARE = 0.01  # tonight's advice is the worst case over every cause above this
REPAIRERS = ("electrician", "technician", "user")  # the strictest first
TELLING_RATIO = 1.25  # an observation that changes the odds by less says little


def words_of(language: str) -> Words:
    """The catalogue of one language. KeyError for a language we do not have."""
    if language not in LANGUAGES:
        raise KeyError(language)
    found: Words = importlib.import_module(f"strayline.catalogue.{language}").WORDS
    return found


class _Speech:
    """The words of one language, with their fields filled."""

    def __init__(self, words: Words) -> None:
        self.words = words

    def say(self, key: str, **fields: str) -> str:
        text = self.words[key]
        assert isinstance(text, str), key
        return text.format(**fields) if fields else text

    def lines(self, key: str, **fields: str) -> list[str]:
        found = self.words[key]
        texts = (found,) if isinstance(found, str) else found
        return [text.format(**fields) if fields else text for text in texts]


def screen(session: Session, language: str = "en") -> Screen:
    """The whole screen of a session."""
    speech = _Speech(words_of(language))
    made: Screen = {
        "kind": "question", "title": "", "lead": [], "cautions": [], "steps": [], "facts": [], "form": None, "why": "", "ranking": [],
        "verdict": None, "tonight": [], "answered": _answered(session, speech), "assumed": [],
        "progress": speech.say("progress.start"), "version": __version__,
    }  # fmt: skip
    if session.marginal is not None:
        made |= {"ranking": _ranking(session, speech), "tonight": tonight(session, speech), "assumed": _assumed(session, speech)}
        made["progress"] = _progress(session, speech)
    if session.halted:
        return made | _stop(session.halted, speech)
    if session.verdict:
        return made | _outcome(session, speech)
    if session.ask:
        return made | _question(session, speech, *session.ask)
    if session.test:
        return made | _test(session, speech, session.test)
    raise AssertionError("a session asks, tests, halts or concludes")


# --- kinds ---------------------------------------------------------------------------------------------------------


def _stop(sign: str, speech: _Speech) -> Screen:
    return {
        "kind": "stop",
        "title": speech.say(f"stop.{sign}.title"),
        "lead": speech.lines("stop.lead"),
        "steps": speech.lines(f"stop.{sign}.orders"),
    }


def _question(session: Session, speech: _Speech, question: str, subject: str | None) -> Screen:
    choices = [{"value": value, "label": speech.say(f"question.{question}.{value}")} for value in choices_of(question, session.facts)]
    choices.append({"value": UNKNOWN, "label": speech.say("question.unknown")})
    text = speech.say(f"question.{question}.text")
    lead = [speech.say(f"test.{subject}.title")] if question == CLEAR.id and subject in TEST else []
    return {
        "kind": "question",
        "title": text,
        "lead": lead,
        "form": _form(session, speech, question, subject, "choice", text, choices),
        "why": speech.say(f"question.{question}.why"),
    }


def _test(session: Session, speech: _Speech, test_id: str) -> Screen:
    test = TEST[test_id]
    number = test.model == "number"
    choices = [] if number else [{"value": outcome, "label": speech.say(f"test.{test_id}.{outcome}")} for outcome in test.outcomes]
    if test.unit in OVER_UNITS:
        choices.append({"value": OVER_RANGE, "label": speech.say("test.over_range")})
    choices.append({"value": UNKNOWN, "label": speech.say("question.unknown")})
    choices.append({"value": CANNOT, "label": speech.say("test.cannot")})
    legend = speech.say(f"test.{test_id}.ask") if number else speech.say("test.ask")
    facts = [
        {"label": speech.say("fact.who"), "text": speech.say(f"who.{test.roles[0]}")},
        {"label": speech.say("fact.tool"), "text": speech.say(f"tool.{test.tool}")},
        {"label": speech.say("fact.minutes"), "text": speech.say("fact.minutes.text", minutes=f"{test.minutes:g}")},
    ]
    if test.waiting:
        facts.append({"label": speech.say("fact.waiting"), "text": speech.say("fact.waiting.text", minutes=f"{test.waiting:g}")})
    facts.append({"label": speech.say("fact.power"), "text": speech.say("fact.power.on" if test.energises else "fact.power.off")})
    return {
        "kind": "test",
        "title": speech.say(f"test.{test_id}.title"),
        "cautions": speech.lines(f"test.{test_id}.cautions"),
        "steps": speech.lines(f"test.{test_id}.steps"),
        "facts": facts,
        "form": _form(session, speech, test_id, None, "number" if number else "choice", legend, choices, test.unit),
        "why": speech.say(f"test.{test_id}.why"),
    }


def _form(
    session: Session,
    speech: _Speech,
    question: str,
    subject: str | None,
    kind: str,
    legend: str,
    choices: list[dict[str, str]],
    unit: str = "",
) -> Screen:
    problem, value = "", ""
    found = session.problem
    if found and found.answer.question == question:
        problem, value = speech.say(found.key, **found.fields), found.answer.value[:200]
    return {
        "question": question, "subject": subject, "input": kind, "legend": legend, "choices": choices, "unit": unit, "value": value,
        "problem": problem,
    }  # fmt: skip


def _outcome(session: Session, speech: _Speech) -> Screen:
    assert session.marginal is not None
    assert session.verdict is not None
    ranked = _ranked(session)
    causes = [] if session.verdict == "unknown" else list(session.group) or [ranked[0]]
    share = math.fsum(session.marginal[cause] for cause in causes)
    fields = {"percent": percent(share), "title": speech.say(f"cause.{ranked[0]}.title"), "count": str(len(causes))}
    lead = speech.lines(f"verdict.{session.verdict}.lead", **fields)
    if session.unwatched:
        lead = [speech.say("verdict.unwatched.title") + ".", *speech.lines("verdict.unwatched.lead"), *lead]
    if session.misfits:
        lead.append(speech.say("progress.misfit", answers=_misfits(session, speech)))
    fixers = sorted({CAUSE[cause].repair for cause in causes}, key=REPAIRERS.index)
    title = speech.say(f"verdict.{session.verdict}.title", **fields)
    unsure = len(causes) > 1 or session.verdict == "danger"
    verdict = {
        "stop": session.verdict,
        "causes": causes,
        "title": title,
        "lead": [
            line
            for cause in causes
            for line in (
                *([speech.say("verdict.possible", title=speech.say(f"cause.{cause}.title"))] if unsure else []),
                *speech.lines(f"cause.{cause}.lead"),
            )
        ],
        "repair": " ".join(speech.say(f"repair.{role}") for role in fixers) or speech.say("repair.technician"),
        "remedy": list(
            dict.fromkeys(
                line for cause in causes for line in (*speech.lines(f"cause.{cause}.remedy"), *speech.lines(f"cause.{cause}.confirm"))
            )
        ),
        "marina": " ".join(dict.fromkeys(line for cause in causes or (NOTHING_NOW,) for line in speech.lines(f"cause.{cause}.marina"))),
    }
    form = None
    if session.verdict in ("named", "group"):
        done = [{"value": DONE, "label": speech.say("question.fixed.done")}]
        form = _form(session, speech, FIXED, causes[0], "choice", speech.say("question.fixed.text"), done)
    return {"kind": "outcome", "title": title, "lead": lead, "verdict": verdict, "form": form}


# --- parts ---------------------------------------------------------------------------------------------------------


def _ranked(session: Session) -> list[str]:
    assert session.marginal is not None
    marginal = session.marginal
    return sorted(marginal, key=lambda cause: (-round(marginal[cause], 9), cause))


def percent(share: float) -> str:
    """A probability in words: never 0 % and never 100 %, because nothing here is that sure."""
    whole = round(share * 100)
    if whole < 1:
        return "< 1 %"
    return "> 99 %" if whole > 99 else f"{whole} %"


def current_text(amperes: float) -> str:
    """A current as shown: mA below one ampere, A above; zero below one microampere."""
    if amperes < 1e-6:
        return "0 mA"
    if amperes < 0.9995:
        milliamperes = amperes * 1e3
        return f"{milliamperes:.1f} mA" if milliamperes < 9.95 else f"{milliamperes:.0f} mA"
    return f"{amperes:.1f} A"


def _ranking(session: Session, speech: _Speech) -> list[Screen]:
    assert session.marginal is not None
    rows = []
    spoken = _spoken(session)
    for place, cause in enumerate(_ranked(session)[:SHOWN_CAUSES]):
        share = session.marginal[cause]
        if place and share < SHOWN_SHARE:
            break
        told: Screen = {"numbers": [], "for": [], "against": []} if place > 2 else _why(session, speech, cause, spoken)
        rows.append({
            "cause": cause, "kind": CAUSE[cause].kind, "title": speech.say(f"cause.{cause}.title"), "percent": percent(share),
            "share": f"{share:.4f}", **told,
        })  # fmt: skip
    return rows


def _spoken(session: Session) -> list[dict[str, float]]:
    """For every observation, per cause, how many times as likely it was, seen with all the others already in."""
    assert session.hypotheses is not None
    found = []
    for observation in session.observations:
        before = list(map(truediv, session.weights, observation.likelihood))
        found.append(likelihood_ratios(session.hypotheses, before, observation.likelihood))
    return found


def _why(session: Session, speech: _Speech, cause: str, spoken: list[dict[str, float]]) -> Screen:
    """The residual at each device and the answers that speak most for and against one cause."""
    evidence = session.evidence
    assert evidence is not None
    hypotheses = session.hypotheses
    assert hypotheses is not None
    place = hypotheses.causes.index(cause)
    best = max(
        hypotheses.members[place], key=lambda index: (float(f"{session.weights[index]:.9e}"), -index)
    )  # last bits differ between builds
    where, number, _ = evidence.members[best]
    made = evidence.predicted[where].outlooks(contexts.AS_FOUND)
    numbers = []
    if made:
        watched, outlooks = made
        outlook = outlooks[number]
        for role in ROLES:
            seen = [(outlook.residual_a[index], watch) for index, watch in enumerate(watched) if watch.role == role]
            if seen:
                amperes, watch = max(seen, key=lambda pair: pair[0])
                verdict = devices.verdict(devices.DEVICES[watch.device], amperes, watch.non_operating_ma, watch.operating_ma)
                if verdict == "unprotected":
                    numbers.append(speech.say("why.unprotected", current=current_text(amperes)))
                else:
                    said = speech.say(f"verdict.{verdict.replace(' ', '_')}")
                    numbers.append(
                        speech.say("why.residual", device=speech.say(f"device.{role}"), current=current_text(amperes), verdict=said)
                    )
        hull = outlook.readings.get(HULL, 0.0)
        if hull >= 0.5:
            numbers.append(speech.say("why.hull", volts=f"{hull:.1f} V" if hull < 9.95 else f"{hull:.0f} V"))
    told: list[tuple[float, str]] = []
    for observation, ratios in zip(session.observations, spoken, strict=True):
        ratio = ratios[cause]
        told.append((ratio, _quoted(speech, observation.answer, ratio)))
    speak_for = sorted((pair for pair in told if pair[0] >= TELLING_RATIO), key=lambda pair: -pair[0])[:3]
    against = sorted((pair for pair in told if pair[0] <= 1 / TELLING_RATIO), key=lambda pair: pair[0])[:3]
    return {"numbers": numbers, "for": [line for _, line in speak_for], "against": [line for _, line in against]}


def _quoted(speech: _Speech, answer: Answer, ratio: float) -> str:
    asked, value = _asked(speech, answer), _value(speech, answer)
    times = max(ratio, 1 / ratio) if ratio > 0 else math.inf
    shown = f"{times:.1f}" if times < 9.95 else f"{times:.0f}" if times < 1000 else "> 1000"
    return speech.say("why.ratio.for" if ratio >= 1 else "why.ratio.against", asked=asked, answer=value, times=shown)


def _asked(speech: _Speech, answer: Answer) -> str:
    if answer.question in TEST:
        return speech.say(f"test.{answer.question}.title")
    if answer.question == FIXED:
        return speech.say("question.fixed.text")
    return speech.say(f"question.{answer.question}.text")


def _value(speech: _Speech, answer: Answer) -> str:
    test = TEST.get(answer.question)
    if answer.value == UNKNOWN:
        return speech.say("question.unknown")
    if answer.value in (CANNOT, OVER_RANGE):
        return speech.say(f"test.{answer.value}")
    if answer.question == FIXED:
        return speech.say(f"cause.{answer.subject}.title") if answer.subject in CAUSE else ""
    if test is not None and test.model == "number":
        return f"{answer.value.strip()[:40]} {test.unit}"
    known = test.outcomes if test is not None else QUESTION[answer.question].choices
    if answer.value not in known:
        return answer.value[:40]
    return speech.say(f"test.{answer.question}.{answer.value}" if test is not None else f"question.{answer.question}.{answer.value}")


def _answered(session: Session, speech: _Speech) -> list[Screen]:
    return [
        {
            "question": answer.question,
            "subject": answer.subject,
            "text": _asked(speech, answer),
            "value": answer.value,
            "value_text": _value(speech, answer),
        }
        for answer in session.answers
        if answer.question not in (GATE.id, CLEAR.id)
    ]


def tonight(session: Session, speech: _Speech) -> list[str]:
    """Advice for tonight: the worst case over every cause above TONIGHT_SHARE, deadly ones first."""
    assert session.marginal is not None
    marginal = session.marginal
    likely = [cause for cause in _ranked(session) if marginal[cause] > TONIGHT_SHARE]
    ordered = sorted(likely, key=lambda cause: (not CAUSE[cause].lethal, likely.index(cause)))
    return list(dict.fromkeys(line for cause in ordered for line in speech.lines(f"cause.{cause}.tonight")))


def tonight_of(session: Session, language: str = "en") -> list[str]:
    """Tonight's advice of a session, in one language."""
    return tonight(session, _Speech(words_of(language)))


def _assumed(session: Session, speech: _Speech) -> list[str]:
    told = {answer.question for answer in session.answers if answer.value not in (UNKNOWN, CANNOT)}
    unknown = [name for name in (*SETUP, *LOOKS) if name not in told and name not in ("role", "tools")]
    lines = [speech.say("assumed.unknown", asked=speech.say(f"question.{name}.text")) for name in unknown]
    assert session.evidence is not None
    installation = session.evidence.predicted[0].installation
    for key, value, unit in installation.assumed:
        if key.startswith(("cord.", "feeder.")) and unit != "C" and isinstance(value, float | int):
            what = key.removesuffix(f"_{unit}").replace("_", " ").replace(".", " ")
            lines.append(speech.say("assumed.default", what=what, value=f"{value:g} {unit}".strip().replace("mm2", "mm²")))
    return [*lines, speech.say("assumed.mistakes", percent=percent(WRONG)), speech.say("assumed.steady")]


def _misfits(session: Session, speech: _Speech) -> str:
    return ", ".join(f"“{_asked(speech, session.observations[index].answer)}”" for index in session.misfits)


def _progress(session: Session, speech: _Speech) -> str:
    assert session.marginal is not None
    leader = _ranked(session)[0]
    share = session.marginal[leader]
    if session.verdict == "group":
        together = math.fsum(session.marginal[cause] for cause in session.group)
        line = speech.say("progress.group", percent=percent(together), count=str(len(session.group)))
    else:
        key = "progress.early" if share < 0.5 else "progress.sure"
        line = speech.say(key, percent=percent(share), title=speech.say(f"cause.{leader}.title"))
    if session.tests_done:
        line += " " + speech.say("progress.tests", count=str(session.tests_done))
    if len(session.misfits) > 1:
        line += " " + speech.say("progress.misfit", answers=_misfits(session, speech))
    return line


# --- what is written into the page at build ------------------------------------------------------------------------


def static_sections(language: str = "en") -> Screen:
    """The gate, stop, tonight and caution sections and the page's fixed labels, for the build to write into the page."""
    speech = _Speech(words_of(language))
    halts: Sequence[str] = (*GATE_SIGNS, UNKNOWN, "not_clear")
    return {
        "gate": {
            "title": speech.say("gate.title"),
            "lead": speech.lines("gate.lead"),
            "signs": [{"value": sign, "label": speech.say(f"gate.{sign}")} for sign in GATE_SIGNS],
            "none": speech.say("gate.none"),
            "unknown": speech.say("gate.unknown"),
        },
        "stop": {
            "title": speech.say("stop.title"),
            "lead": speech.lines("stop.lead"),
            "signs": {sign: {"title": speech.say(f"stop.{sign}.title"), "orders": speech.lines(f"stop.{sign}.orders")} for sign in halts},
        },
        "tonight": {"title": speech.say("tonight.title"), "lead": speech.lines("tonight.lead"), "orders": speech.lines("tonight.orders")},
        "cautions": {"title": speech.say("cautions.title"), "lines": speech.lines("cautions.lines")},
        "page": {key.removeprefix("page."): text for key, text in speech.words.items() if key.startswith("page.")},
    }
