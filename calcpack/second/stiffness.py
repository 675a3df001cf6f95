"""Influence lines by the displacement method: unit loads on an elastic beam, in floats."""

from __future__ import annotations

import itertools
from collections.abc import Sequence
from dataclasses import dataclass
from decimal import Decimal, localcontext
from fractions import Fraction

import numpy as np
from numpy.typing import NDArray

from calcpack.errors import ProgramFault
from calcpack.model.beam import Beam
from calcpack.model.request import Effect
from calcpack.second.faces import face_or_inner

# A piece of length l beside a beam of length L stiffens by (L / l)**3, so doubles are spent at
# l / L of about 1e-5. Decimal floats hold whatever two typed stations leave between them.
FACTOR_DIGITS = 100
RESIDUAL_DIGITS = 200
UNBALANCED = Decimal("1e-40")
ROUNDS = 20

Floats = NDArray[np.float64]
Decimals = NDArray[np.object_]
Indices = NDArray[np.intp]
HELD = -1


@dataclass(frozen=True, eq=False)
class Ordinates:
    """One effect under a unit downward load just left and just right of every key station.

    Attributes:
        stations: the n key stations, from 0 to the beam's length.
        left, right: n values each; at the two ends both are the inner value.
    """

    stations: Floats
    left: Floats
    right: Floats


def ordinates(beam: Beam, effects: Sequence[Effect]) -> tuple[Ordinates, ...]:
    """Ordinates of the influence line of each effect, by the stiffness of a uniform elastic beam.

    Every key station is a joint, every stretch between two an Euler-Bernoulli element with
    EI = 1. The matrix is scaled to unit beam length and factored once; the solution is refined
    until the end forces of the elements, from the accumulated displacements, balance each unit
    load within 1e-40 at every joint.

    Args:
        beam: stable; it need not be determinate.
        effects: at key stations of the beam; a face where two values exist.

    Returns:
        Per effect its ordinates, signs as in ``model.request.Effect``; pure numbers for reaction
        and shear, lengths for the moments. Between key stations the line of a determinate beam is
        straight.

    Raises:
        ProgramFault: the end forces cannot be brought into balance (the beam is not stable).

    Source: the displacement method with cubic elements, as in any text on matrix structural
    analysis; iterative refinement after J. H. Wilkinson.
    """
    stations = beam.stations
    lefts, rights, size = _freedoms(beam)
    loaded, cases = np.unique(np.append(lefts[:, 0], rights[:, 0]), return_inverse=True)
    with localcontext(prec=RESIDUAL_DIGITS):
        lengths = [_decimal((b.at - a.at) / beam.length) for a, b in itertools.pairwise(stations)]
        members = np.hstack([rights[:-1], lefts[1:]])
        forces = _end_forces(np.array([_element(x) for x in lengths]), members, loaded, size)
        shears = _zeros(len(stations), 2, len(loaded))
        shears[1:, 0], shears[:-1, 1] = forces[:, 2], -forces[:, 0]
        moments = _zeros(*shears.shape)
        moments[1:, 0], moments[:-1, 1] = -forces[:, 3], forces[:, 1]
        moments = moments * _decimal(beam.length)
        places = np.array([float(station.at) for station in stations])
        index_of = {station.at: index for index, station in enumerate(stations)}
        lines = []
        for effect in effects:
            at = index_of[effect.station]
            # The load at the station itself is first counted as standing between the two faces.
            value, jump_left, jump_right = _recovered(effect, shears[at], moments[at])
            left, right = value[cases[: len(stations)]], value[cases[len(stations) :]]
            left[at] += jump_left
            right[at] += jump_right
            left[0], right[-1] = right[0], left[-1]
            lines.append(Ordinates(places, left.astype(float), right.astype(float)))
    return tuple(lines)


def _recovered(effect: Effect, shears: Decimals, moments: Decimals) -> tuple[Decimals, int, int]:
    """An effect under every load case, and what it jumps by when the load at its own station
    crosses the cut to the left or to the right."""
    face = 0 if face_or_inner(effect.face, effect.station) == "left" else 1
    match effect.kind:
        case "reaction":
            return shears[1] - shears[0], 1, 1
        case "moment reaction":
            return moments[0] - moments[1], 0, 0
        case "shear":
            return shears[face], face - 1, face
        case "moment":
            return moments[face], 0, 0


def _freedoms(beam: Beam) -> tuple[Indices, Indices, int]:
    """Per station the numbers of deflection and rotation of the piece on its left and on its
    right (n x 2 each, HELD where a support holds it), and how many numbers there are."""
    numbers = itertools.count()
    lefts, rights = [], []
    for station in beam.stations:
        support, release = station.support, station.release
        deflection = HELD if support is not None and support.holds_vertical else next(numbers)
        rotation = HELD if support is not None and support.holds_rotation else next(numbers)
        node = other = (deflection, rotation)
        if release is not None:
            own = next(numbers)
            other = (deflection, own) if release.kind == "hinge" else (own, rotation)
        on_right = support is not None and support.face == "right"
        lefts.append(other if on_right else node)
        rights.append(node if on_right else other)
    return np.array(lefts), np.array(rights), next(numbers)


def _element(length: Decimal) -> Decimals:
    """Forces (down, clockwise) at the start and at the end by deflection and rotation there."""
    a, b, c = 12 / length**3, 6 / length**2, 2 / length
    return np.array([[a, b, -a, b], [b, 2 * c, -b, c], [-a, -b, a, -b], [b, c, -b, 2 * c]])


def _end_forces(elements: Decimals, members: Indices, loaded: Indices, size: int) -> Decimals:
    """End forces (elements x 4 x cases) for a unit load on each freedom in ``loaded``.

    The last row of every matrix stands for all that is held: HELD is its index.
    """
    matrix = _zeros(size + 1, size + 1)
    for element, member in zip(elements, members, strict=True):
        matrix[np.ix_(member, member)] += element
    free = [member[member != HELD] for member in members]
    band = max((int(np.ptp(freedoms)) for freedoms in free if len(freedoms)), default=0)
    loads = _zeros(size + 1, len(loaded))
    loads[loaded, np.arange(len(loaded))] = Decimal(1)
    with localcontext(prec=FACTOR_DIGITS):
        factors = _factored(matrix[:size, :size], band)
    displacements = _zeros(*loads.shape)
    residual = loads
    for _ in range(ROUNDS):
        with localcontext(prec=FACTOR_DIGITS):
            correction = _substituted(factors, band, residual[:size])
        displacements[:size] += correction
        forces: Decimals = elements @ displacements[members]
        residual = loads.copy()
        np.subtract.at(residual, members, forces)
        if np.all(np.abs(residual[:size]) < UNBALANCED):
            # What lies below the balance reached is no force: a moment at a hinge is 0.
            settled: Decimals = np.frompyfunc(lambda force: force.quantize(UNBALANCED), 1, 1)(
                forces
            )
            return settled
    raise ProgramFault("the stiffness solution does not come into balance")


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


def _decimal(value: Fraction) -> Decimal:
    return Decimal(value.numerator) / value.denominator


def _zeros(*shape: int) -> Decimals:
    return np.full(shape, Decimal(0), dtype=object)
