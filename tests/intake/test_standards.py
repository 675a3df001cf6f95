"""Files of load models: what they say is built as it stands, and nothing in them is passed over."""

from __future__ import annotations

import copy
import re
import tomllib
from collections.abc import Callable, Iterator, Mapping
from decimal import Decimal
from fractions import Fraction
from importlib.resources import files
from typing import Any

import pytest
from intake_samples import givens

from calcpack.errors import ProgramFault
from calcpack.intake.cases import spread_cases
from calcpack.intake.standards import (
    Model,
    cases_of,
    model_from,
    model_names,
    read_model,
)
from calcpack.model.loads import Axle, Case, Gap, Given, Rule, Strip, Train

LENGTH = Given(Fraction(20), "moving[0].length")
ROOT = "the model"

VARIANTS = [
    (name, variant)
    for name in model_names()
    for variant in [one.name for one in read_model(name).variants] or [""]
]


def stands_at(document: Mapping[str, Any], path: str) -> Any:
    """What stands at a path of a file; of an entry with a value, that."""
    found: Any = document
    for key, index in re.findall(r"(\w+)|\[(\d+)\]", path):
        found = found[key] if key else found[int(index)]
    return found["value"] if isinstance(found, dict) else found


@pytest.mark.parametrize(("name", "variant"), VARIANTS)
def test_every_number_is_found_by_its_path(name: str, variant: str) -> None:
    model = read_model(name)
    cases, numbers = cases_of(model, variant, ROOT, LENGTH)
    cited = {one for one in givens(cases) if one.path.startswith(ROOT)}
    assert cited
    for one in cited:
        if one.rule is None:
            assert numbers[one.path] == one.value
        else:
            assert one.path not in numbers
            assert one.rule.length is LENGTH
            assert one.value == one.rule.value
    for path, value in numbers.items():
        assert Fraction(stands_at(model.document, path.removeprefix(f"{ROOT}."))) == value
    others = {one for one in givens(cases) if not one.path.startswith(ROOT)}
    assert others <= {LENGTH, Given(Fraction(0), "")}


@pytest.mark.parametrize(("name", "variant"), VARIANTS)
def test_a_length_is_needed_only_where_a_rule_is(name: str, variant: str) -> None:
    model = read_model(name)
    rules = [one for one in givens(cases_of(model, variant, name, LENGTH)[0]) if one.rule]
    assert bool(rules) == model.needs_length
    if model.needs_length:
        with pytest.raises(ProgramFault, match="a length is needed"):
            cases_of(model, variant, name)
    else:
        assert cases_of(model, variant, name)[0] == cases_of(model, variant, name, LENGTH)[0]


@pytest.mark.parametrize("length", ["1", "4.99", "12", "80", "80.01", "400"])
@pytest.mark.parametrize(("name", "variant"), VARIANTS)
def test_rules_give_sense_at_any_length(name: str, variant: str, length: str) -> None:
    given = Given(Fraction(length), "moving[0].length")
    for case in cases_of(read_model(name), variant, name, given)[0]:
        for _, allowance in case.allowances:
            assert 0 <= allowance.value <= Fraction("0.6")
        assert all(force.value > 0 for force in case.concentrated)


@pytest.mark.parametrize("name", model_names())
def test_a_file_is_named_as_its_model(name: str) -> None:
    folder = files("calcpack").joinpath("standards")
    file = folder.joinpath(f"{name.replace(' ', '_').replace('/', '-')}.toml")
    assert f'name = "{name}"' in file.read_text("utf-8")


@pytest.mark.parametrize("name", model_names())
def test_what_is_left_to_the_engineer_is_said_with_its_clause(name: str) -> None:
    model = read_model(name)
    assert model.notes
    assert all(": " in note and note.endswith(".") for note in model.notes)
    assert read_model(name) is model
    standard = model.standard(model.variants[0].name if model.variants else "", "by A. Preparer")
    assert (standard.name, standard.title, standard.notes) == (name, model.title, model.notes)
    assert standard.settled


def test_the_readme_names_every_key() -> None:
    readme = files("calcpack").joinpath("standards/README.md").read_text("utf-8")

    def keys(value: Any) -> Iterator[str]:
        if isinstance(value, dict):
            for key, item in value.items():
                yield key
                yield from keys(item)
        elif isinstance(value, list):
            for item in value:
                yield from keys(item)

    used = {key for name in model_names() for key in keys(read_model(name).document)}
    assert len(used) > 40
    assert {key for key in used if not re.search(rf"\b{key}\b", readme)} == set()


