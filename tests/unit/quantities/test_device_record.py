"""A shop's record of its devices: how the file is read, what is refused, and what its numbers come to."""

from __future__ import annotations

import datetime
import math
from pathlib import Path

import numpy as np
import pytest
from scipy import stats

from setupcheck.errors import JobError
from setupcheck.quantities.device_record import LEAST_ENTRIES, DeviceRecord, Series, read_record, read_record_text
from setupcheck.quantities.typical import WHATS

HEADER = "device, what, date, value"
FIVE = [f"four-jaw-A, runout, 2026-01-{10 + i}, {value} um" for i, value in enumerate((6, 7, 5, 8, 6))]
SECOND = math.pi / 648_000.0


def of(*lines: str, header: str = HEADER) -> DeviceRecord:
    return read_record_text("\n".join([header, *lines]) + "\n", "shop.csv")


def series(values: list[float], what: str = "runout", unit: str = "um") -> Series:
    days = (datetime.date(2026, 1, 1) + datetime.timedelta(i) for i in range(len(values)))
    return of(*(f"A, {what}, {day}, {v} {unit}" for day, v in zip(days, values, strict=True))).series["A", what]


def refused(text: str) -> str:
    with pytest.raises(JobError) as why:
        read_record_text(text, "shop.csv")
    return str(why.value)


# -- reading


def test_comments_blank_lines_notes_and_the_order_of_columns_do_not_matter() -> None:
    found = of(
        "# bay 2",
        "",
        '2026-11-02, "7 um", runout, four-jaw-A, "worn, and noisy"',
        "2026-03-01, 6.5 um, runout, four-jaw-A",
        header="Date, value, what, Device, note",
    )
    one = found.series["four-jaw-A", "runout"]
    assert ["2026-03-01", "2026-11-02"] == [entry.date for entry in one.entries]  # by date
    assert [0.0065, 0.007] == one.values
    assert "worn, and noisy" == one.entries[1].note


@pytest.mark.parametrize(
    ("what", "value", "base"),
    [
        ("runout", "7 um", 0.007),
        ("face_runout", "0.3 thou", 0.3 * 0.0254),
        ("axis", "0.002 mm", 0.002),
        ("once_per_turn", '60"', 60.0 * SECOND),
        ("once_per_crank", '"15"""', 15.0 * SECOND),
        ("setting", '-5"', -5.0 * SECOND),
        ("tilt", "1.5'", 90.0 * SECOND),
        ("tilt", "\u22121.5'", -90.0 * SECOND),
        ("position", "-4 um", -0.004),
        ("touch", "+4 um", 0.004),
        ("reading", "-1 um", -0.001),
        ("temperature_error", "-3 K", -3.0),
    ],
)
def test_a_value_is_read_in_the_unit_of_what_it_is_of(what: str, value: str, base: float) -> None:
    assert [pytest.approx(base)] == of(f"A, {what}, 2026-01-01, {value}").series["A", what].values


def test_a_spreadsheets_byte_order_mark_line_ends_and_empty_columns_are_no_matter(tmp_path: Path) -> None:
    text = "device,what,date,value,,\r\n" + "\r\n".join(line.replace(", ", ",") + ",," for line in FIVE) + "\r\n"
    (tmp_path / "a.csv").write_bytes(b"\xef\xbb\xbf" + text.encode())
    (tmp_path / "b.csv").write_bytes(text.replace("\r\n", "\n").encode())
    a, b = read_record(tmp_path / "a.csv"), read_record(tmp_path / "b.csv")
    assert a.sha256 == b.sha256 and a.file == "a.csv"
    assert a.series["four-jaw-A", "runout"].values == b.series["four-jaw-A", "runout"].values


