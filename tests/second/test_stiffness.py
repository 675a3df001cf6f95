"""The stiffness solution against handbook formulas and against the kinematic statement."""

from __future__ import annotations

from fractions import Fraction
from random import Random

import numpy as np
import pytest
from beams import effects_of, make_beam, random_beam

from calcpack.errors import ProgramFault
from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import Beam, Face
from calcpack.model.request import Effect, EffectKind
from calcpack.second import stiffness
from calcpack.second.kinematic import influence_line
from calcpack.second.stiffness import Ordinates, ordinates


def found(beam: Beam, kind: EffectKind, at: str, face: Face | None = None) -> Ordinates:
    return ordinates(beam, [Effect(kind, at, beam.station(at).at, face)])[0]


def exact(beam: Beam, line: Piecewise) -> Ordinates:
    stations = [station.at for station in beam.stations]
    left, right = (np.array([float(side(x)) for x in stations]) for side in (line.left, line.right))
    return Ordinates(np.array([float(x) for x in stations]), left, right)


def assert_agrees(beam: Beam, tolerance: float = 1e-9) -> None:
    effects = effects_of(beam)
    assert len(effects) > 4
    for effect, line, other in zip(
        effects, influence_line(beam, effects), ordinates(beam, effects), strict=True
    ):
        expected = exact(beam, line)
        scale = max(np.abs(expected.left).max(), np.abs(expected.right).max(), 1e-30)
        np.testing.assert_array_equal(other.stations, expected.stations)
        for side in ("left", "right"):
            off = np.abs(getattr(other, side) - getattr(expected, side)) / scale
            assert off.max() < tolerance, (effect, side)


@pytest.mark.parametrize("seed", range(40))
def test_agrees_with_the_kinematic_statement(seed: int) -> None:
    assert_agrees(random_beam(Random(seed)))


def test_random_beams_are_of_every_sort() -> None:
    sample = [random_beam(Random(seed)) for seed in range(60)]
    assert {len(beam.releases) for beam in sample} == {0, 1, 2, 3}
    stations = [station for beam in sample for station in beam.stations]
    assert {one.support.kind for one in stations if one.support} == {
        "pin", "roller", "fixed", "guided"
    }  # fmt: skip
    joined = {(s.release.kind, s.support.face) for s in stations if s.release and s.support}
    assert {("hinge", None), ("hinge", "left"), ("hinge", "right")} <= joined
    assert {("slide", "left"), ("slide", "right")} <= joined
    assert any(beam.supports[0].at > 0 for beam in sample)


def test_short_pieces_in_a_long_beam() -> None:
    """Half a millimetre among thirty metres, where a double keeps nothing of the long spans."""
    beam = make_beam(
        30,
        [(0, "pin"), ("0.0005", "roller"), (30, "roller")],
        [("15.0005", "hinge")],
        ["15", "15.001", "15.0015", "15.002", "29.9995"],
    )
    assert_agrees(beam)


def test_shortest_pieces_that_can_be_typed() -> None:
    tiny = Fraction(1, 10**9)
    beam = make_beam(
        10**12, [(0, "pin"), (10**12, "roller")], sections=[tiny, 2 * tiny, 10**12 - tiny]
    )
    assert_agrees(beam)


def test_refinement_restores_what_the_factors_lost(monkeypatch: pytest.MonkeyPatch) -> None:
    beam = random_beam(Random(3))
    monkeypatch.setattr(stiffness, "FACTOR_DIGITS", 30)
    assert_agrees(beam, 1e-15)
    monkeypatch.setattr(stiffness, "ROUNDS", 1)
    with pytest.raises(ProgramFault):
        assert_agrees(beam)


def test_what_is_zero_is_zero() -> None:
    beam = make_beam(20, [(0, "pin"), (7, "roller"), (20, "roller")], [(9, "hinge")], [3])
    assert not found(beam, "moment", "r1").left.any()
    assert not found(beam, "moment", "B").left[:3].any()


def test_fixed_ended_beam() -> None:
    """Handbook: M at the left wall = -P a b² / L², R there = P b² (3 a + b) / L³."""
    beam = make_beam(10, [(0, "fixed"), (10, "fixed")], sections=["2.5", 4, 9])
    a = np.array([0, 2.5, 4, 9, 10])
    b = 10 - a
    np.testing.assert_allclose(found(beam, "moment", "A").left, -a * b**2 / 100, atol=1e-15)
    np.testing.assert_allclose(found(beam, "moment reaction", "B").left, -(a**2) * b / 100)
    np.testing.assert_allclose(found(beam, "reaction", "A").right, b**2 * (3 * a + b) / 1000)


def test_propped_cantilever() -> None:
    """Handbook: the prop takes P a² (3 L - a) / (2 L³) of a load at a from the wall."""
    beam = make_beam(8, [(0, "fixed"), (8, "roller")], sections=[1, 3, 6])
    a = np.array([0, 1, 3, 6, 8])
    np.testing.assert_allclose(found(beam, "reaction", "B").left, a**2 * (24 - a) / 1024)


def test_two_equal_spans() -> None:
    """Handbook: M over the middle support = -P a b (L + a) / (4 L²), a from the outer end."""
    beam = make_beam(12, [(0, "pin"), (6, "roller"), (12, "roller")], sections=["1.5", 3, 5])
    a = np.array([0, 1.5, 3, 5, 6])
    moment = found(beam, "moment", "B")
    np.testing.assert_allclose(moment.left[:5], -a * (6 - a) * (6 + a) / 144, atol=1e-15)
    shear = found(beam, "shear", "B", "left")
    reaction = found(beam, "reaction", "A").left
    np.testing.assert_allclose(shear.left[:5], reaction[:5] - 1, atol=1e-15)
    assert (shear.left[4], shear.right[4]) == (-1, 0)


@pytest.mark.parametrize(
    "beam",
    [
        make_beam(10, [(4, "pin")]),
        make_beam(10, [(0, "guided"), (10, "guided")]),
        make_beam(10, [(0, "pin"), (2, "roller"), (4, "roller")], [(6, "hinge")]),
    ],
    ids=["turns", "moves down", "turns about the hinge"],
)
def test_refuses_an_unstable_beam(beam: Beam) -> None:
    with pytest.raises(ProgramFault):
        ordinates(beam, effects_of(beam))
