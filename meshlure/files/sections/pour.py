"""[pour]: what a casting is mixed from, for how many baits."""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from typing import Final

from meshlure.files.defaults import (
    POUR_BALLOONS,
    POUR_BY,
    POUR_PACKING,
    POUR_RATIO,
    POUR_RESIN,
    POUR_WASTE,
)
from meshlure.files.keys import Keys
from meshlure.files.sections.substance import Substance

MOST_BAITS: Final = 10_000
MOST_WASTE: Final = 5.0
"""Five times what the bait takes: a thimbleful mixed in a cup."""
PACKINGS: Final = (0.3, 0.75)
"""Loosely heaped fine powder, and the densest packing of equal spheres, 0.74."""
LARGEST_RATIO: Final = 1000.0
MEASURES: Final = ("weight", "volume")
_NUMBER: Final = re.compile(r"[+\-\N{MINUS SIGN}]?\.?\d")


@dataclass(frozen=True)
class PourSection:
    """A mix of resin and balloons.

    Attributes
    ----------
    resin, balloons : Substance
        A material by its name, which the stock may not know, or a density: of the cured resin, of the single balloons.
    ratio : (float, float)
        Parts A and B of the resin.
    by : str
        "weight" or "volume".
    densities : (float, float) or None, kg/m3
        Of parts A and B, to turn volumes into weights; None where both are taken to be the cured resin's.
    waste : float
        Share mixed beyond what the baits take.
    baits : int
        How many are poured at once.
    packing : float
        Share of a tapped cup of balloons that is balloons.
    mass : float or None, kg
        Mass of the whole bait, ready to fish, that is wanted in the place of the body's density.
    assumed : tuple of str
        Keys that were not stated and stand at their defaults.
    """

    resin: Substance
    balloons: Substance
    ratio: tuple[float, float]
    by: str
    densities: tuple[float, float] | None
    waste: float
    baits: int
    packing: float
    mass: float | None
    assumed: tuple[str, ...]


def read_pour(keys: Keys) -> PourSection:
    """Read [pour]; an empty one is one bait of the usual mix."""
    resin = _substance(keys, "resin") or keys.assume("resin", Substance(material=POUR_RESIN))
    balloons = _substance(keys, "balloons") or keys.assume("balloons", Substance(material=POUR_BALLOONS))
    ratio = _ratio(keys) or keys.assume("ratio", POUR_RATIO)
    by = keys.choice("by", MEASURES) or POUR_BY
    densities = _densities(keys)
    if by == "volume" and densities is None:
        keys.assume("densities", None)
    if by == "weight" and densities is not None:
        step = "write by = 'volume' or remove densities"
        keys.fault("densities", "parts measured by weight need no densities", "", "only beside by = 'volume'", step)
    waste = keys.assumed_quantity("waste", "share", POUR_WASTE, least=0.0, most=MOST_WASTE)
    baits = keys.whole("baits", 1, MOST_BAITS) if keys.stated("baits") else 1
    packing = keys.assumed_quantity("packing", "share", POUR_PACKING, least=PACKINGS[0], most=PACKINGS[1])
    mass = keys.quantity("mass", "mass", positive=True)
    keys.close()
    return PourSection(resin, balloons, ratio, by, densities, waste, baits, packing, mass, tuple(keys.assumed))


def _substance(keys: Keys, key: str) -> Substance | None:
    """A material's name, or a density where the text begins with a number."""
    if _NUMBER.match(keys.peek(key)):
        return Substance(density=keys.quantity(key, "density"))
    name = keys.text(key)
    return None if name is None else Substance(material=name)


def _ratio(keys: Keys) -> tuple[float, float] | None:
    """Parts A and B as a list of two numbers above zero."""
    numbers = keys.numbers("ratio", "[1, 1]")
    if numbers is None:
        return None
    if any(map(math.isnan, numbers)):
        return POUR_RATIO
    if len(numbers) != 2 or not 0 < min(numbers) <= max(numbers) <= LARGEST_RATIO:
        found = ", ".join(f"{number:g}" for number in numbers)
        what = f"a ratio takes two numbers above 0 and up to {LARGEST_RATIO:g}, part A and part B"
        keys.fault("ratio", what, found, "[1, 1]", "write ratio = [100, 90], as the tin says")
        return POUR_RATIO
    return numbers[0], numbers[1]


def _densities(keys: Keys) -> tuple[float, float] | None:
    values = keys.quantities("densities", "density", '["1.1 g/cm3", "1.0 g/cm3"]')
    if values is None:
        return None
    if len(values) != 2:
        step = "write the one of part A, then that of part B"
        keys.fault("densities", "there are two parts", str(len(values)), '["1.1 g/cm3", "1.0 g/cm3"]', step)
        return None
    return values[0], values[1]
