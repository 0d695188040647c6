"""A shop's record of its devices in words: what each gave so far, what the next one keeps below, and which one wears."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

from setupcheck.notation import show
from setupcheck.quantities.book import INCH
from setupcheck.quantities.device_record import HEADER, LEAST_ENTRIES, SIGNED, DeviceRecord, Series, read_record
from setupcheck.quantities.own_values import Use
from setupcheck.quantities.typical import WHATS
from setupcheck.report.wording import clean, wrap

_TEMPLATE = """\
# What your shop's own devices gave. One line is one reading; lines that begin with # are for you.
#
# device  the name that jobs give it, as in runout: {{device: four-jaw-A}}
# what    {sizes},
#         or with a sign {signed}
# date    2026-11-02
# value   with its unit: 7 um, 0.3 thou, 5", -1.5', -4 K
# note    may be left out
#
# From {least} entries on there is a limit for the next value. The lines below are made up: put your own in their place.
{header}, note
four-jaw-A, runout, 2026-01-12, 6 um
four-jaw-A, runout, 2026-02-03, 7 um
four-jaw-A, runout, 2026-03-18, 5 um, new jaws
four-jaw-A, runout, 2026-05-02, 8 um
four-jaw-A, runout, 2026-11-02, 6 um
dividing-head-B, tilt, 2026-11-02, -1.5'
"""


def template() -> str:
    """A record to start from, as CSV with every kind of reading explained."""
    sizes = ", ".join(what for what in WHATS if what not in SIGNED)
    return _TEMPLATE.format(sizes=sizes, signed=", ".join(SIGNED), least=LEAST_ENTRIES, header=HEADER)


def load_record(path: Path) -> DeviceRecord:
    """Read a record file. Raises: JobError with every problem, each with its line."""
    return read_record(path)


def as_record(found: DeviceRecord) -> str:
    """Every device and thing with its numbers, 80 columns."""
    entries = sum(len(one.entries) for one in found.series.values())
    devices = len({device for device, _ in found.series})
    lines = wrap(f"{clean(found.file)}: {_many(entries, 'entry', 'entries')} of {_many(devices, 'device', 'devices')}")
    for one in sorted(found.series.values(), key=lambda s: s.device):
        lines += ["", *_series(one)]
    return "\n".join(lines) + "\n"


def _many(count: int, one: str, more: str) -> str:
    return f"{count} {one if count == 1 else more}"


def _series(one: Series) -> Iterator[str]:
    first, last = one.entries[0].date, one.entries[-1].date
    when = first if first == last else f"{first} to {last}"
    count = _many(len(one.entries), "entry", "entries")
    yield from wrap(f"{one.name}: {f'thin record, {count}' if one.thin else count}, {when}", rest="  ")
    spread = f", spread {_shown(one, one.spread)}" if one.spread is not None else ""
    yield from wrap(
        f"mean {_shown(one, one.mean)}{spread}, largest {_shown(one, one.largest)}", first="  ", rest="    "
    )
    yield from wrap(_limit(one), first="  ", rest="    ")
    if one.rising:
        yield from wrap(rises(one), first="  ", rest="    ")


def _limit(one: Series) -> str:
    limit = one.limit
    if limit is not None:
        by = "the largest seen" if limit == one.largest else "95 % limit for the next value"
        return f"the next one may reach {_shown(one, limit)} ({by})"
    return f"no limit: {_why_none(one)}"


def _why_none(one: Series) -> str:
    if one.thin:
        return f"it takes {LEAST_ENTRIES} entries"
    return "all entries are the same number, which tells no spread; read them finer"


def rises(one: Series) -> str:
    """Where the last values stand above the limit of those before them; empty where they do not."""
    if not one.rising:
        return ""
    before = len(one.entries) - one.rising
    what = f"the last {one.rising} values lie" if one.rising > 1 else "the last value lies"
    says = "the device wears, or something else changed" if one.rising > 1 else "check whether the device wears"
    return f"{what} above the limit of the {before} before: {says}"


def in_use(use: Use, *, inches: bool) -> str:
    """One use in a review."""
    one, count = use.series, len(use.series.entries)
    if use.taken:
        limit = one.limit
        assert limit is not None
        told = f"{one.name}: {_in_job(one, limit, inches=inches)}, {count} entries ({use.path})"
    elif one.thin:
        told = f"{one.name}: thin record, {_many(count, 'entry', 'entries')}; nothing is taken from it ({use.path})"
    else:
        told = f"{one.name}: {_why_none(one)}; nothing is taken from it ({use.path})"
    return told + (f"; {rises(one)}" if one.rising else "")


def _in_job(one: Series, value: float, *, inches: bool) -> str:
    unit = INCH.get(one.metric, one.metric) if inches else one.metric
    return show(value, unit, 2 if unit == "thou" else 1)


def _shown(one: Series, value: float) -> str:
    return show(value, one.unit, 2 if one.unit == "thou" else 1)
