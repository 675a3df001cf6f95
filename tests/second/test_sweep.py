"""The sweep of a case against hand sums, the exact extreme over every event, and any placement."""

from __future__ import annotations

import itertools
import math
from collections.abc import Iterator, Sequence
from fractions import Fraction
from random import Random
from typing import Literal

import numpy as np
import pytest
from beams import Place, effects_of, make_beam, movements_of, random_beam, random_indeterminate
from numpy.polynomial import Polynomial

from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.beam import Beam
from calcpack.model.loads import (
    Axle,
    Case,
    Gap,
    Given,
    Heading,
    Part,
    Relieving,
    Strip,
    Train,
)
from calcpack.model.request import Effect, EffectKind
from calcpack.second.areas import bulge
from calcpack.second.kinematic import influence_line
from calcpack.second.stiffness import Floats, Ordinates, ordinates
from calcpack.second.sweep import _highest_before, _put_together, swept_case

SENSES: tuple[Literal[1, -1], ...] = (1, -1)
SIDES: tuple[Side, ...] = ("left", "right")
SPAN = make_beam(10, [(0, "pin"), (10, "roller")], sections=[5])
OVERHANG = make_beam(20, [(0, "pin"), (16, "roller")], sections=[8])
TWO_SPANS = make_beam(20, [(0, "pin"), (10, "roller"), (20, "roller")])


def given(value: Place) -> Given:
    return Given(Fraction(value), "moving[0]")


def one_of(*values: Place) -> Gap:
    return Gap(tuple(given(value) for value in values))


def within(*ends: Place) -> Gap:
    """Between two distances, or at least one."""
    return Gap(tuple(given(end) for end in ends), free=True)


def train(*axles: tuple[Place, Place | Gap], strips: Sequence[Strip] = ()) -> Train:
    """Each axle's weight and its distance to the one ahead, of the first of no account."""
    return Train(
        "Train",
        tuple(
            Axle(given(weight), (gap if isinstance(gap, Gap) else one_of(gap)) if number else None)
            for number, (weight, gap) in enumerate(axles)
        ),
        tuple(strips),
    )


def strip(load: Place, start: Place = 0, length: Place | None = None, ahead: bool = False) -> Strip:
    return Strip(given(start), None if length is None else given(length), given(load), ahead)


def strips_alone(*strips: Strip) -> Train:
    return Train("Strips", (Axle(given(0), None, acts=False),), strips)


def case(
    *trains: Train,
    gaps: Sequence[Gap] = (),
    uniform: Place | None = None,
    concentrated: Sequence[Place] = (),
    headings: tuple[Heading, ...] = ("right", "left"),
    relieving: Relieving = "count",
    allowances: Sequence[tuple[Part, Place]] = (),
    factors: Sequence[Place] = (),
) -> Case:
    return Case(
        "",
        trains,
        tuple(gaps),
        None if uniform is None else given(uniform),
        tuple(given(force) for force in concentrated),
        headings,
        relieving,
        tuple((part, given(value)) for part, value in allowances),
        tuple(given(factor) for factor in factors),
    )


def line_of(beam: Beam, kind: EffectKind, at: str) -> Ordinates:
    return ordinates(beam, [Effect(kind, at, beam.station(at).at)])[0]


def test_axles_by_hand() -> None:
    """12 on the peak 10/4, 6 three behind it at (5 - 3) / 2."""
    found, short = swept_case(line_of(SPAN, "moment", "1"), case(train((12, 0), (6, 3))), 1)
    assert found <= 12 * 2.5 + 6 * 1 <= found + short
    assert short < 0.1


def test_heading_matters() -> None:
    """Over a drop from 1 to 0 at the right end the heavy axle must lead."""
    reaction, pair = line_of(SPAN, "reaction", "B"), train((10, 0), (2, 4))
    right, _ = swept_case(reaction, case(pair, headings=("right",)), 1)
    left, _ = swept_case(reaction, case(pair, headings=("left",)), 1)
    both, _ = swept_case(reaction, case(pair), 1)
    assert right == pytest.approx(10 + 2 * 0.6, rel=1e-3)
    assert left == pytest.approx(max(10.0, 2 + 10 * 0.6), rel=1e-3)
    assert both == right


