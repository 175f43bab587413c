"""OBJ files: every polygon of every group as one mesh of triangles."""

from __future__ import annotations

from dataclasses import replace

from meshlure.files.objlines import ObjLines
from meshlure.files.polygonal import triangles_of
from meshlure.files.triangles import Triangles


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
    Objects (or groups, where there are none) name the faces and do not part the mesh; materials do neither, and their
    files are not looked for. Polygons are cut into triangles between their own corners, the concave ones by ears in
    their plane: fanned from one corner, as many readers do, they would fold over themselves.
    """
    lines = ObjLines(data, where)
    vertices = lines.vertices()
    polygons = lines.polygons(vertices)
    parts = lines.parts()
    made = triangles_of(vertices, polygons, metres, where, lambda face: f"line {lines.line(face)}", parts)
    return replace(made, findings=(*lines.unread(), *made.findings))
