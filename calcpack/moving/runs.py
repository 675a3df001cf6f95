"""Rigid runs of a train: where each may stand so that its effect is greatest, found in floats."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

import numpy as np
from numpy.typing import NDArray

from calcpack.moving.kernels import Floats, Keys, Kind, View, rescaled, shifted, value_at

Flags = NDArray[np.bool_]
Numbers = NDArray[np.int64]
ROUNDING = 1e-12
"""Part of the greatest possible effect that rounding may falsify, for a run on a beam as long."""
HALVINGS = 52


@dataclass(frozen=True)
class Element:
    """An axle of a run, or an end of a strip that travels with it.

    Attributes:
        kind: what it causes against its place.
        weight: its force, or the strip's intensity (below 0 at the strip's further end), times
            allowance and factors.
        behind: its distance behind the run's first axle (below 0: ahead of it).
        axle: its number in the case; None for a strip's end.
    """

    kind: Kind
    weight: Fraction
    behind: Fraction
    axle: int | None


@dataclass(frozen=True)
class Found:
    """The effect of a run over every line of a set, times the sense, at every place that matters.

    An event is where an element meets a break of its kernel. Events at one place count once; the
    others have the value -inf.

    Attributes:
        part, keys: (lines, events) the first axle's place in parts of the unit of length.
        element: the element that meets a break there.
        values: (lines, events, 2) with everything just left of the event, and just right of it.
        ends: whether an axle that stands exactly at an end of the beam is counted in that, though
            on that side it would be off.
        inner: (lines, places) places between two events where the effect is greatest.
        inner_values: the effect there; -inf where there is no such place.
        doubt: per line the rounding to allow for.
    """

    part: int
    keys: Keys
    element: Numbers
    values: Floats
    ends: Flags
    inner: Floats
    inner_values: Floats
    doubt: Floats

    def greatest(self) -> Floats:
        """The greatest effect on each line; below 0 where the run had better stay away."""
        rows = len(self.values)
        every = np.concatenate([self.values.reshape(rows, -1), self.inner_values], axis=1)
        greatest: Floats = every.max(axis=1)
        return greatest


def search(
    lines: View, elements: Sequence[Element], endless: Sequence[tuple[Kind, Fraction]] = ()
) -> Found:
    """The effect of a rigid run at every event, and where it is greatest between two.

    The effect is a sum of kernels, each moved by its element's place in the run: a piecewise
    polynomial whose coefficients change at events by jumps, which are summed from left to right.

    Args:
        lines: the influence lines.
        elements: of the run; at least one.
        endless: kind and intensity of strips ahead that reach on without end.
    """
    keys, part, jumps, bonuses, owners = _events(lines, elements)
    at: Floats = (keys / part).astype(np.float64)
    middle, half = (at.min() + at.max()) / 2, (at.max() - at.min()) / 2 or 1.0
    u = (at - middle) / half
    order = np.argsort(keys, axis=1, kind="stable")
    flat = order + np.arange(len(order))[:, None] * order.shape[1]
    keys, u = keys.ravel()[flat], u.ravel()[flat]
    powers = half ** np.arange(jumps.shape[-1])
    jumps = shifted((jumps.reshape(-1, len(powers)) * powers)[flat], -u)
    start = np.zeros_like(jumps[:, :1])
    for kind, intensity in endless:
        start[:, 0, 0] += float(intensity) * lines.kernels(kind).beyond
    polynomials = start + np.cumsum(jumps, axis=1)
    first, last, alone = _groups(keys)
    before = value_at(np.concatenate([start, polynomials[:, :-1]], axis=1), u)
    after = value_at(polynomials, u)
    values = np.stack([before.ravel()[first], after.ravel()[last]], axis=-1)
    bonuses = bonuses.reshape(-1, 2)[flat]
    sums = np.cumsum(bonuses, axis=1)
    there = sums.reshape(-1, 2)[last] - (sums - bonuses).reshape(-1, 2)[first]
    inner, inner_values = _between(polynomials, u)
    sizes = [abs(float(one.weight)) * lines.kernels(one.kind).greatest for one in elements]
    spread = max(1.0, 2 * half / lines.length) ** (jumps.shape[-1] - 1)
    return Found(
        part,
        keys,
        owners[order],
        np.where(alone[..., None], values + np.maximum(there, 0), -np.inf),
        there > 0,
        inner * half + middle,
        inner_values,
        ROUNDING * spread * np.sum(sizes, axis=0),
    )


def _events(lines: View, elements: Sequence[Element]) -> tuple[Keys, int, Floats, Floats, Numbers]:
    """Every event of every element: key, jump, what counts at the ends, and whose it is."""
    kernels = {kind: lines.kernels(kind) for kind in dict.fromkeys(one.kind for one in elements)}
    part = math.lcm(
        *(kernel.part for kernel in kernels.values()), *(one.behind.denominator for one in elements)
    )
    room = max(abs(int(one.behind * part)) for one in elements)
    powers = max(kernel.jumps.shape[-1] for kernel in kernels.values())
    rows = len(lines.rows)
    keys: list[Keys] = []
    jumps: list[Floats] = []
    bonuses: list[Floats] = []
    owners: list[Numbers] = []
    for kind, kernel in kernels.items():
        own = [(number, one) for number, one in enumerate(elements) if one.kind == kind]
        behind: Any = [int(one.behind * part) for _, one in own]
        weights = np.array([float(one.weight) for _, one in own])[:, None]
        base = rescaled(kernel.keys, part // kernel.part, room)
        keys.append(
            (base[:, None, :] + np.array(behind, dtype=base.dtype)[:, None]).reshape(rows, -1)
        )
        padded = np.zeros((*kernel.jumps.shape[:2], powers))
        padded[..., : kernel.jumps.shape[-1]] = kernel.jumps
        jumps.append((padded[:, None] * weights[..., None]).reshape(rows, -1, powers))
        ends = np.zeros((rows, len(own), base.shape[1], 2))
        ends[:, :, 0, 0] = kernel.ends[:, :1] * weights.T
        ends[:, :, -1, 1] = kernel.ends[:, 1:] * weights.T
        bonuses.append(ends.reshape(rows, -1, 2))
        owners.append(np.repeat([number for number, _ in own], base.shape[1]))
    if any(one.dtype == object for one in keys):
        keys = [one.astype(object) for one in keys]
    return (
        np.concatenate(keys, axis=1),
        part,
        np.concatenate(jumps, axis=1),
        np.concatenate(bonuses, axis=1),
        np.concatenate(owners),
    )


def _groups(keys: Keys) -> tuple[Numbers, Numbers, Flags]:
    """For each event the first and the last one at its place, by their numbers among all events of
    all lines, and whether it is the first."""
    index = np.arange(keys.size).reshape(keys.shape)
    same = (keys[:, 1:] == keys[:, :-1]).astype(bool)
    edge = np.zeros((len(keys), 1), dtype=bool)
    starts, stops = ~np.hstack([edge, same]), ~np.hstack([same, edge])
    first = np.maximum.accumulate(np.where(starts, index, 0), axis=1)
    last = np.where(stops, index, keys.size)[:, ::-1]
    return first, np.minimum.accumulate(last, axis=1)[:, ::-1], starts


def _between(polynomials: Floats, u: Floats) -> tuple[Floats, Floats]:
    """Where each polynomial is greatest strictly between its event and the next, and its value.

    Its slope is cut where it turns itself, a straight line or parabola having none or one such
    place and a cubic two, and bisected wherever it falls through zero or to it; where it does so
    at the next event, that stands for the place.
    """
    powers = polynomials.shape[-1]
    if powers < 3 or u.shape[1] < 2:
        return np.zeros((len(u), 0)), np.zeros((len(u), 0))
    piece = polynomials[:, :-1]
    slope = piece[..., 1:] * np.arange(1, powers)
    low, high = u[:, :-1], u[:, 1:]
    cuts = np.stack([low, *(np.clip(one, low, high) for one in _turns(slope)), high], axis=-1)
    slopes = value_at(slope[..., None, :], cuts)
    ends = (slopes[..., 1:] < 0) | ((slopes[..., 1:] == 0) & (cuts[..., 1:] < high[..., None]))
    falls = (slopes[..., :-1] > 0) & ends
    lines, pieces, which = np.nonzero(falls)
    bracket = cuts[lines, pieces, which], cuts[lines, pieces, which + 1]
    place = _falling_root(slope[lines, pieces], *bracket)
    values = value_at(piece[lines, pieces], place)
    return _rows(lines, place, len(u), 0.0), _rows(lines, values, len(u), -np.inf)


def _falling_root(slope: Floats, low: Floats, high: Floats) -> Floats:
    """Where each slope falls through zero between ``low`` and ``high``.

    Of a straight line or parabola by the quadratic formula, of a cubic by bisection.
    """
    if slope.shape[-1] <= 3:
        a = slope[:, 2] if slope.shape[-1] == 3 else np.zeros(len(slope))
        c, b = slope[:, 0], slope[:, 1]
        root = np.sqrt(np.maximum(b * b - 4 * a * c, 0))
        with np.errstate(divide="ignore", invalid="ignore"):
            place = np.where(b < 0, 2 * c / (root - b), -(b + root) / (2 * a))
        clipped: Floats = np.clip(np.nan_to_num(place), low, high)
        return clipped
    for _ in range(HALVINGS):
        middle = (low + high) / 2
        rising = value_at(slope, middle) > 0
        low, high = np.where(rising, middle, low), np.where(rising, high, middle)
    return (low + high) / 2


def _turns(slope: Floats) -> list[Floats]:
    """Where a slope of at most the third power turns; where it does not, anything."""
    powers = slope.shape[-1]
    with np.errstate(divide="ignore", invalid="ignore"):
        if powers == 3:
            found = [-slope[..., 1] / (2 * slope[..., 2])]
        elif powers == 4:
            b, c, d = slope[..., 1], 2 * slope[..., 2], 3 * slope[..., 3]
            root = np.sqrt(c * c - 4 * d * b)
            q = -(c + np.copysign(root, c)) / 2
            found = _in_order(q / d, b / q)
        else:
            found = []
    return [np.nan_to_num(one, nan=0.0, posinf=0.0, neginf=0.0) for one in found]


def _in_order(one: Floats, other: Floats) -> list[Floats]:
    """The lesser and the greater of two, item by item."""
    return [np.fmin(one, other), np.fmax(one, other)]


def _rows(row: Numbers, values: Floats, rows: int, filled: float) -> Floats:
    """Values that come with their row, row by row; the shorter rows filled up."""
    counts = np.bincount(row, minlength=rows)
    table = np.full((rows, int(counts.max(initial=0))), filled)
    starts = np.cumsum(counts) - counts
    table[row, np.arange(len(row)) - starts[row]] = values
    return table
