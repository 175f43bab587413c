"""Moulds made in memory from shapes, and their pieces as the general mesh library reads them."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import trimesh
from workbench import Insert, bait

from meshlure.geometry.surface import Floats, Surface
from meshlure.making.mould.check import Checked, check
from meshlure.making.mould.design import Kind, Mould, design
from meshlure.making.written import write_solid


def moulded(
    body: Surface, *pieces: Insert, kind: Kind = Kind.HALVES, hung: bool = False, lean: bool = False, **keys: Any
) -> Mould:
    """The mould of a bait, without a search for a better pull; further keys as [mould] has them."""
    given = bait(body, *pieces, mould=keys)
    assert given.plan.mould is not None
    return design(given, given.plan.mould, kind, hung, "mould", lambda _: None, lean)


@dataclass(frozen=True, eq=False)
class Files:
    """What was written of a mould: meshes in mm by piece, and what the check found."""

    meshes: Mapping[str, trimesh.Trimesh]
    checked: Checked


def written(mould: Mould, folder: Path) -> Files:
    """A mould's pieces written, checked, and read by the general library."""
    back = {piece.name: write_solid(piece.solid, folder / f"{piece.name}.stl") for piece in mould.pieces}
    return Files({name: read(folder / f"{name}.stl") for name in back}, check(mould, back))


def read(path: Path) -> trimesh.Trimesh:
    """An STL, welded; mm."""
    mesh = trimesh.load_mesh(path, file_type="stl")
    assert mesh.is_watertight
    assert mesh.is_winding_consistent
    assert mesh.volume > 0
    return mesh


def above(mesh: trimesh.Trimesh, height: float) -> float:
    """Volume of a mesh above z = height, mm3, by prisms under its cut faces (divergence theorem in z)."""
    total = 0.0
    for corners in mesh.triangles - [0, 0, height]:
        total += _under(corners)
    return total


def _under(corners: Floats) -> float:
    """Signed volume between the part of a triangle above z = 0 and that plane."""
    inside = _clipped(corners)
    total = 0.0
    for k in range(1, len(inside) - 1):
        a, b, c = inside[0], inside[k], inside[k + 1]
        flat = ((b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])) / 2
        total += flat * (a[2] + b[2] + c[2]) / 3
    return float(total)


def _clipped(corners: Floats) -> list[Floats]:
    found = []
    for k in range(3):
        a, b = corners[k], corners[(k + 1) % 3]
        if a[2] >= 0:
            found.append(a)
        if (a[2] >= 0) != (b[2] >= 0):
            found.append(a + a[2] / (a[2] - b[2]) * (b - a))
    return found
