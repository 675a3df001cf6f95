"""The force method as steps, front to back."""

from __future__ import annotations

from calcpack.derive.book import Book
from calcpack.derive.curve_steps import write_curve, write_deflections, write_flexibilities
from calcpack.derive.elastic_book import ElasticBook
from calcpack.derive.redundant_steps import write_compatibility, write_redundants
from calcpack.derive.state_steps import write_ratios, write_unit_states
from calcpack.elastic.compatibility import ForceMethod


def write_force_method(book: Book, method: ForceMethod) -> ElasticBook:
    """Write states, flexibilities, curves and compatibility; the redundants' lines stand then in
    the book as those of any other unknown."""
    elastic = ElasticBook(book, method)
    write_ratios(elastic)
    write_unit_states(elastic)
    if elastic.redundants:
        write_flexibilities(elastic)
    write_deflections(elastic, elastic.units)
    for unit in elastic.units:
        cause = f"by reciprocity the deflection at x under X_{unit.mark} = 1"
        write_curve(elastic, unit, cause)
    if elastic.redundants:
        write_compatibility(elastic)
        write_redundants(elastic)
    return elastic
