"""P(report | prediction): tables that sum to one, never certain, and that follow what the solve says a device or a meter sees."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import pytest

from strayline import arrangements, likelihood, session
from strayline.catalogue.questions import QUESTION
from strayline.catalogue.tests import TEST, TESTS
from strayline.likelihood import EDGES, LIMITS, WRONG, Evidence
from strayline.openings import DEAD, DETECTS, WORKS, device_states
from strayline.parts import read
from strayline.predict import Watch, predictions

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping

SETUPS: dict[str, dict[str, str]] = {
    "one_cord": {"supply": "split_120_240", "plug": "one_cord", "pedestal_device": "device_30", "aboard_device": "device_30"},
    "unwatched_aboard": {"supply": "wye_120_208", "plug": "one_cord_four_wire", "pedestal_device": "class_a", "aboard_device": "none"},
    "y": {"supply": "split_120_240", "plug": "combining_y", "pedestal_device": "device_30", "aboard_device": "unknown"},
    "two_cords_230": {"supply": "single_230", "plug": "two_cords", "pedestal_device": "unknown", "aboard_device": "unknown"},
}
_MADE: dict[str, Evidence] = {}


def evidence(name: str) -> Evidence:
    """The evidence of a set-up, made once."""
    if name not in _MADE:
        facts = SETUPS[name]
        found = []
        for arrangement in arrangements.possible(facts):
            installation = read(arrangements.parts(arrangement, facts, neighbour=False, afloat=False))
            found.append((predictions(installation, session.latents(installation)), arrangement.share))
        _MADE[name] = likelihood.evidence(found, facts)
    return _MADE[name]


def members(found: Evidence, cause: str) -> list[int]:
    """The hypotheses of a cause."""
    return list(found.hypotheses.members[found.hypotheses.causes.index(cause)])


each_setup = pytest.mark.parametrize("name", SETUPS)


# --- tables --------------------------------------------------------------------------------------------------------


@each_setup
@pytest.mark.parametrize("test", [test.id for test in TESTS])
def test_the_outcomes_of_a_test_sum_to_one_and_none_is_certain(name: str, test: str) -> None:
    """For every hypothesis the outcomes of a test have probabilities that sum to one, each above zero and below one."""
    table = evidence(name).outcomes("test", test)
    if table is None:
        assert TEST[test].needs  # only a test that needs something of the set-up may be impossible in one
        return
    if TEST[test].model == "number":
        assert len(table) == len(EDGES[TEST[test].unit]) + 1
    else:
        assert set(table) == set(TEST[test].outcomes)
    columns = list(table.values())
    assert all(len(column) == len(evidence(name).members) for column in columns)
    assert all(0 < value < 1 for column in columns for value in column)
    assert all(math.isclose(math.fsum(row), 1.0, abs_tol=1e-12) for row in zip(*columns, strict=True))


@each_setup
@pytest.mark.parametrize("question", ["when", "afloat", "neighbour", "inverter"])
def test_the_answers_to_a_question_sum_to_one_and_none_is_certain(name: str, question: str) -> None:
    """The same holds of the answers to a question, for which every choice has a column."""
    table = evidence(name).outcomes("question", question)
    assert table is not None
    assert set(table) == set(QUESTION[question].choices)
    assert all(0 < value < 1 for column in table.values() for value in column)
    assert all(math.isclose(math.fsum(row), 1.0, abs_tol=1e-12) for row in zip(*table.values(), strict=True))


@each_setup
def test_what_opened_is_never_certain_and_never_more_than_one(name: str) -> None:
    """What opened is reported given that something did: positive, and below one in sum, since some hypotheses explain no trip."""
    table = evidence(name).outcomes("question", "opened")
    assert table is not None
    rows = list(zip(*table.values(), strict=True))
    assert all(value > 0 for row in rows for value in row)
    assert all(math.fsum(row) <= 1 + 1e-12 for row in rows)
    assert min(map(math.fsum, rows)) < 0.5 < max(map(math.fsum, rows))


@each_setup
def test_readings_are_never_impossible(name: str) -> None:
    """Any reading within its limits has a positive probability below one under every hypothesis."""
    for test in TESTS:
        if test.model == "number":
            for value in (*LIMITS[test.unit], 0.1, 7.0, 3e4):
                assert all(0 < chance < 1 for chance in evidence(name).reading(test, value))


# --- devices -------------------------------------------------------------------------------------------------------


def watches(pedestal: str, aboard: str) -> tuple[Watch, ...]:
    """A pedestal's and a boat's device."""
    return tuple(Watch(role, role, device, None, None, 0.0) for role, device in (("pedestal", pedestal), ("aboard", aboard)))


@pytest.mark.parametrize("pedestal", ["gfpe_30", "class_a", "none", "rcd_30"])
@pytest.mark.parametrize("aboard", ["elci_30", "none"])
@pytest.mark.parametrize("stated", [{}, {"pedestal_device": "device_30", "aboard_device": "device_30"}])
def test_the_states_of_devices_share_the_whole(pedestal: str, aboard: str, stated: Mapping[str, str]) -> None:
    """The shares of the states sum to one; a device that is not there is dead for sure, one that is there may be dead all the same."""
    states = device_states(watches(pedestal, aboard), stated)
    assert math.fsum(state.share for state in states) == pytest.approx(1, abs=1e-12)
    assert all(state.share > 0 for state in states)
    for role, device in (("pedestal", pedestal), ("aboard", aboard)):
        found = {getattr(state, role) for state in states}
        assert (found == {DEAD}) == (device == "none")
        assert DEAD in found
        assert (DETECTS in found) <= (device != "rcd_30")  # IEC 61008-1 asks for no grounded-neutral detection
        assert (WORKS in found) <= (device != "class_a")  # UL 943 asks for it always


# --- what comes out of the solve -----------------------------------------------------------------------------------


def test_a_larger_leak_trips_more_surely() -> None:
    """With all else the same, less resistance in a wet inlet never makes a trip less likely, and over the grid far likelier."""
    found = evidence("one_cord")
    table = found.outcomes("test", "main_off")
    assert table is not None
    alike: dict[object, list[tuple[float, float]]] = {}
    for index in members(found, "wet_inlet"):
        point, state = found.point(index), found.members[index][2]
        key = (tuple(latent.value for latent in point.latents), state.pedestal, state.aboard)
        alike.setdefault(key, []).append((point.fault.ohms, table["trips"][index]))
    assert len(alike) > 10
    rises = []
    for rows in alike.values():
        ordered = [chance for _, chance in sorted(rows, reverse=True)]
        assert len(ordered) >= 3
        assert ordered == sorted(ordered)
        rises.append(ordered[-1] - ordered[0])
    assert min(rises) > 0.5


def test_a_trip_follows_the_residual_that_the_solve_gives() -> None:
    """Where only the post's device works, above 6 mA of residual a trip is reported and below 4 mA none (UL 943, Class A)."""
    found = evidence("unwatched_aboard")
    table = found.outcomes("test", "main_off")
    made = found.predicted[0].outlooks("main_off")
    assert table is not None
    assert made is not None
    watched, outlooks = made
    place = next(place for place, watch in enumerate(watched) if watch.role == "pedestal")
    seen = {True: 0, False: 0}
    for index, (_, number, state) in enumerate(found.members):
        residual, loop = outlooks[number].residual_a[place], outlooks[number].loop_s[place]
        if state.pedestal == DEAD or loop > 0.01 or found.point(index).cause in ("touchy_device", "overload") or 4e-3 < residual < 6e-3:
            continue
        trips = residual > 6e-3
        if not trips and outlooks[number].residual_a[0] > 0.04:
            continue  # the feeder's device may open as well
        seen[trips] += 1
        assert (table["trips"][index] > 0.9) if trips else (table["trips"][index] < 0.1)
    assert min(seen.values()) > 20


