"""Quantities with a dimension, converted exactly between the units that a calculation may use."""

from __future__ import annotations

import re
from fractions import Fraction

from calcpack.exact.numbers import read_decimal

# International foot and pound: 1 in = 0.0254 m and 1 lbf = 0.45359237 kg x 9.80665 m/s2, both exact
# (NIST Special Publication 811, appendix B, from memory).
_METRE = {
    "m": Fraction(1),
    "mm": Fraction(1, 1000),
    "cm": Fraction(1, 100),
    "ft": Fraction(3048, 10000),
    "in": Fraction(254, 10000),
}
_NEWTON = {
    "N": Fraction(1),
    "kN": Fraction(1000),
    "MN": Fraction(10**6),
    "lb": Fraction("4.4482216152605"),
    "kip": Fraction("4448.2216152605"),
}

SYSTEMS: dict[str, dict[str, str]] = {
    "US": {
        "length": "ft",
        "force": "kip",
        "line load": "kip/ft",
        "moment": "kip·ft",
        "number": "",
        "area": "ft²",
    },
    "SI": {
        "length": "m",
        "force": "kN",
        "line load": "kN/m",
        "moment": "kN·m",
        "number": "",
        "area": "m²",
    },
}
"""Per system, the unit of each kind of quantity (``formats.md``); a number has none."""

_NUMBER = r"[+-]?\d[\d_]*(?:\.[\d_]+)?(?:[eE][+-]?\d+)?"
_ATOM = r"[A-Za-z]+[2-4²³⁴]?"
_UNIT = rf"{_ATOM}(?:\s*[·*/]\s*{_ATOM}|\s+{_ATOM})*"
_PART = re.compile(rf"\s*({_NUMBER})\s*({_UNIT})")
_POWERS = {"2": 2, "3": 3, "4": 4, "²": 2, "³": 3, "⁴": 4}


def looks_like_quantity(text: str) -> bool:
    """Whether a string starts as a number does: then it is a quantity, otherwise a name.

    >>> looks_like_quantity("12 ft 6 in"), looks_like_quantity("h1"), looks_like_quantity("1")
    (True, False, False)
    """
    return re.match(rf"\s*{_NUMBER}\s*[A-Za-z]", text) is not None


def parse_unit(text: str) -> tuple[Fraction, int, int]:
    """A unit as (size in newtons and metres, power of force, power of length).

    Raises:
        ValueError: a unit that is not known.

    >>> parse_unit("kN/m")
    (Fraction(1000, 1), 1, -1)
    >>> parse_unit("in4")[1:]
    (0, 4)
    """
    size, force, length = Fraction(1), 0, 0
    if not text:
        return size, force, length
    sign = 1
    for token in re.findall(rf"{_ATOM}|/", text):
        if token == "/":
            sign = -1
            continue
        power = sign * _POWERS.get(token[-1], 1)
        atom = token.rstrip("234²³⁴")
        if atom in _METRE:
            size, length = size * _METRE[atom] ** power, length + power
        elif atom in _NEWTON:
            size, force = size * _NEWTON[atom] ** power, force + power
        else:
            raise ValueError(f"unit {atom!r} is not known; use {', '.join([*_METRE, *_NEWTON])}")
    return size, force, length


def read_quantity(text: str, kind: str, system: str) -> Fraction:
    """Read ``"12 ft 6 in"``, ``"12.5 m"`` or ``"0.9 kip/ft"`` exactly, in the system's own unit.

    Args:
        text: one number with a unit, or for lengths several that add up; a leading sign
            holds for the whole.
        kind: what it must be: a key of ``SYSTEMS[system]``.
        system: ``"US"`` or ``"SI"``.

    Returns:
        The value in the system's unit for that kind.

    Raises:
        ValueError: not a quantity of that kind; the message says what is needed.

    >>> read_quantity("12 ft 6 in", "length", "US")
    Fraction(25, 2)
    >>> read_quantity("3 in", "length", "SI")
    Fraction(381, 5000)
    """
    wanted = SYSTEMS[system][kind]
    needs = f"must be a {kind} such as 2.5 {wanted}"
    size, force, length = parse_unit(wanted)
    total, end, parts = Fraction(0), 0, 0
    negative = text.lstrip().startswith("-")
    for match in _PART.finditer(text):
        if text[end : match.start()].strip():
            raise ValueError(needs)
        number = read_decimal(match[1])
        part_size, part_force, part_length = parse_unit(match[2])
        if (part_force, part_length) != (force, length):
            raise ValueError(needs)
        if parts and (kind != "length" or match[1][0] in "+-"):
            raise ValueError(needs)
        total += (-abs(number) if negative else number) * part_size / size
        end, parts = match.end(), parts + 1
    if not parts or text[end:].strip():
        raise ValueError(needs)
    return total
