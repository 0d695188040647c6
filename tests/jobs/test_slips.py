"""Slips of the shop, each a one-line change in two different routes: the rule speaks at that operation, and only then."""

from __future__ import annotations

from dataclasses import dataclass

import pytest

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.shipped import shipped

TEXTS = {
    name: shipped(f"jobs/{name}.yaml").read_text()
    for name in ("rotator-worm-wheel", "spur-gear-on-mandrel", "index-plate")
}
WHEEL, GEAR, PLATE = TEXTS


@dataclass(frozen=True)
class Slip:
    """One line of one job, and what it becomes; "" takes the line out."""

    route: str
    op: int
    line: str
    becomes: str


SLIPS: dict[tuple[str, str], tuple[Slip, ...]] = {
    ("DATUM-001", "held on teeth that a later operation cuts"): (
        Slip(
            WHEEL,
            20,
            "centre: {on: rim, by: soft-jaws, at: 12, runout: 20 um}",
            "centre: {on: teeth, by: soft-jaws, at: 12, runout: 20 um}",
        ),
        Slip(
            GEAR,
            20,
            "centre: {on: bore, by: expanding-mandrel, at: 8, runout: 10 um}",
            "centre: {on: teeth, by: soft-jaws, runout: 10 um}",
        ),
    ),
    ("DATUM-002", "trued on a surface that is gone"): (
        Slip(
            WHEEL,
            30,
            "centre: {on: rim, by: soft-jaws, at: 10, runout: 15 um}",
            "centre: {on: bar, by: soft-jaws, at: -10, runout: 15 um}",
        ),
        Slip(
            PLATE,
            30,
            "centre: {on: bore, by: indicator, at: 0.3125, runout: 0.2 thou}",
            "centre: {on: rough, by: indicator, at: 0.3125, runout: 0.2 thou}",
        ),
    ),
    ("DATUM-003", "set on a face that is only roughed"): (
        Slip(
            WHEEL,
            30,
            "back: {leave: 0.5, error: 50 um, removes: [bar]}",
            "back: {leave: 0.5, state: rough, error: 50 um, removes: [bar]}",
        ),
        Slip(
            GEAR,
            20,
            "cut: {front: {}, bore: {}, outside: {leave_on_diameter: 1.5, state: rough}}",
            "cut: {front: {state: rough}, bore: {}, outside: {leave_on_diameter: 1.5, state: rough}}",
        ),
    ),
    ("DATUM-004", "held on what this very holding cuts"): (
        Slip(
            WHEEL,
            20,
            "centre: {on: rim, by: soft-jaws, at: 12, runout: 20 um}",
            "centre: {on: bore, by: soft-jaws, at: 12, runout: 20 um}",
        ),
        Slip(
            GEAR,
            10,
            "and_centre: {on: bar, by: three-jaw, at: 5, runout: 0.10 mm}",
            "and_centre: {on: bore, by: three-jaw, at: 5, runout: 0.10 mm}",
        ),
    ),
    ("HOLD-001", "nothing rules the lean"): (
        Slip(WHEEL, 40, "square: {on: seat, by: flange, face_runout: 4 um, across: 100}", ""),
        Slip(PLATE, 40, "square: {on: back, by: table, face_runout: 0.3 thou, across: 5}", ""),
    ),
    ("HOLD-003", "the error of the hold is left out"): (
        Slip(WHEEL, 40, "rests: pushed, runout: 3 um}", "rests: pushed}"),
        Slip(GEAR, 20, "by: expanding-mandrel, at: 8, runout: 10 um}", "by: expanding-mandrel, at: 8}"),
    ),
    ("HOLD-004", "a device named and nothing said of it"): (
        Slip(
            WHEEL,
            20,
            "by: soft-jaws, at: 12, runout: 20 um}",
            "by: soft-jaws, at: 12, runout: {device: soft-jaws-old}}",
        ),
        Slip(
            GEAR,
            20,
            "by: expanding-mandrel, at: 8, runout: 10 um}",
            "by: expanding-mandrel, at: 8, runout: {device: expanding-mandrel}}",
        ),
    ),
    ("HOLD-005", "two centring planes too close together"): (
        Slip(
            WHEEL,
            10,
            "and_centre: {on: bar, by: three-jaw, at: 20, runout: 0.15 mm}",
            "and_centre: {on: bar, by: three-jaw, at: -20, runout: 0.15 mm}",
        ),
        Slip(
            GEAR,
            10,
            "and_centre: {on: bar, by: three-jaw, at: 5, runout: 0.10 mm}",
            "and_centre: {on: bar, by: three-jaw, at: -20, runout: 0.10 mm}",
        ),
    ),
    ("HOLD-006", "a loose register eats the requirement"): (
        Slip(WHEEL, 40, "clearance: [2 um, 8 um]", "clearance: [2 um, 14 um]"),
        Slip(
            PLATE,
            30,
            "centre: {on: bore, by: indicator, at: 0.3125, runout: 0.2 thou}\n      square: {on: back, by: table, face_runout: "
            "0.3 thou, across: 5}\n      stop:   {on: back, error: 1 thou}\n    divide",
            "centre: {on: bore, by: spigot, clearance: [0.2 thou, 2 thou], runout: 0.2 thou}\n      square: {on: back, by: "
            "table, face_runout: 0.3 thou, across: 5}\n      stop:   {on: back, error: 1 thou}\n    divide",
        ),
    ),
    ("HOLD-007", "the dial showed more than was planned"): (
        Slip(WHEEL, 50, "measured: 4 um", "measured: 9 um"),
        Slip(
            GEAR,
            20,
            "by: expanding-mandrel, at: 8, runout: 10 um}",
            "by: expanding-mandrel, at: 8, runout: {at_most: 10 um, measured: 14 um, uncertainty: 2 um}}",
        ),
    ),
    ("HOLD-008", "a jaw named for the high spot, and no mark on the part"): (
        Slip(WHEEL, 50, "measured: 4 um, uncertainty: 1 um", "measured: 4 um, uncertainty: 1 um, high_at: jaw 2"),
        Slip(
            PLATE,
            20,
            "by: soft-jaws, at: 0.35, runout: 1 thou,",
            "by: soft-jaws, runout: {measured: 1 thou, uncertainty: 0.2 thou, high_at: jaw 3},",
        ),
    ),
    ("HOLD-009", "no machine named"): (
        Slip(
            WHEEL,
            30,
            "  - op: 30          # the register: hub and seat finished in one holding, so they are true to each other\n"
            "    machine: lathe-A",
            "  - op: 30",
        ),
        Slip(
            GEAR, 20, "  - op: 20          # sawn off, back faced against the front\n    machine: lathe-C", "  - op: 20"
        ),
    ),
    ("ALLOW-001", "less left on than the run-out takes"): (
        Slip(
            WHEEL, 50, "bore: {leave_on_diameter: 0.6, state: rough}", "bore: {leave_on_diameter: 0.06, state: rough}"
        ),
        Slip(
            GEAR,
            30,
            "outside: {leave_on_diameter: 1.5, state: rough}",
            "outside: {leave_on_diameter: 0.05, state: rough}",
        ),
    ),
    ("DIVIDE-001", "a hole circle on which the count does not close"): (
        Slip(WHEEL, 40, "circle: 18", "circle: 20"),
        Slip(GEAR, 40, "kind: teeth, count: 40", "kind: teeth, count: 41"),
    ),
    ("DIVIDE-002", "a count that folds the head's own error into a run-out"): (
        Slip(WHEEL, 40, "kind: teeth, count: 72", "kind: teeth, count: 41"),
        Slip(GEAR, 40, "kind: teeth, count: 40", "kind: teeth, count: 39"),
    ),
    ("CUTTER-001", "a list of passes that nobody added up"): (
        Slip(WHEEL, 40, "passes: [2.0, 1.0, 0.3]", "passes: [2.0, 1.0, 0.1]"),
        Slip(GEAR, 40, "passes: [3.1, 0.3]", "passes: [2.9, 0.3]"),
    ),
    ("CUTTER-002", "a last pass too thick to finish with"): (
        Slip(WHEEL, 40, "passes: [2.0, 1.0, 0.3]", "passes: [2.0, 0.5, 0.8]"),
        Slip(GEAR, 40, "passes: [3.1, 0.3]", "passes: [2.4, 1.0]"),
    ),
    ("CLAMP-001", "the jaws catch too little of the part"): (
        Slip(WHEEL, 10, "grip: {from: -40, to: -5}", "grip: {from: -40, to: -30}"),
        Slip(PLATE, 20, "grip: {from: 0.15, to: 0.55}", "grip: {from: 0.15, to: 0.3}"),
    ),
    ("MEASURE-001", "a measured spindle or face, and nobody says how well"): (
        Slip(
            WHEEL,
            30,
            "stop:   {on: back, error: 20 um}",
            "stop:   {on: back, error: {measured: 20 um}}",
        ),
        Slip(
            PLATE,
            30,
            "square: {on: back, by: table, face_runout: 0.3 thou, across: 5}",
            "square: {on: back, by: table, face_runout: {measured: 0.3 thou}, across: 5}",
        ),
    ),
    ("MEASURE-002", "a gauge too coarse for what it has to prove"): (
        Slip(WHEEL, 50, "measured: 4 um, uncertainty: 1 um", "measured: 4 um, uncertainty: 3 um"),
        Slip(
            GEAR,
            20,
            "by: expanding-mandrel, at: 8, runout: 10 um}",
            "by: expanding-mandrel, at: 8, runout: {at_most: 10 um, measured: 4 um, uncertainty: 5 um}}",
        ),
    ),
    ("MEASURE-003", "jaws over shims that nobody measured"): (
        Slip(WHEEL, 20, "by: soft-jaws, at: 12, runout: 20 um}", "by: shimmed-jaws, at: 12, runout: 20 um}"),
        Slip(
            PLATE,
            20,
            "by: soft-jaws, at: 0.35, runout: 1 thou,",
            "by: shimmed-jaws, at: 0.35, runout: {device: shimmed-jaws},",
        ),
    ),
    ("MEASURE-007", "an indicator too coarse for the plan"): (
        Slip(WHEEL, 40, "rests: pushed, runout: 3 um}", "rests: pushed, runout: {at_most: 3 um, indicator: 10 um}}"),
        Slip(
            PLATE,
            30,
            "by: indicator, at: 0.3125, runout: 0.2 thou}",
            "by: indicator, at: 0.3125, runout: {at_most: 0.2 thou, indicator: 0.5 thou}}",
        ),
    ),
    ("DIVIDE-003", "a way of dividing without a typical error, and none stated"): (
        Slip(
            WHEEL,
            40,
            'by: hole-circle, circle: 18, wheel: {once_per_turn: ±10"}, worm: {once_per_crank: ±4"}, setting: 2", clamp: 0"}',
            "by: x-y}",
        ),
        Slip(
            PLATE,
            30,
            'divide: {by: rotary-table, wheel: {once_per_turn: ±8"}, worm: {once_per_crank: ±2"}, setting: 2", '
            'clamp: 1"}',
            "divide: {by: x-y}",
        ),
    ),
    ("DIVIDE-004", "nothing said of the dividing device but its kind"): (
        Slip(WHEEL, 40, 'wheel: {once_per_turn: ±10"}, worm: {once_per_crank: ±4"}, setting: 2", clamp: 0"}', "}"),
        Slip(
            PLATE,
            30,
            'divide: {by: rotary-table, wheel: {once_per_turn: ±8"}, worm: {once_per_crank: ±2"}, setting: 2", '
            'clamp: 1"}',
            "divide: {by: rotary-table}",
        ),
    ),
}


