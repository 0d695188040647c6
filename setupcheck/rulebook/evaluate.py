"""Evaluation: every rule at every instance of its quantity, then house limits, waivers, cautions, order and verdict."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from typing import TYPE_CHECKING

from setupcheck.record import record
from setupcheck.rulebook import cautions as safety
from setupcheck.rulebook.answers import unanswered_entries
from setupcheck.rulebook.facts import applies
from setupcheck.rulebook.judging import judge, judge_word, outside, reaches
from setupcheck.rulebook.limits import Limits, limit_of, limits_of
from setupcheck.rulebook.messages import cannot_tell, fill, shown_pair
from setupcheck.rulebook.needs import NAME_FACT, SURFACE_FACT, Book, Facts, Found, Missing, S, identity, read
from setupcheck.rulebook.records import (
    FAMILIES,
    VERDICTS,
    Answer,
    CautionLine,
    Evaluation,
    Finding,
    Rule,
    RuleBook,
    Verdict,
    Waiver,
)
from setupcheck.rulebook.waivers import waived

if TYPE_CHECKING:
    from setupcheck.rulebook.house import House, HouseLimit


def evaluate(
    rulebook: RuleBook,
    book: Book[S],
    facts: Facts[S],
    *,
    house: House | None = None,
    waivers: Sequence[Waiver] = (),
    answers: Sequence[Answer] = (),
    on: str | None = None,
) -> Evaluation:
    """Judge one job.

    book, facts  the numbers and facts of the job (see needs.py)
    house        what a shop's house file puts in force; its rule book has to be the one given
    waivers, answers  the job's `waive` and `checked` lists
    on           the day the job is judged (ISO date text); without it no waiver with an end is in force
    """
    findings: list[Finding] = []
    passed_over: dict[str, int] = {}
    idle: list[str] = []
    for rule in rulebook.rules:
        instances = book.instances(book.quantities[rule.quantity].per)
        if not instances:
            idle.append(rule.id)
        own, said = (house.limit_for(rule.id), house.said_of(rule)) if house is not None else (None, "")
        for at in instances:
            finding = _at_instance(rule, book, facts, at, house=own, said=said)
            if finding is None:
                passed_over[rule.id] = passed_over.get(rule.id, 0) + 1
            else:
                findings.append(finding)
    lines = safety.triggered(rulebook, book, facts, answers=answers)
    findings = waived(findings, waivers, rulebook=rulebook, on=on)
    if house is not None:
        findings = house.waive(findings, on=on)
    findings += unanswered_entries(answers, lines=lines, rulebook=rulebook)
    return Evaluation(ordered(findings), passed_over, tuple(idle), lines)


def ordered(findings: Iterable[Finding]) -> tuple[Finding, ...]:
    """Findings by level, then operation (the job as a whole first), then rule, then instance in the order found."""
    return tuple(sorted(findings, key=_in_order))


def verdict(findings: Iterable[Finding], cautions: Iterable[CautionLine] = ()) -> Verdict:
    """The verdict of the whole job: fail > open > warn > pass.

    A stop-and-check caution that nobody has answered makes it at least open. Waived findings no longer count here
    (they are counted and listed). A job in which nothing was judged is open: nothing checked is not a pass.
    """
    found = [finding.verdict for finding in findings]
    unanswered = any(line.severity == "stop-and-check" and not line.answered for line in cautions)
    if "fail" in found:
        return "fail"
    if "open" in found or unanswered or not found:
        return "open"
    return "warn" if "warn" in found else "pass"


def _at_instance(
    rule: Rule, book: Book[S], facts: Facts[S], at: S, *, house: HouseLimit | None, said: str
) -> Finding | None:
    """The finding of one rule at one instance; None when it does not apply there."""
    fits = applies(rule.applies_when, facts, at)
    if fits.answer == "no":
        return None
    value = read(book, rule.quantity, at)
    if value is None:
        return None
    if house is None:
        limits = limits_of(rule.require, book, at)
    else:
        low = house.value if rule.require.shape == "at_least" else None
        limits = Limits(low, house.value if low is None else None)
    if limits is None:
        return None

    if fits.answer == "unknown":
        told = _open(Missing(fits.missing))
    elif isinstance(value, Missing):
        told = _open(value)
    elif isinstance(limits, Missing):
        told = _open(limits, value)
    else:
        told = _judged(rule, book, facts, at, value=value, limits=limits)
    return _finding(rule, book, at, told, house=said)


@record
class _Told:
    """What judging makes of a finding; everything else of it comes from rule and instance."""

    verdict: Verdict
    message: str
    missing: tuple[str, ...] = ()
    value: float | str | None = None
    limit: float | tuple[float, float] | tuple[str, ...] | None = None
    margin: float | None = None
    rests_on: tuple[str, ...] = ()


def _judged(rule: Rule, book: Book[S], facts: Facts[S], at: S, *, value: Found, limits: Limits) -> _Told:
    """Where value and limits are there."""
    if rule.require.shape == "one_of":
        if not isinstance(value.value, str):
            raise TypeError(f"{rule.quantity} at {at.key!r} is a number, rule {rule.id} compares words")
        allowed = rule.require.allowed
        word = judge_word(value.value, allowed, level=rule.level)
        message = _message(rule, word, facts, at, value=value.value, limit=" or ".join(allowed))
        return _Told(word, message, _asked(rule, word, at), value.value, allowed, None, value.rests_on)

    number = _number(value, rule, rule.quantity, at)
    beside = _beside(rule, book, at, broken=outside(number, low=limits.low, high=limits.high))
    if isinstance(beside, Missing):
        return _open(beside, value)
    judgement = judge(
        number,
        low=limits.low,
        high=limits.high,
        level=rule.level,
        warn_within=rule.warn_within,
        softened=beside.softened,
        standard_uncertainty=beside.uncertainty,
    )
    unit, digits = book.unit(rule.quantity, at), book.digits(rule.quantity, at)
    value_text, limit_text = shown_pair(number, judgement.limit, unit=unit, digits=digits)
    verdict = judgement.verdict
    return _Told(
        verdict,
        _message(rule, verdict, facts, at, value=value_text, limit=limit_text),
        _asked(rule, verdict, at),
        number,
        judgement.limit,
        judgement.margin,
        tuple(sorted({*value.rests_on, *limits.rests_on, *beside.rests_on})),
    )


@record
class _Beside:
    """What a rule reads beside value and limit: the uncertainty of a measured value, the chance of a planned one."""

    softened: bool = False
    uncertainty: float | None = None
    rests_on: tuple[str, ...] = ()


def _beside(rule: Rule, book: Book[S], at: S, *, broken: bool) -> _Beside | Missing:
    """Loading sees to it that a rule has an uncertainty or a softening, never both."""
    if rule.uncertainty:
        u = read(book, rule.uncertainty, at)
        if u is None:
            return Missing((), f"{rule.uncertainty} is not given")
        if isinstance(u, Missing):
            return u
        return _Beside(uncertainty=_number(u, rule, rule.uncertainty, at), rests_on=u.rests_on)
    if rule.only_warn_if is None or not broken:
        return _Beside()
    chance = read(book, rule.only_warn_if.quantity, at)
    if isinstance(chance, Missing):
        return chance
    wanted = limit_of(rule.only_warn_if.at_least, book, at)
    if isinstance(wanted, Missing):
        return wanted
    if chance is None or wanted is None:
        return _Beside()
    softened = reaches(_number(chance, rule, rule.only_warn_if.quantity, at), wanted.value)
    return _Beside(softened=softened, rests_on=(*chance.rests_on, *wanted.rests_on))


def _number(found: Found, rule: Rule, quantity: str, at: S) -> float:
    if isinstance(found.value, str):
        raise TypeError(f"{quantity} at {at.key!r} is a word, rule {rule.id} compares numbers")
    return found.value


def _called(facts: Facts[S], at: S, name: str) -> str:
    """What a message calls the instance or its surface; without an answer its key."""
    fact = facts(at, name)
    return fact if isinstance(fact, str) and fact else at.key or at.kind


def _remedy(rule: Rule, book: Book[S], at: S, result: Verdict) -> str:
    """What to do; with this job's own numbers, where a quantity says it."""
    if not rule.remedy_from or result not in ("warn", "fail"):
        return rule.remedy
    said = read(book, rule.remedy_from, at)
    return said.value if isinstance(said, Found) and isinstance(said.value, str) else rule.remedy


