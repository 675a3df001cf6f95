"""A calculation from the bytes of calc.toml."""

from __future__ import annotations

from pathlib import Path

from calcpack.errors import InputRefused, Problem
from calcpack.intake.beam import read_beam
from calcpack.intake.cover import read_assumptions, read_cover, read_package
from calcpack.intake.document import MOST_BYTES, parse
from calcpack.intake.echo import echo, inputs, plain
from calcpack.intake.effects import read_effects
from calcpack.intake.moving import read_moving
from calcpack.intake.reading import Reading
from calcpack.intake.shown import shown
from calcpack.model.request import Calculation

FORMAT = 1


def read(data: bytes, source: str = "calc.toml") -> Calculation:
    """Read calc.toml and check all that can be checked without statics.

    Args:
        data: the bytes of the file.
        source: what messages call the file where no key is at fault.

    Returns:
        The calculation; lengths, forces and stations in the file's units, stations from the left
        end of the beam. Whether the beam is stable is not looked at.

    Raises:
        InputRefused: with every fault found, in the order of the file.

    >>> read(b"format = 2")
    Traceback (most recent call last):
        ...
    calcpack.errors.InputRefused: format: 2, is newer than this release reads
    """
    document = parse(data, source)
    stated = document.get("format")
    if type(stated) is int and stated > FORMAT:
        raise InputRefused([Problem("format", shown(stated), "is newer than this release reads")])
    reading = Reading(document)
    cover, package = read_cover(reading), read_package(reading)
    assumptions = read_assumptions(reading)
    effects, beam = read_effects(reading, read_beam(reading))
    moving = read_moving(reading)
    reading.finish()
    return Calculation(
        document["units"],
        cover,
        package,
        assumptions,
        beam,
        effects,
        moving,
        plain({key: value for key, value in document.items() if key != "cover"}),
        inputs(reading),
        echo(reading),
        data.decode("utf-8-sig").replace("\r\n", "\n"),
    )


def read_file(path: Path) -> Calculation:
    """Read the calc.toml at a path; messages call it by its file name.

    Raises:
        InputRefused: the file cannot be read, or is refused as ``read`` says.
    """
    name = path.name or str(path)
    try:
        with path.open("rb") as file:
            data = file.read(MOST_BYTES + 1)
    except (OSError, ValueError) as error:  # ValueError: a path that no file can have
        said = "not found" if isinstance(error, FileNotFoundError) else "cannot be read"
        if isinstance(error, IsADirectoryError):
            said = "a folder"
        raise InputRefused(
            [Problem(shown(name), said, "must be a file that can be read")]
        ) from error
    return read(data, name)
