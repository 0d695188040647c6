"""Angles in degrees, minutes, seconds, gon and mrad."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.notation import NotationError, angle, angle_bound

ROUNDING = 1e-15  # relative; two roundings of a double


@pytest.mark.parametrize(
    ("text", "degrees"),
    [
        ("3deg 34' 35\"", 3 + 34 / 60 + 35 / 3600),
        ("3° 34′ 35″", 3 + 34 / 60 + 35 / 3600),
        ("3° 34’ 35”", 3 + 34 / 60 + 35 / 3600),
        ("3deg34'35\"", 3 + 34 / 60 + 35 / 3600),
        ("3 deg 34 arcmin 35 arcsec", 3 + 34 / 60 + 35 / 3600),
        ("3deg 34' 35''", 3 + 34 / 60 + 35 / 3600),
        ("-3deg 34' 35\"", -(3 + 34 / 60 + 35 / 3600)),
        ("3deg 34' 35.5\"", 3 + 34 / 60 + 35.5 / 3600),
        ("3deg 34.5'", 3 + 34.5 / 60),
        ("3deg 05'", 3 + 5 / 60),
        ('3deg 35"', 3 + 35 / 3600),
        ("3.5764 deg", 3.5764),
        ("20 deg", 20.0),
        ("20 degrees", 20.0),
        ("5º", 5.0),  # the ordinal sign, often typed for the degree sign
        ("3.9737 gon", 3.9737 * 0.9),  # 400 gon in a turn
        ("2'", 2 / 60),
        ("90'", 1.5),
        ('20"', 20 / 3600),
        ("75 arcsec", 75 / 3600),
        ("1.5 arcmin", 1.5 / 60),
        ("-3deg", -3.0),
        ("1 rad", 180 / math.pi),
        ("0.2 mrad", 0.0002 * 180 / math.pi),
        ("250 urad", 0.00025 * 180 / math.pi),
        ("250 µrad", 0.00025 * 180 / math.pi),
        ("7200 deg", 7200.0),  # twenty turns of a crank
    ],
)
def test_every_spelling_of_an_angle_is_read(text, degrees):
    assert math.radians(degrees) == pytest.approx(angle(text), rel=ROUNDING)


def test_the_decimal_and_the_divided_angle_of_one_lead_angle_agree_to_a_tenth_of_a_second():
    assert angle("3.5764 deg") == pytest.approx(angle("3deg 34' 35\""), abs=math.radians(0.1 / 3600))


AS_IN = "as in 3deg 34' 35\""
ORDER = f"has degrees, minutes and seconds out of order. Write each once, {AS_IN}"


@pytest.mark.parametrize(
    ("text", "message"),
    [
        (15, '15 has no unit, so it is not an angle. Write the unit: 15 deg, or 15" for seconds of arc'),
        ("15.5", "'15.5' has no unit, so it is not an angle. Write the unit: 15.5 deg, or 15.5\" for seconds of arc"),
        ("15:30", "'15:30' may be an angle or a time of day. Write 15deg 30'"),
        ("15:30:20", "'15:30:20' may be an angle or a time of day. Write 15deg 30' 20\""),
        ("3deg 60'", "'3deg 60'' has 60 minutes. Write fewer than 60 minutes and carry the rest"),
        ("3deg 34' 60\"", "'3deg 34' 60\"' has 60 seconds. Write fewer than 60 seconds and carry the rest"),
        ("2' 75\"", "'2' 75\"' has 75 seconds. Write fewer than 60 seconds and carry the rest"),
        ("3deg 34' 35", f"'3deg 34' 35' has a part without a unit, or out of place. Write it {AS_IN}"),
        ("34' 3deg", f"'34' 3deg' {ORDER}"),
        ("3deg 3deg", f"'3deg 3deg' {ORDER}"),
        (
            "3.5deg 30'",
            f"'3.5deg 30'' has a decimal before its last part. Write whole degrees and minutes, {AS_IN}",
        ),
        ("3deg -34'", "'3deg -34'' has a sign inside. Write one sign, in front of the degrees: 3deg 34' 35\""),
        ('±20"', "'±20\"' has a ± sign where an angle without sign stands. Write 20\""),
        ("3,5 deg", "'3,5 deg' is not an angle. Write a point for the decimal: 3.5 deg"),
        ("3deg 34,5'", "'3deg 34,5'' is not an angle. Write a point for the decimal: 3deg 34.5'"),
        ("3 DEG", "'3 DEG' is not an angle: capital and small letters matter. Write 3 deg"),
        ("3 dge", "'3 dge' is not an angle: 'dge' is no unit of it. Write 3 deg"),
        ("3 grad", "'3 grad' is not an angle. Some read grad as degrees, others as gon: write deg or gon"),
        ("3 min", "'3 min' is not an angle. Write arcmin, or ' for minutes of arc"),
        ("3 sec", "'3 sec' is not an angle. Write arcsec, or \" for seconds of arc"),
        ("10 um", f"'10 um' is a length, not an angle. Write an angle, {AS_IN}"),
        ("3 degC", f"'3 degC' is a temperature, not an angle. Write an angle, {AS_IN}"),
        ("400000 deg", "'400000 deg' is more than a hundred turns. Check the number and its unit"),
        ("3.5.4 deg", f"'3.5.4 deg' has two points. Write one point for the decimal, {AS_IN}"),
        ("nan deg", f"'nan deg' is not an angle. Write it {AS_IN}"),
        ("３ deg", "'３ deg' has digits other than 0 to 9. Type it again: 3 deg"),
        ("", f"an empty text is not an angle. Write {AS_IN[6:]}, or leave the key away"),
        (False, f"false is not an angle. Write it {AS_IN}"),
    ],
)
def test_an_angle_that_is_not_well_written_is_refused(text, message):
    assert message == refusal(angle, text)


@pytest.mark.parametrize("text", ['±20"', '20"', '+-20"', '± 20"', "+20 arcsec"])
def test_a_bound_of_an_angle_may_carry_its_plus_minus_sign(text):
    assert math.radians(20 / 3600) == pytest.approx(angle_bound(text), rel=ROUNDING)


def test_a_bound_of_an_angle_is_never_negative():
    assert "'-20\"' is below zero. Write 0 or more, without a minus sign" == refusal(angle_bound, '-20"')
    assert "'±-2'' has a second sign. Write ±2'" == refusal(angle_bound, "±-2'")


def test_an_angle_below_the_smallest_allowed_is_refused():
    with pytest.raises(NotationError) as caught:
        angle("1 deg", at_least=math.radians(2.0))
    assert "'1 deg' is too small. Write 2 deg or more" == str(caught.value)


@given(st.integers(0, 359), st.integers(0, 59), st.integers(0, 59), st.sampled_from(["", "-"]))
def test_degrees_minutes_and_seconds_add_up(degrees, minutes, seconds, sign):
    expected = math.radians(degrees + minutes / 60 + seconds / 3600) * (-1 if sign else 1)
    assert expected == pytest.approx(angle(f"{sign}{degrees}deg {minutes}' {seconds}\""), rel=1e-14, abs=0)


@given(st.text(max_size=30))
def test_any_text_is_an_angle_or_refused_in_words(text):
    try:
        assert math.isfinite(angle(text))
    except NotationError as why:
        assert why.problem and why.hint


def refusal(read, text):
    with pytest.raises(NotationError) as caught:
        read(text)
    return str(caught.value)
