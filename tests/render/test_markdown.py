"""Sheets as Markdown: user text is shown as typed, whatever it holds, and no step is left out."""

from __future__ import annotations

import base64
import re
import xml.etree.ElementTree as ET
from dataclasses import replace
from fractions import Fraction
from pathlib import Path

import pytest
from hypothesis import example, given
from hypothesis import strategies as st
from markdown_it import MarkdownIt
from markdown_it.token import Token

from calcpack import read_file, solve
from calcpack.derive.steps import Derivation, Step
from calcpack.exact.formula import Formula, Leaf, Symbol, Variable
from calcpack.export.own_markdown import markdown_blocks
from calcpack.render.markdown import escaped, tex_text, to_markdown
from calcpack.sheets.blocks import (
    Beside,
    Block,
    Column,
    Digits,
    Equation,
    Expression,
    Figure,
    Framed,
    Heading,
    Paragraph,
    Picture,
    Preformatted,
    Signatures,
    Styled,
    Table,
    Tex,
    Value,
)
from calcpack.sheets.drawing import Drawing
from calcpack.sheets.pages import SHEET_NAMES, make_sheet

EXAMPLES = Path(__file__).parent.parent.parent / "example_projects"
NOTHING = Derivation((), {})


class Reader(MarkdownIt):
    """All that JupyterLab's Markdown knows, HTML as well, but for maths and bare links."""

    def validateLink(self, url: str) -> bool:  # noqa: N802
        return True  # images inside the text are SVG, which the parser shuns of itself


READER = Reader("commonmark").enable(["table", "strikethrough"])

HOSTILE = [
    "$x$",
    "$$x$$ and \\(y\\) \\[z\\]",
    "\\begin{align}x\\end{align}",
    '<img src=x onerror="alert(1)">',
    "<script>alert(1)</script>",
    "&lt; &#36; &copy;",
    "*a* **b** _c_ __d__ ~~e~~",
    "`code` ``two`` `",
    "[text](javascript:alert(1)) ![alt](x.png)",
    "# head",
    "- item",
    "1. item",
    "> quoted",
    "a | b || c",
    "http://example.org/?a=1&b=2 www.example.org a@example.org",
    "ends in a backslash \\",
    "\\\\",
    "    indented",
    "@@0@@",
    "```\nfence",
    "===",
    "---",
]
TYPED = st.text(st.sampled_from("ab1 $\\`*_{}[]()<>#+-.!|&~=:@\"'/\n"), min_size=1, max_size=20)


def inline_tokens(markdown: str) -> list[Token]:
    """The innermost tokens of a Markdown text."""
    return [
        leaf for token in READER.parse(markdown) for leaf in token.children or [] if leaf.content
    ]


def shown(markdown: str) -> str:
    """The text that a Markdown text shows; it must show text only.

    JupyterLab looks for maths in what Markdown leaves, but not in code: no sign of TeX may be
    left outside code.
    """
    tokens = inline_tokens(markdown)
    for token in tokens:
        assert token.type in ("text", "code_inline"), token
        if token.type == "text":
            assert not re.search(r"[$\\]", token.content), token
    return "".join(token.content for token in tokens)


def types(markdown: str) -> list[str]:
    return [token.type for token in READER.parse(markdown)]


def as_shown(typed: str) -> str:
    """Text as Markdown can show it: on one line, without the spaces at its end."""
    return typed.replace("\n", " ")


@pytest.mark.parametrize("typed", HOSTILE)
def test_hostile_text_is_shown_as_typed(typed: str) -> None:
    assert shown(escaped(typed)) == as_shown(typed)


@given(TYPED)
@example("`$`")
@example("\\`\\")
@example(" $ ")
def test_any_text_is_shown_as_typed_wherever_it_stands(typed: str) -> None:
    table = Table((Column("x"), Column(typed)), (((typed,), ("y",)),))
    for block, kinds in (
        (
            Paragraph((typed, Value(Fraction(1), 0))),
            ["paragraph_open", "inline", "paragraph_close"],
        ),
        (Heading(2, ("0", typed, "1")), ["heading_open", "inline", "heading_close"]),
    ):
        markdown = to_markdown([block], NOTHING)
        assert types(markdown) == kinds
        assert as_shown(typed) in shown(markdown)
    markdown = to_markdown([table], NOTHING)
    cells = [token.children or [] for token in READER.parse(markdown) if token.type == "inline"]
    assert len(cells) == 4
    texts = ["".join(leaf.content for leaf in cell) for cell in cells]
    assert [texts[1], texts[2]] == [as_shown(typed)] * 2


@given(TYPED)
def test_a_name_in_a_formula_is_typed_letter_by_letter(typed: str) -> None:
    tex = tex_text(typed)
    parts = re.findall(r"\\text\{([^\\{}$_%#&~^<>`*|\[\]\"']+)\}|\\unicode\{x([0-9A-F]+)\}", tex)
    assert "".join(text or chr(int(code, 16)) for text, code in parts) == typed
    assert len(tex) == sum(len(t) + 7 if t else len(c) + 11 for t, c in parts)


