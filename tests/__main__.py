"""`python3 tests [full|bench|study] [arguments]`: makes its environment, runs the tests and every check, prints one summary.

With pytest arguments (`python3 tests -k phasor`) only pytest runs; `bench` and `study` are programs of their own, in their folders.
Exit status 0 only when everything that ran passed.
"""

from __future__ import annotations

import os
import subprocess
import sys
import time
from pathlib import Path
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Callable

HERE = Path(__file__).resolve().parent
ROOT = HERE.parent
sys.path.insert(0, str(ROOT / "core"))

import bootstrap  # noqa: E402  (core/ joins the path above)

# Where a tool is missing a check is skipped by name, except in CI, where nothing may be skipped unseen.
STRICT = os.environ.get("CI", "").lower() == "true"


def main(arguments: list[str]) -> int:
    """Run what the arguments ask for and return the exit status."""
    mode = arguments.pop(0) if arguments[:1] in (["full"], ["bench"], ["study"]) else ""
    try:
        python = bootstrap.environment("tests", HERE / "requirements.lock")
    except bootstrap.MissingToolError as error:
        print(error, file=sys.stderr)
        return 1
    if mode in ("bench", "study"):
        return bootstrap.run(python, HERE / mode, *arguments, cwd=ROOT, env=_environment())
    pytest = [python, "-m", "pytest", *([] if mode == "full" else ["-m", "not full"]), *arguments]
    rows = [_row("pytest", lambda: bootstrap.run(*pytest, cwd=ROOT, env=_environment()))]
    if not arguments:
        rows += [_row(name, lambda command=command: _quietly(command, ROOT)) for name, command in _python_checks(python).items()]
        rows += [_row(name, lambda script=script: _quietly(_node_command(script), ROOT / "webui")) for name, script in NODE_CHECKS.items()]
    print("\nsummary")
    for name, verdict, seconds in rows:
        print(f"  {name:<16} {verdict:<28} {seconds:6.1f} s")
    return 1 if any(verdict.startswith("FAILED") for _, verdict, _ in rows) else 0


def _python_checks(python: Path) -> dict[str, list[str | Path]]:
    typed = [path for folder in ("core", "webui") for path in sorted((ROOT / folder).glob("*.py")) if path.name != "__main__.py"]
    return {
        "ruff check": [python, "-m", "ruff", "check", "--quiet"],
        "ruff format": [python, "-m", "ruff", "format", "--check", "--quiet"],
        "mypy": [python, "-m", "mypy", "core/strayline", *typed],
        # The console script, since the package has no __main__; it lives beside the interpreter.
        "import-linter": [python.parent / f"lint-imports{python.suffix}", "--no-cache"],
    }


# Name -> the script inside node_modules and its arguments; run in webui/, where their settings are.
NODE_CHECKS: dict[str, list[str]] = {
    "biome": ["@biomejs/biome/bin/biome", "ci", ".", "../service_worker"],
    "tsc page": ["typescript/bin/tsc", "--project", "."],
    "tsc workers": ["typescript/bin/tsc", "--project", "../service_worker"],
}


def _node_command(script: list[str]) -> list[str | Path]:
    modules = bootstrap.node_tools(HERE) / "node_modules"
    return [bootstrap.node(), modules / script[0], *script[1:]]


def _row(name: str, check: Callable[[], int]) -> tuple[str, str, float]:
    started = time.monotonic()
    try:
        status = check()
        verdict = "passed" if status == 0 else f"FAILED (exit status {status})"
    except bootstrap.MissingToolError as error:
        print(f"{name}: {error}", file=sys.stderr)
        verdict = "FAILED (tool missing)" if STRICT else "skipped (tool missing)"
    return name, verdict, time.monotonic() - started


def _quietly(command: list[str | Path], folder: Path) -> int:
    """Run a check and show what it says only when it fails."""
    parts = [str(part) for part in command]
    done = subprocess.run(parts, cwd=folder, env=_environment(), check=False, stdout=subprocess.PIPE, stderr=subprocess.STDOUT)
    if done.returncode:
        print(f"\n$ {' '.join(parts)}", flush=True)
        sys.stdout.buffer.write(done.stdout)
        sys.stdout.flush()
    return done.returncode


def _environment() -> dict[str, str]:
    return {**os.environ, "PYTHONPATH": str(ROOT / "core"), "PYTHONDONTWRITEBYTECODE": "1"}


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
