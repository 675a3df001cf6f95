"""What the load language can say, worked out by hand: gaps that vary, strips, cases, factors."""

from __future__ import annotations

from fractions import Fraction
from typing import Literal

import pytest
from beams import Place, make_beam
from loads import Spacing, changed, given, governing_of, make_gap, make_load, make_strip, make_train
from making import broken, line_of

from calcpack.exact.piecewise import Piecewise
from calcpack.model.loads import Applies, Case, MovingLoad, Share, Train
from calcpack.moving.critical import governing, greatest
from calcpack.moving.governing import Governing
from calcpack.moving.target import Target, applies

SPAN = make_beam(10, [(0, "pin"), (10, "roller")], sections=[5])
MIDSPAN = line_of(SPAN, "moment", "1")
"""A tent of 5/2 over midspan."""

SLIDE = make_beam(10, [(0, "fixed"), (10, "roller")], [(4, "slide")], [7])
DROP = line_of(SLIDE, "shear", "1")
"""0 up to the slide at 4, -1 from there to the cut at 7, 0 beyond: two jumps, 3 apart."""

PEAKS = broken((0, 0), (2, 2), (4, 0), (8, 0), (10, 3), (12, 0))
"""Peaks of 2 at 2 and of 3 at 10, 8 apart."""

DIP = broken((0, 0), (2, 2), (4, 0), (6, -1), (8, 0), (10, 3), (12, 0))
"""The same with -1 at 6 between them."""


def exact(*values: Place) -> tuple[Fraction, ...]:
    return tuple(Fraction(value) for value in values)


def stations(found: Governing) -> tuple[Fraction, ...]:
    assert found.position is not None
    return found.position.stations


def standings(found: Governing) -> list[str]:
    return [one.standing for one in found.axles]


def case_name(found: Governing) -> str:
    assert found.case is not None
    return found.case.name


def of_cases(*cases: Case, share: Place = 1) -> MovingLoad:
    return MovingLoad("Load", cases, (Share(given(share, "moving[0].distribution")),), "moving[0]")


def test_a_rate_of_change_that_is_zero_in_the_very_middle() -> None:
    """x (100 - x²) up to 10 and mirrored from there on; two axles 10 apart are best at 5 and 15,
    where the cubes of both cancel: 2 x 5 x 75 = 750. Alone at 10 / √3 one has 384.9."""
    line = Piecewise.from_pieces([(0, 10, (0, 100, 0, -1)), (10, 20, (0, 200, -30, 1))])
    gaps: tuple[Spacing, ...] = (10, (10, None), (10, 12), [10, 13])
    for gap in gaps:
        found = governing_of(line, make_load((1, 0), (1, gap)), 1)
        assert found.value == 750
        assert sorted(stations(found)) == [5, 15]


@pytest.mark.parametrize("hair", ["0", "0.000000001", "0.00000001", "0.0000001"])
def test_a_gap_that_is_a_hair_too_long_for_two_jumps(hair: str) -> None:
    """Jumps 3 apart, to -1 below 4 and above 7, and a peak of -3 at 7.7: 10 there, 6 just right of
    7 and 10 just left of 4 or, as far below 4 as the gap is longer than 3, on the slope of -1/4:
    30 + 6 + 10 (1 - hair / 4)."""
    line = broken(
        (0, 0),
        (4, -1),
        (4, 0),
        (7, 0),
        (7, -1),
        ("7.3", "-0.5"),
        ("7.7", -3),
        ("8.1", "-0.5"),
        (10, 0),
    )
    least = 3 + Fraction(hair)
    load = make_load((10, 0), (6, ("0.5", 1)), (10, (least, "3.1")), headings=("right",))
    assert governing_of(line, load, -1).value == -46 + 10 * Fraction(hair) / 4


