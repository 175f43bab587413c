"""Makes the small mesh files of this folder, one thing that its format can do each: `python tests/formats/build.py`.

The bytes are put together by hand from the formats' published layouts, so that nothing of the readers is in their
tests: 3MF Core Specification 1.2 and Production Extension 1.1 (XML in a zip package), PLY 1.0 (Turk 1994), OFF (the
Geomview manual), glTF 2.0 (GLB container). The STEP files come from a B-rep kernel (`pip install ".[brep]"`) and are
made only where that is installed; they are stored, since the kernel dates what it writes.
"""

from __future__ import annotations

import io
import json
import struct
import zipfile
from collections.abc import Callable, Sequence
from pathlib import Path
from typing import Any

Point = tuple[float, float, float]

HERE = Path(__file__).parent
SIZE = (40.0, 10.0, 16.0)
"""The box that most files hold: 6,400 in the cube of the file's unit."""

CORNERS: list[Point] = [tuple(SIZE[k] if n >> k & 1 else 0.0 for k in range(3)) for n in range(8)]  # type: ignore[misc]
QUADS = [(0, 2, 3, 1), (4, 5, 7, 6), (0, 1, 5, 4), (2, 6, 7, 3), (0, 4, 6, 2), (1, 3, 7, 5)]
TRIANGLES = [(q[0], q[i], q[i + 1]) for q in QUADS for i in (1, 2)]

L_SHAPE = [(0.0, 0.0), (30.0, 0.0), (30.0, 4.0), (6.0, 4.0), (6.0, 20.0), (0.0, 20.0)]
"""216 by the shoelace formula; a prism of 10 over it has 2,160."""

TETRA: list[Point] = [(0.0, 0.0, 0.0), (10.0, 0.0, 0.0), (0.0, 9.0, 0.0), (0.0, 0.0, 5.0)]
TETRA_FACES = [(0, 2, 1), (0, 1, 3), (0, 3, 2), (1, 2, 3)]
"""10 x 9 x 5 / 6 = 75."""

# 3MF

CORE = "http://schemas.microsoft.com/3dmanufacturing/core/2015/02"
PRODUCTION = "http://schemas.microsoft.com/3dmanufacturing/production/2015/06"
TYPES = (
    '<?xml version="1.0"?><Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types">'
    '<Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/>'
    '<Default Extension="model" ContentType="application/vnd.ms-package.3dmanufacturing-3dmodel+xml"/></Types>'
)
RELATIONS = (
    '<?xml version="1.0"?><Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships">'
    '<Relationship Target="/3D/3dmodel.model" Id="r0" '
    'Type="http://schemas.microsoft.com/3dmanufacturing/2013/01/3dmodel"/></Relationships>'
)


def mesh(points: Sequence[Point], faces: Sequence[Sequence[int]]) -> str:
    vertices = "".join(f'<vertex x="{x:g}" y="{y:g}" z="{z:g}"/>' for x, y, z in points)
    triangles = "".join(f'<triangle v1="{a}" v2="{b}" v3="{c}"/>' for a, b, c in faces)
    return f"<mesh><vertices>{vertices}</vertices><triangles>{triangles}</triangles></mesh>"


BOX = mesh(CORNERS, TRIANGLES)
TETRAHEDRON = mesh(TETRA, TETRA_FACES)


def item(number: int, transform: str = "", more: str = "") -> str:
    placed = f' transform="{transform}"' if transform else ""
    return f'<item objectid="{number}"{placed}{more}/>'


def object_(number: int, content: str, name: str = "", kind: str = "model") -> str:
    return f'<object id="{number}" type="{kind}" name="{name}">{content}</object>'


def model(objects: str, items: str, unit: str = "millimeter", more: str = "") -> str:
    return (
        f'<?xml version="1.0" encoding="UTF-8"?>\n<model unit="{unit}" xml:lang="en-US" xmlns="{CORE}"{more}>\n'
        f"<resources>{objects}</resources>\n<build>{items}</build>\n</model>\n"
    )


def package(root: str | bytes, **parts: str | bytes) -> bytes:
    """Zip package with a model, and further parts by their paths with underscores for slashes and dots."""
    paper = io.BytesIO()
    named = {"[Content_Types].xml": TYPES, "_rels/.rels": RELATIONS, "3D/3dmodel.model": root, **parts}
    with zipfile.ZipFile(paper, "w", zipfile.ZIP_DEFLATED) as file:
        for name, content in named.items():
            # Dated 1980, so that the same content makes the same bytes.
            file.writestr(zipfile.ZipInfo(name), content, zipfile.ZIP_DEFLATED)
    return paper.getvalue()


