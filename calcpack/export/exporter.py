"""The nbconvert exporter: a notebook beside its calc.toml becomes the package's PDF."""

from __future__ import annotations

import copy
from pathlib import Path
from typing import Any

from nbconvert.exporters.exporter import Exporter
from nbformat import NotebookNode
from nbformat.v4.rwbase import strip_transient
from traitlets import default


class PackageExporter(Exporter):
    """Rebuilds every sheet from the calc.toml beside the notebook; the notebook gives the order."""

    output_mimetype = "application/pdf"

    @default("file_extension")
    def _file_extension(self) -> str:
        return ".pdf"

    def from_notebook_node(
        self, nb: NotebookNode, resources: dict[str, Any] | None = None, **kw: Any
    ) -> tuple[Any, dict[str, Any]]:
        """The PDF's bytes, and the resources.

        What preprocessors make of the notebook is set aside: they might take cells out of it.

        Raises:
            InputRefused: calc.toml or the notebook cannot be issued as it stands.
            Disagreement: a second method differs.
            OutputFailed: a cell of the engineer's own or the typesetter failed.
        """
        # Every start of nbconvert, to whatever format, loads all exporters: the computing and
        # the typesetting are loaded only when a package is made.
        from calcpack.export.issue import issue

        _, resources = super().from_notebook_node(nb, resources, **kw)
        for kept_apart in ("outputs", "attachments"):  # with either the server sends a zip
            resources.pop(kept_apart, None)
        # The server marks the cells that it trusts; a saved notebook holds no such marks, and
        # the package is the same either way.
        notebook = strip_transient(copy.deepcopy(nb))
        folder = Path(resources.get("metadata", {}).get("path", ""))
        return issue(notebook, folder), resources
