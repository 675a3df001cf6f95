"""The position of a train that governs, found without stepping."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from calcpack.exact.piecewise import Piecewise
from calcpack.model.loads import Heading, MovingLoad
from calcpack.moving.placement import AxleShare, Position, axle_shares, rate

Sense = Literal[1, -1]
NEAR_CANDIDATES = 5


@dataclass(frozen=True)
class Candidate:
    """An event of the search: axle number ``axle`` (from 0) stands at ``breakpoint``."""

    position: Position
    axle: int
    breakpoint: Fraction
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
        candidates: how many events were looked at.
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
    """Find the greatest (sense 1) or least (sense -1) effect of the load exactly.

    The effect of a train is the sum of weight x ordinate over its axles, a piecewise linear
    function of the lead axle's station for a line of straight pieces. Its extremes lie at events,
    where an axle meets a breakpoint of the line, a zero of it (where it begins to be neglected) or
    an end of the beam. At each event the train stands exactly there, or just before or behind;
    all its axles take the same side of their jumps. Uniform load stands on the parts of the line
    that have the sign of ``sense``.

    Raises:
        ValueError: the line has curved pieces.
    """
    candidates = sorted(
        _candidates(line, load, sense),
        key=lambda one: (-sense * one.axles_effect, *_preference(one.position)),
    )
    area = line.areas()[0 if sense > 0 else 1] if load.uniform else Fraction(0)
    loaded = [run[:2] for run in line.signed_runs() if run[2] == sense] if load.uniform else []
    best = candidates[0] if candidates and sense * candidates[0].axles_effect > 0 else None
    axles = best.axles_effect if best else Fraction(0)
    uniform = load.uniform * area
    places = {(one.position.heading, one.position.lead_at) for one in candidates}
    return Governing(
        sense,
        total_effect(load, axles, uniform),
        axles,
        uniform,
        area,
        _joined(loaded),
        best,
        axle_shares(line, load, best.position, sense) if best else (),
        _ties(candidates, best),
        len(places),
        _near(candidates, best),
        (
            rate(line, load, best.position, sense, "left"),
            rate(line, load, best.position, sense, "right"),
        )
        if best
        else None,
    )


def _candidates(line: Piecewise, load: MovingLoad, sense: Sense) -> Iterator[Candidate]:
    if line.degree > 1:
        raise ValueError("the search is exact for straight pieces only")
    marks = set(line.breaks)
    if load.relieving == "neglect":
        marks.update(line.zeros())
    seen: set[tuple[Heading, Fraction]] = set()
    for heading in load.headings:
        sign = 1 if heading == "right" else -1
        for axle, offset in enumerate(load.offsets):
            for mark in sorted(marks):
                lead_at = mark + sign * offset
                if (heading, lead_at) in seen:
                    continue
                seen.add((heading, lead_at))
                for position in (
                    Position(heading, lead_at, "left"),
                    Position(heading, lead_at, "right"),
                    Position(heading, lead_at, "left", ends_count=False),
                    Position(heading, lead_at, "right", ends_count=False),
                ):
                    shares = axle_shares(line, load, position, sense)
                    effect = sum((share.effect for share in shares), Fraction(0))
                    yield Candidate(position, axle, mark, effect)


def _preference(position: Position) -> tuple[bool, bool, Fraction, bool]:
    """Among equal values: heading right, standing exactly there, the leftmost place, left side."""
    return (
        position.heading == "left",
        not position.ends_count,
        position.lead_at,
        position.side == "right",
    )


def _ties(candidates: list[Candidate], best: Candidate | None) -> tuple[Position, ...]:
    if best is None:
        return ()
    places: dict[tuple[Heading, Fraction], Position] = {}
    for one in candidates:
        if one.axles_effect != best.axles_effect:
            break
        places.setdefault((one.position.heading, one.position.lead_at), one.position)
    return tuple(places.values())[1:]


def _near(candidates: list[Candidate], best: Candidate | None) -> tuple[Candidate, ...]:
    if best is None:
        return ()
    places: dict[tuple[Heading, Fraction], Candidate] = {}
    for one in candidates:
        if one.axles_effect != best.axles_effect:
            places.setdefault((one.position.heading, one.position.lead_at), one)
    tied = {(best.position.heading, best.position.lead_at)}
    tied.update((one.heading, one.lead_at) for one in _ties(candidates, best))
    near = [one for place, one in places.items() if place not in tied]
    return tuple(near[:NEAR_CANDIDATES])


def _joined(runs: list[tuple[Fraction, Fraction]]) -> tuple[tuple[Fraction, Fraction], ...]:
    joined: list[tuple[Fraction, Fraction]] = []
    for start, end in runs:
        if joined and joined[-1][1] == start:
            joined[-1] = (joined[-1][0], end)
        else:
            joined.append((start, end))
    return tuple(joined)
