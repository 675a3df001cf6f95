"""The example projects: governing values checked by hand and pinned, every step closes."""

from __future__ import annotations

from pathlib import Path

import pytest

from calcpack import read_file, results, solve

EXAMPLES = Path(__file__).parent.parent / "example_projects"

# Each value by hand from the line's ordinates (statics, no other source); the axle that governs
# stands at the line's peak.
GOVERNING = {
    # Moment at 1 (6 + 32 of a 64 ft span): peak 16 ft; axles at 38, 33.5 and 53.5 ft stand at
    # 16, 13.75 and 8.25 ft: 36 x 29.75 + 14 x 8.25 = 1186.5; lane 0.48 x 512 = 245.76;
    # (1186.5 x 1.3 + 245.76) x 0.65 = 1162.3365 kip ft.
    ("drop_in_girder", "Haul truck"): ("moment", "1", "max", 1162.3365),
    # Clamp moment at A with the lead axle just left of the slide: (28 x 8.4 + 22 x 6.55) x 1.1.
    ("service_trestle", "Trolley"): ("moment reaction", "A", "max", 417.23),
    # Column B under two bays of 7.2 m, second wheel over B: 118 (1 + 6.25/7.2)
    # + 104 (1 - 2.9/7.2 + 1 - 3.85/7.2), times 1.25.
    ("crane_runway", "Crane"): ("reaction", "B", "max", 413.6632),
    # Both cranes at their least distance, heading right, third wheel over B: 118 (2 - 6.75/7.2)
    # + 104 (2 - 0.95/7.2) + 76 (2 - 8.5/7.2), times 1.25.
    ("crane_runway", "Two cranes"): ("reaction", "B", "max", 477.4132),
}


@pytest.mark.parametrize(("name", "load"), GOVERNING)
def test_governing_values(name: str, load: str) -> None:
    kind, at, extreme, value = GOVERNING[name, load]
    found = results(solve(read_file(EXAMPLES / name / "calc.toml")))
    (placement,) = (
        one
        for one in found["placements"]
        if (one["effect"]["kind"], one["effect"]["at"]) == (kind, at) and one["moving"] == load
    )
    assert placement[extreme]["value"] == pytest.approx(value, abs=1e-4)


def test_the_examples_have_many_steps() -> None:
    equations = {
        (name, step["numbers"])
        for name in dict.fromkeys(name for name, _ in GOVERNING)
        for step in results(solve(read_file(EXAMPLES / name / "calc.toml")))["steps"]
        if "numbers" in step
    }
    assert len(equations) >= 200
