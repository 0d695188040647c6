"""Means of the stations: what the range of a division test is the range of, in the frame of the work."""

from __future__ import annotations

import math
from pathlib import Path

import pytest

from setupcheck.division.readings import read_test
from setupcheck.division.reduction import reduce

ROWS = [(angle, 20.0 * math.sin(math.radians(angle - 40.0))) for angle in (*range(0, 360, 30), 0)]


def file(folder: Path, column: str, sense: float) -> Path:
    """Two runs; the same work, told by its places or by how far it was turned."""
    lines = [f"{column},deviation_arcsec,run,direction"]
    for run in (1, 2):
        for angle, value in ROWS:
            jitter = 0.1 * ((angle // 30 + run) % 3 - 1)
            lines.append(f"{(sense * angle) % 360},{sense * value + jitter},{run},forward")
    made = folder / f"{column}.csv"
    made.write_text("\n".join(lines) + "\n", encoding="utf-8")
    return made


def test_their_range_is_the_range_and_each_rests_on_its_readings(tmp_path: Path) -> None:
    found = reduce(read_test(file(tmp_path, "angle_deg", 1.0)), count=12)
    values = [m.value for m in found.means]
    assert found.range == pytest.approx(max(values) - min(values))
    assert 12 == len(found.means)
    assert [4, *[2] * 11] == [m.readings for m in sorted(found.means, key=lambda m: m.theta % (math.tau - 1e-9))]
    assert {1} == {m.direction for m in found.means}


def test_a_turned_work_has_its_means_at_its_own_places(tmp_path: Path) -> None:
    """Turned by 30 deg the work shows its place at -30 deg; turned too far, that place stands too far back."""
    plain = reduce(read_test(file(tmp_path, "angle_deg", 1.0)), count=12)
    turned = reduce(read_test(file(tmp_path, "turned_deg", -1.0)), count=12)

    def by_place(found):  # type: ignore[no-untyped-def]
        return {round(math.degrees(m.theta)) % 360: m.value * 206264.8 for m in found.means}

    one, other = by_place(plain), by_place(turned)
    assert one.keys() == other.keys()
    for place, value in one.items():
        assert value == pytest.approx(other[place], abs=0.3), place
