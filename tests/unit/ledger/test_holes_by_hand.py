"""Position, chords and circle of holes by hand. Invented values. mm, rad."""

from __future__ import annotations

import cmath
import math

import numpy as np
import pytest

from setupcheck.ledger import teeth
from setupcheck.ledger.account import Account, real
from setupcheck.ledger.causes import Cause
from setupcheck.ledger.draws import Draws
from setupcheck.ledger.holes import HoleChord, HolePosition, PitchCircle
from setupcheck.ledger.route import Pattern, Periodic, Scatter, Shaped

from .small_causes import disc, length, near, told


def test_position_of_holes_by_hand() -> None:
    """Four holes on 25 mm. Settings rounded to 0, 4e-4, 0, -2e-4 rad are 0, 10, 0, -5 um round the circle; free to turn, their
    middle of 2.5 um comes off: 7.5 um at the worst. Twice that, and twice each bound."""
    rounding = (0.0, 4e-4, 0.0, -2e-4)
    holes = Pattern(4, 25.0, rounding=rounding)
    assert HolePosition(Account(), holes, None).base() == pytest.approx(2.0 * 0.0075)
    assert HolePosition(Account(), holes, Account()).base() == pytest.approx(2.0 * 0.010)
    # turned about a clocking feature by 3e-4 rad: 7.5 um on all, so 17.5 um on the second
    assert HolePosition(Account(), holes, real(3e-4)).base() == pytest.approx(2.0 * 0.0175)
    assert HolePosition(Account(), holes, real(-3e-4)).base() == pytest.approx(2.0 * 0.0125)
    out = Pattern(4, 25.0, outwards=(0.002, -0.006, 0.004, 0.0))
    assert HolePosition(Account(), out, None).base() == pytest.approx(2.0 * 0.006)
    assert HolePosition(real(0.003), out, None).base() == pytest.approx(2.0 * math.hypot(0.006, 0.003))
    both = Pattern(4, 25.0, rounding=rounding, outwards=(0.0, 0.01, 0.0, 0.0))
    assert HolePosition(Account(), both, Account()).base() == pytest.approx(2.0 * math.hypot(0.01, 0.01))


def test_pushes_on_the_position_of_holes_by_hand() -> None:
    wave, drift = Cause("wave", "disc", high=1e-4), Cause("drift", "length", high=2e-4)
    scatters = (
        Scatter(Cause("angle", "length", high=3e-5), "angle", 3e-5),
        Scatter(Cause("some", "length", high=3e-5), "angle", 3e-5, around=(0.1, -0.6, 0.2, 0.3)),
        Scatter(Cause("xy", "length", high=0.004), "coordinate", 0.004, around=(0, 1, 0, 1), outward=(1, 0, 1, 0)),
        Scatter(Cause("deep", "length", high=0.002), "radial", 0.002),
    )
    holes = Pattern(4, 25.0, periodic=(Periodic(wave, 4),), scatter=scatters, shaped=(Shaped(drift, (0.0, 0.2, -0.7, 0.5)),),
                    radial=length("size", 0.006))  # fmt: skip
    figure = HolePosition(disc("e", 0.01), holes, length("turn", 1e-3))
    assert told(figure.pushes()) == {
        "e": near(0.0, 0.02, 0.0),
        "size": near(0.0, 0.012, 0.0),
        "turn": near(0.0, 2.0 * 25.0 * 1e-3, 0.0),
        "wave": near(0.0, 2.0 * 25.0 * 1e-4, 0.0),
        "angle": near(0.0, 2.0 * 25.0 * 3e-5, 0.0),
        "some": near(0.0, 2.0 * 25.0 * 3e-5 * 0.6, 0.0),
        "xy": near(0.0, 2.0 * 0.004, 0.0),
        "deep": near(0.0, 2.0 * 0.002, 0.0),
        "drift": near(0.0, 2.0 * 25.0 * 2e-4 * 0.7, 0.0),
    }
    worst = figure.base() + sum(p.up for p in figure.pushes())
    values = figure.sample(Draws(300))
    assert values.max() <= worst
    draws = Draws(7)
    vectors = figure.vectors(draws)
    there = np.exp(1j * teeth.angles(holes))
    arcs = draws.arcs(holes) + 25.0 * draws.real(length("turn", 1e-3))[:, None]
    out = draws.radials(holes) + draws.real(length("size", 0.006))[:, None]
    assert vectors == pytest.approx(draws.account(figure.offset)[:, None] + (out + 1j * arcs) * there, rel=1e-5)
    assert figure.sample(Draws(7)) == pytest.approx(2.0 * np.abs(vectors).max(axis=1))


