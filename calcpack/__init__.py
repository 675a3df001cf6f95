"""Checkable calculation packages for beams under moving loads."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from calcpack.intake import read, read_file
from calcpack.results import results
from calcpack.solution import Solution, solve

if TYPE_CHECKING:
    from calcpack.notebook import sheet

__all__ = ["Solution", "read", "read_file", "results", "sheet", "solve"]


def __getattr__(name: str) -> Any:
    """``sheet`` is loaded when a notebook asks for it: the command line has no use for it."""
    if name == "sheet":
        from calcpack.notebook import sheet

        return sheet
    raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
