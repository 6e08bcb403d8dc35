"""Runs inside Pyodide at build: every .py of a zip becomes a .pyc, so that no phone compiles Python at every start.

The archive comes out byte for byte the same for the same input: entries sorted, one fixed date, unchecked-hash .pyc (no times in them).
"""

from __future__ import annotations

import base64
import hashlib
import py_compile
import tempfile
import zipfile
from pathlib import Path, PurePosixPath

_DATE = (2020, 1, 1, 0, 0, 0)


def compile_zip(source: str, target: str, shown: str) -> None:
    """Write zip `target` with the entries of zip `source`, each NAME.py as NAME.pyc.

    shown -- the folder that tracebacks name. Docstrings and asserts are left out (as `python -OO` does): nobody reads them on a phone.
    A wheel's RECORD is written anew. Raises py_compile.PyCompileError for a file that does not compile.
    """
    with zipfile.ZipFile(source) as archive:
        entries = {name: archive.read(name) for name in archive.namelist() if not name.endswith("/")}
    made = {}
    for name, body in sorted(entries.items()):
        made.update({f"{name}c": _compiled(body, f"{shown}/{name}")} if name.endswith(".py") else {name: body})
    for name in made:
        if PurePosixPath(name).match("*.dist-info/RECORD"):
            made[name] = _record(made, name)
    with zipfile.ZipFile(target, "w", zipfile.ZIP_DEFLATED, compresslevel=9) as archive:
        for name, body in made.items():
            info = zipfile.ZipInfo(name, _DATE)
            info.compress_type = zipfile.ZIP_DEFLATED
            info.external_attr = 0o644 << 16
            archive.writestr(info, body)


def _compiled(body: bytes, shown: str) -> bytes:
    with tempfile.TemporaryDirectory() as folder:
        plain, compiled = Path(folder, "source.py"), Path(folder, "source.pyc")
        plain.write_bytes(body)
        mode = py_compile.PycInvalidationMode.UNCHECKED_HASH
        py_compile.compile(str(plain), str(compiled), dfile=shown, doraise=True, optimize=2, invalidation_mode=mode)
        return compiled.read_bytes()


def _record(entries: dict[str, bytes], itself: str) -> bytes:
    """The RECORD of a wheel with these entries (Python packaging's specification of recorded projects)."""
    lines = []
    for name, body in entries.items():
        digest = base64.urlsafe_b64encode(hashlib.sha256(body).digest()).rstrip(b"=").decode()
        lines.append(f"{name},," if name == itself else f"{name},sha256={digest},{len(body)}")
    return "\n".join([*lines, ""]).encode()
