"""Whole installations with their faults against ngspice (open source, BSD): the text of `core netlist` is run unchanged.

Every residual must agree, with its sign, to a nanoampere or a millionth, whichever is larger.
"""

from __future__ import annotations

import dataclasses
import json
from pathlib import Path
from typing import TYPE_CHECKING, Any

import pytest

from drawn import DRAWN
from strayline import arrangements, casefile
from strayline.arrangements import Arrangement
from strayline.catalogue.causes import CAUSE
from strayline.causes import Fault
from strayline.cli import main
from strayline.components import ACROSS, ADAPTERS, CONNECTORS, EARTHINGS, KINDS, SYSTEMS, WIRED
from strayline.parts import read
from strayline.residuals import stated_network
from strayline.severities import severities
from strayline.solve import solve

if TYPE_CHECKING:
    from collections.abc import Callable

SCENARIOS = sorted((Path(__file__).parents[2] / "scenarios").glob("*.toml"))
Row = dict[str, Any]


def dock(system: str, connector: str, *boat: Row, leg: str = "L1", **outlet: object) -> list[Row]:
    """A dock with a feeder, one outlet, a cord, an inlet and a main, then what is given."""
    return [
        {"id": "dock", "kind": "supply", "system": system},
        {"id": "feeder", "kind": "feeder", "from": "dock"},
        {"id": "post", "kind": "pedestal", "from": "feeder"},
        {"id": "outlet", "kind": "receptacle", "from": "post", "connector": connector, "leg": leg, **outlet},
        {"id": "cord", "kind": "cord", "from": "outlet", "area_mm2": 4},
        {"id": "inlet", "kind": "inlet", "from": "cord"},
        {"id": "main", "kind": "main", "from": "inlet"},
        {"id": "panel", "kind": "panel", "from": "main"},
        *boat,
        {"id": "hull", "kind": "hull", "from": "panel"},
    ]


def load(name: str, **given: object) -> Row:
    """A load on the panel."""
    return {"id": name, "kind": "load", "from": "panel", **given}


HEATER = load("heater", watts=1500, element=True)
CHARGER = load("charger", watts=250, power_factor=0.7, filter_nf=22)

