"""The drawn sign conventions: legible, and the same senses as the equations use."""

from __future__ import annotations

from itertools import pairwise

import pytest
from beams import make_beam

from calcpack.exact.formula import Symbol
from calcpack.model.request import Effect, EffectKind
from calcpack.sheets.drawing import Arrow, Item, Label, Turn
from calcpack.sheets.free_body import Couple, Force, free_body_of
from calcpack.sheets.labels import overlaps
from calcpack.sheets.signs_figure import WIDTH, signs_figure
from calcpack.statics.influence import effect_line, unknown_lines
from calcpack.statics.plan import plan_of_solution
from calcpack.statics.system import cut_into_bodies

FIGURE = signs_figure()
KINDS: dict[EffectKind, str] = {"shear": "V", "moment": "M"}
NAMES = ("Reaction R", "Shear V", "Moment M", "Couple C", "Unit load P", "Station x")


def cell(name: str) -> list[Item]:
    """What is drawn in the share of the width that stands over a name."""
    share = WIDTH / len(NAMES)
    left = share * NAMES.index(name)
    return [
        item
        for item in FIGURE.items
        if left <= min(x for x, _ in item.path) and max(x for x, _ in item.path) <= left + share
    ]


def arrows(name: str, pen: str) -> list[Arrow]:
    """The arrows of a pen over a name, from left to right."""
    found = [item for item in cell(name) if isinstance(item, Arrow) and item.pen == pen]
    return sorted(found, key=lambda arrow: arrow.tip)


def up(arrow: Arrow) -> int:
    """1 upward, -1 downward; y runs down the paper."""
    assert arrow.tail[0] == arrow.tip[0]
    return 1 if arrow.tip[1] < arrow.tail[1] else -1


def test_every_label_is_clear_and_every_item_within_one_piece() -> None:
    assert overlaps(FIGURE) == []
    assert FIGURE.width == 150
    assert sum(len(cell(name)) for name in NAMES) == len(FIGURE.items)


@pytest.mark.parametrize("name", NAMES)
def test_the_name_stands_under_its_piece_and_in_the_words_for_it(name: str) -> None:
    texts = [item for item in cell(name) if isinstance(item, Label)]
    (title,) = (label for label in texts if str(label.text) == name)
    assert all(
        label.box.top >= title.box.bottom - 0.1 or label.box.bottom <= title.box.top
        for label in texts
        if label is not title
    )
    assert f"{name} " in FIGURE.alt


def test_forces_point_as_the_conventions_say() -> None:
    (reaction,) = arrows("Reaction R", "medium")
    (load,) = arrows("Unit load P", "medium")
    (station,) = arrows("Station x", "thin")
    assert up(reaction) == 1
    assert up(load) == -1
    assert station.tip[0] > station.tail[0]
    assert station.tip[1] == station.tail[1]
    assert [up(arrow) for arrow in arrows("Shear V", "thin")] == [1, -1]


def test_the_pairs_at_a_cut_are_those_of_the_equations() -> None:
    beam = make_beam(15, [(0, "pin"), (12, "roller")], sections=[5, 14])
    system = cut_into_bodies(beam)
    unknowns = unknown_lines(beam, plan_of_solution(beam, system))
    senses = {}
    for at, kept in (("1", "left"), ("2", "right")):
        for kind, letter in KINDS.items():
            effect = Effect(kind, at, beam.station(at).at)
            _, cut = effect_line(beam, system, unknowns, effect)
            assert cut is not None
            assert cut.keeps == kept
            actions = free_body_of(beam, cut.equation).actions
            (own,) = (action for action in actions if action.symbol == Symbol(letter, at))
            face = int(kept == "right")
            senses[letter, face] = own.up if isinstance(own, Force) else -own.clockwise
    drawn = {("V", face): up(arrow) for face, arrow in enumerate(arrows("Shear V", "medium"))}
    turns = sorted(
        (item for item in cell("Moment M") if isinstance(item, Turn)), key=lambda turn: turn.centre
    )
    drawn |= {("M", face): -1 if turn.sweep > 0 else 1 for face, turn in enumerate(turns)}
    assert drawn == senses


def test_a_support_couple_turns_the_beam_as_in_its_equation() -> None:
    beam = make_beam(5, [(0, "fixed")])
    bodies = (
        free_body_of(beam, step.equation) for step in plan_of_solution(beam, cut_into_bodies(beam))
    )
    couples = {action for body in bodies for action in body.actions if isinstance(action, Couple)}
    (couple,) = couples
    (turn,) = (item for item in cell("Couple C") if isinstance(item, Turn))
    assert couple.symbol == Symbol("C", "A")
    assert couple.clockwise == -1
    assert turn.sweep < 0
    assert all(x < turn.centre[0] for (x, _), _ in pairwise(turn.path))
