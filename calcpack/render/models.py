"""Load models of published standards for a terminal: a list of all, or one with its trains drawn.

No line is longer than ``WIDTH``. What the engineer must state in the block for calc.toml stands
there as ``TO_STATE``, which is refused until it is replaced.
"""

from __future__ import annotations

import itertools
import textwrap
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from typing import Any

from calcpack.exact.units import SYSTEMS
from calcpack.intake.shown import decimal_text
from calcpack.intake.standard_keys import several
from calcpack.intake.standards import Model, cases_of, model_names, read_model
from calcpack.intake.values import alternatives, listed
from calcpack.model.loads import Axle, Case, Given, Part, Train
from calcpack.render.train_picture import draw, fitting_step, picture_of
from calcpack.sheets.load_words import (
    PARTS,
    RELIEVING,
    amount,
    applies_words,
    axles_words,
    gap_words,
    strip_words,
)

WIDTH = 100
TO_STATE = "state it"

_LABEL = 12
_SOURCES = {
    "page": "taken from a printed page; the standard itself decides",
    "memory": "from memory: not compared with the standard",
}
_UNBROKEN = "\N{NO-BREAK SPACE}"
_ANY_LENGTH = Given(Fraction(50), "")
"""Stands for the length of the rules, which are written as formulas."""


def list_models() -> str:
    """A row for every model."""
    models = [read_model(name) for name in model_names()]
    rows = [("name", "per", "units", "variants", "standard", "numbers")]
    rows += [
        (
            model.name,
            model.per,
            model.units,
            ", ".join(one.name.replace(" ", _UNBROKEN) for one in model.variants),
            f"{model.title}, {model.edition}",
            f"from {model.seen}" if model.seen == "memory" else "from a page",
        )
        for model in models
    ]
    widths = [max(len(row[column]) for row in rows) for column in range(6)]
    widths[3] = 1 + max(len(one.name) for model in models for one in model.variants)
    widths[4] += WIDTH - sum(widths) - 2 * 5
    lines = [line for row in rows for line in _wrapped_row(row, widths)]
    return "\n".join([*lines, "", f"{_SOURCES['memory'].capitalize()}."]) + "\n"


def describe_model(model: Model) -> str:
    """All that a model says, its trains drawn to scale, and a block for calc.toml."""
    trains = list(_trains(model))
    lines = [model.name, "", *_facts(model)]
    if trains:
        lines += ["", *_drawn(model, trains)]
    lines += _cases(model)
    if model.notes:
        lines += ["", "Notes: what is left to the engineer, and what was chosen here", ""]
        for note in model.notes:
            lines += _wrapped(note, "- ", "  ")
    return "\n".join([*lines, "", "For calc.toml", "", *block_for(model)]) + "\n"


def block_for(model: Model) -> list[str]:
    """A moving load for calc.toml, of the usual variant.

    >>> block_for(read_model("A160"))[:3]
    ['[[moving]]', 'name = "A160"', 'standard = "A160"']
    """
    lines = ["[[moving]]", f'name = "{model.name}"', f'standard = "{model.name}"']
    if model.variants:
        names = tuple(one.name for one in model.variants)
        lines += [*_comment(f"variant: {alternatives(names)}"), f'variant = "{names[0]}"']
    if model.needs_length:
        unit = SYSTEMS[model.units]["length"]
        lines += [*_comment(f"L of the rules above, in {unit}"), f'length = "{TO_STATE}"']
    parts = _parts_to_state(model)
    if parts:
        lines += _comment(f"dynamic factor less 1, of {model.title}, {model.dynamic}")
        lines += ["allowance = ["]
        lines += [f'  {{ of = "{part}", value = "{TO_STATE}" }},' for part in parts]
        lines += ["]"]
    if model.seen == "memory":
        said = "before a package is issued, compare the model with its standard and say so"
        lines += [*_comment(said), '# compared = "by whom, when and with which edition"']
    return lines


def _facts(model: Model) -> Iterator[str]:
    units = SYSTEMS[model.units]
    yield from _labelled("standard", model.title)
    yield from _labelled("edition", model.edition)
    yield from _labelled("clause", model.clause)
    yield from _labelled("numbers", _SOURCES[model.seen])
    stated = f'{units["force"]}, {units["length"]} (units = "{model.units}")'
    others = "calc.toml must have the same" if model.needs_length else "converted where need be"
    yield from _labelled("units", f"{stated}; {others}")
    yield from _labelled("per", model.per)
    for one in model.variants:
        per = f" (per {one.per})" if one.per != model.per else ""
        yield from _labelled("variant", f'"{one.name}"{per}: {one.says}')
    scales = ", ".join(map(decimal_text, model.scales))
    several = "one of " * (len(model.scales) > 1)
    yield from _labelled("scale", f"{several}{scales}" if scales else "any")
    needed = "must be stated: numbers go by a length L" if model.needs_length else "not needed"
    yield from _labelled("length", needed)
    if model.dynamic:
        yield from _labelled("allowance", f"must be stated ({model.dynamic})")
    needs = f"{model.needs} beams only ({model.needs_clause})" if model.needs else "any"
    yield from _labelled("beam", needs)
    longest = "any"
    if model.longest is not None:
        longest = f"{decimal_text(model.longest)} {units['length']}: {model.longest_says}"
    yield from _labelled("longest", longest)


