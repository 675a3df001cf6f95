"""Where labels stand: rows that never overlap, places beside a point, and the proof of both."""

from __future__ import annotations

import itertools
import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cached_property

from calcpack.sheets.drawing import (
    HEAD_WIDTH,
    PENS,
    Arrow,
    Box,
    Circle,
    Drawing,
    Item,
    Label,
    Line,
    Point,
    Polygon,
    Turn,
)
from calcpack.sheets.lettering import PITCH, Text, wrapped

GAP = 1.2
"""Least distance of neighbours in a row, in mm."""
FAN = 3.0
"""Height of the zone in which leaders run aslant, in mm."""
TOUCH = 0.3
"""Between a leader's end and its label, in mm."""
NEAR = 1.3
"""A label that moved less than this, in mm, needs no leader."""
LONG = 25.0
"""Turned texts up to this length, in mm, stay on one line."""
NARROWEST = 14.0
"""Below this share of a row, in mm, texts are turned rather than wrapped."""


@dataclass(frozen=True)
class Tag:
    """A text and the point that it names; wider than ``room`` (mm) it needs a leader."""

    text: Text
    at: Point
    room: float = math.inf


def spread(
    centres: Sequence[float], widths: Sequence[float], low: float, high: float
) -> list[float] | None:
    """Move intervals as little as possible so that none overlap, their order kept.

    Args:
        centres: n wished centres, in the order to keep.
        widths: n widths, the distance between neighbours included.
        low, high: bounds of the row.

    Returns:
        n centres with the least sum of squared moves; None when they do not fit. Source: pooling of
        adjacent violators (isotonic regression; Barlow and others, 1972), clamped to the bounds.

    >>> spread([10, 10], [4, 4], 0, 100)
    [8.0, 12.0]
    >>> spread([1, 2], [4, 4], 0, 7) is None
    True
    """
    if sum(widths) > high - low + 1e-9:
        return None
    ends = itertools.accumulate(widths)
    before = [end - width / 2 for end, width in zip(ends, widths, strict=True)]
    pools: list[tuple[float, int]] = []
    for centre, offset in zip(centres, before, strict=True):
        pools.append((centre - offset, 1))
        while len(pools) > 1 and pools[-2][0] > pools[-1][0]:
            (one, many), (two, more) = pools[-2:]
            pools[-2:] = [((one * many + two * more) / (many + more), many + more)]
    free = [value for value, count in pools for _ in range(count)]
    most = high - sum(widths)
    return [min(max(v, low), most) + o for v, o in zip(free, before, strict=True)]


@dataclass(frozen=True)
class Row:
    """Labels side by side, with leaders where one had to move away from its point."""

    tags: tuple[Tag, ...]
    centres: tuple[float, ...]
    turned: bool = False

    @property
    def move(self) -> float:
        """How far the label that moved most stands from its point, in mm."""
        moves = (abs(tag.at[0] - x) for tag, x in zip(self.tags, self.centres, strict=True))
        return max(moves, default=0.0)

    @cached_property
    def led(self) -> tuple[bool, ...]:
        """Which labels hang on leaders: those that moved, and those that a leader would cross."""
        moved = [
            abs(tag.at[0] - x) > NEAR or (not self.turned and tag.text.width > tag.room)
            for tag, x in zip(self.tags, self.centres, strict=True)
        ]
        sweeps = [
            sorted((tag.at[0], x))
            for tag, x, led in zip(self.tags, self.centres, moved, strict=True)
            if led
        ]
        halves = [self._size(tag)[0] / 2 + GAP / 2 for tag in self.tags]
        return tuple(
            led or any(low < x + half and x - half < high for low, high in sweeps)
            for led, x, half in zip(moved, self.centres, halves, strict=True)
        )

    def _size(self, tag: Tag) -> tuple[float, float]:
        size = (tag.text.width, tag.text.height)
        return size[::-1] if self.turned else size

    def draw(self, edge: float, down: int) -> tuple[Item, ...]:
        """The row below ``edge`` (``down`` = 1) or above it (-1), with leaders to its points."""
        items: list[Item] = []
        for tag, x, led in zip(self.tags, self.centres, self.led, strict=True):
            width, height = self._size(tag)
            near = edge + down * FAN if led else edge
            top = near if down > 0 else near - height
            items.append(Label(tag.text, (x - width / 2, top), self.turned))
            if led or abs(tag.at[1] - edge) > NEAR:
                bend = ((tag.at[0], edge),) if led and tag.at[1] != edge else ()
                items.append(Line((tag.at, *bend, (x, near - down * TOUCH)), "hair"))
        return tuple(items)


