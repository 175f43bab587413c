"""The statements of an OBJ file that make its mesh, each with its line."""

from __future__ import annotations

import re
from typing import Final

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.files.polygons import Polygons
from meshlure.findings import Finding, Level
from meshlure.geometry.surface import Floats, Ints

# A backslash joins lines; the joint becomes a vertical tab, which parts words as a blank does and counts as a line.
_JOINT: Final = b"\v"
_VERTEX: Final = re.compile(rb"^[ \t]*v[ \t\v]([^\n#]*)", re.MULTILINE)
_FACE: Final = re.compile(rb"^[ \t]*f[ \t\v]([^\n#]*)", re.MULTILINE)

_PASSED = b"v|vn|vt|vp|f|l|p|o|g|s|mg|usemtl|mtllib|usemap|maplib|lod|bevel|c_interp|d_interp|shadow_obj|trace_obj"
_FREE_FORM = b"cstype|curv|curv2|surf|bsp|bzp|cdc|cdp|res"
_OTHER: Final = re.compile(rb"^[ \t]*(?!(?:" + _PASSED + rb")(?:[ \t\v\n]|\Z))([^\s#][^\s]*)", re.MULTILINE)

_MARK: Final = b"\xef\xbb\xbf"
_SHOWN: Final = 60


class ObjLines:
    """An OBJ file's vertices and polygons.

    Parameters
    ----------
    data : bytes
        The whole file.
    where : str
        The file, for messages.

    Raises
    ------
    InputError
        The file is no text, or holds no polygons, or free-form surfaces, whose shape is not in their corners.
    """

    def __init__(self, data: bytes, where: str) -> None:
        self._where = where
        if b"\0" in data:
            raise InputError(
                Fault(
                    "this is no text, and so no OBJ",
                    where,
                    f"a zero byte at {data.index(0):,}",
                    "a text file",
                    "name the OBJ itself",
                )
            )
        plain = data.removeprefix(_MARK).replace(b"\r\n", b"\n").replace(b"\r", b"\n").replace(b"\\\n", _JOINT)
        self._text = plain
        self._vertices = list(_VERTEX.finditer(plain))
        self._faces = list(_FACE.finditer(plain))
        self._others = list(_OTHER.finditer(plain))
        for other in self._others:
            if re.fullmatch(_FREE_FORM, other[1]):
                raise InputError(
                    Fault(
                        "the OBJ holds free-form curves or surfaces",
                        self._place(other),
                        f"'{_shown(other[1])}'",
                        "vertices and polygons",
                        "export the part as a polygon mesh",
                    )
                )
        if not self._faces:
            begins = _shown(plain.lstrip().split(b"\n", 1)[0])
            found = f"{len(self._vertices)} vertices and no polygon" if self._vertices else f"it begins with '{begins}'"
            raise InputError(
                Fault("the OBJ holds no faces", where, found, "'f' lines", "export the part as a mesh with its faces")
            )

    def vertices(self) -> Floats:
        """(n, 3) array, file's unit: all vertices, in the file's order.

        Raises
        ------
        InputError
            A line holds less than three numbers, or something else than numbers.
        """
        rows = [match[1].split()[:3] for match in self._vertices]
        for match, row in zip(self._vertices, rows, strict=True):
            if len(row) < 3:
                raise InputError(self._unreadable("a vertex", match, "three numbers"))
        try:
            # Colours and weights after the three numbers have no part in the shape.
            numbers = [float(word) for row in rows for word in row]
        except ValueError:
            wrong = next(match for match, row in zip(self._vertices, rows, strict=True) if not all(map(_number, row)))
            raise InputError(self._unreadable("a vertex", wrong, "three numbers with a decimal point")) from None
        return np.array(numbers, dtype=np.float64).reshape(-1, 3)

    def polygons(self, vertices: Floats) -> Polygons:
        """All polygons, whatever group, object or material they belong to.

        Parameters
        ----------
        vertices : (n, 3) array
            As `vertices` gives them.

        Raises
        ------
        InputError
            A face has less than three corners, an index that is no whole number, points to no vertex, or to one with a
            coordinate that is no finite number.

        Notes
        -----
        Indices count from 1. A negative one counts back from the vertex written last before the face, not from the
        last of the file. What stands behind a slash (texture, normal) is left.
        """
        rows = [match[1].split() for match in self._faces]
        counts = np.array([len(row) for row in rows], dtype=np.intp)
        for number in np.flatnonzero(counts < 3)[:1]:
            raise InputError(self._unreadable("a face", self._faces[number], "three corners or more"))
        try:
            indices = np.array([int(word.partition(b"/")[0]) for row in rows for word in row], dtype=np.intp)
        except (ValueError, OverflowError):
            wrong = next(match for match, row in zip(self._faces, rows, strict=True) if not all(map(_index, row)))
            raise InputError(self._unreadable("a face", wrong, "vertex numbers such as 3, 3/1, 3//2 or -1")) from None
        owners = np.repeat(np.arange(len(rows)), counts)
        corners = indices - 1
        back = np.flatnonzero(indices < 0)
        if len(back):
            places = np.array([match.start() for match in self._vertices])
            written = np.searchsorted(places, [match.start() for match in self._faces])
            corners[back] = written[owners[back]] + indices[back]
        lost = np.flatnonzero((corners < 0) | (corners >= len(vertices)))
        if len(lost):
            raise InputError(self._lost(lost, indices, owners, len(vertices)))
        broken = ~np.isfinite(vertices[corners]).all(axis=1)
        if broken.any():
            raise InputError(self._broken(np.unique(owners[broken]), vertices, corners[broken]))
        return Polygons(corners, counts)

    def line(self, face: int) -> int:
        """Line of a face, both counted as people count: the line from 1, the face from 0 as arrays do."""
        return self._line(self._faces[face])

    def unread(self) -> tuple[Finding, ...]:
        """Note on the lines that mean nothing here."""
        if not self._others:
            return ()
        first = self._others[0]
        text = (
            f"Passed over, since they say nothing of a polygon mesh: {len(self._others)} lines, the first of them "
            f"'{_shown(first[1])}' in line {self._line(first)}."
        )
        return (Finding("unread-lines", Level.NOTE, text, count=len(self._others)),)

    def _lost(self, lost: Ints, indices: Ints, owners: Ints, count: int) -> Fault:
        face = self._faces[owners[lost[0]]]
        others = len(np.unique(owners[lost])) - 1
        more = f" (and {others} more such faces)" if others else ""
        return Fault(
            f"a face names a vertex that is not there{more}",
            self._place(face),
            f"{indices[lost[0]]} in 'f {_shown(face[1])}'",
            f"1 to {count}, or negative to count back from the face; 0 is none",
            "the file is cut off or damaged: export it again",
        )

    def _broken(self, faces: Ints, vertices: Floats, corners: Ints) -> Fault:
        named = ", ".join(str(face + 1) for face in faces[:5]) + (
            f" and {len(faces) - 5} more" if len(faces) > 5 else ""
        )
        bad = vertices[corners[0]]
        return Fault(
            f"{len(faces)} of {len(self._faces)} faces: a coordinate is no finite number",
            f"{self._where}, face {named}; line {self._line(self._vertices[corners[0]])}",
            f"{bad[~np.isfinite(bad)][0]}",
            "finite numbers",
            "repair the part at these faces in the program that drew it and export again",
        )

    def _unreadable(self, noun: str, match: re.Match[bytes], allowed: str) -> Fault:
        text = f"'{_shown(match[0].strip())}'"
        return Fault(f"{noun} cannot be read", self._place(match), text, allowed, "export the part again")

    def _place(self, match: re.Match[bytes]) -> str:
        return f"{self._where}, line {self._line(match)}"

    def _line(self, match: re.Match[bytes]) -> int:
        return self._text.count(b"\n", 0, match.start()) + self._text.count(_JOINT, 0, match.start()) + 1


def _shown(text: bytes) -> str:
    """Return a few characters of the file, as they may stand in a message."""
    words = "".join(c if c.isprintable() else " " for c in text.decode("utf-8", "replace"))
    return words if len(words) <= _SHOWN else words[:_SHOWN] + "..."


def _number(word: bytes) -> bool:
    try:
        float(word)
    except ValueError:
        return False
    return True


def _index(word: bytes) -> bool:
    try:
        return abs(int(word.partition(b"/")[0])) < 2**62
    except ValueError:
        return False
