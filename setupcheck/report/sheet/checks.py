"""Points to check and sign at one setup before going on, from what the job says of it."""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck.flow import Review
from setupcheck.jobfile.setups import Hold, Setup
from setupcheck.quantities.devices import DEVICES, Device
from setupcheck.report.sheet.showing import Showing, paper

OUTSIDE = (
    "Stop. Do not cut, join or go on to the next operation.",
    "Read it once more, with the part turned round or the indicator set up afresh.",
    "Set it right and read again, if that can be done.",
    "If it stays: see what it costs, with `setupcheck vary JOB --set 'KEY=VALUE'`, KEY as printed beside the box.",
    "Write it into the job file beside its plan and review again: what still can be moved stands under STILL TO MOVE, and what "
    "would do under `setupcheck remedy JOB`.",
    "Go on only when the review passes again, or when somebody who may do so signs for the deviation below.",
)
"""What to do when a box falls outside, step by step. Source: common practice."""


def sign_off(found: Review) -> tuple[str, ...]:
    """Points of the whole job at which somebody signs, those that this job has."""
    setups = found.loaded.job.setups
    points = (
        ("After indicating", any(setup.hold is not None for setup in setups)),
        ("After the first full circle", any(setup.divide is not None for setup in setups)),
        ("Before heat or cold", any(setup.join is not None and setup.join.heat is not None for setup in setups)),
        ("Before the last cut", any(setup.cut for setup in setups)),
        ("Finished, all boxes filled", True),
    )
    return tuple(point for point, needed in points if needed)


def checks(found: Review, setup: Setup) -> list[str]:
    """Hold points of one setup, in the order of the work."""
    return list(dict.fromkeys(_of(Showing(found), setup)))


def _of(show: Showing, setup: Setup) -> Iterator[str]:
    if setup.keeps is not None:
        yield f"The holding of op {setup.keeps} was never opened"
    if setup.hold is not None:
        yield from _held(setup.hold)
    if setup.head is not None:
        side = f", {setup.head.leans}" if setup.head.leans else ""
        yield f"Head leaned by {show.angle(setup.head.tilt)}{side}, and locked"
        if setup.head.mid_plane is not None and setup.head.mid_plane.found != "no-tilt":
            yield "Cutter's height set, or set again, with the head as it is leaned now"
    if setup.divide is not None and setup.divide.by == "x-y":
        yield "Zero set on the axis, both ways of X and Y tried once against the table of coordinates"
    elif setup.divide is not None:
        circle = f": circle of {setup.divide.circle} holes" if setup.divide.circle else ""
        yield f"Dividing ready by its index table{circle}; one trial turn round closes on place 1"
    if setup.travel is not None:
        yield "A bar in place of the work read along the cutter's travel, before the first gap"
    for name, cut in setup.cut.items():
        if cut.off_centre is not None:
            yield f"Cutter of {paper(name, 40)} on the axis, shown by a trial cut turned half round or by a dial"
        if cut.prove_out is not None:
            yield f"Prove-out gaps of {paper(name, 40)} read and reviewed before going to depth"
        if cut.depth_from is not None:
            yield f"Depth of {paper(name, 40)} counted from {paper(cut.depth_from.surface, 40)} as touched, dial at zero"
    if setup.cut and setup.divide is not None:
        finishing = ", before the finishing pass" if any(len(cut.passes) > 1 for cut in setup.cut.values()) else ""
        yield f"After the first full circle: last place against the first{finishing}"
    if setup.join is not None:
        yield from _joined(show, setup)
    yield "Every box of this page is filled, and none lies outside what may be accepted"


def _held(hold: Hold) -> Iterator[str]:
    for entry in (hold.centre, hold.and_centre):
        if entry is not None:
            yield f"{paper(entry.on, 40)} {DEVICES[entry.by].words}, {_read(DEVICES[entry.by])}"
    if hold.square is not None:
        yield f"{paper(hold.square.on, 40)} wiped, no chip under it, read on its face"
    if hold.stop is not None:
        yield f"{paper(hold.stop.on, 40)} firmly on the stop"
    if hold.clock is not None:
        yield f"Number {hold.clock.number} of {paper(hold.clock.on, 40)} found and the part locked at that angle"


def _read(device: Device) -> str:
    """How a surface in a device is read before the cut."""
    if device.xy:
        return "both sides touched along X and along Y"
    return "read with the part gripped as it will be cut" if device.grips else "read and locked"


def _joined(show: Showing, setup: Setup) -> Iterator[str]:
    join = setup.join
    assert join is not None
    yield "Both diameters measured, at the same temperature as the gauge"
    if join.stop is not None and join.stop.spacers:
        yield "Spacers measured, clean, and on the right side of the face"
    if join.heat is not None:
        if join.heat.gauge is not None:
            yield f"Gauge of {show.length(join.heat.gauge)} enters the hot bore before the hub is lifted"
        yield "The way from heat or cold to the joint rehearsed cold, nothing in it, hands protected"
    if join.trued is not None:
        yield f"{paper(join.trued.on, 40)} trued while the joint is loose, and read again once it is fast"
    else:
        yield "Cold again: run-out and the gap at the shoulder read"
