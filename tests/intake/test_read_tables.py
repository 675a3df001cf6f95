"""Tables of stiffness beside calc.toml: values, faults by row and column, what is let in."""

from __future__ import annotations

import hashlib
import os
import random
from fractions import Fraction
from pathlib import Path

import pytest
import rfc8785
from intake_samples import SHORT, changed, check_lines

from calcpack.errors import InputRefused
from calcpack.intake import read, read_file
from calcpack.intake.document import MOST_BYTES
from calcpack.model.beam import Typed
from calcpack.model.request import Calculation

STEPS = "from,to,EI\n0,5.5,2.0e3\n5.5,12,3100\n"


def stated(entry: str = 'table = "stiffness.csv"', units: str = "SI") -> str:
    entries = f"stiffness = [ {{ {entry} }} ]\nlength ="
    return changed(SHORT, ("length =", entries), ('"SI"', f'"{units}"'))


def calculation(folder: Path, csv: str | bytes, text: str = "") -> Calculation:
    content = csv.encode() if isinstance(csv, str) else csv
    (folder / "stiffness.csv").write_bytes(content)
    (folder / "calc.toml").write_text(text or stated(), encoding="utf-8")
    return read_file(folder / "calc.toml")


def faults(folder: Path, csv: str | bytes, text: str = "") -> list[str]:
    with pytest.raises(InputRefused) as refused:
        calculation(folder, csv, text)
    return str(refused.value).split("\n")


def test_rows_are_stretches(tmp_path: Path) -> None:
    found = calculation(tmp_path, STEPS)
    first, second = found.beam.stiffness
    assert [first.start, first.end, first.EI] == [0, Fraction(11, 2), 2000]
    assert [second.start, second.end, second.EI] == [Fraction(11, 2), 12, 3100]
    assert (second.source, second.path) == (Typed("stiffness.csv[1].from"), "stiffness.csv[1]")
    assert {path: value for path, value in found.inputs.items() if "stiffness" in path} == {
        "stiffness.csv[0].from": 0,
        "stiffness.csv[0].to": Fraction(11, 2),
        "stiffness.csv[0].EI": 2000,
        "stiffness.csv[1].from": Fraction(11, 2),
        "stiffness.csv[1].to": 12,
        "stiffness.csv[1].EI": 3100,
    }


def test_a_table_says_what_a_list_says(tmp_path: Path) -> None:
    entries = "from = 0, to = 5.5, EI = 2.0e3 }, { from = 5.5, to = 12, EI = 3100"
    beams = (calculation(tmp_path, STEPS).beam, read(stated(entries).encode()).beam)
    values = [[(one.start, one.end, one.EI) for one in beam.stiffness] for beam in beams]
    assert values[0] == values[1]


def test_cells_may_have_units_and_columns_any_order(tmp_path: Path) -> None:
    csv = (
        'I , from,remark,E, to\r\n"3000 in4",0,"thin, old",29000,2\r\n4e3,"2 ft",,"200 GPa",12\r\n'
    )
    found = calculation(tmp_path, csv, stated(units="US"))
    gigapascals = Fraction(200 * 10**9) * Fraction("0.0254") ** 2 / Fraction("4448.2216152605")
    stiffness = [one.EI * 144 for one in found.beam.stiffness]
    assert stiffness == [29000 * 3000, gigapascals * 4000]
    assert found.inputs["stiffness.csv[1].E"] == gigapascals
    assert found.inputs["stiffness.csv[0].I"] == 3000
    assert "stiffness.csv[0].EI" not in found.inputs


def test_a_column_may_be_chosen(tmp_path: Path) -> None:
    csv = "from,to,EI,steel,composite,E,I\n0,12,9,4,7,0,x\n"
    chosen = stated('table = "stiffness.csv", column = "composite"')
    assert calculation(tmp_path, csv, chosen).beam.stiffness[0].EI == 7
    csv = csv.replace("7", "-7")
    assert faults(tmp_path, csv, chosen) == [
        "stiffness.csv: row 2, composite: -7 kN·m², must be above 0 kN·m²"
    ]


