"""The envelope of an effect along the beam: its greatest and least values at every station."""

from __future__ import annotations

import itertools
from bisect import bisect_left, bisect_right
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from operator import itemgetter

from calcpack.exact.numbers import printed
from calcpack.exact.units import SYSTEMS
from calcpack.model.beam import Beam
from calcpack.sheets.bands import drawn
from calcpack.sheets.beam_parts import beam_scale, named_beam
from calcpack.sheets.dimensions import digits, note
from calcpack.sheets.drawing import Drawing, Item, Label, Line, Point, Polygon, Scale
from calcpack.sheets.figures import WIDTH
from calcpack.sheets.labels import TOUCH, Tag, in_the_way, row
from calcpack.sheets.lettering import PITCH, Text, plain, signed, wrapped
from calcpack.sheets.line_parts import CLEAR, drop_between

ASIDE = 0.5
"""Between a point and a label to one side of it, in mm."""
ABOVE = 0.6
"""Between a point, or the end of its leader, and a label above or below it, in mm."""
AROUND = 0.3
"""Left free around a label, in mm."""
LIFTS = 3
"""So many lines a label may stand away from its point, on an upright leader."""

Both = tuple[Fraction, Fraction, Fraction]
"""Station, greatest value (>= 0) and least value (<= 0)."""
Points = Sequence[Both]
"""From left to right."""
Profile = Sequence[tuple[Fraction, Fraction]]
"""Station and value, from left to right."""


@dataclass(frozen=True)
class Extreme:
    """The greatest or the least value of a span and its place.

    ``lean`` is the side to which its label may stand: -1 left, 1 right, 0 either.
    """

    at: Fraction
    value: Fraction
    lean: int

    def size(self) -> Fraction:
        return abs(self.value)


@dataclass(frozen=True)
class Mark:
    """A text and the point on paper that it names; ``lean`` as in ``Extreme``."""

    text: Text
    at: Point
    lean: int


@dataclass(frozen=True)
class Outline:
    """One side of the envelope on paper: places from left to right, distances from the axis."""

    places: tuple[float, ...]
    heights: tuple[float, ...]

    def height(self, left: float, right: float) -> float:
        """The greatest distance from the axis between two places."""
        first, last = bisect_left(self.places, left), bisect_right(self.places, right)
        found = [0.0, *self.heights[first:last]]
        for x, after in ((left, first), (right, last)):
            if 0 < after < len(self.places):
                (x1, y1), (x2, y2) = ((self.places[n], self.heights[n]) for n in (after - 1, after))
                found.append(y1 + (x - x1) / (x2 - x1) * (y2 - y1))
        return max(found)


@dataclass(frozen=True)
class Span:
    """What lies between two neighbouring supports, or a support and a free end."""

    name: str
    start: Fraction
    end: Fraction
    greatest: Extreme
    least: Extreme


def envelope_figure(
    beam: Beam,
    points: Points,
    title: str,
    unit: str,
    decimals: int,
    units: str,
    width: float = WIDTH,
) -> Drawing:
    """The beam, and under it on the same stations the envelope of an effect.

    The greatest and the least value of each span are labelled where there is room for them; those
    of the whole beam always.

    Args:
        beam: drawn above.
        points: joined by straight strokes; the greatest values are drawn upward in tone, the least
            ones downward and hatched, at one scale. A station given twice is a jump.
        title: what the envelope is of, such as "bending moment".
        unit: of the values, "" for a pure number.
        decimals: of the values.
        units: "US" or "SI": the unit of length.
        width: of the paper in mm; the height follows.
    """
    scale = beam_scale(beam, width)
    headed = f"{title} ({unit})" if unit else title
    found = _spans(beam, points)
    drop = drop_between(
        max((greatest for _, greatest, _ in points), default=Fraction(0)),
        min((least for _, _, least in points), default=Fraction(0)),
    )
    labels = [
        _labels(
            _marks(extremes, scale, drop, decimals, width),
            down,
            Outline(
                tuple(scale(point[0]) for point in points),
                tuple(abs(drop(point[side])) for point in points),
            ),
            width,
        )
        for down, side, extremes in (
            (-1, 1, [one.greatest for one in found]),
            (1, 2, [one.least for one in found]),
        )
    ]
    bands = (
        named_beam(beam, scale, width, needed=()),
        note(headed, 0.0, 1, width),
        (*_curve(beam, points, scale, drop), *itertools.chain(*labels)),
    )
    name = f"Envelope of {headed}"
    return drawn(
        bands,
        width,
        f"{name}: greatest above, least below; straight between the points of the table.",
        f"{name}: {_words(found, decimals, SYSTEMS[units]['length'])}.",
    )


