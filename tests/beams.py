"""Stable beams and their effects: by hand, at random, and for hypothesis."""

from __future__ import annotations

import itertools
import string
from collections.abc import Sequence
from fractions import Fraction
from random import Random
from typing import Any

from hypothesis import strategies as st

from calcpack.model.beam import (
    Beam,
    Face,
    Release,
    ReleaseKind,
    Section,
    Station,
    Stretch,
    Support,
    SupportKind,
    Typed,
)
from calcpack.model.request import Effect, EffectKind

Place = Fraction | int | str
Held = (
    tuple[Place, SupportKind]
    | tuple[Place, SupportKind, Face | None]
    | tuple[Place, SupportKind, Face | None, Place, Place]
)
RESTRAINTS: dict[SupportKind, int] = {"pin": 1, "roller": 1, "fixed": 2, "guided": 1}


def make_beam(
    length: Place,
    supports: Sequence[Held],
    releases: Sequence[tuple[Place, ReleaseKind]] = (),
    sections: Sequence[Place] = (),
    stiffness: Sequence[tuple[Place, Place]] = (),
) -> Beam:
    """A beam from plain tuples in order along it: supports A, B, ..., releases r1, ..., sections
    1, ..., each with the path that a reader would give it.

    A spring's tuple ends with its vertical and its rotational stiffness; a tuple of ``stiffness``
    is a station and EI from there on.
    """
    starts = [Fraction(at) for at, _ in stiffness]
    return Beam(
        Fraction(length),
        tuple(
            _support(name, held, f"beam.supports[{i}]")
            for i, (name, held) in enumerate(zip(string.ascii_uppercase, supports, strict=False))
        ),
        tuple(
            Release(f"r{i + 1}", Fraction(at), kind, Typed(f"beam.releases[{i}].at"))
            for i, (at, kind) in enumerate(releases)
        ),
        tuple(
            Section(f"{i + 1}", Fraction(at), Typed(f"beam.sections[{i}].at"))
            for i, at in enumerate(sections)
        ),
        Typed("beam.length"),
        tuple(
            Stretch(start, end, Fraction(EI), Typed(f"{path}.from"), path)
            for start, end, (_, EI), path in zip(
                starts,
                [*starts[1:], Fraction(length)],
                stiffness,
                (f"beam.stiffness[{i}]" for i in itertools.count()),
                strict=False,
            )
        ),
    )


def _support(name: str, held: Held, path: str) -> Support:
    at, kind, *rest = held
    face: Any = rest[0] if rest else None
    vertical, rotational = (Fraction(one or 0) for one in rest[1:] or (0, 0))
    source = Typed(f"{path}.at")
    return Support(name, Fraction(at), kind, source, face, vertical, rotational, path)


def random_beam(rng: Random, releases_up_to: int = 3) -> Beam:
    """A stable determinate beam: any supports, overhangs, hinges and slides, some of them at a
    support, and two to four sections."""
    count = rng.randint(0, releases_up_to)
    while True:
        beam = _any_beam(rng, count)
        if is_stable_and_determinate(beam):
            return beam


def _any_beam(rng: Random, count: int) -> Beam:
    length = Fraction(rng.randint(30, 900), rng.choice((1, 3, 10)))
    places: set[Fraction] = set()

    def inside() -> Fraction:
        while True:
            parts = rng.choice((1, 10, 10, 100, 3, 7, 9))
            place = Fraction(rng.randint(1, max(1, int(length * parts))), parts)
            if place < length and place not in places:
                places.add(place)
                return place

    kinds: tuple[ReleaseKind, ...] = ("hinge", "hinge", "slide")
    releases = sorted((inside(), rng.choice(kinds)) for _ in range(count))
    kind_at = dict(releases)
    free = [Fraction(0), length, *(at for at in kind_at if rng.random() < 0.6)]
    missing = count + 2
    supports: list[tuple[Fraction, SupportKind, Face | None]] = []
    while missing:
        kind = rng.choice([k for k, count in RESTRAINTS.items() if count <= missing])
        at = free.pop(rng.randrange(len(free))) if free and rng.random() < 0.5 else inside()
        missing -= RESTRAINTS[kind]
        faces: list[Face | None] = [None]
        if at in kind_at:
            # A hinge may stand over a support that holds no rotation; else a face is held.
            over = kind_at[at] == "hinge" and kind in ("pin", "roller")
            faces = [None, None, "left", "right"] if over else ["left", "right"]
        supports.append((at, kind, rng.choice(faces)))
    supports.sort(key=lambda support: support[0])
    sections = sorted(inside() for _ in range(rng.randint(2, 4)))
    return make_beam(length, supports, releases, sections)


