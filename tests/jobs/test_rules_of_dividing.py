"""Rules of the ways of dividing in a job's own numbers, and keys that belong to another way."""

from __future__ import annotations

import itertools
import math
from typing import get_args

import pytest

from setupcheck.errors import JobError
from setupcheck.jobfile.dividing import WAYS_OF, Way
from setupcheck.jobfile.reading import read_job_text
from setupcheck.quantities.book import Known
from tests.jobs.divided_jobs import RADIUS, disc
from tests.published.bench import ARCSEC, UM, findings, reviewed, stack

COUPLING = '{by: face-teeth, positions: 360, positions_error: 0.25", setting: 0.05"}'


def said(divide: str, count: int, rule: str) -> tuple[str, str]:
    """(verdict, remedy) of the one finding of a rule."""
    (found,) = findings(disc(divide, count), rule)
    return found.verdict, found.remedy or ""


def test_a_count_between_the_notches_fails_and_the_nearest_are_named() -> None:
    verdict, remedy = said('{by: direct, positions: 24, setting: 5", wheel: {once_per_turn: 8"}}', 9, "DIVIDE-008")
    assert verdict == "fail"
    assert remedy.startswith("24 positions divide into 8 or 12; for 9 take one of 9, 18 or 27 positions")
    assert said('{by: direct, positions: 24, setting: 5", wheel: {once_per_turn: 8"}}', 8, "DIVIDE-008")[0] == "pass"
    assert said('{by: polygon, sides: 12, sides_error: 0.5", sighting: 1"}', 9, "DIVIDE-008")[0] == "fail"
    assert said('{by: face-teeth, setting: 1"}', 9, "DIVIDE-008")[0] == "open"


def test_a_near_target_is_told_how_far_away_it_should_be() -> None:
    near = '{by: theodolite, faces: two, setting: 2", sighting: 1", centring: 1 mm, target: 10 m}'
    verdict, remedy = said(near, 12, "DIVIDE-010")
    assert verdict == "warn"
    assert "a target 103.2 m away" in remedy
    far = near.replace("10 m", "103.2 m")
    assert said(far, 12, "DIVIDE-010")[0] == "pass"
    (inches,) = findings(disc(near, 12).replace("units: mm", "units: in"), "DIVIDE-010")
    assert "a target 4061 in away" in (inches.remedy or "")
    (inches,) = findings(disc(near.replace("10 m", "4063 in"), 12).replace("units: mm", "units: in"), "DIVIDE-010")
    assert inches.verdict == "pass"
    assert said(near.replace("1 mm", "0.0969 mm"), 12, "DIVIDE-010")[0] == "pass"  # as the remedy says
    assert "within 0.097 mm" in remedy or "within 0.096 mm" in remedy


def test_what_the_remedies_for_lean_and_plumb_say_would_do() -> None:
    leaning_standard = '{by: polygon, sides: 12, sides_error: 0.5", sighting: 1", polygon_tilt: 30\'}'
    verdict, remedy = said(leaning_standard, 12, "DIVIDE-011")
    assert verdict == "warn"
    assert "within 15.1'" in remedy
    assert said(leaning_standard.replace("30'", "15.1'"), 12, "DIVIDE-011")[0] == "pass"
    plumb = "{by: theodolite, faces: two, setting: 2\", centring: 0 um, target: 3 m, plumb: 1', elevation: 20 deg}"
    verdict, remedy = said(plumb, 12, "DIVIDE-012")
    assert verdict == "warn"
    assert "less than 1.9 deg" in remedy
    assert said(plumb.replace("20 deg", "1.9 deg"), 12, "DIVIDE-012")[0] == "pass"


