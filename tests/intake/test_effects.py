"""Which effects a file asks for: kinds, places, faces, repeats, defaults."""

from __future__ import annotations

import re
from fractions import Fraction

import pytest
from intake_samples import SI, US, changed, faults

from calcpack.intake import read

BEAM = """\
format = 1
units = "SI"
cover.title = "Beam"
[beam]
length = 20
supports = [
  { name = "W", at = 0, kind = "fixed" },
  { name = "P", at = 8, kind = "roller" },
  { name = "G", at = 12, kind = "guided" },
  { name = "F", at = 16, kind = "fixed" },
]
releases = [ { name = "h", at = 8, kind = "hinge" } ]
sections = [ { name = "s", at = 2.5 }, { name = "7", at = 9 }, { name = "again", at = 9 } ]
"""

STIFF = changed(
    BEAM,
    ("length = 20", "length = 20\nstiffness = [ { from = 0, to = 20, EI = 40 } ]"),
    ('"hinge" }', '"hinge" }, { name = "d", at = 14, kind = "slide" }'),
)

TENTHS = changed(BEAM, ("sections = [", 'sections = [ "tenths",'))


def labels(effects: str, beam: str = BEAM) -> list[str]:
    calculation = read((beam + effects).encode())
    for effect in calculation.effects:
        station = calculation.beam.station(effect.station)
        assert effect.at in (station.name, effect.at if not station.name else "")
    return [effect.label for effect in calculation.effects]


def asked(kind: str, at: str, more: str = "") -> str:
    return f"[[effects]]\nkind = {kind}\nat = {at}\n{more}\n"


@pytest.mark.parametrize(
    ("kind", "at", "side", "expected"),
    [
        # shear has two values at what holds vertically, moment at what holds rotation
        ('"shear"', '"P"', "", ["shear at P, left face", "shear at P, right face"]),
        ('"shear"', '"P"', "left", ["shear at P, left face"]),
        ('"moment"', '"P"', "", ["moment at P"]),
        ('"moment"', '"P"', "right", ["moment at P"]),
        ('"shear"', '"G"', "", ["shear at G"]),
        ('"moment"', '"G"', "", ["moment at G, left face", "moment at G, right face"]),
        ('"moment"', '"F"', "right", ["moment at F, right face"]),
        ('"shear"', '"F"', "", ["shear at F, left face", "shear at F, right face"]),
        # the inner face at an end, of a support or free
        ('"shear"', '"W"', "", ["shear at W"]),
        ('"moment"', '"W"', "right", ["moment at W"]),
        ('"shear"', "20", "left", ["shear at 20"]),
        ('"reaction"', '"W"', "left", ["reaction at W"]),
        # one value elsewhere
        ('"shear"', '"s"', "left", ["shear at s"]),
        ('"moment"', '"h"', "", ["moment at P"]),
        # names, stations, lengths
        ('"moment"', "2.5", "", ["moment at s"]),
        ('"moment"', '"7"', "", ["moment at 7"]),
        ('"moment"', "7", "", ["moment at 7 m"]),
        ('"moment"', '"7 m"', "", ["moment at 7 m"]),
        ('"moment"', '"250 cm"', "", ["moment at s"]),
        ('"moment"', "12.50", "", ["moment at 12.5"]),
        ('["moment", "shear"]', '["s", 3]', "",
         ["moment at s", "shear at s", "moment at 3", "shear at 3"]),
        # words
        ('"reaction"', '"supports"', "", ["reaction at W", "reaction at P", "reaction at F"]),
        ('"moment reaction"', '"supports"', "",
         ["moment reaction at W", "moment reaction at G", "moment reaction at F"]),
        ('["reaction", "moment reaction"]', '["W", "F"]', "",
         ["reaction at W", "moment reaction at W", "reaction at F", "moment reaction at F"]),
        ('"moment"', '"sections"', "", ["moment at s", "moment at 7"]),
        ('"moment"', '["s", "sections"]', "", ["moment at s", "moment at 7"]),
    ],
)  # fmt: skip
def test_what_is_asked_for(kind: str, at: str, side: str, expected: list[str]) -> None:
    assert labels(asked(kind, at, f'side = "{side}"' if side else "")) == expected


