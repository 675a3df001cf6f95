"""The absolute maximum moment of a span: section and place of the load found together.

In a span the moment under given loads is that of a simple beam and, straight between, those at its
two ends; so the influence line of any section follows from the lines of the end moments. The
governing value of a section, whose place is exact, is continuous along the span; the section that
has the greatest is closed in on from a grid, and what it is found at is a decimal of nine places.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction

from calcpack.exact.numbers import decimals_to_end
from calcpack.exact.piecewise import Piecewise
from calcpack.model.loads import MovingLoad
from calcpack.moving.critical import governing, greatest
from calcpack.moving.governing import Governing
from calcpack.moving.placement import Stretch, trains_value
from calcpack.moving.target import Target

GRID_PARTS = 48
"""Parts of the stretch at whose ends sections are tried first."""
ROUNDS, NARROWER, ASIDE = 3, 4, 4
"""Rounds of closing in, each so many times narrower, with so many sections to either side."""
HILLS, NEARLY = 3, 0.99
"""As many of the highest sections of the grid are closed in on, if nearly as high as the best."""
POLISHED = (Fraction(1, 10**3), Fraction(1, 10**5))
"""Parts of the stretch over which the top is then taken for a parabola, exactly."""


@dataclass(frozen=True)
class Absolute:
    """The greatest sagging moment of a span under a load: the section, its line, the placement."""

    load: MovingLoad
    span: int
    section: Fraction
    line: Piecewise
    found: Governing


def section_line(section: Fraction, span: Stretch, ends: tuple[Piecewise, Piecewise]) -> Piecewise:
    """The influence line of the moment at a section of a span.

    Args:
        section: in the span.
        span: from one support to the next.
        ends: the lines of the moment just right of the one and just left of the other.

    >>> zero = Piecewise.from_pieces([(0, 10, (0,))])
    >>> section_line(Fraction(5), (Fraction(0), Fraction(10)), (zero, zero)).left(Fraction(5))
    Fraction(5, 2)
    """
    start, end = span
    length, first, last = end - start, ends[0].breaks[0], ends[0].breaks[-1]
    near, far = (end - section) / length, (section - start) / length
    tent = Piecewise.from_pieces(
        [
            (first, start, (0,)),
            (start, section, (0, near)),
            (section, end, (near * (section - start), -far)),
            (end, last, (0,)),
        ]
    )
    one = Fraction(1)
    return Piecewise.combined([(ends[0], near), (ends[1], far), (tent, one)])


def absolute_maximum(
    stretch: Stretch,
    target: Callable[[Fraction], Target],
    load: MovingLoad,
) -> tuple[Fraction, Governing] | None:
    """The section with the greatest sagging moment, and how the load then stands.

    Args:
        stretch: of a span, where the load has one distribution; its ends are sections too.
        target: what is looked for at a section, by its station.
        load: the load.

    Returns:
        None where no section has a positive moment.
    """
    start, end = stretch
    step = (end - start) / GRID_PARTS
    sections = [start + step * part for part in range(GRID_PARTS + 1)]
    values = _values(target, load, sections)
    hills = _highest(sections, values)
    if not hills:
        return None
    for _ in range(ROUNDS):
        around = [
            [_section(hill + step * part / ASIDE, stretch) for part in range(-ASIDE, ASIDE + 1)]
            for hill in hills
        ]
        tried = [[one for one in some if start <= one <= end] for some in around]
        values = _values(target, load, [one for some in tried for one in some])
        found = iter(values)
        hills = [max(((next(found), one) for one in some), key=_value)[1] for some in tried]
        step /= NARROWER
    judged = [
        (section, governing([target(section)], load, 1)[0])
        for hill in hills
        for section in _polished(hill, stretch, target, load)
    ]
    best = min(judged, key=lambda one: (-one[1].value, decimals_to_end(one[0], 9) or 0, one[0]))
    return best if best[1].value > 0 else None


def _section(at: Fraction, stretch: Stretch) -> Fraction:
    """The nearest decimal of nine places; the end of the stretch if that is nearest to it too."""
    decimal = round(at, 9)
    return next((end for end in stretch if round(end, 9) == decimal), decimal)


def _polished(
    section: Fraction, stretch: Stretch, target: Callable[[Fraction], Target], load: MovingLoad
) -> set[Fraction]:
    """The section, and where what stands at it now would have its top if it moved with it.

    Under an axle that moves with the section the moment is a polynomial of its place: on a
    determinate beam a parabola, else nearly one over a short way.
    """
    found = {section}
    for part in POLISHED:
        step = (stretch[1] - stretch[0]) * part
        stands = governing([target(section)], load, 1, near=0)[0]
        if stands.case is None or not stretch[0] < section - step < section + step < stretch[1]:
            break
        below, here, above = (
            _moved(target(section + by).line, stands, section, by) for by in (-step, 0, step)
        )
        if 2 * here <= below + above:
            break
        top = section + step * (above - below) / (2 * (2 * here - below - above))
        if not stretch[0] < top < stretch[1] or abs(top - section) > 8 * step:
            break
        section = round(top, 9)
        found |= {section, round(section, 6)}
    return found


def _moved(line: Piecewise, found: Governing, section: Fraction, by: Fraction | int) -> Fraction:
    """The value where the axles that are held at the section move on with it."""
    case = found.case
    assert case is not None
    whole = Fraction(0)
    if found.position is not None:
        moving = {
            axle
            for group in found.position.groups
            if section in found.position.stations[group.first : group.last + 1]
            for axle in range(group.first, group.last + 1)
        }
        stations = tuple(
            at + by if axle in moving else at for axle, at in enumerate(found.position.stations)
        )
        whole += trains_value(line, case, replace(found.position, stations=stations), 1)
    if case.uniform is not None:
        positive, _ = line.areas()
        whole += case.uniform.value * positive * case.weighs("uniform")
    return whole


def _values(
    target: Callable[[Fraction], Target], load: MovingLoad, sections: Sequence[Fraction]
) -> list[float]:
    return greatest([target(section) for section in sections], load, 1)


def _value(pair: tuple[float, Fraction]) -> float:
    return pair[0]


def _highest(sections: Sequence[Fraction], values: Sequence[float]) -> list[Fraction]:
    """The highest of the sections that are no lower than their neighbours."""
    padded = [0.0, *values, 0.0]
    hills = [
        (value, section)
        for value, section, before, after in zip(values, sections, padded, padded[2:], strict=False)
        if value > 0 and value >= max(before, after)
    ]
    hills.sort(key=lambda one: -one[0])
    return [section for value, section in hills[:HILLS] if value >= NEARLY * hills[0][0]]
