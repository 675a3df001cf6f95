"""Piecewise polynomials over the fractions, with a value on each side of every breakpoint."""

from __future__ import annotations

import itertools
import math
from bisect import bisect_left, bisect_right
from collections.abc import Callable, Iterable, Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property
from typing import Literal

Side = Literal["left", "right"]
Coefficients = tuple[Fraction, ...]


@dataclass(frozen=True)
class Piecewise:
    """A function on [a, b]: ``pieces[i]`` holds the coefficients, lowest power first, in
    t = x - breaks[i] on (breaks[i], breaks[i+1]).

    At a breakpoint the value just left and the value just right may differ; at the two ends only
    the inner value exists and stands for both. Neighbouring pieces that continue one polynomial are
    joined, so two equal functions are equal values. The algebra is closed, as with scipy's PPoly.

    >>> tent = Piecewise.from_pieces([(0, 2, (0, 1)), (2, 4, (2, -1))])
    >>> tent.left(Fraction(2)), tent.right(Fraction(4))
    (Fraction(2, 1), Fraction(0, 1))
    """

    breaks: tuple[Fraction, ...]
    pieces: tuple[Coefficients, ...]

    @staticmethod
    def from_pieces(
        parts: Iterable[tuple[Fraction | int, Fraction | int, Sequence[Fraction | int]]],
    ) -> Piecewise:
        """Build from (start, end, coefficients in x - start), in order and without gaps.

        Raises:
            ValueError: no piece of positive length, a gap or an overlap.
        """
        breaks: list[Fraction] = []
        pieces: list[Coefficients] = []
        for start, end, given in parts:
            if breaks and breaks[-1] != start:
                raise ValueError("pieces must follow one another without gap or overlap")
            coefficients = _trimmed(tuple(Fraction(value) for value in given))
            if not breaks:
                breaks.append(Fraction(start))
            if start == end:
                continue
            if end < start:
                raise ValueError("a piece must run from left to right")
            if pieces and _continues(coefficients, pieces[-1], breaks[-1] - breaks[-2]):
                breaks[-1] = Fraction(end)
            else:
                pieces.append(coefficients)
                breaks.append(Fraction(end))
        if not pieces:
            raise ValueError("a function needs a piece of positive length")
        return Piecewise(tuple(breaks), tuple(pieces))

    @property
    def degree(self) -> int:
        return max(len(piece) - 1 for piece in self.pieces)

    def value(self, x: Fraction, side: Side) -> Fraction:
        """The one-sided value at x in [a, b]; at an end the inner value whatever the side.

        Raises:
            ValueError: x lies outside [a, b].
        """
        index = self._index(x, side)
        return _whole_value(self._whole[index], x - self.breaks[index])

    def left(self, x: Fraction) -> Fraction:
        return self.value(x, "left")

    def right(self, x: Fraction) -> Fraction:
        return self.value(x, "right")

    def slope(self, x: Fraction, side: Side) -> Fraction:
        """The one-sided derivative at x; same rules as ``value``."""
        index = self._index(x, side)
        whole, part = self._whole[index]
        slope = tuple(power * value for power, value in enumerate(whole))[1:] or (0,)
        return _whole_value((slope, part), x - self.breaks[index])

    @cached_property
    def _whole(self) -> tuple[tuple[tuple[int, ...], int], ...]:
        """Per piece its coefficients as whole numbers of one part, and how many make one."""
        found = []
        for piece in self.pieces:
            part = math.lcm(*(value.denominator for value in piece))
            found.append((tuple(int(value * part) for value in piece), part))
        return tuple(found)

    def derivative(self) -> Piecewise:
        """The derivative of each piece; jumps leave no trace in it."""
        return self.mapped(_derivative)

    def _index(self, x: Fraction, side: Side) -> int:
        if not self.breaks[0] <= x <= self.breaks[-1]:
            raise ValueError(f"{x} lies outside {self.breaks[0]} to {self.breaks[-1]}")
        position = (bisect_left if side == "left" else bisect_right)(self.breaks, x) - 1
        return min(max(position, 0), len(self.pieces) - 1)

    def __add__(self, other: Piecewise) -> Piecewise:
        return Piecewise.combined([(self, Fraction(1)), (other, Fraction(1))])

    @staticmethod
    def combined(parts: Sequence[tuple[Piecewise, Fraction]]) -> Piecewise:
        """The sum of functions times factors, all over the same stretch.

        >>> ramp = Piecewise.from_pieces([(0, 2, (0, 1))])
        >>> Piecewise.combined([(ramp, Fraction(3)), (ramp, Fraction(-1))]).right(Fraction(1))
        Fraction(2, 1)
        """
        first = parts[0][0]
        if any(
            (one.breaks[0], one.breaks[-1]) != (first.breaks[0], first.breaks[-1])
            for one, _ in parts
        ):
            raise ValueError("all functions must cover the same stretch")
        stops = sorted(set().union(*(one.breaks for one, _ in parts)))
        at = [0] * len(parts)
        pieces = []
        for start, end in itertools.pairwise(stops):
            total: list[Fraction] = []
            for number, (one, factor) in enumerate(parts):
                while one.breaks[at[number] + 1] <= start:
                    at[number] += 1
                piece = one.pieces[at[number]]
                if factor and piece != _NOTHING:
                    moved = _shifted(piece, start - one.breaks[at[number]])
                    total += [Fraction(0)] * (len(moved) - len(total))
                    for power, value in enumerate(moved):
                        total[power] += factor * value
            pieces.append((start, end, total))
        return Piecewise.from_pieces(pieces)

    def __mul__(self, factor: Fraction | int) -> Piecewise:
        return self.mapped(lambda piece: tuple(factor * value for value in piece))

    def __neg__(self) -> Piecewise:
        return self * -1

    def __sub__(self, other: Piecewise) -> Piecewise:
        return Piecewise.combined([(self, Fraction(1)), (other, Fraction(-1))])

    def __truediv__(self, divisor: Fraction | int) -> Piecewise:
        return self * (Fraction(1) / divisor)

    def mapped(self, change: Callable[[Coefficients], Coefficients]) -> Piecewise:
        """The same breakpoints with every piece's coefficients changed."""
        return Piecewise.from_pieces(
            (start, end, change(piece)) for start, end, piece in self._spread()
        )

    def mirrored(self) -> Piecewise:
        """The function seen from the other end: f(a + b - x).

        >>> Piecewise.from_pieces([(0, 3, (0, 1))]).mirrored().left(Fraction(1))
        Fraction(2, 1)
        """
        total = self.breaks[0] + self.breaks[-1]
        return Piecewise.from_pieces(
            (total - end, total - start, _turned(_shifted(piece, end - start)))
            for start, end, piece in reversed(list(self._spread()))
        )

    def antiderivative(self) -> Piecewise:
        """The integral from the left end to x.

        >>> Piecewise.from_pieces([(0, 3, (0, 2))]).antiderivative().left(Fraction(3))
        Fraction(9, 1)
        """
        value, parts = Fraction(0), []
        for start, end, piece in self._spread():
            primitive = (value, *(v / (k + 1) for k, v in enumerate(piece)))
            parts.append((start, end, primitive))
            value = _evaluated(primitive, end - start)
        return Piecewise.from_pieces(parts)

    def jumps(self, after: Coefficients) -> tuple[Coefficients, ...]:
        """By how much the polynomial changes at each breakpoint, in powers of x - break.

        Left of the first breakpoint the function is zero, right of the last one ``after``, a
        polynomial in x - break. What continues changes by zeros, exactly.

        >>> Piecewise.from_pieces([(0, 2, (0, 1))]).jumps((Fraction(0),))
        ((Fraction(0, 1), Fraction(1, 1)), (Fraction(-2, 1), Fraction(-1, 1)))
        """
        found = [self.pieces[0]]
        following = (*self.pieces[1:], after)
        for (start, end, piece), then in zip(self._spread(), following, strict=True):
            before = _shifted(piece, end - start)
            length = max(len(before), len(then))
            pairs = zip(_padded(then, length), _padded(before, length), strict=True)
            found.append(tuple(one - other for one, other in pairs))
        return tuple(found)

    def part_of_sign(self, sign: Literal[1, -1]) -> Piecewise:
        """The function where it has that sign, zero elsewhere; it ends at ``zeros``.

        >>> Piecewise.from_pieces([(0, 3, (1, -1))]).part_of_sign(-1).left(Fraction(3))
        Fraction(-2, 1)
        """
        return Piecewise.from_pieces(
            (start, end, self._piece_from(start) if found == sign else _NOTHING)
            for start, end, found in self.signed_runs()
        )

    def _piece_from(self, start: Fraction) -> Coefficients:
        index = self._index(start, "right")
        return _shifted(self.pieces[index], start - self.breaks[index])

    def zeros(self) -> tuple[Fraction, ...]:
        """Stations strictly inside a piece where the function changes sign.

        Exact for straight pieces; of a curved piece to the nearest multiple of ``GRID``.
        """
        return self._zeros

    @cached_property
    def _zeros(self) -> tuple[Fraction, ...]:
        return tuple(
            start + root
            for start, end, piece in self._spread()
            for root in sign_changes(piece, end - start)
        )

    def turns(self) -> tuple[Fraction, ...]:
        """Stations strictly inside a piece where the slope changes sign, found as ``zeros`` are."""
        return self._turns

    @cached_property
    def _turns(self) -> tuple[Fraction, ...]:
        return tuple(
            start + root
            for start, end, piece in self._spread()
            for root in sign_changes(_derivative(piece), end - start)
        )

    def _spread(self) -> Iterator[tuple[Fraction, Fraction, Coefficients]]:
        return zip(self.breaks, self.breaks[1:], self.pieces, strict=False)

    def integral(self, start: Fraction, end: Fraction) -> Fraction:
        """The exact integral from start to end, both in [a, b].

        >>> Piecewise.from_pieces([(0, 2, (0, 1))]).integral(Fraction(0), Fraction(2))
        Fraction(2, 1)
        """
        total = Fraction(0)
        for left, right, piece in self._spread():
            low, high = max(left, start), min(right, end)
            if low < high:
                primitive = (Fraction(0), *(v / (k + 1) for k, v in enumerate(piece)))
                total += _evaluated(primitive, high - left) - _evaluated(primitive, low - left)
        return total

    def signed_runs(self) -> tuple[tuple[Fraction, Fraction, int], ...]:
        """Stretches (start, end, sign of the function there) between breakpoints and zeros."""
        return self._signed_runs

    @cached_property
    def _signed_runs(self) -> tuple[tuple[Fraction, Fraction, int], ...]:
        stops = sorted({*self.breaks, *self.zeros()})
        runs = []
        for start, end in itertools.pairwise(stops):
            middle = self.value((start + end) / 2, "left")
            runs.append((start, end, (middle > 0) - (middle < 0)))
        return tuple(runs)

    def areas(self) -> tuple[Fraction, Fraction]:
        """The areas of the positive parts and of the negative parts (the second is <= 0).

        >>> Piecewise.from_pieces([(0, 3, (1, -1))]).areas()
        (Fraction(1, 2), Fraction(-2, 1))
        """
        return self._areas

    @cached_property
    def _areas(self) -> tuple[Fraction, Fraction]:
        positive = negative = Fraction(0)
        for start, end, sign in self.signed_runs():
            piece, t = self._piece_from(start), end - start
            area = _evaluated((Fraction(0), *(v / (k + 1) for k, v in enumerate(piece))), t)
            if sign > 0:
                positive += area
            else:
                negative += area
        return positive, negative


