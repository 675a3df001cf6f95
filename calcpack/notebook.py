"""What a notebook calls: ``calcpack.sheet(NAME)`` shows a sheet of the calc.toml beside it."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path
from typing import Any

from calcpack.errors import Disagreement, InputRefused
from calcpack.intake import read_file
from calcpack.model.request import Calculation
from calcpack.render.markdown import SHEET_MIME, stamp, to_markdown
from calcpack.results import results
from calcpack.sheets.blocks import Paragraph
from calcpack.sheets.pages import SHEET_NAMES, make_sheet
from calcpack.solution import Solution, solve

EMPTY = "This calculation has nothing to show on this sheet; the package leaves it out."


@dataclass(frozen=True)
class ShownSheet:
    """A sheet as a notebook shows it; its output names the sheet and the digest beside the text.

    Attributes:
        name: the sheet's name.
        digest: of data and results; None where calc.toml could not be computed.
        text: Markdown; without a digest plain text, one line for each fault.
    """

    name: str
    digest: str | None
    text: str

    def __repr__(self) -> str:
        return self.text if self.digest is None else f"sheet {self.name!r}, digest {self.digest}"

    def _repr_mimebundle_(self, include: Any = None, exclude: Any = None) -> dict[str, Any]:
        shown = {} if self.digest is None else {"text/markdown": self.text}
        return {"text/plain": repr(self), **shown, SHEET_MIME: stamp(self.name, self.digest)}


def sheet(name: str) -> ShownSheet:
    """The sheet of that name, of the calc.toml in the current folder.

    A calc.toml that cannot be computed is no error here: what is shown are its faults.

    Raises:
        ValueError: no sheet is called so.
    """
    if name not in SHEET_NAMES:
        raise ValueError(f"no sheet is called {name!r}; known are {', '.join(SHEET_NAMES)}")
    try:
        solution, digest = _solved(read_file(Path("calc.toml")))
    except (InputRefused, Disagreement) as refused:
        return ShownSheet(name, None, str(refused))
    blocks = make_sheet(name, solution).blocks or (Paragraph((EMPTY,)),)
    return ShownSheet(name, digest, to_markdown(blocks, solution.derivation))


_latest: dict[object, tuple[Solution, str]] = {}


def _solved(calculation: Calculation) -> tuple[Solution, str]:
    """The solution and its digest; the latest is kept while its files hold the same bytes."""
    key = (calculation.text, calculation.tables)
    if key not in _latest:
        solution = solve(calculation)
        _latest.clear()
        _latest[key] = solution, results(solution)["digest"]
    return _latest[key]
