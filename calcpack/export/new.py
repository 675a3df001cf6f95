"""Makes the folder of a new calculation; overwrites nothing."""

from __future__ import annotations

import shutil
import tempfile
from datetime import date
from pathlib import Path

from calcpack.errors import InputRefused, OutputFailed, Problem
from calcpack.export.templates import example_folder, example_names, template_folder


def new_folder(folder: Path, like: str | None, today: date) -> None:
    """Make ``folder`` with a calc.toml and the notebook, all of it or nothing.

    Args:
        folder: must not exist yet, or be empty.
        like: the example whose calc.toml and tables are taken; None: the template, dated today.
        today: the day on which the calculation is begun.

    Raises:
        InputRefused: the folder holds something, or no example is called so.
        OutputFailed: the disk refused.
    """
    problems = []
    if folder.exists() and (not folder.is_dir() or any(folder.iterdir())):
        problems.append(Problem(str(folder), "exists", "must be new or an empty folder"))
    if like is not None and like not in example_names():
        listed = ", ".join(example_names())
        problems.append(Problem("--like", like, f"must be one of {listed}"))
    if problems:
        raise InputRefused(problems)
    if like is None:
        template = (template_folder() / "calc.toml").read_text(encoding="utf-8")
        text = template.replace("@today@", today.isoformat())
    else:
        text = (example_folder(like) / "calc.toml").read_text(encoding="utf-8")
    try:
        folder.parent.mkdir(parents=True, exist_ok=True)
        with tempfile.TemporaryDirectory(dir=folder.parent, prefix=f".{folder.name}.") as beside:
            made = Path(beside) / folder.name
            made.mkdir()
            (made / "calc.toml").write_text(text, encoding="utf-8")
            for table in example_folder(like).glob("*.csv") if like else ():
                shutil.copyfile(table, made / table.name)
            shutil.copyfile(template_folder() / "calculation.ipynb", made / "calculation.ipynb")
            made.replace(folder)
    except OSError as error:
        raise OutputFailed(f"{folder}: {error.strerror}") from error
