"""Influence lines as shapes of the beam: no load is moved along it, all in exact fractions."""

from __future__ import annotations

import itertools
from bisect import bisect
from collections.abc import Sequence
from fractions import Fraction
from math import gcd
from typing import Literal, NamedTuple

from calcpack.errors import ProgramFault
from calcpack.exact.linear import Row, solve
from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import Beam
from calcpack.model.request import Effect, EffectKind
from calcpack.second.faces import face_or_inner
from calcpack.second.shapes import (
    COUPLE,
    FORCE,
    HEIGHT,
    SLOPE,
    UNITS,
    Pair,
    Stretch,
    Weights,
    added,
    carried,
    cubics,
    weighed,
    whole_numbers,
)

PARTNER = (FORCE, COUPLE, SLOPE, HEIGHT)
"""What a joint holds where another part of the state may jump: where the height jumps, as at a
slide, there is no force; where the force jumps, as at a support, the height is held."""

JUMPS: dict[EffectKind, tuple[int, int]] = {
    "shear": (HEIGHT, 1),
    "moment": (SLOPE, -1),
    "deflection": (FORCE, 1),
    "rotation": (COUPLE, 1),
}
"""What is put on the beam at a cut: the part of the state, and its value right less left."""

LEFT_CUT, RELEASE_FIRST, SUPPORT, RELEASE_LAST, STEP, RIGHT_CUT = range(6)
"""The order at one station; a release comes first where the support holds its right face."""

Place = tuple[Fraction, int]


class _Joint(NamedTuple):
    """Where the part ``jump`` of the state may jump; None at a step of EI.

    The partner there plus ``gives`` times the jump is 0, or 1 for the effect ``restraint``.
    """

    place: Place
    jump: int | None = None
    gives: Fraction = Fraction(0)
    restraint: EffectKind | None = None


class _Family(NamedTuple):
    """Per stretch, two shapes whose sums are all that meet every condition beyond one end of it.

    Attributes:
        pairs: the states of the two at that end.
        ratios: per joint; a of the first and b of the second go on beyond it as b times these of
            the two there, or as a and b where there are none.
    """

    pairs: list[Pair]
    ratios: list[Weights | None]


def influence_line(beam: Beam, effects: Sequence[Effect]) -> tuple[Piecewise, ...]:
    """The influence line of each effect by the kinematic statement, exact.

    Displace the beam by one unit at the quantity alone: for a reaction lift the support, for a
    moment reaction turn it anticlockwise, for a shear lift the part right of the cut against the
    left, for a moment let a kink point upwards. Keep every other condition: then only the quantity
    and the load do work, so the displaced shape, upward +, is the line. A determinate beam moves
    in rigid parts, any other bends. For a deflection or a rotation, put a unit force or couple on
    the beam instead; the shape, downward +, is the line.

    The shapes that meet every condition left of a cut are the sums of two, and so are those that
    meet every condition right of it. Both pairs are carried inward from the ends of the beam, and
    four equations at the cut tell how much of each there is.

    Args:
        beam: stable; EI = 1 where its stiffness is unknown.
        effects: a face where two values exist.

    Returns:
        Per effect a line of degree 3 at most (1 for the forces of a determinate beam), positive
        where the unit downward load makes the effect positive; pure numbers for reaction and
        shear, lengths for the moments, a length and rad per unit force for deflection and
        rotation. At a jump the left value is that of the load just left of it: at the cut of a
        shear, at a slide.

    Raises:
        ProgramFault: the beam is not stable.

    Source: H. Müller-Breslau's principle; reciprocity after J. C. Maxwell and E. Betti; the state
    is carried as in the method of transfer matrices.
    """
    try:
        shapes = _Shapes(beam)
        return tuple(shapes.line(effect) for effect in effects)
    except ZeroDivisionError:
        raise ProgramFault("the beam moves without bending: it has no influence lines") from None