def test_uniform_load_by_hand() -> None:
    """w L² / 8, and the shear at midspan w L / 8 either way; of the allowances only its own."""
    load = case(
        uniform=3, allowances=[("axles", "0.33"), ("uniform", "0.1")], factors=["0.5", "0.8"]
    )
    weighed = 1.1 * 0.5 * 0.8
    assert swept_case(line_of(SPAN, "moment", "1"), load, 1)[0] == pytest.approx(weighed * 37.5)
    for sense in SENSES:
        value = sense * weighed * 3 * 10 / 8
        found, short = swept_case(line_of(SPAN, "shear", "1"), load, sense)
        assert found == pytest.approx(value)
        assert short == 0


def test_uniform_load_where_a_stretch_changes_sign() -> None:
    beam = make_beam(12, [(0, "pin"), (8, "roller")], [], [])
    reaction = line_of(beam, "reaction", "A")
    assert swept_case(reaction, case(uniform=1), 1)[0] == pytest.approx(4)
    assert swept_case(reaction, case(uniform=1), -1)[0] == pytest.approx(-1)


def test_parts_weigh_their_own() -> None:
    """Midspan of 10 m: 8 on the peak, 2 per metre everywhere, 3 per metre and 4 on the peak."""
    parts: tuple[Part, ...] = ("axles", "trailing", "uniform")
    moment = line_of(SPAN, "moment", "1")
    everything = train((8, 0), strips=[strip(2), strip(2, ahead=True)])
    static = {"axles": (8 + 4) * 2.5, "trailing": 2 * 12.5, "uniform": 3 * 12.5}
    for part in parts:
        load = case(
            everything, uniform=3, concentrated=[4], allowances=[(part, "0.3")], factors=["0.9"]
        )
        expected = 0.9 * (sum(static.values()) + 0.3 * static[part])
        found, short = swept_case(moment, load, 1)
        assert found <= expected <= found + short
        assert short < 0.02 * expected


def test_the_load_may_stay_away() -> None:
    load = case(train((5, 0), (5, 2), strips=[strip(3, 1)]), concentrated=[5])
    found, short = swept_case(line_of(SPAN, "moment", "1"), load, -1)
    assert found == 0
    assert short == pytest.approx(0, abs=1e-4)
    assert swept_case(line_of(SPAN, "moment", "1"), case(), 1) == (0, 0)


def test_relieving_axles() -> None:
    """Overhangs of 4 on both sides of a span of 10: with one axle in midspan the other, 8 away, is
    on an overhang and relieves by 15 of 25; without it the train must wait until it is off."""
    beam = make_beam(18, [(4, "pin"), (14, "roller")], sections=[9])
    moment, pair = line_of(beam, "moment", "1"), train((10, 0), (10, 8))
    counted, _ = swept_case(moment, case(pair), 1)
    neglected, _ = swept_case(moment, case(pair, relieving="neglect"), 1)
    assert counted == pytest.approx(20, rel=5e-3)
    assert neglected == pytest.approx(25, rel=5e-3)


def test_an_axle_that_does_not_act_keeps_its_place() -> None:
    """12 on the peak and 6 three behind it; 99 between them does nothing."""
    axles = (Axle(given(12), None), Axle(given(99), one_of(1), False), Axle(given(6), one_of(2)))
    load = case(Train("Train", axles))
    found, _ = swept_case(line_of(SPAN, "moment", "1"), load, 1)
    plain = swept_case(line_of(SPAN, "moment", "1"), case(train((12, 0), (6, 3))), 1)[0]
    assert found == pytest.approx(plain, rel=1e-12)


@pytest.mark.parametrize(
    ("gap", "expected"),
    [
        (within(10, 20), -40),
        (within(10), -40),
        (one_of(12, 17), -35),
        (within(10, 17), -35),
        (within(10, 14), -20),
        (one_of(12, 14), -20),
        (within(1, 4), -40 + 5),
    ],
)
def test_gaps_by_hand(gap: Gap, expected: float) -> None:
    """Midspan of 10 m between overhangs of 4: -2 under a unit load at either tip. The tips are 18
    apart; at 17 the second axle is a metre from its tip; at 12 to 14 it is worth nothing; two on
    one overhang lose half of their least distance, 1."""
    beam = make_beam(18, [(4, "pin"), (14, "roller")], sections=[9])
    moment = line_of(beam, "moment", "1")
    found, short = swept_case(moment, case(train((10, 0), (10, gap))), -1)
    assert -found - 1e-9 <= -expected <= -found + short
    assert short < 0.4


