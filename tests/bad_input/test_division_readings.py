"""CSV of a division test with mistakes: each gets one message with its line and what to write, or a limit that is named."""

from __future__ import annotations

import math
from pathlib import Path

import pytest

from setupcheck.division import readings as module
from setupcheck.division.readings import read_test
from setupcheck.division.reduction import reduce
from setupcheck.division.results import Reduced
from setupcheck.division.template import template
from setupcheck.errors import SetupcheckError

HEAD = "angle_deg,deviation_arcsec\n"


def refused(folder: Path, data: str | bytes) -> str:
    file = folder / "t.csv"
    file.write_bytes(data.encode() if isinstance(data, str) else data)
    with pytest.raises(SetupcheckError) as wrong:
        reduced(folder, data)
    return str(wrong.value).replace(str(file), "t.csv")


def reduced(folder: Path, data: str | bytes, **more: object) -> Reduced:
    file = folder / "t.csv"
    file.write_bytes(data.encode() if isinstance(data, str) else data)
    return reduce(read_test(file), **{"count": 72, "worm_ratio": 72.0, "radius": 54.0, **more})  # type: ignore[arg-type]


REFUSED: dict[str, tuple[str | bytes, str]] = {
    "empty": ("", "t.csv: there is nothing in the file but empty lines and comments"),
    "comments alone": ("# a\n\n", "t.csv: there is nothing in the file but empty lines and comments"),
    "names alone": (HEAD, "t.csv: no line has a reading"),
    "no names": ("0,1\n10,2\n", "t.csv:1: the first line has no names of columns. Write them above, as in angle_deg"),
    "no names, run": ("0,1.5,0,forward\n0,2,0,forward\n", "t.csv:1: the first line has no names of columns"),
    "unknown column": ("angle_deg,deviaton_arcsec\n", "no column 'deviaton_arcsec'. Did you mean deviation_arcsec?"),
    "no unit": ("angle,deviation_arcsec\n", "'angle' does not say its unit. Write it in the name: angle_deg, angle_gon"),
    "two angles": ("angle_deg,angle_gon,deviation_arcsec\n", "angle_deg and angle_gon both give the station. Keep one"),
    "twice": ("angle_deg,angle_deg,deviation_arcsec\n", "the column angle_deg is there 2 times"),
    "no station": ("run,deviation_arcsec\n", "no column has the stations. Write one of angle_deg"),
    "no reading": ("angle_deg,run\n", "no column has the readings. Write one of deviation_arcsec"),
    "text": (HEAD + "0,1\n10,abc\n", "t.csv:3: column deviation_arcsec: 'abc' is not a number of seconds of arc. Write -4.5"),
    "comma": ("angle_deg;deviation_arcsec\n0;1,5\n", "column deviation_arcsec: '1,5' has a decimal comma. Write a point: 1.5"),
    "other unit": (HEAD + "12 gon,1\n", "t.csv:2: column angle_deg: '12 gon' is not in deg as its column is. Write 10.8"),
    "formula": (HEAD + "=1+2,1\n", "t.csv:2: column angle_deg: '=1+2' is a formula. Write its value"),
    "at sign": (HEAD + "0,@SUM(A1)\n", "column deviation_arcsec: '@SUM(A1)' is a formula"),
    "command": (HEAD + "0,+cmd|' /C calc'!A0\n", "is a formula. Write its value"),
    "formula as run": ("angle_deg,deviation_arcsec,run\n0,1,=A1\n", "column run: '=A1' is a formula"),
    "nan": (HEAD + "0,nan\n", "'nan' is not a number of seconds of arc"),
    "infinite": (HEAD + "0,inf\n", "'inf' is not a number of seconds of arc"),
    "huge": (HEAD + "1e9,0\n", "more than a hundred turns. Check the number and its unit"),
    "NUL": (HEAD.encode() + b"0,1\n\0\0,2\n", "t.csv:3: the line has NUL bytes"),
    "UTF-16": ("\ufeff".encode("utf-16-le") + HEAD.encode("utf-16-le"), "t.csv:1: the file is UTF-16. Save it as CSV UTF-8"),
    "latin": (HEAD.encode() + b"0,1\n10\xb0,2\n", "t.csv:3: the line is not UTF-8"),
    "long line": (HEAD + "0," + "1" * 20_000 + "\n", "t.csv:2: the line has more than 10000 characters"),
    "cells": (HEAD + "0,1,2\n", "t.csv:2: 3 cells where the first line names 2 columns"),
    "short": (HEAD + "0\n", "t.csv:2: 1 cell where the first line names 2 columns"),
    "direction": ("angle_deg,deviation_arcsec,direction\n0,1,sideways\n", "'sideways' is not a direction. Write forward"),
    "face": ("angle_deg,deviation_arcsec,face\n0,1,3\n", "'3' is not a face of the instrument. Write left or right"),
    "tooth": ("tooth,deviation_arcsec\n1,0\n73,0\n", "t.csv:3: there is no tooth 73 on a wheel of 72. Write 1 to 72"),
    "half a tooth": ("tooth,deviation_arcsec\n1.5,0\n", "'1.5' is not the number of a tooth"),
    "minutes": ("angle_dms,deviation_arcsec\n10 70 0,0\n", "'10 70 0' has 60 or more minutes or seconds"),
    "half turns": ("angle_deg,reading_deg\n0,10\n180,190\n0,10\n", "nobody can tell which way the circle"),
}  # fmt: skip


