"""The plan: every way to connect, will it hold and may it be used, what power is left. Each rule is shown broken and kept."""

from __future__ import annotations

import json
import math
import re
from typing import TYPE_CHECKING, Any

import pytest

from strayline import plan as planning
from strayline import solve
from strayline.casefile import Case, read_case
from strayline.components import ADAPTERS, CONNECTORS, SYSTEMS
from strayline.errors import CaseError
from strayline.plan import MAY, MUST_NOT, plan
from strayline.report import RULES, plan_text
from strayline.residuals import residuals

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping

Rows = list[dict[str, Any]]
UNWATCHED = "holds because nothing is watching"


def dock(*outlets: dict[str, Any], system: str = "split_120_240") -> Rows:
    """A dock with one post and these outlets."""
    return [
        {"id": "dock", "kind": "supply", "system": system},
        {"id": "feeder", "kind": "feeder", "from": "dock"},
        {"id": "post", "kind": "pedestal", "from": "feeder"},
        *({"kind": "receptacle", "from": "post", "connector": "30a_125v", **outlet} for outlet in outlets),
    ]


def boat(*loads: dict[str, Any], plug: str = "30a_125v", inlet: str = "", **main: Any) -> Rows:
    """A boat with one inlet, unplugged unless told, and these loads on its panel."""
    return [
        {"id": "inlet", "kind": "inlet", "from": inlet, "connector": plug},
        {"id": "main", "kind": "main", "from": "inlet", **main},
        {"id": "panel", "kind": "panel", "from": "main"},
        *({"kind": "load", "from": "panel", **load} for load in loads),
        {"id": "hull", "kind": "hull", "from": "panel"},
    ]


def cord(name: str = "cord", plug: str = "30a_125v", hung: str = "", **more: Any) -> dict[str, Any]:
    """A shore cord, in the locker unless told."""
    return {"id": name, "kind": "cord", "from": hung, "connector": plug, **more}


def adapter(name: str, style: str, *hung: str, **more: Any) -> dict[str, Any]:
    """An adapter; with an empty end for every plug that is loose."""
    return {"id": name, "kind": "adapter", "style": style, "from": list(hung or ("",)), **more}


def kettle(watts: float = 600.0, **more: Any) -> dict[str, Any]:
    """A resistive load from L1 to neutral."""
    return {"id": "kettle", "watts": watts, **more}


def told(rows: Rows, faults: Iterable[Mapping[str, Any]] = ()) -> Case:
    """The case of these rows and faults."""
    return read_case({"schema": 1, "installation": {"parts": rows}, "faults": [dict(fault) for fault in faults]})


def planned(rows: Rows, *faults: Mapping[str, Any]) -> list[dict[str, Any]]:
    """The ways of these rows."""
    return plan(told(rows, faults))["ways"]


def rules(way: Mapping[str, Any], key: str = "reasons") -> set[str]:
    """The rules among a way's reasons (or cautions, or loads to leave off)."""
    return {one["rule"] for one in way[key]}


def connected_rows(rows: Rows, way: Mapping[str, Any], on: set[str] | None) -> Rows:
    """By hand: the rows connected in a way, everything closed, all loads on or only those."""
    links = {link["part"]: link["from"] for link in way["connections"]}
    made = []
    for row in rows:
        new = dict(row)
        if row["kind"] in ("cord", "adapter", "inlet"):
            if row["id"] not in links and row["kind"] != "inlet":
                continue
            ends = links.get(row["id"], [""])
            new["from"] = ends if row["kind"] == "adapter" else ends[0]
        if row["kind"] == "load":
            new["on"] = on is None or row["id"] in on
        made.append(new)
    return made


TWO = ({"id": "outlet_a"}, {"id": "outlet_b", "leg": "L2"})
FIFTY = "50a_125_250v"
Y_BOAT = [adapter("y", "combining_y", "", ""), cord(plug=FIFTY)]


# --- what goes into what -------------------------------------------------------------------------------------------


def test_one_cord_one_outlet() -> None:
    """One outlet, one cord and one inlet of a kind make one way, which holds and may be used, and says what hangs on what."""
    ways = planned([*dock({"id": "outlet"}), cord(), *boat(kettle())])
    assert len(ways) == 1
    assert ways[0]["connections"] == [{"part": "cord", "from": ["outlet"]}, {"part": "inlet", "from": ["cord"]}]
    assert (ways[0]["holds"], ways[0]["use"], ways[0]["reasons"], ways[0]["present"]) == ("holds", MAY, [], False)


def test_a_plug_goes_only_where_it_belongs() -> None:
    """A 30 A cord makes no way out of a 50 A outlet; with the adapter between them it does."""
    rows = [*dock({"id": "outlet", "connector": FIFTY}), cord(), *boat(kettle())]
    assert planned(rows) == []
    ways = planned([*rows, adapter("step", "straight_50_30")])
    assert [[link["part"] for link in way["connections"]] for way in ways] == [["step", "cord", "inlet"]]


