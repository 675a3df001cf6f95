"""results.json: its keys, its bytes, and the digest that names it."""

from __future__ import annotations

import hashlib
import itertools
import json
import os
import subprocess
import sys
from dataclasses import replace
from datetime import date
from fractions import Fraction
from functools import cache
from pathlib import Path
from typing import Any

import pytest
import rfc8785
from beams import effects_of, make_beam
from loads import given, make_load, make_strip
from making import COVER, make_calculation

from calcpack.model.request import Calculation, Cover, Signature
from calcpack.results import as_bytes, results, rounded
from calcpack.solution import solve

KEYS = [
    *("format", "digest", "program", "units", "classification", "plan", "lines", "placements"),
    *("envelopes", "absolute", "combinations", "checks", "agreement", "steps"),
]


def girder(weight: str = "18.5", cover: Cover = COVER, units: str = "US") -> Calculation:
    beam = make_beam(
        128,
        [(0, "pin"), (40, "roller"), (88, "roller"), (128, "roller")],
        [(52, "hinge"), (76, "hinge")],
        [20, "64.5"],
    )
    load = make_load(
        (weight, 0), (40, "13.3"), ("40.2", "4.1"), uniform="0.64", allowance="0.33", number=0
    )
    keen = make_load((25, 0), (25, 4), relieving="neglect", headings=("left",), number=1)
    effects = [effect for effect in effects_of(beam) if effect.at in ("A", "B", "h1", "1")]
    return make_calculation(beam, effects, [load, keen], units, cover)


@cache
def found() -> dict[str, Any]:
    return results(solve(girder()))


@cache
def printed() -> bytes:
    return as_bytes(found())


def test_every_top_level_key_is_present_and_plain() -> None:
    assert [key for key in found() if key in KEYS] == KEYS
    read = json.loads(printed(), parse_constant=pytest.fail)
    assert read == found()
    assert found()["format"] == 1
    assert found()["classification"]["kind"] == "determinate"
    for later in ("combinations", "checks"):
        assert found()[later] == []


def test_entries_have_the_settled_keys() -> None:
    line, placement = found()["lines"][0], found()["placements"][0]
    assert {"effect", "unit", "pieces", "ordinates", "area_positive", "area_negative"} <= {*line}
    assert {*line["pieces"][0]} == {"from", "to", "coefficients"}
    assert {*line["ordinates"][0]} == {"at", "left", "right"}
    assert {*found()["plan"][0]} == {"unknown", "bodies", "equation", "uses", "reason"}
    assert {*placement} == {"moving", "effect", "max", "min"}
    assert {
        *("value", "static", "heading", "lead_at", "allowance", "distribution", "axles", "loaded"),
        *("candidates", "next", "rate_before", "rate_after", "swept"),
    } <= {*placement["max"]}
    assert {*placement["max"]["axles"][0]} >= {"weight", "at", "ordinate"}
    for step in found()["steps"]:
        numbers = {"numbers", "result"} & {*step}
        assert {*step} - numbers == {"key", "id", "symbols", "unit", "inputs", "uses"}
    assert {*found()["agreement"][0]} == {"effect", "method", "within"}


def test_the_order_and_number_of_entries() -> None:
    calculation = girder()
    effects = [(one.kind, one.at, one.face) for one in calculation.effects]
    named = [(e["kind"], e["at"], e.get("side")) for e in (x["effect"] for x in found()["lines"])]
    assert named == effects
    placed = [(p["moving"], p["effect"]["kind"], p["effect"]["at"]) for p in found()["placements"]]
    assert placed == [
        (load.name, kind, at) for load in calculation.moving for kind, at, _ in effects
    ]
    assert len(found()["agreement"]) == 2 * len(effects)


