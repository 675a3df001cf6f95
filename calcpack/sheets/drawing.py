"""A drawing: a frozen list of primitives in millimetres of paper.

x runs to the right and comes from stations by one mapping, ``Scale``; y runs down the paper.
"""

from __future__ import annotations

import itertools
import math
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property
from typing import Literal

from calcpack.sheets.lettering import Text

Point = tuple[float, float]
Pen = Literal["hair", "thin", "medium", "heavy"]
Fill = Literal["none", "plain", "tone", "hatch", "solid"]

PENS: dict[Pen, float] = {"hair": 0.12, "thin": 0.18, "medium": 0.35, "heavy": 0.9}
"""Width of each pen in mm."""
HEAD_LENGTH, HEAD_WIDTH = 1.8, 1.1
"""Size of an arrow's head in mm."""


@dataclass(frozen=True)
class Scale:
    """Stations from ``start`` to ``end`` onto paper from ``left`` to ``right``, in mm.

    >>> Scale(Fraction(0), Fraction(40), 10.0, 90.0)(Fraction(20))
    50.0
    """

    start: Fraction
    end: Fraction
    left: float
    right: float

    def __call__(self, station: Fraction) -> float:
        """The place on paper; of a stretch without length, the middle."""
        if self.start == self.end:
            return (self.left + self.right) / 2
        part = float((station - self.start) / (self.end - self.start))
        return self.left + part * (self.right - self.left)


@dataclass(frozen=True)
class Box:
    """An upright rectangle."""

    left: float
    top: float
    right: float
    bottom: float

    @property
    def centre(self) -> Point:
        return (self.left + self.right) / 2, (self.top + self.bottom) / 2

    def grown(self, by: float) -> Box:
        return Box(self.left - by, self.top - by, self.right + by, self.bottom + by)

    def meets(self, other: Box) -> bool:
        """Whether the two have an area in common."""
        return (
            self.left < other.right
            and other.left < self.right
            and self.top < other.bottom
            and other.top < self.bottom
        )

    def cut_by(self, start: Point, end: Point) -> bool:
        """Whether a straight stroke enters the box (clipping after Liang and Barsky)."""
        low, high = 0.0, 1.0
        for origin, step, least, most in (
            (start[0], end[0] - start[0], self.left, self.right),
            (start[1], end[1] - start[1], self.top, self.bottom),
        ):
            if step == 0:
                if not least < origin < most:
                    return False
                continue
            first, second = sorted(((least - origin) / step, (most - origin) / step))
            low, high = max(low, first), min(high, second)
        return low < high


@dataclass(frozen=True)
class Line:
    """A polyline."""

    path: tuple[Point, ...]
    pen: Pen = "thin"
    dashed: bool = False

    def moved(self, down: float) -> Line:
        return replace(self, path=tuple((x, y + down) for x, y in self.path))


@dataclass(frozen=True)
class Polygon:
    """A closed area; with ``pen`` None its edge is not drawn."""

    corners: tuple[Point, ...]
    fill: Fill
    pen: Pen | None = "thin"

    @property
    def path(self) -> tuple[Point, ...]:
        return (*self.corners, self.corners[0])

    def moved(self, down: float) -> Polygon:
        return replace(self, corners=tuple((x, y + down) for x, y in self.corners))

    def holds(self, point: Point) -> bool:
        """Whether a point lies inside (even-odd rule)."""
        x, y = point
        inside = False
        for (x1, y1), (x2, y2) in itertools.pairwise(self.path):
            if (y1 > y) != (y2 > y) and x < x1 + (y - y1) / (y2 - y1) * (x2 - x1):
                inside = not inside
        return inside


@dataclass(frozen=True)
class Circle:
    """A circle; ``radius`` in mm."""

    centre: Point
    radius: float
    fill: Fill = "plain"
    pen: Pen = "thin"

    @property
    def path(self) -> tuple[Point, ...]:
        return _arc(self.centre, self.radius, 0, 360)

    def moved(self, down: float) -> Circle:
        return replace(self, centre=(self.centre[0], self.centre[1] + down))


@dataclass(frozen=True)
class Arrow:
    """A straight arrow with a solid head at ``tip``."""

    tail: Point
    tip: Point
    pen: Pen = "medium"

    @property
    def path(self) -> tuple[Point, ...]:
        return (self.tail, self.tip)

    def moved(self, down: float) -> Arrow:
        tail, tip = self.tail, self.tip
        return replace(self, tail=(tail[0], tail[1] + down), tip=(tip[0], tip[1] + down))


@dataclass(frozen=True)
class Turn:
    """An arc with a solid head at its end: the sense of a couple.

    ``start`` is in degrees, 0 to the right and 90 down the paper; ``sweep`` > 0 turns clockwise.
    """

    centre: Point
    radius: float
    start: float
    sweep: float
    pen: Pen = "medium"

    @property
    def path(self) -> tuple[Point, ...]:
        return _arc(self.centre, self.radius, self.start, self.sweep)

    def moved(self, down: float) -> Turn:
        return replace(self, centre=(self.centre[0], self.centre[1] + down))


@dataclass(frozen=True)
class Label:
    """A text, its box's top left corner at ``corner``; ``turned`` reads upwards.

    ``backed`` clears the paper behind it.
    """

    text: Text
    corner: Point
    turned: bool = False
    backed: bool = False

    @cached_property
    def box(self) -> Box:
        width, height = self.text.width, self.text.height
        if self.turned:
            width, height = height, width
        left, top = self.corner
        return Box(left, top, left + width, top + height)

    @property
    def path(self) -> tuple[Point, ...]:
        box = self.box
        return ((box.left, box.top), (box.right, box.bottom))

    def moved(self, down: float) -> Label:
        return replace(self, corner=(self.corner[0], self.corner[1] + down))


Item = Line | Polygon | Circle | Arrow | Turn | Label


@dataclass(frozen=True)
class Drawing:
    """Items in the order of drawing, on paper of ``width`` x ``height`` mm.

    ``caption`` stands under the figure; ``alt`` says in words what the figure shows.
    """

    items: tuple[Item, ...]
    width: float
    height: float
    caption: str
    alt: str


def _arc(centre: Point, radius: float, start: float, sweep: float) -> tuple[Point, ...]:
    """Points of an arc, one for each 15 degrees or less."""
    count = max(1, math.ceil(abs(sweep) / 15))
    angles = (math.radians(start + sweep * step / count) for step in range(count + 1))
    x, y = centre
    return tuple((x + radius * math.cos(angle), y + radius * math.sin(angle)) for angle in angles)


def extent(items: tuple[Item, ...]) -> tuple[float, float]:
    """The least and the greatest y of any item; (0, 0) for none."""
    heights = [y for item in items for _, y in item.path]
    return min(heights, default=0.0), max(heights, default=0.0)
