"""Remedies at full length: what is printed, typed in as it stands, does what it says; a step less does not."""

from __future__ import annotations

import json
import re
from dataclasses import replace
from functools import cache
from pathlib import Path

import pytest
from typer.testing import CliRunner

from setupcheck.cli.main import app
from setupcheck.errors import SetupcheckError
from setupcheck.flow import Review, mend, prepare, review, vary
from setupcheck.jobfile.changing import Change
from setupcheck.jobfile.editing import Exchange, edited
from setupcheck.jobfile.reading import LoadedJob, read_job_text
from setupcheck.quantities.book import Known
from setupcheck.quantities.judged import Result
from setupcheck.quantities.mending import Mended
from setupcheck.quantities.proposals import worst_of
from setupcheck.quantities.rehold import reholds
from setupcheck.quantities.single_causes import IN_HAND, Row, Table
from setupcheck.quantities.trials import Bench
from setupcheck.quantities.witness import witnesses
from setupcheck.report.remedy import as_text
from setupcheck.report.remedy_data import as_data
from setupcheck.shipped import shipped
from tests.jobs.remedy_jobs import (
    COVERED_BORE,
    DEPTH,
    SQUARENESS,
    WRONG_FACE,
    WRONG_ORDER,
    edits_in,
    held_twice,
    proposals_in,
)
from tests.jobs.test_typed_back import SPOILT

GOOD = sorted(shipped("jobs").glob("*.yaml"))
MISTAKES = sorted((shipped("jobs") / "mistakes").glob("*.yaml"))
HIDDEN = "hidden-chuck-run-out"
SLIPS = (
    "a measured hold gone bad, high spot known",
    "a head with a poor wheel",
    "an insert badly measured",
    "a worn mandrel",
    "an edge finder in a hurry",
    "a reamer that wanders",
)
"""Jobs with one entry spoilt, of those whose remedies are typed back elsewhere."""


@cache
def texts() -> dict[str, str]:
    """Every job that is tried here."""
    found = {path.stem: path.read_text("utf-8") for path in (*GOOD, *MISTAKES)}
    for name in SLIPS:
        stem, good, bad = SPOILT[name]
        found[name] = found[stem].replace(good, bad)
    return {
        **found,
        "a covered bore": COVERED_BORE,
        "held twice": held_twice(),
        "the wrong order": WRONG_ORDER,
        "squared on the wrong face": WRONG_FACE.replace("LENGTH", SQUARENESS),
        "stopped on the wrong face": WRONG_FACE.replace("LENGTH", DEPTH),
    }


def job(name: str) -> LoadedJob:
    return read_job_text(texts()[name], "job.yaml")


@cache
def mended(name: str) -> tuple[Review, Mended]:
    return mend(job(name))


FAILING = [HIDDEN, "datum-cut-away", "angle-of-the-tip", "shim-on-the-wrong-side", *SLIPS]


def outside(found: Review) -> set[str]:
    return {key for key, r in found.results.items() if r.margin is not None and r.margin < 0.0}


def judged(name: str, edits: object) -> Review:
    return review(edited(job(name), edits))  # type: ignore[arg-type]


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


ROWS = [
    pytest.param(name, table.key, row, id=f"{name}-{table.key}-{row.entry.path}")
    for name in (*FAILING, "rotator-worm-wheel", "index-plate", "held twice", "a covered bore", "the wrong order")
    for table in mended(name)[1].tables
    for row in table.enough
    if row.typed and row.entry.of_the_job
]


@pytest.mark.parametrize(("name", "key", "row"), ROWS)
def test_a_value_that_does_it_alone_does_and_a_step_less_does_not(name: str, key: str, row: Row) -> None:
    table = next(t for t in mended(name)[1].tables if t.key == key)
    assert excess(name, row.typed, table) <= 1e-9
    assert excess(name, more(row, job(name).job.units == "in"), table) > 0.0


def test_there_are_enough_of_them() -> None:
    assert len(ROWS) > 60


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


# -- other datums and orders


PROPOSED = (
    HIDDEN,
    "datum-cut-away",
    "held twice",
    "an edge finder in a hurry",
    "a covered bore",
    "the wrong order",
    "squared on the wrong face",
    "stopped on the wrong face",
)


