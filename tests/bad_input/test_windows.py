"""Files as Windows writes them, places as it names them: read alike, told with the right line; written with plain line ends."""

from __future__ import annotations

import csv
import io
import json
import os
import subprocess
import sys
from pathlib import Path, PureWindowsPath

import pytest

from setupcheck.cli import writing
from setupcheck.errors import JobError, SetupcheckError
from setupcheck.flow import read_back, read_house, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.json import as_data, as_json
from setupcheck.shipped import examples, shipped
from setupcheck.yamlfile import read_text
from tests.bad_input.ring import RING, spoilt
from tests.jobs.test_house import SHOP
from tests.unit.report.test_device_record import KEPT

MARK = b"\xef\xbb\xbf"


def as_windows_writes(text: str) -> bytes:
    """With its byte order mark and line ends."""
    assert "\r" not in text
    return MARK + text.replace("\n", "\r\n").encode("utf-8")


@pytest.mark.parametrize("name", examples())
def test_a_job_saved_under_windows_gives_the_same_bytes(name: str, tmp_path: Path) -> None:
    source = shipped(f"jobs/{name}.yaml")
    copy = tmp_path / source.name
    copy.write_bytes(as_windows_writes(source.read_text(encoding="utf-8")))
    here, there = review(source), review(copy)
    assert as_json(there) == as_json(here).replace(json.dumps(str(source)), json.dumps(str(copy)))
    assert here.loaded.sha256 == there.loaded.sha256  # the hash is that of the text


@pytest.mark.parametrize("ends", ["\r\n", "\r", "\n"])
@pytest.mark.parametrize("mark", [MARK, b""], ids=["mark", "none"])
def test_a_mistake_is_told_in_its_own_line_and_column(ends: str, mark: bytes, tmp_path: Path) -> None:
    text = spoilt("clearance: [1 um, 3 um]", "clearance: [1 um, 3,5 um]")
    job = tmp_path / "job.yaml"
    job.write_bytes(mark + text.replace("\n", ends).encode("utf-8"))
    with pytest.raises(JobError) as here:
        read_job_text(text, str(job))
    with pytest.raises(JobError) as there:
        read_job_text(read_text(job), str(job))
    assert str(here.value) == str(there.value)
    assert "\r" not in str(there.value)
    (problem, *_) = there.value.problems
    assert "3,5" in text.splitlines()[problem.line - 1]


def test_a_house_file_and_a_record_saved_under_windows_read_alike(tmp_path: Path) -> None:
    job = shipped("jobs/rotator-worm-wheel.yaml")
    found = []
    for folder, write in ((tmp_path / "a", str.encode), (tmp_path / "b", as_windows_writes)):
        folder.mkdir()
        (folder / "house.yaml").write_bytes(write(SHOP))
        (folder / "shop.csv").write_bytes(write(KEPT))
        found.append(review(job, house=folder / "house.yaml", devices=folder / "shop.csv"))
    here, there = (as_data(one) for one in found)
    assert here["house"] is not None and there["house"] is not None
    here["house"]["file"] = there["house"]["file"]
    assert here == there
    wrong = tmp_path / "wrong.yaml"
    wrong.write_bytes(as_windows_writes(SHOP.replace("level: fail", "level: pass")))
    line = SHOP.splitlines().index(next(row for row in SHOP.splitlines() if "level: fail" in row)) + 1
    with pytest.raises(SetupcheckError, match=f"wrong.yaml:{line} "):
        read_house(wrong)


def test_readings_saved_under_windows_read_alike(tmp_path: Path) -> None:
    from setupcheck.report.readings import as_json as in_json
    from setupcheck.report.readings import template

    job, found = shipped("jobs/rotator-worm-wheel.yaml"), []
    for folder, write in ((tmp_path / "a", str.encode), (tmp_path / "b", as_windows_writes)):
        folder.mkdir()
        (folder / "read.csv").write_bytes(write(template()))
        text = in_json(read_back(job, folder / "read.csv"))
        found.append({k: v for k, v in json.loads(text.replace(str(folder), "")).items() if "sha256" not in k})
    assert found[0] == found[1]


# -- places --------------------------------------------------------------------------------------------------------------