def test_present_way_stands_with_its_own_parts() -> None:
    """What is connected now is marked, with the very cord it uses, and is not listed again with a cord that is like it."""
    rows = [*dock(*TWO), cord("first"), cord("second", hung="outlet_b"), *boat(kettle(), inlet="second")]
    ways = planned(rows)
    assert [way["connections"][0] for way in ways if way["present"]] == [{"part": "second", "from": ["outlet_b"]}]
    assert len(ways) == 2  # one per outlet


def test_like_parts_are_not_exchanged() -> None:
    """Two cords alike are one; of different lengths they are two; and so are two alike when a fault is in one of them."""
    rows = [*dock({"id": "outlet"}), cord("first"), cord("second"), *boat(kettle())]
    assert len(planned(rows)) == 1
    assert len(planned([*rows[:-6], cord("longer", length_m=30), *rows[-5:]])) == 2
    wet = {"cause": "wet_cord", "at": "first", "ohms": 2000}
    ways = planned(rows, wet)
    assert [(way["connections"][0]["part"], way["holds"]) for way in ways] == [("second", "holds"), ("first", "trips")]


def test_an_outlet_that_another_boat_uses_is_not_free() -> None:
    """A neighbour's outlet, cord and inlet take no part, and her boat stays as it is."""
    neighbour = [
        cord("theirs", hung="outlet_b"),
        {"id": "their_inlet", "kind": "inlet", "from": "theirs"},
        {"id": "their_panel", "kind": "panel", "from": "their_inlet"},
        {"id": "their_lamp", "kind": "load", "from": "their_panel", "watts": 60},
    ]
    ways = planned([*dock(*TWO), cord(), *boat(kettle()), *neighbour])
    assert [way["connections"][0]["from"] for way in ways] == [["outlet_a"]]


def test_each_inlet_is_used_or_left_out() -> None:
    """A boat with two inlets has ways with one, with the other and with both, and says what is left out and which loads get no power."""
    rows = [*dock(*TWO), cord("one"), cord("two"), *two_inlets()]
    ways = planned(rows)
    assert {tuple(way["inlets_out"]) for way in ways} == {(), ("inlet_a",), ("inlet_b",)}
    alone = next(way for way in ways if way["inlets_out"] == ["inlet_b"])
    assert [(one["load"], one["rule"]) for one in alone["loads_off"]] == [("lamps", "dead")]


def two_inlets(joined: bool = False) -> Rows:
    """A boat with two inlets: on two panels, or on one."""
    rows: Rows = []
    for tail in "ab":
        rows += [
            {"id": f"inlet_{tail}", "kind": "inlet", "from": "", "connector": "30a_125v"},
            {"id": f"main_{tail}", "kind": "main", "from": f"inlet_{tail}"},
        ]
    if joined:
        load = {"id": "cooker", "kind": "load", "from": "panel", "across": "L1-L2", "watts": 2000}
        return [
            *rows,
            {"id": "panel", "kind": "panel", "from": ["main_a", "main_b"]},
            load,
            {"id": "hull", "kind": "hull", "from": "panel"},
        ]
    panels = [{"id": f"panel_{tail}", "kind": "panel", "from": f"main_{tail}"} for tail in "ab"]
    loads = [
        {"id": "kettle", "kind": "load", "from": "panel_a", "watts": 600},
        {"id": "lamps", "kind": "load", "from": "panel_b", "watts": 60},
    ]
    return [*rows, *panels, *loads, {"id": "hull", "kind": "hull", "from": ["panel_a", "panel_b"]}]


def test_a_splitting_y_feeds_two_cords() -> None:
    """From one four-wire outlet through a splitting Y two cords feed two inlets, each tail once."""
    rows = [*dock({"id": "outlet", "connector": FIFTY}), adapter("y", "splitting_y"), cord("one"), cord("two"), *two_inlets()]
    both = [way for way in planned(rows) if not way["inlets_out"]]
    assert both
    for way in both:
        tails = [link["from"][0] for link in way["connections"] if link["part"] in ("one", "two")]
        assert sorted(tails) == ["y.a", "y.b"]


def test_at_most_two_adapters_and_one_cord() -> None:
    """Two adapters may stand in one road and three may not; each road has exactly one cord."""
    steps = [adapter("down", "straight_50_30"), adapter("up", "straight_30_50"), adapter("down2", "straight_50_30")]
    rows = [*dock({"id": "outlet", "connector": FIFTY}), *steps, cord(plug=FIFTY), cord("thin"), *boat(kettle(), plug=FIFTY)]
    ways = planned(rows)
    assert ways
    for way in ways:
        kinds = {row["id"]: row["kind"] for row in rows}
        used = [kinds[link["part"]] for link in way["connections"]]
        assert used.count("cord") == 1
        assert used.count("adapter") <= 2


