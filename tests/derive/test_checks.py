"""A first method that errs is found out by the second ones."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from fractions import Fraction
from typing import Literal

import pytest
from beams import make_beam
from loads import given, governing_of, make_load, make_strip
from making import broken, lines_of, make_effect

from calcpack.derive import checks
from calcpack.derive.checks import compare_lines, swept_value
from calcpack.errors import Disagreement
from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import Beam
from calcpack.model.loads import Applies, MovingLoad
from calcpack.model.request import Effect
from calcpack.moving.target import Target

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
    target = Target(LINES[effect], effect.kind, effect.station)
    found = governing_of(target.line, LOAD, sense)
    ordinates = second.stiffness[effect]
    value = swept_value(ordinates, target, LOAD, found, 2000)
    assert value == pytest.approx(float(found.value), rel=1e-2)
    for factor in (Fraction(98, 100), Fraction(102, 100), Fraction(-1)):
        wrong = replace(found, value=found.value * factor)
        with pytest.raises(Disagreement, match="a sweep finds"):
            swept_value(ordinates, target, LOAD, wrong, 2000)


def two_cases() -> MovingLoad:
    """A gap that varies and a strip; the second case, for shears only, twice as heavy."""
    load = make_load((12, 0), (6, (2, 5)), uniform=1, strips=[make_strip(2, 1, length=4)])
    (case,) = load.cases
    heavy = replace(
        case, name="heavy", factors=(given(2, "factor"),), applies=(Applies(("shear",)),)
    )
    return replace(load, cases=(case, heavy))


@pytest.mark.parametrize("effect", EFFECTS, ids=lambda effect: effect.kind)
@pytest.mark.parametrize("sense", SENSES)
def test_the_sweep_takes_the_cases_that_are_for_the_effect(
    effect: Effect, sense: Literal[1, -1]
) -> None:
    """Shears are held to the second case, which is twice the first; the others to the first."""
    load = two_cases()
    target = Target(LINES[effect], effect.kind, effect.station)
    ordinates = compare_lines(BEAM, "SI", LINES).stiffness[effect]
    found = governing_of(target.line, replace(load, cases=load.cases[:1]), sense)
    own = replace(found, value=found.value * (2 if effect.kind == "shear" else 1))
    other = replace(found, value=found.value * (1 if effect.kind == "shear" else 2))
    value = swept_value(ordinates, target, load, own, 2000)
    assert value == pytest.approx(float(own.value), rel=1e-2)
    with pytest.raises(Disagreement, match="a sweep finds"):
        swept_value(ordinates, target, load, other, 2000)
