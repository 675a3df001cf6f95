"""Statements in symbols mean what they say: with values put in, equilibrium holds and each solved
form gives the line; and a step's key, id, symbols and unit are those that outlive a release."""

from __future__ import annotations

from collections.abc import Mapping
from fractions import Fraction
from random import Random

import pytest
from beams import effects_of, make_beam, random_beam
from loads import changed, given, make_load, make_strip
from making import lines_of, make_calculation, make_effect
from printed_steps import evaluated

from calcpack.derive.book import LOAD_PLACE, Book
from calcpack.derive.steps import AreaGroup, LineGroup, PlacementGroup, Step
from calcpack.errors import ProgramFault
from calcpack.exact.formula import PLAIN, Leaf, Symbol, Variable, constant, write
from calcpack.exact.piecewise import Side
from calcpack.model.beam import Beam, Release, Section, Support, Typed
from calcpack.model.loads import Given, Rule
from calcpack.results import results
from calcpack.solution import Solution, solve
from calcpack.statics.system import symbol_of

SIDES: tuple[Side, ...] = ("left", "right")


def value_of(step: Step, values: Mapping[Symbol, Fraction]) -> Fraction:
    """The right side of a statement with a value for every variable, as plain arithmetic."""

    def digits(leaf: Leaf | Variable) -> str:
        value = leaf.value if isinstance(leaf, Leaf) else values[leaf.symbol]
        return f"({value})"

    return evaluated(write(step.formula, PLAIN, digits))


@pytest.mark.parametrize("seed", range(20))
def test_equilibrium_and_solved_forms(seed: int) -> None:
    beam = random_beam(Random(seed))
    solution = solve(make_calculation(beam, effects_of(beam)))
    lines = {**solution.unknowns, **{line.effect: line.line for line in solution.lines}}
    loaded = unloaded = 0
    for group in solution.derivation.groups:
        if not isinstance(group, LineGroup):
            continue
        equation = group.source.equation
        assert group.balance.symbols.endswith(" = 0")
        forms = {form.key.rpartition("/")[2]: form for form in group.forms}
        assert ("loaded" in forms) == (equation.start < equation.end)
        for station in beam.stations:
            for side in SIDES:
                at = station.at
                if at in (0, beam.length) and side == ("right" if at else "left"):
                    continue
                values = {symbol_of(one): line.value(at, side) for one, line in lines.items()}
                values[LOAD_PLACE] = at
                after = at > equation.start or (at == equation.start and side == "right")
                before = at < equation.end or (at == equation.end and side == "left")
                on_body = after and before
                form = forms["loaded" if on_body else "elsewhere"]
                assert form.symbols.startswith(f"{symbol_of(group.quantity)} = ")
                assert value_of(form, values) == values[symbol_of(group.quantity)]
                if on_body or equation.start == equation.end:
                    assert value_of(group.balance, values) == 0
                    loaded += on_body
                unloaded += not on_body
    assert loaded > 10
    assert unloaded > 10


def statements(solution: Solution) -> dict[str, str]:
    return {step["key"]: step["symbols"] for step in results(solution)["steps"]}


def suspended() -> Beam:
    """The beam of the file format's own example, with a section in the suspended span."""
    supports = (("A", 0, "pin"), ("B", 40, "roller"), ("C", 88, "roller"), ("D", 128, "roller"))
    return Beam(
        Fraction(128),
        tuple(
            Support(name, Fraction(at), "pin" if kind == "pin" else "roller", Typed(f"s[{at}].at"))
            for name, at, kind in supports
        ),
        tuple(
            Release(name, Fraction(at), "hinge", Typed(f"beam.releases[{i}].at"))
            for i, (name, at) in enumerate((("h1", 52), ("h2", 76)))
        ),
        (Section("1", Fraction(60), Typed("beam.sections[0].at")),),
        Typed("beam.length"),
    )


def test_the_step_of_the_file_format() -> None:
    """Moments about h1 on the suspended span give the shear at h2: as it is written by hand."""
    beam = suspended()
    solution = solve(make_calculation(beam, [make_effect(beam, "moment", "1")]))
    step = next(one for one in results(solution)["steps"] if one["key"] == "unknown/V_h2/at=60")
    assert step["numbers"] == "-1 * (60.000 - 52.000) / (76.000 - 52.000)"
    assert step["result"] == "-0.33333"
    assert step["inputs"] == [
        "beam.sections[0].at",
        "beam.releases[0].at",
        "beam.releases[1].at",
    ]
    assert step["uses"] == []
    said = statements(solution)
    assert said["unknown/V_h2/equilibrium"] == ("ΣM_h1 = V_h2 * (x_h2 - x_h1) + P * (x - x_h1) = 0")
    assert said["unknown/V_h2/loaded"] == "V_h2 = -P * (x - x_h1) / (x_h2 - x_h1)"
    assert said["unknown/V_h2/elsewhere"] == "V_h2 = 0"
    assert said["effect/M_1/equilibrium"] == "ΣM_1 = V_h1 * (x_1 - x_h1) - M_1 + P * (x - x_1) = 0"


