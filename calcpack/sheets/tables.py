"""Tables and words that several sheets share."""

from __future__ import annotations

import re

from calcpack.derive.steps import Step
from calcpack.exact.formula import Symbol
from calcpack.exact.units import SYSTEMS
from calcpack.model.request import Effect
from calcpack.sheets.blocks import Column, Digits, Expression, Table, Text, Value
from calcpack.solution import Solution
from calcpack.statics.system import symbol_of

OURS = r"\b(?:EI|X|m|f|r|g|e)_[0-9a-z]+\b|δ_[^ (]+"
"""Symbols of the force method in our own words."""
NAMES = {
    "reaction": "Reaction of support {}",
    "moment reaction": "Couple held by support {}",
    "shear": "Shear at {}",
    "moment": "Moment at {}",
    "deflection": "Deflection at {}",
    "rotation": "Rotation at {}",
}


def effect_title(effect: Effect) -> str:
    """``Shear at B, just left``."""
    face = f", just {effect.face} of it" if effect.face else ""
    return NAMES[effect.kind].format(effect.at) + face


def step_table(solution: Solution, steps: tuple[Step, ...]) -> Table:
    """Steps with numbers: formula in symbols, in digits, and the result."""
    units = SYSTEMS[solution.calculation.units]
    columns = (
        Column("step", "right"),
        Column("finds"),
        Column("in symbols", width=5),
        Column("with numbers", width=6),
        Column("result", "right"),
        Column("unit"),
    )
    rows = tuple(
        (
            (step.id,),
            (step.left,),
            (Expression(step.formula),),
            (Digits(step.formula),),
            (result_of(solution, step),),
            (units[step.kind],),
        )
        for step in steps
    )
    return Table(columns, rows, ticked=True)


def result_of(solution: Solution, step: Step) -> Value:
    """A step's result with the decimals it closes with."""
    assert step.value is not None
    return Value(step.value, solution.derivation.decimals[f"step:{step.key}"])


def with_symbols(solution: Solution, words: str) -> Text:
    """Words in which the unknowns' symbols, and such as X_1 or EI_0, are set as symbols."""
    known = {str(symbol_of(one)): symbol_of(one) for one in solution.unknowns}
    longest_first = sorted(known, key=len, reverse=True)
    pattern = "|".join([*map(re.escape, longest_first), OURS])
    return tuple(known.get(part) or _ours(part) for part in re.split(f"({pattern})", words) if part)


def _ours(part: str) -> Symbol | str:
    if not re.fullmatch(OURS, part):
        return part
    letter, _, index = part.partition("_")
    return Symbol(letter, index)
