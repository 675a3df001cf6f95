"""The bending stiffness of the beam, stretch by stretch, and what cannot do without it."""

from __future__ import annotations

from fractions import Fraction
from pathlib import Path

from calcpack.exact.units import unit_size
from calcpack.intake.reading import Reading
from calcpack.intake.shown import shown
from calcpack.intake.tables import open_table, read_rows
from calcpack.intake.values import amount, within
from calcpack.model.beam import Stretch, Typed

MOST_STRETCHES = 400

_COLUMNS = ({"from", "to", "EI"}, {"from", "to", "E", "I"})


def read_stiffness(
    reading: Reading, length: Fraction | None, folder: Path | None
) -> tuple[Stretch, ...]:
    """The stretches in order, each with EI in force times length squared; () where none is stated.

    Args:
        reading: faults are noted here, also a gap or an overlap.
        length: that of the beam, None while it is not known.
        folder: where a table is looked for.
    """
    paths = reading.items("beam.stiffness")
    if reading.refused("beam.stiffness"):
        return ()
    if len(paths) > MOST_STRETCHES:
        needs = f"must be at most {MOST_STRETCHES}"
        reading.refuse("beam.stiffness", needs, f"{len(paths)} stretches")
        return ()
    tables = [path for path in paths if reading.given(f"{path}.table")]
    if tables and len(paths) > 1:
        for path in tables:
            reading.refuse(f"{path}.table", "must be the only entry of beam.stiffness")
        return ()
    if tables:
        paths = _rows(reading, paths[0], folder)
    _check_ends(reading, paths, length)
    stretches = []
    for path in paths:
        start, end = reading.value(f"{path}.from"), reading.value(f"{path}.to")
        stiffness = _bending_stiffness(reading, path)
        if None not in (start, end) and stiffness is not None:
            stretches.append(Stretch(start, end, stiffness, Typed(f"{path}.from"), path))
    return tuple(stretches)


def check_stiffness_stated(reading: Reading) -> None:
    """Springs, settlements, deflections and rotations need EI in absolute terms."""
    stated = reading.items("beam.stiffness")
    if stated or reading.refused("beam.stiffness") or reading.refused("beam"):
        return
    supports = [f"{path}.kind" for path in reading.items("beam.supports")]
    effects = [kind for path in reading.items("effects") for kind in reading.items(f"{path}.kind")]
    for path in (*supports, *effects):
        if reading.value(path) in ("spring", "deflection", "rotation"):
            reading.refuse(path, "needs beam.stiffness")
    for path in reading.items("permanent"):
        if reading.items(f"{path}.settlements"):
            reading.refuse(f"{path}.settlements", "needs beam.stiffness")


def _rows(reading: Reading, path: str, folder: Path | None) -> list[str]:
    """The paths of the rows of the table at the only entry; none where it is refused."""
    for key in ("from", "to", "EI", "E", "I"):
        if reading.given(f"{path}.{key}"):
            reading.refuse(f"{path}.{key}", "must be left out beside table")
    named_at, column = f"{path}.table", reading.value(f"{path}.column")
    table = open_table(reading, named_at, folder)
    if table is None or (reading.given(f"{path}.column") and column is None):
        return []
    columns: dict[str, str] = {"from": "from", "to": "to", "EI": column}
    wanted = f'"{column}"'
    if column is None:
        columns = {key: key for key in ("from", "to", "EI", "E", "I") if key in table.header}
        wanted = 'either "EI" or "E" and "I"'
    if set(columns) not in _COLUMNS or any(
        table.header.count(one) != 1 for one in columns.values()
    ):
        needs = f'must have the columns "from", "to" and {wanted}, each once'
        header = shown(", ".join(table.header))
        reading.refuse(named_at, needs, f"{table.name} with the columns {header}")
    elif not 0 < len(table.rows) <= MOST_STRETCHES:
        needs = f"must have 1 to {MOST_STRETCHES}"
        reading.refuse(named_at, needs, f"{table.name} with {len(table.rows):,} rows")
    else:
        return read_rows(reading, table, "beam.stiffness[]", columns)
    return []


def _check_ends(reading: Reading, paths: list[str], length: Fraction | None) -> None:
    """Each stretch starts where the one before ends; together they cover the beam."""

    def said(value: Fraction) -> str:
        return amount(value, "length", reading.units)

    before: Fraction | None = Fraction(0)
    where = "the beam starts"
    for path in paths:
        for key in ("from", "to"):
            if reading.lacks(f"{path}.{key}"):
                reading.refuse(f"{path}.{key}", "must be given")
        start: Fraction | None = reading.value(f"{path}.from")
        end: Fraction | None = reading.value(f"{path}.to")
        if start is not None and before is not None and start != before:
            reading.refuse(f"{path}.from", f"must be {said(before)}, where {where}")
        if start is not None and end is not None and end <= start:
            reading.refuse(f"{path}.to", f"must be above {said(start)}, where the stretch starts")
        elif end is not None and length is not None:
            if path == paths[-1] and end != length:
                reading.refuse(f"{path}.to", f"must be {said(length)}, where the beam ends")
            elif end > length:
                reading.refuse(f"{path}.to", within(length, reading.units))
        before, where = end, f"{reading.called(path)} ends"


def _bending_stiffness(reading: Reading, path: str) -> Fraction | None:
    """EI of a stretch, from EI itself or from E and I; None where it is refused or not known."""
    factors = [key for key in ("E", "I") if reading.given(f"{path}.{key}")]
    if reading.given(f"{path}.EI"):
        for key in factors:
            reading.refuse(f"{path}.{key}", "must be left out beside EI")
        stiffness: Fraction | None = reading.value(f"{path}.EI")
        return stiffness
    if not factors and reading.lacks(f"{path}.EI"):
        reading.refuse(f"{path}.EI", "must be given, or E and I")
    elif len(factors) == 1:
        other = "I" if factors == ["E"] else "E"
        reading.refuse(f"{path}.{other}", f"must be given beside {factors[0]}")
    modulus, inertia = reading.value(f"{path}.E"), reading.value(f"{path}.I")
    if modulus is None or inertia is None or reading.units is None:
        return None
    size = {kind: unit_size(kind, reading.units) for kind in ("E", "I", "EI")}
    product: Fraction = modulus * inertia * size["E"] * size["I"] / size["EI"]
    return product
