"""How many decimals each number is printed with, so that every printed equation closes."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from fractions import Fraction

from calcpack.derive.steps import STEP, Step, number_text
from calcpack.exact.formula import Leaf, evaluate, gradient, leaves
from calcpack.exact.numbers import MOST_SIGNIFICANT_DIGITS, significant_digits

SHOWN_DIGITS = 4
"""Significant digits that the largest number of a column shows at least."""


def closing_decimals(
    steps: Sequence[Step], start: Mapping[str, int | None]
) -> dict[str, int | None]:
    """Decimals by origin with which every step's printed digits give its printed result.

    The steps are walked from last to first. While the printed operands of a step miss its printed
    result by more than one unit of the result's last digit, the operand that can be wrong most
    (its partial derivative times one unit of its own last digit) gets one more decimal, everywhere
    it is printed and with it all results of its column; beyond 15 significant digits it is printed
    as a fraction. New decimals may disturb a later step that held by luck, so the walk is repeated
    until nothing changes; decimals only grow, so it ends.

    Args:
        steps: in the order of the package.
        start: the decimals to begin with, by origin, for every input cited and every step.

    Returns:
        Decimals by origin; None means: printed as a fraction.
    """
    decimals = dict(start)
    members: dict[str, dict[str, Fraction]] = {}
    for step in steps:
        if step.value is not None:
            origin = STEP + step.key
            members.setdefault(step.column, {})[origin] = step.value
            decimals[origin] = _fitting(step.value, decimals[origin])
    columns = {STEP + step.key: members[step.column] for step in steps}
    for column in members.values():
        _show_small_numbers(column, decimals)
    changed = True
    while changed:
        changed = False
        for step in reversed(steps):
            while step.value is not None and not closes(step, decimals):
                refined = _weakest(step, decimals)
                more = (decimals[refined] or 0) + 1
                column = columns.get(refined, {refined: _value(step, refined)})
                for origin, value in column.items():
                    decimals[origin] = _refined(value, decimals[origin], more)
                changed = True
    return decimals


def closes(step: Step, decimals: Mapping[str, int | None]) -> bool:
    """Whether the printed operands give the printed result within one unit of its last digit."""
    assert step.value is not None
    own = decimals[STEP + step.key]
    result = Fraction(number_text(step.value, own))
    try:
        from_digits = evaluate(step.formula, lambda leaf: _as_printed(leaf, decimals))
    except ZeroDivisionError:
        return False
    unit = Fraction(0) if own is None else Fraction(1, 10**own)
    return abs(from_digits - result) <= unit


def _as_printed(leaf: Leaf, decimals: Mapping[str, int | None]) -> Fraction:
    if not leaf.origin:
        return leaf.value
    return Fraction(number_text(leaf.value, decimals[leaf.origin]))


def _weakest(step: Step, decimals: Mapping[str, int | None]) -> str:
    """The operand whose rounding weighs most; exact derivatives, so that no bottom is zero."""
    weights = {
        origin: abs(slope) / Fraction(10) ** places
        for origin, slope in gradient(step.formula, lambda leaf: leaf.value).items()
        if (places := decimals[origin]) is not None
        and Fraction(number_text(_value(step, origin), places)) != _value(step, origin)
    }
    return max(weights, key=lambda origin: weights[origin])


def _value(step: Step, origin: str) -> Fraction:
    return next(leaf.value for leaf in leaves(step.formula) if leaf.origin == origin)


def _show_small_numbers(column: Mapping[str, Fraction], decimals: dict[str, int | None]) -> None:
    """Give a column whose numbers are all small enough decimals for four digits of the largest."""
    largest = max(map(abs, column.values()))
    needed = SHOWN_DIGITS
    while largest and largest * 10 ** (needed - SHOWN_DIGITS + 1) < 1:
        needed += 1
    if 0 < largest < 1:
        for origin, value in column.items():
            decimals[origin] = _refined(value, decimals[origin], needed)


def _fitting(value: Fraction, decimals: int | None) -> int | None:
    """As many of the decimals, but one at least, as leave the number with 15 significant digits."""
    while decimals is not None and _too_long(value, decimals):
        decimals = decimals - 1 if decimals > 1 else None
    return decimals


def _too_long(value: Fraction, decimals: int) -> bool:
    return significant_digits(number_text(value, decimals)) > MOST_SIGNIFICANT_DIGITS


def _refined(value: Fraction, decimals: int | None, more: int) -> int | None:
    """At least ``more`` decimals, or the fraction where that would be too many digits."""
    if decimals is None or decimals >= more:
        return decimals
    return None if _too_long(value, more) else more
