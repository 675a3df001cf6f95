"""Where the packaged templates lie: beside the package when installed, else in the checkout."""

from __future__ import annotations

from pathlib import Path

import calcpack.export


def template_folder() -> Path:
    """The folder with the notebook template and the Typst layout."""
    package = Path(calcpack.export.__file__).parent.parent
    installed = package / "templates"
    return installed if installed.is_dir() else package.parent / "templates"
