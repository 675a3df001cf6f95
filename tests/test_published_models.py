"""The published models themselves, as calc.toml names them, held to published tables of effects.

Tables, sources and tolerances stand in ``calcpack/reference/published.toml``; the axles come from
``calcpack/standards``, so that a slip in either shows.
"""

from __future__ import annotations

import tomllib
from collections.abc import Callable
from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from importlib.resources import files
from typing import Any

import pytest
from beams import make_beam
from loads import governing_of, make_load
from making import line_of

from calcpack.exact.piecewise import Piecewise
from calcpack.intake import read
from calcpack.model.loads import MovingLoad
from calcpack.moving.absolute import absolute_maximum, section_line
from calcpack.moving.critical import governing
from calcpack.moving.governing import Governing
from calcpack.moving.target import Target

CASES: dict[str, dict[str, Any]] = {
    case["id"]: case
    for case in tomllib.loads(
        files("calcpack").joinpath("reference/published.toml").read_text("utf-8"),
        parse_float=Decimal,
    )["case"]
}


def model(name: str, units: str, *keys: str) -> MovingLoad:
    """The model as a calculation reads it, without dynamic allowance."""
    text = f"""\
format = 1
units = "{units}"
cover.title = "Table of effects"
beam.length = 10
beam.supports = [
  {{ name = "A", at = 0, kind = "pin" }},
  {{ name = "B", at = 10, kind = "roller" }},
]
[[moving]]
name = "Load"
standard = "{name}"
allowance = 0
"""
    calculation = read("\n".join([text, *keys]).encode())
    return calculation.moving[0]


def absolute(span: Fraction, load: MovingLoad) -> tuple[Fraction, Governing]:
    """The absolute maximum moment of a simple span."""
    whole = (Fraction(0), span)
    zero = Piecewise.from_pieces([(0, span, (0,))])

    def target(section: Fraction) -> Target:
        return Target(section_line(section, whole, (zero, zero)), "moment", section, spans=(whole,))

    found = absolute_maximum(whole, target, load)
    assert found is not None
    return found


def moment(span: Fraction, load: MovingLoad) -> Fraction:
    return absolute(span, load)[1].value


def end_shear(span: Fraction, load: MovingLoad) -> Fraction:
    line = line_of(make_beam(span, [(0, "pin"), (span, "roller")]), "shear", "A")
    (found,) = governing(
        [Target(line, "shear", Fraction(0), spans=((Fraction(0), span),))], load, 1
    )
    return found.value


def pier(span: Fraction, load: MovingLoad) -> Fraction:
    """The reaction between two equal simple spans."""
    supports: list[tuple[Any, Any]] = [(0, "pin"), (span, "roller"), (2 * span, "roller")]
    line = line_of(make_beam(2 * span, supports, [(span, "hinge")]), "reaction", "B")
    (found,) = governing([Target(line, "reaction", span, interior=True)], load, 1)
    return found.value


HS20 = model("HS20-44", "US", 'variant = "design"', "length = 50")
H20 = model("H20-44", "US", "length = 50")
HL93 = model("HL-93", "US", 'variant = "design"')
COOPER = model("Cooper E80", "US", 'variant = "rail"', "length = 50")
E80 = replace(COOPER, cases=COOPER.cases[:1])
"""The published tables are of the main train alone, without the alternate load."""

TABLES: dict[str, Callable[[Fraction], Fraction]] = {
    "hs20-simple-M-b": lambda span: moment(span, HS20),
    "hs20-simple-V-b": lambda span: end_shear(span, HS20),
    "rehab-book-h20-M": lambda span: moment(span, H20),
    "e80-M-b": lambda span: moment(span, E80),
    "e80-V-b": lambda span: end_shear(span, E80),
    "e80-pier-b": lambda span: pier(span, E80),
}


def rows(name: str) -> list[tuple[Fraction, Decimal, Decimal]]:
    case = CASES[name]
    count = len(case["published"])
    given = case["tolerance"]
    tolerances = given if isinstance(given, list) else [given] * count
    spans = map(Fraction, case["param_values"])
    return list(zip(spans, map(Decimal, case["published"]), map(Decimal, tolerances), strict=True))


@pytest.mark.parametrize("name", TABLES)
def test_table(name: str) -> None:
    for span, value, tolerance in rows(name):
        assert abs(TABLES[name](span) - Fraction(value)) <= tolerance, span


def test_the_alternate_load_governs_short_spans() -> None:
    """One axle of 100 against one of 80 over midspan, per rail: 50 x 6 / 4 against 40 x 6 / 4."""
    assert [case.name for case in COOPER.cases] == ["E80", "alternate load"]
    assert moment(Fraction(6), E80) == 60
    assert moment(Fraction(6), COOPER) == 75


