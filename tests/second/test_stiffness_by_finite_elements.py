"""The stiffness solution against scikit-fem: beam elements of another library, in doubles."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

import numpy as np
import pytest
import skfem  # type: ignore[import-untyped]
from beams import make_beam
from skfem.helpers import dd  # type: ignore[import-untyped]

from calcpack.model.beam import Beam
from calcpack.model.request import Effect, EffectKind
from calcpack.second.stiffness import Floats, ordinates

BEAM = make_beam(
    36,
    [
        (0, "fixed"),
        (10, "roller"),
        (19, "spring", None, 450, 8000),
        (30, "spring", None, 90, 0),
    ],
    sections=[4, 8, 15, 25, 34],
    stiffness=[(0, 5200), (3, 7400), (12, 2600), (22, 9100), (28, 4800)],
)


def energy(u: Any, v: Any, w: Any) -> Any:
    return w.stiffness * dd(u)[0, 0] * dd(v)[0, 0]


class FiniteElements:
    """Deflection (downward +) and its slope at nodes, which are the key stations."""

    def __init__(self, beam: Beam) -> None:
        self.stations = [station.at for station in beam.stations]
        mesh = skfem.MeshLine(np.array([float(at) for at in self.stations]))
        self.basis = skfem.Basis(mesh, skfem.ElementLineHermite())
        starts = [float(one.start) for one in beam.stiffness]
        stiffness = np.array([float(one.EI) for one in beam.stiffness])
        within = np.searchsorted(starts, self.basis.global_coordinates()[0], side="right") - 1
        self.stiffness = stiffness[within]
        self.deflections, self.slopes = self.basis.nodal_dofs
        form = skfem.BilinearForm(energy)
        self.matrix = form.assemble(self.basis, stiffness=self.stiffness).tolil()
        self.held: list[int] = []
        for station, *freedoms in zip(beam.stations, self.deflections, self.slopes, strict=True):
            support = station.support
            if support is None:
                continue
            holds = support.holds_vertical, support.holds_rotation
            springs = support.vertical, support.rotational
            for freedom, is_held, spring in zip(freedoms, holds, springs, strict=True):
                self.matrix[freedom, freedom] += float(spring)
                if is_held and not spring:
                    self.held.append(freedom)

    def under_load(self, at: Fraction) -> Floats:
        """The freedoms under a unit load at a node."""
        load = self.basis.zeros()
        load[self.deflections[self.stations.index(at)]] = 1
        system = skfem.condense(self.matrix.tocsr(), load, D=np.array(self.held))
        return np.asarray(skfem.solve(*system))

    def moment(self, moved: Floats, at: Fraction) -> float:
        """Sagging + just right of a node: -EI w'', straight along the element."""
        element = self.stations.index(at)
        moments = -self.stiffness * self.basis.interpolate(moved).hess[0, 0]
        places = self.basis.global_coordinates()[0]
        line = np.polynomial.Polynomial.fit(places[element], moments[element], 1)
        return float(line(float(at)))


@pytest.mark.parametrize("kind", ["deflection", "rotation", "moment", "reaction"])
def test_every_station(kind: EffectKind) -> None:
    elements = FiniteElements(BEAM)
    places = [one for one in BEAM.stations if one.support or kind != "reaction"][:-1]
    effects = [Effect(kind, str(one.at), one.at, "right" if one.at else None) for one in places]
    lines = ordinates(BEAM, effects)
    for number, at in enumerate(elements.stations):
        moved = elements.under_load(at)
        unheld = elements.matrix @ moved
        for one, line in zip(places, lines, strict=True):
            node = elements.stations.index(one.at)
            if kind == "moment":
                expected = elements.moment(moved, one.at)
            elif kind == "deflection":
                expected = moved[elements.deflections[node]]
            elif kind == "rotation":
                expected = moved[elements.slopes[node]]
            elif one.support and one.support.vertical:
                expected = float(one.support.vertical) * moved[elements.deflections[node]]
            else:
                expected = (at == one.at) - unheld[elements.deflections[node]]
            scale = np.abs(line.left).max() + 1e-30
            assert abs(line.right[number] - expected) < 1e-9 * scale, (one.at, at)
