"""Installations drawn for tests: a dock, what is plugged into it, a boat. Between them `DRAWN` holds every row of the component tables."""

from __future__ import annotations

from typing import Any

from strayline.components import ADAPTERS, CONNECTORS, EARTHINGS, SYSTEMS, WIRED

Row = dict[str, Any]

USUAL = {"60": "30a_125v", "50": "16a_230v"}


def dock(system: str, *connectors: str, **supply: object) -> list[Row]:
    """Supply, feeder, post, and an outlet of each type, the second and later ones each on the next line."""
    outlets = [
        {"id": f"outlet{number}", "kind": "receptacle", "from": "post", "connector": connector, "leg": leg(system, number)}
        for number, connector in enumerate(connectors, 1)
    ]
    return [
        {"id": "dock", "kind": "supply", "system": system, **supply},
        {"id": "feeder", "kind": "feeder", "from": "dock"},
        {"id": "post", "kind": "pedestal", "from": "feeder"},
        *outlets,
    ]


def leg(system: str, number: int) -> str:
    """The line of the outlet of this number, going round the lines."""
    lines = list(SYSTEMS[system].lines)
    return lines[(number - 1) % len(lines)]


def boat(source: str, *aboard: Row, main: str = "inlet", panel: str = "main") -> list[Row]:
    """Cord, inlet, main, panel and hull, with what is aboard; `main` and `panel` name what those hang on."""
    return [
        {"id": "cord", "kind": "cord", "from": source, "area_mm2": 4},
        {"id": "inlet", "kind": "inlet", "from": "cord"},
        {"id": "main", "kind": "main", "from": main},
        {"id": "panel", "kind": "panel", "from": panel},
        *aboard,
        {"id": "hull", "kind": "hull", "from": "panel"},
    ]


def load(name: str, **given: object) -> Row:
    """A load, on the panel unless said otherwise."""
    return {"id": name, "kind": "load", "from": "panel", **given}


HEATER = load("heater", watts=1500, element=True)
CHARGER = load("charger", watts=250, power_factor=0.7, filter_nf=22)
ACROSS_LINES = load("stove", across="L1-L2", watts=2000, element=True, filter_nf=4)
LEAK = {"cause": "appliance_leak", "at": "heater", "ohms": 2300, "position": 0.3}
BOND = {"cause": "panel_bond", "at": "panel", "ohms": 0.02}

Drawn = tuple[list[Row], list[Row]]


def _supplies() -> dict[str, Drawn]:
    found = {}
    for system, facts in SYSTEMS.items():
        for earthing in (None, *EARTHINGS):
            given = {} if earthing is None else {"earthing": earthing}
            rows = [*dock(system, USUAL[facts.region], **given), *boat("outlet1", HEATER, CHARGER)]
            found[f"{system}-{earthing or 'usual'}"] = rows, [LEAK, BOND]
    return found


def _connectors() -> dict[str, Drawn]:
    found = {}
    for connector, facts in CONNECTORS.items():
        rows = dock(facts.volts[0], connector, line_ohms=0.03)
        across = "L1-N" if facts.lines == 1 else f"L{facts.lines}-N"
        aboard = [HEATER, load("kettle", across=across, amperes=7)] + [ACROSS_LINES] * (facts.lines > 1)
        if facts.lines == 3:
            aboard += [load("pump", across="L2-L3", watts=900, power_factor=0.8), load("fan", across="L1-L3", watts=700, filter_nf=6)]
        found[f"connector-{connector}"] = [*rows, *boat("outlet1", *aboard)], [LEAK]
    found["connector-reversed"] = [*dock("single_230", "household_230v"), *boat("outlet1", HEATER, CHARGER)], [LEAK]
    found["connector-reversed"][0][3] |= {"reversed": True}
    return found


