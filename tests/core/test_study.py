"""The study itself, short: its truth agrees with the core where both can know, its scores are as hard as they read, its list catches."""

from __future__ import annotations

import itertools
import json
import math
import random
import struct
import zlib
from collections import Counter
from typing import TYPE_CHECKING, Any

import numpy as np
import pytest

import cases
import player
import referee
import scores
from forbidden import judged, proposal_of
from plots import SIDE, reliability_plot
from strayline import contexts, session
from strayline.catalogue.tests import TEST
from strayline.network import Branch, Network, Sensor
from strayline.parts import read
from strayline.predict import HULL, predictions
from strayline.session import Answer, latents
from strayline.severities import severities
from strayline.wiring import EARTH
from tables import study
from witness import Witness

if TYPE_CHECKING:
    from pathlib import Path

    from strayline.faults import Fault

FACTS = {"supply": "split_120_240", "plug": "combining_y", "pedestal_device": "device_30", "aboard_device": "device_30"}
STATES = (contexts.AS_FOUND, "main_off", "branches_off", "without_y", "one_load:heater", "cord_out")
USER, CLAMP = player.ROWS[0], player.ROWS[2]


# --- the truth -----------------------------------------------------------------------------------------------------


def case_of(fault: Fault, known: tuple[Any, ...], **changed: Any) -> cases.Case:
    """A case of one fault on the boat of FACTS, said as it is."""
    raw, _, _ = cases.typical(tuple(FACTS.items()))
    return cases.Case(1, 0, "", FACTS, FACTS, raw, (fault.cause,), (fault,), known, "computed", **changed)


