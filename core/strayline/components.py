"""One table of part kinds: parameter, unit, default, range, source.

The case file, its schema, the defaults reported to the person and the network builder all read this table. A parameter
without a default is required. A quantity may be a number, a range `[low, high]` or `"unknown"`.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from strayline.appliances import APPLIANCES
from strayline.devices import CURVES, DEVICES, WAVEFORMS
from strayline.water import WATERS

NUMBER, CHOICE, FLAG, REFERENCE, REFERENCES = "number", "choice", "flag", "reference", "references"
REQUIRED = object()


@dataclass(frozen=True, slots=True)
class Parameter:
    """One parameter of a part kind.

    type    -- NUMBER (unit, low, high), CHOICE (choices), FLAG, REFERENCE (a part id, or "" for a loose plug) or REFERENCES
    default -- REQUIRED, None (may be left out and means "by the rule of its kind") or a value
    whole   -- only whole numbers exist
    """

    name: str
    type: str
    unit: str = ""
    default: object = REQUIRED
    low: float = 0.0
    high: float = 0.0
    choices: tuple[str, ...] = ()
    source: str = "common practice"
    whole: bool = False


@dataclass(frozen=True, slots=True)
class System:
    """A shore supply: volts RMS from each line to the star point, hertz, the angle of each line in degrees.

    neutral  -- whether the star point is brought out as a neutral conductor
    earthing -- how it is earthed where nobody says: a key of EARTHINGS
    """

    volts: float
    hertz: float
    lines: dict[str, float]
    region: str
    neutral: bool = True
    earthing: str = "tn_c_s"


_THREE = {"L1": 0.0, "L2": -120.0, "L3": 120.0}
_DELTA_VOLTS = 230.0 / math.sqrt(3.0)

SYSTEMS: dict[str, System] = {
    "split_120_240": System(120.0, 60.0, {"L1": 0.0, "L2": 180.0}, "60"),
    "wye_120_208": System(120.0, 60.0, {"L1": 0.0, "L2": -120.0}, "60"),
    "wye_120_208_3": System(120.0, 60.0, _THREE, "60"),
    "wye_127_220": System(127.0, 60.0, {"L1": 0.0, "L2": -120.0}, "60"),
    "single_230": System(230.0, 50.0, {"L1": 0.0}, "50", earthing="tn_s"),
    "three_230_400": System(230.0, 50.0, _THREE, "50", earthing="tn_s"),
    "it_230": System(_DELTA_VOLTS, 50.0, _THREE, "50", neutral=False, earthing="it"),
    "no_neutral_230": System(_DELTA_VOLTS, 50.0, _THREE, "50", neutral=False, earthing="tt"),
}
LINES = tuple(_THREE)

# IEC 60364-1: where the star point and the protective conductor meet, and by what they reach the earth.
EARTHINGS = ("tn_s", "tn_c_s", "tt", "it")


@dataclass(frozen=True, slots=True)
class Connector:
    """A type of plug and outlet: rated amperes, live lines carried, poles its breaker opens ("lines" or "all" live conductors).

    accepts    -- the plugs that go into an outlet of this type
    reversible -- the plug goes in either way round, so that line and neutral may change places
    """

    rated_a: float
    lines: int
    opens: str
    volts: tuple[str, ...]
    accepts: tuple[str, ...]
    reversible: bool = False


_60 = ("split_120_240", "wye_120_208", "wye_120_208_3", "wye_127_220")
_50 = ("single_230", "three_230_400", "it_230", "no_neutral_230")
_50_THREE = ("three_230_400",)

CONNECTORS: dict[str, Connector] = {
    "15a_125v": Connector(15.0, 1, "lines", _60, ("15a_125v",)),
    "20a_125v": Connector(20.0, 1, "lines", _60, ("20a_125v", "15a_125v")),  # its T-shaped slot takes both
    "30a_125v": Connector(30.0, 1, "lines", _60, ("30a_125v",)),
    "50a_125v": Connector(50.0, 1, "lines", _60, ("50a_125v",)),
    "50a_125_250v": Connector(50.0, 2, "lines", _60, ("50a_125_250v",)),
    "100a_125_250v": Connector(100.0, 2, "lines", _60, ("100a_125_250v",)),
    "rv_30a": Connector(30.0, 1, "lines", _60, ("rv_30a",)),
    "rv_50a": Connector(50.0, 2, "lines", _60, ("rv_50a",)),
    "16a_230v": Connector(16.0, 1, "all", _50, ("16a_230v",)),
    "32a_230v": Connector(32.0, 1, "all", _50, ("32a_230v",)),
    "63a_230v": Connector(63.0, 1, "all", _50, ("63a_230v",)),
    "16a_400v": Connector(16.0, 3, "all", _50_THREE, ("16a_400v",)),
    "32a_400v": Connector(32.0, 3, "all", _50_THREE, ("32a_400v",)),
    "63a_400v": Connector(63.0, 3, "all", _50_THREE, ("63a_400v",)),
    "household_230v": Connector(16.0, 1, "all", _50, ("household_230v",), reversible=True),
    "household_230v_polarised": Connector(13.0, 1, "all", _50, ("household_230v_polarised",)),
}


@dataclass(frozen=True, slots=True)
class Adapter:
    """A style of adapter: the connector of each plug and of each outlet, and what happens to the conductors in between.

    wiring -- "join" (a line from each of two plugs, neutrals and grounds meet), "split" (a line to each of two outlets), "pass" (each to
    its own), "both" (the one line to both lines), "first" (the first line only), "isolated" (a transformer for each of two plugs, their
    secondaries in series) or "unknown"
    """

    plugs: tuple[str, ...]
    outlets: tuple[str, ...]
    wiring: str


ADAPTERS: dict[str, Adapter] = {
    "combining_y": Adapter(("30a_125v", "30a_125v"), ("50a_125_250v",), "join"),
    "splitting_y": Adapter(("50a_125_250v",), ("30a_125v", "30a_125v"), "split"),
    "splitting_y_30": Adapter(("30a_125v",), ("30a_125v", "30a_125v"), "split"),
    "straight_30_50": Adapter(("30a_125v",), ("50a_125_250v",), "both"),
    "straight_50_30": Adapter(("50a_125_250v",), ("30a_125v",), "first"),
    "straight_15_30": Adapter(("15a_125v",), ("30a_125v",), "pass"),
    "straight_30_15": Adapter(("30a_125v",), ("15a_125v",), "pass"),
    "straight_50s_30": Adapter(("50a_125v",), ("30a_125v",), "pass"),
    "straight_30_50s": Adapter(("30a_125v",), ("50a_125v",), "pass"),
    "straight_100_50": Adapter(("100a_125_250v",), ("50a_125_250v",), "pass"),
    "straight_rv30_30": Adapter(("rv_30a",), ("30a_125v",), "pass"),
    "straight_rv50_50": Adapter(("rv_50a",), ("50a_125_250v",), "pass"),
    "straight_household_16": Adapter(("household_230v",), ("16a_230v",), "pass"),
    "straight_32_16": Adapter(("32a_230v",), ("16a_230v",), "pass"),
    "straight_16_32": Adapter(("16a_230v",), ("32a_230v",), "pass"),
    "straight_16x3_16": Adapter(("16a_400v",), ("16a_230v",), "first"),
    "straight_32x3_32": Adapter(("32a_400v",), ("32a_230v",), "first"),
    "isolated_combiner": Adapter(("30a_125v", "30a_125v"), ("50a_125_250v",), "isolated"),
    "homemade": Adapter((), (), "unknown"),
}
# How a home-made or damaged adapter is really wired: the two conductors that have changed places, or the one that is not there.
WIRED = ("straight", "line_neutral", "neutral_ground", "line_ground", "ground_open")

ACROSS = ("L1-N", "L2-N", "L3-N", "L1-L2", "L2-L3", "L1-L3")

# Bare underwater metal as the radius of the hemisphere that has its area, in metres: a metal hull, or shaft and propeller alone.
HULL_RADIUS_M: dict[str, float] = {"metal": 1.5, "grp": 0.5}

_FROM = Parameter("from", REFERENCE)
_LENGTH = Parameter("length_m", NUMBER, "m", None, 0.1, 500.0)
_AWG = Parameter("awg", NUMBER, "AWG", None, -3.0, 20.0, source="ASTM B258", whole=True)
_AREA = Parameter("area_mm2", NUMBER, "mm2", None, 0.5, 300.0, source="IEC 60228")
_LINE = Parameter("line_ohms", NUMBER, "ohm", None, 1e-9, 1e3)
_NEUTRAL = Parameter("neutral_ohms", NUMBER, "ohm", None, 1e-9, 1e3)
_GROUND = Parameter("ground_ohms", NUMBER, "ohm", None, 1e-9, 1e6)
_CONNECTOR = Parameter("connector", CHOICE, "", None, choices=tuple(CONNECTORS))
_RATED = Parameter("rated_a", NUMBER, "A", None, 1.0, 400.0)
_CURVE = Parameter("curve", CHOICE, "", None, choices=tuple(CURVES), source='IEC 60898-1; "na": North American, without a letter')
_WAVEFORM = Parameter("waveform", CHOICE, "", None, choices=tuple(WAVEFORMS), source="IEC 60755, IEC 62423")
_DELAY = Parameter("delay_s", NUMBER, "s", None, 0.0, 5.0)
_NON_OPERATING = Parameter("non_operating_ma", NUMBER, "mA", None, 0.1, 1e5)
_OPERATING = Parameter("operating_ma", NUMBER, "mA", None, 0.1, 1e5)


def _device(default: str) -> Parameter:
    return Parameter("device", CHOICE, "", default, choices=tuple(DEVICES))


def _wire(length_m: float, area_mm2: float) -> tuple[Parameter, ...]:
    return (
        Parameter("length_m", NUMBER, "m", length_m, 0.1, 500.0),
        _AWG,
        Parameter("area_mm2", NUMBER, "mm2", area_mm2, 0.5, 300.0, source="IEC 60228"),
        Parameter("celsius", NUMBER, "C", 20.0, -40.0, 90.0),
        _LINE,
        _NEUTRAL,
        _GROUND,
    )


def _short(ohms: float) -> tuple[Parameter, ...]:
    """A short piece of busbar, blades and contacts: one resistance per conductor."""
    return (
        Parameter("line_ohms", NUMBER, "ohm", ohms, 1e-9, 1e3),
        Parameter("neutral_ohms", NUMBER, "ohm", None, 1e-9, 1e3),
        Parameter("ground_ohms", NUMBER, "ohm", ohms, 1e-9, 1e6),
    )


# The order of kinds is the order from supply to load: a part may only hang on kinds listed in PARENTS.
KINDS: dict[str, tuple[Parameter, ...]] = {
    "supply": (
        Parameter("system", CHOICE, choices=tuple(SYSTEMS)),
        Parameter("volts", NUMBER, "V", None, 50.0, 500.0),
        Parameter("earthing", CHOICE, "", None, choices=EARTHINGS, source="IEC 60364-1"),
        Parameter("line_ohms", NUMBER, "ohm", 0.02, 1e-9, 1e3),
        Parameter("neutral_ohms", NUMBER, "ohm", 0.005, 1e-9, 1e3),
        Parameter("bond_ohms", NUMBER, "ohm", 0.001, 1e-9, 1e6),
        Parameter("earth_ohms", NUMBER, "ohm", 5.0, 1e-9, 1e6),
        Parameter("source_earth_ohms", NUMBER, "ohm", 5.0, 1e-9, 1e6),
        Parameter("line_nf", NUMBER, "nF", 300.0, 0.01, 1e5),
    ),
    "feeder": (_FROM, _device("gfpe_100"), _NON_OPERATING, _OPERATING, _WAVEFORM, _DELAY, *_wire(60.0, 50.0)),
    "pedestal": (_FROM, *_short(0.001)),
    "receptacle": (
        _FROM,
        Parameter("connector", CHOICE, choices=tuple(CONNECTORS)),
        Parameter("leg", CHOICE, "", "L1", choices=LINES),
        Parameter("reversed", FLAG, "", False),
        _device("gfpe_30"),
        _NON_OPERATING,
        _OPERATING,
        _WAVEFORM,
        _DELAY,
        _RATED,
        _CURVE,
        Parameter("closed", FLAG, "", True),
        *_short(0.002),
    ),
    "adapter": (
        Parameter("from", REFERENCES),
        Parameter("style", CHOICE, choices=tuple(ADAPTERS)),
        Parameter("wired", CHOICE, "", "straight", choices=WIRED),
        Parameter("line_b_ohms", NUMBER, "ohm", None, 1e-9, 1e3),
        Parameter("neutral_b_ohms", NUMBER, "ohm", None, 1e-9, 1e3),
        Parameter("ground_b_ohms", NUMBER, "ohm", None, 1e-9, 1e6),
        *_short(0.004),
    ),
    "cord": (_FROM, _CONNECTOR, *_wire(15.0, 5.26)),
    "inlet": (_FROM, _CONNECTOR, *_short(0.002)),
    "isolator": (
        _FROM,
        Parameter("style", CHOICE, "", "diode", choices=("diode", "capacitor")),
        Parameter("state", CHOICE, "", "auto", choices=("auto", "blocks", "conducts")),
        *_short(0.002),
    ),
    "transformer": (
        _FROM,
        Parameter("style", CHOICE, "", "isolation", choices=("isolation", "polarization")),
        Parameter("secondary", CHOICE, "", "same", choices=("same", "split")),
        Parameter("rated_a", NUMBER, "A", 30.0, 1.0, 400.0),
        Parameter("winding_nf", NUMBER, "nF", 3.0, 0.001, 1e4),
        Parameter("shield", FLAG, "", True),
        Parameter("bonded", FLAG, "", True),
        Parameter("bond_ohms", NUMBER, "ohm", 0.005, 1e-9, 1e6),
    ),
    "main": (
        _FROM,
        _device("elci_30"),
        _NON_OPERATING,
        _OPERATING,
        _WAVEFORM,
        _DELAY,
        _RATED,
        _CURVE,
        Parameter("poles", NUMBER, "", 2, 1, 2, whole=True),
        Parameter("closed", FLAG, "", True),
        *_short(0.003),
    ),
    "generator": (
        Parameter("style", CHOICE, "", "fitted", choices=("fitted", "portable")),
        Parameter("lines", NUMBER, "", 1, 1, 2, whole=True),
        Parameter("running", FLAG, "", False),
        Parameter("bonded", FLAG, "", True),
        Parameter("volts", NUMBER, "V", None, 50.0, 500.0),
        Parameter("line_ohms", NUMBER, "ohm", 0.1, 1e-9, 1e3),
        Parameter("neutral_ohms", NUMBER, "ohm", 0.01, 1e-9, 1e3),
        Parameter("ground_ohms", NUMBER, "ohm", 0.01, 1e-9, 1e6),
    ),
    "transfer": (
        Parameter("from", REFERENCES),
        Parameter("position", NUMBER, "", 1, 1, 2, whole=True),
        Parameter("switched_neutral", FLAG, "", True),
        *_short(0.003),
    ),
    "panel": (Parameter("from", REFERENCES), *_short(0.001)),
    "breaker": (
        _FROM,
        _device("none"),
        _NON_OPERATING,
        _OPERATING,
        _WAVEFORM,
        _DELAY,
        _RATED,
        _CURVE,
        Parameter("poles", NUMBER, "", 1, 1, 2, whole=True),
        Parameter("closed", FLAG, "", True),
        *_short(0.004),
    ),
    "inverter": (
        _FROM,
        Parameter("state", CHOICE, "", "passing", choices=("passing", "inverting", "welded", "off")),
        Parameter("common_neutral", FLAG, "", True),
        Parameter("bond_ohms", NUMBER, "ohm", 0.02, 1e-9, 1e6),
        *_short(0.01),
    ),
    "load": (
        _FROM,
        Parameter("across", CHOICE, "", "L1-N", choices=ACROSS),
        Parameter("ohms", NUMBER, "ohm", None, 0.1, 1e6),
        Parameter("watts", NUMBER, "W", None, 1.0, 5e4),
        Parameter("amperes", NUMBER, "A", None, 0.01, 400.0),
        Parameter("power_factor", NUMBER, "", 1.0, 0.2, 1.0),
        Parameter("appliance", CHOICE, "", None, choices=tuple(APPLIANCES)),
        Parameter("inrush", NUMBER, "", None, 1.0, 30.0),
        Parameter("on", FLAG, "", True),
        Parameter("switch_poles", NUMBER, "", 1, 1, 2, whole=True),
        Parameter("element", FLAG, "", False),
        Parameter("filter_nf", NUMBER, "nF", None, 0.01, 1e4, source="IEC 60384-14"),
        Parameter("ground_ohms", NUMBER, "ohm", 0.05, 1e-9, 1e6),
    ),
    "hull": (
        Parameter("from", REFERENCES),
        Parameter("afloat", FLAG, "", True),
        Parameter("material", CHOICE, "", "grp", choices=tuple(HULL_RADIUS_M)),
        Parameter("water", CHOICE, "", "fresh", choices=tuple(WATERS)),
        Parameter("radius_m", NUMBER, "m", None, 0.01, 20.0),
        Parameter("bare_m2", NUMBER, "m2", None, 1e-3, 1e3, source="a plate of area A is the hemisphere of radius sqrt(A / 2 pi)"),
        Parameter("bond_ohms", NUMBER, "ohm", 0.05, 1e-9, 1e6),
        Parameter("water_ohms", NUMBER, "ohm", None, 1e-3, 1e6, source="hemisphere electrode, rho/(2 pi r)"),
    ),
}

_BEFORE_BOAT = ("inlet", "isolator", "transformer", "main", "transfer")

PARENTS: dict[str, tuple[str, ...]] = {
    "supply": (),
    "feeder": ("supply",),
    "pedestal": ("feeder", "supply"),
    "receptacle": ("pedestal",),
    "adapter": ("receptacle", "cord", "adapter"),
    "cord": ("receptacle", "adapter", "cord"),
    "inlet": ("cord", "adapter"),
    "isolator": ("inlet", "main", "transformer", "cord", "adapter"),
    "transformer": ("inlet", "isolator", "main", "cord", "adapter"),
    "main": _BEFORE_BOAT,
    "generator": (),
    "transfer": ("generator", *_BEFORE_BOAT),
    "panel": (*_BEFORE_BOAT, "inverter"),
    "breaker": ("panel", "inverter"),
    "inverter": ("panel", "breaker", "main", "transfer"),
    "load": ("breaker", "panel", "inverter", "pedestal"),
    "hull": ("panel",),
}

# Two parts may be loose at their supply end: the plug of a cord or adapter, and the pins of an inlet, are bare male blades.
MAY_BE_LOOSE = ("cord", "adapter", "inlet")
ASHORE = ("supply", "feeder", "pedestal")
