"""The Book: every input wired, no ring, three absences kept apart, everything computed once."""

from __future__ import annotations

import graphlib
import inspect
import math
from dataclasses import dataclass

import pytest

from setupcheck.flow import prepare
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.book import Book, Known, Open, OutOfRange, Quantity, Scope
from setupcheck.quantities.tables import TABLES
from setupcheck.shipped import shipped


def test_every_argument_of_every_formula_is_wired_and_no_input_is_left_over() -> None:
    for q in TABLES:
        assert set(inspect.signature(q.of).parameters) == set(q.inputs), q.name


def test_the_graph_of_quantities_has_no_ring() -> None:
    names = {q.name for q in TABLES}
    graph = {q.name: {n.split(" ")[-1] for n in q.inputs.values() if n.split(" ")[-1] in names} for q in TABLES}
    assert len(list(graphlib.TopologicalSorter(graph).static_order())) == len(TABLES)


def test_every_input_that_names_a_quantity_names_one_that_exists() -> None:
    names = {q.name for q in TABLES}
    for q in TABLES:
        for given in q.inputs.values():
            assert given.startswith((":", "@")) or given.split(" ")[-1] in names, (q.name, given)


def test_every_formula_names_its_source() -> None:
    plumbing = {"route.floor"}
    for q in TABLES:
        assert q.name in plumbing or "Source:" in (inspect.getdoc(q.of) or ""), q.name


@pytest.mark.parametrize("job", sorted(shipped("jobs").glob("*.yaml")), ids=lambda p: p.stem)
def test_every_quantity_of_every_shipped_job_answers(job: object) -> None:
    _, book = prepare(read_job_text(job.read_text(), "job.yaml"))  # type: ignore[attr-defined]
    for q in TABLES:
        for scope in book.instances(q.per):
            assert not isinstance(book.get(q.name, scope), Open), (q.name, scope.key)


@dataclass(frozen=True)
class Node:
    size: float | None = 2.0
    label: str | None = None


JOB = Scope("job", "", Node(), "", line=1)
HOLD = Scope("hold", "10/centre", Node(), "setups.10.hold.centre", 10, 7, (JOB,))


def book(*quantities: Quantity) -> Book:
    return Book(quantities, (JOB, HOLD))


def test_an_entry_left_out_is_open_with_its_path() -> None:
    asked = Quantity("a", "hold", "mm", 1, lambda label: label, {"label": ":label"}, "")
    assert Open(("setups.10.hold.centre.label",)) == book(asked).get("a", HOLD)


def test_a_thing_the_job_does_not_have_is_none_and_not_open() -> None:
    asked = Quantity("a", "join", "mm", 1, lambda: 1.0, {}, "")
    assert book(asked).get("a", HOLD) is None


def test_a_quantity_outside_its_range_is_open_with_the_reason() -> None:
    def refuse() -> float:
        raise OutOfRange("45 deg is too steep")

    assert Open(because="45 deg is too steep") == book(Quantity("a", "hold", "mm", 1, refuse, {}, "")).get("a", HOLD)


def test_a_value_that_is_not_finite_is_open() -> None:
    answer = book(Quantity("a", "hold", "mm", 1, lambda: math.nan, {}, "")).get("a", HOLD)
    assert isinstance(answer, Open)


def test_any_other_exception_is_our_bug_and_keeps_its_traceback() -> None:
    with pytest.raises(ZeroDivisionError):
        book(Quantity("a", "hold", "mm", 1, lambda: 1 / 0, {}, "")).get("a", HOLD)


def test_a_quantity_is_computed_once_and_carries_the_typical_values_it_rests_on() -> None:
    calls: list[int] = []

    def typical() -> Known:
        calls.append(1)
        return Known(3.0, frozenset({"lathe axis"}))

    made = book(
        Quantity("a", "hold", "mm", 1, typical, {}, ""),
        Quantity("b", "hold", "mm", 1, lambda a: a + 1.0, {"a": "a"}, ""),
    )
    assert Known(4.0, frozenset({"lathe axis"})) == made.get("b", HOLD)
    assert Known(3.0, frozenset({"lathe axis"})) == made.get("a", HOLD)
    assert [1] == calls


def test_what_is_missing_of_all_inputs_is_named_together() -> None:
    asked = Quantity("a", "hold", "mm", 1, lambda x, y: 0.0, {"x": ":label", "y": "b"}, "")
    other = Quantity("b", "hold", "mm", 1, lambda: Open(("machines.lathe",)), {}, "")
    assert Open(("setups.10.hold.centre.label", "machines.lathe")) == book(asked, other).get("a", HOLD)
