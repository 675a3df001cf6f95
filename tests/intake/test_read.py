"""Whole files, read: values against a second reading of the same text by the standard library."""

from __future__ import annotations

import tomllib
from datetime import date
from decimal import Decimal
from fractions import Fraction
from pathlib import Path
from typing import Any

import pytest
import rfc8785
from intake_samples import SHORT, SI, US, changed

from calcpack.errors import InputRefused
from calcpack.intake import read, read_file
from calcpack.model.beam import Beyond, Datum, Release, Support, Tenth, Typed
from calcpack.model.loads import Gap, Given, Share
from calcpack.model.request import Assumption, Revision, Signature

FOOT = Fraction(3048, 10000)  # metres, the international foot


def test_a_full_file_in_us_units() -> None:
    calculation = read(US.encode())
    cover = calculation.cover
    assert (cover.title, cover.number) == ("Girder G7 under a haul truck", "QP-S-021")
    assert (cover.project, cover.client) == ("Quarry Lane crossing", "Borough of Ashby")
    assert cover.prepared == Signature("P. Linden", date(2026, 4, 7))
    assert (cover.checked, cover.latest) == (Signature(), date(2026, 4, 9))
    assert cover.revisions == (Revision("A", date(2026, 4, 7), "First issue"),)
    assert calculation.assumptions == (
        Assumption("Bearings are taken as level.", "Drawing Q-3", False),
    )
    assert (calculation.package.status, calculation.package.paper) == ("For review", "letter")
    beam = calculation.beam
    assert (beam.length, beam.end) == (Fraction(100), Typed("beam.length"))
    assert beam.supports == (
        Support("A", Fraction(0), "pin", Typed("beam.supports[0].at"), path="beam.supports[0]"),
        Support("B", Fraction(30), "roller", Typed("beam.supports[1].at"), path="beam.supports[1]"),
        Support("C", Fraction(72), "roller", Typed("beam.supports[2].at"), path="beam.supports[2]"),
        Support(
            "D", Fraction(100), "roller", Typed("beam.supports[3].at"), path="beam.supports[3]"
        ),
    )
    assert beam.releases == (
        Release("h1", Fraction(85, 2), "hinge", Typed("beam.releases[0].at")),
        Release("h2", Fraction(62), "hinge", Typed("beam.releases[1].at")),
    )
    (load,) = calculation.moving
    (case,) = load.cases
    given = {one.path.removeprefix("moving[0]."): one.value for one in case.numbers}
    assert given == {
        "axles[0].weight": 17,
        "axles[1].weight": 38,
        "axles[1].spacing": Fraction(53, 4),
        "axles[2].weight": 38,
        "axles[2].spacing": Fraction(19, 4),
        "uniform": Fraction(1, 20),
        "allowance": Fraction(3, 10),
    }
    first, second, third = case.axles
    assert (first.gap, second.gap, third.gap and third.gap.fixed) == (
        None,
        Gap((Given(Fraction(53, 4), "moving[0].axles[1].spacing"),)),
        True,
    )
    assert (load.name, load.path, load.standard) == ("Haul truck", "moving[0]", None)
    assert (case.headings, case.relieving, case.name) == (("right",), "neglect", "")
    assert case.allowances == (("axles", Given(Fraction(3, 10), "moving[0].allowance")),)
    assert load.shares == (Share(Given(Fraction(13, 20), "moving[0].distribution")),)


def test_a_nameless_place_of_an_effect_becomes_a_nameless_section() -> None:
    sections = read(US.encode()).beam.sections
    ten_metres = 10 / FOOT
    assert [(one.name, one.at, one.source) for one in sections] == [
        ("mid", Fraction(25, 2), Typed("beam.sections[0].at")),
        ("", 20, Typed("effects[0].at[2]")),
        ("", ten_metres, Typed("effects[0].at[3]")),
    ]


def test_spans_place_supports_and_say_where_each_station_comes_from() -> None:
    beam = read(SI.encode()).beam
    assert [(one.at, one.source) for one in beam.supports] == [
        (Fraction(5, 4), Beyond("", "beam.overhang_left")),
        (Fraction(29, 4), Beyond("L", "beam.spans[0]")),
        (Fraction(59, 4), Beyond("M", "beam.spans[1]")),
        (Fraction(83, 4), Beyond("N", "beam.spans[2]")),
    ]
    assert (beam.length, beam.end) == (Fraction(83, 4), beam.supports[-1].source)


def test_without_an_overhang_the_first_support_is_the_datum() -> None:
    text = changed(SI, ("overhang_left = 1.25", "overhang_left = 0.0\noverhang_right = 2"))
    beam = read(text.encode()).beam
    assert (beam.supports[0].at, beam.supports[0].source) == (Fraction(0), Datum())
    assert (beam.length, beam.end) == (Fraction(43, 2), Beyond("R", "beam.overhang_right"))


