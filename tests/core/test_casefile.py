"""Case files: the same in TOML and JSON, read in full or refused in one line, and what each command may look at."""

from __future__ import annotations

import contextlib
import copy
import json
import os
import subprocess
import sys
import tomllib
from pathlib import Path
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from strayline import casefile
from strayline.cli import BAD_FILE, main
from strayline.errors import CaseError, StraylineError
from strayline.residuals import residuals

ROOT = Path(__file__).parents[2]
SCENARIOS = sorted((ROOT / "scenarios").glob("*.toml"))
GOOD: dict[str, Any] = tomllib.loads((ROOT / "scenarios" / "wet_cord.toml").read_text(encoding="utf-8"))


def written(folder: Path, content: object, name: str = "case.json") -> Path:
    """A file of this content: bytes as they are, anything else as JSON."""
    file = folder / name
    file.write_bytes(content if isinstance(content, bytes) else json.dumps(content).encode())
    return file


def with_part(**values: object) -> dict[str, Any]:
    """The good case with values of its cord, part 4, changed."""
    case = copy.deepcopy(GOOD)
    case["installation"]["parts"][4] |= values
    return case


def terminal(*arguments: str) -> subprocess.CompletedProcess[str]:
    """One run of the terminal as a person starts it."""
    environment = {**os.environ, "PYTHONDONTWRITEBYTECODE": "1"}
    command = [sys.executable, str(ROOT / "core"), *arguments]
    return subprocess.run(command, capture_output=True, encoding="utf-8", env=environment, timeout=60, check=False)


NEWER = {**GOOD, "schema": casefile.SCHEMA + 1, "shape_of_tomorrow": [1, 2]}
# name -> (file name, content, what the line says after the file's name)
BAD: dict[str, tuple[str, object, str]] = {
    "unknown key": ("case.json", with_part(colour="blue"), "installation.parts[4].colour: unknown key for a cord; known are "),
    "unknown section": ("case.json", {**GOOD, "boat": {}}, "boat: unknown section; known are "),
    "missing key": (
        "case.json",
        {**GOOD, "installation": {"parts": [{"id": "dock", "kind": "supply"}]}},
        "installation.parts[0].system: missing",
    ),
    "wrong unit": ("case.json", with_part(length_m="80 ft"), "installation.parts[4].length_m: must be a number in m ('80 ft')"),
    "zero ohms": (
        "case.toml",
        b"schema = 1\n[installation]\nparts = [{ id = 'dock', kind = 'supply', system = 'single_230', neutral_ohms = 0 }]\n",
        "installation.parts[0].neutral_ohms: zero ohms in a conductor; give its real resistance (0)",
    ),
    "named twice": (
        "case.json",
        with_part(id="outlet"),
        "installation.parts[4].id: named twice; every part needs an id of its own ('outlet')",
    ),
    "cord to nowhere": ("case.json", with_part(**{"from": "nowhere"}), "installation.parts[4].from: no part has this id ('nowhere')"),
    "newer schema": ("case.json", NEWER, "schema: was written by a newer version; this one reads up to 1. The file was left as it is (2)"),
    "no schema": ("case.json", {"installation": {}}, "schema: missing or not a whole number from 1"),
    "other format": ("case.json", {**GOOD, "format": "logbook"}, "format: must be strayline-case ('logbook')"),
    "5 MB": ("case.json", b" " * 5_000_000, "file: at most 1000 kB"),
    "binary rubbish": ("case.toml", bytes(range(256)) * 8, "file: must be UTF-8 text; byte 128 is not"),
    "zeros": ("case.json", bytes(64), "syntax: Expecting value (at line 1, column 1)"),
    "duplicate key": ("case.json", b'{"schema": 1, "meta": {}, "meta": {}}', "meta: the same key twice"),
    "duplicate key in TOML": ("case.toml", b"schema = 1\nschema = 1\n", "syntax: Cannot overwrite a value (at line 2, column "),
    "syntax": ("case.json", b'{"schema": 1,\n "meta" {}}', "syntax: Expecting ':' delimiter (at line 2, column 9)"),
    "not a number": (
        "case.json",
        b'{"schema": 1, "faults": [{"cause": "wet_cord", "ohms": NaN}]}',
        "syntax: must be a finite number ('NaN')",
    ),
    "endless number": ("case.json", b'{"schema": ' + b"1" * 9000 + b"}", "syntax: a number is too long"),
    "endless number in TOML": ("case.toml", b"schema = " + b"1" * 9000, "syntax: a number is too long"),
    "a date for a number": (
        "case.toml",
        b"schema = 1\n[installation]\nparts = [{ id = 'a', kind = 'supply', system = 'single_230', volts = 2030-01-01 }]\n",
        "installation.parts[0].volts: must be a number in V (2030-01-01)",
    ),
    "nested": ("case.json", b"[" * 200_000, "syntax: nested too deeply"),
    "a list": ("case.json", [], "file: must be a table of sections"),
    "a list for a table": ("case.json", {**GOOD, "meta": []}, "meta: must be a table"),
    "no such cause": ("case.json", {**GOOD, "faults": [{"cause": "gremlins"}]}, "faults[0].cause: must be one of "),
    "no such question": (
        "case.json",
        {**GOOD, "answers": [{"question": "why", "value": "x"}]},
        "answers[0].question: no such question or test ('why')",
    ),
    "line break in a key": ("case.json", with_part(**{"a\nb": 1}), "installation.parts[4].a b: unknown key for a cord"),
}


