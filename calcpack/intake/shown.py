"""Values and paths as messages and the data echo show them."""

from __future__ import annotations

import itertools
import re
import unicodedata
from datetime import date, datetime, time
from fractions import Fraction
from typing import Any

from calcpack.exact.numbers import decimals_to_end, printed

LONGEST_SHOWN = 60

_UNPRINTABLE = {"Cc", "Cf", "Cn", "Co", "Cs", "Zl", "Zp"}


def unprintable(character: str) -> bool:
    """Whether a character is a control, a separator of lines, unseen, private or no character.

    >>> [unprintable(character) for character in "a·\\n\\u202e\\u200b"]
    [False, False, True, True, True]
    """
    return unicodedata.category(character) in _UNPRINTABLE


def typed(value: Any) -> str:
    """A single value as it stands in the file, without quotes.

    >>> typed(True), typed(date(2026, 3, 2)), typed("h1")
    ('true', '2026-03-02', 'h1')
    """
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, int):
        return str(value) if value.bit_length() < 256 else hex(value)
    return value.isoformat() if isinstance(value, date | datetime | time) else str(value)


def shown(value: Any) -> str:
    """A value in one short line of a message: cut to 60 characters, nothing invisible in it.

    >>> shown("a\\nb"), shown(""), shown([1, "B"]), shown({"least": 2})
    ('a\\\\nb', '""', '[1, "B"]', '{ least = 2 }')
    """
    return _visible(value if isinstance(value, str) and value.strip() else _inline(value))


def _visible(text: str) -> str:
    escaped = "".join(
        character.encode("unicode_escape").decode("ascii") if unprintable(character) else character
        for character in text[: LONGEST_SHOWN + 1]
    )
    return escaped if len(escaped) <= LONGEST_SHOWN else escaped[: LONGEST_SHOWN - 1] + "…"


def _inline(value: Any) -> str:
    if isinstance(value, str):
        return f'"{value[:LONGEST_SHOWN]}"'
    if isinstance(value, list):
        return f"[{', '.join(_inline(item) for item in value[:LONGEST_SHOWN])}]"
    if isinstance(value, dict):
        pairs = itertools.islice(value.items(), LONGEST_SHOWN)
        inside = ", ".join(f"{joined('', key)} = {_inline(item)}" for key, item in pairs)
        return f"{{ {inside} }}" if inside else "{}"
    return typed(value)


def joined(path: str, key: str) -> str:
    """The path of a key in the table at ``path`` ("": the file itself).

    >>> joined("beam", "length"), joined("", "a.b")
    ('beam.length', '"a.b"')
    """
    bare = re.fullmatch(r"[A-Za-z0-9_-]+", key)
    written = _visible(key) if bare else f'"{_visible(key)}"'
    return f"{path}.{written}" if path else written


def decimal_text(value: Fraction) -> str:
    """The value as a decimal written whole, or as a fraction where no decimal does.

    >>> decimal_text(Fraction(25, 2)), decimal_text(Fraction(20)), decimal_text(Fraction(1, 3))
    ('12.5', '20', '1/3')
    """
    decimals = decimals_to_end(value, 60)
    return str(value) if decimals is None else printed(value, decimals)


def readable(value: Fraction) -> str:
    """The value exactly, with a rounded decimal beside it where it has no whole one.

    >>> readable(Fraction(25, 2)), readable(Fraction(1, 3))
    ('12.5', '1/3 ≈ 0.3333')
    """
    text = decimal_text(value)
    return f"{text} ≈ {printed(value, 4)}" if "/" in text else text
