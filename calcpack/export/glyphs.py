"""What the package's fonts cannot print is refused where it was typed."""

from __future__ import annotations

from calcpack.errors import Problem
from calcpack.model.request import Calculation
from calcpack.sheets.lettering import has_glyph


def without_glyph(calculation: Calculation) -> list[Problem]:
    """One problem for each value of calc.toml that holds a character without a glyph."""
    problems = []
    for entry in calculation.echo:
        missing = [character for character in entry.said if not has_glyph(character)]
        if missing:
            needs = f"must do without U+{ord(missing[0]):04X}, which the package's fonts lack"
            problems.append(Problem(entry.path, entry.said[:60], needs))
    return problems
