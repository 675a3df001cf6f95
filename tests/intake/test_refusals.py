"""Each kind of fault with the line that is printed for it."""

from __future__ import annotations

import pytest
from intake_samples import SI, US, changed, faults

LATER = "not computed by this release"

TOP = [
    ("format = 1", "format = 2", "format: 2, is newer than this release reads"),
    ("format = 1", "format = 0", "format: 0, must be 1"),
    ("format = 1", "format = true", "format: true, must be 1"),
    ("format = 1", "format = 1.0", "format: 1.0, must be 1"),
    ("format = 1\n", "", "format: absent, must be 1"),
    ('"US"', '"Imperial"', 'units: Imperial, must be "US" or "SI"'),
    ('"US"', '["US"]', 'units: ["US"], must be "US" or "SI"'),
    ('units = "US"\n', "", 'units: absent, must be "US" or "SI"'),
    ('title = "Girder G7 under a haul truck"\n', "", "cover.title: absent, must be given"),
    ('"Girder G7 under a haul truck"', '" "', 'cover.title: " ", must not be blank'),
    ('"Girder G7 under a haul truck"', "7", "cover.title: 7, must be text"),
    (
        "[cover]\n",
        '[cover]\nclinet = "X"\n',
        "cover.clinet: X, is not a known key; nearest is 'client'",
    ),
    (
        "2026-04-07 }\nchecked",
        "2026-04-07T10:00:00 }\nchecked",
        "cover.prepared.on: 2026-04-07T10:00:00, must be a date such as 2026-03-02",
    ),
    (
        'checked = { by = "" }',
        'checked = { by = " p. LINDEN " }',
        "cover.checked.by:  p. LINDEN , must not be the person at cover.prepared.by",
    ),
    ('mark = "A", ', "", "cover.revisions[0].mark: absent, must be given"),
    ('"For review"', '"Final"', 'package.status: Final, must be "For review" or "Issued"'),
    ('paper = "letter"', 'paper = "A3"', 'package.paper: A3, must be "letter" or "A4"'),
    (
        'detail = "every equation"',
        'detail = "sketch"',
        'package.detail: sketch, must be "every equation", "plan" or "table"',
    ),
    ("open = false", 'open = "no"', "assumptions[0].open: no, must be true or false"),
    (
        "[package]\n",
        "[packages]\n[package]\n",
        "packages: {}, is not a known key; nearest is 'package'",
    ),
    (
        US[US.index("[[assumptions]]") : US.index("[beam]")],
        "[assumptions]\n",
        "assumptions: {}, must be a list of tables",
    ),
]

