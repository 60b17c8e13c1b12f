"""Units against scipy.constants, and the two kinds of degree kept apart."""

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy import constants

from advisor.errors import FaultyInput
from advisor.units import (
    celsius_from_fahrenheit,
    fahrenheit_delta_from_kelvin_delta,
    fahrenheit_from_celsius,
    from_si,
    kelvin_delta_from_fahrenheit_delta,
    kinds,
    parse_quantity,
    shown,
    to_si,
    units_of,
)

EVERY_UNIT = [(kind, unit) for kind in kinds() for unit in units_of(kind)]

# scipy.constants holds CODATA values and the exact definitions of NIST SP 811; its Btu is the
# International Table one (1055.05585262 J), its gallon and barrel those of the United States.
_FOOT3 = constants.foot**3
SCIPY = [
    ("length", "in", constants.inch),
    ("length", "ft", constants.foot),
    ("length", "mi", constants.mile),
    ("area", "ft2", constants.foot**2),
    ("volume", "L", constants.liter),
    ("volume", "gal", constants.gallon_US),
    ("volume", "bbl", constants.barrel),
    ("mass", "lb", constants.pound),
    ("mass", "ton", constants.short_ton),
    ("mass", "t", constants.metric_ton),
    ("mass_rate", "ton/h", constants.short_ton / constants.hour),
    ("mass_rate", "tph", constants.short_ton / constants.hour),
    ("mass_rate", "lb/h", constants.pound / constants.hour),
    ("duration", "min", constants.minute),
    ("duration", "h", constants.hour),
    ("duration", "d", constants.day),
    ("density", "lb/gal", constants.pound / constants.gallon_US),
    ("speed", "mph", constants.mph),
    ("speed", "km/h", constants.kmh),
    ("speed", "kt", constants.knot),
    ("pressure", "bar", constants.bar),
    ("pressure", "psi", constants.psi),
    ("energy", "Btu", constants.Btu_IT),
    ("energy", "therm", 1e5 * constants.Btu_IT),
    ("energy", "kWh", constants.kilo * constants.hour),
    ("power", "MMBtu/h", 1e6 * constants.Btu_IT / constants.hour),
    ("heat_per_mass", "Btu/lb", constants.Btu_IT / constants.pound),
    ("heat_per_mass", "Btu/ton", constants.Btu_IT / constants.short_ton),
    ("volume_flow", "cfm", _FOOT3 / constants.minute),
    ("volume_flow", "gal/h", constants.gallon_US / constants.hour),
]


@pytest.mark.parametrize(("kind", "unit", "factor"), SCIPY)
def test_a_factor_is_the_one_of_scipy(kind: str, unit: str, factor: float) -> None:
    # 2e-10: psi and Btu are written with 10 to 12 digits, the rest is exact.
    assert to_si(1.0, unit, kind) == pytest.approx(factor, rel=2e-10)


def test_inch_of_mercury_is_the_conventional_one() -> None:
    # NIST SP 811 (2008), appendix B.8: conventional inch of mercury, 3.386 389 E+03 Pa. scipy has
    # the millimetre of mercury at 0 C; the two agree within their last digits.
    assert to_si(1.0, "inHg", "pressure") == pytest.approx(25.4 * constants.mmHg, rel=1e-6)


@pytest.mark.parametrize(("kind", "unit"), EVERY_UNIT)
@given(value=st.floats(-1e6, 1e6))
def test_a_value_survives_the_way_out_and_back(kind: str, unit: str, value: float) -> None:
    assert to_si(from_si(value, unit, kind), unit, kind) == pytest.approx(value, abs=1e-9)


@pytest.mark.parametrize(("kind", "unit"), EVERY_UNIT)
@given(value=st.floats(-1e6, 1e6))
def test_what_is_written_is_read_back(kind: str, unit: str, value: float) -> None:
    read = parse_quantity(f"{value!r} {unit}", kind)
    assert from_si(read, unit, kind) == pytest.approx(value, rel=1e-12, abs=1e-9)


@pytest.mark.parametrize(
    ("text", "kind", "value"),
    [
        ("10 000 kg", "mass", 10_000.0),
        ("10_000.5 kg", "mass", 10_000.5),
        ("45 0.1 mm", "penetration", 45.0),
        ("1e3kg", "mass", 1000.0),
        (" .5 m ", "length", 0.5),
        ("-4 C", "temperature", -4.0),
    ],
)
def test_the_ways_to_write_a_number(text: str, kind: str, value: float) -> None:
    assert parse_quantity(text, kind) == value