@pytest.mark.parametrize("name", ["rehab-book-hl93-V"])
def test_truck_and_lane(name: str) -> None:
    """The published column is of truck and lane; the tandem governs on none of its spans."""
    for span, value, tolerance in rows(name):
        assert abs(end_shear(span, HL93) - Fraction(value)) <= tolerance, span


def test_class_a_and_70r() -> None:
    """In t and m there, so kN / 10 here (2.7 t for an axle of 27 kN); two lanes of Class A."""
    for name, load, lanes in (
        ("irc-classA-2lanes-b", "IRC Class A", 2),
        ("irc-70R-wheeled-b", "IRC 70R", 1),
    ):
        variant = 'variant = "steel"'
        found = model(load, "SI", variant, "length = 20")
        for span, value, tolerance in rows(name):
            wheeled = [case for case in found.cases if case.name.startswith(WHEELED[load])]
            assert wheeled
            there = lanes * moment(span, replace(found, cases=tuple(wheeled[:1]))) / 10
            assert abs(there - Fraction(value)) <= tolerance, (name, span)


WHEELED = {"IRC Class A": "", "IRC 70R": "wheeled"}


def test_absolute_maximum_of_two_wheels() -> None:
    """Published: 50 and 30 kN 2.5 m apart on 12 m, 203.96 kN m under the 50 at 5.53125 m."""
    case = CASES["abs-max-12m-50-30"]
    section, found = absolute(Fraction(12), make_load((50, 0), (30, "2.5")))
    value, place = map(Fraction, case["published"])
    assert abs(found.value - value) <= Fraction(case["tolerance"][0])
    assert place in (section, 12 - section)
    assert found.value == Fraction(80 * 12 - 30 * Fraction("2.5")) ** 2 / (4 * 80 * 12)


def test_two_equal_wheels_of_a_crane() -> None:
    """Two unit wheels at a on a span of 1: (1 - a/2)² / 2, from a = 0.586 on one wheel at midspan;
    published with its end shear 2 - a."""
    case = CASES["two-equal-wheels-formula"]
    tolerance = Fraction(case["tolerance"])
    for apart, most, shear in zip(case["param_values"], *case["published"], strict=True):
        load = make_load((1, 0), (1, Fraction(apart)))
        assert abs(moment(Fraction(1), load) - Fraction(most)) <= tolerance
        assert abs(end_shear(Fraction(1), load) - Fraction(shear)) <= tolerance


@pytest.mark.parametrize("axles", [3, 4, 5])
def test_absolute_maxima_of_axles_in_a_row(axles: int) -> None:
    """The classical rule (textbooks of structural analysis): resultant of a group and an axle of it
    equally far from midspan, every group and every axle tried; on spans that hold them all."""
    loads = [Fraction(10 + 7 * n % 13) for n in range(axles)]
    places = [Fraction(3 * n + n * n % 4, 2) for n in range(axles)]
    load = make_load(
        *((w, b - a) for w, a, b in zip(loads, [Fraction(0), *places], places, strict=False))
    )
    for span in (Fraction(9), Fraction(14), Fraction(23)):
        expected = max(_classical(span, loads, places))
        section, found = absolute(span, load)
        assert found.value == pytest.approx(float(expected), rel=1e-12)
        assert found.value <= expected
        assert any(share.at == section for share in found.axles)


def _classical(span: Fraction, loads: list[Fraction], places: list[Fraction]) -> list[Fraction]:
    moments = []
    for first in range(len(loads)):
        for last in range(first + 1, len(loads) + 1):
            whole = sum(loads[first:last], Fraction(0))
            pairs = zip(loads[first:last], places[first:last], strict=True)
            resultant = sum((w * x for w, x in pairs), Fraction(0)) / whole
            for axle in range(first, last):
                section = span / 2 + (places[axle] - resultant) / 2
                if not 0 < section < span:
                    continue
                total = Fraction(0)
                for weight, place in zip(loads, places, strict=True):
                    at = section + place - places[axle]
                    if 0 <= at <= span:
                        low, high = min(at, section), max(at, section)
                        total += weight * low * (span - high) / span
                moments.append(total)
    return moments


def test_sections_and_places_with_uniform_load() -> None:
    """A single axle P and w over a simple span: both greatest at midspan, P l / 4 + w l² / 8."""
    section, found = absolute(Fraction(16), make_load((10, 0), uniform=2))
    assert section == 8
    assert found.value == Fraction(10 * 16, 4) + Fraction(2 * 16 * 16, 8)


def test_the_governing_value_at_the_section_is_the_absolute_one() -> None:
    load = make_load((8, 0), (32, 14), (32, 14))
    section, found = absolute(Fraction(60), load)
    beam = make_beam(60, [(0, "pin"), (60, "roller")], sections=[section])
    assert governing_of(line_of(beam, "moment", "1"), load, 1).value == found.value
