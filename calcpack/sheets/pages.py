"""The sheets by name; the names are a notebook's only interface and never change."""

from __future__ import annotations

from collections.abc import Callable

from calcpack.sheets.appendix import appendix_blocks
from calcpack.sheets.basis import basis_blocks
from calcpack.sheets.blocks import Block, Sheet
from calcpack.sheets.cover import contents_blocks, cover_blocks
from calcpack.sheets.data import data_blocks
from calcpack.sheets.elastic import permanent_blocks, redundant_blocks
from calcpack.sheets.envelopes import envelope_blocks
from calcpack.sheets.lines import line_blocks, model_blocks, unknown_blocks
from calcpack.sheets.methods import method_blocks, worksheet_blocks
from calcpack.sheets.placements import placement_blocks, summary_blocks
from calcpack.solution import Solution

_MAKERS: dict[str, tuple[str, Callable[[Solution], tuple[Block, ...]]]] = {
    "cover": ("Title sheet", cover_blocks),
    "contents": ("Contents", contents_blocks),
    "summary": ("Summary of results", summary_blocks),
    "basis": ("Basis", basis_blocks),
    "data": ("Data", data_blocks),
    "model": ("Model", model_blocks),
    "redundants": ("Redundants", redundant_blocks),
    "unknowns": ("Unknowns", unknown_blocks),
    "lines": ("Influence lines", line_blocks),
    "permanent": ("Permanent loads", permanent_blocks),
    "placements": ("Placements", placement_blocks),
    "envelopes": ("Envelopes", envelope_blocks),
    "methods": ("Second methods", method_blocks),
    "worksheet": ("Worksheet", worksheet_blocks),
    "appendix": ("Appendix", appendix_blocks),
}

SHEET_NAMES = tuple(_MAKERS)


def make_sheet(name: str, solution: Solution) -> Sheet:
    """The sheet of that name.

    Raises:
        KeyError: no sheet is called so.
    """
    title, blocks = _MAKERS[name]
    return Sheet(name, title, blocks(solution))
