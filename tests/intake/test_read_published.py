"""Published models in calc.toml: their cases in the file's units, and what calc.toml changes."""

from __future__ import annotations

import re
from fractions import Fraction

import pytest
from intake_samples import SHORT, changed, faults, givens

from calcpack.intake import read
from calcpack.intake.standards import cases_of, read_model
from calcpack.model.loads import Case, Given, MovingLoad, Rule
from calcpack.model.request import Calculation

KIP = Fraction("4.4482216152605")  # kilonewtons
FOOT = Fraction("0.3048")  # metres
FORCE, LENGTH, LINE = 1 / KIP, 1 / FOOT, FOOT / KIP  # of kN, m and kN/m in kip, ft and kip/ft

SPANS = changed(SHORT, ("supports = [", 'supports = [ { name = "M", at = 5.0, kind = "roller" },'))


def calculation(stated: str, units: str, text: str = SHORT) -> Calculation:
    text = changed(text, ('"SI"', f'"{units}"'))
    return read(f'{text}[[moving]]\nname = "M"\n{stated}\n'.encode())


def load(stated: str, units: str, text: str = SHORT) -> MovingLoad:
    (found,) = calculation(stated, units, text).moving
    return found


def own(name: str, variant: str = "", length: Given | None = None) -> tuple[Case, ...]:
    """The cases as they stand in the model's own file."""
    return cases_of(read_model(name), variant, name, length)[0]


@pytest.mark.parametrize("variant", ["design", "two tandems", "fatigue", "deflection"])
def test_a_variant_stands_as_in_the_file_of_the_model(variant: str) -> None:
    stated = f'standard = "HL-93"\nvariant = "{variant}"'
    assert load(stated, "US").cases == own("HL-93", variant)


def test_a_model_in_its_own_units_is_cited_by_its_places() -> None:
    found = calculation('standard = "HL-93"\nvariant = "design"', "US")
    case, _, _ = found.moving[0].cases
    rear = case.axles[2].gap
    assert rear is not None
    assert [(tie.path, tie.value) for tie in rear.ties] == [
        ("HL-93.trains[0].axles[2].spacing[0]", Fraction(14)),
        ("HL-93.trains[0].axles[2].spacing[1]", Fraction(30)),
    ]
    assert found.inputs["HL-93.trains[0].axles[2].spacing[1]"] == 30
    assert case.uniform == Given(Fraction(64, 100), "HL-93.cases[0].uniform")
    assert found.inputs["HL-93.cases[0].uniform"] == Fraction(64, 100)


@pytest.mark.parametrize(
    ("name", "variant", "factors"),
    [
        ("LM71", "", {FORCE, LENGTH, LINE}),
        ("SW/2", "", {LENGTH, LINE}),
        ("LM1", "lane 1", {FORCE, LENGTH, LINE}),
        ("HB", "45 units", {FORCE, LENGTH, 1}),
        ("S1600", "", {FORCE, LENGTH, LINE}),
        ("M1600", "design", {FORCE, LENGTH, LINE}),
        ("CL-625", "", {FORCE, LENGTH, LINE}),
        ("A160", "", {FORCE}),
        ("NZ HN", "", {FORCE, LENGTH, LINE}),
    ],
)
def test_a_model_in_other_units_is_converted_exactly(
    name: str, variant: str, factors: set[Fraction | int]
) -> None:
    stated = f'standard = "{name}"\nallowance = 0' + (f'\nvariant = "{variant}"' if variant else "")
    found = calculation(stated, "US")
    sizes = {one.path: one.value for one in givens(own(name, variant))}
    seen = set()
    for one in givens(found.moving[0].cases):
        if one.path:
            assert one.value == sizes[one.path] * factor_of(one.path)
            assert found.inputs[one.path] == one.value
            seen.add(factor_of(one.path))
    assert seen == factors


def factor_of(path: str) -> Fraction | int:
    """What one of the number's unit in the model's file is in kip, ft or kip/ft."""
    sizes: dict[str, Fraction | int] = {
        "factors": 1,
        "weight": FORCE,
        "spacing": LENGTH,
        "behind": LENGTH,
        "ahead": LENGTH,
        "length": LENGTH,
        "load": LINE,
        "uniform": LINE,
    }
    (size,) = {sizes[key] for key in re.split(r"[.\[\]]+", path) if key in sizes}
    return size


def test_a_rail_load_in_kips_and_feet() -> None:
    (case,) = load('standard = "LM71"\nallowance = 0', "US").cases
    first, second, *_ = case.axles
    assert first.weight == Given(250 / KIP, "LM71.trains[0].axles[0].weight")
    assert second.gap is not None
    assert second.gap.ties == (Given(Fraction(8, 5) / FOOT, "LM71.trains[0].axles[1].spacing"),)
    ahead, _ = case.trains[0].strips
    assert ahead.start == Given(Fraction(4, 5) / FOOT, "LM71.trains[0].trailing[0].ahead")
    assert ahead.amount == Given(80 * FOOT / KIP, "LM71.trains[0].trailing[0].load")
    assert (first.gap, ahead.length, case.uniform) == (None, None, None)


