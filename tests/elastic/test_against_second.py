"""The force method against stiffness and the kinematic statement, and against handbook formulas."""

from __future__ import annotations

from collections.abc import Sequence
from fractions import Fraction
from random import Random

import pytest
from beams import (
    degree,
    effects_of,
    make_beam,
    movements_of,
    random_beam,
    random_indeterminate,
)

from calcpack.elastic.compatibility import deflection_line, force_method
from calcpack.elastic.redundants import redundants_by_rule
from calcpack.elastic.released import release
from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import Beam, Face
from calcpack.model.request import Effect, EffectKind
from calcpack.second.kinematic import influence_line
from calcpack.second.stiffness import ordinates
from calcpack.statics.influence import effect_line, unknown_lines
from calcpack.statics.plan import plan_of_solution
from calcpack.statics.stability import classify
from calcpack.statics.system import cut_into_bodies

MOVEMENTS = ("deflection", "rotation")


def lines_of(beam: Beam, effects: Sequence[Effect]) -> list[Piecewise]:
    """The lines by the force method, redundants chosen by rule."""
    found = classify(beam, cut_into_bodies(beam))
    assert found.degree == degree(beam)
    redundants = redundants_by_rule(beam, found.degree)
    assert len(redundants) == found.degree
    system = cut_into_bodies(beam, redundants)
    plan = plan_of_solution(beam, system)
    acted_on = [one.station for one in effects if one.kind in MOVEMENTS]
    method = force_method(release(beam, system, plan, acted_on))
    unknowns = unknown_lines(beam, plan, method.lines)
    return [
        deflection_line(method, effect)
        if effect.kind in MOVEMENTS
        else effect_line(beam, system, unknowns, effect)[0]
        for effect in effects
    ]


def assert_second_methods_agree(beam: Beam) -> None:
    """The kinematic statement exactly, the stiffness solution within 1e-7 of the line's size on
    both sides of every station."""
    effects = (*effects_of(beam), *movements_of(beam))
    assert len(effects) > 10
    for effect, line, kinematic, stiffness in zip(
        effects,
        lines_of(beam, effects),
        influence_line(beam, effects),
        ordinates(beam, effects),
        strict=True,
    ):
        assert line == kinematic, effect
        sides = [
            (float(line.left(one.at)), float(line.right(one.at)), left, right)
            for one, left, right in zip(beam.stations, stiffness.left, stiffness.right, strict=True)
        ]
        size = max(max(abs(left), abs(right)) for left, right, *_ in sides) or 1.0
        for left, right, *others in sides:
            assert max(abs(left - others[0]), abs(right - others[1])) <= 1e-7 * size, effect


@pytest.mark.parametrize("seed", range(40))
def test_indeterminate(seed: int) -> None:
    assert_second_methods_agree(random_indeterminate(Random(seed)))


@pytest.mark.parametrize("seed", range(8))
def test_determinate(seed: int) -> None:
    assert_second_methods_agree(random_beam(Random(seed)))


def test_spring_under_a_hinge() -> None:
    """A hinge over a spring in a continuous beam of stepped EI; a turning spring on one face."""
    beam = make_beam(
        30,
        [(0, "fixed"), (9, "spring", None, 350, 0), (19, "spring", "left", 0, 6000), (30, "pin")],
        [(9, "hinge"), (19, "hinge")],
        [4, 24],
        [(0, 7000), (6, 9500), (21, 4000)],
    )
    assert degree(beam) == 1
    assert_second_methods_agree(beam)


def test_forty_short_stretches() -> None:
    """Forty of half a millimetre, each of another stiffness, in one span of thirty metres."""
    steps = [(15 + Fraction(step, 2000), 1000 + 37 * (step * step % 11)) for step in range(41)]
    beam = make_beam(60, [(0, "pin"), (30, "roller"), (60, "roller")], (), [], [(0, 900), *steps])
    effects = [Effect("moment", "B", Fraction(30)), Effect("deflection", "15", Fraction(15))]
    assert tuple(lines_of(beam, effects)) == influence_line(beam, effects)


def line(beam: Beam, kind: EffectKind, at: str, face: Face | None = None) -> Piecewise:
    return lines_of(beam, [Effect(kind, at, beam.station(at).at, face)])[0]


def one_piece(length: int, *coefficients: str) -> Piecewise:
    return Piecewise.from_pieces([(0, length, [Fraction(one) for one in coefficients])])


def test_propped_cantilever() -> None:
    """Handbook, of a load at x from the wall of a span L = 2: the prop takes
    x² (3 L - x) / (2 L³), the wall's moment is -x (L - x) (2 L - x) / (2 L²)."""
    beam = make_beam(2, [(0, "fixed"), (2, "roller")])
    assert line(beam, "reaction", "B") == one_piece(2, "0", "0", "6/16", "-1/16")
    assert line(beam, "moment", "A") == one_piece(2, "0", "-1", "6/8", "-1/8")


def test_fixed_ended_beam() -> None:
    """Handbook, L = 1: R = (L - x)² (L + 2 x) / L³ and M = -x (L - x)² / L² at the left wall."""
    beam = make_beam(1, [(0, "fixed"), (1, "fixed")])
    assert line(beam, "reaction", "A") == one_piece(1, "1", "0", "-3", "2")
    assert line(beam, "moment", "A") == one_piece(1, "0", "-1", "2", "-1")


def test_two_equal_spans() -> None:
    """Handbook, L = 1: M over the middle support is -x (L² - x²) / (4 L²), x from the outer end."""
    beam = make_beam(2, [(0, "pin"), (1, "roller"), (2, "roller")])
    assert line(beam, "moment", "B") == Piecewise.from_pieces(
        (start, start + 1, [Fraction(one) for one in piece])
        for start, piece in ((0, ("0", "-1/4", "0", "1/4")), (1, ("0", "-1/2", "3/4", "-1/4")))
    )
