"""Many jobs from Python: equal to single reviews whatever does the work, bounded, and none stops another."""

from __future__ import annotations

import json
import os
import pickle
from collections.abc import Callable, Iterator
from concurrent.futures import BrokenExecutor, Executor, Future, ProcessPoolExecutor, ThreadPoolExecutor
from multiprocessing import get_context
from pathlib import Path
from typing import Any

import pytest

from setupcheck import Reviewed, example, review, review_many
from setupcheck.flow import Review
from setupcheck.ledger.combine import Ends, combine
from setupcheck.ledger.draws import DRAWS_KEPT
from setupcheck.many import one_line
from setupcheck.quantities.book import Known
from setupcheck.report.json import as_json

GOOD = [example("index-plate"), example("sprocket"), example("pressed-bush")]


class Spot(Executor):
    """Does the work on the spot, and remembers how many pieces were handed over and not yet asked for."""

    def __init__(self) -> None:
        self.pieces: list[int] = []
        self.open = 0
        self.most = 0

    def submit(self, fn: Callable[..., Any], /, *args: Any, **kwargs: Any) -> Future[Any]:
        fn, args, kwargs = pickle.loads(pickle.dumps((fn, args, kwargs)))  # as if it went to another machine
        self.pieces.append(len(args[-1]))
        self.open += 1
        self.most = max(self.most, self.open)
        done: Future[Any] = _Counted(self)
        done.set_result(pickle.loads(pickle.dumps(fn(*args, **kwargs))))
        return done


class _Counted(Future[Any]):
    def __init__(self, of: Spot) -> None:
        super().__init__()
        self.of = of

    def result(self, timeout: float | None = None) -> Any:
        self.of.open -= 1
        return super().result(timeout)


class Breaks(Executor):
    """Takes two pieces, does neither, and takes no more."""

    def __init__(self) -> None:
        self.taken = 0

    def submit(self, fn: Callable[..., Any], /, *args: Any, **kwargs: Any) -> Future[Any]:
        self.taken += 1
        if self.taken > 2:
            raise BrokenExecutor("broken")
        lost: Future[Any] = Future()
        lost.set_exception(BrokenExecutor("a worker was killed"))
        return lost


def same_as_single(found: list[Reviewed]) -> None:
    assert [str(path) for path in GOOD] == [one.path for one in found]
    for one, path in zip(found, GOOD, strict=True):
        alone = review(path)
        assert (alone.verdict, None) == (one.verdict, one.error)
        assert as_json(alone) == json.dumps(one.data, ensure_ascii=False, indent=1, allow_nan=False) + "\n"


def test_in_this_process_it_is_what_single_reviews_say() -> None:
    same_as_single(list(review_many(GOOD)))


def test_threads_say_the_same() -> None:
    with ThreadPoolExecutor(3) as executor:
        same_as_single(list(review_many(GOOD, executor, chunk=1)))


def test_processes_say_the_same() -> None:
    with ProcessPoolExecutor(2, mp_context=get_context("spawn")) as executor:
        same_as_single(list(review_many(GOOD, executor, chunk=2)))


def test_an_executor_of_ones_own_says_the_same() -> None:
    same_as_single(list(review_many(GOOD, Spot(), chunk=2)))


def test_the_executor_of_another_engine_says_the_same() -> None:
    """Optional: another engine's processes, where it is installed."""
    loky = pytest.importorskip("loky")
    executor = loky.get_reusable_executor(max_workers=2)
    try:
        same_as_single(list(review_many(GOOD, executor, chunk=1)))
    finally:
        executor.shutdown(wait=True)


def test_work_is_handed_over_in_bounded_pieces_and_paths_are_taken_as_they_are_needed(tmp_path: Path) -> None:
    taken = []

    def endless() -> Iterator[Path]:
        number = 0
        while True:
            taken.append(number)
            yield tmp_path / f"{number}.yaml"
            number += 1

    spot = Spot()
    found = review_many(endless(), spot, chunk=3, ahead=4)
    assert [str(tmp_path / f"{i}.yaml") for i in range(20)] == [next(found).path for _ in range(20)]
    assert {3} == set(spot.pieces)
    assert 4 == spot.most
    assert len(taken) <= 20 + 3 * 4 + 3


