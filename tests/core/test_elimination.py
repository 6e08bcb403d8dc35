"""The sparse factors, on matrices that no circuit was needed for."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from strayline.elimination import SingularError, eliminate


def rows_of(matrix: list[list[complex]]) -> list[dict[int, complex]]:
    """The matrix as rows without zeros off the diagonal."""
    return [{j: complex(entry) for j, entry in enumerate(row) if entry or i == j} for i, row in enumerate(matrix)]


def misses(matrix: list[list[complex]], potentials: int, right: list[complex]) -> float:
    """Largest error of any equation in the solution that the factors give, against the size of the solution."""
    x = eliminate(rows_of(matrix), potentials).solve({place: complex(value) for place, value in enumerate(right) if value})
    left = (sum(entry * value for entry, value in zip(row, x, strict=True)) for row in matrix)
    errors = (abs(got - wanted) for got, wanted in zip(left, right, strict=True))
    return max(errors) / max(1.0, *map(abs, x))


@st.composite
def symmetric(draw: st.DrawFn) -> tuple[list[list[complex]], int, list[complex]]:
    """A symmetric complex matrix of small whole numbers, how many of its unknowns are potentials, and a right-hand side."""
    size = draw(st.integers(1, 7))
    whole = st.integers(-3, 3)
    entry = st.one_of(st.just(0), st.builds(complex, whole, whole))
    matrix = [[0j] * size for _ in range(size)]
    for i in range(size):
        for j in range(i + 1):
            matrix[i][j] = matrix[j][i] = complex(draw(entry))
    return matrix, draw(st.integers(0, size)), [complex(draw(whole)) for _ in range(size)]


def determinant(matrix: list[list[complex]]) -> complex:
    """By expansion along rows: exact for small whole numbers."""
    if not matrix:
        return 1
    rest = [row[1:] for row in matrix]
    return sum((-1) ** i * row[0] * determinant(rest[:i] + rest[i + 1 :]) for i, row in enumerate(matrix) if row[0])


@settings(deadline=None, max_examples=300)
@given(symmetric())
def test_solves_or_refuses(case: tuple[list[list[complex]], int, list[complex]]) -> None:
    """Whatever stands in a symmetric matrix, it is solved to rounding if its determinant is not zero and refused if it is."""
    matrix, potentials, right = case
    if determinant(matrix) == 0:
        with pytest.raises(SingularError) as caught:
            eliminate(rows_of(matrix), potentials)
        assert caught.value.unknowns
    else:
        assert misses(matrix, potentials, right) < 1e-10


def test_zero_diagonal_takes_two_at_once() -> None:
    """Two unknowns with nothing on the diagonal are eliminated together, be they potentials, flows or one of each."""
    for potentials in (0, 1, 2):
        triangle = eliminate(rows_of([[0, 2], [2, 0]]), potentials)
        assert triangle.solve({0: 4 + 0j, 1: 6j}) == [3j, 2]


def test_a_chain_makes_no_fill() -> None:
    """In a chain each unknown leaves at most one neighbour behind, whatever the order of its numbers."""
    size = 60
    order = [(7 * place) % size for place in range(size)]
    matrix = [[0j] * size for _ in range(size)]
    for place in range(size):
        matrix[order[place]][order[place]] = 3
        if place:
            matrix[order[place]][order[place - 1]] = matrix[order[place - 1]][order[place]] = -1
    triangle = eliminate(rows_of(matrix), size)
    assert max(len(step.multipliers) for step in triangle.steps) <= 2
    assert sum(len(step.multipliers) for step in triangle.steps) == size - 1


def test_undetermined_unknowns_are_named() -> None:
    """A matrix that leaves two unknowns open names one of those, never the third."""
    with pytest.raises(SingularError) as caught:
        eliminate(rows_of([[1, -1, 0], [-1, 1, 0], [0, 0, 5]]), 3)
    assert set(caught.value.unknowns) <= {0, 1}
