"""An influence line, and what stands on it, in floats: by numpy, from the pieces of the line."""

from __future__ import annotations

import itertools
from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
from numpy.lib.stride_tricks import sliding_window_view
from numpy.typing import NDArray

from calcpack.exact.piecewise import Piecewise
from calcpack.model.loads import Case, Gap, Strip
from calcpack.moving.governing import Governing

Floats = NDArray[np.float64]
Position = tuple[float, list[float]]
"""Place of the foremost axle, heading right, and the distance of each other axle to the one
ahead."""


@dataclass(frozen=True, eq=False)
class Curve:
    """A line times a sign: ``table`` has the coefficients of each piece, lowest power first."""

    breaks: Floats
    table: Floats

    @staticmethod
    def of(line: Piecewise, sense: int = 1, heading: str = "right") -> Curve:
        """As a train meets it that heads right on the line, or on its mirror image."""
        breaks = np.array(line.breaks, dtype=float)
        table = np.zeros((len(line.pieces), 5))
        for row, piece in enumerate(line.pieces):
            table[row, : len(piece)] = [sense * float(value) for value in piece]
        if heading == "left":
            for row, width in enumerate(np.diff(breaks)):
                own = np.polynomial.Polynomial(table[row])
                turned = own(np.polynomial.Polynomial([width, -1]))
                table[row] = np.resize([*turned.coef, 0, 0, 0, 0, 0], 5)
            breaks, table = (breaks[0] + breaks[-1] - breaks)[::-1], table[::-1]
        return Curve(breaks, table)

    @property
    def length(self) -> float:
        return float(self.breaks[-1] - self.breaks[0])

    def piece(self, row: int, t: float) -> float:
        return float(np.polynomial.polynomial.polyval(t, self.table[row]))

    def at(self, x: Floats) -> Floats:
        """Ordinates, 0 off the beam; at a jump whichever side floats fall on."""
        row, t = self._place(x)
        inside = (self.breaks[0] <= x) & (x <= self.breaks[-1])
        return np.where(inside, self._powers(self.table[row], t), 0.0)

    def area(self, x: Floats) -> Floats:
        """The integral from the left end to x, which may lie off the beam."""
        row, t = self._place(np.clip(x, self.breaks[0], self.breaks[-1]))
        grown = np.zeros((len(self.table), 6))
        grown[:, 1:] = self.table / np.arange(1, 6)
        whole = [self._powers(grown[[n]], np.array([w])) for n, w in enumerate(self.widths)]
        before = np.concatenate([[0.0], np.cumsum(whole)])
        return before[row] + self._powers(grown[row], t)

    @property
    def widths(self) -> Floats:
        return np.diff(self.breaks)

    def _place(self, x: Floats) -> tuple[NDArray[np.int64], Floats]:
        row = np.searchsorted(self.breaks, x, side="right") - 1
        row = np.clip(row, 0, len(self.table) - 1)
        return row, x - self.breaks[row]

    @staticmethod
    def _powers(table: Floats, t: Floats) -> Floats:
        values = np.zeros_like(t)
        for power in range(table.shape[-1] - 1, -1, -1):
            values = values * t + table[..., power]
        return values

    def raised(self) -> Curve:
        """The line where it is above 0, elsewhere 0: cut at the roots that numpy finds."""
        breaks, rows = [self.breaks[0]], []
        for row, (start, width) in enumerate(zip(self.breaks, self.widths, strict=False)):
            roots = np.polynomial.Polynomial(self.table[row]).trim().roots()
            real = [float(np.real(root)) for root in roots if abs(np.imag(root)) < 1e-9]
            inner = sorted(root for root in real if 0 < root < width)
            for low, high in itertools.pairwise([0.0, *inner, float(width)]):
                own = np.polynomial.Polynomial(self.table[row])
                own = own(np.polynomial.Polynomial([low, 1]))
                above = own((high - low) / 2) > 0
                rows.append(np.resize([*own.coef, 0, 0, 0, 0, 0], 5) if above else np.zeros(5))
                breaks.append(start + high)
        return Curve(np.array(breaks), np.array(rows))

    def highest(self, x: Floats, radius: float) -> Floats:
        """No ordinate within the radius of x is above this: those at the ends of each window and
        on both sides of every break in it, and what a curve may rise above its chord."""
        found = np.maximum(self.at(x - radius), self.at(x + radius))
        for row, start in enumerate(self.breaks):
            sides = []
            if row < len(self.table):
                sides.append(self.piece(row, 0.0))
            if row > 0:
                sides.append(self.piece(row - 1, self.widths[row - 1]))
            near = np.abs(x - start) <= radius
            found = np.where(near, np.maximum(found, max(sides)), found)
        return found + self._bend() * (2 * radius) ** 2 / 8

    def _bend(self) -> float:
        """The greatest size of the second derivative."""
        ends = [(row, t) for row, width in enumerate(self.widths) for t in (0.0, float(width))]
        bends = [abs(2 * self.table[row, 2] + 6 * self.table[row, 3] * t) for row, t in ends]
        return float(max(bends))

    @property
    def greatest(self) -> float:
        """No ordinate is greater in size."""
        x = np.linspace(self.breaks[0], self.breaks[-1], 401)
        wide = self.length / 800
        below = Curve(self.breaks, -self.table)
        return float(max(self.highest(x, wide).max(), below.highest(x, wide).max()))


