"""Protective devices: operating bands, break times, trip probabilities, and which of several opens first.

A device is data; every probability is soft. A device may be dead, mislabelled or locked out, and a person may misreport
it, so no trip probability here is ever 0 or 1.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from strayline.errors import CaseError

if TYPE_CHECKING:
    from collections.abc import Callable, Collection, Mapping

FLOOR, CEILING = 0.002, 0.995  # least and greatest probability that a device opens; common practice, not a standard
EDGE_SHARE = 0.01  # share of devices whose own threshold lies outside either end of its stated band; a judgement
SHARPEST_BAND = 1.05  # no device repeats its own threshold better than about 5 %; common practice
WINDOW_OHM = (0.5, 8.0)  # loop ohms: nearly every / nearly no grounded-neutral detector trips. Middle 2 ohm; low confidence
THERMAL_BAND = (1.13, 1.35)  # multiples of the rating after a long time: IEC 60898-1 holds, UL 489 trips (up to 50 A)
MAGNETIC_BANDS: dict[str, tuple[float, float]] = {"b": (3.0, 5.0), "c": (5.0, 10.0), "d": (10.0, 20.0)}  # IEC 60898-1

PATTERNS: tuple[str, ...] = ("none", "pedestal", "aboard", "both", "feeder")


def class_a_longest_break_s(residual_ma: float) -> float:
    """Longest time a Class A device may take: (20 / I)^1.43 seconds, I in mA.

    Infinite below 6 mA, where it need not trip. The law is stated for 6 to 264 mA and held constant above. It is a
    ceiling: real devices usually open within tens of milliseconds. Source: UL 943, trip-time requirement.
    """
    if residual_ma < 6.0:
        return math.inf
    return float((20.0 / min(residual_ma, 264.0)) ** 1.43)


def _stairs(*steps: tuple[float, float]) -> Callable[[float], float]:
    """A break-time law of steps (from this many mA on, at most so many seconds); infinite below the first step."""

    def longest_break_s(residual_ma: float) -> float:
        return min((seconds for from_ma, seconds in steps if residual_ma >= from_ma), default=math.inf)

    return longest_break_s


@dataclass(frozen=True, slots=True)
class Device:
    """One kind of ground-fault protective device.

    rated_ma         -- rated residual operating current, mA RMS; 0 where no device watches
    non_operating_ma -- at or below this residual it should hold, mA RMS
    operating_ma     -- at or above this residual it should trip, mA RMS
    break_time_s     -- law: residual in mA -> longest permitted seconds; infinite where none is published or it may hold
    grounded_neutral -- probability that this one detects a grounded neutral on its load side
    delayed          -- it waits on purpose so that a device downstream opens first
    source           -- where the values come from
    """

    id: str
    rated_ma: float
    non_operating_ma: float
    operating_ma: float
    break_time_s: Callable[[float], float]
    grounded_neutral: float
    delayed: bool
    source: str


_TABLE: tuple[Device, ...] = (
    Device("class_a", 5.0, 4.0, 6.0, class_a_longest_break_s, 1.0, False, "UL 943: holds below 4 mA, trips from 6 mA"),
    Device(
        "elci_30", 30.0, 15.0, 30.0, _stairs((30.0, 0.100)), 0.8, False,
        "ABYC E-11: at most 30 mA and 100 ms; no non-operating value published, half the rating taken from IEC",
    ),
    Device(
        "gfpe_30", 30.0, 15.0, 30.0, _stairs(), 0.5, False,
        "NEC 555.35 with UL 1053: at most 30 mA, no time; no non-operating value published, half the rating taken from IEC",
    ),
    Device(
        "rcd_30", 30.0, 15.0, 30.0, _stairs((30.0, 0.300), (60.0, 0.150), (150.0, 0.040)), 0.0, False,
        "IEC 61008-1 table 1, general type",
    ),
    Device(
        "rcd_100_s", 100.0, 50.0, 100.0, _stairs((100.0, 0.500), (200.0, 0.200), (500.0, 0.150)), 0.0, True,
        "IEC 61008-1 table 1, type S",
    ),
    Device(
        "gfpe_100", 100.0, 50.0, 100.0, _stairs(), 0.3, True,
        "NEC 555.35 feeder: at most 100 mA, delay set on site; half the rating taken from IEC",
    ),
    Device("none", 0.0, math.inf, math.inf, _stairs(), 0.0, False, "no device"),
)  # fmt: skip

DEVICES: dict[str, Device] = {device.id: device for device in _TABLE}


def operating_band_ma(device: Device, non_operating_ma: float | None = None, operating_ma: float | None = None) -> tuple[float, float]:
    """The (non-operating, operating) residual in mA: the device's own, or what the case states instead.

    Raises CaseError unless 0 < non-operating <= operating.
    """
    low = device.non_operating_ma if non_operating_ma is None else non_operating_ma
    high = device.operating_ma if operating_ma is None else operating_ma
    if not 0.0 < low <= high:
        raise CaseError(f"{device.id}.non_operating_ma", f"is above zero and at most the operating value of {high:g} mA", low)
    return low, high


def verdict(device: Device, residual_a: float, non_operating_ma: float | None = None, operating_ma: float | None = None) -> str:
    """What the device does with a steady residual (A RMS): "holds", "may trip", "trips", or "unprotected"."""
    if not device.rated_ma:
        return "unprotected"
    low, high = operating_band_ma(device, non_operating_ma, operating_ma)
    residual_ma = residual_a * 1000.0
    if residual_ma >= high:
        return "trips"
    return "holds" if residual_ma <= low else "may trip"


def _share_passed(value: float, low: float, high: float) -> float:
    """Share of thresholds at or below `value`: logistic in its logarithm, 1 % below `low` and 99 % below `high`."""
    if value <= 0.0:
        return 0.0
    odds_at_edge = math.log(1.0 / EDGE_SHARE - 1.0)
    half_width = math.log(max(high / low, SHARPEST_BAND)) / 2.0
    # the logistic function written with tanh, which cannot overflow
    return (1.0 + math.tanh(odds_at_edge / 2.0 * math.log(value / math.sqrt(low * high)) / half_width)) / 2.0


def _soft(share: float) -> float:
    """A share between 0 and 1 brought between FLOOR and CEILING."""
    return FLOOR + (CEILING - FLOOR) * share


def trip_probability(
    device: Device,
    residual_a: float,
    *,
    window_siemens: float = 0.0,
    grounded_neutral: bool = False,
    non_operating_ma: float | None = None,
    operating_ma: float | None = None,
) -> float:
    """Probability that the device opens on a steady residual (A RMS, at least 0), between FLOOR and CEILING.

    It rises log-smoothly through the operating band. With `grounded_neutral` (this one has the detector) the loop through
    its window counts too: it opens on a low loop resistance 1 / `window_siemens` with no residual at all (UL 943; the
    resistance of about 2 ohm, WINDOW_OHM, is of low confidence). "none" gives FLOOR: a person may have overlooked a device.
    """
    if not device.rated_ma:
        return FLOOR
    held = 1.0 - _share_passed(residual_a * 1000.0, *operating_band_ma(device, non_operating_ma, operating_ma))
    if grounded_neutral:
        nearly_every, nearly_none = WINDOW_OHM
        held *= 1.0 - _share_passed(window_siemens, 1.0 / nearly_none, 1.0 / nearly_every)
    return _soft(1.0 - held)


def overcurrent_probability(rated_a: float, current_a: float, minutes: float) -> float:
    """Probability that a thermal breaker rated `rated_a` opens within `minutes` of a steady `current_a` (both A RMS).

    A strip warming towards the square of the current, from cold: it opens when (I/In)^2 (1 - exp(-t/tau)) passes the square
    of a threshold spread over THERMAL_BAND. tau is chosen so that twice the rating opens nearly all within UL 489's limit
    (2 minutes up to 30 A, 4 minutes above; from memory). Real breakers open sooner at high currents. Source: IEC 60898-1
    (holds an hour at 1.13, opens within it at 1.45), UL 489 (opens within an hour at 1.35).
    """
    limit_minutes = 2.0 if rated_a <= 30.0 else 4.0
    tau = limit_minutes / -math.log1p(-((THERMAL_BAND[1] / 2.0) ** 2))
    warmth = -math.expm1(-max(minutes, 0.0) / tau)
    return _soft(_share_passed(current_a / rated_a * math.sqrt(warmth), *THERMAL_BAND))


def inrush_probability(rated_a: float, inrush_a: float, curve: str = "c") -> float:
    """Probability that the magnetic release of a breaker opens at once on an inrush (A RMS of the worst cycle).

    `curve` is a key of MAGNETIC_BANDS. North American breakers publish no letter; "c" is common practice for them.
    """
    return _soft(_share_passed(inrush_a / rated_a, *MAGNETIC_BANDS[curve]))


FEEDER_FIRST = 0.30  # a feeder device among those that would trip opens first; common practice
FEEDER_FIRST_DELAYED = 0.05  # the same where the feeder waits and one downstream does not
RACE = {"pedestal": 0.35, "aboard": 0.35, "both": 0.30}  # two that do not wait for each other: a coin, or both
ONE_WAITS = {"both": 0.07, "late": 0.03}  # the one that does not wait opens alone in the rest of the cases


def _race(wanting: tuple[str, ...], delayed: Collection[str]) -> dict[str, float]:
    """How pedestal and aboard end when those `wanting` to open race: pattern -> probability."""
    if len(wanting) == 1:
        return {wanting[0]: 1.0}
    late = [position for position in wanting if position in delayed]
    if len(late) != 1:
        return RACE
    early = "aboard" if late == ["pedestal"] else "pedestal"
    return {early: 1.0 - ONE_WAITS["both"] - ONE_WAITS["late"], "both": ONE_WAITS["both"], late[0]: ONE_WAITS["late"]}


def opening_patterns(probabilities: Mapping[str, float], delayed: Collection[str] = ()) -> dict[str, float]:
    """Which devices are found open: a probability for each of PATTERNS, summing to 1.

    `probabilities` -- for "feeder", "pedestal" and "aboard", that its residual would make it trip (a missing one is 0)
    `delayed`       -- which of the three wait on purpose

    Each wants to open independently of the others. Where several do, which is first is a probability and not a rule
    (two instantaneous devices in series are not coordinated). "feeder" is the dock's own device, whatever opened below it;
    once it is first, nothing below has power to trip on.
    """
    feeder, pedestal, aboard = (probabilities.get(position, 0.0) for position in ("feeder", "pedestal", "aboard"))
    quiet = (1.0 - pedestal) * (1.0 - aboard)
    patterns = dict.fromkeys(PATTERNS, 0.0)
    patterns["none"] = (1.0 - feeder) * quiet
    patterns["feeder"] = feeder * quiet
    for wanting, chance in (
        (("pedestal",), pedestal * (1.0 - aboard)),
        (("aboard",), (1.0 - pedestal) * aboard),
        (("pedestal", "aboard"), pedestal * aboard),
    ):
        feeder_waits = "feeder" in delayed and not all(position in delayed for position in wanting)
        feeder_first = feeder * (FEEDER_FIRST_DELAYED if feeder_waits else FEEDER_FIRST)
        patterns["feeder"] += chance * feeder_first
        for pattern, share in _race(wanting, delayed).items():
            patterns[pattern] += chance * (1.0 - feeder_first) * share
    return patterns


def first_to_open(wanting: Mapping[str, tuple[float, bool]]) -> dict[str, float]:
    """Probability that each device is the first to open: id -> probability; what is missing from one is that none opens.

    `wanting` -- id -> (probability that its residual makes it trip, whether it waits on purpose)

    A model of the race, not a timing law: each wants to open independently, and an instantaneous device is ten times as quick on
    average as one that waits (exponential times). The integral over u = exp(-t) of p r u^(r-1) prod(1 - p + p u^r) is a polynomial's,
    taken by Simpson's rule.
    """
    pace = {name: 1 if delayed else 10 for name, (_, delayed) in wanting.items()}
    steps = 400
    found = {}
    for name, (chance, _) in wanting.items():
        values = []
        for step in range(steps + 1):
            u = step / steps
            product = chance * pace[name] * u ** (pace[name] - 1)
            for other, (other_chance, _) in wanting.items():
                if other != name:
                    product *= 1 - other_chance + other_chance * u ** pace[other]
            values.append(product)
        found[name] = (values[0] + values[-1] + 4 * math.fsum(values[1:-1:2]) + 2 * math.fsum(values[2:-1:2])) / (3 * steps)
    return found
