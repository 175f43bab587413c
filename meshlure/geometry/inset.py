"""Inset: what of a solid lies at least a distance under its skin."""

from __future__ import annotations

from typing import Final

import numpy as np

from meshlure.geometry.crossing import self_crossings
from meshlure.geometry.deficit import facet_deficit
from meshlure.geometry.halfspaces import planes_of, solid_below
from meshlure.geometry.level import CLOSE, Level
from meshlure.geometry.nesting import nested
from meshlure.geometry.offset import mitred
from meshlure.geometry.proximity import Proximity
from meshlure.geometry.shells import Shell, enclosed_volume, split
from meshlure.geometry.surface import Surface
from meshlure.geometry.topology import paired

_PLANES: Final = 50_000
"""Faces beyond which planes are not intersected one by one: that many take some three seconds."""

_TRUE: Final = 1e-3
"""Share of the distance by which a mitred skin may lie too deep: its hollow edges are pointed where they ought to be
round, and two faces that meet at five degrees come to that."""

_LEFT_OUT: Final = 1.5e-3
"""Share of the volume that a level may leave out, by two drawings, before it is drawn again on a finer lattice."""

_DRAWN: Final = 4
"""Times that a level is drawn at most."""

_FINER: Final = (0.25, 0.6)
"""Shares of a pitch between which the next stays."""

_NODES: Final = 4e6
"""Places of the grid beyond which no lattice is made finer unasked."""


def inset(surface: Surface, distance: float, pitch: float | None = None) -> tuple[Surface, ...]:
    """Return what of a solid lies at least a distance under its skin, the largest part first.

    Parameters
    ----------
    surface : Surface
        Closed, outward, its cavities inward, without shells that overlap.
    distance : float, m
        0 or more.
    pitch : float, m, optional
        Step of the lattice where one is needed; positive, at most the distance. By default as fine as it takes to leave
        out no more than some 0.15% of the volume, or as four million places allow.

    Returns
    -------
    tuple of Surface
        Closed and outward, one for each part that hangs together, with its cavities; none where nothing is so deep.

    Raises
    ------
    ValueError
        A negative distance; a pitch that is not positive, above the distance, or too fine for the memory.

    Notes
    -----
    Of a convex surface of up to 50,000 faces: the solid below the planes of all faces moved inward, exact for the
    facets whatever vanishes. Else the skin moved in by its faces with mitred edges, if none turns over, none cross, and
    all vertices and middles of edges and faces lie from 1 to 1.001 times the distance under the skin: facets and drawn
    edges stay as they are. Else the level at that depth, see `level.Level`: exact to a hundred-thousandth at its
    vertices; sharp edges of the level are cut across by the lattice, and a part thinner than its step may be missed.

    References
    ----------
    J. Serra (1982), Image analysis and mathematical morphology, Academic Press: the erosion by a ball.
    """
    if not distance >= 0:
        raise ValueError(f"an inset takes a distance of 0 or more, not {distance}")
    if distance == 0:
        return _parts(surface)
    if pitch is not None and not 0 < pitch <= distance:
        raise ValueError(f"an inset by {distance} m takes a pitch of that or less, not {pitch} m")
    planes = planes_of(surface) if len(surface.faces) <= _PLANES else None
    if planes is not None:
        planes[:, 3] -= distance
        solid = solid_below(planes)
        return () if solid is None else (solid,)
    moved = _moved(surface, distance)
    if moved is not None:
        return _parts(moved)
    drawn = _drawn(surface, distance, pitch)
    return () if drawn is None else _parts(drawn)


def _moved(surface: Surface, distance: float) -> Surface | None:
    """Return the mitred skin where it is the inset's, else None."""
    moved = mitred(surface, -distance)
    if moved is None or (np.einsum("ij,ij->i", moved.double_areas, surface.double_areas) < 0).any():
        return None
    crossed = self_crossings(moved, 0.0)
    if crossed is None or len(crossed):
        return None
    proximity = Proximity.of(surface, distance)
    pairs = paired(moved)
    middles = (moved.vertices[pairs.start] + moved.vertices[pairs.end]) / 2
    for points in (moved.vertices, middles, moved.corners.mean(axis=1)):
        depth = proximity.nearest(points).distance
        if depth.min() < distance * (1 - CLOSE) or depth.max() > distance * (1 + _TRUE):
            return None
    return moved


def _drawn(surface: Surface, distance: float, pitch: float | None) -> Surface | None:
    """Return the level, as fine as asked or as it takes, None where nothing is so deep."""
    level = Level.of(surface, distance)
    if pitch is not None:
        return level.drawn(pitch)
    size = surface.bounds[1] - surface.bounds[0]
    finest = 2 * float((np.prod(size) / _NODES) ** (1 / 3))
    pitch = min(distance, max(finest, 0.6 * abs(enclosed_volume(surface)) / surface.area))
    drawn = level.drawn(pitch)
    # Facets and cut edges leave out a volume that goes with the square of the pitch. Facets alone tell it the first
    # time, and then two drawings together, by Richardson's extrapolation.
    share = 1.0 if drawn is None else abs(facet_deficit(drawn, paired(drawn)) / enclosed_volume(drawn))
    for _ in range(_DRAWN - 1):
        if pitch <= finest:
            break
        wanted = float(np.clip(0.8 * np.sqrt(_LEFT_OUT / max(share, _LEFT_OUT)), *_FINER))
        coarser, before, pitch = pitch, drawn, max(pitch * wanted, finest)
        drawn = level.drawn(pitch)
        if drawn is not None and before is not None:
            whole = enclosed_volume(drawn)
            share = abs(whole - enclosed_volume(before)) / whole / ((coarser / pitch) ** 2 - 1)
            if share <= _LEFT_OUT:
                break
    return drawn


def _parts(surface: Surface) -> tuple[Surface, ...]:
    """Solids of a surface that do not touch, each with its cavities, the largest first."""
    shells = nested(split(surface, paired(surface)))
    outer = [number for number, shell in enumerate(shells) if shell.volume > 0 and not shell.flat]
    return tuple(_whole([shells[n], *(s for s in shells if s.reversed and s.parent == n)]) for n in outer)


def _whole(shells: list[Shell]) -> Surface:
    start = np.cumsum([0, *(len(shell.surface.vertices) for shell in shells)])
    faces = [shell.surface.faces + first for shell, first in zip(shells, start[:-1], strict=True)]
    return Surface(np.concatenate([shell.surface.vertices for shell in shells]), np.concatenate(faces))
