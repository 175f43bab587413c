"""A block index of a closed surface: cuts it by any plane at the cost of the blocks that the plane crosses."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from meshlure.geometry.surface import Bools, Floats, Ints, Surface
from meshlure.geometry.waterplane import Cut

Bytes = NDArray[np.int8]

BLOCK = 16
"""Triangles in a block: fewer make the list of blocks long, more make every crossed block dear."""

GROUP = 32
"""Blocks in a group: groups are tested first, and only the blocks of a crossed group one by one."""

_ROWS = 13
"""Numbers kept of a triangle; see `BlockIndex.triangles`."""

_SUMS = 20
"""Numbers summed over a block: D, N (3), D s (3), N s^T (9), and the coat's volume and first moment (1 + 3)."""

_CURVE_BITS = 10

_SLACK = 16 * np.finfo(np.float64).eps
"""Share of the greatest coordinate by which boxes reach beyond their triangles: what rounding does to heights."""

_AT_ONCE = 1024
"""Blocks worked on at a time while an index is built, so that their numbers stay in the processor's cache."""


def curve_order(points: Floats) -> Ints:
    """Return the order of points along a Morton (Z-order) curve: neighbours in space become neighbours in memory.

    Parameters
    ----------
    points : (n, 3) array

    References
    ----------
    G. M. Morton (1966), A computer oriented geodetic data base, IBM Ottawa.
    """
    code = np.zeros(len(points), dtype=np.uint32)
    if not len(points):
        return np.empty(0, dtype=np.intp)
    for axis in range(3):
        along = np.ascontiguousarray(points[:, axis])
        low = along.min()
        span = (along.max() - low) or 1.0
        cell = ((along - low) * ((2**_CURVE_BITS - 1) / span)).astype(np.uint32)
        # Spread ten bits so that two free bits follow each.
        cell = (cell | (cell << 16)) & np.uint32(0x030000FF)
        cell = (cell | (cell << 8)) & np.uint32(0x0300F00F)
        cell = (cell | (cell << 4)) & np.uint32(0x030C30C3)
        cell = (cell | (cell << 2)) & np.uint32(0x09249249)
        code |= cell << np.uint32(axis)
    # A plain sort of code and number in one word is several times faster than an indirect one.
    bits = np.uint64(max(len(points) - 1, 1).bit_length())
    words = code.astype(np.uint64) << bits
    words |= np.arange(len(points), dtype=np.uint64)
    words.sort()
    return (words & np.uint64((1 << int(bits)) - 1)).astype(np.intp)


@dataclass(frozen=True, eq=False)
class _Boxes:
    """Boxes with the integral sums of what they hold."""

    middle: Floats
    half: Floats
    sums: Floats

    @classmethod
    def of(cls, low: Floats, high: Floats, sums: Floats) -> _Boxes:
        # A corner on the plane falls to one side by rounding; its box must not fall to the other.
        slack = _SLACK * max(float(np.abs(low).max()), float(np.abs(high).max()))
        return cls((low + high) / 2, (high - low) / 2 + slack, sums)

    def sides(self, normal: Floats, height: float, rows: Ints | None = None) -> tuple[Bools, Bools]:
        """Return which boxes lie wholly below a plane, and which the plane may cross."""
        middle = (self.middle if rows is None else self.middle.take(rows, axis=0)) @ normal - height
        half = (self.half if rows is None else self.half.take(rows, axis=0)) @ np.abs(normal)
        return middle < -half, np.abs(middle) <= half


