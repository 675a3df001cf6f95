"""Governing positions worked out by hand."""

from __future__ import annotations

from fractions import Fraction
from typing import Literal

import pytest
from beams import make_beam
from loads import governing_of, make_load, stand
from making import broken, line_of

from calcpack.exact.piecewise import Piecewise, Side
from calcpack.model.loads import Heading
from calcpack.moving.governing import Governing
from calcpack.moving.placement import axle_shares, rate

SENSES: tuple[Literal[1, -1], ...] = (1, -1)
SIDES: tuple[Side, ...] = ("left", "right")
SPAN = make_beam(10, [(0, "pin"), (10, "roller")], sections=[5])
MIDSPAN = line_of(SPAN, "moment", "1")
"""A tent of 5/2 over midspan."""

SLIDE = make_beam(10, [(0, "fixed"), (10, "roller")], [(4, "slide")], [7])
DROP = line_of(SLIDE, "shear", "1")
"""0 up to the slide at 4, -1 from there to the cut at 7, 0 beyond: two jumps, 3 apart."""


def exact(*values: int | str) -> tuple[Fraction, ...]:
    return tuple(Fraction(value) for value in values)


def lead(at: int, heading: Heading = "right") -> tuple[Heading, Fraction]:
    return heading, Fraction(at)


def where(found: Governing) -> tuple[Heading, Fraction]:
    assert found.position is not None
    return found.position.heading, found.position.lead_at


def test_the_line_with_two_jumps() -> None:
    assert broken((0, 0), (4, 0), (4, -1), (7, -1), (7, 0), (10, 0)) == DROP


def test_all_axles_stand_on_one_side_of_coinciding_jumps() -> None:
    """Two axles as far apart as the jumps: one counts, whichever side the train stands on; each
    axle on its own better side would double that."""
    found = governing_of(DROP, make_load((6, 0), (10, 3)), -1)
    assert found.value == -10
    (share,) = [one for one in found.axles if one.ordinate]
    assert (share.weight, share.ordinate) == exact(10, -1)
    assert governing_of(DROP, make_load((6, 0), (10, "2.999")), -1).value == -16
    assert governing_of(DROP, make_load((6, 0), (10, "3.001")), -1).value == -10
    assert governing_of(DROP, make_load((6, 0), (10, 3)), 1).value == 0


@pytest.mark.parametrize("scale", [1, 1000, 100_000])
def test_axles_that_fit_between_two_jumps_by_a_hair(scale: int) -> None:
    """6 and 10 a millionth of a millionth closer than the jumps: both count, beside an axle of 12
    that governs alone, and whatever small ones follow it."""
    start, end = Fraction("1.4") * scale, Fraction("1.4") * scale + 3
    beam = make_beam(2 * end, [(0, "fixed"), (2 * end, "roller")], [(start, "slide")], [end])
    small = [("0.001", "0.2")] * 12
    for spacing, value in (("2.999999999999", -16), (3, Fraction("-12.012"))):
        load = make_load((6, 0), (10, spacing), (12, 20), *small)
        assert governing_of(line_of(beam, "shear", "1"), load, -1).value == value


def test_axles_at_one_place_take_one_side() -> None:
    """Spacing 0 at the jump of a shear line from -1/2 to +1/2."""
    found = governing_of(line_of(SPAN, "shear", "1"), make_load((4, 0), (6, 0)), 1)
    assert found.value == 5
    assert {one.ordinate for one in found.axles} == {Fraction(1, 2)}
    assert found.position is not None
    assert [group.side for group in found.position.groups] == ["right"]


def test_a_single_axle() -> None:
    found = governing_of(MIDSPAN, make_load((12, 0), headings=("right",)), 1)
    assert found.value == 30
    assert where(found) == lead(5)
    assert found.looked_at == 3
    assert found.rates == exact(6, -6)
    assert found.near == ()  # at both ends of the beam it does nothing
    least = governing_of(MIDSPAN, make_load((12, 0)), -1)
    assert least.value == 0
    assert least.position is None


def test_an_axle_over_the_peak_and_one_behind() -> None:
    """Heading right 12 over midspan and 6 three behind at 1: 30 + 6 = 36; heading left the same
    mirrored. With 6 over midspan: 15 + 12 = 27."""
    found = governing_of(MIDSPAN, make_load((12, 0), (6, 3)), 1)
    assert found.value == 36
    assert where(found) == lead(5)
    (tie,) = found.ties
    assert tie.first is tie.last
    assert (tie.first.position.heading, tie.first.position.lead_at) == lead(5, "left")
    assert found.near[0].value == 27
    (group,) = found.near[0].position.groups
    assert (group.anchor, group.mark) == (1, Fraction(5))
    assert found.near[0].position.lead_at == 8
    assert [one.at for one in found.axles] == [5, 2]
    assert [one.ordinate for one in found.axles] == [Fraction(5, 2), 1]
    assert found.rates == exact(9, -3)


