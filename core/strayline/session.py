"""replay(answers) -> Session: facts, hypotheses, posterior, what to ask or test next. Pure; it keeps no memory of a case.

The tables of a set-up are cached by the facts that make them, so a changed answer that leaves the set-up alone costs only the
inference. A fresh process returns the same session.
"""

from __future__ import annotations

import dataclasses
import functools
import json
import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from strayline import arrangements, contexts, likelihood
from strayline.aboard import water_ohms
from strayline.allowed import DANGEROUS_HULL_VOLTS, Situation, refusal, unwatched
from strayline.boat import own_parts
from strayline.catalogue.causes import CAUSE
from strayline.catalogue.questions import CLEAR, GATE, QUESTION, QUESTIONS, UNKNOWN
from strayline.catalogue.tests import ROLES, TEST, TESTS
from strayline.causes import Shunt
from strayline.errors import CaseError, RequestError
from strayline.likelihood import LIMITS, Evidence
from strayline.next_test import NAMED, NOTHING_NOW, Candidate, choose, leading_group, stop, verification
from strayline.parts import Installation, read
from strayline.posterior import Hypotheses, cause_marginal, misfit, posterior
from strayline.predict import HULL, Latent, predictions
from strayline.units import QuantityError, parse_quantity
from strayline.wiring import EARTH

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

CANNOT = "cannot"
OVER_RANGE = "over_range"  # the meter shows no end
OVER_UNITS = ("ohm", "Mohm")  # where that is a reading of its own
FIXED = "fixed"
DONE = "done"
SETUP = ("role", "tools", "supply", "plug", "pedestal_device", "aboard_device")  # facts that choose tables or tests, not evidence
LOOKS = ("afloat", "neighbour", "inverter")  # facts that are evidence about latents, asked when they tell something
FIXED_WEIGHT = 0.05  # what is left of a cause's prior after it was fixed
DANGER_SHARE = 0.10
HOMEMADE_WEIGHT = {"ground_neutral_exchanged": 6.0, "line_ground_exchanged": 40.0, "open_ground_with_leak": 4.0}
FREE_MINUTES = 0.3


@dataclass(frozen=True, slots=True)
class Answer:
    """One answer as it was given; `seq` orders, `at` is for display only."""

    question: str
    subject: str | None
    value: str
    seq: int
    at: str = ""


@dataclass(frozen=True, slots=True)
class Problem:
    """An answer that cannot be taken: the question is asked again with this said. `key` names the sentence, `fields` fill it."""

    answer: Answer
    key: str
    fields: dict[str, str]

    def error(self) -> CaseError:
        """The same as a file's error."""
        rule = "must be a number in {unit} from {low} to {high}".format(**self.fields) if self.fields else "no such answer"
        return CaseError(f"answers.{self.answer.question}", rule, self.answer.value)


@dataclass(frozen=True, slots=True)
class Observation:
    """One report that counts: its answer, its likelihood vector, how many outcomes it could have had."""

    answer: Answer
    likelihood: tuple[float, ...]
    outcomes: int


@dataclass(frozen=True, slots=True)
class Session:
    """Everything known after the answers.

    ask     -- the question (and its subject) to put now, or None
    test    -- the test to propose now, or None
    verdict -- why it stops ("named", "group", "nothing_now", "unknown", "danger") or None
    halted  -- the sign or "unknown"/"not_clear" that stopped everything at the gate, or None
    """

    answers: tuple[Answer, ...]
    facts: Mapping[str, str]
    problem: Problem | None = None
    halted: str | None = None
    ask: tuple[str, str | None] | None = None
    test: str | None = None
    verdict: str | None = None
    group: tuple[str, ...] = ()
    evidence: Evidence | None = None
    weights: tuple[float, ...] = ()
    hypotheses: Hypotheses | None = None
    observations: tuple[Observation, ...] = ()
    marginal: Mapping[str, float] | None = None
    misfits: tuple[int, ...] = ()
    tests_done: int = 0
    allowed: tuple[str, ...] = ()
    unwatched: bool = False


