"""Tables beside calc.toml, their rows read as items of the list that they stand for."""

from __future__ import annotations

import contextlib
import csv
import io
import os
import re
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from calcpack.intake.document import MOST_BYTES, DecimalText, undecodable
from calcpack.intake.reading import Reading, Row


@dataclass(frozen=True)
class Table:
    """A CSV as text: its header, and each row below that is not blank with its number.

    Rows are counted as a spreadsheet does: from 1, the header and blank rows with them.
    ``named_at`` is the path of the key that names the table.
    """

    name: str
    named_at: str
    header: tuple[str, ...]
    rows: tuple[tuple[int, tuple[str, ...]], ...]


def open_table(reading: Reading, named_at: str, folder: Path | None) -> Table | None:
    """Read the table that a key names; None where it is refused.

    It is UTF-8 with commas, at most 1 MiB, in the folder of calc.toml or below: neither its path
    nor a link may leave that folder.
    """
    name: str | None = reading.value(named_at)
    if name is None:
        return None
    if folder is None:
        reading.refuse(named_at, "needs the folder of calc.toml, which was not given")
        return None
    path = _path_within(folder, name)
    if path is None:
        like = "stiffness.csv" if named_at.startswith("beam.stiffness") else "axles.csv"
        reading.refuse(named_at, f"must be a CSV in the folder of calc.toml, such as {like}")
        return None
    content = _content(path)
    if content is None:
        reading.refuse(named_at, "must be a file that can be read")
        return None
    if len(content) > MOST_BYTES:
        needs = f"must have at most {MOST_BYTES:,} bytes"
        reading.refuse(named_at, needs)
        return None
    try:
        text = io.StringIO(content.decode("utf-8-sig"), newline="")
        records = [tuple(map(str.strip, cells)) for cells in csv.reader(text, strict=True)]
    except UnicodeDecodeError as error:
        reading.refuse(named_at, "must be UTF-8 text", f"{name} with {undecodable(error)}")
        return None
    except csv.Error as error:
        reading.refuse(named_at, "must be CSV", f"{name} with {error}")
        return None
    reading.tables[name] = content
    filled = [(number, cells) for number, cells in enumerate(records, start=1) if any(cells)]
    header = filled[0][1] if filled else ()
    return Table(name, named_at, header, tuple(filled[1:]))


def read_rows(
    reading: Reading, table: Table, pattern: str, columns: Mapping[str, str]
) -> list[str]:
    """Read every row as an item of the list with that pattern; the paths of the rows come back.

    Args:
        reading: takes the values, such as ``stiffness.csv[0].EI``, and the faults, named as
            ``stiffness.csv: row 2, EI``.
        table: the table; its other columns are passed over.
        pattern: that of the items, such as ``beam.stiffness[]``.
        columns: the column of each key that is read.
    """
    places = {key: table.header.index(column) for key, column in columns.items()}
    paths = []
    for index, (number, cells) in enumerate(table.rows):
        path, called = f"{table.name}[{index}]", f"{table.name}: row {number}"
        found = {
            key: _raw(cells[place])
            for key, place in places.items()
            if place < len(cells) and cells[place]
        }
        reading.read_row(Row(path, called, table.named_at, pattern, found, columns))
        if len(cells) > len(table.header):
            needs = f"must have at most {len(table.header)}, as the header does"
            reading.refuse(path, needs, f"{len(cells)} cells")
        paths.append(path)
    return paths


def _path_within(folder: Path, name: str) -> Path | None:
    steps = name.split("/")
    if not name.lower().endswith(".csv") or re.search(r"[\\:]", name) or {"", ".", ".."} & {*steps}:
        return None
    path = Path(os.path.realpath(folder / name))
    return path if path.is_relative_to(os.path.realpath(folder)) else None


def _content(path: Path) -> bytes | None:
    """No more bytes than it takes to refuse a table too large; None for what is no plain file."""
    with contextlib.suppress(OSError):
        if os.path.isfile(path):  # a pipe would keep its reader waiting
            with path.open("rb") as file:
                return file.read(MOST_BYTES + 1)
    return None


def _raw(cell: str) -> Any:
    """A cell as TOML would have it: a number as it was typed, or text."""
    return cell if re.search(r"[^0-9eE._+-]", cell) else DecimalText(cell)