BEAM = [
    ("length = 100.0", "length = true", "beam.length: true, must be a length such as 2.5 ft"),
    ("length = 100.0", 'length = "long"', "beam.length: long, must be a length such as 2.5 ft"),
    (
        "length = 100.0",
        'length = "100 kip"',
        "beam.length: 100 kip, must be a length such as 2.5 ft",
    ),
    (
        "length = 100.0",
        'length = "100 yd"',
        "beam.length: 100 yd, unit 'yd' is not known; use m, mm, cm, ft, in, N, kN, MN, lb, kip, "
        "Pa, MPa, GPa, psi, ksi, rad, mrad",
    ),
    ("length = 100.0", "length = inf", "beam.length: inf ft, must be a finite number"),
    (
        "length = 100.0",
        "length = 100.0000000000000",
        "beam.length: 100.0000000000000 ft, must have at most 15 significant digits",
    ),
    (
        "length = 100.0",
        "length = 1e13",
        "beam.length: 1e13 ft, must be 0 or between 1e-9 and 1e12 in size",
    ),
    (
        "length = 100.0",
        "length = 0x1000000000000",
        "beam.length: 281474976710656 ft, must be 0 or between 1e-9 and 1e12 in size",
    ),
    (
        "length = 100.0",
        'length = "1e-9 mm"',
        "beam.length: 1e-9 mm, must be 0 or between 1e-9 and 1e12 in size",
    ),
    ("length = 100.0", "length = 0", "beam.length: 0 ft, must be above 0 ft"),
    ("length = 100.0", "length = -1.5", "beam.length: -1.5 ft, must be above 0 ft"),
    ("length = 100.0\n", "", "beam.length: absent, must be given, or beam.spans"),
    (
        "length = 100.0",
        "length = 100.0\nspans = [30, 42, 28]",
        "beam.spans: [30, 42, 28], must be left out beside beam.length",
    ),
    (
        "length = 100.0",
        "length = 100.0\noverhang_left = 2",
        "beam.overhang_left: 2 ft, must be left out without spans",
    ),
    ("length = 100.0", "length = 100.0\ntransfer = {}", f"beam.transfer: {{}}, {LATER}"),
    (
        '"A", at = 0.0',
        '"A", at = -2',
        "beam.supports[0].at: -2 ft, must lie on the beam, 0 ft to 100 ft",
    ),
    (
        'at = "30 ft"',
        'at = "31 m"',
        "beam.supports[1].at: 31 m, must lie on the beam, 0 ft to 100 ft",
    ),
    ('"A", at = 0.0, ', '"A", ', "beam.supports[0].at: absent, must be given"),
    (
        "at = 72",
        "at = 30",
        "beam.supports[2].at: 30 ft, must not share its place with beam.supports[1]",
    ),
    (
        'name = "C"',
        'name = "A"',
        "beam.supports[2].name: A, must differ from the name at beam.supports[0].name",
    ),
    (
        'name = "h2"',
        'name = "D"',
        "beam.releases[1].name: D, must differ from the name at beam.supports[3].name",
    ),
    (
        'name = "h2"',
        'name = "tenths"',
        'beam.releases[1].name: tenths, must not be "supports", "sections" or "tenths", '
        "which an effect's at may say",
    ),
    ('name = "C", ', "", "beam.supports[2].name: absent, must be given"),
    ('name = "C"', 'name = ""', 'beam.supports[2].name: "", must not be blank'),
    (
        '"C", at = 72, kind = "roller"',
        '"C", at = 72',
        'beam.supports[2].kind: absent, must be "pin", "roller", "fixed", "guided" or "spring"',
    ),
    (
        '"C", at = 72,',
        '"C", at = 72, face = "left",',
        "beam.supports[2].face: left, must be left out: no release here needs it",
    ),
    ("at = 42.5", "at = 100", "beam.releases[0].at: 100 ft, must lie inside 0 ft to 100 ft"),
    (
        "at = 42.5",
        "at = 62",
        "beam.releases[1].at: 6_2.0 ft, must not share its place with beam.releases[0]",
    ),
    (
        '42.5, kind = "hinge"',
        '42.5, kind = "pin"',
        'beam.releases[0].kind: pin, must be "hinge" or "slide"',
    ),
    (
        '"12 ft 6 in"',
        '"1200 ft"',
        "beam.sections[0].at: 1200 ft, must lie on the beam, 0 ft to 100 ft",
    ),
    (
        "sections = [ {",
        'sections = [ "halves", {',
        'beam.sections[0]: halves, must be a table or "tenths"',
    ),
    (
        "sections = [ {",
        'sections = [ "tenths", "tenths", {',
        "beam.sections[1]: tenths, must stand once",
    ),
    (
        'sections = [ { name = "mid", at = "12 ft 6 in" } ]',
        'sections = [ { name = "mid", at = 1 }, { name = "2.4", at = 5 }, "tenths" ]',
        "beam.sections[2]: tenths, must not name a section '2.4', as beam.sections[1].name does",
    ),
    (
        'sections = [ { name = "mid", at = "12 ft 6 in" } ]',
        'sections = [ "tenths", { name = "2.4", at = 5 }, { name = "mid", at = 1 } ]',
        "beam.sections[1].name: 2.4, must differ from the name at beam.sections[0]",
    ),
]

SPANS = [
    ("spans = [6.0,", "spans = [0.0,", "beam.spans[0]: 0.0 m, must be above 0 m"),
    ('spans = [6.0, "7.5 m", 6]', "spans = []", "beam.spans: [], must not be empty"),
    ('spans = [6.0, "7.5 m", 6]', "spans = 6", "beam.spans: 6 m, must be a list"),
    (
        "spans = [6.0,",
        "spans = [6.0, 2,",
        "beam.supports: 4 supports, must be 5, one more than beam.spans",
    ),
    ("1.25", "-1.25", "beam.overhang_left: -1.25 m, must be at least 0 m"),
    (
        'name = "M",',
        'name = "M", at = 7.25,',
        "beam.supports[1].at: 7.25 m, must be left out: beam.spans places the supports",
    ),
    ("500 mm", "30 m", "beam.sections[1].at: 30 m, must lie on the beam, 0 m to 20.75 m"),
]

