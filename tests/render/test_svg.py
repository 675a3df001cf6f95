"""The SVG of a drawing: well formed, the same every time, and set where it was laid out."""

from __future__ import annotations

import re
import subprocess
import sys
import xml.etree.ElementTree as ET
from dataclasses import replace
from fractions import Fraction

import pypdfium2 as pdfium  # type: ignore[import-untyped]
import pytest
import typst
from beams import make_beam

from calcpack.exact.piecewise import Piecewise
from calcpack.render.svg import to_svg
from calcpack.sheets.drawing import (
    Arrow,
    Circle,
    Drawing,
    Item,
    Label,
    Line,
    Polygon,
    Turn,
)
from calcpack.sheets.figures import beam_figure, line_figure
from calcpack.sheets.lettering import Run, Text, font_folder, plain

SVG = "{http://www.w3.org/2000/svg}"
MM = 72 / 25.4
"""Points in a millimetre."""
NASTY = "</text><script>alert(\"1\")</script> & ]]> 'q' \\ #eval"
TRIANGLE = ((0.0, 0.0), (30.0, 0.0), (30.0, 20.0))


def drawing(*items: Item, alt: str = "") -> Drawing:
    return Drawing(items, 60.0, 40.0, "", alt)


def parsed(*items: Item) -> ET.Element:
    return ET.fromstring(to_svg(drawing(*items)))


def compiled(figure: Drawing) -> bytes:
    """The figure alone on a page of its size, as the package's PDF standard wants it."""
    source = (
        f"#set page(width: {figure.width}mm, height: {figure.height}mm, margin: 0mm)\n"
        '#set document(title: "t")\n#image("figure.svg", alt: "figure")'
    )
    pdf = typst.compile(
        {"main.typ": source.encode(), "figure.svg": to_svg(figure)},  # type: ignore[call-overload]
        format="pdf",
        pdf_standards=["a-3a", "ua-1"],
        font_paths=[str(font_folder())],
        ignore_system_fonts=True,
    )
    assert isinstance(pdf, bytes)
    return pdf


def test_texts_are_escaped_and_come_back_whole() -> None:
    svg = ET.fromstring(to_svg(drawing(Label(plain(NASTY), (1.0, 1.0)), alt=NASTY)))
    assert svg.get("aria-label") == NASTY
    assert [one.text for one in svg.iter(f"{SVG}text")] == [NASTY]
    assert not list(svg.iter(f"{SVG}script"))


def test_characters_that_xml_forbids_are_replaced() -> None:
    (text,) = parsed(Label(plain("a\x00\x0b\ud800b"), (1.0, 1.0))).iter(f"{SVG}text")
    assert text.text == "a\ufffd\ufffd\ufffdb"


def test_the_size_is_in_millimetres() -> None:
    svg = parsed()
    assert (svg.get("width"), svg.get("height"), svg.get("viewBox")) == (
        "60mm",
        "40mm",
        "0 0 60 40",
    )


def test_a_subscript_is_smaller_lower_and_undone() -> None:
    text = Text(((Run("V", slanted=True), Run("h1", lowered=True), Run("(x)")),))
    letter, index, place = parsed(Label(text, (1.0, 1.0))).iter(f"{SVG}tspan")
    assert letter.get("font-style") == "italic"
    assert float(index.get("font-size", "9")) < 2.5
    assert float(index.get("dy", "0")) > 0
    assert float(index.get("dy", "0")) + float(place.get("dy", "0")) == 0


def test_hatching_fills_its_area_and_stays_inside() -> None:
    svg = to_svg(drawing(Polygon(TRIANGLE, "hatch", None))).decode()
    strokes = re.findall(r"M([\d.]+) ([\d.]+)L([\d.]+) ([\d.]+)(?=[M\"])", svg)
    assert len(strokes) > 30
    for one in strokes:
        x1, y1, x2, y2 = map(float, one)
        assert x1 + y1 == pytest.approx(x2 + y2, abs=2e-3)
        for x, y in ((x1, y1), (x2, y2)):
            assert 0 <= x <= 30
            assert -1e-3 <= y <= 2 / 3 * x + 1e-3


def test_an_arrow_ends_at_its_tip() -> None:
    for item, tip in (
        (Arrow((5.0, 30.0), (5.0, 10.0)), (5.0, 10.0)),
        (Turn((20.0, 20.0), 5.0, 180.0, 90.0), (20.0, 15.0)),
    ):
        head = list(parsed(item).iter(f"{SVG}path"))[-1].get("d", "")
        numbers = [float(number) for number in re.findall(r"-?[\d.]+", head)]
        assert numbers[:2] == pytest.approx(tip)
        others = numbers[2::2], numbers[3::2]
        back = sum(others[0]) / 2 - tip[0], sum(others[1]) / 2 - tip[1]
        assert (back[0] ** 2 + back[1] ** 2) ** 0.5 == pytest.approx(1.8, abs=0.01)


