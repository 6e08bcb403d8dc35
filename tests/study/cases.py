"""A case of the study: who is plugged in how, what is really wrong and how badly, what the devices are like, what is said about it.

Everything is drawn from the core's own tables (arrangements, causes, priors, severities, latents) and a seed. Each purpose has a stream
of its own, so that a variant changes what it is about and nothing else. Shares without a source are common practice.
"""

from __future__ import annotations

import dataclasses
import functools
import math
import random
from dataclasses import dataclass
from typing import TYPE_CHECKING

from referee import World
from strayline import arrangements
from strayline.arrangements import Arrangement
from strayline.catalogue.causes import CAUSE, CAUSES
from strayline.catalogue.questions import QUESTION, UNKNOWN
from strayline.components import SYSTEMS
from strayline.contexts import AS_FOUND
from strayline.faults import Fault
from strayline.openings import DEAD_SHARE
from strayline.parts import read
from strayline.predict import Latent, cause_weights, predictions
from strayline.session import HOMEMADE_WEIGHT, choices_of, latents
from strayline.severities import severities

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from strayline.parts import Installation

# Ways that the core gives no share, because nobody who leaves them unsaid has them.
RARE_SUPPLY, RARE_PLUG = 0.03, {"straight_adapter": 0.05, "splitting_y": 0.03, "homemade": 0.01}
RARELY = 0.02
PEDESTALS = {"60": {"device_30": 0.84, "class_a": 0.10, "none": 0.06}, "50": {"device_30": 0.96, "none": 0.04}}
ABOARD = {"60": {"device_30": 0.50, "none": 0.50}, "50": {"device_30": 0.70, "none": 0.30}}
NOT_SAID = {"supply": 0.04, "plug": 0.02, "pedestal_device": 0.12, "aboard_device": 0.10}
ATTEMPTS = 12  # severities tried until the boat trips as found, where the solve is to say when it trips
EDGE = 2.0  # by what factor a lone value of a grid may be off either way
MORE_DEAD, OUTSIDE, SECOND = 0.05, 0.10, 0.10  # shares of the variants
WANDERING = 0.4  # how often a trip that no circuit explains comes in any state with power
BOAT_SPREAD = {"watts": 0.3, "filter_nf": 0.7}  # natural-log spread of another boat's loads

VARIANTS: dict[str, str] = {
    "": "as the core assumes",
    "priors": "each cause three times as likely, or a third",
    "thresholds": "every threshold at 0.7 or 1.4 of its place",
    "tails": "readings with heavy tails",
    "outside": "one in ten has a cause outside the list",
    "devices": "one device in twenty more is dead or absent",
    "two": "one in ten has a second cause",
    "fact": "one fact of the set-up is told wrong",
    "boats": "another boat and other cords than the typical ones",
    "pairs": "two causes each, isolated or repaired one after the other",
}


@dataclass(frozen=True, slots=True)
class Case:
    """One drawn truth.

    installation -- the raw parts that are really there; facts -- the true set-up; stated -- what is said of it
    causes       -- ids, true first; one outside the list is "outside:ID"
    faults, latents -- what the circuit has of it; wandering -- share of trips that no circuit explains
    moment       -- which of the cause's stated timings it has, "computed" where the solve decides
    """

    seed: int
    number: int
    variant: str
    facts: Mapping[str, str]
    stated: Mapping[str, str]
    installation: dict[str, object]
    causes: tuple[str, ...]
    faults: tuple[Fault, ...]
    latents: tuple[Latent, ...]
    moment: str
    dead_share: float = DEAD_SHARE
    threshold_shift: float = 1.0
    wandering: float = 0.0
    heavy_tails: bool = False
    tries: int = 1

    @property
    def key(self) -> str:
        """What its streams are named by: the same in every variant."""
        return f"{self.seed}/{self.number}"

    @property
    def setup(self) -> tuple[str, ...]:
        """The stated facts that choose the core's tables."""
        return tuple(self.stated.get(name, UNKNOWN) for name in NOT_SAID)

    def without(self, cause: str) -> Case:
        """The same boat after this cause was put right."""
        left = [(name, fault) for name, fault in zip(self.causes, self.faults, strict=True) if name != cause]
        return dataclasses.replace(self, causes=tuple(name for name, _ in left), faults=tuple(fault for _, fault in left))


def _stream(seed: int, number: int, purpose: str) -> random.Random:
    return random.Random(f"{seed}/{number}/{purpose}")


