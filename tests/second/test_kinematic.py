"""The kinematic statement against closed forms and the laws of statics and elasticity."""

from __future__ import annotations

import itertools
from dataclasses import replace
from fractions import Fraction
from random import Random

import pytest
from beams import beams, effects_of, make_beam, movements_of, random_indeterminate
from hypothesis import given, settings

from calcpack.errors import ProgramFault
from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import Beam, Face
from calcpack.model.request import Effect, EffectKind
from calcpack.second.kinematic import influence_line

OTHER: dict[Face | None, Face | None] = {None: None, "left": "right", "right": "left"}


def line(beam: Beam, kind: EffectKind, at: str, face: Face | None = None) -> Piecewise:
    return influence_line(beam, [Effect(kind, at, beam.station(at).at, face)])[0]


def broken(*points: tuple[int | str, int | str]) -> Piecewise:
    """A line through points (station, value); a station given twice is a jump."""
    exact = [(Fraction(x), Fraction(y)) for x, y in points]
    return Piecewise.from_pieces(
        (a, b, (y, (z - y) / (b - a))) for (a, y), (b, z) in itertools.pairwise(exact) if a < b
    )


def test_simple_beam() -> None:
    """Handbook: M under a load at a, b from the ends is a b / L."""
    beam = make_beam(10, [(0, "pin"), (10, "roller")], sections=[4])
    assert line(beam, "reaction", "A") == broken((0, 1), (10, 0))
    assert line(beam, "shear", "A") == broken((0, 1), (10, 0))
    assert line(beam, "shear", "B") == broken((0, 0), (10, -1))
    assert line(beam, "shear", "1") == broken((0, 0), (4, "-2/5"), (4, "3/5"), (10, 0))
    assert line(beam, "moment", "1") == broken((0, 0), (4, "12/5"), (10, 0))
    assert line(beam, "moment", "B") == broken((0, 0), (10, 0))


@pytest.mark.parametrize("end", [0, 6])
def test_cantilever(end: int) -> None:
    """Handbook: M = -P a, V = +P left of the wall or -P right of it; the tip carries nothing."""
    beam = make_beam(6, [(end, "fixed")], sections=[2])
    sign = 1 if end == 0 else -1
    arm = broken((0, -end), (6, 6 - end))
    assert line(beam, "reaction", "A") == broken((0, 1), (6, 1))
    assert line(beam, "moment reaction", "A") == arm
    assert line(beam, "moment", "A") == arm * -sign
    assert line(beam, "shear", "A") == broken((0, sign), (6, sign))
    tip = Fraction(6 - end)
    for kind in ("shear", "moment"):
        assert influence_line(beam, [Effect(kind, str(tip), tip)]) == (broken((0, 0), (6, 0)),)


def test_overhang() -> None:
    beam = make_beam(14, [(0, "pin"), (10, "roller")])
    assert line(beam, "reaction", "B") == broken((0, 0), (14, "7/5"))
    assert line(beam, "moment", "B") == broken((0, 0), (10, 0), (14, -4))
    assert line(beam, "shear", "B", "left") == broken((0, 0), (10, -1), (10, 0), (14, "-2/5"))
    assert line(beam, "shear", "B", "right") == broken((0, 0), (10, 0), (10, 1), (14, 1))


@pytest.mark.parametrize("face", [None, "left", "right"])
def test_hinge_over_support(face: Face | None) -> None:
    """Two simple spans in a row; which side of the hinge stands on the pin changes nothing."""
    beam = make_beam(10, [(0, "pin"), (4, "roller", face), (10, "roller")], [(4, "hinge")])
    assert line(beam, "reaction", "B") == broken((0, 0), (4, 1), (10, 0))
    assert line(beam, "shear", "B", "left") == broken((0, 0), (4, -1), (4, 0), (10, 0))
    assert line(beam, "shear", "B", "right") == broken((0, 0), (4, 0), (4, 1), (10, 0))
    assert line(beam, "moment", "B") == broken((0, 0), (10, 0))


def test_drop_in_span() -> None:
    """An anchor span's moment at its support is loaded by the drop-in span through the hinge."""
    beam = make_beam(
        20, [(0, "pin"), (8, "roller"), (20, "roller")], [(10, "hinge")], sections=[15]
    )
    assert line(beam, "moment", "B") == broken((0, 0), (8, 0), (10, -2), (20, 0))
    assert line(beam, "moment", "1") == broken((0, 0), (10, 0), (15, "5/2"), (20, 0))
    assert line(beam, "shear", "r1") == broken((0, 0), (10, 0), (10, 1), (20, 0))


