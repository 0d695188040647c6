"""The pages of docs/ tell what the tool prints. Run this file to write their quoted output and the steps' job files anew:

python -m tests.docs.pages

A page holds, in its order: a job file whole (```yaml below `<!-- job: NAME -->`), changes to it (```diff), and commands with
their output (``` below `<!-- show: WHAT; WHAT -->`, its first line `$ setupcheck …`). WHAT picks what is quoted: `head` the first
two lines, `all` everything, else the first line from there on that holds this text, with the lines under it that stand further
in (`only TEXT`: that line alone). What is left out is marked `…`. Sums stand in ```calc blocks, read by `tests/docs/sums.py`.
"""

from __future__ import annotations

import os
import re
import shlex
import subprocess
import sys
import tempfile
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cache
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
DOCS = ROOT / "docs"
STEPS = DOCS / "steps"
SHOWN = ("tutorial.md", "worked-numbers.md")
"""The pages that quote the tool."""

FENCE = re.compile(r"(?:<!-- (?P<kind>job|show): (?P<said>[^\n]*?) -->\n)?```(?P<tongue>\w*)\n(?P<body>.*?)```\n", re.S)
LEFT_OUT = "  …"


class PageError(Exception):
    """A page that cannot be followed: what is wrong, and where."""


@dataclass(frozen=True)
class Quote:
    """A command with the output that the page quotes.

    place  start and end of the quoted text in the page
    job    name and text of the job file as the page has grown it so far
    """

    page: str
    place: tuple[int, int]
    command: str
    picks: tuple[str, ...]
    quoted: str
    job: tuple[str, str]


def changed_by(text: str, diff: str) -> str:
    """A job text with a ```diff block put in; its kept and removed lines must stand there once, one after another."""
    lines = diff.splitlines()
    before = "".join(f"{line[1:]}\n" for line in lines if line[:1] in ("-", " ", ""))
    after = "".join(f"{line[1:]}\n" for line in lines if line[:1] in ("+", " ", ""))
    if text.count(before) != 1:
        raise PageError(f"these lines stand {text.count(before)} times in the job file, not once:\n{before}")
    return text.replace(before, after)


def jobs_and_quotes(page: str, text: str) -> Iterator[tuple[str, str] | Quote]:
    """Each new state of the job file and each quote of a page, in its order."""
    job = ("", "")
    for found in FENCE.finditer(text):
        if found["kind"] == "job":
            job = (found["said"], found["body"])
            yield job
        elif found["tongue"] == "diff":
            job = (job[0], changed_by(job[1], found["body"]))
            yield job
        elif found["kind"] == "show":
            first, _, quoted = found["body"].partition("\n")
            if not first.startswith("$ setupcheck "):
                raise PageError(f"{page}: a quote begins with `$ setupcheck …`, not with {first!r}")
            picks = tuple(one.strip() for one in found["said"].split(";"))
            yield Quote(page, (found.start("body") + len(first) + 1, found.end("body")), first[2:], picks, quoted, job)


def read(page: str) -> str:
    """The text of a page."""
    return (DOCS / page).read_text(encoding="utf-8")


def quotes(page: str) -> list[Quote]:
    """All quotes of a page."""
    return [one for one in jobs_and_quotes(page, read(page)) if isinstance(one, Quote)]


def steps(page: str) -> dict[str, str]:
    """The job file as each step of a page leaves it: its file name, with the number of its heading before it, and its text."""
    text = read(page)
    states = [one for one in jobs_and_quotes(page, text) if not isinstance(one, Quote)]
    found = {}
    for number, part in re.findall(r"^## (\d+)\. (.*?)(?=^## |\Z)", text, re.M | re.S):
        grown = len(re.findall(r"^```(?:yaml|diff)$", part, re.M))
        for name, job in states[:grown][-1:]:
            found[f"{number:0>2}-{name}"] = job
        states = states[grown:]
    if states:
        raise PageError(f"{page}: a job file outside the numbered steps")
    return found


@cache
def printed(command: str, name: str, text: str) -> str:
    """What a command prints, both streams, in a folder that holds this job file beside jobs/ and docs/."""
    with tempfile.TemporaryDirectory() as folder:
        if name:
            Path(folder, name).write_text(text, encoding="utf-8")
        for shared in ("jobs", "docs"):
            Path(folder, shared).symlink_to(ROOT / shared)
        run = subprocess.run(
            [sys.executable, "-m", "setupcheck", *shlex.split(command)[1:]],
            stdout=subprocess.PIPE,
            stderr=subprocess.STDOUT,
            text=True,
            encoding="utf-8",
            cwd=folder,
            env={**os.environ, "PYTHONPATH": str(ROOT), "COLUMNS": "80", "PYTHONIOENCODING": "utf-8"},
            check=False,
        )
    if run.returncode not in (0, 1, 2, 3) or "Traceback" in run.stdout:
        raise PageError(f"{command} ended with {run.returncode}:\n{run.stdout}")
    return run.stdout


def indent(line: str) -> int:
    """How far in a line stands."""
    return len(line) - len(line.lstrip(" "))


def picked(lines: list[str], pick: str, start: int) -> tuple[int, int]:
    """First and last + 1 line that a pick quotes, looked for from `start` on."""
    if pick in ("all", "head"):
        return 0, (len(lines) if pick == "all" else 2)
    text = pick.removeprefix("only ")
    first = next((i for i in range(start, len(lines)) if text in lines[i]), None)
    if first is None:
        raise PageError(f"nothing printed from line {start + 1} on holds {text!r}:\n" + "\n".join(lines))
    end = first + 1
    while pick == text and end < len(lines) and lines[end] and indent(lines[end]) > indent(lines[first]):
        end += 1
    return first, end


def cut_out(output: str, picks: tuple[str, ...]) -> str:
    """The quoted part of an output, `…` for what is left out."""
    lines = output.strip("\n").splitlines()
    told: list[str] = []
    at = 0
    for pick in picks:
        first, end = picked(lines, pick, at)
        told += [LEFT_OUT] if any(lines[at:first]) else lines[at:first]
        told += lines[first:end]
        at = end
    if any(lines[at:]):
        told.append(LEFT_OUT)
    return "".join(f"{line}\n" for line in told)


def as_printed_now(quote: Quote) -> str:
    """What a quote should say."""
    return cut_out(printed(quote.command, *quote.job), quote.picks)


def written_anew(page: str) -> str:
    """A page with what the tool prints now."""
    text = read(page)
    for quote in reversed(quotes(page)):
        first, end = quote.place
        text = text[:first] + as_printed_now(quote) + text[end:]
    return text


def write() -> None:
    """Write the quotes of all pages and the steps of the tutorial anew."""
    for page in SHOWN:
        (DOCS / page).write_text(written_anew(page), encoding="utf-8")
    STEPS.mkdir(exist_ok=True)
    for old in STEPS.glob("*.yaml"):
        old.unlink()
    for name, text in steps("tutorial.md").items():
        (STEPS / name).write_text(text, encoding="utf-8")


if __name__ == "__main__":
    write()
