"""The backlash of a drive that works in deep cold is worked out with what metals shrink there, not with what they grow."""

from __future__ import annotations

import math
from itertools import product

import pytest

from setupcheck.flow import load_job, prepare
from setupcheck.jobfile.changing import Change, changed
from setupcheck.ledger.account import Account
from setupcheck.physics.materials import Material, Range
from setupcheck.quantities.backlash import Served, warmed
from setupcheck.quantities.drive import Drive, drive
from setupcheck.quantities.material_data import material
from setupcheck.shipped import shipped


def _named(name: str) -> Material:
    found = material(name)
    assert isinstance(found, Material)
    return found


def _moves(found: Drive, means: tuple[Range, Range, Range], rise: float) -> list[float]:
    """By hand: axes less both radii open the flanks, and the thread shrinks against its gap."""
    ends = [(one.low, one.high) for one in means]
    return [
        rise
        * (
            2.0 * math.tan(found.pressure_angle) * (found.centre_distance * h)
            - 2.0 * math.tan(found.pressure_angle) * (found.wheel_diameter / 2.0 * w + found.pitch_diameter / 2.0 * s)
            - found.thread * (s - w)
        )
        for h, w, s in product(*ends)
    ]


@pytest.mark.parametrize(
    ("at", "table"), [(-100.0, "cooling"), (-20.5, "cooling"), (-19.5, "heating"), (60.0, "heating")]
)
def test_the_expansions_are_those_of_the_temperature(at: float, table: str) -> None:
    job = changed(
        load_job(shipped("jobs/rotator-worm-wheel.yaml")), [Change("mesh.serves_at", f"[{min(at, 20)} degC, 60 degC]")]
    )
    floor = prepare(job)[0]
    found = drive(floor)
    assert isinstance(found, Drive)
    three = [_named(name) for name in ("grey-iron", "CuSn12-C", "16MnCr5")]
    means = tuple(getattr(one, table) for one in three)
    expected = [0.0, *_moves(found, means, at - 20.0)]  # type: ignore[arg-type]
    served = warmed(floor, found, (at,))
    assert isinstance(served, Served) and isinstance(served.moved, Account)
    low, high = served.moved.span()
    assert low == pytest.approx(min(expected), abs=1e-12)
    assert high == pytest.approx(max(expected), abs=1e-12)
