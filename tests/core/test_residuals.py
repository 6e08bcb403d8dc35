"""The reply of `core residuals`: sensors, breakers, what opens first, and what crosses a zone."""

from __future__ import annotations

import json
from typing import Any

import pytest

from drawn import HEATER, Row, boat, dock, load
from strayline import casefile
from strayline.devices import CURVES, DEVICES
from strayline.phasor import polar
from strayline.residuals import residuals

KEYS = {"sensors", "breakers", "hulls", "live_blades", "opens_first", "crossings", "floating"}


def reply(rows: list[Row], *faults: Row) -> dict[str, Any]:
    """What `core residuals --json` prints of these parts and faults."""
    case = {"schema": 1, "installation": {"parts": rows}, "faults": list(faults)}
    return residuals(casefile.parse(json.dumps(case).encode(), toml=False))


def changed(rows: list[Row], part: str, **given: object) -> list[Row]:
    """The parts with one of them told otherwise."""
    return [row | given if row["id"] == part else row for row in rows]


def by_id(found: list[dict[str, Any]]) -> dict[str, dict[str, Any]]:
    """Rows by their id."""
    return {row["id"]: row for row in found}


def first(found: dict[str, Any]) -> dict[str, float]:
    """Who opens first, by id."""
    return {row["id"]: row["probability"] for row in found["opens_first"]}


AMERICAN = [*dock("split_120_240", "30a_125v"), *boat("outlet1", HEATER)]
EUROPEAN = [*dock("single_230", "16a_230v"), *boat("outlet1", load("kettle", amperes=9))]
LEAK = {"cause": "appliance_leak", "at": "heater", "ohms": 1000.0}


def test_every_key_is_there() -> None:
    """Healthy or not, on one line or more, the reply has the same keys, and it is plain JSON."""
    for rows, faults in ((AMERICAN, ()), (AMERICAN, (LEAK,)), (EUROPEAN, ())):
        found = reply(rows, *faults)
        assert set(found) == KEYS
        assert json.loads(json.dumps(found, allow_nan=False)) == found
        assert all(set(row) == {"id", "line_a", "inrush_a", "rating_a", "verdict"} for row in found["breakers"])
        assert all(set(row) == {"id", "residual_ma", "angle_deg", "rating_ma", "verdict"} for row in found["sensors"])


def test_crossings_add_up_to_the_residual() -> None:
    """What leaves a zone outside its window sums, as phasors, to what the sensor sees."""
    found = reply(AMERICAN, LEAK)
    for sensor in found["sensors"]:
        rows = [row for row in found["crossings"] if row["sensor"] == sensor["id"]]
        total = sum((polar(row["ma"], row["angle_deg"] or 0.0) for row in rows), 0j)
        assert abs(total) == pytest.approx(sensor["residual_ma"], abs=1e-6)
        assert sensor["residual_ma"] > 100


def test_a_healthy_boat_trips_nothing() -> None:
    """Nothing opens first where nothing strays and no breaker is near its rating."""
    found = reply(AMERICAN)
    assert first(found) == {}
    assert {row["verdict"] for row in found["sensors"]} == {row["verdict"] for row in found["breakers"]} == {"holds"}


# --- breakers ------------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("rated_a", "amperes", "told"), [(4, 5, "may trip"), (6, 5, "holds"), (4, 9, "trips"), (10, 9, "holds"), (6, 9, "trips")]
)
def test_a_small_breaker_ashore_is_behind_a_larger_socket(rated_a: float, amperes: float, told: str) -> None:
    """Posts of 4, 6 or 10 A feed 16 A sockets: the verdict is by the breaker (IEC 60898-1, 1.13 and 1.45), not by the socket."""
    rows = changed(changed(EUROPEAN, "outlet1", rated_a=rated_a), "kettle", amperes=amperes)
    row = by_id(reply(rows)["breakers"])["outlet1"]
    assert row["rating_a"] == rated_a
    assert row["line_a"] == pytest.approx(amperes, rel=0.05)
    assert row["verdict"] == told


