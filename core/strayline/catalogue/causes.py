"""The causes: permanent ids, priors by region, how their trips are timed, who may repair them.

Priors are weights among boats that called for help because something tripped; they follow the trade's rough shares
(common practice: bonds lead on 60 Hz docks, heating elements and cords lead on 230 V docks) and are meant to be
replaced by field data. They need not sum to one; `posterior` normalises.
"""

from __future__ import annotations

from dataclasses import dataclass, field


@dataclass(frozen=True, slots=True)
class Cause:
    """One explanation of a trip.

    kind      -- "fault", or "arrangement" when the healthy network of the stated set-up already trips
    prior_60  -- weight on 120 V 60 Hz docks; prior_50 on 230 V 50 Hz docks (dimensionless)
    timing    -- stated shares of *when* it trips: "computed" (the solve decides which switching step), "minutes"
                 (after minutes of load), "random", "wet" (rain, tide, spray)
    repair    -- who may repair it: "user", "technician" (aboard) or "electrician" (ashore)
    lethal    -- a wrong "benign" here can kill
    source    -- where prior and timing come from
    weighed   -- False: the circuit half knows it, the ranking does not weigh it yet
    """

    id: str
    kind: str
    prior_60: float
    prior_50: float
    repair: str
    lethal: bool = False
    source: str = "common practice"
    timing: dict[str, float] = field(default_factory=dict)
    requires: tuple[str, str] | None = None
    weighed: bool = True


_AT_ONCE = {"computed": 0.90, "minutes": 0.03, "random": 0.05, "wet": 0.02}
_WET = {"computed": 0.50, "minutes": 0.02, "random": 0.13, "wet": 0.35}

CAUSES: tuple[Cause, ...] = (
    Cause(
        "appliance_leak", "fault", 0.28, 0.36, "technician", True, timing={"computed": 0.72, "minutes": 0.13, "random": 0.12, "wet": 0.03}
    ),
    Cause("wet_cord", "fault", 0.08, 0.12, "user", True, timing=_WET),
    Cause("wet_inlet", "fault", 0.05, 0.06, "technician", True, timing=_WET),
    Cause("wet_pedestal", "fault", 0.03, 0.03, "electrician", True, timing=_WET),
    Cause("summed_filters", "fault", 0.05, 0.06, "technician", timing={"computed": 0.70, "minutes": 0.05, "random": 0.23, "wet": 0.02}),
    Cause("panel_bond", "fault", 0.14, 0.06, "technician", True, timing=_AT_ONCE),
    Cause("frame_strap", "fault", 0.07, 0.01, "technician", True, timing=_AT_ONCE),
    Cause("inverter_bond", "fault", 0.07, 0.06, "technician", True, timing=_AT_ONCE, requires=("inverter", "yes")),
    Cause("ground_neutral_exchanged", "fault", 0.04, 0.03, "technician", True, timing=_AT_ONCE),
    Cause("line_ground_exchanged", "fault", 0.004, 0.003, "technician", True, timing=_AT_ONCE),
    Cause("neutral_ahead_of_device", "fault", 0.03, 0.03, "technician", timing=_AT_ONCE),
    Cause("open_ground_with_leak", "fault", 0.03, 0.03, "technician", True, timing=_AT_ONCE),
    Cause(
        "feeder_accumulation", "fault", 0.04, 0.04, "electrician", timing={"computed": 0.35, "minutes": 0.05, "random": 0.50, "wet": 0.10}
    ),
    Cause("touchy_device", "fault", 0.04, 0.04, "electrician", timing={"computed": 0.40, "minutes": 0.05, "random": 0.50, "wet": 0.05}),
    Cause("overload", "fault", 0.06, 0.06, "user", timing={"computed": 0.10, "minutes": 0.82, "random": 0.07, "wet": 0.01}),
    Cause("nothing_now", "fault", 0.04, 0.05, "technician", timing={"computed": 0.20, "minutes": 0.05, "random": 0.55, "wet": 0.20}),
    Cause("combining_y", "arrangement", 0.85, 0.85, "user", True, timing=_AT_ONCE),
    Cause("joined_inlets", "arrangement", 0.30, 0.30, "technician", True, timing=_AT_ONCE),
)

CAUSE: dict[str, Cause] = {cause.id: cause for cause in CAUSES}
