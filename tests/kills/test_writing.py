"""Files that are written: whole or not at all, whatever happens meanwhile; never through a link, never into a pipe."""

from __future__ import annotations

import os
import stat
import subprocess
import sys
import time
from pathlib import Path

import pytest

from setupcheck.cli.writing import refuse_new, refuse_place, write_new, write_whole
from setupcheck.errors import SetupcheckError
from tests.kills.killing import CHECKOUT, GENEROUS, kills, parts, writer

posix = pytest.mark.skipif(os.name != "posix", reason="signals, links and pipes of POSIX")


@posix
@pytest.mark.parametrize("how", ["whole", "new"])
def test_a_killed_run_leaves_the_old_file_or_the_new_one(how: str, tmp_path: Path) -> None:
    left = kills(tmp_path, 4, 1, how)
    assert (4, 0) == (left.old + left.new, left.third)
    before = parts(tmp_path)
    write_whole(tmp_path / "sheet.html", "again", force=True)  # what killed runs left is in nobody's way
    assert "again" == (tmp_path / "sheet.html").read_text()
    assert before == parts(tmp_path)


def test_a_part_file_is_taken_away_a_day_later_and_nothing_else(tmp_path: Path) -> None:
    fresh, stale, other = (tmp_path / n for n in (".setupcheck-aa.part", ".setupcheck-bb.part", "setupcheck-cc.part"))
    for path in (fresh, stale, other):
        path.write_text("half")
    for path in (stale, other):
        os.utime(path, (time.time() - 90_000, time.time() - 90_000))
    write_new(tmp_path / "job.yaml", "whole")
    assert {fresh.name, other.name, "job.yaml"} == {p.name for p in tmp_path.iterdir()}


def test_runs_that_write_the_same_file_at_once_leave_one_of_theirs(tmp_path: Path) -> None:
    path = tmp_path / "sheet.html"
    children = [writer(path, f"line {i}\\n") for i in range(4)]
    for child in children:
        assert "" == child.communicate(timeout=GENEROUS)[1]
    lines = set(path.read_text().splitlines())
    assert 1 == len(lines)
    assert ["sheet.html"] == [p.name for p in tmp_path.iterdir()]


def test_of_runs_that_write_the_same_new_file_one_does_and_the_others_say_so(tmp_path: Path) -> None:
    children = [writer(tmp_path / "job.yaml", f"line {i}\\n", "new") for i in range(3)]
    told = [child.communicate(timeout=GENEROUS)[1] for child in children]
    assert 1 == told.count("")
    assert 2 == sum("is already there and stays as it is. Write another name" in said for said in told)
    assert ["job.yaml"] == [p.name for p in tmp_path.iterdir()]


FULL = """\
import resource, sys
from pathlib import Path
resource.setrlimit(resource.RLIMIT_FSIZE, (100_000, 100_000))
from setupcheck.cli.writing import write_new, write_whole
from setupcheck.errors import SetupcheckError
text = "x" * 200_000
for write in (lambda: write_whole(Path("sheet.html"), text, force=True), lambda: write_new(Path("new.yaml"), text)):
    try:
        write()
    except SetupcheckError as wrong:
        print(wrong)
"""


@posix
def test_a_full_disk_gives_one_message_and_leaves_the_old_file(tmp_path: Path) -> None:
    (tmp_path / "sheet.html").write_text("old")
    done = subprocess.run(
        [sys.executable, "-c", FULL],
        cwd=tmp_path,
        env={**os.environ, "PYTHONPATH": str(CHECKOUT)},
        capture_output=True,
        text=True,
        timeout=GENEROUS,
        check=True,
    )
    assert [
        "sheet.html cannot be written: File too large. What was there stays as it is",
        "new.yaml cannot be written: File too large. What was there stays as it is",
    ] == done.stdout.splitlines()
    assert "old" == (tmp_path / "sheet.html").read_text()
    assert ["sheet.html"] == [p.name for p in tmp_path.iterdir()]


@posix
def test_links_devices_pipes_and_odd_names_are_refused_at_once(tmp_path: Path) -> None:
    (tmp_path / "real.svg").write_text("real")
    (tmp_path / "folder").mkdir()
    (tmp_path / "link.svg").symlink_to(tmp_path / "real.svg")
    (tmp_path / "nowhere.svg").symlink_to(tmp_path / "gone.svg")
    (tmp_path / "round.svg").symlink_to(tmp_path / "round.svg")
    (tmp_path / "to-folder").symlink_to(tmp_path / "folder")
    os.mkfifo(tmp_path / "pipe.svg")
    says = {
        "link.svg": "is a link, and no link is written through",
        "nowhere.svg": "is a link, and no link is written through",
        "round.svg": "is a link, and no link is written through",
        "to-folder": "is a folder. Write the name of a file",
        "pipe.svg": "is no plain file but a device or a pipe. Write the name of a file on the disk",
        "/dev/null": "is no plain file but a device or a pipe",
        "a\nb.svg": "a\ufffdb.svg has a control character in its name",
        "\x1b[31m.svg": "has a control character in its name",
        "\u202egvs.exe": "has a control character in its name",
        "real.svg/a.svg": "there is no folder",
        "n" * 300: "cannot be written: File name too long",
    }  # fmt: skip
    for name, message in says.items():
        for force in (False, True):
            with pytest.raises(SetupcheckError) as refused:
                refuse_place(tmp_path / name, force=force)
            assert message in str(refused.value)
            assert "\x1b" not in str(refused.value)
            with pytest.raises(SetupcheckError):
                write_whole(tmp_path / name, "new", force=force)
        with pytest.raises(SetupcheckError):
            refuse_new(tmp_path / name)
        with pytest.raises(SetupcheckError):
            write_new(tmp_path / name, "new")
    assert "real" == (tmp_path / "real.svg").read_text()
    assert Path("/dev/null").is_char_device()
    assert not parts(tmp_path)


@posix
def test_a_replaced_file_keeps_its_permissions_and_a_name_as_long_as_the_disk_takes_is_written(tmp_path: Path) -> None:
    path = tmp_path / ("n" * 250 + ".svg")
    write_whole(path, "one", force=False)
    path.chmod(0o600)
    write_whole(path, "two", force=True)
    assert ("two", 0o600) == (path.read_text(), stat.S_IMODE(path.stat().st_mode))
    with pytest.raises(SetupcheckError, match="already there"):
        write_whole(path, "three", force=False)
    assert "two" == path.read_text()


def test_a_file_system_without_links_gets_the_whole_file_all_the_same(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    def none(*_: object) -> None:
        raise OSError("no links here")

    monkeypatch.setattr(os, "link", none)
    write_new(tmp_path / "job.yaml", "one")
    assert "one" == (tmp_path / "job.yaml").read_text()
    with pytest.raises(SetupcheckError, match="already there"):
        write_new(tmp_path / "job.yaml", "two")
    assert "one" == (tmp_path / "job.yaml").read_text()
    assert ["job.yaml"] == [p.name for p in tmp_path.iterdir()]