def test_few_steps_allow_for_the_whole_range() -> None:
    """The same tips, 18 apart: 10 at one, 9 at a metre from the other, since the gap is 17 at
    most; that lies between two positions of the grid."""
    beam = make_beam(18, [(4, "pin"), (14, "roller")], sections=[9])
    moment, pair = line_of(beam, "moment", "1"), case(train((10, 0), (9, within(10, 17))))
    for steps in range(10, 60):
        found, short = swept_case(moment, pair, -1, steps=steps)
        assert -found - 1e-9 <= 10 * 2 + 9 * 1.5 <= -found + short + 1e-9


def test_trains_in_a_chain_with_gaps_between() -> None:
    """The same tips: three trains of two axles a metre apart, 2 m or more between them; one at one
    tip, the axles of the others at 0, 1, 3 and 4 from the other."""
    beam = make_beam(18, [(4, "pin"), (14, "roller")], sections=[9])
    pair = train((10, 0), (10, 1))
    load = case(pair, pair, pair, gaps=[within(2), within(2)])
    found, short = swept_case(line_of(beam, "moment", "1"), load, -1)
    assert -found <= 10 * (2 + 1.5 + 0.5) + 10 * (2 + 1.5) <= -found + short
    assert short < 1


def test_trailing_load_by_hand() -> None:
    """A heavy train on a simple span of 12, towards the support B: axles 40 and 80 at 2.5, then 8
    per metre from 1.5 behind the last; the shear just left of B is the reaction without a load at
    B itself."""
    beam = make_beam(12, [(0, "pin"), (12, "roller")], sections=[6])
    load = case(train((40, 0), (80, "2.5"), strips=[strip(8, "1.5")]))
    reaction = max(
        40 + 80 * 9.5 / 12 + 8 * 8**2 / 24,
        80 + 8 * 10.5**2 / 24,
        8 * 12**2 / 24,
    )
    found, short = swept_case(line_of(beam, "reaction", "B"), load, 1)
    assert found <= reaction <= found + short
    assert short < 0.01 * reaction
    # The last axle in midspan and the load up to 4.5; the first has 3.5 of 6 left to go.
    moments = [40 * (3 - 1.25) + 80 * 3 + 8 * 4.5**2 / 4]
    # The first in midspan, the load up to 2.
    moments += [40 * 3 + 80 * (3 - 1.25) + 8 * 2**2 / 4]
    # Everywhere.
    moments += [8 * 12**2 / 8]
    found, short = swept_case(line_of(beam, "moment", "1"), load, 1)
    assert found <= max(moments) <= found + short
    assert short < 0.01 * max(moments)


def test_strip_of_fixed_length() -> None:
    """Published: det-overhang-moving-udl in calcpack/reference/published.toml."""
    load = case(strips_alone(strip(20, length=10)))
    for kind, published in (("shear", (37.5, -40.0)), ("moment", (550.0, -80.0))):
        line = line_of(OVERHANG, "shear" if kind == "shear" else "moment", "1")
        for sense, expected in zip(SENSES, published, strict=True):
            found, short = swept_case(line, load, sense)
            assert sense * found <= sense * expected + 1e-9
            assert sense * expected <= sense * found + short + 1e-9
            assert short < 2e-3 * abs(expected)


def test_strip_of_a_whole_weight() -> None:
    weight = Strip(given(0), given(10), given(200), of_weight=True)
    moment = line_of(OVERHANG, "moment", "1")
    assert swept_case(moment, case(strips_alone(weight)), 1)[0] == pytest.approx(550, rel=1e-5)


def test_strip_ahead() -> None:
    """A strip of 4 at 2 per metre from 3 ahead of an axle of 4; the reaction at the right end of a
    span of 10. Heading right it is best with the strip from 6 to 10 and the axle at 3; heading left
    with the axle at 10 and the strip from 3 to 7."""
    reaction = line_of(SPAN, "reaction", "B")
    load = train((4, 0), strips=[strip(2, 3, 4, ahead=True)])
    right, left = (
        swept_case(reaction, case(load, headings=(heading,)), 1)[0] for heading in ("right", "left")
    )
    assert right == pytest.approx(2 * 4 * 0.8 + 4 * 0.3, rel=1e-3)
    assert left == pytest.approx(4 + 2 * 4 * 0.5, rel=1e-3)


