"""The position of a train that governs, found without stepping."""

from __future__ import annotations

import itertools
from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.loads import MovingLoad
from calcpack.moving.placement import AxleShare, Position, axle_shares, rate
from calcpack.moving.screen import Place, screened

Sense = Literal[1, -1]
NEAR_CANDIDATES = 5
WITHIN_ROUNDING = 1e-9
"""Floats may misjudge a value by this part of the greatest."""


@dataclass(frozen=True)
class Candidate:
    """A position looked at; axle number ``axle`` (from 0) stands at ``breakpoint``.

    ``breakpoint`` is None where no axle need stand at one: there the rate of change is zero, and
    the lead axle's station is given to nine decimals.
    """

    position: Position
    axle: int
    breakpoint: Fraction | None
    axles_effect: Fraction


@dataclass(frozen=True)
class Governing:
    """The greatest (or least) value of one effect under one load, and where the load then stands.

    Attributes:
        sense: 1 the greatest, -1 the least.
        value: (axles x (1 + allowance) + uniform) x distribution; never of the other sign, since
            the load may stay away.
        axles: static effect of the axles; uniform: that of the uniform load.
        chosen: the governing candidate; None where no position of the axles helps.
        shares: the axles there; ``loaded`` the stretches under uniform load, ``area`` theirs.
        ties: other positions with the same value.
        candidates: how many positions were looked at.
        near: the best candidates at other places, best first; the first is the next-worst.
        rates: change of the axles' effect per unit of travel to the right, left and right of here.
    """

    sense: Sense
    value: Fraction
    axles: Fraction
    uniform: Fraction
    area: Fraction
    loaded: tuple[tuple[Fraction, Fraction], ...]
    chosen: Candidate | None
    shares: tuple[AxleShare, ...]
    ties: tuple[Position, ...]
    candidates: int
    near: tuple[Candidate, ...]
    rates: tuple[Fraction, Fraction] | None

    @property
    def static(self) -> Fraction:
        return self.axles + self.uniform


def total_effect(load: MovingLoad, axles: Fraction, uniform: Fraction) -> Fraction:
    """Static parts to the value that counts: allowance on axles only, distribution on all."""
    return (axles * (1 + load.allowance) + uniform) * load.distribution


def governing(line: Piecewise, load: MovingLoad, sense: Sense) -> Governing:
    """Find the greatest (sense 1) or least (sense -1) effect of the load.

    The effect of a train is the sum of weight x ordinate over its axles, a piecewise polynomial
    of the lead axle's station. Its extremes lie at events, where an axle meets a breakpoint of
    the line, a zero of it (where it begins to be neglected) or an end of the beam, and for curved
    lines where the rate of change is zero between two events. At each event the train stands
    exactly there, or just before or behind; all its axles take the same side of their jumps.
    Floats choose the places; their values are exact. Uniform load stands on the parts of the line
    that have the sign of ``sense``.
    """
    places = screened(line, load, sense)
    candidates = sorted(
        _evaluated(line, load, sense, places),
        key=lambda one: (-sense * one.axles_effect, *_preference(one.position)),
    )
    best = candidates[0] if candidates and sense * candidates[0].axles_effect > 0 else None
    positive, negative = line.areas() if load.uniform else (Fraction(0), Fraction(0))
    area = positive if sense > 0 else negative
    runs = line.signed_runs() if load.uniform else ()
    axles = best.axles_effect if best else Fraction(0)
    uniform = load.uniform * area
    ties, near = _others(candidates, best)
    return Governing(
        sense,
        total_effect(load, axles, uniform),
        axles,
        uniform,
        area,
        _joined([(start, end) for start, end, sign in runs if sign == sense]),
        best,
        axle_shares(line, load, best.position, sense) if best else (),
        ties,
        len({(place.heading, place.lead_at) for place in places}),
        near,
        _rates(line, load, best.position, sense) if best else None,
    )


def _evaluated(
    line: Piecewise, load: MovingLoad, sense: Sense, places: list[Place]
) -> Iterator[Candidate]:
    """Exact values at the foremost places, as far down as one may still be among the best.

    ``places`` come with a bound on their value, greatest first: once enough exact values lie
    above a place's bound, neither it nor what follows matters.
    """
    found: list[float] = []
    for place in places:
        best = sorted(found, reverse=True)[NEAR_CANDIDATES:]
        if best and place.bound < best[0] - WITHIN_ROUNDING * (1 + abs(found[0])):
            return
        here = list(_at_place(line, load, sense, place))
        found.append(float(max(sense * one.axles_effect for one in here)))
        yield from here


def _at_place(line: Piecewise, load: MovingLoad, sense: Sense, place: Place) -> Iterator[Candidate]:
    sides: tuple[Side, ...] = ("left", "right")
    for side, ends_count in itertools.product(sides, (True, False)):
        position = Position(place.heading, place.lead_at, side, ends_count)
        shares = axle_shares(line, load, position, sense)
        effect = sum((share.effect for share in shares), Fraction(0))
        yield Candidate(position, place.axle, place.mark, effect)


def _rates(
    line: Piecewise, load: MovingLoad, position: Position, sense: Sense
) -> tuple[Fraction, Fraction]:
    return rate(line, load, position, sense, "left"), rate(line, load, position, sense, "right")


def _preference(position: Position) -> tuple[bool, bool, Fraction, bool]:
    """Among equal values: heading right, standing exactly there, the leftmost place, left side."""
    return (
        position.heading == "left",
        not position.ends_count,
        position.lead_at,
        position.side == "right",
    )


def _others(
    candidates: list[Candidate], best: Candidate | None
) -> tuple[tuple[Position, ...], tuple[Candidate, ...]]:
    """Other places with the same value, and the best places with a lesser one."""
    if best is None:
        return (), ()
    first_at: dict[tuple[str, Fraction], Candidate] = {}
    for one in candidates:
        first_at.setdefault((one.position.heading, one.position.lead_at), one)
    places = [one for one in first_at.values() if one is not best]
    ties = [one.position for one in places if one.axles_effect == best.axles_effect]
    near = [one for one in places if one.axles_effect != best.axles_effect]
    return tuple(ties), tuple(near[:NEAR_CANDIDATES])


def _joined(runs: list[tuple[Fraction, Fraction]]) -> tuple[tuple[Fraction, Fraction], ...]:
    joined: list[tuple[Fraction, Fraction]] = []
    for start, end in runs:
        if joined and joined[-1][1] == start:
            joined[-1] = (joined[-1][0], end)
        else:
            joined.append((start, end))
    return tuple(joined)
