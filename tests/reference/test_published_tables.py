"""Published numbers against this project's own functions: each row names its source.

"From memory" and "common practice" are said where that is what stands behind a row. The circuits are built from part lists and solved, so
that a table of amperes checks the road from the parts to a sensor, not a formula beside it.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import pytest

from drawn import Row, boat, dock, load
from strayline import water
from strayline.causes import Fault, applied
from strayline.devices import (
    DEVICES,
    WAVEFORMS,
    class_a_longest_break_s,
    overcurrent_verdict,
    smooth_dc_limit_ma,
    verdict,
)
from strayline.installation import build
from strayline.network import Branch, Network
from strayline.parts import read
from strayline.solve import Solution, Sweep, factor, solve
from strayline.units import METRES_PER_FOOT, awg_area_mm2, cable_ohms, cable_reactance_ohms, copper_ohms

if TYPE_CHECKING:
    from collections.abc import Callable

KFT, HUNDRED_FEET = 1000 * METRES_PER_FOOT, 100 * METRES_PER_FOOT
T8_STRANDED = {14: 3.14, 12: 1.98, 10: 1.24, 8: 0.778, 6: 0.491, 4: 0.308, 3: 0.245, 2: 0.194, 1: 0.154, 0: 0.122, -1: 0.0967}
T9_REACTANCE = {14: 0.058, 12: 0.054, 10: 0.050, 8: 0.052, 6: 0.051, 4: 0.048, 2: 0.045, 0: 0.044, -1: 0.043}
T9_EFFECTIVE = {14: 2.7, 12: 1.7, 10: 1.1, 8: 0.69, 6: 0.44, 4: 0.29, 2: 0.19, 0: 0.13, -1: 0.11}  # printed with two figures
T8_SOLID = {14: 3.07, 12: 1.93, 10: 1.21, 8: 0.764}
IDEAL = 1e-6


def solved(rows: list[Row], *faults: Fault) -> Solution:
    """The solved network of these parts with these faults."""
    installation = read({"parts": rows})
    return solve(applied(installation, build(installation), faults))


def stiff(system: str, connector: str, *loads: Row, **supply: object) -> list[Row]:
    """A boat on a dock whose conductors are next to nothing, and no water."""
    thin = {"line_ohms": IDEAL, "neutral_ohms": IDEAL, "ground_ohms": IDEAL}
    rows = [*dock(system, connector, **supply), *boat("outlet1", *loads)]
    for row in rows:
        if row["kind"] in ("feeder", "cord", "pedestal", "receptacle", "inlet", "main", "panel"):
            row.update(thin)
    rows[0] |= {"line_ohms": IDEAL, "neutral_ohms": IDEAL, "bond_ohms": IDEAL}
    rows[-1] |= {"afloat": False}
    return rows


def residual_ma(rows: list[Row], *faults: Fault) -> float:
    """What the outlet's sensor sees."""
    return abs(solved(rows, *faults).residual("outlet1")) * 1e3


def filter_ma(system: str, volts: float, nanofarads: float) -> float:
    """Leakage of one filter capacitor on a supply of these volts."""
    connector = "30a_125v" if system == "split_120_240" else "16a_230v"
    return residual_ma(stiff(system, connector, load("set", ohms=1e5, filter_nf=nanofarads), volts=volts))


def leak_ma(volts: float, ohms: float) -> float:
    """What a sensor sees of a leak at a load's line terminal."""
    return residual_ma(
        stiff("single_230", "16a_230v", load("kettle", ohms=1e5), volts=volts), Fault("appliance_leak", at="kettle", ohms=ohms)
    )


def neutral_a(system: str, connector: str, **amperes: float) -> float:
    """The cord's neutral current with resistive loads of these amperes from each line to neutral."""
    loads = [load(f"on_{line.lower()}", across=f"{line}-N", amperes=each) for line, each in amperes.items()]
    return abs(solved(stiff(system, connector, *loads)).current("cord.N"))


def two_leaks_ma(system: str) -> float:
    """4 kilohm from one leg and 6 kilohm from the other, through one sensor."""
    loads = (load("one", ohms=1e5), load("two", across="L2-N", ohms=1e5))
    faults = (Fault("appliance_leak", at="one", ohms=4000), Fault("appliance_leak", at="two", ohms=6000))
    return residual_ma(stiff(system, "50a_125_250v", *loads), *faults)