def test_a_forced_plug_is_told() -> None:
    """What is connected now with a plug that does not belong there is listed, and must not be used; where it belongs nothing is said."""
    rows = [*dock({"id": "outlet", "connector": FIFTY}), cord(hung="outlet"), *boat(kettle(), inlet="cord")]
    ways = planned(rows)
    assert [way["present"] for way in ways] == [True]
    assert "forced_plug" in rules(ways[0])
    right = planned([*dock({"id": "outlet"}), cord(hung="outlet"), *boat(kettle(), inlet="cord")])
    assert "forced_plug" not in rules(right[0])


def test_what_lies_unused_is_told() -> None:
    """A cord that fits nothing here and a home-made adapter whose ends nobody knows are named as unused."""
    rows = [*dock({"id": "outlet"}), cord(), cord("blue", plug="16a_230v"), adapter("thing", "homemade"), *boat(kettle())]
    found = plan(told(rows))["unused"]
    assert {(one["part"], one["rule"]) for one in found} == {("blue", "fits_nowhere"), ("thing", "unknown_ends")}


def test_a_connector_nobody_stated_is_assumed_aloud() -> None:
    """A plug that is neither stated nor shown by what it is in is taken as the usual one, and that is said; a stated one is not."""
    rows = [*dock({"id": "outlet"}), cord(), *boat(kettle())]
    assert plan(told(rows))["assumed"] == []
    bare = [{key: value for key, value in row.items() if not (row["id"] == "cord" and key == "connector")} for row in rows]
    found = plan(told(bare))
    assert found["assumed"] == [{"part": "cord", "connector": "30a_125v"}]
    assert "connector_assumed" in rules(found["ways"][0], "cautions")
    assert found["ways"][0]["use"] == MAY


EVERY_OUTLET = [(system, name) for name, connector in CONNECTORS.items() for system in connector.volts]


@pytest.mark.parametrize(("system", "name"), EVERY_OUTLET, ids=map("-".join, EVERY_OUTLET))
def test_every_outlet_of_every_supply_feeds_a_boat(system: str, name: str) -> None:
    """With a cord and an inlet of its own kind every outlet makes a way that holds, has no objection and leaves power on every line."""
    rows = [*dock({"id": "outlet", "connector": name}, system=system), cord(plug=name), *boat(kettle(), plug=name)]
    (way,) = planned(rows)
    assert (way["holds"], way["use"]) == ("holds", MAY)
    assert len(way["lines"]) == CONNECTORS[name].lines or len(way["lines"]) == len(SYSTEMS[system].lines)
    assert all(0 < line["left_a"] < line["limit_a"] for line in way["lines"] if line["line"] == "L1")


@pytest.mark.parametrize("style", [style for style in ADAPTERS if style != "homemade"])
def test_every_adapter_makes_a_way(style: str) -> None:
    """Every adapter stands between outlets that take its plugs and a boat with an inlet of its outlet's kind, and makes a way there."""
    kind = ADAPTERS[style]
    system = "three_230_400" if CONNECTORS[kind.plugs[0]].lines == 3 else "single_230" if "230v" in kind.plugs[0] else "split_120_240"
    outlets = [{"id": f"outlet_{leg}", "connector": plug, "leg": leg} for leg, plug in zip(("L1", "L2"), kind.plugs, strict=False)]
    shore = dock(*({**outlet, "id": outlet["id"].lower()} for outlet in outlets), system=system)
    plug = kind.outlets[0]
    ways = planned([*shore, adapter("step", style, *("" for _ in kind.plugs)), cord(plug=plug), *boat(kettle(), plug=plug)])
    assert any("step" in [link["part"] for link in way["connections"]] for way in ways)


# --- does it hold --------------------------------------------------------------------------------------------------

MIXED: dict[str, tuple[Rows, list[dict[str, Any]]]] = {
    "one cord": ([*dock(*TWO), cord(), *boat(kettle(), {"id": "lamp", "watts": 40, "filter_nf": 47})], []),
    "y": (
        [*dock(*TWO), *Y_BOAT, *boat(kettle(), {"id": "oven", "across": "L1-L2", "watts": 2000, "filter_nf": 10}, plug=FIFTY)],
        [{"cause": "appliance_leak", "at": "oven", "ohms": 9000, "position": 0.9}],
    ),
    "two inlets": ([*dock(*TWO), cord("one"), cord("two"), *two_inlets()], [{"cause": "panel_bond", "at": "panel_b", "ohms": 0.1}]),
    "wet cord": ([*dock(*TWO), cord("one"), cord("two"), *boat(kettle())], [{"cause": "wet_cord", "at": "two", "ohms": 5000}]),
}


