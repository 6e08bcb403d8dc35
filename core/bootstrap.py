"""Hidden environments for `python3 webui` and `python3 tests`: made from locks, checked by a stamp, used as child processes.

Standard library only, and not part of the wheel. Everything lives in `.strayline/` and may be deleted at any time.
"""

from __future__ import annotations

import contextlib
import hashlib
import os
import shutil
import subprocess
import sys
import venv
from pathlib import Path
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterator

ROOT = Path(__file__).resolve().parent.parent
HIDDEN = ROOT / ".strayline"
PIP = ("-m", "pip", "--disable-pip-version-check")


class MissingToolError(Exception):
    """A tool that this machine lacks; the message is one sentence that says what to do about it."""


def environment(name: str, lock: Path) -> Path:
    """The Python of the hidden environment `name`, made from `lock` when it is missing or stale.

    Raises MissingToolError where Python cannot make environments, and when a package cannot be fetched.
    """
    folder = HIDDEN / name
    python = folder / ("Scripts/python.exe" if os.name == "nt" else "bin/python")
    stamp = _stamp(folder, lock.read_bytes())
    with _turn(name):
        if not _fresh(folder, stamp):
            _say(f"making the environment {folder.relative_to(ROOT)} (once)")
            shutil.rmtree(folder, ignore_errors=True)
            try:
                venv.create(folder, with_pip=True, symlinks=os.name != "nt")
            except (subprocess.CalledProcessError, OSError) as error:
                raise MissingToolError(
                    "This Python cannot make environments; install its venv part (on Debian or Ubuntu: apt-get install python3-venv)."
                ) from error
            if run(python, *PIP, "install", "--quiet", "--require-hashes", "-r", lock):
                raise _not_fetched(lock)
            _write_stamp(folder, stamp)
    return python


def node_tools(package: Path) -> Path:
    """The folder holding `node_modules` for `package` (a folder with package.json and its lock), installed when missing or stale.

    Raises MissingToolError without npm, and when a package cannot be fetched.
    """
    folder = HIDDEN / f"{package.name}_node"
    manifests = [package / "package.json", package / "package-lock.json"]
    stamp = _stamp(folder, b"".join(path.read_bytes() for path in manifests))
    with _turn(folder.name):
        if not _fresh(folder, stamp):
            _say(f"making the environment {folder.relative_to(ROOT)} (once)")
            shutil.rmtree(folder, ignore_errors=True)
            folder.mkdir(parents=True)
            for path in manifests:
                shutil.copy2(path, folder)
            if run(npm(), "ci", "--ignore-scripts", "--no-audit", "--no-fund", "--silent", cwd=folder):
                raise _not_fetched(manifests[1])
            _write_stamp(folder, stamp)
    return folder


def wheels(lock: Path, python_version: str) -> list[Path]:
    """The wheels of `lock`, made for another Python, as files in `.strayline/downloads`; fetched when missing or stale.

    Raises MissingToolError when one cannot be fetched.
    """
    folder = HIDDEN / "downloads" / lock.stem
    stamp = _stamp(folder, lock.read_bytes())
    python = environment("webui", ROOT / "webui" / "requirements.lock")
    with _turn("downloads"):
        if not _fresh(folder, stamp):
            shutil.rmtree(folder, ignore_errors=True)
            kind = ["--no-deps", "--only-binary=:all:", "--python-version", python_version]
            if run(python, *PIP, "download", "--quiet", "--require-hashes", "-r", lock, *kind, "-d", folder):
                raise _not_fetched(lock)
            _write_stamp(folder, stamp)
    return sorted(folder.glob("*.whl"))


def npm() -> str:
    """The path of npm: the machine's own, else that of the hidden environment `npm`, made from webui/node.lock."""
    return _node_tool("npm")


def node() -> str:
    """The path of node, found as npm is."""
    return _node_tool("node")


def run(*command: str | Path, **options: object) -> int:
    """Run a command as a child and return its exit status. Never exec: Windows has none."""
    return subprocess.run([str(part) for part in command], check=False, **options).returncode  # type: ignore[call-overload, no-any-return]


def _node_tool(name: str) -> str:
    if shutil.which("npm") and shutil.which("node"):
        return str(shutil.which(name))
    environment("npm", ROOT / "webui" / "node.lock")
    scripts = HIDDEN / "npm" / ("Scripts" if os.name == "nt" else "bin")
    # npm itself starts `node` by name, so the folder joins the path of this process and its children.
    os.environ["PATH"] = f"{scripts}{os.pathsep}{os.environ['PATH']}"
    if found := shutil.which(name):
        return found
    raise MissingToolError("Node.js with npm is missing and could not be fetched; install Node.js 20 or newer.")


def _stamp(folder: Path, lock: bytes) -> str:
    # An environment holds absolute paths and belongs to one interpreter: moved folders and a new Python make it stale.
    return "\n".join((hashlib.sha256(lock).hexdigest(), sys.version, os.path.realpath(sys.executable), str(folder)))


def _fresh(folder: Path, stamp: str) -> bool:
    path = folder / "stamp"
    return path.is_file() and path.read_text(encoding="utf-8") == stamp


def _write_stamp(folder: Path, stamp: str) -> None:
    # Last of all, so that an interrupted install is never taken for a whole one.
    (folder / "stamp").write_text(stamp, encoding="utf-8")


@contextlib.contextmanager
def _turn(name: str) -> Iterator[None]:
    """Hold the lock file of one environment, so that two commands started together do not both make it."""
    HIDDEN.mkdir(exist_ok=True)
    with (HIDDEN / f"{name}.turn").open("a+b") as handle:
        if os.name == "nt":
            import msvcrt

            handle.seek(0)
            msvcrt.locking(handle.fileno(), msvcrt.LK_LOCK, 1)  # type: ignore[attr-defined, unused-ignore]
        else:
            import fcntl

            fcntl.flock(handle, fcntl.LOCK_EX)
        yield


def _not_fetched(lock: Path) -> MissingToolError:
    return MissingToolError(f"The packages of {lock.relative_to(ROOT)} could not be fetched; connect to the network and try again.")


def _say(line: str) -> None:
    print(line, file=sys.stderr, flush=True)
