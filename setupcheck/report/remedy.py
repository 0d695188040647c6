"""What would bring a job inside, or what is good enough already, as text of 80 columns."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence

from setupcheck.flow import Review
from setupcheck.notation import fixed
from setupcheck.quantities.good_enough import FOUND_AT, KNOWN_TO, PLENTY, Enough, Pays
from setupcheck.quantities.mending import Mended
from setupcheck.quantities.single_causes import Entry, Row, Table
from setupcheck.quantities.typed_entry import shown
from setupcheck.quantities.typical import is_of_house, is_own
from setupcheck.report.causes import cause_in_parts, cause_in_words
from setupcheck.report.edits import as_typed
from setupcheck.report.proposals import proposals_as_text
from setupcheck.report.remedies import STACK_RULES, remedy_in_words
from setupcheck.report.stacks_in_words import Words
from setupcheck.report.wording import clean, wrap

HOW = "A --set is tried with `setupcheck vary JOB --set …`; one that runs over lines is typed in one, with a space at each break."
TABLE = f"  {'now':11}{'alone':11}cause"
MOST_TIGHT = 3
"""Rows of a stack that is inside, but tight. Source: our screening choice."""


def as_text(found: Review, mended: Mended) -> str:
    """All of it."""
    words = Words(found)
    cured = {key for one in mended.proposals for key in one.cures}
    lines: list[str] = []
    for part in (
        _head(found, mended),
        proposals_as_text(found, mended, words) if mended.worst is not None else iter(()),
        *(_table(found, table, words, cured=table.key in cured) for table in mended.tables),
        _enough(found, mended, words),
        _pays(found, mended.pays, words),
        wrap(HOW),
    ):
        block = list(part)
        if block:
            lines += [*block, ""]
    lines += wrap(found.rulebook.closing_line)
    return "\n".join(lines) + "\n"


def _head(found: Review, mended: Mended) -> Iterator[str]:
    job = found.loaded.job
    yield from wrap(f"{clean(job.job)}: {clean(job.title)}" if job.job else clean(job.title))
    if found.house is not None:
        from setupcheck.report.house import house_line  # few jobs have one

        yield from house_line(found.house)
    asked = [r for r in found.results.values() if r.margin is not None]
    out = sum(r.margin is not None and r.margin < 0.0 for r in asked)
    many = "requirement" if len(asked) == 1 else "requirements"
    yield from wrap(f"{found.verdict.upper()}   {out or 'none'} of {len(asked)} {many} outside at its worst")
    opened = len(job.require) - len(asked)
    if opened:
        yield from wrap(f"{opened} of what is asked cannot be told yet, or has no limit; nothing is said of it here.")
    others = [f for f in found.evaluation.findings if f.verdict in ("fail", "open") and f.rule not in STACK_RULES]
    if others:
        rules = ", ".join(dict.fromkeys(f.rule for f in others))
        yield from wrap(
            f"Beside them the review has findings that fail or are open ({rules}), which it tells what to do for."
        )


def _table(found: Review, table: Table, words: Words, *, cured: bool) -> Iterator[str]:
    key = table.key
    says = f"{words.title(key)}: {words.worst(key)}, {words.limit(key)}"
    if table.tight:
        share = table.result.margin_share or 0.0
        yield from wrap(f"TIGHT  {says}; {fixed(share * 100.0, 0)} % in hand", rest="    ")
        if table.over <= 0.0:
            return
        rows: Sequence[Row] = [row for row in table.enough if row.entry.of_the_job][:MOST_TIGHT]
        if rows:
            yield f"  {'now':11}{'at most':11}for a tenth in hand, each alone"
        yield from _rows(found, rows, key, words)
        return
    yield from wrap(f"OUTSIDE  {says}; over by {words.size(key, table.over)}", rest="    ")
    if table.enough or table.some:
        yield TABLE
    yield from _rows(found, (*table.enough, *table.some), key, words)
    yield from _spread(table, words)
    yield from _no_help(table, words)
    if not cured:
        yield from _advice(found, table)


def _rows(found: Review, rows: Sequence[Row], key: str, words: Words) -> Iterator[str]:
    inches = found.book.inches
    for row in rows:
        now = shown(row.entry.says[0].now, row.entry.says[0].unit, inches=inches)
        alone = shown(row.needed[0], row.entry.says[0].unit, inches=inches) if row.needed else "no"
        text = entry_in_words(row.entry)
        if not row.needed:
            left = words.size(key, row.still)
            none = words.size(key, 0.0) == left
            text += (
                ": not by itself, it would have to be nothing"
                if none
                else f": not by itself, still {left} over without it"
            )
        yield from wrap(text, first=f"  {now:11}{alone:11}", rest=" " * 24)
        if row.typed:
            yield from as_typed(row.typed, "      ")
        else:
            yield from wrap(", ".join((*row.entry.paths, *row.entry.also)), first="      ", rest="      ")


def entry_in_words(entry: Entry) -> str:
    """What an entry is the error of; one that stands for several cuts by what they share."""
    where, what = cause_in_parts(entry.causes[0].key)
    if len(entry.causes) > 1:
        ops = ", ".join(str(op) for op in sorted({c.op for c in entry.causes if c.op is not None}))
        what = what.partition(" in cutting ")[0]
        where = f"op {ops}" if ops else where
    text = f"{where}, {what}" if where else what
    if is_of_house(entry.typical):
        return f"{text}, a house value"
    if is_own(entry.typical):
        return f"{text}, from the shop's record"
    return f"{text}, typical value" if entry.typical else text


def _spread(table: Table, words: Words) -> Iterator[str]:
    spread = table.spread
    if not spread.entries:
        return
    many = f"all {len(spread.entries)} entries of setups still to come" if len(spread.entries) > 1 else "that one entry"
    if spread.factor is None:
        text = f"Spread over {many}: not enough, even at nothing {words.size(table.key, max(spread.still, 0.0))} over."
    else:
        share = math.floor(spread.factor * 1000.0) / 10.0
        text = f"Spread over {many}: each to {fixed(share, 1)} % of what it is now."
    yield from wrap(text, first="  ", rest="      ")


def _no_help(table: Table, words: Words) -> Iterator[str]:
    if table.no_help:
        names = "; ".join(f"{entry_in_words(r.entry)} ({words.size(table.key, r.takes)})" for r in table.no_help)
        yield from wrap(f"No help, even gone altogether: {names}.", first="  ", rest="      ")
    if table.done:
        names = "; ".join(f"{entry_in_words(r.entry)} ({words.size(table.key, r.takes)})" for r in table.done)
        yield from wrap(f"Done already, left alone: {names}.", first="  ", rest="      ")
    if table.unsaid:
        names = "; ".join(cause_in_words(cause.key) for cause in table.unsaid)
        yield from wrap(f"No single number says: {names}.", first="  ", rest="      ")


def _advice(found: Review, table: Table) -> Iterator[str]:
    """What the review itself advises, where no entry alone does it."""
    if table.enough:
        return
    mine = [
        f for f in found.evaluation.findings if f.key == table.key and f.rule in STACK_RULES and f.verdict != "pass"
    ]
    for finding in mine[:1]:
        yield from wrap(f"The review's own advice: {remedy_in_words(found, finding)}", first="  ", rest="      ")


def _enough(found: Review, mended: Mended, words: Words) -> Iterator[str]:
    if mended.failing or mended.worst is None:
        return
    double = [one for one in mended.enough if one.could_double]
    finer = [one for one in mended.enough if one.no_finer]
    unheard = [g for g in found.gates if g.reading is None and g.op in _to_come(found)]
    if double:
        yield "GOOD ENOUGH ALREADY: could be twice as large or more, each alone"
        yield f"  {'now':11}{'times':8}entry"
        for one in double:
            yield from _roomy(found, one, words)
    if finer or unheard:
        yield "DO NOT INDICATE FINER"
    for one in finer:
        now = shown(one.entry.says[0].now, one.entry.says[0].unit, inches=found.book.inches)
        text = f"{entry_in_words(one.entry)}, {now}: at nothing it would give less than 1 % of any margin"
        yield from wrap(f"{text} ({one.entry.path}).", first="  ", rest="      ")
    if unheard:
        names = "; ".join(f"op {g.op}, {g.step.replace('_', ' ')} on {clean(g.on)}" for g in unheard)
        yield from wrap(f"No requirement hears of: {names}.", first="  ", rest="      ")


def _to_come(found: Review) -> frozenset[int]:
    from setupcheck.quantities.finished import to_come

    return frozenset(setup.op for setup in to_come(found.loaded.job))


def _roomy(found: Review, one: Enough, words: Words) -> Iterator[str]:
    now = shown(one.entry.says[0].now, one.entry.says[0].unit, inches=found.book.inches)
    if math.isinf(one.room):
        times = f"{PLENTY:g} +"
    else:
        times = fixed(math.floor(one.room * 10.0) / 10.0, 1)
    by = f"; then {words.title(one.by)} is at its limit" if one.by else ""
    yield from wrap(f"{entry_in_words(one.entry)}{by}", first=f"  {now:11}{times:8}", rest=" " * 21)
    yield from wrap(", ".join((*one.entry.paths, *one.entry.also)), first=" " * 21, rest=" " * 21)


def _pays(found: Review, pays: Sequence[Pays], words: Words) -> Iterator[str]:
    if not pays:
        return
    yield from wrap(f"WHERE THE NEXT MEASUREMENT PAYS MOST: {words.title(pays[0].key)} has least in hand", rest="    ")
    margin = pays[0].result.margin or 0.0
    for one in pays:
        was, then = (words.size(one.key, value) for value in (margin, one.margin))
        yield from wrap(
            f"{entry_in_words(one.entry)}: margin {was} -> {then} ({one.entry.path})", first="  ", rest="      "
        )
    yield from wrap(
        f"Taken: each is found at {FOUND_AT:.0%} of what is planned for it, and then known to {KNOWN_TO:.0%} of that "
        "(expanded, k = 2). Only measuring tells.".replace("%", " %"),
        first="  ",
        rest="      ",
    )
