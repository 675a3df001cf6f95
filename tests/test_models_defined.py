"""Every load model against its definition in ``calcpack/reference/published.toml``.

The published cases were written apart from the models' files. What a model takes from the text of a
standard that is not there is held to numbers worked by hand, with the clause beside them.
"""

from __future__ import annotations

import tomllib
from decimal import Decimal
from fractions import Fraction
from importlib.resources import files
from pathlib import Path
from typing import Any

import pytest

from calcpack.intake.standards import cases_of, model_names, read_model
from calcpack.model.loads import Applies, Case, Gap, Given, Part, Strip

PUBLISHED: dict[str, dict[str, Any]] = {
    case["id"]: case
    for case in tomllib.loads(
        files("calcpack").joinpath("reference/published.toml").read_text("utf-8"),
        parse_float=Decimal,
    )["case"]
    if case["item"] == 5
}

NO_MODEL = {
    # factors for several lanes or tracks and their number: of the distribution, in the notes
    "hl93-multiple-presence",
    "hl93-lanes",
    "hs20-lane-reduction",
    "e80-multiple-tracks",
    "lm1-lanes",
    "lm71-tracks",
    "cl625-lanes",
    "as5100-lanes",
    # a dynamic factor by square roots, which the engineer states
    "lm71-dynamic",
    # alternatives, older rules and loads that there is no model of
    "hs-1941-rule",
    "lm1-simplified",
    "lm3-basic",
    "flm3",
    "w80",
    "ha-udl",
    "ha-kel",
}

AXLES = {
    "hl93-truck": ("HL-93", "design", "truck and lane"),
    "hl93-tandem": ("HL-93", "design", "tandem and lane"),
    "hl93-tandem-pair": ("HL-93", "two tandems", "two tandems and lane"),
    "hl93-fatigue": ("HL-93", "fatigue", "fatigue truck"),
    "hs20-truck": ("HS20-44", "design", "truck"),
    "h20-truck": ("H20-44", "", "truck"),
    "military-alternate": ("HS20-44", "with military loading", "military loading"),
    "e80-train": ("Cooper E80", "track", "E80"),
    "e80-alternate": ("Cooper E80", "track", "alternate load"),
    "lm2": ("LM2", "", "single axle"),
    "lm71": ("LM71", "", "LM71"),
    "cl625-truck": ("CL-625", "", "truck, three axles or more"),
    "cl625-ontario": ("CL-625-ONT", "", "truck, three axles or more"),
    "m1600": ("M1600", "design", "M1600"),
    "s1600": ("S1600", "", "S1600"),
    "a160": ("A160", "", "A160"),
    "irc-classA": ("IRC Class A", "steel", "vehicles in line"),
    "irc-70R-wheeled": ("IRC 70R", "concrete", "wheeled vehicles in line"),
    "irc-70R-bogie": ("IRC 70R", "steel", "bogie"),
    "hb-45": ("HB", "45 units", "HB"),
    "jtg-vehicle": ("JTG vehicle", "", "vehicle"),
    "nz-hn": ("NZ HN", "", "axles and uniform load"),
}
"""Where the axles of each published vehicle stand: model, variant and case."""

ONLY_MOMENTS = Applies(("moment", "moment reaction", "deflection", "rotation"))
ONLY_SHEARS = Applies(("shear", "reaction"))


def cases(name: str, variant: str = "", length: str = "20") -> dict[str, Case]:
    given = Given(Fraction(length), "moving[0].length")
    found, _ = cases_of(read_model(name), variant, name, given)
    return {case.name: case for case in found}


def load(name: str) -> dict[str, Any]:
    definition: dict[str, Any] = PUBLISHED[name]["load"]
    return definition


def numbers(raw: list[Any]) -> list[Fraction]:
    return [Fraction(one) for one in raw]


def number(text: str) -> Fraction:
    return Fraction(text)


def allowances(case: Case) -> dict[Part, Fraction]:
    return {part: given.value for part, given in case.allowances}


def uniform(case: Case) -> Fraction:
    assert case.uniform
    return case.uniform.value


def gaps(case: Case) -> list[Gap]:
    found = [axle.gap for axle in case.trains[0].axles[1:]]
    return [gap for gap in found if gap]


def test_every_published_definition_is_held_to_or_left_out_with_a_reason() -> None:
    text = Path(__file__).read_text("utf-8")
    assert len(PUBLISHED) == 56
    assert [name for name in PUBLISHED if f'"{name}"' not in text] == []
    assert PUBLISHED.keys() >= NO_MODEL | AXLES.keys()


