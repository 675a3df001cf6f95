"""Runs the code cells of a notebook in a fresh kernel."""

from __future__ import annotations

import copy
import os
from pathlib import Path
from subprocess import DEVNULL

from jupyter_client.kernelspec import NoSuchKernel
from nbclient import NotebookClient
from nbclient.exceptions import CellExecutionError, CellTimeoutError, DeadKernelError
from nbformat import NotebookNode

from calcpack.errors import OutputFailed
from calcpack.export.own import terminal_text

LONGEST_CELL = 600
"""Seconds that one cell may take."""


def executed(notebook: NotebookNode, folder: Path) -> NotebookNode:
    """A copy of the notebook with the outputs of all its code cells, run in order in ``folder``.

    The notebook itself is left as it is, and nothing is written to the folder but what the
    cells write.

    Raises:
        OutputFailed: no kernel, or a cell that failed; with its index, its source, the error's
            name and message.
    """
    fresh = copy.deepcopy(notebook)
    for cell in fresh.cells:
        if cell.cell_type == "code":
            cell.outputs = []
    where = {"metadata": {"path": str(folder)}}
    client = NotebookClient(fresh, timeout=LONGEST_CELL, resources=where)
    # A module of the engineer's own, imported from the folder, must leave no compiled copy there.
    environment = {**os.environ, "PYTHONDONTWRITEBYTECODE": "1"}
    try:
        # What the kernel itself has to say is no output of a cell.
        with client.setup_kernel(env=environment, stdout=DEVNULL, stderr=DEVNULL):
            for index, cell in enumerate(fresh.cells):
                _run(client, cell, index)
    except (NoSuchKernel, OSError, RuntimeError) as error:
        raise OutputFailed(f"calculation.ipynb: no kernel to run its cells: {error}") from error
    return fresh


def _run(client: NotebookClient, cell: NotebookNode, index: int) -> None:
    try:
        client.execute_cell(cell, index)
    except CellExecutionError as error:
        said = f"{error.ename}: {terminal_text(error.evalue)}"
    except CellTimeoutError:
        said = f"took longer than {LONGEST_CELL} s"
    except DeadKernelError:
        said = "the kernel died"
    else:
        return
    source = "\n".join(f"    {line}" for line in cell.source.splitlines())
    raise OutputFailed(f"calculation.ipynb: cells[{index}]: {said}\n{source}")
