"""Stability and plan of solution; unknowns and influence lines, step by step."""

from __future__ import annotations

import itertools
from collections.abc import Iterator
from fractions import Fraction

from calcpack.derive.kinds import AREA_KIND, DECIMALS, LINE_KIND
from calcpack.derive.steps import (
    AreaGroup,
    DeflectionGroup,
    LineGroup,
    Row,
    StationGroup,
    Step,
    StepGroup,
)
from calcpack.exact.piecewise import Piecewise
from calcpack.exact.units import SYSTEMS
from calcpack.model.request import Detail, Effect
from calcpack.sheets.blocks import (
    Beside,
    Block,
    Column,
    Digits,
    Equation,
    Figure,
    Heading,
    Paragraph,
    Table,
    Text,
    Value,
)
from calcpack.sheets.bulk import line_tables
from calcpack.sheets.elastic import group_blocks
from calcpack.sheets.figures import line_figure
from calcpack.sheets.free_body import free_body_figure, free_body_of
from calcpack.sheets.tables import effect_title, result_of, step_table, with_symbols
from calcpack.solution import Solution
from calcpack.statics.influence import Cut
from calcpack.statics.plan import PlanStep, equation_in_words
from calcpack.statics.system import key_of, symbol_of

BODY_WIDTH = 74.0
"""Width of a free body beside its equations, in mm."""
SPANS_ACROSS = 6
"""Spans beside each other in a table of tenth points."""
DRAWN_DECIMALS = 6
"""Most decimals of an ordinate in a figure."""


def model_blocks(solution: Solution) -> tuple[Block, ...]:
    """Stability, degree and the plan in words."""
    beam = solution.calculation.beam
    found = solution.classification
    columns = (
        Column("step", "right"),
        Column("finds"),
        Column("free body", width=2),
        Column("equation", width=2),
        Column("why", width=5),
    )
    rows = tuple(
        (
            (str(number),),
            (symbol_of(step.unknown),),
            (step.equation.name,),
            (equation_in_words(beam, step.equation),),
            with_symbols(solution, step.reason),
        )
        for number, step in enumerate(solution.plan, start=1)
    )
    derived: list[Block] = []
    for group in solution.derivation.groups:
        if isinstance(group, StationGroup):
            derived = [
                Heading(2, ("Stations",), group.number),
                step_table(solution, group.steps),
            ]
    return (
        Heading(1, ("Model",)),
        Paragraph(with_symbols(solution, f"The beam is {found.kind}: {found.reason}.")),
        Heading(2, ("Plan of solution",)),
        Paragraph(
            (
                "Settled before any load is placed, and the same wherever the load stands. Each "
                "equation holds a single unknown not yet found.",
            )
        ),
        Table(columns, rows),
        *derived,
    )


def unknown_blocks(solution: Solution) -> tuple[Block, ...]:
    """The plan's equations one after the other."""
    blocks: list[Block] = [Heading(1, ("Unknowns",))]
    for group in solution.derivation.groups:
        if isinstance(group, LineGroup) and isinstance(group.source, PlanStep):
            blocks += _derived(solution, group, group.source.reason, solution.detail_of(group))
    return tuple(blocks)


def line_blocks(solution: Solution) -> tuple[Block, ...]:
    """For each effect what finds its line, in the order of the derivation, then the line drawn."""
    blocks: list[Block] = [Heading(1, ("Influence lines",))]
    groups = iter(solution.derivation.groups)
    planned = len(solution.plan)
    for group in groups:
        planned -= isinstance(group, LineGroup)
        if not planned:
            break
    rows: dict[Effect, tuple[Step, ...]] = {
        group.quantity: tuple(row.step for row in group.rows)
        for group in solution.derivation.groups
        if isinstance(group, LineGroup | DeflectionGroup)
    }
    for group in groups:
        if isinstance(group, LineGroup) and isinstance(group.source, Cut):
            reason = (
                f"Cut at {group.quantity.at} and keep the part on the {group.source.keeps}, "
                "where no more forces act than on the other; the unknowns are known by now."
            )
            blocks += _derived(solution, group, reason, solution.detail_of(group))
        elif isinstance(group, StepGroup):
            blocks += group_blocks(solution, group)
        elif isinstance(group, DeflectionGroup):
            blocks += _deflection(solution, group)
        elif isinstance(group, AreaGroup):
            steps = rows.get(group.effect) or _redundant_rows(solution, group.effect)
            blocks += _drawn(solution, group, steps)
    return (*blocks, *line_tables(solution))


def _redundant_rows(solution: Solution, effect: Effect) -> tuple[Step, ...]:
    root = f"redundants/{key_of(effect)}/at="
    return tuple(step for step in solution.derivation.steps if step.key.startswith(root))