@pytest.mark.parametrize(
    ("gap", "value"),
    [
        (3, -10),
        ((3, 5), -10),
        ((3, None), -10),
        ([3, 4], -10),
        ((2, 3), -16),
        (["2.999", 3], -16),
        (("2.999999999999", None), -16),
    ],
)
def test_two_jumps_as_far_apart_as_the_axles(gap: Spacing, value: int) -> None:
    """-1 between 4 and 7. Held 3 or more apart, 6 and 10 never both stand strictly between: the
    greater alone gives 10 x -1. A hair less apart they do: (6 + 10) x -1."""
    found = governing_of(DROP, make_load((6, 0), (10, gap)), -1)
    assert found.value == value
    both = [one for one in found.axles if one.ordinate]
    assert sum(one.weight for one in both) == -value


def test_two_jumps_before_and_behind_a_joint_gap() -> None:
    """Axles of 6, 10 and 8, the last two 3 apart or more, the first wherever it likes ahead: of
    the last two one is between 4 and 7 at most, the first with it if their gap lets it. At most
    2: 6 and 10 give 16, 8 behind them stands left of 4. From 3 on only one of the three: 10."""
    near = make_load((6, 0), (10, (1, 2)), (8, (3, None)), headings=("right",))
    assert governing_of(DROP, near, -1).value == -16
    far = make_load((6, 0), (10, (3, 9)), (8, (3, None)), headings=("right",))
    assert governing_of(DROP, far, -1).value == -10


def test_a_neglected_axle_inside_a_train_that_varies() -> None:
    """10, 4 three to five behind it, 5 two or two and a half behind that; peaks 8 apart. 10 at its
    peak gives 30. The farthest that 5 can follow is 7.5 behind: 5 x 3/2 at 2.5. The 4 then stands
    5 behind at 5, where the line is -1/2: neglected it leaves 37.5, counted it takes 2. Were it
    taken out, 5 could stand at its peak: 30 + 10."""
    load = make_load((10, 0), (4, (3, 5)), (5, (2, "2.5")), headings=("right",))
    neglected = governing_of(DIP, changed(load, relieving="neglect"), 1)
    assert neglected.value == Fraction("37.5")
    assert stations(neglected) == exact(10, 5, "2.5")
    assert standings(neglected) == ["counts", "neglected", "counts"]
    assert governing_of(DIP, load, 1).value == Fraction("35.5")
    without = make_load((10, 0), (5, (5, None)), headings=("right",))
    assert governing_of(DIP, without, 1).value == 40


def test_a_gap_from_a_list() -> None:
    """10 at the peak of 3, 5 behind it at 3, 7 behind, or 1.5, 8.5 behind: 30 + 5 x 1 or 30 + 5 x
    1.5. With all between 7 and 8.5 it stands 8 behind, at the peak of 2: 30 + 10."""
    found = governing_of(PEAKS, make_load((10, 0), (5, [7, "8.5"]), headings=("right",)), 1)
    assert found.value == Fraction("37.5")
    assert stations(found) == exact(10, "1.5")
    ranged = governing_of(PEAKS, make_load((10, 0), (5, (7, "8.5")), headings=("right",)), 1)
    assert ranged.value == 40
    assert stations(ranged) == exact(10, 2)
    assert ranged.position is not None
    assert tuple(group.mark for group in ranged.position.groups) == exact(10, 2)


def test_an_inner_gap_from_a_list_beside_a_range() -> None:
    """10 at its peak, 1 behind it at 9 (1.5) or 8.5 (0.75), 5 at the other peak if from 9 it can
    be 7 behind, but from 8.5 it would be 6.5: 30 + 1.5 + 10 or, up to 6.5 only, 30 + 0.75 + 10."""
    for most, value in ((8, "41.5"), ("6.5", "40.75")):
        load = make_load((10, 0), (1, [1, "1.5"]), (5, (6, most)), headings=("right",))
        assert governing_of(PEAKS, load, 1).value == Fraction(value)