def test_a_placement_in_numbers() -> None:
    """12 over midspan and 6 three behind: 36 of axles, 25 of load, allowance and share."""
    beam = make_beam(10, [(0, "pin"), (10, "roller")], sections=[5])
    load = make_load((12, 0), (6, 3), uniform=2, allowance="0.25", distribution="0.5")
    solution = solve(make_calculation(beam, [make_effect(beam, "moment", "1")], [load]))
    steps = {step["key"]: step for step in results(solution)["steps"]}
    root = "placement/moving[0]/M_1/max"
    assert steps[f"{root}/axles"]["numbers"] == "12.00 * 2.500 + 6.00 * 1.000"
    assert steps[f"{root}/uniform"]["numbers"] == "2.00 * 12.500"
    assert steps[root]["numbers"] == "(36.00 * (1 + 0.25) + 25.00) * 0.50"
    assert steps[root]["result"] == "35.00"
    assert [steps[root][name] for name in ("unit", "inputs", "uses")] == [
        "kip·ft",
        ["moving[0].allowance", "moving[0].distribution"],
        [f"{root}/axles", f"{root}/uniform"],
    ]
    assert steps[f"{root}/axle=2"]["numbers"] == "5.000 - 3.000"
    assert steps[f"{root}/axle=2"]["inputs"] == ["moving[0].axles[1].spacing"]
    assert steps["area/M_1/positive"]["unit"] == "ft²"
    said = [steps[key]["symbols"] for key in steps if key.startswith(root)]
    assert said == [
        "z_1 = x_1",
        "z_2 = z_1 - a_2",
        "y_1 = η_1",
        "y_2 = η_A + (η_1 - η_A) * (z_2 - x_A) / (x_1 - x_A)",
        "E_a = W_1 * y_1 + W_2 * y_2",
        "E_w = w * A_+",
        "E_max = (E_a * (1 + I_a) + E_w) * g",
    ]
    least = steps["placement/moving[0]/M_1/min"]
    assert (least["numbers"], least["result"]) == ("0", "0.00")


def test_a_load_of_many_parts_in_numbers() -> None:
    """12, 6 two to four behind it, and 3 per length from 1 behind that on 4, heading right; a force
    of 8 anywhere; impact 50 / (10 + 125), more than the 0.3 that is allowed; 0.9 of it all.

    6 at midspan and 12 two ahead: 12 x 1.5 + 6 x 2.5 = 33, and the strip from 0 to 4: 3 x 2 x 4 / 2
    = 12; (33 x 1.3 + 12 x 1.1 + 8 x 2.5 x 1.3) x 0.9 = 73.89. With 12 at midspan it is 30 + 9 of
    axles and 3 x 1 x 2 / 2 of the strip, less by 3.375."""
    beam = make_beam(10, [(0, "pin"), (10, "roller")], sections=[5])
    path = "moving[0].impact"
    impact = Rule(
        given(10, f"{path}.length"),
        over=given(50, f"{path}.over"),
        beside=given(125, f"{path}.beside"),
        most=given("0.3", f"{path}.most"),
    )
    load = make_load((12, 0), (6, (2, 4)), strips=[make_strip(3, 1, length=4)], headings=("right",))
    load = changed(
        load,
        allowances=(
            ("axles", Given(impact.value, path, impact)),
            ("trailing", given("0.1", "moving[0].trailing[0].allowance")),
        ),
        factors=(given("0.9", "moving[0].factor"),),
        concentrated=(given(8, "moving[0].force"),),
    )
    solution = solve(make_calculation(beam, [make_effect(beam, "moment", "1")], [load]))
    steps = {step["key"]: step for step in results(solution)["steps"]}
    root = "placement/moving[0]/M_1/max"
    assert steps[root]["result"] == "73.89"
    assert steps[root]["numbers"] == (
        "(33.00 * (1 + 0.3000) + 12.00 * (1 + 0.10) + 20.00 * (1 + 0.3000)) * 0.90 * 1.00"
    )
    assert steps[f"load/moving[0]/{path}"]["numbers"] == "50.00 / (10.000 + 125.000)"
    assert steps[f"load/moving[0]/{path}/most"]["inputs"] == [f"{path}.most"]
    assert f"load/moving[0]/{path}/most" in steps[root]["uses"]
    said = [steps[key]["symbols"] for key in steps if key.startswith(root)]
    assert said == [
        "z_2 = x_1",
        "z_1 = z_2 + a_2",
        "y_1 = η_1 + (η_B - η_1) * (z_1 - x_1) / (x_B - x_1)",
        "y_2 = η_1",
        "E_a = W_1 * y_1 + W_2 * y_2",
        "s_q1,start = z_2 - b",
        "s_q1,end = s_q1,start - l",
        "y_q1,start = η_A + (η_1 - η_A) * (s_q1,start - x_A) / (x_1 - x_A)",
        "A_q1,1 = y_q1,start * (s_q1,start - s_q1,end) / 2",
        "A_q1 = A_q1,1",
        "E_q1 = q * A_q1",
        "z_c1 = x_1",
        "y_c1 = η_1",
        "E_c = W_c1 * y_c1",
        "E_max = (E_a * (1 + I_a) + E_q1 * (1 + I_t) + E_c * (1 + I_a)) * k_1 * g",
    ]


