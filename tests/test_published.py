"""Every published value that a beam under this release's loads can be held to.

The values, their sources and tolerances stand in ``calcpack/reference/published.toml`` alone; the
axles of a named vehicle come from its own case there.
"""

from __future__ import annotations

import itertools
import tomllib
from collections import Counter
from collections.abc import Callable, Iterator
from decimal import Decimal
from fractions import Fraction
from importlib.resources import files
from typing import Any, Literal

import pytest
from beams import make_beam
from loads import governing_of, make_load, make_strip, offsets_of, stand
from making import line_of

from calcpack.exact.piecewise import Piecewise
from calcpack.model.beam import Beam
from calcpack.model.loads import MovingLoad
from calcpack.moving.placement import axle_shares

Case = dict[str, Any]

CASES: dict[str, Case] = {
    case["id"]: case
    for case in tomllib.loads(
        files("calcpack").joinpath("reference/published.toml").read_text("utf-8"),
        parse_float=Decimal,
    )["case"]
}
LINES = [name for name, case in CASES.items() if case["kind"] == "influence-line"]
PLACED = [
    name
    for name, case in CASES.items()
    if case["item"] == 2 and case["kind"] in ("continuous-point-load", "closed-form")
]
COEFFICIENTS = [
    name for name, case in CASES.items() if case["kind"] == "continuous-udl-coefficient"
]
COUNTED = {1: 14, 2: 22, 3: 18, 5: 56, 6: 2, 7: 2}
"""Cases by item: lines of determinate beams 1 and indeterminate ones 2, and moving loads 3 are held
to here; 5 to 7 define load models, deck shares and ratings, none of which this release computes."""

TABLES: dict[str, Callable[[Fraction], Fraction]] = {
    "hs20-simple-M-b": lambda span: max(
        absolute_moment(span, vehicle("hs20-truck")),
        absolute_moment(span, hs20_lane("concentrated_moment")),
    ),
    "hs20-simple-V-b": lambda span: max(
        end_shear(span, vehicle("hs20-truck")),
        end_shear(span, hs20_lane("concentrated_shear")),
    ),
    "rehab-book-hs20-M-long": lambda span: absolute_moment(span, vehicle("hs20-truck")),
    "rehab-book-tandem-V": lambda span: end_shear(span, vehicle("hl93-tandem")),
    "rehab-book-hs20-V": lambda span: end_shear(span, vehicle("hs20-truck")),
    "rehab-book-hl93-V": lambda span: end_shear(span, vehicle("hl93-truck", lane="hl93-lane")),
    "rehab-book-lane-M-second-wheel": lambda span: greatest(
        moment_line(span, span / 2 - Fraction(7, 3)),
        make_load(uniform=exact(CASES["hl93-lane"]["load"]["udl"])),
    ),
    "rehab-book-h20-M": lambda span: max(
        absolute_moment(span, vehicle("h20-truck")),
        absolute_moment(span, hs20_lane("concentrated_moment")),
    ),
    "irc-classA-2lanes-b": lambda span: 2 * absolute_moment(span, train("irc-classA-2lanes-b")),
    "irc-70R-wheeled-b": lambda span: absolute_moment(span, train("irc-70R-wheeled-b")),
    "e80-M-b": lambda span: absolute_moment(span, train("e80-M-b")),
    "e80-V-b": lambda span: end_shear(span, train("e80-V-b", followed=True)),
    "e80-pier-b": lambda span: pier_reaction(span, train("e80-pier-b", followed=True)),
}
TRAILING = {"e80-M-b": (80, 100, 140)}
"""Spans on which the load that trails the train counts; the classical rule for the section of the
absolute maximum, by which the tests find it, knows of none."""


def exact(value: Decimal | int) -> Fraction:
    return Fraction(value)


def named(case: Case) -> str:
    source = case["source"]
    return f"{case['id']}: {source['title']}, {source['section']}"


def tolerances(case: Case, count: int) -> list[Decimal]:
    given = case["tolerance"]
    return given if isinstance(given, list) else [given] * count


