"""Devices: bands, soft trip probabilities, overcurrent, and which device opens first."""

from __future__ import annotations

import math
from itertools import product

import pytest
from hypothesis import given
from hypothesis import strategies as st

from strayline.devices import (
    CEILING,
    CURVES,
    DEVICES,
    FLOOR,
    PATTERNS,
    WAVEFORMS,
    class_a_longest_break_s,
    first_to_open,
    inrush_probability,
    opening_patterns,
    opening_times_s,
    operating_band_ma,
    overcurrent_probability,
    overcurrent_verdict,
    smooth_dc_limit_ma,
    trip_probability,
    verdict,
)
from strayline.errors import CaseError

WATCHING = [device for device in DEVICES.values() if device.rated_ma]
POSITIONS = ("feeder", "pedestal", "aboard")
shares = st.floats(0.0, 1.0)
residuals_a = st.floats(0.0, 1e4)
delays = st.sets(st.sampled_from(POSITIONS))


@pytest.mark.parametrize(
    ("id_", "low_ma", "high_ma"), [("class_a", 4, 6), ("gfpe_30", 15, 30), ("rcd_100_s", 50, 100), ("gfpe_100", 50, 100)]
)
def test_verdict_at_the_edges(id_: str, low_ma: float, high_ma: float) -> None:
    """At the non-operating value a device holds, at the operating value it trips, and between the two it may trip."""
    device = DEVICES[id_]
    assert verdict(device, low_ma / 1000) == "holds"
    assert verdict(device, (low_ma + 0.001) / 1000) == "may trip"
    assert verdict(device, (high_ma - 0.001) / 1000) == "may trip"
    assert verdict(device, high_ma / 1000) == "trips"


@pytest.mark.parametrize("device", [device for device in WATCHING if device.id not in ("class_a", "class_c")], ids=lambda device: device.id)
def test_default_band_is_half_and_whole_rating(device) -> None:
    """Where nothing else is said a device holds up to half its rating and trips from its rating on."""
    assert operating_band_ma(device) == (device.rated_ma / 2, device.rated_ma)


def test_case_states_the_band() -> None:
    """A band stated by the case replaces the device's own, in the verdict and in the probability."""
    device = DEVICES["gfpe_30"]
    assert verdict(device, 0.020) == "may trip"
    assert verdict(device, 0.020, non_operating_ma=22) == "holds"
    assert verdict(device, 0.020, non_operating_ma=10, operating_ma=18) == "trips"
    assert trip_probability(device, 0.020, non_operating_ma=24) < trip_probability(device, 0.020)
    assert trip_probability(device, 0.020, operating_ma=18) > trip_probability(device, 0.020)


@pytest.mark.parametrize(("low", "high"), [(31.0, None), (0.0, None), (-1.0, 10.0), (20.0, 10.0), (math.nan, None)])
def test_impossible_band(low: float, high: float | None) -> None:
    """A band that is not above zero and in order is refused, naming the device and the value."""
    with pytest.raises(CaseError, match=r"gfpe_30\.non_operating_ma"):
        verdict(DEVICES["gfpe_30"], 0.01, low, high)


@pytest.mark.parametrize("id_", ["none", "dead"])
@given(residual_a=residuals_a)
def test_nothing_watches(id_: str, residual_a: float) -> None:
    """Where no device works the verdict is "unprotected" and a trip stays barely possible, whatever the residual."""
    assert verdict(DEVICES[id_], residual_a) == "unprotected"
    assert trip_probability(DEVICES[id_], residual_a, window_siemens=10, grounded_neutral=True) == FLOOR > 0


@given(st.sampled_from(WATCHING), residuals_a, residuals_a, st.floats(0, 1e4), st.booleans())
def test_more_residual_trips_no_less(device, one_a: float, other_a: float, window_siemens: float, detector: bool) -> None:
    """The trip probability never falls as the residual grows, and is never a hard zero or one."""
    low, high = (
        trip_probability(device, amps, window_siemens=window_siemens, grounded_neutral=detector) for amps in sorted((one_a, other_a))
    )
    assert 0 < FLOOR <= low <= high <= CEILING < 1


@pytest.mark.parametrize("device", WATCHING, ids=lambda device: device.id)
def test_probability_follows_the_verdict(device) -> None:
    """One device in a hundred trips already at the lower edge, one not yet at the upper; half do at the geometric middle."""
    low, high = operating_band_ma(device)
    assert trip_probability(device, low / 1000) == pytest.approx(FLOOR + 0.01 * (CEILING - FLOOR), abs=1e-9)
    assert trip_probability(device, high / 1000) == pytest.approx(FLOOR + 0.99 * (CEILING - FLOOR), abs=1e-9)
    assert trip_probability(device, math.sqrt(low * high) / 1000) == pytest.approx((FLOOR + CEILING) / 2, abs=1e-9)


