"""A part that is trued by a dial before its joint is fast, as the job states it. Sizes mm."""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
from setupcheck.jobfile.models import RunOut
from setupcheck.jobfile.types import Shop


class Trued(Shop):
    """The outer part moved about in its play until a surface of it runs true, before the joint is made fast.

    on      the surface the dial runs on, of the outer part;  about  what turns meanwhile, of the inner part
    runout  full indicator movement that is left [mm]
    """

    on: str
    about: str
    runout: RunOut | None = None

    @property
    def by(self) -> str:
        """What reads it, as at a hold."""
        return "indicator"


def check_it_is_loose(by: str, square: str | None) -> None:
    """A joint that is trued lets its part be moved across the shoulder.

    Raises: ValueError for one that centres the part itself, or does not square it on the shoulder.
    """
    if by not in ("slide", "screw", "bond"):
        raise ValueError(f"by {by} the joint centres the part itself. Drop trued, or write by: bond or screw")
    if square != "shoulder":
        raise ValueError("a part is trued by moving it across its shoulder. Write square: shoulder, or drop trued")
