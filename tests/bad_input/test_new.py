"""`setupcheck new` as a process: on a real terminal, and on what cannot be. Exit 2 and one message, never a traceback."""

from __future__ import annotations

import os
import select
import subprocess
import sys
from pathlib import Path

import pytest

from tests.bad_input.test_command import CHECKOUT, GENEROUS, command

pty = pytest.importorskip("pty")


def answered(arguments: list[str], answers: list[str], at: Path) -> tuple[int, str]:
    """Exit code and everything printed, with somebody at the terminal who answers each prompt."""
    pid, terminal = pty.fork()
    if pid == 0:  # the child: nothing but the command
        os.chdir(at)
        os.environ.update(PYTHONPATH=str(CHECKOUT), PYTHONDONTWRITEBYTECODE="1")
        os.execv(sys.executable, [sys.executable, "-m", "setupcheck", *arguments])
    told, left = b"", list(answers)
    while True:
        ready, _, _ = select.select([terminal], [], [], GENEROUS)
        assert ready, told.decode()
        try:
            part = os.read(terminal, 4096)
        except OSError:  # the other end has gone
            break
        if not part:
            break
        told += part
        if told.endswith(b"]: ") and left:
            os.write(terminal, left.pop(0).encode() + b"\n")
    os.close(terminal)
    return os.waitstatus_to_exitcode(os.waitpid(pid, 0)[1]), told.decode()


def test_a_terminal_is_asked(tmp_path: Path) -> None:
    code, told = answered(["new", "g.yaml"], ["spur-gear", "mm", "Gear", "", "3,5", "35", "", "", "", ""], tmp_path)
    assert 0 == code, told
    assert "'3,5' is not a number" in told
    assert "teeth:   {kind: teeth, count: 35," in (tmp_path / "g.yaml").read_text(encoding="utf-8")


def test_the_end_of_input_and_an_interrupt_at_a_terminal_write_nothing(tmp_path: Path) -> None:
    for key in ("\x04", "\x03"):
        code, told = answered(["new", "g.yaml"], ["spur-gear", key], tmp_path)
        assert 2 == code, told
        assert "nothing was written" in told
        assert "Traceback" not in told
        assert [] == list(tmp_path.iterdir())


@pytest.mark.parametrize(
    "arguments",
    [
        [],
        ["x.yaml", "--kind", ""],
        ["x.yaml", "--kind", "gear"],
        ["x.yaml", "--title", "a" * 10_000],
        ["x.yaml", "--title", "a\u202eb"],
        ["x.yaml", "--title", "a\nparts: {}"],
        ["x.yaml", "--teeth", "-1"],
        ["x.yaml", "--teeth", "1e999"],
        ["x.yaml", "--teeth", "nan"],
        ["x.yaml", "--module", "1e-300"],
        ["x.yaml", "--bore", "32,5 H6"],
        ["x.yaml", "--bore", "{a: b}"],
        ["x.yaml", "--like", "../../etc/passwd"],
        ["x.yaml", "--like", ""],
        ["x.yaml", "--force"],
        ["", "--yes"],
        ["no/x.yaml"],
        ["."],
    ],
)
def test_what_cannot_be_ends_with_one_message_and_writes_nothing(tmp_path: Path, arguments: list[str]) -> None:
    run = command("new", *arguments, at=tmp_path)
    assert 2 == run.returncode, run.stdout
    assert run.stderr.strip()
    assert "Traceback" not in run.stderr
    assert [] == list(tmp_path.iterdir())


def test_bytes_that_are_no_text_are_refused(tmp_path: Path) -> None:
    run = subprocess.run(
        [sys.executable.encode(), b"-m", b"setupcheck", b"new", b"x.yaml", b"--title", b"a\xff"],
        cwd=tmp_path,
        env={**os.environ, "PYTHONPATH": str(CHECKOUT)},
        capture_output=True,
        timeout=GENEROUS,
        check=False,
    )
    assert 2 == run.returncode
    assert b"which cannot be seen" in run.stderr
    assert [] == list(tmp_path.iterdir())


def test_a_folder_that_may_not_be_written_to_is_told(tmp_path: Path) -> None:
    if os.geteuid() == 0:
        pytest.skip("root may write everywhere")
    tmp_path.chmod(0o500)
    run = command("new", "x.yaml", "--kind", "spur-gear", at=tmp_path)
    tmp_path.chmod(0o700)
    assert (2, True) == (run.returncode, "cannot be written" in run.stderr)
