"""Makes the broken and odd mesh files of this folder, one fault each: `python tests/bad_meshes/build.py`.

The bytes are put together by hand from the formats' published layouts (STL: header of 80 bytes, face count of 4, then
12 little-endian 32-bit floats and 2 bytes a face; OBJ: one statement a line; of the others see tests/formats/build.py,
whose sound files are broken here), so that nothing of the reader is in its tests.
"""

from __future__ import annotations

import math
import runpy
import struct
from collections.abc import Callable, Sequence
from itertools import pairwise
from pathlib import Path
from typing import Any

Point = tuple[float, float, float]
Face = tuple[Point, Point, Point]

HERE = Path(__file__).parent
SOUND: dict[str, Any] = runpy.run_path(str(HERE.parent / "formats" / "build.py"))
"""What makes sound files of the newer formats."""
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


def half(y: float = 0.0) -> list[Face]:
    """Left half of a box 40 x 20 x 16 mm, open at its middle plane."""
    return [face for face in box((0.0, y, 0.0)) if any(corner[1] != y for corner in face)]


def ball(centre: Point, radius: float, level: int = 2) -> list[Face]:
    """Geodesic ball: an octahedron's faces halved along each edge some times, its corners put at the radius."""
    ends = [(1.0, 0.0, 0.0), (0.0, 1.0, 0.0), (0.0, 0.0, 1.0)]
    faces: list[Face] = []
    for signs in ((x, y, z) for x in (1, -1) for y in (1, -1) for z in (1, -1)):
        a, b, c = (tuple(s * v for s, v in zip(signs, end, strict=True)) for end in ends)
        faces.append((a, b, c) if signs[0] * signs[1] * signs[2] > 0 else (a, c, b))  # type: ignore[arg-type]
    for _ in range(level):
        halved: list[Face] = []
        for a, b, c in faces:
            ab, bc, ca = (tuple((p + q) / 2 for p, q in zip(u, v, strict=True)) for u, v in ((a, b), (b, c), (c, a)))
            halved += [(a, ab, ca), (ab, b, bc), (ca, bc, c), (ab, bc, ca)]  # type: ignore[list-item]
        faces = halved
    return [tuple(_at_radius(p, centre, radius) for p in face) for face in faces]  # type: ignore[misc]


def _at_radius(point: Point, centre: Point, radius: float) -> Point:
    length = math.sqrt(sum(v * v for v in point))
    x, y, z = (c + radius * v / length for c, v in zip(centre, point, strict=True))
    return x, y, z


def moved_corner(faces: Sequence[Face], corner: Point, to: Point, only: int) -> list[Face]:
    """Faces of which the first few take a corner elsewhere: a crack."""
    made: list[Face] = []
    for face in faces:
        if corner in face and only > 0:
            only -= 1
            face = tuple(to if p == corner else p for p in face)  # type: ignore[assignment]
        made.append(face)
    return made


def stretched(text: str, name: str, value: str) -> str:
    """Text with the first number of its kind put in another's place."""
    return text.replace(name, value, 1)


def threemf(old: str, new: str) -> bytes:
    """Package of the box, with a part of its model's text put in another's place."""
    text = SOUND["model"](SOUND["object_"](1, SOUND["BOX"], "body"), SOUND["item"](1))
    assert old in text
    made: bytes = SOUND["package"](text.replace(old, new, 1))
    return made


def holders(depth: int, each: int) -> bytes:
    """Package of objects that each hold the one before several times: each to the power of depth boxes."""
    objects = SOUND["object_"](1, SOUND["BOX"], "body")
    for number in range(2, depth + 2):
        held = f'<component objectid="{number - 1}"/>' * each
        objects += SOUND["object_"](number, f"<components>{held}</components>", "holder")
    made: bytes = SOUND["package"](SOUND["model"](objects, SOUND["item"](depth + 1)))
    return made


