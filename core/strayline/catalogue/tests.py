"""The tests: permanent ids, who may do them with what, minutes, what they leave behind, and their outcomes.

A tool never raises the role. Minutes are working estimates for one competent person (common practice).
"""

from __future__ import annotations

from dataclasses import dataclass

ROLES: tuple[str, ...] = ("user", "instructed", "technician", "electrician")
TOOLS: tuple[str, ...] = ("none", "multimeter", "clamp", "insulation")  # each includes the ones before it


@dataclass(frozen=True, slots=True)
class Test:
    """One action with outcomes.

    roles     -- who may do it
    tool      -- the least tool it takes
    minutes   -- of work; waiting -- minutes of waiting, counted apart
    energises -- it restores power, so the gate is asked again in one line first
    context   -- the switching state it makes (a room `contexts` id)
    model     -- "trips" (holds or trips), "loads" (one load at a time), "continuity", "number" (a reading), "stated"
    needs     -- facts that must hold before it is proposed (`next_test` checks them)
    reading   -- for "number": the probe read; unit -- its unit; instrument -- its row in `likelihood`
    """

    id: str
    roles: tuple[str, ...]
    tool: str
    minutes: float
    waiting: float
    energises: bool
    context: str
    model: str
    outcomes: tuple[str, ...]
    needs: tuple[str, ...] = ()
    reading: str = ""
    unit: str = ""
    instrument: str = ""


_ALL = ROLES
_ABOARD = ("technician",)
_TRIPS = ("holds", "trips")

TESTS: tuple[Test, ...] = (
    Test("look_over", _ALL, "none", 3, 0, False, "as_found", "stated", ("clean", "wet", "burnt")),
    Test("test_button", _ALL, "none", 1, 0, True, "pedestal_alone", "stated", ("opens", "stays"), ("pedestal_device",)),
    Test("pedestal_alone", _ALL, "none", 1, 0, True, "pedestal_alone", "trips", _TRIPS),
    Test("cord_alone", _ALL, "none", 2, 0, True, "cord_alone", "trips", _TRIPS, ("plain_cord",)),
    Test("main_off", _ALL, "none", 2, 0, True, "main_off", "trips", _TRIPS, ("usable_hook_up",)),
    Test("branches_off", _ALL, "none", 2, 0, True, "branches_off", "trips", _TRIPS, ("usable_hook_up",)),
    Test("one_at_a_time", _ALL, "none", 12, 10, True, "one_load", "loads", ("holds_all", "one_trips", "any_trips"), ("usable_hook_up",)),
    Test("appliance_unplugged", _ALL, "none", 4, 0, True, "suspect_out", "trips", _TRIPS, ("usable_hook_up",)),
    Test("test_load", _ALL, "none", 5, 0, True, "test_load", "trips", _TRIPS, ("usable_hook_up",)),
    Test("wait_then_load", _ALL, "none", 3, 1, True, "inverter_settled", "trips", _TRIPS, ("inverter", "usable_hook_up")),
    Test("without_y", _ALL, "none", 6, 0, True, "without_y", "trips", _TRIPS, ("y_in_use",)),
    Test("other_pedestal", _ALL, "none", 10, 0, True, "other_pedestal", "trips", _TRIPS, ("plain_cord",)),
    Test("light_load", _ALL, "none", 4, 15, True, "light_load", "trips", _TRIPS, ("usable_hook_up",)),
    Test(
        "adapter_continuity",
        ("instructed", "technician", "electrician"),
        "multimeter",
        8,
        0,
        False,
        "cord_in_hand",
        "continuity",
        ("fine", "exchanged", "ground_open"),
    ),
    Test("bond_ohms", _ABOARD, "multimeter", 15, 0, False, "cord_out", "number", (), (), "neutral_ground_ohm", "ohm", "ohmmeter"),
    Test(
        "clamp_cord",
        ("instructed", "technician", "electrician"),
        "clamp",
        4,
        0,
        True,
        "one_load",
        "number",
        (),
        ("usable_hook_up",),
        "cord_sum_a",
        "mA",
        "clamp",
    ),
    Test("clamp_live", _ABOARD, "clamp", 12, 0, True, "one_load", "number", (), ("usable_hook_up",), "live_sum_a", "mA", "clamp"),
    Test("clamp_ground", _ABOARD, "clamp", 10, 0, True, "one_load", "number", (), ("usable_hook_up",), "ground_a", "mA", "clamp"),
    Test("insulation", _ABOARD, "insulation", 40, 0, False, "cord_joined", "number", (), (), "insulation_ohm", "Mohm", "insulation"),
)

TEST: dict[str, Test] = {test.id: test for test in TESTS}

# Stated probabilities of what a look or a button shows, by cause; "" is every other cause (common practice).
STATED: dict[str, dict[str, tuple[float, ...]]] = {
    "look_over": {
        "": (0.85, 0.11, 0.04),
        "wet_cord": (0.40, 0.52, 0.08),
        "wet_inlet": (0.35, 0.50, 0.15),
        "wet_pedestal": (0.55, 0.37, 0.08),
        "overload": (0.70, 0.06, 0.24),
        "open_ground_with_leak": (0.65, 0.15, 0.20),
    },
}
