"""Supports that yield: what they hold, and what is refused of them."""

from __future__ import annotations

from fractions import Fraction

import pytest
from intake_samples import SHORT, SPRUNG, changed, faults

from calcpack.intake import read

WHICH_FACE = 'must be "left" or "right": which face of release r it holds'

SPRING = changed(
    SHORT,
    ("length = 12.0", "length = 12.0\nstiffness = [ { from = 0, to = 12, EI = 1 } ]"),
    ('kind = "roller"', 'kind = "spring", vertical = 4.5'),
)


def test_a_spring_holds_what_is_above_zero() -> None:
    supports = read(SPRUNG.encode()).beam.supports
    assert [one.vertical for one in supports] == [0, Fraction(1801, 2), 600, 0]
    assert [one.rotational for one in supports] == [0, 0, 20000, 0]
    assert [one.holds_vertical for one in supports] == [True, True, True, True]
    assert [one.holds_rotation for one in supports] == [True, False, True, False]
    turned = changed(SPRING, ("vertical = 4.5", 'rotational = "2 kN·mm/mrad"'))
    spring = read(turned.encode()).beam.supports[1]
    assert [spring.vertical, spring.rotational] == [0, 2]
    assert (spring.holds_vertical, spring.holds_rotation) == (False, True)


def test_inputs_hold_both_stiffnesses_of_a_spring() -> None:
    inputs = read(SPRUNG.encode()).inputs
    assert inputs["beam.supports[1].vertical"] == Fraction(1801, 2)
    assert inputs["beam.supports[1].rotational"] == 0
    assert "beam.supports[3].vertical" not in inputs


@pytest.mark.parametrize(
    ("old", "new", "lines"),
    [
        ("4.5", "-4.5", [".vertical: -4.5 kN/m, must be at least 0 kN/m"]),
        (
            "4.5",
            "4.5, rotational = -1",
            [".rotational: -1 kN·m/rad, must be at least 0 kN·m/rad"],
        ),
        ("vertical = 4.5", "face = 'left'", [
            ": no stiffness, must have vertical or rotational above 0",
        ]),
        ("4.5", "0.0, rotational = 0", [
            ": no stiffness, must have vertical or rotational above 0",
        ]),
        ("4.5", '"4 kN"', [".vertical: 4 kN, must be a spring such as 2.5 kN/m"]),
        (
            "4.5",
            '1, rotational = "4 kN/m"',
            [".rotational: 4 kN/m, must be a rotational spring such as 2.5 kN·m/rad"],
        ),
        (
            '"spring"',
            '"roller"',
            ['.vertical: 4.5 kN/m, must be left out without kind = "spring"'],
        ),
        (
            '"spring", vertical = 4.5',
            '"fixed", rotational = 0',
            ['.rotational: 0 kN·m/rad, must be left out without kind = "spring"'],
        ),
        # what kind it is meant to be is not known: no more is said
        (
            '"spring"',
            '"sprung"',
            [
                '.kind: sprung, must be "pin", "roller", "fixed", "guided" or "spring"',
            ],
        ),
    ],
)  # fmt: skip
def test_refused_springs(old: str, new: str, lines: list[str]) -> None:
    assert faults(changed(SPRING, (old, new))) == [f"beam.supports[1]{line}" for line in lines]


@pytest.mark.parametrize(
    ("spring", "release", "face", "needs"),
    [
        ("vertical = 3", "hinge", "", ""),
        ("vertical = 3", "hinge", 'face = "left"', "must be left out: no release here needs it"),
        ("vertical = 3", "slide", "", WHICH_FACE),
        ("vertical = 3", "slide", 'face = "left"', ""),
        ("rotational = 3", "hinge", "", WHICH_FACE),
        ("rotational = 3", "hinge", 'face = "right"', ""),
        ("vertical = 1, rotational = 3", "hinge", 'face = "right"', ""),
        ("rotational = 3", "slide", "", WHICH_FACE),
    ],
)  # fmt: skip
def test_a_spring_at_a_release_says_what_it_holds(
    spring: str, release: str, face: str, needs: str
) -> None:
    stated = f'{{ name = "M", at = 5, kind = "spring", {", ".join(filter(None, (spring, face)))} }}'
    text = changed(
        SPRING,
        ('{ name = "B"', f'{stated}, {{ name = "B"'),
        ("length = 12.0", f'length = 12.0\nreleases = [{{name="r", at=5.0, kind="{release}" }}]'),
    )
    found = faults(text)
    assert [line.partition(", ")[2] for line in found] == ([needs] if needs else [])
    assert all(line.startswith("beam.supports[1].face: ") for line in found)


def test_a_vertical_spring_may_be_all_that_holds_vertically() -> None:
    guided = changed(SPRING, ('"pin"', '"guided"'))
    assert faults(guided) == []
    line = (
        "beam.supports: no vertical support, "
        "must have a pin, a roller, a fixed support or a vertical spring"
    )
    assert faults(changed(guided, ("vertical = 4.5", "rotational = 4.5"))) == [line]
    # one that cannot be read may hold vertically
    assert len(faults(changed(guided, ("4.5", "-4.5")))) == 1


def test_a_spring_needs_stiffness() -> None:
    bare = changed(SPRING, ("\nstiffness = [ { from = 0, to = 12, EI = 1 } ]", ""))
    assert faults(bare) == ["beam.supports[1].kind: spring, needs beam.stiffness"]
    empty = changed(SPRING, ("[ { from = 0, to = 12, EI = 1 } ]", "[]"))
    assert faults(empty) == ["beam.supports[1].kind: spring, needs beam.stiffness"]
    wrong = changed(SPRING, ("[ { from = 0, to = 12, EI = 1 } ]", "7"))
    assert faults(wrong) == ["beam.stiffness: 7, must be a list of tables"]


def test_effects_at_a_spring_are_those_of_what_it_holds() -> None:
    effects = '[[effects]]\nkind = ["reaction", "moment reaction"]\nat = "C"\n'
    found = read((SPRUNG + effects).encode()).effects[-2:]
    assert [one.label for one in found] == ["reaction at C", "moment reaction at C"]
    assert faults(SPRUNG + effects.replace('"C"', '"B"')) == [
        "effects[1].at: B, must be a support that holds rotation, for a moment reaction"
    ]
