"""The kinds of part a first job file can be written for, and the rounds it takes. Lengths mm."""

from __future__ import annotations

import shlex
from collections.abc import Callable, Mapping
from typing import TYPE_CHECKING

from setupcheck.errors import SetupcheckError, printable
from setupcheck.notation import nearest
from setupcheck.record import record
from setupcheck.starting import bush, gear, hub, plate, ring, wheel
from setupcheck.starting.answers import Answers, Question
from setupcheck.starting.checking import modeline, to_check
from setupcheck.starting.figures import Figures, settled

if TYPE_CHECKING:
    from setupcheck.flow import Review

ROUNDS = 4
"""Drafts before the last: fit, heat and insert, gauge, limits. Source: our choice; each needs what the one before settled."""


@record
class Kind:
    """One kind of part.

    says  one line for a list;  title, job  what stands where nothing is answered
    joint  answer that holds the bore of its joint, where it has one that is settled by the review
    """

    name: str
    says: str
    title: str
    job: str
    questions: Callable[[], tuple[Question, ...]]
    write: Callable[[Answers, Figures, str], str]
    joint: str | None = None


KINDS: dict[str, Kind] = {
    kind.name: kind
    for kind in (
        Kind(
            "worm-wheel",
            "cut gap by gap on a leaned head, joined to its spindle",
            "Worm wheel",
            "WW-001",
            wheel.questions,
            wheel.write,
            "bore",
        ),
        Kind("spur-gear", "turned and cut on one mandrel", "Spur gear", "SG-001", gear.questions, gear.write),
        Kind(
            "coupling-hub",
            "finished in one holding and shrunk on its shaft",
            "Coupling hub",
            "CH-001",
            hub.questions,
            hub.write,
            "bore",
        ),
        Kind(
            "bearing-ring",
            "heated onto a seat ground between centres",
            "Bearing ring on its seat",
            "BR-001",
            ring.questions,
            ring.write,
        ),
        Kind(
            "index-plate", "a circle of holes on a rotary table", "Index plate", "IP-001", plate.questions, plate.write
        ),
        Kind(
            "bushing",
            "pressed into its eye and bored in place",
            "Bush",
            "BU-001",
            bush.questions,
            bush.write,
            "outside",
        ),
    )
}
"""By their names."""


def kind_of(text: str) -> Kind:
    """A kind by its name.

    Raises: SetupcheckError with the nearest and a list.
    """
    word = text.strip()
    if word in KINDS:
        return KINDS[word]
    near = nearest(word, KINDS)
    said = f"'{printable(word[:60])}' is no kind of part here. {f'Did you mean {near}? ' if near else ''}There are:"
    raise SetupcheckError("\n".join([said, *(f"  {kind.name:<22}{kind.says}" for kind in KINDS.values())]))


def command_of(kind: Kind, units: str, texts: Mapping[str, str]) -> str:
    """The command that begins the same file again, title and job number apart, in one line.

    >>> command_of(KINDS["bushing"], "mm", {"bore": "30 H7"})
    "setupcheck new FILE --kind bushing --units mm --bore '30 H7' --yes"
    """
    options = " ".join(f"--{name} {shlex.quote(printable(' '.join(text.split())))}" for name, text in texts.items())
    return f"setupcheck new FILE --kind {kind.name} --units {units} {options} --yes"


@record(eq=False)
class Started:
    """A new job file as text, and its review."""

    text: str
    review: Review


def start(answers: Answers, *, file: str, made_by: str, schema: bool = False) -> Started:
    """The job file of some answers, its figures settled by its own reviews.

    file    name that messages give;  made_by  the command, for a comment
    schema  whether job.schema.json lies beside the file
    Raises: SetupcheckError where the answers give no readable plan.
    """
    from setupcheck.flow import review
    from setupcheck.jobfile.reading import read_job_text

    kind, figures = KINDS[answers.kind], Figures()
    joint = kind.joint if answers.values.get("join", "shrink") != "slide" else None
    found: Review | None = None
    for _ in range(ROUNDS):
        found = review(read_job_text(kind.write(answers, figures, made_by), file))
        before, figures = figures, settled(found, figures, answers, bore=joint)
        if figures == before:
            break
    cautions = found.evaluation.cautions if found is not None else ()
    text = modeline(schema=schema) + kind.write(answers, figures, made_by) + to_check(cautions)
    return Started(text, review(read_job_text(text, file)))
