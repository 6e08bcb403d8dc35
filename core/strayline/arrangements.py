"""Stated facts -> the part list they mean: the common ways to plug in, with a typical boat behind them.

What nobody said is filled with what is usual for the supply; `components` reports each default. A fact left unknown becomes
several part lists, each with its share.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from strayline.boat import own_parts
from strayline.components import CONNECTORS

if TYPE_CHECKING:
    from collections.abc import Mapping

    from strayline.parts import Installation

UNKNOWN = "unknown"
RawPart = dict[str, object]

# How boats are plugged in where nobody says: shares by region (common practice; to be replaced by field data).
PLUG_SHARES: dict[str, dict[str, float]] = {
    "60": {"one_cord": 0.60, "one_cord_four_wire": 0.22, "two_cords": 0.10, "combining_y": 0.08},
    "50": {"one_cord": 0.95, "two_cords": 0.05},
}
SUPPLY_SHARES = {"split_120_240": 0.45, "wye_120_208": 0.10, "single_230": 0.45}
TWO_WIRE_PLUGS = ("one_cord", "two_cords", "homemade")  # the ways that exist on 230 V


@dataclass(frozen=True, slots=True)
class Arrangement:
    """One way the boat may be plugged in: the stated or assumed supply and plug, and its share (they sum to one)."""

    supply: str
    plug: str
    share: float


def possible(facts: Mapping[str, str]) -> tuple[Arrangement, ...]:
    """Every supply and plug the stated facts allow, with their shares."""
    supply, plug = facts.get("supply", UNKNOWN), facts.get("plug", UNKNOWN)
    found = []
    for system, share in SUPPLY_SHARES.items() if supply == UNKNOWN else ((supply, 1.0),):
        region = "50" if system == "single_230" else "60"
        for way, part in PLUG_SHARES[region].items() if plug == UNKNOWN else ((plug, 1.0),):
            if region == "60" or way in TWO_WIRE_PLUGS:
                found.append(Arrangement(system, way, share * part))
    total = sum(arrangement.share for arrangement in found)
    return tuple(Arrangement(one.supply, one.plug, one.share / total) for one in found)


def stated(installation: Installation) -> dict[str, str]:
    """The facts that a case file's own parts state, as answers to the questions about the set-up."""
    mine = own_parts(installation)
    outlets = [part for part in mine if part.kind == "receptacle" and installation.children(part.id)]
    adapters = [part for part in mine if part.kind == "adapter"]
    mains = [part for part in mine if part.kind == "main"]
    if adapters:
        style = adapters[0].text("style")
        plug = style if style in ("combining_y", "splitting_y", "homemade") else "straight_adapter"
    elif sum(part.kind == "inlet" for part in mine) > 1:
        plug = "two_cords"
    else:
        plug = "one_cord_four_wire" if any(CONNECTORS[part.text("connector")].lines > 1 for part in outlets) else "one_cord"
    return {
        "supply": installation.of_kind("supply")[0].text("system"),
        "plug": plug,
        "pedestal_device": _device_answer([part.text("device") for part in outlets]),
        "aboard_device": _device_answer([part.text("device") for part in mains]),
    }


def _device_answer(devices: list[str]) -> str:
    """What a person would answer about these devices; the least of them decides."""
    return "none" if "none" in devices or not devices else "class_a" if "class_a" in devices else "device_30"


