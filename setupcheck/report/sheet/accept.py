"""What may be accepted of a reading, beside its box: the gate of its key. Lengths mm."""

from __future__ import annotations

from setupcheck.flow import Review


def accepted(found: Review, key: str) -> str:
    """The gate of one entry in words; empty where no requirement looks at it closely."""
    return ""