def _adapters() -> dict[str, Drawn]:
    found = {}
    for style, facts in ADAPTERS.items():
        plugs = facts.plugs or ("30a_125v",)
        rows = dock(CONNECTORS[plugs[0]].volts[0], *plugs)
        made = {"id": "adapter", "kind": "adapter", "style": style, "from": [f"outlet{number}" for number in range(1, len(plugs) + 1)]}
        made |= {"neutral_ohms": 0.006, "neutral_b_ohms": 0.011, "line_b_ohms": 0.009, "ground_b_ohms": 0.02}
        source = "adapter.a" if facts.wiring == "split" else "adapter"
        wide = facts.wiring in ("join", "isolated", "both") or (facts.wiring == "pass" and CONNECTORS[plugs[0]].lines > 1)
        rows += [made, *boat(source, HEATER, CHARGER, *([load("fan", across="L2-N", watts=400)] if wide else []))]
        if facts.wiring == "split":
            rows += [
                {"id": "cord2", "kind": "cord", "from": "adapter.b"},
                {"id": "inlet2", "kind": "inlet", "from": "cord2"},
                {"id": "main2", "kind": "main", "from": "inlet2"},
                {"id": "panel2", "kind": "panel", "from": "main2"},
                load("fan", watts=400) | {"from": "panel2"},
            ]
        found[f"adapter-{style}"] = rows, [LEAK, {"cause": "wet_cord", "at": "cord", "ohms": 5000}]
    for wired in WIRED:
        rows = [
            *dock("split_120_240", "30a_125v"),
            {"id": "adapter", "kind": "adapter", "style": "homemade", "from": ["outlet1"], "wired": wired},
        ]
        found[f"wired-{wired}"] = [*rows, *boat("adapter", HEATER, CHARGER)], [LEAK]
    return found


def _aboard() -> dict[str, Drawn]:
    usual = dock("split_120_240", "30a_125v")
    wide = dock("split_120_240", "50a_125_250v")
    iso = {"id": "block", "kind": "isolator", "from": "inlet"}
    winding = {"id": "winding", "kind": "transformer", "from": "inlet"}
    genset = {"id": "genset", "kind": "generator", "lines": 1}
    switch = {"id": "switch", "kind": "transfer", "from": ["main", "genset"]}
    unit = {"id": "unit", "kind": "inverter", "from": "panel"}
    mains = [
        {"id": "galley", "kind": "breaker", "from": "panel", "device": "class_a", "poles": 2},
        load("kettle", watts=900) | {"from": "galley"},
    ]
    found: dict[str, Drawn] = {
        "isolator-light": ([*usual, iso, *boat("outlet1", load("heater", watts=60, element=True), main="block")], [BOND]),
        "isolator-heavy": ([*usual, iso, *boat("outlet1", HEATER, load("stove", watts=1800), main="block")], [BOND]),
        "isolator-capacitor": ([*usual, iso | {"style": "capacitor"}, *boat("outlet1", HEATER, main="block")], [BOND]),
        "isolator-conducts": ([*usual, iso | {"state": "conducts"}, *boat("outlet1", HEATER, main="block")], [BOND, LEAK]),
        "isolator-blocks": ([*usual, iso | {"state": "blocks"}, *boat("outlet1", HEATER, main="block")], [LEAK]),
        "breaker-device": ([*wide, *boat("outlet1", HEATER, ACROSS_LINES, *mains)], [{**LEAK, "at": "kettle", "position": 0.1}]),
        "two-pole-switch": (
            [*wide, *boat("outlet1", HEATER | {"switch_poles": 2}, ACROSS_LINES | {"on": False})],
            [{**LEAK, "at": "stove"}],
        ),
        "load-ashore": ([*usual, load("lamp", watts=80, filter_nf=9) | {"from": "post"}, *boat("outlet1", HEATER)], [LEAK]),
        "metal-hull-in-salt-water": ([*usual, *boat("outlet1", HEATER)], [{"cause": "line_ground_exchanged", "at": "cord"}]),
        "grp-on-stands": (
            [*usual, *boat("outlet1", HEATER)],
            [{"cause": "open_ground_with_leak", "at": "cord", "load": "heater", "ohms": 900}],
        ),
        "generator-running": (
            [*usual, genset | {"running": True}, switch | {"position": 2}, *boat("outlet1", HEATER, panel="switch")],
            [LEAK],
        ),
        "generator-two-lines": (
            [
                *wide,
                genset | {"running": True, "lines": 2, "bonded": False},
                switch | {"position": 2},
                *boat("outlet1", HEATER, ACROSS_LINES, panel="switch"),
            ],
            [LEAK],
        ),
        "generator-still-neutral-left": (
            [*usual, genset | {"style": "portable"}, switch | {"switched_neutral": False}, *boat("outlet1", HEATER, panel="switch")],
            [],
        ),
        "generator-still-neutral-switched": ([*usual, genset, switch, *boat("outlet1", HEATER, panel="switch")], [LEAK]),
    }
    found["metal-hull-in-salt-water"][0][-1] |= {"material": "metal", "water": "salt"}
    found["grp-on-stands"][0][-1] |= {"afloat": False, "radius_m": 0.1, "water": "brackish"}
    for state in ("passing", "inverting", "welded", "off"):
        for common in (True, False):
            aboard = (HEATER, unit | {"state": state, "common_neutral": common}, load("oven", watts=700) | {"from": "unit"})
            found[f"inverter-{state}-{'common' if common else 'apart'}"] = [*usual, *boat("outlet1", *aboard)], [LEAK]
    for style in ("isolation", "polarization"):
        for secondary in ("same", "split"):
            rows = [*usual, winding | {"style": style, "secondary": secondary, "shield": style == "isolation"}]
            rows += boat("outlet1", HEATER, *([ACROSS_LINES] if secondary == "split" else []), main="winding")
            found[f"transformer-{style}-{secondary}"] = rows, [LEAK, {"cause": "transformer_primary_leak", "at": "winding", "ohms": 4000}]
    rows = [*wide, winding | {"rated_a": 50, "bonded": False}, *boat("outlet1", HEATER, ACROSS_LINES, main="winding")]
    found["transformer-two-lines-unbonded"] = rows, [BOND]
    return found


