"""The steps of a placement: where each axle stands, its ordinate, and the sums."""

from __future__ import annotations

from bisect import bisect_left

from calcpack.derive.book import Book
from calcpack.derive.kinds import EFFECT_KIND, LINE_KIND, QuantityKind
from calcpack.derive.shape import Shape
from calcpack.derive.steps import (
    AreaGroup,
    PlacementGroup,
    Step,
    TrainGroup,
)
from calcpack.exact.formula import ONE, ZERO, Formula, Symbol, constant, total
from calcpack.model.loads import MovingLoad
from calcpack.moving.critical import Candidate, Governing
from calcpack.moving.placement import AxleShare
from calcpack.statics.system import key_of


def train_group(book: Book, load: MovingLoad) -> TrainGroup:
    """Write the distance of each axle behind the lead axle, spacing by spacing."""
    number = book.open_group()
    steps: list[Step] = []
    for index, offset in enumerate(load.offsets):
        formula: Formula = ZERO
        if index:
            path = f"{load.path}.axles[{index}].spacing"
            spacing = book.given(path, Symbol("a", str(index + 1)), "length")
            formula = spacing if index == 1 else book.cite(steps[-1]) + spacing
        key, symbol = f"train/{load.path}/offset={index + 1}", Symbol("d", str(index + 1))
        steps.append(book.find(key, symbol, formula, "length", offset, f"train/{load.path}"))
    group = TrainGroup(number, load, tuple(steps))
    book.close_group(group)
    return group


def placement_group(
    book: Book,
    train: TrainGroup,
    areas: AreaGroup,
    shape: Shape,
    governing: Governing,
) -> PlacementGroup:
    """Write the governing value from the inputs: places, ordinates, sum, factors."""
    number = book.open_group()
    load, effect = train.load, areas.effect
    kind = EFFECT_KIND[effect.kind]
    extreme = "max" if governing.sense > 0 else "min"
    root = f"placement/{load.path}/{key_of(effect)}/{extreme}"
    steps: list[Step] = []
    axles: Formula = ZERO
    if governing.chosen is not None:
        steps += _places(book, root, train, areas, governing.chosen, governing.shares)
        places = {step.key: step for step in steps}
        terms: list[tuple[int, Formula]] = []
        for index, share in enumerate(governing.shares):
            if share.standing != "off the beam":
                at = places[f"{root}/axle={index + 1}"]
                steps.append(_ordinate(book, root, shape, governing, index, share, at))
                if share.standing == "counts":
                    path = f"{load.path}.axles[{index}].weight"
                    weight = book.given(path, Symbol("W", str(index + 1)), "force")
                    terms.append((1, weight * book.cite(steps[-1])))
        summed = book.find(f"{root}/axles", Symbol("E", "a"), total(terms), kind, governing.axles)
        steps.append(summed)
        axles = book.cite(summed)
    steps += _value(book, root, load, areas, governing, axles, kind)
    group = PlacementGroup(number, load, effect, governing, tuple(steps))
    book.close_group(group)
    return group


def _places(
    book: Book,
    root: str,
    train: TrainGroup,
    areas: AreaGroup,
    chosen: Candidate,
    shares: tuple[AxleShare, ...],
) -> list[Step]:
    """The lead axle's station from the axle that stands at a breakpoint, then every axle's."""
    zeros = {step.value: step for step in areas.parts if "/zero=" in step.key}
    mark = chosen.breakpoint
    if mark is None:
        stands = constant(chosen.position.lead_at)
    else:
        stands = book.cite(zeros[mark]) if mark in zeros else book.place(mark)
    sign = 1 if chosen.position.heading == "right" else -1
    lead: Formula = stands
    if chosen.axle:
        offset = book.cite(train.steps[chosen.axle])
        lead = stands + offset if sign > 0 else stands - offset
    column = f"{root}/places"
    first = book.find(
        f"{root}/axle=1", Symbol("z", "1"), lead, "length", chosen.position.lead_at, column
    )
    steps = [first]
    for index, share in enumerate(shares[1:], start=1):
        offset = book.cite(train.steps[index])
        formula = book.cite(first) - offset if sign > 0 else book.cite(first) + offset
        symbol = Symbol("z", str(index + 1))
        steps.append(
            book.find(f"{root}/axle={index + 1}", symbol, formula, "length", share.at, column)
        )
    return steps


def _ordinate(
    book: Book,
    root: str,
    shape: Shape,
    governing: Governing,
    index: int,
    share: AxleShare,
    at: Step,
) -> Step:
    """The line's ordinate under one axle: that of a key station, or between its two neighbours."""
    assert governing.chosen is not None
    side = governing.chosen.position.side
    stops = [station.at for station in book.beam.stations]
    position = bisect_left(stops, share.at)
    effect = shape.effect
    if stops[position] == share.at:
        formula: Formula = book.ordinate(effect, share.at, side)
    else:
        formula = shape.between(book, stops[position - 1], stops[position], book.cite(at))
    key, symbol = f"{root}/ordinate={index + 1}", Symbol("y", str(index + 1))
    column = f"{root}/ordinates"
    return book.find(key, symbol, formula, LINE_KIND[effect.kind], share.ordinate, column)


def _value(
    book: Book,
    root: str,
    load: MovingLoad,
    areas: AreaGroup,
    governing: Governing,
    axles: Formula,
    kind: QuantityKind,
) -> list[Step]:
    """(axles x (1 + allowance) + uniform) x distribution."""
    steps: list[Step] = []
    summed: Formula = ZERO
    if governing.axles:
        allowance = book.given(f"{load.path}.allowance", Symbol("I"), "number")
        summed = axles * (ONE + allowance)
    if governing.uniform:
        intensity = book.given(f"{load.path}.uniform", Symbol("w"), "line load")
        area = book.cite(areas.positive if governing.sense > 0 else areas.negative)
        key, symbol = f"{root}/uniform", Symbol("E", "w")
        step = book.find(key, symbol, intensity * area, kind, governing.uniform)
        steps.append(step)
        summed = summed + book.cite(step) if governing.axles else book.cite(step)
    if summed is not ZERO:
        summed = summed * book.given(f"{load.path}.distribution", Symbol("g"), "number")
    symbol = Symbol("E", "max" if governing.sense > 0 else "min")
    steps.append(book.find(root, symbol, summed, kind, governing.value))
    return steps
