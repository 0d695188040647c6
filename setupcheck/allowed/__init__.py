"""What a value may be so that no rule says worse of it: each value tried on the job itself. Base units: mm, rad, degC, s.

A requirement's own gates are worked out from its figure (`quantities.gates`). What the other rules look at, a heat, a size of
a joint, an angle as set, is found here by typing values in: rules are steps, so an end is a place where a verdict turns.
"""

from setupcheck.allowed.entries import Entry, entry_of
from setupcheck.allowed.search import FINEST, NO_ROUTE, Allowed, allowed

__all__ = ["FINEST", "NO_ROUTE", "Allowed", "Entry", "allowed", "entry_of"]
