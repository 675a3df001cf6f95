"""Second methods beside the first: how far they may differ, and that they do not differ more."""

from __future__ import annotations

from bisect import bisect_left, bisect_right
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

import numpy as np

from calcpack.errors import Disagreement
from calcpack.exact.piecewise import Piecewise, Side
from calcpack.exact.units import SYSTEMS, parse_unit
from calcpack.model.beam import Beam
from calcpack.model.loads import MovingLoad
from calcpack.model.request import Effect
from calcpack.moving.governing import Governing
from calcpack.moving.target import Target, applies
from calcpack.second.kinematic import influence_line
from calcpack.second.stiffness import Floats, Ordinates, ordinates
from calcpack.second.sweep import swept_case

SIDES: tuple[Side, ...] = ("left", "right")
WITHIN = 1e-9
"""Bound on |difference| / (1 + largest ordinate) between the stiffness solution and ours."""

ROUNDING = 1e-9
"""What a float sweep may exceed the exact value by, relative to it."""


@dataclass(frozen=True)
class Agreement:
    """A second method agrees for one effect within a bound (0: exactly)."""

    effect: Effect
    method: Literal["kinematic", "stiffness"]
    within: float


@dataclass(frozen=True)
class SecondMethods:
    """What the second methods found: agreements, and the stiffness ordinates by effect."""

    agreements: tuple[Agreement, ...]
    stiffness: Mapping[Effect, Ordinates]


def conversion_of(units: str, effect: Effect) -> Fraction:
    """How many of the calculation's units of deflection make its unit of length; 1 for others.

    >>> conversion_of("SI", Effect("deflection", "1", Fraction(2)))
    Fraction(1000, 1)
    """
    if effect.kind != "deflection":
        return Fraction(1)
    system = SYSTEMS[units]
    return parse_unit(system["length"])[0] / parse_unit(system["deflection"])[0]


def compare_lines(beam: Beam, units: str, lines: Mapping[Effect, Piecewise]) -> SecondMethods:
    """Compare every line with the kinematic statement (exactly) and the stiffness solution.

    Raises:
        Disagreement: a line differs by more than rounding can explain.
    """
    effects = tuple(lines)
    factors = {effect: conversion_of(units, effect) for effect in effects}
    by_stiffness = {
        effect: found * float(factors[effect])
        for effect, found in zip(effects, ordinates(beam, effects), strict=True)
    }
    agreements = []
    for effect, kinematic in zip(effects, influence_line(beam, effects), strict=True):
        line = lines[effect]
        if kinematic * factors[effect] != line:
            raise Disagreement(f"{effect.label}: the kinematic statement gives another line")
        _compare_stiffness(beam, effect, line, by_stiffness[effect])
        agreements.append(Agreement(effect, "kinematic", 0.0))
        agreements.append(Agreement(effect, "stiffness", WITHIN))
    return SecondMethods(tuple(agreements), by_stiffness)


def _compare_stiffness(beam: Beam, effect: Effect, line: Piecewise, found: Ordinates) -> None:
    stops = [station.at for station in beam.stations]
    run = float(beam.length)
    ours = {side: _in_floats(line, stops, side) for side in SIDES}
    scale = max(float(np.abs(values).max()) for values, _ in ours.values())
    scale += 1 if effect.kind not in ("deflection", "rotation") else 0
    theirs = {
        "left": (found.left, found.left_slopes),
        "right": (found.right, found.right_slopes),
    }
    worst = 0.0
    for side, (values, slopes) in ours.items():
        other, other_slopes = theirs[side]
        worst = max(worst, float(np.abs(values - other).max()))
        worst = max(worst, float(np.abs(slopes - other_slopes).max()) * run)
    if not worst <= WITHIN * scale:
        raise Disagreement(
            f"{effect.label}: the stiffness solution differs by {worst:.1e}, "
            f"more than {WITHIN:.0e} of the line's size"
        )


def _in_floats(line: Piecewise, stops: Sequence[Fraction], side: Side) -> tuple[Floats, Floats]:
    """The line and its slope on one side of each stop; the pieces are chosen exactly."""
    find = bisect_left if side == "left" else bisect_right
    index = [min(max(find(line.breaks, at) - 1, 0), len(line.pieces) - 1) for at in stops]
    powers = 1 + line.degree
    pieces = np.zeros((len(line.pieces), powers))
    for row, piece in zip(pieces, line.pieces, strict=True):
        row[: len(piece)] = [float(value) for value in piece]
    t = np.array([float(at - line.breaks[n]) for at, n in zip(stops, index, strict=True)])
    own = pieces[index]
    values, slopes = np.zeros(len(stops)), np.zeros(len(stops))
    for power in reversed(range(powers)):
        slopes = slopes * t + values
        values = values * t + own[:, power]
    return values, slopes


def swept_value(
    ordinates: Ordinates, target: Target, load: MovingLoad, found: Governing, steps: int
) -> float:
    """The sweep's value, which must not exceed ours nor fall short by more than its step allows.

    Args:
        ordinates: of the effect, by the stiffness solution.
        target: the effect, and what decides which cases are for it.
        load: swept case by case.
        found: what the search found.
        steps: of the sweep, along the beam and the train.

    Raises:
        Disagreement: it does.
    """
    spans = [(float(start), float(end)) for start, end in target.spans]
    value = possible = 0.0
    for case in load.cases:
        if applies(case, load, target, found.sense):
            reached, short = swept_case(ordinates, case, found.sense, spans, steps)
            value = max(value, found.sense * reached)
            possible = max(possible, found.sense * reached + short)
    share = float(found.share)
    value, possible = value * share, possible * share
    ours = found.sense * float(found.value)
    slack = ROUNDING * (1 + ours)
    if not value - slack <= ours <= possible + slack:
        raise Disagreement(
            f"{load.name}, {target.kind} at {float(target.at):g}: a sweep finds "
            f"{found.sense * value:.6g}, the search {found.sense * ours:.6g}"
        )
    return found.sense * value
