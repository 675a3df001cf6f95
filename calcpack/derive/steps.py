"""A step states one formula and evaluates it; steps stand in groups."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction

from calcpack.derive.kinds import QuantityKind
from calcpack.elastic.released import State
from calcpack.exact.formula import PLAIN, Formula, Leaf, Symbol, Variable, leaves, symbols, write
from calcpack.exact.numbers import printed
from calcpack.exact.piecewise import Side
from calcpack.model.loads import MovingLoad, Permanent
from calcpack.model.request import Effect
from calcpack.moving.governing import Governing
from calcpack.statics.influence import Cut
from calcpack.statics.plan import PlanStep

STEP = "step:"
"""What the origin of a leaf starts with where its digits are another step's result."""


@dataclass(frozen=True)
class Step:
    """One equation of the package.

    Attributes:
        key: a name that stays when steps are inserted elsewhere.
        id: the number printed on the sheet.
        left: what stands left of the equals sign.
        formula: what stands right of it.
        value: the exact result; None for a statement in symbols only.
        kind: what the result is, hence its unit.
        column: results of one column are printed with the same decimals; by default its own.
        balance: True for an equation of equilibrium, which ends in "= 0".
        condition: for which place of the load it holds, in words.
    """

    key: str
    id: str
    left: Symbol
    formula: Formula
    value: Fraction | None
    kind: QuantityKind
    column: str = ""
    balance: bool = False
    condition: str = ""

    @property
    def symbols(self) -> str:
        return f"{self.left} = {write(self.formula, PLAIN, symbols)}" + " = 0" * self.balance

    @property
    def origins(self) -> tuple[str, ...]:
        """Where the digits of its leaves come from, each once, in order."""
        found = dict.fromkeys(leaf.origin for leaf in leaves(self.formula) if leaf.origin)
        return tuple(found)

    @property
    def inputs(self) -> tuple[str, ...]:
        return tuple(origin for origin in self.origins if not origin.startswith(STEP))

    @property
    def uses(self) -> tuple[str, ...]:
        return tuple(o.removeprefix(STEP) for o in self.origins if o.startswith(STEP))


@dataclass(frozen=True)
class Row:
    """An ordinate of one line: the load at a key station, and the step that finds the value.

    ``side`` says on which side of the station the load stands where that matters, else None;
    ``loaded`` whether it then stands on the free body of the equation.
    """

    place: str
    at: Fraction
    side: Side | None
    loaded: bool
    step: Step


@dataclass(frozen=True)
class StationGroup:
    """Stations that are sums or parts of what was typed."""

    number: int
    steps: tuple[Step, ...]


@dataclass(frozen=True)
class LineGroup:
    """One influence line: the equation that gives it, and its value at every key station.

    ``source`` is the plan's step or the section's cut. ``balance`` is the equation of equilibrium,
    ``centre`` the coordinate about which its moments are taken, ``forms`` its solved forms by
    region of the load.
    """

    number: int
    quantity: Effect
    source: PlanStep | Cut
    balance: Step
    centre: Symbol | None
    forms: tuple[Step, ...]
    rows: tuple[Row, ...]

    @property
    def steps(self) -> tuple[Step, ...]:
        return (self.balance, *self.forms, *(row.step for row in self.rows))


@dataclass(frozen=True)
class DeflectionGroup:
    """A line of deflection or rotation: its curve in symbols, its value at every key station."""

    number: int
    quantity: Effect
    statement: Step
    rows: tuple[Row, ...]

    @property
    def steps(self) -> tuple[Step, ...]:
        return (self.statement, *(row.step for row in self.rows))


@dataclass(frozen=True)
class SettlementGroup:
    """What supports that gave way cause: ``values`` of every effect of force or moment."""

    number: int
    case: Permanent
    steps: tuple[Step, ...]
    values: Mapping[Effect, Fraction]


@dataclass(frozen=True)
class AreaGroup:
    """Zeros and areas of an effect's line; ``positive`` and ``negative`` are the two sums."""

    number: int
    effect: Effect
    parts: tuple[Step, ...]
    positive: Step
    negative: Step

    @property
    def steps(self) -> tuple[Step, ...]:
        return (*self.parts, self.positive, self.negative)


@dataclass(frozen=True)
class LoadGroup:
    """A moving load: ``steps`` find its numbers that go by a length, by path in ``found``."""

    number: int
    load: MovingLoad
    steps: tuple[Step, ...]
    found: Mapping[str, Step]


@dataclass(frozen=True)
class PlacementGroup:
    """The governing value of one effect in one sense under one load, axle by axle."""

    number: int
    load: MovingLoad
    effect: Effect
    governing: Governing
    steps: tuple[Step, ...]


@dataclass(frozen=True)
class StepGroup:
    """Steps under a title, led in by words and statements in symbols.

    ``state`` is the state of the released beam that they find, if they do; ``mark`` names it.
    """

    number: int
    title: str
    words: str
    statements: tuple[Step, ...]
    found: tuple[Step, ...]
    state: State | None = None
    mark: str = ""

    @property
    def steps(self) -> tuple[Step, ...]:
        return (*self.statements, *self.found)


Group = (
    StationGroup
    | StepGroup
    | DeflectionGroup
    | SettlementGroup
    | LineGroup
    | AreaGroup
    | LoadGroup
    | PlacementGroup
)


@dataclass(frozen=True)
class Derivation:
    """Every step of the package in order, and the decimals with which each number is printed.

    ``decimals`` goes by origin (a path of the input, or ``step:`` and a key); None where the
    number is printed as a fraction.
    """

    groups: tuple[Group, ...]
    decimals: Mapping[str, int | None]

    @property
    def steps(self) -> tuple[Step, ...]:
        return tuple(step for group in self.groups for step in group.steps)

    def numbers(self, step: Step) -> str:
        """The right side with printed digits put in, in plain arithmetic."""
        return write(step.formula, PLAIN, self.digits)

    def result(self, step: Step) -> str:
        """The printed result."""
        assert step.value is not None
        return number_text(step.value, self.decimals[STEP + step.key])

    def digits(self, leaf: Leaf | Variable) -> str:
        """A leaf as it is printed among numbers; a fraction in brackets."""
        assert isinstance(leaf, Leaf)
        if not leaf.origin:
            return symbols(Leaf(leaf.value))
        text = number_text(leaf.value, self.decimals[leaf.origin])
        return f"({text})" if "/" in text else text


def number_text(value: Fraction, decimals: int | None) -> str:
    """A decimal, or the fraction itself where ``decimals`` is None."""
    return str(value) if decimals is None else printed(value, decimals)