def vehicle(name: str, lane: str = "") -> MovingLoad:
    """A load model's axles at their least spacings, and a lane load beside them."""
    load = CASES[name]["load"]
    spacings = [Fraction(0), *map(exact, load["spacings"])]
    uniform = exact(CASES[lane]["load"]["udl"]) if lane else 0
    axles = zip(map(exact, load["axles"]), spacings, strict=True)
    return make_load(*axles, uniform=uniform)


def hs20_lane(concentrated: str) -> MovingLoad:
    """The lane load: uniform, and one concentrated load that differs for moment and shear."""
    load = CASES["hs20-lane"]["load"]
    return make_load((exact(load[concentrated]), 0), uniform=exact(load["udl"]))


def train(name: str, followed: bool = False) -> MovingLoad:
    """A train given by its wheel loads and their offsets behind the first; ``followed`` by the load
    that trails it."""
    load = CASES[name]["load"]
    offsets = [Fraction(0), *map(exact, load["offset"])]
    spacings = [after - before for before, after in itertools.pairwise(offsets)]
    strips = []
    if followed:
        behind = exact(load["trailing_udl_from"]) - offsets[-1]
        strips.append(make_strip(exact(load["trailing_udl"]), behind))
    return make_load(*zip(map(exact, load["P"]), spacings, strict=True), strips=strips)


def simple(span: Fraction, section: Fraction | None = None) -> Beam:
    return make_beam(
        span, [(0, "pin"), (span, "roller")], sections=[] if section is None else [section]
    )


def moment_line(span: Fraction, section: Fraction) -> Piecewise:
    return line_of(simple(span, section), "moment", "1")


def greatest(line: Piecewise, load: MovingLoad) -> Fraction:
    return governing_of(line, load, 1).value


def end_shear(span: Fraction, load: MovingLoad) -> Fraction:
    """The greatest shear at the left end, which is the reaction there."""
    beam = simple(span)
    reaction = greatest(line_of(beam, "reaction", "A"), load)
    assert greatest(line_of(beam, "shear", "A"), load) == reaction
    assert governing_of(line_of(beam, "shear", "B"), load, -1).value == -reaction
    return reaction


def pier_reaction(span: Fraction, load: MovingLoad) -> Fraction:
    """The reaction between two simple spans: a hinge stands over the middle support."""
    supports: list[tuple[Fraction, Any]] = [(Fraction(0), "pin"), (span, "roller")]
    beam = make_beam(2 * span, [*supports, (2 * span, "roller")], [(span, "hinge")])
    return greatest(line_of(beam, "reaction", "B"), load)


def classical_sections(span: Fraction, load: MovingLoad) -> Iterator[tuple[Fraction, Fraction]]:
    """Sections that the classical rule names, each with the moment under its axle.

    A group of neighbouring axles and one of them are placed so that the group's resultant and
    that axle are equally far from midspan; the moment counts all axles on the span. The train
    heads left: stations grow with the offsets.
    """
    weights = [axle.weight.value for axle in load.cases[0].axles]
    offsets = offsets_of(load)
    for first, last in itertools.combinations(range(len(weights) + 1), 2):
        group = range(first, last)
        whole = sum((weights[i] for i in group), Fraction(0))
        moments = (weights[i] * offsets[i] for i in group)
        resultant = sum(moments, Fraction(0)) / whole
        for axle in group:
            section = span / 2 - (resultant - offsets[axle]) / 2
            if 0 < section < span:
                lead_at = section - offsets[axle]
                moment = Fraction(0)
                for weight, offset in zip(weights, offsets, strict=True):
                    at = lead_at + offset
                    if 0 <= at <= span:
                        low, high = min(at, section), max(at, section)
                        moment += weight * low * (span - high) / span
                yield section, moment


def absolute_moment(span: Fraction, load: MovingLoad) -> Fraction:
    """The governing moment at the best section of the classical rule.

    This release finds no absolute maximum by itself, but what it finds at the right section is
    the absolute maximum, and at no section more.
    """
    section, _ = max(classical_sections(span, load), key=lambda one: one[1])
    return greatest(moment_line(span, section), load)


def stated(case: Case, sections: list[Fraction]) -> Beam:
    """The beam of a case that gives its supports and hinges, with sections where none stands."""
    geometry = case["geometry"]
    assert geometry["x_start"] == 0
    supports = [(exact(one["x"]), one["type"]) for one in geometry["supports"]]
    hinges: list[tuple[Fraction, Any]] = [(exact(x), "hinge") for x in geometry["hinges"]]
    return make_beam(exact(geometry["x_end"]), supports, hinges, sorted({*sections}))