@pytest.mark.parametrize("kind", kinds())
def test_the_first_unit_of_a_kind_is_the_one_used_inside(kind: str) -> None:
    first = units_of(kind)[0]
    inside = 0.01 if first == "%" else 1.0
    assert to_si(1.0, first, kind) == inside


@pytest.mark.parametrize(("kind", "unit"), EVERY_UNIT)
def test_a_larger_number_is_more_of_it(kind: str, unit: str) -> None:
    assert to_si(2.0, unit, kind) > to_si(1.0, unit, kind)


@given(st.floats(-273.15, 2000))
def test_a_temperature_is_that_of_scipy(temperature_c: float) -> None:
    temperature_f = constants.convert_temperature(temperature_c, "C", "F")
    assert fahrenheit_from_celsius(temperature_c) == pytest.approx(temperature_f, abs=1e-9)
    assert celsius_from_fahrenheit(temperature_f) == pytest.approx(temperature_c, abs=1e-9)
    assert to_si(temperature_f, "F", "temperature") == pytest.approx(temperature_c, abs=1e-9)
    kelvin = constants.convert_temperature(temperature_c, "C", "K")
    assert to_si(kelvin, "K", "temperature") == pytest.approx(temperature_c, abs=1e-9)


@given(st.floats(-400, 1000), st.floats(-400, 1000))
def test_a_difference_is_the_difference_of_two_temperatures(hot_f: float, cold_f: float) -> None:
    difference_k = celsius_from_fahrenheit(hot_f) - celsius_from_fahrenheit(cold_f)
    assert kelvin_delta_from_fahrenheit_delta(hot_f - cold_f) == pytest.approx(
        difference_k, abs=1e-9
    )
    assert to_si(hot_f - cold_f, "F", "temperature_delta") == pytest.approx(difference_k, abs=1e-9)
    assert fahrenheit_delta_from_kelvin_delta(difference_k) == pytest.approx(
        hot_f - cold_f, abs=1e-9
    )


def test_thirty_degrees_fahrenheit_of_tolerance_are_less_than_seventeen_kelvin() -> None:
    assert parse_quantity("30 F", "temperature_delta") == pytest.approx(50 / 3)
    assert parse_quantity("30 F", "temperature") == pytest.approx(-10 / 9)


def test_every_temperature_unit_agrees_at_the_boiling_point_of_water() -> None:
    boiling = {"C": 100.0, "F": 212.0, "K": 373.15}
    for unit in units_of("temperature"):
        letter = unit[-1]
        assert to_si(boiling[letter], unit, "temperature") == pytest.approx(100.0, abs=1e-9)


@pytest.mark.parametrize(
    ("text", "kind", "code", "said"),
    [
        ("152", "temperature", "unit-missing", "152 C"),
        (152, "temperature", "unit-missing", "152 C"),
        ("152 CC", "temperature", "unit", "Did you mean 'C'?"),
        ("45 mm", "temperature", "unit", "It is a unit of a length."),
        ("1,5 %", "fraction", "not-a-quantity", "Use a point for decimals."),
        ("1 2345 kg", "mass", "unit", "Known here"),
        ("warm", "temperature", "not-a-quantity", "Write a number"),
        ("1e999 C", "temperature", "not-finite", "Write a number"),
        (True, "temperature", "not-a-quantity", "Write a number"),
        (None, "temperature", "not-a-quantity", "Write a number"),
    ],
)
def test_what_cannot_be_a_quantity_is_refused(
    text: object, kind: str, code: str, said: str
) -> None:
    with pytest.raises(FaultyInput) as refused:
        parse_quantity(text, kind)
    (fault,) = refused.value.faults
    assert fault.code == code
    assert said in fault.remedy


@given(st.floats(-50, 500))
def test_a_shown_number_carries_its_unit(temperature_c: float) -> None:
    for system, unit in (("si", "°C"), ("us", "°F")):
        text = shown(temperature_c, "temperature", system)
        assert text.endswith(" " + unit)
        assert not text.startswith("-0 ")
        assert math.isclose(parse_quantity(text, "temperature"), temperature_c, abs_tol=0.51)
