"""What a person reports of what is really so: readings with an instrument's error, mistakes now and then, and "I don't know"."""

from __future__ import annotations

import math
import random
from collections import Counter
from typing import TYPE_CHECKING

from strayline.catalogue.questions import CLEAR, GATE, QUESTION, UNKNOWN
from strayline.catalogue.tests import STATED, Test
from strayline.contexts import AS_FOUND, expand
from strayline.devices import opening_patterns
from strayline.likelihood import LIMITS, LOOKS_LIKE, MOMENTS
from strayline.openings import delayed_roles
from strayline.session import CANNOT, OVER_RANGE

if TYPE_CHECKING:
    from cases import Case
    from referee import World

# How often somebody does not know, or will not do it (common practice).
DOES_NOT_KNOW = {"opened": 0.03, "when": 0.08, "afloat": 0.0, "neighbour": 0.12, "inverter": 0.08}
TEST_UNCLEAR, TEST_DECLINED = 0.02, 0.03
PLAIN = {"afloat": 0.1}  # facts that are mistaken more rarely than answers in general, by this factor
# Errors at two spreads: a share of the reading and an amount in the unit of the test (clamp: method; meters: common practice).
INSTRUMENTS = {"clamp": (0.05, 0.8), "ohmmeter": (0.02, 0.2), "insulation": (0.05, 0.001)}
LAST_OF_SCALE = {"ohm": 4e7, "Mohm": 2e3}  # beyond it a meter shows no end
PER_UNIT = {"mA": 1e3, "ohm": 1.0, "Mohm": 1e-6}
WRONG_DECADES = {"mA": (-0.5, 3.5), "ohm": (-1.0, 7.0), "Mohm": (-3.0, 2.0)}  # where a reading that is simply wrong may lie
GUESSED = {"pedestal": 0.6, "aboard": 0.2, "both": 0.1, "feeder": 0.1}  # what opened where nothing is there to open anything
FEEBLE = 0.05  # a residual that is less of every threshold explains nothing


