"""Lamb's factors: the mass of fluid that a slender body carries along when it moves, as shares of what it displaces."""

from __future__ import annotations

import math
from dataclasses import dataclass

_NEARLY_ROUND = 1.005


@dataclass(frozen=True)
class LambFactors:
    """Added-mass factors of a prolate spheroid.

    Attributes
    ----------
    along, across : float
        Added mass over displaced mass for motion along the long axis and across it (Lamb's k1 and k2).
    turning : float
        Added moment of inertia over the displaced fluid's, for turning about a short axis (k').
    """

    along: float
    across: float
    turning: float

    @property
    def couple(self) -> float:
        """The factor k2 - k1 of the Munk couple."""
        return self.across - self.along


def lamb_factors(fineness: float) -> LambFactors:
    """Return the added-mass factors of the prolate spheroid of a fineness.

    Parameters
    ----------
    fineness : float
        Length over diameter; below 1 counts as a sphere, whose factors are one half, one half and none.

    Raises
    ------
    ValueError
        For a fineness that is not positive and finite.

    References
    ----------
    H. Lamb (1932), Hydrodynamics, 6th ed., articles 114 and 373. M. Munk (1924), NACA Rep. 184.
    """
    if not 0 < fineness < math.inf:
        raise ValueError(f"a fineness is positive and finite, not {fineness}")
    if fineness < _NEARLY_ROUND:
        return LambFactors(0.5, 0.5, 0.0)
    e2 = 1 - 1 / fineness**2
    e = math.sqrt(e2)
    log = math.log((1 + e) / (1 - e))
    alpha = 2 * (1 - e2) / e**3 * (log / 2 - e)
    beta = 1 / e2 - (1 - e2) * log / (2 * e**3)
    turning = e2**2 * (beta - alpha) / ((2 - e2) * (2 * e2 - (2 - e2) * (beta - alpha)))
    return LambFactors(alpha / (2 - alpha), beta / (2 - beta), turning)
