"""Stability and plan of solution; unknowns and influence lines, step by step."""

from __future__ import annotations

import re
from collections.abc import Iterator
from fractions import Fraction

from calcpack.derive.kinds import AREA_KIND, DECIMALS
from calcpack.derive.steps import AreaGroup, LineGroup, StationGroup, Step
from calcpack.exact.units import SYSTEMS
from calcpack.model.request import Detail, Effect
from calcpack.sheets.blocks import (
    Beside,
    Block,
    Column,
    Digits,
    Equation,
    Expression,
    Figure,
    Heading,
    Paragraph,
    Table,
    Text,
    Value,
)
from calcpack.sheets.figures import line_figure
from calcpack.sheets.free_body import free_body_figure, free_body_of
from calcpack.solution import Solution
from calcpack.statics.plan import PlanStep, equation_in_words
from calcpack.statics.system import symbol_of

NAMES = {
    "reaction": "Reaction of support {}",
    "moment reaction": "Couple held by support {}",
    "shear": "Shear at {}",
    "moment": "Moment at {}",
}
BODY_WIDTH = 74.0
"""Width of a free body beside its equations, in mm."""
MOST_ROWS = 200
"""A longer table of ordinates is printed without the numbers of each row."""


def effect_title(effect: Effect) -> str:
    """``Shear at B, just left``."""
    face = f", just {effect.face} of it" if effect.face else ""
    return NAMES[effect.kind].format(effect.at) + face


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
            blocks += _derived(solution, group, group.source.reason, detail_of(solution, group))
    return tuple(blocks)


def line_blocks(solution: Solution) -> tuple[Block, ...]:
    """One equation more for each section; then every line drawn, with its areas."""
    blocks: list[Block] = [Heading(1, ("Influence lines",))]
    derived = {
        group.quantity: group
        for group in solution.derivation.groups
        if isinstance(group, LineGroup)
    }
    areas = {
        group.effect: group for group in solution.derivation.groups if isinstance(group, AreaGroup)
    }
    for found in solution.lines:
        group = derived[found.effect]
        if found.cut is not None:
            reason = (
                f"Cut at {found.effect.at} and keep the part on the {found.cut.keeps}, "
                "where no more forces act than on the other; the unknowns are known by now."
            )
            blocks += _derived(solution, group, reason, detail_of(solution, group))
        blocks += _drawn(solution, found.effect, group, areas[found.effect])
    return tuple(blocks)


def step_table(solution: Solution, steps: tuple[Step, ...]) -> Table:
    """Steps with numbers: formula in symbols, in digits, and the result."""
    units = SYSTEMS[solution.calculation.units]
    columns = (
        Column("step", "right"),
        Column("finds"),
        Column("in symbols", width=5),
        Column("with numbers", width=6),
        Column("result", "right"),
        Column("unit"),
    )
    rows = tuple(
        (
            (step.id,),
            (step.left,),
            (Expression(step.formula),),
            (Digits(step.formula),),
            (result_of(solution, step),),
            (units[step.kind],),
        )
        for step in steps
    )
    return Table(columns, rows, ticked=True)


def result_of(solution: Solution, step: Step) -> Value:
    """A step's result with the decimals it closes with."""
    assert step.value is not None
    return Value(step.value, solution.derivation.decimals[f"step:{step.key}"])


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
    yield _rows(solution, group, detail)


def detail_of(solution: Solution, group: LineGroup) -> Detail:
    """How much of a derivation is printed: as asked for, but of a long table not every number."""
    asked = group.quantity.show or solution.calculation.package.detail
    return "plan" if asked == "every equation" and len(group.rows) > MOST_ROWS else asked


def with_symbols(solution: Solution, words: str) -> Text:
    """Words in which the symbols of the unknowns are set as symbols."""
    known = {str(symbol_of(one)): symbol_of(one) for one in solution.unknowns}
    longest_first = sorted(known, key=len, reverse=True)
    pattern = "|".join(re.escape(name) for name in longest_first)
    return tuple(known.get(part, part) for part in re.split(f"({pattern})", words) if part)


def _rows(solution: Solution, group: LineGroup, detail: Detail) -> Table:
    units = SYSTEMS[solution.calculation.units]
    second = solution.second.stiffness[group.quantity]
    stations = [station.at for station in solution.calculation.beam.stations]
    unit = units[group.rows[0].step.kind]
    in_full = detail == "every equation"
    columns = (
        Column("step", "right"),
        Column("load at", width=2),
        Column("on body"),
        *((Column("with numbers", width=5),) if in_full else ()),
        Column(f"result, {unit}" if unit else "result", "right"),
        Column("stiffness", "right"),
    )
    rows = []
    for row in group.rows:
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


def _drawn(
    solution: Solution, effect: Effect, group: LineGroup, areas: AreaGroup
) -> Iterator[Block]:
    calculation = solution.calculation
    unit = SYSTEMS[calculation.units][group.rows[0].step.kind]
    line = next(found.line for found in solution.lines if found.effect == effect)
    decimals = max(solution.derivation.decimals[f"step:{row.step.key}"] or 4 for row in group.rows)
    yield Heading(2, ("Line and areas: ", effect_title(effect)), areas.number)
    words = f"Ordinates from {_cited(group)}; areas by trapezia between the zeros."
    yield Paragraph((words,), leads=True)
    places = result_of(solution, areas.positive).decimals or DECIMALS[AREA_KIND[effect.kind]]
    title = f"{effect.kind} at {effect.at}"
    yield Figure(
        line_figure(calculation.beam, line, title, unit, decimals, calculation.units, places)
    )
    yield step_table(solution, areas.steps)


def _cited(group: LineGroup) -> str:
    return f"steps {group.rows[0].step.id} to {group.rows[-1].step.id}"
