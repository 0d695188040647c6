"""The job's `checked` list held against the cautions that were triggered: a signature that answers nothing is told."""

from __future__ import annotations

from collections.abc import Sequence

from setupcheck.notation import nearest
from setupcheck.rulebook.engine import engine_finding
from setupcheck.rulebook.records import Answer, CautionLine, Finding, RuleBook

SHORTEST_WORD = 4
"""Letters that a word of a caution's id has to have to tell anything. Source: our screening choice."""


def unanswered_entries(answers: Sequence[Answer], *, lines: Sequence[CautionLine], rulebook: RuleBook) -> list[Finding]:
    """CHECK-001 for every entry that signs for no triggered caution, or is signed by nobody."""
    ids = [caution.id for caution in rulebook.cautions]
    asked = {(line.id, line.op) for line in lines}
    found: list[Finding] = []
    for answer in answers:
        where = "the job" if answer.op is None else f"op {answer.op}"
        if answer.caution not in ids:
            near = _meant(answer.caution, ids, [line.id for line in lines if line.op == answer.op])
            text = f"there is no caution '{answer.caution}' to check off"
            remedy = f"Did you mean {near}?" if near else "Take the entry out."
        elif (answer.caution, answer.op) not in asked:
            ops = sorted({line.op for line in lines if line.id == answer.caution and line.op is not None})
            text = f"{answer.caution} is not asked at {where}"
            remedy = f"It is asked at op {', '.join(map(str, ops))}." if ops else "Take the entry out."
        elif not answer.by.strip():
            text = f"{answer.caution} at {where} is checked by nobody"
            remedy = "Write initials under by."
        else:
            continue
        found.append(
            engine_finding("CHECK-001", verdict="warn", at=answer.path, line=answer.line, message=text, remedy=remedy)
        )
    return found


def _meant(word: str, ids: Sequence[str], asked: Sequence[str]) -> str | None:
    """The caution a mistyped one means: the nearest spelling, else the id with most of its words, rather one asked there."""
    near = nearest(word, ids)
    if near:
        return near
    parts = {part for part in word.lower().replace("_", "-").split("-") if len(part) >= SHORTEST_WORD}
    shared = {name: sum(any(_alike(a, b) for b in name.split("-")) for a in parts) for name in ids}
    best = max(shared.values(), default=0)
    likely = [name for name in ids if shared[name] == best] if best else []
    return next((name for name in likely if name in asked), likely[0] if likely else None)


def _alike(one: str, other: str) -> bool:
    """`gloves` and `glove` are one word."""
    return len(other) >= SHORTEST_WORD and (one.startswith(other) or other.startswith(one))
