"""The steps of states of the released beam: ratios of stiffness, unit redundants, unit loads."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction

from calcpack.derive.elastic_book import Disturbance, ElasticBook, Ends, PrintedState, Source
from calcpack.derive.kinds import of_lengths, power_of
from calcpack.derive.steps import Step, StepGroup
from calcpack.elastic.released import State, moment_at
from calcpack.exact.formula import Formula, Leaf, Symbol, constant
from calcpack.exact.piecewise import Side
from calcpack.model.beam import Stretch
from calcpack.model.request import Effect
from calcpack.statics.influence import cut_at
from calcpack.statics.system import key_of, symbol_of


def write_ratios(elastic: ElasticBook) -> None:
    """EI of each stretch, and EI_0 / EI of those that differ from the first, the reference."""
    book, stiffness = elastic.book, elastic.released.beam.stiffness
    if not stiffness:
        return
    number = book.open_group()
    steps: list[Step] = []
    leaves = [_stiffness(elastic, index, one, steps) for index, one in enumerate(stiffness)]
    elastic.reference = leaves[0]
    for index, (stretch, leaf) in enumerate(zip(stiffness, leaves, strict=True), start=1):
        ratio = elastic.released.reference / stretch.EI
        if ratio != 1 and ratio not in elastic.ratios:
            formula, symbol = leaves[0] / leaf, Symbol("n", str(index))
            step = book.find(f"ratio/{index}", symbol, formula, "number", ratio, "ratio")
            steps.append(step)
            elastic.ratios[ratio] = book.cite(step)
    words = "The stiffness of the first stretch is the reference EI_0; n is its ratio to another."
    book.close_group(StepGroup(number, "Stiffness", words, (), tuple(steps)))


def _stiffness(elastic: ElasticBook, index: int, stretch: Stretch, steps: list[Step]) -> Leaf:
    book, mark = elastic.book, str(index) if index else "0"
    if f"{stretch.path}.EI" in book.calculation.inputs:
        return book.given(f"{stretch.path}.EI", Symbol("EI", mark), "EI")
    modulus = book.given(f"{stretch.path}.E", Symbol("E", mark), "E")
    inertia = book.given(f"{stretch.path}.I", Symbol("I", mark), "I")
    factor = constant(modulus.value * inertia.value / stretch.EI)
    formula, key = modulus * inertia / factor, f"stiffness/{index + 1}"
    steps.append(book.find(key, Symbol("EI", mark), formula, "EI", stretch.EI, "EI"))
    return book.cite(steps[-1])


def write_unit_states(elastic: ElasticBook) -> None:
    """Unknowns and moments under each redundant alone, value 1."""
    released, redundants = elastic.released, elastic.redundants
    for index, redundant in enumerate(redundants):
        number, mark = elastic.book.open_group(), str(index + 1)
        root = f"unit/{mark}"
        given = {one: Fraction(one == redundant) for one in redundants}
        forces = {redundant: Leaf(Fraction(1), Symbol("X", mark))}
        power = -power_of(redundant.kind)
        steps = _unknowns(elastic, root, released.respond(given), forces, power, None)
        state = elastic.method.states[index]
        moments, more = _end_moments(elastic, root, mark, state, forces, power, None)
        words = (
            f"State {mark}: {symbol_of(redundant)} = X_{mark} = 1 alone. What is not written is "
            "zero; moments are straight between the stations named."
        )
        title = f"Released beam under X_{mark} = 1"
        found = (*steps, *more)
        elastic.book.close_group(StepGroup(number, title, words, (), found, state, mark))
        printed, curve = PrintedState(moments, forces), elastic.method.curves[index]
        elastic.units.append(Source(mark, 3 + power, state, printed, curve))


def write_disturbed(elastic: ElasticBook, disturbance: Disturbance) -> None:
    """Unknowns and moments under a unit load or couple on the released beam."""
    if disturbance in elastic.disturbed:
        return
    released, book = elastic.released, elastic.book
    number, root, at, side = book.open_group(), disturbance.key, disturbance.at, disturbance.side
    if disturbance.kind == "load":
        values = {one: line.value(at, side) for one, line in released.lines.items()}
        state, power, what = released.under_load(at, side), 0, "unit load"
    else:
        values = {one: line.slope(at, side) for one, line in released.lines.items()}
        state, power, what = released.under_couple(at, side), -1, "unit couple, clockwise,"
    forces: dict[Effect, Leaf] = {}
    steps = _unknowns(elastic, root, values, forces, power, disturbance)
    mark = "P" if disturbance.kind == "load" else "C"
    moments, more = _end_moments(elastic, root, mark, state, forces, power, disturbance)
    where = f"at {book.tag_at(at)}" + (
        ", just right of it" if _two_sided(elastic, at, side) else ""
    )
    words = f"The {what} {where} on the released beam. What is not written is zero."
    title = f"Released beam under the {what.split(',')[0]} {where}"
    book.close_group(StepGroup(number, title, words, (), (*steps, *more), state, mark))
    elastic.disturbed[disturbance] = PrintedState(moments, forces)


def _two_sided(elastic: ElasticBook, at: Fraction, side: Side) -> bool:
    station = elastic.released.beam.station(at)
    return side == "right" and station.release is not None


def _unknowns(
    elastic: ElasticBook,
    root: str,
    values: Mapping[Effect, Fraction],
    forces: dict[Effect, Leaf],
    power: int,
    disturbance: Disturbance | None,
) -> list[Step]:
    """The plan's equations with their values; ``forces`` is filled with what is not zero."""
    steps: list[Step] = []
    for planned in elastic.released.plan:
        unknown = planned.unknown
        if values[unknown]:
            formula = elastic.solved(planned.equation, unknown, forces, disturbance)
            kind, key = of_lengths(power_of(unknown.kind) + power), f"{root}/{key_of(unknown)}"
            symbol, value = symbol_of(unknown), values[unknown]
            steps.append(elastic.book.find(key, symbol, formula, kind, value, root))
            forces[unknown] = elastic.book.cite(steps[-1])
    return steps


