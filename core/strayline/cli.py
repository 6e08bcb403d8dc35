"""The command line: `python3 core residuals|diagnose|netlist|ask|plan|ledger FILE`. JSON is never rounded; text is."""

from __future__ import annotations

import argparse
import dataclasses
import json
import sys
from pathlib import Path
from typing import TYPE_CHECKING, Any

from strayline import __version__, casefile, report
from strayline.errors import CaseError, StraylineError
from strayline.ledger import ledger
from strayline.netlist import netlist
from strayline.plan import plan
from strayline.protocol import MAX_VALUE, PROTOCOL, handle
from strayline.residuals import residuals, stated_network

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from strayline.casefile import Case

BAD_FILE = 2


def _print_json(value: object) -> None:
    print(json.dumps(value, ensure_ascii=False, indent=1))


def _residuals(arguments: argparse.Namespace) -> None:
    found = residuals(casefile.load(arguments.file))
    _print_json(found) if arguments.json else print(report.residuals_text(found))


def _diagnose(arguments: argparse.Namespace) -> None:
    found = report.diagnosis(casefile.load(arguments.file))
    _print_json(found) if arguments.json else print(report.diagnosis_text(found))


def _netlist(arguments: argparse.Namespace) -> None:
    case = casefile.load(arguments.file)
    print(netlist(stated_network(case)[1], str(case.meta.get("title", Path(arguments.file).stem))), end="")


def _plan(arguments: argparse.Namespace) -> None:
    found = plan(casefile.load(arguments.file))
    _print_json(found) if arguments.json else print(report.plan_text(found))


def _ledger(arguments: argparse.Namespace) -> None:
    found = ledger(casefile.load(arguments.file))
    _print_json(found) if arguments.json else print(report.ledger_text(found))


def _request(case: Case | None) -> str:
    answers = [] if case is None else [dataclasses.asdict(answer) for answer in case.answers]
    return json.dumps({"id": "cli", "protocol": PROTOCOL, "language": "en", "units": "si", "view": "flow", "answers": answers})


def _ask(arguments: argparse.Namespace) -> None:
    if arguments.json:
        print(handle(_request(casefile.load(arguments.answers) if arguments.answers else None)))
        return
    request = json.loads(_request(casefile.load(arguments.answers) if arguments.answers else None))
    while True:
        reply = json.loads(handle(json.dumps(request)))
        if "error" in reply:
            raise StraylineError(reply["error"]["message"])
        screen = reply["screen"]
        print(report.screen_text(screen))
        form = screen["form"]
        if form is None or screen["kind"] in ("outcome", "stop"):
            return
        value = _typed(form)
        if value is None:
            return
        answers = [row for row in request["answers"] if (row["question"], row["subject"]) != (form["question"], form["subject"])]
        seq = max((row["seq"] for row in answers), default=0) + 1
        answers.append({"question": form["question"], "subject": form["subject"], "value": value, "seq": seq, "at": ""})
        request["answers"] = answers


def _typed(form: dict[str, Any]) -> str | None:
    """What the person typed: the number of a choice, or the value itself; None at the end of input."""
    try:
        typed = input("> ").strip()[:MAX_VALUE]
    except EOFError:
        return None
    choices = form["choices"]
    if form["input"] == "choice" and typed.isdigit() and 1 <= int(typed) <= len(choices):
        return str(choices[int(typed) - 1]["value"])
    return typed


def _parser() -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(prog="core", description="Why a boat's shore power trips, and which test to do next.")
    parser.add_argument("--version", action="version", version=__version__)
    commands = parser.add_subparsers(title="commands", metavar="")
    table: tuple[tuple[str, str, Callable[[argparse.Namespace], None]], ...] = (
        ("residuals", "what every sensor sees in a case: residuals, hull volts, live blades, crossings", _residuals),
        ("diagnose", "rank the causes of a case from its installation and answers", _diagnose),
        ("plan", "every way to connect this boat here: will it hold, may it be used, what power is left", _plan),
        ("ledger", "leakage by circuit, and what it leaves to each device", _ledger),
        ("netlist", "the case as SPICE text that ngspice runs unchanged", _netlist),
    )
    for name, help_text, run in table:
        command = commands.add_parser(name, help=help_text, description=help_text)
        command.add_argument("file", metavar="FILE", help="a case file (TOML or JSON)")
        if name != "netlist":
            command.add_argument("--json", action="store_true", help="JSON, never rounded")
        command.set_defaults(run=run)
    ask = commands.add_parser("ask", help="the guided flow, question by question", description="the guided flow, question by question")
    ask.add_argument("--answers", metavar="FILE", help="a case file whose answers to start from")
    ask.add_argument("--json", action="store_true", help="one reply of the worker contract, and stop")
    ask.set_defaults(run=_ask)
    return parser


def main(arguments: Sequence[str] | None = None) -> int:
    """Run one command; the exit status (2 and one line for a bad file)."""
    parser = _parser()
    chosen = parser.parse_args(arguments)
    if not hasattr(chosen, "run"):
        parser.print_help()
        return 0
    try:
        chosen.run(chosen)
    except CaseError as error:
        file = getattr(chosen, "file", None) or chosen.answers
        print((error if error.file else error.in_file(file)).message.replace("\n", " "), file=sys.stderr)
        return BAD_FILE
    except StraylineError as error:
        print(error.message.replace("\n", " "), file=sys.stderr)
        return BAD_FILE
    except (BrokenPipeError, KeyboardInterrupt):
        return 0  # whoever reads or types has had enough
    return 0
