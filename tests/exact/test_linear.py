"""Exact elimination against sympy's matrices."""

from __future__ import annotations

from fractions import Fraction
from random import Random

import pytest
from sympy import Matrix, Rational  # type: ignore[import-untyped]

from calcpack.exact.linear import reduce_rows, solve

SEEDS = range(15)
Dense = list[list[Fraction]]


def random_matrix(rng: Random, rows: int, columns: int) -> Dense:
    """Half of the entries are zero; now and then a row repeats others, so that the rank drops."""
    matrix: Dense = []
    for _ in range(rows):
        if len(matrix) > 1 and rng.random() < 0.3:
            one, two = rng.sample(matrix, 2)
            matrix.append([a * 2 - b / 3 for a, b in zip(one, two, strict=True)])
        else:
            matrix.append(
                [
                    Fraction(rng.randint(-9, 9), rng.choice((1, 7))) * rng.randint(0, 1)
                    for _ in range(columns)
                ]
            )
    return matrix


def sparse(matrix: Dense) -> list[dict[int, Fraction]]:
    return [{i: value for i, value in enumerate(row) if value} for row in matrix]


def in_sympy(matrix: Dense) -> Matrix:
    return Matrix([[Rational(v.numerator, v.denominator) for v in row] for row in matrix])


@pytest.mark.parametrize("seed", SEEDS)
def test_reduced_form_rank_and_null_space(seed: int) -> None:
    rng = Random(seed)
    columns = rng.randint(2, 6)
    matrix = random_matrix(rng, rng.randint(2, 6), columns)
    ours, (theirs, pivots) = reduce_rows(sparse(matrix), columns), in_sympy(matrix).rref()
    assert ours.rank == in_sympy(matrix).rank()
    assert len(ours.null_space) == columns - ours.rank
    for vector in ours.null_space:
        for row in matrix:
            assert sum(row[i] * value for i, value in vector.items()) == 0
    assert sorted(ours.rows) == list(pivots)
    for index, pivot in enumerate(pivots):
        row = [Fraction(int(v.p), int(v.q)) for v in theirs.row(index)]
        assert ours.rows[pivot] == sparse([row])[0]


@pytest.mark.parametrize("seed", SEEDS)
def test_solutions(seed: int) -> None:
    rng = Random(seed)
    size = rng.randint(1, 6)
    matrix = random_matrix(rng, size, size)
    sides = random_matrix(rng, 2, size)
    if in_sympy(matrix).det() == 0:
        with pytest.raises(ZeroDivisionError, match="singular"):
            solve(sparse(matrix), size, sparse(sides))
        return
    for ours, side in zip(solve(sparse(matrix), size, sparse(sides)), sides, strict=True):
        theirs = in_sympy(matrix).LUsolve(in_sympy([side]).T)
        assert ours == [Fraction(int(v.p), int(v.q)) for v in theirs]


def test_both_outcomes_were_met() -> None:
    """The seeds above hold singular and regular matrices."""
    regular = 0
    for seed in SEEDS:
        rng = Random(seed)
        size = rng.randint(1, 6)
        regular += in_sympy(random_matrix(rng, size, size)).det() != 0
    assert 3 <= regular <= len(SEEDS) - 3
