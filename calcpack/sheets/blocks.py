"""The closed set of blocks that a sheet is made of; numbers in them are still exact."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from calcpack.derive.steps import Step
from calcpack.exact.formula import Formula, Symbol
from calcpack.sheets.drawing import Drawing


@dataclass(frozen=True)
class Value:
    """A number and the decimals it is printed with (None: as a fraction)."""

    value: Fraction
    decimals: int | None
    unit: str = ""


@dataclass(frozen=True)
class Digits:
    """A formula with printed digits put in."""

    formula: Formula


@dataclass(frozen=True)
class Expression:
    """A formula in symbols."""

    formula: Formula


@dataclass(frozen=True)
class Reference:
    """A step or group elsewhere in the package, with the sheet where it stands."""

    group: int
    text: str


@dataclass(frozen=True)
class Styled:
    """Text set apart from what stands around it."""

    text: Text
    style: Literal["strong", "emphasis", "code"]


@dataclass(frozen=True)
class Tex:
    """A formula of the engineer's own, as typed in TeX; ``display``: on a line of its own."""

    source: str
    display: bool = False


Inline = str | Symbol | Value | Digits | Expression | Reference | Styled | Tex
Text = tuple[Inline, ...]
"""A run of text; a plain string in it is shown as typed, never read as markup."""


@dataclass(frozen=True)
class Heading:
    """``group`` is the number of the group of steps that it opens, if it opens one."""

    level: int
    text: Text
    group: int | None = None


@dataclass(frozen=True)
class Paragraph:
    """``leads`` where it belongs to what follows and must not be parted from it by a page's end."""

    text: Text
    leads: bool = False


@dataclass(frozen=True)
class Column:
    """``width`` in parts of what the narrow columns leave; None: as wide as it needs."""

    title: str | Symbol
    align: Literal["left", "right"] = "left"
    width: int | None = None
    unit: str = ""

    @property
    def head(self) -> Text:
        return (self.title, f", {self.unit}" if self.unit else "")


@dataclass(frozen=True)
class Table:
    """``ticked`` adds a column of boxes for the checker; ``ruled`` lines to write on by hand."""

    columns: tuple[Column, ...]
    rows: tuple[tuple[Text, ...], ...]
    ticked: bool = False
    ruled: bool = False


@dataclass(frozen=True)
class Equation:
    """A step stated in symbols, with its number; ``lead`` says in words what it is."""

    step: Step
    lead: str = ""


@dataclass(frozen=True)
class Figure:
    drawing: Drawing


@dataclass(frozen=True)
class Beside:
    """Blocks on the left, a figure on the right of them."""

    blocks: tuple[Block, ...]
    figure: Figure


@dataclass(frozen=True)
class Framed:
    """The engineer's own words or output, set apart by a frame with a title."""

    title: str
    blocks: tuple[Block, ...]


@dataclass(frozen=True)
class Signatures:
    """Lines to sign, (role, name, date) each, beside an empty box for a seal."""

    lines: tuple[tuple[str, str, str], ...]


@dataclass(frozen=True)
class Contents:
    """The table of contents with sheet numbers, and the sheets in effect with their revision."""

    revision: str


@dataclass(frozen=True)
class Preformatted:
    """Text as it stands, line by line."""

    text: str


@dataclass(frozen=True)
class Items:
    """A list, numbered from ``start``; None: with bullets."""

    items: tuple[tuple[Block, ...], ...]
    start: int | None = None


@dataclass(frozen=True)
class Picture:
    """An image that was made elsewhere; ``alt`` says in words what it is."""

    content: bytes
    kind: Literal["png", "jpg", "svg"]
    alt: str


Block = (
    Heading
    | Paragraph
    | Table
    | Equation
    | Figure
    | Beside
    | Framed
    | Signatures
    | Contents
    | Preformatted
    | Items
    | Picture
)


@dataclass(frozen=True)
class Sheet:
    """One named part of the package; it begins on a new page."""

    name: str
    title: str
    blocks: tuple[Block, ...]
