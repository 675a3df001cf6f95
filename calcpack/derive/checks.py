"""Second methods beside the first: how far they may differ, and that they do not differ more."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from calcpack.errors import Disagreement
from calcpack.exact.piecewise import Piecewise, Side
from calcpack.exact.units import SYSTEMS, parse_unit
from calcpack.model.beam import Beam
from calcpack.model.loads import MovingLoad
from calcpack.model.request import Effect
from calcpack.moving.critical import Governing
from calcpack.second.kinematic import influence_line
from calcpack.second.stiffness import Ordinates, ordinates
from calcpack.second.sweep import swept

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
    scale = max(abs(float(line.value(at, side))) for at in stops for side in SIDES)
    scale += 1 if effect.kind not in ("deflection", "rotation") else 0
    worst = 0.0
    for side, values, slopes in (
        ("left", found.left, found.left_slopes),
        ("right", found.right, found.right_slopes),
    ):
        for at, value, slope in zip(stops, values, slopes, strict=True):
            face: Side = "left" if side == "left" else "right"
            worst = max(worst, abs(float(line.value(at, face)) - value))
            run = float(beam.length)
            worst = max(worst, abs(float(line.slope(at, face)) - slope) * run)
    if not worst <= WITHIN * scale:
        raise Disagreement(
            f"{effect.label}: the stiffness solution differs by {worst:.1e}, "
            f"more than {WITHIN:.0e} of the line's size"
        )


def swept_value(second: SecondMethods, effect: Effect, load: MovingLoad, found: Governing) -> float:
    """The sweep's value, which must not exceed ours nor fall short by more than its step allows.

    Raises:
        Disagreement: it does.
    """
    value, shortfall = swept(second.stiffness[effect], load, found.sense)
    ours, slack = float(found.value), ROUNDING * (1 + abs(float(found.value)))
    excess = found.sense * (value - ours)
    if not -shortfall - slack <= excess <= slack:
        raise Disagreement(
            f"{load.name}, {effect.label}: a sweep finds {value:.6g}, the search {ours:.6g}"
        )
    return value
