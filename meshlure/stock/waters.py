"""Density and viscosity of the waters that a bait is fished in, and of the air that it is cast through."""

from __future__ import annotations

import functools
from dataclasses import dataclass
from typing import Final

from meshlure.errors import Fault, InputError

TEMPERATURES: Final = (0.0, 40.0)
"""degC. From freezing to the upper end of the seawater equation's range."""
SALINITIES: Final = (0.0, 42.0)
"""g/kg. The range of the seawater equation."""
DENSITIES: Final = (980.0, 1100.0)
"""kg/m3. Stated waters outside it are no water to fish in; within it the viscosity formula holds."""

TABLE_TEMPERATURES: Final = (4.0, 10.0, 15.0, 20.0, 25.0, 30.0)
SEA_SALINITY: Final = 35.0
ROOM: Final = 20.0
"""degC. Taken for the viscosity of a water whose density alone is stated."""


@dataclass(frozen=True)
class Water:
    """A water at the surface.

    Attributes
    ----------
    density : float, kg/m3
    viscosity : float, m2/s
        Kinematic.
    temperature : float or None, degC
    salinity : float or None, g/kg
        Absolute salinity. None where the density was stated instead.
    """

    density: float
    viscosity: float
    temperature: float | None
    salinity: float | None


@dataclass(frozen=True)
class Air:
    """The air of the standard atmosphere.

    Attributes
    ----------
    density : float, kg/m3
    viscosity : float, m2/s
        Kinematic.
    dynamic_viscosity : float, Pa s
    temperature : float, degC
    pressure : float, Pa
    """

    density: float
    viscosity: float
    dynamic_viscosity: float
    temperature: float
    pressure: float


def water(temperature: float, salinity: float, where: str = "water") -> Water:
    """Water (kg/m3, m2/s) at the surface, of a temperature and an absolute salinity.

    Parameters
    ----------
    temperature : float, degC
        In situ, 0 to 40.
    salinity : float, g/kg
        Absolute salinity, 0 to 42. A practical salinity of 35 is 35.165 g/kg.
    where : str
        The key or option that the values stand at, for the message.

    Raises
    ------
    InputError
        Outside the range of the formulas, with every value that is outside.

    Notes
    -----
    Density by TEOS-10 [1]_ at sea pressure 0 dbar, from absolute salinity and the conservative temperature of the
    in-situ one, with the 75-term polynomial of gsw [2]_; its error is below 0.01 kg/m3. Viscosity by
    `dynamic_viscosity`. Dissolved gas, silt and the depth of the water are neglected.

    References
    ----------
    .. [1] IOC, SCOR and IAPSO (2010), The international thermodynamic equation of seawater 2010, UNESCO Manuals and
       Guides 56.
    .. [2] F. Roquet, G. Madec, T. J. McDougall and P. M. Barker (2015), Accurate polynomial expressions for the
       density and specific volume of seawater using the TEOS-10 standard, Ocean Modelling 90, 29-43.
    """
    faults = []
    if not TEMPERATURES[0] <= temperature <= TEMPERATURES[1]:
        faults.append(_fault("the water's temperature", f"{temperature:g} degC", TEMPERATURES, "degC", where))
    if not SALINITIES[0] <= salinity <= SALINITIES[1]:
        faults.append(
            _fault("the water's salinity", f"{salinity:g} g/kg", SALINITIES, "g/kg", where, "state its density instead")
        )
    if faults:
        raise InputError(faults)
    density = _density(temperature, salinity)
    return Water(density, dynamic_viscosity(temperature, salinity) / density, temperature, salinity)