@pytest.mark.parametrize("context", STATES)
def test_the_referee_agrees_with_the_tables_at_grid_points(context: str) -> None:
    """On the points of the grid numpy's full solve and the core's closed forms show the same residuals, loops, currents and volts."""
    _, installation, _ = cases.typical(tuple(FACTS.items()))
    predicted = predictions(installation, latents(installation))
    made = predicted.outlooks(context)
    assert made is not None
    for point, outlook in list(zip(predicted.points, made[1], strict=True))[:: 1 + len(predicted.points) // 15]:
        state = referee.World(case_of(point.fault, point.latents)).state(context, (point.fault,))
        assert state is not None
        for place, watch in enumerate(state.watched):
            assert state.solved.residual_a(watch.id) == pytest.approx(outlook.residual_a[place], abs=1e-7)
            assert state.solved.loops[watch.id] == pytest.approx(outlook.loop_s[place], rel=1e-6, abs=1e-7)
            if watch.rated_a:
                assert state.line_a(watch) == pytest.approx(outlook.line_a[place], abs=1e-6)
        if HULL in outlook.readings:
            assert state.solved.between("hull.metal", EARTH) == pytest.approx(outlook.readings[HULL], abs=1e-4)
        if "meter_ohm" in outlook.readings:
            assert state.reading("neutral_ground_ohm") == pytest.approx(outlook.readings["meter_ohm"], rel=1e-5)


def test_the_referee_solves_two_islands_and_a_loop_by_hand() -> None:
    """A source over two resistors gives V/R; a volt in the window of both conductors drives nothing unless a third way closes the loop."""
    branches = (
        Branch("source", "g", "a", 1 + 0j, "source", "x", 10 + 0j),
        Branch("line", "a", "b", 1 + 0j, "line", "x"),
        Branch("load", "b", "c", 7 + 0j, "load", "x"),
        Branch("neutral", "g", "c", 1 + 0j, "neutral", "x"),
        Branch("ground", "c", "g", 3 + 0j, "protective", "x"),
        Branch("apart", "p", "q", 5 + 0j, "line", "x"),
    )
    one = referee.dense(Network(60, "g", branches, (Sensor("s", ("line", "neutral"), "none", frozenset()),)))
    total = 1 + 1 + 7 + 1 * 3 / (1 + 3)
    assert abs(one.amperes["line"]) == pytest.approx(10 / total)
    assert one.residual_a("s") == pytest.approx(10 / total / 4)  # a quarter of it comes home by three ohms instead of one
    assert one.between("p", "g") == 0.0
    # a volt in line and neutral: line and load are nine ohms, neutral one; they meet at c and return by three
    nine, home, ground = 9.0, 1.0, 3.0
    at_c = (1 / nine + 1 / home) / (1 / nine + 1 / home + 1 / ground)
    assert one.loops["s"] == pytest.approx(at_c / ground)


def test_thresholds_lie_where_they_should() -> None:
    """The middle place of a band is its geometric mean, and its ends are passed by one device in a hundred."""
    assert referee.threshold(15, 30, 0.0) == pytest.approx(math.sqrt(450))
    edge = math.log(0.99 / 0.01)
    assert referee.threshold(15, 30, edge) == pytest.approx(30)
    assert referee.threshold(15, 30, -edge) == pytest.approx(15)


def test_a_device_is_the_same_all_through_a_case() -> None:
    """Asked twice, or in another world of the same case, a device has one temper; about as many are dead as the case says."""
    known = cases.draw(1, 3)
    worlds = referee.World(known), referee.World(known)
    watched = worlds[0].state(contexts.AS_FOUND, known.faults).watched
    assert [worlds[0].temper(watch) for watch in watched] == [worlds[1].temper(watch) for watch in watched]
    dead = 0
    for number in range(400):
        one = cases.Case(2, number, "", {}, {}, known.installation, (), (), (), "random", dead_share=0.25)
        world = referee.World(one)
        dead += sum(not world.temper(watch).works for watch in watched if watch.role == "feeder")
    assert 0.18 < dead / 400 < 0.32


# --- what is drawn -------------------------------------------------------------------------------------------------


def test_severities_are_drawn_off_the_grid_and_near_it() -> None:
    """No drawn ohms stand on the grid, all lie within its outer cells, and states that are zero or one stay."""
    _, installation, weights = cases.typical(tuple(FACTS.items()))
    draw = random.Random(4)
    for cause in weights:
        grid = [one.fault for one in severities(cause, installation)]
        for chosen in grid:
            fault = cases.off_grid(draw, grid, chosen)
            assert (fault.cause, fault.at, fault.load) == (chosen.cause, chosen.at, chosen.load)
            for name in ("ohms", "nanofarads", "spontaneous", "scale"):
                value, point = getattr(fault, name), getattr(chosen, name)
                if point in (0.0, 1.0):
                    assert value == point
                else:
                    assert value not in {getattr(one, name) for one in grid}
                    assert point / 6 < value < point * 6


def test_cases_are_the_same_again_and_cover_the_arrangements() -> None:
    """A case is its seed and number; forty of them have at least seven arrangements, and most trip as found when the solve is to say."""
    drawn = [cases.draw(5, number) for number in range(40)]
    assert cases.draw(5, 17) == drawn[17]
    assert len({(one.facts["supply"], one.facts["plug"]) for one in drawn}) >= 7
    assert len({one.causes for one in drawn}) >= 8
    computed = [one for one in drawn if one.moment == "computed"]
    assert len(computed) > 15
    assert all(referee.World(one).opened(contexts.AS_FOUND, random.Random(one.key), one.faults) for one in computed)


def test_each_variant_changes_what_it_is_about() -> None:
    """Wrong facts are one a case, two causes are two, a cause outside the list says so, and the plain case stands behind them all."""
    plain, facts = [cases.draw(6, number) for number in range(6)], [cases.draw(6, number, "fact") for number in range(6)]
    for one, other in zip(plain, facts, strict=True):
        assert one.facts == other.facts
        differing = [name for name in one.facts if other.stated[name] not in (other.facts[name], "unknown")]
        assert len(differing) == 1
    assert {len(cases.draw(6, number, "pairs").causes) for number in range(3)} == {2}
    outside = [cases.draw(6, number, "outside").causes[0] for number in range(30)]
    assert 1 <= sum(cause.startswith("outside:") for cause in outside) <= 9
    assert cases.draw(6, 1, "boats").installation != cases.draw(6, 1).installation


def test_mistakes_come_as_often_as_stated() -> None:
    """Of many answers to one test about the stated share is another outcome; with none stated, none is."""
    fault = severities("panel_bond", read(cases.typical(tuple(FACTS.items()))[0]))[0].fault
    for wrong, low, high in ((0.0, 0.0, 0.0), (0.2, 0.14, 0.26)):
        other = 0
        for number in range(400):
            one = case_of(fault, ())
            one = cases.Case(9, number, "", FACTS, FACTS, one.installation, one.causes, one.faults, (), "computed", dead_share=0.0)
            value, hands = Witness(one, _Still(one), wrong, Counter()).test(TEST["test_button"])
            other += hands and value == "stays"
        assert low <= other / 400 <= high


class _Still:
    """A world in which every device works and nothing needs solving."""

    def __init__(self, case: cases.Case) -> None:
        self.case = case

    def now(self, moment: random.Random) -> tuple[Fault, ...]:
        return ()

    def state(self, context: str, faults: tuple[Fault, ...]) -> Any:
        return type("Told", (), {"watched": [type("Outlet", (), {"role": "pedestal", "id": "outlet"})]})

    def temper(self, watch: Any) -> referee.Temper:
        return referee.Temper(True, False, 0, 0, 0, 0)


# --- playing -------------------------------------------------------------------------------------------------------


def test_a_short_study_runs_and_prints() -> None:
    """Four cases by two people with every policy end within the guard, propose nothing forbidden, are the same again, and make a report."""
    records = []
    for number in range(4):
        one = cases.draw(8, number)
        world = referee.World(one)
        records += [player.play(one, world, row, policy, 0.05) for row in (USER, CLAMP) for policy in ("flow", "fixed", "probable")]
    assert {record["verdict"] for record in records} <= {"named", "group", "nothing_now", "unknown", "danger", "halted"}
    assert [record["unsafe"] for record in records if record["unsafe"]] == []
    assert sum(record["proposals"] for record in records) > 40
    again = cases.draw(8, 3)
    repeated = player.play(again, referee.World(again), CLAMP, "probable", 0.05)
    told = json.loads(json.dumps(records[-1])) | {"slowest_s": 0}
    assert json.loads(json.dumps(repeated)) | {"slowest_s": 0} == told
    printed = study(records, 0.05)
    assert "names the cause or its group first" in printed
    assert "confusions" in printed


def test_what_is_named_is_isolated_and_the_next_one_is_looked_for() -> None:
    """Of two causes the first is repaired when it is named, the boat is tried again, and what was found is kept."""
    records = []
    for number in range(2):
        one = cases.draw(3, number, "pairs")
        records.append(player.play(one, referee.World(one), CLAMP, "flow", 0.0))
    assert all(set(record["found"]) <= set(record["causes"]) for record in records)
    assert any(record["found"] for record in records)


# --- the forbidden list --------------------------------------------------------------------------------------------

# (what is wrong with it, test, who, plug, pedestal device, reports before)
PLANTED: tuple[tuple[str, str, str, str, str, tuple[tuple[str, str], ...]], ...] = (
    ("an owner opens the panel for ohms", "bond_ohms", "user", "one_cord", "device_30", ()),
    ("a captain puts a clamp on single conductors", "clamp_ground", "instructed", "one_cord", "device_30", ()),
    ("a shore electrician tests insulation aboard", "insulation", "electrician", "one_cord", "device_30", ()),
    ("a Y is energised", "one_at_a_time", "technician", "combining_y", "device_30", ()),
    ("one of two cords lies live", "cord_alone", "user", "two_cords", "device_30", ()),
    ("a home-made lead is energised", "branches_off", "user", "homemade", "device_30", ()),
    ("a wet cord lies live and free", "cord_alone", "user", "one_cord", "device_30", (("look_over", "wet"),)),
    ("an outlet with a dead device feeds the boat", "main_off", "user", "one_cord", "device_30", (("test_button", "stays"),)),
    ("what tripped with the main off is turned on with loads", "test_load", "user", "one_cord", "device_30", (("main_off", "trips"),)),
    ("a boat that trips is carried to a stranger's post", "other_pedestal", "user", "one_cord", "class_a", (("branches_off", "trips"),)),
    ("an exchanged cord carries power", "main_off", "technician", "one_cord", "device_30", (("adapter_continuity", "exchanged"),)),
    ("a test that nobody has read", "lift_the_ground", "technician", "one_cord", "device_30", ()),
)


@pytest.mark.parametrize("planted", PLANTED, ids=lambda planted: planted[0])
def test_every_planted_unsafe_test_is_caught(planted: tuple[str, str, str, str, str, tuple[tuple[str, str], ...]]) -> None:
    """A planted step is on the list, and the core's own filter, which knows nothing of the list, refuses it as well."""
    _, test, role, plug, device, reports = planted
    given = [("gate", "none"), ("role", role), ("tools", "insulation"), ("supply", "split_120_240"), ("plug", plug)]
    given += [("pedestal_device", device), ("aboard_device", "device_30"), ("opened", "pedestal"), ("when", "any_load")]
    given += [("afloat", "afloat")]
    answers = [Answer(question, None, value, seq) for seq, (question, value) in enumerate([*given, *reports], 1)]
    assert judged(proposal_of(test, answers))
    assert test not in session.replay(answers).allowed


def test_a_flow_without_its_filter_is_found_out(monkeypatch: pytest.MonkeyPatch) -> None:
    """With the core's filter taken away, the same walk proposes what the list forbids: an empty count means something."""
    one = cases.draw(8, 2)
    monkeypatch.setattr(session, "refusal", lambda test, situation: None)
    record = player.play(one, referee.World(one), USER, "fixed", 0.0)
    assert record["unsafe"]


# --- scores --------------------------------------------------------------------------------------------------------

GIVEN = (
    ("gate", "none"), ("role", "user"), ("tools", "none"), ("supply", "single_230"), ("plug", "one_cord"), ("pedestal_device", "device_30"),
    ("aboard_device", "device_30"), ("opened", "pedestal"), ("when", "any_load"), ("afloat", "afloat"),
)  # fmt: skip
PLAIN: dict[str, Any] = {
    "causes": ["panel_bond"], "verdict": "named", "shown": ["panel_bond"], "leader": "panel_bond", "top": 0.95, "share": 0.95,
    "flaws": [], "benign": False, "peril": [], "lethal": True, "warned": True, "found": [],
}  # fmt: skip


def test_a_group_is_right_only_where_it_counts() -> None:
    """The truth in second place of a group is right if the group counts and wrong if it does not; first place is always right."""
    second = PLAIN | {"verdict": "group", "shown": ["frame_strap", "panel_bond"], "leader": "frame_strap"}
    assert scores.right(second)
    assert scores.right(second | {"flaws": ["was separable"]})
    for flaw in ("too many", "separable", "advice", "repairer", "deadliness"):
        assert not scores.right(second | {"flaws": [flaw]})
        assert scores.right(second | {"flaws": [flaw], "causes": ["frame_strap"]})
    assert not scores.right_alone(second)


def test_sure_and_wrong_and_missed_are_told_apart() -> None:
    """Sure means at least 90 %; a miss needs a deadly truth and a benign word; "unknown" misses nothing."""
    wrong = PLAIN | {"shown": ["overload"], "leader": "overload", "benign": True}
    assert scores.sure_wrong(wrong)
    assert not scores.sure_wrong(wrong | {"share": 0.89})
    assert scores.missed_any(wrong)
    assert not scores.missed(wrong)
    assert scores.missed(wrong | {"peril": ["live metal"]})
    assert not scores.missed(wrong | {"peril": ["live metal"], "benign": False})
    assert not scores.unwarned(wrong)
    assert scores.unwarned(wrong | {"warned": False})


def test_outside_the_list_only_unknown_is_right() -> None:
    """Whatever is named for a cause that is not on the list is wrong."""
    outside = PLAIN | {"causes": ["outside:surge"]}
    assert not scores.right(outside)
    assert scores.right(outside | {"verdict": "unknown"})


def test_groups_are_alike_in_what_to_do() -> None:
    """Causes with other advice for tonight, another repairer or another danger are no group, and nor are four, nor what a test parts."""
    ended = session.replay([Answer(question, None, value, seq) for seq, (question, value) in enumerate(GIVEN, 1)])
    assert player.flaws(ended, ["panel_bond"]) == []
    found = {flaw for causes in itertools.combinations(ended.marginal, 2) for flaw in player.flaws(ended, causes)}
    assert found == {"separable", "advice", "repairer", "deadliness"}
    assert "too many" in player.flaws(ended, list(ended.marginal)[:4])
    assert {"repairer", "advice"} <= set(player.flaws(ended, ["wet_cord", "wet_pedestal"]))  # a user dries the one, a trade the other


def test_intervals_are_those_of_the_formula() -> None:
    """Wilson's interval of 8 in 10 is 0.490 to 0.943 (his formula worked by hand); the mean's interval holds the mean and narrows."""
    low, high = scores.Share(8, 10).interval
    assert (low, high) == (pytest.approx(0.4902, abs=1e-4), pytest.approx(0.9433, abs=1e-4))
    wide, narrow = scores.Mean((1.0, 5.0) * 5), scores.Mean((1.0, 5.0) * 500)
    assert wide.interval[0] < 3.0 < wide.interval[1]
    assert narrow.interval[1] - narrow.interval[0] < wide.interval[1] - wide.interval[0]


def test_calibration_is_counted_in_equal_bins() -> None:
    """Claims of 0.6 and 0.9 that come true in half of the cases are off by 0.1 and 0.4, which makes 0.25 on the average."""
    made = [PLAIN | {"top": top, "leader": "panel_bond" if number % 2 else "overload"} for top in (0.9, 0.6) for number in range(50)]
    assert [count for _, _, count in scores.reliability(made)] == [10] * scores.BINS
    assert scores.calibration_error(made) == pytest.approx(0.25)
    draw = random.Random(1)
    claims = [draw.random() for _ in range(4000)]
    fair = [PLAIN | {"top": claim, "leader": "panel_bond" if draw.random() < claim else "overload"} for claim in claims]
    assert scores.calibration_error(fair) < 0.03


def test_the_plot_is_a_picture(tmp_path: Path) -> None:
    """The PNG has its signature, its size, sound check sums, and pixels of the curve's colour where the point lies."""
    path = tmp_path / "plot.png"
    colours = reliability_plot(path, {"user/none": [(0.5, 0.4, 10), (0.9, 0.95, 10)]})
    content = path.read_bytes()
    assert content.startswith(b"\x89PNG\r\n\x1a\n")
    place, parts = 8, {}
    while place < len(content):
        (length,) = struct.unpack(">I", content[place : place + 4])
        name, body = content[place + 4 : place + 8], content[place + 8 : place + 8 + length]
        assert struct.unpack(">I", content[place + 8 + length : place + 12 + length])[0] == zlib.crc32(name + body)
        parts[name] = body
        place += 12 + length
    assert struct.unpack(">II", parts[b"IHDR"][:8]) == (SIDE, SIDE)
    pixels = np.frombuffer(zlib.decompress(parts[b"IDAT"]), np.uint8).reshape(SIDE, 1 + 3 * SIDE)[:, 1:].reshape(SIDE, SIDE, 3)
    assert (pixels == np.array(colours["user/none"], np.uint8)).all(axis=2).sum() > 100