def replay(answers: Sequence[Answer], installation: object = None) -> Session:
    """The session after these answers, in `seq` order. `installation` is a case file's raw section, when there is one.

    Raises RequestError for answers that are not of the protocol's form; an unknown question is one.
    """
    ordered = tuple(sorted(answers, key=lambda answer: answer.seq))
    for answer in ordered:
        if answer.question not in QUESTION and answer.question not in TEST and answer.question != FIXED:
            raise RequestError(f"no such question: {answer.question[:40]!r}", question=answer.question[:40])
        if answer.question == FIXED and (answer.subject not in CAUSE or answer.value not in ("", DONE, UNKNOWN)):
            raise RequestError(f"fixed names a cause and is {DONE}", subject=str(answer.subject)[:40], value=answer.value[:40])
    known = None if installation is None else read(installation)
    facts = _facts(ordered) | ({} if known is None else arrangements.stated(known))
    problem = next((found for answer in ordered if (found := _problem(answer, facts))), None)
    halted = _halted(ordered)
    if halted:
        return Session(ordered, facts, problem, halted)
    if not any(answer.question == GATE.id for answer in ordered):
        return Session(ordered, facts, problem, ask=(GATE.id, None))
    if problem:
        question = problem.answer.question
        if question in TEST:
            return Session(ordered, facts, problem, test=question)
        return Session(ordered, facts, problem, ask=(question, problem.answer.subject))
    epoch, fixed = _epoch(ordered)
    if "combining_y" in fixed and facts.get("plug") == "combining_y" and known is None:
        facts |= {"plug": "straight_adapter"}  # the Y is out of use, and one plug stands in its place
    given = {answer.question for answer in ordered} if not fixed else {answer.question for answer in ordered} | {"opened", "when"}
    for asked in QUESTIONS:
        if asked.opening and asked.id not in given and _applies(asked.id, facts, installation):
            return Session(ordered, facts, ask=(asked.id, None))
    return _inferred(ordered, facts, epoch, fixed, installation)


def _problem(answer: Answer, facts: Mapping[str, str]) -> Problem | None:
    """What is wrong with an answer's value beside the other facts, if anything."""
    if answer.value in (UNKNOWN, CANNOT) or answer.question == FIXED or _over_range(answer):
        return None
    test = TEST.get(answer.question)
    if test is not None and test.model == "number":
        try:
            parse_quantity(answer.value, test.unit, *LIMITS[test.unit])
        except QuantityError as error:
            fields = {"unit": test.unit, "low": f"{LIMITS[test.unit][0]:g}", "high": f"{LIMITS[test.unit][1]:g}"}
            return Problem(answer, f"problem.{error.problem}", fields)
        return None
    choices = test.outcomes if test is not None else choices_of(answer.question, facts)
    if not answer.value.strip():
        return Problem(answer, "problem.no_choice", {})
    return None if answer.value in choices else Problem(answer, "problem.unknown_choice", {})


def _over_range(answer: Answer) -> bool:
    return answer.value == OVER_RANGE and answer.question in TEST and TEST[answer.question].unit in OVER_UNITS


def _halted(ordered: Sequence[Answer]) -> str | None:
    """The sign that stops everything: the last gate answer, a line before power that was not clear, or an end found burnt.

    "I don't know" counts as yes, at the gate and before power. What is found burnt is the sign of a burnt plug, seen later.
    """
    gate = [answer.value for answer in ordered if answer.question == GATE.id]
    if gate and gate[-1] != "none":
        return gate[-1] if gate[-1] in GATE.choices else UNKNOWN
    for answer in ordered:
        if answer.question == CLEAR.id and answer.value != "clear":
            return "not_clear"
    looked = [answer.value for answer in ordered if answer.question == "look_over"]
    return "hot_plug" if looked[-1:] == ["burnt"] else None


def _facts(ordered: Sequence[Answer]) -> dict[str, str]:
    return {answer.question: answer.value for answer in ordered if answer.question in SETUP and _problem(answer, {}) is None}


def _applies(question: str, facts: Mapping[str, str], installation: object) -> bool:
    if installation is not None and question in ("supply", "plug", "pedestal_device", "aboard_device"):
        return False
    return question != "tools" or facts.get("role") in ROLES


def _epoch(ordered: Sequence[Answer]) -> tuple[int, tuple[str, ...]]:
    """The seq after which reports count, and the causes fixed so far."""
    fixes = [answer for answer in ordered if answer.question == FIXED and answer.value != UNKNOWN]
    return (fixes[-1].seq if fixes else -1), tuple(answer.subject or "" for answer in fixes)


