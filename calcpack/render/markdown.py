r"""Sheets as Markdown with TeX and SVG, as JupyterLab shows it.

A user's text is never markup. Every sign that Markdown knows is escaped; ``$`` and the backslash
stand in code spans, for there JupyterLab looks for no maths (it would, after an escaped sign).
Inside TeX what is no letter, digit or plain mark is written by its code point.
"""

from __future__ import annotations

import base64
import itertools
import re
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from typing import Any

from calcpack.derive.steps import Derivation, Step, number_text
from calcpack.exact.formula import Leaf, Notation, Symbol, Variable, symbols, write
from calcpack.render.svg import to_svg
from calcpack.render.typst import IN_DIGITS
from calcpack.sheets.blocks import (
    Beside,
    Block,
    Column,
    Contents,
    Digits,
    Equation,
    Expression,
    Figure,
    Framed,
    Heading,
    Inline,
    Items,
    Paragraph,
    Picture,
    Preformatted,
    Reference,
    Signatures,
    Styled,
    Table,
    Tex,
    Text,
    Value,
)

SHEET_MIME = "application/vnd.calcpack.sheet+json"
"""What an output of ours says of itself beside its Markdown; see ``stamp``."""
STAMP_FORMAT = 1
KINDS = {"svg": "svg+xml", "jpg": "jpeg"}

IN_TEX = Notation(
    times=r" \, ",
    group=r"\left({}\right)",
    quotient=r"\frac{{{}}}{{{}}}",
    groups_quotient=False,
)
_LINE_BREAK = re.compile("[\n\r\x0b\x0c\x1c-\x1e\x85\u2028\u2029]")
_SIGN = re.compile(r"([$\\]+)|([!-/:-@\[-`{-~])|(^ | $)")
_NOT_TEX = re.compile(r"([^\w ,.;:()+\-=/!?]|_)")


def stamp(name: str, digest: str | None) -> dict[str, Any]:
    """What a sheet's output names: the sheet, and the digest of data and results it was made of.

    ``digest`` is None where calc.toml could not be computed.
    """
    return {"format": STAMP_FORMAT, "sheet": name, "digest": digest}


def to_markdown(blocks: Iterable[Block], derivation: Derivation) -> str:
    """Blocks in the Markdown of JupyterLab; figures are inside, as SVG."""
    return _Writer(derivation).blocks(blocks) + "\n"


def escaped(text: str) -> str:
    r"""Text that is shown as typed, in one line.

    >>> print(escaped("*a* <b> $x$"))
    \*a\* \<b\> `$`x`$`
    """

    def shown(found: re.Match[str]) -> str:
        code, sign, _ = found.groups()
        return f"`{code}`" if code else f"\\{sign}" if sign else "&#32;"

    return _SIGN.sub(shown, _LINE_BREAK.sub(" ", text))


def tex_text(text: str) -> str:
    r"""Text for use in a TeX formula, shown as typed.

    >>> print(tex_text("a_b %"))
    \text{a}\unicode{x5F}\text{b }\unicode{x25}
    """
    return "".join(
        rf"\unicode{{x{ord(part):X}}}" if number % 2 else rf"\text{{{part}}}"
        for number, part in enumerate(_NOT_TEX.split(text))
        if part
    )


