"""The beam: where its supports, releases and sections stand, and what they are called."""

from __future__ import annotations

from dataclasses import dataclass, field
from fractions import Fraction
from pathlib import Path

from calcpack.exact.numbers import LARGEST
from calcpack.intake.reading import Reading
from calcpack.intake.stiffness import read_stiffness
from calcpack.intake.values import alternatives, within
from calcpack.model.beam import (
    Beam,
    Beyond,
    Datum,
    Release,
    Section,
    Source,
    Support,
    Tenth,
    Typed,
)

WORDS = ("supports", "sections", "tenths")
"""What ``at`` of an effect may say in place of a name; so nothing may be called so."""

_WITHOUT_PLACES = ("beam.stiffness", "beam.redundants")

Stand = tuple[Fraction | None, Source]
"""A station, None while it is not known, and where it comes from."""


@dataclass(frozen=True)
class Outline:
    """What could be read of the beam.

    Attributes:
        beam: all that was accepted; while ``length`` is None its own is out of all reach.
        length: the length of the beam, None where it was refused.
        names: every name of a station with its place, None where that was refused.
        named: whether ``names`` misses none, since each name could be read.
        whole: whether the places on ``beam`` are all that the file states; else more may have
            been meant.
    """

    beam: Beam
    length: Fraction | None
    names: dict[str, Fraction | None]
    named: bool
    whole: bool


def read_beam(reading: Reading, folder: Path | None) -> Outline:
    """Read the beam, or what can be read of it where something is refused.

    Length and stations come from ``length`` and each support's ``at``, or from ``spans`` and
    overhangs. Supports, releases and sections come sorted by station. A table of stiffness is
    looked for in ``folder``.
    """
    lists = ("beam", "beam.supports", "beam.releases", "beam.sections")
    drawing = _Drawing(reading, named=not any(map(reading.refused, lists)))
    end: Source = Typed("beam.length")
    if not reading.refused("beam"):
        end = drawing.read_supports()
        drawing.read_releases()
        drawing.check_faces()
        drawing.read_sections()
    beam = Beam(
        LARGEST if drawing.length is None else drawing.length,
        tuple(sorted(drawing.supports.values(), key=lambda support: support.at)),
        tuple(sorted(drawing.releases.values(), key=lambda release: release.at)),
        tuple(sorted(drawing.sections, key=lambda section: section.at)),
        end,
        read_stiffness(reading, drawing.length, folder),
    )
    refused = any(
        problem.path.startswith("beam") and not problem.path.startswith(_WITHOUT_PLACES)
        for problem in reading.problems
    )
    whole = reading.units is not None and not refused
    return Outline(beam, drawing.length, drawing.names, drawing.named, whole)


