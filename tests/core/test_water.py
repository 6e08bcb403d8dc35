"""Electrodes in water: their laws by hand, by each other, and by what a hull takes from them."""

from __future__ import annotations

import itertools
import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from drawn import HEATER, boat, dock
from strayline.components import HULL_RADIUS_M
from strayline.installation import build
from strayline.parts import read
from strayline.water import (
    WATERS,
    equivalent_radius_m,
    field_v_per_m,
    hemisphere_ohms,
    potential_v,
    rod_ohms,
    sphere_ohms,
    two_spheres_ohms,
)

resistivities = st.floats(0.1, 1000)
metres = st.floats(0.01, 10)


@given(resistivities, metres)
def test_a_hemisphere_is_its_shells_in_series(resistivity: float, radius_m: float) -> None:
    """Thin shells of rho dr / (2 pi r^2) from the skin outward add up to rho / (2 pi r), but for what lies beyond the last."""
    steps = 400
    edges = [radius_m * 1.05**step for step in range(steps + 1)]
    shells = (resistivity * (far - near) / (2 * math.pi * ((near + far) / 2) ** 2) for near, far in itertools.pairwise(edges))
    assert math.fsum(shells) == pytest.approx(hemisphere_ohms(resistivity, radius_m), rel=1e-3)


@given(resistivities, metres)
def test_two_halves_make_a_sphere(resistivity: float, radius_m: float) -> None:
    """A deep sphere is two hemispheres in parallel."""
    half = hemisphere_ohms(resistivity, radius_m)
    assert sphere_ohms(resistivity, radius_m) == pytest.approx(half * half / (half + half))


@given(resistivities, st.floats(0.01, 0.5))
def test_two_spheres_far_apart_are_one_after_the_other(resistivity: float, radius_m: float) -> None:
    """With the spacing growing, the ohms between two spheres rise to twice those of one, and never beyond."""
    near, far = (two_spheres_ohms(resistivity, radius_m, spacing * radius_m) for spacing in (10, 1e6))
    assert near < far < 2 * sphere_ohms(resistivity, radius_m)
    assert far == pytest.approx(2 * sphere_ohms(resistivity, radius_m), rel=1e-5)


@given(resistivities, st.floats(0.5, 5), st.floats(0.001, 0.05))
def test_a_rod_lies_between_the_hemispheres_of_its_length_and_of_its_end(resistivity: float, length_m: float, radius_m: float) -> None:
    """More metal than a hemisphere of its thickness, less than one of its length."""
    assert hemisphere_ohms(resistivity, length_m) < rod_ohms(resistivity, length_m, radius_m) < hemisphere_ohms(resistivity, radius_m)


@given(resistivities, st.floats(0.01, 100), metres)
def test_the_field_is_the_slope_of_the_potential(resistivity: float, current_a: float, distance_m: float) -> None:
    """The difference of two potentials a little apart, over that little, is the field; the potential at the skin is ohms times amperes."""
    little = 1e-5 * distance_m
    rise = potential_v(resistivity, current_a, distance_m - little) - potential_v(resistivity, current_a, distance_m + little)
    assert rise / (2 * little) == pytest.approx(field_v_per_m(resistivity, current_a, distance_m), rel=1e-6)
    assert potential_v(resistivity, current_a, distance_m) == pytest.approx(current_a * hemisphere_ohms(resistivity, distance_m))


@given(metres)
def test_the_equivalent_hemisphere_has_the_area(radius_m: float) -> None:
    """The skin of a hemisphere, 2 pi r^2, leads back to its radius."""
    assert equivalent_radius_m(2 * math.pi * radius_m**2) == pytest.approx(radius_m)


def test_waters_are_in_order() -> None:
    """Each kind is taken within the range that is met, states its source, and salt conducts better than brackish than fresh."""
    for water in WATERS.values():
        assert water.low < water.typical < water.high
        assert water.source
    assert WATERS["salt"].high <= WATERS["brackish"].low < WATERS["brackish"].high <= WATERS["fresh"].low


def hull_ohms(**given: object) -> float:
    """Ohms from a hull to the water far away, as the network has it."""
    rows = [*dock("split_120_240", "30a_125v"), *boat("outlet1", HEATER)]
    rows[-1] |= given
    return build(read({"parts": rows})).branch("hull.water").impedance.real


@pytest.mark.parametrize("water", WATERS)
@pytest.mark.parametrize("material", HULL_RADIUS_M)
def test_a_hull_is_a_hemisphere_of_its_material_in_its_water(water: str, material: str) -> None:
    """Where nobody says more, material gives the radius and water the resistivity."""
    assert hull_ohms(water=water, material=material) == pytest.approx(hemisphere_ohms(WATERS[water].typical, HULL_RADIUS_M[material]))


def test_what_is_stated_of_a_hull_goes_first() -> None:
    """Ohms outrank a radius, a radius outranks the area of bare metal, and the area outranks the material."""
    area = {"bare_m2": 0.5}
    assert hull_ohms(**area) == pytest.approx(hemisphere_ohms(50, equivalent_radius_m(0.5)))
    assert hull_ohms(**area, radius_m=0.2) == pytest.approx(hemisphere_ohms(50, 0.2))
    assert hull_ohms(**area, radius_m=0.2, water_ohms=12.0) == 12.0
