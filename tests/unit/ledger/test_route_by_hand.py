"""Steps of the route with known vectors, against plain complex numbers and rigid changes of frame. Invented values. mm, rad."""

from __future__ import annotations

import cmath
import math

import pytest

from setupcheck.ledger.account import Account, real
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.route import (
    Pattern,
    Periodic,
    Placing,
    Scatter,
    Seat,
    Shaped,
    State,
    axis_from_face,
    axis_from_planes,
    bought,
    clocked,
    cut,
    high_point,
    index_error,
    joined,
    joined_placing,
    part_vector,
    touched_height,
    untouched,
)

UNKNOWN = Cause("mounting", "ring", 70, high=1.0)


def vector(value: complex) -> Account:
    return Account.of(Cause(f"v{value}", "disc", mean=value))


def value(account: Account) -> complex:
    return account.known()


def state(**more: object) -> State:
    base: dict[str, object] = {
        "part": "wheel", "name": "rim", "op": 10, "kind": "cylinder", "low": 4.0, "high": 10.0, "diameter": 50.0, "facing": 1,
        "offset": vector(0.02 + 0.01j), "lean": vector(1e-4 - 2e-4j), "axial": real(0.03), "clock": real(2e-3),
    }  # fmt: skip
    return State(**{**base, **more})  # type: ignore[arg-type]


def near(x: complex) -> object:
    return pytest.approx(x, abs=1e-12)


# -- one part in a machine -------------------------------------------------------------------------------------------


def test_an_axis_stands_off_by_its_lean_times_the_height() -> None:
    rim = state()
    assert (rim.z, rim.ref) == (7.0, "wheel.rim")
    assert value(rim.axis_at(12.0)) == near(0.02 + 0.01j + 5.0 * (1e-4 - 2e-4j))
    assert value(rim.axis_at(2.0)) == near(0.02 + 0.01j - 5.0 * (1e-4 - 2e-4j))
    placing = Placing(vector(0.1j), vector(1e-3), Account(), Account())
    assert value(placing.axis_at(-20.0)) == near(0.1j - 0.02)
    assert placing.sg == 1


@pytest.mark.parametrize("psi", [0.0, 0.7, -2.0])
def test_a_vector_of_the_machine_seen_from_the_part(psi: float) -> None:
    v = 0.3 - 0.4j
    assert value(part_vector(vector(v), sg=1, inserted_at=psi)) == near(v * cmath.exp(-1j * psi))
    assert value(part_vector(vector(v), sg=-1, inserted_at=psi)) == near(v.conjugate() * cmath.exp(1j * psi))


def test_an_axis_from_a_centre_and_a_face() -> None:
    """Lean of the face less how it sits; the axis passes the datum less its centring in the datum's plane."""
    datum, centring, face, seating = 0.02 + 0j, 0.003j, 2e-4 + 0j, 5e-5j
    offset, lean = axis_from_face(
        vector(datum), z_datum=30.0, centring=vector(centring), face_lean=vector(face), seating=vector(seating)
    )
    assert value(lean) == near(face - seating)
    assert value(offset) + 30.0 * value(lean) == near(datum - centring)


def test_an_axis_through_two_planes() -> None:
    offset, lean = axis_from_planes(vector(0.01 + 0j), vector(0.03 + 0.01j), z_first=10.0, z_second=30.0)
    assert value(offset) + 10.0 * value(lean) == near(0.01)
    assert value(offset) + 30.0 * value(lean) == near(0.03 + 0.01j)
    assert value(lean) == near((0.02 + 0.01j) / 20.0)
    with pytest.raises(ValueError, match="at one height"):
        axis_from_planes(vector(0.01), vector(0.02), z_first=5.0, z_second=5.0)


