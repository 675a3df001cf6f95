"""What can go wrong, named by meaning, under one base."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass


class CalcpackError(Exception):
    """Base of every error that calcpack raises on purpose."""


@dataclass(frozen=True, order=True)
class Problem:
    """One fault of an input: where it is, what was said there, and what is needed instead.

    >>> print(Problem("beam.releases[0].at", "15 m", "must lie inside 0 m to 12 m"))
    beam.releases[0].at: 15 m, must lie inside 0 m to 12 m
    """

    path: str
    said: str
    needs: str

    def __str__(self) -> str:
        return f"{self.path}: {self.said}, {self.needs}"


class InputRefused(CalcpackError):
    """The input cannot be computed as it stands; carries every fault found (exit status 2)."""

    def __init__(self, problems: Iterable[Problem]) -> None:
        self.problems = tuple(problems)
        super().__init__("\n".join(str(problem) for problem in self.problems))


class Disagreement(CalcpackError):
    """Two ways to the same number differ: nothing may be issued (exit status 1)."""


class OutputFailed(CalcpackError):
    """Disk, kernel or typesetter failed (exit status 3)."""


class ProgramFault(CalcpackError):
    """What the methods promise did not happen: a fault of the program, not of the input."""
