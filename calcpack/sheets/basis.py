"""Basis: loads and their source, assumptions, signs, units, methods."""

from __future__ import annotations

from collections.abc import Iterator

from calcpack.exact.units import SYSTEMS
from calcpack.sheets.blocks import (
    Block,
    Column,
    Figure,
    Heading,
    Items,
    Paragraph,
    Table,
)
from calcpack.sheets.load_tables import share_words, standard_words
from calcpack.sheets.signs_figure import signs_figure
from calcpack.solution import Solution

SIGNS = (
    ("Reaction R", "upward +"),
    ("Shear V", "+ when the outside forces left of the cut push up"),
    ("Moment M", "sagging +"),
    ("Couple C of a support (moment reaction)", "anticlockwise on the beam + (M left − M right)"),
    ("Sum of forces ΣV", "up +"),
    ("Sum of moments ΣM", "clockwise +"),
    ("Unit load P = 1", "downward; without unit"),
    ("Stations x", "from the left end to the right"),
)
PLACES = (
    "The unit load has no unit: a line of moment is a length, a line of shear or reaction a pure "
    "number. A load at a support's station stands on the support. At a jump of a line the load "
    "stands just left or just right of it, and all axles of a train take the same side. An axle at "
    "the very end of the beam counts, one beyond it does not."
)
METHODS = (
    (
        "Stability and degree",
        "exact rank of the equations of equilibrium; principle of virtual displacements",
    ),
    ("Influence lines", "equilibrium of free bodies cut at releases and sections"),
    (
        "Redundants",
        "force method with exact flexibilities (principle of virtual forces), load terms by "
        "reciprocity of displacements; needed only where the beam is indeterminate",
    ),
    (
        "Placement of loads",
        "the effect of a train is one polynomial between events, where an axle or the end of a "
        "trailing load meets a breakpoint of the line or an end of the beam; events are evaluated "
        "on both sides, and for curved lines the places between them where the rate of change is "
        "zero; axles with gaps that vary are held at an end of a range or stand by themselves "
        "where their own effect is greatest, each place with the best that may follow it; uniform "
        "load stands on the parts of the line of one sign",
    ),
    (
        "Absolute maximum moment",
        "section and place together: the line of any section of a span follows from those of the "
        "moments at its ends and the simple beam",
    ),
    ("Kinematic statement", "Müller-Breslau's principle, in exact fractions"),
    ("Stiffness solution", "displacement method with Euler-Bernoulli elements, in floating point"),
    (
        "Printed numbers",
        "computed in exact fractions of the decimals typed; rounded half away from zero in print, "
        "with as many decimals as each equation needs to close within one unit of its last digit",
    ),
)
STATED = (
    "That these loads, their allowances and their distribution are the right ones is the "
    "preparer's statement; the governing standard in its edition in force decides."
)
FIRST_HOLDS = "Of several distributions of a load the first that holds for an effect counts."
LINES_HOLD = (
    "Influence lines hold only while every bearing stays down or is anchored. Bending alone is "
    "considered; equilibrium of a determinate beam does not depend on its stiffness."
)
NAMED_UNITS = ("length", "force", "line load", "moment", "deflection", "rotation", "EI")


def basis_blocks(solution: Solution) -> tuple[Block, ...]:
    """The basis of the calculation."""
    calculation = solution.calculation
    return (
        Heading(1, ("Basis",)),
        Heading(2, ("Loads",)),
        *_loads(solution),
        Heading(2, ("Assumptions",)),
        *_assumptions(solution),
        Heading(2, ("Signs and units",)),
        Figure(signs_figure()),
        Table(
            (Column("quantity", width=2), Column("sign", width=3)),
            tuple(((what,), (sign,)) for what, sign in SIGNS),
        ),
        Paragraph((PLACES,)),
        Paragraph((_units(calculation.units),)),
        Heading(2, ("Methods",)),
        Table(
            (Column("for", width=1), Column("method", width=3)),
            tuple(((what,), (how,)) for what, how in METHODS),
        ),
        Paragraph((LINES_HOLD,)),
    )


def _loads(solution: Solution) -> Iterator[Block]:
    moving = solution.calculation.moving
    if not moving:
        yield Paragraph(("No travelling load is stated; only influence lines are given.",))
        return
    names = {one.at: one.name for one in solution.calculation.beam.stations if one.name}
    columns = (
        Column("load", width=2),
        Column("source", width=6),
        Column("cases", "right"),
        Column("distribution", width=4),
    )
    rows = tuple(
        (
            (load.name,),
            (standard_words(load) if load.standard else "stated by the preparer",),
            (str(len(load.cases)),),
            (share_words(load, names),),
        )
        for load in moving
    )
    yield Table(columns, rows)
    if any(len(load.shares) > 1 for load in moving):
        yield Paragraph((FIRST_HOLDS,))
    yield Paragraph((STATED,))
    notes = dict.fromkeys(note for load in moving if load.standard for note in load.standard.notes)
    if notes:
        yield Paragraph(("Left to the engineer by these models:",), leads=True)
        yield Items(tuple((Paragraph((note,)),) for note in notes))


def _assumptions(solution: Solution) -> Iterator[Block]:
    register = solution.calculation.assumptions
    if not register:
        yield Paragraph(("None is registered.",))
        return
    columns = (
        Column("no."),
        Column("assumption", width=5),
        Column("basis", width=3),
        Column("status"),
    )
    yield Table(
        columns,
        tuple(
            ((str(n),), (one.text,), (one.basis or "—",), ("open" if one.open else "settled",))
            for n, one in enumerate(register, start=1)
        ),
    )


def _units(system: str) -> str:
    units = SYSTEMS[system]
    listed = ", ".join(f"{kind} {units[kind]}" for kind in NAMED_UNITS)
    exact = (
        "Units are converted exactly: 1 in = 25.4 mm, 1 lb = 4.4482216152605 N, 1 kip = 1000 lb."
    )
    return f"Units ({system}): {listed}. {exact}"
