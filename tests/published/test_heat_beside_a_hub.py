"""What a hot hub brings to the shaft beside it, against heat conduction integrated by scipy: along the shaft, and in section.

The tool says one bound, the mixed temperature of hub and the shaft under it. Here stand three models of our own that know
nothing of it: two lumps, a shaft in one direction with the hub on it, and a section in two directions. Steel throughout
(7850 kg/m3, 465 J/kgK, 45 W/mK, from memory); a joint that passes 20 kW/m2K (order of magnitude of pressed metal, from memory).
"""

from __future__ import annotations

import math

import numpy as np
import pytest
import scipy.sparse as sp
from scipy.integrate import solve_ivp

from setupcheck.physics.beside import NEXT_TO, mixed_temperature, warmest_beside
from setupcheck.physics.heating import Ring

DENSITY, HEAT, CONDUCTIVITY, JOINT = 7850.0, 465.0, 45.0, 20_000.0
HOT, ROOM = 180.0, 20.0
SECTIONS = {  # hole, seat, outside, length of the joint [mm]; sizes invented
    "thin ring on a hollow spindle": (26.0, 76.0, 90.0, 25.0),
    "wide hub on a solid shaft": (0.0, 76.0, 120.0, 50.0),
    "band of 2 mm on a thick shaft": (0.0, 100.0, 104.0, 30.0),
    "wheel on a thin tube": (60.0, 76.0, 120.0, 40.0),
    "narrow collar": (40.0, 76.0, 84.0, 10.0),
}


def ring(inside: float, outside: float, length: float) -> Ring:
    return Ring(bore=inside, outside=outside, length=length, density=DENSITY, specific_heat=HEAT, emissivity=0.6)


def mixed(section: tuple[float, float, float, float]) -> float:
    hole, seat, outside, length = section
    return mixed_temperature(
        ring(seat, outside, length), ring(hole, seat, length), hub_temperature=HOT, shaft_temperature=ROOM
    )


@pytest.mark.parametrize("section", SECTIONS.values(), ids=SECTIONS)
def test_two_lumps_meet_at_the_mixed_temperature_and_the_shaft_comes_up_to_it_from_below(
    section: tuple[float, float, float, float],
) -> None:
    hole, seat, outside, length = (size / 1e3 for size in section)
    heats = [math.pi / 4 * (b**2 - a**2) * length * DENSITY * HEAT for a, b in ((seat, outside), (hole, seat))]
    passes = JOINT * math.pi * seat * length
    found = solve_ivp(
        lambda _, t: [-passes * (t[0] - t[1]) / heats[0], passes * (t[0] - t[1]) / heats[1]],
        (0.0, 600.0),
        [HOT, ROOM],
        method="LSODA",
        rtol=1e-10,
        atol=1e-10,
    )
    assert found.y[:, -1] == pytest.approx([mixed(section)] * 2, abs=1e-6)
    assert found.y[1].max() <= mixed(section) + 1e-6


@pytest.mark.parametrize("section", SECTIONS.values(), ids=SECTIONS)
def test_along_a_shaft_nothing_gets_hotter_than_the_mixed_temperature(
    section: tuple[float, float, float, float],
) -> None:
    hole, seat, outside, length = (size / 1e3 for size in section)
    step, cells = length / 10, 80  # half the joint and seven times its half beyond; the middle of the hub is a mirror
    area = math.pi / 4 * (seat**2 - hole**2)
    shaft = area * step * DENSITY * HEAT
    hub = math.pi / 4 * (outside**2 - seat**2) * length / 2 * DENSITY * HEAT
    along, across = CONDUCTIVITY * area / step, JOINT * math.pi * seat * step

    def rate(_: float, t: np.ndarray) -> np.ndarray:
        flow = along * np.diff(t[:-1])
        gain = np.zeros(cells)
        gain[:-1] += flow
        gain[1:] -= flow
        given = across * (t[-1] - t[:5])
        gain[:5] += given
        return np.append(gain / shaft, -given.sum() / hub)

    found = solve_ivp(rate, (0.0, 1500.0), [ROOM] * cells + [HOT], method="BDF", rtol=1e-7, atol=1e-6)
    assert found.y[:-1].max() <= mixed(section) + 1e-3
    assert found.y[5:-1].max() > ROOM + 1.0  # heat does come out of the joint


