"""Every scenario: the sensors do what it says, and where its cause is weighed the diagnosis leads to it or stops where it must."""

from __future__ import annotations

from functools import cache
from pathlib import Path
from typing import Any

import pytest

from strayline import casefile
from strayline.catalogue.causes import CAUSE
from strayline.catalogue.questions import QUESTION
from strayline.catalogue.tests import TEST
from strayline.parts import Installation, read
from strayline.report import diagnosis
from strayline.residuals import residuals

FILES = sorted((Path(__file__).parents[2] / "scenarios").glob("*.toml"))
CASES = {file.stem: casefile.load(file) for file in FILES}
EXPECTATIONS = {"cause", "stop", "trips", "holds", "hull_volts"}
WEIGHED = [name for name, case in CASES.items() if all(CAUSE[fault.cause].weighed for fault in case.faults)]
every_scenario = pytest.mark.parametrize("name", CASES)
every_diagnosis = pytest.mark.parametrize("name", WEIGHED)


@cache
def seen(name: str) -> dict[str, Any]:
    """What the sensors of a scenario see."""
    return residuals(CASES[name])


@cache
def told(name: str) -> dict[str, Any]:
    """What the answers of a scenario say."""
    return diagnosis(CASES[name])


def parts_of(name: str) -> Installation:
    """The checked parts of a scenario."""
    return read(CASES[name].installation)


@every_scenario
def test_says_what_is_wrong_and_what_must_come_out(name: str) -> None:
    """A scenario has one true cause, a sensor it speaks of, no word this test passes over, and if weighed answers and what they bring."""
    case = CASES[name]
    assert len(case.faults) == 1
    assert set(case.expect) <= EXPECTATIONS
    assert case.expect.get("trips") or case.expect.get("holds")
    assert case.expect.get("cause", case.faults[0].cause) == case.faults[0].cause
    assert ("cause" in case.expect or "stop" in case.expect) == (name in WEIGHED)
    assert bool(case.answers) == (name in WEIGHED)


@every_scenario
def test_sensors(name: str) -> None:
    """Each sensor that the scenario says trips has a residual above its band, and each that holds one below it."""
    verdicts = {sensor["id"]: sensor["verdict"] for sensor in seen(name)["sensors"]}
    expect = CASES[name].expect
    assert {sensor: verdicts[sensor] for sensor in expect.get("trips", [])} == dict.fromkeys(expect.get("trips", []), "trips")
    assert {sensor: verdicts[sensor] for sensor in expect.get("holds", [])} == dict.fromkeys(expect.get("holds", []), "holds")


@every_scenario
def test_hulls(name: str) -> None:
    """A hull's volts lie where the scenario says; a hull it says nothing of stays below 50 V (the touch limit of IEC 60364-4-41)."""
    stated = CASES[name].expect.get("hull_volts", {})
    volts = {hull["id"]: hull["volts"] for hull in seen(name)["hulls"]}
    assert set(stated) <= set(volts)
    for hull, value in volts.items():
        low, high = stated.get(hull, (0, 50))
        assert low <= value <= high, hull


@every_diagnosis
def test_diagnosis(name: str) -> None:
    """The true cause leads, or stands in a leading group of at most three; where the scenario says so it stops instead."""
    expect, found = CASES[name].expect, told(name)
    if "cause" in expect:
        leader = found["ranking"][0]["cause"]
        group = next(group for group in found["groups"] if leader in group)
        assert leader == expect["cause"] or (expect["cause"] in group and len(group) <= 3)
    if "stop" in expect:
        assert found["stop"] == expect["stop"]


@every_diagnosis
def test_whatever_is_found_the_boat_stays_unplugged_tonight(name: str) -> None:
    """No diagnosis comes without advice for tonight, and none proposes a test to go on with where it stops for danger."""
    found = told(name)
    assert found["tonight"]
    assert found["stop"] != "danger" or found["next_test"] is None


def test_between_them_they_hold_the_docks_and_the_faults() -> None:
    """The scenarios hold every supply the flow asks for, Y, joined inlets, straight and home-made adapter, neighbour, afloat and ashore."""
    installations = [parts_of(name) for name in CASES]
    kinds = {kind: [part for one in installations for part in one.of_kind(kind)] for kind in ("supply", "adapter", "hull")}
    assert {part.text("system") for part in kinds["supply"]} >= set(QUESTION["supply"].choices)
    assert {part.text("style") for part in kinds["adapter"]} >= {"combining_y", "splitting_y", "straight_30_50", "homemade"}
    assert {part.flag("afloat") for part in kinds["hull"]} == {True, False}
    assert any(len(one.of_kind("panel")) > 1 and len(one.of_kind("hull")) > 1 for one in installations)
    causes = {fault.cause for case in CASES.values() for fault in case.faults}
    assert causes >= {
        "combining_y", "joined_inlets", "wet_cord", "appliance_leak", "panel_bond", "ground_neutral_exchanged", "line_ground_exchanged",
        "open_ground_with_leak", "feeder_accumulation", "overload", "nothing_now",
    }  # fmt: skip
    assert len(CASES) >= 10


def test_every_lethal_truth_stops_or_is_named() -> None:
    """No scenario whose true cause can kill ends as `nothing_now`."""
    lethal = [name for name in WEIGHED if CAUSE[CASES[name].faults[0].cause].lethal]
    assert lethal
    assert "nothing_now" not in {told(name)["stop"] for name in lethal}


def test_with_a_y_in_use_and_nothing_tried_the_whole_y_comes_out_first() -> None:
    """Before any test has been done with a Y in use, the next test is to try without the whole Y."""
    case = CASES["y_on_two_outlets"]
    untried = tuple(answer for answer in case.answers if answer.question not in TEST)
    assert len(untried) < len(case.answers)
    found = diagnosis(casefile.Case(case.installation, case.faults, untried, case.expect, case.meta))
    assert found["next_test"] is not None
    assert found["next_test"]["id"] == "without_y"
