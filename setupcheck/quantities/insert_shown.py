"""What of an insert's form error can be seen, laid over its drawing or on a projector. Lengths mm."""

from __future__ import annotations

from setupcheck.notation import show
from setupcheck.quantities.book import Quantity, in_range
from setupcheck.quantities.drive import WheelCut


@in_range
def scale(form_error: float) -> str:
    """Smallest usual enlargement at which a drawing laid over shows the form error as two lines. Source: worm.overlay."""
    from setupcheck.worm.overlay import scale_for

    return f"{scale_for(form_error):g}:1"


def shown(asked: str, cut: WheelCut) -> float | None:
    """Smallest error that the stated magnification shows [mm]: a line's width over it. None where none is stated.

    Source: worm.overlay.
    """
    from setupcheck.worm.overlay import error_shown

    told = cut.cutter.grinding
    if told is None or told.magnification is None:
        return None
    return error_shown(told.magnification)


def shown_advice(form_error: float, shown: float) -> str:
    """What to look at the insert with instead, or what this magnification can prove. Source: worm.overlay."""
    from setupcheck.worm.overlay import scale_for

    proves = show(shown, "um", 1)
    try:
        larger = f"Look at it at {scale_for(form_error):g}:1 or more"
    except ValueError:
        larger = "No projector shows that: measure it with an indicator or over pins"
    return f"{larger}, or allow a form error of {proves}, the least this one shows; measured points prove more than a line does."


def _row(name: str, unit: str, digits: int, of: object, inputs: dict[str, str], says: str) -> Quantity:
    return Quantity(f"insert.{name}", "cut", unit, digits, of, inputs, says)  # type: ignore[arg-type]


_CUT = {"asked": "contact.asked", "cut": "cutter.wheel_cut"}
_ERROR = {"form_error": "insert.form_error"}

SHOWN = (
    _row("scale", "", 0, scale, _ERROR, "enlargement that shows the form error"),
    _row("shown", "um", 1, shown, _CUT, "smallest error the magnification shows"),
    _row("shown_advice", "", 0, shown_advice, {**_ERROR, "shown": "insert.shown"}, "what to look at it with, in words"),
)
