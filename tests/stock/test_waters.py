"""Water and air against published tables and against formulas other than those that the project computes with."""

import itertools
import math

import pytest

from meshlure.errors import InputError
from meshlure.stock.waters import SEA_SALINITY, Water, standard_air, stated_density, table, water

REFERENCE_SALINITY = 35.16504
"""g/kg. Absolute salinity of standard seawater of practical salinity 35 (TEOS-10)."""

# ITTC Recommended Procedures 7.5-02-01-03 Rev 03, Fresh Water and Seawater Properties: degC, then kg/m3 and m2/s of
# fresh water and of sea water of 35.16504 g/kg; as copied in a public notes file. Its sea densities are 0.045 kg/m3
# above TEOS-10 at the surface: they are those of a sea pressure of one atmosphere.
ITTC = (
    (5.0, 999.97, 1.5182e-6, 1027.72, 1.5762e-6),
    (10.0, 999.70, 1.3063e-6, 1027.00, 1.3604e-6),
    (15.0, 999.1026, 1.13858e-6, 1026.021, 1.1892e-6),
    (20.0, 998.21, 1.0034e-6, 1024.81, 1.0508e-6),
    (25.0, 997.05, 8.9266e-7, 1023.39, 9.3713e-7),
    (30.0, 995.65, 8.0071e-7, 1021.77, 8.4253e-7),
)


@pytest.mark.parametrize(("temperature", "fresh", "fresh_nu", "sea", "sea_nu"), ITTC)
def test_fresh_and_sea_water_of_the_towing_tanks(
    temperature: float, fresh: float, fresh_nu: float, sea: float, sea_nu: float
) -> None:
    lake, ocean = water(temperature, 0.0), water(temperature, REFERENCE_SALINITY)
    assert abs(lake.density - fresh) < 0.005
    assert abs(ocean.density - sea) < 0.05
    assert lake.viscosity == pytest.approx(fresh_nu, rel=3e-4)
    assert ocean.viscosity == pytest.approx(sea_nu, rel=3e-4)


@pytest.mark.parametrize(
    ("salinity", "conservative", "sigma"),
    [
        # TEOS-10 documentation of the function gsw_sigma0, its worked example (from memory): density at the surface
        # less 1000 kg/m3 for absolute salinity and conservative temperature.
        (34.7118, 28.8099, 21.797900819337656),
        (34.8915, 28.4392, 22.052215404397316),
        (35.0256, 22.7862, 23.892985307893923),
    ],
)
def test_seawater_meets_the_check_values_of_teos_10(salinity: float, conservative: float, sigma: float) -> None:
    import gsw

    in_situ = float(gsw.t_from_CT(salinity, conservative, 0.0))
    assert water(in_situ, salinity).density - 1000.0 == pytest.approx(sigma, rel=1e-9)


@pytest.mark.parametrize("temperature", range(0, 41, 2))
def test_fresh_water_follows_the_metrologists_formula(temperature: int) -> None:
    # M. Tanaka et al. (2001), Recommended table for the density of water between 0 and 40 degC, Metrologia 38, 301,
    # eq. 1 (from memory), adopted by the CIPM.
    t = float(temperature)
    published = 999.974950 * (1.0 - (t - 3.983035) ** 2 * (t + 301.797) / (522528.9 * (t + 69.34881)))
    assert abs(water(t, 0.0).density - published) < 0.003


def test_fresh_water_is_densest_at_four_degrees() -> None:
    densities = {t: water(t / 10.0, 0.0).density for t in range(100)}
    assert abs(max(densities, key=densities.__getitem__) / 10.0 - 3.98) < 0.1


@pytest.mark.parametrize(("practical", "temperature"), list(itertools.product((5, 10, 20, 35, 40), (0, 5, 15, 20, 30))))
def test_sea_and_brackish_water_follow_the_older_equation_of_state(practical: int, temperature: int) -> None:
    # UNESCO Technical Papers in Marine Science 44 (1983), one-atmosphere equation of state EOS-80; its coefficients
    # from memory, its check value 1023.343 kg/m3 at S = 35, 25 degC reproduced below.
    s, t = float(practical), float(temperature)
    assert abs(water(t, s * REFERENCE_SALINITY / 35.0).density - _eos80(s, t)) < 0.01


def test_the_older_equation_is_copied_right() -> None:
    assert _eos80(35.0, 25.0) == pytest.approx(1023.343, abs=5e-4)
    assert _eos80(35.0, 5.0) == pytest.approx(1027.675, abs=5e-4)