class _Shapes:
    """The beam between its joints, and its shapes from both ends."""

    def __init__(self, beam: Beam) -> None:
        self.joints = _joints(beam)
        self.places = [joint.place for joint in self.joints]
        stops = [Fraction(0), *(at for at, _ in self.places), beam.length]
        self.stretches = [
            Stretch(start, end, 1 / beam.stiffness_after(start))
            for start, end in itertools.pairwise(stops)
        ]
        self.left = _family(self.stretches, self.joints, 1)
        pairs, ratios = _family(self.stretches[::-1], self.joints[::-1], -1)
        self.right = _Family(pairs[::-1], ratios[::-1])
        self.from_left = list(map(cubics, self.left.pairs, self.stretches))
        self.from_right = [
            cubics(carried(pair, one, -one.length), one)
            for pair, one in zip(self.right.pairs, self.stretches, strict=True)
        ]

    def line(self, effect: Effect) -> Piecewise:
        """The shape for a unit displacement, force or couple at an effect."""
        at, moved = effect.station, None
        if effect.kind in JUMPS:
            before = after = bisect(self.places, _cut(effect))
        else:
            restraints = [(joint.restraint, joint.place[0]) for joint in self.joints]
            before = restraints.index((effect.kind, at))
            moved, after = self.joints[before], before + 1
        first, last = self.stretches[before], self.stretches[after]
        left = carried(self.left.pairs[before], first, at - first.start)
        right = carried(self.right.pairs[after], last, at - last.end)
        (a, b, c, d), bottom = whole_numbers(_met(effect, left, right, moved))
        ratios = self.left.ratios[:before][::-1], self.right.ratios[after:]
        on_left = [*itertools.accumulate(ratios[0], _beyond, initial=(a, b))][::-1]
        on_right = itertools.accumulate(ratios[1], _beyond, initial=(c, d))
        shapes_right = [cubics(right, last), *self.from_right[after + 1 :]]
        parts = [
            (one.start, min(one.end, at), weighed(shapes, weights, bottom))
            for one, shapes, weights in zip(self.stretches, self.from_left, on_left, strict=False)
        ]
        parts += [
            (max(one.start, at), one.end, weighed(shapes, weights, bottom))
            for one, shapes, weights in zip(
                self.stretches[after:], shapes_right, on_right, strict=True
            )
        ]
        return Piecewise.from_pieces(parts)


def _joints(beam: Beam) -> list[_Joint]:
    """Supports, releases and steps of EI in order along the beam."""
    joints = [_Joint((stretch.start, STEP)) for stretch in beam.stiffness]
    for support in beam.supports:
        place = support.at, SUPPORT
        if support.holds_vertical:
            joints.append(_Joint(place, FORCE, _gives(support.vertical), "reaction"))
        if support.holds_rotation:
            joints.append(_Joint(place, COUPLE, _gives(support.rotational), "moment reaction"))
    for release in beam.releases:
        support_there = beam.station(release.at).support
        first = support_there is not None and support_there.face == "right"
        place = release.at, RELEASE_FIRST if first else RELEASE_LAST
        joints.append(_Joint(place, SLOPE if release.kind == "hinge" else HEIGHT))
    return sorted(joints, key=lambda joint: joint.place)


def _gives(stiffness: Fraction) -> Fraction:
    """What a support gives under a unit force: nothing where it is no spring."""
    return 1 / stiffness if stiffness else Fraction(0)


def _cut(effect: Effect) -> Place:
    face = face_or_inner(effect.face, effect.station)
    return effect.station, LEFT_CUT if face == "left" else RIGHT_CUT


def _family(
    stretches: Sequence[Stretch], joints: Sequence[_Joint], onward: Literal[1, -1]
) -> _Family:
    """Walk from a free end of the beam, rightward or leftward, past every joint."""
    pair = UNITS[HEIGHT], UNITS[SLOPE]
    pairs, ratios = [pair], []
    for stretch, joint in zip(stretches, joints, strict=False):
        pair, ratio = _past(joint, carried(pair, stretch, onward * stretch.length), onward)
        pairs.append(pair)
        ratios.append(ratio)
    return _Family(pairs, ratios)


def _past(joint: _Joint, pair: Pair, onward: int) -> tuple[Pair, Weights | None]:
    """The pair past a joint: the jump is what the partner asks for, or free if that is zero."""
    if joint.jump is None:
        return pair, None
    jump, (one, two) = UNITS[joint.jump], pair
    first, second = (state[PARTNER[joint.jump]] for state in pair)
    if joint.gives:
        share = -onward / joint.gives
        return (added(1, one, share * first, jump), added(1, two, share * second, jump)), None
    (a, b), _ = whole_numbers((second, -first))
    divisor = gcd(a, b)  # 0 where the jump alone meets every condition: the beam is not stable
    a, b = a // divisor, b // divisor
    return (jump, added(a, one, b, two)), (a, b)


def _beyond(weights: Weights, ratio: Weights | None) -> Weights:
    return weights if ratio is None else (weights[1] * ratio[0], weights[1] * ratio[1])


def _met(effect: Effect, left: Pair, right: Pair, moved: _Joint | None) -> list[Fraction]:
    """How much there is of the two left shapes and of the two right ones."""
    rows: list[Row] = [
        {0: -left[0][part], 1: -left[1][part], 2: right[0][part], 3: right[1][part]}
        for part in range(4)
    ]
    if moved is None or moved.jump is None:
        part, value = JUMPS[effect.kind]
        return solve(rows, 4, [{part: Fraction(value)}])[0]
    row = {column: moved.gives * value for column, value in rows[moved.jump].items()}
    for column, state in enumerate(left):
        row[column] += state[PARTNER[moved.jump]]
    rows[moved.jump] = row
    return solve(rows, 4, [{moved.jump: Fraction(1)}])[0]
