"""Protective devices: operating bands, break times, trip probabilities, and which of several opens first.

A device is data; every probability is soft. A device may be dead, mislabelled or locked out, and a person may misreport
it, so no trip probability here is ever 0 or 1.
"""

from __future__ import annotations

import itertools
import math
import operator
from collections.abc import Hashable
from dataclasses import dataclass
from typing import TYPE_CHECKING, TypeVar

from strayline.errors import CaseError

if TYPE_CHECKING:
    from collections.abc import Callable, Collection, Mapping

FLOOR, CEILING = 0.002, 0.995  # least and greatest probability that a device opens; common practice, not a standard
EDGE_SHARE = 0.01  # share of devices whose own threshold lies outside either end of its stated band; a judgement
SHARPEST_BAND = 1.05  # no device repeats its own threshold better than about 5 %; common practice
WINDOW_OHM = (0.5, 8.0)  # loop ohms: nearly every / nearly no grounded-neutral detector trips. Middle 2 ohm; low confidence
UNPUBLISHED_S = 0.2  # longest time of a device that publishes none, and of a Class A device, whose law is a ceiling; common practice
QUICKEST = 0.1  # share of its longest time in which an instantaneous device may open already; common practice
DELAY_SPREAD_S = 0.1  # by how much a set delay is overrun; common practice

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


def _at_once(_residual_ma: float) -> float:
    return 0.0


@dataclass(frozen=True, slots=True)
class Device:
    """One kind of ground-fault protective device.

    rated_ma         -- rated residual operating current, mA RMS; 0 where no device watches
    non_operating_ma -- at or below this residual it should hold, mA RMS
    operating_ma     -- at or above this residual it should trip, mA RMS
    break_time_s     -- law: residual in mA -> longest permitted seconds; infinite where none is published or it may hold
    grounded_neutral -- probability that this one detects a grounded neutral on its load side
    delay_s          -- seconds it waits on purpose so that a device downstream opens first, where the case says nothing; 0 for none
    source           -- where the values come from
    holds_s          -- law: residual in mA -> seconds for which it must not open yet (selective devices); else 0
    """

    id: str
    rated_ma: float
    non_operating_ma: float
    operating_ma: float
    break_time_s: Callable[[float], float]
    grounded_neutral: float
    delay_s: float
    source: str
    holds_s: Callable[[float], float] = _at_once


def _rcd(rated_ma: float) -> Device:
    """A general RCD (IEC 61008-1 table 1): holds to half its rating; 300, 150 and 40 ms at one, two and five times it."""
    times = _stairs((rated_ma, 0.300), (2 * rated_ma, 0.150), (5 * rated_ma, 0.040))
    return Device(f"rcd_{rated_ma:.0f}", rated_ma, rated_ma / 2, rated_ma, times, 0.0, 0.0, "IEC 61008-1 table 1, general type")


def _selective_rcd(rated_ma: float) -> Device:
    """A selective RCD, type S: it waits 130, 60 and 50 ms and opens within 500, 200 and 150 ms at one, two and five times its rating."""
    longest = _stairs((rated_ma, 0.500), (2 * rated_ma, 0.200), (5 * rated_ma, 0.150))
    shortest = _stairs((rated_ma, 0.130), (2 * rated_ma, 0.060), (5 * rated_ma, 0.050))
    source = "IEC 61008-1 table 1, type S (60 ms at twice the rating from memory)"
    return Device(f"rcd_{rated_ma:.0f}_s", rated_ma, rated_ma / 2, rated_ma, longest, 0.0, 0.130, source, shortest)


