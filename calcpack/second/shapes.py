"""Shapes that a beam can take: what is known of one at a place, and how it goes on from there."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from math import lcm
from typing import NamedTuple

from calcpack.exact.polynomial import Coefficients

State = tuple[Fraction, ...]
"""Of a shape at a place: height and slope, and what acts on the beam left of it, taken together: a
couple there (turning as the slope grows +) and a force (as the height +). EI times the slope's rate
along the beam is minus the couple, the couple's rate minus the force."""

HEIGHT, SLOPE, COUPLE, FORCE = range(4)

UNITS: tuple[State, ...] = tuple(
    tuple(Fraction(part == other) for other in range(4)) for part in range(4)
)

Pair = tuple[State, State]
Weights = tuple[int, int]


class Stretch(NamedTuple):
    """A part of the beam on which nothing acts; ``flexibility`` is 1 / EI."""

    start: Fraction
    end: Fraction
    flexibility: Fraction

    @property
    def length(self) -> Fraction:
        return self.end - self.start


class Cubics(NamedTuple):
    """Two shapes on one stretch: whole coefficients, lowest power first, over ``bottom``."""

    one: list[int]
    two: list[int]
    bottom: int


def carried(pair: Pair, stretch: Stretch, by: Fraction) -> Pair:
    """The states of two shapes further right by a length, or further left where it is negative.

    >>> three = Fraction(3)
    >>> stretch = Stretch(Fraction(0), three, Fraction(1, 2))
    >>> turned, pushed = carried((UNITS[COUPLE], UNITS[FORCE]), stretch, three)
    >>> [str(part) for part in turned], [str(part) for part in pushed]
    (['-9/4', '-3/2', '1', '0'], ['9/4', '9/4', '-3', '1'])
    """
    one, two = (_further(state, stretch.flexibility, by) for state in pair)
    return one, two


def _further(state: State, flexibility: Fraction, by: Fraction) -> State:
    height, slope, half, sixth = _bent(state, flexibility)
    return (
        height + by * (slope + by * (half + by * sixth)),
        slope + by * (2 * half + by * 3 * sixth),
        state[COUPLE] - by * state[FORCE],
        state[FORCE],
    )


def _bent(state: State, flexibility: Fraction) -> Coefficients:
    """The shape from a state rightward: a cubic."""
    height, slope, couple, force = state
    return height, slope, -couple * flexibility / 2, force * flexibility / 6


def cubics(pair: Pair, stretch: Stretch) -> Cubics:
    """Two shapes over a stretch, from their states at its start."""
    one, two = (_bent(state, stretch.flexibility) for state in pair)
    whole, bottom = whole_numbers((*one, *two))
    return Cubics(whole[:4], whole[4:], bottom)


def weighed(shapes: Cubics, weights: Weights, bottom: int) -> Coefficients:
    """The sum of two shapes, each times its weight over ``bottom``.

    One division for each coefficient: with fractions of many hundred digits that is what counts.
    """
    (a, b), whole = weights, bottom * shapes.bottom
    pairs = zip(shapes.one, shapes.two, strict=True)
    return tuple(Fraction(a * x + b * y, whole) for x, y in pairs)


def added(a: Fraction | int, one: State, b: Fraction | int, two: State) -> State:
    """a times one state plus b times another."""
    return tuple(a * x + b * y for x, y in zip(one, two, strict=True))


def whole_numbers(values: Sequence[Fraction]) -> tuple[list[int], int]:
    """Numerators over the least common denominator, and that.

    >>> whole_numbers((Fraction(1, 2), Fraction(-2, 3)))
    ([3, -4], 6)
    """
    bottom = lcm(*(value.denominator for value in values))
    return [value.numerator * (bottom // value.denominator) for value in values], bottom
