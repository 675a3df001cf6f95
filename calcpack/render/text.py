"""What was found as a short table for a terminal."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from calcpack.derive.kinds import EFFECT_KIND
from calcpack.exact.numbers import printed
from calcpack.exact.units import SYSTEMS
from calcpack.moving.governing import Governing
from calcpack.solution import Solution

HEAD = ("effect", "load", "", "value", "unit", "lead axle at", "heading")


def to_text(solution: Solution) -> str:
    """Degree, governing values and places; values as they are printed in the package."""
    found = solution.classification
    lines = [solution.calculation.cover.title, f"{found.kind}: {found.reason}", ""]
    return "\n".join([*lines, *_table([HEAD, *_rows(solution)])]) + "\n"


def _rows(solution: Solution) -> Iterator[tuple[str, ...]]:
    units = SYSTEMS[solution.calculation.units]
    for placement, found, digits in solution.extremes():
        yield (
            placement.effect.label,
            placement.load.name,
            "max" if found.sense > 0 else "min",
            digits,
            units[EFFECT_KIND[placement.effect.kind]],
            *_place(found, units["length"]),
        )


def _place(found: Governing, length: str) -> tuple[str, str]:
    if found.position is None:
        return ("stays away" if found.case is None else "no train", "")
    return f"{printed(found.position.lead_at, 3)} {length}", found.position.heading


def _table(rows: Sequence[tuple[str, ...]]) -> Iterator[str]:
    widths = [max(len(row[column]) for row in rows) for column in range(len(rows[0]))]
    for row in rows:
        cells = (
            cell.rjust(width) if column == HEAD.index("value") else cell.ljust(width)
            for column, (cell, width) in enumerate(zip(row, widths, strict=True))
        )
        yield "  ".join(cells).rstrip()
