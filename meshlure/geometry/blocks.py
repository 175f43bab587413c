"""A block index of a closed surface: cuts it by any plane at the cost of the blocks that the plane crosses."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from meshlure.geometry.surface import Bools, Floats, Ints, Surface
from meshlure.geometry.waterplane import Cut

BLOCK = 16
"""Triangles in a block: fewer make the list of blocks long, more make every crossed block dear."""

GROUP = 32
"""Blocks in a group: groups are tested first, and only the blocks of a crossed group one by one."""

_SUMS = 20
"""Numbers summed over a block: D, N (3), D s (3), N s^T (9), and the coat's volume and first moment (1 + 3)."""

_CURVE_BITS = 10


def curve_order(points: Floats) -> Ints:
    """Return the order of points along a Morton (Z-order) curve, so that neighbours in space become neighbours in memory.

    Parameters
    ----------
    points : (n, 3) array

    References
    ----------
    G. M. Morton (1966), A computer oriented geodetic data base, IBM Ottawa.
    """
    low = points.min(axis=0)
    span = np.maximum(points.max(axis=0) - low, np.finfo(np.float64).tiny)
    code = np.zeros(len(points), dtype=np.uint32)
    for axis in range(3):
        cell = ((points[:, axis] - low[axis]) * ((2**_CURVE_BITS - 1) / span[axis])).astype(np.uint32)
        # Spread ten bits so that two free bits follow each.
        cell = (cell | (cell << 16)) & np.uint32(0x030000FF)
        cell = (cell | (cell << 8)) & np.uint32(0x0300F00F)
        cell = (cell | (cell << 4)) & np.uint32(0x030C30C3)
        cell = (cell | (cell << 2)) & np.uint32(0x09249249)
        code |= cell << np.uint32(axis)
    return np.argsort(code, kind="stable")


