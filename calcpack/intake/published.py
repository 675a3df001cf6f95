"""A published load model as a moving load of calc.toml."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from fractions import Fraction

from calcpack.exact.units import unit_size
from calcpack.intake.beam import Outline
from calcpack.intake.reading import Reading, nearest
from calcpack.intake.shown import decimal_text
from calcpack.intake.standards import Model, cases_of, model_names, read_model
from calcpack.intake.values import alternatives, unit_of
from calcpack.model.beam import Beam
from calcpack.model.loads import Axle, Case, Gap, Given, Standard, Strip, Train


@dataclass(frozen=True)
class Published:
    """The cases of a model, where it is defined, and its numbers by path."""

    cases: tuple[Case, ...]
    standard: Standard
    numbers: dict[str, Fraction]


def read_published(reading: Reading, outline: Outline, path: str) -> Published | None:
    """The model that the moving load at a path names; None where anything about it is refused."""
    name = reading.value(f"{path}.standard")
    if name is None:
        return None
    if name not in model_names():
        reading.refuse(
            f"{path}.standard", f"is not a known model; {nearest(name, model_names(), 3)}"
        )
        return None
    model = read_model(name)
    before = len(reading.problems)
    for key, needs in _unfit(reading, outline.beam if outline.whole else None, path, model):
        reading.refuse(f"{path}.{key}", needs)
    variant = reading.value(f"{path}.variant") or ""
    if len(reading.problems) > before or (model.variants and model.variant(variant) is None):
        return None
    stated = reading.value(f"{path}.length")
    length = None if stated is None else Given(stated, f"{path}.length")
    if model.needs_length and length is None:
        return None  # refused already
    cases, numbers = cases_of(model, variant, model.name, length)
    if reading.units is not None and reading.units != model.units:
        cases = tuple(_converted(case, model.units, reading.units) for case in cases)
        numbers = {one.path: one.value for case in cases for one in case.numbers}
    scale = reading.value(f"{path}.scale")
    if scale is not None:
        factor = Given(scale, f"{path}.scale")
        cases = tuple(replace(case, factors=(*case.factors, factor)) for case in cases)
    compared = (reading.value(f"{path}.compared") or "").strip()
    return Published(cases, model.standard(variant, compared), numbers)


def _unfit(
    reading: Reading, beam: Beam | None, path: str, model: Model
) -> Iterator[tuple[str, str]]:
    """What does not suit the model: the key at fault, and what is needed."""
    if reading.units is not None and reading.units != model.units and model.needs_length:
        yield "standard", f'needs units = "{model.units}", in which its rules by length are stated'
    names = tuple(one.name for one in model.variants)
    variant = reading.value(f"{path}.variant")
    refused = variant is None and reading.given(f"{path}.variant")
    if names and variant not in names and not refused:
        yield "variant", f"must be {alternatives(names)}"
    elif not names and variant is not None:
        yield "variant", f"must be left out: {model.name} has no variants"
    scale = reading.value(f"{path}.scale")
    if scale is not None and model.scales and scale not in model.scales:
        known = ", ".join(decimal_text(one) for one in model.scales)
        yield "scale", f"must be one of {known} ({model.title})"
    if model.dynamic and not reading.given(f"{path}.allowance"):
        clause = f"{model.title}, {model.dynamic}"
        yield "allowance", f"must be given: the dynamic factor is not in {model.name} ({clause})"
    if model.needs_length and not reading.given(f"{path}.length"):
        yield (
            "length",
            f"must be given: numbers of {model.name} go by a length; see calcpack models",
        )
    if not model.needs_length and reading.given(f"{path}.length"):
        yield "length", f"must be left out: no number of {model.name} goes by a length"
    if beam is not None and model.needs == "continuous" and not _continuous(beam):
        yield "standard", f"is for continuous beams only ({model.title}, {model.needs_clause})"
    if (
        beam is not None
        and model.longest is not None
        and _length(reading, beam, model) > model.longest
    ):
        longest = f"{decimal_text(model.longest)} {unit_of('length', model.units)}"
        clause = f"{model.title}, {model.clause}"
        yield "standard", f"is for beams up to {longest} long ({clause}): {model.longest_says}"


def _continuous(beam: Beam) -> bool:
    """Whether a span runs on over an inner support without a hinge there."""
    held = [one.at for one in beam.supports if one.holds_vertical]
    hinged = {one.at for one in beam.releases if one.kind == "hinge"}
    return any(at not in hinged for at in held[1:-1])


def _length(reading: Reading, beam: Beam, model: Model) -> Fraction:
    """The length of the beam in the model's unit."""
    if reading.units is None:
        return beam.length
    return beam.length * unit_size("length", reading.units) / unit_size("length", model.units)


def _converted(case: Case, stated: str, wanted: str) -> Case:
    """A case in other units, exactly; it has no numbers that go by a length."""
    force, length = (
        unit_size(kind, stated) / unit_size(kind, wanted) for kind in ("force", "length")
    )

    def times(given: Given, factor: Fraction) -> Given:
        return replace(given, value=given.value * factor)

    def gap(one: Gap) -> Gap:
        return replace(one, ties=tuple(times(tie, length) for tie in one.ties))

    def axle(one: Axle) -> Axle:
        return replace(one, weight=times(one.weight, force), gap=one.gap and gap(one.gap))

    def strip(one: Strip) -> Strip:
        return replace(
            one,
            start=times(one.start, length),
            length=one.length and times(one.length, length),
            amount=times(one.amount, force if one.of_weight else force / length),
        )

    def train(one: Train) -> Train:
        return replace(one, axles=tuple(map(axle, one.axles)), strips=tuple(map(strip, one.strips)))

    return replace(
        case,
        trains=tuple(map(train, case.trains)),
        gaps=tuple(map(gap, case.gaps)),
        uniform=case.uniform and times(case.uniform, force / length),
        concentrated=tuple(times(one, force) for one in case.concentrated),
    )
