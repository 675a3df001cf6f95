"""Envelopes along the beam and the absolute maximum of each span, of every moving load."""

from __future__ import annotations

import itertools
from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from functools import cached_property

from calcpack.analysis import analyse
from calcpack.exact.numbers import decimals_to_end, printed
from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.beam import Beam, Face, Section, Station, Typed
from calcpack.model.loads import MovingLoad
from calcpack.model.request import Calculation, Effect, EffectKind
from calcpack.moving.absolute import Absolute, absolute_maximum, section_line
from calcpack.moving.critical import governing
from calcpack.moving.envelope import Envelope, Point, Worst, with_governing, worst_of
from calcpack.moving.governing import Governing
from calcpack.moving.kernels import LineSet
from calcpack.moving.placement import Stretch, joined
from calcpack.moving.target import Target

PARTS = 10
FACES: tuple[Face, Face] = ("left", "right")
Lines = dict[Effect, Piecewise]
Report = Callable[[str], None]


@dataclass(frozen=True)
class Along:
    """What the moving loads cause along the beam.

    Attributes:
        unshared: effects without a distribution of the load, of which nothing is told.
        absolutes: of the spans all over which the load has a distribution of the moment.
        hogging: where a uniform load on all spans causes a negative moment.
    """

    envelopes: tuple[Envelope, ...] = ()
    unshared: tuple[tuple[MovingLoad, Effect], ...] = ()
    absolutes: tuple[Absolute, ...] = ()
    hogging: tuple[Stretch, ...] = ()

    @cached_property
    def worst(self) -> Mapping[str, tuple[Worst, ...]]:
        """Per kind of effect the worst of all loads; empty where there is only one load."""
        if len({one.load.path for one in self.envelopes}) < 2:
            return {}
        kinds = dict.fromkeys(one.kind for one in self.envelopes)
        return {
            kind: worst_of([one for one in self.envelopes if one.kind == kind]) for kind in kinds
        }


def target_of(beam: Beam, effect: Effect, line: Piecewise) -> Target:
    """A line as the search for its governing placement sees it."""
    places = [support.at for support in beam.supports]
    stops = sorted({Fraction(0), *places, beam.length})
    interior = effect.kind == "reaction" and places[0] < effect.station < places[-1]
    spans = tuple(itertools.pairwise(stops))
    return Target(line, effect.kind, effect.station, interior, spans)


def along_beam(calculation: Calculation, report: Report = lambda _: None) -> Along:
    """Every load's extremes at the tenths of spans and overhangs, at supports and at sections."""
    if not calculation.moving:
        return Along()
    beam = _with_tenths(calculation.beam)
    effects = tuple(_effects(beam, deflections=bool(beam.stiffness)))
    found = analyse(beam, calculation.units, effects, calculation.redundants)
    lines = {one.effect: one.line for one in found.lines}
    envelopes: list[Envelope] = []
    unshared: list[tuple[MovingLoad, Effect]] = []
    absolutes: list[Absolute] = []
    for load in calculation.moving:
        for kind in dict.fromkeys(effect.kind for effect in effects):
            report(f"{load.name}: {kind} along the beam")
            asked = [effect for effect in lines if effect.kind == kind]
            shared = [one for one in asked if load.share(kind, one.station) is not None]
            unshared += [(load, one) for one in asked if one not in shared]
            envelopes += [_envelope(beam, load, kind, shared, lines)] if shared else []
        for number, span in enumerate(_spans(beam), start=1):
            report(f"{load.name}: absolute maximum of span {number}")
            absolute = _absolute(beam, load, number, span, lines)
            absolutes += [absolute] if absolute else []
    return Along(tuple(envelopes), tuple(unshared), tuple(absolutes), _hogging(beam, lines))


def _hogging(beam: Beam, lines: Lines) -> tuple[Stretch, ...]:
    """Where the moment under a unit of uniform load on the whole beam is negative.

    In a span it is that at its two ends, straight between, and t (l - t) / 2; on an overhang of
    which x is left it is -x² / 2. Its zeros, the points of contraflexure, are decimals of nine
    places.
    """
    half = Fraction(1, 2)
    pieces: list[tuple[Fraction, Fraction, tuple[Fraction, ...]]] = []
    first, last = beam.supports[0].at, beam.supports[-1].at
    if first:
        pieces.append((Fraction(0), first, (Fraction(0), Fraction(0), -half)))
    for start, end in _spans(beam):
        length = end - start
        left, right = (
            _end_moment(lines, at, face).integral(Fraction(0), beam.length)
            for at, face in ((start, "right"), (end, "left"))
        )
        pieces.append((start, end, (left, (right - left) / length + length * half, -half)))
    if last < beam.length:
        reach = beam.length - last
        pieces.append((last, beam.length, (-reach * reach * half, reach, -half)))
    moment = Piecewise.from_pieces(pieces)
    return joined([(start, end) for start, end, sign in moment.signed_runs() if sign < 0])


