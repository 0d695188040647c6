"""The contact of a worm wheel from the exact gap: a small map of both flanks, what it comes to, what the setting may be off."""

from __future__ import annotations

from collections.abc import Iterator
from typing import TYPE_CHECKING

from setupcheck.flow import Review
from setupcheck.jobfile.models import Flat
from setupcheck.quantities.book import Known, Scope
from setupcheck.quantities.contact import Maps
from setupcheck.quantities.drive import WheelCut
from setupcheck.report.exact import why_not
from setupcheck.report.joint import in_words
from setupcheck.report.wording import clean, wrap

if TYPE_CHECKING:
    import numpy as np

    from setupcheck.report.review_blocks import ContactData

ROWS, COLUMNS = 9, 33
"""Characters of a map; two of them and their margin make 77."""
MARGIN, BETWEEN = 6, 4
HALF = 0.5
"""Share of a character's place from which it counts as marked. Our choice."""

HEAD = (
    "exact gap, {contact.film} of blue, rigid, everything set as planned; # marked, . not; right is right seen from the "
    "+z face, gap up"
)
HEAD_MEASURED = (
    "exact gap, insert as measured (each point within {insert.uncertainty}), {contact.film} of blue, rigid, set as planned; # "
    "marked, . not; right is right seen from the +z face, gap up"
)
BENEATH: tuple[tuple[str, ...], ...] = (
    (
        "marked: {contact.share} of each flank, {contact.ends} of its ends; middle {contact.middle_right} and "
        "{contact.middle_left} along +z from the mid-plane, {contact.height_right} and {contact.height_left} outward from the "
        "reference circle",
        "marked: {contact.share} of each flank, {contact.ends} of its ends",
    ),
    (
        "transmission error {contact.error} along the reference circle, {contact.error_angle} at the wheel; budget "
        "{contact.budget}",
        "transmission error {contact.error} along the reference circle, {contact.error_angle} at the wheel; no error_budget is "
        "stated",
    ),
    (
        "at this radius an envelope insert errs by {contact.envelope_error} and marks {contact.envelope_share}, one copied "
        "from the mid-plane {contact.copied_error} and {contact.copied_share}",
    ),
    (
        "smallest tip radius that keeps the ends clear {contact.radius}, it marks {contact.radius_share}; planned "
        "{cutter.radius}",
    ),
    ("{contact.curve}",),
    (
        "each alone, the budget allows: tilt {contact.tilt_less} less to {contact.tilt_more} more than the lead angle, "
        "mid-plane {contact.mid_plane}, depth {contact.depth}, insert turned {contact.turned}",
    ),
    (
        "planned at the worst: tilt {contact.tilt_error}, mid-plane {contact.mid_plane_error}, depth {contact.depth_error}",
        "planned at the worst: tilt {contact.tilt_error}, mid-plane {contact.mid_plane_error}",
    ),
    (
        "round the wheel the middle of the marking wanders {contact.wander_along} along the face and {contact.wander_up} up "
        "the flank, teeth as far out of true as the route allows",
    ),
)
"""Lines under the map, each with its shorter forms: the first of them whose numbers are all known is said."""


def contacts(found: Review) -> Iterator[str]:
    """One block for each cut of a worm wheel whose contact could be worked out; nothing where no job asks for it."""
    for number, (scope, cut, maps) in enumerate(worked_out(found)):
        yield from [""] * (number > 0)
        (said,) = in_words(found, scope, ((HEAD_MEASURED, HEAD),)) or [""]
        yield from wrap(f"CONTACT, op {scope.op}: {said}", rest="  ")
        yield from _drawn(found, cut, maps)
        for line in in_words(found, scope, BENEATH):
            yield from wrap(line, first="  - ", rest="    ")


def contacts_as_data(found: Review) -> list[ContactData]:
    """Maps and lines of each block; the numbers stand among the quantities."""
    return [
        {
            "op": scope.op,
            "ends": list(ends_of_face(found, cut)),
            "right": picture(maps.right.marked),
            "left": picture(maps.left.marked),
            "says": in_words(found, scope, BENEATH),
        }
        for scope, cut, maps in worked_out(found)
    ]


def worked_out(found: Review) -> Iterator[tuple[Scope, WheelCut, Maps]]:
    """Cuts whose contact is known from the exact gap, in the order of the job."""
    for scope in found.book.instances("cut"):
        answer, cut = found.book.get("contact.maps", scope), found.book.get("cutter.wheel_cut", scope)
        if isinstance(answer, Known) and isinstance(answer.value, Maps):
            assert isinstance(cut, Known) and isinstance(cut.value, WheelCut)
            yield scope, cut.value, answer.value


def the_contact(found: Review) -> tuple[Scope, WheelCut, Maps]:
    """The contact of the job's wheel as its last cut leaves it. Raises: SetupcheckError that says what is missing."""
    every = [*worked_out(found)]
    if not every:
        raise why_not(found, "contact", "contact.maps")
    return every[-1]


def picture(marked: np.ndarray) -> list[str]:
    """The marking of one flank from tip to root, from the -z end of the face to the +z end; # where half or more is marked.

    marked  share of every point's cell that is marked, (rows, columns), root first.
    Source: worm.meshing, on a grid twice as fine along the face and three times finer up the flank.
    """
    rows, columns = marked.shape
    up = [round((rows - 1) * (ROWS - 1 - i) / (ROWS - 1)) for i in range(ROWS)]
    along = [round((columns - 1) * j / (COLUMNS - 1)) for j in range(COLUMNS)]
    return ["".join("#" if marked[i, j] >= HALF else "." for j in along) for i in up]


def ends_of_face(found: Review, cut: WheelCut) -> tuple[str, str]:
    """Names of the wheel's faces nearest to both ends of its teeth; -z and +z where it has none."""
    ref, half = cut.drive.wheel, (cut.drive.face_width or 0.0) / 2.0
    surfaces = found.loaded.job.parts[ref.part].surfaces
    middle: float = surfaces[ref.surface].at  # type: ignore[union-attr]

    def nearest(way: int, end: float) -> str:
        flat = {name: s for name, s in surfaces.items() if isinstance(s, Flat) and s.facing == way}
        return clean(min(flat, key=lambda name: abs(flat[name].at - end))) if flat else f"{way:+d}"[0] + "z"

    return nearest(-1, middle - half), nearest(1, middle + half)


def _drawn(found: Review, cut: WheelCut, maps: Maps) -> Iterator[str]:
    low, high = (name[: COLUMNS // 2 - 1] for name in ends_of_face(found, cut))
    ends = low + high.rjust(COLUMNS - len(low))
    yield " " * MARGIN + "right flank".center(COLUMNS) + " " * BETWEEN + "left flank".center(COLUMNS).rstrip()
    yield " " * MARGIN + ends + " " * BETWEEN + ends
    for i, (right, left) in enumerate(zip(picture(maps.right.marked), picture(maps.left.marked), strict=True)):
        label = {0: "tip", ROWS - 1: "root"}.get(i, "")
        yield f" {label:<{MARGIN - 1}}{right}{' ' * BETWEEN}{left}"
