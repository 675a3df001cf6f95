"""Joints of an elastic beam in balance under every unit load, in decimal floats."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal, localcontext
from fractions import Fraction

import numpy as np
from numpy.typing import NDArray

from calcpack.errors import ProgramFault

# A piece of length l in a beam of length L is (L / l)**3 times as stiff, so doubles are spent at
# l / L of about 1e-5. Decimal floats hold whatever the stiffnesses leave between them.
GUARD_DIGITS = 50
UNBALANCED = Decimal("1e-40")
ROUNDS = 20

Decimals = NDArray[np.object_]
Indices = NDArray[np.intp]

HELD = -1
"""The number of every freedom that is held: the last row and column of each array."""


@dataclass(frozen=True)
class Element:
    """A bar between two joints, its bending stiffness and its length."""

    EI: Fraction
    length: Fraction

    @property
    def stiffness(self) -> Decimals:
        """Forces (down, clockwise) at the start and at the end by deflection and rotation there."""
        bending, length = decimal(self.EI), decimal(self.length)
        a, b, c = 12 * bending / length**3, 6 * bending / length**2, 2 * bending / length
        return np.array([[a, b, -a, b], [b, 2 * c, -b, c], [-a, -b, a, -b], [b, c, -b, 2 * c]])


@dataclass(frozen=True, eq=False)
class Balance:
    """A column for a unit load on each of the f freedoms, and one for a load on what is held.

    Attributes:
        displacements: of the freedoms, (f + 1) x (f + 1).
        forces: on the elements (down, clockwise) at start and end, elements x 4 x (f + 1).
    """

    displacements: Decimals
    forces: Decimals


def balanced(
    elements: Sequence[Element], members: Indices, springs: Mapping[int, Fraction], size: int
) -> Balance:
    """Displacements and end forces under a unit load on each freedom.

    The matrix is factored once. The solution is refined until the end forces of elements and
    springs, from the accumulated displacements, balance each load within 1e-40 at every freedom.

    Args:
        elements: e bars.
        members: the numbers of the freedoms at both ends of each, e x 4.
        springs: stiffness of what else holds a freedom.
        size: how many freedoms there are.

    Raises:
        ProgramFault: they cannot be brought into balance (the beam is not stable).

    Source: the displacement method; iterative refinement after J. H. Wilkinson.
    """
    shares = [element.EI / element.length**3 for element in elements] + list(springs.values())
    digits = GUARD_DIGITS + decimal(max(shares) / min(shares)).adjusted()
    with localcontext(prec=2 * digits):
        stiffness = np.array([element.stiffness for element in elements])
        matrix = zeros(size + 1, size + 1)
        for element, member in zip(stiffness, members, strict=True):
            matrix[np.ix_(member, member)] += element
        for freedom, spring in springs.items():
            matrix[freedom, freedom] += decimal(spring)
        free = [member[member != HELD] for member in members]
        band = max((int(np.ptp(freedoms)) for freedoms in free if len(freedoms)), default=0)
        with localcontext(prec=digits):
            factors = _factored(matrix[:size, :size], band)
        loads = zeros(size + 1, size + 1)
        loads[range(size), range(size)] = Decimal(1)
        displacements, residual = zeros(*loads.shape), loads
        for _ in range(ROUNDS):
            with localcontext(prec=digits):
                correction = _substituted(factors, band, residual[:size])
            displacements[:size] += correction
            forces: Decimals = stiffness @ displacements[members]
            residual = loads.copy()
            np.subtract.at(residual, members, forces)
            for freedom, spring in springs.items():
                residual[freedom] -= decimal(spring) * displacements[freedom]
            if np.all(np.abs(residual[:size]) < UNBALANCED):
                return Balance(displacements, _settled(forces))
    raise ProgramFault("the stiffness solution does not come into balance")


def _settled(forces: Decimals) -> Decimals:
    """Without what lies below the balance reached, which is no force: a moment at a hinge is 0."""
    settled: Decimals = np.frompyfunc(lambda force: force.quantize(UNBALANCED), 1, 1)(forces)
    return settled


def _factored(matrix: Decimals, band: int) -> Decimals:
    """Triangular factors, the lower one with ones on its diagonal, of a banded matrix."""
    factors = matrix.copy()
    for pivot in range(len(factors)):
        if factors[pivot, pivot] <= 0:
            raise ProgramFault("the stiffness of the beam is not positive")
        ahead = slice(pivot + 1, pivot + band + 1)
        factors[ahead, pivot] /= factors[pivot, pivot]
        factors[ahead, ahead] -= np.outer(factors[ahead, pivot], factors[pivot, ahead])
    return factors


def _substituted(factors: Decimals, band: int, sides: Decimals) -> Decimals:
    """Forward and back substitution, all right-hand sides at once."""
    solution = sides.copy()
    for row in range(len(factors)):
        behind = slice(max(0, row - band), row)
        solution[row] -= factors[row, behind] @ solution[behind]
    for row in reversed(range(len(factors))):
        ahead = slice(row + 1, row + band + 1)
        solution[row] -= factors[row, ahead] @ solution[ahead]
        solution[row] /= factors[row, row]
    return solution


def decimal(value: Fraction) -> Decimal:
    return Decimal(value.numerator) / value.denominator


def zeros(*shape: int) -> Decimals:
    return np.full(shape, Decimal(0), dtype=object)
