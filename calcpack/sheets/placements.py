"""Where the loads stand: governing positions axle by axle, and the summary of them."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from calcpack.derive.kinds import DECIMALS, LINE_KIND
from calcpack.derive.steps import PlacementGroup, Step, TrainGroup
from calcpack.exact.units import SYSTEMS
from calcpack.model.loads import MovingLoad
from calcpack.model.request import Effect
from calcpack.moving.critical import Candidate, Governing, total_effect
from calcpack.sheets.blocks import (
    Block,
    Column,
    Figure,
    Heading,
    Paragraph,
    Reference,
    Table,
    Text,
    Value,
)
from calcpack.sheets.figures import placement_figure
from calcpack.sheets.summary_figure import summary_figure
from calcpack.sheets.tables import effect_title, result_of, step_table
from calcpack.solution import Solution
from calcpack.statics.system import symbol_of

SEARCHED = 9
"""Decimals of a place found where the rate of change is zero."""
EXTREMES = {1: "greatest", -1: "least"}


def summary_blocks(solution: Solution) -> tuple[Block, ...]:
    """For every effect the governing values, where the load stands, and the step that proves it."""
    units = SYSTEMS[solution.calculation.units]
    length = units["length"]
    columns = (
        Column("effect", width=4),
        Column("load", width=2),
        Column(""),
        Column("value", "right"),
        Column("unit"),
        Column("lead axle at", "right", unit=length),
        Column("heading"),
        Column("next", "right"),
        Column("proof", "right"),
    )
    rows = []
    for group in solution.derivation.groups:
        if isinstance(group, PlacementGroup):
            found, step = group.governing, group.steps[-1]
            nearest = _value_of(group.load, found, found.near[0]) if found.near else None
            result = result_of(solution, step)
            rows.append(
                (
                    (effect_title(group.effect),),
                    (group.load.name,),
                    (EXTREMES[found.sense],),
                    (result,),
                    (units[step.kind],),
                    *_lead(found),
                    (Value(nearest, result.decimals),) if nearest is not None else ("",),
                    (Reference(group.number, step.id),),
                )
            )
    return (
        Heading(1, ("Summary of results",)),
        Paragraph(
            (
                "Governing values of the travelling loads, with allowance and distribution. A load "
                "may stay away, so that no greatest value is below zero and no least above it.",
            )
        ),
        *_sketch(solution),
        Table(columns, tuple(rows)),
    )


def _sketch(solution: Solution) -> Iterator[Block]:
    """The beam with the greatest and least value of each effect over all loads."""
    units = SYSTEMS[solution.calculation.units]
    extremes: dict[Effect, dict[int, Step]] = {}
    for group in solution.derivation.groups:
        if isinstance(group, PlacementGroup):
            sense, step = group.governing.sense, group.steps[-1]
            known = extremes.setdefault(group.effect, {}).setdefault(sense, step)
            if sense * ((step.value or 0) - (known.value or 0)) > 0:
                extremes[group.effect][sense] = step
    entries = [
        (
            effect.station,
            symbol_of(effect),
            solution.derivation.result(found[1]),
            solution.derivation.result(found[-1]),
            units[found[1].kind],
        )
        for effect, found in extremes.items()
    ]
    if entries:
        calculation = solution.calculation
        yield Figure(summary_figure(calculation.beam, entries, calculation.units))


def placement_blocks(solution: Solution) -> tuple[Block, ...]:
    """The governing position of each load for each effect, with its proof."""
    blocks: list[Block] = [Heading(1, ("Placements",))]
    if not solution.placements:
        return (*blocks, Paragraph(("No travelling load was stated.",)))
    swept = {(found.load.path, found.effect): found.swept for found in solution.placements}
    for group in solution.derivation.groups:
        if isinstance(group, TrainGroup):
            blocks += _train(solution, group)
        elif isinstance(group, PlacementGroup):
            pair = swept[group.load.path, group.effect]
            blocks += _placement(solution, group, pair[0 if group.governing.sense > 0 else 1])
    return tuple(blocks)


def _lead(found: Governing) -> tuple[Text, Text]:
    if found.chosen is None:
        return ("uniform only" if found.uniform else "stays away",), ("",)
    position = found.chosen.position
    return (Value(position.lead_at, DECIMALS["length"]),), (position.heading,)


def _train(solution: Solution, group: TrainGroup) -> Iterator[Block]:
    load = group.load
    yield Heading(2, ("Train: ", load.name), group.number)
    if group.steps:
        yield Paragraph(("Distance of each axle behind the lead axle.",))
        yield step_table(solution, group.steps)
    relieving = "count" if load.relieving == "count" else "are neglected one by one"
    yield Paragraph((f"Axles that lessen the effect {relieving}.",))


def _placement(solution: Solution, group: PlacementGroup, swept: float) -> Iterator[Block]:
    found, calculation = group.governing, solution.calculation
    units = SYSTEMS[calculation.units]
    title = f"{effect_title(group.effect)}: {EXTREMES[found.sense]} under {group.load.name}"
    yield Heading(2, (title,), group.number)
    if found.chosen is None and not found.uniform:
        yield Paragraph(("No position of the load works in this sense: it stays away.",))
    else:
        line = next(one.line for one in solution.lines if one.effect == group.effect)
        kind = LINE_KIND[group.effect.kind]
        on_beam = [s for s in found.shares if s.standing == "counts"]
        yield Figure(
            placement_figure(
                calculation.beam,
                line,
                [(share.at, share.weight, share.ordinate) for share in on_beam],
                found.loaded,
                f"{group.effect.kind} at {group.effect.at}",
                units[kind],
                DECIMALS[kind],
                calculation.units,
                found.chosen.position.heading if found.chosen else "right",
            )
        )
        yield from _standing(found, units["length"])
    yield step_table(solution, group.steps)
    yield from _proof(solution, group, swept)


def _standing(found: Governing, length: str) -> Iterator[Block]:
    if found.chosen is None:
        return
    position = found.chosen.position
    words: Text
    if found.chosen.breakpoint is None:
        words = (
            "The rate of change is zero with the lead axle at station ",
            Value(position.lead_at, SEARCHED, length),
            f" (to {SEARCHED} decimals), the train heading {position.heading}.",
        )
    else:
        words = (
            f"Axle {found.chosen.axle + 1} stands at station ",
            Value(found.chosen.breakpoint, DECIMALS["length"], length),
            f", the train heading {position.heading}; axles at a jump of the line stand just "
            f"{position.side} of it.",
        )
    yield Paragraph(words)
    for standing in ("off the beam", "neglected"):
        axles = [str(n) for n, s in enumerate(found.shares, start=1) if s.standing == standing]
        if axles:
            yield Paragraph((f"Axle {', '.join(axles)}: {standing}.",))


def _proof(solution: Solution, group: PlacementGroup, swept: float) -> Iterator[Block]:
    found = group.governing
    step = group.steps[-1]
    unit = SYSTEMS[solution.calculation.units][step.kind]
    decimals = DECIMALS[step.kind]
    words: list[str | Value] = [f"{found.candidates} positions were looked at. "]
    if found.rates is not None:
        words += [
            "Change of the axles' static effect per unit of travel to the right: left of here ",
            Value(found.rates[0], decimals),
            ", right of here ",
            Value(found.rates[1], decimals),
            ". ",
        ]
    if found.ties:
        words.append(f"The same value is found at {_others(len(found.ties))}. ")
    sixth = f"{swept:.6g}".replace("-", "−") if swept else "0"
    words.append(f"A sweep in small steps over the stiffness ordinates finds {sixth} {unit}.")
    yield Paragraph(tuple(words))
    if found.near:
        columns = (
            Column("near candidates"),
            Column("at station", "right"),
            Column("heading"),
            Column("value", "right", unit=unit),
        )
        rows = tuple(
            (
                ("rate zero" if one.breakpoint is None else f"axle {one.axle + 1}",),
                (Value(one.breakpoint or one.position.lead_at, DECIMALS["length"]),),
                (one.position.heading,),
                (Value(_value_of(group.load, found, one), decimals),),
            )
            for one in found.near
        )
        yield Table(columns, rows)


def _others(count: int) -> str:
    return "one other position" if count == 1 else f"{count} other positions"


def _value_of(load: MovingLoad, found: Governing, candidate: Candidate) -> Fraction:
    return total_effect(load, candidate.axles_effect, found.uniform)