def test_broken_strip() -> None:
    """On a span of 16 with an overhang of 4, midspan: the unbroken strip without end behind its
    foremost point stops at the support; ahead of it, it covers the overhang too; a broken one does
    not."""
    moment = line_of(OVERHANG, "moment", "1")
    whole, overhang = 3 * 16**2 / 8, 3 * 4**2 / 4
    for ahead in (False, True):
        unbroken = strip(3, ahead=ahead)
        broken = Strip(given(0), None, given(3), ahead, broken=True)
        values = [
            swept_case(moment, case(strips_alone(one), headings=("right",)), 1)[0]
            for one in (unbroken, broken)
        ]
        assert values[0] == pytest.approx(whole - ahead * overhang, rel=1e-5)
        assert values[1] == pytest.approx(whole, rel=1e-12)


def test_concentrated_forces_stand_in_different_spans() -> None:
    """Two spans of 10, over the middle support: 10 / (6 √3) under a unit load in either span."""
    moment, peak = line_of(TWO_SPANS, "moment", "B"), 10 / (6 * 3**0.5)
    spans = ((0.0, 10.0), (10.0, 20.0))
    for forces, given_spans, counted in (
        ([60], (), 60),
        ([60], spans, 60),
        ([30, 60], spans, 90),
        ([30, 60], (), 60),
        ([30, 60, 40], spans, 100),
    ):
        found, short = swept_case(moment, case(concentrated=forces), -1, given_spans)
        assert -found <= counted * peak <= -found + short
        assert short < 1e-3
        assert swept_case(moment, case(concentrated=forces), 1, given_spans)[0] < 1e-9


def test_heaviest_concentrated_force_stands_where_most_is_gained() -> None:
    """Midspan of 16 m with an overhang of 4: 4 under a unit load there, -2 at the tip. For the
    moment over B, only the overhang gives anything."""
    spans = ((0.0, 16.0), (16.0, 20.0))
    moment = line_of(OVERHANG, "moment", "1")
    assert swept_case(moment, case(concentrated=[5, 9]), 1, spans)[0] == pytest.approx(36)
    assert swept_case(moment, case(concentrated=[5, 9]), -1, spans)[0] == pytest.approx(-18)
    reaction = line_of(OVERHANG, "reaction", "B")
    assert swept_case(reaction, case(concentrated=[5, 9]), 1, spans)[0] == pytest.approx(
        9 * 1.25 + 5 * 1
    )


def test_stations_too_close_for_doubles() -> None:
    """Sections a billionth from the ends of a beam of 10^12: its shear is 1 there."""
    beam = make_beam(
        10**12, [(0, "pin"), (10**12, "roller")], sections=["1e-9", 10**12 - Fraction(1, 10**9)]
    )
    load = case(train((7, 0)), uniform=2)
    for name, sense in zip("12", SENSES, strict=True):
        found, short = swept_case(line_of(beam, "shear", name), load, sense)
        assert found == pytest.approx(sense * (7 + 10**12), rel=1e-3)
        assert 0 <= short < 0.01


Run = list[tuple[Fraction, Fraction]]
"""Weight, 0 where it does not act, and distance behind the lead axle with all gaps at their least,
of each axle."""


def runs_of(load: Case) -> Iterator[tuple[list[Run], list[float]]]:
    """The rigid runs for every choice from lists, and how much wider each gap between may be."""
    gaps = [axle.gap for axle in load.axles[1:] if axle.gap]
    for values in itertools.product(*(gap.ties[:1] if gap.free else gap.ties for gap in gaps)):
        runs: list[Run] = [[]]
        reaches, behind = [], Fraction(0)
        for axle, gap, value in zip(load.axles, [None, *gaps], [given(0), *values], strict=True):
            behind += value.value
            if gap is not None and gap.free:
                runs.append([])
                end = gap.greatest
                reaches.append(math.inf if end is None else float(end - gap.least))
            runs[-1].append((axle.acts * axle.weight.value * load.weighs("axles"), behind))
        yield runs, reaches


def seen_from(line: Piecewise, heading: Heading, sense: int) -> Piecewise:
    return (line if heading == "right" else line.mirrored()) * sense


