"""Stretches of bending stiffness, as calc.toml states them."""

from __future__ import annotations

from fractions import Fraction

import pytest
import scipy.constants  # type: ignore[import-untyped]
from intake_samples import SHORT, SPRUNG, changed, faults

from calcpack.intake import read
from calcpack.model.beam import Stretch, Typed


def stated(entries: str, units: str = "SI") -> str:
    return changed(
        SHORT, ("length =", f"stiffness = [{entries}]\nlength ="), ('"SI"', f'"{units}"')
    )


def test_stretches_in_order_with_exact_stiffness() -> None:
    first, second, third = read(SPRUNG.encode()).beam.stiffness
    assert first == Stretch(
        Fraction(0), Fraction(50), Fraction(2500000), Typed("beam.stiffness[0].from"),
        "beam.stiffness[0]",
    )  # fmt: skip
    assert [second.start, second.end] == [50, 70]
    assert second.path == "beam.stiffness[1]"
    assert second.EI * 144 == 29000 * 13500  # ksi in4 to kip ft2
    assert third.source == Typed("beam.stiffness[2].from")
    pounds_a_square_inch = 200e9 / scipy.constants.psi
    assert float(third.EI) == pytest.approx(pounds_a_square_inch / 1000 * 14000.5 / 144, rel=1e-12)


def test_stiffness_in_si_units() -> None:
    text = stated(
        '{ from = 0, to = 5, E = 210000, I = 3.4e8 }, { from = "500 cm", to = 12, EI = 7 }'
    )
    beam = read(text.encode()).beam
    assert [one.EI for one in beam.stiffness] == [Fraction(71400), Fraction(7)]  # MPa mm4 to kN m2
    assert [station.at for station in beam.stations] == [0, 5, 12]
    assert beam.station(Fraction(5)).source == Typed("beam.stiffness[1].from")


def test_inputs_hold_what_was_typed_of_each_stretch() -> None:
    inputs = read(SPRUNG.encode()).inputs
    found = {path: value for path, value in inputs.items() if path.startswith("beam.stiffness")}
    third = Fraction("200e9") * Fraction("0.0254") ** 2 / Fraction("4448.2216152605")
    assert found == {
        "beam.stiffness[0].from": 0,
        "beam.stiffness[0].to": 50,
        "beam.stiffness[0].EI": 2500000,
        "beam.stiffness[1].from": 50,
        "beam.stiffness[1].to": 70,
        "beam.stiffness[1].E": 29000,
        "beam.stiffness[1].I": 13500,
        "beam.stiffness[2].from": 70,
        "beam.stiffness[2].to": 120,
        "beam.stiffness[2].E": third,
        "beam.stiffness[2].I": Fraction("14000.5"),
    }


def test_without_stiffness_there_are_no_stretches() -> None:
    assert read(SHORT.encode()).beam.stiffness == ()
    assert read(stated("").encode()).beam.stiffness == ()


ONE = "{ from = 0, to = 12, EI = 5 }"


