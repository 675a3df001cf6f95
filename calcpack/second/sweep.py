"""The governing value of a moving load by stepping it over the stiffness ordinates, in floats."""

from __future__ import annotations

import itertools
import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

import numpy as np

from calcpack.model.loads import Case
from calcpack.second.areas import Area, above, along, bulge
from calcpack.second.stiffness import Floats, Ordinates

STAGGER = (3 - 5**0.5) / 2
"""The grid starts this part of a step before the first position. It is irrational, so that no
position of the grid puts axles on breakpoints, where rounding would choose a side for each."""


def swept_case(
    ordinates: Ordinates,
    case: Case,
    sense: Literal[1, -1],
    spans: Sequence[tuple[float, float]] = (),
    steps: int = 2000,
) -> tuple[float, float]:
    """The greatest effect of one case in one sense, by a dense sweep in equal steps.

    Args:
        ordinates: of one effect.
        case: its trains are swept under each of its headings, in one chain; what each part of the
            load weighs by allowances and factors counts, concentrated forces as axles.
        sense: 1 for the greatest positive value, -1 for the greatest negative.
        spans: start and end of the stretches (m), overhangs among them, no two of which hold a
            concentrated force at once; none: the whole beam is one.
        steps: from the first axle on the beam, all gaps at their least, to the last load off it.

    Returns:
        The value found (its sign is that of ``sense``; 0 where the load had better stay away) and
        by how much, at most, it falls short of the true extreme. The second is what every part
        could find for itself while each rigid run of axles moves by less than one step, less what
        was found: the height at the step's ends and at breakpoints between, and what a curved line
        may rise above its chord. Both hold to within the rounding of double numbers. What a single
        position alone reaches, as a train just as long as the beam on both its ends, is missed by
        the first and allowed for by the second.

    An axle at an end of the beam counts, one off the beam does not. The uniform load, and a broken
    strip, stand on whatever parts raise the effect.
    """
    line = ordinates * sense
    found = possible = 0.0
    for heading in case.headings if case.trains else ():
        seen = line if heading == "right" else _mirrored(line)
        for chain in _chains(case):
            reached, bound = _best(seen, chain, steps)
            found, possible = max(found, reached), max(possible, bound)
    forces = [float(force.value * case.weighs("axles")) for force in case.concentrated]
    alone, most = _concentrated(line, forces, spans, steps)
    uniform = 0.0
    if case.uniform is not None:
        weighed = float(case.uniform.value * case.weighs("uniform"))
        uniform = weighed * Area.under(*above(*line.cubics)).whole
    return sense * (found + alone + uniform), possible - found + most - alone


def _mirrored(line: Ordinates) -> Ordinates:
    """The line seen from the other side of the beam."""
    return Ordinates(
        (line.stations[0] + line.stations[-1] - line.stations)[::-1],
        line.right[::-1],
        line.left[::-1],
        -line.right_slopes[::-1],
        -line.left_slopes[::-1],
    )


@dataclass(frozen=True)
class _Strip:
    """A uniform load between two places so far behind the lead axle, infinite where it has no
    end."""

    run: int
    front: float
    back: float
    intensity: float
    broken: bool

    @property
    def ends(self) -> list[float]:
        """Those that are not infinite."""
        return [end for end in (self.front, self.back) if math.isfinite(end)]

    def under(self, area: Area, leads: Floats) -> Floats:
        """What it covers of an area, by the position of the lead axle."""
        return area.values(leads - self.front) - area.values(leads - self.back)


@dataclass(frozen=True, eq=False)
class _Chain:
    """The trains of a case, heading right, with every gap at the least or at one of its values.

    Attributes:
        offsets: distance of each acting axle behind the lead axle (n).
        weights: its force in the column of its rigid run (n x runs).
        neglects: whether axles that lessen the effect are dropped.
        strips: what else travels with a rigid run.
        reaches: how much wider the gap behind each rigid run may become.
    """

    offsets: Floats
    weights: Floats
    neglects: bool
    strips: tuple[_Strip, ...]
    reaches: tuple[float, ...]


def _chains(case: Case) -> Iterator[_Chain]:
    """One for every choice of values where gaps are from lists."""
    axles = case.axles
    gaps = [axle.gap for axle in axles if axle.gap is not None]
    runs = list(itertools.accumulate((int(gap.free) for gap in gaps), initial=0))
    reaches = tuple(
        math.inf if gap.greatest is None else float(gap.greatest - gap.least)
        for gap in gaps
        if gap.free
    )
    acting = [number for number, axle in enumerate(axles) if axle.acts]
    weights = np.zeros((len(axles), runs[-1] + 1))
    weights[range(len(axles)), runs] = [float(axle.weight.value) for axle in axles]
    weights *= float(case.weighs("axles"))
    for ties in itertools.product(*(gap.ties[:1] if gap.free else gap.ties for gap in gaps)):
        places = itertools.accumulate((tie.value for tie in ties), initial=Fraction(0))
        offsets = np.array([float(place) for place in places])
        yield _Chain(
            offsets[acting],
            weights[acting],
            case.relieving == "neglect",
            tuple(_strips(case, offsets, runs)),
            reaches,
        )


def _strips(case: Case, offsets: Floats, runs: Sequence[int]) -> Iterator[_Strip]:
    first = 0
    for train in case.trains:
        last = first + len(train.axles) - 1
        for strip in train.strips:
            start = float(strip.start.value)
            length = math.inf if strip.length is None else float(strip.length.value)
            intensity = float(strip.intensity * case.weighs("trailing"))
            if strip.ahead:
                back = offsets[first] - start
                yield _Strip(runs[first], back - length, back, intensity, strip.broken)
            else:
                front = offsets[last] + start
                yield _Strip(runs[last], front, front + length, intensity, strip.broken)
        first = last + 1


