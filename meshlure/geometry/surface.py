"""A triangle surface: welded vertices and the faces between them."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Ints = NDArray[np.intp]
Bools = NDArray[np.bool_]


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
            raise ValueError(f"a surface takes (n, 3) vertices and (m, 3) faces, not {vertices.shape} and {faces.shape}")
        vertices.flags.writeable = False
        faces.flags.writeable = False
        object.__setattr__(self, "vertices", vertices)
        object.__setattr__(self, "faces", faces)

    @cached_property
    def corners(self) -> Floats:
        """(m, 3, 3) array, m: face, corner, coordinate."""
        corners = self.vertices[self.faces]
        corners.flags.writeable = False
        return corners

    @cached_property
    def double_areas(self) -> Floats:
        """(m, 3) array, m2: per face (b - a) x (c - a), normal to it and twice its area long."""
        a, b, c = self.corners[:, 0], self.corners[:, 1], self.corners[:, 2]
        normals = np.cross(b - a, c - a)
        normals.flags.writeable = False
        return normals

    @cached_property
    def area(self) -> float:
        """Area of all faces, m2."""
        return float(np.linalg.norm(self.double_areas, axis=1).sum() / 2)

    @cached_property
    def bounds(self) -> Floats:
        """(2, 3) array, m: least and greatest corner."""
        used = self.corners.reshape(-1, 3)
        return np.array([used.min(axis=0), used.max(axis=0)])

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
