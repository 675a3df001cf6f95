"""What the steps of the force method share: the method, and the numbers already written.

All flexibilities and deflections are printed times the reference stiffness EI_0, so that only the
ratios n = EI_0 / EI appear.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from fractions import Fraction
from typing import Literal

from calcpack.derive.book import Book
from calcpack.derive.influence_steps import solved_for
from calcpack.derive.kinds import QuantityKind
from calcpack.derive.steps import Step
from calcpack.elastic.compatibility import ForceMethod
from calcpack.elastic.released import Released, Segment, State
from calcpack.exact.formula import Formula, Leaf, Symbol, constant, total
from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.request import Effect
from calcpack.statics.equation import Equation
from calcpack.statics.system import key_of

Ends = tuple[Leaf | None, Leaf | None]
"""The moments at a segment's two ends as leaves; None where one is zero."""


@dataclass(frozen=True)
class Disturbance:
    """What acts on the released beam beside the redundants: a unit load, or a unit couple
    (clockwise), on one side of a station."""

    kind: Literal["load", "couple"]
    at: Fraction
    side: Side

    @property
    def key(self) -> str:
        return f"{self.kind}/at={self.at}/{self.side}"

    def acts_on(self, equation: Equation) -> bool:
        if self.side == "left":
            return equation.start < self.at <= equation.end
        return equation.start <= self.at < equation.end


@dataclass(frozen=True)
class PrintedState:
    """A state whose numbers are steps: moments by segment, forces by unknown; zeros are absent."""

    moments: tuple[Ends, ...]
    forces: Mapping[Effect, Leaf]


@dataclass(frozen=True)
class Source:
    """A state whose deflection curve is wanted: ``mark`` names it in symbols, ``power`` is the
    power of length of EI_0 times its deflections."""

    mark: str
    power: int
    state: State
    printed: PrintedState
    curve: Piecewise


@dataclass
class ElasticBook:
    """Filled front to back, as the book itself."""

    book: Book
    method: ForceMethod
    reference: Leaf | None = None
    ratios: dict[Fraction, Leaf] = field(default_factory=dict)
    units: list[Source] = field(default_factory=list)
    disturbed: dict[Disturbance, PrintedState] = field(default_factory=dict)
    flexibilities: dict[tuple[int, int], Leaf] = field(default_factory=dict)
    deflections: dict[tuple[str, Fraction, Side], Step] = field(default_factory=dict)
    multipliers: dict[tuple[int, int], Leaf] = field(default_factory=dict)
    upper: dict[tuple[int, int], Leaf] = field(default_factory=dict)

    @property
    def released(self) -> Released:
        return self.method.released

    @property
    def redundants(self) -> tuple[Effect, ...]:
        return self.method.released.system.redundants

    def solved(
        self,
        equation: Equation,
        quantity: Effect,
        forces: Mapping[Effect, Leaf],
        disturbance: Disturbance | None = None,
        acts: bool | None = None,
    ) -> Formula:
        """An equation solved for a quantity; what is absent from ``forces`` is zero.

        ``acts`` says whether the disturbance is on the free body, where its place does not tell.
        """
        if acts is None:
            acts = disturbance is not None and disturbance.acts_on(equation)
        if disturbance is None or not acts:
            return solved_for(self.book, equation, quantity, forces.get, None)
        if disturbance.kind == "load":
            place = self.book.place(disturbance.at, Symbol("x"))
            return solved_for(self.book, equation, quantity, forces.get, place)
        return solved_for(self.book, equation, quantity, forces.get, None, couple=True)

    def stretch(self, segment: Segment) -> Formula:
        """n l of a segment."""
        length = self.book.place(segment.end) - self.book.place(segment.start)
        ratio = self.ratios.get(segment.ratio)
        return length if ratio is None else ratio * length

    def work(
        self,
        root: str,
        symbol: Symbol,
        kind: QuantityKind,
        one: PrintedState,
        other: PrintedState,
        value: Fraction,
    ) -> list[Step]:
        """EI_0 times the work of one state on the other: each segment, each spring, the sum."""
        steps: list[Step] = []
        parts: list[tuple[int, Formula]] = []

        def part(mark: str, name: str, formula: Formula) -> None:
            symbol = Symbol("w", mark)
            steps.append(self.book.state_value(f"{root}/{name}", symbol, formula, kind, root))
            parts.append((1, self.book.cite(steps[-1])))

        pairs = zip(self.released.segments, one.moments, other.moments, strict=True)
        for number, (segment, ab, cd) in enumerate(pairs, start=1):
            products = _products(ab, cd)
            if products:
                formula = self.stretch(segment) * total(products) / constant(6)
                part(str(number), f"segment={number}", formula)
        for spring in self.released.yielding:
            if spring in one.forces and spring in other.forces:
                assert self.reference is not None
                formula = self.reference * one.forces[spring] * other.forces[spring]
                stiffness = self._stiffness(spring)
                assert stiffness.symbol is not None
                name = f"spring={key_of(spring)}"
                part(stiffness.symbol.index, name, formula / stiffness)
        steps.append(self.book.find(root, symbol, total(parts), kind, value, root))
        return steps

    def _stiffness(self, spring: Effect) -> Leaf:
        support = next(one for one in self.released.beam.supports if one.name == spring.at)
        if spring.kind == "reaction":
            return self.book.given(f"{support.path}.vertical", Symbol("k", spring.index), "spring")
        symbol = Symbol("k", f"φ,{spring.index}")
        return self.book.given(f"{support.path}.rotational", symbol, "rotational spring")

    def shape(self, source: Source, number: int, at: Formula) -> Formula:
        """EI_0 times the deflection in a segment: the chord between its ends, and the bending of a
        simple beam under its end moments, n t s (a (l + s) + b (l + t)) / (6 l), with t from the
        segment's start, s to its end and l = t + s; zero terms are left out."""
        book, segment = self.book, self.released.segments[number]
        low = self.deflections.get((source.mark, segment.start, "right"))
        high = self.deflections.get((source.mark, segment.end, "left"))
        a, b = source.printed.moments[number]
        start, end = book.place(segment.start), book.place(segment.end)
        length, t, s = end - start, at - start, end - at
        terms: list[tuple[int, Formula]] = []
        if low is not None and high is not None:
            first, last = book.cite(low), book.cite(high)
            terms = [(1, first), (1, (last - first) * t / length)]
        elif low is not None:
            terms = [(1, book.cite(low) * s / length)]
        elif high is not None:
            terms = [(1, book.cite(high) * t / length)]
        bending: list[tuple[int, Formula]] = []
        if a is not None:
            bending.append((1, a * (length + s)))
        if b is not None:
            bending.append((1, b * (length + t)))
        if bending:
            ratio = self.ratios.get(segment.ratio)
            front = t * s if ratio is None else ratio * t * s
            terms.append((1, front * total(bending) / (constant(6) * length)))
        return total(terms)


def _products(ab: Ends, cd: Ends) -> list[tuple[int, Formula]]:
    """2 a c + a d + b c + 2 b d, zero terms left out."""
    (a, b), (c, d) = ab, cd
    terms: list[tuple[int, Formula]] = []
    for factor, left, right in ((2, a, c), (1, a, d), (1, b, c), (2, b, d)):
        if left is not None and right is not None:
            terms.append((1, constant(2) * left * right if factor == 2 else left * right))
    return terms
