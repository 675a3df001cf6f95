"""Loads of the engineer's own: spacings of every form, trains and their orders, strips, shares."""

from __future__ import annotations

from fractions import Fraction

import pytest
from intake_samples import LOADS, SHORT, SI, US, givens

from calcpack.intake import read
from calcpack.model.loads import Axle, Case, Gap, Given, MovingLoad, Share, Strip

TRAINS = """\
[[trains]]
name = "S"
axles = [ { weight = 1 } ]
[[trains]]
name = "T"
axles = [ { weight = 2 }, { weight = 3, spacing = 4 } ]
[[trains]]
name = "U"
axles = [ { weight = 5 } ]
"""


def load(stated: str, before: str = "") -> MovingLoad:
    (found,) = read(f'{SHORT}{before}[[moving]]\nname = "M"\n{stated}\n'.encode()).moving
    return found


def named(stated: str) -> list[str]:
    """The names of the cases of a load of trains S, T and U."""
    return [case.name for case in load(stated, TRAINS).cases]


def one(value: int | str, path: str) -> Given:
    return Given(Fraction(value), path)


@pytest.mark.parametrize(
    ("spacing", "gap"),
    [
        ("4.5", Gap((one("4.5", ""),))),
        ('"450 cm"', Gap((one("4.5", ""),))),
        ("[4, 9]", Gap((one(4, "[0]"), one(9, "[1]")), True)),
        ("{ list = [6, 11] }", Gap((one(6, ".list[0]"), one(11, ".list[1]")))),
        ("{ list = [6] }", Gap((one(6, ".list[0]"),))),
        ("{ least = 15 }", Gap((one(15, ".least"),), True)),
    ],
)
def test_a_spacing_has_four_forms(spacing: str, gap: Gap) -> None:
    def at(place: str) -> Gap:
        ties = (Given(tie.value, place + tie.path) for tie in gap.ties)
        return Gap(tuple(ties), gap.free)

    (case,) = load(f"axles = [ {{ weight = 1 }}, {{ weight = 2, spacing = {spacing} }} ]").cases
    assert case.axles == (
        Axle(one(1, "moving[0].axles[0].weight"), None),
        Axle(one(2, "moving[0].axles[1].weight"), at("moving[0].axles[1].spacing")),
    )
    (case,) = load(f'trains = ["S", "T"]\nabsent = "none"\nspacing = {spacing}', TRAINS).cases
    assert case.gaps == (at("moving[0].spacing"),)
    assert [axle.gap for axle in case.axles] == [
        None,
        at("moving[0].spacing"),
        Gap((one(4, "trains[1].axles[1].spacing"),)),
    ]


def test_the_lead_axle_may_say_that_nothing_is_ahead() -> None:
    stated, silent = (
        load(f"axles = [ {{ weight = 1{lead} }}, {{ weight = 2, spacing = 3 }} ]")
        for lead in (", spacing = 0.0", "")
    )
    assert stated == silent


def test_trains_keep_their_order_and_each_may_be_missing() -> None:
    assert named('trains = ["S", "T", "U"]\nspacing = 9') == [
        "S, T, U", "S, T", "S, U", "T, U", "S", "T", "U",
    ]  # fmt: skip


def test_trains_that_can_pass_come_in_any_order() -> None:
    assert named('trains = ["S", "T", "U"]\nspacing = 9\norder = "any"\nabsent = "none"') == [
        "S, T, U", "S, U, T", "T, S, U", "T, U, S", "U, S, T", "U, T, S",
    ]  # fmt: skip
    assert named('trains = ["S", "T"]\nspacing = 9\norder = "any"') == ["S, T", "T, S", "S", "T"]


def test_trains_of_one_name_are_not_told_apart() -> None:
    assert named('trains = ["S", "S", "T"]\nspacing = 9') == ["S, S, T", "S, S", "S, T", "S", "T"]
    every = named('trains = ["S", "S", "T"]\nspacing = 9\norder = "any"')
    assert every == ["S, S, T", "S, T, S", "T, S, S", "S, S", "S, T", "T, S", "S", "T"]


def test_one_train_alone_needs_no_spacing_and_no_name() -> None:
    (case,) = load('trains = ["T"]', TRAINS).cases
    assert (case.name, case.gaps, [train.name for train in case.trains]) == ("", (), ["T"])


def test_gaps_between_trains_are_as_many_as_there_are_trains() -> None:
    three, *others = load('trains = ["S", "T", "U"]\nspacing = { least = 9 }', TRAINS).cases
    gap = Gap((one(9, "moving[0].spacing.least"),), True)
    assert three.gaps == (gap, gap)
    assert [len(case.gaps) for case in others] == [1, 1, 1, 0, 0, 0]


def acting(cases: tuple[Case, ...]) -> list[list[bool]]:
    return [[axle.acts for axle in case.axles] for case in cases]


def test_axles_of_a_whole_train_act_or_keep_their_places() -> None:
    found = load('trains = ["S", "T"]\nspacing = 9\nrelieving = "whole train"', TRAINS)
    assert [case.name for case in found.cases] == [
        "S, T", "S, T, without the axles of S", "S, T, without the axles of T", "S", "T",
    ]  # fmt: skip
    assert acting(found.cases) == [
        [True] * 3, [False, True, True], [True, False, False], [True], [True] * 2,
    ]  # fmt: skip
    assert {case.relieving for case in found.cases} == {"count"}
    alone = load('axles = [ { weight = 1 } ]\nrelieving = "whole train"')
    assert acting(alone.cases) == [[True]]
    hauling = load(
        "axles = [ { weight = 1 } ]\ntrailing = [ { behind = 2, load = 3 } ]\n"
        'relieving = "whole train"'
    )
    assert acting(hauling.cases) == [[True], [False]]