@pytest.mark.parametrize("name", REFUSED)
def test_a_mistake_is_told_once_with_what_to_write(name: str, tmp_path: Path) -> None:
    data, message = REFUSED[name]
    told = refused(tmp_path, data)
    assert message in told
    assert 1 == len(told.splitlines())


def test_all_wrong_cells_are_told_in_one_run_up_to_ten(tmp_path: Path) -> None:
    assert 3 == len(refused(tmp_path, HEAD + "a,1\n1,b\n2,2\nc,3\n").splitlines())
    assert 10 == len(refused(tmp_path, HEAD + "a,1\n" * 50).splitlines())


def test_a_file_that_is_not_there_or_is_a_folder_is_told(tmp_path: Path) -> None:
    with pytest.raises(SetupcheckError, match="there is no such file"):
        read_test(tmp_path / "none.csv")
    with pytest.raises(SetupcheckError, match="is a folder"):
        read_test(tmp_path)


def test_more_rows_than_the_limit_are_refused(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(module, "MOST_ROWS", 3)
    assert "t.csv:5: more than 3 readings" in refused(tmp_path, HEAD + "0,1\n" * 4)


@pytest.mark.parametrize("delimiter", [",", ";", "\t"])
@pytest.mark.parametrize("front", ["", "\ufeff"])
@pytest.mark.parametrize("end", ["\n", "\r\n"])
def test_every_usual_way_of_writing_a_table_is_read(delimiter: str, front: str, end: str, tmp_path: Path) -> None:
    file = tmp_path / "t.csv"
    text = '# made up\n Angle [deg], Deviation (arcsec),run,note\n10.5,-2,a,x\n 20 deg ,+3",b,\n30,,b,gone\n'
    file.write_bytes((front + text.replace(",", delimiter).replace("\n", end)).encode())
    found = read_test(file)
    assert [10.5, 20.0] == pytest.approx([math.degrees(x) for x in found.station])
    assert [-2.0, 3.0] == pytest.approx([math.degrees(x) * 3600.0 for x in found.value])
    assert (("a", "b"), (5,)) == (found.runs, found.empty)


@pytest.mark.parametrize("cell", ["10deg 20' 30\"", '"10deg 20\' 30"""', "10 20 30", "10:20:30", "10° 20′ 30″"])
def test_degrees_minutes_and_seconds_are_read_as_people_write_them(cell: str, tmp_path: Path) -> None:
    file = tmp_path / "t.csv"
    file.write_text(f"angle_dms,deviation_arcsec\n{cell},1\n", encoding="utf-8")
    assert 37230.0 == pytest.approx(math.degrees(read_test(file).station[0]) * 3600.0)


def circle(
    count: int, *, extra: str = "", skip: tuple[int, ...] = (), directions: tuple[str, ...] = ("forward", "reverse")
) -> str:
    wave = [20.0 * math.cos(math.tau * k / count) + (0.3 if k % 3 else -0.4) for k in range(count + 1)]
    lines = ["angle_deg,deviation_arcsec,run,direction"]
    for way in directions:
        order = range(count + 1) if way == "forward" else range(count, -1, -1)
        lines += [f"{360.0 * k / count},{wave[k]:.3f},1,{way}" for k in order if k not in skip]
    return "\n".join(lines) + "\n" + extra


def test_a_station_that_is_missing_is_named(tmp_path: Path) -> None:
    found = reduced(tmp_path, circle(24, skip=(5,)))
    assert any("no station between 60 and 90 deg, elsewhere every 15 deg" in said for said in found.limits)


def test_lines_without_a_reading_are_counted(tmp_path: Path) -> None:
    found = reduced(tmp_path, circle(24, extra="15,,1,forward\n"))
    assert any("1 line has no reading and is left out: line 52" in said for said in found.limits)


def test_fewer_stations_than_waves_are_told(tmp_path: Path) -> None:
    found = reduced(tmp_path, circle(3))
    assert "open" == found.verdict
    assert any("stations cannot tell eccentricity" in why for why in found.reasons) or found.waves == ()
    found = reduced(tmp_path, circle(5))
    assert any("looks like once per turn" in said for said in found.warnings)
    assert "open" == found.verdict


def test_one_reading_is_open_and_no_crash(tmp_path: Path) -> None:
    for rows in ("0,1\n", "0,1\n90,2\n", "0,1\n90,2\n180,1\n"):
        found = reduced(tmp_path, HEAD + rows)
        assert "open" == found.verdict
        assert found.reasons


def test_one_face_only_is_named(tmp_path: Path) -> None:
    text = (
        circle(12)
        .replace("direction", "direction,face")
        .replace("forward", "forward,left")
        .replace("reverse", "reverse,left")
    )
    said = next(said for said in reduced(tmp_path, text).limits if "all readings are in one face" in said)
    assert "an eccentric circle of the instrument reads like an eccentric wheel" in said


def test_a_direction_that_the_stations_contradict_is_told(tmp_path: Path) -> None:
    right = circle(12)
    wrong = right.replace("forward", "x").replace("reverse", "forward").replace("x", "reverse")
    assert not any("go the other way" in said for said in reduced(tmp_path, right).limits)
    assert any("go the other way" in said for said in reduced(tmp_path, wrong).limits)


def test_stations_back_and_forth_are_told(tmp_path: Path) -> None:
    found = reduced(
        tmp_path, HEAD + "".join(f"{a},{a % 7}\n" for a in (0, 90, 45, 135, 270, 180, 225, 315, 300, 30, 0))
    )
    assert any("the stations go back and forth" in said for said in found.limits)


def test_no_repeated_station_is_open(tmp_path: Path) -> None:
    found = reduced(tmp_path, circle(24, skip=(24,), directions=("forward",)))
    assert any("no station was read twice" in why for why in found.reasons)


def test_forward_and_reverse_in_different_runs_have_no_reversal(tmp_path: Path) -> None:
    found = reduced(tmp_path, circle(24).replace(",1,reverse", ",2,reverse"))
    assert found.reversal is None
    assert "give both passes one run" in found.no_reversal


def test_readings_without_any_scatter_are_reduced(tmp_path: Path) -> None:
    lines = "".join(f"{a},0,1,{way}\n" for way in ("forward", "reverse") for a in range(0, 361, 30))
    found = reduced(tmp_path, "angle_deg,deviation_arcsec,run,direction\n" + lines)
    assert found.verdict in ("open", "told")
    assert found.eccentric is not None
    assert found.eccentric.amount.value == pytest.approx(0.0, abs=1e-12)


def test_the_template_works_as_it_is(tmp_path: Path) -> None:
    found = reduced(tmp_path, template(), pressure_angle=math.radians(20.0))
    assert "told" == found.verdict
    assert found.eccentric is not None
    assert 0.008 == pytest.approx(found.eccentric.amount.value, abs=0.0002)
    assert all(len(line) <= 130 for line in template().splitlines())


def test_teeth_are_no_turns_of_the_work(tmp_path: Path) -> None:
    with pytest.raises(SetupcheckError, match="Leave --turns-with-work away, or write turned_deg"):
        reduced(tmp_path, "tooth,deviation_arcsec\n1,0\n2,1\n", turns_with_work=True)


def test_a_worm_of_two_starts_on_an_odd_wheel_comes_round_in_two_turns(tmp_path: Path) -> None:
    # 45 teeth, 2 starts: 22.5 turns of the worm, so that 360 deg is not the place of the worm that 0 deg was
    turns = [6.0 * k for k in range(121)]
    wave = [
        3.0 * math.cos(22.5 * math.radians(a)) + 10.0 * math.cos(math.radians(a)) + 0.2 * (k * k % 7 - 2)
        for k, a in enumerate(turns)
    ]
    passes = [(a, d, "forward") for a, d in zip(turns, wave, strict=True)]
    passes += [(a, d + 4.0, "reverse") for a, d in reversed(list(zip(turns, wave, strict=True)))]
    text = "angle_deg,deviation_arcsec,direction\n" + "".join(f"{a},{d:.4f},{way}\n" for a, d, way in passes)
    found = reduced(tmp_path, text, count=45, worm_ratio=22.5, radius=30.0)
    assert found.worm is not None
    assert 3.0 == pytest.approx(math.degrees(found.worm.length.value) * 3600.0, abs=0.15)
    assert 121 == found.stations


def test_a_wave_that_is_open_is_named_where_it_stands_alone(tmp_path: Path) -> None:
    reasons = reduced(tmp_path, circle(5)).reasons
    assert any("cannot tell once per turn from " in why for why in reasons)
    assert not any("tell it" in why for why in reasons)


def test_the_same_number_at_every_station_is_no_test(tmp_path: Path) -> None:
    file = tmp_path / "same.csv"
    stations = [*range(0, 360, 30), 0]
    file.write_text("angle_deg,deviation_arcsec\n" + "\n".join(f"{a},1000000" for a in stations) + "\n")
    found = reduce(read_test(file), count=72, radius=54.0, pressure_angle=0.35)
    assert found.verdict == "open"
    assert any("no scatter at all" in why for why in found.reasons)
