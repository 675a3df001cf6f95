"""The stiffness solution against handbook formulas and against the kinematic statement."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from fractions import Fraction
from random import Random

import numpy as np
import pytest
from beams import degree, effects_of, make_beam, movements_of, random_beam, random_indeterminate

from calcpack.errors import ProgramFault
from calcpack.exact.piecewise import Side
from calcpack.model.beam import Beam, Face
from calcpack.model.request import Effect, EffectKind
from calcpack.second import balance
from calcpack.second.kinematic import influence_line
from calcpack.second.stiffness import Floats, Ordinates, ordinates

SIDES: tuple[Side, ...] = ("left", "right")


def found(beam: Beam, kind: EffectKind, at: str, face: Face | None = None) -> Ordinates:
    return ordinates(beam, [Effect(kind, at, beam.station(at).at, face)])[0]


def both_sides(read: Callable[[Fraction, Side], Fraction], stations: Sequence[Fraction]) -> Floats:
    return np.array([[float(read(at, side)) for at in stations] for side in SIDES])


def assert_agrees(beam: Beam, tolerance: float = 1e-9) -> None:
    """Values and slopes on both sides of every station, relative to the largest."""
    effects = (*effects_of(beam), *movements_of(beam))
    stations = [station.at for station in beam.stations]
    assert len(effects) > 4
    for effect, line, other in zip(
        effects, influence_line(beam, effects), ordinates(beam, effects), strict=True
    ):
        np.testing.assert_array_equal(other.stations, [float(at) for at in stations])
        for read, found in (
            (line.value, np.array([other.left, other.right])),
            (line.slope, np.array([other.left_slopes, other.right_slopes])),
        ):
            expected = both_sides(read, stations)
            scale = max(np.abs(expected).max(), 1e-30)
            assert np.abs(found - expected).max() / scale < tolerance, effect


@pytest.mark.parametrize("seed", range(40))
def test_agrees_with_the_kinematic_statement(seed: int) -> None:
    assert_agrees(random_beam(Random(seed)))


@pytest.mark.parametrize("seed", range(20))
def test_agrees_with_the_kinematic_statement_on_an_indeterminate_beam(seed: int) -> None:
    assert_agrees(random_indeterminate(Random(seed)))


@pytest.mark.parametrize("seed", range(5))
def test_between_stations(seed: int) -> None:
    beam = random_indeterminate(Random(seed))
    effects = (*effects_of(beam), *movements_of(beam))
    places = [beam.length * part / 97 for part in range(98)]
    for effect, line, other in zip(
        effects, influence_line(beam, effects), ordinates(beam, effects), strict=True
    ):
        expected = np.array([float(line.right(at)) for at in places])
        scale = max(np.abs(expected).max(), 1e-30)
        at = np.array([float(place) for place in places])
        np.testing.assert_allclose(
            other.values(at), expected, atol=1e-12 * scale, err_msg=effect.at
        )
        beyond = other.values(np.array([-1e-9, float(beam.length) + 1e-9]))
        np.testing.assert_array_equal(beyond, 0)


def test_random_indeterminate_beams_are_of_every_sort() -> None:
    sample = [random_indeterminate(Random(seed)) for seed in range(200)]
    assert {1, 2, 3, 4, 5, 6} <= {degree(beam) for beam in sample}
    assert {len(beam.releases) for beam in sample} == {0, 1, 2, 3}
    assert {0, 2, 3, 7} <= {len(beam.stiffness) for beam in sample}
    stations = [station for beam in sample for station in beam.stations]
    kinds = {one.support.kind for one in stations if one.support}
    assert kinds == {"pin", "roller", "fixed", "guided", "spring"}
    inner = [one.support for one in stations if one.support and one.release]
    springs = [one for one in inner if one.kind == "spring"]
    assert {(bool(one.vertical), bool(one.rotational)) for one in springs} == {
        (True, False), (False, True), (True, True)
    }  # fmt: skip
    assert {one.face for one in springs} == {None, "left", "right"}
    assert any(beam.supports[0].at > 0 for beam in sample)


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


def test_forty_short_stretches_of_different_stiffness() -> None:
    """Forty of half a millimetre each in the middle of one of two spans of thirty metres."""
    steps = [(15 + Fraction(step, 2000), 1000 + 37 * (step * step % 11)) for step in range(41)]
    beam = make_beam(60, [(0, "pin"), (30, "roller"), (60, "roller")], (), [7], [(0, 900), *steps])
    assert_agrees(beam)


def test_stiffnesses_far_apart() -> None:
    """Rigid and limp parts on springs, hard and soft, by all that can be typed."""
    beam = make_beam(
        20,
        [(0, "spring", None, "1e12", "1e-9"), (9, "spring", None, "1e-9", 0), (20, "fixed")],
        [(14, "hinge")],
        [5],
        [(0, "1e12"), (10, "1e-9"), (17, 3)],
    )
    assert_agrees(beam)


def test_refinement_restores_what_the_factors_lost(monkeypatch: pytest.MonkeyPatch) -> None:
    beam = random_beam(Random(3))
    monkeypatch.setattr(balance, "GUARD_DIGITS", 30)
    assert_agrees(beam, 1e-15)
    monkeypatch.setattr(balance, "ROUNDS", 1)
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


def test_cantilever_on_a_spring() -> None:
    """Handbook: the tip sinks by a² (3 L - a) / (6 EI), and more where a spring stands under it:
    its force X = k times the sinking that is left."""
    length, bending, stiffness = 5, 700, 40
    a = np.array([0, 2, 3, 5])
    free = a**2 * (3 * length - a) / (6 * bending)
    flexibility = length**3 / (3 * bending)
    beam = make_beam(
        length,
        [(0, "fixed"), (length, "spring", None, stiffness, 0)],
        sections=[2, 3],
        stiffness=[(0, bending)],
    )
    sinking = free / (1 + stiffness * flexibility)
    np.testing.assert_allclose(found(beam, "deflection", "B").left, sinking)
    np.testing.assert_allclose(found(beam, "reaction", "B").right, stiffness * sinking)


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
