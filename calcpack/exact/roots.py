"""Where a polynomial changes sign: exactly where it is straight, else to the nearest of a grid."""

from __future__ import annotations

import itertools
import math
from collections.abc import Sequence
from fractions import Fraction

from calcpack.exact.polynomial import Coefficients, derivative, evaluated, trimmed

GRID = Fraction(1, 10**9)
"""Roots that are not rational are given to the nearest multiple of this."""
FLOAT_HALVINGS = 56


def sign_changes(piece: Sequence[Fraction], end: Fraction) -> tuple[Fraction, ...]:
    """Where a polynomial changes sign strictly inside (0, end), in order.

    A straight one exactly; a curved one is bisected between the turns of its derivative, down to
    ``GRID``. A root where it touches zero without changing sign is none.

    >>> sign_changes((Fraction(-2), Fraction(0), Fraction(1)), Fraction(2))
    (Fraction(707106781, 500000000),)
    """
    piece = trimmed(tuple(piece))
    if len(piece) == 2:
        root = -piece[0] / piece[1]
        return (root,) if 0 < root < end else ()
    if len(piece) < 2 or _keeps_sign(piece, end):
        return ()
    stops = (Fraction(0), *sign_changes(derivative(piece), end), end)
    found = []
    for low, high in itertools.pairwise(stops):
        if evaluated(piece, low) * evaluated(piece, high) < 0:
            found.append(_root(piece, low, high))
    return tuple(root for root in found if 0 < root < end)


def _keeps_sign(piece: Coefficients, end: Fraction) -> bool:
    """Whether a polynomial surely has one sign strictly inside (0, end).

    It lies between its Bernstein coefficients: those inside are found in floats and must be clear
    of zero by more than rounding, those at the two ends are its values there, taken exactly.
    """
    degree, run = len(piece) - 1, float(end)
    terms = [float(value) * run**power for power, value in enumerate(piece)]
    doubt = 1e-12 * sum(map(abs, terms))
    inner = [
        sum(math.comb(j, k) / math.comb(degree, k) * terms[k] for k in range(j + 1))
        for j in range(1, degree)
    ]
    if not (all(one > doubt for one in inner) or all(one < -doubt for one in inner)):
        return False
    sign = 1 if inner[0] > 0 else -1
    return sign * piece[0] >= 0 and sign * evaluated(piece, end) >= 0


def _root(piece: Coefficients, low: Fraction, high: Fraction) -> Fraction:
    """The multiple of ``GRID`` nearest to where a polynomial passes zero between two places.

    Its values at multiples of the grid are whole numbers of one part: bisection goes by those, from
    a bracket about a root in floats where that holds it.
    """
    parts = math.lcm(*(value.denominator for value in piece))
    per, top = GRID.denominator, len(piece) - 1
    whole = [int(value * parts) * per ** (top - power) for power, value in enumerate(piece)]

    def value(place: int) -> int:
        total = 0
        for coefficient in reversed(whole):
            total = total * place + coefficient
        return total

    first, last = int(low / GRID), int(high / GRID) + 1
    rising = evaluated(piece, low) < 0
    guess = _guess([float(one) for one in piece], float(low), float(high), rising)
    one, other = max(first, int(guess * per) - 2), min(last, int(guess * per) + 3)
    if (value(one) < 0) == rising and (value(other) < 0) != rising:
        first, last = one, other
    while last - first > 1:
        middle = (first + last) // 2
        if (value(middle) < 0) == rising:
            first = middle
        else:
            last = middle
    return min(first, last, key=lambda place: abs(value(place))) * GRID


def _guess(piece: Sequence[float], low: float, high: float, rising: bool) -> float:
    """Where a polynomial passes zero, in floats, by bisection."""
    for _ in range(FLOAT_HALVINGS):
        middle, total = (low + high) / 2, 0.0
        for coefficient in reversed(piece):
            total = total * middle + coefficient
        if (total < 0) == rising:
            low = middle
        else:
            high = middle
    return low
