"""Moving loads for tests: by hand, at random, and for hypothesis."""

from __future__ import annotations

import itertools
from collections.abc import Iterator, Sequence
from dataclasses import fields, is_dataclass, replace
from fractions import Fraction
from random import Random
from typing import Any, Literal

from beams import Place
from hypothesis import strategies as st

from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.loads import (
    Axle,
    Case,
    Gap,
    Given,
    Heading,
    MovingLoad,
    Part,
    Relieving,
    Rule,
    Share,
    Strip,
    Train,
)
from calcpack.moving.critical import governing
from calcpack.moving.governing import Governing
from calcpack.moving.placement import Group, Position
from calcpack.moving.target import Target

Spacing = Place | tuple[Place, Place | None] | list[Place]
"""A number, a range (without upper bound: None), or a list."""


def given(value: Place, path: str) -> Given:
    return Given(Fraction(value), path)


def make_gap(spacing: Spacing, path: str) -> Gap:
    if isinstance(spacing, list):
        return Gap(tuple(given(one, f"{path}.list[{i}]") for i, one in enumerate(spacing)))
    if isinstance(spacing, tuple):
        least, greatest = spacing
        if greatest is None:
            return Gap((given(least, f"{path}.least"),), free=True)
        return Gap((given(least, f"{path}[0]"), given(greatest, f"{path}[1]")), free=True)
    return Gap((given(spacing, path),))


def make_train(
    *axles: tuple[Place, Spacing], strips: Sequence[Strip] = (), path: str = "moving[0]"
) -> Train:
    """Axles from (weight, spacing to the axle ahead), lead axle first."""
    made = [
        Axle(
            given(weight, f"{path}.axles[{i}].weight"),
            make_gap(spacing, f"{path}.axles[{i}].spacing") if i else None,
        )
        for i, (weight, spacing) in enumerate(axles)
    ]
    if not made:
        made = [Axle(given(0, ""), None, acts=False)]
    return Train("", tuple(made), tuple(strips))


def make_strip(
    load: Place,
    behind: Place | None = None,
    ahead: Place | None = None,
    length: Place | None = None,
    broken: bool = False,
    number: int = 0,
) -> Strip:
    path = f"moving[0].trailing[{number}]"
    start = (
        given(behind, f"{path}.behind")
        if behind is not None
        else given(ahead or 0, f"{path}.ahead")
    )
    reach = None if length is None else given(length, f"{path}.length")
    return Strip(start, reach, given(load, f"{path}.load"), behind is None, broken)


def make_load(
    *axles: tuple[Place, Spacing],
    uniform: Place = 0,
    headings: tuple[Heading, ...] = ("right", "left"),
    relieving: Relieving = "count",
    allowance: Place = 0,
    distribution: Place = 1,
    number: int = 0,
    strips: Sequence[Strip] = (),
) -> MovingLoad:
    """A moving load of one case from (weight, spacing to the axle ahead), lead axle first."""
    path = f"moving[{number}]"
    case = Case(
        "",
        (make_train(*axles, strips=strips, path=path),) if axles or strips else (),
        (),
        given(uniform, f"{path}.uniform") if Fraction(uniform) else None,
        (),
        headings,
        relieving,
        (("axles", given(allowance, f"{path}.allowance")),) if Fraction(allowance) else (),
    )
    shares = (Share(given(distribution, f"{path}.distribution")),)
    return MovingLoad(f"Load {number + 1}", (case,), shares, path)


def numbers_of(value: object) -> Iterator[Given]:
    """Every number that was stated in a load or a part of one."""
    if isinstance(value, Given) and value.rule is not None:
        yield from numbers_of(value.rule)
    elif isinstance(value, Given):
        yield value
    elif isinstance(value, tuple):
        for one in value:
            yield from numbers_of(one)
    elif is_dataclass(value):
        for part in fields(value):
            yield from numbers_of(getattr(value, part.name))