@dataclass(frozen=True, eq=False)
class _Grid:
    """Positions of the lead axle at equal steps, and the cells between two."""

    leads: Floats
    step: float

    def highest(self, heights: Floats, events: Floats, tops: Floats) -> Floats:
        """The most of chords in each cell, a column for each function: at the cell's ends, and at
        events inside; an event at a cell's edge goes to both cells."""
        highest = np.maximum(heights[:-1], heights[1:])
        cells = (events - self.leads[0]) / self.step
        for rounding in (-1e-6, 1e-6):
            cell = np.floor(cells + rounding).astype(int)
            np.maximum.at(highest, (cell, np.arange(heights.shape[1])), tops)
        return highest


def _best(line: Ordinates, chain: _Chain, steps: int) -> tuple[float, float]:
    """The greatest effect of a chain on a grid, and a bound on it anywhere.

    The grid is one of positions of the lead axle with all gaps at their least. Each rigid run has
    its own place on it, behind that of the run ahead by as much as the gap between is wider.
    """
    ends = [end for strip in chain.strips for end in strip.ends]
    behind = np.array([0.0, *chain.offsets, *ends])
    first, last = line.stations[0] + behind.min(), line.stations[-1] + behind.max()
    step = (last - first) / steps
    grid = _Grid(first + step * (np.arange(steps + 2) - STAGGER), step)
    heights, highest = _under_axles(line, chain, grid)
    reached, bounds = heights @ chain.weights, highest @ chain.weights
    for strip in chain.strips:
        heights, highest = _under_strip(line, strip, grid)
        reached[:, strip.run] += strip.intensity * heights
        bounds[:, strip.run] += strip.intensity * highest
    wider = [int(min(reach / step, steps + 1)) for reach in chain.reaches]
    return _put_together(reached, wider), _put_together(bounds, [most + 1 for most in wider])


def _under_axles(line: Ordinates, chain: _Chain, grid: _Grid) -> tuple[Floats, Floats]:
    """The line under each axle at each position (positions x axles), and its most in each cell."""
    heights = line.values(grid.leads[:, None] - chain.offsets)
    knots = np.repeat(line.stations, 2)[:, None]
    tops = np.column_stack([line.left, line.right]).reshape(-1, 1)
    highest = grid.highest(heights, knots + chain.offsets, tops)
    _, widths, cubics = line.cubics
    highest += bulge(widths, cubics, grid.step)
    if chain.neglects:
        return np.maximum(heights, 0.0), np.maximum(highest, 0.0)
    return heights, highest


def _under_strip(line: Ordinates, strip: _Strip, grid: _Grid) -> tuple[Floats, Floats]:
    """The area under a strip at each position, and its most in each cell.

    It bends where an end of the strip meets a jump of the line or an end of the beam. Elsewhere its
    second derivative is the line's slope at the front less that at the back, or less where the line
    is broken, and the bulge is no more than that of both areas.
    """
    starts, widths, cubics = line.cubics
    area = whole = Area.under(starts, widths, cubics)
    if strip.broken:
        area = Area.under(*above(starts, widths, cubics))
    heights = strip.under(area, grid.leads)
    events = np.add.outer(line.stations, strip.ends).ravel()
    highest = grid.highest(heights[:, None], events[:, None], strip.under(area, events)[:, None])
    rise = sum(bulge(widths, sign * whole.quartics, grid.step) for sign in (1, -1))
    return heights, highest.ravel() + rise


def _put_together(runs: Floats, wider: Sequence[int]) -> float:
    """The greatest sum of one entry from each column, each so many rows at most above the one to
    its left; what lies above the first row is as that row. At least 0.

    >>> _put_together(np.array([[0.0, 5.0], [0.0, 1.0], [3.0, 2.0]]), [1])
    5.0
    >>> _put_together(np.array([[0.0, 5.0], [0.0, 1.0], [3.0, 2.0]]), [2])
    8.0
    """
    best = runs[:, -1]
    for run, reach in zip(runs.T[-2::-1], reversed(wider), strict=True):
        best = run + _highest_before(best, reach)
    return max(float(best.max()), 0.0)


def _highest_before(values: Floats, reach: int) -> Floats:
    """The highest of each value and so many before it, in windows that double.

    >>> _highest_before(np.array([4.0, 1.0, 2.0, 0.0]), 1).tolist()
    [4.0, 4.0, 2.0, 2.0]
    """
    highest, seen = values.copy(), 1
    while seen <= reach:
        shift = min(seen, reach + 1 - seen)
        highest[shift:] = np.maximum(highest[shift:], highest[:-shift])
        seen += shift
    return highest


def _concentrated(
    line: Ordinates, forces: Sequence[float], spans: Sequence[tuple[float, float]], steps: int
) -> tuple[float, float]:
    """The greatest effect of forces that stand each in another span, and a bound on it.

    The heaviest stands at the highest place of all spans, the next at that of the others, and so
    on: for factors >= 0 no other choice gives a greater sum of products.
    """
    if not forces:
        return 0.0, 0.0
    starts, widths, cubics = line.cubics
    places = np.linspace(0.0, 1.0, steps + 1)
    tops = along(cubics.T[..., None], places).max(axis=1, initial=0.0)
    rise = bulge(widths, cubics, widths / steps)
    middles = starts + widths / 2
    spans = spans or [(line.stations[0], line.stations[-1])]
    peaks = [tops[(start < middles) & (middles < end)].max(initial=0.0) for start, end in spans]
    pairs = list(zip(sorted(forces, reverse=True), sorted(peaks, reverse=True), strict=False))
    found = float(sum(force * peak for force, peak in pairs))
    return found, found + rise * sum(force for force, _ in pairs)
