"""Cells of a file, settings of an index table, ways of dividing, rings of readings and ends of a wave, each by hand."""

from __future__ import annotations

import math
from fractions import Fraction
from pathlib import Path

import numpy as np
import pytest
from scipy import integrate, stats

from setupcheck.division import columns, readings, tables, ways
from setupcheck.division.amplitude import _ends, _root, _within, length_of, t_at
from setupcheck.division.backlash_wave import FEWEST, WIDEST, Wave, fitted, nearest_gap, widest_stretch
from setupcheck.division.columns import ARCSEC, BadCell, column_name, is_number, reader, refuse_formula, unknown_column
from setupcheck.division.owners import AS_PLANNED, Explained, Owner
from setupcheck.division.prove_out import FLAT, gaps_to_cut, inverse_of, off_the_quarters, reduce
from setupcheck.division.readings import Readings, read_test
from setupcheck.errors import SetupcheckError
from setupcheck.physics.student_t import t_quantile

# -- cells -----------------------------------------------------------------------------------------------------------


def refused(column: str, text: str) -> str:
    with pytest.raises(BadCell) as wrong:
        reader(column)(text)
    return str(wrong.value)


def test_cells_of_every_unit() -> None:
    assert reader("angle_deg")("90") == pytest.approx(math.pi / 2)
    assert reader("turned_gon")("-100") == pytest.approx(-math.pi / 2)
    assert reader("deviation_arcsec")("-4.5") == pytest.approx(-4.5 * ARCSEC)
    assert reader("angle_deg")("36000") == pytest.approx(100.0 * math.tau)
    assert reader("angle_deg")("-36000") == pytest.approx(-100.0 * math.tau)
    assert reader("deviation_arcsec")('+3"') == pytest.approx(3.0 * ARCSEC)
    assert reader("deviation_arcsec")("3 arcsec") == pytest.approx(3.0 * ARCSEC)
    assert reader("angle_gon")("50 gon") == pytest.approx(math.pi / 4)
    assert reader("angle_deg")("90°") == pytest.approx(math.pi / 2)
    assert reader("tooth")("14") == 14.0 and reader("tooth")("1") == 1.0 and reader("tooth")("1000000") == 1e6
    assert reader("minutes")("-2.5") == -2.5 and reader("minutes")("1000000") == 1e6


@pytest.mark.parametrize(
    ("column", "text", "said"),
    [
        ("angle_deg", "36001", "is 36001, more than a hundred turns"),
        ("angle_deg", "-36001", "is 36001, more than a hundred turns"),
        ("angle_deg", "1_0", "'1_0' is not an angle in degrees. Write it as in 130.25"),
        ("angle_gon", "x", "'x' is not an angle in gon. Write 144.7222"),
        ("deviation_arcsec", "x", "'x' is not a number of seconds of arc. Write -4.5"),
        ("angle_deg", "nan", "'nan' is not an angle in degrees"),
        ("angle_deg", "1,5", "has a decimal comma. Write a point: 1.5"),
        ("angle_deg", "-12,25", "Write a point: -12.25"),
        ("angle_deg", "1,5,2", "'1,5,2' is not an angle in degrees"),
        ("angle_deg", "12 30'", ""),
        ("angle_deg", "12deg 30'", "is not in deg as its column is. Write 12.5"),
        ("deviation_arcsec", "1 deg", "is not in arcsec as its column is. Write 3600"),
        ("angle_gon", "9 deg", "is not in gon as its column is. Write 10"),
        ("angle_deg", "=A1", "'=A1' is a formula"),
        ("angle_deg", "@x", "'@x' is a formula"),
        ("tooth", "0", "is not the number of a tooth. Write a whole number from 1 on"),
        ("tooth", "1000001", "is not the number of a tooth"),
        ("tooth", "2.5", "is not the number of a tooth"),
        ("tooth", "x", "'x' is not the number of a tooth. Write it as in 14"),
        ("tooth", "inf", "'inf' is not the number of a tooth. Write it as in 14"),
        ("minutes", "1000001", "minutes is more than a year"),
        ("minutes", "-1000001", "minutes is more than a year"),
        ("minutes", "x", "'x' is not a time in minutes. Write it as in 12.5"),
        ("angle_dms", "10 60 0", "has 60 or more minutes or seconds"),
        ("angle_dms", "10 0 60", "has 60 or more minutes or seconds"),
        ("angle_dms", "36000 0 1", "is more than a hundred turns"),
        ("angle_dms", "=1", "'=1' is a formula"),
        ("direction", "=f", "'=f' is a formula"),
        ("direction", "x", "'x' is not a direction. Write forward or reverse"),
        ("face", "+", "'+' is not a face of the instrument"),
        ("face", "-", "'-' is not a face of the instrument"),
    ],
)
def test_cells_that_cannot_be_read_say_what_to_write(column: str, text: str, said: str) -> None:
    assert said in refused(column, text)


