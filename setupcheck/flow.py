"""From a job file to its review: read, walk the route, judge every number by the rule book. The public way in.

>>> from setupcheck.shipped import shipped
>>> found = review(shipped("jobs") / "index-plate.yaml")
>>> found.verdict, found.evaluation.counts["fail"], found.evaluation.counts["open"]
('pass', 0, 0)

A finding says which rule judged what, where and how far it is from its limit:

>>> tight = vary(found, {"setups.30.hold.centre.runout": "3 thou"}).after
>>> tight.verdict, sorted({finding.rule for finding in tight.evaluation.findings if finding.verdict == "fail"})
('fail', ['STACK-001'])

A requirement stands under its own name; its worst case has two ends [mm]:

>>> name = next(key for key, one in tight.results.items() if one.margin is not None and one.margin < 0.0)
>>> name
'position.plate-holes.plate-bore'
>>> f"{tight.results[name].combined.worst.high:.4f} mm, allowed {tight.results[name].stack.high:.4f} mm"
'0.1194 mm, allowed 0.0508 mm'

Gates are what the dial may show at each hold, with all else as planned [mm]:

>>> gate = next(g for g in found.gates if g.op == 30)
>>> gate.on, gate.reading > gate.planned
('bore', True)
"""

from __future__ import annotations

import os
from collections.abc import Callable, Mapping, Sequence
from dataclasses import field
from functools import cache, partial
from pathlib import Path
from typing import TYPE_CHECKING

from setupcheck.jobfile.reading import LoadedJob, read_job
from setupcheck.quantities.book import Book, Known, Open, Scope
from setupcheck.quantities.facts import UnknownFact, facts_of
from setupcheck.quantities.gates import Gate, gates
from setupcheck.quantities.judged import Result
from setupcheck.quantities.route import walk
from setupcheck.quantities.scopes import scopes
from setupcheck.quantities.shop import Floor
from setupcheck.quantities.tables import TABLES
from setupcheck.record import record
from setupcheck.rulebook import (
    Answer,
    Evaluation,
    Fact,
    RuleBook,
    Unknown,
    Verdict,
    Waiver,
    evaluate,
    load_rulebook,
    verdict,
)
from setupcheck.shipped import shipped

if TYPE_CHECKING:
    from setupcheck.division.results import Reduced
    from setupcheck.jobfile.changing import Change
    from setupcheck.quantities.against import Against
    from setupcheck.quantities.device_record import DeviceRecord
    from setupcheck.quantities.mending import Mended
    from setupcheck.quantities.own_values import HouseRows, HouseUse, RecordUse
    from setupcheck.quantities.remedies import Remedy
    from setupcheck.quantities.teeth_read import TeethRead
    from setupcheck.rulebook.house import House


@record(eq=False)
class Review:
    """Everything one review found.

    results   combined stacks by instance, those that could be computed;  remedies likewise, for stacks outside their limit
    rulebook  the shipped one, or that of the house file
    devices   the shop's own record of its devices, and where the job names what stands in it
    of_house  house values that were taken, and where

    >>> from setupcheck import Review, example, review
    >>> found = review(example("index-plate"))
    >>> isinstance(found, Review), found.verdict, found.evaluation.counts["fail"]
    (True, 'pass', 0)
    """

    loaded: LoadedJob
    floor: Floor
    book: Book
    rulebook: RuleBook
    house: House | None
    evaluation: Evaluation
    verdict: Verdict
    results: Mapping[str, Result]
    gates: tuple[Gate, ...]
    remedies: Mapping[str, Remedy] = field(default_factory=dict)
    on: str | None = None
    devices: RecordUse | None = None
    of_house: tuple[HouseUse, ...] = ()


@cache
def rules() -> RuleBook:
    """The shipped rule book, read once."""
    return load_rulebook(shipped("rules"), quantities={q.name: q for q in TABLES})


def load_job(path: str | Path) -> LoadedJob:
    """Read and check a job file.

    Raises: JobError with every problem of the file, each with its line.

    >>> from setupcheck import example, load_job
    >>> [setup.op for setup in load_job(example("index-plate")).job.setups]
    [10, 20, 30, 40]
    """
    return read_job(path)


