"""The words for people: complete, filled with the right fields, in the right order of hands, and never saying what safety forbids."""

from __future__ import annotations

import re
import string
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

import sentence_rules as rules
from strayline.catalogue.causes import CAUSES
from strayline.catalogue.en import WORDS
from strayline.catalogue.questions import CLEAR, GATE, GATE_SIGNS, QUESTIONS
from strayline.catalogue.tests import ROLES, TESTS, TOOLS

if TYPE_CHECKING:
    from strayline.catalogue.causes import Cause
    from strayline.catalogue.tests import Test

LINES = {"steps", "cautions", "orders", "lead", "lines", "tonight", "remedy", "connect", "disconnect"}
FIELDS = {
    "fact.minutes.text": {"minutes"},
    "fact.waiting.text": {"minutes"},
    "why.residual": {"device", "current", "verdict"},
    "why.unprotected": {"current"},
    "why.hull": {"volts"},
    "why.ratio.for": {"asked", "answer", "times"},
    "why.ratio.against": {"asked", "answer", "times"},
    "verdict.named.title": {"title"},
    "verdict.possible": {"title"},
    "verdict.named.lead": {"percent"},
    "verdict.group.title": {"count"},
    "verdict.group.lead": {"percent"},
    "progress.early": {"percent"},
    "progress.sure": {"percent", "title"},
    "progress.group": {"percent", "count"},
    "progress.tests": {"count"},
    "progress.misfit": {"answers"},
    "assumed.unknown": {"asked"},
    "assumed.default": {"what", "value"},
    "assumed.mistakes": {"percent"},
    "problem.range": {"low", "high", "unit"},
    "problem.unit": {"unit"},
    "problem.number": {"unit"},
    "page.offline_getting": {"done", "total"},
}
OWNERS = [test for test in TESTS if {"user", "instructed"} & set(test.roles)]
ENERGISING = [test for test in TESTS if test.energises]


def _lines(key: str) -> tuple[str, ...]:
    words = WORDS[key]
    return words if isinstance(words, tuple) else (words,)


def _joined(key: str) -> str:
    return " ".join(_lines(key))


def _reader(key: str) -> str:
    trade = {test.id for test in TESTS if test not in OWNERS}
    return "trade" if key.startswith("test.") and key.split(".")[1] in trade else "owner"


def _expected() -> set[str]:
    keys = {
        "question.unknown",
        "test.ask",
        "test.cannot",
        "test.over_range",
    }
    keys |= {f"question.fixed.{part}" for part in ("text", "why", "done")}  # asked of a cause, so it stands in no table
    keys |= {"gate.title", "gate.lead", "gate.none", "gate.unknown", *(f"gate.{sign}" for sign in GATE_SIGNS)}
    keys |= {"stop.title", "stop.lead", "tonight.title", "tonight.lead", "tonight.orders", "cautions.title", "cautions.lines"}
    keys |= {f"stop.{sign}.{part}" for sign in (*GATE_SIGNS, "unknown", "not_clear") for part in ("title", "orders")}
    keys |= {f"question.{question.id}.{part}" for question in (GATE, CLEAR, *QUESTIONS) for part in ("text", "why", *question.choices)}
    keys |= {f"who.{role}" for role in ROLES} | {f"tool.{tool}" for tool in TOOLS} | {f"repair.{cause.repair}" for cause in CAUSES}
    parts = ("title", "lead", "tonight", "remedy", "marina", "confirm")
    keys |= {f"cause.{cause.id}.{part}" for cause in CAUSES for part in parts}
    for test in TESTS:
        asks = ("ask",) if test.model == "number" else test.outcomes
        keys |= {f"test.{test.id}.{part}" for part in ("title", "steps", "cautions", "why", *asks)}
    return keys


def test_every_id_has_all_its_words_and_no_word_lacks_an_id() -> None:
    """The gate, questions, causes, tests, roles and tools have exactly the words that their tables call for."""
    tabled = {
        key for key in WORDS if key.split(".")[0] not in {"fact", "device", "verdict", "why", "progress", "assumed", "problem", "page"}
    }
    assert tabled == _expected()


