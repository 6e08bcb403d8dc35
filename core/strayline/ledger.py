"""Leakage by circuit: as phasors where the case tells it, as bounds where it does not, and what that leaves to each device.

`ledger(case)` gives plain JSON values, nothing rounded, every key present:

    {"circuits": [CIRCUIT], "sensors": [SENSOR]}

CIRCUIT, one per part of the boat and of what it is plugged into, from supply to load:

    part, kind, from   its id, its kind, the ends it hangs on
    volts              the most a live conductor of it stands above its ground, or null where it floats or has none
    known              {"ma", "angle_deg"}: what leaves its own live conductors to ground by stated filters, leaks and faults
    unknown_ma         [low, high]: what an unmeasured one in good order may leak besides, its phase unknown; [0, 0] where all is stated
    suspect_ma         [from, to] beyond which such an appliance is suspect (to: null where open above), or null
    source             where the two ranges are from, or ""
    total              {"known": {"ma", "angle_deg"}, "unknown_ma": [low, high], "ma": [low, high]} of it and all that hangs on it

SENSOR, each window on the boat's path (aboard, at the outlets, upstream feeders):

    id, device, rating_ma, non_operating_ma, operating_ma     null without a device
    known              {"ma", "angle_deg"}: its residual, as `residuals` gives it
    unknown_ma         [low, high]: the sum of the unknown of all circuits behind it, were they all in phase
    ma                 [low, high]: the residual's size with the unknown added at any phase
    verdict            {"known", "low", "high"}: what the device does with each
    headroom           {"non_operating_ma": [low, high], "operating_ma": [low, high]}: what is left to each, below zero beyond it; or null
    budget_ma          30 % of the rating, the share that standing leakage should keep to (BS 7671 531.3.2, from memory); or null
    shares             [{"part", "kind": "ground" | "astray", "ma", "angle_deg"}]: what its residual is made of, greatest first; they add
                       up to it. "ground" leaves live conductors to ground in that part, "astray" returns in it outside the window

Known currents add as phasors. A sum with unknown phases has bounds: at most the sum of all sizes, at least what the greatest of them
exceeds all the others by (triangle inequality).
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from strayline import devices, solve
from strayline.appliances import APPLIANCES, CORD, CORD_METRES, ELEMENT, UNSAID, Appliance, healthy_ma, suspect_ma
from strayline.boat import own_parts
from strayline.parts import base
from strayline.phasor import shown_angle
from strayline.residuals import stated_network
from strayline.wiring import EARTH

if TYPE_CHECKING:
    from collections.abc import Iterable

    from strayline.casefile import Case
    from strayline.network import Network, Sensor
    from strayline.parts import Installation, Part

BUDGET_SHARE = 0.3
GROUND_KINDS = ("protective", "water")
Bounds = tuple[float, float]


def ledger(case: Case) -> dict[str, Any]:
    """The reply of `core ledger`. Raises CaseError where the case has no installation."""
    installation, network = stated_network(case)
    solution = solve.solve(network)
    grounds = _grounds(network)
    own = tuple(part for part in _path(installation) if part.kind != "supply")  # its bond is where leakage ends, not where it begins
    leaks = _leaks(network, solution, grounds)
    nodes = _nodes(network)
    unknown = {part.id: _unknown(part, solution, nodes, leaks) for part in installation.parts}
    circuits = [_circuit(part, installation, solution, nodes, leaks, unknown) for part in own]
    ids = {part.id for part in own}
    sensors = [_sensor(sensor, installation, network, solution, grounds, unknown) for sensor in network.sensors if sensor.id in ids]
    return {"circuits": circuits, "sensors": sensors}


def _path(installation: Installation) -> tuple[Part, ...]:
    """The boat, what it is plugged into, and the dock above that."""
    found = {part.id for part in own_parts(installation)}
    waiting = list(found)
    while waiting:
        for parent in installation.part(waiting.pop()).parents:
            if parent and base(parent) not in found:
                found.add(base(parent))
                waiting.append(base(parent))
    return tuple(part for part in installation.parts if part.id in found)


# --- what is known -------------------------------------------------------------------------------------------------


def _grounds(network: Network) -> frozenset[str]:
    """The nodes that belong to ground: all that a protective conductor or water touches."""
    return frozenset({
        EARTH, *(node for branch in network.branches if branch.kind in GROUND_KINDS for node in (branch.from_node, branch.to_node))
    })  # fmt: skip


def _leaks(network: Network, solution: solve.Solution, grounds: frozenset[str]) -> dict[str, complex]:
    """What leaves live conductors to ground in each part, in amperes: owner -> phasor, counted towards ground."""
    found: dict[str, complex] = {}
    for branch in network.branches:
        if (branch.from_node in grounds) != (branch.to_node in grounds):
            current = solution.current(branch.id)
            owner = base(branch.owner)
            found[owner] = found.get(owner, 0j) + (current if branch.to_node in grounds else -current)
    return found


def _shares(sensor: Sensor, network: Network, solution: solve.Solution, grounds: frozenset[str]) -> list[dict[str, Any]]:
    """What a residual is made of: currents out of the zone's live nodes that do not go back through the window, by part.

    By the current law over those nodes they add up to the residual.
    """
    live = sensor.zone - grounds
    found: dict[tuple[str, str], complex] = {}
    for branch in network.branches:
        leaves, enters = branch.from_node in live, branch.to_node in live
        if branch.id in sensor.branches:
            if enters:
                continue
            leaves = True  # a live conductor that lands on ground behind the window leaks in its own part
        if leaves == enters:
            continue
        current = solution.current(branch.id) * (1 if leaves else -1)
        far = branch.to_node if leaves else branch.from_node
        key = base(branch.owner), "ground" if far in grounds else "astray"
        found[key] = found.get(key, 0j) + current
    rows = [
        {"part": part, "kind": kind, "ma": abs(current) * 1e3, "angle_deg": shown_angle(current)} for (part, kind), current in found.items()
    ]
    return sorted(rows, key=lambda row: (-row["ma"], row["part"], row["kind"]))


# --- what is not known ---------------------------------------------------------------------------------------------


def _nodes(network: Network) -> dict[str, set[str]]:
    """The nodes of each part: part id -> names."""
    found: dict[str, set[str]] = {}
    for branch in network.branches:
        for node in (branch.from_node, branch.to_node):
            found.setdefault(base(node), set()).add(node)
    return found


def _volts(part: Part, solution: solve.Solution, nodes: dict[str, set[str]]) -> float | None:
    """The most a live conductor of a part stands above its own ground; for a load, its terminals."""
    names = nodes.get(part.id, set())
    ground = next((node for node in (f"{part.id}.frame", f"{part.id}.G", f"{part.id}.a.G") if node in names), None)
    if ground is None:
        return None
    there = [solution.voltage(node) for node in names if node.rpartition(".")[2] not in ("G", "frame", "metal")]
    reference = solution.voltage(ground)
    volts = [abs(value - reference) for value in there if value is not None and reference is not None]
    return max(volts, default=None)


def _appliance(part: Part) -> Appliance | None:
    """The table's row for a part; None where a part of its kind has none."""
    if part.kind == "cord":
        return CORD
    if part.kind != "load":
        return None
    if part.values.get("appliance") is not None:
        return APPLIANCES[part.text("appliance")]
    return ELEMENT if part.flag("element") else UNSAID


