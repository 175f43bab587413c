"""Refinement: a surface's faces split in four along the smooth skin that they stand for."""

from __future__ import annotations

from typing import Final

import numpy as np

from meshlure.geometry.deficit import UNEVEN
from meshlure.geometry.normals import Facets, SkinNormals, facets, skin_normals
from meshlure.geometry.runouts import run_out
from meshlure.geometry.surface import Bools, Floats, Surface
from meshlure.geometry.topology import EdgePairs, Ints32, next_corner, paired

KNIFE: Final = 0.05
"""Least 1 - cos^2 between the two sides of a sharp edge: on a thinner one the middle stays on the edge."""

FARTHEST: Final = 0.5
"""Share of the height of the lower face beside an edge by which the edge's middle may move: the normals beside needle
faces are not sure enough for more."""

STRAYS: Final = 25.0
"""Degrees between a face and the skin's normal at its corner from which the skin has no normal there: at the tip of a
cone. Facets that turn by less than the angle of a sharp edge stray by half as much."""


def refined(surface: Surface, pairs: EdgePairs) -> tuple[Surface, EdgePairs]:
    """Return a closed surface with every face split in four, the edges' middles moved onto the smooth skin.

    Parameters
    ----------
    surface : Surface
    pairs : EdgePairs
        Its edges.

    Notes
    -----
    The middle of an edge from p to q moves to the height (n_q.d - n_p.d)/8, d = q - p, of the cubic that is square to
    the skin's normals n at both ends. The guards of `deficit.facet_deficit` hold: where the slopes at both ends differ
    much the lesser decides, and what differs in sign stays straight, so that a kink remains one. On a sharp edge the
    middle moves by the shortest way that has each side's height over its own facets, so that a circular rim becomes
    rounder and stays in its plane. Flat faces stay flat. The facets' error falls to a quarter.

    References
    ----------
    A. Vlachos, J. Peters, C. Boyd and J. Mitchell (2001), Curved PN triangles, Symposium on Interactive 3D Graphics
    (from memory).
    """
    # Far from the origin of its coordinates a face would be taken for too thin to have a normal.
    origin = surface.bounds.mean(axis=0)
    surface = surface.moved(shift=-origin)
    plain = facets(surface)
    skin = run_out(surface, pairs, plain, skin_normals(surface, pairs, plain))
    known = _known(skin, plain)
    start, end = surface.vertices[pairs.start], surface.vertices[pairs.end]
    ahead, back = pairs.forward, pairs.backward
    side, height = _arched(skin, known, end - start, ahead, next_corner(ahead))
    shift = height[:, None] * side
    sharp = np.flatnonzero(skin.sharp)
    other = _arched(skin, known, (end - start)[sharp], next_corner(back)[sharp], back[sharp])
    shift[sharp] = _creased((side[sharp], height[sharp]), other)
    far = np.linalg.norm(shift, axis=1)
    area = np.minimum(plain.areas[pairs.forward_face], plain.areas[pairs.backward_face])
    limit = FARTHEST * 2 * area / np.linalg.norm(end - start, axis=1)
    shift *= (np.minimum(far, limit) / np.where(far > 0, far, 1.0))[:, None]

    middle = np.empty(3 * len(surface.faces), dtype=np.intp)
    middle[ahead] = middle[back] = len(surface.vertices) + np.arange(len(start))
    a, b, c = surface.faces.T
    ab, bc, ca = middle.reshape(-1, 3).T
    faces = np.concatenate([np.column_stack(row) for row in ((a, ab, ca), (ab, b, bc), (ca, bc, c), (ab, bc, ca))])
    finer = Surface(np.concatenate([surface.vertices, (start + end) / 2 + shift]) + origin, faces)
    return finer, paired(finer)


def _known(skin: SkinNormals, plain: Facets) -> Bools:
    """Whether the skin has a normal at each corner, (3 m,) array."""
    between = np.einsum("ik,ik->k", skin.normals[:, skin.groups], np.repeat(plain.normals, 3, axis=1))
    return np.asarray(between > np.cos(np.radians(STRAYS)))


def _arched(skin: SkinNormals, known: Bools, along: Floats, first: Ints32, last: Ints32) -> tuple[Floats, Floats]:
    """Unit vectors out of the skin at the middles of edges, (e, 3), and the skin's heights there, (e,), m.

    first, last : corners at the edges' starts and ends, on the side that is looked at.
    """
    normals = [skin.normals.T[skin.groups[corner]] for corner in (first, last)]
    rise = -(normals[0] * along).sum(axis=1)
    fall = (normals[1] * along).sum(axis=1)
    least = UNEVEN * np.minimum(np.abs(rise), np.abs(fall))
    bend = np.where(rise * fall > 0, np.clip((rise + fall) / 2, -least, least), 0.0)
    middle = normals[0] + normals[1]
    length = np.linalg.norm(middle, axis=1)
    return middle / np.where(length > 0, length, 1.0)[:, None], np.where(known[first] & known[last], bend / 4, 0.0)


def _creased(one: tuple[Floats, Floats], other: tuple[Floats, Floats]) -> Floats:
    """Shift of the middles of sharp edges, (e, 3) array, m, from the sides' vectors and heights."""
    cosine = (one[0] * other[0]).sum(axis=1)
    spread = 1 - cosine**2
    usable = spread > KNIFE
    weight = np.where(usable, 1 / np.where(usable, spread, 1.0), 0.0)
    here, there = (one[1] - cosine * other[1]) * weight, (other[1] - cosine * one[1]) * weight
    return np.asarray(here[:, None] * one[0] + there[:, None] * other[0])
