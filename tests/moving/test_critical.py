"""The governing position of random trains against a dense sweep, and the value found there put in
again by an evaluation of its own, in floats."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction
from functools import cache
from random import Random
from typing import Any, Literal

import numpy as np
import pytest
from beams import effects_of, random_beam, random_train
from making import lines_of
from numpy.typing import NDArray

from calcpack.exact.piecewise import Piecewise
from calcpack.model.loads import Heading, MovingLoad
from calcpack.model.request import Effect
from calcpack.moving.critical import Governing, governing
from calcpack.moving.placement import Position, axle_shares, axle_stations
from calcpack.second.stiffness import Ordinates, ordinates
from calcpack.second.sweep import swept

Floats = NDArray[np.float64]
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
        (effect, line, broken, load, governing(line, load, sense))
        for effect, line, broken in zip(effects, lines_of(beam, effects), by_stiffness, strict=True)
        for sense in SENSES
    )


def every(seeds: range) -> Iterator[Found]:
    for seed in seeds:
        yield from found(seed)


def heights(line: Piecewise, at: Floats) -> Floats:
    """The line at many places, 0 off the beam; at a jump whichever side floats fall on."""
    starts = np.array(line.breaks, dtype=float)
    index = np.clip(np.searchsorted(starts, at, side="right") - 1, 0, len(line.pieces) - 1)
    values = np.array([float(piece[0]) for piece in line.pieces])
    slopes = np.array([float(piece[1]) if len(piece) > 1 else 0.0 for piece in line.pieces])
    on_beam = (starts[0] <= at) & (at <= starts[-1])
    return np.where(on_beam, values[index] + slopes[index] * (at - starts[index]), 0.0)


def axles_effect(
    line: Piecewise, load: MovingLoad, heading: Heading, leads: Floats, sense: int
) -> Floats:
    offsets = np.array([float(offset) for offset in load.offsets])
    weights = np.array([float(axle.weight) for axle in load.axles])
    at = leads[:, None] + (-offsets if heading == "right" else offsets)
    under = heights(line, at)
    if load.relieving == "neglect":
        under = sense * np.maximum(sense * under, 0)
    return np.asarray(under @ weights, dtype=np.float64)


@pytest.mark.parametrize("seed", SEEDS)
def test_no_position_of_a_dense_sweep_is_worse(seed: int) -> None:
    for effect, line, _, load, best in found(seed):
        reach = float(load.offsets[-1]) if load.axles else 0.0
        leads = np.linspace(-reach - 1, float(line.breaks[-1]) + reach + 1, POSITIONS)
        for heading in load.headings:
            reached = float(
                (best.sense * axles_effect(line, load, heading, leads, best.sense)).max()
            )
            ours = best.sense * float(best.axles)
            assert reached <= ours + 1e-9 * (1 + ours), (effect.label, heading)


def test_the_governing_value_is_attained_where_it_is_said_to_be() -> None:
    """The train put there, a hair to the side that is named, has the effect that is told: by the
    dense sweep no more is possible, and by this no less."""
    chosen = at_an_end = beside_a_jump = 0
    for effect, line, _, load, best in every(SEEDS):
        if best.chosen is None:
            assert best.axles == 0
            continue
        position = best.chosen.position
        length = float(line.breaks[-1])
        hair = 1e-9 * length * (1 if position.side == "right" else -1)
        offsets = np.array([float(offset) for offset in load.offsets])
        at = float(position.lead_at) + offsets * (-1 if position.heading == "right" else 1)
        on_end = (np.abs(at) < 1e-12 * length) | (np.abs(at - length) < 1e-12 * length)
        if position.ends_count:  # an axle at the very end counts: put it a hair inside
            at = np.where(on_end, np.clip(at, 1e-9 * length, (1 - 1e-9) * length), at + hair)
        else:
            at = at + hair
        under = heights(line, at)
        if load.relieving == "neglect":
            under = best.sense * np.maximum(best.sense * under, 0)
        weights = np.array([float(axle.weight) for axle in load.axles])
        there = float(under @ weights)
        assert there == pytest.approx(float(best.axles), rel=1e-6, abs=1e-6), effect.label
        chosen += 1
        at_an_end += bool(on_end.any())
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
        value, short = swept(broken, load, best.sense)
        excess = best.sense * (value - float(best.value))
        rounding = 1e-9 * (1 + abs(float(best.value)))
        assert -short - rounding <= excess <= rounding, effect.label
        compared += value != 0
    assert compared > 150


def test_the_value_from_its_parts() -> None:
    """(axles x (1 + allowance) + uniform) x distribution, parts and shares summed again."""
    uniform = neglected = off = 0
    for _, line, _, load, best in every(SEEDS):
        shares = [one for one in best.shares if one.standing == "counts"]
        axles = sum(one.weight * one.ordinate for one in shares)
        assert axles == best.axles
        area = sum((best.sense * line.integral(*run) for run in best.loaded), Fraction(0))
        assert all(best.sense * line.integral(*run) > 0 for run in best.loaded)
        assert area == best.sense * best.area
        assert best.uniform == load.uniform * best.area
        whole = axles * (1 + load.allowance) + load.uniform * best.area
        assert best.value == whole * load.distribution
        assert best.static == best.axles + best.uniform
        assert best.sense * best.value >= 0
        uniform += best.uniform != 0
        neglected += any(one.standing == "neglected" for one in best.shares)
        off += any(one.standing == "off the beam" for one in best.shares)
    assert uniform > 50
    assert neglected > 5
    assert off > 20


def test_ties_and_near_candidates_are_what_they_say() -> None:
    """Tied positions reach the same value, near ones less, in falling order, each elsewhere."""
    ties = near = 0
    for _, line, _, load, best in every(SEEDS):
        if best.chosen is None:
            assert not any((best.ties, best.near, best.shares))
            continue
        for position in best.ties:
            assert effect_at(line, load, position, best.sense) == best.axles
        for one in best.near:
            assert effect_at(line, load, one.position, best.sense) == one.axles_effect
            at = axle_stations(load, one.position.heading, one.position.lead_at)
            assert at[one.axle] == one.breakpoint
        effects = [best.sense * one.axles_effect for one in best.near]
        assert effects == sorted(effects, reverse=True)
        assert all(one < best.sense * best.axles for one in effects)
        positions = [best.chosen.position, *best.ties, *(one.position for one in best.near)]
        places = [(one.heading, one.lead_at) for one in positions]
        assert len({*places}) == len(places) <= best.candidates
        marks = len(line.breaks) + len(line.zeros()) * (load.relieving == "neglect")
        assert best.candidates <= len(load.headings) * len(load.axles) * marks
        ties += len(best.ties)
        near += len(best.near)
    assert ties > 100
    assert near > 500


def effect_at(line: Piecewise, load: MovingLoad, position: Position, sense: Literal[1, -1]) -> Any:
    return sum(share.effect for share in axle_shares(line, load, position, sense))


def test_rates_are_the_slopes_on_either_side() -> None:
    """Difference quotients a little away from the position, on either side."""
    steep = 0
    for effect, line, _, load, best in every(SEEDS):
        if best.chosen is None:
            assert best.rates is None
            continue
        position, near = best.chosen.position, 1e-6 * float(line.breaks[-1])
        at = float(position.lead_at) + near * np.array([-2.0, -1.0, 1.0, 2.0])
        effects = axles_effect(line, load, position.heading, at, best.sense)
        slopes = (effects[1] - effects[0]) / near, (effects[3] - effects[2]) / near
        assert best.rates is not None
        assert [*map(float, best.rates)] == pytest.approx(slopes, abs=1e-4, rel=1e-4), effect.label
        steep += any(best.rates)
    assert steep > 100
