"""Sheets as Typst source; numbers are rounded here and user text passes as string literals only."""

from __future__ import annotations

import json
import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field

from calcpack.derive.steps import Derivation, Step, number_text
from calcpack.exact.formula import PLAIN, Leaf, Notation, Symbol, Variable, symbols, write
from calcpack.intake.shown import unprintable
from calcpack.render.svg import to_svg
from calcpack.render.tex import tex_to_typst
from calcpack.sheets.blocks import (
    Beside,
    Block,
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
    Sheet,
    Signatures,
    Styled,
    Table,
    Tex,
    Text,
    Value,
)
from calcpack.sheets.lettering import has_glyph

WIDEST = 24
"""A column without a share of its own gets one if a cell in it takes more characters of source."""

TOO_TALL = 4000
"""Source of a cell beyond which its row may be parted by a page's end."""

IN_MATH = Notation(
    plus=" + ",
    minus=" - ",
    negative="-",
    times=" thin ",
    group="({})",
    quotient="frac({}, {})",
    groups_quotient=False,
)
IN_LINE = Notation(times=" dot.op ", group="\\({}\\)", quotient="{} \\/ {}")
IN_DIGITS = Notation(" + ", " − ", "−", " × ", "({})", "{} ÷ {}")


@dataclass(frozen=True)
class Source:
    """Typst source and the files it refers to, by name."""

    text: str
    files: Mapping[str, bytes]


@dataclass
class _Writer:
    """Writes blocks of one package; collects the figures as files."""

    derivation: Derivation
    files: dict[str, bytes] = field(default_factory=dict)

    def block(self, block: Block) -> Iterator[str]:
        match block:
            case Heading(level, text, group):
                yield f"#calc-heading({level}, {group or 'none'})[{self.text(text)}]"
            case Paragraph(text, leads):
                yield f"#calc-paragraph({str(leads).lower()})[{self.text(text)}]"
            case Equation(step, lead):
                yield f"#calc-equation({literal(step.id)}, {literal(lead)})[{_statement(step)}]"
            case Figure(drawing):
                name = f"figure-{len(self.files) + 1}.svg"
                self.files[name] = to_svg(drawing)
                caption, alt = literal(drawing.caption), literal(drawing.alt)
                yield f"#calc-figure({literal(name)}, {caption}, {alt})"
            case Beside(blocks, figure):
                left = "\n".join(line for one in blocks for line in self.block(one))
                right = "\n".join(self.block(figure))
                yield f"#calc-beside[\n{left}\n][\n{right}\n]"
            case Framed(title, blocks):
                inside = "\n".join(line for one in blocks for line in self.block(one))
                yield f"#calc-framed({literal(title)})[\n{inside}\n]"
            case Table():
                yield from self._table(block)
            case Signatures(people):
                signed = ", ".join(
                    f"({literal(role)}, {literal(name)}, {literal(day)})"
                    for role, name, day in people
                )
                yield f"#calc-signatures({signed})"
            case Contents(revision):
                yield f"#calc-contents({literal(revision)})"
            case Preformatted(text):
                yield f"#calc-preformatted({literal(printable(text))})"
            case Items(items, start):
                yield f"#calc-items({'none' if start is None else start},"
                for item in items:
                    yield from ("[", *(line for one in item for line in self.block(one)), "],")
                yield ")"
            case Picture(content, kind, alt):
                # As numbers, for the typesetter takes no file in memory that is not UTF-8.
                name = f"picture-{len(self.files) + 1}.json"
                self.files[name] = json.dumps(list(content)).encode()
                yield f"#calc-picture({literal(name)}, {literal(kind)}, {literal(alt)})"

    def _table(self, table: Table) -> Iterator[str]:
        widths = ", ".join(self._width(table, number) for number in range(len(table.columns)))
        aligns = ", ".join(column.align for column in table.columns)
        head = "".join(f"[{self.text(column.head)}], " for column in table.columns)
        if not any(column.title for column in table.columns):
            head = ""
        rows = [[self.text(cell) for cell in row] for row in table.rows]
        whole = all(len(cell) < TOO_TALL for row in rows for cell in row)
        stated = {"ticked": table.ticked, "whole": whole, "ruled": table.ruled}
        flags = ", ".join(f"{name}: {str(flag).lower()}" for name, flag in stated.items())
        yield f"#calc-table(({widths},), ({aligns},), ({head}), {flags},"
        for row in rows:
            yield "  " + ", ".join(f"[{cell}]" for cell in row) + ","
        yield ")"

    def _width(self, table: Table, number: int) -> str:
        """A column's share as asked for; else what its cells need, unless one of them is long."""
        width = table.columns[number].width
        cells = (row[number] for row in table.rows)
        texts = (part for cell in cells for part in cell if isinstance(part, str | Value))
        narrow = all(len(self._inline(part)) <= WIDEST for part in texts)
        return f"{width}fr" if width else "auto" if narrow else "1fr"

    def text(self, text: Text) -> str:
        return "".join(self._inline(part) for part in text)

    def _inline(self, part: Inline) -> str:
        match part:
            case str():
                return f"#{literal(part)};" if part else ""
            case Reference(group, text):
                return f"#calc-reference({group}, {literal(text)});"
            case Styled(text, style):
                return f"#calc-{style}[{self.text(text)}];"
            case Tex(source, display):
                return _own_formula(source, display)
            case Symbol():
                return _equation(_symbol(part), str(part))
            case Value(value, decimals, unit):
                digits = number_text(value, decimals).replace("-", "−")
                return f"#{literal(f'{digits} {unit}'.rstrip())};"
            case Digits(formula):
                return f"#{literal(write(formula, IN_DIGITS, self._digits))};"
            case Expression(formula):
                return _equation(
                    write(formula, IN_LINE, _math_leaf), write(formula, PLAIN, symbols)
                )

    def _digits(self, leaf: Leaf | Variable) -> str:
        return self.derivation.digits(leaf).replace("-", "−")


