"""A value as it is typed into its entry, and edits that take out or exchange: read back they say what was meant."""

from __future__ import annotations

import pytest

from setupcheck.errors import JobError
from setupcheck.flow import load_job
from setupcheck.jobfile.changing import Change
from setupcheck.jobfile.editing import Drop, Exchange, edited
from setupcheck.jobfile.reading import LoadedJob, read_job_text
from setupcheck.quantities.entries import stated
from setupcheck.quantities.typed_entry import typed_change
from setupcheck.shipped import shipped

MINUTE = 2.908882e-4


def wheel() -> LoadedJob:
    return load_job(shipped("jobs/rotator-worm-wheel.yaml"))


@pytest.mark.parametrize(
    ("path", "value", "unit", "typed"),
    [
        ("setups.40.hold.centre.runout", 0.0015, "um", Change("setups.40.hold.centre.runout", "1.5 um")),
        ("setups.50.hold.centre.runout", 0.0015, "um", Change("setups.50.hold.centre.runout.measured", "1.5 um")),
        ("setups.40.hold.centre.clearance", 0.006, "um", Change("setups.40.hold.centre.clearance[2]", "6.0 um")),
        ("setups.40.hold.centre.clearance", 0.001, "um", Change("setups.40.hold.centre.clearance", "[0.0 um, 1.0 um]")),
        ("cutters.fly.width", 0.0021, "um", Change("cutters.fly.width", "2.387 ±0.0021")),
        ("worm.thread_thickness", 0.002, "um", Change("worm.thread_thickness.uncertainty", "2.0 um")),
        ("setups.40.divide.setting", MINUTE / 60.0, "arcsec", Change("setups.40.divide.setting", '1.0"')),
        ("setups.40.head.uncertainty", MINUTE, "arcsec", Change("setups.40.head.uncertainty", '60.0"')),
    ],
)
def test_a_value_is_typed_where_its_entry_says_it(path: str, value: float, unit: str, typed: Change) -> None:
    loaded = wheel()
    assert typed_change(loaded, path, value, unit) == typed
    said = stated(edited(loaded, [typed]), path)
    assert said is not None and said.now == pytest.approx(value, rel=1e-5)
    assert said.unit == unit


def test_what_no_number_says_is_not_typed() -> None:
    assert typed_change(wheel(), "parts.wheel.surfaces.bore.diameter", 0.003, "um") is None
    assert typed_change(wheel(), "setups.70.join", 0.003, "um") is None


def test_an_inch_job_is_typed_in_thousandths() -> None:
    plate = load_job(shipped("jobs/index-plate.yaml"))
    assert typed_change(plate, "setups.30.hold.centre.runout", 0.15 * 0.0254, "um") == Change(
        "setups.30.hold.centre.runout", "0.15 thou"
    )
    assert typed_change(plate, "setups.30.cut.holes.spindle_to_axis.x", 0.1 * 0.0254, "um") == Change(
        "setups.30.cut.holes.spindle_to_axis.x", "2.375 ±0.000100"
    )


def test_an_entry_is_taken_out_and_another_put_in_at_once() -> None:
    loaded = load_job(shipped("jobs/coupling-hub.yaml"))
    edits = [Drop("setups.40.hold"), Drop("setups.40.looks_at_tool"), Change("setups.40.keeps", "30")]
    after = edited(loaded, edits)
    setup = next(s for s in after.job.setups if s.op == 40)
    assert (setup.hold, setup.keeps, setup.looks_at_tool) == (None, 30, None)
    assert next(s for s in loaded.job.setups if s.op == 40).hold is not None
    assert loaded.tree.data["setups"][3]["hold"]  # type: ignore[index, call-overload]


def test_what_the_reader_refuses_is_refused() -> None:
    with pytest.raises(JobError, match="does not say how the part is held"):
        edited(wheel(), [Drop("setups.30.hold")])
    assert edited(wheel(), [Drop("setups.30.nothing")]).job == wheel().job


def test_two_operations_change_places_and_their_answers_go_with_them() -> None:
    text = shipped("jobs/rotator-worm-wheel.yaml").read_text("utf-8")
    text = text.replace("checked:", "checked:\n  - {caution: hot-part, op: 30, by: invented initials}", 1)
    loaded = read_job_text(text, "job.yaml")
    after = edited(loaded, [Exchange(20, 30)])
    assert [s.op for s in after.job.setups] == [s.op for s in loaded.job.setups]
    cut = {s.op: set(s.cut) for s in after.job.setups}
    assert cut[20] == {"hub", "seat", "throat"}
    assert cut[30] == {"back", "bore"}
    assert [c.op for c in after.job.checked if c.caution == "hot-part"] == [20]
    assert edited(after, [Exchange(20, 30)]).job == loaded.job
