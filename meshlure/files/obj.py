"""OBJ files: every polygon of every group as one mesh of triangles."""

from __future__ import annotations

import numpy as np

from meshlure.files.objlines import ObjLines
from meshlure.files.polygons import cut
from meshlure.files.triangles import Triangles, in_metres
from meshlure.findings import Finding, Level
from meshlure.geometry.surface import Floats, Ints

_PLACES = 10


def read_obj(data: bytes, metres: float, where: str) -> Triangles:
    """Triangles of an OBJ file, in m.

    Parameters
    ----------
    data : bytes
        The whole file.
    metres : float, m
        Length of the file's unit.
    where : str
        The file, for messages.

    Raises
    ------
    InputError
        No text, no faces, a line that cannot be read, an index to a vertex that is not there (with the line), free-form
        surfaces, or a coordinate that is no finite number.

    Notes
    -----
    Groups, objects and materials do not part the mesh, and material files are not looked for. Polygons are cut into
    triangles between their own corners, the concave ones by ears in their plane: fanned from one corner, as many
    readers do, they would fold over themselves.
    """
    lines = ObjLines(data, where)
    vertices = lines.vertices()
    polygons = lines.polygons(vertices)
    pieces = cut(vertices, polygons)
    firsts = vertices[polygons.corners[np.cumsum(polygons.counts) - polygons.counts]] * metres
    findings = list(lines.unread())
    if len(pieces.bent):
        message = (
            f"Not flat: {len(pieces.bent)} of {len(polygons.counts)} polygons, by up to "
            f"{pieces.bend * metres * 1e3:.2g} mm (the first in line {lines.line(int(pieces.bent[0]))}); "
            "along which diagonal they bend is not in the file."
        )
        advice = "Export triangles where this matters, so that every program sees the same surface."
        findings.append(_finding("bent-polygons", Level.NOTE, message, firsts, pieces.bent, advice))
    if len(pieces.crossing):
        message = (
            f"Crossing their own outline: {len(pieces.crossing)} of {len(polygons.counts)} polygons (the first in line "
            f"{lines.line(int(pieces.crossing[0]))}); the surface there is not the one that was drawn."
        )
        advice = "Redraw these faces, or export triangles."
        findings.append(_finding("crossing-polygons", Level.WARNING, message, firsts, pieces.crossing, advice))
    return Triangles(in_metres(vertices[pieces.faces], metres, where), tuple(findings))


def _finding(code: str, level: Level, message: str, firsts: Floats, numbers: Ints, advice: str) -> Finding:
    """Return a finding about polygons, placed at their first corners."""
    places = tuple((float(x), float(y), float(z)) for x, y, z in firsts[numbers[:_PLACES]])
    return Finding(code, level, message, count=len(numbers), where=places, advice=advice)
