"""The ledger: leakage by circuit, phasors where they are known, bounds where they are not, and what that leaves to each device."""

from __future__ import annotations

import cmath
import json
import math
from pathlib import Path
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from strayline import appliances, casefile
from strayline.casefile import read_case
from strayline.errors import CaseError
from strayline.ledger import interval, ledger
from strayline.report import ledger_text
from strayline.residuals import residuals

Rows = list[dict[str, Any]]
SCENARIOS = sorted((Path(__file__).parents[2] / "scenarios").glob("*.toml"))


def rows(*loads: dict[str, Any], system: str = "split_120_240", connector: str = "50a_125_250v") -> Rows:
    """A boat on one cord with a breaker for each of these loads."""
    parts: Rows = [
        {"id": "dock", "kind": "supply", "system": system},
        {"id": "feeder", "kind": "feeder", "from": "dock"},
        {"id": "post", "kind": "pedestal", "from": "feeder"},
        {"id": "outlet", "kind": "receptacle", "from": "post", "connector": connector},
        {"id": "cord", "kind": "cord", "from": "outlet", "length_m": appliances.CORD_METRES},
        {"id": "inlet", "kind": "inlet", "from": "cord"},
        {"id": "main", "kind": "main", "from": "inlet"},
        {"id": "panel", "kind": "panel", "from": "main"},
        {"id": "hull", "kind": "hull", "from": "panel"},
    ]
    for load in loads:
        breaker = f"{load['id']}_breaker"
        parts += [{"id": breaker, "kind": "breaker", "from": "panel"}, {"kind": "load", "from": breaker, "watts": 500, **load}]
    return parts


def booked(parts: Rows, *faults: dict[str, Any]) -> tuple[dict[str, Any], dict[str, Any]]:
    """The ledger's circuits and sensors, by id."""
    found = ledger(read_case({"schema": 1, "installation": {"parts": parts}, "faults": list(faults)}))
    return {row["part"]: row for row in found["circuits"]}, {row["id"]: row for row in found["sensors"]}


def phasor(row: dict[str, Any]) -> complex:
    """The phasor of a {"ma", "angle_deg"} row, in mA."""
    return cmath.rect(row["ma"], math.radians(row["angle_deg"] or 0.0))


def test_a_stated_filter_is_a_phasor() -> None:
    """A filter of 100 nF at 120 V 60 Hz draws 2 pi f C V = 4.52 mA, a quarter turn ahead of its line; nothing of it is left to guess."""
    circuits, _ = booked(rows({"id": "charger", "filter_nf": 100}))
    known = circuits["charger"]["known"]
    assert known["ma"] == pytest.approx(2 * math.pi * 60 * 100e-9 * 120 * 1e3, rel=0.01)
    assert known["angle_deg"] == pytest.approx(90, abs=1)
    assert circuits["charger"]["unknown_ma"] == [0, 0]


def test_opposite_legs_cancel_in_a_sum() -> None:
    """Equal filters on opposite legs add to nothing at the panel, the main and the outlet, though each circuit has its own."""
    circuits, sensors = booked(rows({"id": "one", "filter_nf": 100}, {"id": "two", "filter_nf": 100, "across": "L2-N"}))
    assert circuits["one"]["known"]["ma"] == pytest.approx(circuits["two"]["known"]["ma"], rel=0.01)
    assert circuits["panel"]["total"]["known"]["ma"] < 0.1
    assert sensors["main"]["known"]["ma"] < 0.1


def test_resistance_and_capacitance_add_at_a_right_angle() -> None:
    """A leak and a filter on one leg add as the root of the squares (reference: sum of a resistive and a capacitive current)."""
    circuits, _ = booked(
        rows({"id": "one", "filter_nf": 500}, {"id": "two"}), {"cause": "appliance_leak", "at": "two", "ohms": 4000, "position": 0.0}
    )
    apart = math.hypot(circuits["one"]["known"]["ma"], circuits["two"]["known"]["ma"])
    assert circuits["panel"]["total"]["known"]["ma"] == pytest.approx(apart, rel=0.01)


