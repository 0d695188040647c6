"""The command on files that are no sound job: exit 2 and one message, or a finding; nothing written, no traceback."""

from __future__ import annotations

import os
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path

import pytest

from setupcheck.jobfile.examples import SKELETON
from tests.bad_input.ring import RING, spoilt

GENEROUS = 20  # s; a hang is meant, not a slow machine
MOST_MEMORY = 300_000  # kB, as the demand on bad input says
CHECKOUT = Path(__file__).resolve().parents[2]
BEGIN = "Begin with one such as this:\n" + "".join(f"    {line}\n" for line in SKELETON.splitlines()).rstrip("\n")


def command(*arguments: str, at: Path) -> subprocess.CompletedProcess[str]:
    """Run the command in a directory of its own."""
    return subprocess.run(
        [sys.executable, "-m", "setupcheck", *arguments],
        cwd=at,
        env={**os.environ, "PYTHONPATH": str(CHECKOUT), "PYTHONDONTWRITEBYTECODE": "1"},
        capture_output=True,
        text=True,
        timeout=GENEROUS,
        check=False,
    )


def lines(count: int, line: str) -> bytes:
    return (RING + line * count).encode()


def a_hundred_megabytes(path: Path) -> None:
    with path.open("wb") as stream:
        stream.write(RING.encode())
        stream.truncate(100_000_000)  # a sparse file: it takes no room on the disk


def nine_aliases_of_nine(path: Path) -> None:
    bomb = "a: &a [x, x, x, x, x, x, x, x, x]\n" + "".join(
        f"{chr(98 + i)}: &{chr(98 + i)} [{', '.join([f'*{chr(97 + i)}'] * 9)}]\n" for i in range(9)
    )
    path.write_text(bomb)


def content(raw: bytes) -> Callable[[Path], object]:
    return lambda path: path.write_bytes(raw)


FILES: dict[str, tuple[Callable[[Path], object], str]] = {
    "missing": (lambda path: None, "job.yaml: there is no such file. Check the name and the directory\n"),
    "directory": (lambda path: path.mkdir(), "job.yaml: there is no job here, no *.yaml or "),
    "empty": (
        content(b""),
        f"job.yaml: the file is empty. {BEGIN}\n",
    ),
    "blank": (
        content(b" \n\n"),
        f"job.yaml: the file is empty. {BEGIN}\n",
    ),
    "notes only": (content(b"# a plan\n"), f"job.yaml: the file holds no values. {BEGIN}\n"),
    "binary": (
        content(bytes(range(256)) * 40),
        "job.yaml: the file is not text. Name a job file, written as YAML\n",
    ),
    "latin-1": (
        content(RING.replace("Ring gear", "R\u00e4dchen").encode("latin-1")),
        "job.yaml:2:9\n     2 | title: R\ufffddchen blank\n       |         ^\n"
        "  the byte 0xe4 is not UTF-8. Save the file as UTF-8\n",
    ),
    "utf-16": (content(RING.encode("utf-16")), "job.yaml: the file is saved as UTF-16. Save it as UTF-8\n"),
    "utf-16 without its mark": (
        content(RING.encode("utf-16-le")),
        "job.yaml: the file is not text. Name a job file, written as YAML\n",
    ),
    "100 MB": (
        a_hundred_megabytes,
        "job.yaml: the file has 100.0 MB, more than 2 MB. Name a job file, written as\n  YAML\n",
    ),
    "1.9 MB of entries": (
        content(lines(70_000, "  - {what: torque, of: 50}\n")),
        "  the file holds more than 50000 values. Split it\n",
    ),
    "thirty brackets": (
        content(RING.encode() + b"waive: " + b"[" * 30 + b"]" * 30 + b"\n"),
        "  lists and maps are nested deeper than 20. Take some of them apart\n",
    ),
    "brackets within brackets": (content(RING.encode() + b"waive: " + b"[" * 100_000 + b"\n"), " nest"),
    "maps within maps": (
        content(RING.encode() + b"place: " + b"{a: " * 100_000 + b"\n"),
        "  lists and maps are nested deeper than 20. Take some of them apart\n",
    ),
    "alias bomb": (nine_aliases_of_nine, "  '*a' points to another place of the file. Write the value out here, "),
    "object tag": (
        content(spoilt("title: Ring", "title: !!python/object/apply:os.system Ring").encode()),
        "  '!!python/object/apply:os.system' is a tag. Leave it away, or put a text in\n  quotes\n",
    ),
    "a list": (content(b"- op: 10\n- op: 20\n"), "  a job file is a map of keys. Start with setupcheck: 1\n"),
    "a word": (content(b"lathe\n"), "  a job file is a map of keys. Start with setupcheck: 1\n"),
    "two documents": (content(f"{RING}---\n{RING}".encode()), "  a second document begins. Keep one document in a file\n"),
    "a million teeth": (
        content(spoilt("count: 60", "count: 1000000").encode()),
        "  1000000 is out of range. Write at most 1000\n",
    ),
    "a bore larger than its cylinder": (
        content(spoilt("diameter: 32 H7", "diameter: 52 H7").encode()),
        "  a bore of 52 mm leaves nothing of hub, which is 50 mm from 20 mm to 30 mm.\n  Write a smaller bore, or removes: ",
    ),
}  # fmt: skip


