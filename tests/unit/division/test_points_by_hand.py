"""From rows to points: each step on few readings, by hand."""

from __future__ import annotations

import math
from pathlib import Path

import numpy as np
import pytest

from setupcheck.division import points as module
from setupcheck.division.columns import ARCSEC
from setupcheck.division.points import Prepared, gap_of, prepare, without
from setupcheck.division.reduction import reduce as reduced
from setupcheck.errors import SetupcheckError
from tests.unit.division.few_points import points, written


def ready(
    folder: Path, *lines: str, count: int = 72, worm: float | None = None, start: float = 0.0, turn: int = 1
) -> Prepared:
    return prepare(written(folder, *lines), count=count, worm_ratio=worm, start=start, turn=turn)


# -- stations and times ----------------------------------------------------------------------------------------------


def test_teeth_stand_half_a_pitch_past_their_gaps(tmp_path: Path) -> None:
    """Of 12 teeth tooth n stands at 30 (n - 1/2) deg from the first gap, one way round or the other."""
    rows = ["tooth,deviation_arcsec", "1,0", "2,0", "12,0"]
    assert np.degrees(ready(tmp_path, *rows, count=12).points.theta) == pytest.approx([15.0, 45.0, 345.0])
    on = ready(tmp_path, *rows, count=12, start=math.radians(100.0))
    assert np.degrees(on.points.theta) == pytest.approx([115.0, 145.0, 445.0])
    back = ready(tmp_path, *rows, count=12, start=math.radians(100.0), turn=-1)
    assert np.degrees(back.points.theta) == pytest.approx([85.0, 55.0, -245.0])
    with pytest.raises(SetupcheckError, match=r":4: there is no tooth 12 on a wheel of 11. Write 1 to 11"):
        ready(tmp_path, *rows, count=11)


def test_times_go_from_nothing_to_one(tmp_path: Path) -> None:
    rows = ["angle_deg,deviation_arcsec,minutes", "0,0,30", "90,0,32", "180,0,40"]
    assert ready(tmp_path, *rows).points.t == pytest.approx([0.0, 0.2, 1.0])
    assert ready(tmp_path, "angle_deg,deviation_arcsec", "0,0", "90,0", "180,0").points.t == pytest.approx([0, 0.5, 1])
    assert list(ready(tmp_path, "angle_deg,deviation_arcsec,minutes", "0,0,7", "90,0,7").points.t) == [0.0, 0.0]
    assert list(ready(tmp_path, "angle_deg,deviation_arcsec", "0,0").points.t) == [0.0]


# -- the instrument's own readings -----------------------------------------------------------------------------------


@pytest.mark.parametrize("sense", [1, -1])
@pytest.mark.parametrize("zero", [0.0, 170.0, 359.0])
def test_an_instruments_readings_are_deviations_about_the_zero_of_their_run(
    tmp_path: Path, sense: int, zero: float
) -> None:
    """Deviations 0, 9, -9, 0 seconds of arc, whose mean is nothing; the circle counts along or against."""
    off = [0.0, 9.0, -9.0, 0.0]
    rows = []
    for run in (0, 1):
        for station, d in zip((0.0, 50.0, 140.0, 250.0), off, strict=True):
            shown = (sense * (station + d / 3600.0) + zero + 33.0 * run) % 360.0
            rows.append(f"{station},{shown:.9f},{run}")
    found = ready(tmp_path, "angle_deg,reading_deg,run", *rows)
    assert found.against == (sense < 0)
    assert found.points.y / ARCSEC == pytest.approx(np.array(off * 2), abs=1e-3)
    assert list(found.points.run) == [0] * 4 + [1] * 4


def test_a_reading_in_face_right_is_half_a_turn_more(tmp_path: Path) -> None:
    """Collimation of 5": left reads 5" less than it is, right 5" more; their mean is the direction."""
    rows = []
    for station, d in ((0.0, 3.0), (70.0, -1.0), (200.0, -2.0)):
        rows += [
            f"{station},{(station + (d - 5.0) / 3600.0) % 360:.9f},left",
            f"{station},{(station + 180.0 + (d + 5.0) / 3600.0) % 360:.9f},right",
        ]
    found = ready(tmp_path, "angle_deg,reading_deg,face", *rows)
    assert found.collimation is not None
    assert found.collimation.mean / ARCSEC == pytest.approx(5.0, abs=1e-3)
    assert found.collimation.spread / ARCSEC == pytest.approx(0.0, abs=1e-3)
    assert (found.collimation.pairs, found.collimation.single) == (3, 0)
    assert found.points.y / ARCSEC == pytest.approx([3.0, -1.0, -2.0], abs=1e-3)
    against = [row.replace(",left", ",x").replace(",right", ",left").replace(",x", ",right") for row in rows]
    other = ready(tmp_path, "angle_deg,reading_deg,face", *against)
    assert other.collimation is not None
    assert other.collimation.mean / ARCSEC == pytest.approx(-5.0, abs=1e-3)


