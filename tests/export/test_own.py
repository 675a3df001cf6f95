"""The engineer's own cells in the package: framed, and run where there is code."""

from __future__ import annotations

import base64
import struct
import zlib
from pathlib import Path

import pytest
from nbformat import NotebookNode
from nbformat.v4 import new_code_cell, new_markdown_cell, new_output, new_raw_cell
from notebook_samples import CALC, OWN, issued_text, make_folder, sheet_cell, text_of
from pages import faults, read_back

import calcpack.export.kernel
from calcpack.errors import InputRefused, OutputFailed
from calcpack.export.issue import issue
from calcpack.export.own import own_blocks, terminal_text
from calcpack.sheets.blocks import Block, Framed, Paragraph, Picture, Preformatted, Styled

IMPORT = new_code_cell("import calcpack")


def chunk(kind: bytes, data: bytes) -> bytes:
    return struct.pack(">I", len(data)) + kind + data + struct.pack(">I", zlib.crc32(kind + data))


def png(width: int, height: int) -> bytes:
    """A black picture."""
    head = struct.pack(">IIBBBBB", width, height, 8, 0, 0, 0, 0)
    rows = zlib.compress((b"\0" + b"\0" * width) * height)
    return b"\x89PNG\r\n\x1a\n" + chunk(b"IHDR", head) + chunk(b"IDAT", rows) + chunk(b"IEND", b"")


def shown(*outputs: NotebookNode) -> tuple[Block, ...]:
    """What stands below the source and the word "Output:"."""
    framed = own_blocks(new_code_cell("x", outputs=list(outputs)), 7)
    assert framed.title == OWN
    assert framed.blocks[0] == Preformatted("x")
    if outputs:
        assert framed.blocks[1:2] in ((), (Paragraph(("Output:",), leads=True),))
    return framed.blocks[2:]


def data(**kinds: str) -> NotebookNode:
    mime = {kind.replace("_", "/", 1): content for kind, content in kinds.items()}
    output: NotebookNode = new_output("display_data", data=mime)
    return output


def stream(text: str, name: str = "stdout") -> NotebookNode:
    output: NotebookNode = new_output("stream", name=name, text=text)
    return output


def test_what_a_cell_prints_is_put_together_as_a_terminal_shows_it() -> None:
    pieces = [stream("1 %\r2"), stream(" %\nred \x1b[1;31mtext\x1b[0m\n"), stream("w", "stderr")]
    assert shown(*pieces) == (Preformatted("2 %\nred text"), Preformatted("w"))
    assert shown(stream("\n \n")) == ()


@pytest.mark.parametrize(
    ("typed", "due"),
    [
        ("a\r\nb\r\n", "a\nb"),
        ("\x1b]0;title\x07x", "x"),
        ("\x1b[38;5;196mx\x1b[K", "x"),
        ("  kept\n\n", "  kept"),
    ],
)
def test_terminal_text(typed: str, due: str) -> None:
    assert terminal_text(typed) == due


def test_the_richest_kind_of_output_that_can_be_printed_is_shown() -> None:
    picture = base64.b64encode(png(2, 2)).decode()
    svg = '<svg xmlns="http://www.w3.org/2000/svg"/>'
    assert shown(data(text_plain="p", text_html="<b>h</b>")) == (Preformatted("p"),)
    (found,) = shown(data(text_plain="p", text_markdown="*m*"))
    assert found == Paragraph((Styled(("m",), "emphasis"),))
    (found,) = shown(data(text_plain="p", image_png=picture))
    assert found == Picture(png(2, 2), "png", "Picture put out by cells[7]")
    (found,) = shown(new_output("display_data", {"image/svg+xml": svg, "image/png": picture}))
    assert isinstance(found, Picture)
    assert (found.content, found.kind) == (svg.encode(), "svg")
    described = new_output(
        "display_data", {"image/png": picture}, metadata={"image/png": {"alt": "a square"}}
    )
    (found,) = shown(described)
    assert isinstance(found, Picture)
    assert found.alt == "a square"


def test_what_has_no_printed_form_is_said_to_have_none() -> None:
    widget = {"application/vnd.jupyter.widget-view+json": {}, "text/plain": "VBox(children="}
    (found,) = shown(new_output("display_data", widget))
    assert found == Paragraph(("[a widget, which has no printed form]",))
    (found,) = shown(new_output("display_data", {"text/html": "<b>"}))
    assert found == Paragraph(("[an output of type text/html, which has no printed form]",))
    (found,) = shown(new_output("display_data", {"image/png": "%%%="}))
    assert found == Paragraph(("[a picture that cannot be read]",))


def test_an_error_that_the_notebook_allows_is_shown() -> None:
    error = new_output("error", ename="ValueError", evalue="\x1b[31mno\x1b[0m", traceback=[])
    assert shown(error) == (Preformatted("ValueError: no"),)


def test_raw_cells_are_shown_as_typed() -> None:
    assert own_blocks(new_raw_cell("<b> *x*"), 0) == Framed(OWN, (Preformatted("<b> *x*"),))


