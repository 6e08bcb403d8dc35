"""Complex RMS phasors: magnitude and angle, and when an angle may be shown."""

from __future__ import annotations

import cmath
import math

NO_ANGLE_BELOW_A = 1e-6  # smaller currents are shown as zero: their angle is rounding, or leakage nobody can measure

_QUARTERS = {0.0: 1 + 0j, 90.0: 1j, 180.0: -1 + 0j, 270.0: -1j}


def polar(magnitude: float, degrees: float) -> complex:
    """The phasor of a magnitude (in its own unit) at an angle in degrees; exact at quarter turns, so that 180° is a pure sign."""
    quarter = _QUARTERS.get(degrees % 360)
    return cmath.rect(magnitude, math.radians(degrees)) if quarter is None else magnitude * quarter


def angle_deg(phasor: complex) -> float:
    """Angle of a phasor in degrees, in (-180, 180]; 0 for a phasor of zero."""
    degrees = math.degrees(cmath.phase(phasor))
    return 180.0 if degrees == -180 else degrees + 0.0  # adding zero turns -0.0 into 0.0


def shown_angle(current: complex) -> float | None:
    """Angle in degrees, in (-180, 180], of a current in amperes; None below one microampere."""
    return None if abs(current) < NO_ANGLE_BELOW_A else angle_deg(current)