def test_slide() -> None:
    """Pin, slide at 4, wall at 10: left of the slide the pin carries all, right of it the wall."""
    beam = make_beam(10, [(0, "pin"), (10, "fixed")], [(4, "slide")])
    assert line(beam, "reaction", "A") == broken((0, 1), (4, 1), (4, 0), (10, 0))
    assert line(beam, "moment", "r1") == broken((0, 0), (4, 4), (4, 0), (10, 0))
    assert line(beam, "shear", "r1") == broken((0, 0), (10, 0))
    assert line(beam, "moment reaction", "B") == broken((0, 0), (4, 4), (4, -6), (10, 0))


def test_guided_support_inside() -> None:
    """The pin carries every load; the guide takes all the moment, on its right none is left."""
    beam = make_beam(10, [(0, "pin"), (6, "guided")])
    assert line(beam, "moment", "B", "left") == broken((0, 0), (6, 6), (10, 6))
    assert line(beam, "moment", "B", "right") == broken((0, 0), (6, 0), (10, -4))
    assert line(beam, "moment reaction", "B") == broken((0, 0), (10, 10))
    assert line(beam, "shear", "B") == broken((0, 0), (6, 0), (6, 1), (10, 1))


def assert_balance(beam: Beam) -> None:
    upward, turning = [], []
    for effect, found in zip(effects_of(beam), influence_line(beam, effects_of(beam)), strict=True):
        if effect.kind == "reaction":
            upward.append(found)
            turning.append(found * effect.station)
        elif effect.kind == "moment reaction":
            turning.append(found)
    nothing = broken((0, 0), (str(beam.length), 0))
    assert sum(upward, nothing) == nothing + broken((0, 1), (str(beam.length), 1))
    assert sum(turning, nothing) == broken((0, 0), (str(beam.length), str(beam.length)))


@given(beams())
@settings(max_examples=40, deadline=None)
def test_reactions_balance_the_load(beam: Beam) -> None:
    assert_balance(beam)


@given(beams())
@settings(max_examples=40, deadline=None)
def test_faces_differ_by_the_reaction(beam: Beam) -> None:
    lines = dict(zip(effects_of(beam), influence_line(beam, effects_of(beam)), strict=True))
    for effect, found in lines.items():
        cut, sign = {"reaction": ("shear", 1), "moment reaction": ("moment", -1)}.get(
            effect.kind, ("", 0)
        )
        left = lines.get(Effect(cut, effect.at, effect.station, "left"))  # type: ignore[arg-type]
        right = lines.get(Effect(cut, effect.at, effect.station, "right"))  # type: ignore[arg-type]
        if left and right:
            assert found == (right - left) * sign


def mirrored(beam: Beam) -> Beam:
    end = beam.length
    return replace(
        beam,
        supports=tuple(
            replace(support, at=end - support.at, face=OTHER[support.face])
            for support in reversed(beam.supports)
        ),
        releases=tuple(replace(one, at=end - one.at) for one in reversed(beam.releases)),
        sections=tuple(replace(one, at=end - one.at) for one in reversed(beam.sections)),
        stiffness=tuple(
            replace(one, start=end - one.end, end=end - one.start)
            for one in reversed(beam.stiffness)
        ),
    )


def assert_mirror_image(beam: Beam) -> None:
    """Seen from behind the beam, shear, moment reaction and rotation change sign, the rest not."""
    end, effects = beam.length, (*effects_of(beam), *movements_of(beam))
    images = [replace(one, station=end - one.station, face=OTHER[one.face]) for one in effects]
    for effect, found, image in zip(
        effects,
        influence_line(beam, effects),
        influence_line(mirrored(beam), images),
        strict=True,
    ):
        sign = -1 if effect.kind in ("shear", "moment reaction", "rotation") else 1
        for station in beam.stations:
            assert found.left(station.at) == sign * image.right(end - station.at), effect
            assert found.right(station.at) == sign * image.left(end - station.at), effect


@given(beams())
@settings(max_examples=30, deadline=None)
def test_mirror_image(beam: Beam) -> None:
    assert_mirror_image(beam)


@pytest.mark.parametrize("seed", range(5))
def test_mirror_image_of_an_indeterminate_beam(seed: int) -> None:
    assert_mirror_image(random_indeterminate(Random(seed)))


@pytest.mark.parametrize("seed", range(5, 10))
def test_reactions_balance_the_load_on_an_indeterminate_beam(seed: int) -> None:
    assert_balance(random_indeterminate(Random(seed)))


