"""Axles and trains: weights, spacings, and the tables that may hold them."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction
from pathlib import Path

from calcpack.intake.reading import Reading
from calcpack.intake.shown import shown
from calcpack.intake.tables import open_table, read_rows
from calcpack.intake.values import amount, unit_of
from calcpack.model.loads import Axle, Gap, Given, Strip, Train

MOST_AXLES = 1000


class Trains:
    """The axles and trains of a file; counts them, and reads each table once."""

    def __init__(self, reading: Reading, folder: Path | None) -> None:
        self.reading, self.folder = reading, folder
        self._count = 0
        self._tables: dict[str, list[str]] = {}
        self.by_name: dict[str, Train | None] = {}
        """The trains that moving loads name; None for one that was refused."""
        self.named = not reading.refused("trains")
        """Whether ``by_name`` misses none, since each name could be read."""
        taken: dict[str, str] = {}
        for path in reading.items("trains"):
            name = reading.value(f"{path}.name")
            axles = self.axles(path)
            if not axles and not self._stated(path) and not reading.refused(path):
                reading.refuse(path, "must have axles or a table", "no axles")
            if name is None:
                self.named = False
            elif taken.setdefault(name, path) != path:
                reading.refuse(f"{path}.name", f"must differ from the name at {taken[name]}.name")
            else:
                self.by_name[name] = Train(name, axles) if axles else None

    def _stated(self, path: str) -> bool:
        """Whether axles are stated there at all, accepted or not."""
        given, items = self.reading.given, self.reading.items(f"{path}.axles")
        return bool(items) or given(f"{path}.table") or self.reading.refused(f"{path}.axles")

    def axles(self, path: str) -> tuple[Axle, ...]:
        """The axles of a train or a moving load, from a list or from a table; () if refused."""
        reading = self.reading
        paths = reading.items(f"{path}.axles")
        if reading.given(f"{path}.table"):
            if reading.given(f"{path}.axles"):
                reading.refuse(f"{path}.axles", "must be left out beside table")
            paths = self._rows(f"{path}.table")
        before = self._count
        self._count += len(paths)
        if max(before, len(paths)) <= MOST_AXLES < self._count:
            needs = f"must leave at most {MOST_AXLES:,} axles in all"
            key = "table" if reading.given(f"{path}.table") else "axles"
            reading.refuse(f"{path}.{key}", needs, f"{self._count:,} axles up to here")
        axles = [self._axle(axle, number == 0) for number, axle in enumerate(paths)]
        return tuple(axles) if None not in axles else ()  # type: ignore[arg-type]

    def _rows(self, named_at: str) -> list[str]:
        name = self.reading.value(named_at)
        if name not in self._tables:
            table = open_table(self.reading, named_at, self.folder)
            self._tables[name] = []
            if table is not None:
                columns: dict[str, str] = {
                    key: key for key in ("weight", "spacing") if key in table.header
                }
                if set(columns) != {"weight", "spacing"} or any(
                    table.header.count(column) != 1 for column in columns
                ):
                    needs = 'must have the columns "weight" and "spacing", each once'
                    header = shown(", ".join(table.header))
                    self.reading.refuse(named_at, needs, f"{name} with the columns {header}")
                elif not 0 < len(table.rows) <= MOST_AXLES:
                    needs = f"must have 1 to {MOST_AXLES:,}"
                    said = f"{name} with {len(table.rows):,} rows"
                    self.reading.refuse(named_at, needs, said)
                else:
                    pattern = "moving[].axles[]"
                    self._tables[name] = read_rows(self.reading, table, pattern, columns)
        return self._tables[name]

    def _axle(self, path: str, leads: bool) -> Axle | None:
        weight = self.reading.value(f"{path}.weight")
        gap = self.gap(f"{path}.spacing", leads)
        if weight is None or (gap is None and not leads):
            return None
        return Axle(Given(weight, f"{path}.weight"), gap)

    def gap(self, path: str, leads: bool = False) -> Gap | None:
        """A spacing in any of its forms; None where there is none or it is refused."""
        reading = self.reading
        if leads:
            if reading.given(path) and reading.value(path) != 0 and not reading.refused(path):
                reading.refuse(path, "must be left out: no axle is ahead of the lead axle")
            return None
        if reading.lacks(path):
            reading.refuse(path, "must be given")
            return None
        keyed = reading.lacks(f"{path}.list") or reading.given(f"{path}.list")
        return self._keyed(path) if keyed else self._range(path)

    def _range(self, path: str) -> Gap | None:
        """A number, or a list of the least and the greatest."""
        reading, items = self.reading, self.reading.items(path)
        values = [reading.value(item) for item in items]
        if len(items) > 2 or (len(items) == 1 and items != [path]):
            reading.refuse(path, "must be a number, or the least and the greatest of a range")
            return None
        unit = unit_of("length", reading.units)
        low = [
            item
            for item, value in zip(items, values, strict=True)
            if value is not None and value <= 0
        ]
        for item in low:
            reading.refuse(item, f"must be above 0 {unit}".rstrip())
        if low or None in values or not items:
            return None
        if len(items) == 2 and values[0] >= values[1]:
            least = amount(values[0], "length", reading.units)
            reading.refuse(items[1], f"must be above {least}, the least of the range")
            return None
        ties = tuple(Given(value, item) for item, value in zip(items, values, strict=True))
        return Gap(ties, free=len(ties) == 2)

    def _keyed(self, path: str) -> Gap | None:
        """``{ list = [...] }`` or ``{ least = ... }``."""
        reading = self.reading
        if reading.given(f"{path}.list") and reading.given(f"{path}.least"):
            reading.refuse(f"{path}.least", "must be left out beside list")
            return None
        if not reading.given(f"{path}.list") and not reading.given(f"{path}.least"):
            reading.refuse(f"{path}.list", "must be given, or least")
            return None
        if reading.given(f"{path}.least"):
            least = reading.value(f"{path}.least")
            return None if least is None else Gap((Given(least, f"{path}.least"),), free=True)
        items = reading.items(f"{path}.list")
        values = [reading.value(item) for item in items]
        if None in values or not items:
            return None
        for one, other, item in zip(values, values[1:], items[1:], strict=False):
            if one >= other:
                reading.refuse(item, "must be above the one before it in the list")
                return None
        return Gap(tuple(Given(value, item) for item, value in zip(items, values, strict=True)))


def read_strips(reading: Reading, path: str) -> Iterator[Strip]:
    """The loads that travel with a train, at ``path`` and ``[0]`` and so on."""
    for one in reading.items(path):
        start = _either(reading, one, "behind", "ahead")
        force = _either(reading, one, "load", "weight")
        length = reading.value(f"{one}.length")
        by_weight = reading.given(f"{one}.weight") and not reading.given(f"{one}.load")
        if by_weight and reading.lacks(f"{one}.length"):
            reading.refuse(f"{one}.length", "must be given beside weight")
        if start is not None and force is not None:
            yield Strip(
                start,
                None if length is None else Given(length, f"{one}.length"),
                force,
                ahead=start.path.endswith(".ahead"),
                broken=reading.value(f"{one}.extent") == "in parts",
                of_weight=by_weight,
            )


def _either(reading: Reading, path: str, key: str, other: str) -> Given | None:
    """The number at one of two keys, of which exactly one must be given."""
    both = [one for one in (key, other) if reading.given(f"{path}.{one}")]
    if len(both) == 2:
        reading.refuse(f"{path}.{other}", f"must be left out beside {key}")
    elif not both and reading.lacks(f"{path}.{key}"):
        reading.refuse(f"{path}.{key}", f"must be given, or {other}")
    if not both:
        return None
    value: Fraction | None = reading.value(f"{path}.{both[0]}")
    return None if value is None else Given(value, f"{path}.{both[0]}")