_NOTHING: Coefficients = (Fraction(0),)
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
    piece = _trimmed(tuple(piece))
    if len(piece) == 2:
        root = -piece[0] / piece[1]
        return (root,) if 0 < root < end else ()
    if len(piece) < 2 or _keeps_sign(piece, end):
        return ()
    stops = (Fraction(0), *sign_changes(_derivative(piece), end), end)
    found = []
    for low, high in itertools.pairwise(stops):
        if _evaluated(piece, low) * _evaluated(piece, high) < 0:
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
    return sign * piece[0] >= 0 and sign * _evaluated(piece, end) >= 0


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
    rising = _evaluated(piece, low) < 0
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


def _padded(piece: Coefficients, length: int) -> Coefficients:
    return piece + (Fraction(0),) * (length - len(piece))


def _turned(piece: Sequence[Fraction]) -> Coefficients:
    """The polynomial with its argument's sign changed."""
    return tuple(-value if power % 2 else value for power, value in enumerate(piece))


def _derivative(piece: Sequence[Fraction]) -> Coefficients:
    return tuple(power * value for power, value in enumerate(piece))[1:] or (Fraction(0),)


def _trimmed(piece: Coefficients) -> Coefficients:
    end = len(piece)
    while end > 1 and not piece[end - 1]:
        end -= 1
    return piece[:end] or (Fraction(0),)


