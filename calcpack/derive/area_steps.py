"""The steps that find the zeros and areas of an influence line of straight pieces."""

from __future__ import annotations

from fractions import Fraction

from calcpack.derive.book import Book
from calcpack.derive.kinds import AREA_KIND
from calcpack.derive.steps import AreaGroup, Step
from calcpack.exact.formula import Formula, Leaf, Symbol, constant, total
from calcpack.exact.piecewise import Piecewise
from calcpack.model.request import Effect
from calcpack.statics.system import key_of


def area_group(book: Book, effect: Effect, line: Piecewise) -> AreaGroup:
    """Write every zero, every stretch's area (trapezium or triangle) and the two sums."""
    number = book.open_group()
    root = f"area/{key_of(effect)}"
    kind = AREA_KIND[effect.kind]
    zeros = _zeros(book, root, effect, line)
    parts: list[Step] = list(zeros.values())
    signed: dict[int, list[tuple[int, Formula]]] = {1: [], -1: []}
    for start, end, sign in line.signed_runs():
        if sign:
            index = len(parts) - len(zeros) + 1
            formula = _stretch(book, effect, zeros, start, end)
            symbol, area = Symbol("A", str(index)), line.integral(start, end)
            step = book.find(f"{root}/from={start}", symbol, formula, kind, area, root)
            signed[sign].append((1, book.cite(step)))
            parts.append(step)
    positive, negative = line.areas()
    group = AreaGroup(
        number,
        effect,
        tuple(parts),
        book.find(f"{root}/positive", Symbol("A", "+"), total(signed[1]), kind, positive, root),
        book.find(f"{root}/negative", Symbol("A", "−"), total(signed[-1]), kind, negative, root),
    )
    book.close_group(group)
    return group


def _zeros(book: Book, root: str, effect: Effect, line: Piecewise) -> dict[Fraction, Step]:
    steps: dict[Fraction, Step] = {}
    for zero in line.zeros():
        low = max(stop for stop in line.breaks if stop < zero)
        high = min(stop for stop in line.breaks if stop > zero)
        y_low = book.ordinate(effect, low, "right")
        y_high = book.ordinate(effect, high, "left")
        run = book.place(high) - book.place(low)
        formula = book.place(low) + run * y_low / (y_low - y_high)
        symbol = Symbol("x", f"zero {len(steps) + 1}")
        steps[zero] = book.find(
            f"{root}/zero={zero}", symbol, formula, "length", zero, f"{root}/zeros"
        )
    return steps


def _stretch(
    book: Book, effect: Effect, zeros: dict[Fraction, Step], start: Fraction, end: Fraction
) -> Formula:
    heights = []
    if start not in zeros:
        heights.append(book.ordinate(effect, start, "right"))
    if end not in zeros:
        heights.append(book.ordinate(effect, end, "left"))
    run = _mark(book, zeros, end) - _mark(book, zeros, start)
    return total([(1, height) for height in heights if height.value]) * run / constant(2)


def _mark(book: Book, zeros: dict[Fraction, Step], at: Fraction) -> Leaf:
    return book.cite(zeros[at]) if at in zeros else book.place(at)
