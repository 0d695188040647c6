"""A division test against the plan, in words: the verdict, each wave with its likely owner, what truing the teeth would bring."""

from __future__ import annotations

import math
from collections.abc import Iterator

from setupcheck.flow import ReadBack
from setupcheck.ledger.running import AsItRuns
from setupcheck.notation import show
from setupcheck.quantities.against import PUZZLING, Against, Answer, WaveAgainst
from setupcheck.quantities.book import Open
from setupcheck.quantities.scopes import stack_of
from setupcheck.report.wording import finer, title_of, wrap
from setupcheck.rulebook.judging import judge

OWNERS_SHOWN = 3
"""Likely owners of a wave that the text names. Our choice."""


def verdict(found: ReadBack) -> str:
    """pass, warn or fail, the worst of all requirements; open where plan, test or instrument leave one without an answer."""
    a = found.against
    if isinstance(a, Open) or not a.answers or found.reduced.verdict != "told":
        return "open"
    judged = [judgement(one) for one in a.answers if one.plan.stack.high is not None or one.plan.stack.low is not None]
    return max(judged, key=ORDER.index, default="open")


ORDER = ("pass", "warn", "open", "fail")
"""From good to bad, as findings are ordered."""


def judgement(one: Answer) -> str:
    """A measured figure against the job's limit with its uncertainty as guard band (ISO 14253-1); open without an uncertainty."""
    stack = one.plan.stack
    if one.u is None or not math.isfinite(one.u) or (stack.high is None and stack.low is None):
        return "open"
    return judge(one.value, low=stack.low, high=stack.high, level="fail", standard_uncertainty=one.u).verdict


def against_the_plan(found: ReadBack) -> Iterator[str]:
    """The lines of the report."""
    a = found.against
    yield "AGAINST THE PLAN"
    if isinstance(a, Open):
        reason = a.because or f"the plan's figure is open: fill {', '.join(a.missing)}"
        yield from wrap(reason, first="  - ", rest="    ")
        return
    for one in a.answers:
        yield from _answer(found, one)
    yield from _how_sure(a)
    yield from _within_a_pitch(found, a)
    if found.reduced.verdict != "told":
        yield from wrap("no owner is named while the test itself is open", first="  - ", rest="    ")
        return
    calm = [one for one in a.waves if one.wave.harmonic > 1.0 and _as_planned(one)]
    for wave in a.waves:
        if wave not in calm:
            yield from _wave(found, wave)
    if calm:
        yield from wrap(f"{', '.join(one.wave.name for one in calm)}: as planned", first="  ", rest="      ")
    yield from _move(found, a)


def _as_planned(one: WaveAgainst) -> bool:
    return not one.wave.open and (one.low <= 0.0 if one.explained is None else one.explained.beyond >= PUZZLING)


def _answer(found: ReadBack, one: Answer) -> Iterator[str]:
    stack = one.plan.stack
    unit, digits = _unit(found, stack.unit, stack.digits)
    limit = "" if stack.high is None else f", limit {show(stack.high, unit, digits)}"
    sure = "" if one.u is None else f" (uncertainty {show(2.0 * one.u, unit, digits)}, k = 2)"
    word = judgement(one) if found.reduced.verdict == "told" else "open"
    text = (
        f"{word.upper()}   {title_of(one.scope)} as measured {show(one.value, unit, digits)}{sure}{limit}; the plan has "
        f"{show(one.plan.combined.worst.high, unit, digits)} at its worst and stays under "
        f"{show(one.plan.combined.likely.high, unit, digits)} in {found.loaded.job.confidence * 100:g} of 100"
    )
    yield from wrap(text, first="  ", rest="      ")


def _how_sure(a: Against) -> Iterator[str]:
    if any(one.u is None for one in a.answers):
        yield from wrap(
            f"the scatter of the readings leaves the range uncertain by {show(a.scatter, 'arcsec', 1)} (k = 2); what the "
            "standard and its centring add nobody says: judged with --instrument, as in --instrument 1.5arcsec",
            first="  ", rest="      ",
        )  # fmt: skip
    if a.read < a.of:
        yield from wrap(
            f"read at {a.read} of {a.of} places: what the others are off is not in it", first="  ", rest="      "
        )


def _within_a_pitch(found: ReadBack, a: Against) -> Iterator[str]:
    """What readings at whole pitches leave out of a figure that has the gaps' own error: the plan's, as one figure has it."""
    one = next((x for x in a.answers if isinstance(x.plan.figure, AsItRuns)), None)
    if one is None or found.reduced.places < found.reduced.stations:
        return
    assert isinstance(one.plan.figure, AsItRuns)
    unit, digits = _unit(found, one.plan.stack.unit, one.plan.stack.digits)
    most = one.plan.figure.within_a_pitch()
    yield from wrap(
        f"read at whole pitches: what each gap does within its pitch, planned at most {show(most, unit, digits)} of "
        f"{one.plan.stack.require.what}, is not in it",
        first="  ", rest="      ",
    )  # fmt: skip


