"""[limits]: what a copy must meet to pass."""

from __future__ import annotations

import math
from dataclasses import dataclass

from meshlure.files.keys import Keys

# A right angle in degrees is rounded when it is turned into radians.
_RIGHT_ANGLE = math.pi / 2 * (1 + 1e-12)


@dataclass(frozen=True)
class LimitsSection:
    """Ranges from least to greatest, both allowed; None where none is set.

    Attributes
    ----------
    reserve : (float, float) or None, kg
        Reserve of buoyancy, positive where the bait floats.
    nose_up : (float, float) or None, rad
        Angle of the nose above the horizontal in the posture after landing.
    """

    reserve: tuple[float, float] | None
    nose_up: tuple[float, float] | None


def read_limits(keys: Keys) -> LimitsSection:
    """Read [limits]."""
    section = LimitsSection(
        keys.pair("reserve", "mass", '["0.8 g", "1.6 g"]', signed=True),
        keys.pair("nose_up", "angle", '["-8 deg", "0 deg"]', least=-_RIGHT_ANGLE, most=_RIGHT_ANGLE),
    )
    keys.close()
    return section
