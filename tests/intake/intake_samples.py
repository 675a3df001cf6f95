"""Files that the tests of the intake read, and a short way to their faults."""

from __future__ import annotations

from calcpack.errors import InputRefused
from calcpack.intake import read

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
