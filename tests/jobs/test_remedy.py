"""Remedies at full length: what is printed, typed in as it stands, does what it says; a step less does not."""

from __future__ import annotations

import re

import pytest

from setupcheck.flow import mend, prepare, vary
from setupcheck.jobfile.changing import Change
from setupcheck.jobfile.editing import Exchange, edited
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.book import Known
from setupcheck.quantities.judged import Result
from setupcheck.quantities.single_causes import IN_HAND, Row, Table
from setupcheck.report.remedy import as_text
from tests.jobs.remedy_cases import FAILING, GOOD, HIDDEN, job, judged, mended, outside, texts
from tests.jobs.remedy_jobs import (
    edits_in,
    proposals_in,
)

# -- what the command is for


def test_the_hidden_run_out_goes_from_fail_to_pass_with_nothing_but_what_was_printed() -> None:
    found, all_of_it = mended(HIDDEN)
    assert found.verdict == "fail"
    text = as_text(found, all_of_it)
    edits = edits_in(proposals_in(text)[0])
    assert edits
    after = judged(HIDDEN, edits)
    assert not outside(after)
    assert after.verdict == "pass"
    assert not [f for f in after.evaluation.findings if f.verdict in ("fail", "warn", "open")]


def test_the_datum_that_was_cut_away_is_replaced_by_what_was_printed() -> None:
    text = as_text(*mended("datum-cut-away"))
    after = judged("datum-cut-away", edits_in(proposals_in(text)[0]))
    assert after.verdict == "pass"


def test_vary_takes_what_is_printed() -> None:
    changes = [e for e in edits_in(proposals_in(as_text(*mended(HIDDEN)))[0]) if isinstance(e, Change)]
    assert vary(job(HIDDEN), changes).after.verdict == "pass"


# -- what each entry alone has to become


def excess(name: str, edits: object, table: Table) -> float:
    """How far outside its aim the stack of a table is once something is typed in: its limit, or the tenth in hand."""
    _, book = prepare(edited(job(name), edits))  # type: ignore[arg-type]
    scope = next(s for s in book.instances("stack") if s.key == table.key)
    known = book.get("stack.combined", scope)
    assert isinstance(known, Known)
    result = known.value
    assert isinstance(result, Result) and result.margin is not None
    return (IN_HAND * result.scale if table.tight else 0.0) - result.margin


def more(row: Row, inches: bool) -> tuple[Change, ...]:
    """The change of a row with the last decimal of its last number two steps up."""
    step = 0.02 if inches else 0.2

    def up(change: Change) -> Change:
        head, number, unit = re.fullmatch(r"(.*?)([0-9.]+)([^0-9.]*)", change.value).groups()  # type: ignore[union-attr]
        if "±" in head and not head.endswith('"±') and change.value.strip()[0] != "±":
            larger = float(number) + (0.00002 if inches else 0.0002)
            return Change(change.key, f"{head}{larger:.6f}{unit}")
        far = 0.2 if unit == '"' else step
        return Change(change.key, f"{head}{float(number) + far:.2f}{unit}")

    return tuple(map(up, row.typed))


TABLED = (*FAILING, "rotator-worm-wheel", "index-plate", "held twice", "a covered bore", "the wrong order")


def rows(name: str) -> list[tuple[Table, Row]]:
    """Every entry of a job that can do it alone and is typed as one number."""
    return [
        (table, row) for table in mended(name)[1].tables for row in table.enough if row.typed and row.entry.of_the_job
    ]


@pytest.mark.parametrize("name", TABLED)
def test_a_value_that_does_it_alone_does_and_a_step_less_does_not(name: str) -> None:
    inches = job(name).job.units == "in"
    for table, row in rows(name):
        told = f"{table.key}, {row.entry.path}"
        assert excess(name, row.typed, table) <= 1e-9, told
        assert excess(name, more(row, inches), table) > 0.0, told


def test_there_are_enough_of_them() -> None:
    assert sum(len(rows(name)) for name in TABLED) > 60


@pytest.mark.parametrize("name", FAILING)
def test_what_does_not_do_it_alone_leaves_the_stack_outside_at_its_last_decimal(name: str) -> None:
    loaded = job(name)
    for table in mended(name)[1].tables:
        for row in table.some[:3]:
            least = (
                '0.1"' if row.entry.says[0].unit == "arcsec" else "0.01 thou" if loaded.job.units == "in" else "0.1 um"
            )
            path = row.entry.path
            if (
                not path.startswith("setups.")
                or row.entry.says[0].least
                or len(row.entry.paths) > 1
                or row.entry.also
                or path.endswith("length")
            ):
                continue
            node: object = loaded.tree.data
            try:
                for step in loaded.loc(path):
                    node = node[step]  # type: ignore[index]
            except (KeyError, TypeError, IndexError):
                continue
            if isinstance(node, dict):
                path += (
                    ".measured" if "measured" in node else ".at_most" if "at_most" in node or "device" in node else ""
                )
            if isinstance(node, str) and re.search(r"\d\s*±", node):
                continue
            if isinstance(node, dict) and path == row.entry.path:
                continue
            assert excess(name, [Change(path, least)], table) > 0.0, row