def test_collimation_keeps_its_sign_where_the_circle_counts_against(tmp_path: Path) -> None:
    rows = []
    for station in (0.0, 70.0, 200.0):
        rows += [
            f"{station},{(400.0 - station - 5.0 / 3600.0) % 360:.9f},left",
            f"{station},{(400.0 - station + 180.0 + 5.0 / 3600.0) % 360:.9f},right",
        ]
    found = ready(tmp_path, "angle_deg,reading_deg,face", *rows)
    assert found.against and found.collimation is not None
    assert found.collimation.mean / ARCSEC == pytest.approx(5.0, abs=1e-3)


def test_stations_half_a_turn_apart_tell_no_sense(tmp_path: Path) -> None:
    with pytest.raises(SetupcheckError, match="nobody can tell which way the circle of the instrument counts"):
        ready(tmp_path, "angle_deg,reading_deg", "0,10", "180,190", "0,10", "180,190")


# -- whole pitches ---------------------------------------------------------------------------------------------------


@pytest.mark.parametrize("pitches", [1, -1, 3])
def test_each_run_counts_from_where_most_of_its_readings_stand(tmp_path: Path, pitches: int) -> None:
    """72 teeth: 5 deg a pitch. The second run stands whole pitches off at two of its five; its zero is another one."""
    y = np.array([1.0, 2.0, 1.5, 0.5, 1.0, 11.0, 12.0, 11.5, 10.5, 11.0])
    off = y + 5.0 * 3600.0 * pitches * np.array([0] * 6 + [1, 1] + [0] * 2)
    rows = [f"{72 * (j % 5)},{d},{j // 5}" for j, d in enumerate(off)]
    found = ready(tmp_path, "angle_deg,deviation_arcsec,run", *rows)
    assert found.points.y / ARCSEC == pytest.approx(y, abs=1e-6)
    (whole,) = found.whole
    assert (whole.pitches, whole.first_line, whole.last_line, whole.rows) == (pitches, 8, 9, 2)
    assert np.degrees([whole.pitch, whole.theta, whole.theta_last]) == pytest.approx([5.0, 72.0, 144.0])


def test_a_worm_that_was_counted_wrong_stands_a_turn_of_it_off(tmp_path: Path) -> None:
    """Ratio 90 on 72 teeth: a turn of the worm is 4 deg and no whole pitch."""
    y = np.array([1.0, 2.0, 1.5, 0.5, 1.0, 1.2])
    rows = [f"{60 * j},{d + (4.0 * 3600.0 if j == 3 else 0.0)}" for j, d in enumerate(y)]
    found = ready(tmp_path, "angle_deg,deviation_arcsec", *rows, worm=90.0)
    (whole,) = found.whole
    assert (whole.pitches, whole.rows, math.degrees(whole.pitch)) == (1, 1, pytest.approx(4.0))
    assert found.points.y / ARCSEC == pytest.approx(y, abs=1e-6)
    assert ready(tmp_path, "angle_deg,deviation_arcsec", *rows).whole == ()


def test_two_stretches_are_two_and_a_new_run_ends_one(tmp_path: Path) -> None:
    pitch = 5.0 * 3600.0
    y = [0.0, pitch, 0.0, 0.0, -pitch, 0.0, 0.0, pitch, pitch, 0.0, 0.0, 0.0, 0.0, 0.0]
    run = [0] * 8 + [1] * 6
    found = ready(
        tmp_path,
        "angle_deg,deviation_arcsec,run",
        *(f"{20 * j},{a},{r}" for j, (a, r) in enumerate(zip(y, run, strict=True))),
    )
    assert [(w.pitches, w.first_line, w.last_line, w.rows) for w in found.whole] == [
        (1, 3, 3, 1), (-1, 6, 6, 1), (1, 9, 9, 1), (1, 10, 10, 1)
    ]  # fmt: skip
    assert found.points.y == pytest.approx([0.0] * 14, abs=1e-12)


