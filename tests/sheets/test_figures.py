"""Figures of beams: what they show, where it stands on paper, and that all of it can be read."""

from __future__ import annotations

import itertools
import time
from collections.abc import Iterable
from dataclasses import replace
from fractions import Fraction
from random import Random

import numpy as np
import pytest
from beams import effects_of, make_beam, random_beam

from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import Beam, Face, Section, Support, SupportKind, Typed
from calcpack.render.svg import to_svg
from calcpack.second.kinematic import influence_line
from calcpack.sheets.beam_parts import beam_items, beam_scale
from calcpack.sheets.drawing import Arrow, Circle, Drawing, Label, Line, Polygon
from calcpack.sheets.figures import beam_figure, line_figure, placement_figure
from calcpack.sheets.labels import overlaps

GIRDER = make_beam(
    128,
    [(0, "pin"), (40, "roller"), (88, "roller"), (128, "roller")],
    [(52, "hinge"), (76, "hinge")],
    [20],
)
HALF = Fraction(1, 2)
MOMENT = Piecewise.from_pieces(
    [(0, 20, (0, HALF)), (20, 52, (10, -HALF)), (52, 76, (-6, HALF / 2)), (76, 128, (0,))]
)
SHEAR = Piecewise.from_pieces(
    [(0, 20, (0, -HALF / 20)), (20, 40, (HALF, -HALF / 20)), (40, 60, (0,)), (60, 128, (2,))]
)
MARGIN, SCALE = 8.0, 134.0 / 128
"""The girder's left end on paper and its mm per foot, on 150 mm with 8 mm free at both ends."""


def texts(drawing: Drawing) -> list[str]:
    return [str(item.text) for item in drawing.items if isinstance(item, Label)]


def joined(strings: Iterable[str]) -> set[str]:
    """Texts without spaces: breaking a text into lines adds and removes none of the rest."""
    return {"".join(string.split()) for string in strings}


def renamed(beam: Beam, rng: Random) -> Beam:
    """The same beam with names of up to 60 characters of any text."""
    letters = "abcdefgh IJKL <&>\"' 0123456789 äßЖж ÷"
    numbers = itertools.count()

    def name() -> str:
        length = rng.choice((1, 2, 8, 25, 57))
        return f"{next(numbers):02d}{''.join(rng.choices(letters, k=length))}."

    return replace(
        beam,
        supports=tuple(replace(one, name=name()) for one in beam.supports),
        releases=tuple(replace(one, name=name()) for one in beam.releases),
        sections=tuple(replace(one, name=name()) for one in beam.sections),
    )


def equal_spans(spans: int, length: int) -> Beam:
    """Equal spans with sections at all tenths, named by span and tenth."""
    beam = make_beam(spans * length, [])
    tenths = range(10 * spans + 1)
    return replace(
        beam,
        supports=tuple(
            Support(f"S{n}", Fraction(n * length), "roller" if n else "pin", Typed(""))
            for n in range(spans + 1)
        ),
        sections=tuple(
            Section(f"{n // 10 + 1}.{n % 10}", Fraction(n * length, 10), Typed("")) for n in tenths
        ),
    )


def random_line(beam: Beam, rng: Random) -> Piecewise:
    """Any straight pieces with kinks, jumps and stretches of zero."""
    inner = {beam.length * rng.randint(1, 199) / 200 for _ in range(rng.choice((1, 4, 12, 25)))}
    parts, value = [], Fraction(rng.randint(-9, 9))
    for start, end in itertools.pairwise(sorted({Fraction(0), beam.length, *inner})):
        value = Fraction(rng.randint(-9, 9)) if rng.random() < 0.3 else value
        after = rng.choice((Fraction(0), value, Fraction(rng.randint(-900, 900), 100)))
        parts.append((start, end, (value, (after - value) / (end - start))))
        value = after
    return Piecewise.from_pieces(parts)


def drawings(beam: Beam, line: Piecewise, rng: Random) -> list[Drawing]:
    count = rng.choice((0, 1, 5, 13, 30))
    spacing = beam.length / rng.choice((15, 60, 400))
    places = [at for n in range(count) if (at := beam.length / 5 + n * spacing) <= beam.length]
    axles = [(at, Fraction(rng.randint(10, 400), 10), line.left(at)) for at in places]
    loaded = [(beam.length / 10, beam.length / 3)] if rng.random() < 0.6 else []
    return [
        beam_figure(beam, "US"),
        line_figure(beam, line, "M at 1", "ft", 3, "US"),
        placement_figure(beam, line, axles, loaded, "M at 1", "ft", 3, "US", "left"),
    ]