def test_a_follower_that_stays_off_the_beam() -> None:
    """3 at 6, -1 from 4 back and from 8 on: another axle anywhere on the beam takes 10. With no
    upper bound on its gap it waits; at 2 behind it takes 10; at most 5.5 behind it cannot leave."""
    line = broken((0, -1), (4, -1), (6, 3), (8, -1), (12, -1))
    found = governing_of(line, make_load((10, 0), (10, (2, None))), 1)
    assert found.value == 30
    assert sorted(standings(found)) == ["counts", "off the beam"]
    assert governing_of(line, make_load((10, 0), (10, 2)), 1).value == 20
    assert governing_of(line, make_load((10, 0), (10, (2, "5.5"))), 1).value == 20


def test_a_train_partly_on_the_beam() -> None:
    """Reaction at A, 1 - x/10: 10 at A, 10 four behind at 4 (0.6), and a third that follows by 8 at
    least is not on it yet: 16. The last two alone give 10 + 10 x 0.2."""
    line = line_of(SPAN, "reaction", "A")
    load = make_load((10, 0), (10, 4), (10, (8, 14)), headings=("left",))
    found = governing_of(line, load, 1)
    assert found.value == 16
    assert stations(found)[:2] == exact(0, 4)
    assert standings(found) == ["counts", "counts", "off the beam"]
    assert found.near[0].value < 16


def test_a_whole_train_or_none() -> None:
    """1 at 5 and -1 nearly everywhere else: of three axles 2 apart two always relieve one, so the
    train stays away, and does not send one axle only. Uniform load stands on the two halves of the
    peak, 1/2 wide each: 2 x 1/2. If relieving axles are neglected, one counts: 10."""
    line = broken((0, -1), (4, -1), (5, 1), (6, -1), (10, -1))
    load = make_load((10, 0), (10, 2), (10, 2), uniform=2)
    found = governing_of(line, load, 1)
    assert found.value == 1
    assert (found.position, found.axles) == (None, ())
    assert found.loaded == (exact("4.5", "5.5"),)
    assert found.uniform_effect == 1
    assert governing_of(line, changed(load, uniform=None), 1).case is None
    assert governing_of(line, changed(load, relieving="neglect"), 1).value == 11


def test_a_trailing_load_that_governs_with_no_axle_at_the_section() -> None:
    """An axle of 3 with 3 per length on the 4 behind it: from s = 5 on the rate of change is
    -3/2 + 3 ((10 - s)/2 - (s - 4)/2) = 19.5 - 3 s, zero at 6.5. The axle gives 3 x 1.75 = 5.25, the
    strip from 2.5 to 6.5 3 x (4.6875 + 3.1875) = 23.625; neither end is at midspan."""
    load = make_load((3, 0), strips=[make_strip(3, 0, length=4)], headings=("right",))
    found = governing_of(MIDSPAN, load, 1)
    assert found.value == Fraction("28.875")
    assert stations(found) == exact("6.5")
    assert [one.stretches for one in found.strips] == [(exact("2.5", "6.5"),)]
    assert (found.axles_effect, found.trailing_effect) == exact("5.25", "23.625")
    assert found.position is not None
    assert found.position.groups[0].mark is None
    assert found.rates == exact(0, 0)


def test_the_end_of_a_strip_at_a_breakpoint() -> None:
    """The same strip beginning 2 behind an axle of 1, under the shear from -1/2 to 1/2 at 5 (that
    of midspan): it starts to the right of the section and reaches 9; the axle is at 11, off the
    beam. Area (1/2 + 1/10) / 2 x 4 = 1.2, x 3 = 3.6."""
    line = line_of(SPAN, "shear", "1")
    load = make_load((1, 0), strips=[make_strip(3, 2, length=4)], headings=("right",))
    found = governing_of(line, load, 1)
    assert found.value == Fraction("3.6")
    assert stations(found) == exact(11)
    assert found.position is not None
    (group,) = found.position.groups
    assert (group.anchor, group.mark) == (None, Fraction(5))
    assert standings(found) == ["off the beam"]