def _wave(found: ReadBack, one: WaveAgainst) -> Iterator[str]:
    unit, digits = finer("um", inches=found.loaded.job.units == "in")
    name, usual = one.wave.name, show(one.usual, unit, digits)
    if one.wave.open:
        yield from wrap(f"{name}: open, {one.wave.open}", first="  ", rest="      ")
        return
    text = (
        f"{name}: {show(one.measured, unit, digits)} along the pitch circle; the plan stays under {usual} in 95 of 100"
    )
    told = one.explained
    if told is None:
        text += ". Nothing of the plan reaches this wave" if one.low > 0.0 else ""
    elif told.beyond >= PUZZLING:
        text += ". As planned"
    else:
        rarely = "less than 0.1" if told.beyond < 0.001 else f"{told.beyond * 100:.1f}"
        named = [o for o in told.owners if o.odds >= 0.01][:OWNERS_SHOWN]
        odds = ", ".join(f"{o.name} {o.odds * 100:.0f} %" for o in named)
        text += f". A plan that is kept reads so far off in {rarely} of 100. Whose it is: {odds}"
        if not told.told_apart:
            text += ". The first two are not told apart: write known directions (high_at) into the plan, or measure one of them"
    yield from wrap(text, first="  ", rest="      ")


def _move(found: ReadBack, a: Against) -> Iterator[str]:
    off = found.reduced.eccentric
    if off is not None and off.looks == "division":
        yield from wrap(
            "Dividing made the first wave, alike on both flanks: teeth moved off their axis would put one flank right and make "
            "the backlash swing",
            first="  ",
            rest="      ",
        )
        return
    if off is not None and off.looks == "neither":
        yield from wrap(
            "The flanks differ otherwise than those of an eccentric ring alone: truing the teeth's axis would not put both right",
            first="  ",
            rest="      ",
        )
        return
    if a.move is None or not a.answers:
        return
    yield from wrap(
        "A standard off the axis shows as an eccentric wheel: turn it half round on the table and read again before anything is "
        "bored. What turns with it is its own",
        first="  ",
        rest="      ",
    )
    fine = finer("um", inches=found.loaded.job.units == "in")
    falls = []
    for answer in a.answers:
        stack = answer.plan.stack
        unit, digits = _unit(found, stack.unit, stack.digits)
        now, then, most = (show(answer.value * share, unit, digits) for share in (1.0, a.move.then, a.move.most))
        falls.append(f"{stack.require.what} falls from {now} to {then}, at most {most}")
    those, one = found.of.many.capitalize(), found.of.one
    yield from wrap(
        f"{those} stand {show(a.move.amount, *fine)} towards {one} {a.move.tooth} off the axis of use, known to "
        f"{show(a.move.within, *fine)}. Put true to it (held again by their pitch circle and bored, the bore then as much "
        f"towards that {one}, or shifted as much the other way): "
        f"{'; '.join(falls)}",
        first="  ",
        rest="      ",
    )


def on_a_workpiece(found: ReadBack, diameter: float) -> str:
    """The range of the test as an arc on a workpiece [mm], in words."""
    unit, digits = finer("um", inches=found.loaded.job.units == "in")
    arc = found.reduced.range * diameter / 2.0
    size = show(diameter, "in", 3) if found.loaded.job.units == "in" else show(diameter, "mm", 1)
    return f"on a workpiece of {size} diameter the range is {show(arc, unit, digits)}"


def _unit(found: ReadBack, unit: str, digits: int) -> tuple[str, int]:
    if found.loaded.job.units == "in" and unit in ("um", "mm"):
        return finer(unit, inches=True)
    return unit, digits


def as_data(found: ReadBack) -> dict[str, object]:
    """The same as plain data: lengths um, each figure in its own unit."""
    a = found.against
    if isinstance(a, Open):
        return {"verdict": "open", "missing": list(a.missing), "because": a.because}
    return {
        "verdict": verdict(found),
        "answers": [_answer_data(found, one, a) for one in a.answers],
        "places_read": a.read,
        "places": a.of,
        "waves": [_wave_data(one) for one in a.waves],
        "trued": None
        if a.move is None
        else {"um": _shown(a.move.amount, "um"), "within_um": _shown(a.move.within, "um"), "tooth": a.move.tooth},
    }


def _answer_data(found: ReadBack, one: Answer, a: Against) -> dict[str, object]:
    stack = stack_of(one.scope)
    return {
        "requirement": one.scope.key,
        "verdict": judgement(one) if found.reduced.verdict == "told" else "open",
        "unit": stack.unit,
        "measured": _shown(one.value, stack.unit),
        "uncertainty": _shown(None if one.u is None else 2.0 * one.u, stack.unit),
        "limit": {"low": _shown(stack.low, stack.unit), "high": _shown(stack.high, stack.unit)},
        "planned": {
            "worst": _shown(one.plan.combined.worst.high, stack.unit),
            "likely": _shown(one.plan.combined.likely.high, stack.unit),
        },
        "trued": None if a.move is None else _shown(one.value * a.move.then, stack.unit),
        "trued_at_most": None if a.move is None else _shown(one.value * a.move.most, stack.unit),
    }


def _wave_data(one: WaveAgainst) -> dict[str, object]:
    told = one.explained
    return {
        "harmonic": one.wave.harmonic,
        "um": [_shown(x, "um") for x in (one.measured, one.low, one.high)],
        "planned_95_um": _shown(one.usual, "um"),
        "beyond": None if told is None else float(f"{told.beyond:.6g}"),
        "owners": [] if told is None else [{"owner": o.name, "odds": float(f"{o.odds:.4g}")} for o in told.owners],
        "open": one.wave.open,
    }


def _shown(value: float | None, unit: str) -> float | None:
    from setupcheck.notation import FACTOR

    if value is None or not math.isfinite(value):
        return None
    return float(f"{value * FACTOR[unit]:.9g}") + 0.0
