"""How long the search for governing placements takes, beside a plain sweep in the same run.

Run apart: pytest tests/benchmarks/test_search.py --benchmark-only -s. The first test prints its
own table: both times, their quotient, the worst error of the sweep and of the search.
"""

from __future__ import annotations

import itertools
import time
import tracemalloc
from fractions import Fraction
from functools import cache
from random import Random
from typing import Literal

import numpy as np
import pytest
from beams import make_beam
from loads import make_load
from making import lines_of, make_effect
from numpy.typing import NDArray
from pytest_benchmark.fixture import BenchmarkFixture

from calcpack.exact.piecewise import Piecewise
from calcpack.model.loads import MovingLoad
from calcpack.model.request import EffectKind
from calcpack.moving.critical import governing, greatest
from calcpack.moving.kernels import LineSet
from calcpack.moving.target import Target

Floats = NDArray[np.float64]
SENSES: tuple[Literal[1, -1], ...] = (1, -1)
SPANS = (90, 117, 134, 108, 83)
SAMPLES = 4001
"""Ordinates of a line that the sweep interpolates between, beside those about breakpoints."""
ASIDE = 1e-9


@cache
def girder(sections: int, spans: int) -> list[Target]:
    """Moment and shear at so many sections of a continuous girder, its stiffness in steps."""
    lengths = [SPANS[span % len(SPANS)] for span in range(spans)]
    stops = [sum(lengths[:count]) for count in range(spans + 1)]
    length = stops[-1]
    steps = [
        (Fraction(length * part, 3 * spans), 1000 + 350 * (part % 3)) for part in range(3 * spans)
    ]
    places = {Fraction(length * part, sections + 1) for part in range(1, sections + 1)} - {
        *map(Fraction, stops)
    }
    beam = make_beam(
        length, [(at, "roller") for at in stops], sections=sorted(places), stiffness=steps
    )
    kinds: tuple[EffectKind, ...] = ("moment", "shear")
    effects = [make_effect(beam, kind, one.name) for one in beam.sections for kind in kinds]
    return [Target(line) for line in lines_of(beam, effects)]


def trains(count: int) -> list[MovingLoad]:
    """So many trains of 2 to 13 axles."""
    rng = Random(7)
    loads = []
    for number in range(count):
        axles = 2 + number % 12
        spacings = [Fraction(rng.randint(40, 200), 10) for _ in range(axles)]
        loads.append(make_load(*((Fraction(rng.randint(80, 240), 10), one) for one in spacings)))
    return loads


def sampled(line: Piecewise) -> tuple[Floats, Floats]:
    """Places, close on both sides of every breakpoint, and the line's ordinates there."""
    starts = np.array(line.breaks, dtype=float)
    even = np.linspace(starts[0], starts[-1], SAMPLES)
    places = np.unique([*even, *(starts[1:] - ASIDE), *(starts[:-1] + ASIDE)])
    index = np.clip(np.searchsorted(starts, places, side="right") - 1, 0, len(line.pieces) - 1)
    pieces = np.zeros((len(line.pieces), 4))
    for row, piece in zip(pieces, line.pieces, strict=True):
        row[: len(piece)] = [float(value) for value in piece]
    t = places - starts[index]
    c = pieces[index].T
    return places, np.asarray(c[0] + t * (c[1] + t * (c[2] + t * c[3])))


def plain_sweep(targets: list[Target], loads: list[MovingLoad], steps: int) -> Floats:
    """The greatest and the least of every line under every load, stepped in NumPy."""
    length = float(targets[0].line.breaks[-1])
    lines = [sampled(target.line) for target in targets]
    found = np.zeros((2, len(loads), len(targets)))
    for row, load in enumerate(loads):
        axles = load.cases[0].axles
        behind = np.cumsum([0.0, *(float(a.gap.least) for a in axles if a.gap is not None)])
        weights = [float(axle.weight.value) for axle in axles]
        for sign in (-1, 1):
            leads = np.linspace(0, length + behind[-1], steps)
            leads = leads if sign < 0 else leads - behind[-1]
            for column, (places, line) in enumerate(lines):
                effect = np.zeros(steps)
                for weight, far in zip(weights, behind, strict=True):
                    effect += weight * np.interp(leads + sign * far, places, line, left=0, right=0)
                found[0, row, column] = max(found[0, row, column], effect.max())
                found[1, row, column] = min(found[1, row, column], effect.min())
    return found


def searched(targets: list[Target], loads: list[MovingLoad]) -> Floats:
    lines = LineSet([target.line for target in targets])
    return np.array([[greatest(targets, load, sense, lines) for load in loads] for sense in SENSES])


def test_w1(benchmark: BenchmarkFixture) -> None:
    """40 trains of 2 to 13 axles, both headings and senses, on the lines of moment and shear at
    101 sections; the sweep's steps are doubled until its worst error is 0.1 %."""
    targets, loads = girder(101, 5), trains(40)
    found = benchmark.pedantic(searched, args=(targets, loads), rounds=3)
    assert benchmark.stats is not None
    ours = benchmark.stats.stats.min
    steps = 4000
    while True:
        start = time.perf_counter()
        swept = plain_sweep(targets, loads, steps)
        took = time.perf_counter() - start
        worst = float((np.abs(swept - found) / np.abs(found).clip(1e-2)).max())
        print(
            f"\nsweep of {steps} steps: {took:.1f} s, worst error {worst:.2%}; search {ours:.2f} s"
        )
        if worst <= 1e-3 or steps > 2**18:
            break
        steps *= 2
    tracemalloc.start()
    searched(targets, loads)
    peak = tracemalloc.get_traced_memory()[1] / 2**20
    tracemalloc.stop()
    rng = Random(3)
    error = 0.0
    for row in rng.sample(range(len(loads)), 4):
        some = rng.sample(range(len(targets)), 25)
        for sense in SENSES:
            values = found[0 if sense > 0 else 1, row]
            exact = governing([targets[one] for one in some], loads[row], sense, near=0)
            for one, best in zip(some, exact, strict=True):
                error = max(error, abs(float(best.value) - values[one]) / (1 + abs(values[one])))
    print(
        f"search: {took / ours:.0f} times faster; off the exact winners by {error:.0e}; "
        f"peak {peak:.0f} MiB"
    )
    assert error < 1e-9


@pytest.mark.parametrize("axles", [1, 2, 4, 8, 13])
def test_cost_against_axles(benchmark: BenchmarkFixture, axles: int) -> None:
    load = make_load(*((10 + n, Fraction(40 + 7 * n, 10)) for n in range(axles)))
    targets = girder(101, 5)
    lines = LineSet([target.line for target in targets])
    greatest(targets, load, 1, lines)
    benchmark(greatest, targets, load, 1, lines)


@pytest.mark.parametrize(("spans", "sections"), [*itertools.product([1, 2, 5, 10], [11, 101])])
def test_cost_against_spans_and_sections(
    benchmark: BenchmarkFixture, spans: int, sections: int
) -> None:
    targets = girder(sections, spans)
    benchmark.pedantic(searched, args=(targets, trains(12)[-1:]), rounds=3)


def test_gaps_in_a_range(benchmark: BenchmarkFixture) -> None:
    """Eight axles, all seven gaps in a range, over 20 lines."""
    load = make_load(*((10 + n, (4 + n % 3, 9)) for n in range(8)))
    targets = girder(101, 5)[:20]
    benchmark.pedantic(greatest, args=(targets, load, 1), rounds=1)