def quadrature_ma(leak_ohms: float, nanofarads: float) -> float:
    """A leak and a capacitor on one line of 120 V 60 Hz."""
    rows = stiff("split_120_240", "30a_125v", load("set", ohms=1e5, filter_nf=nanofarads))
    return residual_ma(rows, Fault("appliance_leak", at="set", ohms=leak_ohms))


def drop_v(rows: list[Row], load_id: str) -> float:
    """Volts lost in both conductors of the cord under a load."""
    solution = solved(rows)
    return abs(solution.current(f"{load_id}.load")) * sum(solution.network.branch(f"cord.{name}").impedance.real for name in ("L1", "N"))


def effective_ohms(awg: int) -> float:
    """Volts lost for each ampere in a thousand feet of one conductor at 75 C, under a load with a power factor of 0.85."""
    rows = cord_of(awg=awg, length_m=KFT, celsius=75)
    rows[-2] = load("motor", ohms=1000, power_factor=0.85)  # before the hull
    solution = solved(rows)

    def across(part: str) -> float:
        return abs((solution.voltage(f"{part}.L1") or 0) - (solution.voltage(f"{part}.N") or 0))

    return (across("outlet1") - across("cord")) / abs(solution.current("motor.load")) / 2


def open_neutral_v() -> float:
    """Volts across 48 ohm in series with 12 ohm when the neutral of 120/240 V is lost."""
    rows = stiff("split_120_240", "50a_125_250v", load("small", across="L2-N", ohms=48), load("big", ohms=12))
    solution = solved(rows, Fault("open_neutral", at="outlet1"))
    return abs(solution.current("small.load")) * 48


def delta_a() -> float:
    """Line current of three loads of 14 A across the lines of 208 V."""
    rows = stiff("wye_120_208_3", "30a_125v", load("lamp", ohms=1e5))
    rows += [load(f"set{across[1]}{across[4]}", across=across, amperes=14) | {"from": "post"} for across in ("L1-L2", "L2-L3", "L1-L3")]
    return abs(solved(rows).current("post.L1"))


def element_share() -> float:
    """Power of a 1 kW, 240 V element on two legs of 208Y, as a share of its rating."""
    current = solved(stiff("wye_120_208", "50a_125_250v", load("stove", across="L1-L2", ohms=57.6))).current("stove.load")
    return abs(current) ** 2 * 57.6 / 1000


def across_lines_neutral_a() -> float:
    """Neutral current of 20 A across two legs of 208Y, as a share of the line current."""
    solution = solved(stiff("wye_120_208", "50a_125_250v", load("stove", across="L1-L2", amperes=20)))
    return abs(solution.current("cord.N")) / abs(solution.current("cord.L1"))


def contact_w() -> float:
    """Heat in one contact of 50 milliohm at 30 A."""
    rows = stiff("split_120_240", "30a_125v", load("heater", ohms=4 - 0.05 - 0.004), volts=120)
    next(row for row in rows if row["id"] == "inlet")["line_ohms"] = 0.05
    return abs(solved(rows).current("inlet.L1")) ** 2 * 0.05


def joined(i_a: float, i_b: float, r_a: float, r_b: float, degrees: float) -> float:
    """Residual of one of two feeds whose neutrals, of r_a and r_b ohm, meet; the second leg stands at these degrees."""
    far = complex(math.cos(math.radians(degrees)), math.sin(math.radians(degrees)))
    branches = [
        Branch("leg_a", "n", "a", 0j, "source", "dock", 1000),
        Branch("leg_b", "n", "b", 0j, "source", "dock", 1000 * far),
        Branch("back_a", "n", "x", r_a, "neutral", "y"),
        Branch("back_b", "n", "x", r_b, "neutral", "y"),
        Branch("load_a", "a", "x", 1000 / i_a if i_a else 1e12, "load", "boat"),
        Branch("load_b", "b", "x", 1000 / i_b if i_b else 1e12, "load", "boat"),
    ]
    solution = solve(Network(60, "n", tuple(branches)))
    return abs(solution.current("load_a") + solution.current("back_a"))


