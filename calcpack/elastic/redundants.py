"""Which unknowns of an indeterminate beam are released."""

from __future__ import annotations

from collections.abc import Iterator

from calcpack.model.beam import Beam, Face
from calcpack.model.request import Effect
from calcpack.statics.stability import is_stable
from calcpack.statics.system import cut_into_bodies


def candidates(beam: Beam) -> Iterator[Effect]:
    """Moments over supports (both faces where rotation is held), couples, then reactions."""
    faces: tuple[Face, ...] = ("left", "right")
    for support in beam.supports:
        if 0 < support.at < beam.length and beam.station(support.at).release is None:
            tag = beam.tags[support.name]
            if support.holds_rotation:
                for face in faces:
                    yield Effect("moment", support.name, support.at, face, tag)
            elif support.holds_vertical:
                yield Effect("moment", support.name, support.at, None, tag)
    for support in beam.supports:
        if support.holds_rotation:
            tag = beam.tags[support.name]
            yield Effect("moment reaction", support.name, support.at, None, tag)
    for support in beam.supports:
        if support.holds_vertical:
            yield Effect("reaction", support.name, support.at, None, beam.tags[support.name])


def redundants_by_rule(beam: Beam, degree: int) -> tuple[Effect, ...]:
    """Take each candidate that leaves the released beam stable, until ``degree`` are taken.

    Stability is decided by exact rank. Without any support a chain of bodies has no self-stress,
    so that releasing reactions alone would do: enough candidates always exist.
    """
    taken: list[Effect] = []
    for candidate in candidates(beam):
        if len(taken) == degree:
            break
        if is_stable(cut_into_bodies(beam, [*taken, candidate])):
            taken.append(candidate)
    return tuple(taken)
