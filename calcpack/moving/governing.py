"""The governing value of an effect under one load, and what proves it."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from calcpack.model.loads import Case
from calcpack.moving.placement import AxleShare, Position, Sense, Stretch, StripShare

NEAR_CANDIDATES = 5
"""So many of the next-best places are told."""


@dataclass(frozen=True)
class Candidate:
    """A position looked at, and the value of the whole case there, all factors included."""

    case: Case
    position: Position
    value: Fraction


@dataclass(frozen=True)
class Tie:
    """Other places with the governing value: from ``first`` to ``last``, which may be the same."""

    first: Candidate
    last: Candidate


@dataclass(frozen=True)
class Governing:
    """The greatest (or least) value of one effect under one load, and where the load then stands.

    Attributes:
        sense: 1 the greatest, -1 the least.
        value: of the case, with allowances, factors and distribution; never of the other sign,
            since the load may stay away.
        share: distribution.
        case: the governing one; None where no case is for this effect, or all had better stay away.
        position: of its trains; None where no place of them helps.
        axles: what each axle adds; strips: each strip; concentrated: each floating force.
        loaded: the stretches under its uniform load, and their area.
        ties: other places with the same value.
        looked_at: how many places were looked at, over all cases and headings.
        near: the best candidates at other places, best first; the first is the next-worst.
        rates: change of the trains' static effect per unit of travel to the right, left and right
            of here.
    """

    sense: Sense
    value: Fraction
    share: Fraction
    case: Case | None
    position: Position | None
    axles: tuple[AxleShare, ...]
    strips: tuple[StripShare, ...]
    concentrated: tuple[AxleShare, ...]
    loaded: tuple[Stretch, ...]
    area: Fraction
    ties: tuple[Tie, ...]
    looked_at: int
    near: tuple[Candidate, ...]
    rates: tuple[Fraction, Fraction] | None

    @property
    def static(self) -> Fraction:
        """The effect without allowances, factors and distribution."""
        return self.axles_effect + self.trailing_effect + self.uniform_effect

    @property
    def axles_effect(self) -> Fraction:
        """Static effect of all axles and concentrated forces."""
        return sum((one.effect for one in (*self.axles, *self.concentrated)), Fraction(0))

    @property
    def trailing_effect(self) -> Fraction:
        """Static effect of all strips."""
        return sum((one.effect for one in self.strips), Fraction(0))

    @property
    def uniform_effect(self) -> Fraction:
        """Static effect of the uniform load."""
        uniform = self.case.uniform if self.case else None
        return uniform.value * self.area if uniform else Fraction(0)
