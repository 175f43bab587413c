"""Phrasing: how findings say numbers, lengths and places."""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np
from numpy.typing import ArrayLike

from meshlure.findings import Point
from meshlure.geometry.surface import Floats

MOST_PLACES = 10
"""Places listed in one finding."""


def counted(count: int, noun: str, plural: str = "") -> str:
    """Return a number with its noun, in the plural where it needs one."""
    return f"{count:,} {noun if count == 1 else plural or noun + 's'}"


def millimetres(length: float) -> str:
    """Return a length given in m as text in mm."""
    return f"{length * 1e3 + 0.0:.4g} mm"


def place_text(point: ArrayLike) -> str:
    """Return a point given in m as text in mm, mesh coordinates."""
    # Adding zero keeps a rounded negative from reading as minus nothing.
    return "(" + ", ".join(f"{round(float(x) * 1e3, 3) + 0.0:.6g}" for x in np.asarray(point)) + ") mm"


def places_text(points: Floats, most: int = 3) -> str:
    """Return the first few points given in m as text in mm."""
    text = ", ".join(place_text(point) for point in points[:most])
    return f"{text} and {len(points) - most:,} more" if len(points) > most else text


def places(points: Iterable[ArrayLike]) -> tuple[Point, ...]:
    """Return the first ten points, m, as a finding takes them."""
    return tuple(
        (float(x), float(y), float(z))
        for _, (x, y, z) in zip(range(MOST_PLACES), map(np.asarray, points), strict=False)
    )