def extreme_of_runs(line: Piecewise, load: Case, sense: int) -> float:
    """The extreme of axles on a straight line: some run of those joined by gaps at an end of their
    range meets a breakpoint or an end of the beam with an axle. All axles of a run are on one side
    of their jumps, a run behind on the right only if that ahead is or there is room between; those
    at an end of the beam count or, just beyond, do not."""
    best = 0.0
    for heading in load.headings:
        seen = seen_from(line, heading, sense)
        for runs, reaches in runs_of(load):
            events = [{stop + far for stop in seen.breaks for _, far in run} for run in runs]
            after: tuple[Floats, ...] = ()
            for number in reversed(range(len(runs))):
                places = set()
                for other, stops in enumerate(events):
                    between = reaches[min(number, other) : max(number, other)]
                    sign = 1 if number < other else -1
                    wider = [
                        sign * sum(map(Fraction, parts))
                        for parts in itertools.product(
                            *((0, reach) if reach < math.inf else (0,) for reach in between)
                        )
                    ]
                    places |= {stop + more for stop in stops for more in wider}
                stands = list(itertools.product(sorted(places), SIDES, (True, False)))
                values = np.array(
                    [stood(seen, runs[number], *stand, load.relieving) for stand in stands]
                )
                at = np.array([float(place) for place, _, _ in stands])
                side = np.array([1 if side == "right" else -1 for _, side, _ in stands])
                if after:
                    wide = at[:, None] - after[1]
                    eased = side[:, None] - after[2]
                    reach = reaches[number]
                    allowed = (wide > 1e-9) | ((wide > -1e-9) & (eased >= 0))
                    allowed &= (wide < reach - 1e-9) | ((wide < reach + 1e-9) & (eased <= 0))
                    values = values + np.where(allowed, after[0], -math.inf).max(axis=1)
                after = (values, at, side)
            best = max(best, float(after[0].max()))
    return best


def stood(
    seen: Piecewise, run: Run, place: Fraction, side: Side, closed: bool, relieving: Relieving
) -> float:
    start, end = seen.breaks[0], seen.breaks[-1]
    total = Fraction(0)
    for weight, far in run:
        at = place - far
        beyond = (at, side) in ((start, "left"), (end, "right")) and not closed
        if start <= at <= end and not beyond:
            part = weight * seen.value(at, side)
            total += max(part, Fraction(0)) if relieving == "neglect" else part
    return float(total)


def random_gap(rng: Random, kinds: str) -> Gap:
    low, more = Fraction(rng.randint(4, 120), 10), Fraction(rng.randint(1, 90), 10)
    match rng.choice(kinds):
        case "l":
            return one_of(low, low + more, low + 2 * more)
        case "r":
            return within(low, low + more)
        case "a":
            return within(low)
    return one_of(low)


def random_case(rng: Random, kinds: str, strips: bool = False) -> Case:
    """One or two trains of one to three axles and, if so, strips; gaps of the kinds f(ixed),
    l(ist), r(ange) and a(t least)."""
    headings: tuple[tuple[Heading, ...], ...] = (("right",), ("left",), ("right", "left"))
    trains = []
    for _ in range(rng.randint(1, 2)):
        axles = tuple(
            Axle(
                given(Fraction(rng.randint(10, 400), 10)),
                random_gap(rng, kinds) if number else None,
                rng.random() < 0.9,
            )
            for number in range(rng.randint(1, 3))
        )
        count = rng.randint(1, 2) if strips else 0
        trains.append(Train("Train", axles, tuple(random_strip(rng) for _ in range(count))))
    return case(
        *trains,
        gaps=[random_gap(rng, kinds) for _ in trains[1:]],
        headings=rng.choice(headings),
        relieving=rng.choice(("count", "neglect")) if not strips else "count",
        allowances=[("axles", Fraction(rng.randint(0, 40), 100)), ("trailing", "0.1")],
        factors=["0.9"],
    )


def random_strip(rng: Random) -> Strip:
    length = rng.choice((None, given(Fraction(rng.randint(5, 300), 10))))
    return Strip(
        given(Fraction(rng.randint(0, 60), 10)),
        length,
        given(Fraction(rng.randint(1, 90), 10)),
        ahead=rng.random() < 0.3,
        broken=rng.random() < 0.4,
        of_weight=length is not None and rng.random() < 0.3,
    )


