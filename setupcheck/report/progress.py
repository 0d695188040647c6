"""What is done, what can still be moved, and what was measured before its turn."""

from __future__ import annotations

from collections.abc import Iterator

from setupcheck.flow import Review
from setupcheck.quantities.book import Known
from setupcheck.quantities.progress import NONE_LEFT
from setupcheck.report.wording import title_of, wrap


def still_to_move(found: Review) -> Iterator[str]:
    """The block of the report; nothing where the job does not say what is done."""
    job = found.loaded.job
    if job.done is None:
        return
    yield f"STILL TO MOVE, done up to op {job.done}"
    alike: dict[str, list[str]] = {}
    for scope in found.book.instances("stack"):
        answer = found.book.get("progress.open", scope)
        if isinstance(answer, Known):
            beyond = found.results[scope.key].margin
            why = "may fail" if beyond is not None and beyond < 0.0 else "has lost margin"
            alike.setdefault(str(answer.value), []).append(f"{title_of(scope)} {why}")
    for says, titles in alike.items():
        end = "; measure closer what is done, or ask for less" if says == NONE_LEFT else ""
        yield from wrap(f"{'; '.join(titles)}: {says}{end}", first="  ", rest="      ")
    if not alike:
        yield from wrap("no requirement fails or has lost margin", first="  ")
    early = found.book.get("progress.early", found.book.instances("job")[0])
    if isinstance(early, Known):
        yield from wrap(f"measured before its turn, is `done` right? {early.value}", first="  ", rest="      ")