def test_a_stop_meets_a_face_at_a_point_on_a_ring_or_all_round() -> None:
    face, lean = state(kind="face", facing=-1), vector(3e-4 + 0j)
    off = (1e-4 - 2e-4j) - 3e-4
    point = 20.0 + 5.0j
    assert value(touched_height(face, lean, point=point, ring=None)) == near(0.03 - (off.conjugate() * point).real)
    ring = high_point("high", face=face, lean=lean, radius=15.0, op=10)
    assert (ring.law, ring.op, ring.mode, ring.is_real) == ("high-point", 10, "derived", True)
    assert ring.bound == pytest.approx(15.0 * abs(off))
    met = touched_height(face, lean, point=None, ring=ring)
    assert met.span() == pytest.approx((0.03 - 15.0 * abs(off), 0.03))
    assert touched_height(face, lean, point=None, ring=None) is face.axial


def test_clocking_on_a_place_by_hand() -> None:
    """The third of eight places, numbered clockwise from 10 deg, stands at 10 - 90 deg; errors of dividing turn it further."""
    wave, drift, own = (
        Cause("w", "disc", mean=2e-4 + 1e-4j),
        Cause("d", "length", mean=3e-4 + 0j),
        Cause("own", "length", high=1e-4),
    )
    deep, aside = Cause("deep", "length", high=1.0), Cause("aside", "length", high=0.01)
    ring = Pattern(
        8, 40.0, turn=-1, start=math.radians(10.0), periodic=(Periodic(wave, 3),),
        shaped=(Shaped(drift, tuple(j / 7 for j in range(8))),), rounding=(0.0, 1e-5, 7e-5, 0.0, 0.0, 0.0, 0.0, 0.0),
        scatter=(Scatter(own, "angle", 1e-4), Scatter(deep, "radial", 1.0),
                 Scatter(aside, "tangential", 0.01, around=(1.0, 1.0, 0.5, 1.0, 1.0, 1.0, 1.0, 1.0))),
    )  # fmt: skip
    assert math.degrees(ring.angle(3)) == pytest.approx(10.0 - 90.0)
    error = index_error(ring, 3)
    turned = ((2e-4 + 1e-4j) * cmath.exp(-1j * 3 * cmath.tau * 2 / 8)).real + 3e-4 * 2 / 7 + 7e-5
    assert value(error) == near(-turned)
    low, high = error.span()
    assert (high - low) / 2.0 == pytest.approx(1e-4 + 0.01 * 0.5 / 40.0)
    assert {c.key for c in error.terms} == {"w", "d", "own, place 3", "aside, place 3"}
    found = clocked(state(pattern=ring), ring, vector(0.005j), number=3)
    tangent = 1j * cmath.exp(1j * math.radians(-80.0))
    across = ((0.02 + 0.01j - 0.005j).conjugate() * tangent).real
    assert value(found) == near(2e-3 + across / 40.0 - turned)
    lost = Pattern(8, 40.0, scatter=(Scatter(Cause("u", "undetermined", missing="there"), "angle", 0.0),))
    assert index_error(lost, 2).undetermined() == ("there",)
    assert Pattern(0, 1.0, start=0.3).angle(5) == 0.3


@pytest.mark.parametrize("sg", [1, -1])
def test_what_is_cut_stands_on_the_machines_axis(sg: int) -> None:
    placing = Placing(vector(0.01j), vector(1e-4), real(0.2), real(0.3), sg)
    made = cut(
        placing, state(), machine_offset=vector(0.002), machine_lean=vector(2e-5j), dial=real(0.05), index=real(0.01)
    )
    assert value(made.offset) == near(0.01j + 7.0 * 1e-4 + 0.002)
    assert value(made.lean) == near(1e-4 + 2e-5j)
    assert value(made.axial) == near(0.2 + sg * 0.05)
    assert value(made.clock) == near(0.3 + sg * 0.01)
    bare = cut(placing, state(), machine_offset=Account(), machine_lean=Account(), dial=Account())
    assert value(bare.clock) == near(0.3)


# -- one part in another ---------------------------------------------------------------------------------------------


