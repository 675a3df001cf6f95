"""A package read back from its PDF: what stands where on every page, and what is wrong there."""

from __future__ import annotations

import ctypes
import itertools
import re
from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Any, NamedTuple

import pypdfium2 as pdfium  # type: ignore[import-untyped]
import pypdfium2.raw as pdfium_c  # type: ignore[import-untyped]

MM = 72 / 25.4
"""Points in a millimetre."""
HAIR = 0.2
"""Points by which two characters may overlap, or one reach over the margin."""
LEAST_MARGIN = 14 * MM
"""What the frame of head and foot must keep from every edge of the paper."""
LEAST_EDGE = 8 * MM
"""What head and foot themselves must keep from it."""

UNSEEN = re.compile(r"[\s\u200b\u2060\ufeff\x00]+")

Box = tuple[float, float, float, float]
"""Left, bottom, right and top in points from the lower left corner of the paper."""


class Character(NamedTuple):
    """A character with the box of its ink; ``place`` counts along the text of the page."""

    text: str
    box: Box
    place: int


@dataclass(frozen=True)
class Piece:
    """Characters that the PDF shows in one go: never more than one line."""

    characters: tuple[Character, ...]

    @cached_property
    def box(self) -> Box:
        return around(character.box for character in self.characters)

    def __str__(self) -> str:
        return "".join(character.text for character in self.characters)


@dataclass(frozen=True)
class Page:
    """``frame`` reaches from the rule under the head to the rule over the foot, and as wide."""

    number: int
    width: float
    height: float
    pieces: tuple[Piece, ...]
    frame: Box

    @cached_property
    def text(self) -> str:
        return squeezed("".join(map(str, self.pieces)))

    @cached_property
    def head(self) -> str:
        return self._text_where(lambda box: box[1] >= self.frame[3])

    @cached_property
    def foot(self) -> str:
        return self._text_where(lambda box: box[3] <= self.frame[1])

    def _text_where(self, holds: Callable[[Box], bool]) -> str:
        return squeezed("".join(str(piece) for piece in self.pieces if holds(piece.box)))


@dataclass(frozen=True)
class Package:
    """``tags`` are the structure's elements, (type, alternative text) each; ``metadata`` is XMP."""

    pages: tuple[Page, ...]
    title: str
    language: str
    tagged: bool
    bookmarks: tuple[str, ...]
    tags: tuple[tuple[str, str], ...]
    metadata: str

    def shows(self, *texts: str) -> bool:
        """Whether all of these are found on one page, each whole, wherever lines are broken."""
        wanted = [squeezed(text) for text in texts]
        return any(all(text in page.text for text in wanted) for page in self.pages)


def squeezed(text: str) -> str:
    """Text without white space and without what cannot be seen, where lines may be broken.

    >>> squeezed("1 × (2.0\\u200b −\\n1)")
    '1×(2.0−1)'
    """
    return UNSEEN.sub("", text)


def around(boxes: Iterator[Box]) -> Box:
    lefts, bottoms, rights, tops = zip(*boxes, strict=True)
    return min(lefts), min(bottoms), max(rights), max(tops)


def read_back(content: bytes) -> Package:
    """The package as a reader of the PDF finds it."""
    with pdfium.PdfDocument(content) as pdf:
        language = _utf16(lambda *room: pdfium_c.FPDFCatalog_GetLanguage(pdf.raw, *room))
        pages: list[Page] = []
        tags: list[tuple[str, str]] = []
        for number in range(1, len(pdf) + 1):
            page = pdf[number - 1]
            pages.append(_page(page, number))
            tags += _tags(page)
            page.close()
        found = re.search(rb"<x:xmpmeta.*?</x:xmpmeta>", content, re.DOTALL)
        return Package(
            tuple(pages),
            pdf.get_metadata_value("Title"),
            language,
            pdf.is_tagged(),
            tuple(bookmark.get_title() for bookmark in pdf.get_toc()),
            tuple(tags),
            found[0].decode() if found else "",
        )


def _page(page: pdfium.PdfPage, number: int) -> Page:
    text_page = page.get_textpage()
    pieces: dict[int | None, list[Character]] = {}
    for piece, character in _characters(text_page):
        pieces.setdefault(piece, []).append(character)
    width, height = page.get_size()
    found = tuple(Piece(tuple(characters)) for characters in pieces.values())
    text_page.close()
    return Page(number, width, height, found, _frame(page, width))


def _characters(text_page: pdfium.PdfTextPage) -> Iterator[tuple[int | None, Character]]:
    """Every character that can be seen, with the address of what shows it."""
    page = text_page.raw
    left, right, bottom, top = sides = [ctypes.c_double() for _ in range(4)]
    half = ""
    for index in range(text_page.count_chars()):
        if pdfium_c.FPDFText_IsGenerated(page, index):
            continue
        text = half + chr(pdfium_c.FPDFText_GetUnicode(page, index))
        half = text if len(text) == 1 and "\ud800" <= text < "\udc00" else ""
        if half or UNSEEN.fullmatch(text):  # of a character beyond the first plane a half follows
            continue
        text = text.encode("utf-16", "surrogatepass").decode("utf-16")
        # A hyphen that ends a line is reported as a mark of its own.
        text = "-" if text in "\x02\ufffe" else text
        pdfium_c.FPDFText_GetCharBox(page, index, *map(ctypes.byref, sides))
        shown_by = ctypes.cast(pdfium_c.FPDFText_GetTextObject(page, index), ctypes.c_void_p)
        box = (left.value, bottom.value, right.value, top.value)
        yield shown_by.value, Character(text, box, index)


