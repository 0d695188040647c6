"""The rotator with a backlash read round its wheel, and what a review of it says. Invented readings."""

from __future__ import annotations

import math
import re
from functools import cache

from setupcheck.flow import Review, review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.ledger.combine import Combined
from setupcheck.quantities.book import Known
from setupcheck.report.remedies import remedy_in_words
from setupcheck.report.text import as_text
from setupcheck.shipped import shipped

ROTATOR = shipped("jobs/rotator-worm-wheel.yaml").read_text("utf-8")
MESH = "mesh: {wheel: wheel.teeth,"
GAPS = (1, 10, 19, 28, 37, 46, 55, 64)
TYPED = dict(zip(GAPS, (62.0, 58.0, 52.0, 48.0, 47.0, 50.0, 56.0, 61.0), strict=True))  # um
TAKEN = "uncertainty: 2 um, end_float: taken-out"
SLOPE = 2.0 * math.tan(math.radians(20.0))  # of the backlash over the distance of the axes
ASKED = "  - {what: backlash, between: [5 um, 125 um]}\n"


def job(read: dict[int, float], more: str = TAKEN, *changes: tuple[str, str]) -> str:
    """The rotator's wheel with backlash read [um]."""
    said = ", ".join(f"gap {gap}: {value!r} um" for gap, value in read.items())
    text = ROTATOR.replace(MESH, f"{MESH} backlash_read: {{readings: {{{said}}}{', ' if more else ''}{more}}},")
    for old, new in changes:
        assert old in text
        text = text.replace(old, new)
    return text


def wave(mean: float, amplitude: float, loose: int = 1, gaps: tuple[int, ...] = GAPS) -> dict[int, float]:
    return {gap: mean + amplitude * math.cos(math.tau * (gap - loose) / 72.0) for gap in gaps}


@cache
def judged(text: str) -> Review:
    return review(read_job_text(text, "job.yaml"))


def answer(text: str, name: str) -> object:
    book = judged(text).book
    found = book.get(name, book.instances("mesh")[0])
    return found.value if isinstance(found, Known) else found


def um(text: str, name: str) -> float:
    return 1e3 * float(str(answer(text, name)))


def combined(text: str, what: str = "backlash.") -> Combined:
    (found,) = [result for key, result in judged(text).results.items() if key.startswith(what)]
    return found.combined


def ends(text: str, what: str = "backlash.") -> tuple[float, float]:
    worst = combined(text, what).worst
    return 1e3 * worst.low, 1e3 * worst.high


def verdict(text: str, rule: str) -> str:
    found = [f.verdict for f in judged(text).evaluation.findings if f.rule == rule]
    return ", ".join(sorted(set(found)))


def remedy(text: str, rule: str, at: str = "") -> str:
    (found,) = [f for f in judged(text).evaluation.findings if f.rule == rule and f.verdict != "pass" and at in f.at]
    return remedy_in_words(judged(text), found)


def block(text: str) -> str:
    report = as_text(judged(text))
    assert max(map(len, report.splitlines())) <= 80
    found = re.search(r"^BACKLASH AS READ.*?(?=\n\n)", report, re.S | re.M)
    return re.sub(r"\s+", " ", found[0]) if found else ""