@pytest.mark.parametrize("kinds", ["f", "fl", "r", "frla"])
@pytest.mark.parametrize("seed", range(6))
def test_brackets_the_exact_extreme_of_axles(seed: int, kinds: str) -> None:
    rng = Random(f"{kinds}{seed}")
    beam, load = random_beam(rng, 2), random_case(rng, kinds)
    effects = effects_of(beam)[::3]
    loaded = 0
    for line, broken in zip(influence_line(beam, effects), ordinates(beam, effects), strict=True):
        for sense in SENSES:
            extreme = extreme_of_runs(line, load, sense)
            found, short = swept_case(broken, load, sense, steps=1500)
            rounding = 1e-12 * (1 + extreme)
            assert found * sense >= 0
            assert abs(found) <= extreme + rounding
            assert extreme <= abs(found) + short + rounding
            loaded += extreme > 0
    assert loaded > 1


def test_shortfall_shrinks_with_the_step() -> None:
    moment = line_of(SPAN, "moment", "1")
    for load in (
        case(train((12, 0), (6, 3), (9, 4))),
        case(train((12, 0), (6, within(2, 5)), (9, within(1)), strips=[strip(2, 1, 6)])),
    ):
        shorts = [swept_case(moment, load, 1, steps=steps)[1] for steps in (250, 1000, 4000)]
        assert 2 < shorts[0] / shorts[1] < 8
        assert 2 < shorts[1] / shorts[2] < 8
        assert shorts[2] < 2e-3 * swept_case(moment, load, 1)[0]


def test_bound_of_strips_is_of_second_order() -> None:
    moment, load = line_of(OVERHANG, "moment", "1"), case(strips_alone(strip(20, 0, 10)))
    shorts = [swept_case(moment, load, 1, steps=steps)[1] for steps in (100, 1000)]
    assert shorts[0] / shorts[1] > 50


def real_parts(polynomial: Polynomial) -> list[float]:
    """Of all roots: those that are real are among them, and others do no harm."""
    return [complex(root).real for root in polynomial.roots()]


def evaluated(function: Piecewise, places: Floats) -> Floats:
    """A function at places that are not its breakpoints, beyond its ends as there."""
    breaks = np.array([float(one) for one in function.breaks])
    powers = np.zeros((len(function.pieces), function.degree + 1))
    for row, piece in zip(powers, function.pieces, strict=True):
        row[: len(piece)] = [float(value) for value in piece]
    held = np.clip(places, breaks[0], breaks[-1])
    index = np.clip(np.searchsorted(breaks, held, side="right") - 1, 0, len(powers) - 1)
    values: Floats = sum(
        coefficients[index] * (held - breaks[index]) ** power
        for power, coefficients in enumerate(powers.T)
    )
    return values


def placed(
    seen: Piecewise,
    areas: dict[bool, Piecewise],
    load: Case,
    ties: Sequence[Fraction],
    leads: Floats,
) -> Floats:
    """The effect of the trains heading right on a line, their lead axle at places off any event,
    by the areas of the line (False) and of its part above the axis (True)."""
    behind = np.cumsum([0.0, *map(float, ties)]).tolist()
    total = np.zeros_like(leads)
    for axle, far in zip(load.axles, behind, strict=True):
        if axle.acts:
            at = leads - far
            on_beam = (at >= float(seen.breaks[0])) & (at <= float(seen.breaks[-1]))
            parts = float(axle.weight.value) * np.where(on_beam, evaluated(seen, at), 0.0)
            parts = np.maximum(parts, 0.0) if load.relieving == "neglect" else parts
            total += float(load.weighs("axles")) * parts
    for one, front, back in spread(load, behind):
        fronts, backs = (evaluated(areas[one.broken], leads - far) for far in (front, back))
        total += float(one.intensity * load.weighs("trailing")) * (fronts - backs)
    return total


def spread(load: Case, behind: Sequence[float]) -> Iterator[tuple[Strip, float, float]]:
    """Every strip, and how far its front and its back are behind the lead axle."""
    first = 0
    for one in load.trains:
        last = first + len(one.axles) - 1
        for piece in one.strips:
            far = float(piece.start.value)
            length = math.inf if piece.length is None else float(piece.length.value)
            if piece.ahead:
                yield piece, behind[first] - far - length, behind[first] - far
            else:
                yield piece, behind[last] + far, behind[last] + far + length
        first = last + 1


