"""The steps of an influence line: equilibrium, its solved forms, a number at each key station."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from fractions import Fraction

from calcpack.derive.book import LOAD_PLACE, Book, unit_load, variable_place
from calcpack.derive.kinds import LINE_KIND, QuantityKind
from calcpack.derive.steps import LineGroup, Row, Step
from calcpack.exact.formula import Formula, Leaf, Symbol, Variable, total
from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.beam import Station
from calcpack.model.request import Effect
from calcpack.statics.equation import Equation, Term
from calcpack.statics.influence import Cut
from calcpack.statics.plan import PlanStep
from calcpack.statics.system import key_of, place_name, symbol_of


def line_group(book: Book, quantity: Effect, source: PlanStep | Cut, line: Piecewise) -> LineGroup:
    """Write one influence line; ``line`` is the engine's, which every row must meet exactly."""
    number = book.open_group()
    equation, kind = source.equation, LINE_KIND[quantity.kind]
    root = f"{'unknown' if isinstance(source, PlanStep) else 'effect'}/{key_of(quantity)}"
    balance = _balance(book, root, equation)
    forms = _forms(book, root, quantity, equation, kind)
    rows = tuple(_rows(book, root, quantity, equation, line, kind))
    centre = None if equation.about is None else book.place(equation.about).symbol
    group = LineGroup(number, quantity, source, balance, centre, forms, rows)
    book.close_group(group)
    return group


def _balance(book: Book, root: str, equation: Equation) -> Step:
    if equation.about is None:
        left, kind = Symbol("ΣV"), LINE_KIND["shear"]
        load: tuple[int, Formula] = (-1, unit_load())
    else:
        left, kind = Symbol("ΣM", book.tag_at(equation.about)), LINE_KIND["moment"]
        load = (1, unit_load() * (variable_place() - book.place(equation.about)))
    terms = [
        (term.sign, _with_arm(book, term, _symbol_only(term.quantity))) for term in equation.terms
    ]
    if equation.start < equation.end:
        terms.append(load)
    key = f"{root}/equilibrium"
    return book.state(key, left, total(terms), kind, balance=True)


def _forms(
    book: Book, root: str, quantity: Effect, equation: Equation, kind: QuantityKind
) -> tuple[Step, ...]:
    """The equation solved for its quantity: with the load on the free body, and elsewhere."""
    forms = []
    left = symbol_of(quantity)
    regions = [(True, f"load on {equation.name}"), (False, "load elsewhere")]
    if equation.start == equation.end:
        regions = [(False, "wherever the load stands")]
    for loaded, words in regions:
        load = variable_place() if loaded else None
        formula = solved_for(book, equation, quantity, _symbol_only, load)
        key = f"{root}/{'loaded' if loaded else 'elsewhere'}"
        forms.append(book.state(key, left, formula, kind, condition=words))
    return tuple(forms)


def _rows(
    book: Book,
    root: str,
    quantity: Effect,
    equation: Equation,
    line: Piecewise,
    kind: QuantityKind,
) -> Iterator[Row]:
    left = symbol_of(quantity)
    others = [term.quantity for term in equation.terms if term.quantity != quantity]
    for station in book.beam.stations:
        for side, stands_for in _sides(book, station, quantity, others, line):
            loaded = any(_loads(equation, station.at, one) for one in stands_for)

            def leaf(other: Effect, at: Fraction = station.at, side: Side = side) -> Formula:
                return book.cite(book.ordinates[other, at, side], symbol_of(other))

            load = book.place(station.at, LOAD_PLACE) if loaded else None
            formula = solved_for(book, equation, quantity, leaf, load)
            key = f"{root}/at={station.at}" + (f"/{side}" if len(stands_for) == 1 else "")
            step = book.find(key, left, formula, kind, line.value(station.at, side), root)
            for one in stands_for:
                book.ordinates[quantity, station.at, one] = step
            place = station.name or place_name(book.beam, station.at)
            yield Row(place, station.at, side if len(stands_for) == 1 else None, loaded, step)


def _sides(
    book: Book, station: Station, quantity: Effect, others: list[Effect], line: Piecewise
) -> list[tuple[Side, tuple[Side, ...]]]:
    """The rows at a station: (side to take, sides it stands for).

    One row serves both sides where neither the line nor any other in the equation jumps.
    """
    at = station.at
    if at == 0:
        return [("right", ("left", "right"))]
    if at == book.beam.length:
        return [("left", ("left", "right"))]
    jumps = line.left(at) != line.right(at) or any(
        book.ordinates[other, at, "left"].value != book.ordinates[other, at, "right"].value
        for other in others
    )
    if jumps:
        return [("left", ("left",)), ("right", ("right",))]
    return [("left", ("left", "right"))]


def _loads(equation: Equation, at: Fraction, side: Side) -> bool:
    if side == "left":
        return equation.start < at <= equation.end
    return equation.start <= at < equation.end


def _symbol_only(quantity: Effect) -> Formula:
    return Variable(symbol_of(quantity))


def _with_arm(book: Book, term: Term, quantity: Formula) -> Formula:
    if term.arm is None:
        return quantity
    low, high = term.arm
    return quantity * (book.place(high) - book.place(low))


def solved_for(
    book: Book,
    equation: Equation,
    quantity: Effect,
    leaf: Callable[[Effect], Formula | None],
    load_at: Formula | None,
    *,
    couple: bool = False,
) -> Formula:
    """The right side of ``quantity = ...`` for an equation.

    ``leaf`` gives every other quantity, None where it is zero and need not be written; without
    ``load_at`` no load stands on the body, with ``couple`` a unit couple (clockwise) acts on it.
    """
    wanted = equation.term(quantity)
    terms: list[tuple[int, Formula]] = []
    for term in equation.terms:
        if term.quantity != quantity and (known := leaf(term.quantity)) is not None:
            terms.append((-wanted.sign * term.sign, _with_arm(book, term, known)))
    if load_at is not None:
        if equation.about is None:
            terms.append((wanted.sign, unit_load()))
        elif equation.end <= equation.about:
            arm = book.place(equation.about) - load_at
            terms.append((wanted.sign, unit_load() * arm))
        else:
            arm = load_at - book.place(equation.about)
            terms.append((-wanted.sign, unit_load() * arm))
    if couple and equation.about is not None:
        terms.append((-wanted.sign, Leaf(Fraction(1), Symbol("C"))))
    terms.sort(key=lambda term: term[0] < 0)  # what adds goes first
    top = total(terms)
    if wanted.arm is None or not terms:
        return top
    low, high = wanted.arm
    return top / (book.place(high) - book.place(low))
