"""What may be accepted of a reading, in words."""

from __future__ import annotations

from setupcheck.record import record


@record
class Accept:
    """What may be accepted of a reading, and the requirement that limits it (empty where none does)."""

    what: str
    by: str = ""


FREE = Accept("not critical")
LOST = "nothing here alone brings {} inside"


def span(low: str, high: str) -> str:
    """Both ends with their unit once.

    >>> span("-20 um", "+16 um"), span("0.9 mm", "1 in")
    ('-20 to +16 um', '0.9 mm to 1 in')
    """
    number, _, unit = low.rpartition(" ")
    return f"{number} to {high}" if high.endswith(f" {unit}") else f"{low} to {high}"
