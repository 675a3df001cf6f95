"""A document read key by key as the field table says: values by path, and every fault."""

from __future__ import annotations

import difflib
from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, replace
from fractions import Fraction
from typing import Any

from calcpack.errors import InputRefused, Problem
from calcpack.exact.units import SYSTEMS
from calcpack.intake.document import DecimalText
from calcpack.intake.shown import joined, shown, typed
from calcpack.intake.values import alternatives, read_value, unit_of
from calcpack.model.fields import KEYS, Field, field_at, pattern_of

LONGEST_LIST = 1000
LONGEST_LISTED = 20


@dataclass(frozen=True)
class Row:
    """A row of a table, read as the item of a list that it stands for.

    Attributes:
        path: what its values are cited by, such as ``stiffness.csv[0]``.
        called: what messages call it, such as ``stiffness.csv: row 2``.
        named_at: the path of the key that names the table.
        pattern: that of the items it stands for, such as ``beam.stiffness[]``.
        cells: what stands in it, by key; empty cells are left out.
        columns: what the table calls a key.
    """

    path: str
    called: str
    named_at: str
    pattern: str
    cells: Mapping[str, Any]
    columns: Mapping[str, str]


@dataclass(frozen=True)
class Value:
    """A value that was accepted, what stood for it in the file, and whether it stood there."""

    value: Any
    raw: Any
    field: Field
    entered: bool