def _eos80(s: float, t: float) -> float:
    fresh = 999.842594 + t * (
        6.793952e-2 + t * (-9.095290e-3 + t * (1.001685e-4 + t * (-1.120083e-6 + t * 6.536332e-9)))
    )
    a = 0.824493 + t * (-4.0899e-3 + t * (7.6438e-5 + t * (-8.2467e-7 + t * 5.3875e-9)))
    b = -5.72466e-3 + t * (1.0227e-4 - t * 1.6546e-6)
    return fresh + a * s + b * s * math.sqrt(s) + 4.8314e-4 * s * s


@pytest.mark.parametrize(
    ("temperature", "published"),
    # ISO/TR 3666:1998 for 20 degC; the others: CRC Handbook, viscosity of liquid water, mPa s; all from memory.
    [(0.0, 1.792), (10.0, 1.306), (20.0, 1.0016), (30.0, 0.7975), (40.0, 0.6530)],
)
def test_fresh_waters_dynamic_viscosity(temperature: float, published: float) -> None:
    lake = water(temperature, 0.0)
    assert lake.viscosity * lake.density * 1e3 == pytest.approx(published, rel=2e-3)


def test_standard_air() -> None:
    # ISO 2533:1975, sea level: 15 degC, 101325 Pa, 1.225 kg/m3, 1.7894e-5 Pa s, 1.4607e-5 m2/s (from memory).
    air = standard_air()
    assert air.temperature == pytest.approx(15.0, abs=1e-9)
    assert air.pressure == pytest.approx(101325.0, rel=1e-9)
    assert air.density == pytest.approx(1.2250, rel=1e-4)
    assert air.dynamic_viscosity == pytest.approx(1.7894e-5, rel=1e-4)
    assert air.viscosity == pytest.approx(1.4607e-5, rel=1e-4)


def test_the_table_runs_from_4_to_30_degrees_in_fresh_and_in_sea_water() -> None:
    rows = table()
    assert {w.temperature for _, w in rows} >= {4.0, 15.0, 30.0}
    assert {w.salinity for _, w in rows} == {0.0, SEA_SALINITY}
    assert len({name for name, _ in rows}) == len(rows)
    for name, row in rows:
        assert row.temperature is not None
        assert row.salinity is not None
        assert row == water(row.temperature, row.salinity)
        assert f"{row.temperature:g} °C" in name
        assert ("fresh" in name) == (row.salinity == 0.0)


@pytest.mark.parametrize(("temperature", "salinity"), [(5.0, 0.0), (20.0, 10.0), (15.0, 35.0), (30.0, 40.0)])
def test_a_stated_density_has_the_viscosity_of_the_water_that_has_it(temperature: float, salinity: float) -> None:
    known = water(temperature, salinity)
    stated = stated_density(known.density, temperature)
    assert stated.density == known.density
    assert stated.viscosity == pytest.approx(known.viscosity, rel=1e-3)
    assert (stated.temperature, stated.salinity) == (temperature, None)


def test_a_stated_density_without_a_temperature_is_taken_at_20_degrees() -> None:
    stated = stated_density(998.2077)
    assert stated.viscosity == pytest.approx(water(20.0, 0.0).viscosity, rel=1e-5)
    assert stated.temperature is None


def test_a_water_lighter_than_fresh_has_the_viscosity_of_fresh() -> None:
    assert stated_density(990.0, 20.0).viscosity * 990.0 == pytest.approx(1.0016e-3, rel=1e-3)


def test_the_ends_of_the_ranges_are_allowed() -> None:
    for temperature, salinity in itertools.product((0.0, 40.0), (0.0, 42.0)):
        assert 990.0 < water(temperature, salinity).density < 1040.0
    for density in (980.0, 1100.0):
        assert stated_density(density).density == density


@pytest.mark.parametrize(
    ("temperature", "salinity", "count"),
    [(-0.1, 0.0, 1), (40.1, 0.0, 1), (15.0, -0.1, 1), (15.0, 42.1, 1), (99.0, 99.0, 2), (float("nan"), 0.0, 1)],
)
def test_water_outside_the_formulas_is_refused(temperature: float, salinity: float, count: int) -> None:
    with pytest.raises(InputError) as caught:
        water(temperature, salinity, "water.key")
    assert len(caught.value.faults) == count
    for fault in caught.value.faults:
        assert fault.where == "water.key"
        assert fault.found
        assert " to " in fault.allowed
        assert fault.next_step


@pytest.mark.parametrize(("density", "temperature"), [(979.0, None), (1101.0, None), (998.0, 50.0)])
def test_a_stated_water_outside_its_range_is_refused(density: float, temperature: float | None) -> None:
    with pytest.raises(InputError, match="outside what is possible"):
        stated_density(density, temperature)


def test_a_water_cannot_be_changed() -> None:
    lake: Water = water(15.0, 0.0)
    with pytest.raises(AttributeError):
        lake.density = 1.0  # type: ignore[misc]
