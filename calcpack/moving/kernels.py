"""What one part of a train causes against its place, for a search in floats over many lines.

Everything here is seen heading right: for a train that heads left the lines are mirrored.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from typing import Any, Literal

import numpy as np
from numpy.typing import NDArray

from calcpack.exact.piecewise import Piecewise
from calcpack.model.loads import Heading

Floats = NDArray[np.float64]
Keys = NDArray[Any]
"""Exact places as whole numbers of a common part of the unit of length: int64 or Python's own."""

Kind = Literal["point", "relieved point", "area", "relieved area"]
"""The ordinate under an axle, or the area from the left end on; "relieved": only of the parts of
the line that have the sense looked for."""


@dataclass(frozen=True)
class Kernels:
    """One kind of kernel for every line of a set, times the sense.

    A kernel is zero left of its first break; at each break its polynomial changes by a jump.

    Attributes:
        part: so many make the unit of length; every break is a whole number of them.
        keys: (lines, breaks) the breaks in such parts.
        jumps: (lines, breaks, powers) in powers of the distance from the break; lines with fewer
            breaks are filled up with their last one and no jump.
        ends: (lines, 2) the line just inside its left and its right end, for an axle that stands
            exactly there; 0 for areas.
        greatest: per line the greatest size of the kernel at any break.
        beyond: per line its value right of the beam.
    """

    part: int
    keys: Keys
    jumps: Floats
    ends: Floats
    greatest: Floats
    beyond: Floats

    def of(self, rows: Sequence[int]) -> Kernels:
        """Those of some of the lines."""
        parts = (self.keys, self.jumps, self.ends, self.greatest, self.beyond)
        return Kernels(self.part, *(one[list(rows)] for one in parts))


@dataclass(frozen=True)
class Pieces:
    """Lines in floats, piece by piece from their left ends; the shorter ones filled up."""

    part: int
    keys: Keys
    widths: Floats
    polynomials: Floats

    def mirrored(self) -> Pieces:
        """Seen from the right end of the beam, which the left end becomes."""
        turned = shifted(self.polynomials, self.widths)
        turned = turned * (-1.0) ** np.arange(turned.shape[-1])
        keys = (self.keys[:, :1] + self.keys[:, -1:] - self.keys)[:, ::-1]
        return Pieces(self.part, keys, self.widths[:, ::-1], turned[:, ::-1])


class LineSet:
    """Influence lines of one beam, with the kernels that were needed so far."""

    def __init__(self, lines: Sequence[Piecewise]) -> None:
        self.lines = lines
        self._kernels: dict[tuple[Kind, Heading, int], Kernels] = {}

    @property
    def ends(self) -> tuple[Fraction, Fraction]:
        return self.lines[0].breaks[0], self.lines[0].breaks[-1]

    def kernels(self, kind: Kind, heading: Heading, sense: Literal[1, -1]) -> Kernels:
        key = kind, heading, sense
        if key not in self._kernels:
            relieved = kind in ("relieved point", "relieved area")
            lines = [one.part_of_sign(sense) for one in self.lines] if relieved else self.lines
            pieces = _pieces(lines)
            made = _kernels(pieces if heading == "right" else pieces.mirrored(), kind)
            self._kernels[key] = replace(
                made, jumps=sense * made.jumps, ends=sense * made.ends, beyond=sense * made.beyond
            )
        return self._kernels[key]


@dataclass(frozen=True)
class View:
    """Some lines of a set, as a train under one heading meets them in the search for one sense."""

    lines: LineSet
    rows: tuple[int, ...]
    heading: Heading
    sense: Literal[1, -1]

    def kernels(self, kind: Kind) -> Kernels:
        return self.lines.kernels(kind, self.heading, self.sense).of(self.rows)

    @property
    def length(self) -> float:
        start, end = self.lines.ends
        return float(end - start)


