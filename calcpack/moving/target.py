"""An effect as the search for its governing placement sees it."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property

from calcpack.exact.piecewise import Piecewise
from calcpack.model.loads import Applies, Case, MovingLoad
from calcpack.moving.placement import Sense, Stretch, joined


@dataclass(frozen=True)
class Target:
    """The influence line of an effect, and what decides which cases of a load are for it.

    Attributes:
        line: the influence line.
        kind, at: of the effect.
        interior: whether it is at a support that is neither the first nor the last.
        spans: stretches between supports, overhangs included; each takes one concentrated load.
    """

    line: Piecewise
    kind: str = "moment"
    at: Fraction = Fraction(0)
    interior: bool = False
    spans: tuple[Stretch, ...] = ()

    def raised_on(self, sense: Sense) -> tuple[tuple[Stretch, ...], Fraction]:
        """The stretches where the line has the sign of ``sense``, and their area."""
        return self._raised[sense]

    @cached_property
    def _raised(self) -> dict[int, tuple[tuple[Stretch, ...], Fraction]]:
        line, found = self.line, {}
        positive, negative = line.areas()
        for sense, area in ((1, positive), (-1, negative)):
            runs = [(start, end) for start, end, sign in line.signed_runs() if sign == sense]
            found[sense] = joined(runs), area
        return found


def applies(case: Case, load: MovingLoad, target: Target, sense: Sense) -> bool:
    """Whether a case is for the target in that sense."""

    def holds(one: Applies) -> bool:
        if (one.kinds and target.kind not in one.kinds) or one.sense not in (0, sense):
            return False
        if one.region == "hogging":
            return _hogs(load, target)
        return one.region == "everywhere" or target.interior

    return not case.applies or any(map(holds, case.applies))


def _hogs(load: MovingLoad, target: Target) -> bool:
    """Whether a uniform load on all spans causes a negative moment there, or is said to."""
    if target.kind == "moment reaction":
        return True  # whichever way it turns: on the safe side
    if load.hogging is not None:
        return any(start <= target.at <= end for start, end in load.hogging)
    first, last = target.line.breaks[0], target.line.breaks[-1]
    return target.line.integral(first, last) < 0
