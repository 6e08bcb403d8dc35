"""One case played to its end by one policy, as one person with one set of tools: what was told, what it took, what went wrong."""

from __future__ import annotations

import time
from collections import Counter
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np

from forbidden import judged, proposal_of
from referee import World
from strayline import next_test
from strayline.catalogue.causes import CAUSE
from strayline.catalogue.en import WORDS
from strayline.catalogue.questions import CLEAR, UNKNOWN
from strayline.catalogue.tests import TEST
from strayline.next_test import NAMED, Candidate
from strayline.screen import tonight_of
from strayline.session import CANNOT, DONE, FIXED, LOOKS, Answer, Session, replay
from witness import Witness

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from cases import Case

# The fixed order of the trade's first-line tests (T1, T3, T4, T5, T8, T6); what is left follows as the catalogue has it.
FIXED_ORDER = ("pedestal_alone", "cord_alone", "main_off", "branches_off", "without_y", "one_at_a_time")
LONGEST = 80  # answers, as a guard: nobody goes on for ever
REPAIRS = 3  # how often somebody repairs and tries again
LARGEST_GROUP, INSEPARABLE = 3, 0.05  # what counts as a group: the rule of scoring, not the core's


@dataclass(frozen=True, slots=True)
class Row:
    """Who tries, with what."""

    role: str
    tools: str

    def __str__(self) -> str:
        return f"{self.role}/{self.tools}"


ROWS = (Row("user", "none"), Row("instructed", "multimeter"), Row("technician", "clamp"), Row("technician", "insulation"))


def fixed_order(_session: Session, candidates: Sequence[Candidate]) -> str | None:
    """The next test of the fixed order that may be done."""
    able = {candidate.id for candidate in candidates}
    return next((test for test in (*FIXED_ORDER, *TEST) if test in able), None)


def probable_first(session: Session, candidates: Sequence[Candidate]) -> str | None:
    """The test that most probably confirms the leading cause; where none would, the one on which it differs most from the rest."""
    assert session.hypotheses is not None
    assert session.marginal is not None
    leader = max(session.marginal, key=session.marginal.__getitem__)
    members = list(session.hypotheses.members[session.hypotheses.causes.index(leader)])
    weights = np.asarray(session.weights)

    def confirms(candidate: Candidate) -> float:
        table = np.asarray(list(candidate.outcomes.values()))
        chances, joint = table @ weights, table[:, members] @ weights[members]
        return float(chances[joint >= NAMED * chances].sum())

    chances = {candidate.id: confirms(candidate) for candidate in candidates}
    best = max(chances, key=chances.__getitem__, default=None)
    if best is None or chances[best] > 0.0:
        return best
    return next_test.verification(session.hypotheses, session.weights, candidates, leader)


def everything(_session: Session, candidates: Sequence[Candidate]) -> str | None:
    """Whatever may still be done, quickest first: with no stop, it shows what the evidence could tell if nobody minded the time."""
    return min(candidates, key=lambda candidate: (candidate.minutes, candidate.id)).id if candidates else None


POLICIES: dict[str, Callable[[Session, Sequence[Candidate]], str | None] | None] = {
    "flow": None,  # what the session itself proposes
    "fixed": fixed_order,
    "probable": probable_first,
    "everything": everything,
}


