"""What is no TOML within the limits is refused in one line, whatever the bytes."""

from __future__ import annotations

import pytest
from intake_samples import SHORT, US, faults

from calcpack.intake.document import DEEPEST, MOST_BYTES, DecimalText, parse


def nested(depth: int) -> str:
    return "x = " + "[" * depth + "]" * depth


def dotted(depth: int) -> str:
    return ".".join("k" * (depth + 1)) + " = 1"


@pytest.mark.parametrize(
    ("data", "line"),
    [
        (b"", "empty, must state format, units, cover and beam"),
        (b" \n# only a remark\n", "empty, must state format, units, cover and beam"),
        (b"\xef\xbb\xbf", "empty, must state format, units, cover and beam"),
        (b"format = 1\nunits = \xff", "byte 0xff in line 2, must be UTF-8 text"),
        (b"\x89PNG\r\n\x1a\n", "byte 0x89 in line 1, must be UTF-8 text"),
        (b"x = " + b"9" * 5000, "a number of thousands of digits, must have at most 15"),
        (b"x" * (MOST_BYTES + 1), "1,048,577 bytes, must have at most 1,048,576 bytes"),
        (nested(DEEPEST + 1).encode(), "tables in tables, must be nested at most 8 deep"),
        (dotted(DEEPEST + 1).encode(), "tables in tables, must be nested at most 8 deep"),
        (b"a.b.c.d = [[[[[[1]]]]]]", "tables in tables, must be nested at most 8 deep"),
        (b"[" * 10**6, "tables in tables, must be nested at most 8 deep"),
        (b"a." * 500_000 + b"a = 1", "tables in tables, must be nested at most 8 deep"),
    ],
)
def test_refused_whole(data: bytes, line: str) -> None:
    assert faults(data) == [f"calc.toml: {line}"]


@pytest.mark.parametrize(
    "data",
    [b"\0", b"a = 1\na = 2", b"[a]\n[a]", b"a = 1\n[a]", b"a = {x = 1, x = 2}", b"a =", b'a = "',
     b"a = 2026-02-30", b"a = 01", b'"\\ud800" = 1', b"\x1b[31m = 1", b"a = 'x\ny'"],
)  # fmt: skip
def test_what_is_not_toml_is_refused_in_one_line(data: bytes) -> None:
    (line,) = faults(data, "odd\nname.toml")
    assert line.startswith("odd\\nname.toml: ")
    assert line.endswith(", must be TOML")
    assert line.isprintable()


def test_the_deepest_nesting_is_read() -> None:
    for text in (nested(DEEPEST), dotted(DEEPEST), "a.b.c.d = [[[[[1]]]]]"):
        assert parse(text.encode(), "calc.toml")


@pytest.mark.parametrize(
    "text",
    [
        "x = '''[[[[[[[[[[''' # [[[[[[[[[[",
        'x = """[[[[[[[["[[""" # a.b.c.d.e.f.g.h.i.j.k',
        'x = """""[[[[[[[[[[\\"""[[[[[[[[[["""""',
        "'a.b.c.d.e.f.g.h.i.j.k' = '[[[[[[[[[['",
        'x = "a.b.c.d.e.f.g.h.i.j.k\\"[[[[[[[[[["',
        "x = ['[[[', '[[[', '[[[', 1.0, 1.0, 1.0, 1.0, 1.0, 1.0, 1.0, 1.0, 1.0]",
    ],
)
def test_brackets_and_dots_in_texts_and_remarks_do_not_count(text: str) -> None:
    assert "x" in parse(text.encode(), "calc.toml") or "'" in text


@pytest.mark.parametrize("opening", ['x = """', "x = '''", 'x = "', "x = '"])
def test_brackets_after_a_text_that_has_no_end_are_no_matter(opening: str) -> None:
    assert faults(opening + nested(DEEPEST + 1))[0].endswith(", must be TOML")


def test_numbers_keep_their_text() -> None:
    assert parse(b"x = [1_0.50, 1e3, inf]", "calc.toml") == {
        "x": [DecimalText("1_0.50"), DecimalText("1e3"), DecimalText("inf")]
    }


def test_a_file_just_within_the_size_is_read() -> None:
    remark = "#" * (MOST_BYTES - len(SHORT) - 1) + "\n"
    assert faults(SHORT + remark) == []
    assert faults(US + remark) != []
