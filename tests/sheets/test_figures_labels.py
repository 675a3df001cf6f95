"""Placing of labels, against an optimiser and the font's own metrics; and that faults are seen."""

from __future__ import annotations

from random import Random

import numpy as np
import pytest
from matplotlib.ft2font import FT2Font
from scipy.optimize import minimize  # type: ignore[import-untyped]

from calcpack.sheets.drawing import Circle, Drawing, Item, Label, Line, Polygon
from calcpack.sheets.labels import Tag, overlaps, row, spread
from calcpack.sheets.lettering import SIZE, Run, font_folder, plain, wrapped


def test_spread_moves_as_little_as_possible() -> None:
    rng = Random(4)
    moved = 0
    for _ in range(25):
        count = rng.randint(1, 6)
        centres = sorted(rng.uniform(0, 100) for _ in range(count))
        widths = [rng.uniform(2, 22) for _ in range(count)]
        found = spread(centres, widths, 0, 100)
        if found is None:
            assert sum(widths) > 100
            continue
        low = [width / 2 for width in widths]
        least = minimize(
            lambda x, c=centres: np.sum((x - np.array(c)) ** 2),
            np.cumsum(widths) - low,
            bounds=[(half, 100 - half) for half in low],
            constraints=[
                {
                    "type": "ineq",
                    "fun": lambda x, i=i, w=widths: x[i + 1] - x[i] - (w[i] + w[i + 1]) / 2,
                }
                for i in range(count - 1)
            ],
            method="SLSQP",
            options={"ftol": 1e-12, "maxiter": 500},
        )
        np.testing.assert_allclose(found, least.x, atol=1e-3)
        moved += not np.allclose(found, centres)
    assert moved > 10


@pytest.mark.parametrize(("slanted", "file"), [(False, "DejaVuSans"), (True, "DejaVuSans-Oblique")])
def test_widths_are_those_of_the_font(slanted: bool, file: str) -> None:
    font = FT2Font(str(font_folder() / f"{file}.ttf"))
    font.set_size(1000, 72)
    for text in ("Wharf Ävi 12.50", "ΣV − ½·ft²", "Жук"):
        expected = sum(font.load_char(ord(one)).linearHoriAdvance for one in text) / 65536 / 1000
        assert Run(text, slanted).width == pytest.approx(SIZE * expected, rel=1e-3)


def test_a_character_that_the_font_lacks_takes_a_whole_em() -> None:
    assert Run("中").width == SIZE


def test_wrapped_texts_keep_their_words_and_the_width() -> None:
    text = plain("Abutment on the western bank Donaudampfschifffahrtsgesellschaft")
    lines = wrapped(text, 30.0)
    assert lines.width <= 30.0
    assert "".join(str(lines).split()) == "".join(str(text).split())
    assert str(lines).startswith("Abutment on the western bank ")


def test_rows_turn_their_texts_and_then_give_up() -> None:
    tags = [Tag(plain("section"), (float(n), 0.0)) for n in range(20)]
    turned = row(tags, 0.0, 75.0)
    assert turned is not None
    assert turned.turned
    assert row(tags, 0.0, 50.0) is None


@pytest.mark.parametrize(
    ("item", "seen"),
    [
        (Label(plain("other"), (14.0, 11.0)), True),
        (Label(plain("other"), (10.0, 14.0)), False),
        (Line(((0.0, 11.0), (50.0, 12.0))), True),
        (Line(((0.0, 14.0), (50.0, 8.0))), True),
        (Line(((0.0, 14.0), (50.0, 14.0))), False),
        (Circle((10.0, 11.0), 2.0), True),
        (Polygon(((0.0, 0.0), (50.0, 0.0), (50.0, 30.0), (0.0, 30.0)), "hatch", None), True),
        (Polygon(((0.0, 0.0), (50.0, 0.0), (50.0, 30.0), (0.0, 30.0)), "tone", None), False),
    ],
)
def test_overlaps_are_seen(item: Item, seen: bool) -> None:
    label = Label(plain("name"), (10.0, 10.0))
    assert bool(overlaps(Drawing((item, label), 60.0, 40.0, "", ""))) == seen


@pytest.mark.parametrize("corner", [(-1.0, 5.0), (55.0, 5.0), (5.0, -1.0), (5.0, 38.5)])
def test_a_text_off_the_paper_is_seen(corner: tuple[float, float]) -> None:
    drawing = Drawing((Label(plain("long name"), corner),), 60.0, 40.0, "", "")
    assert overlaps(drawing) == ["long name leaves the paper"]
