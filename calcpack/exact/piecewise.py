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

from calcpack.exact.polynomial import (
    Coefficients,
    continues,
    derivative,
    evaluated,
    primitive,
    shifted,
    trimmed,
    turned,
    whole_value,
)
from calcpack.exact.roots import sign_changes

Side = Literal["left", "right"]
_NOTHING: Coefficients = (Fraction(0),)


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
            coefficients = trimmed(tuple(Fraction(value) for value in given))
            if not breaks:
                breaks.append(Fraction(start))
            if start == end:
                continue
            if end < start:
                raise ValueError("a piece must run from left to right")
            if pieces and continues(coefficients, pieces[-1], breaks[-1] - breaks[-2]):
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
        return whole_value(self._whole[index], x - self.breaks[index])

    def left(self, x: Fraction) -> Fraction:
        return self.value(x, "left")

    def right(self, x: Fraction) -> Fraction:
        return self.value(x, "right")

    def slope(self, x: Fraction, side: Side) -> Fraction:
        """The one-sided derivative at x; same rules as ``value``."""
        index = self._index(x, side)
        whole, part = self._whole[index]
        slope = tuple(power * value for power, value in enumerate(whole))[1:] or (0,)
        return whole_value((slope, part), x - self.breaks[index])

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
        return self.mapped(derivative)

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
                    moved = shifted(piece, start - one.breaks[at[number]])
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
            (total - end, total - start, turned(shifted(piece, end - start)))
            for start, end, piece in reversed(list(self._spread()))
        )

    def antiderivative(self) -> Piecewise:
        """The integral from the left end to x.

        >>> Piecewise.from_pieces([(0, 3, (0, 2))]).antiderivative().left(Fraction(3))
        Fraction(9, 1)
        """
        return self._antiderivative

    @cached_property
    def _antiderivative(self) -> Piecewise:
        value, parts = Fraction(0), []
        for start, end, piece in self._spread():
            area = primitive(piece, value)
            parts.append((start, end, area))
            value = evaluated(area, end - start)
        return Piecewise.from_pieces(parts)

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
        return shifted(self.pieces[index], start - self.breaks[index])

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
            for root in sign_changes(derivative(piece), end - start)
        )

    def _spread(self) -> Iterator[tuple[Fraction, Fraction, Coefficients]]:
        return zip(self.breaks, self.breaks[1:], self.pieces, strict=False)

    def integral(self, start: Fraction, end: Fraction) -> Fraction:
        """The exact integral from start to end.

        Raises:
            ValueError: an end lies outside [a, b].

        >>> Piecewise.from_pieces([(0, 2, (0, 1))]).integral(Fraction(0), Fraction(2))
        Fraction(2, 1)
        """
        whole = self.antiderivative()
        return whole.left(end) - whole.left(start)

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
            area = self.integral(start, end)
            if sign > 0:
                positive += area
            else:
                negative += area
        return positive, negative