@pytest.mark.parametrize("name", MIXED)
def test_the_numbers_are_those_of_residuals(name: str) -> None:
    """For every way, with every load on and in its worst state, each sensor's residual and verdict are what `residuals` gives."""
    rows, faults = MIXED[name]
    ways = planned(rows, *faults)
    assert ways
    for way in ways:
        only = way["worst"]["load"]
        on = {"all_on": None, "all_off": set(), "one_load": {only}}[way["worst"]["state"]]
        for state, shown in ((None, way["all_on"]), (on, way["worst"]["sensors"])):
            made = connected_rows(rows, way, state)
            there = [fault for fault in faults if fault["at"] in {row["id"] for row in made}]
            expected = {sensor["id"]: sensor for sensor in residuals(told(made, there))["sensors"]}
            assert shown
            for sensor in shown:
                assert sensor["residual_ma"] == pytest.approx(expected[sensor["id"]]["residual_ma"], rel=1e-9, abs=1e-9)
                assert sensor["verdict"] == expected[sensor["id"]]["verdict"]


def test_a_y_trips_and_must_not_be_used() -> None:
    """Joined neutrals trip both outlets and forbid the way; a straight cord to the same post does neither."""
    way = planned([*dock(*TWO), *Y_BOAT, *boat(kettle(), plug=FIFTY)])[0]
    assert (way["holds"], way["use"]) == ("trips", MUST_NOT)
    assert "joined_neutrals" in rules(way)
    assert way["why"]["crossing"]["kind"] in ("other cord's neutral", "other cord's line")
    straight = planned([*dock(*TWO), adapter("up", "straight_30_50"), cord(plug=FIFTY), *boat(kettle(), plug=FIFTY)])[0]
    assert (straight["holds"], straight["use"]) == ("holds", MAY)


def test_two_inlets_on_one_panel_join_neutrals_too() -> None:
    """Two cords into one panel join the neutrals of outlets and mains; into two panels they do not."""
    rows = [*dock(*TWO), cord("one"), cord("two")]
    both = next(way for way in planned([*rows, *two_inlets(joined=True)]) if not way["inlets_out"])
    assert {one["part"] for one in both["reasons"] if one["rule"] == "joined_neutrals"} == {"outlet_a, outlet_b", "main_a, main_b"}
    apart = next(way for way in planned([*rows, *two_inlets()]) if not way["inlets_out"])
    assert "joined_neutrals" not in rules(apart)


def test_holding_with_nothing_watching_is_said() -> None:
    """Without a device at the outlet a leaking boat holds because nothing is watching, and must not stay there; with one it trips."""
    leak = {"cause": "appliance_leak", "at": "kettle", "ohms": 3000}
    rows = [cord(), *boat(kettle(), device="none")]
    bare = planned([*dock({"id": "outlet", "device": "none"}), *rows], leak)[0]
    assert (bare["holds"], bare["use"]) == (UNWATCHED, MUST_NOT)
    assert "no_device" in rules(bare)
    watched = planned([*dock({"id": "outlet"}), *rows], leak)[0]
    assert watched["holds"] == "trips"
    assert "no_device" not in rules(watched)


def test_the_worst_state_is_looked_at() -> None:
    """Two filters on opposite legs cancel while both are on: the verdict is that of one of them alone, and both are told."""
    loads = [{"id": "one", "watts": 100, "filter_nf": 400}, {"id": "two", "watts": 100, "filter_nf": 400, "across": "L2-N"}]
    rows = [*dock({"id": "outlet", "connector": FIFTY}), cord(plug=FIFTY), *boat(*loads, plug=FIFTY)]
    way = planned(rows)[0]
    assert all(sensor["residual_ma"] < 0.1 for sensor in way["all_on"])
    assert (way["holds"], way["worst"]["state"]) == ("may trip", "one_load")
    # I = 2 pi f C V: 18.1 mA for 400 nF at 120 V 60 Hz (the formula of IEC 60384-14 capacitors)
    assert way["why"]["residual_ma"] == pytest.approx(2 * math.pi * 60 * 400e-9 * 120 * 1e3, rel=0.01)


def test_what_trips_with_every_load_off_must_not_be_used() -> None:
    """A wet cord trips with every load off, which is a reason by itself; a leak in a load that can be left off is not."""
    rows = [*dock({"id": "outlet"}), cord(), *boat(kettle())]
    assert "trips_unloaded" in rules(planned(rows, {"cause": "wet_cord", "at": "cord", "ohms": 2000})[0])
    way = planned(rows, {"cause": "appliance_leak", "at": "kettle", "ohms": 2000})[0]
    assert "trips_unloaded" not in rules(way)
    assert [(one["load"], one["rule"]) for one in way["loads_off"]] == [("kettle", "residual")]
    assert (way["holds"], way["with_loads_off"]["holds"], way["with_loads_off"]["use"]) == ("trips", "holds", MAY)


def test_a_bond_aboard_makes_a_detector_a_caution() -> None:
    """A device that looks for a grounded neutral is warned of where the boat ties them, and not where she does not."""
    rows = [*dock({"id": "outlet", "device": "class_a"}), cord(), *boat(kettle())]
    assert "grounded_neutral_loop" in rules(planned(rows, {"cause": "panel_bond", "at": "panel", "ohms": 0.05})[0], "cautions")
    assert "grounded_neutral_loop" not in rules(planned(rows)[0], "cautions")


