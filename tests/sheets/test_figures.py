"""Figures of beams: what they show, where it stands on paper, and that all of it can be read."""

from __future__ import annotations

import itertools
import time
from dataclasses import replace
from fractions import Fraction
from random import Random

import numpy as np
import pytest
from beams import effects_of, make_beam, random_beam
from figure_parts import described, texts

from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import Beam, Section, Typed
from calcpack.second.kinematic import influence_line
from calcpack.sheets.drawing import Arrow, Circle, Drawing, Line, Polygon
from calcpack.sheets.figures import beam_figure, line_figure, placement_figure
from calcpack.sheets.labels import overlaps

GIRDER = make_beam(
    128,
    [(0, "pin"), (40, "roller"), (88, "roller"), (128, "roller")],
    [(52, "hinge"), (76, "hinge")],
    [20],
)
MOMENT = Piecewise.from_pieces(
    [
        (0, 20, (0, Fraction(1, 2))),
        (20, 52, (10, Fraction(-1, 2))),
        (52, 76, (-6, Fraction(1, 4))),
        (76, 128, (0,)),
    ]
)
SHEAR = Piecewise.from_pieces(
    [(0, 20, (0, Fraction(-1, 40))), (20, 40, (Fraction(1, 2), Fraction(-1, 40))), (40, 128, (0,))]
)
LONG = "Pier 2 at the old tow path, founded on six bored piles & <b>"


def renamed(beam: Beam, rng: Random) -> Beam:
    """The same beam with names of up to 60 characters of any text."""
    letters = "abcdefgh IJKL <&>\"' 0123456789 äßЖж ÷"

    def name(number: int) -> str:
        length = rng.choice((1, 2, 8, 25, 57))
        return f"{number:02d}" + "".join(rng.choice(letters) for _ in range(length)) + "."

    numbers = itertools.count()
    return replace(
        beam,
        supports=tuple(replace(one, name=name(next(numbers))) for one in beam.supports),
        releases=tuple(replace(one, name=name(next(numbers))) for one in beam.releases),
        sections=tuple(replace(one, name=name(next(numbers))) for one in beam.sections),
    )


def tenths(spans: int, length: int) -> Beam:
    """Equal spans with sections at all tenths, named by span and tenth."""
    kinds = ["pin", *["roller"] * spans]
    beam = make_beam(spans * length, [(i * length, kind) for i, kind in enumerate(kinds)])  # type: ignore[arg-type, misc]
    places = [(f"{n // 10 + 1}.{n % 10}", Fraction(n * length, 10)) for n in range(10 * spans + 1)]
    return replace(beam, sections=tuple(Section(name, at, Typed("")) for name, at in places))


def random_line(beam: Beam, rng: Random) -> Piecewise:
    """Any straight pieces with kinks, jumps and stretches of zero."""
    inner = {beam.length * rng.randint(1, 199) / 200 for _ in range(rng.choice((1, 4, 12, 25)))}
    stops = sorted({Fraction(0), beam.length, *inner})
    parts, value = [], Fraction(rng.randint(-9, 9))
    for start, end in itertools.pairwise(stops):
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


def test_nothing_overlaps_on_random_beams() -> None:
    seen = 0
    for seed in range(60):
        rng = Random(seed)
        beam = random_beam(rng, 6)
        beam = renamed(beam, rng) if seed % 3 == 0 else beam
        effect = rng.choice(effects_of(beam))
        line = influence_line(beam, effect) if seed % 2 else random_line(beam, rng)
        for drawing in drawings(beam, line, rng):
            assert overlaps(drawing) == [], (seed, drawing.caption)
            seen += len(texts(drawing))
    assert seen > 2000


@pytest.mark.parametrize("beam", [tenths(3, 47), tenths(10, 40), tenths(19, 30)], ids=len_of := str)
def test_nothing_overlaps_where_stations_are_many(beam: Beam) -> None:
    rng = Random(7)
    for drawing in drawings(beam, random_line(beam, rng), rng):
        assert overlaps(drawing) == []
