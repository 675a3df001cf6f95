"""A moving load in tables: axles, what travels with them, its cases, where it is defined."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from fractions import Fraction

from calcpack.derive.kinds import DECIMALS
from calcpack.derive.steps import LoadGroup
from calcpack.exact.numbers import decimals_to_end, printed
from calcpack.exact.units import SYSTEMS
from calcpack.model.loads import Applies, Axle, Case, Gap, MovingLoad, Share, Strip, Train
from calcpack.sheets.blocks import Block, Column, Heading, Paragraph, Table, Text
from calcpack.sheets.tables import step_table
from calcpack.solution import Solution

WHOLE = 6
SHORT, ACROSS = 6, 3
"""So many axles stand under one another in any case; more of them in up to so many columns."""
RELIEVING = {
    "count": "Axles that lessen the effect count.",
    "neglect": "Axles that lessen the effect are neglected one by one.",
}
REGIONS = {
    "hogging": "where a uniform load on all spans causes a negative moment",
    "interior": "at interior supports",
    "everywhere": "",
}
PARTS = {"axles": "axles", "trailing": "trailing load", "uniform": "uniform load"}


def load_blocks(solution: Solution, group: LoadGroup) -> Iterator[Block]:
    """What the load is; its numbers that go by a length with the steps that find them."""
    load, units = group.load, SYSTEMS[solution.calculation.units]
    yield Heading(2, ("Load: ", load.name), group.number)
    if load.standard is not None:
        yield Paragraph((standard_words(load),))
    for train in _distinct(load.cases):
        yield from _train(train, units["length"], units["force"], units["line load"])
    relieving = {case.relieving for case in load.cases if case.trains}
    yield from (Paragraph((RELIEVING[one],)) for one in sorted(relieving))
    yield _cases(load, units["length"], units["force"], units["line load"])
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


def _train(train: Train, length: str, force: str, line_load: str) -> Iterator[Block]:
    named = f"Train {train.name}" if train.name else "Train"
    axles = [axle for axle in train.axles if axle.weight.value]
    if axles:
        whole = sum((axle.weight.value for axle in axles), Fraction(0))
        words = f"{named}, {amount(whole)} {force} on {len(axles)} axles, from the foremost:"
        yield Paragraph((words,), leads=True)
        yield _axles(axles, length, force)
    for strip in train.strips:
        yield Paragraph((_strip(strip, bool(axles), length, force, line_load),))


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


def _strip(strip: Strip, axles: bool, length: str, force: str, line_load: str) -> str:
    if strip.of_weight and strip.length is not None:
        what = f"{amount(strip.amount.value)} {force} over {amount(strip.length.value)} {length}"
    elif strip.length is not None:
        said = amount(strip.amount.value)
        what = f"{said} {line_load} over {amount(strip.length.value)} {length}"
    else:
        what = f"{amount(strip.amount.value)} {line_load} without end"
    axle = "ahead of the first axle" if strip.ahead else "behind the last axle"
    if not axles:
        axle = "ahead of its foremost point" if strip.ahead else "behind its foremost point"
    extent = "only where it raises the effect" if strip.broken else "unbroken"
    return f"With it travels {what}, from {amount(strip.start.value)} {length} {axle}, {extent}."


def gap_words(gap: Gap) -> str:
    """A spacing as it was stated.

    >>> from calcpack.model.loads import Given
    >>> gap_words(Gap((Given(Fraction(14), ""), Given(Fraction(30), "")), free=True))
    '14 to 30'
    """
    values = [amount(tie.value) for tie in gap.ties]
    if not gap.free:
        return " or ".join(values)
    return f"{values[0]} or more" if len(values) == 1 else " to ".join(values)


def amount(value: Fraction) -> str:
    """A number that was stated, with all its decimals as long as there are few."""
    whole = decimals_to_end(value, WHOLE)
    return printed(value, DECIMALS["number"] if whole is None else whole)


def _cases(load: MovingLoad, length: str, force: str, line_load: str) -> Table:
    columns = (
        Column("case", width=3),
        Column("stands", width=5),
        Column("allowance and factors", width=4),
        Column("for", width=5),
    )
    rows = tuple(
        (
            (case.name or load.name,),
            ("; ".join(_stands(case, length, force, line_load)),),
            ("; ".join(_factors(case)) or "none",),
            ("; or ".join(map(_for, case.applies)) or "every effect",),
        )
        for case in load.cases
    )
    return Table(columns, rows)


def _stands(case: Case, length: str, force: str, line_load: str) -> Iterator[str]:
    number = 0
    for index, train in enumerate(case.trains):
        acting = [n for n, axle in enumerate(train.axles, start=1) if axle.acts]
        named = train.name or "the train"
        if len(acting) < sum(axle.weight.value > 0 for axle in train.axles):
            named += (
                f" with only axle {', '.join(map(str, acting))}" if acting else " without axles"
            )
        if index:
            named += f" behind it by {gap_words(case.gaps[index - 1])} {length}"
        number += len(train.axles)
        yield named
    if case.concentrated:
        forces = " and ".join(amount(one.value) for one in case.concentrated)
        several = ", each in another span" if len(case.concentrated) > 1 else ""
        yield f"{forces} {force} anywhere{several}"
    if case.uniform is not None:
        said = amount(case.uniform.value)
        yield f"{said} {line_load} wherever it raises the effect"
    if case.trains and case.headings != ("right", "left"):
        yield f"heading {case.headings[0]}"


def _factors(case: Case) -> Iterator[str]:
    for part, allowance in case.allowances:
        yield f"{PARTS[part]} × (1 + {amount(allowance.value)})"
    for factor in case.factors:
        yield f"all × {amount(factor.value)}"


def _for(one: Applies) -> str:
    senses = {1: "greatest ", 0: "", -1: "least "}
    kinds = " or ".join(one.kinds) or "effect"
    return f"{senses[one.sense]}{kinds} {REGIONS[one.region]}".strip()


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