def thevenin(*ohms: float, volts: float, amperes: float = 0.0) -> tuple[complex, complex]:
    """Open volts and impedance between b and 0: a source behind ohms[0], a shunt ohms[1], ohms[2] to b; amperes into the shunt."""
    first, shunt, last = ohms
    branches = [
        Branch("e", "0", "a", first, "source", "x", volts),
        Branch("s", "a", "0", shunt, "load", "x"),
        Branch("l", "a", "b", last, "line", "x"),
    ]
    if amperes:
        branches.append(Branch("i", "0", "a", 1e9, "source", "x", amperes * 1e9))
    port = factor(Network(50, "0", tuple(branches))).port("b", "0")
    return port.open_voltage, port.impedance


def through(port: tuple[complex, complex], ohms: float) -> float:
    """Amperes into a load at a Thevenin pair."""
    return abs(port[0] / (port[1] + ohms))


def series_a(volts: float, inner: float, outer: float) -> float:
    """Amperes from a source with inner ohms into outer ones."""
    branches = (Branch("e", "0", "a", inner, "source", "x", volts), Branch("load", "a", "0", outer, "load", "x"))
    return abs(solve(Network(50, "0", branches)).current("load"))


LADDER = Network(
    50,
    "0",
    tuple(
        Branch(name, a, b, 1.0, "line", "x") for name, a, b in (("g1", "1", "0"), ("g12", "1", "2"), ("g23", "2", "3"), ("g3", "3", "0"))
    ),
)


def ladder_ohms(a: str, b: str, *shunts: tuple[str, str, complex]) -> float:
    """Resistance between two nodes of the four-resistor ladder after connecting shunts, by the closed form over ports."""
    # One ampere through the port: a source of a gigavolt behind a gigohm.
    network = Network(50, "0", (*LADDER.branches, Branch("test", b, a, 1e9, "source", "x", 1e9)))
    factors = factor(network)
    return abs(Sweep(factors, [factors.between(a, b)]).at(shunts)[0][0])


