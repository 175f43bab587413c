"""What a bait shows: silhouettes from its sides and along asked directions, and a rose of area over directions."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from meshlure.bait.pieces import Frame
from meshlure.geometry.outline import Outline, outline
from meshlure.geometry.surface import Floats, Surface
from meshlure.geometry.topology import EdgePairs

ROSE_STEP = np.radians(15.0)


@dataclass(frozen=True, eq=False)
class Rose:
    """Silhouette area over directions in the bait's three planes.

    Attributes
    ----------
    plane : tuple of str
        Per direction: around (across the bait, from side to back), level (from nose to side) or upright (from nose to
        back).
    angle : (n,) array, rad
        From the plane's first direction to its second.
    axis : (n, 3) array
    area : (n,) array, m2
    """

    plane: tuple[str, ...]
    angle: Floats
    axis: Floats
    area: Floats


def silhouettes(
    surface: Surface, pairs: EdgePairs, frame: Frame, axes: Sequence[Floats]
) -> tuple[tuple[str, Outline], ...]:
    """Return the silhouettes from the side, from above, from the front and along further axes, with their names.

    Parameters
    ----------
    surface, pairs : Surface, EdgePairs
        Outer skin with its edges.
    frame : Frame
    axes : sequence of (3,) arrays
        Unit vectors asked for; each is named ``axis``.
    """
    named = [("side", frame.side, frame.back), ("top", frame.back, -frame.side), ("front", frame.nose, frame.back)]
    named += [("axis", axis, frame.back) for axis in axes]
    return tuple((name, outline(surface, pairs, axis, up)) for name, axis, up in named)


def rose(surface: Surface, pairs: EdgePairs, frame: Frame) -> Rose:
    """Return the silhouette area every 15 degrees over half a turn in the bait's three planes.

    Notes
    -----
    The other half of each turn shows the same area from behind.
    """
    planes = (
        ("around", frame.side, frame.back),
        ("level", frame.nose, frame.side),
        ("upright", frame.nose, frame.back),
    )
    steps = np.arange(round(np.pi / ROSE_STEP)) * ROSE_STEP
    names, angles, directions = [], [], []
    for name, first, second in planes:
        for angle in steps:
            names.append(name)
            angles.append(angle)
            directions.append(np.cos(angle) * first + np.sin(angle) * second)
    area = np.array([outline(surface, pairs, axis).area for axis in directions])
    return Rose(tuple(names), np.array(angles), np.array(directions), area)
