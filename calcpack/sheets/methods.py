"""Second methods: same program, same input, other ways to the same lines; a worksheet by hand."""

from __future__ import annotations

from fractions import Fraction

from calcpack.derive.kinds import LINE_KIND
from calcpack.exact.units import SYSTEMS
from calcpack.sheets.blocks import Block, Column, Figure, Heading, Paragraph, Table, Value
from calcpack.sheets.bulk import tabulated
from calcpack.sheets.figures import beam_figure
from calcpack.sheets.tables import effect_title, with_symbols
from calcpack.solution import Solution
from calcpack.statics.system import place_name, symbol_of

WORDS = (
    "The lines were found again by two other methods, in the same program and from the same input: "
    "they guard against a fault in the derivation, not against a wrong input. Kinematic statement, "
    "in exact fractions: a unit discontinuity at the quantity displaces the beam into its "
    "influence line. Stiffness solution, in floating point: Euler-Bernoulli elements between "
    "the key stations. The bound is on the difference of ordinates and slopes, as a part of 1 + "
    "the largest ordinate (of the largest ordinate for deflections and rotations). The "
    "placements were compared with a sweep of each load over the stiffness ordinates in 2000 steps "
    "(400 for an effect in a table): it never exceeds the value found, nor falls short of it by "
    "more than a step allows. Points of envelopes are found by the same search and not swept."
)
BY_HAND = (
    "For a check without sight of the derivation: from the data alone, find each quantity for the "
    "load at each station by a method of your own, then compare with the tables of ordinates."
)


EFFECTS_ACROSS = 4
"""Effects beside each other in a table of the worksheet."""


def method_blocks(solution: Solution) -> tuple[Block, ...]:
    """Agreement of the second methods for each effect."""
    bounds = {
        (one.effect, one.method): "exactly" if one.within == 0 else f"within {one.within:.0e}"
        for one in solution.second.agreements
    }
    columns = (
        Column("effect", width=3),
        Column("kinematic", width=2),
        Column("stiffness", width=2),
    )
    rows = tuple(
        (
            (effect_title(line.effect),),
            (bounds[line.effect, "kinematic"],),
            (bounds[line.effect, "stiffness"],),
        )
        for line in solution.lines
    )
    return (
        Heading(1, ("Second methods",)),
        Paragraph((WORDS,)),
        Table(columns, rows),
        Heading(2, ("Equilibrium of the whole beam",)),
        *_equilibrium(solution),
    )


def _equilibrium(solution: Solution) -> tuple[Block, ...]:
    """The sum of all reactions under the unit load at each key station: one, wherever it stands."""
    reactions = [one for one in solution.unknowns if one.kind == "reaction"]
    rows = []
    for station in solution.calculation.beam.stations:
        values = [solution.unknowns[one].left(station.at) for one in reactions]
        rows.append(
            (
                (station.name or str(station.at),),
                (Value(sum(values, Fraction(0)), 4),),
            )
        )
    names = " + ".join(str(symbol_of(one)) for one in reactions)
    words = f"The reactions just found ({names}) carry the unit load wherever it stands:"
    columns = (Column("load at (just left)", width=2), Column("sum of reactions", "right"))
    return Paragraph(with_symbols(solution, words), leads=True), Table(columns, tuple(rows))


def worksheet_blocks(solution: Solution) -> tuple[Block, ...]:
    """Inputs only, and blank tables for an independent check by hand."""
    calculation = solution.calculation
    units = SYSTEMS[calculation.units]
    blocks: list[Block] = [
        Heading(1, ("Worksheet for an independent check",)),
        Paragraph((BY_HAND,)),
        Figure(beam_figure(calculation.beam, calculation.units)),
    ]
    stations = [
        station.name or place_name(calculation.beam, station.at)
        for station in calculation.beam.stations
    ]
    table_only = {line.effect for line in tabulated(solution)}
    wanted = [line for line in solution.lines if line.effect not in table_only]
    for start in range(0, len(wanted), EFFECTS_ACROSS):
        lines = wanted[start : start + EFFECTS_ACROSS]
        columns = [Column("load at", width=2)]
        for line in lines:
            unit = units[LINE_KIND[line.effect.kind]]
            columns.append(Column(symbol_of(line.effect), width=3, unit=unit))
        rows = tuple(((place,), *(("",) for _ in lines)) for place in stations)
        blocks.append(Table(tuple(columns), rows, ruled=True))
    return tuple(blocks)