@pytest.mark.parametrize("seed", range(5))
def test_reciprocity(seed: int) -> None:
    """J. C. Maxwell: what a unit load at a moves at b, a unit load at b moves at a; the same of
    couples and rotations, and of a load and a couple: the slope of a deflection's line."""
    beam = random_indeterminate(Random(seed))
    effects = [one for one in movements_of(beam) if one.face is None]
    lines = dict(zip(effects, influence_line(beam, effects), strict=True))
    compared = 0
    for (one, first), (other, second) in itertools.combinations(lines.items(), 2):
        if one.station == other.station or 0 in (one.station, other.station):
            continue
        there, here = (
            line.left(to.station) if to.kind == "deflection" else line.slope(to.station, "left")
            for line, to in ((first, other), (second, one))
        )
        assert there == here
        compared += there != 0
    assert compared > 10


@pytest.mark.parametrize("seed", range(5))
def test_stiffness_scaled_throughout(seed: int) -> None:
    """Twice as stiff, springs too: the same forces, half the movements."""
    beam = random_indeterminate(Random(seed))
    stiffness = beam.stiffness or make_beam(beam.length, [], stiffness=[(0, 1)]).stiffness
    stiffer = replace(
        beam,
        supports=tuple(
            replace(one, vertical=2 * one.vertical, rotational=2 * one.rotational)
            for one in beam.supports
        ),
        stiffness=tuple(replace(one, EI=2 * one.EI) for one in stiffness),
    )
    forces, moves = effects_of(beam), movements_of(beam)
    assert influence_line(stiffer, forces) == influence_line(beam, forces)
    halved = tuple(one / 2 for one in influence_line(beam, moves))
    assert influence_line(stiffer, moves) == halved


def cubic(*pieces: tuple[int | str, int | str, tuple[int | str, ...]]) -> Piecewise:
    return Piecewise.from_pieces(
        (Fraction(start), Fraction(end), [Fraction(one) for one in coefficients])
        for start, end, coefficients in pieces
    )


def test_propped_cantilever() -> None:
    """Handbook, of a load at x from the wall of a span L = 2, EI whatever: the prop takes
    x² (3 L - x) / (2 L³), the wall's moment is -x (L - x) (2 L - x) / (2 L²)."""
    for bending in (1, 700):
        beam = make_beam(2, [(0, "fixed"), (2, "roller")], stiffness=[(0, bending)])
        assert line(beam, "reaction", "B") == cubic((0, 2, (0, 0, "6/16", "-1/16")))
        moment = cubic((0, 2, (0, -1, "6/8", "-1/8")))
        assert line(beam, "moment", "A") == moment
        assert line(beam, "moment reaction", "A") == -moment
        assert line(beam, "moment", "B") == cubic((0, 2, (0,)))


def test_fixed_ended_beam() -> None:
    """Handbook, L = 1: R = (L - x)² (L + 2 x) / L³ and M = -x (L - x)² / L² at the left wall, and
    a load at midspan deflects it by L³ / (192 EI)."""
    beam = make_beam(1, [(0, "fixed"), (1, "fixed")], sections=["1/2"], stiffness=[(0, 5)])
    assert line(beam, "reaction", "A") == cubic((0, 1, (1, 0, -3, 2)))
    assert line(beam, "moment", "A") == cubic((0, 1, (0, -1, 2, -1)))
    assert line(beam, "deflection", "1") == cubic(
        (0, "1/2", (0, 0, "1/80", "-1/60")), ("1/2", 1, ("1/960", 0, "-1/80", "1/60"))
    )


def test_two_equal_spans() -> None:
    """Handbook, L = 1: M over the middle support is -x (L² - x²) / (4 L²), x from the outer end."""
    beam = make_beam(2, [(0, "pin"), (1, "roller"), (2, "roller")])
    assert line(beam, "moment", "B") == cubic(
        (0, 1, (0, "-1/4", 0, "1/4")), (1, 2, (0, "-1/2", "3/4", "-1/4"))
    )
    assert line(beam, "reaction", "B").left(Fraction(1, 2)) == Fraction(11, 16)