@pytest.mark.parametrize("name", LINES)
def test_influence_line(name: str) -> None:
    case = CASES[name]
    at = exact(case["at"])
    beam = stated(case, [at])
    line = line_of(beam, case["response"], beam.station(at).name)
    loads = case["load"]["load_x"]
    sides = case["load"].get("load_side", [""] * len(loads))
    for x, side, published in zip(loads, sides, case["published"], strict=True):
        ordinate = line.value(exact(x), "right" if side == "+" else "left")
        assert abs(ordinate - exact(published)) <= exact(case["tolerance"]), (named(case), x, side)


@pytest.mark.parametrize("name", PLACED)
def test_indeterminate_beam_under_one_load(name: str) -> None:
    """A point load, or a uniform load over all of the beam; the published digits are rounded."""
    case = CASES[name]
    places = [exact(at) for at in case["at"]]
    beam = stated(case, places)
    responses = case["response"].split(", ")
    tolerance = max(exact(case["tolerance"]), Fraction(1, 2 * 10**6))
    for response, at, published in zip(responses, places, case["published"], strict=True):
        kind = "reaction" if response.startswith("R") else "moment"
        line = line_of(beam, "reaction" if kind == "reaction" else "moment", beam.station(at).name)
        if "uniform" in case["load"]["type"]:
            found = line.integral(Fraction(0), beam.length) * exact(case["load"]["intensity"])
        else:
            found = line.left(exact(case["load"]["load_x"][0]))
        assert abs(found - exact(published)) <= tolerance, (named(case), response)


def continuous(spans: list[Fraction], sections: tuple[Fraction, ...] = ()) -> Beam:
    stations = list(itertools.accumulate(spans, initial=Fraction(0)))
    return make_beam(stations[-1], [(at, "pin") for at in stations], sections=sections)


@pytest.mark.parametrize("name", COEFFICIENTS)
def test_coefficients_of_continuous_beams(name: str) -> None:
    """Of w l² and w l: span 1 loaded, by its own length; or all of equal spans of length 1."""
    case = CASES[name]
    relative = case["geometry"]["spans_relative"]
    if "span 1" in case["load"]["type"]:
        first, second = map(exact, relative[:2])
        for index, ratio in enumerate(case["param_values"]):
            beam = continuous([first, second, second * exact(ratio)])
            for place, published in zip(case["at"], case["published"], strict=True):
                area = line_of(beam, "moment", place).integral(Fraction(0), first)
                missing = area / first**2 - exact(published[index])
                assert abs(missing) <= exact(case["tolerance"]), (named(case), place, ratio)
        return
    spans = [exact(span) for span in relative]
    beam = continuous(spans)
    names = [support.name for support in beam.supports]

    def under_all(kind: Literal["moment", "reaction"], beam: Beam, place: str) -> Fraction:
        return line_of(beam, kind, place).integral(Fraction(0), beam.length)

    hogging, reactions, sagging = case["published"]
    found = [under_all("moment", beam, place) for place in names[1 : 1 + len(hogging)]]
    pushes = [under_all("reaction", beam, place) for place in names[: len(reactions)]]
    found += pushes
    for count in range(1, 1 + len(sagging)):
        zero_shear = sum(pushes[:count], Fraction(0))
        found.append(under_all("moment", continuous(spans, (zero_shear,)), "1"))
    expected = [*hogging, *reactions, *sagging]
    within = tolerances(case, len(expected))
    for ours, published, tolerance in zip(found, expected, within, strict=True):
        assert abs(ours - exact(published)) <= exact(tolerance), named(case)


@pytest.mark.parametrize("name", TABLES)
def test_table_of_a_load(name: str) -> None:
    """Where the load that trails a train counts we must find less, since we do not take it."""
    case = CASES[name]
    spans, trailing = case["param_values"], TRAILING.get(name, ())
    assert {*trailing} < {*spans}
    within = tolerances(case, len(spans))
    for span, published, tolerance in zip(spans, case["published"], within, strict=True):
        missing = exact(published) - TABLES[name](exact(span))
        if span in trailing:
            assert missing > exact(tolerance), (named(case), span)
        else:
            assert abs(missing) <= exact(tolerance), (named(case), span)


