"""The effect of a train that stands at one place."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.loads import Heading, MovingLoad

Standing = Literal["counts", "neglected", "off the beam"]


@dataclass(frozen=True)
class Position:
    """Where a train stands.

    Attributes:
        heading: the way it travels; the lead axle is the foremost.
        lead_at: station of the lead axle.
        side: every axle at a jump of the line stands just on this side of it.
        ends_count: True where the train stands exactly here, so that an axle at the very end of
            the beam counts; False just before that, an axle at an end being still (or already)
            off the beam as ``side`` says.
    """

    heading: Heading
    lead_at: Fraction
    side: Side
    ends_count: bool = True


@dataclass(frozen=True)
class AxleShare:
    """One axle: its weight, its station, the line's ordinate there (0 off the beam)."""

    weight: Fraction
    at: Fraction
    ordinate: Fraction
    standing: Standing

    @property
    def effect(self) -> Fraction:
        return self.weight * self.ordinate if self.standing == "counts" else Fraction(0)


def axle_stations(load: MovingLoad, heading: Heading, lead_at: Fraction) -> tuple[Fraction, ...]:
    """The station of each axle, from the lead axle back."""
    sign = 1 if heading == "right" else -1
    return tuple(lead_at - sign * offset for offset in load.offsets)


def axle_shares(
    line: Piecewise, load: MovingLoad, position: Position, sense: Literal[1, -1]
) -> tuple[AxleShare, ...]:
    """What each axle adds at one position.

    Args:
        line: the influence line.
        load: the train; with ``relieving = "neglect"`` an axle whose ordinate has not the sign of
            ``sense`` is neglected but keeps its place.
        position: where it stands.
        sense: 1 for the greatest, -1 for the least value of the effect.
    """
    shares = []
    stations = axle_stations(load, position.heading, position.lead_at)
    for axle, at in zip(load.axles, stations, strict=True):
        if not _on_beam(line, at, position):
            shares.append(AxleShare(axle.weight, at, Fraction(0), "off the beam"))
            continue
        ordinate = line.value(at, position.side)
        relieves = load.relieving == "neglect" and ordinate * sense < 0
        shares.append(AxleShare(axle.weight, at, ordinate, "neglected" if relieves else "counts"))
    return tuple(shares)


def rate(
    line: Piecewise,
    load: MovingLoad,
    position: Position,
    sense: Literal[1, -1],
    side: Side,
) -> Fraction:
    """Change of the axles' static effect per unit of travel to the right, on one side of here.

    Jumps do not count in it. Source: the derivative of the sum of weight x ordinate.
    """
    near = Position(position.heading, position.lead_at, side, ends_count=False)
    total = Fraction(0)
    for share in axle_shares(line, load, near, sense):
        if share.standing == "counts":
            slope = line.slope(share.at, side)
            leaving = sense * slope < 0 if side == "right" else sense * slope > 0
            if not (load.relieving == "neglect" and share.ordinate == 0 and leaving):
                total += share.weight * slope
    return total


def _on_beam(line: Piecewise, at: Fraction, position: Position) -> bool:
    start, end = line.breaks[0], line.breaks[-1]
    if position.ends_count:
        return start <= at <= end
    return start < at <= end if position.side == "left" else start <= at < end
