"""One table of part kinds: parameter, unit, default, range, source.

The case file, its schema, the defaults reported to the person and the network builder all read this table. A parameter
without a default is required. A quantity may be a number, a range `[low, high]` or `"unknown"`.
"""

from __future__ import annotations

from dataclasses import dataclass

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
    """A shore supply: line-to-neutral volts RMS, hertz, and the angle of each line in degrees."""

    volts: float
    hertz: float
    lines: dict[str, float]
    region: str


SYSTEMS: dict[str, System] = {
    "split_120_240": System(120.0, 60.0, {"L1": 0.0, "L2": 180.0}, "60"),
    "wye_120_208": System(120.0, 60.0, {"L1": 0.0, "L2": -120.0}, "60"),
    "single_230": System(230.0, 50.0, {"L1": 0.0}, "50"),
}


@dataclass(frozen=True, slots=True)
class Connector:
    """A receptacle type: rated amperes, live lines carried, poles its breaker opens ("lines" or "all" live conductors)."""

    rated_a: float
    lines: int
    opens: str
    volts: tuple[str, ...]


CONNECTORS: dict[str, Connector] = {
    "20a_125v": Connector(20.0, 1, "lines", ("split_120_240", "wye_120_208")),
    "30a_125v": Connector(30.0, 1, "lines", ("split_120_240", "wye_120_208")),
    "50a_125_250v": Connector(50.0, 2, "lines", ("split_120_240", "wye_120_208")),
    "16a_230v": Connector(16.0, 1, "all", ("single_230",)),
    "32a_230v": Connector(32.0, 1, "all", ("single_230",)),
}

ADAPTERS = ("combining_y", "splitting_y", "straight_30_50", "straight_50_30", "homemade")
DEVICE_CHOICES = ("none", "class_a", "gfpe_30", "elci_30", "rcd_30", "rcd_100_s", "gfpe_100")
ACROSS = ("L1-N", "L2-N", "L1-L2")

_FROM = Parameter("from", REFERENCE)
_LENGTH = Parameter("length_m", NUMBER, "m", None, 0.1, 500.0)
_AWG = Parameter("awg", NUMBER, "AWG", None, -3.0, 20.0, source="ASTM B258", whole=True)
_AREA = Parameter("area_mm2", NUMBER, "mm2", None, 0.5, 300.0, source="IEC 60228")
_LINE = Parameter("line_ohms", NUMBER, "ohm", None, 1e-9, 1e3)
_NEUTRAL = Parameter("neutral_ohms", NUMBER, "ohm", None, 1e-9, 1e3)
_GROUND = Parameter("ground_ohms", NUMBER, "ohm", None, 1e-9, 1e6)
_NON_OPERATING = Parameter("non_operating_ma", NUMBER, "mA", None, 0.1, 1e5)
_OPERATING = Parameter("operating_ma", NUMBER, "mA", None, 0.1, 1e5)


def _device(default: str) -> Parameter:
    return Parameter("device", CHOICE, "", default, choices=DEVICE_CHOICES)


def _wire(length_m: float, area_mm2: float) -> tuple[Parameter, ...]:
    return (
        Parameter("length_m", NUMBER, "m", length_m, 0.1, 500.0),
        _AWG,
        Parameter("area_mm2", NUMBER, "mm2", area_mm2, 0.5, 300.0, source="IEC 60228"),
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
        Parameter("line_ohms", NUMBER, "ohm", 0.02, 1e-9, 1e3),
        Parameter("neutral_ohms", NUMBER, "ohm", 0.005, 1e-9, 1e3),
        Parameter("bond_ohms", NUMBER, "ohm", 0.001, 1e-9, 1e6),
        Parameter("earth_ohms", NUMBER, "ohm", 5.0, 1e-9, 1e6),
    ),
    "feeder": (_FROM, _device("gfpe_100"), _NON_OPERATING, _OPERATING, *_wire(60.0, 50.0)),
    "pedestal": (_FROM, *_short(0.001)),
    "receptacle": (
        _FROM,
        Parameter("connector", CHOICE, choices=tuple(CONNECTORS)),
        Parameter("leg", CHOICE, "", "L1", choices=("L1", "L2")),
        _device("gfpe_30"),
        _NON_OPERATING,
        _OPERATING,
        Parameter("rated_a", NUMBER, "A", None, 1.0, 400.0),
        Parameter("closed", FLAG, "", True),
        *_short(0.002),
    ),
    "adapter": (
        Parameter("from", REFERENCES),
        Parameter("style", CHOICE, choices=ADAPTERS),
        *_short(0.004),
    ),
    "cord": (_FROM, *_wire(15.0, 5.26)),
    "inlet": (_FROM, *_short(0.002)),
    "main": (
        _FROM,
        _device("elci_30"),
        _NON_OPERATING,
        _OPERATING,
        Parameter("poles", NUMBER, "", 2, 1, 2, whole=True),
        Parameter("closed", FLAG, "", True),
        *_short(0.003),
    ),
    "panel": (Parameter("from", REFERENCES), *_short(0.001)),
    "breaker": (_FROM, Parameter("poles", NUMBER, "", 1, 1, 2, whole=True), Parameter("closed", FLAG, "", True), *_short(0.004)),
    "load": (
        _FROM,
        Parameter("across", CHOICE, "", "L1-N", choices=ACROSS),
        Parameter("ohms", NUMBER, "ohm", None, 0.1, 1e6),
        Parameter("watts", NUMBER, "W", None, 1.0, 5e4),
        Parameter("amperes", NUMBER, "A", None, 0.01, 400.0),
        Parameter("power_factor", NUMBER, "", 1.0, 0.2, 1.0),
        Parameter("on", FLAG, "", True),
        Parameter("element", FLAG, "", False),
        Parameter("filter_nf", NUMBER, "nF", None, 0.01, 1e4, source="IEC 60384-14"),
        Parameter("ground_ohms", NUMBER, "ohm", 0.05, 1e-9, 1e6),
    ),
    "hull": (
        Parameter("from", REFERENCES),
        Parameter("afloat", FLAG, "", True),
        Parameter("bond_ohms", NUMBER, "ohm", 0.05, 1e-9, 1e6),
        Parameter("water_ohms", NUMBER, "ohm", 15.0, 1e-3, 1e6, source="hemisphere electrode, rho/(2 pi r): 50 ohm m, r 0.5 m"),
    ),
}

PARENTS: dict[str, tuple[str, ...]] = {
    "supply": (),
    "feeder": ("supply",),
    "pedestal": ("feeder", "supply"),
    "receptacle": ("pedestal",),
    "adapter": ("receptacle", "cord", "adapter"),
    "cord": ("receptacle", "adapter", "cord"),
    "inlet": ("cord", "adapter"),
    "main": ("inlet", "main"),
    "panel": ("main", "inlet"),
    "breaker": ("panel",),
    "load": ("breaker", "panel"),
    "hull": ("panel",),
}

# Two parts may be loose at their supply end: the plug of a cord or adapter, and the pins of an inlet, are bare male blades.
MAY_BE_LOOSE = ("cord", "adapter", "inlet")
ASHORE = ("supply", "feeder", "pedestal")
