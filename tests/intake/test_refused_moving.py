"""Faults of moving loads, each with its lines; all at once and in the order of the file."""

from __future__ import annotations

import pytest
from intake_samples import changed, faults

from calcpack.intake.standards import model_names

BEAM = """\
format = 1
units = "US"
cover.title = "Two spans"
[beam]
length = 100
supports = [
  { name = "A", at = 0, kind = "pin" },
  { name = "B", at = 40, kind = "roller" },
  { name = "C", at = 100, kind = "roller" },
]
sections = [ { name = "mid", at = 20 } ]
"""
METRIC = changed(BEAM, ('"US"', '"SI"'))
SIMPLE = changed(METRIC, ('  { name = "B", at = 40, kind = "roller" },\n', ""))
TRAINS = """\
[[trains]]
name = "Tug"
axles = [ { weight = 1 }, { weight = 2, spacing = 3 } ]
[[trains]]
name = "Trailer"
axles = [ { weight = 1 } ]
"""


def lines(stated: str, text: str = BEAM) -> list[str]:
    """What is said of one moving load, each path without ``moving[0]``."""
    found = faults(f'{text}[[moving]]\nname = "M"\n{stated}\n')
    return [line.removeprefix("moving[0]").removeprefix(".") for line in found]


@pytest.mark.parametrize(
    ("stated", "expected"),
    [
        ("", [": no load, must have axles, trains, or a uniform load above 0"]),
        ("axles = []", [": no load, must have axles, trains, or a uniform load above 0"]),
        (
            "axles = []\ntrailing = []\nuniform = 0",
            [": no load, must have axles, trains, or a uniform load above 0"],
        ),
        ("axles = 1", ["axles: 1, must be a list of tables"]),
        ("axles = [ {} ]", ["axles[0].weight: absent, must be given"]),
        ("axles = [ { weight = -4 } ]", ["axles[0].weight: -4 kip, must be above 0 kip"]),
        (
            'axles = [ { weight = "-4 kN" }, { weight = 0 } ]',
            [
                "axles[0].weight: -4 kN, must be above 0 kip",
                "axles[1].spacing: absent, must be given",
                "axles[1].weight: 0 kip, must be above 0 kip",
            ],
        ),
        ("uniform = -1", ["uniform: -1 kip/ft, must be at least 0 kip/ft"]),
    ],
)
def test_no_load_and_no_weight(stated: str, expected: list[str]) -> None:
    assert lines(stated) == expected


SPACINGS = [
    ("0", [": 0 ft, must be above 0 ft"]),
    ("-1", [": -1 ft, must be above 0 ft"]),
    ("true", [": true, must be a length such as 2.5 ft"]),
    ('"near"', [": near, must be a length such as 2.5 ft"]),
    ("[30, 14]", ["[1]: 14 ft, must be above 30 ft, the least of the range"]),
    ('[14, "14 ft"]', ["[1]: 14 ft, must be above 14 ft, the least of the range"]),
    ("[0, 14]", ["[0]: 0 ft, must be above 0 ft"]),
    ('[0, "far"]', ["[0]: 0 ft, must be above 0 ft", "[1]: far, must be a length such as 2.5 ft"]),
    ("[-1, -2]", ["[0]: -1 ft, must be above 0 ft", "[1]: -2 ft, must be above 0 ft"]),
    ("[]", [": [], must not be empty"]),
    ("[14]", [": [14], must be a number, or the least and the greatest of a range"]),
    (
        "[14, 20, 30]",
        [": [14, 20, 30], must be a number, or the least and the greatest of a range"],
    ),
    ("[{ least = 3 }, 4]", ["[0]: { least = 3 }, must be a length such as 2.5 ft"]),
    ("{}", [".list: absent, must be given, or least"]),
    ("{ list = [] }", [".list: [], must not be empty"]),
    ("{ list = 6 }", [".list: 6 ft, must be a list"]),
    ("{ list = [0, 6] }", [".list[0]: 0 ft, must be above 0 ft"]),
    ("{ list = [11, 6] }", [".list[1]: 6 ft, must be above the one before it in the list"]),
    ("{ list = [6, 6] }", [".list[1]: 6 ft, must be above the one before it in the list"]),
    ("{ list = [6], least = 4 }", [".least: 4 ft, must be left out beside list"]),
    ("{ least = 0 }", [".least: 0 ft, must be above 0 ft"]),
    ("{ least = [1] }", [".least: [1], must be a length such as 2.5 ft"]),
    (
        "{ lst = [6] }",
        [
            ".list: absent, must be given, or least",
            ".lst: [6], is not a known key; nearest is 'list'",
        ],
    ),
]


