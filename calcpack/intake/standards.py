"""Load models of published standards, read from the files in ``calcpack/standards``.

The files are the program's own: whatever is wrong in one is a fault of the program. Every key is
described in ``calcpack/standards/README.md``.
"""

from __future__ import annotations

import tomllib
from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field, replace
from decimal import Decimal
from fractions import Fraction
from functools import cache
from importlib.resources import files
from typing import Any, Literal, get_args

from calcpack.errors import ProgramFault
from calcpack.intake.cases import spread_cases
from calcpack.model.loads import (
    Applies,
    Axle,
    Case,
    Gap,
    Given,
    Heading,
    Part,
    Region,
    Rule,
    Standard,
    Strip,
    Train,
)
from calcpack.model.request import EffectKind

FORMAT = 1


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
    _check_table(document, "", name)
    variants = tuple(
        Variant(one["name"], one["says"], one.get("per", document["per"]))
        for one in document.get("variants", ())
    )
    needs, longest = document.get("needs", {}), document.get("longest", {})
    building = _Building(document, name, Given(Fraction(50), "length"))
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
    building = _Building(model.document, root, length)
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
_RULE = dict.fromkeys(
    ("constant", "per_length", "per_square", "over", "beside", "least", "most"), _NUMBER
)
_RULE_OR_PIECES = {**_RULE, "pieces": _Key("piece", "list")}

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
    "piece": {"up_to": _NUMBER, **_RULE},
    "only": {
        "kind": _Key(form="several", choices=get_args(EffectKind)),
        "sense": _Key(choices=("greatest", "least")),
        "region": _Key(choices=("hogging", "interior")),
    },
}

_HEADINGS: Mapping[str, tuple[Heading, ...]] = {
    "right": ("right",),
    "left": ("left",),
    "both": ("right", "left"),
}
_SENSES: Mapping[str | None, Literal[1, 0, -1]] = {"greatest": 1, "least": -1, None: 0}


def _check_table(table: Mapping[str, Any], kind: str, path: str) -> None:
    """Hold a table to its keys, and what stands under them to its kind."""
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
        _check_table(raw, table, path)
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


