"""Electrodes in water: from conducting metal to the water far away, in a uniform half space (at the surface) or full space (deep).

Resistivities are ohm metres, lengths metres. Real harbours are neither uniform nor deep, and metal ashore or alongside bends the field;
none of this is a distance at which to swim.
"""

from __future__ import annotations

import math
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Water:
    """A kind of water: the range of resistivities that is met, and the one taken where nobody measured, in ohm metres."""

    low: float
    typical: float
    high: float
    source: str


WATERS: dict[str, Water] = {
    "fresh": Water(
        10.0, 50.0, 200.0, "published conductivities of 5 to 100 mS/m, river to drinking water; soft mountain lakes stand above"
    ),
    "brackish": Water(0.5, 3.0, 10.0, "0.1 to 2 S/m, from memory"),
    "salt": Water(0.2, 0.25, 0.33, "published conductivities of 3 to 5 S/m, sea water of 35 g/kg"),
}


def potential_v(resistivity: float, current_a: float, distance_m: float) -> float:
    """Volts against the water far away, at a distance from a hemisphere that lets a current into it: rho I / (2 pi x).

    Source: field of a point source on a half space, as for a hemispherical earth electrode.
    """
    return resistivity * current_a / (2.0 * math.pi * distance_m)


def field_v_per_m(resistivity: float, current_a: float, distance_m: float) -> float:
    """Volts per metre at a distance from such a hemisphere: rho I / (2 pi x^2), the slope of its potential."""
    return potential_v(resistivity, current_a, distance_m) / distance_m


def hemisphere_ohms(resistivity: float, radius_m: float) -> float:
    """Ohms of a hemisphere at the surface, the volts at its own skin for an ampere: rho / (2 pi r)."""
    return potential_v(resistivity, 1.0, radius_m)


def sphere_ohms(resistivity: float, radius_m: float) -> float:
    """Ohms of a sphere deep in the water, half of the hemisphere's: rho / (4 pi r)."""
    return hemisphere_ohms(resistivity, radius_m) / 2.0


def two_spheres_ohms(resistivity: float, radius_m: float, spacing_m: float) -> float:
    """Ohms between two equal deep spheres far apart: rho / (2 pi) (1/a - 1/s). Holds where the spacing is many radii."""
    return 2.0 * (sphere_ohms(resistivity, radius_m) - sphere_ohms(resistivity, spacing_m))


def rod_ohms(resistivity: float, length_m: float, radius_m: float) -> float:
    """Ohms of a thin rod that reaches down from the surface: rho / (2 pi L) (ln(4 L / a) - 1). Source: Dwight 1936, IEEE 142."""
    return hemisphere_ohms(resistivity, length_m) * (math.log(4.0 * length_m / radius_m) - 1.0)


def equivalent_radius_m(area_m2: float) -> float:
    """Radius of the hemisphere whose skin has the area of a piece of bare metal: sqrt(A / 2 pi)."""
    return math.sqrt(area_m2 / (2.0 * math.pi))
