"""Envelopes along beams: extremes at their places, to one scale, and legible."""

from __future__ import annotations

import itertools
import time
from collections.abc import Iterator
from dataclasses import replace
from fractions import Fraction
from random import Random

import numpy as np
import pytest
from beams import make_beam, random_beam, random_indeterminate

from calcpack.model.beam import Beam, Support, Typed
from calcpack.render.svg import to_svg
from calcpack.sheets.drawing import Drawing, Label, Line, Polygon
from calcpack.sheets.envelope_figure import envelope_figure
from calcpack.sheets.labels import overlaps

Both = tuple[Fraction, Fraction, Fraction]
GIRDER = make_beam(100, [(0, "pin"), (40, "roller"), (90, "roller")])
"""Two spans, and an overhang of 10."""
MARGIN, SCALE = 8.0, 134.0 / 100


def points_of(*rows: tuple[int, int, int]) -> list[Both]:
    return [(Fraction(at), Fraction(most), Fraction(least)) for at, most, least in rows]


MOMENT = points_of((0, 0, 0), (16, 90, -30), (40, 12, -75), (70, 60, -8), (90, 0, -40), (100, 0, 0))
SHEAR = points_of(
    (0, 50, -6), (40, 5, -55), (40, 60, -4), (90, 7, -58), (90, 20, 0), (95, 20, 0), (100, 20, 0)
)


def texts(drawing: Drawing) -> list[str]:
    return [str(item.text) for item in drawing.items if isinstance(item, Label)]


def label(drawing: Drawing, text: str) -> Label:
    (found,) = (i for i in drawing.items if isinstance(i, Label) and str(i.text) == text)
    return found


def areas(drawing: Drawing, fill: str) -> list[Polygon]:
    found = (item for item in drawing.items if isinstance(item, Polygon) and item.pen is None)
    return [item for item in found if item.fill == fill]


def axis(drawing: Drawing) -> float:
    """Where the axis lies: the lowest thin line over the whole beam."""
    lines = (item for item in drawing.items if isinstance(item, Line) and item.pen == "thin")
    whole = (MARGIN, drawing.width - MARGIN)
    return max(one.path[0][1] for one in lines if (one.path[0][0], one.path[-1][0]) == whole)


def stops_of(beam: Beam) -> list[Fraction]:
    return sorted({Fraction(0), *(support.at for support in beam.supports), beam.length})


def random_points(beam: Beam, rng: Random, most: int) -> Iterator[Both]:
    """Any values at all tenths, with jumps at some stops and stretches of zero."""
    stops = stops_of(beam)
    zero = [rng.random() < 0.2 for _ in range(2)]

    def values() -> tuple[Fraction, Fraction]:
        greatest, least = (
            Fraction(0) if none or rng.random() < 0.1 else Fraction(rng.randint(1, most), 7)
            for none in zero
        )
        return greatest, -least

    for start, end in itertools.pairwise(stops):
        for part in range(10):
            at = start + (end - start) * part / 10
            yield (at, *values())
            if part == 0 and start and rng.random() < 0.6:
                yield (at, *values())
    yield (beam.length, *values())


def many_spans(spans: int) -> Beam:
    beam = make_beam(9 * spans, [])
    supports = (
        Support(f"S{n}", Fraction(9 * n), "roller" if n else "pin", Typed(""))
        for n in range(spans + 1)
    )
    return replace(beam, supports=tuple(supports))


def long_named(beam: Beam) -> Beam:
    supports = (
        replace(one, name=f"{one.name} <pier & bearing> of the Жуковка viaduct")
        for one in beam.supports
    )
    return replace(beam, supports=tuple(supports))


def extremes(points: list[Both], decimals: int) -> tuple[str, str]:
    """The overall greatest and least as they are printed."""
    values = max(most for _, most, _ in points), min(least for *_, least in points)
    greatest, least = (f"{float(value):+.{decimals}f}".replace("-", "−") for value in values)
    return greatest.replace("+0.0", "0.0"), least.replace("+0.0", "0.0")


