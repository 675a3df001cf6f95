"""Data echo: every value of calc.toml, entered or default, and the beam to scale."""

from __future__ import annotations

from collections.abc import Iterator

from calcpack.sheets.blocks import Block, Column, Figure, Heading, Paragraph, Table
from calcpack.sheets.figures import beam_figure
from calcpack.solution import Solution


def data_blocks(solution: Solution) -> tuple[Block, ...]:
    """The beam to scale, the names that symbols shorten, and every value stated."""
    calculation = solution.calculation
    columns = (
        Column("value", width=5),
        Column("what it is", width=3),
        Column("said", width=6),
        Column("unit"),
        Column("source"),
    )
    rows = tuple(
        (
            (entry.path,),
            (entry.label,),
            (entry.said or "—",),
            (entry.unit,),
            ("entered" if entry.entered else "default",),
        )
        for entry in calculation.echo
    )
    return (
        Heading(1, ("Data",)),
        Figure(beam_figure(calculation.beam, calculation.units)),
        *_shortened(solution),
        Table(columns, rows, ticked=True),
    )


def _shortened(solution: Solution) -> Iterator[Block]:
    tags = solution.calculation.beam.tags
    rows = tuple(((tag,), (name,)) for name, tag in tags.items() if tag != name)
    if rows:
        yield Paragraph(("Long names are shortened in symbols:",), leads=True)
        yield Table((Column("in symbols", width=1), Column("name", width=6)), rows)