@pytest.mark.parametrize(
    ("entries", "lines"),
    [
        # each value
        ("{ from = 0, to = 12, EI = 0 }", ["[0].EI: 0 kN·m², must be above 0 kN·m²"]),
        ("{ from = 0, to = 12, EI = -5.0 }", ["[0].EI: -5.0 kN·m², must be above 0 kN·m²"]),
        ("{ from = 0, to = 12, E = 0, I = 5 }", ["[0].E: 0 MPa, must be above 0 MPa"]),
        ("{ from = 0, to = 12, E = 5, I = -1 }", ["[0].I: -1 mm⁴, must be above 0 mm⁴"]),
        ('{ from = 0, to = 12, EI = "5 kN" }', ["[0].EI: 5 kN, must be an EI such as 2.5 kN·m²"]),
        ('{ from = 0, to = 12, EI = "much" }', ["[0].EI: much, must be an EI such as 2.5 kN·m²"]),
        ("{ from = 0, to = 12, EI = inf }", ["[0].EI: inf kN·m², must be a finite number"]),
        ('{ from = "B", to = 12, EI = 5 }', ["[0].from: B, must be a length such as 2.5 m"]),
        ("{ from = 0, to = 12, EI = 5, tabel = 1 }", [
            "[0].tabel: 1, is not a known key; nearest is 'table'",
        ]),
        ("7", ["[0]: 7, must be a table"]),
        # what belongs together
        ("{ from = 0, to = 12 }", ["[0].EI: absent, must be given, or E and I"]),
        ("{ from = 0, to = 12, E = 5 }", ["[0].I: absent, must be given beside E"]),
        ("{ from = 0, to = 12, I = 5 }", ["[0].E: absent, must be given beside I"]),
        ("{ from = 0, to = 12, E = 5, EI = 5 }", ["[0].E: 5 MPa, must be left out beside EI"]),
        ("{ from = 0, to = 12, EI = 5, E = 5, I = 5 }", [
            "[0].E: 5 MPa, must be left out beside EI", "[0].I: 5 mm⁴, must be left out beside EI",
        ]),
        ("{ to = 12, EI = 5 }", ["[0].from: absent, must be given"]),
        ("{ from = 0, EI = 5 }", ["[0].to: absent, must be given"]),
        ('{ from = 0, to = 12, EI = 5, column = "x" }', [
            "[0].column: x, must be left out without table",
        ]),
        # gaps and overlaps
        ("{ from = 1.5, to = 12, EI = 5 }", [
            "[0].from: 1.5 m, must be 0 m, where the beam starts",
        ]),
        ("{ from = 0, to = 11, EI = 5 }", ["[0].to: 11 m, must be 12 m, where the beam ends"]),
        ("{ from = 0, to = 12.5, EI = 5 }", ["[0].to: 12.5 m, must be 12 m, where the beam ends"]),
        ("{ from = 0, to = 6, EI = 5 }, { from = 7, to = 12, EI = 5 }", [
            "[1].from: 7 m, must be 6 m, where beam.stiffness[0] ends",
        ]),
        ("{ from = 0, to = 6, EI = 5 }, { from = 5, to = 12, EI = 5 }", [
            "[1].from: 5 m, must be 6 m, where beam.stiffness[0] ends",
        ]),
        ("{ from = 6, to = 12, EI = 5 }, { from = 0, to = 6, EI = 5 }", [
            "[0].from: 6 m, must be 0 m, where the beam starts",
            "[1].from: 0 m, must be 12 m, where beam.stiffness[0] ends",
            "[1].to: 6 m, must be 12 m, where the beam ends",
        ]),
        ("{ from = 0, to = 0, EI = 5 }, { from = 0, to = 12, EI = 5 }", [
            "[0].to: 0 m, must be above 0 m, where the stretch starts",
        ]),
        ("{ from = 0, to = 6, EI = 5 }, { from = 6, to = 5, EI = 5 }", [
            "[1].to: 5 m, must be above 6 m, where the stretch starts",
        ]),
        ('{ from = 0, to = "10 ft", EI = 5 }, { from = 3, to = 12, EI = 5 }', [
            "[1].from: 3 m, must be 3.048 m, where beam.stiffness[0] ends",
        ]),
        ("{ from = 0, to = 20, EI = 5 }, { from = 20, to = 12, EI = 5 }", [
            "[0].to: 20 m, must lie on the beam, 0 m to 12 m",
            "[1].to: 12 m, must be above 20 m, where the stretch starts",
        ]),
        # an end that is not known is compared with nothing
        ("{ from = 0, to = true, EI = 5 }, { from = 7, to = 12, EI = 5 }", [
            "[0].to: true, must be a length such as 2.5 m",
        ]),
    ],
)  # fmt: skip
def test_refused_stretches(entries: str, lines: list[str]) -> None:
    assert faults(stated(entries)) == [f"beam.stiffness{line}" for line in lines]


def test_stiffness_in_us_units_is_refused_in_them() -> None:
    assert faults(stated("{ from = 0, to = 12, EI = -1 }", "US")) == [
        "beam.stiffness[0].EI: -1 kip·ft², must be above 0 kip·ft²"
    ]
    assert faults(stated("{ from = 0, to = 11, E = 0, I = 0 }", "US")) == [
        "beam.stiffness[0].to: 11 ft, must be 12 ft, where the beam ends",
        "beam.stiffness[0].E: 0 ksi, must be above 0 ksi",
        "beam.stiffness[0].I: 0 in⁴, must be above 0 in⁴",
    ]


def test_faults_beside_the_beam_are_found_too() -> None:
    text = stated("{ from = 0, to = 12, EI = 0 }") + '[[effects]]\nkind = "reaction"\nat = 3\n'
    assert faults(text) == [
        "beam.stiffness[0].EI: 0 kN·m², must be above 0 kN·m²",
        "effects[0].at: 3 m, must be a support that holds vertically, for a reaction",
    ]


def test_while_the_length_is_not_known_nothing_is_said_of_the_end() -> None:
    assert faults(changed(stated(ONE), ("length = 12.0", "length = -1"))) == [
        "beam.length: -1 m, must be above 0 m"
    ]
    without_units = changed(stated("{ from = 0, to = 12, E = 5, I = 5 }"), ('"SI"', '"si"'))
    assert faults(without_units) == ['units: si, must be "US" or "SI"']


def test_spans_and_overhangs_are_covered_too() -> None:
    text = changed(
        stated("{ from = 0, to = 8, EI = 5 }"),
        ("length = 12.0", "spans = [6.5]\noverhang_right = 1.5"),
        ("at = 0.0, ", ""), ("at = 12.0, ", ""),
    )  # fmt: skip
    assert faults(text) == []
    assert faults(changed(text, ("to = 8", "to = 6.5"))) == [
        "beam.stiffness[0].to: 6.5 m, must be 8 m, where the beam ends"
    ]


def test_four_hundred_stretches_are_the_most() -> None:
    def steps(count: int) -> str:
        return ",".join(f"{{from={i}e-2,to={i + 1}e-2,EI=1}}" for i in range(count - 1)) + (
            f",{{from={count - 1}e-2,to=12,EI=1}}"
        )

    assert len(read(stated(steps(400)).encode()).beam.stiffness) == 400
    assert faults(stated(steps(401))) == ["beam.stiffness: 401 stretches, must be at most 400"]
    assert faults(stated(steps(1001))) == ["beam.stiffness: 1,001 items, must have at most 1,000"]
