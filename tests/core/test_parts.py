"""Reading the parts of an installation: what is refused and how it is told, what is assumed, and the order of things."""

from __future__ import annotations

import math
import random
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from strayline.components import KINDS, NUMBER, PARENTS, REQUIRED
from strayline.errors import CaseError
from strayline.installation import build
from strayline.parts import MOST_PARTS, read

Row = dict[str, Any]
ROWS: list[Row] = [
    {"id": "dock", "kind": "supply", "system": "split_120_240"},
    {"id": "feeder", "kind": "feeder", "from": "dock"},
    {"id": "post", "kind": "pedestal", "from": "feeder"},
    {"id": "outlet", "kind": "receptacle", "from": "post", "connector": "30a_125v"},
    {"id": "spare", "kind": "receptacle", "from": "post", "connector": "30a_125v", "leg": "L2"},
    {"id": "cord", "kind": "cord", "from": "outlet"},
    {"id": "inlet", "kind": "inlet", "from": "cord"},
    {"id": "main", "kind": "main", "from": "inlet"},
    {"id": "panel", "kind": "panel", "from": "main"},
    {"id": "breaker", "kind": "breaker", "from": "panel"},
    {"id": "kettle", "kind": "load", "from": "breaker", "watts": 1200},
    {"id": "hull", "kind": "hull", "from": "panel"},
]
WIRED = ("dock", "feeder", "post", "outlet", "cord", "inlet", "main", "panel", "breaker")
PLACE = {row["id"]: number for number, row in enumerate(ROWS)}


def changed(name: str, **values: object) -> list[Row]:
    """The rows with some values of one changed; None takes a key out."""
    row = {key: value for key, value in (ROWS[PLACE[name]] | values).items() if value is not None}
    return [row if other["id"] == name else other for other in ROWS]


def refused(rows: object) -> CaseError:
    """The error of a bad list of parts, wherever on the way to a network it is found."""
    with pytest.raises(CaseError) as caught:
        build(read({"parts": rows}))
    return caught.value


def test_the_rows_themselves_are_good() -> None:
    """The rows that the bad ones are made of are taken."""
    assert [part.id for part in read({"parts": ROWS}).parts] == [row["id"] for row in ROWS]