@pytest.mark.parametrize("sense", [1, -1])
@pytest.mark.parametrize("psi", [0.0, 0.6])
def test_a_part_in_another_is_a_change_of_frame(sense: int, psi: float) -> None:
    """A point of the inner axis at height z is found at sense z + shift, its direction turned by psi, mirrored when reversed."""
    seat = Seat(sense, 100.0, psi)
    off, lean, axial, clock = 0.004 + 0.003j, 3e-5 - 1e-5j, 0.2, 0.01

    def turn(v: complex) -> complex:
        return (v if sense > 0 else v.conjugate()) * cmath.exp(1j * psi)

    ring = Pattern(12, 20.0, turn=-1, start=0.25)
    inner = state(pattern=ring)
    kept = {"offset": vector(off), "lean": vector(lean), "axial": real(axial), "clock": real(clock), "unknown": UNKNOWN}
    found = joined(inner, seat, **kept)  # type: ignore[arg-type]
    ends = sorted((sense * 4.0 + 100.0, sense * 10.0 + 100.0))
    assert [found.low, found.high] == ends and found.facing == sense
    for z in (4.0, 10.0, 30.0):
        outer = sense * z + 100.0
        assert value(found.axis_at(outer)) == near(turn(value(inner.axis_at(z))) + off + lean * outer)
    assert value(found.lean) == near(sense * turn(1e-4 - 2e-4j) + lean)
    assert (value(found.axial), value(found.clock)) == (near(sense * 0.03 + axial), near(sense * 2e-3 + clock))
    assert found.pattern is not None
    assert (found.pattern.turn, found.pattern.start) == (-sense, pytest.approx(sense * 0.25 + psi))
    for number in (1, 4):
        there = turn(cmath.exp(1j * ring.angle(number)))
        assert cmath.exp(1j * found.pattern.angle(number)) == near(there)
    placing = Placing(vector(0.01j), vector(1e-4 + 2e-4j), real(0.2), real(0.3), -1)
    seen = joined_placing(placing, seat, **kept)  # type: ignore[arg-type]
    for z in (0.0, 25.0):
        outer = sense * z + 100.0
        assert value(seen.axis_at(outer)) == near(turn(value(placing.axis_at(z))) + off + lean * outer)
    assert (value(seen.axial), value(seen.clock), seen.sg) == (
        near(sense * 0.2 + axial),
        near(sense * 0.3 + clock),
        -sense,
    )
    assert joined(state(), seat, **kept).pattern is None  # type: ignore[arg-type]


@pytest.mark.parametrize("sense", [1, -1])
def test_a_mounting_that_nobody_recorded_is_a_ring(sense: int) -> None:
    seat = Seat(sense, 0.0, None)
    loose = Account.of(Cause("e", "disc", high=0.01)) + vector(0.03 + 0.04j)
    turned = seat.turn(loose, UNKNOWN)
    assert value(turned) == 0j
    assert turned.largest() == pytest.approx(0.05 + 0.01)
    known = 0.03 + 0.04j * sense
    assert turned.terms[UNKNOWN] == (near(known), 0j)
    ring = joined(
        state(pattern=Pattern(6, 10.0, start=0.1)), seat, offset=Account(), lean=Account(), axial=Account(), clock=Account(),
        unknown=UNKNOWN,
    ).pattern  # fmt: skip
    assert ring is not None and ring.start == pytest.approx(sense * 0.1)


def test_a_bought_surface_stands_as_stated_to_another() -> None:
    root = state()
    kept = {"name": "bore", "facing": 0, "kind": "bore", "diameter": 20.0, "axial": real(0.01), "clock": real(0.1)}
    found = bought(root, low=20.0, high=30.0, near=vector(0.002), far=vector(0.004j), lean=None, **kept)  # type: ignore[arg-type]
    assert (found.part, found.name, found.op, found.kind, found.low, found.high, found.diameter, found.facing) == (
        "wheel", "bore", None, "bore", 20.0, 30.0, 20.0, 0
    )  # fmt: skip
    for z, more in ((20.0, 0.002), (30.0, 0.004j)):
        assert value(found.axis_at(z)) == near(value(root.axis_at(z)) + more)
    assert (value(found.axial), value(found.clock)) == (near(0.04), near(0.102))
    stated = bought(root, low=20.0, high=30.0, near=Account(), far=Account(), lean=vector(5e-4), **kept)  # type: ignore[arg-type]
    assert value(stated.lean) == near(1e-4 - 2e-4j + 5e-4)
    flat = bought(root, low=20.0, high=20.0, near=vector(0.002), far=vector(0.004), lean=None, **kept)  # type: ignore[arg-type]
    assert value(flat.lean) == near(1e-4 - 2e-4j)
    assert value(flat.offset) == near(value(root.axis_at(20.0)) + 0.003)