# --- may it be used ------------------------------------------------------------------------------------------------


def test_a_neutral_tied_to_ground_aboard_must_not_be_used() -> None:
    """A bond at the panel, a welded inverter and a generator whose neutral is not switched forbid the way; a transformer's own does not."""
    rows = [*dock({"id": "outlet"}), cord(), *boat(kettle())]
    assert "bond_aboard" in rules(planned(rows, {"cause": "panel_bond", "at": "panel", "ohms": 0.1})[0])
    assert "bond_aboard" not in rules(planned(rows)[0])
    for state, tied in (("welded", True), ("passing", False)):
        assert ("bond_aboard" in rules(planned(behind({"id": "box", "kind": "inverter", "state": state}))[0])) == tied
    for switched, tied in ((False, True), (True, False)):
        generator = {"id": "genset", "kind": "generator"}
        transfer = {"id": "box", "kind": "transfer", "from": ["main", "genset"], "switched_neutral": switched}
        assert ("bond_aboard" in rules(planned(behind(generator, transfer))[0])) == tied
    assert planned(behind({"id": "box", "kind": "transformer"}))[0]["use"] == MAY


def behind(*parts: dict[str, Any]) -> Rows:
    """One cord to a boat whose panel hangs on the part named box, that on the main unless told."""
    panel = next(number for number, row in enumerate(boat()) if row["kind"] == "panel")
    rows = boat(kettle())
    rows[panel] = {**rows[panel], "from": "box"}
    return [
        *dock({"id": "outlet"}),
        cord(),
        *rows[:panel],
        *({"from": "main", **part} if part["kind"] != "generator" else part for part in parts),
        *rows[panel:],
    ]


@pytest.mark.parametrize("ohms", [0.02, 1.0])
def test_an_isolator_that_blocks_hides_a_bond_from_the_devices_and_not_from_the_plan(ohms: float) -> None:
    """Behind a galvanic isolator the states settle one by one, the numbers are those of `residuals`, and the bond is still told."""
    rows, bond = behind({"id": "box", "kind": "isolator"}), {"cause": "panel_bond", "at": "panel", "ohms": ohms}
    way = planned(rows, bond)[0]
    assert "bond_aboard" in rules(way)
    expected = {sensor["id"]: sensor for sensor in residuals(told(connected_rows(rows, way, None), [bond]))["sensors"]}
    for sensor in way["all_on"]:
        assert sensor["residual_ma"] == pytest.approx(expected[sensor["id"]]["residual_ma"], rel=1e-9, abs=1e-9)


def test_home_made_must_not_be_used() -> None:
    """A way with a home-made adapter must not be used, whatever holds; the same with a made one may."""
    rows = [adapter("step", "homemade", "outlet"), cord(hung="step"), *boat(kettle(), inlet="cord")]
    made = [adapter("step", "straight_15_30", "outlet"), *rows[1:]]
    shore = dock({"id": "outlet", "connector": "15a_125v", "device": "class_a"})
    way = planned([*shore, *rows])[0]
    assert way["present"]
    assert "homemade" in rules(way)
    assert planned([*shore, *made])[0]["use"] == MAY


@pytest.mark.parametrize("wired", ["line_neutral", "neutral_ground", "line_ground", "ground_open"])
def test_a_miswired_adapter_must_not_be_used(wired: str) -> None:
    """However an adapter is wired wrongly, its way is forbidden for that; wired straight it is not."""
    rows = [*dock({"id": "outlet", "connector": FIFTY, "rated_a": 30}), cord(), *boat(kettle())]
    assert "miswired" in rules(planned([*rows, adapter("step", "straight_50_30", wired=wired)])[0])
    assert planned([*rows, adapter("step", "straight_50_30")])[0]["use"] == MAY


def test_exchanged_line_and_neutral_are_found_by_the_solve() -> None:
    """An outlet with line and neutral exchanged shows at the outlet and at the panel, whose neutral stands far from ground."""
    rows = [cord(), *boat(kettle())]
    assert {"reversed_outlet", "reversed"} <= rules(planned([*dock({"id": "outlet", "reversed": True}), *rows])[0])
    assert not {"reversed_outlet", "reversed"} & rules(planned([*dock({"id": "outlet"}), *rows])[0])


def test_a_plug_that_goes_in_either_way_is_a_caution() -> None:
    """An outlet whose plug may be turned round is a caution, one whose plug may not is none."""
    shore = dock({"id": "outlet", "connector": "household_230v", "device": "rcd_30"}, system="single_230")
    rows = [adapter("step", "straight_household_16"), cord(plug="16a_230v"), *boat(kettle(), plug="16a_230v")]
    assert "reversible_plug" in rules(planned([*shore, *rows])[0], "cautions")
    blue = dock({"id": "outlet", "connector": "16a_230v", "device": "rcd_30"}, system="single_230")
    assert "reversible_plug" not in rules(planned([*blue, *rows])[0], "cautions")