def test_degrees_minutes_and_seconds_by_hand() -> None:
    read = reader("angle_dms")
    for text in ("12 30 36", "12:30:36", "12° 30' 36\"", "+12 30 36", "12deg30'36"):
        assert read(text) == pytest.approx(math.radians(12.0 + 30.0 / 60.0 + 36.0 / 3600.0))
    assert read("-0 0 1.5") == pytest.approx(-1.5 * ARCSEC)
    assert read("36000 0 0") == pytest.approx(100.0 * math.tau)
    assert read("10 59 59.9") == pytest.approx(math.radians(10.0 + 59.0 / 60.0 + 59.9 / 3600.0))
    assert read("-0") == read("+0.00") == 0.0


def test_signs_before_numbers_are_no_formulas() -> None:
    for plain in ("", "+", "-", "+3", "- 3", "-.5", "+ .5", "abc", "3=3"):
        refuse_formula(plain)
    for formula in ("=", "=3", "@", "+A1", "-B2", "--3", "+cmd|x"):
        with pytest.raises(BadCell, match="is a formula"):
            refuse_formula(formula)
    assert is_number("3.5") and is_number("-1e3") and not is_number("3,5") and not is_number("")


def test_names_of_columns() -> None:
    assert column_name("  Angle - [DEG] ") == "angle_deg"
    assert "Write it in the name: reading_deg, reading_gon, reading_dms" in unknown_column("reading")
    assert "Write it in the name: turned_deg, turned_gon, turned_dms" in unknown_column("turned")
    assert "Write it in the name: deviation_arcsec" in unknown_column("deviation")
    assert "Columns are angle_deg" in unknown_column("zzzzzzzzzzz")
    assert columns.LARGEST_TURN == 100.0 * math.tau


# -- rows ------------------------------------------------------------------------------------------------------------


def written(folder: Path, text: str) -> Readings:
    made = folder / "test.csv"
    made.write_text(text, encoding="utf-8")
    return read_test(made)


def test_a_whole_file_by_hand(tmp_path: Path) -> None:
    found = written(
        tmp_path,
        "# a test\nTurned [gon];reading (deg);run;direction;face;minutes;note;;\n"
        "\n  # later\n0;10;b;forward;left;0;x;;\n100;100.5;a;rev;2;1.5;;;\n200;;a;r;r;2\n300;-;a;r;r;2\n50;60;b;;;3;;\n",
    )
    assert (found.kind, found.how, found.runs, len(found)) == ("turned", "reading", ("b", "a"), 3)
    assert found.station == pytest.approx([0.0, math.pi / 2, math.pi / 4])
    assert np.degrees(found.value) == pytest.approx([10.0, 100.5, 60.0])
    assert (list(found.run), list(found.direction), list(found.face)) == ([0, 1, 0], [1, -1, 0], [1, 2, 0])
    assert found.minutes is not None and list(found.minutes) == [0.0, 1.5, 3.0]
    assert (list(found.line), found.empty) == ([5, 6, 9], (7, 8))
    bare = written(tmp_path, "tooth,deviation_arcsec\n1,2\n3,4\n")
    assert (bare.kind, bare.how, bare.runs, bare.minutes) == ("tooth", "deviation", ("",), None)
    assert (list(bare.direction), list(bare.face), list(bare.run)) == ([0, 0], [0, 0], [0, 0])