def test_a_circuit_holds_all_that_hangs_on_it() -> None:
    """A breaker's total is its load's, the panel's that of its breakers, and the cord's the panel's with the cord's own."""
    circuits, _ = booked(
        rows({"id": "one", "filter_nf": 100}, {"id": "two", "filter_nf": 50}), {"cause": "wet_cord", "at": "cord", "ohms": 20000}
    )
    assert circuits["one_breaker"]["total"]["known"] == circuits["one"]["total"]["known"]
    panel = phasor(circuits["one"]["known"]) + phasor(circuits["two"]["known"])
    assert phasor(circuits["panel"]["total"]["known"]) == pytest.approx(panel, rel=1e-9)
    assert phasor(circuits["cord"]["total"]["known"]) == pytest.approx(panel + phasor(circuits["cord"]["known"]), rel=1e-9)


@pytest.mark.parametrize("file", SCENARIOS, ids=lambda file: file.stem)
def test_each_sensor_reads_what_residuals_says_and_its_shares_add_up(file: Path) -> None:
    """In every scenario each sensor's known residual and verdict are those of `residuals`, and the shares add up to it as phasors."""
    case = casefile.load(file)
    expected = {sensor["id"]: sensor for sensor in residuals(case)["sensors"]}
    sensors = ledger(case)["sensors"]
    assert sensors
    for sensor in sensors:
        stated = expected[sensor["id"]]
        assert (sensor["known"]["ma"], sensor["known"]["angle_deg"]) == (stated["residual_ma"], stated["angle_deg"])
        assert sensor["verdict"]["known"] == stated["verdict"]
        total = sum(phasor(share) for share in sensor["shares"])
        assert total == pytest.approx(phasor(sensor["known"]), rel=1e-6, abs=2e-3)  # a share below 1 microampere shows no angle


def test_every_sensor_of_the_path_is_there() -> None:
    """Main, outlet and feeder have their line, the neighbour's outlet has none, but her leak counts at the feeder."""
    neighbour = [
        {"id": "outlet_b", "kind": "receptacle", "from": "post", "connector": "30a_125v"},
        {"id": "cord_b", "kind": "cord", "from": "outlet_b"},
        {"id": "inlet_b", "kind": "inlet", "from": "cord_b"},
        {"id": "panel_b", "kind": "panel", "from": "inlet_b"},
        {"id": "tv", "kind": "load", "from": "panel_b", "watts": 100, "filter_nf": 100},
    ]
    circuits, sensors = booked([*rows({"id": "charger", "filter_nf": 50}), *neighbour])
    assert set(sensors) == {"feeder", "outlet", "main"}
    assert "tv" not in circuits
    assert sensors["feeder"]["known"]["ma"] == pytest.approx(3 * sensors["outlet"]["known"]["ma"], rel=0.02)


def test_an_unmeasured_load_has_bounds() -> None:
    """A load with nothing stated has the typical range of its kind at its voltage, and where the range is from; off it has none."""
    circuits, _ = booked(rows({"id": "boiler", "appliance": "water_heater"}, {"id": "spare", "on": False}))
    assert circuits["boiler"]["volts"] == pytest.approx(120, rel=0.02)
    low, high = circuits["boiler"]["unknown_ma"]
    assert (low, high) == pytest.approx((0.02, 0.2), rel=0.02)  # common practice, at 120 V
    assert circuits["boiler"]["suspect_ma"] == pytest.approx([2, 500], rel=0.02)
    assert "common practice" in circuits["boiler"]["source"]
    assert circuits["spare"]["unknown_ma"][1] < 0.01


def test_a_resistive_leak_grows_with_the_voltage_and_an_electronic_one_does_not() -> None:
    """At 230 V a heater's range is 230/120 of the table's and a charger's is the table's (common practice)."""
    loads = [{"id": "boiler", "appliance": "water_heater"}, {"id": "charger", "appliance": "charger"}]
    circuits, _ = booked(rows(*loads, system="single_230", connector="16a_230v"))
    assert circuits["boiler"]["unknown_ma"][1] == pytest.approx(0.2 * 230 / 120, rel=0.03)
    assert circuits["charger"]["unknown_ma"] == [0.3, 1.5]


