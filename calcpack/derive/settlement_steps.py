"""The steps of a settlement: the redundants that close the beam on supports that gave way."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction

from calcpack.derive.elastic_book import ElasticBook
from calcpack.derive.kinds import EFFECT_KIND, QuantityKind
from calcpack.derive.redundant_steps import back_substituted, reduced_loads
from calcpack.derive.steps import SettlementGroup, Step
from calcpack.exact.formula import Formula, Leaf, Symbol, constant, total
from calcpack.model.loads import Permanent
from calcpack.model.request import Effect, EffectKind
from calcpack.statics.influence import cut_at
from calcpack.statics.system import key_of, symbol_of

WORK: dict[int, QuantityKind] = {2: "EI", 3: "EI length"}
"""What EI_0 times a rotation, or times a displacement, is; by the power of the unit state."""


def settlement_group(
    elastic: ElasticBook,
    case: Permanent,
    conversion: Fraction,
    unknowns: Mapping[Effect, Fraction],
    effects: Mapping[Effect, Fraction],
) -> SettlementGroup:
    """Write one permanent case of settlements.

    Args:
        elastic: with states and elimination already written.
        case: the supports that gave way.
        conversion: units of deflection in a unit of length.
        unknowns: the engine's value of every redundant and unknown.
        effects: the engine's value of every effect asked for, of force or moment.
    """
    book, root = elastic.book, f"permanent/{case.path}"
    number = book.open_group()
    steps: list[Step] = []
    loads: dict[int, Leaf] = {}
    for row, unit in enumerate(elastic.units):
        terms: list[tuple[int, Formula]] = []
        for one in case.settlements:
            held_by: EffectKind = "reaction" if one.down else "moment reaction"
            support = Effect(held_by, one.at, one.station)
            held = unit.printed.forces.get(support)
            if held is not None:
                terms.append((1, held * _movement(elastic, one.path, bool(one.down), conversion)))
        if terms:
            assert elastic.reference is not None
            formula = elastic.reference * total(terms)
            key, symbol = f"{root}/work={row + 1}", Symbol("δ", unit.mark)
            steps.append(book.state_value(key, symbol, formula, WORK[unit.power], f"{root}/δ"))
            loads[row] = book.cite(steps[-1])
    reduced, more = _reduced(elastic, root, loads)
    steps += more
    found: dict[int, Leaf] = {}
    forces: dict[Effect, Leaf] = {}
    for row in reversed(range(len(elastic.redundants))):
        redundant = elastic.redundants[row]
        if unknowns[redundant]:
            formula = back_substituted(elastic, row, -1, reduced, found)
            key, column = f"{root}/{key_of(redundant)}", f"{root}/{EFFECT_KIND[redundant.kind]}"
            kind = EFFECT_KIND[redundant.kind]
            value = unknowns[redundant]
            steps.append(book.find(key, symbol_of(redundant), formula, kind, value, column))
            found[row] = forces[redundant] = book.cite(steps[-1])
    for planned in elastic.released.plan:
        unknown = planned.unknown
        if unknowns[unknown]:
            formula = elastic.solved(planned.equation, unknown, forces)
            steps.append(_force(elastic, root, unknown, formula, unknowns[unknown]))
            forces[unknown] = book.cite(steps[-1])
    for effect, value in effects.items():
        if value and effect not in forces:
            equation = cut_at(elastic.released.beam, elastic.released.system, effect).equation
            formula = elastic.solved(equation, effect, forces)
            steps.append(_force(elastic, root, effect, formula, value))
    group = SettlementGroup(number, case, tuple(steps), dict(effects))
    book.close_group(group)
    return group


def _movement(elastic: ElasticBook, path: str, down: bool, conversion: Fraction) -> Formula:
    tag = path.split("[")[-1].rstrip("]")
    if not down:
        return elastic.book.given(f"{path}.turn", Symbol("s", str(int(tag) + 1)), "rotation")
    given = elastic.book.given(f"{path}.down", Symbol("s", str(int(tag) + 1)), "deflection")
    return given / constant(conversion)


def _reduced(
    elastic: ElasticBook, root: str, loads: Mapping[int, Leaf]
) -> tuple[dict[int, Leaf], list[Step]]:
    return reduced_loads(elastic, root, loads, "δ", [WORK[unit.power] for unit in elastic.units])


def _force(
    elastic: ElasticBook, root: str, effect: Effect, formula: Formula, value: Fraction
) -> Step:
    kind = EFFECT_KIND[effect.kind]
    key, column = f"{root}/{key_of(effect)}", f"{root}/{kind}"
    return elastic.book.find(key, symbol_of(effect), formula, kind, value, column)
