"""The nbconvert exporter: a notebook beside its calc.toml becomes the package's PDF."""

from __future__ import annotations

from pathlib import Path
from typing import Any

from nbconvert.exporters import Exporter
from nbformat import NotebookNode

from calcpack.errors import InputRefused, Problem
from calcpack.export.compile import to_pdf
from calcpack.export.notebook import parts_of
from calcpack.intake import read_file
from calcpack.results import results
from calcpack.sheets.pages import make_sheet
from calcpack.solution import solve


class PackageExporter(Exporter):
    """Rebuilds every sheet from the calc.toml beside the notebook; the notebook gives the order."""

    export_from_notebook = "Calculation package"

    def _file_extension_default(self) -> str:
        return ".pdf"

    def from_notebook_node(
        self, nb: NotebookNode, resources: dict[str, Any] | None = None, **kw: Any
    ) -> tuple[Any, dict[str, Any]]:
        """The PDF's bytes, and the resources.

        Raises:
            InputRefused: calc.toml or the notebook cannot be issued as it stands.
            Disagreement: a second method differs.
            OutputFailed: the typesetter refused.
        """
        nb, resources = super().from_notebook_node(nb, resources, **kw)
        folder = Path(resources.get("metadata", {}).get("path", ""))
        return issue(nb, folder), resources


def issue(notebook: NotebookNode, folder: Path) -> bytes:
    """The package of the calculation in ``folder`` as PDF, in the order of ``notebook``."""
    calculation = read_file(folder / "calc.toml")
    parts, problems = parts_of(notebook)
    day = calculation.cover.latest
    if day is None:
        needs = "must be a date: it is the date of the document"
        problems.insert(0, Problem("cover.prepared.on", "absent", needs))
    if problems or day is None:
        raise InputRefused(problems)
    solution = solve(calculation)
    made = [make_sheet(part, solution) if isinstance(part, str) else part for part in parts]
    return to_pdf(made, solution, results(solution)["digest"], day)