def random_indeterminate(rng: Random) -> Beam:
    """A stable indeterminate beam of two to five spans: any supports and springs, overhangs, up to
    three hinges and slides, some of them at a support, EI unknown or in up to seven steps, and two
    to four sections."""
    while True:
        beam = _any_continuous_beam(rng)
        if is_stable(beam) and degree(beam) > 0:
            return beam


def _any_continuous_beam(rng: Random) -> Beam:
    spans = [Fraction(rng.randint(30, 300), 10) for _ in range(rng.randint(2, 5))]
    first, last = (rng.choice((0, 0, Fraction(rng.randint(5, 40), 10))) for _ in range(2))
    held = [first + sum(spans[:count], Fraction(0)) for count in range(len(spans) + 1)]
    length = held[-1] + last
    inside = [at for at in held if 0 < at < length]

    def anywhere() -> Fraction:
        return rng.randint(1, 999) * length / 1000

    kind_at: dict[Fraction, ReleaseKind] = {
        rng.choice((anywhere(), rng.choice(inside))): rng.choice(("hinge", "hinge", "slide"))
        for _ in range(rng.randint(0, 3))
    }
    steps = sorted({Fraction(0), *(anywhere() for _ in range(rng.randint(0, 6)))})
    return make_beam(
        length,
        [_any_support(rng, at, 0 < at < length, kind_at.get(at)) for at in held],
        sorted(kind_at.items()),
        sorted(anywhere() for _ in range(rng.randint(2, 4))),
        [(at, rng.randint(500, 90000)) for at in steps] if rng.random() < 0.8 else (),
    )


def _any_support(rng: Random, at: Fraction, inner: bool, release: ReleaseKind | None) -> Held:
    kinds: tuple[SupportKind, ...] = ("pin", "roller", "roller", "roller", "spring", "spring")
    kind = rng.choice((*kinds, "fixed", "guided") if inner else (*kinds, *kinds[:2], "fixed"))
    vertical, rotational = 0, 0
    if kind == "spring":
        # In a spring that holds only one way the other stiffness is absent.
        vertical, rotational = rng.choice(((1, 0), (1, 0), (0, 1), (1, 1)))
    faces: list[Face | None] = [None]
    if release:
        turns = kind in ("fixed", "guided") or rotational
        faces = ["left", "right"] if turns or release == "slide" else [None]
    return (
        at,
        kind,
        rng.choice(faces),
        vertical * Fraction(rng.randint(10, 90000), 10),
        rotational * Fraction(rng.randint(10, 900000), 10),
    )


def round_beam(rng: Random) -> Beam:
    """Spans of 10 with a section at every 5: one or two with overhangs of 5, or two to four."""
    count, over = rng.choice(((1, 5), (2, 5), (2, 0), (3, 0), (4, 0)))
    at = [Fraction(over + 10 * number) for number in range(count + 1)]
    length = at[-1] + over
    held: list[Held] = [(one, "pin" if one == at[0] else "roller") for one in at]
    if not over and rng.random() < 0.3:
        held[0] = (at[0], "fixed")
    hinges: list[tuple[Place, ReleaseKind]] = [(at[1] + 5, "hinge")] if count > 2 else []
    sections = [
        one for one in range(5, int(length), 5) if one not in (*at, *(x for x, _ in hinges))
    ]
    return make_beam(length, held, hinges, sections, [(0, 1000)])


