"""What if: entries replaced by path act as if the file had been written so, and a range turns where the gate says it does."""

from __future__ import annotations

import re
from decimal import Decimal
from pathlib import Path

import pytest

from setupcheck.errors import JobError, SetupcheckError
from setupcheck.flow import Review, Varied, review, vary
from setupcheck.jobfile.changing import Change, changed, read_change
from setupcheck.jobfile.ranging import Range, read_range
from setupcheck.report.json import as_data
from setupcheck.report.vary_range import Swept, as_text, sweep
from setupcheck.shipped import shipped
from tests.jobs.test_typed_back import HEAD, failing, judged, wheel

MEASURED = "setups.50.hold.centre.runout.measured"


def sets(*texts: str) -> list[Change]:
    return [read_change(text) for text in texts]


def swept(before: Review, text: str, *others: str) -> Swept:
    span = read_range(read_change(text))
    assert isinstance(span, Range)

    def again(changes: list[Change]) -> Varied:
        return vary(before, changes)

    return sweep(before, span, sets(*others), again)


def told(found: Review) -> dict[str, object]:
    """A review without what depends on where its entries stand."""
    data = as_data(found)
    del data["job"]
    return data


@pytest.mark.parametrize(
    ("change", "old", "new"),
    [
        ("setups.40.hold.centre.clearance=[2 um, 16 um]", "clearance: [2 um, 8 um]", "clearance: [2 um, 16 um]"),
        ("setups.40.hold.centre.clearance[2]=16 um", "clearance: [2 um, 8 um]", "clearance: [2 um, 16 um]"),
        (
            "setups.50.hold.centre={on: rim, by: shimmed-jaws, at: 12, runout: 100 um}",
            "centre: {on: hub, by: four-jaw, at: 23, runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um}}",
            "centre: {on: rim, by: shimmed-jaws, at: 12, runout: 100 um}",
        ),
        ("cutters.fly.tip_radius=14", "tip_radius: 20.0", "tip_radius: 14"),
        ("require[1].at_most=20 um", "what: cumulative-pitch, of: wheel.teeth, at_most: 40 um",
         "what: cumulative-pitch, of: wheel.teeth, at_most: 20 um"),
        ("setups.40.divide={by: hole-circle, circle: 18}", HEAD, "divide: {by: hole-circle, circle: 18}"),
        ('setups.40.divide.wheel.once_per_turn=±40"', 'once_per_turn: ±10"', 'once_per_turn: ±40"'),
        ("parts.wheel.surfaces.bore.diameter=32 H7", "kind: bore, diameter: 32 H5", "kind: bore, diameter: 32 H7"),
        # a key inside a value that is short for a map
        ("setups.40.hold.centre.runout.measured=2 um", "rests: pushed, runout: 3 um",
         "rests: pushed, runout: {at_most: 3 um, measured: 2 um}"),
        ("setups.30.hold.stop.error.measured=-5 um", "stop:   {on: back, error: 20 um}",
         "stop:   {on: back, error: {at_most: 20 um, measured: -5 um}}"),
        ("parts.wheel.surfaces.bore.diameter.measured=32.005", "kind: bore, diameter: 32 H5",
         "kind: bore, diameter: {nominal: 32, fit: H5, measured: 32.005}"),
        ("setups.70.join.stop.spacers[1].length.measured=1.501", "length: 1.500 ±0.003",
         "length: {nominal: 1.5, lower: -0.003, upper: 0.003, measured: 1.501}"),
        # keys that are new where they are put
        ("mesh.over_balls={measured: 111.266, ball: 2.5}", "housing: grey-iron",
         "housing: grey-iron, over_balls: {measured: 111.266, ball: 2.5}"),
        # a key that is new where it is put
        ("setups.30.hold.centre.x=3 um", "at: 10, runout: 15 um}", "at: 10, runout: 15 um, x: 3 um}"),
    ],
)  # fmt: skip
def test_a_change_is_what_the_file_would_be_with_it(change: str, old: str, new: str) -> None:
    try:
        want = judged(wheel((old, new)))
    except JobError as why:
        with pytest.raises(JobError, match="--set") as refused:
            vary(shipped("jobs/rotator-worm-wheel.yaml"), sets(change))
        assert refused.value.problems[0].problem.endswith(why.problems[0].problem)
        return
    found = vary(shipped("jobs/rotator-worm-wheel.yaml"), sets(change))
    assert told(found.after) == told(want)
    assert told(found.before) == told(judged(wheel()))
    assert told(found.after) != told(found.before)


