"""What ``at`` may say where a single station is meant."""

from __future__ import annotations

from fractions import Fraction

from calcpack.exact.units import looks_like_quantity
from calcpack.intake.beam import Outline
from calcpack.intake.reading import Reading, nearest
from calcpack.intake.values import within


def read_place(reading: Reading, outline: Outline, path: str) -> Fraction | None:
    """The station of a name, a number or a length; None where it is refused or not known."""
    place, names = reading.value(path), outline.names
    if isinstance(place, str):
        if place in names:
            place = names[place]
        elif looks_like_quantity(place):
            place = reading.read_length(path)
        else:
            if outline.named:
                reading.refuse(path, f"is not a known name; {nearest(place, names, 3)}")
            return None
    station: Fraction | None = place
    length = outline.length
    if station is not None and length is not None and not 0 <= station <= length:
        reading.refuse(path, within(length, reading.units))
        return None
    return station
