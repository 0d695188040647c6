"""Whole reports, and excerpts of README and docs/what-comes-out.md, kept as files and compared. Run this file to write them anew:

python -m tests.golden.pages
"""

from __future__ import annotations

import re
from functools import cache
from pathlib import Path

from setupcheck.errors import JobError
from setupcheck.flow import load_job, mend, prepare, review, vary
from setupcheck.jobfile.changing import Change, changed
from setupcheck.jobfile.ranging import read_range
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.index_table import as_index_table
from setupcheck.report.pictures import pictures
from setupcheck.report.remedy import as_text as remedy_as_text
from setupcheck.report.summary import Line, summary, told_of
from setupcheck.report.text import as_text
from setupcheck.report.vary import as_text as varied_as_text
from setupcheck.report.vary_drawing import as_drawing
from setupcheck.report.vary_range import Swept, sweep
from setupcheck.report.vary_range import as_text as swept_as_text

ROOT = Path(__file__).resolve().parents[2]
HERE = Path(__file__).resolve().parent
WHEEL = (ROOT / "jobs" / "rotator-worm-wheel.yaml").read_text(encoding="utf-8")
SHIMMED = WHEEL.replace(
    "centre: {on: hub, by: four-jaw, at: 23, runout: {at_most: 6 um, measured: 4 um, uncertainty: 1 um}}",
    "centre: {on: rim, by: shimmed-jaws, at: 12, runout: 100 um}",
)
EXCERPTS_IN = ("README.md", "docs/what-comes-out.md")
MISTAKES = (
    WHEEL.replace("clearance: [2 um, 8 um]", "clearance: [2 um, 8,5 um]")
    .replace("centre: {on: rim, by: soft-jaws, at: 12", "centre: {on: rimm, by: soft-jaws, at: 12")
    .replace("uncertainty: 2', leans: nose-down", "uncertainty: 2 um, leans: nose-down")
)


SLIPS = (
    WHEEL.replace("tilt: 3deg 34' 35\"", "tilt: 3deg 10' 47\"")
    .replace("tip_radius: 20.0", "tip_radius: 14.0")
    .replace("hub: 175 degC", "hub: 140 degC")
    .replace("spacers: [{name: shim, length: 1.500 ±0.003}]", "spacers: []")
)
"""Four slips at once: the angle of the tip diameter, a cutter of the worm's size, heat for the nominal fit, no shim."""
SAID_OF_SLIPS = ("CUTTER-003", "HEAT-001", "PLACE-001", "TILT-002")


@cache
def reports() -> dict[str, str]:
    """File name -> text of every golden report."""
    found = {f"{job.stem}.txt": as_text(review(job)) for job in sorted((ROOT / "jobs").glob("*.yaml"))}
    found["shimmed-jaws.txt"] = as_text(review(read_job_text(SHIMMED, "shimmed-jaws.yaml")))
    found["index-table.txt"] = index_table()
    found["vary.txt"] = varied()
    found["remedy.txt"] = remedied("mistakes/hidden-chuck-run-out")
    found["remedy-of-a-good-job.txt"] = remedied("coupling-hub")
    found["vary-range.txt"] = swept_as_text(swept())
    return found


@cache
def drawings() -> dict[str, str]:
    """File name -> SVG of every golden drawing."""
    return {"vary-range.svg": as_drawing(swept()), **route_pictures(), **pictures_of_heat_and_pitch()}


def route_pictures() -> dict[str, str]:
    """Part, a holding, the head, the datums, the first stack and the lengths along the axis of the worm wheel."""
    drawn = pictures(review(ROOT / "jobs" / "rotator-worm-wheel.yaml"))
    names = {
        "part": "part-wheel",
        "hold": "hold-50",
        "head": "head-40",
        "datums": "datums",
        "stack": "stack-1",
        "axial": "axial",
    }
    return {f"picture-{name}.svg": drawn[key].draw() for name, key in names.items()}


HIGH_AT = (
    ("setups.50.hold.centre.runout", "{at_most: 10 um, measured: 8 um, uncertainty: 1 um, high_at: 30 deg}"),
    ("setups.40.hold.centre.runout", "{at_most: 10 um, measured: 7 um, uncertainty: 1 um, high_at: 100 deg}"),
    ("setups.40.hold.square.face_runout", "{measured: 6 um, uncertainty: 1 um, high_at: 200 deg}"),
)
"""Directions that a dial would have shown on the worm wheel. Invented: no shipped job has any."""


def pictures_of_heat_and_pitch() -> dict[str, str]:
    """One of each family, of the worm wheel."""
    wheel = load_job(ROOT / "jobs" / "rotator-worm-wheel.yaml")
    shown = pictures(review(wheel))
    known = pictures(review(changed(wheel, [Change(*one) for one in HIGH_AT])))
    return {
        "picture-heating.svg": shown["heating-70"].draw(),
        "picture-pitch.svg": shown["pitch-1"].draw(),
        "picture-high-spots.svg": known["high-spots-5"].draw(),
    }


def varied() -> str:
    """What if the finished hub had been trued to 9 um instead of 4."""
    changes = [Change("setups.50.hold.centre.runout.measured", "9 um")]
    return varied_as_text(vary(ROOT / "jobs" / "rotator-worm-wheel.yaml", changes))


def remedied(job: str) -> str:
    """What would bring a job inside, or what is good enough already."""
    return remedy_as_text(*mend(ROOT / "jobs" / f"{job}.yaml"))


