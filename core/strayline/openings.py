"""What the devices do with an outlook: the states they may be in, and the probability that each role's device opens."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from strayline import devices
from strayline.predict import ROLES

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from strayline.predict import Outlook, Point, Watch

DEAD_SHARE = 0.03  # devices that no longer open
MINUTES_HELD = {"as_found": 30.0, "one_load": 10.0, "light_load": 15.0, "test_load": 5.0}  # how long a state is held; else 1
LOOP_MATTERS_S = 1e-3  # a loop of more than 1000 ohm trips no grounded-neutral detector

DEAD, WORKS, DETECTS = 0, 1, 2


@dataclass(frozen=True, slots=True)
class DeviceState:
    """What the pedestal's and the boat's devices are (DEAD or absent, WORKS, or also DETECTS a grounded neutral); `share` of the prior."""

    pedestal: int
    aboard: int
    share: float


ABSENT = {"pedestal": 0.15, "aboard": 0.5}  # share of docks and boats without a device where nobody says


def device_states(watched: Sequence[Watch], facts: Mapping[str, str]) -> tuple[DeviceState, ...]:
    """Every state of the devices in this installation, with its share; shares sum to one."""
    kinds = {watch.role: watch.device for watch in watched}
    shares = {}
    for role in ("pedestal", "aboard"):
        device = devices.DEVICES[kinds.get(role, "none")]
        unknown = facts.get(f"{role}_device", "unknown") == "unknown"
        missing = 1.0 if not device.rated_ma else ABSENT[role] if unknown else DEAD_SHARE
        works = 1 - missing
        shares[role] = {DEAD: missing, WORKS: works * (1 - device.grounded_neutral), DETECTS: works * device.grounded_neutral}
    return tuple(
        DeviceState(pedestal, aboard, one * other)
        for pedestal, one in shares["pedestal"].items()
        for aboard, other in shares["aboard"].items()
        if one * other > 0
    )


# Per role the probability of opening when the device is dead, when it works, and when it also detects a grounded neutral.
RoleChances = tuple[tuple[float, float, float], tuple[float, float, float], tuple[float, float, float]]


def role_chances(watched: tuple[Watch, ...], outlook: Outlook, point: Point, context: str) -> RoleChances:
    """What feeder, pedestal and aboard devices do with one outlook, each dead, plain and detecting."""
    minutes = MINUTES_HELD.get(context.partition(":")[0], 1.0)
    held = {role: [1.0, 1.0, 1.0] for role in ROLES}
    for place, watch in enumerate(watched):
        row = held[watch.role]
        residual, loop = outlook.residual_a[place], outlook.loop_s[place]
        touchy = point.fault.cause == "touchy_device" and point.fault.at == watch.id
        if touchy:
            residual /= point.fault.scale
        calm = 1 - point.fault.spontaneous if touchy else 1.0
        device, band = devices.DEVICES[watch.device], (watch.non_operating_ma, watch.operating_ma)
        plain = _trip(device, residual, 0.0, band)
        row[0] *= 1 - devices.FLOOR
        row[1] *= (1 - plain) * calm
        row[2] *= (1 - (_trip(device, residual, loop, band) if loop > LOOP_MATTERS_S else plain)) * calm
        if watch.rated_a:
            cool = 1 - devices.overcurrent_probability(watch.rated_a, outlook.line_a[place], minutes)
            held[watch.role] = [value * cool for value in row]
    return tuple((1 - row[0], 1 - row[1], 1 - row[2]) for row in (held[role] for role in ROLES))  # type: ignore[return-value]


def _trip(device: devices.Device, residual_a: float, loop_s: float, band: tuple[float | None, float | None]) -> float:
    return devices.trip_probability(
        device, residual_a, window_siemens=loop_s, grounded_neutral=loop_s > 0, non_operating_ma=band[0], operating_ma=band[1]
    )


def any_opens(rows: Sequence[tuple[float, float, float]]) -> list[float]:
    """Per row of (feeder, pedestal, aboard) opening probabilities, the probability that anything opens."""
    return [1 - (1 - feeder) * (1 - pedestal) * (1 - aboard) for feeder, pedestal, aboard in rows]