@pytest.mark.parametrize("name", PROPOSED)
def test_a_proposal_does_what_it_says_and_spoils_nothing(name: str) -> None:
    before, all_of_it = mended(name)
    text = as_text(before, all_of_it)
    printed = proposals_in(text)
    assert len(printed) == len(all_of_it.proposals) > 0
    for said, one in zip(printed, all_of_it.proposals, strict=True):
        edits = edits_in(said)
        assert tuple(edits) == one.edits
        after = judged(name, edits)
        share = after.results[one.key].margin_share
        assert share == pytest.approx(one.after, abs=1e-9)
        assert outside(before) - outside(after) == set(one.cures)
        assert len(outside(after)) == one.left
        assert outside(after) <= outside(before)
        counts, were = after.evaluation.counts, before.evaluation.counts
        assert counts["fail"] <= were["fail"] and counts["open"] <= were["open"]


def test_a_witness_is_offered_where_the_finished_bore_is_covered() -> None:
    text = as_text(*mended("a covered bore"))
    first = " ".join(proposals_in(text)[0].split())
    assert first.startswith(
        "1 Leave a 3 mm band on outside, turned with back and bore in op 20, and indicate it to 10 um in op 40 instead of "
        "outside. run-out at collar about bore 51.6 um -> 20.9 um, at most 30.0 um; no requirement stays outside."
    )
    assert "parts, disc, surfaces: band-20: {kind: cylinder, diameter: 89.5, from: 0, to: 3}" in first


def test_a_witness_is_not_turned_under_the_jaws() -> None:
    covered = COVERED_BORE.replace("grip: {from: 20, to: 38}", "grip: {from: 1, to: 38}")
    _, all_of_it = mend(read_job_text(covered, "job.yaml"))
    assert not [p for p in all_of_it.proposals if p.idea.kind == "witness"]


def test_a_witness_is_not_turned_on_a_surface_with_limits_or_under_teeth() -> None:
    for old, new in (
        ("outside: {kind: cylinder, diameter: 90,", "outside: {kind: cylinder, diameter: 90 h7,"),
        ("collar:  {", "gear: {kind: teeth, count: 60, on_circle: 86, at: 5, width: 12}\n      collar:  {"),
    ):
        _, all_of_it = mend(read_job_text(COVERED_BORE.replace(old, new), "job.yaml"))
        bands = [p for p in all_of_it.proposals if p.idea.kind == "witness" and p.idea.by]
        assert not bands, new


def test_the_better_order_is_found_and_reviews_better() -> None:
    _, all_of_it = mended("the wrong order")
    first = all_of_it.proposals[0]
    assert first.edits == (Exchange(20, 30),)
    after = judged("the wrong order", first.edits)
    assert [s.op for s in after.loaded.job.setups] == [10, 20, 30]
    assert not outside(after)
    assert first.cautions == ()


@pytest.mark.parametrize(
    ("name", "says", "key"),
    [
        (
            "squared on the wrong face",
            "Square op 40 on front, finished in op 20, instead of step, to 5.0 um.",
            "square",
        ),
        ("stopped on the wrong face", "Stop op 40 on front, finished in op 20, instead of step.", "stop"),
    ],
)
def test_the_face_that_was_made_with_the_datum_is_named(name: str, says: str, key: str) -> None:
    found, all_of_it = mended(name)
    one = next(p for p in all_of_it.proposals if p.idea.kind == key)
    assert [e.key for e in one.edits if isinstance(e, Change)] == [f"setups.40.hold.{key}"]
    assert says in " ".join(as_text(found, all_of_it).split())
    assert [p.idea.kind for p in all_of_it.proposals if p.idea.also is not None] == []  # it adds nothing to that


def test_a_dial_on_the_same_datum_is_named_where_none_trues_it() -> None:
    found, all_of_it = mended("an edge finder in a hurry")
    first = all_of_it.proposals[0]
    assert (first.idea.on, first.idea.was, first.idea.than) == ("bore", "bore", "edge-finder")
    text = " ".join(as_text(found, all_of_it).split())
    assert "True bore in op 30 by indicator to 0.30 thou; now it is found by edge finder." in text
    assert not outside(judged("an edge finder in a hurry", first.edits))


