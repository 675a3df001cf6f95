"""A calculation from the bytes of calc.toml."""

from __future__ import annotations

import hashlib
from pathlib import Path

from calcpack.errors import InputRefused, Problem
from calcpack.intake.beam import read_beam
from calcpack.intake.cover import read_assumptions, read_cover, read_package
from calcpack.intake.document import MOST_BYTES, parse
from calcpack.intake.echo import echo, inputs, plain
from calcpack.intake.effects import read_effects
from calcpack.intake.moving import check_compared, check_names, read_moving
from calcpack.intake.permanent import read_permanent
from calcpack.intake.reading import Reading
from calcpack.intake.redundants import read_redundants
from calcpack.intake.shown import shown
from calcpack.intake.stiffness import check_stiffness_stated
from calcpack.model.request import Calculation

FORMAT = 1


def read(data: bytes, source: str = "calc.toml", folder: Path | None = None) -> Calculation:
    """Read calc.toml and check all that can be checked without statics.

    Args:
        data: the bytes of the file.
        source: what messages call the file where no key is at fault.
        folder: that of the file, where its tables are; a file that names one is refused without.

    Returns:
        The calculation; lengths, forces and stations in the file's units, stations from the left
        end of the beam. Whether the beam is stable is not looked at, nor whether redundants suit.

    Raises:
        InputRefused: with every fault found, in the order of the file; those of a table come
            where it is named.

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
    outline = read_beam(reading, folder)
    redundants = read_redundants(reading, outline)
    effects, beam = read_effects(reading, outline)
    moving, numbers = read_moving(reading, outline, effects, folder)
    permanent = read_permanent(reading, outline)
    check_compared(reading, moving)
    check_names(reading)
    check_stiffness_stated(reading)
    reading.finish()
    stated = plain({key: value for key, value in document.items() if key != "cover"})
    if reading.tables:
        stated["tables"] = {
            name: hashlib.sha256(content).hexdigest() for name, content in reading.tables.items()
        }
    return Calculation(
        document["units"],
        cover,
        package,
        assumptions,
        beam,
        effects,
        moving,
        stated,
        {**inputs(reading), **numbers},
        echo(reading),
        data.decode("utf-8-sig").replace("\r\n", "\n"),
        redundants,
        permanent,
        tuple(reading.tables.items()),
    )


def read_file(path: Path) -> Calculation:
    """Read the calc.toml at a path, and its tables beside it; messages call it by its file name.

    Raises:
        InputRefused: the file cannot be read, or is refused as ``read`` says.
    """
    return read(file_bytes(path), path.name, path.parent)


def file_bytes(path: Path) -> bytes:
    """The bytes of a calc.toml, no more of them than ``read`` needs to refuse a file too large.

    Raises:
        InputRefused: the file cannot be read.
    """
    name = path.name or str(path)
    try:
        with path.open("rb") as file:
            return file.read(MOST_BYTES + 1)
    except (OSError, ValueError) as error:  # ValueError: a path that no file can have
        said = "not found" if isinstance(error, FileNotFoundError) else "cannot be read"
        if isinstance(error, IsADirectoryError):
            said = "a folder"
        raise InputRefused(
            [Problem(shown(name), said, "must be a file that can be read")]
        ) from error
