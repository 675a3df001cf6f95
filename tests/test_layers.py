"""Imports go downward only: every module of the package is parsed, function-level imports too."""

from __future__ import annotations

import ast
import sys
from collections.abc import Iterator
from pathlib import Path

import pytest

import calcpack

ROOT = Path(calcpack.__file__).parent
MODULES = sorted(ROOT.glob("**/*.py"))

RANKS = {
    name: rank
    for rank, names in enumerate(
        (
            ("errors",),
            ("exact",),
            ("model",),
            ("statics",),
            ("elastic",),
            ("moving",),
            ("second",),
            ("derive",),
            ("analysis",),
            ("envelopes",),
            ("intake", "solution"),
            ("results",),
            ("sheets",),
            ("render",),
            ("export", "notebook"),
            ("cli",),
            ("__main__",),
        )
    )
    for name in names
}
ONLY = {
    "errors": set(),
    "exact": set(),
    "second": {"exact", "model", "errors"},
    "intake": {"exact", "model", "errors"},
}
"""What the layers that promise more than their rank may import, beside themselves."""


def part_of(path: Path) -> str:
    """The layer that a module belongs to; "" for the root."""
    first = path.relative_to(ROOT).parts[0].removesuffix(".py")
    return "" if first == "__init__" else first


def imported(path: Path) -> Iterator[str]:
    """Every module that a module imports, by its full name."""
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            yield from (alias.name for alias in node.names)
        elif isinstance(node, ast.ImportFrom):
            assert not node.level, f"{path.name}: a relative import hides its layer"
            base = node.module or ""
            yield base
            yield from (f"{base}.{alias.name}" for alias in node.names if base == "calcpack")
        elif isinstance(node, ast.Call):
            named = ast.unparse(node.func).rpartition(".")[2]
            assert named not in ("__import__", "import_module"), f"{path.name}: {named}"


def layers_imported(path: Path) -> set[str]:
    """The layers of the package that a module imports; "" for the root itself."""
    found = set()
    for name in imported(path):
        top, *rest = name.split(".")
        if top == "calcpack":
            found.add(rest[0] if rest else "")
    return found


def test_every_layer_is_known() -> None:
    assert len(MODULES) > 30
    parts = {part_of(path) for path in MODULES} - {""}
    assert parts <= RANKS.keys()
    assert {"errors", "exact", "model", "statics", "moving", "second", "derive"} <= parts


@pytest.mark.parametrize("path", MODULES, ids=lambda path: str(path.relative_to(ROOT)))
def test_imports_go_downward(path: Path) -> None:
    own, wanted = part_of(path), layers_imported(path)
    if own == "":
        return  # the root names what others offer, and none of them asks it
    from_root = {name for name in imported(path) if name == "calcpack"}
    assert not from_root, "the root is imported by none"
    for layer in wanted - {own}:
        assert RANKS[layer] < RANKS[own], layer
    if own in ONLY:
        assert wanted <= ONLY[own] | {own}


def test_the_exact_layer_needs_the_standard_library_only() -> None:
    files = [path for path in MODULES if part_of(path) in ("exact", "errors")]
    assert len(files) > 5
    for path in files:
        for name in imported(path):
            top = name.split(".")[0]
            assert top in sys.stdlib_module_names or top == "calcpack", (path.name, name)
