"""The curvature of an effect's line on an indeterminate beam, segment by segment."""

from __future__ import annotations

from fractions import Fraction

from calcpack.derive.deflection_steps import inner_curvatures
from calcpack.derive.elastic_book import ElasticBook
from calcpack.derive.kinds import CURVATURE_KIND, of_lengths, power_of
from calcpack.derive.redundant_steps import back_substituted, reduced_loads
from calcpack.derive.shape import Shape, curvature_of
from calcpack.derive.steps import Step, StepGroup
from calcpack.exact.formula import Formula, Leaf, Symbol, total
from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.request import Effect
from calcpack.statics.influence import cut_at, value_of
from calcpack.statics.system import key_of, symbol_of


def curvature_group(elastic: ElasticBook, effect: Effect, line: Piecewise) -> Shape:
    """Write the curvature of a line of force or moment and give its shape.

    With e_i the effect under X_i = 1 alone, F X + delta = 0 and delta'' = -n m / EI_0 the line's
    second derivative is n (g_1 m_1 + g_2 m_2 + ...), where F g = e. Source: the compatibility
    equations, differentiated twice.
    """
    book = elastic.book
    number, root = book.open_group(), f"curvature/{key_of(effect)}"
    steps: list[Step] = []
    units = _under_units(elastic, effect, root, steps)
    weights = _weights(elastic, effect, root, units, steps)
    curvatures: dict[tuple[Fraction, Side], Step] = {}
    kind = CURVATURE_KIND[effect.kind]
    for index, segment in enumerate(elastic.released.segments):
        for which, (at, side) in enumerate(segment.ends):
            terms: list[tuple[int, Formula]] = []
            for row, weight in weights.items():
                moment = elastic.units[row].printed.moments[index][which]
                if moment is not None:
                    terms.append((1, weight * moment))
            value = curvature_of(line, at, side)
            if value:
                ratio = elastic.ratios.get(segment.ratio)
                formula = total(terms) if ratio is None else ratio * total(terms)
                symbol = Symbol("κ", book.tag_at(at), side)
                key = f"{root}/at={at}/{side}"
                steps.append(book.find(key, symbol, formula, kind, value, root))
                curvatures[at, side] = steps[-1]
    steps += inner_curvatures(elastic, root, effect, line, curvatures)
    words = (
        f"Second derivative of the line of {symbol_of(effect)}: n times the sum of g_i m_i, where "
        "g solves F g = e by the same elimination and e_i is the effect under X_i = 1. It is "
        "straight in a segment, so the line is a cubic there; zero where it is not written."
    )
    title = f"Curvature of the line of {effect.label}"
    book.close_group(StepGroup(number, title, words, (), tuple(steps)))
    return Shape(effect, curvatures)


def _under_units(
    elastic: ElasticBook, effect: Effect, root: str, steps: list[Step]
) -> dict[int, Leaf]:
    """The effect under each redundant alone; zeros are left out."""
    released = elastic.released
    found: dict[int, Leaf] = {}
    for index, redundant in enumerate(elastic.redundants):
        forces = elastic.units[index].printed.forces
        if effect in forces:
            found[index] = forces[effect]
            continue
        given = {one: Fraction(one == redundant) for one in elastic.redundants}
        value = value_of(released.beam, released.system, released.respond(given), effect)
        if value:
            equation = cut_at(released.beam, released.system, effect).equation
            formula = elastic.solved(equation, effect, forces)
            kind = of_lengths(power_of(effect.kind) - power_of(redundant.kind))
            key, symbol = f"{root}/e={index + 1}", Symbol("e", str(index + 1))
            steps.append(elastic.book.find(key, symbol, formula, kind, value, f"{root}/e"))
            found[index] = elastic.book.cite(steps[-1])
    return found


def _weights(
    elastic: ElasticBook, effect: Effect, root: str, units: dict[int, Leaf], steps: list[Step]
) -> dict[int, Leaf]:
    """g with F g = e, by the elimination already made."""
    size = len(elastic.redundants)
    own = power_of(effect.kind)
    kinds = [of_lengths(own - power_of(one.kind)) for one in elastic.redundants]
    reduced, more = reduced_loads(elastic, root, units, "e", kinds)
    steps += more
    values = [units[row].value if row in units else Fraction(0) for row in range(size)]
    solved = elastic.method.elimination.solve(values)
    found: dict[int, Leaf] = {}
    for row in reversed(range(size)):
        if solved[row]:
            formula = back_substituted(elastic, row, 1, reduced, found)
            kind = of_lengths(own + power_of(elastic.redundants[row].kind) - 3)
            symbol, key = Symbol("g", str(row + 1)), f"{root}/g={row + 1}"
            steps.append(elastic.book.find(key, symbol, formula, kind, solved[row], f"{root}/g"))
            found[row] = elastic.book.cite(steps[-1])
    return found