def row(tags: Sequence[Tag], low: float, high: float) -> Row | None:
    """Set tags in a row between two bounds in mm: side by side, else wrapped, else turned.

    Returns:
        The row in the order of the points; None when even turned texts do not fit.
    """
    tags = sorted(tags, key=lambda tag: tag.at[0])
    if not tags:
        return Row((), ())
    share = (high - low) / len(tags)
    if share < PITCH:
        return None
    texts = [tag.text for tag in tags]
    attempts = [(texts, False)]
    if share >= NARROWEST:
        attempts.append(([wrapped(text, share - GAP) for text in texts], False))
    longest = max(text.width for text in texts)
    for lines in range(min(3, int(share / PITCH)), 0, -1):
        limit = max(LONG, 1.3 * longest / lines)
        attempts.append(([wrapped(text, limit) for text in texts], True))
    for texts, turned in attempts:
        gap = GAP / 4 if turned else GAP
        widths = [(text.height if turned else text.width) + gap for text in texts]
        centres = spread([tag.at[0] for tag in tags], widths, low - gap / 2, high + gap / 2)
        if centres is not None:
            placed = (replace(tag, text=text) for text, tag in zip(texts, tags, strict=True))
            return Row(tuple(placed), tuple(centres), turned)
    return None


def in_the_way(box: Box, item: Item, backed: bool = False) -> bool:
    """Whether a text's box would touch an item; a backed text may lie on a hatched area."""
    match item:
        case Label():
            return box.meets(item.box)
        case Line() | Circle():
            reach = PENS[item.pen] / 2
        case Arrow() | Turn():
            reach = HEAD_WIDTH / 2
        case Polygon():
            if item.fill == "hatch" and not backed and item.holds(box.centre):
                return True
            if item.pen is None and (item.fill != "hatch" or backed):
                return False
            reach = PENS[item.pen or "hair"] / 2
    grown = box.grown(reach)
    return any(grown.cut_by(start, end) for start, end in itertools.pairwise(item.path))


def beside(
    text: Text, point: Point, down: int, taken: Sequence[Item], width: float
) -> Label | None:
    """A label just below a point (``down`` = 1) or above it (-1): centred, else to a side.

    Returns:
        The first place on paper of ``width`` mm that nothing ``taken`` touches, or None.
    """
    x, y = point
    top = y + 0.6 if down > 0 else y - 0.6 - text.height
    for left in (x - text.width / 2, x - text.width - 0.2, x + 0.2):
        label = Label(text, (left, top))
        inside = left >= 0 and left + text.width <= width
        if inside and not any(in_the_way(label.box.grown(0.2), item) for item in taken):
            return label
    return None


def overlaps(drawing: Drawing) -> list[str]:
    """Every text that touches another text or a stroke, lies on hatching, or leaves the paper.

    An empty list means that the drawing can be read.
    """
    found = []
    labels = [item for item in drawing.items if isinstance(item, Label)]
    paper = Box(0.0, 0.0, drawing.width, drawing.height).grown(0.01)
    for label in labels:
        box = label.box.grown(-0.05)
        if not (
            paper.left <= box.left
            and box.right <= paper.right
            and paper.top <= box.top
            and box.bottom <= paper.bottom
        ):
            found.append(f"{label.text} leaves the paper")
        found.extend(
            f"{label.text} on {item.text if isinstance(item, Label) else item}"
            for item in drawing.items
            if item is not label and in_the_way(box, item, label.backed)
        )
    return found
