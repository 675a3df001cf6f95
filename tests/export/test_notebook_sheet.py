"""What ``calcpack.sheet`` shows in a notebook."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import pytest
from notebook_samples import CALC

import calcpack
import calcpack.notebook
from calcpack import read, results, solve
from calcpack.errors import Disagreement
from calcpack.model.request import Calculation
from calcpack.render.markdown import SHEET_MIME
from calcpack.sheets.pages import SHEET_NAMES


@pytest.fixture(autouse=True)
def _folder(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    (tmp_path / "calc.toml").write_text(CALC, encoding="utf-8")
    monkeypatch.chdir(tmp_path)
    monkeypatch.setattr(calcpack.notebook, "_latest", {})


def test_the_output_names_sheet_and_digest() -> None:
    digest = results(solve(read(CALC.encode())))["digest"]
    for name in SHEET_NAMES:
        bundle = calcpack.sheet(name)._repr_mimebundle_()
        assert bundle.keys() == {"text/plain", "text/markdown", SHEET_MIME}
        assert bundle[SHEET_MIME] == {"format": 1, "sheet": name, "digest": digest}
        assert bundle["text/markdown"].startswith(("# ", "This calculation has nothing"))
        assert len(bundle["text/plain"]) < 120


def test_a_faulty_calc_toml_is_shown_as_its_problems() -> None:
    calc = CALC.replace("length = 9.0", "length = -9.0").replace('"pin"', '"pni"')
    Path("calc.toml").write_text(calc, encoding="utf-8")
    bundle = calcpack.sheet("lines")._repr_mimebundle_()
    assert bundle[SHEET_MIME] == {"format": 1, "sheet": "lines", "digest": None}
    assert "text/markdown" not in bundle
    first, second = bundle["text/plain"].splitlines()
    assert first.startswith("beam.length: -9.0 m, must be above 0")
    assert second.startswith("beam.supports[0].kind: pni, must be ")


def test_no_calc_toml_is_shown_as_a_problem() -> None:
    Path("calc.toml").unlink()
    shown = calcpack.sheet("cover")
    assert shown.digest is None
    assert shown.text.startswith("calc.toml: not found")


def test_second_methods_that_differ_are_shown(monkeypatch: pytest.MonkeyPatch) -> None:
    def differ(calculation: object) -> None:
        raise Disagreement("reaction at A: the kinematic method differs")

    monkeypatch.setattr(calcpack.notebook, "solve", differ)
    shown = calcpack.sheet("cover")
    assert (shown.digest, shown.text) == (None, "reaction at A: the kinematic method differs")


def test_an_unknown_sheet_is_an_error_that_lists_the_known() -> None:
    with pytest.raises(ValueError, match=r"no sheet is called 'lnes'; known are cover, "):
        calcpack.sheet("lnes")


def test_the_file_is_solved_once_until_it_changes(monkeypatch: pytest.MonkeyPatch) -> None:
    solved = []

    def count(calculation: Calculation) -> calcpack.Solution:
        solved.append(calculation.text)
        return solve(calculation)

    monkeypatch.setattr(calcpack.notebook, "solve", count)
    first = [calcpack.sheet(name).digest for name in ("cover", "lines", "cover")]
    longer = CALC.replace("9.0", "9.5")
    Path("calc.toml").write_text(longer, encoding="utf-8")
    second = calcpack.sheet("lines").digest
    assert solved == [CALC, longer]
    assert set(first) != {second}
    assert len(set(first)) == 1


def test_importing_calcpack_is_light() -> None:
    code = (
        "import sys, calcpack\n"
        "heavy = {'nbconvert', 'nbclient', 'nbformat', 'matplotlib', 'typst', 'markdown_it'}\n"
        "print(heavy & set(sys.modules))\n"
        "calcpack.sheet\n"
        "print(heavy & set(sys.modules))"
    )
    found = subprocess.run([sys.executable, "-c", code], capture_output=True, check=True, text=True)
    assert found.stdout == "set()\nset()\n"


def test_an_unknown_name_of_the_package_is_an_attribute_error() -> None:
    with pytest.raises(AttributeError, match="has no attribute 'shete'"):
        calcpack.shete  # noqa: B018
