"""Normals of the smooth skin that a surface's facets stand for, split where the skin has a sharp edge."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np

from meshlure.geometry.planes import drawn_flat
from meshlure.geometry.surface import Bools, Floats, Ints, Surface
from meshlure.geometry.topology import EdgePairs, next_corner
from meshlure.tolerances import SHARP_EDGE

_CHUNK = 32768

RESOLVED = 64 * 2.0**-24
"""Share of the largest coordinate below which a face is too thin to have a normal: 64 steps of a four-byte number."""


@dataclass(frozen=True, eq=False)
class Facets:
    """The plane faces by themselves.

    Attributes
    ----------
    normals : (3, m) array
        Unit normals by coordinate; zero for a face too thin to have one.
    areas : (m,) array, m2
    weights : (3, m) array, 1/m2
        How much a face counts for the normal at each of its corners; zero for a face too thin.
    thin : (m,) array
        Faces too thin to have a normal.
    """

    normals: Floats
    areas: Floats
    weights: Floats
    thin: Bools


@dataclass(frozen=True, eq=False)
class SkinNormals:
    """Normals of the skin at the corners of the faces.

    Attributes
    ----------
    groups : (3 m,) array
        Per corner (3 * face + corner) the number of its normal.
    normals : (3, k) array
        Unit normals by coordinate.
    one_sided : (k,) array
        Normals beside a sharp edge, which know the skin on one side only.
    firm : (k,) array
        Normals taken from a plane, which are not up for correction.
    sharp : (e,) array
        Pairs of half-edges whose edge is sharp.
    flat : (m,) array
        Faces of planes that were drawn flat.
    """

    groups: Ints
    normals: Floats
    one_sided: Bools
    firm: Bools
    sharp: Bools
    flat: Bools


def facets(surface: Surface) -> Facets:
    """Face normals, areas (m2) and weights (1/m2) of a surface.

    Notes
    -----
    The weight of a face at a corner is sin(a) / (|p| |q|), a the angle and p, q the sides there, which makes the
    normals of a ball exact however its vertices lie.

    References
    ----------
    N. Max (1999), Weights for computing vertex normals from facet normals, J. Graphics Tools 4(2) (from memory).
    """
    count = len(surface.faces)
    normals, weights, areas = np.empty((3, count)), np.empty((3, count)), np.empty(count)
    thin = np.empty(count, dtype=np.bool_)
    vertices = np.ascontiguousarray(surface.vertices.T)
    # A body that stands far off its origin is not thin for it: other formats than STL keep its digits.
    reach = float(np.ptp(vertices, axis=1).max()) if vertices.size else 0.0
    step = RESOLVED * min(float(np.abs(vertices).max(initial=0.0)), 10 * reach)
    for at in range(0, count, _CHUNK):
        piece = slice(at, at + _CHUNK)
        a, b, c = (vertices[:, corner] for corner in surface.faces[piece].T)
        u, v, w = b - a, c - b, a - c
        n = np.stack([u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]])
        double = np.sqrt((n * n).sum(axis=0))
        uu, vv, ww = (u * u).sum(axis=0), (v * v).sum(axis=0), (w * w).sum(axis=0)
        slim = double <= step * np.sqrt(np.maximum(np.maximum(uu, vv), ww))
        normals[:, piece] = n / np.where(slim, np.inf, double)
        for corner, sides in enumerate((uu * ww, uu * vv, vv * ww)):
            weights[corner, piece] = double / np.where(slim, np.inf, sides)
        areas[piece] = double / 2
        thin[piece] = slim
    return Facets(normals, areas, weights, thin)


def skin_normals(surface: Surface, pairs: EdgePairs, plain: Facets) -> SkinNormals:
    """Skin normals at the corners, unit vectors averaged over the faces that join smoothly round a vertex.

    Parameters
    ----------
    surface : Surface
    pairs : EdgePairs
        Its edges.
    plain : Facets
        Its faces.

    Notes
    -----
    Faces join smoothly across an edge where their normals differ by no more than `tolerances.SHARP_EDGE`. A plane that
    was drawn flat gives its own normal to all that joins it smoothly, since what runs out into a plane is tangent to
    it.
    """
    one, other = pairs.forward_face, pairs.backward_face
    cosines = np.zeros(len(one))
    for axis in range(3):
        cosines += plain.normals[axis, one] * plain.normals[axis, other]
    unknown = plain.thin[one] | plain.thin[other]
    sharp = (cosines < np.cos(np.radians(SHARP_EDGE))) & ~unknown
    flat = drawn_flat(surface, pairs, plain.areas, cosines, sharp, unknown)
    groups, count = _groups(surface, pairs, sharp)
    normals = _summed(plain, groups, count, None)
    one_sided, firm = np.zeros(count, dtype=np.bool_), np.zeros(count, dtype=np.bool_)
    one_sided[len(surface.vertices) :] = True
    if flat.any():
        planes = _summed(plain, groups, count, flat)
        firm = np.asarray((planes != 0).any(axis=0))
        normals[:, firm] = planes[:, firm]
        one_sided &= ~firm
    normals = _unit(normals)
    return SkinNormals(groups, normals, one_sided, firm, sharp, flat)


def corrected(skin: SkinNormals, numbers: Ints, normals: Floats) -> SkinNormals:
    """Return the normals with some of them, (3, k) by coordinate, replaced."""
    changed = skin.normals.copy()
    changed[:, numbers] = _unit(normals)
    return replace(skin, normals=changed)


def _unit(vectors: Floats) -> Floats:
    lengths = np.sqrt((vectors * vectors).sum(axis=0))
    return np.asarray(vectors / np.where(lengths == 0, 1.0, lengths))


def _summed(plain: Facets, groups: Ints, count: int, only: Bools | None) -> Floats:
    """Sum weighted normals, all or only those of some faces, over the corners of each group."""
    total = np.empty((3, count))
    weighted = np.empty((len(plain.areas), 3))
    for axis in range(3):
        normal = plain.normals[axis] if only is None else plain.normals[axis] * only
        for corner in range(3):
            np.multiply(plain.weights[corner], normal, out=weighted[:, corner])
        total[axis] = np.bincount(groups, weights=weighted.ravel(), minlength=count)
    return total


def _groups(surface: Surface, pairs: EdgePairs, sharp: Bools) -> tuple[Ints, int]:
    """Give the corners that share a normal one number: the vertex's, or a new one where the vertex has a sharp edge."""
    from scipy.sparse import csr_array
    from scipy.sparse.csgraph import connected_components

    groups: Ints = surface.faces.ravel()
    count = len(surface.vertices)
    creased = np.zeros(count, dtype=np.bool_)
    creased[pairs.start[sharp]] = creased[pairs.end[sharp]] = True
    creased[pairs.irregular.ends] = True
    corners = np.flatnonzero(creased[groups])
    if not len(corners):
        return groups, count
    local = np.empty(len(groups), dtype=np.int32)
    local[corners] = np.arange(len(corners), dtype=np.int32)
    # A forward half-edge begins at its edge's start, where the backward one ends.
    at_start, at_end = ~sharp & creased[pairs.start], ~sharp & creased[pairs.end]
    ahead, back = pairs.forward, pairs.backward
    one = np.concatenate([ahead[at_start], next_corner(ahead[at_end])])
    other = np.concatenate([next_corner(back[at_start]), back[at_end]])
    links = csr_array((np.ones(len(one), dtype=np.int8), (local[one], local[other])), shape=(len(corners),) * 2)
    found, labels = connected_components(links, directed=False)
    groups = groups.copy()
    groups[corners] = count + labels
    return groups, count + int(found)
