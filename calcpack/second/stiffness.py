"""Influence lines by the displacement method: unit loads on an elastic beam, in floats."""

from __future__ import annotations

import itertools
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

import numpy as np
from numpy.typing import NDArray

from calcpack.model.beam import Beam
from calcpack.model.request import Effect, EffectKind
from calcpack.second.balance import HELD, Decimals, Element, Indices, balanced, decimal, zeros
from calcpack.second.faces import face_or_inner

Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Ordinates:
    """One effect under a unit downward load, and under a unit clockwise couple, at key stations.

    The couple is two opposite loads close together, so the effect under it is the line's slope. A
    load between two joints acts on them by its fixed-end forces, cubics in its station: with
    values and slopes at both ends of a stretch the line is known all along it.

    Attributes:
        stations: the n key stations, from 0 to the beam's length.
        left, right: values just left and just right of each; at the ends both are the inner one.
        left_slopes, right_slopes: the same of the slopes.
    """

    stations: Floats
    left: Floats
    right: Floats
    left_slopes: Floats
    right_slopes: Floats

    def __mul__(self, factor: float) -> Ordinates:
        """The same in another unit of the effect."""
        values = (self.left, self.right, self.left_slopes, self.right_slopes)
        return Ordinates(self.stations, *(factor * value for value in values))

    @property
    def cubics(self) -> tuple[Floats, Floats, Floats]:
        """The start and the width of each stretch (m), and its cubic by the four Bézier ordinates
        (m x 4): at thirds of the stretch, the inner two on the tangents at its ends.

        Stretches too short for doubles are left out.

        >>> line, slope = np.array([0.0, 6.0]), np.ones(2)
        >>> [one.tolist() for one in Ordinates(line, line, line, slope, slope).cubics]
        [[0.0], [6.0], [[0.0, 2.0, 4.0, 6.0]]]
        """
        widths = np.diff(self.stations)
        start, end = self.right[:-1], self.left[1:]
        rise, drop = widths / 3 * self.right_slopes[:-1], widths / 3 * self.left_slopes[1:]
        ordinates = np.column_stack([start, start + rise, end - drop, end])
        wide = widths > 0
        return self.stations[:-1][wide], widths[wide], ordinates[wide]

    def values(self, places: Floats) -> Floats:
        """The line anywhere, at a station its value just right of it (at the right end the inner
        one); 0 off the beam.

        >>> line, slope = np.array([0.0, 6.0]), np.ones(2)
        >>> Ordinates(line, line, line, slope, slope).values(np.array([1.5, 6.0, 7.0])).tolist()
        [1.5, 6.0, 0.0]
        """
        starts, widths, ordinates = self.cubics
        index = np.clip(np.searchsorted(starts, places, side="right") - 1, 0, None)
        t = (places - starts[index]) / widths[index]
        a, b, c, d = ordinates.T
        powers = np.array([a, 3 * (b - a), 3 * (a - 2 * b + c), d - a + 3 * (b - c)])
        zeroth, first, second, third = powers[:, index]
        cubic = zeroth + t * (first + t * (second + t * third))
        on_beam = (places >= self.stations[0]) & (places <= self.stations[-1])
        return np.where(on_beam, cubic, 0.0)


