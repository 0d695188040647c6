"""What is told once a new job file is written: its verdict, what fails in it, what to do next."""

from __future__ import annotations

import shlex
from typing import TYPE_CHECKING

from setupcheck.errors import printable
from setupcheck.report.text import verdict_lines
from setupcheck.report.wording import wrap

if TYPE_CHECKING:
    from setupcheck.flow import Review

MOST_TOLD = 5
"""Findings told after writing. Source: our choice; the review tells all."""


def as_started(found: Review, file: str, text: str) -> str:
    """A few lines for a terminal.  text  of the file, whose guesses are counted"""
    lines = [*wrap(f"written: {printable(file)}"), *verdict_lines(found)]
    wrong = [f for f in found.evaluation.findings if f.verdict in ("fail", "open")]
    for finding in wrong[:MOST_TOLD]:
        lines += wrap(f"{finding.verdict} {finding.rule}: {finding.message}", first="  ", rest="      ")
    if len(wrong) > MOST_TOLD:
        lines.append(f"  and {len(wrong) - MOST_TOLD} more")
    guesses = sum("GUESS" in line for line in text.splitlines())
    cautions = sum(c.severity == "stop-and-check" and not c.answered for c in found.evaluation.cautions)
    typical = len({name for finding in found.evaluation.findings for name in finding.rests_on})
    replace = [f"the figures beside GUESS ({guesses} lines)"] if guesses else ["every figure: all are made up"]
    replace += [f"the typical value{'s' if typical > 1 else ''} in use ({typical})"] if typical else []
    lines += wrap(f"Replace {', and '.join(replace)}.", first="  ", rest="  ")
    if cautions:
        lines += wrap(
            f"Answer the cautions to stop and check ({cautions}) at the end of the file, once each is done.",
            first="  ",
            rest="  ",
        )
    lines.append(f"Next: setupcheck review {shlex.quote(printable(file))}")
    return "\n".join(lines) + "\n"