@pytest.mark.parametrize(("spacing", "expected"), SPACINGS)
def test_spacings_that_are_none(spacing: str, expected: list[str]) -> None:
    of_axle = lines(f"axles = [ {{ weight = 1 }}, {{ weight = 2, spacing = {spacing} }} ]")
    assert of_axle == [f"axles[1].spacing{line}" for line in expected]
    of_trains = lines(f'trains = ["Tug", "Trailer"]\nspacing = {spacing}', BEAM + TRAINS)
    assert of_trains == [f"spacing{line}" for line in expected]


@pytest.mark.parametrize("spacing", ["4", "[0]", "[1, 2]", "{}", "{ least = 4 }", "{ list = [4] }"])
def test_nothing_is_ahead_of_the_lead_axle(spacing: str) -> None:
    said = "4 ft" if spacing == "4" else spacing
    axles = f"axles = [ {{ weight = 1, spacing = {spacing} }}, {{ weight = 2, spacing = 3 }} ]"
    needs = "must be left out: no axle is ahead of the lead axle"
    assert lines(axles) == [f"axles[0].spacing: {said}, {needs}"]


@pytest.mark.parametrize(
    ("one", "expected"),
    [
        ("", ["behind: absent, must be given, or ahead", "load: absent, must be given, or weight"]),
        ("behind = 5, ahead = 3, load = 8", ["ahead: 3 ft, must be left out beside behind"]),
        ("behind = 5, load = 8, weight = 3", ["weight: 3 kip, must be left out beside load"]),
        ("behind = 5, weight = 8", ["length: absent, must be given beside weight"]),
        (
            'behind = -5, load = 0, length = 0, extent = "whole"',
            [
                "behind: -5 ft, must be at least 0 ft",
                "load: 0 kip/ft, must be above 0 kip/ft",
                "length: 0 ft, must be above 0 ft",
                'extent: whole, must be "unbroken" or "in parts"',
            ],
        ),
    ],
)
def test_loads_ahead_and_behind(one: str, expected: list[str]) -> None:
    for axles in ("", "axles = [ { weight = 1 } ]\n"):
        found = lines(f"{axles}trailing = [ {{ ahead = 1, load = 1 }}, {{ {one} }} ]")
        assert found == [f"trailing[1].{line}" for line in expected]


@pytest.mark.parametrize(
    ("stated", "expected"),
    [
        (
            'trains = ["Tug", "Trailer"]',
            ["spacing: absent, must be given: there are several trains"],
        ),
        (
            'trains = ["Tgu", "Trailer", "x", 7]',
            [
                "spacing: absent, must be given: there are several trains",
                "trains[0]: Tgu, is not a known train; nearest is 'Tug'",
                "trains[2]: x, is not a known train; known are 'Tug', 'Trailer'",
                "trains[3]: 7, must be text",
            ],
        ),
        ("trains = []", ["trains: [], must not be empty"]),
        ('trains = "Tug"', ["trains: Tug, must be a list"]),
        (
            'trains = ["Tug"]\norder = "loose"\nabsent = "all"',
            ['order: loose, must be "fixed" or "any"', 'absent: all, must be "each" or "none"'],
        ),
        (
            'trains = ["Tug"]\naxles = [ { weight = 1 } ]',
            ["axles: [{ weight = 1 }], must be left out beside trains"],
        ),
        (
            'uniform = 1\norder = "any"\nspacing = { least = 3 }\nabsent = "none"',
            [
                "order: any, must be left out without trains",
                "spacing: { least = 3 }, must be left out without trains",
                "absent: none, must be left out without trains",
            ],
        ),
    ],
)
def test_trains_of_a_load(stated: str, expected: list[str]) -> None:
    assert lines(stated, BEAM + TRAINS) == expected