def stations_of(line: Piecewise, found: Governing) -> Floats:
    """Where the axles are said to stand, each a hair to the side that is named; an axle at the
    very end of the beam, where such count, a hair inside."""
    assert found.position is not None
    start, end = float(line.breaks[0]), float(line.breaks[-1])
    hair = 1e-9 * (end - start)
    stations = []
    for number, station in enumerate(found.position.stations):
        group = found.position.group_of(number)
        at = float(station)
        if group.ends_count and min(abs(at - start), abs(at - end)) < hair / 1000:
            stations.append(start + hair if at - start < hair else end - hair)
        else:
            stations.append(at + (hair if group.side == "right" else -hair))
    return np.array(stations)


def axles_effect(line: Piecewise, case: Case, at: Floats, sense: int) -> Floats:
    """The static effect of the axles at their stations, the last axis of ``at``."""
    curve = Curve.of(line)
    under = curve.at(at)
    if case.relieving == "neglect":
        under = sense * np.maximum(sense * under, 0)
    weights = [float(axle.weight.value) if axle.acts else 0.0 for axle in case.axles]
    return np.asarray(under @ np.array(weights), dtype=np.float64)


def strips_of(case: Case) -> Iterator[tuple[int, Strip]]:
    """Every strip with the number of the axle that it is told from."""
    first = 0
    for train in case.trains:
        for strip in train.strips:
            yield (first if strip.ahead else first + len(train.axles) - 1), strip
        first += len(train.axles)


def strip_ends(strip: Strip, at: Floats) -> tuple[Floats, Floats]:
    """Left and right end of a strip, its train heading right, by the place of its axle."""
    towards = 1 if strip.ahead else -1
    near = at + towards * float(strip.start.value)
    reach = np.inf if strip.length is None else float(strip.length.value)
    far = near + towards * reach
    return (near, far) if strip.ahead else (far, near)


@dataclass(frozen=True, eq=False)
class Rigid:
    """Axles at fixed distances behind the first of them, with what is told from them.

    Attributes:
        parts: weight and distance behind of each axle; strips: each with its axle's distance.
        length: from the first to the last; gap: what is ahead of the first, if anything.
    """

    parts: tuple[tuple[float, float], ...]
    strips: tuple[tuple[Strip, float, float], ...]
    length: float
    gap: Gap | None


