"""The engineer's own Markdown as blocks."""

from __future__ import annotations

import pytest

from calcpack.export.own_markdown import markdown_blocks
from calcpack.sheets.blocks import (
    Block,
    Column,
    Framed,
    Inline,
    Items,
    Paragraph,
    Preformatted,
    Styled,
    Table,
    Tex,
)


def words(*text: Inline) -> Paragraph:
    return Paragraph(text)


@pytest.mark.parametrize(
    ("source", "block"),
    [
        ("# Head", Paragraph((Styled(("Head",), "strong"),), leads=True)),
        ("###### Deep", Paragraph((Styled(("Deep",), "strong"),), leads=True)),
        ("two\nlines", words("two", " ", "lines")),
        ("hard  \nbreak", words("hard", "\n", "break")),
        ("**a** *b* `c`", words(
            Styled(("a",), "strong"), " ", Styled(("b",), "emphasis"), " ", Styled(("c",), "code")
        )),
        ("[here](http://a.example/x?y=1)", words("here", " (http://a.example/x?y=1)")),
        ("<http://a.example>", words("http://a.example")),
        ("![a *picture*](x.png)", words("[picture not shown: a picture]")),
        ("<b>x</b> &amp; &copy;", words("<b>x</b> & ©")),
        ("***", words("***")),
        ("- a\n- b", Items(((words("a"),), (words("b"),)))),
        ("4) a\n   1. b", Items(((words("a"), Items(((words("b"),),), 1)),), 4)),
        ("```python\nx = 1\n\n```", Preformatted("x = 1\n")),
        ("    code", Preformatted("code")),
        ("> q", Framed("Quotation", (words("q"),))),
        ("| a | **b** |\n| - | -: |\n| 1 | `22` |", Table(
            (Column("a", "left", 1), Column("b", "right", 2)),
            ((("1",), (Styled(("22",), "code"),)),),
        )),
    ],
)  # fmt: skip
def test_markdown_as_a_block(source: str, block: Block) -> None:
    assert markdown_blocks(source) == (block,)


@pytest.mark.parametrize(
    ("source", "text"),
    [
        ("of $a_b*c*$ and", ("of ", Tex("a_b*c*"), " and")),
        ("$$a$$ inside", (Tex("a", True), " inside")),
        ("$$a\n= b\n- c$$", (Tex("a\n= b\n- c", True),)),
        (r"$a \$ b$", (Tex(r"a \$ b"),)),
        ("costs $5 and $6", ("costs $5 and $6",)),
        ("from $5 to 6$ or", ("from ", Tex("5 to 6"), " or")),
        ("a $ b $ c", ("a $ b $ c",)),
        (r"\$a\$", ("$a$",)),
        ("$a", ("$a",)),
        ("$$a$", ("$$a$",)),
        ("`$a$`", (Styled(("$a$",), "code"),)),
    ],
)
def test_maths_in_dollar_signs(source: str, text: tuple[Inline, ...]) -> None:
    assert markdown_blocks(source) == (Paragraph(text),)


def test_maths_on_lines_of_its_own_ends_a_paragraph_and_holds_no_markdown() -> None:
    assert markdown_blocks("before\n$$\na\n= b\n- c\n# d\n$$\nafter") == (
        words("before"),
        words(Tex("a\n= b\n- c\n# d", True)),
        words("after"),
    )
    assert markdown_blocks("- x\n\n  $$\n  y\n  $$\n- z") == (
        Items(((words("x"), words(Tex("y", True))), (words("z"),))),
    )
    assert markdown_blocks("$$\na\n\nb\n$$") == (words("$$", " ", "a"), words("b", " ", "$$"))


@pytest.mark.parametrize("depth", [3, 17, 30, 400])
def test_however_deep_nothing_is_lost(depth: int) -> None:
    source = "> " * depth + "WORDS"
    assert repr(markdown_blocks(source)).count("WORDS") == 1