def test_no_kernel_is_started_without_code_of_the_engineers_own(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def fail(*arguments: object) -> None:
        raise AssertionError("a kernel was asked for")

    monkeypatch.setattr(calcpack.export.kernel, "executed", fail)
    calm = make_folder(tmp_path, IMPORT, sheet_cell("cover"), new_markdown_cell("w"))
    issue(calm, tmp_path)
    with pytest.raises(AssertionError, match="a kernel was asked for"):
        issue(make_folder(tmp_path, IMPORT, new_code_cell("1 + 1")), tmp_path)


def test_own_code_runs_in_the_folder_and_stands_once_and_in_place(tmp_path: Path) -> None:
    (tmp_path / "helper.py").write_text("WORD = 'FROM-HELPER'")
    saved = new_output("stream", name="stdout", text="SAVED-BEFORE")
    picture = base64.b64encode(png(900, 6000)).decode()
    cells = [
        new_code_cell("import calcpack, helper, os"),
        new_code_cell("print('RUN', helper.WORD)\n1 / 8", outputs=[saved]),
        sheet_cell("methods"),
        new_code_cell("%env OWN_MARK=7\nprint(os.path.isfile('calc.toml'), 'w' * 500)"),
        sheet_cell("data"),
        new_code_cell(
            "from IPython.display import Image, Markdown, SVG, display\n"
            f"display(Markdown('*MARKED* $x^2$ \\u4e2d'), Image(data='{picture}'))"
        ),
        new_code_cell("raise ValueError('LET-THROUGH')", metadata={"tags": ["raises-exception"]}),
    ]
    notebook = make_folder(tmp_path, *cells)
    before = {path: path.read_bytes() for path in tmp_path.iterdir()}
    pdf = issue(notebook, tmp_path)
    assert {path: path.read_bytes() for path in tmp_path.iterdir()} == before
    assert notebook == make_folder(tmp_path, *cells)
    text = text_of(pdf)
    order = [
        "RUN FROM-HELPER",
        "0.125",
        "other methods, in the same program",
        "env: OWN_MARK=7",
        "True www",
        "beam.supports[0].kind",
        "MARKED 𝑥",
        "⟨U+4E2D⟩",
        "ValueError: LET-THROUGH",
        "Governing values",
    ]
    assert [text.count(words) for words in order] == [1] * len(order)
    assert sorted(order, key=text.index) == order
    assert "SAVED-BEFORE" not in text
    assert faults(read_back(pdf)) == []


def test_a_failing_cell_stops_the_issue(tmp_path: Path) -> None:
    source = "total = 1\ntotal / 0"
    notebook = make_folder(tmp_path, new_markdown_cell("w"), new_code_cell(source))
    with pytest.raises(OutputFailed) as caught:
        issue(notebook, tmp_path)
    assert str(caught.value) == (
        "calculation.ipynb: cells[1]: ZeroDivisionError: division by zero\n"
        "    total = 1\n    total / 0"
    )


def test_own_code_cannot_put_out_a_sheet(tmp_path: Path) -> None:
    source = "from calcpack import sheet as show\nshow('cover')"
    notebook = make_folder(tmp_path, new_code_cell(source))
    with pytest.raises(InputRefused, match=r"cells\[0\]\.outputs\[0\]: a sheet's output, must "):
        issue(notebook, tmp_path)


def test_a_kernel_that_is_not_there_stops_the_issue(tmp_path: Path) -> None:
    notebook = make_folder(tmp_path, new_code_cell("1"))
    notebook.metadata.kernelspec.name = "no-such-kernel"
    with pytest.raises(OutputFailed, match="no kernel to run its cells"):
        issue(notebook, tmp_path)


def test_own_markdown_is_set_whatever_it_holds(tmp_path: Path) -> None:
    source = (
        "# Head that skips a level\n\n"
        '#read("/etc/passwd") $x$ *y* <script>z</script> \\mathbb{Q} and $\\mathbb{R}$\n\n'
        f"$$\n{' + '.join(f'a_{{{n}}}' for n in range(80))}\n$$\n\n"
        f"Long {'x' * 300} and `{'c' * 300}`\n\n"
        f"| a | b |\n| - | - |\n| {'y' * 200} | 2 |\n\n"
        f"> 1. q\n>\n>    ```\n>    {'z' * 300}\n>    ```\n\n"
        "#### Last"
    )
    pdf = issue(make_folder(tmp_path, new_markdown_cell(source)), tmp_path)
    text = text_of(pdf)
    for words in (
        '#read("/etc/passwd") 𝑥 y <script>z</script> \\mathbb{Q} and $\\mathbb{R}$',
        "x" * 300,
        "c" * 300,
        "y" * 200,
        "z" * 300,
    ):
        assert words.replace(" ", "") in text.replace(" ", "")
    assert faults(read_back(pdf)) == []


def test_the_title_of_a_long_frame_stands_on_every_page_of_it(tmp_path: Path) -> None:
    words = "\n\n".join(f"Paragraph {number}." for number in range(120))
    text = issued_text(make_folder(tmp_path, new_markdown_cell(words), calc=CALC), tmp_path)
    assert text.count(OWN) >= 3