def changed(slip: Slip) -> str:
    """The job with the slip made, its place found within the right operation or among the surfaces."""
    text = TEXTS[slip.route]
    start = text.find(f"- op: {slip.op} ")
    at = text.find(slip.line, start if text.find(slip.line, start) >= 0 else 0)
    at = at if at >= 0 else text.find(slip.line)
    assert at >= 0, slip
    end = at + len(slip.line)
    return text[:at] + slip.becomes + text[end:]


def judged(text: str) -> Review:
    return review(read_job_text(text, "slip.yaml"))


def spoken(found: Review, rule: str) -> list[int | None]:
    """Operations at which a rule has something to say."""
    return [f.op for f in found.evaluation.findings if f.rule == rule and f.verdict != "pass"]


CASES = [pytest.param(rule, slip, id=f"{rule}-{slip.route}") for (rule, _), slips in SLIPS.items() for slip in slips]


@pytest.mark.parametrize(("rule", "slip"), CASES)
def test_a_slip_is_caught_at_its_operation_by_its_rule(rule: str, slip: Slip) -> None:
    assert slip.op in spoken(judged(changed(slip)), rule)


@pytest.mark.parametrize(("rule", "slip"), CASES)
def test_the_rule_is_silent_when_the_line_is_put_back(rule: str, slip: Slip) -> None:
    assert spoken(judged(TEXTS[slip.route]), rule) == []


