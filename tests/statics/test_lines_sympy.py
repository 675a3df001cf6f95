"""Influence lines against sympy's beams: reactions, shear and moment under single point loads."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import pytest
from beams import make_beam
from making import lines_of, make_effect
from sympy import Rational  # type: ignore[import-untyped]
from sympy.physics.continuum_mechanics import beam as sympy_beam  # type: ignore[import-untyped]

from calcpack.model.beam import Beam
from calcpack.model.request import Effect

BEAMS = {
    "overhangs": make_beam(20, [(3, "pin"), (15, "roller")], sections=[1, 10, 18]),
    "cantilever": make_beam(9, [(0, "fixed")], sections=[4]),
    "hinge": make_beam(20, [(0, "fixed"), (15, "pin")], [(8, "hinge")], [4, 12]),
    "suspended span": make_beam(
        30, [(0, "pin"), (8, "pin"), (20, "pin"), (30, "pin")], [(11, "hinge"), (17, "hinge")], [14]
    ),
    "slide": make_beam(18, [(0, "fixed"), (15, "pin")], [(8, "slide")], [5]),
}
LOADS = {
    "overhangs": (0, 5, 12, 20),
    "cantilever": (2, 7),
    "hinge": (3, 10, 18),
    "suspended span": (5, 9, 13, 24),
    "slide": (2, 11, 17),
}


def under_load(beam: Beam, at: int) -> tuple[dict[str, Any], Any]:
    """Sympy's beam under a unit load of +1, upward to it. Turned upside down its shear, moment and
    couples have our signs, and its reactions the opposite one."""
    theirs = sympy_beam.Beam(beam.length, 1, 1)
    unknowns = {}
    for release in beam.releases:
        apply = theirs.apply_rotation_hinge
        if release.kind == "slide":
            apply = theirs.apply_sliding_hinge
        apply(Rational(release.at))
    for support in beam.supports:
        found = theirs.apply_support(Rational(support.at), support.kind)
        force, couple = found if support.kind == "fixed" else (found, None)
        unknowns[f"reaction {support.name}"] = force
        if couple is not None:
            unknowns[f"moment reaction {support.name}"] = couple
    theirs.apply_load(1, at, -1)
    theirs.solve_for_reaction_loads(*unknowns.values())
    return {name: theirs.reaction_loads[one] for name, one in unknowns.items()}, theirs


def value(beam: Beam, effect: Effect, reactions: dict[str, Any], theirs: Any) -> Fraction:
    if effect.kind == "shear":
        found = theirs.shear_force().subs(theirs.variable, Rational(effect.station))
    elif effect.kind == "moment":
        found = theirs.bending_moment().subs(theirs.variable, Rational(effect.station))
    elif effect.kind == "reaction":
        found = -reactions[f"reaction {effect.at}"]
    else:
        found = reactions[f"moment reaction {effect.at}"]
    return Fraction(int(found.p), int(found.q))


@pytest.mark.parametrize(("name", "at"), [(name, at) for name in BEAMS for at in LOADS[name]])
def test_under_a_point_load(name: str, at: int) -> None:
    beam = BEAMS[name]
    effects = [make_effect(beam, "reaction", one.name) for one in beam.supports]
    effects += [
        make_effect(beam, "moment reaction", one.name)
        for one in beam.supports
        if one.holds_rotation
    ]
    for section in beam.sections:
        effects += [make_effect(beam, kind, section.name) for kind in ("shear", "moment")]
    reactions, theirs = under_load(beam, at)
    assert all(station.at != at for station in beam.stations if 0 < station.at < beam.length)
    for effect, line in zip(effects, lines_of(beam, effects), strict=True):
        ordinate = line.value(Fraction(at), "left")
        assert ordinate == value(beam, effect, reactions, theirs), effect.label
