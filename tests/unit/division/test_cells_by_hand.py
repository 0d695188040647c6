"""Cells and rows of a file of readings, each by hand."""

from __future__ import annotations

import math
from pathlib import Path

import numpy as np
import pytest

from setupcheck.division import columns, readings
from setupcheck.division.columns import ARCSEC, BadCell, column_name, is_number, reader, refuse_formula, unknown_column
from setupcheck.division.readings import Readings, read_test
from setupcheck.errors import SetupcheckError

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
