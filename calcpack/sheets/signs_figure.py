"""The sign conventions drawn: small pieces of beam side by side, each acted on as counts +."""

from __future__ import annotations

from collections.abc import Callable

from calcpack.exact.formula import Symbol
from calcpack.model.beam import Face
from calcpack.sheets.bands import BETWEEN, Band, drawn
from calcpack.sheets.drawing import HEAD_WIDTH, Arrow, Drawing, Item, Label, Line, Turn
from calcpack.sheets.lettering import PITCH, Run, Text, plain, runs_of, wrapped

WIDTH = 150.0
"""Width of the figure in mm."""
DEPTH = 5.0
"""Depth of a piece of beam, in mm."""
HALF = 10.0
"""From the middle of a piece, or of the two beside a cut, to its far end, in mm."""
OPEN = 3.8
"""From the middle of a cut to the face on either side, in mm."""
FORCE = 6.5
"""Length of a force's arrow in mm."""
RADIUS = 2.9
"""Of a couple's arc, in mm."""
TOUCH = 0.6
"""Between an arrow and what it pushes, or what names it, in mm."""

TOP, BOTTOM = -DEPTH / 2, DEPTH / 2


def signs_figure() -> Drawing:
    """Reaction, shear, moment, support couple, unit load and stations in their positive sense.

    Shear and moment are the pair on the two faces of a cut; thin arrows are the outside forces.
    Not to scale; 150 mm wide.
    """
    pieces: tuple[tuple[str, Symbol, str, Callable[[float], Band]], ...] = (
        ("Reaction ", Symbol("R"), "upward", _reaction),
        ("Shear ", Symbol("V"), "outside forces left of the cut push up", _shear),
        ("Moment ", Symbol("M"), "sagging", _moment),
        ("Couple ", Symbol("C"), "of a support, anticlockwise on the beam", _couple),
        ("Unit load ", Symbol("P"), "downward", _load),
        ("Station ", Symbol("x"), "from the left end to the right", _station),
    )
    share = WIDTH / len(pieces)
    drawings: list[Item] = []
    words: list[Item] = []
    for number, (name, symbol, sense, draw) in enumerate(pieces):
        middle = share * (number + 0.5)
        drawings.extend(draw(middle))
        words.append(_centred(Text(((Run(name), *runs_of(symbol)),)), middle, 0.0))
        words.append(_centred(wrapped(plain(sense), share - BETWEEN), middle, PITCH))
    senses = "; ".join(f"{name}{symbol} {sense}" for name, symbol, sense, _ in pieces)
    return drawn(
        (tuple(drawings), tuple(words)),
        WIDTH,
        "What counts as positive. At a cut: the pair on both faces; thin arrows: outside forces.",
        f"What counts as positive, drawn on small pieces of beam: {senses}. A positive shear acts "
        "downward on the face left of the cut and upward on the face right of it; a positive "
        "moment acts anticlockwise on the face left of the cut and clockwise on that right of it.",
    )


def _reaction(x: float) -> Band:
    arrow = Arrow((x, BOTTOM + TOUCH + FORCE), (x, BOTTOM + TOUCH))
    return (*_piece(x - HALF, x + HALF), arrow, _beside(_letter("R"), x, arrow.tail[1] - PITCH))


def _shear(x: float) -> Band:
    """A cut; from outside, the left part is pushed up and the right part down."""
    left, right = x - OPEN + 1.3, x + OPEN - 1.3
    reach = DEPTH / 2 + 0.5
    outside = (OPEN + HALF) / 2
    return (
        *_cut(x),
        Arrow((left, -reach), (left, reach)),
        Arrow((right, reach), (right, -reach)),
        _centred(_letter("V"), left, -reach - TOUCH - PITCH),
        _centred(_letter("V"), right, reach + TOUCH),
        Arrow((x - outside, BOTTOM + TOUCH + FORCE), (x - outside, BOTTOM + TOUCH), "thin"),
        Arrow((x + outside, TOP - TOUCH - FORCE), (x + outside, TOP - TOUCH), "thin"),
    )


def _moment(x: float) -> Band:
    """A cut; both parts are bent as the dashed curve sags."""
    sag = tuple((x + HALF * n / 8, BOTTOM + 3.5 - 2.0 * (n / 8) ** 2) for n in range(-8, 9))
    names = (x - OPEN * 0.8, x + OPEN * 0.8)
    return (
        *_cut(x),
        _turn(x - OPEN, 1, -1),
        _turn(x + OPEN, -1, 1),
        *(_centred(_letter("M"), place, TOP - TOUCH - HEAD_WIDTH - PITCH) for place in names),
        Line(sag, dashed=True),
    )


def _couple(x: float) -> Band:
    """The left end of the beam."""
    end = x - HALF / 2
    letter = _letter("C")
    left = end - RADIUS - TOUCH - HEAD_WIDTH / 2 - letter.width
    return (
        *_piece(end, x + HALF, face="left"),
        _turn(end, -1, -1),
        Label(letter, (left, -PITCH / 2)),
    )


def _load(x: float) -> Band:
    arrow = Arrow((x, TOP - TOUCH - FORCE), (x, TOP - TOUCH))
    text = Text(((*runs_of(Symbol("P")), Run(" = 1")),))
    return (*_piece(x - HALF, x + HALF), arrow, _beside(text, x, arrow.tail[1]))


def _station(x: float) -> Band:
    """The left end of the beam, and from there the distance to any place on it."""
    level = BOTTOM + 2.5
    start, stop = x - HALF, x + HALF / 2
    return (
        *_piece(start, x + HALF, face="left"),
        *(Line(((place, BOTTOM + TOUCH), (place, level + 1.0)), "hair") for place in (start, stop)),
        Arrow((start, level), (stop, level), "thin"),
        _centred(_letter("x"), (start + stop) / 2, level + TOUCH),
    )


def _piece(left: float, right: float, face: Face | None = None) -> Band:
    """A piece of beam seen from the side, closed at a face, open where the beam goes on."""
    if face is None:
        return tuple(Line(((left, y), (right, y)), "medium") for y in (TOP, BOTTOM))
    near, far = (left, right) if face == "left" else (right, left)
    return (Line(((far, TOP), (near, TOP), (near, BOTTOM), (far, BOTTOM)), "medium"),)


def _cut(x: float) -> Band:
    """The two parts of a beam beside a cut."""
    return (*_piece(x - HALF, x - OPEN, face="right"), *_piece(x + OPEN, x + HALF, face="left"))


def _turn(face: float, outward: int, clockwise: int) -> Turn:
    """An arc that bulges from a face to the right (``outward`` = 1) or to the left (-1)."""
    middle = 0.0 if outward > 0 else 180.0
    return Turn((face, 0.0), RADIUS, middle - clockwise * 70, clockwise * 140)


def _letter(letter: str) -> Text:
    return Text((runs_of(Symbol(letter)),))


def _beside(text: Text, x: float, top: float) -> Label:
    """A name just to the right of an upright arrow."""
    return Label(text, (x + HEAD_WIDTH / 2 + TOUCH, top))


def _centred(text: Text, x: float, top: float) -> Label:
    return Label(text, (x - text.width / 2, top))
