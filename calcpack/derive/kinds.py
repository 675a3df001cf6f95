"""What each printed quantity is, hence its unit and the decimals that its column starts with."""

from __future__ import annotations

from typing import Literal

QuantityKind = Literal[
    "number",
    "length",
    "area",
    "volume",
    "per length",
    "per area",
    "per volume",
    "force",
    "line load",
    "moment",
    "EI",
    "EI length",
    "E",
    "I",
    "spring",
    "rotational spring",
    "deflection",
    "deflection line",
    "deflection area",
    "deflection curvature",
    "rotation",
    "rotation line",
    "rotation area",
    "rotation curvature",
]

_LENGTHS: dict[int, QuantityKind] = {
    -3: "per volume",
    -2: "per area",
    -1: "per length",
    0: "number",
    1: "length",
    2: "area",
    3: "volume",
}

DECIMALS: dict[QuantityKind, int] = {
    "number": 4,
    "length": 3,
    "area": 3,
    "volume": 3,
    "per length": 5,
    "per area": 6,
    "per volume": 7,
    "force": 2,
    "line load": 3,
    "moment": 2,
    "EI": 1,
    "EI length": 1,
    "E": 1,
    "I": 1,
    "spring": 1,
    "rotational spring": 1,
    "deflection": 3,
    "deflection line": 5,
    "deflection area": 4,
    "deflection curvature": 7,
    "rotation": 6,
    "rotation line": 8,
    "rotation area": 7,
    "rotation curvature": 10,
}
"""Decimals that a column of each kind starts with; closing may add some."""

INPUT_DECIMALS: dict[QuantityKind, int] = dict.fromkeys(DECIMALS, 2) | {
    "length": 3,
    "EI": 0,
    "E": 0,
    "I": 0,
    "spring": 0,
    "rotational spring": 0,
}
"""Decimals that an input of each kind is printed with at least."""

LINE_KIND: dict[str, QuantityKind] = {
    "reaction": "number",
    "shear": "number",
    "moment": "length",
    "moment reaction": "length",
    "deflection": "deflection line",
    "rotation": "rotation line",
}
"""What the line of an effect is; the unit load has no unit beside forces and moments."""

AREA_KIND: dict[str, QuantityKind] = {
    "reaction": "length",
    "shear": "length",
    "moment": "area",
    "moment reaction": "area",
    "deflection": "deflection area",
    "rotation": "rotation area",
}
"""What the area under the line of an effect is."""

CURVATURE_KIND: dict[str, QuantityKind] = {
    "reaction": "per area",
    "shear": "per area",
    "moment": "per length",
    "moment reaction": "per length",
    "deflection": "deflection curvature",
    "rotation": "rotation curvature",
}
"""What the second derivative of the line of an effect is."""

EFFECT_KIND: dict[str, QuantityKind] = {
    "reaction": "force",
    "shear": "force",
    "moment": "moment",
    "moment reaction": "moment",
    "deflection": "deflection",
    "rotation": "rotation",
}
"""What an effect under a load is."""


def power_of(effect_kind: str) -> int:
    """The power of length in the line of a force (0) or moment (1)."""
    return 1 if effect_kind in ("moment", "moment reaction") else 0


def of_lengths(power: int) -> QuantityKind:
    """The kind of a quantity that is a power of length.

    >>> of_lengths(2), of_lengths(-1)
    ('area', 'per length')
    """
    return _LENGTHS[power]
