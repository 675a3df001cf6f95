"""How long the exact force method takes; run apart: pytest tests/benchmarks --benchmark-only."""

from __future__ import annotations

import itertools
from fractions import Fraction

import pytest
from beams import make_beam
from making import lines_of, make_effect
from pytest_benchmark.fixture import BenchmarkFixture

from calcpack.model.beam import Beam
from calcpack.model.request import Effect


def girder(spans: int, segments: int, springs: int) -> tuple[Beam, list[Effect]]:
    """A continuous girder, its stiffness in equal steps, its first inner supports on springs."""
    lengths = [Fraction(20 + 3 * (span % 4)) for span in range(spans)]
    stops = [sum(lengths[:count], Fraction(0)) for count in range(spans + 1)]
    held: list[tuple[object, ...]] = [
        (at, "spring", None, 40000, 0) if 1 <= index <= springs else (at, "roller")
        for index, at in enumerate(stops)
    ]
    tenths = [
        start + (end - start) * tenth / 10
        for start, end in itertools.pairwise(stops)
        for tenth in range(1, 10)
    ]
    steps = [(stops[-1] * part / segments, 20000 + 4000 * (part % 3)) for part in range(segments)]
    beam = make_beam(stops[-1], held, sections=tenths, stiffness=steps)  # type: ignore[arg-type]
    effects = [make_effect(beam, "reaction", one.name) for one in beam.supports]
    for section in beam.sections:
        effects += [
            make_effect(beam, "moment", section.name),
            make_effect(beam, "shear", section.name),
        ]
    return beam, effects


def test_ten_spans(benchmark: BenchmarkFixture) -> None:
    beam, effects = girder(10, 40, 3)
    lines = benchmark.pedantic(lines_of, args=(beam, effects), rounds=3)
    assert len(lines) == len(effects) == 191


@pytest.mark.parametrize("spans", [2, 4, 8, 12, 16, 20])
def test_cost_against_spans(benchmark: BenchmarkFixture, spans: int) -> None:
    beam, effects = girder(spans, 4 * spans, 0)
    benchmark.pedantic(lines_of, args=(beam, effects), rounds=1)
