"""Accounts: linear sums of causes. Lengths mm, angles rad; pure Python, no numpy.

value = constant + sum over causes of (a X + b conj(X))

The conjugate is needed because a part turned end for end mirrors what the machine gives it, and because the real part
of a vector (the height of a leaning face at one point) is linear in X and conj(X) together.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import field, replace

from setupcheck.ledger.causes import Cause
from setupcheck.record import record

NOTHING = 1e-11
"""Coefficients below this have cancelled (rounding of levers up to metres stays under it). Source: our choice."""


@record
class Account:
    """constant + sum (a X + b conj(X)); every operation returns a new account.

    >>> eccentric = Account.of(Cause("op 10, chuck: run-out", "disc", high=0.05))
    >>> (eccentric - eccentric).terms
    {}
    >>> round((eccentric * 2.0).largest(), 6)
    0.1
    """

    constant: complex = 0j
    terms: Mapping[Cause, tuple[complex, complex]] = field(default_factory=dict)

    @staticmethod
    def of(cause: Cause) -> Account:
        """The account of one cause taken once."""
        return Account(0j, {cause: (1 + 0j, 0j)})

    def __add__(self, other: Account) -> Account:
        terms = dict(self.terms)
        for cause, (a, b) in other.terms.items():
            mine = terms.get(cause)
            if mine is not None:
                a, b = a + mine[0], b + mine[1]
                if abs(a) < NOTHING and abs(b) < NOTHING:
                    del terms[cause]
                    continue
            terms[cause] = (a, b)
        return Account(self.constant + other.constant, terms)

    def __mul__(self, factor: complex) -> Account:
        if factor == 0:
            return Account()
        return Account(
            self.constant * factor, {cause: (a * factor, b * factor) for cause, (a, b) in self.terms.items()}
        )

    def __neg__(self) -> Account:
        return self * -1.0

    def __sub__(self, other: Account) -> Account:
        return self + (-other)

    def mirrored(self) -> Account:
        """conj(value): the same vector seen from the other end of the part."""
        return Account(
            self.constant.conjugate(), {cause: (b.conjugate(), a.conjugate()) for cause, (a, b) in self.terms.items()}
        )

    def along(self, direction: complex) -> Account:
        """Re(conj(value) direction): the component of a vector along `direction`, times its length. Real."""
        return (self.mirrored() * direction + self * direction.conjugate()) * 0.5

    def plus_constant(self, constant: complex) -> Account:
        return Account(self.constant + constant, self.terms)

    # -- reading the account -----------------------------------------------------------------------------------------

    def reach(self, cause: Cause) -> float:
        """Largest |a X + b conj(X)| of one cause around its mean, per unit of |X|: |a| + |b|, or |a + b| for real X."""
        a, b = self.terms[cause]
        return abs(a + b) if cause.is_real else abs(a) + abs(b)

    def known(self) -> complex:
        """constant plus the known means of all causes."""
        return self.constant + sum((a * c.mean + b * c.mean.conjugate() for c, (a, b) in self.terms.items()), 0j)

    def largest(self) -> float:
        """Worst case of |value|: |vector sum of known means| + sum of |coefficient| times bound.

        Source: arithmetic (worst-case) stacking, common practice; the vector sum of the known means is geometry.
        """
        return abs(self.known()) + sum(self.reach(c) * c.bound for c in self.terms)

    def span(self) -> tuple[float, float]:
        """Worst-case (lowest, highest) of a real account; one-sided causes push one way only."""
        low = high = self.known().real
        for cause, (a, b) in self.terms.items():
            push = (a + b).real * cause.bound if cause.is_real else self.reach(cause) * cause.bound
            low -= max(-push, 0.0) if cause.is_one_sided else abs(push)
            high += max(push, 0.0) if cause.is_one_sided else abs(push)
        return low, high

    def origins(self) -> dict[Cause, None]:
        """All causes that stand behind this account, those within high points included."""
        found: dict[Cause, None] = {}
        for cause in self.terms:
            found.update(cause.of.origins() if cause.of is not None else {cause: None})
        return found

    def with_cause(self, old: Cause, new: Cause) -> Account:
        """The same account with one cause replaced, within high points too."""
        if old not in self.origins():
            return self
        terms: dict[Cause, tuple[complex, complex]] = {}
        for cause, ab in self.terms.items():
            if cause.of is not None:
                terms[replace(cause, of=cause.of.with_cause(old, new))] = ab
            else:
                terms[new if cause == old else cause] = ab
        return Account(self.constant, terms)

    def undetermined(self) -> tuple[str, ...]:
        """Job paths of the causes about which nothing is known and that have not cancelled."""
        found: dict[str, None] = {}
        for cause in self.terms:
            if cause.law == "undetermined":
                found[cause.missing] = None
            elif cause.of is not None:
                found.update(dict.fromkeys(cause.of.undetermined()))
        return tuple(found)

    def turned_by_an_unknown_angle(self, angle: Cause) -> Account:
        """The vector after a turn about the axis by an angle nobody recorded: its known part becomes a ring.

        angle  a cause of law `ring` and radius 1 that stands for exp(i psi); shared by all vectors of one mounting
        A device that held both parts no longer errs in one direction for both: its share gets a name of its own here.
        """
        known = self.known()
        terms = {c.turned_with(angle): ab for c, ab in self.terms.items()}
        if abs(known) > 0.0:
            terms[angle] = (known, 0j)
        return Account(0j, terms)


def real(value: float) -> Account:
    """A plain number as an account."""
    return Account(complex(value))


def fim_to_eccentricity(reading: float) -> float:
    """Eccentricity of a round surface from its full indicator movement: e = FIM / 2 [mm]. Source: geometry.

    >>> fim_to_eccentricity(0.020)
    0.01
    """
    return reading / 2.0


def face_reading_to_lean(reading: float, across: float) -> float:
    """Lean of a face from the full indicator movement read on a circle: FIM / across [rad]. Source: geometry.

    reading  full indicator movement [mm]; across  diameter of the circle the indicator ran on [mm], > 0

    >>> face_reading_to_lean(0.020, 80.0)
    0.00025
    """
    if not across > 0.0 or not math.isfinite(across):
        raise ValueError(f"an indicator circle of {across} mm has no size")
    return reading / across