def _unknown(part: Part, solution: solve.Solution, nodes: dict[str, set[str]], leaks: dict[str, complex]) -> Bounds:
    """What a part may leak besides what is stated, in mA: nothing where a filter or a leak of it is stated, or where it has no power."""
    appliance = _appliance(part)
    if appliance is None or abs(leaks.get(part.id, 0j)) > 0:
        return 0.0, 0.0
    volts = _volts(part, solution, nodes) or 0.0
    low, high = healthy_ma(appliance, volts)
    metres = (part.number("length_m") or CORD_METRES) / CORD_METRES if part.kind == "cord" else 1.0
    return low * metres, high * metres


# --- sums ----------------------------------------------------------------------------------------------------------


def interval(known: float, unknown: Iterable[Bounds]) -> Bounds:
    """Least and greatest size of a sum: one phasor of size `known` and others whose size has bounds and whose phase is anything.

    At most the sum of all sizes; at least what the greatest of them must exceed all the others by, never below zero.
    """
    sizes = [(known, known), *unknown]
    most = math.fsum(high for _, high in sizes)
    return max(0.0, *(low - (most - high) for low, high in sizes)), most


def _phasor(current: complex) -> dict[str, Any]:
    return {"ma": abs(current) * 1e3, "angle_deg": shown_angle(current)}


def _circuit(
    part: Part,
    installation: Installation,
    solution: solve.Solution,
    nodes: dict[str, set[str]],
    leaks: dict[str, complex],
    unknown: dict[str, Bounds],
) -> dict[str, Any]:
    appliance = _appliance(part)
    volts = _volts(part, solution, nodes)
    suspect = suspect_ma(appliance, volts or 0.0) if appliance else None
    below = installation.downstream(part.id)
    total = sum((current for owner, current in leaks.items() if owner in below), 0j)
    bounds = [unknown[one] for one in sorted(below) if one in unknown]
    return {
        "part": part.id,
        "kind": part.kind,
        "from": list(part.parents),
        "volts": volts,
        "known": _phasor(leaks.get(part.id, 0j)),
        "unknown_ma": list(unknown[part.id]),
        "suspect_ma": list(suspect) if suspect else None,
        "source": appliance.source if appliance else "",
        "total": {
            "known": _phasor(total),
            "unknown_ma": [math.fsum(low for low, _ in bounds), math.fsum(high for _, high in bounds)],
            "ma": list(interval(abs(total) * 1e3, bounds)),
        },
    }


def _sensor(
    sensor: Sensor,
    installation: Installation,
    network: Network,
    solution: solve.Solution,
    grounds: frozenset[str],
    unknown: dict[str, Bounds],
) -> dict[str, Any]:
    part, device = installation.part(sensor.id), devices.DEVICES[sensor.device]
    stated = part.number("non_operating_ma"), part.number("operating_ma")
    band = devices.operating_band_ma(device, *stated) if device.rated_ma else None
    residual = solution.residual(sensor.id)
    zone = {base(node) for node in sensor.zone}
    bounds = [one for part_id, one in unknown.items() if part_id in zone]
    low, high = interval(abs(residual) * 1e3, bounds)
    verdicts = {"known": abs(residual), "low": low / 1e3, "high": high / 1e3}
    return {
        "id": sensor.id,
        "device": sensor.device,
        "rating_ma": device.rated_ma or None,
        "non_operating_ma": band[0] if band else None,
        "operating_ma": band[1] if band else None,
        "known": _phasor(residual),
        "unknown_ma": [math.fsum(one for one, _ in bounds), math.fsum(one for _, one in bounds)],
        "ma": [low, high],
        "verdict": {name: devices.verdict(device, amperes, *stated) for name, amperes in verdicts.items()},
        "headroom": {name: [value - high, value - low] for name, value in zip(("non_operating_ma", "operating_ma"), band, strict=True)}
        if band
        else None,
        "budget_ma": BUDGET_SHARE * device.rated_ma if device.rated_ma else None,
        "shares": _shares(sensor, network, solution, grounds),
    }
