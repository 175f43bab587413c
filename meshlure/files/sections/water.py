"""[water]: what the bait floats in."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

from meshlure.files.defaults import WATER_SALINITY, WATER_TEMPERATURE
from meshlure.files.keys import Keys

TEMPERATURES: Final = (0.0, 40.0)
"""degC. As far as the equation of seawater holds; a bait is not fished under ice water or in a bath."""
SALINITIES: Final = (0.0, 42.0)
"""g/kg. The same."""
DENSITIES: Final = (980.0, 1100.0)
"""kg/m3. Below hot fresh water and above brine there is none that a bait is fished in."""


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
    density = keys.quantity("density", "density", least=DENSITIES[0], most=DENSITIES[1])
    if density is not None:
        keys.one_of("density", "salinity", required=False)
        keys.quantity("salinity", "salinity")
        temperature = keys.quantity("temperature", "temperature", least=TEMPERATURES[0], most=TEMPERATURES[1])
        keys.close()
        return WaterSection(temperature, None, density, ())
    section = WaterSection(
        keys.assumed_quantity(
            "temperature", "temperature", WATER_TEMPERATURE, least=TEMPERATURES[0], most=TEMPERATURES[1]
        ),
        keys.assumed_quantity("salinity", "salinity", WATER_SALINITY, least=SALINITIES[0], most=SALINITIES[1]),
        None,
        tuple(keys.assumed),
    )
    keys.close()
    return section