def _spans(beam: Beam, points: Points) -> list[Span]:
    """The spans and overhangs in which there are points, with their extremes.

    Of a station given twice between two spans each takes the face on its side.
    """
    names: dict[Fraction, list[str]] = {}
    for support in beam.supports:
        names.setdefault(support.at, []).append(support.name)
    ends = {Fraction(0): "left end", beam.length: "right end"}
    called = {**ends, **{at: " and ".join(those) for at, those in names.items()}}
    stations, faces = _by_station(points)
    found = []
    for start, end in itertools.pairwise(sorted(called)):
        inner = stations[bisect_right(stations, start) : bisect_left(stations, end)]
        own = [
            *faces.get(start, ())[-1:],
            *(point for at in inner for point in faces[at]),
            *faces.get(end, ())[:1],
        ]
        if own:
            greatest, least = (
                Extreme(at, value, (at == start) - (at == end))
                for at, value in (
                    max(((at, most) for at, most, _ in own), key=itemgetter(1)),
                    min(((at, least) for at, _, least in own), key=itemgetter(1)),
                )
            )
            found.append(Span(f"{called[start]} to {called[end]}", start, end, greatest, least))
    return found


def _by_station(points: Points) -> tuple[list[Fraction], dict[Fraction, list[Both]]]:
    """The stations in order, and the points of each."""
    faces: dict[Fraction, list[Both]] = {}
    for point in points:
        faces.setdefault(point[0], []).append(point)
    return list(faces), faces


def _curve(
    beam: Beam, points: Points, scale: Scale, drop: Callable[[Fraction], float]
) -> tuple[Item, ...]:
    """Both areas about the axis at y = 0, and an upright through them at each support."""
    above = list(_lobes([(at, most) for at, most, _ in points], scale, drop))
    below = list(_lobes([(at, least) for at, _, least in points], scale, drop))
    _, faces = _by_station(points)
    uprights = []
    for at in sorted({support.at for support in beam.supports} & faces.keys()):
        heights = [drop(value) for _, *both in faces[at] for value in both]
        if min(heights) < max(heights):
            uprights.append(Line(((scale(at), min(heights)), (scale(at), max(heights))), "hair"))
    return (
        *(Polygon(corners, "tone", None) for corners in above),
        *(Polygon(corners, "hatch", None) for corners in below),
        *uprights,
        Line(((scale(Fraction(0)), 0.0), (scale(beam.length), 0.0)), "thin"),
        *(Line(corners, "medium") for corners in (*above, *below)),
    )


def _lobes(
    profile: Profile, scale: Scale, drop: Callable[[Fraction], float]
) -> Iterator[tuple[tuple[float, float], ...]]:
    """The stretches on which a profile is not zero, each from the axis along it to the axis."""
    pairs = itertools.pairwise(profile)
    for off, group in itertools.groupby(pairs, key=lambda pair: any(at[1] for at in pair)):
        if not off:
            continue
        run = list(group)
        path = [(scale(at), drop(value)) for at, value in (run[0][0], *(end for _, end in run))]
        whole = ((path[0][0], 0.0), *path, (path[-1][0], 0.0))
        yield tuple(point for point, _ in itertools.groupby(whole))


