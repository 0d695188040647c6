"""The insert of a worm wheel's cutter: its sizes, what to know for grinding it, the readings of the grinder."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING

from setupcheck.flow import Review
from setupcheck.jobfile.grinding import Grinding
from setupcheck.notation import show
from setupcheck.quantities.book import Known, Open, Scope
from setupcheck.quantities.drive import WheelCut
from setupcheck.quantities.inserts import decimals
from setupcheck.report.exact import why_not
from setupcheck.report.joint import in_words
from setupcheck.report.wording import clean, wrap

if TYPE_CHECKING:
    from setupcheck.report.review_blocks import InsertData

SHAPE: tuple[tuple[str, ...], ...] = (
    (
        "{insert.tip_width} wide at its tip and {insert.pitch_width} at pitch height, {insert.pitch_height} above it; "
        "{insert.angle} between its flanks there",
    ),
    ("its corners may be rounded with up to {insert.corner}, which ends below the worm's tip",),
    (
        "hollow radius {insert.hollow} at the least where it works, {insert.works_from} to {insert.works_to} above the tip",
        "it works from {insert.works_from} above its tip",
    ),
)
OFF: tuple[tuple[str, ...], ...] = (
    (
        "as measured it is off this profile by up to {insert.off_profile} square to the flank, {insert.off_height} above the "
        "tip, {insert.off_where}; {insert.off_worst} with the uncertainty of a point, which is within {insert.uncertainty}",
        "as measured it is off this profile by up to {insert.off_profile} square to the flank, {insert.off_height} above the "
        "tip, {insert.off_where}; no uncertainty of its points is stated",
    ),
)
GROUND: tuple[tuple[str, ...], ...] = (
    (
        "a wheel with an edge of {insert.largest_wheel} radius leaves 2 um in its hollow; take four fifths of that at most",
    ),
    (
        "{insert.points} points on each flank keep it within {insert.form_error}: an edge of {insert.wheel_radius}, readings "
        "rounded to {insert.step}, and {insert.residual} left between and at the points",
        "{insert.points} points on each flank keep it within {insert.form_error} with an edge of {insert.wheel_radius} and "
        "readings rounded to {insert.step}",
        "readings rounded to {insert.step} move a flank by up to {insert.rounding}",
    ),
    (
        "the stop, out of square by up to {insert.stop_error}, {insert.way}: the width changes by up to {insert.change_at_tip} "
        "at the tip, {insert.change_at_pitch} at pitch height and {insert.change_at_top} at the top; the insert leans by up to "
        "{insert.lean}",
    ),
    ("laid over a drawing the form error shows from {insert.scale} on",),
)
"""Lines under the sizes, each with its shorter forms: the first of them whose numbers are all known is said."""


def drawn_inserts(found: Review) -> Iterator[tuple[Scope, WheelCut]]:
    """Cuts whose insert is known from the exact gap, in the order of the job; none where the job does not ask for it."""
    if found.loaded.job.mesh is None or found.loaded.job.mesh.contact is None:
        return
    for scope in found.book.instances("cut"):
        cut = found.book.get("cutter.wheel_cut", scope)
        if isinstance(cut, Known) and isinstance(found.book.get("insert.profile", scope), Known):
            assert isinstance(cut.value, WheelCut)
            yield scope, cut.value


def inserts(found: Review) -> Iterator[str]:
    """One block for each insert: full widths over the height above its tip, then what to know for grinding it."""
    for number, (scope, cut) in enumerate(drawn_inserts(found)):
        yield from [""] * (number > 0)
        yield from wrap(f"INSERT, cutter {cutter_name(cut)}: {_kind(found, scope, cut)}", rest="  ")
        yield "  height above tip    full width"
        for height, width in _sizes(found, scope):
            yield f"{_length(found, height, 3):>18}{_length(found, width, 4):>14}"
        for said in in_words(found, scope, (*SHAPE, *OFF, *GROUND)):
            yield from wrap(said, first="  - ", rest="    ")


def readings(found: Review) -> Iterator[str]:
    """The readings of the grinder for each insert, one line a point; nothing where the job does not say how it is ground."""
    for scope, cut in drawn_inserts(found):
        if cut.cutter.grinding is None:
            continue
        listed = found.book.get("insert.listed", scope)
        if isinstance(listed, Open):
            why = listed.because or f"fill {', '.join(listed.missing)}"
            yield from wrap(f"READINGS, cutter {cutter_name(cut)}: cannot tell, {why}", rest="  ")
        yield from _readings(found, scope, cut)


def _readings(found: Review, scope: Scope, cut: WheelCut) -> Iterator[str]:
    listed = _listed(found, scope)
    if not listed:
        return
    digits = _digits(found, cut.cutter.grinding)
    yield from wrap(
        f"READINGS, cutter {cutter_name(cut)}: both flanks alike; across is 0 on the side of the shank and falls towards its "
        "middle, along is 0 on the tip from outside and grows towards the shank",
        rest="  ",
    )
    yield "  point  height above tip        across         along"
    for number, (height, across, along) in enumerate(listed, 1):
        cells = (_length(found, height, 3), _length(found, across, digits), _length(found, along, digits))
        yield f"{number:>7}{cells[0]:>18}{cells[1]:>14}{cells[2]:>14}"


def inserts_as_data(found: Review) -> list[InsertData]:
    """The inserts by operation [mm]: heights with full widths, points with both readings, and the lines beneath."""
    return [
        {
            "op": scope.op,
            "cutter": clean(cutter_name(cut)),
            "sizes": [{"height": _plain(h), "width": _plain(w)} for h, w in _sizes(found, scope)],
            "points": [
                {"height": _plain(h), "across": _plain(x), "along": _plain(y)} for h, x, y in _listed(found, scope)
            ],
            "says": in_words(found, scope, (*SHAPE, *OFF, *GROUND)),
        }
        for scope, cut in drawn_inserts(found)
    ]


def the_insert(found: Review) -> tuple[Scope, WheelCut]:
    """The insert of the job. Raises: SetupcheckError that says what is missing."""
    for scope, cut in drawn_inserts(found):
        return scope, cut
    raise why_not(found, "insert", "insert.profile")


def _kind(found: Review, scope: Scope, cut: WheelCut) -> str:
    """`op 50, envelope of the gap, ground to its stated width`."""
    kind = "envelope of the gap" if cut.cutter.insert == "envelope" else "copied from the mid-plane of the gap"
    width = (
        "at its stated width" if cut.cutter.width is not None else "for the thread without backlash (no width stated)"
    )
    return f"op {scope.op}, {kind}, {width}; both flanks alike"


def _sizes(found: Review, scope: Scope) -> tuple[tuple[float, float], ...]:
    answer = found.book.get("insert.sizes", scope)
    return answer.value if isinstance(answer, Known) else ()  # type: ignore[return-value]


def _listed(found: Review, scope: Scope) -> tuple[tuple[float, float, float], ...]:
    answer = found.book.get("insert.listed", scope)
    return answer.value if isinstance(answer, Known) else ()  # type: ignore[return-value]


def cutter_name(cut: WheelCut) -> str:
    """Name of the cutter in the job file."""
    return cut.cutter_path.removeprefix("cutters.")


def _length(found: Review, value: float, digits: int) -> str:
    return show(value, "in", digits + 1) if found.book.inches else show(value, "mm", digits)


def _digits(found: Review, grinding: Grinding | None) -> int:
    """Decimals that show the step of the readings."""
    step = grinding.step if grinding is not None and grinding.step is not None else 0.001
    return decimals(step / 25.4) - 1 if found.book.inches else decimals(step)


def _plain(value: float) -> float:
    """At 1 nm, which is finer than anything ground."""
    return round(value, 6) + 0.0
