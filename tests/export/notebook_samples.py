"""A small calculation, notebooks beside it, and the text of their package."""

from __future__ import annotations

import copy
from pathlib import Path

import nbformat
import pypdfium2 as pdfium  # type: ignore[import-untyped]
from nbformat import NotebookNode
from nbformat.v4 import new_code_cell, new_notebook, new_output

from calcpack.export.issue import issue
from calcpack.render.markdown import SHEET_MIME

CALC = """\
format = 1
units = "SI"
cover.title = "Quay ramp beam"
cover.prepared = { by = "A. Nyborg", on = 2026-03-02 }

[beam]
length = 9.0
supports = [ { name = "A", at = 0.0, kind = "pin" }, { name = "B", at = 9.0, kind = "roller" } ]

[[effects]]
kind = "reaction"
at = "A"
"""
OWN = "Engineer's own, not verified by calcpack"
KERNEL = {"kernelspec": {"name": "python3", "display_name": "Python 3", "language": "python"}}


def make_folder(folder: Path, *cells: NotebookNode, calc: str = CALC) -> NotebookNode:
    """Write calc.toml and a notebook of the cells; the notebook is handed back."""
    notebook: NotebookNode = new_notebook(cells=copy.deepcopy(list(cells)), metadata=KERNEL)
    (folder / "calc.toml").write_text(calc, encoding="utf-8")
    nbformat.write(notebook, folder / "calculation.ipynb")
    return notebook


def sheet_cell(name: str, *outputs: NotebookNode) -> NotebookNode:
    cell: NotebookNode = new_code_cell(f"calcpack.sheet({name!r})", outputs=list(outputs))
    return cell


def sheet_output(data: object) -> NotebookNode:
    """An output that says of itself that it is a sheet's."""
    shown = {SHEET_MIME: data, "text/plain": "shown"}
    output: NotebookNode = new_output("display_data", data=shown)
    return output


def text_of(pdf: bytes) -> str:
    """The text of all pages in one line, without the places where words may be broken."""
    with pdfium.PdfDocument(pdf) as document:
        pages = [page.get_textpage().get_text_range() for page in document]
    return " ".join(" ".join(pages).replace("\u200b", "").split())


def issued_text(notebook: NotebookNode, folder: Path) -> str:
    return text_of(issue(notebook, folder))