def test_an_untouched_surface_is_open_in_all_it_has() -> None:
    causes = tuple(Cause(n, "undetermined", missing=f"path.{n}") for n in ("offset", "lean", "axial", "clock"))
    found = untouched("p", "s", kind="face", low=0.0, high=1.0, diameter=None, facing=1, causes=causes)  # type: ignore[arg-type]
    assert [a.undetermined() for a in (found.offset, found.lean, found.axial, found.clock)] == [
        ("path.offset",), ("path.lean",), ("path.axial",), ("path.clock",)
    ]  # fmt: skip
    assert (found.op, found.rough, found.pattern) == (None, False, None)
    assert found.axial.terms[causes[2]] == (0.5, 0.5)


def test_which_scatters_go_round_and_which_outwards() -> None:
    ways = {
        along: Scatter(Cause("s", "length"), along, 1.0) for along in ("angle", "radial", "tangential", "coordinate")
    }
    assert {a: (s.goes_round, s.goes_outward) for a, s in ways.items()} == {
        "angle": (True, False), "radial": (False, True), "tangential": (True, False), "coordinate": (True, True)
    }  # fmt: skip


# -- accounts --------------------------------------------------------------------------------------------------------


def test_accounts_by_hand() -> None:
    a, b = Cause("a", "disc", high=2.0, mean=1.0 + 1.0j), Cause("b", "length", high=3.0, mean=0.5 + 0j)
    one = Account(1.0 + 2.0j, {a: (1.0 + 0j, 2.0j), b: (1.0 + 1.0j, 0.5 - 1.0j)})
    assert one.reach(a) == 3.0 and one.reach(b) == 1.5
    assert value(one) == near(1.0 + 2.0j + (1.0 + 1.0j) + 2.0j * (1.0 - 1.0j) + 1.5 * 0.5)
    assert one.largest() == pytest.approx(abs(value(one)) + 6.0 + 4.5)
    low, high = one.span()
    assert (low, high) == pytest.approx((value(one).real - 10.5, value(one).real + 10.5))
    twice = one + one
    assert twice.terms[a] == (2.0 + 0j, 4.0j) and twice.constant == 2.0 + 4.0j
    assert (one - one).terms == {} and (one * 0).terms == {}
    half = Account(0j, {a: (1.0 + 0j, 0j)}) - Account(0j, {a: (1.0 + 0j, 1.0 + 0j)})
    assert half.terms[a] == (0j, -1.0 + 0j)
    assert (-one).terms[a] == (-1.0 + 0j, -2.0j)
    assert one.mirrored().terms[a] == (-2.0j, 1.0 + 0j)
    assert value(one.mirrored()) == near(value(one).conjugate())
    assert value(one.along(2.0j)) == near((value(one).conjugate() * 2.0j).real)
    assert value(one.plus_constant(1j)) == near(value(one) + 1j)
    up, down = Cause("up", "one-sided", high=4.0), Cause("down", "one-sided", high=5.0)
    assert Account(1.0, {up: (2.0, 0j), down: (-0.5, -0.5)}).span() == (1.0 - 5.0, 1.0 + 8.0)
    tiny = Account(0j, {a: (1e-12, 0j)}) + Account(0j, {a: (1e-12, 1e-12)})
    assert tiny.terms == {}
    left = Account(0j, {a: (1e-12, 0j)}) + Account(0j, {a: (1e-12, 1e-3)})
    assert left.terms[a][1] == pytest.approx(1e-3)
