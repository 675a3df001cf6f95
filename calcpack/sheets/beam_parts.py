"""The beam as figures show it: line, supports, releases, sections, their names, dimensions."""

from __future__ import annotations

import math
from collections.abc import Collection, Iterable, Iterator
from fractions import Fraction

from calcpack.model.beam import Beam, Release, Section, Support
from calcpack.sheets.dimensions import names
from calcpack.sheets.drawing import Circle, Item, Line, Polygon, Scale, extent
from calcpack.sheets.labels import Tag
from calcpack.sheets.lettering import plain

MARGIN = 8.0
"""From the paper's edge to the beam's end, in mm."""
ROOM = 5.5
"""What a support's symbol wants of the beam, in mm; where supports stand closer it shrinks."""
SMALLEST = 0.4
"""The least size of a symbol, as part of its full size."""
HINGE = 1.1
"""Radius of a hinge in mm."""
FEW = 12
"""Up to so many sections all are named."""
ASIDE = 2.2
"""How far a support stands from a release of which it holds one face, in mm."""
CLEAR = 0.7
"""Between names and what they name, in mm."""


def beam_scale(beam: Beam, width: float) -> Scale:
    """The one mapping from stations to paper for all figures of a beam on ``width`` mm."""
    return Scale(Fraction(0), beam.length, MARGIN, width - MARGIN)


def beam_items(beam: Beam, scale: Scale) -> tuple[Item, ...]:
    """The beam along y = 0 with its supports, releases and section ticks, without any text."""
    items: list[Item] = [Line(((scale(Fraction(0)), 0.0), (scale(beam.length), 0.0)), "heavy")]
    places = [scale(support.at) for support in beam.supports]
    for support in beam.supports:
        x = scale(support.at)
        gap = min((abs(x - place) for place in places if place != x), default=ROOM)
        items.extend(_support(support, x, max(SMALLEST, min(1.0, gap / ROOM)), beam))
    items.extend(Line(_upright(scale(section.at), -1.9, 1.9), "thin") for section in beam.sections)
    for release in beam.releases:
        items.extend(release_items(release.kind, scale(release.at)))
    return tuple(items)


def release_items(kind: str, x: float) -> tuple[Item, ...]:
    """A hinge as a small circle, a slide as two upright strokes with a gap in the beam."""
    if kind == "hinge":
        return (Circle((x, 0.0), HINGE, "plain", "medium"),)
    gap = Polygon(_rectangle(x - 0.6, -0.6, x + 0.6, 0.6), "plain", None)
    return (gap, *(Line(_upright(x + side, -2.2, 2.2), "medium") for side in (-0.6, 0.6)))


def _support(support: Support, x: float, size: float, beam: Beam) -> Iterator[Item]:
    x += {None: 0.0, "left": -ASIDE, "right": ASIDE}[support.face]
    on_hinge = any(r.at == support.at for r in beam.releases) and support.face is None
    top = HINGE if on_hinge else 0.45
    at_end = support.at in (0, beam.length)
    outward = -1.0 if support.at == 0 else 1.0
    match support.kind:
        case "pin":
            base = top + 3.0 * size
            corners = ((x, top), (x + 1.7 * size, base), (x - 1.7 * size, base))
            yield Polygon(corners, "plain", "medium")
            yield from _ground(x, base, size)
        case "roller":
            radius = 1.3 * size
            yield Circle((x, top + radius), radius, "plain", "medium")
            yield from _ground(x, top + 2 * radius + 0.4 * size, size)
        case "fixed" if at_end:
            yield from _wall(x, outward, -3.5, 3.5)
        case "fixed":
            for side in (-1, 1):
                plate = _rectangle(x - 1.8 * size, side * 0.45, x + 1.8 * size, side * 2.8)
                yield Polygon(plate, "hatch", "medium")
        case "spring":
            if support.vertical:
                yield Line(_zigzag(x, top, 3.6 * size, size), "thin")
                yield from _ground(x, top + 3.6 * size, size)
            if support.rotational:
                yield Line(_spiral(x), "thin")
        case "guided" if at_end:
            yield Line(_upright(x, -2.8, 2.8), "medium")
            for y in (-1.6, 1.6):
                yield Circle((x + outward * 0.8, y), 0.6)
            yield from _wall(x + outward * 1.6, outward, -3.5, 3.5)
        case "guided":
            for side in (-1, 1):
                stem = _rectangle(x - 0.7 * size, side * 0.45, x + 0.7 * size, side * 2.8)
                yield Polygon(stem, "plain", "medium")
                for hand in (-1.0, 1.0):
                    ends = sorted((side * 0.9, side * 3.2))
                    yield from _wall(x + hand * 1.3 * size, hand, *ends)


