"""An influence line as figures show it: curve, tone and hatching, ordinates, areas."""

from __future__ import annotations

import itertools
from collections.abc import Callable, Collection, Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache

from calcpack.exact.numbers import printed
from calcpack.exact.piecewise import Piecewise
from calcpack.sheets.drawing import Item, Label, Line, Polygon, Scale, extent
from calcpack.sheets.labels import Tag, beside, in_the_way, row
from calcpack.sheets.lettering import plain, signed

TALLEST, WHOLE = 15.0, 22.0
"""Most height of one side of a line, and of both together, in mm."""
CLEAR = 0.8
"""Between a row of ordinates and the line, in mm."""
ROOM = 0.8
"""Left free around an area's label, in mm."""
TRIALS = 40
"""Places along a stretch at which its area is tried."""
SMOOTH = 24
"""Strokes that a curved piece is drawn with."""


@dataclass(frozen=True)
class Lobe:
    """A stretch on which the line keeps one sign; ``corners`` run along it, (station, value)."""

    start: Fraction
    end: Fraction
    sign: int
    corners: tuple[tuple[Fraction, Fraction], ...]


def stops(line: Piecewise) -> tuple[Fraction, ...]:
    """The breakpoints, and as many places inside each curved piece as make it look smooth."""
    found = set(line.breaks)
    for (start, end), piece in zip(itertools.pairwise(line.breaks), line.pieces, strict=True):
        if len(piece) > 2:
            found.update(start + (end - start) * step / SMOOTH for step in range(1, SMOOTH))
    return tuple(sorted(found))


@lru_cache(maxsize=64)
def samples(line: Piecewise) -> tuple[tuple[Fraction, Fraction, Fraction], ...]:
    """(station, value left, value right) at every stop; a line is drawn several times."""
    return tuple((at, line.left(at), line.right(at)) for at in stops(line))


@lru_cache(maxsize=64)
def marks(line: Piecewise) -> tuple[Fraction, ...]:
    """Where values are written: ends, jumps and kinks, and the turns of curved pieces."""
    first, *inner, last = line.breaks
    sharp = [
        at
        for at in inner
        if line.left(at) != line.right(at) or line.slope(at, "left") != line.slope(at, "right")
    ]
    return tuple(sorted({first, last, *sharp, *(line.turns() if line.degree > 1 else ())}))


@lru_cache(maxsize=64)
def lobes(line: Piecewise) -> tuple[Lobe, ...]:
    """The stretches of one sign of a line, in order."""
    found: list[Lobe] = []
    inner = samples(line)
    for start, end, sign in line.signed_runs():
        corners: tuple[tuple[Fraction, Fraction], ...] = (
            (start, line.right(start)),
            *((at, left) for at, left, _ in inner if start < at < end),
            (end, line.left(end)),
        )
        if found and found[-1].sign == sign:
            last = found.pop()
            start, corners = last.start, (*last.corners, *corners)
        found.append(Lobe(start, end, sign, corners))
    return tuple(lobe for lobe in found if lobe.sign)


def drop_of(line: Piecewise) -> Callable[[Fraction], float]:
    """How far below the axis a value is drawn, in mm: positive values stand above it."""
    values = [value for _, *both in samples(line) for value in both]
    return drop_between(max(*values, Fraction(0)), min(*values, Fraction(0)))


def drop_between(most: Fraction, least: Fraction) -> Callable[[Fraction], float]:
    """As ``drop_of``, of values between ``least`` <= 0 and ``most`` >= 0."""
    if most == least:
        return lambda value: 0.0
    unit = min(TALLEST / float(max(most, -least)), WHOLE / float(most - least))
    return lambda value: -unit * float(value)


def line_items(line: Piecewise, scale: Scale) -> tuple[Item, ...]:
    """The line over its axis at y = 0, positive in tone, negative hatched; without any text."""
    drop = drop_of(line)
    areas = [_polygon(lobe, scale, drop) for lobe in lobes(line)]
    first, last = line.breaks[0], line.breaks[-1]
    curve = [(first, Fraction(0))]
    for (start, _, value), (end, last_value, _) in itertools.pairwise(samples(line)):
        curve += [(start, value), (end, last_value)]
    curve.append((last, Fraction(0)))
    path = [(scale(at), drop(value)) for at, value in curve]
    axis = Line((path[0], path[-1]), "thin")
    return (*areas, axis, Line(tuple(point for point, _ in itertools.groupby(path)), "medium"))


