"""Shells: the closed pieces of skin in one surface, and how they lie in each other."""

from __future__ import annotations

from dataclasses import dataclass, replace

import numpy as np

from meshlure.geometry.surface import Floats, Ints, Surface
from meshlure.geometry.topology import EdgePairs, Ints32

_CHUNK = 32768
_FLAT = 1e-12

FLAT_SHARE = 1e-7
"""Volume over area to the power 3/2 below which a shell is two skins laid on each other; a ball has 0.094."""


@dataclass(frozen=True, eq=False)
class Shell:
    """A closed piece of skin.

    Attributes
    ----------
    surface : Surface
    volume : float
        Enclosed volume, m3; negative where the faces look inwards.
    area : float
        Area of its faces, m2.
    bounds : (2, 3) array, m
    faces : (m,) array
        Its faces' numbers in the surface that it is a part of.
    around : tuple of int
        The shells that it lies inside of, the outermost first.
    """

    surface: Surface
    volume: float
    area: float
    bounds: Floats
    faces: Ints
    around: tuple[int, ...] = ()

    @property
    def depth(self) -> int:
        """In how many other shells it lies."""
        return len(self.around)

    @property
    def parent(self) -> int | None:
        """The innermost shell around it."""
        return self.around[-1] if self.around else None

    @property
    def reversed(self) -> bool:
        """Whether its faces look inwards: a cavity, if it lies in something solid."""
        return self.volume < 0

    @property
    def flat(self) -> bool:
        """Whether it encloses nothing but rounding."""
        return abs(self.volume) <= FLAT_SHARE * self.area * float(np.sqrt(self.area))

    @property
    def centre(self) -> Floats:
        """Middle of its bounds, (3,) array, m."""
        return np.asarray(self.bounds.mean(axis=0))

    def turned(self) -> Shell:
        """Return the shell with its faces looking the other way."""
        return replace(self, surface=self.surface.turned(), volume=-self.volume)


def enclosed_volume(surface: Surface) -> float:
    """Volume, m3, that a closed surface encloses: the integral of its winding number.

    Notes
    -----
    Sum of the tetrahedra between the faces and the middle of the bounds (divergence theorem).
    """
    return float(measures(surface)[0].sum())


def split(surface: Surface, pairs: EdgePairs, measured: tuple[Floats, Floats] | None = None) -> tuple[Shell, ...]:
    """Shells of a closed surface, the largest volume first, without their nesting.

    Parameters
    ----------
    surface : Surface
        Closed and consistently wound.
    pairs : EdgePairs
        Its edges. Faces that are paired along an edge belong together, faces that share only a vertex do not.
    measured : pair of (m,) arrays, optional
        What `measures` says of the surface, where that is already known.
    """
    from scipy.sparse import csr_array
    from scipy.sparse.csgraph import connected_components

    count = len(surface.faces)
    links = np.ones(len(pairs.start), dtype=np.int8)
    graph = csr_array((links, (pairs.forward_face, pairs.backward_face)), shape=(count, count))
    found, labels = connected_components(graph, directed=False)
    volumes, areas = measures(surface) if measured is None else measured
    if found == 1:
        return (_whole(surface, float(volumes.sum()), float(areas.sum())),)
    enclosed, skin = np.bincount(labels, weights=volumes), np.bincount(labels, weights=areas)
    faces = _members(labels, found)
    numbers = np.empty(len(surface.vertices), dtype=np.intp)
    shells = []
    for label in np.lexsort((np.arange(found), -np.abs(enclosed))):
        part = _part(surface, faces[label], numbers)
        shells.append(Shell(part, float(enclosed[label]), float(skin[label]), extent(part.vertices), faces[label]))
    return tuple(shells)


def extent(points: Floats) -> Floats:
    """Least and greatest coordinates of (n, 3) points, (2, 3) array, m."""
    # By columns: the reduction of rows of three is many times slower.
    columns = [np.ascontiguousarray(points[:, axis]) for axis in range(3)]
    return np.array([[column.min() for column in columns], [column.max() for column in columns]])


def boxes_meet(shells: tuple[Shell, ...]) -> Ints:
    """(k, 2) array of the pairs of shells whose bounds meet, the lower number first."""
    bounds = np.array([shell.bounds for shell in shells]).reshape(-1, 2, 3)
    pairs = [np.empty((0, 2), dtype=np.intp)]
    for number, (low, high) in enumerate(bounds):
        later = bounds[number + 1 :]
        others = np.flatnonzero((later[:, 0] <= high).all(axis=1) & (low <= later[:, 1]).all(axis=1)) + number + 1
        pairs.append(np.stack([np.full(len(others), number), others], axis=1))
    return np.concatenate(pairs)


