"""`setupcheck review` of a drawer: what is found in it, the summary, JSON Lines, workers, Ctrl-C, --quiet and colour."""

from __future__ import annotations

import json
import os
import re
import signal
import subprocess
import sys
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path

import pytest

from setupcheck.cli.drawer import opened
from setupcheck.cli.many import _Held
from setupcheck.shipped import example
from tests.bad_input.ring import RING, spoilt

CHECKOUT = Path(__file__).resolve().parents[3]
GENEROUS = 120  # s; a hang is meant, not a slow machine
PLAIN = {k: v for k, v in os.environ.items() if k not in ("NO_COLOR", "TERM")} | {"PYTHONPATH": str(CHECKOUT)}


def run(*arguments: str, at: Path, **environment: str) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-m", "setupcheck", *arguments],
        cwd=at,
        env=PLAIN | environment,
        capture_output=True,
        text=True,
        timeout=GENEROUS,
        check=False,
    )


@pytest.fixture
def drawer(tmp_path: Path) -> Path:
    """One job of each verdict, one broken, and what is no job; below it a folder, and hidden ones."""
    made = tmp_path / "drawer"
    (made / "below").mkdir(parents=True)
    (made / ".hidden").mkdir()
    (made / "z-good.yaml").write_text(example("index-plate").read_text())
    (made / "open.yml").write_text(RING)
    (made / "bad.yaml").write_text(spoilt("count: 60", "count: 0"))
    (made / "below" / "failing.yaml").write_text(
        example("rotator-worm-wheel").read_text().replace("circle: 18", "circle: 20")
    )
    (made / ".hidden" / "old.yaml").write_text(RING)
    (made / ".draft.yaml").write_text(RING)
    (made / "notes.yaml").write_text("# of setupcheck: later\nplan: none\n")
    (made / "list.txt").write_text(RING)
    return made


def test_of_a_drawer_every_job_gets_a_line_worst_first_and_the_counts_close_it(drawer: Path) -> None:
    done = run("review", "drawer", at=drawer.parent)
    lines = done.stdout.splitlines()
    assert 3 == done.returncode
    assert [
        ("unreadable", "bad.yaml"),
        ("fail", "below/failing.yaml"),
        ("open", "open.yml"),
        ("pass", "z-good.yaml"),
        ("skipped", "notes.yaml"),
    ] == [(line.split()[0], line.split()[-1]) for line in lines[:5]]
    assert "4 jobs in drawer: 1 unreadable, 1 fail, 1 open, 1 pass; 1 file skipped" == lines[-1]
    assert all(len(line) <= 80 for line in lines)
    assert "bad.yaml:14:35  parts.ring.surfaces.teeth.count" in done.stderr
    assert "\x1b" not in done.stdout + done.stderr


def test_long_names_and_wide_letters_keep_the_width(tmp_path: Path) -> None:
    from setupcheck.errors import cells
    from setupcheck.report import summary, wording

    assert 80 == summary.WIDTH == wording.WIDTH
    deep = tmp_path / ("a" * 60)
    deep.mkdir()
    (deep / ("\u6b6f" * 30 + ".yaml")).write_text(RING)
    (tmp_path / "b\x1b[31m.yaml").write_text(spoilt("title: Ring", 'titel: "\\e[31m'))
    lines = run("review", ".", at=tmp_path).stdout.splitlines()
    assert all(cells(line) <= 80 for line in lines)
    assert not any("\x1b" in line for line in lines)
    assert 4 == len(lines)


def test_the_files_of_a_folder_are_sorted_each_once_and_house_files_are_no_jobs(drawer: Path) -> None:
    (drawer / "setupcheck-house.yaml").write_text("house: Toolroom\n")
    found = opened([drawer / "open.yml", drawer, drawer / "below"])
    assert ["open.yml", "bad.yaml", "z-good.yaml", "failing.yaml"] == [Path(path).name for path in found.jobs]
    assert ["notes.yaml"] == [Path(path).name for path in found.skipped]


WRITTEN = ["setupcheck: 1", "{setupcheck: 1}", '"setupcheck": 1', "a: 1\r\nsetupcheck : 1", "\ufeffsetupcheck: 1"]


