"""Redundants as the engineer names them."""

from __future__ import annotations

import pytest
from intake_samples import SHORT, changed, faults

from calcpack.elastic.redundants import candidates
from calcpack.intake import read
from calcpack.model.request import Effect

BEAM = """\
format = 1
units = "SI"
cover.title = "Beam"
[beam]
length = 20
supports = [
  { name = "W", at = 0, kind = "fixed" },
  { name = "P", at = 4, kind = "roller" },
  { name = "H", at = 8, kind = "roller" },
  { name = "G", at = 12, kind = "guided" },
  { name = "S", at = 16, kind = "spring", vertical = 1, rotational = 1 },
  { name = "E", at = 20, kind = "pin" },
]
releases = [ { name = "h", at = 8, kind = "hinge" } ]
sections = [ { name = "s", at = 2.5 } ]
stiffness = [ { from = 0, to = 20, EI = 1 } ]
redundants = ["moment P"]
"""


def stated(*texts: str, beam: str = BEAM) -> str:
    listed = ", ".join(f'"{text}"' for text in texts)
    return changed(beam, ('redundants = ["moment P"]', f"redundants = [{listed}]"))


def redundants(*texts: str, beam: str = BEAM) -> tuple[Effect, ...] | None:
    return read(stated(*texts, beam=beam).encode()).redundants


def test_redundants_in_the_order_of_the_file() -> None:
    texts = ("reaction E", "moment P", "moment reaction W", "moment S right", "moment S left")
    found = redundants(*texts)
    assert found is not None
    assert [one.label for one in found] == [
        "reaction at E",
        "moment at P",
        "moment reaction at W",
        "moment at S, right face",
        "moment at S, left face",
    ]
    assert [one.station for one in found] == [20, 4, 0, 16, 16]
    assert [one.tag for one in found] == ["E", "P", "W", "S", "S"]


def test_without_the_key_they_are_chosen_by_rule() -> None:
    assert read(SHORT.encode()).redundants is None
    assert faults(stated()) == ["beam.redundants: [], must not be empty"]


def test_every_candidate_of_the_rule_can_be_named() -> None:
    beam = read(BEAM.encode()).beam
    every = tuple(candidates(beam))
    texts = [f"{one.kind} {one.at}" + (f" {one.face}" if one.face else "") for one in every]
    assert redundants(*texts) == every
    assert len(every) > 10


def test_names_may_hold_the_words_that_tell_redundants() -> None:
    odd = changed(BEAM, ('name = "P"', 'name = "reaction left"'), ('"moment P"', '"moment W"'))
    odd = odd.replace('["moment W"]', '["moment P"]')
    (found,) = redundants("moment reaction left", beam=odd) or ()
    assert found.label == "moment at reaction left"
    twice = changed(odd, ('name = "E"', 'name = "left"'))
    assert faults(stated("moment reaction left", beam=twice)) == [
        "beam.redundants[0]: moment reaction left, must not mean both "
        "a moment reaction at left and a moment at reaction left"
    ]


def test_a_long_name_is_shortened_in_symbols() -> None:
    long = changed(BEAM, ('name = "P"', 'name = "Pier in the river"'))
    (found,) = redundants("moment Pier in the river", beam=long) or ()
    assert (found.at, found.tag) == ("Pier in the river", "S1")


KINDS = 'must be "moment reaction", "moment" or "reaction", then the name of a support'
INTERIOR = "must be at an interior support without a release, for a moment"


@pytest.mark.parametrize(
    ("text", "needs"),
    [
        ("P", KINDS),
        ("shear P", KINDS),
        ("moment", KINDS),
        (" moment P", KINDS),
        ("", KINDS),
        ("moment Q", "must name a support; known are 'W', 'P', 'H', 'G', 'S', 'E'"),
        ("moment s", "must name a support; known are 'W', 'P', 'H', 'G', 'S', 'E'"),
        ("reaction h", "must name a support; known are 'W', 'P', 'H', 'G', 'S', 'E'"),
        ("reaction 4", "must name a support; known are 'W', 'P', 'H', 'G', 'S', 'E'"),
        ("moment W", INTERIOR),
        ("moment W right", INTERIOR),
        ("moment E", INTERIOR),
        ("moment H", INTERIOR),
        ("moment S", 'must end in "left" or "right": S holds rotation'),
        ("moment G", 'must end in "left" or "right": G holds rotation'),
        ("moment P left", 'must be without "left": the moment at P has one value'),
        ("reaction P right", 'must be without "right": a reaction has one value'),
        ("moment reaction S left", 'must be without "left": a moment reaction has one value'),
        ("reaction G", "must be at a support that holds vertically, for a reaction"),
        ("moment reaction P", "must be at a support that holds rotation, for a moment reaction"),
    ],
)  # fmt: skip
def test_refused_redundants(text: str, needs: str) -> None:
    said = text if text.strip() else f'"{text}"'
    assert faults(stated("moment P", text)) == [f"beam.redundants[1]: {said}, {needs}"]


def test_other_faults_of_redundants() -> None:
    assert faults(stated("moment P", "reaction E", "moment P")) == [
        "beam.redundants[2]: moment P, must differ from beam.redundants[0]"
    ]
    assert faults(changed(BEAM, ('["moment P"]', "[3]"))) == ["beam.redundants[0]: 3, must be text"]
    assert faults(changed(BEAM, ('["moment P"]', '"moment P"'))) == [
        "beam.redundants: moment P, must be a list"
    ]


def test_a_support_that_is_refused_makes_no_further_fault() -> None:
    for old, new in (('"roller"', '"rollr"'), ("at = 4,", "at = 40,"), ('name = "P", ', "")):
        (line,) = faults(changed(BEAM, (old, new)))
        assert line.startswith("beam.supports[1].")
