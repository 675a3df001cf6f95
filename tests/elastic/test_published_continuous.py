"""Continuous and one-span beams of published tables and formulas, each with its source."""

from __future__ import annotations

import tomllib
from collections.abc import Sequence
from fractions import Fraction
from importlib.resources import files
from typing import Any

import pytest
from beams import make_beam
from making import lines_of, make_effect

from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import Beam, SupportKind

CASES: dict[str, dict[str, Any]] = {
    case["id"]: case
    for case in tomllib.loads(
        files("calcpack").joinpath("reference/published.toml").read_text(encoding="utf-8")
    )["case"]
    if case["item"] == 2
}
LINES = [name for name, case in CASES.items() if case["kind"] == "influence-line"]
UNEQUAL = [name for name in CASES if name.startswith("cont-3uneq")]
EQUAL = [name for name in CASES if name.startswith("cont-udl-all")]
OTHERS = [
    "cont-2eq-load-third-of-span2",
    "cont-2eq-ex103",
    "propped-point-load-a025",
    "fixfix-point-load-a03",
    "propped-udl",
    "fixed-guided-end-load",
]


def exact(value: float) -> Fraction:
    """A sixth or third that the file gives to six decimals is meant exactly."""
    for parts in (1, 6):
        if abs(value * parts - round(value * parts)) < 4e-6:
            return Fraction(round(value * parts), parts)
    return Fraction(str(value))


def beam_of(case: dict[str, Any], sections: Sequence[Fraction] = ()) -> Beam:
    geometry = case["geometry"]
    supports = [(exact(one["x"]), one["type"]) for one in geometry["supports"]]
    return make_beam(exact(geometry["x_end"]), supports, sections=sorted(set(sections)))


def line(beam: Beam, kind: Any, at: Fraction) -> Piecewise:
    return lines_of(beam, [make_effect(beam, kind, beam.station(at).name or str(at))])[0]


def spans(*lengths: Fraction | int, sections: Sequence[Fraction] = ()) -> Beam:
    stops = [Fraction(0)]
    for length in lengths:
        stops.append(stops[-1] + length)
    kinds: list[SupportKind] = ["pin", *["roller"] * len(lengths)]  # type: ignore[list-item]
    return make_beam(stops[-1], list(zip(stops, kinds, strict=True)), sections=sections)


def test_every_case_is_covered() -> None:
    assert sorted([*LINES, *UNEQUAL, *EQUAL, *OTHERS]) == sorted(CASES)
    assert (len(LINES), len(UNEQUAL), len(EQUAL)) == (8, 5, 3)


@pytest.mark.parametrize("name", LINES)
def test_influence_lines(name: str) -> None:
    case = CASES[name]
    at = exact(case["at"])
    beam = beam_of(case, [at] if at not in (0, 1, 2) else [])
    found = line(beam, case["response"], at)
    for load_x, published in zip(case["load"]["load_x"], case["published"], strict=True):
        value = float(found.left(exact(load_x)))
        assert value == pytest.approx(published, abs=case["tolerance"]), case["source"]


@pytest.mark.parametrize("name", UNEQUAL)
def test_uniform_load_on_the_first_of_three_unequal_spans(name: str) -> None:
    case = CASES[name]
    first = exact(case["geometry"]["spans_relative"][0])
    for index, ratio in enumerate(case["param_values"]):
        beam = spans(first, 1, Fraction(str(ratio)))
        for support, published in zip(("B", "C"), case["published"], strict=True):
            moment = lines_of(beam, [make_effect(beam, "moment", support)])[0]
            found = float(moment.integral(Fraction(0), first) / first**2)
            assert found == pytest.approx(published[index], abs=case["tolerance"]), case["source"]


@pytest.mark.parametrize("name", EQUAL)
def test_uniform_load_on_all_equal_spans(name: str) -> None:
    case = CASES[name]
    moments, reactions, within = case["published"]
    beam = spans(*[1] * (case["geometry"]["supports"] - 1))
    names = [support.name for support in beam.supports]
    for support, published in zip(names[1:], moments, strict=False):
        found = sum(lines_of(beam, [make_effect(beam, "moment", support)])[0].areas())
        assert float(found) == pytest.approx(published, abs=1e-6), case["source"]
    for support, published in zip(names, reactions, strict=False):
        found = sum(lines_of(beam, [make_effect(beam, "reaction", support)])[0].areas())
        assert float(found) == pytest.approx(published, abs=2e-4), case["source"]
    for span, published in enumerate(within):
        # Simple-beam moment between the exact end moments, greatest where the shear is zero.
        ends = [
            sum(lines_of(beam, [make_effect(beam, "moment", support)])[0].areas())
            for support in (names[span], names[span + 1])
        ]
        x = Fraction(1, 2) + ends[1] - ends[0]
        found = ends[0] * (1 - x) + ends[1] * x + x * (1 - x) / 2
        assert float(found) == pytest.approx(published, abs=1e-4), case["source"]


def test_point_load_on_the_second_of_two_spans() -> None:
    case = CASES["cont-2eq-load-third-of-span2"]
    load = exact(case["load"]["load_x"][0])
    beam = beam_of(case, [load])
    found = [
        *(line(beam, "reaction", Fraction(x)).left(load) for x in (0, 1, 2)),
        *(line(beam, "moment", x).left(load) for x in (Fraction(1), load)),
    ]
    assert [float(one) for one in found] == pytest.approx(case["published"], abs=1e-4)


def test_point_load_beyond_the_middle_support() -> None:
    case = CASES["cont-2eq-ex103"]
    load = exact(case["load"]["load_x"][0])
    beam = beam_of(case, [Fraction("0.4")])
    found = (
        line(beam, "reaction", Fraction(0)),
        line(beam, "moment", Fraction("0.4")),
        line(beam, "moment", Fraction(1)),
    )
    values = [float(one.left(load)) for one in found]
    assert values == pytest.approx(case["published"], abs=1e-4), case["source"]


@pytest.mark.parametrize("name", ["propped-point-load-a025", "fixfix-point-load-a03"])
def test_one_span_under_a_point_load(name: str) -> None:
    case = CASES[name]
    load = Fraction(str(case["load"]["load_x"][0]))
    beam = beam_of(case, [load])
    kinds = ["reaction", "reaction", *["moment"] * (len(case["at"]) - 2)]
    if name.startswith("propped"):
        kinds = ["reaction", "reaction", "moment", "moment"]
    found = [
        float(line(beam, kind, Fraction(str(at))).left(load))
        for kind, at in zip(kinds, case["at"], strict=True)
    ]
    assert found == pytest.approx(case["published"], abs=1e-6), case["source"]


def test_propped_cantilever_under_uniform_load() -> None:
    case = CASES["propped-udl"]
    beam = beam_of(case, [Fraction(3, 8)])
    found = [
        float(sum(line(beam, kind, Fraction(str(at))).areas()))
        for kind, at in zip(("reaction", "reaction", "moment", "moment"), case["at"], strict=True)
    ]
    assert found == pytest.approx(case["published"], abs=2e-5), case["source"]


def test_fixed_and_guided_under_an_end_load() -> None:
    case = CASES["fixed-guided-end-load"]
    beam = beam_of(case)
    found = [
        line(beam, kind, Fraction(at)).left(Fraction(1))
        for kind, at in (("reaction", 0), ("moment", 0), ("moment", 1))
    ]
    assert [float(one) for one in found] == case["published"], case["source"]