@pytest.mark.parametrize(
    ("more", "verdicts"),
    [
        ('faces: one, wheel: {once_per_turn: 3"}', ["warn"]),
        ('faces: two, wheel: {once_per_turn: 3"}', ["pass"]),
        ('wheel: {once_per_turn: 3"}', ["open"]),
        ('faces: one, elevation: 3 deg, collimation: 5"', ["pass"]),
        ('faces: mixed, elevation: 3 deg, collimation: 5"', ["warn"]),
        ("faces: one", []),
    ],
)
def test_faces_are_judged_by_what_they_leave(more: str, verdicts: list[str]) -> None:
    divide = f'{{by: theodolite, setting: 2", centring: 0 um, target: 3 m, {more}}}'
    assert verdicts == [f.verdict for f in findings(disc(divide, 12), "DIVIDE-009")]


def test_a_theodolite_without_its_centring_is_open_even_on_typical_values() -> None:
    (found,) = findings(disc("{by: theodolite}", 12), "DIVIDE-006")
    assert ("open", ("setups.10.divide.centring",)) == (found.verdict, tuple(found.missing))


def test_mixed_faces_cost_at_least_what_one_face_of_a_circle_off_its_axis_costs() -> None:
    both = [
        stack(
            disc(
                f'{{by: theodolite, faces: {faces}, setting: 1", centring: 0 um, target: 3 m, '
                'wheel: {once_per_turn: 9"}}',
                12,
            ),
            1,
        ).combined.worst.high
        for faces in ("one", "mixed")
    ]
    assert 2.0 * RADIUS * (9.0 * math.sin(math.pi / 12) + 1.0) * ARCSEC == pytest.approx(both[0])
    assert 2.0 * RADIUS * 10.0 * ARCSEC == pytest.approx(both[1])


def test_a_face_tooth_coupling_beats_the_plate_by_what_their_positions_err() -> None:
    book = reviewed(disc(COUPLING, 6)).book
    assert book.get("divide.single_error", book.instances("setup")[0]) == Known(pytest.approx(0.25 * ARCSEC))
    assert stack(disc(COUPLING, 6)).combined.worst.high < 0.5 * UM


# -- keys of another way

KEYS = {
    "circle": "18",
    "wheel": '{once_per_turn: 3"}',
    "worm": '{once_per_crank: 3"}',
    "positions": "24",
    "sides": "24",
    "centring": "0.2 mm, target: 3 m",
    "plumb": '10", elevation: 3 deg',
    "faces": "two",
    "blocks": "1 um, sine_bar: 200",
    "x": "5 um",
}


@pytest.mark.parametrize(("key", "way"), list(itertools.product(KEYS, get_args(Way))))
def test_a_key_of_another_way_is_refused_in_one_message(key: str, way: str) -> None:
    text = disc(f"{{by: {way}, {key}: {KEYS[key]}}}", 12)
    if way in WAYS_OF[key]:
        read_job_text(text, "case.yaml")
        return
    with pytest.raises(JobError) as caught:
        read_job_text(text, "case.yaml")
    (problem,) = caught.value.problems
    assert "says nothing about dividing by " + way in f"{problem.problem} {problem.hint}"
    assert WAYS_OF[key][-1] in f"{problem.problem} {problem.hint}"


@pytest.mark.parametrize(
    ("divide", "message"),
    [
        ("{by: theodolite, centring: 1 mm}", "target: 12 m"),
        ('{by: theodolite, plumb: 10"}', "elevation: 0 deg"),
        ("{by: sine-bar, blocks: 1 um}", "sine_bar: 200 mm"),
        ("{by: theodolite, centring: 1 mm, target: 1.5 mm}", "in metres"),
        ('{by: theodolite, plumb: 10", elevation: 85 deg}', "below 80 deg"),
        ('{by: x-y, step: 10"}', "5 um"),
        ("{by: readout, step: 5 um}", "deg"),
        ("{by: readout, step: 0 deg}", "above zero"),
    ],
)
def test_what_a_key_needs_is_said(divide: str, message: str) -> None:
    with pytest.raises(JobError) as caught:
        read_job_text(disc(divide, 12), "case.yaml")
    assert message in " ".join(f"{p.problem} {p.hint}" for p in caught.value.problems)


def test_every_way_has_keys_and_every_key_a_way() -> None:
    assert {way for ways in WAYS_OF.values() for way in ways} == set(get_args(Way))
