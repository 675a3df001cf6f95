"""results.json: what was found, as plain data, and the digest that names it."""

from __future__ import annotations

import hashlib
import json
from fractions import Fraction
from importlib.metadata import version
from typing import Any

import rfc8785

from calcpack.derive.kinds import LINE_KIND
from calcpack.exact.numbers import exact_text
from calcpack.exact.units import SYSTEMS
from calcpack.model.beam import Beam
from calcpack.model.request import Effect
from calcpack.moving.critical import Candidate, Governing, total_effect
from calcpack.moving.placement import Position
from calcpack.solution import Line, Placement, Settled, Solution
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
        "envelopes": [],
        "absolute": [],
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
        "max": _extreme(placement, placement.greatest, placement.swept[0]),
        "min": _extreme(placement, placement.least, placement.swept[1]),
    }


def _extreme(placement: Placement, found: Governing, swept: float) -> Json:
    load = placement.load
    entry: Json = {
        "value": float(found.value),
        "static": float(found.static),
        "allowance": float(load.allowance),
        "distribution": float(load.distribution),
        "axles": [],
        "loaded": [[float(start), float(end)] for start, end in found.loaded],
        "candidates": found.candidates,
        "swept": rounded(swept),
    }
    if found.chosen is not None and found.rates is not None:
        position = found.chosen.position
        entry |= {
            "heading": position.heading,
            "lead_at": float(position.lead_at),
            "side": position.side,
            "ends_count": position.ends_count,
            "axles": [
                {
                    "weight": float(share.weight),
                    "at": float(share.at),
                    "ordinate": float(share.ordinate),
                    "standing": share.standing,
                }
                for share in found.shares
            ],
            "rate_before": float(found.rates[0]),
            "rate_after": float(found.rates[1]),
            "ties": [_where(one) for one in found.ties],
        }
        if found.near:
            entry["next"] = _candidate(placement, found, found.near[0])
    return entry


def candidate_value(placement: Placement, found: Governing, candidate: Candidate) -> Fraction:
    """The value that counts if the axles stood there: with uniform load and factors."""
    return total_effect(placement.load, candidate.axles_effect, found.uniform)


def _candidate(placement: Placement, found: Governing, candidate: Candidate) -> Json:
    value = candidate_value(placement, found, candidate)
    return {"value": float(value), **_where(candidate.position)}


def _where(position: Position) -> Json:
    return {"heading": position.heading, "lead_at": float(position.lead_at)}


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
            entry |= {"numbers": derivation.numbers(step), "result": derivation.result(step)}
        entry |= {
            "unit": units[step.kind],
            "inputs": list(step.inputs),
            "uses": list(step.uses),
        }
        entries.append(entry)
    return entries