def choices_of(question: str, facts: Mapping[str, str]) -> tuple[str, ...]:
    """The choices of a question that exist with the stated facts: on 230 V there are no Y adapters of the two-line kind."""
    choices = QUESTION[question].choices
    if question == "plug" and facts.get("supply") == "single_230":
        return tuple(choice for choice in choices if choice in arrangements.TWO_WIRE_PLUGS)
    return choices


# --- inference -----------------------------------------------------------------------------------------------------


@functools.lru_cache(maxsize=16)
def _evidence(facts: tuple[tuple[str, str], ...], installation_json: str) -> Evidence:
    """The hypotheses and tables of one set-up, kept for the next answer."""
    stated = dict(facts)
    if installation_json:
        known = read(json.loads(installation_json))
        return likelihood.evidence([(predictions(known, [inverter_latents(known)]), 1.0)], stated)
    found = []
    for arrangement in arrangements.possible(stated):
        installation = read(arrangements.parts(arrangement, stated, neighbour=False, afloat=False))
        found.append((predictions(installation, latents(installation)), arrangement.share))
    return likelihood.evidence(found, stated)


def latents(installation: Installation) -> list[list[Latent]]:
    """The unknown facts of a typical set-up, as shunts: afloat or ashore, a neighbour's load running, an inverter aboard."""
    hull = installation.part("hull")
    water = Shunt("water", "hull.metal", EARTH, complex(water_ohms(hull)), "water", "hull")
    next_door = Shunt("next_door", "panel9.L1", "stove9.in", 0.002 + 0j, "line", "stove9")
    return [
        [Latent("afloat", "afloat", 0.93, (water,)), Latent("afloat", "ashore", 0.07)],
        [Latent("neighbour", "running", 0.35, (next_door,)), Latent("neighbour", "quiet", 0.65)],
        inverter_latents(installation),
    ]


def inverter_latents(installation: Installation) -> list[Latent]:
    """An inverter's own bond is closed while shore power is away: it is seen only with the cord out. A drawn one shows its own."""
    if installation.of_kind("inverter"):
        return [Latent("inverter", "yes", 1.0)]
    panel = next((part.id for part in own_parts(installation) if part.kind == "panel"), "panel")
    relay = Shunt("idle_relay", f"{panel}.N", f"{panel}.G", 0.05 + 0j, "bond", panel, contexts.ENERGISED)
    return [Latent("inverter", "yes", 0.3, (relay,)), Latent("inverter", "no", 0.7)]


def _inferred(ordered: tuple[Answer, ...], facts: dict[str, str], epoch: int, fixed: tuple[str, ...], installation: object) -> Session:
    setup = tuple(sorted((name, value) for name, value in facts.items() if name not in ("role", "tools")))
    evidence = _evidence(setup, "" if installation is None else json.dumps(installation, sort_keys=True))
    factors = dict.fromkeys(fixed, FIXED_WEIGHT)
    if facts.get("plug") == "homemade":
        factors |= HOMEMADE_WEIGHT
    hypotheses = evidence.reweighted(tuple(sorted(factors.items())))
    observations = tuple(found for answer in ordered if (found := _observation(evidence, answer, epoch)))
    weights = posterior(hypotheses, [observation.likelihood for observation in observations])
    marginal = cause_marginal(hypotheses, weights)
    unlikely = misfit(hypotheses, weights, [one.likelihood for one in observations], [one.outcomes for one in observations])
    misfits = tuple(index for index in unlikely if observations[index].answer.question not in LOOKS)  # a rare fact contradicts nothing
    reports = [(answer.question, answer.value) for answer in ordered if answer.seq > epoch and answer.question in TEST]
    done = {test for test, _ in reports}
    looked = {answer.question for answer in ordered if answer.question in LOOKS}
    last = {answer.question: answer.value for answer in ordered if answer.question in TEST}
    situation = Situation(facts, evidence, weights, reports, last)
    tests = [test for test in TESTS if test.id not in done and not refusal(test, situation)]
    candidates = [Candidate(test.id, test.minutes, outcomes) for test in tests if (outcomes := evidence.outcomes("test", test.id))]
    looks = [
        Candidate(look, FREE_MINUTES, outcomes)
        for look in LOOKS
        if look not in looked and (outcomes := evidence.outcomes("question", look))
    ]
    physical = sum(value not in (UNKNOWN, CANNOT) for _, value in reports)
    session = Session(
        ordered, facts, evidence=evidence, hypotheses=hypotheses, weights=weights, observations=observations, marginal=marginal,
        misfits=misfits, tests_done=physical, allowed=tuple(test.id for test in tests), unwatched=unwatched(facts, last),
    )  # fmt: skip
    dangerous = _dangerous(evidence, hypotheses, weights)
    if ("adapter_continuity", "ground_open") in reports:  # measured in the hand: nothing else need be likely
        dangerous = tuple(dict.fromkeys((*dangerous, "open_ground_with_leak")))
    if dangerous:
        return _with(session, verdict="danger", group=dangerous)
    first = _first(session, ordered)
    if first:
        return _with(session, test=first)
    why = stop(hypotheses, weights, candidates, physical, len(misfits))
    chosen = choose(hypotheses, weights, [*candidates, *looks])
    if facts.get("plug") == "homemade" and (why or chosen is None):
        deadly = max((cause for cause in marginal if CAUSE[cause].lethal), key=marginal.__getitem__)
        return _with(session, verdict="danger", group=(deadly,))  # a hook-up that nobody can vouch for is not to be used
    if why:
        group = leading_group(hypotheses, weights, candidates) if why == "group" else ()
        if group[:1] == (NOTHING_NOW,):
            why = NOTHING_NOW  # what cannot be told from it here is shown with it
        if why == NOTHING_NOW and "test_button" in session.allowed:
            return _with(session, test="test_button")  # holds prove nothing before the device has shown that it opens
        return _with(session, verdict=why, group=group)
    leader = max(marginal, key=marginal.__getitem__)
    if marginal[leader] >= NAMED and chosen:
        return _with(session, test=verification(hypotheses, weights, candidates, leader))
    if chosen is None:
        return _with(session, verdict="unknown")
    if chosen.id in LOOKS:
        return _with(session, ask=(chosen.id, None))
    return _with(session, test=chosen.id)


