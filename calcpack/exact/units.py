"""Quantities with a dimension, converted exactly between the units that a calculation may use."""

from __future__ import annotations

import re
from fractions import Fraction

from calcpack.exact.numbers import read_decimal

# International foot and pound: 1 in = 0.0254 m and 1 lbf = 0.45359237 kg x 9.80665 m/s2, both exact
# (NIST Special Publication 811, appendix B, from memory).
_INCH = Fraction(254, 10000)
_POUND = Fraction("4.4482216152605")
_ATOMS = {
    "m": (Fraction(1), 0, 1),
    "mm": (Fraction(1, 1000), 0, 1),
    "cm": (Fraction(1, 100), 0, 1),
    "ft": (12 * _INCH, 0, 1),
    "in": (_INCH, 0, 1),
    "N": (Fraction(1), 1, 0),
    "kN": (Fraction(1000), 1, 0),
    "MN": (Fraction(10**6), 1, 0),
    "lb": (_POUND, 1, 0),
    "kip": (1000 * _POUND, 1, 0),
    "Pa": (Fraction(1), 1, -2),
    "MPa": (Fraction(10**6), 1, -2),
    "GPa": (Fraction(10**9), 1, -2),
    "psi": (_POUND / _INCH**2, 1, -2),
    "ksi": (1000 * _POUND / _INCH**2, 1, -2),
    "rad": (Fraction(1), 0, 0),
    "mrad": (Fraction(1, 1000), 0, 0),
}
"""Each unit's size in newtons and metres, its power of force and its power of length."""

SYSTEMS: dict[str, dict[str, str]] = {
    "US": {
        "length": "ft",
        "force": "kip",
        "line load": "kip/ft",
        "moment": "kip·ft",
        "deflection": "in",
        "rotation": "rad",
        "E": "ksi",
        "I": "in⁴",
        "EI": "kip·ft²",
        "EI length": "kip·ft³",
        "spring": "kip/ft",
        "rotational spring": "kip·ft/rad",
        "number": "",
        "area": "ft²",
        "volume": "ft³",
        "per length": "1/ft",
        "per area": "1/ft²",
        "per volume": "1/ft³",
        "deflection line": "in/kip",
        "deflection area": "in·ft/kip",
        "deflection curvature": "in/(kip·ft²)",
        "rotation line": "rad/kip",
        "rotation area": "rad·ft/kip",
        "rotation curvature": "rad/(kip·ft²)",
    },
    "SI": {
        "length": "m",
        "force": "kN",
        "line load": "kN/m",
        "moment": "kN·m",
        "deflection": "mm",
        "rotation": "rad",
        "E": "MPa",
        "I": "mm⁴",
        "EI": "kN·m²",
        "EI length": "kN·m³",
        "spring": "kN/m",
        "rotational spring": "kN·m/rad",
        "number": "",
        "area": "m²",
        "volume": "m³",
        "per length": "1/m",
        "per area": "1/m²",
        "per volume": "1/m³",
        "deflection line": "mm/kN",
        "deflection area": "mm·m/kN",
        "deflection curvature": "mm/(kN·m²)",
        "rotation line": "rad/kN",
        "rotation area": "rad·m/kN",
        "rotation curvature": "rad/(kN·m²)",
    },
}
"""Per system, the unit of each kind of quantity (``formats.md``); a number has none."""

_NUMBER = r"[+-]?\d[\d_]*(?:\.[\d_]+)?(?:[eE][+-]?\d+)?"
_ATOM = r"[A-Za-z]+[2-4²³⁴]?"
_UNIT = rf"{_ATOM}(?:\s*[·*/]\s*{_ATOM}|\s+{_ATOM})*"
_PART = re.compile(rf"\s*({_NUMBER})\s*({_UNIT})", re.ASCII)
_POWERS = {"2": 2, "3": 3, "4": 4, "²": 2, "³": 3, "⁴": 4}


def looks_like_quantity(text: str) -> bool:
    """Whether a string starts as a number does: then it is a quantity, otherwise a name.

    >>> looks_like_quantity("12 ft 6 in"), looks_like_quantity("h1"), looks_like_quantity("1")
    (True, False, False)
    """
    return re.match(rf"\s*{_NUMBER}\s*[A-Za-z]", text, re.ASCII) is not None


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
    sign = 1
    for token in re.findall(rf"{_ATOM}|/", text):
        if token == "/":
            sign = -1
            continue
        power = sign * _POWERS.get(token[-1], 1)
        atom = token.rstrip("234²³⁴")
        if atom not in _ATOMS:
            raise ValueError(f"unit {atom!r} is not known; use {', '.join(_ATOMS)}")
        atom_size, atom_force, atom_length = _ATOMS[atom]
        size *= atom_size**power
        force, length = force + power * atom_force, length + power * atom_length
    return size, force, length


def unit_size(kind: str, system: str) -> Fraction:
    """The size, in newtons and metres, of the system's unit for a kind of quantity.

    The quotient of two of them converts exactly.

    >>> unit_size("length", "US") / unit_size("deflection", "US")
    Fraction(12, 1)
    >>> unit_size("E", "US") * unit_size("I", "US") / unit_size("EI", "US")
    Fraction(1, 144)
    """
    return parse_unit(SYSTEMS[system][kind])[0]


def example_of(kind: str, unit: str) -> str:
    """What a quantity must be, in the words of a message.

    >>> example_of("length", "ft"), example_of("EI", "kN·m²")
    ('must be a length such as 2.5 ft', 'must be an EI such as 2.5 kN·m²')
    """
    article = "an" if kind[0] in "AEIOaeio" else "a"
    return f"must be {article} {kind} such as 2.5 {unit}".rstrip()


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
    needs = example_of(kind, wanted)
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