def test_a_dead_device_never_trips_but_for_a_wrong_report() -> None:
    """With both devices dead and no current at the feeder, a trip is reported as often as answers are wrong."""
    found = evidence("one_cord")
    table = found.outcomes("test", "main_off")
    assert table is not None
    dead = [index for index in members(found, "wet_inlet") if found.members[index][2].pedestal == found.members[index][2].aboard == DEAD]
    small = [index for index in dead if found.point(index).fault.ohms > 5000]  # 24 mA at 120 V: below the feeder's 50 mA
    assert small
    assert all(table["trips"][index] < WRONG / 2 + 0.02 for index in small)


def test_the_device_aboard_does_not_see_a_leak_ahead_of_it() -> None:
    """With a leaking cord the post's device opens far more often than the one aboard: a sensor sees what lies after it."""
    found = evidence("one_cord")
    table = found.outcomes("question", "opened")
    assert table is not None
    prior = found.hypotheses.prior
    chance = {choice: math.fsum(prior[index] * column[index] for index in members(found, "wet_cord")) for choice, column in table.items()}
    assert chance["pedestal"] > 5 * chance["aboard"]


@pytest.mark.parametrize(
    ("cause", "outcome"),
    [
        ("ground_neutral_exchanged", "exchanged"),
        ("line_ground_exchanged", "exchanged"),
        ("open_ground_with_leak", "ground_open"),
        ("panel_bond", "fine"),
    ],
)
def test_ohms_through_the_cord_show_what_is_wrong_in_it(cause: str, outcome: str) -> None:
    """A cord with two wires exchanged reads through to the wrong pin, whichever two; an open ground reads open; a bond aboard is unseen."""
    found = evidence("one_cord")
    table = found.outcomes("test", "adapter_continuity")
    assert table is not None
    in_the_cord = [index for index in members(found, cause) if found.point(index).fault.at in ("cord", "panel")]
    assert in_the_cord
    assert all(table[outcome][index] > 0.9 for index in in_the_cord)


