"""The blocks every new job file shares: its head, its joint, its requirements with limits the plan can keep. Lengths mm."""

from __future__ import annotations

import textwrap
from collections.abc import Iterable, Sequence
from typing import Literal

from setupcheck.notation import plain
from setupcheck.record import record
from setupcheck.starting.answers import Answers
from setupcheck.starting.figures import ROOM_IN_LIMITS, Figures
from setupcheck.starting.layout import Measure, nice, quoted_text

Way = Literal["at_most", "at_least", "between", "stated"]

WIDEST = 118
"""Characters of a comment. Source: our choice."""
LEAST_LIMIT = 0.005
"""Smallest limit written where the plan's worst is less [mm]. Source: our choice; what a workshop can read with ease."""


@record
class Ask:
    """One requirement.

    says  what it is of, as in `what: run-out, of: gear.teeth`;  way  its kind of limit, or `stated` where `says` has it
    why   a comment behind it
    """

    says: str
    way: Way = "at_most"
    why: str = ""


def head(answers: Answers, opening: Iterable[str], made_by: str) -> str:
    """The lines above the parts.  opening  what this plan is;  made_by  the command that begins the same file again"""
    return f"""\
{commented(opening)}
#
# Begun with:
{commented(_wrapped(made_by))}
# Nothing here was measured. What stands beside GUESS is a usual figure, to be replaced by your own. Where a device has no
# figure of its own, as in {{device: four-jaw}}, a typical one stands in, and the review says so each time; write yours over
# it, as in runout: 8 um.
setupcheck: 1
title: {quoted_text(answers.title)}
job: {quoted_text(answers.job)}
units: {answers.units}          # of sizes and positions; an error always carries its own unit
room: 20 degC
confidence: 95 %
"""


def _wrapped(command: str) -> list[str]:
    return textwrap.wrap(
        command, WIDEST, break_long_words=False, break_on_hyphens=False, initial_indent="  ", subsequent_indent="    "
    )


def commented(lines: Iterable[str]) -> str:
    """Lines as comments."""
    return "\n".join(f"# {line}" for line in lines)


def requirements(asks: Sequence[Ask], answers: Answers, figures: Figures, about: str) -> str:
    """The block `require`, the first of them with the limit that was asked for."""
    asked = str(answers.values.get("tightest", "plan"))
    worst = {index: (low, high, unit) for index, low, high, unit in figures.worst}
    lines = []
    for index, ask in enumerate(asks):
        limit = _limit(ask, worst.get(index), answers.measure)
        if index == 0 and asked != "plan":
            limit = f", at_most: {asked}"
        lines.append(f"  - {{{ask.says}{limit}}}{f'    # {ask.why}' if ask.why else ''}")
    return f"""
# What the finished part must meet{about}.
# Limits that were not asked for are GUESS: what this plan keeps at its worst, with some room. Write what the drawing asks.
require:
{chr(10).join(lines)}
"""


def _limit(ask: Ask, worst: tuple[float, float, str] | None, measure: Measure) -> str:
    if ask.way == "stated":
        return ""
    if worst is None:
        none = "0 %" if "contact-area" in ask.says else "0 mm"
        return {"at_most": ", at_most: 90 mm", "at_least": f", at_least: {none}"}.get(
            ask.way, ", between: [-90 mm, 90 mm]"
        )
    low, high, unit = worst
    if unit == "%":
        return f", at_least: {max(int(low * 100.0 * 0.85), 1)} %"
    if ask.way == "at_least":
        return f", at_least: {measure.limit(max(low, 0.0) / ROOM_IN_LIMITS, up=False)}"
    if ask.way == "between":
        return f", between: [{', '.join(_ends(low, high, measure))}]"
    return f", at_most: {measure.limit(max(high * ROOM_IN_LIMITS, LEAST_LIMIT))}"


def _ends(low: float, high: float, measure: Measure) -> tuple[str, str]:
    """Two limits round a span [mm], with room on either side; a span above zero stays there."""
    unit, name = (1.0, "mm") if measure.units == "mm" else (25.4, "in")
    room = nice(max(0.08 * (high - low), 0.001) / unit, up=True)
    least = low / unit - room
    if 0.0 <= low and least < 0.0:
        least = 0.5 * low / unit
    digits = 4 if measure.units == "mm" else 5
    return f"{least:.{digits}f} {name}", f"{high / unit + room:.{digits}f} {name}"


def carried(torque: float, along: float) -> str:
    """What a joint must carry, as written.

    torque  [N mm];  along  force along the axis [N], rounded up

    >>> carried(21000.0, 53.2)
    '{torque: 21 N m, axial_force: 60 N}'
    """
    return f"{{torque: {torque / 1000.0:g} N m, axial_force: {plain(nice(along, up=True))} N}}"


def shrunk(
    answers: Answers,
    figures: Figures,
    *,
    outer: str,
    inner: str,
    stop: str,
    op: int,
    why: str,
    along: float,
    pushed_by: str,
) -> str:
    """The setup that joins two parts hot.

    stop  the entry that says where they meet;  along  force along the axis [N];  pushed_by  where it comes from
    """
    measure, load = answers.measure, carried(answers.number("torque"), along)
    gauge = f", gauge: {measure.exact(figures.gauge)}" if figures.gauge is not None else ""
    heat = figures.heat if figures.heat is not None else 150.0
    return f"""\
  - op: {op}          # {why}
    join:
      outer: {outer}
      inner: {inner}
      by: shrink
      square: bore                   # a seat as long as this rules the lean, not the shoulder
      fit_error: {measure.error(0.003)}              # GUESS: what the seat's own form lets the bore run out
      stop: {stop}
      grips_first: shoulder-end      # air on the shoulder end first, or the hub draws back as it cools
      # As hot as the tightest pair needs, with what an oven may be off. The gauge is tried in the hot bore before it goes on.
      heat: {{hub: {heat:g} degC, by: oven, oven_error: 10 degC, carry: 10 s{gauge}}}
      joint: degreased
      must_carry: {load}    # GUESS along the axis: {pushed_by}
      serves_at: [5 degC, 45 degC]   # GUESS: coldest and warmest the joint works at
"""


def slid(answers: Answers, *, outer: str, inner: str, stop: str, op: int) -> str:
    """The setup that slides one part on the other."""
    measure = answers.measure
    return f"""\
  - op: {op}          # slid on; the play as measured, or as the limits of both give it
    join:
      outer: {outer}
      inner: {inner}
      by: slide
      clearance: [{measure.error(0.003)}, {measure.error(0.015)}]     # GUESS: least and most play on the diameter
      square: bore
      stop: {stop}
"""