def test_leaving_early_calls_back_what_waits() -> None:
    with ThreadPoolExecutor(1) as executor:
        found = review_many(GOOD * 10, executor, chunk=1, ahead=20)
        next(found)
        waiting = executor._work_queue.qsize()
        found.close()  # type: ignore[attr-defined]
        assert waiting > 1
    assert executor._work_queue.qsize() <= 1


def test_a_bad_file_stands_in_its_place_and_stops_nothing(tmp_path: Path) -> None:
    bad = tmp_path / "bad.yaml"
    bad.write_text(GOOD[0].read_text().replace("title:", "titel:"))
    first, second, third = review_many([bad, tmp_path / "none.yaml", GOOD[0]])
    assert ("unreadable", "unreadable", "pass") == (first.verdict, second.verdict, third.verdict)
    assert "Did you mean title?" in (first.error or "")
    assert str(bad) == first.data["file"]
    assert {"at", "line", "column", "problem", "hint"} == set(first.data["error"][0])
    assert "there is no such file" == second.data["error"][0]["problem"]


@pytest.mark.skipif(not hasattr(os, "geteuid") or os.geteuid() == 0, reason="root may read every file")
def test_a_file_that_may_not_be_read_is_told(tmp_path: Path) -> None:
    shut = tmp_path / "shut.yaml"
    shut.write_text(GOOD[0].read_text())
    shut.chmod(0)
    (one,) = review_many([shut])
    assert "may not be read" in (one.error or "")


def test_a_fault_of_the_program_costs_one_job(monkeypatch: pytest.MonkeyPatch) -> None:
    from setupcheck import flow

    judge = flow.review

    def faulty(path: str, **how: Any) -> object:
        if path.endswith("sprocket.yaml"):
            raise ZeroDivisionError("of a test")
        return judge(path, **how)

    monkeypatch.setattr(flow, "review", faulty)
    found = list(review_many(GOOD))
    assert ["pass", "unreadable", "pass"] == [one.verdict for one in found]
    assert "ZeroDivisionError: of a test" in " ".join((found[1].error or "").split())


def test_an_executor_that_breaks_loses_what_it_had_and_the_rest_is_done_here() -> None:
    found = list(review_many([*GOOD, *GOOD], Breaks(), chunk=1))
    assert ["unreadable"] * 2 + ["pass"] * 4 == [one.verdict for one in found]
    assert [str(path) for path in [*GOOD, *GOOD]] == [one.path for one in found]
    assert "a worker was killed" in " ".join((found[0].error or "").split())


def test_a_house_file_acts_on_every_job_and_a_broken_one_is_told_of_each(tmp_path: Path) -> None:
    house = tmp_path / "house.yaml"
    house.write_text("house: Toolroom\nlevels:\n  - {rule: HOLD-004, level: fail, who: A, why: b, when: 2027-01-15}\n")
    assert {"Toolroom"} == {one.data["house"]["name"] for one in review_many(GOOD[:2], house=house)}
    house.write_text("house: Toolroom\nlevls: []\n")
    assert ["unreadable"] * 2 == [one.verdict for one in review_many(GOOD[:2], house=str(house))]


def test_a_line_of_json_is_one_line_and_says_the_same() -> None:
    (one,) = review_many(GOOD[:1])
    line = one_line(one.data)
    assert 1 == len(line.splitlines())
    assert one.data == json.loads(line)
    assert "\udc80" == json.loads(one_line({"file": "\udc80"}))["file"]
    one_line({"file": "\udc80"}).encode()


def test_a_review_draws_when_it_is_asked_and_older_ones_let_go_and_draw_the_same_again() -> None:
    def likely(found: Review) -> list[Ends]:
        return [one.combined.likely for one in found.results.values()]

    first = review(example("rotator-worm-wheel"))
    answer = next(a for (name, _), a in first.book.made.items() if name == "route.draws")
    assert isinstance(answer, Known)
    assert not answer.value._causes
    told = likely(first)
    assert answer.value._causes
    for one in (example("rotator-worm-wheel"), *GOOD[: DRAWS_KEPT - 1]):
        assert answer.value._causes
        likely(review(one))
    assert not answer.value._causes
    assert not answer.value._arcs
    for one, before in zip(first.results.values(), told, strict=True):
        limits = {"low": one.stack.low, "high": one.stack.high, "confidence": first.loaded.job.confidence}
        again = combine(one.figure, answer.value, **limits).likely
        assert before in (again, Ends(max(again.low, 0.0), max(again.high, 0.0)))  # a torque is not below zero
    assert answer.value._causes
