"""Formula trees: the symbols, the numbers and the result of a step come from one tree."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from calcpack.exact.numbers import decimals_to_end, printed

MOST_DECIMALS = 12
"""A constant that ends within so many decimals is written as a decimal, else as a fraction."""


@dataclass(frozen=True)
class Symbol:
    """A letter with what stands beside it: index, face of a cut, place of the load.

    >>> str(Symbol("V", "B", "left")), str(Symbol("x")), str(Symbol("y", "M_1", place="x_2"))
    ('V_B,left', 'x', 'y_M_1(x_2)')
    """

    letter: str
    index: str = ""
    face: Literal["", "left", "right"] = ""
    place: str = ""

    def __str__(self) -> str:
        subscript = ",".join(part for part in (self.index, self.face) if part)
        text = f"{self.letter}_{subscript}" if subscript else self.letter
        return f"{text}({self.place})" if self.place else text


class Formula:
    """A formula, built from leaves with + - * /; see ``write``, ``evaluate`` and ``leaves``."""

    def __add__(self, other: Formula) -> Formula:
        return Sum((*_terms(self), *_terms(other)))

    def __sub__(self, other: Formula) -> Formula:
        return Sum((*_terms(self), *((-sign, term) for sign, term in _terms(other))))

    def __mul__(self, other: Formula) -> Formula:
        return Product((*_factors(self), *_factors(other)))

    def __truediv__(self, other: Formula) -> Formula:
        return Quotient(self, other)

    def __neg__(self) -> Formula:
        return Sum(tuple((-sign, term) for sign, term in _terms(self)))


@dataclass(frozen=True)
class Leaf(Formula):
    """A quantity with a value.

    ``origin`` says where its digits come from: a path in calc.toml (``beam.length``), the key of
    a step (``step:unknown/V_h2/at=60``), or "" for a constant of the formula, printed as it is.
    ``symbol`` is None for a constant that is written as a number also among symbols.
    """

    value: Fraction
    symbol: Symbol | None = None
    origin: str = ""


@dataclass(frozen=True)
class Variable(Formula):
    """A symbol without a value: such a formula is for reading only."""

    symbol: Symbol


@dataclass(frozen=True)
class Sum(Formula):
    terms: tuple[tuple[int, Formula], ...]


@dataclass(frozen=True)
class Product(Formula):
    factors: tuple[Formula, ...]


@dataclass(frozen=True)
class Quotient(Formula):
    top: Formula
    bottom: Formula


ZERO = Leaf(Fraction(0))
ONE = Leaf(Fraction(1))


def constant(value: Fraction | int) -> Leaf:
    """A number that belongs to the formula itself, such as the 2 of a triangle's area."""
    return Leaf(Fraction(value))


def total(terms: list[tuple[int, Formula]]) -> Formula:
    """The signed sum of terms; 0 when there is none.

    >>> write(total([(1, constant(2)), (-1, constant(3))]), PLAIN, symbols)
    '2 - 3'
    """
    flat = [(sign * inner, part) for sign, term in terms for inner, part in _terms(term)]
    if not flat:
        return ZERO
    if len(flat) == 1 and flat[0][0] == 1:
        return flat[0][1]
    return Sum(tuple(flat))


def _terms(formula: Formula) -> tuple[tuple[int, Formula], ...]:
    return formula.terms if isinstance(formula, Sum) else ((1, formula),)


def _factors(formula: Formula) -> tuple[Formula, ...]:
    return formula.factors if isinstance(formula, Product) else (formula,)


def leaves(formula: Formula) -> Iterator[Leaf]:
    """Every leaf with a value, from left to right."""
    match formula:
        case Leaf():
            yield formula
        case Sum(terms):
            for _, term in terms:
                yield from leaves(term)
        case Product(factors):
            for factor in factors:
                yield from leaves(factor)
        case Quotient(top, bottom):
            yield from leaves(top)
            yield from leaves(bottom)


