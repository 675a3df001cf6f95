"""From the text of calc.toml to a checked calculation, or to every fault of it at once."""

from calcpack.intake.calculation import read, read_file

__all__ = ["read", "read_file"]