def review(
    job: LoadedJob | str | Path,
    *,
    house: House | str | Path | None = None,
    on: str | None = None,
    devices: DeviceRecord | str | Path | None = None,
) -> Review:
    """Judge a job.

    house    a shop's house file, as its path or as `read_house` returned it; one that lies beside the job is not looked for
    on       the day it is judged (ISO date), which waivers with an end need
    devices  file of a shop's own record of its devices, whose limits stand in for typical values; before the house file's own
    Raises: JobError, RuleBookError.

    >>> from setupcheck import example, review
    >>> review(example("index-plate")).verdict
    'pass'
    """
    loaded = job if isinstance(job, LoadedJob) else load_job(job)
    own = read_house(house) if house is not None else None
    uses: RecordUse | None = None
    of_house: tuple[HouseUse, ...] = ()
    if devices is not None or own is not None:
        loaded, uses, of_house = with_own(loaded, devices, own)
    floor, book = prepare(loaded)
    book_of_rules = own.rulebook if own is not None else rules()
    waivers, answers = _waivers(loaded), _answers(loaded)
    found = evaluate(book_of_rules, book, facts_on(floor), house=own, waivers=waivers, answers=answers, on=on)
    results = stack_results(book)
    return Review(
        loaded,
        floor,
        book,
        book_of_rules,
        own,
        found,
        verdict(found.findings, found.cautions),
        results,
        tuple(gates(book.scopes, list(results.items()))),
        _remedies(loaded, floor, results),
        on,
        uses,
        of_house,
    )


@record(eq=False)
class Varied:
    """A job before and after some of its entries were replaced or added.

    >>> from setupcheck import Change, Varied, example, vary
    >>> found = vary(example("index-plate"), [Change("setups.30.hold.centre.runout", "3 thou")])
    >>> isinstance(found, Varied), found.before.verdict, found.after.verdict, found.changes[0].value
    (True, 'pass', 'fail', '3 thou')
    """

    before: Review
    after: Review
    changes: tuple[Change, ...]


def vary(
    job: LoadedJob | Review | str | Path,
    changes: Sequence[Change] | Mapping[str, str | int | float],
    *,
    house: House | str | Path | None = None,
    on: str | None = None,
    devices: DeviceRecord | str | Path | None = None,
) -> Varied:
    """Judge a job as it stands and with entries replaced or added, all at once. The file is not written to.

    changes  as records, or as a mapping of path to value in the job file's notation, {"setups.30.hold.stop.error": "20 um"}
    job  a Review has been made with the same house file, day and record: it is not made again
    Random draws are named after their causes, so that nothing moves which the changes do not reach.
    Raises: JobError for the file; JobError for the changes, each problem saying so; RuleBookError.

    >>> from setupcheck import example, vary
    >>> vary(example("index-plate"), {"setups.30.hold.centre.runout": "3 thou"}).after.verdict
    'fail'
    """
    from setupcheck.jobfile.changing import changed, changes_of, from_set  # no review needs it

    if isinstance(changes, Mapping):
        changes = changes_of(changes)
    house, devices = _read_once(house, devices)
    before = job if isinstance(job, Review) else review(job, house=house, on=on, devices=devices)
    with from_set(changes):  # also what shows only along the route
        after = review(changed(before.loaded, changes), house=house, on=on, devices=devices)
    return Varied(before, after, tuple(changes))


def mend(
    job: LoadedJob | str | Path,
    *,
    of: str | None = None,
    house: House | str | Path | None = None,
    on: str | None = None,
    devices: DeviceRecord | str | Path | None = None,
) -> tuple[Review, Mended]:
    """Judge a job, and find what would bring it inside: entries, datums, orders; or what is good enough already.

    of  one requirement alone, `require[2]`
    Raises: JobError; SetupcheckError for a requirement that is not there; RuleBookError.
    """
    from setupcheck.jobfile.editing import Edit, edited  # no review needs them
    from setupcheck.quantities.mending import Judged, mended
    from setupcheck.quantities.own_values import in_force

    own, devices = _read_once(house, devices)
    before = review(job, house=own, on=on, devices=devices)

    def again(loaded: LoadedJob) -> LoadedJob:
        return with_own(loaded, devices, own)[0] if devices is not None or own is not None else loaded

    def judge(edits: Sequence[Edit]) -> Judged:
        after = review(edited(before.loaded, edits), house=own, on=on, devices=devices)
        return Judged(
            after.verdict, _counts(after), frozenset((line.op, line.id) for line in after.evaluation.cautions)
        )

    now = Judged(before.verdict, _counts(before), frozenset((c.op, c.id) for c in before.evaluation.cautions))
    gives = partial(in_force, *_own(devices, own))
    return before, mended(before.loaded, before.floor, before.results, now, judge, again, gives, of=of)