def test_the_models_are_these() -> None:
    assert model_names() == (
        "A160", "CL-625", "CL-625-ONT", "Cooper E80", "H20-44", "HB", "HL-93", "HS20-44",
        "IRC 70R", "IRC Class A", "JTG class I lane", "JTG vehicle", "LM1", "LM2", "LM71", "M1600",
        "NZ HN", "NZ HO", "S1600", "SW/0", "SW/2", "unloaded train",
    )  # fmt: skip


@pytest.mark.parametrize("name", AXLES)
def test_axles_are_the_published_ones(name: str) -> None:
    model, variant, called = AXLES[name]
    case = cases(model, variant)[called]
    axles = case.trains[0].axles
    weights, distances = numbers(load(name)["axles"]), numbers(load(name)["spacings"])
    assert [axle.weight.value * case.factor for axle in axles] == weights
    found = [gap.least for gap in gaps(case)]
    assert found == (distances if len(axles) > 1 else [])
    assert all(axle.acts for axle in axles)
    assert [sum(weights), sum(found)] == numbers(PUBLISHED[name]["published"])
    assert case.headings == ("right", "left")
    assert (read_model(model).units == "US") == (name.split("-")[0] in US)


US = {"hl93", "hs20", "h20", "military", "e80"}


@pytest.mark.parametrize("name", AXLES)
def test_spacings_that_vary_are_the_published_ones(name: str) -> None:
    model, variant, called = AXLES[name]
    found = gaps(cases(model, variant)[called])
    varies = load(name).get("variable_spacing", {})
    for index, gap in enumerate(found):
        ties = [tie.value for tie in gap.ties]
        if index != varies.get("index"):
            assert gap.fixed
        elif "values" in varies:
            assert ties == numbers(varies["values"])
            assert not gap.free
        elif varies["max"] == "no limit":
            assert gap.free
            assert (gap.least, gap.greatest) == (Fraction(varies["min"]), None)
        else:
            assert gap.free
            assert ties == numbers([varies["min"], varies["max"]])


# AASHTO LRFD, 9th edition


def test_hl93_design() -> None:
    found = cases("HL-93", "design")
    assert list(found) == ["truck and lane", "tandem and lane", "two trucks and lane"]
    (lane, _width) = numbers(PUBLISHED["hl93-lane"]["published"])
    _joints, fatigue, other = numbers(PUBLISHED["hl93-dynamic"]["published"])  # 3.6.2.1
    for case in found.values():
        assert uniform(case) == lane
        assert case.relieving == "neglect"  # 3.6.1.3.1
        assert allowances(case) == {"axles": other}
    assert [case.factor for case in found.values()] == [1, 1, number("0.9")]
    assert [case.applies for case in found.values()][:2] == [(), ()]
    assert allowances(cases("HL-93", "fatigue")["fatigue truck"]) == {"axles": fatigue}


def test_hl93_two_trucks() -> None:
    factor, between, rear = numbers(PUBLISHED["hl93-combination"]["published"])
    case = cases("HL-93", "design")["two trucks and lane"]
    assert case.factor == factor
    assert [[axle.weight.value for axle in train.axles] for train in case.trains] == [
        [8, 32, 32]
    ] * 2
    spacings = [axle.gap for train in case.trains for axle in train.axles if axle.gap]
    assert all(gap.fixed for gap in spacings)
    assert [gap.least for gap in spacings] == [rear] * 4
    (gap,) = case.gaps
    assert (gap.least, gap.greatest, gap.free) == (between, None, True)
    assert case.applies == (
        Applies(("moment",), -1, "hogging"),
        Applies(("moment reaction",), 0, "hogging"),
        Applies(("reaction",), 1, "interior"),
    )


def test_hl93_two_tandems_come_beside_the_design_loads() -> None:
    found = cases("HL-93", "two tandems")
    assert found.keys() - {"two tandems and lane"} == cases("HL-93", "design").keys()
    case = found["two tandems and lane"]
    definition = load("hl93-tandem-pair")
    assert len(case.trains) == definition["count"] == 2
    (gap,) = case.gaps
    assert gap.free
    assert [tie.value for tie in gap.ties] == numbers(
        [definition["gap_min"], definition["gap_max"]]
    )
    assert case.factor == 1
    assert uniform(case) == number("0.64")
    assert case.applies == found["two trucks and lane"].applies


