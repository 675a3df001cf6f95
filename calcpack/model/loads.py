"""Loads that travel along the beam, and what acts always."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from functools import cached_property
from itertools import pairwise
from typing import Literal

Heading = Literal["right", "left"]
Relieving = Literal["count", "neglect"]
Region = Literal["everywhere", "hogging", "interior"]
Part = Literal["axles", "trailing", "uniform"]


@dataclass(frozen=True)
class Rule:
    """A number that depends on a length: a sum of terms, kept within bounds.

    value = constant + per_length L + per_square L² + over / (L + beside), not below ``least`` and
    not above ``most``; a term or bound that is None is not there, ``beside`` is then 0.

    Attributes:
        length: L, as the engineer states it, in the unit of the rule.
        over: what is divided by the length and ``beside`` together.

    >>> impact = Rule(Given(Fraction(75), ""), over=Given(Fraction(50), ""),
    ...               beside=Given(Fraction(125), ""), most=Given(Fraction(3, 10), ""))
    >>> impact.value
    Fraction(1, 4)
    """

    length: Given
    constant: Given | None = None
    per_length: Given | None = None
    per_square: Given | None = None
    over: Given | None = None
    beside: Given | None = None
    least: Given | None = None
    most: Given | None = None

    @property
    def value(self) -> Fraction:
        """What the rule gives for its length, exactly; ``most`` prevails over ``least``."""
        length, value = self.length.value, Fraction(0)
        for power, term in enumerate((self.constant, self.per_length, self.per_square)):
            value += term.value * length**power if term else 0
        if self.over:
            value += self.over.value / (length + (self.beside.value if self.beside else 0))
        if self.least:
            value = max(value, self.least.value)
        return min(value, self.most.value) if self.most else value


@dataclass(frozen=True)
class Given:
    """A number that was stated, and the path where it stands, by which a step cites it.

    Where a standard gives it by a length, ``rule`` is how: the path is then that of the rule, and
    what was stated are the rule's own numbers.
    """

    value: Fraction
    path: str
    rule: Rule | None = None


@dataclass(frozen=True)
class Gap:
    """A distance to what is ahead: fixed, from a list, in a range or at least so much.

    Attributes:
        ties: the values at which it may be held, in order: the one, those of the list, or the ends
            of the range.
        free: whether it may also be anything between its ties, or beyond a single one.
    """

    ties: tuple[Given, ...]
    free: bool = False

    @property
    def fixed(self) -> bool:
        return len(self.ties) == 1 and not self.free

    @property
    def least(self) -> Fraction:
        return self.ties[0].value

    @property
    def greatest(self) -> Fraction | None:
        """None where there is no upper bound."""
        return None if self.free and len(self.ties) == 1 else self.ties[-1].value

    def allows(self, distance: Fraction) -> bool:
        """Whether the distance may be so.

        >>> Gap((Given(Fraction(2), "a"), Given(Fraction(5), "b"))).allows(Fraction(3))
        False
        """
        if any(tie.value == distance for tie in self.ties):
            return True
        greatest = self.greatest
        return self.free and self.least < distance and (greatest is None or distance < greatest)


@dataclass(frozen=True)
class Axle:
    """An axle: its weight (force, downward +) and its distance to the axle ahead.

    ``gap`` is None for the first axle of a train. An axle that does not act keeps its place only.
    """

    weight: Given
    gap: Gap | None
    acts: bool = True


@dataclass(frozen=True)
class Strip:
    """Uniform load that travels with a train.

    Attributes:
        start: from the last axle back to its start, or, where it is ``ahead``, from the first axle
            on to it.
        length: how far it reaches from there; None: without end.
        amount: force per unit length; where ``of_weight``, the whole force over its length.
        broken: whether it stands only on the parts that raise the effect.
    """

    start: Given
    length: Given | None
    amount: Given
    ahead: bool = False
    broken: bool = False
    of_weight: bool = False

    @property
    def intensity(self) -> Fraction:
        """Force per unit length."""
        if self.of_weight and self.length is not None:
            return self.amount.value / self.length.value
        return self.amount.value


@dataclass(frozen=True)
class Train:
    """Axles in order from the lead axle, and what travels ahead of them and behind.

    A train of strips alone has one axle of weight 0 that does not act: its foremost point.
    """

    name: str
    axles: tuple[Axle, ...]
    strips: tuple[Strip, ...] = ()


@dataclass(frozen=True)
class Applies:
    """Effects that a case is for: kinds (empty: all), one sense or both (0), and a region.

    "hogging": where a uniform load on all spans causes a negative moment; "interior": at a support
    that is neither the first nor the last.
    """

    kinds: tuple[str, ...] = ()
    sense: Literal[1, 0, -1] = 0
    region: Region = "everywhere"


@dataclass(frozen=True)
class Case:
    """One way in which a load may stand; of several the worst counts.

    Attributes:
        name: "" where the load has only this one.
        trains: in order from the foremost; ``gaps`` lie between them, from the last axle of one to
            the first axle of the next.
        uniform: force per unit length on whatever parts raise the effect; None for none.
        concentrated: forces that stand anywhere, each in another span.
        headings: the ways the trains may travel.
        relieving: whether axles that lessen the effect count, or are neglected one by one.
        allowances: dynamic allowance by part; what is absent has none.
        factors: what multiplies the whole case.
        applies: what the case is for, any of them; empty: everything.
    """

    name: str
    trains: tuple[Train, ...] = ()
    gaps: tuple[Gap, ...] = ()
    uniform: Given | None = None
    concentrated: tuple[Given, ...] = ()
    headings: tuple[Heading, ...] = ("right", "left")
    relieving: Relieving = "count"
    allowances: tuple[tuple[Part, Given], ...] = ()
    factors: tuple[Given, ...] = ()
    applies: tuple[Applies, ...] = ()

    @cached_property
    def axles(self) -> tuple[Axle, ...]:
        """All axles from the foremost; the first of each further train has its gap to the one
        before.
        """
        found: list[Axle] = []
        for number, train in enumerate(self.trains):
            first, *others = train.axles
            gap = self.gaps[number - 1] if number else None
            found += [Axle(first.weight, gap, first.acts), *others]
        return tuple(found)

    @property
    def numbers(self) -> tuple[Given, ...]:
        """Every number that was stated for the case itself, without what its rules hold."""
        strips = [strip for train in self.trains for strip in train.strips]
        gaps = [axle.gap for axle in self.axles if axle.gap is not None]
        found = (
            *(axle.weight for axle in self.axles),
            *(tie for gap in gaps for tie in gap.ties),
            *(one.start for one in strips),
            *(one.length for one in strips if one.length is not None),
            *(one.amount for one in strips),
            *((self.uniform,) if self.uniform is not None else ()),
            *self.concentrated,
            *(allowance for _, allowance in self.allowances),
            *self.factors,
        )
        return tuple(one for one in found if one.path)

    def allowance(self, part: Part) -> Given | None:
        return dict(self.allowances).get(part)

    @property
    def factor(self) -> Fraction:
        product = Fraction(1)
        for one in self.factors:
            product *= one.value
        return product

    def weighs(self, part: Part) -> Fraction:
        """What a static effect of a part is multiplied by: 1 + allowance, and the factors."""
        allowance = self.allowance(part)
        return (1 + (allowance.value if allowance else 0)) * self.factor


@dataclass(frozen=True)
class Share:
    """What this beam takes of a load: for kinds of effect (empty: all) within a stretch."""

    value: Given
    kinds: tuple[str, ...] = ()
    start: Fraction | None = None
    end: Fraction | None = None
    source: str = ""

    def holds(self, kind: str, at: Fraction) -> bool:
        """Whether it is for an effect of that kind at that station, ends included."""
        return (
            (not self.kinds or kind in self.kinds)
            and (self.start is None or self.start <= at)
            and (self.end is None or at <= self.end)
        )


@dataclass(frozen=True)
class Standard:
    """Where a published model is defined.

    Attributes:
        name: that of the model, as calc.toml names it.
        title, edition, clause: of the standard.
        seen: "page" or "memory": whence its numbers were taken.
        per: what one of it loads, such as "lane" or "track".
        compared: what the preparer says of its comparison with the standard; "" for nothing.
        notes: rules of the standard that the program leaves to the engineer.
    """

    name: str
    title: str
    edition: str
    clause: str
    seen: Literal["page", "memory"]
    per: str
    compared: str = ""
    notes: tuple[str, ...] = ()

    @property
    def settled(self) -> bool:
        return self.seen == "page" or bool(self.compared)


@dataclass(frozen=True)
class MovingLoad:
    """A load that travels: the worst of its cases counts.

    Attributes:
        cases: at least one.
        shares: distribution; the first that holds for an effect counts.
        path: where it stands in calc.toml, such as ``moving[0]``.
        standard: of a published model; None for a load of the engineer's own.
        hogging: the stretches that the engineer states for a case's region "hogging"; None: found
            by the program.
    """

    name: str
    cases: tuple[Case, ...]
    shares: tuple[Share, ...]
    path: str
    standard: Standard | None = None
    hogging: tuple[tuple[Fraction, Fraction], ...] | None = None

    def share(self, kind: str, at: Fraction) -> Share | None:
        """The distribution for an effect; None where none is stated for it."""
        return next((one for one in self.shares if one.holds(kind, at)), None)

    def shares_along(
        self, kind: str, start: Fraction, end: Fraction
    ) -> tuple[tuple[Fraction, Fraction, Share | None], ...]:
        """The stretches (start, end, distribution) inside which one distribution holds throughout.

        >>> half = Share(Given(Fraction(1, 2), "distribution"), start=Fraction(4))
        >>> load = MovingLoad("Cart", (), (half,), "moving[0]")
        >>> before, beyond = load.shares_along("moment", Fraction(0), Fraction(9))
        >>> before == (0, 4, None), beyond == (4, 9, half)
        (True, True)
        """
        ends = {
            at
            for one in self.shares
            for at in (one.start, one.end)
            if at is not None and start < at < end and one.holds(kind, at)
        }
        stops = sorted({start, end, *ends})
        return tuple((one, two, self.share(kind, (one + two) / 2)) for one, two in pairwise(stops))


@dataclass(frozen=True)
class Settlement:
    """A support that gives way: ``down`` in units of deflection (downward +), or ``turn`` in rad.

    ``turn`` is clockwise +, for a support that holds rotation; one of the two is zero. ``path`` is
    where it stands in calc.toml.
    """

    at: str
    station: Fraction
    down: Fraction
    turn: Fraction
    path: str


@dataclass(frozen=True)
class Permanent:
    """A permanent load case; for now of settlements only."""

    name: str
    settlements: tuple[Settlement, ...]
    path: str