ROWS: list[tuple[str, str, Callable[[], float], float, float]] = [
    *(
        (
            f"14 to 2/0 stranded, {awg}",
            "NEC ch. 9 table 8, uncoated stranded, 75 C",
            lambda awg=awg: cable_ohms(KFT, awg_area_mm2(awg), 75),
            ohms,
            0.01,
        )
        for awg, ohms in T8_STRANDED.items()
    ),
    *(
        (f"solid, {awg}", "NEC ch. 9 table 8, solid, 75 C", lambda awg=awg: copper_ohms(KFT, awg_area_mm2(awg), 75), ohms, 0.005)
        for awg, ohms in T8_SOLID.items()
    ),
    *(
        (
            f"100 ft of {awg} AWG",
            "handbook wire table, solid, 20 C",
            lambda awg=awg: copper_ohms(HUNDRED_FEET, awg_area_mm2(awg)),
            ohms,
            1.2e-3,
        )
        for awg, ohms in ((12, 0.15880), (14, 0.25250), (10, 0.10000))
    ),
    ("6 AWG in circular mils", "ASTM B258 wire chart", lambda: awg_area_mm2(6) / (math.pi / 4 * 0.0254**2), 26240, 1e-3),
    ("4/0 diameter in mils", "ASTM B258, defining point", lambda: math.sqrt(awg_area_mm2(-3) / (math.pi / 4)) / 0.0254, 460, 1e-9),
    ("36 diameter in mils", "ASTM B258, defining point", lambda: math.sqrt(awg_area_mm2(36) / (math.pi / 4)) / 0.0254, 5, 1e-9),
    ("correction to 75 C", "IEC 60228 annex, published factor 0.820", lambda: cable_ohms(1, 2.5) / cable_ohms(1, 2.5, 75), 0.820, 0.01),
    ("copper over class 5, 2.5 mm2", "IEC 60228 over IEC 60028", lambda: cable_ohms(1, 2.5) / copper_ohms(1, 2.5), 1.1571, 1e-4),
    (
        "copper over class 5, 35 mm2: effective area",
        "IEC 60228 over IEC 60028",
        lambda: copper_ohms(1, 1) / cable_ohms(1, 35.0),
        31.121,
        1e-4,
    ),
    *(
        (
            f"reactance, {awg}",
            "NEC ch. 9 table 9, plastic conduit: one value for all sizes",
            lambda: cable_reactance_ohms(KFT, 60),
            ohms,
            0.17,
        )
        for awg, ohms in T9_REACTANCE.items()
    ),
    *(
        (f"effective at 0.85, {awg}", "NEC ch. 9 table 9, plastic conduit, 75 C", lambda awg=awg: effective_ohms(awg), ohms, 0.05)
        for awg, ohms in T9_EFFECTIVE.items()
    ),
    (
        "50 ft of 10 AWG, 30 A, 75 C: volts lost",
        "NEC table 8 worked",
        lambda: drop_v(cord_of(awg=10, length_m=50 * METRES_PER_FOOT, celsius=75), "heater"),
        3.72,
        0.01,
    ),
    (
        "25 m of 2.5 mm2, 16 A: volts lost",
        "IEC 60228 worked",
        lambda: drop_v(cord_of(area_mm2=2.5, length_m=25, amperes=16), "heater"),
        6.384,
        0.01,
    ),
    ("4.7 nF at 240 V 50 Hz", "published 0.354 mA", lambda: filter_ma("single_230", 240, 4.7), 0.354, 2e-3),
    *(
        (f"{nf} nF at {volts} V", "2 pi f C V (IEC 60384-14 sizes)", lambda s=system, v=volts, n=nf: filter_ma(s, v, n), ma, 2e-3)
        for system, volts, nf, ma in (
            ("split_120_240", 120, 1.0, 0.0452),
            ("split_120_240", 120, 2.2, 0.0995),
            ("split_120_240", 120, 10, 0.4524),
            ("split_120_240", 120, 100, 4.5239),
            ("single_230", 230, 4.7, 0.3396),
            ("single_230", 230, 22, 1.5896),
            ("single_230", 250, 47, 3.6914),
            ("single_230", 230, 100, 7.2257),
        )
    ),
    (
        "data sheet scaled from 120 V 60 Hz to 230 V 50 Hz",
        "supply data sheet, 0.18 and 0.30 mA",
        lambda: filter_ma("single_230", 230, 0.18 / filter_ma("split_120_240", 120, 1)),
        0.30,
        0.05,
    ),
    ("663 nF makes 30 mA at 120 V 60 Hz", "2 pi f C V", lambda: filter_ma("split_120_240", 120, 663.146), 30, 1e-3),
    ("415 nF makes 30 mA at 230 V 50 Hz", "2 pi f C V", lambda: filter_ma("single_230", 230, 415.186), 30, 1e-3),
    *(
        (f"{kohm} kilohm at {volts} V", "Ohm", lambda v=volts, k=kohm: leak_ma(v, k * 1e3), ma, 1e-3)
        for volts, kohm, ma in (
            (120, 30.0, 4),
            (120, 20.0, 6),
            (120, 4.0, 30),
            (120, 1.2, 100),
            (208, 6.93, 30),
            (230, 7.67, 30),
            (230, 15.33, 15),
            (240, 8.0, 30),
            (230, 1000, 0.23),
            (120, 25.0, 4.8),
        )
    ),
    ("20 mA R with 20 mA C", "phasor sum", lambda: quadrature_ma(6000, 20 / 0.0452389), 28.2843, 1e-3),
    ("4 kilohm beside 0.5 uF", "phasor sum", lambda: quadrature_ma(4000, 500), 37.5718, 1e-3),
    ("leaks on two opposite legs", "Kirchhoff", lambda: two_leaks_ma("split_120_240"), 10, 1e-3),
    ("leaks on two legs of 208Y", "Kirchhoff", lambda: two_leaks_ma("wye_120_208"), 26.4575, 1e-3),
    ("wye neutral, 5 A and 5 A", "published: 5 A", lambda: neutral_a("wye_120_208", "50a_125_250v", L1=5, L2=5), 5, 1e-3),
    ("wye neutral, 20 A and 10 A", "wye neutral formula", lambda: neutral_a("wye_120_208", "50a_125_250v", L1=20, L2=10), 17.3205, 1e-3),
    ("wye neutral, 50 A and 25 A", "wye neutral formula", lambda: neutral_a("wye_120_208", "50a_125_250v", L1=50, L2=25), 43.3013, 2e-3),
    (
        "wye neutral, 20, 15 and 10 A",
        "wye neutral formula",
        lambda: neutral_a("three_230_400", "32a_400v", L1=20, L2=15, L3=10),
        8.66025,
        1e-3,
    ),
    ("split-phase neutral, 20 and 10 A", "Kirchhoff", lambda: neutral_a("split_120_240", "50a_125_250v", L1=20, L2=10), 10, 1e-3),
    ("three loads of 14 A across 208 V", "published: 24.25 A", delta_a, 24.25, 1e-3),
    ("240 V element on 208 V", "Ohm", element_share, 0.751111, 2e-3),
    ("open neutral, 12 and 48 ohm", "voltage divider", open_neutral_v, 192, 1e-3),
    ("contact of 50 milliohm at 30 A", "Joule", contact_w, 45, 2e-3),
    *(
        (
            f"joined neutrals {i_a}/{i_b} A at {degrees}",
            "parallel-neutral algebra",
            lambda a=(i_a, i_b, r_a, r_b, degrees): joined(*a),
            amperes,
            1e-3,
        )
        for i_a, i_b, r_a, r_b, degrees, amperes in (
            (10, 0, 0.05, 0.05, 180, 5),
            (10, 10, 0.05, 0.05, 180, 10),
            (15, 5, 0.05, 0.05, 180, 10),
            (10, 10, 0.05, 0.06, 0, 0.909),
            (15, 5, 0.05, 0.05, 0, 5),
            (10, 10, 0.05, 0.05, -120, 8.660),
            (15, 5, 0.05, 0.05, -120, 9.014),
        )
    ),
    ("hemisphere 25 mm in 1e-6 S/m", "published textbook problem: 6.37 Mohm", lambda: water.hemisphere_ohms(1e6, 0.025), 6.37e6, 1e-3),
    ("hemisphere 0.5 m, 50 ohm m", "hemisphere electrode", lambda: water.hemisphere_ohms(50, 0.5), 15.9155, 1e-5),
    ("sphere 0.5 m, 50 ohm m", "sphere electrode", lambda: water.sphere_ohms(50, 0.5), 7.95775, 1e-5),
    (
        "two spheres 0.1 m, 2 m apart, 100 ohm m",
        "published field notes' formula",
        lambda: water.two_spheres_ohms(100, 0.1, 2),
        151.197,
        1e-4,
    ),
    ("rod 8 ft x 5/8 in, 100 ohm m", "Dwight, IEEE 142", lambda: water.rod_ohms(100, 2.4384, 0.0079375), 39.9049, 1e-4),
    ("field of 1 A at 1.10126 m, 50 ohm m", "hemisphere electrode, 2 V/ft", lambda: water.field_v_per_m(50, 1, 1.10126), 6.56168, 1e-4),
    ("6 V behind 3 ohm into 1 ohm", "published Thevenin example", lambda: series_a(6, 3, 1), 1.5, 1e-9),
    ("6.667 V behind 3.667 ohm into 4 ohm", "published Thevenin example", lambda: series_a(6.667, 3.667, 4), 0.869, 1e-3),
    (
        "32 V, 4, 12, 2 A, 1 ohm: open volts",
        "textbook Thevenin problem (from memory)",
        lambda: abs(thevenin(4, 12, 1, volts=32, amperes=2)[0]),
        30,
        1e-6,
    ),
    ("the same: ohms", "textbook Thevenin problem (from memory)", lambda: abs(thevenin(4, 12, 1, volts=32, amperes=2)[1]), 4, 1e-6),
    (
        "the same into 6, 16 and 36 ohm: sum",
        "textbook Thevenin problem (from memory)",
        lambda: sum(through(thevenin(4, 12, 1, volts=32, amperes=2), ohms) for ohms in (6, 16, 36)),
        5.25,
        1e-6,
    ),
    ("ladder, node 1 to 3", "Sherman-Morrison worked by hand", lambda: ladder_ohms("1", "3"), 1.0, 1e-6),
    (
        "ladder with 0.5 S from 1 to 3: node 1",
        "Sherman-Morrison worked by hand",
        lambda: ladder_ohms("1", "0", ("1", "3", 2.0)),
        2 / 3,
        1e-6,
    ),
    (
        "ladder with 0.5 S at 1 and 0.25 S at 2: node 3",
        "Woodbury worked by hand",
        lambda: ladder_ohms("3", "0", ("1", "0", 2.0), ("2", "0", 4.0)),
        0.6851852,
        1e-6,
    ),
    *(
        (f"Class A at {ma} mA", "UL 943: (20 / I)^1.43", lambda ma=ma: class_a_longest_break_s(ma), seconds, 1e-4)
        for ma, seconds in ((6, 5.59392), (10, 2.69447), (30, 0.56), (100, 0.100109), (264, 0.024979))
    ),
    *(
        (
            f"{device} at {multiple} x",
            "IEC 61008-1 table 1",
            lambda d=device, m=multiple: DEVICES[d].break_time_s(m * DEVICES[d].rated_ma),
            seconds,
            0,
        )
        for device, multiple, seconds in (
            ("rcd_10", 1, 0.3),
            ("rcd_100", 2, 0.15),
            ("rcd_300", 5, 0.04),
            ("rcd_300_s", 1, 0.5),
            ("rcd_300_s", 2, 0.2),
            ("rcd_300_s", 5, 0.15),
        )
    ),
    *(
        (
            f"{device} must wait at {multiple} x",
            "IEC 61008-1 table 1, type S",
            lambda d=device, m=multiple: DEVICES[d].holds_s(m * DEVICES[d].rated_ma),
            seconds,
            0,
        )
        for device, multiple, seconds in (("rcd_100_s", 1, 0.130), ("rcd_100_s", 5, 0.050))
    ),
    ("type B, 30 mA: smooth direct current", "BS 7671 531.3.3 (IEC 62423)", lambda: smooth_dc_limit_ma(WAVEFORMS["b"], 30), 12, 0),
    ("type F: smooth direct current", "BS 7671 531.3.3 (IEC 62423)", lambda: smooth_dc_limit_ma(WAVEFORMS["f"], 30), 10, 0),
    ("type A: smooth direct current", "BS 7671 531.3.3 (IEC 60755)", lambda: smooth_dc_limit_ma(WAVEFORMS["a"], 30), 6, 0),
]


