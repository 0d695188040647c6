"""Extreme but valid values: parts of 0.1 mm to 5 m, one tooth to 1000, errors all zero or huge.

Whatever the sizes, a review ends with a verdict, every figure is finite and in order, and its JSON holds plain numbers.
"""

from __future__ import annotations

import json
import math

import pytest
from hypothesis import Phase, given, settings
from hypothesis import strategies as st

from setupcheck.errors import SetupcheckError
from setupcheck.flow import Review, review
from setupcheck.report.json import as_json
from setupcheck.report.text import as_text

from .drawn_jobs import TEETH, Node, changed, few, jobs, loaded

LARGEST = 120.0
"""Diameter of the drawn jobs' bar [mm]."""
SMALL, PLAIN, HUGE = 0.1 / LARGEST, 1.0, 5000.0 / LARGEST
SIZES = {
    "at", "from", "to", "diameter", "on_circle", "width", "across", "radius", "over", "leave", "leave_on_diameter",
    "length", "between", "spindle_to_axis",
}  # fmt: skip
LIMITS = {"at_most", "at_least"}
OF_SEVERAL = {"cumulative-pitch", "single-pitch", "gap-centre-pitch", "index-within", "on-workpiece"}
FEW_REVIEWS = settings(few, max_examples=6, phases=[Phase.generate])
VERDICTS = {"pass", "warn", "fail", "open"}


def extreme(job: Node, *, size: float, teeth: int, errors: float) -> Node:
    """The drawn job with sizes, number of teeth and errors changed; counts of holes, angles and limits stay.

    size, errors  factors; limits of lengths go with the size, since they say how long the part is
    """

    def one(path: tuple[str, ...], value: object) -> object:
        name = path[-1]
        if name == "count" and value == TEETH:
            return teeth
        if name == "number":
            return 1
        if isinstance(value, int | float) and name in SIZES:
            return value * size
        if not isinstance(value, str) or ("require" in path and name in LIMITS):
            return value
        if "±" in value:
            middle, _, error = value.partition("±")
            return f"{float(middle) * size:.12f} ±{float(error) * errors:.12f}"
        number, _, unit = value.rpartition(" ")
        if "between" in path:
            return f"{float(number) * size:.12f} mm"
        if unit == "um":
            return f"{float(number) * errors:.12f} um"
        return f'{float(value[:-1]) * errors:.12f}"' if value.endswith('"') else value

    made = changed(job, one)
    assert isinstance(made, dict)
    if teeth == 1:  # one tooth has no pitch, and the reader says so
        made["require"] = [r for r in made["require"] if r["what"] not in OF_SEVERAL]
    return made


def numbers(tree: object) -> list[float]:
    """Every number in a report."""
    if isinstance(tree, dict):
        return [n for node in tree.values() for n in numbers(node)]
    if isinstance(tree, list):
        return [n for node in tree for n in numbers(node)]
    return [float(tree)] if isinstance(tree, int | float) and not isinstance(tree, bool) else []


def refused(constant: str) -> None:
    raise AssertionError(f"JSON knows no {constant}")


def in_order(found: Review) -> None:
    for name, result in found.results.items():
        c = result.combined
        ends = (c.worst.low, c.rss.low, c.likely.low, c.likely.high, c.rss.high, c.worst.high, c.base)
        assert all(math.isfinite(x) for x in ends), (name, ends)
        room = 2e-6 * max(abs(c.worst.low), abs(c.worst.high))
        assert c.worst.low <= c.likely.low <= c.likely.high <= c.worst.high, name
        assert c.worst.low - room <= c.rss.low <= c.rss.high <= c.worst.high + room, name
        if not result.figure.signed:
            assert 0.0 <= c.rss.high, name
        if c.chance is not None:
            assert c.chance_error is not None
            assert 0.0 <= c.chance <= 1.0 and math.isfinite(c.chance_error), name


def ends_well(job: Node) -> Review:
    found = review(loaded(job))
    assert found.verdict in VERDICTS
    data = json.loads(as_json(found), parse_constant=refused)
    assert all(math.isfinite(n) for n in numbers(data))
    text = as_text(found)
    assert not {"nan", "inf"} & set(text.replace(",", " ").split())
    in_order(found)
    assert found.results, "not one figure of the job could be told"
    return found


@pytest.fixture(scope="module")
def drawn() -> Node:
    """One job of the drawn ones, always the same."""
    kept: list[Node] = []

    @settings(few, max_examples=1)
    @given(jobs())
    def draw(job: Node) -> None:
        kept.append(job)

    draw()
    return kept[0]


CORNERS = [
    (size, teeth, errors)
    for size, teeth, errors in (
        (SMALL, 1, 1.0),
        (SMALL, 2, 0.0),
        (SMALL, 1000, 2000.0),
        (HUGE, 1, 2000.0),
        (HUGE, 1000, 0.0),
        (HUGE, 3, 2000.0),
    )
]


@pytest.mark.parametrize(("size", "teeth", "errors"), CORNERS)
def test_every_corner_ends_with_a_verdict_and_numbers_in_order(
    drawn: Node, size: float, teeth: int, errors: float
) -> None:
    ends_well(extreme(drawn, size=size, teeth=teeth, errors=errors))


@FEW_REVIEWS
@given(
    jobs(),
    st.sampled_from([SMALL, 0.01, PLAIN, HUGE]),
    st.sampled_from([1, 2, 3, 24, 99]),
    st.sampled_from([0.0, 1e-6, 1.0, 100.0, 2000.0]),
)
def test_what_is_drawn_between_the_corners_does_so_too(job: Node, size: float, teeth: int, errors: float) -> None:
    try:
        made = extreme(job, size=size, teeth=teeth, errors=errors)
        loaded(made)
    except SetupcheckError as why:  # a contradiction of sizes is told as one
        assert str(why)
        return
    ends_well(made)
