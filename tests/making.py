"""Moving loads, lines and whole calculations for tests, built as a reader would build them."""

from __future__ import annotations

import itertools
import string
from collections.abc import Sequence
from datetime import date
from fractions import Fraction

from beams import Place
from loads import numbers_of

from calcpack.elastic.compatibility import deflection_line, force_method
from calcpack.elastic.redundants import redundants_by_rule
from calcpack.elastic.released import release
from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import (
    Beam,
    Beyond,
    Datum,
    Face,
    Section,
    Source,
    Support,
    SupportKind,
    Tenth,
    Typed,
)
from calcpack.model.loads import MovingLoad
from calcpack.model.request import Calculation, Cover, Effect, EffectKind, Package, Signature
from calcpack.statics.influence import effect_line, unknown_lines
from calcpack.statics.plan import plan_of_solution
from calcpack.statics.stability import classify
from calcpack.statics.system import cut_into_bodies

COVER = Cover("Ferry ramp girder", "FR-12", prepared=Signature("P. Linden", date(2026, 4, 7)))


def make_span_beam(
    spans: Sequence[Place],
    kinds: Sequence[SupportKind],
    overhang_left: Place = 0,
    overhang_right: Place = 0,
) -> Beam:
    """A beam stated by spans and overhangs, with a section at every tenth of every span."""
    at = Fraction(overhang_left)
    source: Source = Beyond("", "beam.overhang_left") if at else Datum()
    supports = []
    lengths = [Fraction(span) for span in spans] + [Fraction(0)]
    for i, (name, kind, span) in enumerate(
        zip(string.ascii_uppercase, kinds, lengths, strict=False)
    ):
        supports.append(Support(name, at, kind, source))
        at, source = at + span, Beyond(name, f"beam.spans[{i}]")
    sections = []
    for i, (one, two) in enumerate(itertools.pairwise(supports), start=1):
        for tenths in range(11 if i == len(spans) else 10):
            place = one.at + (two.at - one.at) * tenths / 10
            sections.append(Section(f"{i}.{tenths}", place, Tenth(one.name, two.name, tenths)))
    end = supports[-1].source
    if overhang_right:
        at, end = at + Fraction(overhang_right), Beyond(supports[-1].name, "beam.overhang_right")
    return Beam(at, tuple(supports), (), tuple(sections), end)


def make_calculation(
    beam: Beam,
    effects: Sequence[Effect],
    loads: Sequence[MovingLoad] = (),
    units: str = "US",
    cover: Cover = COVER,
) -> Calculation:
    """A calculation; ``plain`` holds every number by its path and the effects by their names."""
    values: dict[str, Fraction] = {}
    for station in beam.stations:
        values |= _typed(beam, station.at, station.source)
    for support in beam.supports:
        if support.kind == "spring":
            values[f"{support.path}.vertical"] = support.vertical
            values[f"{support.path}.rotational"] = support.rotational
    for stretch in beam.stiffness:
        values[f"{stretch.path}.EI"] = stretch.EI
    for load in loads:
        values |= {one.path: one.value for one in numbers_of(load) if one.path}
    plain = {
        "format": 1,
        "units": units,
        "numbers": {path: str(value) for path, value in values.items()},
        "effects": [effect.label for effect in effects],
    }
    return Calculation(
        units, cover, Package(), (), beam, tuple(effects), tuple(loads), plain, values, ()
    )


def _typed(beam: Beam, at: Fraction, source: Source) -> dict[str, Fraction]:
    if isinstance(source, Typed):
        return {source.path: at}
    if isinstance(source, Beyond):
        start = beam.station(source.previous).at if source.previous else Fraction(0)
        return {source.path: at - start}
    return {}


def make_effect(beam: Beam, kind: EffectKind, at: str, face: Face | None = None) -> Effect:
    """The effect at a named place."""
    return Effect(kind, at, beam.station(at).at, face)


def lines_of(
    beam: Beam, effects: Sequence[Effect], redundants: Sequence[Effect] | None = None
) -> list[Piecewise]:
    """The influence line of each effect, by statics and where needed by the force method."""
    degree = classify(beam, cut_into_bodies(beam)).degree
    chosen = redundants_by_rule(beam, degree) if redundants is None else redundants
    system = cut_into_bodies(beam, chosen)
    plan = plan_of_solution(beam, system)
    moved = [one.station for one in effects if one.kind in ("deflection", "rotation")]
    method = force_method(release(beam, system, plan, moved))
    unknowns = unknown_lines(beam, plan, method.lines)
    return [
        deflection_line(method, effect)
        if effect.kind in ("deflection", "rotation")
        else effect_line(beam, system, unknowns, effect)[0]
        for effect in effects
    ]


def line_of(beam: Beam, kind: EffectKind, at: str, face: Face | None = None) -> Piecewise:
    """The influence line of the effect at a named place."""
    return lines_of(beam, [make_effect(beam, kind, at, face)])[0]


def broken(*points: tuple[Place, Place]) -> Piecewise:
    """A line through points (station, value); a station given twice is a jump."""
    exact = [(Fraction(x), Fraction(y)) for x, y in points]
    return Piecewise.from_pieces(
        (a, b, (y, (z - y) / (b - a))) for (a, y), (b, z) in itertools.pairwise(exact) if a < b
    )
