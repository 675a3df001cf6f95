"""What was read, as data for others: plain JSON, the numbers by path, the data echo."""

from __future__ import annotations

from datetime import date
from fractions import Fraction
from typing import Any

from calcpack.intake.document import DecimalText
from calcpack.intake.reading import Reading, Value
from calcpack.intake.shown import readable, typed
from calcpack.intake.values import unit_of
from calcpack.model.fields import FIELDS
from calcpack.model.request import Entry

_DEFAULT_EFFECTS = "every reaction and moment reaction; moment and shear at each section"


def plain(value: Any) -> Any:
    """A document as plain JSON data: decimals as the nearest double, dates as ISO text.

    >>> plain({"length": DecimalText("12.50"), "on": date(2026, 3, 2), "spans": [40]})
    {'length': 12.5, 'on': '2026-03-02', 'spans': [40]}
    """
    if isinstance(value, dict):
        return {key: plain(item) for key, item in value.items()}
    if isinstance(value, list):
        return [plain(item) for item in value]
    if isinstance(value, DecimalText):
        return float(value.text)
    return value.isoformat() if isinstance(value, date) else value


def inputs(reading: Reading) -> dict[str, Fraction]:
    """Every number that was typed or holds by default, exact, in the file's units, by path."""
    return {
        path: found.value
        for path, found in reading.values.items()
        if isinstance(found.value, Fraction)
    }


def echo(reading: Reading) -> tuple[Entry, ...]:
    """A row for each value, typed or default, in the order of the field table.

    The values of a table come after those of the part that names it. An effect is one row; so are
    the default effects where the file states none.
    """
    rows: dict[str, list[Entry]] = {key: [] for key in FIELDS}
    for path, found in reading.values.items():
        is_number = isinstance(found.value, Fraction)
        unit = unit_of(found.field.kind, reading.units) if is_number else ""
        row = Entry(path, found.field.label, _said(found), unit, found.entered)
        rows[reading.stated_at(path).partition(".")[0].partition("[")[0]].append(row)
    rows["effects"] = [_effect(reading, path) for path in reading.items("effects")]
    if not rows["effects"]:
        rows["effects"] = [Entry("effects", "Effects", _DEFAULT_EFFECTS, "", False)]
    return tuple(row for part in rows.values() for row in part)


def _said(found: Value) -> str:
    said = typed(found.raw)
    if isinstance(found.raw, str) and isinstance(found.value, Fraction):
        return f"{said} = {readable(found.value)}"
    return said


def _effect(reading: Reading, path: str) -> Entry:
    kinds = ", ".join(reading.value(item) for item in reading.items(f"{path}.kind"))
    places = []
    for item in reading.items(f"{path}.at"):
        found = reading.values[item]
        unit = f" {unit_of('place', reading.units)}" if isinstance(found.value, Fraction) else ""
        places.append(_said(found) + unit)
    side, show = reading.value(f"{path}.side"), reading.value(f"{path}.show")
    said = f"{kinds} at {', '.join(places)}"
    said += f", {side} face" if side else ""
    said += f"; {show}" if show else ""
    return Entry(path, "Effect", said, "", True)
