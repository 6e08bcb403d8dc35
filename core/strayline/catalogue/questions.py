"""The questions: permanent ids, their choices, and when each is asked. Words stand in the language files.

Every choice question also takes "unknown", added by `screen`; a question is asked in the order of this table when
its `asked` rule holds. Facts left unknown are summed over.
"""

from __future__ import annotations

from dataclasses import dataclass

UNKNOWN = "unknown"


@dataclass(frozen=True, slots=True)
class Question:
    """One thing to ask. choices -- values in screen order; opening -- asked before the first ranking, else offered as a free look."""

    id: str
    choices: tuple[str, ...]
    opening: bool = True
    minutes: float = 0.3


# Signs on the safety gate. Each has its own instructions on the stop screen.
GATE_SIGNS: tuple[str, ...] = (
    "person_in_water",
    "person_down",
    "tingling",
    "bright_or_dim",
    "hot_plug",
    "smell_or_bang",
    "water_in_outlet",
    "pedestal_damaged",
    "cord_in_water",
    "lightning",
    "taking_water",
)

GATE = Question("gate", ("none", *GATE_SIGNS))
CLEAR = Question("clear", ("clear", "not_clear"))  # subject: the test that restores power

QUESTIONS: tuple[Question, ...] = (
    Question("role", ("user", "instructed", "technician", "electrician")),
    Question("tools", ("none", "multimeter", "clamp", "insulation")),
    Question("supply", ("split_120_240", "wye_120_208", "single_230")),
    Question("plug", ("one_cord", "one_cord_four_wire", "two_cords", "combining_y", "splitting_y", "straight_adapter", "homemade")),
    Question("pedestal_device", ("device_30", "class_a", "none")),
    Question("aboard_device", ("device_30", "none")),
    Question("opened", ("pedestal", "aboard", "both", "feeder")),
    Question("when", ("plug_in", "main_on", "any_load", "one_load", "switching_off", "minutes", "wet", "random")),
    Question("afloat", ("afloat", "ashore")),
    Question("neighbour", ("yes", "no"), opening=False),
    Question("inverter", ("yes", "no"), opening=False),
)

QUESTION: dict[str, Question] = {question.id: question for question in (GATE, CLEAR, *QUESTIONS)}