@pytest.mark.parametrize("name", BAD)
def test_bad_file(name: str, tmp_path: Path) -> None:
    """A bad file is one sentence with its name, the key path, the rule and what stood there."""
    file_name, content, said = BAD[name]
    file = written(tmp_path, content, file_name)
    with pytest.raises(CaseError) as caught:
        casefile.load(file)
    assert caught.value.message.replace("\n", " ").startswith(f"{file}: {said}")


@pytest.mark.parametrize("command", ["residuals", "diagnose", "netlist"])
def test_missing_file(command: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A file that is not there, and a folder in its place, are told in one line by every command."""
    for path in (tmp_path / "none.toml", tmp_path):
        assert main([command, str(path)]) == BAD_FILE
        assert capsys.readouterr().err.startswith(f"{path}: file: cannot be read: ")


@pytest.mark.parametrize("name", BAD)
def test_bad_file_in_a_terminal(name: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Every command leaves with status 2 and exactly one line on the error stream, and touches nothing."""
    file_name, content, said = BAD[name]
    file = written(tmp_path, content, file_name)
    before = file.read_bytes()
    for arguments in (["residuals"], ["residuals", "--json"], ["diagnose", "--json"], ["netlist"], ["ask", "--json", "--answers"]):
        assert main([*arguments, str(file)]) == BAD_FILE
        told = capsys.readouterr()
        assert told.out == ""
        assert told.err.splitlines() == [told.err[:-1]]
        assert told.err.startswith(f"{file}: {said}")
    assert file.read_bytes() == before


@pytest.mark.parametrize("name", ["unknown key", "newer schema", "5 MB", "binary rubbish", "endless number", "nested"])
def test_bad_file_in_a_process(name: str, tmp_path: Path) -> None:
    """Started as a person starts it, a bad file leaves status 2, one line and no traceback."""
    file_name, content, said = BAD[name]
    file = written(tmp_path, content, file_name)
    done = terminal("residuals", str(file))
    assert done.returncode == BAD_FILE
    assert done.stdout == ""
    assert len(done.stderr.splitlines()) == 1
    assert done.stderr.startswith(f"{file}: {said}")


@pytest.mark.parametrize(
    ("fault", "said"),
    [
        ({"cause": "wet_cord", "at": "nowhere", "ohms": 100}, "faults[1].at: must be the id of a cord or adapter ('nowhere')"),
        ({"cause": "wet_cord", "at": "cord"}, "faults[1].ohms: must be above zero ohm (0.0)"),
        ({"cause": "wet_cord", "at": "cord", "ohms": -1}, "faults[1].ohms: must be a number from 0 (-1)"),
        ({"cause": "wet_cord", "at": "cord", "amps": 1}, "faults[1].amps: unknown key; known are cause, "),
        (
            {"cause": "appliance_leak", "at": "boiler", "ohms": 9, "position": 2},
            "faults[1].position: must be between 0 (line end) and 1 (2.0)",
        ),
        ({"cause": "summed_filters", "at": "gone", "nanofarads": 9}, "faults[1].at: must be the id of a panel ('gone')"),
        ({"cause": "joined_inlets", "at": "cord"}, "faults[1].at: must be the id of a panel ('cord')"),
        ({"cause": "summed_filters"}, "faults[1].nanofarads: must be above zero nF (0.0)"),
        ({"cause": "neutral_ahead_of_device", "at": "main"}, "faults[1].load: must be the id of a load ('')"),
    ],
)
def test_bad_fault(fault: dict[str, object], said: str, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A fault that cannot be is told by its place in the list, also where only the circuit shows that it cannot."""
    file = written(tmp_path, {**GOOD, "faults": [{"cause": "nothing_now"}, fault]})
    assert main(["residuals", str(file)]) == BAD_FILE
    assert capsys.readouterr().err.startswith(f"{file}: {said}")


def test_a_case_without_an_installation(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Residuals need an installation, and say so; a diagnosis from answers alone does not."""
    file = written(tmp_path, {"schema": 1, "answers": GOOD["answers"]})
    assert main(["residuals", str(file)]) == BAD_FILE
    assert capsys.readouterr().err == f"{file}: installation: missing; say what is plugged into what\n"
    assert main(["diagnose", "--json", str(file)]) == 0
    assert json.loads(capsys.readouterr().out)["ranking"]


@pytest.mark.parametrize("connector", ["16a_230v", None])
def test_a_dock_without_a_boat(connector: str | None, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A dock with nothing plugged in is an input like any other for every command."""
    parts = [{"id": "dock", "kind": "supply", "system": "single_230"}, {"id": "post", "kind": "pedestal", "from": "dock"}]
    parts += [{"id": "outlet", "kind": "receptacle", "from": "post", "connector": connector}] if connector else []
    file = written(tmp_path, {"schema": 1, "installation": {"parts": parts}})
    for command in ("residuals", "diagnose", "netlist"):
        assert main([command, str(file)]) == 0
    assert capsys.readouterr().err == ""


@pytest.mark.parametrize("file", SCENARIOS, ids=lambda file: file.stem)
def test_toml_and_json_are_the_same_case(file: Path, tmp_path: Path) -> None:
    """The same keys in JSON make the same case."""
    copied = written(tmp_path, tomllib.loads(file.read_text(encoding="utf-8")))
    assert casefile.load(copied) == casefile.load(file)


def test_unknown_and_ranges_are_taken(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A case of ranges and unknown facts is solved like any other."""
    file = written(tmp_path, with_part(length_m=[10, 30], area_mm2="unknown"))
    assert main(["residuals", "--json", str(file)]) == 0
    assert json.loads(capsys.readouterr().out)["sensors"]


def test_half_a_character_in_a_title(tmp_path: Path) -> None:
    """A title that no encoding can print does not stop the netlist."""
    file = written(tmp_path, {**GOOD, "meta": {"title": "half \ud800 of one\n.end"}})
    done = terminal("netlist", str(file))
    assert (done.returncode, done.stderr) == (0, "")
    assert done.stdout.splitlines()[0] == "* half ? of one .end"


@pytest.mark.parametrize("command", [["diagnose", "--json"], ["ask", "--json", "--answers"]])
@pytest.mark.parametrize("name", ["wet_cord", "open_ground_ashore", "y_on_two_outlets"])
def test_what_is_really_wrong_is_not_looked_at(name: str, command: list[str], tmp_path: Path) -> None:
    """With other faults and other expectations the diagnosis and the guided flow say the same, byte for byte, in fresh processes."""
    case = tomllib.loads((ROOT / "scenarios" / f"{name}.toml").read_text(encoding="utf-8"))
    other = {
        **case,
        "faults": [{"cause": "panel_bond", "at": "panel", "ohms": 0.001}],
        "expect": {"cause": "panel_bond", "stop": "unknown"},
    }
    replies = [terminal(*command, str(written(tmp_path, content))) for content in (case, other)]
    assert replies[0].returncode == 0
    assert replies[0].stdout
    assert replies[0].stdout == replies[1].stdout


anything = st.recursive(
    st.none()
    | st.booleans()
    | st.integers()
    | st.floats(allow_nan=False)
    | st.text(max_size=8)
    | st.sampled_from(["", "unknown", "cord", 10**400, -1, 0]),
    lambda inner: (
        st.lists(inner, max_size=3) | st.dictionaries(st.sampled_from(["id", "kind", "from", "parts", "cause", "at"]), inner, max_size=3)
    ),
    max_leaves=6,
)


@given(raw=anything)
def test_any_value_is_a_case_or_an_error(raw: object) -> None:
    """Whatever a file holds is a case or one sentence, never a trace."""
    with contextlib.suppress(CaseError):
        casefile.parse(json.dumps(raw).encode(), toml=False)


@settings(max_examples=200)
@given(data=st.data(), value=anything)
def test_any_change_of_a_good_case(data: st.DataObject, value: object) -> None:
    """A good case with any one value changed is solved or refused in one sentence."""
    case = copy.deepcopy(GOOD)
    place: Any = case
    while True:
        key = data.draw(st.sampled_from(sorted(place)) if isinstance(place, dict) else st.integers(0, len(place) - 1))
        inside = place[key]
        if not isinstance(inside, (dict, list)) or not inside or data.draw(st.integers(0, 5)) == 0:
            break
        place = inside
    place[key] = value
    with contextlib.suppress(StraylineError):
        json.dumps(residuals(casefile.parse(json.dumps(case).encode(), toml=False)), allow_nan=False)
