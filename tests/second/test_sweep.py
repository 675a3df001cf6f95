"""The sweep against hand sums and against the exact extreme over every event."""

from __future__ import annotations

import itertools
from dataclasses import replace
from fractions import Fraction
from random import Random
from typing import Literal

import numpy as np
import pytest
from beams import (
    effects_of,
    make_beam,
    movements_of,
    random_beam,
    random_indeterminate,
    random_train,
)
from numpy.polynomial import Polynomial

from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.beam import Beam
from calcpack.model.loads import Axle, Heading, MovingLoad, Relieving
from calcpack.model.request import Effect, EffectKind
from calcpack.second.kinematic import influence_line
from calcpack.second.stiffness import Ordinates, ordinates
from calcpack.second.sweep import _bulge, swept

SENSES: tuple[Literal[1, -1], ...] = (1, -1)
SPAN = make_beam(10, [(0, "pin"), (10, "roller")], sections=[5])


def train(
    *axles: tuple[int, int],
    uniform: int = 0,
    headings: tuple[Heading, ...] = ("right", "left"),
    relieving: Relieving = "count",
    allowance: str = "0",
    distribution: str = "1",
) -> MovingLoad:
    return MovingLoad(
        "Train",
        tuple(Axle(Fraction(weight), Fraction(spacing)) for weight, spacing in axles),
        Fraction(uniform),
        headings,
        relieving,
        Fraction(allowance),
        Fraction(distribution),
        "moving[0]",
    )


def line_of(beam: Beam, kind: EffectKind, at: str) -> Ordinates:
    return ordinates(beam, [Effect(kind, at, beam.station(at).at)])[0]


def test_axles_by_hand() -> None:
    """12 on the peak 10/4, 6 three behind it at (5 - 3) / 2."""
    found, short = swept(line_of(SPAN, "moment", "1"), train((12, 0), (6, 3)), 1)
    assert found <= 12 * 2.5 + 6 * 1 <= found + short
    assert short < 0.1


def test_heading_matters() -> None:
    """Over a drop from 1 to 0 at the right end the heavy axle must lead."""
    reaction = line_of(SPAN, "reaction", "B")
    right, _ = swept(reaction, train((10, 0), (2, 4), headings=("right",)), 1)
    left, _ = swept(reaction, train((10, 0), (2, 4), headings=("left",)), 1)
    both, _ = swept(reaction, train((10, 0), (2, 4)), 1)
    assert right == pytest.approx(10 + 2 * 0.6, rel=1e-3)
    assert left == pytest.approx(max(10.0, 2 + 10 * 0.6), rel=1e-3)
    assert both == right


def test_uniform_load_by_hand() -> None:
    """w L² / 8, and the shear at midspan w L / 8 either way; no allowance on it."""
    load = train(uniform=3, allowance="0.33", distribution="0.5")
    assert swept(line_of(SPAN, "moment", "1"), load, 1)[0] == pytest.approx(0.5 * 37.5)
    for sense in SENSES:
        value = sense * 0.5 * 3 * 10 / 8
        found, short = swept(line_of(SPAN, "shear", "1"), load, sense)
        assert found == pytest.approx(value)
        assert short == 0


def test_uniform_load_where_a_stretch_changes_sign() -> None:
    beam = make_beam(12, [(0, "pin"), (8, "roller")], [], [])
    assert swept(line_of(beam, "reaction", "A"), train(uniform=1), 1)[0] == pytest.approx(4)
    assert swept(line_of(beam, "reaction", "A"), train(uniform=1), -1)[0] == pytest.approx(-1)


def test_the_load_may_stay_away() -> None:
    found, short = swept(line_of(SPAN, "moment", "1"), train((5, 0), (5, 2)), -1)
    assert found == 0
    assert short == pytest.approx(0, abs=1e-12)


def test_relieving_axles() -> None:
    """Overhangs of 4 on both sides of a span of 10: with one axle in midspan the other, 8 away, is
    on an overhang and relieves by 15 of 25; without it the train must wait until it is off."""
    beam = make_beam(18, [(4, "pin"), (14, "roller")], sections=[9])
    moment = line_of(beam, "moment", "1")
    counted, _ = swept(moment, train((10, 0), (10, 8)), 1)
    neglected, _ = swept(moment, train((10, 0), (10, 8), relieving="neglect"), 1)
    assert counted == pytest.approx(20, rel=5e-3)
    assert neglected == pytest.approx(25, rel=5e-3)