def test_equal_axles_tie_while_they_straddle_the_peak() -> None:
    """Two axles of 8 two apart: 20 + 12 wherever they straddle midspan."""
    found = governing_of(MIDSPAN, make_load((8, 0), (8, 2)), 1)
    assert found.value == 32
    assert where(found) == lead(5)
    ties = [
        (one.first.position.heading, one.first.position.lead_at, one.last.position.lead_at)
        for one in found.ties
    ]
    assert ties == [("right", *exact(5, 7)), ("left", *exact(3, 5))]
    assert found.rates == exact(8, 0)
    assert found.looked_at == 12


@pytest.mark.parametrize(("heading", "value", "at"), [("right", "18.1", 10), ("left", "17.6", 7)])
def test_the_heading_decides(heading: Heading, value: str, at: int) -> None:
    """Reaction at B, 1 there and x/10 elsewhere, under 10, 2 one behind and 9 two more behind: the
    foremost at B gives 10 + 2 x 0.9 + 9 x 0.7, heading left the last there 9 + 2 x 0.8 + 10 x 0.7.
    """
    load = make_load((10, 0), (2, 1), (9, 2), headings=(heading,))
    found = governing_of(line_of(SPAN, "reaction", "B"), load, 1)
    assert found.value == Fraction(value)
    assert where(found) == lead(at, heading)


def test_wheels_partly_on_the_beam() -> None:
    """Ten each, eight apart: one at midspan and the other off the beam gives 25, both on it 10."""
    found = governing_of(MIDSPAN, make_load((10, 0), (10, 8)), 1)
    assert found.value == 25
    assert sorted(one.standing for one in found.axles) == ["counts", "off the beam"]
    off = next(one for one in found.axles if one.standing == "off the beam")
    assert (off.ordinate, off.effect) == exact(0, 0)


def test_a_train_longer_than_the_beam() -> None:
    """Twelve apart on a span of ten: never more than one axle, so the heaviest at midspan."""
    found = governing_of(MIDSPAN, make_load((5, 0), (7, 12), (6, 12)), 1)
    assert found.value == Fraction(35, 2)
    assert [one.standing for one in found.axles] == ["off the beam", "counts", "off the beam"]
    assert where(found)[1] in (17, -7)


def test_an_axle_at_the_very_end_counts() -> None:
    """The shear at a wall is 1 for a load anywhere: two axles as far apart as the beam is long both
    count at its two ends, and no longer if they are a hair farther apart."""
    wall = line_of(make_beam(6, [(0, "fixed")]), "shear", "A")
    assert governing_of(wall, make_load((3, 0), (4, 6)), 1).value == 7
    assert governing_of(wall, make_load((3, 0), (4, "6.000001")), 1).value == 4
    tip = line_of(make_beam(6, [(0, "fixed")]), "moment", "A")
    found = governing_of(tip, make_load((3, 0), (4, 2)), -1)
    assert found.value == -(4 * 6 + 3 * 4)
    assert {one.at for one in found.axles} == {6, 4}


def test_an_axle_just_off_the_end_does_not_relieve() -> None:
    """An overhang relieves midspan; at the event where an axle stands at its tip the train may
    stand just beyond, and then only the other counts: 10 x 3 at midspan."""
    beam = make_beam(16, [(0, "pin"), (12, "roller")], sections=[6])
    line = line_of(beam, "moment", "1")
    assert line == broken((0, 0), (6, 3), (12, 0), (16, -2))
    found = governing_of(line, make_load((4, 0), (10, 10), headings=("right",)), 1)
    assert found.value == 30
    assert found.position is not None
    assert not any(group.ends_count for group in found.position.groups)
    assert [one.standing for one in found.axles] == ["off the beam", "counts"]
    assert found.near[0].value < 30


def test_neglected_axles_keep_their_place() -> None:
    """Both axles of 10 eight apart: one at midspan (5/2), the other on an overhang (-3/2)."""
    beam = make_beam(18, [(4, "pin"), (14, "roller")], sections=[9])
    line = line_of(beam, "moment", "1")
    counted = governing_of(line, make_load((10, 0), (10, 8)), 1)
    assert counted.value == 20  # it waits until the other is off the beam or on a support
    neglected = governing_of(line, make_load((10, 0), (10, 8), relieving="neglect"), 1)
    assert neglected.value == 25
    other = next(one for one in neglected.axles if one.standing == "neglected")
    assert (other.ordinate, other.effect) == exact("-3/2", 0)
    assert neglected.rates == exact(5, -5)


