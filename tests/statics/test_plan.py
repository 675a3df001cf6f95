"""The plan of solution: one new unknown an equation, and each equation one of equilibrium."""

from __future__ import annotations

from fractions import Fraction
from random import Random

import pytest
from beams import make_beam, random_beam

from calcpack.model.beam import Beam
from calcpack.statics.equation import Equation
from calcpack.statics.influence import unknown_lines
from calcpack.statics.plan import PlanStep, equation_in_words, plan_of_solution
from calcpack.statics.system import cut_into_bodies, symbol_of

SEEDS = range(40)


def planned(beam: Beam) -> tuple[PlanStep, ...]:
    return plan_of_solution(beam, cut_into_bodies(beam))


def coefficient(equation: Equation, index: int) -> Fraction:
    """What a unit of an action adds to the equation, from where and how it acts."""
    action = equation.actions[index]
    if equation.about is None:
        return Fraction(action.up)
    return action.clockwise - action.up * (action.station - equation.about)


@pytest.mark.parametrize("seed", SEEDS)
def test_one_new_unknown_an_equation(seed: int) -> None:
    beam = random_beam(Random(seed))
    steps = planned(beam)
    found = []
    for step in steps:
        held = [term.quantity for term in step.equation.terms if term.coefficient]
        assert len(held) == len(set(held)) == len(step.equation.terms)
        assert [one for one in held if one not in found] == [step.unknown]
        assert {*step.uses} == {*held} - {step.unknown}
        found.append(step.unknown)
    assert len(found) == len(set(found))
    assert {*found} == {*cut_into_bodies(beam).unknowns}
    restraints = sum(one.holds_vertical + one.holds_rotation for one in beam.supports)
    pins = sum(body.is_pin for body in cut_into_bodies(beam).bodies)
    assert len(found) == restraints + len(beam.releases) + pins


@pytest.mark.parametrize("seed", SEEDS)
def test_each_equation_is_one_of_equilibrium(seed: int) -> None:
    """Its coefficients follow from where its actions stand; with all lines put in it vanishes, and
    its free body is a run of neighbouring bodies from its start to its end."""
    beam = random_beam(Random(seed))
    steps = planned(beam)
    lines = unknown_lines(beam, steps)
    names = [body.name for body in cut_into_bodies(beam).bodies]
    for step in steps:
        equation = step.equation
        terms = {term.quantity: term.coefficient for term in equation.terms}
        rest = equation.load_line(beam.length)
        for index, action in enumerate(equation.actions):
            assert terms.get(action.unknown, 0) == coefficient(equation, index)
            rest = rest + lines[action.unknown] * coefficient(equation, index)
        assert rest == rest * 0
        assert ", ".join(step.bodies) in ", ".join(names)
        inside = [one for one in beam.supports if equation.start < one.at < equation.end]
        acting = {action.unknown.at for action in equation.actions}
        assert {one.name for one in inside} <= acting


def test_a_suspended_span_goes_first() -> None:
    """Two anchor spans with overhangs carry a suspended span: its hinges go first, then each anchor
    span by itself; no equation needs a second unknown."""
    beam = make_beam(
        128,
        [(0, "pin"), (40, "roller"), (88, "roller"), (128, "roller")],
        [(52, "hinge"), (76, "hinge")],
    )
    steps = planned(beam)
    assert {str(symbol_of(step.unknown)) for step in steps[:2]} == {"V_r1", "V_r2"}
    assert [step.bodies for step in steps[:2]] == [("r1-r2",), ("r1-r2",)]
    assert equation_in_words(beam, steps[0].equation) == "moments about r1"
    assert equation_in_words(beam, steps[1].equation) == "sum of forces"
    assert {symbol_of(step.unknown).index for step in steps[2:]} == {"A", "B", "C", "D"}
    assert all(len(step.bodies) == 1 for step in steps)
    first = steps[0].reason
    assert "Cut at r1 and r2" in first
    assert "hold no V_r1 and give V_r2" in first
    by_anchor = next(step for step in steps if step.unknown.at == "A")
    assert by_anchor.bodies == ("A-r1",)
    assert "V_r1, known by now" in by_anchor.reason


def test_an_equation_beside_others_on_few_forces() -> None:
    """Of two bodies the one with fewer forces is taken first, wherever it stands."""
    beam = make_beam(30, [(0, "pin"), (12, "roller"), (30, "roller")], [(20, "hinge")])
    assert planned(beam)[0].bodies == ("r1-C",)
    turned = make_beam(30, [(0, "pin"), (18, "roller"), (30, "roller")], [(10, "hinge")])
    assert planned(turned)[0].bodies == ("A-r1",)


def test_the_pin_of_a_hinge_over_a_support_is_a_body() -> None:
    beam = make_beam(20, [(0, "pin"), (10, "roller"), (20, "roller")], [(10, "hinge")])
    steps = planned(beam)
    pin = next(step for step in steps if step.unknown.kind == "reaction" and step.unknown.at == "B")
    assert pin.bodies == ("pin at B",)
    assert [str(symbol_of(one)) for one in pin.uses] == ["V_B,left", "V_B,right"]
    assert pin.equation.name == "pin at B"
    assert pin.equation.about is None