def areas_of(seen: Piecewise) -> dict[bool, Piecewise]:
    return {False: seen.antiderivative(), True: seen.part_of_sign(1).antiderivative()}


INSIDE = np.arange(1, 6) / 6
TO_BEZIER = np.linalg.inv(
    [[math.comb(4, k) * t**k * (1 - t) ** (4 - k) for k in range(5)] for t in INSIDE]
)
"""Bézier ordinates of a quartic, which lies below their highest, by its values at INSIDE."""


def extreme_of_curved(line: Piecewise, load: Case, sense: int) -> float:
    """The extreme where every axle counts and gaps are fixed or of lists: between neighbouring
    events the effect is one quartic, found through five of its points; it is highest at an end or
    where its derivative is zero. The uniform load's area is exact."""
    best = 0.0
    for heading in load.headings if load.trains else ():
        seen = seen_from(line, heading, sense)
        areas = areas_of(seen)
        stops = sorted({*map(float, seen.breaks), *map(float, seen.zeros())})
        for ties in itertools.product(*(axle.gap.ties for axle in load.axles if axle.gap)):
            values = [tie.value for tie in ties]
            behind = np.cumsum([0.0, *map(float, values)]).tolist()
            behind += [end for _, *ends in spread(load, behind) for end in ends]
            events = sorted({stop + far for stop in stops for far in behind if math.isfinite(far)})
            events = [events[0] - 1, *events, events[-1] + 1]
            starts, widths = np.array(events[:-1]), np.diff(events)
            starts, widths = starts[widths > 1e-9], widths[widths > 1e-9]
            leads = starts + widths * INSIDE[:, None]
            for sums in placed(seen, areas, load, values, leads).T:
                if (TO_BEZIER @ sums).max() > best:
                    quartic = Polynomial.fit(INSIDE, sums, 4)
                    turns = [turn for turn in real_parts(quartic.deriv()) if 0 < turn < 1]
                    best = max(best, *(float(quartic(at)) for at in (0, 1, *turns)))
    if load.uniform is None:
        return best
    area = (line * sense).areas()[0]
    return best + float(load.uniform.value * load.weighs("uniform") * area)


@pytest.mark.parametrize("seed", range(12))
def test_brackets_the_extreme_of_curved_lines(seed: int) -> None:
    rng = Random(seed)
    beam, load = random_indeterminate(rng), random_case(rng, "fffl", strips=seed % 3 > 0)
    load = case(
        *load.trains,
        gaps=load.gaps,
        headings=load.headings,
        uniform=rng.choice((None, 2)),
        allowances=[("axles", "0.2"), ("trailing", "0.1")],
    )
    effects = (*effects_of(beam)[::5], *movements_of(beam)[::7])
    loaded = 0
    for line, found in zip(influence_line(beam, effects), ordinates(beam, effects), strict=True):
        size = float(np.abs(found.cubics[2]).max())
        for sense in SENSES:
            extreme = extreme_of_curved(line, load, sense)
            value, short = swept_case(found, load, sense, steps=500)
            rounding = 1e-8 * size * (300 + float(beam.length) * 20)
            assert value * sense >= 0
            assert sense * value <= extreme + rounding
            assert extreme <= sense * value + short + rounding
            loaded += extreme > 0
    assert loaded > 4


@pytest.mark.parametrize("seed", range(8))
def test_no_placement_is_above_the_bound(seed: int) -> None:
    """Random places and gaps of every kind, gaps often held at an end and an axle or an end of a
    strip often just beside a breakpoint; the best of them is near what was found."""
    rng = Random(seed)
    beam, load = random_indeterminate(rng), random_case(rng, "frrla", strips=seed % 2 > 0)
    effects = effects_of(beam)
    effects = tuple(rng.sample(effects, 3))
    length = float(beam.length)
    for line, found in zip(influence_line(beam, effects), ordinates(beam, effects), strict=True):
        size = float(np.abs(found.cubics[2]).max())
        for sense in SENSES:
            value, short = swept_case(found, load, sense)
            rounding = 1e-9 * size * 1000
            best = 0.0
            for heading in load.headings:
                seen = seen_from(line, heading, sense)
                areas = areas_of(seen)
                stops = [*map(float, seen.breaks), *map(float, seen.turns())]
                for _ in range(150):
                    ties = [any_distance(rng, axle.gap, length) for axle in load.axles if axle.gap]
                    behind = np.cumsum([0.0, *map(float, ties)]).tolist()
                    lead = rng.choice(stops) + rng.choice(behind) + rng.choice((1e-9, -1e-9))
                    if rng.random() < 0.3:
                        lead += rng.uniform(-1, 1)
                    best = max(best, float(placed(seen, areas, load, ties, np.array(lead))))
            assert best <= sense * value + short + rounding
            assert best >= 0.5 * sense * value - rounding


