"""Permanent loads: supports that settle or turn."""

from __future__ import annotations

from fractions import Fraction

import pytest
from intake_samples import SHORT, SPRUNG, changed, faults

from calcpack.intake import read
from calcpack.model.loads import Permanent, Settlement

LATER = "not computed by this release"

BEAM = """\
format = 1
units = "SI"
cover.title = "Beam"
[beam]
length = 12
supports = [
  { name = "W", at = 0, kind = "fixed" },
  { name = "P", at = 4, kind = "roller" },
  { name = "G", at = 8, kind = "guided" },
  { name = "S", at = 12, kind = "spring", vertical = 5 },
]
sections = [ { name = "mid", at = 6 } ]
stiffness = [ { from = 0, to = 12, EI = 1 } ]
[[moving]]
name = "Cart"
uniform = 1
"""


def settled(*settlements: str, name: str = "Mining") -> str:
    listed = ", ".join(f"{{ {one} }}" for one in settlements)
    return f'{BEAM}[[permanent]]\nname = "{name}"\nsettlements = [ {listed} ]\n'


def test_settlements_in_the_files_units() -> None:
    calculation = read(SPRUNG.encode())
    scour, jacking = calculation.permanent
    assert scour == Permanent(
        "Scour at B",
        (
            Settlement("B", Fraction(40), Fraction(1, 2), Fraction(0),
                       "permanent[0].settlements[0]"),
            Settlement("A", Fraction(0), Fraction(0), Fraction(-1, 500),
                       "permanent[0].settlements[1]"),
        ),
        "permanent[0]",
    )  # fmt: skip
    (lifted,) = jacking.settlements
    assert (lifted.at, lifted.station) == ("C", Fraction(80))
    assert lifted.down * Fraction(254, 10) == -12  # inches to millimetres
    inputs = calculation.inputs
    assert inputs["permanent[0].settlements[0].down"] == Fraction(1, 2)
    assert inputs["permanent[0].settlements[1].turn"] == Fraction(-1, 500)
    assert inputs["permanent[1].settlements[0].down"] == lifted.down


def test_settlements_in_si_units() -> None:
    text = settled('at = "P", down = 15', 'at = "S", down = "1 in"', 'at = "G", turn = 0.001')
    (case,) = read(text.encode()).permanent
    assert [one.down for one in case.settlements] == [15, Fraction(127, 5), 0]
    assert [one.turn for one in case.settlements] == [0, 0, Fraction(1, 1000)]
    assert [one.at for one in case.settlements] == ["P", "S", "G"]


def test_a_support_may_settle_and_turn_and_in_each_case_anew() -> None:
    both = settled('at = "W", down = 1', 'at = "W", turn = 1') + (
        '[[permanent]]\nname = "Later"\nsettlements = [ { at = "400 cm", down = 2 } ]\n'
    )
    found = read(both.encode()).permanent
    assert [len(case.settlements) for case in found] == [2, 1]
    assert (found[1].settlements[0].at, found[1].path) == ("P", "permanent[1]")


def test_without_the_key_there_are_none() -> None:
    assert read(SHORT.encode()).permanent == ()


