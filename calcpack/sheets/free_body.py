"""A free body with every force named as in its equation."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from calcpack.exact.formula import Symbol
from calcpack.model.beam import Beam
from calcpack.sheets.bands import drawn
from calcpack.sheets.beam_parts import CLEAR, HINGE, release_items
from calcpack.sheets.dimensions import TICK, chain, digits, names
from calcpack.sheets.drawing import Arrow, Circle, Drawing, Item, Label, Line, Scale, Turn
from calcpack.sheets.labels import Tag
from calcpack.sheets.lettering import Run, Text, plain, runs_of
from calcpack.statics.equation import Equation
from calcpack.statics.system import place_name, symbol_of

WIDTH = 75.0
"""Width of a free body in mm unless told otherwise."""
MARGIN = 13.0
"""From the paper's edge to the body's end, in mm: a couple and its name stand there."""
TIP, TAIL = 1.5, 8.5
"""From the body's axis to the two ends of a force's arrow, in mm."""
ASIDE = 7.0
"""How far from the middle the shears of a body without length act, in mm."""
NEXT = 2.6
"""Between arrows of one sense at one station, in mm."""
RADIUS = 3.4
"""Of a couple's arc, in mm."""
BESIDE = 7.4
"""Longest name of a couple that stands beside its arc beyond an end, in mm."""
RING = 2.1
"""Radius of the ring about the centre of moments, in mm."""
APART = 7.0
"""What the load keeps from other stations where it can, in mm."""
LOAD = Symbol("P")

Sense = Literal[1, -1]
Side = Literal[-1, 0, 1]


@dataclass(frozen=True)
class Force:
    """A force that the equation counts as positive upward (``up`` = 1) or downward (-1).

    ``side`` tells where it acts on a body without length: at the left cut (-1), the right cut (1)
    or between them (0).
    """

    symbol: Symbol
    at: Fraction
    up: Sense
    side: Side = 0


@dataclass(frozen=True)
class Couple:
    """A couple that the equation counts as positive clockwise (1) or anticlockwise (-1).

    ``side`` as for a ``Force``.
    """

    symbol: Symbol
    at: Fraction
    clockwise: Sense
    side: Side = 0


@dataclass(frozen=True)
class Mark:
    """A named place of a body, and the release that is there or was cut there."""

    name: str
    at: Fraction
    release: Literal["", "hinge", "slide"] = ""


@dataclass(frozen=True)
class FreeBody:
    """A piece of the beam with all that acts on it.

    Attributes:
        start, end: its ends; equal for the pin of a hinge over a support, drawn as a circle.
        actions: forces and couples in their positive sense.
        marks: its named places.
        centre: about where moments are taken, or None.
        load: whether the travelling unit load P is drawn, at a general place x.
        centre_symbol: the centre's coordinate as the equation writes it; None: x with its name.
    """

    start: Fraction
    end: Fraction
    actions: tuple[Force | Couple, ...]
    marks: tuple[Mark, ...]
    centre: Fraction | None = None
    load: bool = True
    centre_symbol: Symbol | None = None

    @property
    def stations(self) -> tuple[Fraction, ...]:
        """Its ends, and wherever something acts or is named, in order."""
        places = {self.start, self.end, *(part.at for part in (*self.actions, *self.marks))}
        if self.centre is not None:
            places.add(self.centre)
        return tuple(sorted(places))

    def name(self, at: Fraction) -> str:
        """What the place is called; its station where it has no name."""
        found = (mark.name for mark in self.marks if mark.at == at and mark.name)
        return next(found, digits([at])[0])