def _drawn(draw: random.Random, shares: Mapping[str, float]) -> str:
    return draw.choices(list(shares), list(shares.values()))[0]


def draw(seed: int, number: int, variant: str = "") -> Case:
    """One case. Where the solve is to decide when it trips, severity and devices are drawn anew until it does, up to ATTEMPTS times."""
    setup = _stream(seed, number, "setup")
    supply = _drawn(setup, {name: arrangements.SUPPLY_SHARES.get(name, RARE_SUPPLY) for name in QUESTION["supply"].choices})
    region = SYSTEMS[supply].region
    usual = arrangements.PLUG_SHARES[region]
    plug = _drawn(setup, {name: usual.get(name) or RARE_PLUG.get(name, RARELY) for name in choices_of("plug", {"supply": supply})})
    case = None
    for attempt in range(1, ATTEMPTS + 1):
        tried = _attempt(seed, number, variant, attempt, {"supply": supply, "plug": plug}, case)
        if tried is None:
            continue
        case = dataclasses.replace(tried, tries=attempt)
        if case.moment != "computed" or _trips(case):
            return case
    assert case is not None
    return dataclasses.replace(case, moment="random")


def _trips(case: Case) -> bool:
    """Whether it trips as found, with everything there that comes and goes."""
    return bool(World(case).opened(AS_FOUND, random.Random(case.key), case.faults))


def _attempt(seed: int, number: int, variant: str, attempt: int, facts: dict[str, str], before: Case | None) -> Case | None:
    """One try at devices, severity and latents; the cause stays that of the first try. None where it cannot be with these devices."""
    stream = functools.partial(_stream, seed, number)
    region = SYSTEMS[facts["supply"]].region
    devices = stream(f"devices/{attempt}")
    facts = facts | {"pedestal_device": _drawn(devices, PEDESTALS[region]), "aboard_device": _drawn(devices, ABOARD[region])}
    raw, installation, weights = typical(tuple(facts.items()))
    if before is None:
        causes, moment, wandering = _causes(seed, number, variant, installation, weights)
    else:
        causes, moment, wandering = before.causes, before.moment, before.wandering
    severity = stream(f"severity/{attempt}")
    faults = []
    for cause in causes:
        grid = severities(cause.rpartition(":")[2], installation) if cause != WANDERER else ()
        if grid:
            faults.append(off_grid(severity, [one.fault for one in grid], severity.choices(grid, [one.weight for one in grid])[0].fault))
        elif cause != WANDERER:
            return None
    if len(faults) < len(causes):
        faults = [Fault("nothing_now")]
    aside = stream(f"latents/{attempt}")
    required = [CAUSE[fault.cause].requires for fault in faults if CAUSE[fault.cause].requires]
    return Case(
        seed, number, variant, facts, _stated(stream("stated"), facts, wrong=variant == "fact"),
        _other_boat(stream("boat"), raw) if variant == "boats" else raw,
        causes, tuple(faults), tuple(_latent(aside, row, dict(required)) for row in latents(installation)), moment,  # type: ignore[arg-type]
        dead_share=DEAD_SHARE + (MORE_DEAD if variant == "devices" else 0.0),
        threshold_shift=stream("shift").choice((0.7, 1.4)) if variant == "thresholds" else 1.0,
        wandering=wandering, heavy_tails=variant == "tails",
    )  # fmt: skip


@functools.lru_cache(maxsize=256)
def typical(facts: tuple[tuple[str, str], ...]) -> tuple[dict[str, object], Installation, dict[str, float]]:
    """The raw parts of a set-up, read, and the prior weight of each cause that can be there."""
    told = dict(facts)
    raw = arrangements.parts(Arrangement(told["supply"], told["plug"], 1.0), told, neighbour=False, afloat=False)
    installation = read(raw)
    weights = cause_weights(predictions(installation, latents(installation)))
    if told["plug"] == "homemade":
        weights = {cause: weight * HOMEMADE_WEIGHT.get(cause, 1.0) for cause, weight in weights.items()}
    return raw, installation, weights


WANDERER = "outside:wandering"


