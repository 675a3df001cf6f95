"""The steps of a placement: where each axle stands, its ordinate, and the sums."""

from __future__ import annotations

from bisect import bisect_left
from collections.abc import Iterator
from fractions import Fraction

from calcpack.derive.book import Book
from calcpack.derive.kinds import EFFECT_KIND, LINE_KIND, QuantityKind
from calcpack.derive.load_steps import number
from calcpack.derive.shape import Shape
from calcpack.derive.steps import AreaGroup, LoadGroup, PlacementGroup, Step
from calcpack.derive.strip_steps import StripWriter, intensity_of
from calcpack.exact.formula import ONE, Formula, Leaf, Symbol, constant, total
from calcpack.exact.piecewise import Piecewise
from calcpack.model.loads import Case, Gap, Given, Part, Strip
from calcpack.moving.governing import Governing
from calcpack.moving.placement import AxleShare, Group, Position
from calcpack.statics.system import key_of

Terms = list[tuple[int, Formula]]


class PlacementWriter:
    """Writes one governing value from the inputs: places, ordinates, sums, factors."""

    def __init__(
        self,
        book: Book,
        load: LoadGroup,
        areas: AreaGroup,
        shape: Shape,
        line: Piecewise,
        governing: Governing,
    ) -> None:
        self.number = book.open_group()
        self.book, self.load, self.areas = book, load, areas
        self.shape, self.line, self.governing = shape, line, governing
        self.effect = areas.effect
        self.kind = EFFECT_KIND[self.effect.kind]
        extreme = "max" if governing.sense > 0 else "min"
        self.root = f"placement/{load.load.path}/{key_of(self.effect)}/{extreme}"
        self.steps: list[Step] = []
        self.places: dict[int, Step] = {}

    def write(self) -> PlacementGroup:
        """Every step in its order; the last one is the value."""
        found = self.governing
        parts: list[tuple[Part, Formula]] = []
        if found.case is not None:
            if found.position is not None:
                for group in found.position.groups:
                    self._stand(found.case, found.position, group)
                self._gaps(found.position)
                parts += self._axles(found.case)
                parts += self._strips(found.case, found.position)
            parts += self._concentrated(found.case)
            parts += self._uniform(found.case)
        self._value(parts)
        steps = tuple(self.steps)
        proof = PlacementGroup(self.number, self.load.load, self.effect, found, steps)
        self.book.close_group(proof)
        return proof

    def _value(self, parts: list[tuple[Part, Formula]]) -> None:
        """The sum of each part x (1 + its allowance), times the factors and the distribution."""
        found, book, case = self.governing, self.book, self.governing.case
        terms: Terms = []
        for part, effect in parts:
            assert case is not None
            allowance = case.allowance(part)
            if allowance is None:
                terms.append((1, effect))
            else:
                raised = ONE + self._number(allowance, Symbol("I", part[0]), "number")
                terms.append((1, effect * raised))
        formula = total(terms)
        if terms and case is not None:
            for index, factor in enumerate(case.factors, start=1):
                formula = formula * self._number(factor, Symbol("k", str(index)), "number")
            share = self.load.load.share(self.effect.kind, self.effect.station)
            assert share is not None
            formula = formula * book.given(share.value.path, Symbol("g"), "number")
        symbol = Symbol("E", "max" if found.sense > 0 else "min")
        self.steps.append(book.find(self.root, symbol, formula, self.kind, found.value))

    def _number(self, given: Given, symbol: Symbol, kind: QuantityKind) -> Leaf:
        return number(self.book, self.load.found, given, symbol, kind)

    def _stand(self, case: Case, position: Position, group: Group) -> None:
        """The place of the axle that is anchored, then of its neighbours one by one."""
        axles = case.axles
        anchor, formula = self._anchored(case, position, group)
        self._place(anchor, formula, position)
        sign = 1 if position.heading == "right" else -1
        needed = self._needed(case, position, group)
        for axle in range(anchor - 1, min(needed) - 1, -1):
            spacing = self._spacing(axles[axle + 1].gap, axle + 1, position)
            behind = self.book.cite(self.places[axle + 1])
            formula = behind + spacing if sign > 0 else behind - spacing
            self._place(axle, formula, position)
        for axle in range(anchor + 1, max(needed) + 1):
            spacing = self._spacing(axles[axle].gap, axle, position)
            ahead = self.book.cite(self.places[axle - 1])
            formula = ahead - spacing if sign > 0 else ahead + spacing
            self._place(axle, formula, position)

    def _needed(self, case: Case, position: Position, group: Group) -> set[int]:
        """The axles of a group whose places are told: those on the beam, the next on either side,
        those from which a strip or a free gap is told."""
        found = self.governing
        on_beam = [one.axle for one in found.axles if one.standing in ("counts", "neglected")]
        needed = {axle + by for axle in on_beam for by in (-1, 0, 1)}
        first = 0
        for index, train in enumerate(case.trains):
            last = first + len(train.axles) - 1
            for share in found.strips:
                if share.train == index and share.area:
                    needed.add(first if share.strip.ahead else last)
            first = last + 1
        for one in position.groups[1:]:
            needed |= {one.first - 1, one.first}
        own = {axle for axle in needed if group.first <= axle <= group.last}
        return own or {group.first}

    def _place(self, axle: int, formula: Formula, position: Position) -> None:
        symbol = Symbol("z", str(axle + 1))
        at, column = position.stations[axle], f"{self.root}/places"
        key = f"{self.root}/axle={axle + 1}"
        step = self.book.find(key, symbol, formula, "length", at, column)
        self.places[axle] = step
        self.steps.append(step)

    def _anchored(self, case: Case, position: Position, group: Group) -> tuple[int, Formula]:
        """The axle whose place is known first, and how."""
        if group.mark is None:
            return group.first, constant(position.stations[group.first])
        mark = self._mark(group.mark)
        if group.anchor is not None:
            return group.anchor, mark
        # The end of a strip stands at the mark: from there back to the axle it is told from.
        for axle, strip, distances in _strip_ends(case, group):
            towards = 1 if (position.heading == "right") == strip.ahead else -1
            reach = sum((one.value for one in distances), Fraction(0))
            if position.stations[axle] + towards * reach == group.mark:
                formula: Formula = mark
                for one, letter in zip(distances, "bl", strict=False):
                    given = self.book.given(one.path, Symbol(letter), "length")
                    formula = formula - given if towards > 0 else formula + given
                return axle, formula
        return group.first, constant(position.stations[group.first])

    def _mark(self, at: Fraction) -> Leaf:
        zeros = {step.value: step for step in self.areas.parts if "/zero=" in step.key}
        return self.book.cite(zeros[at]) if at in zeros else self.book.place(at)

    def _spacing(self, gap: Gap | None, axle: int, position: Position) -> Leaf:
        """The held gap ahead of an axle."""
        assert gap is not None
        distance = abs(position.stations[axle - 1] - position.stations[axle])
        tie = next(one for one in gap.ties if one.value == distance)
        return self.book.given(tie.path, Symbol("a", str(axle + 1)), "length")

    def _gaps(self, position: Position) -> None:
        """The gaps that are free, as they come out."""
        sign = 1 if position.heading == "right" else -1
        for group in position.groups[1:]:
            axle = group.first
            ahead, behind = self.places[axle - 1], self.places[axle]
            pair = (ahead, behind) if sign > 0 else (behind, ahead)
            formula = self.book.cite(pair[0]) - self.book.cite(pair[1])
            assert ahead.value is not None
            assert behind.value is not None
            key, symbol = f"{self.root}/gap={axle + 1}", Symbol("a", str(axle + 1))
            gap = abs(ahead.value - behind.value)
            column = f"{self.root}/places"
            self.steps.append(self.book.find(key, symbol, formula, "length", gap, column))

    def _axles(self, case: Case) -> Iterator[tuple[Part, Formula]]:
        found = self.governing
        assert found.position is not None
        terms: Terms = []
        for share in found.axles:
            if share.standing in ("counts", "neglected"):
                at = self.book.cite(self.places[share.axle])
                self.steps.append(self._ordinate(share, at, f"ordinate={share.axle + 1}"))
                if share.standing == "counts":
                    given = case.axles[share.axle].weight
                    weight = self._number(given, Symbol("W", str(share.axle + 1)), "force")
                    terms.append((1, weight * self.book.cite(self.steps[-1])))
        if terms:
            effect = sum((one.effect for one in found.axles), Fraction(0))
            key, symbol = f"{self.root}/axles", Symbol("E", "a")
            step = self.book.find(key, symbol, total(terms), self.kind, effect)
            self.steps.append(step)
            yield "axles", self.book.cite(step)

    def _ordinate(self, share: AxleShare, at: Leaf, name: str) -> Step:
        """The line's ordinate at a place: that of a key station, or between its two neighbours."""
        book, effect = self.book, self.effect
        stops = [station.at for station in book.beam.stations]
        position = bisect_left(stops, share.at)
        if stops[position] == share.at:
            formula: Formula = book.ordinate(effect, share.at, share.side)
        else:
            formula = self.shape.between(book, stops[position - 1], stops[position], at)
        key = f"{self.root}/{name}"
        symbol = Symbol("y", name.partition("=")[2])
        column = f"{self.root}/ordinates"
        return book.find(key, symbol, formula, LINE_KIND[effect.kind], share.ordinate, column)

    def _strips(self, case: Case, position: Position) -> Iterator[tuple[Part, Formula]]:
        terms: Terms = []
        for index, share in enumerate(self.governing.strips, start=1):
            if not share.area:
                continue
            first = sum(len(train.axles) for train in case.trains[: share.train])
            last = first + len(case.trains[share.train].axles) - 1
            axle = self.places[first if share.strip.ahead else last]
            writer = StripWriter(
                self.book,
                f"{self.root}/strip={index}",
                f"q{index}",
                self.shape,
                self.line,
                self.areas,
                self.load.found,
            )
            area = writer.write(share, axle, position.heading)
            self.steps += writer.steps
            intensity = intensity_of(self.book, self.load.found, share.strip)
            key, symbol = f"{self.root}/strip={index}", Symbol("E", f"q{index}")
            formula = intensity * self.book.cite(area)
            step = self.book.find(key, symbol, formula, self.kind, share.effect)
            self.steps.append(step)
            terms.append((1, self.book.cite(step)))
        if terms:
            yield "trailing", total(terms)

    def _concentrated(self, case: Case) -> Iterator[tuple[Part, Formula]]:
        """Each floating force: its place, its ordinate, and all of them together."""
        terms: Terms = []
        weights = sorted(case.concentrated, key=lambda one: -one.value)
        for share in self.governing.concentrated:
            name = f"c{share.axle + 1}"
            stations = {station.at for station in self.book.beam.stations}
            mark = self.book.place(share.at) if share.at in stations else constant(share.at)
            key, symbol = f"{self.root}/force={name}", Symbol("z", name)
            column = f"{self.root}/places"
            place = self.book.find(key, symbol, mark, "length", share.at, column)
            ordinate = self._ordinate(share, self.book.cite(place), f"ordinate={name}")
            self.steps += [place, ordinate]
            weight = self._number(weights[share.axle], Symbol("W", name), "force")
            terms.append((1, weight * self.book.cite(ordinate)))
        if terms:
            effect = sum((one.effect for one in self.governing.concentrated), Fraction(0))
            key, symbol = f"{self.root}/forces", Symbol("E", "c")
            step = self.book.find(key, symbol, total(terms), self.kind, effect)
            self.steps.append(step)
            yield "axles", self.book.cite(step)

    def _uniform(self, case: Case) -> Iterator[tuple[Part, Formula]]:
        found, areas = self.governing, self.areas
        if case.uniform is not None and found.uniform_effect:
            intensity = self._number(case.uniform, Symbol("w"), "line load")
            area = self.book.cite(areas.positive if found.sense > 0 else areas.negative)
            key, symbol = f"{self.root}/uniform", Symbol("E", "w")
            step = self.book.find(key, symbol, intensity * area, self.kind, found.uniform_effect)
            self.steps.append(step)
            yield "uniform", self.book.cite(step)


def _strip_ends(case: Case, group: Group) -> Iterator[tuple[int, Strip, tuple[Given, ...]]]:
    """Each end of each strip told from an axle of the group: the axle, the strip, the distances."""
    first = 0
    for train in case.trains:
        last = first + len(train.axles) - 1
        for strip in train.strips:
            axle = first if strip.ahead else last
            if group.first <= axle <= group.last:
                yield axle, strip, (strip.start,)
                if strip.length is not None:
                    yield axle, strip, (strip.start, strip.length)
        first = last + 1