def test_rows_are_counted_as_a_spreadsheet_does(tmp_path: Path) -> None:
    csv = "\ufefffrom,to,EI,\n\n , ,,\n0,5,1,\n,,,\n5,12,0,\n\n"
    assert faults(tmp_path, csv) == ["stiffness.csv: row 6, EI: 0 kN·m², must be above 0 kN·m²"]
    found = calculation(tmp_path, csv.replace("12,0", "12,2"))
    assert [one.path for one in found.beam.stiffness] == ["stiffness.csv[0]", "stiffness.csv[1]"]


@pytest.mark.parametrize(
    ("csv", "lines"),
    [
        ("from,to,EI\n0,5,-1\n5,12,0\n", [
            "row 2, EI: -1 kN·m², must be above 0 kN·m²",
            "row 3, EI: 0 kN·m², must be above 0 kN·m²",
        ]),
        ("from,to,EI\n0,5,\n6,12,3\n", [
            "row 2, EI: absent, must be given, or E and I",
            "row 3, from: 6 m, must be 5 m, where stiffness.csv: row 2 ends",
        ]),
        ("from,to,EI\n0,7,3\n6,11,3\n", [
            "row 3, from: 6 m, must be 7 m, where stiffness.csv: row 2 ends",
            "row 3, to: 11 m, must be 12 m, where the beam ends",
        ]),
        ("from,to,EI\n,12\n", [
            "row 2, from: absent, must be given",
            "row 2, EI: absent, must be given, or E and I",
        ]),
        ("from,to,E,I\n0,12,5,\n", ["row 2, I: absent, must be given beside E"]),
        ("from,to,E,I\n0,12,5,0\n", ["row 2, I: 0 mm⁴, must be above 0 mm⁴"]),
        ("from,to,EI\n0,12,3,4\n", ["row 2: 4 cells, must have at most 3, as the header does"]),
        ("from,to,EI\n0,12,inf\n", ["row 2, EI: inf, must be an EI such as 2.5 kN·m²"]),
        ("from,to,EI\n0,12,true\n", ["row 2, EI: true, must be an EI such as 2.5 kN·m²"]),
        ("from,to,EI\n0,12,1.2.3\n", ["row 2, EI: 1.2.3 kN·m², must be a decimal number"]),
        ("from,to,EI\n0,12,e\n", ["row 2, EI: e kN·m², must be a decimal number"]),
        ('from,to,EI\n0,12,"3,5"\n', ["row 2, EI: 3,5, must be an EI such as 2.5 kN·m²"]),
        ("from,to,EI\n0,12,1e13\n", [
            "row 2, EI: 1e13 kN·m², must be 0 or between 1e-9 and 1e12 in size",
        ]),
        ("from,to,EI\n0,12,1.0000000000000001\n", [
            "row 2, EI: 1.0000000000000001 kN·m², must have at most 15 significant digits",
        ]),
        ("from,to,EI\n0,12,=1+1\n", ["row 2, EI: =1+1, must be an EI such as 2.5 kN·m²"]),
        ("from,to,EI\n0,12,\u0663\n", ["row 2, EI: \u0663, must be an EI such as 2.5 kN·m²"]),
        ("from,to,EI\n0,12,a\u202eb\n", ["row 2, EI: a\\u202eb, must be an EI such as 2.5 kN·m²"]),
    ],
)  # fmt: skip
def test_faults_are_named_by_row_and_column(tmp_path: Path, csv: str, lines: list[str]) -> None:
    assert faults(tmp_path, csv) == [f"stiffness.csv: {line}" for line in lines]


COLUMNS = 'must have the columns "from", "to" and either "EI" or "E" and "I", each once'


@pytest.mark.parametrize(
    ("csv", "line"),
    [
        (b"", f'with the columns "", {COLUMNS}'),
        (b"\n\n", f'with the columns "", {COLUMNS}'),
        (b"from,to,El\n0,12,3\n", f"with the columns from, to, El, {COLUMNS}"),
        (b"from,to,E\n0,12,3\n", f"with the columns from, to, E, {COLUMNS}"),
        (b"from;to;EI\n0;12;3\n", f"with the columns from;to;EI, {COLUMNS}"),
        (b"from,to,EI,E\n0,12,3,3\n", f"with the columns from, to, EI, E, {COLUMNS}"),
        (b"from,to,EI,EI\n0,12,3,3\n", f"with the columns from, to, EI, EI, {COLUMNS}"),
        (b"from,to,EI\n", "with 0 rows, must have 1 to 400"),
        (b"from,to,EI\n" + b"0,1,1\n" * 401, "with 401 rows, must have 1 to 400"),
        (b"from,to,EI\n0,12,\xff\n", "with byte 0xff in line 2, must be UTF-8 text"),
        (b'from,to,EI\n0,12,"3\n', "with unexpected end of data, must be CSV"),
        (b'from,to,EI\n0,12,"3"4\n', "with ',' expected after '\"', must be CSV"),
    ],
)
def test_faults_of_the_whole_table(tmp_path: Path, csv: bytes, line: str) -> None:
    assert faults(tmp_path, csv) == [f"beam.stiffness[0].table: stiffness.csv {line}"]


