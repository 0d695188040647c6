"""Two pressed rings by finite elements in a plane through the axis, with scikit-fem. Shares no code with the package.

Axisymmetric linear elasticity in r and z, quadrilaterals with quadratic displacements, every surface free but the joint. There
the two meshes have nodes of their own at equal heights: the hub's wall is tied to stand U/2 further out than the shaft's (the
jump of a diametral interference U), by elimination of its radial displacements and so exactly; along z they slide without
friction. The joint carries pull as well as push, so a caller looks whether there is any pull. The contact pressure is the
consistent nodal force, brought back to a pressure with the mass matrix of the joint line. mm, MPa, N.
"""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray
from scipy.sparse import block_diag, csr_matrix
from scipy.sparse.linalg import spsolve
from skfem import (
    Basis,
    BilinearForm,
    ElementLineP2,
    ElementQuad2,
    ElementVector,
    FacetBasis,
    Functional,
    MeshLine,
    MeshQuad,
)

Array = NDArray[np.float64]
Stretch = tuple[float, float, float]
SAME = 1e-9
"""Two coordinates nearer than this are one [mm]."""


@dataclass(frozen=True)
class Material:
    """Modulus [MPa] and Poisson's ratio."""

    modulus: float
    poisson: float

    @property
    def lame(self) -> tuple[float, float]:
        """Lamé's constants lambda and mu [MPa]."""
        mu = self.modulus / 2.0 / (1.0 + self.poisson)
        return 2.0 * mu * self.poisson / (1.0 - 2.0 * self.poisson), mu


@BilinearForm
def stiffness(u, v, w):  # type: ignore[no-untyped-def]
    """Work of the stresses of u on the strains of v, over the whole turn: 2 pi r."""
    r = w.x[0]
    spread = u.grad[0, 0] + u[0] / r + u.grad[1, 1]
    virtual = v.grad[0, 0] + v[0] / r + v.grad[1, 1]
    normal = u.grad[0, 0] * v.grad[0, 0] + u[0] * v[0] / r**2 + u.grad[1, 1] * v.grad[1, 1]
    shear = (u.grad[0, 1] + u.grad[1, 0]) * (v.grad[0, 1] + v.grad[1, 0])
    return 2.0 * np.pi * r * (w["lam"] * spread * virtual + w["mu"] * (2.0 * normal + shear))


@BilinearForm
def mass(p, q, _w):  # type: ignore[no-untyped-def]
    return p * q


@Functional
def integral(w):  # type: ignore[no-untyped-def]
    return w["p"]


@dataclass(frozen=True)
class Body:
    """A ring or shaft as a mesh: columns of r, rows of z, less the cells outside its profile."""

    mesh: MeshQuad
    material: Material

    @cached_property
    def basis(self) -> Basis:
        return Basis(self.mesh, ElementVector(ElementQuad2()))

    @cached_property
    def stiffness(self) -> csr_matrix:
        lam, mu = self.material.lame
        return stiffness.assemble(self.basis, lam=lam, mu=mu)

    def radial(self, radius: float, low: float = -np.inf, high: float = np.inf) -> NDArray[np.int64]:
        """Numbers of the radial displacements at a radius between two heights, by rising z."""
        numbers = self.basis.split_indices()[0]
        r, z = self.basis.doflocs[:, numbers]
        here = (abs(r - radius) < SAME) & (low - SAME < z) & (z < high + SAME)
        return numbers[here][np.argsort(z[here])]

    def heights(self, numbers: NDArray[np.int64]) -> Array:
        """z of displacements [mm]."""
        return self.basis.doflocs[1, numbers]


def body(columns: Array, rows: Array, material: Material, *, outside: tuple[Stretch, ...] = ()) -> Body:
    """A body between the first and last of columns [mm of radius] and rows [mm of z].

    outside  stretches (from, to, radius) of z beyond whose radius there is nothing
    """
    mesh = MeshQuad.init_tensor(columns, rows)
    r, z = mesh.p[:, mesh.t].mean(axis=1)
    gone = np.zeros(mesh.nelements, dtype=bool)
    for low, high, radius in outside:
        gone |= (low < z) & (z < high) & (r > radius)
    return Body(mesh.remove_elements(np.flatnonzero(gone)) if gone.any() else mesh, material)