class Witness:
    """Somebody who looks, tries and reports. `wrong` is the share of mistaken answers; every answer is the same however often it is told.

    `unheard` counts what was asked and this study has no truth for: it is answered "I don't know".
    """

    def __init__(self, case: Case, world: World, wrong: float, unheard: Counter[str]) -> None:
        self.case = case
        self.world = world
        self.wrong = wrong
        self.unheard = unheard
        self.told: Counter[str] = Counter()

    def _draw(self, purpose: str, name: str) -> random.Random:
        return random.Random(f"{self.case.key}/{purpose}/{name}/{self.told[name]}")

    def question(self, name: str, facts: dict[str, str]) -> str:
        """The answer to a question."""
        if name == GATE.id:
            return "none"
        if name == CLEAR.id:
            return "clear"
        if name in facts:
            return facts[name]
        draw = self._draw("question", name)
        if draw.random() < DOES_NOT_KNOW.get(name, 0.1):
            return UNKNOWN
        value = self._fact(name, draw)
        if value is None:
            self.unheard[f"question {name}"] += 1
            return UNKNOWN
        return self._mistaken(name, value, QUESTION[name].choices, draw)

    def _mistaken(self, name: str, value: str, choices: tuple[str, ...], draw: random.Random) -> str:
        others = [choice for choice in choices if choice != value]
        slip, other = draw.random(), draw.choice(others) if others else value
        return other if slip < self.wrong * PLAIN.get(name, 1.0) else value

    def _fact(self, name: str, draw: random.Random) -> str | None:
        if name == "opened":
            return self._opened(draw)
        if name == "when":
            return self._when(draw)
        latent = next((one for one in self.case.latents if one.name == name), None)
        if latent is not None:
            looks = LOOKS_LIKE.get(latent.value, {latent.value: 1.0})
            return draw.choices(list(looks), list(looks.values()))[0]
        if name in STATED:
            return self._stated(name, QUESTION[name].choices, draw)
        return None

    def _stated(self, name: str, choices: tuple[str, ...], draw: random.Random) -> str:
        cause = self.case.causes[0].rpartition(":")[2] if self.case.causes else ""
        return draw.choices(choices, STATED[name].get(cause, STATED[name][""]))[0]

    def _opened(self, draw: random.Random) -> str:
        """Which device was found open: those that open as found race; where none does, the one nearest to it."""
        state = self.world.state(AS_FOUND, self.case.faults)
        if state is None:
            return UNKNOWN
        opened = self.world.opened(AS_FOUND, draw, self.case.faults) or []
        roles = dict.fromkeys((watch.role for watch in opened), 1.0)
        if not roles:
            pulls = {watch.role: self.world.pull(watch, state, self.case.faults) for watch in state.watched}
            nearest = max(pulls, key=pulls.__getitem__, default="")
            if not nearest or pulls[nearest] < FEEBLE:
                return draw.choices(list(GUESSED), list(GUESSED.values()))[0]
            return nearest
        patterns = opening_patterns(roles, delayed_roles(state.watched))
        return draw.choices([one for one in patterns if one != "none"], [share for one, share in patterns.items() if one != "none"])[0]

    def _when(self, draw: random.Random) -> str:
        """When it trips: as the cause's own timing says, or in the first switching step in which something opens."""
        if self.case.moment != "computed":
            return self.case.moment
        for choice, context in MOMENTS:
            if self._would(context, draw):
                return choice
        if self._would(AS_FOUND, draw) or any(self._would(one, draw) for one in expand("one_load", self.world.installation)):
            return "one_load"
        return "switching_off" if self._would("suspect_out", draw) else "random"

    def _would(self, context: str, draw: random.Random) -> bool:
        return bool(self.world.opened(context, draw, self.case.faults))

    def test(self, test: Test) -> tuple[str, bool]:
        """What is reported of a test, and whether hands were laid on it at all."""
        draw = self._draw("test", test.id)
        self.told[test.id] += 1
        declined, unclear = draw.random() < TEST_DECLINED, draw.random() < TEST_UNCLEAR
        if declined:
            return CANNOT, False
        value = self._number(test, draw) if test.model == "number" else self._outcome(test, draw)
        if value is None:
            return CANNOT, False
        if value == CANNOT:
            return CANNOT, True
        return (UNKNOWN if unclear else value), True

    def _outcome(self, test: Test, draw: random.Random) -> str | None:
        value = self._seen(test, draw)
        return None if value is None else self._mistaken(test.id, value, test.outcomes, draw)

    def _seen(self, test: Test, draw: random.Random) -> str | None:
        """What a test with named outcomes truly shows; None where it cannot be done here."""
        if test.id == "test_button":
            state = self.world.state(test.context, self.world.now(draw))
            mine = [watch for watch in state.watched if watch.role == "pedestal"] if state else []
            return None if not mine else "opens" if all(self.world.temper(watch).works for watch in mine) else "stays"
        if test.model == "stated":
            if test.id in STATED:
                return self._stated(test.id, test.outcomes, draw)
            self.unheard[f"test {test.id}"] += 1
            return None
        if test.model == "trips":
            trips = self.world.trips(test.context, draw)
            return None if trips is None else "trips" if trips else "holds"
        if test.model == "loads":
            each = [trips for _, trips in self.world.singles(draw)]
            return None if not each else "any_trips" if all(each) else "one_trips" if any(each) else "holds_all"
        if test.model == "continuity":
            return self._continuity(test)
        self.unheard[f"test {test.id}"] += 1
        return None

    def _continuity(self, test: Test) -> str | None:
        state = self.world.state(test.context, self.case.faults)
        ohms = state.ohms_through() if state else None
        if ohms is None:
            return None
        crossed = ohms["crossed neutral"] < 1.0 <= ohms["neutral"] or ohms["crossed line"] < 1.0
        return "exchanged" if crossed else "ground_open" if ohms["ground"] > 10.0 else "fine"

    def _number(self, test: Test, draw: random.Random) -> str | None:
        """A reading as typed: the highest over the test's states. Where one of them trips it cannot be read."""
        found: list[float] = []
        there = self.world.now(draw)
        for context in expand(test.context, self.world.installation):
            state = self.world.state(context, there)
            if state is None:
                continue
            if state.watched and self.world.opened(context, draw, there):
                return CANNOT
            value = state.reading(test.reading)
            if value is None:
                self.unheard[f"reading {test.reading}"] += 1
                return None
            found.append(value * PER_UNIT[test.unit])
        return self._read(test, max(found), draw) if found else None

    def _read(self, test: Test, value: float, draw: random.Random) -> str:
        share, amount = INSTRUMENTS[test.instrument]
        slip, decade, one, other = draw.random(), draw.random(), self._error(draw), self._error(draw)
        if slip < self.wrong:
            low, high = WRONG_DECADES[test.unit]
            value = 10 ** (low + decade * (high - low))
        else:
            value = abs(value * (1 + share / 2 * one) + amount / 2 * other)
        if value > LAST_OF_SCALE.get(test.unit, math.inf):
            return OVER_RANGE
        low, high = LIMITS[test.unit]
        return f"{min(max(value, low), high):.4f}"

    def _error(self, draw: random.Random) -> float:
        """A normal error; with heavy tails Student's t of two degrees of freedom."""
        normal = draw.gauss(0.0, 1.0)
        chi = draw.gammavariate(1.0, 2.0)
        return normal / math.sqrt(chi / 2.0) if self.case.heavy_tails else normal