def evaluate(
    formula: Formula, value_of: Callable[[Leaf], Fraction] = lambda leaf: leaf.value
) -> Fraction:
    """The value in fractions, each leaf taken as ``value_of`` says (by default exactly).

    Raises:
        ZeroDivisionError: a quotient's bottom is zero.
        TypeError: the formula holds a variable.

    >>> evaluate(constant(1) / constant(3))
    Fraction(1, 3)
    """
    match formula:
        case Leaf():
            return value_of(formula)
        case Sum(terms):
            return sum((sign * evaluate(term, value_of) for sign, term in terms), Fraction(0))
        case Product(factors):
            result = Fraction(1)
            for factor in factors:
                result *= evaluate(factor, value_of)
            return result
        case Quotient(top, bottom):
            return evaluate(top, value_of) / evaluate(bottom, value_of)
    raise TypeError(f"{formula} has no value")


def gradient(formula: Formula, value_of: Callable[[Leaf], Fraction]) -> Mapping[str, Fraction]:
    """The exact partial derivative by each origin (forward differentiation of the tree).

    >>> leaf = Leaf(Fraction(3), origin="beam.length")
    >>> dict(gradient(leaf * leaf, lambda leaf: leaf.value))
    {'beam.length': Fraction(6, 1)}
    """
    result: dict[str, Fraction] = {}

    def add(part: Formula, factor: Fraction) -> None:
        match part:
            case Leaf(origin=origin) if origin:
                result[origin] = result.get(origin, Fraction(0)) + factor
            case Sum(terms):
                for sign, term in terms:
                    add(term, sign * factor)
            case Product(factors):
                for position, one in enumerate(factors):
                    others = Product(factors[:position] + factors[position + 1 :])
                    add(one, factor * evaluate(others, value_of))
            case Quotient(top, bottom):
                below = evaluate(bottom, value_of)
                add(top, factor / below)
                add(bottom, -factor * evaluate(top, value_of) / below**2)

    add(formula, Fraction(1))
    return result


@dataclass(frozen=True)
class Notation:
    """How sums, products and quotients are written; parts arrive already written."""

    plus: str = " + "
    minus: str = " - "
    negative: str = "-"
    times: str = " * "
    group: str = "({})"
    quotient: str = "{} / {}"
    groups_quotient: bool = True
    """Whether a sum above or below the bar, or a product below it, needs brackets."""


PLAIN = Notation()


def symbols(leaf: Leaf | Variable) -> str:
    """A leaf as its symbol, a bare constant as its digits."""
    if leaf.symbol is not None:
        return str(leaf.symbol)
    assert isinstance(leaf, Leaf)
    decimals = decimals_to_end(leaf.value, MOST_DECIMALS)
    return f"({leaf.value})" if decimals is None else printed(leaf.value, decimals)


def write(formula: Formula, notation: Notation, leaf: Callable[[Leaf | Variable], str]) -> str:
    """Write a formula; ``leaf`` gives each leaf's text (its symbol, or its digits).

    >>> x, a = Variable(Symbol("x")), Variable(Symbol("a"))
    >>> write((x - a) / (a * x), PLAIN, symbols)
    '(x - a) / (a * x)'
    """

    def grouped(part: Formula, tight: bool = True) -> str:
        text = write(part, notation, leaf)
        loose = isinstance(part, Sum) or (tight and isinstance(part, Product | Quotient))
        return notation.group.format(text) if loose else text

    match formula:
        case Leaf() | Variable():
            text = leaf(formula)
            return notation.group.format(text) if text.startswith(("-", "−")) else text
        case Sum(terms):
            text = ""
            for position, (sign, term) in enumerate(terms):
                if position:
                    text += notation.plus if sign > 0 else notation.minus
                elif sign < 0:
                    text += notation.negative
                text += grouped(term, tight=False)
            return text
        case Product(factors):
            return notation.times.join(
                grouped(factor, tight=isinstance(factor, Quotient) and position > 0)
                for position, factor in enumerate(factors)
            )
        case Quotient(top, bottom):
            if not notation.groups_quotient:
                return notation.quotient.format(
                    write(top, notation, leaf), write(bottom, notation, leaf)
                )
            above = write(top, notation, leaf)
            if isinstance(top, Sum) and len(top.terms) > 1:
                above = notation.group.format(above)
            return notation.quotient.format(above, grouped(bottom))
    raise TypeError(f"{formula!r} cannot be written")
