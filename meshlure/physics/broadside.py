"""Broadside: the drag of a round body that lies across the flow."""

from __future__ import annotations

import math
from typing import Final

CYLINDER_CD: Final = 1.2
"""Crossflow drag coefficient of an endless circular cylinder at Reynolds numbers of 1e4 to 2e5, laminar separation."""


def crossflow_factor(fineness: float) -> float:
    """Drag of a finite cylinder across the flow over that of as long a piece of an endless one.

    Parameters
    ----------
    fineness : float
        Length over diameter.

    Notes
    -----
    eta = 1 - 23.009/(f + 122.769) - (13.006/(f + 24.368))^2, a published fit to Jorgensen's curve; DATCOM's figure
    4.2.1.2-35a (0.56 at f = 2 to 0.79 at f = 28) lies within 0.03 of it.

    References
    ----------
    Jorgensen, L. H. (1977): NASA TR R-474. Allen, H. J. and Perkins, E. W. (1951): NASA Rep. 1048.
    """
    if not 0 < fineness < math.inf:
        raise ValueError(f"a fineness is positive and finite, not {fineness}")
    return 1 - 23.009 / (fineness + 122.769) - (13.006 / (fineness + 24.368)) ** 2


def broadside_cd(fineness: float) -> float:
    """Drag coefficient of a round body across the flow, on its side silhouette.

    Parameters
    ----------
    fineness : float
        Length over diameter.

    Notes
    -----
    C_D = 1.2 eta (Allen and Perkins 1951). Below the drag crisis, Reynolds number on the diameter from about 1e4 to
    2e5. Sections that are not round (deep, flat-sided) lie higher and are not told apart here.
    """
    return CYLINDER_CD * crossflow_factor(fineness)
