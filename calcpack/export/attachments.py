"""What the PDF carries inside: the data from which an archive gets the same digits again."""

from __future__ import annotations

import hashlib
import json
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any, Literal

from calcpack.results import Json, as_bytes


@dataclass(frozen=True)
class Attachment:
    """A file inside the PDF; ``relationship`` as PDF/A-3 (ISO 19005-3) names it."""

    name: str
    content: bytes
    mime: str
    relationship: Literal["source", "data", "supplement"]
    description: str


def attachments(
    calc: bytes, tables: Sequence[tuple[str, bytes]], found: Json, notebook: dict[str, Any]
) -> tuple[Attachment, ...]:
    """calc.toml and its tables as read, results.json as ``solve --json`` prints it, the notebook,
    a manifest.

    Args:
        calc: the bytes of calc.toml.
        tables: name and bytes of every table that it names.
        found: the results.
        notebook: the notebook as plain data; its outputs are left out.
    """
    files = (
        Attachment("calc.toml", calc, "application/toml", "source", "The input"),
        *(Attachment(name, table, "text/csv", "source", "A table") for name, table in tables),
        Attachment("results.json", as_bytes(found), "application/json", "data", "What was found"),
        Attachment(
            "calculation.ipynb",
            _without_outputs(notebook),
            "application/x-ipynb+json",
            "source",
            "The order of the sheets and the engineer's own words",
        ),
    )
    manifest = Attachment(
        "manifest.json",
        _manifest(files),
        "application/json",
        "supplement",
        "SHA-1 and SHA-256 of the files inside",
    )
    return (*files, manifest)


def _without_outputs(notebook: dict[str, Any]) -> bytes:
    cells = [
        {**cell, "outputs": [], "execution_count": None} if cell["cell_type"] == "code" else cell
        for cell in notebook["cells"]
    ]
    bare = {**notebook, "cells": cells}
    return (json.dumps(bare, ensure_ascii=False, indent=1, sort_keys=True) + "\n").encode()


def _manifest(files: Sequence[Attachment]) -> bytes:
    listed = [
        {
            "name": file.name,
            "sha1": hashlib.sha1(file.content, usedforsecurity=False).hexdigest(),
            "sha256": hashlib.sha256(file.content).hexdigest(),
        }
        for file in files
    ]
    return (json.dumps({"format": 1, "files": listed}, indent=1) + "\n").encode()
