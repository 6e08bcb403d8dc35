"""The terminal as a person meets it: a process with arguments, typed lines, output and an exit status."""

from __future__ import annotations

import json
import os
import re
import subprocess
import sys
from pathlib import Path

import pytest

from strayline import __version__, casefile
from strayline.ledger import ledger
from strayline.plan import plan
from strayline.protocol import PROTOCOL, handle
from strayline.residuals import residuals

ROOT = Path(__file__).parents[2]
SCENARIOS = sorted((ROOT / "scenarios").glob("*.toml"))


def core(*arguments: object, typed: str | bytes = b"") -> subprocess.CompletedProcess[str]:
    """Run `python3 core ...` in a bare environment, with these lines typed; output as text."""
    done = subprocess.run(
        [sys.executable, str(ROOT / "core"), *map(str, arguments)],
        input=typed.encode() if isinstance(typed, str) else typed,
        capture_output=True,
        check=False,
        timeout=120,
        env={"PATH": os.environ["PATH"], "PYTHONUTF8": "1", "PYTHONDONTWRITEBYTECODE": "1"},
    )
    return subprocess.CompletedProcess(done.args, done.returncode, done.stdout.decode(), done.stderr.decode())


SET_UP = {
    "gate": "none", "role": "user", "tools": "none", "supply": "split_120_240", "plug": "one_cord", "pedestal_device": "device_30",
    "aboard_device": "device_30", "opened": "pedestal", "afloat": "afloat",
}  # fmt: skip


def lines_of(**said: str) -> str:
    """What a person types who says these things: the number of each choice, for as long as what is asked is among them."""
    rows: list[dict[str, object]] = []
    lines = ""
    said = {"clear": "clear", **said}
    while True:
        request = {"id": "cli", "protocol": PROTOCOL, "language": "en", "units": "si", "view": "flow", "answers": rows}
        form = json.loads(handle(json.dumps(request)))["screen"]["form"]
        if form is None or form["question"] not in said or form["input"] == "number":
            return lines
        value = said[form["question"]]
        lines += f"{[choice['value'] for choice in form['choices']].index(value) + 1}\n"
        rows.append({"question": form["question"], "subject": form["subject"], "value": value, "seq": len(rows), "at": ""})


@pytest.mark.parametrize("arguments", [(), ("--help",), ("ask", "--help"), ("residuals", "--help"), ("--version",)])
def test_help_is_help(arguments: tuple[str, ...]) -> None:
    """Alone, and with --help, it says what it can do and ends well."""
    done = core(*arguments)
    assert done.returncode == 0
    assert done.stderr == ""
    assert ("usage: core" in done.stdout) != ("--version" in arguments)
    assert (done.stdout.strip() == __version__) == ("--version" in arguments)


@pytest.mark.parametrize(
    "arguments", [("residuals",), ("diagnose",), ("plan",), ("ledger",), ("frobnicate",), ("ask", "--colour"), ("netlist", "a", "b")]
)
def test_wrong_arguments_are_told(arguments: tuple[str, ...]) -> None:
    """Missing, unknown or too many arguments end with status 2, a usage line and no trace."""
    done = core(*arguments)
    assert done.returncode == 2
    assert done.stdout == ""
    assert done.stderr.startswith("usage: core")
    assert "Traceback" not in done.stderr


@pytest.mark.parametrize("command", ["residuals", "diagnose", "netlist", "plan", "ledger"])
@pytest.mark.parametrize(
    "content", [b"", b"\xff\xfe", b"x = [", b'schema = 99\nformat = "strayline-case"', b"schema = 1\n[engine]\n", None]
)
def test_a_bad_file_is_one_line(command: str, content: bytes | None, tmp_path: Path) -> None:
    """A file that is missing, rubbish, newer or of other sections ends with status 2 and one line that names it, and stays as it was."""
    file = tmp_path / "case.toml"
    if content is not None:
        file.write_bytes(content)
    done = core(command, file)
    assert done.returncode == 2
    assert done.stdout == ""
    assert re.fullmatch(rf"{re.escape(str(file))}: [^\n]+\n", done.stderr)
    assert content is None or file.read_bytes() == content


@pytest.mark.parametrize(
    "answers", ['[{question = "fixed", subject = "kettle"}]', '[{question = "colour"}]', "3", '[{question = "gate", value = 1}]']
)
def test_a_bad_answer_in_a_file_is_one_line(answers: str, tmp_path: Path) -> None:
    """So does an answer to nothing, or a fix of nothing, with its key path."""
    file = tmp_path / "case.toml"
    file.write_text(f'format = "strayline-case"\nschema = 1\nanswers = {answers}\n', encoding="utf-8")
    for arguments in (("ask", "--json", "--answers", file), ("ask", "--answers", file), ("diagnose", file)):
        done = core(*arguments)
        assert done.returncode == 2
        assert re.fullmatch(rf"{re.escape(str(file))}: answers[^\n]*\n", done.stderr)


def test_residuals_and_diagnose_as_json_and_as_text() -> None:
    """As JSON the numbers are not rounded and are those of the room; as text every sensor has its line."""
    file = ROOT / "scenarios" / "element_leak.toml"
    done = core("residuals", file, "--json")
    assert done.returncode == 0
    assert json.loads(done.stdout) == json.loads(json.dumps(residuals(casefile.load(file))))
    text = core("residuals", file).stdout
    assert all(sensor["id"] in text for sensor in json.loads(done.stdout)["sensors"])
    found = json.loads(core("diagnose", file, "--json").stdout)
    assert list(found) == ["ranking", "groups", "stop", "next_test", "tonight"]
    assert found["ranking"][0]["title"] in core("diagnose", file).stdout


