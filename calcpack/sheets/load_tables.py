"""A moving load in tables: axles, what travels with them, its cases, where it is defined."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from fractions import Fraction

from calcpack.derive.kinds import DECIMALS
from calcpack.derive.steps import LoadGroup
from calcpack.exact.numbers import printed
from calcpack.exact.units import SYSTEMS
from calcpack.model.loads import Axle, Case, MovingLoad, Share, Train
from calcpack.sheets.blocks import Block, Column, Heading, Paragraph, Table, Text
from calcpack.sheets.load_words import (
    PARTS,
    RELIEVING,
    amount,
    applies_words,
    axles_words,
    gap_words,
    strip_words,
)
from calcpack.sheets.tables import step_table
from calcpack.solution import Solution

SHORT, ACROSS = 6, 3
"""So many axles stand under one another in any case; more of them in up to so many columns."""


def load_blocks(solution: Solution, group: LoadGroup) -> Iterator[Block]:
    """What the load is; its numbers that go by a length with the steps that find them."""
    load, units = group.load, SYSTEMS[solution.calculation.units]
    yield Heading(2, ("Load: ", load.name), group.number)
    if load.standard is not None:
        yield Paragraph((standard_words(load),))
    for train in _distinct(load.cases):
        yield from _train(train, units)
    relieving = {case.relieving for case in load.cases if case.trains}
    yield from (Paragraph((RELIEVING[one],)) for one in sorted(relieving))
    yield _cases(load, units)
    if any(one.region == "hogging" for case in load.cases for one in case.applies):
        yield Paragraph((_hogging(solution, load, units["length"]),))
    if len(load.cases) > 1:
        yield Paragraph(("The worst of these cases counts for each effect and sense.",))
    if group.steps:
        yield Paragraph(("Numbers that the standard gives by a length:",), leads=True)
        yield step_table(solution, group.steps)


def _hogging(solution: Solution, load: MovingLoad, length: str) -> str:
    """Where a uniform load on all spans causes a negative moment, and who says so."""
    stated = load.hogging is not None
    stretches = load.hogging if load.hogging is not None else solution.along.hogging
    decimals = DECIMALS["length"]
    places = (f"{printed(one, decimals)} to {printed(two, decimals)}" for one, two in stretches)
    who = "as the preparer states" if stated else "between points of contraflexure"
    said = ", ".join(places) or "nowhere"
    return f"A uniform load on all spans causes a negative moment {who}: {said} ({length})."


def standard_words(load: MovingLoad) -> str:
    """Where a published model is defined, and whether it was compared with that."""
    standard = load.standard
    assert standard is not None
    said = f"{standard.name} (per {standard.per}): {standard.title}, {standard.edition}, "
    said += f"{standard.clause}. "
    if standard.compared:
        return f"{said}Compared with the standard, says the preparer: {standard.compared}."
    if standard.seen == "memory":
        return f"{said}Not compared with the standard."
    return f"{said}Numbers taken from a printed page; the standard itself decides."


def _distinct(cases: Sequence[Case]) -> list[Train]:
    """The trains of all cases, those that differ only in which axles act once."""
    found: dict[tuple[object, ...], Train] = {}
    for case in cases:
        for train in case.trains:
            axles = tuple((axle.weight, axle.gap) for axle in train.axles)
            found.setdefault((train.name, axles, train.strips), train)
    return list(found.values())


def _train(train: Train, units: Mapping[str, str]) -> Iterator[Block]:
    named = f"Train {train.name}" if train.name else "Train"
    axles = [axle for axle in train.axles if axle.weight.value]
    if axles:
        words = f"{named}, {axles_words(axles, units)}, from the foremost:"
        yield Paragraph((words,), leads=True)
        yield _axles(axles, units["length"], units["force"])
    for strip in train.strips:
        yield Paragraph((f"With it travels {strip_words(strip, bool(axles), units)}.",))


def _axles(axles: Sequence[Axle], length: str, force: str) -> Table:
    """Axles one under the other, a long train in several columns."""
    down = max(SHORT, -(-len(axles) // ACROSS))
    columns = (
        Column("axle", "right", 1),
        Column("weight", "right", 2, unit=force),
        Column("behind the axle ahead", "right", 3, unit=length),
    )
    across = range(0, len(axles), down)
    rows = tuple(
        tuple(
            cell
            for first in across
            for cell in (
                _axle(first + row + 1, axles[first + row])
                if first + row < len(axles)
                else (("",),) * 3
            )
        )
        for row in range(min(down, len(axles)))
    )
    return Table(columns * len(across), rows)


def _axle(number: int, axle: Axle) -> tuple[Text, ...]:
    gap = "—" if axle.gap is None else gap_words(axle.gap)
    return (str(number),), (amount(axle.weight.value),), (gap,)


def _cases(load: MovingLoad, units: Mapping[str, str]) -> Table:
    columns = (
        Column("case", width=3),
        Column("stands", width=5),
        Column("allowance and factors", width=4),
        Column("for", width=5),
    )
    rows = tuple(
        (
            (case.name or load.name,),
            ("; ".join(_stands(case, units)),),
            ("; ".join(_factors(case)) or "none",),
            ("; or ".join(map(applies_words, case.applies)) or "every effect",),
        )
        for case in load.cases
    )
    return Table(columns, rows)


def _stands(case: Case, units: Mapping[str, str]) -> Iterator[str]:
    for index, train in enumerate(case.trains):
        acting = [n for n, axle in enumerate(train.axles, start=1) if axle.acts]
        named = train.name or "the train"
        if len(acting) < sum(axle.weight.value > 0 for axle in train.axles):
            named += (
                f" with only axle {', '.join(map(str, acting))}" if acting else " without axles"
            )
        if index:
            named += f" behind it by {gap_words(case.gaps[index - 1])} {units['length']}"
        yield named
    if case.concentrated:
        forces = " and ".join(amount(one.value) for one in case.concentrated)
        several = ", each in another span" if len(case.concentrated) > 1 else ""
        yield f"{forces} {units['force']} anywhere{several}"
    if case.uniform is not None:
        said = amount(case.uniform.value)
        yield f"{said} {units['line load']} wherever it raises the effect"
    if case.trains and case.headings != ("right", "left"):
        yield f"heading {case.headings[0]}"


def _factors(case: Case) -> Iterator[str]:
    for part, allowance in case.allowances:
        yield f"{PARTS[part]} × (1 + {amount(allowance.value)})"
    for factor in case.factors:
        yield f"all × {amount(factor.value)}"


def share_words(load: MovingLoad, names: dict[Fraction, str]) -> str:
    """What this beam takes of a load, entry by entry."""
    return "; ".join(_share(one, names) for one in load.shares)


def _share(share: Share, names: dict[Fraction, str]) -> str:
    def place(at: Fraction) -> str:
        return names.get(at) or amount(at)

    said = amount(share.value.value)
    if share.kinds:
        said += f" for {' and '.join(share.kinds)}"
    if share.start is not None:
        said += f" from {place(share.start)}"
    if share.end is not None:
        said += f" to {place(share.end)}"
    return f"{said} ({share.source})" if share.source else said
