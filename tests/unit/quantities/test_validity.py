"""Every number says how far it holds; within that range it is told, beyond it it is open and says why."""

from __future__ import annotations

import inspect
import json
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from functools import cache, partial
from pathlib import Path

import pytest

from setupcheck.errors import JobError
from setupcheck.flow import prepare
from setupcheck.jobfile.changing import Change, changed
from setupcheck.jobfile.reading import LoadedJob, read_job_text
from setupcheck.quantities.book import Book, Known, Open, Quantity, Scope
from setupcheck.quantities.scopes import stack_of
from setupcheck.quantities.tables import TABLES
from setupcheck.quantities.validity import LIMITS, WITHOUT, Limit, limits_of, range_in_words
from setupcheck.yamlfile import Data, parse, read_text
from tests.catch.making import good
from tests.jobs.test_clamping import RING
from tests.unit.quantities.joint_text import WHOLE

NUMBERS = tuple(quantity for quantity in TABLES if quantity.unit)
BY_NAME = {quantity.name: quantity for quantity in TABLES}
KEPT_OUT = {
    "divide.step_error",  # the reader takes steps above zero alone
    "cutter.passes_left",  # and passes and depths above zero
    "prove.stock",  # and gaps of the prove-out that are shallower than the cut
    "cutter.early_touch",  # the width of a throat follows from its own radius
    # heights and depths of a profile that is made to reach beyond them, or else is open itself
    *(f"insert.{name}" for name in ("pitch_width", "angle", "corner", "works_from", "works_to")),
    *(f"insert.{name}" for name in ("largest_wheel", "rounding", "change_at_pitch")),
}
"""Formulas whose refusals nothing that is read can come to."""
OF_TESTS = {"ring": WHOLE, "tube": RING}


@dataclass(frozen=True)
class Case:
    """One row of validity_cases.yaml: a job within a limit, and the same beyond it."""

    name: str
    job: str
    inside: tuple[Change, ...]
    outside: tuple[Change, ...]
    of: tuple[str, ...]


def _changes(data: Data) -> tuple[Change, ...]:
    assert isinstance(data, Mapping)
    return tuple(
        Change(key, json.dumps(value, ensure_ascii=False) if isinstance(value, dict | list) else str(value))
        for key, value in data.items()
    )


def _cases(rows: str, name: str) -> Iterator[Case]:
    path = Path(__file__).with_name("validity_cases.yaml")
    data = parse(read_text(path), path.name).data
    assert isinstance(data, dict)
    found = data[rows]
    assert isinstance(found, list)
    for row in found:
        assert isinstance(row, dict)
        assert not row.keys() - {name, "job", "inside", "outside", "of"}, row
        inside = {change.key: change for change in _changes(row.get("inside", {}))}
        both = {**inside, **{change.key: change for change in _changes(row["outside"])}}
        of = row.get("of", [])
        assert isinstance(of, list)
        yield Case(
            str(row[name]), str(row["job"]), tuple(inside.values()), tuple(both.values()), tuple(str(one) for one in of)
        )


CASES = tuple(_cases("cases", "limit"))
REFUSED = tuple(_cases("refused", "says"))
LIMIT = {limit.name: limit for limit in LIMITS}


def looked_at(case: Case) -> tuple[str, ...]:
    return case.of or LIMIT[case.name].at


def loaded(job: str, changes: Sequence[Change]) -> LoadedJob:
    base = read_job_text(OF_TESTS[job], f"{job}.yaml") if job in OF_TESTS else good(job)
    return changed(base, changes) if changes else base


@cache
def book(job: str, changes: tuple[Change, ...]) -> Book:
    return prepare(loaded(job, changes))[1]


def _pairs(case: Case, quantity: Quantity) -> Iterator[tuple[Scope, Scope]]:
    """Each instance within the range, and the same one beyond."""
    beyond = {scope.key: scope for scope in book(case.job, case.outside).instances(quantity.per)}
    for scope in book(case.job, case.inside).instances(quantity.per):
        if scope.key in beyond and _belongs(LIMIT[case.name], scope):
            yield scope, beyond[scope.key]


def _belongs(limit: Limit, scope: Scope) -> bool:
    return scope.kind != "stack" or not limit.what or stack_of(scope).require.what in limit.what


def _says(answer: object, limit: Limit) -> bool:
    return isinstance(answer, Open) and limit.because in answer.because


@pytest.mark.parametrize("name", [quantity.name for quantity in NUMBERS])
def test_every_number_says_how_far_it_holds(name: str) -> None:
    assert range_in_words(name).startswith("holds ")


