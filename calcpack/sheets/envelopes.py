"""Envelopes along the beam, absolute maxima, and what occurs together."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from fractions import Fraction
from itertools import pairwise

from calcpack.derive.kinds import DECIMALS, EFFECT_KIND
from calcpack.exact.numbers import printed
from calcpack.exact.units import SYSTEMS
from calcpack.model.loads import MovingLoad, Share
from calcpack.model.request import Effect
from calcpack.moving.absolute import Absolute
from calcpack.moving.envelope import Envelope, Point, Worst
from calcpack.moving.governing import Governing
from calcpack.sheets.blocks import Block, Column, Figure, Heading, Paragraph, Table, Text, Value
from calcpack.sheets.envelope_figure import envelope_figure
from calcpack.sheets.placements import placed_figure
from calcpack.sheets.stands import numbered_cases, stands
from calcpack.solution import Solution

WORDS = (
    "At the tenths of spans and overhangs, at supports and at every section: the greatest and the "
    "least of each effect under each load, each in its own governing place, found by the same "
    "search as the placements derived step by step; the lines behind it were compared with both "
    "second methods. For the equations of a point, state a section there. Beside a moment stands "
    "the shear that occurs with it, just left | just right of the section; beside a shear the "
    "moment: under the same place, heading, gaps, loaded stretches and factors."
)
ABSOLUTE = (
    "The greatest sagging moment of each span, section and place of the load found together: the "
    "governing value is closed in on along the span, and the section given as a decimal of up to "
    "nine places, for which the value is exact. Inside the span and without uniform load it stands "
    "under an axle."
)
NO_AXLE = "no axle"
HAIR = Fraction(1, 10**8)
"""A section given to nine decimals is no nearer to where the classical rule has it."""
BY_STRETCH = (
    "Each stretch of a span with a distribution of its own is searched by itself, its ends "
    "included; the greatest may also stand at such an end."
)
WORST = "Of the loads above the one that is worse at each point, each by itself and not together."
WORST_OF_SHARED = "A load without a distribution at a point is not among those compared there."
DRAWN = ("moment", "shear", "deflection")
TITLES = {
    "reaction": "Reactions",
    "moment reaction": "Couples held by supports",
    "moment": "Moment",
    "shear": "Shear",
    "deflection": "Deflection",
}


def envelope_blocks(solution: Solution) -> tuple[Block, ...]:
    """Every load's envelopes, each drawn and in a table, then the absolute maxima."""
    along = solution.along
    if not (along.envelopes or along.unshared):
        return ()
    blocks: list[Block] = [Heading(1, ("Envelopes",)), Paragraph((WORDS,))]
    for load in solution.calculation.moving:
        blocks.append(Heading(2, ("Envelopes under ", load.name)))
        if cases := numbered_cases(load):
            blocks.append(Paragraph((cases,)))
        if unshared := _unshared(solution, load):
            blocks.append(Paragraph((unshared,)))
        for envelope in along.envelopes:
            if envelope.load is load:
                blocks += _envelope(solution, envelope)
        found = [one for one in along.absolutes if one.load is load]
        if found:
            several = any(len(stretches) > 1 for stretches in _stretches(solution, load))
            words = f"{ABSOLUTE} {BY_STRETCH}" if several else ABSOLUTE
            blocks += [Paragraph((words,), leads=True), _absolutes(solution, load, found)]
            for one in found:
                blocks += _absolute(solution, one)
    if along.worst:
        blocks += [Heading(2, ("Envelopes over all loads",)), Paragraph((WORST,))]
        if along.unshared:
            blocks.append(Paragraph((WORST_OF_SHARED,)))
        for kind, worst in along.worst.items():
            blocks += _worst(solution, kind, worst)
    return tuple(blocks)


def _stretches(
    solution: Solution, load: MovingLoad
) -> list[tuple[tuple[Fraction, Fraction, Share | None], ...]]:
    """Per span its stretches of one distribution of the moment."""
    places = [support.at for support in solution.calculation.beam.supports]
    return [load.shares_along("moment", *span) for span in pairwise(places)]


def _unshared(solution: Solution, load: MovingLoad) -> str:
    """What is not told of a load, since no distribution of it is stated there."""
    told = {one.kind for one in solution.along.envelopes if one.load is load}
    places: dict[str, dict[str, None]] = {}
    for whose, effect in solution.along.unshared:
        if whose is load:
            places.setdefault(effect.kind, {})[effect.at] = None
    words = [
        f"{kind} at {', '.join(at)}" if kind in told else f"every {kind}"
        for kind, at in places.items()
    ]
    words += [
        f"the absolute maximum of span {number}"
        for number, stretches in enumerate(_stretches(solution, load), start=1)
        if any(share is None for *_, share in stretches)
    ]
    said = "; ".join(words)
    return f"Not found, since no distribution of the load is stated for it: {said}." if said else ""


def _worst(solution: Solution, kind: str, found: Sequence[Worst]) -> Iterator[Block]:
    """The worst of all loads at each point, and which it is."""
    calculation = solution.calculation
    unit, decimals = SYSTEMS[calculation.units][EFFECT_KIND[kind]], DECIMALS[EFFECT_KIND[kind]]
    yield Heading(3, (f"{TITLES[kind]} over all loads",))
    if kind in DRAWN:
        points = [(one.effect.station, one.greatest[1].value, one.least[1].value) for one in found]
        what = f"{kind} over all loads"
        yield Figure(
            envelope_figure(calculation.beam, points, what, unit, decimals, calculation.units)
        )
    columns = (
        Column("at", width=2),
        Column("greatest", "right", 2, unit),
        Column("under", width=4),
        Column("least", "right", 2, unit),
        Column("under", width=4),
    )
    rows = tuple(
        (
            _at(one.effect),
            *(
                cell
                for load, extreme in (one.greatest, one.least)
                for cell in (
                    (Value(extreme.value, decimals),),
                    (load.name if extreme.case else "—",),
                )
            ),
        )
        for one in found
    )
    yield Table(columns, rows)


