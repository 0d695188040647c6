"""Every gate and every remedy, typed back into the job file where it says, must do what it promises."""

from __future__ import annotations

from pathlib import Path

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import LoadedJob, read_job_text
from setupcheck.quantities.gates import Gate
from setupcheck.shipped import shipped

JOBS = sorted(shipped("jobs").glob("*.yaml"))


def judged(text: str) -> Review:
    return review(read_job_text(text, "job.yaml"))


def typed(text: str, loaded: LoadedJob, values: dict[str, str]) -> str:
    """The job text with the values of some entries replaced: the plain bound, or what was measured."""
    lines = text.splitlines()
    places = []
    for path, value in values.items():
        loc = loaded.loc(path)
        node: object = loaded.tree.data
        for step in loc:
            node = node[step]  # type: ignore[index]
        if isinstance(node, dict):
            loc = (*loc, "measured" if "measured" in node else "at_most")
        elif isinstance(node, list):
            loc = (*loc, len(node) - 1)
        places.append((loaded.tree.place(loc), value))
    for place, value in sorted(places, key=lambda p: (p[0].line, p[0].column), reverse=True):
        line, end = lines[place.line - 1], place.column - 1 + place.length
        old = line[place.column - 1 : end]
        if "±" in old and not old.startswith(("±", '"±')):  # a size with limits keeps its nominal
            scale = 25400.0 if loaded.job.units == "in" else 1000.0
            value = f"{old.partition('±')[0]}±{float(value.split()[0]) / scale:.9f}"
        lines[place.line - 1] = line[: place.column - 1] + value + line[end:]
    return "\n".join(lines)


def margins(found: Review) -> dict[str, float]:
    return {key: r.margin for key, r in found.results.items() if r.margin is not None}


def holds_of(gate: Gate) -> list[str]:
    key = "face_runout" if gate.step == "square" else "runout"
    return [f"setups.{op}.hold.{gate.step}.{key}" for op in (gate.op, *gate.also)]


GATES = [
    pytest.param(job, i, id=f"{job.stem}-{g.key}")
    for job in JOBS
    for i, g in enumerate(review(job).gates)
    if g.reading is not None
]


@pytest.mark.parametrize(("job", "number"), GATES)
def test_a_gate_just_holds_and_a_fifth_more_does_not(job: Path, number: int) -> None:
    text = job.read_text(encoding="utf-8")
    found = review(job)
    gate = found.gates[number]
    assert gate.reading is not None
    for factor, inside in ((1.0 - 1e-6, True), (1.2, False)):
        value = f"{gate.reading * 1000.0 * factor:.7f} um"
        after = margins(judged(typed(text, found.loaded, dict.fromkeys(holds_of(gate), value))))
        assert (min(after.values()) >= -1e-9) is inside, (gate, factor, after)


SPOILT = {
    "shimmed jaws after the register": (
        "rotator-worm-wheel",
        "centre: {on: hub, by: four-jaw, runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um}}",
        "centre: {on: rim, by: shimmed-jaws, runout: 100 um}",
    ),
    "a loose register": ("rotator-worm-wheel", "clearance: [2 um, 8 um]", "clearance: [2 um, 16 um]"),
    "a measured hold gone bad": ("rotator-worm-wheel", "measured: 4 um", "measured: 12 um"),
    "a measured hold gone bad, high spot known": (
        "rotator-worm-wheel",
        "measured: 4 um, uncertainty: 1 um",
        "measured: 14 um, uncertainty: 1 um, high_at: tooth 14",
    ),
    "a head with a poor wheel": ("rotator-worm-wheel", 'once_per_turn: ±10"', 'once_per_turn: ±40"'),
    "a stop that is not true": (
        "rotator-worm-wheel",
        "stop:   {on: seat, error: 10 um}",
        "stop:   {on: seat, error: 30 um}",
    ),
    "a depth that is not kept": ("rotator-worm-wheel", "depth_error: 5 um", "depth_error: 20 um"),
    "an insert badly measured": ("rotator-worm-wheel", "width: 2.387 ±0.004", "width: 2.387 ±0.020"),
    "an insert a little narrow": ("rotator-worm-wheel", "width: 2.387 ±0.004", "width: 2.380 ±0.004"),
    "a throat touched without measuring it": ("rotator-worm-wheel", "at_most: 10 um, tool", "at_most: 40 um, tool"),
    "a throat that runs out where it is touched": (
        "rotator-worm-wheel",
        "clearance: [2 um, 8 um], rests: pushed",
        "clearance: [2 um, 14 um], rests: pushed",
    ),
    "a worn mandrel": (
        "spur-gear-on-mandrel",
        "at_most: 5 um, device: mandrel-20-far",
        "at_most: 14 um, device: mandrel-20-far",
    ),
    "an edge finder in a hurry": (
        "index-plate",
        "centre: {on: bore, by: indicator, runout: 0.2 thou}",
        "centre: {on: bore, by: edge-finder, x: 0.5 thou, y: 0.3 thou}",
    ),
    "a reamer that wanders": (
        "index-plate",
        "each: {radial: 0.2 thou, tangential: 0.2 thou",
        "each: {radial: 0.4 thou, tangential: 0.2 thou",
    ),
}


@pytest.mark.parametrize("name", SPOILT)
def test_a_remedy_brings_its_requirement_inside_when_it_is_typed_in(name: str) -> None:
    stem, good, bad = SPOILT[name]
    text = shipped(f"jobs/{stem}.yaml").read_text(encoding="utf-8")
    assert good in text
    text = text.replace(good, bad)
    found = judged(text)
    assert found.remedies
    cured = 0
    for key, remedy in found.remedies.items():
        values: dict[str, str] = {}
        for change in remedy.changes:
            size = change.needed * (1000.0 if change.unit == "um" else 206264.806247)
            value = f"{size:.6f} {'um' if change.unit == 'um' else 'arcsec'}"
            values |= dict.fromkeys((change.path, *change.also), value)
        better = typed(text, found.loaded, values)
        if remedy.swap is not None:
            swap = remedy.swap
            better = typed(
                text, found.loaded, {f"setups.{swap.op}.hold.centre.runout": f"{swap.reading * 1000.0:.6f} um"}
            )
            line = found.loaded.line(f"setups.{swap.op}.hold.centre") - 1
            lines = better.splitlines()
            assert f"on: {swap.was}" in lines[line]
            lines[line] = lines[line].replace(f"on: {swap.was}", f"on: {swap.on}")
            better = "\n".join(lines)
        if better != text:
            cured += 1
            assert margins(judged(better))[key] >= -1e-7, (key, remedy)
    assert cured
