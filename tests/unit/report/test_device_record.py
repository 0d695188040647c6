"""`setupcheck record` and `--record` from outside: output, exit codes, bad input."""

from __future__ import annotations

from pathlib import Path

import pytest

from setupcheck.quantities.device_record import read_record_text
from setupcheck.report.device_record import as_record
from tests.bad_input.test_command import command
from tests.unit.report.sample import WHEEL, changed

KEPT = """# Bay 2
device, what, date, value, note
four-jaw-A, runout, 2026-01-12, 6 um
four-jaw-A, runout, 2026-02-03, 7 um
four-jaw-A, runout, 2026-03-18, 5 um, new jaws
four-jaw-A, runout, 2026-05-02, 8 um
four-jaw-A, runout, 2026-11-02, 6 um
oven, temperature_error, 2026-07-01, -4 K
head-B, setting, 2026-03-01, 4"
head-B, setting, 2026-03-01, 4"
head-B, setting, 2026-03-01, 4"
head-B, setting, 2026-03-01, 4"
head-B, setting, 2026-03-01, 4"
"""
WORN = (
    KEPT
    + "M-3, axis, 2026-01-01, 0.2 thou\n"
    + "".join(
        f"M-3, axis, 2026-02-{day:02d}, {value} thou\n" for day, value in enumerate((0.3, 0.2, 0.3, 0.2, 0.9, 1.0), 1)
    )
)


def test_each_device_is_told_in_eighty_columns() -> None:
    assert (
        as_record(read_record_text(KEPT, "shop.csv"))
        == """\
shop.csv: 11 entries of 3 devices

four-jaw-A runout: 5 entries, 2026-01-12 to 2026-11-02
  mean 6.4 um, spread 1.1 um, largest 8.0 um
  the next one may reach 9.1 um (95 % limit for the next value)

head-B setting: 5 entries, 2026-03-01
  mean 4.0", spread 0.0", largest 4.0"
  no limit: all entries are the same number, which tells no spread; read them
    finer

oven temperature error: thin record, 1 entry, 2026-07-01
  mean -4.0 K, largest 4.0 K
  no limit: it takes 5 entries
"""
    )


def test_a_device_that_wears_is_told_in_its_own_unit_and_ends_with_1(tmp_path: Path) -> None:
    (tmp_path / "shop.csv").write_text(KEPT)
    (tmp_path / "worn.csv").write_text(WORN)
    good, worn = command("record", "shop.csv", at=tmp_path), command("record", "worn.csv", at=tmp_path)
    assert (0, 1) == (good.returncode, worn.returncode)
    assert "mean 0.44 thou, spread 0.35 thou, largest 1.00 thou" in worn.stdout
    assert "the last 2 values lie above the limit of the 5 before" in worn.stdout
    assert "above" not in good.stdout
    assert all(len(line) <= 80 for line in worn.stdout.splitlines())


def test_a_name_with_an_escape_does_not_reach_the_terminal(tmp_path: Path) -> None:
    (tmp_path / "shop.csv").write_text(KEPT.replace("four-jaw-A", "\x1b[31mfour"))
    assert "\x1b" not in command("record", "shop.csv", at=tmp_path).stdout


def test_review_and_working_take_the_record(tmp_path: Path) -> None:
    text = changed(WHEEL, ("{at_most: 6 um, measured: 4 um, uncertainty: 1 um}", "{device: four-jaw-A}"))
    (tmp_path / "job.yaml").write_text(text)
    (tmp_path / "shop.csv").write_text(KEPT)
    review = command("review", "job.yaml", "--record", "shop.csv", at=tmp_path)
    assert "DEVICES, shop.csv\n  - four-jaw-A runout: 9.1 um, 5 entries" in review.stdout
    told = command("working", "job.yaml", "hold.planned@50/centre", "--record", "shop.csv", at=tmp_path)
    assert "hold.planned@50/centre = 9.1 um" in told.stdout
    told = command("working", "job.yaml", "hold.error_kind@50/centre", "--record", "shop.csv", at=tmp_path)
    assert "rests on: four-jaw-A runout (shop record, 5 entries)" in told.stdout


@pytest.mark.parametrize(
    "arguments", [["record"], ["review", "job.yaml", "--record"], ["working", "job.yaml", "require[1]", "--record"]]
)
@pytest.mark.parametrize(
    ("text", "said"),
    [
        (None, "shop.csv: there is no such file"),
        ("", "shop.csv: the file is empty"),
        (KEPT + "A, runout, 2026-13-02, 7 um\n", "shop.csv:14:12"),
    ],
)
def test_a_bad_record_ends_with_2_and_one_message(
    arguments: list[str], text: str | None, said: str, tmp_path: Path
) -> None:
    (tmp_path / "job.yaml").write_text(WHEEL)
    if text is not None:
        (tmp_path / "shop.csv").write_text(text)
    done = command(*arguments, "shop.csv", at=tmp_path)
    assert (2, "") == (done.returncode, done.stdout)
    assert done.stderr.startswith(said) and 1 == done.stderr.count("shop.csv") and "Traceback" not in done.stderr