@pytest.mark.parametrize("seed", range(60))
def test_nothing_overlaps_on_random_beams(seed: int) -> None:
    rng = Random(seed)
    beam = random_beam(rng) if seed % 2 else random_indeterminate(rng)
    beam = long_named(beam) if seed % 3 == 0 else beam
    points = list(random_points(beam, rng, rng.choice((9, 9000, 10**12))))
    width = rng.choice((60.0, 150.0, 180.0))
    drawing = envelope_figure(beam, points, "bending moment", "kip·ft", 1, "US", width)
    assert overlaps(drawing) == []
    assert set(extremes(points, 1)) <= set(texts(drawing))


@pytest.mark.parametrize("spans", [3, 8, 12, 19, 30, 60])
@pytest.mark.parametrize("most", [700, 10**10])
def test_nothing_overlaps_where_spans_are_many(spans: int, most: int) -> None:
    beam = many_spans(spans)
    points = list(random_points(beam, Random(spans), most))
    drawing = envelope_figure(beam, points, "shear", "kN", 1, "SI")
    assert overlaps(drawing) == []
    assert set(extremes(points, 1)) <= set(texts(drawing))


@pytest.mark.parametrize("spans", [2, 7, 12, 19, 30])
def test_each_span_of_many_is_labelled(spans: int) -> None:
    points = [
        (Fraction(9 * n) + x, Fraction(most + 10 * n), Fraction(least - 10 * n))
        for n in range(spans)
        for x, most, least in ((0, 1000, -3), (Fraction(9, 2), 400, -400), (9, 3, -1000))
    ]
    drawing = envelope_figure(many_spans(spans), points, "shear", "kN", 1, "SI")
    wanted = {f"{sign}{1000 + 10 * n}.0" for n in range(spans) for sign in "+−"}
    assert wanted <= set(texts(drawing))
    assert overlaps(drawing) == []


@pytest.mark.parametrize("decimals", [9, 60, 150])
def test_an_endless_number_stays_on_the_paper(decimals: int) -> None:
    for at in (0, 16, 100):
        points = points_of((at, 10**12, -(10**12)))
        drawing = envelope_figure(GIRDER, points, "shear", "N", decimals, "SI")
        assert overlaps(drawing) == []
        found = ["".join(text.split()) for text in texts(drawing)]
        assert f"+{10**12}.{'0' * decimals}" in found
        assert f"−{10**12}.{'0' * decimals}" in found


def test_greatest_values_are_toned_above_the_axis_and_least_hatched_below_at_one_scale() -> None:
    drawing = envelope_figure(GIRDER, MOMENT, "M", "kip·ft", 0, "US")
    (tone,), (hatch,) = areas(drawing, "tone"), areas(drawing, "hatch")
    whole = axis(drawing) - min(y for _, y in tone.corners)
    for area, side in ((tone, 1), (hatch, 2)):
        along, down = np.array(area.corners).T
        at = [MARGIN + SCALE * float(point[0]) for point in MOMENT]
        drawn = (axis(drawing) - np.interp(at, along, down)) * 90 / whole
        np.testing.assert_allclose(drawn, [float(point[side]) for point in MOMENT], atol=1e-9)
    assert max(x for x, _ in tone.corners) == pytest.approx(MARGIN + SCALE * 90)


def test_the_extremes_of_each_span_stand_at_their_places() -> None:
    drawing = envelope_figure(GIRDER, MOMENT, "M", "kip·ft", 0, "US")
    y = axis(drawing)
    places = {"+90": 16, "+60": 70, "−75": 40, "−40": 90}
    for text, at in places.items():
        box = label(drawing, text).box
        assert box.centre[0] == pytest.approx(MARGIN + SCALE * at)
        assert box.bottom < y if text[0] == "+" else box.top > y
    values = [text for text in texts(drawing) if text[0] in "+−"]
    assert sorted(values) == sorted(places)  # what two spans share at a support stands once


def test_a_jump_is_upright_and_each_face_belongs_to_its_span() -> None:
    drawing = envelope_figure(GIRDER, SHEAR, "V", "kip", 1, "US")
    (tone,) = areas(drawing, "tone")
    x = MARGIN + SCALE * 40
    at_jump = sorted(axis(drawing) - y for px, y in tone.corners if px == pytest.approx(x))
    assert at_jump[1] / at_jump[0] == pytest.approx(60 / 5)
    values = [text for text in texts(drawing) if text[0] in "+−"]
    assert sorted(values) == sorted(["+50.0", "+60.0", "+20.0", "−55.0", "−58.0"])
    assert label(drawing, "+20.0").box.centre[0] > MARGIN + SCALE * 89


