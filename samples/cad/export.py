"""Binary STL out of a B-rep, in the fineness a CAD program's export dialogue asks for."""

from __future__ import annotations

from pathlib import Path

from OCP.BRep import BRep_Builder
from OCP.BRepBuilderAPI import BRepBuilderAPI_Copy
from OCP.BRepMesh import BRepMesh_IncrementalMesh
from OCP.StlAPI import StlAPI_Writer
from OCP.TopoDS import TopoDS_Compound, TopoDS_Shape


def write_stl(shape: TopoDS_Shape, path: Path, chord: float, angle: float) -> None:
    """Write the facets of a solid; `chord` (mm) and `angle` (rad) bound how far a facet may leave the skin.

    The shape is copied first: the kernel keeps facets with a shape and would reuse finer ones made before.
    """
    copy = BRepBuilderAPI_Copy(shape, True, False).Shape()
    BRepMesh_IncrementalMesh(copy, chord, False, angle, False)
    path.parent.mkdir(parents=True, exist_ok=True)
    writer = StlAPI_Writer()
    writer.ASCIIMode = False
    if not writer.Write(copy, str(path)):
        raise OSError(f"{path}: the kernel could not write the facets")


def together(*shapes: TopoDS_Shape) -> TopoDS_Shape:
    """Return the shapes side by side as one, none of them changed."""
    builder, compound = BRep_Builder(), TopoDS_Compound()
    builder.MakeCompound(compound)
    for shape in shapes:
        builder.Add(compound, shape)
    return compound