def test_an_entry_may_be_added_to_a_list() -> None:
    before = review(shipped("jobs/rotator-worm-wheel.yaml"))
    many = len(before.loaded.job.require)
    added = "{what: run-out, of: wheel.teeth, about: wheel.bore, at_most: 1 um, name: added}"
    after = vary(before, sets(f"require[{many + 1}]={added}")).after
    assert len(after.loaded.job.require) == many + 1
    assert "added" in after.results
    assert before.results.keys() < after.results.keys()


def test_several_changes_act_together_and_the_read_file_stays_as_it_is() -> None:
    before = review(shipped("jobs/rotator-worm-wheel.yaml"))
    tree = repr(before.loaded.tree.data)
    both = vary(before, sets(f"{MEASURED}=5 um", "setups.40.hold.centre.clearance[2]=9 um")).after
    as_written = judged(
        wheel(("measured: 4 um", "measured: 5 um"), ("clearance: [2 um, 8 um]", "clearance: [2 um, 9 um]"))
    )
    assert told(both) == told(as_written)
    assert repr(before.loaded.tree.data) == tree


def test_what_the_changes_do_not_reach_does_not_move_at_all() -> None:
    found = vary(shipped("jobs/rotator-worm-wheel.yaml"), sets("setups.30.hold.centre.runout=60 um"))
    still = [key for key in found.before.results if not key.startswith("allowance")]
    assert len(still) > 5
    for key in still:
        was, now = found.before.results[key].combined, found.after.results[key].combined
        assert (was.worst, was.likely, was.chance) == (now.worst, now.likely, now.chance)


def test_the_value_of_a_remedy_put_in_cures_its_finding() -> None:
    old = "centre: {on: hub, by: four-jaw, at: 23, runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um}}"
    bad, key, remedy = failing(
        wheel((old, "centre: {on: hub, by: four-jaw, at: 23, runout: {device: four-jaw}}")),
        "STACK-001",
        "backlash-swing",
    )
    said = re.search(r"up to (\d+\.\d um) \((setups\.50\.hold\.centre\.runout)\)", remedy)
    assert said is not None, remedy
    found = vary(bad, sets(f"{said[2]}={said[1]}"))
    margin = found.after.results[key].margin
    assert margin is not None
    assert margin >= 0.0
    assert [f.verdict for f in found.after.evaluation.findings if (f.rule, f.key) == ("STACK-001", key)] == ["pass"]


@pytest.mark.parametrize(
    ("job", "path", "key"),
    [
        ("rotator-worm-wheel", "setups.50.hold.centre.runout.measured=2um..20um", "50/centre"),
        ("spur-gear-on-mandrel", "setups.{op}.hold.{step}.{what}=2 um..40 um/5", ""),
    ],
)
def test_a_requirement_turns_at_the_dial_reading_to_accept(job: str, path: str, key: str) -> None:
    before = review(shipped(f"jobs/{job}.yaml"))
    gate = next(
        g
        for g in before.gates
        if g.reading is not None and 0.002 < g.reading < 0.04 and g.least == 0.0 and (not key or g.key == key)
    )
    found = swept(before, path.format(op=gate.op, step=gate.step, what=_entry(before, gate.op, gate.step)))
    (turn,) = found.kept[gate.by]
    assert (turn.before, turn.after) == ("met", "not met")
    assert turn.low <= Decimal(str(gate.reading)) * 1000 + Decimal("1e-6")
    assert Decimal(str(gate.reading)) * 1000 <= turn.high + Decimal("1e-6")
    assert turn.high - turn.low <= found.range.step
    others = [t.high for name, turns in found.kept.items() for t in turns[:1] if name != gate.by]
    assert turn.high <= min(others, default=turn.high)  # no requirement turns before the one that sets the gate


def _entry(found: Review, op: int, step: str) -> str:
    """The entry of a hold that a gate is for: its bound where it is written with more than that."""
    what = "face_runout" if step == "square" else "runout"
    node = found.loaded.tree.data
    for one in found.loaded.loc(f"setups.{op}.hold.{step}.{what}"):
        node = node[one]  # type: ignore[index,call-overload]
    return f"{what}.at_most" if isinstance(node, dict) else what


def test_every_turn_of_the_verdict_is_found_by_itself() -> None:
    found = swept(review(shipped("jobs/rotator-worm-wheel.yaml")), "cutters.fly.tip_radius=12..20/3")
    assert [(t.before, t.after) for t in found.turns] == [("fail", "warn"), ("warn", "pass")]
    for turn in found.turns:
        assert turn.high - turn.low == Decimal("0.1")
        for at, says in ((turn.low, turn.before), (turn.high, turn.after)):
            assert vary(found.before, [found.range.change(at)]).after.verdict == says


