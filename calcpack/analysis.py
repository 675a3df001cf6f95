"""From a beam to the influence lines that are asked of it, compared with the second methods."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from calcpack.derive.checks import SecondMethods, compare_lines, conversion_of
from calcpack.elastic.compatibility import ForceMethod, deflection_line, force_method
from calcpack.elastic.redundants import redundants_by_rule
from calcpack.elastic.released import release
from calcpack.errors import InputRefused, Problem
from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import Beam
from calcpack.model.request import Effect
from calcpack.statics.influence import Cut, effect_line, unknown_lines
from calcpack.statics.plan import PlanStep, plan_of_solution
from calcpack.statics.stability import Classification, classify, is_stable
from calcpack.statics.system import System, cut_into_bodies

ELASTIC = ("deflection", "rotation")
"""Effects that need the stiffness itself, also on a determinate beam."""


@dataclass(frozen=True)
class Line:
    """The influence line of an effect; ``cut`` is None where the effect is an unknown itself."""

    effect: Effect
    line: Piecewise
    cut: Cut | None


@dataclass(frozen=True)
class Analysis:
    """What is known of a beam before any load is placed; exact but for ``second``."""

    system: System
    classification: Classification
    plan: tuple[PlanStep, ...]
    method: ForceMethod | None
    unknowns: Mapping[Effect, Piecewise]
    lines: tuple[Line, ...]
    second: SecondMethods


def analyse(
    beam: Beam,
    units: str,
    effects: Sequence[Effect],
    stated: Sequence[Effect] | None = None,
    settles: bool = False,
) -> Analysis:
    """Find the lines of the effects.

    Args:
        beam: the beam.
        units: "US" or "SI".
        effects: at key stations of the beam.
        stated: the redundants that the engineer stated; None: by rule.
        settles: whether supports settle, so that the stiffness is needed in any case.

    Raises:
        InputRefused: the beam is unstable, or the redundants stated do not suit it.
        Disagreement: a second method differs.
    """
    classification = classify(beam, cut_into_bodies(beam))
    system = cut_into_bodies(beam, choose_redundants(beam, classification, stated))
    plan = plan_of_solution(beam, system)
    acted_on = [one.station for one in effects if one.kind in ELASTIC]
    elastic = system.redundants or acted_on or settles
    method = force_method(release(beam, system, plan, acted_on)) if elastic else None
    unknowns = unknown_lines(beam, plan, method.lines if method else None)
    lines = tuple(_line(beam, units, system, method, unknowns, effect) for effect in effects)
    every_line = {**unknowns, **{line.effect: line.line for line in lines}}
    second = compare_lines(beam, units, every_line)
    return Analysis(system, classification, tuple(plan), method, unknowns, lines, second)


def choose_redundants(
    beam: Beam, classification: Classification, stated: Sequence[Effect] | None
) -> tuple[Effect, ...]:
    """The redundants that the engineer stated, else those by rule.

    Raises:
        InputRefused: those stated are not as many as the degree, or leave a mechanism.
    """
    degree = classification.degree
    if stated is None:
        return redundants_by_rule(beam, degree)
    said = ", ".join(one.label for one in stated) or "none"
    if len(stated) != degree:
        needs = f"must be {degree}, the degree to which the beam is indeterminate"
        raise InputRefused([Problem("beam.redundants", said, needs)])
    if not is_stable(cut_into_bodies(beam, stated)):
        needs = "must leave a stable beam when they are released"
        raise InputRefused([Problem("beam.redundants", said, needs)])
    return tuple(stated)


def _line(
    beam: Beam,
    units: str,
    system: System,
    method: ForceMethod | None,
    unknowns: Mapping[Effect, Piecewise],
    effect: Effect,
) -> Line:
    if effect.kind in ELASTIC and method is not None:
        return Line(effect, deflection_line(method, effect) * conversion_of(units, effect), None)
    return Line(effect, *effect_line(beam, system, unknowns, effect))
