"""The effects whose influence lines are wanted: kinds, places and faces."""

from __future__ import annotations

import itertools
from collections.abc import Iterable
from dataclasses import replace
from fractions import Fraction

from calcpack.intake.beam import WORDS, Outline
from calcpack.intake.places import read_place
from calcpack.intake.reading import Reading
from calcpack.intake.shown import decimal_text
from calcpack.intake.values import unit_of
from calcpack.model.beam import Beam, Face, Section, Support, Tenth, Typed
from calcpack.model.request import Effect, EffectKind

MOST_STATIONS = 200

_AT_SUPPORTS = {"reaction": "vertically", "moment reaction": "rotation"}

_OPENED_BY = {"deflection": "slide", "rotation": "hinge"}


def read_effects(reading: Reading, outline: Outline) -> tuple[tuple[Effect, ...], Beam]:
    """The effects in the order of the file, or the default ones where it states none.

    Where two values exist and no side is chosen, both faces come, left first. The beam comes back
    with a nameless section at each place that is no key station otherwise.
    """
    wanted = _Wanted(reading, outline)
    if reading.items("effects"):
        for path in reading.items("effects"):
            wanted.read(path)
    elif outline.whole:
        wanted.add_default()
    sections = sorted(
        (*outline.beam.sections, *wanted.sections.values()), key=lambda section: section.at
    )
    beam = replace(outline.beam, sections=tuple(sections))
    count = len(beam.supports) + len(beam.releases) + len(beam.sections)
    if count > MOST_STATIONS:
        path = "beam" if count - len(wanted.sections) > MOST_STATIONS else "effects"
        said = f"{count} supports, releases and sections together"
        reading.refuse(path, f"must be at most {MOST_STATIONS}", said)
    return tuple(wanted.found), beam


