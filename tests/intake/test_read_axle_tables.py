"""Axles from tables beside calc.toml: values, faults by row and column, what is let in."""

from __future__ import annotations

import hashlib
import random
from fractions import Fraction
from pathlib import Path

import pytest
import rfc8785
from intake_samples import SHORT, check_lines

from calcpack.errors import InputRefused
from calcpack.intake import read, read_file
from calcpack.intake.document import MOST_BYTES
from calcpack.model.loads import Axle, Gap, Given
from calcpack.model.request import Calculation

PERMIT = "weight,spacing\n60,\n120.5,4\n120.5,1.35\n"
LOAD = '[[moving]]\nname = "Permit"\ntable = "permit.csv"\n'


def calculation(folder: Path, csv: str | bytes = PERMIT, stated: str = LOAD) -> Calculation:
    content = csv.encode() if isinstance(csv, str) else csv
    (folder / "permit.csv").write_bytes(content)
    (folder / "calc.toml").write_text(SHORT + stated, encoding="utf-8")
    return read_file(folder / "calc.toml")


def faults(folder: Path, csv: str | bytes = PERMIT, stated: str = LOAD) -> list[str]:
    with pytest.raises(InputRefused) as refused:
        calculation(folder, csv, stated)
    return str(refused.value).split("\n")


def axles(found: Calculation, load: int = 0) -> tuple[Axle, ...]:
    return found.moving[load].cases[0].axles


def test_rows_are_axles_from_the_lead_axle_on(tmp_path: Path) -> None:
    found = calculation(tmp_path)

    def gap(metres: str, row: int) -> Gap:
        return Gap((Given(Fraction(metres), f"permit.csv[{row}].spacing"),))

    assert axles(found) == (
        Axle(Given(Fraction(60), "permit.csv[0].weight"), None),
        Axle(Given(Fraction("120.5"), "permit.csv[1].weight"), gap("4", 1)),
        Axle(Given(Fraction("120.5"), "permit.csv[2].weight"), gap("1.35", 2)),
    )
    assert {path: value for path, value in found.inputs.items() if "permit" in path} == {
        "permit.csv[0].weight": 60,
        "permit.csv[1].weight": Fraction("120.5"),
        "permit.csv[1].spacing": 4,
        "permit.csv[2].weight": Fraction("120.5"),
        "permit.csv[2].spacing": Fraction("1.35"),
    }


def test_a_table_says_what_a_list_says(tmp_path: Path) -> None:
    stated = (
        '[[moving]]\nname = "Permit"\naxles = [ { weight = 60 }, { weight = 120.5, spacing = 4 },'
        " { weight = 120.5, spacing = 1.35 } ]\n"
    )
    values = [
        [(one.weight.value, one.gap and one.gap.least) for one in axles(found)]
        for found in (calculation(tmp_path), read((SHORT + stated).encode()))
    ]
    assert values[0] == values[1]


def test_cells_may_have_units_and_columns_any_order(tmp_path: Path) -> None:
    csv = "axle,spacing, weight\nfront,0,60 kN\nrear,10 ft,1e2\n"
    first, second = axles(calculation(tmp_path, csv))
    assert first.gap is None
    assert second.gap is not None
    assert [first.weight.value, second.weight.value] == [60, 100]
    assert second.gap.least == Fraction("3.048")


@pytest.mark.parametrize(
    ("csv", "lines"),
    [
        ("weight,spacing\n60,\n-3,4\n0,4\n", [
            "row 3, weight: -3 kN, must be above 0 kN",
            "row 4, weight: 0 kN, must be above 0 kN",
        ]),
        ("weight,spacing\n60,\n,4\n5,\n", [
            "row 3, weight: absent, must be given",
            "row 4, spacing: absent, must be given",
        ]),
        ("weight,spacing\n60,\n\n5,0\n5,-1\n", [
            "row 4, spacing: 0 m, must be above 0 m",
            "row 5, spacing: -1 m, must be above 0 m",
        ]),
        ("weight,spacing\n60,2\n5,3\n", [
            "row 2, spacing: 2 m, must be left out: no axle is ahead of the lead axle",
        ]),
        ("weight,spacing\n60,\nheavy,3 kN\n", [
            "row 3, weight: heavy, must be a force such as 2.5 kN",
            "row 3, spacing: 3 kN, must be a length such as 2.5 m",
        ]),
        ('weight,spacing\n60,\n5,"[3, 4]"\n', [
            "row 3, spacing: [3, 4], must be a length such as 2.5 m",
        ]),
        ("weight,spacing\n60,\n5,3,9\n", [
            "row 3: 3 cells, must have at most 2, as the header does",
        ]),
        ("spacing,weight\n-4,60\n", [
            "row 2, spacing: -4 m, must be left out: no axle is ahead of the lead axle",
        ]),
        ("spacing,weight\nx,60\n", ["row 2, spacing: x, must be a length such as 2.5 m"]),
    ],
)  # fmt: skip
def test_a_bad_row_is_named_with_its_column(tmp_path: Path, csv: str, lines: list[str]) -> None:
    assert faults(tmp_path, csv) == [f"permit.csv: {line}" for line in lines]


