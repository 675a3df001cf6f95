"""Headings of a case, and the cases that a way of acting spreads into."""

from __future__ import annotations

import itertools
from collections.abc import Iterator, Mapping
from dataclasses import replace

from calcpack.model.loads import Case, Heading, Train

HEADINGS: Mapping[str, tuple[Heading, ...]] = {
    "right": ("right",),
    "left": ("left",),
    "both": ("right", "left"),
}
"""By what calc.toml and the files of load models say."""


def spread_cases(case: Case, whole_train: bool) -> Iterator[Case]:
    """The cases of one in which the axles of a train act all or none.

    The first has all axles acting. In each further one the axles of some trains keep their places
    but do not act, while something else of the case remains: the axles of another train, or a load
    that travels ahead or behind. Where nothing else remains there is none: a train may stay off the
    beam anyway.

    Args:
        case: whose axles all count.
        whole_train: whether a train's axles act all or none; else the case stays as it is.

    Yields:
        At least the case itself.
    """
    yield case
    if not whole_train:
        return
    strips = any(train.strips for train in case.trains)
    acting = [
        number for number, train in enumerate(case.trains) if any(axle.acts for axle in train.axles)
    ]
    for count in range(1, len(acting) + strips):
        for idle in itertools.combinations(acting, count):
            trains = (
                _idle(train) if number in idle else train
                for number, train in enumerate(case.trains)
            )
            name = ", ".join(filter(None, (case.name, _without(case, idle))))
            yield replace(case, name=name, trains=tuple(trains))


def _idle(train: Train) -> Train:
    return replace(train, axles=tuple(replace(axle, acts=False) for axle in train.axles))


def _without(case: Case, idle: tuple[int, ...]) -> str:
    if len(case.trains) == 1:
        return "without its axles"
    return f"without the axles of {' and '.join(_called(case, idle))}"


def _called(case: Case, idle: tuple[int, ...]) -> Iterator[str]:
    """The trains by their names, or by their numbers where names do not tell them apart."""
    names = [train.name for train in case.trains]
    distinct = all(names) and len(set(names)) == len(names)
    for number in idle:
        yield names[number] if distinct else f"train {number + 1}"