@pytest.mark.parametrize("kind", FILES)
def test_a_file_that_is_no_job_gives_one_clear_message_and_leaves_nothing_behind(kind: str, tmp_path: Path) -> None:
    make, message = FILES[kind]
    make(tmp_path / "job.yaml")
    before = sorted(p.name for p in tmp_path.iterdir())
    done = command("review", "job.yaml", at=tmp_path)
    assert (2, "") == (done.returncode, done.stdout)
    assert message in done.stderr
    assert "Traceback" not in done.stderr
    assert [] == [line for line in done.stderr.splitlines() if len(line) > 80 and " | " not in line[:9]]
    assert before == sorted(p.name for p in tmp_path.iterdir())


HEAVY = ["100 MB", "1.9 MB of entries", "brackets within brackets", "alias bomb", "binary"]


@pytest.mark.skipif(not Path("/proc/self/status").exists(), reason="the peak memory of a process is read from /proc")
@pytest.mark.parametrize("kind", HEAVY)
def test_a_hostile_file_is_refused_within_300_mb(kind: str, tmp_path: Path) -> None:
    FILES[kind][0](tmp_path / "job.yaml")
    # VmHWM starts anew with the program, so the memory of the process that starts it does not count
    program = (
        "import atexit, re, sys\n"
        "say = lambda: open('peak', 'w').write(re.search(r'VmHWM:\\s+(\\d+)', open('/proc/self/status').read())[1])\n"
        "atexit.register(say)\n"
        "from setupcheck.cli.main import run\n"
        "sys.argv = ['setupcheck', 'review', 'job.yaml']\n"
        "run()\n"
    )
    done = subprocess.run(
        [sys.executable, "-c", program],
        cwd=tmp_path,
        env={**os.environ, "PYTHONPATH": str(CHECKOUT)},
        capture_output=True,
        timeout=GENEROUS,
        check=False,
    )
    assert 2 == done.returncode
    assert int((tmp_path / "peak").read_text()) < MOST_MEMORY


@pytest.mark.parametrize("name", ["working", "review"])
def test_every_command_that_reads_a_job_refuses_a_bad_one_alike(name: str, tmp_path: Path) -> None:
    (tmp_path / "job.yaml").write_text(spoilt("runout: 3 um", "runout: 2,5 um"))
    done = command(name, "job.yaml", *(["stack.worst"] if name == "working" else []), at=tmp_path)
    assert (2, "") == (done.returncode, done.stdout)
    assert "job.yaml:30:71  setups.20.hold.centre.runout" == done.stderr.splitlines()[0]


def test_a_bad_file_among_good_ones_is_told_and_the_good_ones_are_judged_all_the_same(tmp_path: Path) -> None:
    (tmp_path / "good.yaml").write_text(RING)
    (tmp_path / "bad.yaml").write_text(spoilt("count: 60", "count: 0"))
    done = command("review", "bad.yaml", "good.yaml", "missing.yaml", at=tmp_path)
    assert 2 == done.returncode
    said = [(line.split()[0], line.split()[-1]) for line in done.stdout.splitlines()[:3]]
    assert [("unreadable", "bad.yaml"), ("unreadable", "missing.yaml"), ("open", "good.yaml")] == said
    assert ["bad.yaml:14:35  parts.ring.surfaces.teeth.count"] == done.stderr.splitlines()[:1]
    assert "missing.yaml: there is no such file. Check the name and the directory" == done.stderr.splitlines()[-1]


@pytest.mark.parametrize(
    ("arguments", "message"),
    [
        (["review"], "Missing argument 'JOB"),
        (["review", "job.yaml", "--colour"], "No such option: --colour"),
        (["review", "job.yaml", "--on", "tomorrow"], "'tomorrow' is not a day. Write it as 2027-03-31"),
        (["review", "job.yaml", "--house", "none.yaml"], "none.yaml"),
        (["working", "job.yaml", "stack.wurst"], "stack.w"),
        (["reveiw", "job.yaml"], "No such command 'reveiw'"),
    ],
    ids=["no-job", "option", "day", "house", "quantity", "command"],
)
def test_a_wrong_use_of_the_command_ends_with_2_and_says_what_is_wrong(
    arguments: list[str], message: str, tmp_path: Path
) -> None:
    (tmp_path / "job.yaml").write_text(RING)
    done = command(*arguments, at=tmp_path)
    assert (2, "") == (done.returncode, done.stdout)
    assert message in done.stderr
    assert "Traceback" not in done.stderr


def test_a_datum_that_is_never_made_ends_with_3(tmp_path: Path) -> None:
    (tmp_path / "job.yaml").write_text(spoilt("rim: {}, hub: {}, bore: {}", "rim: {}, hub: {}"))
    done = command("review", "job.yaml", at=tmp_path)
    assert (3, "") == (done.returncode, done.stderr)
    assert "op 20 is set on bore, which no earlier setup has made." in done.stdout
