"""Every way to connect one boat to one dock with what is at hand, and two verdicts for each: will it hold, and may it be used.

`plan(case)` gives plain JSON values, nothing rounded, every key present:

    {"ways": [WAY], "left_out": whole number, "left_out_at_least": bool, "unused": [{"part", "rule"}], "assumed": [{"part", "connector"}]}

WAY, best first:

    connections   [{"part", "from": [end]}], from shore to boat: what hangs on what
    inlets_out    ids of the inlets left out
    present       it is connected like this now
    holds         "holds" | "may trip" | "trips" | "holds because nothing is watching": the worst of all states looked at
    why           the device nearest to tripping then, and the branch by which most of its residual strays: {"sensor", "device", "state",
                  "load", "residual_ma", "angle_deg", "verdict", "crossing": {"branch", "kind", "ma"} | null} | null
    all_on        [{"id", "device", "rating_ma", "residual_ma", "angle_deg", "verdict"}] with every load on
    worst         {"state": "all_on" | "all_off" | "one_load", "load": id | null, "sensors": as all_on}
    use           "may be used" | "do not use"
    reasons       [{"rule", "part", "value", "unit"}], empty where it may be used
    cautions      [{"rule", "part", "value", "unit"}]
    lines         [{"part", "kind", "line", "used_a", "limit_a", "left_a", "left_w"}] of each outlet in use, and of each main and breaker
                  aboard whose rating is stated, with every load on; what is left may be below zero
    panels        [{"panel", "line", "volts", "limit_volts"}] with every load on; volts null where nothing feeds it
    hull_volts    the most any of the boat's hulls stands above the water, or null
    loads_off     [{"load", "rule": "dead" | "overload" | "low_volts" | "residual", "part", "value", "unit"}]: what must stay off
    loads_weak    [{"load", "volts", "rated_volts", "power_share"}]: what runs at less than its power
    with_loads_off {"holds", "use", "reasons", "lines"}: the same verdicts with those loads off

The states looked at are every load on, every load off and each load alone; stated filters and faults are in all of them. A residual is
what `residuals` gives for the same installation in the same state. Nothing here says that a way is free of danger: "may be used" means
that no rule below forbids it.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from strayline.allowances import lines, loads_off, panel_rows, weak
from strayline.connections import SEVERITY, holds, hull_volts, only_load, sensor_rows, state_name, why, wired, worst
from strayline.errors import CaseError
from strayline.hookups import Hookup, Kit, hookups, kit
from strayline.objections import loaded_objections, standing_objections
from strayline.parts import Installation, read

if TYPE_CHECKING:
    from collections.abc import Mapping

    from strayline.casefile import Case
    from strayline.causes import Fault

MAX_WAYS = 200  # worked out; the rest is counted
MIN_WAYS = 20  # worked out however large the dock
MAX_PARTS = 40_000  # in all networks built together: a dock of many boats gets fewer ways
MAY, MUST_NOT = "may be used", "do not use"


def plan(case: Case) -> dict[str, Any]:
    """The reply of `core plan`. Raises CaseError where the case has no installation or the boat no inlet."""
    if case.installation is None:
        raise CaseError("installation", "missing; say what is plugged into what")
    installation = read(case.installation)
    own = kit(installation)
    if not own.inlets:
        raise CaseError("installation.parts", "no inlet; a plan needs a boat that can be plugged in")
    marked = frozenset(name for fault in case.faults for name in (fault.at, fault.load) if name)
    most = min(MAX_WAYS, max(MIN_WAYS, MAX_PARTS // len(installation.parts)))
    found = hookups(installation, own, most, marked)
    ways = [_way(installation, own, hookup, case.faults) for hookup in found.kept]
    used = {link["part"] for way in ways for link in way["connections"]}
    return {
        "ways": sorted(ways, key=_rank),
        "left_out": found.counted - len(found.kept),
        "left_out_at_least": found.more,
        "unused": [
            {"part": part.id, "rule": "fits_nowhere" if part.id in own.plugs else "unknown_ends"}
            for part in own.loose
            if part.id not in used and not found.counted > len(found.kept)
        ],
        "assumed": [{"part": part_id, "connector": connector} for part_id, connector in own.assumed.items()],
    }


def _way(installation: Installation, own: Kit, hookup: Hookup, faults: tuple[Fault, ...]) -> dict[str, Any]:
    way = wired(installation, own, hookup, faults)
    everything = way.loadings.loads
    off = loads_off(way)
    rest = everything - {one["load"] for one in off}
    standing = standing_objections(way)
    reasons, rest_reasons = ([one for one in (*standing, *loaded_objections(way, on)) if one.forbids] for on in (everything, rest))
    state = worst(way, everything)
    return {
        "connections": [{"part": part_id, "from": list(ends)} for part_id, ends in hookup.links],
        "inlets_out": [part.id for part in own.inlets if part.id not in dict(hookup.links)],
        "present": hookup.present,
        "holds": holds(way, state),
        "why": why(way, state),
        "all_on": sensor_rows(way, everything),
        "worst": {"state": state_name(way, state), "load": only_load(way, state), "sensors": sensor_rows(way, state)},
        "use": MUST_NOT if reasons else MAY,
        "reasons": [one.row() for one in reasons],
        "cautions": [one.row() for one in standing if not one.forbids],
        "lines": lines(way, everything),
        "panels": panel_rows(way, everything),
        "hull_volts": max(hull_volts(way, everything).values(), default=None),
        "loads_off": off,
        "loads_weak": weak(way, off),
        "with_loads_off": {
            "holds": holds(way, worst(way, rest)),
            "use": MUST_NOT if rest_reasons else MAY,
            "reasons": [one.row() for one in rest_reasons],
            "lines": lines(way, rest),
        },
    }


def _rank(way: Mapping[str, Any]) -> tuple[Any, ...]:
    """Best first: usable and holding, then usable and holding with some loads off, then what holds; then power left, then fewer parts."""
    eased = way["with_loads_off"]
    return (
        (way["use"] != MAY or way["holds"] != "holds"),
        (eased["use"] != MAY or eased["holds"] != "holds"),
        way["use"] != MAY,
        SEVERITY.index(way["holds"]) if way["holds"] in SEVERITY else 1,
        -math.fsum(max(line["left_w"], 0.0) for line in way["lines"] if line["kind"] == "receptacle"),
        len(way["connections"]),
        [(link["part"], link["from"]) for link in way["connections"]],
    )
