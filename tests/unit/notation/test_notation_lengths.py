"""Lengths, bounds and ranges as a planner types them."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck.notation import NotationError, bound, length, length_range, span, temperature

ONE_INCH = 25.4  # mm, exactly (international yard and pound agreement, 1959)


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("12 um", 0.012),
        ("12um", 0.012),
        ("12 µm", 0.012),  # micro sign
        ("12 μm", 0.012),  # Greek mu
        ("5 micron", 0.005),
        ("5 microns", 0.005),
        ("0.012 mm", 0.012),
        ("12\u00a0um", 0.012),  # fixed space, as word processors put it
        ("1.2 cm", 12.0),
        ("0.5 m", 500.0),
        ("1 in", ONE_INCH),
        ("0.0005 in", 0.0127),
        ("1.25 in.", 31.75),
        ("2 inches", 50.8),
        ('1"', ONE_INCH),
        ("1″", ONE_INCH),
        ("0.5 thou", 0.0127),
        ("2 mil", 0.0508),
        ("32 uin", 0.0008128),
        ("1/2 in", 12.7),
        ("3/8 in", 9.525),
        ("1 1/4 in", 31.75),
        ('1 1/4"', 31.75),
        ("-1/2 in", -12.7),
        ("-2 mm", -2.0),
        ("− 2 mm", -2.0),  # minus sign of a word processor
        ("+3 mm", 3.0),
        (".5", 0.5),
        ("5.", 5.0),
        ("1e-3", 0.001),
        ("-0", 0.0),
        (120, 120.0),
        (32.041, 32.041),
        (1e-05, 0.00001),
    ],
)
def test_every_spelling_of_a_length_gives_its_millimetres(text, expected):
    assert expected == length(text, units="mm")


def test_a_bare_number_takes_the_units_of_the_file():
    assert 31.75 == length(1.25, units="in")
    assert 31.75 == length("1.25", units="in")
    assert 1.25 == length("1.25", units="mm")
    assert 0.012 == length("12 um", units="in")


def test_the_same_length_in_three_units_is_the_same_float():
    assert length("12 um", units="mm") == length("0.012 mm", units="mm") == length(0.012, units="mm") == 0.012
    assert length("0.0005 in", units="mm") == length("0.5 thou", units="mm") == length("0.0127", units="mm")


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("2,5 um", "'2,5 um' is not a length. Write a point for the decimal: 2.5 um"),
        ("0,125 in", "'0,125 in' is not a length. Write a point for the decimal: 0.125 in"),
        (",5 um", "',5 um' is not a length. Write a point for the decimal: 0.5 um"),
        (
            "1,250 mm",
            "'1,250 mm' is not a length. "
            "Write 1.250 mm with a point for the decimal, or 1250 mm without the comma for thousands",
        ),
        ("1,250,000 um", "'1,250,000 um' is not a length. Write thousands without commas: 1250000 um"),
        ("1.250,5 mm", "'1.250,5 mm' is not a length. Write a point for the decimal: 1250.5 mm"),
        ("1,250.5 mm", "'1,250.5 mm' is not a length. Write a point for the decimal: 1250.5 mm"),
        (
            "2 um, 3 um",
            "'2 um, 3 um' is not a length. Write one value without a comma, or a list in brackets: [2 um, 3 um]",
        ),
        ("1 000 mm", "'1 000 mm' has a gap in its number. Write it without: 1000 mm"),
        ("1'000 mm", "'1'000 mm' has a gap in its number. Write it without: 1000 mm"),
        ("1_000 mm", "'1_000 mm' has a gap in its number. Write it without: 1000 mm"),
        ("2 5 um", "'2 5 um' has a gap in its number. Write one number, as in 2.5 um"),
        ("010 um", "'010 um' begins with a zero. Write 10 um, or 0.10 um if a point is missing"),
        ("2.5.1 mm", "'2.5.1 mm' has two points. Write one point for the decimal, as in 2.5 um"),
        ("--2 mm", "'--2 mm' has two signs. Write one sign or none, as in 2.5 um"),
        ("±2 mm", "'±2 mm' has a ± sign where a length without sign stands. Write 2 mm"),
        ("12:30", "'12:30' has a colon in its number. Write it as in 2.5 um"),
        ("１２ um", "'１２ um' has digits other than 0 to 9. Type it again: 12 um"),
        ("١٢ um", "'١٢ um' has digits other than 0 to 9. Type it with plain digits, as in 2.5 um"),
        ("", "an empty text is not a length. Write 2.5 um, or leave the key away"),
        ("nan", "'nan' is not a length. Write it as in 2.5 um"),
        ("inf mm", "'inf mm' is not a length. Write it as in 2.5 um"),
        ("max 5", "'max 5' is not a length. Write it as in 2.5 um"),
        ("<5 um", "'<5 um' begins with a sign that is not read. Write the value alone, as in 2.5 um"),
        ("Ø32", "'Ø32' carries the sign for a diameter or radius. Write the size without it"),
        ("12 m", "'12 m' is longer than 10 m. Check the number and its unit"),
        ("1e99 mm", "'1e99 mm' has too many digits. Write it as in 2.5 um"),
        (True, "true is not a length. Write it as in 2.5 um"),
        (None, "an empty entry is not a length. Write it as in 2.5 um"),
        ([1], "a list is not a length. Write it as in 2.5 um"),
        ({}, "a group of entries is not a length. Write it as in 2.5 um"),
        (float("nan"), "nan is not a length. Write a number, as in 2.5 um"),
        (float("inf"), "inf is not a length. Write a number, as in 2.5 um"),
        ("5 \x1b[31mum", "'5 \ufffd[31mum' is not a length: '\ufffd[31mum' is no unit of it. "
         "Write um, mm, in or thou, as in 2.5 um"),
    ],
)  # fmt: skip
def test_a_number_that_may_mean_two_things_is_refused(text, message):
    assert message == refusal(lambda: length(text, units="mm"))


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("3 mim", "'3 mim' is not a length: 'mim' is no unit of it. Write 3 mm"),
        ("3 foo", "'3 foo' is not a length: 'foo' is no unit of it. Write um, mm, in or thou, as in 2.5 um"),
        ("3 MM", "'3 MM' is not a length: capital and small letters matter. Write 3 mm"),
        ("3 Mm", "'3 Mm' is not a length: capital and small letters matter. Write 3 mm"),
        ("3 UM", "'3 UM' is not a length: capital and small letters matter. Write 3 um"),
        ("3 In", "'3 In' is not a length: capital and small letters matter. Write 3 in"),
        ("3 M", "'3 M' is not a length. Write mm, or m in a small letter for metres"),
        ("5 µ", "'5 µ' is not a length. Write um for micrometres"),
        ("5 nm", "'5 nm' is not a length. Nanometres are not read: write um (1000 nm are 1 um)"),
        ("5'", "'5'' is not a length. Feet are not read: write mm or in"),
        (
            "3 tenths",
            "'3 tenths' is not a length. A tenth is 0.1 mm in one shop and 0.0001 in in the next: write mm, um or in",
        ),
        ("10 deg", "'10 deg' is an angle, not a length. Write a length, as in 2.5 um"),
        ("3deg 34' 35\"", "'3deg 34' 35\"' is an angle, not a length. Write a length, as in 2.5 um"),
        ("5 N", "'5 N' is a force, not a length. Write a length, as in 2.5 um"),
        ("5 N m", "'5 N m' is a torque, not a length. Write a length, as in 2.5 um"),
        ("20 degC", "'20 degC' is a temperature, not a length. Write a length, as in 2.5 um"),
        ("10 %", "'10 %' is a share, not a length. Write a length, as in 2.5 um"),
        ("2 mm 3", "'2 mm 3' is not a length: 'mm 3' is no unit of it. Write um, mm, in or thou, as in 2.5 um"),
    ],
)
def test_a_wrong_unit_is_refused_with_the_unit_to_write(text, message):
    assert message == refusal(lambda: length(text, units="mm"))


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("1-1/4 in", "'1-1/4 in' has a dash before its fraction. Write a space: 1 1/4 in"),
        ("1/2 mm", "'1/2 mm' is a fraction, and not of an inch. Write 1/2 in, or the decimal 0.5 mm"),
        ("1 1/2", "'1 1/2' is a fraction without unit. Write 1 1/2 in, or the decimal 1.5 mm"),
        ("3/10 in", "'3/10 in' is no fraction of an inch. Write halves to 128ths, as in 1 1/4 in, or a decimal"),
        ("1/0 in", "'1/0 in' is no fraction of an inch. Write halves to 128ths, as in 1 1/4 in, or a decimal"),
        ("1 5/4 in", "'1 5/4 in' is no fraction of an inch. Write halves to 128ths, as in 1 1/4 in, or a decimal"),
    ],
)
def test_a_fraction_is_read_only_as_a_part_of_an_inch(text, message):
    assert message == refusal(lambda: length(text, units="mm"))


@pytest.mark.parametrize(
    ("value", "units", "write"),
    [
        (0.01, "mm", "write 0.01 mm or 10 um"),
        ("0.01", "mm", "write 0.01 mm or 10 um"),
        (10, "mm", "write 10 um, or 10 mm if that is meant"),
        (0, "mm", "write 0 um"),
        (0.0005, "in", "write 0.0005 in or 0.5 thou"),
        (2, "in", "write 2 thou, or 2 in if that is meant"),
    ],
)
def test_an_error_entry_without_unit_is_refused_and_both_readings_are_shown(value, units, write):
    shown = f"'{value}'" if isinstance(value, str) else str(value)
    expected = f"{shown} has no unit, so it is not a length. An error entry needs its unit: {write}"
    assert expected == refusal(lambda: length(value, units=units, unit_needed=True))
    assert expected == refusal(lambda: bound(value, units=units))


def test_a_length_below_the_smallest_allowed_is_refused():
    assert 0.5 == length("0.5 mm", units="mm", at_least=0.5)
    assert "'2 um' is too small. Write 0.5 mm or more" == refusal(lambda: length("2 um", units="mm", at_least=0.5))
    assert "'-2 um' is below zero. Write 0 or more, without a minus sign" == refusal(
        lambda: length("-2 um", units="mm", at_least=0.0)
    )


def test_exactly_ten_metres_are_still_a_length():
    assert 10_000.0 == length("10 m", units="mm")
    assert "'10.001 m' is longer than 10 m. Check the number and its unit" == refusal(
        lambda: length("10.001 m", units="mm")
    )


@pytest.mark.parametrize("text", ["10 um", "±10 um", "± 10 um", "+-10 um", "+/-10 um", "+10 um", "0.01 mm"])
def test_a_bound_may_carry_its_plus_minus_sign(text):
    assert 0.01 == bound(text)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("-3 um", "'-3 um' is below zero. Write 0 or more, without a minus sign"),
        ("±-3 um", "'±-3 um' has a second sign. Write ±3 um"),
        ("±", "'±' is not a length. Write it as in 2.5 um"),
        ("±2,5 um", "'±2,5 um' is not a length. Write a point for the decimal: 2.5 um"),
    ],
)
def test_a_bound_is_never_negative(text, message):
    assert message == refusal(lambda: bound(text))


@pytest.mark.parametrize(
    "text", [["2 um", "14 um"], ("0.002 mm", "14 um"), "2 um to 14 um", "2 to 14 um", "2..14 um", "2 um .. 14 um"]
)
def test_a_range_has_its_smaller_value_first(text):
    assert (0.002, 0.014) == length_range(text)


def test_a_range_may_be_one_value_wide_and_may_cross_zero():
    assert (0.002, 0.002) == length_range(["2 um", "2 um"])
    assert (-0.002, 0.002) == length_range("-2 um .. 2 um")


@pytest.mark.parametrize(
    ("text", "message"),
    [
        (
            ["14 um", "2 um"],
            "the first value '14 um' is larger than the second '2 um'. Write the smaller first: [2 um, 14 um]",
        ),
        (["1 um"], "the list has one value where a smallest and a largest stand. Write two: [2 um, 14 um]"),
        (["1 um"] * 3, "the list has 3 values where a smallest and a largest stand. Write two: [2 um, 14 um]"),
        ([], "the list has no value where a smallest and a largest stand. Write two: [2 um, 14 um]"),
        ("10 um", "'10 um' is not a smallest and a largest value. Write [2 um, 14 um]"),
        (5, "5 is not a smallest and a largest value. Write [2 um, 14 um]"),
        (None, "an empty entry is not a smallest and a largest value. Write [2 um, 14 um]"),
        ("2 um, 14 um", "'2 um, 14 um' is one text, not two values. Write a list in brackets: [2 um, 14 um]"),
        (["2,5 um", "14 um"], "'2,5 um' is not a length. Write a point for the decimal: 2.5 um"),
        (["1 deg", "14 um"], "'1 deg' is an angle, not a length. Write a length, as in 2.5 um"),
    ],
)
def test_what_is_not_two_lengths_in_order_is_no_range(text, message):
    assert message == refusal(lambda: length_range(text))


def test_a_span_reads_any_kind_of_value():
    assert (5.0, 45.0) == span(["5 degC", "45 degC"], temperature, example="[5 degC, 45 degC]")


def test_the_parts_of_a_refusal_can_be_taken_apart():
    with pytest.raises(ValueError) as caught:
        length("2,5 um", units="mm")
    assert isinstance(caught.value, NotationError)
    assert "'2,5 um' is not a length" == caught.value.problem
    assert "Write a point for the decimal: 2.5 um" == caught.value.hint


def test_a_number_of_five_thousand_digits_is_refused_without_being_written_out():
    assert "a huge number has too many digits. Write it as in 2.5 um" == refusal(lambda: length(10**5000, units="mm"))


@given(st.decimals(min_value=-9000, max_value=9000, places=6), st.sampled_from(["mm", "um", "in", "thou"]))
def test_no_number_with_a_decimal_comma_is_ever_read(number, unit):
    text = f"{number:f}".replace(".", ",")
    with pytest.raises(NotationError):
        length(f"{text} {unit}", units="mm")


@given(st.text(max_size=30))
def test_any_text_is_read_or_refused_in_words(text):
    try:
        value = length(text, units="mm")
    except NotationError as why:
        assert why.problem and why.hint
    else:
        assert abs(value) <= 10_000.0


@given(st.floats(min_value=-10, max_value=10, allow_subnormal=False))
def test_units_convert_by_their_definition(number):
    bare = length(number, units="mm")
    assert length(number, units="in") == pytest.approx(25.4 * bare, rel=1e-15)
    assert length(f"{number!r} um", units="mm") == pytest.approx(bare / 1000, rel=1e-15)


def refusal(read):
    with pytest.raises(NotationError) as caught:
        read()
    return str(caught.value)
