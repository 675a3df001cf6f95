"""The beam: supports, releases and sections on a line of stations."""

from __future__ import annotations

import itertools
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property
from typing import Literal

TAG_LENGTH = 12
"""The longest name that stands in symbols as it is."""

SupportKind = Literal["pin", "roller", "fixed", "guided", "spring"]
ReleaseKind = Literal["hinge", "slide"]
Face = Literal["left", "right"]


@dataclass(frozen=True)
class Typed:
    """A station that stands in calc.toml at ``path``."""

    path: str


@dataclass(frozen=True)
class Datum:
    """The left end of the beam: station 0 by definition."""


@dataclass(frozen=True)
class Beyond:
    """A station the length typed at ``path`` beyond the support ``previous`` ("": the left end)."""

    previous: str
    path: str


@dataclass(frozen=True)
class Tenth:
    """A station at ``tenths`` tenths of the way from one support to the next."""

    start: str
    end: str
    tenths: int


Source = Typed | Datum | Beyond | Tenth


@dataclass(frozen=True)
class Support:
    """A support; ``face`` is the side of a release at the same station that it holds, else None.

    A spring yields: ``vertical`` is its stiffness in force per length, ``rotational`` in moment
    per radian, each 0 where it holds nothing of that kind. Other supports do not yield. ``path``
    is where it stands in calc.toml.
    """

    name: str
    at: Fraction
    kind: SupportKind
    source: Source
    face: Face | None = None
    vertical: Fraction = Fraction(0)
    rotational: Fraction = Fraction(0)
    path: str = ""

    @property
    def holds_vertical(self) -> bool:
        return self.kind in ("pin", "roller", "fixed") or self.vertical > 0

    @property
    def holds_rotation(self) -> bool:
        return self.kind in ("fixed", "guided") or self.rotational > 0


@dataclass(frozen=True)
class Release:
    """A hinge passes no moment, a slide no shear."""

    name: str
    at: Fraction
    kind: ReleaseKind
    source: Source


@dataclass(frozen=True)
class Section:
    """A place of interest; ``name`` is "" where the engineer gave only a station."""

    name: str
    at: Fraction
    source: Source


@dataclass(frozen=True)
class Stretch:
    """A stretch of the beam with one bending stiffness ``EI`` (force x length squared, > 0).

    ``source`` is that of its start; ``path`` says where its stiffness stands in calc.toml, whose
    key ``EI``, or keys ``E`` and ``I`` in units of their own, the inputs then hold.
    """

    start: Fraction
    end: Fraction
    EI: Fraction
    source: Source
    path: str


@dataclass(frozen=True)
class Station:
    """All that stands at one place of the beam; ``name`` is what a sheet calls it."""

    at: Fraction
    name: str
    source: Source
    support: Support | None = None
    release: Release | None = None


@dataclass(frozen=True)
class Beam:
    """A straight beam from station 0 to ``length``; supports, releases and sections in order.

    Stations are in the calculation's unit of length. ``end`` says where the length comes from.
    ``stiffness`` covers the beam in order without gaps; empty: uniform and unknown.

    >>> Beam(Fraction(10), (Support("A", Fraction(0), "fixed", Typed("beam.supports[0].at")),),
    ...      (), (), Typed("beam.length")).station("A").at
    Fraction(0, 1)
    """

    length: Fraction
    supports: tuple[Support, ...]
    releases: tuple[Release, ...]
    sections: tuple[Section, ...]
    end: Source
    stiffness: tuple[Stretch, ...] = ()

    @cached_property
    def stations(self) -> tuple[Station, ...]:
        """The key stations in order: ends, supports, releases, sections, EI steps; one per place.

        A place is called after its support, else its release, else its section.
        """
        found: dict[Fraction, Station] = {}
        for at, name, source, support, release in self._places():
            known = found.get(at)
            if known is None:
                found[at] = Station(at, name, source, support, release)
            else:
                found[at] = Station(
                    at,
                    known.name or name,
                    known.source if known.name or not name else source,
                    known.support or support,
                    known.release or release,
                )
        return tuple(found[at] for at in sorted(found))

    def _places(
        self,
    ) -> Iterator[tuple[Fraction, str, Source, Support | None, Release | None]]:
        for support in self.supports:
            yield support.at, support.name, support.source, support, None
        for release in self.releases:
            yield release.at, release.name, release.source, None, release
        for section in self.sections:
            yield section.at, section.name, section.source, None, None
        for stretch in self.stiffness:
            yield stretch.start, "", stretch.source, None, None
        yield Fraction(0), "", Datum(), None, None
        yield self.length, "", self.end, None, None

    @cached_property
    def tags(self) -> Mapping[str, str]:
        """What stands for each name in symbols: the name, or S1, H2, X3 for one that is too long.

        S is for supports, H for releases, X for sections; a tag is never another place's name.
        """
        names = {name for _, name, *_ in self._places()}
        tags: dict[str, str] = {}
        kinds: dict[str, tuple[Support | Release | Section, ...]] = {
            "S": self.supports,
            "H": self.releases,
            "X": self.sections,
        }
        for letter, parts in kinds.items():
            free = (tag for n in itertools.count(1) if (tag := f"{letter}{n}") not in names)
            for part in parts:
                tags[part.name] = part.name if len(part.name) <= TAG_LENGTH else next(free)
        return tags

    @cached_property
    def _by_name(self) -> dict[str, Fraction]:
        return {name: at for at, name, *_ in self._places() if name}

    @cached_property
    def _by_place(self) -> dict[Fraction, Station]:
        return {station.at: station for station in self.stations}

    def stiffness_after(self, at: Fraction) -> Fraction:
        """EI just right of a station before the right end; 1 where it is uniform and unknown."""
        found = (one.EI for one in self.stiffness if one.start <= at < one.end)
        return next(found, Fraction(1))

    def station(self, place: str | Fraction) -> Station:
        """The key station of that name, or at that place.

        Raises:
            KeyError: no support, release, section or end there.
        """
        at = self._by_name[place] if isinstance(place, str) else place
        return self._by_place[at]
