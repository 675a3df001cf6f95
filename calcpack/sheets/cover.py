"""Title sheet and contents: what the calculation is, and who answers for it."""

from __future__ import annotations

from calcpack.model.request import Signature
from calcpack.sheets.blocks import (
    Block,
    Column,
    Contents,
    Heading,
    Paragraph,
    Signatures,
    Table,
)
from calcpack.solution import Solution

COVERS = (
    "This package finds, for one straight beam, the influence lines of the "
    "effects asked for, where the travelling loads have to stand, and what they then cause; every "
    "equation is printed with its numbers, but for effects that are asked for in tables only and "
    "for the envelopes."
)
NOT_COVERED = (
    "Not covered: permanent loads but settlements, combinations and resistances; section capacity, "
    "skew, curvature and grillage action, frames, trusses, arches and cables, lift-off, shear "
    "deformation, braking, centrifugal and seismic forces, semi-rigid releases."
)
CAUTION = (
    "A number on these sheets may be wrong, by its input or by a fault of the program. The "
    "governing code and a licensed engineer decide; nothing here replaces their judgment or an "
    "independent check."
)
ROLES = ("Prepared", "Checked", "Approved")


def cover_blocks(solution: Solution) -> tuple[Block, ...]:
    """The title sheet: identification, status, revisions, signatures and the box for a seal."""
    calculation = solution.calculation
    cover = calculation.cover
    pairs = (
        ("Project", cover.project),
        ("Client", cover.client),
        ("Calculation", cover.number),
        ("Revision", solution.calculation.cover.revision),
        ("Status", calculation.package.status),
    )
    revisions = tuple(
        ((one.mark,), (one.on.isoformat() if one.on else "",), (one.text,))
        for one in cover.revisions
    )
    columns = (Column("revision"), Column("date"), Column("what changed", width=1))
    signatures = (cover.prepared, cover.checked, cover.approved)
    return (
        Heading(1, (cover.title,)),
        Table(
            (Column("", width=1), Column("", width=4)),
            tuple(((label,), (said or "—",)) for label, said in pairs),
        ),
        *((Table(columns, revisions),) if revisions else ()),
        Signatures(tuple(_line(*one) for one in zip(ROLES, signatures, strict=True))),
        Paragraph((COVERS,)),
        Paragraph((NOT_COVERED,)),
        Paragraph((CAUTION,)),
    )


def contents_blocks(solution: Solution) -> tuple[Block, ...]:
    """Contents with sheet numbers, and the sheets in effect."""
    return Heading(1, ("Contents",)), Contents(solution.calculation.cover.revision)


def _line(role: str, signature: Signature) -> tuple[str, str, str]:
    return role, signature.by, signature.on.isoformat() if signature.on else ""
