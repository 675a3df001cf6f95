"""The command ``models`` as a user meets it: what it prints, and that it can be pasted."""

from __future__ import annotations

import re
from collections.abc import Iterator
from decimal import Decimal
from fractions import Fraction

import pytest

from calcpack.cli import main
from calcpack.errors import InputRefused
from calcpack.exact.units import SYSTEMS
from calcpack.intake import read
from calcpack.intake.standards import model_names, read_model
from calcpack.render.models import TO_STATE, WIDTH, formula
from calcpack.sheets.load_words import amount, gap_words

TRUCK = """\
  8             32            32
  ↓             ↓             ↓
  |------14-----|---14 to 30--|

  axle  weight, kip  behind the axle ahead, ft
     1            8                          —
     2           32                         14
     3           32                   14 to 30
"""
BEAM = """\
format = 1
units = "UNITS"
cover.title = "Continuous girder"
cover.prepared = { by = "A. Preparer", on = 2026-03-02 }
package.status = "STATUS"

[beam]
spans = [20.0, 25.0, 20.0]
supports = [
  { name = "A", kind = "pin" },
  { name = "B", kind = "roller" },
  { name = "C", kind = "roller" },
  { name = "D", kind = "roller" },
]

"""
VARIANTS = [
    (name, variant)
    for name in model_names()
    for variant in [one.name for one in read_model(name).variants] or [""]
]


@pytest.fixture
def printed(capsys: pytest.CaptureFixture[str]) -> Printed:
    return Printed(capsys)


class Printed:
    """What the command prints."""

    def __init__(self, capsys: pytest.CaptureFixture[str]) -> None:
        self.capsys = capsys

    def __call__(self, *name: str) -> str:
        assert main(["models", *name]) == 0
        out, err = self.capsys.readouterr()
        assert err == ""
        assert max(map(len, out.splitlines())) <= WIDTH
        assert not re.search(r"[ \t]$|\n\n\n", out, re.MULTILINE)
        return out


def words(text: str) -> str:
    """Without what wrapping did."""
    return " ".join(text.split())


def block(text: str) -> str:
    return text[text.index("[[moving]]") :]


def calculation(text: str, name: str, variant: str = "", status: str = "For review") -> bytes:
    """A calculation with the block of a model, for one of its variants."""
    model, pasted = read_model(name), block(text)
    if variant:
        pasted = pasted.replace(
            f'\nvariant = "{model.variants[0].name}"', f'\nvariant = "{variant}"'
        )
    beam = BEAM.replace("UNITS", model.units).replace("STATUS", status)
    return (beam + pasted).encode()


def stated(text: str) -> str:
    """With what the block asks for."""
    text = text.replace(f'length = "{TO_STATE}"', "length = 20.0")
    return text.replace(f'value = "{TO_STATE}"', "value = 0.25").replace("# compared", "compared")


def test_the_list_names_every_model_once(printed: Printed) -> None:
    lines = printed().splitlines()
    rows = [line for line in lines[1:-2] if not line.startswith(" ")]
    for name, row in zip(model_names(), rows, strict=True):
        model = read_model(name)
        assert re.split(r" {2,}", row)[:3] == [name, model.per, model.units]
        assert row.endswith("from a page" if model.seen == "page" else "from memory")
    assert lines[-1] == "From memory: not compared with the standard."


def test_the_list_has_every_variant_and_standard(printed: Printed) -> None:
    lines = printed().splitlines()
    at = {column: lines[0].index(column) for column in ("variants", "standard", "numbers")}
    variants = words("\n".join(line[at["variants"] : at["standard"]] for line in lines[1:]))
    standards = words("\n".join(line[at["standard"] : at["numbers"]] for line in lines[1:-2]))
    for name in model_names():
        model = read_model(name)
        assert ", ".join(one.name for one in model.variants) in variants
        assert f"{model.title}, {model.edition}" in standards


