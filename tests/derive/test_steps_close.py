"""Every printed equation closes and every number has an origin, on random and on awkward beams."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import replace
from fractions import Fraction
from functools import cache
from random import Random
from unittest.mock import patch

import pytest
from beams import (
    effects_of,
    make_beam,
    movements_of,
    random_beam,
    random_indeterminate,
)
from loads import make_load, random_load, random_train, ruled
from making import make_calculation, make_effect, make_span_beam
from printed_steps import check, is_printed, literals

from calcpack.derive.steps import AreaGroup, PlacementGroup, StationGroup, Step
from calcpack.envelopes import Along
from calcpack.exact.numbers import exact_text
from calcpack.exact.piecewise import Side
from calcpack.model.beam import Beam
from calcpack.model.loads import MovingLoad
from calcpack.model.request import Effect
from calcpack.results import results
from calcpack.solution import Solution, solve
from calcpack.statics.system import key_of

SEEDS = range(20)
ELASTIC_SEEDS = range(8)
VARIED_SEEDS = range(24)
SIDES: tuple[Side, ...] = ("left", "right")
HAUL = make_load(("18.5", 0), (40, "13.3"), ("40.2", "4.1"), uniform="0.64", allowance="0.33")
SECOND = make_load((30, 0), (10, 1), headings=("left",), number=1)

AWKWARD: dict[str, tuple[Beam, MovingLoad]] = {
    "thirds of a foot": (
        make_beam("61/3", [("1/3", "pin"), ("37/3", "roller")], sections=["17/3", "44/3"]),
        make_load(("100/3", 0), ("50/3", "14/3"), uniform="2/3", distribution="5/7"),
    ),
    "sevenths of a metre": (
        make_beam(
            "200/7", [("1/7", "pin"), ("99/7", "roller"), (28, "roller")], [("120/7", "hinge")], [3]
        ),
        make_load((180, 0), (180, "8/7"), (90, "22/7"), allowance="1/7"),
    ),
    "a hinge 1e-6 beside a support": (
        make_beam(
            10, [(0, "pin"), (5, "roller"), (10, "roller")], [("5.000001", "hinge")], ["4.999999"]
        ),
        make_load((25, 0), ("12.34", "1.5"), uniform="0.1"),
    ),
    "two supports 1e-6 apart": (
        make_beam(10, [(4, "pin"), ("4.000001", "roller")], sections=[2, 7]),
        make_load((7, 0), ("3.3", 2)),
    ),
    "a length of a million": (
        make_beam(1_000_000, [(0, "pin"), ("333333.3", "roller")], sections=["123456.7"]),
        make_load(("1234.5", 0), ("0.001", "0.37"), uniform="1e-6"),
    ),
    "a million and a millionth": (
        make_beam(1_000_000, [("0.000001", "pin"), ("999999.999999", "roller")], sections=[3]),
        make_load(("1e6", 0), ("1e-6", "1e-6"), allowance="0.333333", distribution="0.123456"),
    ),
    "heavy axles and thirds of a million": (
        make_beam("1000000/3", [("1/3", "pin"), ("900000/7", "roller")], sections=["123457/3"]),
        make_load(("1e9", 0), ("100000000/3", "14/3")),
    ),
    "a fixed support with a slide": (
        make_beam("31/3", [(0, "fixed"), (9, "roller")], [("22/7", "slide")], ["50/7"]),
        make_load((3, 0), (4, "27/7"), relieving="neglect", uniform="1/3"),
    ),
}


def derived(beam: Beam, effects: Sequence[Effect], load: MovingLoad) -> Solution:
    """Solved without what goes along the beam, which has no steps."""
    with patch("calcpack.solution.along_beam", return_value=Along()):
        return solve(make_calculation(beam, effects, [load]))


@cache
def solved(seed: int) -> Solution:
    rng = Random(seed)
    beam, load = random_beam(rng), random_train(rng)
    effects = effects_of(beam)
    effects = tuple(rng.sample(effects, min(10, len(effects))))
    return derived(beam, effects, load)


@cache
def elastic(seed: int) -> Solution:
    """An indeterminate beam; springs need a stiffness beside theirs."""
    rng = Random(seed)
    while True:
        beam, load = random_indeterminate(rng), random_train(rng)
        if beam.stiffness or not any(one.kind == "spring" for one in beam.supports):
            break
    effects = rng.sample(effects_of(beam), 3)
    if beam.stiffness:
        effects += rng.sample(movements_of(beam), 2)
    return derived(beam, effects, load)


@cache
def varied(seed: int) -> Solution:
    """All that a load may have, every other one with numbers that go by a length; determinate and
    indeterminate beams by turns."""
    rng = Random(seed)
    beam = random_beam(rng)
    if seed % 2:
        beam = random_indeterminate(rng)
        while not beam.stiffness:
            beam = random_indeterminate(rng)
    load = random_load(rng)
    load = ruled(rng, load) if seed % 4 < 2 else load
    return derived(beam, rng.sample(effects_of(beam), 3), load)


@cache
def awkward(name: str) -> Solution:
    beam, load = AWKWARD[name]
    return solve(make_calculation(beam, effects_of(beam), [load, SECOND]))


def with_numbers(solution: Solution) -> int:
    return check(results(solution)["steps"], solution.calculation.inputs)


@pytest.mark.parametrize("seed", SEEDS)
def test_random_beams_close(seed: int) -> None:
    assert with_numbers(solved(seed)) > 60


@pytest.mark.parametrize("seed", ELASTIC_SEEDS)
def test_indeterminate_beams_close(seed: int) -> None:
    assert with_numbers(elastic(seed)) > 60


@pytest.mark.parametrize("seed", VARIED_SEEDS)
def test_loads_that_vary_close(seed: int) -> None:
    assert with_numbers(varied(seed)) > 40


@pytest.mark.parametrize("name", AWKWARD)
def test_awkward_beams_close(name: str) -> None:
    assert with_numbers(awkward(name)) > 60


def decimals(solution: Solution) -> set[int | None]:
    return {*solution.derivation.decimals.values()}


def test_awkward_beams_need_more_decimals_or_fractions() -> None:
    """Else they would not be awkward: the usual decimals are 2 to 4."""
    most = {
        name: max(16 if places is None else places for places in decimals(awkward(name)))
        for name in AWKWARD
    }
    assert sum(places > 4 for places in most.values()) >= len(AWKWARD) - 1
    assert max(most.values()) > 15


@pytest.mark.parametrize("name", AWKWARD)
def test_no_more_than_fifteen_significant_digits(name: str) -> None:
    """Beyond them a number is printed as a fraction."""
    for step in results(awkward(name))["steps"]:
        for text in (*literals(step.get("numbers", "")), step.get("result", "")):
            if "/" not in text:
                assert len(text.lstrip("-").replace(".", "").lstrip("0")) <= 15, step["key"]


@pytest.mark.parametrize("seed", SEEDS)
def test_a_column_has_the_same_decimals_throughout(seed: int) -> None:
    """The rows of a line, the offsets of a train, the places of its axles, their ordinates."""
    columns: dict[str, set[int]] = {}
    rows = 0
    for step in results(solved(seed))["steps"]:
        result = step.get("result", "/")
        if "/" not in result:
            kind = re.sub(r"/(at|offset|axle|ordinate)=.*$", r"/\1", step["key"])
            columns.setdefault(kind, set()).add(len(result.partition(".")[2]))
            rows += 1
    assert all(len(decimals) == 1 for decimals in columns.values())
    assert rows > len(columns)


def test_no_more_decimals_than_needed() -> None:
    """A simple span of 10 with a section at 4 closes with the usual decimals throughout."""
    beam = make_beam(10, [(0, "pin"), (10, "roller")], sections=[4])
    solution = solve(make_calculation(beam, effects_of(beam), [make_load((12, 0), (6, 2))]))
    assert decimals(solution) == {2, 3, 4}


def row_keys(effect: Effect, at: Fraction, side: Side) -> Iterator[str]:
    """What the step of an ordinate may be called; one row serves both sides where none jumps."""
    for root in ("unknown", "effect", "redundants"):
        for face in ("", f"/{side}"):
            yield f"{root}/{key_of(effect)}/at={at}{face}"


def summary_of(solution: Solution) -> int:
    """Every ordinate, area, zero, maximum and minimum of results.json is a step's result."""
    found = results(solution)
    printed = {step["key"]: step.get("result") for step in found["steps"]}
    steps = {step.key: step for step in solution.derivation.steps}
    areas: dict[Effect, AreaGroup] = {}
    extremes: dict[tuple[str, Effect, int], tuple[Step, ...]] = {}
    for group in solution.derivation.groups:
        match group:
            case AreaGroup():
                areas[group.effect] = group
            case PlacementGroup():
                extremes[group.load.path, group.effect, group.governing.sense] = group.steps
    count = 0

    def same(value: float, key: str, exact: Fraction | None) -> None:
        nonlocal count
        assert exact is not None
        assert value == float(exact)
        assert is_printed(printed[key], exact), key
        count += 1

    for line, entry in zip(solution.lines, found["lines"], strict=True):
        for station, ordinate in zip(
            solution.calculation.beam.stations, entry["ordinates"], strict=True
        ):
            assert ordinate["at"] == str(station.at)
            for side in SIDES:
                step = next(
                    steps[key] for key in row_keys(line.effect, station.at, side) if key in steps
                )
                same(ordinate[side], step.key, step.value)
        group = areas[line.effect]
        same(entry["area_positive"], group.positive.key, group.positive.value)
        same(entry["area_negative"], group.negative.key, group.negative.value)
        zeros = [step for step in group.parts if "/zero=" in step.key]
        known = {str(station.at) for station in solution.calculation.beam.stations}
        found_zeros = [exact_text(step.value) for step in zeros if step.value]
        assert {*entry["zeros"]} - known == {*found_zeros} - known
    for placement, entry in zip(solution.placements, found["placements"], strict=True):
        for sense, name in ((1, "max"), (-1, "min")):
            group_steps = extremes[placement.load.path, placement.effect, sense]
            same(entry[name]["value"], group_steps[-1].key, group_steps[-1].value)
            under = {step.key.rpartition("/")[2]: step for step in group_steps}
            for index, axle in enumerate(entry[name]["axles"], start=1):
                if f"axle={index}" not in under:
                    assert axle["standing"] in ("off the beam", "does not act")
                    continue
                at = under[f"axle={index}"]
                same(axle["at"], at.key, at.value)
                if axle["standing"] in ("off the beam", "does not act"):
                    assert f"ordinate={index}" not in under
                else:
                    ordinate = under[f"ordinate={index}"]
                    same(axle["ordinate"], ordinate.key, ordinate.value)
    return count