PLACE = str(PureWindowsPath("C:/Shop Files/jobs/ring no. 3.yaml"))


def test_a_place_with_a_drive_and_backslashes_is_told_as_it_was_given() -> None:
    with pytest.raises(JobError) as wrong:
        read_job_text(spoilt("by: spigot", "by: spiggot"), PLACE)
    assert str(wrong.value).startswith("C:\\Shop Files\\jobs\\ring no. 3.yaml:")
    found = review(read_job_text(RING, PLACE))
    assert as_data(found)["job"]["file"] == PLACE
    assert json.loads(as_json(found))["job"]["file"] == PLACE


@pytest.mark.parametrize(
    "name", ["nul", "NUL.svg", "aux.html", "com1.csv", "Con .svg", "lpt9.a.svg", "a:b.svg", "a?.svg", "a.", "a "]
)
def test_a_name_that_windows_keeps_is_refused_there_alone(
    name: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    place = tmp_path / name
    writing.refuse_place(place, force=False)
    writing.refuse_new(place)
    monkeypatch.setattr(writing, "ON_WINDOWS", True)
    for refuse in (lambda: writing.refuse_place(place, force=False), lambda: writing.refuse_new(place)):
        with pytest.raises(SetupcheckError, match=r"cannot be a file: .* there\. Write another name"):
            refuse()


@pytest.mark.parametrize(
    "name", ["null.svg", "console.html", "com.csv", "com10.csv", ".aux", "sheet 1.html", "über.svg"]
)
def test_a_name_that_is_only_like_one_is_taken(name: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(writing, "ON_WINDOWS", True)
    writing.refuse_place(tmp_path / name, force=False)


# -- what is written -----------------------------------------------------------------------------------------------------


def ran(*words: str, cwd: Path, **environment: str) -> subprocess.CompletedProcess[bytes]:
    return subprocess.run(
        [sys.executable, "-m", "setupcheck", *words], cwd=cwd, capture_output=True, check=False,
        env={**os.environ, "PYTHONPATH": str(Path(__file__).resolve().parents[2]), **environment},
    )  # fmt: skip


@pytest.mark.parametrize(
    ("words", "name"),
    [
        (("sheet", "job.yaml", "-o", "out.html"), "out.html"),
        (("sheet", "job.yaml", "--drawing", "part-wheel", "-o", "out.svg"), "out.svg"),
        (("index", "job.yaml", "--csv", "out.csv"), "out.csv"),
        (("schema", "-o", "out.json"), "out.json"),
        (("new", "out.yaml", "--yes"), "out.yaml"),
        (("new", "out.yaml", "--like", "sprocket", "--yes"), "out.yaml"),
    ],
    ids=lambda one: " ".join(one) if isinstance(one, tuple) else one,
)
def test_files_are_written_with_plain_line_ends(words: tuple[str, ...], name: str, tmp_path: Path) -> None:
    (tmp_path / "job.yaml").write_bytes(as_windows_writes(shipped("jobs/rotator-worm-wheel.yaml").read_text("utf-8")))
    done = ran(*words, cwd=tmp_path)
    assert (done.returncode, done.stderr) == (0, b"")
    written = (tmp_path / name).read_bytes()
    assert len(written) > 500
    assert b"\r" not in written and not written.startswith(MARK)
    if name.endswith(".csv"):
        assert [*csv.reader(io.StringIO(written.decode("utf-8")))]


def test_what_goes_into_a_file_is_utf_8_whatever_the_code_page(tmp_path: Path) -> None:
    job = tmp_path / "job.yaml"
    job.write_text(RING.replace("title: ", "title: Łożysko ±2 "), encoding="utf-8")
    plain = ran("review", "--json", "job.yaml", cwd=tmp_path)
    old = ran("review", "--json", "job.yaml", cwd=tmp_path, LC_ALL="C", PYTHONCOERCECLOCALE="0", PYTHONUTF8="0")
    assert "Łożysko ±2" in plain.stdout.decode("utf-8")
    assert old.stdout == plain.stdout
    asked = ran("review", "job.yaml", cwd=tmp_path, PYTHONIOENCODING="ascii")
    assert asked.returncode == plain.returncode and asked.stderr == b""
    assert b"?o?ysko ?2" in asked.stdout