def test_readings_that_scatter_over_a_tenth_of_a_pitch_are_left_alone(tmp_path: Path) -> None:
    pitch = 5.0 * 3600.0

    def whole(scatter: float) -> int:
        y = [0.0, scatter * pitch, 0.0, pitch, 0.0, 0.0, 0.0]
        return len(ready(tmp_path, "angle_deg,deviation_arcsec", *(f"{50 * j},{d}" for j, d in enumerate(y))).whole)

    assert whole(0.095) == 1
    assert whole(0.105) == 0


# -- both faces ------------------------------------------------------------------------------------------------------


def faces(folder: Path, *rows: str) -> Prepared:
    return ready(folder, "angle_deg,deviation_arcsec,face", *rows)


def test_a_single_face_is_put_right_by_the_mean_of_the_others(tmp_path: Path) -> None:
    """Halves of the differences are 1, 3 and mean 2: a left one alone gains 2, a right one alone loses 2."""
    found = faces(tmp_path, "0,10,left", "0,12,right", "60,20,left", "60,26,right", "120,5,left", "180,7,right")
    assert found.points.y / ARCSEC == pytest.approx([11.0, 23.0, 7.0, 5.0])
    assert found.collimation is not None
    assert found.collimation.mean / ARCSEC == pytest.approx(2.0)
    assert found.collimation.spread / ARCSEC == pytest.approx(2.0)
    assert (found.collimation.pairs, found.collimation.single) == (2, 2)
    assert any(
        s.startswith("2 readings have only one face and were put right by the mean collimation: line 6, 7")
        for s in found.limits
    )
    assert list(found.points.line) == [2, 4, 6, 7]


def test_the_first_left_goes_with_the_first_right_of_its_station_run_and_direction(tmp_path: Path) -> None:
    head = "angle_deg,deviation_arcsec,face,run,direction"
    rows = ["0,10,left,0,forward", "0,30,left,0,forward", "0,12,right,0,forward", "0,36,right,0,forward",
            "0,50,left,1,forward", "0,52,right,1,reverse", "0,58,right,1,forward"]  # fmt: skip
    found = ready(tmp_path, head, *rows)
    # pairs 10 with 12, 30 with 36, 50 with 58: halves 1, 3, 4, and 52 alone loses their mean
    assert found.points.y / ARCSEC == pytest.approx([11.0, 33.0, 54.0, 52.0 - 8.0 / 3.0])
    assert found.collimation is not None and found.collimation.pairs == 3


@pytest.mark.parametrize(
    ("rows", "said"),
    [
        (("0,1,left", "90,2,left"), "all readings are in one face"),
        (("0,1,right", "90,2,right"), "all readings are in one face"),
        (("0,1,left", "90,2,right"), "no station has both faces in one run and direction"),
        (("0,1,left", "0,2,right", "90,2,", "120,3,"), "2 readings name no face and count as they stand"),
    ],
)
def test_what_faces_do_not_tell_is_a_limit(tmp_path: Path, rows: tuple[str, ...], said: str) -> None:
    found = faces(tmp_path, *rows)
    assert [s for s in found.limits if "face" in s and s.startswith(said)]
    assert (found.collimation is None) == (len(rows) == 2)
    plain = ready(tmp_path, "angle_deg,deviation_arcsec", "0,1", "90,2")
    assert plain.collimation is None and not any("face" in s for s in plain.limits)


def test_only_the_first_five_of_many_single_faces_are_named(tmp_path: Path) -> None:
    rows = ["0,1,left", "0,2,right", *(f"{10 + j},1,left" for j in range(7))]
    (said,) = [s for s in faces(tmp_path, *rows).limits if "only one face" in s]
    assert said.startswith("7 readings") and said.endswith("line 4, 5, 6, 7, 8")


# -- what is told of the rows ----------------------------------------------------------------------------------------


def test_lines_without_a_reading_are_named_up_to_five(tmp_path: Path) -> None:
    def said(empty: int) -> str:
        rows = [f"{j}," for j in range(empty)] + ["200,1", "300,2"]
        return ready(tmp_path, "angle_deg,deviation_arcsec", *rows).limits[0]

    assert said(1) == "1 line has no reading and is left out: line 2"
    assert said(5) == "5 lines have no reading and are left out: line 2, 3, 4, 5, 6"
    assert said(6) == "6 lines have no reading and are left out: line 2, 3, 4, 5, 6 …"


