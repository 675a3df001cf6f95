"""Envelopes, what occurs together, absolute maxima, effects in tables: through whole solutions."""

from __future__ import annotations

from fractions import Fraction
from functools import cache
from typing import Any

import numpy as np
import pytest
from beams import make_beam
from loads import make_load
from making import make_calculation, make_effect

from calcpack.intake import read
from calcpack.model.beam import SupportKind
from calcpack.model.request import Calculation
from calcpack.results import results
from calcpack.sheets.blocks import Paragraph
from calcpack.sheets.envelopes import envelope_blocks
from calcpack.solution import Solution, solve

SPAN = 20


@cache
def simple() -> Solution:
    """A simple span of 20 with a section at 8, under 12 and, 5 behind, 6."""
    beam = make_beam(SPAN, [(0, "pin"), (SPAN, "roller")], sections=[8])
    load = make_load((12, 0), (6, 5))
    return solve(make_calculation(beam, [make_effect(beam, "moment", "1")], [load]))


def envelope(found: dict[str, Any], kind: str) -> dict[str, Any]:
    (one,) = (one for one in found["envelopes"] if one["kind"] == kind)
    return dict(one)


def moment_at(x: float) -> float:
    """Greatest moment at x of the simple span (statics): either axle at the section, either way."""
    values = []
    for over, other in ((12.0, 6.0), (6.0, 12.0)):
        for side in (-5, 5):
            at = x + side
            there = 0.0
            if 0 <= at <= SPAN:
                low, high = min(at, x), max(at, x)
                there = other * low * (SPAN - high) / SPAN
            values.append(over * x * (SPAN - x) / SPAN + there)
    return max(values)


def shear_at(x: float) -> tuple[float, float]:
    """Greatest and least shear at x: the heavy axle at the section or both to one side of it."""
    right = [12 * (SPAN - x) / SPAN + 6 * max(SPAN - x - 5, 0) / SPAN]
    right.append(6 * (SPAN - x) / SPAN + 12 * max(SPAN - x - 5, 0) / SPAN)
    if x >= 5:
        right.append(12 * (SPAN - x) / SPAN - 6 * (x - 5) / SPAN)
    left = [12 * x / SPAN + 6 * max(x - 5, 0) / SPAN, 6 * x / SPAN + 12 * max(x - 5, 0) / SPAN]
    return max(right), -max(left)


def test_envelopes_of_a_simple_span() -> None:
    found = results(simple())
    moment, shear = envelope(found, "moment"), envelope(found, "shear")
    assert moment["at"] == [*range(0, SPAN + 1, 2)]  # the section at 8 is a tenth too
    assert moment["max"] == pytest.approx([moment_at(x) for x in moment["at"]])
    assert set(moment["min"]) == {0}
    assert shear["at"] == moment["at"]
    pairs = [shear_at(x) for x in shear["at"]]
    assert shear["max"] == pytest.approx([pair[0] for pair in pairs])
    assert shear["min"] == pytest.approx([pair[1] for pair in pairs])
    reaction = envelope(found, "reaction")
    assert reaction["max"] == [12 + 6 * 15 / 20] * 2
    assert {one["load"] for one in found["envelopes"]} == {"Load 1"}


def test_what_occurs_together() -> None:
    """At 8 the greatest moment has 12 there and 6 at 13: reaction (12 x 12 + 6 x 7) / 20 = 9.3, so
    the shear is 9.3 just left of the section and 9.3 - 12 just right of it. With the greatest shear
    there, 12 at 8 and 6 at 13 as well, stands that moment, 8 x 9.3."""
    found = results(simple())
    moment, shear = envelope(found, "moment"), envelope(found, "shear")
    index = moment["at"].index(8)
    assert moment["max"][index] == pytest.approx(8 * 9.3)
    assert moment["with"]["shear left"]["max"][index] == pytest.approx(9.3)
    assert moment["with"]["shear right"]["max"][index] == pytest.approx(9.3 - 12)
    assert sorted(moment["where"]["max"][index]["axles"]) == [8, 13]
    assert shear["max"][index] == pytest.approx(9.3)
    assert shear["with"]["moment"]["max"][index] == pytest.approx(8 * 9.3)