def test_a_gap_that_comes_out() -> None:
    """Supports at 4 and 16 of 20, moment at 10: -2 at either tip. 12 and 6, 18 to 22 apart,
    stand at the tips, and 20 - 0 is found to lie between them: -2 x 12 - 2 x 6."""
    beam = make_beam(20, [(4, "pin"), (16, "roller")], sections=[10])
    load = make_load((12, 0), (6, (18, 22)), headings=("right",))
    solution = solve(make_calculation(beam, [make_effect(beam, "moment", "1")], [load]))
    steps = {step["key"]: step for step in results(solution)["steps"]}
    root = "placement/moving[0]/M_1/min"
    gap = steps[f"{root}/gap=2"]
    assert (gap["symbols"], gap["numbers"]) == ("a_2 = z_1 - z_2", "20.000 - 0.000")
    assert (gap["result"], gap["uses"]) == ("20.000", [f"{root}/axle=1", f"{root}/axle=2"])
    assert steps[root]["result"] == "-36.00"


def test_the_released_beam_closes_again() -> None:
    """Three spans of 10, the load in the middle of the first: by three moments 4 M_B + M_C = -15/4
    and M_B + 4 M_C = 0; both compatibility equations hold for the values of their steps."""
    beam = make_beam(30, [(at, "pin") for at in (0, 10, 20, 30)], sections=[5])
    solution = solve(make_calculation(beam, [make_effect(beam, "moment", "1")]))
    said = statements(solution)
    assert said["compatibility/1"] == "Δ_1 = f_11 * X_1 + f_12 * X_2 + δ_1(x) = 0"
    assert said["compatibility/2"] == "Δ_2 = f_12 * X_1 + f_22 * X_2 + δ_2(x) = 0"
    values = {step.key: step.value or Fraction(0) for step in solution.derivation.steps}
    first, second = values["redundants/M_B/at=5"], values["redundants/M_C/at=5"]
    assert first == -1
    assert second == Fraction(1, 4)
    f11, f12, f22 = (values[f"flexibility/{name}"] for name in ("1/1", "1/2", "2/2"))
    assert f11 * first + f12 * second + values["curve/1/at=5"] == 0
    assert f12 * first + f22 * second == 0


def test_keys_stay_when_a_section_is_added() -> None:
    """What stands at the old stations keeps its key and its value; the numbers on sheets move."""
    load = make_load((12, 0), (6, 3))
    supports = [(2, "pin"), (12, "roller")]
    found = []
    for sections in ([7], [7, 9]):
        beam = make_beam(15, supports, sections=sections)  # type: ignore[arg-type]
        effects = [make_effect(beam, "moment", "1"), make_effect(beam, "reaction", "A")]
        solution = solve(make_calculation(beam, effects, [load]))
        found.append({step.key: step.value for step in solution.derivation.steps})
    assert found[0].items() <= found[1].items()
    assert len(found[1]) > len(found[0])


def test_a_step_that_misses_the_engine_is_a_fault() -> None:
    beam = make_beam(10, [(0, "pin"), (10, "roller")])
    book = Book(make_calculation(beam, []))
    book.open_group()
    with pytest.raises(ProgramFault, match="step one gives 3, the engine found 2"):
        book.find("one", Symbol("z"), constant(3), "number", Fraction(2))


def test_groups_are_numbered_in_order() -> None:
    beam = make_beam(10, [(0, "pin"), (10, "roller")], sections=[5])
    loads = [make_load((12, 0)), make_load((3, 0), number=1)]
    effects = [make_effect(beam, "moment", "1"), make_effect(beam, "shear", "1")]
    solution = solve(make_calculation(beam, effects, loads))
    groups = solution.derivation.groups
    assert [group.number for group in groups] == list(range(1, len(groups) + 1))
    for group in groups:
        ids = [step.id for step in group.steps]
        assert ids == [f"{group.number}.{place}" for place in range(1, len(ids) + 1)]
    assert sum(isinstance(group, AreaGroup) for group in groups) == 2
    placements = [group for group in groups if isinstance(group, PlacementGroup)]
    assert [(g.load.path, g.effect.kind, g.governing.sense) for g in placements] == [
        (path, kind, sense)
        for path in ("moving[0]", "moving[1]")
        for kind in ("moment", "shear")
        for sense in (1, -1)
    ]
    assert lines_of(beam, effects) == [line.line for line in solution.lines]