HOLDER = (
    '<components><component objectid="1"/><component objectid="2" transform="1 0 0 0 1 0 0 0 1 60 0 0"/></components>'
)
LINKED = f' xmlns:p="{PRODUCTION}" requiredextensions="p"'


def linked(path: str) -> bytes:
    """Package whose box stands in a model part of its own."""
    numbers = [f' p:UUID="0000000{n}-0000-4000-8000-000000000000"' for n in range(6)]
    part = model(object_(1, BOX, "body").replace("<object ", f"<object{numbers[0]} "), "", more=LINKED)
    component = f'<component{numbers[1]} p:path="{path}" objectid="1"/>'
    holder = object_(8, f"<components>{component}</components>", "bait").replace("<object ", f"<object{numbers[2]} ")
    root = model(holder, item(8, more=numbers[3]), more=LINKED).replace("<build>", f"<build{numbers[4]}>")
    relations = RELATIONS.replace("/3D/3dmodel.model", path)
    return package(root, **{"3D/_rels/3dmodel.model.rels": relations, "3D/Objects/object_1.model": part})


# PLY


def ply(kind: str, number: str = "float", faces: Sequence[Sequence[int]] = QUADS, more: bool = False) -> bytes:
    """PLY of the box; `more` puts colours on vertices, a list before the faces, and a mark on each face."""
    order = {"ascii": "", "binary_little_endian": "<", "binary_big_endian": ">"}[kind]
    head = ["ply", f"format {kind} 1.0", "comment made by hand", f"element vertex {len(CORNERS)}"]
    head += [f"property {number} {axis}" for axis in "xyz"] + (["property uchar red"] if more else [])
    if more:
        head += ["element strand 2", "property list uchar short beads", "property float width"]
    head += [f"element face {len(faces)}"] + (["property uchar mark"] if more else [])
    head += ["property list uchar int vertex_indices", "end_header", ""]
    letter = {"float": "f", "double": "d"}[number]
    rows: list[tuple[str, tuple[Any, ...]]] = [
        (f"3{letter}" + "B" * more, (*point, *([200] * more))) for point in CORNERS
    ]
    if more:
        rows += [("B3hf", (3, 7, 8, 9, 0.5)), ("Bf", (0, 0.25))]
    rows += [("B" * more + f"B{len(face)}i", (*([1] * more), len(face), *face)) for face in faces]
    if order:
        return "\n".join(head).encode() + b"".join(struct.pack(order + form, *values) for form, values in rows)
    return ("\n".join(head) + "".join(" ".join(f"{v:g}" for v in values) + "\n" for _, values in rows)).encode()


# OFF


def off(head: str = "OFF", colours: bool = False, remark: bool = False) -> str:
    lines = [head, *(["# a box, by hand", ""] if remark else []), f"{len(CORNERS)} {len(QUADS)} 12"]
    lines += [" ".join(f"{v:g}" for v in point) + (" 0.5 0.5 0.5 1" if colours else "") for point in CORNERS]
    lines += [f"4 {' '.join(map(str, quad))}" + (" 255 0 0" if colours else "") for quad in QUADS]
    return "\n".join([*lines, ""])


def prism_off() -> str:
    """Prism over the L, its ends one concave polygon each."""
    n = len(L_SHAPE)
    points = [(x, y, z) for z in (0.0, 10.0) for x, y in L_SHAPE]
    polygons = [tuple(range(n - 1, -1, -1)), tuple(range(n, 2 * n))]
    polygons += [(i, (i + 1) % n, (i + 1) % n + n, i + n) for i in range(n)]
    lines = [f"OFF {len(points)} {len(polygons)} 0", *(" ".join(f"{v:g}" for v in p) for p in points)]
    lines += [f"{len(p)} {' '.join(map(str, p))}" for p in polygons]
    return "\n".join([*lines, ""])


# GLB

METRES: list[Point] = [(x / 1000, y / 1000, z / 1000) for x, y, z in CORNERS]


def glb(tree: dict[str, Any], binary: bytes) -> bytes:
    said = json.dumps(tree).encode()
    said += b" " * (-len(said) % 4)
    binary += b"\0" * (-len(binary) % 4)
    chunks = struct.pack("<2I", len(said), 0x4E4F534A) + said
    if binary:
        chunks += struct.pack("<2I", len(binary), 0x004E4942) + binary
    return b"glTF" + struct.pack("<2I", 2, 12 + len(chunks)) + chunks


