"""Closed, outward surfaces whose exact shape is known; their vertices lie on it, so that facets are the only error."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
import trimesh
from scipy.spatial.transform import Rotation

from meshlure.geometry.surface import Floats, Ints, Surface


def sphere(radius: float, level: int) -> Surface:
    """Geodesic sphere about the origin, 20 * 4**level faces."""
    mesh = trimesh.creation.icosphere(subdivisions=level, radius=radius)
    return Surface(np.asarray(mesh.vertices), np.asarray(mesh.faces))


def ellipsoid(semi_axes: Sequence[float], level: int) -> Surface:
    """Ellipsoid about the origin, a geodesic sphere stretched."""
    ball = sphere(1.0, level)
    return Surface(ball.vertices * np.asarray(semi_axes), ball.faces)


def box(size: Sequence[float], centre: Sequence[float] = (0.0, 0.0, 0.0), level: int = 0) -> Surface:
    """Box along the axes; every level cuts each face in four."""
    mesh = trimesh.creation.box(extents=size)
    for _ in range(level):
        mesh = mesh.subdivide()
    return Surface(np.asarray(mesh.vertices) + np.asarray(centre), np.asarray(mesh.faces))


def revolved(radius: Sequence[float] | Floats, height: Sequence[float] | Floats, around: int) -> Surface:
    """Solid of revolution about z between rings of ascending height; ends with a radius are closed by discs."""
    r, z = np.asarray(radius, dtype=np.float64), np.asarray(height, dtype=np.float64)
    turn = 2 * np.pi * np.arange(around) / around
    circle = np.column_stack([np.cos(turn), np.sin(turn), np.ones(around)])
    rings = [circle * (q, q, h) for q, h in zip(r, z, strict=True) if q > 0]
    vertices = np.vstack([*rings, [[0.0, 0.0, z[0]]], [[0.0, 0.0, z[-1]]]])
    bottom, top, last = len(vertices) - 2, len(vertices) - 1, (len(rings) - 1) * around
    k = np.arange(around)
    after = (k + 1) % around
    faces = [
        np.column_stack([np.full(around, bottom), after, k]),
        np.column_stack([np.full(around, top), last + k, last + after]),
    ]
    for ring in range(len(rings) - 1):
        low, high = ring * around, (ring + 1) * around
        faces.append(np.column_stack([low + k, low + after, high + after]))
        faces.append(np.column_stack([low + k, high + after, high + k]))
    return Surface(vertices, np.vstack(faces))


def cylinder(radius: float, length: float, around: int, along: int = 1) -> Surface:
    """Circular cylinder along z, its middle at the origin."""
    return revolved(np.full(along + 1, radius), np.linspace(-length / 2, length / 2, along + 1), around)


def cone(radius: float, height: float, around: int) -> Surface:
    """Cone with its apex at the origin and its base above, at z = height."""
    return revolved([0.0, radius], [0.0, height], around)


def paraboloid(p: float, height: float, rings: int) -> Surface:
    """The segment r^2 = p z up to z = height, apex at the origin; rings evenly spread in radius."""
    r = np.linspace(0.0, np.sqrt(p * height), rings + 1)
    return revolved(r, r**2 / p, 4 * rings)


def torus(ring: float, tube: float, across: int) -> Surface:
    """Torus about z: tube round a circle of radius ``ring``."""
    around = 3 * across
    u, v = np.meshgrid(2 * np.pi * np.arange(around) / around, 2 * np.pi * np.arange(across) / across, indexing="ij")
    reach = ring + tube * np.cos(v)
    points = np.stack([reach * np.cos(u), reach * np.sin(u), tube * np.sin(v)], axis=-1).reshape(-1, 3)
    return Surface(points, _wrapped(around, across))


def _wrapped(around: int, across: int) -> Ints:
    i, j = np.meshgrid(np.arange(around), np.arange(across), indexing="ij")
    a, b = i * across + j, (i + 1) % around * across + j
    c, d = (i + 1) % around * across + (j + 1) % across, i * across + (j + 1) % across
    return np.concatenate([np.stack([a, b, c], -1).reshape(-1, 3), np.stack([a, c, d], -1).reshape(-1, 3)])


def wigley(length: float, beam: float, draught: float, freeboard: float, cells: int) -> Surface:
    """Wigley's hull, y = B/2 (1 - (2x/L)^2)(1 - (z/T)^2) below z = 0, with upright sides and a deck above.

    Cells along the length, half as many in the depth; keel and stems are folds without width.
    """
    x = np.linspace(-length / 2, length / 2, cells + 1)
    z = np.append(np.linspace(-draught, 0.0, cells // 2 + 1), freeboard)
    half = beam / 2 * np.outer(1 - (2 * x / length) ** 2, 1 - (np.minimum(z, 0.0) / draught) ** 2)
    place = np.stack([np.broadcast_to(x[:, None], half.shape), half, np.broadcast_to(z, half.shape)], axis=-1)
    left, right = place, place * (1, -1, 1)
    loose = [_sheet(right), _sheet(left)[:, ::-1]]
    deck = np.stack([right[:, -1], left[:, -1]], axis=1)
    loose.append(_sheet(deck))
    points = np.concatenate(loose).reshape(-1, 3)
    vertices, inverse = np.unique(points + 0.0, axis=0, return_inverse=True)
    faces = inverse.reshape(-1, 3)
    kept = (faces[:, 0] != faces[:, 1]) & (faces[:, 1] != faces[:, 2]) & (faces[:, 2] != faces[:, 0])
    return Surface(vertices, faces[kept])


def _sheet(place: Floats) -> Floats:
    """Triangles of a grid of points, wound from its first direction to its second, (m, 3, 3)."""
    a, b, c, d = place[:-1, :-1], place[1:, :-1], place[1:, 1:], place[:-1, 1:]
    return np.concatenate([np.stack(t, axis=-2).reshape(-1, 3, 3) for t in ((a, b, c), (a, c, d))])


def lumpy(seed: int, level: int = 3, size: float = 0.02, depth: float = 0.35) -> Surface:
    """A knobbly star-shaped body without any symmetry: not convex, no plane of it special."""
    ball = sphere(1.0, level)
    random = np.random.default_rng(seed)
    reach = np.ones(len(ball.vertices))
    for _ in range(6):
        direction, phase = random.normal(size=3), random.uniform(0, 2 * np.pi)
        reach += depth / 6 * np.cos(2.5 * ball.vertices @ direction + phase)
    stretch = random.uniform(0.6, 1.6, 3)
    return Surface(ball.vertices * reach[:, None] * stretch * size + random.normal(size=3) * size, ball.faces)


def together(*surfaces: Surface) -> Surface:
    """Several shells as one surface."""
    shift = np.cumsum([0, *(len(surface.vertices) for surface in surfaces)])
    return Surface(
        np.vstack([surface.vertices for surface in surfaces]),
        np.vstack([surface.faces + start for surface, start in zip(surfaces, shift[:-1], strict=True)]),
    )


def shuffled(surface: Surface, seed: int) -> Surface:
    """The same triangles with vertices renumbered, faces reordered and their first corners changed."""
    random = np.random.default_rng(seed)
    new = random.permutation(len(surface.vertices))
    vertices = np.empty_like(surface.vertices)
    vertices[new] = surface.vertices
    faces = new[surface.faces][random.permutation(len(surface.faces))]
    start = random.integers(0, 3, len(faces))
    return Surface(vertices, np.take_along_axis(faces, (start[:, None] + np.arange(3)) % 3, axis=1))


def as_trimesh(surface: Surface) -> trimesh.Trimesh:
    """The surface for the general mesh library, which must not weld or reorder it."""
    return trimesh.Trimesh(surface.vertices, surface.faces, process=False)


def turn(seed: int) -> Floats:
    """A rotation matrix, any as likely as any other."""
    return np.asarray(Rotation.random(random_state=seed).as_matrix())


def direction(seed: int) -> Floats:
    """A unit vector, any as likely as any other."""
    vector = np.random.default_rng(seed).normal(size=3)
    return np.asarray(vector / np.linalg.norm(vector))


def order(errors: Sequence[float] | Floats, ratio: float = 2.0) -> Floats:
    """Order of convergence between meshes that are each ``ratio`` times finer than the one before."""
    e = np.abs(np.asarray(errors, dtype=np.float64))
    return np.asarray(np.log(e[:-1] / e[1:]) / np.log(ratio))
