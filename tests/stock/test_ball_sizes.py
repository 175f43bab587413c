"""Balls: the sizes that are sold, their mass, and the spread of it."""

import math
from fractions import Fraction

import pytest

from meshlure.errors import InputError
from meshlure.stock.balls import ball_diameters, ball_mass, ball_sizes, sizes, spread
from meshlure.stock.materials import material


@pytest.mark.parametrize(
    ("diameter", "density", "published"),
    # Grams, pi/6 d^3 rho (Archimedes, On the Sphere and Cylinder), worked out by hand.
    [(3.0, 7810.0, 0.110), (5.0, 17000.0, 1.113), (6.35, 11340.0, 1.520), (10.0, 2500.0, 1.309)],
)
def test_a_ball_weighs_what_a_sphere_weighs(diameter: float, density: float, published: float) -> None:
    assert ball_mass(diameter * 1e-3, density) * 1e3 == pytest.approx(published, abs=5e-4)
    # Two thirds of the cylinder around it.
    cylinder = math.pi / 4.0 * (diameter * 1e-3) ** 3 * density
    assert ball_mass(diameter * 1e-3, density) == pytest.approx(2.0 / 3.0 * cylinder, rel=1e-12)


def test_inch_sizes_are_fractions_of_an_inch_of_25_4_mm() -> None:
    # Millimetres that the trade prints for them, to a micron.
    printed = {
        "1/8 in": 3.175,
        "5/32 in": 3.969,
        "3/16 in": 4.763,
        "7/32 in": 5.556,
        "1/4 in": 6.350,
        "9/32 in": 7.144,
        "5/16 in": 7.938,
        "3/8 in": 9.525,
        "1/2 in": 12.700,
    }
    inch = {size.name: size.diameter for size in sizes() if size.name.endswith(" in")}
    assert inch.keys() == printed.keys()
    for name, diameter in inch.items():
        assert diameter == pytest.approx(float(Fraction(name.removesuffix(" in")) * Fraction(254, 10000)), rel=1e-12)
        assert diameter * 1e3 == pytest.approx(printed[name], abs=6e-4)


def test_sizes_ascend() -> None:
    diameters = [size.diameter for size in sizes()]
    assert diameters == sorted(set(diameters))
    assert 2e-3 in diameters
    assert pytest.approx(12.7e-3, rel=1e-12) == diameters[-1]


def test_spread_of_the_trade() -> None:
    # Common practice, no source: steel within 1%, lead within 3%, heavy alloy within 4%.
    for name, share in (("bearing steel", 0.01), ("lead", 0.03), ("tungsten heavy alloy 90% W", 0.04)):
        found = spread(material(name, "k"))
        assert found.share == share
        assert found.assumed
        assert "weigh ten" in found.source


def test_without_a_figure_of_the_trade_the_range_of_the_density_is_taken() -> None:
    glass = material("glass", "k")
    found = spread(glass)
    assert found.share == pytest.approx(60.0 / 2500.0, rel=1e-12)
    assert glass.name in found.source
    assert found.assumed == glass.assumed


# Nominal diameters of balls in mm, ISO 3290-1, from memory; those that fit a bait. Inch sizes to a micron.
NOMINAL = {2, 2.381, 2.5, 2.778, 3, 3.175, 3.5, 3.969, 4, 4.5, 4.762, 5, 5.5, 5.556, 6, 6.35, 6.5, 7, 7.144, 7.5, 7.938}
NOMINAL |= {8, 8.5, 8.731, 9, 9.525, 10, 11, 11.112, 12, 12.7}


@pytest.mark.parametrize(
    "name", ["bearing steel", "stainless 420", "tungsten heavy alloy 95% W", "brass", "lead", "glass"]
)
def test_balls_of_a_material_are_of_nominal_diameters(name: str) -> None:
    diameters = ball_diameters(name)
    assert list(diameters) == sorted(set(diameters))
    assert {round(diameter * 1e3, 3) for diameter in diameters} <= NOMINAL
    assert set(ball_sizes(name)) <= set(sizes())
    # 4, 5 and 6 mm are in every shop: common practice, no source.
    assert {4.0, 5.0, 6.0} <= {round(diameter * 1e3, 6) for diameter in diameters}


def test_only_what_is_sold_as_balls_has_diameters() -> None:
    assert ball_diameters("balsa") == ()
    with pytest.raises(InputError, match=r"chamber\.balls\[1\]\.material"):
        ball_diameters("unobtainium", "chamber.balls[1].material")