def _whole_value(whole: tuple[tuple[int, ...], int], t: Fraction) -> Fraction:
    """A polynomial whose coefficients are whole numbers of one part, reduced only once."""
    coefficients, part = whole
    top, bottom = t.numerator, t.denominator
    total, scale = 0, 1
    for coefficient in reversed(coefficients):
        total = total * top + coefficient * scale
        scale *= bottom
    return Fraction(total, part * (scale // bottom))


def _evaluated(piece: Sequence[Fraction], t: Fraction) -> Fraction:
    total = Fraction(0)
    for coefficient in reversed(piece):
        total = total * t + coefficient
    return total


def _continues(piece: Coefficients, before: Coefficients, by: Fraction) -> bool:
    """Whether a piece is the polynomial before it, seen ``by`` further right."""
    if len(piece) != len(before) or piece[-1] != before[-1]:
        return False
    return piece == _shifted(before, by)


def _shifted(piece: Coefficients, by: Fraction) -> Coefficients:
    """The same polynomial with its origin ``by`` further right (Horner's scheme)."""
    if not by or len(piece) == 1:
        return piece
    result = list(piece)
    for low in range(len(result) - 1):
        for power in range(len(result) - 2, low - 1, -1):
            result[power] += by * result[power + 1]
    return tuple(result)