def winding_number(surface: Surface, point: Floats) -> float:
    """How many times a closed surface goes round a point: 1 inside, 0 outside, a part of 1 on the surface.

    Parameters
    ----------
    surface : Surface
    point : (3,) array, m

    Notes
    -----
    The solid angles of all faces, seen from the point, over 4 pi.

    References
    ----------
    A. van Oosterom, J. Strackee (1983), The solid angle of a plane triangle, IEEE Trans. Biomed. Eng. 30(2), eq. 8.
    """
    rays = surface.vertices.T - np.asarray(point, dtype=np.float64)[:, None]
    lengths = np.sqrt((rays**2).sum(axis=0))
    total = 0.0
    for at in range(0, len(surface.faces), _CHUNK):
        a, b, c = surface.faces[at : at + _CHUNK].T
        (ax, ay, az), (bx, by, bz), (cx, cy, cz) = rays[:, a], rays[:, b], rays[:, c]
        la, lb, lc = lengths[a], lengths[b], lengths[c]
        triple = ax * (by * cz - bz * cy) + ay * (bz * cx - bx * cz) + az * (bx * cy - by * cx)
        product = la * lb * lc
        below = (
            product
            + (ax * bx + ay * by + az * bz) * lc
            + (bx * cx + by * cy + bz * cz) * la
            + (cx * ax + cy * ay + cz * az) * lb
        )
        # A face that holds the point subtends a half-space, but on which side is a matter of rounding: it is left out.
        holds = (np.abs(triple) <= _FLAT * product) & (below <= _FLAT * product)
        total += float(np.arctan2(triple, below)[~holds].sum())
    return total / (2 * np.pi)


def measures(surface: Surface) -> tuple[Floats, Floats]:
    """Per face the signed volume, m3, of its tetrahedron with the middle of the vertices' bounds, and its area, m2."""
    volumes, areas = np.empty(len(surface.faces)), np.empty(len(surface.faces))
    if not len(surface.faces):
        return volumes, areas
    middle = extent(surface.vertices).mean(axis=0)
    # One row per coordinate and a piece of the faces at a time: the numbers of a piece stay in the processor's cache.
    vertices = np.ascontiguousarray((surface.vertices - middle).T)
    for at in range(0, len(surface.faces), _CHUNK):
        piece = slice(at, at + _CHUNK)
        (ax, ay, az), (bx, by, bz), (cx, cy, cz) = (vertices[:, corner] for corner in surface.faces[piece].T)
        bx, by, bz, cx, cy, cz = bx - ax, by - ay, bz - az, cx - ax, cy - ay, cz - az
        nx, ny, nz = by * cz - bz * cy, bz * cx - bx * cz, bx * cy - by * cx
        volumes[piece] = (ax * nx + ay * ny + az * nz) / 6
        areas[piece] = np.sqrt(nx * nx + ny * ny + nz * nz) / 2
    return volumes, areas


def _whole(surface: Surface, volume: float, area: float) -> Shell:
    used = np.zeros(len(surface.vertices), dtype=np.bool_)
    used[surface.faces.ravel()] = True
    vertices = surface.vertices if used.all() else surface.vertices[used]
    return Shell(surface, volume, area, extent(vertices), np.arange(len(surface.faces)))


def _members(labels: Ints32, count: int) -> list[Ints]:
    """Faces of every label, ascending."""
    if count <= 32:
        return [np.flatnonzero(labels == label) for label in range(count)]
    return np.split(np.argsort(labels, kind="stable"), np.cumsum(np.bincount(labels))[:-1])


def _part(surface: Surface, faces: Ints, numbers: Ints) -> Surface:
    """Return a part of a surface with only its own vertices; `numbers` is room for one number per vertex."""
    named = surface.faces[faces]
    if len(named) * 3 < len(numbers) // 8:
        used = np.unique(named)
    else:
        flags = np.zeros(len(numbers), dtype=np.bool_)
        flags[named.ravel()] = True
        used = np.flatnonzero(flags)
    numbers[used] = np.arange(len(used))
    return Surface(surface.vertices[used], numbers[named])
