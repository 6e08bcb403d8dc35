"""Sparse factors of a complex symmetric matrix whose unknowns are potentials and flows; it knows no circuits.

The matrix is [[Y, B], [Bᵀ, -Z]]: a block Y among the potentials, a block -Z among the flows, and B between them. It is factored as
L D Lᵀ on dictionaries of rows, in order of least degree, where D holds single numbers and 2 × 2 blocks:

- a potential goes together with the flow of least |Z| that touches it, as one 2 × 2 block, while |Y Z| ≤ |B|². This keeps small
  impedances as sums of small impedances, and a Z of zero needs no exception;
- a potential without such a flow goes alone, once its pivot is not small against its row;
- a flow goes alone only after every potential it touches;
- what this order cannot finish (it is rare, and small) is ended by complete pivoting, single or 2 × 2, after Bunch and Parlett,
  "Direct methods for solving symmetric indefinite systems of linear equations", SIAM J. Numer. Anal. 8 (1971) 639-655.

Least degree: Tinney and Walker, "Direct solutions of sparse network equations by optimally ordered triangular factorization", Proc. IEEE
55 (1967) 1801-1809. No pivot is ever nudged: a matrix without a unique solution raises SingularError.
"""

from __future__ import annotations

import heapq
from dataclasses import dataclass
from typing import TYPE_CHECKING, NamedTuple

if TYPE_CHECKING:
    from collections.abc import Mapping

Row = dict[int, complex]

ROOM_FOR_SINGLE = 0.1  # a single pivot may be this fraction of the largest entry beside it: multipliers stay below ten
LOST = 1e-13  # an entry this small against the row it came from is what rounding left of a cancellation, not a number
PARLETT = 0.6403882032022076  # (1 + sqrt 17) / 8, Bunch and Parlett's bound between single and 2 × 2 pivots


class SingularError(Exception):
    """The rows of the matrix do not determine these unknowns."""

    def __init__(self, unknowns: tuple[int, ...]) -> None:
        super().__init__(f"unknowns {unknowns} are not determined")
        self.unknowns = unknowns


class Single(NamedTuple):
    """One eliminated unknown: the inverse of its pivot and its multipliers in the unknowns left."""

    unknown: int
    inverse: complex
    multipliers: list[tuple[int, complex]]


class Pair(NamedTuple):
    """Two unknowns eliminated together: the inverse [[p, q], [q, r]] of their block and (unknown, first, second) multipliers."""

    first: int
    second: int
    p: complex
    q: complex
    r: complex
    multipliers: list[tuple[int, complex, complex]]


@dataclass(frozen=True, slots=True)
class Triangle:
    """The factors, in order of elimination, of a matrix of `size` unknowns."""

    size: int
    steps: tuple[Single | Pair, ...]
    places: tuple[int, ...]  # for every unknown the number of the step that eliminates it
    parents: tuple[int, ...]  # for every step the first later one that it changes, -1 for none: the elimination tree

    def form(self, right: Mapping[int, complex]) -> complex:
        """The quadratic form: `right` times the solution for `right`, from its non-zero entries.

        The matrix is symmetric, so with y = the eliminated `right` it is y D^-1 y, and only the steps that its entries reach are gone
        through, up the elimination tree: no solution is made.
        """
        x = [0j] * self.size
        reached: set[int] = set()
        for unknown, value in right.items():
            x[unknown] = value
            place = self.places[unknown]
            while place >= 0 and place not in reached:
                reached.add(place)
                place = self.parents[place]
        total = 0j
        for place in sorted(reached):
            step = self.steps[place]
            if isinstance(step, Pair):
                one, two = x[step.first], x[step.second]
                p_one, q_two = step.p * one + step.q * two, step.q * one + step.r * two
                total += one * p_one + two * q_two
                for unknown, by_one, by_two in step.multipliers:
                    x[unknown] -= by_one * one + by_two * two
            else:
                one = x[step.unknown]
                total += one * one * step.inverse
                for unknown, by_one in step.multipliers:
                    x[unknown] -= by_one * one
        return total

    def solve(self, right: Mapping[int, complex]) -> list[complex]:
        """Values of all unknowns for a right-hand side given by its non-zero entries."""
        x = [0j] * self.size
        for unknown, value in right.items():
            x[unknown] = value
        for step in self.steps:
            if isinstance(step, Pair):
                one, two = x[step.first], x[step.second]
                if one or two:
                    for unknown, by_one, by_two in step.multipliers:
                        x[unknown] -= by_one * one + by_two * two
                    x[step.first] = step.p * one + step.q * two
                    x[step.second] = step.q * one + step.r * two
            elif one := x[step.unknown]:
                for unknown, by_one in step.multipliers:
                    x[unknown] -= by_one * one
                x[step.unknown] = one * step.inverse
        for step in reversed(self.steps):
            if isinstance(step, Pair):
                one, two = x[step.first], x[step.second]
                for unknown, by_one, by_two in step.multipliers:
                    value = x[unknown]
                    one -= by_one * value
                    two -= by_two * value
                x[step.first], x[step.second] = one, two
            else:
                one = x[step.unknown]
                for unknown, by_one in step.multipliers:
                    one -= by_one * x[unknown]
                x[step.unknown] = one
        return x


