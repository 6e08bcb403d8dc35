"""Numbers as people type them, and copper against published tables."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from strayline.errors import StraylineError
from strayline.units import (
    FLEXIBLE_OHM_PER_KM,
    LAY,
    METRES_PER_FOOT,
    SPELLINGS,
    QuantityError,
    awg_area_mm2,
    cable_ohms,
    cable_reactance_ohms,
    copper_ohms,
    parse_quantity,
)


@pytest.mark.parametrize(
    ("text", "value"),
    [
        ("12", 12),
        ("12.5", 12.5),
        ("12,5", 12.5),
        (" 12,5 mA ", 12.5),
        (".5mA", 0.5),
        ("7,", 7),
        ("+3", 3),
        ("0,030", 0.03),
        ("1.234", 1.234),
    ],
)
def test_accepted(text: str, value: float) -> None:
    """A number is taken with a point or a comma, with or without its unit, in any spacing."""
    assert parse_quantity(text, "mA", 0, 100) == value


@given(st.floats(-1000, 1000).map(lambda number: round(number, 2)))
def test_comma_and_point_mean_the_same(number: float) -> None:
    """Two decimals read the same behind a comma as behind a point, for either minus sign."""
    text = f"{number:.2f}"
    assert (
        parse_quantity(text, "V", -1000, 1000) == parse_quantity(text.replace(".", ",").replace("-", "\u2212"), "V", -1000, 1000) == number
    )


@pytest.mark.parametrize(
    ("text", "problem"),
    [
        ("", "number"),
        ("mA", "number"),
        ("-", "number"),
        (",", "number"),
        ("1.2.3", "number"),
        ("1,200.5", "number"),
        ("12-15", "number"),
        ("nan", "number"),
        ("inf", "number"),
        ("1e3", "number"),
        ("1,234", "ambiguous"),
        ("30 A", "unit"),
        ("30 MA", "unit"),
        ("30 bananas", "unit"),
        ("-1", "range"),
        ("1000.1", "range"),
    ],
)
def test_refused(text: str, problem: str) -> None:
    """What is no number, could be two numbers, has another unit or lies outside the range is refused for that reason, in a sentence."""
    with pytest.raises(QuantityError) as caught:
        parse_quantity(text, "mA", 0, 1000)
    assert caught.value.problem == caught.value.details["problem"] == problem
    assert isinstance(caught.value, StraylineError)
    assert caught.value.message.endswith(".")
    assert caught.value.details["text"] == text


def test_both_ends_belong_to_the_range() -> None:
    """The lowest and the highest allowed value are allowed."""
    assert parse_quantity("0", "mA", 0, 1000) == 0
    assert parse_quantity("1000", "mA", 0, 1000) == 1000


@pytest.mark.parametrize("unit", list(SPELLINGS))
def test_spellings(unit: str) -> None:
    """Every spelling of a unit is accepted for it, its own name is one of them, and no spelling belongs to two units."""
    assert unit in SPELLINGS[unit]
    for spelling in SPELLINGS[unit]:
        assert parse_quantity(f"3 {spelling}", unit, 0, 10) == 3
    spelled = [spelling for spellings in SPELLINGS.values() for spelling in spellings]
    assert len(spelled) == len(set(spelled))


def test_milli_is_not_mega() -> None:
    """A mega ohm is never taken for an ohm, nor a kilo ohm for a mega ohm."""
    for text, unit in (("3 MΩ", "ohm"), ("3 Ω", "Mohm"), ("3 kΩ", "Mohm")):
        with pytest.raises(QuantityError, match="Give it in"):
            parse_quantity(text, unit, 0, 10)


# Nominal areas of ASTM B258 in circular mils, as tabulated there (from memory): 1 circular mil is 5.067075e-4 mm².
@pytest.mark.parametrize(
    ("awg", "circular_mils"), [(14, 4110), (12, 6530), (10, 10380), (8, 16510), (6, 26240), (2, 66360), (0, 105600), (-3, 211600)]
)
def test_gauge_areas(awg: int, circular_mils: float) -> None:
    """Gauge areas agree with ASTM B258's table to its rounding."""
    assert awg_area_mm2(awg) == pytest.approx(circular_mils * 5.067075e-4, rel=1e-3)


def test_unknown_gauge() -> None:
    """A gauge outside 4/0 to 36 is refused."""
    for awg in (-4, 37):
        with pytest.raises(QuantityError, match="4/0 and 36"):
            awg_area_mm2(awg)


def test_copper_at_twenty_degrees() -> None:
    """A kilometre of 1 mm² annealed copper has 17.241 ohms at 20 °C (IEC 60028)."""
    assert copper_ohms(1000, 1) == pytest.approx(17.241, rel=1e-4)


def test_copper_per_thousand_feet() -> None:
    """Solid copper has 1.21 ohms per thousand feet in 10 AWG and 3.07 in 14 AWG at 75 °C (NEC chapter 9, table 8, uncoated solid)."""
    assert copper_ohms(1000 * METRES_PER_FOOT, awg_area_mm2(10), 75) == pytest.approx(1.21, abs=0.006)
    assert copper_ohms(1000 * METRES_PER_FOOT, awg_area_mm2(14), 75) == pytest.approx(3.07, abs=0.006)


def test_a_listed_size_is_laid_down_by_its_resistance() -> None:
    """A nominal size has its greatest resistance, above that of copper of its name's area; no larger size has more."""
    sizes = sorted(FLEXIBLE_OHM_PER_KM)
    for size in sizes:
        assert cable_ohms(1000, size) == pytest.approx(FLEXIBLE_OHM_PER_KM[size])
        assert 1.1 < cable_ohms(1, size) / copper_ohms(1, size) < 1.17
    assert [cable_ohms(1, size) for size in sizes] == sorted((cable_ohms(1, size) for size in sizes), reverse=True)


def test_any_other_area_is_stranded_copper() -> None:
    """An area that no size names, such as a gauge's, is copper with its strands' lay."""
    for area in (5.26, awg_area_mm2(6), 4.001):
        assert cable_ohms(7, area, 40) == pytest.approx(LAY * copper_ohms(7, area, 40))


@pytest.mark.parametrize("celsius", [5, 10, 30, 50, 70, 75, 90])
def test_the_temperature_laws_agree(celsius: float) -> None:
    """One law serves: 254.5 / (234.5 + t) of IEC 60228 exactly, its simplified 250 / (230 + t) to 0.5 %, and NEC table 8's from 75 C."""
    correction = cable_ohms(1, 2.5) / cable_ohms(1, 2.5, celsius)
    assert correction == pytest.approx(254.5 / (234.5 + celsius), rel=2e-4)
    assert correction == pytest.approx(250 / (230 + celsius), rel=5e-3)
    assert cable_ohms(1, 2.5, celsius) / cable_ohms(1, 2.5, 75) == pytest.approx(1 + 0.00323 * (celsius - 75), rel=1e-3)


def test_reactance_follows_length_and_frequency() -> None:
    """Nothing at no length, and five sixths of it at 50 Hz; a thin cord hardly has any beside its resistance, a thick feeder has."""
    assert cable_reactance_ohms(0, 60) == 0
    assert cable_reactance_ohms(30, 50) / cable_reactance_ohms(30, 60) == pytest.approx(5 / 6)
    assert cable_reactance_ohms(1, 50) / cable_ohms(1, 2.5) < 0.02
    assert cable_reactance_ohms(1, 50) / cable_ohms(1, 50.0) > 0.3
