"""A bait body and three inserts, lofted through elliptic sections: what the measurements are made on."""

from __future__ import annotations

import sys
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from meshlure.files.stl import write_stl
from meshlure.geometry.surface import Surface

Floats = NDArray[np.float64]

LENGTH = 0.095
"""m, of the body; its nose lies at x = 0 and points along -x, its back along +z."""


def body(triangles: int) -> Surface:
    """A smooth minnow-like body, m, of about the given number of triangles.

    Notes
    -----
    Blunt nose, deepest ahead of the middle, slender tail, belly fuller than the back. Closed: rings of equal count
    joined ring to ring, with a fan at either pole.
    """
    around = 2 * round(np.sqrt(triangles / 4.0))
    rings = round(triangles / (2 * around))
    # Rings crowd towards both ends as the section shrinks, so that no triangle is drawn out.
    share = (1 - np.cos(np.pi * np.arange(1, rings + 1) / (rings + 1))) / 2
    girth = np.sqrt(share * (1 - share)) * (1 - share) ** 0.35 * 2.35
    half_depth = 0.0100 * girth
    half_width = 0.0068 * girth * (1 - 0.25 * share)
    middle = 0.0015 * np.sin(np.pi * share) - 0.0010 * share
    angle = 2 * np.pi * np.arange(around) / around
    points = np.empty((rings, around, 3))
    points[..., 0] = LENGTH * share[:, None]
    points[..., 1] = half_width[:, None] * np.cos(angle)
    points[..., 2] = middle[:, None] + half_depth[:, None] * np.sin(angle) * (1 - 0.12 * np.sin(angle))
    return _lofted(points, np.array([0.0, 0.0, 0.0]), np.array([LENGTH, 0.0, -0.0010]))


def spheroid(centre: Floats, half: Floats, rings: int = 60, around: int = 80) -> Surface:
    """A spheroid, m, with its poles along x."""
    polar = np.pi * np.arange(1, rings + 1) / (rings + 1)
    angle = 2 * np.pi * np.arange(around) / around
    points = np.empty((rings, around, 3))
    points[..., 0] = -np.cos(polar)[:, None]
    points[..., 1] = np.sin(polar)[:, None] * np.cos(angle)
    points[..., 2] = np.sin(polar)[:, None] * np.sin(angle)
    pole = np.array([half[0], 0.0, 0.0])
    return _lofted(centre + half * points, centre - pole, centre + pole)


def rod(start: Floats, length: float, radius: float, around: int = 48) -> Surface:
    """A round rod along x, m, with flat ends."""
    angle = 2 * np.pi * np.arange(around) / around
    points = np.empty((2, around, 3))
    points[..., 0] = np.array([0.0, length])[:, None]
    points[..., 1] = radius * np.cos(angle)
    points[..., 2] = radius * np.sin(angle)
    return _lofted(start + points, start, start + np.array([length, 0.0, 0.0]))


def inserts() -> dict[str, tuple[str | None, Surface]]:
    """By name the density, or None for a sealed hollow, and the surface, m, of three inserts inside the body."""
    return {
        "belly weight": ("11.34 g/cm3", spheroid(np.array([0.036, 0.0, -0.0052]), np.array([0.0085, 0.0026, 0.0021]))),
        "wire": ("7.9 g/cm3", rod(np.array([0.006, 0.0, 0.0008]), 0.080, 0.0005)),
        "chamber": (None, spheroid(np.array([0.058, 0.0, 0.0040]), np.array([0.0070, 0.0022, 0.0020]))),
    }


def _lofted(points: Floats, first: Floats, last: Floats) -> Surface:
    """Rings of points, (rings, around, 3), joined to one closed skin with a pole at either end, outward."""
    rings, around, _ = points.shape
    number = np.arange(rings * around).reshape(rings, around)
    following = np.roll(number, -1, axis=1)
    a, b, c, d = number[:-1], following[:-1], number[1:], following[1:]
    strips = np.stack([np.stack([a, b, d], axis=-1), np.stack([a, d, c], axis=-1)], axis=2).reshape(-1, 3)
    poles = rings * around + np.arange(2)
    nose = np.column_stack([np.full(around, poles[0]), following[0], number[0]])
    tail = np.column_stack([np.full(around, poles[1]), number[-1], following[-1]])
    return Surface(np.concatenate([points.reshape(-1, 3), [first, last]]), np.concatenate([nose, strips, tail]))


def write(folder: Path, triangles: int) -> Path:
    """Write the bait's STL files, in mm, with its bait file, and return the bait file's path."""
    write_stl(folder / "body.stl", body(triangles))
    lines = ["format = 1", "[bait]", 'name = "speed trial"', 'length_unit = "mm"', 'nose = "-x"', 'back = "+z"']
    # A stated density on all sides, so that two programs weigh the same.
    lines += ["[water]", 'density = "998.6 kg/m3"', "[body]", 'mesh = "body.stl"', 'density = "0.60 g/cm3"']
    for name, (density, surface) in inserts().items():
        mesh = f"{name.replace(' ', '_')}.stl"
        write_stl(folder / mesh, surface)
        substance = 'void = "sealed"' if density is None else f'density = "{density}"'
        lines += ["[[insert]]", f'name = "{name}"', f'mesh = "{mesh}"', substance]
    path = folder / "bait.toml"
    path.write_text("\n".join(lines) + "\n", encoding="utf-8")
    return path


if __name__ == "__main__":
    write(Path(sys.argv[1]), int(sys.argv[2]))
