"""Solids and filled outlines joined, cut and met exactly, by a manifold library whose every answer is checked."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

import manifold3d
import numpy as np

from meshlure import tolerances
from meshlure.geometry.fans import parted
from meshlure.geometry.shells import enclosed_volume
from meshlure.geometry.surface import Floats, Ints, Surface
from meshlure.geometry.topology import paired

_OUTLINE_SPAN = 100.0
"""Outlines are scaled to this size: the polygon library keeps eight decimals."""


_KEPT = 1e-11
"""Share of area times greatest coordinate by which the library's volume may differ: it merges closer vertices."""


class SolidError(Exception):
    """The solid library could not take a surface, or lost a result."""


@dataclass(frozen=True, eq=False)
class Solid:
    """A closed solid that can be joined, cut and met; every operation returns a new one.

    Attributes
    ----------
    kernel : manifold3d.Manifold
        Double precision, checked for its status.

    Notes
    -----
    An invalid mesh gives the library an empty solid of no volume, and a legal empty result looks
    the same, so the status is read after every step. The books of every operation are kept: what two solids share and
    what either has alone must add up to both, to a millionth of their volume and what the library's own rounding moves
    over their skins. Else the operation raises a `SolidError` instead of an answer.
    """

    kernel: manifold3d.Manifold

    def __post_init__(self) -> None:
        status = self.kernel.status()
        if status != manifold3d.Error.NoError:
            raise SolidError(f"the solid library answers {status.name}")

    @classmethod
    def of(cls, surface: Surface, tag: int | None = None) -> Solid:
        """Return the solid inside a closed surface.

        Parameters
        ----------
        surface : Surface
            Closed, consistently wound, outward.
        tag : int, optional
            From `new_tag`; faces of later results that stem from this surface are found by it.

        Raises
        ------
        SolidError
            Where the library rejects the mesh, or its volume differs from the mesh's.

        Notes
        -----
        Where more than two faces share an edge the library pairs them at random and loses volume without a word. The
        volume is therefore compared, and where it differs every fan of faces is given vertices of its own.
        """
        tag = new_tag() if tag is None else tag
        solid = _taken(surface, tag)
        if solid is None:
            solid = _taken(parted(surface, paired(surface)), tag)
        if solid is None:
            raise SolidError("the solid library does not take the mesh, or gives it another volume than it encloses")
        return solid

    @cached_property
    def volume(self) -> float:
        """Volume, m3."""
        return float(self.kernel.volume())

    @property
    def rounding(self) -> float:
        """Volume, m3, that the library's own rounding may move over the skin."""
        return 0.0 if self.empty else float(self.kernel.get_tolerance() * self.kernel.surface_area())

    @property
    def empty(self) -> bool:
        """Whether nothing is left."""
        return bool(self.kernel.is_empty())

    def joined(self, *others: Solid) -> Solid:
        """Return what lies in any of the solids.

        Raises
        ------
        SolidError
            Volume was lost or won.
        """
        if not others:
            return self
        rest = others[0].joined(*others[1:])
        made = Solid(self.kernel + rest.kernel)
        _balance("joining two solids", made.volume + self._shared(rest), self, rest)
        return made

    def less(self, *others: Solid) -> Solid:
        """Return what lies in this solid and in none of the others.

        Raises
        ------
        SolidError
            Volume was lost or won.
        """
        if not others:
            return self
        rest = others[0].joined(*others[1:])
        made = Solid(self.kernel - rest.kernel)
        _balance("cutting a solid", made.volume + self._shared(rest), self, moved=rest)
        return made

    def met(self, other: Solid) -> Solid:
        """Return what lies in both solids.

        Raises
        ------
        SolidError
            Volume was lost or won.
        """
        # The smaller one is held against what is left of it, which takes less time.
        few, many = sorted((self, other), key=lambda solid: int(solid.kernel.num_tri()))
        inside, outside = map(Solid, few.kernel.split(many.kernel))
        _balance("cutting what two solids share", inside.volume + outside.volume, few, moved=many)
        return inside

    def _shared(self, other: Solid) -> float:
        """Volume, m3, that both solids hold."""
        return Solid(self.kernel ^ other.kernel).volume if self._meets(other) else 0.0

    def _meets(self, other: Solid) -> bool:
        """Whether the bounds share space, or touch."""
        if self.empty or other.empty:
            return False
        one, two = self.bounds, other.bounds
        return bool((np.maximum(one[0], two[0]) <= np.minimum(one[1], two[1])).all())

    def parts(self) -> tuple[Solid, ...]:
        """Return the surfaces that do not touch each other; a cavity's has a negative volume."""
        return tuple(Solid(part) for part in self.kernel.decompose())

    def filled(self) -> Solid:
        """Return the solid with every space that it closes off filled."""
        parts = self.parts()
        outer = [part for part in parts if part.volume > 0]
        if len(outer) == len(parts):
            return self
        # A solid lying loose in a closed-off space is swallowed by the union.
        return outer[0].joined(*outer[1:])

    def split(self, normal: Floats, height: float) -> tuple[Solid, Solid]:
        """Return what lies above the plane ``normal . x = height`` (m, a unit normal) and what lies below it."""
        above, below = map(Solid, self.kernel.split_by_plane(tuple(normal), height))
        _balance("cutting a solid in two", above.volume + below.volume, self)
        return above, below

    def shifted(self, shift: Floats) -> Solid:
        """Return the solid moved by (3,) m."""
        return Solid(self.kernel.translate(tuple(float(way) for way in shift)))

    def level(self, height: float) -> Filled:
        """Return the section with the plane z = ``height``, m, seen from above."""
        # The library cuts what is a hair under the height, and keeps polygons to fewer digits than solids.
        scale = _OUTLINE_SPAN / max(float(np.ptp(self.bounds, axis=0).max()), np.finfo(np.float64).tiny)
        rings = self.kernel.scale((scale, scale, scale)).slice(height * scale).to_polygons()
        return Filled(tuple(np.asarray(ring) / scale for ring in rings))

    @property
    def bounds(self) -> Floats:
        """Least and greatest corner, (2, 3) array, m."""
        return np.reshape(np.asarray(self.kernel.bounding_box(), dtype=np.float64), (2, 3))

    @property
    def genus(self) -> int:
        """Handles of the skin, one for every way that a loop can be led through a solid in one piece."""
        return int(self.kernel.genus())

    def gap(self, other: Solid, search: float) -> float:
        """Return the least distance to another solid, m, at most ``search``."""
        return float(self.kernel.min_gap(other.kernel, search))

    def simplified(self, tolerance: float) -> Solid:
        """Return the solid with vertices merged that move its skin by less than ``tolerance``, m."""
        return Solid(self.kernel.simplify(tolerance))

    def grown(self, distance: float, rounding: int = 24) -> Solid:
        """Return the solid grown outward by a distance, m.

        Parameters
        ----------
        distance : float, m
            0 or more.
        rounding : int
            Sides of the ball that rolls over the solid; it stands outside the true ball, so that the gap is
            nowhere less than ``distance``.

        Notes
        -----
        Minkowski sum with a ball.
        """
        if distance == 0:
            return self
        ball = manifold3d.Manifold.sphere(distance, rounding)
        reach = float(np.linalg.norm(_inner_distance(Solid(ball))))
        return Solid(self.kernel.minkowski_sum(manifold3d.Manifold.sphere(distance**2 / reach, rounding)))

    def surface(self) -> Surface:
        """Return the solid's skin."""
        mesh = self.kernel.to_mesh64()
        return Surface(mesh.vert_properties[:, :3], mesh.tri_verts.astype(np.intp))

    def sources(self) -> Ints:
        """Return the tag of the surface that each face of `surface` stems from, (m,) array."""
        mesh = self.kernel.to_mesh64()
        starts: Ints = np.asarray(mesh.run_index, dtype=np.intp)
        return np.repeat(np.asarray(mesh.run_original_id, dtype=np.intp), (starts[1:] - starts[:-1]) // 3)


def _balance(what: str, found: float, *solids: Solid, moved: Solid | None = None) -> None:
    """Hold the volume that came out of an operation, m3, against what went in.

    Raises
    ------
    SolidError
    """
    expected = sum(solid.volume for solid in solids)
    off = found - expected
    if abs(off) <= tolerances.VOLUME_SHARE * expected:
        return
    rounded = (*solids, moved) if moved is not None else solids
    if not abs(off) <= tolerances.VOLUME_SHARE * expected + sum(solid.rounding for solid in rounded):
        raise SolidError(
            f"{what} changed their volume by {off * 1e9:.3g} mm3 of {expected * 1e9:.6g} mm3; "
            "up to a millionth of it is rounding"
        )


def _taken(surface: Surface, tag: int) -> Solid | None:
    """Solid of a surface as the library takes it; None where it does not, or where that has another volume."""
    mesh = manifold3d.Mesh64(
        vert_properties=np.array(surface.vertices),
        tri_verts=surface.faces.astype(np.uint64),
        run_index=np.array([0, 3 * len(surface.faces)], dtype=np.uint64),
        run_original_id=np.array([tag], dtype=np.uint32),
    )
    try:
        solid = Solid(manifold3d.Manifold(mesh))
    except SolidError:
        return None
    reach = float(np.abs(surface.vertices).max(initial=0.0))
    off = abs(solid.volume - enclosed_volume(surface))
    return solid if off <= _KEPT * surface.area * reach else None


def _inner_distance(ball: Solid) -> float:
    skin = ball.surface()
    normals = skin.double_areas
    return float(np.abs(np.einsum("ij,ij->i", skin.corners[:, 0], normals) / np.linalg.norm(normals, axis=1)).min())


def triangulated(ring: Floats) -> Ints:
    """Return triangles between the corners of a closed outline, (n - 2, 3) array of their numbers.

    Parameters
    ----------
    ring : (n, 2) array
        Anticlockwise, the first point not repeated. Where it crosses itself the triangles overlap.

    Notes
    -----
    The library's own way of cutting off ears: it takes outlines that wind round and round, of some thousands of
    corners, in seconds where other cutters take hours; the time goes with the square of the corners.
    """
    return np.asarray(manifold3d.triangulate([np.ascontiguousarray(ring)]), dtype=np.intp).reshape(-1, 3)


def new_tag() -> int:
    """Return a number by which a surface's faces can be told from others'."""
    return int(manifold3d.Manifold.reserve_ids(1))


@dataclass(frozen=True, eq=False)
class Filled:
    """A flat region filled from closed loops.

    Attributes
    ----------
    rings : tuple of (n, 2) arrays
        Outer boundaries anticlockwise, holes clockwise, free of crossings.
    """

    rings: tuple[Floats, ...]

    @property
    def area(self) -> float:
        """Area in the square of the rings' unit."""
        return sum(_ring_sums(ring)[0] for ring in self.rings)

    @property
    def centre(self) -> Floats:
        """Centroid, (2,) array; the origin where there is no area."""
        sums = [_ring_sums(ring) for ring in self.rings]
        area = sum(s[0] for s in sums)
        return np.asarray(sum((s[1] for s in sums), np.zeros(2)) / area) if area else np.zeros(2)

    @property
    def perimeter(self) -> float:
        """Length of all boundaries."""
        return sum(float(np.linalg.norm(np.roll(ring, -1, axis=0) - ring, axis=1).sum()) for ring in self.rings)


def _ring_sums(ring: Floats) -> tuple[float, Floats]:
    base = ring[0]
    p, q = ring - base, np.roll(ring, -1, axis=0) - base
    weight = (p[:, 0] * q[:, 1] - p[:, 1] * q[:, 0]) / 2
    area = float(weight.sum())
    return area, weight @ (p + q) / 3 + area * base


def filled(loops: Sequence[Floats]) -> Filled:
    """Return the region that closed loops wind round at least once in either direction (non-zero rule).

    Parameters
    ----------
    loops : sequence of (n, 2) arrays
        Closed, the first point not repeated; they may cross themselves and each other.
    """
    kept = [loop for loop in loops if len(loop) >= 3]
    if not kept:
        return Filled(())
    low = np.min([loop.min(axis=0) for loop in kept], axis=0)
    high = np.max([loop.max(axis=0) for loop in kept], axis=0)
    middle, scale = (low + high) / 2, _OUTLINE_SPAN / max(float((high - low).max()), np.finfo(np.float64).tiny)
    flat = manifold3d.CrossSection([(loop - middle) * scale for loop in kept], manifold3d.FillRule.NonZero)
    return Filled(tuple(np.asarray(ring) / scale + middle for ring in flat.to_polygons()))