def any_distance(rng: Random, gap: Gap, length: float) -> Fraction:
    ties = [tie.value for tie in gap.ties]
    if not gap.free or rng.random() < 0.3:
        return rng.choice(ties)
    end = gap.greatest
    return gap.least + Fraction(rng.random()) * (
        Fraction(length) if end is None else end - gap.least
    )


def test_one_axle_on_a_curved_line() -> None:
    """Two spans of 10: over the middle support -x (L² - x²) / (4 L²) is greatest at L / √3. A step
    so long that it sees nothing of that still allows for it."""
    moment = line_of(TWO_SPANS, "moment", "B")
    greatest = 60 * 10 / (6 * 3**0.5)
    for steps, most in ((3000, 1e-3), (3, 200.0)):
        found, short = swept_case(moment, case(train((60, 0))), -1, steps=steps)
        assert -found <= greatest <= -found + short
        assert short < most


def test_rise_above_a_chord() -> None:
    """The parabola 4 t (1 - t) rises by 1 over its whole width, by a quarter over half of it."""
    parabola = np.array([[0, 4 / 3, 4 / 3, 0]])
    for step, rise in ((1, 0.25), (2, 1), (9, 1)):
        assert bulge(np.array([2.0]), parabola, step) == pytest.approx(rise)
    assert bulge(np.array([2.0]), -parabola, 1) == 0


def test_area_under_a_curved_line() -> None:
    """Two spans of 10: w L² / 16 over the middle support; the first span's far reaction is lifted
    by the other one, w L / 16, and pressed by its own, 7 w L / 16."""
    load = case(uniform=3)
    moment, reaction = line_of(TWO_SPANS, "moment", "B"), line_of(TWO_SPANS, "reaction", "A")
    assert swept_case(moment, load, -1)[0] == pytest.approx(-2 * 3 * 100 / 16)
    assert swept_case(reaction, load, -1)[0] == pytest.approx(-3 * 10 / 16)
    assert swept_case(reaction, load, 1)[0] == pytest.approx(7 * 3 * 10 / 16)


def test_area_where_a_stretch_changes_sign_and_is_curved() -> None:
    """The moment of a fixed-ended beam at a fifth of the span, without a station where it changes
    sign, against its exact areas; a broken strip without end that may stand anywhere is the same.
    """
    beam = make_beam(10, [(0, "fixed"), (10, "fixed")], sections=[2])
    effect = Effect("moment", "1", Fraction(2))
    line, found = influence_line(beam, [effect])[0], ordinates(beam, [effect])[0]
    broken = case(strips_alone(Strip(given(0), None, given(1), broken=True)))
    for sense in SENSES:
        expected = extreme_of_curved(line, case(uniform=1), sense)
        assert expected > 0.05
        for load in (case(uniform=1), broken):
            assert swept_case(found, load, sense)[0] == pytest.approx(sense * expected)


@pytest.mark.parametrize("seed", range(5))
def test_putting_runs_together(seed: int) -> None:
    """Against every choice of rows, with rows added above the first for gaps that reach there."""
    random = np.random.default_rng(seed)
    runs, wider = random.normal(size=(7, 3)), random.integers(0, 9, size=2).tolist()
    padded = np.vstack([np.repeat(runs[:1], 20, axis=0), runs])
    best = max(
        padded[one, 0] + padded[two, 1] + padded[three, 2]
        for one in range(20, 27)
        for two in range(one - wider[0], one + 1)
        for three in range(max(two - wider[1], 0), two + 1)
    )
    assert _put_together(runs, wider) == pytest.approx(max(best, 0.0))
    for reach in range(9):
        windows = [runs[max(row - reach, 0) : row + 1, 0].max() for row in range(7)]
        assert _highest_before(runs[:, 0], reach).tolist() == windows
