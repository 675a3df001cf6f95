"""Laws that hold for every determinate beam and every train, on beams that hypothesis draws."""

from __future__ import annotations

import itertools
from dataclasses import replace
from fractions import Fraction
from random import Random
from typing import Literal

from beams import beams, effects_of
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from loads import changed, governing_of, trains
from making import lines_of

from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.beam import Beam, Face, Section, Typed
from calcpack.model.loads import Axle, Case, Gap, Given, MovingLoad, Strip, Train
from calcpack.model.request import Effect
from calcpack.moving.placement import Group, Position, trains_value

SENSES: tuple[Literal[1, -1], ...] = (1, -1)
SIDES: tuple[Side, ...] = ("left", "right")
MIRROR: dict[Face | None, Face | None] = {"left": "right", "right": "left", None: None}
FOOT = Fraction("0.3048")

lawful = settings(
    max_examples=40,
    deadline=None,
    derandomize=True,
    database=None,
    suppress_health_check=[HealthCheck.too_slow],
)
few = settings(lawful, max_examples=15)
seeds = st.integers(0, 2**32 - 1)


def line_map(beam: Beam) -> dict[Effect, Piecewise]:
    effects = effects_of(beam)
    return dict(zip(effects, lines_of(beam, effects), strict=True))


def some(beam: Beam, seed: int) -> dict[Effect, Piecewise]:
    """Five lines of the beam."""
    effects = effects_of(beam)
    effects = tuple(Random(seed).sample(effects, min(5, len(effects))))
    return dict(zip(effects, lines_of(beam, effects), strict=True))


@lawful
@given(beams())
def test_the_reactions_carry_the_load(beam: Beam) -> None:
    """Sum of the reactions 1; about the left end, clockwise +: x - sum of R a - sum of C = 0."""
    zero = Piecewise.from_pieces([(0, beam.length, (0,))])
    forces = moments = zero
    for effect, line in line_map(beam).items():
        if effect.kind == "reaction":
            forces, moments = forces + line, moments + line * effect.station
        elif effect.kind == "moment reaction":
            moments = moments + line
    assert forces == Piecewise.from_pieces([(0, beam.length, (1,))])
    assert moments == Piecewise.from_pieces([(0, beam.length, (0, 1))])


@lawful
@given(beams())
def test_shear_is_the_slope_of_moment(beam: Beam) -> None:
    """Between neighbouring key stations that no load stands between, M grows by V times the way."""
    lines = line_map(beam)
    stations = beam.stations
    for one, two in itertools.pairwise(stations):
        start = face_at(lines, "moment", one.at, "right")
        end = face_at(lines, "moment", two.at, "left")
        shear = face_at(lines, "shear", one.at, "right")
        rise = lines[end] - lines[start] - lines[shear] * (two.at - one.at)
        for station in stations:
            for side in SIDES:
                beside = (station.at, side) not in ((one.at, "right"), (two.at, "left"))
                at_end = station.at in (0, beam.length)
                if beside and not at_end:
                    assert rise.value(station.at, side) == 0


def face_at(lines: dict[Effect, Piecewise], kind: str, at: Fraction, face: Face) -> Effect:
    there = [one for one in lines if (one.kind, one.station) == (kind, at)]
    return next(one for one in there if one.face in (face, None))


def mirrored(beam: Beam) -> Beam:
    length = beam.length

    def turned(places: tuple[Section, ...]) -> tuple[Section, ...]:
        return tuple(replace(one, at=length - one.at) for one in reversed(places))

    return replace(
        beam,
        supports=tuple(
            replace(one, at=length - one.at, face=MIRROR[one.face])
            for one in reversed(beam.supports)
        ),
        releases=tuple(replace(one, at=length - one.at) for one in reversed(beam.releases)),
        sections=turned(beam.sections),
    )


