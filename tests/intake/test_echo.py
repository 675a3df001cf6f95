"""The data echo: a row for every value of the file and every default, each once."""

from __future__ import annotations

import tomllib
from collections.abc import Iterator
from typing import Any

from intake_samples import LOADS, SHORT, SI, SPRUNG, US, changed

from calcpack.intake import read
from calcpack.model.fields import FIELDS, pattern_of
from calcpack.model.request import Entry


def leaves(value: Any, path: str = "") -> Iterator[str]:
    if isinstance(value, dict):
        for key, item in value.items():
            yield from leaves(item, f"{path}.{key}" if path else key)
    elif isinstance(value, list):
        for index, item in enumerate(value):
            yield from leaves(item, f"{path}[{index}]")
    else:
        yield path


def rows(text: str) -> dict[str, Entry]:
    return {entry.path: entry for entry in read(text.encode()).echo}


def test_every_value_typed_has_one_row() -> None:
    for text in (US, SI, SHORT, SPRUNG, LOADS):
        echo = read(text.encode()).echo
        entered = [entry.path for entry in echo if entry.entered]
        typed = {path for path in leaves(tomllib.loads(text)) if not path.startswith("effects")}
        effects = len(tomllib.loads(text).get("effects", []))
        assert len(entered) == len(set(entered)) == len(typed) + effects
        assert set(entered) == typed | {f"effects[{index}]" for index in range(effects)}


def test_rows_follow_the_field_table() -> None:
    order = list(FIELDS)
    for text in (US, SI, SPRUNG, LOADS):
        heads = [entry.path.partition(".")[0].partition("[")[0] for entry in rows(text).values()]
        places = [order.index(head) for head in heads]
        assert places == sorted(places)
        assert len(set(heads)) > 5


def test_values_are_shown_as_typed_with_what_a_quantity_comes_to() -> None:
    echo = rows(US)
    assert echo["beam.length"] == Entry("beam.length", "Length", "100.0", "ft", True)
    assert echo["beam.sections[0].at"].said == "12 ft 6 in = 12.5"
    assert echo["moving[0].axles[1].weight"].said == "38 kip = 38"
    assert echo["moving[0].uniform"].unit == "kip/ft"
    assert echo["beam.releases[1].at"].said == "6_2.0"
    assert echo["assumptions[0].open"].said == "false"
    assert echo["cover.prepared.on"].said == "2026-04-07"
    assert echo["cover.checked.by"].said == ""
    metres = changed(US, ('"12 ft 6 in"', '"3 m"'))
    assert rows(metres)["beam.sections[0].at"].said == "3 m = 1250/127 ≈ 9.8425"


def test_an_effect_is_one_row() -> None:
    assert [entry.said for path, entry in rows(US).items() if path.startswith("effects")] == [
        "moment, shear at mid, B, 20 ft, 10 m = 12500/381 ≈ 32.8084 ft; every equation",
        "reaction at supports",
    ]
    left = changed(US, ('at = "supports"', 'at = "C"\nside = "left"'))
    assert rows(left)["effects[1]"].said == "reaction at C, left face"


def test_defaults_are_told_from_what_was_entered() -> None:
    defaults = {path: entry.said for path, entry in rows(SI).items() if not entry.entered}
    assert defaults == {
        "package.status": "For review",
        "package.detail": "every equation",
        "beam.overhang_right": "0",
        "effects": "every reaction and moment reaction; moment and shear at each section",
        "moving[0].heading": "both",
        "moving[0].relieving": "count",
        "moving[0].allowance": "0",
        "moving[0].distribution": "1",
        "moving[1].uniform": "0",
        "moving[1].heading": "both",
        "moving[1].relieving": "count",
        "moving[1].allowance": "0",
        "moving[1].distribution": "1",
    }
    assert not [entry for entry in read(US.encode()).echo if not entry.entered]


def test_of_a_spring_what_it_does_not_hold_is_a_default() -> None:
    echo = rows(SPRUNG)
    assert echo["beam.supports[1].vertical"].said == "900.5"
    assert echo["beam.supports[1].rotational"] == Entry(
        "beam.supports[1].rotational", "Rotational spring", "0", "kip·ft/rad", False
    )
    assert "beam.supports[0].vertical" not in echo
    assert echo["beam.supports[2].vertical"].said == "50 kip/in = 600"


