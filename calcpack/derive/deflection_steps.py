"""The steps of a line of deflection or rotation: by reciprocity, the curve under a unit action."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from calcpack.derive.curve_steps import write_curve, write_deflections
from calcpack.derive.elastic_book import Disturbance, ElasticBook, Source
from calcpack.derive.kinds import CURVATURE_KIND, LINE_KIND, of_lengths, power_of
from calcpack.derive.redundant_steps import back_substituted, reduced_loads
from calcpack.derive.shape import Shape, curvature_of
from calcpack.derive.state_steps import write_disturbed
from calcpack.derive.steps import DeflectionGroup, Row, Step, StepGroup
from calcpack.exact.formula import Formula, Leaf, Symbol, Variable, constant, total
from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.request import Effect
from calcpack.statics.system import key_of, place_name, symbol_of


def deflection_group(
    elastic: ElasticBook, effect: Effect, line: Piecewise, conversion: Fraction
) -> Shape:
    """Write the line of a deflection or rotation and give its shape.

    ``line`` is the engine's in the calculation's units of deflection, ``conversion`` how many of
    them make a unit of length (1 for a rotation). Source: reciprocity of displacements.
    """
    book = elastic.book
    side: Side = effect.face or ("right" if effect.station == 0 else "left")
    kind = "load" if effect.kind == "deflection" else "couple"
    disturbance = Disturbance("load" if kind == "load" else "couple", effect.station, side)
    source = _source(elastic, disturbance)
    present = _redundants_under(elastic, disturbance, source)
    number, root = book.open_group(), f"effect/{key_of(effect)}"
    statement = _statement(elastic, root, effect, source, present, conversion)
    rows = tuple(_rows(elastic, root, effect, source, present, line, conversion))
    book.close_group(DeflectionGroup(number, effect, statement, rows))
    return Shape(effect, _curvatures(elastic, root, effect, source, present, line, conversion))


def _source(elastic: ElasticBook, disturbance: Disturbance) -> Source:
    """The released beam under the unit action at the effect's place, with its curve."""
    released, at, side = elastic.released, disturbance.at, disturbance.side
    write_disturbed(elastic, disturbance)
    printed = elastic.disturbed[disturbance]
    letter = "P" if disturbance.kind == "load" else "C"
    tag = elastic.book.tag_at(at) + (
        f",{side}" if elastic.released.beam.station(at).release else ""
    )
    if disturbance.kind == "load":
        state, power, cause = (
            released.under_load(at, side),
            3,
            "the deflection at x under that load",
        )
    else:
        state, power, cause = (
            released.under_couple(at, side),
            2,
            "the deflection at x under that couple",
        )
    source = Source(f"{letter},{tag}", power, state, printed, released.curve(state))
    if not any(mark == source.mark for mark, _, _ in elastic.deflections):
        write_deflections(elastic, [source])
        write_curve(elastic, source, cause)
    return source


def _redundants_under(
    elastic: ElasticBook, disturbance: Disturbance, source: Source
) -> dict[int, Leaf]:
    """The redundants under the unit action; for a load they are ordinates already found."""
    book, at, side = elastic.book, disturbance.at, disturbance.side
    if disturbance.kind == "load":
        steps = [book.ordinates[one, at, side] for one in elastic.redundants]
        return {row: book.cite(step) for row, step in enumerate(steps) if step.value}
    if not elastic.redundants:
        return {}
    number, root = book.open_group(), f"redundants/couple/at={at}/{side}"
    found_steps: list[Step] = []
    loads: dict[int, Leaf] = {}
    for row, unit in enumerate(elastic.units):
        value = unit.curve.slope(at, side)
        if value:
            key, symbol = f"{root}/rotation={row + 1}", Symbol("φ", unit.mark)
            kind = of_lengths(unit.power - 1)
            found_steps += elastic.work(key, symbol, kind, unit.printed, source.printed, value)
            loads[row] = book.cite(found_steps[-1])
    kinds = [of_lengths(unit.power - 1) for unit in elastic.units]
    reduced, more = reduced_loads(elastic, root, loads, "φ", kinds)
    found_steps += more
    found: dict[int, Leaf] = {}
    for row in reversed(range(len(elastic.redundants))):
        redundant = elastic.redundants[row]
        value = elastic.method.lines[redundant].slope(at, side)
        if value:
            formula = back_substituted(elastic, row, -1, reduced, found)
            kind = of_lengths(power_of(redundant.kind) - 1)
            key = f"{root}/{key_of(redundant)}"
            step = book.find(key, symbol_of(redundant), formula, kind, value, root)
            found_steps.append(step)
            found[row] = book.cite(step)
    words = (
        "EI_0 times the rotation at the couple under each redundant, by work; then the redundants "
        "by the same elimination."
    )
    title = f"Redundants under the unit couple at {book.tag_at(at)}"
    book.close_group(StepGroup(number, title, words, (), tuple(found_steps)))
    return found


def _factor(conversion: Fraction, inside: Formula, reference: Leaf) -> Formula:
    scaled = inside if conversion == 1 else constant(conversion) * inside
    return scaled / reference