def test_a_chosen_column_must_be_there(tmp_path: Path) -> None:
    text = stated('table = "stiffness.csv", column = "steel"')
    assert faults(tmp_path, STEPS, text) == [
        "beam.stiffness[0].table: stiffness.csv with the columns from, to, EI, "
        'must have the columns "from", "to" and "steel", each once'
    ]
    text = stated('table = "stiffness.csv", column = 7')
    assert faults(tmp_path, STEPS, text) == ["beam.stiffness[0].column: 7, must be text"]


def test_a_table_has_a_largest_size(tmp_path: Path) -> None:
    filled = STEPS + "\n" * (MOST_BYTES - len(STEPS))
    assert len(calculation(tmp_path, filled).beam.stiffness) == 2
    line = "stiffness.csv, must have at most 1,048,576 bytes"
    assert faults(tmp_path, filled + "\n") == [f"beam.stiffness[0].table: {line}"]


@pytest.mark.parametrize(
    ("entry", "lines"),
    [
        ('table = "stiffness.csv", EI = 3, to = 12', [
            "[0].EI: 3 kN·m², must be left out beside table",
            "[0].to: 12 m, must be left out beside table",
        ]),
        ('table = "stiffness.csv" }, { from = 0, to = 12, EI = 3', [
            "[0].table: stiffness.csv, must be the only entry of beam.stiffness",
        ]),
        ('table = "stiffness.csv" }, { table = "stiffness.csv"', [
            "[0].table: stiffness.csv, must be the only entry of beam.stiffness",
            "[1].table: stiffness.csv, must be the only entry of beam.stiffness",
        ]),
        ("table = 7", ["[0].table: 7, must be text"]),
    ],
)  # fmt: skip
def test_a_table_stands_alone(tmp_path: Path, entry: str, lines: list[str]) -> None:
    assert faults(tmp_path, STEPS, stated(entry)) == [f"beam.stiffness{line}" for line in lines]


@pytest.mark.parametrize(
    "name",
    [
        "../stiffness.csv", "/etc/stiffness.csv", "./stiffness.csv", "sub/../../stiffness.csv",
        "..\\\\stiffness.csv", "C:stiffness.csv", "sub//stiffness.csv", "stiffness.txt",
        "calc.toml", "link.csv", "linked/stiffness.csv", "",
    ],
)  # fmt: skip
def test_a_table_lies_in_the_folder(tmp_path: Path, name: str) -> None:
    folder = tmp_path / "project"
    (folder / "sub").mkdir(parents=True)
    (tmp_path / "stiffness.csv").write_text(STEPS, encoding="utf-8")
    (folder / "link.csv").symlink_to(tmp_path / "stiffness.csv")
    (folder / "linked").symlink_to(tmp_path)
    said = name.replace("\\\\", "\\") or '""'
    assert faults(folder, STEPS, stated(f'table = "{name}"')) == [
        f"beam.stiffness[0].table: {said}, "
        "must be a CSV in the folder of calc.toml, such as stiffness.csv"
    ]


def test_a_table_may_lie_below_the_folder(tmp_path: Path) -> None:
    (tmp_path / "tables").mkdir()
    (tmp_path / "tables" / "a[1].CSV").write_text(STEPS, encoding="utf-8")
    found = calculation(tmp_path, "", stated('table = "tables/a[1].CSV"'))
    assert found.beam.stiffness[1].path == "tables/a[1].CSV[1]"
    assert found.inputs["tables/a[1].CSV[1].EI"] == 3100
    assert found.tables == (("tables/a[1].CSV", STEPS.encode()),)
    assert any(entry.path == "tables/a[1].CSV[1].EI" for entry in found.echo)