@pytest.mark.parametrize(
    ("stated", "expected"),
    [
        ('name = "T"', ["[0]: no axles, must have axles or a table"]),
        ('name = "T"\naxles = []', ["[0]: no axles, must have axles or a table"]),
        (
            "axles = [ { weight = 1, spacing = 2 }, { weight = 1 } ]",
            [
                "[0].name: absent, must be given",
                "[0].axles[0].spacing: 2 ft, must be left out: no axle is ahead of the lead axle",
                "[0].axles[1].spacing: absent, must be given",
            ],
        ),
        (
            'name = "T"\naxles = [ { weight = 1 } ]\n[[trains]]\nname = "T"\naxles = [ {} ]',
            [
                "[1].name: T, must differ from the name at trains[0].name",
                "[1].axles[0].weight: absent, must be given",
            ],
        ),
    ],
)
def test_trains_by_name(stated: str, expected: list[str]) -> None:
    found = faults(f'{BEAM}[[trains]]\n{stated}\n[[moving]]\nname = "M"\ntrains = ["T"]\n')
    assert found == [f"trains{line}" for line in expected]


def test_a_train_named_where_none_is_stated() -> None:
    assert lines('trains = ["T"]') == ["trains[0]: T, is not a known train; trains states none"]
    text = changed(BEAM, ("[beam]", "trains = 3\n[beam]"))
    assert lines('trains = ["T"]', text) == ["trains: 3, must be a list of tables"]


@pytest.mark.parametrize(
    ("allowance", "expected"),
    [
        ("-1", [": -1, must be at least 0"]),
        ("10.5", [": 10.5, must be at most 10"]),
        ("[]", [": [], must not be empty"]),
        ("{}", [": {}, must be a number such as 2.5"]),
        ("[ 0.3 ]", ["[0]: 0.3, must be a table"]),
        (
            '[ { of = "wheels" }, { value = -1 } ]',
            [
                "[0].value: absent, must be given",
                '[0].of: wheels, must be "axles", "trailing" or "uniform"',
                '[1].of: absent, must be "axles", "trailing" or "uniform"',
                "[1].value: -1, must be at least 0",
            ],
        ),
        (
            '[ { of = "axles", value = 0.3 }, { of = "uniform", value = 0.1 }, '
            '{ of = "axles", value = 0 } ]',
            ["[2].of: axles, must differ from moving[0].allowance[0].of"],
        ),
    ],
)
def test_allowances(allowance: str, expected: list[str]) -> None:
    trains = 'trains = ["Tug", "Trailer"]\nspacing = 4\n'
    for load in ("uniform = 1\n", trains, 'standard = "LM71"\n'):
        found = lines(f"{load}allowance = {allowance}", METRIC + TRAINS)
        assert found == [f"allowance{line}" for line in expected]


KINDS = '"reaction", "moment reaction", "shear", "moment", "deflection" or "rotation"'


@pytest.mark.parametrize(
    ("distribution", "expected"),
    [
        ("0", [": 0, must be above 0"]),
        ('"deck"', [": deck, must be a number such as 2.5"]),
        ('"from deck"', [": from deck, not computed by this release"]),
        ("[]", [": [], must not be empty"]),
        (
            '[ { kind = ["moment", "shear"], value = 1 }, { kind = "reaction", value = 1 } ]',
            [],
        ),
        (
            '[ { kind = ["reaction", "moment"], value = 1 } ]',
            [
                ': [{ kind = ["reaction", "moment"], value = 1 }], '
                "must have a value for shear at mid"
            ],
        ),
        (
            '[ { from = "A", to = "mid", value = 1 } ]',
            [': [{ from = "A", to = "mid", value = 1 }], must have a value for reaction at B'],
        ),
        (
            '[ { from = "C", to = "B", value = 1 }, { from = "D", to = "101 ft", value = 1 } ]',
            [
                "[0].to: B, must be beyond 100 ft, where the stretch starts",
                "[1].from: D, is not a known name; known are 'A', 'B', 'C', 'mid'",
                "[1].to: 101 ft, must lie on the beam, 0 ft to 100 ft",
            ],
        ),
        (
            '[ { kind = ["moment", "sheer"], source = 7, value = 0 } ]',
            [
                f"[0].kind[1]: sheer, must be {KINDS}",
                "[0].source: 7, must be text",
                "[0].value: 0, must be above 0",
            ],
        ),
    ],
)
def test_distributions(distribution: str, expected: list[str]) -> None:
    found = lines(f"uniform = 1\ndistribution = {distribution}")
    assert found == [f"distribution{line}" for line in expected]