def count_of_reports(calculation: Calculation) -> int:
    """How often ``along_beam`` reports."""
    kinds = 3 + bool(calculation.beam.stiffness)
    kinds += any(one.holds_rotation for one in calculation.beam.supports)
    return len(calculation.moving) * (kinds + len(calculation.beam.supports) - 1)


def _spans(beam: Beam) -> list[Stretch]:
    return list(itertools.pairwise(support.at for support in beam.supports))


def _with_tenths(beam: Beam) -> Beam:
    """The beam with a nameless section at each tenth of its spans and overhangs."""
    stops = sorted({Fraction(0), *(support.at for support in beam.supports), beam.length})
    tenths = {
        start + (end - start) * part / PARTS
        for start, end in itertools.pairwise(stops)
        for part in range(PARTS + 1)
    }
    known = {station.at for station in beam.stations}
    sections = (*beam.sections, *(Section("", at, Typed("")) for at in tenths - known))
    return replace(beam, sections=tuple(sorted(sections, key=lambda section: section.at)))


def _effects(beam: Beam, deflections: bool) -> Iterator[Effect]:
    for support in beam.supports:
        if support.holds_vertical:
            yield Effect("reaction", support.name, support.at)
        if support.holds_rotation:
            yield Effect("moment reaction", support.name, support.at)
    kinds: tuple[EffectKind, ...] = ("moment", "shear")
    for kind in (*kinds, *(("deflection",) if deflections else ())):
        for station in beam.stations:
            if station.name or station.source == Typed("") or station.at in (0, beam.length):
                for face in _faces(beam, kind, station):
                    yield Effect(kind, _called(station), station.at, face)


def _faces(beam: Beam, kind: EffectKind, station: Station) -> tuple[Face | None, ...]:
    """Both faces where two values exist, else none."""
    support, release = station.support, station.release
    if not 0 < station.at < beam.length:
        return (None,)
    if kind == "deflection":
        two = release is not None and release.kind == "slide"
    else:
        held = support and (support.holds_vertical if kind == "shear" else support.holds_rotation)
        two = bool(held)
    return FACES if two else (None,)


def _called(station: Station) -> str:
    if station.name:
        return station.name
    decimals = decimals_to_end(station.at, 6)
    return printed(station.at, 3 if decimals is None else decimals)


def _envelope(
    beam: Beam, load: MovingLoad, kind: str, effects: Sequence[Effect], lines: Lines
) -> Envelope:
    targets = [target_of(beam, effect, lines[effect]) for effect in effects]
    base = LineSet([target.line for target in targets])
    greatest = governing(targets, load, 1, base, near=0)
    least = governing(targets, load, -1, base, near=0)
    points = [
        Point(effect, *pair, with_governing(_beside(effect, lines), pair))
        for effect, pair in zip(effects, zip(greatest, least, strict=True), strict=True)
    ]
    return Envelope(load, kind, tuple(points))


def _beside(effect: Effect, lines: Lines) -> dict[str, tuple[Piecewise, Side | None]]:
    """The lines of what is told together with an effect.

    With a moment the shear just left and just right of it, a load at the section standing between
    the two; with a shear the moment.
    """
    if effect.kind == "shear":
        face = effect.face if replace(effect, kind="moment") in lines else None
        moment = replace(effect, kind="moment", face=face)
        return {"moment": (lines[moment], None)} if moment in lines else {}
    if effect.kind != "moment":
        return {}
    found: dict[str, tuple[Piecewise, Side | None]] = {}
    for face, side in zip(FACES, ("right", "left"), strict=True):
        both = replace(effect, kind="shear", face=face)
        alone = replace(effect, kind="shear", face=None)
        line = lines.get(both) or lines.get(alone)
        if line is not None:
            found[f"shear {face}"] = line, "left" if side == "left" else "right"
    return found


def _absolute(
    beam: Beam, load: MovingLoad, number: int, span: tuple[Fraction, Fraction], lines: Lines
) -> Absolute | None:
    ends = tuple(
        _end_moment(lines, at, face) for at, face in zip(span, ("right", "left"), strict=True)
    )

    def target(section: Fraction) -> Target:
        line = section_line(section, span, (ends[0], ends[1]))
        return target_of(beam, Effect("moment", "", section), line)

    found: list[tuple[Fraction, Governing]] = []
    for start, end, share in load.shares_along("moment", *span):
        if share is None:
            return None
        alone = replace(load, shares=(replace(share, kinds=(), start=None, end=None),))
        here = absolute_maximum((start, end), target, alone)
        found += [here] if here else []
    if not found:
        return None
    section, placement = max(found, key=lambda one: one[1].value)
    return Absolute(load, number, section, target(section).line, placement)


def _end_moment(lines: Lines, at: Fraction, face: str) -> Piecewise:
    """The line of the moment at a support, on the face towards the span."""
    there = [one for one in lines if one.kind == "moment" and one.station == at]
    return lines[next(one for one in there if one.face in (None, face))]
