"""OFF files: a table of vertices, then polygons over it."""

from __future__ import annotations

import re
from typing import Final

from meshlure.errors import Fault, InputError
from meshlure.files.polygonal import triangles_of
from meshlure.files.rows import Rows, whole
from meshlure.files.stl import is_text
from meshlure.files.triangles import Triangles

_HEAD: Final = re.compile(rb"(ST)?(C)?(N)?(4)?(n)?OFF")


def read_off(data: bytes, metres: float, where: str) -> Triangles:
    """Triangles of an OFF file, in m.

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
        It is no text, is cut off, holds no faces, has a line that cannot be read or an index to a vertex that is not
        there (with the line), stands in a space of other than three dimensions, or holds a coordinate that is no
        finite number.

    Notes
    -----
    Colours, normals and texture places (COFF, NOFF, STOFF) are left. Polygons are cut as those of an OBJ are.

    References
    ----------
    The Geomview manual, "OFF files" (from memory).
    """
    if not is_text(data):
        found = "OFF BINARY" if data.lstrip().startswith(b"OFF BINARY") else "no text"
        raise InputError(Fault("this is no OFF in text", where, found, "a text", "export it as text, or as STL"))
    rows = Rows.of(data, where, comment=b"#")
    if not len(rows):
        raise InputError(Fault("the OFF holds nothing but remarks", where, next_step="export the part again"))
    words, at = rows.lines[0].split(), 1
    head = _HEAD.fullmatch(words[0])
    if head is None:
        step = "name the OFF itself; another format does not become one by its suffix"
        raise InputError(Fault("an OFF begins with its name", rows.place(0), rows.shown(0), "OFF", step))
    if head[4] or head[5]:
        step = "export the part in three dimensions"
        raise InputError(Fault("the OFF is not in three dimensions", rows.place(0), rows.shown(0), "OFF", step))
    if words[1:2] == [b"BINARY"]:
        raise InputError(Fault("this is no OFF in text", rows.place(0), "OFF BINARY", "OFF", "export it as text"))
    words = words[1:]
    if not words and len(rows) > 1:
        words, at = rows.lines[1].split(), 2
    try:
        vertices, faces = whole(words[0]), whole(words[1])
    except (ValueError, IndexError):
        raise rows.unread(at - 1, "the counts of vertices and faces cannot be read") from None
    if not faces or not vertices:
        found = f"{vertices:,} vertices and {faces:,} faces"
        raise InputError(Fault("the OFF holds no faces", where, found, next_step="export the part as a mesh"))
    points = rows.numbers_of(at, vertices, 3, "a vertex")
    first = at + vertices
    polygons = rows.polygons(first, faces, vertices)
    return triangles_of(points, polygons, metres, where, lambda face: rows.place(first + face).rpartition(", ")[2])
