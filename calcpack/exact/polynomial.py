"""Polynomials over the fractions as their coefficients, lowest power first."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction

Coefficients = tuple[Fraction, ...]


def evaluated(piece: Sequence[Fraction], t: Fraction) -> Fraction:
    """The value at t (Horner's scheme).

    >>> evaluated((Fraction(1), Fraction(0), Fraction(2)), Fraction(3))
    Fraction(19, 1)
    """
    total = Fraction(0)
    for coefficient in reversed(piece):
        total = total * t + coefficient
    return total


def whole_value(whole: tuple[tuple[int, ...], int], t: Fraction) -> Fraction:
    """The value of one whose coefficients are whole numbers of one part, reduced only once.

    >>> whole_value(((1, 0, 2), 4), Fraction(3))
    Fraction(19, 4)
    """
    coefficients, part = whole
    top, bottom = t.numerator, t.denominator
    total, scale = 0, 1
    for coefficient in reversed(coefficients):
        total = total * top + coefficient * scale
        scale *= bottom
    return Fraction(total, part * (scale // bottom))


def trimmed(piece: Coefficients) -> Coefficients:
    """Without zeros of the highest powers; the constant stays.

    >>> trimmed((Fraction(3), Fraction(0)))
    (Fraction(3, 1),)
    """
    end = len(piece)
    while end > 1 and not piece[end - 1]:
        end -= 1
    return piece[:end] or (Fraction(0),)


def derivative(piece: Sequence[Fraction]) -> Coefficients:
    """The derivative; of a constant zero.

    >>> derivative((Fraction(3), Fraction(0), Fraction(2)))
    (Fraction(0, 1), Fraction(4, 1))
    """
    return tuple(power * value for power, value in enumerate(piece))[1:] or (Fraction(0),)


def primitive(piece: Sequence[Fraction], constant: Fraction) -> Coefficients:
    """The antiderivative that is ``constant`` at the origin.

    >>> primitive((Fraction(3), Fraction(2)), Fraction(5))
    (Fraction(5, 1), Fraction(3, 1), Fraction(1, 1))
    """
    return (constant, *(value / (power + 1) for power, value in enumerate(piece)))


def turned(piece: Sequence[Fraction]) -> Coefficients:
    """The polynomial with its argument's sign changed.

    >>> turned((Fraction(3), Fraction(2)))
    (Fraction(3, 1), Fraction(-2, 1))
    """
    return tuple(-value if power % 2 else value for power, value in enumerate(piece))


def shifted(piece: Coefficients, by: Fraction) -> Coefficients:
    """The same polynomial with its origin ``by`` further right (Horner's scheme).

    >>> shifted((Fraction(0), Fraction(0), Fraction(1)), Fraction(2))
    (Fraction(4, 1), Fraction(4, 1), Fraction(1, 1))
    """
    if not by or len(piece) == 1:
        return piece
    result = list(piece)
    for low in range(len(result) - 1):
        for power in range(len(result) - 2, low - 1, -1):
            result[power] += by * result[power + 1]
    return tuple(result)


def continues(piece: Coefficients, before: Coefficients, by: Fraction) -> bool:
    """Whether a piece is the polynomial before it, seen ``by`` further right.

    >>> continues((Fraction(5), Fraction(2)), (Fraction(1), Fraction(2)), Fraction(2))
    True
    """
    if len(piece) != len(before) or piece[-1] != before[-1]:
        return False
    return piece == shifted(before, by)