def test_no_reversal_is_claimed_where_both_poles_stand_away_from_ground() -> None:
    """On a supply without a neutral both poles stand near 133 V to ground (common practice), which is no reversed polarity."""
    outlet = {"id": "outlet", "connector": "16a_230v", "device": "rcd_30"}
    rows = [*dock(outlet, system="it_230"), cord(plug="16a_230v"), *boat(kettle(), plug="16a_230v")]
    assert not {"reversed_outlet", "reversed"} & rules(planned(rows)[0])


def test_a_dead_device_watches_nothing() -> None:
    """An outlet whose device never opens holds because nothing is watching, and must not be used."""
    way = planned([*dock({"id": "outlet", "device": "dead"}), cord(), *boat(kettle())])[0]
    assert (way["holds"], way["use"]) == (UNWATCHED, MUST_NOT)
    assert rules(way) == {"dead_device"}


def test_a_cord_behind_a_bigger_breaker_must_not_be_used() -> None:
    """30 A of cord behind 50 A of breaker is forbidden, a caution where the main aboard is rated 30 A, and nothing behind 30 A."""
    rows = [adapter("step", "straight_50_30"), cord()]
    shore = dock({"id": "outlet", "connector": FIFTY})
    assert "undersized" in rules(planned([*shore, *rows, *boat(kettle())])[0])
    limited = planned([*shore, *rows, *boat(kettle(), rated_a=30)])[0]
    assert "undersized" in rules(limited, "cautions")
    assert limited["use"] == MAY
    assert rules(planned([*dock({"id": "outlet"}), cord(), *boat(kettle())])[0], "cautions") == set()


def test_an_inlet_left_out_may_have_live_pins() -> None:
    """With two inlets on one panel and a load across the lines, the pins of the unused inlet are live; on two panels they are not."""
    rows = [*dock(*TWO), cord("one"), cord("two")]
    joined = [way for way in planned([*rows, *two_inlets(joined=True)]) if way["inlets_out"]]
    assert joined
    assert all("live_blades" in rules(way) for way in joined)
    assert all("live_blades" not in rules(way) for way in planned([*rows, *two_inlets()]))


def test_a_tail_pulled_while_the_other_is_in() -> None:
    """A Y with a load across the lines leaves live blades on the tail that is pulled; without such a load it does not."""
    rows = [*dock(*TWO), *Y_BOAT]
    across = {"id": "oven", "across": "L1-L2", "watts": 2000}
    assert "live_loose_plug" in rules(planned([*rows, *boat(kettle(), across, plug=FIFTY)])[0])
    assert "live_loose_plug" not in rules(planned([*rows, *boat(kettle(), plug=FIFTY)])[0])


def test_two_tails_on_one_leg_share_the_neutral() -> None:
    """Both tails on the same leg may send 60 A back through a 50 A neutral; on two legs nothing of the kind."""
    same = planned([*dock({"id": "outlet_a"}, {"id": "outlet_b"}), *Y_BOAT, *boat(kettle(), plug=FIFTY)])[0]
    assert [(one["value"], one["unit"]) for one in same["reasons"] if one["rule"] == "shared_neutral"] == [(pytest.approx(60.0), "A")]
    assert "shared_neutral" not in rules(planned([*dock(*TWO), *Y_BOAT, *boat(kettle(), plug=FIFTY)])[0])
    wye = planned([*dock(*TWO, system="wye_120_208"), *Y_BOAT, *boat(kettle(), plug=FIFTY)])[0]
    assert "shared_neutral" not in rules(wye)  # 30 A at 0 and 30 A at -120 degrees add to 30 A


def test_an_isolated_combiner_may_be_used() -> None:
    """A combiner with a transformer in each tail joins nothing: both outlets hold and it may be used."""
    across = {"id": "oven", "across": "L1-L2", "watts": 2000}
    rows = [*dock(*TWO), adapter("box", "isolated_combiner", "", ""), cord(plug=FIFTY), *boat(kettle(), across, plug=FIFTY)]
    way = planned(rows)[0]
    assert (way["holds"], way["use"], way["reasons"]) == ("holds", MAY, [])
    assert [line["line"] for line in way["lines"]] == ["L1", "L1"]
    same = planned([*dock({"id": "outlet_a"}, {"id": "outlet_b"}), *rows[5:]])[0]
    assert "shared_neutral" in rules(same)


def test_an_open_ground_must_not_be_used() -> None:
    """A cord whose protective conductor is open is forbidden for that; a whole one is not."""
    rows = [*dock({"id": "outlet"}), cord(), *boat(kettle())]
    assert "no_protective_conductor" in rules(
        planned(rows, {"cause": "open_ground_with_leak", "at": "cord", "load": "kettle", "ohms": 1e6})[0]
    )
    assert "no_protective_conductor" not in rules(planned(rows)[0])


