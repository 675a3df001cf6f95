"""Reads a calculation's notebook: the order of the sheets and the engineer's own words."""

from __future__ import annotations

import ast
from collections.abc import Iterator

from nbformat import NotebookNode

from calcpack.errors import Problem
from calcpack.sheets.blocks import Framed, Paragraph
from calcpack.sheets.pages import SHEET_NAMES

OWN = "Engineer's own, not verified by calcpack"
CALL = 'calcpack.sheet("NAME")'

Part = str | Framed
"""The name of a sheet, or the engineer's own words."""


def parts_of(notebook: NotebookNode) -> tuple[list[Part], list[Problem]]:
    """The parts in the notebook's order, and what in it cannot be issued.

    Sheets that the notebook leaves out are appended in their usual order, so that no notebook
    can hide one.
    """
    parts: list[Part] = []
    problems: list[Problem] = []
    for index, cell in enumerate(notebook.cells):
        path = f"calculation.ipynb: cells[{index}]"
        if cell.cell_type == "markdown":
            if cell.source.strip():
                lines = tuple(Paragraph((line,)) for line in cell.source.splitlines() if line)
                parts.append(Framed(OWN, lines))
        elif cell.cell_type == "code":
            for found in _sheets_called(path, cell.source):
                if isinstance(found, Problem):
                    problems.append(found)
                elif found in parts:
                    problems.append(Problem(path, f"sheet {found!r}", "must stand only once"))
                else:
                    parts.append(found)
    parts += [name for name in SHEET_NAMES if name not in parts]
    return parts, problems


def _sheets_called(path: str, source: str) -> Iterator[str | Problem]:
    try:
        statements = ast.parse(source).body
    except SyntaxError:
        yield Problem(path, "not Python", f"must be a call of {CALL}")
        return
    for statement in statements:
        match statement:
            case ast.Import(names=[ast.alias(name="calcpack", asname=None)]):
                continue
            case ast.Expr(
                value=ast.Call(
                    func=ast.Attribute(value=ast.Name(id="calcpack"), attr="sheet"),
                    args=[ast.Constant(value=str(name))],
                    keywords=[],
                )
            ):
                if name in SHEET_NAMES:
                    yield name
                else:
                    listed = ", ".join(SHEET_NAMES)
                    yield Problem(path, f"sheet {name!r}", f"must be one of {listed}")
            case _:
                yield Problem(path, "code of the engineer's own", "not computed by this release")
