"""The second methods share nothing with the first: their imports are parsed, every one."""

from __future__ import annotations

import ast
import sys
from pathlib import Path

import calcpack.second

ALLOWED = ("calcpack.exact", "calcpack.model", "calcpack.errors", "calcpack.second", "numpy")


def imported(source: str) -> list[str]:
    names = []
    for node in ast.walk(ast.parse(source)):
        if isinstance(node, ast.Import):
            names += [alias.name for alias in node.names]
        elif isinstance(node, ast.ImportFrom):
            assert not node.level
            names.append(node.module or "")
    return names


def test_imports_only_what_lies_below() -> None:
    files = sorted(Path(calcpack.second.__file__).parent.glob("**/*.py"))
    assert len(files) >= 4
    for file in files:
        for name in imported(file.read_text(encoding="utf-8")):
            below = any(name == one or name.startswith(f"{one}.") for one in ALLOWED)
            assert below or name.split(".")[0] in sys.stdlib_module_names, (file.name, name)