@pytest.mark.parametrize(
    ("kind", "at", "side", "expected"),
    [
        # deflection has two values at a slide, rotation at a hinge, also over a support
        ('"deflection"', '"d"', "", ["deflection at d, left face", "deflection at d, right face"]),
        ('"deflection"', "14", "right", ["deflection at d, right face"]),
        ('"deflection"', '"h"', "", ["deflection at P"]),
        ('"rotation"', '"h"', "", ["rotation at P, left face", "rotation at P, right face"]),
        ('"rotation"', '"P"', "left", ["rotation at P, left face"]),
        ('"rotation"', '"d"', "left", ["rotation at d"]),
        # what holds deflection or rotation makes no second value
        ('["deflection", "rotation"]', '"F"', "", ["deflection at F", "rotation at F"]),
        ('["deflection", "rotation"]', '"s"', "", ["deflection at s", "rotation at s"]),
        ('"rotation"', "20", "", ["rotation at 20"]),
        ('"deflection"', '"supports"', "", [f"deflection at {name}" for name in "WPGF"]),
    ],
)  # fmt: skip
def test_deflections_and_rotations(kind: str, at: str, side: str, expected: list[str]) -> None:
    assert labels(asked(kind, at, f'side = "{side}"' if side else ""), STIFF) == expected


def test_a_deflection_has_no_face_off_the_beam() -> None:
    assert faults(STIFF + asked('"deflection"', "20", 'side = "right"')) == [
        "effects[0].side: right, must not point off the beam at 20"
    ]


@pytest.mark.parametrize(
    ("effects", "line"),
    [
        (asked('"shear"', '"Q"'), "[0].at: Q, is not a known name; known are "
         "'W', 'P', 'G', 'F', 'h', 's', '7', 'again'"),
        (asked('"shear"', '["s", "agin"]'),
         "[0].at[1]: agin, is not a known name; nearest is 'again'"),
        (asked('"shear"', "20.5"), "[0].at: 20.5 m, must lie on the beam, 0 m to 20 m"),
        (asked('"shear"', '"-1 m"'), "[0].at: -1 m, must lie on the beam, 0 m to 20 m"),
        (asked('"shear"', '"3 kN"'), "[0].at: 3 kN, must be a length such as 2.5 m"),
        (asked('"shear"', "true"), "[0].at: true, must be a length such as 2.5 m"),
        (asked('"shear"', "[]"), "[0].at: [], must not be empty"),
        (asked('"shear"', "[[1]]"), "[0].at[0]: [1], must be a length such as 2.5 m"),
        ('[[effects]]\nkind = "shear"\n', "[0].at: absent, must be given"),
        ("[[effects]]\nat = 1\n",
         '[0].kind: absent, must be "reaction", "moment reaction", "shear", "moment", '
         '"deflection" or "rotation"'),
        (asked('"tension"', "1"),
         '[0].kind: tension, must be "reaction", "moment reaction", "shear", "moment", '
         '"deflection" or "rotation"'),
        (asked('"deflection"', "1"), "[0].kind: deflection, needs beam.stiffness"),
        (asked('["shear", "rotation"]', "1"), "[0].kind[1]: rotation, needs beam.stiffness"),
        (asked('["shear", "shear"]', "1"), "[0].kind[1]: shear, must be stated once"),
        (
            asked('"shear"', "1", 'show = "sketch"'),
            "[0].show: sketch, must be \"every equation\", \"plan\" or \"table\"",
        ),
        (asked('"shear"', "1", 'side = "up"'), '[0].side: up, must be "left" or "right"'),
        (asked('"reaction"', '"s"'),
         "[0].at: s, must be a support that holds vertically, for a reaction"),
        (asked('"reaction"', '["W", "G"]'),
         "[0].at[1]: G, must be a support that holds vertically, for a reaction"),
        (asked('["shear", "moment reaction"]', '"P"'),
         "[0].at: P, must be a support that holds rotation, for a moment reaction"),
        (asked('"shear"', '["P", "W"]', 'side = "left"'),
         "[0].side: left, must not point off the beam at W"),
        (asked('"moment"', "20", 'side = "right"'),
         "[0].side: right, must not point off the beam at 20"),
        (asked('"moment"', '"tenths"'), '[0].at: tenths, needs "tenths" in beam.sections'),
        (asked('"moment"', '["s", 2.5]'),
         "[0].at[1]: 2.5 m, asks for moment at s again, after effects[0].at[0]"),
        (asked('"shear"', '"P"', 'side = "left"') + asked('["moment", "shear"]', '"h"'),
         "[1].at: h, asks for shear at P, left face again, after effects[0].at"),
        (asked('"shear"', '"sections"') + asked('"shear"', '"sections"'),
         "[1].at: sections, asks for shear at s again, after effects[0].at"),
    ],
)  # fmt: skip
def test_what_cannot_be_asked_for(effects: str, line: str) -> None:
    assert faults(BEAM + effects) == [f"effects{line}"]


