"""What may flow through a way to connect for long, what is left of it, and which loads must stay off."""

from __future__ import annotations

import cmath
import math
from typing import TYPE_CHECKING, Any

from strayline.components import CONNECTORS
from strayline.connections import STRAYS, fed, verdict
from strayline.loadings import NOTHING
from strayline.parts import base
from strayline.wiring import nominal_volts

if TYPE_CHECKING:
    from strayline.connections import Wired
    from strayline.parts import Part

CONTINUOUS_SHARE = {60.0: 0.8, 50.0: 1.0}  # of a breaker's rating, by hertz: NEC 210.20 (from memory); IEC 60898-1 carries its rating
LOW_SHARE = 0.9  # 108 of 120 V: common practice; -10 % of 230 V: IEC 60038 (from memory)
DEAD_SHARE = 0.1  # of the rated voltage: nothing runs; a judgement
WEAK_SHARE = 0.9  # of the rated power: below this it is told; a judgement
RATED_ACROSS_LINES = {120.0: 240.0}  # appliances for two lines of a 120 V system are made for 240 V; on two legs of 208Y they get less

Row = dict[str, Any]


def rated_a(receptacle: Part) -> float:
    """What an outlet's breaker is rated for."""
    return receptacle.number("rated_a") or CONNECTORS[receptacle.text("connector")].rated_a


def plugged_into(way: Wired, receptacle: Part) -> list[Part]:
    """What is plugged into an outlet, up to the inlets; a home-made adapter has no rating of its own."""
    below = way.installation.downstream(receptacle.id)
    return [part for part in way.used("cord", "adapter", "inlet") if part.id in below and way.own.outlets.get(part.id)]


def carries_a(way: Wired, part: Part) -> float:
    """What the weakest outlet of a plugged part is rated for."""
    return min(CONNECTORS[name].rated_a for name in way.own.outlets[part.id])


# --- power ---------------------------------------------------------------------------------------------------------


def limit_a(way: Wired, part: Part) -> float:
    """What may flow through an overcurrent device for long: a share of its rating, ashore of the least rating plugged into it too."""
    if part.kind != "receptacle":
        return (part.number("rated_a") or math.inf) * CONTINUOUS_SHARE[way.system.hertz]
    ratings = [carries_a(way, one) for one in plugged_into(way, part)]
    return min([rated_a(part), *ratings]) * CONTINUOUS_SHARE[way.system.hertz]


def lines(way: Wired, on: frozenset[str]) -> list[Row]:
    """Amperes through each line of each overcurrent device, its limit, and what is left (watts at nominal volts and unity power factor).

    The devices are those of the outlets in use, and those aboard whose rating is stated.
    """
    rows: list[Row] = []
    for key, value in way.loadings.at(on).items():
        if key[0] == "line":
            part = way.installation.part(key[1])
            limit = limit_a(way, part)
            left = limit - abs(value)
            watts = left * _nominal(way, "L1-N")
            rows.append({
                "part": part.id, "kind": part.kind, "line": key[2],
                "used_a": abs(value), "limit_a": limit, "left_a": left, "left_w": watts,
            })  # fmt: skip
    return rows


def over(way: Wired, on: frozenset[str]) -> list[Row]:
    """The lines beyond their limit."""
    return [row for row in lines(way, on) if row["left_a"] < 0]


def _nominal(way: Wired, across: str) -> float:
    return nominal_volts(across, way.system, way.phase_volts)


def panel_rows(way: Wired, on: frozenset[str]) -> list[Row]:
    """Volts from each line to the neutral at each panel, and the least that is enough; None where nothing feeds it."""
    rows: list[Row] = []
    for key, value in way.loadings.at(on).items():
        if key[0] == "panel":
            limit = LOW_SHARE * _nominal(way, "L1-N")
            volts = abs(value) if fed(way, key[1]) and not cmath.isnan(value) else None
            rows.append({"panel": key[1], "line": key[2], "volts": volts, "limit_volts": limit})
    return rows


def low(way: Wired, on: frozenset[str]) -> list[Row]:
    """The panel lines below what is enough."""
    return [row for row in panel_rows(way, on) if row["volts"] is not None and row["volts"] < row["limit_volts"]]


def _rated_volts(way: Wired, load: Part) -> float:
    """What an appliance across these conductors is made for."""
    across = load.text("across")
    return RATED_ACROSS_LINES.get(way.system.volts if not across.endswith("N") else 0.0) or _nominal(way, across)


