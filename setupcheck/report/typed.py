"""Sizes and angles typed after an option of a command, in shop notation."""

from __future__ import annotations

from setupcheck.errors import SetupcheckError
from setupcheck.jobfile.reading import LoadedJob
from setupcheck.notation import NotationError, angle_bound, length


def typed_angle(option: str, text: str) -> float:
    """An uncertainty of an angle [rad].

    Raises: SetupcheckError with what to write.
    """
    try:
        return angle_bound(text)
    except NotationError as why:
        raise SetupcheckError(f"{option}: {why}") from None


def typed_size(option: str, text: str, loaded: LoadedJob) -> float:
    """A size above zero, a bare number in the units of the job [mm].

    Raises: SetupcheckError with what to write.
    """
    try:
        size = length(text, units=loaded.job.units)
    except NotationError as why:
        raise SetupcheckError(f"{option}: {why}") from None
    if size <= 0.0:
        raise SetupcheckError(f"{option}: '{text}' is no size of a workpiece. Write it as in 200 mm")
    return size