def parts(arrangement: Arrangement, facts: Mapping[str, str], *, neighbour: bool, afloat: bool) -> dict[str, object]:
    """The raw `installation` section of one arrangement: dock, cords, a typical boat, and a neighbour on the same pedestal."""
    single = arrangement.supply == "single_230"
    pedestal_device = {"class_a": "class_a", "none": "none"}.get(facts.get("pedestal_device", UNKNOWN), "rcd_30" if single else "gfpe_30")
    aboard_device = "none" if facts.get("aboard_device") == "none" else "rcd_30" if single else "elci_30"
    one_line, two_lines = ("16a_230v", "16a_230v") if single else ("30a_125v", "50a_125_250v")
    dock: list[RawPart] = [
        {"id": "dock", "kind": "supply", "system": arrangement.supply},
        {"id": "feeder", "kind": "feeder", "from": "dock", "device": "rcd_100_s" if single else "gfpe_100"},
        {"id": "post", "kind": "pedestal", "from": "feeder"},
        {"id": "post2", "kind": "pedestal", "from": "feeder"},
    ]

    def receptacle(name: str, connector: str, leg: str = "L1", pedestal: str = "post") -> RawPart:
        return {"id": name, "kind": "receptacle", "from": pedestal, "connector": connector, "leg": leg, "device": pedestal_device}

    other_leg = "L1" if single else "L2"

    def adapted(style: str, *outlets: str, tails: tuple[str, ...] = ("adapter",)) -> list[RawPart]:
        return [{"id": "adapter", "kind": "adapter", "style": style, "from": list(outlets)}, *_cords(*tails)]

    wide = arrangement.plug in ("one_cord_four_wire", "combining_y", "straight_adapter")
    split = arrangement.plug == "splitting_y"
    paired = arrangement.plug in ("two_cords", "combining_y")
    outlets = [receptacle("outlet", two_lines if split or arrangement.plug == "one_cord_four_wire" else one_line)]
    if paired:
        outlets.append(receptacle("outlet2", one_line, other_leg))
    cords: dict[str, list[RawPart]] = {
        "one_cord": _cords("outlet"),
        "one_cord_four_wire": _cords("outlet"),
        "two_cords": _cords("outlet", "outlet2"),
        "combining_y": adapted("combining_y", "outlet", "outlet2"),
        "splitting_y": adapted("splitting_y", "outlet", tails=("adapter.a", "adapter.b")),
        "straight_adapter": adapted("straight_30_50", "outlet"),
        "homemade": adapted("homemade", "outlet"),
    }
    plug = [*outlets, *cords[arrangement.plug]]
    inlets = sum(part["kind"] == "inlet" for part in plug)
    boat = _two_panels(single, aboard_device) if inlets == 2 else _one_panel(single, wide, aboard_device)
    panels = ["panel", "panel2"][:inlets]
    hull: RawPart = {"id": "hull", "kind": "hull", "from": panels, "afloat": afloat}
    spare = receptacle("spare", two_lines if wide or split else one_line, pedestal="post2")
    next_door = _neighbour(one_line, neighbour)
    return {"parts": [*dock, *plug, spare, *boat, hull, *next_door]}


def _cords(*sources: str) -> list[RawPart]:
    """One cord and inlet for every place to plug in."""
    made: list[RawPart] = []
    for source, suffix in zip(sources, ("", "2"), strict=False):
        made.append({"id": f"cord{suffix}", "kind": "cord", "from": source})
        made.append({"id": f"inlet{suffix}", "kind": "inlet", "from": f"cord{suffix}"})
    return made


def _branch(name: str, panel: str, single: bool, **load: object) -> list[RawPart]:
    return [
        {"id": f"{name}_breaker", "kind": "breaker", "from": panel, "poles": 2 if single or load.get("across") == "L1-L2" else 1},
        {"id": name, "kind": "load", "from": f"{name}_breaker", **load},
    ]


def _one_panel(single: bool, wide: bool, device: str) -> list[RawPart]:
    return [
        {"id": "main", "kind": "main", "from": "inlet", "device": device},
        {"id": "panel", "kind": "panel", "from": "main"},
        *_branch("heater", "panel", single, watts=1500, element=True, filter_nf=1),
        *_branch("cooling", "panel", single, across="L1-L2" if wide else "L1-N", watts=1200, power_factor=0.85, filter_nf=10),
        *_branch("charger", "panel", single, across="L2-N" if wide else "L1-N", watts=300, filter_nf=22),
        *_branch("lamps", "panel", single, watts=100),
    ]


def _two_panels(single: bool, device: str) -> list[RawPart]:
    return [
        {"id": "main", "kind": "main", "from": "inlet", "device": device},
        {"id": "main2", "kind": "main", "from": "inlet2", "device": device},
        {"id": "panel", "kind": "panel", "from": "main"},
        {"id": "panel2", "kind": "panel", "from": "main2"},
        *_branch("heater", "panel", single, watts=1500, element=True, filter_nf=1),
        *_branch("charger", "panel", single, watts=300, filter_nf=22),
        *_branch("lamps", "panel", single, watts=100),
        *_branch("cooling", "panel2", single, watts=1200, power_factor=0.85, filter_nf=10),
    ]


def _neighbour(connector: str, running: bool) -> list[RawPart]:
    return [
        {"id": "outlet9", "kind": "receptacle", "from": "post", "connector": connector},
        {"id": "cord9", "kind": "cord", "from": "outlet9"},
        {"id": "inlet9", "kind": "inlet", "from": "cord9"},
        {"id": "main9", "kind": "main", "from": "inlet9"},
        {"id": "panel9", "kind": "panel", "from": "main9"},
        {"id": "stove9", "kind": "load", "from": "panel9", "watts": 1500, "on": running},
        {"id": "hull9", "kind": "hull", "from": "panel9"},
    ]
