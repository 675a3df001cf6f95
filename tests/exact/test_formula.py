"""Formula trees: what is written is read again by sympy and must mean the same."""

from __future__ import annotations

from fractions import Fraction
from random import Random

import pytest
import sympy  # type: ignore[import-untyped]

from calcpack.exact.formula import (
    PLAIN,
    Formula,
    Leaf,
    Symbol,
    Variable,
    constant,
    evaluate,
    gradient,
    leaves,
    symbols,
    total,
    write,
)

SEEDS = range(40)
NAMES = "abcde"


def random_leaf(rng: Random) -> Formula:
    if rng.random() < 0.25:
        return constant(rng.randint(1, 9))
    name = rng.choice(NAMES)
    value = Fraction(Random(name).randint(-40, 40) * 2 + 1, 8)
    return Leaf(value, Symbol(name), f"beam.{name}")


def random_formula(rng: Random, depth: int = 4) -> Formula:
    if not depth or rng.random() < 0.1:
        return random_leaf(rng)
    one, two = random_formula(rng, depth - 1), random_formula(rng, depth - 1)
    match rng.randint(0, 5):
        case 0:
            return one + two
        case 1:
            return one - two
        case 2:
            return one * two
        case 3:
            return one / (two if evaluate(two) else constant(3))
        case 4:
            return -one
        case _:
            return total([(1, one), (-1, two), (rng.choice((1, -1)), random_leaf(rng))])


def digits(leaf: Leaf | Variable) -> str:
    assert isinstance(leaf, Leaf)
    return str(float(leaf.value))


def rational(value: sympy.Expr) -> Fraction:
    return Fraction(int(sympy.Rational(value).p), int(sympy.Rational(value).q))


@pytest.mark.parametrize("seed", SEEDS)
def test_written_numbers_and_symbols_mean_the_same(seed: int) -> None:
    formula = random_formula(Random(seed))
    exact = evaluate(formula)
    by_digits = sympy.sympify(write(formula, PLAIN, digits), rational=True)
    assert rational(by_digits) == exact
    values = {leaf.symbol: leaf.value for leaf in leaves(formula) if leaf.symbol}
    read = sympy.sympify(write(formula, PLAIN, symbols))
    put_in = read.subs({str(symbol): sympy.Rational(str(v)) for symbol, v in values.items()})
    assert rational(put_in) == exact


@pytest.mark.parametrize("seed", SEEDS)
def test_gradient(seed: int) -> None:
    formula = random_formula(Random(seed))
    values = {leaf.origin: leaf.value for leaf in leaves(formula) if leaf.origin}
    read = sympy.sympify(write(formula, PLAIN, symbols))
    slopes = gradient(formula, lambda leaf: leaf.value)
    numbers = {origin[-1]: sympy.Rational(str(value)) for origin, value in values.items()}
    for origin in values:
        by_sympy = sympy.diff(read, sympy.Symbol(origin[-1])).subs(numbers)
        assert slopes.get(origin, 0) == rational(by_sympy)


def test_values_may_be_put_in_otherwise() -> None:
    a, b = Leaf(Fraction(2), Symbol("a"), "a"), Leaf(Fraction(5), Symbol("b"), "b")
    assert evaluate((a - b) / (a * b)) == Fraction(-3, 10)
    assert evaluate((a - b) / (a * b), lambda leaf: leaf.value + 1) == Fraction(-3, 18)
    with pytest.raises(ZeroDivisionError):
        evaluate(a / (b - b))
    with pytest.raises(TypeError, match="no value"):
        evaluate(a + Variable(Symbol("x")))


def test_signs_and_brackets() -> None:
    a, b = Leaf(Fraction(-1, 2), Symbol("a"), "a"), Variable(Symbol("b"))
    assert write(b - (b - a), PLAIN, symbols) == "b - b + a"
    assert write(b / (b * a), PLAIN, symbols) == "b / (b * a)"
    assert write(b * (b / a), PLAIN, symbols) == "b * (b / a)"
    assert write(a - a, PLAIN, digits) == "(-0.5) - (-0.5)"
    assert write(total([]), PLAIN, symbols) == "0"
    assert write(constant(Fraction(1, 3)) * b, PLAIN, symbols) == "(1/3) * b"
