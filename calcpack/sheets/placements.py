"""Where the loads stand: governing positions axle by axle, and the summary of them."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from calcpack.derive.kinds import DECIMALS, EFFECT_KIND, LINE_KIND, QuantityKind
from calcpack.derive.steps import LoadGroup, PlacementGroup
from calcpack.exact.piecewise import Piecewise
from calcpack.exact.units import SYSTEMS
from calcpack.model.beam import Beam
from calcpack.model.loads import MovingLoad
from calcpack.model.request import Effect
from calcpack.moving.governing import Candidate, Governing
from calcpack.moving.placement import Group, Position, joined
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
from calcpack.sheets.bulk import placement_tables, tabulated
from calcpack.sheets.drawing import Drawing
from calcpack.sheets.figures import placement_figure
from calcpack.sheets.load_tables import load_blocks
from calcpack.sheets.summary_figure import summary_figure
from calcpack.sheets.tables import effect_title, step_table
from calcpack.solution import Solution
from calcpack.statics.system import symbol_of

SEARCHED = 9
"""Decimals of a place found where the rate of change is zero."""
MOST_TIES = 4
"""More ties are counted, not listed."""
STAYS_AWAY = "No position of the load works in this sense: it stays away."
EXTREMES = {1: "greatest", -1: "least"}


def summary_blocks(solution: Solution) -> tuple[Block, ...]:
    """For every effect the governing values, where the load stands, and the step that proves it."""
    units = SYSTEMS[solution.calculation.units]
    length = units["length"]
    columns = (
        Column("effect", width=4),
        Column("load", width=3),
        Column(""),
        Column("value", "right"),
        Column("unit"),
        Column("lead axle at", "right", unit=length),
        Column("heading"),
        Column("next", "right"),
        Column("proof", "right"),
    )
    rows = []
    proofs = solution.proofs
    for placement, found, digits in solution.extremes():
        group = proofs.get((placement.load.path, placement.effect, found.sense))
        if group is None:
            continue
        decimals = len(digits.partition(".")[2])
        case = f": {found.case.name}" if found.case and found.case.name else ""
        rows.append(
            (
                (effect_title(placement.effect),),
                (f"{placement.load.name}{case}",),
                (EXTREMES[found.sense],),
                (Value(found.value, None if "/" in digits else decimals),),
                (units[EFFECT_KIND[placement.effect.kind]],),
                *_lead(found),
                (Value(found.near[0].value, decimals),) if found.near else ("",),
                (Reference(group.number, group.steps[-1].id),),
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
        *((Table(columns, tuple(rows)),) if rows else ()),
        *_elsewhere(solution),
    )


def _elsewhere(solution: Solution) -> Iterator[Block]:
    """What is in tables, and the absolute maxima."""
    count = len(tabulated(solution))
    if count and solution.placements:
        words = f"{count} further effects stand in tables with the placements."
        yield Paragraph((words,))
    units = SYSTEMS[solution.calculation.units]
    rows = tuple(
        (
            (one.load.name,),
            (str(one.span),),
            (Value(one.section, DECIMALS["length"]),),
            (Value(one.found.value, DECIMALS["moment"]),),
        )
        for one in solution.along.absolutes
    )
    if rows:
        yield Paragraph(("Absolute maximum moment of each span:",), leads=True)
        columns = (
            Column("load", width=3),
            Column("span", "right", 1),
            Column("section at", "right", 2, units["length"]),
            Column("moment", "right", 2, units["moment"]),
        )
        yield Table(columns, rows)


def _sketch(solution: Solution) -> Iterator[Block]:
    """The beam with the greatest and least value of each effect over all loads."""
    units = SYSTEMS[solution.calculation.units]
    extremes: dict[Effect, dict[int, tuple[Fraction, str]]] = {}
    proofs = solution.proofs
    for placement, found, digits in solution.extremes():
        if (placement.load.path, placement.effect, found.sense) not in proofs:
            continue
        known = extremes.setdefault(placement.effect, {})
        value, _ = known.get(found.sense, (Fraction(0), ""))
        if found.sense not in known or found.sense * (found.value - value) > 0:
            known[found.sense] = found.value, digits
    entries = [
        (
            effect.station,
            symbol_of(effect),
            both[1][1],
            both[-1][1],
            units[EFFECT_KIND[effect.kind]],
        )
        for effect, both in extremes.items()
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
        if isinstance(group, LoadGroup):
            blocks += load_blocks(solution, group)
        elif isinstance(group, PlacementGroup):
            pair = swept[group.load.path, group.effect]
            blocks += _placement(solution, group, pair[0 if group.governing.sense > 0 else 1])
    return (*blocks, *placement_tables(solution))


def _lead(found: Governing) -> tuple[Text, Text]:
    if found.position is None:
        return ("stays away" if found.case is None else "no train",), ("",)
    position = found.position
    return (Value(position.lead_at, DECIMALS["length"]),), (position.heading,)


def _placement(solution: Solution, group: PlacementGroup, swept: float) -> Iterator[Block]:
    found, calculation = group.governing, solution.calculation
    units = SYSTEMS[calculation.units]
    title = f"{effect_title(group.effect)}: {EXTREMES[found.sense]} under {group.load.name}"
    yield Heading(2, (title,), group.number)
    if found.case is None:
        yield Paragraph((STAYS_AWAY,), leads=True)
    else:
        line = next(one.line for one in solution.lines if one.effect == group.effect)
        kind = LINE_KIND[group.effect.kind]
        what = f"{group.effect.kind} at {group.effect.at}"
        yield Figure(placed_figure(calculation.beam, line, found, what, kind, calculation.units))
        yield from _standing(group.load, found, units["length"])
    yield step_table(solution, group.steps)
    yield from _proof(solution, group, swept)


def placed_figure(
    beam: Beam, line: Piecewise, found: Governing, what: str, kind: QuantityKind, units: str
) -> Drawing:
    """The load where it governs, over the line of ``what``; ``kind`` is that of an ordinate."""
    on_beam = [s for s in (*found.axles, *found.concentrated) if s.standing == "counts"]
    strips = [stretch for share in found.strips for stretch in share.stretches]
    return placement_figure(
        beam,
        line,
        [(share.at, share.weight, share.ordinate) for share in on_beam],
        joined(sorted((*strips, *found.loaded))),
        what,
        SYSTEMS[units][kind],
        DECIMALS[kind],
        units,
        found.position.heading if found.position else "right",
    )


def _standing(load: MovingLoad, found: Governing, length: str) -> Iterator[Block]:
    case = found.case
    if case is not None and case.name and len(load.cases) > 1:
        yield Paragraph((f"Governing case: {case.name}.",), leads=True)
    if case is None or found.position is None:
        return
    position = found.position
    for group in position.groups:
        yield Paragraph(tuple(_group_words(position, group, length)), leads=True)
    for standing in ("off the beam", "neglected", "does not act"):
        axles = [str(s.axle + 1) for s in found.axles if s.standing == standing and s.weight]
        if axles:
            yield Paragraph((f"Axle {', '.join(axles)}: {standing}.",), leads=True)


def _group_words(position: Position, group: Group, length: str) -> Iterator[str | Value]:
    """Where axles that are held together stand."""
    first, last = group.first + 1, group.last + 1
    axles = f"axle {first}" if first == last else f"axles {first} to {last}"
    alone = len(position.groups) == 1
    held = "" if alone or first == last else f", {axles} held together"
    if group.mark is None:
        yield f"The rate of change is zero with axle {first} at station "
        yield Value(position.stations[group.first], SEARCHED, length)
        yield f" (to {SEARCHED} decimals){held}, heading {position.heading}."
        return
    what = "A strip's end" if group.anchor is None else f"Axle {group.anchor + 1}"
    yield f"{what} stands at station "
    yield Value(group.mark, DECIMALS["length"], length)
    yield f"{held}, heading {position.heading}; axles at a jump of the line stand just "
    yield f"{group.side} of it."


def _proof(solution: Solution, group: PlacementGroup, swept: float) -> Iterator[Block]:
    found = group.governing
    step = group.steps[-1]
    unit = SYSTEMS[solution.calculation.units][step.kind]
    decimals = DECIMALS[step.kind]
    words: list[str | Value] = []
    if found.case is not None:
        words += [
            "Static effect, without allowance, factors and distribution: ",
            Value(found.static, decimals, unit),
            ". ",
        ]
    if found.looked_at:
        words.append(f"{found.looked_at} places were looked at. ")
    if found.rates is not None:
        words += [
            "Change of the static effect of axles and trailing loads per unit of travel to the "
            "right: left of here ",
            Value(found.rates[0], decimals),
            ", right of here ",
            Value(found.rates[1], decimals),
            ". ",
        ]
    words += _ties(found, SYSTEMS[solution.calculation.units]["length"])
    sixth = f"{swept:.6g}".replace("-", "−") if swept else "0"
    words.append(f"A sweep in small steps over the stiffness ordinates finds {sixth} {unit}.")
    yield Paragraph(tuple(words))
    if found.near:
        cases = len(group.load.cases) > 1
        columns = (
            Column("near candidates", width=2),
            *((Column("case", width=3),) if cases else ()),
            Column("at station", "right"),
            Column("heading"),
            Column("value", "right", unit=unit),
        )
        rows = tuple(
            (
                (_met(one),),
                *(((one.case.name,),) if cases else ()),
                (Value(_mark(one), DECIMALS["length"]),),
                (one.position.heading,),
                (Value(one.value, decimals),),
            )
            for one in found.near
        )
        yield Table(columns, rows)


def _met(candidate: Candidate) -> str:
    group = candidate.position.groups[0]
    if group.mark is None:
        return "rate zero"
    return "strip's end" if group.anchor is None else f"axle {group.anchor + 1}"


def _mark(candidate: Candidate) -> Fraction:
    mark = candidate.position.groups[0].mark
    return candidate.position.lead_at if mark is None else mark


def _ties(found: Governing, length: str) -> Iterator[str | Value]:
    """Where else the same value is found: a few places, or how many."""
    if not found.ties:
        return
    if len(found.ties) > MOST_TIES:
        yield f"The same value is found at {len(found.ties)} other places. "
        return
    yield "The same value is found with the lead axle at "
    for number, tie in enumerate(found.ties):
        first, last = tie.first.position, tie.last.position
        yield ", at " if number else ""
        yield Value(first.lead_at, DECIMALS["length"], length)
        if first.lead_at != last.lead_at:
            yield " to "
            yield Value(last.lead_at, DECIMALS["length"], length)
        yield f" heading {first.heading}"
        yield f" ({tie.first.case.name})" if tie.first.case is not found.case else ""
    yield ". "
