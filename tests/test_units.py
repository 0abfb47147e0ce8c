"""Text with a unit to SI and back: right to the last bit, and nothing guessed."""

import math
import re
from decimal import Decimal, localcontext
from fractions import Fraction

import mpmath
import numpy as np
import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from geom import units
from geom.units import QUANTITIES, UNITS, Quantity, feet_inches, length, number

EACH = pytest.mark.parametrize("quantity", QUANTITIES, ids=lambda quantity: quantity.name)


@pytest.mark.parametrize(
    ("text", "inches"),
    [
        ("13 ft 9 1/2 in", "165.5"),
        ("13'-9 1/2\"", "165.5"),
        ("13' 9 1/2\"", "165.5"),
        ("13'-9-1/2\"", "165.5"),
        ("13ft 9.5in", "165.5"),
        ("13′ 9 1⁄2″", "165.5"),
        ("5' 4 3/8\"", "64.375"),
        ("9 1/2 in", "9.5"),
        ("1/2 in", "0.5"),
        ("5/4 in", "1.25"),
        ('7 1/3"', "7.3333333333333333333333333333333333333333"),
        ("13'", "156"),
        ("13.25 ft", "159"),
        ("0'-0 1/16\"", "0.0625"),
        ("-1'-6\"", "-18"),
    ],
)
def test_feet_and_inches_are_the_double_nearest_to_what_is_written(text: str, inches: str) -> None:
    with localcontext(prec=50):
        assert length(text) == float(Decimal(inches) * Decimal("0.0254"))


@pytest.mark.parametrize(
    ("text", "metres"),
    [
        ("4.2 m", 4.2),
        ("4.2m", 4.2),
        ("  600   mm ", 0.6),
        ("60 cm", 0.6),
        ("0.3 km", 300.0),
        ("-3 mm", -0.003),
        ("+3 mm", 0.003),
        ("\N{MINUS SIGN}3 mm", -0.003),
        (".5 m", 0.5),
        ("1.5e3 mm", 1.5),
        ("4.2\N{NO-BREAK SPACE}m", 4.2),
    ],
)
def test_metric_lengths_are_the_double_a_decimal_in_metres_would_be(text: str, metres: float) -> None:
    assert length(text) == metres


@given(
    st.decimals(-(10**7), 10**7, allow_nan=False, allow_infinity=False, places=4),
    st.sampled_from(list(UNITS)),
)
@example(Decimal("4.2"), "mm")
def test_a_bare_number_is_the_same_written_as_text_and_off_by_no_bit(written: Decimal, unit: str) -> None:
    exact = Fraction(written) * Fraction(repr(UNITS[unit].metres))
    assert length(float(written), unit) == exact.numerator / exact.denominator
    assert length(f"{written:f} {unit}") == length(float(written), unit)
    assert length(f"{written:f}", unit) == length(float(written), unit)


def test_a_length_with_its_own_unit_disregards_the_unit_of_the_file() -> None:
    assert length("600 mm", "ft") == 0.6
    assert length("9 1/2", "in") == length("9 1/2 in", "mm")


def test_an_integer_and_a_number_of_an_array_are_numbers() -> None:
    assert length(1500, "mm") == length(np.float64(1500.0), "mm") == 1.5


# NIST Special Publication 811 (Thompson and Taylor, 2008), appendix B.8: seven figures, from memory.
@pytest.mark.parametrize(
    ("quantity", "text", "si"),
    [
        (units.force, "1 lbf", 4.448222),
        (units.force, "1 kgf", 9.80665),
        (units.force, "1.2 kN", 1200),
        (units.force, "0.02 MN", 20000),
        (units.mass, "1 lb", 0.4535924),
        (units.mass, "1 oz", 2.834952e-2),
        (units.mass, "2 t", 2000),
        (units.mass, "250 g", 0.25),
        (units.area, "1 in2", 6.4516e-4),
        (units.area, "1 ft2", 9.290304e-2),
        (units.area, "20 mm2", 20e-6),
        (units.area, "3 cm2", 3e-4),
        (units.pressure, "1 psi", 6.894757e3),
        (units.pressure, "1 ksi", 6.894757e6),
        (units.pressure, "1 psf", 4.788026e1),
        (units.pressure, "1 kgf/mm2", 9.80665e6),
        (units.modulus, "100 GPa", 100e9),
        (units.modulus, "5 N/mm2", 5e6),
        (units.force_per_area, "0.12 kN/m2", 120),
        (units.force_per_length, "1 lbf/ft", 1.459390e1),
        (units.force_density, "50 N/m", 50),
        (units.density, "120 pcf", 120 * 1.601846e1),
        (units.density, "1 lb/ft3", 1.601846e1),
        (units.mass_per_length, "0.5 lb/ft", 0.5 * 1.488164),
        (units.mass_per_length, "170 g/m", 0.17),
        (units.expansion, "12e-6 /K", 12e-6),
        (units.expansion, "6.5e-6 /F", 11.7e-6),
        (units.temperature, "68 F", 20),
        (units.temperature, "-40 °F", -40),
        (units.temperature, "20 C", 20),
        (units.angle, "0.5 rad", 0.5),
        (units.ratio, "1/20", 0.05),
        (units.ratio, "5 %", 0.05),
    ],
)
def test_units_convert_as_published(quantity: Quantity, text: str, si: float) -> None:
    assert quantity(text) == pytest.approx(si, rel=5e-7)  # half a unit in the last of seven figures, at worst