def test_stiffness_and_settlements_have_their_units() -> None:
    echo = rows(SPRUNG)
    for path, said, unit in (
        ("beam.stiffness[0].EI", "2.5e6", "kip·ft²"),
        ("beam.stiffness[1].E", "29000", "ksi"),
        ("beam.stiffness[1].I", "13500 in4 = 13500", "in⁴"),
        ("beam.redundants[1]", "moment C left", ""),
        ("permanent[0].settlements[0].at", "B", ""),
        ("permanent[0].settlements[0].down", "0.5", "in"),
        ("permanent[0].settlements[1].turn", "-2 mrad = -0.002", "rad"),
        ("permanent[1].settlements[0].at", "80", "ft"),
    ):
        assert (echo[path].said, echo[path].unit) == (said, unit)


def test_loads_of_every_form_have_their_labels_and_units() -> None:
    echo = rows(LOADS)
    for path, label, said, unit in (
        ("trains[0].name", "Train", "Tug", ""),
        ("trains[0].axles[1].weight", "Axle weight", "40 kip = 40", "kip"),
        ("trains[0].axles[1].spacing[0]", "Axle spacing", "12.5", "ft"),
        ("trains[0].axles[1].spacing[1]", "Axle spacing", "20 ft = 20", "ft"),
        ("trains[1].axles[1].spacing", "Axle spacing", "4", "ft"),
        ("moving[0].axles[1].spacing.list[2]", "Axle spacing, one of", "16 ft = 16", "ft"),
        ("moving[0].axles[2].spacing.least", "Axle spacing, at least", "15", "ft"),
        ("moving[0].allowance[0].of", "Part with allowance", "axles", ""),
        ("moving[0].allowance[0].value", "Dynamic allowance", "0.33", ""),
        ("moving[0].allowance[0].source", "Source of the allowance", "Permit policy, 4.2", ""),
        ("moving[0].distribution[0].kind[1]", "Kind of effect", "shear", ""),
        ("moving[0].distribution[0].from", "Start of the stretch", "A", ""),
        ("moving[0].distribution[0].to", "End of the stretch", "70", "ft"),
        ("moving[0].distribution[1].kind", "Kind of effect", "moment", ""),
        ("moving[0].distribution[2].value", "Distribution", "0.8", ""),
        ("moving[1].trains[1]", "Train", "Trailer", ""),
        ("moving[1].spacing.list[1]", "Spacing of trains, one of", "40 ft = 40", "ft"),
        ("moving[1].trailing[0].behind", "Distance behind the last axle", "10", "ft"),
        ("moving[1].trailing[0].load", "Trailing load", "0.64", "kip/ft"),
        ("moving[1].trailing[1].ahead", "Distance ahead of the lead axle", "5 ft = 5", "ft"),
        ("moving[1].trailing[1].weight", "Whole trailing load", "20", "kip"),
        ("moving[1].trailing[1].length", "Length of the trailing load", "8", "ft"),
        ("moving[2].scale", "Scale of the model", "1.1", ""),
        ("moving[2].hogging[0].from", "Start of hogging", "35", "ft"),
        ("moving[2].hogging[0].to", "End of hogging", "C", ""),
        ("moving[3].length", "Length for the model's rules", "50 ft = 50", "ft"),
    ):
        assert echo[path] == Entry(path, label, said, unit, True)


def test_of_a_published_model_nothing_is_a_default_that_the_model_states() -> None:
    defaults = {path: entry.said for path, entry in rows(LOADS).items() if not entry.entered}
    assert {path: said for path, said in defaults.items() if path.startswith("moving")} == {
        "moving[1].uniform": "0",
        "moving[1].trailing[0].extent": "unbroken",
        "moving[1].heading": "both",
        "moving[1].relieving": "count",
        "moving[1].allowance": "0",
        "moving[1].distribution": "1",
        "moving[2].distribution": "1",
        "moving[3].distribution": "1",
        "moving[4].distribution": "1",
    }
    assert "moving[2].allowance" not in read(LOADS.encode()).inputs


def test_labels_and_units_are_those_of_the_fields() -> None:
    for path, entry in rows(US).items():
        if not path.startswith("effects"):
            assert entry.label == FIELDS[pattern_of(path).removesuffix("[]")].label
    units = {entry.unit for entry in rows(US).values()}
    assert units == {"", "ft", "kip", "kip/ft"}
    assert {entry.unit for entry in rows(SI).values()} == {"", "m", "kN", "kN/m"}
