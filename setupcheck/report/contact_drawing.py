"""The map of the contact of a job's wheel. Only the command that writes it needs this."""

from __future__ import annotations

from setupcheck.errors import SetupcheckError
from setupcheck.flow import Review
from setupcheck.notation import show
from setupcheck.quantities.book import Known
from setupcheck.quantities.contact import Maps
from setupcheck.report.contact import ends_of_face, the_contact
from setupcheck.report.contact_map import ContactMap, FlankMap, draw_contact
from setupcheck.report.insert import cutter_name
from setupcheck.report.joint import in_words
from setupcheck.report.wording import clean

CAPTION: tuple[tuple[str, ...], ...] = (
    (
        "tip radius of the cutter {cutter.radius}, the smallest that keeps the ends clear {contact.radius}",
        "tip radius of the cutter {cutter.radius}",
    ),
    ("a film of {contact.film} marks {contact.share} of each flank and {contact.ends} of its ends",),
    (
        "transmission error {contact.error} along the reference circle, {contact.error_angle} at the wheel; budget "
        "{contact.budget}",
        "transmission error {contact.error} along the reference circle, {contact.error_angle} at the wheel",
    ),
)
"""Lines under the title, each with its shorter forms."""


def as_drawing(found: Review) -> str:
    """The map of both flanks as SVG. Raises: SetupcheckError where the job gives no contact, or none that can be drawn."""
    scope, cut, maps = the_contact(found)
    job, film = found.loaded.job, found.book.get("contact.film", scope)
    assert isinstance(film, Known) and isinstance(film.value, float)
    named = ", ".join(clean(text) for text in (job.job, job.title) if text)
    of = clean(f"contact of {job.mesh.wheel}" if job.mesh is not None else "contact")
    first = (
        f"op {scope.op}, cutter {clean(cutter_name(cut))}: exact gap, rigid, no load, everything set as planned; right is right "
        f"seen from the +z face, gap up"
    )
    try:
        return draw_contact(
            ContactMap(
                title=f"{named}: {of}" if named else of,
                caption=[first, *in_words(found, scope, CAPTION)],
                flanks=(_flank("right", maps), _flank("left", maps)),
                ends=ends_of_face(found, cut),
                film=film.value,
                inches=found.book.inches,
            )
        )
    except ValueError as why:
        raise SetupcheckError(f"{found.loaded.file}: no drawing of the contact of op {scope.op}: {why}") from None


def _flank(name: str, maps: Maps) -> FlankMap:
    """The grid of the exact gap as it is, root first."""
    contact = maps.right if name == "right" else maps.left
    flank = contact.flank
    return FlankMap(
        title=f"{name} flank, {show(contact.share, '%', 1)} marked",
        along=flank.z.tolist(),
        heights=(flank.r - flank.pair.rolling).tolist(),
        missing=contact.nearest.tolist(),
    )
