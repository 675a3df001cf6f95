"""One value at a time: from what TOML holds to what the field means."""

from __future__ import annotations

import re
from collections.abc import Iterable
from datetime import date
from fractions import Fraction
from typing import Any

from calcpack.exact.numbers import LARGEST, SMALLEST, read_decimal
from calcpack.exact.units import SYSTEMS, example_of, read_quantity
from calcpack.intake.document import DecimalText
from calcpack.intake.shown import readable, unprintable
from calcpack.model.fields import Field

LONGEST = {"place": 60, "name": 60, "text": 200, "long text": 1000}
"""The most characters of each kind of text."""

_LONGEST_QUANTITY = 60
_NOT_IN_QUANTITY = re.compile(r"[^ -~·²³⁴]")
_SIZE = "must be 0 or between 1e-9 and 1e12 in size"


def read_value(raw: Any, field: Field, units: str | None) -> Any:
    """Read one value as its field says.

    Args:
        raw: the value as ``document.parse`` gives it; no table.
        field: says the kind, the choices and the bounds.
        units: "US" or "SI", or None where the file does not say.

    Returns:
        A ``Fraction`` in the file's unit, text, a date or a flag; None for a quantity with a unit
        while ``units`` is None: it is well formed, but its value is not known.

    Raises:
        ValueError: the value is refused; the message says what is needed.

    >>> read_value("12 ft 6 in", Field("Length", "length"), "US")
    Fraction(25, 2)
    """
    match field.kind:
        case "choice":
            if not any(raw == choice and type(raw) is type(choice) for choice in field.choices):
                raise ValueError(f"must be {alternatives(field.choices)}")
            return raw
        case "flag":
            if not isinstance(raw, bool):
                raise ValueError("must be true or false")
            return raw
        case "date":
            if type(raw) is not date:
                raise ValueError("must be a date such as 2026-03-02")
            return raw
        case "text" | "long text" | "name":
            return _text(raw, field)
        case "place":
            return _text(raw, field) if isinstance(raw, str) else _number(raw, "length", units)
        case kind:
            value = _number(raw, kind, units)
            if value is not None:
                _check_bounds(value, field, unit_of(kind, units))
            return value


def unit_of(kind: str, units: str | None) -> str:
    """The unit of a kind of field; "" for what has none or while ``units`` is not known.

    >>> unit_of("length", "SI"), unit_of("place", "SI"), unit_of("text", "SI")
    ('m', 'm', '')
    """
    return SYSTEMS[units].get("length" if kind == "place" else kind, "") if units else ""


def amount(value: Fraction, kind: str, units: str | None) -> str:
    """A value in the file's unit as messages have it.

    >>> amount(Fraction(1, 3), "length", "SI")
    '1/3 ≈ 0.3333 m'
    """
    return f"{readable(value)} {unit_of(kind, units)}".rstrip()


def within(length: Fraction, units: str | None, inside: bool = False) -> str:
    """What is needed of a station off the beam: to lie on it, or strictly inside it.

    >>> within(Fraction(12), "SI")
    'must lie on the beam, 0 m to 12 m'
    """
    ends = (amount(end, "length", units) for end in (Fraction(0), length))
    return f"must lie {'inside' if inside else 'on the beam,'} {' to '.join(ends)}"


def alternatives(choices: tuple[str | int, ...]) -> str:
    """Choices as a sentence has them.

    >>> alternatives(("pin", "roller", "fixed"))
    '"pin", "roller" or "fixed"'
    """
    return listed(
        (f'"{choice}"' if isinstance(choice, str) else choice for choice in choices), "or"
    )


def listed(some: Iterable[str | int], joint: str = "and") -> str:
    """Words as a sentence has them.

    >>> listed([1, 2, 3])
    '1, 2 and 3'
    """
    *others, last = map(str, some)
    return f"{', '.join(others)} {joint} {last}" if others else last


def _text(raw: Any, field: Field) -> str:
    if not isinstance(raw, str):
        raise ValueError("must be text")
    longest = LONGEST[field.kind]
    if len(raw) > longest:
        raise ValueError(f"must have at most {longest:,} characters")
    if field.required and not raw.strip():
        raise ValueError("must not be blank")
    for character in raw:
        if unprintable(character):
            raise ValueError(f"must not hold the character U+{ord(character):04X}")
    return raw


def _number(raw: Any, kind: str, units: str | None) -> Fraction | None:
    needs = example_of(kind, unit_of(kind, units))
    if isinstance(raw, DecimalText):
        return read_decimal(raw.text)
    if isinstance(raw, int) and not isinstance(raw, bool):
        if abs(raw) > LARGEST:
            raise ValueError(_SIZE)
        return Fraction(raw)
    if not isinstance(raw, str) or kind == "number":
        raise ValueError(needs)
    # The length is checked first: what reads quantities may look at a text many times over.
    if len(raw) > _LONGEST_QUANTITY or _NOT_IN_QUANTITY.search(raw):
        raise ValueError(needs)
    value = read_quantity(raw, kind, units or "SI")
    if value and not SMALLEST <= abs(value) <= LARGEST:
        raise ValueError(_SIZE)
    return value if units else None


def _check_bounds(value: Fraction, field: Field, unit: str) -> None:
    for holds, words, bound in (
        (field.above is None or value > field.above, "above", field.above),
        (field.least is None or value >= field.least, "at least", field.least),
        (field.most is None or value <= field.most, "at most", field.most),
    ):
        if not holds:
            raise ValueError(f"must be {words} {bound} {unit}".rstrip())