@pytest.mark.parametrize("text", ["20 mm2", "20 mm^2", "20 mm²", "20mm2"])
def test_a_square_may_be_written_in_three_ways(text: str) -> None:
    assert units.area(text) == 2e-5


@given(st.integers(-720, 720))
def test_an_angle_is_the_double_nearest_to_its_exact_radians(degrees: int) -> None:
    with mpmath.workdps(40):
        assert units.angle(degrees) == float(mpmath.pi * degrees / 180)


@pytest.mark.parametrize(
    ("quantity", "unit"),
    [
        (units.force, "N"),
        (units.mass, "kg"),
        (units.density, "kg/m3"),
        (units.mass_per_length, "kg/m"),
        (units.expansion, "/K"),
        (units.temperature, "C"),
        (units.angle, "deg"),
    ],
)
def test_a_bare_number_counts_in_the_stated_unit(quantity: Quantity, unit: str) -> None:
    assert quantity(7.25) == quantity("7.25") == quantity(f"7.25 {unit}")


@pytest.mark.parametrize(
    "quantity",
    [
        length,
        units.area,
        units.modulus,
        units.pressure,
        units.force_density,
        units.force_per_length,
        units.force_per_area,
    ],
)
def test_where_a_unit_is_required_a_bare_number_is_refused(quantity: Quantity) -> None:
    with pytest.raises(ValueError, match=rf'^20 has no unit; give one of .*, like "{quantity.example}"$'):
        quantity(20)


@pytest.mark.parametrize(
    "text",
    [
        "", " ", "m", "mm 600", "4.2.3 m", "4. m", "1_000 mm", "0x10 mm", "--3 mm", "- 3 mm", "٣ m", "nan",
        "inf m", "4 m 2 cm", "13 ft 9 in 2 mm", "13 ft -9 in", "13'-9 1/2", "13'-12\"", "13.5 ft 2 in", "5''",
        "1/2 ft 3 in", "5/0 in", "9 5/4 in", "9 2/2 in", "1/2/3 in", "1e9999999999 m", "9**9**9", "2*3 m",
        "1,2,3", "4 m;", "4 m\0", "1" * 5000 + " m",
    ],
)  # fmt: skip
def test_what_is_no_length_is_refused_and_said(text: str) -> None:
    with pytest.raises(ValueError, match=r"^\".*\" is no length; write .*\"$"):
        length(text, "mm")


@EACH
@pytest.mark.parametrize("value", [True, False, None, math.nan, math.inf, -math.inf, [4.2], {"a": 1}, 1j])
def test_no_quantity_is_read_from_what_is_no_finite_number(quantity: Quantity, value: object) -> None:
    with pytest.raises(ValueError, match=rf"is no {quantity.name}; write it like"):
        quantity(value, "mm")


@pytest.mark.parametrize(
    ("quantity", "value", "message"),
    [
        (length, "4,2 m", '"4,2 m" is no length; write the decimal with a point, like "4.2 m"'),
        (units.mass, "1,5 kg", '"1,5 kg" is no mass; write the decimal with a point, like "1.5 kg"'),
        (length, "4,200 mm", '"4,200 mm" is no length; write the number without commas, like "4.2 m"'),
        (length, "13'-9 1/2", '"13\'-9 1/2" is no length; write feet and inches like "13\'-9 1/2\\""'),
        (length, "3 yd", '"3 yd" is in no known unit of length; give one of mm, cm, m, km, in, ft'),
        (units.force, "35 lb", "\"35 lb\" is in a unit of mass, not of force; did you mean 'lbf'?"),
        (length, "3 kg", '"3 kg" is in a unit of mass, not of length; write it like "4.2 m"'),
    ],
)
def test_a_refusal_says_what_was_found_and_what_would_be_right(quantity: Quantity, value: str, message: str) -> None:
    with pytest.raises(ValueError, match=f"^{re.escape(message)}$"):
        quantity(value)


def test_a_unit_in_the_wrong_case_is_not_guessed_but_suggested() -> None:
    with pytest.raises(ValueError, match=r"did you mean 'kN'\?$"):
        units.force("10 KN")
    with pytest.raises(ValueError, match=r"did you mean 'MPa'\?$"):
        units.pressure("10 mpa")


@pytest.mark.parametrize("value", ["1e999 m", "9" * 50 + "e300 m", 10**400, -(10**4000)])
def test_a_number_past_the_largest_double_is_refused(value: object) -> None:
    with pytest.raises(ValueError, match="is too large"):
        length(value, "mm")


@given(st.text() | st.from_regex(r"[0-9./' \"ftinmFk,-]{0,12}", fullmatch=True))
def test_any_text_is_a_finite_length_or_a_refusal_on_one_line(text: str) -> None:
    try:
        assert math.isfinite(length(text, "mm"))
    except ValueError as error:
        assert str(error).isprintable()  # noqa: PT017