def test_the_example_of_the_readme_is_a_model() -> None:
    readme = files("calcpack").joinpath("standards/README.md").read_text("utf-8")
    example = readme.partition("```toml\n")[2].partition("```")[0]
    model = model_from(tomllib.loads(example, parse_float=Decimal))
    cases, _ = cases_of(model, "wheel", "Example", LENGTH)
    assert [(case.name, case.factor) for case in cases] == [
        ("two trucks", Fraction("0.45")),
        ("line load", Fraction("0.5")),
    ]
    assert (model.longest, model.needs) == (Fraction(90), "continuous")


def test_a_model_or_a_variant_that_is_not_there() -> None:
    with pytest.raises(ProgramFault, match="HL-94: no such load model"):
        read_model("HL-94")
    with pytest.raises(ProgramFault, match="HL-93: no variant 'desing'"):
        cases_of(read_model("HL-93"), "desing", "HL-93")
    with pytest.raises(ProgramFault, match="HL-93: no variant ''"):
        cases_of(read_model("HL-93"), "", "HL-93")
    with pytest.raises(ProgramFault, match="LM2: no variant 'lane 1'"):
        cases_of(read_model("LM2"), "lane 1", "LM2")


def test_acting_axles_keep_their_places() -> None:
    cases, _ = cases_of(read_model("CL-625"), "", "CL-625")
    by_name = {case.name: case for case in cases}
    pair = by_name["truck, two axles: axles 2 and 4"]
    whole = by_name["truck, three axles or more"]
    assert [axle.acts for axle in pair.axles] == [False, True, False, True, False]
    assert [axle.gap for axle in pair.axles] == [axle.gap for axle in whole.axles]
    assert "truck, one axle: axle 4" in by_name
    assert "truck, first three axles: axles 1, 2 and 3" in by_name


SPECIMEN: dict[str, Any] = {
    "format": 1,
    "name": "Specimen",
    "title": "Standard",
    "edition": "1",
    "clause": "1",
    "seen": "page",
    "units": "SI",
    "per": "lane",
    "variants": [{"name": "a", "says": "one"}, {"name": "b", "says": "other"}],
    "trains": [
        {
            "name": "truck",
            "axles": [{"weight": 10}, {"weight": 20, "spacing": [2, 5]}],
            "trailing": [{"behind": 1, "load": 3, "extent": "unbroken"}],
        },
    ],
    "cases": [
        {
            "name": "truck",
            "clause": "1",
            "trains": ["truck"],
            "allowance": [
                {"of": "axles", "clause": "2", "pieces": [{"up_to": 9, "constant": 1}, {"over": 3}]}
            ],
        },
    ],
}
"""A file of a model that is as it must be."""


def specimen(change: Callable[[Any], object] = lambda document: None) -> Model:
    document = copy.deepcopy(SPECIMEN)
    change(document)
    return model_from(document)


def test_the_specimen_is_accepted() -> None:
    model = specimen()
    (case,), numbers = cases_of(model, "b", "Specimen", Given(Fraction(12), "length"))
    given = case.allowances[0][1]
    piece = Given(Fraction(3), "Specimen.cases[0].allowance[0].pieces[1].over")
    rule = Rule(Given(Fraction(12), "length"), over=piece)
    assert given == Given(Fraction(1, 4), "Specimen.cases[0].allowance[0]", rule)
    assert numbers["Specimen.cases[0].allowance[0].pieces[0].up_to"] == 9
    at_the_end, _ = cases_of(model, "b", "Specimen", Given(Fraction(9), "length"))
    assert at_the_end[0].allowances[0][1].value == 1


def test_trains_act_all_or_none_in_a_file() -> None:
    model = specimen(lambda d: d["cases"][0].update(relieving="whole train"))
    cases, _ = cases_of(model, "a", "Specimen", LENGTH)
    assert [case.name for case in cases] == ["truck", "truck, without its axles"]
    assert [[axle.acts for axle in case.axles] for case in cases] == [[True, True], [False, False]]
    assert {case.relieving for case in cases} == {"count"}


def axle(document: Any) -> Any:
    return document["trains"][0]["axles"][1]


def strip(document: Any) -> Any:
    return document["trains"][0]["trailing"][0]


def case(document: Any) -> Any:
    return document["cases"][0]