class _Building:
    """Cases from a file whose keys have been checked; notes the numbers that they cite."""

    def __init__(self, document: Mapping[str, Any], root: str, length: Given | None) -> None:
        self.numbers: dict[str, Fraction] = {}
        self.rules = 0
        """How many numbers by a rule have been built."""
        self._document = document
        self._root = root
        self._length = length

    def check(self) -> None:
        """Build the cases of every variant, and look at what no case shows."""
        document = self._document
        if document["format"] != FORMAT:
            raise self._fault("format", f"must be {FORMAT}")
        if any(scale <= 0 for scale in document.get("scales", ())):
            raise self._fault("scales", "must be above 0")
        names = [one["name"] for one in document.get("variants", ())]
        self._check_distinct("variants", names)
        self._check_distinct("trains", [one["name"] for one in document.get("trains", ())])
        used: set[str] = set()
        for index, case in enumerate(document["cases"]):
            for variant in _several(case.get("variant", [])):
                if variant not in names:
                    raise self._fault(f"cases[{index}].variant", f"no variant {variant!r}")
            used.update(case.get("trains", ()))
        for variant in names or [""]:
            cases = self.cases(variant)
            if not cases:
                raise self._fault("cases", f"none for variant {variant!r}")
            self._check_distinct("cases", [case.name for case in cases])
        for index, train in enumerate(document.get("trains", ())):
            if train["name"] not in used:
                raise self._fault(f"trains[{index}]", "is in no case")

    def cases(self, variant: str) -> tuple[Case, ...]:
        """The cases of a variant, in the order of the file."""
        found: list[Case] = []
        for index, raw in enumerate(self._document["cases"]):
            if "variant" not in raw or variant in _several(raw["variant"]):
                for case in self._acting(raw, f"cases[{index}]", variant):
                    found += spread_cases(case, raw.get("relieving") == "whole train")
        return tuple(found)

    def _acting(self, raw: Mapping[str, Any], path: str, variant: str) -> Iterator[Case]:
        """The case itself, or one for each list of the axles that act."""
        case = self._case(raw, path, variant)
        if "acting" not in raw:
            yield case
        for numbers in raw.get("acting", ()):
            if len(case.trains) != 1 or len(set(numbers)) != len(numbers):
                raise self._fault(f"{path}.acting", "must be different axles of one train")
            (train,) = case.trains
            if max(numbers) > len(train.axles) or not train.axles[0].acts:
                raise self._fault(f"{path}.acting", f"no axle {max(numbers)}")
            axles = tuple(
                Axle(axle.weight, axle.gap, number in numbers)
                for number, axle in enumerate(train.axles, 1)
            )
            name = f"{case.name}: {_listed(numbers)}"
            yield replace(case, name=name, trains=(replace(train, axles=axles),))

    def _case(self, raw: Mapping[str, Any], path: str, variant: str) -> Case:
        trains = tuple(self._train(name, path) for name in raw.get("trains", ()))
        if ("spacing" in raw) != (len(trains) > 1):
            raise self._fault(f"{path}.spacing", "must be given between trains, and only there")
        gaps = (self._gap(raw["spacing"], f"{path}.spacing"),) if "spacing" in raw else ()
        uniform = self._amount(raw["uniform"], f"{path}.uniform") if "uniform" in raw else None
        concentrated = tuple(
            self._amount(one, f"{path}.concentrated[{index}]")
            for index, one in enumerate(raw.get("concentrated", ()))
        )
        if not (trains or uniform or concentrated):
            raise self._fault(path, "must have a load")
        return Case(
            raw["name"],
            trains,
            gaps * (len(trains) - 1),
            uniform,
            concentrated,
            _HEADINGS[raw.get("heading", "both")],
            "neglect" if raw.get("relieving") == "neglect" else "count",
            self._allowances(raw, path),
            (*self._factors_of_variant(variant), *self._factors(raw, path)),
            tuple(_applies(one) for one in raw.get("only", ())),
        )

    def _train(self, name: str, path: str) -> Train:
        for index, raw in enumerate(self._document.get("trains", ())):
            if raw["name"] == name:
                return self._train_at(raw, f"trains[{index}]")
        raise self._fault(f"{path}.trains", f"no train {name!r}")

    def _train_at(self, raw: Mapping[str, Any], path: str) -> Train:
        axles = tuple(
            self._axle(one, f"{path}.axles[{index}]", index)
            for index, one in enumerate(raw.get("axles", ()))
        )
        strips = tuple(
            self._strip(one, f"{path}.trailing[{index}]")
            for index, one in enumerate(raw.get("trailing", ()))
        )
        if not axles and not strips:
            raise self._fault(path, "must have axles or a trailing load")
        foremost = Axle(Given(Fraction(0), ""), None, False)
        return Train(raw["name"], axles or (foremost,), strips)

    def _axle(self, raw: Mapping[str, Any], path: str, index: int) -> Axle:
        if ("spacing" in raw) != (index > 0):
            raise self._fault(f"{path}.spacing", "must be given, but not of the first axle")
        gap = self._gap(raw["spacing"], f"{path}.spacing") if index else None
        return Axle(self._positive(raw["weight"], f"{path}.weight"), gap)

    def _gap(self, raw: Any, path: str) -> Gap:
        if isinstance(raw, list):
            if len(raw) != 2:
                raise self._fault(path, "must be the least and the greatest")
            gap = Gap(self._each(raw, path), True)
        elif not isinstance(raw, dict):
            gap = Gap((self._positive(raw, path),))
        elif len(raw) != 1:
            raise self._fault(path, "must be a list or a least one")
        elif "list" in raw:
            gap = Gap(self._each(raw["list"], f"{path}.list"))
        else:
            gap = Gap((self._positive(raw["least"], f"{path}.least"),), True)
        values = [tie.value for tie in gap.ties]
        if values != sorted(set(values)):
            raise self._fault(path, "must rise")
        return gap

    def _each(self, raw: list[Any], path: str) -> tuple[Given, ...]:
        return tuple(self._positive(one, f"{path}[{index}]") for index, one in enumerate(raw))

    def _strip(self, raw: Mapping[str, Any], path: str) -> Strip:
        if ("behind" in raw) == ("ahead" in raw):
            raise self._fault(path, "must start behind or ahead")
        if ("load" in raw) == ("weight" in raw):
            raise self._fault(path, "must have a load or a weight")
        if "weight" in raw and "length" not in raw:
            raise self._fault(path, "must have a length for its weight")
        side = "ahead" if "ahead" in raw else "behind"
        amount = "weight" if "weight" in raw else "load"
        start = self._given(raw[side], f"{path}.{side}")
        if start.value < 0:
            raise self._fault(f"{path}.{side}", "must be at least 0")
        return Strip(
            start,
            self._positive(raw["length"], f"{path}.length") if "length" in raw else None,
            self._positive(raw[amount], f"{path}.{amount}"),
            side == "ahead",
            raw["extent"] == "in parts",
            amount == "weight",
        )

    def _allowances(self, raw: Mapping[str, Any], path: str) -> tuple[tuple[Part, Given], ...]:
        found: list[tuple[Part, Given]] = []
        for index, one in enumerate(raw.get("allowance", ())):
            place = f"{path}.allowance[{index}]"
            if "value" in one:
                if one.keys() - {"of", "clause", "value"}:
                    raise self._fault(place, "must be a value or a rule")
                value = self._given(one["value"], place)
            else:
                value = self._ruled(one, place)
            if value.value < 0:
                raise self._fault(place, "must be at least 0")
            found += [(part, value) for part in _several(one["of"])]
        self._check_distinct(f"{path}.allowance", [part for part, _ in found])
        return tuple(found)

    def _factors(self, raw: Mapping[str, Any], path: str) -> tuple[Given, ...]:
        return tuple(
            self._positive(one["value"], f"{path}.factors[{index}]")
            for index, one in enumerate(raw.get("factors", ()))
        )

    def _factors_of_variant(self, variant: str) -> tuple[Given, ...]:
        for index, one in enumerate(self._document.get("variants", ())):
            if one["name"] == variant:
                return self._factors(one, f"variants[{index}]")
        return ()

    def _amount(self, raw: Any, path: str) -> Given:
        """A force or a load per length: a number, or by a rule."""
        if not isinstance(raw, dict):
            return self._positive(raw, path)
        amount = self._ruled(raw, path)
        if amount.value <= 0:
            raise self._fault(path, "must be above 0")
        return amount

    def _ruled(self, raw: Mapping[str, Any], path: str) -> Given:
        """What a rule gives for the length, by the piece that holds there."""
        if self._length is None:
            raise self._fault(path, "a length is needed")
        self.rules += 1
        if "pieces" not in raw:
            return self._by(self._rule(raw, path), path)
        if raw.keys() & _RULE.keys():
            raise self._fault(path, "must be in pieces or in one")
        pieces = raw["pieces"]
        bounds = [one.get("up_to") for one in pieces]
        if bounds[-1] is not None or None in bounds[:-1] or bounds[:-1] != sorted(bounds[:-1]):
            raise self._fault(f"{path}.pieces", "must end at lengths that rise, the last nowhere")
        for number, bound in enumerate(bounds[:-1]):
            self._positive(bound, f"{path}.pieces[{number}].up_to")
        rules = [self._rule(one, f"{path}.pieces[{i}]") for i, one in enumerate(pieces)]
        length = self._length.value
        holds = next(i for i, bound in enumerate(bounds) if bound is None or length <= bound)
        return self._by(rules[holds], path)

    def _by(self, rule: Rule, path: str) -> Given:
        return Given(rule.value, f"{self._root}.{path}", rule)

    def _rule(self, raw: Mapping[str, Any], path: str) -> Rule:
        given = {key: self._given(raw[key], f"{path}.{key}") for key in _RULE if key in raw}
        if not given.keys() & {"constant", "per_length", "per_square", "over"}:
            raise self._fault(path, "must have a term")
        if "beside" in given and "over" not in given:
            raise self._fault(f"{path}.beside", "must be left out without over")
        assert self._length is not None
        return Rule(self._length, **given)

    def _positive(self, raw: int | Decimal, path: str) -> Given:
        if raw <= 0:
            raise self._fault(path, "must be above 0")
        return self._given(raw, path)

    def _given(self, raw: int | Decimal, path: str) -> Given:
        given = Given(Fraction(raw), f"{self._root}.{path}")
        self.numbers[given.path] = given.value
        return given

    def _check_distinct(self, path: str, names: list[Any]) -> None:
        if len(set(names)) != len(names):
            raise self._fault(path, "must differ from one another")

    def _fault(self, path: str, said: str) -> ProgramFault:
        return ProgramFault(f"{self._root}.{path}: {said}")


def _applies(raw: Mapping[str, Any]) -> Applies:
    region: Region = raw.get("region", "everywhere")
    return Applies(
        tuple(_several(raw.get("kind", []))),
        _SENSES[raw.get("sense")],
        region,
    )


def _several(raw: Any) -> list[Any]:
    return raw if isinstance(raw, list) else [raw]


def _listed(numbers: list[int]) -> str:
    """Axles as a name has them.

    >>> _listed([4]), _listed([1, 2, 3])
    ('axle 4', 'axles 1, 2 and 3')
    """
    *others, last = map(str, numbers)
    return f"axles {', '.join(others)} and {last}" if others else f"axle {last}"
