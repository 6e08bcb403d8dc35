"""Builds the site: the page, its scripts, the core as a wheel, and the Python that runs it, in one folder of plain files.

What comes out depends on what goes in and on nothing else: two builds of one tree give the same bytes, and the build id is their hash.
"""

from __future__ import annotations

import gzip
import hashlib
import json
import shutil
import subprocess
import sys
import tempfile
from pathlib import Path

import bootstrap
import build_notices
import policy
import static_pages

HERE = Path(__file__).resolve().parent
CORE = bootstrap.ROOT / "core"
SITE = bootstrap.HIDDEN / "site"
KEPT = bootstrap.HIDDEN / "kept"

RUNTIME = ("pyodide.mjs", "pyodide.asm.mjs", "pyodide.asm.wasm")
STDLIB = "python_stdlib.zip"
LANGUAGE = "en"
# The budget of issue 2: everything but the runtime and its standard library, each file as gzip -9.
OWN_LIMIT_BYTES = 400_000


class BuildError(Exception):
    """The site could not be built; the message is one sentence."""


def build(out: Path = SITE) -> Path:
    """Build the site into folder `out` unless what is there was built from the same tree; returns `out`.

    Raises BuildError, and bootstrap.MissingToolError for a tool or package that cannot be had.
    """
    stamp = out.parent / f"{out.name}.stamp"
    inputs = _inputs()
    if out.is_dir() and stamp.is_file() and stamp.read_text(encoding="utf-8") == inputs:
        return out
    stamp.unlink(missing_ok=True)
    out.parent.mkdir(parents=True, exist_ok=True)
    with tempfile.TemporaryDirectory(dir=out.parent, prefix="build ") as name:
        made = Path(name, "site")
        _fill(made)
        shutil.rmtree(out, ignore_errors=True)
        made.rename(out)
    stamp.write_text(inputs, encoding="utf-8")
    return out


def files(site: Path) -> list[str]:
    """The paths of a built site's files, relative and sorted, with forward slashes."""
    return sorted(path.relative_to(site).as_posix() for path in site.rglob("*") if path.is_file())


def own_bytes(site: Path) -> dict[str, int]:
    """Bytes of each file of ours as gzip -9: all but Pyodide's files and the standard library."""
    theirs = {f"pyodide/{name}" for name in (*RUNTIME, STDLIB)}
    return {name: len(gzip.compress((site / name).read_bytes(), 9)) for name in files(site) if name not in theirs}


def write_service_worker(site: Path, identity: str) -> None:
    """Write the service worker into `site`, with the list of every other file that is there by now, under build id `identity`."""
    scripts = sorted((bootstrap.ROOT / "service_worker").glob("*.js"))
    own = {"precache.js", *(path.name for path in scripts)}  # the browser itself keeps a service worker's scripts
    rows = ((name, _hash((site / name).read_bytes()), (site / name).stat().st_size) for name in files(site) if name not in own)
    listed = "".join(f"  {json.dumps(row)},\n" for row in rows)
    for path in scripts:
        _copy(path, site / path.name)
    _write(site / "precache.js", f"export const BUILD = {json.dumps(identity)};\nexport const FILES = [\n{listed}];\n")


def _fill(site: Path) -> None:
    modules = bootstrap.node_tools(HERE) / "node_modules"
    resolver = bootstrap.wheels(HERE / "resolver.lock", "3.14")
    _copy_scripts(site, modules)
    _write_runtime(site / "pyodide", modules / "pyodide", resolver)
    for name, text in build_notices.licences(modules, resolver).items():
        _write(site / "licences" / f"{name}.txt", text)
    notices = build_notices.listing(build_notices.parts(modules))
    # The id is the hash of every file, with the pages still without it; then they are written again to show it.
    _write_pages(site, notices, "")
    identity = _hash("".join(f"{name} {_hash((site / name).read_bytes())}\n" for name in files(site)).encode())[:12]
    _write_pages(site, notices, identity)
    write_service_worker(site, identity)


def _copy_scripts(site: Path, modules: Path) -> None:
    names = ["styles.css", "manifest.webmanifest", "boot.js", "trusted.js", "worker.js"]
    found = [HERE / name for name in names] + sorted(HERE.glob("page/*.js")) + sorted(HERE.glob("icons/*"))
    for path in found:
        _copy(path, site / path.relative_to(HERE))
    _copy(modules / "idb" / "build" / "index.js", site / "page" / "vendor" / "idb.js")