def circular() -> bytes:
    """Package of two objects that hold each other."""
    objects = "".join(
        SOUND["object_"](n, f'<components><component objectid="{3 - n}"/></components>', "holder") for n in (1, 2)
    )
    made: bytes = SOUND["package"](SOUND["model"](objects, SOUND["item"](1)))
    return made


ENTITIES = (
    '<?xml version="1.0"?><!DOCTYPE model [<!ENTITY a "ha"><!ENTITY b "&a;&a;&a;&a;&a;&a;&a;&a;&a;&a;">'
    '<!ENTITY c "&b;&b;&b;&b;&b;&b;&b;&b;&b;&b;"><!ENTITY file SYSTEM "file:///etc/hostname">]>'
)


def box_ply(old: bytes, new: bytes, kind: str = "ascii") -> bytes:
    data: bytes = SOUND["ply"](kind)
    assert old in data
    return data.replace(old, new, 1)


def box_glb(nodes: list[dict[str, Any]] | None = None, **more: Any) -> bytes:
    made: bytes = SOUND["scene"](
        nodes or [{"mesh": 0}], SOUND["floats"](SOUND["METRES"]), 8, SOUND["shorts"](SOUND["TRIANGLES"]), **more
    )
    return made


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
    "in_inches.stl": lambda: binary(box(size=(3.94, 0.6, 0.8))),
    "half_body.stl": lambda: binary(half()),
    "small_hole.stl": lambda: binary([*box(), *ball((60.0, 5.0, 8.0), 6.0)[1:]]),
    "cracked.obj": lambda: loose_obj(moved_corner(box(), (40.0, 10.0, 16.0), (40.0005, 10.0, 16.0), 2)),
    "balls.stl": lambda: binary([f for k in range(3) for f in ball((8.0 * k, 0.0, 0.0), 3.0)]),
    "crossing_itself.stl": lambda: binary(bent_over()),
    "coarse.stl": lambda: binary(ball((0.0, 0.0, 0.0), 20.0, 1)),
    "denormal.obj": lambda: edited(box_obj(), 1, "v 0 0 5e-324"),
    "far_off.stl": lambda: binary(ball((1e6, 0.0, 0.0), 10.0)),
    "far_off_rounded.obj": lambda: box_obj().replace("v 40 ", "v 1000040 ").replace("v 0 ", "v 1000000 "),
    # Numbers beyond what a bait can be
    "far_out.stl": lambda: binary(with_corner(box(), 4, (1e30, 0.0, 0.0))),
    "far_out.obj": lambda: edited(box_obj(), 3, "v 0 1e300 0"),
    "nowhere_large.obj": lambda: box_obj().replace("40", "4e-12").replace("10", "1e-12").replace("16", "2e-12"),
    "grouped_digits.obj": lambda: edited(box_obj(), 3, "v 0 1_0 0"),
    # 3MF
    "empty_package.3mf": lambda: b"PK\x05\x06" + b"\0" * 18,
    "text_renamed.3mf": lambda: "Belly weight, second try.\n",
    "cut.3mf": lambda: threemf("body", "body")[:-200],
    "flipped_byte.3mf": lambda: flipped(threemf("body", "body"), 0.4),
    "entities.3mf": lambda: threemf('<?xml version="1.0" encoding="UTF-8"?>', ENTITIES),
    "no_relations.3mf": lambda: SOUND["package"]("").replace(b"_rels/.rels", b"_rels/.real"),
    "index_beyond.3mf": lambda: threemf('v3="3"', 'v3="8"'),
    "index_negative.3mf": lambda: threemf('v3="3"', 'v3="-1"'),
    "index_huge.3mf": lambda: threemf('v3="3"', 'v3="99999999999999999999"'),
    "not_a_number.3mf": lambda: threemf('x="40"', 'x="nan"'),
    "decimal_comma.3mf": lambda: threemf('x="40"', 'x="40,5"'),
    "grouped_digits.3mf": lambda: threemf('x="40"', 'x="4_0"'),
    "unit_unknown.3mf": lambda: threemf("millimeter", "furlong"),
    "extension_needed.3mf": lambda: threemf(
        "<model ",
        '<model xmlns:b="http://schemas.microsoft.com/3dmanufacturing/beamlattice/2017/02" requiredextensions="b" ',
    ),
    "object_missing.3mf": lambda: threemf('<item objectid="1"', '<item objectid="7"'),
    "bad_transform.3mf": lambda: threemf('<item objectid="1"', '<item objectid="1" transform="1 0 0"'),
    "no_mesh.3mf": lambda: SOUND["package"](SOUND["model"](SOUND["object_"](1, "", "body"), SOUND["item"](1))),
    "not_xml.3mf": lambda: threemf("</resources>", "</ressources>"),
    "components_without_end.3mf": circular,
    "components_by_the_million.3mf": lambda: holders(9, 10),
    "part_outside.3mf": lambda: SOUND["linked"]("/../../secret.model"),
    # PLY
    "cloud.ply": lambda: SOUND["ply"]("ascii", faces=[]),
    "cut.ply": lambda: SOUND["ply"]("binary_little_endian")[:-9],
    "cut_ascii.ply": lambda: SOUND["ply"]("ascii")[:-20],
    "four_billion.ply": lambda: box_ply(b"element vertex 8", b"element vertex 4000000000", "binary_little_endian"),
    "four_billion_ascii.ply": lambda: box_ply(b"element face 6", b"element face 4000000000"),
    "long_face.ply": lambda: long_face(),
    "index_beyond.ply": lambda: box_ply(b"4 4 5 7 6", b"4 4 5 7 8"),
    "no_header_end.ply": lambda: box_ply(b"end_header", b"and_header"),
    "odd_header.ply": lambda: box_ply(b"property float y", b"property flaot y"),
    "no_z.ply": lambda: box_ply(b"property float z", b"property float w"),
    "text_renamed.ply": lambda: "Belly weight, second try.\n",
    # OFF
    "cut.off": lambda: SOUND["off"]()[:-20],
    "index_beyond.off": lambda: SOUND["off"]().replace("4 4 5 7 6", "4 4 5 7 8"),
    "four_dimensions.off": lambda: SOUND["off"]("4OFF"),
    "text_renamed.off": lambda: "Belly weight, second try.\n",
    "negative_count.off": lambda: SOUND["off"]().replace("8 6 12", "-8 6 12"),
    # GLB
    "cut.glb": lambda: box_glb()[:-40],
    "text_renamed.glb": lambda: "Belly weight, second try.\n",
    "not_json.glb": lambda: box_glb().replace(b'"asset"', b"'asset'"),
    "index_beyond.glb": lambda: box_glb().replace(SOUND["shorts"]([(0, 3, 1)]), SOUND["shorts"]([(0, 3, 9)])),
    "beyond_buffer.glb": lambda: box_glb().replace(b'"count": 36', b'"count": 99'),
    "other_file.glb": lambda: box_glb(buffers=[{"byteLength": 168, "uri": "../../secret.bin"}]),
    "compressed.glb": lambda: box_glb(extensionsRequired=["KHR_draco_mesh_compression"]),
    "nodes_without_end.glb": lambda: box_glb([{"children": [1]}, {"children": [2]}, {"children": [1], "mesh": 0}]),
    "no_mesh.glb": lambda: SOUND["glb"]({"asset": {"version": "2.0"}, "nodes": [{}]}, b""),
    # STEP
    "text_renamed.step": lambda: "Belly weight, second try.\n",
}