def _first(session: Session, ordered: Sequence[Answer]) -> str | None:
    """The test that comes before any gain in information: a Y comes out whole, and wet things are looked at before they get power."""
    wet = any(answer.question == "when" and answer.value == "wet" for answer in ordered)
    wanted = ("without_y", "look_over") if wet else ("without_y",)
    return next((test for test in wanted if test in session.allowed), None)


def _with(session: Session, **changes: object) -> Session:
    """The session with its next step; before a test that restores power the gate is asked again in one line.

    Only a line that was the last thing said counts: after anything else, things may have changed at the dock.
    """
    test = changes.get("test")
    if isinstance(test, str) and TEST[test].energises:
        last = session.answers[-1]
        if (last.question, last.subject, last.value) != (CLEAR.id, test, "clear"):
            changes["ask"] = (CLEAR.id, test)
    return dataclasses.replace(session, **changes)  # type: ignore[arg-type]


def _observation(evidence: Evidence, answer: Answer, epoch: int) -> Observation | None:
    """The likelihood of one answer, or None when it says nothing about the cause."""
    if answer.value in (UNKNOWN, CANNOT) or answer.question in (*SETUP, GATE.id, CLEAR.id, FIXED):
        return None
    if answer.question not in LOOKS and answer.seq < epoch:
        return None
    test = TEST.get(answer.question)
    outcomes = evidence.outcomes("test" if test else "question", answer.question)
    if outcomes is None:
        return None
    if test is not None and test.model == "number":
        low, high = LIMITS[test.unit]
        value = high if _over_range(answer) else parse_quantity(answer.value, test.unit, low, high)
        return Observation(answer, evidence.reading(test, value), len(outcomes))
    return Observation(answer, outcomes[answer.value], len(outcomes))


def _dangerous(evidence: Evidence, hypotheses: Hypotheses, weights: Sequence[float]) -> tuple[str, ...]:
    """The causes that put the boat's metal at a dangerous voltage, likeliest first, where together that is more than a small share of all.

    Empty where it is less. Of several only those are given that bring a fair part of it.
    """
    volts = evidence.readings(contexts.AS_FOUND, HULL)
    live = [weight if value > DANGEROUS_HULL_VOLTS else 0.0 for weight, value in zip(weights, volts, strict=True)]
    total = math.fsum(live)
    if total <= DANGER_SHARE:
        return ()
    shares = cause_marginal(hypotheses, live)
    return tuple(sorted((cause for cause in shares if shares[cause] > total / 4), key=lambda cause: (-shares[cause], cause)))