def _envelope(solution: Solution, envelope: Envelope) -> Iterator[Block]:
    calculation = solution.calculation
    unit = SYSTEMS[calculation.units][EFFECT_KIND[envelope.kind]]
    decimals = DECIMALS[EFFECT_KIND[envelope.kind]]
    title = f"{TITLES[envelope.kind]} under {envelope.load.name}"
    yield Heading(3, (title,))
    if envelope.kind in DRAWN:
        points = [
            (point.effect.station, point.greatest.value, point.least.value)
            for point in envelope.points
        ]
        what = f"{envelope.kind} under {envelope.load.name}"
        yield Figure(
            envelope_figure(calculation.beam, points, what, unit, decimals, calculation.units)
        )
    yield _table(solution, envelope, unit, decimals)


def _table(solution: Solution, envelope: Envelope, unit: str, decimals: int) -> Table:
    units = SYSTEMS[solution.calculation.units]
    length = units["length"]
    together = {"moment": "shear", "shear": "moment"}.get(envelope.kind)
    beside = (
        (Column(f"with {together}", "right", 2, units[EFFECT_KIND[together]]),) if together else ()
    )
    columns = (
        Column("at", width=2),
        Column("greatest", "right", 2, unit),
        Column("lead axle at", "right", 2, length),
        *beside,
        Column("least", "right", 2, unit),
        Column("lead axle at", "right", 2, length),
        *beside,
    )
    rows = tuple(
        (
            _at(point.effect),
            *_half(envelope, point, 0, decimals),
            *_half(envelope, point, 1, decimals),
        )
        for point in envelope.points
    )
    return Table(columns, rows)


def _at(effect: Effect) -> Text:
    return (f"{effect.at}, {effect.face}" if effect.face else effect.at,)


def _half(envelope: Envelope, point: Point, which: int, decimals: int) -> Iterator[Text]:
    found: Governing = (point.greatest, point.least)[which]
    yield (Value(found.value, decimals),)
    yield stands(envelope.load, found)
    if envelope.kind in ("moment", "shear"):
        places = DECIMALS["force" if envelope.kind == "moment" else "moment"]
        values = [Value(pair[which], places) for pair in point.together.values()]
        parts: list[str | Value] = []
        for value in values if found.case else []:
            parts += [" | ", value] if parts else [value]
        yield tuple(parts) or ("—",)


def _absolutes(solution: Solution, load: MovingLoad, found: list[Absolute]) -> Table:
    units = SYSTEMS[solution.calculation.units]
    names = [support.name for support in solution.calculation.beam.supports]
    columns = (
        Column("span", width=2),
        Column("section at", "right", 2, units["length"]),
        Column("moment", "right", 2, units["moment"]),
        Column("lead axle at", "right", 3, units["length"]),
        Column("at the section", width=2),
    )
    rows = tuple(
        (
            (f"{one.span}: {names[one.span - 1]} to {names[one.span]}",),
            (Value(one.section, None if one.section.denominator == 1 else 9),),
            (Value(one.found.value, DECIMALS["moment"]),),
            stands(load, one.found),
            (_under(one),),
        )
        for one in found
    )
    return Table(columns, rows)


def _absolute(solution: Solution, one: Absolute) -> Iterator[Block]:
    """Where the load stands for one of them, over the line of its section."""
    calculation, found = solution.calculation, one.found
    units = SYSTEMS[calculation.units]
    section = printed(one.section, DECIMALS["length"])
    title = f"moment at {section}, span {one.span}"
    yield Figure(
        placed_figure(calculation.beam, one.line, found, title, "length", calculation.units)
    )
    words: list[str | Value] = [
        f"Span {one.span} under {one.load.name}: without allowance, factors and distribution ",
        Value(found.static, DECIMALS["moment"], units["moment"]),
        "; with them ",
        Value(found.value, DECIMALS["moment"], units["moment"]),
        ".",
    ]
    resultant = _resultant(solution, one)
    if resultant is not None:
        words += [
            " The classical rule holds: the resultant of the axles on the span, at ",
            Value(resultant, DECIMALS["length"], units["length"]),
            ", and the axle at the section are equally far from midspan.",
        ]
    yield Paragraph(tuple(words))


def _resultant(solution: Solution, one: Absolute) -> Fraction | None:
    """Of the axles on a simple span, if it and the axle at the section straddle midspan."""
    supports = solution.calculation.beam.supports
    start, end = supports[one.span - 1].at, supports[one.span].at
    ordinate = (one.section - start) * (end - one.section) / (end - start)
    simple = one.line.breaks[0] == start or not one.line.integral(one.line.breaks[0], start)
    simple = simple and (
        one.line.breaks[-1] == end or not one.line.integral(end, one.line.breaks[-1])
    )
    axles = [share for share in one.found.axles if share.standing == "counts" and share.ordinate]
    if not simple or one.line.left(one.section) != ordinate or not axles:
        return None
    whole = sum((share.weight for share in axles), Fraction(0))
    resultant = sum((share.weight * share.at for share in axles), Fraction(0)) / whole
    off = resultant + one.section - start - end
    return resultant if abs(off) <= HAIR and _under(one) != NO_AXLE else None


def _under(one: Absolute) -> str:
    axles = [str(share.axle + 1) for share in one.found.axles if share.at == one.section]
    return f"axle {', '.join(axles)}" if axles else NO_AXLE