def test_simple_beam_bends() -> None:
    """Handbook, L = 6, EI = 3: x (3 L² - 4 x²) / (48 EI) at midspan, and the left end turns by
    x (L - x) (2 L - x) / (6 L EI)."""
    beam = make_beam(6, [(0, "pin"), (6, "roller")], sections=[3], stiffness=[(0, 3)])
    assert line(beam, "deflection", "1") == cubic(
        (0, 3, (0, "3/4", 0, "-1/36")), (3, 6, ("3/2", 0, "-1/4", "1/36"))
    )
    assert line(beam, "rotation", "A") == cubic((0, 6, (0, "2/3", "-1/6", "1/108")))
    assert line(beam, "deflection", "A") == cubic((0, 6, (0,)))


def test_cantilever_of_two_stiffnesses() -> None:
    """Wall, 2 of EI = 8, 1 of EI = 1; by hand the tip sinks by the integrals of (3 - x)² / EI,
    26 / 24 + 1 / 3, and turns by those of (3 - x) / EI, 4 / 8 + 1 / 2."""
    beam = make_beam(3, [(0, "fixed")], sections=[3], stiffness=[(0, 8), (2, 1)])
    tip = Fraction(3)
    assert line(beam, "deflection", "1").left(tip) == Fraction(26, 24) + Fraction(1, 3)
    assert line(beam, "rotation", "1").left(tip) == 1
    assert line(beam, "deflection", "1").slope(tip, "left") == 1


def test_springs() -> None:
    """A stiff bar on two springs gives by x / (k L) at B; a cantilever on a turning spring of
    stiffness k only turns by x / k, beside its own bending x² (3 L - x) / (6 EI) at the tip."""
    beam = make_beam(4, [(0, "pin"), (4, "spring", None, 50, 0)], stiffness=[(0, 9)])
    assert line(beam, "deflection", "B") == cubic((0, 4, (0, "1/200")))
    wall = make_beam(
        1, [(0, "pin"), ("1/2", "spring", None, 0, 7)], sections=[1], stiffness=[(0, 9)]
    )
    assert line(wall, "moment reaction", "B") == cubic((0, 1, (0, 1)))
    turned = line(wall, "rotation", "B")
    assert turned == cubic((0, 1, (0, "1/7")))


def test_spring_under_a_hinge() -> None:
    """Two spans of 2 hinged on a spring of stiffness 4: the hinge sinks by its load over 4, and
    each part turns by that over 2 more than by its own bending."""
    beam = make_beam(
        4, [(0, "pin"), (2, "spring", None, 4, 0), (4, "roller")], [(2, "hinge")],
        stiffness=[(0, 10)],
    )  # fmt: skip
    assert line(beam, "reaction", "B") == broken((0, 0), (2, 1), (4, 0))
    assert line(beam, "deflection", "B") == broken((0, 0), (2, "1/4"), (4, 0))
    left, right = (line(beam, "rotation", "B", face) for face in ("left", "right"))
    assert left.left(Fraction(2)) == Fraction(1, 8)
    assert right.left(Fraction(2)) == Fraction(-1, 8)
    assert right.right(Fraction(3)) == Fraction(-1, 16) + Fraction(3, 8 * 10) * Fraction(4, 6)


def test_deflection_on_both_faces_of_a_slide() -> None:
    """Two cantilevers of 2 and 1 joined by a slide, which keeps both tips at one slope: a load on
    the left tip would turn it by 2, and a couple of 2/3 is what holds it back to the slope of
    2/3 that it gives to the right one; with the load on the right one the couple is 1/6."""
    beam = make_beam(3, [(0, "fixed"), (3, "fixed")], [(2, "slide")], stiffness=[(0, 1)])
    left, right = (line(beam, "deflection", "r1", face) for face in ("left", "right"))
    at = Fraction(2)
    assert left.left(at) == Fraction(8, 3) - Fraction(2, 3) * 2
    assert left.right(at) == right.left(at) == -Fraction(2, 3) / 2
    assert right.right(at) == Fraction(1, 3) - Fraction(1, 6) / 2


@pytest.mark.parametrize(
    "beam",
    [
        make_beam(10, [(0, "pin")]),
        make_beam(10, [(0, "guided"), (10, "guided")]),
        make_beam(10, [(0, "pin"), (2, "roller"), (4, "roller")], [(6, "hinge")]),
        make_beam(10, [(0, "fixed"), (4, "guided", "left")], [(4, "slide"), (7, "hinge")]),
        make_beam(10, [(3, "spring", None, 5, 0)]),
    ],
    ids=["too few", "moves down", "turns about the hinge", "right of a slide", "on one spring"],
)
def test_refuses_what_is_not_stable(beam: Beam) -> None:
    with pytest.raises(ProgramFault):
        line(beam, "moment", "A")
