"""Laws that hold for every elastic beam; sources: reciprocity (Maxwell, Betti), linearity."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction
from random import Random

import pytest
from beams import effects_of, make_beam, random_beam, random_indeterminate
from making import lines_of, make_effect

from calcpack.elastic.compatibility import force_method, settled
from calcpack.elastic.redundants import candidates
from calcpack.elastic.released import release
from calcpack.model.beam import Beam, Release, Support, SupportKind, Typed
from calcpack.model.request import Effect
from calcpack.statics.influence import value_of
from calcpack.statics.plan import plan_of_solution
from calcpack.statics.stability import classify, is_stable
from calcpack.statics.system import cut_into_bodies

SEEDS = range(12)


def stiff(beam: Beam) -> Beam:
    """The same beam with a stiffness stated, where none was."""
    if beam.stiffness:
        return beam
    stated = make_beam(beam.length, [(0, "fixed")], stiffness=[(0, 5000)]).stiffness
    return replace(beam, stiffness=stated)


def inner(beam: Beam) -> list[str]:
    held = {one.at for one in beam.supports} | {one.at for one in beam.releases}
    return [one.name for one in beam.sections if one.at not in held]


@pytest.mark.parametrize("seed", SEEDS)
def test_deflections_are_reciprocal(seed: int) -> None:
    """The deflection at i under a load at j is that at j under a load at i."""
    beam = stiff(random_indeterminate(Random(seed)))
    places = inner(beam)
    assert len(places) >= 1
    lines = lines_of(beam, [make_effect(beam, "deflection", name) for name in places])
    for one, first in zip(places, lines, strict=True):
        for other, second in zip(places, lines, strict=True):
            there, here = beam.station(other).at, beam.station(one).at
            assert first.left(there) == second.left(here)


@pytest.mark.parametrize("seed", SEEDS)
def test_lines_of_force_need_only_ratios_of_stiffness(seed: int) -> None:
    beam = random_indeterminate(Random(seed))
    if any(one.kind == "spring" for one in beam.supports):
        beam = replace(beam, supports=tuple(_rigid(beam)))
    beam = stiff(beam)
    thrice = tuple(replace(one, EI=3 * one.EI) for one in beam.stiffness)
    stiffer = replace(beam, stiffness=thrice)
    effects = effects_of(beam)
    assert lines_of(beam, effects) == lines_of(stiffer, effects)
    name = inner(beam)[0]
    (soft,) = lines_of(beam, [make_effect(beam, "deflection", name)])
    (hard,) = lines_of(stiffer, [make_effect(stiffer, "deflection", name)])
    assert soft == hard * 3


RIGID: dict[tuple[bool, bool], SupportKind] = {
    (True, True): "fixed",
    (True, False): "roller",
    (False, True): "guided",
}


def _rigid(beam: Beam) -> list[Support]:
    """The supports with every spring made unyielding."""
    zero = Fraction(0)
    return [
        replace(
            one,
            kind=RIGID[one.holds_vertical, one.holds_rotation],
            vertical=zero,
            rotational=zero,
        )
        if one.kind == "spring"
        else one
        for one in beam.supports
    ]


def test_a_hinge_where_the_moment_vanishes_changes_nothing() -> None:
    """Two spans of 10 under a load at 4: the moment is zero at x; a hinge there keeps all."""
    beam = make_beam(20, [(0, "pin"), (10, "roller"), (20, "roller")], sections=[4])
    (moment,) = lines_of(beam, [make_effect(beam, "reaction", "A")])
    reaction = moment.left(Fraction(4))
    zero = Fraction(4) / (1 - reaction)
    assert 4 < zero < 10
    hinged = replace(beam, releases=(Release("h", zero, "hinge", Typed("beam.releases[0].at")),))
    for support in "ABC":
        (rigid,) = lines_of(beam, [make_effect(beam, "reaction", support)])
        (broken,) = lines_of(hinged, [make_effect(hinged, "reaction", support)])
        assert rigid.left(Fraction(4)) == broken.left(Fraction(4))


@pytest.mark.parametrize("seed", SEEDS)
def test_any_admissible_redundants_give_the_same_lines(seed: int) -> None:
    beam = random_indeterminate(Random(seed))
    effects = effects_of(beam)
    by_rule = lines_of(beam, effects)
    degree = classify(beam, cut_into_bodies(beam)).degree
    backwards: list[Effect] = []
    for candidate in reversed(list(candidates(beam))):
        if len(backwards) < degree and is_stable(cut_into_bodies(beam, [*backwards, candidate])):
            backwards.append(candidate)
    assert len(backwards) == degree
    assert lines_of(beam, effects, tuple(backwards)) == by_rule


@pytest.mark.parametrize("seed", SEEDS)
def test_settlements_balance_and_are_reciprocal(seed: int) -> None:
    """The settled forces balance and grow in proportion; and what one support's sinking does to
    another, that one's does to it (Maxwell's reciprocity of support movements)."""
    beam = stiff(random_indeterminate(Random(seed)))
    found = classify(beam, cut_into_bodies(beam))
    redundants = tuple(_first(beam, found.degree))
    system = cut_into_bodies(beam, redundants)
    method = force_method(release(beam, system, plan_of_solution(beam, system)))
    held = [one for one in system.unknowns if one.kind == "reaction"]
    sinking = held[0]
    once = settled(method, {sinking: Fraction(1, 100)})
    twice = settled(method, {sinking: Fraction(2, 100)})
    assert {one: 2 * value for one, value in once.items()} == twice
    assert sum((once[one] for one in held), Fraction(0)) == 0
    for other in held:
        back = settled(method, {other: Fraction(1, 100)})
        assert back[sinking] == once[other]
    section = Effect("moment", inner(beam)[0], beam.station(inner(beam)[0]).at)
    assert value_of(beam, system, twice, section) == 2 * value_of(beam, system, once, section)


@pytest.mark.parametrize("seed", SEEDS)
def test_a_settlement_does_minus_the_work_of_the_reaction(seed: int) -> None:
    """Betti: the moment at a section when support B sinks by s is minus s times the reaction of B
    under a unit kink at the section. The kinked shape is the moment's influence line w, and that
    reaction is the jump of EI w''' at B."""
    rng = Random(seed)
    while True:
        beam = stiff(random_indeterminate(rng))
        rigid = replace(beam, supports=tuple(_rigid(beam)))
        middle = [
            one
            for one in rigid.supports
            if one.kind == "roller" and 0 < one.at < rigid.length
            if rigid.station(one.at).release is None
        ]
        if middle:
            break
    support = middle[0]
    name = inner(rigid)[0]
    (line,) = lines_of(rigid, [make_effect(rigid, "moment", name)])
    third = line.derivative().derivative()
    stiff_after = rigid.stiffness_after(support.at)
    stiff_before = next(one.EI for one in rigid.stiffness if one.start < support.at <= one.end)
    reaction = stiff_after * third.slope(support.at, "right") - stiff_before * third.slope(
        support.at, "left"
    )
    degree = classify(rigid, cut_into_bodies(rigid)).degree
    system = cut_into_bodies(rigid, _first(rigid, degree))
    method = force_method(release(rigid, system, plan_of_solution(rigid, system)))
    down = Fraction(1, 40)
    found = settled(method, {Effect("reaction", support.name, support.at): down})
    section = make_effect(rigid, "moment", name)
    assert value_of(rigid, system, found, section) == -down * reaction


def _first(beam: Beam, degree: int) -> list[Effect]:
    taken: list[Effect] = []
    for candidate in candidates(beam):
        if len(taken) < degree and is_stable(cut_into_bodies(beam, [*taken, candidate])):
            taken.append(candidate)
    return taken


@pytest.mark.parametrize(("down", "span"), [(Fraction(1, 50), 10), (Fraction(3, 100), 7)])
def test_settlement_of_the_middle_of_two_spans(down: Fraction, span: int) -> None:
    """Closed form (three-moment equation): M_B = 3 EI s / l² sagging, R_B = -6 EI s / l³."""
    stiffness = 4000
    beam = make_beam(
        2 * span,
        [(0, "pin"), (span, "roller"), (2 * span, "roller")],
        stiffness=[(0, stiffness)],
    )
    redundants = tuple(_first(beam, 1))
    system = cut_into_bodies(beam, redundants)
    method = force_method(release(beam, system, plan_of_solution(beam, system)))
    middle = Effect("reaction", "B", Fraction(span))
    found = settled(method, {middle: down})
    assert found[Effect("moment", "B", Fraction(span))] == 3 * stiffness * down / span**2
    assert found[middle] == -6 * stiffness * down / Fraction(span) ** 3


@pytest.mark.parametrize("seed", SEEDS)
def test_determinate_beams_take_the_plans_lines(seed: int) -> None:
    """Without redundants the force method adds nothing to the lines of force."""
    beam = random_beam(Random(seed))
    effects = effects_of(beam)
    stiffened = stiff(beam)
    for one, other in zip(lines_of(beam, effects), lines_of(stiffened, effects), strict=True):
        assert one == other
    name = inner(beam)[0]
    assert lines_of(stiffened, [make_effect(stiffened, "deflection", name)])[0].degree == 3


def test_forty_short_segments_in_a_span() -> None:
    """0.5 mm steps of stiffness, all alike, in 30 m: the lines are those of a uniform beam."""
    steps = [(Fraction(0), 900), *((Fraction(10) + Fraction(k, 2000), 900) for k in range(40))]
    plain = make_beam(60, [(0, "pin"), (30, "roller"), (60, "roller")], stiffness=[(0, 900)])
    cut = make_beam(60, [(0, "pin"), (30, "roller"), (60, "roller")], stiffness=steps)
    assert lines_of(cut, [make_effect(cut, "moment", "B")]) == lines_of(
        plain, [make_effect(plain, "moment", "B")]
    )
