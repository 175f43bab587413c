"""A mesh file as a welded surface in metres."""

from __future__ import annotations

import dataclasses
import hashlib
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from pathlib import Path
from types import MappingProxyType
from typing import Final

from meshlure.errors import Fault, InputError
from meshlure.files.nearness import did_you_mean
from meshlure.files.obj import read_obj
from meshlure.files.source import read_source
from meshlure.files.stl import read_stl
from meshlure.files.triangles import Triangles
from meshlure.findings import Finding, Level
from meshlure.geometry.surface import Surface
from meshlure.geometry.welding import weld
from meshlure.units import length_unit

_READERS: Final[Mapping[str, Callable[[bytes, float, str], Triangles]]] = MappingProxyType(
    {".stl": read_stl, ".obj": read_obj}
)


@dataclass(frozen=True, eq=False)
class MeshFile:
    """A mesh as it was read, not yet examined.

    Attributes
    ----------
    path : Path
        As it was given.
    sha256 : str
        Of the file's bytes.
    triangles : int
        Count in the file, polygons as the triangles they were cut into; collapsed ones are counted here.
    unit : str
        mm, cm, m or in: what the file's numbers were taken for.
    surface : Surface
        Welded on exact equality, m.
    findings : tuple of Finding
        What was odd in the file and yet readable. Whether the mesh is sound is not asked here.
    """

    path: Path
    sha256: str
    triangles: int
    unit: str
    surface: Surface
    findings: tuple[Finding, ...] = ()


def read_mesh(path: Path, unit: str, piece: str | None = None, where: str = "") -> MeshFile:
    """Welded surface, m, of an STL or OBJ file.

    Parameters
    ----------
    path : Path
        Its suffix says the format, in capitals or not.
    unit : str
        mm, cm, m or in. A mesh file does not say its unit, and it is not guessed.
    piece : str or None
        Name that the findings carry.
    where : str
        Where the file was named, for the messages: "bait.toml: body.mesh".

    Raises
    ------
    InputError
        The file cannot be read as such a mesh; see `read_source`, `read_stl` and `read_obj`.

    Notes
    -----
    Triangles of which corners coincide are left out and counted in a note: exporters of curved solids write them at the
    poles, and left in they would make a closed mesh read as an open one.
    """
    place = f"{where}: {path}" if where else str(path)
    metres = length_unit(unit, place)
    suffix = path.suffix.lower()
    if suffix not in _READERS and not path.is_dir():
        allowed = " or ".join(_READERS)
        advice = (
            did_you_mean(suffix, _READERS, "export the part as binary STL")
            if suffix
            else "name the mesh with its suffix"
        )
        raise InputError(Fault("a mesh in this format is not read", place, repr(suffix or path.name), allowed, advice))
    data = read_source(path, "mesh", where)
    loose = _READERS[suffix](data, metres, place)
    welded = weld(loose.corners)
    findings = list(loose.findings)
    if welded.collapsed:
        message = f"Left out: {welded.collapsed} of {len(loose.corners)} triangles, with corners at one point."
        findings.append(Finding("collapsed-triangles", Level.NOTE, message, count=welded.collapsed))
    if not len(welded.surface.faces):
        raise InputError(
            Fault(
                "no triangle of the mesh has three corners apart",
                place,
                f"{len(loose.corners)} triangles, all of them collapsed",
                next_step="check the scale of the export: small parts in large units may be rounded to one point",
            )
        )
    named = tuple(dataclasses.replace(finding, piece=piece) for finding in findings)
    return MeshFile(path, hashlib.sha256(data).hexdigest(), len(loose.corners), unit, welded.surface, named)