@pytest.mark.parametrize("text", WRITTEN)
def test_a_file_with_the_key_is_a_job_however_it_is_written(text: str, tmp_path: Path) -> None:
    (tmp_path / "a.yaml").write_bytes(text.encode())
    assert 1 == len(opened([tmp_path]).jobs)


def test_what_cannot_be_told_is_left_to_the_reader(tmp_path: Path) -> None:
    (tmp_path / "a.yaml").write_bytes(RING.encode("utf-16"))
    (tmp_path / "b.yaml").symlink_to(tmp_path / "nowhere")
    if hasattr(os, "mkfifo"):
        os.mkfifo(tmp_path / "c.yaml")
    done = run("review", ".", at=tmp_path)
    assert 2 == done.returncode
    assert {"unreadable"} == {line.split()[0] for line in done.stdout.split("\n\n")[0].splitlines()}


@pytest.mark.skipif(not hasattr(os, "geteuid") or os.geteuid() == 0, reason="root may look into every folder")
def test_a_folder_that_cannot_be_looked_into_is_told(drawer: Path) -> None:
    (drawer / "below").chmod(0)
    try:
        done = run("review", "drawer", at=drawer.parent)
    finally:
        (drawer / "below").chmod(0o700)
    assert "cannot be looked into" in done.stderr


