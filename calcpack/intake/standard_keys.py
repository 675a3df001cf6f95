"""Keys that the file of a load model may have, and what each may hold."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from decimal import Decimal
from typing import Any, Literal, get_args

from calcpack.errors import ProgramFault
from calcpack.model.loads import Part
from calcpack.model.request import EffectKind


@dataclass(frozen=True)
class _Key:
    """One key of a model's file.

    Attributes:
        kind: "text", "number", "count" (a whole number from 1), a table of ``_TABLES``, or
            "number or ..." such a table.
        form: one, a list, either, or a list of lists.
        choices: what a text may be.
    """

    kind: str = "text"
    form: Literal["one", "list", "several", "lists"] = "one"
    required: bool = False
    choices: tuple[str, ...] = ()


_TEXT = _Key(required=True)
_NUMBER = _Key("number")
_PARTS = get_args(Part)
RULE = dict.fromkeys(
    ("constant", "per_length", "per_square", "over", "beside", "least", "most"), _NUMBER
)
"""Keys of a rule, or of a piece of one."""
_RULE_OR_PIECES = {**RULE, "pieces": _Key("piece", "list")}

_TABLES: Mapping[str, Mapping[str, _Key]] = {
    "": {
        "format": _Key("number", required=True),
        "name": _TEXT,
        "title": _TEXT,
        "edition": _TEXT,
        "clause": _TEXT,
        "seen": _Key(required=True, choices=("page", "memory")),
        "units": _Key(required=True, choices=("US", "SI")),
        "per": _TEXT,
        "scales": _Key("number", "list"),
        "needs": _Key("needs"),
        "longest": _Key("longest"),
        "dynamic": _Key(),
        "notes": _Key("note", "list"),
        "variants": _Key("variant", "list"),
        "trains": _Key("train", "list"),
        "cases": _Key("case", "list", required=True),
    },
    "needs": {"beam": _Key(required=True, choices=("continuous",)), "clause": _TEXT},
    "longest": {"beam": _Key("number", required=True), "says": _TEXT},
    "note": {"says": _TEXT, "clause": _TEXT},
    "variant": {
        "name": _TEXT,
        "says": _TEXT,
        "per": _Key(),
        "factors": _Key("factor", "list"),
    },
    "factor": {"value": _Key("number", required=True), "clause": _TEXT},
    "train": {
        "name": _TEXT,
        "axles": _Key("axle", "list"),
        "trailing": _Key("trailing", "list"),
    },
    "axle": {"weight": _Key("number", required=True), "spacing": _Key("number or gap", "several")},
    "gap": {"list": _Key("number", "list"), "least": _NUMBER},
    "trailing": {
        "behind": _NUMBER,
        "ahead": _NUMBER,
        "load": _NUMBER,
        "weight": _NUMBER,
        "length": _NUMBER,
        "extent": _Key(required=True, choices=("unbroken", "in parts")),
    },
    "case": {
        "name": _TEXT,
        "clause": _TEXT,
        "variant": _Key(form="several"),
        "trains": _Key(form="list"),
        "spacing": _Key("number or gap", "several"),
        "acting": _Key("count", "lists"),
        "uniform": _Key("number or rule"),
        "concentrated": _Key("number or rule", "list"),
        "heading": _Key(choices=("right", "left", "both")),
        "relieving": _Key(choices=("count", "neglect", "whole train")),
        "allowance": _Key("allowance", "list"),
        "factors": _Key("factor", "list"),
        "only": _Key("only", "list"),
    },
    "allowance": {
        "of": _Key(form="several", required=True, choices=_PARTS),
        "clause": _TEXT,
        "value": _NUMBER,
        **_RULE_OR_PIECES,
    },
    "rule": _RULE_OR_PIECES,
    "piece": {"up_to": _NUMBER, **RULE},
    "only": {
        "kind": _Key(form="several", choices=get_args(EffectKind)),
        "sense": _Key(choices=("greatest", "least")),
        "region": _Key(choices=("hogging", "interior")),
    },
}


def check_table(table: Mapping[str, Any], kind: str, path: str) -> None:
    """Hold a table to its keys, and what stands under them to its kind.

    Args:
        kind: of ``_TABLES``; "" for a whole file.
        path: of the table, for the message.

    Raises:
        ProgramFault: the first that is not as it must be.
    """
    keys = _TABLES[kind]
    for key in table:
        if key not in keys:
            raise ProgramFault(f"{path}.{key}: no known key")
    for key, said in keys.items():
        place = f"{path}.{key}"
        if key not in table:
            if said.required:
                raise ProgramFault(f"{place}: must be given")
            continue
        raw = table[key]
        many = isinstance(raw, list)
        if many != (said.form in ("list", "lists")) and said.form != "several":
            raise ProgramFault(f"{place}: must be {'one' if many else 'a list'}")
        if many and not raw:
            raise ProgramFault(f"{place}: must not be empty")
        for index, item in enumerate(raw if many else [raw]):
            where = f"{place}[{index}]" if many else place
            if said.form == "lists":
                if not isinstance(item, list) or not item:
                    raise ProgramFault(f"{where}: must be a list")
                for number in item:
                    _check_item(number, said, where)
            else:
                _check_item(item, said, where)


def _check_item(raw: Any, said: _Key, path: str) -> None:
    kinds = said.kind.split(" or ")
    table = next((kind for kind in kinds if kind in _TABLES), None)
    if isinstance(raw, dict) and table:
        check_table(raw, table, path)
    elif "number" in kinds:
        if isinstance(raw, bool) or not isinstance(raw, int | Decimal):
            raise ProgramFault(f"{path}: must be a number")
        if not Decimal(raw).is_finite():
            raise ProgramFault(f"{path}: must be finite")
    elif "count" in kinds:
        if isinstance(raw, bool) or not isinstance(raw, int) or raw < 1:
            raise ProgramFault(f"{path}: must be a whole number from 1")
    elif "text" not in kinds:
        raise ProgramFault(f"{path}: must be a table")
    elif not isinstance(raw, str) or not raw.strip():
        raise ProgramFault(f"{path}: must be a text")
    elif said.choices and raw not in said.choices:
        raise ProgramFault(f"{path}: must be one of {', '.join(said.choices)}")


def several(raw: Any) -> list[Any]:
    """What stands under a key that may have one or a list.

    >>> several("axles"), several(["axles", "uniform"])
    (['axles'], ['axles', 'uniform'])
    """
    return raw if isinstance(raw, list) else [raw]
