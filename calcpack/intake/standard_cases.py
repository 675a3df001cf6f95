"""Cases of a load model from its file, whose keys have been checked."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from typing import Any, Literal

from calcpack.errors import ProgramFault
from calcpack.intake.cases import HEADINGS, spread_cases
from calcpack.intake.standard_keys import RULE, several
from calcpack.intake.values import listed
from calcpack.model.loads import (
    Applies,
    Axle,
    Case,
    Gap,
    Given,
    Part,
    Region,
    Rule,
    Strip,
    Train,
)

FORMAT = 1
_SENSES: Mapping[str | None, Literal[1, 0, -1]] = {"greatest": 1, "least": -1, None: 0}


class CaseBuilder:
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
            for variant in several(case.get("variant", [])):
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
            if "variant" not in raw or variant in several(raw["variant"]):
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
            axles_of = "axle" if len(numbers) == 1 else "axles"
            name = f"{case.name}: {axles_of} {listed(numbers)}"
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
            HEADINGS[raw.get("heading", "both")],
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
            found += [(part, value) for part in several(one["of"])]
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
        if raw.keys() & RULE.keys():
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
        given = {key: self._given(raw[key], f"{path}.{key}") for key in RULE if key in raw}
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
        tuple(several(raw.get("kind", []))),
        _SENSES[raw.get("sense")],
        region,
    )
