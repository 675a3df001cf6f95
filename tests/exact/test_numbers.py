"""Text to fractions and back, against decimal arithmetic and scipy's constants."""

from __future__ import annotations

from decimal import ROUND_HALF_UP, Decimal, localcontext
from fractions import Fraction

import pytest
import scipy.constants  # type: ignore[import-untyped]
from hypothesis import given, settings
from hypothesis import strategies as st

from calcpack.exact.numbers import (
    decimals_to_end,
    exact_text,
    printed,
    read_decimal,
    significant_digits,
)
from calcpack.exact.units import SYSTEMS, parse_unit, read_quantity

fast = settings(max_examples=150, deadline=None, derandomize=True)
fractions = st.fractions(max_denominator=10**9).filter(lambda value: abs(value) < 10**12)


@fast
@given(fractions, st.integers(0, 12))
def test_printed_rounds_half_away_from_zero(value: Fraction, decimals: int) -> None:
    with localcontext(prec=60):
        quotient = Decimal(value.numerator) / value.denominator
        text = format(quotient.quantize(Decimal(1).scaleb(-decimals), ROUND_HALF_UP), "f")
    negative_zero = text.startswith("-") and not text.strip("-0.")
    assert printed(value, decimals) == (text[1:] if negative_zero else text)


@pytest.mark.parametrize("half", ["0.125", "-0.125", "2.675", "1000000.0005"])
def test_printed_halves(half: str) -> None:
    decimals = len(half.split(".")[1]) - 1
    expected = Decimal(half).quantize(Decimal(1).scaleb(-decimals), ROUND_HALF_UP)
    assert printed(Fraction(half), decimals) == str(expected)


@fast
@given(fractions, st.integers(0, 9))
def test_decimals_to_end(value: Fraction, most: int) -> None:
    found = decimals_to_end(value, most)
    whole = [n for n in range(most + 1) if Fraction(printed(value, n)) == value]
    assert found == (whole[0] if whole else None)


@pytest.mark.parametrize(
    "text", ["0.1", "-12.5", "2.0e6", "1_000.25", "1e-9", "-1e12", "0", "0e99"]
)
def test_read_decimal(text: str) -> None:
    assert read_decimal(text) == Fraction(Decimal(text))


@pytest.mark.parametrize(
    ("text", "needs"),
    [
        ("nan", "finite"),
        ("-inf", "finite"),
        ("1234567890.1234567", "15 significant"),
        ("1.0000000000000001", "15 significant"),
        ("1.1e12", "between"),
        ("9.9e-10", "between"),
        ("1e99999999", "between"),
        ("0x10", "decimal number"),
        ("1,5", "decimal number"),
        ("", "decimal number"),
    ],
)
def test_refused_decimals(text: str, needs: str) -> None:
    with pytest.raises(ValueError, match=needs):
        read_decimal(text)


def test_exact_text() -> None:
    long = Fraction(10**40 - 1, 10**40 - 3)
    assert exact_text(long) == f"{10**40 - 1}/{10**40 - 3}"
    assert exact_text(Fraction(1, 10**40 + 1)) == 1e-40
    assert exact_text(Fraction(-(10**40), 3)) == float(Fraction(-(10**40), 3))
    assert significant_digits("-100.50") == 5
    assert significant_digits("0.00") == 0


def test_units_against_scipy() -> None:
    assert float(read_quantity("1 ft", "length", "SI")) == pytest.approx(scipy.constants.foot)
    assert float(read_quantity("1 in", "length", "SI")) == pytest.approx(scipy.constants.inch)
    pound = scipy.constants.lbf
    assert float(read_quantity("1 kip", "force", "SI")) == pytest.approx(pound, rel=1e-12)
    assert float(read_quantity("2 lb/in", "line load", "SI")) == pytest.approx(
        2 * pound / scipy.constants.inch / 1000, rel=1e-12
    )
    assert float(read_quantity("3 kN·m", "moment", "US")) == pytest.approx(
        3000 / pound / scipy.constants.foot / 1000, rel=1e-12
    )


@pytest.mark.parametrize(
    ("text", "kind", "system", "value"),
    [
        ("12 ft 6 in", "length", "US", Fraction(25, 2)),
        ("-1 ft 6 in", "length", "US", Fraction(-3, 2)),
        ("304.8 mm", "length", "US", Fraction(1)),
        ("24 kip/ft", "line load", "US", Fraction(24)),
        ("1e3 N", "force", "SI", Fraction(1)),
    ],
)
def test_quantities(text: str, kind: str, system: str, value: Fraction) -> None:
    assert read_quantity(text, kind, system) == value


@pytest.mark.parametrize(
    ("text", "kind"),
    [
        ("3 kN", "length"),
        ("3", "length"),
        ("3 ft and 2 in", "length"),
        ("3 ft -2 in", "length"),
        ("3 kip 2 kip", "force"),
        ("3 ft rest", "length"),
        ("3 furlong", "length"),
    ],
)
def test_refused_quantities(text: str, kind: str) -> None:
    with pytest.raises(ValueError, match=r"must be a|is not known"):
        read_quantity(text, kind, "US")


def test_every_unit_has_the_dimension_of_its_kind() -> None:
    """Powers of force and length."""
    powers = {"length": (0, 1), "force": (1, 0), "line load": (1, -1), "moment": (1, 1)}
    powers |= {"number": (0, 0), "area": (0, 2)}
    assert SYSTEMS["US"].keys() == SYSTEMS["SI"].keys() >= powers.keys()
    for system in SYSTEMS.values():
        assert {kind: parse_unit(system[kind])[1:] for kind in powers} == powers
