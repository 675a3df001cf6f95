"""Free bodies: every action once, in the sense of its equation, and nothing on top of another."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction
from random import Random

import pytest
from beams import effects_of, make_beam, random_beam

from calcpack.exact.formula import Symbol
from calcpack.sheets.drawing import Arrow, Circle, Drawing, Label, Turn
from calcpack.sheets.free_body import (
    Couple,
    Force,
    FreeBody,
    Mark,
    free_body_figure,
    free_body_of,
)
from calcpack.sheets.labels import overlaps
from calcpack.statics.influence import cut_at
from calcpack.statics.plan import plan_of_solution
from calcpack.statics.system import cut_into_bodies, symbol_of

ZERO = Fraction(0)
LONG = "Pier 2 at the old tow path, founded on six bored piles 12345"


def texts(drawing: Drawing) -> list[str]:
    return [str(item.text) for item in drawing.items if isinstance(item, Label)]


def shown(symbol: Symbol) -> str:
    """A symbol's letters as a label writes them: no mark of the subscript; here without spaces."""
    return "".join(str(symbol).replace("_", "", 1).split())


def arrows(drawing: Drawing) -> list[Arrow]:
    return [item for item in drawing.items if isinstance(item, Arrow)]


def turns_clockwise(turn: Turn) -> bool:
    """By the sign of the cross product of two successive chords; y runs down the paper."""
    (x0, y0), (x1, y1), (x2, y2) = turn.path[:3]
    return (x1 - x0) * (y2 - y1) - (y1 - y0) * (x2 - x1) > 0


@pytest.mark.parametrize("seed", range(24))
def test_bodies_of_random_beams_show_every_action_once(seed: int) -> None:
    rng = Random(seed)
    beam = random_beam(rng)
    longer = "-" + "west bank " * (seed % 5)
    beam = replace(
        beam,
        supports=tuple(replace(one, name=one.name + longer) for one in beam.supports),
        sections=tuple(replace(one, name=one.name + longer[:5]) for one in beam.sections),
    )
    system = cut_into_bodies(beam)
    equations = [step.equation for step in plan_of_solution(beam, system)]
    effects = [one for one in effects_of(beam) if one.kind in ("shear", "moment")]
    equations += [
        cut_at(beam, system, one).equation
        for one in rng.sample(effects, 4)
        if one not in system.unknowns
    ]
    assert equations
    for equation in equations:
        body = free_body_of(beam, equation)
        drawing = free_body_figure(body, "ft")
        assert overlaps(drawing) == []
        found = ["".join(text.split()) for text in texts(drawing)]
        for action in equation.actions:
            assert found.count(shown(symbol_of(action.unknown))) == 1
        assert len(arrows(drawing)) == sum(bool(a.up) for a in equation.actions) + body.load
        senses = sorted(turns_clockwise(i) for i in drawing.items if isinstance(i, Turn))
        assert senses == sorted(a.clockwise > 0 for a in equation.actions if a.clockwise)


def test_forces_point_as_the_equation_counts_them() -> None:
    body = FreeBody(
        ZERO,
        Fraction(20),
        (Force(Symbol("R", "A"), ZERO, 1), Force(Symbol("V", "1"), Fraction(20), -1)),
        (Mark("A", ZERO), Mark("1", Fraction(20))),
        load=False,
    )
    up, down = arrows(free_body_figure(body, "ft"))
    assert up.tail[1] > up.tip[1]
    assert down.tail[1] < down.tip[1]
    assert (up.tip[0], down.tip[0]) == (13.0, 62.0)


@pytest.mark.parametrize(("centre", "words"), [(0, "x − xA"), (20, "x1 − x")])
def test_the_arm_of_the_load_starts_at_the_centre_of_moments(centre: int, words: str) -> None:
    body = FreeBody(
        ZERO,
        Fraction(20),
        (Force(Symbol("R", "A"), ZERO, 1), Couple(Symbol("M", "1"), Fraction(20), -1)),
        (Mark("A", ZERO), Mark("1", Fraction(20))),
        Fraction(centre),
    )
    drawing = free_body_figure(body, "ft")
    assert {words, "P", "20"} <= set(texts(drawing))
    (ring,) = [i for i in drawing.items if isinstance(i, Circle) and i.fill == "none"]
    assert ring.centre[0] == 13.0 + 49.0 * centre / 20
    assert "centre of moments" in drawing.caption


def test_a_pin_is_a_circle_between_the_shears_of_its_sides() -> None:
    beam = make_beam(24, [(0, "pin"), (12, "roller"), (24, "roller")], [(12, "hinge")])
    system = cut_into_bodies(beam)
    (equation,) = [
        step.equation
        for step in plan_of_solution(beam, system)
        if step.equation.start == step.equation.end
    ]
    drawing = free_body_figure(free_body_of(beam, equation), "ft")
    assert [i.centre[0] for i in drawing.items if isinstance(i, Circle)] == [37.5]
    left, middle, right = sorted(arrows(drawing), key=lambda arrow: arrow.tip[0])
    assert middle.tip[0] == 37.5 == (left.tip[0] + right.tip[0]) / 2
    assert left.tip[1] < left.tail[1]
    assert right.tip[1] > right.tail[1]
    assert {"VB,left", "RB", "VB,right", "B"} == set(texts(drawing))


@pytest.mark.parametrize("name", ["S", LONG])
def test_twenty_supports_stay_readable(name: str) -> None:
    places = [Fraction(10 * n) for n in range(20)]
    names = [f"{name}{n}" for n in range(20)] if name == "S" else [f"S{n}" for n in range(19)]
    names += [name] if name == LONG else []
    body = FreeBody(
        ZERO,
        places[-1],
        tuple(Force(Symbol("R", n), at, 1) for n, at in zip(names, places, strict=True)),
        tuple(Mark(n, at) for n, at in zip(names, places, strict=True)),
        ZERO,
    )
    drawing = free_body_figure(body, "ft")
    assert overlaps(drawing) == []
    written = {"".join(text.split()) for text in texts(drawing)}
    assert {"".join(f"R{n}".split()) for n in names} <= written


def test_forces_of_one_sense_at_one_place_stand_side_by_side() -> None:
    actions = tuple(Force(Symbol("F", str(n)), Fraction(5), 1) for n in range(3))
    drawing = free_body_figure(FreeBody(ZERO, Fraction(10), actions, (), load=False), "m")
    assert len({arrow.tip[0] for arrow in arrows(drawing)}) == 3
    assert overlaps(drawing) == []


def test_the_couple_of_a_support_takes_the_end_that_the_cut_leaves() -> None:
    actions = (
        Force(Symbol("R", "A"), ZERO, 1),
        Couple(Symbol("C", "A"), ZERO, -1),
        Force(Symbol("V", "A"), ZERO, -1, 1),
        Couple(Symbol("M", "A"), ZERO, -1, 1),
    )
    drawing = free_body_figure(FreeBody(ZERO, ZERO, actions, (Mark("A", ZERO),), load=False), "m")
    ends = sorted(i.centre[0] - 37.5 for i in drawing.items if isinstance(i, Turn))
    assert ends[0] < -5 < 5 < ends[1]
    assert overlaps(drawing) == []
