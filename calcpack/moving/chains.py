"""Trains whose gaps may vary: rigid runs of axles, put together so that the whole governs.

Where the whole is greatest, every gap is either held (at an end of its range, or at a value of its
list) or free. Axles joined by held gaps are one rigid run, and a run between two free gaps can move
a little either way, so that it stands where its own effect is greatest: at one of the places of
``runs.search``. From the last run forward each place takes the best that may follow it.
"""

from __future__ import annotations

import itertools
from collections.abc import Iterator
from dataclasses import dataclass, replace
from fractions import Fraction

import numpy as np

from calcpack.exact.roots import GRID
from calcpack.model.loads import Case, Gap, Strip
from calcpack.moving.kernels import Floats, Kind, View
from calcpack.moving.runs import Element, Found, Numbers, search

ASIDE = 1e-13
"""Part of the beam and the trains by which a run just left or right of a place is taken to stand
off it, when it is asked what may follow: far above rounding, far below what is typed."""
NOTHING = Element("point", Fraction(0), Fraction(0), None)
Endless = tuple[Kind, Fraction]


@dataclass(frozen=True)
class Run:
    """Axles at held distances, from the first to the last by number.

    Attributes:
        places: the distance of each axle behind the first.
        elements: what acts, behind the first axle.
        endless: kind and intensity of strips ahead that reach on without end.
    """

    first: int
    places: tuple[Fraction, ...]
    elements: tuple[Element, ...]
    endless: tuple[Endless, ...]

    @property
    def last(self) -> int:
        return self.first + len(self.places) - 1

    def joined(self, gap: Fraction, other: Run) -> Run:
        """Both as one run, the other so far behind the last axle."""
        far = self.places[-1] + gap
        moved = (replace(one, behind=one.behind + far) for one in other.elements)
        return Run(
            self.first,
            (*self.places, *(far + place for place in other.places)),
            (*self.elements, *moved),
            (*self.endless, *other.endless),
        )


@dataclass(frozen=True)
class Stand:
    """Where a run stands, seen heading right.

    Attributes:
        at: place of its first axle.
        right: whether it stands just right of there, else just left.
        ends: whether what stands exactly at an end of the beam counts, though on that side it
            would be off.
        met_by: what meets a break there; None where the rate of change is zero instead.
    """

    run: Run
    at: Fraction
    right: bool
    ends: bool
    met_by: Element | None


@dataclass(frozen=True)
class Tail:
    """The places of one line where what follows a gap may begin, from left to right.

    Attributes:
        at: place of its first axle, aside of events on the side it stands.
        value: the greatest effect of it and of all that follows.
        run, place: which run stands there, and which of its places it is.
        then: which place of the next tail follows; -1 for none.
    """

    at: Floats
    value: Floats
    run: Numbers
    place: Numbers
    then: Numbers


class Chain:
    """The trains of a case over a set of lines, under the heading of the set."""

    def __init__(self, lines: View, case: Case) -> None:
        clusters, self.gaps = clusters_of(case)
        self.starts = [cluster.first for cluster in clusters]
        self.runs = [list(_runs_from(clusters, self.gaps, start)) for start in range(len(clusters))]
        self.found = [
            [search(lines, run.elements, run.endless) for run in runs] for runs in self.runs
        ]
        far = sum((cluster.places[-1] for cluster in clusters), Fraction(0))
        far += sum((gap.ties[-1].value for gap in self.gaps), Fraction(0))
        self.aside = ASIDE * (lines.length + float(far))

    def greatest(self) -> Floats:
        """The greatest effect on each line."""
        if len(self.starts) == 1:
            return self.found[0][0].greatest()
        return np.array([tails[0].value.max() for tails in map(self._tails, range(self.rows))])

    @property
    def rows(self) -> int:
        return len(self.found[0][0].values)

    def doubt(self, row: int) -> float:
        """The rounding to allow for on one line."""
        return float(max(found.doubt[row] for founds in self.found for found in founds)) * len(
            self.starts
        )

    def looked_at(self, row: int) -> int:
        """How many places of runs were looked at on one line."""
        return sum(
            int(np.isfinite(one).sum())
            for founds in self.found
            for found in founds
            for one in (found.values[row, :, 0], found.inner_values[row])
        )

    def foremost(self, row: int) -> Iterator[tuple[float, tuple[Stand, ...]]]:
        """Every place of the first run with the best that may follow it, by falling effect."""
        tails = self._tails(row)
        for index in np.argsort(-tails[0].value, kind="stable").tolist():
            yield float(tails[0].value[index]), tuple(self._stands(row, tails, index))

    def _tails(self, row: int) -> list[Tail]:
        tails: list[Tail] = []
        for start in reversed(range(len(self.starts))):
            own = [
                self._tail(row, start, number, found, tails)
                for number, found in enumerate(self.found[start])
            ]
            whole = [np.concatenate(parts) for parts in zip(*own, strict=True)]
            order = np.argsort(whole[0], kind="stable")
            tails.insert(0, Tail(*(part[order] for part in whole)))
        return tails

    def _tail(
        self, row: int, start: int, number: int, found: Found, tails: list[Tail]
    ) -> tuple[Floats, Floats, Numbers, Numbers, Numbers]:
        """The places of one run with what follows it; ``tails`` begin after cluster ``start``."""
        at = (found.keys[row] / found.part).astype(np.float64)
        at = np.concatenate([at - self.aside, at + self.aside, found.inner[row]])
        value = np.concatenate([*found.values[row].T, found.inner_values[row]])
        place = np.flatnonzero(np.isfinite(value))
        at, value = at[place], value[place]
        then = np.full(len(place), -1)
        run = self.runs[start][number]
        after = self.starts.index(run.last + 1) if run.last + 1 in self.starts else None
        if after is not None:
            gap, tail = self.gaps[after - 1], tails[after - start - 1]
            least, greatest = float(gap.least), gap.greatest
            rear = at - float(run.places[-1])
            low = -np.inf if greatest is None else rear - float(greatest) - self.aside / 2
            then = _best_within(tail, low + 0 * rear, rear - least + self.aside / 2)
            fits = then >= 0
            at, value, place, then = at[fits], value[fits], place[fits], then[fits]
            value = value + tail.value[then]
        return at, value, np.full(len(place), number), place, then

    def _stands(self, row: int, tails: list[Tail], index: int) -> Iterator[Stand]:
        start = 0
        while index >= 0:
            tail = tails[start]
            run = self.runs[start][tail.run[index]]
            found = self.found[start][tail.run[index]]
            yield _stand(run, found, row, int(tail.place[index]))
            index = int(tail.then[index])
            start = self.starts.index(run.last + 1) if index >= 0 else start


