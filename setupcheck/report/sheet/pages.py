"""What stands on each page of the sheet, as plain records that the template lays out."""

from __future__ import annotations

from collections.abc import Callable

from setupcheck.flow import ReadBack, Review
from setupcheck.jobfile.setups import Setup
from setupcheck.notation import show
from setupcheck.quantities.book import Known
from setupcheck.quantities.index_table import IndexTable
from setupcheck.quantities.scopes import stack_of
from setupcheck.report.causes import cause_in_parts
from setupcheck.report.heating_plan import heating_plans_as_data
from setupcheck.report.index_table import OnPaper, on_paper
from setupcheck.report.insert import inserts
from setupcheck.report.insert import readings as ground
from setupcheck.report.joint import joints
from setupcheck.report.pictures import Picture, pictures
from setupcheck.report.remedies import remedy_in_words
from setupcheck.report.sheet.boxes import Boxes
from setupcheck.report.sheet.checks import checks, sign_off
from setupcheck.report.sheet.records import Caution, Operation, Share, Sheet, Step, Trouble
from setupcheck.report.sheet.showing import paper
from setupcheck.report.sheet.words import ROLE, Said, Words
from setupcheck.report.text import counts, how_far, limits_in_words
from setupcheck.report.uncomputed import in_lines, uncomputed
from setupcheck.report.wording import finer, is_the_entry, title_of, unit_of, waiting_alike
from setupcheck.report.worked_out import worked_out
from setupcheck.rulebook.records import CautionLine, Finding

DATUM = {
    "stock": "stock, as the blank brings it",
    "made": "made in op {}",
    "rough": "rough, from op {}",
    "same-holding": "cut in this same holding",
    "not-yet-made": "NOT MADE YET",
    "cut-away": "CUT AWAY by then",
}
"""How a datum is found when it is held on."""


STOPPED = {
    "fail": "Not for the machine yet: this plan does not meet what was asked.",
    "open": "Not for the machine yet: something is missing, and nobody can tell whether this plan meets what was asked.",
}
"""What stands large under a verdict that is no pass."""

MOST_STACKS = 5
"""Requirements drawn on the sheet, the tightest ones. Source: our choice, two pages of it; all stand on the cover as text."""

MOST_PLACES = 2
"""Operations at which a caution still is their own and stands on their pages; one of more setups stands on the page of cautions.
Source: our choice, so that what is special to a setup is not lost among what always holds."""


def sheet_of(found: Review, read: ReadBack | None = None) -> Sheet:
    """Everything that goes on the sheet of a job."""
    from setupcheck import __version__

    job, loaded, boxes = found.loaded.job, found.loaded, Boxes(found)
    drawn = pictures(found, read)
    operations = tuple(_operation(found, setup, boxes, drawn) for setup in job.setups)
    used = {picture.name for one in operations for picture in one.pictures}
    stacks, more = _tightest(found, drawn)
    transfers = tuple(p for name, p in drawn.items() if name == "datums")
    used |= {picture.name for picture in transfers}
    used |= {f"part-{name}" for name in set(job.parts) - set(found.floor.part_of.values())}  # bought: nothing is cut
    used |= {f"hold-{setup.op}" for setup in job.setups if setup.keeps is not None}  # drawn at the operation they keep
    overview = tuple(p for name, p in drawn.items() if not name.startswith("stack-") and name not in used)
    left = [s for s in found.evaluation.cautions if s.severity == "stop-and-check" and not s.answered]
    return Sheet(
        title=paper(job.title),
        job=paper(job.job or "", 60),
        revision=paper(job.revision or "", 60),
        file=paper(loaded.file, 80),
        sha256=loaded.sha256,
        version=__version__,
        rule_book=found.rulebook.version,
        rule_hash=found.rulebook.sha256[:16],
        verdict=found.verdict.upper(),
        limited=how_far(found),
        counts=counts(found),
        units="inch" if found.book.inches else "mm",
        room=f"{job.room:g} degC",
        parts=(
            *_house(found),
            *(
                Said(paper(name, 60), paper(part.material or "material not stated", 60))
                for name, part in job.parts.items()
            ),
        ),
        troubles=tuple(_troubles(found)),
        unsigned=len(left),
        stopped=STOPPED.get(found.verdict, ""),
        cautions=_cautions(found),
        data=_data(found, op=False),
        asked=tuple(_asked(found)),
        route=tuple(_step(found, setup) for setup in job.setups),
        incoming=tuple(boxes.incoming()),
        operations=operations,
        tables=tuple(_tables(found)),
        texts=tuple(_texts(found)),
        finished=tuple(boxes.finished()),
        grid=job.mesh is not None,
        overview=overview,
        transfers=transfers,
        stacks=stacks,
        more_stacks=more,
        not_computed=tuple(in_lines(uncomputed(loaded))),
        sign_off=sign_off(found),
        mark=_mark(found),
        closing=found.rulebook.closing_line,
    )