@dataclass
class _Drawing:
    reading: Reading
    named: bool
    length: Fraction | None = None
    names: dict[str, Fraction | None] = field(default_factory=dict)
    name_paths: dict[str, str] = field(default_factory=dict)
    supports: dict[str, Support] = field(default_factory=dict)
    releases: dict[str, Release] = field(default_factory=dict)
    sections: list[Section] = field(default_factory=list)

    def read_supports(self) -> Source:
        """Read the supports and the length; the source of the length comes back."""
        reading, paths = self.reading, self.reading.items("beam.supports")
        if not reading.refused("beam.supports") and not any(map(self._may_hold_vertically, paths)):
            needs = "must have a pin, a roller, a fixed support or a vertical spring"
            reading.refuse("beam.supports", needs, "no vertical support")
        by_spans = reading.given("beam.spans") and not reading.given("beam.length")
        stands, end = self._by_spans(paths) if by_spans else self._by_stations(paths)
        taken: dict[Fraction, str] = {}
        for path, (at, source) in zip(paths, stands, strict=False):
            name, kind = self._claim(path), reading.value(f"{path}.kind")
            springs = self._springs(path)
            if kind == "spring" and springs == [0, 0]:
                reading.refuse(path, "must have vertical or rotational above 0", "no stiffness")
            if by_spans and reading.given(f"{path}.at"):
                reading.refuse(f"{path}.at", "must be left out: beam.spans places the supports")
            at = self._accepted(path, at, taken)
            if at is not None and name and kind:
                self.names[name] = at
                if kind != "spring" or (None not in springs and any(springs)):
                    face = reading.value(f"{path}.face")
                    vertical, rotational = (spring or Fraction(0) for spring in springs)
                    self.supports[path] = Support(
                        name, at, kind, source, face, vertical, rotational, path
                    )
        return end

    def _may_hold_vertically(self, path: str) -> bool:
        kind = self.reading.value(f"{path}.kind")
        return kind != "guided" and (kind != "spring" or self._springs(path)[0] != 0)

    def _springs(self, path: str) -> list[Fraction | None]:
        return [self.reading.value(f"{path}.{key}") for key in ("vertical", "rotational")]

    def _by_stations(self, paths: list[str]) -> tuple[list[Stand], Source]:
        reading = self.reading
        if reading.given("beam.spans"):
            reading.refuse("beam.spans", "must be left out beside beam.length")
        elif not reading.given("beam.length"):
            reading.refuse("beam.length", "must be given, or beam.spans")
        for path in paths:
            if reading.lacks(f"{path}.at") and not reading.given("beam.spans"):
                reading.refuse(f"{path}.at", "must be given")
        self.length = reading.value("beam.length")
        stands = [(reading.value(f"{path}.at"), Typed(f"{path}.at")) for path in paths]
        return list(stands), Typed("beam.length")

    def _by_spans(self, paths: list[str]) -> tuple[list[Stand], Source]:
        reading, spans = self.reading, self.reading.items("beam.spans")
        names = [reading.value(f"{path}.name") or "" for path in paths]
        at, beyond = reading.value("beam.overhang_left"), reading.value("beam.overhang_right")
        source: Source = Beyond("", "beam.overhang_left") if at else Datum()
        stands = [(at, source)]
        for previous, path in zip(names, spans, strict=False):
            span = reading.value(path)
            at = None if at is None or span is None else at + span
            source = Beyond(previous, path)
            stands.append((at, source))
        if paths and spans and len(paths) != len(spans) + 1:
            needs = f"must be {len(spans) + 1}, one more than beam.spans"
            reading.refuse("beam.supports", needs, f"{len(paths)} supports")
        elif spans and at is not None and beyond is not None:
            self.length = at + beyond
        stands += [(None, source)] * (len(paths) - len(stands))
        return stands, Beyond(names[-1], "beam.overhang_right") if names and beyond else source

    def read_releases(self) -> None:
        taken: dict[Fraction, str] = {}
        for path in self.reading.items("beam.releases"):
            name, kind = self._claim(path), self.reading.value(f"{path}.kind")
            at = self._accepted(path, self.reading.value(f"{path}.at"), taken, inside=True)
            if at is not None and name and kind:
                self.names[name] = at
                self.releases[path] = Release(name, at, kind, Typed(f"{path}.at"))

    def check_faces(self) -> None:
        """A support says which face of a release it holds where both could be, and only there."""
        reading = self.reading
        releases = {release.at: release for release in self.releases.values()}
        all_known = len(self.releases) == len(reading.items("beam.releases"))
        for path, support in self.supports.items():
            release, face = releases.get(support.at), f"{path}.face"
            needed = release and (release.kind == "slide" or support.holds_rotation)
            if release and needed and not reading.given(face):
                needs = f'must be "left" or "right": which face of release {release.name} it holds'
                reading.refuse(face, needs)
            elif support.face and not needed and all_known:
                reading.refuse(face, "must be left out: no release here needs it")

    def read_sections(self) -> None:
        expanded = False
        for path in self.reading.items("beam.sections"):
            if self.reading.value(path) != "tenths":
                name = self._claim(path)
                at = self._accepted(path, self.reading.value(f"{path}.at"), {})
                if at is not None and name:
                    self._add_section(Section(name, at, Typed(f"{path}.at")))
            elif expanded:
                self.reading.refuse(path, "must stand once")
            else:
                self._expand_tenths(path)
                expanded = True

    def _expand_tenths(self, path: str) -> None:
        paths = self.reading.items("beam.supports")
        if len(paths) == 1:
            self.reading.refuse(path, "needs two supports")
        supports = sorted(self.supports.values(), key=lambda support: support.at)
        for span in range(1, len(paths)):
            for tenths in range(11 if span == len(paths) - 1 else 10):
                name = f"{span}.{tenths}"
                if name in self.name_paths:
                    needs = f"must not name a section {name!r}, as {self.name_paths[name]} does"
                    self.reading.refuse(path, needs)
                    continue
                self.name_paths[name] = path
                self.names[name] = None
                if len(supports) == len(paths):  # else one that was refused may stand anywhere
                    start, end = supports[span - 1 : span + 1]
                    at = start.at + (end.at - start.at) * tenths / 10
                    self._add_section(Section(name, at, Tenth(start.name, end.name, tenths)))

    def _add_section(self, section: Section) -> None:
        self.names[section.name] = section.at
        self.sections.append(section)

    def _claim(self, table: str) -> str | None:
        """The name in a table, unless it is refused, or means something else already."""
        path = f"{table}.name"
        name: str | None = self.reading.value(path)
        if name in WORDS:
            needs = f"must not be {alternatives(WORDS)}, which an effect's at may say"
            self.reading.refuse(path, needs)
        elif name in self.name_paths:
            self.reading.refuse(path, f"must differ from the name at {self.name_paths[name]}")
        elif name is None:
            self.named = False
        else:
            self.name_paths[name] = path
            self.names[name] = None
            return name
        return None

    def _accepted(
        self, table: str, at: Fraction | None, taken: dict[Fraction, str], inside: bool = False
    ) -> Fraction | None:
        """The station of a table, unless it is off the beam, or another's in ``taken``."""
        length, path = self.length, f"{table}.at"
        if at is None:
            return None
        if length is not None and not (0 < at < length if inside else 0 <= at <= length):
            self.reading.refuse(path, within(length, self.reading.units, inside))
        elif taken.setdefault(at, table) != table:
            self.reading.refuse(path, f"must not share its place with {taken[at]}")
        else:
            return at
        return None