@pytest.mark.parametrize("name", model_names())
def test_a_model_says_all_that_it_is(name: str, printed: Printed) -> None:
    model, text = read_model(name), words(printed(name))
    assert text.startswith(f"{name} standard {model.title} edition {model.edition} ")
    assert f"clause {model.clause} " in text
    assert ("not compared with the standard" in text) == (model.seen == "memory")
    assert f"per {model.per} " in text
    assert f'(units = "{model.units}"); ' in text
    assert ("allowance must be stated" in text) == bool(model.dynamic)
    assert ("length must be stated" in text) == model.needs_length
    for scale in model.scales:
        assert amount(scale) in text
    for variant in model.variants:
        assert f'Cases of variant "{variant.name}"' in text
        assert variant.says in text
    for note in model.notes:
        assert note in text
    for said in (model.needs_clause, model.longest_says):
        assert said in text


@pytest.mark.parametrize("name", model_names())
def test_every_number_of_every_case_is_in_words(name: str, printed: Printed) -> None:
    text = words(printed(name))
    for case in read_model(name).document["cases"]:
        assert f"{case['name']} ({case['clause']})" in text
        for number in numbers(
            [case.get(key) for key in ("uniform", "concentrated", "allowance", "factors")]
        ):
            assert re.search(rf"(?<![\d.]){re.escape(number)}(?![\d.]*\d)", text), number
        for entry in [*case.get("allowance", ()), *case.get("factors", ())]:
            assert f"({entry['clause']})" in text


def numbers(raw: object) -> Iterator[str]:
    """Every number in a part of a file, without sign, as a reader looks for it."""
    if isinstance(raw, dict):
        for item in raw.values():
            yield from numbers(item)
    elif isinstance(raw, list):
        for item in raw:
            yield from numbers(item)
    elif isinstance(raw, Decimal):
        yield format(abs(raw), "f").removesuffix(".0")


@pytest.mark.parametrize("name", model_names())
def test_every_train_is_drawn_to_scale_with_its_axles(name: str, printed: Printed) -> None:
    text, model = printed(name), read_model(name)
    trains = model.document.get("trains", ())
    assert len(re.findall("^Train ", text, re.MULTILINE)) == len(trains)
    step = re.search(r"A column is ([\d.]+) ", text)
    for raw in trains:
        part = text[text.index(f'Train "{raw["name"]}"') :]
        lines = re.split(r"^(?:Train|Cases)", part[1:], flags=re.MULTILINE)[0].splitlines()
        axles = raw.get("axles", ())
        head = next((at for at, line in enumerate(lines) if line.startswith("  axle  ")), 0)
        rows = lines[head + 1 : head + 1 + len(axles)]
        table = [line.split(maxsplit=2) for line in rows]
        assert [row[:2] for row in table] == [
            [str(number), amount(Fraction(axle["weight"]))] for number, axle in enumerate(axles, 1)
        ]
        arrows = next((line for line in lines if "↓" in line), "")
        columns = [place for place, sign in enumerate(arrows) if sign == "↓"]
        assert len(columns) == len(axles)
        at = Fraction(0)
        for axle, row, column in zip(axles, table, columns, strict=True):
            if "spacing" in axle:
                at += least(axle["spacing"])
                assert step is not None
                assert abs(column - columns[0] - at / Fraction(step[1])) <= 1
                assert row[2].split()[0] == amount(least(axle["spacing"]))
        if raw.get("trailing"):
            assert "==" in "".join(lines)


def least(spacing: object) -> Fraction:
    if isinstance(spacing, dict):
        return least(spacing.get("list") or spacing["least"])
    assert isinstance(spacing, list | Decimal)
    return Fraction(spacing[0] if isinstance(spacing, list) else spacing)


def test_the_truck_of_hl93_is_drawn_so(printed: Printed) -> None:
    assert f'Train "design truck": 72 kip on 3 axles\n\n{TRUCK}\nTrain' in printed("HL-93")