def loose_obj(faces: Sequence[Face]) -> str:
    points = [corner for face in faces for corner in face]
    lines = [f"v {x:.7g} {y:.7g} {z:.7g}" for x, y, z in points]
    return "\n".join([*lines, *(f"f {3 * k + 1} {3 * k + 2} {3 * k + 3}" for k in range(len(faces))), ""])


def flipped(data: bytes, share: float) -> bytes:
    """Bytes of which one, at a share of the length, has all its bits turned."""
    at = int(share * len(data))
    return data[:at] + bytes([data[at] ^ 0xFF]) + data[at + 1 :]


def long_face() -> bytes:
    """Binary PLY whose first face says that it has 4,000,000,000 corners."""
    data: bytes = SOUND["ply"]("binary_little_endian")
    data = data.replace(b"property list uchar int", b"property list uint int")
    start = data.index(b"end_header") + 11 + 8 * 12
    return data[:start] + struct.pack("<I", 4_000_000_000) + data[start + 1 :]


def bent_over() -> list[Face]:
    """A square tube, 4 mm wide, bent in a flat spiral of one and a quarter turns, so that it runs through itself."""
    rings = []
    for k in range(61):
        turn = 2.5 * math.pi * k / 60
        away, up = (math.cos(turn), math.sin(turn)), 0.04 * k
        rings.append(
            [(r * away[0], r * away[1], up + z) for r, z in ((12.0, -2.0), (16.0, -2.0), (16.0, 2.0), (12.0, 2.0))]
        )
    faces: list[Face] = []
    for ring, after in pairwise(rings):
        for i in range(4):
            a, b, c, d = ring[i], ring[(i + 1) % 4], after[(i + 1) % 4], after[i]
            faces += [(a, c, b), (a, d, c)]
    for (a, b, c, d), ahead in ((rings[0], False), (rings[-1], True)):
        faces += [(a, c, d), (a, b, c)] if not ahead else [(a, d, c), (a, c, b)]
    return faces