@pytest.mark.parametrize(
    ("name", "values", "key", "rule", "value"),
    [
        ("cord", {"lenght_m": 15}, "lenght_m", "unknown key for a cord", None),
        ("outlet", {"connector": None}, "connector", "missing; a receptacle needs it", None),
        ("cord", {"from": None}, "from", "missing; a cord needs it", None),
        ("cord", {"length_m": "15 m"}, "length_m", "must be a number in m", "15 m"),
        ("cord", {"length_m": True}, "length_m", "must be a number in m", True),
        ("cord", {"length_m": math.nan}, "length_m", "must be between 0.1 and 500 m", math.nan),
        ("cord", {"length_m": 10**400}, "length_m", "must be between 0.1 and 500 m", 10**400),
        ("cord", {"length_m": 15_000}, "length_m", "must be between 0.1 and 500 m", 15_000),
        ("cord", {"awg": 9.5}, "awg", "must be a whole number", 9.5),
        ("main", {"poles": 1.5}, "poles", "must be a whole number", 1.5),
        ("kettle", {"watts": None, "ohms": 0}, "ohms", "zero ohms in a conductor", 0),
        *((name, {"line_ohms": 0}, "line_ohms", "zero ohms in a conductor", 0) for name in WIRED),
        ("cord", {"neutral_ohms": 0.0}, "neutral_ohms", "zero ohms in a conductor", 0.0),
        ("cord", {"ground_ohms": [0, 1]}, "ground_ohms", "zero ohms in a conductor", 0),
        ("hull", {"bond_ohms": 0}, "bond_ohms", "zero ohms in a conductor", 0),
        ("cord", {"line_ohms": -0.1}, "line_ohms", "must be between", -0.1),
        ("cord", {"length_m": [20, 10]}, "length_m", "a range is [low, high] with low below high", [20, 10]),
        ("cord", {"length_m": [10, 15, 20]}, "length_m", "a range is [low, high]", [10, 15, 20]),
        ("dock", {"system": "unknown"}, "system", "must be one of split_120_240", "unknown"),
        ("dock", {"system": "three_400"}, "system", "must be one of split_120_240", "three_400"),
        ("outlet", {"device": "fuse"}, "device", "must be one of class_a", "fuse"),
        ("outlet", {"closed": 1}, "closed", "must be true or false", 1),
        ("outlet", {"connector": "16a_230v"}, "connector", "does not exist on a split_120_240 supply", "16a_230v"),
        ("outlet", {"leg": "L3"}, "leg", "a split_120_240 supply has L1, L2", "L3"),
        ("outlet", {"non_operating_ma": 40}, "non_operating_ma", "is above zero and at most the operating value of 30 mA", 40.0),
        ("cord", {"from": "outlett"}, "from", "no part has this id", "outlett"),
        ("cord", {"from": "post"}, "from", "a cord hangs on a receptacle or adapter or cord, not on a pedestal", "post"),
        ("cord", {"from": "outlet.a"}, "from", "only a splitting Y has tails", "outlet.a"),
        ("cord", {"from": ["outlet"]}, "from", "must be the id of one part", ["outlet"]),
        ("main", {"from": ""}, "from", "a main must hang on something", ""),
        ("panel", {"from": ["main", "main"]}, "from", "the same part twice", "main, main"),
        ("main", {"from": "main"}, "from", "hangs on itself through other parts", "main"),
        ("spare", {"id": "outlet"}, "id", "named twice", "outlet"),
        ("cord", {"id": "Cord"}, "id", "must be a name of small letters", "Cord"),
        ("cord", {"id": "c" * 33}, "id", "must be a name of small letters", "c" * 33),
        ("cord", {"kind": "rope"}, "kind", "must be one of supply", "rope"),
        ("kettle", {"across": "L1-L2"}, "across", None, None),
        ("kettle", {"ohms": 12}, "", "a load needs exactly one of ohms, watts and amperes", "ohms, watts"),
        ("kettle", {"watts": None}, "", "a load needs exactly one of ohms, watts and amperes", "none"),
    ],
)  # fmt: skip
def test_bad_part(name: str, values: Row, key: str, rule: str | None, value: object) -> None:
    """A bad part is told by the path of its key in the file, the rule it breaks and what stood there."""
    if rule is None:  # its breaker is where the missing conductor is noticed
        error = refused(changed(name, **values))
        assert (error.where, error.rule) == (f"installation.parts[{PLACE['breaker']}].from", "this panel has no L2")
        return
    error = refused(changed(name, **values))
    path = f"installation.parts[{PLACE[name]}]"
    assert error.where == (f"{path}.{key}" if key else path)
    assert error.rule.startswith(rule)
    assert repr(error.value) == repr(value)
    assert str(error).startswith(f"{error.where}: {error.rule}")


def test_one_plug_fits() -> None:
    """Two cords in one receptacle are refused at the second."""
    rows = [*ROWS, {"id": "cord_2", "kind": "cord", "from": "outlet"}]
    error = refused(rows)
    assert (error.where, error.value) == (f"installation.parts[{len(ROWS)}].from", "outlet")
    assert error.rule.startswith("already taken by cord")


@pytest.mark.parametrize(
    ("style", "source", "rule"),
    [
        ("combining_y", ["outlet"], "a combining_y adapter has 2 supply end"),
        ("splitting_y", ["outlet", "spare"], "a splitting_y adapter has 1 supply end"),
        ("combining_y", ["outlet", "outlet"], "the same part twice"),
        ("combining_y", ["outlet", "elsewhere"], "no part has this id"),
    ],
)
def test_bad_adapter(style: str, source: list[str], rule: str) -> None:
    """An adapter has the supply ends of its style, each in a place of its own that exists."""
    rows = [row for row in ROWS if row["id"] != "cord"] + [
        {"id": "y", "kind": "adapter", "style": style, "from": source},
        {"id": "cord", "kind": "cord", "from": "y"},
    ]
    error = refused(rows)
    assert error.where == f"installation.parts[{len(ROWS) - 1}].from"
    assert error.rule == rule


