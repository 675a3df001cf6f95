"""What was found as a short table for a terminal."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from calcpack.derive.steps import PlacementGroup
from calcpack.exact.numbers import printed
from calcpack.exact.units import SYSTEMS
from calcpack.moving.critical import Governing
from calcpack.solution import Solution

HEAD = ("effect", "load", "", "value", "unit", "lead axle at", "heading")


def to_text(solution: Solution) -> str:
    """Degree, governing values and places; values as they are printed in the package."""
    found = solution.classification
    lines = [solution.calculation.cover.title, f"{found.kind}: {found.reason}", ""]
    return "\n".join([*lines, *_table([HEAD, *_rows(solution)])]) + "\n"


def _rows(solution: Solution) -> Iterator[tuple[str, ...]]:
    units, derivation = SYSTEMS[solution.calculation.units], solution.derivation
    for group in derivation.groups:
        if isinstance(group, PlacementGroup):
            step = group.steps[-1]
            yield (
                group.effect.label,
                group.load.name,
                "max" if group.governing.sense > 0 else "min",
                derivation.result(step),
                units[step.kind],
                *_place(group.governing, units["length"]),
            )


def _place(found: Governing, length: str) -> tuple[str, str]:
    if found.chosen is None:
        return ("uniform load only" if found.uniform else "stays away", "")
    position = found.chosen.position
    return f"{printed(position.lead_at, 3)} {length}", position.heading


def _table(rows: Sequence[tuple[str, ...]]) -> Iterator[str]:
    widths = [max(len(row[column]) for row in rows) for column in range(len(rows[0]))]
    for row in rows:
        cells = (
            cell.rjust(width) if column == HEAD.index("value") else cell.ljust(width)
            for column, (cell, width) in enumerate(zip(row, widths, strict=True))
        )
        yield "  ".join(cells).rstrip()