def _statement(
    elastic: ElasticBook,
    root: str,
    effect: Effect,
    source: Source,
    present: dict[int, Leaf],
    conversion: Fraction,
) -> Step:
    terms: list[tuple[int, Formula]] = [(1, Variable(Symbol("δ", source.mark, place="x")))]
    for row in sorted(present):
        redundant = Variable(symbol_of(elastic.redundants[row]))
        terms.append((1, redundant * Variable(Symbol("δ", str(row + 1), place="x"))))
    assert elastic.reference is not None
    formula = _factor(conversion, total(terms), elastic.reference)
    words = "the unit action's own curve, and those of the redundants under it"
    kind = LINE_KIND[effect.kind]
    return elastic.book.state(f"{root}/curve", symbol_of(effect), formula, kind, condition=words)


def _rows(
    elastic: ElasticBook,
    root: str,
    effect: Effect,
    source: Source,
    present: dict[int, Leaf],
    line: Piecewise,
    conversion: Fraction,
) -> Iterator[Row]:
    book = elastic.book
    assert elastic.reference is not None
    for station in book.beam.stations:
        at = station.at
        jumps = line.left(at) != line.right(at)
        both: tuple[Side, ...] = ("right", "left") if at == 0 else ("left", "right")
        for sides in ((one,) for one in both) if jumps else (both,):
            side = sides[0]
            terms: list[tuple[int, Formula]] = []
            own = elastic.deflections.get((source.mark, at, side))
            if own is not None and own.value:
                terms.append((1, book.cite(own)))
            for row, value in sorted(present.items()):
                curve = elastic.deflections.get((elastic.units[row].mark, at, side))
                if curve is not None and curve.value:
                    terms.append((1, value * book.cite(curve)))
            formula = total(terms)
            if terms:
                formula = _factor(conversion, formula, elastic.reference)
            key = f"{root}/at={at}" + (f"/{side}" if jumps else "")
            kind, value_here = LINE_KIND[effect.kind], line.value(at, side)
            step = book.find(key, symbol_of(effect), formula, kind, value_here, root)
            for one in sides:
                book.ordinates[effect, at, one] = step
            place = station.name or place_name(book.beam, at)
            yield Row(place, at, side if jumps else None, True, step)


def _curvatures(
    elastic: ElasticBook,
    root: str,
    effect: Effect,
    source: Source,
    present: dict[int, Leaf],
    line: Piecewise,
    conversion: Fraction,
) -> dict[tuple[Fraction, Side], Step]:
    """-n (m + sum of X_i m_i) / EI_0 at the segments' ends, straight between."""
    book, released = elastic.book, elastic.released
    number = book.open_group()
    assert elastic.reference is not None
    found: dict[tuple[Fraction, Side], Step] = {}
    steps: list[Step] = []
    kind = CURVATURE_KIND[effect.kind]
    for index, segment in enumerate(released.segments):
        for which, (at, side) in enumerate(segment.ends):
            value = curvature_of(line, at, side)
            if not value:
                continue
            terms: list[tuple[int, Formula]] = []
            own = source.printed.moments[index][which]
            if own is not None:
                terms.append((1, own))
            for row, redundant in sorted(present.items()):
                moment = elastic.units[row].printed.moments[index][which]
                if moment is not None:
                    terms.append((1, redundant * moment))
            ratio = elastic.ratios.get(segment.ratio)
            inside = total(terms) if ratio is None else ratio * total(terms)
            formula = -_factor(conversion, inside, elastic.reference)
            key, symbol = f"{root}/curvature/at={at}/{side}", Symbol("κ", book.tag_at(at), side)
            steps.append(book.find(key, symbol, formula, kind, value, f"{root}/curvature"))
            found[at, side] = steps[-1]
    steps += inner_curvatures(elastic, f"{root}/curvature", effect, line, found)
    words = (
        "Second derivative of the line: minus n times the moment under the unit action, over EI_0. "
        "It is straight in a segment, so the line is a cubic there."
    )
    title = f"Curvature of the line of {effect.label}"
    book.close_group(StepGroup(number, title, words, (), tuple(steps)))
    return found


def inner_curvatures(
    elastic: ElasticBook,
    root: str,
    effect: Effect,
    line: Piecewise,
    curvatures: dict[tuple[Fraction, Side], Step],
) -> Iterator[Step]:
    """At key stations inside a segment, by straight interpolation; ``curvatures`` is added to."""
    book = elastic.book
    for station in elastic.released.beam.stations:
        at = station.at
        segment = next((s for s in elastic.released.segments if s.start < at < s.end), None)
        value = curvature_of(line, at, "left") if segment else Fraction(0)
        if segment is None or not value:
            continue
        start, end = book.place(segment.start), book.place(segment.end)
        low, high = curvatures.get((segment.start, "right")), curvatures.get((segment.end, "left"))
        terms: list[tuple[int, Formula]] = []
        if low is not None:
            terms.append((1, book.cite(low) * (end - book.place(at))))
        if high is not None:
            terms.append((1, book.cite(high) * (book.place(at) - start)))
        formula, symbol = total(terms) / (end - start), Symbol("κ", book.tag_at(at))
        kind = CURVATURE_KIND[effect.kind]
        step = book.find(f"{root}/at={at}", symbol, formula, kind, value, root)
        curvatures[at, "left"] = curvatures[at, "right"] = step
        yield step
