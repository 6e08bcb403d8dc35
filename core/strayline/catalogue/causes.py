"""The causes: permanent ids, what happens in each, priors by region, how their trips are timed, who may repair them.

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
    repair    -- who may repair it: "user", "technician" (aboard) or "electrician" (ashore)
    mechanism -- what the current does, in one sentence
    lethal    -- a wrong "benign" here can kill
    source    -- where mechanism, prior and timing come from
    timing    -- stated shares of *when* it trips: "computed" (the solve decides which switching step), "minutes"
                 (after minutes of load), "random", "wet" (rain, tide, spray)
    requires  -- (unknown fact, value) without which it cannot be
    beyond    -- what of it the steady state at the supply's frequency does not show, and what that does to the evidence
    weighed   -- False: the circuit half knows it, the ranking does not weigh it yet
    """

    id: str
    kind: str
    prior_60: float
    prior_50: float
    repair: str
    mechanism: str
    lethal: bool = False
    source: str = "common practice"
    timing: dict[str, float] = field(default_factory=dict)
    requires: tuple[str, str] | None = None
    beyond: str = ""
    weighed: bool = True


_AT_ONCE = {"computed": 0.90, "minutes": 0.03, "random": 0.05, "wet": 0.02}
_WET = {"computed": 0.50, "minutes": 0.02, "random": 0.13, "wet": 0.35}
_STANDING = {"computed": 0.70, "minutes": 0.05, "random": 0.23, "wet": 0.02}
_CYCLIC = {"computed": 0.25, "minutes": 0.30, "random": 0.42, "wet": 0.03}
_AT_RANDOM = {"computed": 0.10, "minutes": 0.05, "random": 0.80, "wet": 0.05}
_HEAVY = {"computed": 0.10, "minutes": 0.82, "random": 0.07, "wet": 0.01}
_INVERTER = ("inverter", "yes")

