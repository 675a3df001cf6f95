"""The steps of compatibility: elimination, and the redundants wherever the load stands."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace
from fractions import Fraction

from calcpack.derive.elastic_book import ElasticBook
from calcpack.derive.kinds import QuantityKind, of_lengths, power_of
from calcpack.derive.steps import Step, StepGroup
from calcpack.exact.formula import Formula, Leaf, Symbol, Variable, total
from calcpack.exact.piecewise import Side
from calcpack.statics.system import key_of, symbol_of


def write_compatibility(elastic: ElasticBook) -> None:
    """The equations of compatibility and their elimination."""
    book = elastic.book
    number = book.open_group()
    statements = tuple(_equations(elastic))
    steps: list[Step] = []
    elastic.upper.update(elastic.flexibilities)
    elimination, size = elastic.method.elimination, len(elastic.redundants)
    powers = [unit.power for unit in elastic.units]
    for row, column in sorted(elimination.multipliers, key=lambda place: (place[1], place[0])):
        factor = elimination.multipliers[row, column]
        formula: Formula = elastic.upper[row, column] / elastic.upper[column, column]
        key, symbol = f"elimination/{row + 1}/{column + 1}", Symbol("λ", f"{row + 1}{column + 1}")
        kind = of_lengths(powers[row] - powers[column])
        steps.append(book.find(key, symbol, formula, kind, factor, "elimination"))
        multiplier = elastic.multipliers[row, column] = book.cite(steps[-1])
        for other in range(row, size):
            if (column, other) in elimination.upper:
                above = elastic.upper[column, other]
                before = elastic.upper.get((row, other))
                taken = multiplier * above
                formula = -taken if before is None else before - taken
                value = (before.value if before else Fraction(0)) - factor * above.value
                symbol = Symbol("f", f"{row + 1}{other + 1}" + "'" * (column + 1))
                key = f"elimination/{row + 1}/{other + 1}/after={column + 1}"
                kind = of_lengths(powers[row] + powers[other] - 3)
                steps.append(book.find(key, symbol, formula, kind, value, "elimination/f"))
                leaf = book.cite(steps[-1])
                elastic.upper[row, other] = elastic.upper[other, row] = leaf
    words = (
        "The released beam closes again: at each redundant the displacement under all redundants "
        "and the load is zero. An equation, times λ, is taken from each later one that shares its "
        "first redundant; EI_0 is a common factor of all terms."
    )
    title = "Compatibility and its elimination"
    book.close_group(StepGroup(number, title, words, statements, tuple(steps)))


def _equations(elastic: ElasticBook) -> Iterator[Step]:
    for row, redundant in enumerate(elastic.redundants):
        terms: list[tuple[int, Formula]] = []
        for column in range(len(elastic.redundants)):
            if (row, column) in elastic.flexibilities:
                symbol = elastic.flexibilities[row, column].symbol
                assert symbol is not None
                terms.append((1, Variable(symbol) * Variable(Symbol("X", str(column + 1)))))
        terms.append((1, Variable(Symbol("δ", str(row + 1), place="x"))))
        yield elastic.book.state(
            f"compatibility/{row + 1}",
            Symbol("Δ", str(row + 1)),
            total(terms),
            of_lengths(elastic.units[row].power),
            balance=True,
            condition=f"X_{row + 1} = {symbol_of(redundant)}",
        )


def reduced_loads(
    elastic: ElasticBook,
    root: str,
    loads: Mapping[int, Leaf],
    letter: str,
    kinds: Sequence[QuantityKind],
    place: str = "",
) -> tuple[dict[int, Leaf], list[Step]]:
    """Loads after the elimination: each less λ times the earlier ones; zeros are left out."""
    book, steps = elastic.book, list[Step]()
    reduced: dict[int, Leaf] = {}
    for row in range(len(elastic.redundants)):
        terms: list[tuple[int, Formula]] = [(1, loads[row])] if row in loads else []
        value = loads[row].value if row in loads else Fraction(0)
        for column in range(row):
            if (row, column) in elastic.multipliers and column in reduced:
                multiplier = elastic.multipliers[row, column]
                terms.append((-1, multiplier * reduced[column]))
                value -= multiplier.value * reduced[column].value
        if len(terms) == 1 and row in loads:
            reduced[row] = loads[row]
        elif terms:
            key, symbol = f"{root}/load={row + 1}", Symbol(letter, f"{row + 1}'", place=place)
            column_name = f"{root.split('/at=')[0]}/{letter}"
            steps.append(book.find(key, symbol, total(terms), kinds[row], value, column_name))
            reduced[row] = book.cite(steps[-1])
    return reduced, steps


def back_substituted(
    elastic: ElasticBook,
    row: int,
    sign: int,
    reduced: Mapping[int, Leaf],
    found: Mapping[int, Leaf],
) -> Formula:
    """One unknown of F x = sign * loads from the reduced loads and the later unknowns."""
    terms: list[tuple[int, Formula]] = [(sign, reduced[row])] if row in reduced else []
    for column in range(row + 1, len(elastic.redundants)):
        present = column in found and found[column].value
        if present and (row, column) in elastic.method.elimination.upper:
            terms.append((-1, elastic.upper[row, column] * found[column]))
    return total(terms) / elastic.upper[row, row] if terms else total(terms)


def write_redundants(elastic: ElasticBook) -> None:
    """Every redundant for the unit load at every key station."""
    book, method = elastic.book, elastic.method
    number = book.open_group()
    steps: list[Step] = []
    for at, sides in _load_places(elastic):
        side = sides[0]
        suffix = f"at={at}" + ("" if len(sides) == 2 else f"/{side}")
        loads = {
            row: book.cite(step)
            for row, unit in enumerate(elastic.units)
            if (step := elastic.deflections.get((unit.mark, at, side))) is not None and step.value
        }
        kinds = [of_lengths(unit.power) for unit in elastic.units]
        reduced, more = reduced_loads(
            elastic, f"redundants/{suffix}", loads, "δ", kinds, book.tag_at(at)
        )
        steps += more
        found: dict[int, Leaf] = {}
        for row in reversed(range(len(elastic.redundants))):
            redundant = elastic.redundants[row]
            formula = back_substituted(elastic, row, -1, reduced, found)
            kind, key = (
                of_lengths(power_of(redundant.kind)),
                f"redundants/{key_of(redundant)}/{suffix}",
            )
            value = method.lines[redundant].value(at, side)
            column = f"redundants/{key_of(redundant)}"
            symbol = replace(symbol_of(redundant), place=book.tag_at(at))
            step = book.find(key, symbol, formula, kind, value, column)
            steps.append(step)
            found[row] = book.cite(step)
            for one in sides:
                book.ordinates[redundant, at, one] = step
    words = (
        "The unit load at each key station in turn: load terms after the elimination, then each "
        "redundant, from the last to the first."
    )
    title = "Redundants under the unit load"
    book.close_group(StepGroup(number, title, words, (), tuple(steps)))


def _load_places(elastic: ElasticBook) -> Iterator[tuple[Fraction, tuple[Side, ...]]]:
    """Where the load stands, and for which sides one set of numbers holds."""
    for station in elastic.released.beam.stations:
        at = station.at
        if all(curve.left(at) == curve.right(at) for curve in elastic.method.curves):
            yield at, ("right", "left") if at == 0 else ("left", "right")
        else:
            yield at, ("left",)
            yield at, ("right",)