def free_body_of(beam: Beam, equation: Equation, centre_symbol: Symbol | None = None) -> FreeBody:
    """The free body of an equation, every action named and directed as the equation counts it.

    Args:
        beam: gives places their names and releases.
        equation: with all that acts on the body.
        centre_symbol: the coordinate of the centre of moments as the equation writes it.
    """
    start, end = equation.start, equation.end
    actions: list[Force | Couple] = []
    for one in equation.actions:
        symbol, at = symbol_of(one.unknown), one.station
        if one.up:
            actions.append(Force(symbol, at, 1 if one.up > 0 else -1, one.edge))
        else:
            actions.append(Couple(symbol, at, 1 if one.clockwise > 0 else -1, one.edge))
    named = {start, end, *(one.station for one in equation.actions)}
    marks = [
        Mark(
            place_name(beam, station.at),
            station.at,
            station.release.kind if station.release else "",
        )
        for station in beam.stations
        if station.at in named or (station.release and start < station.at < end)
    ]
    about = equation.about
    return FreeBody(start, end, tuple(actions), tuple(marks), about, start < end, centre_symbol)


def free_body_figure(body: FreeBody, unit: str, width: float = WIDTH) -> Drawing:
    """A free body: the piece to scale, its forces and couples, the load, the centre of moments.

    Args:
        body: the piece and what acts on it.
        unit: of its stations, named in the caption.
        width: of the paper in mm; the height follows.
    """
    scale = Scale(body.start, body.end, MARGIN, width - MARGIN)
    items = list(_piece(body, scale))
    above: list[Tag] = []
    below: list[Tag] = []
    for force, x in _arrows(body, scale):
        items.append(_arrow(x, force.up))
        (below if force.up > 0 else above).append(_tag(force.symbol, x, force.up * TAIL))
    for couple, x, outward in _turns(body, scale):
        turn = _turn(x, outward, couple.clockwise)
        items.append(turn)
        text = Text((runs_of(couple.symbol),))
        if outward and text.width <= BESIDE:
            near = x + outward * (RADIUS + 1.4)
            left = near if outward > 0 else near - text.width
            items.append(Label(text, (left, -text.height / 2)))
        else:
            above.append(Tag(text, min(turn.path, key=lambda point: point[1])))
    if body.load:
        x = _load_place(body, scale)
        items.append(_arrow(x, -1))
        above.append(_tag(LOAD, x, -TAIL))
        if body.centre is not None and body.start < body.end:
            centre = scale(body.centre)
            items.extend(_arm(centre, x))
            symbol = body.centre_symbol or Symbol("x", body.name(body.centre))
            above.append(_arm_tag(symbol, centre, x))
    items.extend(names(above, (), -TAIL - CLEAR, -1, width))
    items.extend(names(below, (), TAIL + CLEAR, 1, width))
    dimensions = chain(body.stations, body.stations, scale, width)
    called = [
        Tag(plain(mark.name), (scale(mark.at), TICK + CLEAR)) for mark in body.marks if mark.name
    ]
    return drawn(
        (tuple(items), (*dimensions, *names(called, (), TICK + CLEAR, 1, width))),
        width,
        _caption(body, unit),
        _words(body, unit),
    )


def _piece(body: FreeBody, scale: Scale) -> Iterator[Item]:
    """The piece along y = 0 with its releases, and the ring about the centre of moments."""
    left, right = scale(body.start), scale(body.end)
    if body.start < body.end:
        yield Line(((left, 0.0), (right, 0.0)), "heavy")
    else:
        yield Line(((left - ASIDE, 0.0), (right + ASIDE, 0.0)), "medium")
        yield Circle((left, 0.0), HINGE, "plain", "medium")
    for mark in body.marks:
        if mark.release and body.start < body.end:
            yield from release_items(mark.release, scale(mark.at))
    if body.centre is not None:
        yield Circle((scale(body.centre), 0.0), RING, "none", "thin")


def _arrows(body: FreeBody, scale: Scale) -> Iterator[tuple[Force, float]]:
    """Every force with the place of its arrow: those of one sense side by side."""
    crowd: dict[tuple[float, int], int] = {}
    middle = scale((body.start + body.end) / 2)
    for force in body.actions:
        if isinstance(force, Force):
            x = scale(force.at)
            x += force.side * ASIDE if body.start == body.end else 0.0
            before = crowd.setdefault((x, force.up), 0)
            crowd[x, force.up] += 1
            yield force, x + before * (NEXT if x <= middle else -NEXT)