def test_stations_too_close_for_doubles() -> None:
    """Sections a billionth from the ends of a beam of 10^12: its shear is 1 there."""
    beam = make_beam(
        10**12, [(0, "pin"), (10**12, "roller")], sections=["1e-9", 10**12 - Fraction(1, 10**9)]
    )
    load = train((7, 0), uniform=2)
    for name, sense in zip("12", SENSES, strict=True):
        found, short = swept(line_of(beam, "shear", name), load, sense)
        assert found == pytest.approx(sense * (7 + 10**12), rel=1e-3)
        assert 0 <= short < 0.01


def exact_extreme(line: Piecewise, load: MovingLoad, sense: int) -> Fraction:
    """The extreme in fractions, over every position at which an axle meets a breakpoint or an end:
    all axles on one side of their jumps, those at an end counted (there) or not (just beyond)."""
    start, end = line.breaks[0], line.breaks[-1]
    sides: tuple[Side, ...] = ("left", "right")
    best = Fraction(0)
    for heading, stop, met in itertools.product(load.headings, line.breaks, load.offsets):
        direction = 1 if heading == "right" else -1
        places = [stop + direction * (met - offset) for offset in load.offsets]
        for side, closed in itertools.product(sides, (True, False)):
            total = Fraction(0)
            for axle, at in zip(load.axles, places, strict=True):
                beyond = (at, side) in ((start, "left"), (end, "right")) and not closed
                if start <= at <= end and not beyond:
                    part = sense * axle.weight * line.value(at, side)
                    total += max(part, Fraction(0)) if load.relieving == "neglect" else part
            best = max(best, total)
    positive, negative = line.areas()
    area = positive if sense > 0 else -negative
    return sense * load.distribution * ((1 + load.allowance) * best + load.uniform * area)


@pytest.mark.parametrize("seed", range(12))
def test_brackets_the_exact_extreme(seed: int) -> None:
    rng = Random(seed)
    beam, load = random_beam(rng), random_train(rng)
    effects = effects_of(beam)
    loaded = 0
    for line, broken in zip(influence_line(beam, effects), ordinates(beam, effects), strict=True):
        for sense in SENSES:
            extreme = abs(float(exact_extreme(line, load, sense)))
            found, short = swept(broken, load, sense)
            rounding = 1e-12 * (1 + extreme)
            assert found * sense >= 0
            assert abs(found) <= extreme + rounding
            assert extreme <= abs(found) + short + rounding
            loaded += extreme > 0
    assert loaded > 4


def test_shortfall_shrinks_with_the_step() -> None:
    load = train((12, 0), (6, 3), (9, 4))
    moment = line_of(SPAN, "moment", "1")
    shorts = [swept(moment, load, 1, steps)[1] for steps in (250, 1000, 4000)]
    assert 2 < shorts[0] / shorts[1] < 8
    assert 2 < shorts[1] / shorts[2] < 8
    assert shorts[2] < 1e-3 * swept(moment, load, 1)[0]


def real_parts(polynomial: Polynomial) -> list[float]:
    """Of all roots: those that are real are among them, and others do no harm."""
    return [complex(root).real for root in polynomial.roots()]


