"""The steps of a strip: where it begins and ends, and the area of the line above it."""

from __future__ import annotations

import itertools
from bisect import bisect_right
from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction

from calcpack.derive.book import Book
from calcpack.derive.kinds import AREA_KIND, CURVATURE_KIND, LINE_KIND
from calcpack.derive.load_steps import number
from calcpack.derive.shape import Shape, curvature_of
from calcpack.derive.steps import AreaGroup, Step
from calcpack.exact.formula import Formula, Leaf, Symbol, constant, total
from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.loads import Heading, Strip
from calcpack.moving.placement import StripShare
from calcpack.statics.system import key_of


@dataclass
class StripWriter:
    """Writes the steps of one strip under one line.

    Attributes:
        root: what its keys begin with; mark: what its symbols are told apart by.
        areas: the zeros and areas of the line that were found already.
        found: numbers of the load that go by a length.
    """

    book: Book
    root: str
    mark: str
    shape: Shape
    line: Piecewise
    areas: AreaGroup
    found: Mapping[str, Step]
    steps: list[Step] = field(default_factory=list)

    def write(self, share: StripShare, axle: Step, heading: Heading) -> Step:
        """The area of the line over what of the strip is on the beam; ``axle`` is the place of
        the axle from which it is told."""
        ends = self._ends(share.strip, axle, heading)
        terms: list[tuple[int, Formula]] = []
        for low, high in share.stretches:
            terms += [(1, self._part(*part, ends)) for part in self._parts(low, high)]
        kind = AREA_KIND[self.shape.effect.kind]
        key, symbol = f"{self.root}/area", Symbol("A", self.mark)
        step = self.book.find(key, symbol, total(terms), kind, share.area, self.root)
        self.steps.append(step)
        return step

    def _ends(self, strip: Strip, axle: Step, heading: Heading) -> dict[Fraction, Step]:
        """The places of its ends, by station; one beyond the beam is not needed."""
        towards = 1 if (heading == "right") == strip.ahead else -1
        near = self._moved(axle, strip.start.path, "b", strip.start.value, towards, "start")
        steps = [near]
        if strip.length is not None:
            path, value = strip.length.path, strip.length.value
            steps.append(self._moved(near, path, "l", value, towards, "end"))
        self.steps += steps
        return {step.value: step for step in steps if step.value is not None}

    def _moved(
        self, start: Step, path: str, letter: str, by: Fraction, towards: int, name: str
    ) -> Step:
        distance = self.book.given(path, Symbol(letter), "length")
        leaf = self.book.cite(start)
        formula = leaf + distance if towards > 0 else leaf - distance
        assert start.value is not None
        symbol = Symbol("s", f"{self.mark},{name}")
        at = start.value + towards * by
        return self.book.find(
            f"{self.root}/{name}", symbol, formula, "length", at, f"{self.root}/ends"
        )

    def _parts(self, low: Fraction, high: Fraction) -> list[tuple[Fraction, Fraction]]:
        """The stretch cut where the areas found already are, without what has none."""
        stops = {*self.line.breaks, *self.line.zeros()}
        if self.shape.curvatures:
            stops.update(station.at for station in self.book.beam.stations)
        inner = sorted(at for at in stops if low < at < high)
        pairs = itertools.pairwise([low, *inner, high])
        return [(one, other) for one, other in pairs if self.line.integral(one, other)]

    def _part(self, low: Fraction, high: Fraction, ends: dict[Fraction, Step]) -> Leaf:
        whole = next(
            (
                step
                for step in self.areas.parts
                if step.key == f"area/{key_of(self.shape.effect)}/from={low}"
                and step.value == self.line.integral(low, high)
            ),
            None,
        )
        if whole is not None:
            return self.book.cite(whole)
        run = self._place(high, ends) - self._place(low, ends)
        terms: list[tuple[int, Formula]] = []
        sides: tuple[tuple[Fraction, Side], ...] = ((low, "right"), (high, "left"))
        heights = [self._ordinate(at, side, ends) for at, side in sides]
        tall: list[tuple[int, Formula]] = [(1, one) for one in heights if one.value]
        if tall:
            terms.append((1, total(tall) * run / constant(2)))
        bends = [self._curvature(at, side, ends) for at, side in sides]
        curved: list[tuple[int, Formula]] = [(1, one) for one in bends if one is not None]
        if curved:
            terms.append((-1, run * run * run * total(curved) / constant(24)))
        kind, value = AREA_KIND[self.shape.effect.kind], self.line.integral(low, high)
        count = sum("/part=" in step.key for step in self.steps) + 1
        symbol = Symbol("A", f"{self.mark},{count}")
        key = f"{self.root}/part={low}"
        step = self.book.find(key, symbol, total(terms), kind, value, f"{self.root}/parts")
        self.steps.append(step)
        return self.book.cite(step)

    def _found(self, name: str, at: Fraction) -> Step | None:
        key = f"area/{key_of(self.shape.effect)}/{name}={at}"
        return next((step for step in self.areas.parts if step.key == key), None)

    def _place(self, at: Fraction, ends: dict[Fraction, Step]) -> Leaf:
        zero = self._found("zero", at)
        if at in ends:
            return self.book.cite(ends[at])
        return self.book.place(at) if zero is None else self.book.cite(zero)

    def _between(self, at: Fraction) -> tuple[Fraction, Fraction]:
        """The neighbouring key stations of a place that is none."""
        stops = [station.at for station in self.book.beam.stations]
        after = bisect_right(stops, at)
        return stops[after - 1], stops[after]

    def _is_station(self, at: Fraction) -> bool:
        return any(station.at == at for station in self.book.beam.stations)

    def _ordinate(self, at: Fraction, side: Side, ends: dict[Fraction, Step]) -> Leaf:
        book, effect = self.book, self.shape.effect
        if self._is_station(at):
            return book.ordinate(effect, at, side)
        if at not in ends:
            there = self._found("ordinate", at)
            return constant(0) if there is None else book.cite(there)
        key = f"{self.root}/ordinate={at}"
        step = next((one for one in self.steps if one.key == key), None)
        if step is None:
            formula = self.shape.between(book, *self._between(at), book.cite(ends[at]))
            symbol = Symbol("y", str(ends[at].left.index))
            column = f"{self.root}/ordinates"
            value = self.line.value(at, side)
            step = book.find(key, symbol, formula, LINE_KIND[effect.kind], value, column)
            self.steps.append(step)
        return book.cite(step)

    def _curvature(self, at: Fraction, side: Side, ends: dict[Fraction, Step]) -> Leaf | None:
        book, known = self.book, self.shape.curvatures
        if self._is_station(at):
            step = known.get((at, side))
            return None if step is None else book.cite(step)
        value = curvature_of(self.line, at, side)
        if not value:
            return None
        found = self._found("curvature", at)
        key = f"{self.root}/curvature={at}"
        found = found or next((one for one in self.steps if one.key == key), None)
        if found is None:
            low, high = self._between(at)
            place = self._place(at, ends)
            terms: list[tuple[int, Formula]] = []
            if (first := known.get((low, "right"))) is not None:
                terms.append((1, book.cite(first) * (book.place(high) - place)))
            if (last := known.get((high, "left"))) is not None:
                terms.append((1, book.cite(last) * (place - book.place(low))))
            formula = total(terms) / (book.place(high) - book.place(low))
            symbol = Symbol("κ", f"{self.mark},{len(self.steps)}")
            kind = CURVATURE_KIND[self.shape.effect.kind]
            found = book.find(key, symbol, formula, kind, value, f"{self.root}/κ")
            self.steps.append(found)
        return book.cite(found)


def intensity_of(book: Book, found: Mapping[str, Step], strip: Strip) -> Formula:
    """Force per unit length of a strip, from its whole force and length where it is stated so."""
    if strip.of_weight and strip.length is not None:
        force = number(book, found, strip.amount, Symbol("Q"), "force")
        return force / book.given(strip.length.path, Symbol("l"), "length")
    return number(book, found, strip.amount, Symbol("q"), "line load")
