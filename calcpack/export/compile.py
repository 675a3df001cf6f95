"""Runs Typst over the sheets; the typesetter sees no file but those given."""

from __future__ import annotations

import tempfile
from collections.abc import Sequence
from datetime import UTC, date, datetime

import typst

from calcpack.errors import OutputFailed
from calcpack.export.attachments import Attachment
from calcpack.export.templates import template_folder
from calcpack.render.typst import literal, to_typst
from calcpack.results import DIGEST_SHOWN, program_version
from calcpack.sheets.blocks import Block, Sheet
from calcpack.sheets.lettering import font_folder
from calcpack.solution import Solution

PAPERS = {"letter": "us-letter", "A4": "a4"}


def to_pdf(
    parts: Sequence[Sheet | Block],
    solution: Solution,
    digest: str,
    day: date,
    attached: Sequence[Attachment] = (),
) -> bytes:
    """Typeset the sheets and what stands between them.

    Args:
        parts: in their order.
        solution: whose cover gives head and foot.
        digest: of data and results; its first 12 digits stand in every foot.
        day: the date of the document, from calc.toml and never from the clock.
        attached: files to carry inside.

    Raises:
        OutputFailed: the typesetter refused; its message is carried along.
    """
    body = to_typst(parts, solution.derivation)
    main = "\n".join(
        [
            '#import "package.typ": *',
            f"#show: calc-package.with({_head(solution, digest, day)})",
            *(_attach(file) for file in attached),
            body.text,
        ]
    )
    layout = (template_folder() / "package.typ").read_bytes()
    inside = {file.name: file.content for file in attached}
    files = {"main.typ": main.encode(), "package.typ": layout, **inside, **body.files}
    midnight = datetime(day.year, day.month, day.day, tzinfo=UTC)
    with tempfile.TemporaryDirectory() as empty:
        try:
            found = typst.compile(
                files,  # type: ignore[call-overload]
                root=empty,
                font_paths=[str(font_folder())],
                ignore_system_fonts=True,
                timestamp=midnight,
                pdf_standards=["a-3a", "ua-1"],
            )
        except typst.TypstError as error:
            raise OutputFailed(f"the typesetter stopped: {error}") from error
    assert isinstance(found, bytes)
    return found


def _attach(file: Attachment) -> str:
    name = literal(file.name)
    return (
        f"#pdf.attach({name}, read({name}, encoding: none), "
        f"relationship: {literal(file.relationship)}, mime-type: {literal(file.mime)}, "
        f"description: {literal(file.description)})"
    )


def _head(solution: Solution, digest: str, day: date) -> str:
    calculation = solution.calculation
    cover = calculation.cover
    said = {
        "title": cover.title,
        "number": cover.number,
        "project": cover.project,
        "prepared": _initials(cover.prepared.by, cover.prepared.on),
        "checked": _initials(cover.checked.by, cover.checked.on),
        "revision": cover.revisions[-1].mark if cover.revisions else "",
        "status": calculation.package.status,
        "program": program_version(),
        "digest": digest[:DIGEST_SHOWN],
        "paper": PAPERS[calculation.package.paper],
    }
    named = [f"{key}: {literal(text)}" for key, text in said.items()]
    made = f"datetime(year: {day.year}, month: {day.month}, day: {day.day})"
    return ", ".join([*named, f"date: {made}"])


def _initials(by: str, on: date | None) -> str:
    return " ".join(part for part in (by, on.isoformat() if on else "") if part)
