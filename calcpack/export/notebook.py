"""Reads a calculation's notebook: the order of the sheets and the engineer's own cells."""

from __future__ import annotations

import ast
import html
import warnings
from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from nbformat import NotebookNode

from calcpack.errors import Problem
from calcpack.intake.shown import shown, unprintable
from calcpack.render.markdown import SHEET_MIME, stamp
from calcpack.results import DIGEST_SHOWN
from calcpack.sheets.lettering import has_glyph
from calcpack.sheets.pages import SHEET_NAMES

CALL = 'calcpack.sheet("NAME")'


@dataclass(frozen=True)
class SheetCall:
    """A sheet, and the cell that shows it; None where the notebook leaves the sheet out."""

    name: str
    index: int | None


@dataclass(frozen=True)
class OwnCell:
    """A cell of the engineer's own, by its place in the notebook counted from 0."""

    index: int
    is_code: bool


Part = SheetCall | OwnCell


def parts_of(notebook: NotebookNode) -> tuple[list[Part], list[Problem]]:
    """The parts in the notebook's order, and what in it cannot be issued.

    Sheets that the notebook leaves out are appended in their usual order, so that no notebook
    can hide one. A cell that only imports calcpack, or is empty, is no part.
    """
    parts: list[Part] = []
    problems: list[Problem] = []
    for index, cell in enumerate(notebook.cells):
        found = _part(cell, index)
        path = cell_path(index)
        if isinstance(found, Problem):
            problems.append(found)
        elif isinstance(found, SheetCall) and found.name in _names(parts):
            problems.append(Problem(path, f"sheet {found.name!r}", "must stand only once"))
        elif found is not None:
            parts.append(found)
        if isinstance(found, OwnCell) and cell.cell_type == "markdown":
            problems += _unprintable(path, cell.source)
    left_out = [SheetCall(name, None) for name in SHEET_NAMES if name not in _names(parts)]
    return parts + left_out, problems


def forged_outputs(notebook: NotebookNode, parts: Sequence[Part], digest: str) -> list[Problem]:
    """What says of itself that it is a sheet's output, and is not that of the sheet as computed.

    Args:
        notebook: whose outputs are looked at.
        parts: its cells, as ``parts_of`` reads them.
        digest: of data and results as they are now.
    """
    called = {part.index: part.name for part in parts if isinstance(part, SheetCall)}
    problems = []
    for index, cell in enumerate(notebook.cells):
        for place, output in enumerate(cell.get("outputs", ())):
            if SHEET_MIME not in output.get("data", {}):
                continue
            said = output.data[SHEET_MIME]
            path = f"{cell_path(index)}.outputs[{place}]"
            if index not in called:
                needs = f"must come from {CALL} alone in its cell"
                problems.append(Problem(path, "a sheet's output", needs))
            elif said not in (stamp(called[index], digest), stamp(called[index], None)):
                due = f"must be of {called[index]!r} with digest {digest[:DIGEST_SHOWN]}"
                problems.append(Problem(path, shown(said), f"{due}: run the cell again"))
    return problems


def cell_path(index: int) -> str:
    """What messages call a cell."""
    return f"calculation.ipynb: cells[{index}]"


def _names(parts: Sequence[Part]) -> set[str]:
    return {part.name for part in parts if isinstance(part, SheetCall)}


def _part(cell: NotebookNode, index: int) -> Part | Problem | None:
    if not cell.source.strip():
        return None
    if cell.cell_type != "code":
        return OwnCell(index, is_code=False)
    try:
        with warnings.catch_warnings(action="ignore"):  # they are for the kernel to give
            tree = ast.parse(cell.source)
    except (SyntaxError, ValueError):  # a line for the kernel, such as %matplotlib inline
        return OwnCell(index, is_code=True)
    rest = [one for one in tree.body if not _imports_calcpack(one)]
    if not any(_is_sheet(node) for node in ast.walk(tree)):
        return OwnCell(index, is_code=True) if rest or not tree.body else None
    match rest:
        case [ast.Expr(ast.Call(func, [ast.Constant(str(name))], []))] if _is_sheet(func):
            if name in SHEET_NAMES:
                return SheetCall(name, index)
            listed = ", ".join(SHEET_NAMES)
            return Problem(cell_path(index), f"sheet {name!r}", f"must be one of {listed}")
    needs = f"must be {CALL} and nothing else: a sheet's call stands alone in its cell"
    return Problem(cell_path(index), shown(cell.source), needs)


def _imports_calcpack(statement: ast.stmt) -> bool:
    match statement:
        case ast.Import(names=[ast.alias(name="calcpack", asname=None)]):
            return True
    return False


def _is_sheet(node: ast.AST) -> bool:
    match node:
        case ast.Attribute(ast.Name("calcpack"), "sheet"):
            return True
    return False


def _unprintable(path: str, source: str) -> Iterator[Problem]:
    """Markdown may also name a character by its number, hence the text without such names."""
    for one in source + html.unescape(source):
        if one not in "\n\r\t" and (unprintable(one) or not has_glyph(one)):
            needs = f"must do without U+{ord(one):04X}, which cannot be printed"
            yield Problem(path, shown(source), needs)
            return
