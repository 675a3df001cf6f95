"""Loads that act always: for now, supports that settle."""

from __future__ import annotations

from fractions import Fraction

from calcpack.intake.beam import Outline
from calcpack.intake.places import read_place
from calcpack.intake.reading import Reading
from calcpack.model.fields import KEYS
from calcpack.model.loads import Permanent, Settlement

_HELD = {"down": "vertically", "turn": "rotation"}
_LATER = [key for key, field in KEYS["permanent[]"].items() if not field.computed]


def read_permanent(reading: Reading, outline: Outline) -> tuple[Permanent, ...]:
    """Every permanent load case, each with at least one settlement."""
    cases = []
    for path in reading.items("permanent"):
        listed = f"{path}.settlements"
        paths = reading.items(listed)
        stated = paths or any(reading.given(f"{path}.{key}") for key in _LATER)
        if not stated and not reading.refused(path) and not reading.refused(listed):
            reading.refuse(path, "must have a settlement", "no load")
        taken: dict[tuple[str, str], str] = {}
        found = [_settlement(reading, outline, one, taken) for one in paths]
        settlements = tuple(one for one in found if one is not None)
        cases.append(Permanent(reading.value(f"{path}.name"), settlements, path))
    return tuple(cases)


def _settlement(
    reading: Reading, outline: Outline, path: str, taken: dict[tuple[str, str], str]
) -> Settlement | None:
    """One settlement; ``taken`` holds those before by support and key."""
    stated = [key for key in _HELD if reading.given(f"{path}.{key}")]
    if len(stated) > 1:
        reading.refuse(f"{path}.turn", "must be left out beside down")
    elif not stated and reading.lacks(f"{path}.down"):
        reading.refuse(f"{path}.down", "must be given, or turn")
    for key in stated:
        if reading.value(f"{path}.{key}") == 0:
            reading.refuse(f"{path}.{key}", "must not be 0")
    at = read_place(reading, outline, f"{path}.at")
    if at is None:
        return None
    support = next((one for one in outline.beam.supports if one.at == at), None)
    for key in stated:
        holds = support and (support.holds_vertical if key == "down" else support.holds_rotation)
        if not holds and (support or outline.whole):
            needs = f"must be a support that holds {_HELD[key]}, for {key}"
            reading.refuse(f"{path}.at", needs)
        elif support and taken.setdefault((support.name, key), path) != path:
            needs = f"must not settle again, after {taken[support.name, key]}"
            reading.refuse(f"{path}.at", needs)
    if support is None:
        return None
    down, turn = (reading.value(f"{path}.{key}") or Fraction(0) for key in ("down", "turn"))
    return Settlement(support.name, at, down, turn, path)