def test_the_most_routes_that_are_tried_are_kept_to_and_said() -> None:
    found = review(job("the wrong order"))
    bench = Bench(found.loaded, found.floor, found.results, most=2)
    key = worst_of(bench)
    assert key is not None
    tried = [*reholds(bench, key), *witnesses(bench, key)]
    assert bench.walks == 2 and bench.met
    assert len(tried) <= 2
    _, whole = mended("the wrong order")
    text = as_text(found, replace(whole, met=True, proposals=()))
    assert "The most routes that are tried in one run were tried; there may be better ones." in " ".join(text.split())


def test_an_order_that_needs_what_comes_later_is_not_offered() -> None:
    text = texts()["the wrong order"].replace("centre: {on: nose, by: soft-jaws, runout: 30 um}",
                                              "centre: {on: bore, by: expanding-mandrel, runout: 30 um}")  # fmt: skip
    _, all_of_it = mend(read_job_text(text.replace("state: rough}", "state: rough}  #"), "job.yaml"))
    assert not [p for p in all_of_it.proposals if p.idea.kind == "swap"]


def test_two_holdings_that_could_be_one_are_named() -> None:
    found, all_of_it = mended("held twice")
    (one,) = all_of_it.proposals
    after = judged("held twice", edits_in(proposals_in(as_text(found, all_of_it))[0]))
    assert one.saves == 1
    holds = [sum(s.hold is not None for s in r.loaded.job.setups) for r in (found, after)]
    assert holds[1] == holds[0] - 1
    assert ["HOLD-014"] == [f.rule for f in found.evaluation.findings if f.verdict != "pass"]
    assert after.verdict == "pass"
    for key, result in found.results.items():
        margin = after.results[key].margin
        assert margin is not None and result.margin is not None and margin >= result.margin - 1e-9


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


# -- the command


def run(*args: str) -> tuple[int, str]:
    result = CliRunner().invoke(app, ["remedy", *args])
    if isinstance(result.exception, SetupcheckError):
        return 2, str(result.exception)
    assert result.exception is None or isinstance(result.exception, SystemExit), result.exception
    return result.exit_code, result.output


def test_the_command_ends_as_the_review_does() -> None:
    assert run(str(MISTAKES[0]))[0] == 3
    code, text = run("jobs/coupling-hub.yaml")
    assert code == 0
    assert "FEWER HOLDINGS" not in text


@pytest.mark.parametrize("name", [*FAILING, *(path.stem for path in GOOD), "a covered bore", "the wrong order"])
def test_no_line_is_wider_than_eighty_columns_and_nothing_is_called_safe(name: str) -> None:
    text = as_text(*mended(name))
    assert [line for line in text.splitlines() if len(line) > 80] == []
    body = text.split("Planning aid only")[0].lower()
    assert not re.search(r"\bsafe\b|approved|compliant", body)


def test_one_requirement_may_be_asked_for_alone() -> None:
    code, text = run(str(shipped(f"jobs/mistakes/{HIDDEN}.yaml")), "--of", "require[2]")
    assert code == 3
    assert "OUTSIDE  single-pitch" in text
    assert text.count("OUTSIDE  ") == 1 and "TIGHT" not in text
    code, text = run("jobs/rotator-worm-wheel.yaml", "--of", "require[9]")
    assert code == 0 and "allowance" in text


@pytest.mark.parametrize(
    ("of", "says"),
    [
        ("require[13]", "it has require[1] to require[12]"),
        ("require[0]", "it has require[1] to require[12]"),
        ("run-out", "is no requirement of this job"),
        ("\x1b[31mrequire[1]", "is no requirement of this job"),
    ],
)
def test_a_requirement_that_is_not_there_is_refused(of: str, says: str) -> None:
    code, text = run("jobs/rotator-worm-wheel.yaml", "--of", of)
    assert code == 2
    assert says in text and "\x1b" not in text


def test_a_requirement_that_cannot_be_told_is_refused() -> None:
    text = texts()["rotator-worm-wheel"].replace("centre_distance: 66.000 ±0.010, ", "")
    with pytest.raises(SetupcheckError, match=r"require\[10\] cannot be told yet"):
        mend(read_job_text(text, "job.yaml"), of="require[10]")