def test_what_is_no_readable_file_is_refused(tmp_path: Path) -> None:
    (tmp_path / "folder.csv").mkdir()
    os.mkfifo(tmp_path / "pipe.csv")
    (tmp_path / "round.csv").symlink_to(tmp_path / "round.csv")
    for name in ("missing.csv", "folder.csv", "pipe.csv", "round.csv", "stiffness.csv/a.csv"):
        assert faults(tmp_path, STEPS, stated(f'table = "{name}"')) == [
            f"beam.stiffness[0].table: {name}, must be a file that can be read"
        ]


def test_without_a_folder_a_table_is_refused() -> None:
    with pytest.raises(InputRefused) as refused:
        read(stated().encode())
    assert str(refused.value) == (
        "beam.stiffness[0].table: stiffness.csv, needs the folder of calc.toml, which was not given"
    )


def test_faults_of_a_table_come_where_it_is_named(tmp_path: Path) -> None:
    text = changed(
        stated(),
        ('units = "SI"', 'units = "SI"\npackage.paper = "A3"'),
        ('"roller"', '"rollr"'),
    ) + '[[moving]]\nname = "T"\nuniform = -1\n'  # fmt: skip
    found = faults(tmp_path, "from,to,EI\n0,12,0\n", text)
    assert [line.partition(", must")[0] for line in found] == [
        "package.paper: A3",
        "stiffness.csv: row 2, EI: 0 kN·m²",
        "beam.supports[1].kind: rollr",
        "moving[0].uniform: -1 kN/m",
    ]


def test_the_echo_has_a_row_for_every_cell(tmp_path: Path) -> None:
    echo = calculation(tmp_path, STEPS.replace("3100", "3.1 MN·m2")).echo
    rows = [(one.path, one.said, one.unit) for one in echo if one.path.startswith("stiffness")]
    assert rows == [
        ("stiffness.csv[0].from", "0", "m"),
        ("stiffness.csv[0].to", "5.5", "m"),
        ("stiffness.csv[0].EI", "2.0e3", "kN·m²"),
        ("stiffness.csv[1].from", "5.5", "m"),
        ("stiffness.csv[1].to", "12", "m"),
        ("stiffness.csv[1].EI", "3.1 MN·m2 = 3100", "kN·m²"),
    ]
    paths = [one.path for one in echo]
    assert paths.index("beam.stiffness[0].table") < paths.index("stiffness.csv[0].from")
    assert paths.index("stiffness.csv[1].EI") < paths.index("effects")


def test_the_digest_sees_the_content(tmp_path: Path) -> None:
    found = calculation(tmp_path, STEPS)
    assert found.tables == (("stiffness.csv", STEPS.encode()),)
    assert found.plain["tables"] == {"stiffness.csv": hashlib.sha256(STEPS.encode()).hexdigest()}
    other = calculation(tmp_path, STEPS.replace("3100", "3101"))
    assert rfc8785.dumps(dict(other.plain)) != rfc8785.dumps(dict(found.plain))
    assert "tables" not in read(SHORT.encode()).plain


def test_any_table_is_read_or_refused_in_plain_lines(tmp_path: Path) -> None:
    (tmp_path / "calc.toml").write_text(stated(), encoding="utf-8")
    accepted = 0
    for seed in range(600):
        chance = random.Random(seed)
        data = bytearray(STEPS.encode())
        for _ in range(chance.choice((1, 2, 5))):
            place = chance.randrange(len(data))
            new = chance.choice((b"", b"\n", b",", b'"', b"9", b"-", chance.randbytes(2)))
            data[place : place + chance.randrange(3)] = new
        (tmp_path / "stiffness.csv").write_bytes(data)
        try:
            stretches = read_file(tmp_path / "calc.toml").beam.stiffness
        except InputRefused as refused:
            check_lines(str(refused).split("\n"), refused.problems)
            continue
        accepted += 1
        assert [stretches[0].start, stretches[-1].end] == [0, 12]
        assert all(one.start < one.end and one.EI > 0 for one in stretches)
    assert 20 < accepted < 500  # both outcomes were met often