@pytest.mark.parametrize(
    ("csv", "said"),
    [
        ("weight,gap\n60,\n", "with the columns weight, gap"),
        ("spacing\n1\n", "with the columns spacing"),
        ("weight,spacing,weight\n60,,60\n", "with the columns weight, spacing, weight"),
        ("", 'with the columns ""'),
    ],
)
def test_a_table_has_both_columns(tmp_path: Path, csv: str, said: str) -> None:
    needs = 'must have the columns "weight" and "spacing", each once'
    assert faults(tmp_path, csv) == [f"moving[0].table: permit.csv {said}, {needs}"]


def test_a_table_has_rows_but_not_too_many(tmp_path: Path) -> None:
    head = "moving[0].table: permit.csv with"
    assert faults(tmp_path, "weight,spacing\n") == [f"{head} 0 rows, must have 1 to 1,000"]
    long = "weight,spacing\n1,\n" + "1,1\n" * 999
    assert len(axles(calculation(tmp_path, long))) == 1000
    assert faults(tmp_path, long + "1,1\n") == [f"{head} 1,001 rows, must have 1 to 1,000"]
    large = PERMIT + "\n" * (MOST_BYTES + 1 - len(PERMIT))
    needs = "must have at most 1,048,576 bytes"
    assert faults(tmp_path, large) == [f"moving[0].table: permit.csv, {needs}"]


def test_axles_of_tables_are_counted_each_time_a_table_is_named(tmp_path: Path) -> None:
    half = "weight,spacing\n1,\n" + "1,1\n" * 499
    twice = f'[[trains]]\nname = "T"\ntable = "permit.csv"\n{LOAD}'
    assert len(axles(calculation(tmp_path, half, twice))) == 500
    more = '[[moving]]\nname = "One"\naxles = [ { weight = 1 } ]\n'
    needs = "must leave at most 1,000 axles in all"
    assert faults(tmp_path, half, twice + more) == [
        f"moving[1].axles: 1,001 axles up to here, {needs}"
    ]
    assert faults(tmp_path, half, more + twice) == [
        f"moving[1].table: 1,001 axles up to here, {needs}"
    ]


def test_one_table_may_be_named_by_several(tmp_path: Path) -> None:
    stated = (
        '[[trains]]\nname = "T"\ntable = "permit.csv"\n'
        f'[[moving]]\nname = "Two"\ntrains = ["T", "T"]\nspacing = 20\n{LOAD}'
    )
    found = calculation(tmp_path, PERMIT, stated)
    two, one = axles(found), axles(found, 1)
    assert two[:3] == one
    assert [axle.weight for axle in two[3:]] == [axle.weight for axle in one]
    assert found.tables == (("permit.csv", PERMIT.encode()),)
    assert faults(tmp_path, "weight,spacing\n0,\n", stated) == [
        "permit.csv: row 2, weight: 0 kN, must be above 0 kN"
    ]


@pytest.mark.parametrize(
    ("stated", "lines"),
    [
        ('table = "permit.csv"\naxles = [ { weight = 1 } ]', [
            "axles: [{ weight = 1 }], must be left out beside table",
        ]),
        ('table = "permit.csv"\naxles = []', ["axles: [], must be left out beside table"]),
        ("table = 7", ["table: 7, must be text"]),
        ('table = "permit.csv"\nstandard = "LM71"\nallowance = 0', [
            "table: permit.csv, must be left out beside standard",
        ]),
    ],
)  # fmt: skip
def test_a_table_stands_alone(tmp_path: Path, stated: str, lines: list[str]) -> None:
    found = faults(tmp_path, PERMIT, f'[[moving]]\nname = "Permit"\n{stated}\n')
    assert found == [f"moving[0].{line}" for line in lines]