def ordinates(beam: Beam, effects: Sequence[Effect]) -> tuple[Ordinates, ...]:
    """The influence line of each effect, by the stiffness of the elastic beam.

    Every key station is a joint, every stretch between two an Euler-Bernoulli element. The beam is
    scaled to unit length and, in its first stretch, unit stiffness.

    Args:
        beam: stable; EI = 1 where its stiffness is unknown.
        effects: at key stations of the beam; a face where two values exist.

    Returns:
        Per effect its ordinates, signs as in ``model.request.Effect``; pure numbers for reaction
        and shear, lengths for the moments, a length and rad per unit force for deflection and
        rotation.

    Raises:
        ProgramFault: the beam is not stable.

    Source: the displacement method with cubic elements, as in any text on matrix structural
    analysis.
    """
    stations, length = beam.stations, beam.length
    bending = beam.stiffness_after(Fraction(0))
    nodes, freedoms, size = _freedoms(beam)
    members = np.hstack([freedoms[:-1, 1], freedoms[1:, 0]])
    elements = [
        Element(beam.stiffness_after(one.at) / bending, (other.at - one.at) / length)
        for one, other in itertools.pairwise(stations)
    ]
    balance = balanced(elements, members, _springs(beam, nodes, bending), size)
    # By station, face, and whether shear or moment: what the beam left of the face does to it.
    cuts = zeros(len(stations), 2, 2, size + 1)
    cuts[1:, 0, 0], cuts[1:, 0, 1] = balance.forces[:, 2], -balance.forces[:, 3]
    cuts[:-1, 1, 0], cuts[:-1, 1, 1] = -balance.forces[:, 0], balance.forces[:, 1]
    moves = balance.displacements[freedoms]
    sizes: dict[EffectKind, Fraction] = {
        "reaction": Fraction(1),
        "moment reaction": length,
        "shear": Fraction(1),
        "moment": length,
        "deflection": length**3 / bending,
        "rotation": length**2 / bending,
    }
    places = np.array([float(station.at) for station in stations])
    index_of = {station.at: index for index, station in enumerate(stations)}
    lines = []
    for effect in effects:
        at = index_of[effect.station]
        under_unit, jumps = _recovered(effect, cuts[at], moves[at])
        # By station, face, and whether the load is a force or a couple. A load at the effect's own
        # station has been counted as standing between the two faces.
        value = under_unit[freedoms] * decimal(sizes[effect.kind])
        value[..., 1] /= decimal(length)
        value[at] += jumps
        value[0, 0], value[-1, 1] = value[0, 1], value[-1, 0]
        left, right = value[:, 0].astype(float), value[:, 1].astype(float)
        lines.append(Ordinates(places, left[:, 0], right[:, 0], left[:, 1], right[:, 1]))
    return tuple(lines)


def _springs(beam: Beam, nodes: Indices, bending: Fraction) -> dict[int, Fraction]:
    """The stiffness of every spring, scaled, by the number of the freedom that it holds."""
    springs = {}
    for station, (deflection, rotation) in zip(beam.stations, nodes.tolist(), strict=True):
        support = station.support
        if support is not None and support.vertical:
            springs[deflection] = support.vertical * beam.length**3 / bending
        if support is not None and support.rotational:
            springs[rotation] = support.rotational * beam.length / bending
    return springs


def _recovered(effect: Effect, cut: Decimals, moves: Decimals) -> tuple[Decimals, list[list[int]]]:
    """An effect under every unit load, from what happens at its station, and what it jumps by when
    the load there crosses to the left face and to the right face: (force, couple) each."""
    face = 0 if face_or_inner(effect.face, effect.station) == "left" else 1
    match effect.kind:
        case "reaction":
            return cut[1, 0] - cut[0, 0], [[1, 0], [1, 0]]
        case "moment reaction":
            return cut[0, 1] - cut[1, 1], [[0, 1], [0, 1]]
        case "shear":
            return cut[face, 0], [[face - 1, 0], [face, 0]]
        case "moment":
            return cut[face, 1], [[0, 1 - face], [0, -face]]
        case "deflection":
            return moves[face, 0], [[0, 0], [0, 0]]
        case "rotation":
            return moves[face, 1], [[0, 0], [0, 0]]


def _freedoms(beam: Beam) -> tuple[Indices, Indices, int]:
    """The numbers of deflection and rotation, HELD where they are held: of what a support at each
    station holds (n x 2), of the pieces on its left and on its right (n x 2 x 2), and their
    count."""
    numbers = itertools.count()
    nodes, pieces = [], []
    for station in beam.stations:
        support, release = station.support, station.release
        held = support is not None and support.holds_vertical and not support.vertical
        turned = support is not None and support.holds_rotation and not support.rotational
        deflection, rotation = HELD if held else next(numbers), HELD if turned else next(numbers)
        node = other = (deflection, rotation)
        if release is not None:
            own = next(numbers)
            other = (deflection, own) if release.kind == "hinge" else (own, rotation)
        on_right = support is not None and support.face == "right"
        nodes.append(node)
        pieces.append((other, node) if on_right else (node, other))
    return np.array(nodes), np.array(pieces), next(numbers)