_TABLE: tuple[Device, ...] = (
    Device("class_a", 5.0, 4.0, 6.0, class_a_longest_break_s, 1.0, 0.0, "UL 943: holds below 4 mA, trips from 6 mA"),
    Device("class_c", 20.0, 15.0, 20.0, class_a_longest_break_s, 0.5, 0.0, "UL 943C: 20 mA class (band and time law from memory)"),
    Device(
        "elci_30", 30.0, 15.0, 30.0, _stairs((30.0, 0.100)), 0.8, 0.0,
        "ABYC E-11: at most 30 mA and 100 ms; no non-operating value published, half the rating taken from IEC",
    ),
    Device(
        "gfpe_30", 30.0, 15.0, 30.0, _stairs(), 0.5, 0.0,
        "NEC 555.35 with UL 1053: at most 30 mA, no time; no non-operating value published, half the rating taken from IEC",
    ),
    Device(
        "gfpe_100", 100.0, 50.0, 100.0, _stairs(), 0.3, 0.2,
        "NEC 555.35 feeder: at most 100 mA, delay set on site (0 to 1 s, common practice); half the rating taken from IEC",
    ),
    *(_rcd(rated_ma) for rated_ma in (10.0, 30.0, 100.0, 300.0)),
    *(_selective_rcd(rated_ma) for rated_ma in (100.0, 300.0)),  # type S exists above 30 mA only
    Device("dead", 0.0, math.inf, math.inf, _stairs(), 0.0, 0.0, "a device that is there and no longer opens"),
    Device("none", 0.0, math.inf, math.inf, _stairs(), 0.0, 0.0, "no device"),
)  # fmt: skip

DEVICES: dict[str, Device] = {device.id: device for device in _TABLE}


@dataclass(frozen=True, slots=True)
class Waveform:
    """A type of residual-current device by what else than a sine of the supply's frequency it copes with.

    pulsating -- it trips on pulsating direct current; mixed -- its band holds for the mixed frequencies of drives
    smooth_dc -- (mA, share of the rating): smooth direct current up to the greater of the two leaves it working; beyond, it is blinded
    """

    id: str
    pulsating: bool
    mixed: bool
    smooth_dc: tuple[float, float]
    source: str


WAVEFORMS: dict[str, Waveform] = {
    "ac": Waveform("ac", False, False, (0.0, 0.0), "IEC 60755"),
    "a": Waveform("a", True, False, (6.0, 0.0), "IEC 60755"),
    "f": Waveform("f", True, True, (10.0, 0.0), "IEC 62423"),
    "b": Waveform("b", True, True, (10.0, 0.4), "IEC 62423"),
}


USUAL_WAVEFORM = "a"  # where nobody says; North American devices have no letter and are taken as such (common practice)


def smooth_dc_limit_ma(waveform: Waveform, rated_ma: float) -> float:
    """Smooth direct current in mA that leaves a device of this type and rating working."""
    least, share = waveform.smooth_dc
    return max(least, share * rated_ma)


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


@dataclass(frozen=True, slots=True)
class Curve:
    """How a thermal-magnetic breaker opens, in multiples of its rating.

    thermal -- it carries the first for an hour or more, and opens within an hour at the second
    quick   -- it opens at this multiple from cold within `minutes`: the first up to `large_a` amperes of rating, the second above
    at_once -- its magnetic release holds at the first and opens at the second
    """

    id: str
    thermal: tuple[float, float]
    quick: float
    large_a: float
    minutes: tuple[float, float]
    at_once: tuple[float, float]
    source: str


def _lettered(id_: str, at_once: tuple[float, float]) -> Curve:
    return Curve(id_, (1.13, 1.45), 2.55, 32.0, (1.0, 2.0), at_once, "IEC 60898-1 (1 and 2 minutes at 2.55 from memory)")


_CURVES: tuple[Curve, ...] = (
    _lettered("b", (3.0, 5.0)),
    _lettered("c", (5.0, 10.0)),
    _lettered("d", (10.0, 20.0)),
    Curve("na", (1.0, 1.35), 2.0, 30.0, (2.0, 4.0), (5.0, 10.0), "UL 489 (from memory); it gives no magnetic band: common practice"),
)  # fmt: skip

CURVES: dict[str, Curve] = {curve.id: curve for curve in _CURVES}


def usual_curve(hertz: float) -> str:
    """The curve of a breaker where nobody says: North American breakers have no letter, others are mostly C (common practice)."""
    return "na" if hertz == 60.0 else "c"


def overcurrent_probability(rated_a: float, current_a: float, minutes: float, curve: str) -> float:
    """Probability that a thermal breaker rated `rated_a` opens within `minutes` of a steady `current_a` (both A RMS).

    A strip warming towards the square of the current, from cold: it opens when (I/In)^2 (1 - exp(-t/tau)) passes the square
    of a threshold spread over the curve's thermal band. tau is chosen so that at the quick multiple nearly all open within its
    minutes. Real breakers open sooner at high currents.
    """
    row = CURVES[curve]
    limit_minutes = row.minutes[rated_a > row.large_a]
    tau = limit_minutes / -math.log1p(-((row.thermal[1] / row.quick) ** 2))
    warmth = -math.expm1(-max(minutes, 0.0) / tau)
    return _soft(_share_passed(current_a / rated_a * math.sqrt(warmth), *row.thermal))