@dataclass(frozen=True, eq=False)
class BlockIndex:
    """Triangles of a closed surface in blocks of neighbours, each with its bounds and integral sums.

    Attributes
    ----------
    origin : (3,) array, m
        Middle of the bounds; everything inside is kept relative to it, so that a body far from the
        origin of its coordinates loses no digits.
    triangles : (b, 13, 16) array
        Per block and row one number of each of its triangles: nine corner coordinates (m), the three
        of (b - a) x (c - a) (m2), the thickness of a coat (m). The last blocks are filled up with triangles of no size.
    blocks, groups : boxes
        Bounds and integral sums of the blocks, and of groups of neighbouring blocks.
    total : (20,) array
        The sums over everything.
    coated : bool
        Whether any face has a coat.
    """

    origin: Floats
    triangles: Floats
    blocks: _Boxes
    groups: _Boxes
    total: Floats
    coated: bool

    @classmethod
    def build(cls, surface: Surface, thickness: Floats | None = None) -> BlockIndex:
        """Return the index of a closed surface.

        Parameters
        ----------
        surface : Surface
            Closed and consistently wound; on anything else the volumes mean nothing.
        thickness : (m,) array, m, optional
            Thickness of a thin coat on each face.
        """
        origin = np.asarray(surface.bounds.mean(axis=0))
        vertices = surface.vertices - origin
        order = curve_order(_middles(vertices, surface.faces))
        coat = None if thickness is None or not np.any(thickness) else np.asarray(thickness, dtype=np.float64)
        groups = -(-len(order) // (BLOCK * GROUP))
        count = groups * GROUP
        triangles = np.empty((count, _ROWS, BLOCK))
        low, high, sums = np.empty((count, 3)), np.empty((count, 3)), np.empty((count, _SUMS))
        for at in range(0, count, _AT_ONCE):
            piece = slice(at, min(at + _AT_ONCE, count))
            named = order[piece.start * BLOCK : piece.stop * BLOCK]
            rows = np.zeros((_ROWS, (piece.stop - piece.start) * BLOCK))
            rows[:9, : len(named)] = vertices.take(surface.faces.take(named, axis=0), axis=0).reshape(-1, 9).T
            rows[:9, len(named) :] = np.tile(vertices[surface.faces[order[-1], 0]], 3)[:, None]
            if coat is not None:
                rows[12, : len(named)] = coat[named]
            _put_normals(rows)
            low[piece], high[piece] = _bounds(rows)
            sums[piece] = _sums(rows, coat is not None)
            triangles[piece] = rows.reshape(_ROWS, -1, BLOCK).transpose(1, 0, 2)
        return cls(
            origin=origin,
            triangles=triangles,
            blocks=_Boxes.of(low, high, sums),
            groups=_Boxes.of(
                low.reshape(groups, GROUP, 3).min(axis=1),
                high.reshape(groups, GROUP, 3).max(axis=1),
                sums.reshape(groups, GROUP, _SUMS).sum(axis=1),
            ),
            total=sums.sum(axis=0),
            coated=coat is not None,
        )

    @property
    def volume(self) -> float:
        """Volume enclosed, without any coat, m3."""
        return float(self.total[0] / 6)

    @property
    def moment(self) -> Floats:
        """First moment of the enclosed volume about the mesh origin, (3,) array, m4."""
        return np.asarray(self.total[4:7] / 24 + self.origin * self.volume)

    @property
    def coat_volume(self) -> float:
        """Volume of the whole coat, m3."""
        return float(self.total[16])

    @property
    def coat_moment(self) -> Floats:
        """First moment of the whole coat about the mesh origin, (3,) array, m4."""
        return np.asarray(self.total[17:20] + self.origin * self.coat_volume)

    def reach(self, normal: Floats) -> tuple[float, float]:
        """Return the least and greatest height of the surface along a direction, m.

        Parameters
        ----------
        normal : (3,) array
            Unit vector.
        """
        n = np.asarray(normal, dtype=np.float64)
        shift = float(self.origin @ n)
        return shift - self._highest(-n), shift + self._highest(n)

    def _extent(self) -> float:
        """Greatest extent along an axis, m."""
        return 2 * float((np.abs(self.groups.middle) + self.groups.half).max())

    def _highest(self, n: Floats) -> float:
        middle, half = self.blocks.middle @ n, self.blocks.half @ np.abs(n)
        # Every box holds a corner at or above its bottom, so only boxes reaching over the best bottom matter.
        rows = _rows(self.triangles[middle + half >= (middle - half).max()])
        return max(float(_dot(n, rows[3 * corner : 3 * corner + 3]).max()) for corner in range(3))

    def cut(self, normal: Floats, height: float) -> Cut:
        """Return the part of the enclosed volume below a plane, and the plane's section.

        Parameters
        ----------
        normal : (3,) array
            Unit vector; "below" is against it.
        height : float, m
            The plane is ``normal . x = height`` in mesh coordinates.

        Notes
        -----
        Every triangle, clipped to the plane's lower side, spans a tetrahedron with an apex on the
        plane; the cap needs no triangles, since its tetrahedra have no height. Blocks wholly below
        add their sums, crossed ones are clipped triangle by triangle. A corner on the plane counts
        as above it. Exact up to rounding for a closed surface, of any shape.
        """
        n = np.asarray(normal, dtype=np.float64)
        local = float(height - self.origin @ n)
        apex = n * local
        sums, rows = self._gathered(n, local)
        w = sums[0] - apex @ sums[1:4]
        volume = w / 6
        moment = (sums[4:7] - apex @ sums[7:16].reshape(3, 3) - 3 * apex * w) / 24
        coat, coat_moment = float(sums[16]), sums[17:20].copy()

        rows[:9] -= np.tile(apex, 3)[:, None]
        # Term by term, not by a matrix product, whose rounding may differ from column to column: a vertex must stand
        # at one height in all its triangles.
        h = np.stack([_dot(n, rows[3 * corner : 3 * corner + 3]) for corner in range(3)])
        wet = (h < 0).view(np.int8)
        which = wet[0] + 2 * wet[1] + 4 * wet[2]
        tips = _Tips.of(rows, h, which)
        # A triangle mostly below counts whole; its tip, or that of one mostly above, by its signed share.
        for corners, normals, share, skin in (
            ((rows[0:3], rows[3:6], rows[6:9]), rows[9:12], _MOSTLY_WET[which], rows[12]),
            ((tips.apex, tips.first, tips.second), tips.normals, tips.share, tips.thickness),
        ):
            s = corners[0] + corners[1] + corners[2]
            det = _dot(corners[0], normals) * share
            volume += det.sum() / 6
            moment = moment + s @ det / 24
            if self.coated:
                strip = skin * np.sqrt(_dot(normals, normals)) * share / 2
                coat += strip.sum()
                coat_moment = coat_moment + s @ strip / 3 + apex * strip.sum()
        moment = moment + apex * volume
        start, end = np.where(tips.share > 0, (tips.second, tips.first), (tips.first, tips.second))
        return Cut(
            normal=n,
            height=float(height),
            volume=float(volume),
            moment=moment + self.origin * volume,
            coat_volume=float(coat),
            coat_moment=coat_moment + self.origin * coat,
            start=start.T + (apex + self.origin),
            end=end.T + (apex + self.origin),
            ribbon=_ribbon(tips.thickness, tips.normals, n, self._extent()) if self.coated else None,
        )

    def _gathered(self, n: Floats, local: float) -> tuple[Floats, Floats]:
        """Return the sums of all blocks wholly below the plane, and the triangles of those it may cross, (13, k)."""
        below, crossed = self.groups.sides(n, local)
        sums = below.astype(np.float64) @ self.groups.sums
        inside = (np.flatnonzero(crossed)[:, None] * GROUP + np.arange(GROUP)).reshape(-1)
        below, crossed = self.blocks.sides(n, local, inside)
        wet = inside[below]
        sums += np.ones(len(wet)) @ self.blocks.sums.take(wet, axis=0)
        return sums, _rows(self.triangles.take(inside[crossed], axis=0))


def _rows(triangles: Floats) -> Floats:
    """Triangles of some blocks as rows, (13, k); a copy."""
    return triangles.transpose(1, 0, 2).reshape(_ROWS, -1)


def _dot(n: Floats, rows: Floats) -> Floats:
    return np.asarray(n[0] * rows[0] + n[1] * rows[1] + n[2] * rows[2])


def _middles(vertices: Floats, faces: Ints) -> Floats:
    """Three times the middle of every face, (m, 3)."""
    middles = np.empty((len(faces), 3))
    step = _AT_ONCE * BLOCK
    for at in range(0, len(faces), step):
        corners = vertices.take(faces[at : at + step], axis=0)
        np.add(corners[:, 0], corners[:, 1], out=middles[at : at + step])
        middles[at : at + step] += corners[:, 2]
    return middles


def _put_normals(rows: Floats) -> None:
    ab, ac = rows[3:6] - rows[:3], rows[6:9] - rows[:3]
    for axis in range(3):
        j, k = (axis + 1) % 3, (axis + 2) % 3
        rows[9 + axis] = ab[j] * ac[k] - ab[k] * ac[j]


def _bounds(rows: Floats) -> tuple[Floats, Floats]:
    """Least and greatest corner of every block, (b, 3) arrays."""
    a, b, c = rows[:9].reshape(3, 3, -1, BLOCK)
    low, high = np.minimum(np.minimum(a, b), c), np.maximum(np.maximum(a, b), c)
    return low.min(axis=2).T, high.max(axis=2).T


def _sums(rows: Floats, coated: bool) -> Floats:
    """Integral sums of every block, (b, 20)."""
    sums = np.zeros((rows.shape[1] // BLOCK, _SUMS))

    def put(column: int, values: Floats) -> None:
        sums[:, column] = values.reshape(-1, BLOCK).sum(axis=1)

    normals = rows[9:12]
    s = rows[0:3] + rows[3:6] + rows[6:9]
    det = _dot(rows[0:3], normals)
    put(0, det)
    for i in range(3):
        put(1 + i, normals[i])
        put(4 + i, det * s[i])
        for j in range(3):
            put(7 + 3 * i + j, normals[i] * s[j])
    if coated:
        volume = rows[12] * np.sqrt(_dot(normals, normals)) / 2
        put(16, volume)
        for i in range(3):
            put(17 + i, volume * s[i] / 3)
    return sums


# By which corners are wet, corner i counting 2^i: the corner alone on its side, and whether it is the one that is wet.
_LONE = np.array([0, 0, 1, 2, 2, 1, 0, 0], dtype=np.intp)
_ONE_WET = np.array([0, 1, 1, 0, 1, 0, 0, 0], dtype=np.bool_)
_MOSTLY_WET = np.array([0, 0, 0, 1, 0, 1, 1, 1], dtype=np.float64)


@dataclass(frozen=True, eq=False)
class _Tips:
    """The corners that a plane cuts off from triangles.

    apex, first, second : (3, k) arrays, the lone corner and the two cut points in the face's turn.
    share : (k,) array, the tip's share of the face, positive where the tip is the wet part, else negative.
    """

    apex: Floats
    first: Floats
    second: Floats
    share: Floats
    normals: Floats
    thickness: Floats

    @classmethod
    def of(cls, rows: Floats, h: Floats, which: Bytes) -> _Tips:
        cut = np.flatnonzero((which > 0) & (which < 7))
        which = which[cut]
        lone = _LONE[which]
        width = rows.shape[1]
        axes = width * np.arange(3)[:, None]

        def corner(number: Ints) -> tuple[Floats, Floats]:
            return h.take(width * number + cut), rows.take(3 * width * number + cut + axes)

        height, apex = corner(lone)
        height_ahead, ahead = corner((lone + 1) % 3)
        height_behind, behind = corner((lone + 2) % 3)
        first = height / (height - height_ahead)
        second = height / (height - height_behind)
        return cls(
            apex=apex,
            first=apex + first * (ahead - apex),
            second=apex + second * (behind - apex),
            share=first * second * np.where(_ONE_WET[which], 1.0, -1.0),
            normals=rows[9:12].take(cut, axis=1),
            thickness=rows[12].take(cut),
        )


def _ribbon(thickness: Floats, normals: Floats, plane: Floats, extent: float) -> Floats:
    """Width of the coat's own section with a plane across each face, m: thickness over the sine between them."""
    length = np.sqrt(_dot(normals, normals))
    cosine = _dot(plane, normals) / np.where(length == 0, 1.0, length)
    # On a face that all but lies in the plane the ribbon ends with the face, at the latest with the body.
    return np.asarray(thickness / np.maximum(np.sqrt(np.maximum(1 - cosine**2, 0.0)), thickness / extent + 1e-12))
