"""Data echo: every value of calc.toml, entered or default, and the beam to scale."""

from __future__ import annotations

from calcpack.model.request import Calculation
from calcpack.sheets.blocks import Block, Column, Figure, Heading, Paragraph, Table
from calcpack.sheets.figures import beam_figure

SIGNS = (
    "Signs: reaction upward +; shear + when the outside forces left of the cut push up; moment "
    "sagging +; moment reaction (couple C of a support) anticlockwise on the beam +. Stations run "
    "from the left end. The unit load P = 1 acts downward and has no unit: a line of moment is a "
    "length, a line of shear or reaction a pure number. A load at a support stands on the support."
)


def data_blocks(calculation: Calculation) -> tuple[Block, ...]:
    """The data echo."""
    columns = (
        Column("value", width=4),
        Column("what it is", width=4),
        Column("said", "right", width=3),
        Column("unit"),
        Column("source"),
    )
    rows = tuple(
        (
            (entry.path,),
            (entry.label,),
            (entry.said,),
            (entry.unit,),
            ("entered" if entry.entered else "default",),
        )
        for entry in calculation.echo
    )
    return (
        Heading(1, ("Data",)),
        Figure(beam_figure(calculation.beam, calculation.units)),
        Paragraph((SIGNS,)),
        Table(columns, rows),
    )