@pytest.mark.parametrize(
    "name",
    ["../permit.csv", "/etc/permit.csv", "sub/../../permit.csv", "permit.txt", "link.csv", ""],
)
def test_a_table_lies_in_the_folder(tmp_path: Path, name: str) -> None:
    folder = tmp_path / "project"
    (folder / "sub").mkdir(parents=True)
    (tmp_path / "permit.csv").write_text(PERMIT, encoding="utf-8")
    (folder / "link.csv").symlink_to(tmp_path / "permit.csv")
    needs = "must be a CSV in the folder of calc.toml, such as axles.csv"
    for table in ("trains", "moving"):
        stated = f'[[{table}]]\nname = "T"\ntable = "{name}"\n'
        said = name or '""'
        assert faults(folder, PERMIT, stated) == [f"{table}[0].table: {said}, {needs}"]


def test_what_cannot_be_read_is_refused(tmp_path: Path) -> None:
    stated = LOAD.replace("permit.csv", "missing.csv")
    line = "moving[0].table: missing.csv, must be a file that can be read"
    assert faults(tmp_path, PERMIT, stated) == [line]
    with pytest.raises(InputRefused) as refused:
        read((SHORT + LOAD).encode())
    assert str(refused.value) == (
        "moving[0].table: permit.csv, needs the folder of calc.toml, which was not given"
    )


def test_faults_of_a_table_come_where_it_is_named(tmp_path: Path) -> None:
    stated = f'[[moving]]\nname = ""\nuniform = 1\n{LOAD}uniform = -1\n'
    assert faults(tmp_path, "weight,spacing\n0,\n5,\n", stated) == [
        'moving[0].name: "", must not be blank',
        "permit.csv: row 2, weight: 0 kN, must be above 0 kN",
        "permit.csv: row 3, spacing: absent, must be given",
        "moving[1].uniform: -1 kN/m, must be at least 0 kN/m",
    ]


def test_the_echo_has_a_row_for_every_cell_after_the_loads_that_name_it(tmp_path: Path) -> None:
    csv = "weight,spacing\n60,\n120.5,4 ft\n"
    echo = calculation(tmp_path, csv).echo
    rows = [
        (one.path, one.label, one.said, one.unit, one.entered)
        for one in echo
        if one.path.startswith("permit")
    ]
    assert rows == [
        ("permit.csv[0].weight", "Axle weight", "60", "kN", True),
        ("permit.csv[1].weight", "Axle weight", "120.5", "kN", True),
        ("permit.csv[1].spacing", "Axle spacing", "4 ft = 1.2192", "m", True),
    ]
    paths = [one.path for one in echo]
    assert paths[-3:] == [path for path, *_ in rows]
    assert paths.index("moving[0].table") < paths.index("permit.csv[0].weight")
    stated = (
        '[[trains]]\nname = "T"\ntable = "permit.csv"\n[[moving]]\nname = "M"\ntrains = ["T"]\n'
    )
    paths = [one.path for one in calculation(tmp_path, csv, stated).echo]
    assert paths.index("trains[0].table") < paths.index("permit.csv[0].weight")
    assert paths.index("permit.csv[1].spacing") < paths.index("moving[0].name")


def test_the_digest_sees_the_content(tmp_path: Path) -> None:
    found = calculation(tmp_path)
    assert found.tables == (("permit.csv", PERMIT.encode()),)
    assert found.plain["tables"] == {"permit.csv": hashlib.sha256(PERMIT.encode()).hexdigest()}
    other = calculation(tmp_path, PERMIT + "\n")
    assert rfc8785.dumps(dict(other.plain)) != rfc8785.dumps(dict(found.plain))


def test_any_table_is_read_or_refused_in_plain_lines(tmp_path: Path) -> None:
    (tmp_path / "calc.toml").write_text(SHORT + LOAD, encoding="utf-8")
    accepted = 0
    for seed in range(600):
        chance = random.Random(seed)
        data = bytearray(PERMIT.encode())
        for _ in range(chance.choice((1, 2, 5))):
            place = chance.randrange(len(data))
            new = chance.choice((b"", b"\n", b",", b'"', b"9", b"-", chance.randbytes(2)))
            data[place : place + chance.randrange(3)] = new
        (tmp_path / "permit.csv").write_bytes(data)
        try:
            first, *others = axles(read_file(tmp_path / "calc.toml"))
        except InputRefused as refused:
            check_lines(str(refused).split("\n"), refused.problems)
            continue
        accepted += 1
        assert first.gap is None
        assert all(one.gap is not None and one.gap.least > 0 for one in others)
        assert all(one.weight.value > 0 for one in (first, *others))
    assert 20 < accepted < 500  # both outcomes were met often