def test_every_verdict_and_stop_has_its_words() -> None:
    """Each way of stopping has a title and a lead, and each verdict of a device has its word."""
    for stop in ("named", "group", "nothing_now", "unknown", "danger"):
        assert WORDS[f"verdict.{stop}.title"]
        assert WORDS[f"verdict.{stop}.lead"]
    assert WORDS["verdict.unprotected"] == "nothing is watching"
    assert {"verdict.holds", "verdict.may_trip", "verdict.trips"} <= WORDS.keys()


def test_lists_are_lists_and_the_rest_single_texts() -> None:
    """Steps, cautions, orders and advice are tuples of sentences; titles, labels and choices are one text; a cause's lead is one text."""
    for key, words in WORDS.items():
        listed = key.split(".")[-1] in LINES and not re.match(r"cause\..*\.lead|page\.", key)
        assert isinstance(words, tuple) == listed, key
        assert words, key
        assert all(line == line.strip() and line and "  " not in line for line in _lines(key)), key


def test_lists_hold_whole_sentences() -> None:
    """Every line of a list begins with a capital, a digit or a field, and ends with a full stop or a question mark."""
    for key, words in WORDS.items():
        if isinstance(words, tuple):
            assert all(re.match(r"[A-Z0-9{“]", line) and line.endswith((".", "?")) for line in words), key


def test_templates_carry_the_declared_fields_and_no_others() -> None:
    """A text has exactly the fields that `screen` fills in; a text with none has no brace at all."""
    for key in WORDS:
        found = {name for _, name, spec, conversion in string.Formatter().parse(_joined(key)) if name is not None}
        assert found == FIELDS.get(key, set()), key
    assert FIELDS.keys() <= WORDS.keys()


def test_the_page_finds_every_label_it_names() -> None:
    """Each label named by the page's template, its build step or its scripts is in the catalogue."""
    webui = Path(__file__).parents[2] / "webui"
    sources = [webui / "index.html", webui / "static_pages.py", webui / "boot.js", *(webui / "page").glob("*.js")]
    text = "\n".join(source.read_text(encoding="utf-8") for source in sources if source.exists())
    named = set(re.findall(r"\{\{page\.(\w+)\}\}|\bword\(\"(\w+)\"\)|\bpage\[[\"'](\w+)[\"']\]|\bkey: \"(\w+)\"", text))
    assert named
    assert {f"page.{name}" for groups in named for name in groups if name.islower()} <= WORDS.keys()


# --- what may never be said ---


@pytest.mark.parametrize("key", WORDS)
def test_no_sentence_says_what_safety_forbids(key: str) -> None:
    """No catalogue sentence calls anything safe or proposes a lifted ground, a bypass, a live probe, one tail of a Y or the like."""
    assert [(line, broken) for line in _lines(key) if (broken := rules.forbidden(line, _reader(key)))] == []


