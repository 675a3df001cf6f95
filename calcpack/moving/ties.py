"""Other places of a load beside the best: those that tie with it, and the next-best."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from fractions import Fraction

from calcpack.exact.piecewise import Piecewise
from calcpack.model.loads import Heading
from calcpack.moving.governing import NEAR_CANDIDATES, Candidate, Tie
from calcpack.moving.placement import Group, Position, Sense, axles_in_pairs, trains_value


def tied_and_near(
    line: Piecewise, sense: Sense, candidates: Sequence[Candidate], best: Candidate
) -> tuple[tuple[Tie, ...], tuple[Candidate, ...]]:
    """Other places with the same value, and the best places with a lesser one."""
    seen: set[tuple[Heading, Fraction, object]] = set()
    others: list[Candidate] = []
    for one in candidates:
        # Of a case the best at each place; what differs only in axles off the beam is the same.
        heading, lead_at = one.position.heading, one.position.lead_at
        if not any((heading, lead_at, told) in seen for told in (one.value, one.case.name)):
            others.append(one)
        seen.update((heading, lead_at, told) for told in (one.value, one.case.name))
    tied = [one for one in others if one.value == best.value]
    near = [one for one in others if one.value != best.value]
    return tuple(_ranges(line, sense, tied, best)), tuple(near[:NEAR_CANDIDATES])


def _ranges(
    line: Piecewise, sense: Sense, tied: Sequence[Candidate], best: Candidate
) -> Iterator[Tie]:
    """Places of one value, those between which it does not change as one range."""

    def order(one: Candidate) -> tuple[str, bool, tuple[Fraction, ...], Fraction]:
        gaps = tuple(gap for _, gap in axles_in_pairs(one.position))
        return one.case.name, one.position.heading == "left", gaps, one.position.lead_at

    ranges: list[Tie] = []
    for one in sorted(tied, key=order):
        before = ranges[-1].last if ranges else None
        alike = before is not None and order(before)[:-1] == order(one)[:-1]
        if before is not None and alike and _level(line, sense, before, one):
            ranges[-1] = Tie(ranges[-1].first, one)
        else:
            ranges.append(Tie(one, one))
    return (one for one in ranges if one.first is not one.last or one.first is not best)


def _level(line: Piecewise, sense: Sense, one: Candidate, other: Candidate) -> bool:
    """Whether the value is the same all the way from one place to the next event.

    Between two events it is a polynomial of at most the fourth power: five equal values will do.
    """
    run = other.position.lead_at - one.position.lead_at
    there = trains_value(line, one.case, one.position, sense)
    last = len(one.position.stations) - 1
    group = Group(0, last, "left", True, None, None)
    for quarter in (1, 2, 3):
        stations = tuple(at + run * quarter / 4 for at in one.position.stations)
        between = Position(one.position.heading, stations, (group,))
        if trains_value(line, one.case, between, sense) != there:
            return False
    return True
