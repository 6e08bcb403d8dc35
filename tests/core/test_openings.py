"""What devices do with an outlook: dead, plain or detecting; what a cause adds beyond the circuit; what waits."""

from __future__ import annotations

import pytest

from strayline.contexts import AS_FOUND
from strayline.devices import CEILING, DEVICES, inrush_probability, overcurrent_probability, trip_probability
from strayline.faults import Fault
from strayline.openings import (
    DEAD,
    DETECTS,
    NOTHING,
    WORKS,
    acts_on_devices,
    any_opens,
    band_scale,
    delayed_roles,
    role_chances,
)
from strayline.parts import read
from strayline.predict import Outlook, Watch, watches

PEDESTAL = 1  # place of a role in what role_chances gives: feeder, pedestal, aboard
LOADS = {"pump": (8.0, 1.0), "lamp": (1.0, 1.0)}


def watch(device: str = "gfpe_30", role: str = "pedestal", **given: object) -> Watch:
    """A device at the post, with a 30 A breaker and two loads behind it unless said otherwise."""
    told = {"rated_a": 30.0, "loads": LOADS, "waits": False, "waveform": "a", **given}
    return Watch("outlet", role, device, None, None, told["rated_a"], "na", told["waveform"], told["waits"], told["loads"])  # type: ignore[arg-type]


def outlook(residual_a: float = 0.0, line_a: float = 0.0, loop_s: float = 0.0) -> Outlook:
    """What one device would see."""
    return Outlook((residual_a,), (loop_s,), (line_a,), {})


def opens(fault: Fault, context: str = AS_FOUND, *, seen: Outlook | None = None, state: int = WORKS, **given: object) -> float:
    """Probability that the post's device opens."""
    return role_chances((watch(**given),), seen or outlook(), fault, context)[PEDESTAL][state]


@pytest.mark.parametrize("residual_a", [0.0, 0.01, 0.02, 0.04, 1.0])
def test_a_working_device_follows_its_residual_and_a_dead_one_does_not(residual_a: float) -> None:
    """Without a breaker in its housing a device opens as its band says, a dead one next to never."""
    assert opens(NOTHING, seen=outlook(residual_a), rated_a=0.0) == pytest.approx(trip_probability(DEVICES["gfpe_30"], residual_a))
    assert opens(NOTHING, seen=outlook(residual_a), rated_a=0.0, state=DEAD) < 0.01


def test_a_low_loop_opens_only_what_detects_it() -> None:
    """With no residual at all, a loop of half an ohm through the window opens the device with a detector alone (UL 943)."""
    seen = outlook(loop_s=2.0)
    assert opens(NOTHING, seen=seen, state=DETECTS) > 0.9
    assert opens(NOTHING, seen=seen, state=WORKS) < 0.01


def test_overcurrent_opens_a_dead_device_too() -> None:
    """The breaker in the same housing opens on 60 A behind 30 A, whatever became of the residual part."""
    assert min(opens(NOTHING, seen=outlook(line_a=60), state=state) for state in (DEAD, WORKS, DETECTS)) > 0.9
    assert opens(NOTHING, seen=outlook(line_a=60), rated_a=0.0) < 0.01


def test_a_touchy_device_opens_early_and_by_itself_at_its_own_place_only() -> None:
    """A band at three tenths opens on 15 mA; spontaneous opening comes on top; elsewhere neither does."""
    assert opens(Fault("touchy_device", at="outlet", scale=0.3), seen=outlook(0.015)) > 0.9
    assert opens(Fault("touchy_device", at="outlet", scale=1.0, spontaneous=0.4)) == pytest.approx(0.4, abs=0.01)
    assert opens(Fault("touchy_device", at="main", scale=0.3, spontaneous=0.9), seen=outlook(0.015)) < 0.1


