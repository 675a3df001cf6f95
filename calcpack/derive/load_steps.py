"""The steps of a load itself: numbers that a standard gives by a length."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from fractions import Fraction

from calcpack.derive.book import Book
from calcpack.derive.kinds import QuantityKind
from calcpack.derive.steps import LoadGroup, Step
from calcpack.exact.formula import Formula, Leaf, Symbol, total
from calcpack.model.loads import Case, Given, MovingLoad, Rule


def load_group(book: Book, load: MovingLoad) -> LoadGroup:
    """Write every number of a load that goes by a length, each once."""
    number = book.open_group()
    found: dict[str, Step] = {}
    steps: list[Step] = []
    for given, symbol, kind in _numbers(load):
        if given.rule is not None and given.path not in found:
            own = list(_ruled(book, load, given, given.rule, symbol, kind))
            found[given.path] = own[-1]
            steps += own
    group = LoadGroup(number, load, tuple(steps), found)
    book.close_group(group)
    return group


def number(
    book: Book, found: Mapping[str, Step], given: Given, symbol: Symbol, kind: QuantityKind
) -> Leaf:
    """A number of a load as a leaf: as it was stated, or as its rule gives it."""
    if given.rule is not None:
        return book.cite(found[given.path], symbol)
    return book.given(given.path, symbol, kind)


def _numbers(load: MovingLoad) -> Iterator[tuple[Given, Symbol, QuantityKind]]:
    for case in load.cases:
        yield from _of_case(case)


def _of_case(case: Case) -> Iterator[tuple[Given, Symbol, QuantityKind]]:
    for axle in case.axles:
        yield axle.weight, Symbol("W"), "force"
    for train in case.trains:
        for strip in train.strips:
            yield strip.amount, Symbol("q"), "force" if strip.of_weight else "line load"
    for force in case.concentrated:
        yield force, Symbol("W"), "force"
    if case.uniform is not None:
        yield case.uniform, Symbol("w"), "line load"
    for _, allowance in case.allowances:
        yield allowance, Symbol("I"), "number"
    for factor in case.factors:
        yield factor, Symbol("k"), "number"


def _ruled(
    book: Book, load: MovingLoad, given: Given, rule: Rule, symbol: Symbol, kind: QuantityKind
) -> Iterator[Step]:
    """The rule with its length put in, then the bound where one prevails."""
    length = book.given(rule.length.path, Symbol("L"), "length")
    terms: list[tuple[int, Formula]] = []
    for power, (letter, term) in enumerate(
        (("a", rule.constant), ("b", rule.per_length), ("c", rule.per_square))
    ):
        if term is not None:
            part: Formula = book.given(term.path, Symbol(letter), "number")
            for _ in range(power):
                part = part * length
            terms.append((1, part))
    if rule.over is not None:
        below: Formula = length
        if rule.beside is not None:
            below = length + book.given(rule.beside.path, Symbol("e"), "length")
        terms.append((1, book.given(rule.over.path, Symbol("d"), "number") / below))
    root = f"load/{load.path}/{given.path}"
    unbounded = Rule(
        rule.length, rule.constant, rule.per_length, rule.per_square, rule.over, rule.beside
    ).value
    yield book.find(root, symbol, total(terms), kind, unbounded)
    for name, bound in (("least", rule.least), ("most", rule.most)):
        if bound is not None and _prevails(bound, rule, unbounded):
            leaf = book.given(bound.path, Symbol(symbol.letter, name), kind)
            yield book.find(f"{root}/{name}", symbol, leaf, kind, bound.value)


def _prevails(bound: Given, rule: Rule, unbounded: Fraction) -> bool:
    return unbounded != rule.value and bound.value == rule.value