def changed(load: MovingLoad, **changes: Any) -> MovingLoad:
    """The load with its one case changed."""
    (case,) = load.cases
    return replace(load, cases=(replace(case, **changes),))


def governing_of(line: Piecewise, load: MovingLoad, sense: Literal[1, -1]) -> Governing:
    """The governing placement on one line, of an effect that any case is for."""
    return governing([Target(line)], load, sense)[0]


def offsets_of(load: MovingLoad) -> tuple[Fraction, ...]:
    """The distance of each axle of the first case behind the foremost, its gaps at their least."""
    gaps = (axle.gap.least if axle.gap else Fraction(0) for axle in load.cases[0].axles)
    return tuple(itertools.accumulate(gaps))


def stand(
    load: MovingLoad, heading: Heading, lead_at: Place, side: Side = "left", ends_count: bool = True
) -> Position:
    """Where the first case stands as one, its gaps at their least."""
    offsets = offsets_of(load)
    back = -1 if heading == "right" else 1
    stations = tuple(Fraction(lead_at) + back * offset for offset in offsets)
    return Position(heading, stations, (Group(0, len(stations) - 1, side, ends_count, None, None),))


def random_train(rng: Random, varying: int = 0) -> MovingLoad:
    """One to six axles, now and then none but a uniform load; all choices of a moving load.

    With ``varying`` above 0 up to so many spacings are ranges, lists or open, the train has up to
    eight axles, and now and then loads travel ahead of it or behind.
    """
    count = rng.randint(1, 8 if varying else 6)
    uniform = Fraction(rng.choice((0, 0, rng.randint(1, 40))), 10)
    if uniform and rng.random() < 0.2:
        count = 0
    headings: tuple[tuple[Heading, ...], ...] = (("right",), ("left",), ("right", "left"))
    spacings: list[Spacing] = [_tenths(rng, 4, 120) for _ in range(count)]
    for _ in range(rng.randint(1, varying) if varying and count > 1 else 0):
        spacings[rng.randrange(1, count)] = _varying(rng)
    return make_load(
        *((_tenths(rng, 10, 400), spacing) for spacing in spacings),
        uniform=uniform,
        headings=rng.choice(headings),
        relieving=rng.choice(("count", "neglect")),
        allowance=Fraction(rng.randint(0, 40), 100),
        distribution=Fraction(rng.randint(30, 100), 100),
        strips=_strips(rng) if varying and count and rng.random() < 0.4 else (),
    )


def random_load(rng: Random, varying: int = 2) -> MovingLoad:
    """As ``random_train``, with all that a case may have besides: axles that do not act, a second
    train behind the first, floating forces, factors, an allowance for each part."""
    load = random_train(rng, varying)
    (case,) = load.cases
    trains, gaps = case.trains, case.gaps
    if trains and rng.random() < 0.3:
        (more,) = random_train(rng, 1).cases
        trains += elsewhere(more.trains, "moving[0].second")
        gaps += (make_gap(_varying(rng), "moving[0].apart"),) * len(more.trains)
    trains = tuple(
        replace(one, axles=tuple(_perhaps_idle(rng, axle) for axle in one.axles)) for one in trains
    )
    parts: tuple[Part, ...] = ("axles", "trailing", "uniform")
    allowances = tuple(
        (part, given(Fraction(rng.randint(1, 40), 100), f"moving[0].allowance.{part}"))
        for part in parts
        if rng.random() < 0.5
    )
    forces = [given(_tenths(rng, 10, 200), f"moving[0].forces[{i}]") for i in range(2)]
    factors = [given(Fraction(rng.randint(50, 120), 100), f"moving[0].k[{i}]") for i in range(2)]
    case = replace(
        case,
        trains=trains,
        gaps=gaps,
        allowances=allowances,
        concentrated=tuple(forces[: rng.choice((0, 0, 0, 1, 2))]),
        factors=tuple(factors[: rng.choice((0, 0, 1, 2))]),
    )
    return replace(load, cases=(case,))


