"""The figures of a beam: the beam alone, an influence line under it, a load where it governs.

All of them map stations to the same places on the same width of paper.
"""

from __future__ import annotations

import itertools
from collections.abc import Sequence
from fractions import Fraction

from calcpack.exact.numbers import printed
from calcpack.exact.piecewise import Piecewise
from calcpack.exact.units import SYSTEMS
from calcpack.model.beam import Beam
from calcpack.model.loads import Heading
from calcpack.sheets.bands import BETWEEN, Band, drawn, moved, stacked
from calcpack.sheets.beam_parts import CLEAR, beam_scale, named_beam
from calcpack.sheets.dimensions import chain, digits, names, note
from calcpack.sheets.drawing import (
    Arrow,
    Circle,
    Drawing,
    Item,
    Label,
    Line,
    Polygon,
    Scale,
    extent,
)
from calcpack.sheets.labels import Tag
from calcpack.sheets.lettering import PITCH, plain, signed
from calcpack.sheets.line_parts import TALLEST, areas, drop_of, line_items, marks, ordinates

WIDTH = 150.0
"""Width of a figure in mm unless told otherwise."""
AXLE = 8.0
"""Length of an axle's arrow in mm."""
ARROW = 9.0
"""Length of the arrow that shows the heading, in mm."""
STRIP = 2.4
"""Height of the strip that shows a uniform load, in mm."""
DOT = 0.45
"""Radius of the dot at an axle's ordinate, in mm."""

AxleOnLine = tuple[Fraction, Fraction, Fraction]
"""Station, weight and ordinate of an axle."""
Stretch = tuple[Fraction, Fraction]


def beam_figure(beam: Beam, units: str, width: float = WIDTH) -> Drawing:
    """The beam to scale with supports, releases, sections, names and a chain of dimensions.

    Args:
        beam: what is drawn.
        units: "US" or "SI": the unit of length.
        width: of the paper in mm; the height follows.
    """
    scale, unit = beam_scale(beam, width), SYSTEMS[units]["length"]
    ends = (Fraction(0), beam.length)
    coarse = [*ends, *(s.at for s in beam.supports), *(r.at for r in beam.releases)]
    bands = (
        named_beam(beam, scale, width, needed=()),
        chain([station.at for station in beam.stations], coarse, scale, width),
        chain(ends, ends, scale, width, unit),
    )
    caption = f"The beam to scale; lengths in {unit}."
    return drawn(bands, width, caption, _beam_words(beam, unit))


def line_figure(
    beam: Beam,
    line: Piecewise,
    title: str,
    unit: str,
    decimals: int,
    units: str,
    area_decimals: int = 1,
    width: float = WIDTH,
) -> Drawing:
    """The beam, and under it on the same stations an influence line with ordinates and areas.

    Args:
        beam: drawn above.
        line: over the whole beam; positive values are drawn upward in tone, negative ones downward
            and hatched.
        title: what the line is of, such as "M at 1".
        unit: of the ordinates, "" for a pure number.
        decimals: of the ordinates, which are written where the line breaks or turns; at a jump both
            sides' values, left | right, or each on its own side of the axis.
        units: "US" or "SI": the unit of length, also in that of the areas.
        area_decimals: of the areas.
        width: of the paper in mm; the height follows.
    """
    scale, length = beam_scale(beam, width), SYSTEMS[units]["length"]
    curve = line_items(line, scale)
    labels = ordinates(line, scale, decimals, curve, width)
    area_unit = {"": length, length: SYSTEMS[units]["area"]}.get(unit, f"{unit}·{length}")
    inside = areas(line, scale, area_decimals, area_unit, (*curve, *labels))
    bands = (
        named_beam(beam, scale, width, needed=line.breaks),
        note(_headed(title, unit), 0.0, 1, width),
        (*curve, *labels, *inside),
    )
    name = f"Influence line of {_headed(title, unit)}"
    return drawn(
        bands,
        width,
        f"{name}. Grey: load raises it; hatched: load lowers it.",
        f"{name}: {_line_words(line, decimals)}. {_beam_words(beam, length)}",
    )


