"""A mesh file as a welded surface in metres."""

from __future__ import annotations

import dataclasses
import hashlib
from collections.abc import Callable, Mapping
from dataclasses import dataclass
from pathlib import Path
from types import MappingProxyType
from typing import Final

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.files.formats import ELSEWHERE, FORMATS, METRES, Format
from meshlure.files.glb import read_glb
from meshlure.files.nearness import did_you_mean
from meshlure.files.obj import read_obj
from meshlure.files.off import read_off
from meshlure.files.ply import read_ply
from meshlure.files.resolution import resolution_findings
from meshlure.files.source import ALL, LARGEST, read_source
from meshlure.files.step import read_step
from meshlure.files.stl import read_stl
from meshlure.files.threemfreading import read_3mf
from meshlure.files.triangles import Part, Triangles
from meshlure.findings import Finding, Level
from meshlure.geometry.surface import Ints, Surface
from meshlure.geometry.welding import Welded, weld
from meshlure.units import length_unit

_SMALLEST: Final = 1e-9
"""m. What is nowhere larger than this is no part, and its areas and volumes would drown in rounding."""

_READERS: Final[Mapping[str, Callable[[bytes, float, str], Triangles]]] = MappingProxyType(
    {"STL": read_stl, "OBJ": read_obj, "PLY": read_ply, "OFF": read_off}
)

_UNPACKERS: Final[Mapping[str, Callable[[bytes, str, int], Triangles]]] = MappingProxyType(
    {"3MF": read_3mf, "GLB": read_glb, "STEP": read_step}
)
"""Of files that say their unit, and from which more can come than they are long."""