@pytest.mark.parametrize(
    ("text", "said"),
    [
        (f"{HEADER}, colour\n{FIVE[0]}\n", ("shop.csv:1:28", "'colour' is no column of a record", "Write the header")),
        ("device, what, dat, value\n", ("shop.csv:1:15", "'dat' is no column of a record", "Did you mean date?")),
        (f"{HEADER}, value\n", ("shop.csv:1", "the column value stands there twice", "Keep one of them")),
        ("device, what, value\n", ("shop.csv:1", "the header lacks date", f"Write {HEADER}")),
        ("device; what; date; value\n", ("shop.csv:1", "the columns are not parted by commas", "Save it with commas")),
        (FIVE[0], ("shop.csv:1:1", "'four-jaw-a' is no column", f"Write the header: {HEADER}")),
        (f"{HEADER}\nA, runout, 02.11.2026, 7 um\n", ("shop.csv:2:12", "'02.11.2026' is not a date", "2026-11-02")),
        (f"{HEADER}\nA, runout, 2026-02-30, 7 um\n", ("shop.csv:2", "'2026-02-30' is not a date")),
        (f"{HEADER}\nA, runout, 20260203, 7 um\n", ("shop.csv:2", "'20260203' is not a date")),
        (f"{HEADER}\nA, runout, 2026-11-02, 7\n", ("shop.csv:2:24", "7", "runout of A", "7 um")),
        (f"{HEADER}\nA, run-out, 2026-11-02, 7 um\n", ("shop.csv:2:4", "'run-out' is nothing", "Did you mean runout?")),
        (f"{HEADER}\nA, runout, 2026-11-02, -7 um\n", ("shop.csv:2", "'-7 um' is below zero (runout of A)")),
        (f'{HEADER}\nA, once_per_turn, 2026-11-02, -7"\n', ("shop.csv:2", "is below zero")),
        (f"{HEADER}\nA, reading, 2026-11-02, --7 um\n", ("shop.csv:2", "has two signs", "Write -7 um")),
        (f"{HEADER}\nA, reading, 2026-11-02, \u00b17 um\n", ("shop.csv:2", "is a bound", "Write the reading itself")),
        (f"{HEADER}\nA, runout, 2026-11-02, 7 um\nA, runout, 2026-11-03, 1.5'\n", ("shop.csv:3", "runout of A")),
        (f"{HEADER}\nA, tilt, 2026-11-02, 7 um\n", ("shop.csv:2", "tilt of A")),
        (f"{HEADER}\nA, runout, 2026-11-02, =B2*2\n", ("shop.csv:2:24", "'=B2*2' is a formula", "with values")),
        (f'{HEADER}\n"=HYPERLINK(""x"")", runout, 2026-11-02, 7 um\n', ("shop.csv:2", "is a formula")),
        (f"{HEADER}\nA, runout, 2026-11-02, 7,5 um\n", ("shop.csv:2", "5 cells under 4 columns", "7.5 um")),
        (f'{HEADER}\nA, runout, 2026-11-02, "7,5 um"\n', ("shop.csv:2", "runout of A", "7.5 um")),
        (f"{HEADER}\nA, runout, 2026-11-02\n", ("shop.csv:2", "this line has no value", "four-jaw-A, runout")),
        (f"{HEADER}\n, runout, 2026-11-02, 7 um\n", ("shop.csv:2", "this line has no device")),
        (f'{HEADER}\n"A, runout, 2026-11-02, 7 um\n', ("shop.csv:2", "a quotation mark that is not closed")),
        (f"{HEADER}\n# none yet\n", ("shop.csv:1", "there is no entry below the header", "four-jaw-A, runout")),
        ("# nothing\n\n", ("shop.csv", "the file holds no entries", HEADER)),
    ],
)
def test_each_wrong_thing_is_one_message_with_its_line(text: str, said: tuple[str, ...]) -> None:
    told = refused(text)
    assert told.startswith(said[0]), told
    for piece in said[1:]:
        assert piece in told
    assert 1 == told.count("shop.csv")


def test_every_wrong_line_is_told_in_one_run() -> None:
    told = refused(f"{HEADER}\nA, runout, today, 7 um\n{FIVE[0]}\nA, rnout, 2026-11-02, 7 um\n")
    assert 2 == told.count("shop.csv:") and "shop.csv:2" in told and "shop.csv:4" in told


