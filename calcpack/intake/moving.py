"""Loads that travel."""

from __future__ import annotations

from fractions import Fraction

from calcpack.intake.reading import Reading
from calcpack.intake.values import unit_of
from calcpack.model.loads import Axle, Heading, MovingLoad

MOST_AXLES = 1000

_HEADINGS: dict[str, tuple[Heading, ...]] = {
    "right": ("right",),
    "left": ("left",),
    "both": ("right", "left"),
}


def read_moving(reading: Reading) -> tuple[MovingLoad, ...]:
    """Every moving load; 1,000 axles are the most in all."""
    axles_before = 0
    loads = []
    for path in reading.items("moving"):
        name = reading.value(f"{path}.name")
        count = len(reading.items(f"{path}.axles"))
        if max(axles_before, count) <= MOST_AXLES < axles_before + count:
            needs = f"must leave at most {MOST_AXLES:,} axles in all"
            reading.refuse(f"{path}.axles", needs, f"{axles_before + count:,} axles up to here")
        axles_before += count
        loads.append(_load(reading, path, name))
    return tuple(loads)


def check_names(reading: Reading) -> None:
    """Names are unique among moving and permanent loads together."""
    taken: dict[str, str] = {}
    for path in (*reading.items("moving"), *reading.items("permanent")):
        name = reading.value(f"{path}.name")
        if name is not None and taken.setdefault(name, path) != path:
            reading.refuse(f"{path}.name", f"must differ from the name at {taken[name]}.name")


def _load(reading: Reading, path: str, name: str) -> MovingLoad:
    uniform = reading.value(f"{path}.uniform")
    if not reading.items(f"{path}.axles") and uniform == 0:
        reading.refuse(path, "must have axles or a uniform load above 0", "no load")
    axles = tuple(
        Axle(reading.value(f"{axle}.weight"), _spacing(reading, axle))
        for axle in reading.items(f"{path}.axles")
    )
    return MovingLoad(
        name,
        axles,
        uniform,
        _HEADINGS.get(reading.value(f"{path}.heading"), ()),
        reading.value(f"{path}.relieving"),
        reading.value(f"{path}.allowance"),
        reading.value(f"{path}.distribution"),
        path,
    )


def _spacing(reading: Reading, axle: str) -> Fraction:
    path, leads = f"{axle}.spacing", axle.endswith("[0]")
    spacing: Fraction | None = reading.value(path)
    if leads and spacing:
        reading.refuse(path, "must be left out: no axle is ahead of the lead axle")
    elif not leads and reading.lacks(path):
        reading.refuse(path, "must be given")
    elif not leads and spacing == 0:
        reading.refuse(path, f"must be above 0 {unit_of('length', reading.units)}".rstrip())
    return spacing or Fraction(0)