def test_a_missing_distribution_is_said_beside_other_faults() -> None:
    text = changed(BEAM, ('"Two spans"', "7"))
    stated = 'uniform = 1\ndistribution = [ { kind = "shear", value = 1 } ]\n'
    assert lines(stated + '[[moving]]\nname = "N"\nuniform = -1', text) == [
        "cover.title: 7, must be text",
        'distribution: [{ kind = "shear", value = 1 }], must have a value for reaction at A',
        "moving[1].uniform: -1 kip/ft, must be at least 0 kip/ft",
    ]
    # Which effects there are is not known here.
    text = changed(BEAM, ("at = 20", "at = -20"))
    assert lines(stated, text) == [
        "beam.sections[0].at: -20 ft, must lie on the beam, 0 ft to 100 ft"
    ]
    wanted = '[[effects]]\nkind = "moment"\nat = "middle"\n'
    assert lines(stated, BEAM + wanted) == [
        "effects[0].at: middle, is not a known name; nearest is 'mid'"
    ]


@pytest.mark.parametrize(
    ("stretch", "expected"),
    [
        (
            "",
            [
                "from: absent, must be given",
                "to: absent, must be given",
                "source: absent, must be given",
            ],
        ),
        ('from = "A", to = "B"', ["source: absent, must be given"]),
        ('from = "A", to = "B", source = " "', ['source: " ", must not be blank']),
        (
            'from = "B", to = "40 ft", source = "D-2"',
            ["to: 40 ft, must be beyond 40 ft, where the stretch starts"],
        ),
    ],
)
def test_stretches_of_hogging(stretch: str, expected: list[str]) -> None:
    found = lines(f"uniform = 1\nhogging = [ {{ {stretch} }} ]")
    assert found == [f"hogging[0].{line}" for line in expected]


def own_keys() -> str:
    return (
        'axles = []\ntrains = ["T"]\nuniform = 0\ntrailing = []\nrelieving = "count"\n'
        'order = "any"\nspacing = 3\nabsent = "each"\ntable = "axles.csv"'
    )


HL_93 = 'standard = "HL-93"\nvariant = "design"\n'
DYNAMIC = (
    "must be given: the dynamic factor is not in LM71 (EN 1991-2 Traffic loads on bridges, 6.4.5.2)"
)
GO_BY = "must be given: numbers of Cooper E80 go by a length; see calcpack models"
LONG = (
    "is for beams up to 93 m long (IRC 6 Standard specifications and code of practice for road "
    "bridges, section II, 204.1): a fourth vehicle may stand on a longer one: 3 × 18.5 m + "
    "2 × 18.8 m = 93.1 m from the last axle of the first to its first axle"
)


@pytest.mark.parametrize(
    ("text", "stated", "expected"),
    [
        (BEAM, 'standard = "HL93"', ["standard: HL93, is not a known model; nearest is 'HL-93'"]),
        (BEAM, "standard = 93", ["standard: 93, must be text"]),
        (
            BEAM,
            'standard = "HL-93"',
            ['variant: absent, must be "design", "two tandems", "fatigue" or "deflection"'],
        ),
        (
            BEAM,
            'standard = "Cooper E80"\nlength = 40\nvariant = "rails"',
            ['variant: rails, must be "track" or "rail"'],
        ),
        (
            BEAM,
            'standard = "Cooper E80"\nlength = 40\nvariant = ""',
            ['variant: "", must be "track" or "rail"'],
        ),
        (BEAM, 'standard = "HL-93"\nvariant = 1', ["variant: 1, must be text"]),
        (
            METRIC,
            'standard = "LM71"\nallowance = 0\nvariant = "design"',
            ["variant: design, must be left out: LM71 has no variants"],
        ),
        (
            METRIC,
            'standard = "LM71"\nallowance = 0\nscale = 1.2',
            [
                "scale: 1.2, must be one of 0.75, 0.83, 0.91, 1, 1.1, 1.21, 1.33, 1.46 "
                "(EN 1991-2 Traffic loads on bridges)"
            ],
        ),
        (METRIC, 'standard = "LM71"\nallowance = 0\nscale = 1.10', []),
        (BEAM, f"{HL_93}scale = 0", ["scale: 0, must be above 0"]),
        (METRIC, 'standard = "LM71"', [f"allowance: absent, {DYNAMIC}"]),
        (METRIC, 'standard = "LM71"\nallowance = -1', ["allowance: -1, must be at least 0"]),
        (BEAM, 'standard = "Cooper E80"\nvariant = "rail"', [f"length: absent, {GO_BY}"]),
        (
            BEAM,
            'standard = "Cooper E80"\nvariant = "rail"\nlength = 0',
            ["length: 0 ft, must be above 0 ft"],
        ),
        (
            BEAM,
            f"{HL_93}length = 40",
            ["length: 40 ft, must be left out: no number of HL-93 goes by a length"],
        ),
        (
            METRIC,
            'standard = "Cooper E80"',
            [
                'variant: absent, must be "track" or "rail"',
                f"length: absent, {GO_BY}",
                'standard: Cooper E80, needs units = "US", in which its rules by length are stated',
            ],
        ),
        (
            SIMPLE,
            'standard = "SW/0"\nallowance = 0',
            [
                "standard: SW/0, is for continuous beams only "
                "(EN 1991-2 Traffic loads on bridges, 6.3.3, 6.8.1)"
            ],
        ),
        (
            METRIC,
            'standard = "IRC Class A"\nvariant = "steel"\nlength = 40',
            [f"standard: IRC Class A, {LONG}"],
        ),
        (
            BEAM,
            'variant = "design"\nuniform = 1\nscale = 2\nlength = 3\ncompared = "R.A."',
            [
                "variant: design, must be left out without standard",
                "scale: 2, must be left out without standard",
                "length: 3 ft, must be left out without standard",
                "compared: R.A., must be left out without standard",
            ],
        ),
        (
            BEAM,
            f"{HL_93}{own_keys()}",
            [
                "axles: [], must be left out beside standard",
                'trains: ["T"], must be left out beside standard',
                "uniform: 0 kip/ft, must be left out beside standard",
                "trailing: [], must be left out beside standard",
                "relieving: count, must be left out beside standard",
                "order: any, must be left out beside standard",
                "spacing: 3 ft, must be left out beside standard",
                "absent: each, must be left out beside standard",
                "table: axles.csv, must be left out beside standard",
            ],
        ),
    ],
)
def test_published_models(text: str, stated: str, expected: list[str]) -> None:
    assert lines(stated, text) == expected