def test_lines_are_written_exactly() -> None:
    """Pieces cover the beam and give the ordinates; at a jump two pieces meet."""
    jumps = 0
    for line in found()["lines"]:
        pieces = line["pieces"]
        assert (pieces[0]["from"], pieces[-1]["to"]) == ("0", "128")
        for one, two in itertools.pairwise(pieces):
            assert one["to"] == two["from"]
        for ordinate in line["ordinates"]:
            at = Fraction(ordinate["at"])
            for side in ("left", "right"):
                inner = {Fraction(0): "right", Fraction(128): "left"}.get(at, side)
                end = "to" if inner == "left" else "from"
                piece = next((p for p in pieces if Fraction(p[end]) == at), None)
                piece = piece or next(
                    p for p in pieces if Fraction(p["from"]) < at < Fraction(p["to"])
                )
                t = at - Fraction(piece["from"])
                terms = [Fraction(c) * t**k for k, c in enumerate(piece["coefficients"])]
                assert ordinate[side] == float(sum(terms))
            jumps += ordinate["left"] != ordinate["right"]
    assert jumps >= 3


def test_a_value_from_its_printed_parts() -> None:
    for placement in found()["placements"]:
        for extreme in (placement["max"], placement["min"]):
            counted = [one for one in extreme["axles"] if one["standing"] == "counts"]
            axles = sum(one["weight"] * one["ordinate"] for one in counted)
            uniform = extreme["static"] - axles
            value = (axles * (1 + extreme["allowance"]) + uniform) * extreme["distribution"]
            assert extreme["value"] == pytest.approx(value, abs=1e-9)
            assert extreme["swept"] == pytest.approx(value, rel=2e-2, abs=1e-6)
            assert extreme["swept"] == rounded(extreme["swept"])
            if "next" in extreme:
                assert abs(extreme["next"]["value"]) < abs(extreme["value"])
                assert {*extreme["next"]} >= {"heading", "lead_at"}
        assert placement["max"]["value"] >= 0 >= placement["min"]["value"]


def many_parts() -> Calculation:
    """Two cases of a train with a gap that varies and a strip behind it, the second with a force
    that floats and a factor; a uniform load in both."""
    beam = make_beam(31, [(0, "pin"), (14, "roller"), (26, "roller")], sections=[6])
    load = make_load((12, 0), (30, (4, 9)), (30, 4), uniform=2, strips=[make_strip(3, 2, length=8)])
    (first,) = load.cases
    first = replace(
        first,
        name="first",
        allowances=(
            ("axles", given("0.3", "moving[0].a")),
            ("trailing", given("0.1", "moving[0].t")),
        ),
    )
    second = replace(
        first,
        name="second",
        concentrated=(given(5, "moving[0].force"),),
        factors=(given("0.9", "moving[0].k[0]"), given("1.05", "moving[0].k[1]")),
        allowances=(*first.allowances, ("uniform", given("0.02", "moving[0].u"))),
    )
    load = replace(load, cases=(first, second))
    return make_calculation(beam, effects_of(beam), [load], "SI")


def test_a_value_from_the_printed_parts_of_a_case() -> None:
    """Part by part: axles and floating forces, strips, and what is left of the static effect."""
    seen: set[str] = set()
    for placement in results(solve(many_parts()))["placements"]:
        for extreme in (placement["max"], placement["min"]):
            counted = [one for one in extreme["axles"] if one["standing"] == "counts"]
            forces = [*counted, *extreme["concentrated"]]
            axles = sum(one["weight"] * one["ordinate"] for one in forces)
            trailing = sum(one["load"] * one["area"] for one in extreme["trailing"])
            uniform = extreme["static"] - axles - trailing
            raised = {part: 1 + value for part, value in extreme["allowances"].items()}
            value = axles * raised.get("axles", 1) + trailing * raised.get("trailing", 1)
            value += uniform * raised.get("uniform", 1)
            value *= extreme["factor"] * extreme["distribution"]
            assert extreme["value"] == pytest.approx(value, abs=1e-9)
            assert extreme["swept"] == pytest.approx(value, rel=3e-2, abs=1e-6)
            if extreme["case"] == "second":
                assert extreme["factor"] == pytest.approx(0.9 * 1.05)
            length = sum(end - start for start, end in extreme["loaded"])
            assert (length > 0) == (abs(uniform) > 1e-9)
            for strip in extreme["trailing"]:
                assert strip["load"] == 3
                assert 0 < sum(end - start for start, end in strip["stretches"]) < 8 + 1e-9
            for tie in extreme.get("ties", ()):
                assert {*tie} == {"case", "heading", "lead_at", "lead_to"}
                assert tie["lead_at"] <= tie["lead_to"]
            if "next" in extreme:
                assert abs(extreme["next"]["value"]) < abs(extreme["value"])
            seen |= {extreme["case"]}
            seen |= {part for part in ("concentrated", "trailing", "ties") if extreme.get(part)}
    assert seen >= {"first", "second", "concentrated", "trailing", "ties"}


