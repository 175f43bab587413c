"""Roundness: which shells are balls, and how large."""

from __future__ import annotations

from typing import Final

import numpy as np

from meshlure.geometry.shells import Shell

_EVEN: Final = 0.01
"""Share of the radius by which a corner may be nearer or farther than others; those of a ball's facets lie on it."""

_ROUND: Final = 0.93
"""Sphericity from which on a shell with even corners is a ball: twenty facets have 0.939, a cube 0.806."""


def ball_diameter(shell: Shell) -> float | None:
    """Diameter, m, of the ball that a shell stands for, None where it is none.

    Notes
    -----
    A ball's corners all lie at its radius, and it has less area to its volume than anything else: sphericity is the
    area of a ball of the same volume over the shell's area. Either alone is not enough: a cube's corners are even, and
    an ellipsoid can be nearly as spherical.

    References
    ----------
    H. Wadell (1935), Volume, shape and roundness of quartz particles, J. Geology 43(3): sphericity.
    """
    volume = abs(shell.volume)
    if not shell.area > 0 or np.pi ** (1 / 3) * (6 * volume) ** (2 / 3) / shell.area < _ROUND:
        return None
    named = np.unique(shell.surface.faces)
    points = shell.surface.vertices[named] - shell.centre
    # |p|^2 = 2 c.p + (r^2 - c^2): the sphere through the corners, by least squares.
    left = np.column_stack([2 * points, np.ones(len(points))])
    found, *_ = np.linalg.lstsq(left, (points**2).sum(axis=1), rcond=None)
    radius = float(np.sqrt(max(found[3] + found[:3] @ found[:3], 0.0)))
    off = np.abs(np.linalg.norm(points - found[:3], axis=1) - radius).max()
    return 2 * radius if off <= _EVEN * radius else None
