"""Quantities: what their units are worth, and what is refused.

The values of the units are exact by definition (International Yard and Pound Agreement of 1959; SI Brochure, 9th
edition; 3rd CGPM 1901 for standard gravity), written here from memory.
"""

import contextlib
import math
import subprocess
import sys

import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st

from meshlure import units
from meshlure.errors import InputError

POUND = 0.45359237
INCH = 0.0254
FOOT = 0.3048
KINDS = ("length", "mass", "density", "speed", "angle", "temperature", "salinity", "force", "energy", "area")


def refused(text: object, kind: str, **limits: float | bool) -> str:
    with pytest.raises(InputError) as caught:
        units.quantity(text, kind, "the.key", **limits)  # type: ignore[arg-type]
    (fault,) = caught.value.faults
    assert fault.where == "the.key"
    assert fault.what
    assert fault.found
    assert fault.allowed
    assert fault.next_step
    return str(fault)


@pytest.mark.parametrize(
    ("text", "kind", "expected"),
    [
        ("12 mm", "length", 0.012),
        ("1.2cm", "length", 0.012),
        ("3/16 in", "length", 3 / 16 * INCH),
        ("1 1/2 inch", "length", 1.5 * INCH),
        ("20 µm", "length", 20e-6),
        ("62 m", "length", 62.0),
        ("1 oz", "mass", POUND / 16),
        ("1/2 oz", "mass", POUND / 32),
        ("0.01 lb", "mass", POUND / 100),
        ("-0", "mass", None),
        ("1 grain", "mass", POUND / 7000),
        ("0.72 g/cm3", "density", 720.0),
        ("0.72 g/cc", "density", 720.0),
        ("0.72 g/cm^3", "density", 720.0),
        ("0.72 g/cm**3", "density", 720.0),
        ("0.72 g/cm³", "density", 720.0),
        ("0.72 g cm-3", "density", 720.0),
        ("0.72 g·cm⁻³", "density", 720.0),
        ("720 kg/m3", "density", 720.0),
        ("7.2e2 kg/m3", "density", 720.0),
        ("45 lb/ft3", "density", 45 * POUND / FOOT**3),
        ("0.41 lb/in3", "density", 0.41 * POUND / INCH**3),
        ("25 m/s", "speed", 25.0),
        ("36 km/h", "speed", 10.0),
        ("2 kn", "speed", 2 * 1852 / 3600),
        ("180 deg", "angle", math.pi),
        ("-10°", "angle", -math.pi / 18),
        ("0.5 rad", "angle", 0.5),
        ("18 degC", "temperature", 18.0),
        ("18 °C", "temperature", 18.0),
        ("64.4 degF", "temperature", 18.0),
        ("291.15 K", "temperature", 18.0),
        ("\N{MINUS SIGN}2 degC", "temperature", -2.0),
        ("35 g/kg", "salinity", 35.0),
        ("3.5 %", "salinity", 35.0),
        ("0 g/kg", "salinity", 0.0),
        ("0.03 N", "force", 0.03),
        ("4 gf", "force", 0.004 * 9.80665),
        ("6 J", "energy", 6.0),
        ("6 N m", "energy", 6.0),
        ("4.4 ft lbf", "energy", 4.4 * FOOT * POUND * 9.80665),
        ("60 mm2", "area", 60e-6),
        ("1 in2", "area", INCH**2),
    ],
)
def test_a_quantity_is_worth_what_its_unit_is_defined_as(text: str, kind: str, expected: float | None) -> None:
    if expected is None:
        refused(text, kind)
    else:
        assert units.quantity(text, kind, "the.key") == pytest.approx(expected, rel=1e-14, abs=0.0)


def test_decimals_come_out_as_they_were_written() -> None:
    # In binary arithmetic 0.72 g/cm3 becomes 719.9999999999999 kg/m3.
    assert units.quantity("0.72 g/cm3", "density", "k") == 720.0
    assert units.quantity("0.2 in", "length", "k") == 0.00508


@pytest.mark.parametrize(
    ("text", "kind", "readings"),
    [
        ("0.72", "density", ("0.72 g/cm3", "720 kg/m3")),
        (0.72, "density", ("0.72 g/cm3", "720 kg/m3")),
        (720, "density", ("720 kg/m3", "0.72 g/cm3")),
        (45, "density", ("45 kg/m3", "45 lb/ft3")),
        (12, "length", ("12 mm", "12 in")),
        (0.5, "mass", ("0.5 g", "0.5 oz")),
        (18, "temperature", ("18 degC", "18 degF")),
        (35, "salinity", ("35 g/kg", "3.5 %")),
        (40.0, "angle", ("40 deg", "40 rad")),
        (1, "speed", ("1 m/s", "1 km/h")),
        (6, "energy", ("6 J", "6 ft lbf")),
        (3, "force", ("3 N", "3 gf")),
        (60, "area", ("60 mm2", "60 cm2")),
    ],
)
def test_a_bare_number_is_refused_with_two_readings(text: object, kind: str, readings: tuple[str, str]) -> None:
    message = refused(text, kind)
    assert f"write '{readings[0]}' or '{readings[1]}'" in message
    for reading in readings:
        assert math.isfinite(units.quantity(reading, kind, "the.key"))


