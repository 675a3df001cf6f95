"""The command line: ``calcpack new``, ``solve``, ``issue`` and ``models``."""

from __future__ import annotations

import argparse
import os
import sys
import tempfile
from collections.abc import Sequence
from datetime import date
from pathlib import Path

from calcpack.errors import CalcpackError, Disagreement, InputRefused, OutputFailed, Problem

DONE, DISAGREES, REFUSED, FAILED = 0, 1, 2, 3
STOPPED = 130
"""What a shell says of a command that was interrupted."""


def main(arguments: Sequence[str] | None = None) -> int:
    """Run one command.

    Returns:
        0 done; 1 a check did not hold; 2 input refused, one line per fault on standard error;
        3 disk, kernel or typesetter failed; 130 it was stopped. After 2, 3 or 130 nothing has
        been written.
    """
    chosen = _parser().parse_args(arguments)
    try:
        chosen.run(chosen)
    except KeyboardInterrupt:
        print("calcpack: stopped; nothing was written", file=sys.stderr)
        return STOPPED
    except InputRefused as refused:
        for problem in refused.problems:
            print(problem, file=sys.stderr)
        return REFUSED
    except Disagreement as error:
        print(f"calcpack: {error}", file=sys.stderr)
        return DISAGREES
    except (CalcpackError, OSError) as error:
        print(f"calcpack: {error}", file=sys.stderr)
        return FAILED
    return DONE


def _parser() -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(
        prog="calcpack", description="Checkable calculation packages for beams under moving loads."
    )
    commands = parser.add_subparsers(required=True, metavar="COMMAND")
    new = commands.add_parser("new", help="make the folder of a new calculation")
    new.add_argument("folder", type=Path, metavar="FOLDER")
    new.add_argument("--like", metavar="EXAMPLE", help="begin from the example of that name")
    new.set_defaults(run=_new)
    solve = commands.add_parser("solve", help="compute a calc.toml and print what was found")
    solve.add_argument("calculation", type=Path, metavar="CALC.toml")
    solve.add_argument("--json", action="store_true", help="print results.json")
    solve.set_defaults(run=_solve)
    issue = commands.add_parser("issue", help="make the package of a calculation's folder")
    issue.add_argument("folder", type=Path, metavar="FOLDER")
    issue.add_argument("--out", type=Path, metavar="PDF", help="default: FOLDER/package.pdf")
    issue.set_defaults(run=_issue)
    models = commands.add_parser("models", help="list the published load models, or print one")
    models.add_argument("name", nargs="*", metavar="NAME", help="a model, such as HL-93")
    models.set_defaults(run=_models)
    return parser


def _new(chosen: argparse.Namespace) -> None:
    from calcpack.export.new import new_folder

    new_folder(chosen.folder, chosen.like, date.today())


def _solve(chosen: argparse.Namespace) -> None:
    from calcpack.intake import read_file
    from calcpack.render.text import to_text
    from calcpack.results import as_bytes, results
    from calcpack.solution import solve

    calculation = read_file(chosen.calculation)
    with _Bar() as bar:
        solution = solve(calculation, bar.search)
    found = as_bytes(results(solution)) if chosen.json else to_text(solution).encode()
    sys.stdout.buffer.write(found)


def _issue(chosen: argparse.Namespace) -> None:
    import nbformat

    from calcpack.export.issue import issue
    from calcpack.export.templates import template_folder

    own = chosen.folder / "calculation.ipynb"
    source = own if own.exists() else template_folder() / "calculation.ipynb"
    try:
        notebook = nbformat.read(source, as_version=4)
    except (ValueError, nbformat.ValidationError) as error:
        needs = "must be a notebook of format 4"
        raise InputRefused([Problem("calculation.ipynb", type(error).__name__, needs)]) from error
    with _Bar() as bar:
        package = issue(notebook, chosen.folder, bar.phase, bar.search)
    _write(chosen.out or chosen.folder / "package.pdf", package)


def _models(chosen: argparse.Namespace) -> None:
    from calcpack.intake.reading import nearest
    from calcpack.intake.shown import shown
    from calcpack.intake.standards import model_names, read_model
    from calcpack.render.models import describe_model, list_models

    if not chosen.name:
        found = list_models()
    else:
        name = " ".join(chosen.name)
        if name not in model_names():
            needs = f"is not a known model; {nearest(name, model_names(), 3)}"
            raise InputRefused([Problem("models", shown(name), needs)])
        found = describe_model(read_model(name))
    sys.stdout.buffer.write(found.encode())


class _Bar:
    """Progress on a terminal: the phase at hand, and within the search part by part."""

    def __enter__(self) -> _Bar:
        from tqdm import tqdm

        form = "{bar:20} {n_fmt}/{total_fmt} {desc}"
        self._bar = tqdm(total=1, disable=None, leave=False, bar_format=form)
        return self

    def __exit__(self, *raised: object) -> None:
        self._bar.close()

    def phase(self, name: str) -> None:
        self.search(0, 1, name)

    def search(self, done: int, parts: int, what: str) -> None:
        self._bar.total, self._bar.n = parts, done
        self._bar.set_description_str(what)


def _write(path: Path, content: bytes) -> None:
    """Write a file whole or not at all: beside it first, then in its place."""
    try:
        handle, beside = tempfile.mkstemp(dir=path.parent, prefix=f".{path.name}.")
    except OSError as error:
        raise OutputFailed(f"{path}: {error.strerror}") from error
    try:
        with os.fdopen(handle, "wb") as file:
            file.write(content)
            file.flush()
            os.fsync(file.fileno())
        os.chmod(beside, 0o644)
        os.replace(beside, path)
    except OSError as error:
        Path(beside).unlink(missing_ok=True)
        raise OutputFailed(f"{path}: {error.strerror}") from error