def test_words_need_what_they_mean() -> None:
    bare = changed(BEAM, ("sections = [ {", "sections = [] # {"))
    assert faults(bare + asked('"moment"', '"sections"')) == [
        "effects[0].at: sections, needs a section in beam.sections"
    ]
    pinned = changed(bare, ('"fixed"', '"pin"'), ('"fixed"', '"pin"'), ('"guided"', '"pin"'))
    assert faults(pinned + asked('"moment reaction"', '"supports"')) == [
        "effects[0].at: supports, needs a support that holds rotation, for a moment reaction"
    ]


def test_both_sides_may_be_asked_for_in_turn() -> None:
    halves = asked('"shear"', '"P"', 'side = "right"') + asked('"shear"', '"P"', 'side = "left"')
    assert labels(halves) == ["shear at P, right face", "shear at P, left face"]
    again = asked('"shear"', '"P"', 'side = "right"') + asked('"shear"', '["W", "supports"]')
    assert labels(again) == [
        "shear at P, right face",
        "shear at W",
        "shear at P, left face",
        "shear at G",
        "shear at F, left face",
        "shear at F, right face",
    ]


def test_tenths_are_places_with_the_names_of_what_stands_there() -> None:
    found = labels(asked('"moment"', '"tenths"'), TENTHS)
    assert len(found) == 31 + 2  # two faces at G and at F
    assert found[:3] == ["moment at W", "moment at 1.1", "moment at 1.2"]
    assert found[10] == "moment at P"
    assert labels(asked('"moment"', '"1.5"'), TENTHS) == ["moment at 1.5"]


def test_without_effects_there_are_the_default_ones() -> None:
    assert labels("") == [
        "reaction at W",
        "reaction at P",
        "reaction at F",
        "moment reaction at W",
        "moment reaction at G",
        "moment reaction at F",
        "moment at s",
        "shear at s",
        "moment at 7",
        "shear at 7",
    ]
    assert labels("", "effects = []\n" + BEAM) == labels("")


def test_a_station_without_a_whole_decimal_is_called_by_its_fraction() -> None:
    effect = read(US.encode()).effects[-5]
    assert (effect.at, effect.station) == ("12500/381", Fraction(12500, 381))
    assert effect.station * Fraction(3048, 10000) == 10


@pytest.mark.parametrize(
    ("path", "old", "new"),
    [
        ("beam.supports[1].kind", '"roller"', '"rollr"'),
        ("beam.supports[1].name", 'name = "P", ', ""),
        ("beam.supports", r"supports = \[.*?\n\]", "supports = 7"),
        ("beam", r"\[beam\].*", "beam = 7\n"),
        ("beam.length", "length = 20", "length = -20"),
        ("beam.sections", r"sections = .*?\n", "sections = 7\n"),
        ("units", '"SI"', '"si"'),
    ],
)
def test_faults_of_the_beam_make_no_further_faults_of_effects(
    path: str, old: str, new: str
) -> None:
    effects = asked('["shear", "reaction"]', '"P"') + asked('"moment"', '"tenths"')
    effects += asked('"shear"', "16", 'side = "left"') + asked('"shear"', "16", 'side = "right"')
    effects += asked('"moment reaction"', "16") + asked('"moment reaction"', '"supports"')
    effects += asked('"shear"', '["1.5", "9 m"]')
    assert faults(TENTHS + effects) == []
    lines = faults(re.sub(old, new, TENTHS, count=1, flags=re.DOTALL) + effects)
    assert lines
    assert all(line.startswith(f"{path}: ") for line in lines), lines


def test_effects_of_spans_with_tenths_by_default() -> None:
    effects = read(SI.encode()).effects
    assert [effect.label for effect in effects[:6]] == [
        "reaction at L",
        "reaction at M",
        "reaction at N",
        "reaction at R",
        "moment at tip",
        "shear at tip",
    ]
    # 31 tenths: a moment each, a shear each, and one shear more at each of L, M and N
    assert len(effects) == 4 + 2 + 2 * 31 + 3
    assert len(set(effects)) == len(effects)


def test_how_much_of_a_derivation_is_shown() -> None:
    found = read((BEAM + asked('"shear"', "1", 'show = "table"')).encode()).effects
    assert [effect.show for effect in found] == ["table"]
    assert read((BEAM + asked('"shear"', "1")).encode()).effects[0].show is None
