"""Findings of the engine itself, about the job's `waive` and `checked` lists. They come from no rule file."""

from __future__ import annotations

from setupcheck.record import record
from setupcheck.rulebook.records import Finding, Source, Verdict


@record
class EngineRule:
    """A check of the engine: id, title, what it gives, and why."""

    id: str
    title: str
    gives: str
    why: str


ENGINE_RULES: tuple[EngineRule, ...] = (
    EngineRule(
        "WAIVE-001",
        "A waiver names a rule, an instance and a reason",
        "fail",
        "A waiver that names nothing looks like an answer and is none; a caution is about people and is never waived.",
    ),
    EngineRule(
        "WAIVE-002",
        "A waiver has something to waive",
        "warn",
        "A waiver left behind would hide the next trouble at the same place.",
    ),
    EngineRule(
        "WAIVE-003",
        "A waiver has not ended",
        "warn, or open without a day of judging",
        "An end was set so that somebody looks again; without the day nobody can say whether it has come.",
    ),
    EngineRule(
        "CHECK-001",
        "What is checked off was asked",
        "warn",
        "A signature at the wrong operation leaves the caution that was meant unanswered.",
    ),
)

_SOURCE = (Source("ours", "waivers and sign-off", "screening choice"),)


def engine_finding(
    rule_id: str, *, verdict: Verdict, at: str, line: int, message: str, remedy: str, missing: str = ""
) -> Finding:
    """A finding about an entry of the job's own lists, standing at that entry."""
    rule = next(rule for rule in ENGINE_RULES if rule.id == rule_id)
    return Finding(
        rule=rule.id,
        title=rule.title,
        at=at,
        key=at,
        op=None,
        line=line,
        verdict=verdict,
        quantity="",
        value=None,
        limit=None,
        margin=None,
        unit="",
        digits=0,
        missing=(missing,) if missing else (),
        message=message,
        remedy=remedy,
        why=rule.why,
        sources=_SOURCE,
        evidence=_SOURCE[0].kind,
    )