@pytest.mark.parametrize(
    ("settlement", "line"),
    [
        ('at = "P"', ".down: absent, must be given, or turn"),
        ('at = "W", down = 1, turn = 1', ".turn: 1 rad, must be left out beside down"),
        ('at = "P", down = 0.0', ".down: 0.0 mm, must not be 0"),
        ('at = "W", turn = 0', ".turn: 0 rad, must not be 0"),
        ('at = "P", down = "1 rad"', ".down: 1 rad, must be a deflection such as 2.5 mm"),
        ('at = "W", turn = "1 mm"', ".turn: 1 mm, must be a rotation such as 2.5 rad"),
        ('at = "P", down = true', ".down: true, must be a deflection such as 2.5 mm"),
        ('at = "P", up = 1, down = 1',
         ".up: 1, is not a known key; known are 'at', 'down', 'turn'"),
        ("down = 1", ".at: absent, must be given"),
        ('at = "Q", down = 1', ".at: Q, is not a known name; known are 'W', 'P', 'G', 'S', 'mid'"),
        ("at = 13, down = 1", ".at: 13 m, must lie on the beam, 0 m to 12 m"),
        ('at = "supports", down = 1',
         ".at: supports, is not a known name; known are 'W', 'P', 'G', 'S', 'mid'"),
        ('at = "mid", down = 1', ".at: mid, must be a support that holds vertically, for down"),
        ("at = 5, down = 1", ".at: 5 m, must be a support that holds vertically, for down"),
        ('at = "G", down = 1', ".at: G, must be a support that holds vertically, for down"),
        ('at = "P", turn = 1', ".at: P, must be a support that holds rotation, for turn"),
        ('at = "S", turn = 1', ".at: S, must be a support that holds rotation, for turn"),
    ],
)  # fmt: skip
def test_refused_settlements(settlement: str, line: str) -> None:
    assert faults(settled(settlement)) == [f"permanent[0].settlements[0]{line}"]


def test_the_same_settlement_twice_is_refused() -> None:
    text = settled('at = "W", down = 1', 'at = "W", turn = 1', "at = 0.0, down = 2")
    assert faults(text) == [
        "permanent[0].settlements[2].at: 0.0 m, "
        "must not settle again, after permanent[0].settlements[0]"
    ]


def test_names_are_unique_among_moving_and_permanent() -> None:
    assert faults(settled('at = "P", down = 1', name="Cart")) == [
        "permanent[0].name: Cart, must differ from the name at moving[0].name"
    ]
    twice = settled('at = "P", down = 1') + settled('at = "P", down = 1')[len(BEAM) :]
    assert faults(twice) == [
        "permanent[1].name: Mining, must differ from the name at permanent[0].name"
    ]


@pytest.mark.parametrize(
    ("case", "lines"),
    [
        ('name = "DC"', [": no load, must have a settlement"]),
        ('name = "DC"\nsettlements = []', [": no load, must have a settlement"]),
        ('name = "DC"\nsettlements = 7', [".settlements: 7, must be a list of tables"]),
        ('name = "DC"\nsettlements = [7]', [".settlements[0]: 7, must be a table"]),
        ('settlements = [ { at = "P", down = 1 } ]', [".name: absent, must be given"]),
        ('name = "DC"\nuniform = [ 1 ]', [f".uniform: [1], {LATER}"]),
        ('name = "DC"\npoints = [ 1 ]', [f".points: [1], {LATER}"]),
        ('name = "DC"\ncouples = [ 1 ]', [f".couples: [1], {LATER}"]),
        ('name = "DC"\nstage = "one"\nacts = "directly"', [
            f".stage: one, {LATER}", f".acts: directly, {LATER}",
        ]),
    ],
)  # fmt: skip
def test_refused_cases(case: str, lines: list[str]) -> None:
    assert faults(f"{BEAM}[[permanent]]\n{case}\n") == [f"permanent[0]{line}" for line in lines]


def test_settlements_need_stiffness() -> None:
    bare = changed(
        settled('at = "P", down = 1'), ("stiffness = [", "# ["), ('"spring", vertical = 5', '"pin"')
    )
    assert faults(bare) == [
        'permanent[0].settlements: [{ at = "P", down = 1 }], needs beam.stiffness'
    ]


def test_a_support_that_is_refused_makes_no_further_fault() -> None:
    text = settled('at = "P", down = 1', "at = 8, turn = 1")
    for path, old, new in (
        ("beam.supports[1].kind", '"roller"', '"rollr"'),
        ("beam.supports[2].kind", '"guided"', '"gided"'),
        ("beam.supports[1].at", "at = 4,", "at = 40,"),
        ("beam.length", "length = 12", "length = -1"),
    ):
        assert [line.partition(":")[0] for line in faults(changed(text, (old, new)))] == [path]