@pytest.mark.parametrize("seed", SEEDS)
def test_the_summary_of_random_beams_is_derived(seed: int) -> None:
    assert summary_of(solved(seed)) > 60


@pytest.mark.parametrize("seed", ELASTIC_SEEDS)
def test_the_summary_of_indeterminate_beams_is_derived(seed: int) -> None:
    assert summary_of(elastic(seed)) > 60


@pytest.mark.parametrize("seed", VARIED_SEEDS)
def test_the_summary_of_loads_that_vary_is_derived(seed: int) -> None:
    assert summary_of(varied(seed)) > 20


@pytest.mark.parametrize("name", AWKWARD)
def test_the_summary_of_awkward_beams_is_derived(name: str) -> None:
    assert summary_of(awkward(name)) > 60


@pytest.mark.parametrize(
    ("overhang_left", "overhang_right"), [(0, 0), ("2.5", 0), (0, "10/3"), ("2.5", "10/3")]
)
def test_stations_from_spans_overhangs_and_tenths(
    overhang_left: int | str, overhang_right: int | str
) -> None:
    """Laid end to end and by tenths: each a step from what was typed, before all others."""
    beam = make_span_beam(["37/3"], ["pin", "roller"], overhang_left, overhang_right)
    effects = [make_effect(beam, "moment", "1.4"), make_effect(beam, "reaction", "A")]
    solution = solve(make_calculation(beam, effects, [HAUL]))
    assert with_numbers(solution) > 60
    stations = solution.derivation.groups[0]
    assert isinstance(stations, StationGroup)
    places = {step.left.index: step.value for step in stations.steps}
    expected = {station.name or "end": station.at for station in beam.stations if station.at}
    assert {name: places[name] for name in expected} == expected
    tenth = next(step for step in stations.steps if step.left.index == "1.4")
    assert "4 * (" in solution.derivation.numbers(tenth)
    assert "/ 10" in solution.derivation.numbers(tenth)


def test_several_spans_are_laid_end_to_end() -> None:
    beam = make_span_beam([4, "16/3", 5], ["pin", "roller", "roller", "roller"])
    hinges = make_beam(14, [], [(3, "hinge"), ("31/3", "hinge")]).releases
    hinged = replace(beam, releases=hinges)
    effects = [make_effect(hinged, "moment", "2.5"), make_effect(hinged, "reaction", "C")]
    solution = solve(make_calculation(hinged, effects, [HAUL]))
    assert with_numbers(solution) > 60
    steps = {step["key"]: step for step in results(solution)["steps"]}
    assert steps["station/C"]["numbers"] == "4.00000 + 5.33333"
    assert steps["station/C"]["symbols"] == "x_C = x_B + l_2"
    assert steps["station/C"]["inputs"] == ["beam.spans[1]"]
    assert steps["station/C"]["uses"] == ["station/B"]
    assert steps["station/C"]["result"] == "9.33333"
    assert steps["station/B"]["numbers"] == "0 + 4.000"
    assert steps["station/B"]["result"] == "4.00000"