@pytest.mark.parametrize(
    ("degrees", "wanted"),
    [
        ([0, 40, 80, 120, 160, 200, 240, 280, 320], None),
        ([0, 40, 80, 120, 200, 240, 280, 320], (120, 200, 40)),
        ([40, 80, 120, 160, 200, 240, 280], (280, 40, 40)),
        ([0, 120, 240], None),
        ([0, 10, 20, 30], (30, 0, 10)),
        ([0, 90, 180, 270], None),
        ([0, 40, 80, 144.1, 184.1, 224.1, 264.1, 304.1], (80, 144.1, 40)),  # 1.6 x 40 is 64
        ([0, 40, 80, 143.9, 183.9, 223.9, 263.9, 303.9], None),
    ],
)
def test_a_stretch_of_more_than_so_many_usual_steps_is_a_gap(
    degrees: list[float], wanted: tuple[float, float, float] | None
) -> None:
    found = gap_of(points([float(d) for d in degrees] * 2, [0.0] * 2 * len(degrees)))
    assert (None if found is None else pytest.approx(np.degrees(found), abs=1e-6)) == wanted


def test_points_without_some_keep_all_columns_in_step() -> None:
    data = points([0, 10, 20, 30], [1, 2, 3, 4], run=[0, 0, 1, 1], direction=[1, -1, 1, -1])
    left = without(data, np.array([1, 3]))
    assert (list(left.y), list(left.run), list(left.direction), list(left.line)) == ([1, 3], [0, 1], [1, 1], [2, 4])
    assert list(np.degrees(left.theta)) == pytest.approx([0.0, 20.0])
    assert list(left.t) == pytest.approx([0.0, 2.0 / 3.0])
    tidy = module._tidied(without(data, np.array([0])))
    assert (list(tidy.run), list(tidy.t)) == ([0, 1, 1], pytest.approx([0.0, 0.5, 1.0]))
    assert list(module._tidied(without(data, np.array([0, 1]))).run) == [0, 0]


def test_times_of_less_than_a_minute_are_times(tmp_path: Path) -> None:
    found = ready(tmp_path, "angle_deg,deviation_arcsec,minutes", "0,0,7", "90,0,7.1", "180,0,7.5")
    assert found.points.t == pytest.approx([0.0, 0.2, 1.0])


def test_uneven_stations_turned_past_have_the_same_waves_mirrored(tmp_path: Path) -> None:
    """Sine and cosine of uneven stations are known together: their covariance changes its sign, and no length does."""
    rng = np.random.default_rng(21)
    angles = [0.0, 20.0, 35.0, 80.0, 100.0, 170.0, 200.0, 215.0, 300.0]
    rows = [
        f"{a},{12.0 * math.cos(math.radians(a)) + rng.normal(0, 1):.6f},{k},forward" for k in range(3) for a in angles
    ]
    plain = reduced(written(tmp_path, "angle_deg,deviation_arcsec,run,direction", *rows), count=72).waves[0]
    turned = reduced(written(tmp_path, "turned_deg,deviation_arcsec,run,direction", *rows), count=72).waves[0]
    assert abs(plain.covariance[1]) > 0.02 * plain.covariance[0]
    assert (turned.length.value, turned.length.low, turned.length.high) == pytest.approx(
        (plain.length.value, plain.length.low, plain.length.high), rel=1e-9
    )
    assert turned.length.within == pytest.approx(plain.length.within, rel=1e-9)


def test_two_wide_stretches_of_seven_are_no_gap_and_of_eight_are_one() -> None:
    """A quarter of the stations may be wide: seven have one to spare, eight two; the widest of them is told."""
    seven = [0.0, 10.0, 20.0, 30.0, 130.0, 140.0, 150.0]
    assert gap_of(points(seven, [0.0] * 7)) is None
    found = gap_of(points([*seven, 160.0], [0.0] * 8))
    assert found is not None and np.degrees(found) == pytest.approx([160.0, 0.0, 10.0], abs=1e-6)
    assert gap_of(points([0.0, 90.0, 180.0], [0.0] * 3)) is None
    assert gap_of(points([0.0, 50.0, 100.0, 359.9999999999], [0.0] * 4)) is not None
