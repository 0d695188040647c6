"""Where the marking goes as the wheel turns: teeth that run eccentric or lean against the axis they are used on. mm, rad."""

from __future__ import annotations

import math

import numpy as np

from setupcheck.record import record
from setupcheck.worm.geometry import not_below_zero
from setupcheck.worm.helicoid import Array
from setupcheck.worm.meshing import PHASES, Contact, Mounting, contact
from setupcheck.worm.wheel_flank import Flank


@record(kw_only=True)
class RingError:
    """Ring of teeth against the axis of use [mm, rad].

    eccentricity  of the ring's axis, and the angle on the wheel towards which it lies, `eccentric_at`
    run_out       axial run-out of the ring over a turn at the rolling circle (highest less lowest), and the angle on the
                  wheel at which it stands farthest towards +z, `run_out_at`
    Angles on the wheel count from the line of centres (+y) towards +x.
    Raises: ValueError for an eccentricity or run-out below zero.

    >>> RingError(eccentricity=0.02).mounting(math.pi, 50.0, Mounting()).distance
    0.02
    """

    eccentricity: float = 0.0
    eccentric_at: float = 0.0
    run_out: float = 0.0
    run_out_at: float = 0.0

    def __post_init__(self) -> None:
        not_below_zero(eccentricity=self.eccentricity, run_out=self.run_out)

    def mounting(self, at: float, rolling: float, housing: Mounting) -> Mounting:
        """How the teeth at an angle of the wheel stand in the mesh.

        distance - e cos(at - phi_e);  axial + (w/2) cos(at - phi_w)
        lean + w/(2 r2) cos(at - phi_w);  crossing + w/(2 r2) sin(at - phi_w)
        rolling  radius r2 of the rolling circle [mm];  housing  what is wrong besides
        Source: rigid shift and lean of the ring, first order; derived here. The lean about the line of centres crosses the
        axes, a quarter of a turn after the largest axial stand. The shift along the worm is pitch error: it turns the wheel
        and moves no marking.
        """
        eccentric, lean = at - self.eccentric_at, at - self.run_out_at
        return Mounting(
            distance=housing.distance - self.eccentricity * math.cos(eccentric),
            axial=housing.axial + self.run_out / 2.0 * math.cos(lean),
            crossing=housing.crossing + self.run_out / (2.0 * rolling) * math.sin(lean),
            lean=housing.lean + self.run_out / (2.0 * rolling) * math.cos(lean),
        )


@record(eq=False)
class Wander:
    """Contact of one flank at angles round the wheel: angles (n,) [rad], and the contact at each."""

    angles: Array
    contacts: tuple[Contact, ...]

    @property
    def along_face(self) -> float:
        """How far the middle of the marking wanders along the face in a turn [mm]; NaN where nothing is marked somewhere."""
        return float(np.ptp([c.centre for c in self.contacts]))

    @property
    def up_flank(self) -> float:
        """How far it wanders up and down the flank [mm]."""
        return float(np.ptp([c.height for c in self.contacts]))


def round_the_wheel(
    flank: Flank,
    cut_angle: Array,
    *,
    film: float,
    errors: RingError,
    housing: Mounting | None = None,
    angles: int = 8,
    phases: int = PHASES,
) -> Wander:
    """Contact of one flank at angles evenly round a wheel whose ring of teeth runs out.

    flank, cut_angle  grid and the flank as cut, (rows, columns), as in `contact`
    film              thickness of the marking film [mm];  angles  places round the wheel, at least 3
    Raises: ValueError for fewer than 3 places.  Source: `contact` with the mounting of each place.
    """
    if angles < 3:
        raise ValueError("a turn wants at least 3 places, 8 are usual")
    at = np.linspace(0.0, 2.0 * math.pi, angles, endpoint=False, dtype=np.float64)
    rolling, base = flank.pair.rolling, housing or Mounting()
    return Wander(
        at,
        tuple(
            contact(flank, cut_angle, film=film, mounting=errors.mounting(float(a), rolling, base), phases=phases)
            for a in at
        ),
    )