BAD = {
    "The boat is safe to use now.": "called safe",
    "A reading of zero means the water is safe.": "called safe",
    "Do not worry, this is safe.": "called safe",
    "No problem: you can safely plug in.": "called safe",
    "There is no doubt it is safe.": "called safe",
    "Not only dry but safe.": "called safe",
    "The other outlet is safer.": "called safe",
    "The cord is not dangerous.": "called safe",
    "Your wiring is healthy.": "called safe",
    "All clear: you can swim.": "called safe",
    "There is no danger tonight.": "called safe",
    "There is no leakage.": "called safe",
    "No leakage now.": "called safe",
    "Everything is fine.": "called safe",
    "Nothing is wrong with this boat.": "called safe",
    "Lift the ground and try once more.": "lifts a ground",
    "Disconnect the green wire to see if it stops.": "lifts a ground",
    "Do not be afraid to cut the ground (earth) pin.": "lifts a ground",
    "Do not open the post, but remove the earth wire.": "lifts a ground",
    "If nothing helps lift the ground pin.": "lifts a ground",
    "Run it for a minute with the ground wire taped off.": "lifts a ground",
    "Use a two-prong adapter.": "lifts a ground",
    "Plug in without the earth for one minute.": "lifts a ground",
    "Bypass the device to find out.": "bypasses a device",
    "Never mind the label: bypass it.": "bypasses a device",
    "Bridge the two terminals with a wire.": "bypasses a device",
    "Hold the breaker handle up.": "bypasses a device",
    "Tape the breaker in the on position.": "bypasses a device",
    "The technician can defeat the relay for a test.": "bypasses a device",
    "Fit a bigger breaker.": "up-rates a device",
    "Ask the marina to raise the trip setting.": "up-rates a device",
    "Replace it with a 100 mA device.": "up-rates a device",
    "Ask for a less sensitive one.": "up-rates a device",
    "File the blades until it fits.": "defeats a plug",
    "Force the plug into the outlet.": "defeats a plug",
    "Move to an outlet without ground-fault protection.": "unprotected outlet",
    "Try the unprotected outlet at the end of the dock.": "unprotected outlet",
    "The old post has no TEST button. Plug in there.": "unprotected outlet",
    "Use the socket by the bar: that outlet never trips.": "unprotected outlet",
    "Power one tail of the Y.": "one tail of a Y",
    "Unplug one leg of the Y and see.": "one tail of a Y",
    "With the Y in place, turn on one side.": "one tail of a Y",
    "Plug in one cord and leave the other hanging.": "one tail of a Y",
    "Try either of the two cords.": "one tail of a Y",
    "Test the plugs one at a time.": "one tail of a Y",
    "Open the dock post and look for water.": "opens a shore enclosure",
    "Unscrew the cover of the pedestal.": "opens a shore enclosure",
    "Look inside the post with a torch.": "opens a shore enclosure",
    "Take the cover off, or open the panel.": "opens a panel",
    "Measure the volts at the outlet.": "probes something live",
    "Put the meter leads into the dock socket.": "probes something live",
    "Touch the live end with the tester.": "probes something live",
    "Probe the far end of the cord.": "probes something live",
    "If it trips, reset it.": "resets again",
    "Turn it on again until it holds.": "resets again",
    "Try it once more.": "resets again",
    "Jump in and pull them out.": "sends someone into the water",
    "Swim to the ladder.": "sends someone into the water",
    "Ask a neighbour to plug in at your post.": "lends the hazard",
    "Plug another boat in here.": "lends the hazard",
    "Pull the hot plug at once.": "handles what is hot or wet",
    "Run the generator in the cabin overnight.": "fumes",
    "This boat has passed.": "called safe",
    "You may let the children swim.": "called safe",
    "It holds, so the boat is sound.": "called safe",
    "Nothing is leaking.": "called safe",
    "Snip off the third pin.": "lifts a ground",
    "Unplug the ground wire at the inlet.": "lifts a ground",
    "The ground pin can be cut off.": "lifts a ground",
    "Connect straight to the bus, past the breaker.": "bypasses a device",
    "Take the ground-fault device out of the circuit.": "bypasses a device",
    "Wedge a match under the handle.": "bypasses a device",
    "Swap the breaker for one of 50 A.": "up-rates a device",
    "Ask the marina to turn the sensitivity down.": "up-rates a device",
    "Find an older post; those do not trip.": "unprotected outlet",
    "Run an extension from an unprotected circuit.": "unprotected outlet",
    "Pull out one of the Y's plugs.": "one tail of a Y",
    "Energise only the left cord of the pair.": "one tail of a Y",
    "Switch on one breaker of the Y.": "one tail of a Y",
    "Take the lid off the dock post.": "opens a shore enclosure",
    "Measure across the blades.": "probes something live",
    "Push the handle up again.": "resets again",
    "Reset twice before you give up.": "resets again",
    "Have a swimmer look at it.": "sends someone into the water",
    "Ask the boat next door to try your outlet.": "lends the hazard",
    "Unplug it while it is running.": "handles what is hot or wet",
    "Grab the person at once.": "handles what is hot or wet",
    "Ignore the polarity light.": "ignores a warning",
    "Turn the outlet on after the bang to see.": "powers what is damaged",
    "Dry the element out on shore power.": "powers what is damaged",
    "Run the heater on the dock until it has dried.": "powers what is damaged",
    "Leave both heaters on, since it holds that way.": "powers what is damaged",
}

