"""A scene turned into the posture that heads the page, as one sees it from the bait's left with the water level."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from meshlure.results import Scene

Floats = NDArray[np.float64]

ALONG = 0.2
"""Length of the nose direction's level part below which a bait stands on end, and its left says where to look from."""


@dataclass(frozen=True, eq=False)
class Stand:
    """Where a scene stands.

    Attributes
    ----------
    axes : (3, 3) array
        Rows in mesh coordinates: to the right (towards the tail), away from the eye, and up.
    water : float or None
        Height of the surface along up, mm.
    """

    axes: Floats
    water: float | None

    def place(self, points: Floats) -> Floats:
        """Return (..., 3) points of the mesh, mm, as right, away, up."""
        return np.asarray(points, dtype=np.float64) @ self.axes.T


def stand(scene: Scene, frame: Mapping[str, Any]) -> Stand:
    """Return how a scene stands: on its water, or back up where no attitude is its own.

    Parameters
    ----------
    scene : Scene
    frame : mapping
        Of the result tree: ``nose``, ``back`` and ``side``, the bait's own left.
    """
    nose, back, left = (np.asarray(frame[name], dtype=np.float64) for name in ("nose", "back", "side"))
    up = back if scene.up is None else scene.up
    up = up / np.linalg.norm(up)
    right = _level(-nose, up)
    if np.linalg.norm(right) < ALONG:
        right = np.cross(-_level(left, up), up)
    right /= np.linalg.norm(right)
    return Stand(np.array([right, np.cross(up, right), up]), None if scene.up is None else scene.waterline_mm)


def _level(way: Floats, up: Floats) -> Floats:
    return np.asarray(way - (way @ up) * up)
