"""Resolution: the steps of a file's numbers where a part stands far from the origin, and what they cost."""

from __future__ import annotations

from typing import Final

import numpy as np

from meshlure.findings import Finding, Level
from meshlure.geometry.phrasing import millimetres
from meshlure.geometry.surface import Floats, Surface

_TELL: Final = 1e-6
"""m. Steps below this are finer than any part is made."""

_MATTERS: Final = 20e-6
"""m. Steps beyond this are as coarse as the chords of a good export."""

_FAR: Final = 50.0
"""Times its own length that a part stands off before round numbers are taken for rounded ones; our choice."""

_DECIMALS: Final = 6

_SAME: Final = 1e-12
"""Share of a coordinate that scaling to metres and back may move it."""


def resolution_findings(surface: Surface, metres: float) -> list[Finding]:
    """Return what is to be said of a part whose file's numbers are coarse where it stands.

    Parameters
    ----------
    surface : Surface
        As read, m.
    metres : float, m
        Length of the file's unit.

    Notes
    -----
    Coordinates that are all four-byte numbers were written as such, with steps of 2^-23 of the greatest power of two
    below them. Of a part that stands far off, those that are all multiples of a power of ten were rounded to it. Half a
    step at every corner moves the volume by no more than half a step times the sum over the corners of what the volume
    gains as a corner moves, a third of the faces' vector areas.
    """
    written = surface.vertices / metres
    reach, size = float(np.abs(written).max()), float(np.ptp(written, axis=0).max())
    step = _step(written, reach, far=reach > _FAR * size)
    if step is None or step * metres <= _TELL:
        return []
    step *= metres
    gains = np.zeros_like(surface.vertices)
    for corner in range(3):
        np.add.at(gains, surface.faces[:, corner], surface.double_areas / 6)
    most = step / 2 * float(np.abs(gains).sum())
    away = f"{reach * metres:.4g} m"
    return [
        Finding(
            "far-from-origin",
            Level.WARNING if step > _MATTERS else Level.NOTE,
            f"the part stands {away} from the origin, where the file's numbers have steps of {millimetres(step)}: "
            f"every corner may be {millimetres(step / 2)} off either way, the volume by up to {most * 1e9:.3g} mm3",
            advice="Move the part to the origin in CAD and export it again.",
        )
    ]


def _step(written: Floats, reach: float, far: bool) -> float | None:
    """Step of the numbers in a file, in its unit; None where it shows in none of them."""
    slack = _SAME * reach
    if bool((np.abs(written.astype(np.float32).astype(np.float64) - written) <= slack).all()):
        return float(np.spacing(np.float32(reach)))
    if not far:
        return None
    for decimals in range(_DECIMALS + 1):
        if bool((np.abs(np.round(written, decimals) - written) <= slack).all()):
            return float(10.0**-decimals)
    return None