def test_the_shear_beside_a_moment_is_its_slope() -> None:
    """Under a load that does not move the moment falls off from the section at the two shears:
    with the load of the greatest moment at 8, the moments at 7.9 and 8.1 (statics)."""
    found = results(simple())
    moment = envelope(found, "moment")
    index = moment["at"].index(8)
    axles = zip(moment["where"]["max"][index]["axles"], (12, 6), strict=True)
    loads = list(axles)

    def at(x: float) -> float:
        reaction = sum(weight * (SPAN - place) / SPAN for place, weight in loads)
        return float(reaction * x - sum(w * max(x - place, 0) for place, w in loads))

    assert moment["with"]["shear left"]["max"][index] == pytest.approx((at(8) - at(7.9)) / 0.1)
    assert moment["with"]["shear right"]["max"][index] == pytest.approx((at(8.1) - at(8)) / 0.1)


def test_the_absolute_maximum_is_above_the_envelope() -> None:
    """Resultant of 12 and 6 lies 5/3 from the 12: section 10 - 5/6, by the classical rule
    18 / 20 x (20/2 - 5/6)² = 75.625 (textbooks of structural analysis)."""
    found = results(simple())
    (absolute,) = found["absolute"]
    assert absolute["value"] == pytest.approx(0.9 * (10 - 5 / 6) ** 2)
    assert min(abs(absolute["at"] - x) for x in (10 - 5 / 6, 10 + 5 / 6)) < 1e-8
    assert absolute["value"] >= max(envelope(found, "moment")["max"])
    assert absolute["span"] == 1


CONTINUOUS = """\
format = 1
units = "SI"
cover.title = "Two spans"
beam.spans = [20, 16]
beam.supports = [
  { name = "A", kind = "pin" }, { name = "B", kind = "roller" }, { name = "C", kind = "roller" },
]
beam.sections = ["tenths"]
effects = [
  { kind = "moment", at = "B" },
  { kind = ["moment", "shear"], at = "tenths", show = "table" },
]

[[moving]]
name = "Truck"
axles = [{ weight = 80 }, { weight = 80, spacing = [3, 7] }]
uniform = 5
relieving = "neglect"
allowance = 0.3
"""


@cache
def continuous() -> Solution:
    return solve(read(CONTINUOUS.encode()))


def test_effects_in_tables_have_no_steps() -> None:
    """Of the 43 effects only the moment at B has its line and placements derived."""
    solution = continuous()
    found = results(solution)
    keys = [step["key"] for step in found["steps"]]
    placed = {key.split("/")[2] for key in keys if key.startswith("placement/")}
    assert placed == {"M_B"}
    assert len(found["placements"]) == len(found["lines"]) == len(solution.lines) > 40
    for placement in found["placements"]:
        for extreme in ("max", "min"):
            assert {"value", "swept", "candidates"} <= {*placement[extreme]}


def test_a_table_and_the_envelope_agree() -> None:
    """The same effect once asked for and once along the beam."""
    found = results(continuous())
    moment = envelope(found, "moment")
    compared = 0
    for placement in found["placements"]:
        if placement["effect"]["kind"] == "moment":
            index = moment["at"].index(placement["effect"]["station"])
            assert placement["max"]["value"] == moment["max"][index]
            assert placement["min"]["value"] == moment["min"][index]
            compared += 1
    assert compared == 21