def bait(body: str, *sections: str, density: str = "1.2 g/cm3", nose: str = "-x", back: str = "+z") -> str:
    """Bait file of a body of this folder."""
    head = f'name = "Quarry pond trial"\nlength_unit = "mm"\nnose = "{nose}"\nback = "{back}"'
    stated = f'"{density}"' if " " in density else density
    return "\n".join(["format = 1", "[bait]", head, "[body]", f'mesh = "{body}"', f"density = {stated}", *sections, ""])


def insert(name: str, mesh: str, *keys: str) -> str:
    return "\n".join(["[[insert]]", f'name = "{name}"', f'mesh = "{mesh}"', *keys])


BOX, LEAD = "solid_but_binary.stl", 'material = "lead"'

BAITS: dict[str, Callable[[], str]] = {
    "read_in_mm.toml": lambda: bait("in_inches.stl"),
    "weight_pokes_out.toml": lambda: bait(BOX, insert("tail weight", "weight_at_end.stl", LEAD)),
    "weights_overlap.toml": lambda: bait(
        BOX, insert("front weight", "weight.stl", LEAD), insert("rear weight", "weight_beside.stl", LEAD)
    ),
    "shrunk_twice.toml": lambda: bait(
        BOX, '[mould]\nshrink = { print = "0.2 %", silicone = "0.3 %", resin = "0.4 %" }', density="1.1 g/cm3"
    ),
    "bare_density.toml": lambda: bait(BOX, density="0.75"),
    "density_in_the_wrong_unit.toml": lambda: bait(BOX, density="0.75 kg/m3"),
    "density_below_zero.toml": lambda: bait(BOX, density="-0.75 g/cm3"),
    "slipped_digit.toml": lambda: bait(BOX, insert("lead weight", "weight.stl", 'density = "1134 kg/m3"')),
    "pounds_per_cubic_inch.toml": lambda: bait(BOX, insert("lead weight", "weight.stl", 'density = "0.41 lb/in3"')),
    "half_closed.toml": lambda: bait("half_closed.stl", density="0.6 g/cm3"),
    "nose_across.toml": lambda: bait(BOX, nose="+z", back="+x"),
    "upside_down.toml": lambda: bait("long_ball.stl", insert("keel", "keel.stl", LEAD), density="0.6 g/cm3", back="-z"),
    "pocket_closed.toml": lambda: bait("cavity.stl", insert("weight", "weight_in_cavity.stl", LEAD)),
    "pocket_open.toml": lambda: bait("trough.obj", insert("keel", "keel_in_trough.stl", LEAD), nose="+z", back="+y"),
    "coarse.toml": lambda: bait("coarse.stl"),
    "balls_as_mesh.toml": lambda: bait(
        "rattle_body.stl",
        insert("rattle chamber", "bore.stl", 'void = "sealed"'),
        insert("rattle", "balls.stl", 'material = "bearing steel"'),
    ),
    "balls_stated.toml": lambda: bait(
        "rattle_body.stl",
        insert("rattle chamber", "bore.stl", 'void = "sealed"'),
        '[[balls]]\nchamber = "rattle chamber"\ndiameter = "6 mm"\ncount = 1\nmaterial = "bearing steel"',
    ),
    "bare_ounces.toml": lambda: bait(
        BOX, '[[hardware]]\nname = "front hook"\nmass = 0.5\nat = [10.0, 5.0, 0.0]\nhangs = true'
    ),
}
"""Bait files of this folder: of the mistakes that are made in what is stated of a mesh, not in the mesh."""


