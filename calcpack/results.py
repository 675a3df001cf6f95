"""results.json: what was found, as plain data, and the digest that names it."""

from __future__ import annotations

import hashlib
import json
from collections.abc import Sequence
from importlib.metadata import version
from typing import Any

import rfc8785

from calcpack.analysis import Line
from calcpack.derive.kinds import LINE_KIND
from calcpack.exact.numbers import exact_text
from calcpack.exact.units import SYSTEMS
from calcpack.model.beam import Beam
from calcpack.model.request import Effect
from calcpack.moving.absolute import Absolute
from calcpack.moving.envelope import Envelope, Worst
from calcpack.moving.governing import Candidate, Governing, Tie
from calcpack.moving.placement import AxleShare, Stretch, StripShare
from calcpack.solution import Placement, Settled, Solution
from calcpack.statics.plan import PlanStep, equation_in_words
from calcpack.statics.system import symbol_of

FORMAT = 1
SWEPT_DIGITS = 6
DIGEST_SHOWN = 12

Json = dict[str, Any]


def program_version() -> str:
    return version("calcpack")


def results(solution: Solution) -> Json:
    """Everything found, in the form that ``formats.md`` settles; every top-level key is present."""
    calculation = solution.calculation
    body: Json = {
        "units": calculation.units,
        "classification": {
            "kind": solution.classification.kind,
            "degree": solution.classification.degree,
            "reason": solution.classification.reason,
        },
        "plan": [_plan_step(calculation.beam, step) for step in solution.plan],
        "lines": [_line(solution, line) for line in solution.lines],
        "placements": [_placement(placement) for placement in solution.placements],
        "permanent": [_settled(one) for one in solution.settled],
        "envelopes": [
            *(_envelope(one) for one in solution.along.envelopes),
            *(_worst(kind, found) for kind, found in solution.along.worst.items()),
        ],
        "absolute": [_absolute(one) for one in solution.along.absolutes],
        "combinations": [],
        "checks": [],
        "agreement": _agreement(solution),
        "steps": _steps(solution),
    }
    digest = _digest(calculation.plain, {"format": FORMAT, **body})
    return {"format": FORMAT, "digest": digest, "program": program_version(), **body}


def as_bytes(found: Json) -> bytes:
    """The bytes of results.json, the same on the terminal and in the PDF."""
    return (json.dumps(found, ensure_ascii=False, indent=1) + "\n").encode()


def _digest(plain_input: Any, body: Json) -> str:
    """SHA-256 of the RFC 8785 form of the input (without cover) and the results."""
    return hashlib.sha256(rfc8785.dumps({"input": plain_input, "results": body})).hexdigest()


def effect_entry(effect: Effect) -> Json:
    """An effect as it is named in results.json."""
    entry: Json = {"kind": effect.kind, "at": effect.at, "station": float(effect.station)}
    if effect.face:
        entry["side"] = effect.face
    return entry


def _plan_step(beam: Beam, step: PlanStep) -> Json:
    return {
        "unknown": str(symbol_of(step.unknown)),
        "bodies": list(step.bodies),
        "equation": equation_in_words(beam, step.equation),
        "uses": [str(symbol_of(one)) for one in step.uses],
        "reason": step.reason,
    }


def _line(solution: Solution, found: Line) -> Json:
    line, beam = found.line, solution.calculation.beam
    positive, negative = line.areas()
    return {
        "effect": effect_entry(found.effect),
        "unit": SYSTEMS[solution.calculation.units][LINE_KIND[found.effect.kind]],
        "pieces": [
            {
                "from": exact_text(start),
                "to": exact_text(end),
                "coefficients": [exact_text(value) for value in piece],
            }
            for start, end, piece in zip(line.breaks, line.breaks[1:], line.pieces, strict=False)
        ],
        "ordinates": [
            {
                "at": exact_text(station.at),
                "left": float(line.left(station.at)),
                "right": float(line.right(station.at)),
            }
            for station in beam.stations
        ],
        "zeros": [exact_text(zero) for zero in line.zeros()],
        "area_positive": float(positive),
        "area_negative": float(negative),
    }


def _settled(found: Settled) -> Json:
    return {
        "name": found.case.name,
        "effects": [
            {"effect": effect_entry(effect), "value": float(value)}
            for effect, value in found.effects.items()
        ],
    }


def _placement(placement: Placement) -> Json:
    return {
        "moving": placement.load.name,
        "effect": effect_entry(placement.effect),
        "max": _extreme(placement.greatest, placement.swept[0]),
        "min": _extreme(placement.least, placement.swept[1]),
    }