@EACH
def test_the_example_in_a_message_is_itself_right(quantity: Quantity) -> None:
    assert quantity(quantity.example) > 0


@EACH
def test_every_listed_unit_is_read_back(quantity: Quantity) -> None:
    for unit, factor in quantity.units.items():
        zero = quantity.zeros.get(unit, Fraction(0))
        assert quantity(f"2 {unit}") == float((2 - zero) * factor)


# The rule is common practice: once, on the total, in sixteenths, half away from zero; carry; reduce.
# The sixteenths of each length are worked out beside it: mm x 16 / 25.4.
@pytest.mark.parametrize(
    ("millimetres", "text"),
    [
        ("304.7", "1'-0\""),  # 191.94 -> 192: sixteen sixteenths and twelve inches are carried
        ("3656.838", "12'-0\""),  # 143.97 in: 2303.52 -> 2304
        ("1000", "3'-3 3/8\""),  # 629.92 -> 630: 39 in and 6/16
        ("1800", "5'-10 7/8\""),  # 1133.86 -> 1134: 70 in and 14/16
        ("0.79375", "0'-0 1/16\""),  # 0.5 exactly -> 1
        ("-0.79375", "-0'-0 1/16\""),  # -0.5 exactly -> -1
        ("0.7937", "0'-0\""),  # 0.49997 -> 0
        ("608.80625", "2'-0\""),  # 383.5 exactly -> 384
        ("4203.7", "13'-9 1/2\""),  # 2648 exactly
        ("-0.1", "0'-0\""),  # nothing has no sign
    ],
)
def test_feet_and_inches_round_once_then_carry_then_reduce(millimetres: str, text: str) -> None:
    assert feet_inches(float(Decimal(millimetres) / 1000)) == text


@given(st.floats(-5000, 5000), st.sampled_from([1, 2, 4, 8, 16, 32, 64]))
def test_feet_and_inches_read_back_within_half_a_part(metres: float, parts: int) -> None:
    text = feet_inches(metres, parts)
    form = re.fullmatch(r"-?[0-9]+'-([0-9]+)(?: ([0-9]+)/([0-9]+))?\"", text)
    assert form is not None
    assert int(form[1]) < 12
    if form[2]:
        assert int(form[2]) % 2 == 1  # over a power of two an odd numerator is reduced
        assert int(form[2]) < int(form[3]) <= parts
    assert length(text) == pytest.approx(metres, rel=1e-15, abs=0.0254 / parts / 2 * (1 + 1e-9))


@given(st.integers(-(10**7), 10**7))
def test_a_length_in_whole_sixteenths_survives_writing_and_reading(sixteenths: int) -> None:
    metres = length(f"{sixteenths}/16 in")
    assert length(feet_inches(metres)) == metres


@pytest.mark.parametrize(
    ("metres", "unit", "decimals", "text"),
    [
        (0.0125, "mm", 0, "13"),  # half, away from zero
        (-0.0125, "mm", 0, "-13"),
        (0.0115, "mm", 0, "12"),  # 0.0115 x 1000 is 11.5; as binary digits it is less
        (4.2037, "in", 3, "165.500"),
        (4.2037, "ft", 2, "13.79"),
        (0.6, "cm", 1, "60.0"),
        (123456.789, "m", 3, "123456.789"),
        (-1e-7, "mm", 2, "0.00"),
        (12345678.9, "mm", 0, "12345678900"),
        (1e-9, "m", 10, "0.0000000010"),
    ],
)
def test_a_plain_number_in_a_drawing_unit_rounds_half_away_from_zero(
    metres: float, unit: str, decimals: int, text: str
) -> None:
    assert number(metres, unit, decimals) == text


@given(st.floats(-1e5, 1e5), st.sampled_from(list(UNITS)), st.integers(0, 6))
def test_a_plain_number_is_within_half_its_last_digit(metres: float, unit: str, decimals: int) -> None:
    back = Fraction(number(metres, unit, decimals)) * Fraction(repr(UNITS[unit].metres))
    half = Fraction(repr(UNITS[unit].metres)) / 2 / 10**decimals
    assert abs(back - Fraction(repr(metres))) <= half


@pytest.mark.parametrize("value", [math.nan, math.inf])
def test_what_is_not_finite_is_not_written_as_a_length(value: float) -> None:
    with pytest.raises(ValueError, match="cannot be written"):
        feet_inches(value)
    with pytest.raises(ValueError, match="cannot be written"):
        number(value, "mm", 1)


def test_drawing_units_have_the_codes_of_the_exchange_format() -> None:
    # DXF reference, header variable $INSUNITS: 1 inches, 2 feet, 4 millimetres, 5 centimetres, 6 metres.
    codes = {unit: UNITS[unit].insunits for unit in UNITS}
    assert codes == {"in": 1, "ft": 2, "mm": 4, "cm": 5, "m": 6}
    for unit in UNITS:
        assert length(1, unit) == UNITS[unit].metres
