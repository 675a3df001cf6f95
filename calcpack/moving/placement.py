"""The effect of a load that stands at one place."""

from __future__ import annotations

import itertools
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.loads import Axle, Case, Heading, Strip

Sense = Literal[1, -1]
Standing = Literal["counts", "neglected", "off the beam", "does not act"]
Stretch = tuple[Fraction, Fraction]


@dataclass(frozen=True)
class Group:
    """Axles that are held together where the load stands, and how they stand.

    Attributes:
        first, last: numbers of its axles in the case, from 0.
        side: every one of them at a jump of the line stands just on this side of it.
        ends_count: True where an axle at the very end of the beam counts; False where it is still
            (or already) off the beam, as ``side`` says.
        anchor: the axle that stands at ``mark``; None where the end of a strip does.
        mark: a breakpoint or zero of the line, or an end of the beam; None where instead the rate
            of change is zero.
    """

    first: int
    last: int
    side: Side
    ends_count: bool
    anchor: int | None
    mark: Fraction | None


@dataclass(frozen=True)
class Position:
    """Where the trains of a case stand: the station of every axle, from the foremost back."""

    heading: Heading
    stations: tuple[Fraction, ...]
    groups: tuple[Group, ...]

    @property
    def lead_at(self) -> Fraction:
        """Station of the foremost axle."""
        return self.stations[0]

    def group_of(self, axle: int) -> Group:
        return next(group for group in self.groups if axle <= group.last)


@dataclass(frozen=True)
class AxleShare:
    """One axle: its number in the case, its station, the line's ordinate there (0 off the beam).

    ``side`` is that on which it stands of a jump.
    """

    axle: int
    weight: Fraction
    at: Fraction
    side: Side
    ordinate: Fraction
    standing: Standing

    @property
    def effect(self) -> Fraction:
        return self.weight * self.ordinate if self.standing == "counts" else Fraction(0)


@dataclass(frozen=True)
class StripShare:
    """What a strip adds: the stretches of the beam under it, in order, and their area.

    ``train`` and ``number`` say which strip of which train of the case it is.
    """

    train: int
    number: int
    strip: Strip
    stretches: tuple[Stretch, ...]
    area: Fraction

    @property
    def effect(self) -> Fraction:
        return self.strip.intensity * self.area


def axle_shares(
    line: Piecewise, case: Case, position: Position, sense: Sense
) -> tuple[AxleShare, ...]:
    """What each axle adds at one position.

    Args:
        line: the influence line.
        case: with ``relieving`` "neglect" an axle whose ordinate has not the sign of ``sense`` is
            neglected but keeps its place.
        position: where it stands.
        sense: 1 for the greatest, -1 for the least value of the effect.
    """
    return tuple(
        _axle_share(line, case, position.group_of(number), sense, number, axle, at)
        for number, (axle, at) in enumerate(zip(case.axles, position.stations, strict=True))
    )


def _axle_share(
    line: Piecewise,
    case: Case,
    group: Group,
    sense: Sense,
    number: int,
    axle: Axle,
    at: Fraction,
) -> AxleShare:
    standing: Standing = "counts"
    ordinate = Fraction(0)
    if not axle.acts:
        standing = "does not act"
    elif not _on_beam(line, at, group):
        standing = "off the beam"
    else:
        ordinate = line.value(at, group.side)
        if case.relieving == "neglect" and ordinate * sense < 0:
            standing = "neglected"
    return AxleShare(number, axle.weight.value, at, group.side, ordinate, standing)


def _on_beam(line: Piecewise, at: Fraction, group: Group) -> bool:
    start, end = line.breaks[0], line.breaks[-1]
    if group.ends_count:
        return start <= at <= end
    return start < at <= end if group.side == "left" else start <= at < end


def strip_shares(
    line: Piecewise, case: Case, position: Position, sense: Sense
) -> tuple[StripShare, ...]:
    """What each strip of each train adds; one that is off the beam adds nothing."""
    shares = []
    for train, number, strip, ends in _strips(case, position):
        start, end = _clipped(line, *ends)
        stretches: tuple[Stretch, ...] = ((start, end),) if start < end else ()
        if strip.broken and stretches:
            stretches = stretches_of_sign(line, sense, start, end)
        area = sum((line.integral(*one) for one in stretches), Fraction(0))
        shares.append(StripShare(train, number, strip, stretches, area))
    return tuple(shares)