def _extreme(found: Governing, swept: float) -> Json:
    case = found.case
    allowances = dict(case.allowances) if case else {}
    entry: Json = {
        "value": float(found.value),
        "static": float(found.static),
        "case": case.name if case else "",
        "allowance": float(allowances["axles"].value) if "axles" in allowances else 0.0,
        "allowances": {part: float(one.value) for part, one in allowances.items()},
        "factor": float(case.factor) if case else 1.0,
        "distribution": float(found.share),
        "axles": [],
        "concentrated": [_axle(share) for share in found.concentrated],
        "trailing": [_strip(share) for share in found.strips if share.stretches],
        "loaded": _stretches(found.loaded),
        "candidates": found.looked_at,
        "swept": rounded(swept),
    }
    if found.position is not None and found.rates is not None:
        groups = found.position.groups
        entry |= {
            "heading": found.position.heading,
            "lead_at": float(found.position.lead_at),
            "side": groups[0].side,
            "ends_count": groups[0].ends_count,
            "axles": [
                {**_axle(share), "side": found.position.group_of(share.axle).side}
                for share in found.axles
            ],
            "rate_before": float(found.rates[0]),
            "rate_after": float(found.rates[1]),
            "ties": [_tie(one) for one in found.ties],
        }
        if found.near:
            entry["next"] = {"value": float(found.near[0].value), **_where(found.near[0])}
    return entry


def _axle(share: AxleShare) -> Json:
    return {
        "weight": float(share.weight),
        "at": float(share.at),
        "ordinate": float(share.ordinate),
        "standing": share.standing,
    }


def _strip(share: StripShare) -> Json:
    return {
        "load": float(share.strip.intensity),
        "stretches": _stretches(share.stretches),
        "area": float(share.area),
    }


def _stretches(stretches: Sequence[Stretch]) -> list[list[float]]:
    return [[float(start), float(end)] for start, end in stretches]


def _tie(tie: Tie) -> Json:
    return {**_where(tie.first), "lead_to": float(tie.last.position.lead_at)}


def _where(candidate: Candidate) -> Json:
    position = candidate.position
    return {
        "case": candidate.case.name,
        "heading": position.heading,
        "lead_at": float(position.lead_at),
    }


def _envelope(found: Envelope) -> Json:
    """Point by point; ``where`` tells how the load stands, for the greatest and for the least."""
    points = found.points
    names = dict.fromkeys(name for point in points for name in point.together)
    return {
        "load": found.load.name,
        "kind": found.kind,
        "at": [float(point.effect.station) for point in points],
        "side": [point.effect.face or "" for point in points],
        "max": [float(point.greatest.value) for point in points],
        "min": [float(point.least.value) for point in points],
        "where": {
            "max": [_stands(point.greatest) for point in points],
            "min": [_stands(point.least) for point in points],
        },
        "with": {
            name: {
                extreme: [
                    float(point.together[name][index]) if name in point.together else None
                    for point in points
                ]
                for index, extreme in enumerate(("max", "min"))
            }
            for name in names
        },
    }


def _worst(kind: str, found: Sequence[Worst]) -> Json:
    """Over all loads, hence without the name of one: ``where`` says which load it is."""
    pairs = {"max": [one.greatest for one in found], "min": [one.least for one in found]}
    return {
        "load": "",
        "kind": kind,
        "at": [float(one.effect.station) for one in found],
        "side": [one.effect.face or "" for one in found],
        **{extreme: [float(one.value) for _, one in some] for extreme, some in pairs.items()},
        "where": {
            extreme: [{"load": load.name, **_stands(one)} for load, one in some]
            for extreme, some in pairs.items()
        },
        "with": {},
    }


def _stands(found: Governing) -> Json:
    if found.case is None:
        return {}
    entry: Json = {"case": found.case.name}
    if found.position is not None:
        entry |= {
            "heading": found.position.heading,
            "axles": [float(at) for at in found.position.stations],
        }
    return entry


def _absolute(one: Absolute) -> Json:
    return {
        "load": one.load.name,
        "span": one.span,
        "kind": "moment",
        "at": float(one.section),
        "value": float(one.found.value),
        "static": float(one.found.static),
        "where": _stands(one.found),
        "axles": [_axle(share) for share in one.found.axles],
    }


def rounded(value: float) -> float:
    """A float rounded to 6 significant digits, so that processors agree on it."""
    return float(f"{value:.{SWEPT_DIGITS - 1}e}")


def _agreement(solution: Solution) -> list[Json]:
    wanted = {line.effect for line in solution.lines}
    return [
        {"effect": effect_entry(one.effect), "method": one.method, "within": one.within}
        for one in solution.second.agreements
        if one.effect in wanted
    ]


def _steps(solution: Solution) -> list[Json]:
    derivation, units = solution.derivation, SYSTEMS[solution.calculation.units]
    entries = []
    for step in derivation.steps:
        entry: Json = {"key": step.key, "id": step.id, "symbols": step.symbols}
        if step.value is not None:
            if step.key not in solution.shortened:
                entry["numbers"] = derivation.numbers(step)
            entry["result"] = derivation.result(step)
        entry |= {
            "unit": units[step.kind],
            "inputs": list(step.inputs),
            "uses": list(step.uses),
        }
        entries.append(entry)
    return entries
