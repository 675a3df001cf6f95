"""How stiff the beam is in bending."""

from __future__ import annotations

from fractions import Fraction

from calcpack.model.beam import Beam


def stiffness_after(beam: Beam, at: Fraction) -> Fraction:
    """EI just right of a station before the right end; 1 where it is uniform and unknown.

    >>> from calcpack.model.beam import Stretch, Typed
    >>> end, two, five = Typed("beam.length"), Fraction(2), Fraction(5)
    >>> stretches = (
    ...     Stretch(Fraction(0), two, Fraction(700), end, "beam.stiffness[0]"),
    ...     Stretch(two, five, Fraction(900), end, "beam.stiffness[1]"),
    ... )
    >>> beam = Beam(five, (), (), (), end, stretches)
    >>> int(stiffness_after(beam, Fraction(1))), int(stiffness_after(beam, two))
    (700, 900)
    """
    found = (stretch.EI for stretch in beam.stiffness if stretch.start <= at < stretch.end)
    return next(found, Fraction(1))
