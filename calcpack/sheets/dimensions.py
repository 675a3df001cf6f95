"""Names of stations and chains of dimensions."""

from __future__ import annotations

import itertools
from collections.abc import Iterable, Sequence
from fractions import Fraction

from calcpack.exact.numbers import decimals_to_end, printed
from calcpack.sheets.drawing import Item, Label, Line, Scale
from calcpack.sheets.labels import NEAR, Tag, row
from calcpack.sheets.lettering import PITCH, Text, plain, wrapped

TICK = 0.8
"""Half of a dimension's oblique stroke, in mm."""
ASLANT = 6.0
"""The furthest, in mm, that a text may be pushed aside by others which could also be spared."""

Length = tuple[Fraction, Fraction, int]
"""Start, end, and the number of equal parts in it."""


def digits(values: Sequence[Fraction]) -> list[str]:
    """Values with as many decimals as write all of them whole, else (beyond six) with three.

    >>> digits([Fraction(25, 2), Fraction(3)]), digits([Fraction(1, 3)])
    (['12.5', '3.0'], ['0.333'])
    """
    needed = [decimals_to_end(value, 6) for value in values]
    decimals = max((3 if n is None else n for n in needed), default=0)
    return [printed(value, decimals) for value in values]


def chain(
    stops: Iterable[Fraction],
    coarse: Iterable[Fraction],
    scale: Scale,
    width: float,
    unit: str = "",
) -> tuple[Item, ...]:
    """A dimension line along y = 0 with the distances between neighbouring stations above it.

    Where they do not stand side by side, hardly moved, equal neighbours between stations of
    ``coarse`` are joined ("10 × 4.8"), else only those stations are kept, else equal ones among
    these are joined; texts far from their lengths, and turned texts, come last.

    Args:
        stops: stations that the chain should hold, in any order.
        coarse: stations that matter most, among them both ends.
        scale: stations to paper.
        width: of the paper in mm.
        unit: written behind each distance.
    """
    kept = sorted(set(coarse))
    fine, rough = _lengths(sorted({*stops, *kept})), _lengths(kept)
    per_part = [
        part
        for length in rough
        for part in _joined([one for one in fine if length[0] <= one[0] < length[1]])
    ]
    choices = [
        (parts, row(_distances(parts, scale, unit), 0.0, width))
        for parts in (fine, per_part, rough, _joined(rough))
    ]
    options = [(parts, texts) for parts, texts in choices if texts is not None]
    if not fine or not options:
        return ()
    parts, texts = min(options, key=lambda option: (option[1].turned, option[1].move > ASLANT))
    places = [scale(start) for start, _, _ in parts] + [scale(parts[-1][1])]
    return (
        Line(((places[0] - TICK, 0.0), (places[-1] + TICK, 0.0)), "hair"),
        *(Line(((x - TICK, TICK), (x + TICK, -TICK)), "thin") for x in places),
        *texts.draw(-TICK - 0.1, -1),
    )


def _lengths(stops: Sequence[Fraction]) -> list[Length]:
    return [(start, end, 1) for start, end in itertools.pairwise(stops)]


def _joined(lengths: Sequence[Length]) -> list[Length]:
    """Three or more equal neighbours as one length of so many parts."""
    joined: list[Length] = []
    for _, group in itertools.groupby(lengths, key=lambda length: length[1] - length[0]):
        run = list(group)
        joined.extend([(run[0][0], run[-1][1], len(run))] if len(run) > 2 else run)
    return joined


def _distances(lengths: Sequence[Length], scale: Scale, unit: str) -> list[Tag]:
    tags = []
    texts = digits([(end - start) / parts for start, end, parts in lengths])
    for (start, end, parts), text in zip(lengths, texts, strict=True):
        left, right = scale(start), scale(end)
        label = f"{parts} × {text}" if parts > 1 else text
        middle = ((left + right) / 2, 0.0)
        tags.append(Tag(plain(f"{label} {unit}".strip()), middle, right - left))
    return tags


def names(
    needed: Sequence[Tag], wished: Sequence[Tag], edge: float, down: int, width: float
) -> tuple[Item, ...]:
    """A row of names above (``down`` = -1) or below (1) what they name, ``edge`` in mm.

    Of the ``wished`` names every second, fifth or tenth is kept where more do not fit with the
    needed ones. Where not even those fit (beyond some fifty on a sheet), a note says so.
    """
    for step in (1, 2, 5, 10) if wished else ():
        fitting = row([*needed, *wished[::step]], 0.0, width)
        if fitting is not None and fitting.move <= (NEAR if fitting.turned else ASLANT):
            return fitting.draw(edge, down)
    fitting = row(needed, 0.0, width)
    if fitting is None:
        return note(f"{len(needed)} labels do not fit here: see the table", edge, down, width)
    return fitting.draw(edge, down)


def note(text: str, edge: float, down: int, width: float, left: float = 0.0) -> tuple[Item, ...]:
    """Words from ``left`` on, wrapped to the paper's width, above or below ``edge``."""
    lines = [Text((line,)) for line in wrapped(plain(text), width - left).lines]
    top = edge if down > 0 else edge - PITCH * len(lines)
    return tuple(Label(line, (left, top + PITCH * n)) for n, line in enumerate(lines))