def inrush_probability(rated_a: float, inrush_a: float, curve: str) -> float:
    """Probability that the magnetic release of a breaker opens at once on an inrush (A RMS of the worst cycle)."""
    return _soft(_share_passed(inrush_a / rated_a, *CURVES[curve].at_once))


def overcurrent_verdict(rated_a: float, line_a: float, inrush_a: float, curve: str) -> str:
    """What a thermal-magnetic breaker does after long with `line_a`, or at a start with `inrush_a` (A RMS): holds, may trip, trips."""
    row = CURVES[curve]
    if line_a >= row.thermal[1] * rated_a or inrush_a >= row.at_once[1] * rated_a:
        return "trips"
    return "holds" if line_a <= row.thermal[0] * rated_a and inrush_a <= row.at_once[0] * rated_a else "may trip"


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


def opening_times_s(device: Device, residual_a: float, delay_s: float | None = None) -> tuple[float, float]:
    """Between which seconds a device that does open on this residual (A RMS) opens.

    At most its law's time, or UNPUBLISHED_S where that is shorter or there is none; at least what a selective one must wait, a set
    delay, or a tenth of the longest. Where the residual only may trip it, the law is taken at its operating value.
    """
    ma = max(residual_a * 1e3, device.operating_ma if math.isfinite(device.operating_ma) else 0.0)
    held = device.holds_s(ma)
    if held:
        return held, device.break_time_s(ma)
    set_s = device.delay_s if delay_s is None else delay_s
    longest = min(device.break_time_s(ma), UNPUBLISHED_S)
    return (set_s, set_s + DELAY_SPREAD_S) if set_s else (QUICKEST * longest, longest)


Key = TypeVar("Key", bound=Hashable)
PANELS_EACH = 6  # of Simpson's rule, for each opening expected in a stretch of time
NOBODY_LEFT = 1e-12  # a race in which so little is left undecided is over


def first_to_open(wanting: Mapping[Key, tuple[float, tuple[float, float]]]) -> dict[Key, float]:
    """Probability that each device is the first to open: id -> probability; what is missing from one is that none opens.

    `wanting` -- id -> (probability that it opens at all, (seconds from which, seconds by which it has opened if it does))

    A model of the race: each opens independently, at a moment uniform between its two times. So a device that has surely opened before
    another may begin is first whenever it opens (selectivity), and two instantaneous ones are not coordinated. P(i first) is the
    integral of p_i f_i(t) prod(1 - p_j F_j(t)) over t: between the times a polynomial, by Simpson's rule, to about six figures.
    """
    moments = sorted({moment for _, times in wanting.values() for moment in times})
    found = dict.fromkeys(wanting, 0.0)
    for early, late in itertools.pairwise(moments):
        held = math.prod(1.0 - chance for chance, (_, end) in wanting.values() if end <= early)
        rates = {  # of those that may open now: how much of their chance falls due each second, from when
            name: (chance / (end - begin), begin) for name, (chance, (begin, end)) in wanting.items() if begin <= early and late <= end
        }
        panels = 1 + math.ceil(PANELS_EACH * (late - early) * math.fsum(rate for rate, _ in rates.values()))
        width = (late - early) / panels
        for panel in range(panels):
            start = early + panel * width
            points = [_others_hold(rates, start + share * width) for share in (0.0, 0.5, 1.0)]
            for place, (name, (rate, _)) in enumerate(rates.items()):
                found[name] += held * rate * width * (points[0][place] + 4.0 * points[1][place] + points[2][place]) / 6.0
            if held * max(points[2]) < NOBODY_LEFT:
                break
    return found


def _others_hold(rates: Mapping[Key, tuple[float, float]], moment: float) -> list[float]:
    """For each device, in order, the probability that all the others are still closed."""
    closed = [1.0 - rate * (moment - begin) for rate, begin in rates.values()]
    before = itertools.accumulate(closed[:-1], operator.mul, initial=1.0)
    after = [*itertools.accumulate(closed[:0:-1], operator.mul, initial=1.0)][::-1]
    return [one * other for one, other in zip(before, after, strict=True)]