def cord_of(*, awg: int | None = None, area_mm2: float = 2.5, length_m: float, celsius: float = 20, amperes: float = 30) -> list[Row]:
    """A boat with one heater on a stiff dock behind a real cord."""
    american = awg is not None
    volts = 120 if american else 230
    rows = stiff(*(("split_120_240", "30a_125v") if american else ("single_230", "16a_230v")), load("heater", ohms=volts / amperes))
    cord = next(row for row in rows if row["kind"] == "cord")
    for name in ("line_ohms", "neutral_ohms", "ground_ohms", "area_mm2"):
        cord.pop(name, None)
    cord |= {"length_m": length_m, "celsius": celsius} | ({"awg": awg} if american else {"area_mm2": area_mm2})
    # The load is made so that it draws its amperes behind the cord's own drop.
    ohms = 2 * cable_ohms(length_m, area_mm2 if awg is None else awg_area_mm2(awg), celsius)
    next(row for row in rows if row["id"] == "heater")["ohms"] = max(volts / amperes - ohms, 1.0)
    return rows


@pytest.mark.parametrize(("what", "source", "ours", "published", "within"), ROWS, ids=[row[0] for row in ROWS])
def test_row(what: str, source: str, ours: Callable[[], float], published: float, within: float) -> None:
    """What this project computes is what the source gives."""
    assert source
    assert ours() == pytest.approx(published, rel=within, abs=1e-12), what