@pytest.mark.parametrize(
    ("raw", "where"),
    [
        (None, "installation"),
        ([], "installation"),
        ({}, "installation.parts"),
        ({"parts": []}, "installation.parts"),
        ({"parts": {"id": "dock"}}, "installation.parts"),
        ({"parts": ["dock"]}, "installation.parts[0]"),
        ({"parts": ROWS, "part": []}, "installation.part"),
        ({"parts": ROWS[1:2]}, "installation.parts[0].from"),
        ({"parts": [*ROWS, {"id": "dock_2", "kind": "supply", "system": "single_230"}]}, "installation.parts"),
        ({"parts": [ROWS[0]] * (MOST_PARTS + 1)}, "installation.parts"),
    ],
)
def test_bad_section(raw: object, where: str) -> None:
    """A section that is no list of parts with one supply is told by its path."""
    with pytest.raises(CaseError) as caught:
        read(raw)
    assert caught.value.where == where


def test_unknown_takes_the_default_and_says_so() -> None:
    """An unknown quantity takes the default of its kind, and is reported with its unit; what is left out is reported the same way."""
    installation = read({"parts": changed("hull", bond_ohms="unknown")})
    default = next(one.default for one in KINDS["hull"] if one.name == "bond_ohms")
    assert installation.part("hull").number("bond_ohms") == default
    assert ("hull.bond_ohms", default, "ohm") in installation.assumed
    assert installation.assumed == read({"parts": ROWS}).assumed


def test_unknown_choice_takes_the_default_and_says_so() -> None:
    """An unknown device or switch takes its default, and is reported."""
    installation = read({"parts": changed("outlet", device="unknown", closed="unknown")})
    assert {("outlet.device", "gfpe_30", ""), ("outlet.closed", True, "")} <= set(installation.assumed)


def test_a_range_stands_for_its_geometric_middle_and_says_so() -> None:
    """A range of a quantity is taken at the square root of its ends' product, and reported as assumed."""
    installation = read({"parts": changed("cord", length_m=[10, 40])})
    assert installation.part("cord").number("length_m") == pytest.approx(20)
    assert ("cord.length_m", pytest.approx(20), "m") in installation.assumed


def test_what_is_stated_is_not_assumed() -> None:
    """A stated number is not among the assumed ones."""
    assert "cord.length_m" not in {key for key, _, _ in read({"parts": changed("cord", length_m=15)}).assumed}


@given(seed=st.integers(0, 10**6))
def test_any_order_of_rows(seed: int) -> None:
    """Rows in any order are the same parts, each after what it hangs on, and the same branches."""
    rows = random.Random(seed).sample(ROWS, len(ROWS))
    installation = read({"parts": rows})
    order = [part.id for part in installation.parts]
    assert sorted(order) == sorted(PLACE)
    assert all(order.index(parent) < order.index(part.id) for part in installation.parts for parent in part.parents)
    assert set(build(installation).branches) == set(build(read({"parts": ROWS})).branches)


def test_the_table_of_kinds() -> None:
    """Every kind has its parents in the table, the sources alone have none, and defaults lie inside their ranges."""
    assert set(PARENTS) == set(KINDS)
    assert {kind for kind, parents in PARENTS.items() if not parents} == {"supply", "generator"}
    for kind, parents in PARENTS.items():
        assert set(parents) <= set(KINDS)
        for parameter in KINDS[kind]:
            if parameter.type == NUMBER and parameter.default not in (REQUIRED, None):
                assert parameter.low <= parameter.default <= parameter.high  # type: ignore[operator]
                assert parameter.source
