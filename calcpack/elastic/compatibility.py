"""Compatibility: what the redundants must be so that the released beam closes again."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import TypeVar

from calcpack.elastic.released import Released, State
from calcpack.exact.piecewise import Piecewise
from calcpack.model.request import Effect

Term = TypeVar("Term", Fraction, Piecewise)


@dataclass(frozen=True)
class Elimination:
    """A symmetric matrix taken apart once: by (row, column) what of an earlier row is taken from a
    later one, and the rows that remain above and on the diagonal.

    Source: Gaussian elimination without exchange of rows; a flexibility matrix is positive
    definite, so no pivot is zero. Entries that are zero are left out, so a band stays a band.
    """

    size: int
    multipliers: Mapping[tuple[int, int], Fraction]
    upper: Mapping[tuple[int, int], Fraction]

    def forward(self, loads: Sequence[Term]) -> list[Term]:
        """The loads after the elimination."""
        reduced = list(loads)
        for (row, column), factor in self.multipliers.items():
            reduced[row] = reduced[row] - reduced[column] * factor
        return reduced

    def backward(self, reduced: Sequence[Term]) -> list[Term]:
        """The solution of F x = loads, from the last to the first, from the reduced loads."""
        found = list(reduced)
        for row in reversed(range(self.size)):
            for column in range(row + 1, self.size):
                if (row, column) in self.upper:
                    found[row] = found[row] - found[column] * self.upper[row, column]
            found[row] = found[row] / self.upper[row, row]
        return found

    def solve(self, loads: Sequence[Term]) -> list[Term]:
        return self.backward(self.forward(loads))


def eliminate(matrix: Sequence[Sequence[Fraction]]) -> Elimination:
    """Take a symmetric positive definite matrix apart, column by column."""
    size = len(matrix)
    rows = [{c: value for c, value in enumerate(row) if value} for row in matrix]
    multipliers: dict[tuple[int, int], Fraction] = {}
    for column in range(size):
        for row in range(column + 1, size):
            if column in rows[row]:
                factor = rows[row].pop(column) / rows[column][column]
                multipliers[row, column] = factor
                for other, value in rows[column].items():
                    if other > column:
                        left = rows[row].pop(other, Fraction(0)) - factor * value
                        if left:
                            rows[row][other] = left
    upper = {(row, c): value for row, entries in enumerate(rows) for c, value in entries.items()}
    return Elimination(size, multipliers, upper)


@dataclass(frozen=True)
class ForceMethod:
    """The force method for one beam.

    Attributes:
        released: the released beam.
        states: under each redundant alone, value 1.
        flexibility: EI_0 f_ij.
        elimination: of that matrix.
        curves: EI_0 delta_i(x), the displacement at redundant i under the unit load at x, which by
            reciprocity is the deflection at x under redundant i.
        lines: the influence lines of the redundants, solving F X + delta = 0.
    """

    released: Released
    states: tuple[State, ...]
    flexibility: tuple[tuple[Fraction, ...], ...]
    elimination: Elimination
    curves: tuple[Piecewise, ...]
    lines: Mapping[Effect, Piecewise]


def force_method(released: Released) -> ForceMethod:
    """Solve the compatibility equations for the unit load wherever it stands."""
    redundants = released.system.redundants
    states = tuple(released.under_redundant(one) for one in redundants)
    flexibility = tuple(
        tuple(released.flexibility(one, other) for other in states) for one in states
    )
    elimination = eliminate(flexibility)
    curves = tuple(released.curve(state) for state in states)
    lines = elimination.solve([-curve for curve in curves])
    return ForceMethod(
        released,
        states,
        flexibility,
        elimination,
        curves,
        dict(zip(redundants, lines, strict=True)),
    )


def deflection_line(method: ForceMethod, effect: Effect) -> Piecewise:
    """The line of a deflection (downward +) or rotation (clockwise +), in lengths and radians.

    By reciprocity it is the deflection curve of the beam under a unit load, or unit couple
    clockwise, at the effect's place: the released beam's own curve and that of its redundants.
    At a slide or hinge ``effect.face`` picks the side; needs the reference EI_0 in absolute terms.
    """
    released, at = method.released, effect.station
    side = effect.face or ("right" if at == 0 else "left")
    if effect.kind == "deflection":
        state = released.under_load(at, side)
        present = [line.value(at, side) for line in method.lines.values()]
    else:
        state = released.under_couple(at, side)
        present = [line.slope(at, side) for line in method.lines.values()]
    total = released.curve(state)
    for value, curve in zip(present, method.curves, strict=True):
        total = total + curve * value
    return total / released.reference


def settled(method: ForceMethod, movements: Mapping[Effect, Fraction]) -> dict[Effect, Fraction]:
    """Every unknown when supports give way, without load.

    Args:
        method: of the beam.
        movements: by reaction or moment reaction how far the support goes down, or turns
            clockwise, in the calculation's lengths and radians.

    The redundants solve F X + delta = 0 with delta_i = sum of r_i x movement: the work of state
    i's support forces. Source: principle of virtual forces.
    """
    released = method.released
    loads = []
    for redundant in released.system.redundants:
        given = {one: Fraction(one == redundant) for one in released.system.redundants}
        unit = released.respond(given)
        work = sum((unit[one] * by for one, by in movements.items()), Fraction(0))
        loads.append(-released.reference * work)
    found = method.elimination.solve(loads)
    return released.respond(dict(zip(released.system.redundants, found, strict=True)))