def allowance(document: Any) -> Any:
    return document["cases"][0]["allowance"][0]


FAULTS: list[tuple[Callable[[Any], object], str]] = [
    (lambda d: d.update(colour="red"), "Specimen.colour: no known key"),
    (lambda d: d.pop("title"), "Specimen.title: must be given"),
    (lambda d: d.update(format=2), "Specimen.format: must be 1"),
    (lambda d: d.update(seen="hearsay"), "Specimen.seen: must be one of page, memory"),
    (lambda d: d.update(per=""), "Specimen.per: must be a text"),
    (lambda d: d.update(scales=1), "Specimen.scales: must be a list"),
    (lambda d: d.update(scales=[]), "Specimen.scales: must not be empty"),
    (lambda d: d.update(scales=["1"]), "Specimen.scales[0]: must be a number"),
    (lambda d: d.update(scales=[0]), "Specimen.scales: must be above 0"),
    (lambda d: d.update(notes=["left"]), "Specimen.notes[0]: must be a table"),
    (lambda d: d.update(needs={"beam": "long", "clause": "1"}), "Specimen.needs.beam: must be one"),
    (lambda d: d["variants"][1].update(name="a"), "Specimen.variants: must differ"),
    (lambda d: axle(d).update(width=2), "Specimen.trains[0].axles[1].width: no known key"),
    (lambda d: axle(d).pop("spacing"), "Specimen.trains[0].axles[1].spacing: must be given"),
    (lambda d: axle(d).update(spacing=0), "Specimen.trains[0].axles[1].spacing: must be above 0"),
    (lambda d: axle(d).update(spacing=[5, 2]), "Specimen.trains[0].axles[1].spacing: must rise"),
    (lambda d: axle(d).update(spacing=[1, 2, 3]), "axles[1].spacing: must be the least and"),
    (lambda d: axle(d).update(spacing={"most": 3}), "axles[1].spacing.most: no known key"),
    (lambda d: axle(d).update(spacing={}), "axles[1].spacing: must be a list or a least one"),
    (lambda d: axle(d).update(weight=True), "axles[1].weight: must be a number"),
    (lambda d: axle(d).update(weight=-1), "axles[1].weight: must be above 0"),
    (lambda d: strip(d).update(ahead=1), "trailing[0]: must start behind or ahead"),
    (lambda d: strip(d).update(behind=-1), "trailing[0].behind: must be at least 0"),
    (lambda d: strip(d).pop("load"), "trailing[0]: must have a load or a weight"),
    (lambda d: (strip(d).pop("load"), strip(d).update(weight=1)), "must have a length for its"),
    (lambda d: strip(d).pop("extent"), "trailing[0].extent: must be given"),
    (lambda d: d["trains"].append({"name": "car", "axles": [{"weight": 1}]}), "is in no case"),
    (lambda d: d["trains"].append(d["trains"][0]), "Specimen.trains: must differ"),
    (lambda d: case(d).update(trains=["lorry"]), "Specimen.cases[0].trains: no train 'lorry'"),
    (lambda d: case(d).update(spacing=3), "cases[0].spacing: must be given between trains, and"),
    (
        lambda d: case(d).update(trains=["truck", "truck"]),
        "cases[0].spacing: must be given between",
    ),
    (lambda d: case(d).update(variant="c"), "cases[0].variant: no variant 'c'"),
    (lambda d: case(d).update(variant="a"), "Specimen.cases: none for variant 'b'"),
    (lambda d: d["cases"].append(d["cases"][0]), "Specimen.cases: must differ"),
    (lambda d: case(d).update(acting=[[3]]), "cases[0].acting: no axle 3"),
    (lambda d: case(d).update(acting=[[1, 1]]), "cases[0].acting: must be different axles"),
    (lambda d: case(d).update(acting=[[0]]), "cases[0].acting[0]: must be a whole number from 1"),
    (lambda d: case(d).update(acting=[1]), "cases[0].acting[0]: must be a list"),
    (lambda d: case(d).update(uniform=0), "cases[0].uniform: must be above 0"),
    (lambda d: case(d).update(uniform={"beside": 1}), "cases[0].uniform: must have a term"),
    (lambda d: case(d).update(concentrated=[{"constant": -1}]), "concentrated[0]: must be above 0"),
    (
        lambda d: case(d).update(factors=[{"value": 0, "clause": "1"}]),
        "factors[0]: must be above 0",
    ),
    (lambda d: case(d).update(only=[{"kind": "torsion"}]), "only[0].kind: must be one of reaction"),
    (lambda d: case(d).update(heading=["left"]), "cases[0].heading: must be one"),
    (lambda d: allowance(d).update(of="wheels"), "allowance[0].of: must be one of axles, trailing"),
    (lambda d: allowance(d).update(of=["axles", "axles"]), "cases[0].allowance: must differ"),
    (lambda d: allowance(d).update(value=1), "allowance[0]: must be a value or a rule"),
    (lambda d: allowance(d).update(most=1), "allowance[0]: must be in pieces or in one"),
    (lambda d: allowance(d)["pieces"].pop(), "allowance[0].pieces: must end at lengths that rise"),
    (lambda d: allowance(d)["pieces"].append({"over": 1}), "pieces: must end at lengths that rise"),
    (lambda d: allowance(d)["pieces"][0].update(beside=1), "beside: must be left out without over"),
]


