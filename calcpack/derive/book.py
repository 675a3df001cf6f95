"""The book in which the steps are written one after the other."""

from __future__ import annotations

from fractions import Fraction

from calcpack.derive.closing import closing_decimals
from calcpack.derive.kinds import DECIMALS, INPUT_DECIMALS, QuantityKind
from calcpack.derive.steps import STEP, Derivation, Group, StationGroup, Step
from calcpack.errors import ProgramFault
from calcpack.exact.formula import Formula, Leaf, Symbol, Variable, constant, evaluate
from calcpack.exact.numbers import decimals_to_end
from calcpack.exact.piecewise import Side
from calcpack.model.beam import Beyond, Datum, Source, Station, Tenth, Typed
from calcpack.model.request import Calculation, Effect
from calcpack.statics.system import place_name

WHOLE_WITHIN = 6
"""An input that ends within so many decimals is printed whole."""

LOAD_PLACE = Symbol("x")


class Book:
    """Collects steps, numbers them, and checks each against the engine's own value.

    The book is filled once, front to back, and closed into a frozen ``Derivation``.
    """

    def __init__(self, calculation: Calculation) -> None:
        self.calculation = calculation
        self.beam = calculation.beam
        self.ordinates: dict[tuple[Effect, Fraction, Side], Step] = {}
        self._start: dict[str, int | None] = {}
        self._groups: list[Group] = []
        self._steps: list[Step] = []
        self._number = 0
        self._in_group = 0
        self._stations: dict[Fraction, Leaf] = {}
        self._derive_stations()

    def open_group(self) -> int:
        """Begin a group; returns its number."""
        self._number += 1
        self._in_group = 0
        return self._number

    def close_group(self, group: Group) -> None:
        self._groups.append(group)

    def close(self) -> Derivation:
        """Settle the decimals of every printed number."""
        return Derivation(tuple(self._groups), closing_decimals(self._steps, self._start))

    def find(
        self,
        key: str,
        left: Symbol,
        formula: Formula,
        kind: QuantityKind,
        expected: Fraction,
        column: str = "",
    ) -> Step:
        """Write a step with numbers; its formula must give what the engine found, exactly.

        Raises:
            ProgramFault: the formula gives another value than ``expected``.
        """
        value = evaluate(formula)
        if value != expected:
            raise ProgramFault(f"step {key} gives {value}, the engine found {expected}")
        step = Step(key, self._next_id(), left, formula, value, kind, column or key)
        self._start[STEP + key] = DECIMALS[kind]
        self._steps.append(step)
        return step

    def state_value(
        self, key: str, left: Symbol, formula: Formula, kind: QuantityKind, column: str
    ) -> Step:
        """Write a step whose value the engine has no other name for."""
        return self.find(key, left, formula, kind, evaluate(formula), column)

    def state(
        self,
        key: str,
        left: Symbol,
        formula: Formula,
        kind: QuantityKind,
        *,
        balance: bool = False,
        condition: str = "",
    ) -> Step:
        """Write a step in symbols only."""
        return Step(key, self._next_id(), left, formula, None, kind, "", balance, condition)

    def given(self, path: str, symbol: Symbol, kind: QuantityKind) -> Leaf:
        """An input of the calculation as a leaf."""
        value = self.calculation.inputs[path]
        whole = decimals_to_end(value, WHOLE_WITHIN)
        self._start[path] = max(INPUT_DECIMALS[kind], whole or 0)
        return Leaf(value, symbol, path)

    def cite(self, step: Step, symbol: Symbol | None = None) -> Leaf:
        """The result of an earlier step as a leaf."""
        assert step.value is not None
        return Leaf(step.value, symbol or step.left, STEP + step.key)

    def place(self, at: Fraction, symbol: Symbol | None = None) -> Leaf:
        """A key station's coordinate; ``symbol`` where it stands for something else, such as x."""
        leaf = self._stations[at]
        return leaf if symbol is None else Leaf(leaf.value, symbol, leaf.origin)

    def ordinate(self, effect: Effect, at: Fraction, side: Side) -> Leaf:
        """The ordinate of a line at a key station, one side of it, as a leaf eta."""
        place = self.place(at).symbol
        assert place is not None
        symbol = Symbol("η", place.index or place.letter)
        return self.cite(self.ordinates[effect, at, side], symbol)

    def tag_at(self, at: Fraction) -> str:
        """What stands in symbols for a key station."""
        return self.beam.tags.get(self.beam.station(at).name) or place_name(self.beam, at)

    def _next_id(self) -> str:
        self._in_group += 1
        return f"{self._number}.{self._in_group}"

    def _derive_stations(self) -> None:
        """Stations that were typed are inputs; those laid end to end or by tenths are steps."""
        derived = [one for one in self.beam.stations if isinstance(one.source, Beyond | Tenth)]
        number = self.open_group() if derived else 0
        for station in self.beam.stations:
            source = station.source
            if isinstance(source, Datum):
                self._stations[station.at] = Leaf(Fraction(0), Symbol("x", self._tag(station, "0")))
            elif isinstance(source, Typed):
                symbol = Symbol("x", self._tag(station, str(station.at)))
                if source.path == "beam.length":
                    symbol = Symbol("L")
                self._stations[station.at] = self.given(source.path, symbol, "length")
        # A tenth lies between supports, so the laid-out stations come first.
        derived.sort(key=lambda one: (isinstance(one.source, Tenth), one.at))
        steps = [self._station_step(one, one.source) for one in derived]
        if steps:
            self.close_group(StationGroup(number, tuple(steps)))

    def _tag(self, station: Station, nameless: str) -> str:
        return self.beam.tags[station.name] if station.name else nameless

    def _station_step(self, station: Station, source: Source) -> Step:
        if isinstance(source, Beyond):
            index = source.path.rstrip("]").split("[")[-1]
            length = (
                Symbol("l", str(int(index) + 1)) if index.isdigit() else Symbol("a", index[14:])
            )
            formula: Formula = self.given(source.path, length, "length")
            if source.previous:
                formula = self.place(self.beam.station(source.previous).at) + formula
        else:
            assert isinstance(source, Tenth)
            start = self.place(self.beam.station(source.start).at)
            end = self.place(self.beam.station(source.end).at)
            formula = start + constant(source.tenths) * (end - start) / constant(10)
        symbol = Symbol("x", self._tag(station, "end"))
        step = self.find(
            f"station/{station.name or 'end'}", symbol, formula, "length", station.at, "station"
        )
        self._stations[station.at] = self.cite(step)
        return step


def variable_place() -> Variable:
    """The load's place as a variable, for statements in symbols."""
    return Variable(LOAD_PLACE)


def unit_load() -> Leaf:
    """The unit load, written P among symbols and 1 among numbers."""
    return Leaf(Fraction(1), Symbol("P"))
