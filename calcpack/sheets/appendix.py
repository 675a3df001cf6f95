"""Appendices: the input file as text, and how to run the calculation again."""

from __future__ import annotations

from collections.abc import Iterator

from calcpack.sheets.blocks import Block, Heading, Paragraph, Preformatted
from calcpack.solution import Solution

AGAIN = (
    "This PDF carries calc.toml and its tables, results.json, the notebook and a manifest with "
    "their SHA-1 and SHA-256 sums. Save calc.toml and its tables to an empty folder and run, with "
    "the version named in the foot of every sheet:"
)
SAME = (
    "The digest in the foot of every sheet is the SHA-256 of the input without its cover together "
    "with the results, in the canonical form of RFC 8785: the same digest means the same data and "
    "the same numbers. The same input, version and platform give the same bytes."
)


def appendix_blocks(solution: Solution) -> tuple[Block, ...]:
    """The input as text, and how to get the same digits again."""
    return (
        Heading(1, ("Appendix: input and how to run it again",)),
        Paragraph((AGAIN,), leads=True),
        Preformatted("calcpack solve calc.toml --json > results.json\ncalcpack issue ."),
        Paragraph((SAME,)),
        Heading(2, ("calc.toml",)),
        Preformatted(solution.calculation.text),
        *_tables(solution),
    )


def _tables(solution: Solution) -> Iterator[Block]:
    """Each table beside calc.toml as text."""
    for name, content in solution.calculation.tables:
        yield Heading(2, (name,))
        yield Preformatted(content.decode("utf-8-sig").replace("\r\n", "\n"))
