"""What the terminal says: a diagnosis as JSON; residuals, plan, ledger, diagnosis and screens as text for people (rounded)."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from strayline import session
from strayline.catalogue.causes import CAUSE
from strayline.catalogue.questions import GATE, QUESTIONS, UNKNOWN
from strayline.catalogue.tests import TEST
from strayline.next_test import Candidate
from strayline.posterior import groups
from strayline.screen import Screen, current_text, percent, tonight_of, words_of
from strayline.session import LOOKS, Answer, Session

if TYPE_CHECKING:
    from collections.abc import Mapping

    from strayline.casefile import Case

SHOWN_WAYS = 12  # in text; JSON has them all
RULES = {
    "forced_plug": "its plug does not belong in that outlet",
    "homemade": "home-made: nobody knows how it is wired",
    "miswired": "wired wrongly",
    "reversed_outlet": "line and neutral are exchanged in the outlet",
    "reversed": "line and neutral arrive exchanged",
    "reversible_plug": "its plug goes in either way round, so line and neutral may be exchanged",
    "no_device": "the outlet has no ground-fault device",
    "dead_device": "the outlet's ground-fault device never opens",
    "joined_neutrals": "two neutrals meet, so each outlet loses sight of its own return",
    "shared_neutral": "both lines are in phase, so the common neutral may carry more than it is made for, and no breaker watches it",
    "no_protective_conductor": "its ground does not reach the dock's",
    "bond_aboard": "ties the neutral to ground aboard, where only the shore may",
    "trips_unloaded": "trips with every load off",
    "undersized": "rated for less than the breaker ashore",
    "live_blades": "bare blades are live",
    "live_loose_plug": "with the other plug out, its bare blades are live",
    "overload": "more than it may carry for long",
    "low_volts": "too few volts",
    "live_hull": "the boat's metal is live",
    "connector_assumed": "nobody said which plug it has; taken as",
    "grounded_neutral_loop": "may open with every load off, because it finds a neutral tied to ground",
    "dead": "gets no power here",
    "residual": "brings this device near its trip",
    "fits_nowhere": "fits nothing here",
    "unknown_ends": "nobody said which ends it has",
}


def diagnosis(case: Case) -> dict[str, Any]:
    """The reply of `core diagnose`: what the answers of a case say about its causes. It never reads faults or expectations.

    Questions the file leaves out count as "I don't know"; the gate counts as passed unless the file answers it.
    """
    given = {answer.question for answer in case.answers}
    missing = [question.id for question in QUESTIONS if question.id not in given and (question.opening or question.id in LOOKS)]
    filled = [Answer(name, None, UNKNOWN, 0) for name in missing]
    if GATE.id not in given:
        filled.append(Answer(GATE.id, None, "none", 0))
    answered = session.replay([*filled, *case.answers], case.installation)
    if answered.problem:
        raise answered.problem.error()
    if answered.halted:
        return {
            "ranking": [],
            "groups": [],
            "stop": "danger",
            "next_test": None,
            "tonight": [str(line) for line in words_of("en")["tonight.orders"]],
        }
    assert answered.marginal is not None
    words = words_of("en")
    ranked = sorted(answered.marginal, key=lambda cause: (-answered.marginal[cause], cause))  # type: ignore[index]
    test = TEST.get(answered.test or "")
    return {
        "ranking": [
            {"cause": cause, "kind": CAUSE[cause].kind, "title": words[f"cause.{cause}.title"], "probability": answered.marginal[cause]}
            for cause in ranked
        ],
        "groups": [list(group) for group in _groups(answered)],
        "stop": answered.verdict,
        "next_test": None if test is None else {"id": test.id, "title": words[f"test.{test.id}.title"], "minutes": test.minutes},
        "tonight": tonight_of(answered),
    }


def _groups(answered: Session) -> list[tuple[str, ...]]:
    """Causes that no test open to this person tells apart."""
    assert answered.evidence is not None
    assert answered.hypotheses is not None
    allowed = [
        Candidate(test, TEST[test].minutes, outcomes) for test in answered.allowed if (outcomes := answered.evidence.outcomes("test", test))
    ]
    return groups(answered.hypotheses, answered.weights, [candidate.outcomes for candidate in allowed])


def residuals_text(found: dict[str, Any]) -> str:
    """Residuals for people: one line per sensor, hull and blade."""
    lines = ["Residual at each sensor"]
    for sensor in found["sensors"]:
        rating = "no device" if sensor["rating_ma"] is None else f"{sensor['rating_ma']:g} mA device"
        lines.append(f"  {sensor['id']:<14} {current_text(sensor['residual_ma'] / 1e3):>9}  {rating:<14} {sensor['verdict']}")
    if found["breakers"]:
        lines.append("Current through each breaker")
        for row in found["breakers"]:
            start = f", {row['inrush_a']:.1f} A at the worst start" if row["inrush_a"] > row["line_a"] else ""
            lines.append(f"  {row['id']:<14} {row['line_a']:>7.1f} A  of {row['rating_a']:g} A{start}  {row['verdict']}")
    for title, key in (("Volts of each hull against the water", "hulls"), ("Volts of each bare blade", "live_blades")):
        if found[key]:
            lines += [title, *(f"  {row['id']:<14} {row['volts']:>7.2f} V" for row in found[key])]
    if found["opens_first"]:
        lines += ["Opens first", *(f"  {row['id']:<14} {percent(row['probability']):>7}" for row in found["opens_first"])]
    crossing = [row for row in found["crossings"] if row["ma"] >= 0.05]
    if crossing:
        lines.append("Where the current strays")
        lines += [f"  {row['sensor']:<14} {current_text(row['ma'] / 1e3):>9}  by {row['branch']} ({row['kind']})" for row in crossing]
    if found["floating"]:
        lines.append("Connected to nothing: " + ", ".join(found["floating"]))
    return "\n".join(lines)


def _told(one: Mapping[str, Any]) -> str:
    """One reason, caution or load to leave off, in a line."""
    value, unit = one["value"], one["unit"]
    if value is None or value == "":
        shown = ""
    elif isinstance(value, float):
        shown = f" ({current_text(value / 1e3)})" if unit == "mA" else f" ({value:.3g} {unit})".replace(" )", ")")
    else:
        shown = f" ({value})"
    return f"{one['part']}: {RULES[one['rule']]}{shown}"


def _way_lines(number: int, way: Mapping[str, Any]) -> list[str]:
    road = ", ".join(f"{link['part']} in {' and '.join(end or 'nothing' for end in link['from'])}" for link in way["connections"])
    now = " (as it is now)" if way["present"] else ""
    lines = [f"{number}. {road}{now}", f"   With all loads on, or one, or none: {way['holds']}. Verdict: {way['use']}."]
    if way["inlets_out"]:
        lines.append(f"   Left out: {', '.join(way['inlets_out'])}")
    why = way["why"]
    if why:
        state = {"all_on": "all loads on", "all_off": "all loads off"}.get(why["state"], f"only {why['load']} on")
        stray = why["crossing"]
        by = f", most of it by {stray['branch']} ({stray['kind']})" if stray and why["residual_ma"] >= 0.05 else ""
        lines.append(f"   Nearest to tripping: {why['sensor']} with {current_text(why['residual_ma'] / 1e3)} ({state}){by}")
    lines += [f"   ! {_told(one)}" for one in way["reasons"]]
    lines += [f"   - {_told(one)}" for one in way["cautions"]]
    lines += [
        f"   Left on {row['part']} {row['line']}: {row['left_a']:.1f} A of {row['limit_a']:.1f} A, about {row['left_w']:.0f} W"
        for row in way["lines"]
    ]
    lines += [f"   Leave off {one['load']}: {_told(one)}" for one in way["loads_off"]]
    lines += [f"   {one['load']} runs at {percent(one['power_share'])} of its power ({one['volts']:.0f} V)" for one in way["loads_weak"]]
    if way["loads_off"]:
        eased = way["with_loads_off"]
        lines.append(f"   With those off: {eased['holds']}. Verdict: {eased['use']}.")
    return lines


def plan_text(found: Mapping[str, Any]) -> str:
    """A plan for people: the best ways first, each with both verdicts."""
    lines = [] if found["ways"] else ["No way: nothing aboard fits an outlet here and this boat's inlet."]
    for number, way in enumerate(found["ways"][:SHOWN_WAYS], 1):
        lines += [*_way_lines(number, way), ""]
    hidden = len(found["ways"]) - SHOWN_WAYS
    if hidden > 0:
        lines.append(f"{hidden} more ways, none better, are in --json.")
    if found["left_out"]:
        least = "at least " if found["left_out_at_least"] else ""
        lines.append(f"{least}{found['left_out']} more ways were not worked out.")
    lines += [f"Not used: {one['part']}: {RULES[one['rule']]}" for one in found["unused"]]
    lines += [f"Assumed: {one['part']} has a {one['connector']} plug" for one in found["assumed"]]
    return "\n".join([*lines, "Nothing here says that a way is free of danger. What trips is doing its work."])


def _range_text(bounds: list[float]) -> str:
    low, high = (current_text(value / 1e3) for value in bounds)
    return low if low == high else f"{low} to {high}"


def ledger_text(found: Mapping[str, Any]) -> str:
    """A ledger for people: each circuit's leakage and each device's headroom."""
    lines = ["Leakage by circuit (with all that hangs on it)"]
    for row in found["circuits"]:
        known, total = row["total"]["known"], row["total"]
        if total["ma"][1] < 0.0005:
            continue
        at = "" if known["angle_deg"] is None else f" at {known['angle_deg']:.0f} degrees"
        more = f", unmeasured {_range_text(total['unknown_ma'])}" if total["unknown_ma"][1] else ""
        lines.append(f"  {row['part']:<14} {row['kind']:<11} known {current_text(known['ma'] / 1e3)}{at}{more}")
    lines.append("Each device")
    for row in found["sensors"]:
        lines.append(f"  {row['id']:<14} {row['device']:<11} {_range_text(row['ma'])}: {row['verdict']['known']}")
        if row["headroom"]:
            holding, operating = (" to ".join(f"{ma:.1f}" for ma in bounds) for bounds in row["headroom"].values())
            lines.append(f"    left before it may trip: {holding} mA; before it must: {operating} mA")
        lines += [
            f"    {current_text(one['ma'] / 1e3)} by {one['part']} ({'to ground' if one['kind'] == 'ground' else 'back by another road'})"
            for one in row["shares"]
            if one["ma"] >= 0.05
        ]
    sources = sorted({f"{row['part']}: {row['source']}" for row in found["circuits"] if row["unknown_ma"][1]})
    return "\n".join([*lines, *(["Where nothing was measured"] if sources else []), *(f"  {line}" for line in sources)])


def diagnosis_text(found: dict[str, Any]) -> str:
    """A diagnosis for people."""
    lines = [f"  {percent(row['probability']):>6}  {row['title']}" for row in found["ranking"][:6]]
    if found["stop"]:
        lines.append(f"Stop: {found['stop']}")
    if found["next_test"]:
        lines.append(f"Next: {found['next_test']['title']} (about {found['next_test']['minutes']:g} min)")
    return "\n".join([*lines, "Tonight", *(f"  - {line}" for line in found["tonight"])])


def screen_text(screen: Screen) -> str:
    """One screen of the guided flow as text."""
    lines = ["", screen["title"], "=" * min(len(screen["title"]), 78), *screen["lead"]]
    if screen["verdict"]:
        lines += [
            *screen["verdict"]["lead"],
            f"Who may fix it: {screen['verdict']['repair']}",
            *(f"  - {line}" for line in screen["verdict"]["remedy"]),
        ]
        lines.append(f"Tell the marina: {screen['verdict']['marina']}")
    lines += [f"  ! {line}" for line in screen["cautions"]]
    lines += [f"  {number}. {line}" for number, line in enumerate(screen["steps"], 1)]
    lines += [f"  {fact['label']}: {fact['text']}" for fact in screen["facts"]]
    if screen["tonight"] and screen["kind"] in ("outcome", "stop"):
        lines += ["Tonight:", *(f"  - {line}" for line in screen["tonight"])]
    for row in screen["ranking"]:
        lines.append(f"  {row['percent']:>6}  {row['title']}")
        lines += [f"            {line}" for line in (*row["numbers"], *row["for"], *row["against"])]
    form = screen["form"]
    if form:
        if form["problem"]:
            lines.append(f"  ! {form['problem']}")
        lines += ["", form["legend"]]
        if form["input"] == "number":  # a bare number is the reading, so the other answers have names here
            lines += [f"  a number in {form['unit']}", *(f"  {choice['value']} - {choice['label']}" for choice in form["choices"])]
        else:
            lines += [f"  {number}. {choice['label']}" for number, choice in enumerate(form["choices"], 1)]
    return "\n".join(lines)
