"""The governing value of a moving load by stepping it over the stiffness ordinates, in floats."""

from __future__ import annotations

from typing import Literal

import numpy as np

from calcpack.model.loads import MovingLoad
from calcpack.second.stiffness import Floats, Ordinates

# The grid starts this part of a step before the first position, so that no position of the grid
# puts two axles on two breakpoints at once, where rounding would choose a side for each.
STAGGER = 0.382

HALVINGS = 30


def swept(
    ordinates: Ordinates, load: MovingLoad, sense: Literal[1, -1], steps: int = 2000
) -> tuple[float, float]:
    """The greatest effect of a moving load in one sense, by a dense sweep in equal steps.

    Args:
        ordinates: of one effect.
        load: the train, swept under each of its headings, and its uniform load.
        sense: 1 for the greatest positive value, -1 for the greatest negative.
        steps: steps from the train's first axle on the beam to its last axle off it.

    Returns:
        The value found (its sign is that of ``sense``; 0 where the load had better stay away) and
        by how much, at most, it falls short of the true extreme. The second is the greatest sum
        over one step of what each axle could find for itself inside that step, less what was found:
        the height at the step's ends and at breakpoints between, and what a curved line may rise
        above its chord. Both hold to within the rounding of double numbers.

    An axle at an end of the beam counts, one off the beam does not. The allowance raises the axles
    only; the uniform load stands on whatever parts raise the effect; distribution takes its part
    of both.
    """
    found = possible = 0.0
    for heading in load.headings:
        behind = -1 if heading == "right" else 1
        reached, bound = _best(ordinates, load, sense, behind, steps)
        found, possible = max(found, reached), max(possible, bound)
    axles = (1 + float(load.allowance)) * float(load.distribution)
    uniform = float(load.uniform) * float(load.distribution)
    if uniform:
        _, widths, cubics = ordinates.cubics
        uniform *= _positive_area(widths, sense * cubics)
    return sense * (axles * found + uniform), axles * (possible - found)


def _best(
    ordinates: Ordinates, load: MovingLoad, sense: int, behind: int, steps: int
) -> tuple[float, float]:
    """The greatest sum over the axles at a position of the grid, and a bound on it anywhere.

    ``behind`` is the direction in which the axles follow the lead axle. Off the beam an axle adds
    0; an axle whose part would lessen the sum is dropped where the load says so.
    """
    weights = np.array([float(axle.weight) for axle in load.axles])
    offsets = behind * np.array([float(offset) for offset in load.offsets])
    knots = np.repeat(ordinates.stations, 2)
    line = sense * np.column_stack([ordinates.left, ordinates.right]).ravel()
    first, last = knots[0] - max(offsets, default=0.0), knots[-1] - min(offsets, default=0.0)
    step = (last - first) / steps
    start = first - STAGGER * step
    leads = start + step * np.arange(steps + 2)
    heights = sense * ordinates.values(leads[:, None] + offsets)
    highest = np.maximum(heights[:-1], heights[1:])
    # A breakpoint inside a cell may be higher; one at a cell's edge goes to both cells.
    cells = (knots[:, None] - offsets - start) / step
    for rounding in (-1e-6, 1e-6):
        cell = np.floor(cells + rounding).astype(int)
        np.maximum.at(highest, (cell, np.arange(len(offsets))), line[:, None])
    _, widths, cubics = ordinates.cubics
    highest += _bulge(widths, sense * cubics, step)
    if load.relieving == "neglect":
        heights, highest = np.maximum(heights, 0.0), np.maximum(highest, 0.0)
    return float(max((heights @ weights).max(), 0.0)), float(max((highest @ weights).max(), 0.0))


def _bulge(widths: Floats, cubics: Floats, step: float) -> float:
    """The most by which cubics rise above their chords inside a step: step² max(-f'') / 8.

    The second derivative is straight; at the ends of a stretch it is six times the second
    difference of the Bézier ordinates over the width squared.
    """
    bends = -np.diff(cubics, 2).min(axis=1, initial=0.0)
    return float((0.75 * bends * np.minimum(step / widths, 1.0) ** 2).max())


def _positive_area(widths: Floats, cubics: Floats) -> float:
    """The area between the axis and the parts of the line above it.

    A cubic lies between its Bézier ordinates, and its mean is theirs. Where they lie on both sides
    of the axis the stretch is halved (P. de Casteljau), until what is left is nothing.
    """
    area = 0.0
    for _ in range(HALVINGS):
        above, below = (cubics >= 0).all(axis=1), (cubics <= 0).all(axis=1)
        area += float(widths[above] @ cubics[above].mean(axis=1))
        crossing = ~(above | below)
        widths = np.repeat(widths[crossing] / 2, 2)
        cubics = _halves(cubics[crossing])
    return area


def _halves(cubics: Floats) -> Floats:
    """The Bézier ordinates of the left and the right half of each cubic."""
    levels = [cubics]
    while levels[-1].shape[1] > 1:
        levels.append((levels[-1][:, :-1] + levels[-1][:, 1:]) / 2)
    left = np.column_stack([level[:, 0] for level in levels])
    right = np.column_stack([level[:, -1] for level in reversed(levels)])
    return np.stack([left, right], axis=1).reshape(-1, 4)
