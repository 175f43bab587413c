"""How findings about a bait say volumes and places, and where a solid's middle lies."""

from __future__ import annotations

from collections.abc import Sequence

from meshlure.findings import Point
from meshlure.geometry.moments import solid_moments
from meshlure.geometry.solids import Solid
from meshlure.geometry.surface import Floats


def middle(solid: Solid) -> Point:
    """Return the centroid of a solid, m."""
    x, y, z = (float(value) for value in solid_moments(solid.surface()).centre)
    return (x, y, z)


def place_text(point: Sequence[float] | Floats) -> str:
    """Return a mesh point given in m as text in mm, to a tenth: "(31.0, 0.0, -9.5) mm"."""
    # Adding zero keeps a rounded negative from reading as minus nothing.
    return "(" + ", ".join(f"{round(float(value) * 1e3, 1) + 0.0:.1f}" for value in point) + ") mm"


def volume_text(volume: float) -> str:
    """Return a volume given in m3 as text: mm3 with three digits, cm3 where it is large."""
    return f"{volume * 1e6:.2f} cm3" if volume >= 1e-6 else f"{volume * 1e9:.3g} mm3"