def _deflection(solution: Solution, group: DeflectionGroup) -> Iterator[Block]:
    yield Heading(2, (effect_title(group.quantity), ": ", symbol_of(group.quantity)), group.number)
    yield Equation(group.statement, group.statement.condition)
    yield ordinate_table(solution, group.quantity, group.rows, solution.detail_of(group))


def _derived(solution: Solution, group: LineGroup, reason: str, detail: Detail) -> Iterator[Block]:
    beam = solution.calculation.beam
    equation = group.source.equation
    unit = SYSTEMS[solution.calculation.units]["length"]
    yield Heading(2, (effect_title(group.quantity), ": ", symbol_of(group.quantity)), group.number)
    if detail != "table":
        body = free_body_of(beam, equation, group.centre)
        sense = "up +" if equation.about is None else "clockwise +"
        what = equation_in_words(beam, equation)
        equations = (
            Equation(group.balance, f"{what[0].upper()}{what[1:]}, {sense}"),
            *(Equation(step, step.condition) for step in group.forms),
        )
        yield Paragraph(with_symbols(solution, reason), leads=True)
        yield Beside(equations, Figure(free_body_figure(body, unit, BODY_WIDTH)))
    yield ordinate_table(solution, group.quantity, group.rows, detail)


def ordinate_table(
    solution: Solution, quantity: Effect, found: tuple[Row, ...], detail: Detail
) -> Table:
    """A line's value at every key station, with its numbers, beside the stiffness solution's."""
    units = SYSTEMS[solution.calculation.units]
    second = solution.second.stiffness[quantity]
    stations = [station.at for station in solution.calculation.beam.stations]
    unit = units[LINE_KIND[quantity.kind]]
    in_full = detail == "every equation"
    columns = (
        Column("step", "right"),
        Column("load at", width=2),
        Column("on body"),
        *((Column("with numbers", width=5),) if in_full else ()),
        Column("result", "right", unit=unit),
        Column("stiffness", "right"),
    )
    rows = []
    for row in found:
        result = result_of(solution, row.step)
        index = stations.index(row.at)
        other = (second.right if row.side == "right" else second.left)[index]
        where = f"{row.place}, just {row.side}" if row.side else row.place
        rows.append(
            (
                (row.step.id,),
                (where,),
                ("yes" if row.loaded else "no",),
                *((_numbers(row.step),) if in_full else ()),
                (result,),
                (Value(Fraction(float(other)), result.decimals or 4),),
            )
        )
    return Table(columns, tuple(rows), ticked=True)


def _numbers(step: Step) -> Text:
    if not step.origins and step.value == 0:
        return ("no load on this part and nothing else in the equation",)
    return (Digits(step.formula),)


def _drawn(solution: Solution, areas: AreaGroup, ordinates: tuple[Step, ...]) -> Iterator[Block]:
    calculation, effect = solution.calculation, areas.effect
    unit = SYSTEMS[calculation.units][LINE_KIND[effect.kind]]
    line = next(found.line for found in solution.lines if found.effect == effect)
    most = max(result_of(solution, step).decimals or 0 for step in ordinates)
    decimals = min(most, DRAWN_DECIMALS)
    yield Heading(2, ("Line and areas: ", effect_title(effect)), areas.number)
    between = "straight" if line.degree < 2 else "a cubic, curved as found above,"
    words = (
        f"Ordinates from steps {ordinates[0].id} to {ordinates[-1].id}; between them the line is "
        f"{between} and its areas end at the zeros."
    )
    yield Paragraph((words,), leads=True)
    places = result_of(solution, areas.positive).decimals or DECIMALS[AREA_KIND[effect.kind]]
    title = f"{effect.kind} at {effect.at}"
    yield Figure(
        line_figure(calculation.beam, line, title, unit, decimals, calculation.units, places)
    )
    yield step_table(solution, areas.steps)
    if line.degree > 1:
        yield from _tenths(solution, effect, line, most)


def _tenths(solution: Solution, effect: Effect, line: Piecewise, decimals: int) -> Iterator[Block]:
    """The curved line at the tenth points of every span, from the left support to the right."""
    stops = [support.at for support in solution.calculation.beam.supports]
    spans = list(itertools.pairwise(stops))
    yield Paragraph((f"{effect_title(effect)} at the tenth points of the spans:",), leads=True)
    for first in range(0, len(spans), SPANS_ACROSS):
        across = spans[first : first + SPANS_ACROSS]
        columns = (
            Column("tenth", "right"),
            *(Column(f"span {first + n}", "right", 1) for n in range(1, len(across) + 1)),
        )
        rows: list[tuple[Text, ...]] = []
        for tenth in range(11):
            places = [start + (end - start) * tenth / 10 for start, end in across]
            values = [line.right(at) if tenth == 0 else line.left(at) for at in places]
            rows.append(((str(tenth),), *((Value(value, decimals),) for value in values)))
        yield Table(columns, tuple(rows))
