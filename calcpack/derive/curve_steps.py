"""The steps of flexibilities and of deflection curves of the released beam."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from fractions import Fraction

from calcpack.derive.book import variable_place
from calcpack.derive.elastic_book import Disturbance, ElasticBook, Source
from calcpack.derive.kinds import of_lengths
from calcpack.derive.state_steps import write_disturbed
from calcpack.derive.steps import Step, StepGroup
from calcpack.exact.formula import Symbol
from calcpack.exact.piecewise import Side


def write_flexibilities(elastic: ElasticBook) -> None:
    """EI_0 f_ij for every pair of unit states that work on each other."""
    number = elastic.book.open_group()
    steps: list[Step] = []
    for row, one in enumerate(elastic.units):
        for column, other in enumerate(elastic.units[row:], start=row):
            value = elastic.method.flexibility[row][column]
            if value:
                root, symbol = (
                    f"flexibility/{row + 1}/{column + 1}",
                    Symbol("f", one.mark + other.mark),
                )
                kind = of_lengths(one.power + other.power - 3)
                steps += elastic.work(root, symbol, kind, one.printed, other.printed, value)
                leaf = elastic.book.cite(steps[-1])
                elastic.flexibilities[row, column] = elastic.flexibilities[column, row] = leaf
    words = (
        "EI_0 f_ij: the integral of m_i m_j over each segment, for straight lines from a to b and "
        "from c to d over a length l equal to l (2 a c + a d + b c + 2 b d) / 6, times n where the "
        "stiffness differs; a spring adds EI_0 r_i r_j / k. What is not written is zero."
    )
    elastic.book.close_group(StepGroup(number, "Flexibilities", words, (), tuple(steps)))


def write_deflections(elastic: ElasticBook, sources: Sequence[Source]) -> None:
    """Where a segment's end deflects under any source: the unit load there, and the deflections."""
    released = elastic.released
    ends = [released.ends(source.state) for source in sources]
    for number, segment in enumerate(released.segments):
        for which, (at, side) in enumerate(segment.ends):
            values = [one[number][which] for one in ends]
            if any(values) and not _taken_over(elastic, sources, at, side, values):
                _deflect(elastic, sources, at, side, values)


def _taken_over(
    elastic: ElasticBook,
    sources: Sequence[Source],
    at: Fraction,
    side: Side,
    values: Sequence[Fraction],
) -> bool:
    """Whether the other side of the station was written already and is the same."""
    other: Side = "left" if side == "right" else "right"
    known = [elastic.deflections.get((source.mark, at, other)) for source in sources]
    if [step.value if step else 0 for step in known] != list(values):
        return False
    for source, step in zip(sources, known, strict=True):
        if step is not None:
            elastic.deflections[source.mark, at, side] = step
    return True


def _deflect(
    elastic: ElasticBook,
    sources: Sequence[Source],
    at: Fraction,
    side: Side,
    values: Sequence[Fraction],
) -> None:
    book, load = elastic.book, Disturbance("load", at, side)
    write_disturbed(elastic, load)
    number, tag = book.open_group(), book.tag_at(at)
    steps: list[Step] = []
    for source, value in zip(sources, values, strict=True):
        if value:
            root, symbol = (
                f"deflection/{source.mark}/at={at}/{side}",
                Symbol("δ", source.mark, place=tag),
            )
            kind, printed = of_lengths(source.power), elastic.disturbed[load]
            steps += elastic.work(root, symbol, kind, source.printed, printed, value)
            elastic.deflections[source.mark, at, side] = steps[-1]
    words = (
        "EI_0 times the deflection of the released beam there, downward +: the work of the unit "
        "load's state on each other state."
    )
    book.close_group(StepGroup(number, f"Deflections at {tag}", words, (), tuple(steps)))


def write_curve(elastic: ElasticBook, source: Source, cause: str) -> None:
    """EI_0 times the deflection at every key station inside a segment, from the segment's ends."""
    book, released = elastic.book, elastic.released
    number, root = book.open_group(), f"curve/{source.mark}"
    kind = of_lengths(source.power)
    statements, steps = [], []
    for index, segment in enumerate(released.segments):
        formula = elastic.shape(source, index, variable_place())
        if (
            source.curve.value(segment.start, "right")
            or any(source.printed.moments[index])
            or (source.curve.value(segment.end, "left"))
        ):
            words = f"from {book.tag_at(segment.start)} to {book.tag_at(segment.end)}"
            key, symbol = f"{root}/segment={index + 1}", Symbol("δ", source.mark, place="x")
            statements.append(book.state(key, symbol, formula, kind, condition=words))
    for at in _inner_stations(elastic):
        index = next(i for i, s in enumerate(released.segments) if s.start < at < s.end)
        value = source.curve.left(at)
        if value:
            symbol = Symbol("δ", source.mark, place=book.tag_at(at))
            formula = elastic.shape(source, index, book.place(at))
            step = book.find(f"{root}/at={at}", symbol, formula, kind, value, root)
            steps.append(step)
            sides: tuple[Side, ...] = ("left", "right")
            for side in sides:
                elastic.deflections[source.mark, at, side] = step
    words = (
        f"EI_0 δ_{source.mark}(x), {cause}. In each segment it is the chord between the ends and "
        "the bending of a simple beam under its end moments; zero where it is not written."
    )
    title = f"Deflection curve δ_{source.mark}"
    book.close_group(StepGroup(number, title, words, tuple(statements), tuple(steps)))


def _inner_stations(elastic: ElasticBook) -> Iterator[Fraction]:
    breaks = {segment.start for segment in elastic.released.segments}
    for station in elastic.released.beam.stations:
        if station.at not in breaks and station.at != elastic.released.beam.length:
            yield station.at
