"""The sheets as blocks: what must stand on them, for the examples."""

from __future__ import annotations

from functools import cache
from pathlib import Path

import pytest

from calcpack import Solution, read_file, solve
from calcpack.sheets.blocks import Beside, Block, Equation, Figure, Heading, Paragraph, Table
from calcpack.sheets.labels import overlaps
from calcpack.sheets.pages import SHEET_NAMES, make_sheet

EXAMPLES = Path(__file__).parent.parent.parent / "example_projects"
NAMES = sorted(path.parent.name for path in EXAMPLES.glob("*/calc.toml"))


@cache
def solution(name: str) -> Solution:
    return solve(read_file(EXAMPLES / name / "calc.toml"))


def blocks_of(name: str, sheet: str) -> tuple[Block, ...]:
    return make_sheet(sheet, solution(name)).blocks


@pytest.mark.parametrize("name", NAMES)
def test_a_free_body_for_each_equation_of_the_plan(name: str) -> None:
    found = [block for block in blocks_of(name, "unknowns") if isinstance(block, Beside)]
    assert len(found) == len(solution(name).plan)
    for beside, step in zip(found, solution(name).plan, strict=True):
        drawing = beside.figure.drawing
        assert overlaps(drawing) == []
        assert len(drawing.items) > len(step.equation.actions)
        assert all(isinstance(block, Equation) for block in beside.blocks)


@pytest.mark.parametrize("name", NAMES)
@pytest.mark.parametrize("sheet", SHEET_NAMES)
def test_figures_are_clear_and_described(name: str, sheet: str) -> None:
    for block in blocks_of(name, sheet):
        if isinstance(block, Figure):
            assert overlaps(block.drawing) == []
            assert block.drawing.caption
            assert block.drawing.alt


@pytest.mark.parametrize("name", NAMES)
def test_a_sheet_opens_with_its_one_heading_of_the_first_level(name: str) -> None:
    for sheet in SHEET_NAMES:
        blocks = blocks_of(name, sheet)
        tops = [b for b in blocks if isinstance(b, Heading) and b.level == 1]
        assert len(tops) == (1 if blocks else 0)
        assert not blocks or blocks[0] == tops[0]


@pytest.mark.parametrize("name", NAMES)
def test_every_group_of_steps_stands_on_a_sheet(name: str) -> None:
    headed = {
        block.group
        for sheet in SHEET_NAMES
        for block in blocks_of(name, sheet)
        if isinstance(block, Heading) and block.group is not None
    }
    assert headed == {group.number for group in solution(name).derivation.groups}


def test_no_sheet_of_redundants_for_a_determinate_beam() -> None:
    assert blocks_of("drop_in_girder", "redundants") == ()
    assert blocks_of("drop_in_girder", "permanent") == ()
    assert len(blocks_of("five_span_girder", "redundants")) > 10


def test_detail_lessens_what_is_printed() -> None:
    text = (EXAMPLES / "drop_in_girder" / "calc.toml").read_text(encoding="utf-8")
    from calcpack import read

    def counted(detail: str) -> tuple[int, int]:
        stated = text.replace('paper = "letter"', f'paper = "letter"\ndetail = "{detail}"')
        found = make_sheet("unknowns", solve(read(stated.encode())))
        tables = [block for block in found.blocks if isinstance(block, Table)]
        columns = {len(table.columns) for table in tables}
        assert len(columns) == 1
        bodies = sum(isinstance(block, Beside | Paragraph) for block in found.blocks)
        return bodies, columns.pop()

    assert counted("every equation") == (12, 6)
    assert counted("plan") == (12, 5)
    assert counted("table") == (0, 5)
