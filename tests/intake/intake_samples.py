"""Files that the tests of the intake read, and a short way to their faults."""

from __future__ import annotations

import dataclasses
import re
from collections.abc import Iterator
from typing import Any

from calcpack.errors import InputRefused, Problem
from calcpack.intake import read
from calcpack.intake.shown import unprintable
from calcpack.model.loads import Given

US = """\
format = 1
units = "US"

[cover]
title = "Girder G7 under a haul truck"
number = "QP-S-021"
project = "Quarry Lane crossing"
client = "Borough of Ashby"
prepared = { by = "P. Linden", on = 2026-04-07 }
checked = { by = "" }
approved = { by = "R. Aspen", on = 2026-04-09 }
revisions = [ { mark = "A", on = 2026-04-07, text = "First issue" } ]

[package]
status = "For review"
paper = "letter"
detail = "every equation"

[[assumptions]]
text = "Bearings are taken as level."
basis = "Drawing Q-3"
open = false

[beam]
length = 100.0
supports = [
  { name = "A", at = 0.0, kind = "pin" },
  { name = "B", at = "30 ft", kind = "roller" },
  { name = "C", at = 72, kind = "roller" },
  { name = "D", at = 100.0, kind = "roller" },
]
releases = [
  { name = "h1", at = 42.5, kind = "hinge" },
  { name = "h2", at = 6_2.0, kind = "hinge" },
]
sections = [ { name = "mid", at = "12 ft 6 in" } ]

[[effects]]
kind = ["moment", "shear"]
at = ["mid", "B", 20, "10 m"]
show = "every equation"

[[effects]]
kind = "reaction"
at = "supports"

[[moving]]
name = "Haul truck"
axles = [
  { weight = 17.0 },
  { weight = "38 kip", spacing = 13.25 },
  { weight = 38, spacing = "4 ft 9 in" },
]
uniform = "0.05 kip/ft"
trailing = []
heading = "right"
relieving = "neglect"
allowance = 0.3
distribution = 0.65
"""

SI = """\
format = 1
units = "SI"
cover.title = "Kranbahn Öst · Träger 4"
package.paper = "A4"

[beam]
spans = [6.0, "7.5 m", 6]
overhang_left = 1.25
supports = [
  { name = "L", kind = "roller" },
  { name = "M", kind = "pin" },
  { name = "N", kind = "roller" },
  { name = "R", kind = "roller" },
]
sections = ["tenths", { name = "tip", at = "500 mm" }]

[[moving]]
name = "Uniform"
uniform = 4.5

[[moving]]
name = "Crane"
axles = [ { weight = 180.0, spacing = 0 }, { weight = 180.0, spacing = 1.2 } ]
"""

SPRUNG = """\
format = 1
units = "US"
cover.title = "Approach girder on a flexible pier"

[beam]
length = 120
supports = [
  { name = "A", at = 0, kind = "fixed" },
  { name = "B", at = 40, kind = "spring", vertical = 900.5 },
  { name = "C", at = 80, kind = "spring", vertical = "50 kip/in", rotational = "2e4 kip·ft/rad" },
  { name = "D", at = 120, kind = "roller" },
]
releases = [ { name = "h", at = 60, kind = "hinge" }, { name = "g", at = 100, kind = "slide" } ]
stiffness = [
  { from = 0, to = 50, EI = 2.5e6 },
  { from = 50, to = "70 ft", E = 29000, I = "13500 in4" },
  { from = 70.0, to = 120, E = "200 GPa", I = 14000.5 },
]
redundants = ["moment B", "moment C left", "moment reaction A"]

[[effects]]
kind = ["moment", "deflection", "rotation"]
at = ["h", "g", 30]

[[permanent]]
name = "Scour at B"
settlements = [ { at = "B", down = 0.5 }, { at = "A", turn = "-2 mrad" } ]

[[permanent]]
name = "Jacking"
settlements = [ { at = 80, down = "-12 mm" } ]
"""

LOADS = """\
format = 1
units = "US"
cover.title = "Approach spans under loads of every form"

[beam]
length = 140
supports = [
  { name = "A", at = 0, kind = "pin" },
  { name = "B", at = 50, kind = "roller" },
  { name = "C", at = 90, kind = "roller" },
  { name = "D", at = 140, kind = "roller" },
]
sections = [ { name = "mid", at = 20 } ]

[[trains]]
name = "Tug"
axles = [ { weight = 30 }, { weight = "40 kip", spacing = [12.5, "20 ft"] } ]

[[trains]]
name = "Trailer"
axles = [ { weight = 22.5 }, { weight = 22.5, spacing = 4 } ]

[[moving]]
name = "Hauler"
axles = [
  { weight = 8 },
  { weight = 32, spacing = { list = [6, 11.0, "16 ft"] } },
  { weight = 33, spacing = { least = 15 } },
]
uniform = 0.2
heading = "left"
relieving = "whole train"
allowance = [
  { of = "axles", value = 0.33, source = "Permit policy, 4.2" },
  { of = "uniform", value = 0.1 },
]
distribution = [
  { kind = ["moment", "shear"], from = "A", to = 70, value = 0.7, source = "sheet D-2" },
  { kind = "moment", value = 0.65 },
  { value = 0.8 },
]

[[moving]]
name = "Convoy"
trains = ["Tug", "Trailer"]
order = "any"
spacing = { list = [30, "40 ft"] }
absent = "none"
trailing = [
  { behind = 10, load = 0.64 },
  { ahead = "5 ft", weight = 20, length = 8, extent = "in parts" },
]

[[moving]]
name = "Highway"
standard = "HL-93"
variant = "design"
scale = 1.1
hogging = [ { from = 35, to = "C", source = "sheet D-5" } ]
compared = "P. Linden, 2026-04-02, with the 9th edition"

[[moving]]
name = "Rail"
standard = "Cooper E80"
variant = "rail"
length = "50 ft"
heading = "right"

[[moving]]
name = "Metric rail"
standard = "LM71"
allowance = [ { of = "axles", value = 0.2 }, { of = "trailing", value = 0.2 } ]
"""

SHORT = """\
format = 1
units = "SI"
cover.title = "Beam"
[beam]
length = 12.0
supports = [ { name = "A", at = 0.0, kind = "pin" }, { name = "B", at = 12.0, kind = "roller" } ]
"""


def changed(text: str, *pairs: tuple[str, str]) -> str:
    """The text with each first piece put in place of the second; each must occur in it."""
    for old, new in pairs:
        assert old in text, old
        text = text.replace(old, new, 1)
    return text


def faults(text: str | bytes, source: str = "calc.toml") -> list[str]:
    """What is said of a file, a line for each fault; [] where it is accepted."""
    try:
        read(text.encode() if isinstance(text, str) else text, source)
    except InputRefused as refused:
        return str(refused).split("\n")
    return []


def givens(value: Any) -> Iterator[Given]:
    """Every number of a value, those of its rules too."""
    if isinstance(value, Given):
        yield value
    if isinstance(value, tuple):
        for item in value:
            yield from givens(item)
    elif dataclasses.is_dataclass(value):
        for field in dataclasses.fields(value):
            yield from givens(getattr(value, field.name))


def check_lines(lines: list[str], problems: tuple[Problem, ...]) -> None:
    """Each problem is one line of plain characters: path, what was said, what is needed."""
    assert len(lines) == len(problems) > 0
    for line in lines:
        assert re.match(r"\S.*: .*, \S", line), line
        assert not any(map(unprintable, line))
        assert len(line) < 1000