@pytest.mark.parametrize("command", ["plan", "ledger"])
def test_plan_and_ledger_as_json_and_as_text(command: str) -> None:
    """As JSON the numbers are not rounded and are those of the room; as text every outlet and every sensor in them has its line."""
    file = ROOT / "scenarios" / "y_on_two_outlets.toml"
    done = core(command, file, "--json")
    assert done.returncode == 0, done.stderr
    expected = {"plan": plan, "ledger": ledger}[command](casefile.load(file))
    assert json.loads(done.stdout) == json.loads(json.dumps(expected))
    text = core(command, file).stdout
    assert all(name in text for name in ("outlet_a", "outlet_b"))
    assert "Traceback" not in text


def test_a_plan_without_a_boat_is_one_line(tmp_path: Path) -> None:
    """A dock with no boat is a bad file for a plan: status 2 and one line."""
    file = tmp_path / "case.toml"
    file.write_text('schema = 1\ninstallation.parts = [{ id = "dock", kind = "supply", system = "split_120_240" }]\n', encoding="utf-8")
    done = core("plan", file)
    assert (done.returncode, done.stdout) == (2, "")
    assert re.fullmatch(rf"{re.escape(str(file))}: installation[^\n]+inlet[^\n]+\n", done.stderr)


@pytest.mark.parametrize("file", SCENARIOS[:4], ids=lambda file: file.stem)
def test_diagnose_never_reads_what_is_really_wrong(file: Path, tmp_path: Path) -> None:
    """With other faults and other expectations in the file, diagnose prints the same bytes."""
    case = file.read_text(encoding="utf-8")
    bare = tmp_path / "bare.toml"
    bare.write_text(case[: case.index("[[faults]]")], encoding="utf-8")
    assert core("diagnose", bare, "--json").stdout == core("diagnose", file, "--json").stdout != ""


@pytest.mark.parametrize("file", [None, *SCENARIOS[:3]], ids=lambda file: getattr(file, "stem", "nothing"))
def test_ask_as_json_is_the_reply_of_the_contract(file: Path | None) -> None:
    """`ask --json` prints the one reply that the worker gives to the answers of the file, or to none."""
    answers = [] if file is None else casefile.load(file).answers
    rows = [{"question": one.question, "subject": one.subject, "value": one.value, "seq": one.seq, "at": one.at} for one in answers]
    request = {"id": "cli", "protocol": PROTOCOL, "language": "en", "units": "si", "view": "flow", "answers": rows}
    done = core("ask", "--json", *([] if file is None else ["--answers", file]))
    assert done.returncode == 0
    assert json.loads(done.stdout) == json.loads(handle(json.dumps(request)))


def test_ask_leads_to_an_end_by_typing() -> None:
    """By typing numbers alone the flow goes from the gate to a named cause, who may fix it, and what to do tonight."""
    done = core(
        "ask", typed=lines_of(**SET_UP, when="wet", look_over="clean", cord_alone="trips", pedestal_alone="holds", main_off="trips")
    )
    assert done.returncode == 0, done.stderr
    assert done.stderr == ""
    assert "Most likely: The shore cord is wet or damaged" in done.stdout
    assert done.stdout.index("Who may fix it") < done.stdout.rindex("Tonight:")


def test_ask_stops_at_a_sign() -> None:
    """A sign typed at the gate ends with the orders for it; nothing else is asked."""
    done = core("ask", typed="2\n")
    assert done.returncode == 0
    assert "Do not jump in" in done.stdout
    assert done.stdout.count("> ") == 1


def test_ask_asks_again_what_it_cannot_take() -> None:
    """Words, a number out of the list, an empty line and bytes that are no text bring the same question back with its problem."""
    typed = b"1\nballoon\n99\n\n\xff\xfe\n" + b"y" * 5000 + b"\n1\n"
    done = core("ask", typed=typed)
    assert done.returncode == 0, done.stderr
    assert done.stderr == ""
    assert done.stdout.count("Who is doing the tests?") >= 6
    assert done.stdout.count("not in the list") >= 4
    assert "What test tools are at hand?" in done.stdout


def test_ask_takes_a_reading_and_never_mistakes_it_for_a_choice() -> None:
    """Where a number is asked for, a typed number is the reading, and the other answers are typed as words."""
    technician = lines_of(**SET_UP | {"role": "technician", "tools": "clamp", "when": "one_load"})
    asked = core("ask", typed=technician).stdout
    card = asked[asked.rindex("What does the clamp read") :]
    assert "a number in mA" in card
    assert "unknown - I don't know" in card
    assert "cannot - " in card
    assert not re.search(r"^\s*\d+\. ", card, re.MULTILINE)
    assert "one number" in core("ask", typed=technician + "a lot\n").stdout
    assert "“Clamp around the whole cord” – “2 mA”" in core("ask", typed=technician + "2\n").stdout


def test_ask_ends_where_the_typing_ends() -> None:
    """When the input ends in the middle, so does the command, with nothing wrong."""
    for length in range(3):
        done = core("ask", typed="1\n" * length)
        assert (done.returncode, done.stderr) == (0, "")
