"""How a load stands, in a few words for a cell of a table."""

from __future__ import annotations

from calcpack.derive.kinds import DECIMALS
from calcpack.model.loads import MovingLoad
from calcpack.moving.governing import Governing
from calcpack.sheets.blocks import Text, Value


def stands(load: MovingLoad, found: Governing) -> Text:
    """The case by its number, where there are several, then lead axle and heading."""
    if found.case is None:
        return ("—",)
    numbered = f"{load.cases.index(found.case) + 1}: " if len(load.cases) > 1 else ""
    if found.position is None:
        return (f"{numbered}no train",)
    lead = Value(found.position.lead_at, DECIMALS["length"])
    return (numbered, lead, f" {found.position.heading}")


def numbered_cases(load: MovingLoad) -> str:
    """Which case has which number; "" where there is only one."""
    if len(load.cases) < 2:
        return ""
    listed = "; ".join(f"{n}: {case.name}" for n, case in enumerate(load.cases, start=1))
    return f"Cases of {load.name}: {listed}."
