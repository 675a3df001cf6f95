"""Every ordinate of random beams against a dense equilibrium solution of its own kind."""

from __future__ import annotations

from fractions import Fraction
from random import Random

import numpy as np
import pytest
from beams import effects_of, make_beam, random_beam
from making import broken, line_of, lines_of, make_effect
from numpy.typing import NDArray

from calcpack.derive.checks import compare_lines
from calcpack.exact.piecewise import Side
from calcpack.model.beam import Beam
from calcpack.model.request import Effect
from calcpack.statics.influence import cut_at, unknown_lines
from calcpack.statics.plan import plan_of_solution
from calcpack.statics.system import cut_into_bodies

SIDES: tuple[Side, ...] = ("left", "right")
Floats = NDArray[np.float64]


def support_forces(beam: Beam, at: float, side: Side) -> tuple[Floats, Floats]:
    """Upward forces and anticlockwise couples of the supports under a unit load at one side of a
    station, from one dense system: two equations a part, and at each release four for the forces
    and moments on its two faces and on the pin between them."""
    supports, releases = beam.supports, beam.releases
    count, cuts = len(supports), len(releases)
    parts, length = cuts + 1, float(beam.length)
    # Unknowns: R and C of every support, then left V, left M, right V, right M of every release.
    matrix = np.zeros((2 * parts + 4 * cuts + 2 * count, 2 * count + 4 * cuts))
    loads = np.zeros(len(matrix))
    rows = iter(range(len(matrix)))
    forces = [next(rows) for _ in range(parts)]
    moments = [next(rows) for _ in range(parts)]  # about the left end of the beam, clockwise +

    part = sum(float(r.at) < at or (float(r.at) == at and side == "right") for r in releases)
    loads[forces[part]], loads[moments[part]] = 1, -at / length
    pins = []
    for i, release in enumerate(releases):
        left_v, left_m, right_v, right_m = range(2 * count + 4 * i, 2 * count + 4 * i + 4)
        x = float(release.at) / length
        matrix[forces[i], left_v], matrix[forces[i + 1], right_v] = -1, 1
        matrix[moments[i], left_v], matrix[moments[i + 1], right_v] = x, -x
        matrix[moments[i], left_m], matrix[moments[i + 1], right_m] = -1, 1
        pin = next(rows)
        pins.append(pin)
        matrix[pin, left_v], matrix[pin, right_v] = 1, -1
        if release.kind == "hinge":
            matrix[next(rows), left_m] = matrix[next(rows), right_m] = 1
        else:
            matrix[next(rows), left_v] = 1
            row = next(rows)
            matrix[row, left_m], matrix[row, right_m] = 1, -1
        next(rows)
    for k, support in enumerate(supports):
        x = float(support.at) / length
        over = [i for i, release in enumerate(releases) if release.at == support.at]
        body = sum(release.at < support.at for release in releases)
        if over and support.face is None and support.holds_vertical:
            matrix[pins[over[0]], k] = 1
        else:
            body += bool(over) and support.face == "right"
            matrix[forces[body], k], matrix[moments[body], k] = 1, -x
            matrix[moments[body], count + k] = -1
        if not support.holds_vertical:
            matrix[next(rows), k] = 1
        if not support.holds_rotation:
            matrix[next(rows), count + k] = 1
    solution, _, rank, _ = np.linalg.lstsq(matrix, loads)
    assert rank == matrix.shape[1]
    assert np.allclose(matrix @ solution, loads, atol=1e-8)
    found: Floats = np.asarray(solution, dtype=np.float64)
    return found[:count], found[count : 2 * count] * length


def by_equilibrium(beam: Beam, effect: Effect, at: Fraction, side: Side) -> float:
    """An effect from all that acts outside on the beam left of the cut."""
    forces, couples = support_forces(beam, float(at), side)
    if effect.kind in ("reaction", "moment reaction"):
        index = [support.at for support in beam.supports].index(effect.station)
        return float(forces[index] if effect.kind == "reaction" else couples[index])
    cut = effect.station
    after = effect.face == "right" or (effect.face is None and cut == 0)
    shear = moment = 0.0
    for support, force, couple in zip(beam.supports, forces, couples, strict=True):
        if support.at < cut or (support.at == cut and after):
            shear += force
            moment += force * float(cut - support.at) - couple
    loaded = at < cut or (at == cut and side == "left" and cut != 0)
    if at == cut == beam.length:
        loaded = True
    if loaded:
        shear -= 1
        moment -= float(cut - at)
    return float(shear if effect.kind == "shear" else moment)


