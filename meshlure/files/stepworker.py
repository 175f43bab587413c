"""Makes facets of a STEP file in a process of its own: `python -m meshlure.files.stepworker IN.step OUT.npz MOST`.

The B-rep kernel may run for long, take much memory or break down on a damaged file; here that ends this process alone.
"""

from __future__ import annotations

import sys
from collections.abc import Iterator
from pathlib import Path
from typing import Any, Final

import numpy as np

CHORD: Final = 0.02
"""mm. How far a facet may leave the smooth skin, on parts of a bait's size."""
CHORD_SHARE: Final = 5e-4
"""Of the greatest extent: the chord on small parts."""
ANGLE: Final = 0.3
"""rad. How far the direction may turn between two facets."""

MEMORY: Final = 8 * 2**30
"""Bytes. What the process may take, where the system can bound it."""

NOT_READ, NO_SHAPE, TOO_MANY = 3, 4, 5
"""Exit codes: no STEP file, nothing in it that has faces, more triangles than are allowed."""


def main(source: str, target: str, most: int) -> int:
    """Write the facets of a STEP file as numpy arrays, in mm; return the exit code."""
    _bound()
    from OCP.Bnd import Bnd_Box
    from OCP.BRepBndLib import BRepBndLib
    from OCP.BRepMesh import BRepMesh_IncrementalMesh
    from OCP.IFSelect import IFSelect_RetDone
    from OCP.STEPControl import STEPControl_Reader
    from OCP.TopAbs import TopAbs_FACE, TopAbs_SHELL, TopAbs_SOLID

    reader = STEPControl_Reader()
    if reader.ReadFile(source) != IFSelect_RetDone:
        return NOT_READ
    reader.TransferRoots()
    shape = reader.OneShape()
    solids = [] if shape.IsNull() else list(_within(shape, TopAbs_SOLID))
    avoided = () if shape.IsNull() else ((TopAbs_SHELL, TopAbs_SOLID), (TopAbs_FACE, TopAbs_SHELL))
    loose = [part for kind, holder in avoided for part in _within(shape, kind, holder)]
    parts = solids or loose
    if not parts:
        return NO_SHAPE
    box = Bnd_Box()
    BRepBndLib.Add_s(shape, box)
    reach = max(high - low for low, high in zip(_point(box.CornerMin()), _point(box.CornerMax()), strict=True))
    chord = min(CHORD, CHORD_SHARE * reach)
    BRepMesh_IncrementalMesh(shape, chord, False, ANGLE, False)
    corners, counts = [], []
    for part in parts:
        faces = [triangles for face in _within(part, TopAbs_FACE) if (triangles := _triangles(face)) is not None]
        counts.append(sum(map(len, faces)))
        corners += faces
        if sum(counts) > most:
            return TOO_MANY
    if not corners:
        return NO_SHAPE
    np.savez(
        Path(target),
        corners=np.concatenate(corners),
        counts=np.array(counts),
        names=np.array([_name(reader, part) for part in parts]),
        volumes=np.array([_volume(solid) for solid in solids]),
        chord=np.array(chord),
        left=np.array(len(loose) if solids else 0),
    )
    return 0


def _bound() -> None:
    try:
        import resource
    except ImportError:  # no POSIX system
        return
    resource.setrlimit(resource.RLIMIT_AS, (MEMORY, MEMORY))


def _within(shape: Any, kind: Any, avoided: Any = None) -> Iterator[Any]:
    """Yield the parts of a kind in a shape, each in its place."""
    from OCP.TopAbs import TopAbs_SHAPE
    from OCP.TopExp import TopExp_Explorer

    explorer = TopExp_Explorer(shape, kind, TopAbs_SHAPE if avoided is None else avoided)
    while explorer.More():
        yield explorer.Current()
        explorer.Next()


def _triangles(face: Any) -> np.ndarray[Any, np.dtype[np.float64]] | None:
    """(m, 3, 3) array, mm; None where the kernel made none."""
    from OCP.BRep import BRep_Tool
    from OCP.TopAbs import TopAbs_REVERSED
    from OCP.TopLoc import TopLoc_Location
    from OCP.TopoDS import TopoDS

    location = TopLoc_Location()
    # The binding's name for the cast changed with the kernel's release 8.
    cast = getattr(TopoDS, "Face_s", None) or TopoDS.Face
    made = BRep_Tool.Triangulation_s(cast(face), location)
    if made is None:
        return None
    move = location.Transformation()
    points = np.array([_point(made.Node(k).Transformed(move)) for k in range(1, made.NbNodes() + 1)])
    faces = np.array([made.Triangle(k).Get() for k in range(1, made.NbTriangles() + 1)], dtype=np.intp) - 1
    if face.Orientation() == TopAbs_REVERSED:
        faces = faces[:, ::-1]
    # Two faces evaluate the points of their common edge each for itself; a four-byte number is where they agree, as in
    # every STL that CAD programs export.
    return np.asarray(points.astype(np.float32).astype(np.float64)[faces])


def _point(point: Any) -> tuple[float, float, float]:
    return point.X(), point.Y(), point.Z()


def _volume(solid: Any) -> float:
    """Volume of a solid, mm3, integrated over its smooth faces."""
    from OCP.BRepGProp import BRepGProp
    from OCP.GProp import GProp_GProps

    found = GProp_GProps()
    BRepGProp.VolumeProperties_s(solid, found, 1e-9, True)
    return float(found.Mass())


def _name(reader: Any, part: Any) -> str:
    """Name of the item that a part was made from, empty where it has none."""
    from OCP.TopLoc import TopLoc_Location

    # In its place in an assembly a part belongs to the place's entry; by itself it is what has the name.
    item = reader.WS().TransferReader().EntityFromShapeResult(part.Located(TopLoc_Location()), 1)
    name = item.Name() if hasattr(item, "Name") else None
    return "" if name is None else str(name.ToCString())


if __name__ == "__main__":
    sys.exit(main(sys.argv[1], sys.argv[2], int(sys.argv[3])))