@dataclass(frozen=True, eq=False)
class NamedFaces:
    """Faces that the file keeps together.

    Attributes
    ----------
    name : str
        As the file says it; empty where it has none.
    faces : (m,) array
        Their numbers in the surface.
    """

    name: str
    faces: Ints


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
        mm, cm, m, in, ft or um: what the file's numbers were taken for.
    surface : Surface
        Welded on exact equality, m.
    findings : tuple of Finding
        What was odd in the file and yet readable. Whether the mesh is sound is not asked here.
    format : str
        STL, OBJ, 3MF, PLY, OFF, GLB or STEP.
    size : int
        Bytes of the file.
    parts : tuple of NamedFaces
        In the file's order; empty where the file does not part its faces.
    exact_volume : float or None
        m3. Of the solid that the triangles were made from, where the file holds one.
    """

    path: Path
    sha256: str
    triangles: int
    unit: str
    surface: Surface
    findings: tuple[Finding, ...] = ()
    format: str = "STL"
    size: int = 0
    parts: tuple[NamedFaces, ...] = ()
    exact_volume: float | None = None


def read_mesh(
    path: Path, unit: str | None, piece: str | None = None, where: str = "", largest: int = LARGEST
) -> MeshFile:
    """Welded surface, m, of a mesh file.

    Parameters
    ----------
    path : Path
        Its suffix says the format, in capitals or not.
    unit : str or None
        mm, cm, m or in. It is not guessed: None only does where the format says its unit, which is then believed
        whatever is stated here.
    piece : str or None
        Name that the findings carry.
    where : str
        Where the file was named, for the messages: "bait.toml: body.mesh".
    largest : int
        Bytes beyond which a file is not read, nor unpacked.

    Raises
    ------
    InputError
        The file cannot be read as such a mesh; see `read_source` and the formats' readers.

    Notes
    -----
    Triangles of which corners coincide are left out and counted in a note: exporters of curved solids write them at the
    poles, and left in they would make a closed mesh read as an open one.
    """
    place = f"{where}: {path}" if where else str(path)
    form = _known(path, unit, place)
    data = read_source(path, "mesh", where, largest)
    # A folder has no suffix that means something, and read_source has refused it.
    assert form is not None
    return _mesh(data, form, path, unit, piece, place, largest)


def mesh_of(data: bytes, path: Path, unit: str | None) -> MeshFile:
    """Welded surface, m, of a mesh file's bytes that are not on disk.

    Parameters
    ----------
    data : bytes
        All of them, however many.
    path : Path
        What it would be called; its suffix says the format.
    unit : str or None
        As `read_mesh`.

    Raises
    ------
    InputError
        As `read_mesh`.
    """
    form = _known(path, unit, str(path))
    assert form is not None, "a folder has no bytes"
    return _mesh(data, form, path, unit, None, str(path), ALL)


def _known(path: Path, unit: str | None, place: str) -> Format | None:
    """Format by the suffix, which says its unit where none is stated; None for a folder.

    Raises
    ------
    InputError
    """
    form = _format(path, place)
    metres = None if unit is None else length_unit(unit, place)
    if metres is None and form is not None and not form.says_unit:
        raise InputError(
            Fault(
                f"a file of the format {form.name} does not say its unit",
                place,
                "none stated",
                "mm, cm, m or in",
                "state it as the mesh was exported, with --unit mm for instance",
            )
        )
    return form


def _mesh(
    data: bytes, form: Format, path: Path, unit: str | None, piece: str | None, place: str, largest: int
) -> MeshFile:
    metres = None if unit is None else length_unit(unit, place)
    loose = _read(form, data, 1.0 if metres is None else metres, place, largest)
    welded = weld(loose.corners)
    _check_size(welded, loose, place)
    findings = list(loose.findings)
    if loose.unit and unit is not None and loose.unit != unit:
        message = f"The file says that its unit is {loose.unit}: that is believed, and not the {unit} of other meshes."
        findings.append(Finding("unit-of-file", Level.NOTE, message))
    if welded.collapsed:
        message = f"Left out: {welded.collapsed} of {len(loose.corners)} triangles, with corners at one point."
        findings.append(Finding("collapsed-triangles", Level.NOTE, message, count=welded.collapsed))
    findings += resolution_findings(welded.surface, METRES[loose.unit or unit or "m"])
    named = tuple(dataclasses.replace(finding, piece=piece) for finding in findings)
    return MeshFile(
        path=path,
        sha256=hashlib.sha256(data).hexdigest(),
        triangles=len(loose.corners),
        unit=loose.unit or unit or "",
        surface=welded.surface,
        findings=named,
        format=form.name,
        size=len(data),
        parts=_parts(loose.parts, welded.kept),
        exact_volume=loose.exact_volume,
    )


def _format(path: Path, place: str) -> Format | None:
    """Format by the suffix; None for a folder of any name, which has a message of its own."""
    suffix = path.suffix.lower()
    try:
        folder = path.is_dir()
    except ValueError:  # a NUL character in the name
        folder = False
    if suffix in FORMATS or folder:
        return FORMATS.get(suffix)
    near = did_you_mean(suffix, FORMATS, "export the part as 3MF or binary STL")
    advice = ELSEWHERE.get(suffix, near) if suffix else "name the mesh with its suffix"
    allowed = f"{', '.join(list(FORMATS)[:-1])} or {list(FORMATS)[-1]}"
    raise InputError(Fault("a mesh in this format is not read", place, repr(suffix or path.name), allowed, advice))


def _read(form: Format, data: bytes, metres: float, place: str, largest: int) -> Triangles:
    if form.name in _UNPACKERS:
        return _UNPACKERS[form.name](data, place, largest)
    return _READERS[form.name](data, metres, place)


def _check_size(welded: Welded, loose: Triangles, place: str) -> None:
    """Refuse what has no extent.

    Raises
    ------
    InputError
    """
    if not len(welded.surface.faces):
        found = f"{len(loose.corners)} triangles, all of them collapsed"
        what = "no triangle of the mesh has three corners apart"
    else:
        reach = float(np.ptp(welded.surface.bounds, axis=0).max())
        if reach >= _SMALLEST:
            return
        found, what = f"{reach:.3g} m", "the whole mesh is smaller than a millionth of a millimetre"
    step = "check the scale of the export: small parts in large units may be rounded to one point"
    raise InputError(Fault(what, place, found, next_step=step))


def _parts(parts: tuple[Part, ...], kept: Ints | None) -> tuple[NamedFaces, ...]:
    """Parts by the faces that are left of them."""
    stops = np.cumsum([part.triangles for part in parts], dtype=np.intp)
    if kept is not None:
        stops = np.searchsorted(kept, stops)
    starts = np.concatenate(([0], stops[:-1])) if len(stops) else stops
    return tuple(
        NamedFaces(part.name, np.arange(start, stop))
        for part, start, stop in zip(parts, starts.tolist(), stops.tolist(), strict=True)
        if stop > start
    )
