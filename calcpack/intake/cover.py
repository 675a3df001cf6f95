"""Cover, package and the register of assumptions."""

from __future__ import annotations

from calcpack.intake.reading import Reading
from calcpack.model.request import Assumption, Cover, Package, Revision, Signature


def read_cover(reading: Reading) -> Cover:
    """The cover; the same person may not prepare and check (compared without regard to case)."""

    def signature(part: str) -> Signature:
        path = f"cover.{part}"
        return Signature(reading.value(f"{path}.by") or "", reading.value(f"{path}.on"))

    cover = Cover(
        reading.value("cover.title"),
        reading.value("cover.number") or "",
        reading.value("cover.project") or "",
        reading.value("cover.client") or "",
        signature("prepared"),
        signature("checked"),
        signature("approved"),
        tuple(
            Revision(*(reading.value(f"{path}.{key}") for key in ("mark", "on", "text")))
            for path in reading.items("cover.revisions")
        ),
    )
    checker = _person(cover.checked)
    if checker and checker == _person(cover.prepared):
        reading.refuse("cover.checked.by", "must not be the person at cover.prepared.by")
    return cover


def _person(signature: Signature) -> str:
    return signature.by.strip().casefold()


def read_assumptions(reading: Reading) -> tuple[Assumption, ...]:
    """The register of assumptions; one that is open bars the status "Issued"."""
    paths = reading.items("assumptions")
    still_open = [path for path in paths if reading.value(f"{path}.open")]
    if still_open and reading.value("package.status") == "Issued":
        needs = f'must be "For review" while {still_open[0]} is open'
        reading.refuse("package.status", needs)
    return tuple(
        Assumption(
            reading.value(f"{path}.text"),
            reading.value(f"{path}.basis") or "",
            reading.value(f"{path}.open"),
        )
        for path in paths
    )


def read_package(reading: Reading) -> Package:
    """Status and paper."""
    return Package(*(reading.value(f"package.{key}") for key in ("status", "paper", "detail")))
