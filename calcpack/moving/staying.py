"""What of a load does not travel: uniform load, and forces that stand anywhere."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.loads import Case
from calcpack.moving.placement import AxleShare, Sense, Stretch
from calcpack.moving.target import Target


@dataclass(frozen=True)
class Staying:
    """What of a case does not travel, and its value with allowances and factors."""

    forces: tuple[AxleShare, ...]
    loaded: tuple[Stretch, ...]
    area: Fraction
    value: Fraction


NOTHING_STAYS = Staying((), (), Fraction(0), Fraction(0))


def staying(case: Case, target: Target, sense: Sense) -> Staying:
    """The forces and the uniform load of a case where they are worst for the target."""
    forces = _concentrated(case, target, sense)
    value = sum((one.effect for one in forces), Fraction(0)) * case.weighs("axles")
    loaded: tuple[Stretch, ...] = ()
    area = Fraction(0)
    if case.uniform is not None:
        loaded, area = target.raised_on(sense)
        value += case.uniform.value * area * case.weighs("uniform")
    return Staying(forces, loaded, area, value)


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
