"""The beam cut at its releases into bodies, with every unknown that acts on them."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Literal

from calcpack.exact.formula import Symbol
from calcpack.model.beam import Beam, Face, Release, Station
from calcpack.model.request import Effect, EffectKind

LETTERS = {
    "reaction": "R",
    "moment reaction": "C",
    "shear": "V",
    "moment": "M",
    "deflection": "D",
    "rotation": "θ",
}


def symbol_of(effect: Effect) -> Symbol:
    """R a reaction, C the couple of a support, V a shear, M a moment, D a deflection, θ a rotation.

    >>> str(symbol_of(Effect("shear", "B", Fraction(40), "left")))
    'V_B,left'
    """
    return Symbol(LETTERS[effect.kind], effect.index, effect.face or "")


def key_of(effect: Effect) -> str:
    """A name for step keys, unambiguous for any name of a place (escaped after RFC 6901).

    >>> key_of(Effect("shear", "B", Fraction(40), "left"))
    'V_B/left'
    >>> key_of(Effect("moment", "1/2", Fraction(20)))
    'M_1~12'
    """
    at = effect.at.replace("~", "~0").replace("/", "~1")
    return f"{LETTERS[effect.kind]}_{at}" + (f"/{effect.face}" if effect.face else "")


@dataclass(frozen=True)
class Action:
    """An unknown as it acts on one body.

    Attributes:
        unknown: the force or couple.
        up: +1 or -1 where it is a force that pushes this body up or down when positive; else 0.
        clockwise: +1 or -1 where it is a couple that turns this body so when positive; else 0.
        edge: -1 at the release where the body starts, +1 where it ends, 0 at a support.
    """

    unknown: Effect
    up: int
    clockwise: int
    edge: Literal[-1, 0, 1]

    @property
    def station(self) -> Fraction:
        return self.unknown.station


@dataclass(frozen=True)
class Body:
    """A piece of the beam between two cuts, or, without length, the pin of a hinge on a support."""

    start: Fraction
    end: Fraction
    start_name: str
    end_name: str
    actions: tuple[Action, ...]

    @property
    def name(self) -> str:
        if self.is_pin:
            return f"{'joint' if self.turns else 'pin'} at {self.end_name}"
        return f"{self.start_name}-{self.end_name}"

    @property
    def is_pin(self) -> bool:
        return self.start == self.end

    @property
    def shifts(self) -> bool:
        """Whether the sum of forces on it says anything."""
        return not self.is_pin or any(action.up for action in self.actions)

    @property
    def turns(self) -> bool:
        """Whether the sum of moments on it says anything: for a pin, where couples act on it."""
        return not self.is_pin or any(action.clockwise for action in self.actions)

    @property
    def equations(self) -> int:
        """Equations of equilibrium that it offers."""
        return self.shifts + self.turns


@dataclass(frozen=True)
class System:
    """The bodies from left to right and the unknowns in the order in which they are met.

    ``redundants`` are those that other equations than equilibrium must find.
    """

    bodies: tuple[Body, ...]
    unknowns: tuple[Effect, ...]
    redundants: tuple[Effect, ...] = ()


def place_name(beam: Beam, at: Fraction) -> str:
    """What a sheet calls the key station: its name, else the end of the beam it is.

    >>> place_name(Beam(Fraction(4), (), (), (), None), Fraction(4))
    'right end'
    """
    name = beam.station(at).name
    if name:
        return name
    if at in (0, beam.length):
        return "right end" if at else "left end"
    return str(at)


def cut_into_bodies(beam: Beam, redundants: Sequence[Effect] = ()) -> System:
    """Cut the beam at every release and name what acts on each piece.

    A moment at a support that is among ``redundants`` opens the beam there, as a hinge would; it
    then acts on both faces. Other redundants stay in place as forces.

    A pin, roller or fixed support pushes with a force, a fixed or guided support holds with a
    couple, a hinge passes a shear, a slide a moment. A hinge over a support that holds no
    rotation has its pin as a body of its own, on which the reaction acts; any other support at a
    release acts on the face that it names.
    """
    bodies: list[Body] = []
    start = Fraction(0)
    actions: list[Action] = []
    for station in beam.stations:
        opened = [r for r in redundants if r.kind == "moment" and r.station == station.at]
        if opened:
            on_left, pin, on_right = _opened_actions(beam, station, opened)
        elif station.release is not None:
            on_left, pin, on_right = _release_actions(beam, station)
        else:
            actions += _support_actions(beam, station)
            continue
        bodies.append(_body(beam, start, station.at, [*actions, *on_left]))
        if pin:
            bodies.append(_body(beam, station.at, station.at, pin))
        start, actions = station.at, on_right
    bodies.append(_body(beam, start, beam.length, actions))
    unknowns = dict.fromkeys(action.unknown for body in bodies for action in body.actions)
    return System(tuple(bodies), tuple(unknowns), tuple(redundants))


def _body(beam: Beam, start: Fraction, end: Fraction, actions: list[Action]) -> Body:
    return Body(start, end, place_name(beam, start), place_name(beam, end), tuple(actions))


def _support_actions(beam: Beam, station: Station) -> Iterator[Action]:
    support = station.support
    if support is None:
        return
    if support.holds_vertical:
        yield Action(_effect(beam, "reaction", support.name, support.at), 1, 0, 0)
    if support.holds_rotation:
        yield Action(_effect(beam, "moment reaction", support.name, support.at), 0, -1, 0)


def _effect(
    beam: Beam, kind: EffectKind, name: str, at: Fraction, face: Face | None = None
) -> Effect:
    return Effect(kind, name, at, face, beam.tags[name])


def _release_actions(
    beam: Beam, station: Station
) -> tuple[list[Action], list[Action], list[Action]]:
    """What acts at a release on the body to the left, on the pin, and on the body to the right."""
    release, support = station.release, station.support
    assert release is not None
    held = list(_support_actions(beam, station))
    if held and support is not None and support.face is None:
        left = _effect(beam, "shear", station.name, station.at, "left")
        right = _effect(beam, "shear", station.name, station.at, "right")
        return (
            [Action(left, -1, 0, 1)],
            [Action(left, 1, 0, -1), *held, Action(right, -1, 0, 1)],
            [Action(right, 1, 0, -1)],
        )
    passed = _passed(beam, station, release)
    if release.kind == "hinge":
        end, beginning = Action(passed, -1, 0, 1), Action(passed, 1, 0, -1)
    else:
        end, beginning = Action(passed, 0, -1, 1), Action(passed, 0, 1, -1)
    held_left = held if support is not None and support.face == "left" else []
    held_right = held if support is not None and support.face == "right" else []
    return [*held_left, end], [], [beginning, *held_right]


def _opened_actions(
    beam: Beam, station: Station, opened: Sequence[Effect]
) -> tuple[list[Action], list[Action], list[Action]]:
    """The same at a support where moments are released, ``opened`` on one face or on both.

    The support stays with the face whose moment is not released; else it has a joint of its own.
    """
    held = list(_support_actions(beam, station))
    opened = sorted(opened, key=lambda one: one.face or "")
    faces: tuple[Face, ...] = ("left", "right")
    only = opened[0].face if len(opened) == 1 else None
    if only is not None:
        shear, moment = _effect(beam, "shear", station.name, station.at, only), opened[0]
        end = [Action(shear, -1, 0, 1), Action(moment, 0, -1, 1)]
        beginning = [Action(shear, 1, 0, -1), Action(moment, 0, 1, -1)]
        return (end, [], [*beginning, *held]) if only == "left" else ([*held, *end], [], beginning)
    left, right = (_effect(beam, "shear", station.name, station.at, face) for face in faces)
    first, last = opened[0], opened[-1]
    joint = [Action(left, 1, 0, -1), *held, Action(right, -1, 0, 1)]
    if first != last:
        joint += [Action(first, 0, 1, -1), Action(last, 0, -1, 1)]
    return (
        [Action(left, -1, 0, 1), Action(first, 0, -1, 1)],
        joint,
        [Action(right, 1, 0, -1), Action(last, 0, 1, -1)],
    )


def _passed(beam: Beam, station: Station, release: Release) -> Effect:
    """What a release passes; where the support there makes two values, the one on its far side."""
    kind: EffectKind = "shear" if release.kind == "hinge" else "moment"
    support = station.support
    if support is not None and support.face is not None:
        two = support.holds_vertical if kind == "shear" else support.holds_rotation
        if two:
            far: Face = "right" if support.face == "left" else "left"
            return _effect(beam, kind, station.name, station.at, far)
    return _effect(beam, kind, release.name, station.at)