def _turns(body: FreeBody, scale: Scale) -> Iterator[tuple[Couple, float, int]]:
    """Every couple with the place of its arc, and which way it bulges beyond an end (0: upward).

    One couple finds room beyond each end, that of a cut before that of a support; on a body
    without length the couple of a support takes the end that the cut leaves.
    """
    couples = [action for action in body.actions if isinstance(action, Couple)]
    short = body.start == body.end
    taken = {0}
    for couple in sorted(couples, key=lambda one: -abs(one.side)):
        outward = couple.side or (couple.at == body.end) - (couple.at == body.start)
        if short and not couple.side:
            outward = 1 if -1 in {action.side for action in body.actions} else -1
        outward = 0 if outward in taken else outward
        taken.add(outward)
        yield couple, scale(couple.at) + outward * (0.6 + (ASIDE if short else 0.0)), outward


def _turn(x: float, outward: int, clockwise: Sense) -> Turn:
    """An arc beyond an end, or over the piece, that turns the given way."""
    middle = {-1: 180.0, 0: 270.0, 1: 0.0}[outward]
    return Turn((x, 0.0), RADIUS, middle - clockwise * 70, clockwise * 140)


def _arrow(x: float, up: Sense) -> Arrow:
    """Upward below the piece, downward above it, its tip at the piece."""
    return Arrow((x, up * TAIL), (x, up * TIP))


def _tag(symbol: Symbol, x: float, y: float) -> Tag:
    return Tag(Text((runs_of(symbol),)), (x, y))


def _load_place(body: FreeBody, scale: Scale) -> float:
    """Where the load is drawn: about two fifths along, clear of what acts there if possible."""
    left, right = scale(body.start), scale(body.end)
    taken = [scale(at) for at in body.stations]
    tries = [
        left + (right - left) * part / 20
        for part in sorted(range(2, 19), key=lambda n: abs(n - 8.1))
    ]
    return max(tries, key=lambda x: min(APART, *(abs(x - other) for other in taken)))


def _arm(centre: float, x: float) -> Iterator[Item]:
    """The dimension from the centre of moments to the load, level with the arrows' tails."""
    level = 0.8 - TAIL
    yield Line(((centre, -RING), (centre, level - TICK)), "hair")
    yield Line(((centre, level), (x, level)), "hair")
    for end in (centre, x):
        yield Line(((end - TICK, level + TICK), (end + TICK, level - TICK)), "thin")


def _arm_tag(symbol: Symbol, centre: float, x: float) -> Tag:
    """The arm's length in symbols, the greater station first."""
    there, here = runs_of(Symbol("x")), runs_of(symbol)
    first, second = (there, here) if x > centre else (here, there)
    return Tag(Text(((*first, Run(" − "), *second),)), ((centre + x) / 2, -TAIL))


def _caption(body: FreeBody, unit: str) -> str:
    names_there = (body.name(body.start), body.name(body.end))
    where = " to ".join(dict.fromkeys(names_there))
    ring = "" if body.centre is None else " Ring: centre of moments."
    return f"Free body {where}; lengths in {unit}.{ring}"


def _words(body: FreeBody, unit: str) -> str:
    """The free body in words, for a reader who cannot see it."""
    parts = []
    for action in body.actions:
        if isinstance(action, Force):
            sense = "upward" if action.up > 0 else "downward"
        else:
            sense = "clockwise" if action.clockwise > 0 else "anticlockwise"
        parts.append(f"{action.symbol} {sense} at {body.name(action.at)}")
    parts += [f"load {LOAD} downward at x"] if body.load else []
    return f"{_caption(body, unit)} Acting: {', '.join(parts)}."
