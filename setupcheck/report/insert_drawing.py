"""The drawing of a job's insert, true to scale. Only the command that writes it needs this."""

from __future__ import annotations

from setupcheck.errors import SetupcheckError
from setupcheck.flow import Review
from setupcheck.quantities.book import Known, Open, Scope
from setupcheck.quantities.contact import Points
from setupcheck.quantities.drive import WheelCut
from setupcheck.quantities.inserts import Drawn
from setupcheck.report.drawings import InsertDrawing, draw_insert
from setupcheck.report.insert import cutter_name, the_insert
from setupcheck.report.joint import in_words
from setupcheck.report.wording import clean

NOTE = (("off by up to {insert.off_profile} at {insert.off_height}, {insert.off_where}",),)
"""Line of the drawing where points are measured."""

PAPERS = {"A4": (210.0, 297.0), "A3": (297.0, 420.0)}
"""Width and height of a sheet [mm]. Source: ISO 216."""


def as_drawing(found: Review, *, scale: float, paper: str) -> str:
    """The drawing of the job's insert as SVG, true to scale on a sheet, upright or turned.

    Raises: SetupcheckError where the job gives no insert, or none that goes on the paper at that scale.
    """
    scope, cut = the_insert(found)
    width, height = PAPERS[paper]
    try:
        drawing = _drawing(found, scope, cut, scale)
        try:
            return draw_insert(drawing, paper=(width, height))
        except ValueError as upright:
            try:
                return draw_insert(drawing, paper=(height, width))
            except ValueError:
                raise upright from None
    except ValueError as why:
        raise SetupcheckError(f"{found.loaded.file}: no drawing of cutter {cutter_name(cut)}: {why}") from None


def _drawing(found: Review, scope: Scope, cut: WheelCut, scale: float) -> InsertDrawing:
    drawn, width, angle = (_known(found, f"insert.{n}", scope) for n in ("drawn", "pitch_width", "angle"))
    assert isinstance(drawn, Drawn) and isinstance(width, float) and isinstance(angle, float)
    job = found.loaded.job
    return InsertDrawing(
        title=f"{clean(job.job)}: insert {clean(cutter_name(cut))}" if job.job else f"insert {clean(cutter_name(cut))}",
        scale=scale,
        heights=drawn.heights,
        right=drawn.half_widths,
        left=drawn.half_widths,
        pitch_height=cut.pitch_height,
        pitch_width=width,
        right_angle=0.5 * angle,
        left_angle=0.5 * angle,
        measured=_measured(found, scope, drawn.heights[-1]),
        note=next(iter(in_words(found, scope, NOTE)), ""),
    )


def _measured(found: Review, scope: Scope, top: float) -> list[tuple[float, float]]:
    """Measured points that stand on the drawing: height above the tip and place across, positive on the right flank."""
    answer = found.book.get("insert.measured", scope)
    if not isinstance(answer, Known):
        return []
    points = answer.value
    assert isinstance(points, Points)
    flanks = ((1.0, points.right), (-1.0, points.left))
    return [(h, sign * w) for sign, widths in flanks for h, w in zip(points.heights, widths, strict=True) if h <= top]


def _known(found: Review, name: str, scope: Scope) -> object:
    answer = found.book.get(name, scope)
    if isinstance(answer, Known):
        return answer.value
    raise ValueError(answer.because if isinstance(answer, Open) and answer.because else f"{name} is not known")
