"""`python3 tests study`: plays drawn cases through the whole diagnosis and prints how good it is. Resumable: what was played is kept.

A run is a file of one JSON record a line, named by a mark of the code it was played with and by its seed; a second start plays only
what is missing. Where the core, or how cases are drawn and played, has changed, a run starts anew; how they are scored may change.
"""

from __future__ import annotations

import argparse
import hashlib
import json
import sys
import time
from concurrent.futures import ProcessPoolExecutor
from pathlib import Path
from typing import TYPE_CHECKING, Any

import strayline
from cases import VARIANTS, Case, draw
from player import POLICIES, ROWS, Row, play
from plots import reliability_plot
from referee import World
from scores import reliability
from tables import chosen, study

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

HERE = Path(__file__).resolve().parent
KEPT = HERE.parents[1] / ".strayline" / "study"
PLAYING = ("cases", "referee", "witness", "player", "forbidden")
KEY = ("number", "variant", "row", "policy", "wrong")
CHUNK = 24  # cases of one stated set-up, whose tables are then made once

Play = tuple[int, str, str, str, float]


def main(arguments: list[str]) -> int:
    """Play what is missing, print the study, and return the exit status."""
    options = _options(arguments)
    KEPT.mkdir(parents=True, exist_ok=True)
    records = [record for seed in options.seed for record in _run(seed, options)]
    report = study(records, options.wrong)
    print(report)
    plain = chosen(records, variant="", policy="flow", wrong=options.wrong)
    curves = {str(row): reliability(chosen(plain, row=str(row))) for row in options.rows if chosen(plain, row=str(row))}
    picture = options.out or KEPT / "reliability.png"
    colours = reliability_plot(picture, curves)
    print(f"\n{picture}: claimed across, so up; " + ", ".join(f"{name} rgb{colour}" for name, colour in colours.items()))
    return 0


def _options(arguments: list[str]) -> argparse.Namespace:
    parser = argparse.ArgumentParser(prog="python3 tests study", description=__doc__)
    parser.add_argument("--cases", type=int, default=2000, help="cases a row")
    parser.add_argument("--seed", type=int, nargs="+", default=[1])
    parser.add_argument("--rows", type=_row, nargs="+", default=list(ROWS), help="role/tools")
    parser.add_argument("--wrong", type=float, default=0.05, help="share of wrong answers of the main run")
    parser.add_argument("--rates", type=float, nargs="*", default=[], help="other shares of wrong answers to print as well")
    parser.add_argument("--policies", nargs="+", choices=POLICIES, default=["flow", "fixed", "probable"])
    parser.add_argument("--variants", nargs="*", choices=[name for name in VARIANTS if name], default=[])
    parser.add_argument("--variant-cases", type=int, default=None, help="cases a row in each variant")
    parser.add_argument("--workers", type=int, default=2)
    parser.add_argument("--out", type=Path, default=None, help="where the reliability plot goes")
    return parser.parse_args(arguments)


def _row(text: str) -> Row:
    found = {str(row): row for row in ROWS}
    if text not in found:
        raise argparse.ArgumentTypeError(f"one of {', '.join(found)}")
    return found[text]


def _wanted(options: argparse.Namespace) -> Iterator[tuple[int, str, Row, str, float]]:
    """Every play that was asked for: number, variant, row, policy, share of wrong answers."""
    for number in range(options.cases):
        for row in options.rows:
            for policy in options.policies:
                yield number, "", row, policy, options.wrong
            for rate in options.rates:
                yield number, "", row, "flow", rate
    fewer = options.cases if options.variant_cases is None else options.variant_cases
    for variant in options.variants:
        for number in range(fewer):
            for row in options.rows:
                yield number, variant, row, "flow", options.wrong


def _run(seed: int, options: argparse.Namespace) -> list[dict[str, Any]]:
    """The records of one seed, those kept and those played now."""
    kept = KEPT / f"{_mark()}-{seed}.jsonl"
    wanted = {(number, variant, str(row), policy, wrong): row for number, variant, row, policy, wrong in _wanted(options)}
    found = {tuple(record[name] for name in KEY): record for record in _read(kept)}
    missing: dict[tuple[int, str], list[tuple[Row, str, float]]] = {}
    for key, row in wanted.items():
        if key not in found:
            missing.setdefault((key[0], key[1]), []).append((row, key[3], key[4]))
    started, todo, done = time.monotonic(), sum(map(len, missing.values())), 0
    with kept.open("a", encoding="utf-8") as file, ProcessPoolExecutor(options.workers) as pool:
        cases = list(pool.map(_draw, [(seed, number, variant) for number, variant in missing], chunksize=8))
        for records in pool.map(_play, _chunks(cases, missing)):
            for record in records:
                file.write(json.dumps(record) + "\n")
                found[tuple(record[name] for name in KEY)] = record
            file.flush()
            done += len(records)
            print(f"\rseed {seed}: {done} of {todo} played in {time.monotonic() - started:.0f} s", end="", file=sys.stderr)
    if todo:
        print(file=sys.stderr)
    return [found[key] for key in wanted if key in found]


def _mark() -> str:
    """A mark of all code that a record depends on: the core that is imported, and what draws and plays here."""
    digest = hashlib.sha256()
    for path in (*sorted(Path(strayline.__file__).parent.rglob("*.py")), *(HERE / f"{name}.py" for name in PLAYING)):
        digest.update(path.read_bytes())
    return digest.hexdigest()[:12]


def _read(kept: Path) -> Iterator[dict[str, Any]]:
    """The records that a file keeps; a last line that was cut short is left out."""
    if kept.exists():
        for line in kept.read_text("utf-8").splitlines():
            try:
                yield json.loads(line)
            except json.JSONDecodeError:
                continue


def _draw(what: tuple[int, int, str]) -> Case:
    return draw(*what)


Plays = list[tuple[Case, list[tuple[Row, str, float]]]]


def _chunks(cases: Sequence[Case], missing: dict[tuple[int, str], list[tuple[Row, str, float]]]) -> Iterator[Plays]:
    """Cases that say the same of their set-up, together."""
    ordered = sorted(cases, key=lambda case: (case.setup, case.variant, case.number))
    chunk: Plays = []
    for case in ordered:
        if chunk and (chunk[-1][0].setup != case.setup or len(chunk) >= CHUNK):
            yield chunk
            chunk = []
        chunk.append((case, missing[case.number, case.variant]))
    if chunk:
        yield chunk


def _play(chunk: Plays) -> list[dict[str, Any]]:
    records = []
    for case, plays in chunk:
        world = World(case)
        records += [play(case, world, row, policy, wrong) for row, policy, wrong in plays]
    return records


if __name__ == "__main__":
    sys.exit(main(sys.argv[1:]))
