"""The subset of TeX maths: what is in it, what is not, and that nothing is added or lost."""

from __future__ import annotations

import random
import unicodedata

import pypdfium2 as pdfium  # type: ignore[import-untyped]
import pytest
import typst

from calcpack.render.tex import SIGNS, tex_to_typst

# Tokens with what they must leave on the page.
PIECES = [
    ("x", "x"),
    ("{ab}", "ab"),
    ("12", "12"),
    ("1.5", "1.5"),
    ("+", "+"),
    ("=", "="),
    (r"\frac{a}{b}", "ab"),
    (r"\frac1c", "1c"),
    (r"\sqrt{d}", "d"),
    (r"\sqrt[3]{e}", "3e"),
    (r"f_{i}^{j}", "fij"),
    ("g_k", "gk"),
    ("h^2", "h2"),
    ("(", "("),
    (r"\left[ \frac{m}{n} \right)", "mn"),
    (r"\text{kN m}", "kNm"),
    (r"\mathrm{max}", "max"),
    (r"\max", "max"),
    (r"\,", ""),
    (",", ","),
]


def letters_of(pdf: bytes) -> str:
    """Letters and digits of the pages, sorted; slanted letters taken as plain ones (NFKC)."""
    with pdfium.PdfDocument(pdf) as document:
        text = "".join(page.get_textpage().get_text_range() for page in document)
    return "".join(sorted(filter(str.isalnum, unicodedata.normalize("NFKC", text))))


def compiled(*formulas: str) -> bytes:
    body = "\n\n".join(f'#math.equation(alt: "t", ${formula}$.body)' for formula in formulas)
    source = f'#set document(title: "t")\n{body}'
    files = {"main.typ": source.encode()}
    standards = ["a-3a", "ua-1"]
    pdf = typst.compile(files, format="pdf", pdf_standards=standards)  # type: ignore[call-overload]
    assert isinstance(pdf, bytes)
    return pdf


def test_any_formula_of_the_subset_compiles_and_keeps_its_letters() -> None:
    chosen = random.Random(11)
    formulas: list[str] = []
    due = ""
    while len(formulas) < 300:
        pieces = chosen.choices(PIECES, k=chosen.randint(1, 8))
        math = tex_to_typst(" ".join(tex for tex, _ in pieces))
        assert math is not None, pieces
        formulas.append(math)
        due += "".join(words for _, words in pieces)
    assert letters_of(compiled(*formulas)) == "".join(sorted(filter(str.isalnum, due)))


def test_any_text_compiles_or_lies_outside() -> None:
    chosen = random.Random(12)
    tokens = r"\frac \sqrt \sqrt[3] \left( \right) \left. \text{a} \sum \, \{ \} { } ( ) [ ] | ^ _"
    signs = [*tokens.split(), *"'ab12.+-=<>*/,! "]
    found = [tex_to_typst("".join(chosen.choices(signs, k=6))) for _ in range(5000)]
    inside = [math for math in found if math is not None]
    assert 300 < len(inside) < 4000
    compiled(*inside)


def test_greek_letters_are_those_of_their_names() -> None:
    checked = 0
    for name, sign in SIGNS.items():
        kind = "CAPITAL" if name[:1].isupper() else "SMALL"
        spelled = {"Lambda": "LAMDA", "lambda": "LAMDA"}.get(name, name.upper())
        try:
            letter = unicodedata.lookup(f"GREEK {kind} LETTER {spelled}")
        except KeyError:
            continue
        # Of two shapes TeX takes the plain name for the symbol and "var" for the letter.
        assert sign == {"epsilon": "ϵ", "phi": "ϕ"}.get(name, letter)
        checked += 1
    assert checked > 30


@pytest.mark.parametrize(
    ("tex", "math"),
    [
        (r"\frac{w L^2}{8}", "frac(w attach(L, t: 2), 8)"),
        (r"x^12", "attach(x, t: 1) 2"),
        (r"f'_c", "attach(f, t: ′, b: c)"),
        (r"\left. M \right|_{0}^{L}", r"attach(lr( M \|), t: L, b: 0)"),
        (r"a \le b - c", "a ≤ b - c"),
        ("", '""'),
    ],
)
def test_formulas_of_the_subset(tex: str, math: str) -> None:
    assert tex_to_typst(tex) == math


@pytest.mark.parametrize(
    "tex",
    [
        r"\mathbb{R}",
        r"\input{/etc/passwd}",
        r"\begin{matrix} a & b \end{matrix}",
        r"a \\ b",
        r"\text{a $b$}",
        r'\text{a"#read("x")}',
        "#read",
        '"',
        "a^b^c",
        "^2",
        "{",
        "}",
        r"\frac{a}",
        r"\left( a",
        r"a \right)",
        "a % b",
        "{" * 30 + "a" + "}" * 30,
        "√x",
    ],
)
def test_what_lies_outside_is_not_guessed(tex: str) -> None:
    assert tex_to_typst(tex) is None