@pytest.mark.parametrize(
    ("data", "said"),
    [
        (b"", "the file is empty. Write a header, device, what, date, value"),
        (b"\xff\xfea\x00", "the file is saved as UTF-16"),
        (b"a\x00b", "the file is not text. Name a record of devices, written as CSV"),
        (b"device, what\n\xe9\n", ":2:1"),
    ],
)
def test_what_is_no_text_is_refused(tmp_path: Path, data: bytes, said: str) -> None:
    file = tmp_path / "shop.csv"
    file.write_bytes(data)
    with pytest.raises(JobError) as why:
        read_record(file)
    assert said in str(why.value) and "YAML" not in str(why.value)
    with pytest.raises(JobError, match="there is no such file"):
        read_record(tmp_path / "none.csv")


# -- numbers


def test_the_limit_is_the_textbooks() -> None:
    one = of(*FIVE).series["four-jaw-A", "runout"]
    values = np.array([6, 7, 5, 8, 6]) / 1000.0
    expected = values.mean() + stats.t.ppf(0.95, 4) * values.std(ddof=1) * math.sqrt(1.2)
    assert one.limit == pytest.approx(expected) and one.mean == pytest.approx(values.mean())
    assert one.spread == pytest.approx(values.std(ddof=1)) and not one.thin and 0 == one.rising


def test_before_five_entries_there_is_no_limit() -> None:
    one = of(*FIVE[:4]).series["four-jaw-A", "runout"]
    assert one.thin and one.limit is None and LEAST_ENTRIES == 5
    assert of(FIVE[0]).series["four-jaw-A", "runout"].spread is None


def test_the_limit_is_never_below_the_largest_seen() -> None:
    values = [5.0, 5.2, 4.9, 5.1] * 10 + [9.0]
    assert series(values).limit == pytest.approx(0.009)


def test_entries_all_alike_tell_no_spread_and_give_no_limit() -> None:
    one = series([5.0] * 8)
    assert one.alike and one.limit is None and not one.thin and one.spread == 0.0


def test_entries_of_either_sign_are_bounded_both_ways() -> None:
    values = [-90.0, 30.0, 60.0, -30.0, 24.0]
    one = series(values, "tilt", '"')
    x = np.array(values)
    expected = abs(x.mean()) + stats.t.ppf(0.975, 4) * x.std(ddof=1) * math.sqrt(1.2)
    assert one.limit == pytest.approx(expected * SECOND)
    assert one.limit == pytest.approx(series([-v for v in values], "tilt", '"').limit)


@pytest.mark.parametrize(
    ("values", "last"),
    [
        ([5, 6, 5, 6, 5, 6], 0),
        ([5, 6, 5, 6, 5, 12], 1),
        ([5, 6, 5, 6, 5, 12, 13, 15], 3),
        ([12, 13, 15, 5, 6, 5, 6, 5], 0),  # it was bad and is good
        ([5, 6, 5, 6, 12, 13], 0),  # four before the first of them: too few to say
        ([5, 6, 5, 6, 5, 12, 6], 0),  # once only
    ],
)
def test_last_values_above_the_limit_of_the_earlier_ones_are_counted(values: list[float], last: int) -> None:
    assert last == series(values).rising


def test_a_steady_device_is_seldom_told_to_wear() -> None:
    rng = np.random.default_rng(5)
    told = [series([round(v, 4) for v in rng.normal(20.0, 2.0, 9)]).rising > 0 for _ in range(400)]
    assert np.mean(told) < 0.08


def test_a_record_of_a_kind_says_nothing_of_a_device_of_that_kind() -> None:
    found = of(*(line.replace("four-jaw-A", "four-jaw") for line in FIVE))
    assert found.of("four-jaw", "runout") is not None
    assert found.of("four-jaw-A", "runout") is None and found.of(None, "runout") is None
    assert found.of("four-jaw", "axis") is None


def test_everything_with_a_typical_value_can_be_kept() -> None:
    units = dict.fromkeys(WHATS, "um") | dict.fromkeys(("once_per_turn", "once_per_crank", "setting", "tilt"), "arcsec")
    units["temperature_error"] = "K"
    for what, unit in units.items():
        assert series([1, 2, 1, 2, 1], what, unit).limit is not None