def test_a_highway_load_in_kilonewtons_and_metres() -> None:
    case, _, two = load('standard = "HL-93"\nvariant = "design"', "SI").cases
    assert [axle.weight.value for axle in case.axles] == [8 * KIP, 32 * KIP, 32 * KIP]
    assert case.uniform is not None
    assert case.uniform.value == Fraction("0.64") * KIP / FOOT
    assert [gap.least for gap in two.gaps] == [50 * FOOT]
    assert case.allowances == own("HL-93", "design")[0].allowances
    assert [one.value for one in two.factors] == [Fraction(9, 10)]


def test_the_scale_multiplies_every_case_after_the_factors_of_the_model() -> None:
    found = calculation('standard = "HB"\nvariant = "30 units"\nscale = 1.0', "SI")
    (case,) = found.moving[0].cases
    assert case.factors == (
        Given(Fraction(30), "HB.variants[4].factors[0]"),
        Given(Fraction(1), "moving[0].scale"),
    )
    assert case.factor == 30
    half = load('standard = "HL-93"\nvariant = "design"\nscale = 0.5', "US")
    assert [case.factor for case in half.cases] == [
        Fraction(1, 2), Fraction(1, 2), Fraction(45, 100),
    ]  # fmt: skip


def test_rules_are_for_the_length_that_is_stated() -> None:
    found = calculation('standard = "Cooper E80"\nvariant = "rail"\nlength = "60 ft"', "US")
    train, alternate = found.moving[0].cases
    length = Given(Fraction(60), "moving[0].length")
    impact = train.allowance("axles")
    assert impact is not None
    assert (impact, impact.path) == (
        train.allowance("trailing"),
        "Cooper E80.cases[0].allowance[0]",
    )
    assert impact.value == Fraction(40, 100) - Fraction(3 * 60**2, 160000)
    assert impact.rule == Rule(
        length,
        constant=Given(Fraction(2, 5), f"{impact.path}.pieces[0].constant"),
        per_square=Given(Fraction(-3, 160000), f"{impact.path}.pieces[0].per_square"),
    )
    assert impact.path not in found.inputs
    assert found.inputs[f"{impact.path}.pieces[0].constant"] == Fraction(2, 5)
    assert found.inputs["moving[0].length"] == 60
    assert (train, alternate) == own("Cooper E80", "rail", length)


def test_an_allowance_of_calc_toml_is_in_place_of_that_of_the_model() -> None:
    stated = 'standard = "HL-93"\nvariant = "design"\nallowance = '
    for case in load(f"{stated}0.75", "US").cases:
        assert case.allowances == (("axles", Given(Fraction(3, 4), "moving[0].allowance")),)
    for case in load(stated + '[ { of = "uniform", value = 0.2 } ]', "US").cases:
        allowance = Given(Fraction(1, 5), "moving[0].allowance[0].value")
        assert case.allowances == (("uniform", allowance),)
    assert all(not case.allowances for case in load(f"{stated}0", "US").cases)
    assert all(case.allowances for case in load(stated.rpartition("\n")[0], "US").cases)


def test_a_heading_of_calc_toml_is_in_place_of_that_of_the_model() -> None:
    stated = 'standard = "LM71"\nallowance = 0\n'
    assert [case.headings for case in load(f'{stated}heading = "left"', "SI").cases] == [("left",)]
    assert [case.headings for case in load(stated, "SI").cases] == [("right", "left")]


def test_where_a_model_is_defined_comes_with_its_load() -> None:
    stated = 'standard = "Cooper E80"\nvariant = "rail"\nlength = 50\ncompared = " R.A., 2018 "'
    found = load(stated, "US")
    model = read_model("Cooper E80")
    assert found.standard == model.standard("rail", "R.A., 2018")
    assert found.standard is not None
    assert (found.standard.per, found.standard.settled) == ("rail", True)
    assert (found.name, found.path, len(found.shares)) == ("M", "moving[0]", 1)


HINGE = ("[beam]", '[beam]\nreleases = [ { name = "h", at = 5, kind = "hinge" } ]')
STIFF = ("[beam]", "[beam]\nstiffness = [ { from = 0, to = 12, EI = 1 } ]")
MIDDLE = 'at = 5.0, kind = "roller"'


@pytest.mark.parametrize(
    ("changes", "applies"),
    [
        ([], True),
        ([HINGE], False),
        ([HINGE, ("at = 5,", "at = 4,")], True),
        ([STIFF, (MIDDLE, 'at = 5.0, kind = "spring", vertical = 9')], True),
        ([(MIDDLE, 'at = 5.0, kind = "guided"')], False),
        ([("at = 0.0", "at = 1.0"), ("at = 12.0", "at = 10.0")], True),
        ([HINGE, ("at = 0.0", "at = 1.0"), ("at = 12.0", "at = 10.0")], False),
    ],
    ids=[
        "two spans",
        "hinge over the support",
        "hinge in a span",
        "spring",
        "guided",
        "overhangs",
        "overhangs and a hinge over the support",
    ],
)
def test_a_continuous_beam_runs_on_over_a_support(
    changes: list[tuple[str, str]], applies: bool
) -> None:
    text = changed(SPANS, *changes) + '[[moving]]\nname = "M"\nstandard = "SW/0"\nallowance = 0\n'
    line = (
        "moving[0].standard: SW/0, is for continuous beams only "
        "(EN 1991-2 Traffic loads on bridges, 6.3.3, 6.8.1)"
    )
    assert faults(text) == ([] if applies else [line])