CAUSES: tuple[Cause, ...] = (
    # What leaks
    Cause(
        "appliance_leak", "fault", 0.28, 0.36, "technician",
        "Insulation inside one appliance has failed, and current passes from its live part to its frame.",
        lethal=True, timing={"computed": 0.72, "minutes": 0.13, "random": 0.12, "wet": 0.03},
        beyond="An element under scale leaks only while it heats: a trip may wait for the thermostat.",
    ),
    Cause(
        "wet_cord", "fault", 0.08, 0.12, "user",
        "A film of water or salt bridges line and protective conductor in the cord or at its ends, ahead of any device aboard.",
        lethal=True, timing=_WET,
    ),
    Cause(
        "wet_inlet", "fault", 0.05, 0.06, "technician",
        "Salt or a carbon track bridges line and protective conductor in the boat's inlet, ahead of the main.",
        lethal=True, timing=_WET,
    ),
    Cause(
        "wet_pedestal", "fault", 0.03, 0.03, "electrician",
        "Water in the outlet or its post bridges line and protective conductor before the cord begins.",
        lethal=True, timing=_WET,
    ),
    Cause(
        "summed_filters", "fault", 0.05, 0.06, "technician",
        "The filter capacitors of many appliances each pass a little current to ground, and their phasor sum nears the device's band.",
        timing=_STANDING,
    ),
    Cause(
        "damp_element", "fault", 0.03, 0.07, "technician",
        "The powder that insulates a heating element has drawn damp while it lay unused, and conducts to the sheath until it is dry.",
        lethal=True, timing={"computed": 0.62, "minutes": 0.25, "random": 0.10, "wet": 0.03}, weighed=False,
        beyond="The leak fades within an hour of heat; what tripped in the first minutes may hold later, and the test finds less.",
    ),
    Cause(
        "compressor_leak", "fault", 0.03, 0.015, "technician",
        "The winding of a sealed compressor leaks to its shell, part through damaged insulation and part through its capacitance.",
        lethal=True, timing={"computed": 0.60, "minutes": 0.25, "random": 0.13, "wet": 0.02}, weighed=False,
        beyond="Worse when hot and at the moment of starting, when the start gear is live too.",
    ),
    Cause(
        "branch_wiring_leak", "fault", 0.03, 0.03, "technician",
        "A chafed cable or a wet junction behind one branch breaker lets its line reach grounded metal.",
        lethal=True, timing=_WET, weighed=False,
        beyond="Comes and goes with bilge water and heel.",
    ),
    Cause(
        "charger_filter", "fault", 0.03, 0.03, "technician",
        "One large charger's filter capacitors, oversized or failing, pass a standing current to its case as soon as it has power.",
        timing=_STANDING, weighed=False,
        beyond="Insulation and ohms read high: a direct test voltage does not pass a capacitor.",
    ),
    Cause(
        "surge_suppressor", "fault", 0.01, 0.012, "user",
        "Ageing varistors in a surge strip conduct a little from line to ground at the ordinary peak of the voltage.",
        timing={"computed": 0.40, "minutes": 0.15, "random": 0.43, "wet": 0.02}, weighed=False,
        source="common practice; ageing criterion of varistors from memory",
        beyond="Not linear: the current rises steeply with voltage and with the strip's own heat, and jumps when something is switched.",
    ),
    Cause(
        "cycling_appliance", "fault", 0.04, 0.045, "technician",
        "An appliance that works in cycles leaks only in one part of its cycle: a defrost heater, a pump, a wet hose.",
        lethal=True, timing=_CYCLIC, weighed=False,
        beyond="Absent most of the time: a hold counts for little unless the cycle was seen to run.",
    ),
    Cause(
        "isolator_self_test", "fault", 0.004, 0.001, "technician",
        "The monitor of a galvanic isolator drives a test current through neutral and ground, and the devices see it leave.",
        timing=_AT_RANDOM, weighed=False, source="common practice: monitored isolators of about 2002 to 2008",
        beyond="It lasts some seconds now and then, whatever runs aboard.",
    ),
    Cause(
        "transformer_primary_leak", "fault", 0.004, 0.006, "technician",
        "The primary winding of the boat's isolation transformer leaks to its shield or case, on the shore's side of it.",
        lethal=True, timing=_AT_ONCE, weighed=False,
        beyond="With every secondary load off it leaks just the same.",
    ),
    Cause(
        "drive_leakage", "fault", 0.01, 0.012, "technician",
        "A variable-speed drive drives current into ground at its switching frequency through its filter and the motor's cable.",
        timing={"computed": 0.65, "minutes": 0.15, "random": 0.18, "wet": 0.02}, weighed=False,
        source="common practice; responses of device types to IEC 62423",
        beyond="Kilohertz: devices weigh it differently, and a clamp that filters shows only the mains part of it.",
    ),
    Cause(
        "rectified_leakage", "fault", 0.004, 0.006, "technician",
        "A fault behind a rectifier leaks in half waves or smooth direct current, which dulls the core of the device that should see it.",
        lethal=True, timing=_STANDING, weighed=False, source="IEC 62423 and IEC 60755 for what each type of device tolerates",
        beyond="A blinded device may not open for any leak: a hold proves nothing, and a clamp for alternating current reads low.",
    ),
    Cause(
        "cancelling_legs", "fault", 0.008, 0.001, "technician",
        "Two appliances leak on different lines, and their leaks oppose each other until one of them goes off.",
        lethal=True, timing=_AT_ONCE, weighed=False,
        beyond="It trips when something is switched off.",
    ),
    # What joins neutral and ground
    Cause(
        "panel_bond", "fault", 0.14, 0.06, "technician",
        "Neutral and ground meet in the boat's panel, and every return current divides between the two ways home.",
        lethal=True, timing=_AT_ONCE,
    ),
    Cause(
        "frame_strap", "fault", 0.07, 0.01, "technician",
        "A strap inside a stove or dryer ties its frame to neutral, for as long as the appliance is connected.",
        lethal=True, timing=_AT_ONCE,
    ),
    Cause(
        "inverter_bond", "fault", 0.07, 0.06, "technician",
        "The relay that bonds an inverter's output lets go late or never, and bonds the shore's neutral instead.",
        lethal=True, timing=_AT_ONCE, requires=_INVERTER,
    ),
    Cause(
        "inverter_common_neutral", "fault", 0.02, 0.02, "technician",
        "The inverter's output neutral shares a bus with its input neutral, so that its bond reaches the shore's neutral.",
        lethal=True, timing=_AT_ONCE, requires=_INVERTER, weighed=False,
    ),
    Cause(
        "generator_bond", "fault", 0.03, 0.01, "technician",
        "The generator's own neutral-ground bond stays across the shore's neutral, because the transfer switch leaves neutrals joined.",
        lethal=True, timing=_AT_ONCE, weighed=False,
    ),
    Cause(
        "transformer_bypassed", "fault", 0.002, 0.003, "technician",
        "The isolation transformer has been wired past, and the bond of its secondary now ties the shore's neutral to ground aboard.",
        lethal=True, timing=_AT_ONCE, weighed=False,
    ),
    Cause(
        "soft_neutral_leak", "fault", 0.02, 0.02, "technician",
        "Damp joins neutral to ground through tens or hundreds of ohms, and the small volts on the neutral drive current through it.",
        timing=_STANDING, weighed=False,
        beyond="It trips under heavy load, on a neighbour's load, or abroad where the poles are exchanged, and holds at home.",
    ),
    Cause(
        "dock_bond", "fault", 0.006, 0.008, "electrician",
        "Neutral and ground meet in a dock post, downstream of the feeder's device, and the dock's return current divides there.",
        lethal=True, timing=_STANDING, weighed=False,
    ),
    # What is wired where it does not belong
    Cause(
        "ground_neutral_exchanged", "fault", 0.04, 0.03, "technician",
        "Neutral and protective conductor have changed places, and the return current goes home in the protective conductor.",
        lethal=True, timing=_AT_ONCE,
    ),
    Cause(
        "line_ground_exchanged", "fault", 0.004, 0.003, "technician",
        "Line and protective conductor have changed places, and the boat's metal hangs on the line.",
        lethal=True, timing=_AT_ONCE,
    ),
    Cause(
        "forced_plug", "fault", 0.002, 0.001, "user",
        "A plug forced into an outlet of another pattern puts its ground pin on a live line, and the boat's metal with it.",
        lethal=True, timing=_AT_ONCE, weighed=False,
    ),
    Cause(
        "reversed_polarity", "fault", 0.008, 0.008, "electrician",
        "Line and neutral are exchanged ahead of the boat, so that one-pole switches open the neutral and what they switch stays live.",
        lethal=True, timing=_STANDING, weighed=False,
        beyond="No trip test can find it: the sum stays near zero but for filters and polarity lamps.",
    ),
    Cause(
        "reversed_with_soft_neutral", "fault", 0.01, 0.02, "technician",
        "Exchanged poles put the line on a neutral that damp joins to ground, and a leak that was quiet carries the whole voltage.",
        lethal=True, timing=_AT_ONCE, weighed=False,
    ),
    Cause(
        "reversed_with_bond", "fault", 0.003, 0.003, "electrician",
        "Exchanged poles put the line on a neutral that is bonded to ground aboard: a dead short from line to ground.",
        lethal=True, timing=_AT_ONCE, weighed=False,
        beyond="A bang at plug-in; overcurrent and residual devices race, and nobody turns it on again.",
    ),
    Cause(
        "neutral_ahead_of_device", "fault", 0.03, 0.03, "technician",
        "A load's neutral lands on the supply side of a device, and its return passes outside the window.",
        timing=_AT_ONCE,
    ),
    Cause(
        "crossed_neutral", "fault", 0.006, 0.002, "technician",
        "A load takes its line from one inlet's bus and sends its return to the other inlet's neutral.",
        lethal=True, timing=_AT_ONCE, weighed=False,
    ),
    Cause(
        "shared_neutral_branch", "fault", 0.005, 0.002, "technician",
        "Two circuits share one neutral behind the device of only one of them, and the other's return passes its window.",
        timing=_AT_ONCE, weighed=False,
    ),
    Cause(
        "shared_outlet_neutral", "fault", 0.004, 0.003, "electrician",
        "Behind their devices the neutrals of two outlets in one post are joined or exchanged, and each device sees the other's return.",
        lethal=True, timing=_AT_ONCE, weighed=False,
    ),
    # What is broken
    Cause(
        "open_ground_with_leak", "fault", 0.03, 0.03, "technician",
        "The protective conductor is broken, and a leak aboard finds its way home through the water or a person.",
        lethal=True, timing=_AT_ONCE,
    ),
    Cause(
        "open_ground", "fault", 0.012, 0.012, "technician",
        "The protective conductor is broken with nothing leaking yet, and the metal floats where the filters hold it.",
        lethal=True, timing=_AT_RANDOM, weighed=False,
        beyond="It trips nothing; a TEST button between line and neutral works all the same, and the next leak makes the metal live.",
    ),
    Cause(
        "open_neutral", "fault", 0.008, 0.006, "electrician",
        "The neutral is broken, and loads of two lines stand in series between them, or a single line comes home by nothing at all.",
        lethal=True, timing=_HEAVY, weighed=False,
        beyond="Lamps go bright and dim by turns and electronics burn; no residual tells of it.",
    ),
    # What stands ashore, next door or between
    Cause(
        "feeder_accumulation", "fault", 0.04, 0.04, "electrician",
        "The standing leaks of several boats add up as phasors in the window of the device that feeds the dock.",
        timing={"computed": 0.35, "minutes": 0.05, "random": 0.50, "wet": 0.10},
    ),
    Cause(
        "wet_feeder", "fault", 0.01, 0.01, "electrician",
        "Water in the dock's own cable or in a flooded post lets its line reach ground, ahead of every outlet's device.",
        lethal=True, timing=_WET, weighed=False,
    ),
    Cause(
        "other_loads_on_device", "fault", 0.01, 0.015, "electrician",
        "Something ashore or another boat hangs on the same device and leaks there.",
        lethal=True, timing=_AT_RANDOM, weighed=False,
    ),
    Cause(
        "foreign_current", "fault", 0.004, 0.004, "electrician",
        "Current from another source enters the hull from the water and leaves by the boat's protective conductor.",
        lethal=True, timing=_AT_RANDOM, weighed=False,
        beyond="No window aboard sees it: a clamp reads the ground wire and the whole cord alike, and the live conductors sum to zero.",
    ),
    Cause(
        "data_cable_path", "fault", 0.003, 0.004, "technician",
        "The shield of an aerial, telephone or network cable ties the boat's ground to the shore a second time.",
        timing=_AT_RANDOM, weighed=False,
        beyond="By itself it trips nothing; with a bond or a leak aboard it carries part of the current.",
    ),
    Cause(
        "second_inlet_live", "fault", 0.003, 0.002, "technician",
        "An inlet that is not in use hangs on the same buses, and its bare pins carry the voltage of the other one.",
        lethal=True, timing=_AT_RANDOM, weighed=False,
        beyond="It trips nothing: only a look or a touch finds it.",
    ),
    # What the device does by itself
    Cause(
        "touchy_device", "fault", 0.04, 0.04, "electrician",
        "A worn or damp device opens below the band it is built for.",
        timing={"computed": 0.40, "minutes": 0.05, "random": 0.50, "wet": 0.05},
    ),
    Cause(
        "device_locked_out", "fault", 0.006, 0.004, "electrician",
        "A device at its end of life refuses to close, or opens as soon as it has power.",
        timing=_AT_ONCE, weighed=False,
        beyond="No current strays: it opens with nothing plugged in and its TEST button does nothing more.",
    ),
    Cause(
        "surge", "fault", 0.01, 0.01, "electrician",
        "Lightning or switching on the grid sends a pulse through filters and varistors that lasts milliseconds.",
        timing={"computed": 0.02, "minutes": 0.02, "random": 0.76, "wet": 0.20}, weighed=False,
        source="common practice: impulse-resistant types exist for it (IEC 61008-1, type S)",
        beyond="Over before anyone looks: several posts open together, and every test afterwards holds.",
    ),
    Cause(
        "uncoordinated_devices", "fault", 0.006, 0.006, "electrician",
        "A hard fault on one boat stands above the band of the dock's device too, and no delay lets the outlet's device go first.",
        lethal=True, timing=_AT_ONCE, weighed=False, source="common practice: ratio and delay between devices in series, IEC 60364-5-53",
        beyond="Which one opens first is a race of milliseconds, so the whole dock goes dark now and then.",
    ),
    # What is overcurrent, not residual
    Cause(
        "overload", "fault", 0.06, 0.06, "user",
        "More load runs than the breaker carries for long, and its heat element opens it.",
        timing=_HEAVY,
    ),
    Cause(
        "hot_breaker", "fault", 0.012, 0.012, "electrician",
        "A worn breaker or a loose terminal heats itself, and it opens below its rated current.",
        timing=_HEAVY, weighed=False,
        beyond="Heat, not current, opens it: it takes minutes, comes sooner on a hot day, and resets only when cool.",
    ),
    Cause(
        "inrush", "fault", 0.008, 0.012, "technician",
        "A motor or transformer draws many times its running current for an instant when it starts.",
        timing={"computed": 0.55, "minutes": 0.05, "random": 0.39, "wet": 0.01}, weighed=False,
        source="common practice; multiples of running current from memory",
        beyond="Over within a second, with no residual: a breaker's magnetic part opens, at a start or when power returns to many loads.",
    ),
    Cause(
        "short_circuit", "fault", 0.006, 0.008, "technician",
        "Line touches neutral, and the current is what the cables allow.",
        timing=_AT_ONCE, weighed=False,
        beyond="A bang and perhaps a flash; overcurrent opens it, no residual, and nobody turns it on again.",
    ),
    Cause(
        "low_voltage", "fault", 0.008, 0.004, "electrician",
        "Long or thin conductors drop so many volts that motors stall or draw more than they should.",
        timing=_HEAVY, weighed=False,
        beyond="Motors and supplies draw more as the volts fall; a fixed impedance in the circuit draws less.",
    ),
    Cause(
        "supply_lost", "fault", 0.008, 0.008, "electrician",
        "The dock or the grid has no power, and nothing has tripped on this boat at all.",
        timing=_AT_RANDOM, weighed=False,
        beyond="Every device holds: lamps on other posts are dark too.",
    ),
    Cause(
        "nothing_now", "fault", 0.04, 0.05, "technician",
        "Nothing strays at this moment, with these loads running.",
        timing={"computed": 0.20, "minutes": 0.05, "random": 0.55, "wet": 0.20},
    ),
    # What the healthy network of the set-up does
    Cause(
        "combining_y", "arrangement", 0.85, 0.85, "user",
        "Two outlets' neutrals meet in the Y, and what goes out by one device comes home partly by the other.",
        lethal=True, timing=_AT_ONCE,
    ),
    Cause(
        "joined_inlets", "arrangement", 0.30, 0.30, "technician",
        "Two inlets' neutrals meet aboard, and what goes out by one cord comes home partly by the other.",
        lethal=True, timing=_AT_ONCE,
    ),
)  # fmt: skip

CAUSE: dict[str, Cause] = {cause.id: cause for cause in CAUSES}