MOVING = [
    ('name = "Haul truck"\n', "", "moving[0].name: absent, must be given"),
    ("weight = 17.0", "weight = 0", "moving[0].axles[0].weight: 0 kip, must be above 0 kip"),
    ("weight = 17.0", "spacing = 0", "moving[0].axles[0].weight: absent, must be given"),
    (
        "weight = 17.0",
        "weight = 17.0, spacing = 4",
        "moving[0].axles[0].spacing: 4 ft, must be left out: no axle is ahead of the lead axle",
    ),
    (", spacing = 13.25", "", "moving[0].axles[1].spacing: absent, must be given"),
    ("13.25", "0.0", "moving[0].axles[1].spacing: 0.0 ft, must be above 0 ft"),
    ("13.25", "-1", "moving[0].axles[1].spacing: -1 ft, must be above 0 ft"),
    (
        "13.25",
        "[30.0, 14.0]",
        "moving[0].axles[1].spacing[1]: 14.0 ft, must be above 30 ft, the least of the range",
    ),
    (
        "13.25",
        "{ lest = 15.0, list = [4] }",
        "moving[0].axles[1].spacing.lest: 15.0, is not a known key; nearest is 'least'",
    ),
    ("{ weight = 17.0 }", "17.0", "moving[0].axles[0]: 17.0, must be a table"),
    (
        "0.05 kip/ft",
        "0.05 kip",
        "moving[0].uniform: 0.05 kip, must be a line load such as 2.5 kip/ft",
    ),
    ('"0.05 kip/ft"', "-0.05", "moving[0].uniform: -0.05 kip/ft, must be at least 0 kip/ft"),
    ("trailing = []", "trailing = [ 1 ]", "moving[0].trailing[0]: 1, must be a table"),
    (
        'heading = "right"',
        'heading = "up"',
        'moving[0].heading: up, must be "right", "left" or "both"',
    ),
    (
        '"neglect"',
        '"all"',
        'moving[0].relieving: all, must be "count", "neglect" or "whole train"',
    ),
    (
        "allowance = 0.3",
        "allowance = [ { of = 1, value = 0.3 } ]",
        'moving[0].allowance[0].of: 1, must be "axles", "trailing" or "uniform"',
    ),
    ("allowance = 0.3", "allowance = 10.5", "moving[0].allowance: 10.5, must be at most 10"),
    ("allowance = 0.3", "allowance = -0.1", "moving[0].allowance: -0.1, must be at least 0"),
    (
        "allowance = 0.3",
        'allowance = "30 ft"',
        "moving[0].allowance: 30 ft, must be a number such as 2.5",
    ),
    ("distribution = 0.65", "distribution = 0", "moving[0].distribution: 0, must be above 0"),
    ("= 0.65", '= "from deck"', f"moving[0].distribution: from deck, {LATER}"),
    ("= 0.65", "= [1]", "moving[0].distribution[0]: 1, must be a table"),
    ("= 0.65", '= 1\norder = "any"', "moving[0].order: any, must be left out without trains"),
    ("= 0.65", "= 1\nspacing = 3", "moving[0].spacing: 3 ft, must be left out without trains"),
    ("= 0.65", '= 1\nabsent = "none"', "moving[0].absent: none, must be left out without trains"),
    ("= 0.65", "= 1\nscale = 2", "moving[0].scale: 2, must be left out without standard"),
    (
        "= 0.65",
        '= 1\n[[moving]]\nname = "Haul truck"\nuniform = 1',
        "moving[1].name: Haul truck, must differ from the name at moving[0].name",
    ),
    (
        "= 0.65",
        '= 1\n[[moving]]\nname = "None"\nuniform = 0',
        "moving[1]: no load, must have axles, trains, or a uniform load above 0",
    ),
]


@pytest.mark.parametrize(
    ("text", "old", "new", "line"),
    [(US, *case) for case in (*TOP, *BEAM, *MOVING)] + [(SI, *case) for case in SPANS],
)
def test_one_fault_is_one_line(text: str, old: str, new: str, line: str) -> None:
    found = faults(changed(text, (old, new)))
    assert found == [line]