def _marks(
    extremes: Sequence[Extreme],
    scale: Scale,
    drop: Callable[[Fraction], float],
    decimals: int,
    width: float,
) -> list[Mark]:
    """What is written on one side of the axis.

    What two spans share is written once; what prints as zero only if it is the value furthest from
    zero, in the middle of the beam if all are zero.
    """
    found: dict[tuple[Fraction, str], Extreme] = {}
    for one in extremes:
        key = one.at, signed(printed(one.value, decimals))
        same = found.get(key)
        found[key] = replace(max(same, one, key=Extreme.size), lean=0) if same else one
    furthest = max(found, key=lambda key: found[key].size(), default=None)
    if furthest and not found[furthest].value:
        middle = (scale.start + scale.end) / 2
        return [Mark(plain(furthest[1]), (scale(middle), 0.0), 0)]
    return [
        Mark(wrapped(plain(text), width), (scale(at), drop(one.value)), one.lean)
        for (at, text), one in found.items()
        if text.strip("0.") or (at, text) == furthest
    ]


def _labels(marks: Sequence[Mark], down: int, outline: Outline, width: float) -> tuple[Item, ...]:
    """Labels below (``down`` = 1) or above (-1) their points, clear of the outline and each other.

    Where they do not all find room at their points they stand in a row with leaders; where a row
    does not hold them either, those furthest from the axis come first: the first of all always
    finds room on an upright leader.
    """
    if not marks:
        return ()
    placed: tuple[Item, ...] = ()
    for order in (
        sorted(marks, key=lambda mark: mark.at[0]),
        sorted(marks, key=lambda mark: -abs(mark.at[1])),
    ):
        placed, every = (), True
        for mark in order:
            label = _beside(mark, down, outline, placed, width)
            placed += label
            every = every and bool(label)
        if every:
            return placed
    fitting = row([Tag(mark.text, mark.at) for mark in marks], 0.0, width)
    if fitting is None or any(len(tag.text.lines) > 1 for tag in fitting.tags):
        return placed  # a number broken into lines could be read as two
    return fitting.draw(down * (max(outline.heights) + CLEAR), down)


def _beside(
    mark: Mark, down: int, outline: Outline, taken: Sequence[Item], width: float
) -> tuple[Item, ...]:
    """A label at its point: centred, or further away on an upright leader, or to a side."""
    (x, y), size = mark.at, mark.text.width
    sides = [(side, 0) for side in (-1, 1) if mark.lean in (0, side)]
    straight = outline.height(x - TOUCH, x + TOUCH) <= abs(y) + TOUCH
    lifts = [(0, lines) for lines in range(1, LIFTS + 1)] if straight else []
    for side, lines in ((0, 0), *lifts, *sides):
        left = x - size / 2 + side * (size / 2 + ASIDE)
        left = min(max(left, 0.0), width - size) if lines else left
        near = y + down * (ABOVE + lines * PITCH)
        label = Label(mark.text, (left, near if down > 0 else near - mark.text.height))
        around = label.box.grown(AROUND)
        leader = ((x, y + down * ABOVE), (x, near - down * TOUCH))
        if (
            left >= 0
            and left + size <= width
            and outline.height(around.left, around.right) < abs(near) - AROUND
            and not any(in_the_way(around, item) for item in taken)
            and not (lines and any(_crossed(item, *leader) for item in taken))
        ):
            return (Line((mark.at, leader[1]), "hair"), label) if lines else (label,)
    return ()


def _crossed(item: Item, start: Point, end: Point) -> bool:
    """Whether a leader would touch a label."""
    return isinstance(item, Label) and item.box.grown(AROUND).cut_by(start, end)


def _words(spans: Sequence[Span], decimals: int, length: str) -> str:
    """The extremes of each span in words, for a reader who cannot see the figure."""
    stations = [at for one in spans for at in (one.start, one.end, one.greatest.at, one.least.at)]
    places = iter(digits(stations))
    parts = []
    for one in spans:
        start, end, *at = itertools.islice(places, 4)
        greatest, least = (
            signed(printed(extreme.value, decimals)) + (f" at {place}" if extreme.value else "")
            for extreme, place in zip((one.greatest, one.least), at, strict=True)
        )
        parts.append(f"{one.name} ({start} to {end} {length}): greatest {greatest}, least {least}")
    return "; ".join(parts) or "no values"