def is_stable_and_determinate(beam: Beam) -> bool:
    """Whether the rigid parts between releases can be placed in exactly one way, with no condition
    to spare."""
    return is_stable(beam) and degree(beam) == 0


def is_stable(beam: Beam) -> bool:
    """Whether the rigid parts between releases can be placed in one way only."""
    return _rank(_conditions(beam)) == 2 * (len(beam.releases) + 1)


def degree(beam: Beam) -> int:
    """Conditions of a stable beam beyond those that place its parts."""
    return len(_conditions(beam)) - 2 * (len(beam.releases) + 1)


def _conditions(beam: Beam) -> list[list[Fraction]]:
    """What supports, also those that yield, and releases demand of the rigid parts.

    The part b has height a_b + t_b x at station x.
    """
    unknowns = 2 * (len(beam.releases) + 1)
    rows: list[list[Fraction]] = []

    def condition(*terms: tuple[int, Fraction | int]) -> None:
        row = [Fraction(0)] * unknowns
        for column, value in terms:
            row[column] += value
        rows.append(row)

    for support in beam.supports:
        part = sum(
            release.at < support.at or (release.at == support.at and support.face == "right")
            for release in beam.releases
        )
        if support.holds_vertical:
            condition((2 * part, 1), (2 * part + 1, support.at))
        if support.holds_rotation:
            condition((2 * part + 1, 1))
    for part, release in enumerate(beam.releases):
        one, two = 2 * part, 2 * part + 2
        if release.kind == "hinge":
            condition((one, 1), (one + 1, release.at), (two, -1), (two + 1, -release.at))
        else:
            condition((one + 1, 1), (two + 1, -1))
    return rows


def _rank(rows: list[list[Fraction]]) -> int:
    rank = 0
    for column in range(len(rows[0])):
        pivot = next((row for row in rows[rank:] if row[column]), None)
        if pivot is None:
            continue
        rows.remove(pivot)
        for other in rows[rank:]:
            factor = other[column] / pivot[column]
            other[:] = [a - factor * b for a, b in zip(other, pivot, strict=True)]
        rows.insert(rank, pivot)
        rank += 1
    return rank


def effects_of(beam: Beam) -> tuple[Effect, ...]:
    """Every effect at every key station, both faces where two values exist, else the single one."""
    return tuple(effect for station in beam.stations for effect in _effects_at(beam, station))


def movements_of(beam: Beam) -> tuple[Effect, ...]:
    """Deflection and rotation at every key station, both faces where two values exist."""
    effects = []
    both: tuple[Face | None, ...] = ("left", "right")
    opened: tuple[tuple[EffectKind, ReleaseKind], ...]
    opened = ("deflection", "slide"), ("rotation", "hinge")
    for station in beam.stations:
        opens = station.release.kind if station.release else None
        name = station.name or str(station.at)
        for kind, opening in opened:
            for face in both if opens == opening else (None,):
                effects.append(Effect(kind, name, station.at, face))
    return tuple(effects)


def _effects_at(beam: Beam, station: Station) -> list[Effect]:
    at, support = station.at, station.support
    name = station.name or str(at)
    inner: tuple[Face | None, ...] = (None,)
    both: tuple[Face | None, ...] = ("left", "right")
    shear = moment = inner
    effects = []
    if support is not None:
        if support.holds_vertical:
            effects.append(Effect("reaction", name, at))
        if support.holds_rotation:
            effects.append(Effect("moment reaction", name, at))
        if 0 < at < beam.length:
            shear = both if support.holds_vertical else inner
            moment = both if support.holds_rotation else inner
    return [
        *effects,
        *(Effect("shear", name, at, face) for face in shear),
        *(Effect("moment", name, at, face) for face in moment),
    ]


def beams(releases_up_to: int = 3) -> st.SearchStrategy[Beam]:
    """Stable determinate beams, for hypothesis."""
    return _seeds().map(lambda seed: random_beam(Random(seed), releases_up_to))


def _seeds() -> st.SearchStrategy[Any]:
    return st.integers(0, 2**32 - 1)