@pytest.mark.parametrize("section", SECTIONS.values(), ids=SECTIONS)
def test_in_section_the_skin_keeps_the_bound_from_5_mm_on(section: tuple[float, float, float, float]) -> None:
    skin = in_section(section)
    beyond = [warmest for place, warmest in skin if place >= NEXT_TO]
    assert max(beyond) <= warmest_beside(mixed(section), hub_temperature=HOT, away=NEXT_TO)
    assert all(warmest <= warmest_beside(mixed(section), hub_temperature=HOT, away=place) for place, warmest in skin)


def test_right_beside_a_thin_band_the_skin_is_hotter_than_the_mixed_temperature() -> None:
    """Why the bound is another one there."""
    section = SECTIONS["band of 2 mm on a thick shaft"]
    assert max(warmest for place, warmest in in_section(section) if place < 2.0) > mixed(section)


def in_section(section: tuple[float, float, float, float]) -> list[tuple[float, float]]:
    """(distance from the seat [mm], warmest its skin ever is [degC]) along the shaft: volumes in r and z, the middle a mirror."""
    hole, seat, outside, length = (size / 2e3 for size in (*section[:3], section[3] * 2))
    step = 1.25e-3 if length >= 20e-3 else length / 8
    under, cells = round(length / 2 / step), round((length / 2 + 60e-3) / step)
    walls = {"shaft": np.linspace(hole, seat, 19), "hub": np.linspace(seat, outside, 7)}
    at = {("shaft", i, j): j * 18 + i for j in range(cells) for i in range(18)}
    at |= {("hub", i, j): len(at) + j * 6 + i for j in range(under) for i in range(6)}
    holds = np.array([math.pi * (walls[p][i + 1] ** 2 - walls[p][i] ** 2) * step * DENSITY * HEAT for p, i, _ in at])
    links: list[tuple[int, int, float]] = []
    for (part, i, j), here in at.items():
        inner, outer = walls[part][i], walls[part][i + 1]
        if (part, i, j + 1) in at:
            links.append((here, at[part, i, j + 1], CONDUCTIVITY * math.pi * (outer**2 - inner**2) / step))
        if (part, i + 1, j) in at:
            further = (walls[part][i + 1] + walls[part][i + 2]) / 2
            links.append(
                (here, at[part, i + 1, j], 2 * math.pi * CONDUCTIVITY * step / math.log(2 * further / (inner + outer)))
            )
        if part == "shaft" and i == 17 and j < under:
            far = (walls["hub"][0] + walls["hub"][1]) / 2
            metal = math.log(2 * far / (inner + outer)) / (2 * math.pi * CONDUCTIVITY * step)
            links.append((here, at["hub", 0, j], 1 / (metal + 1 / (JOINT * 2 * math.pi * seat * step))))
    a, b, passes = (np.array(column) for column in zip(*links, strict=True))
    rows, columns = np.concatenate([a, a, b, b]), np.concatenate([b, a, a, b])
    flows = sp.csr_matrix((np.concatenate([passes, -passes, passes, -passes]), (rows, columns)))
    matrix = sp.diags(1.0 / holds) @ flows
    start = np.array([HOT if part == "hub" else ROOM for part, _, _ in at])
    found = solve_ivp(lambda _, t: matrix @ t, (0.0, 600.0), start, method="BDF", jac=matrix, rtol=1e-5, atol=1e-3)
    assert holds @ found.y[:, -1] == pytest.approx(holds @ start, rel=1e-4)  # nothing is lost
    return [((j + 0.5 - under) * step * 1e3, found.y[at["shaft", 17, j]].max()) for j in range(under, cells)]
