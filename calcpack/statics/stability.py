"""Stability and degree by the exact rank of the equilibrium equations."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from calcpack.errors import InputRefused, Problem
from calcpack.exact.linear import Reduced, reduce_rows
from calcpack.model.beam import Beam
from calcpack.statics.system import Body, System, place_name, symbol_of


@dataclass(frozen=True)
class Classification:
    """``degree`` is the number of unknowns more than independent equations; ``reason`` in words."""

    kind: Literal["determinate", "indeterminate"]
    degree: int
    reason: str


def classify(beam: Beam, system: System) -> Classification:
    """Classify the beam; the rank decides, not the count.

    Each unknown holds the motions of the bodies in one way: a row of the transposed equilibrium
    matrix. A motion that no row hinders is a mechanism. Source: principle of virtual displacements.

    Raises:
        InputRefused: the beam is unstable; one problem that names what moves and how.
    """
    reduced = _held_motions(system)
    motions = reduced.null_space
    if motions:
        moves = "; ".join(_in_words(beam, system, motion) for motion in motions)
        said = f"unstable: {moves}; {_what_holds(beam)}"
        raise InputRefused([Problem("beam", said, "must be held against every motion")])
    unknowns, rank = len(system.unknowns), reduced.rank
    degree = unknowns - rank
    parts = sum(not body.is_pin for body in system.bodies)
    pins = len(system.bodies) - parts
    counted = f"two for each of {parts} part{'s' * (parts > 1)}" + (
        f", one for each of {pins} pin{'s' * (pins > 1)} over a support" if pins else ""
    )
    names = ", ".join(str(symbol_of(unknown)) for unknown in system.unknowns)
    reason = f"{unknowns} unknowns ({names}) and {rank} independent equations ({counted})" + (
        f": {degree} unknown{'s' * (degree > 1)} more than equations"
        if degree
        else ", by exact rank: equilibrium alone finds every unknown"
    )
    return Classification("indeterminate" if degree else "determinate", degree, reason)


def is_stable(system: System) -> bool:
    """Whether the bodies are held with all redundants released."""
    return not _held_motions(system).null_space


def _held_motions(system: System) -> Reduced:
    """One row an unknown, over the motions of the bodies: deflection at the start, then slope."""
    rows: dict[object, dict[int, Fraction]] = {unknown: {} for unknown in system.unknowns}
    size = 0
    for body in system.bodies:
        for action in body.actions:
            row = rows[action.unknown]
            if action.up:
                row[size] = Fraction(action.up)
            if body.turns:
                turned = action.up * (action.station - body.start) - action.clockwise
                row[size + body.shifts] = turned
        size += body.equations
    for redundant in system.redundants:
        del rows[redundant]
    return reduce_rows(list(rows.values()), size)


def _in_words(beam: Beam, system: System, motion: Mapping[int, Fraction]) -> str:
    phrases, column = [], 0
    for body in system.bodies:
        lift = motion.get(column, Fraction(0))
        turn = motion.get(column + 1, Fraction(0))
        column += body.equations
        if not body.is_pin and (lift or turn):
            phrases.append(f"the part {body.name} {_motion_of(beam, body, lift, turn)}")
    return ", ".join(phrases)


def _motion_of(beam: Beam, body: Body, lift: Fraction, turn: Fraction) -> str:
    if not turn:
        return "can move (vertical)"
    still = body.start - lift / turn
    if any(station.at == still for station in beam.stations) and body.start <= still <= body.end:
        return f"can turn about {place_name(beam, still)} (rotation)"
    return "can move and turn (vertical and rotation)"


def _what_holds(beam: Beam) -> str:
    supports = ", ".join(f"{one.name} ({one.kind})" for one in beam.supports)
    releases = ", ".join(f"{one.name} ({one.kind})" for one in beam.releases) or "none"
    return f"supports {supports}; releases {releases}"