def test_thirty_milliampere_devices_as_found() -> None:
    """A 30 mA device is as likely as not to have tripped between 18 and 23 mA (reports of tested RCDs say 18 to 22 mA)."""
    assert trip_probability(DEVICES["rcd_30"], 0.018) < 0.5 < trip_probability(DEVICES["rcd_30"], 0.023)


def test_grounded_neutral_trips_without_residual() -> None:
    """A device with the detector opens on a low-resistance loop with no residual at all; one without it does not (UL 943)."""
    device = DEVICES["class_a"]
    assert trip_probability(device, 0.0, window_siemens=1 / 0.2, grounded_neutral=True) > 0.95
    assert trip_probability(device, 0.0, window_siemens=1 / 100, grounded_neutral=True) < 0.01
    assert trip_probability(device, 0.0, window_siemens=1 / 0.2) == trip_probability(device, 0.0) == FLOOR < 0.01
    assert trip_probability(device, 0.0, grounded_neutral=True) == FLOOR


def test_grounded_neutral_middle() -> None:
    """The detector is undecided at about 2 ohm (value of low confidence), on either side of which it leans the right way."""
    lower, middle, upper = (trip_probability(DEVICES["class_a"], 0.0, window_siemens=1 / ohm, grounded_neutral=True) for ohm in (1, 2, 4))
    assert lower > 0.8 > middle > 0.2 > upper
    assert middle == pytest.approx(0.5, abs=0.01)


@given(st.sampled_from(WATCHING), residuals_a, st.floats(0, 1e4), st.floats(0, 1e4))
def test_lower_loop_resistance_trips_no_less(device, residual_a: float, one: float, other: float) -> None:
    """A better conducting loop never lowers the trip probability, and no loop adds nothing."""
    none, low, high = (trip_probability(device, residual_a, window_siemens=g, grounded_neutral=True) for g in sorted((0.0, one, other)))
    assert none == trip_probability(device, residual_a) <= low + 1e-15
    assert low <= high + 1e-15


def test_only_class_a_surely_detects_a_grounded_neutral() -> None:
    """Class A devices always detect a grounded neutral, IEC devices never, equipment devices perhaps."""
    assert DEVICES["class_a"].grounded_neutral == 1
    assert DEVICES["rcd_30"].grounded_neutral == DEVICES["rcd_100_s"].grounded_neutral == DEVICES["none"].grounded_neutral == 0
    assert all(0 < DEVICES[id_].grounded_neutral < 1 for id_ in ("elci_30", "gfpe_30", "gfpe_100"))


def test_every_device_has_a_source() -> None:
    """Every row is keyed by its own id, states its source, and has its band in order."""
    for id_, device in DEVICES.items():
        assert (device.id, bool(device.source)) == (id_, True)
        assert 0 < device.non_operating_ma <= device.operating_ma


@given(st.floats(6, 300), st.floats(6, 300))
def test_class_a_time_falls(one_ma: float, other_ma: float) -> None:
    """The permitted time of a Class A device never grows with the residual."""
    low, high = sorted((one_ma, other_ma))
    assert class_a_longest_break_s(low) >= class_a_longest_break_s(high)


def test_class_a_time_beyond_its_law() -> None:
    """Above 264 mA, where the law is not stated, the permitted time stays what it is there."""
    assert class_a_longest_break_s(300) == class_a_longest_break_s(1e6) == class_a_longest_break_s(264)


def test_unpublished_break_time_is_unbounded() -> None:
    """A device that publishes no time, or need not trip at this residual, may take for ever."""
    assert DEVICES["gfpe_30"].break_time_s(1000) == math.inf
    assert DEVICES["rcd_30"].break_time_s(29.9) == math.inf
    assert class_a_longest_break_s(5.9) == math.inf


@given(
    st.sampled_from(sorted(CURVES)),
    st.sampled_from([16, 20, 30, 32, 50]),
    st.floats(0, 10),
    st.floats(0, 10),
    st.floats(0, 200),
    st.floats(0, 200),
)
def test_more_current_or_time_opens_no_less(curve: str, rated: float, one: float, other: float, early: float, late: float) -> None:
    """The overcurrent probability never falls with more current or more minutes, and is never a hard zero or one."""
    low, high = sorted((one, other))
    early, late = sorted((early, late))
    corner = overcurrent_probability(rated, low * rated, early, curve)
    assert 0 < FLOOR <= corner <= overcurrent_probability(rated, high * rated, early, curve) <= CEILING < 1
    assert corner <= overcurrent_probability(rated, low * rated, late, curve)