def to_typst(parts: Sequence[Sheet | Block], derivation: Derivation) -> Source:
    """The body of the package, without empty sheets; the template gives the functions it calls."""
    writer = _Writer(derivation)
    lines = []
    for part in parts:
        if isinstance(part, Sheet) and not part.blocks:
            continue
        if isinstance(part, Sheet):
            lines.append(f"#calc-sheet({literal(part.title)})")
        for block in part.blocks if isinstance(part, Sheet) else (part,):
            lines.extend(writer.block(block))
    return Source("\n".join(lines), writer.files)


def printable(text: str) -> str:
    """The text with each character that is unseen or that no font has as its code point.

    >>> printable("a\u4e2d")
    'a⟨U+4E2D⟩'
    """
    return "".join(
        one if one in "\n\t" or (has_glyph(one) and not unprintable(one)) else f"⟨U+{ord(one):04X}⟩"
        for one in text
    )


def literal(text: str) -> str:
    """A Typst string literal that shows the text as typed.

    >>> literal('#read("x")')
    '"#read(\\\\"x\\\\")"'
    """
    escaped = re.sub(
        r'[\\"\x00-\x1f\x7f\u2028\u2029]',
        lambda match: f"\\{match[0]}" if match[0] in '\\"' else f"\\u{{{ord(match[0]):x}}}",
        text,
    )
    return f'"{escaped}"'


def _statement(step: Step) -> str:
    right = write(step.formula, IN_MATH, _math_leaf)
    summed = step.left.letter.startswith("Σ")
    left = f"sum {_symbol(step.left)}" if summed else _symbol(step.left)
    return _equation(f"{left} = {right}" + " = 0" * step.balance, step.symbols)


def _equation(math: str, words: str) -> str:
    return f"#calc-math({literal(words)}, $ {math} $);"


def _own_formula(source: str, display: bool) -> str:
    """A formula in TeX; what lies outside the subset is shown as typed, never guessed."""
    math = tex_to_typst(source)
    if math is None:
        mark = "$$" if display else "$"
        return f"#calc-code[#{literal(mark + source + mark)};];"
    return f"#calc-{'display' if display else 'math'}({literal(source)}, $ {math} $);"


def _math_leaf(leaf: Leaf | Variable) -> str:
    return symbols(leaf) if leaf.symbol is None else _symbol(leaf.symbol)


def _symbol(symbol: Symbol) -> str:
    letter = symbol.letter.removeprefix("Σ")
    if len(letter) > 1:
        letter = f"italic({literal(letter)})"
    index = ",".join(part for part in (symbol.index, symbol.face) if part)
    math = f"{letter}_{literal(index)}" if index else letter
    return f"{math} ({literal(symbol.place)})" if symbol.place else math
