"""The beam with the governing values of the effects under their stations."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction

from calcpack.exact.formula import Symbol
from calcpack.exact.units import SYSTEMS
from calcpack.model.beam import Beam
from calcpack.sheets.bands import drawn
from calcpack.sheets.beam_parts import CLEAR, beam_scale, named_beam
from calcpack.sheets.dimensions import digits, note
from calcpack.sheets.drawing import Drawing, Item, Label, Line, Scale, extent
from calcpack.sheets.figures import WIDTH
from calcpack.sheets.labels import FAN, GAP, NEAR, TOUCH, spread
from calcpack.sheets.lettering import Run, Text, runs_of, signed

MOST_ROWS = 4
"""More rows of values under one another are harder to read than the table."""
TALLEST = 110.0
"""Most height of all values together, in mm."""
LANE = 1.2
"""Width that a leader takes between the values of a row that it passes, in mm."""
APART = 1.0
"""Between texts under one another, in mm."""
BELOW = 2.4
"""From the beam's axis to where a line down from it begins, in mm."""

Entry = tuple[Fraction, Symbol, str, str, str]
"""Station, symbol, greatest and least value in printed digits, and their unit."""


@dataclass(frozen=True)
class Column:
    """The effects of one station under one another; ``x`` is the station's place on paper."""

    x: float
    texts: tuple[Text, ...]

    @property
    def width(self) -> float:
        return max(text.width for text in self.texts)

    @property
    def height(self) -> float:
        return sum(text.height + APART for text in self.texts)

    def labels(self, middle: float, top: float) -> Iterator[Label]:
        for text in self.texts:
            yield Label(text, (middle - text.width / 2, top))
            top += text.height + APART


@dataclass(frozen=True)
class Place:
    """Where a column stands in a row, or (None) a leader passes it on its way to a later row.

    ``start`` is where it comes from above, ``x`` its place in this row, both in mm of paper.
    """

    start: float
    x: float
    column: Column | None


Row = tuple[Place, ...]


def summary_figure(
    beam: Beam, entries: Sequence[Entry], units: str, width: float = WIDTH
) -> Drawing:
    """The beam to scale, and under each station the governing values of the effects there.

    Values that do not find room under their stations stand aside on leaders; where one row does
    not hold them all they take turns in up to four. Of still more the first that fit are kept, and
    a note says how many are not shown.

    Args:
        beam: drawn above.
        entries: effects, those that matter most first; values in digits as results.json has them,
            such as "1162.34" and "-710.33", which get their sign here.
        units: "US" or "SI": the unit of length.
        width: of the paper in mm; the height follows.
    """
    scale = beam_scale(beam, width)
    kept, rows = _fitting(entries, scale, width)
    on_beam = named_beam(beam, scale, width, needed=[station for station, *_ in kept])
    edge = extent(on_beam)[1] + CLEAR
    figure = (*on_beam, *_drops(beam, kept, scale, on_beam, edge), *_hung(rows, edge))
    left_out = len(entries) - len(kept)
    words = f"{left_out} of {len(entries)} effects find no room here: see the table"
    return drawn(
        (figure, note(words, 0.0, 1, width) if left_out else ()),
        width,
        "Governing values under their stations, the greatest over the least; the beam to scale.",
        _words(entries, SYSTEMS[units]["length"]),
    )


def _fitting(
    entries: Sequence[Entry], scale: Scale, width: float
) -> tuple[Sequence[Entry], Sequence[Row]]:
    """As many of the first entries as fit, in as few rows as hold them."""
    for count in range(len(entries), 0, -1):
        columns = _columns(entries[:count], scale)
        for row_count in range(1, MOST_ROWS + 1):
            rows = _rows(columns, row_count, width)
            if rows is not None and sum(_fan(row) + _height(row) for row in rows) <= TALLEST:
                return entries[:count], rows
    return (), ()


def _columns(entries: Sequence[Entry], scale: Scale) -> list[Column]:
    """One for each station, from left to right."""
    found: dict[Fraction, list[Text]] = {}
    for station, symbol, greatest, least, unit in entries:
        head = (*runs_of(symbol), Run(f" ({unit})")) if unit else runs_of(symbol)
        values = ((Run(signed(value)),) for value in (greatest, least))
        found.setdefault(station, []).append(Text((head, *values)))
    return [Column(scale(station), tuple(found[station])) for station in sorted(found)]


def _rows(columns: Sequence[Column], count: int, width: float) -> list[Row] | None:
    """The columns by turns in so many rows, each as near its station as can be; None: no room.

    The order of all leaders stays that of the stations in every row, so that none cross.
    """
    waiting = [(number % count, column.x, column) for number, column in enumerate(columns)]
    rows = []
    for here in range(count):
        widths = [column.width + GAP if turn == here else LANE for turn, _, column in waiting]
        wished = [column.x for _, _, column in waiting]
        centres = spread(wished, widths, -GAP / 2, width + GAP / 2)
        if centres is None:
            return None
        rows.append(
            tuple(
                Place(start, x, column if turn == here else None)
                for (turn, start, column), x in zip(waiting, centres, strict=True)
            )
        )
        waiting = [
            (turn, x, column)
            for (turn, _, column), x in zip(waiting, centres, strict=True)
            if turn > here
        ]
    return rows


def _fan(row: Row) -> float:
    """Height of the zone over a row in which leaders run, in mm; 0 where it needs none."""
    moved = any(place.column is None or abs(place.start - place.x) > NEAR for place in row)
    return FAN if moved else 0.0


def _height(row: Row) -> float:
    return max(place.column.height for place in row if place.column)


def _hung(rows: Sequence[Row], edge: float) -> Iterator[Item]:
    """The rows under one another below ``edge``."""
    top = edge
    for row in rows:
        fan, height = _fan(row), _height(row)
        for place in row:
            foot = (place.x, top + fan)
            if place.column is None:
                yield Line(((place.start, top), foot, (place.x, top + fan + height)), "hair")
                continue
            if fan:
                yield Line(((place.start, top), (place.x, foot[1] - TOUCH)), "hair")
            yield from place.column.labels(*foot)
        top += fan + height


def _drops(
    beam: Beam, kept: Sequence[Entry], scale: Scale, on_beam: Sequence[Item], edge: float
) -> Iterator[Line]:
    """Lines from the beam down to ``edge`` where no support stands and no name is in the way."""
    names = [item.box.grown(TOUCH) for item in on_beam if isinstance(item, Label)]
    for station in {station for station, *_ in kept}:
        ends = (scale(station), BELOW), (scale(station), edge - TOUCH)
        clear = not any(box.cut_by(*ends) for box in names)
        if clear and beam.station(station).support is None:
            yield Line(ends, "hair")


def _words(entries: Sequence[Entry], length: str) -> str:
    """The figure in words, for a reader who cannot see it."""
    places = digits([station for station, *_ in entries])
    parts = [
        f"{symbol} at {place} {length}: {signed(greatest)} to {signed(least)} {unit}".rstrip()
        for (_, symbol, greatest, least, unit), place in zip(entries, places, strict=True)
    ]
    return f"The beam with governing values, greatest to least: {'; '.join(parts) or 'none'}."
