"""Stable determinate beams, their effects, and trains: by hand, at random, and for hypothesis."""

from __future__ import annotations

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
    Support,
    SupportKind,
    Typed,
)
from calcpack.model.loads import Axle, Heading, MovingLoad
from calcpack.model.request import Effect

Place = Fraction | int | str
RESTRAINTS: dict[SupportKind, int] = {"pin": 1, "roller": 1, "fixed": 2, "guided": 1}


def make_beam(
    length: Place,
    supports: Sequence[tuple[Place, SupportKind] | tuple[Place, SupportKind, Face | None]],
    releases: Sequence[tuple[Place, ReleaseKind]] = (),
    sections: Sequence[Place] = (),
) -> Beam:
    """A beam from plain tuples in order along it: supports A, B, ..., releases r1, ..., sections
    1, ..., each with the path that a reader would give it."""
    return Beam(
        Fraction(length),
        tuple(
            Support(name, Fraction(at), kind, Typed(f"beam.supports[{i}].at"), *face)
            for i, (name, (at, kind, *face)) in enumerate(
                zip(string.ascii_uppercase, supports, strict=False)
            )
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
    )


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


def is_stable_and_determinate(beam: Beam) -> bool:
    """Whether the rigid parts between releases can be placed in exactly one way.

    The part b has height a_b + t_b x at station x; the conditions are those of the supports and
    of what each release still passes.
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
    return len(rows) == unknowns == _rank(rows)


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


def random_train(rng: Random) -> MovingLoad:
    """One to six axles, now and then none but a uniform load; all choices of a moving load."""
    count = rng.randint(1, 6)
    uniform = Fraction(rng.choice((0, 0, rng.randint(1, 40))), 10)
    if uniform and rng.random() < 0.2:
        count = 0
    headings: tuple[tuple[Heading, ...], ...] = (("right",), ("left",), ("right", "left"))
    return MovingLoad(
        name="Train",
        axles=tuple(
            Axle(
                Fraction(rng.randint(10, 400), 10),
                Fraction(rng.randint(4, 120), 10) if position else Fraction(0),
            )
            for position in range(count)
        ),
        uniform=uniform,
        headings=rng.choice(headings),
        relieving=rng.choice(("count", "neglect")),
        allowance=Fraction(rng.randint(0, 40), 100),
        distribution=Fraction(rng.randint(30, 100), 100),
        path="moving[0]",
    )


def beams(releases_up_to: int = 3) -> st.SearchStrategy[Beam]:
    """Stable determinate beams, for hypothesis."""
    return _seeds().map(lambda seed: random_beam(Random(seed), releases_up_to))


def trains() -> st.SearchStrategy[MovingLoad]:
    """Moving loads, for hypothesis."""
    return _seeds().map(lambda seed: random_train(Random(seed)))


def _seeds() -> st.SearchStrategy[Any]:
    return st.integers(0, 2**32 - 1)