def test_live_metal_must_not_be_used() -> None:
    """Ashore, an open ground and a leak lift the hull to line voltage, which forbids the way even where no device trips."""
    rows = [*dock({"id": "outlet"}), cord(), *boat(kettle())]
    rows[-1]["afloat"] = False
    way = planned(rows, {"cause": "open_ground_with_leak", "at": "cord", "load": "kettle", "ohms": 5000})[0]
    assert "live_hull" in rules(way)
    assert way["hull_volts"] > 50
    healthy = planned(rows)[0]
    assert "live_hull" not in rules(healthy)
    assert healthy["hull_volts"] < 1


# --- power ---------------------------------------------------------------------------------------------------------


def test_power_left_is_what_the_breaker_leaves() -> None:
    """On 60 Hz four fifths of the rating less what flows (NEC practice, from memory), on 50 Hz the rating itself."""
    way = planned([*dock({"id": "outlet"}), cord(), *boat({"id": "lamp", "ohms": 12})])[0]
    (line,) = way["lines"]
    assert line["limit_a"] == pytest.approx(24.0)
    assert line["used_a"] == pytest.approx(10.0, rel=0.02)  # 120 V on 12 ohm, less a little drop
    assert line["left_a"] == pytest.approx(24.0 - line["used_a"])
    assert line["left_w"] == pytest.approx(120 * line["left_a"])
    outlet = {"id": "outlet", "connector": "16a_230v", "device": "rcd_30"}
    blue = planned([*dock(outlet, system="single_230"), cord(plug="16a_230v"), *boat(kettle(2300), plug="16a_230v")])[0]
    assert blue["lines"][0]["limit_a"] == pytest.approx(16.0)


def test_an_overload_names_what_must_stay_off() -> None:
    """Beyond the limit the way is forbidden with everything on, and may be used with the least load off that is enough."""
    loads = [kettle(1500), {"id": "heater", "watts": 1200}, {"id": "lamp", "watts": 300}]
    way = planned([*dock({"id": "outlet"}), cord(), *boat(*loads)])[0]
    assert rules(way) == {"overload"}
    assert [(one["load"], one["rule"]) for one in way["loads_off"]] == [("lamp", "overload")]
    eased = way["with_loads_off"]
    assert (eased["holds"], eased["use"]) == ("holds", MAY)
    assert all(line["left_a"] >= 0 for line in eased["lines"])
    assert rules(planned([*dock({"id": "outlet"}), cord(), *boat(*loads[:2])])[0]) == set()


def test_a_breaker_aboard_may_be_overloaded_too() -> None:
    """A main aboard whose rating is stated has a line of its own, and an overload where the outlet still has room."""
    way = planned([*dock({"id": "outlet"}), cord(), *boat(kettle(2400), rated_a=15)])[0]
    assert [(one["rule"], one["part"]) for one in way["reasons"]] == [("overload", "main.L1")]
    assert {(line["part"], line["kind"]) for line in way["lines"]} == {("outlet", "receptacle"), ("main", "main")}
    assert planned([*dock({"id": "outlet"}), cord(), *boat(kettle(1200), rated_a=15)])[0]["reasons"] == []


def test_loads_across_two_lines_get_nothing_from_one() -> None:
    """Behind a straight 30 to 50 adapter a load across the lines gets 0 V and is named as dead; on a four-wire outlet it runs in full."""
    oven = {"id": "oven", "across": "L1-L2", "watts": 2000}
    way = planned([*dock({"id": "outlet"}), adapter("up", "straight_30_50"), cord(plug=FIFTY), *boat(kettle(), oven, plug=FIFTY)])[0]
    assert [(one["load"], one["rule"]) for one in way["loads_off"]] == [("oven", "dead")]
    full = planned([*dock({"id": "outlet", "connector": FIFTY}), cord(plug=FIFTY), *boat(kettle(), oven, plug=FIFTY)])[0]
    assert (full["loads_off"], full["loads_weak"]) == ([], [])


def test_208_volts_on_a_240_volt_element_is_three_quarters_of_its_power() -> None:
    """On two legs of 208Y an element for 240 V runs at (208/240)^2 of its power, which is told."""
    oven = {"id": "oven", "across": "L1-L2", "watts": 500}
    rows = [*dock({"id": "outlet", "connector": FIFTY}, system="wye_120_208"), cord(plug=FIFTY), *boat(oven, plug=FIFTY)]
    (weak,) = planned(rows)[0]["loads_weak"]
    assert weak["rated_volts"] == 240
    assert weak["power_share"] == pytest.approx((208 / 240) ** 2, abs=0.01)


def test_low_volts_at_the_panel_name_what_must_stay_off() -> None:
    """Below 108 V of 120 V (common practice) at the panel the way is forbidden, and may be used with the heaviest load off."""
    loads = [kettle(1400), {"id": "lamp", "watts": 60}]
    way = planned([*dock({"id": "outlet"}), cord(line_ohms=0.7), *boat(*loads)])[0]
    assert rules(way) == {"low_volts"}
    assert way["panels"][0]["volts"] < 108 == way["panels"][0]["limit_volts"]
    assert [(one["load"], one["rule"]) for one in way["loads_off"]] == [("kettle", "low_volts")]
    assert way["with_loads_off"]["use"] == MAY
    assert planned([*dock({"id": "outlet"}), cord(), *boat(*loads)])[0]["reasons"] == []