class Reading:
    """The values of a document, each accepted by itself, and the problems found so far.

    What reads the parts (beam, effects, loads) asks for values by path and adds what it refuses.
    A path that is given but has no value has been refused already.
    """

    def __init__(self, document: dict[str, Any]) -> None:
        units = document.get("units")
        self.units = units if isinstance(units, str) and units in SYSTEMS else None
        self.values: dict[str, Value] = {}
        self.problems: list[Problem] = []
        self.tables: dict[str, bytes] = {}
        """The bytes of each table that was read, by its name."""
        self._rows: dict[str, Row] = {}
        self._faulty: dict[str, Row] = {}
        self._raw = dict(_places(document))
        self._read_table(document, "")

    def value(self, path: str) -> Any:
        """The value at a path, typed or default; None where there is none or it was refused."""
        found = self.values.get(path)
        return None if found is None else found.value

    def given(self, path: str) -> bool:
        """Whether the file states anything at a path."""
        return path in self._raw

    def refused(self, path: str) -> bool:
        """Whether a problem was found at exactly this path."""
        called = self.called(path)
        return any(problem.path == called for problem in self.problems)

    def lacks(self, path: str) -> bool:
        """Whether a table stands there in the file that does not state this key."""
        return not self.given(path) and isinstance(self._raw.get(path.rpartition(".")[0]), Mapping)

    def items(self, path: str) -> list[str]:
        """The paths of a list's items, or of the one value of a field that may have several."""
        raw, field = self._raw.get(path), field_at(self._pattern(path))
        if isinstance(raw, list):
            return [f"{path}[{index}]" for index in range(len(raw))]
        return [path] if raw is not None and field and field.form == "several" else []

    def refuse(self, path: str, needs: str, said: str | None = None) -> None:
        """Note a problem; without ``said`` the value itself is shown, with its unit."""
        called = self.called(path)
        if row := self._row(path):
            self._faulty[called] = row
        self.problems.append(Problem(called, self.said(path) if said is None else said, needs))

    def withdraw(self, path: str) -> None:
        """Take back a default where something else holds."""
        if not self.given(path):
            self.values.pop(path, None)

    def called(self, path: str) -> str:
        """What messages call a path: itself, or the row and the column of a table."""
        row = self._row(path)
        if row is None:
            return path
        key = path.removeprefix(row.path).removeprefix(".")
        return f"{row.called}, {row.columns.get(key, key)}" if key else row.called

    def stated_at(self, path: str) -> str:
        """Where calc.toml states a path: there, or where it names the table that holds it."""
        row = self._row(path)
        return path if row is None else row.named_at

    def read_row(self, row: Row) -> None:
        """Read a row of a table key by key, as an item of its list would be."""
        self._rows[row.path] = row
        self._raw[row.path] = row.cells
        self._raw |= {f"{row.path}.{key}": raw for key, raw in row.cells.items()}
        self._read_table(row.cells, row.path)

    def _row(self, path: str) -> Row | None:
        return self._rows.get(path) or self._rows.get(path.rpartition(".")[0])

    def _pattern(self, path: str) -> str:
        row = self._row(path)
        return pattern_of(path) if row is None else row.pattern + path.removeprefix(row.path)

    def said(self, path: str) -> str:
        """What stands at a path, in one short line.

        >>> Reading({"units": "SI", "beam": {"length": 12}}).said("beam.length")
        '12 m'
        """
        if not self.given(path):
            return "absent"
        raw, field = self._raw[path], field_at(self._pattern(path))
        if field and isinstance(raw, int | DecimalText) and not isinstance(raw, bool):
            return f"{shown(typed(raw))} {unit_of(field.kind, self.units)}".rstrip()
        return shown(raw)

    def read_length(self, path: str) -> Fraction | None:
        """Read the text at the path of a place as a length; None if it is refused."""
        found = self.values[path]
        self._store(path, replace(found.field, kind="length"), found.raw, True)
        length: Fraction | None = self.value(path)
        return length

    def finish(self) -> None:
        """Stop if there is any problem.

        Raises:
            InputRefused: with all of them, in the order in which their paths stand in the file;
                what is absent comes just after the table that lacks it begins, and what is in a
                table beside the file, row by row, where that is named.
        """
        order = {path: place for place, path in enumerate(self._raw)}

        def place(problem: Problem) -> tuple[int, int]:
            row = self._faulty.get(problem.path)
            path = row.named_at if row else problem.path
            while path and path not in order:
                path = path[: max(path.rfind("."), path.rfind("["), 0)]
            return order.get(path, -1), order[row.path] if row else -1

        if self.problems:
            raise InputRefused(sorted(self.problems, key=place))

    def _read_table(self, table: Mapping[str, Any], path: str) -> None:
        fields = KEYS[self._pattern(path)]
        for key in table:
            if key not in fields:
                known = f"is not a known key; {nearest(key, fields, 1)}"
                self.refuse(joined(path, key), known)
        for key, field in fields.items():
            self._read_key(field, joined(path, key), table.get(key))

    def _read_key(self, field: Field, path: str, raw: Any) -> None:
        if raw is None:
            if field.kind == "table" and field.form == "one" and field.computed:
                self._read_table({}, path)
            elif field.required:
                choices = field.kind == "choice" and alternatives(field.choices)
                self.refuse(path, f"must be {choices or 'given'}")
            elif field.default is not None and field.computed and self._meant(field, path):
                self._store(path, field, field.default, False)
        elif not field.computed:
            if raw != field.default:
                self.refuse(path, "not computed by this release")
        elif not self._meant(field, path):
            self.refuse(path, f"must be left out without {field.beside}")
        elif field.kind != "table" and self._is_nested(path, raw):
            self._read_nested(path, raw)
        elif field.form == "one" or (field.form == "several" and not isinstance(raw, list)):
            self._read_item(field, path, raw)
        elif not isinstance(raw, list):
            self.refuse(path, f"must be a list{' of tables' * (field.kind == 'table')}")
        elif len(raw) > LONGEST_LIST:
            self.refuse(path, f"must have at most {LONGEST_LIST:,}", f"{len(raw):,} items")
        elif not raw and field.kind != "table":
            self.refuse(path, "must not be empty")
        else:
            for index, item in enumerate(raw):
                self._read_item(field, f"{path}[{index}]", item)

    def _is_nested(self, path: str, raw: Any) -> bool:
        """Whether a table, or a list of tables, stands where a single value might."""
        pattern = self._pattern(path)
        return (isinstance(raw, dict) and pattern in KEYS) or (
            isinstance(raw, list) and f"{pattern}[]" in KEYS
        )

    def _read_nested(self, path: str, raw: Any) -> None:
        if isinstance(raw, dict):
            self._read_table(raw, path)
        elif not raw:
            self.refuse(path, "must not be empty")
        elif len(raw) > LONGEST_LIST:
            self.refuse(path, f"must have at most {LONGEST_LIST:,}", f"{len(raw):,} items")
        else:
            for index, item in enumerate(raw):
                if isinstance(item, dict):
                    self._read_table(item, f"{path}[{index}]")
                else:
                    self.refuse(f"{path}[{index}]", "must be a table")

    def _meant(self, field: Field, path: str) -> bool:
        """Whether the table states what the field has no meaning without, as far as is known."""
        key, _, word = field.beside.partition(" = ")
        beside = joined(path.rpartition(".")[0], key)
        if word:
            return self.value(beside) in (None, word.strip('"'))
        return not key or self.given(beside)

    def _read_item(self, field: Field, path: str, raw: Any) -> None:
        if any(
            isinstance(raw, one) if isinstance(one, type) else raw == one for one in field.later
        ):
            self.refuse(path, "not computed by this release")
        elif field.kind != "table":
            self._store(path, field, raw, True)
        elif isinstance(raw, dict):
            self._read_table(raw, path)
        elif isinstance(raw, str) and raw in field.choices:
            self._store(path, replace(field, kind="choice"), raw, True)
        else:
            words = f" or {alternatives(field.choices)}" if field.choices else ""
            self.refuse(path, f"must be a table{words}")

    def _store(self, path: str, field: Field, raw: Any, entered: bool) -> None:
        try:
            value = read_value(raw, field, self.units)
        except ValueError as error:
            self.refuse(path, str(error))
            value = None
        if value is None:
            self.values.pop(path, None)
        else:
            self.values[path] = Value(value, raw, field, entered)


def nearest(word: str, known: Iterable[str], most: int) -> str:
    """The known words most like a word, or all of them where none is like it.

    >>> nearest("lenght", ["length", "spans"], 1), nearest("x", ["length", "spans"], 1)
    ("nearest is 'length'", "known are 'length', 'spans'")
    """
    known = list(known)
    matches = difflib.get_close_matches(word, known, most)
    start = "known are" if not matches else "nearest is" if len(matches) == 1 else "nearest are"
    listed = ", ".join(repr(match) for match in matches or known[:LONGEST_LISTED])
    return f"{start} {listed}{' and more' * (not matches and len(known) > LONGEST_LISTED)}"


def _places(value: Any, path: str = "") -> Iterator[tuple[str, Any]]:
    """Every path of a document with what stands there, in the order of the file."""
    if path:
        yield path, value
    if isinstance(value, dict):
        for key, item in value.items():
            yield from _places(item, joined(path, key))
    elif isinstance(value, list):
        for index, item in enumerate(value):
            yield from _places(item, f"{path}[{index}]")
