"""What is printed, read again: arithmetic, literals and their origins, by means of its own."""

from __future__ import annotations

import ast
import operator
import re
from collections.abc import Callable, Mapping
from decimal import ROUND_HALF_UP, Decimal, localcontext
from fractions import Fraction
from typing import Any

OPERATIONS: dict[type[ast.operator], Callable[[Fraction, Fraction], Any]] = {
    ast.Add: operator.add,
    ast.Sub: operator.sub,
    ast.Mult: operator.mul,
    ast.Div: operator.truediv,
    ast.Pow: operator.pow,
}
FRACTION = re.compile(r"\((-?\d+/\d+)\)")
NEGATIVE = re.compile(r"\((-\d+\.\d+)\)")
COUNTED_FROM_NONE = re.compile(
    r"/(?:segment|offset|axle|ordinate|load|e|g)=(?:0|-)|^(?:unit|flexibility|curve|compatibility)/(\d+/)?(?:0|-)"
)
NUMBER = re.compile(r"\d+(?:\.\d+)?")
CONSTANTS = {"0", "1", "2", "3", "6", "24"}
"""Of areas, of integrals of products of straight lines, and of cubics."""
CONVERSIONS = {"12", "144", "1000", "1000000000"}
"""Inches in a foot, E I in kip ft² or kN m² from ksi in⁴ or MPa mm⁴, millimetres in a metre."""
TENTHS = {str(tenths) for tenths in range(11)}


def evaluated(text: str) -> Fraction:
    """Plain arithmetic in fractions: + - * / ( ) ** and decimals, nothing else.

    >>> evaluated("1 * (0.25 - 0.5) / -2 ** 2")
    Fraction(1, 16)
    """

    def value(node: ast.expr) -> Fraction:
        match node:
            case ast.BinOp(left, operation, right):
                return Fraction(OPERATIONS[type(operation)](value(left), value(right)))
            case ast.UnaryOp(ast.USub(), operand):
                return -value(operand)
            case ast.Constant():
                segment = ast.get_source_segment(text, node)
                assert segment is not None
                assert NUMBER.fullmatch(segment), segment
                return Fraction(segment)
        raise AssertionError(f"{text}: {ast.dump(node)}")

    return value(ast.parse(text, mode="eval").body)


def literals(text: str) -> list[str]:
    """Every number as it is printed; p/q in brackets is one of them, so is -0.5 in brackets.

    >>> literals("(1/3) * (2.00 - (-0.50)) / 2")
    ['1/3', '-0.50', '2.00', '2']
    """
    found = []
    for pattern in (FRACTION, NEGATIVE):
        found += pattern.findall(text)
        text = pattern.sub(" ", text)
    return found + NUMBER.findall(text)


def is_printed(text: str, value: Fraction) -> bool:
    """Whether a literal is the value rounded half away from zero, or the fraction itself.

    >>> is_printed("0.67", Fraction(2, 3)), is_printed("0.66", Fraction(2, 3))
    (True, False)
    """
    if "." not in text:
        return Fraction(text) == value
    unit = Decimal(1).scaleb(-len(text.split(".")[1]))
    with localcontext(prec=80):
        exact = Decimal(value.numerator) / value.denominator
        return Decimal(text) == exact.quantize(unit, ROUND_HALF_UP)


def unit_of_last_digit(result: str) -> Fraction:
    """One unit of the last digit; 0 where the result is a fraction."""
    return Fraction(1, 10 ** len(result.split(".")[1])) if "." in result else Fraction(0)


def check(steps: list[dict[str, Any]], inputs: Mapping[str, Fraction]) -> int:
    """Hold the steps of a results.json to what is promised of them; how many have numbers.

    Keys and ids are unique, what they count is counted from 1, and what a step uses stands before
    it. Its numbers, evaluated, miss the result by one unit of the last digit at most. Each of its
    literals is what an input, or the result of a step that it uses, is printed as, everywhere the
    same, or else a constant; and each of its inputs and uses is there. An input that ends within
    6 decimals is printed whole, and with no more than 3 decimals or what that takes. Of the rows of
    a long line the results alone are printed.
    """
    for name in ("key", "id"):
        assert len({step[name] for step in steps}) == len(steps)
    results: dict[str, str] = {}
    checked = 0
    printed: dict[str, set[str]] = {}
    for step in steps:
        assert not COUNTED_FROM_NONE.search(step["key"]), step["key"]
        assert {*step["uses"]} <= results.keys(), step["key"]
        assert {*step["inputs"]} <= inputs.keys(), step["key"]
        if "numbers" not in step:
            if "result" in step:
                assert "/at=" in step["key"], step["key"]
                results[step["key"]] = step["result"]
            continue
        numbers, result = step["numbers"], step["result"]
        assert re.fullmatch(r"[-+*/(). \d]+", numbers), numbers
        miss = abs(evaluated(numbers) - Fraction(result))
        assert miss <= unit_of_last_digit(result), (step["key"], numbers, result)
        there = {*literals(numbers)}
        there |= {one.removeprefix("-") for one in there}
        used = {results[key] for key in step["uses"]}
        bare = {one.removeprefix("-") for one in used}
        assert used | bare <= there | {f"-{one}" for one in there}, step["key"]
        for path in step["inputs"]:
            same = {one for one in there if is_printed(one, inputs[path])}
            printed[path] = printed.get(path, same) & same
            assert printed[path], (step["key"], path)
        constants = (
            CONSTANTS | CONVERSIONS | (TENTHS if step["key"].startswith("station/") else set())
        )
        if re.search("/(zero|axle|force)=", step["key"]):
            # A root of a cubic, or where a rate of change is zero: stated to its last digit.
            constants = constants | {numbers.strip("()")}
        for literal in literals(numbers):
            origin = (
                literal in used
                or literal.removeprefix("-") in bare
                or any(
                    {literal, literal.removeprefix("-")} & printed[path] for path in step["inputs"]
                )
                or literal in constants
            )
            assert origin, (step["key"], numbers, literal)
        results[step["key"]] = result
        checked += 1
    for path, texts in printed.items():
        for decimals in range(7):
            if (inputs[path] * 10**decimals).denominator == 1:
                assert min(len(text.partition(".")[2]) for text in texts) <= max(3, decimals), path
                break
    return checked
