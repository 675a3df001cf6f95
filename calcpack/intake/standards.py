"""Load models of published standards, read from the files in ``calcpack/standards``.

The files are the program's own: whatever is wrong in one is a fault of the program. Every key is
described in ``calcpack/standards/README.md``.
"""

from __future__ import annotations

import tomllib
from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import Decimal
from fractions import Fraction
from functools import cache
from importlib.resources import files
from typing import Any, Literal

from calcpack.errors import ProgramFault
from calcpack.intake.standard_cases import CaseBuilder
from calcpack.intake.standard_keys import check_table
from calcpack.model.loads import Case, Given, Standard


@dataclass(frozen=True)
class Variant:
    """One of several loads under a model's name.

    Attributes:
        name: as calc.toml names it.
        says: what it is, in words for a sheet.
        per: what one of it loads, such as "lane" or "rail".
    """

    name: str
    says: str
    per: str


@dataclass(frozen=True)
class Model:
    """A published load model.

    Attributes:
        name: as calc.toml names it.
        title, edition, clause: of the standard that defines it.
        seen: "page" or "memory": whence its numbers were taken; "memory" if any one was.
        units: "US" (kip, ft) or "SI" (kN, m), of every number of it.
        per: what one of it loads, such as "lane" or "track".
        variants: in order, the first being the usual one; empty where it has no variants.
        scales: what its loads may be multiplied by; empty: anything.
        notes: rules of the standard that the program leaves to the engineer.
        needs: "continuous" where it is for continuous beams only; "" for any beam.
        needs_clause: where the standard says so.
        longest: the longest beam, in its unit of length, for which it has trains enough; None: any.
        longest_says: why.
        dynamic: the clause of a dynamic factor that the engineer must state; "" where the model
            has its own, or none.
        needs_length: whether numbers of it depend on a length that the engineer states.
        document: all that stands in its file.
    """

    name: str
    title: str
    edition: str
    clause: str
    seen: Literal["page", "memory"]
    units: Literal["US", "SI"]
    per: str
    variants: tuple[Variant, ...]
    scales: tuple[Fraction, ...]
    notes: tuple[str, ...]
    needs: str
    needs_clause: str
    longest: Fraction | None
    longest_says: str
    dynamic: str
    needs_length: bool
    document: Mapping[str, Any] = field(repr=False, compare=False)

    def variant(self, name: str) -> Variant | None:
        """The variant of that name; None where there is none."""
        return next((one for one in self.variants if one.name == name), None)

    def standard(self, variant: str = "", compared: str = "") -> Standard:
        """Where it is defined, for one of its variants.

        Args:
            variant: "" where the model has none.
            compared: what the preparer says of its comparison with the standard.
        """
        chosen = self.variant(variant)
        return Standard(
            self.name,
            self.title,
            self.edition,
            self.clause,
            self.seen,
            chosen.per if chosen else self.per,
            compared,
            self.notes,
        )


def model_names() -> tuple[str, ...]:
    """The names of all models, sorted.

    >>> "HL-93" in model_names()
    True
    """
    return tuple(sorted(_documents()))


@cache
def read_model(name: str) -> Model:
    """A model by its name; every case of it is built once, so that a fault in its file shows.

    Raises:
        ProgramFault: there is none of that name, or its file is not as it must be.

    >>> read_model("HL-93").units
    'US'
    """
    try:
        document = _documents()[name]
    except KeyError:
        raise ProgramFault(f"{name}: no such load model") from None
    return model_from(document)


def model_from(document: Mapping[str, Any]) -> Model:
    """A model from what stands in its file.

    Raises:
        ProgramFault: the file is not as it must be; the message says where.
    """
    name = str(document.get("name"))
    check_table(document, "", name)
    variants = tuple(
        Variant(one["name"], one["says"], one.get("per", document["per"]))
        for one in document.get("variants", ())
    )
    needs, longest = document.get("needs", {}), document.get("longest", {})
    building = CaseBuilder(document, name, Given(Fraction(50), "length"))
    building.check()
    return Model(
        name,
        document["title"],
        document["edition"],
        document["clause"],
        document["seen"],
        document["units"],
        document["per"],
        variants,
        tuple(map(Fraction, document.get("scales", ()))),
        tuple(f"{note['clause']}: {note['says']}" for note in document.get("notes", ())),
        needs.get("beam", ""),
        needs.get("clause", ""),
        Fraction(longest["beam"]) if longest else None,
        longest.get("says", ""),
        document.get("dynamic", ""),
        building.rules > 0,
        document,
    )


def cases_of(
    model: Model, variant: str, root: str, length: Given | None = None
) -> tuple[tuple[Case, ...], dict[str, Fraction]]:
    """The ways in which a model may stand, and every number that they cite.

    Args:
        variant: one of the model's; "" where it has none.
        root: what the paths of its numbers begin with, such as ``HL-93``.
        length: what the rules of a model that needs one are for, in the model's unit.

    Returns:
        The cases, and the numbers of its file by their paths. What a rule gives is not among them:
        the rule's own numbers are, and the length is where the engineer stated it.

    Raises:
        ProgramFault: the model has no such variant, or needs a length.

    >>> cases, numbers = cases_of(read_model("HL-93"), "fatigue", "HL-93")
    >>> cases[0].axles[2].gap.ties[0].path, numbers["HL-93.trains[3].axles[2].spacing"]
    ('HL-93.trains[3].axles[2].spacing', Fraction(30, 1))
    """
    if (model.variant(variant) is None) if model.variants else variant:
        raise ProgramFault(f"{model.name}: no variant {variant!r}")
    if model.needs_length and length is None:
        raise ProgramFault(f"{model.name}: a length is needed")
    building = CaseBuilder(model.document, root, length)
    return building.cases(variant), building.numbers


@cache
def _documents() -> Mapping[str, Mapping[str, Any]]:
    """What stands in every file, by the model's name."""
    found: dict[str, Mapping[str, Any]] = {}
    for file in files("calcpack").joinpath("standards").iterdir():
        if file.name.endswith(".toml"):
            document = tomllib.loads(file.read_text("utf-8"), parse_float=Decimal)
            name = document.get("name")
            if not isinstance(name, str) or name in found:
                raise ProgramFault(f"{file.name}: name: must be a text of its own")
            found[name] = document
    return found