def test_hl93_fatigue_is_one_truck_with_all_its_axles() -> None:  # 3.6.1.4.1
    (case,) = cases("HL-93", "fatigue").values()
    assert (case.uniform, case.relieving, case.applies) == (None, "count", ())
    assert case.factor == 1
    assert [gap.fixed for gap in gaps(case)] == [True, True]


def test_hl93_deflection() -> None:
    alone, part, lane = numbers(PUBLISHED["hl93-deflection"]["published"])
    truck = cases("HL-93", "design")["truck and lane"].trains[0].axles
    first, second = cases("HL-93", "deflection").values()
    for case, share in ((first, alone), (second, part)):
        axles = case.trains[0].axles
        assert [axle.weight.value for axle in axles] == [
            axle.weight.value * share for axle in truck
        ]
        last = axles[2].gap
        assert last
        assert [tie.value for tie in last.ties] == [14, 30]
        assert allowances(case) == {"axles": number("0.33")}
    assert first.uniform is None
    assert uniform(second) == number("0.64") * lane


# AASHTO Standard Specifications, 17th edition


@pytest.mark.parametrize(("name", "variant"), [("HS20-44", "design"), ("H20-44", "")])
def test_lane_load_of_hs20_and_h20(name: str, variant: str) -> None:
    definition = load("hs20-lane")
    line, moment, shear = numbers(PUBLISHED["hs20-lane"]["published"])
    second = Fraction(definition["second_concentrated_for_negative_moment"])
    found = cases(name, variant)
    assert list(found) == [
        "truck",
        "lane load for moment",
        "lane load for negative moment",
        "lane load for shear",
    ]
    truck, *lanes = found.values()
    assert (truck.uniform, truck.concentrated, truck.applies) == (None, (), ())  # never together
    assert [uniform(case) for case in lanes] == [line] * 3
    assert [[force.value for force in case.concentrated] for case in lanes] == [
        [moment],
        [moment, second],
        [shear],
    ]
    assert [case.applies for case in lanes] == [
        (ONLY_MOMENTS,),
        (Applies(("moment",), -1), Applies(("moment reaction",))),
        (ONLY_SHEARS,),
    ]


@pytest.mark.parametrize(
    ("length", "impact"),
    [("20", "0.3"), ("41.6", "0.3"), ("75", "0.25"), ("125", "0.2"), ("375", "0.1")],
)
@pytest.mark.parametrize(
    ("name", "variant"), [("HS20-44", "with military loading"), ("H20-44", "")]
)
def test_impact_of_hs20(name: str, variant: str, length: str, impact: str) -> None:
    over, beside, most = numbers(PUBLISHED["hs20-impact"]["published"])
    for case in cases(name, variant, length).values():
        parts: list[Part] = ["axles"] if case.trains else ["axles", "uniform"]
        assert allowances(case) == dict.fromkeys(parts, number(impact))
        given = case.allowances[0][1]
        assert given.rule
        assert given.rule.over
        assert given.rule.beside
        assert given.rule.most
        stated = (given.rule.over, given.rule.beside, given.rule.most)
        assert [one.value for one in stated] == [over, beside, most]


def test_classes_of_hs20_and_h20() -> None:
    (three_quarters,) = numbers(PUBLISHED["h15-scale"]["published"])
    assert list(read_model("HS20-44").scales) == [three_quarters, Fraction(1), number("1.25")]
    tens = number("0.5")  # the note of h15-scale
    assert list(read_model("H20-44").scales) == [tens, three_quarters, Fraction(1)]


# AREMA, chapter 15


def test_cooper_e80_trails_its_load_and_halves_for_a_rail() -> None:
    definition = load("e80-train")
    track, rail = cases("Cooper E80", "track"), cases("Cooper E80", "rail")
    assert track["E80"].trains[0].strips == (
        Strip(
            Given(Fraction(definition["gap_to_udl"]), "Cooper E80.trains[0].trailing[0].behind"),
            None,
            Given(Fraction(definition["trailing_udl"]), "Cooper E80.trains[0].trailing[0].load"),
        ),
    )
    assert track["alternate load"].trains[0].strips == ()
    assert [case.factor for case in track.values()] == [1, 1]
    assert [case.factor for case in rail.values()] == [number("0.5")] * 2
    assert {case.relieving for case in track.values()} == {"count"}
    assert read_model("Cooper E80").standard("rail").per == "rail"
    assert read_model("Cooper E80").standard("track").per == "track"