@pytest.mark.parametrize("name", FAILING)
def test_the_spread_over_all_brings_its_stack_inside(name: str) -> None:
    tried = 0
    for table in mended(name)[1].tables:
        if not table.tight and table.spread.typed:
            tried += 1
            assert excess(name, table.spread.typed, table) <= 1e-9
    assert tried or name in ("angle-of-the-tip", "shim-on-the-wrong-side")


def test_a_kept_device_changes_in_all_its_setups() -> None:
    _, all_of_it = mended("a worn mandrel")
    rows = [r for t in all_of_it.tables for r in t.rows if "and_centre.runout" in r.entry.path and r.entry.also]
    assert rows
    for row in rows:
        assert {row.entry.path, *row.entry.also} == {f"setups.{op}.hold.and_centre.runout" for op in (30, 40)}
        assert not row.needed or len(row.typed) == 2


# -- good enough already


@pytest.mark.parametrize("name", [path.stem for path in GOOD])
def test_what_could_be_twice_as_large_may_each_alone(name: str) -> None:
    found, all_of_it = mended(name)
    assert found.verdict == "pass"
    claimed = [one for one in all_of_it.enough if one.could_double]
    assert claimed
    for one in claimed:
        assert one.typed, one
        assert not outside(judged(name, one.typed)), one.entry.path


@pytest.mark.parametrize("name", [path.stem for path in GOOD])
def test_what_needs_not_be_finer_gains_nothing_when_it_is(name: str) -> None:
    found, all_of_it = mended(name)
    least = "0.01 thou" if job(name).job.units == "in" else "0.1 um"
    for one in all_of_it.enough:
        if one.no_finer and len(one.typed) == 1:
            after = judged(name, [Change(one.typed[0].key, least)])
            for key, result in found.results.items():
                if result.margin:
                    assert (after.results[key].margin or 0.0) - result.margin < 0.0101 * result.margin


def test_a_job_that_fails_is_told_nothing_of_good_enough() -> None:
    assert mended(HIDDEN)[1].enough == ()
    assert "GOOD ENOUGH" not in as_text(*mended(HIDDEN))


def test_the_next_measurement_gives_what_is_said_of_a_length() -> None:
    """A bound of 15 um found at half of it and known to a tenth: 7.5 um and 1.5 Gaussian standard deviations of 1.5 um."""
    _, all_of_it = mended("rotator-worm-wheel")
    one = next(p for p in all_of_it.pays if p.entry.path == "setups.40.head.mid_plane.error")
    left = 7.5e-3 + 3.0 * 1.5e-3 / 2.0
    assert one.gain == pytest.approx(15e-3 - left)
    after = judged("rotator-worm-wheel", [Change("setups.40.head.mid_plane.error", f"{left * 1000.0:.6f} um")])
    assert after.results[one.key].margin == pytest.approx(one.margin)
    assert [p.gain for p in all_of_it.pays] == sorted((p.gain for p in all_of_it.pays), reverse=True)


# -- what is done stays


@pytest.mark.parametrize("done", [10, 20, 30, 40])
def test_nothing_that_is_done_is_proposed(done: int) -> None:
    text = texts()[HIDDEN].replace("\nplace:", f"\ndone: {done}\nplace:")
    found, all_of_it = mend(read_job_text(text, "job.yaml"))
    gone = [s.op for s in found.loaded.job.setups if s.op <= done]
    typed = [c.key for t in all_of_it.tables for r in t.rows for c in r.typed]
    typed += [c.key for t in all_of_it.tables for c in t.spread.typed]
    typed += [e.key for p in all_of_it.proposals for e in p.edits if not isinstance(e, Exchange)]
    assert not [key for key in typed if key.startswith(tuple(f"setups.{op}." for op in gone))]
    assert not [p for p in all_of_it.proposals if p.idea.op in gone]
    causes = {c.op for t in all_of_it.tables for row in t.done for c in row.entry.causes}
    assert causes & set(gone) or done < 20
    if done >= 30:
        assert "machines.lathe-A.axis_runout" not in typed  # it turned what is done
    assert "Done already, left alone" in as_text(found, all_of_it) or done < 20