# The parts and faults that no scenario holds.
MORE: dict[str, tuple[list[Row], list[Row]]] = {
    "wet_inlet_wye": (
        dock("wye_120_208", "50a_125_250v", HEATER, load("cooler", across="L1-L2", watts=2000, power_factor=0.8, filter_nf=10)),
        [{"cause": "wet_inlet", "at": "inlet", "ohms": 1800}],
    ),
    "wet_pedestal": (dock("single_230", "32a_230v", HEATER, CHARGER), [{"cause": "wet_pedestal", "at": "outlet", "ohms": 3000}]),
    "summed_filters": (dock("split_120_240", "50a_125_250v", HEATER, CHARGER), [{"cause": "summed_filters", "nanofarads": 700}]),
    "frame_strap": (
        dock("wye_120_208", "50a_125_250v", HEATER, load("stove", across="L2-N", ohms=9)),
        [{"cause": "frame_strap", "at": "stove", "ohms": 0.03}],
    ),
    "inverter_bond": (
        dock("split_120_240", "30a_125v", HEATER, CHARGER, leg="L2"),
        [{"cause": "inverter_bond", "at": "panel", "ohms": 0.05}],
    ),
    "neutral_ahead": (
        dock("single_230", "16a_230v", HEATER, CHARGER),
        [{"cause": "neutral_ahead_of_device", "at": "main", "load": "heater"}],
    ),
    "shared_neutral_branch": (
        dock(
            "single_230",
            "32a_230v",
            {"id": "galley", "kind": "breaker", "from": "panel", "device": "rcd_30"},
            load("kettle", watts=900) | {"from": "galley"},
            HEATER,
        ),
        [{"cause": "shared_neutral_branch", "at": "galley", "load": "heater"}],
    ),
    "touchy_device": (dock("split_120_240", "20a_125v", CHARGER), [{"cause": "touchy_device", "at": "outlet", "scale": 0.1}]),
    "straight_50_30": (
        [
            row | ({"from": "adapter"} if row["id"] == "cord" else {})
            for row in dock("wye_120_208", "50a_125_250v", load("kettle", amperes=11), CHARGER)
        ]
        + [{"id": "adapter", "kind": "adapter", "style": "straight_50_30", "from": "outlet", "neutral_ohms": 0.009}],
        [{"cause": "panel_bond", "at": "panel", "ohms": 0.004}, {"cause": "appliance_leak", "at": "kettle", "ohms": 900, "position": 0.3}],
    ),
    "breakers_open_and_a_loose_tail": (
        [
            {"id": "dock", "kind": "supply", "system": "split_120_240", "volts": 118},
            {"id": "post", "kind": "pedestal", "from": "dock"},
            {"id": "outlet", "kind": "receptacle", "from": "post", "connector": "30a_125v"},
            {"id": "y", "kind": "adapter", "style": "combining_y", "from": ["outlet", ""]},
            {"id": "inlet", "kind": "inlet", "from": "y"},
            {"id": "main", "kind": "main", "from": "inlet", "device": "none"},
            {"id": "panel", "kind": "panel", "from": "main"},
            {"id": "two", "kind": "breaker", "from": "panel", "poles": 2},
            {"id": "cooler", "kind": "load", "from": "two", "across": "L1-L2", "watts": 2400, "filter_nf": 33},
            {"id": "one", "kind": "breaker", "from": "panel", "closed": False},
            {"id": "heater", "kind": "load", "from": "one", "across": "L1-L2", "watts": 1500, "element": True},
            {"id": "hull", "kind": "hull", "from": "panel", "afloat": False},
        ],
        [{"cause": "appliance_leak", "at": "heater", "ohms": 5000, "position": 0.5}],
    ),
    "an_open_outlet_and_a_boat_switched_off": (
        [
            *dock("split_120_240", "50a_125_250v", HEATER, closed=False),
            {"id": "outlet_2", "kind": "receptacle", "from": "post", "connector": "30a_125v", "leg": "L2"},
            {"id": "cord_2", "kind": "cord", "from": "outlet_2"},
            {"id": "inlet_2", "kind": "inlet", "from": "cord_2"},
            {"id": "main_2", "kind": "main", "from": "inlet_2", "closed": False, "poles": 1},
            {"id": "panel_2", "kind": "panel", "from": "main_2"},
            {"id": "lamp_2", "kind": "load", "from": "panel_2", "watts": 60, "on": False},
            {"id": "hull_2", "kind": "hull", "from": "panel_2"},
        ],
        [{"cause": "panel_bond", "at": "panel_2", "ohms": 0.02}, {"cause": "wet_pedestal", "at": "post", "ohms": 6000}],
    ),
}


WHERE = (
    ("split_120_240", "one_cord_four_wire"),
    ("split_120_240", "two_cords"),
    ("single_230", "one_cord"),
    ("wye_120_208", "combining_y"),
)


def of_each_cause() -> dict[str, tuple[list[Row], list[Row]]]:
    """The first and the last severity of every cause on the first of four typical boats that can have it."""
    found = {}
    for cause in CAUSE:
        for system, plug in WHERE:
            raw = arrangements.parts(Arrangement(system, plug, 1.0), {}, neighbour=True, afloat=True)
            grid = [severity.fault for severity in severities(cause, read(raw))]
            for name, fault in zip(("slight", "severe"), grid[:: max(len(grid) - 1, 1)], strict=False):
                given = {key: value for key, value in dataclasses.asdict(fault).items() if value != getattr(Fault(cause), key)}
                found[f"{cause}-{name}"] = raw["parts"], [{"cause": cause, **given}]
            if grid:
                break
    return found


ALL: dict[str, tuple[list[Row], list[Row]]] = MORE | DRAWN | of_each_cause()
WORST: dict[str, float] = {}