def test_zero_ordinates_everywhere() -> None:
    """At a hinge there is no moment: nothing governs, under axles and uniform load alike."""
    beam = make_beam(12, [(0, "pin"), (6, "roller"), (12, "roller")], [(8, "hinge")])
    line = line_of(beam, "moment", "r1")
    assert line == broken((0, 0), (12, 0))
    for sense in SENSES:
        found = governing_of(line, make_load((10, 0), (10, 8), uniform=2), sense)
        assert found.value == found.area == 0
        assert (found.position, found.rates) == (None, None)
        assert not any((found.loaded, found.axles, found.ties, found.near))


def test_uniform_load_stands_where_it_helps() -> None:
    """Simple span of 8 with an overhang of 4, reaction at A: area 4 and -1; the allowance raises
    the axles only, the share takes of both."""
    line = line_of(make_beam(12, [(0, "pin"), (8, "roller")]), "reaction", "A")
    load = make_load((10, 0), uniform=3, allowance="0.3", distribution="0.5")
    most, least = governing_of(line, load, 1), governing_of(line, load, -1)
    assert (most.area, most.uniform_effect) == exact(4, 12)
    assert most.loaded == (exact(0, 8),)
    assert most.value == (10 * Fraction(13, 10) + 12) / 2
    assert most.static == 22
    assert (least.area, least.uniform_effect) == exact(-1, -3)
    assert least.loaded == (exact(8, 12),)
    assert least.value == (-5 * Fraction(13, 10) - 3) / 2


def test_loaded_stretches_are_joined() -> None:
    """A line that rises and falls above the axis is loaded in one stretch."""
    found = governing_of(MIDSPAN, make_load(uniform=2), 1)
    assert found.loaded == (exact(0, 10),)
    assert found.value == 25
    assert found.looked_at == 0
    apart = broken((0, 1), (2, -1), (4, 1), (6, 0), (8, 0), (9, 1))
    assert governing_of(apart, make_load(uniform=1), 1).loaded == (
        exact(0, 1),
        exact(3, 6),
        exact(8, 9),
    )


def test_stations_and_standings_at_one_position() -> None:
    load = make_load((3, 0), (4, 4), (5, 7))
    assert stand(load, "right", 10).stations == exact(10, 6, -1)
    assert stand(load, "left", 0).stations == exact(0, 4, 11)
    line = broken((0, 1), (4, 2), (4, -2), (10, 1))
    ordinates = {}
    for side in SIDES:
        for ends in (True, False):
            position = stand(load, "left", 0, side, ends)
            shares = axle_shares(line, load.cases[0], position, 1)
            ordinates[side, ends] = [one.ordinate for one in shares]
            assert shares[2].standing == "off the beam"
    assert ordinates["left", True] == [1, 2, 0]
    assert ordinates["right", True] == [1, -2, 0]
    assert ordinates["left", False] == [0, 2, 0]
    assert ordinates["right", False] == [1, -2, 0]


def test_rates_on_either_side() -> None:
    """Slopes of 1/4 left of 4 and 1/2 right of it; an axle at the far end counts to the left only;
    one that begins to relieve there counts, where such are neglected, on one side."""
    line = broken((0, 1), (4, 2), (4, -2), (8, 0), (10, 1))
    load = make_load((3, 0), (4, 6), headings=("right",))
    at = stand(load, "right", 10)
    assert rate(line, load.cases[0], at, 1, "left") == 3 * Fraction(1, 2) + 4 * Fraction(1, 4)
    assert rate(line, load.cases[0], at, 1, "right") == 4 * Fraction(1, 2)
    keen = make_load((3, 0), (4, 2), relieving="neglect")
    start = stand(keen, "right", 10)
    assert rate(line, keen.cases[0], start, 1, "left") == 3 * Fraction(1, 2)
    assert rate(line, keen.cases[0], start, -1, "left") == 4 * Fraction(1, 2)
    before = stand(keen, "right", 8, "right")
    assert rate(line, keen.cases[0], before, 1, "right") == 3 * Fraction(1, 2)
    assert rate(line, keen.cases[0], before, 1, "left") == 0
    assert rate(line, keen.cases[0], before, -1, "left") == 7 * Fraction(1, 2)


def test_a_curved_line_governs_where_the_rate_is_zero() -> None:
    """Line x (6 - x), axles 2 and 1 at distance 2 behind: E(s) = 2 s (6 - s) + (s - 2)(8 - s) is
    greatest at s = 11/3, where it is -3 s² + 22 s - 16 = 73/3 (calculus)."""
    curved = Piecewise.from_pieces([(0, 6, (0, 6, -1))])
    load = make_load((2, 0), (1, 2))
    found = governing_of(curved, load, 1)
    assert found.position is not None
    assert found.position.groups[0].mark is None
    assert float(found.position.lead_at) == pytest.approx(11 / 3, abs=1e-8)
    assert float(found.axles_effect) == pytest.approx(73 / 3, abs=1e-12)
    assert found.rates is not None
    assert max(abs(float(one)) for one in found.rates) < 1e-7