def test_a_socket_is_its_breaker_where_nobody_says() -> None:
    """Without a stated rating the socket's own is taken; a main and a branch breaker without one are not judged."""
    assert {id_: row["rating_a"] for id_, row in by_id(reply(EUROPEAN)["breakers"]).items()} == {"outlet1": 16}
    rated = reply(changed(EUROPEAN, "main", rated_a=20, curve="b"))
    assert {id_: row["rating_a"] for id_, row in by_id(rated["breakers"]).items()} == {"outlet1": 16, "main": 20}


def test_overload_opens_the_breaker_and_not_the_sensor() -> None:
    """14 A behind 6 A: no residual, the sensor holds, and the socket's breaker is what opens first."""
    found = reply(changed(changed(EUROPEAN, "outlet1", rated_a=6), "kettle", amperes=14))
    assert by_id(found["sensors"])["outlet1"]["verdict"] == "holds"
    assert by_id(found["breakers"])["outlet1"]["verdict"] == "trips"
    assert first(found)["outlet1"] > 0.9


@pytest.mark.parametrize("curve", ["b", "c", "d"])
def test_a_start_is_held_to_the_magnetic_band(curve: str) -> None:
    """A motor that runs at 4 A behind 10 A and starts with a stated multiple trips where that passes the curve's band, holds below it."""
    low, high = CURVES[curve].at_once
    for multiple, told in ((0.9 * low * 2.5, "holds"), ((low + high) / 2 * 2.5, "may trip"), (1.1 * high * 2.5, "trips")):
        if multiple > 30:
            continue  # more than any part list may state
        rows = [*dock("single_230", "16a_230v"), *boat("outlet1", load("motor", amperes=4, inrush=multiple))]
        row = by_id(reply(changed(rows, "outlet1", rated_a=10, curve=curve))["breakers"])["outlet1"]
        assert row["inrush_a"] == pytest.approx(4 * multiple, rel=0.03)
        assert row["verdict"] == told


def test_only_one_load_starts_at_a_time() -> None:
    """The others run on: the worst single start on top of the running current."""
    rows = [*dock("single_230", "32a_230v"), *boat("outlet1", load("pump", amperes=4, inrush=6), load("fridge", amperes=2, inrush=9))]
    row = by_id(reply(rows)["breakers"])["outlet1"]
    assert row["line_a"] == pytest.approx(6, rel=0.03)
    assert row["inrush_a"] == pytest.approx(6 + 20, rel=0.03)


def test_a_load_that_is_off_does_not_start() -> None:
    """What its switch leaves out draws nothing and starts nothing."""
    rows = [*dock("single_230", "16a_230v"), *boat("outlet1", load("pump", amperes=4, inrush=30, on=False))]
    row = by_id(reply(rows)["breakers"])["outlet1"]
    assert row["inrush_a"] == row["line_a"] == pytest.approx(0, abs=1e-6)


def test_a_stated_start_or_heat_is_a_fault_too() -> None:
    """A fault may state the start of a load, or that a breaker opens below its rating; the rating that is printed stays the breaker's."""
    start = reply(EUROPEAN, {"cause": "inrush", "at": "kettle", "scale": 25.0})
    assert by_id(start["breakers"])["outlet1"]["verdict"] == "trips"
    assert first(start)["outlet1"] > 0.9
    hot = reply(EUROPEAN, {"cause": "hot_breaker", "at": "outlet1", "ohms": 0.02, "scale": 0.3})
    assert by_id(hot["breakers"])["outlet1"] | {"line_a": 0, "inrush_a": 0} == {
        "id": "outlet1", "line_a": 0, "inrush_a": 0, "rating_a": 16, "verdict": "trips",
    }  # fmt: skip


def test_a_short_opens_breakers_and_no_sensor() -> None:
    """Line on neutral is no residual: the breaker's magnetic release is what opens first."""
    found = reply(AMERICAN, {"cause": "short_circuit", "at": "heater", "ohms": 0.05})
    assert {row["verdict"] for row in found["sensors"]} == {"holds"}
    assert first(found)["outlet1"] > 0.9


