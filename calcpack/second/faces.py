"""Which side of a place is meant where none is named."""

from __future__ import annotations

from fractions import Fraction

from calcpack.model.beam import Face


def face_or_inner(face: Face | None, at: Fraction) -> Face:
    """The named face; without one, the right face at the left end and the left face elsewhere.

    >>> face_or_inner(None, Fraction(0)), face_or_inner(None, Fraction(4))
    ('right', 'left')
    """
    return face or ("left" if at else "right")