def _polygon(lobe: Lobe, scale: Scale, drop: Callable[[Fraction], float]) -> Polygon:
    """A lobe between the axis and its values."""
    values = [(scale(at), drop(value)) for at, value in lobe.corners]
    corners = ((values[0][0], 0.0), *values, (values[-1][0], 0.0))
    return Polygon(corners, "tone" if lobe.sign > 0 else "hatch", None)


def ordinates(
    line: Piecewise,
    scale: Scale,
    decimals: int,
    taken: Sequence[Item],
    width: float,
    at: Collection[Fraction] | None = None,
) -> tuple[Item, ...]:
    """Labels of the line's value wherever it breaks, jumps or turns, clear of what is ``taken``.

    At a jump to the other sign each value stands on its own side of the axis; at any other jump
    both stand in one label, left | right. Zero is labelled at jumps only.

    Where the labels of one side of the axis do not all find room at their points they stand in a
    row with leaders (beyond some fifty, those that found room stay). With ``at`` given only those
    breakpoints are labelled, each if it finds room.
    """
    placed: tuple[Item, ...] = ()
    drop = drop_of(line)
    for down in (-1, 1):
        tags = [
            Tag(plain(text), (scale(stop), drop(value)))
            for stop in marks(line)
            if at is None or stop in at
            for text, value in _values(line, stop, decimals)
            if (value < 0) == (down > 0)
        ]
        labels: list[Item] = []
        for tag in tags:
            label = beside(tag.text, tag.at, down, (*taken, *placed, *labels), width)
            labels += [label] if label else []
        if at is None and len(labels) < len(tags):
            edge = extent((*taken, *placed))[down > 0] + down * CLEAR
            fitting = row(tags, 0.0, width)
            labels = list(fitting.draw(edge, down)) if fitting else labels
        placed += tuple(labels)
    return placed


def _values(line: Piecewise, at: Fraction, decimals: int) -> Iterator[tuple[str, Fraction]]:
    """What is written at a breakpoint, and the value where it is written."""
    left, right = line.left(at), line.right(at)
    before, after = (signed(printed(value, decimals)) if value else "0" for value in (left, right))
    if left * right < 0:
        yield before, left
        yield after, right
    elif left != right:
        yield f"{before} | {after}", max(left, right, key=abs)
    elif left:
        yield before, left


def areas(
    line: Piecewise, scale: Scale, decimals: int, unit: str, taken: Sequence[Item]
) -> tuple[Item, ...]:
    """The area of each lobe written inside it; else its sign; else, where it is low, nothing."""
    drop = drop_of(line)
    labels: list[Item] = []
    for lobe in lobes(line):
        area = signed(printed(line.integral(lobe.start, lobe.end), decimals))
        polygon = _polygon(lobe, scale, drop)
        for words in (f"{area} {unit}".strip(), area[0]):
            label = _inside(words, polygon, [*taken, *labels])
            if label is not None:
                labels.append(label)
                break
    return tuple(labels)


def _inside(words: str, lobe: Polygon, taken: Sequence[Item]) -> Label | None:
    """A label midway between the axis and a lobe's edge: where there is height, near the middle."""
    text = plain(words)
    low, high = lobe.corners[0][0] + ROOM, lobe.corners[-1][0] - ROOM - text.width
    lefts = [low + (high - low) * step / TRIALS for step in range(TRIALS + 1)] if low < high else []
    enough = text.height + 2 * ROOM
    heights = {x: _height(lobe, x - ROOM, x + text.width + ROOM) for x in lefts}
    fitting = [x for x in lefts if abs(heights[x]) >= text.height + ROOM]
    for left in sorted(
        fitting, key=lambda x: (-min(abs(heights[x]), enough), abs(x - (low + high) / 2))
    ):
        top = (heights[left] - text.height) / 2
        label = Label(text, (left, top), backed=lobe.fill == "hatch")
        if not any(in_the_way(label.box, item, label.backed) for item in taken):
            return label
    return None


def _height(lobe: Polygon, left: float, right: float) -> float:
    """What is nearest to the axis of a lobe's edge between two places on paper, as y in mm."""
    heights = [0.0] if left < lobe.corners[0][0] or right > lobe.corners[-1][0] else []
    for (x1, y1), (x2, y2) in itertools.pairwise(lobe.corners):
        if x1 < x2 and x1 <= right and left <= x2:
            ends = (min(max(x, x1), x2) for x in (left, right))
            heights += [y1 + (x - x1) / (x2 - x1) * (y2 - y1) for x in ends]
    return min(heights, key=abs, default=0.0)