def test_a_strip_ahead_and_a_broken_one() -> None:
    """2 per length from 1 ahead of an axle of 10 on, without end. At midspan the axle gives 25 and
    the strip from 6 on 2 x (2 x 4 / 2) = 8. On the line with a dip one that may be broken stands on
    both peaks, areas 4 and 6, whole trains of axles having nothing to do with it."""
    load = make_load((10, 0), strips=[make_strip(2, ahead=1)], headings=("right",))
    found = governing_of(MIDSPAN, load, 1)
    assert found.value == 33
    assert stations(found) == exact(5)
    whole = make_load(strips=[make_strip(1, 0)], headings=("right",))
    assert governing_of(DIP, whole, 1).value == 4 - 2 + 6
    parts = make_load(strips=[make_strip(1, 0, broken=True)], headings=("right",))
    found = governing_of(DIP, parts, 1)
    assert found.value == 10
    assert found.strips[0].stretches == (exact(0, 4), exact(8, 12))


def test_a_strip_of_a_whole_force() -> None:
    """12 in all over a length of 4: 3 per length, over the middle 4 of the tent: 3 x (1.5 + 2.5) /
    2 x 4 = 24."""
    strip = make_strip(12, 0, length=4)
    load = make_load(strips=[type(strip)(strip.start, strip.length, strip.amount, of_weight=True)])
    found = governing_of(MIDSPAN, load, 1)
    assert found.value == 24
    assert found.strips[0].stretches == (exact(3, 7),)


OVERHANG = make_beam(20, [(0, "pin"), (16, "roller")], sections=[8])


@pytest.mark.parametrize(
    ("kind", "sense", "value", "stretch"),
    [
        ("shear", 1, "37.5", (8, 18)),
        ("shear", -1, "-40", (0, 8)),
        ("moment", 1, "550", (3, 13)),
        ("moment", -1, "-80", (16, 20)),
    ],
)
def test_a_strip_of_fixed_length_on_an_overhang(
    kind: Literal["shear", "moment"], sense: Literal[1, -1], value: str, stretch: tuple[int, int]
) -> None:
    """20 kN/m on 10 m, supports at 0 and 16, tip at 20, section at 8 (published, see
    det-overhang-moving-udl). Shear: (1/2 x 8 / 2 - 1/8 x 2 / 2) x 20 = 37.5 and -1/2 x 8 / 2 x 20 =
    -40. Moment: equal ordinates 3/2 at 3 and 13, 2 x (3/2 + 4) / 2 x 5 x 20 = 550; on the overhang
    -2 x 4 / 2 x 20 = -80."""
    load = make_load(strips=[make_strip(20, 0, length=10)])
    found = governing_of(line_of(OVERHANG, kind, "1"), load, sense)
    assert found.value == Fraction(value)
    assert [one.stretches for one in found.strips] == [(exact(*stretch),)]


RAIL = (20, 40, 40, 40, 40, 26, 26, 26, 26) * 2
BEHIND = (0, 8, 5, 5, 5, 9, 5, 6, 5, 8, 8, 5, 5, 5, 9, 5, 6, 5)


@pytest.mark.parametrize(
    ("span", "sum_about_far_end", "published"), [(80, 19872, "248.4"), (140, 54962, "392.59")]
)
def test_the_end_shear_of_a_railway_train(
    span: int, sum_about_far_end: int, published: str
) -> None:
    """Two engines per rail and 4 kip/ft from 5 ft behind them on, the second axle at the support
    (e80-V-b). 80 ft: 40 (80 + 75 + 70 + 65) + 26 (56 + 51 + 45 + 40) + 20 x 32 + 40 (24 + 19 + 14
    + 9) + 26 x 0 = 19872. 140 ft: 40 (140 + 135 + 130 + 125) + 26 (116 + 111 + 105 + 100) + 20 x 92
    + 40 (84 + 79 + 74 + 69) + 26 (60 + 55 + 49 + 44) + 4 x 39 x 39 / 2 = 54962."""
    load = make_load(*zip(RAIL, BEHIND, strict=True), strips=[make_strip(4, 5)])
    beam = make_beam(span, [(0, "pin"), (span, "roller")])
    found = governing_of(line_of(beam, "shear", "A"), load, 1)
    assert found.value == Fraction(sum_about_far_end, span)
    assert float(found.value) == pytest.approx(float(published), abs=0.005)
    assert stations(found)[1] == 0
    assert found.trailing_effect == (Fraction(4 * 39**2, 2 * span) if span == 140 else 0)