# --- readings ------------------------------------------------------------------------------------------------------


def predicted(found: Evidence, test: str, pick: Callable[[float], bool]) -> list[tuple[int, float]]:
    """Hypotheses with the reading each predicts, in the test's unit, for those readings that are picked."""
    name = {"bond_ohms": "meter_ohm", "insulation": "meter_ohm"}.get(test, TEST[test].reading)
    scale = {"mA": 1e3, "ohm": 1.0, "Mohm": 1e-6}[TEST[test].unit]
    return [(index, value * scale) for index, value in enumerate(found.readings(TEST[test].context, name)) if pick(value * scale)]


@pytest.mark.parametrize(("test", "low", "high"), [("clamp_ground", 5, 900), ("bond_ohms", 1, 1e5), ("insulation", 0.005, 5)])
def test_a_reading_is_likeliest_where_it_is_predicted(test: str, low: float, high: float) -> None:
    """Among readings spread over decades, a hypothesis gives most to its own prediction, and less the farther a reading is from it."""
    found = evidence("one_cord")
    rows = predicted(found, test, lambda value: low < value < high)
    assert rows
    for index, expected in {round(math.log(value)): (index, value) for index, value in rows}.values():
        readings = [expected * 3**step for step in range(-4, 5)]
        chances = [found.reading(TEST[test], value)[index] for value in readings if low < value < high]
        peak = chances.index(max(chances))
        assert chances[peak] == found.reading(TEST[test], expected)[index]
        assert chances[: peak + 1] == sorted(chances[: peak + 1])
        assert chances[peak:] == sorted(chances[peak:], reverse=True)


def test_a_clamp_at_zero_does_not_read_amperes() -> None:
    """Where no current is predicted, 6 mA or more comes of wrong reports only, and zero is expected (a clamp is off by up to 0.8 mA)."""
    found = evidence("one_cord")
    table = found.outcomes("test", "clamp_cord")
    assert table is not None
    still = [index for index, _ in predicted(found, "clamp_cord", lambda value: value < 0.1)]
    assert still
    high = [column for edge, column in table.items() if float(edge) >= 6]
    assert all(math.fsum(column[index] for column in high) < WRONG + 0.01 for index in still)
    for value in (0.0, 0.4):
        chances = found.reading(TEST["clamp_cord"], value)
        assert min(chances[index] for index in still) > 0.4


def test_a_meter_at_its_end_agrees_with_no_leak_at_all() -> None:
    """Hundreds of megohms, and OL, are both what a boat without a leak reads: neither is held against it."""
    found = evidence("one_cord")
    whole = [index for index, _ in predicted(found, "insulation", lambda value: value > 1e4)]
    assert whole
    for value in (50.0, 500.0, LIMITS["Mohm"][1]):
        chances = found.reading(TEST["insulation"], value)
        assert min(chances[index] for index in whole) > 0.9


def test_a_stated_fact_weighs_ninety_seven_to_three() -> None:
    """What a person plainly sees is believed at 97 to 3, in equal parts on the other answers, whatever the cause."""
    found = evidence("one_cord")
    table = found.outcomes("question", "inverter")
    assert table is not None
    has = found.having("inverter", "yes")
    assert any(has)
    assert not all(has)
    assert all(column == pytest.approx(0.985 if yes else 0.015) for column, yes in zip(table["yes"], has, strict=True))