def extreme_of_curved(line: Piecewise, load: MovingLoad, sense: int) -> float:
    """The extreme where every axle counts: between neighbouring events the sum is one cubic, found
    through four of its points; it is highest at an end or where its derivative is zero. The area
    is that of the parts between the roots of each piece."""
    start, end = line.breaks[0], line.breaks[-1]
    best = area = 0.0
    for heading in load.headings:
        direction = 1 if heading == "right" else -1
        behind = [direction * offset for offset in load.offsets]
        events = sorted({stop + offset for stop in line.breaks for offset in behind})
        for before, after in itertools.pairwise(events):
            leads = [before + (after - before) * part / 5 for part in range(1, 5)]
            sums = [
                sum(
                    axle.weight * line.right(lead - offset)
                    for axle, offset in zip(load.axles, behind, strict=True)
                    if start <= lead - offset <= end
                )
                for lead in leads
            ]
            cubic = Polynomial.fit([1, 2, 3, 4], [sense * float(one) for one in sums], 3)
            turns = [turn for turn in real_parts(cubic.deriv()) if 0 < turn < 5]
            best = max(best, *(float(cubic(at)) for at in (0, 5, *turns)))
    for left, right, piece in zip(line.breaks, line.breaks[1:], line.pieces, strict=False):
        part = Polynomial([sense * float(one) for one in piece])
        width = float(right - left)
        roots = [root for root in real_parts(part) if 0 < root < width]
        areas = part.integ()(np.array(sorted([0.0, *roots, width])))
        area += float(np.maximum(np.diff(areas), 0).sum())
    factor = float((1 + load.allowance) * load.distribution)
    return factor * best + float(load.uniform * load.distribution) * area


@pytest.mark.parametrize("seed", range(8))
def test_brackets_the_extreme_of_curved_lines(seed: int) -> None:
    rng = Random(seed)
    beam, load = random_indeterminate(rng), replace(random_train(rng), relieving="count")
    effects = (*effects_of(beam)[::3], *movements_of(beam)[::4])
    loaded = 0
    for line, found in zip(influence_line(beam, effects), ordinates(beam, effects), strict=True):
        size = float(np.abs(found.cubics[2]).max())
        for sense in SENSES:
            extreme = extreme_of_curved(line, load, sense)
            value, short = swept(found, load, sense, 500)
            rounding = 1e-9 * size * float(sum(axle.weight for axle in load.axles) + load.uniform)
            assert value * sense >= 0
            assert sense * value <= extreme + rounding
            assert extreme <= sense * value + short + rounding
            loaded += extreme > 0
    assert loaded > 4


def test_one_axle_on_a_curved_line() -> None:
    """Two spans of 10: over the middle support -x (L² - x²) / (4 L²) is greatest at L / √3. A step
    so long that it sees nothing of that still allows for it."""
    beam = make_beam(20, [(0, "pin"), (10, "roller"), (20, "roller")])
    moment = line_of(beam, "moment", "B")
    greatest = 60 * 10 / (6 * 3**0.5)
    for steps, most in ((3000, 1e-3), (3, 200.0)):
        found, short = swept(moment, train((60, 0)), -1, steps)
        assert -found <= greatest <= -found + short
        assert short < most


def test_rise_above_a_chord() -> None:
    """The parabola 4 t (1 - t) rises by 1 over its whole width, by a quarter over half of it."""
    parabola = np.array([[0, 4 / 3, 4 / 3, 0]])
    for step, rise in ((1, 0.25), (2, 1), (9, 1)):
        assert _bulge(np.array([2.0]), parabola, step) == pytest.approx(rise)
    assert _bulge(np.array([2.0]), -parabola, 1) == 0


def test_area_under_a_curved_line() -> None:
    """Two spans of 10: w L² / 16 over the middle support; the first span's far reaction is lifted
    by the other one, w L / 16, and pressed by its own, 7 w L / 16."""
    beam = make_beam(20, [(0, "pin"), (10, "roller"), (20, "roller")])
    load = train(uniform=3)
    assert swept(line_of(beam, "moment", "B"), load, -1)[0] == pytest.approx(-2 * 3 * 100 / 16)
    assert swept(line_of(beam, "reaction", "A"), load, -1)[0] == pytest.approx(-3 * 10 / 16)
    assert swept(line_of(beam, "reaction", "A"), load, 1)[0] == pytest.approx(7 * 3 * 10 / 16)


def test_area_where_a_stretch_changes_sign_and_is_curved() -> None:
    """The moment of a fixed-ended beam at a fifth of the span, without a station where it changes
    sign, against its exact areas."""
    beam = make_beam(10, [(0, "fixed"), (10, "fixed")], sections=[2])
    effect = Effect("moment", "1", Fraction(2))
    line, found = influence_line(beam, [effect])[0], ordinates(beam, [effect])[0]
    for sense in SENSES:
        expected = extreme_of_curved(line, train(uniform=1), sense)
        assert expected > 0.05
        assert swept(found, train(uniform=1), sense)[0] == pytest.approx(sense * expected)