def test_what_is_found_along_the_beam() -> None:
    """At a section the envelope has the value that was derived there; the greatest
    moment of a span is at least that of the envelope at any place in it."""
    body = found()
    kinds = {(one["load"], one["kind"]): one for one in body["envelopes"]}
    compared = 0
    for placement in body["placements"]:
        effect, one = (
            placement["effect"],
            kinds.get((placement["moving"], placement["effect"]["kind"])),
        )
        if one is None:
            continue
        assert {*one} == {"load", "kind", "at", "side", "max", "min", "where", "with"}
        for index, (at, side) in enumerate(zip(one["at"], one["side"], strict=True)):
            if (at, side) == (effect["station"], effect.get("side", "")):
                assert one["max"][index] == pytest.approx(placement["max"]["value"])
                assert one["min"][index] == pytest.approx(placement["min"]["value"])
                compared += 1
    assert compared > 8
    assert body["absolute"]
    for one in body["absolute"]:
        assert {*one} == {"load", "span", "kind", "at", "value", "static", "where", "axles"}
        start, end = [(0, 40), (40, 88), (88, 128)][one["span"] - 1]
        along = kinds[one["load"], "moment"]
        inside = [
            value for at, value in zip(along["at"], along["max"], strict=True) if start <= at <= end
        ]
        assert one["value"] >= max(inside) - 1e-9
        assert start < one["at"] < end


def test_units_of_lines_and_steps() -> None:
    for units, length, moment in (("US", "ft", "kip·ft"), ("SI", "m", "kN·m")):
        body = results(solve(girder(units=units)))
        assert body["units"] == units
        for line in body["lines"]:
            long = line["effect"]["kind"] in ("moment", "moment reaction")
            assert line["unit"] == (length if long else "")
        last = next(one for one in body["steps"] if one["key"] == "placement/moving[0]/M_1/max")
        assert last["unit"] == moment


def test_the_digest_of_the_printed_bytes() -> None:
    """SHA-256 of the RFC 8785 form of the input without its cover and the results without digest
    and program, from what was printed."""
    body = json.loads(printed())
    digest = body.pop("digest")
    del body["program"]
    canonical = rfc8785.dumps({"input": json.loads(json.dumps(girder().plain)), "results": body})
    assert digest == hashlib.sha256(canonical).hexdigest()


def digest(calculation: Calculation) -> str:
    return str(results(solve(calculation))["digest"])


def test_what_changes_the_digest() -> None:
    calculation = girder()
    known = digest(calculation)
    assert digest(girder(weight="18.51")) != known
    signed = replace(COVER, checked=Signature("R. Aspen", date(2026, 5, 1)), title="Another")
    assert digest(girder(cover=signed)) == known
    assert digest(replace(calculation, plain={**calculation.plain, "package": "A4"})) != known
    same_plain = replace(girder(weight="18.51"), plain=calculation.plain)
    assert digest(same_plain) != known


RUN = """
import sys
sys.path[:0] = {paths!r}
from test_results import girder
from calcpack.results import as_bytes, results
from calcpack.solution import solve
sys.stdout.buffer.write(as_bytes(results(solve(girder()))))
"""


@pytest.mark.parametrize("seed", ["1", "2"])
def test_the_same_bytes_in_another_process(seed: str) -> None:
    """Whatever order the sets of that process take."""
    paths = [str(Path(__file__).parent), str(Path(__file__).parent.parent)]
    done = subprocess.run(
        [sys.executable, "-c", RUN.format(paths=paths)],
        env={**os.environ, "PYTHONHASHSEED": seed},
        capture_output=True,
        check=True,
    )
    assert done.stdout == printed()
    assert done.stdout.endswith(b"}\n")
    assert "·".encode() in done.stdout
