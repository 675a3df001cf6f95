"""The kinematic statement against closed forms and the laws of statics."""

from __future__ import annotations

import itertools
from dataclasses import replace
from fractions import Fraction

import pytest
from beams import beams, effects_of, make_beam
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


@given(beams())
@settings(max_examples=40, deadline=None)
def test_reactions_balance_the_load(beam: Beam) -> None:
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


@given(beams())
@settings(max_examples=40, deadline=None)
def test_mirror_image(beam: Beam) -> None:
    """Seen from behind the beam, shear and moment reaction change sign, the rest does not."""
    end = beam.length
    mirrored = replace(
        beam,
        supports=tuple(
            replace(support, at=end - support.at, face=OTHER[support.face])
            for support in reversed(beam.supports)
        ),
        releases=tuple(replace(one, at=end - one.at) for one in reversed(beam.releases)),
        sections=tuple(replace(one, at=end - one.at) for one in reversed(beam.sections)),
    )
    effects = effects_of(beam)
    images = [replace(one, station=end - one.station, face=OTHER[one.face]) for one in effects]
    for effect, found, image in zip(
        effects, influence_line(beam, effects), influence_line(mirrored, images), strict=True
    ):
        sign = -1 if effect.kind in ("shear", "moment reaction") else 1
        for station in beam.stations:
            assert found.left(station.at) == sign * image.right(end - station.at), effect
            assert found.right(station.at) == sign * image.left(end - station.at), effect


@pytest.mark.parametrize(
    "beam",
    [
        make_beam(10, [(0, "pin"), (5, "roller"), (10, "roller")]),
        make_beam(10, [(0, "pin")]),
        make_beam(10, [(0, "guided"), (10, "guided")]),
        make_beam(10, [(0, "pin"), (2, "roller"), (4, "roller")], [(6, "hinge")]),
    ],
    ids=["too many supports", "too few", "moves down", "turns about the hinge"],
)
def test_refuses_what_is_not_determinate_and_stable(beam: Beam) -> None:
    with pytest.raises(ProgramFault):
        line(beam, "moment", "A")
