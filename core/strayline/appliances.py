"""What appliances and cords leak when nobody measured them: typical and suspect ranges, as data.

Every range is of the trade's experience (common practice, low to medium confidence); where a product standard puts a ceiling on new
equipment it is named beside it. A stated leak or filter always outranks these.
"""

from __future__ import annotations

from dataclasses import dataclass

TABLE_VOLTS = 120.0  # the ranges are for this voltage to ground; a resistive or motor leak grows with the voltage
CORD_METRES = 15.24  # the cord's range is for 50 feet


@dataclass(frozen=True, slots=True)
class Appliance:
    """Leakage of one kind of appliance at TABLE_VOLTS, in mA RMS.

    healthy    -- least and most of one in good order
    suspect    -- from where one is suspect, and how far it goes (None: open above; None as a whole: no such mark is known)
    electronic -- its leak is set by its filter, which is made for the voltage it is sold for: not scaled by the voltage
    source     -- where the range is from
    """

    id: str
    healthy: tuple[float, float]
    suspect: tuple[float, float | None] | None
    electronic: bool
    source: str


_TABLE: tuple[Appliance, ...] = (
    Appliance("water_heater", (0.02, 0.2), (2.0, 500.0), False, "common practice; new: IEC 60335-1, 0.75 mA per kW, at most 5 mA"),
    Appliance("space_heater", (0.1, 0.5), (5.0, 50.0), False, "common practice; new: IEC 60335-1, 0.75 mA per kW, at most 5 mA"),
    Appliance("cooker", (0.1, 0.5), (5.0, 50.0), False, "common practice; new: IEC 60335-1, 0.75 mA per kW, at most 5 mA"),
    Appliance("engine_heater", (0.05, 0.3), (2.0, 50.0), False, "common practice"),
    Appliance("air_conditioner", (0.3, 1.5), (5.0, 30.0), False, "common practice; new: IEC 60335-2-40, 2 mA per kW"),
    Appliance("drive_air_conditioner", (1.0, 5.0), (10.0, None), True, "common practice; new: IEC 60335-2-40, 2 mA per kW"),
    Appliance("refrigerator", (0.2, 0.7), (3.0, 15.0), False, "common practice; new: IEC 60335-2-24, 1.5 mA"),
    Appliance("charger", (0.3, 1.5), (3.5, None), True, "common practice; new: IEC 60950-1, 3.5 mA"),
    Appliance("inverter_charger", (0.5, 3.0), None, True, "common practice"),
    Appliance("washer", (0.3, 1.5), None, False, "common practice; new: IEC 60335-1, 3.5 mA"),
    Appliance("microwave", (0.2, 0.8), (5.0, None), True, "common practice"),
    Appliance("electronics", (0.05, 0.3), (1.0, None), True, "common practice; new: IEC 60950-1, 3.5 mA"),
    Appliance("lamps", (0.02, 0.2), None, True, "common practice"),
)

APPLIANCES: dict[str, Appliance] = {appliance.id: appliance for appliance in _TABLE}

# Nobody said what it is: the widest healthy range of what it may be.
ELEMENT = Appliance("element", (0.02, 0.5), (2.0, 500.0), False, "common practice: a heating element of any kind")
UNSAID = Appliance("unsaid", (0.02, 1.5), (3.0, None), False, "common practice: an appliance of any kind")
CORD = Appliance("cord", (0.01, 0.05), (1.0, 100.0), False, "common practice: cable capacitance of a dry cord of 50 ft; suspect when wet")


def healthy_ma(appliance: Appliance, volts: float) -> tuple[float, float]:
    """Healthy leakage in mA at `volts` RMS between its live terminals and ground; (0, 0) where it is not energised."""
    return _at(appliance, volts, appliance.healthy)


def suspect_ma(appliance: Appliance, volts: float) -> tuple[float, float | None] | None:
    """Leakage in mA from which it is suspect at `volts` RMS to ground, and the top of that range (None: open above)."""
    if appliance.suspect is None:
        return None
    low, high = appliance.suspect
    scaled, top = _at(appliance, volts, (low, low if high is None else high))
    return scaled, None if high is None else top


def _at(appliance: Appliance, volts: float, ma: tuple[float, float]) -> tuple[float, float]:
    if appliance.electronic:
        return ma if volts > TABLE_VOLTS / 10 else (0.0, 0.0)
    return ma[0] * volts / TABLE_VOLTS, ma[1] * volts / TABLE_VOLTS
