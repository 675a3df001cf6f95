"""Flexibilities and deflection curves of the released beam, in exact fractions.

Source: principle of virtual forces; f_ij = sum of the integrals of m_i m_j / EI over the beam
+ sum of r_i r_j / k over springs.
"""

from __future__ import annotations

import itertools
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction

from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.beam import Beam, Station
from calcpack.model.request import Effect
from calcpack.statics.influence import effect_line, unknown_lines
from calcpack.statics.plan import PlanStep
from calcpack.statics.system import System, place_name

Numbers = Mapping[Effect, Fraction]


@dataclass(frozen=True)
class Segment:
    """A stretch between neighbouring key stations, with its stiffness (1 where it is unknown)."""

    start: Fraction
    end: Fraction
    EI: Fraction

    @property
    def length(self) -> Fraction:
        return self.end - self.start


@dataclass(frozen=True)
class State:
    """A state of the released beam: the moment at both ends of every segment, the spring forces.

    ``moments`` are (just right of the segment's start, just left of its end), sagging +;
    ``springs`` the force or couple of each yielding support.
    """

    moments: tuple[tuple[Fraction, Fraction], ...]
    springs: Numbers


def segments(beam: Beam) -> tuple[Segment, ...]:
    """The stretches between key stations; EI = 1 throughout where none is stated."""
    stops = [station.at for station in beam.stations]
    return tuple(
        Segment(start, end, _stiffness(beam, start)) for start, end in itertools.pairwise(stops)
    )


def _stiffness(beam: Beam, at: Fraction) -> Fraction:
    for stretch in beam.stiffness:
        if stretch.start <= at < stretch.end:
            return stretch.EI
    return Fraction(1)


def springs(beam: Beam) -> dict[Effect, Fraction]:
    """The stiffness of each yielding support, by the force or couple that it exerts."""
    found = {}
    for support in beam.supports:
        if support.vertical:
            found[Effect("reaction", support.name, support.at)] = support.vertical
        if support.rotational:
            found[Effect("moment reaction", support.name, support.at)] = support.rotational
    return found


class Released:
    """The released beam with what its states need: unit-load lines of moment at every station.

    Args:
        beam: the whole beam.
        system: cut at releases and redundants.
        plan: of the released beam.
    """

    def __init__(self, beam: Beam, system: System, plan: Sequence[PlanStep]) -> None:
        self.beam, self.system, self.plan = beam, system, plan
        self.segments = segments(beam)
        self.springs = springs(beam)
        nothing = Piecewise.from_pieces([(0, beam.length, (0,))])
        unloaded = dict.fromkeys(system.redundants, nothing)
        self.lines = unknown_lines(beam, plan, unloaded)
        self._ends = [
            (self._moment(one.start, "right"), self._moment(one.end, "left"))
            for one in self.segments
        ]
        self._moment_lines = [
            tuple(effect_line(beam, system, self.lines, end)[0] for end in ends)
            for ends in self._ends
        ]

    def _moment(self, at: Fraction, face: Side) -> Effect:
        return Effect("moment", place_name(self.beam, at), at, face)

    def under_load(self, at: Fraction, side: Side) -> State:
        """The state under the unit load just left or just right of ``at``, redundants absent."""
        moments = tuple(
            (first.value(at, side), last.value(at, side)) for first, last in self._moment_lines
        )
        forces = {one: self.lines[one].value(at, side) for one in self.springs}
        return State(moments, forces)

    def under_redundant(self, redundant: Effect) -> State:
        """The state under the redundant alone, with the value 1."""
        given = {one: Fraction(one == redundant) for one in self.system.redundants}
        found = self.respond(given)
        moments = []
        for ends in self._ends:
            values = []
            for end in ends:
                cut = effect_line_numbers(self.beam, self.system, found, end)
                values.append(cut)
            moments.append((values[0], values[1]))
        return State(tuple(moments), {one: found[one] for one in self.springs})

    def respond(self, given: Numbers) -> dict[Effect, Fraction]:
        """Every unknown from the plan's equations without load, the redundants given."""
        found = dict(given)
        for step in self.plan:
            found[step.unknown] = step.equation.number_for(step.unknown, found)
        return found

    def flexibility(self, one: State, other: State) -> Fraction:
        """The virtual work of one state's forces on the other state's deformations.

        Source: the integral of two straight lines a..b and c..d over a length l,
        l (2 a c + a d + b c + 2 b d) / 6.
        """
        total = Fraction(0)
        pairs = zip(self.segments, one.moments, other.moments, strict=True)
        for segment, (a, b), (c, d) in pairs:
            if (a or b) and (c or d):
                integral = (2 * a * c + a * d + b * c + 2 * b * d) / 6
                total += segment.length * integral / segment.EI
        for spring, stiffness in self.springs.items():
            total += one.springs[spring] * other.springs[spring] / stiffness
        return total

    def curve(self, state: State) -> Piecewise:
        """The deflection (downward +) of the released beam in a state, a cubic for each segment.

        The deflections of the key stations follow from the unit load there; between them the
        chord and the bending of a simple beam under its end moments. At a slide it may jump.
        """
        pieces = []
        for segment, (first, last) in zip(self.segments, state.moments, strict=True):
            low = self.flexibility(state, self.under_load(segment.start, "right"))
            high = self.flexibility(state, self.under_load(segment.end, "left"))
            length, bending = segment.length, 6 * segment.EI
            slope = (high - low) / length + length * (2 * first + last) / bending
            pieces.append(
                (
                    segment.start,
                    segment.end,
                    (low, slope, -3 * first / bending, (first - last) / (bending * length)),
                )
            )
        return Piecewise.from_pieces(pieces)


def effect_line_numbers(beam: Beam, system: System, found: Numbers, effect: Effect) -> Fraction:
    """The value of one effect from known unknowns, without load."""
    from calcpack.statics.influence import cut_at

    if effect in found:
        return found[effect]
    return cut_at(beam, system, effect).equation.number_for(effect, found)


def stations_of(beam: Beam) -> tuple[Station, ...]:
    return beam.stations