@pytest.mark.parametrize(
    ("length", "impact"),
    [("10", "0.398125"), ("40", "0.37"), ("80", "0.28"), ("90", "0.26"), ("130", "0.22")],
)
def test_impact_of_cooper_e80(length: str, impact: str) -> None:
    start, far, over, beside, bound = numbers(PUBLISHED["e80-impact"]["published"])
    span = Fraction(length)
    percent = start - 3 * span**2 / 1600 if span < bound else far + over / (span - beside)
    assert percent / 100 == number(impact)
    train, alternate = cases("Cooper E80", "track", length).values()
    assert allowances(train) == {"axles": number(impact), "trailing": number(impact)}
    assert allowances(alternate) == {"axles": number(impact)}


# EN 1991-2


def test_lm1_a_lane_of_three_metres() -> None:
    definition = load("lm1")
    width, spacing = Fraction(definition["lane_width"]), Fraction(definition["axle_spacing"])
    assert [one.name for one in read_model("LM1").variants] == [
        "lane 1",
        "lane 2",
        "lane 3",
        "other lanes",
    ]
    given = zip(
        ("lane 1", "lane 2", "lane 3", "other lanes"),
        numbers(definition["tandem_axle"]),
        numbers(definition["udl_kN_m2"]),
        strict=True,
    )
    for variant, axle, area in given:
        (case,) = cases("LM1", variant).values()
        assert uniform(case) == area * width
        assert case.allowances == ()  # amplification included
        if axle:
            (train,) = case.trains
            assert [one.weight.value for one in train.axles] == [axle, axle]
            assert [gap.least for gap in gaps(case)] == [spacing]
        else:
            assert case.trains == ()
            assert uniform(case) == Fraction(definition["remaining_area_kN_m2"]) * width


def test_lm71_takes_its_uniform_load_in_parts_on_both_sides() -> None:
    definition = load("lm71")
    (case,) = cases("LM71").values()
    (train,) = case.trains
    assert [strip.ahead for strip in train.strips] == [True, False]
    for strip in train.strips:
        assert strip.start.value == Fraction(definition["udl_starts_from_outer_axle"])
        assert strip.intensity == Fraction(definition["udl"])
        assert strip.length is None
        assert strip.broken
    assert case.relieving == "neglect"  # 6.8.1
    classes = "0.75 0.83 0.91 1.00 1.10 1.21 1.33 1.46"  # 6.3.2(3), the rules of lm71
    assert classes in PUBLISHED["lm71"]["rules"][1]
    for name in ("LM71", "SW/0"):
        assert read_model(name).scales == tuple(map(Fraction, classes.split()))


@pytest.mark.parametrize(("name", "model"), [("sw0", "SW/0"), ("sw2", "SW/2")])
def test_sw_two_lengths_with_a_gap(name: str, model: str) -> None:
    intensity, length, between = numbers(PUBLISHED[name]["published"])
    (case,) = cases(model).values()
    (train,) = case.trains
    (foremost,) = train.axles
    assert (foremost.weight, foremost.gap, foremost.acts) == (Given(Fraction(0), ""), None, False)
    first, second = train.strips
    for strip in (first, second):
        assert strip.length
        assert (strip.intensity, strip.length.value) == (intensity, length)
        assert (strip.ahead, strip.broken) == (False, False)
    assert [first.start.value, second.start.value] == [Fraction(0), length + between]
    assert read_model(model).needs == ("continuous" if name == "sw0" else "")


def test_sw2_takes_no_class() -> None:  # the rules of sw2
    assert list(read_model("SW/2").scales) == [Fraction(1)]


def test_unloaded_train() -> None:
    (case,) = cases("unloaded train").values()
    assert [uniform(case)] == numbers(PUBLISHED["unloaded-train"]["published"])
    assert case.trains == ()


# CSA S6


@pytest.mark.parametrize("name", ["CL-625", "CL-625-ONT"])
def test_cl625_allowance_goes_by_the_axles_that_act(name: str) -> None:
    _joint, one, two, more = numbers(PUBLISHED["cl625-dla"]["published"])
    for case in cases(name).values():
        acting = [number for number, axle in enumerate(case.axles, 1) if axle.acts]
        if case.name == "lane load":
            assert allowances(case) == {}
            continue
        assert allowances(case) == {"axles": {1: one, 2: two}.get(
            len(acting), two if acting == [1, 2, 3] else more
        )}  # fmt: skip
        assert case.relieving == ("neglect" if len(acting) == 5 else "count")


