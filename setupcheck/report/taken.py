"""How much of a pass rests on defaults: said beside the verdict, where their open findings are waived or out of sight."""

from __future__ import annotations

from setupcheck.jobfile.reading import LoadedJob
from setupcheck.quantities.left_out import left_out


def standing_on(loaded: LoadedJob) -> str:
    """`on 3 defaults`: what a pass adds where anything was taken; empty where all is written."""
    many = len(left_out(loaded))
    return f"on {many} default{'s' if many > 1 else ''}" if many else ""