def test_loads_ahead_and_behind_are_drawn_so(printed: Printed) -> None:
    text = printed("LM71")
    assert (
        "    80 kN/m      250          250          250         250       80 kN/m\n"
        "  ... = == ==     ↓            ↓            ↓           ↓      == == = ...\n"
        "            |-0.8-|----1.6-----|----1.6-----|----1.6----|-0.8--|\n"
    ) in text
    assert "80 kN/m without end, from 0.8 m ahead of the first axle, only where it" in text
    assert "|--------------15-------------|---5.3----|--------------15-------------|" in printed(
        "SW/0"
    )


def test_rules_are_formulas(printed: Printed) -> None:
    assert "I = 50 / (L + 125), at most 0.30\n" in printed("H20-44")
    e80 = printed("Cooper", "E80")
    assert "I = 0.40 - 0.00001875 L² for L up to 80 ft\n" in e80
    assert "I = 0.16 + 6 / (L - 30) for L beyond 80 ft\n" in e80
    tracked = printed("IRC 70R")
    assert "I = 0.4375 - 0.0375 L for L beyond 5 up to 9 m\n" in tracked
    assert "I = 4.5 / (L + 6), at least 0.088, for L beyond 40 m\n" in tracked
    assert formula({"per_length": Decimal("-2.0"), "over": 6}) == "-2 L + 6 / L"


def test_spacings_that_vary_are_in_words(printed: Printed) -> None:
    assert "6.25 or more" in printed("M1600")
    assert "6 or 11 or 16 or 21 or 26" in printed("HB")
    assert '"truck, 14 ft"; "truck, 14 ft" behind it by 50 or more ft' in printed("HL-93")


@pytest.mark.parametrize(("name", "variant"), VARIANTS)
def test_the_block_can_be_pasted(name: str, variant: str, printed: Printed) -> None:
    model = read_model(name)
    text = stated(printed(name))
    (load,) = read(calculation(text, name, variant, "Issued")).moving
    assert load.name == name
    assert load.standard is not None
    assert load.standard.per == (one.per if (one := model.variant(variant)) else model.per)
    assert load.standard.settled
    assert all(case.allowances for case in load.cases) or "0.25" not in block(text)


@pytest.mark.parametrize("name", model_names())
def test_what_the_engineer_must_state_is_refused_until_it_is(name: str, printed: Printed) -> None:
    text, model = printed(name), read_model(name)
    open_ = [line for line in block(text).splitlines() if TO_STATE in line]
    assert any("length" in line for line in open_) == model.needs_length
    assert any("of =" in line for line in open_) == bool(model.dynamic)
    if open_:
        with pytest.raises(InputRefused) as refused:
            read(calculation(text, name))
        assert [one.said for one in refused.value.problems] == [TO_STATE] * len(open_)
    else:
        (load,) = read(calculation(text, name)).moving
        assert load.standard is not None
        assert load.standard.settled == (model.seen == "page")


def test_axle_words_are_those_of_the_sheets(printed: Printed) -> None:
    model = read_model("HB")
    (load,) = read(calculation(printed("HB"), "HB")).moving
    gap = load.cases[0].axles[2].gap
    assert gap is not None
    assert gap_words(gap) in printed("HB")
    assert SYSTEMS[model.units]["line load"] in printed("LM71")


@pytest.mark.parametrize(
    ("name", "line"),
    [
        ("HL93", "models: HL93, is not a known model; nearest is 'HL-93'\n"),
        ("HS20-4", "models: HS20-4, is not a known model; nearest are 'HS20-44', 'H20-44'\n"),
        ("Cooper", "models: Cooper, is not a known model; nearest is 'Cooper E80'\n"),
        ("\x1b[31m", "models: \\x1b[31m, is not a known model; "),
    ],
)
def test_an_unknown_name_is_refused(
    name: str, line: str, capsys: pytest.CaptureFixture[str]
) -> None:
    assert main(["models", name]) == 2
    out, err = capsys.readouterr()
    assert out == ""
    assert err.startswith(line)
    assert err.count("\n") == 1
