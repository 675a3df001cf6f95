"""What calc.toml may state: one entry a key, for reader, messages, echo, sheets and forms."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, Literal


@dataclass(frozen=True)
class Field:
    """One key of calc.toml.

    Attributes:
        label: what a sheet or a form calls it.
        kind: a key of ``exact.units.SYSTEMS`` for a number, else "text", "long text", "name",
            "choice", "date", "flag", "place" (a name, a station or a length) or "table".
        symbol: the letter in formulas; "" for what is not a number.
        help: a line for the form.
        form: one value, a list of them, or either ("several").
        required: whether its table must state it.
        default: what holds where it is absent, as it would stand in the file; None if nothing does.
        choices: what a choice may be, or what may stand in a list in place of a table.
        later: values, or types of values, that are known but not computed by this release.
        above: a number must be greater than this.
        least: a number must be this or greater.
        most: a number must be this or less.
        beside: the key of the same table without which it has no meaning, or a key and what it
            must say (``kind = "spring"``).
        computed: False where any value but the default is not computed by this release.
    """

    label: str
    kind: str
    symbol: str = ""
    help: str = ""
    form: Literal["one", "list", "several"] = "one"
    required: bool = False
    default: Any = None
    choices: tuple[str | int, ...] = ()
    later: tuple[str | type, ...] = ()
    above: int | None = None
    least: int | None = None
    most: int | None = None
    beside: str = ""
    computed: bool = True


def _tables(label: str, required: bool = False, choices: tuple[str | int, ...] = ()) -> Field:
    return Field(label, "table", form="list", required=required, choices=choices)


def _later(label: str) -> Field:
    return Field(label, "table", computed=False)


def _station(label: str, required: bool = True) -> Field:
    return Field(label, "length", "x", "from the left end of the beam", required=required)


def _spring(label: str, kind: str, symbol: str) -> Field:
    return Field(label, kind, symbol, default=0, least=0, beside='kind = "spring"')


def _place(label: str, required: bool = True) -> Field:
    return Field(label, "place", "x", "a name, a station or a length", required=required)


def _spacing(pattern: str, label: str, says: str, beside: str = "") -> dict[str, Field]:
    """A number, a range of two, a list or a least distance."""
    return {
        pattern: Field(label, "length", "d", says, "several", beside=beside),
        f"{pattern}.list": Field(f"{label}, one of", "length", "d", says, "list", above=0),
        f"{pattern}.least": Field(f"{label}, at least", "length", "d", says, above=0),
    }


def _axles(pattern: str) -> dict[str, Field]:
    return {
        f"{pattern}.table": Field(
            "Table of axles", "name", help="a CSV beside calc.toml: weight and spacing"
        ),
        f"{pattern}.axles": _tables("Axles"),
        f"{pattern}.axles[].weight": Field(
            "Axle weight", "force", "P", "downward", required=True, above=0
        ),
        **_spacing(f"{pattern}.axles[].spacing", "Axle spacing", "to the axle ahead"),
    }


_KINDS = ("reaction", "moment reaction", "shear", "moment", "deflection", "rotation")
_NAME = "unique among supports, releases and sections"
_SIDES = ("left", "right")
_DETAILS = ("every equation", "plan", "table")

FIELDS: Mapping[str, Field] = {
    "format": Field("Format", "choice", required=True, choices=(1,)),
    "units": Field("Units", "choice", required=True, choices=("US", "SI")),
    "cover": Field("Cover", "table"),
    "cover.title": Field("Title", "text", help="at the head of every sheet", required=True),
    "cover.number": Field("Calculation number", "text"),
    "cover.project": Field("Project", "text"),
    "cover.client": Field("Client", "text"),
    "cover.prepared": Field("Prepared", "table"),
    "cover.prepared.by": Field("Prepared by", "text"),
    "cover.prepared.on": Field("Prepared on", "date"),
    "cover.checked": Field("Checked", "table"),
    "cover.checked.by": Field("Checked by", "text", help="not the person who prepared it"),
    "cover.checked.on": Field("Checked on", "date"),
    "cover.approved": Field("Approved", "table"),
    "cover.approved.by": Field("Approved by", "text"),
    "cover.approved.on": Field("Approved on", "date"),
    "cover.revisions": _tables("Revisions"),
    "cover.revisions[].mark": Field("Revision mark", "name", required=True),
    "cover.revisions[].on": Field("Revision date", "date"),
    "cover.revisions[].text": Field("Revision text", "long text", required=True),
    "package": Field("Package", "table"),
    "package.status": Field(
        "Status",
        "choice",
        help="an open assumption bars Issued",
        default="For review",
        choices=("For review", "Issued"),
    ),
    "package.paper": Field("Paper", "choice", default="letter", choices=("letter", "A4")),
    "package.detail": Field("Detail", "choice", default="every equation", choices=_DETAILS),
    "assumptions": _tables("Assumptions"),
    "assumptions[].text": Field("Assumption", "long text", required=True),
    "assumptions[].basis": Field("Basis of the assumption", "text"),
    "assumptions[].open": Field(
        "Assumption open", "flag", help="still to be confirmed", default=False
    ),
    "beam": Field("Beam", "table"),
    "beam.length": Field("Length", "length", "L", "or the spans instead", above=0),
    "beam.spans": Field(
        "Span", "length", "l", "between neighbouring supports", form="list", above=0
    ),
    "beam.overhang_left": Field(
        "Left overhang",
        "length",
        "a",
        "left of the first support",
        default=0,
        least=0,
        beside="spans",
    ),
    "beam.overhang_right": Field(
        "Right overhang",
        "length",
        "b",
        "right of the last support",
        default=0,
        least=0,
        beside="spans",
    ),
    "beam.supports": _tables("Supports", required=True),
    "beam.supports[].name": Field("Support", "name", help=_NAME, required=True),
    "beam.supports[].at": _station("Support station", required=False),
    "beam.supports[].kind": Field(
        "Support kind",
        "choice",
        help="guided holds rotation and is free to move vertically",
        required=True,
        choices=("pin", "roller", "fixed", "guided", "spring"),
    ),
    "beam.supports[].face": Field(
        "Face of the release held", "choice", help="where a release stands there", choices=_SIDES
    ),
    "beam.supports[].vertical": _spring("Vertical spring", "spring", "k"),
    "beam.supports[].rotational": _spring("Rotational spring", "rotational spring", "kθ"),
    "beam.releases": _tables("Releases"),
    "beam.releases[].name": Field("Release", "name", help=_NAME, required=True),
    "beam.releases[].at": _station("Release station"),
    "beam.releases[].kind": Field(
        "Release kind",
        "choice",
        help="a hinge passes no moment, a slide no shear",
        required=True,
        choices=("hinge", "slide"),
    ),
    "beam.sections": _tables("Sections", choices=("tenths",)),
    "beam.sections[].name": Field("Section", "name", help=_NAME, required=True),
    "beam.sections[].at": _station("Section station"),
    "beam.stiffness": _tables("Stiffness"),
    "beam.stiffness[].from": _station("Start of the stretch", required=False),
    "beam.stiffness[].to": _station("End of the stretch", required=False),
    "beam.stiffness[].EI": Field(
        "Bending stiffness", "EI", "EI", "or E and I instead; or a table for all", above=0
    ),
    "beam.stiffness[].E": Field("Elastic modulus", "E", "E", above=0),
    "beam.stiffness[].I": Field("Second moment of area", "I", "I", above=0),
    "beam.stiffness[].table": Field(
        "Table of stiffness", "name", help="a CSV beside calc.toml: from, to and EI, or E and I"
    ),
    "beam.stiffness[].column": Field(
        "Column of EI", "name", help="where it is not called EI", beside="table"
    ),
    "beam.redundants": Field(
        "Redundant",
        "text",
        help="such as moment B, moment B left, moment reaction A, reaction C",
        form="list",
    ),
    "beam.transfer": _later("Transfer points"),
    "effects": _tables("Effects"),
    "effects[].kind": Field(
        "Kind of effect",
        "choice",
        form="several",
        required=True,
        choices=_KINDS,
    ),
    "effects[].at": Field(
        "Place of the effect",
        "place",
        "x",
        "a name, a station, a length, supports, sections or tenths",
        form="several",
        required=True,
    ),
    "effects[].side": Field("Side", "choice", help="without it both faces", choices=_SIDES),
    "effects[].show": Field("Shown", "choice", choices=_DETAILS),
    "trains": _tables("Trains"),
    "trains[].name": Field("Train", "name", required=True),
    **_axles("trains[]"),
    "moving": _tables("Moving loads"),
    "moving[].name": Field("Moving load", "name", required=True),
    "moving[].standard": Field("Published model", "text", help="such as HL-93; see models"),
    "moving[].variant": Field("Variant of the model", "text", beside="standard"),
    "moving[].scale": Field(
        "Scale of the model", "number", "k", "multiplies all its loads", above=0, beside="standard"
    ),
    "moving[].length": Field(
        "Length for the model's rules",
        "length",
        "L",
        "where a number of the model goes by a length",
        above=0,
        beside="standard",
    ),
    "moving[].compared": Field(
        "Comparison with the standard",
        "text",
        help="by whom, when and with which edition",
        beside="standard",
    ),
    "moving[].hogging": _tables("Region of hogging"),
    "moving[].hogging[].from": _place("Start of hogging"),
    "moving[].hogging[].to": _place("End of hogging"),
    "moving[].hogging[].source": Field("Source of the region", "text", required=True),
    **_axles("moving[]"),
    "moving[].trains": Field("Train", "name", help="a name from trains", form="list"),
    "moving[].uniform": Field(
        "Uniform load", "line load", "w", "on whatever parts raise the effect", default=0, least=0
    ),
    "moving[].trailing": _tables("Trailing load"),
    "moving[].trailing[].behind": Field(
        "Distance behind the last axle", "length", "b", "to its start", least=0
    ),
    "moving[].trailing[].ahead": Field(
        "Distance ahead of the lead axle", "length", "b", "to its start", least=0
    ),
    "moving[].trailing[].load": Field("Trailing load", "line load", "q", "downward", above=0),
    "moving[].trailing[].weight": Field(
        "Whole trailing load", "force", "Q", "over its length, in place of load", above=0
    ),
    "moving[].trailing[].length": Field(
        "Length of the trailing load", "length", "l", "without it: no end", above=0
    ),
    "moving[].trailing[].extent": Field(
        "Extent of the trailing load",
        "choice",
        help="in parts: only where it raises the effect",
        default="unbroken",
        choices=("unbroken", "in parts"),
    ),
    "moving[].heading": Field(
        "Heading", "choice", default="both", choices=("right", "left", "both")
    ),
    "moving[].relieving": Field(
        "Relieving axles",
        "choice",
        help="axles that lessen the effect",
        default="count",
        choices=("count", "neglect", "whole train"),
    ),
    "moving[].allowance": Field(
        "Dynamic allowance", "number", "I", "on axles only", default=0, least=0, most=10
    ),
    "moving[].allowance[].of": Field(
        "Part with allowance", "choice", required=True, choices=("axles", "trailing", "uniform")
    ),
    "moving[].allowance[].value": Field(
        "Dynamic allowance", "number", "I", required=True, least=0, most=10
    ),
    "moving[].allowance[].source": Field("Source of the allowance", "text"),
    "moving[].distribution": Field(
        "Distribution",
        "number",
        "g",
        "what of the load this beam takes",
        default=1,
        later=("from deck",),
        above=0,
    ),
    "moving[].distribution[].kind": Field(
        "Kind of effect", "choice", form="several", choices=_KINDS
    ),
    "moving[].distribution[].from": _place("Start of the stretch", required=False),
    "moving[].distribution[].to": _place("End of the stretch", required=False),
    "moving[].distribution[].value": Field("Distribution", "number", "g", required=True, above=0),
    "moving[].distribution[].source": Field("Source of the distribution", "text"),
    "moving[].order": Field(
        "Order of trains",
        "choice",
        help="any: they can pass",
        default="fixed",
        choices=("fixed", "any"),
        beside="trains",
    ),
    **_spacing("moving[].spacing", "Spacing of trains", "last axle to next first", beside="trains"),
    "moving[].absent": Field(
        "Absent trains",
        "choice",
        help="each: any of them may be missing",
        default="each",
        choices=("each", "none"),
        beside="trains",
    ),
    "permanent": _tables("Permanent loads"),
    "permanent[].name": Field("Permanent load", "name", required=True),
    "permanent[].uniform": _later("Uniform loads"),
    "permanent[].points": _later("Point loads"),
    "permanent[].couples": _later("Couples"),
    "permanent[].settlements": _tables("Settlements"),
    "permanent[].settlements[].at": Field(
        "Support that settles", "place", "x", "its name or its station", required=True
    ),
    "permanent[].settlements[].down": Field("Settlement", "deflection", "Δ", "downward"),
    "permanent[].settlements[].turn": Field("Turn of the support", "rotation", "θ", "clockwise"),
    "permanent[].stage": _later("Stage"),
    "permanent[].acts": _later("Way of acting"),
    "stages": _later("Stages"),
    "given": _later("Given effects"),
    "combinations": _later("Combinations"),
    "resistances": _later("Resistances"),
    "deck": _later("Deck"),
}
"""Every known key by its pattern, in the order of the data echo."""


def pattern_of(path: str) -> str:
    """The pattern of a path: its indices left out.

    >>> pattern_of("moving[0].axles[12].weight")
    'moving[].axles[].weight'
    """
    return re.sub(r"\[\d+\]", "[]", path)


def field_at(path: str) -> Field | None:
    """The field that a path belongs to, also of an item in a list; None for an unknown key.

    >>> field_at("beam.spans[1]").label, field_at("beam.colour")
    ('Span', None)
    """
    return FIELDS.get(pattern_of(path).removesuffix("[]"))


def _keys() -> dict[str, dict[str, Field]]:
    keys: dict[str, dict[str, Field]] = {}
    for pattern, field in FIELDS.items():
        table, _, key = pattern.rpartition(".")
        keys.setdefault(table, {})[key] = field
    return keys


KEYS: Mapping[str, Mapping[str, Field]] = _keys()
"""Per table (its pattern; "" for the file itself) the fields that it may hold, by key."""