def test_chords_and_circle_of_holes_by_hand() -> None:
    """Six holes on 30 mm: a step counts cos 30, errors outwards of two sin 30 each; 0.01 on the radius is 0.01 on a chord."""
    cos, sin = math.cos(math.pi / 6), 0.5
    size = real(0.01) + length("size", 0.004)
    plain = HoleChord(Pattern(6, 30.0, radial=size))
    assert plain.base() == pytest.approx(0.01)
    assert told(plain.pushes()) == {"size": near(0.0, 0.004, 0.0)}
    rounding, out = (0.0, 1e-4, 3e-4, 0.0, 0.0, 0.0), (0.0, 0.002, 0.006, 0.0, -0.03, 0.0)
    assert HoleChord(Pattern(6, 30.0, rounding=rounding)).base() == pytest.approx(cos * 30.0 * 3e-4)
    arcs = [30.0 * r for r in rounding]
    steps = [abs(sin * (out[j] + out[j - 1]) + cos * (arcs[j] - arcs[j - 1]) + 0.001) for j in range(6)]
    known = Pattern(6, 30.0, rounding=rounding, outwards=out, radial=real(0.001))
    assert HoleChord(known).base() == pytest.approx(max(steps))
    assert HoleChord(Pattern(6, 30.0, rounding=rounding, radial=real(-0.01))).base() == pytest.approx(
        0.01 + cos * 0.009
    )
    assert float(HoleChord(known).sample(Draws(3))[0]) == pytest.approx(max(steps), rel=1e-4)
    wave, drift = Cause("wave", "disc", high=1e-4), Cause("drift", "length", high=2e-4)
    loose = Pattern(6, 30.0, periodic=(Periodic(wave, 8), Periodic(Cause("none", "disc", high=1.0), 6)),
                    shaped=(Shaped(drift, (0.0, 0.1, 0.2, 0.3, 0.4, 0.5)),),
                    scatter=(Scatter(Cause("deep", "length", high=0.002), "radial", 0.002),
                             Scatter(Cause("own", "length", high=1e-5), "angle", 1e-5)))  # fmt: skip
    assert told(HoleChord(loose).pushes()) == {
        "wave": near(0.0, cos * 30.0 * 2.0 * math.sin(math.pi / 3) * 1e-4, 0.0),
        "deep": near(0.0, 0.002, 0.0),
        "own": near(0.0, cos * 2.0 * 30.0 * 1e-5, 0.0),
        "drift": near(0.0, cos * 30.0 * 0.5 * 2e-4, 0.0),
    }
    circle = PitchCircle(
        Pattern(
            6,
            30.0,
            radial=size,
            outwards=out,
            scatter=(
                Scatter(Cause("deep", "length", high=0.002), "radial", 0.002),
                Scatter(Cause("own", "length", high=1e-5), "angle", 1e-5),
                Scatter(
                    Cause("xy", "length", high=0.003),
                    "coordinate",
                    0.003,
                    around=(0.0,) * 6,
                    outward=(1, -0.5, 0, 0.5, -1, 0),
                ),
            ),
        )
    )
    assert circle.base() == pytest.approx(2.0 * (0.01 + sum(out) / 6.0))
    assert told(circle.pushes()) == {
        "size": near(0.008, 0.008, 0.0), "deep": near(0.004, 0.004, 0.0), "xy": near(0.003, 0.003, 0.0)
    }  # fmt: skip
    draws = Draws(5)
    assert circle.sample(Draws(5)) == pytest.approx(
        2.0 * (draws.radials(circle.pattern).mean(axis=1) + draws.real(size))
    )


def test_holes_on_a_larger_circle_stand_off_with_their_shift() -> None:
    """Circle 0.01 larger, shifted by 0.003 to 0 deg: hole 1 stands 0.013 out, hole 3 only 0.007."""
    holes = Pattern(4, 25.0, radial=real(0.01))
    assert HolePosition(real(0.003), holes, None).base() == pytest.approx(2.0 * 0.013)
    one = HolePosition(real(0.003), Pattern(3, 25.0, radial=real(0.01)), None)
    assert one.base() == pytest.approx(2.0 * 0.013)
    assert HolePosition(real(-0.003), Pattern(3, 25.0, radial=real(0.01)), None).base() == pytest.approx(
        2.0 * abs(0.01 * cmath.exp(2j * math.pi / 3) - 0.003)
    )
    assert float(one.sample(Draws(2))[0]) == pytest.approx(0.026, rel=1e-5)


@pytest.mark.parametrize("sign", [1.0, -1.0])
def test_the_chord_that_is_most_off_takes_steps_and_depths_with_their_own_share(sign: float) -> None:
    """Five holes on 30 mm: settings step by 9 um, both holes 4 um deeper together, the circle 2 um larger: one sum a chord."""
    rounding, out = (0.0, sign * 3e-4, 0.0, 0.0, 0.0), (0.001, 0.003, -0.002, 0.0, 0.0)
    cos, sin = math.cos(math.pi / 5), math.sin(math.pi / 5)
    steps = [sign * 0.009, -sign * 0.009, 0.0, 0.0, 0.0]  # from each hole to the next
    both = [0.004, 0.001, -0.002, 0.0, 0.001]
    wanted = max(abs(2.0 * sin * 0.001 + sin * b + cos * s) for b, s in zip(both, steps, strict=True))
    ring = Pattern(5, 30.0, rounding=rounding, outwards=out, radial=real(0.001))
    assert HoleChord(ring).base() == pytest.approx(wanted)
    assert float(HoleChord(ring).sample(Draws(2))[0]) == pytest.approx(wanted, rel=1e-5)
