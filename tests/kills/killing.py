"""Writing processes that are killed at a random moment, and what they leave."""

from __future__ import annotations

import os
import random
import subprocess
import sys
import time
from pathlib import Path

from setupcheck.cli.writing import BEFORE, BEHIND
from setupcheck.record import record

CHECKOUT = Path(__file__).resolve().parents[2]
LINES = 150_000  # some megabytes, so that there is a while to be killed in
OLD, NEW = "old line\n" * LINES, "and a new line\n" * LINES
WRITER = """\
import sys, time
from pathlib import Path
from setupcheck.cli.writing import write_new, write_whole
path, how, text = Path(sys.argv[1]), sys.argv[2], sys.argv[3].encode().decode("unicode_escape") * int(sys.argv[4])
print("ready", flush=True)
begun = time.perf_counter()
write_new(path, text) if how == "new" else write_whole(path, text, force=True)
print(time.perf_counter() - begun, flush=True)
"""
GENEROUS = 60  # s; a hang is meant


@record
class Left:
    """What stands in the file after each kill, and how many part files lie beside it at the end."""

    old: int
    new: int
    third: int
    parts: int


def writer(path: Path, text: str, how: str = "whole", times: int = LINES) -> subprocess.Popen[str]:
    """A process that writes a text so many times over, once it has said that it is ready."""
    return subprocess.Popen(
        [sys.executable, "-c", WRITER, str(path), how, text, str(times)],
        env={**os.environ, "PYTHONPATH": str(CHECKOUT)},
        stdout=subprocess.PIPE,
        stderr=subprocess.PIPE,
        text=True,
    )


def kills(folder: Path, count: int, seed: int, how: str = "whole") -> Left:
    """Kills so many writers, each at a moment drawn from the time that an undisturbed write takes and a little more.

    how  "whole": an old file stands there;  "new": there is none, and that counts as the old one
    """
    rng, path = random.Random(seed), folder / "sheet.html"
    takes = _undisturbed(folder / "first.html", how)
    old = new = third = 0
    for _ in range(count):
        path.unlink(missing_ok=True)
        if how == "whole":
            path.write_text(OLD, encoding="utf-8", newline="\n")
        child = writer(path, "and a new line\\n", how)
        with child:
            assert child.stdout is not None
            assert child.stdout.readline() == "ready\n"
            time.sleep(rng.uniform(0.0, 1.2 * takes))
            child.kill()
            child.wait(GENEROUS)
        found = path.read_bytes() if path.exists() else None
        before = OLD.encode() if how == "whole" else None
        if found == before:
            old += 1
        elif found == NEW.encode():
            new += 1
        else:
            third += 1
    return Left(old, new, third, len(parts(folder)))


def parts(folder: Path) -> list[Path]:
    """Part files in a folder."""
    return sorted(folder.glob(f"{BEFORE}*{BEHIND}"))


def _undisturbed(path: Path, how: str) -> float:
    """Seconds that one write takes here."""
    with writer(path, "and a new line\\n", how) as child:
        told, wrong = child.communicate(timeout=GENEROUS)
    assert child.returncode == 0, wrong
    return float(told.split()[-1])