def clusters_of(case: Case) -> tuple[list[Run], list[Gap]]:
    """The axles at fixed distances from the foremost, and the gaps between them."""
    clusters: list[Run] = []
    gaps: list[Gap] = []
    for number, (axle, own) in enumerate(zip(case.axles, _acting(case), strict=True)):
        elements = tuple(one for one in own if isinstance(one, Element))
        endless = tuple(one for one in own if not isinstance(one, Element))
        one = Run(number, (Fraction(0),), elements, endless)
        if axle.gap is not None and axle.gap.fixed:
            clusters.append(clusters.pop().joined(axle.gap.least, one))
        else:
            clusters.append(one)
            gaps += [axle.gap] if axle.gap is not None else []
    return [replace(one, elements=one.elements or (NOTHING,)) for one in clusters], gaps


def _acting(case: Case) -> list[list[Element | Endless]]:
    """What acts at each axle: itself, and strips that are told from it; factors included."""
    point: Kind = "relieved point" if case.relieving == "neglect" else "point"
    parts: list[list[Element | Endless]] = []
    for train in case.trains:
        first = len(parts)
        for axle in train.axles:
            weight = axle.weight.value * case.weighs("axles")
            own = Element(point, weight, Fraction(0), len(parts))
            parts.append([own] if axle.acts and weight else [])
        for strip in train.strips:
            part = parts[first if strip.ahead else -1]
            part += _strip(strip, strip.intensity * case.weighs("trailing"))
    return parts


def _strip(strip: Strip, intensity: Fraction) -> Iterator[Element | Endless]:
    """The ends of a strip, about the axle that it is told from."""
    kind: Kind = "relieved area" if strip.broken else "area"
    back = -1 if strip.ahead else 1
    near = back * strip.start.value
    yield Element(kind, back * intensity, near, None)
    if strip.length is not None:
        yield Element(kind, -back * intensity, near + back * strip.length.value, None)
    elif strip.ahead:
        yield kind, intensity


def _runs_from(clusters: list[Run], gaps: list[Gap], start: int) -> Iterator[Run]:
    """Every rigid run that begins with a cluster and may end where it does."""
    for stop in range(start, len(clusters)):
        if stop < len(gaps) and not gaps[stop].free:
            continue
        for held in itertools.product(*(gap.ties for gap in gaps[start:stop])):
            run = clusters[start]
            for tie, other in zip(held, clusters[start + 1 : stop + 1], strict=True):
                run = run.joined(tie.value, other)
            yield run


def _best_within(tail: Tail, low: Floats, high: Floats) -> Numbers:
    """For each window the place of the tail with the greatest value in it; -1 for none.

    The greatest of each stretch of 1, 2, 4, ... places is found once; two of them cover a window.
    """
    levels = [np.arange(len(tail.value))]
    width = 1
    while 2 * width <= len(tail.value):
        one, other = levels[-1][:-width], levels[-1][width:]
        levels.append(np.where(tail.value[other] > tail.value[one], other, one))
        width *= 2
    first = np.searchsorted(tail.at, low, "left")
    after = np.searchsorted(tail.at, high, "right")
    best = np.full(len(first), -1)
    sizes = np.maximum(after - first, 0)
    for level, places in enumerate(levels):
        own = np.flatnonzero((sizes >= 2**level) & (sizes < 2 ** (level + 1)))
        one, other = places[first[own]], places[after[own] - 2**level]
        best[own] = np.where(tail.value[other] > tail.value[one], other, one)
    return best


def _stand(run: Run, found: Found, row: int, place: int) -> Stand:
    events = found.keys.shape[1]
    if place >= 2 * events:
        at = round(Fraction(float(found.inner[row, place - 2 * events])) / GRID) * GRID
        return Stand(run, at, False, False, None)
    side, event = divmod(place, events)
    return Stand(
        run,
        Fraction(int(found.keys[row, event]), found.part),
        side == 1,
        bool(found.ends[row, event, side]),
        run.elements[found.element[row, event]],
    )
