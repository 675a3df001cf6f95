"""A train drawn to scale in the signs of a terminal."""

from __future__ import annotations

import itertools
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import floor

from calcpack.model.loads import Strip, Train
from calcpack.sheets.load_words import amount, gap_words

_ENDLESS = 7
"""Columns of a load without end, before its dots."""
_STEPS = [
    Fraction(digits, 4) * Fraction(10) ** power
    for power in range(2, -4, -1)
    for digits in (20, 16, 12, 10, 8, 6, 5, 4)
]
"""Lengths that a column of a drawing may stand for, from coarse to fine."""


@dataclass(frozen=True)
class _Bar:
    """A load ahead or behind: its ends, the near one first; None: without end."""

    near: Fraction
    far: Fraction | None
    ahead: bool
    broken: bool
    says: str


@dataclass(frozen=True)
class Picture:
    """A train in places from its foremost axle, to the right.

    Attributes:
        weights: places and weights of its axles.
        spans: distances between neighbouring places, in words.
    """

    weights: tuple[tuple[Fraction, str], ...]
    bars: tuple[_Bar, ...]
    spans: tuple[tuple[Fraction, Fraction, str], ...]


@dataclass(frozen=True)
class Drawing:
    """A picture in lines; ``tidy`` where each text has its place beside the others."""

    lines: list[str]
    tidy: bool

    @property
    def width(self) -> int:
        return max(map(len, self.lines))


def picture_of(train: Train, units: Mapping[str, str]) -> Picture:
    """A train as it is drawn, spacings that vary at their least."""
    at, weights, spans = Fraction(0), [], []
    for axle in train.axles:
        if axle.gap:
            spans.append((at, at + axle.gap.least, gap_words(axle.gap)))
            at += axle.gap.least
        if axle.weight.value:
            weights.append((at, amount(axle.weight.value)))
    bars = [_bar(strip, at, units) for strip in train.strips]
    first, last = [Fraction(0)], [at]
    for bar in bars:
        ends = [end for end in (bar.near, bar.far) if end is not None]
        first += [end for end in ends if end < 0]
        last += [end for end in ends if end > at]
    for places in (sorted(set(first)), sorted(set(last))):
        spans += [(one, two, amount(two - one)) for one, two in itertools.pairwise(places)]
    return Picture(tuple(weights), tuple(bars), tuple(sorted(spans)))


def _bar(strip: Strip, last: Fraction, units: Mapping[str, str]) -> _Bar:
    said = f"{amount(strip.amount.value)} {units['force' if strip.of_weight else 'line load']}"
    away = -1 if strip.ahead else 1
    near = (Fraction(0) if strip.ahead else last) + away * strip.start.value
    far = near + away * strip.length.value if strip.length else None
    return _Bar(near, far, strip.ahead, strip.broken, said)


def fitting_step(pictures: Sequence[Picture], width: int) -> Fraction:
    """The coarsest scale at which all texts have their place, or the finest that fits.

    Args:
        width: columns at most.
    """
    fitting = _STEPS[0]
    for step in _STEPS:
        drawings = [draw(picture, step) for picture in pictures]
        if not all(drawing.width <= width for drawing in drawings):
            break
        fitting = step
        if all(drawing.tidy for drawing in drawings):
            break
    return fitting


def draw(picture: Picture, step: Fraction) -> Drawing:
    """A picture of which a column is ``step`` long.

    >>> span = (Fraction(0), Fraction(4), "4")
    >>> picture = Picture(((Fraction(0), "5"), (Fraction(4), "20")), (), (span,))
    >>> draw(picture, Fraction(1, 2)).lines
    ['  5       20', '  ↓       ↓', '  |---4---|']
    """

    def column(at: Fraction) -> int:
        return floor(at / step + Fraction(1, 2))

    above = [(column(at), said) for at, said in picture.weights]
    middle: dict[int, str] = {}
    for bar in picture.bars:
        start, signs = _bar_signs(bar, column)
        middle |= dict(enumerate(signs, start))
        above.append((start + len(signs) // 2, bar.says))
    middle |= {column(at): "↓" for at, _ in picture.weights}
    ruler: dict[int, str] = {}
    below: list[tuple[int, str]] = []
    tidy = True
    for left, right, said in picture.spans:
        start, end = column(left), column(right)
        inside = end - start - 1
        ruler |= {start: "|", end: "|"}
        if inside < len(said):
            below.append(((start + end) // 2, said))
        on_it = said if inside >= len(said) else ""
        ruler |= dict(enumerate(on_it.center(inside, "-"), start + 1))
        tidy &= inside >= len(said) + 2
    rows = [*reversed(_stacked(above)), middle, ruler, *_stacked(below)]
    shift = 2 - min(min(row) for row in rows if row)
    lines = [_line(row, shift) for row in rows if row]
    return Drawing(lines, tidy and len(_stacked(above)) == 1)


def _bar_signs(bar: _Bar, column: Callable[[Fraction], int]) -> tuple[int, str]:
    """The column where a load ahead or behind begins, and its signs."""
    near = column(bar.near)
    reach = _ENDLESS - 1 if bar.far is None else abs(column(bar.far) - near)
    signs = "".join("= "[bar.broken and number % 3 == 2] for number in range(reach + 1))
    signs += " ..." if bar.far is None else ""
    return (near - len(signs) + 1, signs[::-1]) if bar.ahead else (near, signs)


def _stacked(texts: Iterable[tuple[int, str]]) -> list[dict[int, str]]:
    """Texts about their columns, each in the first row where it has room."""
    rows: list[dict[int, str]] = []
    for centre, said in sorted(texts):
        start = centre - (len(said) - 1) // 2
        taken = range(start - 1, start + len(said) + 1)
        row = next((row for row in rows if not row.keys() & set(taken)), None)
        if row is None:
            row = {}
            rows.append(row)
        row |= dict(enumerate(said, start))
    return rows


def _line(row: Mapping[int, str], shift: int) -> str:
    signs = [" "] * (max(row) + shift + 1)
    for at, sign in row.items():
        signs[at + shift] = sign
    return "".join(signs).rstrip()