def half_spindle() -> list[Face]:
    """Left half of an ellipsoid of half axes 30, 8 and 10 mm, closed by its middle plane."""
    stretch = (30.0, 8.0, 10.0)
    skin = [face for face in ball((0.0, 0.0, 0.0), 1.0, 3) if min(corner[1] for corner in face) >= 0]
    made: list[Face] = []
    for a, b, c in skin:
        made.append((a, b, c))
        for p, q in ((a, b), (b, c), (c, a)):
            if p[1] == 0 and q[1] == 0:
                made.append(((0.0, 0.0, 0.0), q, p))
    return [stretched_face(face, stretch) for face in made]


def stretched_face(face: Face, stretch: Point) -> Face:
    a, b, c = ((x * stretch[0], y * stretch[1], z * stretch[2]) for x, y, z in face)
    return a, b, c


TROUGH = [(0.0, 0.0), (3.0, 0.0), (3.0, 6.0), (7.0, 6.0), (7.0, 0.0), (10.0, 0.0), (10.0, 16.0), (0.0, 16.0)]
"""mm. A body's section with an open slot of 4 x 6 mm from below."""

PIECES: dict[str, Callable[[], bytes | str]] = {
    "weight.stl": lambda: binary(box((10.0, 3.0, 3.0), (5.0, 4.0, 4.0))),
    "weight_beside.stl": lambda: binary(box((13.0, 3.0, 3.0), (5.0, 4.0, 4.0))),
    "weight_at_end.stl": lambda: binary(box((35.0, 3.0, 3.0), (9.0, 4.0, 4.0))),
    "weight_in_cavity.stl": lambda: binary(box((11.0, 3.5, 4.5), (18.0, 3.0, 7.0))),
    "half_closed.stl": lambda: binary(half_spindle()),
    "long_ball.stl": lambda: binary([stretched_face(f, (30.0, 9.0, 9.0)) for f in ball((0.0, 0.0, 0.0), 1.0, 3)]),
    "keel.stl": lambda: binary(box((-5.0, -2.0, -8.0), (10.0, 4.0, 2.0))),
    "trough.obj": lambda: prism(TROUGH, 40.0),
    "keel_in_trough.stl": lambda: binary(box((3.25, 0.5, 5.0), (3.5, 5.25, 30.0))),
    "rattle_body.stl": lambda: binary(box((-8.0, -6.0, -6.0), (36.0, 12.0, 12.0))),
    "bore.stl": lambda: binary(box((-3.5, -3.5, -3.5), (23.0, 7.0, 7.0))),
}
"""Meshes that are sound by themselves, for these bait files."""


def content(name: str) -> bytes:
    made = (FILES | BAITS | PIECES)[name]()
    return made if isinstance(made, bytes) else made.encode("ascii")


def main() -> None:
    for name in FILES | BAITS | PIECES:
        (HERE / name).write_bytes(content(name))


if __name__ == "__main__":
    main()