def test_a_folder_below_that_cannot_be_looked_into_counts_as_unreadable(
    drawer: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    scan = os.scandir

    def shut(path: str) -> object:
        if str(path).endswith("below"):
            raise PermissionError(13, "Permission denied", str(path))
        return scan(path)

    monkeypatch.setattr(os, "scandir", shut)
    found = opened([drawer])
    assert {str(drawer / "below"): "Permission denied"} == found.shut
    assert 3 == len(found.jobs)


@pytest.mark.parametrize("jobs", [[], ["notes.yaml"]])
def test_a_folder_without_a_job_says_what_a_job_is(jobs: list[str], tmp_path: Path) -> None:
    for name in jobs:
        (tmp_path / name).write_text("plan: none\n")
    done = run("review", ".", at=tmp_path)
    assert (2, "") == (done.returncode, done.stdout)
    assert "there is no job here" in done.stderr
    assert ("(1 without the key `setupcheck`)" in done.stderr) == bool(jobs)


def test_json_of_many_is_a_line_each_equal_to_the_job_alone(drawer: Path) -> None:
    done = run("review", "--json", "drawer", at=drawer.parent)
    bad, opens, good, fails = map(json.loads, done.stdout.splitlines())
    assert {"file", "error"} == set(bad)
    assert str(Path("drawer", "bad.yaml")) == bad["file"]
    assert "out of range" in bad["error"][0]["problem"]
    for one, path in ((opens, "open.yml"), (good, "z-good.yaml"), (fails, "below/failing.yaml")):
        alone = run("review", "--json", f"drawer/{path}", at=drawer.parent).stdout
        assert alone == json.dumps(one, ensure_ascii=False, indent=1, allow_nan=False) + "\n"
    assert done.stderr.splitlines() == ["skipped     no key `setupcheck`  drawer/notes.yaml"]


def test_workers_say_what_one_process_says(drawer: Path) -> None:
    for how in ([], ["--json"], ["--all"]):
        one, two = (run("review", "--workers", n, *how, "drawer", at=drawer.parent) for n in ("1", "2"))
        assert (one.returncode, one.stdout, one.stderr) == (two.returncode, two.stdout, two.stderr)


def test_all_of_many_prints_each_whole_report_before_the_summary(drawer: Path) -> None:
    done = run("review", "--all", "drawer", at=drawer.parent).stdout
    alone = run("review", "--all", "drawer/open.yml", at=drawer.parent).stdout
    assert alone in done
    assert done.splitlines()[-1].startswith("4 jobs in drawer")


def test_a_house_file_beside_each_job_acts_and_a_broken_one_costs_its_folder_alone(drawer: Path) -> None:
    (drawer / "below" / "setupcheck-house.yaml").write_text("hose: Toolroom\n")
    done = run("review", "drawer", at=drawer.parent)
    verdicts = dict(reversed((w := line.split())[:: len(w) - 1]) for line in done.stdout.split("\n\n")[0].splitlines())
    assert "unreadable" == verdicts["below/failing.yaml"]
    assert "pass" == verdicts["z-good.yaml"]
    assert "fail " in run("review", "--no-house", "drawer", at=drawer.parent).stdout


def test_a_broken_house_file_that_is_named_is_told_once(drawer: Path) -> None:
    (drawer / "house.txt").write_text("hose: Toolroom\n")
    done = run("review", "--house", "drawer/house.txt", "drawer", at=drawer.parent)
    assert (2, "") == (done.returncode, done.stdout)
    assert 1 == done.stderr.count("'hose'")


@contextmanager
def started(*arguments: str, at: Path) -> Iterator[subprocess.Popen[str]]:
    """The command as a group of its own, as a terminal would run it; nothing of it is left behind."""
    process = subprocess.Popen(
        [sys.executable, "-m", "setupcheck", *arguments],
        cwd=at,
        env=PLAIN | {"PYTHONUNBUFFERED": "1"},
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        text=True,
        start_new_session=True,
    )
    try:
        yield process
    finally:
        process.kill()
        process.communicate()


def many(folder: Path, number: int) -> None:
    """A broken job, which tells of itself as soon as it is met, and more jobs than are done before a signal arrives."""
    (folder / "000.yaml").write_text(spoilt("count: 60", "count: 0"))
    for i in range(1, number):
        (folder / f"{i:03}.yaml").write_text(example("wheel-on-spindle").read_text())


@pytest.mark.skipif(os.name == "nt", reason="a group of processes gets Ctrl-C in another way there")
@pytest.mark.parametrize("workers", ["1", "2"])
def test_ctrl_c_prints_what_is_done_and_says_that_it_is_partial(workers: str, tmp_path: Path) -> None:
    many(tmp_path, 400)
    with started("review", "--workers", workers, ".", at=tmp_path) as process:
        assert process.stderr is not None
        assert "000.yaml" in process.stderr.readline()
        os.killpg(process.pid, signal.SIGINT)
        out, errors = process.communicate(timeout=GENEROUS)
    assert 130 == process.returncode
    lines = out.splitlines()
    done, left = map(int, re.findall(r"stopped: (\d+) of 400 jobs are reviewed, (\d+) are left", lines[-1])[0])
    assert (400, True) == (done + left, left > 0)
    assert lines[0].startswith("unreadable")
    assert lines[-2].startswith(f"{done} job")
    assert done == len(out.split("\n\n")[0].splitlines())
    assert "Traceback" not in out + errors
    assert "KeyboardInterrupt" not in out + errors


@pytest.mark.skipif(os.name == "nt", reason="a group of processes gets Ctrl-C in another way there")
def test_ctrl_c_leaves_whole_lines_of_json(tmp_path: Path) -> None:
    many(tmp_path, 400)
    with started("review", "--json", ".", at=tmp_path) as process:
        assert process.stdout is not None
        first = process.stdout.readline()
        os.killpg(process.pid, signal.SIGINT)
        rest, errors = process.communicate(timeout=GENEROUS)
    assert 130 == process.returncode
    found = [json.loads(line) for line in [first, *rest.splitlines()]]
    assert errors.splitlines() == [f"stopped: {len(found)} of 400 jobs are reviewed, {400 - len(found)} are left"]


def test_ctrl_c_waits_while_something_is_held_and_comes_after() -> None:
    written = []
    with _Held() as held, pytest.raises(KeyboardInterrupt):
        with held:
            signal.raise_signal(signal.SIGINT)
            written.append("whole")
        written.append("never")
    assert ["whole"] == written
    with _Held() as held:
        held.for_good()
        signal.raise_signal(signal.SIGINT)
    assert signal.default_int_handler is signal.getsignal(signal.SIGINT)


def test_quiet_prints_the_verdict_alone(drawer: Path) -> None:
    one = run("review", "-q", "drawer/z-good.yaml", at=drawer.parent)
    assert 1 == len(one.stdout.splitlines())
    assert one.stdout.startswith("PASS")
    whole = run("review", "drawer/z-good.yaml", at=drawer.parent).stdout
    assert " ".join(one.stdout.split()) in " ".join(whole.split())
    many = run("review", "--quiet", "drawer", at=drawer.parent)
    assert "4 jobs: 1 unreadable, 1 fail, 1 open, 1 pass; 1 file skipped\n" == many.stdout
    assert (0, 3) == (one.returncode, many.returncode)
    assert "bad.yaml:14:35" in many.stderr


@pytest.mark.parametrize("other", ["--json", "--all"])
def test_quiet_and_more_text_contradict_each_other(other: str, drawer: Path) -> None:
    done = run("review", "--quiet", other, "drawer", at=drawer.parent)
    assert (2, "") == (done.returncode, done.stdout)
    assert "--quiet prints one line" in " ".join(done.stderr.replace("\u2502", " ").split())


@pytest.mark.parametrize("jobs", ["drawer", "drawer/z-good.yaml"])
@pytest.mark.parametrize(
    ("how", "environment", "tinted"),
    [
        ("always", {}, True),
        ("always", {"NO_COLOR": "1"}, True),
        ("always", {"TERM": "dumb"}, True),
        ("never", {}, False),
        ("auto", {}, False),
    ],
)
def test_colour_is_what_was_asked_for(
    jobs: str, how: str, environment: dict[str, str], tinted: bool, drawer: Path
) -> None:
    done = run("review", "--color", how, jobs, at=drawer.parent, **environment).stdout
    assert tinted == ("\x1b[1;3" in done)
    plain = run("review", "--color", "never", jobs, at=drawer.parent).stdout
    assert plain == re.sub(r"\x1b\[[0-9;]*m", "", done)


def on_a_terminal(*arguments: str, at: Path, columns: int = 80, **environment: str) -> str:
    """What the command writes where both of its streams are a terminal."""
    pty = pytest.importorskip("pty")
    import fcntl
    import struct
    import termios

    ours, theirs = pty.openpty()
    fcntl.ioctl(theirs, termios.TIOCSWINSZ, struct.pack("HHHH", 24, columns, 0, 0))
    process = subprocess.Popen(
        [sys.executable, "-m", "setupcheck", *arguments],
        cwd=at,
        env=PLAIN | {"TERM": "xterm"} | environment,
        stdout=theirs,
        stderr=theirs,
    )
    os.close(theirs)
    said = b""
    try:
        while piece := os.read(ours, 65536):
            said += piece
    except OSError:  # the other end is closed
        pass
    finally:
        os.close(ours)
        process.wait(timeout=GENEROUS)
    return said.decode()


@pytest.mark.skipif(os.name == "nt", reason="needs a terminal of POSIX")
def test_on_a_terminal_there_is_a_bar_and_colour_unless_they_are_refused(drawer: Path) -> None:
    shown = on_a_terminal("review", "drawer", at=drawer.parent)
    assert "reviewing" in shown
    assert "\x1b[1;31mfail" in shown
    for refused in ({"NO_COLOR": "1"}, {"TERM": "dumb"}):
        assert "\x1b[1;31m" not in on_a_terminal("review", "drawer", at=drawer.parent, **refused)
    assert "\x1b[1;31mfail" in on_a_terminal("review", "drawer", at=drawer.parent, NO_COLOR="")
    assert "reviewing" not in on_a_terminal("review", "-q", "drawer", at=drawer.parent)


@pytest.mark.skipif(os.name == "nt", reason="needs a terminal of POSIX")
@pytest.mark.parametrize("columns", [40, 200])
def test_a_report_is_the_same_on_narrow_and_wide_terminals(columns: int, drawer: Path) -> None:
    shown = on_a_terminal("review", "--color", "never", "drawer/z-good.yaml", at=drawer.parent, columns=columns)
    assert run("review", "drawer/z-good.yaml", at=drawer.parent).stdout == shown.replace("\r\n", "\n")
