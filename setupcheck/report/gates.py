"""What to accept as text and data: dial readings with the directions that allow more, and lengths. Lengths mm."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from typing import TYPE_CHECKING

from setupcheck.notation import FACTOR, show
from setupcheck.quantities.finished import finished
from setupcheck.quantities.gates import Gate, Limit
from setupcheck.report.wording import FINE_BELOW, as_stated, clean, inwards, on_the_dial, title_of, wrap

if TYPE_CHECKING:
    from setupcheck.flow import Review
    from setupcheck.quantities.gate_bands import Band
    from setupcheck.quantities.length_gates import LengthGate
    from setupcheck.report.review_types import GateData, LengthData

NOT_CRITICAL = 10.0
"""A reading may be so many times its plan: no number is worth printing. Source: our screening choice."""

GOOD_ENOUGH = 4.0
"""A reading that is trued with care may be so many times its plan: the care is better spent elsewhere. Source: our screening
choice, twice what `setupcheck remedy` asks for, as its lines stand in every review."""

_READINGS = {
    "square": "face run-out on {}",
    "and_centre": "run-out in the second plane on {}",
    "through": "run-out of {}",
    "fit": "run-out of {} on its seat",
    "sets": "run-out that the joint adds to {} as it sets",
    "bought": "{}, run-out as bought",
    "bought-face": "{}, face run-out as bought",
    "machine": "{}, run-out of its axis",
}


NEXT_SHOWN = 3
"""Requirements told beside the one that sets a gate, with --all. Source: our screening choice."""


def dials_in_words(found: Review, *, everything: bool = False) -> Iterator[str]:
    """The dial reading to accept at each hold still to come; with `everything` also what the next requirements allow."""
    over = finished(found.loaded.job)
    yield from _dials(found, [g for g in found.gates if not over.issuperset((g.op, *g.also))], everything)


def lengths_in_words(found: Review, *, everything: bool = False) -> Iterator[str]:
    """The length to accept at each entry still to come; with `everything` also touched diameters and the next requirements."""
    over = finished(found.loaded.job)
    yield from _lengths(found, [g for g in lengths_of(found, everything=everything) if g.op not in over], everything)


def _titles(found: Review) -> dict[str, str]:
    return {scope.key: title_of(scope) for scope in found.book.instances("stack")}


def lengths_of(found: Review, *, everything: bool) -> list[LengthGate]:
    """Lengths to accept; with `everything` also diameters that depths are counted from, which take longer."""
    from setupcheck.quantities.length_gates import length_gates, touched_gates

    gates = length_gates(found.loaded, found.results)
    return gates + (list(touched_gates(found.loaded, found.results, found.floor)) if everything else [])


def bands_of(found: Review, gate: Gate) -> tuple[Band, ...]:
    """Larger readings that pass near a direction; none for a gate that is far from any limit."""
    from setupcheck.quantities.gate_bands import bands

    return () if is_idle(gate) else bands(found.floor, found.results, gate)


# -- dial readings -----------------------------------------------------------------------------------------------------


def _dials(found: Review, gates: Sequence[Gate], everything: bool) -> Iterator[str]:
    if not gates:
        return
    inches, titles = found.book.inches, _titles(found)
    yield "DIAL READING TO ACCEPT, all else as planned"
    lost: dict[str, list[str]] = {}
    for gate in gates:
        title = titles.get(gate.by, gate.by)
        if gate.reading is not None and gate.reading <= 0.0:
            lost.setdefault(title, []).append(dial_in_words(gate))
        elif not is_idle(gate) and not is_enough(gate):
            text = _gate(gate, title, inches=inches) + near_in_words(bands_of(found, gate), gate, inches=inches)
            if everything:
                text += _others(gate.limits, gate.by, titles, gate.indicator, inches=inches)
            yield from wrap(text, first="  ", rest="      ")
    for title, dials in lost.items():
        yield from wrap(f"no reading alone brings {title} inside: {'; '.join(dials)}", first="  ", rest="      ")
    enough = [_enough(gate, inches=inches) for gate in gates if is_enough(gate)]
    if enough:
        yield from wrap(f"good enough already, do not indicate finer: {'; '.join(enough)}", first="  ", rest="      ")
    idle = [dial_in_words(gate) for gate in gates if is_idle(gate) and not is_enough(gate)]
    if idle:
        yield from wrap(f"not critical: {'; '.join(idle)}", first="  ", rest="      ")


def is_idle(gate: Gate) -> bool:
    """No requirement looks at this reading, or only from far away: a number would say nothing."""
    return gate.least <= 0.0 and (gate.reading is None or gate.reading > NOT_CRITICAL * gate.planned)


def is_enough(gate: Gate) -> bool:
    """It is trued with care, and an ordinary holding would do: the dial may show more than GOOD_ENOUGH times the plan."""
    return gate.careful and gate.least <= 0.0 and gate.reading is not None and gate.reading > GOOD_ENOUGH * gate.planned


def _enough(gate: Gate, *, inches: bool) -> str:
    """`op 20, run-out on outside (10 um planned, 228 um would do: a three-jaw chuck as it comes)`."""
    known = "measured" if gate.measured else "planned"
    would = on_the_dial(gate.reading or 0.0, inches=inches, step=gate.indicator)
    said = f"{as_stated(gate.planned, inches=inches)} {known}, {would} would do"
    return f"{dial_in_words(gate)} ({said}{_ordinary(gate)})"


def _ordinary(gate: Gate) -> str:
    """The chuck that needs no truing, where its typical run-out is below what would do."""
    from setupcheck.quantities.typical import typical

    chuck = typical("three-jaw", "runout")
    if gate.step == "square" or chuck is None or chuck.value > (gate.reading or 0.0):
        return ""
    return ": a three-jaw chuck as it comes"


def dial_in_words(gate: Gate) -> str:
    """`op 40, face run-out on seat`; `op 30 and 40, run-out on bore` where one device with its mark kept serves both."""
    what = _READINGS.get(gate.step, "run-out on {}").format(gate.on)
    if gate.op is None:
        return what
    return f"op {' and '.join(str(op) for op in dict.fromkeys((gate.op, *gate.also)))}, {what}"


def _gate(gate: Gate, by: str, *, inches: bool) -> str:
    stated = as_stated(gate.planned, inches=inches)
    high = f", high at {clean(gate.high_at)}" if gate.high_at else ""
    span = []
    if gate.least > 0.0:
        span.append(f"at least {on_the_dial(gate.least, inches=inches, up=True, step=gate.indicator)}")
    if gate.reading is not None:
        span.append(f"up to {on_the_dial(gate.reading, inches=inches, step=gate.indicator)}")
    allowed = " and ".join(span)
    said = f"measured {stated}, {allowed} would do{high}" if gate.measured else f"{allowed}{high} ({stated} planned)"
    text = f"{dial_in_words(gate)}: {said}"
    if gate.reading is not None:
        text += f", set by {by}"
    return text + ("; this high spot takes away from another" if gate.least > 0.0 else "")


def near_in_words(bands: Sequence[Band], gate: Gate, *, inches: bool) -> str:
    """`; up to 7.4 um if it is high within 45 deg of tooth 32, up to 8.1 um within 20 deg`, largest last; each step once."""
    shown = on_the_dial(gate.reading or 0.0, inches=inches, step=gate.indicator)
    parts: list[str] = []
    for band in bands:
        text = on_the_dial(band.reading, inches=inches, step=gate.indicator)
        if text == shown:
            continue
        shown, within = text, f"within {band.within:g} deg"
        parts.append(f"up to {text} {within}" if parts else f"up to {text} if it is high {within} of {band.high_at}")
    return f"; {', '.join(parts)}" if parts else ""


def _others(limits: Sequence[Limit], by: str, titles: Mapping[str, str], step: float, *, inches: bool) -> str:
    """What the other requirements allow, those that are not far away."""
    least = min((one.high for one in limits), default=math.inf)
    near = [one for one in limits if one.by != by and 0.0 < one.high < NOT_CRITICAL * least]
    if not near:
        return ""
    words = (
        f"{titles.get(one.by, one.by)} {on_the_dial(one.high, inches=inches, step=step)}" for one in near[:NEXT_SHOWN]
    )
    return f"; next {', '.join(words)}"


# -- lengths -----------------------------------------------------------------------------------------------------------


def _lengths(found: Review, gates: Sequence[LengthGate], everything: bool) -> Iterator[str]:
    if not gates:
        return
    inches, titles = found.book.inches, _titles(found)
    yield "LENGTH TO ACCEPT, all else as planned"
    lost: dict[str, list[str]] = {}
    for gate in gates:
        if gate.lost:
            lost.setdefault(titles.get(gate.by_low, gate.by_low), []).append(gate.words)
        elif not is_far(gate):
            yield from wrap(_length(gate, titles, everything, inches=inches), first="  ", rest="      ")
    for title, words in lost.items():
        yield from wrap(f"no length alone brings {title} inside: {'; '.join(words)}", first="  ", rest="      ")
    idle = [gate.words for gate in gates if not gate.lost and is_far(gate)]
    if idle:
        yield from wrap(f"not critical: {'; '.join(idle)}", first="  ", rest="      ")


def is_far(gate: LengthGate) -> bool:
    about = gate.planned if gate.is_size else 0.0
    return min(gate.high - about, about - gate.low) > NOT_CRITICAL * max(gate.bound, gate.indicator)


def _length(gate: LengthGate, titles: Mapping[str, str], everything: bool, *, inches: bool) -> str:
    low, high = ends_of(gate, inches=inches)
    span = f"{low} to {high}" if low and high else f"at least {low}" if low else f"at most {high}"
    plan = _plan(gate, inches=inches)
    said = f"{plan}, {span} would do" if gate.measured is not None else f"{span} ({plan})"
    text = f"{gate.words}: {said}"
    by = [titles.get(key, key) for key, end in ((gate.by_low, low), (gate.by_high, high)) if end]
    text += f", set by {' and '.join(dict.fromkeys(by))}"
    if everything:
        near = [one for one in gate.limits if one.by not in (gate.by_low, gate.by_high)]
        spans = {one.by: (_end(gate, one.low, inches, up=True), _end(gate, one.high, inches, up=False)) for one in near}
        each = [f"{titles.get(by, by)} {low} to {high}" for by, (low, high) in spans.items() if low and high]
        text += f"; next {', '.join(each[:NEXT_SHOWN])}" if each else ""
    return text


def ends_of(gate: LengthGate, *, inches: bool) -> tuple[str, str]:
    """Both ends of a range, rounded inwards; empty where there is none: `-20 um` and `+16 um`, `1.487 mm` and `1.509 mm`."""
    return _end(gate, gate.low, inches, up=True), _end(gate, gate.high, inches, up=False)


def _end(gate: LengthGate, value: float, inches: bool, *, up: bool) -> str:
    if not math.isfinite(value):
        return ""
    if gate.is_size:
        unit, digits = ("in", 4) if inches else ("mm", 3)
        digits += max(gate.high - gate.planned, gate.planned - gate.low) < FINE_BELOW
        return show(inwards(value, FACTOR[unit] * 10**digits, up=up), unit, digits)
    small = on_the_dial(abs(value), inches=inches, up=up is (value > 0.0), step=gate.indicator)
    return small if not any(c in "123456789" for c in small) else f"{'-' if value < 0.0 else '+'}{small}"


def _plan(gate: LengthGate, *, inches: bool) -> str:
    if gate.is_size:
        unit, digits = ("in", 5) if inches else ("mm", 4)
        size = show(gate.measured if gate.measured is not None else gate.planned, unit, digits)
        number, _, unit = size.partition(" ")
        size = f"{number.rstrip('0').rstrip('.')} {unit}"
        return f"measured {size}" if gate.measured is not None else f"{size} planned"
    if gate.measured is not None:
        return f"measured {'-' if gate.measured < 0.0 else '+'}{as_stated(abs(gate.measured), inches=inches)}"
    return f"\u00b1{as_stated(gate.bound, inches=inches)} planned"


# -- data --------------------------------------------------------------------------------------------------------------


def step_of(value: float, indicator: float, *, inches: bool) -> float:
    """What a reading is rounded to [mm]: the division of its indicator, else our step for readings of this size."""
    if indicator:
        return indicator
    return (0.00254 if inches else 0.001) / (10.0 if value < FINE_BELOW else 1.0)


def gates_as_data(found: Review) -> list[GateData]:
    """Every dial reading to accept, in um."""
    inches = found.book.inches
    return [
        {
            "at": g.key,
            "key": g.keys[0] if g.keys else None,
            "keys": list(g.keys),
            "op": g.op,
            "on": clean(g.on),
            "reading": _um(g.reading),
            "step": _um(step_of(g.reading, g.indicator, inches=inches)) if g.reading is not None else None,
            "planned": _um(g.planned),
            "unit": "um",
            "by": g.by,
            "requirements": {one.by: _um(one.high) for one in g.limits},
            "band": [
                {"reading": _um(b.reading), "within_deg": b.within, "high_at": b.high_at} for b in bands_of(found, g)
            ],
            "measured": g.measured,
            "also": list(g.also),
            "least": _um(g.least) if g.least else None,
            "high_at": clean(g.high_at) or None,
            "good_enough": is_enough(g),
        }
        for g in found.gates
    ]


def lengths_as_data(found: Review) -> list[LengthData]:
    """Every length to accept: errors about the plan in um, sizes in mm."""
    inches = found.book.inches

    def told(gate: LengthGate, value: float | None) -> float | None:
        return _um(value) if not gate.is_size else _plain(value)

    return [
        {
            "key": g.key,
            "op": g.op,
            "what": clean(g.words),
            "low": told(g, g.low),
            "high": told(g, g.high),
            "unit": "mm" if g.is_size else "um",
            "step": told(g, step_of(min(abs(g.low - g.about), abs(g.high - g.about)), g.indicator, inches=inches))
            if not g.lost
            else None,
            "by_low": g.by_low,
            "by_high": g.by_high,
            "requirements": {one.by: [told(g, one.low), told(g, one.high)] for one in g.limits},
            "planned": told(g, g.planned) if g.planned else None,
            "measured": told(g, g.measured),
        }
        for g in lengths_of(found, everything=True)
    ]


def _um(value: float | None) -> float | None:
    return _plain(value * 1000.0) if value is not None else None


def _plain(value: float | None) -> float | None:
    """A number at 12 significant digits, so that the last bits of a sum cannot change the bytes; None where there is none."""
    return float(f"{value:.12g}") + 0.0 if value is not None and math.isfinite(value) else None
