"""The surface that a depth is counted from, and what single holes or teeth add for themselves. Sizes mm."""

# Annotations are evaluated as they stand (no __future__ import): pydantic would have to compile each of them from its text.
from typing import Annotated, Literal

from pydantic import BeforeValidator

from setupcheck.jobfile.types import Bound, Shop, Size


class Scatter(Shop):
    """What each hole or tooth adds for itself, ±.

    radial, tangential  from and round the axis [mm];  by  the tool that wanders
    """

    radial: Bound | None = None
    tangential: Bound | None = None
    by: str | None = None


class Touched(Shop):
    """The surface the depth is counted from, its diameter as measured or how far it may be off, and how it is touched.

    surface  the one that is touched;  measured  its diameter [mm];  uncertainty  of that, expanded, k = 2 [mm]
    at_most  how far its diameter may be from the drawing, either way [mm]
    tool     `standing` (tip in the mid-plane) or `turning` (a turning cutter meets the corners of a throat first)
    """

    surface: str
    measured: Size | None = None
    uncertainty: Bound | None = None
    at_most: Bound | None = None
    tool: Literal["standing", "turning"] | None = None


DepthFrom = Annotated[Touched, BeforeValidator(lambda g: {"surface": g} if isinstance(g, str) else g)]
"""A surface's name alone, or what is known of its diameter beside it."""
