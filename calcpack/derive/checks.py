"""Second methods beside the first: how far they may differ, and that they do not differ more."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Literal

from calcpack.errors import Disagreement
from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import Beam
from calcpack.model.loads import MovingLoad
from calcpack.model.request import Effect
from calcpack.moving.critical import Governing
from calcpack.second.kinematic import influence_line
from calcpack.second.stiffness import Ordinates, ordinates
from calcpack.second.sweep import swept

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


def compare_lines(beam: Beam, lines: Mapping[Effect, Piecewise]) -> SecondMethods:
    """Compare every line with the kinematic statement (exactly) and the stiffness solution.

    Raises:
        Disagreement: a line differs by more than rounding can explain.
    """
    effects = tuple(lines)
    by_stiffness = dict(zip(effects, ordinates(beam, effects), strict=True))
    agreements = []
    for effect, kinematic in zip(effects, influence_line(beam, effects), strict=True):
        line = lines[effect]
        if kinematic != line:
            raise Disagreement(f"{effect.label}: the kinematic statement gives another line")
        found = by_stiffness[effect]
        stops = [station.at for station in beam.stations]
        exact = [(float(line.left(at)), float(line.right(at))) for at in stops]
        scale = 1 + max(abs(value) for pair in exact for value in pair)
        worst = max(
            max(abs(left - one), abs(right - two))
            for (left, right), one, two in zip(exact, found.left, found.right, strict=True)
        )
        if not worst <= WITHIN * scale:
            raise Disagreement(
                f"{effect.label}: the stiffness solution differs by {worst:.1e}, "
                f"more than {WITHIN:.0e} of the line's size"
            )
        agreements.append(Agreement(effect, "kinematic", 0.0))
        agreements.append(Agreement(effect, "stiffness", WITHIN))
    return SecondMethods(tuple(agreements), by_stiffness)


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
