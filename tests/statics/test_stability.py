"""Stability and degree: what moves is named, and the rank decides, not the count."""

from __future__ import annotations

from typing import Any

import numpy as np
import pytest
from beams import make_beam
from making import make_calculation

from calcpack.errors import InputRefused
from calcpack.model.beam import Beam
from calcpack.solution import solve
from calcpack.statics.stability import Classification, classify
from calcpack.statics.system import cut_into_bodies


def classified(beam: Beam) -> Classification:
    return classify(beam, cut_into_bodies(beam))


def balance(beam: Beam) -> int:
    """Unknowns less equations."""
    system = cut_into_bodies(beam)
    return len(system.unknowns) - sum(body.equations for body in system.bodies)


# Supports, releases, unknowns less equations, the motions in words.
UNSTABLE: dict[str, tuple[list[Any], list[Any], int, list[str]]] = {
    "one pin": ([(3, "pin")], [], -1, ["the part left end-right end can turn about A (rotation)"]),
    "guided alone": (
        [(0, "guided")],
        [],
        -1,
        ["the part A-right end can move (vertical)"],
    ),
    "two guided": (
        [(0, "guided"), (10, "guided")],
        [],
        0,
        ["the part A-B can move (vertical)"],
    ),
    "hinge in a simple span": (
        [(0, "pin"), (10, "roller")],
        [(5, "hinge")],
        -1,
        ["the part A-r1 can turn about A (rotation)", "the part r1-B can turn about B (rotation)"],
    ),
    "fixed left, loose right of a hinge": (
        [(0, "fixed")],
        [(6, "hinge")],
        -1,
        ["the part r1-right end can turn about r1 (rotation)"],
    ),
    "fixed with a slide": (
        [(0, "fixed")],
        [(6, "slide")],
        -1,
        ["the part r1-right end can move (vertical)"],
    ),
    "three hinges and enough supports elsewhere": (
        [(0, "fixed"), (2, "roller"), (10, "pin")],
        [(4, "hinge"), (7, "hinge")],
        0,
        [
            "the part r1-r2 can turn about r1 (rotation)",
            "the part r2-C can turn about C (rotation)",
        ],
    ),
    "balanced: a hinge span between two walls that move": (
        [(0, "fixed"), (1, "pin"), (9, "guided")],
        [(4, "slide"), (6, "slide")],
        0,
        ["the part r1-r2 can move (vertical)", "the part r2-right end can move (vertical)"],
    ),
    "too many supports on one side": (
        [(0, "fixed"), (1, "pin"), (2, "pin")],
        [(5, "hinge")],
        1,
        ["the part r1-right end can turn about r1 (rotation)"],
    ),
    "slide in a simple span": (
        [(0, "pin"), (10, "roller")],
        [(5, "slide")],
        -1,
        ["the part A-r1 can turn about A (rotation)", "the part r1-B can turn about B (rotation)"],
    ),
}


@pytest.mark.parametrize("name", UNSTABLE)
def test_what_moves_is_named(name: str) -> None:
    supports, releases, balanced, words = UNSTABLE[name]
    beam = make_beam(10, supports, releases)
    assert balance(beam) == balanced
    with pytest.raises(InputRefused) as refused:
        classified(beam)
    (problem,) = refused.value.problems
    assert problem.path == "beam"
    assert problem.said.startswith("unstable: ")
    for phrase in words:
        assert phrase in problem.said
    given = [f"{one.name} ({one.kind})" for one in beam.supports]
    given += [f"{one.name} ({one.kind})" for one in beam.releases]
    assert all(one in problem.said for one in given)


def test_parts_that_stay_are_not_named() -> None:
    """The left part is held; only what lies right of the hinge is said to move."""
    beam = make_beam(10, [(0, "fixed"), (1, "pin"), (2, "pin")], [(5, "hinge")])
    with pytest.raises(InputRefused, match="unstable") as refused:
        classified(beam)
    assert "A-r1" not in refused.value.problems[0].said


@pytest.mark.parametrize("unstable", [name for name, case in UNSTABLE.items() if case[2] >= 0])
def test_solve_refuses_a_balanced_mechanism(unstable: str) -> None:
    supports, releases, _, _ = UNSTABLE[unstable]
    with pytest.raises(InputRefused, match=r"vertical|rotation"):
        solve(make_calculation(make_beam(10, supports, releases), []))


DEGREES: dict[str, tuple[list[Any], list[Any], int]] = {
    "propped cantilever": ([(0, "fixed"), (10, "roller")], [], 1),
    "both ends fixed": ([(0, "fixed"), (10, "fixed")], [], 2),
    "fixed and guided": ([(0, "fixed"), (10, "guided")], [], 1),
    "two spans": ([(0, "pin"), (4, "roller"), (10, "roller")], [], 1),
    "five spans": ([(x, "pin") for x in (0, 2, 4, 6, 8, 10)], [], 4),
    "five spans, two hinges": (
        [(x, "pin") for x in (0, 2, 4, 6, 8, 10)],
        [(3, "hinge"), (7, "hinge")],
        2,
    ),
    "three spans, a hinge over a support": (
        [(x, "pin") for x in (0, 3, 6, 10)],
        [(3, "hinge")],
        1,
    ),
    "fixed ends and a slide": ([(0, "fixed"), (10, "fixed")], [(5, "slide")], 1),
}


@pytest.mark.parametrize("name", DEGREES)
def test_degree(name: str) -> None:
    supports, releases, degree = DEGREES[name]
    beam = make_beam(10, supports, releases)
    found = classified(beam)
    assert (found.kind, found.degree) == ("indeterminate", degree)
    assert f": {degree} unknown{'s' * (degree > 1)} more than equations" in found.reason
    assert len(solve(make_calculation(beam, [])).system.redundants) == degree


def test_determinate_in_words() -> None:
    beam = make_beam(10, [(0, "pin"), (5, "roller"), (10, "roller")], [(5, "hinge")])
    found = classified(beam)
    assert (found.kind, found.degree) == ("determinate", 0)
    assert found.reason.startswith("5 unknowns (R_A, V_B,left, R_B, V_B,right, R_C)")
    assert "two for each of 2 parts, one for each of 1 pin over a support" in found.reason


def test_one_part_in_words() -> None:
    found = classified(make_beam(10, [(0, "pin"), (10, "roller")]))
    assert "2 independent equations (two for each of 1 part), by exact rank" in found.reason


def test_rank_of_the_equations() -> None:
    """Numpy's rank of the equilibrium matrix, set up body by body, gives the same degree."""
    for supports, releases, degree in DEGREES.values():
        system = cut_into_bodies(make_beam(10, supports, releases))
        rows = []
        for body in system.bodies:
            force, moment = np.zeros((2, len(system.unknowns)))
            for action in body.actions:
                column = system.unknowns.index(action.unknown)
                force[column] += action.up
                moment[column] += action.clockwise - action.up * float(action.station - body.start)
            rows += [force, moment]
        assert len(system.unknowns) - np.linalg.matrix_rank(np.array(rows)) == degree
