"""Effects that are asked for in a table only: their lines, and where each load governs them."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from calcpack.analysis import Line
from calcpack.derive.kinds import DECIMALS, EFFECT_KIND, LINE_KIND
from calcpack.exact.units import SYSTEMS
from calcpack.model.loads import MovingLoad
from calcpack.moving.governing import Governing
from calcpack.sheets.blocks import Block, Column, Heading, Paragraph, Table, Text, Value
from calcpack.sheets.stands import numbered_cases, stands
from calcpack.sheets.tables import effect_title
from calcpack.solution import Placement, Solution
from calcpack.statics.system import place_name, symbol_of

EFFECTS_ACROSS = 8
IN_TABLES = (
    "Asked for in tables only: their equations are not printed, and their placements were found by "
    "the same search. The lines agree with both second methods; each governing value was compared "
    "with a sweep."
)


def tabulated(solution: Solution) -> tuple[Line, ...]:
    """The lines of effects that are asked for in a table only."""
    detail = solution.calculation.detail_of
    return tuple(line for line in solution.lines if detail(line.effect) == "table")


def line_tables(solution: Solution) -> Iterator[Block]:
    """Ordinates at every key station, several effects beside each other."""
    lines = sorted(tabulated(solution), key=lambda line: line.effect.kind)
    if not lines:
        return
    units = SYSTEMS[solution.calculation.units]
    beam = solution.calculation.beam
    yield Heading(2, ("Influence lines in tables",))
    yield Paragraph((f"{IN_TABLES} Where a line jumps: just left | just right.",))
    for first in range(0, len(lines), EFFECTS_ACROSS):
        across = lines[first : first + EFFECTS_ACROSS]
        columns = (
            Column("load at"),
            *(
                Column(symbol_of(line.effect), "right", 1, unit=units[LINE_KIND[line.effect.kind]])
                for line in across
            ),
        )
        rows = tuple(
            (
                (station.name or place_name(beam, station.at),),
                *(_ordinate(line, station.at) for line in across),
            )
            for station in beam.stations
        )
        yield Table(columns, rows)


def _ordinate(line: Line, at: Fraction) -> Text:
    decimals = DECIMALS[LINE_KIND[line.effect.kind]]
    left, right = line.line.left(at), line.line.right(at)
    if left == right:
        return (Value(left, decimals),)
    return (Value(left, decimals), " | ", Value(right, decimals))


def placement_tables(solution: Solution) -> Iterator[Block]:
    """Per load the governing values of the effects that are only tabulated."""
    own = {line.effect for line in tabulated(solution)}
    found = [one for one in solution.placements if one.effect in own]
    if not found:
        return
    yield Heading(2, ("Placements in tables",))
    yield Paragraph((IN_TABLES,))
    units = SYSTEMS[solution.calculation.units]
    for load in solution.calculation.moving:
        placements = [one for one in found if one.load is load]
        for kind in dict.fromkeys(one.effect.kind for one in placements):
            some = [one for one in placements if one.effect.kind == kind]
            cases = numbered_cases(load)
            words = f"{kind.capitalize()} under {load.name}. {cases}".strip()
            yield Paragraph((words,), leads=True)
            yield _table(load, some, units[EFFECT_KIND[kind]], units["length"])


def _table(load: MovingLoad, placements: list[Placement], unit: str, length: str) -> Table:
    half = (
        Column("lead axle at", "right", 3, length),
        Column("next", "right", 2, unit),
        Column("sweep", "right", 2, unit),
    )
    columns = (
        Column("effect", width=3),
        Column("greatest", "right", 2, unit),
        *half,
        Column("least", "right", 2, unit),
        *half,
    )
    rows = tuple(
        (
            (effect_title(one.effect),),
            *_half(load, one, one.greatest, one.swept[0]),
            *_half(load, one, one.least, one.swept[1]),
        )
        for one in placements
    )
    return Table(columns, rows)


def _half(load: MovingLoad, one: Placement, found: Governing, swept: float) -> Iterator[Text]:
    decimals = DECIMALS[EFFECT_KIND[one.effect.kind]]
    yield (Value(found.value, decimals),)
    yield stands(load, found)
    yield (Value(found.near[0].value, decimals),) if found.near else ("—",)
    yield (f"{swept:.6g}".replace("-", "−") if swept else "0",)
