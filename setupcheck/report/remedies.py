"""Remedies in shop words: the one found for a stack, else the general one of its rule."""

from __future__ import annotations

from typing import TYPE_CHECKING

from setupcheck.flow import Review
from setupcheck.notation import show
from setupcheck.quantities.backlash_read import PATH
from setupcheck.quantities.book import Known
from setupcheck.quantities.finished import finished
from setupcheck.report.causes import cause_in_parts
from setupcheck.report.wording import finer, on_the_dial
from setupcheck.report.worked_out import filled
from setupcheck.rulebook import Finding

if TYPE_CHECKING:
    from setupcheck.quantities.judged import Result
    from setupcheck.quantities.remedies import Remedy

STACK_RULES = ("STACK-001", "STACK-002")
"""Rules whose remedy is worked out from the stack itself."""

ELSE = "No one or two entries close it. Better work on the biggest causes, or ask for less."
MARK_MORE = (
    "Grind the insert to the envelope, set the head to the lead angle, and take the smallest cutter circle that keeps the ends "
    "of the face clear (cutters, tip_radius), since a larger one marks less; or ask for less."
)
ELSE_DONE = "No entry of a setup still to come closes it. See what can still be moved, or measure closer what is done."
MEASURING = "MEASURE"
"""Rules whose remedy is another reading, which a setup that is done still allows."""
INSTEAD = {
    "backlash": "No one or two entries close it. Measure insert, thread and centre distance closer, or ask for less.",
    "contact-area": MARK_MORE,
    "contact-length": MARK_MORE,
    "torque": "Take more interference, a longer seat or better friction, add a key or pins, or ask for less.",
}
"""What is left of requirements that no holding changes."""
READ_CLOSER = "Read it closer or at more places: the swing itself, {read.swing}, is inside."


def remedy_in_words(found: Review, finding: Finding) -> str:
    """What to do about a finding; nothing of an open one that waits for a value or cannot be told, for its key is printed."""
    judged = finding.limit is not None and not finding.missing
    if finding.verdict == "pass" or (finding.verdict == "open" and not judged):
        return ""
    if finding.rule in STACK_RULES and finding.key in found.remedies:
        told = _worked_out(found.remedies[finding.key], inches=found.book.inches)
        return told or _last_resort(found, finding)
    if finding.op in finished(found.loaded.job) and not finding.rule.startswith(MEASURING):
        return f"Op {finding.op} is done; for the next part: {finding.remedy}"
    return finding.remedy


def _last_resort(found: Review, finding: Finding) -> str:
    """What is left where nothing simple does it; one holding helps only where several operations have their share."""
    result = found.results.get(finding.key)
    if result is None:
        return finding.remedy
    if any(path == PATH for share in result.combined.shares for path in share.cause.paths):
        return _as_read(found, result)
    if found.loaded.job.done is not None:
        return ELSE_DONE
    instead = INSTEAD.get(result.stack.require.what)
    if instead is not None:
        return instead
    ops = {share.cause.op for share in result.combined.shares} - {None}
    return finding.remedy if len(ops) > 1 else ELSE


def _as_read(found: Review, result: Result) -> str:
    """What is left of a backlash that was read on the finished wheel: no entry of the route moves it any more."""
    scope = found.book.instances("mesh")[0]
    swing, stack = found.book.get("read.swing", scope), result.stack
    itself = swing.value if isinstance(swing, Known) and stack.require.what == "backlash-swing" else None
    if isinstance(itself, float) and stack.high is not None and itself <= stack.high:
        return filled(found, scope, READ_CLOSER)
    return filled(found, scope, "{read.truing}") or "Read the backlash again at more places."


def _worked_out(remedy: Remedy, *, inches: bool) -> str:
    """The smallest change in words; empty where nothing simple does it."""
    if remedy.shim is not None:
        return f"{remedy.shim.words(inches=inches)} ({remedy.shim.entry(inches=inches)})."
    if remedy.swap is not None:
        swap = remedy.swap
        return (
            f"Hold op {swap.op} on {swap.on} instead of {swap.was}, as op {swap.like} does, so that what lies between the two "
            f"drops out, and true it to {on_the_dial(swap.reading, inches=inches)} ({swap.path})."
        )
    if remedy.grip:
        return f"Let the shoulder end grip first ({remedy.grip}: shoulder-end)."
    if remedy.insert is not None:
        unit, digits = ("in", 4) if inches else ("mm", 3)
        wide, now = (show(value, unit, digits) for value in (remedy.insert.needed, remedy.insert.now))
        return f"Make the insert {wide} wide instead of {now} ({remedy.insert.path})."
    if remedy.again is not None:
        unit, digits = ("thou", 1) if inches else ("um", 0)
        more = show(abs(remedy.again.deeper), unit, digits)
        if remedy.again.in_place:
            way = "farther apart" if remedy.again.deeper > 0.0 else "closer together"
            return f"Bring the axes {more} {way} (mesh.centre_distance), and read the backlash again ({remedy.again.path})."
        if remedy.again.deeper > 0.0:
            return f"Cut the gaps {more} deeper on the radius with the same insert, and measure again ({remedy.again.path})."
        return f"Gaps are not cut narrower: bring the axes {more} closer together (mesh.centre_distance), or cut another wheel."
    told = []
    if remedy.own:
        each = (
            f"{cause_in_parts(c.cause.key)[1]} up to {show(c.needed, c.unit, 1)} instead of {show(c.now, c.unit, 1)} ({c.path})"
            for c in remedy.own
        )
        told.append("put the head's own record in place of the typical values: " + ", ".join(each))
    for change in remedy.changes:
        unit, digits = finer(change.unit, inches=inches)
        where, what = cause_in_parts(change.cause.key)
        now, needed = (show(value, unit, digits) for value in (change.now, change.needed))
        places = ", ".join((change.path, *change.also))
        if change.is_typical:
            do = f"put your own record of the {what} in place of the typical {now}, up to {needed} ({places})"
        else:
            do = f"bring the {what} from {now} down to {needed} ({places})"
        told.append(f"{where + ': ' if where else ''}{do}")
    text = "; and ".join(told)
    return text[:1].upper() + text[1:] + "." if text else ""
