"""Redundants: the released beam, its states, flexibilities, compatibility; settlements."""

from __future__ import annotations

import itertools
from collections.abc import Iterator
from dataclasses import replace

from calcpack.derive.kinds import DECIMALS, EFFECT_KIND
from calcpack.derive.steps import LineGroup, SettlementGroup, StepGroup
from calcpack.elastic.released import Released, State
from calcpack.exact.formula import Symbol
from calcpack.exact.piecewise import Piecewise
from calcpack.exact.units import SYSTEMS
from calcpack.model.beam import Beam, Release, Section, Support, SupportKind, Typed
from calcpack.model.request import Effect
from calcpack.sheets.blocks import (
    Block,
    Column,
    Equation,
    Figure,
    Heading,
    Paragraph,
    Table,
    Value,
)
from calcpack.sheets.drawing import Drawing
from calcpack.sheets.figures import beam_figure, line_figure
from calcpack.sheets.tables import effect_title, step_table, with_symbols
from calcpack.solution import Solution
from calcpack.statics.system import symbol_of

RULE = (
    "Redundants by rule, each taken if it leaves the released beam stable by exact rank: moments "
    "over supports, then couples of supports, then reactions."
)
STATED = "Redundants as stated by the preparer; the released beam is stable by exact rank."
METHOD = (
    "Force method: the released beam under the load, closed again by its redundants. All "
    "flexibilities and deflections are taken times the stiffness EI_0 of the first stretch, so "
    "that only ratios of stiffness enter; a stiffness that is not stated is uniform."
)


def redundant_blocks(solution: Solution) -> tuple[Block, ...]:
    """The force method; no blocks for a determinate beam of which no deflection is asked."""
    if solution.method is None:
        return ()
    groups = itertools.takewhile(
        lambda group: not isinstance(group, LineGroup), solution.derivation.groups
    )
    written = [group for group in groups if isinstance(group, StepGroup)]
    return (
        Heading(1, ("Redundants" if solution.system.redundants else "Elastic states",)),
        *_chosen(solution),
        *itertools.chain.from_iterable(group_blocks(solution, group) for group in written),
    )


def _chosen(solution: Solution) -> Iterator[Block]:
    calculation, redundants = solution.calculation, solution.system.redundants
    yield Paragraph(with_symbols(solution, METHOD))
    if not redundants:
        return
    yield Paragraph((RULE if calculation.redundants is None else STATED,))
    columns = (Column("redundant", width=1), Column("what it is", width=4))
    yield Table(
        columns,
        tuple(
            ((Symbol("X", str(number)),), (effect_title(one), ": ", symbol_of(one)))
            for number, one in enumerate(redundants, start=1)
        ),
    )
    released = released_beam(calculation.beam, redundants)
    drawing = beam_figure(released, calculation.units)
    yield Figure(replace(drawing, caption=drawing.caption.replace("The beam", "Released beam")))


def group_blocks(solution: Solution, group: StepGroup) -> Iterator[Block]:
    """A group of steps: words, statements in symbols, the state drawn, the steps with numbers."""
    yield Heading(2, with_symbols(solution, group.title), group.number)
    yield Paragraph(with_symbols(solution, group.words), leads=True)
    for step in group.statements:
        yield Equation(step, step.condition)
    if (
        group.state is not None
        and solution.method is not None
        and any(map(any, group.state.moments))
    ):
        yield Figure(_diagram(solution, solution.method.released, group.state, group.mark))
    if group.found:
        yield step_table(solution, group.found)


def _diagram(solution: Solution, released: Released, state: State, mark: str) -> Drawing:
    """The state's moments along the beam, drawn as a line is."""
    pieces = [
        (one.start, one.end, (a, (b - a) / one.length))
        for one, (a, b) in zip(released.segments, state.moments, strict=True)
    ]
    units = solution.calculation.units
    drawing = line_figure(
        solution.calculation.beam, Piecewise.from_pieces(pieces), f"m_{mark}", "", 3, units
    )
    caption = f"Moments m_{mark} along the released beam; sagging upward in grey, hogging hatched."
    alt = drawing.alt.replace("Influence line of", "Moments")
    return replace(drawing, caption=caption, alt=alt)


def released_beam(beam: Beam, redundants: tuple[Effect, ...]) -> Beam:
    """The beam as it is drawn when its redundants are released; every station keeps its name."""
    supports: list[Support] = []
    releases: list[Release] = list(beam.releases)
    sections: list[Section] = list(beam.sections)
    for support in beam.supports:
        gone = [one for one in redundants if one.station == support.at]
        kinds = {one.kind for one in gone}
        moments = sum(one.kind == "moment" for one in gone)
        vertical = support.holds_vertical and "reaction" not in kinds
        rotation = support.holds_rotation and "moment reaction" not in kinds and moments < 2
        if moments:
            releases.append(Release(support.name, support.at, "hinge", Typed("")))
        face = support.face
        if moments == 1 and support.holds_rotation:
            only = next(one.face for one in gone if one.kind == "moment")
            face = "right" if only == "left" else "left"
        kinds_left: dict[tuple[bool, bool], SupportKind] = {
            (True, True): "fixed",
            (True, False): "roller",
            (False, True): "guided",
        }
        kind = kinds_left.get((vertical, rotation))
        if not gone:
            supports.append(support)
        elif kind is None:
            sections.append(Section(support.name, support.at, support.source))
        else:
            shown = support.kind if (support.kind == "pin" and vertical) else kind
            supports.append(replace(support, kind=shown, face=face if rotation else None))
    return replace(
        beam,
        supports=tuple(supports),
        releases=tuple(sorted(releases, key=lambda one: one.at)),
        sections=tuple(sorted(sections, key=lambda one: one.at)),
    )


def permanent_blocks(solution: Solution) -> tuple[Block, ...]:
    """What settlements cause, case by case; no blocks where there are none."""
    if not solution.settled:
        return ()
    return Heading(1, ("Permanent loads",)), *_settlements(solution)


def _settlements(solution: Solution) -> Iterator[Block]:
    units = SYSTEMS[solution.calculation.units]
    for group in solution.derivation.groups:
        if not isinstance(group, SettlementGroup):
            continue
        yield Heading(2, ("Settlements: ", group.case.name), group.number)
        moved = ", ".join(
            f"{one.at} {'down' if one.down else 'turned'}" for one in group.case.settlements
        )
        words = (
            f"Supports gave way ({moved}); s is the movement, downward or clockwise +. The work of "
            "each state's support forces is the displacement at its redundant; then the same "
            "elimination, and equilibrium without load. What is not written is zero."
        )
        yield Paragraph((words,), leads=True)
        if group.steps:
            yield step_table(solution, group.steps)
        columns = (Column("effect", width=3), Column("value", "right"), Column("unit"))
        rows = tuple(
            (
                (effect_title(effect),),
                (Value(value, _decimals(effect)),),
                (units[EFFECT_KIND[effect.kind]],),
            )
            for effect, value in group.values.items()
        )
        yield Table(columns, rows)


def _decimals(effect: Effect) -> int:
    return DECIMALS[EFFECT_KIND[effect.kind]]