def test_a_name_like_no_model_lists_them() -> None:
    (line,) = lines('standard = "zz"')
    listed = ", ".join(f"'{name}'" for name in model_names()[:20])
    assert line == f"standard: zz, is not a known model; known are {listed} and more"


def test_of_an_unknown_beam_no_model_is_said_not_to_apply() -> None:
    text = changed(SIMPLE, ("at = 100,", "at = 101,"))
    assert lines('standard = "SW/0"\nallowance = 0', text) == [
        "beam.supports[1].at: 101 m, must lie on the beam, 0 m to 100 m"
    ]


@pytest.mark.parametrize(
    ("compared", "bars"),
    [
        ("", True),
        ('compared = ""\n', True),
        ('compared = " "\n', True),
        ('compared = "R.A."', False),
    ],
)
def test_a_model_from_memory_bars_issued_until_it_was_compared(compared: str, bars: bool) -> None:
    issued = changed(BEAM, ("[beam]", 'package.status = "Issued"\n[beam]'))
    line = (
        'package.status: Issued, must be "For review" until moving[0].compared '
        "says who compared the model with its standard"
    )
    assert lines(HL_93 + compared, issued) == ([line] if bars else [])
    assert lines(HL_93 + compared) == []
    assert lines("uniform = 1", issued) == []
    seen = changed(issued, ('"US"', '"SI"'))
    assert lines('standard = "LM1"\nvariant = "lane 1"', seen) == []


def test_a_load_makes_at_most_64_cases() -> None:
    def trains(count: int, more: str = "") -> list[str]:
        stated = "".join(
            f'[[trains]]\nname = "{n}"\naxles = [ {{ weight = 1 }} ]\n' for n in range(7)
        )
        named = ", ".join(f'"{number}"' for number in range(count))
        return lines(f"trains = [ {named} ]\nspacing = 5\n{more}", BEAM + stated)

    line = ": more than 64 cases, must make at most 64; state fewer trains, or their order"
    assert trains(6) == []
    assert trains(7) == [line]
    assert trains(4, 'order = "any"') == []
    assert trains(5, 'order = "any"') == [line]
    assert trains(7, 'absent = "none"') == []
    assert trains(6, 'absent = "none"\nrelieving = "whole train"') == []
    assert trains(7, 'absent = "none"\nrelieving = "whole train"') == [line]


