"""Second methods: same program, same input, other ways to the same lines."""

from __future__ import annotations

from calcpack.sheets.blocks import Block, Column, Heading, Paragraph, Table
from calcpack.sheets.lines import effect_title
from calcpack.solution import Solution

WORDS = (
    "The lines were found again by two other methods, in the same program and from the same input: "
    "they guard against a fault in the derivation, not against a wrong input. Kinematic statement, "
    "in exact fractions: a unit discontinuity at the quantity displaces the beam into its "
    "influence line. Stiffness solution, in floating decimals: Euler-Bernoulli elements between "
    "the key stations. The bound is on the difference, as a part of 1 + the largest ordinate."
)


def method_blocks(solution: Solution) -> tuple[Block, ...]:
    """Agreement of the second methods for each effect."""
    bounds = {
        (one.effect, one.method): "exactly" if one.within == 0 else f"within {one.within:.0e}"
        for one in solution.second.agreements
    }
    columns = (
        Column("effect", width=3),
        Column("kinematic", width=2),
        Column("stiffness", width=2),
    )
    rows = tuple(
        (
            (effect_title(line.effect),),
            (bounds[line.effect, "kinematic"],),
            (bounds[line.effect, "stiffness"],),
        )
        for line in solution.lines
    )
    return Heading(1, ("Second methods",)), Paragraph((WORDS,)), Table(columns, rows)
