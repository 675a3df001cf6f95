"""The plan of solution: which free body, which equation, which unknown, settled before any load."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from functools import cached_property

from calcpack.errors import ProgramFault
from calcpack.model.beam import Beam
from calcpack.model.request import Effect
from calcpack.statics.equation import Equation, sum_of_forces, sum_of_moments
from calcpack.statics.system import Action, Body, System, place_name, symbol_of


@dataclass(frozen=True)
class PlanStep:
    """One equation and the unknown it finds.

    ``bodies`` are the names of the pieces that form the free body, ``uses`` the unknowns found
    before that the equation holds, ``reason`` why this cut, in plain words.
    """

    unknown: Effect
    bodies: tuple[str, ...]
    equation: Equation
    uses: tuple[Effect, ...]
    reason: str


@dataclass(frozen=True)
class _Run:
    """A run of neighbouring bodies as one free body."""

    bodies: tuple[Body, ...]

    @cached_property
    def actions(self) -> tuple[Action, ...]:
        """What acts on it: what its bodies pass to each other inside has dropped out."""
        return tuple(
            action
            for body in self.bodies
            for action in body.actions
            if action.edge == 0
            or (action.edge < 0 and body is self.bodies[0])
            or (action.edge > 0 and body is self.bodies[-1])
        )

    @property
    def name(self) -> str:
        if len(self.bodies) == 1:
            return self.bodies[0].name
        return f"{self.bodies[0].start_name}-{self.bodies[-1].end_name}"


def plan_of_solution(beam: Beam, system: System) -> tuple[PlanStep, ...]:
    """Settle an order in which each equation holds a single unknown not yet found.

    Redundants count as found. Free bodies are runs of neighbouring bodies. Of the equations with a
    single unknown not yet found, one on the free body with the fewest forces is taken; there the
    sum of forces goes before moments, and moments with fewer terms go first. In a determinate
    chain some body always offers such an equation: n bodies carry n + 1 unknowns of supports and
    n - 1 of releases, so one body has no more unknowns than equations, and what remains are
    determinate chains again.

    Raises:
        ProgramFault: no such equation was found on a determinate beam.
    """
    runs = _runs_by_forces(system)
    found = set(system.redundants)
    steps: list[PlanStep] = []
    while len(found) < len(system.unknowns):
        runs = [run for run in runs if any(one.unknown not in found for one in run.actions)]
        step = next(_steps(beam, runs, found), None)
        if step is None:
            raise ProgramFault("the plan of solution found no equation with a single unknown")
        steps.append(step)
        found.add(step.unknown)
    return tuple(steps)


def _runs_by_forces(system: System) -> list[_Run]:
    """Runs that may be of use, fewest forces first, then fewest bodies, then from the left.

    A run of several bodies is of use only while it carries no more forces than the busiest body
    alone, since single bodies suffice to find everything.
    """
    most = max(len(body.actions) for body in system.bodies)
    runs = []
    for first, body in enumerate(system.bodies):
        run = _Run((body,))
        runs.append(run)
        for other in system.bodies[first + 1 :]:
            run = _Run((*run.bodies, other))
            if sum(one.edge == 0 for one in run.actions) > most:
                break
            runs.append(run)
    return sorted(runs, key=lambda run: (len(run.actions), len(run.bodies)))


def _steps(beam: Beam, runs: Iterable[_Run], found: set[Effect]) -> Iterator[PlanStep]:
    for run in runs:
        for equation in sorted(_equations(run), key=lambda one: (one.kind, len(one.terms))):
            wanted = [term.quantity for term in equation.terms if term.quantity not in found]
            if len(wanted) == 1:
                yield PlanStep(
                    wanted[0],
                    tuple(body.name for body in run.bodies),
                    equation,
                    tuple(t.quantity for t in equation.terms if t.quantity != wanted[0]),
                    _reason(beam, run, equation, wanted[0], found),
                )


def _equations(run: _Run) -> Iterator[Equation]:
    start, end = run.bodies[0].start, run.bodies[-1].end
    if any(action.up for action in run.actions):
        yield sum_of_forces(start, end, run.name, run.actions)
    if start < end or any(action.clockwise for action in run.actions):
        for about in sorted({start, end, *(one.station for one in run.actions)}):
            yield sum_of_moments(start, end, run.name, run.actions, about)


def equation_in_words(beam: Beam, equation: Equation) -> str:
    """``sum of forces``, or ``moments about B``."""
    if equation.about is None:
        return "sum of forces"
    return f"moments about {place_name(beam, equation.about)}"


def _reason(beam: Beam, run: _Run, equation: Equation, unknown: Effect, found: set[Effect]) -> str:
    cuts = dict.fromkeys(place_name(beam, one.station) for one in run.actions if one.edge)
    freed = f"Cut at {' and '.join(cuts)}" if cuts else "Take the beam whole"
    still_open = [one.unknown for one in run.actions if one.unknown not in found]
    known = [one.unknown for one in run.actions if one.unknown in found]
    beside = f" beside {_listed(known)}, known by now" if known else ""
    held = {term.quantity for term in equation.terms}
    dropped = [one for one in still_open if one not in held]
    drops = f"hold no {_listed(dropped)} and " if dropped else ""
    what = equation_in_words(beam, equation).replace("sum of forces", "its vertical forces")
    return (
        f"{freed}: {run.name} carries {_listed(still_open)}, not yet found{beside}; "
        f"{what} {drops}give {symbol_of(unknown)}."
    )


def _listed(quantities: list[Effect]) -> str:
    return ", ".join(str(symbol_of(one)) for one in quantities)
