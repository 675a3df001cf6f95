"""The beam with its governing values: all of them, legible, and traceable to their stations."""

from __future__ import annotations

import itertools
from fractions import Fraction
from random import Random

import pytest
from beams import effects_of, make_beam, random_beam

from calcpack.exact.formula import Symbol
from calcpack.model.beam import Beam
from calcpack.sheets.drawing import Drawing, Label, Line, Point
from calcpack.sheets.labels import NEAR, overlaps
from calcpack.sheets.summary_figure import TALLEST, Entry, summary_figure
from calcpack.statics.system import symbol_of

CROWD = make_beam(
    600, [(20 * n, "roller") for n in range(1, 26)], [], [20 * n + 7 for n in range(1, 26)]
)


def entries_of(beam: Beam, rng: Random, most: int) -> list[Entry]:
    """Invented values of some effects of a beam; no two values are alike."""
    numbers = itertools.count(1)

    def digits() -> str:
        return f"{rng.randint(0, 9999)}.{next(numbers):03d}"

    entries = [
        (effect.station, symbol_of(effect), digits(), f"-{digits()}", "kip·ft")
        for effect in effects_of(beam)
    ]
    rng.shuffle(entries)
    return entries[:most]


def said(entry: Entry) -> str:
    """What stands on paper for an entry."""
    _, symbol, greatest, least, unit = entry
    index = ",".join(part for part in (symbol.index, symbol.face) if part)
    return f"{symbol.letter}{index} ({unit}) +{greatest} {least.replace('-', '−')}"


def columns(drawing: Drawing, entries: list[Entry]) -> dict[Fraction, list[Label]]:
    """The labels of the values under one another, for each station."""
    stations = {said(entry): entry[0] for entry in entries}
    found: dict[Fraction, list[Label]] = {}
    for item in drawing.items:
        if isinstance(item, Label) and str(item.text) in stations:
            found.setdefault(stations[str(item.text)], []).append(item)
    return found


def followed_up(point: Point, drawing: Drawing) -> Point:
    """Where the leaders begin that end just above a point."""
    for item in drawing.items:
        if isinstance(item, Line) and item.pen == "hair":
            x, y = item.path[-1]
            if abs(x - point[0]) < 1e-6 and 0 <= point[1] - y < 0.4 and y > item.path[0][1]:
                return followed_up(item.path[0], drawing)
    return point


@pytest.mark.parametrize("seed", range(30))
def test_every_value_is_shown_once_and_is_legible(seed: int) -> None:
    rng = Random(seed)
    beam = random_beam(rng)
    entries = entries_of(beam, rng, 12)
    drawing = summary_figure(beam, entries, "US")
    assert overlaps(drawing) == []
    texts = [str(item.text) for item in drawing.items if isinstance(item, Label)]
    assert [texts.count(said(entry)) for entry in entries] == [1] * len(entries)


@pytest.mark.parametrize(
    ("count", "width", "least"), [(14, 150.0, 14), (30, 150.0, 30), (97, 150.0, 35), (9, 80.0, 9)]
)
def test_leaders_join_values_to_their_stations(count: int, width: float, least: int) -> None:
    entries = entries_of(CROWD, Random(count), count)
    drawing = summary_figure(CROWD, entries, "US", width)
    assert overlaps(drawing) == []
    found = columns(drawing, entries)
    assert sum(map(len, found.values())) >= least
    for station, labels in found.items():
        top = min(labels, key=lambda label: label.box.top).box
        assert all(label.box.centre[0] == pytest.approx(top.centre[0]) for label in labels)
        x, _ = followed_up((top.centre[0], top.top), drawing)
        assert x == pytest.approx(8 + (width - 16) * float(station) / 600, abs=NEAR)


def test_of_too_many_the_first_are_kept_and_a_note_says_so() -> None:
    entries = entries_of(CROWD, Random(1), 97)
    drawing = summary_figure(CROWD, entries, "US")
    texts = [str(item.text) for item in drawing.items if isinstance(item, Label)]
    shown = [said(entry) in texts for entry in entries]
    kept = sum(shown)
    assert shown == [True] * kept + [False] * (97 - kept)
    assert f"{97 - kept} of 97 effects find no room here: see the table" in texts
    assert drawing.height < TALLEST + 25
    assert all(entry[2] in drawing.alt for entry in entries)


def test_values_get_signs_units_and_words() -> None:
    beam = make_beam(40, [(0, "pin"), (40, "roller")], [], [15])
    entries: list[Entry] = [
        (Fraction(15), Symbol("M", "1"), "120.50", "0.00", "kip·ft"),
        (Fraction(40), Symbol("V", "B", "left"), "1/3", "-0.2", ""),
    ]
    drawing = summary_figure(beam, entries, "US")
    texts = [str(item.text) for item in drawing.items if isinstance(item, Label)]
    assert texts[-2:] == ["M1 (kip·ft) +120.50 0.00", "VB,left +1/3 −0.2"]
    assert drawing.alt == (
        "The beam with governing values, greatest to least: "
        "M_1 at 15 ft: +120.50 to 0.00 kip·ft; V_B,left at 40 ft: +1/3 to −0.2."
    )


def test_without_values_the_beam_stands_alone() -> None:
    drawing = summary_figure(CROWD, [], "SI")
    assert overlaps(drawing) == []
    assert drawing.alt.endswith("none.")
