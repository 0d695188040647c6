"""Remedies in shop words: the one found for a stack, else the general one of its rule."""

from __future__ import annotations

from typing import TYPE_CHECKING

from setupcheck.flow import Review
from setupcheck.notation import show
from setupcheck.report.causes import cause_in_parts
from setupcheck.report.wording import finer, on_the_dial
from setupcheck.rulebook import Finding

if TYPE_CHECKING:
    from setupcheck.quantities.remedies import Remedy

STACK_RULES = ("STACK-001", "STACK-002")
"""Rules whose remedy is worked out from the stack itself."""


def remedy_in_words(found: Review, finding: Finding) -> str:
    """What to do about a finding; of an open one, what to fill."""
    if finding.verdict in ("open", "pass"):
        return ""
    if finding.rule in STACK_RULES and finding.key in found.remedies:
        return _worked_out(found.remedies[finding.key], inches=found.book.inches) or finding.remedy
    return finding.remedy


def _worked_out(remedy: Remedy, *, inches: bool) -> str:
    """The smallest change in words; empty where nothing simple does it."""
    if remedy.shim is not None:
        return f"{remedy.shim.words(inches=inches)} ({remedy.shim.path})."
    if remedy.swap is not None:
        swap = remedy.swap
        return (
            f"Hold op {swap.op} on {swap.on} instead of {swap.was}, as op {swap.like} does, so that what lies between the two "
            f"drops out, and true it to {on_the_dial(swap.reading, inches=inches)} ({swap.path})."
        )
    told = []
    for change in remedy.changes:
        unit, digits = finer(change.unit, inches=inches)
        where, what = cause_in_parts(change.cause.key)
        told.append(
            f"{where + ': ' if where else ''}bring the {what} from {show(change.now, unit, digits)} down to "
            f"{show(change.needed, unit, digits)} ({', '.join((change.path, *change.also))})"
        )
    text = "; and ".join(told)
    return text[:1].upper() + text[1:] + "." if text else ""