@dataclass(frozen=True, eq=False)
class _Boxes:
    """Boxes with the integral sums of what they hold."""

    middle: Floats
    half: Floats
    sums: Floats

    @classmethod
    def of(cls, low: Floats, high: Floats, sums: Floats) -> _Boxes:
        return cls((low + high) / 2, (high - low) / 2, sums)

    def sides(self, normal: Floats, height: float, rows: Ints | None = None) -> tuple[Bools, Bools]:
        """Return which boxes lie wholly below a plane, and which the plane may cross."""
        middle = (self.middle if rows is None else self.middle[rows]) @ normal - height
        half = (self.half if rows is None else self.half[rows]) @ np.abs(normal)
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
        a, b, c = (vertices[surface.faces[:, corner]] for corner in range(3))
        order = curve_order(a + b + c)
        groups = -(-len(order) // (BLOCK * GROUP))
        padded = groups * GROUP * BLOCK
        rows = np.empty((13, padded))
        for corner, points in enumerate((a, b, c)):
            for axis in range(3):
                rows[3 * corner + axis, : len(order)] = points[order, axis]
        rows[:9, len(order):] = np.tile(rows[:3, len(order) - 1], 3)[:, None]
        ab, ac = rows[3:6] - rows[:3], rows[6:9] - rows[:3]
        for axis in range(3):
            j, k = (axis + 1) % 3, (axis + 2) % 3
            rows[9 + axis] = ab[j] * ac[k] - ab[k] * ac[j]
        rows[12] = 0.0
        coated = thickness is not None and bool(np.any(thickness))
        if coated:
            rows[12, : len(order)] = np.asarray(thickness, dtype=np.float64)[order]
        sums = _sums(rows, coated)
        boxed = rows[:9].reshape(3, 3, -1, BLOCK)
        low, high = boxed.min(axis=(0, 3)).T, boxed.max(axis=(0, 3)).T
        return cls(
            origin=origin,
            triangles=np.ascontiguousarray(rows.reshape(13, -1, BLOCK).transpose(1, 0, 2)),
            blocks=_Boxes.of(low, high, sums),
            groups=_Boxes.of(
                low.reshape(groups, GROUP, 3).min(axis=1),
                high.reshape(groups, GROUP, 3).max(axis=1),
                sums.reshape(groups, GROUP, _SUMS).sum(axis=1),
            ),
            total=sums.sum(axis=0),
            coated=coated,
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

        h = np.stack([_dot(n, rows[3 * corner : 3 * corner + 3]) - local for corner in range(3)])
        wet = h < 0
        count = wet[0].view(np.int8) + wet[1].view(np.int8) + wet[2].view(np.int8)
        whole = rows[:, count >= 2]
        mixed = (count == 1) | (count == 2)
        tips = _Tips.of(rows[:, mixed], h[:, mixed], wet[:, mixed], count[mixed] == 1)
        for corners, normals, share, skin in (
            ((whole[0:3], whole[3:6], whole[6:9]), whole[9:12], None, whole[12]),
            ((tips.apex, tips.first, tips.second), tips.normals, tips.share, tips.thickness),
        ):
            first = corners[0] - apex[:, None]
            s = first + (corners[1] - apex[:, None]) + (corners[2] - apex[:, None])
            det = first[0] * normals[0] + first[1] * normals[1] + first[2] * normals[2]
            if share is not None:
                det = det * share
            volume += det.sum() / 6
            moment = moment + s @ det / 24
            if self.coated:
                strip = skin * np.sqrt(_dot_rows(normals)) / 2
                if share is not None:
                    strip = strip * share
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
            start=start.T + self.origin,
            end=end.T + self.origin,
            ribbon=_ribbon(tips.thickness, tips.normals, n) if self.coated else None,
        )

    def _gathered(self, n: Floats, local: float) -> tuple[Floats, Floats]:
        """Sums of all blocks wholly below the plane, and the triangles of those it may cross, (13, k)."""
        below, crossed = self.groups.sides(n, local)
        sums = below.astype(np.float64) @ self.groups.sums
        inside = (np.flatnonzero(crossed)[:, None] * GROUP + np.arange(GROUP)).reshape(-1)
        below, crossed = self.blocks.sides(n, local, inside)
        return sums + self.blocks.sums[inside[below]].sum(axis=0), _rows(self.triangles[inside[crossed]])


def _rows(triangles: Floats) -> Floats:
    return triangles.transpose(1, 0, 2).reshape(13, -1)


def _dot(n: Floats, rows: Floats) -> Floats:
    return np.asarray(n[0] * rows[0] + n[1] * rows[1] + n[2] * rows[2])


def _dot_rows(rows: Floats) -> Floats:
    return np.asarray(rows[0] ** 2 + rows[1] ** 2 + rows[2] ** 2)


def _sums(rows: Floats, coated: bool) -> Floats:
    """Integral sums of every block, (b, 20)."""
    sums = np.zeros((rows.shape[1] // BLOCK, _SUMS))

    def put(column: int, values: Floats) -> None:
        sums[:, column] = values.reshape(-1, BLOCK).sum(axis=1)

    normals = rows[9:12]
    s = rows[0:3] + rows[3:6] + rows[6:9]
    det = rows[0] * normals[0] + rows[1] * normals[1] + rows[2] * normals[2]
    put(0, det)
    for i in range(3):
        put(1 + i, normals[i])
        put(4 + i, det * s[i])
        for j in range(3):
            put(7 + 3 * i + j, normals[i] * s[j])
    if coated:
        volume = rows[12] * np.sqrt(_dot_rows(normals)) / 2
        put(16, volume)
        for i in range(3):
            put(17 + i, volume * s[i] / 3)
    return sums


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
    def of(cls, rows: Floats, h: Floats, wet: Bools, one_wet: Bools) -> _Tips:
        lone = np.argmax(wet == one_wet, axis=0)
        columns = np.arange(rows.shape[1])
        ahead, behind = (lone + 1) % 3, (lone + 2) % 3
        tip = h[lone, columns]
        first = tip / (tip - h[ahead, columns])
        second = tip / (tip - h[behind, columns])
        corners = rows[:9].reshape(3, 3, -1)
        apex = corners[lone, :, columns].T
        return cls(
            apex=apex,
            first=apex + first * (corners[ahead, :, columns].T - apex),
            second=apex + second * (corners[behind, :, columns].T - apex),
            share=first * second * np.where(one_wet, 1.0, -1.0),
            normals=rows[9:12],
            thickness=rows[12],
        )


def _ribbon(thickness: Floats, normals: Floats, plane: Floats) -> Floats:
    """Width of the coat's own section with a plane across each face, m: thickness over the sine between them."""
    length = np.sqrt(_dot_rows(normals))
    cosine = _dot(plane, normals) / np.where(length == 0, 1.0, length)
    # A face that lies in the plane would have a ribbon without end; 1e-6 of a radian stands for it.
    return np.asarray(thickness / np.sqrt(np.maximum(1 - cosine**2, 1e-12)))
