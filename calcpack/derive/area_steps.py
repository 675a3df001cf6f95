"""The steps that find the zeros and areas of an influence line."""

from __future__ import annotations

import itertools
from fractions import Fraction

from calcpack.derive.book import Book
from calcpack.derive.kinds import AREA_KIND, CURVATURE_KIND, LINE_KIND
from calcpack.derive.shape import Shape, curvature_of
from calcpack.derive.steps import AreaGroup, Step
from calcpack.exact.formula import Formula, Leaf, Symbol, constant, total
from calcpack.exact.piecewise import Piecewise
from calcpack.statics.system import key_of

Stretch = tuple[Fraction, Fraction]


def area_group(book: Book, shape: Shape, line: Piecewise) -> AreaGroup:
    """Write every zero, the area of every stretch of one sign, and the two sums.

    A straight line has its stretches from break to break, a curved one from key station to key
    station; both end at zeros.
    """
    number, root = book.open_group(), f"area/{key_of(shape.effect)}"
    writer = _Areas(book, root, shape, line)
    kind = AREA_KIND[shape.effect.kind]
    positive, negative = line.areas()
    group = AreaGroup(
        number,
        shape.effect,
        tuple(writer.parts),
        book.find(
            f"{root}/positive", Symbol("A", "+"), total(writer.signed[1]), kind, positive, root
        ),
        book.find(
            f"{root}/negative", Symbol("A", "−"), total(writer.signed[-1]), kind, negative, root
        ),
    )
    book.close_group(group)
    return group


class _Areas:
    """Collects the steps of one line's zeros and stretches, in the order of the beam."""

    def __init__(self, book: Book, root: str, shape: Shape, line: Piecewise) -> None:
        self.book, self.root, self.shape, self.line = book, root, shape, line
        self.parts: list[Step] = []
        self.signed: dict[int, list[tuple[int, Formula]]] = {1: [], -1: []}
        zeros = line.zeros()
        stops = {*line.breaks, *((s.at for s in book.beam.stations) if shape.curvatures else ())}
        count = 0
        for low, high in itertools.pairwise(sorted(stops)):
            inner = [zero for zero in zeros if low < zero < high]
            marks = [low, *inner, high]
            places = [self._zero(low, high, zero) for zero in inner]
            for start, end in itertools.pairwise(marks):
                middle = line.value((start + end) / 2, "left")
                if middle:
                    count += 1
                    self._stretch(count, (low, high), (start, end), places, 1 if middle > 0 else -1)

    def _zero(self, low: Fraction, high: Fraction, zero: Fraction) -> tuple[Step, Step | None]:
        """Where the line is zero, and for a curved one the ordinate there, which proves it."""
        book, root = self.book, self.root
        index = sum("/zero=" in step.key for step in self.parts) + 1
        symbol = Symbol("x", f"zero {index}")
        first = book.ordinate(self.shape.effect, low, "right")
        last = book.ordinate(self.shape.effect, high, "left")
        run = book.place(high) - book.place(low)
        if not self.shape.curvatures:
            formula: Formula = book.place(low) + run * first / (first - last)
            key = f"{root}/zero={zero}"
            step = book.find(key, symbol, formula, "length", zero, f"{root}/zeros")
            self.parts.append(step)
            return step, None
        key = f"{root}/zero={zero}"
        step = book.find(key, symbol, constant(zero), "length", zero, f"{root}/zeros")
        formula = self.shape.between(book, low, high, book.cite(step))
        symbol = Symbol("η", f"zero {index}")
        kind = LINE_KIND[self.shape.effect.kind]
        value = self.line.value(zero, "left")
        column = book.ordinates[self.shape.effect, low, "right"].column
        there = book.find(f"{root}/ordinate={zero}", symbol, formula, kind, value, column)
        self.parts += [step, there]
        return step, there

    def _stretch(
        self,
        count: int,
        whole: Stretch,
        part: Stretch,
        zeros: list[tuple[Step, Step | None]],
        sign: int,
    ) -> None:
        book, root = self.book, self.root
        if part == whole and self.shape.curvatures:
            formula = self.shape.area(book, *whole)
        else:
            formula = self._up_to_zero(whole, part, zeros)
        symbol, value = Symbol("A", str(count)), self.line.integral(*part)
        key = f"{root}/from={part[0]}"
        step = book.find(key, symbol, formula, AREA_KIND[self.shape.effect.kind], value, root)
        self.signed[sign].append((1, book.cite(step)))
        self.parts.append(step)

    def _up_to_zero(
        self, whole: Stretch, part: Stretch, zeros: list[tuple[Step, Step | None]]
    ) -> Formula:
        """A trapezium or triangle, less l³ (κ_a + κ_b) / 24 where the line is curved."""
        book, effect = self.book, self.shape.effect
        by_place = {step.value: (step, there) for step, there in zeros}
        heights: list[Leaf] = []
        marks: list[Leaf] = []
        for at, side in ((part[0], "right"), (part[1], "left")):
            if at in by_place:
                step, there = by_place[at]
                marks.append(book.cite(step))
                heights += [book.cite(there)] if there is not None else []
            else:
                marks.append(book.place(at))
                heights.append(book.ordinate(effect, at, "right" if side == "right" else "left"))
        run = marks[1] - marks[0]
        terms: list[tuple[int, Formula]] = []
        tall: list[tuple[int, Formula]] = [(1, height) for height in heights if height.value]
        if tall:
            terms.append((1, total(tall) * run / constant(2)))
        curvatures: list[tuple[int, Formula]] = []
        for at, side in ((part[0], "right"), (part[1], "left")):
            bend = self._curvature(whole, at, "right" if side == "right" else "left", by_place)
            if bend is not None:
                curvatures.append((1, bend))
        if curvatures:
            terms.append((-1, run * run * run * total(curvatures) / constant(24)))
        return total(terms)

    def _curvature(
        self,
        whole: Stretch,
        at: Fraction,
        side: str,
        zeros: dict[Fraction | None, tuple[Step, Step | None]],
    ) -> Leaf | None:
        book, known = self.book, self.shape.curvatures
        if at not in zeros:
            step = known.get((at, "right" if side == "right" else "left"))
            return None if step is None else book.cite(step)
        low, high = known.get((whole[0], "right")), known.get((whole[1], "left"))
        value = curvature_of(self.line, at, "left")
        if not value:
            return None
        key = f"{self.root}/curvature={at}"
        found = next((one for one in self.parts if one.key == key), None)
        if found is None:
            place = book.cite(zeros[at][0])
            terms: list[tuple[int, Formula]] = []
            if low is not None:
                terms.append((1, book.cite(low) * (book.place(whole[1]) - place)))
            if high is not None:
                terms.append((1, book.cite(high) * (place - book.place(whole[0]))))
            formula = total(terms) / (book.place(whole[1]) - book.place(whole[0]))
            symbol = Symbol("κ", str(zeros[at][0].left.index))
            kind = CURVATURE_KIND[self.shape.effect.kind]
            found = book.find(key, symbol, formula, kind, value, f"{self.root}/κ")
            self.parts.append(found)
        return book.cite(found)
