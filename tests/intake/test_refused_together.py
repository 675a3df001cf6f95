"""Faults that depend on one another, or come several at once; limits and odd characters."""

from __future__ import annotations

import pytest
from intake_samples import SHORT, US, changed, faults

LATER = "not computed by this release"


def test_faults_come_all_at_once_in_the_order_of_the_file() -> None:
    text = changed(
        US,
        ('number = "QP-S-021"', "number = 21"),
        ("length = 100.0", "lenght = 100.0"),
        ('kind = "roller" },\n  { name = "C"', 'kind = "rollr" },\n  { name = "C"'),
        ("at = 42.5", "at = 120"),
        ('"mid", "B", 20', '"midd", "B", -20'),
        ("weight = 17.0", "weight = 0x11, wieght = 17"),
    )
    # Without a length nothing can be said of the hinge at 120.
    assert faults(text) == [
        "cover.number: 21, must be text",
        "beam.length: absent, must be given, or beam.spans",
        "beam.lenght: 100.0, is not a known key; nearest is 'length'",
        'beam.supports[1].kind: rollr, must be "pin", "roller", "fixed", "guided" or "spring"',
        "effects[0].at[0]: midd, is not a known name; nearest is 'mid'",
        "moving[0].axles[0].wieght: 17, is not a known key; nearest is 'weight'",
    ]


def test_two_faults_in_two_places() -> None:
    text = changed(US, ("at = 42.5", "at = 120"), ('"mid", "B", 20', '"mid", "B", 200'))
    assert faults(text) == [
        "beam.releases[0].at: 120 ft, must lie inside 0 ft to 100 ft",
        "effects[0].at[2]: 200 ft, must lie on the beam, 0 ft to 100 ft",
    ]


@pytest.mark.parametrize(
    "units", ['units = "yards"', "# no units"], ids=["units unknown", "units absent"]
)
def test_without_units_lengths_with_a_unit_are_compared_with_nothing(units: str) -> None:
    text = changed(SHORT, ('units = "SI"', units), ("12.0", '"40 ft"'), ("12.0", "39"))
    assert [line.partition(":")[0] for line in faults(text)] == ["units"]
    text = changed(text, ('"40 ft"', "-40"), ("39", "39, face = 3"))
    assert [line.partition(":")[0] for line in faults(text)] == [
        "units",
        "beam.length",
        "beam.supports[1].face",
    ]


@pytest.mark.parametrize(
    ("kind", "release", "face", "lines"),
    [
        ("pin", "hinge", "", []),
        ("pin", "hinge", 'face = "left",', ["must be left out: no release here needs it"]),
        ("pin", "slide", "", ['must be "left" or "right": which face of release r it holds']),
        ("pin", "slide", 'face = "right",', []),
        ("fixed", "hinge", "", ['must be "left" or "right": which face of release r it holds']),
        ("fixed", "hinge", 'face = "left",', []),
        ("guided", "slide", "", ['must be "left" or "right": which face of release r it holds']),
        ("guided", "hinge", 'face = "up",', ['must be "left" or "right"']),
    ],
)
def test_a_support_at_a_release_says_what_it_holds(
    kind: str, release: str, face: str, lines: list[str]
) -> None:
    support = f'{{ name = "M", {face} at = 5, kind = "{kind}" }}'
    text = changed(
        SHORT,
        ('{ name = "B"', support + ', { name = "B"'),
        ("length = 12.0", f'length = 12.0\nreleases = [{{ name="r", at=5.0, kind="{release}" }}]'),
    )
    found = faults(text)
    assert [line.partition(", ")[2] for line in found] == lines
    assert all(line.startswith("beam.supports[1].face: ") for line in found)


def test_nothing_that_holds_vertically() -> None:
    guided = changed(SHORT, ('"pin"', '"guided"'), ('"roller"', '"guided"'))
    needs = "must have a pin, a roller, a fixed support or a vertical spring"
    line = f"beam.supports: no vertical support, {needs}"
    assert faults(guided) == [line]
    assert faults(changed(SHORT, ("supports = [", "supports = [] # ["))) == [line]


def test_tenths_need_two_supports() -> None:
    cantilever = changed(SHORT, (', { name = "B", at = 12.0, kind = "roller" }', ""))
    cantilever = changed(
        cantilever, ('"pin"', '"fixed"'), ("[beam]", '[beam]\nsections=["tenths"]')
    )
    assert faults(cantilever) == ["beam.sections[0]: tenths, needs two supports"]