def _counts(found: Review) -> dict[tuple[str, str], int]:
    """How many findings each rule has at each level."""
    counts: dict[tuple[str, str], int] = {}
    for one in found.evaluation.findings:
        counts[one.rule, one.verdict] = counts.get((one.rule, one.verdict), 0) + 1
    return counts


def with_own(
    loaded: LoadedJob, devices: DeviceRecord | str | Path | None, house: House | None
) -> tuple[LoadedJob, RecordUse | None, tuple[HouseUse, ...]]:
    """The job with what a record and a house file say of the shop's devices; the house's own record where no other is given.

    Raises: JobError with every problem of the record.
    """
    from setupcheck.quantities.own_values import with_own as filled  # few jobs have any

    return filled(loaded, *_own(devices, house))


def _own(devices: DeviceRecord | str | Path | None, house: House | None) -> tuple[DeviceRecord | None, HouseRows]:
    """The record that acts and the values of the house file."""
    from setupcheck.quantities.device_record import DeviceRecord, read_record
    from setupcheck.quantities.own_values import HouseRow, HouseRows

    found = read_record(devices) if isinstance(devices, str | Path) else devices
    if found is None and house is not None and isinstance(house.devices, DeviceRecord):
        found = house.devices
    rows = tuple(HouseRow(v.device, v.what, v.value) for v in house.values) if house is not None else ()
    return found, HouseRows(house.name if house is not None else "", rows)


def read_devices(path: str | Path) -> DeviceRecord:
    """A shop's record of its devices, for whoever reviews many times.

    Raises: JobError with every problem of the record.
    """
    from setupcheck.quantities.device_record import read_record

    return read_record(path)


def _read_once(
    house: House | str | Path | None, devices: DeviceRecord | str | Path | None
) -> tuple[House | None, DeviceRecord | None]:
    """House file and record as read, for whoever reviews many times."""
    if isinstance(devices, str | Path):
        devices = read_devices(devices)
    return read_house(house) if house is not None else None, devices


HOUSE_FILE = "setupcheck-house.yaml"
"""Name by which the command finds a house file beside the job."""


def house_beside(job: str | Path) -> Path | None:
    """The house file beside a job file, or None; a link that leads nowhere counts, so that it is not passed over in silence."""
    found = Path(job).parent / HOUSE_FILE
    return found if os.path.lexists(found) else None


def read_house(house: House | str | Path, *, on: str | None = None) -> House:
    """Read a shop's house file; one that has been read is returned as it is.

    on  day on which it is checked (ISO date): a waiver that has ended by then is an error
    Raises: HouseError with everything that is wrong with it and with its record of devices.
    """
    if not isinstance(house, str | Path):
        return house
    from setupcheck.quantities.device_record import read_record
    from setupcheck.quantities.judgeable import judgeable
    from setupcheck.quantities.typical import WHATS, table
    from setupcheck.rulebook.house_file import Devices, load_house

    quantities, words = judgeable()
    shipped_values = {key: row.value for key, row in table().items()}
    usual = {key: (row.best, row.worst) for key, row in table().items()}
    devices = Devices(WHATS, shipped_values, read_record, usual)
    return load_house(Path(house), rules(), quantities=quantities, words=words, devices=devices, on=on)


@record(eq=False)
class ReadBack:
    """A division test read back: the job, the teeth it is of, what it says, how that stands to the plan, and its file's name.

    house  the house file whose values stand in the plan, if one does

    >>> import os, tempfile
    >>> from setupcheck import ReadBack, example, read_back
    >>> with tempfile.TemporaryDirectory() as folder:
    ...     path = os.path.join(folder, "test.csv")
    ...     with open(path, "w", encoding="utf-8") as file:
    ...         rows = file.write("tooth,deviation_arcsec\\n1,0\\n19,3\\n37,6\\n55,3\\n1,0\\n")
    ...     read = read_back(example("rotator-worm-wheel"), path)
    >>> isinstance(read, ReadBack), read.of.name, read.of.count
    (True, 'wheel.teeth', 72)
    """

    loaded: LoadedJob
    of: TeethRead
    reduced: Reduced
    against: Against | Open
    file: str
    house: House | None = None