@pytest.mark.parametrize(
    ("word", "relieving"), [("count", "count"), ("neglect", "neglect"), (None, "count")]
)
def test_relieving_axles(word: str | None, relieving: str) -> None:
    stated = f'relieving = "{word}"' if word else ""
    assert load(f"axles = [ {{ weight = 1 }} ]\n{stated}").cases[0].relieving == relieving


@pytest.mark.parametrize(
    ("word", "headings"),
    [
        ("right", ("right",)),
        ("left", ("left",)),
        ("both", ("right", "left")),
        (None, ("right", "left")),
    ],
)
def test_headings(word: str | None, headings: tuple[str, ...]) -> None:
    stated = f'heading = "{word}"' if word else ""
    assert load(f"uniform = 1\n{stated}").cases[0].headings == headings


STRIPS = """\
trailing = [
  { behind = 5, load = 8 },
  { ahead = 0, weight = 30, length = 6, extent = "in parts" },
  { behind = 9.5, load = 2, length = 4, extent = "unbroken" },
]
"""
AT = "moving[0].trailing"
BEHIND = Strip(one(5, f"{AT}[0].behind"), None, one(8, f"{AT}[0].load"))
AHEAD = Strip(
    one(0, f"{AT}[1].ahead"),
    one(6, f"{AT}[1].length"),
    one(30, f"{AT}[1].weight"),
    ahead=True,
    broken=True,
    of_weight=True,
)
FURTHER = Strip(one("9.5", f"{AT}[2].behind"), one(4, f"{AT}[2].length"), one(2, f"{AT}[2].load"))


def test_loads_ahead_go_with_the_first_train_and_those_behind_with_the_last() -> None:
    for case in load(f'trains = ["S", "T", "U"]\nspacing = 9\n{STRIPS}', TRAINS).cases:
        first, *others = [train.strips for train in case.trains]
        *inner, last = others or [first]
        assert set(first) >= {AHEAD}
        assert set(last) >= {BEHIND, FURTHER}
        assert not any(inner)
        assert len({*first, *last}) == 3
    assert [AHEAD.intensity, FURTHER.intensity] == [5, 2]


def test_loads_without_axles_travel_with_their_foremost_point() -> None:
    (case,) = load(STRIPS).cases
    assert case.axles == (Axle(Given(Fraction(0), ""), None, acts=False),)
    assert case.trains[0].strips == (BEHIND, AHEAD, FURTHER)


def test_an_allowance_is_one_on_axles_or_one_by_part() -> None:
    axles = "axles = [ { weight = 1 } ]\n"
    (case,) = load(axles + "allowance = 0.3").cases
    assert case.allowances == (("axles", one("3/10", "moving[0].allowance")),)
    (case,) = load(
        axles + 'allowance = [ { of = "trailing", value = 0.2 }, { of = "axles", value = 0 },'
        ' { of = "uniform", value = 0.1, source = "clause 7" } ]'
    ).cases
    assert case.allowances == (
        ("trailing", one("1/5", "moving[0].allowance[0].value")),
        ("uniform", one("1/10", "moving[0].allowance[2].value")),
    )
    assert load(axles).cases[0].allowances == ()


def test_shares_by_kind_and_region_the_first_counts() -> None:
    found = load(
        'uniform = 1\ndistribution = [ { kind = ["moment", "shear"], from = "A", to = "6 m",'
        ' value = 0.7, source = "D-1" }, { kind = "moment", value = 0.6 }, { value = 0.5 } ]'
    )
    assert found.shares == (
        Share(one("7/10", "moving[0].distribution[0].value"),
              ("moment", "shear"), Fraction(0), Fraction(6), "D-1"),
        Share(one("3/5", "moving[0].distribution[1].value"), ("moment",)),
        Share(one("1/2", "moving[0].distribution[2].value")),
    )  # fmt: skip
    taken = {
        (kind, at): found.share(kind, Fraction(at))
        for kind in ("moment", "shear", "reaction")
        for at in (6, 7)
    }
    assert {place: share and share.value.value * 10 for place, share in taken.items()} == {
        ("moment", 6): 7, ("moment", 7): 6,
        ("shear", 6): 7, ("shear", 7): 5,
        ("reaction", 6): 5, ("reaction", 7): 5,
    }  # fmt: skip
    assert load("uniform = 1").shares == (Share(one(1, "moving[0].distribution")),)


def test_stretches_of_hogging() -> None:
    assert load("uniform = 1").hogging is None
    stated = 'uniform = 1\nhogging = [ { from = 3, to = "B", source = "D-2" } ]'
    assert load(stated).hogging == ((Fraction(3), Fraction(12)),)


@pytest.mark.parametrize(
    ("text", "least"), [(US, 8), (SI, 6), (LOADS, 60)], ids=["US", "SI", "loads"]
)
def test_every_number_of_a_load_is_an_input(text: str, least: int) -> None:
    calculation = read(text.encode())
    cited = {
        one for load in calculation.moving for one in givens((load.cases, load.shares)) if one.path
    }
    for one in cited:
        if one.rule is None:
            assert calculation.inputs[one.path] == one.value
        else:
            assert one.path not in calculation.inputs
    assert len(cited) >= least