@pytest.mark.parametrize(("context", "least"), [(AS_FOUND, 0.9), ("pedestal_alone", 0.9), ("main_off", 0.9)])
def test_a_locked_out_device_opens_whatever_the_state(context: str, least: float) -> None:
    """It refuses with nothing plugged in as well, and still it is no certainty."""
    assert least < opens(Fault("device_locked_out", at="outlet", spontaneous=1.0), context) < 1


def test_a_surge_comes_while_nobody_tests() -> None:
    """It may open the device as found; in a test's minutes it does not, and a dead device it never opens."""
    surge = Fault("surge", at="outlet", spontaneous=0.02)
    assert opens(surge) > opens(NOTHING) + 0.015
    assert opens(surge, "main_off") == opens(NOTHING, "main_off")
    assert opens(surge, state=DEAD) == opens(NOTHING, state=DEAD)


@pytest.mark.parametrize(("waveform", "scale"), [("ac", 0.3), ("a", 0.3), ("f", 1.0), ("b", 1.0)])
def test_mixed_frequencies_trip_early_what_was_not_made_for_them(waveform: str, scale: float) -> None:
    """A drive's leakage lowers the band of types AC and A, not that of F and B (IEC 62423), and of no device that does not see it."""
    fault = Fault("drive_leakage", at="pump", nanofarads=100, scale=0.3)
    assert band_scale(fault, "outlet", True, waveform) == scale
    assert band_scale(fault, "outlet", False, waveform) == 1.0
    assert (opens(fault, seen=outlook(0.013), waveform=waveform) > 0.9) == (scale < 1)


@pytest.mark.parametrize(("waveform", "blinded"), [("ac", True), ("a", True), ("f", True), ("b", False)])
def test_smooth_direct_current_blinds_what_was_not_made_for_it(waveform: str, blinded: bool) -> None:
    """Where direct current raises the band five times, every type holds at 60 mA but B, which goes on working (IEC 62423)."""
    fault = Fault("rectified_leakage", at="pump", ohms=2000, scale=5.0)
    assert (opens(fault, seen=outlook(0.06), waveform=waveform) < 0.2) == blinded


def test_a_hot_breaker_opens_below_its_rating() -> None:
    """At half its rating it opens on 24 A of 30; another breaker's heat does not matter to it."""
    assert opens(NOTHING, seen=outlook(line_a=24)) < 0.05
    assert opens(Fault("hot_breaker", at="outlet", ohms=0.1, scale=0.5), seen=outlook(line_a=24)) > 0.9
    assert opens(Fault("hot_breaker", at="main", ohms=0.1, scale=0.5), seen=outlook(line_a=24)) < 0.05


def test_a_start_opens_the_breaker_when_that_load_starts() -> None:
    """A pump of 8 A that starts with 40 times as much opens a 30 A breaker alone and as found, not while it is off or another runs."""
    start, seen = Fault("inrush", at="pump", scale=40.0), outlook(line_a=9)
    assert min(opens(start, context, seen=seen) for context in (AS_FOUND, "one_load:pump")) > 0.5
    assert max(opens(start, context, seen=seen) for context in ("one_load:lamp", "main_off", "test_load")) < 0.05
    assert opens(Fault("inrush", at="pump", scale=3.0), seen=seen) < 0.05


def test_a_stated_start_counts_with_nothing_wrong() -> None:
    """A load whose start is stated to draw 40 times its current opens the breaker as found, by the curve's magnetic band."""
    loads = {"pump": (8.0, 40.0)}
    cool = (1 - overcurrent_probability(30, 9, 30, "na")) * (1 - inrush_probability(30, 9 + 39 * 8, "na"))
    held = (1 - trip_probability(DEVICES["gfpe_30"], 0.0)) * cool
    assert opens(NOTHING, seen=outlook(line_a=9), loads=loads) == pytest.approx(1 - held)


