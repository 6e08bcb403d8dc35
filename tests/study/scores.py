"""Records of played cases -> the figures that are asked for. Nothing is rounded, nothing is left out, and no rule is softer than it reads.

right      -- what is put first at the end is the truth: the one cause shown first, or one of a group that counts
group      -- counts only with at most three causes that no test this person may do tells apart (total variation at most .05 on every
              one) and that share tonight's advice to the word, repairer and deadliness (`player.flaws`)
sure wrong -- what is shown holds at least 90 % and the truth is not in it
missed     -- deadly by the solve (live metal, current in the water, broken ground or neutral, bare blades) and told as benign: a verdict
              whose causes are none of them deadly. `missed_any` counts every cause that the catalogue calls deadly, `unwarned` those of
              them whose advice for tonight did not warn either
"""

from __future__ import annotations

import math
import random
from collections import Counter, defaultdict
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from collections.abc import Callable, Iterable, Sequence

Record = dict[str, Any]

SURE = 0.90
CERTAINTY = 1.96  # of a 95 % interval
RESAMPLES = 400
BINS = 10
# role/tools -> at least right, at most tests, minutes, sure wrong
MUST: dict[str, tuple[float, float, float, float]] = {
    "user/none": (0.90, 5.5, 22.0, 0.04),
    "instructed/multimeter": (0.92, 5.5, 22.0, 0.04),
    "technician/clamp": (0.95, 5.5, 22.0, 0.03),
    "technician/insulation": (0.96, 5.5, 24.0, 0.03),
}
MUST_MISS, MUST_CALIBRATE, MUST_SAVE = 0.002, 0.03, 0.40


@dataclass(frozen=True, slots=True)
class Share:
    """A share of cases with its interval of Wilson (1927)."""

    hits: int
    count: int

    @property
    def value(self) -> float:
        """The share itself; 0 of nothing."""
        return self.hits / self.count if self.count else 0.0

    @property
    def interval(self) -> tuple[float, float]:
        """From, to."""
        if not self.count:
            return 0.0, 1.0
        z, n, p = CERTAINTY, self.count, self.value
        middle, spread = p + z * z / (2 * n), z * math.sqrt(p * (1 - p) / n + z * z / (4 * n * n))
        return (middle - spread) / (1 + z * z / n), (middle + spread) / (1 + z * z / n)


@dataclass(frozen=True, slots=True)
class Mean:
    """A mean over cases with its interval by resampling (percentile bootstrap, 95 %)."""

    values: tuple[float, ...]

    @property
    def value(self) -> float:
        """The mean; 0 of nothing."""
        return math.fsum(self.values) / len(self.values) if self.values else 0.0

    @property
    def interval(self) -> tuple[float, float]:
        """From, to."""
        if not self.values:
            return 0.0, 0.0
        draw, count = random.Random(len(self.values)), len(self.values)
        means = sorted(math.fsum(draw.choices(self.values, k=count)) / count for _ in range(RESAMPLES))
        return means[int(0.025 * RESAMPLES)], means[int(0.975 * RESAMPLES) - 1]


def counts(record: Record) -> bool:
    """Whether what is shown together counts as a group."""
    return not set(record["flaws"]) - {"was separable"}


def right(record: Record) -> bool:
    """Whether the cause, or a group that counts with the cause in it, is put first. Outside the list only "unknown" is right."""
    if all(cause.startswith("outside:") for cause in record["causes"]):
        return bool(record["verdict"] == "unknown")
    shown = record["shown"]
    return bool(shown) and (shown[0] in record["causes"] or (counts(record) and any(cause in record["causes"] for cause in shown)))


def right_alone(record: Record) -> bool:
    """Whether the cause leads the ranking, without groups."""
    return record["leader"] in record["causes"]


def told(record: Record) -> bool:
    """Whether the case ends with causes told, not with "unknown" or a stop."""
    return record["verdict"] in ("named", "group", "nothing_now", "danger")