def _mark(found: Review) -> str:
    """Job and file in a few plain characters, for the edge of every page: they stand inside the style sheet there."""
    job = "".join(c if c.isascii() and (c.isalnum() or c in " .-_/") else "-" for c in (found.loaded.job.job or ""))
    return " ".join(f"{job[:30]} file {found.loaded.sha256[:8]}".split())


def _tightest(found: Review, drawn: dict[str, Picture]) -> tuple[tuple[Picture, ...], int]:
    """Drawings of the requirements with the least room left, in the order of the job, and how many there are besides."""
    shares: list[tuple[float, int, str]] = []
    for number, scope in enumerate(found.book.instances("stack"), 1):
        result = found.results.get(scope.key)
        if f"stack-{number}" in drawn:
            left = result.margin_share if result is not None else -1.0
            shares.append((left if left is not None else 1.0, number, f"stack-{number}"))
    chosen = sorted(shares)[:MOST_STACKS]
    return tuple(drawn[name] for _, _, name in sorted(chosen, key=lambda one: one[1])), len(shares) - len(chosen)


def _troubles(found: Review, op: int | None = None) -> list[Trouble]:
    """What is not passed, in the whole job or in one operation."""
    shown = [f for f in found.evaluation.findings if f.verdict != "pass" and op in (None, f.op)]
    return [
        Trouble(
            alike[0].verdict,
            rules,
            tuple(dict.fromkeys((paper(f.at or "job", 80), f.line) for f in alike)),
            paper(_said(alike[0]), 400),
            paper(_do(found, alike[0]), 400),
        )
        for rules, alike in waiting_alike(shown)
    ]


def _said(finding: Finding) -> str:
    """The message, and what a house file did to the rule."""
    return f"{finding.message}; by {finding.house}" if finding.house else finding.message


def _house(found: Review) -> tuple[Said, ...]:
    """The house file that acts, as a line of the cover."""
    house = found.house
    if house is None:
        return ()
    return (Said("House file", f"{paper(house.name, 60)}: {paper(house.file, 80)}, sha256 {house.sha256[:16]}"),)


def _do(found: Review, finding: Finding) -> str:
    """What to do about a finding, the entry itself named beside it; empty where the rule book knows nothing."""
    if is_the_entry(finding):
        return "Write it"
    if finding.verdict == "open" and finding.missing:
        return f"Fill {', '.join(finding.missing[:4])}"
    if finding.verdict == "waived":
        return f"Waived: {finding.waiver}"
    return remedy_in_words(found, finding) or ""


def _cautions(found: Review) -> tuple[Caution, ...]:
    """Every caution once, stop and check first, with all its operations."""
    alike: dict[tuple[str, str], list[CautionLine]] = {}
    for line in found.evaluation.cautions:
        alike.setdefault((line.id, line.state), []).append(line)
    every = [_caution(lines[0], lines) for lines in alike.values()]
    return tuple(sorted(every, key=lambda c: not c.stop))


def _caution(first: CautionLine, lines: list[CautionLine]) -> Caution:
    ops = [str(line.op) for line in lines if line.op is not None]
    because = f" ({paper(first.because, 200)})" if first.because else ""
    where = f"op {', '.join(ops)}" if ops else "whole job"
    return Caution(f"{first.text}{because}", where, paper(first.state, 80), first.severity == "stop-and-check")


def _data(found: Review, *, op: bool) -> tuple[Said, ...]:
    """Lines that were worked out, those of operations or the others."""
    lines = []
    for told in worked_out(found):
        about, _, text = told.partition(": ")
        if told.startswith("op ") == op:
            lines.append(Said(about, text))
    return tuple(lines)


def _asked(found: Review) -> list[str]:
    """Each requirement with its figure and its limit, in the order of the job."""
    lines = []
    for scope in found.book.instances("stack"):
        result = found.results.get(scope.key)
        if result is None:
            lines.append(f"{title_of(scope)}: cannot tell")
            continue
        unit, digits = unit_of(found.book, scope)
        lines.append(f"{title_of(scope)} {limits_in_words(result, unit, digits)}")
    return [paper(line, 200) for line in lines]


def _step(found: Review, setup: Setup) -> Step:
    """One setup as a line of the route."""
    words = Words(found)
    held = []
    if setup.hold is not None:
        for step, role in ROLE.items():
            entry = getattr(setup.hold, step)
            if entry is not None:
                held.append(Said(role, f"{paper(entry.on, 40)}, {_datum(found, f'{setup.op}/{step}')}"))
    elif setup.keeps is not None:
        held.append(Said("As before", f"the holding of op {setup.keeps}, never opened"))
    if setup.join is not None:
        held.append(
            Said("Joined", f"{paper(setup.join.outer, 60)} on {paper(setup.join.inner, 60)} by {setup.join.by}")
        )
    cuts = tuple(f"{said.about}: {said.text}" for said in words.goals(setup))
    return Step(setup.op, _machine(setup), tuple(held), cuts)


def _datum(found: Review, key: str) -> str:
    """In what state a surface is when it is held on; key  `40/centre`."""
    datum = found.floor.datums.get(key)
    if datum is None:
        return "state not known"
    if datum.state == "made" and datum.made_at is None:
        return "as bought"
    return DATUM.get(datum.state, datum.state).format(datum.made_at)


