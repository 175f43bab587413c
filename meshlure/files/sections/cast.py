"""[cast]: how the bait is thrown."""

from __future__ import annotations

import math
from dataclasses import dataclass

from meshlure.files.defaults import CAST_ANGLE, CAST_HEIGHT, CAST_SPEED, LINE_PULL, WIND
from meshlure.files.keys import Keys
from meshlure.files.sections.retrieve import FASTEST

# A right angle in degrees is rounded when it is turned into radians.
_RIGHT_ANGLE = math.pi / 2 * (1 + 1e-12)


@dataclass(frozen=True)
class Sinker:
    """A plain sinker whose measured flight settles the speed.

    Attributes
    ----------
    mass : float, kg
    diameter : float, m
    distance : float, m
    """

    mass: float
    diameter: float
    distance: float


@dataclass(frozen=True)
class CastSection:
    """The throw; one of speed, energy and sinker says how hard, the others are None.

    Attributes
    ----------
    speed : float or None, m/s
        At the release.
    energy : float or None, J
        Given to the bait and the moving share of the rod.
    rod_mass : float or None, kg
        That share, as a mass at the rod's tip; there where energy is.
    sinker : Sinker or None
    angle : float, rad
        Above the horizontal.
    height : float, m
        Of the release above the water.
    line_pull : float, N
        Backwards, in flight.
    wind : float, m/s
        Positive from behind.
    assumed : tuple of str
        Keys that were not stated and stand at their defaults.
    steady_within, sways_within : float or None, rad
        Angles off the leading end up to which a flight counts as steady, and as swaying; None for our own limits.
    """

    speed: float | None
    energy: float | None
    rod_mass: float | None
    sinker: Sinker | None
    angle: float
    height: float
    line_pull: float
    wind: float
    assumed: tuple[str, ...]
    steady_within: float | None = None
    sways_within: float | None = None


def read_cast(keys: Keys) -> CastSection:
    """Read [cast]; an empty one is the usual throw."""
    how = keys.one_of("speed", "energy", "sinker", required=False)
    speed = keys.quantity("speed", "speed", positive=True, most=FASTEST)
    if how is None:
        speed = CAST_SPEED
        keys.assumed.append("speed")
    energy = keys.quantity("energy", "energy", positive=True, most=1000.0)
    rod_mass = keys.quantity("rod_mass", "mass", most=0.5)
    if energy is not None and rod_mass is None:
        keys.fault(
            "rod_mass", "the key is missing beside energy", next_step="add it: rod_mass = '8 g', 0 g for a bare energy"
        )
    if rod_mass is not None and energy is None:
        keys.fault(
            "rod_mass", "it means something only beside energy", next_step="add energy = '6 J' or remove rod_mass"
        )
    sinker_keys = keys.inner("sinker", '{ mass = "20 g", diameter = "15 mm", distance = "62 m" }')
    section = CastSection(
        speed,
        energy,
        rod_mass,
        None if sinker_keys is None else _read_sinker(sinker_keys),
        keys.assumed_quantity("angle", "angle", CAST_ANGLE, least=-_RIGHT_ANGLE, most=_RIGHT_ANGLE),
        keys.assumed_quantity("height", "length", CAST_HEIGHT, least=0.0, most=100.0),
        keys.assumed_quantity("line_pull", "force", LINE_PULL, least=0.0, most=100.0),
        keys.assumed_quantity("wind", "speed", WIND, signed=True, least=-FASTEST, most=FASTEST),
        tuple(keys.assumed),
        keys.quantity("steady_within", "angle", positive=True, most=_RIGHT_ANGLE),
        keys.quantity("sways_within", "angle", positive=True, most=_RIGHT_ANGLE),
    )
    steady, sways = section.steady_within, section.sways_within
    if steady is not None and sways is not None and steady > sways:
        keys.fault(
            "steady_within",
            "a steady flight is within the limit of a swaying one",
            f"{math.degrees(steady):.4g} degrees, and sways_within {math.degrees(sways):.4g}",
            "no more than sways_within",
            "make it smaller",
        )
    keys.close()
    return section


def _read_sinker(keys: Keys) -> Sinker:
    sinker = Sinker(
        keys.asked_quantity("mass", "mass", "20 g", positive=True, most=1.0),
        keys.asked_quantity("diameter", "length", "15 mm", positive=True, most=0.2),
        keys.asked_quantity("distance", "length", "62 m", positive=True, most=500.0),
    )
    keys.close()
    return sinker
