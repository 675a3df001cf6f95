"""What the engineer asks for, and the calculation as a whole."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import date
from fractions import Fraction
from typing import Any, Literal

from calcpack.model.beam import Beam, Face
from calcpack.model.loads import MovingLoad, Permanent

EffectKind = Literal["reaction", "moment reaction", "shear", "moment", "deflection", "rotation"]
Detail = Literal["every equation", "plan", "table"]
Paper = Literal["letter", "A4"]
Status = Literal["For review", "Issued"]


@dataclass(frozen=True)
class Effect:
    """A quantity whose influence line is wanted.

    Attributes:
        kind: reaction (upward +), moment reaction (anticlockwise on the beam +), shear (+ when
            the outside forces left of the cut push up), moment (sagging +), deflection (downward
            +) or rotation (clockwise +).
        at: name of the place, or its station as text where it has none.
        station: where it is.
        face: the side of the place at which the beam is cut, where two values exist; else None.
        tag: what stands in symbols for a long name; "" where the name itself does.
        show: how much of its derivation is printed; None where the package's detail holds.

    >>> Effect("shear", "B", Fraction(40), "left").label
    'shear at B, left face'
    """

    kind: EffectKind
    at: str
    station: Fraction
    face: Face | None = None
    tag: str = field(default="", compare=False)
    show: Detail | None = field(default=None, compare=False)

    @property
    def index(self) -> str:
        """What stands for the place in symbols."""
        return self.tag or self.at

    @property
    def label(self) -> str:
        return f"{self.kind} at {self.at}" + (f", {self.face} face" if self.face else "")


@dataclass(frozen=True)
class Signature:
    by: str = ""
    on: date | None = None


@dataclass(frozen=True)
class Revision:
    mark: str
    on: date | None
    text: str


@dataclass(frozen=True)
class Cover:
    title: str
    number: str = ""
    project: str = ""
    client: str = ""
    prepared: Signature = Signature()
    checked: Signature = Signature()
    approved: Signature = Signature()
    revisions: tuple[Revision, ...] = ()

    @property
    def revision(self) -> str:
        """The mark of the last revision; "" where there is none."""
        return self.revisions[-1].mark if self.revisions else ""

    @property
    def latest(self) -> date | None:
        """The latest date on the cover: the date of the document."""
        signed = (self.prepared.on, self.checked.on, self.approved.on)
        days = [*signed, *(revision.on for revision in self.revisions)]
        return max((day for day in days if day is not None), default=None)


@dataclass(frozen=True)
class Package:
    status: Status = "For review"
    paper: Paper = "letter"
    detail: Detail = "every equation"


@dataclass(frozen=True)
class Assumption:
    text: str
    basis: str = ""
    open: bool = False


@dataclass(frozen=True)
class Entry:
    """One value of the data echo: where, what was typed (or the default), and which of the two."""

    path: str
    label: str
    said: str
    unit: str
    entered: bool


@dataclass(frozen=True)
class Calculation:
    """One calc.toml, read and checked.

    ``plain`` is the file as plain JSON data without ``cover`` (for the digest); where the file
    names tables it has a key ``tables`` more, with the SHA-256 of each by its name. ``inputs``
    gives the exact value of every number a formula may cite, by its path; ``echo`` lists every
    value; ``text`` is the file as typed; ``redundants`` are None where they are chosen by rule;
    ``tables`` are the name and the bytes of each table.
    """

    units: str
    cover: Cover
    package: Package
    assumptions: tuple[Assumption, ...]
    beam: Beam
    effects: tuple[Effect, ...]
    moving: tuple[MovingLoad, ...]
    plain: Mapping[str, Any]
    inputs: Mapping[str, Fraction]
    echo: tuple[Entry, ...]
    text: str = ""
    redundants: tuple[Effect, ...] | None = None
    permanent: tuple[Permanent, ...] = ()
    tables: tuple[tuple[str, bytes], ...] = ()

    def detail_of(self, effect: Effect) -> Detail:
        """How much of an effect's derivation is asked for."""
        return effect.show or self.package.detail
