"""Issuing as a whole: the same bytes anywhere, the data inside, nothing left beside."""

from __future__ import annotations

import hashlib
import json
import os
import shutil
import subprocess
import sys
from pathlib import Path

import pypdfium2  # type: ignore[import-untyped]
import pytest

from calcpack.cli import main

EXAMPLES = Path(__file__).parent.parent.parent / "example_projects"


def attached(pdf: bytes) -> dict[str, bytes]:
    document = pypdfium2.PdfDocument(pdf)
    files = (document.get_attachment(i) for i in range(document.count_attachments()))
    return {file.get_name(): bytes(file.get_data()) for file in files}


def issued(folder: Path, out: Path, environment: dict[str, str]) -> bytes:
    command = [sys.executable, "-m", "calcpack", "issue", str(folder), "--out", str(out)]
    subprocess.run(command, check=True, cwd=out.parent, env={**os.environ, **environment})
    return out.read_bytes()


def test_the_same_bytes_in_another_place_and_time(tmp_path: Path) -> None:
    one, two = tmp_path / "one", tmp_path / "two" / "deeper"
    for folder in (one, two):
        shutil.copytree(EXAMPLES / "crane_runway", folder / "crane_runway")
    here = {"TZ": "UTC", "LC_ALL": "C", "PYTHONHASHSEED": "1"}
    there = {
        "TZ": "Pacific/Auckland",
        "LC_ALL": "C.UTF-8",
        "PYTHONHASHSEED": "2",
        "SOURCE_DATE_EPOCH": "1",
    }
    first = issued(one / "crane_runway", one / "a.pdf", here)
    assert first == issued(two / "crane_runway", two / "b.pdf", there)


def test_the_data_is_inside(tmp_path: Path, capsysbinary: pytest.CaptureFixture[bytes]) -> None:
    folder = tmp_path / "new"
    assert main(["new", str(folder), "--like", "service_trestle"]) == 0
    assert main(["issue", str(folder)]) == 0
    assert sorted(path.name for path in folder.iterdir()) == [
        "calc.toml",
        "calculation.ipynb",
        "package.pdf",
    ]
    capsysbinary.readouterr()
    assert main(["solve", str(folder / "calc.toml"), "--json"]) == 0
    files = attached((folder / "package.pdf").read_bytes())
    assert set(files) == {"calc.toml", "results.json", "calculation.ipynb", "manifest.json"}
    assert files["results.json"] == capsysbinary.readouterr().out
    assert files["calc.toml"] == (folder / "calc.toml").read_bytes()
    cells = json.loads(files["calculation.ipynb"])["cells"]
    assert all(not cell.get("outputs") for cell in cells)
    listed = {one["name"]: one for one in json.loads(files["manifest.json"])["files"]}
    assert set(listed) == set(files) - {"manifest.json"}
    for name, entry in listed.items():
        assert entry["sha256"] == hashlib.sha256(files[name]).hexdigest()
        assert entry["sha1"] == hashlib.sha1(files[name], usedforsecurity=False).hexdigest()


def test_tables_are_inside(tmp_path: Path) -> None:
    text = (EXAMPLES / "propped_cantilever" / "calc.toml").read_text(encoding="utf-8")
    stated = "stiffness = [{ from = 0.0, to = 21.6, EI = 84000.0 }]"
    assert stated in text
    table = b"from,to,EI\n0.0,10.0,84000.0\n10.0,21.6,90000.0\n"
    (tmp_path / "calc.toml").write_text(
        text.replace(stated, 'stiffness = [{ table = "stiffness.csv" }]'), encoding="utf-8"
    )
    (tmp_path / "stiffness.csv").write_bytes(table)
    assert main(["issue", str(tmp_path)]) == 0
    assert attached((tmp_path / "package.pdf").read_bytes())["stiffness.csv"] == table


def test_a_progress_bar_shows_on_a_terminal_only(
    tmp_path: Path, capfd: pytest.CaptureFixture[str]
) -> None:
    shutil.copy(EXAMPLES / "crane_runway" / "calc.toml", tmp_path)
    assert main(["issue", str(tmp_path)]) == 0
    assert capfd.readouterr() == ("", "")
