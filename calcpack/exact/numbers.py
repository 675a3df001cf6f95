"""Text to exact fractions and back."""

from __future__ import annotations

import re
from decimal import Decimal
from fractions import Fraction

MOST_SIGNIFICANT_DIGITS = 15
SMALLEST = Fraction(1, 10**9)
LARGEST = Fraction(10**12)

_DECIMAL = re.compile(r"[+-]?(\d+(_\d+)*)(\.(\d+(_\d+)*))?([eE][+-]?\d{1,4})?", re.ASCII)


def read_decimal(text: str) -> Fraction:
    """Read a decimal exactly; its size and digits are checked on the text, before it is a number.

    Args:
        text: a decimal as TOML writes it, such as ``12.5``, ``-0.1`` or ``2.0e6``.

    Returns:
        The exact value.

    Raises:
        ValueError: not a finite decimal, more than 15 significant digits, or neither 0 nor
            between 1e-9 and 1e12 in size; the message says what is needed.

    >>> read_decimal("0.1")
    Fraction(1, 10)
    >>> read_decimal("1e400")
    Traceback (most recent call last):
        ...
    ValueError: must be 0 or between 1e-9 and 1e12 in size
    """
    if not _DECIMAL.fullmatch(text):
        if text.strip("+-") in ("inf", "nan"):
            raise ValueError("must be a finite number")
        if re.fullmatch(r"[+-]?[\d_.]+[eE][+-]?\d+", text, re.ASCII):
            raise ValueError("must be 0 or between 1e-9 and 1e12 in size")
        raise ValueError("must be a decimal number")
    digits = re.split("[eE]", text)[0].lstrip("+-").replace("_", "").replace(".", "").lstrip("0")
    if len(digits) > MOST_SIGNIFICANT_DIGITS:
        raise ValueError(f"must have at most {MOST_SIGNIFICANT_DIGITS} significant digits")
    value = Fraction(Decimal(text))
    if value and not SMALLEST <= abs(value) <= LARGEST:
        raise ValueError("must be 0 or between 1e-9 and 1e12 in size")
    return value


def exact_text(value: Fraction) -> str | float:
    """The fraction as ``p`` or ``p/q`` while both have at most 40 digits, else the nearest double.

    >>> exact_text(Fraction(1, 2)), exact_text(Fraction(20))
    ('1/2', '20')
    """
    if max(abs(value.numerator), value.denominator) < 10**40:
        return str(value)
    return float(value)


def decimals_to_end(value: Fraction, most: int) -> int | None:
    """How many decimals write the value whole, or None if more than ``most`` would be needed.

    >>> decimals_to_end(Fraction(1, 8), 6), decimals_to_end(Fraction(1, 3), 6)
    (3, None)
    """
    for decimals in range(most + 1):
        if (value * 10**decimals).denominator == 1:
            return decimals
    return None


def printed(value: Fraction, decimals: int) -> str:
    """The value rounded to ``decimals`` places, half away from zero, never a negative zero.

    >>> printed(Fraction(2, 3), 4), printed(Fraction(-1, 8), 2), printed(Fraction(-1, 10**9), 3)
    ('0.6667', '-0.13', '0.000')
    """
    scaled = abs(value) * 10**decimals
    whole = (2 * scaled.numerator + scaled.denominator) // (2 * scaled.denominator)
    sign = "-" if value < 0 and whole else ""
    digits = str(whole).rjust(decimals + 1, "0")
    if not decimals:
        return sign + digits
    return f"{sign}{digits[:-decimals]}.{digits[-decimals:]}"


def significant_digits(text: str) -> int:
    """How many significant digits a printed decimal shows.

    >>> significant_digits("-0.0150"), significant_digits("12.50")
    (3, 4)
    """
    return len(text.lstrip("-").replace(".", "").lstrip("0"))
