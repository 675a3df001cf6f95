"""The steps of the examples, read again as printed; settlements against a closed form."""

from __future__ import annotations

from pathlib import Path

import pytest
from printed_steps import check

from calcpack import read, read_file, results, solve
from calcpack.derive.steps import SettlementGroup

EXAMPLES = Path(__file__).parent.parent.parent / "example_projects"
NAMES = sorted(path.parent.name for path in EXAMPLES.glob("*/calc.toml"))

TWO_SPANS = """\
format = 1
units = "SI"
cover.title = "Two spans"
[beam]
length = 16.0
supports = [
  { name = "A", at = 0.0, kind = "pin" },
  { name = "B", at = 8.0, kind = "roller" },
  { name = "C", at = 16.0, kind = "roller" },
]
sections = [{ name = "1", at = 4.0 }]
stiffness = [{ from = 0.0, to = 16.0, E = 210000.0, I = 4.0e8 }]
[[effects]]
kind = "moment"
at = ["B", "1"]
[[effects]]
kind = "reaction"
at = ["A", "B"]
[[permanent]]
name = "Middle sinks"
settlements = [{ at = "B", down = 12.0 }]
"""


@pytest.mark.parametrize("name", NAMES)
def test_every_step_of_an_example_closes(name: str) -> None:
    calculation = read_file(EXAMPLES / name / "calc.toml")
    assert check(results(solve(calculation))["steps"], calculation.inputs) > 150


def test_settlement_of_the_middle_support() -> None:
    """Three-moment equation: M_B = 3 EI s / l², R_B = -6 EI s / l³, by equilibrium R_A = M_B / l
    and half of M_B at midspan; EI = 84000 kN m², s = 12 mm, l = 8 m."""
    calculation = read(TWO_SPANS.encode())
    solution = solve(calculation)
    found = results(solution)
    moment = 3 * 84000 * 0.012 / 8**2
    (case,) = found["permanent"]
    assert case["name"] == "Middle sinks"
    assert [one["value"] for one in case["effects"]] == pytest.approx(
        [moment, moment / 2, moment / 8, -moment / 4]
    )
    assert check(found["steps"], calculation.inputs) > 30
    (group,) = (g for g in solution.derivation.groups if isinstance(g, SettlementGroup))
    printed = {step.key: solution.derivation.result(step) for step in group.steps}
    assert printed["permanent/permanent[0]/M_B"] == "47.25"
    assert printed["permanent/permanent[0]/M_1"] == "23.63"
    units = {step["key"]: step["unit"] for step in found["steps"]}
    assert units["permanent/permanent[0]/M_B"] == "kN·m"
    assert units["permanent/permanent[0]/R_B"] == "kN"


@pytest.mark.parametrize(
    ("redundant", "unit"), [("moment B", "kN·m²"), ("reaction B", "kN·m³"), ("reaction A", "kN·m³")]
)
def test_the_work_of_a_settlement_has_the_unit_of_its_redundant(redundant: str, unit: str) -> None:
    """EI times a rotation where a moment is released, times a displacement where a force is."""
    stated = TWO_SPANS.replace("sections =", f'redundants = ["{redundant}"]\nsections =')
    found = results(solve(read(stated.encode())))
    units = {step["key"]: step["unit"] for step in found["steps"]}
    assert units["permanent/permanent[0]/work=1"] == unit
    assert found["permanent"] == results(solve(read(TWO_SPANS.encode())))["permanent"]


def test_a_determinate_beam_settles_without_forces() -> None:
    text = TWO_SPANS.replace(
        "sections =", 'releases = [{ name = "h", at = 11.0, kind = "hinge" }]\nsections ='
    )
    (case,) = results(solve(read(text.encode())))["permanent"]
    assert [one["value"] for one in case["effects"]] == [0.0] * 4


def test_the_curve_of_a_deflection_in_symbols() -> None:
    """Reciprocity: the curve under the unit load at h, and of the redundant under it, over EI."""
    found = results(solve(read_file(EXAMPLES / "propped_cantilever" / "calc.toml")))
    symbols = {step["key"]: step["symbols"] for step in found["steps"]}
    stated = "D_h = 1000 * (δ_P,h,left(x) + C_A * δ_1(x)) / EI_0"
    assert symbols["effect/D_h/curve"] == stated


def test_an_elimination_that_fills_a_gap() -> None:
    """Redundants stated from the middle outwards: the first couples the others, which share no
    span; its elimination fills f_23. The lines are those by rule."""
    spans = """\
format = 1
units = "US"
cover.title = "Four spans"
[beam]
spans = [30, 40, 40, 30]
supports = [
  { name = "A", kind = "pin" },
  { name = "B", kind = "roller" },
  { name = "C", kind = "roller" },
  { name = "D", kind = "roller" },
  { name = "E", kind = "roller" },
]
sections = [{ name = "1", at = 50.0 }]
"""
    stated = spans + 'redundants = ["moment C", "moment B", "moment D"]\n'
    calculation = read(stated.encode())
    found = results(solve(calculation))
    assert check(found["steps"], calculation.inputs) > 100
    assert "elimination/2/3/after=1" in {step["key"] for step in found["steps"]}
    assert found["lines"] == results(solve(read(spans.encode())))["lines"]
