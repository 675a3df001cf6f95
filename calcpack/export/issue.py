"""From the notebook and the calc.toml of a folder to the package's PDF."""

from __future__ import annotations

from collections.abc import Callable
from datetime import date
from pathlib import Path

from nbformat import NotebookNode

from calcpack.errors import InputRefused, Problem
from calcpack.export.attachments import attachments
from calcpack.export.compile import to_pdf
from calcpack.export.glyphs import without_glyph
from calcpack.export.notebook import OwnCell, SheetCall, forged_outputs, parts_of
from calcpack.export.own import own_blocks
from calcpack.intake.calculation import file_bytes, read
from calcpack.model.request import Calculation
from calcpack.results import results
from calcpack.sheets.pages import make_sheet
from calcpack.solution import Report as Search
from calcpack.solution import solve, unheard

Report = Callable[[str], None]
"""Is told in a word what is being done next."""


def issue(
    notebook: NotebookNode,
    folder: Path,
    report: Report = lambda phase: None,
    search: Search = unheard,
) -> bytes:
    """The package of the calculation in ``folder`` as PDF, in the order of ``notebook``.

    ``report`` is told what is done next, ``search`` of each part of the search within it.

    Sheets are made from calc.toml anew, never from what the notebook shows. A kernel is started
    only where the notebook holds code of the engineer's own. Neither folder nor notebook is
    written to.

    Raises:
        InputRefused: calc.toml or the notebook cannot be issued as it stands.
        Disagreement: a second method differs.
        OutputFailed: a cell of the engineer's own or the typesetter failed.
    """
    report("reading")
    parts, problems = parts_of(notebook)
    calc, calculation, day = _read(folder, problems)
    report("solving")
    solved = solve(calculation, search)
    found = results(solved)
    _refuse(forged_outputs(notebook, parts, found["digest"]))
    shown = notebook
    if any(isinstance(part, OwnCell) and part.is_code for part in parts):
        from calcpack.export.kernel import executed  # only here, for it takes long to import

        shown = executed(notebook, folder)
        _refuse(forged_outputs(shown, parts, found["digest"]))
    report("drawing")
    made = [
        make_sheet(part.name, solved)
        if isinstance(part, SheetCall)
        else own_blocks(shown.cells[part.index], part.index)
        for part in parts
    ]
    report("typesetting")
    inside = attachments(calc, calculation.tables, found, notebook)
    return to_pdf(made, solved, found["digest"], day, inside)


def _read(folder: Path, problems: list[Problem]) -> tuple[bytes, Calculation, date]:
    """calc.toml, its calculation and its date, unless it has problems or others have been found."""
    try:
        calc = file_bytes(folder / "calc.toml")
        calculation = read(calc, "calc.toml", folder)
    except InputRefused as refused:
        raise InputRefused([*refused.problems, *problems]) from None
    problems = [*without_glyph(calculation), *problems]
    day = calculation.cover.latest
    if day is None:
        needs = "must be a date: it is the date of the document"
        raise InputRefused([Problem("cover.prepared.on", "absent", needs), *problems])
    _refuse(problems)
    return calc, calculation, day


def _refuse(problems: list[Problem]) -> None:
    if problems:
        raise InputRefused(problems)
