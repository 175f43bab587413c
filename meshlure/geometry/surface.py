"""A triangle surface: welded vertices and the faces between them."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Ints = NDArray[np.intp]
Bools = NDArray[np.bool_]

_AT_ONCE = 8192
"""Faces worked on at a time, so that their numbers stay in the processor's cache."""


@dataclass(frozen=True, eq=False)
class Surface:
    """Triangles that share vertices, outward by the right-hand rule.

    Attributes
    ----------
    vertices : (n, 3) array, m
    faces : (m, 3) array of vertex indices

    Notes
    -----
    Nothing is assumed about closedness; `geometry.soundness` finds that out. Arrays are set read-only.
    """

    vertices: Floats
    faces: Ints

    def __post_init__(self) -> None:
        vertices = np.ascontiguousarray(self.vertices, dtype=np.float64)
        faces = np.ascontiguousarray(self.faces, dtype=np.intp)
        if vertices.ndim != 2 or vertices.shape[1:] != (3,) or faces.ndim != 2 or faces.shape[1:] != (3,):
            raise ValueError(f"a surface takes (n, 3) vertices, (m, 3) faces, not {vertices.shape}, {faces.shape}")
        vertices.flags.writeable = False
        faces.flags.writeable = False
        object.__setattr__(self, "vertices", vertices)
        object.__setattr__(self, "faces", faces)

    @cached_property
    def corners(self) -> Floats:
        """(m, 3, 3) array, m: face, corner, coordinate."""
        corners = self.vertices.take(self.faces, axis=0)
        corners.flags.writeable = False
        return corners

    @cached_property
    def double_areas(self) -> Floats:
        """(m, 3) array, m2: per face (b - a) x (c - a), normal to it and twice its area long."""
        normals = np.empty((len(self.faces), 3))
        for at in range(0, len(self.faces), _AT_ONCE):
            corners = self.vertices.take(self.faces[at : at + _AT_ONCE], axis=0).transpose(1, 2, 0)
            u, v = corners[1] - corners[0], corners[2] - corners[0]
            for axis in range(3):
                j, k = (axis + 1) % 3, (axis + 2) % 3
                normals[at : at + _AT_ONCE, axis] = u[j] * v[k] - u[k] * v[j]
        normals.flags.writeable = False
        return normals

    @cached_property
    def area(self) -> float:
        """Area of all faces, m2."""
        return float(np.sqrt(np.einsum("ij,ij->i", self.double_areas, self.double_areas)).sum() / 2)

    @cached_property
    def bounds(self) -> Floats:
        """(2, 3) array, m: least and greatest corner."""
        named = np.zeros(len(self.vertices), dtype=np.bool_)
        named[self.faces] = True
        used = self.vertices if named.all() else self.vertices[named]
        return np.array([[along.min() for along in used.T], [along.max() for along in used.T]])

    def turned(self) -> Surface:
        """Return the same faces seen from the other side."""
        return Surface(self.vertices, self.faces[:, ::-1])

    def moved(self, rotation: Floats | None = None, shift: Floats | None = None, scale: float = 1.0) -> Surface:
        """Return the surface scaled, turned by a (3, 3) rotation matrix and then shifted by (3,) m."""
        vertices = self.vertices * scale
        if rotation is not None:
            vertices = vertices @ np.asarray(rotation, dtype=np.float64).T
        if shift is not None:
            vertices = vertices + np.asarray(shift, dtype=np.float64)
        return Surface(vertices, self.faces)


def together(*surfaces: Surface) -> Surface:
    """Return several surfaces as one; none of their vertices are welded."""
    shift = np.cumsum([0, *(len(surface.vertices) for surface in surfaces)])
    faces = [surface.faces + start for surface, start in zip(surfaces, shift, strict=False)]
    return Surface(np.concatenate([surface.vertices for surface in surfaces]), np.concatenate(faces))
