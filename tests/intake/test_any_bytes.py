"""Whatever the bytes, a calculation comes out or a refusal of plain lines: never another error."""

from __future__ import annotations

import random
import re

import rfc8785
from hypothesis import given, settings
from hypothesis import strategies as st
from intake_samples import LOADS, SHORT, SI, SPRUNG, US, changed, check_lines, givens

from calcpack.errors import InputRefused
from calcpack.intake import read

SAMPLES = (US, SI, SHORT, SPRUNG, LOADS)

TOKEN = re.compile(r'"[^"\n]*"|[\w.+-]+|\S')

ODD = re.findall(
    TOKEN,
    """
    0 -0.0 1 -1 5.5 1e400 1e-400 inf nan 0x7f 1_000 0.1 true 2026-04-07 2026-04-07T01:02:03
    "" "A" "B" "M" "mid" "tenths" "supports" "sections" "3 ft" "1e9 km" "-2 m" "2 ft 3" "1.5"
    "fixed" "guided" "slide" "hinge" "spring" "both" "left" "reaction" "shear" "moment reaction"
    "moment B" "moment C right" "reaction C" "3 kip/ft" "4 in4" "5 rad" "6 mm" "deflection"
    down turn EI E I from to vertical table column "s.csv"
    "HL-93" "LM71" "SW/0" "design" "any" "none" "each" "whole train" "in parts" "Tug" "axles"
    list least spacing weight load behind ahead of value source trains standard variant order
    at name kind spans length face side axles = , [ ] { } # ' \\ "\\u0000" "\\u202e" "é" x.y
    """,
)


def outcome(data: bytes) -> bool:
    """Whether a calculation came out; what did come out is looked at either way."""
    try:
        calculation = read(data)
    except InputRefused as refused:
        check_lines(str(refused).split("\n"), refused.problems)
        return False
    beam = calculation.beam
    assert rfc8785.dumps(dict(calculation.plain))
    assert all(0 <= station.at <= beam.length for station in beam.stations)
    assert all(beam.station(effect.station) for effect in calculation.effects)
    assert len(set(calculation.effects)) == len(calculation.effects)
    assert any(support.holds_vertical for support in beam.supports)
    assert all(support.holds_vertical or support.holds_rotation for support in beam.supports)
    places = [place for one in beam.stiffness for place in (one.start, one.end)]
    assert places[:1] + places[-1:] in ([], [0, beam.length])
    assert places[1:-1:2] == places[2::2]
    assert all(one.EI > 0 for one in beam.stiffness)
    redundants = calculation.redundants or ()
    assert len(set(redundants)) == len(redundants)
    assert all(one.settlements for one in calculation.permanent)
    for load in calculation.moving:
        assert 1 <= len(load.cases) <= 64
        assert all(case.trains or case.uniform for case in load.cases)
        assert all(load.share(one.kind, one.station) for one in calculation.effects)
        for one in givens((load.cases, load.shares)):
            assert one.rule or not one.path or calculation.inputs[one.path] == one.value
    assert len({entry.path for entry in calculation.echo}) == len(calculation.echo)
    return True


def test_words_of_a_good_file_exchanged() -> None:
    accepted = 0
    for seed in range(1500):
        chance = random.Random(seed)
        text = SAMPLES[seed % len(SAMPLES)]
        tokens = list(TOKEN.finditer(text))
        values = [match for match in tokens if match[0][0] in '"0123456789']
        picked = chance.sample(chance.choice((values, values, tokens)), chance.choice((1, 1, 2, 5)))
        for match in sorted(picked, key=lambda match: -match.start()):
            new = chance.choice((chance.choice(ODD), chance.choice(values)[0], ""))
            text = text[: match.start()] + new + text[match.end() :]
        accepted += outcome(text.encode())
    assert 50 < accepted < 1000  # both outcomes were met often


def test_bytes_of_a_good_file_exchanged() -> None:
    for seed in range(500):
        chance = random.Random(seed)
        data = bytearray(SAMPLES[seed % len(SAMPLES)].encode())
        for _ in range(chance.choice((1, 2, 8))):
            place = chance.randrange(len(data))
            data[place : place + chance.randrange(3)] = chance.randbytes(chance.randrange(3))
        outcome(bytes(data))


@settings(max_examples=100, deadline=None)
@given(st.binary(max_size=200) | st.text(max_size=200).map(lambda text: text.encode("utf-8")))
def test_any_bytes(data: bytes) -> None:
    assert not outcome(data)


@settings(max_examples=100, deadline=None)
@given(st.text(max_size=80), st.sampled_from(["Girder G7", "mid", "12 ft 6 in", "Haul", "letter"]))
def test_any_text_in_a_string(inserted: str, place: str) -> None:
    escaped = "".join(f"\\U{ord(character):08x}" for character in inserted)
    outcome(changed(US, (place, place + escaped)).encode())