def _end_moments(
    elastic: ElasticBook,
    root: str,
    mark: str,
    state: State,
    forces: Mapping[Effect, Leaf],
    power: int,
    disturbance: Disturbance | None,
) -> tuple[tuple[Ends, ...], list[Step]]:
    """Moments at the segments' ends; one step where both sides of a station agree."""
    released, book = elastic.released, elastic.book
    steps: list[Step] = []
    found: dict[tuple[Fraction, Fraction], Leaf] = {}

    def leaf(at: Fraction, side: Side, value: Fraction) -> Leaf | None:
        if not value or (at, value) in found:
            return found.get((at, value))
        effect = moment_at(released.beam, at, side)
        known = next((leaf for one, leaf in forces.items() if _same(one, effect)), None)
        if known is not None and not known.origin:
            found[at, value] = known
            return known
        formula: Formula
        if known is not None:
            formula = known
        else:
            cut = cut_at(released.beam, released.system, effect)
            acts = None
            if disturbance is not None and disturbance.at == at:
                acts = _beside_cut(elastic, disturbance, cut.keeps, side)
            formula = elastic.solved(cut.equation, effect, forces, disturbance, acts)
        symbol, key = Symbol("m", mark, place=book.tag_at(at)), f"{root}/m/at={at}/{side}"
        step = book.find(key, symbol, formula, of_lengths(1 + power), value, f"{root}/m")
        steps.append(step)
        found[at, value] = book.cite(step)
        return found[at, value]

    moments = tuple(
        (leaf(segment.start, "right", a), leaf(segment.end, "left", b))
        for segment, (a, b) in zip(released.segments, state.moments, strict=True)
    )
    return moments, steps


def _beside_cut(elastic: ElasticBook, disturbance: Disturbance, keeps: Side, face: Side) -> bool:
    """Whether an action at the very station of a cut is on the part kept.

    The cut runs between the action and the segment on that face: just left of the action for the
    segment that ends here, just right of it for the one that starts here.
    """
    at, bodies = disturbance.at, elastic.released.system.bodies
    parted = any(body.start == at for body in bodies) and any(body.end == at for body in bodies)
    same_body = not parted or disturbance.side == face
    return same_body and keeps != face


def _same(one: Effect, other: Effect) -> bool:
    """Whether two moments at one place are one: a face is named only where two values exist."""
    if (one.kind, one.station) != (other.kind, other.station):
        return False
    return one.face is None or one.face == other.face