def rigid_parts(case: Case) -> list[Rigid]:
    """The trains of a case cut at every gap that is not fixed."""
    told = list(strips_of(case))
    found: list[Rigid] = []
    for number, axle in enumerate(case.axles):
        behind = 0.0
        if found and axle.gap is not None and axle.gap.fixed:
            behind = found[-1].length + float(axle.gap.least)
        else:
            found.append(Rigid((), (), 0.0, axle.gap))
        weight = float(axle.weight.value * case.weighs("axles")) if axle.acts else 0.0
        own = [
            (strip, behind, float(strip.intensity * case.weighs("trailing")))
            for at, strip in told
            if at == number
        ]
        last = found.pop()
        found.append(Rigid((*last.parts, (weight, behind)), (*last.strips, *own), behind, last.gap))
    return found


class Sweep:
    """All trains of a case in steps along a line, seen heading right, and every gap in such steps:
    the greatest effect found, and one that cannot be exceeded, times the sense."""

    def __init__(self, curve: Curve, case: Case, steps: int) -> None:
        self.curve, self.rigid = curve, rigid_parts(case)
        self.raised = curve.raised()
        self.neglects = case.relieving == "neglect"
        self.step = curve.length / steps
        ahead = behind = 0.0
        for one in self.rigid:
            least = float(one.gap.least) if one.gap else 0.0
            behind += one.length + least
            for strip, _, _ in one.strips:
                reach = float(strip.start.value + (strip.length.value if strip.length else 0))
                ahead, behind = ahead + reach, behind + reach
        # Being irrational, the start puts no axle on a break, where rounding would choose a side.
        start = -ahead - (1 + 5**0.5) * self.step
        count = int((curve.length + ahead + behind) / self.step) + 8
        found = self._best(0, start, count)
        self.found = max(0.0, float(found[0].max()))
        self.possible = max(0.0, float(found[1].max()))

    def _best(self, number: int, start: float, count: int) -> tuple[Floats, Floats]:
        """What a part and all that follow it do at best, by the place of its first axle."""
        one = self.rigid[number]
        places: Floats = start + self.step * np.arange(count, dtype=np.float64)
        found, possible = self._alone(one, places)
        if number + 1 == len(self.rigid):
            return found, possible
        gap = self.rigid[number + 1].gap
        assert gap is not None
        if not gap.free:
            best = [
                self._best(number + 1, start - one.length - float(tie.value), count)
                for tie in gap.ties
            ]
            others = [np.max([two[n] for two in best], axis=0) for n in (0, 1)]
            return found + others[0], possible + others[1]
        after = self._best(number + 1, start - one.length - float(gap.least), count)
        greatest = gap.greatest
        wide = count if greatest is None else int(float(greatest - gap.least) / self.step)
        return (
            found + _greatest_before(after[0], wide, 0),
            possible + _greatest_before(after[1], wide + 2, 1),
        )

    def _alone(self, one: Rigid, at: Floats) -> tuple[Floats, Floats]:
        found, possible = np.zeros_like(at), np.zeros_like(at)
        radius = self.step / 2
        for weight, behind in one.parts:
            under, most = self.curve.at(at - behind), self.curve.highest(at - behind, radius)
            if self.neglects:
                under, most = np.maximum(under, 0), np.maximum(most, 0)
            found, possible = found + weight * under, possible + weight * most
        for strip, behind, intensity in one.strips:
            curve = self.raised if strip.broken else self.curve
            left, right = strip_ends(strip, at - behind)
            effect = intensity * (curve.area(right) - curve.area(left))
            found, possible = found + effect, possible + effect
            possible = possible + intensity * 2 * radius * curve.greatest
        return found, possible


def _greatest_before(values: Floats, wide: int, beyond: int) -> Floats:
    """The greatest from ``wide`` places before each to ``beyond`` places after it."""
    before, after = np.full(wide, values[0]), np.full(beyond, values[-1])
    padded = np.concatenate([before, values, after])
    if wide >= len(values):
        greatest: Floats = np.maximum.accumulate(padded)[wide + beyond :]
        return greatest
    return np.asarray(sliding_window_view(padded, wide + 1 + beyond).max(axis=1))