def _write_runtime(folder: Path, pyodide: Path, resolver: list[Path]) -> None:
    for name in RUNTIME:
        _copy(pyodide / name, folder / name)
    _copy(_compiled_stdlib(pyodide), folder / STDLIB)
    with tempfile.TemporaryDirectory() as name:
        plain = _plain_wheel(Path(name))
        wheel = folder / plain.name
        _node(pyodide, "compile", plain, wheel, "strayline.whl")
        lock = Path(name, "lock.json")
        _node(pyodide, "freeze", folder / STDLIB, lock, wheel, *resolver)
        _write(folder / "pyodide-lock.json", _pruned(lock, wheel))
    _node(pyodide, "verify", folder)


def _plain_wheel(folder: Path) -> Path:
    python = bootstrap.environment("webui", HERE / "requirements.lock")
    command: list[str | Path] = ["-m", "hatchling", "build", "--target", "wheel", "--directory", folder]
    done = subprocess.run([python, *command], cwd=bootstrap.ROOT, check=False, capture_output=True, text=True)
    if done.returncode:
        raise BuildError(f"The core could not be made into a wheel: {done.stderr.strip()}")
    return next(folder.glob("*.whl"))


def _compiled_stdlib(pyodide: Path) -> Path:
    """The standard library as .pyc, kept from build to build: it takes most of a build and changes only with Pyodide."""
    source = pyodide / STDLIB
    key = _hash(b"".join(path.read_bytes() for path in (source, HERE / "compile_zip.py", HERE / "runtime.mjs")))[:16]
    kept = KEPT / key / STDLIB
    if not kept.is_file():
        shutil.rmtree(KEPT, ignore_errors=True)
        kept.parent.mkdir(parents=True)
        partial = kept.with_suffix(".partial")
        _node(pyodide, "compile", source, partial, "/lib/python.zip")
        partial.rename(kept)
    return kept


def _pruned(lock: Path, wheel: Path) -> str:
    """What micropip froze, without the hundreds of packages that we do not use and with file names instead of addresses."""
    frozen = json.loads(lock.read_text(encoding="utf-8"))
    entry = frozen["packages"]["strayline"]
    if entry["depends"] or entry["sha256"] != _hash(wheel.read_bytes()):
        raise BuildError(f"micropip resolved something else than the core alone: {entry}.")
    kept = {"info": frozen["info"], "packages": {"strayline": {**entry, "file_name": wheel.name}}}
    return json.dumps(kept, indent=1, sort_keys=True)


def _write_pages(site: Path, notices: str, identity: str) -> None:
    import strayline
    from strayline import screen

    sections = screen.static_sections(LANGUAGE)
    head = (
        f'<meta http-equiv="Content-Security-Policy" content="{policy.META}">\n'
        '    <link rel="manifest" href="manifest.webmanifest">\n'
        '    <link rel="icon" href="icons/icon.svg" type="image/svg+xml">\n'
        '    <link rel="apple-touch-icon" href="icons/icon-180.png">'
    )
    for name in ("index.html", "notices.html"):
        template = (HERE / name).read_text(encoding="utf-8")
        page = static_pages.render(template, sections, strayline.__version__, identity)
        _write(site / name, page.replace("<!-- build:head -->", head).replace("<!-- build:notices -->", notices))


def _node(pyodide: Path, step: str, *paths: Path | str) -> None:
    if bootstrap.run(bootstrap.node(), HERE / "runtime.mjs", pyodide, step, *paths):
        raise BuildError(f"Pyodide in Node failed at the step '{step}'; what it said stands above.")


def _inputs() -> str:
    """The hash of everything a build reads, the versions of this Python and the place included."""
    folders = (HERE, CORE / "strayline", bootstrap.ROOT / "service_worker")
    found = [path for folder in folders for path in folder.rglob("*") if path.is_file() and "__pycache__" not in path.parts]
    found += [CORE / "bootstrap.py", bootstrap.ROOT / "pyproject.toml"]
    lines = [f"{path.relative_to(bootstrap.ROOT).as_posix()} {_hash(path.read_bytes())}" for path in sorted(found)]
    return _hash("\n".join([*lines, sys.version]).encode())


def _hash(body: bytes) -> str:
    return hashlib.sha256(body).hexdigest()


def _copy(source: Path, target: Path) -> None:
    target.parent.mkdir(parents=True, exist_ok=True)
    shutil.copyfile(source, target)


def _write(target: Path, text: str) -> None:
    target.parent.mkdir(parents=True, exist_ok=True)
    target.write_text(text, encoding="utf-8", newline="\n")
