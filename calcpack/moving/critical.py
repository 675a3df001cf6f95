"""The place of a moving load that governs, found without stepping."""

from __future__ import annotations

import heapq
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property

import numpy as np

from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.loads import Applies, Case, Heading, MovingLoad
from calcpack.moving.chains import Chain, Stand
from calcpack.moving.kernels import LineSet, View
from calcpack.moving.placement import (
    AxleShare,
    Group,
    Position,
    Sense,
    Stretch,
    StripShare,
    axle_shares,
    axles_in_pairs,
    joined,
    rate,
    strip_shares,
)

NEAR_CANDIDATES = 5
MOST_PLACES = 400
"""Places at most that are evaluated exactly for one effect, also where more tie."""


@dataclass(frozen=True)
class Target:
    """The influence line of an effect, and what decides which cases of a load are for it.

    Attributes:
        line: the influence line.
        kind, at: of the effect.
        interior: whether it is at a support that is neither the first nor the last.
        spans: stretches between supports, overhangs included; each takes one concentrated load.
    """

    line: Piecewise
    kind: str = "moment"
    at: Fraction = Fraction(0)
    interior: bool = False
    spans: tuple[Stretch, ...] = ()

    def raised_on(self, sense: Sense) -> tuple[tuple[Stretch, ...], Fraction]:
        """The stretches where the line has the sign of ``sense``, and their area."""
        return self._raised[sense]

    @cached_property
    def _raised(self) -> dict[int, tuple[tuple[Stretch, ...], Fraction]]:
        line, found = self.line, {}
        positive, negative = line.areas()
        for sense, area in ((1, positive), (-1, negative)):
            runs = [(start, end) for start, end, sign in line.signed_runs() if sign == sense]
            found[sense] = joined(runs), area
        return found


@dataclass(frozen=True)
class Candidate:
    """A position looked at, and the value of the whole case there, all factors included."""

    case: Case
    position: Position
    value: Fraction


@dataclass(frozen=True)
class Tie:
    """Other places with the governing value: from ``first`` to ``last``, which may be the same."""

    first: Candidate
    last: Candidate


@dataclass(frozen=True)
class Governing:
    """The greatest (or least) value of one effect under one load, and where the load then stands.

    Attributes:
        sense: 1 the greatest, -1 the least.
        value: of the case, with allowances, factors and distribution; never of the other sign,
            since the load may stay away.
        share: distribution.
        case: the governing one; None where no case is for this effect, or all had better stay away.
        position: of its trains; None where no place of them helps.
        axles: what each axle adds; strips: each strip; concentrated: each floating force.
        loaded: the stretches under its uniform load, and their area.
        ties: other places with the same value.
        looked_at: how many places were looked at, over all cases and headings.
        near: the best candidates at other places, best first; the first is the next-worst.
        rates: change of the trains' static effect per unit of travel to the right, left and right
            of here.
    """

    sense: Sense
    value: Fraction
    share: Fraction
    case: Case | None
    position: Position | None
    axles: tuple[AxleShare, ...]
    strips: tuple[StripShare, ...]
    concentrated: tuple[AxleShare, ...]
    loaded: tuple[Stretch, ...]
    area: Fraction
    ties: tuple[Tie, ...]
    looked_at: int
    near: tuple[Candidate, ...]
    rates: tuple[Fraction, Fraction] | None

    @property
    def static(self) -> Fraction:
        """The effect without allowances, factors and distribution."""
        return self.axles_effect + self.trailing_effect + self.uniform_effect

    @property
    def axles_effect(self) -> Fraction:
        """Static effect of all axles and concentrated forces."""
        return sum((one.effect for one in (*self.axles, *self.concentrated)), Fraction(0))

    @property
    def trailing_effect(self) -> Fraction:
        """Static effect of all strips."""
        return sum((one.effect for one in self.strips), Fraction(0))

    @property
    def uniform_effect(self) -> Fraction:
        """Static effect of the uniform load."""
        uniform = self.case.uniform if self.case else None
        return uniform.value * self.area if uniform else Fraction(0)


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


def applies(case: Case, load: MovingLoad, target: Target, sense: Sense) -> bool:
    """Whether a case is for the target in that sense."""

    def holds(one: Applies) -> bool:
        if (one.kinds and target.kind not in one.kinds) or one.sense not in (0, sense):
            return False
        if one.region == "hogging":
            return _hogs(load, target)
        return one.region == "everywhere" or target.interior

    return not case.applies or any(map(holds, case.applies))


def _hogs(load: MovingLoad, target: Target) -> bool:
    """Whether a uniform load on all spans causes a negative moment there, or is said to."""
    if target.kind == "moment reaction":
        return True  # whichever way it turns: on the safe side
    if load.hogging is not None:
        return any(start <= target.at <= end for start, end in load.hogging)
    first, last = target.line.breaks[0], target.line.breaks[-1]
    return target.line.integral(first, last) < 0


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
        self.stays = [_staying(case, targets[number], sense) for number in own]
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


@dataclass(frozen=True)
class _Staying:
    """What of a case does not travel, and its value with allowances and factors."""

    forces: tuple[AxleShare, ...]
    loaded: tuple[Stretch, ...]
    area: Fraction
    value: Fraction


