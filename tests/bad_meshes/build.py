"""Makes the broken and odd mesh files of this folder, one fault each: `python tests/bad_meshes/build.py`.

The bytes are put together by hand from the formats' published layouts (STL: header of 80 bytes, face count of 4, then
12 little-endian 32-bit floats and 2 bytes a face; OBJ: one statement a line), so that nothing of the reader is in its
tests.
"""

from __future__ import annotations

import math
import struct
from collections.abc import Callable, Sequence
from pathlib import Path

Point = tuple[float, float, float]
Face = tuple[Point, Point, Point]

HERE = Path(__file__).parent
SIZE = (40.0, 10.0, 16.0)
"""mm. The box that the files are made of; 6,400 mm3."""


def box(low: Point = (0.0, 0.0, 0.0), size: Point = SIZE) -> list[Face]:
    """Closed box of twelve outward faces."""
    p = [tuple(low[k] + (size[k] if corner >> k & 1 else 0.0) for k in range(3)) for corner in range(8)]
    sides = [(0, 2, 3, 1), (4, 5, 7, 6), (0, 1, 5, 4), (2, 6, 7, 3), (0, 4, 6, 2), (1, 3, 7, 5)]
    return [(p[q[i]], p[q[j]], p[q[k]]) for q in sides for i, j, k in ((0, 1, 2), (0, 2, 3))]  # type: ignore[misc]


def turned(faces: Sequence[Face]) -> list[Face]:
    return [(a, c, b) for a, b, c in faces]


def binary(faces: Sequence[Face], header: bytes = b"a box", count: int | None = None) -> bytes:
    body = b"".join(struct.pack("<12fH", 0.0, 0.0, 0.0, *a, *b, *c, 0) for a, b, c in faces)
    return header.ljust(80) + struct.pack("<I", len(faces) if count is None else count) + body


def ascii_stl(faces: Sequence[Face], name: str = "box") -> str:
    lines = [f"solid {name}"]
    for face in faces:
        lines += ["  facet normal 0 0 0", "    outer loop"]
        lines += [f"      vertex {x:g} {y:g} {z:g}" for x, y, z in face]
        lines += ["    endloop", "  endfacet"]
    return "\n".join([*lines, f"endsolid {name}", ""])


def obj(points: Sequence[Point], polygons: Sequence[Sequence[int]]) -> str:
    lines = [f"v {x:g} {y:g} {z:g}" for x, y, z in points]
    lines += ["f " + " ".join(map(str, polygon)) for polygon in polygons]
    return "\n".join([*lines, ""])


def box_obj(polygons: Sequence[Sequence[int]] | None = None) -> str:
    points = [tuple(SIZE[k] if corner >> k & 1 else 0.0 for k in range(3)) for corner in range(8)]
    quads = [(1, 3, 4, 2), (5, 6, 8, 7), (1, 2, 6, 5), (3, 7, 8, 4), (1, 5, 7, 3), (2, 4, 8, 6)]
    return obj(points, quads if polygons is None else polygons)  # type: ignore[arg-type]


def prism(outline: Sequence[tuple[float, float]], height: float) -> str:
    """Prism over an outline that runs anticlockwise; its ends are one polygon each."""
    n = len(outline)
    points = [(x, y, z) for z in (0.0, height) for x, y in outline]
    sides = [(i + 1, (i + 1) % n + 1, (i + 1) % n + n + 1, i + n + 1) for i in range(n)]
    return obj(points, [tuple(range(n, 0, -1)), tuple(range(n + 1, 2 * n + 1)), *sides])


L_SHAPE = [(0.0, 0.0), (30.0, 0.0), (30.0, 4.0), (6.0, 4.0), (6.0, 20.0), (0.0, 20.0)]
"""mm. 216 mm2 by the shoelace formula; not to be seen whole from its first corner, (30, 4) hides behind (6, 4)."""


def edited(text: str, line: int, new: str) -> str:
    """Text with one line, counted from 1, put in another's place."""
    lines = text.split("\n")
    lines[line - 1] = new
    return "\n".join(lines)


def revolved() -> list[Face]:
    """Spindle whose pole faces are written as quads cut in two, so that half of them have two equal corners."""
    ring = [(20.0, 8 * math.cos(k * math.pi / 4), 8 * math.sin(k * math.pi / 4)) for k in range(8)]
    faces: list[Face] = []
    for k in range(8):
        a, b = ring[k], ring[(k + 1) % 8]
        nose, tail = (0.0, 0.0, 0.0), (40.0, 0.0, 0.0)
        faces += [(nose, b, a), (nose, nose, b), (tail, a, b), (tail, tail, a)]
    return faces


def with_corner(faces: Sequence[Face], number: int, corner: Point) -> list[Face]:
    faces = list(faces)
    faces[number] = (corner, *faces[number][1:])
    return faces