def scene(
    nodes: Sequence[dict[str, Any]],
    points: bytes,
    count: int,
    indices: bytes = b"",
    how: dict[str, Any] | None = None,
    kind: int = 5126,
    stride: int = 12,
    **more: Any,
) -> bytes:
    """GLB of one mesh: its points, its indices as bytes of 16-bit numbers, and nodes that hold it."""
    start = len(points) + -len(points) % 4
    views = [{"buffer": 0, "byteOffset": 0, "byteLength": len(points), "byteStride": stride}]
    tables: list[dict[str, Any]] = [{"bufferView": 0, "componentType": kind, "count": count, "type": "VEC3"}]
    primitive: dict[str, Any] = {"attributes": {"POSITION": 0}, **(how or {})}
    if indices:
        views.append({"buffer": 0, "byteOffset": start, "byteLength": len(indices)})
        tables.append({"bufferView": 1, "componentType": 5123, "count": len(indices) // 2, "type": "SCALAR"})
        primitive["indices"] = 1
    if kind != 5126:
        tables[0]["normalized"] = True
    held = {child for node in nodes for child in node.get("children", [])}
    tree = {
        "asset": {"version": "2.0"},
        "scene": 0,
        "scenes": [{"nodes": [n for n in range(len(nodes)) if n not in held]}],
        "nodes": list(nodes),
        "meshes": [{"name": "box", "primitives": [primitive]}],
        "accessors": tables,
        "bufferViews": views,
        "buffers": [{"byteLength": start + len(indices)}],
        **more,
    }
    return glb(tree, points.ljust(start, b"\0") + indices)


def floats(points: Sequence[Point]) -> bytes:
    return b"".join(struct.pack("<3f", *point) for point in points)


def shorts(faces: Sequence[Sequence[int]]) -> bytes:
    return b"".join(struct.pack(f"<{len(face)}H", *face) for face in faces)


QUARTER = 0.7071067811865476
"""Sine and cosine of 45 degrees: a quaternion's for a quarter turn."""

PLACED: list[dict[str, Any]] = [
    {"children": [1, 2], "translation": [0.1, 0.0, 0.0], "scale": [1.0, 1.0, 1.0]},
    # A quarter turn about z, twice as long along x: 12,800 mm3.
    {"mesh": 0, "name": "stretched", "rotation": [0.0, 0.0, QUARTER, QUARTER], "scale": [2.0, 1.0, 1.0]},
    # Mirrored in x and 0.1 m off, column by column: 6,400 mm3.
    {"mesh": 0, "name": "mirrored", "matrix": [-1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1, 0, 0.2, 0, 0, 1]},
]

STRIP = [0, 2, 1, 3]
"""The box's bottom as a strip of two triangles, turning as the face does."""


def stripped() -> bytes:
    """Box of five faces as triangles and one as a strip, in one mesh of two primitives."""
    first = shorts(TRIANGLES[2:])
    strip = shorts([STRIP])
    points = floats(METRES)
    views = [
        {"buffer": 0, "byteOffset": 0, "byteLength": len(points)},
        {"buffer": 0, "byteOffset": len(points), "byteLength": len(first)},
        {"buffer": 0, "byteOffset": len(points) + len(first), "byteLength": len(strip)},
    ]
    tables = [
        {"bufferView": 0, "componentType": 5126, "count": 8, "type": "VEC3"},
        {"bufferView": 1, "componentType": 5123, "count": len(first) // 2, "type": "SCALAR"},
        {"bufferView": 2, "componentType": 5123, "count": 4, "type": "SCALAR"},
    ]
    primitives = [
        {"attributes": {"POSITION": 0}, "indices": 1},
        {"attributes": {"POSITION": 0}, "indices": 2, "mode": 5},
    ]
    tree = {
        "asset": {"version": "2.0"},
        "nodes": [{"mesh": 0}],
        "meshes": [{"primitives": primitives}],
        "accessors": tables,
        "bufferViews": views,
        "buffers": [{"byteLength": len(points) + len(first) + len(strip)}],
    }
    return glb(tree, points + first + strip)


def quantized() -> bytes:
    """The box by shares of 32,767 along each axis, brought to its size by the node (KHR_mesh_quantization)."""
    points = b"".join(struct.pack("<3hxx", *(32767 if c else 0 for c in point)) for point in CORNERS)
    nodes = [{"mesh": 0, "scale": [0.04, 0.01, 0.016]}]
    needed = ["KHR_mesh_quantization"]
    return scene(nodes, points, 8, shorts(TRIANGLES), kind=5122, stride=8, extensionsRequired=needed)


FILES: dict[str, Callable[[], bytes | str]] = {
    "box.3mf": lambda: package(model(object_(1, BOX, "body"), item(1))),
    "inch.3mf": lambda: package(model(object_(1, BOX, "body"), item(1), "inch")),
    # Twice as large, a quarter turn about z, moved: 8 x 6,400; row vectors, so x goes to y.
    "turned.3mf": lambda: package(model(object_(1, BOX, "body"), item(1, "0 2 0 -2 0 0 0 0 2 100 0 7"))),
    "mirrored.3mf": lambda: package(model(object_(1, BOX, "body"), item(1, "-1 0 0 0 1 0 0 0 1 0 0 0"))),
    "two_objects.3mf": lambda: package(
        model(
            object_(1, BOX, "body") + object_(2, TETRAHEDRON, "belly weight"),
            item(1) + item(2, "1 0 0 0 1 0 0 0 1 60 0 0"),
        )
    ),
    # One object put together of two, built twice: 2 x (6,400 + 75).
    "components.3mf": lambda: package(
        model(
            object_(1, BOX, "body") + object_(2, TETRAHEDRON, "weight") + object_(3, HOLDER, "bait"),
            item(3) + item(3, "1 0 0 0 1 0 0 0 1 0 50 0"),
        )
    ),
    # The mesh in a part of its own, as programs that slice for printing write it.
    "other_part.3mf": lambda: linked("/3D/Objects/object_1.model"),
    "nothing_to_build.3mf": lambda: package(model(object_(1, BOX, "body"), "")),
    "supported.3mf": lambda: package(
        model(object_(1, BOX, "body") + object_(2, TETRAHEDRON, "prop", "support"), item(1) + item(2))
    ),
    "ascii.ply": lambda: ply("ascii"),
    "little.ply": lambda: ply("binary_little_endian"),
    "big_double.ply": lambda: ply("binary_big_endian", "double"),
    "triangles.ply": lambda: ply("binary_little_endian", faces=TRIANGLES),
    "mixed.ply": lambda: ply("binary_big_endian", faces=[*QUADS[:3], *TRIANGLES[6:]]),
    "more.ply": lambda: ply("binary_little_endian", more=True),
    "more_ascii.ply": lambda: ply("ascii", more=True),
    "box.off": lambda: off(),
    "colours.off": lambda: off("COFF", colours=True),
    "remarks.off": lambda: off(remark=True).replace("\n", "\r\n"),
    "concave.off": prism_off,
    "box.glb": lambda: scene([{"mesh": 0}], floats(METRES), 8, shorts(TRIANGLES)),
    "placed.glb": lambda: scene(PLACED, floats(METRES), 8, shorts(TRIANGLES)),
    "loose.glb": lambda: scene([{"mesh": 0}], floats([METRES[k] for face in TRIANGLES for k in face]), 36),
    "strip.glb": stripped,
    "quantized.glb": quantized,
}

STEPS = ("ball.step", "two_inch.step")


def content(name: str) -> bytes:
    made = FILES[name]()
    return made if isinstance(made, bytes) else made.encode("ascii")


def steps() -> None:
    """Write the STEP files: a ball of 10 mm, and in inches a block with a bore beside a named ball."""
    from OCP.BRep import BRep_Builder
    from OCP.BRepAlgoAPI import BRepAlgoAPI_Cut
    from OCP.BRepPrimAPI import BRepPrimAPI_MakeBox, BRepPrimAPI_MakeCylinder, BRepPrimAPI_MakeSphere
    from OCP.gp import gp_Ax2, gp_Dir, gp_Pnt
    from OCP.Interface import Interface_Static
    from OCP.STEPControl import STEPControl_AsIs, STEPControl_Writer
    from OCP.TopoDS import TopoDS_Compound

    ball = BRepPrimAPI_MakeSphere(gp_Pnt(1, 2, 3), 5.0).Shape()
    bore = BRepPrimAPI_MakeCylinder(gp_Ax2(gp_Pnt(5, 5, -1), gp_Dir(0, 0, 1)), 2.0, 32.0).Shape()
    block = BRepAlgoAPI_Cut(BRepPrimAPI_MakeBox(10.0, 10.0, 30.0).Shape(), bore).Shape()
    builder, both = BRep_Builder(), TopoDS_Compound()
    builder.MakeCompound(both)
    builder.Add(both, block)
    builder.Add(both, BRepPrimAPI_MakeSphere(gp_Pnt(40, 0, 0), 3.0).Shape())
    for name, shape, unit in (("ball.step", ball, "MM"), ("two_inch.step", both, "INCH")):
        writer = STEPControl_Writer()
        Interface_Static.SetCVal_s("write.step.unit", unit)
        writer.Transfer(shape, STEPControl_AsIs)
        writer.Write(str(HERE / name))


def main() -> None:
    for name in FILES:
        (HERE / name).write_bytes(content(name))
    try:
        steps()
    except ImportError:
        print("the STEP files stay as they are: no B-rep kernel is installed")


if __name__ == "__main__":
    main()
