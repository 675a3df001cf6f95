"""Compatibility: the lines of the redundants."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

from calcpack.exact.piecewise import Piecewise


@dataclass(frozen=True)
class Compatibility:
    """The equations F X + delta(x) = 0 of the force method, and how they are solved.

    Attributes:
        flexibility: F, symmetric, n x n.
        curves: delta_i(x), the displacement at redundant i under the unit load at x.
        multipliers: by (row, column), what of an earlier row is taken from a later one.
        pivots: the diagonal after elimination.
        reduced: the load terms after elimination.
        lines: the redundants' influence lines X_i(x).
    """

    flexibility: tuple[tuple[Fraction, ...], ...]
    curves: tuple[Piecewise, ...]
    multipliers: dict[tuple[int, int], Fraction]
    upper: tuple[tuple[Fraction, ...], ...]
    reduced: tuple[Piecewise, ...]
    lines: tuple[Piecewise, ...]


def solve_compatibility(
    flexibility: Sequence[Sequence[Fraction]], curves: Sequence[Piecewise]
) -> Compatibility:
    """Eliminate from the first to the last redundant, then put in from the last to the first.

    Rows without an entry below a pivot are left alone, so that a banded matrix costs no more than
    its band. Source: Gaussian elimination; F is positive definite, so no pivot is zero.
    """
    size = len(curves)
    rows = [list(row) for row in flexibility]
    loads = list(curves)
    multipliers: dict[tuple[int, int], Fraction] = {}
    for column in range(size):
        for row in range(column + 1, size):
            if rows[row][column]:
                factor = rows[row][column] / rows[column][column]
                multipliers[row, column] = factor
                rows[row] = [a - factor * b for a, b in zip(rows[row], rows[column], strict=True)]
                loads[row] = loads[row] - loads[column] * factor
    lines: dict[int, Piecewise] = {}
    for row in reversed(range(size)):
        total = loads[row]
        for column in range(row + 1, size):
            if rows[row][column]:
                total = total + lines[column] * rows[row][column]
        lines[row] = total / -rows[row][row]
    return Compatibility(
        tuple(tuple(row) for row in flexibility),
        tuple(curves),
        multipliers,
        tuple(tuple(row) for row in rows),
        tuple(loads),
        tuple(lines[index] for index in range(size)),
    )