@pytest.mark.parametrize(
    ("text", "kind", "hint"),
    [
        ("720 g/cm3", "density", "'720 kg/m3'"),
        ("0.72 kg/m3", "density", "'0.72 g/cm3'"),
        ("11340 lb/ft3", "density", "'11340 kg/m3'"),
        ("-1 g/cm3", "density", "above 0"),
        ("0 kg/m3", "density", "above 0"),
        ("0,72 g/cm3", "density", "write '0.72 g/cm3'"),
        ("1,200 kg/m3", "density", "'1.200 kg/m3' or '1200 kg/m3'"),
        ("1 G/CM3", "density", "'1 g/cm3'"),
        ("5 gr", "mass", "'5 g' for grams"),
        ("3 KG", "mass", "'3 kg'"),
        ("3 Mg", "mass", "up to 50 kg"),
        ("12 Mm", "length", "up to 1000 m"),
        ("12 MM", "length", "'12 mm'"),
        ("-3 mm", "length", "not below 0 mm"),
        ("12 g", "length", "not a unit of a length"),
        ("12 mm;", "length", "not known"),
        ("12 mm # in", "length", "not known"),
        ("1 mm 2 cm", "length", "not known"),
        ("6 in / 0", "length", "not known"),
        ("1/0 in", "length", "cannot be read"),
        ("twelve mm", "length", "cannot be read"),
        ("", "length", "cannot be read"),
        ("nan mm", "length", "not finite"),
        ("inf mm", "length", "not finite"),
        ("1e999 mm", "length", "not finite"),
        ("1e308 km", "length", "not finite"),
        (float("nan"), "length", "not finite"),
        (10**400, "length", "not finite"),
        ("1" * 500 + " mm", "length", "too long"),
        (True, "length", "a length was expected"),
        (None, "length", "a length was expected"),
        (["12 mm"], "length", "a length was expected"),
        ("18 C", "temperature", "'18 degC'"),
        ("18 deg", "temperature", "'18 degC'"),
        ("18 delta_degC", "temperature", "not a unit"),
        ("-300 degC", "temperature", "-273.15"),
        ("35 psu", "salinity", "'35 g/kg'"),
        ("35 ppt", "salinity", "'35 g/kg'"),
        ("35 rad", "salinity", "not a unit"),
        ("35 kg/kg", "salinity", "not a unit"),
        ("0.1 g/kg", "angle", "not a unit"),
    ],
)
def test_slips_are_refused_with_what_was_meant(text: object, kind: str, hint: str) -> None:
    assert hint in refused(text, kind)


def test_densities_are_accepted_up_to_the_limits_and_not_beyond() -> None:
    assert units.quantity("5 kg/m3", "density", "k") == units.LIGHTEST
    assert units.quantity("25 g/cm3", "density", "k") == units.HEAVIEST
    refused("4.99 kg/m3", "density")
    refused("25.01 g/cm3", "density")


def test_limits_are_inclusive_and_told_in_the_trades_unit() -> None:
    assert units.quantity("15 mm", "length", "k", least=0.015, most=0.4) == 0.015
    assert "from 15 mm up to 400 mm" in refused("14.9 mm", "length", least=0.015, most=0.4)
    assert "from 15 mm up to 400 mm" in refused("401 mm", "length", least=0.015, most=0.4)
    assert units.quantity("0 g", "mass", "k") == 0.0
    assert "above 0 g" in refused("0 g", "mass", positive=True)


def test_only_a_signed_quantity_may_be_negative() -> None:
    assert units.quantity("-1.2 g", "mass", "k", signed=True) == -0.0012
    assert "not below 0 g" in refused("-1.2 g", "mass")
    assert "up to 50 kg" in refused("-51 kg", "mass", signed=True)


@settings(max_examples=300, deadline=None)
@given(
    text=st.one_of(
        st.text(max_size=24),
        st.text(alphabet="0123456789.eE+-/ ,mgkcdozinl*^()%°³²µNJ", max_size=20),
        st.integers(),
        st.floats(),
        st.none(),
    ),
    kind=st.sampled_from(KINDS),
)
@example(text="1 (", kind="length")
@example(text="1 m**m", kind="length")
@example(text="1 m**9e9", kind="area")
@example(text="1 __import__('os')", kind="length")
def test_whatever_is_written_gives_a_finite_value_or_a_fault(text: object, kind: str) -> None:
    with contextlib.suppress(InputError):
        value = units.quantity(text, kind, "the.key")
        assert isinstance(text, str)
        assert math.isfinite(value)


def test_a_whole_number_too_long_to_print_is_refused_too() -> None:
    # TOML allows hexadecimal numbers of any length; Python does not print one of over 4300 digits.
    assert "not finite" in refused(16**5000, "length")


def test_constants_are_exact() -> None:
    assert units.OUNCE == POUND / 16
    assert (units.INCH, units.MM, units.GRAM, units.MM2, units.MM3) == (INCH, 1e-3, 1e-3, 1e-6, 1e-9)
    assert math.sin(30.0 * units.DEGREE) == pytest.approx(0.5, rel=1e-15)


def test_units_of_a_mesh() -> None:
    assert dict(units.LENGTH_UNITS) == {"mm": 0.001, "cm": 0.01, "m": 1.0, "in": 0.0254}
    assert units.length_unit("in", "k") == 0.0254
    for name, near in (("MM", "'mm'"), ("inch", "'in'"), ("furlong", "exported")):
        with pytest.raises(InputError, match=near):
            units.length_unit(name, "k")


def test_numbers_as_text() -> None:
    assert units.grams(0.0184) == "18.40 g"
    assert units.grams(-1e-9) == "0.00 g"
    assert units.ounces(POUND / 16) == "1.000 oz"
    assert units.millimetres(0.1) == "100.0 mm"
    assert units.millimetres(0.01234, places=2) == "12.34 mm"


def test_the_units_library_is_loaded_only_when_a_quantity_is_read() -> None:
    program = "import sys, meshlure.units; assert not {'pint', 'numpy'} & set(sys.modules), 'loaded too early'"
    subprocess.run([sys.executable, "-c", program], check=True, timeout=60)
