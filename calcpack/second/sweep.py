"""The governing value of a moving load by stepping it over the stiffness ordinates, in floats."""

from __future__ import annotations

from typing import Literal

import numpy as np

from calcpack.model.loads import MovingLoad
from calcpack.second.stiffness import Floats, Ordinates

# The grid starts this part of a step before the first position, so that no position of the grid
# puts two axles on two breakpoints at once, where rounding would choose a side for each.
STAGGER = 0.382


def swept(
    ordinates: Ordinates, load: MovingLoad, sense: Literal[1, -1], steps: int = 2000
) -> tuple[float, float]:
    """The greatest effect of a moving load in one sense, by a dense sweep in equal steps.

    Args:
        ordinates: of one effect; the line is taken as straight between neighbouring stations.
        load: the train, swept under each of its headings, and its uniform load.
        sense: 1 for the greatest positive value, -1 for the greatest negative.
        steps: steps from the train's first axle on the beam to its last axle off it.

    Returns:
        The value found (its sign is that of ``sense``; 0 where the load had better stay away) and
        by how much, at most, it falls short of the true extreme. The second is the greatest sum
        over one step of what each axle could find for itself inside that step, less what was found.
        Both hold to within the rounding of double numbers.

    An axle at an end of the beam counts, one off the beam does not. The allowance raises the axles
    only; the uniform load stands on whatever parts raise the effect; distribution takes its part
    of both.
    """
    knots = np.repeat(ordinates.stations, 2)
    line = sense * np.column_stack([ordinates.left, ordinates.right]).ravel()
    found = possible = 0.0
    for heading in load.headings:
        reached, bound = _best(knots, line, load, -1 if heading == "right" else 1, steps)
        found, possible = max(found, reached), max(possible, bound)
    axles = (1 + float(load.allowance)) * float(load.distribution)
    uniform = float(load.uniform) * float(load.distribution) * _positive_area(knots, line)
    return sense * (axles * found + uniform), axles * (possible - found)


def _best(
    knots: Floats, line: Floats, load: MovingLoad, behind: int, steps: int
) -> tuple[float, float]:
    """The greatest sum over the axles at a position of the grid, and a bound on it anywhere.

    ``behind`` is the direction in which the axles follow the lead axle. Off the beam an axle adds
    0; an axle whose part would lessen the sum is dropped where the load says so.
    """
    weights = np.array([float(axle.weight) for axle in load.axles])
    offsets = behind * np.array([float(offset) for offset in load.offsets])
    first, last = knots[0] - max(offsets, default=0.0), knots[-1] - min(offsets, default=0.0)
    step = (last - first) / steps
    start = first - STAGGER * step
    leads = start + step * np.arange(steps + 2)
    heights = np.interp(leads[:, None] + offsets, knots, line, left=0.0, right=0.0)
    highest = np.maximum(heights[:-1], heights[1:])
    # Inside a cell the line is highest at a breakpoint; one at a cell's edge goes to both cells.
    cells = (knots[:, None] - offsets - start) / step
    for rounding in (-1e-6, 1e-6):
        cell = np.floor(cells + rounding).astype(int)
        np.maximum.at(highest, (cell, np.arange(len(offsets))), line[:, None])
    if load.relieving == "neglect":
        heights, highest = np.maximum(heights, 0.0), np.maximum(highest, 0.0)
    return float(max((heights @ weights).max(), 0.0)), float(max((highest @ weights).max(), 0.0))


def _positive_area(knots: Floats, line: Floats) -> float:
    """The area between the axis and the parts of a broken line above it."""
    start, end = line[:-1], line[1:]
    above = np.maximum(start, 0.0) + np.maximum(end, 0.0)
    height = np.abs(start) + np.abs(end)
    # The part above the axis is a triangle or a trapezium: above / height of the stretch.
    share = np.divide(above, height, out=np.zeros_like(height), where=height > 0)
    return float(np.sum(np.diff(knots) * above * share) / 2)
