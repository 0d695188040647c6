"""The kinds of part a first job file can be written for, and the rounds it takes. Lengths mm."""

from __future__ import annotations

from collections.abc import Callable
from typing import TYPE_CHECKING

from setupcheck.record import record
from setupcheck.starting import bush, gear, hub, plate, ring, wheel
from setupcheck.starting.answers import Answers, Question
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
            "cut gap by gap on a leaned head, bored true to its register, joined to a spindle",
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


@record(eq=False)
class Started:
    """A new job file as text, and its review."""

    text: str
    review: Review


def start(answers: Answers, *, file: str, made_by: str) -> Started:
    """The job file of some answers, its figures settled by its own reviews.

    file  name that messages give;  made_by  the command, for a comment
    Raises: SetupcheckError where the answers give no readable plan.
    """
    from setupcheck.flow import review
    from setupcheck.jobfile.reading import read_job_text

    kind, figures = KINDS[answers.kind], Figures()
    joint = kind.joint if answers.values.get("join", "shrink") in ("shrink", "press") else None
    for _ in range(ROUNDS):
        draft = kind.write(answers, figures, made_by)
        figures = settled(review(read_job_text(draft, file)), figures, answers, bore=joint)
    text = kind.write(answers, figures, made_by)
    return Started(text, review(read_job_text(text, file)))
