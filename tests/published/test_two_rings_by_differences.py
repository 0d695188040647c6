"""Two pressed rings solved by finite differences, against the closed forms of the joint; shares no code with them.

Radial equilibrium under plane stress, u'' + u'/r - u/r^2 = 0 in each ring; outside and hole free, one pressure at the
joint, and the two walls there U/2 closer together than they were.
"""

from __future__ import annotations

import numpy as np
import pytest
from scipy.sparse import lil_matrix
from scipy.sparse.linalg import spsolve

from setupcheck.physics import interference as fits

CASES = {
    "bronze on hollow steel": (32.0, 104.4, 12.0, 100e3, 0.34, 208e3, 0.30, 0.030),
    "thin bronze ring on steel": (100.0, 140.0, 40.0, 103.4e3, 0.34, 206e3, 0.29, 0.050),
    "steel on aluminium bush": (40.0, 60.0, 25.0, 206e3, 0.29, 70e3, 0.33, 0.020),
}


class Rings:
    """Displacement u of both rings on n cells each, second order in the spacing."""

    def __init__(self, case: tuple[float, ...], n: int = 3000) -> None:
        joint, outside, hole, e_hub, nu_hub, e_shaft, nu_shaft, interference = case
        self.shaft = np.linspace(hole / 2.0, joint / 2.0, n + 1)
        self.hub = np.linspace(joint / 2.0, outside / 2.0, n + 1)
        self.e = {"hub": (e_hub, nu_hub), "shaft": (e_shaft, nu_shaft)}
        m, wall = n + 1, joint / 2.0
        a = lil_matrix((2 * m, 2 * m))
        b = np.zeros(2 * m)
        for first, r in ((0, self.shaft), (m, self.hub)):
            h = r[1] - r[0]
            for i in range(1, n):
                k = first + i
                a[k, k - 1] = 1.0 / h**2 - 1.0 / (2.0 * h * r[i])
                a[k, k] = -2.0 / h**2 - 1.0 / r[i] ** 2
                a[k, k + 1] = 1.0 / h**2 + 1.0 / (2.0 * h * r[i])
        h_shaft, h_hub = self.shaft[1] - self.shaft[0], self.hub[1] - self.hub[0]
        self._stress(a, 0, 0, self.shaft[0], h_shaft, nu_shaft, 1.0, forward=True)  # free hole
        self._stress(a, 2 * m - 1, 2 * m - 1, self.hub[-1], h_hub, nu_hub, 1.0, forward=False)  # free outside
        self._stress(a, n, n, wall, h_shaft, nu_shaft, e_shaft / (1.0 - nu_shaft**2), forward=False)  # one pressure
        self._stress(a, n, m, wall, h_hub, nu_hub, -e_hub / (1.0 - nu_hub**2), forward=True)
        a[m, m], a[m, n], b[m] = 1.0, -1.0, interference / 2.0  # the walls meet
        u = spsolve(a.tocsr(), b)
        self.u = {"shaft": u[:m], "hub": u[m:]}

    @staticmethod
    def _stress(
        a: lil_matrix, row: int, at: int, r: float, h: float, nu: float, scale: float, *, forward: bool
    ) -> None:
        """Radial stress u' + nu u/r times `scale` into a row, one-sided differences of second order."""
        way = 1 if forward else -1
        for step, weight in ((0, -3.0), (1, 4.0), (2, -1.0)):
            a[row, at + way * step] += scale * way * weight / (2.0 * h)
        a[row, at] += scale * nu / r

    def stress(self, part: str, index: int) -> tuple[float, float]:
        """(radial, tangential) stress at the first (0) or last (-1) point of a ring [MPa]."""
        r, u, (e, nu) = (self.shaft if part == "shaft" else self.hub), self.u[part], self.e[part]
        slope = float(np.gradient(u, r, edge_order=2)[index])
        hoop = float(u[index] / r[index])
        return e / (1.0 - nu**2) * (slope + nu * hoop), e / (1.0 - nu**2) * (hoop + nu * slope)


@pytest.mark.parametrize("name", CASES)
def test_pressure_stress_growth_and_closing_agree_with_the_rings(name: str) -> None:
    case = CASES[name]
    diameter, outside, hole, e_hub, nu_hub, e_shaft, nu_shaft, interference = case
    joint = fits.Joint(
        diameter=diameter,
        hub_outside=outside,
        shaft_hole=hole,
        hub_modulus=e_hub,
        hub_poisson=nu_hub,
        shaft_modulus=e_shaft,
        shaft_poisson=nu_shaft,
    )
    rings = Rings(case)
    pressure = fits.joint_pressure(joint, interference=interference)
    told = fits.stresses(joint, pressure=pressure)
    assert rings.stress("hub", 0)[0] == pytest.approx(-pressure, rel=1e-4)
    assert rings.stress("shaft", -1)[0] == pytest.approx(-pressure, rel=1e-4)
    assert rings.stress("hub", 0)[1] == pytest.approx(told.hub_bore_tangential, rel=1e-4)
    assert rings.stress("hub", -1)[1] == pytest.approx(told.hub_outside_tangential, rel=1e-4)
    assert rings.stress("shaft", -1)[1] == pytest.approx(told.shaft_seat_tangential, rel=1e-4)
    assert told.shaft_hole_tangential is not None
    assert rings.stress("shaft", 0)[1] == pytest.approx(told.shaft_hole_tangential, rel=1e-4)
    closed = fits.hole_closing(joint, pressure=pressure)
    assert closed == pytest.approx(-2.0 * rings.u["shaft"][0], rel=1e-4)
    for share in (0.0, 0.3, 1.0):
        at = diameter + share * (outside - diameter)
        grown = 2.0 * float(np.interp(at / 2.0, rings.hub, rings.u["hub"]))
        assert fits.hub_growth(joint, pressure=pressure, at_diameter=at) == pytest.approx(grown, rel=1e-4)
    assert fits.hub_growth(joint, pressure=pressure, at_diameter=outside + 5.0) == pytest.approx(
        2.0 * rings.u["hub"][-1], rel=1e-4
    )
