"""Input as large, as long and as hostile as calc.toml may be: shown as typed, nothing overrun."""

from __future__ import annotations

import json
from pathlib import Path

import pytest
from pages import Package, faults, incomplete, read_back

from calcpack.cli import main

HOSTILE = (
    '#read("/etc/passwd")',
    "$x$",
    "<script>alert(1)</script>",
    "C:\\new\\table \\u{61} \\",
    "\"double\" 'single' `raw`",
    "*a* _b_ **c** __d__",
    "[#lorem(9)]",
    "@ref <label> #x;",
    "// not a comment",
    "/* nor this",
    "= Heading - item + 1. /term: a",
    "~ -- --- ... &amp; %41 {} }",
    "$$\\frac{a}{b}$$ \\(c\\)",
    "ΑΒΓ αβγ Ωμ ç é ñ ő ß Æ ø Ł ž Жук",
)
SPACED = "Westernmost bearing on the old quay wall behind the fourth"
UNBROKEN = "Westernmostbearingontheoldquaywallbehindthefourthshedofall"
WIDE = "W" * 58
LONGEST = 200
"""The most characters of a text on the cover."""

CALCULATION = """\
format = 1
units = "US"

[beam]
length = 30.0
supports = [
  { name = "NAME s", at = 0.0, kind = "fixed" },
  { name = "NAME e", at = 30.0, kind = "roller" },
]
releases = [ { name = "NAME h", at = 12.0, kind = "hinge" } ]
sections = [ { name = "NAME", at = 20.0 } ]

[[effects]]
kind = "moment"
at = "NAME"

[[moving]]
name = "NAME"
axles = [ { weight = 8.0 }, { weight = 24.0, spacing = 14.0 } ]
uniform = 0.64

[[assumptions]]
text = "NAME"
basis = "NAME"

[cover]
title = "NAME"
number = "NAME"
project = "NAME"
client = "NAME"
prepared = { by = "NAME p", on = 2026-03-02 }
checked = { by = "NAME c", on = 2026-03-02 }
approved = { by = "NAME" }
revisions = [ { mark = "NAME", on = 2026-03-01, text = "NAME" } ]
"""


def issued(folder: Path, text: str) -> Package:
    (folder / "calc.toml").write_text(text, "utf-8")
    assert main(["issue", str(folder)]) == 0
    return read_back((folder / "package.pdf").read_bytes())


def escaped(text: str) -> str:
    """What stands for a text between the quotes of a TOML string."""
    return json.dumps(text, ensure_ascii=False)[1:-1]


@pytest.mark.parametrize("name", [*HOSTILE, SPACED, UNBROKEN, WIDE])
def test_any_text_is_shown_as_typed(name: str, tmp_path: Path) -> None:
    package = issued(tmp_path, CALCULATION.replace("NAME", escaped(name)))
    assert faults(package) == []
    initials = [f"Prepared {name} p 2026-03-02", f"Checked {name} c 2026-03-02"]
    head = [name, f"Calculation {name}", f"Revision {name}", *initials]
    assert incomplete(package, head, ["calcpack"]) == []
    assert package.title == name
    assert package.bookmarks[0] == name
    for text in (name, f"{name} s", f"{name} e", f"{name} h"):
        assert package.shows(text)


@pytest.mark.parametrize("word", ["W" * LONGEST, "Wide " * (LONGEST // 5)])
def test_the_longest_texts_of_the_cover_fit(word: str, tmp_path: Path) -> None:
    text = CALCULATION.replace("NAME", "N")
    for key in ("title", "number", "project", "client"):
        text = text.replace(f'{key} = "N"', f'{key} = "{word}"')
    text = text.replace('by = "N', f'by = "{word[:-3]}')
    package = issued(tmp_path, text)
    assert faults(package) == []
    assert incomplete(package, [word], []) == []


def viaduct() -> str:
    """15 anchor spans with cantilever arms, and a drop-in span between each two: 30 supports,
    28 hinges, 20 effects, 12 revisions; names of supports have 60 characters."""
    long = "of the long viaduct over the marshes between Ell and Orde"
    supports = [
        f"{{ name = '{f'Pier {n:02} {long}'[:60]}', at = {40 * n}, kind = 'roller' }}"
        for n in range(30)
    ]
    hinges = [
        f"{{ name = 'h{n}', at = {40 * n + (10 if n % 2 else -10)}, kind = 'hinge' }}"
        for n in range(1, 29)
    ]
    sections = [f"{{ name = '{n}', at = {116 * n + 45} }}" for n in range(10)]
    revisions = [
        f"{{ mark = '{n}', on = 2026-02-{n:02}, text = 'Remark {n} of the checker is met' }}"
        for n in range(1, 13)
    ]
    return f"""\
format = 1
units = "SI"
cover.title = "Viaduct over the marshes"
cover.revisions = [{", ".join(revisions)}]
package.detail = "plan"
beam.length = 1160
beam.supports = [{", ".join(supports)}]
beam.releases = [{", ".join(hinges)}]
beam.sections = [{", ".join(sections)}]
effects = [{{ kind = ["moment", "shear"], at = "sections" }}]
moving = [{{ name = "Tractor", axles = [{{ weight = 60 }}], uniform = 4.5 }}]
"""


def test_a_package_of_hundreds_of_sheets_is_sound(tmp_path: Path) -> None:
    package = issued(tmp_path, viaduct())
    assert len(package.pages) > 200
    assert faults(package) == []
    assert incomplete(package, ["Viaduct over the marshes", "Revision 12"], ["calcpack"]) == []
    assert all(package.shows(f"Remark {number} of the checker is met") for number in range(1, 13))
