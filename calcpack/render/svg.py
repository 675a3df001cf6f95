"""A drawing as SVG with real text: the same drawing gives the same bytes."""

from __future__ import annotations

import itertools
import math
import re
from collections.abc import Iterator, Sequence
from xml.sax.saxutils import escape, quoteattr

from calcpack.sheets.drawing import (
    HEAD_LENGTH,
    HEAD_WIDTH,
    PENS,
    Arrow,
    Circle,
    Drawing,
    Fill,
    Item,
    Label,
    Line,
    Pen,
    Point,
    Polygon,
    Turn,
)
from calcpack.sheets.lettering import BASE, DROP, FAMILY, PITCH, SIZE

HATCH = 1.1
"""Distance of hatching strokes, measured along x, in mm."""
FILLS: dict[Fill, str] = {
    "none": "none",
    "plain": "#fff",
    "hatch": "#fff",
    "tone": "#d0d0d0",
    "solid": "#000",
}
_NOT_XML = re.compile("[^\t\n\r\x20-\ud7ff\ue000-\ufffd\U00010000-\U0010ffff]")


def to_svg(drawing: Drawing) -> bytes:
    """The drawing as an SVG of its own size in mm (one unit is 1 mm), UTF-8.

    Texts stay texts in the family ``FAMILY``; they are escaped, and characters that XML forbids
    become U+FFFD. Nothing refers to anything outside.
    """
    size = f"{_number(drawing.width)} {_number(drawing.height)}"
    width, height = size.split()
    lines = [
        f'<svg xmlns="http://www.w3.org/2000/svg" width="{width}mm" height="{height}mm" '
        f'viewBox="0 0 {size}" role="img" aria-label={quoteattr(_clean(drawing.alt))} '
        f'font-family="{FAMILY}, Verdana, sans-serif" font-size="{_number(SIZE)}" '
        'fill="none" stroke-linejoin="round">'
    ]
    for item in drawing.items:
        lines.extend(_drawn(item))
    lines.append("</svg>\n")
    return "\n".join(lines).encode()


def _drawn(item: Item) -> Iterator[str]:
    match item:
        case Line():
            dash = ' stroke-dasharray="1.2 0.8"' if item.dashed else ""
            yield f'<path d="{_path(item.path)}"{_stroke(item.pen)}{dash}/>'
        case Polygon():
            stroke = _stroke(item.pen) if item.pen else ""
            area = f'<path d="{_path(item.corners)}Z" fill="{FILLS[item.fill]}"'
            if item.fill == "hatch":
                yield f"{area}/>"
                yield f'<path d="{_hatching(item.path)}"{_stroke("hair")}/>'
                area = f'<path d="{_path(item.corners)}Z"'
            if stroke or item.fill != "hatch":
                yield f"{area}{stroke}/>"
        case Circle():
            (x, y), radius = item.centre, item.radius
            yield (
                f'<circle cx="{_number(x)}" cy="{_number(y)}" r="{_number(radius)}" '
                f'fill="{FILLS[item.fill]}"{_stroke(item.pen)}/>'
            )
        case Arrow():
            yield from _arrow(item.path, item.tip, item.tail, item.pen)
        case Turn():
            back = math.copysign(math.degrees(HEAD_LENGTH / item.radius), item.sweep)
            angle = math.radians(item.start + item.sweep - back)
            before = (
                item.centre[0] + item.radius * math.cos(angle),
                item.centre[1] + item.radius * math.sin(angle),
            )
            yield from _arrow(item.path, item.path[-1], before, item.pen)
        case Label():
            yield from _lettered(item)


def _arrow(path: Sequence[Point], tip: Point, before: Point, pen: Pen) -> Iterator[str]:
    """A shaft that ends inside its head, and the head."""
    length = math.dist(before, tip)
    along = ((tip[0] - before[0]) / length, (tip[1] - before[1]) / length)
    base = (tip[0] - HEAD_LENGTH * along[0], tip[1] - HEAD_LENGTH * along[1])
    half = HEAD_WIDTH / 2
    wings = [(base[0] - s * half * along[1], base[1] + s * half * along[0]) for s in (1, -1)]
    shaft = [point for point in path[:-1] if math.dist(point, tip) > HEAD_LENGTH]
    inside = (tip[0] - 0.7 * HEAD_LENGTH * along[0], tip[1] - 0.7 * HEAD_LENGTH * along[1])
    yield f'<path d="{_path((*shaft, inside))}"{_stroke(pen)}/>'
    yield f'<path d="{_path((tip, *wings))}Z" fill="#000"/>'


def _lettered(label: Label) -> Iterator[str]:
    box, text = label.box, label.text
    if label.backed:
        left, top, width, height = box.left, box.top, box.right - box.left, box.bottom - box.top
        yield (
            f'<rect x="{_number(left)}" y="{_number(top)}" width="{_number(width)}" '
            f'height="{_number(height)}" fill="#fff"/>'
        )
    x, y = label.corner
    turn = f' transform="translate({_number(x)} {_number(box.bottom)}) rotate(-90)"'
    left, top = (0.0, 0.0) if label.turned else (x, y)
    for number, line in enumerate(text.lines):
        start = left + (text.width - sum(run.width for run in line)) / 2
        base = top + BASE + number * PITCH
        spans, below = "", False
        for run in line:
            style = ' font-style="italic"' if run.slanted else ""
            if run.lowered:
                style += f' font-size="{_number(run.size)}"'
            if run.lowered != below:
                style += f' dy="{_number(DROP if run.lowered else -DROP)}"'
                below = run.lowered
            words = escape(_clean(run.text))
            spans += f"<tspan{style}>{words}</tspan>" if style else words
        yield (
            f'<text x="{_number(start)}" y="{_number(base)}" fill="#000" '
            f'xml:space="preserve"{turn if label.turned else ""}>{spans}</text>'
        )


def _hatching(path: Sequence[Point]) -> str:
    """Strokes at 45 degrees clipped to a closed path (even-odd rule).

    A stroke is a line x + y = c; each edge is crossed where that sum passes c.
    """
    edges = list(itertools.pairwise(path))
    sums = [x + y for x, y in path]
    strokes: list[str] = []
    for step in range(math.floor(min(sums) / HATCH) + 1, math.ceil(max(sums) / HATCH)):
        level = step * HATCH
        crossings = []
        for (x1, y1), (x2, y2) in edges:
            before, after = x1 + y1 - level, x2 + y2 - level
            if (before > 0) != (after > 0):
                part = before / (before - after)
                crossings.append((x1 + part * (x2 - x1), y1 + part * (y2 - y1)))
        crossings.sort()
        strokes.extend(_path(pair) for pair in zip(crossings[::2], crossings[1::2], strict=True))
    return "".join(strokes)


def _path(points: Sequence[Point]) -> str:
    places = (f"{_number(x)} {_number(y)}" for x, y in points)
    return "M" + "L".join(places)


def _stroke(pen: Pen) -> str:
    return f' stroke="#000" stroke-width="{_number(PENS[pen])}"'


def _number(value: float) -> str:
    """A length in mm to the micrometre, without needless zeros; never a negative zero."""
    text = f"{value:.3f}".rstrip("0").rstrip(".")
    return "0" if text == "-0" else text


def _clean(text: str) -> str:
    return _NOT_XML.sub("\ufffd", text)
