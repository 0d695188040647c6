"""What numbers rest on that the planner did not write: typical values, and the shop's own record of its devices."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import TYPE_CHECKING

from setupcheck.jobfile.reading import LoadedJob
from setupcheck.ledger.causes import Cause
from setupcheck.notation import FACTOR
from setupcheck.quantities.typical import is_of_house, is_own
from setupcheck.report.wording import clean, wrap

if TYPE_CHECKING:
    from setupcheck.flow import Review


def rests_in_words(names: Sequence[str]) -> Iterator[str]:
    """One sentence for the typical values and one for the shop's own, each without its full stop."""
    typical, own = [n for n in names if not is_own(n)], [n for n in names if is_own(n)]
    if typical:
        yield "Rests on typical values: " + ", ".join(typical)
    if own:
        yield "Rests on: " + ", ".join(own)


def how_known(cause: Cause, loaded: LoadedJob) -> str:
    """A word behind the size of a cause: measured, typical, of record or house; nothing where the planner stated it."""
    if cause.mode in ("measured", "typical"):
        return f" {cause.mode}"
    owned = loaded.owned(*cause.paths)
    if not owned:
        return ""
    if any(map(is_of_house, owned)):
        return " by house"
    return " by record" if all(map(is_own, owned)) else " typical"


def record_used(found: Review) -> Iterator[str]:
    """What the job took from the shop's record, and what that record is too thin for. Nothing without a record."""
    if found.devices is None:
        return
    from setupcheck.report.device_record import in_use

    used, record = found.devices.uses, found.devices.record
    yield from wrap(f"DEVICES, {clean(record.file)}", rest="  ")
    if not used:
        yield from wrap("nothing that this job leaves to a device stands in it", first="  ")
    for use in used:
        yield from wrap(f"- {in_use(use, inches=found.book.inches)}", first="  ", rest="    ")


def record_as_data(found: Review) -> dict[str, object] | None:
    """The same for JSON, metric; None without a record."""
    if found.devices is None:
        return None
    return {
        "sha256": found.devices.record.sha256,
        "used": [
            {
                "at": use.path,
                "device": clean(use.series.device),
                "what": use.series.what,
                "entries": len(use.series.entries),
                "limit": round(use.series.limit * FACTOR[use.series.metric], 6)
                if use.series.limit is not None
                else None,
                "unit": use.series.metric,
                "taken": use.taken,
                "last_above": use.series.rising,
            }
            for use in found.devices.uses
        ],
    }
