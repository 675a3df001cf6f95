"""From the calculation to everything found: lines, placements, envelopes, steps."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property

from calcpack.analysis import ELASTIC, Analysis, Line, analyse
from calcpack.derive.area_steps import area_group
from calcpack.derive.book import Book
from calcpack.derive.checks import SecondMethods, conversion_of, swept_value
from calcpack.derive.curvature_steps import curvature_group
from calcpack.derive.deflection_steps import deflection_group
from calcpack.derive.force_steps import write_force_method
from calcpack.derive.influence_steps import line_group
from calcpack.derive.kinds import DECIMALS, EFFECT_KIND
from calcpack.derive.load_steps import load_group
from calcpack.derive.placement_steps import PlacementWriter
from calcpack.derive.settlement_steps import settlement_group
from calcpack.derive.shape import Shape
from calcpack.derive.steps import AreaGroup, DeflectionGroup, Derivation, LineGroup, PlacementGroup
from calcpack.elastic.compatibility import ForceMethod, settled
from calcpack.envelopes import Along, along_beam, count_of_reports, target_of
from calcpack.exact.numbers import printed
from calcpack.model.loads import MovingLoad, Permanent
from calcpack.model.request import Calculation, Detail, Effect
from calcpack.moving.critical import governing
from calcpack.moving.governing import Governing
from calcpack.moving.kernels import LineSet
from calcpack.moving.placement import Sense
from calcpack.statics.influence import value_of
from calcpack.statics.system import System

SENSES: tuple[Sense, ...] = (1, -1)
MOST_ROWS = 200
"""Of a line with more rows the numbers are not printed."""
SWEEP, COARSE_SWEEP = 2000, 400
"""Steps of the sweep for an effect that is derived in full, and for one that is only tabulated."""
Report = Callable[[int, int, str], None]
"""Called with how many parts of the search are done, how many there are, and the one at hand."""


def unheard(done: int, parts: int, what: str) -> None:
    """A report that nobody listens to."""


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
class Solution(Analysis):
    """All that was found for one calculation; exact but for ``second`` and ``swept``."""

    calculation: Calculation
    placements: tuple[Placement, ...]
    settled: tuple[Settled, ...]
    along: Along
    derivation: Derivation

    @cached_property
    def proofs(self) -> Mapping[tuple[str, Effect, Sense], PlacementGroup]:
        """The derivation of each governing value that has one, by load, effect and sense."""
        return {
            (group.load.path, group.effect, group.governing.sense): group
            for group in self.derivation.groups
            if isinstance(group, PlacementGroup)
        }

    def detail_of(self, group: LineGroup | DeflectionGroup) -> Detail:
        """How much of a line is printed: as asked for, but of a long table not every number."""
        asked = self.calculation.detail_of(group.quantity)
        return "plan" if asked == "every equation" and len(group.rows) > MOST_ROWS else asked

    @cached_property
    def shortened(self) -> frozenset[str]:
        """The keys of the steps that are printed without their numbers."""
        return frozenset(
            row.step.key
            for group in self.derivation.groups
            if isinstance(group, LineGroup | DeflectionGroup)
            and self.detail_of(group) != "every equation"
            for row in group.rows
        )

    def extremes(self) -> Iterator[tuple[Placement, Governing, str]]:
        """Every governing value by load and effect, and the digits with which it is printed."""
        for placement in self.placements:
            for found in (placement.greatest, placement.least):
                group = self.proofs.get((placement.load.path, placement.effect, found.sense))
                if group is not None:
                    yield placement, found, self.derivation.result(group.steps[-1])
                else:
                    decimals = DECIMALS[EFFECT_KIND[placement.effect.kind]]
                    yield placement, found, printed(found.value, decimals)


def solve(calculation: Calculation, report: Report = unheard) -> Solution:
    """Compute a calculation.

    Args:
        calculation: what the engineer states.
        report: told of each part of the search before it begins.

    Raises:
        InputRefused: the beam is unstable, or the redundants stated do not suit it.
        Disagreement: a second method differs.
    """
    beam = calculation.beam
    found = analyse(
        beam,
        calculation.units,
        calculation.effects,
        calculation.redundants,
        bool(calculation.permanent),
    )
    progress = _Progress(calculation, report)
    placements = tuple(_placements(calculation, found.lines, found.second, progress))
    along = along_beam(calculation, progress)
    settled_cases = tuple(
        _settled(calculation, found.system, found.method, case) for case in calculation.permanent
    )
    return Solution(
        **vars(found),
        calculation=calculation,
        placements=placements,
        settled=settled_cases,
        along=along,
        derivation=_derive(Book(calculation), found, placements, settled_cases),
    )


class _Progress:
    """Counts the parts of the search."""

    def __init__(self, calculation: Calculation, report: Report) -> None:
        effects = len(calculation.moving) * len(calculation.effects)
        self.parts = effects + count_of_reports(calculation)
        self.done, self.report = 0, report

    def __call__(self, what: str) -> None:
        self.report(self.done, self.parts, what)
        self.done += 1


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


def _placements(
    calculation: Calculation, lines: Sequence[Line], second: SecondMethods, progress: _Progress
) -> Iterator[Placement]:
    """Every load on every line, each compared with a sweep."""
    if not lines:
        return
    targets = [target_of(calculation.beam, one.effect, one.line) for one in lines]
    base = LineSet([target.line for target in targets])
    for load in calculation.moving:
        found = [governing(targets, load, sense, base) for sense in SENSES]
        for line, target, greatest, least in zip(lines, targets, *found, strict=True):
            progress(f"{load.name}: {line.effect.label}")
            steps = SWEEP if calculation.detail_of(line.effect) != "table" else COARSE_SWEEP
            ordinates = second.stiffness[line.effect]
            swept = [swept_value(ordinates, target, load, one, steps) for one in (greatest, least)]
            yield Placement(load, line.effect, greatest, least, (swept[0], swept[1]))


def _derive(
    book: Book, found: Analysis, placements: Sequence[Placement], settled_cases: Sequence[Settled]
) -> Derivation:
    """Write every step of the package in its order."""
    elastic = write_force_method(book, found.method) if found.method else None
    for step in found.plan:
        line_group(book, step.unknown, step, found.unknowns[step.unknown])
    shapes: dict[Effect, Shape] = {}
    areas: dict[Effect, AreaGroup] = {}
    in_full = [line for line in found.lines if book.calculation.detail_of(line.effect) != "table"]
    for line in in_full:
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
        for settling in settled_cases:
            settlement_group(elastic, settling.case, down, settling.unknowns, settling.effects)
    by_effect = {line.effect: line.line for line in in_full}
    loads = {load.path: load_group(book, load) for load in book.calculation.moving}
    for one in placements:
        if one.effect in by_effect:
            for extreme in (one.greatest, one.least):
                effect = one.effect
                load, line_ = loads[one.load.path], by_effect[effect]
                PlacementWriter(book, load, areas[effect], shapes[effect], line_, extreme).write()
    return book.close()
