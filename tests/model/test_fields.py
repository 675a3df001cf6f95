"""The field table hangs together, and holds every key that the file format has."""

from __future__ import annotations

import tomllib
from collections.abc import Iterator
from typing import Any

import pytest

from calcpack.exact.units import SYSTEMS
from calcpack.model.fields import FIELDS, KEYS, field_at, pattern_of

EVERY_KEY = """
format = 1
units = "US"
[cover]
title = ""
number = ""
project = ""
client = ""
prepared = { by = "", on = 2026-01-01 }
checked = { by = "", on = 2026-01-01 }
approved = { by = "", on = 2026-01-01 }
revisions = [ { mark = "", on = 2026-01-01, text = "" } ]
[package]
status = ""
paper = ""
detail = ""
[[assumptions]]
text = ""
basis = ""
open = false
[beam]
length = 1
spans = [1]
overhang_left = 1
overhang_right = 1
supports = [ { name = "", at = 1, kind = "", face = "", vertical = 1, rotational = 1 } ]
releases = [ { name = "", at = 1, kind = "" } ]
sections = [ { name = "", at = 1 } ]
stiffness = [ { from = 1, to = 1, EI = 1, E = 1, I = 1, table = "", column = "" } ]
redundants = [""]
transfer = 1
[[effects]]
kind = ""
at = ""
side = ""
show = ""
[[trains]]
name = ""
table = ""
axles = [ { weight = 1, spacing = { list = [1], least = 1 } } ]
[[moving]]
name = ""
standard = ""
variant = ""
scale = 1
length = 1
compared = ""
hogging = [ { from = "", to = "", source = "" } ]
table = ""
trains = [""]
axles = [ { weight = 1, spacing = { list = [1], least = 1 } } ]
uniform = 1
trailing = [
  { behind = 1, ahead = 1, load = 1, weight = 1, length = 1, extent = "" },
]
heading = ""
relieving = ""
allowance = [ { of = "", value = 1, source = "" } ]
distribution = [ { kind = "", from = "", to = "", value = 1, source = "" } ]
order = ""
spacing = { list = [1], least = 1 }
absent = ""
[[permanent]]
name = ""
uniform = 1
points = 1
couples = 1
settlements = [ { at = "", down = 1, turn = 1 } ]
stage = ""
acts = ""
[other]
"""

NESTED = {
    "trains[].axles[].spacing",
    "moving[].axles[].spacing",
    "moving[].spacing",
    "moving[].allowance[]",
    "moving[].distribution[]",
}
"""Tables that may stand in place of a number."""

TEXTS = {"text", "long text", "name", "choice", "date", "flag", "place", "table"}


def paths(value: Any, path: str = "") -> Iterator[str]:
    if path:
        yield path
    if isinstance(value, dict):
        for key, item in value.items():
            yield from paths(item, f"{path}.{key}" if path else key)
    elif isinstance(value, list):
        for index, item in enumerate(value):
            yield from paths(item, f"{path}[{index}]")


def test_the_table_has_the_keys_of_the_format_and_no_others() -> None:
    stated = {pattern_of(path).removesuffix("[]") for path in paths(tomllib.loads(EVERY_KEY))}
    later = ["stages", "given", "combinations", "resistances", "deck"]
    assert stated - {"other"} | set(later) == set(FIELDS)
    assert all(not FIELDS[key].computed for key in later)
    assert set(KEYS) >= NESTED


@pytest.mark.parametrize("pattern", FIELDS)
def test_each_field_fits_its_table_and_its_kind(pattern: str) -> None:
    field = FIELDS[pattern]
    table, _, key = pattern.rpartition(".")
    assert KEYS[table][key] is field
    if table:
        parent = FIELDS[table.removesuffix("[]")]
        if table in NESTED:
            assert parent.kind not in TEXTS
        else:
            assert parent.kind == "table"
            assert parent.form == ("list" if table.endswith("[]") else "one")
    assert field.label
    assert all(field.kind in kinds or field.kind in TEXTS for kinds in SYSTEMS.values())
    assert bool(field.symbol) == (field.kind not in TEXTS - {"place"})
    assert field.kind != "choice" or field.default in (None, *field.choices)
    assert not (field.required and field.default is not None)
    beside, _, word = field.beside.partition(" = ")
    assert not beside or beside in KEYS[table]
    assert not word or word.strip('"') in KEYS[table][beside].choices


def test_a_path_finds_the_field_of_its_pattern() -> None:
    assert field_at("moving[3].axles[10].weight") is FIELDS["moving[].axles[].weight"]
    assert field_at("effects[0].at[2]") is FIELDS["effects[].at"]
    assert field_at("beam.supports[0].colour") is None
