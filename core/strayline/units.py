"""Reading a number a person typed, and the sizes and resistances of copper conductors."""

from __future__ import annotations

import math
import re

from strayline.errors import StraylineError

METRES_PER_FOOT = 0.3048  # exact: international foot of 1959
MM_PER_INCH = 25.4
AWG_SIZES = range(-3, 37)  # 4/0 is -3, 3/0 is -2, 2/0 is -1, 1/0 is 0

# IEC 60028: annealed copper has 1/58 ohm mm²/m at 20 °C and a constant-mass temperature coefficient of 0.00393 per kelvin.
COPPER_OHM_MM2_PER_M = 1 / 58
COPPER_PER_KELVIN = 0.00393

# IEC 60228 class 5 (flexible, plain): greatest ohms per kilometre at 20 °C. A size in mm² is a name; its resistance is what is laid down.
FLEXIBLE_OHM_PER_KM: dict[float, float] = {
    1.5: 13.3, 2.5: 7.98, 4.0: 4.95, 6.0: 3.30, 10.0: 1.91, 16.0: 1.21, 25.0: 0.780, 35.0: 0.554, 50.0: 0.386,
}  # fmt: skip
# Tinned strands have 2 to 3 % more and class 2 (stiff) 1 to 10 % less: within what a nominal size leaves open, so one column serves.
LAY = 1.02  # strands of an American gauge are longer than their cable (ASTM B8: NEC chapter 9 table 8, stranded over solid)

# NEC chapter 9 table 9, 60 Hz, plastic conduit: 0.043 to 0.058 ohm per thousand feet from 2/0 to 14 AWG; the middle serves for every size,
# since only the thick ones feel it. It belongs to a conductor whose current comes back in the same cable.
CONDUCTOR_HENRY_PER_M = 0.050 / (1000 * METRES_PER_FOOT) / (2 * math.pi * 60)

# How each unit may be written behind a number. Milli and mega differ by their letter's case alone, so case is kept.
SPELLINGS = {
    "mA": ("mA", "ma"),
    "A": ("A", "a", "amp", "amps"),
    "V": ("V", "v", "volt", "volts"),
    "W": ("W", "w", "watt", "watts"),
    "ohm": ("ohm", "ohms", "Ω", "\u2126"),
    "kohm": ("kohm", "kΩ", "k\u2126"),
    "Mohm": ("Mohm", "MΩ", "M\u2126"),
    "m": ("m", "metre", "metres", "meter", "meters"),
    "ft": ("ft", "foot", "feet", "'"),
    "min": ("min", "minute", "minutes"),
    "s": ("s", "second", "seconds"),
    "Hz": ("Hz", "hz"),
    "mm²": ("mm²", "mm2"),
    "°C": ("°C", "C"),
    "%": ("%",),
}

_TYPED = re.compile(r"([+-]?)(\d*)(?:([.,])(\d*))?\s*(mm2|\D*)")


class QuantityError(StraylineError):
    """A typed quantity that cannot be taken: `problem` is "number", "ambiguous", "unit" or "range"."""

    code = "quantity"

    def __init__(self, problem: str, sentence: str, text: str, unit: str, low: float, high: float) -> None:
        self.problem = problem
        super().__init__(sentence, problem=problem, text=text, unit=unit, low=low, high=high)


def parse_quantity(text: str, unit: str, low: float, high: float) -> float:
    """The number in `text`, in `unit`, between `low` and `high` inclusive; a decimal comma is as good as a point.

    The unit may stand behind the number or be left out. Raises QuantityError with a sentence for the person who typed it.
    """
    typed = text.replace("\u2212", "-").replace("\u00a0", " ").strip()
    found = _TYPED.fullmatch(typed)
    if found is None or not (found[2] or found[4]):
        raise QuantityError("number", f"Write one number, in {unit}.", text, unit, low, high)
    sign, whole, mark, decimals, behind = found[1], found[2] or "0", found[3], found[4] or "", found[5].strip()
    if mark == "," and len(decimals) == 3 and int(whole):
        sentence = f"{whole},{decimals} can be read in two ways: write {whole}{decimals} or {whole}.{decimals}."
        raise QuantityError("ambiguous", sentence, text, unit, low, high)
    if behind and behind not in SPELLINGS.get(unit, (unit,)):
        raise QuantityError("unit", f"Give it in {unit}, not in {behind[:12]}.", text, unit, low, high)
    value = float(f"{sign}{whole}.{decimals or 0}")
    if not low <= value <= high:
        raise QuantityError("range", f"It must lie between {low:g} and {high:g} {unit}.", text, unit, low, high)
    return value


def awg_area_mm2(awg: int) -> float:
    """Copper area in mm² of a solid American gauge, by ASTM B258: a diameter of 0.005 inch * 92 ** ((36 - awg) / 39).

    1/0 is 0, 2/0 is -1, 3/0 is -2, 4/0 is -3.
    """
    if awg not in AWG_SIZES:
        raise QuantityError("range", f"Gauge {awg} is not between 4/0 and 36.", str(awg), "AWG", AWG_SIZES[0], AWG_SIZES[-1])
    diameter_mm = 0.005 * MM_PER_INCH * math.pow(92, (36 - awg) / 39)
    return math.pi / 4 * diameter_mm * diameter_mm


def copper_ohms(length_m: float, area_mm2: float, celsius: float = 20) -> float:
    """Resistance in ohms of one annealed copper conductor of a length in metres and an area in mm² (IEC 60028).

    Stranding lay and tinning, which add a few per cent, are not in it.
    """
    return COPPER_OHM_MM2_PER_M * length_m / area_mm2 * (1 + COPPER_PER_KELVIN * (celsius - 20))


def cable_ohms(length_m: float, area_mm2: float, celsius: float = 20) -> float:
    """Resistance in ohms of one conductor of a flexible cable: the greatest that its nominal size allows, else of stranded copper.

    A size that IEC 60228 lists is taken at its greatest resistance; any other area, an American gauge's among them, as copper with the
    strands' LAY.
    """
    listed = FLEXIBLE_OHM_PER_KM.get(area_mm2)
    if listed is None:
        return LAY * copper_ohms(length_m, area_mm2, celsius)
    return listed / 1000 * length_m * (1 + COPPER_PER_KELVIN * (celsius - 20))


def cable_reactance_ohms(length_m: float, hertz: float) -> float:
    """Inductive reactance in ohms of one conductor of a cable, or of one of several in a conduit, whose currents return beside it."""
    return 2 * math.pi * hertz * CONDUCTOR_HENRY_PER_M * length_m