def test_many_trains_are_refused_at_once() -> None:
    for names, count in ((["Tug"], 64), (["Tug", "Trailer"], 32)):
        named = ", ".join(f'"{name}"' for name in names * count)
        for order in ("fixed", "any"):
            stated = f'trains = [ {named} ]\nspacing = 5\norder = "{order}"'
            line = ": more than 64 cases, must make at most 64; state fewer trains, or their order"
            assert lines(stated, BEAM + TRAINS) == [line] * (len(names) > 1)
    named = ", ".join(['"Tug"'] * 65)
    assert lines(f"trains = [ {named} ]\nspacing = 5", BEAM + TRAINS) == [
        "trains: 65 items, must have at most 64"
    ]
    axles = ", ".join(["{ weight = 1 }", *["{ weight = 1, spacing = 1 }"] * 499])
    long = f'{BEAM}[[trains]]\nname = "L"\naxles = [ {axles} ]\n'
    assert lines('trains = ["L", "L"]\nspacing = 5', long) == []
    assert lines('trains = ["L", "L", "L"]\nspacing = 5', long) == [
        "trains: 1,500 axles, must have at most 1,000 in all"
    ]


def test_gaps_vary_in_at_most_1024_ways() -> None:
    def ranges(count: int, more: str = "") -> str:
        axles = ", ".join(["{ weight = 1 }", *["{ weight = 1, spacing = [4, 5] }"] * count])
        return f"axles = [ {axles}{more} ]"

    line = (
        ": spacings that vary in more than 1,024 ways, "
        "must vary in at most 1,024; state fewer ranges and lists"
    )
    free = ", { weight = 1, spacing = { least = 5 } }"
    assert lines(ranges(10, free)) == []
    assert lines(ranges(11)) == [line]
    assert lines(ranges(999)) == [line]
    for listed, expected in (("1, 2", []), ("1, 2, 3", [line])):
        assert (
            lines(ranges(9, f", {{ weight = 1, spacing = {{ list = [{listed}] }} }}")) == expected
        )
    trains = f'[[trains]]\nname = "R"\n{ranges(5)}\n'
    stated = 'trains = ["R", "R"]\nspacing = '
    assert lines(f"{stated}9", BEAM + trains) == []
    assert lines(f"{stated}[9, 10]", BEAM + trains) == [line]


def test_axles_of_trains_and_loads_are_counted_together() -> None:
    def axles(count: int) -> str:
        return ", ".join(["{ weight = 1 }", *["{ weight = 1, spacing = 1 }"] * (count - 1)])

    trains = f'[[trains]]\nname = "L"\naxles = [ {axles(600)} ]\n'
    assert lines(f"axles = [ {axles(400)} ]", BEAM + trains) == []
    assert lines(f"axles = [ {axles(401)} ]", BEAM + trains) == [
        "axles: 1,001 axles up to here, must leave at most 1,000 axles in all"
    ]


def test_all_faults_come_at_once_in_the_order_of_the_file() -> None:
    text = f"""{BEAM}
[[trains]]
name = "Tug"
axles = [ {{ weight = -1 }} ]
[[moving]]
name = "First"
axles = [ {{ weight = 1 }}, {{ weight = 2, spacing = [9, 4] }} ]
allowance = [ {{ of = "axles", value = 11 }} ]
distribution = [ {{ kind = "moment", value = 0 }} ]
[[moving]]
name = "Second"
standard = "HL-94"
uniform = 3
[[moving]]
name = "First"
trains = ["Tag", "Tug"]
spacing = {{ list = [3, 2] }}
trailing = [ {{ behind = 1, weight = 5 }} ]
[[moving]]
name = "Fourth"
"""
    assert faults(text) == [
        "trains[0].axles[0].weight: -1 kip, must be above 0 kip",
        "moving[0].axles[1].spacing[1]: 4 ft, must be above 9 ft, the least of the range",
        "moving[0].allowance[0].value: 11, must be at most 10",
        "moving[0].distribution[0].value: 0, must be above 0",
        "moving[1].standard: HL-94, is not a known model; nearest is 'HL-93'",
        "moving[1].uniform: 3 kip/ft, must be left out beside standard",
        "moving[2].name: First, must differ from the name at moving[0].name",
        "moving[2].trains[0]: Tag, is not a known train; nearest is 'Tug'",
        "moving[2].spacing.list[1]: 2 ft, must be above the one before it in the list",
        "moving[2].trailing[0].length: absent, must be given beside weight",
        "moving[3]: no load, must have axles, trains, or a uniform load above 0",
    ]
