"""The mesh formats that are read, by suffix: what each is called, and whether a file of it says its unit."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from types import MappingProxyType
from typing import Final


@dataclass(frozen=True)
class Format:
    """A format of mesh files.

    Attributes
    ----------
    name : str
    says_unit : bool
        Whether its files say which unit their numbers are in; that is then believed.
    """

    name: str
    says_unit: bool = False


_STEP: Final = Format("STEP", says_unit=True)

FORMATS: Final[Mapping[str, Format]] = MappingProxyType(
    {
        ".stl": Format("STL"),
        ".obj": Format("OBJ"),
        ".3mf": Format("3MF", says_unit=True),
        ".ply": Format("PLY"),
        ".off": Format("OFF"),
        ".glb": Format("GLB", says_unit=True),
        ".step": _STEP,
        ".stp": _STEP,
    }
)
"""By the suffix in small letters."""

METRES: Final[Mapping[str, float]] = MappingProxyType(
    {"mm": 1e-3, "cm": 1e-2, "m": 1.0, "in": 0.0254, "ft": 0.3048, "um": 1e-6}
)
"""m. The units that a file may say, or be stated to be in."""

ELSEWHERE: Final[Mapping[str, str]] = MappingProxyType(
    {".gltf": "export it as GLB, which is one file"}
    | dict.fromkeys((".igs", ".iges", ".sat", ".x_t", ".brep"), "export the solid as STEP, or as a mesh: STL or 3MF")
    | dict.fromkeys((".amf", ".dae", ".fbx", ".3ds", ".x3d", ".wrl", ".usdz"), "export the part as 3MF, STL or PLY")
    | dict.fromkeys((".zip", ".gz", ".7z", ".rar"), "unpack it and name the mesh in it")
    | dict.fromkeys((".gcode", ".svg", ".dxf", ".pdf", ".png", ".jpg"), "this holds no solid: export the part itself")
)
"""By suffixes that are not read: the way out."""