def test_magnetic_release() -> None:
    """A transformer's inrush of 12 times the rating opens a C breaker at once, a D breaker perhaps, and 2 times opens neither."""
    assert inrush_probability(16, 192, "c") > 0.95
    assert 0.05 < inrush_probability(16, 192, "d") < 0.5
    assert max(inrush_probability(16, 32, curve) for curve in CURVES) < 0.05


@given(shares, shares, shares, delays)
def test_patterns_are_a_distribution(feeder: float, pedestal: float, aboard: float, delayed: set[str]) -> None:
    """Opening patterns sum to one, none is negative, and nothing opens exactly when no device wants to."""
    patterns = opening_patterns({"feeder": feeder, "pedestal": pedestal, "aboard": aboard}, delayed)
    assert tuple(patterns) == PATTERNS
    assert math.fsum(patterns.values()) == pytest.approx(1, abs=1e-12)
    assert min(patterns.values()) >= 0
    assert patterns["none"] == pytest.approx((1 - feeder) * (1 - pedestal) * (1 - aboard), abs=1e-12)


@given(shares, shares, shares, delays)
def test_patterns_are_the_mean_over_who_wants(feeder: float, pedestal: float, aboard: float, delayed: set[str]) -> None:
    """Devices want to open independently: patterns are the mean of the eight certain cases under their probabilities."""
    chances = {"feeder": feeder, "pedestal": pedestal, "aboard": aboard}
    mean = dict.fromkeys(PATTERNS, 0.0)
    for wants in product((0.0, 1.0), repeat=3):
        case = dict(zip(POSITIONS, wants, strict=True))
        weight = math.prod(chances[position] if case[position] else 1 - chances[position] for position in POSITIONS)
        for pattern, share in opening_patterns(case, delayed).items():
            mean[pattern] += weight * share
    assert opening_patterns(chances, delayed) == pytest.approx(mean, abs=1e-12)


@pytest.mark.parametrize("position", POSITIONS)
@given(delayed=delays)
def test_a_lone_device_opens(position: str, delayed: set[str]) -> None:
    """A device that alone wants to open does, delayed or not."""
    assert opening_patterns({position: 1.0}, delayed)[position] == 1


def test_two_instantaneous_devices_are_not_coordinated() -> None:
    """Of two instantaneous devices in series either may open alone, equally likely, or both: a probability, not a rule."""
    patterns = opening_patterns({"pedestal": 1.0, "aboard": 1.0})
    assert patterns["pedestal"] == patterns["aboard"]
    assert min(patterns["pedestal"], patterns["both"]) > 0.2


@given(shares, shares, shares)
def test_pedestal_and_aboard_mirror(feeder: float, one: float, other: float) -> None:
    """Exchanging pedestal and aboard exchanges their patterns."""
    straight = opening_patterns({"feeder": feeder, "pedestal": one, "aboard": other}, {"aboard"})
    mirrored = opening_patterns({"feeder": feeder, "pedestal": other, "aboard": one}, {"pedestal"})
    swap = {"pedestal": "aboard", "aboard": "pedestal"}
    assert {swap.get(pattern, pattern): share for pattern, share in mirrored.items()} == pytest.approx(straight, abs=1e-12)


def test_a_delayed_device_lets_the_other_open_first() -> None:
    """A device that waits on purpose usually leaves the trip to the one that does not, yet may still be found open."""
    everything = dict.fromkeys(POSITIONS, 1.0)
    assert 0 < opening_patterns(everything, {"feeder"})["feeder"] < opening_patterns(everything)["feeder"]
    assert opening_patterns(everything, set(POSITIONS)) == opening_patterns(everything)
    patterns = opening_patterns({"pedestal": 1.0, "aboard": 1.0}, {"pedestal"})
    assert patterns["aboard"] > 0.8
    assert min(patterns["pedestal"], patterns["both"]) > 0


# --- which opens first ----------------------------------------------------------------------------------------------


def racing(*ids: str, residual_a: float, chance: float = 1.0) -> dict[str, float]:
    """Who opens first of devices in series that see one residual, each opening with this chance."""
    return first_to_open({id_: (chance, opening_times_s(DEVICES[id_], residual_a)) for id_ in ids})


