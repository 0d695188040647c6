"""A figure taken out of a good job: no stack moves in silence. It stays to the last digit, is open, or the file is refused.

Where the program goes on with a value of its own, either a finding says so, or it is one of the defaults listed here.
"""

from __future__ import annotations

import copy
import json
import re
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import cache

import pytest

from setupcheck.errors import JobError
from setupcheck.flow import review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.ledger.figures import Figure, alternatives
from setupcheck.quantities.book import Open, OutOfRange
from setupcheck.quantities.requirements import read_stack
from setupcheck.quantities.route import walk
from setupcheck.quantities.stacks import build
from setupcheck.shipped import shipped
from setupcheck.yamlfile import parse

JOBS = sorted(path.stem for path in shipped("jobs").glob("*.yaml"))
SECTIONS = ("parts", "worm", "mesh", "cutters", "machines", "setups", "place")

DEFAULTS = {  # key, with * for a name or an operation -> what is taken where it is left out
    "parts.*.surfaces.*.hole": "a shaft that no hole is drawn in is solid",
    "parts.*.surfaces.*.diameter": "a face without a size ends where the other one, or the metal beside it, does",
    "parts.*.surfaces.*.cone": "teeth that no cone is stated of stand round a cylinder; a tilt of the head is then told",
    "setups.*.hold.*.at": "a plane without a height lies in the middle of its surface",
    "setups.*.hold.*.runout.measured": "what is not measured yet counts as planned",
    "setups.*.hold.*.runout.device": "an error without a name is another cause in every setup",
    "setups.*.hold.*.through": "a device that is not said to stand on another one stands on the machine",
    "setups.*.cut.*.leave_on_diameter": "a cut that leaves nothing finishes its surface",
    "setups.*.cut.*.each": "single places scatter by no more than the division",
    "setups.*.cut.*.each.*": "a scatter along the other direction alone",
    "setups.*.divide.*.once_per_*": "a wave that is not stated is not there, as long as another error of the device is",
    "setups.*.divide.clamp": "clamping shifts nothing",
    "setups.*.join.trued.runout.measured": "what is not measured yet counts as planned",
    "setups.*.join.trued": "a part that nobody trues lies anywhere in its play",
    "setups.*.join.clearance": "a screwed or glued part without play lies as its fit_error says",
    "setups.*.join.fit_error": "an interference fit lets its parts run true to each other",
    "setups.*.join.stop.error": "a face that is pushed home meets the other metal to metal",
}
LIMIT_RULES = ("STACK-", "ALLOW-")
"""These judge the figure that has moved; they cannot say that it moved for want of a number."""

Shape = tuple[object, ...]
Path = tuple[str | int, ...]


@dataclass(frozen=True)
class Taken:
    """A job without one key: its path as messages print it, and the text that is left."""

    path: str
    text: str


def keys(node: object, path: Path = ()) -> Iterator[Path]:
    """Paths of all keys with a figure in them; a cut as a whole is left in, for without it this is another route."""
    if isinstance(node, dict):
        for key, value in node.items():
            if not path and key not in SECTIONS:
                continue
            if re.search(r"\d", json.dumps(value)) and path and path[-1] != "cut":
                yield (*path, key)
            yield from keys(value, (*path, key))
    elif isinstance(node, list):
        for i, value in enumerate(node):
            yield from keys(value, (*path, i))


def taken(name: str) -> Iterator[Taken]:
    """The job with each of its keys taken out in turn. JSON is YAML too, and keeps everything but the comments."""
    tree = parse(shipped(f"jobs/{name}.yaml").read_text("utf-8"), f"{name}.yaml")
    for path in keys(tree.data):
        data = copy.deepcopy(tree.data)
        node: object = data
        for step in path[:-1]:
            node = node[step]  # type: ignore[index]
        del node[path[-1]]  # type: ignore[attr-defined]
        yield Taken(tree.dotted(path), json.dumps(data, ensure_ascii=False))


def shape(figure: Figure) -> Shape:
    """All that the worst case of a figure is made of."""
    return tuple(
        (one.base(), tuple(sorted((p.cause.key, p.down, p.up) for p in one.pushes()))) for one in alternatives(figure)
    )


def figures(text: str) -> dict[str, Shape | None]:
    """Every stack of a job by name: what it is made of, None where it is open. Raises: JobError."""
    loaded = read_job_text(text, "job.yaml")
    floor = walk(loaded)
    found: dict[str, Shape | None] = {}
    for i in range(len(loaded.job.require)):
        stack = read_stack(floor, i)
        try:
            built = build(floor, stack)
        except OutOfRange:
            built = Open(())
        found[stack.name] = None if isinstance(built, Open) else shape(built.figure)
    return found


def by_default(path: str) -> str:
    """The row of DEFAULTS that a path falls under; empty where there is none."""
    rows = (row for row in DEFAULTS if re.fullmatch(re.escape(row).replace(r"\*", r"[^.]+"), path))
    return next(rows, "")


def says_so(text: str) -> bool:
    """Whether a finding says that something is missing, beside those that judge the figure itself."""
    found = review(read_job_text(text, "job.yaml")).evaluation.findings
    return any(f.verdict != "pass" and not f.rule.startswith(LIMIT_RULES) for f in found)


@cache
def outcome(name: str) -> Mapping[str, tuple[Taken, ...]]:
    """What came of each key taken out: refused, same, open (some stack is, the rest as it was), moved."""
    good = figures(shipped(f"jobs/{name}.yaml").read_text("utf-8"))
    found: dict[str, list[Taken]] = {"refused": [], "same": [], "open": [], "moved": []}
    for one in taken(name):
        try:
            now = figures(one.text)
        except JobError:
            found["refused"].append(one)
            continue
        if any(now[key] is not None and now[key] != good[key] for key in good):
            found["moved"].append(one)
        else:
            found["same" if now == good else "open"].append(one)
    return {kind: tuple(those) for kind, those in found.items()}


@pytest.mark.parametrize("name", JOBS)
def test_the_job_without_its_comments_is_the_same_job(name: str) -> None:
    text = shipped(f"jobs/{name}.yaml").read_text("utf-8")
    good = figures(text)
    assert None not in good.values()
    assert good == figures(json.dumps(parse(text, "job.yaml").data, ensure_ascii=False))


@pytest.mark.parametrize("name", JOBS)
def test_no_stack_moves_in_silence_when_a_number_is_taken_out(name: str) -> None:
    silent = [one.path for one in outcome(name)["moved"] if not by_default(one.path) and not says_so(one.text)]
    assert silent == []


@pytest.mark.parametrize("name", JOBS)
def test_a_stack_that_lacks_a_number_keeps_the_job_from_passing(name: str) -> None:
    opened = outcome(name)["open"]
    assert len(opened) >= 5
    passed = [one.path for one in opened[::4] if review(read_job_text(one.text, "job.yaml")).verdict == "pass"]
    assert passed == []


@pytest.mark.parametrize("name", JOBS)
def test_most_numbers_of_a_job_are_needed(name: str) -> None:
    found = {kind: len(those) for kind, those in outcome(name).items()}
    assert sum(found.values()) > 80
    assert found["same"] < sum(found.values()) / 2


def test_every_default_of_the_list_is_taken_in_some_job() -> None:
    used = {by_default(one.path) for name in JOBS for one in outcome(name)["moved"]}
    assert used - {""} == set(DEFAULTS)
