"""Title sheet: what the calculation is, who answers for it, and what it does not cover."""

from __future__ import annotations

from calcpack.model.request import Calculation, Signature
from calcpack.sheets.blocks import Block, Column, Heading, Paragraph, Table, Text

COVERS = (
    "This package finds, for one statically determinate straight beam, the influence lines of the "
    "effects asked for, where the travelling loads have to stand, and what they then cause. "
    "Not covered: section capacity, skew, curvature and grillage action, frames, trusses, arches "
    "and cables, lift-off, shear deformation, braking, centrifugal and seismic forces."
)
CAUTION = (
    "A number on these sheets may be wrong, by its input or by a fault of the program. The "
    "governing code and a licensed engineer decide; nothing here replaces their judgment or an "
    "independent check."
)


def cover_blocks(calculation: Calculation) -> tuple[Block, ...]:
    """The title sheet."""
    cover = calculation.cover
    blocks: list[Block] = [
        Heading(1, (cover.title,)),
        _pairs(
            ("Project", cover.project),
            ("Client", cover.client),
            ("Calculation", cover.number),
            ("Status", calculation.package.status),
        ),
        Table(
            (Column("", width=2), Column("name", width=3), Column("date", width=2)),
            (
                _signed("Prepared", cover.prepared),
                _signed("Checked", cover.checked),
                _signed("Approved", cover.approved),
            ),
        ),
    ]
    if cover.revisions:
        rows = tuple(
            ((one.mark,), (one.on.isoformat() if one.on else "",), (one.text,))
            for one in cover.revisions
        )
        columns = (Column("revision"), Column("date"), Column("what changed", width=1))
        blocks.append(Table(columns, rows))
    blocks += [Paragraph((COVERS,)), Paragraph((CAUTION,))]
    if calculation.assumptions:
        blocks.append(Heading(2, ("Assumptions",)))
        columns = (Column("no."), Column("assumption", width=3), Column("basis", width=2))
        blocks.append(
            Table(
                (*columns, Column("status")),
                tuple(
                    ((str(n),), (a.text,), (a.basis,), ("open" if a.open else "settled",))
                    for n, a in enumerate(calculation.assumptions, start=1)
                ),
            )
        )
    return tuple(blocks)


def _pairs(*pairs: tuple[str, str]) -> Table:
    rows = tuple(((label,), (said,)) for label, said in pairs)
    return Table((Column("", width=2), Column("", width=5)), rows)


def _signed(label: str, signature: Signature) -> tuple[Text, ...]:
    day = signature.on.isoformat() if signature.on else ""
    return ((label,), (signature.by,), (day,))
