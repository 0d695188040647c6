"""Every box of the sheet is named by a key of the job file: what is typed in through it reaches what depends on it."""

from __future__ import annotations

import re
from html.parser import HTMLParser

import pytest

from setupcheck.flow import Review, review, vary
from setupcheck.jobfile.changing import Change
from setupcheck.jobfile.models import Dimension
from setupcheck.quantities import entries
from setupcheck.report.sheet import as_sheet
from setupcheck.shipped import shipped

JOBS = ("rotator-worm-wheel", "coupling-hub", "index-plate")


class Keys(HTMLParser):
    """The keys that stand at the boxes of a sheet, row and end put together, and what stands under each box."""

    def __init__(self, text: str) -> None:
        super().__init__()
        self.found: dict[str, str] = {}
        self._row = ""
        self._tags: list[str] = []
        self._end: str | None = None
        self.feed(text)

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        if tag == "tr":
            self._row = dict(attrs).get("data-key") or ""
        if tag == "span" and self._row:
            self._end = ""
        self._tags.append(tag)

    def handle_data(self, data: str) -> None:
        if self._end is None:
            return
        if self._tags[-1] == "code" or self._tags[-1] == "wbr":
            self._end += data
        elif self._tags[-1] == "span":
            self.found[self._row + self._end] = data.strip()

    def handle_endtag(self, tag: str) -> None:
        while self._tags and self._tags.pop() != tag:
            pass  # `i` and its like may be left open
        if tag == "span":
            self._end = None


@pytest.fixture(scope="module")
def reviewed() -> dict[str, Review]:
    return {name: review(shipped(f"jobs/{name}.yaml")) for name in JOBS}


def boxes(found: Review) -> dict[str, str]:
    return Keys(as_sheet(found)).found


def rows(found: Review) -> dict[str, dict[str, str]]:
    """Boxes by the row they stand in: the part of their keys that is one entry of the job."""
    by_row: dict[str, dict[str, str]] = {}
    for key, words in boxes(found).items():
        end = next((e for e in ENDS if key.endswith(e)), "")
        base = key.removesuffix(end) if end else key
        for whole in ("mesh.mark", "mesh.backlash_read", "mesh.over_balls"):
            base = whole if key.startswith(whole) else base
        by_row.setdefault(base, {})[key] = words
    return by_row


ENDS = (".measured", ".high_at", ".uncertainty", ".at_temperature")


def typed(found: Review, key: str, words: str) -> str:
    """Something a planner may have read, well off the plan."""
    fine, size = ("thou", "in") if found.book.inches else ("um", "mm")
    base = next((key.removesuffix(e) for e in ENDS if key.endswith(e)), key)
    node = entries.node_at(found.loaded, base)
    if key.endswith(".high_at"):
        return "40 deg"
    if key.endswith(".at_temperature"):
        return "26 degC"
    if key.endswith(".uncertainty"):
        return f"0.3 {fine}" if found.book.inches else "2 um"
    if isinstance(node, Dimension):
        return f"{node.value + (node.upper or 0.0) + 0.021:.4f} mm"
    if key.startswith("mesh.backlash_read.") and "gap" not in key and "uncertainty" not in key:
        return {"end_float": "included", "along": "circular"}[key.rpartition(".")[2]]
    if key == "mesh.over_balls.measured":
        return "112.05 mm"
    if key.endswith("depth_from.measured"):
        return "110.93 mm"
    if key.endswith(".measured"):
        planned = getattr(node, "at_most", None) or 0.005
        return f"{2.3 * planned:.5f} mm"
    known = {
        "seen_from": "wheel.front", "film": "6 um", "at": "2.1 mm", "towards": "wheel.back", "height": "tip", "share": "9 %",
        "ball": "2.5 mm", "tilt": "3.9 deg", "hub": "151 degC", "shaft": "-15 degC", "carry": "70 s", "end_float": "31 um",
        "clearance": f"[3 {fine}, 13 {fine}]" if not found.book.inches else "[0.1 thou, 0.5 thou]",
    }  # fmt: skip
    gap = re.search(r"gap (\d+)$", key)
    if gap:
        return f"{60 + int(gap[1]) % 7} um"
    assert key.rpartition(".")[2] in known, f"{key} ({words}, {size}): how is it typed?"
    return known[key.rpartition(".")[2]]


def depends(found: Review, base: str) -> set[str]:
    """Requirements that a cause resting on this entry pushes."""
    return {
        key
        for key, result in found.results.items()
        for share in result.combined.shares
        for cause in ((share.cause, *share.cause.of.origins()) if share.cause.of is not None else (share.cause,))
        if share.worst > 0.0
        and (cause is share.cause or cause.bound > 0.0)  # planned at nothing, it moves no high point
        and any(path == base or path.startswith(f"{base}.") for path in cause.paths)
    }


@pytest.mark.parametrize("name", JOBS)
def test_every_box_can_be_typed_back_and_reaches_what_depends_on_it(reviewed: dict[str, Review], name: str) -> None:
    before = reviewed[name]
    worst = {key: result.combined.worst for key, result in before.results.items()}
    judged = {(f.rule, f.at, f.value, f.verdict) for f in before.evaluation.findings}
    idle = []
    for base, keys in rows(before).items():
        after = vary(before, [Change(key, typed(before, key, words)) for key, words in keys.items()]).after
        for key in depends(before, base):
            now = after.results.get(key)
            assert now is None or now.combined.worst != worst[key], f"{base} does not reach {key}"
        if judged == {(f.rule, f.at, f.value, f.verdict) for f in after.evaluation.findings}:
            idle.append(base)
    assert [] == idle, "typed in, and nothing is judged otherwise"