def sure_wrong(record: Record) -> bool:
    """Whether the truth is not among what is shown with at least SURE."""
    return record["share"] >= SURE and bool(record["shown"]) and not any(cause in record["shown"] for cause in record["causes"])


def missed(record: Record) -> bool:
    """A dangerous miss: deadly by the solve, told as benign."""
    return record["benign"] and bool(record["peril"])


def missed_any(record: Record) -> bool:
    """Deadly by the catalogue or by the solve, told as benign."""
    return record["benign"] and (record["lethal"] or bool(record["peril"]))


def unwarned(record: Record) -> bool:
    """Such a miss for which tonight's advice did not warn either."""
    return missed_any(record) and not record["warned"]


def share(records: Sequence[Record], rule: Callable[[Record], bool]) -> Share:
    """How many records a rule holds for."""
    return Share(sum(rule(record) for record in records), len(records))


def mean(records: Iterable[Record], measure: Callable[[Record], float]) -> Mean:
    """A measure over records."""
    return Mean(tuple(float(measure(record)) for record in records))


def reliability(records: Sequence[Record]) -> list[tuple[float, float, int]]:
    """(mean top probability, share in which that cause is the truth, cases) for each of BINS equally full bins."""
    ordered = sorted(((record["top"], right_alone(record)) for record in records if record["leader"]), key=lambda pair: pair[0])
    bins = []
    for place in range(BINS):
        part = ordered[len(ordered) * place // BINS : len(ordered) * (place + 1) // BINS]
        if part:
            bins.append((math.fsum(top for top, _ in part) / len(part), sum(hit for _, hit in part) / len(part), len(part)))
    return bins


def calibration_error(records: Sequence[Record]) -> float:
    """Expected calibration error of the top probability over those bins."""
    bins = reliability(records)
    total = sum(count for _, _, count in bins)
    return math.fsum(abs(top - hits) * count for top, hits, count in bins) / total if total else 0.0


def confusions(records: Iterable[Record]) -> Counter[tuple[str, str]]:
    """(truth, what was shown) of every case that is not right; a verdict that names nothing is marked with "?"."""
    found: Counter[tuple[str, str]] = Counter()
    for record in records:
        if not right(record):
            shown = " | ".join(record["shown"]) or record["verdict"]
            found["+".join(record["causes"]), shown if told(record) else f"? {shown}"] += 1
    return found


def uncounted(records: Iterable[Record]) -> Counter[str]:
    """Why groups with the truth in them, but not first, did not count: all flaws of each, together."""
    return Counter(
        ", ".join(record["flaws"])
        for record in records
        if not right(record) and any(cause in record["shown"] for cause in record["causes"])
    )


def by_cause(records: Iterable[Record]) -> dict[str, tuple[Share, Share, Mean]]:
    """Per true cause: right, right and told, mean share the truth is given at the end; most frequent first."""
    rows: dict[str, list[Record]] = defaultdict(list)
    for record in records:
        rows[record["causes"][0] if record["causes"] else "none"].append(record)
    ordered = sorted(rows.items(), key=lambda pair: (-len(pair[1]), pair[0]))
    return {
        cause: (share(row, right), share(row, lambda one: right(one) and told(one)), mean(row, lambda one: one["truth_share"]))
        for cause, row in ordered
    }


def spent(records: Sequence[Record], minutes: Callable[[str], float]) -> list[tuple[str, float, float]]:
    """(test, times a case, minutes a case), where most minutes go first."""
    times = Counter(test for record in records for test, _ in record["tests"])
    rows = [(test, count / len(records), count * minutes(test) / len(records)) for test, count in times.items()]
    return sorted(rows, key=lambda row: -row[2])


def unknown_ends(records: Iterable[Record]) -> Counter[tuple[str, str]]:
    """(cause, arrangement) of the cases that end without a cause told."""
    return Counter(
        (record["causes"][0] if record["causes"] else "none", f"{record['supply']} {record['plug']}")
        for record in records
        if not told(record)
    )


def both_found(record: Record) -> bool:
    """Whether both of two causes were found, one after the other."""
    return len(set(record["found"])) >= 2