def _message(rule: Rule, result: Verdict, facts: Facts[S], at: S, *, value: str, limit: str) -> str:
    template = rule.message_when_met if result == "pass" and rule.message_when_met else rule.message
    names = {"value": value, "limit": limit, "op": "" if at.op is None else str(at.op)}
    for field, fact in (("name", NAME_FACT), ("surface", SURFACE_FACT)):
        if f"{{{field}}}" in template:
            names[field] = _called(facts, at, fact)
    return fill(template, names)


def _in_order(finding: Finding) -> tuple[int, bool, int, str]:
    """Worst verdict first, then along the route; what is merely not written comes last among its equals."""
    op = -1 if finding.op is None else finding.op
    return VERDICTS.index(finding.verdict), finding.rule.startswith(f"{FAMILIES[-1]}-"), op, finding.rule


def _asked(rule: Rule, result: Verdict, at: S) -> tuple[str, ...]:
    """The entry of the job that a broken rule asks for."""
    if result != "open" or not rule.asks_for:
        return ()
    path = f"{at.path}{rule.asks_for}" if rule.asks_for.startswith(".") else rule.asks_for
    return (path.strip("."),)


def _open(missing: Missing, value: Found | None = None) -> _Told:
    """Nothing could be judged. value: what is known all the same."""
    message = cannot_tell(missing.missing, missing.because)
    if value is None:
        return _Told("open", message, missing.missing)
    return _Told("open", message, missing.missing, value.value, rests_on=value.rests_on)


def _finding(rule: Rule, book: Book[S], at: S, told: _Told, *, house: str) -> Finding:
    return Finding(
        rule=rule.id,
        title=rule.title,
        at=identity(at),
        key=at.key,
        op=at.op,
        line=at.line,
        verdict=told.verdict,
        quantity=rule.quantity,
        value=told.value,
        limit=told.limit,
        margin=told.margin,
        unit=book.unit(rule.quantity, at),
        digits=book.digits(rule.quantity, at),
        missing=told.missing,
        message=told.message,
        remedy=_remedy(rule, book, at, told.verdict),
        why=rule.why,
        sources=rule.sources,
        evidence=rule.evidence,
        rests_on=told.rests_on,
        house=house,
        cautions=rule.cautions,
    )