def step(formula: Formula, balance: bool = False) -> Step:
    return Step("key", "4.2", Symbol("R", "A*"), formula, None, "force", balance=balance)


def test_an_equation_in_tex() -> None:
    x, a = Variable(Symbol("x")), Variable(Symbol("x", "h_1"))
    blocks = [Equation(step((x - a) / (a * x)), "Load on *h_1*"), Equation(step(x, balance=True))]
    index, place = r"\text{A}\unicode{x2A}", r"\text{h}\unicode{x5F}\text{1}"
    assert to_markdown(blocks, NOTHING).splitlines() == [
        r"**4.2** Load on \*h\_1\*  ",
        rf"$\displaystyle R_{{{index}}} = \frac{{x - x_{{{place}}}}}{{x_{{{place}}} \, x}}$",
        "",
        "**4.2**  ",
        rf"$\displaystyle \sum R_{{{index}}} = x = 0$",
    ]


def test_formulas_and_digits_within_text() -> None:
    length = Leaf(Fraction(5, 2), Symbol("L"), "beam.length")
    derivation = Derivation((), {"beam.length": 2})
    text = (Symbol("V", "B", "left"), Expression(length / length), ": ", Digits(-length))
    (line,) = to_markdown([Paragraph(text)], derivation).splitlines()
    assert line == r"$V_{\text{B,left}}$ $\frac{L}{L}$\: −2\.50"


def test_every_sheet_of_an_example_shows_its_steps_and_figures() -> None:
    solution = solve(read_file(EXAMPLES / "service_trestle" / "calc.toml"))
    text, pictures, figures = "", 0, 0
    for name in SHEET_NAMES:
        sheet = make_sheet(name, solution)
        markdown = to_markdown(sheet.blocks, solution.derivation)
        assert not [token for token in READER.parse(markdown) if "html" in token.type]
        for token in inline_tokens(markdown):
            assert token.type in ("text", "code_inline", "image"), token
            if token.type == "image":
                kind, data = str(token.attrs["src"]).split(",")
                assert kind == "data:image/svg+xml;base64"
                assert ET.fromstring(base64.b64decode(data)).tag.endswith("svg")
                pictures += 1
        figures += sum(count_figures(block) for block in sheet.blocks)
        text += shown_roughly(markdown)
    assert pictures == figures > 10
    steps = solution.derivation.steps
    assert len(steps) > 50
    for one in steps:
        assert re.search(rf"(?<![\d.]){re.escape(one.id)}(?![\d.])", text), one.id
        if one.value is not None:
            digits = solution.derivation.result(one).replace("-", "−")
            assert digits in text, one.key


def count_figures(block: Block) -> int:
    match block:
        case Figure():
            return 1
        case Beside(blocks):
            return 1 + sum(map(count_figures, blocks))
    return 0


def shown_roughly(markdown: str) -> str:
    return " ".join(token.content for token in inline_tokens(markdown) if token.type != "image")


def test_signatures_are_a_table_of_names() -> None:
    markdown = to_markdown([Signatures((("Prepared", "A|B", "2026-03-02"),))], NOTHING)
    assert [token.content for token in inline_tokens(markdown)] == [
        *("name", "date"),
        *("Prepared", "A|B", "2026-03-02"),
    ]


def test_preformatted_text_keeps_its_lines_and_its_fences() -> None:
    typed = "a  $b$\n```\n````x\n<b>"
    (fence,) = READER.parse(to_markdown([Preformatted(typed)], NOTHING))
    assert (fence.type, fence.content) == ("fence", typed + "\n")


def test_a_figure_has_its_words_and_its_caption() -> None:
    drawing = Drawing((), 10.0, 10.0, "Line of *M*", "A [line] $x$")
    image, caption = inline_tokens(to_markdown([Figure(drawing)], NOTHING))
    assert image.type == "image"
    assert "".join(child.content for child in image.children or []) == "A [line] $x$"
    assert caption.content == "Line of *M*"


def test_lists_tables_and_frames_are_read_back_as_the_same_blocks() -> None:
    source = """3. one
4. two

   - inner
   - last

> quoted
>
> | a | b |
> | - | -: |
> | 1 | *2* |
"""
    numbered, framed = markdown_blocks(source)
    assert isinstance(framed, Framed)
    again = markdown_blocks(to_markdown([numbered, framed], NOTHING))
    title = Paragraph((framed.title,))
    (word, table) = framed.blocks
    assert isinstance(table, Table)
    bare = replace(table, rows=((("1",), ("2",)),))
    assert again == (numbered, Framed(framed.title, (title, word, bare)))


def test_a_formula_and_a_picture_of_the_engineers_own() -> None:
    blocks: list[Block] = [
        Paragraph((Styled(("see",), "strong"), Tex("a_b"))),
        Picture(b"\xff", "jpg", "alt"),
    ]
    markdown = to_markdown(blocks, NOTHING)
    text, image = markdown.rstrip().split("\n\n")
    assert shown(text) == "see$a_b$"
    assert image == "![alt](data:image/jpeg;base64,/w==)"