def test_a_job_without_requirements_or_setups_is_told_so(tmp_path: Path) -> None:
    head = texts()["rotator-worm-wheel"].split("\nsetups:")[0]
    found, all_of_it = mend(read_job_text(head, "job.yaml"))
    assert all_of_it.worst is None
    assert "none of 0 requirements outside" in as_text(found, all_of_it)
    missing = tmp_path / "none.yaml"
    code, text = run(str(missing))
    assert code == 2 and "none.yaml" in text


@pytest.mark.parametrize("name", [HIDDEN, "held twice", "index-plate", "a covered bore", "the wrong order"])
def test_the_records_say_what_the_text_says(name: str) -> None:
    found, all_of_it = mended(name)
    data = json.loads(json.dumps(as_data(found, all_of_it), allow_nan=False))
    assert data["verdict"] == found.verdict
    assert len(data["proposals"]) == len(all_of_it.proposals)
    for said, one in zip(data["proposals"], all_of_it.proposals, strict=True):
        assert said["left_outside"] == one.left
        assert [e["set"] for e in said["edits"] if "set" in e] == [e.key for e in one.edits if isinstance(e, Change)]
    for said, table in zip(data["stacks"], all_of_it.tables, strict=True):
        assert said["name"] == table.key
        assert len(said["alone"]) == len(table.enough)


def test_json_is_printed_by_the_command(tmp_path: Path) -> None:
    twice = tmp_path / "twice.yaml"
    twice.write_text(held_twice(), encoding="utf-8")
    code, text = run(str(twice), "--json")
    assert code in (0, 1)
    assert json.loads(text)["proposals"][0]["kind"] == "merge"


def test_names_of_the_file_can_do_nothing_to_a_terminal_or_a_shell() -> None:
    text = (
        texts()[HIDDEN]
        .replace("title: Feed rotator", 'title: "Feed \\x1b[31m rotator')
        .replace("worm wheel, 72 teeth\n", 'worm wheel, 72 teeth"\n', 1)
        .replace("lathe-A", '"lathe\'; rm $(x)"')
        .replace("name: shim", 'name: "shim\\x1b[1m `x`"')
    )
    found, all_of_it = mend(read_job_text(text, "job.yaml"))
    printed = as_text(found, all_of_it)
    assert "\x1b" not in printed
    json.dumps(as_data(found, all_of_it))
    assert "\\u001b" not in json.dumps(as_data(found, all_of_it)["proposals"])
    assert edits_in(proposals_in(printed)[0])


def test_the_shops_own_record_counts_in_every_trial(tmp_path: Path) -> None:
    record = tmp_path / "devices.csv"
    rows = "".join(
        f"shimmed-jaws,runout,2026-0{i}-01,{size} um,\n" for i, size in enumerate((30, 40, 30, 50, 40, 30), 1)
    )
    record.write_text("device,what,date,value,note\n" + rows, encoding="utf-8")
    found, all_of_it = mend(job(HIDDEN), devices=record)
    assert found.devices is not None
    row = next(r for t in all_of_it.tables for r in t.rows if r.entry.path == "setups.50.hold.centre.runout")
    assert 0.04 < row.entry.says[0].now < 0.1
    assert "in jaws over shims, from the shop's record" in " ".join(as_text(found, all_of_it).split())
    after = review(edited(job(HIDDEN), all_of_it.proposals[0].edits), devices=record)
    assert not outside(after)
    key = all_of_it.worst
    assert key is not None
    assert after.results[key].margin_share == pytest.approx(all_of_it.proposals[0].after)
    typed = [(t, r) for t in all_of_it.tables for r in t.enough if r.typed and not t.tight]
    assert typed
    for table, one in typed[:4]:
        margin = review(edited(job(HIDDEN), one.typed), devices=record).results[table.key].margin
        assert margin is not None and margin >= -1e-9


def test_a_house_or_day_that_is_not_there_is_refused(tmp_path: Path) -> None:
    house = tmp_path / "house.yaml"
    code, text = run("jobs/coupling-hub.yaml", "--house", str(house))
    assert code == 2 and "house.yaml" in text
    assert run("jobs/coupling-hub.yaml", "--on", "2027-02-30")[0] == 2
