"""Crossing: which triangles of two surfaces, or of one, meet."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import lru_cache
from typing import Final

import numpy as np

from meshlure.geometry.blocks import curve_order
from meshlure.geometry.surface import Bools, Floats, Ints, Surface

_BLOCK = 16
_CHUNK = 16384
_ROUNDING = 32 * float(np.finfo(np.float64).eps)
_SELF_TESTS = 300
"""Box tests per triangle beyond which a search of a surface against itself is given up; smooth skins take about 100."""

_KEPT: Final = 16
"""Surfaces whose crossings with themselves are kept: a mesh is asked when it is read, when it was written and when what
was written is studied."""


def crossings(a: Surface, b: Surface, margin: float = 0.0) -> Ints:
    """Pairs of triangles of two surfaces that meet, or nearly.

    Parameters
    ----------
    a, b : Surface
        Of any size; b is best the smaller.
    margin : float, m
        Triangles this close to each other count as meeting. A negative margin asks that they reach that deep into each
        other instead.

    Returns
    -------
    (k, 2) array
        Face of a, face of b, in ascending order.

    Notes
    -----
    Only triangles within reach of the other surface's bounds are looked at, in blocks of neighbours found through an
    R-tree of boxes. A pair of boxes that meet is then settled by the separating axis theorem: two convex bodies are
    apart when, and only when, they are apart along a normal of a face or a product of two edges (for triangles in one
    plane, along a normal to an edge within it). Touching counts as meeting. With a margin the answer errs on the side
    of meeting, since the distance between two corners can exceed their distance along every one of these axes.

    References
    ----------
    S. Gottschalk, M. C. Lin, D. Manocha (1996), OBBTree: a hierarchical structure for rapid interference detection,
    SIGGRAPH 96, theorem 1 (from memory).
    """
    rows = np.concatenate([np.empty((2, 0), dtype=np.intp), *_meeting(a, b, margin)], axis=1)
    return _ordered(rows[0], rows[1])


def meets(a: Surface, b: Surface, margin: float = 0.0) -> bool:
    """Whether any triangles of two surfaces meet, or nearly; as `crossings`, but done at the first pair found."""
    return any(pairs.shape[1] for pairs in _meeting(a, b, margin))


def self_crossings(surface: Surface, depth: float, most: int = 100_000) -> Ints | None:
    """Pairs of triangles of one surface that reach into each other, None where the search would take too long.

    Parameters
    ----------
    surface : Surface
        Welded.
    depth : float, m
        How deep they must reach, so that faces which only lie against each other do not count.
    most : int
        A surface of more faces than this is not searched.

    Returns
    -------
    (k, 2) array or None
        The lower face first. Faces that share a vertex are left out.

    Notes
    -----
    As `crossings`; given up as well where the boxes overlap so much that the search would not stay proportional to the
    number of faces.
    """
    count = len(surface.faces)
    if count > most:
        return None
    if count < 2:
        return np.empty((0, 2), dtype=np.intp)
    return _self_crossings(_Mesh(surface), depth)


@dataclass(frozen=True, eq=False)
class _Mesh:
    """A surface that equals another of the same numbers."""

    surface: Surface

    def __hash__(self) -> int:
        return hash((self.surface.vertices.tobytes(), self.surface.faces.tobytes()))

    def __eq__(self, other: object) -> bool:
        if not isinstance(other, _Mesh):
            return NotImplemented
        one, two = self.surface, other.surface
        return np.array_equal(one.vertices, two.vertices) and np.array_equal(one.faces, two.faces)


@lru_cache(maxsize=_KEPT)
def _self_crossings(mesh: _Mesh, depth: float) -> Ints | None:
    surface, count = mesh.surface, len(mesh.surface.faces)
    corners = _corners(surface, np.arange(count))
    blocks = _Blocks.of(corners, -depth)
    found = [np.empty((2, 0), dtype=np.intp)]
    tests = 0
    for pairs in _candidates(blocks, blocks):
        tests += pairs.shape[1]
        if tests > _SELF_TESTS * count:
            return None
        one, other = surface.faces[pairs[0]], surface.faces[pairs[1]]
        apart = pairs[0] < pairs[1]
        for i in range(3):
            for j in range(3):
                apart &= one[:, i] != other[:, j]
        rows = pairs[:, apart]
        found.append(rows[:, _meet(corners[..., rows[0]], corners[..., rows[1]], -depth)])
    rows = np.concatenate(found, axis=1)
    ordered = _ordered(rows[0], rows[1])
    ordered.flags.writeable = False
    return ordered


def _ordered(first: Ints, second: Ints) -> Ints:
    order = np.lexsort((second, first))
    return np.stack([first[order], second[order]], axis=1)


def _meeting(a: Surface, b: Surface, margin: float) -> Iterator[Ints]:
    """(2, k) arrays of faces of a and of b that meet."""
    if not len(a.faces) or not len(b.faces):
        return
    near_a = _within(a, b.bounds, margin)
    near_b = _within(b, a.bounds, margin)
    if not len(near_a) or not len(near_b):
        return
    corners_a, corners_b = _corners(a, near_a), _corners(b, near_b)
    for first, second in _candidates(_Blocks.of(corners_a, margin), _Blocks.of(corners_b, margin)):
        kept = _meet(corners_a[..., first], corners_b[..., second], margin)
        yield np.stack([near_a[first[kept]], near_b[second[kept]]])


def _within(surface: Surface, bounds: Floats, margin: float) -> Ints:
    """Faces that do not lie wholly beyond one side of a box."""
    beyond = np.zeros(len(surface.vertices), dtype=np.uint8)
    slack = max(margin, 0.0) + _ROUNDING * float(np.abs(bounds).max())
    for axis in range(3):
        along = surface.vertices[:, axis]
        beyond |= (along < bounds[0, axis] - slack).view(np.uint8) << (2 * axis)
        beyond |= (along > bounds[1, axis] + slack).view(np.uint8) << (2 * axis + 1)
    a, b, c = (beyond[surface.faces[:, corner]] for corner in range(3))
    return np.flatnonzero(a & b & c == 0)


def _corners(surface: Surface, faces: Ints) -> Floats:
    """(corner, coordinate, face) array, m, of some faces."""
    vertices = np.ascontiguousarray(surface.vertices.T)
    return np.stack([vertices[:, surface.faces[faces, corner]] for corner in range(3)])


@dataclass(frozen=True, eq=False)
class _Blocks:
    """Boxes, m, of triangles and of blocks of sixteen neighbours.

    members : (b, 16) triangles; low, high : (b, 16, 3) their boxes; floor, ceiling : (b, 3) boxes of the blocks.
    The last block is filled up with boxes that nothing meets.
    """

    members: Ints
    low: Floats
    high: Floats
    floor: Floats
    ceiling: Floats

    @classmethod
    def of(cls, corners: Floats, margin: float) -> _Blocks:
        low, high = corners.min(axis=0).T, corners.max(axis=0).T
        grown = max(margin, 0.0) / 2 + _ROUNDING * float(np.abs(corners).max())
        order = curve_order(low + high)
        padded = -(-len(order) // _BLOCK) * _BLOCK
        members = np.zeros(padded, dtype=np.intp)
        members[: len(order)] = order
        lows, highs = np.full((padded, 3), np.inf), np.full((padded, 3), -np.inf)
        lows[: len(order)] = low[order] - grown
        highs[: len(order)] = high[order] + grown
        shape = (-1, _BLOCK, 3)
        lows, highs = lows.reshape(shape), highs.reshape(shape)
        return cls(members.reshape(-1, _BLOCK), lows, highs, lows.min(axis=1), highs.max(axis=1))


def _candidates(a: _Blocks, b: _Blocks) -> Iterator[Ints]:
    """(2, k) arrays of triangles, of a and of b, whose boxes meet."""
    block_a, block_b = _meeting_blocks(a, b)
    step = _CHUNK // _BLOCK
    for at in range(0, len(block_a), step):
        p, q = block_a[at : at + step], block_b[at : at + step]
        # First each triangle of the one against the other's whole block, then those left against its triangles.
        hit = _boxes_meet(a.low[p], a.high[p], b.floor[q][:, None], b.ceiling[q][:, None])
        row, member = np.nonzero(hit)
        p, q = p[row], q[row]
        hit = _boxes_meet(a.low[p, member][:, None], a.high[p, member][:, None], b.low[q], b.high[q])
        row, other = np.nonzero(hit)
        yield np.stack([a.members[p[row], member[row]], b.members[q[row], other]])


def _boxes_meet(low: Floats, high: Floats, other_low: Floats, other_high: Floats) -> Bools:
    hit = np.ones(np.broadcast_shapes(low.shape, other_low.shape)[:-1], dtype=np.bool_)
    for axis in range(3):
        hit &= low[..., axis] <= other_high[..., axis]
        hit &= other_low[..., axis] <= high[..., axis]
    return hit


def _meeting_blocks(a: _Blocks, b: _Blocks) -> tuple[Ints, Ints]:
    """Pairs of blocks whose boxes meet, by an R-tree of the fewer."""
    from rtree import index

    if len(a.floor) < len(b.floor):
        second, first = _meeting_blocks(b, a)
        return first, second
    # The tree is filled by its packed bulk loading (Leutenegger, Lopez and Edgington 1997), in one call.
    tree = index.Index((np.arange(len(b.floor)), b.floor, b.ceiling), properties=index.Property(dimension=3))
    found, counts = tree.intersection_v(a.floor, a.ceiling)  # type: ignore[no-untyped-call]
    return np.repeat(np.arange(len(a.floor)), counts.astype(np.intp)), np.asarray(found, dtype=np.intp)


def _meet(a: Floats, b: Floats, margin: float) -> Bools:
    """Whether pairs of triangles, (corner, coordinate, pair) arrays, are nowhere apart by more than the margin."""
    together = np.empty(a.shape[-1], dtype=np.bool_)
    for at in range(0, len(together), _CHUNK):
        piece = slice(at, at + _CHUNK)
        together[piece] = _not_separated(a[..., piece], b[..., piece], margin)
    return together


def _not_separated(a: Floats, b: Floats, margin: float) -> Bools:
    # Relative to a corner of the pair, so that a body far from the origin keeps its digits.
    origin = a[0]
    a, b = a - origin, b - origin
    reach = np.maximum(np.abs(a).max(axis=(0, 1)), np.abs(b).max(axis=(0, 1)))
    slack = margin + _ROUNDING * reach
    alive = np.arange(a.shape[-1])
    for axis_number in range(17):
        axis = _axis(axis_number, a, b)
        length = np.sqrt(axis[0] ** 2 + axis[1] ** 2 + axis[2] ** 2)
        pa = axis[0] * a[:, 0] + axis[1] * a[:, 1] + axis[2] * a[:, 2]
        pb = axis[0] * b[:, 0] + axis[1] * b[:, 1] + axis[2] * b[:, 2]
        gap = np.maximum(pa.min(axis=0) - pb.max(axis=0), pb.min(axis=0) - pa.max(axis=0))
        kept = gap <= slack * length
        if not kept.all():
            a, b, slack, alive = a[..., kept], b[..., kept], slack[kept], alive[kept]
    together = np.zeros(origin.shape[-1], dtype=np.bool_)
    together[alive] = True
    return together


def _axis(number: int, a: Floats, b: Floats) -> Floats:
    """One of the seventeen axes along which two triangles can be apart, not of unit length.

    0 and 1: the normals; 2 to 7: normals to an edge within its triangle's plane; 8 to 16: products of two edges.
    """
    if number < 2:
        triangle = (a, b)[number]
        return _cross(_edge(triangle, 0), _edge(triangle, 1))
    if number < 8:
        triangle = (a, b)[number % 2]
        return _cross(_cross(_edge(triangle, 0), _edge(triangle, 1)), _edge(triangle, (number - 2) // 2))
    return _cross(_edge(a, (number - 8) // 3), _edge(b, (number - 8) % 3))


def _edge(triangle: Floats, number: int) -> Floats:
    return np.asarray(triangle[(number + 1) % 3] - triangle[number])


def _cross(u: Floats, v: Floats) -> Floats:
    return np.stack([u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]])
