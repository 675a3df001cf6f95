"""A first method that errs is found out by the second ones."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from fractions import Fraction
from typing import Literal

import pytest
from beams import make_beam
from making import broken, lines_of, make_effect, make_load

from calcpack.derive import checks
from calcpack.derive.checks import compare_lines, swept_value
from calcpack.errors import Disagreement
from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import Beam
from calcpack.model.request import Effect
from calcpack.moving.critical import governing

BEAM = make_beam(14, [(0, "pin"), (10, "roller")], sections=[4])
EFFECTS = [
    make_effect(BEAM, "reaction", "A"),
    make_effect(BEAM, "moment", "1"),
    make_effect(BEAM, "shear", "1"),
]
LINES = dict(zip(EFFECTS, lines_of(BEAM, EFFECTS), strict=True))
SENSES: tuple[Literal[1, -1], ...] = (1, -1)
LOAD = make_load((12, 0), (6, 3), uniform="0.5", allowance="0.2", distribution="0.8")


def test_what_agrees() -> None:
    second = compare_lines(BEAM, "SI", LINES)
    found = [(one.effect, one.method, one.within) for one in second.agreements]
    assert found == [
        (effect, method, within)
        for effect in EFFECTS
        for method, within in (("kinematic", 0.0), ("stiffness", 1e-9))
    ]


def bent(line: Piecewise, by: Fraction) -> Piecewise:
    """The line with its ordinate at 4 raised on one side, by little."""
    return line + broken((0, 0), (4, by), (4, 0), (14, 0))


@pytest.mark.parametrize("effect", EFFECTS, ids=lambda effect: effect.kind)
def test_the_kinematic_statement_finds_the_least_difference(effect: Effect) -> None:
    wrong = {**LINES, effect: bent(LINES[effect], Fraction(1, 10**30))}
    with pytest.raises(Disagreement, match=f"{effect.label}: the kinematic"):
        compare_lines(BEAM, "SI", wrong)


@pytest.mark.parametrize("effect", EFFECTS, ids=lambda effect: effect.kind)
@pytest.mark.parametrize("sign", SENSES)
def test_the_stiffness_solution_finds_a_small_difference(
    effect: Effect, sign: int, monkeypatch: pytest.MonkeyPatch
) -> None:
    """With the kinematic statement made to err in the same way."""
    wrong = {**LINES, effect: bent(LINES[effect], sign * Fraction(1, 10**7))}

    def erring(_beam: Beam, effects: Sequence[Effect]) -> tuple[Piecewise, ...]:
        return tuple(wrong[one] for one in effects)

    monkeypatch.setattr(checks, "influence_line", erring)
    with pytest.raises(Disagreement, match=f"{effect.label}: the stiffness solution differs by"):
        compare_lines(BEAM, "SI", wrong)


@pytest.mark.parametrize("effect", EFFECTS, ids=lambda effect: effect.kind)
@pytest.mark.parametrize("sense", SENSES)
def test_the_sweep_finds_a_value_that_is_too_low_or_too_high(
    effect: Effect, sense: Literal[1, -1]
) -> None:
    second = compare_lines(BEAM, "SI", LINES)
    found = governing(LINES[effect], LOAD, sense)
    value = swept_value(second, effect, LOAD, found)
    assert value == pytest.approx(float(found.value), rel=1e-2)
    for factor in (Fraction(98, 100), Fraction(102, 100), Fraction(-1)):
        with pytest.raises(Disagreement, match="a sweep finds"):
            swept_value(second, effect, LOAD, replace(found, value=found.value * factor))