def test_where_a_uniform_load_hogs() -> None:
    """Three moments: M_B = -w (l1³ + l2³) / (8 (l1 + l2)); zeros l1 + 2 M_B / l1 from A and
    2 |M_B| / l2 right of B."""
    moment = (20**3 + 16**3) / (8 * 36)
    ((start, end),) = continuous().along.hogging
    assert float(start) == pytest.approx(20 - 2 * moment / 20, abs=1e-8)
    assert float(end) == pytest.approx(20 + 2 * moment / 16, abs=1e-8)


def test_absolute_maxima_of_a_continuous_beam() -> None:
    """No section of a fine grid has more, and one near it as much, each asked for by itself."""
    for one in continuous().along.absolutes:
        start, end = ((0, 20), (20, 36))[one.span - 1]
        sections = [Fraction(start) + Fraction(end - start) * part / 160 for part in range(1, 160)]
        listed = ", ".join(f"{float(section):.9f}" for section in sections)
        text = CONTINUOUS.replace(
            '["moment", "shear"], at = "tenths"', f'"moment", at = [{listed}]'
        )
        found = _greatest(read(text.replace('beam.sections = ["tenths"]', "").encode()))
        assert max(found) <= float(one.found.value) + 1e-9
        assert max(found) == pytest.approx(float(one.found.value), rel=1e-4)


THIRD = Fraction(1, 3)


@pytest.mark.parametrize(
    ("fixed", "roller", "length"),
    [(0, 10, 14), (THIRD, 10 + THIRD, 14 + THIRD), (14 + THIRD, 4, 14 + THIRD)],
)
def test_the_absolute_maximum_at_a_fixed_support(
    fixed: Fraction, roller: Fraction, length: Fraction
) -> None:
    """An axle of 10 on a span of 10 or 10 1/3 with one end fixed, and 4 beyond its roller: at the
    tip it causes -40 there and, the carry-over factor being 1/2 (textbooks of structural analysis),
    20 at the fixed end; in the span at most 0.174 x 10 x 10 1/3 = 18.0 (handbooks' beam fixed at
    one end and supported at the other; value from memory)."""
    held: list[tuple[Fraction, SupportKind]] = [(fixed, "fixed"), (roller, "roller")]
    beam = make_beam(length, sorted(held), sections=[6])
    effects = [make_effect(beam, "moment", "1")]
    (found,) = results(solve(make_calculation(beam, effects, [make_load((10, 0))])))["absolute"]
    assert found["value"] == 20
    assert found["at"] == pytest.approx(float(fixed), abs=1e-12)


def _greatest(calculation: Calculation) -> list[float]:
    from calcpack.analysis import analyse
    from calcpack.envelopes import target_of
    from calcpack.moving.critical import greatest

    found = analyse(calculation.beam, calculation.units, calculation.effects)
    targets = [target_of(calculation.beam, line.effect, line.line) for line in found.lines]
    return [float(one) for one in np.array(greatest(targets, calculation.moving[0], 1))]


def test_the_worst_of_several_loads() -> None:
    """A single axle of 20 and a uniform load of 3 on a simple span of 20: at x the axle gives
    x (20 - x), the load 3 x (20 - x) / 2, always more; of the shears the axle's where it is more
    than 3 (20 - x)² / 40, that is below x = 20/3 from the right end."""
    beam = make_beam(SPAN, [(0, "pin"), (SPAN, "roller")], sections=[8])
    loads = [make_load((20, 0)), make_load(uniform=3, number=1)]
    found = results(solve(make_calculation(beam, [make_effect(beam, "moment", "1")], loads)))
    worst = {one["kind"]: one for one in found["envelopes"] if one["load"] == ""}
    assert {*worst} == {"reaction", "moment", "shear"}
    for index, x in enumerate(worst["moment"]["at"]):
        assert worst["moment"]["max"][index] == pytest.approx(1.5 * x * (SPAN - x))
        where = worst["moment"]["where"]["max"][index]
        assert where["load"] == ("Load 2" if 0 < x < SPAN else "Load 1")
    for index, x in enumerate(worst["shear"]["at"]):
        axle, uniform = SPAN - x, 3 * (SPAN - x) ** 2 / 40
        assert worst["shear"]["max"][index] == pytest.approx(max(axle, uniform))
        if axle != uniform:
            where = worst["shear"]["where"]["max"][index]
            assert where["load"] == ("Load 2" if uniform > axle else "Load 1")
    assert worst["reaction"]["max"] == [30, 30]