def test_a_selective_device_upstream_leaves_it_to_the_general_one_below() -> None:
    """At five times its rating a 30 mA RCD has opened (40 ms) before a type S may begin (50 ms): it is first whenever it opens."""
    assert racing("rcd_30", "rcd_100_s", residual_a=0.5) == pytest.approx({"rcd_30": 1, "rcd_100_s": 0}, abs=1e-12)
    assert racing("rcd_30", "rcd_100_s", residual_a=0.5, chance=0.6) == pytest.approx({"rcd_30": 0.6, "rcd_100_s": 0.24}, abs=1e-12)


def test_equal_devices_share_the_race() -> None:
    """Two alike are each first as often as the other, and that nobody opens is what is missing from one."""
    first = first_to_open(dict.fromkeys(("pedestal", "aboard"), (0.7, (0.01, 0.1))))
    assert first["pedestal"] == pytest.approx(first["aboard"], abs=1e-12)
    assert sum(first.values()) == pytest.approx(1 - 0.3 * 0.3, abs=1e-12)


@given(st.lists(st.tuples(shares, st.floats(0, 1), st.floats(0.01, 5)), max_size=6))
def test_first_openers_and_none_make_one(rows: list[tuple[float, float, float]]) -> None:
    """The chances of being first, and that nothing opens, sum to one for any number of devices at any times."""
    first = first_to_open({str(place): (chance, (begin, begin + span)) for place, (chance, begin, span) in enumerate(rows)})
    assert min(first.values(), default=0.0) >= 0
    assert sum(first.values()) == pytest.approx(1 - math.prod(1 - chance for chance, _, _ in rows), abs=1e-6)


@pytest.mark.parametrize("count", [2, 30, 600])
def test_many_alike_share_the_race(count: int) -> None:
    """On a whole dock of equal devices each is first as often as any other, and together they are whenever one opens."""
    first = first_to_open(dict.fromkeys(range(count), (0.9, (0.02, 0.2))))
    assert sum(first.values()) == pytest.approx(1 - 0.1**count, abs=1e-5)
    assert max(first.values()) == pytest.approx(min(first.values()))


@pytest.mark.parametrize("device", WATCHING, ids=lambda device: device.id)
@given(residual_a=st.floats(0, 50))
def test_opening_times_are_in_order(device, residual_a: float) -> None:
    """A device opens between two finite times, the later not beyond its law where one is published for this residual."""
    begin, end = opening_times_s(device, residual_a)
    assert 0 < begin < end < math.inf
    assert end <= max(device.break_time_s(max(residual_a * 1e3, device.operating_ma)), 0.3)


def test_a_set_delay_moves_the_opening() -> None:
    """A delay that the case states is waited out before the device may open."""
    assert opening_times_s(DEVICES["gfpe_100"], 1.0, 0.7)[0] == 0.7
    assert opening_times_s(DEVICES["gfpe_100"], 1.0)[0] == DEVICES["gfpe_100"].delay_s


# --- waveforms and overcurrent --------------------------------------------------------------------------------------


def test_what_blinds_a_device() -> None:
    """Smooth direct current that leaves a 30 mA device working: none for AC, 6 mA for A, 10 mA for F, 12 mA for B (IEC 60755, 62423)."""
    limits = [smooth_dc_limit_ma(WAVEFORMS[id_], 30.0) for id_ in ("ac", "a", "f", "b")]
    assert limits == pytest.approx([0, 6, 10, 12])
    assert smooth_dc_limit_ma(WAVEFORMS["b"], 10.0) == 10


@pytest.mark.parametrize("curve", CURVES)
def test_overcurrent_verdicts(curve: str) -> None:
    """A breaker holds up to its conventional non-tripping current, trips from its tripping current, and at once from its magnetic band."""
    holds, trips = CURVES[curve].thermal
    low, high = CURVES[curve].at_once
    assert overcurrent_verdict(16, 16 * holds, 16 * holds, curve) == "holds"
    assert overcurrent_verdict(16, 16 * (holds + trips) / 2, 0, curve) == "may trip"
    assert overcurrent_verdict(16, 16 * trips, 0, curve) == "trips"
    assert overcurrent_verdict(16, 5, 16 * low, curve) == "holds"
    assert overcurrent_verdict(16, 5, 16 * (low + high) / 2, curve) == "may trip"
    assert overcurrent_verdict(16, 5, 16 * high, curve) == "trips"