def test_spans_and_stations_state_the_same_beam() -> None:
    stations = ("1.25", "7.25", "14.75", "20.75")
    text = changed(SI, ('spans = [6.0, "7.5 m", 6]\noverhang_left = 1.25', "length = 20.75"))
    for name, at in zip("LMNR", stations, strict=True):
        text = changed(text, (f'"{name}",', f'"{name}", at = {at},'))
    by_spans, by_stations = read(SI.encode()), read(text.encode())
    assert by_spans.effects == by_stations.effects
    assert by_spans.beam.length == by_stations.beam.length
    places = [[(one.at, one.name) for one in c.beam.stations] for c in (by_spans, by_stations)]
    assert places[0] == places[1]


def test_tenths_are_named_by_span_and_tenth() -> None:
    beam = read(SI.encode()).beam
    tenths = {one.name: one for one in beam.sections if isinstance(one.source, Tenth)}
    assert len(tenths) == 31
    assert tenths["1.0"].at == beam.supports[0].at
    assert tenths["2.0"].at == beam.supports[1].at
    assert tenths["2.3"].at == Fraction(29, 4) + Fraction(3, 10) * Fraction(15, 2)
    assert tenths["2.3"].source == Tenth("M", "N", 3)
    assert (tenths["3.10"].at, tenths["3.10"].source) == (beam.length, Tenth("N", "R", 10))
    assert [one.at for one in beam.sections] == sorted(one.at for one in beam.sections)


def test_supports_releases_and_sections_come_in_order() -> None:
    text = changed(US, ("at = 72,", "at = 10,"), ("at = 42.5", "at = 80.5"))
    beam = read(text.encode()).beam
    assert [one.name for one in beam.supports] == ["A", "C", "B", "D"]
    assert [one.name for one in beam.releases] == ["h2", "h1"]


def test_the_same_lengths_in_other_units_are_the_same_lengths() -> None:
    feet = read(changed(SHORT, ("12.0", '"40 ft"'), ("12.0", '"40 ft"')).encode())
    assert feet.beam.length == feet.beam.supports[1].at == 40 * FOOT


def test_every_number_is_the_decimal_that_was_typed() -> None:
    document = tomllib.loads(US, parse_float=Decimal)
    inputs = read(US.encode()).inputs
    checked = 0
    for path, value in inputs.items():
        raw: Any = document
        for part in path.replace("[", ".").replace("]", "").split("."):
            raw = raw[int(part)] if part.isdigit() else raw[part]
        if not isinstance(raw, str):
            assert value == Fraction(raw), path
            checked += 1
    assert (checked, len(inputs)) == (12, 18)


def test_inputs_hold_defaults_and_quantities_in_the_files_units() -> None:
    inputs = read(SI.encode()).inputs
    assert inputs["beam.spans[1]"] == Fraction(15, 2)
    assert inputs["beam.overhang_right"] == 0
    assert inputs["beam.sections[1].at"] == Fraction(1, 2)
    assert inputs["moving[1].uniform"] == inputs["moving[1].allowance"] == 0
    assert inputs["moving[0].distribution"] == 1
    assert "beam.length" not in inputs


def test_plain_is_the_file_as_json_without_the_cover() -> None:
    plain = read(US.encode()).plain
    expected = tomllib.loads(US)
    del expected["cover"]
    assert plain == expected
    again = US.replace("2026-04-07", "2027-01-01").replace("\n[[", "\n\n# a remark\n[[")
    assert rfc8785.dumps(dict(read(again.encode()).plain)) == rfc8785.dumps(dict(plain))


def test_cover_dates_and_signatures_may_be_left_out() -> None:
    cover = read(SHORT.encode()).cover
    assert (cover.prepared, cover.revisions, cover.latest) == (Signature(), (), None)


def test_an_empty_list_states_nothing() -> None:
    more = "releases = []\nsections = []\n[[moving]]\nname = 'T'\nuniform = 1\naxles = []\n"
    calculation = read((SHORT + more).encode())
    assert calculation.beam == read(SHORT.encode()).beam
    (case,) = calculation.moving[0].cases
    assert (case.axles, case.uniform) == ((), Given(Fraction(1), "moving[0].uniform"))


def test_a_byte_order_mark_and_windows_lines_do_no_harm() -> None:
    windows = b"\xef\xbb\xbf" + US.replace("\n", "\r\n").encode()
    assert read(windows) == read(US.encode())


def test_a_file_is_read_and_called_by_its_name(tmp_path: Path) -> None:
    path = tmp_path / "girder.toml"
    path.write_text(US, encoding="utf-8")
    assert read_file(path) == read(US.encode())
    path.write_bytes(b"a = ")
    with pytest.raises(InputRefused) as caught:
        read_file(path)
    assert caught.value.problems[0].path == "girder.toml"


def test_what_is_no_readable_file_is_refused(tmp_path: Path) -> None:
    for path, said in (
        (tmp_path / "calc.toml", "calc.toml: not found"),
        (tmp_path, f"{tmp_path.name}: a folder"),
        (tmp_path / "calc\0.toml", "calc\\x00.toml: cannot be read"),
    ):
        with pytest.raises(InputRefused) as caught:
            read_file(path)
        assert str(caught.value) == f"{said}, must be a file that can be read"
