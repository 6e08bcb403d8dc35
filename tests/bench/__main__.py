"""`python3 tests bench [NAME...]`: prints one table; exit status 1 when a line misses what it must reach.

Each file bench_NAME.py here has `rows()`, which yields Row after Row.
"""

from __future__ import annotations

import importlib
import shutil
import sys
from pathlib import Path

HERE = Path(__file__).resolve().parent
for folder in ("core", "webui", "tests/browser", "tests/core"):
    sys.path.insert(0, str(HERE.parents[1] / folder))


def main(wanted: list[str]) -> int:
    """Run the named benchmarks, or all of them, and return the exit status."""
    if not shutil.which("chromium"):
        print("chromium is missing; install it (on Debian or Ubuntu: apt-get install chromium)", file=sys.stderr)
        return 1
    names = sorted(path.stem.removeprefix("bench_") for path in HERE.glob("bench_*.py"))
    missed = 0
    print(f"{'':<62} {'measured':>12} {'must reach':>12}")
    for name in wanted or names:
        for row in importlib.import_module(f"bench_{name}").rows():
            missed += row.missed
            print(f"{row.name:<62} {row.shown():>12} {row.bound():>12}{'  MISSED' if row.missed else ''}", flush=True)
            if row.note:
                print(f"  {row.note}", flush=True)
    return 1 if missed else 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
