"""Waivers: findings that the planner accepts for a stated reason. They are counted and printed, never hidden.

A waiver is in force when it names an existing rule and an instance with a finding, gives a reason, and has not ended
on the day of judging. Everything else about waivers is a finding of the engine itself:

  WAIVE-001  names no rule, no instance, no reason, or a caution: nothing is waived            fail
  WAIVE-002  has nothing to waive: the finding passes, or another entry has waived it already  warn
  WAIVE-003  has ended (fail), or has an end and no day of judging is given (open)

A waiver that is not in force leaves its finding as it was judged. An end date is the last day it holds.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import replace
from datetime import date

from setupcheck.errors import RuleBookError
from setupcheck.notation import nearest
from setupcheck.rulebook.engine import engine_finding
from setupcheck.rulebook.records import Finding, RuleBook, Verdict, Waiver


def waived(
    findings: Iterable[Finding], waivers: Sequence[Waiver], *, rulebook: RuleBook, on: str | None
) -> list[Finding]:
    """The findings with the waivers that are in force put in, and a finding for every waiver that is not.

    on  ISO date text of the day of judging, None when none was given.  Raises: RuleBookError when it is no date.
    """
    if on is not None and not is_date(on):
        raise RuleBookError("--on", 0, f"'{on}' is not a date", "Write year-month-day, as in 2027-03-31")
    judged = list(findings)
    about: list[Finding] = []
    for waiver in waivers:
        trouble = _names_nothing(waiver, judged, rulebook) or _ended(waiver, on)
        if trouble is not None:
            about.append(trouble)
            continue
        number = next(n for n, finding in enumerate(judged) if _matches(waiver, finding))
        finding = judged[number]
        if finding.verdict == "pass":
            about.append(_unused(waiver, f"{waiver.rule} at {waiver.at} passes, so its waiver waives nothing"))
        elif finding.verdict == "waived":
            about.append(_unused(waiver, f"{waiver.rule} at {waiver.at} is waived twice"))
        else:
            judged[number] = replace(finding, verdict="waived", waiver=_reason(waiver))
    return judged + about


def _matches(waiver: Waiver, finding: Finding) -> bool:
    return finding.rule == waiver.rule and bool(waiver.at) and waiver.at in (finding.at, finding.key)


def _reason(waiver: Waiver) -> str:
    return f"{waiver.reason.strip()} (until {waiver.until})" if waiver.until else waiver.reason.strip()


def _names_nothing(waiver: Waiver, judged: Sequence[Finding], rulebook: RuleBook) -> Finding | None:
    cautions = {caution.id for caution in rulebook.cautions}
    if waiver.rule in cautions:
        text = f"{waiver.rule} is a caution, and cautions are never waived"
        remedy = "Take the waiver out and answer the caution under checked."
        return _finding("WAIVE-001", "fail", waiver, text, remedy)
    if rulebook.rule(waiver.rule) is None:
        near = nearest(waiver.rule, [rule.id for rule in rulebook.rules])
        offer = f"Did you mean {near}?" if near else "`setupcheck rules` lists them."
        return _finding("WAIVE-001", "fail", waiver, f"there is no rule {waiver.rule} to waive", offer)
    if not any(_matches(waiver, finding) for finding in judged):
        places = [finding.at for finding in judged if finding.rule == waiver.rule]
        near = nearest(waiver.at, places)
        offer = f"Did you mean {near}?" if near else f"It has a finding at: {', '.join(places) or 'no place'}."
        text = f"{waiver.rule} has no finding at '{waiver.at}' to waive"
        return _finding("WAIVE-001", "fail", waiver, text, offer)
    if not waiver.reason.strip():
        text = f"the waiver of {waiver.rule} at {waiver.at} gives no reason"
        return _finding("WAIVE-001", "fail", waiver, text, "Write why it is accepted.", missing=f"{waiver.path}.reason")
    return None


def _ended(waiver: Waiver, on: str | None) -> Finding | None:
    if not waiver.until:
        return None
    what = f"the waiver of {waiver.rule} at {waiver.at}"
    if not is_date(waiver.until):
        text = f"{what} ends on '{waiver.until}', which is no date"
        return _finding("WAIVE-003", "warn", waiver, text, "Write year-month-day, as in 2027-03-31.")
    if on is None:
        text = f"cannot tell: {what} ends on {waiver.until} and no day of judging is given"
        return _finding("WAIVE-003", "open", waiver, text, "Give the day with --on.", missing="--on")
    if on > waiver.until:  # both are year-month-day, so text order is date order
        text = f"{what} ended on {waiver.until}"
        return _finding("WAIVE-003", "warn", waiver, text, "Mend the cause, or look at it again and set a new end.")
    return None


def _unused(waiver: Waiver, text: str) -> Finding:
    return _finding("WAIVE-002", "warn", waiver, text, "Take the waiver out.")


def _finding(rule: str, verdict: Verdict, waiver: Waiver, text: str, remedy: str, *, missing: str = "") -> Finding:
    return engine_finding(
        rule, verdict=verdict, at=waiver.path, line=waiver.line, message=text, remedy=remedy, missing=missing
    )


def is_date(text: str) -> bool:
    """True for a day written year-month-day.

    >>> is_date("2027-01-15"), is_date("2027-02-30"), is_date("15.1.2027"), is_date("20270115")
    (True, False, False, False)
    """
    try:
        return date.fromisoformat(text).isoformat() == text
    except ValueError:
        return False
