"""A stated installation with its stated faults -> what every sensor sees, hull volts, live blades, crossings, which opens first."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from strayline import devices, solve
from strayline.boat import own_parts
from strayline.causes import applied
from strayline.errors import CaseError
from strayline.installation import build
from strayline.parts import Installation, base, read
from strayline.phasor import angle_deg, shown_angle
from strayline.settle import settled

if TYPE_CHECKING:
    from collections.abc import Collection

    from strayline.casefile import Case
    from strayline.network import Branch, Network

LIKELY = 0.01  # a device below this is left out of the race
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

    Angles are in degrees, None below one microampere; volts are against the water far from any boat.
    """
    installation, network = stated_network(case)
    solution = solve.solve(network)
    sensors, race = [], {}
    for sensor in network.sensors:
        part, device = installation.part(sensor.id), devices.DEVICES[sensor.device]
        residual = solution.residual(sensor.id)
        band = (part.number("non_operating_ma"), part.number("operating_ma"))
        sensors.append({
            "id": sensor.id, "residual_ma": abs(residual) * 1e3, "angle_deg": shown_angle(residual), "rating_ma": device.rated_ma or None,
            "verdict": devices.verdict(device, abs(residual), *band),
        })  # fmt: skip
        chance = devices.trip_probability(device, abs(residual), non_operating_ma=band[0], operating_ma=band[1])
        if chance > LIKELY and device.rated_ma:
            race[sensor.id] = (chance, device.delayed)
    volts = [(name, solution.voltage(node)) for name, node in network.hulls]
    blades = [(blade.id, solution.voltage(blade.node)) for blade in network.blades]
    return {
        "sensors": sensors,
        "hulls": [{"id": name, "volts": abs(value), "angle_deg": angle_deg(value)} for name, value in volts if value is not None],
        "live_blades": [{"id": name, "volts": abs(value)} for name, value in blades if value is not None],
        "opens_first": [{"id": name, "probability": chance} for name, chance in devices.first_to_open(race).items()],
        "crossings": _crossings(installation, network, solution),
        "floating": list(solution.floating),
    }


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
