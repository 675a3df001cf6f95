"""Extremes along the beam under one load, and what occurs together with each."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction

from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.loads import MovingLoad
from calcpack.model.request import Effect
from calcpack.moving.governing import Governing


@dataclass(frozen=True)
class Point:
    """One point of an envelope: the effect there, both its extremes.

    ``together`` are the effects that occur with them, by name: with the greatest, with the least.
    """

    effect: Effect
    greatest: Governing
    least: Governing
    together: Mapping[str, tuple[Fraction, Fraction]]


@dataclass(frozen=True)
class Envelope:
    """One kind of effect along the beam under one load, from left to right."""

    load: MovingLoad
    kind: str
    points: tuple[Point, ...]


@dataclass(frozen=True)
class Worst:
    """The worst load at one point: each extreme with the load that causes it."""

    effect: Effect
    greatest: tuple[MovingLoad, Governing]
    least: tuple[MovingLoad, Governing]


def worst_of(envelopes: Sequence[Envelope]) -> tuple[Worst, ...]:
    """The envelopes of one kind under several loads as one; of equal loads the first is named."""
    effects = dict.fromkeys(point.effect for one in envelopes for point in one.points)
    found = []
    for effect in effects:
        there = [
            (one.load, point) for one in envelopes for point in one.points if point.effect == effect
        ]
        greatest = max(there, key=lambda pair: pair[1].greatest.value)
        least = min(there, key=lambda pair: pair[1].least.value)
        found.append(
            Worst(
                effect,
                (greatest[0], greatest[1].greatest),
                (least[0], least[1].least),
            )
        )
    return tuple(sorted(found, key=lambda one: (one.effect.station, one.effect.face == "right")))


def caused(line: Piecewise, found: Governing, meets: Side | None = None) -> Fraction:
    """What a load that stands as it governs one effect causes for another.

    The same place, heading, gaps, neglected axles, loaded stretches and factors.

    Args:
        line: of the other effect.
        found: where the load stands.
        meets: the side on which a load stands of a jump of ``line``; None: as for its own line.
    """
    case = found.case
    if case is None:
        return Fraction(0)
    axles = sum(
        (
            one.weight * line.value(one.at, meets or one.side)
            for one in (*found.axles, *found.concentrated)
            if one.standing == "counts"
        ),
        Fraction(0),
    )
    strips = sum(
        (
            one.strip.intensity * line.integral(*stretch)
            for one in found.strips
            for stretch in one.stretches
        ),
        Fraction(0),
    )
    uniform = Fraction(0)
    if case.uniform is not None:
        areas = (line.integral(*stretch) for stretch in found.loaded)
        uniform = case.uniform.value * sum(areas, Fraction(0))
    return found.share * (
        axles * case.weighs("axles")
        + strips * case.weighs("trailing")
        + uniform * case.weighs("uniform")
    )


def with_governing(
    lines: Mapping[str, tuple[Piecewise, Side | None]], pair: Sequence[Governing]
) -> dict[str, tuple[Fraction, Fraction]]:
    """What occurs with the greatest and with the least of an effect, by name."""
    return {
        name: (caused(line, pair[0], side), caused(line, pair[1], side))
        for name, (line, side) in lines.items()
    }
