"""Why a job gives nothing that comes from the exact gap: what to write, or what is missing."""

from __future__ import annotations

from setupcheck.errors import SetupcheckError
from setupcheck.flow import Review
from setupcheck.quantities.book import Open


def why_not(found: Review, what: str, quantity: str) -> SetupcheckError:
    """The refusal for a job without what is asked for.

    what      in one word, "insert"
    quantity  of a cut, whose absence says why, "insert.profile"
    """
    job, file = found.loaded.job, found.loaded.file
    if job.mesh is None or job.worm is None:
        return SetupcheckError(
            f"{file}: no {what} to tell. It takes a worm wheel cut gap by gap: write worm, mesh and a single-point cutter"
        )
    if job.mesh.contact is None:
        return SetupcheckError(
            f"{file}: {what} and drawing come from the exact gap, and the job does not ask for it. Write contact: exact under "
            "mesh"
        )
    for scope in found.book.instances("cut"):
        answer = found.book.get(quantity, scope)
        if isinstance(answer, Open):
            why = answer.because or f"fill {', '.join(answer.missing)}"
            return SetupcheckError(f"{file}: cannot tell the {what} of op {scope.op}: {why}")
    return SetupcheckError(f"{file}: no single-point cutter makes the teeth of {job.mesh.wheel}, so there is no {what}")