A_LEADS, B_LEADS, A_ALONE, B_ALONE = "A, B", "B, A", "A", "B"


def in_any_order(apart: Place) -> MovingLoad:
    """A of 12 and B of 6, in either order so far apart, or one of them alone; heading right."""
    a, b = make_train((12, 0), path="a"), make_train((6, 0), path="b")
    gap = (make_gap(apart, "apart"),)

    def case(name: str, *trains: Train) -> Case:
        return Case(name, trains, gap[: len(trains) - 1], headings=("right",))

    return of_cases(case(A_LEADS, a, b), case(B_LEADS, b, a), case(A_ALONE, a), case(B_ALONE, b))


def test_two_trains_in_either_order() -> None:
    """Reaction at A, 1 - x/10, trains 4 apart: B at A and A behind it cannot both help; A at A with
    B ahead at 4 gives 12 + 6 x 0.6 = 15.6; with A ahead at 4 and B at A, 6 + 12 x 0.6 = 13.2."""
    found = governing_of(line_of(SPAN, "reaction", "A"), in_any_order(4), 1)
    assert (case_name(found), found.value) == (B_LEADS, Fraction("15.6"))
    assert stations(found) == exact(4, 0)
    (other,) = {one.value for one in found.near if one.case.name == A_LEADS and one.value > 12}
    assert other == Fraction("13.2")


def test_a_train_that_is_absent() -> None:
    """Shear at midspan of a simple span under loads on its right half, 1/2 at the section. A just
    right of it gives 6. B 4 behind takes 6 x 0.1, B 4 ahead adds it: 6.6. On a line that is -1/2
    on both sides of the peak B takes 3 in either order, and stays away."""
    found = governing_of(line_of(SPAN, "shear", "1"), in_any_order(4), 1)
    assert (case_name(found), found.value) == (B_LEADS, Fraction("6.6"))
    line = broken((0, "-1/2"), (4, "-1/2"), (5, "1/2"), (6, "-1/2"), (10, "-1/2"))
    found = governing_of(line, in_any_order(4), 1)
    assert (case_name(found), found.value) == (A_ALONE, Fraction(6))
    assert {one.case.name: one.value for one in reversed(found.near)}[B_LEADS] == 3


def test_forces_that_float() -> None:
    """8 and 12, each in another span: 12 at the peak of 3 and 8 at the 1 of the other span, though
    2.5 is higher; one of them only where all is one span. (36 + 8) x 1.25 with the allowance."""
    line = broken((0, 0), (2, 3), (4, 1), (6, "2.5"), (10, 0), (15, 1), (20, 0))
    forces = (given(8, "forces[0]"), given(12, "forces[1]"))
    case = Case("", concentrated=forces, allowances=(("axles", given("0.25", "allowance")),))
    middle = Fraction(10)
    spans = (Fraction(0), middle), (middle, Fraction(20))
    (found,) = governing([Target(line, spans=spans)], of_cases(case), 1)
    assert found.static == 44
    assert found.value == 55
    assert [(one.weight, one.at) for one in found.concentrated] == [exact(12, 2), exact(8, 15)]
    assert governing_of(line, of_cases(case), 1).static == 36
    assert governing_of(line, of_cases(case), -1).value == 0


def test_a_floating_force_beside_a_jump() -> None:
    """The shear at midspan: 10 just right of the section for the greatest, just left for the
    least."""
    line = line_of(SPAN, "shear", "1")
    load = of_cases(Case("", concentrated=(given(10, "force"),)))
    for sense, side in ((1, "right"), (-1, "left")):
        found = governing_of(line, load, 1 if sense > 0 else -1)
        assert found.value == sense * 5
        assert [one.at for one in found.concentrated] == [5]
        assert [one.side for one in found.concentrated] == [side]