@lawful
@given(beams())
def test_mirror_image(beam: Beam) -> None:
    """Turned end for end, reactions and moments stay, shears and moment reactions change sign."""
    effects = effects_of(beam)
    images = [
        replace(
            one,
            at=one.at if one.at in beam.tags else str(beam.length - one.station),
            station=beam.length - one.station,
            face=MIRROR[one.face],
        )
        for one in effects
    ]
    lines = zip(effects, lines_of(beam, effects), lines_of(mirrored(beam), images), strict=True)
    for effect, line, image in lines:
        sign = -1 if effect.kind in ("shear", "moment reaction") else 1
        for station in beam.stations:
            there = beam.length - station.at
            assert line.left(station.at) == sign * image.right(there)
            assert line.right(station.at) == sign * image.left(there)


def share_of(load: MovingLoad) -> Fraction:
    (share,) = load.shares
    return share.value.value


def same(load: MovingLoad, one: Fraction, other: Fraction) -> bool:
    """Exactly, but for strips: they govern at a place of nine decimals, by the rate of change."""
    if any(train.strips for train in load.cases[0].trains):
        return abs(one - other) <= Fraction(1, 10**12) * (1 + abs(one))
    return one == other


@few
@given(beams(), trains(2), seeds)
def test_mirror_image_of_a_train(beam: Beam, load: MovingLoad, seed: int) -> None:
    """The other way round on the mirrored line a train does the same."""
    (case,) = load.cases
    turned = changed(
        load, headings=tuple("left" if one == "right" else "right" for one in case.headings)
    )
    for line in some(beam, seed).values():
        stops = [*zip(line.breaks, line.breaks[1:], line.pieces, strict=False)]
        image = Piecewise.from_pieces(
            (beam.length - end, beam.length - start, reversed_piece(piece, end - start))
            for start, end, piece in reversed(stops)
        )
        for sense in SENSES:
            ours = governing_of(line, load, sense).value
            assert same(load, ours, governing_of(image, turned, sense).value)


def reversed_piece(piece: tuple[Fraction, ...], length: Fraction) -> tuple[Fraction, ...]:
    """A straight piece read from its other end."""
    slope = piece[1] if len(piece) > 1 else Fraction(0)
    return piece[0] + slope * length, -slope


@few
@given(beams(), trains(2), seeds)
def test_superposition(beam: Beam, load: MovingLoad, seed: int) -> None:
    """What a train does at a place is the sum of what its axles and strips do there, each by
    itself; and what uniform load adds is what it adds without axles."""
    rng = Random(seed)
    (case,) = load.cases
    for line in some(beam, seed).values():
        position = place(rng, beam, load) if case.trains else None
        for sense in SENSES:
            if position is not None:
                whole = trains_value(line, case, position, sense)
                (train,) = case.trains
                parts = Fraction(0)
                for number, axle in enumerate(case.axles):
                    alone = replace(train, axles=(replace(axle, gap=None),), strips=())
                    parts += by_itself(line, case, alone, position, number, sense)
                for strip in train.strips:
                    number = 0 if strip.ahead else -1
                    nobody = replace(train.axles[0], acts=False)
                    alone = replace(train, axles=(nobody,), strips=(strip,))
                    parts += by_itself(line, case, alone, position, number, sense)
                assert whole == parts
            together = governing_of(line, load, sense).value
            axles = governing_of(line, changed(load, uniform=None), sense).value
            uniform = governing_of(line, changed(load, trains=()), sense).value
            assert together == axles + uniform


def by_itself(
    line: Piecewise, case: Case, train: Train, position: Position, axle: int, sense: Literal[1, -1]
) -> Fraction:
    """A train of one axle that stands where the numbered axle of the whole one does."""
    (group,) = position.groups
    alone = Position(
        position.heading, (position.stations[axle],), (replace(group, first=0, last=0),)
    )
    return trains_value(line, replace(case, trains=(train,)), alone, sense)


def place(rng: Random, beam: Beam, load: MovingLoad) -> Position:
    """Somewhere from first axle on to last axle off, its gaps anything that is allowed, often with
    an axle at a key station."""
    (case,) = load.cases
    heading = rng.choice(case.headings)
    gaps = [between(rng, beam, axle.gap) if axle.gap else Fraction(0) for axle in case.axles]
    offsets = tuple(itertools.accumulate(gaps))
    reach = offsets[-1]
    at = Fraction(rng.randint(0, 997), 997) * (beam.length + 2 * reach) - reach
    if rng.random() < 0.6:
        behind = rng.choice(offsets)
        at = rng.choice(beam.stations).at + (behind if heading == "right" else -behind)
    back = -1 if heading == "right" else 1
    group = Group(0, len(offsets) - 1, rng.choice(SIDES), rng.random() < 0.5, None, None)
    return Position(heading, tuple(at + back * offset for offset in offsets), (group,))


