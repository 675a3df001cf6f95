"""Lettering of figures: texts with subscripts, measured with the font they are drawn in."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache, cached_property
from importlib.util import find_spec
from pathlib import Path

from fontTools.ttLib import TTFont  # type: ignore[import-untyped]

from calcpack.exact.formula import Symbol

FAMILY = "DejaVu Sans"
SIZE = 2.5
"""Height of the lettering's em, in mm."""
LOWERED = 0.72
"""Size of a subscript as part of the full size."""
DROP = 0.62
"""How far a subscript's base lies below the line's, in mm."""
PITCH = 1.2 * SIZE
"""From line to line, in mm; also the height of a single line's box."""
BASE = 0.93 * SIZE
"""From the top of a line's box to its base, in mm."""


@cache
def font_folder() -> Path:
    """The folder of the fonts that figures are lettered with (they come with matplotlib).

    matplotlib is found, not imported: only its fonts are used.
    """
    found = find_spec("matplotlib")
    assert found is not None
    assert found.origin is not None
    return Path(found.origin).parent / "mpl-data" / "fonts" / "ttf"


@cache
def _advances(slanted: bool) -> Mapping[int, float]:
    """The advance of each character of the font, by code point, in em."""
    name = "DejaVuSans-Oblique.ttf" if slanted else "DejaVuSans.ttf"
    with TTFont(font_folder() / name, lazy=True) as font:
        em, widths = font["head"].unitsPerEm, font["hmtx"].metrics
        return {code: widths[glyph][0] / em for code, glyph in font.getBestCmap().items()}


def has_glyph(character: str) -> bool:
    """Whether the font of the figures, on which the text falls back too, has the character.

    >>> has_glyph("Ω"), has_glyph("\u4e2d")
    (True, False)
    """
    return ord(character) in _advances(slanted=False)


@dataclass(frozen=True)
class Run:
    """Characters of one style; ``slanted`` for symbols, ``lowered`` for subscripts."""

    text: str
    slanted: bool = False
    lowered: bool = False

    @property
    def size(self) -> float:
        return SIZE * LOWERED if self.lowered else SIZE

    @cached_property
    def width(self) -> float:
        """Its width in mm; a character that the font lacks is taken as one em wide."""
        advances = _advances(self.slanted)
        return self.size * sum(advances.get(ord(character), 1.0) for character in self.text)


@dataclass(frozen=True)
class Text:
    """Lines of runs, centred on one another."""

    lines: tuple[tuple[Run, ...], ...]

    @cached_property
    def width(self) -> float:
        return max(sum(run.width for run in line) for line in self.lines)

    @cached_property
    def height(self) -> float:
        return PITCH * len(self.lines) + (DROP / 2 if self._has_subscript else 0.0)

    @property
    def _has_subscript(self) -> bool:
        return any(run.lowered for run in self.lines[-1])

    def __str__(self) -> str:
        return " ".join("".join(run.text for run in line) for line in self.lines)


def plain(text: str) -> Text:
    """One line of upright lettering."""
    return Text(((Run(text),),))


def signed(digits: str) -> str:
    """Printed digits with a sign of the trade: + before what is positive, − for the hyphen.

    >>> signed("0.5000"), signed("-2"), signed("0.00")
    ('+0.5000', '−2', '0.00')
    """
    if digits.startswith("-"):
        return "−" + digits[1:]
    return "+" + digits if digits.strip("0.") else digits


def runs_of(symbol: Symbol) -> tuple[Run, ...]:
    """A symbol as it stands in equations: slanted letter, upright subscript, place in brackets.

    >>> [run.text for run in runs_of(Symbol("V", "B", "left"))]
    ['V', 'B,left']
    """
    below = ",".join(part for part in (symbol.index, symbol.face) if part)
    runs = [Run(symbol.letter, slanted=True)]
    if below:
        runs.append(Run(below, lowered=True))
    if symbol.place:
        runs.append(Run(f"({symbol.place})"))
    return tuple(runs)


def wrapped(text: Text, width: float) -> Text:
    """The text in lines of at most ``width`` mm, broken at spaces, else within a word.

    >>> str(wrapped(plain("West abutment"), 16)), len(wrapped(plain("West abutment"), 16).lines)
    ('West abutment', 2)
    """
    if text.width <= width:
        return text
    lines: list[list[Run]] = [[]]
    room = width
    for run in (run for line in text.lines for run in line):
        for word in re.findall(r"\s*\S+|\s+$", run.text):
            for piece in _pieces(Run(word, run.slanted, run.lowered), width):
                if piece.width > room and lines[-1]:
                    piece = Run(piece.text.lstrip(), run.slanted, run.lowered)
                    lines.append([])
                    room = width
                lines[-1].append(piece)
                room -= piece.width
    return Text(tuple(_joined(line) for line in lines if line))


def _pieces(word: Run, width: float) -> list[Run]:
    """A word as it is, or cut where it is wider than the line."""
    if word.width <= width:
        return [word]
    pieces = [""]
    for character in word.text:
        if pieces[-1] and Run(pieces[-1] + character, word.slanted, word.lowered).width > width:
            pieces.append("")
        pieces[-1] += character
    return [Run(piece, word.slanted, word.lowered) for piece in pieces]


def _joined(line: list[Run]) -> tuple[Run, ...]:
    """Neighbouring runs of one style as one run."""
    runs: list[Run] = []
    for run in line:
        if runs and (runs[-1].slanted, runs[-1].lowered) == (run.slanted, run.lowered):
            runs[-1] = Run(runs[-1].text + run.text, run.slanted, run.lowered)
        else:
            runs.append(run)
    return tuple(runs)