def test_every_slip_is_made_in_two_different_routes() -> None:
    assert len(SLIPS) >= 10
    for slips in SLIPS.values():
        assert len({s.route for s in slips}) == 2


CLASSIC = (
    Slip(
        WHEEL,
        50,
        "centre: {on: hub, by: four-jaw, at: 23, runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um}}",
        "centre: {on: rim, by: shimmed-jaws, runout: 100 um}",
    ),
    Slip(
        GEAR,
        40,
        "centre:\n        {on: bore, by: taper-mandrel, at: 0, runout: {at_most: 4 um, device: mandrel-20, mark: kept},",
        "centre:\n        {on: outside, by: shimmed-jaws, at: 0, runout: 100 um,",
    ),
)


@pytest.mark.parametrize("slip", CLASSIC, ids=lambda s: s.route)
def test_the_run_out_of_shimmed_jaws_after_the_register_is_the_biggest_cause_of_teeth_to_bore(slip: Slip) -> None:
    found = judged(changed(slip))
    key = next(k for k in found.results if k.startswith("run-out") and "teeth" in k)
    biggest = found.results[key].combined.shares[0].cause
    assert biggest.op == slip.op
    assert "in jaws over shims: run-out" in biggest.key
    failed = [f for f in found.evaluation.findings if f.rule == "STACK-001" and f.key == key]
    assert [f.verdict for f in failed] == ["fail"]
    remedy = found.remedies[key]
    if remedy.changes:
        assert remedy.changes[0].cause == biggest
        assert remedy.changes[0].path == f"setups.{slip.op}.hold.centre.runout"
        assert remedy.changes[0].needed < remedy.changes[0].now
    else:
        assert remedy.swap is not None
        assert remedy.swap.op == slip.op


@pytest.mark.parametrize("slip", CLASSIC, ids=lambda s: s.route)
def test_the_remedy_of_the_classic_slip_brings_the_stack_inside_when_typed_in(slip: Slip) -> None:
    text = changed(slip)
    found = judged(text)
    assert found.remedies
    for key, remedy in found.remedies.items():
        if remedy.swap is not None:
            was = f"{{on: {remedy.swap.was}, by: shimmed-jaws"
            assert text.count(was) == 1
            better = text.replace(was, f"{{on: {remedy.swap.on}, by: shimmed-jaws")
            better = better.replace("runout: 100 um", f"runout: {remedy.swap.reading * 1000:.4f} um")
        elif [c.path for c in remedy.changes] == [f"setups.{slip.op}.hold.centre.runout"]:
            better = text.replace("runout: 100 um", f"runout: {remedy.changes[0].needed * 1000:.4f} um")
        else:
            continue
        margin = judged(better).results[key].margin
        assert margin is not None
        assert margin >= -1e-6, key