@pytest.mark.parametrize("seed", range(48))
def test_nothing_overlaps_on_random_beams(seed: int) -> None:
    rng = Random(seed)
    beam = random_beam(rng)
    (line,) = influence_line(beam, [rng.choice(effects_of(beam))])
    line = line if seed % 2 else random_line(beam, rng)
    beam = renamed(beam, rng) if seed % 3 == 0 else beam
    for drawing in drawings(beam, line, rng):
        assert overlaps(drawing) == []
        assert len(texts(drawing)) >= 3


@pytest.mark.parametrize(("spans", "length"), [(3, 47), (10, 40), (19, 30), (60, 9)])
def test_nothing_overlaps_where_stations_are_many(spans: int, length: int) -> None:
    rng = Random(spans)
    beam = equal_spans(spans, length)
    for drawing in drawings(beam, random_line(beam, rng), rng):
        assert overlaps(drawing) == []


def test_every_name_is_written_whole() -> None:
    for seed in range(6):
        beam = renamed(random_beam(Random(seed)), Random(seed))
        wanted = joined(support.name for support in beam.supports)
        wanted |= joined(release.name for release in beam.releases)
        wanted |= joined(section.name for section in beam.sections)
        assert len(wanted) >= 4
        assert wanted <= joined(texts(beam_figure(beam, "SI")))


def test_the_chain_of_dimensions_gives_every_length_and_the_whole() -> None:
    found = texts(beam_figure(GIRDER, "US"))
    assert found[-7:] == ["20", "20", "12", "24", "12", "40", "128 ft"]


def test_equal_lengths_are_joined_span_by_span() -> None:
    found = texts(beam_figure(equal_spans(10, 48), "SI"))
    assert found.count("10 × 4.8") == 10
    assert found[-1] == "480 m"
    assert {"1.0", "1.5", "2.0", "10.5"} <= set(found)


def test_supports_and_releases_stand_at_their_stations() -> None:
    drawing = beam_figure(GIRDER, "US")
    hinges = [i.centre[0] for i in drawing.items if isinstance(i, Circle) and i.radius == 1.1]
    np.testing.assert_allclose(hinges, [MARGIN + SCALE * 52, MARGIN + SCALE * 76])
    rollers = [i.centre[0] for i in drawing.items if isinstance(i, Circle) and i.radius == 1.3]
    np.testing.assert_allclose(rollers, [MARGIN + SCALE * at for at in (40, 88, 128)])
    (pin,) = [i.corners[0][0] for i in drawing.items if isinstance(i, Polygon)]
    assert pin == pytest.approx(MARGIN)


def test_every_kind_of_support_looks_different() -> None:
    kinds: tuple[SupportKind, ...] = ("pin", "roller", "fixed", "guided")
    looks = set()
    for kind in kinds:
        for at in (0, 5):
            beam = make_beam(9, [(at, kind)])
            shapes = beam_items(beam, beam_scale(beam, 150.0))
            looks.add(tuple((type(shape).__name__, len(shape.path)) for shape in shapes))
    assert len(looks) == 6  # pins and rollers look the same at an end and inside


def test_a_support_stands_on_the_face_that_it_holds() -> None:
    def hatched(face: Face) -> float:
        beam = make_beam(10, [(5, "fixed", face)], [(5, "hinge")])
        items = beam_figure(beam, "SI").items
        plate = next(i for i in items if isinstance(i, Polygon) and i.fill == "hatch")
        return sum(x for x, _ in plate.corners) / 4 - 75.0

    assert hatched("left") < -1 < 1 < hatched("right")


def test_a_line_is_toned_above_its_axis_and_hatched_below() -> None:
    drawing = line_figure(GIRDER, MOMENT, "M at 1", "ft", 3, "US")
    tone, hatch = (
        next(i for i in drawing.items if isinstance(i, Polygon) and i.fill == fill)
        for fill in ("tone", "hatch")
    )
    axis = tone.corners[0][1]
    assert axis == hatch.corners[0][1]
    top, bottom = min(y for _, y in tone.corners), max(y for _, y in hatch.corners)
    assert (axis - top) / (bottom - axis) == pytest.approx(10 / 6)
    ends = [tone.corners[0][0], tone.corners[-1][0], hatch.corners[0][0], hatch.corners[-1][0]]
    np.testing.assert_allclose(ends, [MARGIN + SCALE * at for at in (0, 40, 40, 76)])


def test_ordinates_stand_at_breaks_and_both_at_jumps() -> None:
    assert {"+10.000", "−6.000"} < set(texts(line_figure(GIRDER, MOMENT, "M", "ft", 3, "US")))
    found = texts(line_figure(GIRDER, SHEAR, "V", "", 2, "US"))
    assert {"−0.50", "+0.50", "0 | +2.00", "+2.00"} <= set(found)