def eliminate(rows: list[Row], potentials: int) -> Triangle:
    """Factor the symmetric matrix held as full `rows` (which it uses up); the first `potentials` unknowns are potentials, the rest flows.

    Every row must hold its diagonal entry, zero or not. Raises SingularError with the unknowns that no equation determines.
    """
    scale = [max(map(abs, row.values())) for row in rows]
    left = set(range(len(rows)))
    steps: list[Single | Pair] = []
    queue = [(len(row), unknown) for unknown, row in enumerate(rows)]
    heapq.heapify(queue)
    while queue:
        degree, unknown = heapq.heappop(queue)
        if unknown not in left or len(rows[unknown]) != degree:
            continue  # gone, or queued again since with its present degree
        chosen = _choose(rows, unknown, potentials, scale)
        if not chosen:
            continue  # it is queued again when its row changes, and left to complete pivoting if it never does
        step = _take(rows, chosen)
        steps.append(step)
        left.difference_update(chosen)
        for entry in step.multipliers:
            heapq.heappush(queue, (len(rows[entry[0]]), entry[0]))
    while left:
        chosen = _choose_from_all(rows, left, scale)
        steps.append(_take(rows, chosen))
        left.difference_update(chosen)
    places = [0] * len(rows)
    for number, step in enumerate(steps):
        for unknown in (step.first, step.second) if isinstance(step, Pair) else (step.unknown,):
            places[unknown] = number
    parents = tuple(min((places[entry[0]] for entry in step.multipliers), default=-1) for step in steps)
    return Triangle(len(rows), tuple(steps), tuple(places), parents)


def _choose(rows: list[Row], unknown: int, potentials: int, scale: list[float]) -> tuple[int, ...]:
    """The pivot that `unknown` leads, itself alone or with a flow; empty when it must wait."""
    row = rows[unknown]
    pivot = abs(row[unknown])
    if unknown < potentials:
        flow, least = -1, 0.0
        for other, entry in row.items():
            if other >= potentials and (coupling := abs(entry)) > LOST * scale[unknown]:
                ratio = abs(rows[other][other]) / coupling / coupling
                if flow < 0 or ratio < least:
                    flow, least = other, ratio
        if flow >= 0 and pivot * least <= 1:
            block = row[unknown] * rows[flow][flow] - row[flow] * row[flow]
            if abs(block) >= ROOM_FOR_SINGLE * abs(row[flow]) ** 2:
                return unknown, flow
    elif any(other < potentials for other in row):
        return ()
    largest = max((abs(entry) for other, entry in row.items() if other != unknown), default=0.0)
    if pivot < ROOM_FOR_SINGLE * largest or pivot <= LOST * scale[unknown]:
        return ()
    return (unknown,)


def _choose_from_all(rows: list[Row], left: set[int], scale: list[float]) -> tuple[int, ...]:
    """The largest single or 2 × 2 pivot among all that is left."""
    single, alone = max((abs(rows[unknown][unknown]), -unknown) for unknown in left)
    beside, one, two = max(
        ((abs(entry), -unknown, -other) for unknown in left for other, entry in rows[unknown].items() if other > unknown),
        default=(0.0, 0, 0),
    )
    if max(single, beside) <= LOST * max(scale[unknown] for unknown in left):
        raise SingularError(tuple(sorted(left)))
    return (-alone,) if single >= PARLETT * beside else (-one, -two)


def _take(rows: list[Row], chosen: tuple[int, ...]) -> Single | Pair:
    """Eliminate the chosen pivot from the rows that are left."""
    return _take_single(rows, *chosen) if len(chosen) == 1 else _take_pair(rows, *chosen)


def _take_single(rows: list[Row], unknown: int) -> Single:
    row = rows[unknown]
    rows[unknown] = {}
    inverse = 1 / row.pop(unknown)
    entries = list(row.items())
    multipliers = []
    for place, (other, entry) in enumerate(entries, 1):
        by = entry * inverse
        multipliers.append((other, by))
        target = rows[other]
        del target[unknown]
        target[other] -= by * entry
        for beside, further in entries[place:]:
            _subtract(rows, target, other, beside, by * further)
    return Single(unknown, inverse, multipliers)


def _take_pair(rows: list[Row], first: int, second: int) -> Pair:
    one, two = rows[first], rows[second]
    rows[first] = rows[second] = {}
    a, b, c = one.pop(first), one.pop(second), two.pop(second)
    del two[first]
    block = a * c - b * b
    p, q, r = c / block, -b / block, a / block
    entries = [(other, entry, two.pop(other, 0j)) for other, entry in one.items()]
    entries += [(other, 0j, entry) for other, entry in two.items()]
    multipliers = []
    for place, (other, x, y) in enumerate(entries, 1):
        by_one, by_two = p * x + q * y, q * x + r * y
        multipliers.append((other, by_one, by_two))
        target = rows[other]
        target.pop(first, None)
        target.pop(second, None)
        target[other] -= by_one * x + by_two * y
        for beside, further_x, further_y in entries[place:]:
            _subtract(rows, target, other, beside, by_one * further_x + by_two * further_y)
    return Pair(first, second, p, q, r, multipliers)


def _subtract(rows: list[Row], target: Row, row: int, column: int, taken: complex) -> None:
    """Take from an entry and its mirror image; an exact zero leaves no entry, so that a closed loop really lets go of its potentials."""
    if column in target:
        value = target[column] - taken
        if value:
            target[column] = rows[column][row] = value
        else:
            del target[column]
            del rows[column][row]
    elif taken:
        target[column] = rows[column][row] = -taken
