"""Bands of a figure, each drawn about its own y = 0, set under one another."""

from __future__ import annotations

import itertools
from collections.abc import Sequence

from calcpack.sheets.drawing import Drawing, Item, extent

BETWEEN = 2.0
"""Between the bands of a figure, in mm."""
EDGE = 0.3
"""Left free at the head and foot of a figure, in mm."""

Band = tuple[Item, ...]


def stacked(bands: Sequence[Band]) -> tuple[list[float], float]:
    """How far each band must move down to stand under the one before; and the height of all."""
    y, downs = EDGE, []
    for band in bands:
        top, bottom = extent(band)
        downs.append(y - top)
        y += bottom - top + BETWEEN
    return downs, y - BETWEEN + EDGE


def moved(bands: Sequence[Band], downs: Sequence[float]) -> list[Band]:
    """Every band moved down the paper by its own distance in mm."""
    return [
        tuple(item.moved(down) for item in band) for band, down in zip(bands, downs, strict=True)
    ]


def drawn(bands: Sequence[Band], width: float, caption: str, alt: str) -> Drawing:
    """Bands under one another as one drawing; its height follows."""
    bands = [band for band in bands if band]
    downs, height = stacked(bands)
    items = tuple(itertools.chain(*moved(bands, downs)))
    return Drawing(items, width, height, caption, alt)
