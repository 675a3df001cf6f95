"""The released beam: its states under loads and redundants, flexibilities and deflections.

Source: principle of virtual forces, f_ij = sum of the integrals of m_i m_j / EI over the beam
+ sum of r_i r_j / k over springs. All of it is taken times a reference stiffness EI_0, that of
the first stretch, so that only ratios of stiffness enter where nothing yields; EI_0 = 1 where the
stiffness is uniform and unknown.
"""

from __future__ import annotations

import itertools
import math
from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property

from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.beam import Beam
from calcpack.model.request import Effect
from calcpack.statics.influence import effect_line, unknown_lines, value_of
from calcpack.statics.plan import PlanStep
from calcpack.statics.system import System, place_name

Numbers = Mapping[Effect, Fraction]


@dataclass(frozen=True)
class Segment:
    """A stretch without support, release or step of stiffness; ``ratio`` is EI_0 / EI there."""

    start: Fraction
    end: Fraction
    ratio: Fraction

    @property
    def length(self) -> Fraction:
        return self.end - self.start

    @property
    def ends(self) -> tuple[tuple[Fraction, Side], tuple[Fraction, Side]]:
        """Just right of its start, and just left of its end."""
        return (self.start, "right"), (self.end, "left")


@dataclass(frozen=True)
class State:
    """A state of the released beam.

    Attributes:
        moments: per segment the moment just right of its start and just left of its end, sagging
            +; straight between.
        springs: the force (up +) or couple (anticlockwise on the beam +) of each yielding support.
    """

    moments: tuple[tuple[Fraction, Fraction], ...]
    springs: Numbers

    @cached_property
    def whole(self) -> tuple[tuple[tuple[int, int], ...], int]:
        """The moments as whole numbers of one part, and how many of those make one."""
        part = math.lcm(*(value.denominator for pair in self.moments for value in pair))
        return tuple((int(a * part), int(b * part)) for a, b in self.moments), part