def test_a_long_cord_may_leak_more() -> None:
    """The cord's range grows with its length."""
    short, long = rows({"id": "lamp"}), rows({"id": "lamp"})
    long[4] = {**long[4], "length_m": 2 * appliances.CORD_METRES}
    assert booked(long)[0]["cord"]["unknown_ma"][1] == pytest.approx(2 * booked(short)[0]["cord"]["unknown_ma"][1], rel=0.01)


def test_headroom_is_what_is_left_to_each_value() -> None:
    """Headroom is the non-operating and the operating value less the bounds of the residual; below zero when it is passed."""
    _, sensors = booked(rows({"id": "boiler", "appliance": "water_heater"}), {"cause": "wet_inlet", "at": "inlet", "ohms": 6000})
    outlet = sensors["outlet"]
    low, high = outlet["ma"]
    assert low < outlet["known"]["ma"] < high
    assert outlet["headroom"] == {"non_operating_ma": [15 - high, 15 - low], "operating_ma": [30 - high, 30 - low]}
    assert outlet["headroom"]["non_operating_ma"][1] < 0 < outlet["headroom"]["operating_ma"][0]
    assert outlet["budget_ma"] == 9
    assert outlet["verdict"] == {"known": "may trip", "low": "may trip", "high": "may trip"}


def test_without_a_device_there_is_no_headroom() -> None:
    """Where nothing watches, the values are null and the verdict says so."""
    parts = [row | {"device": "none"} if row["id"] == "main" else row for row in rows({"id": "lamp"})]
    _, sensors = booked(parts)
    main = sensors["main"]
    assert [main[key] for key in ("rating_ma", "non_operating_ma", "operating_ma", "headroom", "budget_ma")] == [None] * 5
    assert set(main["verdict"].values()) == {"unprotected"}


def test_a_current_astray_is_no_leak() -> None:
    """Behind joined neutrals the return by the other cord is told as astray, in the part it returns by, and no circuit leaks it."""
    case = casefile.load(next(file for file in SCENARIOS if file.stem == "y_on_two_outlets"))
    found = ledger(case)
    outlet = next(sensor for sensor in found["sensors"] if sensor["id"] == "outlet_a")
    assert (outlet["shares"][0]["kind"], outlet["shares"][0]["part"]) == ("astray", "outlet_b")
    assert all(row["total"]["known"]["ma"] < 10 < outlet["known"]["ma"] for row in found["circuits"])


ANGLES = st.floats(-math.pi, math.pi)
SIZES = st.floats(0, 100)


@given(known=SIZES, spans=st.lists(st.tuples(SIZES, SIZES, st.floats(0, 1), ANGLES), max_size=6))
def test_no_sum_leaves_its_interval(known: float, spans: list[tuple[float, float, float, float]]) -> None:
    """Whatever sizes within their bounds and whatever phases are drawn, the size of the sum lies within the interval."""
    bounds = [(min(a, b), max(a, b)) for a, b, _, _ in spans]
    low, high = interval(known, bounds)
    total = known + sum(
        cmath.rect(least + share * (most - least), angle) for (least, most), (_, _, share, angle) in zip(bounds, spans, strict=True)
    )
    assert low - 1e-9 <= abs(total) <= high + 1e-9


def test_the_interval_is_reached() -> None:
    """In phase the sum is the upper bound; in opposition the greatest less the others is the lower one, and zero where they can cancel."""
    assert interval(10, [(2, 3)]) == (7, 13)
    assert interval(1, [(8, 9)]) == (7, 10)
    assert interval(3, [(2, 4), (1, 2)]) == (0, 9)
    assert interval(5, []) == (5, 5)


def test_text_and_json() -> None:
    """Every sensor and every circuit that leaks is in the text, and JSON takes the whole ledger."""
    found = ledger(casefile.load(SCENARIOS[0]))
    text = ledger_text(found)
    assert all(sensor["id"] in text for sensor in found["sensors"])
    assert json.loads(json.dumps(found)) == found


def test_a_ledger_needs_an_installation() -> None:
    """Without an installation it is told what is missing."""
    with pytest.raises(CaseError, match="installation"):
        ledger(read_case({"schema": 1}))
