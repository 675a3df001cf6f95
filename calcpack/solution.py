"""From the calculation to everything found: classification, plan, lines, placements, steps."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction

from calcpack.derive.area_steps import area_group
from calcpack.derive.book import Book
from calcpack.derive.checks import SecondMethods, compare_lines, conversion_of, swept_value
from calcpack.derive.curvature_steps import curvature_group
from calcpack.derive.deflection_steps import deflection_group
from calcpack.derive.force_steps import write_force_method
from calcpack.derive.influence_steps import line_group
from calcpack.derive.placement_steps import placement_group, train_group
from calcpack.derive.settlement_steps import settlement_group
from calcpack.derive.shape import Shape
from calcpack.derive.steps import AreaGroup, Derivation
from calcpack.elastic.compatibility import ForceMethod, deflection_line, force_method, settled
from calcpack.elastic.redundants import redundants_by_rule
from calcpack.elastic.released import release
from calcpack.errors import InputRefused, Problem
from calcpack.exact.piecewise import Piecewise
from calcpack.model.loads import MovingLoad, Permanent
from calcpack.model.request import Calculation, Effect
from calcpack.moving.critical import Governing, governing
from calcpack.statics.influence import Cut, effect_line, unknown_lines, value_of
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
class Placement:
    """The greatest and the least value of an effect under a load, and what a sweep found."""

    load: MovingLoad
    effect: Effect
    greatest: Governing
    least: Governing
    swept: tuple[float, float]


@dataclass(frozen=True)
class Settled:
    """What a permanent case of settlements causes: unknowns, and effects of force or moment."""

    case: Permanent
    unknowns: Mapping[Effect, Fraction]
    effects: Mapping[Effect, Fraction]


@dataclass(frozen=True)
class Solution:
    """All that was found for one calculation; exact but for ``second`` and ``swept``."""

    calculation: Calculation
    system: System
    classification: Classification
    plan: tuple[PlanStep, ...]
    method: ForceMethod | None
    unknowns: Mapping[Effect, Piecewise]
    lines: tuple[Line, ...]
    placements: tuple[Placement, ...]
    settled: tuple[Settled, ...]
    second: SecondMethods
    derivation: Derivation


def solve(calculation: Calculation) -> Solution:
    """Compute a calculation.

    Raises:
        InputRefused: the beam is unstable, or the redundants stated do not suit it.
        Disagreement: a second method differs.
    """
    beam = calculation.beam
    classification = classify(beam, cut_into_bodies(beam))
    system = cut_into_bodies(beam, choose_redundants(calculation, classification))
    plan = plan_of_solution(beam, system)
    acted_on = [one.station for one in calculation.effects if one.kind in ELASTIC]
    elastic = system.redundants or acted_on or calculation.permanent
    method = force_method(release(beam, system, plan, acted_on)) if elastic else None
    unknowns = unknown_lines(beam, plan, method.lines if method else None)
    lines = tuple(
        _line(calculation, system, method, unknowns, effect) for effect in calculation.effects
    )
    every_line = {**unknowns, **{line.effect: line.line for line in lines}}
    second = compare_lines(beam, calculation.units, every_line)
    placements = tuple(
        _placement(load, line, second) for load in calculation.moving for line in lines
    )
    settled_cases = tuple(
        _settled(calculation, system, method, case) for case in calculation.permanent
    )
    derivation = derive(Book(calculation), plan, method, unknowns, lines, placements, settled_cases)
    return Solution(
        calculation,
        system,
        classification,
        plan,
        method,
        unknowns,
        lines,
        placements,
        settled_cases,
        second,
        derivation,
    )


def choose_redundants(
    calculation: Calculation, classification: Classification
) -> tuple[Effect, ...]:
    """The redundants that the engineer stated, else those by rule.

    Raises:
        InputRefused: those stated are not as many as the degree, or leave a mechanism.
    """
    beam, degree, stated = calculation.beam, classification.degree, calculation.redundants
    if stated is None:
        return redundants_by_rule(beam, degree)
    said = ", ".join(one.label for one in stated) or "none"
    if len(stated) != degree:
        needs = f"must be {degree}, the degree to which the beam is indeterminate"
        raise InputRefused([Problem("beam.redundants", said, needs)])
    if not is_stable(cut_into_bodies(beam, stated)):
        needs = "must leave a stable beam when they are released"
        raise InputRefused([Problem("beam.redundants", said, needs)])
    return stated


def _line(
    calculation: Calculation,
    system: System,
    method: ForceMethod | None,
    unknowns: Mapping[Effect, Piecewise],
    effect: Effect,
) -> Line:
    if effect.kind in ELASTIC and method is not None:
        line = deflection_line(method, effect) * conversion_of(calculation.units, effect)
        return Line(effect, line, None)
    return Line(effect, *effect_line(calculation.beam, system, unknowns, effect))


def _settled(
    calculation: Calculation, system: System, method: ForceMethod | None, case: Permanent
) -> Settled:
    assert method is not None
    down = conversion_of(calculation.units, Effect("deflection", "", Fraction(0)))
    movements = {
        Effect("reaction", one.at, one.station)
        if one.down
        else Effect("moment reaction", one.at, one.station): one.down / down or one.turn
        for one in case.settlements
    }
    unknowns = settled(method, movements)
    wanted = [effect for effect in calculation.effects if effect.kind not in ELASTIC]
    values = {one: value_of(calculation.beam, system, unknowns, one) for one in wanted}
    return Settled(case, unknowns, values)


def _placement(load: MovingLoad, line: Line, second: SecondMethods) -> Placement:
    greatest, least = governing(line.line, load, 1), governing(line.line, load, -1)
    swept = (
        swept_value(second, line.effect, load, greatest),
        swept_value(second, line.effect, load, least),
    )
    return Placement(load, line.effect, greatest, least, swept)


def derive(
    book: Book,
    plan: Sequence[PlanStep],
    method: ForceMethod | None,
    unknowns: Mapping[Effect, Piecewise],
    lines: Sequence[Line],
    placements: Sequence[Placement],
    settled_cases: Sequence[Settled],
) -> Derivation:
    """Write every step of the package in its order."""
    elastic = write_force_method(book, method) if method else None
    for step in plan:
        line_group(book, step.unknown, step, unknowns[step.unknown])
    shapes: dict[Effect, Shape] = {}
    areas: dict[Effect, AreaGroup] = {}
    for line in lines:
        if line.cut is not None:
            line_group(book, line.effect, line.cut, line.line)
        if elastic is not None and line.effect.kind in ELASTIC:
            factor = conversion_of(book.calculation.units, line.effect)
            shape = deflection_group(elastic, line.effect, line.line, factor)
        elif elastic is not None and line.line.degree > 1:
            shape = curvature_group(elastic, line.effect, line.line)
        else:
            shape = Shape(line.effect, {})
        shapes[line.effect] = shape
        areas[line.effect] = area_group(book, shape, line.line)
    if elastic is not None:
        down = conversion_of(book.calculation.units, Effect("deflection", "", Fraction(0)))
        for one in settled_cases:
            settlement_group(elastic, one.case, down, one.unknowns, one.effects)
    trains = {load.path: train_group(book, load) for load in book.calculation.moving}
    for found in placements:
        for extreme in (found.greatest, found.least):
            train, shape = trains[found.load.path], shapes[found.effect]
            placement_group(book, train, areas[found.effect], shape, extreme)
    return book.close()