def _load_volts(way: Wired, load: Part) -> float:
    """Volts at a load with every load on; 0 where nothing feeds it."""
    value = way.loadings.at(way.loadings.loads)["load", load.id]
    return 0.0 if cmath.isnan(value) else abs(value)


def weak(way: Wired, off: list[Row]) -> list[Row]:
    """Loads that run at less than their power, with every load on: a resistive one by the square of the voltage."""
    dead = {one["load"] for one in off if one["rule"] == "dead"}
    rows: list[Row] = []
    for load in way.loads:
        volts, rated = _load_volts(way, load), _rated_volts(way, load)
        if load.id not in dead and (volts / rated) ** 2 < WEAK_SHARE:
            rows.append({"load": load.id, "volts": volts, "rated_volts": rated, "power_share": (volts / rated) ** 2})
    return rows


# --- what must stay off --------------------------------------------------------------------------------------------


def loads_off(way: Wired) -> list[Row]:
    """Loads to leave off until the rest holds within every rating, with why: {"load", "rule", "part", "value", "unit"}.

    First those that get no power, then those that stray alone, then one at a time the one that helps most; it stops when none helps.
    """
    off: list[Row] = []
    for load in way.loads:
        volts = _load_volts(way, load)
        if volts < DEAD_SHARE * _rated_volts(way, load):
            off.append({"load": load.id, "rule": "dead", "part": base(load.parents[0]), "value": volts, "unit": "V"})
    while True:
        on = way.loadings.loads - {one["load"] for one in off}
        new = _stray_alone(way, on) or _next_off(way, on)
        if not new:
            return off
        off += new


def _stray_alone(way: Wired, on: frozenset[str]) -> list[Row]:
    """Every load that alone brings a device above its non-operating value which holds with every load off."""
    bare = way.loadings.at(NOTHING)
    found: list[Row] = []
    for sensor in way.sensors:
        if verdict(way, sensor, bare["residual", sensor.id]) in STRAYS:
            continue
        for load in sorted(on - {one["load"] for one in found}):
            residual = way.loadings.at(frozenset({load}))["residual", sensor.id]
            if verdict(way, sensor, residual) in STRAYS:
                found.append({"load": load, "rule": "residual", "part": sensor.id, "value": abs(residual) * 1e3, "unit": "mA"})
    return found


def _next_off(way: Wired, on: frozenset[str]) -> list[Row]:
    """One load more to leave off, with why; none where all is well or no load helps."""
    if not on:
        return []
    bare, full = way.loadings.at(NOTHING), way.loadings.at(on)
    for row in over(way, on):
        key = ("line", row["part"], row["line"])
        shares = {load: abs(way.loadings.at(frozenset({load}))[key]) - abs(bare[key]) for load in sorted(on)}
        enough = [load for load in shares if shares[load] >= -row["left_a"]]
        load = min(enough, key=lambda one: shares[one]) if enough else max(shares, key=lambda one: shares[one])
        if shares[load] > 0:
            return [{"load": load, "rule": "overload", "part": f"{key[1]}.{key[2]}", "value": row["used_a"], "unit": "A"}]
    for row in low(way, on):
        key = ("panel", row["panel"], row["line"])
        drops = {load: abs(bare[key]) - abs(way.loadings.at(frozenset({load}))[key]) for load in sorted(on)}
        load = max(drops, key=lambda one: drops[one])
        if drops[load] > 0 and abs(bare[key]) >= row["limit_volts"]:
            return [{"load": load, "rule": "low_volts", "part": f"{key[1]}.{key[2]}", "value": row["volts"], "unit": "V"}]
    for sensor in way.sensors:
        window = ("residual", sensor.id)
        if verdict(way, sensor, full[window]) in STRAYS and verdict(way, sensor, bare[window]) not in STRAYS:
            # Loads hardly touch each other's leakage, so what one adds alone is what leaving it off takes away.
            parts = {load: way.loadings.at(frozenset({load}))[window] - bare[window] for load in sorted(on)}
            along = {load: (part * full[window].conjugate()).real for load, part in parts.items()}
            load = max(along, key=lambda one: along[one])
            if along[load] > 0:
                return [{"load": load, "rule": "residual", "part": sensor.id, "value": abs(full[window]) * 1e3, "unit": "mA"}]
    return []
