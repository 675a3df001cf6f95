"""Checkable calculation packages for beams under moving loads."""

from calcpack.intake import read, read_file
from calcpack.results import results
from calcpack.solution import Solution, solve

__all__ = ["Solution", "read", "read_file", "results", "solve"]