@pytest.mark.parametrize(
    ("text", "values", "step"),
    [
        ("a=2um..20um/7", ["2 um", "5 um", "8 um", "11 um", "14 um", "17 um", "20 um"], "0.1"),
        ("a=20 um..2 um/3", ["20 um", "11 um", "2 um"], "0.1"),
        ("a=2..20 um/2", ["2 um", "20 um"], "0.1"),
        ('a=±5"..±40"/3', ['±5"', '±22.5"', '±40"'], "0.1"),
        ("a=-1..1/3", ["-1", "0", "1"], "0.01"),
        ("a=0..1 mm/4", ["0 mm", "0.333 mm", "0.667 mm", "1 mm"], "0.01"),
        ("a=100 um..1100 um/3", ["100 um", "600 um", "1100 um"], "10"),
        ("a=30 %..50 %/3", ["30 %", "40 %", "50 %"], "0.1"),
        ("a=100 1/min..300 1/min/3", ["100 1/min", "200 1/min", "300 1/min"], "1"),
    ],
)
def test_a_range_is_read_as_decimal_numbers(text: str, values: list[str], step: str) -> None:
    found = read_range(read_change(text))
    assert found is not None
    assert [found.change(n).value for n in found.numbers] == values
    assert found.step == Decimal(step)


def test_a_range_of_a_clearance_sets_its_smallest_and_its_largest() -> None:
    found = swept(review(shipped("jobs/rotator-worm-wheel.yaml")), "setups.40.hold.centre.clearance=2um..20um/3")
    assert [one.changes[0].value for one in found.found] == ["[2 um, 2 um]", "[11 um, 11 um]", "[20 um, 20 um]"]
    assert ["pass", "warn", "warn"] == [one.after.verdict for one in found.found]
    assert "smallest and largest alike" in as_text(found)


def test_a_range_without_a_count_has_nine_values_and_a_quoted_text_is_none() -> None:
    found = read_range(read_change("a=1..9"))
    assert found is not None
    assert [str(n) for n in found.numbers] == list("123456789")
    assert read_range(read_change('title="a..b"')) is None
    assert read_range(read_change("a=5 um")) is None


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("a=envelope..mid-plane", "'envelope..mid-plane' is no range of numbers. Write two numbers of one unit"),
        ("a=5 um..", "is no range of numbers"),
        ("a=5 um..0.02 mm", "has two ends that are not written alike. Write both with one unit"),
        ("a=5 um..20", "has two ends that are not written alike"),
        ("a=5 um..5 um", "begins where it ends. Write one value: a=5 um"),
        ("a=5 um..9 um/1", "asks for 1 values. Write from 2 to 101 of them"),
        ("a=5 um..9 um/999999", "asks for 999999 values"),
        ("a=1e400..2e400", "is no range of numbers"),
        ("a=" + "9" * 400 + "..1", "is no range of numbers"),
        ("a=2,5 um..3 um", "is no range of numbers"),
    ],
)
def test_what_is_no_range_says_what_would_be(text: str, says: str) -> None:
    with pytest.raises(SetupcheckError) as refused:
        read_range(read_change(text))
    assert says in str(refused.value)


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("setups.30.hold.centre.clerance=5 um", "'clerance' is not a key of this entry. Did you mean clearance?"),
        ("setups.30.hld.centre.runout=5 um", "'hld' is not in setups.30. Did you mean hold?"),
        ("mesh.mrak.right.at=1 mm", "'mrak' is not in mesh. Did you mean mark?"),
        ("mesh.mark.rihgt.at=1 mm", "'rihgt' is not a key of this entry. Did you mean right?"),
        ("setups.31.hold=5 um", "setups has no such entry. There: setups.10, setups.20, setups.30"),
        ("require[99].at_most=5 um", "require has no such entry. There: require[1] to require["),
        ("require[0].at_most=5 um", "require has no such entry"),
        ("parts.wheel.surfaces.bohre.diameter=5 mm", "'bohre' is not in parts.wheel.surfaces. Did you mean bore?"),
        ("job.x=3", "job has no keys inside: it says 'FR-0417'. Set it as a whole: --set 'job={x: …}'"),
        ("bogus=3", "'bogus' is not a key of this entry"),
        ("setups.30.hold.centre.runout=5 kg", "'5 kg' is a mass, not a length"),
        ("setups.30.hold.centre.runout=2,5 um", "Write a point for the decimal: 2.5 um"),
        ("setups.30.hold.centre.by=", "has nothing behind its =. Write the new value"),
        ("setups.30.hold.centre.runout", "is not KEY=VALUE. Write a path of the job file and its new value"),
        ("=5 um", "is not KEY=VALUE"),
        ("setups.30.hold.centre=&a [*a]", "'&a' marks this place for others"),
        ("setups.30.hold.centre=[5 um", "a bracket is not closed"),
        ("title=\x1b[31mred", "the character U+001B does not belong in a job"),
        ("title=" + "x" * 3000, "has more than one line, or more than 2000 characters"),
        ("title=a\nb: c", "has more than one line"),
        ("." * 300 + "=1", "--set"),
        ("setups=" + "[" * 100, "nested deeper than"),
        ("units=in", "with --set units=in:"),
    ],
)  # fmt: skip
def test_what_cannot_be_set_says_so_and_names_what_could(text: str, says: str) -> None:
    with pytest.raises(SetupcheckError) as refused:
        vary(shipped("jobs/rotator-worm-wheel.yaml"), sets(text))
    message = str(refused.value)
    assert says in message
    assert "--set" in message
    assert "\x1b" not in message