GOOD = (
    "Never lift or cut the ground (earth) wire.",
    "Do not bypass the device.",
    "Never fit a bigger breaker.",
    "Nothing here is called safe.",
    "A metal boat with a broken ground is not safe.",
    "That hook-up is unsafe.",
    "No leakage now, with these loads running.",
    "Never move to an outlet without protection.",
    "Use one outlet whose ground-fault device TEST has opened.",
    "Never leave one plug of the Y in.",
    "Take the whole Y out, both plugs.",
    "Do not open the dock post (pedestal).",
    "Pull the plug out of the dock post.",
    "Do not jump in.",
    "Do not pull the hot plug.",
    "Never measure into the dock outlet.",
    "The ground (earth) wire is broken.",
    "Turn on one load, wait, and turn it off.",
    "The breaker on the dock post opened.",
    "Do not try to dry it out on shore power.",
    "Nobody turns this outlet on after the bang.",
)


@pytest.mark.parametrize(("sentence", "rule"), BAD.items())
def test_the_sentence_check_catches_what_it_must(sentence: str, rule: str) -> None:
    """Each planted bad sentence is caught, by the rule that it breaks."""
    assert rule in rules.forbidden(sentence)


@pytest.mark.parametrize("sentence", GOOD)
def test_the_sentence_check_lets_warnings_and_plain_orders_pass(sentence: str) -> None:
    """Each planted good sentence passes: a warning may name what it forbids."""
    assert rules.forbidden(sentence) == []


def test_the_trade_may_be_told_to_measure_and_an_owner_may_not() -> None:
    """The same measuring order passes for a technician and is caught for an owner; a lifted ground is caught for both."""
    assert rules.forbidden("Read volts at the inlet.", "trade") == []
    assert rules.forbidden("Read volts at the inlet.", "owner") == ["probes something live"]
    assert rules.forbidden("Lift the ground.", "trade") == ["lifts a ground"]


# --- the order of hands ---


@pytest.mark.parametrize("test", TESTS, ids=lambda test: test.id)
def test_nothing_is_moved_live_and_the_end_is_dark(test: Test) -> None:
    """In every test the dock breaker and the boat's main are off before a plug or cord moves, and the dock breaker ends off."""
    steps = _lines(f"test.{test.id}.steps")
    assert rules.moves_live(steps) == []
    assert not rules.left_live(steps)


@pytest.mark.parametrize(
    "steps",
    [
        ("Pull the plug out of the dock post.",),
        ("Turn off the breaker on the dock post.", "Pull the plug out of the dock post."),
        ("Turn off the main switch aboard.", "Then take the cord off the boat."),
        (
            "Turn off the main switch aboard.",
            "Turn off the breaker on the dock post.",
            "Turn on the breaker on the dock post.",
            "Pull the plug.",
        ),
        ("Connect the boat end of the cord first.", "Turn off the main switch aboard.", "Turn off the breaker on the dock post."),
        ("Turn off the main switch aboard.", "Pull the plug. Then turn off the breaker on the dock post."),
    ],
)
def test_the_order_check_catches_a_live_move(steps: tuple[str, ...]) -> None:
    """Each planted list in which something moves too early is caught."""
    assert rules.moves_live(steps)


@pytest.mark.parametrize(
    "steps", [("Look at the cord.",), ("Turn off the breaker on the dock post.", "Turn on the breaker on the dock post, once.")]
)
def test_the_order_check_catches_a_live_end(steps: tuple[str, ...]) -> None:
    """A list that leaves the dock breaker on, or never turns it off, counts as left live."""
    assert rules.left_live(steps)