FILES: dict[str, Callable[[], bytes | str]] = {
    # STL that cannot be read
    "empty.stl": lambda: b"",
    "too_short.stl": lambda: b"\x00" * 40,
    "text_renamed.stl": lambda: "Belly weight, second try. Ask about the mould on Friday.\n" * 3,
    "picture_renamed.stl": lambda: b"\x89PNG\r\n\x1a\n" + bytes(range(256)),
    "no_faces.stl": lambda: binary([]),
    "no_faces_ascii.stl": lambda: "solid nothing\nendsolid nothing\n",
    "cut_inside_a_face.stl": lambda: binary(box())[:-120],
    "cut_between_faces.stl": lambda: binary(box())[:-100],
    "four_billion.stl": lambda: binary([], count=4_000_000_000),
    "more_than_counted.stl": lambda: binary(box(), count=6),
    "solid_but_binary_cut.stl": lambda: binary(box(), header=b"solid box")[:-100],
    "not_a_number.stl": lambda: binary(with_corner(box(), 4, (math.nan, 0.0, 0.0))),
    "infinite_ascii.stl": lambda: edited(ascii_stl(box()), 18, "      vertex inf 0 0"),
    "ascii_cut.stl": lambda: ascii_stl(box())[:700],
    "ascii_no_end.stl": lambda: ascii_stl(box()).replace("endsolid box\n", ""),
    "ascii_decimal_comma.stl": lambda: edited(ascii_stl(box()), 11, "      vertex 0,5 10 0"),
    "ascii_four_corners.stl": lambda: edited(ascii_stl(box()), 6, "      vertex 40 10 0\n      vertex 40 0 0"),
    "ascii_end_inside_a_facet.stl": lambda: edited("\n".join(ascii_stl(box()).split("\n")[:82]), 82, "endsolid box"),
    "all_collapsed.stl": lambda: binary([((1.0, 1.0, 1.0),) * 3] * 4),
    # STL that is odd, and read
    "solid_but_binary.stl": lambda: binary(box(), header=b"solid box"),
    "trailing_bytes.stl": lambda: binary(box()) + b"\x00" * 7,
    "two_solids.stl": lambda: ascii_stl(box(), "front") + ascii_stl(box((50.0, 0.0, 0.0)), "rear"),
    "blank_lines_at_end.stl": lambda: "\n" + ascii_stl(box()).replace("\n", "\r\n") + "\r\n\r\n\r\n",
    "collapsed.stl": lambda: binary(revolved()),
    # OBJ that cannot be read
    "no_faces.obj": lambda: box_obj([]),
    "text_renamed.obj": lambda: "Belly weight, second try.\n",
    "binary_renamed.obj": lambda: binary(box()),
    "index_zero.obj": lambda: edited(box_obj(), 12, "f 0 3 7 8 4"),
    "index_beyond.obj": lambda: edited(box_obj(), 12, "f 3 7 9 4"),
    "index_back_beyond.obj": lambda: edited(box_obj(), 12, "f 3 7 -9 4"),
    "two_corners.obj": lambda: edited(box_obj(), 12, "f 3 7"),
    "word_for_index.obj": lambda: edited(box_obj(), 12, "f 3 7 eight 4"),
    "two_coordinates.obj": lambda: edited(box_obj(), 3, "v 0 10"),
    "decimal_comma.obj": lambda: edited(box_obj(), 3, "v 0 10,5 0"),
    "not_a_number.obj": lambda: edited(box_obj(), 3, "v 0 nan 0"),
    "free_form.obj": lambda: "v 0 0 0\nv 1 0 0\ncstype bezier\ndeg 1 1\nsurf 0 1 0 1 1 2 1 2\nend\n",
    # OBJ that is odd, and read
    "concave.obj": lambda: prism(L_SHAPE, 10.0),
    "missing_material.obj": lambda: "mtllib nowhere.mtl\nusemtl paint\n" + box_obj(),
    "groups_and_negative.obj": lambda: (
        "o front\ng skin\n"
        + box_obj([])
        + "f -8 -6 -5 -7\nf -4 -3 -1 -2\nf -8 -7 -3 -4\nf -6 -2 -1 -5\nf -8 -4 -2 -6\n"
        "f -7 -5 -1 -3\no rear\ng other\n"
        + obj([(60.0, 0.0, 0.0), (70.0, 0.0, 0.0), (60.0, 9.0, 0.0), (60.0, 0.0, 5.0)], [])
        + "f -4 -2 -3\nf -4 -3 -1\nf -3 -2 -1\nf -4 -1 -2\n"
    ),
    "bent.obj": lambda: edited(box_obj(), 8, "v 40 10 18"),
    "crossing.obj": lambda: edited(box_obj(), 9, "f 1 3 2 4"),
    "unknown_lines.obj": lambda: "cutter 5\n" + box_obj() + "cutter 6\n",
    # Read without a word; what is wrong is the surface
    "open_box.stl": lambda: binary(box()[:-2]),
    "mixed_winding.stl": lambda: binary(turned(box()[:3]) + box()[3:]),
    "inside_out.stl": lambda: binary(turned(box())),
    "duplicate_face.stl": lambda: binary([*box(), box()[0]]),
    "needle_face.stl": lambda: binary([*box(), ((0.0, 0.0, 0.0), (20.0, 0.0, 0.0), (40.0, 0.0, 0.0))]),
    "shared_edge.stl": lambda: binary(box() + box((40.0, 10.0, 0.0))),
    "shells_apart.stl": lambda: binary(box() + box((60.0, 0.0, 0.0))),
    "shells_overlapping.stl": lambda: binary(box() + box((30.0, 2.0, 2.0), (20.0, 6.0, 6.0))),
    "cavity.stl": lambda: binary(box() + turned(box((10.0, 3.0, 4.0), (20.0, 4.0, 8.0)))),
    "in_metres.stl": lambda: binary(box(size=(0.04, 0.01, 0.016))),
}


def content(name: str) -> bytes:
    made = FILES[name]()
    return made if isinstance(made, bytes) else made.encode("ascii")


def main() -> None:
    for name in FILES:
        (HERE / name).write_bytes(content(name))


if __name__ == "__main__":
    main()
