"""The result tree's account of floating: reserve, verdict and other waters."""

from __future__ import annotations

from typing import Any

from meshlure.bait.smooth import Deficit
from meshlure.geometry.surface import Floats
from meshlure.physics.buoyancy import Behaviour, Reserve, behaviour, suspends_within
from meshlure.results.numbers import GRAM, MM, MM3, plain
from meshlure.stock.waters import Water, table

Tree = dict[str, Any]

_MAY = {Behaviour.FLOATS: "may float", Behaviour.SUSPENDS: "may suspend", Behaviour.SINKS: "may sink"}


def verdict(reserve: Reserve) -> str:
    """Return the sentence that says what the bait does, and what else its band allows."""
    word = str(reserve.state).capitalize()
    others = [_MAY[state] for state in reserve.possible[1:]]
    head = ", ".join([word, " or ".join(others)]) if others else word
    grams, low, high = (_signed(value) for value in (reserve.reserve, reserve.low, reserve.high))
    return f"{head}: reserve {grams} g, between {low} and {high} g."


def _signed(mass: float) -> str:
    text = f"{mass * GRAM:+.2f}"
    return "0.00" if float(text) == 0 else text.replace("-", "\N{MINUS SIGN}")


def buoyancy(reserve: Reserve, water: Water, displaced: float, centre: Floats, mass: float) -> Tree:
    """Return the reserve with its band.

    Parameters
    ----------
    reserve : Reserve
    water : Water
    displaced : float, m3
        Wholly under water.
    centre : (3,) array, m
        Of buoyancy.
    mass : float, kg
    """
    return {
        "water": {
            "density_kg_m3": water.density,
            "viscosity_m2_s": water.viscosity,
            "temperature_c": water.temperature,
            "salinity_g_kg": water.salinity,
        },
        "displaced_mm3": displaced * MM3,
        "centre_mm": plain(centre, MM),
        "reserve_g": reserve.reserve * GRAM,
        "reserve_low_g": reserve.low * GRAM,
        "reserve_high_g": reserve.high * GRAM,
        "state": str(reserve.state),
        "verdict": verdict(reserve),
        "bulk_density_g_cm3": mass / displaced / 1e3,
        "suspends_within_g": reserve.threshold * GRAM,
        "doubts": [{"what": d.what, "low_g": d.low * GRAM, "high_g": d.high * GRAM} for d in reserve.doubts],
    }


def smooth(deficit: Deficit, mass: float, displaced: float, water: Water) -> Tree:
    """Return mass, displaced volume and reserve of the smooth parts that the facets stand for.

    Parameters
    ----------
    deficit : Deficit
        What the facets leave out.
    mass : float, kg
    displaced : float, m3
    water : Water
    """
    mass, displaced = mass + deficit.mass, displaced + deficit.displaced
    return {
        "mass_g": mass * GRAM,
        "displaced_mm3": displaced * MM3,
        "reserve_g": (displaced * water.density - mass) * GRAM,
    }


def waters(mass: float, displaced: float, threshold: float | None) -> list[Tree]:
    """Return reserve and state in fresh and sea water from 4 to 30 degrees.

    Parameters
    ----------
    mass : float, kg
    displaced : float, m3
    threshold : float or None, kg
        Stated one; None takes the share of the displaced mass.
    """
    rows = []
    for name, water in table():
        lifted = displaced * water.density
        left = lifted - mass
        rows.append(
            {
                "name": name,
                "temperature_c": water.temperature,
                "salinity_g_kg": water.salinity,
                "density_kg_m3": water.density,
                "reserve_g": left * GRAM,
                "state": str(behaviour(left, suspends_within(lifted, threshold))),
            }
        )
    return rows
