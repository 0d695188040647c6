"""Temperatures, torques, forces and the rest, and limits whose kind the unit tells."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from setupcheck import notation
from setupcheck.notation import Amount, NotationError, Roughness, amount, roughness

ROUNDING = 1e-15  # relative

# Pound-force foot and psi: NIST SP 811, appendix B.8 (from memory); the rest follows from the definitions of the units.
READ = [
    ("temperature", "140 degC", 140.0),
    ("temperature", "140 °C", 140.0),
    ("temperature", "140 ℃", 140.0),
    ("temperature", "-5 degC", -5.0),
    ("temperature", "284 degF", 140.0),
    ("temperature", "32 °F", 0.0),
    ("temperature", "293.15 K", 20.0),
    ("temperature", "0 K", -273.15),
    ("temperature_difference", "10 degC", 10.0),
    ("temperature_difference", "10 K", 10.0),
    ("temperature_difference", "18 degF", 10.0),
    ("temperature_difference", "±2 K", 2.0),
    ("temperature_difference", "-3 K", -3.0),
    ("torque", "40 N m", 40_000.0),
    ("torque", "40 N*m", 40_000.0),
    ("torque", "40 N·m", 40_000.0),
    ("torque", "40 Nm", 40_000.0),
    ("torque", "500 N mm", 500.0),
    ("torque", "30 lbf ft", 30 * 1355.8179483314004),
    ("torque", "30 ft-lb", 30 * 1355.8179483314004),
    ("torque", "12 in lbf", 1355.8179483314004),
    ("force", "800 N", 800.0),
    ("force", "12 kN", 12_000.0),
    ("force", "10 lbf", 44.482216152605),
    ("force", "1 kgf", 9.80665),
    ("pressure", "110 MPa", 110.0),
    ("pressure", "110 N/mm2", 110.0),
    ("pressure", "110 N/mm²", 110.0),
    ("pressure", "210 GPa", 210_000.0),
    ("pressure", "6 bar", 0.6),
    ("pressure", "1 psi", 0.006894757293168361),
    ("pressure", "30 ksi", 206.84271879505085),
    ("conductivity", "52 W/mK", 52.0),
    ("conductivity", "52 W/(m K)", 52.0),
    ("conductivity", "52 W/(m*K)", 52.0),
    ("conductivity", "52 W/(m·K)", 52.0),
    ("conductivity", "52 W/m K", 52.0),
    ("conductivity", "52 W/m/K", 52.0),
    ("conductivity", "1 Btu/h/ft/degF", 1055.05585262 / 3600 / 0.3048 * 1.8),
    ("duration", "12 s", 12.0),
    ("duration", "5 min", 300.0),
    ("duration", "2 h", 7200.0),
    ("volume", "40 m3", 40.0),
    ("volume", "40 m\u00b3", 40.0),
    ("volume", "5 l", 0.005),
    ("volume", "1000 ft3", 28.316846592),
    ("fraction", "95 %", 0.95),
    ("fraction", "95%", 0.95),
    ("fraction", "0.95", 0.95),
    ("fraction", 0.95, 0.95),
    ("fraction", 0, 0.0),
    ("fraction", 1, 1.0),
    ("mass", "2.5 kg", 2.5),
    ("mass", "300 g", 0.3),
    ("mass", "4 lb", 1.81436948),
    ("speed", "1400 rpm", 1400.0),
    ("speed", "1400 1/min", 1400.0),
    ("speed", "1400 rev/min", 1400.0),
    ("speed", "2 rev/s", 120.0),
    ("number", "0.8", 0.8),
    ("number", 72, 72.0),
]


@pytest.mark.parametrize(("kind", "text", "expected"), READ)
def test_every_kind_of_value_comes_out_in_its_base_unit(kind, text, expected):
    assert expected == pytest.approx(getattr(notation, kind)(text), rel=ROUNDING)


CASE = "capital and small letters matter"


@pytest.mark.parametrize(
    ("kind", "text", "message"),
    [
        ("temperature", 20, "20 has no unit, so it is not a temperature. Write 20 degC"),
        ("temperature", "20 C", "'20 C' is not a temperature. The unit C is the coulomb: write degC"),
        ("temperature", "70 F", "'70 F' is not a temperature. The unit F is the farad: write degF"),
        ("temperature", "20 deg", "'20 deg' is not a temperature. The unit deg is an angle: write degC"),
        ("temperature", "20 degc", f"'20 degc' is not a temperature: {CASE}. Write 20 degC"),
        ("temperature", "-300 degC", "'-300 degC' is below absolute zero. Check the number and its unit"),
        ("temperature", "3000 degC", "'3000 degC' is hotter than 2000 degC. Check the number and its unit"),
        ("temperature", "20,5 degC", "'20,5 degC' is not a temperature. Write a point for the decimal: 20.5 degC"),
        ("temperature", "20 mm", "'20 mm' is a length, not a temperature. Write a temperature, as in 140 degC"),
        ("temperature_difference", 10, "10 has no unit, so it is not a temperature difference. Write 10 K"),
        ("temperature_difference", "10 k", f"'10 k' is not a temperature difference: {CASE}. Write 10 K"),
        ("torque", 40, "40 has no unit, so it is not a torque. Write its unit too: N m, N mm or lbf ft"),
        ("torque", "40 nm", "'40 nm' is not a torque. Small nm are nanometres: write N m"),
        ("torque", "40 NM", f"'40 NM' is not a torque: {CASE}. Write 40 Nm"),
        ("torque", "40 N", "'40 N' is a force, not a torque. Write a torque, as in 40 N m"),
        ("torque", "-40 N m", "'-40 N m' is below zero. Write 0 or more, without a minus sign"),
        ("torque", "1e30 N m", "'1e30 N m' is larger than anything in a shop. Check the number and its unit"),
        ("force", "4 kn", f"'4 kn' is not a force: {CASE}. Write 4 kN"),
        ("force", "4 kg", "'4 kg' is not a force. The unit kg is a mass: write N (1 kg weighs 9.81 N) or kgf"),
        ("force", "4 lb", "'4 lb' is not a force. The unit lb is a mass: write lbf"),
        ("force", "4 N m", "'4 N m' is a torque, not a force. Write a force, as in 12 kN"),
        ("pressure", "110 mPa", "'110 mPa' is not a pressure. Small mPa are thousandths of a pascal: write MPa"),
        ("pressure", "110", "'110' has no unit, so it is not a pressure. Write its unit too: MPa, N/mm2, bar or psi"),
        (
            "conductivity",
            52,
            "52 has no unit, so it is not a heat conductivity. Write its unit too: W/mK",
        ),
        ("conductivity", "52 W/mk", f"'52 W/mk' is not a heat conductivity: {CASE}. Write 52 W/mK"),
        ("conductivity", "52 W/m", "'52 W/m' is not a heat conductivity. The kelvin is missing: write W/mK"),
        (
            "conductivity",
            "15 %IACS",
            "'15 %IACS' is not a heat conductivity. "
            "Electrical conductivity stands in the place of that of heat: write W/mK",
        ),
        (
            "conductivity",
            "0 W/mK",
            "'0 W/mK' lets no heat through. Write what the data sheet says, as in 52 W/mK",
        ),
        ("conductivity", "-5 W/mK", "'-5 W/mK' is below zero. Write 0 or more, without a minus sign"),
        ("duration", "5 m", "'5 m' is not a time. The unit m is the metre: write min for minutes"),
        ("duration", "5'", "'5'' is not a time. Minutes of arc stand in the place of a time: write min"),
        ("duration", 12, "12 has no unit, so it is not a time. Write its unit too: s, min or h"),
        ("volume", 40, "40 has no unit, so it is not a volume. Write its unit too: m3, l or ft3"),
        ("volume", "40 m2", "'40 m2' is not a volume. The unit m2 is an area: write the volume in m3"),
        ("volume", "2 gal", "'2 gal' is not a volume. A gallon is 3.8 l in one country and 4.5 l in another: write l"),
        ("volume", "40 m", "'40 m' is a length, not a volume. Write a volume, as in 40 m3"),
        ("duration", "1:30", "'1:30' has a colon in its number. Write it as in 12 s"),
        ("fraction", 95, "95 is more than the whole. Write 95 %, or 0.95 as a share of one"),
        ("fraction", "120 %", "'120 %' is more than the whole. Write 100 % or less"),
        ("fraction", 150, "150 is more than the whole. Write 100 % or less"),
        ("fraction", "-5 %", "'-5 %' is below zero. Write 0 or more, without a minus sign"),
        ("fraction", "9,5 %", "'9,5 %' is not a share. Write a point for the decimal: 9.5 %"),
        ("mass", "4 N", "'4 N' is not a mass. The unit N is a force: write kg"),
        (
            "speed",
            "100 m/min",
            "'100 m/min' is not a speed of rotation. "
            "A cutting speed in m/min does not fit here: write the spindle speed in rpm",
        ),
        ("number", "72 mm", "'72 mm' is a length, not a number. Write a number, as in 72"),
        ("number", "1/2", "'1/2' is a fraction. Write the decimal: 0.5"),
        ("number", True, "true is not a number. Write it as in 72"),
    ],
)
def test_a_value_of_the_wrong_kind_is_refused_with_what_to_write(kind, text, message):
    assert message == refusal(getattr(notation, kind), text)


def test_a_number_below_the_smallest_allowed_is_refused():
    with pytest.raises(NotationError) as caught:
        notation.number("2", at_least=3)
    assert "'2' is too small. Write 3 or more" == str(caught.value)


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("Rz 4 um", Roughness("Rz", 0.004)),
        ("Rz4um", Roughness("Rz", 0.004)),
        ("Ra 0.8 µm", Roughness("Ra", 0.0008)),
        ("Ra 32 uin", Roughness("Ra", 0.0008128)),
    ],
)
def test_a_roughness_keeps_its_figure_and_its_height(text, expected):
    assert expected == roughness(text)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("4 um", "'4 um' does not say which roughness. Write Rz 4 um or Ra 0.8 um"),
        (4, "4 does not say which roughness. Write Rz 4 um or Ra 0.8 um"),
        ("Rz 4", "'Rz 4' has no unit, so it is not a roughness. Write Rz 4 um"),
        ("RZ 4 um", "'RZ 4 um' is not a roughness. Write Rz 4 um"),
        ("Rt 4 um", "'Rt 4 um' is not a roughness. Only Ra and Rz are read: write Rz 4 um or Ra 0.8 um"),
        ("N7", "'N7' is not a roughness. Only Ra and Rz are read: write Rz 4 um or Ra 0.8 um"),
        ("Rz 0,4 um", "'Rz 0,4 um' is not a roughness. Write a point for the decimal: 0.4 um"),
        ("Rz -1 um", "'Rz -1 um' is below zero. Write 0 or more, without a minus sign"),
        ("Rz 4 mm", "'Rz 4 mm' is rougher than 1 mm. Check the number and its unit"),
    ],
)
def test_a_roughness_without_its_figure_or_unit_is_refused(text, message):
    assert message == refusal(roughness, text)


@pytest.mark.parametrize(
    ("text", "value", "dimension"),
    [
        ("40 um", 0.04, "length"),
        ("±10 um", 0.01, "length"),
        ("1/2 in", 12.7, "length"),
        ('75"', math.radians(75 / 3600), "angle"),
        ('±20"', math.radians(20 / 3600), "angle"),
        ("3deg 34' 35\"", math.radians(3 + 34 / 60 + 35 / 3600), "angle"),
        ("40 N m", 40_000.0, "torque"),
        ("12 kN", 12_000.0, "force"),
        ("25 %", 0.25, "fraction"),
        ("140 degC", 140.0, "temperature"),
        ("10 K", 10.0, "temperature_difference"),
        ("±9 degF", 5.0, "temperature_difference"),
        ("110 MPa", 110.0, "pressure"),
        ("12 s", 12.0, "duration"),
        ("5 l", 0.005, "volume"),
        ("2 kg", 2.0, "mass"),
        ("1400 1/min", 1400.0, "speed"),
        (3, 3.0, "number"),
        ("0.5", 0.5, "number"),
        ("±3", 3.0, "number"),
        ("-3 um", -0.003, "length"),
    ],
)
def test_the_unit_of_a_limit_tells_its_dimension(text, value, dimension):
    read = amount(text)
    assert dimension == read.dimension
    assert value == pytest.approx(read.value, rel=ROUNDING)


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("40 mim", "'40 mim' has an unknown unit. Write 40 mm"),
        ("40 NM", "'40 NM' has an unknown unit. Write 40 Nm"),
        ("40 foo", "'40 foo' has an unknown unit. Write a unit such as um, mm, arcsec, deg, N m, %"),
        ("40 um 3", "'40 um 3' has an unknown unit. Write a unit such as um, mm, arcsec, deg, N m, %"),
        ("20 C", "'20 C' has an unknown unit. The unit C is the coulomb: write degC"),
        ("2,5 um", "'2,5 um' is not an amount. Write a point for the decimal: 2.5 um"),
        ("1 000 um", "'1 000 um' has a gap in its number. Write it without: 1000 um"),
        ("40..5 um", "'40..5 um' has two points. Write one point for the decimal, as in 40 um, 75\" or 25 %"),
        ("±-3", "'±-3' has a second sign. Write ±3"),
        ("tight", "'tight' is not a number. Write it as in 72"),
        (True, 'true is not an amount. Write it as in 40 um, 75" or 25 %'),
        ("", 'an empty text is not an amount. Write 40 um, 75" or 25 %, or leave the key away'),
    ],
)
def test_a_limit_of_no_known_unit_is_refused(text, message):
    assert message == refusal(amount, text)


def test_a_double_prime_in_an_inch_file_may_mean_inches_and_is_refused():
    with pytest.raises(NotationError) as caught:
        amount('0.002"', "in")
    expected = "'0.002\"' may be inches or seconds of arc. Write 0.002 in, or 0.002 arcsec"
    assert expected == str(caught.value)
    assert Amount(angle_of('3deg 20"'), "angle") == amount('3deg 20"', "in")


def angle_of(text):
    return notation.angle(text)


@given(
    st.sampled_from(
        ["temperature", "temperature_difference", "torque", "force", "pressure", "duration", "fraction", "mass",
         "speed", "volume", "roughness", "amount", "number"]
    ),
    st.text(alphabet="0123456789.,+-±/ '\"°degCFKNmulbfthiRaz%\u00b2\u00b3", max_size=20),
)  # fmt: skip
def test_any_text_is_read_or_refused_in_words(kind, text):
    try:
        getattr(notation, kind)(text)
    except NotationError as why:
        assert why.problem and why.hint


def refusal(read, text):
    with pytest.raises(NotationError) as caught:
        read(text)
    return str(caught.value)