@dataclass(frozen=True)
class _Writer:
    derivation: Derivation

    def blocks(self, blocks: Iterable[Block]) -> str:
        return "\n\n".join(part for block in blocks for part in self.block(block))

    def block(self, block: Block) -> Iterator[str]:
        match block:
            case Heading(level, text, group):
                number = f"{group} " if group else ""
                yield f"{'#' * level} {number}{self.text(text)}"
            case Paragraph(text):
                yield self.text(text)
            case Equation(step, lead):
                words = f" {escaped(lead)}" if lead else ""
                yield f"**{step.id}**{words}  \n{_statement(step)}"
            case Figure(drawing):
                yield _image(to_svg(drawing), "svg", drawing.alt)
                yield escaped(drawing.caption)
            case Beside(blocks, figure):
                yield self.blocks((*blocks, figure))
            case Framed(title, blocks):
                yield _prefixed("> ", "> ", f"{escaped(title)}\n\n{self.blocks(blocks)}")
            case Table():
                yield "\n".join(self._table(block))
            case Signatures(people):
                columns = (Column(""), Column("name"), Column("date"))
                rows = tuple(((role,), (name,), (day,)) for role, name, day in people)
                yield from self.block(Table(columns, rows))
            case Contents():
                yield "The sheets with their numbers are listed in the PDF."
            case Preformatted(text):
                fence = "`" * max(3, 1 + max(map(len, re.findall("`+", text)), default=0))
                yield f"{fence}\n{text}\n{fence}"
            case Items(items, start):
                for place, item in enumerate(items, start or 0):
                    mark = "- " if start is None else f"{place}. "
                    yield _prefixed(mark, " " * len(mark), self.blocks(item))
            case Picture(content, kind, alt):
                yield _image(content, kind, alt)

    def _table(self, table: Table) -> Iterator[str]:
        yield _row(self.text(column.head) for column in table.columns)
        yield _row("--:" if column.align == "right" else ":--" for column in table.columns)
        for row in table.rows:
            yield _row(map(self.text, row))

    def text(self, text: Text) -> str:
        """Words in a row are escaped as one, that no two code spans meet."""
        runs = itertools.groupby(map(self._inline, text), lambda piece: piece[1])
        return "".join(
            " ".join(words for words, _ in run)
            if is_markup
            else escaped("".join(words for words, _ in run))
            for is_markup, run in runs
        )

    def _inline(self, part: Inline) -> tuple[str, bool]:
        """An inline part, and whether it is Markdown already."""
        match part:
            case str():
                return part, False
            case Value(value, decimals, unit):
                return f"{_minus(number_text(value, decimals))} {unit}".rstrip(), False
            case Digits(formula):
                return write(formula, IN_DIGITS, self._digits), False
            case Reference(_, text):
                return text, False
            case Tex(source):
                return f"${source}$", False
            case Styled(text):
                return self.text(text), True
            case Symbol():
                return f"${_symbol(part)}$", True
            case Expression(formula):
                return f"${write(formula, IN_TEX, _leaf)}$", True

    def _digits(self, leaf: Leaf | Variable) -> str:
        return _minus(self.derivation.digits(leaf))


def _statement(step: Step) -> str:
    right = write(step.formula, IN_TEX, _leaf)
    left = rf"\sum {_symbol(step.left)}" if step.balance else _symbol(step.left)
    return rf"$\displaystyle {left} = {right}{' = 0' * step.balance}$"


def _leaf(leaf: Leaf | Variable) -> str:
    return symbols(leaf) if leaf.symbol is None else _symbol(leaf.symbol)


def _symbol(symbol: Symbol) -> str:
    letter = symbol.letter.removeprefix("Σ")
    index = ",".join(part for part in (symbol.index, symbol.face) if part)
    below = f"_{{{tex_text(index)}}}" if index else ""
    place = f"({tex_text(symbol.place)})" if symbol.place else ""
    return f"{letter}{below}{place}"


def _minus(digits: str) -> str:
    return digits.replace("-", "−")


def _image(content: bytes, kind: str, alt: str) -> str:
    data = base64.b64encode(content).decode("ascii")
    return f"![{escaped(alt)}](data:image/{KINDS.get(kind, kind)};base64,{data})"


def _row(cells: Iterable[str]) -> str:
    return f"| {' | '.join(cells)} |"


def _prefixed(first: str, other: str, text: str) -> str:
    begun, *rest = text.split("\n")
    return "\n".join((f"{first}{begun}", *(f"{other}{line}".rstrip() for line in rest)))
