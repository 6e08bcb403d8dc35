"""Electrodes in water: from conducting metal to the water far away. A single electrode in a uniform half-space or full space.

Resistivities are ohm metres, lengths metres. Real harbours are neither uniform nor deep; none of this is a distance at which to swim.
"""

from __future__ import annotations

import math


def hemisphere_ohms(resistivity: float, radius_m: float) -> float:
    """Ohms of a hemisphere at the surface to the water far away: rho / (2 pi r). Source: textbook field of a half-space."""
    return resistivity / (2.0 * math.pi * radius_m)


def sphere_ohms(resistivity: float, radius_m: float) -> float:
    """Ohms of a sphere deep in the water: rho / (4 pi r)."""
    return resistivity / (4.0 * math.pi * radius_m)


def two_spheres_ohms(resistivity: float, radius_m: float, spacing_m: float) -> float:
    """Ohms between two equal spheres far apart: rho / (2 pi) (1/a - 1/s)."""
    return resistivity / (2.0 * math.pi) * (1.0 / radius_m - 1.0 / spacing_m)


def rod_ohms(resistivity: float, length_m: float, radius_m: float) -> float:
    """Ohms of a driven rod: rho / (2 pi L) (ln(4 L / a) - 1). Source: Dwight 1936, IEEE 142."""
    return resistivity / (2.0 * math.pi * length_m) * (math.log(4.0 * length_m / radius_m) - 1.0)


def equivalent_radius_m(area_m2: float) -> float:
    """Radius of the hemisphere with the area of a piece of bare metal: sqrt(A / 2 pi)."""
    return math.sqrt(area_m2 / (2.0 * math.pi))


def field_v_per_m(resistivity: float, current_a: float, distance_m: float) -> float:
    """Volts per metre at a distance from a hemisphere that lets a current into the water: rho I / (2 pi x^2)."""
    return resistivity * current_a / (2.0 * math.pi * distance_m**2)