def _pieces(lines: Sequence[Piecewise]) -> Pieces:
    count = max(len(line.breaks) for line in lines)
    powers = 1 + max(line.degree for line in lines)
    part = math.lcm(*{at.denominator for line in lines for at in line.breaks})
    polynomials = np.zeros((len(lines), count - 1, powers))
    keys = []
    for row, line in enumerate(lines):
        places = [int(at * part) for at in line.breaks]
        keys.append(places + places[-1:] * (count - len(places)))
        for index, piece in enumerate(line.pieces):
            polynomials[row, index, : len(piece)] = [float(value) for value in piece]
        # What is filled up goes on as the last piece ends, so that it brings no jump.
        run = np.array([float(line.breaks[-1] - line.breaks[-2])])
        polynomials[row, len(line.pieces) :] = shifted(polynomials[row, index][None], run)
    most = max(abs(key) for row in keys for key in row)
    whole: Keys = np.array(keys, dtype=np.int64 if most < 2**60 else object)
    widths = (np.diff(whole, axis=1) / part).astype(np.float64)
    return Pieces(part, whole, widths, polynomials)


def _kernels(pieces: Pieces, kind: Kind) -> Kernels:
    """Jumps from piece to piece; where a line goes on smoothly they are zero but for rounding."""
    polynomials, widths = pieces.polynomials, pieces.widths
    ends = np.zeros((len(widths), 2))
    if kind in ("area", "relieved area"):
        polynomials = _integrated(polynomials, widths)
    last = value_at(polynomials, widths)
    if kind in ("point", "relieved point"):
        ends[:, 0], ends[:, 1] = polynomials[:, 0, 0], last[:, -1]
    after = np.zeros((len(widths), 1, polynomials.shape[-1]))
    beyond = np.zeros(len(widths))
    if kind in ("area", "relieved area"):
        beyond = last[:, -1]
        after[:, 0, 0] = beyond
    before = np.concatenate([np.zeros_like(after), shifted(polynomials, widths)], axis=1)
    jumps = np.concatenate([polynomials, after], axis=1) - before
    sizes = np.maximum(np.abs(last), np.abs(polynomials[..., 0])).max(axis=1)
    return Kernels(pieces.part, pieces.keys, jumps, ends, sizes, beyond)


def _integrated(polynomials: Floats, widths: Floats) -> Floats:
    """The integral from the left end of the beam, piece by piece."""
    powers = polynomials.shape[-1]
    found = np.zeros((*polynomials.shape[:2], powers + 1))
    found[..., 1:] = polynomials / np.arange(1, powers + 1)
    areas = np.cumsum(value_at(found, widths), axis=1)
    found[:, 1:, 0] = areas[:, :-1]
    return found


def rescaled(keys: Keys, by: int, room: int) -> Keys:
    """Keys times a whole number, such that sums with ``room`` more hold too."""
    most = int(np.abs(keys).max()) * by + room
    scaled: Keys = keys * by if most < 2**60 else keys.astype(object) * by
    return scaled


def shifted(polynomials: Floats, by: Floats) -> Floats:
    """Polynomials, powers along the last axis, with their origin ``by`` further right.

    >>> shifted(np.array([[0.0, 0.0, 1.0]]), np.array([2.0]))
    array([[4., 4., 1.]])
    """
    result = polynomials.copy()
    top = result.shape[-1]
    for low in range(top - 1):
        for power in range(top - 2, low - 1, -1):
            result[..., power] += by * result[..., power + 1]
    return result


def value_at(polynomials: Floats, x: Floats) -> Floats:
    """The value of each polynomial, powers along the last axis, at its own x.

    >>> value_at(np.array([[1.0, 2.0, 3.0]]), np.array([2.0]))
    array([17.])
    """
    total = polynomials[..., -1] + 0 * x
    for power in range(polynomials.shape[-1] - 2, -1, -1):
        total = total * x + polynomials[..., power]
    result: Floats = total
    return result
