"""The positions of a train that may govern, found in floats; their values are found elsewhere."""

from __future__ import annotations

import itertools
from bisect import bisect_left
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from calcpack.exact.piecewise import GRID, Piecewise
from calcpack.model.loads import Heading, MovingLoad

Floats = NDArray[np.float64]
NARROW = 1e-9
"""An interval is narrow where it is less than this part of the stations' size."""


@dataclass(frozen=True)
class Place:
    """A place of the lead axle that may govern; the effect there is ``bound`` at the most.

    ``axle`` (from 0) then stands at ``mark``, a breakpoint or zero of the line; ``mark`` is None
    between events, where the rate of change is zero.
    """

    heading: Heading
    lead_at: Fraction
    axle: int
    mark: Fraction | None
    bound: float


def screened(line: Piecewise, load: MovingLoad, sense: Literal[1, -1]) -> list[Place]:
    """Every event and every stationary point between events, the most effective first.

    Between neighbouring events the effect is one polynomial in the lead axle's station: the sum
    of weight x piece over the axles on the beam. Its ends, and the roots of its derivative,
    a quadratic for cubic lines, hold its extremes.
    """
    marks = sorted({*line.breaks, *(line.zeros() if load.relieving == "neglect" else ())})
    places: list[Place] = []
    if load.axles:
        for heading in load.headings:
            places += _along(line, load, sense, heading, marks)
    return sorted(places, key=lambda place: -place.bound)


def _along(
    line: Piecewise,
    load: MovingLoad,
    sense: Literal[1, -1],
    heading: Heading,
    marks: Sequence[Fraction],
) -> list[Place]:
    sign = 1 if heading == "right" else -1
    events: dict[Fraction, tuple[int, Fraction]] = {}
    at_ends: dict[Fraction, float] = {}
    ends = {end: sense * line.left(end) for end in (line.breaks[0], line.breaks[-1])}
    for axle, offset in enumerate(load.offsets):
        for mark in marks:
            lead_at = mark + sign * offset
            events.setdefault(lead_at, (axle, mark))
            if mark in ends:
                share = max(load.axles[axle].weight * ends[mark], Fraction(0))
                at_ends[lead_at] = at_ends.get(lead_at, 0.0) + float(share)
    stops = sorted(events)
    widths = np.array([float(b - a) for a, b in itertools.pairwise(stops)])
    polynomials = _polynomials(line, load, sense, sign, stops)
    first = polynomials[:, 0]
    last = _at(polynomials, widths)
    best = np.zeros(len(stops))
    best[:-1] = first
    best[1:] = np.maximum(best[1:], last)
    # An axle at the very end of the beam counts whatever side the others take of their jumps.
    best += np.array([at_ends.get(stop, 0.0) for stop in stops])
    places = [
        Place(heading, stop, *events[stop], float(value))
        for stop, value in zip(stops, best, strict=True)
    ]
    for root in _stationary(polynomials, widths):
        inside = np.flatnonzero((root > 0) & (root < widths))
        values = _at(polynomials[inside], root[inside])
        for index, value in zip(inside, values, strict=True):
            lead_at = stops[index] + round(Fraction(float(root[index])) / GRID) * GRID
            places.append(Place(heading, lead_at, 0, None, float(value)))
    return places


def _polynomials(
    line: Piecewise,
    load: MovingLoad,
    sense: Literal[1, -1],
    sign: int,
    stops: Sequence[Fraction],
) -> Floats:
    """Per interval between events the effect as a cubic in travel from the interval's start.

    Which piece an axle stands on is told by the middle of the interval; where the interval is too
    narrow for floats to tell, by exact comparison.
    """
    breaks = np.array([float(stop) for stop in line.breaks])
    pieces = np.zeros((len(line.pieces), 4))
    for row, piece in zip(pieces, line.pieces, strict=True):
        row[: len(piece)] = [sense * float(value) for value in piece]
    weights = np.array([float(axle.weight) for axle in load.axles])
    offsets = sign * np.array([float(offset) for offset in load.offsets])
    starts = np.array([float(stop) for stop in stops[:-1]])
    widths = np.array([float(b - a) for a, b in itertools.pairwise(stops)])
    middles = (starts + widths / 2)[:, None] - offsets
    index = np.searchsorted(breaks, middles) - 1
    reach = NARROW * (1 + np.abs(middles).max(axis=1))
    for narrow in np.flatnonzero(widths < reach).tolist():
        middle = (stops[narrow] + stops[narrow + 1]) / 2
        exact = (middle - sign * offset for offset in load.offsets)
        index[narrow] = [bisect_left(line.breaks, at) - 1 for at in exact]
    counts = weights * ((index >= 0) & (index < len(pieces)))
    index = np.clip(index, 0, len(pieces) - 1)
    a0, a1, a2, a3 = np.moveaxis(pieces[index], -1, 0)
    if load.relieving == "neglect":
        t = middles - breaks[index]
        counts = counts * (a0 + t * (a1 + t * (a2 + t * a3)) > 0)
    t = starts[:, None] - offsets - breaks[index]
    shifted = (
        a0 + t * (a1 + t * (a2 + t * a3)),
        a1 + t * (2 * a2 + 3 * t * a3),
        a2 + 3 * t * a3,
        a3,
    )
    return np.stack([(counts * part).sum(axis=1) for part in shifted], axis=1)


def _at(polynomials: Floats, x: Floats) -> Floats:
    c0, c1, c2, c3 = polynomials.T
    result: Floats = c0 + x * (c1 + x * (c2 + x * c3))
    return result


def _stationary(polynomials: Floats, widths: Floats) -> tuple[Floats, Floats]:
    """Both roots of each derivative c1 + 2 c2 x + 3 c3 x²; -1 where there is none."""
    _, c1, c2, c3 = polynomials.T
    scale = np.abs(polynomials).max(axis=1) + 1
    curved = np.abs(c2) + np.abs(c3) * widths > 1e-12 * scale
    with np.errstate(divide="ignore", invalid="ignore"):
        root = np.sqrt(c2 * c2 - 3 * c3 * c1)
        q = -(c2 + np.copysign(root, c2))
        one, two = q / (3 * c3), c1 / q
    none = np.full_like(one, -1.0)
    return (
        np.where(curved & np.isfinite(one), one, none),
        np.where(curved & np.isfinite(two), two, none),
    )
