"""Where templates and examples lie: inside the package when installed, else in the checkout."""

from __future__ import annotations

from pathlib import Path

import calcpack.export

PACKAGE = Path(calcpack.export.__file__).parent.parent


def template_folder() -> Path:
    """The folder with the notebook, the calc.toml template and the Typst layout."""
    return _found("templates")


def example_names() -> tuple[str, ...]:
    """The examples that a calculation can be begun from."""
    return tuple(
        sorted(path.parent.name for path in _found("example_projects").glob("*/calc.toml"))
    )


def example_folder(name: str) -> Path:
    """The folder of one example."""
    return _found("example_projects") / name


def _found(name: str) -> Path:
    installed = PACKAGE / name
    return installed if installed.is_dir() else PACKAGE.parent / name
