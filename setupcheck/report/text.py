"""The review as text: verdict, what to stop and check, findings, requirements with their causes, gates, cautions."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from setupcheck.flow import Review
from setupcheck.ledger.draws import TRIALS
from setupcheck.notation import show
from setupcheck.quantities.book import Open, Scope
from setupcheck.quantities.judged import Result
from setupcheck.report.backlash_read import backlash_read
from setupcheck.report.causes import cause_in_words
from setupcheck.report.contact import contacts
from setupcheck.report.gates import dials_in_words, lengths_in_words
from setupcheck.report.heating_plan import heating_plans
from setupcheck.report.insert import inserts
from setupcheck.report.joint import joints
from setupcheck.report.progress import still_to_move
from setupcheck.report.prove_out import prove_outs
from setupcheck.report.remedies import remedy_in_words
from setupcheck.report.rests import how_known, measure_first, record_used, rests_in_words
from setupcheck.report.taken import standing_on
from setupcheck.report.then_now import then_now
from setupcheck.report.uncomputed import in_lines, uncomputed
from setupcheck.report.wording import clean, finer, in_unit, is_the_entry, title_of, unit_of, waiting_alike, wrap
from setupcheck.report.worked_out import worked_out
from setupcheck.rulebook import VERDICTS, CautionLine, Finding

CAUTIONS_SHOWN = 5
"""Cautions of one operation shown without --all. Source: our screening choice."""
CAUSES_SHOWN = 3


def as_text(found: Review, *, everything: bool = False) -> str:
    """The whole report, 80 columns, without colour.

    everything  passed findings, all causes and all cautions as well
    """
    lines: list[str] = []
    for part in (
        _head(found),
        _stops(found),
        _findings(found, everything),
        _requirements(found, everything),
        measure_first(found, everything),
        then_now(found, everything),
        still_to_move(found),
        prove_outs(found),
        backlash_read(found),
        joints(found),
        heating_plans(found),
        contacts(found),
        inserts(found),
        _worked_out(found),
        record_used(found),
        _house(found),
        _uncomputed(found),
        dials_in_words(found, everything=everything),
        lengths_in_words(found, everything=everything),
        _cautions(found, everything),
    ):
        block = list(part)
        if block:
            lines += [*block, ""]
    lines += wrap(found.rulebook.closing_line)
    return "\n".join(lines) + "\n"


def counts(found: Review) -> str:
    """`41 pass, 3 warn, 1 fail, 6 open, 1 waived`."""
    numbers = found.evaluation.counts
    return ", ".join(f"{numbers[v]} {v}" for v in ("pass", "warn", "fail", "open", "waived") if v in VERDICTS)


def verdict_lines(found: Review) -> list[str]:
    """The verdict with its counts, and how far it reaches."""
    return wrap(verdict_line(found), rest="      ")


def verdict_line(found: Review) -> str:
    """The same as one line, however long."""
    said = " ".join(part for part in (found.verdict.upper(), how_far(found)) if part)
    return f"{said}   {counts(found)}"


def how_far(found: Review) -> str:
    """What a pass does not say by itself: `of what this version computes, on 3 defaults`; empty where it says all."""
    if found.verdict != "pass":
        return ""
    beyond = "of what this version computes" if uncomputed(found.loaded) else ""
    return ", ".join(part for part in (beyond, standing_on(found.loaded)) if part)


def _head(found: Review) -> Iterator[str]:
    job = found.loaded.job
    name = f"{clean(job.job)}: {clean(job.title)}" if job.job else clean(job.title)
    yield from wrap(name)
    yield from verdict_lines(found)
    if found.house is not None:
        from setupcheck.report.house import house_line  # few jobs have one

        yield from house_line(found.house)
    unanswered = [c for c in found.evaluation.cautions if c.severity == "stop-and-check" and not c.answered]
    if unanswered and found.evaluation.counts["fail"] == 0:
        yield from wrap(
            f"Open until {_many(len(unanswered), 'stop-and-check caution is', 'stop-and-check cautions are')} "
            "answered under `checked` in the job file."
        )


def _many(n: int, one: str, more: str) -> str:
    return f"{n} {one if n == 1 else more}"


def _stops(found: Review) -> Iterator[str]:
    """Each caution once for all operations where it stands alike."""
    alike: dict[tuple[str, str], list[CautionLine]] = {}
    for caution in found.evaluation.cautions:
        if caution.severity == "stop-and-check":
            alike.setdefault((caution.id, caution.state), []).append(caution)
    if alike:
        yield "STOP AND CHECK"
        for same in alike.values():
            yield from _stop(same)


def _stop(same: list[CautionLine]) -> Iterator[str]:
    first = same[0]
    why = dict.fromkeys(clean(caution.because) for caution in same if caution.because)
    because = f" ({'; '.join(why)})" if why else ""
    yield from wrap(
        f"{_where(same)}, {first.id} [{clean(first.state)}]: {first.text}{because}", first="  ", rest="      "
    )


def _where(same: list[CautionLine]) -> str:
    """`op 70`, `op 10 and 20`, `op 10, 20 and 30`; `job` where it is not one operation's."""
    ops = [str(caution.op) for caution in same if caution.op is not None]
    if not ops:
        return "job"
    return f"op {' and '.join([', '.join(ops[:-1]), ops[-1]] if len(ops) > 1 else ops)}"