def test_wheel_3_at_midspan() -> None:
    """One position of a published example; its note tells the maxima beside it."""
    case = CASES["e80-60ft-wheel3-at-centre"]
    span, load = exact(case["geometry"]["span"]), train("e80-M-b")
    position = stand(load, "left", span / 2 - offsets_of(load)[2])
    lines = line_of(simple(span), "reaction", "A"), moment_line(span, span / 2)
    for line, published, tolerance in zip(lines, case["published"], case["tolerance"], strict=True):
        shares = axle_shares(line, load.cases[0], position, 1)
        assert shares[2].at == span / 2
        assert shares[7].at == span
        found = sum(share.effect for share in shares)
        assert abs(found - exact(published)) <= exact(tolerance), named(case)
    assert "2588 at midspan, 2597.8 absolute" in case["note"]
    assert float(greatest(lines[1], load)) == pytest.approx(2588, abs=0.5)
    assert float(absolute_moment(span, load)) == pytest.approx(2597.8, abs=0.05)


def test_absolute_moment_of_two_wheels() -> None:
    case = CASES["abs-max-12m-50-30"]
    span, load = exact(case["geometry"]["span"]), train("abs-max-12m-50-30")
    published, station = map(exact, case["published"])
    line = moment_line(span, station)
    found = governing_of(line, load, 1)
    assert abs(found.value - published) <= exact(case["tolerance"][0]), named(case)
    assert found.position is not None
    assert found.position.lead_at == station
    assert found.value == absolute_moment(span, load)


def test_two_equal_wheels() -> None:
    case = CASES["two-equal-wheels-formula"]
    moments, shears = case["published"]
    for distance, moment, shear in zip(case["param_values"], moments, shears, strict=True):
        load = make_load((1, 0), (1, exact(distance)))
        tolerance = exact(case["tolerance"])
        assert abs(absolute_moment(Fraction(1), load) - exact(moment)) <= tolerance, distance
        assert abs(end_shear(Fraction(1), load) - exact(shear)) <= tolerance, distance


def patch(case: Case) -> MovingLoad:
    """A uniform load of fixed length alone."""
    load = case["load"]
    return make_load(strips=[make_strip(exact(load["intensity"]), 0, length=exact(load["length"]))])


def test_uniform_load_of_fixed_length_on_an_overhang() -> None:
    case = CASES["det-overhang-moving-udl"]
    geometry = case["geometry"]
    supports = [(exact(one["x"]), one["type"]) for one in geometry["supports"]]
    beam = make_beam(exact(geometry["x_end"]), supports, sections=[exact(case["at"])])
    shear, moment = line_of(beam, "shear", "1"), line_of(beam, "moment", "1")
    senses: tuple[Literal[1, -1], ...] = (1, -1)
    found = [
        governing_of(line, patch(case), sense).value for line in (shear, moment) for sense in senses
    ]
    for ours, published, tolerance in zip(found, case["published"], case["tolerance"], strict=True):
        assert abs(ours - exact(published)) <= exact(tolerance), named(case)


def test_tracked_vehicle_at_midspan() -> None:
    case = CASES["irc-70R-tracked-49m"]
    line = moment_line(exact(case["geometry"]["span"]), exact(case["at"]))
    missing = greatest(line, patch(case)) - exact(case["published"])
    assert abs(missing) <= exact(case["tolerance"]), named(case)


def test_no_case_is_left_out() -> None:
    """Every case of an item that this release computes has a test; none is doubted by its note."""
    single = {
        "e80-60ft-wheel3-at-centre",
        "abs-max-12m-50-30",
        "two-equal-wheels-formula",
        "det-overhang-moving-udl",
        "irc-70R-tracked-49m",
    }
    covered = {name for name, case in CASES.items() if case["item"] in (1, 2, 3)}
    assert {*LINES, *PLACED, *COEFFICIENTS, *TABLES, *single} == covered
    assert Counter(case["item"] for case in CASES.values()) == COUNTED
    assert all(CASES[name]["agrees"] for name in covered)
