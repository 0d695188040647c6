"""Values written back for people, and read again."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck import notation
from setupcheck.notation import FACTOR, fixed, nearest, plain, quoted, show, show_angle, show_length

READERS = {
    "um": lambda text: notation.length(text, units="mm"),
    "mm": lambda text: notation.length(text, units="mm"),
    "in": lambda text: notation.length(text, units="mm"),
    "thou": lambda text: notation.length(text, units="mm"),
    "deg": notation.angle,
    "gon": notation.angle,
    "mrad": notation.angle,
    "urad": notation.angle,
    "rad": notation.angle,
    "arcmin": notation.angle,
    "arcsec": notation.angle,
    "degC": notation.temperature,
    "K": notation.temperature_difference,
    "MPa": notation.pressure,
    "GPa": notation.pressure,
    "N": notation.force,
    "kN": notation.force,
    "N*m": notation.torque,
    "N*mm": notation.torque,
    "s": notation.duration,
    "min": notation.duration,
    "h": notation.duration,
    "kg": notation.mass,
    "rpm": notation.speed,
    "m3": notation.volume,
    "l": notation.volume,
    "%": notation.fraction,
    "1": notation.number,
}
SIGNED = {"um", "mm", "in", "thou", "deg", "gon", "mrad", "urad", "rad", "arcmin", "arcsec", "degC", "K", "1"}


@pytest.mark.parametrize(
    ("value", "unit", "digits", "expected"),
    [
        (0.028, "um", 0, "28 um"),
        (0.028, "mm", 3, "0.028 mm"),
        (25.4, "in", 4, "1.0000 in"),
        (0.0127, "thou", 1, "0.5 thou"),
        (math.radians(3.5764), "deg", 4, "3.5764 deg"),
        (math.radians(90), "gon", 1, "100.0 gon"),
        (math.radians(75 / 3600), "arcsec", 0, '75"'),
        (math.radians(0.5), "arcmin", 0, "30'"),
        (140.0, "degC", 0, "140 degC"),
        (10.0, "K", 0, "10 K"),
        (110.04, "MPa", 1, "110.0 MPa"),
        (12_000.0, "kN", 1, "12.0 kN"),
        (40_000.0, "N*m", 0, "40 N m"),
        (12.0, "s", 0, "12 s"),
        (0.95, "%", 0, "95 %"),
        (1.25, "1", 2, "1.25"),
        (-0.028, "um", 0, "-28 um"),
        (-1e-9, "um", 0, "0 um"),  # never a minus zero
        (-0.0, "mm", 3, "0.000 mm"),
        (1e12, "mm", 0, "1000000000000 mm"),
    ],
)
def test_a_value_is_shown_in_its_display_unit(value, unit, digits, expected):
    assert expected == show(value, unit, digits)


def test_lengths_and_angles_have_their_own_forms():
    assert "12.7 um" == show_length(0.0127, "um", 1)
    assert "3deg 34' 35\"" == show_angle(math.radians(3 + 34 / 60 + 35 / 3600), "dms", 0)
    assert "-0deg 0' 20\"" == show_angle(-math.radians(20 / 3600), "dms", 0)
    assert "0deg 0' 0\"" == show_angle(-1e-12, "dms", 0)
    assert "3.58 deg" == show_angle(math.radians(3.5764), "deg", 2)


def test_rounded_seconds_are_carried_into_minutes_and_degrees():
    assert "4deg 0' 0\"" == show_angle(math.radians(4 - 0.1 / 3600), "dms", 0)
    assert "3deg 59' 59.9\"" == show_angle(math.radians(4 - 0.1 / 3600), "dms", 1)


@pytest.mark.parametrize(
    ("value", "digits", "expected"),
    [(12.5, 0, "13"), (12.499999999999998, 0, "13"), (12.500000000000002, 0, "13"), (-12.5, 0, "-13"),
     (2.675, 2, "2.68"), (0.05, 1, "0.1"), (0.04999, 1, "0.0"), (999.9999999999999, 1, "1000.0"), (0.0, 2, "0.00")],
)  # fmt: skip
def test_noise_in_the_last_bits_does_not_change_what_is_shown(value, digits, expected):
    assert expected == fixed(value, digits)


@pytest.mark.parametrize("value", [math.nan, math.inf, -math.inf])
def test_what_is_not_a_number_cannot_be_shown(value):
    with pytest.raises(ValueError, match="cannot be shown"):
        show(value, "mm", 3)


def test_every_display_unit_has_a_reader():
    assert set(FACTOR) == set(READERS)


@given(
    st.sampled_from(sorted(READERS)),
    st.floats(min_value=0, max_value=1, allow_subnormal=False),
    st.integers(0, 6),
    st.booleans(),
)
def test_a_shown_value_reads_back_within_its_rounding(unit, share, digits, negative):
    value = (-share if negative and unit in SIGNED else share) * (1.0 if unit == "%" else 100.0)
    read = READERS[unit](show(value, unit, digits))
    half_a_step = 0.5 * 10**-digits / FACTOR[unit]
    noise = 1e-11 * (1.0 + abs(value))  # showing keeps twelve digits
    assert abs(read - value) <= half_a_step + noise


@given(st.floats(min_value=-10, max_value=10, allow_subnormal=False), st.integers(0, 4))
def test_degrees_minutes_seconds_read_back_within_their_rounding(value, digits):
    read = notation.angle(show_angle(value, "dms", digits))
    assert abs(read - value) <= math.radians(0.5 * 10**-digits / 3600) + 1e-10


@given(st.floats(allow_nan=False, allow_infinity=False, min_value=-1e9, max_value=1e9), st.integers(0, 6))
def test_no_shown_number_is_a_minus_zero_and_all_have_their_digits(value, digits):
    text = fixed(value, digits)
    assert len(text.partition(".")[2]) == digits
    assert not (text.startswith("-") and float(text) == 0)


def test_display_factors_agree_with_the_reading_side():
    for unit in ("um", "in", "thou"):
        assert 1 / notation.length(f"1 {unit}", units="mm") == pytest.approx(FACTOR[unit], rel=1e-15)
    for unit in ("deg", "gon", "arcmin", "arcsec", "mrad", "urad"):
        assert 1 / notation.angle(f"1 {unit}") == pytest.approx(FACTOR[unit], rel=1e-14)


def test_the_nearest_known_word_is_offered():
    assert "mm" == nearest("mim", ["um", "mm", "in"])
    assert "runout" == nearest("runuot", ["rests", "runout", "reason"])
    assert "looks_at_tool" == nearest("looks-at-tool", ["looks_at_tool", "leans"])
    assert "Runout" == nearest("runout", ["round", "Runout"])
    assert nearest("zzz", ["um", "mm"]) is None
    assert nearest("", ["um"]) is None
    assert nearest("x" * 10_000, ["um"]) is None


def test_a_quoted_text_is_short_and_harmless():
    assert "'2,5 um'" == quoted("2,5 um")
    assert "'" + "x" * 39 + "…'" == quoted("x" * 500)
    assert "'\ufffd[2J'" == quoted("\x1b[2J")
    assert "0.00002" == quoted(0.00002)


def test_a_plain_number_is_written_as_a_planner_types_it():
    assert ["10", "2.5", "-0.001", "1e+300", "123456789"] == [plain(x) for x in (10.0, 2.5, -0.001, 1e300, 123456789)]


def test_reading_needs_no_slow_module():
    import subprocess
    import sys

    code = (
        "import sys, setupcheck.notation as n; n.length('2.5 um', units='mm');"
        "print(sorted({'numpy', 'pydantic', 'yaml', 'difflib', 'decimal', 'fractions'} & set(sys.modules)))"
    )
    run = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
    assert "[]" == run.stdout.strip()