def _findings(found: Review, everything: bool) -> Iterator[str]:
    shown = [f for f in found.evaluation.findings if everything or f.verdict != "pass"]
    if not shown:
        return
    yield "FINDINGS"
    for rules, alike in waiting_alike(shown):
        yield from _finding(found, alike, rules)


def _finding(found: Review, alike: Sequence[Finding], rules: str) -> Iterator[str]:
    finding = alike[0]
    lines = [f"line {one.line}" if one.line else "" for one in alike]
    places = [", ".join(p for p in (clean(one.at) or "job", n) if p) for one, n in zip(alike, lines, strict=True)]
    yield from wrap(f"{finding.verdict}  {rules}  {'; '.join(dict.fromkeys(places))}", first="  ", rest="        ")
    yield from wrap(clean(finding.message) + "." + _margin(finding), first="      ", rest="      ")
    if finding.verdict == "pass":
        yield from _rests_on(finding)
        yield from _by_house(finding)
        return
    result = found.results.get(finding.key)
    biggest = _share(found, result, 3) if result is not None and finding.rule.startswith("STACK") else []
    if biggest:
        yield from wrap("Biggest: " + "; ".join(biggest) + ".", first="      ", rest="      ")
    remedy = remedy_in_words(found, finding)
    if remedy and finding.verdict != "waived":
        yield from wrap(f"Do: {remedy}", first="      ", rest="          ")
    if finding.verdict == "open" and finding.missing and not is_the_entry(finding):
        yield from wrap(
            "Fill: " + ", ".join(finding.missing[:4]) + (" …" if len(finding.missing) > 4 else ""),
            first="      ",
            rest="          ",
        )
    yield from _rests_on(finding)
    yield from _by_house(finding)
    if finding.waiver:
        yield from wrap(f"Waived: {clean(finding.waiver)}", first="      ", rest="      ")
    if finding.verdict == "open":
        return
    told = [f"{s.ref}, {s.place} ({s.kind})" if s.place else f"{s.ref} ({s.kind})" for s in finding.sources]
    yield from wrap("Source: " + "; ".join(told), first="      ", rest="          ")


def _by_house(finding: Finding) -> Iterator[str]:
    if finding.house:
        yield from wrap(f"By {clean(finding.house)}", first="      ", rest="      ")


def _rests_on(finding: Finding) -> Iterator[str]:
    for told in rests_in_words(finding.rests_on):
        yield from wrap(f"{told}.", first="      ", rest="      ")


def _margin(finding: Finding) -> str:
    """How far inside or outside a limit; nothing of a word, and nothing beyond a count, whose message says both numbers."""
    if finding.margin is None or finding.value is None or isinstance(finding.value, str):
        return ""
    unit = {"degC": "K"}.get(finding.unit, finding.unit or "1")  # a difference of temperatures
    if finding.margin >= 0.0:
        return f" Margin {show(finding.margin, unit, finding.digits)}."
    if unit == "1" and finding.digits == 0:
        return ""
    shown = _seen(-finding.margin, unit, finding.digits)
    low = finding.limit[0] if isinstance(finding.limit, tuple) else finding.limit
    short = isinstance(low, float | int) and finding.value < low
    return f" {'Short' if short else 'Over'} by {shown}." if shown else ""


def _seen(size: float, unit: str, digits: int) -> str:
    """A size above zero with up to three decimals more, until it does not read as zero; empty where it still does."""
    for more in range(4):
        text = show(size, unit, digits + more)
        if any(c in "123456789" for c in text):
            return text
    return ""


def _share(found: Review, result: Result, most: int) -> list[str]:
    unit, digits = finer(result.stack.unit, inches=found.book.inches)
    return [
        f"{cause_in_words(s.cause.key)} {show(s.worst, unit, digits)}" + how_known(s.cause, found.loaded)
        for s in result.combined.shares[:most]
        if s.worst > 0.0
    ]


def _requirements(found: Review, everything: bool) -> Iterator[str]:
    scopes = found.book.instances("stack")
    if not scopes:
        return
    yield "WHAT WAS ASKED, at its worst"
    tightest = _tightest(found)
    for scope in scopes:
        yield from _requirement(found, scope, everything, scope.key == tightest)


def _tightest(found: Review) -> str | None:
    shares = {k: r.margin_share for k, r in found.results.items() if r.margin_share is not None}
    return min(shares, key=lambda k: shares[k] or 0.0) if len(shares) > 1 else None


