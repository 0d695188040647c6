"""Every number of every good job spoilt in turn: does the review say so?"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import cache

from setupcheck.errors import JobError
from setupcheck.flow import Review, review
from setupcheck.jobfile.changing import Change, changed
from setupcheck.jobfile.reading import LoadedJob
from tests.catch.making import good, without
from tests.catch.numbers import WAYS, Number, numbers, spoilt

REFUSED, SPEAKS, MOVES, SILENT = "refused", "a finding changes", "a judged number moves", "nothing changes"
NOTICED = (REFUSED, SPEAKS)

Findings = dict[tuple[str, str], str]


@dataclass(frozen=True)
class Spoilt:
    """What became of a job with one number spoilt.

    passes  the review says pass: of every finding, and of the job
    """

    number: Number
    way: str
    how: str
    passes: bool


def every(jobs: Iterable[str]) -> list[tuple[Number, str]]:
    """All numbers of these jobs, each in every way that changes it."""
    return [
        (number, way)
        for job in jobs
        for number in numbers(job, good(job))
        for way in WAYS
        if spoilt(number, way) is not None
    ]


def spoil(asked: tuple[Number, str]) -> Spoilt:
    """One number spoilt one way, and the job reviewed."""
    number, way = asked
    try:
        found = review(_made(number, spoilt(number, way) or ""))
    except JobError:
        return Spoilt(number, way, REFUSED, False)
    findings, figures = _seen(found)
    was_findings, was_figures = _seen_in_good(number.job)
    how = SPEAKS if findings != was_findings else MOVES if figures != was_figures else SILENT
    return Spoilt(number, way, how, found.verdict == "pass")


def _made(number: Number, text: str) -> LoadedJob:
    loaded = good(number.job)
    return changed(loaded, [Change(number.path, text)]) if text else without(loaded, [number.path])


def _seen(found: Review) -> tuple[Findings, dict[tuple[str, str], float | str | None]]:
    """The verdicts of a review, and the numbers that it judged, to nine digits: less is the rounding of the sums."""
    findings = {(f.rule, f.at): str(f.verdict) for f in found.evaluation.findings}
    findings["verdict", ""] = str(found.verdict)
    figures: dict[tuple[str, str], float | str | None] = {}
    for f in found.evaluation.findings:
        figures[f.rule, f.at] = float(f"{f.value:.9g}") if isinstance(f.value, float) else f.value
        figures[f"{f.rule} margin", f.at] = None if f.margin is None else float(f"{f.margin:.9g}")
    return findings, figures


@cache
def _seen_in_good(job: str) -> tuple[Findings, dict[tuple[str, str], float | str | None]]:
    return _seen(review(good(job)))


def unused(found: Sequence[Spoilt]) -> set[Number]:
    """Numbers that nothing judged rests on: doubled, halved and negated they move nothing, or the reader refuses them,
    who looks at the number alone."""
    silent = {one.number for one in found if one.way != "removed" and one.how == SILENT}
    return silent - {one.number for one in found if one.way != "removed" and one.how in (SPEAKS, MOVES)}


def removed_and_passed(found: Sequence[Spoilt]) -> list[Spoilt]:
    """Numbers that something rests on, taken out, and the review passes all the same."""
    idle = unused(found)
    return [one for one in found if one.way == "removed" and one.passes and one.number not in idle]


def told(found: Sequence[Spoilt]) -> list[str]:
    """The shares, way by way."""
    head = f"  {'':<10}{'tries':>6}{'noticed':>9}{'moves':>7}{'silent':>8}"
    lines = [f"{len({one.number for one in found})} numbers spoilt in turn", head]
    for way in WAYS:
        counts = Counter(one.how for one in found if one.way == way)
        tries = sum(counts.values())
        shares = (sum(counts[how] for how in NOTICED), counts[MOVES], counts[SILENT])
        lines.append(f"  {way:<10}{tries:>6}" + "".join(f"{100.0 * n / max(tries, 1):>7.1f} %" for n in shares))
    lines.append(f"  nothing judged rests on {len(unused(found))} of them")
    lines.append(f"  removed and passed: {len(removed_and_passed(found))}")
    return lines


def listed(found: Sequence[Spoilt]) -> list[str]:
    """Removals that pass, and what nothing rests on."""
    lines = [f"removed, passes: {one.number.told()} ({one.how})" for one in removed_and_passed(found)]
    return lines + [f"nothing rests on: {one.told()}" for one in sorted(unused(found), key=Number.told)]