class _Wanted:
    def __init__(self, reading: Reading, outline: Outline) -> None:
        self.reading = reading
        self.outline = outline
        self.beam = outline.beam
        self.stations = {station.at: station for station in outline.beam.stations}
        self.found: dict[Effect, str] = {}
        """Each effect with the path of the place that asked for it."""
        self.sections: dict[Fraction, Section] = {}
        self.stated: list[str | None] | None = None
        """What stands in beam.sections, "tenths" or None for a table; None if it was refused."""
        if not reading.refused("beam") and not reading.refused("beam.sections"):
            self.stated = [reading.value(item) for item in reading.items("beam.sections")]

    def read(self, path: str) -> None:
        kinds: list[EffectKind] = []
        for item in self.reading.items(f"{path}.kind"):
            kind = self.reading.value(item)
            if kind in kinds:
                self.reading.refuse(item, "must be stated once")
            elif kind:
                kinds.append(kind)
        side, show = self.reading.value(f"{path}.side"), self.reading.value(f"{path}.show")
        places = {item: self._places(item) for item in self.reading.items(f"{path}.at")}
        self._check_side(f"{path}.side", side, kinds, set(itertools.chain(*places.values())))
        for item, stations in places.items():
            held = {kind: self._held(kind, item, stations) for kind in kinds}
            pairs = itertools.product(stations, kinds)
            effects = (self._effects(kind, at, side) for at, kind in pairs if at in held[kind])
            self._add(item, [replace(one, show=show) for one in itertools.chain(*effects)])

    def add_default(self) -> None:
        """Every reaction and moment reaction, then moment and shear at each section."""
        places = [support.at for support in self.beam.supports]
        wanted: list[tuple[EffectKind, Fraction]] = [
            *(("reaction", at) for at in places if self._holds("reaction", at)),
            *(("moment reaction", at) for at in places if self._holds("moment reaction", at)),
        ]
        for section in self.beam.sections:
            wanted += [("moment", section.at), ("shear", section.at)]
        for kind, at in wanted:
            for effect in self._effects(kind, at, None):
                self.found[effect] = ""

    def _places(self, path: str) -> tuple[Fraction, ...]:
        """The stations that a place means; none where it is refused or not known."""
        word = self.reading.value(path)
        if word in WORDS:
            return self._group(word, path)
        place = read_place(self.reading, self.outline, path)
        if place is None:
            return ()
        if place not in self.stations:
            self.sections.setdefault(place, Section("", place, Typed(path)))
        return (place,)

    def _group(self, word: str, path: str) -> tuple[Fraction, ...]:
        if self.stated is not None:
            if word == "tenths" and "tenths" not in self.stated:
                self.reading.refuse(path, 'needs "tenths" in beam.sections')
            elif word == "sections" and not self.stated:
                self.reading.refuse(path, "needs a section in beam.sections")
        members: Iterable[Support | Section] = self.beam.sections
        if word == "supports":
            members = self.beam.supports
        elif word == "tenths":
            members = (one for one in self.beam.sections if isinstance(one.source, Tenth))
        return tuple(dict.fromkeys(one.at for one in members))

    def _support(self, at: Fraction) -> Support | None:
        station = self.stations.get(at)
        return station.support if station else None

    def _holds(self, kind: EffectKind, at: Fraction) -> bool:
        """Whether a support there holds what the effect is about: the shear, or the moment."""
        support = self._support(at)
        if support is None:
            return False
        return support.holds_vertical if kind in ("reaction", "shear") else support.holds_rotation

    def _jumps(self, kind: EffectKind, at: Fraction) -> bool:
        """Whether the effect has two values there, if that is inside the beam."""
        if kind in ("shear", "moment"):
            return self._holds(kind, at)
        station = self.stations.get(at)
        release = station.release if station else None
        return release is not None and _OPENED_BY[kind] == release.kind

    def _held(
        self, kind: EffectKind, path: str, stations: tuple[Fraction, ...]
    ) -> tuple[Fraction, ...]:
        """The stations where the kind of effect exists; what is missing is refused at ``path``."""
        if kind not in _AT_SUPPORTS:
            return stations
        held = tuple(at for at in stations if self._holds(kind, at))
        support = f"a support that holds {_AT_SUPPORTS[kind]}, for a {kind}"
        if self.reading.value(path) == "supports":
            if not held and self.outline.whole:
                self.reading.refuse(path, f"needs {support}")
        elif any(self.outline.whole or self._support(at) for at in stations if at not in held):
            self.reading.refuse(path, f"must be {support}")
        return held

    def _check_side(
        self, path: str, side: Face | None, kinds: list[EffectKind], stations: set[Fraction]
    ) -> None:
        outside = {"left": Fraction(0), "right": self.beam.length}
        if side and outside[side] in stations and not _AT_SUPPORTS.keys() >= set(kinds):
            at = self._called(outside[side])
            self.reading.refuse(path, f"must not point off the beam at {at}")

    def _effects(self, kind: EffectKind, at: Fraction, side: Face | None) -> list[Effect]:
        faces: tuple[Face | None, ...] = (None,)
        # What could not be read of the beam may stand anywhere: then each place may have two faces.
        if (
            kind not in _AT_SUPPORTS
            and 0 < at < self.beam.length
            and (self._jumps(kind, at) or not self.outline.whole)
        ):
            faces = (side,) if side else ("left", "right")
        name = self._called(at)
        tag = self.beam.tags.get(name, "")
        return [Effect(kind, name, at, face, tag) for face in faces]

    def _called(self, at: Fraction) -> str:
        """The name of the station, or its decimal; with its unit if another place is named so."""
        station = self.stations.get(at)
        if station and station.name:
            return station.name
        text = decimal_text(at)
        while text in self.outline.names:
            text = f"{text} {unit_of('length', self.reading.units)}"
        return text

    def _add(self, path: str, effects: list[Effect]) -> None:
        """Add effects; what is there already is refused, of a group only if it adds nothing."""
        repeated = [effect for effect in effects if effect in self.found]
        group = self.reading.value(path) in WORDS
        if repeated and (not group or len(repeated) == len(effects)):
            needs = f"asks for {repeated[0].label} again, after {self.found[repeated[0]]}"
            self.reading.refuse(path, needs)
        for effect in effects:
            self.found.setdefault(effect, path)