@pytest.mark.parametrize(("change", "said"), FAULTS, ids=[said for _, said in FAULTS])
def test_a_file_that_is_not_as_it_must_be_is_a_fault_of_the_program(
    change: Callable[[Any], object], said: str
) -> None:
    with pytest.raises(ProgramFault, match=re.escape(said)):
        specimen(change)


def test_a_train_or_a_case_without_load() -> None:
    def bare(document: Any) -> None:
        document["trains"][0] = {"name": "truck"}

    with pytest.raises(ProgramFault, match=re.escape("trains[0]: must have axles or a trailing")):
        specimen(bare)
    with pytest.raises(ProgramFault, match=re.escape("cases[1]: must have a load")):
        specimen(lambda d: d["cases"].append({"name": "none", "clause": "1"}))


def given(value: int) -> Given:
    return Given(Fraction(value), "")


def train(name: str, strips: int = 0) -> Train:
    two = (Axle(given(1), None), Axle(given(1), Gap((given(2),))))
    return Train(name, two, (Strip(given(1), None, given(3)),) * strips)


def spread(*trains: Train, name: str = "") -> list[tuple[str, list[bool]]]:
    gaps = (Gap((given(5),)),) * (len(trains) - 1)
    found = tuple(spread_cases(Case(name, trains, gaps), True))
    return [(one.name, [any(axle.acts for axle in t.axles) for t in one.trains]) for one in found]


def test_one_train_alone_needs_no_other_case() -> None:
    assert spread(train("A")) == [("", [True])]
    case = Case("", (train("A", strips=1),))
    assert list(spread_cases(case, False)) == [case]


def test_a_strip_stays_where_its_axles_do_not_act() -> None:
    assert spread(train("A", strips=1), name="E") == [
        ("E", [True]),
        ("E, without its axles", [False]),
    ]


def test_each_of_several_trains_may_be_missing_but_not_all() -> None:
    assert spread(train("A"), train("B")) == [
        ("", [True, True]),
        ("without the axles of A", [False, True]),
        ("without the axles of B", [True, False]),
    ]
    assert len(spread(train("A"), train("B"), train("C"))) == 7
    assert len(spread(train("A"), train("B", strips=1), train("C"))) == 8


def test_trains_of_one_name_are_told_apart_by_their_numbers() -> None:
    names = [name for name, _ in spread(train("A"), train("A"), name="E")]
    assert names == ["E", "E, without the axles of train 1", "E, without the axles of train 2"]


def test_a_train_of_strips_alone_has_no_axles_to_leave_out() -> None:
    foremost = Axle(given(0), None, False)
    strips = Train("S", (foremost,), (Strip(given(0), given(15), given(133)),))
    assert spread(strips) == [("", [False])]
    assert spread(strips, train("A")) == [
        ("", [False, True]),
        ("without the axles of A", [False] * 2),
    ]


def test_a_rule_is_exact_and_kept_within_bounds() -> None:
    def rule(length: int, **terms: Any) -> Fraction:
        return Rule(given(length), **terms).value

    assert rule(3, constant=given(1), per_length=given(2), per_square=given(4)) == 43
    assert rule(3, over=given(1)) == Fraction(1, 3)
    assert rule(3, over=given(1), beside=given(4)) == Fraction(1, 7)
    assert rule(3, per_length=given(2), least=given(7)) == 7
    assert rule(3, per_length=given(2), most=given(5)) == 5
    assert rule(3, per_length=given(2), least=given(5), most=given(7)) == 6
