"""What the template lays out: pages and their pieces as plain records, every number already in words."""

from __future__ import annotations

from setupcheck.record import record
from setupcheck.report.index_table import OnPaper
from setupcheck.report.pictures import Picture
from setupcheck.report.sheet.boxes import Row
from setupcheck.report.sheet.words import Said


@record
class Caution:
    """A caution once, with where it applies and whether somebody signed for it."""

    text: str
    where: str
    state: str
    stop: bool


@record
class Trouble:
    """A finding that is not passed, or several that wait for the same thing, and what to do about it.

    places  (path in the job, its line in the file) of each
    """

    verdict: str
    rule: str
    places: tuple[tuple[str, int], ...]
    message: str
    remedy: str


@record
class Step:
    """One line of the route."""

    op: int
    machine: str
    held: tuple[Said, ...]
    cuts: tuple[str, ...]


@record
class Share:
    """What one operation adds to one requirement, and its largest single cause."""

    title: str
    part: str
    mostly: str
    worst: str
    room: str
    inside: bool


@record
class Operation:
    """One page: everything that one operation needs at the machine."""

    op: int
    machine: str
    note: str
    toward: str
    cautions: tuple[Caution, ...]
    general: bool
    troubles: tuple[Trouble, ...]
    held: tuple[Said, ...]
    head: tuple[Said, ...]
    divide: tuple[Said, ...]
    cuts: tuple[Said, ...]
    passes: tuple[tuple[str, list[tuple[str, str]]], ...]
    joined: tuple[Said, ...]
    worked: tuple[Said, ...]
    heating: tuple[str, ...]
    boxes: tuple[Row, ...]
    shares: tuple[Share, ...]
    checks: tuple[str, ...]
    pictures: tuple[Picture, ...]


@record(eq=False)
class Sheet:
    """All pages."""

    title: str
    job: str
    revision: str
    file: str
    sha256: str
    version: str
    rule_book: str
    rule_hash: str
    verdict: str
    limited: str
    counts: str
    units: str
    room: str
    parts: tuple[Said, ...]
    troubles: tuple[Trouble, ...]
    unsigned: int
    stopped: str
    cautions: tuple[Caution, ...]
    data: tuple[Said, ...]
    asked: tuple[str, ...]
    route: tuple[Step, ...]
    incoming: tuple[Row, ...]
    operations: tuple[Operation, ...]
    tables: tuple[OnPaper, ...]
    texts: tuple[tuple[str, str], ...]
    finished: tuple[Row, ...]
    grid: bool
    overview: tuple[Picture, ...]
    transfers: tuple[Picture, ...]
    stacks: tuple[Picture, ...]
    more_stacks: int
    not_computed: tuple[str, ...]
    sign_off: tuple[str, ...]
    mark: str
    closing: str
