r"""A stated subset of TeX maths as Typst maths; what lies outside it is not guessed.

The subset: letters, digits, + - = < > * / ( ) [ ] \{ \} | , . ! ' and, with groups, ^ _ \frac \sqrt
\text \mathrm \left \right; the names in ``SIGNS`` and ``FUNCTIONS``; the spaces \, \; \quad.
"""

from __future__ import annotations

import re
from collections.abc import Callable

_GREEK = (
    "α alpha β beta γ gamma δ delta ϵ epsilon ζ zeta η eta θ theta ι iota κ kappa λ lambda μ mu "
    "ν nu ξ xi π pi ρ rho σ sigma τ tau υ upsilon ϕ phi χ chi ψ psi ω omega ε varepsilon "
    "ϑ vartheta φ varphi Γ Gamma Δ Delta Θ Theta Λ Lambda Ξ Xi Π Pi Σ Sigma Υ Upsilon Φ Phi "
    "Ψ Psi Ω Omega"
)
SIGNS: dict[str, str] = {
    **{name: letter for letter, name in re.findall(r"(\S) (\w+)", _GREEK)},
    "cdot": "⋅",
    "times": "×",
    "div": "÷",
    "le": "≤",
    "leq": "≤",
    "ge": "≥",
    "geq": "≥",
    "ne": "≠",
    "neq": "≠",
    "approx": "≈",
    "pm": "±",
    "mp": "∓",
    "sum": "∑",
    "int": "∫",
    "infty": "∞",
    "quad": "quad",
    ",": "thin",
    ";": "thick",
    "{": r"\{",
    "}": r"\}",
}
FUNCTIONS = frozenset({"sin", "cos", "tan", "ln", "log", "exp", "max", "min"})
DEEPEST = 20
"""Groups within groups; the typesetter has its own bound."""

_NUMBER = r"[0-9]+(?:\.[0-9]+)?"
_TOKEN = re.compile(rf"\s*(\\[A-Za-z]+|\\.|{_NUMBER}|\S)")
_WORDS = re.compile(r'\s*\{([^{}\\$"]*)\}')
_DELIMITER = re.compile(r"\s*(\\[{}]|[()\[\]|.])")
_PLAIN = re.compile(rf"[A-Za-zΑ-Ωα-ω+\-=<>*.!]|{_NUMBER}")


class _Outside(Exception):
    """The formula is not within the subset."""


def tex_to_typst(source: str) -> str | None:
    r"""The formula in Typst's maths, or None where any of it lies outside the subset.

    >>> tex_to_typst(r"\frac{w L^2}{8} \le M")
    'frac(w attach(L, t: 2), 8) ≤ M'
    >>> tex_to_typst(r"\input{x}") is None
    True
    """
    reader = _Reader(source)
    try:
        return reader.sequence("")
    except _Outside:
        return None


class _Reader:
    def __init__(self, source: str) -> None:
        self.source, self.at, self.depth = source.strip(), 0, 0

    def sequence(self, end: str) -> str:
        """Everything up to the token ``end`` ("": to the end of the source), and past it."""
        self.depth += 1
        if self.depth > DEEPEST:
            raise _Outside
        found: list[str] = []
        while (token := self.token()) != end:
            found.append(self.with_scripts(self.atom(token)))
        self.depth -= 1
        return " ".join(found) or '""'

    def token(self) -> str:
        """The next token; "" at the end."""
        found = self.match(_TOKEN)
        return found[1] if found else ""

    def match(self, pattern: re.Pattern[str]) -> re.Match[str] | None:
        found = pattern.match(self.source, self.at)
        if found:
            self.at = found.end()
        return found

    def needed(self, pattern: re.Pattern[str]) -> str:
        found = self.match(pattern)
        if found is None:
            raise _Outside
        return found[1]

    def atom(self, token: str) -> str:
        if token == "{":
            return self.sequence("}")
        if token in ("(", ")", "[", "]", "|", "/", ","):
            return f"\\{token}"
        if _PLAIN.fullmatch(token):
            return token
        name = token.removeprefix("\\")
        if name == token:
            raise _Outside
        if name in SIGNS:
            return SIGNS[name]
        if name in FUNCTIONS:
            return name
        if name in _COMMANDS:
            return _COMMANDS[name](self)
        raise _Outside

    def argument(self) -> str:
        """A group, or a single token: of several digits the first alone."""
        token = self.token()
        if token.isascii() and token[:1].isdigit():
            self.at -= len(token) - 1
            return token[0]
        return self.atom(token)

    def with_scripts(self, base: str) -> str:
        above, below = "", ""
        while found := self.match(_SCRIPT):
            mark = found[1]
            if mark == "'" and not above.strip("′"):
                above += "′"
            elif mark == "^" and not above.strip("′"):
                above = f"{above} {self.argument()}".lstrip()
            elif mark == "_" and not below:
                below = self.argument()
            else:
                raise _Outside
        scripts = [f"t: {above}"] * bool(above) + [f"b: {below}"] * bool(below)
        return f"attach({', '.join([base, *scripts])})" if scripts else base

    def fraction(self) -> str:
        return f"frac({self.argument()}, {self.argument()})"

    def root(self) -> str:
        if self.match(_OPTION):
            index = self.sequence("]")
            return f"root({index}, {self.argument()})"
        return f"sqrt({self.argument()})"

    def words(self) -> str:
        return f'"{self.needed(_WORDS)}"'

    def delimited(self) -> str:
        first = self.delimiter()
        inside = self.sequence(r"\right")
        return f"lr({first} {inside} {self.delimiter()})"

    def delimiter(self) -> str:
        mark = self.needed(_DELIMITER).removeprefix("\\")
        return "" if mark == "." else f"\\{mark}"


_SCRIPT = re.compile(r"\s*([\^_'])")
_OPTION = re.compile(r"\s*\[")
_COMMANDS: dict[str, Callable[[_Reader], str]] = {
    "frac": _Reader.fraction,
    "sqrt": _Reader.root,
    "text": _Reader.words,
    "mathrm": _Reader.words,
    "left": _Reader.delimited,
}
