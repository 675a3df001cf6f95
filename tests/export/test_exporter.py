"""The nbconvert exporter: the same package as the command's, alone and through its application."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import pytest
from nbconvert.exporters import get_exporter
from nbformat import NotebookNode
from nbformat.v4 import new_code_cell, new_markdown_cell
from notebook_samples import CALC, make_folder, sheet_cell, text_of

from calcpack.cli import main
from calcpack.errors import InputRefused
from calcpack.export.exporter import PackageExporter
from calcpack.export.issue import issue

CELLS = (new_code_cell("import calcpack"), sheet_cell("cover"), new_markdown_cell("OWN-WORDS"))


def test_the_exporter_is_registered_under_its_name() -> None:
    assert get_exporter("calcpack") is PackageExporter


def test_the_exporter_and_the_command_give_the_same_bytes(tmp_path: Path) -> None:
    notebook = make_folder(tmp_path, *CELLS)
    resources = {
        "metadata": {"path": str(tmp_path), "name": "calculation"},
        "outputs": {"picture.png": b"x"},
        "attachments": {"a": b"x"},
    }
    for cell in notebook.cells:  # the marks that the server gives to cells it trusts
        cell.metadata.trusted = True
    pdf, found = get_exporter("calcpack")().from_notebook_node(notebook, resources)
    assert found["output_extension"] == ".pdf"
    assert not {"outputs", "attachments"} & found.keys()
    assert notebook.cells[0].metadata.trusted
    assert main(["issue", str(tmp_path), "--out", str(tmp_path / "other.pdf")]) == 0
    assert pdf == (tmp_path / "other.pdf").read_bytes()


def test_preprocessors_cannot_take_a_cell_out(tmp_path: Path) -> None:
    def empty(notebook: NotebookNode, resources: object) -> tuple[NotebookNode, object]:
        notebook.cells = []
        return notebook, resources

    notebook = make_folder(tmp_path, *CELLS)
    exporter = get_exporter("calcpack")()
    exporter.register_preprocessor(empty, enabled=True)
    pdf, _ = exporter.from_notebook_node(notebook, {"metadata": {"path": str(tmp_path)}})
    assert text_of(pdf).count("OWN-WORDS") == 1


def test_the_folder_defaults_to_the_current_one(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    notebook = make_folder(tmp_path, *CELLS)
    monkeypatch.chdir(tmp_path)
    pdf, _ = get_exporter("calcpack")().from_notebook_node(notebook)
    assert pdf == issue(notebook, tmp_path)


def test_problems_reach_the_caller_as_lines(tmp_path: Path) -> None:
    notebook = make_folder(tmp_path, *CELLS, calc=CALC.replace("length = 9.0", "length = -9.0"))
    with pytest.raises(InputRefused) as caught:
        get_exporter("calcpack")().from_notebook_node(
            notebook, {"metadata": {"path": str(tmp_path)}}
        )
    # The server shows the error's text as it is.
    assert str(caught.value).startswith("beam.length: -9.0 m, must be above 0 m")


def test_the_nbconvert_command(tmp_path: Path) -> None:
    make_folder(tmp_path, *CELLS)
    command = [sys.executable, "-m", "nbconvert", "--to", "calcpack", "calculation.ipynb"]
    subprocess.run(command, cwd=tmp_path, check=True, capture_output=True)
    assert {path.name for path in tmp_path.iterdir()} == {
        "calc.toml",
        "calculation.ipynb",
        "calculation.pdf",
    }
    assert text_of((tmp_path / "calculation.pdf").read_bytes()).count("OWN-WORDS") == 1


def test_only_the_converter_needs_nbconvert_and_only_own_code_a_kernel(tmp_path: Path) -> None:
    make_folder(tmp_path, *CELLS)
    code = (
        "import sys\n"
        "from calcpack.cli import main\n"
        f"status = main(['issue', {str(tmp_path)!r}])\n"
        "heavy = {'nbconvert', 'nbclient', 'jupyter_client', 'matplotlib'}\n"
        "print(status, heavy & set(sys.modules))\n"
        "import calcpack.export.exporter\n"
        "print('nbconvert' in sys.modules)"
    )
    found = subprocess.run([sys.executable, "-c", code], capture_output=True, check=True, text=True)
    assert found.stdout == "0 set()\nTrue\n"


def test_a_start_of_nbconvert_loads_no_typesetter() -> None:
    code = (
        "import sys, calcpack.export.exporter\n"
        "print({'typst', 'markdown_it', 'fontTools', 'calcpack.sheets'} & set(sys.modules))"
    )
    found = subprocess.run([sys.executable, "-c", code], capture_output=True, check=True, text=True)
    assert found.stdout == "set()\n"