# The trains


def _trains(model: Model) -> Iterator[Train]:
    for raw in model.document.get("trains", ()):
        yield _case(model, {"name": raw["name"], "trains": [raw["name"]]}).trains[0]


def _case(model: Model, raw: Mapping[str, Any]) -> Case:
    """One entry of the model's cases, all its axles acting."""
    whole = {key: said for key, said in raw.items() if key not in ("acting", "variant")}
    one = replace(model, document={**model.document, "cases": [whole]})
    variant = model.variants[0].name if model.variants else ""
    return cases_of(one, variant, model.name, _ANY_LENGTH)[0][0]


def _drawn(model: Model, trains: Sequence[Train]) -> Iterator[str]:
    units = SYSTEMS[model.units]
    pictures = [picture_of(train, units) for train in trains]
    step = fitting_step(pictures, WIDTH)
    said = "The foremost axle or load is at the left."
    if any(picture.spans for picture in pictures):
        said += f" A column is {decimal_text(step)} {units['length']}."
    if any(axle.gap and not axle.gap.fixed for train in trains for axle in train.axles):
        said += " Spacings that vary are drawn at their least."
    yield f"Trains, in {units['force']} and {units['length']}"
    yield from ("", *_wrapped(said))
    for train, picture in zip(trains, pictures, strict=True):
        axles = [axle for axle in train.axles if axle.weight.value]
        yield ""
        whole = f": {axles_words(axles, units)}" if axles else ""
        yield from _wrapped(f'Train "{train.name}"{whole}')
        yield ""
        yield from draw(picture, step).lines
        if axles:
            yield ""
            yield from _axle_table(axles, units)
        if train.strips:
            yield ""
        for strip in train.strips:
            yield from _wrapped(strip_words(strip, bool(axles), units), "  ")


def _axle_table(axles: Sequence[Axle], units: Mapping[str, str]) -> Iterator[str]:
    rows = [("axle", f"weight, {units['force']}", f"behind the axle ahead, {units['length']}")]
    for number, axle in enumerate(axles, start=1):
        gap = gap_words(axle.gap) if axle.gap else "—"
        rows.append((str(number), amount(axle.weight.value), gap))
    widths = [max(len(row[column]) for row in rows) for column in range(3)]
    for row in rows:
        yield "  " + "  ".join(cell.rjust(width) for cell, width in zip(row, widths, strict=True))


# The cases


def _cases(model: Model) -> Iterator[str]:
    """The cases of every variant; one that an earlier variant has is named only."""
    told: dict[int, str] = {}
    for variant in model.document.get("variants", ({"name": ""},)):
        name = variant["name"]
        words = f'Cases of variant "{name}"' if name else "Cases"
        yield from ("", *_wrapped(f"{words}{_factor_words(variant, ', ')}"))
        for index, raw in enumerate(model.document["cases"]):
            if "variant" in raw and name not in several(raw["variant"]):
                continue
            head = f"{raw['name']} ({raw['clause']})"
            if index in told:
                yield from ("", *_wrapped(f'{head}: as under variant "{told[index]}"'))
                continue
            told[index] = name
            yield from ("", *_wrapped(head), *_case_words(model, raw))


def _case_words(model: Model, raw: Mapping[str, Any]) -> Iterator[str]:
    case, units = _case(model, raw), SYSTEMS[model.units]
    if case.trains:
        yield from _labelled("trains", _train_words(case, units["length"]))
        if "acting" in raw:
            axles = "; or ".join(map(listed, raw["acting"]))
            yield from _labelled("acting", f"of its axles only {axles}; all keep their places")
        elif raw.get("relieving") == "whole train":
            yield from _labelled("axles", "All axles of a train count, or none.")
        elif any(axle.acts for axle in case.axles):
            yield from _labelled("axles", RELIEVING[case.relieving])
    if "uniform" in raw:
        said = _number_words(raw["uniform"], units["line load"], units["length"])
        yield from _labelled("uniform", f"{said} wherever it raises the effect")
    if "concentrated" in raw:
        words = [_number_words(one, units["force"], units["length"]) for one in raw["concentrated"]]
        apart = ", each in another span" if len(words) > 1 else ""
        yield from _labelled("forces", f"{' and '.join(words)} anywhere{apart}")
    for one in raw.get("allowance", ()):
        value = _typed(one["value"]) if "value" in one else "I"
        said = f"{listed([PARTS[part] for part in several(one['of'])])} × (1 + {value})"
        yield from _labelled("allowance", f"{said} ({one['clause']})")
        if "value" not in one:
            for line in _pieces(one, units["length"]):
                yield from _labelled("", f"I = {line}")
    if "allowance" not in raw:
        yield from _labelled("allowance", "to be stated" if model.dynamic else "none")
    if "factors" in raw:
        yield from _labelled("factors", _factor_words(raw))
    yield from _labelled("for", "; or ".join(map(applies_words, case.applies)) or "every effect")


