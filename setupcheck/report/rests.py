"""What numbers rest on that the planner did not write: typical values, and the shop's own record of its devices."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import TYPE_CHECKING

from setupcheck.jobfile.reading import LoadedJob
from setupcheck.ledger.causes import Cause
from setupcheck.notation import FACTOR, show
from setupcheck.quantities.book import INCH, Known
from setupcheck.quantities.typical import SHOWN, Typical, is_of_house, is_own
from setupcheck.report.wording import clean, title_of, wrap

if TYPE_CHECKING:
    from setupcheck.flow import Review
    from setupcheck.quantities.measure_first import First
    from setupcheck.report.review_blocks import RecordData, RecordUseData
    from setupcheck.report.review_types import FirstData

FIRST_SHOWN = 3
"""Typical values told one by one without --all; the others in one line. Source: our screening choice."""


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


def record_as_data(found: Review) -> RecordData | None:
    """The same for JSON, metric; None without a record."""
    if found.devices is None:
        return None
    used: list[RecordUseData] = [
        {
            "at": use.path,
            "device": clean(use.series.device),
            "what": use.series.what,
            "entries": len(use.series.entries),
            "limit": round(use.series.limit * FACTOR[use.series.metric], 6) if use.series.limit is not None else None,
            "unit": use.series.metric,
            "taken": use.taken,
            "last_above": use.series.rising,
        }
        for use in found.devices.uses
    ]
    return {"sha256": found.devices.record.sha256, "used": used}


def first_of(found: Review) -> tuple[First, ...]:
    """Typical values that requirements rest on, the one whose measurement may give most in front."""
    answer = found.book.get("typical.first", found.book.instances("job")[0])
    return answer.value if isinstance(answer, Known) else ()  # type: ignore[return-value]


def measure_first(found: Review, everything: bool = False) -> Iterator[str]:
    """Which typical value to measure first; nothing where no requirement rests on one."""
    ones = first_of(found)
    if not ones:
        return
    yield from wrap(
        "MEASURE FIRST, typical values by what their usual range moves of the tightest requirement", rest="  "
    )
    titles = {id(scope.node): title_of(scope) for scope in found.book.instances("stack")}
    shown = ones if everything else ones[:FIRST_SHOWN]
    for one in shown:
        where = f" (op {', '.join(str(op) for op in one.ops)})" if one.ops else ""
        moved = f"{one.share * 100.0:.0f} % of the limit of {titles.get(id(one.stack), one.stack.name)}"
        yield from wrap(
            f"{one.row.name}{where}, usually {usual(one.row, found.book.inches)}: {moved}", first="  ", rest="      "
        )
    if len(ones) > len(shown):
        rest = ", ".join(f"{one.row.name} {one.share * 100.0:.0f} %" for one in ones[len(shown) :])
        yield from wrap(f"then {rest}", first="  ", rest="      ")


def usual(row: Typical, inches: bool = False) -> str:
    """What is usual of a device, best to worst: `5 um to 25 um`."""
    unit = SHOWN[row.what]
    unit = INCH.get(unit, unit) if inches else unit

    def end(value: float) -> str:
        return show(float(f"{value:.3g}"), unit, _decimals(value * FACTOR[unit]))

    return f"{end(row.best)} to {end(row.worst)}"


def _decimals(shown: float) -> int:
    """Decimals of a figure with two digits that count, as few as it needs."""
    text = f"{shown:.2g}"
    return len(text.partition(".")[2]) if "e" not in text else 0


def first_as_data(found: Review) -> list[FirstData]:
    """The same for JSON, metric."""
    return [
        {
            "typical": one.row.name,
            "ops": list(one.ops),
            "best": float(f"{one.row.best * FACTOR[SHOWN[one.row.what]]:.6g}"),
            "worst": float(f"{one.row.worst * FACTOR[SHOWN[one.row.what]]:.6g}"),
            "unit": SHOWN[one.row.what],
            "requirement": one.stack.name,
            "share_of_limit": float(f"{one.share:.6g}"),
        }
        for one in first_of(found)
    ]