def _causes(
    seed: int, number: int, variant: str, installation: Installation, weights: Mapping[str, float]
) -> tuple[tuple[str, ...], str, float]:
    """The causes of a case, when it trips, and how often it trips for nothing that the circuit shows."""
    draw_, moments = _stream(seed, number, "cause"), _stream(seed, number, "moment")
    if variant == "priors":
        weights = {cause: weight * random.Random(f"{seed}/priors/{cause}").choice((3.0, 1 / 3)) for cause, weight in weights.items()}
    first = _drawn(draw_, weights)
    if variant == "outside" and draw_.random() < OUTSIDE:
        system = SYSTEMS[installation.of_kind("supply")[0].text("system")]
        outside = {
            f"outside:{cause.id}": cause.prior_50 if system.region == "50" else cause.prior_60
            for cause in CAUSES
            if not cause.weighed and severities(cause.id, installation)
        }
        first = _drawn(draw_, outside | {WANDERER: sum(outside.values()) / 4 or 1.0})
        if first == WANDERER:
            return (first,), "random", WANDERING
    moment = _drawn(moments, CAUSE[first.rpartition(":")[2]].timing)
    if variant == "pairs" or (variant == "two" and draw_.random() < SECOND):
        alone = {cause: weight for cause, weight in weights.items() if CAUSE[cause].kind == "fault" and cause not in (first, "nothing_now")}
        if variant == "pairs" and first == "nothing_now":
            first = _drawn(draw_, alone)
            alone.pop(first)
        if first != "nothing_now":
            return (first, _drawn(draw_, alone)), moment, 0.0
    return (first,), moment, 0.0


def _latent(draw: random.Random, row: Sequence[Latent], required: Mapping[str, str]) -> Latent:
    """One value of an unknown fact, the required one where the cause cannot be without it."""
    able = [one for one in row if required.get(one.name, one.value) == one.value]
    return draw.choices(able, [one.share for one in able])[0]


def _stated(draw: random.Random, facts: Mapping[str, str], *, wrong: bool) -> dict[str, str]:
    """What is said of the set-up: now and then nothing; one thing wrong where that is the variant."""
    told = {name: value if draw.random() >= NOT_SAID[name] else UNKNOWN for name, value in facts.items()}
    if wrong:
        region = SYSTEMS[facts["supply"]].region
        others = {name: [one for one in choices_of(name, facts) if one not in (facts[name], "homemade")] for name in facts}
        others["supply"] = [one for one in others["supply"] if SYSTEMS[one].region == region]  # nobody mistakes the region
        name = draw.choice([name for name in sorted(others) if others[name]])
        told[name] = draw.choice(others[name])
    return told


def off_grid(draw: random.Random, grid: Sequence[Fault], chosen: Fault) -> Fault:
    """A fault near a point of a grid and not on it.

    Each number is drawn log-uniformly (a position uniformly) between the half-way marks to the next values that the grid has at the
    same place; a lone value within a factor EDGE. Zero and one are no sizes but states, and stay.
    """
    near = [fault for fault in grid if (fault.at, fault.load) == (chosen.at, chosen.load)]
    changed: dict[str, float] = {}
    for name in ("ohms", "nanofarads", "scale", "spontaneous", "duty", "position"):
        value = getattr(chosen, name)
        if value in (0.0, 1.0):
            continue
        values = sorted({getattr(fault, name) for fault in near} - {0.0, 1.0})
        low, high = _cell(values, value)
        drawn = draw.uniform(low, high) if name == "position" else math.exp(draw.uniform(math.log(low), math.log(high)))
        changed[name] = min(drawn, 0.98) if name in ("spontaneous", "duty", "position") else drawn
    return dataclasses.replace(chosen, **changed)  # type: ignore[arg-type]


def _cell(values: Sequence[float], value: float) -> tuple[float, float]:
    """From half-way to the value before to half-way to the value after, geometrically; the outer cells are as wide outward as inward."""
    place = values.index(value)
    below = math.sqrt(values[place - 1] * value) if place else None
    above = math.sqrt(values[place + 1] * value) if place + 1 < len(values) else None
    if below is None and above is None:
        return value / EDGE, value * EDGE
    return below or value**2 / (above or value), above or value**2 / (below or value)


def _other_boat(draw: random.Random, raw: Mapping[str, object]) -> dict[str, object]:
    """The same parts with other loads, other filters and cords of other lengths."""
    rows = []
    for row in raw["parts"]:  # type: ignore[attr-defined]
        changed = dict(row)
        for name, spread in BOAT_SPREAD.items():
            if name in changed:
                changed[name] = min(max(changed[name] * math.exp(draw.gauss(0.0, spread)), 1.0), 5e3)
        if changed["kind"] == "cord":
            changed["length_m"] = draw.choice((8.0, 15.0, 25.0))
        rows.append(changed)
    return {**raw, "parts": rows}
