"""Piecewise polynomials against scipy's PPoly."""

from __future__ import annotations

import itertools
from fractions import Fraction
from random import Random

import numpy as np
import pytest
from scipy.interpolate import PPoly  # type: ignore[import-untyped]

from calcpack.exact.piecewise import Piecewise, Side

SEEDS = range(25)
SIDES: tuple[Side, ...] = ("left", "right")


def random_piecewise(rng: Random, degree: int, breaks: list[Fraction] | None = None) -> Piecewise:
    """Three to six pieces that mostly jump at their breaks."""
    if breaks is None:
        inner = {Fraction(rng.randint(1, 119), 10) for _ in range(rng.randint(2, 5))}
        breaks = [Fraction(0), *sorted(inner), Fraction(12)]
    return Piecewise.from_pieces(
        (a, b, [Fraction(rng.randint(-30, 30), rng.choice((1, 3, 8))) for _ in range(degree + 1)])
        for a, b in itertools.pairwise(breaks)
    )


def reference(function: Piecewise) -> PPoly:
    """The same function: scipy has the highest power first, and at a break the right value."""
    size = function.degree + 1
    columns = [[*map(float, piece)] + [0.0] * (size - len(piece)) for piece in function.pieces]
    return PPoly(np.array(columns).T[::-1], np.array(function.breaks, dtype=float))


@pytest.mark.parametrize("seed", SEEDS)
def test_values_slopes_and_integrals(seed: int) -> None:
    rng = Random(seed)
    ours = random_piecewise(rng, rng.randint(0, 3))
    theirs = reference(ours)
    points = [*ours.breaks[1:-1], *(Fraction(rng.randint(1, 1199), 100) for _ in range(12))]
    slope = theirs.derivative()
    for x in points:
        before = float(x) - (1e-9 if x in ours.breaks else 0)
        for side, near in zip(SIDES, (before, float(x)), strict=True):
            assert float(ours.value(x, side)) == pytest.approx(float(theirs(near)), abs=1e-5)
            assert float(ours.slope(x, side)) == pytest.approx(float(slope(near)), abs=1e-5)
    for a, b in itertools.combinations(sorted(points), 2):
        area = float(theirs.integrate(float(a), float(b)))
        assert float(ours.integral(a, b)) == pytest.approx(area, abs=1e-8)


def test_the_two_values_at_a_jump_and_the_one_at_an_end() -> None:
    step = Piecewise.from_pieces([(0, 2, (1, 3)), (2, 5, (4, -1))])
    two = Fraction(2)
    assert [step.left(two), step.right(two)] == [7, 4]
    assert [step.slope(two, "left"), step.slope(two, "right")] == [3, -1]
    assert step.left(Fraction(0)) == step.right(Fraction(0)) == 1
    assert step.left(Fraction(5)) == step.right(Fraction(5)) == 1
    for outside in (Fraction(-1, 100), Fraction(501, 100)):
        with pytest.raises(ValueError, match="outside 0 to 5"):
            step.left(outside)


@pytest.mark.parametrize("seed", SEEDS)
def test_zeros_runs_and_areas(seed: int) -> None:
    ours = random_piecewise(Random(seed), 1)
    theirs = reference(ours)
    roots = theirs.roots(discontinuity=False, extrapolate=False)
    inside = [root for root in roots if min(abs(root - float(b)) for b in ours.breaks) > 1e-9]
    assert [float(zero) for zero in ours.zeros()] == pytest.approx(inside)
    positive = negative = 0.0
    for start, end, sign in ours.signed_runs():
        middle = float(theirs((float(start) + float(end)) / 2))
        assert sign == np.sign(middle)
        area = float(theirs.integrate(float(start), float(end)))
        positive, negative = positive + max(area, 0), negative + min(area, 0)
    runs = ours.signed_runs()
    assert [runs[0][0], runs[-1][1]] == [0, 12]
    assert all(one[1] == two[0] for one, two in itertools.pairwise(runs))
    assert [float(area) for area in ours.areas()] == pytest.approx([positive, negative])


@pytest.mark.parametrize("seed", range(20))
def test_zeros_and_turns_of_curved_pieces_are_numpys_roots(seed: int) -> None:
    """Reference: numpy.roots of the same cubic, real simple roots inside the piece."""
    rng = Random(seed)
    cubic = [Fraction(rng.randint(-50, 50), 7) for _ in range(4)]
    line = Piecewise.from_pieces([(1, 9, cubic)])
    for found, coefficients in (
        (line.zeros(), cubic),
        (line.turns(), [k * c for k, c in enumerate(cubic)][1:]),
    ):
        roots = np.roots([float(c) for c in reversed(coefficients)])
        inside = sorted(1 + r.real for r in roots if abs(r.imag) < 1e-9 and 0 < r.real < 8)
        assert [float(x) for x in found] == pytest.approx(inside, abs=1e-8)


