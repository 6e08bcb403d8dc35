"""The notices page: every part of others that the site carries, its licence, and where its source is.

Licence texts are not kept here: each is taken at build from a package, checked by hash, that carries it.
"""

from __future__ import annotations

import json
import zipfile
from dataclasses import dataclass
from html import escape
from pathlib import PurePosixPath
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence
    from pathlib import Path


@dataclass(frozen=True, slots=True)
class Part:
    """One bundled part. text -- the name of its licence file under licences/, "" where the page of the part must do."""

    name: str
    version: str
    licence: str
    holder: str
    home: str
    text: str = ""


# Linked into Pyodide's WebAssembly file; their versions are those of that release of Pyodide.
_INSIDE_RUNTIME = (
    Part("Emscripten and musl", "", "MIT", "the Emscripten authors; Rich Felker and others", "https://emscripten.org", "mit"),
    Part("libffi", "", "MIT", "Anthony Green, Red Hat, Inc. and others", "https://github.com/libffi/libffi", "mit"),
    Part(
        "Expat",
        "",
        "MIT",
        "Thai Open Source Software Center Ltd, Clark Cooper and the Expat maintainers",
        "https://libexpat.github.io",
        "mit",
    ),
    Part("HACL*", "", "MIT", "INRIA, CMU and Microsoft Corporation", "https://github.com/hacl-star/hacl-star", "mit"),
    Part("mpdecimal", "", "BSD-2-Clause", "Stefan Krah", "https://www.bytereef.org/mpdecimal/", "bsd-2-clause"),
    Part("Zstandard", "", "BSD-3-Clause", "Meta Platforms, Inc. and affiliates", "https://github.com/facebook/zstd"),
    Part("zlib", "", "zlib licence", "Jean-loup Gailly and Mark Adler", "https://zlib.net"),
    Part("bzip2", "", "bzip2 licence", "Julian Seward", "https://sourceware.org/bzip2/"),
    Part("XZ Utils (liblzma)", "", "0BSD", "the XZ Utils authors", "https://tukaani.org/xz/"),
    Part("SQLite", "", "public domain", "nobody", "https://www.sqlite.org"),
)


def parts(modules: Path) -> tuple[Part, ...]:
    """What the site carries, with the versions found in `modules` (a node_modules folder)."""
    pyodide, idb = (json.loads((modules / name / "package.json").read_text(encoding="utf-8"))["version"] for name in ("pyodide", "idb"))
    cpython = json.loads((modules / "pyodide" / "pyodide-lock.json").read_text(encoding="utf-8"))["info"]["python"]
    return (
        Part("Pyodide", pyodide, "MPL-2.0", "the Pyodide contributors and Mozilla", "https://github.com/pyodide/pyodide", "mpl-2.0"),
        Part(
            "CPython and its standard library",
            cpython,
            "PSF-2.0",
            "the Python Software Foundation",
            "https://github.com/python/cpython",
            "psf-2.0",
        ),
        Part("idb", idb, "ISC", "Jake Archibald", "https://github.com/jakearchibald/idb", "isc"),
        *_INSIDE_RUNTIME,
    )


def licences(modules: Path, wheels: Sequence[Path]) -> dict[str, str]:
    """Licence texts by name, read from packages that carry them. Raises KeyError when a package stops carrying its text."""
    mit = (modules / "ws" / "LICENSE").read_text(encoding="utf-8")
    return {
        "mpl-2.0": _in_wheel(wheels, "micropip-*.dist-info/licenses/LICENSE"),
        "psf-2.0": _in_wheel(wheels, "typing_extensions-*.dist-info/licenses/LICENSE"),
        "bsd-2-clause": _terms(_in_wheel(wheels, "micropip/_vendored/packaging/LICENSE.BSD"), "Redistribution and use"),
        "mit": _terms(mit, "Permission is hereby granted"),
        "isc": (modules / "idb" / "LICENSE").read_text(encoding="utf-8"),
    }


def listing(found: Sequence[Part]) -> str:
    """The list as HTML, licence texts linked as licences/NAME.txt."""
    items = "\n".join(_item(part) for part in found)
    return (
        "<p>Strayline carries the parts below. Each keeps its own licence; nothing in them was changed, but that the modules of the\n"
        f"standard library are stored compiled. Their source is at the address beside each.</p>\n<ul>\n{items}\n</ul>"
    )


def _item(part: Part) -> str:
    licence = escape(part.licence)
    linked = f'<a href="licences/{part.text}.txt">{licence}</a>' if part.text else licence
    name = escape(f"{part.name} {part.version}".strip())
    return f'<li><strong>{name}</strong> – {linked}; {escape(part.holder)}; <a href="{escape(part.home)}" rel="noreferrer">source</a></li>'


def _in_wheel(wheels: Sequence[Path], pattern: str) -> str:
    for wheel in wheels:
        with zipfile.ZipFile(wheel) as archive:
            for name in archive.namelist():
                if PurePosixPath(name).match(pattern):
                    return archive.read(name).decode()
    raise KeyError(pattern)


def _terms(text: str, opening: str) -> str:
    """A licence's terms without the copyright lines of the package it was read from; the page names the holders."""
    return text[text.index(opening) :]
