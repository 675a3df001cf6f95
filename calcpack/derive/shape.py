"""The shape of a line between neighbouring key stations: straight, or bent as a cubic."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from calcpack.derive.book import Book
from calcpack.derive.steps import Step
from calcpack.exact.formula import Formula, Leaf, constant, total
from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.request import Effect


@dataclass(frozen=True)
class Shape:
    """A line by its ordinates at key stations and its curvature between them.

    ``curvatures`` give the second derivative just right and just left of a key station; a station
    is absent where the line is straight there.
    """

    effect: Effect
    curvatures: dict[tuple[Fraction, Side], Step]

    def between(self, book: Book, low: Fraction, high: Fraction, at: Leaf) -> Formula:
        """The ordinate at a place between two neighbouring key stations.

        The chord, less t s (κ_a (l + s) + κ_b (l + t)) / (6 l), with t from the left station, s to
        the right one, l = t + s: exact for a cubic, whose curvature κ is straight.
        """
        first = book.ordinate(self.effect, low, "right")
        last = book.ordinate(self.effect, high, "left")
        length = book.place(high) - book.place(low)
        t, s = at - book.place(low), book.place(high) - at
        chord: Formula = first
        if first.value != last.value:
            chord = first + (last - first) * t / length
        bending = self._bending(book, low, high, length + s, length + t)
        if bending is None:
            return chord
        return chord - t * s * bending / (constant(6) * length)

    def area(self, book: Book, low: Fraction, high: Fraction) -> Formula:
        """The area between two neighbouring key stations.

        The trapezium less l³ (κ_a + κ_b) / 24: exact for a cubic.
        """
        first = book.ordinate(self.effect, low, "right")
        last = book.ordinate(self.effect, high, "left")
        length = book.place(high) - book.place(low)
        heights: list[tuple[int, Formula]] = [(1, one) for one in (first, last) if one.value]
        terms: list[tuple[int, Formula]] = []
        if heights:
            terms.append((1, total(heights) * length / constant(2)))
        bending = self._bending(book, low, high, None, None)
        if bending is not None:
            terms.append((-1, length * length * length * bending / constant(24)))
        return total(terms)

    def _bending(
        self,
        book: Book,
        low: Fraction,
        high: Fraction,
        with_first: Formula | None,
        with_last: Formula | None,
    ) -> Formula | None:
        terms: list[tuple[int, Formula]] = []
        for step, factor in (
            (self.curvatures.get((low, "right")), with_first),
            (self.curvatures.get((high, "left")), with_last),
        ):
            if step is not None:
                curvature = book.cite(step)
                terms.append((1, curvature if factor is None else curvature * factor))
        return total(terms) if terms else None


def curvature_of(line: Piecewise, at: Fraction, side: Side) -> Fraction:
    """The one-sided second derivative."""
    return line.derivative().slope(at, side)
