"""From the calculation to everything found: classification, plan, lines, placements, steps."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from calcpack.derive.area_steps import area_group
from calcpack.derive.book import Book
from calcpack.derive.checks import SecondMethods, compare_lines, swept_value
from calcpack.derive.influence_steps import line_group
from calcpack.derive.placement_steps import placement_group, train_group
from calcpack.derive.steps import Derivation
from calcpack.errors import InputRefused, Problem
from calcpack.exact.piecewise import Piecewise
from calcpack.model.loads import MovingLoad
from calcpack.model.request import Calculation, Effect
from calcpack.moving.critical import Governing, governing
from calcpack.statics.influence import Cut, effect_line, unknown_lines
from calcpack.statics.plan import PlanStep, plan_of_solution
from calcpack.statics.stability import Classification, classify
from calcpack.statics.system import System, cut_into_bodies


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
class Solution:
    """All that was found for one calculation; exact but for ``second`` and ``swept``."""

    calculation: Calculation
    system: System
    classification: Classification
    plan: tuple[PlanStep, ...]
    unknowns: Mapping[Effect, Piecewise]
    lines: tuple[Line, ...]
    placements: tuple[Placement, ...]
    second: SecondMethods
    derivation: Derivation


def solve(calculation: Calculation) -> Solution:
    """Compute a calculation.

    Raises:
        InputRefused: the beam is unstable, or not one that this release computes.
        Disagreement: a second method differs.
    """
    beam = calculation.beam
    system = cut_into_bodies(beam)
    classification = classify(beam, system)
    if classification.degree:
        said = f"indeterminate to degree {classification.degree}: {classification.reason}"
        raise InputRefused([Problem("beam", said, "not computed by this release")])
    plan = plan_of_solution(beam, system)
    unknowns = unknown_lines(beam, plan)
    lines = tuple(
        Line(effect, *effect_line(beam, system, unknowns, effect)) for effect in calculation.effects
    )
    every_line = {**unknowns, **{line.effect: line.line for line in lines}}
    second = compare_lines(beam, every_line)
    placements = tuple(
        _placement(load, line, second) for load in calculation.moving for line in lines
    )
    book = Book(calculation)
    for step in plan:
        line_group(book, step.unknown, step, unknowns[step.unknown])
    areas = {}
    for line in lines:
        if line.cut is not None:
            line_group(book, line.effect, line.cut, line.line)
        areas[line.effect] = area_group(book, line.effect, line.line)
    trains = {load.path: train_group(book, load) for load in calculation.moving}
    for found in placements:
        for extreme in (found.greatest, found.least):
            train = trains[found.load.path]
            placement_group(book, train, areas[found.effect], every_line[found.effect], extreme)
    return Solution(
        calculation,
        system,
        classification,
        plan,
        unknowns,
        lines,
        placements,
        second,
        book.close(),
    )


def _placement(load: MovingLoad, line: Line, second: SecondMethods) -> Placement:
    greatest, least = governing(line.line, load, 1), governing(line.line, load, -1)
    swept = (
        swept_value(second, line.effect, load, greatest),
        swept_value(second, line.effect, load, least),
    )
    return Placement(load, line.effect, greatest, least, swept)