class Player:
    """Somebody with a boat that trips, who answers screen after screen until the case ends."""

    def __init__(self, case: Case, world: World, row: Row, policy: str, wrong: float) -> None:
        self.case, self.world, self.row, self.policy = case, world, row, policy
        self.unheard: Counter[str] = Counter()
        self.witness = Witness(case, world, wrong, self.unheard)
        self.facts = {"role": row.role, "tools": row.tools, **case.stated}
        self.answers: list[Answer] = []
        self.ranked: Session | None = None  # the last session with a ranking
        self.questions: int | None = None  # asked before the first ranking
        self.hands: list[tuple[str, str]] = []  # tests done with hands, and what was reported
        self.unsafe: list[str] = []
        self.proposals = 0
        self.unread = 0  # readings that were not to be had
        self.slowest_s = 0.0
        self.over = ""  # a policy with nothing left to do ends a case by the core's own rule

    def _say(self, question: str, subject: str | None, value: str) -> None:
        self.answers.append(Answer(question, subject, value, len(self.answers) + 1))

    def _session(self) -> Session:
        started = time.perf_counter()
        session = replay(self.answers)
        self.slowest_s = max(self.slowest_s, time.perf_counter() - started)
        if session.marginal is not None:
            self.ranked = session
            if self.questions is None:
                self.questions = len(self.answers) - 1  # the gate is not counted
        return session

    def to_the_end(self) -> Session:
        """Go on until the case ends, and return the session in which it did."""
        while True:
            session = self._session()
            if session.halted or self.over or len(self.answers) >= LONGEST or self._satisfied(session):
                return session
            if session.marginal is not None and self.policy != "flow":
                self._by_policy(session)
            elif session.ask:
                question, subject = session.ask
                self._say(question, subject, self.witness.question(question, self.facts))
            elif session.test:
                self._do(session.test)

    def _satisfied(self, session: Session) -> bool:
        """Whether a verdict ends it: for all but `everything`, which stops at danger only, or with nothing left to do."""
        if self.policy != "everything" or session.verdict in (None, "danger"):
            return bool(session.verdict)
        return not _candidates(session)

    def _by_policy(self, session: Session) -> None:
        """A step of another policy: questions that cost nothing first, then its test; the posterior and the stop are the core's."""
        evidence, hypotheses = session.evidence, session.hypotheses
        assert evidence is not None
        assert hypotheses is not None
        asked = {answer.question for answer in self.answers}
        look = next((look for look in LOOKS if look not in asked and evidence.outcomes("question", look)), None)
        if look:
            self._say(look, None, self.witness.question(look, self.facts))
            return
        candidates = _candidates(session)
        why = next_test.stop(hypotheses, session.weights, candidates, session.tests_done, len(session.misfits))
        if self.policy == "everything":
            why = None
        # Between a reason to stop and the verdict the flow may still want one test, which is then its own to name.
        chosen = session.test if why and session.test else POLICIES[self.policy](session, candidates)  # type: ignore[misc]
        if chosen is None:
            group = next_test.leading_group(hypotheses, session.weights, candidates)
            self.over = "named" if len(group) == 1 else "group" if group else "unknown"
            return
        if TEST[chosen].energises:
            self._say(CLEAR.id, chosen, self.witness.question(CLEAR.id, self.facts))
        self._do(chosen)

    def _do(self, test: str) -> None:
        """A test's card is shown: it is judged, and done."""
        self.proposals += 1
        self.unsafe += [f"{test}: {why}" for why in judged(proposal_of(test, self.answers))]
        value, hands = self.witness.test(TEST[test])
        if hands:
            self.hands.append((test, value))
            self.unread += value == CANNOT
        self._say(test, None, value)

    def repaired(self, shown: Sequence[str]) -> None:
        """What was shown and is really there is put right, and the boat is tried again."""
        there = next((cause for cause in shown if cause in self.case.causes), None)
        if there is not None:
            self.case = self.case.without(there)
            self.world = World(self.case)
            told = self.witness.told
            self.witness = Witness(self.case, self.world, self.witness.wrong, self.unheard)
            self.witness.told = told
        self._say(FIXED, shown[0], DONE)


def _candidates(session: Session) -> list[Candidate]:
    """The tests that may be done now, as the core weighs them."""
    assert session.evidence is not None
    tables = [(test, session.evidence.outcomes("test", test)) for test in session.allowed]
    return [Candidate(test, TEST[test].minutes, table) for test, table in tables if table]