def round_load(rng: Random) -> MovingLoad:
    """Two to four axles in whole numbers, mostly alike, so that many meet something at once."""
    spacings: tuple[Spacing, ...] = (2, 5, 10, (5, 10), (2, None), [5, 10], (10, None))
    return make_load(
        *((rng.choice((10, 10, 20)), rng.choice(spacings)) for _ in range(rng.randint(2, 4))),
        uniform=rng.choice((0, 1)),
        relieving=rng.choice(("count", "neglect")),
        strips=[make_strip(1, rng.choice((0, 5)), length=rng.choice((5, 10, None)))]
        if rng.random() < 0.4
        else (),
    )


def _perhaps_idle(rng: Random, axle: Axle) -> Axle:
    return replace(axle, acts=rng.random() < 0.9)


def ruled(rng: Random, load: MovingLoad) -> MovingLoad:
    """The load with every allowance, factor and uniform load, and the weight of the first axle,
    given by a rule for a length, within a bound or at it."""
    (case,) = load.cases

    def by_rule(one: Given) -> Given:
        path = f"{one.path}.rule"
        rule = Rule(
            given(rng.randint(3, 60), f"{path}.length"),
            constant=given(_tenths(rng, 1, 9), f"{path}.constant"),
            per_length=given("0.01", f"{path}.per_length") if rng.random() < 0.3 else None,
            per_square=given("0.0001", f"{path}.per_square") if rng.random() < 0.3 else None,
            over=given(rng.randint(2, 50), f"{path}.over") if rng.random() < 0.6 else None,
            beside=given(rng.randint(1, 99), f"{path}.beside") if rng.random() < 0.5 else None,
            least=given("0.8", f"{path}.least") if rng.random() < 0.4 else None,
            most=given("1.1", f"{path}.most") if rng.random() < 0.4 else None,
        )
        return Given(rule.value, path, rule)

    trains = case.trains
    if trains:
        first, *others = trains[0].axles
        lead = replace(first, weight=by_rule(first.weight))
        trains = (replace(trains[0], axles=(lead, *others)), *trains[1:])
    return changed(
        load,
        trains=trains,
        uniform=case.uniform and by_rule(case.uniform),
        allowances=tuple((part, by_rule(one)) for part, one in case.allowances),
        factors=tuple(map(by_rule, case.factors)),
    )


def elsewhere(value: Any, path: str) -> Any:
    """A part of a load, its numbers at paths of their own."""
    if isinstance(value, Given):
        return replace(value, path=value.path.replace("moving[0]", path, 1))
    if isinstance(value, tuple):
        return tuple(elsewhere(one, path) for one in value)
    if is_dataclass(value) and not isinstance(value, type):
        return replace(
            value, **{f.name: elsewhere(getattr(value, f.name), path) for f in fields(value)}
        )
    return value


def _tenths(rng: Random, least: int, most: int) -> Fraction:
    return Fraction(rng.randint(least, most), 10)


def _varying(rng: Random) -> Spacing:
    least = _tenths(rng, 4, 60)
    if (form := rng.random()) < 0.3:
        return (least, None)
    if form < 0.7:
        return (least, least + _tenths(rng, 1, 90))
    return [least + step for step in sorted(rng.sample(range(30), rng.randint(2, 4)))]


def _strips(rng: Random) -> list[Strip]:
    strips = []
    for number in range(rng.randint(1, 2)):
        length = _tenths(rng, 5, 200) if rng.random() < 0.5 else None
        start = _tenths(rng, 0, 40)
        ahead, behind = (start, None) if rng.random() < 0.4 else (None, start)
        broken = rng.random() < 0.4
        strips.append(make_strip(_tenths(rng, 1, 40), behind, ahead, length, broken, number=number))
    return strips


def trains(varying: int = 0) -> st.SearchStrategy[MovingLoad]:
    """Moving loads, for hypothesis."""
    return st.integers(0, 2**32 - 1).map(lambda seed: random_train(Random(seed), varying))