def test_keys_set_one_by_one_make_one_new_entry_and_a_short_value_is_opened_once() -> None:
    found = vary(
        shipped("jobs/rotator-worm-wheel.yaml"),
        sets(
            "mesh.mark.seen_from=wheel.front",
            "mesh.mark.right.at=middle",
            "mesh.mark.left.at=middle",
            "setups.40.hold.centre.runout.measured=2 um",
            "setups.40.hold.centre.runout.uncertainty=1 um",
            "setups.40.hold.centre.runout.high_at=90 deg",
        ),
    )
    job = found.after.loaded.job
    assert job.mesh is not None
    assert job.mesh.mark is not None
    assert "wheel.front" == job.mesh.mark.seen_from
    runout = job.setups[3].hold.centre.runout  # type: ignore[union-attr]
    assert runout is not None
    assert (0.003, 0.002, 0.001, "90 deg") == (runout.at_most, runout.measured, runout.uncertainty, runout.high_at)


def test_a_wrong_value_is_shown_at_the_line_of_the_one_it_replaces() -> None:
    loaded = review(shipped("jobs/rotator-worm-wheel.yaml")).loaded
    with pytest.raises(JobError) as refused:
        changed(loaded, sets("setups.30.hold.centre.runout=5 kg"))
    (problem,) = refused.value.problems
    assert problem.line == loaded.line("setups.30.hold.centre.runout")
    assert problem.path == "setups.30.hold.centre.runout"
    assert problem.problem.startswith("with --set setups.30.hold.centre.runout=5 kg: ")


@pytest.mark.parametrize(
    ("first", "second", "says"),
    [
        (f"{MEASURED}=5 um", f"{MEASURED}=6 um", "is set twice. Set it once"),
        ("setups.50.hold.centre.runout=5 um", f"{MEASURED}=6 um", "one inside the other. Set it once"),
        (f"{MEASURED}=6 um", "setups.50.hold=5 um", "one inside the other"),
        ("require[2].at_most=5 um", "require.1.at_most=6 um", "is set twice"),
    ],
)
def test_one_entry_is_set_once(first: str, second: str, says: str) -> None:
    with pytest.raises(JobError, match=re.escape(says)):
        vary(shipped("jobs/rotator-worm-wheel.yaml"), sets(first, second))


def test_what_shows_only_along_the_route_says_where_it_comes_from() -> None:
    with pytest.raises(JobError, match=r"with --set setups\.30\.part=housing"):
        vary(shipped("jobs/rotator-worm-wheel.yaml"), sets("setups.30.part=housing"))


def test_a_shops_record_counts_on_both_sides(tmp_path: Path) -> None:
    record = tmp_path / "devices.csv"
    rows = "".join(f"four-jaw,runout,2026-0{i}-01,{size} um,\n" for i, size in enumerate((3, 4, 3, 5, 4, 3), 1))
    record.write_text("device,what,date,value,note\n" + rows, encoding="utf-8")
    change = "setups.50.hold.centre={on: hub, by: four-jaw, at: 23, runout: {device: four-jaw}}"
    old = "centre: {on: hub, by: four-jaw, at: 23, runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um}}"
    written = tmp_path / "job.yaml"
    written.write_text(wheel((old, change.partition("=")[2].join(("centre: ", "")))), encoding="utf-8")
    found = vary(shipped("jobs/rotator-worm-wheel.yaml"), sets(change), devices=record)
    want = review(written, devices=record)
    assert told(found.after) == told(want)
    assert found.after.devices is not None
    assert [use.taken for use in found.after.devices.uses] == [True]
    assert found.before.devices is not None
    assert not any(use.taken for use in found.before.devices.uses)
