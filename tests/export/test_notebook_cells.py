"""What a notebook's cells are taken for, and what in them is refused."""

from __future__ import annotations

from pathlib import Path

import nbformat
import pytest
from nbformat import NotebookNode
from nbformat.v4 import new_code_cell, new_markdown_cell, new_notebook, new_raw_cell
from notebook_samples import CALC, OWN, issued_text, make_folder, sheet_cell, sheet_output

from calcpack import read, results, solve
from calcpack.errors import InputRefused
from calcpack.export.notebook import OwnCell, Part, SheetCall, parts_of
from calcpack.export.templates import template_folder
from calcpack.render.markdown import stamp
from calcpack.sheets.pages import SHEET_NAMES

DIGEST = results(solve(read(CALC.encode())))["digest"]


def parts(*cells: NotebookNode) -> list[Part]:
    found, problems = parts_of(new_notebook(cells=list(cells)))
    assert not problems
    return found


def refused(*cells: NotebookNode) -> list[str]:
    _, problems = parts_of(new_notebook(cells=list(cells)))
    return [str(problem) for problem in problems]


def test_sheets_come_in_the_notebooks_order_and_none_is_left_out() -> None:
    found = parts(new_code_cell("import calcpack"), sheet_cell("lines"), sheet_cell("cover"))
    assert found[:2] == [SheetCall("lines", 1), SheetCall("cover", 2)]
    rest = [name for name in SHEET_NAMES if name not in ("lines", "cover")]
    assert found[2:] == [SheetCall(name, None) for name in rest]


def test_the_template_shows_every_sheet_in_the_usual_order() -> None:
    template = nbformat.read(template_folder() / "calculation.ipynb", as_version=4)
    due = [SheetCall(name, index) for index, name in enumerate(SHEET_NAMES, start=1)]
    assert parts(*template.cells) == due


def test_what_else_stands_in_a_notebook_is_the_engineers_own() -> None:
    found = parts(
        new_markdown_cell("words"),
        new_code_cell("x = 1"),
        new_code_cell("%matplotlib inline"),
        new_code_cell("# only a remark"),
        new_code_cell("import calcpack\nimport math"),
        new_raw_cell("raw"),
    )
    codes = [False, True, True, True, True, False]
    assert found[:6] == [OwnCell(index, code) for index, code in enumerate(codes)]


@pytest.mark.parametrize("source", ["", " \n", "import calcpack", "import calcpack  # the program"])
def test_a_cell_without_content_is_no_part(source: str) -> None:
    assert parts(new_code_cell(source), new_markdown_cell(" ")) == parts()


@pytest.mark.parametrize(
    "source",
    [
        "x = 1\ncalcpack.sheet('cover')",
        "calcpack.sheet('cover')\ncalcpack.sheet('data')",
        "shown = calcpack.sheet('cover')",
        "show = calcpack.sheet",
        "print(calcpack.sheet('cover'))",
        "if True:\n    calcpack.sheet('cover')",
        "calcpack.sheet('cov' + 'er')",
        "calcpack.sheet(name='cover')",
        "calcpack.sheet('cover')('cover')",
        "calcpack.sheet()",
    ],
)
def test_a_sheets_call_stands_alone(source: str) -> None:
    (problem,) = refused(new_code_cell(source))
    assert problem.startswith("calculation.ipynb: cells[0]: ")
    assert problem.endswith("a sheet's call stands alone in its cell")


def test_unknown_and_doubled_sheets_are_refused_together() -> None:
    first, second = refused(sheet_cell("lnes"), sheet_cell("cover"), sheet_cell("cover"))
    assert first.startswith("calculation.ipynb: cells[0]: sheet 'lnes', must be one of cover, ")
    assert second == "calculation.ipynb: cells[2]: sheet 'cover', must stand only once"


@pytest.mark.parametrize(
    ("source", "said", "code"),
    [
        ("a \u4e2d b", "a \u4e2d b", "4E2D"),
        ("&#x4e2d;", "&#x4e2d;", "4E2D"),
        ("pay 100\u202e 001", "pay 100\\u202e 001", "202E"),
        ("&#8203;", "&#8203;", "200B"),
        ("bell\x07", "bell\\x07", "0007"),
    ],
)
def test_a_character_that_cannot_be_printed_is_refused(source: str, said: str, code: str) -> None:
    assert refused(new_markdown_cell(source)) == [
        f"calculation.ipynb: cells[0]: {said}, must do without U+{code}, which cannot be printed"
    ]


def test_the_notebooks_problems_come_with_those_of_calc_toml(tmp_path: Path) -> None:
    calc = CALC.replace("length = 9.0", "length = -9.0").replace(", on = 2026-03-02", "")
    notebook = make_folder(tmp_path, sheet_cell("lnes"), calc=calc)
    with pytest.raises(InputRefused) as caught:
        issued_text(notebook, tmp_path)
    paths = [problem.path for problem in caught.value.problems]
    assert paths[0] == "beam.length"
    assert paths[-1] == "calculation.ipynb: cells[0]"


@pytest.mark.parametrize("data", [stamp("cover", DIGEST), stamp("cover", None)])
def test_a_sheets_own_output_is_accepted(data: object, tmp_path: Path) -> None:
    notebook = make_folder(tmp_path, sheet_cell("cover", sheet_output(data)))
    assert "shown" not in issued_text(notebook, tmp_path)


@pytest.mark.parametrize(
    "data",
    [
        stamp("cover", "0" * 64),
        stamp("data", DIGEST),
        {"sheet": "cover", "digest": DIGEST},
        {**stamp("cover", DIGEST), "format": 2},
        "cover",
        [],
        None,
    ],
)
def test_a_foreign_output_is_refused(data: object, tmp_path: Path) -> None:
    notebook = make_folder(
        tmp_path, new_markdown_cell("words"), sheet_cell("cover", sheet_output(data))
    )
    with pytest.raises(InputRefused) as caught:
        issued_text(notebook, tmp_path)
    (problem,) = caught.value.problems
    assert problem.path == "calculation.ipynb: cells[1].outputs[0]"
    needs = f"must be of 'cover' with digest {DIGEST[:12]}: run the cell again"
    assert problem.needs == needs


@pytest.mark.parametrize("source", ["1 + 1", "import calcpack", ""])
def test_a_sheets_output_on_any_other_cell_is_refused(source: str, tmp_path: Path) -> None:
    forged = new_code_cell(source, outputs=[sheet_output(stamp("cover", DIGEST))])
    notebook = make_folder(tmp_path, forged)
    with pytest.raises(InputRefused) as caught:
        issued_text(notebook, tmp_path)
    (problem,) = caught.value.problems
    assert problem.path == "calculation.ipynb: cells[0].outputs[0]"
    assert problem.said == "a sheet's output"


def test_words_stand_where_they_are_and_once(tmp_path: Path) -> None:
    notebook = make_folder(
        tmp_path,
        new_markdown_cell("WORDS-ONE"),
        sheet_cell("methods"),
        new_markdown_cell("# WORDS-TWO"),
        sheet_cell("data"),
        new_raw_cell("WORDS-THREE"),
    )
    text = issued_text(notebook, tmp_path)
    order = [
        "WORDS-ONE",
        "other methods, in the same program",
        "WORDS-TWO",
        "beam.supports[0].kind",
        "WORDS-THREE",
        "Governing values",
    ]
    assert [text.count(words) for words in order] == [1] * 6
    assert sorted(order, key=text.index) == order
    assert text.count(OWN) == 3