def limits_in_words(result: Result, unit: str, digits: int) -> str:
    """The worst value on its own limit's scale: `25.3 of 30.0 um`, `0.274 mm, at least 0.200 mm`, …"""
    worst, stack = result.combined.worst, result.stack
    if stack.low is not None and stack.high is not None:
        return (
            f"{in_unit(worst.low, unit, digits)} to {in_unit(worst.high, unit, digits)} within "
            f"{in_unit(stack.low, unit, digits)} to {show(stack.high, unit, digits)}"
        )
    if stack.low is not None:
        return f"{show(worst.low, unit, digits)}, at least {show(stack.low, unit, digits)} asked"
    if stack.high is not None:
        return f"{in_unit(worst.high, unit, digits)} of {show(stack.high, unit, digits)}"
    return show(worst.high, unit, digits)


def _requirement(found: Review, scope: Scope, everything: bool, tightest: bool) -> Iterator[str]:
    result = found.results.get(scope.key)
    if result is None:
        answer = found.book.get("stack.combined", scope)
        missing = answer.missing if isinstance(answer, Open) else ()
        because = answer.because if isinstance(answer, Open) else ""
        why = because or f"fill {', '.join(missing[:3])}{' …' if len(missing) > 3 else ''}"
        yield from wrap(f"{title_of(scope)}: cannot tell; {why}", first="  ", rest="      ")
        return
    unit, digits = unit_of(found.book, scope)
    line = f"{title_of(scope)} {limits_in_words(result, unit, digits)}"
    causes = _share(found, result, 1000 if everything else CAUSES_SHOWN)
    if causes:
        line += f"; biggest: {causes[0]}"
    elif not result.combined.base:
        line += "; nothing adds, both share all their errors"
    if tightest:
        line += " (the tightest)"
    yield from wrap(line, first="  ", rest="      ")
    if len(causes) > 1:
        yield from wrap("then " + "; ".join(causes[1:]), first="      ", rest="      ")
    if causes:
        yield from wrap(_statistics(result, unit, digits, found.loaded.job.confidence), first="      ", rest="      ")


def _statistics(result: Result, unit: str, digits: int, confidence: float) -> str:
    """One sentence on the drawn values, and the rms that is shown and never judged."""
    c = result.combined
    share = f"{confidence * 100:g} in 100"
    if result.figure.signed and (result.stack.low is None) == (result.stack.high is None):
        likely = f"{share} lie between {in_unit(c.likely.low, unit, digits)} and {show(c.likely.high, unit, digits)}"
    elif c.end == "low":
        likely = f"{share} stay above {show(c.likely.low, unit, digits)}"
    else:
        likely = f"{share} stay under {show(c.likely.high, unit, digits)}"
    rss = show(c.rss.low if c.end == "low" else c.rss.high, unit, digits)
    if result.stack.low is not None and result.stack.high is not None:
        rss = f"{in_unit(c.rss.low, unit, digits)} to {show(c.rss.high, unit, digits)}"
    text = f"Of {TRIALS:,} draws {likely}; rss {rss}"
    if c.chance is not None and c.chance < 1.0 and c.chance_error is not None:
        text += f"; chance of meeting it {c.chance * 100:.2f} ± {c.chance_error * 100:.2f} %"
    return text + "."


def _worked_out(found: Review) -> Iterator[str]:
    lines = worked_out(found)
    if lines:
        yield "WORKED OUT"
        for line in lines:
            yield from wrap(line, first="  ", rest="      ")


def _house(found: Review) -> Iterator[str]:
    if found.house is not None:
        from setupcheck.report.house import house_used

        yield from house_used(found)


def _uncomputed(found: Review) -> Iterator[str]:
    stated = uncomputed(found.loaded)
    if not stated:
        return
    yield "NOT COMPUTED BY THIS VERSION"
    for line in in_lines(stated):
        yield from wrap(line, first="  ", rest="      ")


def _cautions(found: Review, everything: bool) -> Iterator[str]:
    rest = [c for c in found.evaluation.cautions if c.severity != "stop-and-check"]
    if not rest:
        return
    yield "CAUTIONS"
    ops = list(dict.fromkeys(c.op for c in rest))
    told: set[str] = set()
    for op in ops:
        mine = [c for c in rest if c.op == op and (everything or c.id not in told)]
        mine.sort(key=lambda c: bool(c.because))  # what is certain first, so that doubts never crowd it out
        fresh = mine[: None if everything else CAUTIONS_SHOWN]
        for caution in fresh:
            told.add(caution.id)
            also = (
                [o for o in ops if o != op and any(c.op == o and c.id == caution.id for c in rest)]
                if not everything
                else []
            )
            where = _where([caution]) + (f" (and {', '.join(str(o) for o in also)})" if also else "")
            because = f" ({clean(caution.because)})" if caution.because else ""
            yield from wrap(f"{where}: {caution.text}{because}", first="  ", rest="      ")
    left: dict[str, list[CautionLine]] = {}
    for caution in rest:
        if caution.id not in told:
            left.setdefault(caution.id, []).append(caution)
    if left:
        named = ", ".join(f"{name} ({_where(same)})" for name, same in left.items())
        yield from wrap(f"more, printed with --all: {named}", first="  ", rest="      ")