@pytest.mark.parametrize("name", ["CL-625", "CL-625-ONT"])
def test_cl625_every_pair_of_axles_and_the_heaviest_alone(name: str) -> None:
    found = cases(name)
    sets = [
        [number for number, axle in enumerate(case.axles, 1) if axle.acts]
        for case in found.values()
        if case.uniform is None
    ]
    pairs = [[a, b] for a in range(1, 6) for b in range(a + 1, 6)]
    assert sets == [[4], *pairs, [1, 2, 3], [1, 2, 3, 4, 5]]
    weights = [axle.weight.value for axle in found["truck, three axles or more"].axles]
    assert max(weights) == weights[3]


@pytest.mark.parametrize("name", ["CL-625", "CL-625-ONT"])
def test_cl625_lane_load(name: str) -> None:
    part, line, _width = numbers(PUBLISHED["cl625-lane"]["published"])
    found = cases(name)
    lane, truck = found["lane load"], found["truck, three axles or more"]
    assert [axle.weight.value for axle in lane.axles] == [
        axle.weight.value * part for axle in truck.axles
    ]
    assert [axle.gap.least for axle in lane.axles if axle.gap] == [
        axle.gap.least for axle in truck.axles if axle.gap
    ]
    assert uniform(lane) == line
    assert lane.relieving == "neglect"  # the rules of cl625-truck
    levels = [Fraction(level, 625) for level in (625, 700, 750, 800)]
    assert list(read_model(name).scales) == levels


# AS 5100.2


def test_m1600_s1600_and_a160() -> None:
    alone = load("as5100-dla")
    whole, group = cases("M1600", "design").values()
    assert uniform(whole) == uniform(group) == Fraction(load("m1600")["udl"])
    moving, tri_axle = Fraction(alone["M1600"]), Fraction(alone["M1600_triaxle"])
    assert allowances(whole) == {"axles": moving, "uniform": moving}
    assert allowances(group) == {"axles": tri_axle, "uniform": tri_axle}
    assert list(cases("M1600", "tri-axle").values()) == [group]
    assert [axle.weight.value for axle in group.axles] == [120, 120, 120]
    assert [gap.least for gap in gaps(group)] == [number("1.25")] * 2
    (standing,) = cases("S1600").values()
    assert uniform(standing) == Fraction(load("s1600")["udl"])
    assert allowances(standing) == {}
    assert alone["S1600"] == 0
    (single,) = cases("A160").values()
    assert allowances(single) == {"axles": Fraction(alone["A160"])}


# IRC 6


def test_irc_vehicles_follow_one_another() -> None:
    for model, called, name, key in (
        ("IRC Class A", "vehicles in line", "irc-classA", "min_gap_nose_to_tail"),
        ("IRC 70R", "wheeled vehicles in line", "irc-70R-wheeled", "min_gap"),
    ):
        case = cases(model, "concrete")[called]
        between = Fraction(load(name)[key])
        assert len(case.trains) == 3
        assert [(gap.least, gap.greatest, gap.free) for gap in case.gaps] == [
            (between, None, True)
        ] * 2
        inside = sum(gap.least for gap in gaps(case))
        longest = read_model(model).longest
        assert longest
        assert longest < 3 * between + 2 * inside


def test_irc_70r_tracked() -> None:
    total, length = numbers(PUBLISHED["irc-70R-tracked"]["published"])
    case = cases("IRC 70R", "steel")["tracked vehicles in line"]
    for train in case.trains:
        (strip,) = train.strips
        assert strip.length
        assert [strip.start.value, strip.length.value] == [Fraction(0), length]
        assert strip.intensity == total / length
        assert not strip.broken
    assert [gap.least for gap in case.gaps] == [length + 30] * 2  # the rules of irc-70R-tracked
    longest = read_model("IRC 70R").longest
    assert longest
    assert longest < 3 * 30 + 2 * length


@pytest.mark.parametrize(
    ("variant", "length", "impact"),
    [
        # 208.2: 4.5 / (6 + L) from 3 m to 45 m, then 0.088; 9 / (13.5 + L), 0.545 and 0.154
        ("concrete", "1", "0.5"),
        ("concrete", "3", "0.5"),
        ("concrete", "12", "0.25"),
        ("concrete", "30", "0.125"),
        ("concrete", "60", "0.088"),
        ("steel", "3", "0.545"),
        ("steel", "16.5", "0.3"),
        ("steel", "31.5", "0.2"),
        ("steel", "60", "0.154"),
    ],
)
def test_impact_of_irc_class_a(variant: str, length: str, impact: str) -> None:
    (case,) = cases("IRC Class A", variant, length).values()
    assert allowances(case) == {"axles": number(impact)}