def test_there_are_sixty_rows() -> None:
    """The sheet holds at least sixty rows, each of another name."""
    assert len({row[0] for row in ROWS}) == len(ROWS) >= 60


def test_a_load_across_two_lines_leaves_the_neutral_idle() -> None:
    """20 A across two legs of 208Y: no neutral current (published)."""
    assert across_lines_neutral_a() < 1e-4


@pytest.mark.parametrize(("ma", "told"), [(14.9, "holds"), (15.5, "may trip"), (30.5, "trips")])
def test_the_edges_of_a_thirty_milliampere_device_in_kilohms(ma: float, told: str) -> None:
    """An IEC 61008-1 RCD of 30 mA holds to 15 mA and trips from 30: told of leaks of V / I ohms at 230 V."""
    assert verdict(DEVICES["rcd_30"], leak_ma(230, 230 / ma * 1e3) / 1e3) == told


@pytest.mark.parametrize(("inrush_a", "told"), [(30, "holds"), (40, "may trip"), (50, "trips")])
def test_a_ten_ampere_breaker_of_curve_b(inrush_a: float, told: str) -> None:
    """IEC 60898-1: the magnetic release of B10 holds to 30 A and opens from 50 A."""
    assert overcurrent_verdict(10, 5, inrush_a, "b") == told
