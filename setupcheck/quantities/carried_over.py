"""A mid-plane found with the head straight and carried over by calculation: what it is out by. mm, rad."""

from __future__ import annotations

import math

from setupcheck.jobfile.setups import Head
from setupcheck.ledger.account import Account
from setupcheck.ledger.causes import Cause
from setupcheck.quantities.causes import Entry, length_error, size_error
from setupcheck.quantities.typical import head_uncertainty


def mid_plane_before_tilt(head: Head, op: int, name: str) -> Account:
    """Error of a mid-plane that was found straight and carried over by calculation: L (1 - cos tau) with L and tau in error.

    Undetermined where the pivot's distance is missing, or the head's uncertainty and the way of setting it both are.
    Source: derivative of worm.tilt's shift.
    """
    path = f"setups.{op}.head"
    words = f"op {op}, {name}: mid-plane found before tilt"
    assert head.mid_plane is not None
    found = length_error(head.mid_plane.error, Entry(words, op, f"{path}.mid_plane.error", "dial"))
    if head.tilt == 0.0:
        return found
    setting = head_uncertainty(head)
    for value, key in ((head.mid_plane.pivot, "mid_plane.pivot"), (setting, "uncertainty")):
        if value is None:
            return Account.of(Cause(f"{words}, carried over", "undetermined", op, missing=f"{path}.{key}"))
    assert head.mid_plane.pivot is not None and setting is not None
    distance, error = size_error(
        head.mid_plane.pivot, Entry(f"op {op}, distance of the head's pivot", op, f"{path}.mid_plane.pivot", "")
    )
    tilt = abs(head.tilt)
    turned = Cause(
        f"op {op}, tilt of the head about its pivot",
        "length",
        op,
        high=setting[0],
        mode="typical" if setting[1] else "planned",
        paths=(f"{path}.uncertainty",),
        rests_on=setting[1],
    )
    return found + error * (1.0 - math.cos(tilt)) + Account.of(turned) * (distance * math.sin(tilt))