def between(rng: Random, beam: Beam, gap: Gap) -> Fraction:
    """A distance that the gap allows, as often as not at one of its ends."""
    if not gap.free or rng.random() < 0.5:
        return rng.choice(gap.ties).value
    greatest = gap.greatest or gap.least + beam.length
    return gap.least + Fraction(rng.randint(0, 97), 97) * (greatest - gap.least)


@few
@given(beams(), trains(2), seeds)
def test_no_random_position_beats_the_governing_one(
    beam: Beam, load: MovingLoad, seed: int
) -> None:
    rng = Random(seed)
    (case,) = load.cases
    grid = Fraction(1, 10**12) if case.trains and case.trains[0].strips else 0
    for line in some(beam, seed).values():
        best = {sense: governing_of(line, load, sense).value for sense in SENSES}
        without = {
            sense: governing_of(line, changed(load, trains=()), sense).value for sense in SENSES
        }
        for _ in range(25 if case.trains else 0):
            position = place(rng, beam, load)
            for sense in SENSES:
                reached = trains_value(line, case, position, sense) * share_of(load)
                assert sense * (reached + without[sense]) <= sense * best[sense] + grid


@lawful
@given(beams(), seeds)
def test_a_dummy_section_changes_nothing(beam: Beam, seed: int) -> None:
    effects = effects_of(beam)
    at = beam.length * Fraction(Random(seed).randint(1, 996), 997)
    dummy = Section("dummy", at, Typed("beam.sections[9].at"))
    more = replace(beam, sections=tuple(sorted((*beam.sections, dummy), key=lambda one: one.at)))
    assert lines_of(beam, effects) == lines_of(more, effects)


def scaled(beam: Beam, by: Fraction) -> Beam:
    return replace(
        beam,
        length=beam.length * by,
        supports=tuple(replace(one, at=one.at * by) for one in beam.supports),
        releases=tuple(replace(one, at=one.at * by) for one in beam.releases),
        sections=tuple(replace(one, at=one.at * by) for one in beam.sections),
    )


def in_metres(load: MovingLoad) -> MovingLoad:
    """Its lengths, and forces per length, by the metre instead of the foot."""

    def by(one: Given, factor: Fraction) -> Given:
        return replace(one, value=one.value * factor)

    def axle(one: Axle) -> Axle:
        gap = one.gap and replace(one.gap, ties=tuple(by(tie, FOOT) for tie in one.gap.ties))
        return replace(one, gap=gap)

    def strip(one: Strip) -> Strip:
        length = one.length and by(one.length, FOOT)
        return replace(
            one, start=by(one.start, FOOT), length=length, amount=by(one.amount, 1 / FOOT)
        )

    (case,) = load.cases
    return changed(
        load,
        trains=tuple(
            replace(one, axles=tuple(map(axle, one.axles)), strips=tuple(map(strip, one.strips)))
            for one in case.trains
        ),
        uniform=case.uniform and by(case.uniform, 1 / FOOT),
    )


@few
@given(beams(), trains(2), seeds)
def test_feet_and_metres(beam: Beam, load: MovingLoad, seed: int) -> None:
    """In metres the lines of forces stay, those of moments are 0.3048 times as high; the effect of
    a train with its spacings, and a uniform load per metre, in metres too."""
    metric = in_metres(load)
    lines = some(beam, seed)
    images = [replace(one, station=one.station * FOOT) for one in lines]
    for (effect, line), image in zip(
        lines.items(), lines_of(scaled(beam, FOOT), images), strict=True
    ):
        factor = FOOT if effect.kind in ("moment", "moment reaction") else 1
        for station in beam.stations:
            for side in SIDES:
                at = station.at
                assert image.value(at * FOOT, side) == line.value(at, side) * factor
        for sense in SENSES:
            value = governing_of(line, load, sense).value
            assert same(load, governing_of(image, metric, sense).value, value * factor)