NOTHING_STAYS = _Staying((), (), Fraction(0), Fraction(0))


def _staying(case: Case, target: Target, sense: Sense) -> _Staying:
    forces = _concentrated(case, target, sense)
    value = sum((one.effect for one in forces), Fraction(0)) * case.weighs("axles")
    loaded: tuple[Stretch, ...] = ()
    area = Fraction(0)
    if case.uniform is not None:
        loaded, area = target.raised_on(sense)
        value += case.uniform.value * area * case.weighs("uniform")
    return _Staying(forces, loaded, area, value)


def _concentrated(case: Case, target: Target, sense: Sense) -> tuple[AxleShare, ...]:
    """The greatest forces at the greatest ordinates, one a span; without spans all are one."""
    if not case.concentrated:
        return ()
    line = target.line
    whole = (line.breaks[0], line.breaks[-1])
    peaks = sorted(
        (_peak(line, span, sense) for span in target.spans or (whole,)),
        key=lambda peak: -sense * peak[2],
    )
    weights = sorted((one.value for one in case.concentrated), reverse=True)
    return tuple(
        AxleShare(number, weight, at, side, ordinate, "counts")
        for number, (weight, (at, side, ordinate)) in enumerate(zip(weights, peaks, strict=False))
        if sense * ordinate > 0
    )


def _peak(line: Piecewise, span: Stretch, sense: Sense) -> tuple[Fraction, Side, Fraction]:
    """Where in a span, and on which side, the line is greatest in its sense, and how great."""
    start, end = span
    places: list[tuple[Fraction, Side]] = [(start, "right"), (end, "left")]
    for at in (*line.breaks, *line.turns()):
        if start < at < end:
            places += [(at, "left"), (at, "right")]
    values = [(at, side, line.value(at, side)) for at, side in places]
    return max(values, key=lambda one: (sense * one[2], -one[0]))


def _share(load: MovingLoad, target: Target) -> Fraction:
    share = load.share(target.kind, target.at)
    assert share is not None, "the reader sees to a distribution for every effect"
    return share.value.value


def trains_value(line: Piecewise, case: Case, position: Position, sense: Sense) -> Fraction:
    """The trains' effect at a position with allowances and factors, without distribution."""
    axles = sum((one.effect for one in axle_shares(line, case, position, sense)), Fraction(0))
    strips = sum((one.effect for one in strip_shares(line, case, position, sense)), Fraction(0))
    return axles * case.weighs("axles") + strips * case.weighs("trailing")


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
    ties, near = _others(line, sense, found, best) if best else ((), ())
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


def _others(
    line: Piecewise, sense: Sense, candidates: Sequence[Candidate], best: Candidate
) -> tuple[tuple[Tie, ...], tuple[Candidate, ...]]:
    """Other places with the same value, and the best places with a lesser one."""
    seen: set[tuple[Heading, Fraction, object]] = set()
    others: list[Candidate] = []
    for one in candidates:
        # Of a case the best at each place; what differs only in axles off the beam is the same.
        heading, lead_at = one.position.heading, one.position.lead_at
        if not any((heading, lead_at, told) in seen for told in (one.value, one.case.name)):
            others.append(one)
        seen.update((heading, lead_at, told) for told in (one.value, one.case.name))
    tied = [one for one in others if one.value == best.value]
    near = [one for one in others if one.value != best.value]
    return tuple(_ranges(line, sense, tied, best)), tuple(near[:NEAR_CANDIDATES])


def _ranges(
    line: Piecewise, sense: Sense, tied: Sequence[Candidate], best: Candidate
) -> Iterator[Tie]:
    """Places of one value, those between which it does not change as one range."""

    def order(one: Candidate) -> tuple[str, bool, tuple[Fraction, ...], Fraction]:
        gaps = tuple(gap for _, gap in axles_in_pairs(one.position))
        return one.case.name, one.position.heading == "left", gaps, one.position.lead_at

    ranges: list[Tie] = []
    for one in sorted(tied, key=order):
        before = ranges[-1].last if ranges else None
        alike = before is not None and order(before)[:-1] == order(one)[:-1]
        if before is not None and alike and _level(line, sense, before, one):
            ranges[-1] = Tie(ranges[-1].first, one)
        else:
            ranges.append(Tie(one, one))
    return (one for one in ranges if one.first is not one.last or one.first is not best)


def _level(line: Piecewise, sense: Sense, one: Candidate, other: Candidate) -> bool:
    """Whether the value is the same all the way from one place to the next event.

    Between two events it is a polynomial of at most the fourth power: five equal values will do.
    """
    run = other.position.lead_at - one.position.lead_at
    there = trains_value(line, one.case, one.position, sense)
    last = len(one.position.stations) - 1
    group = Group(0, last, "left", True, None, None)
    for quarter in (1, 2, 3):
        stations = tuple(at + run * quarter / 4 for at in one.position.stations)
        between = Position(one.position.heading, stations, (group,))
        if trains_value(line, one.case, between, sense) != there:
            return False
    return True