def read_back(
    job: LoadedJob | str | Path,
    readings: str | Path,
    *,
    of: str | None = None,
    turns_with_work: bool = False,
    instrument: float | None = None,
    house: House | str | Path | None = None,
    devices: DeviceRecord | str | Path | None = None,
    progress: Callable[[int], None] | None = None,
) -> ReadBack:
    """Reduce the readings of a division test with what the job says of the teeth.

    of               `part.surface` of the teeth, where the job has more than one;  progress  bytes of the file read so far
    turns_with_work  stations are turns of the work, as for an instrument that rides on it
    instrument       expanded uncertainty of the angle standard, k = 2 [rad]; without it nothing is judged
    house, devices   a shop's house file and its own record of its devices, whose values stand in the plan, as for `review`
    Raises: JobError; SetupcheckError for the readings; RuleBookError.

    >>> from setupcheck import SetupcheckError, example, read_back
    >>> try:
    ...     read_back(example("rotator-worm-wheel"), "nowhere.csv")
    ... except SetupcheckError as wrong:
    ...     print(str(wrong).split(". ")[0])
    nowhere.csv: there is no such file
    """
    from setupcheck.division.readings import read_test
    from setupcheck.quantities.against import against
    from setupcheck.quantities.teeth_read import reduced, teeth_of

    loaded = job if isinstance(job, LoadedJob) else load_job(job)
    own = read_house(house) if house is not None else None
    if devices is not None or own is not None:
        loaded = with_own(loaded, devices, own)[0]
    floor, book = prepare(loaded)
    teeth = teeth_of(floor, of)
    found = read_test(readings, progress=progress)
    test = reduced(found, teeth, turns_with_work=turns_with_work)
    plan = against(book, floor, test, teeth.name, instrument=instrument)
    return ReadBack(loaded, teeth, test, plan, found.file, own)


def _remedies(loaded: LoadedJob, floor: Floor, results: Mapping[str, Result]) -> Mapping[str, Remedy]:
    """Remedies are looked for only where a stack is outside its limit."""
    if all(r.margin is None or r.margin >= 0.0 for r in results.values()):
        return {}
    from setupcheck.quantities.remedies import remedies

    return remedies(loaded, floor, results)


def prepare(loaded: LoadedJob) -> tuple[Floor, Book]:
    """The walked route and its book of quantities.

    Raises: JobError for what shows only along the route.
    """
    floor = walk(loaded)
    return floor, Book(TABLES, scopes(floor), inches=loaded.job.units == "in")


def facts_on(floor: Floor) -> Callable[[Scope, str], Fact]:
    """What rules ask of a walked route beside its numbers; every rule asks for the same few."""
    return cache(partial(_fact, floor))


def _fact(floor: Floor, scope: Scope, name: str) -> Fact:
    found = facts_of(floor, scope, name)
    return Unknown(found.path, found.of, found.never) if isinstance(found, UnknownFact) else found


def stack_results(book: Book) -> dict[str, Result]:
    """The combined stacks by instance, those that have a value."""
    found = {scope.key: book.get("stack.combined", scope) for scope in book.instances("stack")}
    return {key: a.value for key, a in found.items() if isinstance(a, Known) and isinstance(a.value, Result)}


def _waivers(loaded: LoadedJob) -> list[Waiver]:
    return [
        Waiver(w.rule, w.at, w.reason, w.until or "", f"waive[{i + 1}]", loaded.line(f"waive[{i + 1}]"))
        for i, w in enumerate(loaded.job.waive)
    ]


def _answers(loaded: LoadedJob) -> list[Answer]:
    return [
        Answer(c.caution, c.op, c.by, c.note or "", f"checked[{i + 1}]", loaded.line(f"checked[{i + 1}]"))
        for i, c in enumerate(loaded.job.checked)
    ]
