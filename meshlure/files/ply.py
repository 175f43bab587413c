"""PLY files: tables of vertices and faces, as text or in bytes of either order."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from meshlure.errors import Fault, InputError
from meshlure.files.plyheader import Element, Header, Property, corner_list, read_header
from meshlure.files.plytext import read_text
from meshlure.files.polygonal import triangles_of
from meshlure.files.polygons import Polygons
from meshlure.files.triangles import Triangles
from meshlure.geometry.surface import Floats, Ints


def read_ply(data: bytes, metres: float, where: str) -> Triangles:
    """Triangles of a PLY file, in m.

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
        It is no PLY, is cut off, is a cloud of points without faces, names a vertex that is not there, or holds a
        coordinate that is no finite number.

    Notes
    -----
    Colours, normals and all other properties are left. Polygons are cut as those of an OBJ are.
    """
    header = read_header(data, where)
    tables = {element.name: element for element in header.elements}
    _check(tables, where)
    line: Callable[[int], str] = _row
    if header.order:
        points, polygons = _Bytes(data, header, where).read()
    else:
        points, polygons, line = read_text(data, header, where)
    lost = np.flatnonzero((polygons.corners < 0) | (polygons.corners >= len(points)))
    if len(lost):
        face = int(np.repeat(np.arange(len(polygons.counts)), polygons.counts)[lost[0]])
        raise InputError(
            Fault(
                "a face names a vertex that is not there",
                f"{where}, {line(face)}",
                f"{polygons.corners[lost[0]]}",
                f"0 to {len(points) - 1}",
                "the file is cut off or damaged: export it again",
            )
        )
    return triangles_of(points, polygons, metres, where, line)


def _row(face: int) -> str:
    return f"face {face + 1}"


def _check(tables: dict[str, Element], where: str) -> None:
    """Refuse a file without vertices or faces before its rows are looked at.

    Raises
    ------
    InputError
    """
    vertices, faces = tables.get("vertex"), tables.get("face")
    names = [] if vertices is None else [each.name for each in vertices.properties if not each.length]
    if vertices is None or not vertices.plain or not set("xyz") <= set(names):
        found = "no vertices" if vertices is None else f"their properties {', '.join(names)[:60]}"
        raise InputError(
            Fault("the PLY holds no vertices in three dimensions", where, found, "x, y, z", "export the part as a mesh")
        )
    if faces is None or not faces.count or corner_list(faces) is None:
        strips = " and triangle strips" if "tristrips" in tables else ""
        raise InputError(
            Fault(
                "the PLY holds no faces",
                where,
                f"{vertices.count:,} vertices{strips}",
                "faces with a list of their corners",
                "a scan is a cloud of points at first: make a closed mesh of it in the scanner's program",
            )
        )


class _Bytes:
    """The rows of a binary PLY."""

    def __init__(self, data: bytes, header: Header, where: str) -> None:
        self._data = data
        self._header = header
        self._where = where
        self._at = header.start

    def read(self) -> tuple[Floats, Polygons]:
        points: Floats | None = None
        polygons: Polygons | None = None
        for element in self._header.elements:
            if element.name == "vertex" and points is None:
                points = self._points(element)
            elif element.name == "face" and polygons is None:
                polygons = self._polygons(element)
            else:
                self._pass(element)
            if points is not None and polygons is not None:
                return points, polygons
        raise AssertionError("checked before")

    def _points(self, element: Element) -> Floats:
        names = [each.name for each in element.properties]
        kind = np.dtype([(f"p{n}", self._header.order + each.kind) for n, each in enumerate(element.properties)])
        self._needs(element, element.count * kind.itemsize)
        rows = np.frombuffer(self._data, dtype=kind, count=element.count, offset=self._at)
        self._at += element.count * kind.itemsize
        with np.errstate(invalid="ignore"):  # a signalling "not a number", which is refused later
            return np.stack([rows[f"p{names.index(axis)}"].astype(np.float64) for axis in "xyz"], axis=1)

    def _polygons(self, element: Element) -> Polygons:
        """Corners of the faces; where all have as many, they are rows of one size."""
        held = self._alike(element)
        if held is not None:
            return held
        wanted = corner_list(element)
        found: list[Ints] = []
        for row in range(element.count):
            for each in element.properties:
                values = self._values(each, element, row)
                if each is wanted:
                    found.append(values)
        counts = np.array([len(values) for values in found], dtype=np.intp)
        self._of_three(counts)
        return Polygons(np.concatenate(found).astype(np.intp), counts)

    def _alike(self, element: Element) -> Polygons | None:
        """Corners of faces that all have as many as the first, None where they have not."""
        start = self._at
        lengths = [len(self._values(each, element, 0)) if each.length else 0 for each in element.properties]
        self._at = start
        kinds: list[tuple[str, str] | tuple[str, str, tuple[int]]] = []
        for n, (each, length) in enumerate(zip(element.properties, lengths, strict=True)):
            order = self._header.order
            if each.length:
                kinds += [(f"n{n}", order + each.length), (f"p{n}", order + each.kind, (length,))]
            else:
                kinds.append((f"p{n}", order + each.kind))
        kind = np.dtype(kinds)
        if len(self._data) - start < element.count * kind.itemsize:
            return None
        rows = np.frombuffer(self._data, dtype=kind, count=element.count, offset=start)
        wanted = element.properties.index(corner_list(element))
        for n, (each, length) in enumerate(zip(element.properties, lengths, strict=True)):
            if each.length and (rows[f"n{n}"] != length).any():
                return None
        self._at += element.count * kind.itemsize
        counts = np.full(element.count, lengths[wanted], dtype=np.intp)
        self._of_three(counts)
        return Polygons(rows[f"p{wanted}"].astype(np.intp).ravel(), counts)

    def _of_three(self, counts: Ints) -> None:
        short = np.flatnonzero(counts < 3)
        if len(short):
            raise InputError(
                Fault(
                    f"{len(short):,} faces have fewer than three corners",
                    f"{self._where}, {_row(int(short[0]))}",
                    f"{counts[short[0]]}",
                    "three or more",
                    "export the part again",
                )
            )

    def _pass(self, element: Element) -> None:
        """Pass over an element."""
        if element.plain:
            size = element.count * sum(np.dtype(each.kind).itemsize for each in element.properties)
            self._needs(element, size)
            self._at += size
            return
        for row in range(element.count):
            for each in element.properties:
                self._values(each, element, row)

    def _values(self, each: Property, element: Element, row: int) -> Ints:
        """Values of one property of one row."""
        count = 1
        if each.length:
            kind = np.dtype(self._header.order + each.length)
            self._needs(element, kind.itemsize, row)
            count = int(np.frombuffer(self._data, dtype=kind, count=1, offset=self._at)[0])
            self._at += kind.itemsize
        kind = np.dtype(self._header.order + each.kind)
        self._needs(element, max(count, 0) * kind.itemsize, row)
        values = np.frombuffer(self._data, dtype=kind, count=max(count, 0), offset=self._at)
        self._at += values.nbytes
        return values

    def _needs(self, element: Element, size: int, row: int | None = None) -> None:
        left = len(self._data) - self._at
        if size <= left:
            return
        inside = f"in {element.name} {row + 1}" if row is not None else f"within its table of '{element.name[:40]}'"
        raise InputError(
            Fault(
                f"the PLY is cut off {inside}, or it is none",
                self._where,
                f"{len(self._data):,} bytes",
                f"{len(self._data) - left + size:,} bytes for the {element.count:,} rows that its header counts"
                if row is None
                else f"{len(self._data) - left + size:,} bytes at least",
                "export the part again, and compare the copy's size with the original's",
            )
        )
