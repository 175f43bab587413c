"""A part's flat back: the face that an open mould in one piece is poured from."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.geometry.surface import Bools, Floats, Surface
from meshlure.geometry.topology import paired

LEVEL: Final = 0.01e-3
"""m by which the corners of a flat face may differ in height."""

SQUARE: Final = np.radians(0.5)
"""rad between the pull and the normals of a flat face."""

LEAST: Final = 0.2
"""Share of what the part covers along the pull that its flat back must have."""


@dataclass(frozen=True, eq=False)
class Flat:
    """A flat back.

    Attributes
    ----------
    way : float
        1 where the part stands on it towards +z, -1 where it must be turned over first.
    height : float, m
        Along z.
    area : float, m2
    """

    way: float
    height: float
    area: float


def flat_back(body: Surface, covered: float, where: str) -> Flat:
    """Return the flat back of a body on the bench: the largest face square to the pull, all the body on one side of it.

    Parameters
    ----------
    body : Surface
    covered : float, m2
        Area of the body's shadow along the pull.
    where : str
        What the pull is called in messages.

    Raises
    ------
    InputError
        Where there is none.
    """
    best: tuple[float, float, float] | None = None
    for way in (1.0, -1.0):
        faces, heights = _square(body, way)
        if not faces.any():
            continue
        areas = np.linalg.norm(body.double_areas[faces], axis=1) / 2
        levels, group = _levels(heights[faces])
        sums = np.bincount(group, areas)
        largest = int(sums.argmax())
        if best is None or sums[largest] > best[2]:
            best = (way, float(levels[largest]), float(sums[largest]))
    if best is None or best[2] < LEAST * covered:
        share = 0.0 if best is None else best[2] / covered
        found = "none at all" if best is None else f"the largest has {best[2] * 1e6:.3g} mm2, {share:.0%} of that"
        raise InputError(
            Fault(
                what="the part has no flat back to be moulded in one piece",
                where=where,
                found=found,
                allowed=f"a flat face square to the pull of at least {LEAST:.0%} of what the part covers along it, "
                f"{covered * 1e6:.0f} mm2",
                next_step="state the pull that is square to the flat face, or mould it in two halves, "
                "without --one-piece",
            )
        )
    way, height, area = best
    over = height - float((body.vertices[:, 2] * way).min())
    if over > LEVEL:
        raise InputError(
            Fault(
                what="the part reaches beyond its flat back, so that it does not stand on it",
                where=where,
                found=f"{over * 1e3:.2f} mm",
                allowed=f"up to {LEVEL * 1e3:g} mm",
                next_step="draw the back flat, or mould the part in two halves, without --one-piece",
            )
        )
    return Flat(way, way * height, area)


def footed(body: Surface, depth: float) -> Surface:
    """Return a body that stands on z = 0 with its flat back drawn down by ``depth``, m, straight and square.

    Notes
    -----
    So a board can be joined to it without faces that lie in each other.
    """
    level = np.abs(body.vertices[:, 2]) <= LEVEL
    flat = level[body.faces].all(axis=1) & (body.double_areas[:, 2] < 0)
    count = len(body.vertices)
    below = body.vertices.copy()
    below[:, 2] -= depth
    pairs = paired(body)
    rim = flat[pairs.forward_face] != flat[pairs.backward_face]
    ahead = flat[pairs.forward_face[rim]]
    a = np.where(ahead, pairs.start[rim], pairs.end[rim]).astype(np.intp)
    b = np.where(ahead, pairs.end[rim], pairs.start[rim]).astype(np.intp)
    walls = [np.column_stack([a, b, b + count]), np.column_stack([a, b + count, a + count])]
    faces = np.concatenate([body.faces[~flat], body.faces[flat] + count, *walls])
    return Surface(np.vstack([body.vertices, below]), faces)


def _square(body: Surface, way: float) -> tuple[Bools, Floats]:
    """Which faces look straight down once the part is turned by ``way``, and every face's height then, m."""
    normals = body.double_areas
    length = np.linalg.norm(normals, axis=1)
    down = -way * normals[:, 2] >= np.cos(SQUARE) * np.where(length > 0, length, np.inf)
    return np.asarray(down), body.corners[:, :, 2].mean(axis=1) * way


def _levels(height: Floats) -> tuple[Floats, Floats]:
    """Heights that lie together, and for each the number of its level."""
    order = np.argsort(height)
    apart = np.diff(height[order], prepend=height[order[0]]) > LEVEL
    group = np.empty(len(height), dtype=np.intp)
    group[order] = np.cumsum(apart)
    lowest = np.full(int(group.max()) + 1, np.inf)
    np.minimum.at(lowest, group, height)
    return lowest, np.asarray(group)