@cache
def drawer() -> list[str]:
    """All shipped jobs in a line each, mistakes and all."""
    lines = []
    for path in sorted((ROOT / "jobs" / "mistakes").glob("*.yaml")) + sorted((ROOT / "jobs").glob("*.yaml")):
        found = review(path)
        lines.append(Line(path.relative_to(ROOT).as_posix(), found.verdict, told_of(found)))
    return summary(lines)


@cache
def swept() -> Swept:
    """The same over a range."""
    before = review(ROOT / "jobs" / "rotator-worm-wheel.yaml")
    span = read_range(Change("setups.50.hold.centre.runout.measured", "2um..10um/5"))
    assert span is not None
    return sweep(before, span, [], lambda changes: vary(before, changes))


def index_table() -> str:
    """The index table of the worm wheel's teeth."""
    loaded = load_job(ROOT / "jobs" / "rotator-worm-wheel.yaml")
    return as_index_table(loaded, prepare(loaded)[1])


def mistakes() -> str:
    """What the command prints for a file with three mistakes."""
    try:
        read_job_text(MISTAKES, "wheel.yaml")
    except JobError as wrong:
        return wrong.wrapped()
    raise AssertionError("the mistakes went unnoticed")


def slips() -> str:
    """What the review says to the four slips: message and remedy of each, in the order of the report."""
    text = as_text(review(read_job_text(SLIPS, "slips.yaml"))).split("FINDINGS\n")[1].split("\n\n")[0]
    found = re.split(r"\n(?=  \w+  [A-Z]+-\d)", text)
    told = []
    for one in found:
        if one.split()[1] in SAID_OF_SLIPS:
            told.append(one[: one.index("\n      Source:")])
    assert len(told) == len(SAID_OF_SLIPS)
    return "\n".join(told)


def first_of(word: str, lines: list[str]) -> int:
    """The first line that begins with a word."""
    return next(i for i, line in enumerate(lines) if line.startswith(word))


def excerpts() -> dict[str, str]:
    """The excerpts of the README, cut out of the real reports."""
    shimmed = reports()["shimmed-jaws.txt"].splitlines()
    head = [line for line in shimmed[:2] if line]
    first = next(i for i, line in enumerate(shimmed) if line.startswith("  fail  STACK-001"))
    after = next(i for i in range(first + 1, len(shimmed)) if re.match(r"  \w+  [A-Z]+-\d|$", shimmed[i]))
    good = reports()["rotator-worm-wheel.txt"].splitlines()
    drawn = reports()["wheel-on-spindle.txt"].splitlines()
    table = reports()["index-table.txt"].splitlines()
    what_if = reports()["vary.txt"].splitlines()
    range_of = reports()["vary-range.txt"].splitlines()
    many = drawer()
    passed = first_of("pass", many)
    would_do = reports()["remedy.txt"].splitlines()
    outside = first_of("OUTSIDE", would_do)
    moved = first_of("WHAT WAS ASKED", what_if)
    asked = good.index("WHAT WAS ASKED, at its worst")
    dial = next(i for i, line in enumerate(good) if line.startswith("  op 40, run-out on hub: up to"))
    return {
        "shimmed": "\n".join([*head, "", "FINDINGS", *shimmed[first:after], "  …"]),
        "good": "\n".join([*good[:2], "", *good[asked : asked + 9], "  …", "", *good[dial : dial + 4], "  …"]),
        "joint": "\n".join(good[first_of("JOINT", good) : good.index("WORKED OUT") - 1]),
        "contact": "\n".join(drawn[first_of("CONTACT", drawn) : drawn.index("WORKED OUT") - 1]),
        "worked": "\n".join(good[good.index("WORKED OUT") : good.index("", good.index("WORKED OUT"))]),
        "index": "\n".join([*table[2:26], "  …", *table[-5:]]),
        "vary": "\n".join([*what_if[1:15], "  …", *what_if[moved - 1 : moved + 5], "  …"]),
        "vary-range": "\n".join([*range_of[1 : first_of("WHAT WAS ASKED", range_of) - 1], "  …"]),
        "drawer": "\n".join([*many[:2], "…", *many[passed : passed + 2], "…", *many[-2:]]),
        "remedy": "\n".join([*would_do[1 : outside + 8], "  …"]),
        "slips": slips(),
        "mistakes": mistakes(),
    }


@cache
def pages_with_excerpts() -> dict[str, str]:
    """The pages that hold excerpts, README first, with these put in; each stands in one of them, once."""
    texts = {page: (ROOT / page).read_text(encoding="utf-8") for page in EXCERPTS_IN}
    for name, excerpt in excerpts().items():
        fence = re.compile(rf"(<!-- excerpt: {name} -->\n```\n).*?(```\n)", re.S)
        assert 1 == sum(len(fence.findall(text)) for text in texts.values()), name
        texts = {page: fence.sub(lambda m, e=excerpt: f"{m[1]}{e}\n{m[2]}", text) for page, text in texts.items()}
    return texts


def write() -> None:
    """Write golden files and README excerpts anew."""
    for name, text in {**reports(), **drawings()}.items():
        (HERE / name).write_text(text, encoding="utf-8")
    for page, text in pages_with_excerpts().items():
        (ROOT / page).write_text(text, encoding="utf-8")


if __name__ == "__main__":
    write()
