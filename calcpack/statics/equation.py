"""One equation of equilibrium on one free body, as it is written by hand."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from calcpack.exact.piecewise import Piecewise
from calcpack.model.request import Effect
from calcpack.statics.system import Action


@dataclass(frozen=True)
class Term:
    """sign x (high - low) x quantity, or sign x quantity where ``arm`` is None; high > low."""

    quantity: Effect
    sign: int
    arm: tuple[Fraction, Fraction] | None

    @property
    def coefficient(self) -> Fraction:
        if self.arm is None:
            return Fraction(self.sign)
        return self.sign * (self.arm[1] - self.arm[0])


@dataclass(frozen=True)
class Equation:
    """Sum of forces (up +), or of moments about ``about`` (clockwise +), on one free body = 0.

    Attributes:
        start, end: the stretch of the free body; a unit load there counts, elsewhere it does not.
        name: the free body in words.
        terms: every quantity that the equation holds, in order of station.
        actions: all that acts on the free body, for its drawing.
    """

    start: Fraction
    end: Fraction
    name: str
    kind: Literal["forces", "moments"]
    about: Fraction | None
    terms: tuple[Term, ...]
    actions: tuple[Action, ...]

    def term(self, quantity: Effect) -> Term:
        return next(term for term in self.terms if term.quantity == quantity)

    def load_line(self, length: Fraction) -> Piecewise:
        """The unit load's own part of the sum, by its place: -1, or its arm about the centre."""
        zero = (Fraction(0),)
        counted = (Fraction(-1),) if self.about is None else (self.start - self.about, Fraction(1))
        return Piecewise.from_pieces(
            [
                (Fraction(0), self.start, zero),
                (self.start, self.end, counted),
                (self.end, length, zero),
            ]
        )

    def solved_for(
        self, quantity: Effect, lines: Mapping[Effect, Piecewise], length: Fraction
    ) -> Piecewise:
        """The influence line of one quantity from the lines of all others in the equation."""
        divisor = -self.term(quantity).coefficient
        parts = [(self.load_line(length), 1 / divisor)]
        for term in self.terms:
            if term.quantity != quantity:
                parts.append((lines[term.quantity], term.coefficient / divisor))
        return Piecewise.combined(parts)

    def number_for(self, quantity: Effect, values: Mapping[Effect, Fraction]) -> Fraction:
        """The value of one quantity from the values of all others, no load on the body."""
        total = sum(
            (
                values[term.quantity] * term.coefficient
                for term in self.terms
                if term.quantity != quantity
            ),
            Fraction(0),
        )
        return -total / self.term(quantity).coefficient


def sum_of_forces(start: Fraction, end: Fraction, name: str, actions: Iterable[Action]) -> Equation:
    """Vertical forces on the free body, up +."""
    actions = tuple(actions)
    terms = tuple(Term(one.unknown, one.up, None) for one in actions if one.up)
    return Equation(start, end, name, "forces", None, terms, actions)


def sum_of_moments(
    start: Fraction, end: Fraction, name: str, actions: Iterable[Action], about: Fraction
) -> Equation:
    """Moments about a station on the free body, clockwise +; a force through it drops out."""
    actions = tuple(actions)
    terms = []
    for one in actions:
        if one.clockwise:
            terms.append(Term(one.unknown, one.clockwise, None))
        elif one.station > about:
            terms.append(Term(one.unknown, -one.up, (about, one.station)))
        elif one.station < about:
            terms.append(Term(one.unknown, one.up, (one.station, about)))
    return Equation(start, end, name, "moments", about, tuple(terms), actions)
