"""Blocks as Typst: what the typesetter prints is what was typed."""

from __future__ import annotations

import io

import pypdfium2 as pdfium  # type: ignore[import-untyped]
import pytest
import typst
from hypothesis import given, settings
from hypothesis import strategies as st
from PIL import Image

from calcpack.derive.steps import Derivation
from calcpack.export.templates import template_folder
from calcpack.render.typst import literal, printable, to_typst
from calcpack.sheets.blocks import (
    Block,
    Framed,
    Inline,
    Items,
    Paragraph,
    Picture,
    Preformatted,
    Styled,
    Tex,
)
from calcpack.sheets.lettering import font_folder

NOTHING = Derivation((), {})
HOSTILE = (
    r"""#read("/etc/passwd") $x$ *y* _z_ `c` <label> @ref \u{41} "q" ~ // -- ... = - + [b] {c}"""
)
TYPED = st.text(st.sampled_from(" ab1#$*_`<>@\\\"~/-.=+[]{}()'&%^|"), max_size=30)


def compiled(*blocks: Block) -> bytes:
    """The blocks alone, with the functions of the package's layout."""
    source = to_typst(blocks, NOTHING)
    main = f'#import "package.typ": *\n#set document(title: "t")\n{source.text}'
    layout = (template_folder() / "package.typ").read_bytes()
    files = {"main.typ": main.encode(), "package.typ": layout, **source.files}
    pdf = typst.compile(
        files,  # type: ignore[call-overload]
        font_paths=[str(font_folder())],
        ignore_system_fonts=True,
        pdf_standards=["a-3a", "ua-1"],
    )
    assert isinstance(pdf, bytes)
    return pdf


def lines_of(*blocks: Block) -> list[str]:
    with pdfium.PdfDocument(compiled(*blocks)) as document:
        pages = [page.get_textpage().get_text_range() for page in document]
    return [line.strip() for line in "\n".join(pages).replace("\u200b", "").splitlines()]


@pytest.mark.parametrize(
    "block",
    [
        Paragraph((HOSTILE,)),
        Paragraph((Styled((HOSTILE,), "strong"),)),
        Paragraph((Styled((HOSTILE,), "emphasis"),)),
        Paragraph((Styled((HOSTILE,), "code"),)),
        Preformatted(HOSTILE),
        Framed("", (Items(((Paragraph((HOSTILE,)),),)),)),
    ],
)
def test_hostile_text_is_printed_as_typed(block: Block) -> None:
    printed = "".join(lines_of(block)).replace(" ", "").removeprefix("•")
    assert printed == HOSTILE.replace(" ", "")


@settings(max_examples=20, deadline=None)
@given(st.lists(TYPED, min_size=10, max_size=20))
def test_any_text_is_printed_as_typed(texts: list[str]) -> None:
    styles: list[Inline] = [Styled((f"({text})",), "code") for text in texts]
    printed = "".join(lines_of(Paragraph(tuple(styles))))
    assert printed.replace(" ", "") == "".join(f"({text})" for text in texts).replace(" ", "")


@given(st.text(max_size=40))
def test_a_literal_is_one_string_of_the_typesetter(text: str) -> None:
    """Nothing ends the string before its end: every quote and backslash inside is escaped."""
    inside = literal(text)[1:-1]
    rest = inside.replace("\\\\", "").replace('\\"', "")
    assert '"' not in rest
    assert "\n" not in inside
    assert all(part.startswith("u{") for part in rest.split("\\")[1:])


def test_a_hard_break_breaks_the_line() -> None:
    assert lines_of(Paragraph(("one\ntwo",))) == ["one", "two"]


def test_lists_have_their_numbers() -> None:
    inner = Items(((Paragraph(("c",)),),))
    numbered = Items(((Paragraph(("a",)),), (Paragraph(("b",)), inner)), 9)
    assert lines_of(numbered) == ["9. a", "10. b", "• c"]
    assert lines_of(Items(((Paragraph(("zero",)),),), 0)) == ["0. zero"]


def test_a_formula_is_set_or_shown_as_typed() -> None:
    inside, outside = Tex(r"\frac{1}{2}"), Tex(r"\mathbb{R}", display=True)
    assert "".join(lines_of(Paragraph((inside,)))) == "12"
    assert lines_of(Paragraph((outside,))) == [r"$$\mathbb{R}$$"]


def test_a_display_formula_that_is_too_wide_is_set_smaller() -> None:
    wide = Tex("+".join(["x"] * 150), display=True)
    with pdfium.PdfDocument(compiled(Paragraph((wide,)))) as document:
        page = document[0].get_textpage()
        boxes = [page.get_charbox(number) for number in range(page.count_chars())]
        width = document[0].get_width()
        printed = page.get_text_range()
    assert printed.count("𝑥") == 150
    assert min(box[0] for box in boxes) > 60
    assert max(box[2] for box in boxes) < width - 60


@pytest.mark.parametrize("size", [(40, 30), (3000, 300), (300, 6000)])
@pytest.mark.parametrize("kind", ["png", "jpg", "svg"])
def test_a_picture_fits_on_the_page(kind: str, size: tuple[int, int]) -> None:
    content = io.BytesIO()
    width, height = size
    if kind == "svg":
        content.write(
            f'<svg xmlns="http://www.w3.org/2000/svg" width="{width}" height="{height}">'
            f'<rect width="{width}" height="{height}"/></svg>'.encode()
        )
    else:
        Image.new("L", size).save(content, {"png": "PNG", "jpg": "JPEG"}[kind])
    picture = Picture(content.getvalue(), kind, "black")  # type: ignore[arg-type]
    with pdfium.PdfDocument(compiled(picture)) as document:
        assert len(document) == 1
        image = document[0].render(scale=2).to_pil().convert("L")
    left, top, right, bottom = image.point(lambda grey: 255 - grey).getbbox()
    assert min(left, top, image.width - right, image.height - bottom) > 120
    assert (right - left) / (bottom - top) == pytest.approx(width / height, rel=0.1)


def test_a_character_that_cannot_be_seen_is_written_as_its_number() -> None:
    assert printable("a\u4e2d\x07\nb\u202e") == "a⟨U+4E2D⟩⟨U+0007⟩\nb⟨U+202E⟩"
    assert lines_of(Preformatted("a\u4e2d")) == ["a⟨U+4E2D⟩"]