@pytest.fixture(params=[*SCENARIOS, *ALL], ids=lambda given: getattr(given, "stem", given))
def case_file(request: pytest.FixtureRequest, tmp_path: Path) -> Path:
    """The case files, one after the other."""
    if isinstance(request.param, Path):
        return request.param
    parts, faults = ALL[request.param]
    file = tmp_path / "case.json"
    file.write_text(json.dumps({"schema": 1, "installation": {"parts": parts}, "faults": faults}), encoding="utf-8")
    return file


def test_residuals_agree(case_file: Path, spice_residuals: Callable[[str], dict[str, complex]], capsys: pytest.CaptureFixture[str]) -> None:
    """Every sensor's residual is what ngspice makes of the printed netlist, sign and all."""
    assert main(["netlist", str(case_file)]) == 0
    reference = spice_residuals(capsys.readouterr().out)
    _, network = stated_network(casefile.load(case_file))
    solution = solve(network)
    assert set(reference) == {sensor.id for sensor in network.sensors}
    for name, expected in reference.items():
        away = abs(solution.residual(name) - expected)
        assert away <= max(1e-9, 1e-6 * abs(expected)), name
        WORST[name] = max(WORST.get(name, 0.0), away)


def test_how_near_it_comes() -> None:
    """The worst difference over all these networks is printed, and is far inside what is asked."""
    print(f"worst difference from ngspice: {max(WORST.values(), default=0.0):.2g} A")
    assert max(WORST.values(), default=0.0) <= 1e-6


def test_something_to_see() -> None:
    """Every fault that makes a current stray makes one of at least ten milliamperes in some sensor of the networks drawn for it."""
    quiet = {"touchy_device", "overload", "nothing_now"}
    for name, (parts, faults) in MORE.items():
        raw = {"schema": 1, "installation": {"parts": parts}, "faults": faults}
        solution = solve(stated_network(casefile.read_case(raw))[1])
        strongest = max(abs(solution.residual(sensor.id)) for sensor in solution.network.sensors)
        assert strongest > 0.010 or {fault["cause"] for fault in faults} <= quiet, name


def test_between_them_they_hold_everything() -> None:
    """The networks, sixty and more, hold every row of the tables: supplies, earthings, connectors, adapters, parts and choices, causes."""
    raw = [casefile.load(file) for file in SCENARIOS]
    raw += [casefile.read_case({"schema": 1, "installation": {"parts": parts}, "faults": faults}) for parts, faults in ALL.values()]
    parts = [part for case in raw for part in read(case.installation).parts]

    def held(kind: str, name: str) -> set[object]:
        return {part.values[name] for part in parts if part.kind == kind}

    assert len(raw) >= 60
    assert {part.kind for part in parts} == set(KINDS)
    assert held("supply", "system") == set(SYSTEMS)
    assert held("supply", "earthing") == {None, *EARTHINGS}
    assert held("receptacle", "connector") == set(CONNECTORS)
    assert held("adapter", "style") == set(ADAPTERS)
    assert held("adapter", "wired") == set(WIRED)
    assert held("load", "across") == set(ACROSS)
    assert held("main", "poles") == held("breaker", "poles") == held("load", "switch_poles") == {1, 2}
    for kind, name in (
        ("isolator", "style"),
        ("isolator", "state"),
        ("transformer", "style"),
        ("transformer", "secondary"),
        ("inverter", "state"),
    ):
        assert held(kind, name) == set(next(one.choices for one in KINDS[kind] if one.name == name))
    flags = (
        "receptacle closed", "receptacle reversed", "main closed", "breaker closed", "load on", "load element", "hull afloat",
        "transformer shield", "transformer bonded", "generator running", "generator bonded", "transfer switched_neutral",
        "inverter common_neutral",
    )  # fmt: skip
    for flag in flags:
        assert held(*flag.split()) == {True, False}, flag
    assert {fault.cause for case in raw for fault in case.faults} == set(CAUSE)
