"""Loads that travel: published models, and loads of the engineer's own."""

from __future__ import annotations

import itertools
from collections.abc import Iterator, Sequence
from dataclasses import replace
from fractions import Fraction
from pathlib import Path

from calcpack.errors import ProgramFault
from calcpack.intake.beam import Outline
from calcpack.intake.cases import HEADINGS, spread_cases
from calcpack.intake.places import read_place
from calcpack.intake.published import Published, read_published
from calcpack.intake.reading import Reading, nearest
from calcpack.intake.trains import MOST_AXLES, Trains, read_strips
from calcpack.intake.values import amount
from calcpack.model.loads import (
    Axle,
    Case,
    Given,
    MovingLoad,
    Part,
    Share,
    Standard,
    Strip,
    Train,
)
from calcpack.model.request import Effect

MOST_TRAINS = 64
MOST_CASES = 64
MOST_TIES = 1024
"""The most ways in which the varying gaps of one case may be held."""

_OWN = (
    "table",
    "axles",
    "trains",
    "uniform",
    "trailing",
    "relieving",
    "order",
    "spacing",
    "absent",
)
"""Keys that a published model states itself."""


def read_moving(
    reading: Reading, outline: Outline, effects: Sequence[Effect], folder: Path | None
) -> tuple[tuple[MovingLoad, ...], dict[str, Fraction]]:
    """Every moving load, and the numbers of the published models by their paths.

    Each load must have a distribution for every one of ``effects``; tables are looked for in
    ``folder``.
    """
    reader = _Reader(reading, outline, effects, Trains(reading, folder))
    loads = [reader.load(path) for path in reading.items("moving")]
    return tuple(load for load in loads if load is not None), reader.numbers


def check_names(reading: Reading) -> None:
    """Names are unique among moving and permanent loads together."""
    taken: dict[str, str] = {}
    for path in (*reading.items("moving"), *reading.items("permanent")):
        name = reading.value(f"{path}.name")
        if name is not None and taken.setdefault(name, path) != path:
            reading.refuse(f"{path}.name", f"must differ from the name at {taken[name]}.name")


def check_compared(reading: Reading, loads: Sequence[MovingLoad]) -> None:
    """A model from memory bars the status "Issued" until someone compared it with its standard."""
    open_ = [one for one in loads if one.standard is not None and not one.standard.settled]
    if open_ and reading.value("package.status") == "Issued":
        path = f"{open_[0].path}.compared"
        needs = f'must be "For review" until {path} says who compared the model with its standard'
        reading.refuse("package.status", needs)


