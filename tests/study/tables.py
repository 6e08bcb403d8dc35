"""Records -> the printed study: one table with a line a person, what holds it back, and the variants."""

from __future__ import annotations

from collections import Counter
from typing import TYPE_CHECKING

from cases import VARIANTS
from scores import (
    MUST,
    MUST_CALIBRATE,
    MUST_MISS,
    MUST_SAVE,
    Mean,
    Record,
    Share,
    both_found,
    by_cause,
    calibration_error,
    confusions,
    mean,
    missed,
    missed_any,
    right,
    right_alone,
    share,
    spent,
    sure_wrong,
    told,
    uncounted,
    unknown_ends,
    unwarned,
)
from strayline.catalogue.tests import TEST

if TYPE_CHECKING:
    from collections.abc import Sequence

MOST = 12  # lines of a list


def chosen(records: Sequence[Record], **wanted: object) -> list[Record]:
    """The records with these values."""
    return [record for record in records if all(record[name] == value for name, value in wanted.items())]


def _ranged(one: Share | Mean, digits: int = 3) -> str:
    low, high = one.interval
    return f"{one.value:.{digits}f} [{low:.{digits}f}, {high:.{digits}f}]"


def _names(records: Sequence[Record], name: str) -> list[object]:
    return list(dict.fromkeys(record[name] for record in records))


def study(records: Sequence[Record], wrong: float) -> str:
    """Everything there is to say about one run."""
    lines: list[str] = []
    for seed in _names(records, "seed"):
        own = chosen(records, seed=seed)
        lines += [f"seed {seed}", ""]
        for rate in sorted({record["wrong"] for record in own}):
            lines += _main(chosen(own, variant="", wrong=rate), rate)
        lines += _baselines(chosen(own, variant="", wrong=wrong))
        lines += _variants(chosen(own, wrong=wrong, policy="flow"))
    plain = chosen(records, variant="", policy="flow", wrong=wrong)
    for row in _names(plain, "row"):
        lines += _held_back(str(row), chosen(plain, row=row))
    unheard = sum((Counter(record["unheard"]) for record in records), Counter())
    if unheard:
        lines += ["asked, and the study has no truth for it (answered: don't know)"]
        lines += [f"  {count:6d}  {name}" for name, count in unheard.most_common()]
    return "\n".join(lines)


def _main(records: Sequence[Record], rate: float) -> list[str]:
    flow = chosen(records, policy="flow")
    lines = [f"the flow, {rate:.0%} wrong answers; [ ] 95 % intervals; what must be reached in ( )"]
    for row in _names(flow, "row"):
        lines += _person(str(row), chosen(flow, row=row))
    steps = sum(record["proposals"] for record in records)
    unsafe = Counter(why for record in records for why in record["unsafe"])
    lines.append(f"unsafe proposals in {steps} steps, all policies: {sum(unsafe.values())}")
    lines += [f"  {count:6d}  {why}" for why, count in unsafe.most_common()]
    return [*lines, ""]


def _person(name: str, own: Sequence[Record]) -> list[str]:
    least, tests, minutes, wrong = MUST.get(name, (1.0, 0.0, 0.0, 0.0))
    ends = Counter(record["verdict"] for record in own)
    grouped = [len(record["shown"]) for record in own if told(record) and record["shown"]]
    rows = [
        ("names the cause or its group first", _ranged(share(own, right)), f"(>= {least})"),
        ("  the same, without groups", _ranged(share(own, right_alone)), ""),
        ("  the same, and told so", _ranged(share(own, lambda record: right(record) and told(record))), ""),
        ("  mean size of what is shown", f"{sum(grouped) / max(len(grouped), 1):.2f}", "(<= 1.5)"),
        ("tests", _ranged(mean(own, lambda record: len(record["tests"])), 2), f"(<= {tests})"),
        ("minutes of work", _ranged(mean(own, lambda record: record["minutes"]), 1), f"(<= {minutes})"),
        ("  minutes of waiting, apart", _ranged(mean(own, lambda record: record["waiting"]), 1), ""),
        ("answers before the first ranking", f"{max((record['questions'] or 0 for record in own), default=0)}", "(<= 8)"),
        ("wrong and >= 90 % sure", _ranged(share(own, sure_wrong)), f"(<= {wrong})"),
        ("dangerous miss, by the solve", _ranged(share(own, missed), 4), f"(<= {MUST_MISS})"),
        ("  by the catalogue's deadly causes", _ranged(share(own, missed_any), 4), ""),
        ("  and tonight's advice did not warn", _ranged(share(own, unwarned), 4), ""),
        ("calibration error of the top", f"{calibration_error(own):.3f}", f"(<= {MUST_CALIBRATE})"),
        ("readings that could not be had", f"{sum(record['unread'] for record in own) / max(len(own), 1):.2f} a case", ""),
        ("slowest step", f"{max((record['slowest_s'] for record in own), default=0):.2f} s", ""),
    ]
    found = [f"{name}: {len(own)} cases; ends " + ", ".join(f"{end} {count}" for end, count in ends.most_common())]
    return [*found, *(f"  {title:<38}{value:<28}{must}" for title, value, must in rows), ""]