def _zigzag(x: float, top: float, height: float, size: float) -> tuple[tuple[float, float], ...]:
    """A coil spring that stands under the beam."""
    turns = 6
    inner = (
        (x + (-1.0) ** step * 1.1 * size, top + height * (step + 0.5) / turns)
        for step in range(turns)
    )
    return ((x, top), *inner, (x, top + height))


def _spiral(x: float) -> tuple[tuple[float, float], ...]:
    """A spiral spring about the beam's axis."""
    steps = 36
    angles = ((step / steps, 3 * math.pi * step / steps) for step in range(steps + 1))
    return tuple(
        (x + (0.8 + 1.6 * part) * math.cos(turn), (0.8 + 1.6 * part) * math.sin(turn))
        for part, turn in angles
    )


def _ground(x: float, y: float, size: float) -> Iterator[Item]:
    """A level line, with strokes below it where there is room."""
    half = 2.5 * size
    yield Line(((x - half, y), (x + half, y)), "medium")
    for step in range(5 if size > SMALLEST else 0):
        start = x - half + (step + 0.6) * half * 2 / 5
        yield Line(((start, y), (start - 0.9 * size, y + 1.0 * size)), "hair")


def _wall(x: float, outward: float, top: float, bottom: float) -> Iterator[Item]:
    """An upright line with strokes on the side that does not move."""
    yield Line(_upright(x, top, bottom), "medium")
    count = round((bottom - top) / 1.0)
    for step in range(count):
        y = top + (step + 0.3) * (bottom - top) / count
        yield Line(((x, y), (x + outward * 1.0, y + 0.8)), "hair")


def _upright(x: float, top: float, bottom: float) -> tuple[tuple[float, float], ...]:
    return ((x, top), (x, bottom))


def _rectangle(
    left: float, top: float, right: float, bottom: float
) -> tuple[tuple[float, float], ...]:
    return ((left, top), (right, top), (right, bottom), (left, bottom))


def named_beam(
    beam: Beam, scale: Scale, width: float, needed: Collection[Fraction], above: bool = True
) -> tuple[Item, ...]:
    """The beam along y = 0 with the names of its supports below, of the rest above it.

    Args:
        beam: what is drawn.
        scale: stations to paper.
        width: of the paper in mm.
        needed: stations of the sections whose names stay also where there are many.
        above: False puts all names below, where axles stand on the beam.
    """
    items = beam_items(beam, scale)
    top, bottom = extent(items)
    top, bottom = top - CLEAR, bottom + CLEAR

    def tags(parts: Iterable[Support | Release | Section], edge: float) -> list[Tag]:
        """One for each place, with all names there."""
        found: dict[Fraction, list[str]] = {}
        for part in parts:
            found.setdefault(part.at, []).append(part.name)
        return [Tag(plain(", ".join(found[at])), (scale(at), edge)) for at in found]

    cuts = [section for section in beam.sections if section.name]
    few = len(cuts) <= FEW
    kept = [cut for cut in cuts if few or cut.at in needed]
    wished = [] if few else [cut for cut in cuts if cut.at not in needed]
    if not above:
        together = tags((*beam.supports, *beam.releases, *kept), bottom)
        return (*items, *names(together, tags(wished, bottom), bottom, 1, width))
    return (
        *items,
        *names(tags(beam.supports, bottom), (), bottom, 1, width),
        *names(tags((*beam.releases, *kept), top), tags(wished, top), top, -1, width),
    )