def _strips(
    case: Case, position: Position
) -> Iterator[tuple[int, int, Strip, tuple[Fraction | None, Fraction | None]]]:
    """Every strip with its left and its right end, None where it has none."""
    first = 0
    for train, one in enumerate(case.trains):
        lead, rear = position.stations[first], position.stations[first + len(one.axles) - 1]
        first += len(one.axles)
        for number, strip in enumerate(one.strips):
            towards = 1 if (position.heading == "right") == strip.ahead else -1
            near = (lead if strip.ahead else rear) + towards * strip.start.value
            far = None if strip.length is None else near + towards * strip.length.value
            yield train, number, strip, (near, far) if towards > 0 else (far, near)


def _clipped(line: Piecewise, left: Fraction | None, right: Fraction | None) -> Stretch:
    """What of a stretch lies on the beam; both ends the same where nothing does."""
    first, last = line.breaks[0], line.breaks[-1]
    start = first if left is None else min(max(left, first), last)
    end = last if right is None else min(max(right, first), last)
    return start, end


def stretches_of_sign(
    line: Piecewise, sense: Sense, start: Fraction, end: Fraction
) -> tuple[Stretch, ...]:
    """The parts of a stretch where the line has the sign of ``sense``, neighbours joined."""
    return joined(
        [
            (max(low, start), min(high, end))
            for low, high, sign in line.signed_runs()
            if sign == sense and low < end and start < high
        ]
    )


def joined(runs: Sequence[Stretch]) -> tuple[Stretch, ...]:
    """Stretches in order, those that touch as one.

    >>> one, two, three, four = map(Fraction, (1, 2, 3, 4))
    >>> joined([(one, two), (two, three), (three + 1, four + 1)])[0]
    (Fraction(1, 1), Fraction(3, 1))
    """
    found: list[Stretch] = []
    for start, end in runs:
        if found and found[-1][1] == start:
            found[-1] = (found[-1][0], end)
        else:
            found.append((start, end))
    return tuple(found)


def trains_value(line: Piecewise, case: Case, position: Position, sense: Sense) -> Fraction:
    """The trains' effect at a position with allowances and factors, without distribution."""
    axles = sum((one.effect for one in axle_shares(line, case, position, sense)), Fraction(0))
    strips = sum((one.effect for one in strip_shares(line, case, position, sense)), Fraction(0))
    return axles * case.weighs("axles") + strips * case.weighs("trailing")


def rate(line: Piecewise, case: Case, position: Position, sense: Sense, side: Side) -> Fraction:
    """Change of the trains' static effect per unit of travel to the right, on one side of here.

    All axles and strips move together; jumps do not count in it. Source: the derivative of the sum
    of weight x ordinate, and of intensity x area.
    """
    groups = tuple(
        Group(one.first, one.last, side, False, one.anchor, one.mark) for one in position.groups
    )
    near = Position(position.heading, position.stations, groups)
    total = Fraction(0)
    for share in axle_shares(line, case, near, sense):
        if share.standing == "counts":
            slope = line.slope(share.at, side)
            leaving = sense * slope < 0 if side == "right" else sense * slope > 0
            if not (case.relieving == "neglect" and share.ordinate == 0 and leaving):
                total += share.weight * slope
    for _, _, strip, ends in _strips(case, position):
        for at, sign in zip(ends, (-1, 1), strict=True):
            if at is not None and _on_beam(line, at, Group(0, 0, side, False, None, None)):
                ordinate = line.value(at, side)
                if not strip.broken or ordinate * sense > 0:
                    total += sign * strip.intensity * ordinate
    return total


def axles_in_pairs(position: Position) -> Iterator[tuple[int, Fraction]]:
    """Each axle but the foremost by number, with its distance to the axle ahead."""
    for number, (ahead, behind) in enumerate(itertools.pairwise(position.stations), start=1):
        yield number, abs(ahead - behind)