class _Reader:
    def __init__(
        self, reading: Reading, outline: Outline, effects: Sequence[Effect], trains: Trains
    ) -> None:
        self.reading, self.outline, self.effects, self.trains = reading, outline, effects, trains
        self.numbers: dict[str, Fraction] = {}
        """Of the published models, by path."""

    def load(self, path: str) -> MovingLoad | None:
        reading = self.reading
        shares = tuple(self._shares(f"{path}.distribution"))
        self._check_shares(f"{path}.distribution", shares)
        standard: Standard | None = None
        if reading.given(f"{path}.standard"):
            for key in _OWN:
                if reading.given(f"{path}.{key}"):
                    reading.refuse(f"{path}.{key}", "must be left out beside standard")
            for key in (*_OWN, "heading", "allowance"):
                reading.withdraw(f"{path}.{key}")
            published = read_published(reading, self.outline, path)
            cases = self._published(path, published) if published else ()
            standard = published.standard if published else None
        else:
            cases = tuple(itertools.islice(self._cases(path), MOST_CASES + 1))
        hogging = tuple(self._stretches(f"{path}.hogging"))
        if not cases:
            if not reading.problems:
                raise ProgramFault(f"{path} was read as no load, and nothing was refused")
            return None
        if len(cases) > MOST_CASES:
            needs = f"must make at most {MOST_CASES}; state fewer trains, or their order"
            reading.refuse(path, needs, f"more than {MOST_CASES} cases")
        self._check_ties(path, cases)
        return MovingLoad(
            reading.value(f"{path}.name"),
            cases,
            shares,
            path,
            standard,
            hogging if reading.items(f"{path}.hogging") else None,
        )

    def _published(self, path: str, published: Published) -> tuple[Case, ...]:
        """Its cases, with what calc.toml states in their place."""
        reading = self.reading
        self.numbers |= published.numbers
        cases = published.cases
        if reading.given(f"{path}.allowance"):
            allowances = tuple(self._allowances(f"{path}.allowance"))
            cases = tuple(replace(case, allowances=allowances) for case in cases)
        if reading.given(f"{path}.heading"):
            headings = HEADINGS.get(reading.value(f"{path}.heading"), ())
            cases = tuple(replace(case, headings=headings) for case in cases)
        return cases

    def _cases(self, path: str) -> Iterator[Case]:
        """Of a load of the engineer's own: every order of its trains, with and without each."""
        reading = self.reading
        strips = tuple(read_strips(reading, f"{path}.trailing"))
        uniform = self._number(f"{path}.uniform")
        allowances = tuple(self._allowances(f"{path}.allowance"))
        chains = list(itertools.islice(self._chains(path), MOST_CASES + 1))
        if strips and not chains:
            chains = [("", (Train("", (Axle(Given(Fraction(0), ""), None, False),)),))]
        if not chains and uniform is None and not self._stated(path):
            reading.refuse(path, "must have axles, trains, or a uniform load above 0", "no load")
        several = len(reading.items(f"{path}.trains")) > 1
        gap = None
        if reading.given(f"{path}.spacing"):
            gap = self.trains.gap(f"{path}.spacing")
        elif several:
            reading.refuse(f"{path}.spacing", "must be given: there are several trains")
        if several and gap is None:
            return
        for name, trains in chains or [("", ())]:
            case = Case(
                name,
                tuple(_with_strips(trains, strips)),
                (gap,) * (len(trains) - 1) if gap else (),
                uniform,
                (),
                HEADINGS.get(reading.value(f"{path}.heading"), ()),
                "neglect" if reading.value(f"{path}.relieving") == "neglect" else "count",
                allowances,
            )
            if trains or uniform:
                yield from spread_cases(case, reading.value(f"{path}.relieving") == "whole train")

    def _stated(self, path: str) -> bool:
        """Whether a load is stated there at all, accepted or not."""
        keys = ("axles", "table", "trains", "uniform", "trailing")
        given = [key for key in keys if self.reading.given(f"{path}.{key}")]
        refused = self.reading.refused
        if given == ["uniform"]:
            return self.reading.value(f"{path}.uniform") is None
        return any(
            self.reading.items(f"{path}.{key}") or key == "table" or refused(f"{path}.{key}")
            for key in given
        )

    def _chains(self, path: str) -> Iterator[tuple[str, tuple[Train, ...]]]:
        """Trains in each order, with and without each, under a name that tells them apart."""
        reading = self.reading
        axles = self.trains.axles(path)
        if reading.given(f"{path}.trains"):
            for key in ("axles", "table"):
                if reading.given(f"{path}.{key}"):
                    reading.refuse(f"{path}.{key}", "must be left out beside trains")
            named = [self._train(item) for item in reading.items(f"{path}.trains")]
            known = [train for train in named if train is not None]
            total = sum(len(train.axles) for train in known)
            if len(named) > MOST_TRAINS:
                needs = f"must have at most {MOST_TRAINS}"
                reading.refuse(f"{path}.trains", needs, f"{len(named):,} items")
            elif total > MOST_AXLES:
                needs = f"must have at most {MOST_AXLES:,} in all"
                reading.refuse(f"{path}.trains", needs, f"{total:,} axles")
            elif known and len(known) == len(named):
                least = 1 if reading.value(f"{path}.absent") == "each" else len(known)
                for count in range(len(known), least - 1, -1):
                    yield from _orders(known, count, reading.value(f"{path}.order") == "any")
        elif axles:
            yield "", (Train("", axles),)

    def _train(self, path: str) -> Train | None:
        name, known = self.reading.value(path), self.trains.by_name
        if name is not None and name not in known and self.trains.named:
            words = nearest(name, known, 3) if known else "trains states none"
            self.reading.refuse(path, f"is not a known train; {words}")
        return known.get(name)

    def _number(self, path: str) -> Given | None:
        value = self.reading.value(path)
        return Given(value, path) if value else None

    def _allowances(self, path: str) -> Iterator[tuple[Part, Given]]:
        reading = self.reading
        parts: dict[Part, str] = {}
        if (value := reading.value(path)) is not None:
            if value:
                yield "axles", Given(value, path)
            return
        for item in reading.items(path) if reading.value(path) is None else []:
            part, value = reading.value(f"{item}.of"), reading.value(f"{item}.value")
            if part is None or value is None:
                continue
            if parts.setdefault(part, item) != item:
                reading.refuse(f"{item}.of", f"must differ from {parts[part]}.of")
            elif value:
                yield part, Given(value, f"{item}.value")

    def _shares(self, path: str) -> Iterator[Share]:
        reading = self.reading
        if (value := reading.value(path)) is not None:
            yield Share(Given(value, path))
            return
        for item in reading.items(path):
            value = reading.value(f"{item}.value")
            kinds = tuple(
                reading.value(kind) for kind in reading.items(f"{item}.kind") if reading.value(kind)
            )
            start, end = self._ends(item)
            if value is not None:
                source = reading.value(f"{item}.source") or ""
                yield Share(Given(value, f"{item}.value"), kinds, start, end, source)

    def _ends(self, path: str) -> tuple[Fraction | None, Fraction | None]:
        """The ends of a stretch, None where it is open or refused."""
        places: list[Fraction | None] = [None, None]
        for index, key in enumerate(("from", "to")):
            if self.reading.given(f"{path}.{key}"):
                places[index] = read_place(self.reading, self.outline, f"{path}.{key}")
        start, end = places
        if start is not None and end is not None and end <= start:
            least = amount(start, "length", self.reading.units)
            self.reading.refuse(f"{path}.to", f"must be beyond {least}, where the stretch starts")
        return start, end

    def _stretches(self, path: str) -> Iterator[tuple[Fraction, Fraction]]:
        for item in self.reading.items(path):
            start, end = self._ends(item)
            if start is not None and end is not None:
                yield start, end

    def _check_shares(self, path: str, shares: Sequence[Share]) -> None:
        """Every effect must have one; nothing is taken for what is not stated."""
        reading = self.reading
        open_ = any(one.path.startswith(("effects", path)) for one in reading.problems)
        if not reading.items(path) or not self.outline.whole or open_:
            return
        for effect in self.effects:
            if not any(one.holds(effect.kind, effect.station) for one in shares):
                reading.refuse(path, f"must have a value for {effect.label}")
                return

    def _check_ties(self, path: str, cases: Sequence[Case]) -> None:
        for case in cases:
            ways = 1
            for axle in case.axles:
                ways *= len(axle.gap.ties) if axle.gap else 1
            if ways > MOST_TIES:
                needs = f"must vary in at most {MOST_TIES:,}; state fewer ranges and lists"
                said = f"spacings that vary in more than {MOST_TIES:,} ways"
                self.reading.refuse(path, needs, said)
                return


def _orders(
    trains: Sequence[Train], count: int, any_order: bool
) -> Iterator[tuple[str, tuple[Train, ...]]]:
    """So many of the trains, in their own order or in each, each arrangement once."""
    for some in _arranged(trains, count, any_order):
        yield ", ".join(train.name for train in some) if len(trains) > 1 else "", some


def _arranged(trains: Sequence[Train], count: int, any_order: bool) -> Iterator[tuple[Train, ...]]:
    """What ``_orders`` yields; never goes into what yields nothing, however many trains."""
    if not count:
        yield ()
        return
    seen: set[str] = set()
    for place, first in enumerate(trains):
        others = (*(trains[:place] if any_order else ()), *trains[place + 1 :])
        if first.name not in seen and len(others) >= count - 1:
            seen.add(first.name)
            for rest in _arranged(others, count - 1, any_order):
                yield first, *rest


def _with_strips(trains: Sequence[Train], strips: Sequence[Strip]) -> Iterator[Train]:
    """Loads ahead travel with the first train, those behind with the last."""
    last = len(trains) - 1
    for number, train in enumerate(trains):
        own = (strip for strip in strips if number == (0 if strip.ahead else last))
        yield replace(train, strips=tuple(own))
