"""A stated installation with its stated faults -> what every sensor sees, hull volts, live blades, crossings, which opens first."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from strayline import contexts, devices, solve
from strayline.boat import own_parts
from strayline.causes import applied
from strayline.components import LINES
from strayline.errors import CaseError
from strayline.installation import build, zone_parts
from strayline.openings import band_scale, by_itself, rating_scale, start_multiple
from strayline.parts import Installation, Part, base, breaker_curve, breaker_rating_a, read, waveform
from strayline.phasor import angle_deg, shown_angle
from strayline.settle import settled

if TYPE_CHECKING:
    from collections.abc import Collection, Sequence

    from strayline.casefile import Case
    from strayline.causes import Fault
    from strayline.network import Branch, Network

LIKELY = 0.01  # a device below this is left out of the race
LONG_MINUTES = 60.0  # the hour of the conventional currents, IEC 60898-1
THERMAL_S, AT_START_S = (5.0, 3600.0), (0.005, 0.05)  # when a breaker opens: warmed through, or by its magnetic release (common practice)
CROSSING_KINDS = {
    "neutral": "other cord's neutral",
    "line": "other cord's line",
    "protective": "protective conductor",
    "bond": "bond",
    "source": "source",
}


def stated_network(case: Case) -> tuple[Installation, Network]:
    """The checked installation of a case, and its network with the stated faults in it, its galvanic isolators settled."""
    if case.installation is None:
        raise CaseError("installation", "missing; say what is plugged into what")
    installation = read(case.installation)
    return installation, settled(applied(installation, build(installation), case.faults))


def residuals(case: Case) -> dict[str, Any]:
    """The reply of `core residuals`: plain JSON values, nothing rounded, every key present.

    Angles are in degrees, None below one microampere; volts are against the water far from any boat. `breakers` holds every
    thermal-magnetic breaker of a known rating, with the line current it carries and the worst single start of a load behind it.
    """
    installation, network = stated_network(case)
    solution = solve.solve(network)
    sensors: list[dict[str, Any]] = []
    race: dict[tuple[str, str], tuple[float, tuple[float, float]]] = {}
    for sensor in network.sensors:
        part, device = installation.part(sensor.id), devices.DEVICES[sensor.device]
        residual = solution.residual(sensor.id)
        band = _band(part, device, installation, case.faults)
        sensors.append({
            "id": sensor.id, "residual_ma": abs(residual) * 1e3, "angle_deg": shown_angle(residual), "rating_ma": device.rated_ma or None,
            "verdict": devices.verdict(device, abs(residual), *band),
        })  # fmt: skip
        chance = devices.trip_probability(device, abs(residual), non_operating_ma=band[0], operating_ma=band[1])
        calm = math.prod(1.0 - by_itself(fault, part.id, contexts.AS_FOUND) for fault in case.faults)
        chance = 1.0 - (1.0 - chance) * calm
        if chance > LIKELY and device.rated_ma:
            race[sensor.id, "residual"] = (chance, devices.opening_times_s(device, abs(residual), part.number("delay_s")))
    breakers = _breakers(installation, solution, case.faults)
    for row in breakers:
        for why, times in (("overcurrent", THERMAL_S), ("start", AT_START_S)):
            chance = row.pop(why)
            if chance > LIKELY:
                race[row["id"], why] = (chance, times)
    first: dict[str, float] = {}
    for (name, _), chance in devices.first_to_open(race).items():
        first[name] = first.get(name, 0.0) + chance
    volts = [(name, solution.voltage(node)) for name, node in network.hulls]
    blades = [(blade.id, solution.voltage(blade.node)) for blade in network.blades]
    return {
        "sensors": sensors,
        "breakers": breakers,
        "hulls": [{"id": name, "volts": abs(value), "angle_deg": angle_deg(value)} for name, value in volts if value is not None],
        "live_blades": [{"id": name, "volts": abs(value)} for name, value in blades if value is not None],
        "opens_first": [{"id": name, "probability": chance} for name, chance in first.items()],
        "crossings": _crossings(installation, network, solution),
        "floating": list(solution.floating),
    }


def _band(part: Part, device: devices.Device, installation: Installation, faults: Sequence[Fault]) -> tuple[float | None, float | None]:
    """A device's operating band in mA, moved by the stated faults."""
    zone = zone_parts(installation, part)
    scale = math.prod(band_scale(fault, part.id, fault.at in zone, waveform(part)) for fault in faults)
    low, high = part.number("non_operating_ma"), part.number("operating_ma")
    if scale == 1.0 or not device.rated_ma:
        return low, high
    low, high = devices.operating_band_ma(device, low, high)
    return low * scale, high * scale


def _breakers(installation: Installation, solution: solve.Solution, faults: Sequence[Fault]) -> list[dict[str, Any]]:
    """One row for each thermal-magnetic breaker; "overcurrent" is the probability that it opens within an hour, "start" at once.

    A short circuit is a start too.
    """
    hertz = solution.network.hertz
    present = {branch.id for branch in solution.network.branches}
    found = []
    for part in installation.of_kind("receptacle", "main", "breaker"):
        rated = breaker_rating_a(part)
        if rated is None:
            continue
        carried = {line: abs(solution.current(name)) for line in LINES if (name := f"{part.id}.{line}") in present}
        line_a = max(carried.values(), default=0.0)
        below = [installation.part(one) for one in installation.downstream(part.id)] if carried else []
        more_a = 0.0  # what the worst single start draws beyond running
        for load in (one for one in below if one.kind == "load" and f"{one.id}.switch" in present):
            multiple = max([load.number("inrush") or 1.0, *(start_multiple(fault, load.id, 1.0) for fault in faults)])
            more_a = max(more_a, (multiple - 1.0) * abs(solution.current(f"{load.id}.switch")))
        inrush_a = line_a + more_a
        rated_a = rated * math.prod(rating_scale(fault, part.id) for fault in faults)
        curve = breaker_curve(part, hertz)
        found.append({
            "id": part.id, "line_a": line_a, "inrush_a": inrush_a, "rating_a": rated,
            "verdict": devices.overcurrent_verdict(rated_a, line_a, inrush_a, curve),
            "overcurrent": devices.overcurrent_probability(rated_a, line_a, LONG_MINUTES, curve),
            "start": devices.inrush_probability(rated_a, inrush_a, curve),
        })  # fmt: skip
    return found


def _crossings(installation: Installation, network: Network, solution: solve.Solution) -> list[dict[str, Any]]:
    """For each sensor the branches that leave its zone outside its window; by the current law they add up to its residual."""
    mine = {part.id for part in own_parts(installation)}
    found = []
    for sensor in network.sensors:
        for branch, current in solve.crossings(network, solution, sensor.id):
            kind = crossing_kind(branch, network, sensor.id in mine, mine)
            found.append(
                {"sensor": sensor.id, "branch": branch.id, "kind": kind, "ma": abs(current) * 1e3, "angle_deg": shown_angle(current)}
            )
    return found


def crossing_kind(branch: Branch, network: Network, own: bool, mine: Collection[str]) -> str:
    """By what kind of road a branch crosses a zone's boundary; `own` tells whether the sensor is the boat's, `mine` are her parts."""
    if network.reference in (branch.from_node, branch.to_node):
        return "water"
    owner = base(branch.owner)
    if own and owner not in mine and branch.kind in ("neutral", "line"):
        return "other boat"
    return CROSSING_KINDS.get(branch.kind, branch.kind)
