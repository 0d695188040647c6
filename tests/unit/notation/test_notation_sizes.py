"""Sizes with classes and limits, as drawings write them."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.notation import NotationError, Size, size


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("120", Size(120.0)),
        (120, Size(120.0)),
        (32.5, Size(32.5)),
        ("-40 mm", Size(-40.0)),
        ("32 H6", Size(32.0, fit="H6")),
        ("32H6", Size(32.0, fit="H6")),
        ("48 h6", Size(48.0, fit="h6")),
        ("32 mm H6", Size(32.0, fit="H6")),
        ("32 JS7", Size(32.0, fit="JS7")),
        ("32 js7", Size(32.0, fit="js7")),
        ("32 m6", Size(32.0, fit="m6")),  # a class, not metres
        ("32 zc18", Size(32.0, fit="zc18")),
        ("32e8", Size(32.0, fit="e8")),  # a running fit, not a power of ten
        ('1 1/4" H7', Size(31.75, fit="H7")),
        ("32.041 ±0.003", Size(32.041, -0.003, 0.003)),
        ("32.041 +/-0.003", Size(32.041, -0.003, 0.003)),
        ("32 mm ±3 um", Size(32.0, -0.003, 0.003)),
        ("32 ±0.003 mm", Size(32.0, -0.003, 0.003)),
        ("1.2500 in ±0.0002", Size(31.75, -0.00508, 0.00508)),
        ("1 1/4 in ±0.001", Size(31.75, -0.0254, 0.0254)),
        ("0 ±0.005", Size(0.0, -0.005, 0.005)),
        ("-40 ±0.1", Size(-40.0, -0.1, 0.1)),
        ("32 ±0", Size(32.0, 0.0, 0.0)),
        ("32 +0.021/0", Size(32.0, 0.0, 0.021)),
        ("32 +0.021 0", Size(32.0, 0.0, 0.021)),
        ("32 +0.021 -0.005", Size(32.0, -0.005, 0.021)),
        ("32 +0.021/-0.005", Size(32.0, -0.005, 0.021)),
        ("32 +0.021-0.005", Size(32.0, -0.005, 0.021)),
        ("32 -0.005 / +0.021", Size(32.0, -0.005, 0.021)),
        ("32 -0.025 -0.041", Size(32.0, -0.041, -0.025)),
        ("32 0/-0.016", Size(32.0, -0.016, 0.0)),
        ("32 mm +21/-5 um", Size(32.0, -0.005, 0.021)),
        ("32 mm +21 um/-5 um", Size(32.0, -0.005, 0.021)),
        ("32 mm +21 um/0", Size(32.0, 0.0, 0.021)),
    ],
)
def test_every_spelling_of_a_size_is_read(text, expected):
    assert expected == size(text, units="mm")


def test_bare_sizes_and_deviations_take_the_units_of_the_file():
    assert Size(31.75) == size("1.25", units="in")
    assert Size(31.75, -0.00508, 0.00508) == size("1.25 ±0.0002", units="in")
    assert Size(31.75, fit="H7") == size("1.25 H7", units="in")


TWO_WAYS = "has limits and a class. Write one of them: 32 H6, or 32 +0.016/0"
ONE_CLASS = "Write the class of this surface alone, as in 32 H7"
AS_IN = "as in 32 H6 or 32.041 ±0.003"


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("32 ±3 um", "'32 ±3 um' has a unit on its tolerance only. Write it on the size too: 32 mm ±3 um"),
        (
            "32 +21 um/-5 um",
            "'32 +21 um/-5 um' has a unit on its tolerance only. Write it on the size too: 32 mm +21 um/-5 um",
        ),
        (
            "32 mm +21 um/-5",
            "'32 mm +21 um/-5' has a unit on its first deviation only. Write it on both: +21 um/-5 um",
        ),
        ("32 +0.021", "'32 +0.021' has one deviation. Write both: 32 +0.021/0"),
        ("32 -0.02", "'32 -0.02' has one deviation. Write both: 32 -0.02/0"),
        (
            "32 +0.021/0.005",
            "'32 +0.021/0.005' has a deviation without sign. Write both signs, as in 32 +0.021/-0.005 or 32 +0.021/0",
        ),
        ("32 h 6", "'32 h 6' has a gap in its class. Write 32 h6"),
        ("32 6H", f"'32 6H' has a gap in its number. Write one number, {AS_IN}"),
        ("32 w6", "'32 w6' has the class 'w6', which ISO 286 does not have. Write a class such as H6 or h6"),
        ("32 i7", "'32 i7' has the class 'i7', which ISO 286 does not have. Write a class such as H6 or h6"),
        (
            "32 Js7",
            "'32 Js7' has the class 'Js7', which ISO 286 does not have. Write JS7 for a bore, js7 for a shaft",
        ),
        ("32 H0", "'32 H0' has the grade 0. Write a grade from 1 to 18, as in H6"),
        ("32 H06", "'32 H06' has the grade 06. Write a grade from 1 to 18, as in H6"),
        ("32 H19", "'32 H19' has the grade 19. Write a grade from 1 to 18, as in H6"),
        ("32 H7/g6", f"'32 H7/g6' names the classes of two parts. {ONE_CLASS}"),
        ("32 H6 H7", f"'32 H6 H7' has two classes. {ONE_CLASS}"),
        ("32 H6 ±0.003", f"'32 H6 ±0.003' {TWO_WAYS}"),
        ("32 ±0.003 H6", f"'32 ±0.003 H6' {TWO_WAYS}"),
        ("32 +0.02/0 H6", f"'32 +0.02/0 H6' {TWO_WAYS}"),
        ("±0.003", "'±0.003' has no nominal size. Write it before the tolerance: 32 ±0.003"),
        ("32 ±", "'32 ±' has no plain number after the ± sign. Write it as in 32.041 ±0.003"),
        ("32 ±-3", "'32 ±-3' has no plain number after the ± sign. Write it as in 32.041 ±0.003"),
        ("32,041 ±0,003", "'32,041 ±0,003' is not a size. Write a point for the decimal: 32.041 ±0.003"),
        ("32 +0,021/0", "'32 +0,021/0' is not a size. Write a point for the decimal: 32 +0.021/0"),
        ("32 +0.02.1/0", f"'32 +0.02.1/0' has two points. Write one point for the decimal, {AS_IN}"),
        ("32 MM H6", "'32 MM H6' is not a size: capital and small letters matter. Write 32 mm"),
        ("32 ±3 deg", f"'32 ±3 deg' is an angle, not a size. Write a size, {AS_IN}"),
        ("32 K", f"'32 K' is a temperature, not a size. Write a size, {AS_IN}"),
        ("M8", f"'M8' is not a size. Write it {AS_IN}"),
        ("Ø32 h6", "'Ø32 h6' carries the sign for a diameter or radius. Write the size without it"),
        ("9 m ±12 m", "'9 m ±12 m' has a deviation of more than 10 m. Check the number and its unit"),
        (32e8, "3200000000 is longer than 10 m. Check the number and its unit"),
        ("", "an empty text is not a size. Write 32 H6 or 32.041 ±0.003, or leave the key away"),
        (True, f"true is not a size. Write it {AS_IN}"),
        (None, f"an empty entry is not a size. Write it {AS_IN}"),
    ],
)
def test_a_size_that_says_too_little_or_too_much_is_refused(text, message):
    with pytest.raises(NotationError) as caught:
        size(text, units="mm")
    assert message == str(caught.value)


def test_a_tolerance_in_millimetres_beside_a_bare_size_in_inches_is_refused():
    with pytest.raises(NotationError) as caught:
        size("1.25 ±0.005 mm", units="in")
    assert "'1.25 ±0.005 mm' has a unit on its tolerance only. Write it on the size too: 1.25 in ±0.005 mm" == str(
        caught.value
    )


def test_a_size_below_the_smallest_allowed_is_refused():
    with pytest.raises(NotationError) as caught:
        size("-3 H6", units="mm", at_least=0.0)
    assert "'-3 H6' is below zero. Write 0 or more, without a minus sign" == str(caught.value)


@given(
    st.decimals(min_value=1, max_value=900, places=3),
    st.decimals(min_value=-1, max_value=1, places=3),
    st.decimals(min_value=-1, max_value=1, places=3),
)
def test_limits_come_out_in_order_whatever_the_order_they_are_written_in(nominal, first, second):
    read = size(f"{nominal:f} {first:+f}/{second:+f}", units="mm")
    assert Size(float(nominal), float(min(first, second)), float(max(first, second))) == read


@given(st.text(max_size=30))
def test_any_text_is_a_size_or_refused_in_words(text):
    try:
        read = size(text, units="mm")
    except NotationError as why:
        assert why.problem and why.hint
    else:
        assert (read.lower is None) == (read.upper is None)
        assert read.lower is None or read.lower <= read.upper
