"""[water]: what the bait floats in."""

from __future__ import annotations

from dataclasses import dataclass

from meshlure.files.defaults import WATER_SALINITY, WATER_TEMPERATURE
from meshlure.files.keys import Keys


@dataclass(frozen=True)
class WaterSection:
    """Water by temperature and salinity, or by a measured density.

    Attributes
    ----------
    temperature : float or None, degC
        None only where a density is stated without one.
    salinity : float or None, g/kg
        None where a density is stated.
    density : float or None, kg/m3
        None where it follows from temperature and salinity.
    assumed : tuple of str
        Keys that were not stated and stand at their defaults.
    """

    temperature: float | None
    salinity: float | None
    density: float | None
    assumed: tuple[str, ...]


def read_water(keys: Keys) -> WaterSection:
    """Read [water]; an empty one is fresh water at 18 degC."""
    density = keys.quantity("density", "density", least=950.0, most=1250.0)
    if density is not None:
        keys.one_of("density", "salinity", required=False)
        keys.quantity("salinity", "salinity")
        temperature = keys.quantity("temperature", "temperature", least=-2.0, most=40.0)
        keys.close()
        return WaterSection(temperature, None, density, ())
    section = WaterSection(
        keys.assumed_quantity("temperature", "temperature", WATER_TEMPERATURE, least=-2.0, most=40.0),
        keys.assumed_quantity("salinity", "salinity", WATER_SALINITY, least=0.0, most=45.0),
        None,
        tuple(keys.assumed),
    )
    keys.close()
    return section
