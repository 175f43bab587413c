"""The statements of an OBJ file that make its mesh, each with its line."""

from __future__ import annotations

import re
from itertools import islice
from typing import Final

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.files.polygons import MOST_CORNERS, Polygons, batches
from meshlure.files.rows import number_of
from meshlure.findings import Finding, Level
from meshlure.geometry.surface import Floats, Ints

# A backslash joins lines; the joint becomes a vertical tab, which parts words as a blank does and counts as a line.
_JOINT: Final = b"\v"
_VERTEX: Final = re.compile(rb"^[ \t]*v[ \t\v]([^\n#]*)", re.MULTILINE)
_FACE: Final = re.compile(rb"^[ \t]*f[ \t\v]([^\n#]*)", re.MULTILINE)

_OBJECT: Final = re.compile(rb"^[ \t]*o[ \t\v]([^\n#]*)", re.MULTILINE)
_GROUP: Final = re.compile(rb"^[ \t]*g[ \t\v]([^\n#]*)", re.MULTILINE)

_PASSED = b"v|vn|vt|vp|f|l|p|o|g|s|mg|usemtl|mtllib|usemap|maplib|lod|bevel|c_interp|d_interp|shadow_obj|trace_obj"
_FREE_FORM = b"cstype|curv|curv2|surf|bsp|bzp|cdc|cdp|res"
_OTHER: Final = re.compile(rb"^[ \t]*(?!(?:" + _PASSED + rb")(?:[ \t\v\n]|\Z))([^\s#][^\s]*)", re.MULTILINE)

_MARK: Final = b"\xef\xbb\xbf"
_SHOWN: Final = 60


class _Statements:
    """All statements of one keyword, in the file's order.

    Parameters
    ----------
    pattern : re.Pattern
        Its one group is what follows the keyword.
    text : bytes
        The whole file.
    """

    def __init__(self, pattern: re.Pattern[bytes], text: bytes) -> None:
        self._pattern = pattern
        self._text = text
        # The words alone: a million match objects would cost more than all the rest of the reading.
        self.rows: list[bytes] = pattern.findall(text)

    def counts(self) -> Ints:
        """(k,) array: how many words each has; of very many, only that they are more than a polygon may have."""
        words = (len(row.split(None, MOST_CORNERS + 1)) for row in self.rows)
        return np.fromiter(words, dtype=np.intp, count=len(self.rows))

    def starts(self) -> Ints:
        """(k,) array: where each begins in the text."""
        return np.fromiter((match.start() for match in self._pattern.finditer(self._text)), dtype=np.intp)

    def match(self, number: int) -> re.Match[bytes]:
        """Return one of them with its place, counted from 0."""
        return next(islice(self._pattern.finditer(self._text), number, None))


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
        self._vertices = _Statements(_VERTEX, plain)
        self._faces = _Statements(_FACE, plain)
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
        if not self._faces.rows:
            begins = _shown(plain.lstrip()[: _SHOWN + 1].split(b"\n", 1)[0])
            count = len(self._vertices.rows)
            found = f"{count} vertices and no polygon" if count else f"it begins with '{begins}'"
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
        rows, counts = self._vertices.rows, self._vertices.counts()
        for number in np.flatnonzero(counts < 3)[:1].tolist():
            raise InputError(self._unreadable("a vertex", self._vertices.match(number), "three numbers"))
        if (counts > 3).any():
            # Colours and weights after the three numbers have no part in the shape.
            rows = [b" ".join(row.split(None, 3)[:3]) for row in rows]
        try:
            numbers = [
                np.array(list(map(number_of, b" ".join(rows[batch]).split())), dtype=np.float64)
                for batch in batches(np.full(len(rows), 3))
            ]
        except ValueError:
            wrong = next(number for number, row in enumerate(rows) if not all(map(_number, row.split())))
            allowed = "three numbers with a decimal point"
            raise InputError(self._unreadable("a vertex", self._vertices.match(wrong), allowed)) from None
        return np.concatenate([*numbers, np.empty(0)]).reshape(-1, 3)

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
        rows, counts = self._faces.rows, self._faces.counts()
        for number in np.flatnonzero(counts < 3)[:1].tolist():
            raise InputError(self._unreadable("a face", self._faces.match(number), "three corners or more"))
        for number in np.flatnonzero(counts > MOST_CORNERS)[:1].tolist():
            allowed = f"up to {MOST_CORNERS:,} corners"
            raise InputError(self._unreadable("a face", self._faces.match(number), allowed))
        try:
            indices = np.concatenate([_indices(rows[batch]) for batch in batches(counts)])
        except (ValueError, OverflowError):
            wrong = next(number for number, row in enumerate(rows) if not all(map(_index, row.split())))
            allowed = "vertex numbers such as 3, 3/1, 3//2 or -1"
            raise InputError(self._unreadable("a face", self._faces.match(wrong), allowed)) from None
        owners = np.repeat(np.arange(len(rows)), counts)
        corners = indices - 1
        back = np.flatnonzero(indices < 0)
        if len(back):
            written = np.searchsorted(self._vertices.starts(), self._faces.starts())
            corners[back] = written[owners[back]] + indices[back]
        lost = np.flatnonzero((corners < 0) | (corners >= len(vertices)))
        if len(lost):
            raise InputError(self._lost(lost, indices, owners, len(vertices)))
        broken = ~np.isfinite(vertices[corners]).all(axis=1)
        if broken.any():
            raise InputError(self._broken(np.unique(owners[broken]), vertices, corners[broken]))
        return Polygons(corners, counts)

    def parts(self) -> tuple[tuple[str, int], ...]:
        """Objects, or groups where there are fewer than two objects, in the file's order: name and count of faces."""
        for pattern in (_OBJECT, _GROUP):
            named = _Statements(pattern, self._text)
            if len(named.rows) < 2:
                continue
            # A statement names the faces after it; those before the first have no name.
            begins = np.searchsorted(self._faces.starts(), named.starts())
            counts = np.diff(np.concatenate(([0], begins, [len(self._faces.rows)]))).tolist()
            names = ["", *(row.strip().decode("utf-8", "replace") for row in named.rows)]
            runs = [(name, count) for name, count in zip(names, counts, strict=True) if count]
            if len(runs) > 1:
                return tuple(runs)
        return ()

    def line(self, face: int) -> int:
        """Line of a face, both counted as people count: the line from 1, the face from 0 as arrays do."""
        return self._line(self._faces.match(face))

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
        face = self._faces.match(int(owners[lost[0]]))
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
            f"{len(faces)} of {len(self._faces.rows)} faces: a coordinate is no finite number",
            f"{self._where}, face {named}; line {self._line(self._vertices.match(int(corners[0])))}",
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
    words = "".join(c if c.isprintable() else " " for c in text[: 4 * _SHOWN + 4].decode("utf-8", "replace"))
    return words if len(words) <= _SHOWN else words[:_SHOWN] + "..."


def _number(word: bytes) -> bool:
    try:
        number_of(word)
    except ValueError:
        return False
    return True


def _whole(word: bytes) -> int:
    if b"_" in word:  # which Python would pass over
        raise ValueError(word)
    return int(word)


def _indices(rows: list[bytes]) -> Ints:
    """Vertex numbers of faces, one face after another."""
    words = b" ".join(rows).split()
    return np.array([_whole(word.partition(b"/")[0]) for word in words], dtype=np.intp)


def _index(word: bytes) -> bool:
    try:
        return abs(_whole(word.partition(b"/")[0])) < 2**62
    except ValueError:
        return False
