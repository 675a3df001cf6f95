"""The place of a moving load that governs, found without stepping."""

from __future__ import annotations

import heapq
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction

import numpy as np

from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.loads import Case, Heading, MovingLoad
from calcpack.moving.chains import Chain, Stand
from calcpack.moving.governing import NEAR_CANDIDATES, Candidate, Governing
from calcpack.moving.kernels import LineSet, View
from calcpack.moving.placement import (
    Group,
    Position,
    Sense,
    axle_shares,
    axles_in_pairs,
    rate,
    strip_shares,
    trains_value,
)
from calcpack.moving.staying import NOTHING_STAYS, staying
from calcpack.moving.target import Target, applies
from calcpack.moving.ties import tied_and_near

MOST_PLACES = 400
"""Places at most that are evaluated exactly for one effect, also where more tie."""


def governing(
    targets: Sequence[Target],
    load: MovingLoad,
    sense: Sense,
    lines: LineSet | None = None,
    near: int = NEAR_CANDIDATES,
) -> tuple[Governing, ...]:
    """Find the greatest (sense 1) or least (sense -1) effect of the load on each target.

    The effect of a train is the sum of weight x ordinate over its axles and of intensity x area
    over its strips, a piecewise polynomial of its place. Its extremes lie at events, where an axle
    meets a breakpoint of the line, a zero of it (where it begins to be neglected) or an end of the
    beam, or a strip's end does, and for curved lines where the rate of change is zero between two
    events. At each event the train stands just left or just right, all its axles alike; trains
    with gaps that vary are put together from such runs. Floats choose the places; their values
    are exact. Uniform load stands on the parts of the line that have the sign of ``sense``, each
    concentrated force where the line is greatest in its span.

    Args:
        targets: lines over one beam.
        load: has a distribution for each.
        sense: what is looked for.
        lines: those of the targets, where they were met before.
        near: how many candidates beside the best are asked for.
    """
    lines = lines or LineSet([target.line for target in targets])
    searches = [_Search(targets, lines, load, case, sense) for case in load.cases]
    return tuple(
        _judged(
            target, sense, [(one, one.row_of[row]) for one in searches if row in one.row_of], near
        )
        for row, target in enumerate(targets)
    )


def greatest(
    targets: Sequence[Target], load: MovingLoad, sense: Sense, lines: LineSet | None = None
) -> list[float]:
    """The values of ``governing`` in floats, without what proves them."""
    lines = lines or LineSet([target.line for target in targets])
    found = [0.0] * len(targets)
    for case in load.cases:
        search = _Search(targets, lines, load, case, sense)
        values = search.in_floats()
        for number, row in search.row_of.items():
            found[number] = max(found[number], values[row])
    return [sense * value for value in found]


class _Search:
    """One case over the targets that it is for; ``row_of`` gives each its row by its number."""

    def __init__(
        self,
        targets: Sequence[Target],
        lines: LineSet,
        load: MovingLoad,
        case: Case,
        sense: Sense,
    ) -> None:
        self.case, self.sense = case, sense
        own = [n for n, one in enumerate(targets) if applies(case, load, one, sense)]
        self.row_of = {number: row for row, number in enumerate(own)}
        self.lines = [targets[number].line for number in own]
        self.shares = [_share(load, targets[number]) for number in own]
        self.stays = [staying(case, targets[number], sense) for number in own]
        self.chains: dict[Heading, Chain] = {}
        if case.trains and own:
            for heading in case.headings:
                self.chains[heading] = Chain(View(lines, tuple(own), heading, sense), case)

    def in_floats(self) -> list[float]:
        """The greatest value of the case on each line, times the sense."""
        values = np.array([self.sense * float(stays.value) for stays in self.stays])
        if self.chains:
            trains = [chain.greatest() for chain in self.chains.values()]
            values += np.maximum(np.max(trains, axis=0), 0)
        return [
            float(value) * float(share) for value, share in zip(values, self.shares, strict=True)
        ]

    def foremost(self, row: int) -> Iterator[_Place]:
        """Places of the trains on one line by falling value, as floats have it, heading by heading
        merged.
        """
        share, stays = float(self.shares[row]), self.sense * float(self.stays[row].value)

        def along(heading: Heading, chain: Chain) -> Iterator[_Place]:
            doubt = chain.doubt(row)
            for number, (value, stands) in enumerate(chain.foremost(row)):
                if value <= doubt and number >= NEAR_CANDIDATES:
                    return  # nothing is gained but rounding
                yield _Place((value + stays) * share, 2 * share * doubt, self, row, heading, stands)

        streams = (along(*one) for one in self.chains.items())
        return heapq.merge(*streams, key=lambda place: -place.value)

    def candidate(self, place: _Place) -> Candidate | None:
        """A place with its exact value; None where no gap allows it, or nothing is gained."""
        line, row = self.lines[place.row], place.row
        position = _position(place.heading, line, place.stands)
        if not _allowed(self.case, position):
            return None
        trains = trains_value(line, self.case, position, self.sense)
        if self.sense * trains <= 0:
            return None
        return Candidate(self.case, position, (trains + self.stays[row].value) * self.shares[row])

    def looked_at(self, row: int) -> int:
        return sum(chain.looked_at(row) for chain in self.chains.values())