@pytest.mark.parametrize("duty", [0.1, 0.5, 1.0])
def test_what_comes_and_goes_opens_in_its_share_of_the_time(duty: float) -> None:
    """The chance of a trip is the share of the time for which the fault is there, and what would happen without it for the rest."""
    fault = Fault("cycling_appliance", at="pump", ohms=1000, duty=duty)
    there, away = outlook(0.12), outlook(0.001)
    found = role_chances((watch(),), there, fault, AS_FOUND, away)[PEDESTAL]
    for state in (DEAD, WORKS, DETECTS):
        mixed = duty * opens(NOTHING, seen=there, state=state) + (1 - duty) * opens(NOTHING, seen=away, state=state)
        assert found[state] == pytest.approx(mixed, abs=1e-12)


def test_only_faults_with_such_numbers_act_on_devices() -> None:
    """A fault of the circuit alone does nothing that its outlook does not show."""
    assert not acts_on_devices(Fault("wet_cord", at="cord", ohms=2000))
    for number in ({"scale": 0.5}, {"spontaneous": 0.1}, {"duty": 0.5}):
        assert acts_on_devices(Fault("touchy_device", at="outlet", **number))
    assert opens(Fault("wet_cord", at="outlet", ohms=2000), seen=outlook(0.02)) == opens(NOTHING, seen=outlook(0.02))


def test_nothing_is_certain() -> None:
    """However much speaks for it, no role opens for sure, and what opens at all is at least what each opens alone."""
    row = role_chances((watch(),), outlook(5.0, 500.0, 5.0), Fault("device_locked_out", at="outlet", spontaneous=1.0), AS_FOUND)
    assert all(0 < chance < 1 for chance in row[PEDESTAL])
    assert row[0] == row[2] == (0.0, 0.0, 0.0)
    assert any_opens([(0.1, 0.5, 0.2), (CEILING, 0.0, 0.0)]) == pytest.approx([1 - 0.9 * 0.5 * 0.8, CEILING])


def test_a_role_waits_where_all_its_devices_wait() -> None:
    """One instantaneous device among two of a role is enough for it not to wait."""
    assert delayed_roles((watch(waits=True), watch(role="aboard"))) == {"pedestal"}
    assert delayed_roles((watch(waits=True), watch())) == frozenset()


def test_watches_tell_what_is_behind_them() -> None:
    """From the parts: the breaker's curve by the supply's frequency or as stated, the type, whether it waits, the loads that are on."""
    parts = [
        {"id": "dock", "kind": "supply", "system": "single_230"},
        {"id": "feeder", "kind": "feeder", "from": "dock", "device": "rcd_300_s"},
        {"id": "post", "kind": "pedestal", "from": "feeder"},
        {"id": "outlet", "kind": "receptacle", "from": "post", "connector": "16a_230v", "device": "rcd_30", "waveform": "b"},
        {"id": "cord", "kind": "cord", "from": "outlet"},
        {"id": "inlet", "kind": "inlet", "from": "cord"},
        {"id": "main", "kind": "main", "from": "inlet", "device": "rcd_100", "delay_s": 0.1, "rated_a": 10, "curve": "d"},
        {"id": "panel", "kind": "panel", "from": "main"},
        {"id": "pump", "kind": "load", "from": "panel", "amperes": 5, "inrush": 6},
        {"id": "off", "kind": "load", "from": "panel", "watts": 500, "on": False},
        {"id": "shed", "kind": "load", "from": "post", "watts": 2300},
    ]
    feeder, outlet, main = watches(read({"parts": parts}))
    assert (feeder.rated_a, feeder.waits, set(feeder.loads)) == (0.0, True, {"pump", "shed"})
    assert (outlet.rated_a, outlet.curve, outlet.waveform, outlet.waits) == (16.0, "c", "b", False)
    assert outlet.loads == {"pump": (pytest.approx(5.0), 6.0)}
    assert feeder.loads["shed"] == (pytest.approx(10.0), 1.0)
    assert (main.rated_a, main.curve, main.waveform, main.waits) == (10.0, "d", "a", True)