def test_an_allowance_for_each_part() -> None:
    """Axle 10 at midspan: 25, x 1.3. Strip of 2 from 1 behind it back: 2 x (2 x 4 / 2) = 8, x 1.1.
    Uniform 4 on all: 4 x 12.5 = 50, without. (32.5 + 8.8 + 50) x factors 0.9 and 1.5 x share 0.8;
    the allowances alone decide nothing here, for the axle may not leave midspan."""
    load = make_load((10, 0), uniform=4, strips=[make_strip(2, 1)], headings=("right",))
    load = changed(
        load,
        allowances=(("axles", given("0.3", "a")), ("trailing", given("0.1", "t"))),
        factors=(given("0.9", "m"), given("1.5", "n")),
    )
    load = of_cases(*load.cases, share="0.8")
    found = governing_of(MIDSPAN, load, 1)
    assert found.static == 25 + 8 + 50
    assert found.value == Fraction("91.3") * Fraction("0.9") * Fraction("1.5") * Fraction("0.8")
    assert greatest([Target(MIDSPAN)], load, 1) == pytest.approx([float(found.value)])


def test_an_allowance_moves_the_place_that_governs() -> None:
    """An axle of 1 before a strip of 1 per length on the 4 behind it: the rate of change from 5 on
    is -k/2 + (7 - s), zero at 7 - k/2. Axles raised by 3: k = 4, s = 5; by 1: k = 2, s = 6."""
    for allowance, at in ((1, 6), (2, "5.5"), (0, "6.5")):
        load = make_load(
            (1, 0), strips=[make_strip(1, 0, length=4)], headings=("right",), allowance=allowance
        )
        assert stations(governing_of(MIDSPAN, load, 1)) == exact(at)


def test_factors_decide_between_cases() -> None:
    """One axle of 10 with the factor 1.2: 30; two of 6 that are 2 apart: 15 + 9 = 24, x 1.3."""
    cases = [
        Case("one", make_load((10, 0)).cases[0].trains, factors=(given("1.2", "k1"),)),
        Case("two", make_load((6, 0), (6, 2)).cases[0].trains, factors=(given("1.3", "k2"),)),
    ]
    found = governing_of(MIDSPAN, of_cases(*cases), 1)
    assert (case_name(found), found.value) == ("two", Fraction("31.2"))
    assert case_name(governing_of(MIDSPAN, of_cases(cases[0]), 1)) == "one"
    (one,) = {near.value for near in found.near if near.case.name == "one"}
    assert one == 30


def test_a_plateau_is_one_range() -> None:
    """A strip of 14 on a span of 10 covers all of it, 12.5, while its front is from 10 to 14."""
    load = make_load(strips=[make_strip(2, 0, length=14)], headings=("right",))
    found = governing_of(MIDSPAN, load, 1)
    assert found.value == 25
    assert stations(found) == exact(10)
    (tie,) = found.ties
    assert (tie.first.position.lead_at, tie.last.position.lead_at) == exact(10, 14)
    assert found.rates is not None
    assert found.rates[1] == 0


def test_two_peaks_are_no_range() -> None:
    """Equal peaks: two ties, each a place of its own, the line falling between them."""
    line = broken((0, 0), (2, 2), (5, 0), (8, 2), (10, 0))
    found = governing_of(line, make_load((10, 0), headings=("right",)), 1)
    assert (found.value, *stations(found)) == exact(20, 2)
    (tie,) = found.ties
    assert tie.first is tie.last
    assert tie.first.position.lead_at == 8


TWO_SPANS = make_beam(20, [(0, "pin"), (10, "roller"), (20, "roller")], sections=[4, 7, 8])
ONE, TWO = "one truck", "two trucks"


def trucks() -> MovingLoad:
    """One axle of 10 with 1 per length; or two that are 10 apart or more, all of it x 0.9, for
    moments where the girder hogs and for reactions between its ends."""
    uniform = given(1, "lane")
    one = make_train((10, 0), path="truck")
    rule = (Applies(("moment",), -1, "hogging"), Applies(("reaction",), 1, "interior"))
    two = Case(
        TWO,
        (one, one),
        (make_gap((10, None), "apart"),),
        uniform,
        factors=(given("0.9", "factor"),),
        applies=rule,
    )
    return of_cases(Case(ONE, (one,), (), uniform), two)