@pytest.mark.parametrize("test", ENERGISING, ids=lambda test: test.id)
def test_every_test_that_restores_power_says_off_once_and_who_is_clear(test: Test) -> None:
    """A test with power names the dock breaker off before it names it on, and warns: once, nobody in the water, no thunder."""
    steps = " ".join(_lines(f"test.{test.id}.steps"))
    cautions = _joined(f"test.{test.id}.cautions")
    assert -1 < steps.index("Turn off") < steps.index("Turn on")
    assert re.search(r"[Tt]urn on the breaker on the (?:new )?dock post, once", steps)
    for warning in ("nobody in the water", "Turn it on once", "leave it off", "thunder", "smell"):
        assert warning in cautions


@pytest.mark.parametrize("test", [test for test in TESTS if not test.energises], ids=lambda test: test.id)
def test_a_test_without_power_never_turns_the_dock_on(test: Test) -> None:
    """The steps of a test that restores no power do not switch the dock breaker on."""
    assert "Turn on the breaker" not in _joined(f"test.{test.id}.steps")


@pytest.mark.parametrize("test", [test for test in TESTS if test.tool == "none"], ids=lambda test: test.id)
def test_a_test_without_tools_asks_for_no_meter(test: Test) -> None:
    """Steps for bare hands mention no meter, clamp, ohms or test leads."""
    assert not re.search(r"\b(?:multimeter|meter|clamp|ohms?|megohms?|volts)\b", _joined(f"test.{test.id}.steps"))


@pytest.mark.parametrize("name", ["bond_ohms", "insulation"])
def test_no_ohms_into_a_boat_that_can_feed_itself(name: str) -> None:
    """Cord out, inverter off at its DC switch, generator locked, volts below 1 V, meter proven twice: only then ohms or test voltage."""
    steps = _joined(f"test.{name}.steps")
    marks = [
        "out of the dock post",
        "DC switch",
        "generator start",
        "Prove the meter",
        "below 1 V",
        "Prove the meter on the known source once more",
    ]
    places = [steps.rindex(mark) if mark == marks[-1] else steps.index(mark) for mark in marks]
    assert places == sorted(places)
    assert all(found.start() > places[-1] for found in re.finditer(r"\bohms\b|V DC\b", steps))


def test_the_whole_y_comes_out_dead() -> None:
    """Both dock breakers off, both cords dead, both plugs out, one outlet that TEST has opened, and never one plug left in."""
    steps = _joined("test.without_y.steps")
    assert (
        steps.index("Turn off the main") < steps.index("Turn off both breakers") < steps.index("Pull both plugs") < steps.index("Turn on")
    )
    assert "whole Y" in steps
    assert "TEST button must have opened it" in _joined("test.without_y.cautions")
    assert "Never leave one plug of the Y in" in _joined("test.without_y.cautions")


def test_a_hold_counts_only_where_the_load_ran() -> None:
    """Every test that waits for a load asks whether it really runs or did run."""
    for name in ("one_at_a_time", "test_load", "without_y", "clamp_cord", "clamp_live", "clamp_ground"):
        assert re.search(r"did it run\?|Check that (?:it|they) runs?", _joined(f"test.{name}.steps"))


def test_another_post_counts_only_when_it_watches() -> None:
    """At another post TEST must open the device before the boat is plugged in, and after a tingle nobody goes there at all."""
    steps = _joined("test.other_pedestal.steps")
    assert steps.index("press TEST") < steps.index("does not open it, stop here") < steps.index("push the plug into the new dock post")
    assert "tingle" in _joined("test.other_pedestal.cautions")


# --- stop and tonight ---


