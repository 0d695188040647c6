"""Every gate and every remedy, typed back into the job file where it says, must do what it promises."""

from __future__ import annotations

import math
import re
from pathlib import Path

import pytest

from setupcheck.flow import Review, review, vary
from setupcheck.jobfile.reading import LoadedJob, read_job_text
from setupcheck.report.remedies import remedy_in_words
from setupcheck.report.text import as_text
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
        after = margins(judged(typed(text, found.loaded, dict.fromkeys(gate.paths, value))))
        assert (min(after.values()) >= -1e-9) is inside, (gate, factor, after)


SPOILT = {
    "shimmed jaws after the register": (
        "rotator-worm-wheel",
        "centre: {on: hub, by: four-jaw, at: 23, runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um}}",
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
        "centre: {on: bore, by: indicator, at: 0.3125, runout: 0.2 thou}",
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
        if remedy.insert is not None:
            line = found.loaded.line(remedy.insert.path) - 1
            lines = better.splitlines()
            lines[line] = lines[line].replace(f"{remedy.insert.now:.3f}", f"{remedy.insert.needed:.3f}")
            better = "\n".join(lines)
        if better != text:
            cured += 1
            assert margins(judged(better))[key] >= -1e-7, (key, remedy)
    assert cured


GRIPS = "grips_first: shoulder-end"
HEAD = """divide: {by: hole-circle, circle: 18, wheel: {once_per_turn: ±10"}, worm: {once_per_crank: ±4"}, setting: 2", clamp: 0"}"""


def failing(text: str, rule: str, what: str) -> tuple[Review, str, str]:
    """The review, the instance and the remedy (in words) of the one requirement of this kind that is not met."""
    found = judged(text)
    key, remedy = next(
        (f.key, remedy_in_words(found, f))
        for f in found.evaluation.findings
        if f.rule == rule and f.verdict in ("fail", "warn") and found.results[f.key].stack.require.what == what
    )
    return found, key, remedy


def wheel(*changes: tuple[str, str], job: str = "rotator-worm-wheel") -> str:
    text = shipped(f"jobs/{job}.yaml").read_text(encoding="utf-8")
    for old, new in changes:
        assert old in text, old
        text = text.replace(old, new)
    return text


def test_a_gap_behind_a_cooling_hub_is_closed_by_the_end_that_grips_first() -> None:
    text = wheel((GRIPS, "grips_first: anywhere"))
    _, key, remedy = failing(text, "STACK-001", "mid-plane")
    assert remedy == "Let the shoulder end grip first (setups.70.join.grips_first: shoulder-end)."
    assert margins(judged(text.replace("grips_first: anywhere", GRIPS)))[key] >= 0.0


def test_the_end_that_grips_first_is_not_named_where_it_does_not_do_it() -> None:
    text = wheel(
        (GRIPS, "grips_first: anywhere"), ("what: mid-plane, at_most: 80 um", "what: mid-plane, at_most: 40 um")
    )
    assert "grips_first" not in failing(text, "STACK-001", "mid-plane")[2]


@pytest.mark.parametrize(
    ("job", "old", "new", "rule"),
    [
        ("rotator-worm-wheel", "width: 2.387 ±0.004", "width: 2.240 ±0.004", "STACK-002"),
        ("rotator-worm-wheel", "width: 2.387 ±0.004", "width: 2.480 ±0.004", "STACK-001"),
        ("rotator-worm-wheel", "width: 2.387 ±0.004", "width: {measured: 2.250, uncertainty: 4 um}", "STACK-002"),
        ("wheel-on-spindle", "width: 3.185 ±0.004", "width: 3.107 ±0.004", "STACK-002"),
    ],
)
def test_a_backlash_beside_its_limits_takes_another_insert(job: str, old: str, new: str, rule: str) -> None:
    text = wheel((old, new), job=job)
    _, key, remedy = failing(text, rule, "backlash")
    said = re.fullmatch(
        r"Make the insert (\d\.\d{3}) mm wide instead of (\d\.\d{3}) mm \(cutters\.fly\.width\)\.", remedy
    )
    assert said is not None, remedy
    assert said[2] in new
    assert margins(judged(text.replace(new, new.replace(said[2], said[1]))))[key] >= 0.0


def test_a_backlash_with_one_limit_takes_the_insert_just_inside_it() -> None:
    for limit, rule in (("at_least: 60 um", "STACK-002"), ("at_most: 60 um", "STACK-001")):
        text = wheel(("what: backlash, between: [5 um, 125 um]", f"what: backlash, {limit}"))
        found, key, _ = failing(text, rule, "backlash")
        insert = found.remedies[key].insert
        assert insert is not None
        margin = margins(judged(text.replace("width: 2.387", f"width: {insert.needed:.3f}")))[key]
        assert 0.0 <= margin < 0.0015


def test_a_typical_hold_gives_way_to_ones_own_record() -> None:
    old = "centre: {on: hub, by: four-jaw, at: 23, runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um}}"
    text = wheel((old, "centre: {on: hub, by: four-jaw, at: 23, runout: {device: four-jaw}}"))
    _, key, remedy = failing(text, "STACK-001", "backlash-swing")
    said = re.fullmatch(
        r"Op 50: put your own record of the run-out of hub in four-jaw chuck in place of the typical 10\.0 um, up to "
        r"(\d\.\d um) \(setups\.50\.hold\.centre\.runout\)\.",
        remedy,
    )
    assert said is not None, remedy
    assert margins(judged(text.replace("runout: {device: four-jaw}", f"runout: {said[1]}")))[key] >= 0.0


def test_a_loosely_known_housing_is_told_when_nothing_else_does_it() -> None:
    text = wheel(("length: 13.500 ±0.020", "length: 13.500 ±0.120"))
    _, key, remedy = failing(text, "STACK-001", "mid-plane")
    said = re.fullmatch(
        r"Housing: bring the distance of the worm axis from 120\.0 um down to (\d+\.\d) um \(place\.worm_axis\.length\)\.",
        remedy,
    )
    assert said is not None, remedy
    assert margins(judged(text.replace("±0.120", f"±{float(said[1]) / 1000.0:.4f}")))[key] >= 0.0


def test_a_span_wider_than_its_limits_asks_for_no_other_insert() -> None:
    text = wheel(("what: backlash, between: [5 um, 125 um]", "what: backlash, between: [5 um, 60 um]"))
    found, key, remedy = failing(text, "STACK-001", "backlash")
    assert found.remedies[key].insert is None
    assert "holding" not in remedy


@pytest.mark.parametrize("what", ["single-pitch", "on-workpiece", "index-within", "cumulative-pitch"])
def test_a_typical_division_gives_way_to_the_heads_own_record(what: str) -> None:
    text = wheel((HEAD, "divide: {by: hole-circle, circle: 18}"))
    found, key, remedy = failing(text, "STACK-001", what)
    own = {c.path.partition(".divide.")[2]: c.needed * 206264.806247 for c in found.remedies[key].own}
    assert set(own) == {"wheel.once_per_turn", "worm.once_per_crank", "setting"}
    for path, size in own.items():
        assert f'up to {size:.1f}" instead of' in remedy
        assert f"(setups.40.divide.{path})" in remedy
    rest = {c.path: f"{c.needed * 1000.0:.6f} um" for c in found.remedies[key].changes}
    assert all(path in remedy for path in rest)
    wave, crank, setting = (f'{own[k]:.1f}"' for k in ("wheel.once_per_turn", "worm.once_per_crank", "setting"))
    typed_in = f"{{once_per_turn: ±{wave}}}, worm: {{once_per_crank: ±{crank}}}, setting: {setting}"
    after = judged(typed(text, found.loaded, rest).replace("circle: 18}", f"circle: 18, wheel: {typed_in}}}"))
    assert margins(after)[key] >= 0.0
    assert not [f for f in after.evaluation.findings if f.rule == "DIVIDE-006" and f.verdict != "pass"]


def test_what_no_holding_changes_is_not_sent_to_one_holding() -> None:
    text = wheel(("what: contact-area, film: 6 um, at_least: 12 %", "what: contact-area, film: 6 um, at_least: 30 %"))
    found, _, remedy = failing(text, "STACK-002", "contact-area")
    assert "holding" not in remedy
    assert "Biggest: ." not in as_text(found)


def test_a_throat_measured_small_lets_the_insert_deeper_and_opens_the_backlash() -> None:
    """The insert was ground for the throat as drawn: 2 d tan(alpha) more backlash along the circle, d deeper on the radius."""
    job = shipped("jobs/rotator-worm-wheel.yaml")
    key = "setups.40.cut.teeth.depth_from"
    exact = {f"{key}.measured": "111 mm", f"{key}.uncertainty": "1 um"}
    small = {f"{key}.measured": "110.95 mm", f"{key}.uncertainty": "1 um"}
    drawn, deep = (
        next(r for k, r in vary(job, each).after.results.items() if k.startswith("backlash."))
        for each in (exact, small)
    )
    wider = 2.0 * 0.025 * math.tan(math.radians(20.0))
    assert wider == pytest.approx(deep.combined.worst.high - drawn.combined.worst.high, rel=0.01)
    assert 0.0 < deep.combined.worst.low - drawn.combined.worst.low < wider, "flanks cut off their depth fit less well"