def _factor_words(raw: Mapping[str, Any], start: str = "") -> str:
    factors = raw.get("factors", ())
    words = "; ".join(f"all × {_typed(one['value'])} ({one['clause']})" for one in factors)
    return start + words if words else ""


def _train_words(case: Case, length: str) -> str:
    words = [f'"{train.name}"' for train in case.trains]
    for index, gap in enumerate(case.gaps, start=1):
        words[index] += f" behind it by {gap_words(gap)} {length}"
    heading = f"; heading {case.headings[0]} only" if len(case.headings) == 1 else ""
    return "; ".join(words) + heading


def _number_words(raw: Any, unit: str, length: str) -> str:
    """A number with its unit, or the rule that gives it."""
    if isinstance(raw, Mapping):
        return f"{'; '.join(_pieces(raw, length))}, in {unit},"
    return f"{_typed(raw)} {unit}"


def _pieces(raw: Mapping[str, Any], length: str) -> list[str]:
    """A rule as a formula, or each of its pieces with the lengths that it is for."""
    if "pieces" not in raw:
        return [formula(raw)]
    bounds = [""] + [_typed(one["up_to"]) for one in raw["pieces"][:-1]]
    words = []
    for piece, beyond, up_to in itertools.zip_longest(raw["pieces"], bounds, bounds[1:]):
        stretch = " ".join([f"beyond {beyond}"] * bool(beyond) + [f"up to {up_to}"] * bool(up_to))
        said = formula(piece)
        words.append(f"{said}{',' * (',' in said)} for L {stretch} {length}")
    return words


def formula(rule: Mapping[str, Any]) -> str:
    """A rule of a model's file, or a piece of one, as a formula in the length L.

    >>> formula({"over": Decimal("50.0"), "beside": Decimal("125.0"), "most": Decimal("0.30")})
    '50 / (L + 125), at most 0.30'
    >>> formula({"constant": 1, "per_square": Decimal("-0.5"), "over": 6, "beside": -30})
    '1 - 0.5 L² + 6 / (L - 30)'
    """
    terms = [
        (rule[key], f"{_typed(abs(rule[key]))}{unknown}")
        for key, unknown in (("constant", ""), ("per_length", " L"), ("per_square", " L²"))
        if key in rule
    ]
    if "over" in rule:
        beside = rule.get("beside", 0)
        below = f"(L {'-' if beside < 0 else '+'} {_typed(abs(beside))})" if beside else "L"
        terms.append((rule["over"], f"{_typed(abs(rule['over']))} / {below}"))
    words = "".join(f" {'-' if value < 0 else '+'} {said}" for value, said in terms)
    words = words.removeprefix(" + ") if words.startswith(" + ") else "-" + words[3:]
    for key, said in (("least", "at least"), ("most", "at most")):
        words += f", {said} {_typed(rule[key])}" if key in rule else ""
    return words


def _parts_to_state(model: Model) -> list[Part]:
    """The parts that a dynamic factor which the engineer must state may be for."""
    if not model.dynamic:
        return []
    cases = [_case(model, raw) for raw in model.document["cases"]]
    has: dict[Part, bool] = {
        "axles": any(axle.weight.value for case in cases for axle in case.axles)
        or any(case.concentrated for case in cases),
        "trailing": any(train.strips for case in cases for train in case.trains),
        "uniform": any(case.uniform for case in cases),
    }
    return [part for part, there in has.items() if there]


# Words and lines


def _typed(raw: int | Decimal) -> str:
    """A number as its file has it, a whole one without decimals.

    >>> _typed(Decimal("0.30")), _typed(Decimal("50.0"))
    ('0.30', '50')
    """
    return str(int(raw)) if raw == int(raw) else format(raw, "f")


def _labelled(label: str, said: str) -> list[str]:
    head = f"  {label.ljust(_LABEL)}"
    return _wrapped(said, head, " " * len(head))


def _wrapped(said: str, first: str = "", others: str | None = None) -> list[str]:
    """Lines that begin with ``first``, the others with ``others`` where that differs."""
    return textwrap.wrap(
        said,
        WIDTH,
        initial_indent=first,
        subsequent_indent=first if others is None else others,
        break_on_hyphens=False,
    )


def _comment(said: str) -> list[str]:
    return _wrapped(said, "# ")


def _wrapped_row(row: Sequence[str], widths: Sequence[int]) -> Iterator[str]:
    cells = [textwrap.wrap(cell, width) for cell, width in zip(row, widths, strict=True)]
    for parts in itertools.zip_longest(*cells, fillvalue=""):
        padded = (part.ljust(width) for part, width in zip(parts, widths, strict=True))
        yield "  ".join(padded).rstrip().replace(_UNBROKEN, " ")