def test_runs_are_numbered_by_those_that_have_readings(tmp_path: Path) -> None:
    found = written(tmp_path, "angle_deg,deviation_arcsec,run\n0,,x\n0,1,z\n1,1,y\n2,1,z\n3,1,\n")
    assert found.runs == ("", "z", "y")
    assert [found.runs[n] for n in found.run] == ["z", "y", "z", ""]
    first = written(tmp_path, "run,angle_deg,deviation_arcsec\nb,0,1\na,1,1\n")  # wherever its column stands
    assert (first.runs, list(first.run)) == (("b", "a"), [0, 1])


@pytest.mark.parametrize(("most", "told"), [(3, False), (2, True)])
def test_more_runs_than_the_limit_are_refused(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch, most: int, told: bool
) -> None:
    monkeypatch.setattr(readings, "MOST_RUNS", most)
    text = "angle_deg,deviation_arcsec,run\n0,1,a\n1,1,b\n2,1,c\n"
    if told:
        with pytest.raises(SetupcheckError, match=r"test\.csv:4: more than 2 runs, the last 'c'"):
            written(tmp_path, text)
    else:
        assert written(tmp_path, text).runs == ("a", "b", "c")


def test_a_file_has_at_most_two_hundred_runs(tmp_path: Path) -> None:
    rows = [f"{j},1,run {j}" for j in range(201)]
    head = "angle_deg,deviation_arcsec,run\n"
    assert len(written(tmp_path, head + "\n".join(rows[:200]) + "\n").runs) == 200
    with pytest.raises(SetupcheckError, match=r":202: more than 200 runs, the last 'run 200'"):
        written(tmp_path, head + "\n".join(rows) + "\n")


