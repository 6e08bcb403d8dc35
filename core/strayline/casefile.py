"""A case file (TOML or JSON, schema `strayline-case`) -> checked sections. Bad files are told by key path, rule and value.

`installation` says what is plugged into what, `faults` what is really wrong (only `residuals`, `netlist` and tests read it),
`answers` what the person said, `expect` what a scenario must bring out.
"""

from __future__ import annotations

import dataclasses
import json
import re
import tomllib
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any, NoReturn

from strayline.catalogue.causes import CAUSE
from strayline.catalogue.questions import QUESTION
from strayline.catalogue.tests import TEST
from strayline.causes import Fault
from strayline.errors import CaseError
from strayline.installation import build
from strayline.parts import read
from strayline.session import FIXED, Answer

FORMAT = "strayline-case"
SCHEMA = 1
MAX_BYTES = 1_000_000
SECTIONS = ("format", "schema", "installation", "faults", "answers", "expect", "meta")


@dataclass(frozen=True, slots=True)
class Case:
    """The sections of one file; `installation` is the raw section or None."""

    installation: object
    faults: tuple[Fault, ...]
    answers: tuple[Answer, ...]
    expect: Mapping[str, Any]
    meta: Mapping[str, Any]


def load(path: str | Path) -> Case:
    """Read and check a case file. Raises CaseError naming the file."""
    file = str(path)
    try:
        with Path(path).open("rb") as stream:
            content = stream.read(MAX_BYTES + 1)
    except OSError as error:
        raise CaseError("file", f"cannot be read: {error.strerror}", file=file) from None
    try:
        return parse(content, toml=file.endswith(".toml"))
    except CaseError as error:
        raise error.in_file(file) from None


def parse(content: bytes, *, toml: bool) -> Case:
    """The checked sections of a file's bytes."""
    if len(content) > MAX_BYTES:
        raise CaseError("file", f"at most {MAX_BYTES // 1000} kB")
    try:
        text = content.decode("utf-8")
    except UnicodeDecodeError as error:
        raise CaseError("file", f"must be UTF-8 text; byte {error.start} is not") from None
    return read_case(_parse_toml(text) if toml else _parse_json(text))


def _parse_toml(text: str) -> object:
    try:
        return tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise CaseError("syntax", str(error)) from None
    except ValueError:  # Python refuses to read a whole number of thousands of digits
        raise CaseError("syntax", "a number is too long") from None
    except RecursionError:
        raise CaseError("syntax", "nested too deeply") from None


def _parse_json(text: str) -> object:
    try:
        return json.loads(text, object_pairs_hook=_unique, parse_constant=_no_constant)
    except json.JSONDecodeError as error:
        raise CaseError("syntax", f"{error.msg} (at line {error.lineno}, column {error.colno})") from None
    except ValueError:  # as in _parse_toml
        raise CaseError("syntax", "a number is too long") from None
    except RecursionError:
        raise CaseError("syntax", "nested too deeply") from None


def _unique(pairs: list[tuple[str, object]]) -> dict[str, object]:
    found: dict[str, object] = {}
    for key, value in pairs:
        if key in found:
            raise CaseError(key[:40], "the same key twice")
        found[key] = value
    return found


def _no_constant(name: str) -> NoReturn:
    raise CaseError("syntax", "must be a finite number", name)


def read_case(raw: object) -> Case:
    """Check the sections of a parsed file. A newer schema is refused and left untouched."""
    if not isinstance(raw, Mapping):
        raise CaseError("file", "must be a table of sections")
    raw = migrated(raw)
    for key in raw:
        if key not in SECTIONS:
            raise CaseError(str(key)[:40], f"unknown section; known are {', '.join(SECTIONS)}")
    for name, kind in (("expect", Mapping), ("meta", Mapping), ("faults", list), ("answers", list)):
        if name in raw and not isinstance(raw[name], kind):
            raise CaseError(name, "must be a table" if kind is Mapping else "must be a list", raw[name])
    if "installation" in raw:
        build(read(raw["installation"]))  # here, so that every command refuses the same files; each then reads the raw section itself
    faults = tuple(_fault(row, f"faults[{number}]") for number, row in enumerate(raw.get("faults", [])))
    answers = tuple(_answer(row, number, f"answers[{number}]") for number, row in enumerate(raw.get("answers", [])))
    return Case(raw.get("installation"), faults, answers, raw.get("expect", {}), raw.get("meta", {}))


MIGRATIONS: dict[int, Any] = {}  # from schema n to n + 1: one function per step


def migrated(raw: Mapping[str, Any]) -> Mapping[str, Any]:
    """The sections in the present schema."""
    if raw.get("format", FORMAT) != FORMAT:
        raise CaseError("format", f"must be {FORMAT}", raw["format"])
    schema = raw.get("schema")
    if isinstance(schema, bool) or not isinstance(schema, int) or schema < 1:
        raise CaseError("schema", "missing or not a whole number from 1", schema)
    if schema > SCHEMA:
        raise CaseError("schema", f"was written by a newer version; this one reads up to {SCHEMA}. The file was left as it is", schema)
    while schema < SCHEMA:
        raw = MIGRATIONS[schema](raw)
        schema += 1
    return raw


def _fault(row: object, path: str) -> Fault:
    if not isinstance(row, Mapping):
        raise CaseError(path, "must be a table", row)
    fields = {field.name: field for field in dataclasses.fields(Fault)}
    values: dict[str, Any] = {}
    for key, value in row.items():
        if key not in fields:
            raise CaseError(f"{path}.{key}", f"unknown key; known are {', '.join(fields)}")
        if key in ("cause", "at", "load"):
            if not isinstance(value, str):
                raise CaseError(f"{path}.{key}", "must be a name", value)
        elif isinstance(value, bool) or not isinstance(value, (int, float)) or not 0 <= value <= 1e9:
            raise CaseError(f"{path}.{key}", "must be a number from 0", value)
        values[key] = value if isinstance(value, str) else float(value)
    if values.get("cause") not in CAUSE:
        raise CaseError(f"{path}.cause", f"must be one of {', '.join(CAUSE)}", values.get("cause"))
    return Fault(**values)


def _answer(row: object, number: int, path: str) -> Answer:
    if not isinstance(row, Mapping):
        raise CaseError(path, "must be a table", row)
    for key in row:
        if key not in ("question", "subject", "value", "seq", "at"):
            raise CaseError(f"{path}.{key}", "unknown key; known are question, subject, value, seq, at")
    question, subject, value, seq = row.get("question"), row.get("subject"), row.get("value", ""), row.get("seq", number + 1)
    if not isinstance(question, str) or not (question in QUESTION or question in TEST or question == FIXED):
        raise CaseError(f"{path}.question", "no such question or test", question)
    if subject is not None and not isinstance(subject, str):
        raise CaseError(f"{path}.subject", "must be a name", subject)
    if question == FIXED and subject not in CAUSE:
        raise CaseError(f"{path}.subject", f"must be one of {', '.join(CAUSE)}", subject)
    if not isinstance(value, str) or len(value) > 200:
        raise CaseError(f"{path}.value", "must be text of at most 200 characters", value)
    if isinstance(seq, bool) or not isinstance(seq, int) or not 0 <= seq < 10**9:
        raise CaseError(f"{path}.seq", "must be a whole number from 0", seq)
    at = row.get("at", "")
    if not isinstance(at, str) or (at and not re.fullmatch(r"[0-9T:.+\-Z ]{1,40}", at)):
        raise CaseError(f"{path}.at", "must be a time in UTC", at)
    return Answer(question, subject or None, value, seq, at)