def stated_density(density: float, temperature: float | None = None, where: str = "water") -> Water:
    """Water (kg/m3, m2/s) whose density was measured or stated.

    Parameters
    ----------
    density : float, kg/m3
        980 to 1100.
    temperature : float or None, degC
        0 to 40; without it the viscosity is that at 20 degC.
    where : str
        The key or option that the values stand at, for the message.

    Raises
    ------
    InputError
        Outside these ranges.

    Notes
    -----
    The viscosity is that of the salinity that would bring water of this temperature to this density, along the
    straight line through the densities at 0 and 35 g/kg; a water lighter than fresh water is given the viscosity of
    fresh water. Between 10 and 30 degC the viscosity changes by 2 to 3% per degree, so a missing temperature matters
    more than any salt.
    """
    faults = []
    if not DENSITIES[0] <= density <= DENSITIES[1]:
        faults.append(_fault("the water's density", f"{density:g} kg/m3", DENSITIES, "kg/m3", where))
    if temperature is not None and not TEMPERATURES[0] <= temperature <= TEMPERATURES[1]:
        faults.append(_fault("the water's temperature", f"{temperature:g} degC", TEMPERATURES, "degC", where))
    if faults:
        raise InputError(faults)
    taken = ROOM if temperature is None else temperature
    fresh, sea = _density(taken, 0.0), _density(taken, SEA_SALINITY)
    salt = max(0.0, SEA_SALINITY * (density - fresh) / (sea - fresh))
    return Water(density, dynamic_viscosity(taken, salt) / density, temperature, None)


def dynamic_viscosity(temperature: float, salinity: float) -> float:
    """Dynamic viscosity of fresh, brackish or sea water, Pa s.

    Parameters
    ----------
    temperature : float, degC
    salinity : float, g/kg

    Notes
    -----
    Sharqawy, Lienhard and Zubair [1]_, eqs. 22 and 23, t in degC and S in kg/kg::

        mu = mu_w (1 + A S + B S^2)
        A  = 1.541 + 1.998e-2 t - 9.52e-5 t^2
        B  = 7.974 - 7.561e-2 t + 4.724e-4 t^2
        mu_w = 4.2844e-5 + 1 / (0.157 (t + 64.993)^2 - 91.296)

    stated to hold within 1.5% for 0 to 180 degC and 0 to 150 g/kg, fresh water within 0.05% of the IAPWS 2008
    formulation. The equations are from memory; they were checked against the tables of ITTC 7.5-02-01-03, which they
    meet within 0.02%.

    References
    ----------
    .. [1] M. H. Sharqawy, J. H. Lienhard V and S. M. Zubair (2010), Thermophysical properties of seawater: a review of
       existing correlations and data, Desalination and Water Treatment 16, 354-380.
    """
    t, s = temperature, salinity / 1000.0
    fresh = 4.2844e-5 + 1.0 / (0.157 * (t + 64.993) ** 2 - 91.296)
    a = 1.541 + 1.998e-2 * t - 9.52e-5 * t * t
    b = 7.974 - 7.561e-2 * t + 4.724e-4 * t * t
    return fresh * (1.0 + a * s + b * s * s)


@functools.cache
def table() -> tuple[tuple[str, Water], ...]:
    """Fresh water and sea water of 35 g/kg from 4 to 30 degC, each with its name."""
    return tuple(
        (f"{name}, {temperature:g} °C", water(temperature, salinity))
        for name, salinity in (("fresh water", 0.0), ("sea water", SEA_SALINITY))
        for temperature in TABLE_TEMPERATURES
    )


@functools.cache
def standard_air() -> Air:
    """Air of the standard atmosphere at sea level: 15 degC, 1013.25 hPa, dry.

    Notes
    -----
    U.S. Standard Atmosphere 1976 [1]_, which is ISO 2533 below 32 km, from the library fluids. Dry air at the
    same pressure is 5% denser at 0 degC and 5% thinner at 30 degC.

    References
    ----------
    .. [1] NOAA, NASA and USAF (1976), U.S. Standard Atmosphere, 1976, NOAA-S/T 76-1562.
    """
    from fluids.atmosphere import ATMOSPHERE_1976

    state = ATMOSPHERE_1976(0.0)
    density, thick = float(state.rho), float(state.mu)
    return Air(density, thick / density, thick, float(state.T) - 273.15, float(state.P))


def _density(temperature: float, salinity: float) -> float:
    import gsw

    return float(gsw.rho(salinity, gsw.CT_from_t(salinity, temperature, 0.0), 0.0))


def _fault(
    what: str,
    found: str,
    ends: tuple[float, float],
    unit: str,
    where: str,
    next_step: str = "check the number and its unit",
) -> Fault:
    return Fault(f"{what} is outside what is possible", where, found, f"{ends[0]:g} to {ends[1]:g} {unit}", next_step)
