"""Every example's package read back from its PDF; and that the reading finds what is wrong."""

from __future__ import annotations

import html
import re
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import pytest
from pages import Package, faults, incomplete, read_back, unprinted

import calcpack.export.compile
from calcpack import read_file, results, solve
from calcpack.cli import main
from calcpack.export.templates import template_folder

EXAMPLES = Path(__file__).parent.parent.parent / "example_projects"
SMALL = """\
format = 1
units = "SI"
cover.title = "Landing stage beam"
cover.number = "LS-3"
cover.project = "PROJECT"
cover.prepared = { by = "O. Farrow", on = 2026-07-01 }
cover.revisions = [ { mark = "C", text = "Longer" } ]

[beam]
length = 9.0
supports = [ { name = "A", at = 0.0, kind = "pin" }, { name = "B", at = 7.0, kind = "roller" } ]
sections = [ { name = "1", at = 3.0 } ]

[[moving]]
name = "Cart"
axles = [ { weight = 5.0 } ]
"""


@dataclass(frozen=True)
class Example:
    package: Package
    results: dict[str, Any]
    title: str
    number: str
    revision: str


def issued(folder: Path, out: Path) -> Package:
    assert main(["issue", str(folder), "--out", str(out)]) == 0
    return read_back(out.read_bytes())


@pytest.fixture(
    scope="session", params=sorted(path.parent.name for path in EXAMPLES.glob("*/calc.toml"))
)
def example(request: pytest.FixtureRequest, tmp_path_factory: pytest.TempPathFactory) -> Example:
    """An example issued once, read back, beside what was found for it."""
    folder = EXAMPLES / request.param
    calculation = read_file(folder / "calc.toml")
    return Example(
        issued(folder, tmp_path_factory.mktemp(request.param) / "package.pdf"),
        results(solve(calculation)),
        calculation.cover.title,
        calculation.cover.number,
        calculation.cover.revision,
    )


def test_no_text_leaves_its_page_or_lies_over_another(example: Example) -> None:
    assert len(example.package.pages) > 15
    assert faults(example.package) == []


def test_every_sheet_has_head_foot_and_its_number(example: Example) -> None:
    head = [example.title, f"Calculation {example.number}", f"Revision {example.revision}"]
    foot = [f"calcpack {example.results['program']}", example.results["digest"][:12]]
    assert incomplete(example.package, head, foot) == []


def test_every_step_is_printed_digit_by_digit(example: Example) -> None:
    assert sum("numbers" in step for step in example.results["steps"]) > 100
    assert unprinted(example.package, example.results["steps"]) == []


def test_the_file_says_what_it_is(example: Example) -> None:
    package, metadata = example.package, example.package.metadata
    assert package.title == example.title
    assert package.language == "en"
    assert re.findall(r'pdfaid:(part|conformance)(?:>|=")(\w+)', metadata) == [
        ("part", "3"),
        ("conformance", "A"),
    ]
    assert re.findall(r'pdfuaid:part(?:>|=")(\w+)', metadata) == ["1"]
    title = re.search("<dc:title>.*?<rdf:li[^>]*>(.*?)</rdf:li>", metadata)
    assert title is not None
    assert html.unescape(title[1]) == example.title


def test_it_can_be_heard_and_leafed_through(example: Example) -> None:
    package = example.package
    assert package.tagged
    figures = [words for kind, words in package.tags if kind == "Figure"]
    formulas = [words for kind, words in package.tags if kind == "Formula"]
    assert len(figures) > 10
    assert min(map(len, figures)) > 30
    assert len(formulas) > 100
    assert all(formulas)
    assert package.bookmarks[0] == example.title
    assert {"Summary of results", "Basis", "Data", "Placements"} <= set(package.bookmarks)


Sabotage = Callable[[str], str]


def swap(pattern: str, new: str) -> Sabotage:
    def spoil(template: str) -> str:
        spoiled, count = re.subn(pattern, new, template)
        assert count == 1
        return spoiled

    return spoil


def issued_small(
    folder: Path,
    monkeypatch: pytest.MonkeyPatch,
    sabotage: Sabotage = str,
    project: str = "Sluice landing",
) -> Package:
    """The small calculation under a spoiled copy of the layout."""
    layout = (template_folder() / "package.typ").read_text("utf-8")
    (folder / "package.typ").write_text(sabotage(layout), "utf-8")
    (folder / "calc.toml").write_text(SMALL.replace("PROJECT", project), "utf-8")
    monkeypatch.setattr(calcpack.export.compile, "template_folder", lambda: folder)
    return issued(folder, folder / "package.pdf")


HEAD = ["Landing stage beam", "Calculation LS-3", "Revision C"]
LONG = "Unter" + "wasser" * 30


def test_the_small_package_is_sound(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    package = issued_small(tmp_path, monkeypatch, project=LONG)
    assert faults(package) == []
    assert incomplete(package, HEAD, ["calcpack"]) == []
    assert package.shows(LONG)


@pytest.mark.parametrize(
    ("sabotage", "fault"),
    [
        (
            swap(r"margin: \(.*?\)", "margin: (x: 6mm, top: 33mm, bottom: 23mm)"),
            "margin too narrow",
        ),
        (swap("header-ascent: [^,]*", "header-ascent: -9mm"), " over "),
        (swap("header-ascent: [^,]*", "header-ascent: 20mm"), "beyond the margin"),
        (swap(r"set par\(leading: 0.6em", "set par(leading: -0.4em"), " over "),
    ],
    ids=["narrow margin", "head over body", "head off the paper", "lines over lines"],
)
def test_a_spoiled_layout_is_found(
    sabotage: Sabotage, fault: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    found = faults(issued_small(tmp_path, monkeypatch, sabotage))
    assert any(fault in one for one in found)


def test_a_long_word_that_cannot_be_broken_is_found(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    whole = swap("show regex.*: broken", "")
    found = faults(issued_small(tmp_path, monkeypatch, whole, project=LONG))
    assert any("beyond the margin" in one for one in found)


@pytest.mark.parametrize(
    ("sabotage", "lacking"),
    [
        (swap("#digest", ""), "sheet 2: no '0123'"),
        (swap(r"counter\(page\).final\(\).first\(\)\)\)\]", "7))]"), "sheet 2: no 'Sheet 2 of"),
        (swap(r'said\("Revision", revision\)', "[]"), "sheet 2: no 'Revision C'"),
    ],
)
def test_a_head_or_foot_that_lacks_something_is_found(
    sabotage: Sabotage, lacking: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    package = issued_small(tmp_path, monkeypatch, sabotage)
    digest = results(solve(read_file(tmp_path / "calc.toml")))["digest"][:12]
    found = incomplete(package, HEAD, [digest])
    assert any(one.startswith(lacking.replace("0123", digest)) for one in found)


def test_a_digit_that_is_not_printed_is_found(example: Example) -> None:
    step = next(step for step in example.results["steps"] if len(step.get("numbers", "")) > 12)
    last = step["result"][-1]
    changed = {**step, "result": step["result"][:-1] + ("1" if last != "1" else "2")}
    assert unprinted(example.package, [step]) == []
    assert len(unprinted(example.package, [changed])) == 1