def _frame(page: pdfium.PdfPage, width: float) -> Box:
    """Between the highest and the lowest level rule that crosses most of the paper."""
    rules = [
        bounds
        for one in page.get_objects(filter=[pdfium_c.FPDF_PAGEOBJ_PATH], max_depth=1)
        if (bounds := one.get_bounds())[2] - bounds[0] > width / 2 and bounds[3] - bounds[1] < 3
    ]
    head, foot = max(rules, key=lambda box: box[3]), min(rules, key=lambda box: box[1])
    return max(head[0], foot[0]), foot[3], min(head[2], foot[2]), head[1]


def _tags(page: pdfium.PdfPage) -> Iterator[tuple[str, str]]:
    tree = pdfium_c.FPDF_StructTree_GetForPage(page.raw)

    def below(element: object) -> Iterator[tuple[str, str]]:
        yield (
            _utf16(lambda *room: pdfium_c.FPDF_StructElement_GetType(element, *room)),
            _utf16(lambda *room: pdfium_c.FPDF_StructElement_GetAltText(element, *room)),
        )
        for child in range(pdfium_c.FPDF_StructElement_CountChildren(element)):
            inner = pdfium_c.FPDF_StructElement_GetChildAtIndex(element, child)
            if inner:
                yield from below(inner)

    for child in range(pdfium_c.FPDF_StructTree_CountChildren(tree)):
        yield from below(pdfium_c.FPDF_StructTree_GetChildAtIndex(tree, child))
    pdfium_c.FPDF_StructTree_Close(tree)


def _utf16(ask: Callable[..., int]) -> str:
    """What one of the library's functions writes into room that it is given."""
    size = ask(None, 0)
    room = (ctypes.c_ushort * (size // 2 + 1))()
    ask(room, size)
    return bytes(room).decode("utf-16-le").rstrip("\0")


def faults(package: Package) -> list[str]:
    """Every text beyond the margins, and every two that overlap."""
    return [fault for page in package.pages for fault in (*_outside(page), *_overlapping(page))]


def _outside(page: Page) -> Iterator[str]:
    left, bottom, right, top = page.frame
    if not (
        left >= LEAST_MARGIN
        and page.width - right >= LEAST_MARGIN
        and bottom >= LEAST_MARGIN
        and page.height - top >= LEAST_MARGIN
    ):
        yield f"sheet {page.number}: margin too narrow"
    for piece in page.pieces:
        low, high = piece.box[1], piece.box[3]
        level = (
            LEAST_EDGE <= low <= high <= bottom
            or (bottom <= low and high <= top)
            or (top <= low and high <= page.height - LEAST_EDGE)
        )
        across = left - HAIR <= piece.box[0] and piece.box[2] <= right + HAIR
        if not (level and across):
            yield f"sheet {page.number}: {str(piece)!r} beyond the margin"


def _overlapping(page: Page) -> Iterator[str]:
    """Pairs whose ink overlaps, characters that follow one another excepted.

    A script is set close to its letter; anything that really overprints meets more than its
    neighbour.
    """
    pieces = sorted(page.pieces, key=lambda piece: piece.box[1])
    for number, one in enumerate(pieces):
        for other in itertools.islice(pieces, number + 1, None):
            if other.box[1] >= one.box[3]:
                break
            if _meet(one.box, other.box) and any(
                _meet(a.box, b.box) and abs(a.place - b.place) > 2
                for a, b in itertools.product(one.characters, other.characters)
            ):
                yield f"sheet {page.number}: {str(one)!r} over {str(other)!r}"


def _meet(one: Box, other: Box) -> bool:
    return (
        min(one[2], other[2]) - max(one[0], other[0]) > HAIR
        and min(one[3], other[3]) - max(one[1], other[1]) > HAIR
    )


def incomplete(package: Package, in_head: Sequence[str], in_foot: Sequence[str]) -> list[str]:
    """Every page whose head or foot lacks one of these texts, or its number among all."""
    found = []
    for number, page in enumerate(package.pages, start=1):
        wanted = [*in_head, f"Sheet {number} of {len(package.pages)}"]
        found += [
            f"sheet {number}: no {text!r}" for text in wanted if squeezed(text) not in page.head
        ]
        found += [
            f"sheet {number}: no {text!r}" for text in in_foot if squeezed(text) not in page.foot
        ]
    return found


def unprinted(package: Package, steps: Sequence[Mapping[str, Any]]) -> list[str]:
    """Steps of results.json whose number, digits and result are not found on one page."""
    return [
        f"{step['id']}: {step['numbers']} = {step['result']}"
        for step in steps
        if "numbers" in step and not package.shows(step["id"], as_printed(step))
    ]


def as_printed(step: Mapping[str, Any]) -> str:
    """Numbers and result with the signs of the trade; a fraction p/q stays as it is."""
    numbers = step["numbers"].replace(" / ", "÷").replace("*", "×")
    return f"{numbers}{step['result']}".replace("-", "−")