def test_areas_are_those_under_the_curve() -> None:
    x = np.linspace(0, 128, 128 * 8 + 1)
    y = np.interp(x, [0, 20, 52, 76, 128], [0, 10, -6, 0, 0])
    up, down = (np.trapezoid(part, x) for part in (np.maximum(y, 0), np.minimum(y, 0)))
    found = texts(line_figure(GIRDER, MOMENT, "M at 1", "ft", 3, "US"))
    assert f"+{up:.1f} ft²" in found
    assert f"−{-down:.1f} ft²" in found


def test_areas_are_written_inside_them() -> None:
    checked = 0
    for seed in range(12):
        line = random_line(GIRDER, Random(seed))
        items = line_figure(GIRDER, line, "M at 1", "ft", 3, "US").items
        lobes = [i for i in items if isinstance(i, Polygon) and i.fill in ("tone", "hatch")]
        for label in items:
            if isinstance(label, Label) and str(label.text).endswith(("ft²", "+", "−")):
                box = label.box
                corners = [(x, y) for x in (box.left, box.right) for y in (box.top, box.bottom)]
                assert any(all(map(lobe.holds, corners)) for lobe in lobes)
                checked += 1
    assert checked > 20


@pytest.mark.parametrize(
    ("unit", "area"), [("m", "+200.0 m²"), ("", "+200.0 m"), ("mm", "+200.0 mm·m")]
)
def test_the_unit_of_an_area_is_the_ordinates_times_length(unit: str, area: str) -> None:
    assert area in texts(line_figure(GIRDER, MOMENT, "M at 1", unit, 3, "SI"))


def test_a_curved_line_is_drawn_curved_and_marked_where_it_turns() -> None:
    """x (128 - x) / 128 turns at 64 with the value 32 and has the area 128² / 6 (calculus)."""
    curved = Piecewise.from_pieces([(0, 128, (0, 1, Fraction(-1, 128)))])
    drawing = line_figure(GIRDER, curved, "M", "ft", 3, "US")
    assert {"+32.000", "+2730.7 ft²"} <= {*texts(drawing)}
    assert overlaps(drawing) == []
    longest = max(len(one.path) for one in drawing.items if isinstance(one, Line))
    assert longest > 20


def test_a_line_of_zeros_is_an_axis() -> None:
    drawing = line_figure(GIRDER, Piecewise.from_pieces([(0, 128, (0,))]), "M", "ft", 3, "US")
    assert not [i for i in drawing.items if isinstance(i, Polygon) and i.fill != "plain"]


def test_axles_stand_on_the_beam_over_their_ordinates() -> None:
    axles = [
        (Fraction(at), Fraction(w), MOMENT.left(Fraction(at))) for at, w in ((20, 40), (34, 18))
    ]
    drawing = placement_figure(
        GIRDER, MOMENT, axles, [(Fraction(0), Fraction(40))], "M", "ft", 3, "US", "right"
    )
    heading, *arrows = [i for i in drawing.items if isinstance(i, Arrow)][::-1]
    assert heading.tail[0] < heading.tip[0]
    places = sorted(MARGIN + SCALE * at for at in (20, 34))
    assert sorted(arrow.tip[0] for arrow in arrows) == pytest.approx(places)
    assert all(arrow.tail[1] < arrow.tip[1] for arrow in arrows)
    dots = [i for i in drawing.items if isinstance(i, Circle) and i.fill == "solid"]
    assert sorted(dot.centre[0] for dot in dots) == pytest.approx(places)
    curve = next(i for i in drawing.items if isinstance(i, Line) and len(i.path) > 4)
    along, down = np.array(curve.path).T
    for dot in dots:
        assert dot.centre[1] == pytest.approx(np.interp(dot.centre[0], along, down))
    assert {"40", "18", "+10.000", "+3.000"} <= set(texts(drawing))
    left = placement_figure(GIRDER, MOMENT, axles, [], "M", "ft", 3, "US", "left")
    heading = next(i for i in left.items[::-1] if isinstance(i, Arrow))
    assert heading.tip[0] < heading.tail[0]


def test_the_alternative_text_says_what_the_figure_shows() -> None:
    assert beam_figure(GIRDER, "US").alt == (
        "Beam of 128 ft: pin A at 0, roller B at 40, roller C at 88, roller D at 128, "
        "hinge r1 at 52, hinge r2 at 76, 1 section."
    )
    alt = line_figure(GIRDER, SHEAR, "V at 1", "", 2, "US").alt
    assert alt.startswith("Influence line of V at 1: 0.00 at 0, -0.50 | 0.50 at 20, 0.00 at 40, ")


def test_a_figure_takes_little_time() -> None:
    def seconds() -> float:
        start = time.perf_counter()
        to_svg(line_figure(GIRDER, MOMENT, "M at 1", "ft", 3, "US"))
        return time.perf_counter() - start

    assert min(seconds() for _ in range(5)) < 0.03
