"""Cautions: the safety lines that operations trigger. They are printed whatever the findings say.

A caution whose trigger cannot be settled (a fact or number is missing) is printed too, and says so: for a safety
line, not knowing is no reason to keep quiet. Each is printed once an operation.
"""

from __future__ import annotations

from collections.abc import Sequence

from setupcheck.rulebook.facts import applies
from setupcheck.rulebook.judging import reaches
from setupcheck.rulebook.limits import limit_of
from setupcheck.rulebook.needs import Book, Facts, Missing, S, read
from setupcheck.rulebook.records import Answer, Caution, CautionLine, Reference, RuleBook

TO_CHECK = "to check"
TO_MIND = "to mind"


def triggered(
    rulebook: RuleBook, book: Book[S], facts: Facts[S], *, answers: Sequence[Answer] = ()
) -> tuple[CautionLine, ...]:
    """Every caution the job's operations trigger: stop-and-check first, then by operation, then in file order.

    What belongs to the whole job comes last.
    """
    lines: dict[tuple[str, int | None], CautionLine] = {}
    for caution in rulebook.cautions:
        for at in book.instances(caution.trigger.per):
            doubt = _doubt(caution, book, facts, at)
            if doubt is None:
                continue
            key = (caution.id, at.op)
            if key in lines and not (lines[key].because and not doubt):  # a certain trigger replaces a doubtful one
                continue
            lines[key] = CautionLine(
                id=caution.id,
                op=at.op,
                severity=caution.severity,
                state=_state(caution, at.op, answers),
                text=caution.text,
                source=source_text(caution, rulebook),
                because=doubt,
            )
    order = {caution.id: number for number, caution in enumerate(rulebook.cautions)}
    return tuple(
        sorted(
            lines.values(),
            key=lambda c: (c.severity != "stop-and-check", c.op is None, c.op if c.op is not None else 0, order[c.id]),
        )
    )


def source_text(caution: Caution, rulebook: RuleBook) -> str:
    """Sources of a caution as one line: title, place, evidence."""
    parts = []
    for source in caution.sources:
        reference: Reference = rulebook.references[source.ref]
        place = f", {source.place}" if source.place else ""
        parts.append(f"{reference.title}{place} ({source.kind})")
    return "; ".join(parts)


def _doubt(caution: Caution, book: Book[S], facts: Facts[S], at: S) -> str | None:
    """None: not triggered. Empty: triggered. Text: cannot be ruled out, and why."""
    trigger = caution.trigger
    fits = applies(trigger.when, facts, at)
    if fits.answer == "no":
        return None
    doubt = fits.doubt if fits.answer == "unknown" else ""
    if not trigger.quantity:
        return doubt
    value = read(book, trigger.quantity, at)
    if value is None:
        return None
    if isinstance(value, Missing):
        return doubt or _why(value)
    assert trigger.at_least is not None, "loading pairs every quantity of a trigger with its limit"
    limit = limit_of(trigger.at_least, book, at)
    if limit is None:
        return None
    if isinstance(limit, Missing):
        return doubt or _why(limit)
    if isinstance(value.value, str):
        raise TypeError(f"{trigger.quantity} at {at.key!r} is a word, caution {caution.id} needs a number")
    return doubt if reaches(value.value, limit.value) else None


def _why(missing: Missing) -> str:
    return f"not stated: {missing.missing[0]}" if missing.missing else missing.because or "its number is not known"


def _state(caution: Caution, op: int | None, answers: Sequence[Answer]) -> str:
    answer = next((a for a in answers if a.caution == caution.id and a.op == op and a.by.strip()), None)
    if answer is not None:
        return f"checked by {answer.by.strip()}"
    return TO_CHECK if caution.severity == "stop-and-check" else TO_MIND