def test_every_primitive_is_drawn() -> None:
    items = (
        Line(((0.0, 0.0), (5.0, 5.0)), dashed=True),
        Polygon(TRIANGLE, "tone"),
        Circle((9.0, 9.0), 2.0),
        Arrow((5.0, 30.0), (5.0, 10.0)),
        Turn((20.0, 20.0), 5.0, 180.0, 90.0),
        Label(plain("turned"), (40.0, 5.0), turned=True, backed=True),
    )
    tags = [one.tag.removeprefix(SVG) for one in parsed(*items)]
    assert tags == ["path", "path", "circle", "path", "path", "path", "path", "rect", "text"]


def test_the_same_bytes_in_every_process() -> None:
    code = (
        "from fractions import Fraction; import hashlib\n"
        "from calcpack.model.beam import Beam, Section, Support, Typed\n"
        "from calcpack.render.svg import to_svg\n"
        "from calcpack.sheets.figures import beam_figure\n"
        "supports = tuple(Support(n, Fraction(i), 'pin', Typed('')) for i, n in enumerate('ABC'))\n"
        "sections = (Section('1', Fraction(1, 3), Typed('')),)\n"
        "beam = Beam(Fraction(2), supports, (), sections, Typed(''))\n"
        "print(hashlib.sha256(to_svg(beam_figure(beam, 'SI'))).hexdigest())"
    )
    runs = [
        subprocess.run(
            [sys.executable, "-c", code],
            env={"PYTHONHASHSEED": seed},
            capture_output=True,
            check=True,
        ).stdout
        for seed in ("1", "2")
    ]
    assert len(runs[0]) == 65
    assert runs[0] == runs[1]


def boxes_of(text_page: pdfium.PdfTextPage, words: str) -> list[tuple[float, ...]]:
    """Where a text stands in the PDF: left, bottom, right, top in points, around all of it."""
    found: list[tuple[float, ...]] = []
    searcher = text_page.search(words, match_case=True)
    while (hit := searcher.get_next()) is not None:
        start, count = hit
        corners = [text_page.get_charbox(n) for n in range(start, start + count)]
        lefts, bottoms, rights, tops = zip(*corners, strict=True)
        found.append((min(lefts), min(bottoms), max(rights), max(tops)))
    return found


def test_texts_stand_in_the_pdf_where_they_were_laid_out() -> None:
    beam = make_beam(
        40, [(0, "pin"), (22, "roller"), (30, "roller"), (40, "fixed")], [(23, "hinge")], [5, 11]
    )
    names = ("Wharf side", "Quay", "Old tow path, pier with a long name", "Wall")
    supports = tuple(replace(s, name=n) for s, n in zip(beam.supports, names, strict=True))
    half = Fraction(1, 2)
    line = Piecewise.from_pieces(
        [(0, 11, (0, half)), (11, 22, (half * 11, -half)), (22, 40, (0, -half))]
    )
    beam = replace(beam, supports=supports)
    crowd = make_beam(240, [(20 * at, "roller") for at in range(13)])
    piers = tuple(replace(s, name=f"Pier number {s.name}") for s in crowd.supports)
    # A page of mostly turned text is read column by column: there only those texts are looked for.
    figures = (
        (beam_figure(beam, "SI"), False),
        (line_figure(beam, line, "M at 2", "m", 3, "SI"), False),
        (beam_figure(replace(crowd, supports=piers), "SI"), True),
    )
    checked = {False: 0, True: 0}
    for figure, turned in figures:
        with pdfium.PdfDocument(compiled(figure)) as pdf:
            text_page = pdf[0].get_textpage()
            for label in figure.items:
                if not isinstance(label, Label) or len(label.text.lines) > 1:
                    continue
                if label.turned != turned:
                    continue
                box = label.box.grown(0.1)
                height = figure.height
                assert any(
                    box.left * MM <= left
                    and right <= box.right * MM
                    and (height - box.bottom) * MM <= bottom
                    and top <= (height - box.top) * MM
                    for left, bottom, right, top in boxes_of(text_page, str(label.text))
                ), label
                checked[turned] += 1
            text_page.close()
    assert checked[False] > 15
    assert checked[True] == 13