DRAWN: dict[str, Drawn] = _supplies() | _connectors() | _adapters() | _aboard()


def marina(system: str, boats: int, *, connector: str = "", per_post: int = 4) -> list[Row]:
    """A whole dock: a feeder, posts along it, and a boat with four loads in every outlet, the outlets going round the lines.

    Boat number n has outlet_n, cord_n, inlet_n, main_n, panel_n, hull_n and the loads heater_n, stove_n (off), charger_n and lamp_n.
    """
    usual = connector or USUAL[SYSTEMS[system].region]
    rows: list[Row] = [{"id": "dock", "kind": "supply", "system": system}, {"id": "feeder", "kind": "feeder", "from": "dock"}]
    for number in range(1, boats + 1):
        post = f"post_{(number - 1) // per_post + 1}"
        if number % per_post == 1 or per_post == 1:
            rows.append({"id": post, "kind": "pedestal", "from": "feeder", "line_ohms": 0.002})
        rows += [
            {"id": f"outlet_{number}", "kind": "receptacle", "from": post, "connector": usual, "leg": leg(system, number)},
            {"id": f"cord_{number}", "kind": "cord", "from": f"outlet_{number}"},
            {"id": f"inlet_{number}", "kind": "inlet", "from": f"cord_{number}"},
            {"id": f"main_{number}", "kind": "main", "from": f"inlet_{number}"},
            {"id": f"panel_{number}", "kind": "panel", "from": f"main_{number}"},
            {"id": f"breaker_{number}", "kind": "breaker", "from": f"panel_{number}"},
            load(f"heater_{number}", watts=1000, element=True) | {"from": f"breaker_{number}"},
            {"id": f"galley_{number}", "kind": "breaker", "from": f"panel_{number}"},
            load(f"stove_{number}", watts=1200, element=True, on=False) | {"from": f"galley_{number}"},
            {"id": f"cabin_{number}", "kind": "breaker", "from": f"panel_{number}"},
            load(f"charger_{number}", watts=200, filter_nf=22) | {"from": f"panel_{number}"},
            load(f"lamp_{number}", watts=60) | {"from": f"cabin_{number}"},
            {"id": f"hull_{number}", "kind": "hull", "from": f"panel_{number}"},
        ]
    return rows