def _baselines(records: Sequence[Record]) -> list[str]:
    policies = [policy for policy in _names(records, "policy") if policy != "flow"]
    if not policies:
        return []
    lines = [f"against other orders of asking: same cases, posterior and stop rule; must save {MUST_SAVE:.0%} of tests and minutes"]
    for row in _names(records, "row"):
        own = chosen(records, row=row)
        done = {record["number"] for record in own if record["policy"] == "flow"}
        done = done.intersection(*({record["number"] for record in own if record["policy"] == policy} for policy in policies))
        same = [record for record in own if record["number"] in done]
        flow = chosen(same, policy="flow")
        for policy in ("flow", *policies):
            part = chosen(same, policy=policy)
            means = [
                (mean(one, lambda record: len(record["tests"])).value, mean(one, lambda record: record["minutes"]).value)
                for one in (part, flow)
            ]
            saved = [1 - mine / other if other else 0.0 for other, mine in zip(*means, strict=True)]
            lines.append(
                f"  {row!s:<24}{policy!s:<10}{len(part):5d} cases  right {share(part, right).value:.3f}  told "
                f"{share(part, told).value:.3f}  tests {means[0][0]:5.2f}  minutes {means[0][1]:5.1f}"
                + ("" if policy == "flow" else f"  the flow saves {saved[0]:.0%} of tests, {saved[1]:.0%} of minutes")
            )
    return [*lines, ""]


def _variants(records: Sequence[Record]) -> list[str]:
    names = [name for name in VARIANTS if name and chosen(records, variant=name)]
    if not names:
        return []
    lines = ["when the world is not as assumed (the plain line has the same case numbers)"]
    for row in _names(records, "row"):
        own = chosen(records, row=row)
        for name in names:
            part = chosen(own, variant=name)
            numbers = {record["number"] for record in part}
            plain = [record for record in chosen(own, variant="") if record["number"] in numbers]
            if not part:
                continue
            if name == "pairs":
                said = f"both found {_ranged(share(part, both_found))} (>= .85 with a clamp, >= .77 with bare hands)"
            else:
                tests = mean(part, lambda record: len(record["tests"])).value
                said = (
                    f"right {_ranged(share(part, right))}, plain {share(plain, right).value:.3f}; sure wrong "
                    f"{share(part, sure_wrong).value:.3f}; missed {share(part, missed).value:.4f}; tests {tests:.2f}"
                )
            lines.append(f"  {row!s:<24}{VARIANTS[name]:<56}{len(part):5d}  {said}")
    return [*lines, ""]


def _held_back(name: str, own: Sequence[Record]) -> list[str]:
    lines = [f"what holds {name} back ({len(own)} cases)", "  confusions: truth -> shown (? : not told as a verdict)"]
    for (truth, shown), count in confusions(own).most_common(MOST):
        lines.append(f"    {count:4d}  {count / len(own):.3f}  {truth} -> {shown}")
    lines.append("  the truth was shown, second or third, and the group does not count: why")
    lines += [f"    {count:4d}  {count / len(own):.3f}  {why}" for why, count in uncounted(own).most_common()]
    lines.append("  dangerous misses: truth -> shown, by the solve first")
    for rule, mark in ((missed, "by the solve"), (lambda record: missed_any(record) and not missed(record), "by the catalogue")):
        worst = Counter(("+".join(record["causes"]), " | ".join(record["shown"])) for record in own if rule(record))
        lines += [f"    {count:4d}  {truth} -> {shown}  ({mark})" for (truth, shown), count in worst.most_common(MOST)]
    lines.append("  surest mistakes")
    worst = Counter(("+".join(record["causes"]), " | ".join(record["shown"]), record["verdict"]) for record in own if sure_wrong(record))
    lines += [f"    {count:4d}  {truth} -> {shown} ({verdict})" for (truth, shown, verdict), count in worst.most_common(MOST)]
    lines.append("  by cause: cases, right, right and told, what the truth is given at the end")
    for cause, (hit, said, given) in by_cause(own).items():
        lines.append(f"    {cause:<28}{hit.count:5d}  {hit.value:.2f}  {said.value:.2f}  {given.value:.2f}")
    lines.append("  where the minutes go: test, times a case, minutes a case, how it was reported")
    for test, times, minutes in spent(own, lambda test: TEST[test].minutes)[:MOST]:
        reports = Counter(_reported(value) for record in own for done, value in record["tests"] if done == test)
        said = ", ".join(f"{value} {count}" for value, count in reports.most_common(5))
        lines.append(f"    {test:<24}{times:5.2f}  {minutes:5.2f}  {said}")
    lines.append("  ends with no cause told: cause, arrangement")
    for (cause, arrangement), count in unknown_ends(own).most_common(MOST):
        lines.append(f"    {count:4d}  {cause}, {arrangement}")
    return [*lines, ""]


def _reported(value: str) -> str:
    return "a number" if value[:1].isdigit() else value
