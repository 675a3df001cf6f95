"""Areas under a line of cubics in Bézier form, in floats."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from calcpack.second.stiffness import Floats

HALVINGS = 30


@dataclass(frozen=True, eq=False)
class Area:
    """The area under a line from the left end of the beam on: 0 left of it, all of it right of it.

    The area under Bézier ordinates c is a quartic whose ordinates rise by a quarter of c times the
    width.

    Attributes:
        starts, widths: of the stretches, in order.
        quartics: the Bézier ordinates of the area in each (m x 5).
    """

    starts: Floats
    widths: Floats
    quartics: Floats

    @staticmethod
    def under(starts: Floats, widths: Floats, cubics: Floats) -> Area:
        """From the start, the width (m) and the Bézier ordinates (m x 4) of each stretch.

        >>> start, width = np.array([0.0]), np.array([8.0])
        >>> area = Area.under(start, width, np.array([[0.0, 3.0, 6.0, 9.0]]))
        >>> area.values(np.array([-1.0, 4.0, 8.0, np.inf])).tolist()
        [0.0, 9.0, 36.0, 36.0]
        """
        rises = np.cumsum(widths[:, None] / 4 * cubics, axis=1)
        before = np.cumsum(rises[:, -1]) - rises[:, -1]
        return Area(starts, widths, before[:, None] + np.pad(rises, ((0, 0), (1, 0))))

    @property
    def whole(self) -> float:
        return float(self.quartics[-1, -1])

    def values(self, places: Floats) -> Floats:
        """The area left of each place, which may be infinite."""
        index = np.clip(np.searchsorted(self.starts, places, side="right") - 1, 0, None)
        t = np.clip((places - self.starts[index]) / self.widths[index], 0.0, 1.0)
        return along(self.quartics[index].T, t)


def above(starts: Floats, widths: Floats, cubics: Floats) -> tuple[Floats, Floats, Floats]:
    """The line where it is above the axis and 0 elsewhere, in as many stretches as that takes.

    A cubic lies between its Bézier ordinates. Where they lie on both sides of the axis the stretch
    is halved (P. de Casteljau), until what is left is nothing.

    >>> line = above(np.array([0.0]), np.array([6.0]), np.array([[-3.0, -1.0, 1.0, 3.0]]))
    >>> Area.under(*line).whole
    4.5
    """
    parts = []
    for _ in range(HALVINGS):
        crossing = (cubics > 0).any(axis=1) & (cubics < 0).any(axis=1)
        parts.append((starts[~crossing], widths[~crossing], np.maximum(cubics[~crossing], 0.0)))
        if not crossing.any():
            break
        starts, widths = np.repeat(starts[crossing], 2), np.repeat(widths[crossing] / 2, 2)
        starts[1::2] += widths[1::2]
        cubics = _halves(cubics[crossing])
    else:
        parts.append((starts, widths, np.zeros_like(cubics)))
    every, wide, lines = (np.concatenate(part) for part in zip(*parts, strict=True))
    order = np.argsort(every, kind="stable")
    return every[order], wide[order], lines[order]


def along(beziers: Floats, t: Floats) -> Floats:
    """Polynomials at the part t of their stretches, by the halving of P. de Casteljau; the first
    axis is that of their Bézier ordinates."""
    while len(beziers) > 1:
        beziers = beziers[:-1] + t * (beziers[1:] - beziers[:-1])
    value: Floats = beziers[0]
    return value


def bulge(widths: Floats, beziers: Floats, step: Floats | float) -> float:
    """The most by which polynomials rise above their chords inside a step: step² max(-f'') / 8.

    The second derivative has as Bézier ordinates n (n - 1) times the second differences of those of
    the polynomial of degree n, over the width squared, and lies between them.
    """
    degree = beziers.shape[1] - 1
    bends = -np.diff(beziers, 2).min(axis=1, initial=0.0)
    rises = degree * (degree - 1) / 8 * bends * np.minimum(step / widths, 1.0) ** 2
    return float(rises.max())


def _halves(cubics: Floats) -> Floats:
    """The Bézier ordinates of the left and the right half of each cubic."""
    levels = [cubics]
    while levels[-1].shape[1] > 1:
        levels.append((levels[-1][:, :-1] + levels[-1][:, 1:]) / 2)
    left = np.column_stack([level[:, 0] for level in levels])
    right = np.column_stack([level[:, -1] for level in reversed(levels)])
    return np.stack([left, right], axis=1).reshape(-1, 4)
