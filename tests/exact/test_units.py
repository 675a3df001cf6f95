"""Units and their kinds, against scipy's constants and against each other."""

from __future__ import annotations

import itertools
from fractions import Fraction

import pytest
import scipy.constants  # type: ignore[import-untyped]

from calcpack.exact.numbers import read_decimal
from calcpack.exact.units import (
    SYSTEMS,
    looks_like_quantity,
    parse_unit,
    read_quantity,
    unit_size,
)

POUND, INCH = scipy.constants.lbf, scipy.constants.inch


POWERS = {
    "length": (0, 1),
    "force": (1, 0),
    "line load": (1, -1),
    "moment": (1, 1),
    "deflection": (0, 1),
    "rotation": (0, 0),
    "E": (1, -2),
    "I": (0, 4),
    "EI": (1, 2),
    "spring": (1, -1),
    "rotational spring": (1, 1),
}
"""Powers of force and length of every kind that a file may state."""


def test_every_stated_kind_has_its_dimension() -> None:
    for system in SYSTEMS.values():
        assert {kind: parse_unit(system[kind])[1:] for kind in POWERS} == POWERS


def test_stresses_against_scipy() -> None:
    assert float(parse_unit("psi")[0]) == pytest.approx(scipy.constants.psi, rel=1e-12)
    assert float(read_quantity("1 ksi", "E", "SI")) == pytest.approx(
        1000 * scipy.constants.psi / 1e6, rel=1e-12
    )
    assert float(read_quantity("200 GPa", "E", "US")) == pytest.approx(
        200e9 / (1000 * POUND / INCH**2), rel=1e-12
    )


@pytest.mark.parametrize(
    ("text", "kind", "system", "value"),
    [
        ("0.5 in", "deflection", "US", Fraction(1, 2)),
        ("0.5 in", "deflection", "SI", Fraction(127, 10)),
        ("1 ft", "deflection", "US", Fraction(12)),
        ("-3 mm", "deflection", "SI", Fraction(-3)),
        ("2 mrad", "rotation", "US", Fraction(1, 500)),
        ("-0.001 rad", "rotation", "SI", Fraction(-1, 1000)),
        ("29000 ksi", "E", "US", Fraction(29000)),
        ("29e6 psi", "E", "US", Fraction(29000)),
        ("210 GPa", "E", "SI", Fraction(210000)),
        ("2.1e11 Pa", "E", "SI", Fraction(210000)),
        ("0.21 MN/mm2", "E", "SI", Fraction(210000)),
        ("3000 in4", "I", "US", Fraction(3000)),
        ("1 ft⁴", "I", "US", Fraction(12**4)),
        ("8.5 cm4", "I", "SI", Fraction(85000)),
        ("144 kip·in2", "EI", "US", Fraction(1)),
        ("2.5 MN m²", "EI", "SI", Fraction(2500)),
        ("10 kip/in", "spring", "US", Fraction(120)),
        ("3 kN/mm", "spring", "SI", Fraction(3000)),
        ("24 kip·in/rad", "rotational spring", "US", Fraction(2)),
        ("5 kN·m/mrad", "rotational spring", "SI", Fraction(5000)),
    ],
)
def test_quantities_of_stiffness(text: str, kind: str, system: str, value: Fraction) -> None:
    assert read_quantity(text, kind, system) == value


@pytest.mark.parametrize(
    ("text", "kind", "needs"),
    [
        ("3 mm", "I", "must be an I such as 2.5 in⁴"),
        ("3 kip", "E", "must be an E such as 2.5 ksi"),
        ("3 ksi", "EI", "must be an EI such as 2.5 kip·ft²"),
        ("1 in 1 in", "deflection", "must be a deflection such as 2.5 in"),
        ("1 in", "rotation", "must be a rotation such as 2.5 rad"),
        ("1 kip·ft", "spring", "must be a spring such as 2.5 kip/ft"),
        ("1 kip/ft", "rotational spring", "must be a rotational spring such as 2.5 kip·ft/rad"),
    ],
)
def test_quantities_of_another_kind(text: str, kind: str, needs: str) -> None:
    with pytest.raises(ValueError, match=f"^{needs}$".replace(".", r"\.")):
        read_quantity(text, kind, "US")


def test_sizes_convert_there_and_back() -> None:
    for kind, (one, other) in itertools.product(POWERS, itertools.permutations(SYSTEMS)):
        ratio = unit_size(kind, one) / unit_size(kind, other)
        assert read_quantity(f"1 {SYSTEMS[one][kind]}", kind, other) == ratio
    assert unit_size("E", "SI") * unit_size("I", "SI") / unit_size("EI", "SI") == Fraction(1, 10**9)


@pytest.mark.parametrize("digits", ["١٢", "１２", "१२"])  # Arabic, full width, Devanagari
def test_only_ascii_digits_are_digits(digits: str) -> None:
    assert not looks_like_quantity(f"{digits} ft")
    with pytest.raises(ValueError, match="must be a length"):
        read_quantity(f"{digits} ft", "length", "US")
    for text in (digits, f"1{digits}", f"1e{digits}", f"1.{digits}"):
        with pytest.raises(ValueError, match="must be a decimal number"):
            read_decimal(text)
