"""Words for a moving load, on a sheet and in a terminal alike."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from fractions import Fraction

from calcpack.derive.kinds import DECIMALS
from calcpack.exact.numbers import decimals_to_end, printed
from calcpack.model.loads import Applies, Axle, Gap, Strip

WHOLE = 6
RELIEVING = {
    "count": "Axles that lessen the effect count.",
    "neglect": "Axles that lessen the effect are neglected one by one.",
}
REGIONS = {
    "hogging": "where a uniform load on all spans causes a negative moment",
    "interior": "at interior supports",
    "everywhere": "",
}
PARTS = {"axles": "axles", "trailing": "trailing load", "uniform": "uniform load"}


def amount(value: Fraction) -> str:
    """A number that was stated, with all its decimals as long as there are few."""
    whole = decimals_to_end(value, WHOLE)
    return printed(value, DECIMALS["number"] if whole is None else whole)


def gap_words(gap: Gap) -> str:
    """A spacing as it was stated.

    >>> from calcpack.model.loads import Given
    >>> gap_words(Gap((Given(Fraction(14), ""), Given(Fraction(30), "")), free=True))
    '14 to 30'
    """
    values = [amount(tie.value) for tie in gap.ties]
    if not gap.free:
        return " or ".join(values)
    return f"{values[0]} or more" if len(values) == 1 else " to ".join(values)


def axles_words(axles: Sequence[Axle], units: Mapping[str, str]) -> str:
    """The weight of all axles, and how many they are."""
    whole = amount(sum((axle.weight.value for axle in axles), Fraction(0)))
    return f"{whole} {units['force']} on {len(axles)} {'axle' if len(axles) == 1 else 'axles'}"


def strip_words(strip: Strip, axles: bool, units: Mapping[str, str]) -> str:
    """A load that travels with a train; ``axles`` tells whether the train has any."""
    length = units["length"]
    what = f"{amount(strip.amount.value)} {units['force' if strip.of_weight else 'line load']}"
    what += f" over {amount(strip.length.value)} {length}" if strip.length else " without end"
    point = f"the {'first' if strip.ahead else 'last'} axle" if axles else "its foremost point"
    start = f"{'ahead of' if strip.ahead else 'behind'} {point}"
    extent = "only where it raises the effect" if strip.broken else "unbroken"
    return f"{what}, from {amount(strip.start.value)} {length} {start}, {extent}"


def applies_words(one: Applies) -> str:
    """What effects a case is for."""
    sense = {1: "greatest ", 0: "", -1: "least "}[one.sense]
    return f"{sense}{' or '.join(one.kinds) or 'effect'} {REGIONS[one.region]}".strip()
