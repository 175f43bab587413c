"""The bait's pieces as meshes to be looked at, few enough triangles for a page, in the posture that heads it."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from typing import Any

import numpy as np

from meshlure.bait.chambers import BallRow
from meshlure.bait.pieces import Bait, MeshPiece, Role
from meshlure.geometry.clusters import coarse
from meshlure.geometry.normals import facets, skin_normals
from meshlure.geometry.shapes import ball
from meshlure.geometry.solids import Solid, SolidError
from meshlure.geometry.surface import Floats, Surface, together
from meshlure.geometry.topology import paired
from meshlure.results.numbers import MM
from meshlure.results.study import Scene, ScenePiece

TRIANGLES = 30_000
"""That all pieces of a scene have together, at most."""

_ROUND = 2
"""Times that a ball's icosahedron is split: 320 faces."""

_FINE, _PLAIN = 1 / 8000, 1 / 100
"""Shares of a piece's length by which its skin may move to save triangles: at first, and at the most."""

_TAKEN = 100_000
"""Triangles beyond which a piece is clustered before it is simplified, which takes longer the more there are."""


def scene(bait: Bait, rows: Sequence[BallRow], ends: Mapping[str, str], posture: Mapping[str, Any]) -> Scene:
    """Return the meshes of body, inserts, hollows and balls, mm, with the water as it stands to them.

    Parameters
    ----------
    bait : Bait
    rows : sequence of BallRow
    ends : mapping
        By chamber the end that its balls lie at.
    posture : mapping
        Its row in the result tree: ``up`` and ``waterline_mm`` are taken.

    Notes
    -----
    Where the pieces have more than `TRIANGLES` together, the largest give way: edges are collapsed as long as the skin
    moves by less than 1/8000 of the piece's length, or by twice that and so on until it is enough. Nothing is measured
    on these meshes.
    """
    drawn = [*_meshes(bait), *_balls(rows, ends)]
    allowed = allowances([len(surface.faces) for _, _, surface in drawn], TRIANGLES)
    pieces = tuple(
        _shaded(name, role, within(surface, triangles))
        for (name, role, surface), triangles in zip(drawn, allowed, strict=True)
    )
    up = posture["up"]
    return Scene(pieces, None if up is None else np.asarray(up, dtype=np.float64), posture["waterline_mm"])


def allowances(counts: Sequence[int], total: int) -> list[int]:
    """Return how many triangles each piece may have: all it has if it is small, else an even share of what is left."""
    left, allowed = total, [0] * len(counts)
    for rank, number in enumerate(sorted(range(len(counts)), key=lambda i: counts[i])):
        allowed[number] = min(counts[number], left // (len(counts) - rank))
        left -= allowed[number]
    return allowed


def _shaded(name: str, role: Role, surface: Surface) -> ScenePiece:
    skin = skin_normals(surface, paired(surface), facets(surface))
    used, faces = np.unique(skin.groups, return_inverse=True)
    vertex = np.zeros(len(used), dtype=np.intp)
    vertex[faces] = surface.faces.ravel()
    return ScenePiece(name, str(role), surface.vertices[vertex] * MM, skin.normals[:, used].T, faces.reshape(-1, 3))


def _meshes(bait: Bait) -> Iterator[tuple[str, Role, Surface]]:
    for piece in (bait.body, *bait.pieces):
        yield piece.name, piece.role, piece.surface
        yield from _cavities(piece)


def _cavities(piece: MeshPiece) -> Iterator[tuple[str, Role, Surface]]:
    """Hollows that the mesh itself closes off, under the names that they have in the table of pieces."""
    alone = len(piece.cavities) == 1
    for number, cavity in enumerate(piece.cavities, 1):
        yield f"{piece.name} cavity{'' if alone else f' {number}'}", Role.VOID, cavity


def _balls(rows: Sequence[BallRow], ends: Mapping[str, str]) -> Iterator[tuple[str, Role, Surface]]:
    for row in rows:
        places: Floats = row.places[ends[row.balls.chamber]]
        made = [ball(place, row.balls.diameter, _ROUND) for place in places]
        if made:
            yield f"balls in {row.balls.chamber}", Role.BALL, together(*made)


def within(surface: Surface, triangles: int) -> Surface:
    """Return a surface of about as many triangles as allowed or fewer; one that has no more comes back as it is."""
    if len(surface.faces) <= triangles:
        return surface
    seen = coarse(surface, _TAKEN)
    try:
        solid = Solid.of(seen)
        tolerance = float(np.ptp(surface.bounds, axis=0).max()) * _FINE
        while True:
            solid = solid.simplified(tolerance)
            simple = solid.surface()
            if len(simple.faces) <= triangles:
                return simple
            if tolerance > _PLAIN * np.ptp(surface.bounds, axis=0).max():
                break
            tolerance *= 2
    except SolidError:
        pass  # a picture does not need a solid
    return coarse(surface, triangles)