def test_two_different_values_at_a_support_lean_to_their_spans() -> None:
    points = points_of((0, 0, 0), (40, 30, -30), (40, 80, -80), (90, 0, 0), (100, 0, 0))
    drawing = envelope_figure(GIRDER, points, "V", "kip", 0, "US")
    x = MARGIN + SCALE * 40
    for lesser, greater in (("+30", "+80"), ("−30", "−80")):
        assert label(drawing, lesser).box.right < x
        assert label(drawing, greater).box.centre[0] == pytest.approx(x)


def test_values_alike_in_print_on_both_faces_stand_once() -> None:
    points = [(at, most, least * 75) for at, most, least in points_of((0, 0, 0), (40, 0, -1))]
    points += [(Fraction(40), Fraction(0), Fraction(-7501, 100)), *MOMENT[-1:]]
    found = texts(envelope_figure(GIRDER, points, "M", "kip·ft", 1, "US"))
    assert found.count("−75.0") == 1


@pytest.mark.parametrize("points", [[], [(at, Fraction(0), Fraction(0)) for at, *_ in SHEAR]])
def test_an_envelope_of_zeros_is_an_axis(points: list[Both]) -> None:
    drawing = envelope_figure(GIRDER, points, "V", "", 2, "US")
    assert overlaps(drawing) == []
    assert not areas(drawing, "tone") + areas(drawing, "hatch")
    assert texts(drawing).count("0.00") == (2 if points else 0)
    assert drawing.caption.startswith("Envelope of V: ")
    assert axis(drawing) < drawing.height


def test_a_side_of_zeros_has_one_label_below_the_axis() -> None:
    points = points_of((0, 0, 0), (20, 90, 0), (40, 0, 0), (90, 0, 0), (100, 0, 0))
    drawing = envelope_figure(GIRDER, points, "M", "kip·ft", 1, "US")
    box = label(drawing, "0.0").box
    assert box.top > axis(drawing)
    assert box.centre[0] == pytest.approx(75.0)


def test_what_prints_as_zero_is_labelled_only_as_the_furthest() -> None:
    tiny = Fraction(1, 1000)
    points = [(at, most * tiny, least) for at, most, least in MOMENT]
    drawing = envelope_figure(GIRDER, points, "M", "kip·ft", 0, "US")
    assert texts(drawing).count("0") == 1
    assert label(drawing, "0").box.centre[0] == pytest.approx(MARGIN + SCALE * 16)


def test_caption_and_alternative_text_say_what_the_figure_shows() -> None:
    drawing = envelope_figure(GIRDER, MOMENT, "bending moment", "kip·ft", 1, "US")
    assert drawing.caption == (
        "Envelope of bending moment (kip·ft): greatest above, least below; "
        "straight between the points of the table."
    )
    assert drawing.alt == (
        "Envelope of bending moment (kip·ft): "
        "A to B (0 to 40 ft): greatest +90.0 at 16, least −75.0 at 40; "
        "B to C (40 to 90 ft): greatest +60.0 at 70, least −75.0 at 40; "
        "C to right end (90 to 100 ft): greatest 0.0, least −40.0 at 90."
    )
    assert "bending moment (kip·ft)" in texts(drawing)


def test_supports_at_one_place_are_named_together() -> None:
    beam = make_beam(30, [(5, "pin"), (20, "roller", "left"), (20, "roller", "right")])
    drawing = envelope_figure(beam, points_of((10, 4, -2), (25, 3, -1)), "V", "kN", 0, "SI")
    assert drawing.alt == (
        "Envelope of V (kN): A to B and C (5 to 20 m): greatest +4 at 10, least −2 at 10; "
        "B and C to right end (20 to 30 m): greatest +3 at 25, least −1 at 25."
    )


def test_the_same_envelope_gives_the_same_bytes_in_little_time() -> None:
    beam = many_spans(12)
    points = list(random_points(beam, Random(1), 900))

    def once() -> tuple[bytes, float]:
        start = time.perf_counter()
        found = to_svg(envelope_figure(beam, points, "M", "kNm", 1, "SI"))
        return found, time.perf_counter() - start

    drawn = [once() for _ in range(5)]
    assert len({found for found, _ in drawn}) == 1
    assert min(seconds for _, seconds in drawn) < 0.1