def test_impact_of_irc_class_a_has_the_published_constants() -> None:
    stated = []
    for variant in ("concrete", "steel"):
        (case,) = cases("IRC Class A", variant).values()
        rule = case.allowances[0][1].rule
        assert rule
        assert rule.over
        assert rule.beside
        stated += [rule.over.value, rule.beside.value]
    assert stated == numbers(PUBLISHED["irc-impact-classA"]["published"])


@pytest.mark.parametrize(
    ("variant", "length", "wheeled", "tracked"),
    [
        # 208.3, and beyond its bounds the curve of 208.2
        ("concrete", "4", "0.25", "0.25"),
        ("concrete", "5", "0.25", "0.25"),
        ("concrete", "7", "0.25", "0.175"),
        ("concrete", "9", "0.25", "0.1"),
        ("concrete", "12", "0.25", "0.1"),
        ("concrete", "30", "0.125", "0.1"),
        ("concrete", "44", "0.09", "0.09"),
        ("concrete", "60", "0.088", "0.088"),
        ("steel", "5", "0.25", "0.25"),
        ("steel", "7", "0.25", "0.175"),
        ("steel", "23", "0.25", "0.1"),
        ("steel", "31.5", "0.2", "0.1"),
        ("steel", "60", "0.154", "0.1"),
    ],
)
def test_impact_of_irc_70r(variant: str, length: str, wheeled: str, tracked: str) -> None:
    found = cases("IRC 70R", variant, length)
    assert allowances(found["wheeled vehicles in line"]) == {"axles": number(wheeled)}
    assert allowances(found["bogie"]) == {"axles": number(wheeled)}
    assert allowances(found["tracked vehicles in line"]) == {"trailing": number(tracked)}


# BS 5400-2


@pytest.mark.parametrize("units", ["45", "40", "37.5", "35", "30", "25"])
def test_hb_is_ten_kilonewtons_an_axle_and_unit(units: str) -> None:  # the rules of hb-45
    (case,) = cases("HB", f"{units} units").values()
    assert [axle.weight.value * case.factor for axle in case.axles] == [10 * number(units)] * 4
    assert (case.relieving, case.allowances, case.uniform) == ("count", (), None)


# JTG D60


@pytest.mark.parametrize(
    ("length", "force"),
    [("2", 270), ("5", 270), ("20", 300), ("35", 330), ("50", 360), ("80", 360)],
)
def test_jtg_lane(length: str, force: int) -> None:
    line, least, most, shear = numbers(PUBLISHED["jtg-class-I-lane"]["published"])
    assert force == min(max(2 * (number(length) + 130), least), most)
    first, second = cases("JTG class I lane", "", length).values()
    assert uniform(first) == uniform(second) == line
    assert [one.value for one in first.concentrated] == [force]
    assert [one.value for one in second.concentrated] == [force * shear]
    assert (first.applies, second.applies) == ((ONLY_MOMENTS,), (ONLY_SHEARS,))


# New Zealand


def test_nz_hn_and_ho() -> None:
    (normal,), (heavy,) = cases("NZ HN").values(), cases("NZ HO").values()
    assert uniform(normal) == uniform(heavy) == Fraction(load("nz-hn")["udl"])
    assert "240 kN" in PUBLISHED["nz-hn"]["rules"][0]
    assert [axle.weight.value for axle in heavy.axles] == [240, 240]
    assert [gap.least for gap in gaps(heavy)] == [5]
    for case in (normal, heavy):
        assert allowances(case) == {"axles": number("0.3"), "uniform": number("0.3")}  # 3.2.5


# Sources


@pytest.mark.parametrize("name", model_names())
def test_only_what_was_seen_whole_is_from_a_page(name: str) -> None:
    model = read_model(name)
    assert model.seen == ("page" if name in ("LM1", "LM2") else "memory")
    if model.seen == "page":
        assert PUBLISHED[name.lower()]["seen"] == "page"


@pytest.mark.parametrize("name", AXLES)
def test_the_standard_is_the_published_source(name: str) -> None:
    model, source = read_model(AXLES[name][0]), PUBLISHED[name]["source"]
    assert source["title"].startswith(model.title.split(" (AASHTO")[0])
    assert str(source["year"]) in model.edition
