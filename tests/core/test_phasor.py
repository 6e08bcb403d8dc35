"""Angles: their range, their exact quarter turns, and when none is shown."""

from __future__ import annotations

import cmath
import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from strayline.phasor import angle_deg, polar, shown_angle


@pytest.mark.parametrize(("degrees", "expected"), [(0, 120), (90, 120j), (180, -120), (-180, -120), (270, -120j), (-90, -120j), (360, 120)])
def test_quarter_turns(degrees: float, expected: complex) -> None:
    """A phasor at a quarter turn has no rounding in its other component."""
    assert polar(120, degrees) == expected


@given(st.floats(1e-9, 1e6), st.floats(-179.999, 180))
def test_angle_comes_back(magnitude: float, degrees: float) -> None:
    """A phasor made from a magnitude and an angle has that magnitude and that angle."""
    phasor = polar(magnitude, degrees)
    assert abs(phasor) == pytest.approx(magnitude, rel=1e-12)
    assert angle_deg(phasor) == pytest.approx(degrees, abs=1e-9)


@given(st.complex_numbers(max_magnitude=1e9, allow_nan=False))
def test_range_of_angles(phasor: complex) -> None:
    """Every angle lies above -180 and not above 180 degrees."""
    assert -180 < angle_deg(phasor) <= 180


def test_half_turn_has_one_name() -> None:
    """The half turn is 180 degrees from whichever side it is reached, and zero is never minus zero."""
    assert angle_deg(complex(-1, -0.0)) == angle_deg(complex(-1, 0.0)) == 180
    assert math.copysign(1, angle_deg(complex(1, -0.0))) == 1


def test_shown_angle() -> None:
    """A current below one microampere has no angle; from there on it has."""
    assert shown_angle(0.999e-6j) is None
    assert shown_angle(1e-6j) == 90
    assert shown_angle(cmath.rect(5e-3, math.radians(-120))) == pytest.approx(-120)