def placement_figure(
    beam: Beam,
    line: Piecewise,
    axles: Sequence[AxleOnLine],
    loaded: Sequence[Stretch],
    title: str,
    unit: str,
    decimals: int,
    units: str,
    heading: Heading,
    width: float = WIDTH,
) -> Drawing:
    """A load where it stands: axles and uniform load on the beam, over the influence line.

    Args:
        beam: drawn above.
        line, title, unit, decimals: the influence line, as in ``line_figure``.
        axles: station, weight (force, downward +) and ordinate of each axle that counts.
        loaded: stretches under uniform load, hatched strips on the beam.
        units: "US" or "SI": the unit of the weights.
        heading: the way the load travels.
        width: of the paper in mm; the height follows.
    """
    scale, force = beam_scale(beam, width), SYSTEMS[units]["force"]
    drop = drop_of(line)
    curve = line_items(line, scale)
    dots = tuple(Circle((scale(at), drop(value)), DOT, "solid") for at, _, value in axles)
    lanes = [Line(((x, -TALLEST), (x, TALLEST)), "hair") for x, _ in (dot.centre for dot in dots)]
    others = set(marks(line)) - {at for at, _, _ in axles}
    labels = ordinates(line, scale, decimals, (*curve, *dots, *lanes), width, others)
    under = (*curve, *labels, *dots)
    foot = extent(under)[1] + BETWEEN
    values = [signed(printed(value, decimals)) for _, _, value in axles]
    tags = [
        Tag(plain(text), (scale(axle[0]), foot)) for text, axle in zip(values, axles, strict=True)
    ]
    bands = (
        _legend(heading if axles else None, force, bool(loaded), width),
        (
            *_loads(axles, loaded, scale, width),
            *named_beam(beam, scale, width, needed=line.breaks, above=False),
        ),
        note(_headed(title, unit), 0.0, 1, width),
        (*under, *names(tags, (), foot, 1, width)),
    )
    downs, height = stacked(bands)
    placed = moved(bands, downs)
    written = [item for item in itertools.chain(*placed) if isinstance(item, Label)]
    drops = [
        line
        for dot in dots
        for line in _drop_line(dot.centre[0], downs[1], downs[3] + foot, written)
    ]
    legend, on_beam, words, on_line = placed
    load = f"a load heading {heading}" if axles else "uniform load"
    name = f"{title[:1].upper()}{_headed(title, unit)[1:]} under {load}"
    return Drawing(
        (*on_line, *drops, *on_beam, *words, *legend),
        width,
        height,
        f"{name}, on the beam and over the influence line.",
        f"{name}: {_load_words(axles, loaded, force, decimals)}. "
        f"Influence line: {_line_words(line, decimals)}.",
    )


def _legend(heading: Heading | None, force: str, loaded: bool, width: float) -> Band:
    """What the load's signs mean, behind an arrow that heads the way the axles travel."""
    strip = "hatched strip: uniform load" if loaded else ""
    if heading is None:
        return note(strip.capitalize(), 0.0, 1, width)
    words = f"Heading {heading}; axle weights in {force}{'; ' if strip else ''}{strip}"
    ends = ((0.0, PITCH / 2), (ARROW, PITCH / 2))
    arrow = Arrow(*(ends if heading == "right" else ends[::-1]))
    return (arrow, *note(words, 0.0, 1, width, left=ARROW + BETWEEN))


def _loads(
    axles: Sequence[AxleOnLine], loaded: Sequence[Stretch], scale: Scale, width: float
) -> Band:
    """Strips and arrows that stand on a beam along y = 0, weights in a row above them."""
    foot, head = -0.6, -0.6 - AXLE
    items: list[Item] = []
    for start, end in loaded:
        left, right = scale(start), scale(end)
        corners = ((left, foot), (right, foot), (right, foot - STRIP), (left, foot - STRIP))
        items.append(Polygon(corners, "hatch"))
    items.extend(Arrow((scale(at), head), (scale(at), foot)) for at, _, _ in axles)
    texts = digits([weight for _, weight, _ in axles])
    tags = [Tag(plain(t), (scale(axle[0]), head)) for t, axle in zip(texts, axles, strict=True)]
    return (*items, *names(tags, (), head - CLEAR, -1, width))


def _drop_line(x: float, top: float, bottom: float, written: Sequence[Label]) -> list[Line]:
    """A thin line down the paper, interrupted where anything is written."""
    boxes = [label.box.grown(0.4) for label in written]
    gaps = sorted((box.top, box.bottom) for box in boxes if box.left < x < box.right)
    lines = []
    for upper, lower in [*gaps, (bottom, bottom)]:
        if upper - top > 0.5:
            lines.append(Line(((x, top), (x, min(upper, bottom))), "hair"))
        top = max(top, lower)
    return lines


def _headed(title: str, unit: str) -> str:
    return f"{title} ({unit})" if unit else title


def _beam_words(beam: Beam, unit: str) -> str:
    """The beam in words, for a reader who cannot see the figure."""
    places = [
        *((support.kind, support.name, support.at) for support in beam.supports),
        *((release.kind, release.name, release.at) for release in beam.releases),
    ]
    texts = digits([beam.length, *(at for _, _, at in places)])
    parts = [
        f"{kind} {name} at {at}" for (kind, name, _), at in zip(places, texts[1:], strict=True)
    ]
    count = len(beam.sections)
    parts += [f"{count} section{'s' if count > 1 else ''}"] if count else []
    return f"Beam of {texts[0]} {unit}: {', '.join(parts)}."


def _line_words(line: Piecewise, decimals: int) -> str:
    """An influence line's breakpoints in words."""
    parts = []
    places = marks(line)
    for at, station in zip(places, digits(places), strict=True):
        left, right = (printed(value, decimals) for value in (line.left(at), line.right(at)))
        parts.append(f"{left if left == right else f'{left} | {right}'} at {station}")
    return ", ".join(parts)


def _load_words(
    axles: Sequence[AxleOnLine], loaded: Sequence[Stretch], force: str, decimals: int
) -> str:
    """Axles and loaded stretches in words."""
    parts = [
        f"{weight} {force} at {station} on ordinate {printed(axle[2], decimals)}"
        for weight, station, axle in zip(
            digits([axle[1] for axle in axles]),
            digits([axle[0] for axle in axles]),
            axles,
            strict=True,
        )
    ]
    stretches = (digits(stretch) for stretch in loaded)
    parts += [f"uniform load from {start} to {end}" for start, end in stretches]
    return ", ".join(parts) or "no load"
