"""Friction of a skin along the flow: mean coefficients on the wetted area over the Reynolds number of the run."""

from __future__ import annotations

import math
from typing import Final

NATURAL_TRANSITION: Final = 5e5
"""Reynolds number of the run at which a laminar layer on a smooth wall in still water turns turbulent."""


def _checked(reynolds: float) -> float:
    if not 0 < reynolds < math.inf:
        raise ValueError(f"a Reynolds number is positive and finite, not {reynolds}")
    return reynolds


def laminar_friction(reynolds: float) -> float:
    """Mean friction coefficient of a laminar layer on a flat plate.

    Parameters
    ----------
    reynolds : float
        Speed x run / kinematic viscosity.

    Notes
    -----
    C_f = 1.328/sqrt(Re); from about 1e3 to 5e5 on a smooth wall.

    References
    ----------
    Blasius, H. (1908): Grenzschichten in Flüssigkeiten mit kleiner Reibung. Z. Math. Phys. 56.
    """
    return 1.328 / math.sqrt(_checked(reynolds))


def turbulent_friction(reynolds: float) -> float:
    """Mean friction coefficient of a layer that is turbulent from its beginning.

    Parameters
    ----------
    reynolds : float
        Speed x run / kinematic viscosity.

    Notes
    -----
    C_f = 0.455/(log10 Re)^2.58, made for 1e5 to 1e9. Below about 1.6e4 it would fall under the laminar line, which no
    turbulent layer does: there the laminar value is given.

    References
    ----------
    Schlichting, H., Boundary-Layer Theory, ch. 21 (Prandtl-Schlichting), from memory.
    """
    laminar = laminar_friction(reynolds)
    return max(0.455 / math.log10(reynolds) ** 2.58, laminar) if reynolds > 1e3 else laminar


def friction(reynolds: float, transition: float = NATURAL_TRANSITION) -> float:
    """Mean friction coefficient of a layer that turns turbulent at a given Reynolds number of its run.

    Parameters
    ----------
    reynolds : float
        Of the whole run.
    transition : float
        Reynolds number at which the layer turns; 0 for a layer tripped at its beginning.

    Notes
    -----
    C_f = C_turb(Re) - (Re_tr/Re)(C_turb(Re_tr) - C_lam(Re_tr)), the turbulent run less what its first part would have
    had turbulent, and laminar up to Re_tr. The subtracted number Re_tr (C_turb - C_lam) is Schlichting's A = 1050,
    1700, 3300, 8700 at Re_tr = 3e5, 5e5, 1e6, 3e6 to within 8%.

    References
    ----------
    Prandtl, L.; in Schlichting, H., Boundary-Layer Theory, ch. 21, from memory.
    """
    if not 0 <= transition < math.inf:
        raise ValueError(f"the Reynolds number of transition is not negative and finite, not {transition}")
    if _checked(reynolds) <= transition:
        return laminar_friction(reynolds)
    if transition == 0:
        return turbulent_friction(reynolds)
    spared = turbulent_friction(transition) - laminar_friction(transition)
    return turbulent_friction(reynolds) - transition / reynolds * spared
