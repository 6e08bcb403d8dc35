"""What the devices do with an outlook: the states they may be in, and the probability that each role's device opens."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from strayline import contexts, devices
from strayline.faults import Fault
from strayline.predict import ROLES

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from strayline.predict import Outlook, Watch

DEAD_SHARE = 0.03  # devices that no longer open
MINUTES_HELD = {"as_found": 30.0, "one_load": 10.0, "light_load": 15.0, "test_load": 5.0}  # how long a state is held; else 1
LOOP_MATTERS_S = 1e-3  # a loop of more than 1000 ohm trips no grounded-neutral detector

ABSENT = {"pedestal": 0.15, "aboard": 0.5}  # share of docks and boats without a device where nobody says
NOTHING = Fault("nothing_now")
ONLY_IN = {"surge": (contexts.AS_FOUND,)}  # causes that open a device by themselves in these states only: nobody tests in a storm

DEAD, WORKS, DETECTS = 0, 1, 2


@dataclass(frozen=True, slots=True)
class DeviceState:
    """What the pedestal's and the boat's devices are (DEAD or absent, WORKS, or also DETECTS a grounded neutral); `share` of the prior."""

    pedestal: int
    aboard: int
    share: float


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


def acts_on_devices(fault: Fault) -> bool:
    """Whether a fault changes what the devices do with what they see, beyond what it does to the circuit."""
    return fault.scale != 1.0 or fault.spontaneous > 0.0 or fault.duty < 1.0


def band_scale(fault: Fault, device_id: str, seen: bool, waveform: str) -> float:
    """By what a fault multiplies the operating band of one device; `seen` tells whether the device watches the place of the fault.

    A touchy device's own band is lower. What a device's type does not cope with lowers its band for mixed frequencies (it trips early)
    and raises it for smooth direct current (it is blinded).
    """
    if fault.cause == "touchy_device":
        return fault.scale if fault.at == device_id else 1.0
    type_ = devices.WAVEFORMS[waveform]
    copes = {"drive_leakage": type_.mixed, "rectified_leakage": type_.smooth_dc[1] > 0.0}
    return fault.scale if seen and not copes.get(fault.cause, True) else 1.0


def by_itself(fault: Fault, device_id: str, state: str) -> float:
    """Probability that a fault opens this device in this state with no current at all."""
    here = fault.at == device_id and state in ONLY_IN.get(fault.cause, (state,))
    return min(fault.spontaneous, devices.CEILING) if here else 0.0


def rating_scale(fault: Fault, breaker_id: str) -> float:
    """By what a fault multiplies the rating of one breaker: a hot one opens below it."""
    return fault.scale if fault.cause == "hot_breaker" and fault.at == breaker_id else 1.0


def start_multiple(fault: Fault, load_id: str, stated: float) -> float:
    """What multiple of its running current a load draws when it starts."""
    return max(stated, fault.scale) if fault.cause == "inrush" and fault.at == load_id else stated


def delayed_roles(watched: Sequence[Watch]) -> frozenset[str]:
    """The roles in which every device waits on purpose."""
    return frozenset(watch.role for watch in watched) - {watch.role for watch in watched if not watch.waits}


# Per role the probability of opening when the device is dead, when it works, and when it also detects a grounded neutral.
RoleChances = tuple[tuple[float, float, float], tuple[float, float, float], tuple[float, float, float]]


def role_chances(watched: tuple[Watch, ...], outlook: Outlook, fault: Fault, context: str, away: Outlook | None = None) -> RoleChances:
    """What feeder, pedestal and aboard devices do with one outlook, each dead, plain and detecting.

    `away` is what would be seen while a fault that comes and goes is not there; the two are mixed by its `duty`.
    """
    there = _chances(watched, outlook, fault, context)
    if away is None or fault.duty == 1.0:
        return there
    gone = _chances(watched, away, NOTHING, context)
    mixed = (
        tuple(fault.duty * with_it + (1 - fault.duty) * without for with_it, without in zip(one, other, strict=True))
        for one, other in zip(there, gone, strict=True)
    )
    return tuple(mixed)  # type: ignore[return-value]


def _chances(watched: tuple[Watch, ...], outlook: Outlook, fault: Fault, context: str) -> RoleChances:
    state, _, alone = context.partition(":")
    minutes = MINUTES_HELD.get(state, 1.0)
    held = {role: [1.0, 1.0, 1.0] for role in ROLES}
    acting = acts_on_devices(fault)
    for place, watch in enumerate(watched):
        row = held[watch.role]
        residual, loop = outlook.residual_a[place], outlook.loop_s[place]
        calm, rated_a = 1.0, watch.rated_a
        if acting:
            residual /= band_scale(fault, watch.id, fault.at in watch.loads, watch.waveform)
            calm -= by_itself(fault, watch.id, state)
            rated_a *= rating_scale(fault, watch.id)
        device, band = devices.DEVICES[watch.device], (watch.non_operating_ma, watch.operating_ma)
        plain = _trip(device, residual, 0.0, band)
        row[0] *= 1 - devices.FLOOR
        row[1] *= (1 - plain) * calm
        row[2] *= (1 - (_trip(device, residual, loop, band) if loop > LOOP_MATTERS_S else plain)) * calm
        if rated_a:
            line_a = outlook.line_a[place]
            cool = 1 - devices.overcurrent_probability(rated_a, line_a, minutes, watch.curve)
            start_a = _start_a(watch, fault, state, alone)
            if start_a:
                cool *= 1 - devices.inrush_probability(rated_a, line_a + start_a, watch.curve)
            held[watch.role] = [value * cool for value in row]
    return tuple((1 - row[0], 1 - row[1], 1 - row[2]) for row in (held[role] for role in ROLES))  # type: ignore[return-value]


def _start_a(watch: Watch, fault: Fault, state: str, alone: str) -> float:
    """By how many amperes the worst single start of a load in this state exceeds what it draws when it runs; 0 where none starts."""
    running = watch.loads if state == contexts.AS_FOUND else (alone,) if state == "one_load" and alone in watch.loads else ()
    more = 0.0
    for load in running:
        amperes, stated = watch.loads[load]
        more = max(more, (start_multiple(fault, load, stated) - 1) * amperes)
    return more


def _trip(device: devices.Device, residual_a: float, loop_s: float, band: tuple[float | None, float | None]) -> float:
    return devices.trip_probability(
        device, residual_a, window_siemens=loop_s, grounded_neutral=loop_s > 0, non_operating_ma=band[0], operating_ma=band[1]
    )


def any_opens(rows: Sequence[tuple[float, float, float]]) -> list[float]:
    """Per row of (feeder, pedestal, aboard) opening probabilities, the probability that anything opens."""
    return [1 - (1 - feeder) * (1 - pedestal) * (1 - aboard) for feeder, pedestal, aboard in rows]