@dataclass(frozen=True)
class Released:
    """The beam with its redundants released, and what its states are found from.

    Attributes:
        reference: EI_0.
        lines: influence lines of the unknowns while the redundants are absent.
        moment_lines: per segment those of the moment at its two ends.
        yielding: stiffness of each spring, by the force or couple it exerts.
    """

    beam: Beam
    system: System
    plan: tuple[PlanStep, ...]
    reference: Fraction
    segments: tuple[Segment, ...]
    lines: Mapping[Effect, Piecewise]
    moment_lines: tuple[tuple[Piecewise, Piecewise], ...]
    yielding: Numbers

    def under_load(self, at: Fraction, side: Side) -> State:
        """Under the unit load just left or just right of ``at``."""
        return self._under(lambda line: line.value(at, side))

    def under_couple(self, at: Fraction, side: Side) -> State:
        """Under a unit couple, clockwise, on that side of ``at``: two loads close together.

        A segment's end moment at ``at`` is that beyond the couple, as the segment itself has it;
        the moment rises by the couple from its left to its right.
        """
        found = self._under(lambda line: line.slope(at, side))
        moments = tuple(
            (
                first + (segment.start == at and side == "right"),
                last - (segment.end == at and side == "left"),
            )
            for segment, (first, last) in zip(self.segments, found.moments, strict=True)
        )
        return State(moments, found.springs)

    def _under(self, read: Callable[[Piecewise], Fraction]) -> State:
        moments = tuple((read(first), read(last)) for first, last in self.moment_lines)
        return State(moments, {one: read(self.lines[one]) for one in self.yielding})

    def under_redundant(self, redundant: Effect) -> State:
        """Under the redundant alone, with the value 1."""
        given = {one: Fraction(one == redundant) for one in self.system.redundants}
        return self.state(self.respond(given))

    def respond(self, given: Numbers) -> dict[Effect, Fraction]:
        """Every unknown from the plan's equations without load, the redundants given."""
        found = dict(given)
        for step in self.plan:
            found[step.unknown] = step.equation.number_for(step.unknown, found)
        return found

    def state(self, found: Numbers) -> State:
        """The state that goes with the unknowns found, no load on the beam."""
        moments = tuple(
            (
                value_of(self.beam, self.system, found, moment_at(self.beam, one.start, "right")),
                value_of(self.beam, self.system, found, moment_at(self.beam, one.end, "left")),
            )
            for one in self.segments
        )
        return State(moments, {one: found[one] for one in self.yielding})

    def flexibility(self, one: State, other: State) -> Fraction:
        """EI_0 times the work of one state's forces on the other's deformations.

        Source: the integral of two straight lines a..b and c..d over a length l is
        l (2 a c + a d + b c + 2 b d) / 6.
        """
        sixths, part = self._sixths
        (first, first_part), (second, second_part) = one.whole, other.whole
        whole = sum(
            sixth * (2 * a * c + a * d + b * c + 2 * b * d)
            for sixth, (a, b), (c, d) in zip(sixths, first, second, strict=True)
            if (a or b) and (c or d)
        )
        total = Fraction(whole, part * first_part * second_part)
        for spring, stiffness in self.yielding.items():
            total += self.reference * one.springs[spring] * other.springs[spring] / stiffness
        return total

    @cached_property
    def _sixths(self) -> tuple[tuple[int, ...], int]:
        """Per segment l EI_0 / (6 EI) as whole numbers of one part, and how many make one."""
        sixths = [segment.length * segment.ratio / 6 for segment in self.segments]
        part = math.lcm(*(one.denominator for one in sixths))
        return tuple(int(one * part) for one in sixths), part

    def ends(self, state: State) -> tuple[tuple[Fraction, Fraction], ...]:
        """EI_0 times the deflection (downward +) at both ends of every segment, by unit loads."""
        return tuple(
            (self.flexibility(state, first), self.flexibility(state, last))
            for first, last in self._loaded_ends
        )

    @cached_property
    def _loaded_ends(self) -> tuple[tuple[State, State], ...]:
        """The states under the unit load at both ends of every segment."""
        loaded = ([self.under_load(*end) for end in one.ends] for one in self.segments)
        return tuple((first, last) for first, last in loaded)

    def curve(self, state: State) -> Piecewise:
        """EI_0 times the deflection (downward +) along the beam, a cubic for each segment.

        Between the segment's ends it is the chord and the bending of a simple beam under its end
        moments a and b: t (l - t) (a (2 l - t) + b (l + t)) / (6 EI l). At a slide it may jump.
        """
        pieces = []
        for segment, (a, b), (low, high) in zip(
            self.segments, state.moments, self.ends(state), strict=True
        ):
            length, bending = segment.length, segment.ratio / 6
            slope = (high - low) / length + bending * length * (2 * a + b)
            cubic = (low, slope, -3 * bending * a, bending * (a - b) / length)
            pieces.append((segment.start, segment.end, cubic))
        return Piecewise.from_pieces(pieces)


def release(
    beam: Beam, system: System, plan: Sequence[PlanStep], extra: Iterable[Fraction] = ()
) -> Released:
    """Prepare the released beam.

    Args:
        beam: the whole beam.
        system: cut at releases and redundants.
        plan: of the released beam.
        extra: stations where a unit load or couple will act, at which moments may break.
    """
    stops = {Fraction(0), beam.length, *extra, *(one.start for one in beam.stiffness)}
    stops.update(one.at for one in beam.stations if one.support or one.release)
    reference = beam.stiffness[0].EI if beam.stiffness else Fraction(1)
    segments = tuple(
        Segment(start, end, reference / beam.stiffness_after(start))
        for start, end in itertools.pairwise(sorted(stops))
    )
    nothing = Piecewise.from_pieces([(0, beam.length, (0,))])
    lines = unknown_lines(beam, plan, dict.fromkeys(system.redundants, nothing))

    def moment_line(at: Fraction, side: Side) -> Piecewise:
        return effect_line(beam, system, lines, moment_at(beam, at, side))[0]

    moment_lines = tuple(
        (moment_line(one.start, "right"), moment_line(one.end, "left")) for one in segments
    )
    yielding = springs(beam)
    return Released(beam, system, tuple(plan), reference, segments, lines, moment_lines, yielding)


def springs(beam: Beam) -> dict[Effect, Fraction]:
    """The stiffness of each yielding support, by the force or couple that it exerts."""
    found = {}
    for support in beam.supports:
        if support.vertical:
            found[Effect("reaction", support.name, support.at)] = support.vertical
        if support.rotational:
            found[Effect("moment reaction", support.name, support.at)] = support.rotational
    return found


def moment_at(beam: Beam, at: Fraction, face: Side) -> Effect:
    """The moment just beside a station."""
    return Effect("moment", place_name(beam, at), at, face)