def target(kind: Literal["moment", "reaction", "shear"], at: str) -> Target:
    station = TWO_SPANS.station(at).at
    face: Literal["left"] | None = "left" if kind == "shear" else None
    line = line_of(TWO_SPANS, kind, at, face)
    return Target(line, kind, station, kind == "reaction" and at == "B")


def test_the_rule_of_two_trucks_applies_where_it_should() -> None:
    """Under a uniform load on both spans of l = 10 the moment is w x (3/8 l - x/2), negative beyond
    7.5: at 8 and at B. Only there for the least moment, and for the greatest reaction at B."""
    load = trucks()
    two = load.cases[1]
    found = {
        (kind, at, sense)
        for kind, places in (("moment", "B478"), ("reaction", "ABC"), ("shear", "B"))
        for at in places.replace("4", "1").replace("7", "2").replace("8", "3")
        for sense in (1, -1)
        if applies(two, load, target(kind, at), sense)  # type: ignore[arg-type]
    }
    assert found == {("moment", "B", -1), ("moment", "3", -1), ("reaction", "B", 1)}
    assert applies(load.cases[0], load, target("shear", "B"), -1)


def test_two_trucks_at_an_interior_support() -> None:
    """Reaction at B under a at distance from A: a (3 l² - a²) / (2 l³), 11/16 at 5. Two axles 10
    apart stand best 5 either side: 13.75. Area 2 x 5/8 l = 12.5. 0.9 (13.75 + 12.5) = 23.625;
    one truck at B gives 10 + 12.5. At A no more than one truck's 10 + 3/8 l + 0.625."""
    (found,) = governing([target("reaction", "B")], trucks(), 1)
    assert (case_name(found), found.value) == (TWO, Fraction("23.625"))
    assert stations(found) == exact(15, 5)
    assert found.case is not None
    assert found.case.factor == Fraction("0.9")
    (other,) = {one.value for one in found.near if one.case.name == ONE and one.value > 22}
    assert other == Fraction("22.5")
    (end,) = governing([target("reaction", "A")], trucks(), 1)
    assert (case_name(end), end.axles_effect) == (ONE, Fraction(10))


def test_two_trucks_over_a_support_that_hogs() -> None:
    """Moment at B: -a (l² - a²) / (4 l²), -15/16 at 5. Two axles 10 apart either side: -18.75, area
    -l² / 8 = -12.5: 0.9 x -31.25 = -28.125. One truck at l / √3: -10 l / (6 √3) - 12.5 = -22.12."""
    (found,) = governing([target("moment", "B")], trucks(), -1)
    assert (case_name(found), found.value) == (TWO, Fraction("-28.125"))
    assert stations(found) == exact(15, 5)
    alone = -100 / (6 * 3**0.5) - 12.5
    values = [float(one.value) for one in found.near if one.case.name == ONE]
    assert values == [] or values[0] == pytest.approx(alone, abs=1e-9)


def test_stretches_that_the_engineer_states() -> None:
    """What is stated to hog counts instead of what does: B is left out, 4 is put in."""
    load = trucks()
    stated = MovingLoad(
        load.name,
        load.cases,
        load.shares,
        load.path,
        hogging=(exact(3, 5), exact(12, 14)),  # type: ignore[arg-type]
    )
    two = stated.cases[1]
    assert not applies(two, stated, target("moment", "B"), -1)
    assert not applies(two, stated, target("moment", "3"), -1)
    assert applies(two, stated, target("moment", "1"), -1)
    assert not applies(two, stated, target("moment", "1"), 1)
    assert applies(two, stated, target("reaction", "B"), 1)
    (found,) = governing([target("moment", "B")], stated, -1)
    assert case_name(found) == ONE
    assert float(found.value) == pytest.approx(-100 / (6 * 3**0.5) - 12.5, abs=1e-9)
