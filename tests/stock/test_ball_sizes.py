"""Balls: the sizes that are sold, their mass, and the spread of it."""

import math
from fractions import Fraction

import pytest

from meshlure.stock.balls import ball_mass, sizes, spread
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