def test_a_calculation_without_loads_has_no_envelopes() -> None:
    beam = make_beam(SPAN, [(0, "pin"), (SPAN, "roller")], sections=[8])
    found = results(solve(make_calculation(beam, [make_effect(beam, "moment", "1")])))
    assert found["envelopes"] == found["absolute"] == []


def test_progress_is_told_part_by_part() -> None:
    told: list[tuple[int, int, str]] = []
    solve(read(CONTINUOUS.encode()), lambda *one: told.append(one))
    done = [one[0] for one in told]
    assert done == [*range(len(told))]
    assert {one[1] for one in told} == {len(told)}
    assert "Truck: absolute maximum of span 2" in {one[2] for one in told}


def shared(*stated: str) -> Calculation:
    """An axle of 10 on a simple span of 20; at x the greatest moment is x (20 - x) / 2."""
    text = (
        'format = 1\nunits = "SI"\ncover.title = "Store beam"\nbeam.length = 20\n'
        'beam.supports = [ { name = "A", kind = "pin", at = 0 }, '
        '{ name = "B", kind = "roller", at = 20 } ]\nbeam.sections = [ { name = "S", at = 6 } ]\n'
        'effects = [ { kind = "moment", at = "S" } ]\n'
        '[[moving]]\nname = "Cart"\naxles = [ { weight = 10 } ]\n'
        f"distribution = [ {', '.join(stated)} ]\n"
    )
    return read(text.encode())


def said_of(solution: Solution) -> str:
    return " ".join(
        str(part)
        for block in envelope_blocks(solution)
        if isinstance(block, Paragraph)
        for part in block.text
    )


@pytest.mark.parametrize(
    ("stretch", "told", "untold"),
    [
        ("to = 8", [0, 2, 4, 6, 8], "10, 12, 14, 16, 18, B"),
        ("from = 4, to = 14", [4, 6, 8, 10, 12, 14], "A, 2, 16, 18, B"),
    ],
)
def test_nothing_is_told_where_no_distribution_is_stated(
    stretch: str, told: list[int], untold: str
) -> None:
    """Statics: at x the moment of half the cart is x (20 - x) / 4."""
    solution = solve(shared(f'{{ kind = "moment", {stretch}, value = 0.5 }}'))
    found = results(solution)
    (moment,) = found["envelopes"]
    assert moment["kind"] == "moment"
    assert moment["at"] == told
    assert moment["max"] == pytest.approx([x * (20 - x) / 4 for x in told])
    assert found["absolute"] == []
    said = said_of(solution)
    assert (
        f"every reaction; moment at {untold}; every shear; the absolute maximum of span 1" in said
    )


@pytest.mark.parametrize("turned", [False, True])
def test_the_absolute_maximum_by_stretches_of_one_distribution(turned: bool) -> None:
    """Statics: at 8 half the cart causes 8 x 12 / 4 = 24, more than two fifths of it at midspan,
    10 x 10 / 5 = 20; whichever of the two is stated first."""
    stated = ["{ to = 8.0, value = 0.5 }", "{ from = 8.0, value = 0.4 }"]
    solution = solve(shared(*(reversed(stated) if turned else stated)))
    (absolute,) = results(solution)["absolute"]
    assert (absolute["at"], absolute["value"]) == (8, 24)
    moment = envelope(results(solution), "moment")
    assert moment["max"][moment["at"].index(8)] == pytest.approx(19.2 if turned else 24)
    assert "Not found" not in said_of(solution)
