"""Exact elimination over fractions, with sparse rows."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction

Row = Mapping[int, Fraction]
"""A sparse row: column to entry; absent entries are zero."""


@dataclass(frozen=True)
class Reduced:
    """A matrix in reduced row echelon form: per pivot column its row (1 there, 0 in others)."""

    columns: int
    rows: Mapping[int, Row]

    @property
    def rank(self) -> int:
        return len(self.rows)

    @property
    def null_space(self) -> tuple[dict[int, Fraction], ...]:
        """One vector for each column without a pivot: 1 there, and what the rows then demand."""
        vectors = []
        for free in range(self.columns):
            if free not in self.rows:
                vector = {free: Fraction(1)}
                for pivot, row in self.rows.items():
                    if free in row:
                        vector[pivot] = -row[free]
                vectors.append(vector)
        return tuple(vectors)


def reduce_rows(rows: Sequence[Row], columns: int, pivots_before: int | None = None) -> Reduced:
    """Reduce rows exactly; the pivot of each row is its first column that is still free.

    Args:
        rows: the matrix, m sparse rows.
        columns: number of columns n.
        pivots_before: take pivots only in columns below this one (right-hand sides stand behind);
            default n.

    Returns:
        The reduced form; ``rank`` is exact. Source: Gauss-Jordan elimination.

    >>> reduce_rows([{0: Fraction(1), 1: Fraction(1)}, {0: Fraction(2), 1: Fraction(2)}], 2).rank
    1
    """
    bound = columns if pivots_before is None else pivots_before
    reduced: dict[int, dict[int, Fraction]] = {}
    holders: dict[int, set[int]] = {}  # column -> pivots whose rows hold an entry there
    for source in rows:
        row = {column: value for column, value in source.items() if value}
        for column in [c for c in row if c in reduced]:
            _subtract(row, reduced[column], row[column])
        pivot = min((column for column in row if column < bound), default=None)
        if pivot is None:
            continue
        scale = row[pivot]
        row = {column: value / scale for column, value in row.items()}
        for other in list(holders.get(pivot, ())):
            target = reduced[other]
            before = set(target)
            _subtract(target, row, target[pivot])
            for column in before - set(target):
                holders[column].discard(other)
            for column in set(target) - before:
                holders.setdefault(column, set()).add(other)
        reduced[pivot] = row
        for column in row:
            holders.setdefault(column, set()).add(pivot)
    return Reduced(columns, reduced)


def _subtract(row: dict[int, Fraction], other: Row, factor: Fraction) -> None:
    for column, value in other.items():
        remainder = row.get(column, Fraction(0)) - factor * value
        if remainder:
            row[column] = remainder
        else:
            row.pop(column, None)


def solve(rows: Sequence[Row], size: int, sides: Sequence[Row]) -> list[list[Fraction]]:
    """Solve a square system exactly for several right-hand sides.

    Args:
        rows: n sparse rows of an n x n matrix.
        size: n.
        sides: each right-hand side, sparse by row index.

    Returns:
        One list of n values per right-hand side.

    Raises:
        ZeroDivisionError: the matrix is singular.

    >>> solve([{0: Fraction(2)}, {0: Fraction(1), 1: Fraction(1)}], 2, [{0: Fraction(4)}])
    [[Fraction(2, 1), Fraction(-2, 1)]]
    """
    extended: list[dict[int, Fraction]] = [dict(row) for row in rows]
    for index, side in enumerate(sides):
        for row, value in side.items():
            extended[row][size + index] = value
    reduced = reduce_rows(extended, size + len(sides), pivots_before=size)
    if reduced.rank < size:
        raise ZeroDivisionError("the system is singular")
    zero = Fraction(0)
    return [
        [reduced.rows[unknown].get(size + index, zero) for unknown in range(size)]
        for index in range(len(sides))
    ]
