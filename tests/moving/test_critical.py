"""The governing position of random trains against a dense sweep, and the value found there put in
again by an evaluation of its own, in floats."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction
from functools import cache
from random import Random
from typing import Literal

import numpy as np
import pytest
from beams import effects_of, random_beam
from floats import axles_effect, stations_of
from loads import governing_of, offsets_of, random_train
from making import lines_of

from calcpack.exact.piecewise import Piecewise
from calcpack.model.loads import Case, MovingLoad
from calcpack.model.request import Effect
from calcpack.moving.governing import Candidate, Governing
from calcpack.moving.placement import axle_shares
from calcpack.second.stiffness import Ordinates, ordinates
from calcpack.second.sweep import swept_case

SENSES: tuple[Literal[1, -1], ...] = (1, -1)
SEEDS = range(30)
POSITIONS = 4001
EFFECTS = 12
"""Effects a beam, drawn from all: enough of every kind in half of the time."""

Found = tuple[Effect, Piecewise, Ordinates, MovingLoad, Governing]


@cache
def found(seed: int) -> tuple[Found, ...]:
    rng = Random(seed)
    beam, load = random_beam(rng), random_train(rng)
    effects = effects_of(beam)
    effects = tuple(rng.sample(effects, min(EFFECTS, len(effects))))
    by_stiffness = ordinates(beam, effects)
    return tuple(
        (effect, line, broken, load, governing_of(line, load, sense))
        for effect, line, broken in zip(effects, lines_of(beam, effects), by_stiffness, strict=True)
        for sense in SENSES
    )


def every(seeds: range) -> Iterator[Found]:
    for seed in seeds:
        yield from found(seed)


def share_of(load: MovingLoad) -> Fraction:
    (share,) = load.shares
    return share.value.value


def uniform_of(case: Case) -> Fraction:
    return case.uniform.value if case.uniform else Fraction(0)


@pytest.mark.parametrize("seed", SEEDS)
def test_no_position_of_a_dense_sweep_is_worse(seed: int) -> None:
    for effect, line, _, load, best in found(seed):
        (case,) = load.cases
        if not case.trains:
            assert best.axles_effect == 0
            continue
        offsets = np.array([float(one) for one in offsets_of(load)])
        leads = np.linspace(-offsets[-1] - 1, float(line.breaks[-1]) + offsets[-1] + 1, POSITIONS)
        for heading in case.headings:
            at = leads[:, None] + (-offsets if heading == "right" else offsets)
            reached = float((best.sense * axles_effect(line, case, at, best.sense)).max())
            ours = best.sense * float(best.axles_effect)
            assert reached <= ours + 1e-9 * (1 + ours), (effect.label, heading)


def test_the_governing_value_is_attained_where_it_is_said_to_be() -> None:
    """The train put there, a hair to the side that is named, has the effect that is told: by the
    dense sweep no more is possible, and by this no less."""
    chosen = at_an_end = beside_a_jump = 0
    for effect, line, _, load, best in every(SEEDS):
        if best.position is None:
            assert best.axles_effect == 0
            continue
        at, length = stations_of(line, best), float(line.breaks[-1])
        there = float(axles_effect(line, load.cases[0], at, best.sense))
        assert there == pytest.approx(float(best.axles_effect), rel=1e-6, abs=1e-6), effect.label
        chosen += 1
        near = np.abs(np.subtract.outer(at, [0, length])).min(initial=length)
        at_an_end += near < 2e-9 * length
        beside_a_jump += any(
            line.left(stop) != line.right(stop) and np.isclose(at, float(stop)).any()
            for stop in line.breaks[1:-1]
        )
    assert chosen > 150
    assert at_an_end > 20
    assert beside_a_jump > 20


def test_the_second_sweep_brackets_every_value() -> None:
    compared = 0
    for effect, _, broken, load, best in every(SEEDS):
        value, short = swept_case(broken, load.cases[0], best.sense)
        share = float(share_of(load))
        excess = best.sense * (value * share - float(best.value))
        rounding = 1e-9 * (1 + abs(float(best.value)))
        assert -short * share - rounding <= excess <= rounding, effect.label
        compared += value != 0
    assert compared > 150


def test_the_value_from_its_parts() -> None:
    """(axles x (1 + allowance) + uniform) x distribution, parts and shares summed again."""
    uniform = neglected = off = 0
    for _, line, _, load, best in every(SEEDS):
        (case,) = load.cases
        shares = [one for one in best.axles if one.standing == "counts"]
        axles = sum((one.weight * one.ordinate for one in shares), Fraction(0))
        assert axles == best.axles_effect
        area = sum((line.integral(*run) for run in best.loaded), Fraction(0))
        assert all(best.sense * line.integral(*run) > 0 for run in best.loaded)
        assert area == best.area
        assert best.uniform_effect == uniform_of(case) * area
        allowance = case.allowance("axles")
        whole = axles * (1 + (allowance.value if allowance else 0)) + uniform_of(case) * area
        assert best.value == whole * share_of(load)
        assert best.share == share_of(load)
        assert best.static == axles + uniform_of(case) * area
        assert best.trailing_effect == 0
        assert best.sense * best.value >= 0
        uniform += best.uniform_effect != 0
        neglected += any(one.standing == "neglected" for one in best.axles)
        off += any(one.standing == "off the beam" for one in best.axles)
    assert uniform > 50
    assert neglected > 3
    assert off > 20


def test_ties_and_near_candidates_are_what_they_say() -> None:
    """Tied positions reach the same value, near ones less, in falling order, each elsewhere."""
    ties = ranges = near = 0
    for _, line, _, load, best in every(SEEDS):
        (case,) = load.cases
        if best.position is None:
            assert not any((best.ties, best.near, best.axles))
            continue
        ends = [one for tie in best.ties for one in dict.fromkeys((tie.first, tie.last))]
        for one in ends:
            assert value_at(line, load, one, best) == one.value == best.value
        for one in best.near:
            assert value_at(line, load, one, best) == one.value
            (group,) = one.position.groups
            assert group.anchor is not None
            assert one.position.stations[group.anchor] == group.mark
        values = [best.sense * one.value for one in best.near]
        assert values == sorted(values, reverse=True)
        assert all(one < best.sense * best.value for one in values)
        places = [
            (one.position.heading, one.position.lead_at)
            for one in (*ends, *best.near)
            if one.position.stations != best.position.stations
            or one.position.heading != best.position.heading
        ]
        assert len({*places}) == len(places) < best.looked_at
        marks = len(line.breaks) + len(line.zeros()) * (case.relieving == "neglect")
        assert best.looked_at <= len(case.headings) * len(case.axles) * marks
        ties += len(best.ties)
        ranges += sum(tie.first is not tie.last for tie in best.ties)
        near += len(best.near)
    assert ties > 60
    assert ranges > 20
    assert near > 400


def value_at(line: Piecewise, load: MovingLoad, one: Candidate, best: Governing) -> Fraction:
    """The whole case at a candidate, its axles summed again."""
    offsets = [abs(at - one.position.lead_at) for at in one.position.stations]
    assert tuple(offsets) == offsets_of(load)
    shares = axle_shares(line, one.case, one.position, best.sense)
    effect = sum((share.effect for share in shares), Fraction(0))
    return (effect * one.case.weighs("axles") + best.uniform_effect) * share_of(load)


def test_rates_are_the_slopes_on_either_side() -> None:
    """Difference quotients a little away from the position, on either side."""
    steep = 0
    for effect, line, _, load, best in every(SEEDS):
        if best.position is None:
            assert best.rates is None
            continue
        near = 1e-6 * float(line.breaks[-1])
        moved = near * np.array([-2.0, -1.0, 1.0, 2.0])
        at = np.array([float(one) for one in best.position.stations]) + moved[:, None]
        effects = axles_effect(line, load.cases[0], at, best.sense)
        slopes = (effects[1] - effects[0]) / near, (effects[3] - effects[2]) / near
        assert best.rates is not None
        assert [*map(float, best.rates)] == pytest.approx(slopes, abs=1e-4, rel=1e-4), effect.label
        steep += any(best.rates)
    assert steep > 100
