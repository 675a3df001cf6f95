"""Influence lines of a determinate beam as displaced shapes: no force is ever solved for."""

from __future__ import annotations

import itertools
from bisect import bisect
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

from calcpack.errors import ProgramFault
from calcpack.exact.linear import Row, solve
from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import Beam
from calcpack.model.request import Effect, EffectKind
from calcpack.second.faces import face_or_inner

Place = tuple[Fraction, int]
"""Station, and rank at it: a release first where the support holds its right face, then the cut
at the left face, the support, the cut at the right face, else the release."""

RELEASE_FIRST, LEFT_CUT, SUPPORT, RIGHT_CUT, RELEASE_LAST = range(-2, 3)

# Height and slope that open at a cut, right of it against left of it.
OPENINGS: dict[EffectKind, tuple[int, int]] = {"shear": (1, 0), "moment": (0, -1)}


@dataclass(frozen=True)
class _Condition:
    """A condition on the rigid parts: unknowns 2k and 2k + 1 are the height at station 0 and the
    slope of part k (of its stretch left of a cut). ``part`` lies before the place, ``is_slope``
    says what the condition is about, ``restraint`` which reaction yields there."""

    row: Row
    place: Place
    part: int
    is_slope: bool
    restraint: EffectKind | None = None


def influence_line(beam: Beam, effects: Sequence[Effect]) -> tuple[Piecewise, ...]:
    """The influence line of each effect by the kinematic statement, exact.

    Displace the beam by one unit at the quantity alone: for a reaction lift the support, for a
    moment reaction turn it anticlockwise, for a shear lift the part right of the cut against the
    left, for a moment let a kink point upwards. Keep every other condition, and bend nothing: then
    only the quantity and the load do work, so the displaced shape, upward +, is the line. One
    linear system, of two unknowns per part between releases, serves all effects.

    Args:
        beam: determinate and stable.
        effects: a face where two values exist.

    Returns:
        Per effect a line of degree 1 at most, positive where the unit downward load makes the
        effect positive; pure numbers for reaction and shear, lengths for the moments. At a jump
        the left value is that of the load just left of it: at the cut of a shear, at a slide.

    Raises:
        ProgramFault: the beam is not determinate and stable.

    Source: H. Müller-Breslau's principle, for rigid-body displacements.
    """
    joints = _release_places(beam)
    conditions = _conditions(beam, joints)
    unknowns = 2 * (len(joints) + 1)
    if len(conditions) != unknowns:
        raise ProgramFault(f"{len(conditions)} conditions for {unknowns} displacements")
    sides: list[Row] = [
        {row: _imposed(effect, one, joints) for row, one in enumerate(conditions)}
        for effect in effects
    ]
    try:
        shapes = solve([one.row for one in conditions], unknowns, sides)
    except ZeroDivisionError:
        raise ProgramFault("the beam moves without bending: it has no influence lines") from None
    return tuple(
        _line(beam, effect, shape, joints) for effect, shape in zip(effects, shapes, strict=True)
    )


def _release_places(beam: Beam) -> list[Place]:
    places = []
    for release in beam.releases:
        support = beam.station(release.at).support
        first = support is not None and support.face == "right"
        places.append((release.at, RELEASE_FIRST if first else RELEASE_LAST))
    return places


def _conditions(beam: Beam, joints: Sequence[Place]) -> list[_Condition]:
    """What supports and releases hold, ordered along the beam."""
    one = Fraction(1)
    found = []
    for support in beam.supports:
        place = (support.at, SUPPORT)
        part = bisect(joints, place)
        height: Row = {2 * part: one, 2 * part + 1: support.at}
        if support.holds_vertical:
            found.append(_Condition(height, place, part, False, "reaction"))
        if support.holds_rotation:
            found.append(_Condition({2 * part + 1: one}, place, part, True, "moment reaction"))
    for part, (place, release) in enumerate(zip(joints, beam.releases, strict=True)):
        before, after = 2 * part, 2 * part + 2
        if release.kind == "hinge":
            row = {before: one, before + 1: release.at, after: -one, after + 1: -release.at}
        else:
            row = {before + 1: one, after + 1: -one}
        found.append(_Condition(row, place, part, release.kind == "slide"))
    return sorted(found, key=lambda condition: condition.place)


def _cut(effect: Effect) -> Place:
    face = face_or_inner(effect.face, effect.station)
    return effect.station, LEFT_CUT if face == "left" else RIGHT_CUT


def _imposed(effect: Effect, condition: _Condition, joints: Sequence[Place]) -> Fraction:
    """The right-hand side of a condition for the unit displacement at an effect."""
    if effect.kind not in OPENINGS:
        yields = condition.restraint == effect.kind and condition.place[0] == effect.station
        return Fraction(yields)
    cut = _cut(effect)
    if condition.part != bisect(joints, cut) or condition.place < cut:
        return Fraction(0)
    height, slope = OPENINGS[effect.kind]
    if condition.is_slope:
        return Fraction(-slope)
    return -height - slope * (condition.place[0] - effect.station)


def _line(
    beam: Beam, effect: Effect, shape: Sequence[Fraction], joints: Sequence[Place]
) -> Piecewise:
    ends = [Fraction(0), *(at for at, _ in joints), beam.length]
    cut_part = bisect(joints, _cut(effect)) if effect.kind in OPENINGS else None
    pieces = []
    for part, (start, end) in enumerate(itertools.pairwise(ends)):
        height, slope = shape[2 * part], shape[2 * part + 1]
        if part == cut_part:
            middle, (step, kink) = effect.station, OPENINGS[effect.kind]
            pieces.append((start, middle, (height + slope * start, slope)))
            pieces.append((middle, end, (height + slope * middle + step, slope + kink)))
        else:
            pieces.append((start, end, (height + slope * start, slope)))
    return Piecewise.from_pieces(pieces)