# --- devices ---------------------------------------------------------------------------------------------------------


def test_the_selective_device_upstream_leaves_the_dock_lit() -> None:
    """A type S at the feeder waits for the socket's general RCD at five times the rating; two general ones race (IEC 61008-1)."""
    rows = changed(changed(changed(EUROPEAN, "feeder", device="rcd_100_s"), "outlet1", device="rcd_30"), "main", device="none")
    leak = {"cause": "appliance_leak", "at": "kettle", "ohms": 300.0}
    selective = first(reply(rows, leak))
    racing = first(reply(changed(rows, "feeder", device="rcd_100"), leak))
    assert selective["outlet1"] > 0.98
    assert 0.3 < racing["feeder"] < 0.6


def test_a_set_delay_is_waited_out() -> None:
    """A feeder device without delay races the outlet's; set to a second it leaves the outlet's to open first."""
    hard = {"cause": "appliance_leak", "at": "heater", "ohms": 100.0}
    rows = changed(AMERICAN, "main", device="none")
    quick = first(reply(changed(rows, "feeder", delay_s=0.0), hard))
    slow = first(reply(changed(rows, "feeder", delay_s=1.0), hard))
    assert quick["feeder"] > 0.3
    assert slow["feeder"] < 0.01 < slow["outlet1"]


def test_a_branch_breaker_with_a_device_has_a_sensor_of_its_own() -> None:
    """A 30 mA device at the branch is a sensor beside the main's and the post's, and any may be first."""
    branch = {"id": "branch", "kind": "breaker", "from": "panel", "device": "rcd_30", "rated_a": 10, "poles": 2}
    rows = [*dock("single_230", "16a_230v"), *boat("outlet1", branch, load("kettle", amperes=9) | {"from": "branch"})]
    found = reply(rows, {"cause": "appliance_leak", "at": "kettle", "ohms": 1500.0})
    assert by_id(found["sensors"])["branch"]["residual_ma"] == pytest.approx(153, rel=0.02)
    assert set(first(found)) == {"feeder", "outlet1", "main", "branch"}
    assert by_id(found["breakers"])["branch"]["rating_a"] == 10


def test_a_dead_device_is_told_from_none_by_its_id_alone() -> None:
    """Neither watches: unprotected, no rating, and neither is ever first."""
    for device in ("dead", "none"):
        found = reply(changed(AMERICAN, "outlet1", device=device), LEAK)
        row = by_id(found["sensors"])["outlet1"]
        assert (row["verdict"], row["rating_ma"]) == ("unprotected", None)
        assert "outlet1" not in first(found)
    assert DEVICES["dead"].source != DEVICES["none"].source


def test_a_device_that_opens_by_itself_may_be_first() -> None:
    """With nothing astray a locked-out device is what opens."""
    found = reply(AMERICAN, {"cause": "device_locked_out", "at": "outlet1", "spontaneous": 1.0})
    assert set(first(found)) == {"outlet1"}
    assert first(found)["outlet1"] > 0.9


def test_a_blinded_device_holds() -> None:
    """Smooth direct current that comes with 40 mA keeps every type of a 30 mA device closed but B, which trips (IEC 62423)."""
    rectified = {"cause": "rectified_leakage", "at": "heater", "ohms": 1500.0, "scale": 5.0}
    told = {
        waveform: by_id(reply(changed(AMERICAN, "outlet1", device="rcd_30", waveform=waveform), rectified)["sensors"])["outlet1"]["verdict"]
        for waveform in ("ac", "a", "f", "b")
    }
    assert told == {"ac": "holds", "a": "holds", "f": "holds", "b": "trips"}


def test_angles_are_left_out_below_a_microampere() -> None:
    """A residual that is nothing has no angle; one that is something has the angle of its phasor."""
    assert by_id(reply(AMERICAN)["sensors"])["outlet1"]["angle_deg"] is None
    row = by_id(reply(AMERICAN, LEAK)["sensors"])["outlet1"]
    assert abs(row["angle_deg"]) < 5