@pytest.mark.parametrize("seed", range(40))
def test_every_ordinate(seed: int) -> None:
    beam = random_beam(Random(seed))
    effects = effects_of(beam)
    system = cut_into_bodies(beam)
    unknowns = unknown_lines(beam, plan_of_solution(beam, system))
    named = [one for one in unknowns if one.kind in ("reaction", "moment reaction")]
    assert {*named} == {one for one in effects if one.kind in ("reaction", "moment reaction")}
    compared = 0
    for effect, line in zip(effects, lines_of(beam, effects), strict=True):
        assert line.breaks[0] == 0
        assert line.breaks[-1] == beam.length
        assert {*line.breaks} <= {station.at for station in beam.stations}
        assert line.degree <= 1
        for station in beam.stations:
            for side in SIDES:
                if station.at in (0, beam.length):
                    side = "right" if station.at == 0 else "left"
                expected = by_equilibrium(beam, effect, station.at, side)
                ours = float(line.value(station.at, side))
                assert ours == pytest.approx(expected, abs=1e-7, rel=1e-7), (effect.label, side)
                compared += 1
    assert compared >= 60


@pytest.mark.parametrize("seed", range(40))
def test_what_a_release_passes(seed: int) -> None:
    """The unknown of a release is the shear or moment just beside it, on the face that its name
    says, or where no support stands at it on either."""
    beam = random_beam(Random(seed))
    lines = unknown_lines(beam, plan_of_solution(beam, cut_into_bodies(beam)))
    passed = [one for one in lines if one.kind in ("shear", "moment")]
    assert len(passed) >= len(beam.releases)
    for effect in passed:
        for station in beam.stations:
            for side in SIDES:
                if 0 < station.at < beam.length:
                    expected = by_equilibrium(beam, effect, station.at, side)
                    ours = float(lines[effect].value(station.at, side))
                    assert ours == pytest.approx(expected, abs=1e-7, rel=1e-7), effect.label


def test_a_support_holds_the_left_face_of_a_hinge() -> None:
    """Fixed 0 to 4 with a hinge at 4 right of the support, roller at 10: what the hinge passes is
    the shear right of the support, 1 under a load just right of it and 0 under one just left."""
    beam = make_beam(10, [(4, "fixed", "left"), (10, "roller")], [(4, "hinge")])
    lines = unknown_lines(beam, plan_of_solution(beam, cut_into_bodies(beam)))
    (hinge,) = (one for one in lines if one.kind == "shear")
    assert lines[hinge] == broken((0, 0), (4, 0), (4, 1), (10, 0))
    assert hinge.face == "right"
    compare_lines(beam, "US", lines)


def test_a_support_holds_the_right_face_of_a_slide() -> None:
    beam = make_beam(10, [(0, "fixed"), (4, "pin", "right")], [(4, "slide")])
    lines = unknown_lines(beam, plan_of_solution(beam, cut_into_bodies(beam)))
    (slide,) = (one for one in lines if one.kind == "moment")
    assert lines[slide] == broken((0, 0), (4, 0), (10, -6))


def test_the_side_with_fewer_forces_is_kept() -> None:
    """On a span with two supports left and one right of the cut, the right side."""
    beam = make_beam(
        30, [(0, "pin"), (10, "roller"), (30, "roller")], [(14, "hinge")], [5, 12, 20, 26]
    )
    system = cut_into_bodies(beam)
    kept = {
        section.name: cut_at(beam, system, make_effect(beam, "moment", section.name))
        for section in beam.sections
    }
    assert [cut.keeps for cut in kept.values()] == ["left", "right", "left", "left"]
    assert [cut.equation.name for cut in kept.values()] == ["A-1", "2-r1", "r1-3", "r1-4"]
    assert [len(cut.equation.actions) for cut in kept.values()] == [2, 2, 2, 2]
    for cut in kept.values():
        (own,) = (one for one in cut.equation.actions if one.unknown == cut.effect)
        assert own.edge == (1 if cut.keeps == "left" else -1)


def test_faces_of_a_support() -> None:
    """The shear differs by the reaction across an interior support, the moment by the couple."""
    beam = make_beam(12, [(2, "pin"), (9, "roller")], sections=[5])
    left, right = (line_of(beam, "shear", "B", face) for face in ("left", "right"))
    assert right - left == line_of(beam, "reaction", "B")
    held = make_beam(12, [(5, "fixed")])
    left, right = (line_of(held, "moment", "A", face) for face in ("left", "right"))
    assert left - right == line_of(held, "moment reaction", "A")
    assert left == broken((0, -5), (5, 0), (12, 0))
    assert right == broken((0, 0), (5, 0), (12, -7))