def test_issued_needs_every_assumption_closed() -> None:
    issued = changed(US, ('status = "For review"', 'status = "Issued"'))
    assert faults(issued) == []
    still_open = changed(issued, ("open = false", "open = true"))
    line = 'package.status: Issued, must be "For review" while assumptions[0] is open'
    assert faults(still_open) == [line]


@pytest.mark.parametrize("key", ["stages", "given", "combinations", "resistances", "deck"])
def test_parts_of_the_format_that_are_not_computed(key: str) -> None:
    assert faults(f"{SHORT}\n[[{key}]]\n") == [f"{key}: [{{}}], {LATER}"]


def test_an_unknown_key_without_a_likeness_lists_the_known() -> None:
    line = "package.zz: 1, is not a known key; known are 'status', 'paper', 'detail'"
    assert faults(SHORT + "[package]\nzz = 1\n") == [line]


def test_an_odd_key_is_shown_quoted_and_visible() -> None:
    found = faults(SHORT + '[package]\n"pa\\nper.x" = 1\n')
    assert found == [
        "package.\"pa\\nper.x\": 1, is not a known key; nearest is 'paper'",
    ]


@pytest.mark.parametrize(
    ("character", "code"),
    [
        ("\\u0000", "U+0000"),
        ("\\n", "U+000A"),
        ("\\u007f", "U+007F"),
        ("\u0085", "U+0085"),
        ("\u2028", "U+2028"),
        ("\u2029", "U+2029"),
        ("\u202a", "U+202A"),
        ("\u202e", "U+202E"),
        ("\u2066", "U+2066"),
        ("\u2069", "U+2069"),
        ("\u200b", "U+200B"),
        ("\u200d", "U+200D"),
        ("\ufeff", "U+FEFF"),
        ("\ue000", "U+E000"),
        ("\U00100000", "U+100000"),
        ("\ufffe", "U+FFFE"),
    ],
)
def test_characters_that_cannot_be_seen_are_refused_by_code(character: str, code: str) -> None:
    for path, old, new in (
        ("cover.title", "Girder G7", "Girder{} G7"),
        ("assumptions[0].text", "Bearings are", "Bearings{} are"),
        ("beam.sections[0].name", '"mid", at', '"mi{}d", at'),
        ("moving[0].name", "Haul truck", "Haul{} truck"),
    ):
        (line,) = faults(changed(US, (old, new.format(character))))
        assert line.startswith(f"{path}: ")
        assert line.endswith(f", must not hold the character {code}")


@pytest.mark.parametrize(
    ("old", "longest", "path"),
    [
        ("Girder G7 under a haul truck", 200, "cover.title"),
        ("Drawing Q-3", 200, "assumptions[0].basis"),
        ("Bearings are taken as level.", 1000, "assumptions[0].text"),
        ("First issue", 1000, "cover.revisions[0].text"),
        ("Haul truck", 60, "moving[0].name"),
    ],
)
def test_texts_have_a_longest_length(old: str, longest: int, path: str) -> None:
    assert faults(changed(US, (old, "ä" * longest))) == []
    shown = "ä" * 59 + "…"
    needs = f"must have at most {longest:,} characters"
    assert faults(changed(US, (old, "ä" * (longest + 1)))) == [f"{path}: {shown}, {needs}"]


def test_stations_and_axles_have_a_limit() -> None:
    def sections(count: int) -> str:
        items = ",".join(f'{{name="s{place}", at={place}e-2}}' for place in range(count))
        return changed(SHORT, ("[beam]", f"[beam]\nsections=[{items}]"))

    assert faults(sections(198)) == []
    assert faults(sections(199)) == [
        "beam: 201 supports, releases and sections together, must be at most 200"
    ]
    assert faults(sections(198) + '[[effects]]\nkind = "shear"\nat = 11.5\n') == [
        "effects: 201 supports, releases and sections together, must be at most 200"
    ]

    def moving(*counts: int) -> str:
        text = SHORT
        for count in counts:
            axles = ",".join(["{weight=1}", *["{weight=1,spacing=1}"] * (count - 1)])
            text += f'[[moving]]\nname = "n{len(text)}"\naxles = [{axles}]\n'
        return text

    assert faults(moving(400, 600)) == []
    assert faults(moving(1001)) == ["moving[0].axles: 1,001 items, must have at most 1,000"]
    assert faults(moving(400, 601, 10)) == [
        "moving[1].axles: 1,001 axles up to here, must leave at most 1,000 axles in all"
    ]