def test_leaks_that_only_trip_together() -> None:
    """Two loads that hold alone and trip together: one of them must stay off, and with that off the rest holds."""
    loads = [{"id": "one", "watts": 100, "filter_nf": 300}, {"id": "two", "watts": 100, "filter_nf": 300}]
    way = planned([*dock({"id": "outlet"}), cord(), *boat(*loads)])[0]
    assert (way["holds"], way["worst"]["state"]) == ("may trip", "all_on")
    assert [one["rule"] for one in way["loads_off"]] == ["residual"]
    assert way["with_loads_off"]["holds"] == "holds"
    alone = planned([*dock({"id": "outlet"}), cord(), *boat(loads[0])])[0]
    assert (alone["holds"], alone["loads_off"]) == ("holds", [])


# --- the list ------------------------------------------------------------------------------------------------------


def test_best_first() -> None:
    """What may be used and holds stands before what needs loads off, that before what must not be used; then the most power left."""
    outlets = ({"id": "bare", "device": "none"}, {"id": "small", "connector": "20a_125v"}, {"id": "big"})
    rows = [*dock(*outlets), cord(), *boat(kettle(1000))]
    ways = planned(rows)
    assert [way["connections"][0]["from"] for way in ways] == [["big"], ["bare"]]
    keys = [(way["use"] != MAY, way["holds"] != "holds") for way in ways]
    assert keys == sorted(keys)


def test_a_long_list_is_cut_and_says_so(monkeypatch: pytest.MonkeyPatch) -> None:
    """Beyond the bound the rest is counted, the list is the same every time, and the present way is in it."""
    monkeypatch.setattr(planning, "MAX_WAYS", 5)
    outlets = [{"id": f"outlet_{number}", "rated_a": 20 + number} for number in range(9)]
    rows = [*dock(*outlets), cord(hung="outlet_8"), *boat(kettle(), inlet="cord")]
    found = plan(told(rows))
    assert (len(found["ways"]), found["left_out"], found["left_out_at_least"]) == (5, 4, False)
    assert any(way["present"] for way in found["ways"])
    assert json.dumps(found) == json.dumps(plan(told(rows)))


def test_a_dock_of_many_parts_gets_fewer_ways(monkeypatch: pytest.MonkeyPatch) -> None:
    """The bound falls with the number of parts, never below its least, and what is not worked out is counted."""
    rows = [*dock(*({"id": f"outlet_{number}", "rated_a": 20 + number} for number in range(9))), cord(), *boat(kettle())]
    monkeypatch.setattr(planning, "MIN_WAYS", 2)
    monkeypatch.setattr(planning, "MAX_PARTS", 4 * len(rows))
    found = plan(told(rows))
    assert (len(found["ways"]), found["left_out"]) == (4, 5)
    monkeypatch.setattr(planning, "MAX_PARTS", 1)
    assert len(plan(told(rows))["ways"]) == 2


def test_the_work_grows_with_the_loads_and_not_with_their_combinations() -> None:
    """A load more costs one way no factorization more: each load alone is a closed form on the network with all of them off."""

    def factorizations(count: int) -> int:
        loads = [{"id": f"lamp_{number}", "watts": 20} for number in range(count)]
        case = told([*dock({"id": "outlet"}), cord(), *boat(*loads)])
        before = solve.COUNTS.factorizations
        plan(case)
        return solve.COUNTS.factorizations - before

    assert factorizations(24) == factorizations(3)


def test_every_key_is_always_there() -> None:
    """Every way of every kind has the same keys, and so have its lists' rows: a reader needs no question."""
    ways = [way for rows, faults in MIXED.values() for way in planned(rows, *faults)]
    assert {tuple(way) for way in ways} == {tuple(ways[0])}
    for key in ("reasons", "cautions", "lines", "panels", "loads_off", "loads_weak", "all_on"):
        assert len({tuple(row) for way in ways for row in way[key]}) <= 1


def test_every_rule_has_its_words_and_nothing_is_called_safe() -> None:
    """Every rule that a plan names has words in the text, and neither text nor JSON calls anything safe."""
    for rows, faults in MIXED.values():
        found = plan(told(rows, faults))
        named = {one["rule"] for way in found["ways"] for key in ("reasons", "cautions", "loads_off") for one in way[key]}
        assert named <= RULES.keys()
        assert not re.search(r"\bsafe", plan_text(found) + json.dumps(found), re.IGNORECASE)


def test_a_plan_needs_a_boat() -> None:
    """Without an installation, and without an inlet, it is told what is missing."""
    with pytest.raises(CaseError, match="installation"):
        plan(read_case({"schema": 1}))
    with pytest.raises(CaseError, match="inlet"):
        plan(told(dock({"id": "outlet"})))
