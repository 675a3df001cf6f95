"""The commands as a user meets them: exit status, lines on the terminal, what is written."""

from __future__ import annotations

import json
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path

import pytest

from calcpack.cli import main

EXAMPLES = Path(__file__).parent.parent / "example_projects"
GOOD = """\
format = 1
units = "SI"
cover.title = "Beam"
cover.prepared = { by = "A. Preparer", on = 2026-03-02 }

[beam]
length = 10.0
supports = [
  { name = "A", at = 0.0, kind = "pin" },
  { name = "B", at = 8.0, kind = "roller" },
]
releases = []
sections = [{ name = "1", at = 4.0 }]

[[moving]]
name = "Cart"
axles = [{ weight = 5.0 }]
"""

Change = Callable[[str], str]


def swap(old: str, new: str) -> Change:
    def change(text: str) -> str:
        assert old in text
        return text.replace(old, new)

    return change


HINGES = 'releases = [{ name = "h", at = 4.0, kind = "hinge" }]'
FIXED_WITH_TWO = """releases = [
  { name = "h", at = 2.0, kind = "hinge" },
  { name = "k", at = 4.0, kind = "hinge" },
]"""

REFUSED: list[tuple[str, Change, list[str]]] = [
    ("unknown kind", swap('"roller"', '"rocker"'), ["beam.supports[1].kind: rocker"]),
    (
        "two faults in two places",
        lambda text: swap('"roller"', '"rocker"')(swap("weight = 5.0", "weight = -5.0")(text)),
        ["beam.supports[1].kind: rocker", "moving[0].axles[0].weight: -5.0"],
    ),
    ("station outside", swap("at = 8.0", "at = 18.0"), ["beam.supports[1].at: 18.0"]),
    ("nan", swap("length = 10.0", "length = nan"), ["beam.length: nan"]),
    ("inf", swap("length = 10.0", "length = inf"), ["beam.length: inf"]),
    ("1e400", swap("length = 10.0", "length = 1e400"), ["beam.length: 1e400"]),
    (
        "misspelt key",
        swap("length = 10.0", "lenght = 10.0"),
        ["beam.length: absent", "beam.lenght: 10.0"],
    ),
    ("two supports in one place", swap("at = 8.0", "at = 0.0"), ["beam.supports[1].at: 0.0"]),
    (
        "no vertical support",
        lambda text: text.replace('"pin"', '"guided"').replace('"roller"', '"guided"'),
        ["beam.supports: "],
    ),
    (
        "effect at an unknown name",
        lambda text: text + '\n[[effects]]\nkind = "moment"\nat = "Z"\n',
        ["effects[0].at: Z"],
    ),
    ("not TOML", lambda text: text + "\n[[[", ["CALC: "]),
    ("binary", lambda text: "\0" + text, ["CALC: "]),
    ("empty", lambda text: "", ["CALC: "]),
    ("newer format", swap("format = 1", "format = 2"), ["format: 2"]),
    ("a hinge too many", swap("releases = []", HINGES), ["beam: unstable"]),
    (
        "a hinge too many in a balanced count",
        lambda text: swap("releases = []", FIXED_WITH_TWO)(
            text.replace('"pin"', '"fixed"').replace(
                '{ name = "B", at = 8.0',
                '{ name = "C", at = 1.0, kind = "roller" },\n  { name = "B", at = 8.0',
            )
        ),
        ["beam: unstable"],
    ),
    (
        "deflection without stiffness",
        lambda text: text + '\n[[effects]]\nkind = "deflection"\nat = "1"\n',
        ["effects[0].kind: deflection"],
    ),
    (
        "redundants that do not suit",
        lambda text: swap("releases = []", 'releases = []\nredundants = ["reaction B"]')(text),
        ["beam.redundants: reaction at B"],
    ),
]


@pytest.mark.parametrize(
    ("change", "starts"), [case[1:] for case in REFUSED], ids=[case[0] for case in REFUSED]
)
@pytest.mark.parametrize("command", ["solve", "issue"])
def test_refused_input_gives_a_line_a_fault(
    change: Change,
    starts: list[str],
    command: str,
    tmp_path: Path,
    capsys: pytest.CaptureFixture[str],
) -> None:
    file = tmp_path / "calc.toml"
    file.write_text(change(GOOD))
    assert main([command, str(file if command == "solve" else tmp_path)]) == 2
    out, err = capsys.readouterr()
    assert out == ""
    lines = err.splitlines()
    assert len(lines) == len(starts)
    for line, start in zip(lines, starts, strict=True):
        assert line.startswith(start.replace("CALC", "calc.toml")), line
        assert ", " in line
    assert "Traceback" not in err
    assert [path.name for path in tmp_path.iterdir()] == ["calc.toml"]


