"""Share of a flank or of its face that a required film marks: from the exact gap where the job asks for it. Lengths mm.

A requirement is built from the floor, before the book, so the steps of `contact.maps` are taken here one by one. Each
requirement has a film of its own; what both have alike is worked out once.
"""

from __future__ import annotations

from setupcheck.ledger import figures
from setupcheck.ledger.account import Account
from setupcheck.quantities import contact as exact_contact
from setupcheck.quantities import cutter_shape, exact_gap, insert_measured
from setupcheck.quantities.book import Open, OutOfRange
from setupcheck.quantities.drive import Drive, WheelCut, drive, wheel_cut
from setupcheck.quantities.relations import Built
from setupcheck.quantities.requirements import Stack
from setupcheck.quantities.shop import Floor


def contact(floor: Floor, stack: Stack) -> Built | Open:
    """Share of the flank (contact-area) or of the face (contact-length) that a stated film marks.

    Source: the exact gap where the job asks for it; else quantities.cutter_shape, closed form.
    """
    if stack.require.film is None:
        return Open((f"require[{stack.index + 1}].film",))
    found = drive(floor)
    made = wheel_cut(floor, found) if isinstance(found, Drive) else found
    if isinstance(made, Open):
        return made
    if not isinstance(made, WheelCut):
        return Open(because="contact is computed for a worm wheel cut by a single point")
    asked = exact_gap.asked(floor)
    whole = stack.require.what == "contact-length"
    try:
        share = (
            _exact(floor, asked, made, stack.require.film, whole=whole)
            if asked is not None
            else _closed(made, stack.require.film, whole=whole)
        )
    except (OutOfRange, ValueError) as why:
        return Open(because=str(why))
    return share if isinstance(share, Open) else Built(figures.Length(Account().plus_constant(share)), 0.0)


def _closed(cut: WheelCut, film: float, *, whole: bool) -> float | Open:
    """The share in closed form, tilt at the lead angle. Source: quantities.cutter_shape."""
    shape = cutter_shape.shape(cut)
    insert, half = cutter_shape.insert(cut), cutter_shape.half_face(shape)
    if isinstance(insert, Open):
        return insert
    if isinstance(half, Open):
        return half
    if insert != "envelope":
        return Open(because="contact is computed for an insert that follows the envelope; contact: exact takes any")
    of = cutter_shape.contact_length if whole else cutter_shape.contact_area
    share = of(shape, half, film)
    return share if share is not None else Open(because="the cutter leaves no crowning, so the ends of the teeth ride")


def _exact(floor: Floor, asked: str, cut: WheelCut, film: float, *, whole: bool) -> float | Open:
    """The share by the exact gap, setting as planned, insert as planned or measured; the smaller of both flanks.

    Source: quantities.contact.
    """
    pair, blank = exact_gap.pair(asked, cut, floor), exact_gap.blank(asked, cut, floor)
    setting, kind = exact_gap.setting(pair, cut, floor), cutter_shape.insert(cut)
    opened = [x for x in (blank, setting, kind) if isinstance(x, Open)]
    if isinstance(blank, Open) or isinstance(setting, Open) or isinstance(kind, Open):
        return _together(opened)
    made_for = exact_gap.made_for(pair, cut)
    drill = exact_contact.drill(pair, blank, made_for, film)
    points = insert_measured.measured(asked, cut)
    made = insert_measured.made(cut, kind, drill, made_for, points, floor)
    if isinstance(made, Open):
        return made
    maps = exact_contact.maps(drill, made_for, setting, made)
    return (exact_contact.along_face if whole else exact_contact.share)(maps)


def _together(opened: list[Open]) -> Open:
    missing = tuple(dict.fromkeys(m for one in opened for m in one.missing))
    return Open(missing, "; ".join(dict.fromkeys(one.because for one in opened if one.because)))