@dataclass(frozen=True)
class Pressed:
    """A hub pressed on a shaft over the heights of the hub's bore.

    radius, low, high  of the joint [mm];  interference  on diameter [mm]
    flat               both ends kept in their planes as in a very long joint (plane strain), and not free (plane stress)
    """

    hub: Body
    shaft: Body
    radius: float
    low: float
    high: float
    interference: float
    flat: bool = False

    @cached_property
    def _displacements(self) -> Array:
        """Displacements [mm], those of the shaft first."""
        first = self.shaft.basis.N
        walls = self.shaft.radial(self.radius, self.low, self.high), first + self.hub.radial(self.radius)
        assert np.allclose(self.shaft.heights(walls[0]), self.hub.heights(walls[1] - first), atol=SAME, rtol=0.0)
        every = block_diag([self.shaft.stiffness, self.hub.stiffness], format="csr")
        jump = np.zeros(every.shape[0])
        jump[walls[1]] = self.interference / 2.0
        held = np.concatenate([walls[1], self._rests(first)])
        free = np.setdiff1d(np.arange(every.shape[0]), held)
        place = np.full(every.shape[0], -1)
        place[free] = np.arange(free.size)
        rows, columns = np.concatenate([free, walls[1]]), np.concatenate([place[free], place[walls[0]]])
        follow = csr_matrix((np.ones(rows.size), (rows, columns)), shape=(every.shape[0], free.size))
        whole, load = (follow.T @ every @ follow).tocsc(), -follow.T @ (every @ jump)
        return jump + follow @ spsolve(whole, load, permc_spec="MMD_AT_PLUS_A")  # symmetric, so this order fills least

    def _rests(self, first: int) -> NDArray[np.int64]:
        """What holds both parts without a force: the axis stays on itself, one node of each keeps its height."""
        along = []
        for start, part in ((0, self.shaft), (first, self.hub)):
            numbers = part.basis.split_indices()[1]
            z = part.heights(numbers)
            ends = numbers[(z < z.min() + SAME) | (z > z.max() - SAME)]
            along.append(start + (ends if self.flat else ends[:1]))
        return np.concatenate([self.shaft.radial(0.0), *along])

    @property
    def of_shaft(self) -> Array:
        return self._displacements[: self.shaft.basis.N]

    @property
    def of_hub(self) -> Array:
        return self._displacements[self.shaft.basis.N :]

    def growth(self, radius: float) -> float:
        """Mean growth of the hub on diameter at a radius [mm]."""
        return 2.0 * float(self.of_hub[self.hub.radial(radius)].mean())

    def closing(self, radius: float) -> float:
        """Mean closing on diameter of the hole of the inner part [mm]."""
        return -2.0 * float(self.of_shaft[self.shaft.radial(radius)].mean())

    @cached_property
    def bore_stresses(self) -> tuple[Array, Array, Array]:
        """(z, hoop stress, von Mises stress) of the hub along its bore, at the quadrature points of the edges there."""
        wall = self.hub.mesh.facets_satisfying(lambda x: abs(x[0] - self.radius) < SAME)
        basis = FacetBasis(self.hub.mesh, self.hub.basis.elem, facets=wall)
        u = basis.interpolate(self.of_hub)
        lam, mu = self.hub.material.lame
        strain = np.array([u.grad[0, 0], u[0] / self.radius, u.grad[1, 1]])
        radial, hoop, along = lam * strain.sum(axis=0) + 2.0 * mu * strain
        shear = mu * (u.grad[0, 1] + u.grad[1, 0])
        differences = (radial - hoop) ** 2 + (hoop - along) ** 2 + (along - radial) ** 2
        z = basis.global_coordinates()[1]
        order = np.argsort(z.ravel())
        mises = np.sqrt(differences / 2.0 + 3.0 * shear**2)
        return z.ravel()[order], hoop.ravel()[order], mises.ravel()[order]

    @cached_property
    def forces(self) -> Array:
        """Outward force of the shaft on the hub at each node of the joint, around the whole turn, by rising z [N]."""
        wall = self.hub.radial(self.radius)
        return (self.hub.stiffness @ self.of_hub)[wall]

    @property
    def normal_force(self) -> float:
        """Contact force added up [N]: friction times it is the axial force the joint carries."""
        return float(self.forces.sum())

    @cached_property
    def _line(self) -> Basis:
        z = self.hub.heights(self.hub.radial(self.radius))
        return Basis(MeshLine(z[::2]), ElementLineP2())

    @cached_property
    def pressure(self) -> tuple[Array, Array]:
        """(z, pressure) at the nodes of the joint [mm, MPa]."""
        order = np.argsort(self._line.doflocs[0])
        load = np.empty_like(self.forces)
        load[order] = self.forces
        found = spsolve(2.0 * np.pi * self.radius * mass.assemble(self._line).tocsc(), load)
        return self._line.doflocs[0, order], found[order]

    def mean_pressure(self, low: float, high: float) -> float:
        """Mean pressure between two heights that are ends of elements [MPa]."""
        order = np.argsort(self._line.doflocs[0])
        values = np.empty_like(self.forces)
        values[order] = self.pressure[1]
        inside = self._line.mesh.elements_satisfying(lambda x: (low < x[0]) & (x[0] < high))
        part = Basis(self._line.mesh, ElementLineP2(), elements=inside)
        return float(integral.assemble(part, p=part.interpolate(values))) / (high - low)