@dataclass(frozen=True)
class _Place:
    """A place in floats: its value times the sense, and the rounding to allow for."""

    value: float
    doubt: float
    search: _Search
    row: int
    heading: Heading
    stands: tuple[Stand, ...]


def _share(load: MovingLoad, target: Target) -> Fraction:
    share = load.share(target.kind, target.at)
    assert share is not None, "the reader sees to a distribution for every effect"
    return share.value.value


def _position(heading: Heading, line: Piecewise, stands: Sequence[Stand]) -> Position:
    """Stands as they are on the beam itself, for either heading."""
    turned = heading == "left"
    both_ends = line.breaks[0] + line.breaks[-1]
    stations: list[Fraction] = []
    groups: list[Group] = []
    for stand in stands:
        run = stand.run
        along = [stand.at - place for place in run.places]
        own = [both_ends - at if turned else at for at in along]
        side: Side = "right" if stand.right != turned else "left"
        off = line.breaks[0] if side == "left" else line.breaks[-1]
        mark = None
        if stand.met_by is not None:
            met = stand.at - stand.met_by.behind
            mark = both_ends - met if turned else met
        anchor = stand.met_by.axle if stand.met_by else None
        groups.append(Group(run.first, run.last, side, stand.ends or off not in own, anchor, mark))
        stations += own
    return Position(heading, tuple(stations), tuple(groups))


def _allowed(case: Case, position: Position) -> bool:
    """Whether every gap is one that the case allows, exactly."""
    gaps = [axle.gap for axle in case.axles]
    return all(
        (gap := gaps[number]) is None or gap.allows(distance)
        for number, distance in axles_in_pairs(position)
    )


def _judged(
    target: Target, sense: Sense, searches: Sequence[tuple[_Search, int]], near_wanted: int
) -> Governing:
    """The best over all cases, with what proves it."""
    line = target.line
    found = list(_candidates(searches, near_wanted))
    found.sort(key=lambda one: (-sense * one.value, *_preference(one.position)))
    best = found[0] if found else None
    case = best.case if best else None
    value = best.value if best else Fraction(0)
    for search, row in searches:
        alone = search.stays[row].value * search.shares[row]
        if sense * alone > sense * value:
            best, case, value = None, search.case, alone
    position = best.position if best else None
    stays = next((one.stays[row] for one, row in searches if one.case is case), NOTHING_STAYS)
    ties, near = tied_and_near(line, sense, found, best) if best else ((), ())
    return Governing(
        sense,
        value,
        searches[0][0].shares[searches[0][1]] if searches else Fraction(0),
        case,
        position,
        axle_shares(line, case, position, sense) if case and position else (),
        strip_shares(line, case, position, sense) if case and position else (),
        stays.forces,
        stays.loaded,
        stays.area,
        ties,
        sum(search.looked_at(row) for search, row in searches),
        near,
        _rates(line, case, position, sense) if case and position else None,
    )


def _candidates(searches: Sequence[tuple[_Search, int]], near: int) -> Iterator[Candidate]:
    """Places over all cases that may govern, and so many more, with their exact values."""
    streams = (search.foremost(row) for search, row in searches)
    places: set[tuple[int, tuple[Fraction, ...]]] = set()
    enough: float | None = None
    for place in heapq.merge(*streams, key=lambda place: -place.value):
        enough = place.value - place.doubt if enough is None else enough
        if (place.value < enough and len(places) > near) or len(places) > MOST_PLACES:
            return
        candidate = place.search.candidate(place)
        if candidate is not None:
            places.add((id(place.search), candidate.position.stations))
            yield candidate


def _rates(
    line: Piecewise, case: Case, position: Position, sense: Sense
) -> tuple[Fraction, Fraction]:
    return rate(line, case, position, sense, "left"), rate(line, case, position, sense, "right")


def _preference(position: Position) -> tuple[bool, bool, Fraction, bool]:
    """Among equal values: heading right, standing exactly there, the leftmost place, left side."""
    return (
        position.heading == "left",
        not all(group.ends_count for group in position.groups),
        position.lead_at,
        position.groups[0].side == "right",
    )
