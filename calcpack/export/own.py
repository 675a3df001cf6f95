"""The engineer's own cells as framed blocks; nothing in them is verified."""

from __future__ import annotations

import base64
import itertools
import re
from collections.abc import Iterable, Iterator
from typing import Any, Literal

from nbformat import NotebookNode

from calcpack.export.own_markdown import markdown_blocks
from calcpack.render.typst import printable
from calcpack.sheets.blocks import Block, Framed, Paragraph, Picture, Preformatted

OWN = "Engineer's own, not verified by calcpack"
WIDGET = "application/vnd.jupyter.widget-view+json"
PICTURES: dict[str, tuple[Literal["png", "jpg", "svg"], bytes]] = {
    "image/svg+xml": ("svg", b""),
    "image/png": ("png", b"\x89PNG"),
    "image/jpeg": ("jpg", b"\xff\xd8"),
}
"""The kinds of pictures that are shown, the best first, and how the content begins."""
_ESCAPES = re.compile(r"\x1b(?:\[[0-?]*[ -/]*[@-~]|\].*?(?:\x07|\x1b\\)|[@-Z\\^_])", re.DOTALL)


def own_blocks(cell: NotebookNode, index: int) -> Framed:
    """A cell in its frame: Markdown as blocks, anything else as typed; outputs below the code.

    Args:
        cell: a Markdown or raw cell, or a code cell with the outputs of its run.
        index: its place in the notebook, counted from 0.
    """
    if cell.cell_type == "markdown":
        return Framed(OWN, markdown_blocks(cell.source.expandtabs(4)))
    found = tuple(_results(cell.get("outputs", ()), index))
    label = (Paragraph(("Output:",), leads=True),) if found else ()
    return Framed(OWN, (Preformatted(cell.source), *label, *found))


def _results(outputs: Iterable[NotebookNode], index: int) -> Iterator[Block]:
    # What a cell prints arrives in pieces cut at any moment; they are put together again.
    for stream, pieces in itertools.groupby(outputs, lambda output: output.get("name")):
        if stream:
            yield from _plain("".join(piece.text for piece in pieces))
        else:
            for output in pieces:
                yield from _result(output, index)


def _result(output: NotebookNode, index: int) -> Iterator[Block]:
    if output.output_type == "error":
        yield from _plain(f"{output.ename}: {output.evalue}")
        return
    data: dict[str, Any] = output.data
    if WIDGET in data:
        yield Paragraph(("[a widget, which has no printed form]",))
        return
    for mime, (kind, begins) in PICTURES.items():
        if mime in data:
            content = data[mime].encode() if kind == "svg" else _decoded(data[mime])
            said = output.metadata.get(mime, {}).get("alt")
            if content.startswith(begins):
                yield Picture(content, kind, said or f"Picture put out by cells[{index}]")
            else:
                yield Paragraph(("[a picture that cannot be read]",))
            return
    if "text/markdown" in data:
        yield from markdown_blocks(printable(data["text/markdown"]))
    elif "text/plain" in data:
        yield from _plain(data["text/plain"])
    else:
        yield Paragraph((f"[an output of type {', '.join(data)}, which has no printed form]",))


def _decoded(text: str) -> bytes:
    try:
        return base64.b64decode(text)
    except ValueError:
        return b""


def _plain(text: str) -> Iterator[Block]:
    shown = terminal_text(text)
    if shown.strip():
        yield Preformatted(shown)


def terminal_text(text: str) -> str:
    r"""Text as a terminal would show it: no colours; after a carriage return the line begins anew.

    >>> terminal_text("\x1b[31mred\x1b[0m\n 10 %\r100 %\n")
    'red\n100 %'
    """
    lines = _ESCAPES.sub("", text).replace("\r\n", "\n").split("\n")
    return "\n".join(line.rstrip("\r").rpartition("\r")[2] for line in lines).rstrip("\n")