def test_an_unstable_beam_names_what_moves(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    file = tmp_path / "calc.toml"
    file.write_text(swap("releases = []", HINGES)(GOOD))
    assert main(["solve", str(file)]) == 2
    line = capsys.readouterr().err
    for word in ("A (pin)", "B (roller)", "h (hinge)", "rotation"):
        assert word in line


def test_a_missing_file_is_named(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["solve", str(tmp_path / "calc.toml")]) == 2
    assert "calc.toml" in capsys.readouterr().err
    assert main(["issue", str(tmp_path)]) == 2
    assert list(tmp_path.iterdir()) == []


def test_solve_prints_a_short_table(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "calc.toml"
    file.write_text(GOOD)
    assert main(["solve", str(file)]) == 0
    out = capsys.readouterr().out
    assert "determinate: 2 unknowns" in out
    # Simple beam of 8 m, 5 kN at the middle: P L / 4 = 10 kNm, at 4 m (closed form).
    (line,) = (one for one in out.splitlines() if "moment at 1" in one and "max" in one)
    assert line.split()[-5:] == ["10.00", "kN·m", "4.000", "m", "right"]


def test_solve_json_prints_results_only(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    file = tmp_path / "calc.toml"
    file.write_text(GOOD)
    assert main(["solve", str(file), "--json"]) == 0
    out, err = capsys.readouterr()
    assert err == ""
    assert json.loads(out)["classification"]["degree"] == 0


def test_issue_writes_one_file_and_leaves_nothing_else(tmp_path: Path) -> None:
    (tmp_path / "calc.toml").write_text(GOOD)
    assert main(["issue", str(tmp_path)]) == 0
    assert sorted(path.name for path in tmp_path.iterdir()) == ["calc.toml", "package.pdf"]
    assert (tmp_path / "package.pdf").read_bytes().startswith(b"%PDF-")


def test_issue_without_a_date_is_refused(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    (tmp_path / "calc.toml").write_text(swap(", on = 2026-03-02", "")(GOOD))
    assert main(["issue", str(tmp_path)]) == 2
    assert capsys.readouterr().err.startswith("cover.prepared.on: ")
    assert [path.name for path in tmp_path.iterdir()] == ["calc.toml"]


def test_a_folder_that_cannot_be_written_to_is_reported(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    (tmp_path / "calc.toml").write_text(GOOD)
    assert main(["issue", str(tmp_path), "--out", str(tmp_path / "no" / "package.pdf")]) == 3
    assert "package.pdf" in capsys.readouterr().err
    assert [path.name for path in tmp_path.iterdir()] == ["calc.toml"]


def test_an_older_package_survives_a_refusal(tmp_path: Path) -> None:
    (tmp_path / "calc.toml").write_text("")
    (tmp_path / "package.pdf").write_bytes(b"older")
    assert main(["issue", str(tmp_path)]) == 2
    assert (tmp_path / "package.pdf").read_bytes() == b"older"


def test_a_character_without_a_glyph_is_refused_at_its_field(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    (tmp_path / "calc.toml").write_text(swap('"Cart"', '"\u4e2d"')(GOOD), encoding="utf-8")
    assert main(["issue", str(tmp_path)]) == 2
    assert capsys.readouterr().err.startswith("moving[0].name: \u4e2d, must do without U+4E2D")


@pytest.mark.parametrize("like", [None, "crane_runway", "drop_in_girder", "service_trestle"])
def test_a_new_folder_can_be_solved(like: str | None, tmp_path: Path) -> None:
    folder = tmp_path / "deep" / "new"
    assert main(["new", str(folder), *(["--like", like] if like else [])]) == 0
    assert sorted(path.name for path in folder.iterdir()) == ["calc.toml", "calculation.ipynb"]
    assert list(folder.parent.iterdir()) == [folder]
    assert main(["solve", str(folder / "calc.toml")]) == 0


def test_a_new_folder_brings_the_tables_that_its_example_names(tmp_path: Path) -> None:
    folder = tmp_path / "new"
    assert main(["new", str(folder), "--like", "permit_crossing"]) == 0
    assert sorted(path.name for path in folder.iterdir()) == [
        "calc.toml",
        "calculation.ipynb",
        "permit.csv",
    ]


@pytest.mark.parametrize("command", ["solve", "issue"])
def test_stopping_a_search_leaves_nothing_behind(
    command: str,
    tmp_path: Path,
    monkeypatch: pytest.MonkeyPatch,
    capsys: pytest.CaptureFixture[str],
) -> None:
    """As Ctrl-C does, in the middle of the search."""
    (tmp_path / "calc.toml").write_text(GOOD)
    (tmp_path / "package.pdf").write_bytes(b"older")

    def stop(bar: object, done: int, parts: int, what: str) -> None:
        if done == 2:
            raise KeyboardInterrupt

    monkeypatch.setattr("calcpack.cli._Bar.search", stop)
    path = tmp_path if command == "issue" else tmp_path / "calc.toml"
    assert main([command, str(path)]) == 130
    assert capsys.readouterr() == ("", "calcpack: stopped; nothing was written\n")
    assert sorted(one.name for one in tmp_path.iterdir()) == ["calc.toml", "package.pdf"]
    assert (tmp_path / "package.pdf").read_bytes() == b"older"


def test_new_overwrites_nothing(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    (tmp_path / "calc.toml").write_text("mine")
    assert main(["new", str(tmp_path), "--like", "nothing"]) == 2
    lines = capsys.readouterr().err.splitlines()
    assert lines[0] == f"{tmp_path}: exists, must be new or an empty folder"
    assert lines[1].startswith("--like: nothing, must be one of crane_runway, ")
    assert (tmp_path / "calc.toml").read_text() == "mine"
    assert [path.name for path in tmp_path.iterdir()] == ["calc.toml"]


def test_the_module_runs(tmp_path: Path) -> None:
    (tmp_path / "calc.toml").write_text(GOOD)
    run = subprocess.run(
        [sys.executable, "-m", "calcpack", "solve", "calc.toml"],
        cwd=tmp_path,
        capture_output=True,
        check=False,
        text=True,
        encoding="utf-8",
    )
    assert (run.returncode, run.stderr) == (0, "")
    assert run.stdout.startswith("Beam\n")