def test_no_range_is_stated_of_a_quantity_that_is_not_there() -> None:
    stated = [*(name for limit in LIMITS for name in limit.at), *(name for taken in WITHOUT for name in taken.names)]
    assert [] == [name for name in stated if name not in BY_NAME]


def test_a_number_that_a_limit_stands_behind_is_not_said_to_be_without() -> None:
    without = [name for taken in WITHOUT for name in taken.names]
    assert len(without) == len(set(without))
    assert [] == [name for name in without if limits_of(name) or not BY_NAME[name].unit]


def _refuses(quantity: Quantity) -> bool:
    """Whether the formula itself refuses sizes, or turns the refusal of a leaf into a reason."""
    of: object = quantity.of
    while isinstance(of, partial):
        of = of.func
    assert inspect.isfunction(of)
    text = inspect.getsource(inspect.unwrap(of))
    return any(word in text for word in ("in_range", "raise OutOfRange", "because="))


def test_a_formula_that_refuses_has_a_limit_of_its_own() -> None:
    own = {name for limit in LIMITS for name in limit.at}
    assert {q.name for q in NUMBERS if _refuses(q)} - own == KEPT_OUT


@pytest.mark.parametrize("limit", LIMITS, ids=[limit.name for limit in LIMITS])
def test_every_limit_is_tried_at_each_of_its_quantities(limit: Limit) -> None:
    tried = {name for case in CASES if case.name == limit.name for name in looked_at(case)}
    assert set(limit.at) == tried


@pytest.mark.parametrize("case", CASES, ids=[f"{case.name}-{number}" for number, case in enumerate(CASES)])
def test_within_its_range_a_number_is_told_and_beyond_it_is_open_with_the_reason(case: Case) -> None:
    limit, within, beyond = LIMIT[case.name], book(case.job, case.inside), book(case.job, case.outside)
    for name in looked_at(case):
        told = [(s, t) for s, t in _pairs(case, BY_NAME[name]) if isinstance(within.get(name, s), Known)]
        assert told, f"{name} is nowhere told within {limit.holds}"
        assert any(_says(beyond.get(name, t), limit) for _, t in told), [beyond.get(name, t) for _, t in told]


@pytest.mark.parametrize("case", CASES, ids=[f"{case.name}-{number}" for number, case in enumerate(CASES)])
def test_what_is_made_of_a_number_beyond_its_range_is_open_too(case: Case) -> None:
    limit, beyond = LIMIT[case.name], book(case.job, case.outside)
    for quantity in NUMBERS:
        if limit not in limits_of(quantity.name):
            continue
        for _, scope in _pairs(case, quantity):
            homes = [(name, beyond.home(name, scope)) for name in limit.at]
            if any(_says(beyond.get(n, home), limit) for n, home in homes if home is not None and _behind(quantity, n)):
                assert not isinstance(beyond.get(quantity.name, scope), Known), quantity.name


def _behind(quantity: Quantity, name: str) -> bool:
    """Whether `name` is that quantity, or what it cannot do without."""
    return name == quantity.name or any(
        _behind(BY_NAME[inner], name) for inner in quantity.inputs.values() if inner in BY_NAME
    )


@pytest.mark.parametrize("case", REFUSED, ids=[f"{case.name}-{number}" for number, case in enumerate(REFUSED)])
def test_what_the_reader_keeps_out_no_formula_has_to(case: Case) -> None:
    assert case.name in {taken.refused for taken in WITHOUT}
    loaded(case.job, case.inside)
    with pytest.raises(JobError) as wrong:
        loaded(case.job, case.outside)
    assert case.name in str(wrong.value)


def test_every_refusal_of_the_reader_that_is_named_is_tried() -> None:
    assert {taken.refused for taken in WITHOUT if taken.refused} == {case.name for case in REFUSED}


@pytest.mark.parametrize("case", CASES, ids=[f"{case.name}-{number}" for number, case in enumerate(CASES)])
def test_a_number_without_a_limit_is_open_for_a_missing_entry_alone(case: Case) -> None:
    beyond = book(case.job, case.outside)
    for name in (name for taken in WITHOUT for name in taken.names):
        for scope in beyond.instances(BY_NAME[name].per):
            answer = beyond.get(name, scope)
            assert not isinstance(answer, Open) or answer.missing, (name, answer)


def test_the_figure_of_a_requirement_has_the_limits_of_its_own_kind() -> None:
    assert "single point" in range_in_words("stack.worst", "backlash")
    assert "single point" not in range_in_words("stack.worst", "run-out")
    assert "lean" in range_in_words("stack.worst", "run-out")
