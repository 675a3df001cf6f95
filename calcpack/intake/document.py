"""The bytes of calc.toml as a document of plain values, within limits, none understood yet."""

from __future__ import annotations

import re
import tomllib
from dataclasses import dataclass
from typing import Any

from calcpack.errors import InputRefused, Problem
from calcpack.intake.shown import shown

MOST_BYTES = 2**20
DEEPEST = 8

# Strings and comments are passed over whole; a quote that opens no string ends the scan, since
# TOML is broken there. Possessive repeats keep the scan linear whatever the text.
_MARK = re.compile(
    r'''
      """ (?: [^"\\] | \\. | "(?!"") )*+ "{3,5}
    | \'\'\' (?: [^'] | '(?!\'\') )*+ '{3,5}
    | "(?!"") (?: [^"\\\n] | \\. )*+ "
    | '(?!\'\') [^'\n]*+ '
    | \# [^\n]*+
    | (?P<mark> ["'.=,\n\[\]{}] )
    ''',
    re.DOTALL | re.VERBOSE,
)


@dataclass(frozen=True)
class DecimalText:
    """A number with a point or an exponent, as it was typed."""

    text: str

    def __str__(self) -> str:
        return self.text


def parse(data: bytes, source: str) -> dict[str, Any]:
    """Parse TOML; numbers that are not whole stay text.

    Args:
        data: the file, at most 1 MiB of UTF-8.
        source: what messages call it.

    Raises:
        InputRefused: with one problem, at ``source``.

    >>> parse(b"length = 2.50", "calc.toml")
    {'length': DecimalText(text='2.50')}
    """

    def refused(said: str, needs: str) -> InputRefused:
        return InputRefused([Problem(shown(source), said, needs)])

    if len(data) > MOST_BYTES:
        raise refused(f"{len(data):,} bytes", f"must have at most {MOST_BYTES:,} bytes")
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        raise refused(undecodable(error), "must be UTF-8 text") from None
    too_deep = refused("tables in tables", f"must be nested at most {DEEPEST} deep")
    if _nested_too_deep(text):
        raise too_deep
    try:
        document = tomllib.loads(text, parse_float=DecimalText)
    except tomllib.TOMLDecodeError as error:
        message = str(error)
        raise refused(shown(message[:1].lower() + message[1:]), "must be TOML") from None
    except ValueError:  # int() reads no more than some thousand digits
        raise refused("a number of thousands of digits", "must have at most 15") from None
    if _depth(document) > DEEPEST + 1:
        raise too_deep
    if not document:
        raise refused("empty", "must state format, units, cover and beam")
    return document


def undecodable(error: UnicodeDecodeError) -> str:
    """The byte that is no UTF-8, and its line."""
    line = error.object[: error.start].count(b"\n") + 1
    return f"byte 0x{error.object[error.start]:02x} in line {line}"


def _nested_too_deep(text: str) -> bool:
    """Whether brackets or dotted keys alone go too deep: parsing those takes stack and memory."""
    depth = dots = 0
    for match in _MARK.finditer(text):
        mark = match["mark"]
        if mark is None:
            continue
        if mark in "\"'":
            return False
        dots = dots + 1 if mark == "." else 0
        if mark in "[{":
            depth += 1
        elif mark in "]}":
            depth = max(depth - 1, 0)
        if max(depth, dots) > DEEPEST:
            return True
    return False


def _depth(value: Any) -> int:
    if isinstance(value, dict):
        value = list(value.values())
    return 1 + max(map(_depth, value), default=0) if isinstance(value, list) else 0
