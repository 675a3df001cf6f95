"""Loads that travel along the beam, and what acts always."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

Heading = Literal["right", "left"]
Relieving = Literal["count", "neglect"]


@dataclass(frozen=True)
class Axle:
    """An axle's weight (force, downward +) and its distance to the axle ahead (0 for the first)."""

    weight: Fraction
    spacing: Fraction


@dataclass(frozen=True)
class MovingLoad:
    """A train of axles with fixed spacings and a uniform load on whatever parts raise the effect.

    Attributes:
        axles: in order from the lead axle; may be empty when there is a uniform load.
        uniform: force per unit length, downward +, acting with the axles.
        headings: the ways the train may travel; the lead axle is the foremost in that direction.
        relieving: whether axles that lessen the effect count, or are neglected one by one.
        allowance: dynamic allowance on the axles: their static effect times (1 + allowance).
        distribution: what of the whole load this beam takes.
        path: where it stands in calc.toml, such as ``moving[0]``.
    """

    name: str
    axles: tuple[Axle, ...]
    uniform: Fraction
    headings: tuple[Heading, ...]
    relieving: Relieving
    allowance: Fraction
    distribution: Fraction
    path: str

    @property
    def offsets(self) -> tuple[Fraction, ...]:
        """The distance of each axle behind the lead axle, >= 0.

        >>> axles = (Axle(Fraction(1), Fraction(0)), Axle(Fraction(1), Fraction(4)))
        >>> zero, one = Fraction(0), Fraction(1)
        >>> MovingLoad("T", axles, zero, ("right",), "count", zero, one, "moving[0]").offsets
        (Fraction(0, 1), Fraction(4, 1))
        """
        behind, distances = Fraction(0), []
        for axle in self.axles:
            behind += axle.spacing
            distances.append(behind)
        return tuple(distances)


@dataclass(frozen=True)
class Settlement:
    """A support that gives way: ``down`` in units of deflection (downward +), or ``turn`` in rad.

    ``turn`` is clockwise +, for a support that holds rotation; one of the two is zero. ``path`` is
    where it stands in calc.toml.
    """

    at: str
    station: Fraction
    down: Fraction
    turn: Fraction
    path: str


@dataclass(frozen=True)
class Permanent:
    """A permanent load case; for now of settlements only."""

    name: str
    settlements: tuple[Settlement, ...]
    path: str