def test_limits_of_a_file_are_exact(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(readings, "MOST_ROWS", 2)
    assert len(written(tmp_path, "angle_deg,deviation_arcsec\n0,1\n1,1\n2,\n")) == 2
    with pytest.raises(SetupcheckError, match=r":4: more than 2 readings. Give each station's mean"):
        written(tmp_path, "angle_deg,deviation_arcsec\n0,1\n1,1\n2,1\n")
    monkeypatch.setattr(readings, "LONGEST_LINE", 40)
    head = "angle_deg,deviation_arcsec,note\n"
    assert len(written(tmp_path, f"{head}0,1,{'x' * 35}\n")) == 1  # forty with its end
    with pytest.raises(SetupcheckError, match=":2: the line has more than 40 characters"):
        written(tmp_path, f"{head}0,1,{'x' * 36}\n")
    monkeypatch.setattr(readings, "MOST_PROBLEMS", 2)
    with pytest.raises(SetupcheckError) as wrong:
        written(tmp_path, "tooth,deviation_arcsec\na,1\nb,1\nc,1\n")
    assert len(str(wrong.value).splitlines()) == 2


def test_progress_is_told_every_so_many_lines(tmp_path: Path) -> None:
    made = tmp_path / "long.csv"
    made.write_text("angle_deg,deviation_arcsec\n" + "1,2\n" * 40_000)
    told: list[int] = []
    read_test(made, progress=told.append)
    assert told == [27 + 4 * 19_999, 27 + 4 * 39_999]


# -- index tables ----------------------------------------------------------------------------------------------------


def test_a_table_of_three_on_ten_steps_by_hand() -> None:
    """Places at 0, 3 1/3, 6 2/3 of ten steps: 0, 3, 7, off by -1/30 and +1/30 of a turn."""
    lines = tables.settings(3, 10)
    assert [(s.place, s.steps, s.moved, s.off) for s in lines] == [
        (1, 0, 0, 0), (2, 3, 3, Fraction(-1, 30)), (3, 7, 4, Fraction(1, 30)), (1, 10, 3, 0)
    ]  # fmt: skip
    assert [s.angle for s in lines] == [0, Fraction(3, 10), Fraction(7, 10), 1]
    assert tables.off_range(lines) == Fraction(1, 15)
    assert tables.largest_off(lines) == Fraction(1, 30)
    assert (tables.left_open(lines, 10), tables.shared_settings(lines, 10)) == (0, 0)
    (one, again) = tables.settings(1, 10)
    assert (one.moved, again.moved, again.steps, again.place) == (0, 10, 10, 1)
    # cut as 1 3 2: from 7 on to 3 of the next turn are 6 steps, and from 3 to 10 are 7
    assert [s.moved for s in tables.settings(3, 10, (1, 3, 2))] == [0, 7, 6, 7]
    assert tables.off_range(tables.settings(5, 12)) == Fraction(2, 60) + Fraction(2, 60)  # 2.4 -> 2, 4.8 -> 5, 7.2, 9.6


def test_the_last_line_is_no_place_of_its_own() -> None:
    """Steps of two sevenths of a turn: 3 1/2 a turn, so the last line stands half a step past the start."""
    lines = tables.settings(2, Fraction(7, 2))
    assert [s.steps for s in lines] == [0, 2, 4]
    assert [s.off for s in lines] == [0, Fraction(1, 14), Fraction(1, 7)]
    assert tables.off_range(lines) == tables.largest_off(lines) == Fraction(1, 14)
    assert tables.left_open(lines, Fraction(7, 2)) == Fraction(1, 7)


@pytest.mark.parametrize(
    ("up", "low", "whole"), [(1, 2, 0), (3, 2, 2), (5, 2, 2), (7, 2, 4), (8, 3, 3), (7, 3, 2), (0, 5, 0), (9, 3, 3)]
)
def test_halves_go_to_the_even_one(up: int, low: int, whole: int) -> None:
    assert tables.to_whole(up, low) == whole == round(Fraction(up, low))


def test_circles_ratios_and_counts_near_by_hand() -> None:
    assert tables.USUAL_CIRCLES == tuple(range(15, 67))
    assert tables.turn_and_holes(100, 27) == (3, 19)
    assert tables.step_on(40, 12, 18) == (3, 6) and tables.step_on(40, 7, 20) is None
    # 40 x 20 = 800 holes over 7 places: remainders of seven, 3/7 of a hole at most
    assert tables.rounding_on(40, 7, 20) == Fraction(3, 7 * 800)
    assert tables.rounding_on(40, 2, 15) == 0
    found = tables.nearest_circles(40, 7, [20, 15, 20, 17, 18])
    assert found == sorted(found, key=lambda f: (f[1], f[0])) and len(found) == 3
    assert dict(found) == {c: tables.rounding_on(40, 7, c) for c in (15, 17, 18, 20) if c in dict(found)}
    assert tables.nearest_circles(40, 7, [20, 21], most=1) == [(21, 0)]
    assert tables.neighbouring_counts(40, 127, (16, 20)) == (None, 128)  # 100 lies 27 below, more than a fifth
    assert tables.neighbouring_counts(40, 11, (15,)) == (10, 12)
    assert tables.neighbouring_counts(40, 1, (15,)) == (None, 2)
    assert tables.neighbouring_counts(7, 100, (15,)) == (None, 105)  # 105 is 7 x 15; from 80 on below there is none
    assert tables.neighbouring_counts(7, 126, (15,)) == (105, None)
    assert tables.neighbouring_counts(7, 132, (15,)) == (None, None)  # 105 lies 27 below, more than a fifth
    assert tables.other_ratios(40, 57, (19,)) == [(60, (19,)), (72, (19,)), (90, (19,)), (120, (19,))]
    assert tables.other_ratios(60, 7, (15, 16)) == []


def test_a_step_of_a_readout_is_a_plain_share_within_rounding() -> None:
    assert tables.exact_share(math.tau / 1_296_000_000) == Fraction(1, 1_296_000_000)
    assert tables.exact_share(math.tau / 400_000_000) == Fraction(1, 400_000_000)
    odd = 0.001234567891234
    assert abs(float(tables.exact_share(odd)) * math.tau - odd) < 1e-18
    assert tables.exact_share(odd).denominator > 1_296_000_000
    near = math.radians(1.0 / 3600.0)
    assert tables.exact_share(near * (1.0 + 1e-13)) == Fraction(1, 1_296_000)
    assert tables.exact_share(near * (1.0 + 1e-11)) != Fraction(1, 1_296_000)


@pytest.mark.parametrize(("degrees", "quarter", "away"), [
    (30.0, 0, 30.0), (60.0, 1, -30.0), (100.0, 1, 10.0), (350.0, 0, -10.0), (260.0, 3, -10.0), (45.0, 0, 45.0), (0.0, 0, 0.0),
])  # fmt: skip
def test_a_sine_bar_by_hand(degrees: float, quarter: int, away: float) -> None:
    """Blocks 100 sin of the angle from the nearest quarter, to 10 um; what is left over is the angle they make less that."""
    share = Fraction(degrees) / 360
    found, off, blocks, left = tables.sine_setting(share, 100.0, 0.01)
    exact = 100.0 * math.sin(math.radians(abs(away)))
    assert (found, float(off) * 360.0) == (quarter, pytest.approx(away))
    assert blocks == pytest.approx(round(exact, 2))
    made = math.degrees(math.asin(round(exact, 2) / 100.0))
    assert math.degrees(left) == pytest.approx((made - abs(away)) * (-1.0 if away < 0 else 1.0), abs=1e-9)


def test_a_hole_by_coordinates_by_hand() -> None:
    """Radius 50 at 30 + 90 deg, steps of 0.1: exact -25, 43.30127; set -25.0, 43.3."""
    hole = tables.coordinate(Fraction(1, 4), radius=50.0, start=math.radians(30.0), step=0.1)
    assert (hole.x, hole.y) == pytest.approx((-25.0, 43.3))
    assert hole.radius == pytest.approx(math.hypot(25.0, 43.3))
    assert hole.radial == pytest.approx(hole.radius - 50.0)
    u = complex(math.cos(math.radians(120.0)), math.sin(math.radians(120.0)))
    assert hole.tangential == pytest.approx((complex(hole.x, hole.y) * u.conjugate()).imag)
    assert abs(hole.tangential) > 1e-4


# -- ways ------------------------------------------------------------------------------------------------------------


def test_ways_of_dividing_by_hand() -> None:
    assert ways.parallax(2.0, 100.0) == pytest.approx(math.asin(0.02))
    assert ways.parallax(0.0, 100.0) == 0.0
    for centring, target in ((-0.1, 1.0), (1.0, 1.0), (2.0, 1.0)):
        with pytest.raises(ValueError, match="as far off the axis"):
            ways.parallax(centring, target)
    assert ways.target_for(2.0, 0.01) == pytest.approx(2.0 / math.sin(0.01))
    for slope in (0.3, -0.3):
        assert ways.plumb_wave(0.001, slope) == pytest.approx(0.001 * math.tan(0.3))
        assert ways.collimation_error(0.001, slope) == pytest.approx(0.001 / math.cos(0.3))
        assert ways.trunnion_error(0.001, slope) == pytest.approx(0.001 * math.tan(0.3))
    assert ways.tilted_axis_wave(0.02) == pytest.approx(math.tan(0.01) ** 2)
    assert [ways.left_over(24, n) for n in (7, 16, 5, 1, 48)] == [
        Fraction(3, 7),
        Fraction(1, 2),
        Fraction(1, 5),
        0,
        Fraction(1, 2),
    ]
    assert (
        ways.counts_near(24, 2) == (3,) and ways.counts_near(24, 23) == (12, 24) and ways.counts_near(24, 100) == (24,)
    )
    assert ways.quarter_of(7, 12) == (2, Fraction(1, 12)) and ways.quarter_of(1, 8) == (1, Fraction(-1, 8))
    assert ways.quarter_of(0, 5) == (0, 0) and ways.quarter_of(4, 5) == (3, Fraction(1, 20))
    errors = ways.sine_bar_errors(6, 100.0, 0.002)
    # 0, 60 is 30 from 90, 120 likewise, 180, 240 and 300 from 270
    third = 0.002 / (100.0 * math.cos(math.radians(30.0)))
    assert errors == pytest.approx((0.0, third, third, 0.0, third, third))


def test_rounded_coordinates_by_hand() -> None:
    """0.7 of a step beyond a whole one is rounded up by 0.3: outwards at 0 deg, and at 90 deg counter-clockwise none."""
    (right, top, left) = ways.rounded_coordinates((0.0, math.pi / 2.0, math.pi), 10.007, 0.01)
    assert right == pytest.approx((0.003, 0.0), abs=1e-9)
    assert top == pytest.approx((0.003, 0.0), abs=1e-9)
    assert left == pytest.approx((0.003, 0.0), abs=1e-9)
    angle = math.radians(30.0)
    ((out, across),) = ways.rounded_coordinates((angle,), 10.0, 0.5)
    x, y = 8.5 - 10.0 * math.cos(angle), 0.0  # 5.0 lies on a step
    assert (out, across) == pytest.approx((x * math.cos(angle) + y, -x * math.sin(angle)))
    assert ways._rounded(5.0 + 1e-13, 0.5) == 0.0 and ways._rounded(5.1, 0.5) == pytest.approx(-0.1)
    assert ways._rounded(5000.0 + 4e-9, 0.5) == 0.0
    assert ways._rounded(0.25 + 1e-9, 0.5) == pytest.approx(0.25 - 1e-9, abs=1e-12)


def test_drifts_and_their_slow_waves_by_numpy() -> None:
    assert ways.drift_shape(1, None) == (0.0,)
    assert ways.drift_shape(6, "spread") == (0.0, 0.6, 0.2, 0.8, 0.4, 1.0)
    for n in (2, 3, 5, 8, 9, 30):
        shape = tuple(np.random.default_rng(n).normal(size=n))
        spectrum = 2.0 / n * np.abs(np.fft.fft(shape))
        for most in (1, 4):
            wanted = max(spectrum[1 : min(most, (n - 1) // 2) + 1], default=0.0)
            assert ways.slowest_waves(shape, most) == pytest.approx(wanted)


# -- rings of readings -----------------------------------------------------------------------------------------------


def test_the_inverse_of_three_by_three_is_numpys() -> None:
    rng = np.random.default_rng(5)
    for _ in range(5):
        a = rng.normal(size=(6, 3))
        m = a.T @ a
        assert np.array(inverse_of(m.tolist(), 1)) == pytest.approx(np.linalg.inv(m))
    small = np.diag([1.0, 1.0, FLAT]) * 2.0
    edge = (np.linalg.det(small) / FLAT) ** (1.0 / 3.0)  # rows^3 FLAT is the determinant: two rows
    assert edge == pytest.approx(2.0)
    assert inverse_of((small * 1.01).tolist(), 2)[2][2] == pytest.approx(1.0 / small[2][2] / 1.01)
    with pytest.raises(ValueError, match="too close together"):
        inverse_of((small * 0.99).tolist(), 2)


def test_gaps_to_cut_and_rings_by_hand() -> None:
    assert [gaps_to_cut(n) for n in (1, 2, 3, 4, 5)] == [(1,), (1, 2), (1, 2, 3), (1, 2, 3, 4), (1, 2, 4, 5)]
    assert off_the_quarters(8) == 0.0
    # 5 gaps stand at 0 72 144 216 288: quarters 90 180 270 are met at 72, 144 or 216, 288
    assert math.degrees(off_the_quarters(5)) == pytest.approx(36.0)
    ring = reduce({1: 2.0, 2: 1.0, 3: 0.0, 4: 1.0}, 4)
    assert (ring.mean, ring.x, ring.y) == pytest.approx((1.0, 1.0, 0.0))
    assert (ring.eccentricity, math.sin(ring.direction)) == pytest.approx((1.0, 0.0), abs=1e-12)
    assert (ring.along, ring.across, ring.misfit) == pytest.approx((math.sqrt(0.5), math.sqrt(0.5), 0.0))
    back = reduce({1: 0.0, 2: -3.0, 3: 0.0, 4: 3.0}, 4)
    assert back.direction == pytest.approx(1.5 * math.pi) and back.y == pytest.approx(-3.0)
    still = reduce({1: 1.0, 25: 1.0, 49: 1.0}, 72)
    assert (still.eccentricity, still.misfit) == (pytest.approx(0.0, abs=1e-12), None)
    uneven = reduce({1: 0.0, 13: 0.0, 37: 0.0, 49: 0.0}, 72)
    rows = np.array([[1.0, math.cos(a), math.sin(a)] for a in np.radians([0.0, 60.0, 180.0, 240.0])])
    covariance = np.linalg.inv(rows.T @ rows)
    if uneven.eccentricity == 0.0:  # no direction: along x
        assert (uneven.along, uneven.across) == pytest.approx(
            (math.sqrt(covariance[1, 1]), math.sqrt(covariance[2, 2]))
        )


def test_a_backlash_by_hand() -> None:
    assert (FEWEST, math.degrees(WIDEST)) == (4, pytest.approx(120.0))
    wave = fitted({1: 3.0, 2: 1.5, 3: 1.0, 4: 2.5}, 4)
    # mean 2; x = (3 - 1)/2, y = (1.5 - 2.5)/2; left over +- (3 - 1.5 + 1 - 2.5)/4 = 0
    assert (wave.mean, wave.x, wave.y) == pytest.approx((2.0, 1.0, -0.5))
    assert wave.loosest == pytest.approx(math.tau + math.atan2(-0.5, 1.0))
    odd = fitted({1: 3.4, 2: 1.1, 3: 1.4, 4: 2.1}, 4)
    assert list(odd.left.values()) == pytest.approx([0.4, -0.4, 0.4, -0.4])
    assert Wave(0.0, 1.0, 0.0, ((1.0,) * 3,) * 3, {1: 0.1, 2: -0.3, 3: 0.2}).farthest == 2
    plain = Wave(0.0, 1.0, 0.0, ((4.0, 0.1, 0.2), (0.1, 9.0, 0.3), (0.2, 0.3, 16.0)), {})
    assert plain.amplitude_spread == pytest.approx(3.0)
    assert plain.spread_at(math.pi / 2.0) == pytest.approx(math.sqrt(4.0 + 16.0 + 0.4))
    assert plain.spread_at(math.pi) == pytest.approx(math.sqrt(4.0 + 9.0 - 0.2))
    assert widest_stretch({1: 0.0, 5: 0.0, 7: 0.0}, 8) == (pytest.approx(math.pi), 1, 5)
    assert widest_stretch((2, 4, 6, 8), 8) == (pytest.approx(math.pi / 2), 2, 4)  # the first of several alike
    assert [nearest_gap(math.tau * x / 8.0, 8) for x in (0.0, 0.4, 0.6, 7.4, 7.6, -1.0)] == [1, 1, 2, 8, 1, 8]


# -- ends of a wave --------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(("along", "across"), [(1.0, 1.0), (0.5, 2.0), (2.0, 0.3), (1.0, 0.0)])
@pytest.mark.parametrize("value", [4.0, 9.0])
def test_ends_are_those_of_the_chance_integrated_by_scipy(value: float, along: float, across: float) -> None:
    """P(|(L + s1 u, s2 v)| < value) = integral over v of the normal law between both ends of the chord."""

    def below(length: float) -> float:
        def inner(v: float) -> float:
            square = value**2 - (across * v) ** 2
            if square <= 0.0:
                return 0.0
            chord = math.sqrt(square)
            return stats.norm.pdf(v) * (
                stats.norm.cdf((chord - length) / along) - stats.norm.cdf((-chord - length) / along)
            )

        if across == 0.0:
            return float(stats.norm.cdf((value - length) / along) - stats.norm.cdf((-value - length) / along))
        return float(integrate.quad(inner, -6.0, 6.0, limit=200)[0])

    low, high = _ends(value, along, across)
    assert below(high) == pytest.approx(0.025, abs=0.003)
    if low > 0.0:
        assert below(low) == pytest.approx(0.975, abs=0.003)
    else:
        assert below(0.0) <= 0.978


def test_ends_without_scatter_along_are_chords() -> None:
    assert _ends(3.0, 0.0, 0.0) == (3.0, 3.0)
    low, high = _ends(5.0, 0.0, 1.0)
    assert 0.0 < low <= high <= 5.001
    assert _ends(0.5, 3.0, 2.0)[0] == 0.0
    assert _ends(0.0, 2.0, 7.0)[1] >= 7.0
    assert _root(lambda x: 2.0 - x, 0.0, 10.0) == pytest.approx(2.0)
    assert _root(lambda x: -1.0 - x, 3.0, 10.0) == 3.0
    assert _root(lambda x: 0.0 * x, 3.0, 10.0) == 3.0


@pytest.mark.parametrize(("along", "across"), [(1.0, 1.0), (3.0, 0.5), (0.5, 2.0)])
def test_the_turn_that_readings_allow_is_fiellers(along: float, across: float) -> None:
    """Turned by psi, the component across L sin psi equals t sqrt(s1^2 sin^2 + s2^2 cos^2): tan^2 = t^2 s2^2/(L^2 - t^2 s1^2)."""
    t, value = 2.2, 10.0
    for base in (0.0, 2.0, -2.5):
        turn = np.array([[math.cos(base), -math.sin(base)], [math.sin(base), math.cos(base)]])
        vector, covariance = turn @ [value, 0.0], turn @ np.diag([along**2, across**2]) @ turn.T
        wanted = math.atan(t * across / math.sqrt(value**2 - (t * along) ** 2))
        assert _within(vector, covariance, t) == pytest.approx(wanted, rel=1e-6)
    assert _within(np.array([2.0, 0.0]), np.eye(2), 2.2) is None
    skew = np.array([[1.0, 0.8], [0.8, 1.0]])
    both = [_within(np.array([10.0, 0.0]), skew, 2.0), _within(np.array([10.0, 0.0]), skew * [[1, -1], [-1, 1]], 2.0)]
    assert both[0] == pytest.approx(both[1])  # the worse side, whichever it is


def test_a_bound_besides_takes_the_direction_where_it_is_as_long_as_the_wave() -> None:
    far = length_of(np.array([0.0, -20.0]), np.eye(2), 9.0, also=1.0)
    assert far.direction == pytest.approx(1.5 * math.pi)
    assert length_of(np.array([20.0, 0.0]), np.eye(2), 9.0, also=20.0).within is None
    assert length_of(np.array([20.0, 0.0]), np.eye(2), 9.0, also=19.0).low == 0.0
    assert length_of(np.array([20.0, 0.0]), np.zeros((2, 2)), 9.0, also=10.0).within == pytest.approx(math.asin(0.5))
    assert t_at(1e12) == t_at(1e9) == pytest.approx(1.95996, abs=1e-4)
    assert t_at(4.0, 0.9) == pytest.approx(t_quantile(0.9, 4.0)) == pytest.approx(stats.t.ppf(0.9, 4))


def test_owners_are_told_apart_by_three_to_one() -> None:
    def told(*odds: float) -> bool:
        return Explained(0.5, tuple(Owner(AS_PLANNED, x, (0.0, 0.0)) for x in odds)).told_apart

    assert [told(1.0), told(0.75, 0.25), told(0.74, 0.26), told(0.62, 0.2, 0.18)] == [True, True, False, True]


@pytest.mark.parametrize("base", [0.5, 2.0, -1.0])
def test_turning_the_frame_changes_no_end_and_no_angle(base: float) -> None:
    turn = np.array([[math.cos(base), -math.sin(base)], [math.sin(base), math.cos(base)]])
    for vector, wide in (([10.0, 0.0], np.diag([4.0, 0.3])), ([3.0, 0.0], np.array([[0.2, 0.3], [0.3, 1.5]]))):
        plain = length_of(np.array(vector), wide, 7.0)
        turned = length_of(turn @ vector, turn @ wide @ turn.T, 7.0)
        assert (turned.low, turned.high) == pytest.approx((plain.low, plain.high), rel=1e-6)
        assert turned.within == (None if plain.within is None else pytest.approx(plain.within, rel=1e-5))
        assert turned.direction == pytest.approx((plain.direction + base) % math.tau)


@pytest.mark.parametrize("value", [0.0, 0.5, 1.9])
def test_a_wave_shorter_than_its_scatter_across_may_lie_any_way(value: float) -> None:
    """Its direction is not known then, so the wider of both scatters counts along it too."""
    found = length_of(np.array([value, 0.0]), np.diag([1.0, 4.0]), 1e9)
    assert (found.low, found.high) == pytest.approx(_ends(value, 2.0, 2.0), rel=1e-4)
    assert found.within is None


def test_blocks_longer_than_the_bar_stand_it_upright() -> None:
    """A step of 1.2 bars: 45 deg asks for 0.71 of a bar, the nearest sum is 1.2, and no bar goes beyond 90 deg."""
    quarter, away, blocks, left = tables.sine_setting(Fraction(1, 8), 1.0, 1.2)
    assert (quarter, away, blocks) == (0, Fraction(1, 8), pytest.approx(1.2))
    assert left == pytest.approx(math.pi / 4.0)