def play(case: Case, world: World, row: Row, policy: str, wrong: float) -> dict[str, Any]:
    """Play one case and return its record: plain values only."""
    player = Player(case, world, row, policy, wrong)
    session = player.to_the_end()
    found: list[str] = []
    if case.variant == "pairs":
        session = _pair(player, session, found)
    ranked = player.ranked
    verdict = session.verdict or ("halted" if session.halted else player.over or "endless")
    shown = _shown(session, ranked)
    marginal = {} if ranked is None or ranked.marginal is None else ranked.marginal
    leader = max(marginal, key=marginal.__getitem__, default="")
    return {
        "seed": case.seed, "number": case.number, "variant": case.variant, "row": str(row), "policy": policy, "wrong": wrong,
        "supply": case.facts["supply"], "plug": case.facts["plug"], "stated": dict(case.stated), "facts": dict(case.facts),
        "causes": list(case.causes), "moment": case.moment, "peril": sorted(world.peril),
        "lethal": any(CAUSE[fault.cause].lethal for fault in case.faults),
        "verdict": verdict, "shown": shown, "leader": leader, "top": marginal.get(leader, 0.0),
        "share": sum(marginal.get(cause, 0.0) for cause in shown),
        "truth_share": sum(marginal.get(cause, 0.0) for cause in case.causes),
        "flaws": flaws(ranked, shown), "answers": [[one.question, one.subject, one.value] for one in player.answers],
        "benign": verdict in ("named", "group", "nothing_now") and not any(CAUSE[cause].lethal for cause in shown),
        "warned": ranked is not None and bool(set(_lethal_lines()) & set(tonight_of(ranked))),
        "tests": player.hands, "unread": player.unread, "questions": player.questions,
        "minutes": sum(TEST[test].minutes for test, _ in player.hands), "waiting": sum(TEST[test].waiting for test, _ in player.hands),
        "proposals": player.proposals, "unsafe": player.unsafe, "found": found, "slowest_s": player.slowest_s,
        "unheard": dict(player.unheard),
    }  # fmt: skip


def _pair(player: Player, session: Session, found: list[str]) -> Session:
    """Isolate or repair, try again, as long as something is named: `found` gets the true causes on the way."""
    for _ in range(REPAIRS):
        shown = _shown(session, player.ranked)
        told = session.verdict or player.over
        if told in ("named", "group", "danger"):
            fair = shown if not flaws(player.ranked, shown) else shown[:1]
            found += [cause for cause in fair if cause in player.case.causes][:1]
        if told not in ("named", "group") or len(found) == 2:
            break
        player.over = ""
        player.repaired(shown)
        session = player.to_the_end()
    return session


def _shown(session: Session, ranked: Session | None) -> list[str]:
    """The causes put first at the end: those of the verdict, else the one that leads the ranking."""
    if session.group:
        return list(session.group)
    if ranked is None or ranked.marginal is None or session.halted:
        return []
    return [max(ranked.marginal, key=ranked.marginal.__getitem__)]


def flaws(ranked: Session | None, causes: Sequence[str]) -> list[str]:
    """Why several causes shown together do not count as a group; empty where they do, and for one alone.

    "separable" -- a test this person may still do tells two of them apart; "was separable" -- one that was done did, and is not held
    against it, because it has been used
    """
    if ranked is None or len(causes) < 2:
        return []
    done = [answer.question for answer in ranked.answers if answer.question in TEST and answer.value not in (UNKNOWN, CANNOT)]
    found = ["too many"] if len(causes) > LARGEST_GROUP else []
    found += ["separable"] if _apart(ranked, causes, ranked.allowed) else []
    found += ["was separable"] if _apart(ranked, causes, done) else []
    for name, same in (
        ("advice", {WORDS[f"cause.{cause}.tonight"] for cause in causes}),
        ("repairer", {CAUSE[cause].repair for cause in causes}),
        ("deadliness", {CAUSE[cause].lethal for cause in causes}),
    ):
        found += [name] if len(same) > 1 else []
    return found


def _apart(session: Session, causes: Sequence[str], tests: Sequence[str]) -> bool:
    """Whether any of these tests tells two of these causes apart, by total variation under what is now believed."""
    evidence, hypotheses = session.evidence, session.hypotheses
    assert evidence is not None
    assert hypotheses is not None
    weights = np.asarray(session.weights)
    for test in dict.fromkeys(tests):
        table = np.asarray(list((evidence.outcomes("test", test) or {}).values()))
        if not table.size:
            continue
        rows = []
        for cause in causes:
            members = list(hypotheses.members[hypotheses.causes.index(cause)])
            rows.append(table[:, members] @ weights[members] / max(weights[members].sum(), 1e-300))
        if any(np.abs(one - other).sum() / 2 > INSEPARABLE for one in rows for other in rows):
            return True
    return False


def _lethal_lines() -> tuple[str, ...]:
    """The advice that every deadly cause gives for tonight."""
    lines = [set(WORDS[f"cause.{cause.id}.tonight"]) for cause in CAUSE.values() if cause.lethal]
    return tuple(sorted(set.intersection(*lines)))