def _machine(setup: Setup) -> str:
    return paper(setup.machine or ("joining" if setup.join is not None else "machine not stated"), 60)


def _operation(found: Review, setup: Setup, boxes: Boxes, drawn: dict[str, Picture]) -> Operation:
    words = Words(found)
    scope = next(s for s in found.book.instances("setup") if s.key == str(setup.op))
    ways = {1: "+z end towards the tool", -1: "-z end towards the tool"}
    mine = [c for c in found.evaluation.cautions if c.op == setup.op]
    mine.sort(key=lambda c: (c.severity != "stop-and-check", bool(c.because)))
    own = [c for c in mine if c.severity == "stop-and-check" or _places(found, c.id) <= MOST_PLACES]
    about = f"op {setup.op}, "
    plans = [plan for plan in heating_plans_as_data(found) if plan["op"] == setup.op] if setup.join else []
    steps = [str(step) for plan in plans for step in _list(plan["steps"])]
    keeps = [Said("Held", f"as in op {setup.keeps}, never opened since")] if setup.keeps is not None else []
    return Operation(
        op=setup.op,
        machine=_machine(setup),
        note=paper(setup.note or "", 300),
        toward=ways.get(setup.looks_at_tool or 0, ""),
        cautions=tuple(_caution(c, [c]) for c in own),
        general=len(own) < len(mine),
        troubles=tuple(_troubles(found, setup.op)),
        held=(
            *keeps,
            *(words.hold(setup.hold) if setup.hold is not None else []),
            *(words.travel(setup.travel) if setup.travel is not None else []),
            *([words.turning(setup.turning)] if setup.turning is not None else []),
        ),
        head=tuple(words.head(setup.head)) if setup.head is not None else (),
        divide=tuple(words.divide(setup.divide, scope)) if setup.divide is not None else (),
        cuts=tuple(words.cuts(setup)),
        passes=tuple(words.passes(setup)),
        joined=tuple(words.join(setup.join)) if setup.join is not None else (),
        worked=tuple(
            Said(one.about.removeprefix(about), one.text)
            for one in _data(found, op=True)
            if one.about.startswith(about) and one.about != f"{about}index"  # stands under the dividing
        ),
        heating=tuple(steps),
        boxes=tuple(boxes.of_setup(setup)),
        shares=tuple(_shares(found, setup.op)),
        checks=tuple(checks(found, setup)),
        pictures=tuple(_pictures(found, setup, drawn)),
    )


def _places(found: Review, caution: str) -> int:
    return sum(c.id == caution for c in found.evaluation.cautions)


def _list(value: object) -> list[object]:
    return list(value) if isinstance(value, list | tuple) else []


def _pictures(found: Review, setup: Setup, drawn: dict[str, Picture]) -> list[Picture]:
    """The holding, unless it is that of an operation before, the head and the heat."""
    hold = [] if setup.keeps is not None else [f"hold-{setup.op}"]
    names = [*hold, f"head-{setup.op}", f"heating-{setup.op}"]
    return [drawn[name] for name in names if name in drawn]


def _shares(found: Review, op: int) -> list[Share]:
    """Every requirement that this operation has a part in, the largest part of its limit first."""
    rows: list[tuple[float, Share]] = []
    for scope in found.book.instances("stack"):
        result = found.results.get(scope.key)
        if result is None:
            continue
        own = [s for s in result.combined.shares if s.cause.op == op and s.worst > 0.0]
        if not own:
            continue
        mine, most = sum(s.worst for s in own), max(own, key=lambda s: s.worst)
        unit, digits = unit_of(found.book, scope)
        fine, more = finer(stack_of(scope).unit, inches=found.book.inches)
        margin = result.margin
        room = show(margin, fine, more) if margin is not None else ""
        share = Share(
            paper(title_of(scope), 80),
            show(mine, fine, more),
            paper(f"{cause_in_parts(most.cause.key)[1]} {show(most.worst, fine, more)}", 100),
            limits_in_words(result, unit, digits),
            room,
            margin is None or margin >= 0.0,
        )
        rows.append((mine / result.scale if result.scale else 0.0, share))
    return [share for _, share in sorted(rows, key=lambda row: -row[0])]


def _tables(found: Review) -> list[OnPaper]:
    tables = []
    for scope in found.book.instances("setup"):
        answer = found.book.get("divide.table", scope)
        if isinstance(answer, Known) and isinstance(answer.value, IndexTable):
            tables.append(on_paper(found.book, scope, answer.value))
    return tables


_BLOCKS: tuple[tuple[str, Callable[[Review], object]], ...] = (
    ("Joint", joints),
    ("Insert", inserts),
    ("Grinding the insert", ground),
)


def _texts(found: Review) -> list[tuple[str, str]]:
    """Tables that stand best as they are printed: of joints and of inserts."""
    told = []
    for title, block in _BLOCKS:
        lines = [str(line) for line in block(found)]  # type: ignore[attr-defined]
        if lines:
            told.append((title, "\n".join(lines)))
    return told
