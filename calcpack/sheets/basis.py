"""Basis: loads and their source, assumptions, signs, units, methods."""

from __future__ import annotations

from collections.abc import Iterator

from calcpack.exact.numbers import decimals_to_end
from calcpack.exact.units import SYSTEMS
from calcpack.model.loads import MovingLoad
from calcpack.sheets.blocks import (
    Block,
    Column,
    Figure,
    Heading,
    Paragraph,
    Table,
    Text,
    Value,
)
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
        "the effect of a train is one polynomial between events, where an axle meets a breakpoint "
        "of the line or an end of the beam; events are evaluated on both sides, and for curved "
        "lines the places between them where the rate of change is zero",
    ),
    ("Kinematic statement", "Müller-Breslau's principle, in exact fractions"),
    ("Stiffness solution", "displacement method with Euler-Bernoulli elements, in floating point"),
    (
        "Printed numbers",
        "computed in exact fractions of the decimals typed; rounded half away from zero in print, "
        "with as many decimals as each equation needs to close within one unit of its last digit",
    ),
)
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
    columns = (
        Column("load", width=3),
        Column("source", width=3),
        Column("axles", "right"),
        Column("uniform", "right"),
        Column("allowance", "right"),
        Column("distribution", "right"),
        Column("relieving axles", width=2),
    )
    rows = tuple(_load(solution.calculation.units, load) for load in moving)
    yield Table(columns, rows)
    yield Paragraph(
        (
            "Dynamic allowance is taken on axles only. No standard is named by these loads: that "
            "they, their allowance and their distribution are the right ones is the preparer's "
            "statement, not compared with any standard by the program.",
        )
    )


def _load(units: str, load: MovingLoad) -> tuple[Text, ...]:
    relieving = "count" if load.relieving == "count" else "neglected one by one"
    uniform = decimals_to_end(load.uniform, 6) if load.uniform else None
    return (
        (load.name,),
        ("stated by the preparer",),
        (str(len(load.axles)) if load.axles else "—",),
        (Value(load.uniform, uniform or 2, SYSTEMS[units]["line load"]),)
        if load.uniform
        else ("—",),
        (Value(load.allowance, decimals_to_end(load.allowance, 6) or 2),),
        (Value(load.distribution, decimals_to_end(load.distribution, 6) or 2),),
        (relieving,),
    )


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