@pytest.mark.parametrize("seed", SEEDS)
def test_mirrored_and_antiderivative(seed: int) -> None:
    """Reference: scipy at a + b - x, and its antiderivative, which too is 0 at the left end."""
    rng = Random(seed)
    breaks = [Fraction(one) for one in (2, rng.randint(3, 5), 7, rng.randint(8, 11), 12)]
    ours = random_piecewise(rng, rng.randint(0, 4), breaks)
    theirs = reference(ours)
    image, area, total = ours.mirrored(), ours.antiderivative(), theirs.antiderivative()
    for _ in range(20):
        x = 2 + Fraction(rng.randint(1, 9969), 997)
        if x.denominator > 1:
            assert float(image.left(x)) == pytest.approx(float(theirs(float(14 - x))), abs=1e-6)
            assert float(area.left(x)) == pytest.approx(float(total(float(x))), abs=1e-7)
    for at in ours.breaks:
        assert image.left(14 - at) == ours.right(at)
        assert image.right(14 - at) == ours.left(at)
        assert area.left(at) == area.right(at) == ours.integral(Fraction(2), at)
    assert image.mirrored() == ours


@pytest.mark.parametrize("seed", SEEDS)
def test_part_of_sign(seed: int) -> None:
    """numpy's maximum and minimum of the function and 0, a hair aside of roots."""
    rng = Random(seed)
    ours = random_piecewise(rng, rng.randint(0, 3))
    theirs = reference(ours)
    above, below = ours.part_of_sign(1), ours.part_of_sign(-1)
    x = (np.arange(1200) + 0.37) / 100
    values = theirs(x)
    for part, expected in ((above, np.maximum(values, 0)), (below, np.minimum(values, 0))):
        found = [float(part.right(Fraction(float(at)))) for at in x]
        assert found == pytest.approx(expected, abs=1e-6)
    assert above + below == ours
    assert [*map(float, ours.areas())] == pytest.approx(
        [float(one.integral(Fraction(0), Fraction(12))) for one in (above, below)], abs=1e-6
    )


@pytest.mark.parametrize("seed", SEEDS)
def test_algebra(seed: int) -> None:
    rng = Random(seed)
    one, two = random_piecewise(rng, rng.randint(0, 3)), random_piecewise(rng, rng.randint(0, 3))
    factor = Fraction(rng.randint(-9, 9), 7) or Fraction(1)
    combined = (one + two * factor - one / 3, -two)
    for x in (Fraction(rng.randint(0, 1200), 100) for _ in range(20)):
        for side in SIDES:
            a, b = one.value(x, side), two.value(x, side)
            assert combined[0].value(x, side) == a + b * factor - a / 3
            assert combined[1].value(x, side) == -b
    assert one + two == two + one
    assert one - one == Piecewise.from_pieces([(0, 12, (0,))])


def test_pieces_that_continue_each_other_are_one() -> None:
    """(1 + x)³ cut at 2 and at 5 is the same value as (1 + x)³."""
    cut = [
        (at, end, ((1 + at) ** 3, 3 * (1 + at) ** 2, 3 * (1 + at), 1))
        for at, end in itertools.pairwise((0, 2, 5, 9))
    ]
    assert Piecewise.from_pieces(cut) == Piecewise.from_pieces([(0, 9, (1, 3, 3, 1))])
    assert Piecewise.from_pieces([(0, 1, (1, 0, 0))]).degree == 0


@pytest.mark.parametrize(
    ("parts", "words"),
    [
        ([(0, 1, (1,)), (2, 3, (1,))], "gap"),
        ([(0, 2, (1,)), (1, 3, (1,))], "overlap"),
        ([(0, 2, (1,)), (2, 1, (1,))], "left to right"),
        ([(1, 1, (1,))], "positive length"),
        ([], "positive length"),
    ],
)
def test_refused_pieces(parts: list[tuple[int, int, tuple[int, ...]]], words: str) -> None:
    with pytest.raises(ValueError, match=words):
        Piecewise.from_pieces(parts)


def test_functions_on_different_stretches_do_not_add() -> None:
    with pytest.raises(ValueError, match="same stretch"):
        Piecewise.from_pieces([(0, 1, (1,))]) + Piecewise.from_pieces([(0, 2, (1,))])
