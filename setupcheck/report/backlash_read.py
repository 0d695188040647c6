"""Backlash as read in the report: the places, their wave, the tight one, the plan beside it, what they cannot show."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING

from setupcheck.flow import Review
from setupcheck.notation import show
from setupcheck.quantities.backlash_read import PATH, AsRead
from setupcheck.quantities.book import Known, Open, Scope
from setupcheck.report.wording import clean, wrap
from setupcheck.report.worked_out import filled

if TYPE_CHECKING:
    from setupcheck.report.review_blocks import BacklashReadData

SENTENCES = (
    "from {read.least} to {read.largest}, mean {read.mean}, one reading is known to ± {read.uncertainty}",
    "it swings by {read.swing} ± {read.swing_uncertainty} over a turn, plan and reading allow {read.swing_allowed}",
    "that is an eccentricity of {read.eccentricity}, the plan has up to {read.planned_eccentricity}",
    "{read.says}",
    "{read.binds}",
    "the mean is {read.miss} off the middle of its plan, plan and reading allow {read.allowed}",
    "the reading farthest beside the wave stands {read.off_wave} off it",
    "{read.sight}",
)


def backlash_read(found: Review) -> Iterator[str]:
    """The block of the report; nothing where no backlash was read."""
    mesh = found.loaded.job.mesh
    if mesh is None or mesh.backlash_read is None:
        return
    yield f"BACKLASH AS READ on {clean(mesh.wheel)}, along the reference circle, in the room"
    for scope in found.book.instances("mesh"):
        answer = found.book.get("read.as_read", scope)
        if isinstance(answer, Known) and isinstance(answer.value, AsRead):
            yield from _block(found, scope, answer.value)
        else:
            yield from _line(_lacking(answer))


def _lacking(answer: object) -> str:
    """What is missing; no worm, or no wheel of one, has no such readings."""
    if not isinstance(answer, Open):
        return "told of a worm and its wheel only"
    why = answer.because or f"fill {', '.join(answer.missing)}"
    few = any(path == f"{PATH}.readings" for path in answer.missing)
    return f"{why}; the plan's own backlash goes on to count" if few else why


def _block(found: Review, scope: Scope, read: AsRead) -> Iterator[str]:
    unit, digits = ("thou", 2) if found.book.inches else ("um", 1)
    each = ", ".join(f"gap {gap} {show(arc, unit, digits)}" for gap, arc in sorted(read.arcs.items()))
    yield from _line(each)
    if read.given.along != "circular":
        yield from _line(f"read {_along(read.given.along)}, and brought to the reference circle")
    if read.end_float > 0.0:
        taken = show(read.end_float, unit, digits)
        yield from _line(
            f"the worm's end float of {taken} is taken out of each, as the rocking pushes it from stop to stop"
        )
    for sentence in SENTENCES:
        said = filled(found, scope, sentence)
        if said:
            yield from _line(said)


def _along(said: str) -> str:
    return "square to the flank" if said == "normal" else f"with a dial {clean(said)}"


def _line(text: str) -> list[str]:
    return wrap(text, first="  - ", rest="    ")


def backlash_read_as_data(found: Review) -> BacklashReadData | None:
    """The same as plain data, um and gap numbers; None where no backlash was read or it does not say enough yet."""
    for scope in found.book.instances("mesh"):
        answer = found.book.get("read.as_read", scope)
        if isinstance(answer, Known) and isinstance(answer.value, AsRead):
            return _as_data(answer.value)
    return None


def _as_data(read: AsRead) -> BacklashReadData:
    from setupcheck.report.json import plain_number

    def um(value: float) -> float:
        return plain_number(value * 1e3)

    swing, swing_uncertainty = read.swing
    return {
        "unit": "um",
        "places": [
            {"gap": gap, "backlash": um(arc), "off_wave": um(read.wave.left[gap])}
            for gap, arc in sorted(read.arcs.items())
        ],
        "uncertainty": um(read.uncertainty),
        "end_float_taken_out": um(read.end_float),
        "mean": um(read.wave.mean),
        "swing": um(swing),
        "swing_uncertainty": um(swing_uncertainty),
        "eccentricity": um(read.wave.amplitude / read.slope),
        "tightest_gap": read.tightest,
        "high_spot_gap": read.high_spot if read.is_proved else None,
    }