def test_stop_orders_put_power_off_before_hands() -> None:
    """Power off comes before touching a person, lifting a cord or pulling a plug; a swimmer gets a float, not a rescuer in the water."""
    swimmer = _joined("stop.person_in_water.orders")
    for words in ("Do not jump in", "whole dock", "emergency shutoff", "float", "away from docks", "emergency number"):
        assert words in swimmer
    down = _joined("stop.person_down.orders")
    assert down.index("Do not touch") < down.index("Cut the power") < down.index("help the person")
    cord = _joined("stop.cord_in_water.orders")
    assert cord.index("Do not touch or lift") < cord.index("breaker on the dock post") < cord.index("Only then pull")
    hot = _joined("stop.hot_plug.orders")
    assert hot.index("Do not pull") < hot.index("Turn off the breaker") < hot.index("cool")
    assert "30 minutes" in _joined("stop.lightning.orders")  # the public rule of weather services: 30 minutes after the last thunder


def test_general_orders_reach_help() -> None:
    """The general stop orders name the emergency number, VHF 16, the dock's shutoff, and that nothing is reset."""
    for words in ("local emergency number", "VHF channel 16", "emergency shutoff", "Reset nothing"):
        assert words in _joined("stop.lead")


def test_tonight_covers_a_night_without_shore_power() -> None:
    """Before any diagnosis: unplugged, nobody swims, marina told; then bilge pump first, fumes, medical devices, food, frost, inverter."""
    orders = _lines("tonight.orders")
    text = " ".join(orders)
    for words in (
        "Unplug the boat",
        "Nobody swims",
        "Tell the marina",
        "bilge-pump battery first",
        "carbon monoxide",
        "medical",
        "food",
        "frost",
        "inverter",
    ):
        assert words in text
    assert "cord out" in next(line for line in orders if "inverter" in line)


@pytest.mark.parametrize("cause", [cause for cause in CAUSES if cause.lethal], ids=lambda cause: cause.id)
def test_a_cause_that_can_kill_means_unplugged_and_no_swimming(cause: Cause) -> None:
    """For every lethal cause tonight's advice is: unplugged, nobody swims, marina told."""
    assert set(_lines("tonight.orders")) & set(_lines(f"cause.{cause.id}.tonight"))
    text = _joined(f"cause.{cause.id}.tonight")
    assert "unplugged" in text
    assert "Nobody swims" in text
    assert "Tell the marina" in text


# --- plain words ---


@pytest.mark.parametrize("cause", CAUSES, ids=lambda cause: cause.id)
def test_an_owner_can_read_about_each_cause(cause: Cause) -> None:
    """Title, lead, tonight, remedy and marina of each cause read at Flesch-Kincaid grade 8 or below."""
    parts = ("lead", "tonight", "remedy", "marina")
    assert rules.grade(line for part in parts for line in _lines(f"cause.{cause.id}.{part}")) <= 8


@pytest.mark.parametrize("test", OWNERS, ids=lambda test: test.id)
def test_an_owner_can_read_each_test(test: Test) -> None:
    """Steps, cautions and reason of each test for owners read at grade 8 or below."""
    parts = ("steps", "cautions", "why")
    assert rules.grade(line for part in parts for line in _lines(f"test.{test.id}.{part}")) <= 8


@pytest.mark.parametrize("prefix", ["gate", "stop", "tonight", "cautions", "question", "verdict", "problem", "page"])
def test_an_owner_can_read_the_rest(prefix: str) -> None:
    """The gate, stop, tonight, cautions, questions, verdicts and page labels read at grade 8 or below."""
    sentences = [line if line.endswith((".", "?")) else f"{line}." for key in WORDS if key.split(".")[0] == prefix for line in _lines(key)]
    assert rules.grade(sentences) <= 8


def test_the_grade_formula_gives_what_it_says() -> None:
    """Six one-syllable words in one sentence score 0.39 x 6 + 11.8 - 15.59; long words score higher."""
    assert rules.grade(["The cat sat on the mat."]) == pytest.approx(0.39 * 6 + 11.8 - 15.59)
    assert rules.grade(["Interconnected neutral conductors necessitate investigation."]) > 12


def test_no_word_of_a_telltale_kind() -> None:
    """No text names a machine's paths, a web address or an author's tool."""
    everything = " ".join(_joined(key) for key in WORDS)
    assert not re.search(r"https?:|/(?:root|work|tmp)/|\bAI\b", everything)
