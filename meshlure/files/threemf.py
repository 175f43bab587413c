"""3MF packages: several solids in one file with their names, their unit and their topology."""

from __future__ import annotations

import unicodedata
import zipfile
from collections.abc import Iterator, Sequence
from pathlib import Path
from typing import IO, Final
from xml.sax.saxutils import quoteattr

import numpy as np

from meshlure.geometry.surface import Surface
from meshlure.version import VERSION

MODEL: Final = "3D/3dmodel.model"
_CORE: Final = "http://schemas.microsoft.com/3dmanufacturing/core/2015/02"
_HEAD: Final = '<?xml version="1.0" encoding="UTF-8"?>\n'
_TYPES: Final = (
    f'{_HEAD}<Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types">'
    '<Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/>'
    '<Default Extension="model" ContentType="application/vnd.ms-package.3dmanufacturing-3dmodel+xml"/></Types>\n'
)
_RELATIONS: Final = (
    f'{_HEAD}<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships">'
    f'<Relationship Target="/{MODEL}" Id="model" Type="http://schemas.microsoft.com/3dmanufacturing/2013/01/3dmodel"/>'
    "</Relationships>\n"
)
_AT_ONCE: Final = 16384
"""Rows written at a time, so that a large mesh needs no text of its own size in memory."""
_LONGEST_ROW: Final = 100
"""Bytes of a vertex or a triangle, at most."""
_WITHOUT_ZIP64: Final = 2_000_000_000
_JOINERS: Final = "\u200c\u200d\u00ad"
"""Format characters inside the words of some scripts, which are harmless."""
_LEVEL: Final = 1
"""Of compression: the highest takes six times as long for a sixth off the file."""


def write_3mf(path: Path | IO[bytes], pieces: Sequence[tuple[str, Surface]]) -> None:
    """Write surfaces as a 3MF package in mm, in the surfaces' own coordinates.

    Parameters
    ----------
    path : Path or file
        Where it goes.
    pieces : sequence of (str, Surface)
        Name and surface of each object, at least one. Objects of a 3MF are solids: closed, outward, without vertices
        of equal place; that is the caller's to see to.

    Raises
    ------
    ValueError
        There is no piece; a piece has no faces, a face with a vertex twice or a vertex that is not there, or a
        coordinate that is no finite number. Nothing is written.
    OSError
        The file cannot be written.

    Notes
    -----
    After the 3MF Core Specification 1.2 and its schema: one object and one build item a piece, without transforms.
    Coordinates are written in as many digits as read back to the same 64-bit number of mm. Characters that XML 1.0 has
    no place for, line ends, and those that turn the direction of writing are left out of the names; a name of which
    nothing is left becomes "piece 2". The same pieces make the same bytes.
    """
    if not pieces:
        raise ValueError("a 3MF holds at least one piece")
    for name, surface in pieces:
        _check(name, surface)
    rows = sum(len(surface.vertices) + len(surface.faces) for _, surface in pieces)
    large = rows * _LONGEST_ROW > _WITHOUT_ZIP64
    with zipfile.ZipFile(path, "w", zipfile.ZIP_DEFLATED, compresslevel=_LEVEL) as package:
        # Opened by name, a part is dated 1980: nothing in the file differs from one day to the next.
        for part, texts in (("[Content_Types].xml", [_TYPES]), ("_rels/.rels", [_RELATIONS]), (MODEL, _model(pieces))):
            with package.open(part, "w", force_zip64=large and part == MODEL) as file:
                for text in texts:
                    file.write(text.encode())


def _check(name: str, surface: Surface) -> None:
    faces = surface.faces
    if not len(faces):
        raise ValueError(f"{name!r} has no faces")
    if faces.min() < 0 or faces.max() >= len(surface.vertices):
        raise ValueError(f"{name!r} has a face with a vertex that is not there")
    if (faces == np.roll(faces, 1, axis=1)).any():
        raise ValueError(f"{name!r} has a face with one vertex twice")
    if not np.isfinite(surface.vertices * 1e3).all():
        raise ValueError(f"{name!r} has a coordinate that is no finite number")


def _model(pieces: Sequence[tuple[str, Surface]]) -> Iterator[str]:
    yield f'{_HEAD}<model unit="millimeter" xml:lang="en-US" xmlns="{_CORE}">\n'
    yield f'<metadata name="Application">meshlure {VERSION}</metadata>\n<resources>\n'
    for number, (name, surface) in enumerate(pieces, 1):
        shown = quoteattr(_plain(name) or f"piece {number}")
        yield f'<object id="{number}" type="model" name={shown}><mesh><vertices>\n'
        for at in range(0, len(surface.vertices), _AT_ONCE):
            points = (surface.vertices[at : at + _AT_ONCE] * 1e3).tolist()
            yield "".join([f'<vertex x="{x!r}" y="{y!r}" z="{z!r}"/>\n' for x, y, z in points])
        yield "</vertices><triangles>\n"
        for at in range(0, len(surface.faces), _AT_ONCE):
            faces = surface.faces[at : at + _AT_ONCE].tolist()
            yield "".join([f'<triangle v1="{a}" v2="{b}" v3="{c}"/>\n' for a, b, c in faces])
        yield "</triangles></mesh></object>\n"
    yield "</resources>\n<build>\n"
    yield "".join([f'<item objectid="{number}"/>\n' for number in range(1, len(pieces) + 1)])
    yield "</build>\n</model>\n"


def _plain(name: str) -> str:
    """Return a name without control characters, turns of direction, surrogates, line separators and no characters."""
    return "".join(
        c
        for c in name
        if (unicodedata.category(c) not in {"Cc", "Cf", "Cs", "Zl", "Zp"} or c in _JOINERS)
        and ord(c) & 0xFFFE != 0xFFFE
    ).strip()
