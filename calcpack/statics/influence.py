"""Influence lines: of the unknowns by the plan, of sections by one more equation each."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import Beam, Face
from calcpack.model.request import Effect
from calcpack.statics.equation import Equation, sum_of_forces, sum_of_moments
from calcpack.statics.plan import PlanStep
from calcpack.statics.system import Action, Body, System, place_name


@dataclass(frozen=True)
class Cut:
    """A section: the side kept as free body and the one equation that finds the effect there."""

    effect: Effect
    keeps: Face
    equation: Equation


def unknown_lines(
    beam: Beam, plan: Sequence[PlanStep], redundants: Mapping[Effect, Piecewise] | None = None
) -> dict[Effect, Piecewise]:
    """The influence line of every unknown, by the plan's equations in their order.

    The lines of redundants, where there are any, must be given; they stand among the result.
    """
    lines: dict[Effect, Piecewise] = dict(redundants or {})
    for step in plan:
        lines[step.unknown] = step.equation.solved_for(step.unknown, lines, beam.length)
    return lines


def cut_at(beam: Beam, system: System, effect: Effect) -> Cut:
    """Cut the beam for a shear or moment and keep the side with fewer forces, at a tie the left.

    The pieces are bounded by releases, whose forces are known by then. At a support the cut runs
    just left or just right of it, as ``effect.face`` says.
    """
    at = effect.station
    body, after_support = _body_cut(beam, system, effect)
    on_left = [one for one in body.actions if _is_left(one, at, after_support)]
    on_right = [one for one in body.actions if one not in on_left]
    keeps: Face = "left" if len(on_left) <= len(on_right) else "right"
    own = _own_action(effect, keeps)
    start, end = (body.start, at) if keeps == "left" else (at, body.end)
    actions = [*on_left, own] if keeps == "left" else [own, *on_right]
    other = place_name(beam, start if keeps == "left" else end)
    name = f"{other}-{effect.at}" if keeps == "left" else f"{effect.at}-{other}"
    equation = (
        sum_of_forces(start, end, name, actions)
        if effect.kind == "shear"
        else sum_of_moments(start, end, name, actions, at)
    )
    return Cut(effect, keeps, equation)


def effect_line(
    beam: Beam, system: System, lines: Mapping[Effect, Piecewise], effect: Effect
) -> tuple[Piecewise, Cut | None]:
    """The influence line of an effect, and its cut; None where the effect is itself an unknown.

    Ordinates are one-sided: at the cut of a shear, just left and just right of it, they differ
    by one; at a slide and at a hinge over a support they may differ too.
    """
    if effect in lines:
        return lines[effect], None
    cut = cut_at(beam, system, effect)
    return cut.equation.solved_for(effect, lines, beam.length), cut


def value_of(
    beam: Beam, system: System, values: Mapping[Effect, Fraction], effect: Effect
) -> Fraction:
    """The value of an effect from those of the unknowns, no load on the beam."""
    if effect in values:
        return values[effect]
    return cut_at(beam, system, effect).equation.number_for(effect, values)


def _body_cut(beam: Beam, system: System, effect: Effect) -> tuple[Body, bool]:
    """The body that the cut runs through, and whether the support there lies left of the cut."""
    at = effect.station
    touching = [b for b in system.bodies if b.start <= at <= b.end and not b.is_pin]
    after_support = effect.face == "right" or (effect.face is None and at == 0)
    if len(touching) == 1:
        return touching[0], after_support
    support = beam.station(at).support
    if support is not None and support.face is not None:
        return touching[0 if support.face == "left" else 1], after_support
    on_right = effect.face == "right"
    return touching[1 if on_right else 0], after_support or (support is None and not on_right)


def _is_left(action: Action, at: Fraction, after_support: bool) -> bool:
    if action.station != at:
        return action.station < at
    return action.edge < 0 or (action.edge == 0 and after_support)


def _own_action(effect: Effect, keeps: Face) -> Action:
    """Shear + pushes a left piece down and a right piece up; moment + turns them so as to sag."""
    sign = -1 if keeps == "left" else 1
    edge: Literal[-1, 1] = 1 if keeps == "left" else -1
    if effect.kind == "shear":
        return Action(effect, sign, 0, edge)
    return Action(effect, 0, sign, edge)
